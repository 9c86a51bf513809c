/* The worker's thread and its slots. */
#include "view/worker.h"

#include <math.h>
#include <omp.h>
#include <stdio.h>
#include <stdlib.h>

typedef struct job_slot {
    bool waiting, running, answered;
    ev_job request, answer;
} job_slot;

struct ev_worker {
    SDL_Thread *thread;
    SDL_mutex *mutex;
    SDL_cond *changed;
    bool leaving;
    Uint32 event;
    job_slot slots[EV_JOB_COUNT];
    ev_job running; /* the thread's own copy */
};

/* The plane that most beams point apart in, 0 or a right angle from the symmetry plane. */
static double plane_of_beams(const ev_antenna *antenna)
{
    double up = 0.0, across = 0.0;
    for (int i = 0; i < antenna->feed_count; ++i) {
        up = fmax(up, fabs(antenna->feeds[i].wanted.x - antenna->feeds[0].wanted.x));
        across = fmax(across, fabs(antenna->feeds[i].wanted.y - antenna->feeds[0].wanted.y));
    }
    return across > up ? 0.5 * EV_PI : 0.0;
}

static void run_beams(ev_job *job)
{
    ev_antenna antenna;
    double span = 0.0;
    ev_antenna_build(&job->design, job->frequency, &antenna);
    job->beams = calloc((size_t)antenna.feed_count, sizeof *job->beams);
    job->good = job->beams != NULL;
    for (int i = 0; i < antenna.feed_count; ++i) {
        span = fmax(span, ev_beam_curve_span(&antenna, i));
    }
    for (int i = 0; job->good && i < antenna.feed_count; ++i) {
        ev_beam_curve_compute(&antenna, i, plane_of_beams(&antenna), span, job->quality,
                              &job->beams[i]);
    }
}

static void run_gain(ev_job *job)
{
    ev_gain_curve_compute(&job->design, job->frequency, job->part, job->feed, job->axis[0],
                          job->extent, &job->gain);
    job->good = true;
}

static void run_map(ev_job *job)
{
    ev_loss_map_compute(&job->design, job->frequency, job->part, job->feed, job->axis[0],
                        job->axis[1], 0.0, &job->map);
    job->good = true;
}

static void run_verdict(ev_job *job)
{
    ev_verdict_find(&job->design, job->frequency, job->feed, &job->verdict);
    job->good = true;
}

static void run_save(ev_job *job)
{
    ev_diagnostics *diagnostics = malloc(sizeof *diagnostics);
    if (!diagnostics) {
        job->good = false;
        snprintf(job->message, sizeof job->message, "no memory to save the scene");
        return;
    }
    ev_diagnostics_init(diagnostics);
    job->good = ev_scene_save(job->scene, &job->design, *job->path ? job->path : NULL, diagnostics);
    if (!job->good) {
        snprintf(job->message, sizeof job->message, "%s",
                 diagnostics->count > 0 ? diagnostics->items[0].text : "The scene was not saved.");
    }
    ev_diagnostics_clear(diagnostics);
    free(diagnostics);
}

static void run_picture(ev_job *job)
{
    cairo_status_t status = cairo_surface_write_to_png(job->pixels, job->path);
    cairo_surface_destroy(job->pixels);
    job->pixels = NULL;
    job->good = status == CAIRO_STATUS_SUCCESS;
    if (!job->good) {
        remove(job->path);
        snprintf(job->message, sizeof job->message, "%s", cairo_status_to_string(status));
    }
}

static void (*const runners[EV_JOB_COUNT])(ev_job *) = {
    [EV_JOB_BEAMS] = run_beams,     [EV_JOB_GAIN] = run_gain, [EV_JOB_MAP] = run_map,
    [EV_JOB_VERDICT] = run_verdict, [EV_JOB_SAVE] = run_save, [EV_JOB_PICTURE] = run_picture,
};

/* Files first, they are what a person waits for on leaving; then what is seen to lag. */
static const ev_job_kind order[EV_JOB_COUNT] = {EV_JOB_SAVE, EV_JOB_PICTURE, EV_JOB_BEAMS,
                                                EV_JOB_MAP,  EV_JOB_VERDICT, EV_JOB_GAIN};

static int next_kind(const ev_worker *worker)
{
    for (int i = 0; i < EV_JOB_COUNT; ++i) {
        bool file = order[i] == EV_JOB_SAVE || order[i] == EV_JOB_PICTURE;
        if (worker->slots[order[i]].waiting && (file || !worker->leaving)) {
            return (int)order[i];
        }
    }
    return -1;
}

