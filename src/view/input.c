/* What comes in, one kind a function, for SDL's events and a replay's steps alike. */
#include "draw/stage.h"
#include "view/state.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

/* The box a pointer is about: what can be grabbed before what can be read. */
static const ev_box *find_pointed(const ev_view *view, double x, double y)
{
    static const ev_box_kind kinds[] = {EV_BOX_BUTTON, EV_BOX_HANDLE, EV_BOX_FIELD, EV_BOX_ROW};
    for (size_t i = 0; i < sizeof kinds / sizeof kinds[0]; ++i) {
        const ev_box *box = ev_layers_hit(&view->layers, view->model.scene == NULL, x, y, kinds[i]);
        if (box) {
            return box;
        }
    }
    return NULL;
}

/* A shape that says what a press would do. */
static SDL_SystemCursor shape_for(const ev_view *view, const ev_box *box)
{
    if (!box || box->kind == EV_BOX_ROW) {
        return SDL_SYSTEM_CURSOR_ARROW;
    }
    if (box->kind == EV_BOX_FIELD) {
        return ev_strip_find(view, box->name) == view->editing ? SDL_SYSTEM_CURSOR_IBEAM
                                                               : SDL_SYSTEM_CURSOR_SIZEWE;
    }
    return box->kind == EV_BOX_HANDLE ? SDL_SYSTEM_CURSOR_SIZEALL : SDL_SYSTEM_CURSOR_HAND;
}

void ev_view_point(ev_view *view, double x, double y)
{
    const ev_box *box = find_pointed(view, x, y);
    ev_window_cursor(&view->window, shape_for(view, box));
    const char *name = box ? box->name : "";
    if (strcmp(name, view->pointed) != 0) {
        snprintf(view->pointed, sizeof view->pointed, "%s", name);
        view->dirty = true;
    }
}

static void on_move(ev_view *view, const ev_input *input)
{
    if (view->drag.kind == EV_DRAG_NONE) {
        ev_view_point(view, input->x, input->y);
    } else {
        ev_drag_move(view, input);
    }
}

static void on_press(ev_view *view, const ev_input *input)
{
    if (view->drag.kind != EV_DRAG_NONE) {
        return; /* another button while one is down */
    }
    const ev_box *box =
        ev_layers_hit(&view->layers, view->model.scene == NULL, input->x, input->y, EV_BOX_FIELD);
    int field = box ? ev_strip_find(view, box->name) : -1;
    if (view->editing >= 0 && field != view->editing) {
        ev_strip_leave(view, true);
        if (view->editing >= 0) {
            ev_view_notice(view, view->complaint);
            ev_strip_leave(view, false);
        }
    }
    bool twice = input->clicks == 2 && input->button == SDL_BUTTON_LEFT;
    if (field >= 0 && twice && (field != view->editing || view->fresh)) {
        ev_strip_nominal(view, field); /* the first click has opened it for typing */
        return;
    }
    view->fresh = false;
    if (!ev_finder_press(view, input) && !ev_drawer_press(view, input)) {
        ev_drag_begin(view, input);
    }
}

static void on_release(ev_view *view, const ev_input *input)
{
    if (view->drag.kind != EV_DRAG_NONE) {
        ev_drag_end(view, input);
        ev_view_point(view, input->x, input->y);
    }
}

/* Zooms about the pointer: what lies under it stays there. */
static void zoom_section(ev_view *view, double factor, double x, double y)
{
    double a, b, to_x, to_y;
    ev_plot_to_data(&view->layers.section, x, y, &a, &b);
    view->zoom = SDL_clamp(view->zoom * factor, 0.2, 400.0);
    ev_sheet sheet = *ev_view_sheet(view);
    ev_section section = ev_section_fit(&view->page, &sheet);
    ev_plot_to_page(&section.map, a, b, &to_x, &to_y);
    view->pan_x += x - to_x;
    view->pan_y += y - to_y;
    view->layers.section = section.map;
    view->layers.section.x0 += x - to_x;
    view->layers.section.y0 += y - to_y;
}

static void on_wheel(ev_view *view, const ev_input *input)
{
    ev_rect stage = view->page.stage;
    const ev_box *box = find_pointed(view, input->x, input->y);
    int field = box ? ev_strip_find(view, box->name) : -1;
    double factor = SDL_pow(1.2, input->wheel);
    if (!view->model.scene || view->showing || view->finder.is_open ||
        view->drag.kind != EV_DRAG_NONE || ev_drawer_wheel(view, input)) {
        return;
    }
    if (field >= 0) {
        ev_strip_nudge(view, field, input->wheel);
    } else if (input->x < stage.x + stage.width && input->y >= stage.y &&
               input->y < stage.y + stage.height) {
        if (view->stage == EV_STAGE_SECTION) {
            zoom_section(view, factor, input->x, input->y);
        } else {
            ev_camera_zoom(&view->camera, stage, factor, input->x, input->y);
            view->camera_kept = true;
        }
    }
    view->dirty = true;
}

