/* The list of actions: everything that can be done, by its words, with its key. The drawing filters
 * and shows; the window types, chooses and runs. */
#pragma once

#include "draw/draw.h"

typedef struct ev_action_entry {
    const char *name;  /* "undo": its box is a button "act.NAME" */
    const char *words; /* "Undo the last change" */
    const char *key;   /* "Ctrl Z"; "" for none */
    bool enabled;      /* false: listed, not to be pressed */
} ev_action_entry;

enum { EV_ACTIONS_CAPACITY = 96 };

typedef struct ev_actions {
    const ev_action_entry *items;
    int count; /* at most EV_ACTIONS_CAPACITY */
    char search[64];
    int caret, anchor; /* bytes */
    int chosen;        /* among the matches; clamped when drawn */
    char pointed[80];  /* name of the box under the pointer, "" */
} ev_actions;

/* Indices of the items that the search finds by words, name or key, in their order. */
int ev_actions_match(const ev_actions *actions, int indices[EV_ACTIONS_CAPACITY]);

/* A panel over the page, the rest of which fades. More matches than fit go by so that the chosen
 * one is in sight. Boxes: "act.NAME" (buttons), "search.actions" (field), "place.actions". */
void ev_draw_actions(cairo_t *cairo, const ev_page *page, bool dark, const ev_actions *actions,
                     ev_boxes *boxes);

/* Byte of the search under page x. */
int ev_actions_byte_at(const ev_page *page, const ev_actions *actions, double x);
