/* Opening, changing, saving: what happens to the design in hand. Answers of the worker and moves of
 * parts are in model_part.c. */
#include "view/model.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

bool ev_model_start(ev_model *model)
{
    *model = (ev_model){0};
    model->history = calloc(1, sizeof *model->history);
    model->study = calloc(1, sizeof *model->study);
    model->worker = ev_worker_create();
    if (!model->history || !model->study || !model->worker) {
        ev_model_end(model);
        return false;
    }
    return true;
}

void ev_model_end(ev_model *model)
{
    if (model->worker) {
        ev_worker_destroy(model->worker);
    }
    ev_scene_destroy(model->scene);
    free(model->history);
    free(model->study);
    *model = (ev_model){0};
}

static bool assign_all(const ev_scene *scene, ev_design *design, const char *const *assignments,
                       int count, ev_diagnostics *diagnostics)
{
    bool good = true;
    for (int i = 0; i < count; ++i) {
        good &= ev_scene_assign(scene, design, 0, assignments[i], diagnostics);
    }
    return good && (count == 0 || ev_scene_check(scene, design, diagnostics));
}

/* A design that nothing is known of yet: numbers at once, and the words with them. */
static void show_new(ev_model *model)
{
    ++model->serial;
    model->has_map = model->has_beams = model->has_gain = false;
    model->map_needs = model->serial;
    model->has_kept = model->has_kept_beam = false;
    model->gain_axis = EV_AXIS_OUT;
    model->feed = 0;
    model->part = EV_PART_FEED;
    model->verdict_serial = 0;
    model->message[0] = '\0';
}

bool ev_model_open(ev_model *model, const char *path, const char *const *assignments,
                   int assignment_count, ev_diagnostics *diagnostics)
{
    ev_scene *scene = ev_scene_load(path, diagnostics);
    if (!scene) {
        return false;
    }
    ev_design design = *ev_scene_design(scene);
    if (!assign_all(scene, &design, assignments, assignment_count, diagnostics)) {
        ev_scene_destroy(scene);
        return false;
    }
    ev_model_close_scene(model);
    model->scene = scene;
    model->design = design;
    model->opened = *ev_scene_design(scene);
    ev_history_start(model->history, ev_scene_design(scene));
    model->saved_id = ev_history_id(model->history);
    if (assignment_count > 0) {
        ev_history_push(model->history, &design, "settings of the command line");
    }
    show_new(model);
    return true;
}

void ev_model_close_scene(ev_model *model)
{
    ev_worker_settle(model->worker); /* its answers may point into the scene */
    ev_model_fetch(model);
    ev_scene_destroy(model->scene);
    model->scene = NULL;
}

bool ev_model_unsaved(const ev_model *model)
{
    return model->scene && ev_history_id(model->history) != model->saved_id;
}

/* Feeds and the subreflector come and go: what was in hand may be gone, and what is known about
 * other feeds is of no use. */
static void keep_to_what_is_there(ev_model *model, int feeds_before)
{
    if (model->design.feed_count != feeds_before) {
        model->has_beams = model->has_kept = model->has_kept_beam = false;
    }
    if (model->feed >= model->design.feed_count) {
        ev_model_select(model, EV_PART_FEED, 0);
    } else if (model->part == EV_PART_SUB && !model->design.sub.present) {
        ev_model_select(model, EV_PART_FEED, model->feed);
    }
}

static bool is_buildable(const ev_design *design)
{
    ev_problem problems[8];
    int count = ev_design_check(design, problems, 8);
    for (int i = 0; i < count; ++i) {
        if (ev_problem_is_error(problems[i].id)) {
            return false;
        }
    }
    return true;
}

