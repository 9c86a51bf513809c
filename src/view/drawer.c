/* The drawer of all settings under the hand: searching, scrolling, typing a value, pressing its
 * marks and words. Adding and removing things is in drawer_lists.c. Every change goes through the
 * model and can be undone. */
#include "view/state.h"

#include "base/text.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

static const double wheel_step = 60.0, key_step = 24.0; /* px of the list */

static bool is_out(const ev_view *view)
{
    return view->drawer.is_open && view->model.scene && !view->showing;
}

/* The drawer's measures ask the sheet for nothing but its design. */
static const ev_sheet *sheet_of(ev_view *view)
{
    view->sheet.design = &view->model.design;
    return &view->sheet;
}

const ev_drawer *ev_drawer_shown(ev_view *view)
{
    ev_drawer_hand *hand = &view->drawer;
    ev_drawer *shown = &hand->shown;
    if (!is_out(view)) {
        return NULL;
    }
    ev_edit_show(&hand->search, shown->search, sizeof shown->search, &shown->search_caret,
                 &shown->search_anchor);
    ev_edit_show(&hand->edit, shown->edit_text, sizeof shown->edit_text, &shown->edit_caret,
                 &shown->edit_anchor);
    shown->searching = view->editing < 0;
    double most = ev_drawer_scroll_limit(&view->page, sheet_of(view), shown);
    shown->scroll = SDL_clamp(shown->scroll, 0.0, most);
    memcpy(shown->pointed, view->pointed, sizeof shown->pointed);
    return shown;
}

bool ev_drawer_listens(const ev_view *view)
{
    return is_out(view);
}

static void stop(ev_view *view)
{
    view->drawer.shown.editing[0] = view->drawer.shown.complaint[0] = '\0';
    view->dirty = true;
}

void ev_drawer_open(ev_view *view)
{
    if (is_out(view)) {
        ev_drawer_close(view);
        return;
    }
    ev_showing_leave(view);
    ev_strip_leave(view, false);
    view->drawer = (ev_drawer_hand){.is_open = true};
    view->pointed[0] = '\0';
    view->dirty = true;
}

void ev_drawer_close(ev_view *view)
{
    stop(view);
    view->drawer.is_open = false;
    view->pointed[0] = '\0';
}

/* The row that is listed under an address; of a long one a box holds only the first `most` bytes.
 */
static bool find_listed(const ev_view *view, const char *part, size_t length, size_t most,
                        ev_parameter_ref *ref)
{
    ev_parameter_ref rows[EV_DRAWER_CAPACITY];
    int count = ev_drawer_rows(&view->model.design, view->drawer.shown.search, rows);
    for (int i = 0; i < count; ++i) {
        char address[EV_ADDRESS_CAPACITY];
        ev_parameter_address(&view->model.design, rows[i], address, sizeof address);
        bool whole = strlen(address) == length || length == most;
        if (whole && strncmp(address, part, length) == 0) {
            *ref = rows[i];
            return true;
        }
    }
    return false;
}

static bool find_edited(const ev_view *view, ev_parameter_ref *ref)
{
    const char *address = view->drawer.shown.editing;
    return address[0] && ev_parameter_find(&view->model.design, 0, address, ref, NULL);
}

static void edit(ev_view *view, ev_parameter_ref ref)
{
    ev_drawer_hand *hand = &view->drawer;
    char digits[EV_EDIT_CAPACITY], unit[24];
    ev_parameter_format(&view->model.design, ref, digits, sizeof digits, unit, sizeof unit);
    ev_strip_typed(digits, unit, hand->offered, sizeof hand->offered);
    ev_edit_start(&hand->edit, hand->offered);
    ev_parameter_address(&view->model.design, ref, hand->shown.editing, sizeof hand->shown.editing);
    hand->shown.complaint[0] = '\0';
    hand->shown.scroll =
        ev_drawer_scroll_to(&view->page, sheet_of(view), &hand->shown, hand->shown.editing);
    view->dirty = true;
}

static ev_field_row row_of(const ev_view *view, ev_parameter_ref ref)
{
    ev_field_row row = {.has_parameter = true, .ref = ref};
    ev_parameter_address(&view->model.design, ref, row.address, sizeof row.address);
    snprintf(row.label, sizeof row.label, "%s", ref.parameter->label);
    return row;
}

static void note(ev_view *view, ev_parameter_ref ref)
{
    char words[EV_WORDS_CAPACITY];
    ev_field_row row = row_of(view, ref);
    ev_field_words(&view->model, &row, words);
    ev_model_note(&view->model, words);
}

