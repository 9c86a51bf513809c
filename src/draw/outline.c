/* The antenna in section: mirrors with hatching behind them, struts, horns, axis. Called by the
 * Stage and the gallery; knows the geometry as built and nothing of rays or budgets. */
#include "draw/stage.h"

#include <math.h>

enum { CURVE_POINTS = 97 };

typedef struct curve {
    double x[CURVE_POINTS], y[CURVE_POINTS]; /* page */
    int count;
} curve;

static void to_page(const ev_plot_map *map, ev_vec3 point, double *x, double *y)
{
    ev_plot_to_page(map, point.z, point.x, x, y);
}

double ev_outline_mouth(const ev_antenna *antenna, const ev_feed *feed)
{
    double diameter = 2.0 * antenna->radius;
    if (feed->body > 0.0)
        return fmin(fmax(0.5 * feed->body, 0.026 * diameter), 0.08 * diameter);
    /* A horn lights a cone of half angle theta with a mouth about a wavelength over its sine. */
    double mouth = antenna->wavelength / fmax(sin(fmin(feed->half_extent, 0.5 * EV_PI)), 0.05);
    return fmin(fmax(mouth, 0.016 * diameter), 0.032 * diameter);
}

static void widen(ev_bounds *bounds, double z, double x)
{
    if (!isfinite(z) || !isfinite(x))
        return;
    bounds->z0 = fmin(bounds->z0, z);
    bounds->z1 = fmax(bounds->z1, z);
    bounds->x0 = fmin(bounds->x0, x);
    bounds->x1 = fmax(bounds->x1, x);
}

/* Corners of a horn in the section: mouth, throat, guide; along its axis from the mouth back. */
typedef struct horn {
    double z[8], x[8];
} horn;

static horn make_horn(const ev_antenna *antenna, const ev_feed *feed)
{
    double a = ev_outline_mouth(antenna, feed);
    const double along[8] = {0.0, 1.4, 1.4, 2.95, 2.95, 1.4, 1.4, 0.0};
    const double side[8] = {1.0, 0.43, 0.43, 0.43, -0.43, -0.43, -0.43, -1.0};
    double length = hypot(feed->axis.z, feed->axis.x);
    double az = length > 1e-9 ? feed->axis.z / length : 1.0;
    double ax = length > 1e-9 ? feed->axis.x / length : 0.0;
    double mouth_z = feed->position.z + feed->phase_centre * az;
    double mouth_x = feed->position.x + feed->phase_centre * ax;
    horn h;
    for (int i = 0; i < 8; ++i) {
        h.z[i] = mouth_z - a * (along[i] * az + side[i] * ax);
        h.x[i] = mouth_x - a * (along[i] * ax - side[i] * az);
    }
    return h;
}

ev_bounds ev_outline_bounds(const ev_antenna *antenna)
{
    ev_vec3 top = ev_main_point(antenna, antenna->offset + antenna->radius, 0.0);
    ev_vec3 bottom = ev_main_point(antenna, antenna->offset - antenna->radius, 0.0);
    ev_bounds bounds = {fmin(0.0, bottom.z), top.z, bottom.x, top.x};
    widen(&bounds, bottom.z, bottom.x);
    widen(&bounds, antenna->focal_length, 0.0);
    if (fabs(antenna->offset) < antenna->radius)
        widen(&bounds, 0.0, antenna->offset);
    for (int i = 0; antenna->dual && i < 2; ++i) {
        ev_vec3 rim = ev_sub_rim_point(&antenna->sub, i * EV_PI);
        widen(&bounds, rim.z, rim.x);
    }
    for (int f = 0; f < antenna->feed_count; ++f) {
        horn h = make_horn(antenna, &antenna->feeds[f]);
        for (int i = 0; i < 8; ++i)
            widen(&bounds, h.z[i], h.x[i]);
    }
    return bounds;
}

