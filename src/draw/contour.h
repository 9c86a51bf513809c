/* Level lines of a field on a grid, as chains of points. Used for the rings of the Detail and the
 * lines of the Aperture plate. Internal to draw. */
#pragma once

#include <stdbool.h>

enum { EV_CONTOUR_SIDE = 101, EV_CONTOUR_LEVELS = 16 }; /* largest grid; most levels */

/* Called once a line, all lines of a level in a row; points are (column, row), fractional. A closed
 * line does not repeat its first point. */
typedef void (*ev_contour_sink)(void *context, int level, const double (*points)[2], int count,
                                bool closed);

/* `field` holds rows x columns values, row by row; `levels` rise. No line crosses a cell with a NaN
 * corner. Crossings are interpolated linearly; a saddle is settled by the mean of its corners. */
void ev_contour(const double *field, int columns, int rows, const double *levels, int level_count,
                ev_contour_sink sink, void *context);
