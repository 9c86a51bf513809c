/* The text edit. Texts are a few characters long: the layout that knows where characters and words
 * begin is made anew for each key. */
#include "view/controls.h"

#include "base/text.h"

#include <pango/pangocairo.h>
#include <string.h>

static int length_of(const ev_edit *edit)
{
    return (int)strlen(edit->text);
}

static PangoLayout *lay_out(const ev_edit *edit)
{
    PangoContext *context = pango_font_map_create_context(pango_cairo_font_map_get_default());
    PangoLayout *layout = pango_layout_new(context);
    pango_layout_set_text(layout, edit->text, -1);
    g_object_unref(context);
    return layout;
}

/* The place of the caret one character to the right (or left) of `byte`, as it is seen. */
static int step_character(const ev_edit *edit, int byte, int direction)
{
    PangoLayout *layout = lay_out(edit);
    int index = byte, trailing = 0;
    pango_layout_move_cursor_visually(layout, TRUE, byte, 0, direction, &index, &trailing);
    g_object_unref(layout);
    int length = length_of(edit);
    if (index < 0 || index > length) { /* Pango's way of saying: beyond the end */
        return direction < 0 ? 0 : length;
    }
    const char *at = edit->text + index;
    for (; trailing > 0 && *at; --trailing) {
        at = g_utf8_next_char(at);
    }
    return (int)(at - edit->text);
}

static int step_word(const ev_edit *edit, int byte, int direction)
{
    PangoLayout *layout = lay_out(edit);
    int count = 0;
    const PangoLogAttr *attributes = pango_layout_get_log_attrs_readonly(layout, &count);
    int at = (int)g_utf8_pointer_to_offset(edit->text, edit->text + byte);
    do {
        at += direction;
    } while (at > 0 && at < count - 1 &&
             !(direction < 0 ? attributes[at].is_word_start : attributes[at].is_word_end));
    at = at < 0 ? 0 : at > count - 1 ? count - 1 : at;
    g_object_unref(layout);
    return (int)(g_utf8_offset_to_pointer(edit->text, at) - edit->text);
}

static void get_selection(const ev_edit *edit, int *from, int *to)
{
    *from = edit->caret < edit->anchor ? edit->caret : edit->anchor;
    *to = edit->caret < edit->anchor ? edit->anchor : edit->caret;
}

static void erase(ev_edit *edit, int from, int to)
{
    memmove(edit->text + from, edit->text + to, strlen(edit->text + to) + 1);
    edit->caret = edit->anchor = from;
}

static bool erase_selection(ev_edit *edit)
{
    int from, to;
    get_selection(edit, &from, &to);
    if (from == to) {
        return false;
    }
    erase(edit, from, to);
    return true;
}

void ev_edit_start(ev_edit *edit, const char *text)
{
    *edit = (ev_edit){0};
    ev_edit_insert(edit, text);
    ev_edit_select_all(edit);
}

void ev_edit_insert(ev_edit *edit, const char *text)
{
    if (!g_utf8_validate(text, -1, NULL)) {
        return;
    }
    erase_selection(edit);
    for (const char *at = text; *at; at = g_utf8_next_char(at)) {
        int size = (int)(g_utf8_next_char(at) - at);
        if (g_unichar_iscntrl(g_utf8_get_char(at)) || length_of(edit) + size >= EV_EDIT_CAPACITY) {
            continue;
        }
        char *caret = edit->text + edit->caret;
        memmove(caret + size, caret, strlen(caret) + 1);
        memcpy(caret, at, (size_t)size);
        edit->caret += size;
    }
    edit->anchor = edit->caret;
}

void ev_edit_place(ev_edit *edit, int byte, bool extend)
{
    int length = length_of(edit);
    edit->caret = byte < 0 ? 0 : byte > length ? length : byte;
    if (!extend) {
        edit->anchor = edit->caret;
    }
}

void ev_edit_select_all(ev_edit *edit)
{
    edit->anchor = 0;
    edit->caret = length_of(edit);
}

static void copy_selection(const ev_edit *edit)
{
    char text[EV_EDIT_CAPACITY];
    int from, to;
    get_selection(edit, &from, &to);
    if (from < to) {
        memcpy(text, edit->text + from, (size_t)(to - from));
        text[to - from] = '\0';
        SDL_SetClipboardText(text);
    }
}

static void paste(ev_edit *edit)
{
    char *text = SDL_GetClipboardText();
    if (text) {
        ev_edit_insert(edit, text);
    }
    SDL_free(text);
}

static bool handle_clipboard(ev_edit *edit, SDL_Keycode key)
{
    switch (key) {
    case SDLK_a:
        ev_edit_select_all(edit);
        return true;
    case SDLK_c:
        copy_selection(edit);
        return true;
    case SDLK_x:
        copy_selection(edit);
        erase_selection(edit);
        return true;
    case SDLK_v:
        paste(edit);
        return true;
    default:
        return false;
    }
}

void ev_edit_show(const ev_edit *edit, char *text, size_t size, int *caret, int *anchor)
{
    ev_text_copy(text, size, edit->text);
    int length = (int)strlen(text);
    *caret = SDL_min(edit->caret, length);
    *anchor = SDL_min(edit->anchor, length);
}

static void erase_step(ev_edit *edit, int direction, bool word)
{
    if (erase_selection(edit)) {
        return;
    }
    int other = word ? step_word(edit, edit->caret, direction)
                     : step_character(edit, edit->caret, direction);
    if (other < edit->caret) {
        erase(edit, other, edit->caret);
    } else if (other > edit->caret) {
        erase(edit, edit->caret, other);
    }
}

/* Without Shift, a step from a selection goes to its end. */
static void move_step(ev_edit *edit, int direction, bool word, bool extend)
{
    int from, to;
    get_selection(edit, &from, &to);
    if (from != to && !extend) {
        ev_edit_place(edit, direction < 0 ? from : to, false);
        return;
    }
    int byte = word ? step_word(edit, edit->caret, direction)
                    : step_character(edit, edit->caret, direction);
    ev_edit_place(edit, byte, extend);
}

bool ev_edit_key(ev_edit *edit, SDL_Keycode key, Uint16 modifiers)
{
    bool control = (modifiers & KMOD_CTRL) != 0, shift = (modifiers & KMOD_SHIFT) != 0;
    switch (key) {
    case SDLK_LEFT:
    case SDLK_RIGHT:
        move_step(edit, key == SDLK_LEFT ? -1 : 1, control, shift);
        return true;
    case SDLK_HOME:
    case SDLK_END:
        ev_edit_place(edit, key == SDLK_HOME ? 0 : length_of(edit), shift);
        return true;
    case SDLK_BACKSPACE:
    case SDLK_DELETE:
        erase_step(edit, key == SDLK_BACKSPACE ? -1 : 1, control);
        return true;
    default:
        return control && handle_clipboard(edit, key);
    }
}
