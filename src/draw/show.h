/* The showing mode's own measures: where words, target and antenna go. Internal to draw. */
#pragma once

#include "draw/stage.h"

typedef struct ev_show {
    double size;         /* of type and marks; 1 on a small page */
    ev_rect page, words; /* words: the block at the top left */
    ev_rect target;      /* square of the enlarged circle */
    double ground;       /* page y; NaN without a site */
    double turn;         /* rad, of the antenna's axis above the horizon */
    double scale;        /* pixels a metre */
    double x, y;         /* page, of the antenna's origin */
    double front_z;      /* m, where the even front stands */
    ev_vec3 held, joint; /* m: where an arm holds the dish, and where the post takes the arm */
    ev_plot_map map;     /* antenna (z, x) to page */
} ev_show;

/* As large as it fits beside words and target, the dish's lowest part just over the ground. */
ev_show ev_show_fit(double width, double height, const ev_sheet *sheet);

/* Room for the bend of the Front, px. */
double ev_show_front_room(const ev_show *show);

/* What is late, what is early, and how the wave should leave: beside the Front, where there is
 * room. `factor` is that of its bend. */
void ev_show_labels(ev_pen *pen, const ev_sheet *sheet, const ev_show *show, double factor);

enum { EV_SHOW_LINES = 3 };

/* Two large lines and the one below them. */
typedef struct ev_show_words {
    char line[EV_SHOW_LINES][192];
    int bold[EV_SHOW_LINES][EV_BOLD_CAPACITY][2], bold_count[EV_SHOW_LINES];
} ev_show_words;

void ev_show_word_out(const ev_sheet *sheet, ev_show_words *words);
