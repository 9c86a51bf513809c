/* The drawer of all settings: every row of the parameter table that applies, grouped by what it
 * belongs to, over the column at the right. The drawing lists and shows; the window types, sets and
 * scrolls.
 *
 * Boxes: "row.ADDRESS" (rows, to be typed into), "choice.ADDRESS.WORD" (buttons of a row that is a
 * choice), "reset.ADDRESS" (button, of rows off their default), "add.sub", "remove.sub",
 * "add.feed", "copy.feed.N", "remove.feed.N", "add.strut", "copy.strut.N", "remove.strut.N",
 * "add.site", "remove.site", "close.drawer" (buttons), "search.drawer" (field), "place.drawer".
 * Only what is in sight has a box. */
#pragma once

#include "draw/draw.h"
#include "scene/parameter.h"

enum { EV_DRAWER_CAPACITY = 320 };

/* What the window has to give. */
typedef struct ev_drawer {
    char search[64];
    int search_caret, search_anchor;   /* bytes */
    bool searching;                    /* typing goes into the search */
    double scroll;                     /* px, from the list's top; clamped when drawn */
    char editing[EV_ADDRESS_CAPACITY]; /* address of the row typed into, "" */
    char edit_text[EV_TITLE_CAPACITY];
    int edit_caret, edit_anchor; /* bytes */
    char complaint[160];         /* while the text is not legal */
    char pointed[80];            /* name of the box under the pointer, "" */
} ev_drawer;

void ev_draw_drawer(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet,
                    const ev_drawer *drawer, ev_boxes *boxes);

/* The rows listed, in order, for a search ("" lists all); at most EV_DRAWER_CAPACITY. */
int ev_drawer_rows(const ev_design *design, const char *search,
                   ev_parameter_ref rows[EV_DRAWER_CAPACITY]);

/* Largest scroll; and the one that brings a row into sight, moving as little as that takes. */
double ev_drawer_scroll_limit(const ev_page *page, const ev_sheet *sheet, const ev_drawer *drawer);
double ev_drawer_scroll_to(const ev_page *page, const ev_sheet *sheet, const ev_drawer *drawer,
                           const char *address);

/* Byte of the text in hand (the row's, else the search) under page x. */
int ev_drawer_byte_at(const ev_page *page, const ev_sheet *sheet, const ev_drawer *drawer,
                      double x);

/* Whether every word of `search` stands in the text, whatever the case. */
bool ev_search_matches(const char *search, const char *text);
