/* The ring behind undo. */
#include "view/history.h"

#include <stdio.h>

static ev_moment *moment_at(ev_history *history, int index)
{
    return &history->moments[(history->first + index) % EV_HISTORY_CAPACITY];
}

static void write_moment(ev_history *history, const ev_design *design, const char *words)
{
    ev_moment *moment = moment_at(history, history->at);
    moment->design = *design;
    moment->id = ++history->next_id;
    snprintf(moment->words, sizeof moment->words, "%s", words);
}

void ev_history_start(ev_history *history, const ev_design *design)
{
    history->first = 0;
    history->count = 1;
    history->at = 0;
    write_moment(history, design, "");
}

void ev_history_push(ev_history *history, const ev_design *design, const char *words)
{
    if (history->at + 1 == EV_HISTORY_CAPACITY) {
        history->first = (history->first + 1) % EV_HISTORY_CAPACITY;
    } else {
        ++history->at;
    }
    history->count = history->at + 1;
    write_moment(history, design, words);
}

void ev_history_amend(ev_history *history, const ev_design *design)
{
    ev_moment *moment = moment_at(history, history->at);
    moment->design = *design;
    moment->id = ++history->next_id;
    history->count = history->at + 1;
}

const ev_design *ev_history_undo(ev_history *history, const char **words)
{
    if (!ev_history_can_undo(history)) {
        return NULL;
    }
    *words = moment_at(history, history->at)->words;
    --history->at;
    return &moment_at(history, history->at)->design;
}

const ev_design *ev_history_redo(ev_history *history, const char **words)
{
    if (!ev_history_can_redo(history)) {
        return NULL;
    }
    ++history->at;
    *words = moment_at(history, history->at)->words;
    return &moment_at(history, history->at)->design;
}

bool ev_history_can_undo(const ev_history *history)
{
    return history->at > 0;
}

bool ev_history_can_redo(const ev_history *history)
{
    return history->at + 1 < history->count;
}

unsigned ev_history_id(const ev_history *history)
{
    return history->moments[(history->first + history->at) % EV_HISTORY_CAPACITY].id;
}