/* The first error in the words of the scene's own check. */
static void explain(ev_model *model, const ev_design *design)
{
    snprintf(model->message, sizeof model->message, "No antenna can be built that way.");
    ev_diagnostics *diagnostics = malloc(sizeof *diagnostics);
    if (!diagnostics) {
        return;
    }
    ev_diagnostics_init(diagnostics);
    ev_worker_finish(model->worker, EV_JOB_SAVE);
    ev_scene_check(model->scene, design, diagnostics);
    for (int i = 0; i < diagnostics->count; ++i) {
        if (diagnostics->items[i].severity == EV_SEVERITY_ERROR) {
            snprintf(model->message, sizeof model->message, "%s", diagnostics->items[i].text);
            break;
        }
    }
    ev_diagnostics_clear(diagnostics);
    free(diagnostics);
}

bool ev_model_try(ev_model *model, const ev_design *design, bool own_move)
{
    if (!is_buildable(design)) {
        explain(model, design);
        return false;
    }
    int feeds = model->design.feed_count;
    model->message[0] = '\0';
    model->design = *design;
    keep_to_what_is_there(model, feeds);
    ++model->serial;
    model->map_needs = own_move ? model->map_needs : model->serial;
    return true;
}

void ev_model_note(ev_model *model, const char *words)
{
    ev_history_push(model->history, &model->design, words);
}

static void step_history(ev_model *model, const ev_design *design, const char *verb,
                         const char *words)
{
    if (!design) {
        snprintf(model->message, sizeof model->message, "Nothing to %s", verb);
        return;
    }
    int feeds = model->design.feed_count;
    model->design = *design;
    keep_to_what_is_there(model, feeds);
    model->map_needs = ++model->serial;
    snprintf(model->message, sizeof model->message, "%s: %s",
             strcmp(verb, "undo") == 0 ? "Undid" : "Did again", words);
}

void ev_model_undo(ev_model *model)
{
    const char *words = "";
    const ev_design *design = ev_history_undo(model->history, &words);
    step_history(model, design, "undo", words);
}

void ev_model_redo(ev_model *model)
{
    const char *words = "";
    const ev_design *design = ev_history_redo(model->history, &words);
    step_history(model, design, "do again", words);
}

void ev_model_keep(ev_model *model)
{
    model->has_kept = !model->has_kept;
    model->kept = model->study->budget;
    model->has_kept_beam = model->has_kept && !ev_model_beams_stale(model);
    model->kept_beam = model->beams[model->feed];
    snprintf(model->message, sizeof model->message, "%s",
             model->has_kept ? "Kept this state to compare with" : "Forgot the kept state");
}

void ev_model_save(ev_model *model)
{
    if (!ev_model_unsaved(model)) {
        snprintf(model->message, sizeof model->message, "Nothing to save");
        return;
    }
    ev_job *job = calloc(1, sizeof *job);
    if (!job) {
        snprintf(model->message, sizeof model->message, "No memory to save the scene");
        return;
    }
    job->serial = ev_history_id(model->history);
    job->design = model->design;
    job->scene = model->scene;
    ev_worker_ask(model->worker, EV_JOB_SAVE, job);
    free(job);
}

bool ev_model_compute(ev_model *model, ev_stage_mode stage, bool moving)
{
    bool first = model->verdict_serial == 0;
    ev_study_want want = {
        .feed = model->feed, .verdict = first, .aperture = true, .coarse = moving};
    want.rays = stage == EV_STAGE_SPACE ? EV_STUDY_RAYS_SPACE : EV_STUDY_RAYS_SECTION;
    want.ray_count = stage == EV_STAGE_SPACE ? EV_SPACE_RAYS : EV_SECTION_RAYS;
    bool same = want.feed == model->want.feed && want.rays == model->want.rays &&
                (want.coarse || !model->want.coarse);
    if (model->study_serial == model->serial && same && !first) {
        return false;
    }
    ev_study_compute(&model->design, model->design.frequencies[0], want, model->study);
    model->want = want;
    model->study_serial = model->serial;
    if (first) {
        model->verdict = model->study->verdict;
        model->verdict_serial = model->serial;
        if (model->verdict.id == EV_VERDICT_SUB_MISPLACED) {
            ev_model_select(model, EV_PART_SUB, model->feed);
        }
        model->worded_dbi = model->study->budget.feeds[model->feed].gain_on_axis_dbi;
    }
    return true;
}
