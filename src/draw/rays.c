/* Rays in section, each carrying the same power, each ending as its fate says. Called by the Stage
 * and the gallery. Also decides what fades while a row of the ledger is pointed at. */
#include "draw/stage.h"

#include <math.h>
#include <string.h>

ev_emphasis ev_emphasis_of(const ev_sheet *sheet)
{
    const char *row = strchr(sheet->pointed, '.');
    ev_emphasis all = {.front = 1.0, .rest = 1.0, .words = ""};
    for (int i = 0; i < EV_FATE_COUNT; ++i)
        all.fate[i] = 1.0;
    if (!row ||
        (strncmp(sheet->pointed, "ledger.", 7) != 0 && strncmp(sheet->pointed, "watts.", 6) != 0))
        return all;
    ++row;
    ev_emphasis one = {.front = EV_FADED, .rest = EV_FADED, .words = ""};
    for (int i = 0; i < EV_FATE_COUNT; ++i)
        one.fate[i] = EV_FADED;
    if (strcmp(row, "past_sub") == 0) {
        one.fate[EV_FATE_PAST_SUB] = 1.0;
        one.words = "shown: what passes the subreflector";
    } else if (strcmp(row, "past_main") == 0) {
        one.fate[EV_FATE_PAST_MAIN] = 1.0;
        one.words = "shown: what passes the dish";
    } else if (strcmp(row, "blockage") == 0 || strcmp(row, "shadow") == 0) {
        for (int i = EV_FATE_SHADOW_SUB; i <= EV_FATE_SHADOW_STRUTS; ++i)
            one.fate[i] = 1.0;
        one.words = "shown: what ends in a shadow";
    } else if (strcmp(row, "aperture") == 0 || strcmp(row, "taper") == 0) {
        one.fate[EV_FATE_APERTURE] = 1.0;
        one.words = "shown: how the dish is lit; close rays are bright";
    } else if (strcmp(row, "phase") == 0 || strcmp(row, "pointing") == 0) {
        one.front = 1.0;
        one.words = strcmp(row, "phase") == 0 ? "shown: the bend of the front"
                                              : "shown: the lean of the front";
    } else {
        return all;
    }
    return one;
}

/* From the last point on the mirrors straight on to the front; where it never gets there, a
 * stretch of the way. */
static ev_vec3 end_at_front(const ev_ray *ray, double front_z)
{
    ev_vec3 last = ray->points[ray->point_count - 1];
    double along = (front_z - last.z) / ray->leaving.z;
    if (!(along >= 0.0) || !isfinite(along))
        along = 0.0;
    return ev_vec3_along(last, along, ray->leaving);
}

static void trace_points(ev_pen *pen, const ev_plot_map *map, const ev_ray *ray)
{
    for (int i = 0; i < ray->point_count; ++i) {
        double x, y;
        ev_plot_to_page(map, ray->points[i].z, ray->points[i].x, &x, &y);
        cairo_line_to(pen->cairo, x, y);
    }
}

static void draw_arrived(ev_pen *pen, const ev_plot_map *map, const ev_ray *ray, double front_z)
{
    ev_vec3 end = end_at_front(ray, front_z);
    double x, y;
    trace_points(pen, map, ray);
    ev_plot_to_page(map, end.z, end.x, &x, &y);
    cairo_line_to(pen->cairo, x, y);
    cairo_stroke(pen->cairo);
}

static void draw_shadowed(ev_pen *pen, const ev_plot_map *map, const ev_ray *ray)
{
    trace_points(pen, map, ray);
    cairo_stroke(pen->cairo);
    if (ray->point_count < 2)
        return;
    ev_vec3 last = ray->points[ray->point_count - 1], before = ray->points[ray->point_count - 2];
    double x, y, bx, by;
    ev_plot_to_page(map, last.z, last.x, &x, &y);
    ev_plot_to_page(map, before.z, before.x, &bx, &by);
    double length = hypot(x - bx, y - by);
    if (!(length > 0.0))
        return;
    double half = 0.5 * EV_SHADOW_BAR / length;
    ev_pen_line(pen, x - half * (y - by), y + half * (x - bx), x + half * (y - by),
                y - half * (x - bx), pen->theme->ink, 1.6, 1.0);
}

/* A lost ray: dashed in its colour, and from its last mirror on it fades away. */
static void draw_lost(ev_pen *pen, const ev_plot_map *map, const ev_ray *ray, double fade)
{
    ev_colour colour = ev_theme_fate(pen->theme, ray->fate);
    ev_vec3 last = ray->points[ray->point_count - 1];
    double x, y, dx = ray->leaving.z, dy = -ray->leaving.x, flat = hypot(dx, dy);
    ev_plot_to_page(map, last.z, last.x, &x, &y);
    if (!(flat > 1e-6))
        return;
    ev_pen_colour(pen, colour, 0.85);
    cairo_set_line_width(pen->cairo, EV_LINE_LOST);
    trace_points(pen, map, ray);
    cairo_stroke(pen->cairo);
    double ex = x + fade * dx, ey = y + fade * dy;
    cairo_pattern_t *pattern = cairo_pattern_create_linear(x, y, ex, ey);
    cairo_pattern_add_color_stop_rgba(pattern, 0.0, colour.r, colour.g, colour.b,
                                      0.85 * pen->strength);
    cairo_pattern_add_color_stop_rgba(pattern, 0.35, colour.r, colour.g, colour.b,
                                      0.75 * pen->strength);
    cairo_pattern_add_color_stop_rgba(pattern, 1.0, colour.r, colour.g, colour.b, 0.0);
    cairo_set_source(pen->cairo, pattern);
    cairo_move_to(pen->cairo, x, y);
    cairo_line_to(pen->cairo, ex, ey);
    cairo_stroke(pen->cairo);
    cairo_pattern_destroy(pattern);
}

static bool is_lost(ev_fate fate)
{
    return fate == EV_FATE_PAST_SUB || fate == EV_FATE_PAST_MAIN;
}

void ev_rays_draw(ev_pen *pen, const ev_plot_map *map, const ev_ray *rays, int count,
                  double front_z, double fade, const ev_emphasis *emphasis)
{
    double strength = pen->strength;
    for (int pass = 0; pass < 2; ++pass) {
        for (int i = 0; i < count; ++i) {
            const ev_ray *ray = &rays[i];
            if (ray->point_count < 1 || is_lost(ray->fate) != (pass == 1))
                continue;
            pen->strength = strength * emphasis->fate[ray->fate];
            ev_pen_dashes(pen, ray->fate);
            ev_pen_colour(pen, pen->theme->ink, EV_RAY_INK);
            cairo_set_line_width(pen->cairo, EV_LINE_RAY);
            if (is_lost(ray->fate))
                draw_lost(pen, map, ray, fade);
            else if (ray->fate == EV_FATE_APERTURE)
                draw_arrived(pen, map, ray, front_z);
            else
                draw_shadowed(pen, map, ray);
        }
    }
    ev_pen_dashes(pen, EV_FATE_APERTURE);
    pen->strength = strength;
}
