/* What the drawer lists, and where each item stands. Internal to draw. */
#pragma once

#include "draw/drawer.h"
#include "draw/typing.h"

typedef enum { EV_ITEM_HEAD, EV_ITEM_ROW, EV_ITEM_BUTTON } ev_item_kind;

typedef struct ev_drawer_item {
    ev_item_kind kind;
    ev_parameter_ref ref;   /* rows */
    char title[80];         /* heads and buttons */
    char button[2][24];     /* names: "copy.feed.0", "remove.feed.0"; "" for none */
    double y, height;       /* px from the list's top */
    bool is_derived;        /* follows from others at present */
    bool joins, joins_next; /* a member of a choice; and so is the next item, of the same one */
} ev_drawer_item;

typedef struct ev_drawer_list {
    ev_drawer_item items[EV_DRAWER_CAPACITY];
    int count;
    double height;
} ev_drawer_list;

void ev_drawer_list_make(const ev_design *design, const char *search, ev_drawer_list *list);

/* The drawer's places on the page. */
typedef struct ev_drawer_frame {
    ev_rect panel, search, list, foot;
    double left, right; /* of what stands in the list */
    double scroll;      /* clamped */
} ev_drawer_frame;

ev_drawer_frame ev_drawer_frame_make(const ev_page *page, const ev_drawer_list *list,
                                     double scroll);

/* Draws an item at page y `top`; the pen's region is the list. */
void ev_drawer_item_draw(ev_pen *pen, const ev_sheet *sheet, const ev_drawer *drawer,
                         const ev_drawer_frame *frame, const ev_drawer_item *item, double top);

/* The line typed into, of a row at page y `top`. `label_end`: right edge of its label. */
ev_typing ev_drawer_typing(const ev_drawer *drawer, const ev_drawer_frame *frame, double label_end,
                           double top);
double ev_drawer_label_end(const ev_drawer_frame *frame, const ev_parameter *row);

/* A value as people read it, unit and all: "14.0 mm", "rhcp". */
void ev_row_value_text(const ev_parameter *row, double value, char *text, size_t size);
/* Whether it could be set back: given, not required, and not its default. */
bool ev_row_is_off_default(const ev_design *design, ev_parameter_ref ref);
bool ev_row_has_default(const ev_design *design, ev_parameter_ref ref);

/* Whether a row means anything for the design as it is: no exponent of a pattern from a table. */
bool ev_row_applies(const ev_design *design, ev_parameter_ref ref);
