/* The Strip's fields under the hand: typing, nudging, back to nominal. Tapes are dragged in drag.c.
 */
#include "view/state.h"

#include <stdio.h>
#include <string.h>

int ev_strip_find(const ev_view *view, const char *box_name)
{
    if (strncmp(box_name, "field.", 6) != 0) {
        return -1;
    }
    for (int i = 0; i < view->row_count; ++i) {
        if (strcmp(view->rows[i].address, box_name + 6) == 0) {
            return i;
        }
    }
    return -1;
}

void ev_strip_typed(const char *digits, const char *unit, char *text, size_t size)
{
    bool minus = strncmp(digits, "\u2212", 3) == 0;
    const char *word = strcmp(unit, "°") == 0 ? "deg" : unit;
    snprintf(text, size, "%s%s%s%s", minus ? "-" : "", digits + (minus ? 3 : 0), *word ? " " : "",
             word);
}

static void write_typed(const ev_field *shown, char *text, size_t size)
{
    ev_strip_typed(shown->digits, shown->unit, text, size);
}

void ev_strip_edit(ev_view *view, int field)
{
    if (field < 0 || field >= view->row_count) {
        return;
    }
    char text[EV_EDIT_CAPACITY];
    ev_field shown = {0};
    ev_field_show(&view->model, &view->rows[field], &shown);
    write_typed(&shown, text, sizeof text);
    view->grabbed = view->editing = field;
    view->complaint[0] = '\0';
    ev_edit_start(&view->edit, text);
    SDL_StartTextInput();
    view->dirty = true;
}

static void stop(ev_view *view)
{
    view->editing = -1;
    view->complaint[0] = '\0';
    SDL_StopTextInput();
    view->dirty = true;
}

/* Did the person leave the text as it was offered? Then the value, which has more digits than are
 * shown, stays too. */
static bool is_untouched(const ev_view *view)
{
    ev_field shown = {0};
    ev_field_show(&view->model, &view->rows[view->editing], &shown);
    char text[EV_EDIT_CAPACITY];
    write_typed(&shown, text, sizeof text);
    return strcmp(view->edit.text, text) == 0;
}

void ev_strip_leave(ev_view *view, bool commit)
{
    if (view->editing < 0) {
        return;
    }
    if (!commit || is_untouched(view)) {
        stop(view);
        return;
    }
    if (ev_field_commit(&view->model, &view->rows[view->editing], view->edit.text, view->complaint,
                        sizeof view->complaint)) {
        stop(view);
    }
    view->dirty = true;
}

static void go_to_next(ev_view *view, int direction)
{
    int next = (view->editing + direction + view->row_count) % view->row_count;
    ev_strip_leave(view, true);
    if (view->editing < 0) {
        ev_strip_edit(view, next);
    }
}

bool ev_strip_key(ev_view *view, const ev_input *input)
{
    if (view->editing < 0) {
        return false;
    }
    switch (input->key) {
    case SDLK_RETURN:
    case SDLK_KP_ENTER:
        ev_strip_leave(view, true);
        return true;
    case SDLK_ESCAPE:
        ev_strip_leave(view, false);
        return true;
    case SDLK_TAB:
        go_to_next(view, input->modifiers & KMOD_SHIFT ? -1 : 1);
        return true;
    default:
        break;
    }
    if (ev_edit_key(&view->edit, input->key, input->modifiers)) {
        view->complaint[0] = '\0';
        view->dirty = true;
        return true;
    }
    /* other keys with Ctrl are commands; letters come as text */
    return !(input->modifiers & KMOD_CTRL);
}

/* A small change by key or wheel. Several in a row are one change to undo. */
static void change(ev_view *view, int field, double value)
{
    const ev_field_row *row = &view->rows[field];
    char words[EV_WORDS_CAPACITY];
    ev_design set = ev_field_set(&view->model, row, &view->model.design, value);
    bool own = row->is_move && row->part == view->model.part && row->axis != EV_AXIS_ACROSS;
    if (!ev_model_try(&view->model, &set, own)) {
        return;
    }
    if (view->now < view->nudged_until && strcmp(view->nudged, row->address) == 0) {
        ev_history_amend(view->model.history, &view->model.design);
    } else {
        ev_field_words(&view->model, row, words);
        ev_model_note(&view->model, words);
    }
    snprintf(view->nudged, sizeof view->nudged, "%s", row->address);
    view->nudged_until = view->now + 1.0;
    view->dirty = true;
}

void ev_strip_nominal(ev_view *view, int field)
{
    ev_strip_leave(view, false);
    view->grabbed = field;
    view->nudged[0] = '\0';
    double nominal = ev_field_nominal(&view->model, &view->rows[field]);
    if (ev_field_value(&view->model, &view->rows[field]) != nominal) {
        change(view, field, nominal);
        view->nudged[0] = '\0';
    }
}

void ev_strip_nudge(ev_view *view, int field, double steps)
{
    const ev_field_row *row = &view->rows[field];
    double value = ev_field_value(&view->model, row) + steps * row->step;
    change(view, field, ev_round_place(value, row->step));
}
