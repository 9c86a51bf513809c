/* The map of the Aperture plate and its place on the page: as one faces the dish, +x up and +y to
 * the left. Internal to draw. */
#pragma once

#include "draw/pen.h"

typedef struct ev_aperture_map {
    double x, y, radius; /* page */
    double scale;        /* pixels a metre */
    double range;        /* m of the full colour */
} ev_aperture_map;

void ev_aperture_picture(ev_pen *pen, const ev_sheet *sheet, const ev_aperture_map *map);