static void announce(const ev_worker *worker)
{
    SDL_Event event = {.type = worker->event};
    SDL_PushEvent(&event);
}

/* With the mutex held; lets go of it while the work runs. */
static void run_slot(ev_worker *worker, int kind)
{
    job_slot *slot = &worker->slots[kind];
    worker->running = slot->request;
    slot->waiting = false;
    slot->running = true;
    SDL_UnlockMutex(worker->mutex);
    runners[kind](&worker->running);
    SDL_LockMutex(worker->mutex);
    slot->running = false;
    if (slot->answered) { /* nobody took the last one */
        free(slot->answer.beams);
    }
    slot->answered = true;
    slot->answer = worker->running;
    SDL_CondBroadcast(worker->changed);
    announce(worker);
}

static int run_worker(void *data)
{
    ev_worker *worker = data;
    omp_set_num_threads(1); /* the other core belongs to the frame */
    SDL_SetThreadPriority(SDL_THREAD_PRIORITY_LOW);
    SDL_LockMutex(worker->mutex);
    for (;;) {
        int kind = next_kind(worker);
        if (kind >= 0) {
            run_slot(worker, kind);
        } else if (worker->leaving) {
            break;
        } else {
            SDL_CondWait(worker->changed, worker->mutex);
        }
    }
    SDL_UnlockMutex(worker->mutex);
    return 0;
}

ev_worker *ev_worker_create(void)
{
    ev_worker *worker = calloc(1, sizeof *worker);
    if (!worker) {
        return NULL;
    }
    worker->event = SDL_RegisterEvents(1);
    worker->mutex = SDL_CreateMutex();
    worker->changed = SDL_CreateCond();
    if (worker->mutex && worker->changed) {
        worker->thread = SDL_CreateThread(run_worker, "worker", worker);
    }
    if (!worker->thread) {
        ev_worker_destroy(worker);
        return NULL;
    }
    return worker;
}

void ev_worker_destroy(ev_worker *worker)
{
    if (worker->thread) {
        SDL_LockMutex(worker->mutex);
        worker->leaving = true;
        SDL_CondBroadcast(worker->changed);
        SDL_UnlockMutex(worker->mutex);
        SDL_WaitThread(worker->thread, NULL);
    }
    for (int i = 0; i < EV_JOB_COUNT; ++i) {
        if (worker->slots[i].answered) {
            free(worker->slots[i].answer.beams);
        }
    }
    SDL_DestroyCond(worker->changed);
    SDL_DestroyMutex(worker->mutex);
    free(worker);
}

void ev_worker_ask(ev_worker *worker, ev_job_kind kind, const ev_job *job)
{
    SDL_LockMutex(worker->mutex);
    job_slot *slot = &worker->slots[kind];
    if (slot->waiting && slot->request.pixels) {
        cairo_surface_destroy(slot->request.pixels);
    }
    slot->request = *job;
    slot->waiting = true;
    SDL_CondBroadcast(worker->changed);
    SDL_UnlockMutex(worker->mutex);
}

bool ev_worker_busy(ev_worker *worker, ev_job_kind kind)
{
    SDL_LockMutex(worker->mutex);
    bool busy = worker->slots[kind].waiting || worker->slots[kind].running;
    SDL_UnlockMutex(worker->mutex);
    return busy;
}

bool ev_worker_fetch(ev_worker *worker, ev_job_kind kind, ev_job *job)
{
    SDL_LockMutex(worker->mutex);
    job_slot *slot = &worker->slots[kind];
    bool answered = slot->answered;
    if (answered) {
        *job = slot->answer;
        slot->answered = false;
    }
    SDL_UnlockMutex(worker->mutex);
    return answered;
}

void ev_worker_finish(ev_worker *worker, ev_job_kind kind)
{
    SDL_LockMutex(worker->mutex);
    while (worker->slots[kind].waiting || worker->slots[kind].running) {
        SDL_CondWait(worker->changed, worker->mutex);
    }
    SDL_UnlockMutex(worker->mutex);
}

static bool is_idle(const ev_worker *worker)
{
    for (int i = 0; i < EV_JOB_COUNT; ++i) {
        if (worker->slots[i].waiting || worker->slots[i].running) {
            return false;
        }
    }
    return true;
}

void ev_worker_settle(ev_worker *worker)
{
    SDL_LockMutex(worker->mutex);
    while (!is_idle(worker)) {
        SDL_CondWait(worker->changed, worker->mutex);
    }
    SDL_UnlockMutex(worker->mutex);
}

Uint32 ev_worker_event(const ev_worker *worker)
{
    return worker->event;
}
