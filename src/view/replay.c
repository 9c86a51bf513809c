/* Reading replays: lines to steps, with every mistake at its place. */
#include "view/replay.h"

#include <errno.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

enum { REPLAY_SIZE_LIMIT = 1 << 20 };

static void complain(ev_diagnostics *diagnostics, const char *name, const ev_step *step, int column,
                     int width, const char *what)
{
    ev_place place = {.file = name,
                      .line = step->line,
                      .column = column,
                      .source = step->source,
                      .width = width < 1 ? 1 : width};
    ev_diagnose(diagnostics, EV_SEVERITY_ERROR, "replay", &place, "%s", what);
}

static double read_number(const char *text)
{
    char *end;
    double value = strtod(text, &end);
    return *text && *end == '\0' && isfinite(value) ? value : NAN;
}

static bool ends_line(const char *at)
{
    return *at == '\0' || *at == '#';
}

/* Cuts the line at spaces; the last token a verb takes may be the rest of the line. */
static void cut_tokens(ev_step *step, int rest_at)
{
    char *at = step->copy;
    step->token_count = 0;
    for (;;) {
        at += strspn(at, " \t");
        if (ends_line(at) || step->token_count == EV_TOKEN_CAPACITY) {
            break;
        }
        ev_token *token = &step->tokens[step->token_count++];
        token->text = at;
        token->column = (int)(at - step->copy) + 1;
        if (step->token_count - 1 == rest_at) {
            char *end = at + strlen(at);
            while (end > at && (end[-1] == ' ' || end[-1] == '\t')) {
                *--end = '\0';
            }
            token->number = NAN;
            break;
        }
        at += strcspn(at, " \t");
        if (*at) {
            *at++ = '\0';
        }
        token->number = read_number(token->text);
    }
}

static bool fits(const ev_step *step, const char *arguments)
{
    int wanted = (int)strlen(arguments);
    if (step->token_count != wanted + 1) {
        return false;
    }
    for (int i = 0; i < wanted; ++i) {
        if (arguments[i] == 'n' && isnan(step->tokens[i + 1].number)) {
            return false;
        }
    }
    return true;
}

static void restore_copy(ev_step *step)
{
    strcpy(step->copy, step->source);
}

/* Finds the row of the table that the line is; NULL when none fits, with *known when the verb is
 * right and only its arguments are not. */
static const ev_verb *match(ev_step *step, const ev_verb **known)
{
    int count;
    const ev_verb *verbs = ev_replay_verbs(&count);
    for (int i = 0; i < count; ++i) {
        const char *rest = strchr(verbs[i].arguments, 'r');
        restore_copy(step);
        cut_tokens(step, rest ? (int)(rest - verbs[i].arguments) + 1 : -1);
        if (strcmp(step->tokens[0].text, verbs[i].name) == 0) {
            *known = &verbs[i];
            if (fits(step, verbs[i].arguments)) {
                return &verbs[i];
            }
        }
    }
    return NULL;
}

static void explain_mismatch(ev_diagnostics *diagnostics, const char *name, const ev_step *step,
                             const ev_verb *known)
{
    char what[240];
    if (known) {
        snprintf(what, sizeof what, "This step is written: %s", known->usage);
    } else {
        snprintf(what, sizeof what,
                 "There is no step \"%.40s\". Steps are open, drop, size, wait, settle, point, "
                 "click, double-click, drag, pan, orbit, scroll, key, hold, text, type, shot, "
                 "boxes, print, expect, latency, quit.",
                 step->tokens[0].text);
    }
    complain(diagnostics, name, step, step->tokens[0].column, (int)strlen(step->tokens[0].text),
             what);
}

/* False when the line is no good; an empty one leaves step->verb NULL. */
static bool parse_line(ev_step *step, const char *name, ev_diagnostics *diagnostics)
{
    const ev_verb *known = NULL;
    cut_tokens(step, -1);
    if (step->token_count == 0) {
        return true;
    }
    step->verb = match(step, &known);
    if (!step->verb) {
        explain_mismatch(diagnostics, name, step, known);
        return false;
    }
    int at = 0;
    const char *wrong = step->verb->check ? step->verb->check(step, &at) : NULL;
    if (wrong) {
        complain(diagnostics, name, step, step->tokens[at].column,
                 (int)strlen(step->tokens[at].text), wrong);
    }
    return wrong == NULL;
}

static void free_step(ev_step *step)
{
    free(step->copy);
    free(step->source);
}

static bool keep_step(ev_replay *replay, ev_step *step)
{
    if (replay->count == replay->capacity) {
        int capacity = replay->capacity ? 2 * replay->capacity : 64;
        ev_step *steps = realloc(replay->steps, (size_t)capacity * sizeof *steps);
        if (!steps) {
            return false;
        }
        replay->steps = steps;
        replay->capacity = capacity;
    }
    replay->steps[replay->count++] = *step;
    return true;
}

static char *copy_text(const char *text, size_t length)
{
    char *copy = malloc(length + 1);
    if (copy) {
        memcpy(copy, text, length);
        copy[length] = '\0';
    }
    return copy;
}

static bool add_line(ev_replay *replay, const char *text, size_t length, int line,
                     ev_diagnostics *diagnostics)
{
    ev_step step = {
        .line = line, .copy = copy_text(text, length), .source = copy_text(text, length)};
    bool good = step.copy && step.source && parse_line(&step, replay->path, diagnostics);
    if (!good || !step.verb || !keep_step(replay, &step)) {
        free_step(&step);
    }
    return good;
}

ev_replay *ev_replay_parse(const char *text, const char *name, ev_diagnostics *diagnostics)
{
    ev_replay *replay = calloc(1, sizeof *replay);
    bool good = replay && (replay->path = copy_text(name, strlen(name))) != NULL;
    int line = 1;
    for (const char *at = text; replay && replay->path && *at; ++line) {
        size_t length = strcspn(at, "\r\n");
        good &= add_line(replay, at, length, line, diagnostics);
        at += length;
        at += *at == '\r' && at[1] == '\n' ? 2 : *at ? 1 : 0;
    }
    if (!good) {
        ev_replay_free(replay);
        return NULL;
    }
    return replay;
}

static void complain_about_file(const char *path, const char *why, ev_diagnostics *diagnostics)
{
    ev_place place = {.file = path};
    ev_diagnose(diagnostics, EV_SEVERITY_ERROR, "replay_unreadable", &place,
                "The replay cannot be read: %s.", why);
}

ev_replay *ev_replay_read(const char *path, ev_diagnostics *diagnostics)
{
    FILE *file = fopen(path, "rb");
    char *text = malloc(REPLAY_SIZE_LIMIT + 1);
    if (!file || !text) {
        complain_about_file(path, file ? "no memory" : strerror(errno), diagnostics);
        if (file) {
            fclose(file);
        }
        free(text);
        return NULL;
    }
    size_t size = fread(text, 1, REPLAY_SIZE_LIMIT + 1, file);
    bool failed = ferror(file) != 0;
    fclose(file);
    ev_replay *replay = NULL;
    if (failed || size > REPLAY_SIZE_LIMIT || memchr(text, 0, size)) {
        complain_about_file(path, failed ? "it is not a file" : "it is no text of under a megabyte",
                            diagnostics);
    } else {
        text[size] = '\0';
        replay = ev_replay_parse(text, path, diagnostics);
    }
    free(text);
    return replay;
}

void ev_replay_free(ev_replay *replay)
{
    if (!replay) {
        return;
    }
    for (int i = 0; i < replay->count; ++i) {
        free_step(&replay->steps[i]);
    }
    free(replay->steps);
    free(replay->path);
    free(replay);
}
