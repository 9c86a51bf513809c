/* The far field of scattered points of current: shadows, and sheets that end within their rim.
 * Private to optics. */
#pragma once

#include "optics/beam_sheet.h"

typedef struct ev_points ev_points;

/* `weights` (m^2 of projected area) at (x, y); asks the sheet for its currents. NULL: given up. */
ev_points *ev_points_create(const ev_sheet *sheet, const double *x, const double *y,
                            const double *weights, int count);
void ev_points_destroy(ev_points *points);
int ev_points_count(const ev_points *points);

enum { EV_POINTS_BATCH = 16 };

/* I(s) of at most EV_POINTS_BATCH directions; overwrites sums. */
void ev_points_sum(const ev_points *points, const ev_sheet *sheet, const ev_vec3 *directions,
                   int count, double _Complex (*sums)[3]);
