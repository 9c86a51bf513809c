/* Opening, measuring and reading the window. */
#include "view/window.h"

#include <epoxy/gl.h>
#include <string.h>

static bool refuse(ev_window *window, ev_diagnostics *diagnostics, const char *what)
{
    ev_diagnose(diagnostics, EV_SEVERITY_ERROR, "window", NULL,
                "%s (%s). The window needs OpenGL 3.3; the packaged software driver "
                "(libgl1-mesa-dri) has it.",
                what, SDL_GetError());
    ev_window_close(window);
    return false;
}

static bool can_be_seen(const char *driver)
{
    return driver && strcmp(driver, "offscreen") != 0 && strcmp(driver, "dummy") != 0;
}

/* Only the drivers that can work here: asking for others makes their libraries complain. */
static void choose_drivers(void)
{
    if (!SDL_getenv("WAYLAND_DISPLAY")) {
        SDL_SetHint(SDL_HINT_VIDEODRIVER, SDL_getenv("DISPLAY") ? "x11,offscreen" : "offscreen");
    }
}

static bool start_video(bool unseen, ev_diagnostics *diagnostics)
{
    choose_drivers();
    SDL_SetHint(SDL_HINT_VIDEO_X11_NET_WM_BYPASS_COMPOSITOR, "0");
    SDL_SetHint(SDL_HINT_MOUSE_FOCUS_CLICKTHROUGH, "1");
    bool started = SDL_Init(SDL_INIT_VIDEO) == 0;
    if (started && (unseen || can_be_seen(SDL_GetCurrentVideoDriver()))) {
        return true;
    }
    SDL_Quit();
    ev_diagnose(diagnostics, EV_SEVERITY_ERROR, "no_display", NULL,
                "There is no display to open a window on. Start evenpath in a desktop session, or "
                "use `evenpath picture SCENE OUT.png` and `evenpath budget SCENE`, which need "
                "none.");
    return false;
}

static void ask_for_core_profile(void)
{
    SDL_GL_SetAttribute(SDL_GL_CONTEXT_PROFILE_MASK, SDL_GL_CONTEXT_PROFILE_CORE);
    SDL_GL_SetAttribute(SDL_GL_CONTEXT_MAJOR_VERSION, 3);
    SDL_GL_SetAttribute(SDL_GL_CONTEXT_MINOR_VERSION, 3);
    SDL_GL_SetAttribute(SDL_GL_DEPTH_SIZE, 24);
    SDL_GL_SetAttribute(SDL_GL_DOUBLEBUFFER, 1);
}

bool ev_window_open(ev_window *window, int width, int height, bool unseen,
                    ev_diagnostics *diagnostics)
{
    *window = (ev_window){0};
    if (!start_video(unseen, diagnostics)) {
        return false;
    }
    ask_for_core_profile();
    SDL_GL_LoadLibrary(NULL); /* once more than windows do, so that it stays */
    window->window =
        SDL_CreateWindow("evenpath", SDL_WINDOWPOS_CENTERED, SDL_WINDOWPOS_CENTERED, width, height,
                         SDL_WINDOW_OPENGL | SDL_WINDOW_RESIZABLE | SDL_WINDOW_ALLOW_HIGHDPI);
    if (!window->window) {
        return refuse(window, diagnostics, "The window cannot be opened");
    }
    SDL_SetWindowMinimumSize(window->window, EV_WINDOW_LEAST_WIDTH, EV_WINDOW_LEAST_HEIGHT);
    window->context = SDL_GL_CreateContext(window->window);
    if (!window->context || epoxy_gl_version() < 33) {
        return refuse(window, diagnostics, "The display has no OpenGL 3.3");
    }
    SDL_GL_SetSwapInterval(0); /* paced by events */
    SDL_EventState(SDL_DROPFILE, SDL_ENABLE);
    ev_window_measure(window);
    return true;
}

void ev_window_close(ev_window *window)
{
    for (int i = 0; i < SDL_NUM_SYSTEM_CURSORS; ++i) {
        if (window->cursors[i]) {
            SDL_FreeCursor(window->cursors[i]);
        }
    }
    if (window->context) {
        SDL_GL_DeleteContext(window->context);
    }
    if (window->window) {
        SDL_DestroyWindow(window->window);
    }
    *window = (ev_window){0};
    /* SDL itself ends with the process: it would unload the driver, and what the driver keeps to
     * itself would look like a leak of ours */
}

void ev_window_resize(ev_window *window, int width, int height)
{
    SDL_SetWindowSize(window->window, width, height);
    ev_window_measure(window);
}

void ev_window_measure(ev_window *window)
{
    int width = 0, height = 0;
    SDL_GetWindowSize(window->window, &width, &height);
    SDL_GL_GetDrawableSize(window->window, &window->pixel_width, &window->pixel_height);
    window->width = width;
    window->height = height;
    window->scale = width > 0 ? (double)window->pixel_width / width : 1.0;
}

void ev_window_cursor(ev_window *window, SDL_SystemCursor shape)
{
    if (!window->cursors[shape]) {
        window->cursors[shape] = SDL_CreateSystemCursor(shape);
    }
    if (window->cursors[shape] && SDL_GetCursor() != window->cursors[shape]) {
        SDL_SetCursor(window->cursors[shape]);
    }
}

void ev_window_title(ev_window *window, const char *scene)
{
    char title[240];
    SDL_snprintf(title, sizeof title, "%s%sevenpath", scene, *scene ? " - " : "");
    SDL_SetWindowTitle(window->window, title);
}

cairo_surface_t *ev_window_grab(const ev_window *window)
{
    int width = window->pixel_width, height = window->pixel_height;
    cairo_surface_t *surface = cairo_image_surface_create(CAIRO_FORMAT_RGB24, width, height);
    if (cairo_surface_status(surface) != CAIRO_STATUS_SUCCESS) {
        cairo_surface_destroy(surface);
        return NULL;
    }
    unsigned char *pixels = cairo_image_surface_get_data(surface);
    int stride = cairo_image_surface_get_stride(surface);
    for (int row = 0; row < height; ++row) { /* GL counts rows from the bottom */
        glReadPixels(0, height - 1 - row, width, 1, GL_BGRA, GL_UNSIGNED_INT_8_8_8_8_REV,
                     pixels + (ptrdiff_t)row * stride);
    }
    cairo_surface_mark_dirty(surface);
    return surface;
}
