/* Undo: a ring of whole designs, each with the words of the change that led to it. */
#pragma once

#include "optics/design.h"

#include <stdbool.h>

enum { EV_HISTORY_CAPACITY = 100, EV_WORDS_CAPACITY = 64 };

typedef struct ev_moment {
    ev_design design;
    char words[EV_WORDS_CAPACITY]; /* "feed out"; of the first moment "" */
    unsigned id;                   /* never 0, never used twice */
} ev_moment;

typedef struct ev_history {
    ev_moment moments[EV_HISTORY_CAPACITY]; /* a ring from `first` */
    int first, count;
    int at; /* the moment on screen, 0 to count - 1 */
    unsigned next_id;
} ev_history;

/* One moment: the design as opened. */
void ev_history_start(ev_history *history, const ev_design *design);

/* A change: forgets what had been undone, and the oldest moment when the ring is full. */
void ev_history_push(ev_history *history, const ev_design *design, const char *words);

/* Goes on with the last change instead of adding one (several nudges are one change). */
void ev_history_amend(ev_history *history, const ev_design *design);

/* Steps back or forward; NULL when there is nothing to step to. *words is of the change undone or
 * done again. */
const ev_design *ev_history_undo(ev_history *history, const char **words);
const ev_design *ev_history_redo(ev_history *history, const char **words);

bool ev_history_can_undo(const ev_history *history);
bool ev_history_can_redo(const ev_history *history);

/* Which moment is on screen: equal ids are equal designs. */
unsigned ev_history_id(const ev_history *history);
