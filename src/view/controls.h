/* Our own few controls. The one-line text edit knows bytes and caret; Pango tells it where
 * characters and words begin and SDL holds the clipboard. It draws nothing: the Strip does. */
#pragma once

#include <SDL.h>
#include <stdbool.h>
#include <stddef.h>

enum { EV_EDIT_CAPACITY = 256 };

typedef struct ev_edit {
    char text[EV_EDIT_CAPACITY]; /* UTF-8 */
    int caret, anchor;           /* bytes; what lies between them is selected */
} ev_edit;

/* Begins with `text`, all of it selected. */
void ev_edit_start(ev_edit *edit, const char *text);

/* Puts text in place of the selection. Control characters are left out, and so is what does not
 * fit. */
void ev_edit_insert(ev_edit *edit, const char *text);

/* Moving, erasing, selecting, clipboard. False when the key means nothing here. */
bool ev_edit_key(ev_edit *edit, SDL_Keycode key, Uint16 modifiers);

/* The caret to a byte; `extend` keeps the anchor. */
void ev_edit_place(ev_edit *edit, int byte, bool extend);
void ev_edit_select_all(ev_edit *edit);
/* What a drawing needs of it, cut to `size` bytes. */
void ev_edit_show(const ev_edit *edit, char *text, size_t size, int *caret, int *anchor);
