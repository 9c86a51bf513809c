/* The scene in hand: its document, the design as it stands, undo, and what is known about it (the
 * study of this very design; verdict and loss map as they come from the worker). Everything the
 * window does to an antenna goes through here. Knows nothing of pixels. */
#pragma once

#include "draw/draw.h"
#include "scene/scene.h"
#include "study/study.h"
#include "view/history.h"
#include "view/worker.h"

typedef struct ev_model {
    ev_scene *scene; /* NULL: nothing open */
    ev_design design;
    ev_design opened; /* as it was opened: where the marks of the tapes stand */
    ev_history *history;
    unsigned saved_id; /* the moment that is in the file */

    unsigned serial; /* of the design; goes up with each change */
    ev_study *study; /* of the design numbered study_serial */
    unsigned study_serial;
    ev_study_want want;

    ev_verdict verdict;
    unsigned verdict_serial; /* the design it is about */
    double worded_dbi;       /* gain when it was asked for */
    ev_loss_map map;
    bool has_map;
    unsigned map_serial; /* the design the map is about */
    unsigned map_needs;  /* the last one that changed by more than a move of the part in hand */

    ev_beam_curve beams[EV_FEED_CAPACITY];
    bool has_beams;
    unsigned beams_serial;
    ev_limit limit; /* that the side lobes of a dish this size have to keep */
    ev_gain_curve gain;
    bool has_gain, wants_gain; /* wanted while the Cut plate is shown */
    unsigned gain_serial;
    unsigned answers;       /* goes up with each beam or gain curve received */
    ev_part_axis gain_axis; /* the one last in hand */

    bool has_kept, has_kept_beam;
    ev_budget kept;
    ev_beam_curve kept_beam;
    int feed;
    ev_part part;
    ev_worker *worker;
    char message[200]; /* what the last operation has to say, or "" */
} ev_model;

enum { EV_SECTION_RAYS = 100, EV_SPACE_RAYS = 220 };

/* False when there is no memory or no thread. */
bool ev_model_start(ev_model *model);
void ev_model_end(ev_model *model);

/* Replaces what is open; on failure (diagnostics) what was open stays. */
bool ev_model_open(ev_model *model, const char *path, const char *const *assignments,
                   int assignment_count, ev_diagnostics *diagnostics);
void ev_model_close_scene(ev_model *model);
bool ev_model_unsaved(const ev_model *model);

/* Makes `design` the one that stands if an antenna can be built from it; else says why in
 * model->message and changes nothing. `own_move`: only the part in hand moved along the axes of its
 * loss map, which therefore still holds. */
bool ev_model_try(ev_model *model, const ev_design *design, bool own_move);
/* Ends a change: undo can take it back from now on. */
void ev_model_note(ev_model *model, const char *words);

void ev_model_undo(ev_model *model);
void ev_model_redo(ev_model *model);
/* Keeps the numbers to compare with, or forgets them. */
void ev_model_keep(ev_model *model);
void ev_model_save(ev_model *model);
/* Performs the moves of the verdict. */
void ev_model_obey(ev_model *model);
/* Feed after feed, then the subreflector. */
void ev_model_next_part(ev_model *model);
void ev_model_select(ev_model *model, ev_part part, int feed);

/* Brings the study up to date; true when it was not. `moving`: during a drag, with a coarser
 * picture of the aperture; the numbers are the same. */
bool ev_model_compute(ev_model *model, ev_stage_mode stage, bool moving);
/* Asks the worker for what is out of date; `moving`: during a drag, when only words that are more
 * than 0.1 dB off are asked for. */
void ev_model_ask(ev_model *model, bool moving);
/* Takes the worker's answers; true when something to be shown changed. */
bool ev_model_fetch(ev_model *model);
/* Is anything still to come? */
bool ev_model_waiting(ev_model *model);
bool ev_model_stale(const ev_model *model);     /* the verdict */
bool ev_model_map_stale(const ev_model *model); /* or not there yet */
bool ev_model_beams_stale(const ev_model *model);
bool ev_model_gain_stale(const ev_model *model); /* false while nobody wants it */
/* The axis that the Cut plate is about. */
void ev_model_cut_along(ev_model *model, ev_part_axis axis);

/* Where the part in hand sits along an axis of its own, m. */
double ev_model_place(const ev_model *model, ev_part part, ev_part_axis axis);
/* `from` with the part moved to `place` along an axis. */
ev_design ev_model_moved(const ev_model *model, const ev_design *from, ev_part part,
                         ev_part_axis axis, double place);
/* "feed out", "subreflector up": the words of a move. */
void ev_model_move_words(const ev_model *model, ev_part part, ev_part_axis axis,
                         char words[EV_WORDS_CAPACITY]);
/* The name of the part in hand among the hot boxes: "part.feed.0", "part.sub". */
void ev_model_part_name(const ev_model *model, char name[32]);
