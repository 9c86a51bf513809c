/* The verdict: what is wrong, what it costs and what to do about it. One id with numbers and the
 * words for it; the window, `budget` and its JSON all show the same. */
#pragma once

#include "optics/budget.h"
#include "study/part.h"

typedef enum {
    EV_VERDICT_IN_PLACE, /* moving wins nothing (under 0.05 dB) */
    EV_VERDICT_FEED_MISPLACED,
    EV_VERDICT_SUB_MISPLACED,
    EV_VERDICT_TURNED,    /* a roll or tilt costs more than any move wins: turn it back */
    EV_VERDICT_AS_MEANT,  /* a feed with a beam of its own, in place for it */
    EV_VERDICT_STRUTS,    /* in place; the struts are the loss to mend */
    EV_VERDICT_TOO_SMALL, /* under 10 wavelengths: rays are only a guide */
    EV_VERDICT_DARK,      /* the feed lights nothing useful */
} ev_verdict_id;

typedef struct ev_move {
    ev_part part;
    ev_part_axis axis;
    double by;      /* m, the move to make, rounded to what is worth 0.02 dB */
    double wins_db; /* alone */
} ev_move;

enum { EV_MOVE_CAPACITY = 3 };

/* What can be turned against the design. */
typedef enum { EV_TURN_ROLL, EV_TURN_FEED_TILT, EV_TURN_SUB_TILT, EV_TURN_COUNT } ev_turn;

/* The losses that moving a part does not mend, dB, for the words of a feed in place. */
typedef struct ev_verdict_rest {
    double lighting_db, spill_db, shadow_db, surface_db, other_db;
} ev_verdict_rest;

typedef struct ev_verdict {
    ev_verdict_id id;
    double loss_db;                  /* what all moves together win back */
    double after_dbi;                /* gain on the wanted axis after them */
    ev_move moves[EV_MOVE_CAPACITY]; /* by wins_db, largest first */
    int move_count;
    double feed_only_db; /* sub misplaced: what moving only the feed wins, and that move */
    ev_move feed_only;
    double now_dbi;                              /* gain on the wanted axis as it stands */
    double below_first_db;                       /* as meant: below the first feed's gain */
    double wavelengths;                          /* across the dish */
    double strut_db, strut_half_db, strut_width; /* struts: cost now and at half the width, m */
    ev_turn turn;                                /* turned: what, by how much (rad) */
    double turn_by;
    ev_verdict_rest rest;
    char text[320];   /* first line: what is wrong and what it costs */
    char advice[320]; /* second line: what to do and what it wins */
    /* Emphasis for drawing: byte ranges of `text` to set in semibold. */
    int bold[4][2];
    int bold_count;
} ev_verdict;

/* The verdict on one feed of a design at `frequency`. Takes some hundreds of ev_axis_gain_dbi. */
void ev_verdict_find(const ev_design *design, double frequency, int feed, ev_verdict *verdict);

/* Word for JSON: "in_place", "feed_misplaced", ... */
const char *ev_verdict_word(ev_verdict_id id);

/* Looks whether turning something back wins more than the verdict's moves (verdict_turn.c); if so
 * the verdict becomes that. */
void ev_verdict_weigh_turns(const ev_design *design, double frequency, int feed,
                            ev_verdict *verdict);

/* Puts the verdict's numbers into text, advice and bold (verdict_words.c). `design` names things.
 */
void ev_verdict_word_out(const ev_design *design, int feed, ev_verdict *verdict);
