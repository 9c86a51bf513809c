/* What the worker is asked about the design in hand, and what becomes of its answers. */
#include "view/model.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

static const double reword_db = 0.1; /* a change of gain that makes the words wrong */

bool ev_model_stale(const ev_model *model)
{
    return model->verdict_serial != model->serial;
}

bool ev_model_map_stale(const ev_model *model)
{
    return !model->has_map || model->map_serial < model->map_needs;
}

bool ev_model_beams_stale(const ev_model *model)
{
    return !model->has_beams || model->beams_serial != model->serial;
}

bool ev_model_gain_stale(const ev_model *model)
{
    return model->wants_gain && (!model->has_gain || model->gain_serial != model->serial ||
                                 model->gain.axis != model->gain_axis);
}

void ev_model_cut_along(ev_model *model, ev_part_axis axis)
{
    model->gain_axis = axis;
}

static void ask(ev_model *model, ev_job_kind kind, bool moving)
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
    job->axis[0] = kind == EV_JOB_GAIN ? model->gain_axis : EV_AXIS_OUT;
    job->axis[1] = EV_AXIS_UP;
    job->extent = model->has_map ? model->map.extent : 2.0 * model->study->antenna.wavelength;
    job->quality = moving ? EV_BEAM_COARSE : EV_BEAM_EXACT;
    ev_worker_ask(model->worker, kind, job);
    free(job);
}

void ev_model_ask(ev_model *model, bool moving)
{
    if (!model->scene || model->study_serial != model->serial) {
        return;
    }
    if (ev_model_beams_stale(model) && !ev_worker_busy(model->worker, EV_JOB_BEAMS)) {
        ask(model, EV_JOB_BEAMS, moving);
    }
    if (ev_model_map_stale(model) && !ev_worker_busy(model->worker, EV_JOB_MAP)) {
        ask(model, EV_JOB_MAP, moving);
    }
    if (ev_model_gain_stale(model) && !ev_worker_busy(model->worker, EV_JOB_GAIN)) {
        ask(model, EV_JOB_GAIN, moving);
    }
    double gain = model->study->budget.feeds[model->feed].gain_on_axis_dbi;
    bool wrong = !(fabs(gain - model->worded_dbi) <= reword_db);
    bool busy = ev_worker_busy(model->worker, EV_JOB_VERDICT);
    if (ev_model_stale(model) && !busy && (!moving || wrong)) {
        model->worded_dbi = gain;
        ask(model, EV_JOB_VERDICT, moving);
    }
}

/* Coarse beams of a drag count as old once it is over. */
static bool take_beams(ev_model *model, const ev_job *job)
{
    if (!job->good || !model->scene || job->design.feed_count != model->design.feed_count) {
        free(job->beams);
        return false;
    }
    memcpy(model->beams, job->beams, (size_t)job->design.feed_count * sizeof *job->beams);
    free(job->beams);
    double wavelengths = job->design.main.diameter * job->frequency / EV_LIGHT_SPEED;
    model->limit = ev_limit_s580(wavelengths);
    if (!ev_limit_applies(&model->limit)) {
        model->limit = ev_limit_s465(wavelengths);
    }
    model->has_beams = true;
    ++model->answers;
    model->beams_serial = job->quality == EV_BEAM_EXACT ? job->serial : 0;
    return true;
}

static bool take_gain(ev_model *model, const ev_job *job)
{
    if (job->part != model->part || job->feed != model->feed) {
        return false;
    }
    model->gain = job->gain;
    model->has_gain = true;
    ++model->answers;
    model->gain_serial = job->serial;
    return true;
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
        [EV_JOB_BEAMS] = take_beams,     [EV_JOB_GAIN] = take_gain, [EV_JOB_MAP] = take_map,
        [EV_JOB_VERDICT] = take_verdict, [EV_JOB_SAVE] = take_save, [EV_JOB_PICTURE] = take_picture,
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
