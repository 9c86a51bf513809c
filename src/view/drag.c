/* From grab to release: tapes, the yellow handle, parts on the section, panning and turning. Every
 * movement is reckoned from where it began, so that nothing adds up. Grabbing is in grab.c. */
#include "view/state.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

static const double shake = 3.0;     /* px: less is a click */
static const double catch_db = 0.02; /* the handle settles on the best within this */
const double ev_turn_per_pixel = 0.008;

bool ev_view_moving(const ev_view *view)
{
    return view->drag.moved && view->drag.kind >= EV_DRAG_FIELD && view->drag.kind != EV_DRAG_TEXT;
}

static bool is_inside(ev_rect rect, double x, double y)
{
    return x >= rect.x && y >= rect.y && x < rect.x + rect.width && y < rect.y + rect.height;
}

static void move_part_to(ev_view *view, double out, double up)
{
    ev_model *model = &view->model;
    ev_design moved = ev_model_moved(model, &view->drag.from, model->part, EV_AXIS_OUT, out);
    moved = ev_model_moved(model, &moved, model->part, EV_AXIS_UP, up);
    ev_model_try(model, &moved, true);
}

/* The step of the fields that move the part. */
static double part_step(const ev_view *view)
{
    for (int i = 0; i < view->row_count; ++i) {
        if (view->rows[i].is_move) {
            return view->rows[i].step;
        }
    }
    return 1e-3;
}

static void move_detail(ev_view *view, const ev_input *input)
{
    const ev_drag *drag = &view->drag;
    const ev_model *model = &view->model;
    double a0, b0, a1, b1, step = part_step(view);
    ev_plot_to_data(&drag->map, drag->x, drag->y, &a0, &b0);
    ev_plot_to_data(&drag->map, input->x, input->y, &a1, &b1);
    double out = ev_round_place(drag->place[0] + a1 - a0, step);
    double up = ev_round_place(drag->place[1] + b1 - b0, step);
    bool free_hand = (input->modifiers & KMOD_ALT) != 0;
    if (!free_hand && model->has_map && ev_loss_map_at(&model->map, out, up) < catch_db) {
        out = ev_round_place(model->map.best[0], step);
        up = ev_round_place(model->map.best[1], step);
    }
    move_part_to(view, out, up);
}

static void move_on_section(ev_view *view, const ev_input *input)
{
    const ev_drag *drag = &view->drag;
    const ev_model *model = &view->model;
    double z0, x0, z1, x1, step = part_step(view);
    ev_plot_to_data(&drag->map, drag->x, drag->y, &z0, &x0);
    ev_plot_to_data(&drag->map, input->x, input->y, &z1, &x1);
    ev_vec3 by = {x1 - x0, 0.0, z1 - z0};
    ev_vec3 out =
        ev_part_axis_direction(&model->study->antenna, model->part, model->feed, EV_AXIS_OUT);
    ev_vec3 up =
        ev_part_axis_direction(&model->study->antenna, model->part, model->feed, EV_AXIS_UP);
    move_part_to(view, ev_round_place(drag->place[0] + ev_vec3_dot(by, out), step),
                 ev_round_place(drag->place[1] + ev_vec3_dot(by, up), step));
}

static void move_field(ev_view *view, const ev_input *input)
{
    const ev_drag *drag = &view->drag;
    const ev_field_row *row = &view->rows[drag->field];
    ev_model *model = &view->model;
    ev_design held = model->design;
    model->design = drag->from; /* the value where the tape was taken hold of */
    double value = ev_field_value(model, row);
    model->design = held;
    value += ev_field_drag(&view->sheet.fields[drag->field], input->x - drag->x);
    ev_design set = ev_field_set(model, row, &drag->from, ev_round_place(value, row->step));
    bool own = row->is_move && row->part == model->part && row->axis != EV_AXIS_ACROSS;
    ev_model_try(model, &set, own);
}

static void pan_stage(ev_view *view, const ev_input *input)
{
    const ev_drag *drag = &view->drag;
    double dx = input->x - drag->x, dy = input->y - drag->y;
    if (view->stage == EV_STAGE_SECTION) {
        view->pan_x = drag->pan_x + dx;
        view->pan_y = drag->pan_y + dy;
        return;
    }
    view->camera = drag->camera;
    ev_camera_pan(&view->camera, view->page.stage, dx, dy);
    view->camera_kept = true;
}

static void turn_stage(ev_view *view, const ev_input *input)
{
    view->camera = view->drag.camera;
    ev_camera_orbit(&view->camera, ev_turn_per_pixel * (input->x - view->drag.x),
                    ev_turn_per_pixel * (input->y - view->drag.y));
    view->camera_kept = true;
}

