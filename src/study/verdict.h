/* The verdict: what is wrong, what it costs and what to do about it. One id with numbers and the
 * words for it; the window, `budget` and its JSON all show the same. */
#pragma once

#include "optics/antenna.h"
#include "optics/budget.h"

typedef enum {
    EV_VERDICT_IN_PLACE, /* moving wins nothing (under 0.02 dB) */
    EV_VERDICT_FEED_MISPLACED,
    EV_VERDICT_SUB_MISPLACED,
    EV_VERDICT_TOO_SMALL, /* under 10 wavelengths: rays are only a guide */
    EV_VERDICT_DARK,      /* the feed lights nothing useful */
} ev_verdict_id;

typedef enum { EV_PART_FEED, EV_PART_SUB } ev_part;

/* A part's own axes. Feed: out = away from what it lights (as defocus), up = square to it in the
 * symmetry plane (toward +x), across = the third (+y). Sub: out = along +z away from the dish,
 * up = +x, across = +y. */
typedef enum { EV_AXIS_OUT, EV_AXIS_UP, EV_AXIS_ACROSS, EV_AXIS_COUNT } ev_part_axis;

typedef struct ev_move {
    ev_part part;
    ev_part_axis axis;
    double by;      /* m, the move to make, rounded to what is worth 0.02 dB */
    double wins_db; /* alone */
} ev_move;

enum { EV_MOVE_CAPACITY = 3 };

typedef struct ev_verdict {
    ev_verdict_id id;
    double loss_db;                  /* what all moves together win back */
    double after_dbi;                /* gain on the wanted axis after them */
    ev_move moves[EV_MOVE_CAPACITY]; /* by wins_db, largest first */
    int move_count;
    double feed_only_db; /* sub misplaced: what moving only the feed wins, and that move */
    ev_move feed_only;
    char text[320];   /* first line: what is wrong and what it costs */
    char advice[320]; /* second line: what to do and what it wins */
    /* Emphasis for drawing: byte ranges of `text` to set in semibold. */
    int bold[4][2];
    int bold_count;
} ev_verdict;

/* The verdict on one feed of a design at `frequency`. Takes some hundreds of ev_axis_gain_dbi. */
void ev_verdict_find(const ev_design *design, double frequency, int feed, ev_verdict *verdict);

/* Word for JSON: "in_place", "feed_misplaced", ...; "feed"/"sub"; "out"/"up"/"across". */
const char *ev_verdict_word(ev_verdict_id id);
const char *ev_part_word(ev_part part);
const char *ev_axis_word(ev_part_axis axis);

/* Unit direction of a part's axis in the antenna frame. */
ev_vec3 ev_part_axis_direction(const ev_antenna *antenna, ev_part part, int feed,
                               ev_part_axis axis);

/* Displaces a part of the design along its axis by `by` m (feeds: `out` goes into defocus, the rest
 * into shift; sub: shift). */
void ev_part_move(ev_design *design, const ev_antenna *antenna, ev_part part, int feed,
                  ev_part_axis axis, double by);

/* Where the part sits from nominal along its axis, m. */
double ev_part_place(const ev_design *design, const ev_antenna *antenna, ev_part part, int feed,
                     ev_part_axis axis);
