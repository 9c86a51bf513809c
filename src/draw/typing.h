/* A line being typed into: frame, selection, text, caret. Used by the Strip, the drawer and the
 * list of actions. Internal to draw. */
#pragma once

#include "draw/pen.h"

typedef struct ev_typing {
    const char *name; /* of the text's box */
    const char *text;
    ev_font font;
    int caret, anchor; /* bytes; what lies between them is selected */
    bool idle;         /* no caret: shown, not typed into */
    bool wrong;        /* not legal as it stands */
    const char *hint;  /* in place of no text; may be NULL */
    ev_rect frame;
    double x, baseline; /* of the text */
} ev_typing;

/* Text that is longer than its frame moves so that the caret stays in sight. */
void ev_typing_draw(ev_pen *pen, const ev_typing *typing);
/* The byte under page x. */
int ev_typing_index(const ev_typing *typing, double x);