void ev_outline_axis(ev_pen *pen, const ev_plot_map *map, const ev_antenna *antenna, double z0,
                     double z1)
{
    static const double dashes[] = {12.0, 3.5, 2.0, 3.5};
    double x0, y0, x1, y1;
    ev_plot_to_page(map, z0, 0.0, &x0, &y0);
    ev_plot_to_page(map, z1, 0.0, &x1, &y1);
    cairo_set_dash(pen->cairo, dashes, 4, 0.0);
    ev_pen_line(pen, x0, y0, x1, y1, pen->theme->third, EV_LINE_DIMENSION, 0.9);
    if (antenna->dual && antenna->layout.sub_axis_tilt != 0.0) {
        ev_vec3 feed = antenna->layout.sub_feed_focus, prime = antenna->sub.prime_focus;
        to_page(map, feed, &x0, &y0);
        to_page(map, prime, &x1, &y1);
        ev_pen_line(pen, x0, y0, x1, y1, pen->theme->third, EV_LINE_DIMENSION, 0.7);
    }
    cairo_set_dash(pen->cairo, NULL, 0, 0.0);
}

/* Struts meet the dish at their outer radius and what they carry at the inner one. */
void ev_outline_struts(ev_pen *pen, const ev_plot_map *map, const ev_antenna *antenna)
{
    const ev_shadows *shadows = &antenna->shadows;
    double held = antenna->feed_count > 0 ? antenna->feeds[0].position.z : antenna->focal_length;
    if (antenna->dual)
        held = ev_sub_place(&antenna->sub, antenna->sub.rim_centre).z;
    if (shadows->strip_count > 0) {
        /* The rim beyond the section, edge on: what the struts stand on. */
        ev_vec3 top = ev_main_point(antenna, antenna->offset + antenna->radius, 0.0);
        ev_vec3 bottom = ev_main_point(antenna, antenna->offset - antenna->radius, 0.0);
        double tx, ty, bx, by;
        to_page(map, top, &tx, &ty);
        to_page(map, bottom, &bx, &by);
        ev_pen_line(pen, tx, ty, bx, by, pen->theme->second, EV_LINE_DIMENSION, 0.7);
    }
    for (int i = 0; i < shadows->strip_count; ++i) {
        const ev_strip *strip = &shadows->strips[i];
        double to = fmin(strip->to, antenna->radius);
        double c = cos(strip->angle), s = sin(strip->angle);
        ev_vec3 foot = ev_main_point(antenna, shadows->centre_x + to * c, to * s);
        double x0, y0, x1, y1;
        to_page(map, foot, &x0, &y0);
        ev_plot_to_page(map, held, shadows->centre_x + strip->from * c, &x1, &y1);
        double width = fmin(fmax(2.0 * strip->half_width * map->x_scale, 1.4), 6.0);
        ev_pen_line(pen, x0, y0, x1, y1, pen->theme->fill, width + 1.6, 1.0);
        ev_pen_line(pen, x0, y0, x1, y1, pen->theme->second, width, 0.55);
    }
}

/* Short lines behind the mirror, a step apart along it, leaning back; (bx, by) is any point on the
 * reflecting side. */
static void hatch_curve(ev_pen *pen, const curve *c, double bx, double by)
{
    double next = 0.5 * EV_HATCH_STEP, run = 0.0;
    const double lean_cos = 0.788, lean_sin = -0.616; /* 38 degrees */
    for (int i = 0; i + 1 < c->count; ++i) {
        double tx = c->x[i + 1] - c->x[i], ty = c->y[i + 1] - c->y[i];
        double length = hypot(tx, ty);
        if (!(length > 0.0) || length > 1e5)
            continue;
        tx /= length;
        ty /= length;
        double nx = -ty, ny = tx;
        if (nx * (bx - c->x[i]) + ny * (by - c->y[i]) > 0.0) {
            nx = -nx;
            ny = -ny;
        }
        double dx = lean_cos * nx + lean_sin * tx, dy = lean_cos * ny + lean_sin * ty;
        for (; next <= run + length; next += EV_HATCH_STEP) {
            double x = c->x[i] + (next - run) * tx, y = c->y[i] + (next - run) * ty;
            cairo_move_to(pen->cairo, x, y);
            cairo_line_to(pen->cairo, x + EV_HATCH_LENGTH * dx, y + EV_HATCH_LENGTH * dy);
        }
        run += length;
    }
    ev_pen_colour(pen, pen->theme->ink, 0.55);
    cairo_set_line_width(pen->cairo, EV_LINE_HATCH);
    cairo_stroke(pen->cairo);
}

