/* What the plates share: their place, the heading or the tabs, the mark of a plate that is catching
 * up, axes with their numbers. Internal to draw. */
#pragma once

#include "draw/pen.h"

ev_rect ev_plate_place(const ev_page *page, ev_plate plate);

/* Begins the plate's region: ground, heading with `about` beside or below it, stale marks. */
ev_pen ev_plate_begin(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, ev_plate plate,
                      const char *about, bool stale, ev_boxes *boxes);

/* Page y below the heading, from the top of the plate. */
double ev_plate_head(const ev_page *page);

/* A number left of an axis, or below one and centred on x. `name` without "text.". */
void ev_axis_left(ev_pen *pen, const char *name, const char *string, double end, double y);
void ev_axis_below(ev_pen *pen, const char *name, const char *string, double x, double baseline);

/* "computing", in the middle of a plot. */
void ev_plate_computing(ev_pen *pen, const char *name, ev_rect plot);

/* What suits the sheet now, dB. */
double ev_beam_range(const ev_page *page, const ev_sheet *sheet);
double ev_cut_range(const ev_sheet *sheet);
