/* What the section is made of, shared by the Stage and the gallery. Internal to draw. Section
 * coordinates are the antenna's (z, x); page x grows with z, page y falls with x. */
#pragma once

#include "draw/pen.h"

/* Bounds in the section's plane, m. */
typedef struct ev_bounds {
    double z0, z1, x0, x1;
} ev_bounds;

/* Mirrors, subreflector, horns, prime focus. */
ev_bounds ev_outline_bounds(const ev_antenna *antenna);

void ev_outline_axis(ev_pen *pen, const ev_plot_map *map, const ev_antenna *antenna, double z0,
                     double z1);
void ev_outline_struts(ev_pen *pen, const ev_plot_map *map, const ev_antenna *antenna);
void ev_outline_mirrors(ev_pen *pen, const ev_plot_map *map, const ev_antenna *antenna);
/* All feeds as horns; those that are not `selected` are pale. */
void ev_outline_feeds(ev_pen *pen, const ev_plot_map *map, const ev_antenna *antenna, int selected);
/* Half width of a feed's mouth as it is drawn, m. */
double ev_outline_mouth(const ev_antenna *antenna, const ev_feed *feed);

/* What is faded while a row is pointed at: factors on the opacity. */
typedef struct ev_emphasis {
    double fate[EV_FATE_COUNT];
    double front, rest;
    const char *words; /* "shown: what passes the dish", or "" */
} ev_emphasis;
ev_emphasis ev_emphasis_of(const ev_sheet *sheet);

/* Rays to the plane z = front_z; lost ones fade out over `fade` pixels. */
void ev_rays_draw(ev_pen *pen, const ev_plot_map *map, const ev_ray *rays, int count,
                  double front_z, double fade, const ev_emphasis *emphasis);

/* The section's place on the Stage. */
typedef struct ev_section {
    ev_plot_map map;
    double scale;   /* pixels a metre */
    double front_z; /* m, where the even front stands */
    ev_bounds bounds;
} ev_section;
ev_section ev_section_fit(const ev_page *page, const ev_sheet *sheet);

/* The Front and its words. `floor` is the lowest page y its labels may reach. */
void ev_front_draw(ev_pen *pen, const ev_section *section, const ev_sheet *sheet, double floor,
                   double strength);
/* The curve alone, late and early in their colours, about the upright line at page x `base`; `bend`
 * is pixels a metre of path error. */
void ev_front_curve(ev_pen *pen, const ev_plot_map *map, const ev_sheet *sheet, double base,
                    double bend, double width);
/* A factor of 1, 2, 5 ... that bends the Front by at most `room` pixels. */
double ev_front_factor(const ev_sheet *sheet, double scale, double room);
double ev_front_room(const ev_page *page);
/* Whether an error is too small to speak of: under a 500th of a wavelength. */
bool ev_is_even(double error, const ev_sheet *sheet);

/* Dimension lines with arrows, text in a gap of the line; upright ones keep it clear of the height
 * `avoid`, where another line crosses. */
void ev_dimension_upright(ev_pen *pen, const char *name, const char *label, double x, double y0,
                          double y1, double avoid);
void ev_dimension_level(ev_pen *pen, const char *name, const char *label, double x0, double x1,
                        double y);
void ev_scale_bar(ev_pen *pen, double x, double y, double scale);

/* The stretches of a line that lie outside every text drawn so far. */
void ev_line_around_text(ev_pen *pen, const double from[2], const double to[2], ev_colour colour,
                         double width, double opacity);

/* Where the beam goes when that is not where it is wanted: a ray from the middle of the Front, its
 * slope drawn larger by the Front's factor, and how far off it is. */
void ev_peak_draw(ev_pen *pen, const ev_section *section, const ev_sheet *sheet, double strength);
/* Angles of the peak off the wanted direction, rad, up and left; false when too small to show. */
bool ev_peak_is_off(const ev_sheet *sheet, double off[2]);

/* Tabs Section and Space, with what is being shown beside them. */
void ev_stage_tabs(ev_pen *pen, const ev_sheet *sheet, const char *words);

double ev_ledger_range(const ev_sheet *sheet);
double ev_aperture_range(const ev_sheet *sheet);