/* Names, titles, paths and counts, as a command line would give them. */
static bool commit_words(ev_view *view, ev_parameter_ref ref)
{
    ev_model *model = &view->model;
    ev_drawer *shown = &view->drawer.shown;
    char assignment[EV_ADDRESS_CAPACITY + EV_EDIT_CAPACITY + 1];
    ev_design set = model->design;
    ev_diagnostics *diagnostics = malloc(sizeof *diagnostics);
    if (!diagnostics) {
        return false;
    }
    ev_diagnostics_init(diagnostics);
    snprintf(assignment, sizeof assignment, "%s=%s", shown->editing, view->drawer.edit.text);
    ev_worker_finish(model->worker, EV_JOB_SAVE);
    bool good = ev_scene_assign(model->scene, &set, 0, assignment, diagnostics);
    if (!good && diagnostics->count > 0) {
        ev_text_copy(shown->complaint, sizeof shown->complaint, diagnostics->items[0].text);
    } else if (good && !ev_model_try(model, &set, false)) {
        ev_text_copy(shown->complaint, sizeof shown->complaint, model->message);
        model->message[0] = '\0';
        good = false;
    }
    ev_diagnostics_clear(diagnostics);
    free(diagnostics);
    if (good) {
        note(view, ref);
    }
    return good;
}

/* Ends the typing when the text is legal; else the complaint stands below the list. */
static bool commit(ev_view *view)
{
    ev_drawer_hand *hand = &view->drawer;
    ev_parameter_ref ref;
    bool good = strcmp(hand->edit.text, hand->offered) == 0 || !find_edited(view, &ref);
    if (!good && ref.parameter->kind == EV_VALUE_NUMBER) {
        ev_field_row row = row_of(view, ref);
        good = ev_field_commit(&view->model, &row, hand->edit.text, hand->shown.complaint,
                               sizeof hand->shown.complaint);
    } else if (!good) {
        good = commit_words(view, ref);
    }
    if (good) {
        stop(view);
    }
    view->dirty = true;
    return good;
}

static void set_value(ev_view *view, ev_parameter_ref ref, double value)
{
    ev_design set = view->model.design;
    ev_parameter_set(&set, ref, value);
    if (ev_parameter_get(&set, ref) != ev_parameter_get(&view->model.design, ref) &&
        ev_model_try(&view->model, &set, false)) {
        note(view, ref);
    }
}

/* "choice.ADDRESS.WORD", each cut to what its box holds. */
static void choose(ev_view *view, const char *name)
{
    const char *address = name + strlen("choice."), *dot = strrchr(address, '.');
    ev_parameter_ref ref;
    if (!dot || !find_listed(view, address, (size_t)(dot - address), 60, &ref)) {
        return;
    }
    for (int i = 0; ref.parameter->words && ref.parameter->words[i]; ++i) {
        if (strncmp(ref.parameter->words[i], dot + 1, 12) == 0) {
            set_value(view, ref, i);
            return;
        }
    }
}

static void change_lists(ev_view *view, const char *name)
{
    ev_design changed = view->model.design;
    char words[EV_WORDS_CAPACITY];
    if (ev_lists_change(&changed, name, words) && ev_model_try(&view->model, &changed, false)) {
        ev_model_note(&view->model, words);
        view->grabbed = -1;
    }
}

bool ev_drawer_click(ev_view *view, const char *name)
{
    ev_parameter_ref ref;
    if (!is_out(view)) {
        return false;
    }
    view->dirty = true;
    if (strcmp(name, "close.drawer") == 0) {
        ev_drawer_close(view);
    } else if (strncmp(name, "reset.", 6) == 0) {
        if (find_listed(view, name + 6, strlen(name + 6), 70, &ref)) {
            set_value(view, ref, ref.parameter->initial);
        }
    } else if (strncmp(name, "choice.", 7) == 0) {
        choose(view, name);
    } else if (strncmp(name, "add.", 4) == 0 || strncmp(name, "copy.", 5) == 0 ||
               strncmp(name, "remove.", 7) == 0) {
        change_lists(view, name);
    } else {
        return false;
    }
    return true;
}

static const ev_box *hit(const ev_view *view, const ev_input *input, ev_box_kind kind)
{
    return ev_layers_hit(&view->layers, false, input->x, input->y, kind);
}

static void place_caret(ev_view *view, ev_edit *text, const ev_input *input)
{
    int byte = ev_drawer_byte_at(&view->page, sheet_of(view), &view->drawer.shown, input->x);
    ev_edit_place(text, byte, (input->modifiers & KMOD_SHIFT) != 0);
    if (input->clicks >= 2) {
        ev_edit_select_all(text);
    }
    view->dirty = true;
}

/* Going elsewhere takes what was typed, or says why it cannot. */
static void leave_row(ev_view *view)
{
    if (view->drawer.shown.editing[0] && !commit(view)) {
        ev_view_notice(view, view->drawer.shown.complaint);
        stop(view);
    }
}

