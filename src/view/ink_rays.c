/* The rays of the space view, each in the line style of its fate, and the dashed even Front. */
#include "view/ink.h"

#include <math.h>

static const double ray_width = 0.85, ray_alpha = 0.38, lost_alpha = 0.75;
static const double dimmed = 0.1;

static double ray_dim(const ev_ink *ink, const ev_ray *ray)
{
    return ink->emphasis.active && !ink->emphasis.fates[ray->fate] ? dimmed : 1.0;
}

/* Where a ray that reached the aperture ends: on the Front as it is drawn. */
static ev_vec3 meet_front(const ev_ink *ink, const ev_ray *ray, ev_vec3 from)
{
    const ev_sheet *sheet = ink->sheet;
    const ev_feed_budget *budget = &sheet->budget->feeds[ray->feed];
    double error = ray->path_error - budget->mean_path_error;
    double bend = isfinite(error) ? sheet->front_exaggeration * error : 0.0;
    double rate = ev_vec3_dot(budget->wanted, ray->leaving);
    double reach = (ink->stand - bend - ev_vec3_dot(budget->wanted, from)) / rate;
    return ev_vec3_along(from, reach, ray->leaving);
}

static void ink_legs(const ev_ink *ink, ev_pen pen, const ev_ray *ray)
{
    ev_vec3 points[EV_RAY_POINT_CAPACITY + 1];
    int count = ray->point_count;
    for (int i = 0; i < count; ++i) {
        points[i] = ray->points[i];
    }
    if (ray->fate == EV_FATE_APERTURE && count > 1) {
        /* the last point only marks the plane z = F: one straight leg to the Front */
        points[count - 1] = meet_front(ink, ray, ray->points[count - 2]);
    }
    ev_ink_curve(ink, pen, points, count);
}

/* A lost ray goes on from its last point and fades out. */
static void ink_lost(const ev_ink *ink, ev_pen pen, const ev_ray *ray)
{
    enum { PIECES = 6 };
    double reach = 0.9 * ink->sheet->antenna->radius;
    ev_vec3 from = ray->points[ray->point_count - 1];
    for (int i = 0; i < PIECES; ++i) {
        ev_vec3 ends[2] = {ev_vec3_along(from, reach * i / PIECES, ray->leaving),
                           ev_vec3_along(from, reach * (i + 1) / PIECES, ray->leaving)};
        ev_pen piece = pen;
        piece.alpha = pen.alpha * (1.0 - (i + 0.5) / PIECES);
        piece.style = EV_STROKE_SOLID;
        ev_ink_curve(ink, piece, ends, 2);
    }
}

static ev_pen ray_pen(const ev_ink *ink, const ev_ray *ray)
{
    ev_pen pen = {.width = ray_width, .alpha = ray_alpha, .colour = ink->palette.ink};
    switch (ray->fate) {
    case EV_FATE_PAST_MAIN:
        pen = (ev_pen){.width = 1.2,
                       .alpha = lost_alpha,
                       .colour = ink->palette.past_main,
                       .style = EV_STROKE_DASHES};
        break;
    case EV_FATE_PAST_SUB:
        pen = (ev_pen){.width = 1.4,
                       .alpha = lost_alpha,
                       .colour = ink->palette.past_sub,
                       .style = EV_STROKE_DOTS};
        break;
    case EV_FATE_APERTURE:
    case EV_FATE_SHADOW_SUB:
    case EV_FATE_SHADOW_FEED:
    case EV_FATE_SHADOW_STRUTS:
    case EV_FATE_COUNT:
        break;
    }
    pen.alpha *= ray_dim(ink, ray);
    return pen;
}

/* The bar at the end of a ray that a shadow stops. */
static void ink_bar(const ev_ink *ink, ev_pen pen, int first)
{
    if (ink->strokes->count > first) {
        ev_stroke last = ink->strokes->items[ink->strokes->count - 1];
        last.alpha1 = (float)fmin(1.0, 2.0 * pen.alpha);
        ev_strokes_add_bar(ink->strokes, last);
    }
}

static void ink_ray(const ev_ink *ink, const ev_ray *ray)
{
    ev_pen pen = ray_pen(ink, ray);
    int first = ink->strokes->count;
    if (ray->fate != EV_FATE_PAST_MAIN && ray->fate != EV_FATE_PAST_SUB) {
        ink_legs(ink, pen, ray);
        if (ray->fate != EV_FATE_APERTURE) {
            ink_bar(ink, pen, first);
        }
        return;
    }
    ink_legs(ink, pen, ray);
    ink_lost(ink, pen, ray);
}

void ev_ink_rays(const ev_ink *ink)
{
    for (int i = 0; i < ink->sheet->ray_count; ++i) {
        if (ink->sheet->rays[i].point_count > 0) {
            ink_ray(ink, &ink->sheet->rays[i]);
        }
    }
}

void ev_ink_even(const ev_ink *ink)
{
    enum { PIECES = 96 };
    const ev_antenna *antenna = ink->sheet->antenna;
    ev_vec3 s = ink->sheet->budget->feeds[ink->sheet->feed].wanted, points[PIECES + 1];
    for (int i = 0; i <= PIECES; ++i) {
        double t = 2.0 * EV_PI * i / PIECES;
        ev_vec3 foot = {antenna->offset + antenna->radius * cos(t), antenna->radius * sin(t), 0.0};
        points[i] = ev_vec3_along(foot, ink->stand - ev_vec3_dot(s, foot), s);
    }
    ev_pen pen = {.width = 1.0,
                  .alpha = 0.8,
                  .colour = ink->palette.second,
                  .style = EV_STROKE_DASHES,
                  .joined = true};
    ev_ink_curve(ink, pen, points, PIECES + 1);
}
