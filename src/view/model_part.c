/* Moves of the parts along their own axes, and what the worker answers about them. */
#include "view/model.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>

static const double reword_db = 0.1; /* a change of gain that makes the words wrong */

double ev_model_place(const ev_model *model, ev_part part, ev_part_axis axis)
{
    return ev_part_place(&model->design, &model->study->antenna, part, model->feed, axis);
}

ev_design ev_model_moved(const ev_model *model, const ev_design *from, ev_part part,
                         ev_part_axis axis, double place)
{
    ev_design moved = *from;
    double by = place - ev_part_place(from, &model->study->antenna, part, model->feed, axis);
    ev_part_move(&moved, &model->study->antenna, part, model->feed, axis, by);
    return moved;
}

void ev_model_move_words(const ev_model *model, ev_part part, ev_part_axis axis,
                         char words[EV_WORDS_CAPACITY])
{
    const char *name = part == EV_PART_SUB ? "subreflector" : "feed";
    if (part == EV_PART_FEED && model->design.feed_count > 1) {
        snprintf(words, EV_WORDS_CAPACITY, "feed %.30s %s", model->design.feeds[model->feed].name,
                 ev_axis_word(axis));
        return;
    }
    snprintf(words, EV_WORDS_CAPACITY, "%s %s", name, ev_axis_word(axis));
}

void ev_model_obey(ev_model *model)
{
    const ev_verdict *verdict = &model->verdict;
    if (verdict->move_count == 0 || ev_model_stale(model)) {
        snprintf(model->message, sizeof model->message, "%s",
                 ev_model_stale(model) ? "Still working out where it belongs"
                                       : "Nothing to move: it is in place");
        return;
    }
    ev_design moved = model->design;
    for (int i = 0; i < verdict->move_count; ++i) {
        const ev_move *move = &verdict->moves[i];
        ev_part_move(&moved, &model->study->antenna, move->part, model->feed, move->axis, move->by);
    }
    if (ev_model_try(model, &moved, false)) {
        ev_model_note(model, "moved where it belongs");
        snprintf(model->message, sizeof model->message, "Moved where it belongs");
    }
}

void ev_model_select(ev_model *model, ev_part part, int feed)
{
    if (part == model->part && feed == model->feed) {
        return;
    }
    if (feed != model->feed) {
        model->verdict_serial = 0; /* the words are about another feed */
    }
    model->part = part;
    model->feed = feed;
    model->has_map = false;
}

void ev_model_next_part(ev_model *model)
{
    if (model->part == EV_PART_FEED && model->feed + 1 < model->design.feed_count) {
        ev_model_select(model, EV_PART_FEED, model->feed + 1);
    } else if (model->part == EV_PART_FEED && model->design.sub.present) {
        ev_model_select(model, EV_PART_SUB, model->feed);
    } else {
        ev_model_select(model, EV_PART_FEED, 0);
    }
}

bool ev_model_stale(const ev_model *model)
{
    return model->verdict_serial != model->serial;
}

bool ev_model_map_stale(const ev_model *model)
{
    return !model->has_map || model->map_serial < model->map_needs;
}

static void ask(ev_model *model, ev_job_kind kind)
{
    ev_job *job = calloc(1, sizeof *job);
    if (!job) {
        return;
    }
    job->serial = model->serial;
    job->design = model->design;
    job->frequency = model->design.frequencies[0];
    job->feed = model->feed;
    job->part = model->part;
    job->axis[0] = EV_AXIS_OUT;
    job->axis[1] = EV_AXIS_UP;
    ev_worker_ask(model->worker, kind, job);
    free(job);
}

void ev_model_ask(ev_model *model, bool moving)
{
    if (!model->scene || model->study_serial != model->serial) {
        return;
    }
    if (ev_model_map_stale(model) && !ev_worker_busy(model->worker, EV_JOB_MAP)) {
        ask(model, EV_JOB_MAP);
    }
    double gain = model->study->budget.feeds[model->feed].gain_on_axis_dbi;
    bool wrong = !(fabs(gain - model->worded_dbi) <= reword_db);
    bool busy = ev_worker_busy(model->worker, EV_JOB_VERDICT);
    if (ev_model_stale(model) && !busy && (!moving || wrong)) {
        model->worded_dbi = gain;
        ask(model, EV_JOB_VERDICT);
    }
}

static bool take_map(ev_model *model, const ev_job *job)
{
    if (job->part != model->part || job->feed != model->feed) {
        return false;
    }
    model->map = job->map;
    model->has_map = true;
    model->map_serial = job->serial;
    return true;
}

static bool take_verdict(ev_model *model, const ev_job *job)
{
    if (job->feed != model->feed) {
        return false;
    }
    model->verdict = job->verdict;
    model->verdict_serial = job->serial;
    return true;
}

static bool take_save(ev_model *model, const ev_job *job)
{
    if (job->good) {
        model->saved_id = job->serial;
        snprintf(model->message, sizeof model->message, "Saved");
    } else {
        snprintf(model->message, sizeof model->message, "Not saved: %s", job->message);
    }
    return true;
}

static bool take_picture(ev_model *model, const ev_job *job)
{
    if (job->good) {
        const char *slash = job->path;
        for (const char *c = job->path; *c; ++c) {
            slash = *c == '/' ? c + 1 : slash;
        }
        snprintf(model->message, sizeof model->message, "Picture written: %.120s", slash);
    } else {
        snprintf(model->message, sizeof model->message, "No picture: %s", job->message);
    }
    return true;
}

bool ev_model_fetch(ev_model *model)
{
    static bool (*const takers[EV_JOB_COUNT])(ev_model *, const ev_job *) = {
        [EV_JOB_MAP] = take_map,
        [EV_JOB_VERDICT] = take_verdict,
        [EV_JOB_SAVE] = take_save,
        [EV_JOB_PICTURE] = take_picture,
    };
    bool changed = false;
    ev_job *job = malloc(sizeof *job);
    for (int kind = 0; job && kind < EV_JOB_COUNT; ++kind) {
        if (ev_worker_fetch(model->worker, (ev_job_kind)kind, job)) {
            changed |= takers[kind](model, job);
        }
    }
    free(job);
    return changed;
}

bool ev_model_waiting(ev_model *model)
{
    for (int kind = 0; kind < EV_JOB_COUNT; ++kind) {
        if (ev_worker_busy(model->worker, (ev_job_kind)kind)) {
            return true;
        }
    }
    return model->scene && (ev_model_stale(model) || ev_model_map_stale(model) ||
                            model->study_serial != model->serial);
}