static bool nudge(ev_view *view, const ev_input *input)
{
    int right = (input->key == SDLK_RIGHT) - (input->key == SDLK_LEFT);
    int up = (input->key == SDLK_UP) - (input->key == SDLK_DOWN);
    double factor = input->modifiers & KMOD_SHIFT ? 10.0 : 1.0;
    if (input->modifiers & KMOD_ALT) {
        factor *= 0.1;
    }
    if (right == 0 && up == 0) {
        return false;
    }
    if (view->grabbed >= 0) {
        ev_strip_nudge(view, view->grabbed, factor * (right + up));
    } else {
        ev_view_nudge(view, right, up, factor);
    }
    return true;
}

/* In the gallery arrows walk over the scenes and Enter opens one. */
static void gallery_key(ev_view *view, const ev_input *input)
{
    int at = strncmp(view->pointed, "scene.", 6) == 0 ? atoi(view->pointed + 6) : -1;
    int step = (input->key == SDLK_RIGHT || input->key == SDLK_DOWN) -
               (input->key == SDLK_LEFT || input->key == SDLK_UP);
    if (step != 0 && view->gallery.count > 0) {
        at = (at + step + view->gallery.count) % view->gallery.count;
        snprintf(view->pointed, sizeof view->pointed, "scene.%d", at);
    } else if (input->key == SDLK_RETURN && at >= 0) {
        char name[80];
        snprintf(name, sizeof name, "%s", view->pointed);
        ev_view_click(view, name);
    }
    view->dirty = true;
}

static void on_key(ev_view *view, const ev_input *input)
{
    bool open = view->model.scene != NULL;
    if (view->drag.kind != EV_DRAG_NONE) { /* a hand is at work: nothing else, but it can let go */
        if (input->key == SDLK_ESCAPE) {
            ev_drag_cancel(view);
        }
        return;
    }
    if (ev_finder_key(view, input)) {
        return;
    }
    if (open &&
        (ev_strip_key(view, input) || ev_drawer_key(view, input) || ev_showing_key(view, input))) {
        return;
    }
    const ev_act *command = ev_act_of_key(input->key, input->modifiers);
    if (!command || !view->asked || strcmp(command->name, view->asked) != 0) {
        view->asked = NULL;
    }
    if (command && ev_act_possible(view, command)) {
        ev_act_run(view, command);
    } else if (!open) {
        gallery_key(view, input);
    } else if (input->key == SDLK_ESCAPE) {
        view->grabbed = -1;
        view->notice[0] = '\0';
        view->dirty = true;
    } else {
        nudge(view, input);
    }
}

static void on_text(ev_view *view, const ev_input *input)
{
    if (ev_finder_text(view, input->text) || ev_drawer_text(view, input->text)) {
        return;
    }
    if (view->editing >= 0) {
        ev_edit_insert(&view->edit, input->text);
        view->complaint[0] = '\0';
        view->dirty = true;
    }
}

static void on_drop(ev_view *view, const ev_input *input)
{
    if (ev_view_may_leave(view, "drop",
                          "Not saved. Drop it again to give up the changes, or save (s)")) {
        ev_view_open_scene(view, input->text);
    }
}

static void on_size(ev_view *view, const ev_input *input)
{
    (void)input;
    ev_window_measure(&view->window);
    view->dirty = true;
}

static void on_quit(ev_view *view, const ev_input *input)
{
    (void)input;
    ev_act_run(view, ev_act_find("quit"));
}

/* Letters come as text while there is something to type into. */
static void listen(const ev_view *view)
{
    bool wanted = view->editing >= 0 || view->finder.is_open || ev_drawer_listens(view);
    if (wanted && !SDL_IsTextInputActive()) {
        SDL_StartTextInput();
    } else if (!wanted && SDL_IsTextInputActive()) {
        SDL_StopTextInput();
    }
}

void ev_view_input(ev_view *view, const ev_input *input)
{
    static void (*const handlers[])(ev_view *, const ev_input *) = {
        [EV_INPUT_MOVE] = on_move,   [EV_INPUT_PRESS] = on_press, [EV_INPUT_RELEASE] = on_release,
        [EV_INPUT_WHEEL] = on_wheel, [EV_INPUT_KEY] = on_key,     [EV_INPUT_TEXT] = on_text,
        [EV_INPUT_DROP] = on_drop,   [EV_INPUT_SIZE] = on_size,   [EV_INPUT_QUIT] = on_quit,
    };
    if (input->kind == EV_INPUT_MOVE || input->kind == EV_INPUT_PRESS ||
        input->kind == EV_INPUT_RELEASE) {
        view->x = input->x;
        view->y = input->y;
    }
    handlers[input->kind](view, input);
    listen(view);
    if (view->model.message[0]) {
        ev_view_notice(view, view->model.message);
        view->model.message[0] = '\0';
    }
}
