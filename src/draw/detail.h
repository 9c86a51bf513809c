/* The Detail's own measures, shared by its drawing and its rings. Internal to draw. */
#pragma once

#include "draw/pen.h"

typedef struct ev_detail {
    double x, y, radius;     /* of the circle, page */
    const ev_loss_map *loss; /* NULL: not known yet */
    double place[2];         /* m, where the part sits along its axes */
    double extent;           /* m, from the middle of the circle to its edge */
    double axis[2][2];       /* unit, page: of the two axes */
    double words_y;          /* page: middle of the line inside that says what a tick is */
    double handle;           /* px, radius of the yellow ring */
    bool showing;            /* rings in percent of the signal, larger, no ticks or words */
    ev_plot_map map;
} ev_detail;

/* The Detail in a square, joined to the part at (part_x, part_y). Showing: turned as the section
 * is, by `turn` (rad), for hands that are not used to it; `handle` is the radius of the ring. */
typedef struct ev_detail_style {
    bool showing;
    double turn, handle;
} ev_detail_style;

void ev_detail_draw(ev_pen *pen, const ev_sheet *sheet, ev_rect square, ev_detail_style style,
                    double part_x, double part_y, ev_plot_map *map);

/* Two lines under the circle. */
void ev_detail_caption(ev_pen *pen, const ev_sheet *sheet, const ev_detail *detail);

enum { EV_RING_CAPACITY = 5 };

/* Where the rings found room for their labels, innermost first. */
typedef struct ev_ring_label {
    double x, y, width; /* middle, page */
    char text[16];
} ev_ring_label;

typedef struct ev_ring_labels {
    ev_ring_label items[EV_RING_CAPACITY];
    int count;
} ev_ring_labels;

/* Rings of equal loss, the ground between them darker the more is lost; their labels apart, to
 * stand over the axes, those of inner rings going first where two would meet. */
void ev_rings_draw(ev_pen *pen, const ev_detail *detail, ev_ring_labels *labels);
void ev_rings_label(ev_pen *pen, const ev_detail *detail, const ev_ring_labels *labels);