static void stroke_curve(ev_pen *pen, const curve *c)
{
    for (int i = 0; i < c->count; ++i)
        cairo_line_to(pen->cairo, c->x[i], c->y[i]);
    ev_pen_colour(pen, pen->theme->ink, 1.0);
    cairo_set_line_width(pen->cairo, EV_LINE_MIRROR);
    cairo_set_line_cap(pen->cairo, CAIRO_LINE_CAP_ROUND);
    cairo_set_line_join(pen->cairo, CAIRO_LINE_JOIN_ROUND);
    cairo_stroke(pen->cairo);
    cairo_set_line_cap(pen->cairo, CAIRO_LINE_CAP_BUTT);
    cairo_set_line_join(pen->cairo, CAIRO_LINE_JOIN_MITER);
}

static void draw_main(ev_pen *pen, const ev_plot_map *map, const ev_antenna *antenna, double from,
                      double to)
{
    curve c = {.count = CURVE_POINTS};
    for (int i = 0; i < CURVE_POINTS; ++i) {
        double x = from + (to - from) * i / (CURVE_POINTS - 1);
        to_page(map, ev_main_point(antenna, x, 0.0), &c.x[i], &c.y[i]);
    }
    double bx, by;
    ev_plot_to_page(map, antenna->focal_length, 0.0, &bx, &by);
    hatch_curve(pen, &c, bx, by);
    stroke_curve(pen, &c);
}

static void draw_sub(ev_pen *pen, const ev_plot_map *map, const ev_antenna *antenna)
{
    curve c = {.count = CURVE_POINTS};
    for (int i = 0; i < CURVE_POINTS; ++i) {
        double r = -1.0 + 2.0 * i / (CURVE_POINTS - 1);
        to_page(map, ev_sub_point(&antenna->sub, fabs(r), r < 0.0 ? EV_PI : 0.0), &c.x[i], &c.y[i]);
    }
    double bx, by;
    to_page(map, antenna->sub.feed_focus, &bx, &by);
    hatch_curve(pen, &c, bx, by);
    stroke_curve(pen, &c);
}

void ev_outline_mirrors(ev_pen *pen, const ev_plot_map *map, const ev_antenna *antenna)
{
    double low = antenna->offset - antenna->radius, high = antenna->offset + antenna->radius;
    if (antenna->hole_radius > 0.0) {
        draw_main(pen, map, antenna, low, antenna->offset - antenna->hole_radius);
        draw_main(pen, map, antenna, antenna->offset + antenna->hole_radius, high);
    } else {
        draw_main(pen, map, antenna, low, high);
    }
    if (antenna->dual)
        draw_sub(pen, map, antenna);
}

void ev_outline_feeds(ev_pen *pen, const ev_plot_map *map, const ev_antenna *antenna, int selected)
{
    for (int f = 0; f < antenna->feed_count; ++f) {
        horn h = make_horn(antenna, &antenna->feeds[f]);
        for (int i = 0; i < 8; ++i) {
            double x, y;
            ev_plot_to_page(map, h.z[i], h.x[i], &x, &y);
            cairo_line_to(pen->cairo, x, y);
        }
        cairo_close_path(pen->cairo);
        double opacity = f == selected || selected < 0 ? 1.0 : 0.5;
        ev_pen_colour(pen, pen->theme->fill, 1.0);
        cairo_fill_preserve(pen->cairo);
        ev_pen_colour(pen, pen->theme->ink, opacity);
        cairo_set_line_width(pen->cairo, 1.5);
        cairo_set_line_join(pen->cairo, CAIRO_LINE_JOIN_ROUND);
        cairo_stroke(pen->cairo);
        cairo_set_line_join(pen->cairo, CAIRO_LINE_JOIN_MITER);
        double x0, y0, x1, y1;
        ev_plot_to_page(map, h.z[1], h.x[1], &x0, &y0);
        ev_plot_to_page(map, h.z[5], h.x[5], &x1, &y1);
        ev_pen_line(pen, x0, y0, x1, y1, pen->theme->ink, 0.9, opacity);
    }
}
