/* The window from opening to closing. */
#include "view/view.h"

#include "base/text.h"
#include "view/events.h"
#include "view/replay.h"
#include "view/state.h"

#include <omp.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

static const double notice_seconds = 6.0;

void ev_view_notice(ev_view *view, const char *text)
{
    ev_text_copy(view->notice, sizeof view->notice, text);
    view->notice_until = view->now + notice_seconds;
    view->dirty = true;
}

/* A newly opened scene starts with nothing in hand. */
static void show_scene(ev_view *view)
{
    view->zoom = 1.0;
    view->pan_x = view->pan_y = 0.0;
    view->camera = ev_default_camera();
    view->camera_kept = false;
    view->grabbed = view->editing = -1;
    view->row_count = 0;
    view->drag = (ev_drag){0};
    ev_showing_leave(view);
    ev_drawer_close(view);
    ev_finder_close(view);
    view->asked = NULL;
    view->pointed[0] = view->notice[0] = '\0';
    view->dirty = true;
}

bool ev_view_open_scene(ev_view *view, const char *path)
{
    char text[160];
    ev_diagnostics *diagnostics = malloc(sizeof *diagnostics);
    if (!diagnostics) {
        return false;
    }
    ev_diagnostics_init(diagnostics);
    ev_strip_leave(view, false);
    bool good = ev_model_open(&view->model, path, NULL, 0, diagnostics);
    if (good) {
        show_scene(view);
        ev_window_title(&view->window, view->model.design.title);
    } else {
        const ev_diagnostic *first = &diagnostics->items[0];
        snprintf(text, sizeof text, "Not opened: %s%s%d: %s", first->file ? first->file : path, ":",
                 first->line, first->text);
        ev_showing_leave(view);
        ev_view_notice(view, text);
    }
    ev_diagnostics_clear(diagnostics);
    free(diagnostics);
    return good;
}

void ev_view_tick(ev_view *view)
{
    if (ev_model_fetch(&view->model)) {
        view->dirty = true;
    }
    if (view->model.message[0]) {
        ev_view_notice(view, view->model.message);
        view->model.message[0] = '\0';
    }
    if (view->notice[0] && view->now > view->notice_until) {
        view->notice[0] = '\0';
        view->dirty = true;
    }
    ev_model_ask(&view->model, ev_view_moving(view));
}

static int wait_ms(const ev_view *view)
{
    if (view->dirty) {
        return 0;
    }
    double left = view->notice[0] ? view->notice_until - view->now : 1.0;
    return left < 0.01 ? 10 : left > 1.0 ? 1000 : (int)(1000.0 * left);
}

static void run_window(ev_view *view)
{
    view->dirty = true;
    while (!view->leaving) {
        ev_events_handle(view, wait_ms(view), false);
        view->now = (double)SDL_GetTicks64() * 1e-3;
        ev_view_tick(view);
        if (view->dirty) {
            ev_view_frame(view);
            ev_view_tick(view); /* new numbers may ask for new words */
        }
    }
}

static bool fail(ev_view *view, int code)
{
    view->exit_code = code;
    return false;
}

static bool start_scene(ev_view *view)
{
    const ev_view_options *options = view->options;
    if (!ev_model_start(&view->model)) {
        ev_diagnose(view->diagnostics, EV_SEVERITY_ERROR, "memory", NULL,
                    "There is no memory for the window's numbers.");
        return fail(view, 3);
    }
    if (!options->scene) {
        ev_gallery_load(&view->gallery, options->examples);
    } else if (!ev_model_open(&view->model, options->scene, options->assignments,
                              options->assignment_count, view->diagnostics)) {
        return fail(view, 2);
    }
    show_scene(view);
    return true;
}

static bool start_window(ev_view *view)
{
    const ev_view_options *options = view->options;
    int width = options->width > 0 ? options->width : 1280;
    int height = options->height > 0 ? options->height : 800;
    view->detail = true;
    view->dark = options->dark;
    if (!ev_window_open(&view->window, width, height, options->replay != NULL, view->diagnostics) ||
        !ev_layers_start(&view->layers, view->diagnostics) ||
        !ev_space_start(&view->space, view->diagnostics)) {
        return fail(view, 3);
    }
    view->crew = ev_crew_create(SDL_GetCPUCount() > 1 ? 2 : 1);
    SDL_StopTextInput();
    ev_window_title(&view->window, view->model.scene ? view->model.design.title : "");
    return true;
}

static void end(ev_view *view)
{
    if (view->model.worker) {
        ev_model_end(&view->model);
    }
    ev_gallery_free(&view->gallery);
    ev_crew_destroy(view->crew);
    if (view->window.context) {
        ev_space_end(&view->space);
        ev_layers_end(&view->layers);
        ev_window_close(&view->window);
    }
    ev_draw_release();
}

static void run(ev_view *view)
{
    ev_replay *replay = NULL;
    if (view->options->replay) {
        replay = ev_replay_read(view->options->replay, view->diagnostics);
        if (!replay) {
            view->exit_code = 2;
            return;
        }
    }
    if (start_scene(view) && start_window(view)) {
        if (replay) {
            view->exit_code = ev_replay_run(replay, view);
        } else {
            run_window(view);
        }
    }
    ev_replay_free(replay);
}

int ev_view_run(const ev_view_options *options, ev_diagnostics *diagnostics)
{
    ev_view *view = calloc(1, sizeof *view);
    if (!view) {
        ev_diagnose(diagnostics, EV_SEVERITY_ERROR, "memory", NULL,
                    "There is no memory for a window.");
        return 3;
    }
    view->options = options;
    view->diagnostics = diagnostics;
    /* Two cores: one for the frame, one for the worker and the GL driver's own threads. A team of
     * threads that waits for a core it cannot have costs more than it wins. */
    omp_set_num_threads(1);
    run(view);
    int code = view->exit_code;
    end(view);
    free(view);
    return code;
}
