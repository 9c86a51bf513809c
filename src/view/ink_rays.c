/* The rays of the space view, each in the line style of its fate, and the dashed even Front. */
#include "view/ink.h"

#include <math.h>

static const double lost_alpha = 0.85;

static double ray_dim(const ev_ink *ink, const ev_ray *ray)
{
    return ink->emphasis.fate[ray->fate];
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

static void ink_legs(const ev_ink *ink, ev_nib nib, const ev_ray *ray)
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
    ev_ink_curve(ink, nib, points, count);
}

/* A lost ray goes on from its last point and fades out. */
static void ink_lost(const ev_ink *ink, ev_nib nib, const ev_ray *ray)
{
    double reach = 1.6 * ink->sheet->antenna->radius;
    ev_vec3 from = ray->points[ray->point_count - 1];
    const ev_vec3 ends[2] = {from, ev_vec3_along(from, reach, ray->leaving)};
    nib.fade = true;
    ev_ink_curve(ink, nib, ends, 2);
}

static ev_nib ray_nib(const ev_ink *ink, const ev_ray *ray)
{
    ev_nib nib = {.width = EV_LINE_RAY, .alpha = EV_RAY_INK, .colour = ink->theme->ink};
    switch (ray->fate) {
    case EV_FATE_PAST_MAIN:
        nib = (ev_nib){.width = EV_LINE_LOST,
                       .alpha = lost_alpha,
                       .colour = ink->theme->past_main,
                       .style = EV_STROKE_DASHES};
        break;
    case EV_FATE_PAST_SUB:
        nib = (ev_nib){.width = 1.4,
                       .alpha = lost_alpha,
                       .colour = ink->theme->past_sub,
                       .style = EV_STROKE_DOTS};
        break;
    case EV_FATE_APERTURE:
    case EV_FATE_SHADOW_SUB:
    case EV_FATE_SHADOW_FEED:
    case EV_FATE_SHADOW_STRUTS:
    case EV_FATE_COUNT:
        break;
    }
    nib.alpha *= ray_dim(ink, ray);
    return nib;
}

/* The bar at the end of a ray that a shadow stops. */
static void ink_bar(const ev_ink *ink, ev_nib nib, int first)
{
    if (ink->strokes->count > first) {
        ev_stroke last = ink->strokes->items[ink->strokes->count - 1];
        last.alpha1 = (float)fmin(1.0, 2.0 * nib.alpha);
        ev_strokes_add_bar(ink->strokes, last);
    }
}

static void ink_ray(const ev_ink *ink, const ev_ray *ray)
{
    ev_nib nib = ray_nib(ink, ray);
    int first = ink->strokes->count;
    if (ray->fate != EV_FATE_PAST_MAIN && ray->fate != EV_FATE_PAST_SUB) {
        ink_legs(ink, nib, ray);
        if (ray->fate != EV_FATE_APERTURE) {
            ink_bar(ink, nib, first);
        }
        return;
    }
    ink_legs(ink, nib, ray);
    ink_lost(ink, nib, ray);
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
    ev_nib nib = {.width = 1.0,
                  .alpha = 0.8,
                  .colour = ink->theme->second,
                  .style = EV_STROKE_DASHES,
                  .joined = true};
    ev_ink_curve(ink, nib, points, PIECES + 1);
}
