/* A press of the pointer: what it takes hold of, and what has to be remembered of that moment. */
#include "view/state.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

static bool starts_with(const char *name, const char *start)
{
    return strncmp(name, start, strlen(start)) == 0;
}

static bool is_inside(ev_rect rect, double x, double y)
{
    return x >= rect.x && y >= rect.y && x < rect.x + rect.width && y < rect.y + rect.height;
}

/* "part.feed.1" is the second feed, "part.sub" the subreflector. */
static void select_part(ev_view *view, const char *name)
{
    if (starts_with(name, "part.feed.")) {
        ev_model_select(&view->model, EV_PART_FEED, atoi(name + strlen("part.feed.")));
    } else {
        ev_model_select(&view->model, EV_PART_SUB, view->model.feed);
    }
    view->grabbed = -1;
    view->dirty = true;
}

static void remember_place(ev_view *view)
{
    ev_drag *drag = &view->drag;
    drag->from = view->model.design;
    drag->place[0] = ev_model_place(&view->model, view->model.part, EV_AXIS_OUT);
    drag->place[1] = ev_model_place(&view->model, view->model.part, EV_AXIS_UP);
}

static void grab_handle(ev_view *view, const char *name)
{
    if (starts_with(name, "part.")) {
        bool section = view->stage == EV_STAGE_SECTION;
        select_part(view, name);
        view->drag.kind = section ? EV_DRAG_PART : EV_DRAG_BUTTON;
        view->drag.map = view->layers.section;
    } else {
        view->drag.kind = EV_DRAG_DETAIL;
        view->drag.map = view->layers.detail;
        view->grabbed = -1;
    }
    remember_place(view);
}

static void press_field(ev_view *view, int field, const ev_input *input)
{
    if (field == view->editing) {
        bool extend = (input->modifiers & KMOD_SHIFT) != 0;
        ev_edit_place(&view->edit, ev_field_byte_at(&view->page, &view->sheet, field, input->x),
                      extend);
        if (input->clicks >= 2) {
            ev_edit_select_all(&view->edit);
        }
        view->drag.kind = EV_DRAG_TEXT;
    } else {
        view->drag.kind = EV_DRAG_FIELD;
        view->drag.from = view->model.design;
    }
    view->drag.field = view->grabbed = field;
    if (view->rows[field].is_move && view->rows[field].part == view->model.part) {
        ev_model_cut_along(&view->model, view->rows[field].axis);
    }
    view->dirty = true;
}

static void press_stage(ev_view *view, const ev_input *input)
{
    bool turn = view->stage == EV_STAGE_SPACE && input->button == SDL_BUTTON_LEFT &&
                !(input->modifiers & KMOD_SHIFT);
    view->drag.kind = turn ? EV_DRAG_ORBIT : EV_DRAG_PAN;
    view->drag.camera = view->camera;
    view->drag.pan_x = view->pan_x;
    view->drag.pan_y = view->pan_y;
}

/* Where parts lie over each other, the one in hand comes first. */
static const ev_box *find_handle(const ev_view *view, const ev_input *input)
{
    const ev_box *hit =
        ev_layers_hit(&view->layers, view->model.scene == NULL, input->x, input->y, EV_BOX_HANDLE);
    char name[32];
    if (hit && starts_with(hit->name, "part.")) {
        ev_model_part_name(&view->model, name);
        const ev_box *own = ev_layers_find(&view->layers, false, name);
        return own && is_inside(own->rect, input->x, input->y) ? own : hit;
    }
    return hit;
}

void ev_drag_begin(ev_view *view, const ev_input *input)
{
    bool gallery = view->model.scene == NULL;
    view->drag = (ev_drag){.x = input->x, .y = input->y, .field = -1};
    const ev_box *handle = NULL, *button = NULL, *field = NULL;
    if (input->button == SDL_BUTTON_LEFT) {
        handle = find_handle(view, input);
        button = ev_layers_hit(&view->layers, gallery, input->x, input->y, EV_BOX_BUTTON);
        field = ev_layers_hit(&view->layers, gallery, input->x, input->y, EV_BOX_FIELD);
    }
    const ev_box *box = button ? button : handle ? handle : field;
    snprintf(view->drag.name, sizeof view->drag.name, "%s", box ? box->name : "");
    if (button) {
        view->drag.kind = EV_DRAG_BUTTON;
    } else if (handle) {
        grab_handle(view, view->drag.name);
    } else if (field && ev_strip_find(view, field->name) >= 0) {
        press_field(view, ev_strip_find(view, field->name), input);
    } else if (!gallery && !view->showing && is_inside(view->page.stage, input->x, input->y)) {
        press_stage(view, input);
    }
}