void ev_drag_move(ev_view *view, const ev_input *input)
{
    ev_drag *drag = &view->drag;
    if (drag->kind == EV_DRAG_NONE) {
        return;
    }
    drag->moved |= hypot(input->x - drag->x, input->y - drag->y) >= shake;
    if (!drag->moved) {
        return;
    }
    view->dirty = true;
    switch (drag->kind) {
    case EV_DRAG_FIELD:
        move_field(view, input);
        break;
    case EV_DRAG_TEXT:
        ev_edit_place(&view->edit,
                      ev_field_byte_at(&view->page, &view->sheet, drag->field, input->x), true);
        break;
    case EV_DRAG_DETAIL:
        move_detail(view, input);
        break;
    case EV_DRAG_PART:
        move_on_section(view, input);
        break;
    case EV_DRAG_PAN:
        pan_stage(view, input);
        break;
    case EV_DRAG_ORBIT:
        turn_stage(view, input);
        break;
    case EV_DRAG_BUTTON:
    case EV_DRAG_NONE:
        break;
    }
}

/* "feed out", "feed up", or both. */
static void note_move(ev_view *view)
{
    const ev_drag *drag = &view->drag;
    ev_model *model = &view->model;
    char words[EV_WORDS_CAPACITY];
    bool out = ev_model_place(model, model->part, EV_AXIS_OUT) != drag->place[0];
    bool up = ev_model_place(model, model->part, EV_AXIS_UP) != drag->place[1];
    ev_model_move_words(model, model->part, up && !out ? EV_AXIS_UP : EV_AXIS_OUT, words);
    if (out && up) {
        size_t used = strlen(words);
        snprintf(words + used, sizeof words - used, " and %s", ev_axis_word(EV_AXIS_UP));
    }
    if (out || up) {
        ev_model_note(model, words);
    }
}

static void end_field(ev_view *view)
{
    char words[EV_WORDS_CAPACITY];
    if (!view->drag.moved) {
        ev_strip_edit(view, view->drag.field);
        view->fresh = true;
        return;
    }
    const ev_field_row *row = &view->rows[view->drag.field];
    ev_design left =
        ev_field_set(&view->model, row, &view->drag.from, ev_field_value(&view->model, row));
    ev_field_words(&view->model, row, words);
    /* one is a copy of the other, padding included; NOLINTNEXTLINE(bugprone-suspicious-*) */
    if (memcmp(&left, &view->drag.from, sizeof left) != 0) { /* not back where it was */
        ev_model_note(&view->model, words);
    }
}

static void end_button(ev_view *view, const ev_input *input)
{
    bool gallery = view->model.scene == NULL;
    const ev_box *box = ev_layers_find(&view->layers, gallery, view->drag.name);
    if (box && is_inside(box->rect, input->x, input->y)) {
        ev_view_click(view, view->drag.name);
    }
}

void ev_drag_end(ev_view *view, const ev_input *input)
{
    ev_drag_move(view, input);
    ev_drag_kind kind = view->drag.kind;
    bool moved = view->drag.moved;
    view->drag.kind = EV_DRAG_NONE;
    view->dirty = true;
    if (kind == EV_DRAG_BUTTON) {
        end_button(view, input);
    } else if (kind == EV_DRAG_FIELD) {
        end_field(view);
    } else if ((kind == EV_DRAG_DETAIL || kind == EV_DRAG_PART) && moved) {
        note_move(view);
    }
    view->drag.moved = false;
}

void ev_drag_cancel(ev_view *view)
{
    ev_drag_kind kind = view->drag.kind;
    bool design = kind == EV_DRAG_FIELD || kind == EV_DRAG_DETAIL || kind == EV_DRAG_PART;
    if (design && view->drag.moved) {
        ev_model_try(&view->model, &view->drag.from, false);
    }
    view->drag.kind = EV_DRAG_NONE;
    view->drag.moved = false;
    view->dirty = true;
}

/* Which of the part's axes a step along the page means: the one that lies nearer to it. */
void ev_view_nudge(ev_view *view, int right, int up, double factor)
{
    ev_model *model = &view->model;
    ev_part_axis best = EV_AXIS_OUT;
    double along = 0.0;
    for (int axis = EV_AXIS_OUT; axis <= EV_AXIS_UP; ++axis) {
        ev_vec3 direction = ev_part_axis_direction(&model->study->antenna, model->part, model->feed,
                                                   (ev_part_axis)axis);
        double share = right * direction.z + up * direction.x;
        if (fabs(share) > fabs(along)) {
            along = share;
            best = (ev_part_axis)axis;
        }
    }
    for (int i = 0; i < view->row_count; ++i) {
        const ev_field_row *row = &view->rows[i];
        if (row->is_move && row->part == model->part && row->axis == best) {
            ev_strip_nudge(view, i, along < 0.0 ? -factor : factor);
            return;
        }
    }
}