static void press_row(ev_view *view, const char *address, const ev_input *input)
{
    ev_parameter_ref ref;
    if (!find_listed(view, address, strlen(address), 75, &ref) ||
        ref.parameter->kind == EV_VALUE_CHOICE) {
        leave_row(view);
        return;
    }
    char whole[EV_ADDRESS_CAPACITY];
    ev_parameter_address(&view->model.design, ref, whole, sizeof whole);
    if (strcmp(whole, view->drawer.shown.editing) == 0) {
        place_caret(view, &view->drawer.edit, input);
        return;
    }
    leave_row(view);
    if (find_listed(view, address, strlen(address), 75, &ref)) {
        edit(view, ref);
    }
}

bool ev_drawer_press(ev_view *view, const ev_input *input)
{
    if (!is_out(view)) {
        return false;
    }
    ev_rect column = view->page.ledger;
    const ev_box *row = hit(view, input, EV_BOX_ROW), *button = hit(view, input, EV_BOX_BUTTON);
    bool inside = input->x >= column.x && input->y >= column.y;
    if (!inside || button || input->button != SDL_BUTTON_LEFT) {
        leave_row(view);
        return inside && !button;
    }
    if (row) {
        press_row(view, row->name + strlen("row."), input);
        return true;
    }
    leave_row(view);
    if (hit(view, input, EV_BOX_FIELD)) {
        place_caret(view, &view->drawer.search, input);
    }
    return true;
}

bool ev_drawer_wheel(ev_view *view, const ev_input *input)
{
    ev_rect column = view->page.ledger;
    if (!is_out(view) || input->x < column.x || input->y < column.y) {
        return false;
    }
    view->drawer.shown.scroll -= wheel_step * input->wheel;
    view->dirty = true;
    return true;
}

/* The next row to type into, from the one in hand; the first when there is none. */
static void edit_next(ev_view *view, int direction)
{
    ev_parameter_ref rows[EV_DRAWER_CAPACITY], held;
    bool from = find_edited(view, &held);
    if (from && !commit(view)) {
        return;
    }
    int count = ev_drawer_rows(&view->model.design, view->drawer.shown.search, rows);
    int at = direction > 0 ? -1 : count;
    for (int i = 0; from && i < count; ++i) {
        at = rows[i].parameter == held.parameter && rows[i].index == held.index ? i : at;
    }
    for (at += direction; at >= 0 && at < count; at += direction) {
        if (rows[at].parameter->kind != EV_VALUE_CHOICE) {
            edit(view, rows[at]);
            return;
        }
    }
}

static bool row_key(ev_view *view, const ev_input *input)
{
    switch (input->key) {
    case SDLK_RETURN:
    case SDLK_KP_ENTER:
        commit(view);
        return true;
    case SDLK_ESCAPE:
        stop(view);
        return true;
    case SDLK_TAB:
        edit_next(view, input->modifiers & KMOD_SHIFT ? -1 : 1);
        return true;
    default:
        break;
    }
    if (ev_edit_key(&view->drawer.edit, input->key, input->modifiers)) {
        view->drawer.shown.complaint[0] = '\0';
        return true;
    }
    return false;
}

static bool list_key(ev_view *view, const ev_input *input)
{
    ev_drawer *shown = &view->drawer.shown;
    switch (input->key) {
    case SDLK_ESCAPE:
        ev_drawer_close(view);
        return true;
    case SDLK_UP:
    case SDLK_DOWN:
        shown->scroll += input->key == SDLK_DOWN ? key_step : -key_step;
        return true;
    case SDLK_PAGEUP:
    case SDLK_PAGEDOWN:
        shown->scroll += (input->key == SDLK_PAGEDOWN ? 0.6 : -0.6) * view->page.height;
        return true;
    case SDLK_RETURN:
    case SDLK_KP_ENTER:
    case SDLK_TAB:
        edit_next(view, input->modifiers & KMOD_SHIFT ? -1 : 1);
        return true;
    default:
        return ev_edit_key(&view->drawer.search, input->key, input->modifiers);
    }
}

/* Letters come as text; what is held with Ctrl and means nothing here is a command. */
bool ev_drawer_key(ev_view *view, const ev_input *input)
{
    if (!is_out(view)) {
        return false;
    }
    view->dirty = true;
    bool seen_to = view->drawer.shown.editing[0] ? row_key(view, input) : list_key(view, input);
    return seen_to || !(input->modifiers & KMOD_CTRL);
}

bool ev_drawer_text(ev_view *view, const char *text)
{
    ev_drawer_hand *hand = &view->drawer;
    if (!is_out(view) || view->editing >= 0) {
        return false;
    }
    if (hand->shown.editing[0]) {
        ev_edit_insert(&hand->edit, text);
        hand->shown.complaint[0] = '\0';
    } else {
        ev_edit_insert(&hand->search, text);
        hand->shown.scroll = 0.0;
    }
    view->dirty = true;
    return true;
}
