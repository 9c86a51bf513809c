/* One thread for what is too slow for a frame: beams, gain curve, loss map, verdict, PNG files,
 * saving. A slot a kind of work; the newest request of a kind wins. Answers are fetched by the
 * window's thread, which is woken by an SDL event of its own type. */
#pragma once

#include "base/diagnostic.h"
#include "scene/scene.h"
#include "study/beam_curve.h"
#include "study/loss_map.h"
#include "study/verdict.h"

#include <SDL.h>
#include <cairo.h>

typedef enum {
    EV_JOB_BEAMS,
    EV_JOB_GAIN,
    EV_JOB_MAP,
    EV_JOB_VERDICT,
    EV_JOB_SAVE,
    EV_JOB_PICTURE,
    EV_JOB_COUNT
} ev_job_kind;

enum { EV_JOB_PATH_CAPACITY = 1024 };

typedef struct ev_job {
    unsigned serial; /* of the design it is about */
    ev_design design;
    double frequency;
    int feed;
    ev_part part;            /* map */
    ev_part_axis axis[2];    /* map; gain: the first */
    double extent;           /* gain, m */
    ev_beam_quality quality; /* beams */
    ev_scene *scene;         /* save; nobody else touches it meanwhile */
    cairo_surface_t *pixels; /* picture; destroyed by the worker */
    char path[EV_JOB_PATH_CAPACITY];
    /* the answer */
    bool good;
    ev_loss_map map;
    ev_verdict verdict;
    ev_gain_curve gain;
    ev_beam_curve *beams; /* of each feed; malloc'd, goes to who fetches the answer */
    char message[160];    /* save, picture: why not, when not good */
} ev_job;

typedef struct ev_worker ev_worker;

/* NULL when no thread can be had. */
ev_worker *ev_worker_create(void);
/* Finishes saving and pictures that are under way, drops the rest. */
void ev_worker_destroy(ev_worker *worker);

/* Replaces a request of the kind that has not begun. */
void ev_worker_ask(ev_worker *worker, ev_job_kind kind, const ev_job *job);

/* Is a request of the kind waiting or under way? */
bool ev_worker_busy(ev_worker *worker, ev_job_kind kind);

/* Hands over an answer once; false when there is none. */
bool ev_worker_fetch(ev_worker *worker, ev_job_kind kind, ev_job *job);

/* Waits until nothing of the kind is waiting or under way; or nothing at all. */
void ev_worker_finish(ev_worker *worker, ev_job_kind kind);
void ev_worker_settle(ev_worker *worker);

/* The type of the event that says an answer is there. */
Uint32 ev_worker_event(const ev_worker *worker);
