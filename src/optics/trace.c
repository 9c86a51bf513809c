/* Rays for pictures and listings. Called by the study and the rays command; computes nothing that
 * a budget depends on. */
#include "optics/trace.h"

#include <stdlib.h>

/* Height (z) at which a ray over (x, y) meets what shadows it, for the end of the drawn ray. */
static double shadow_height(const ev_antenna *antenna, ev_fate fate, double x, double y)
{
    double r = hypot(x - antenna->offset, y);
    double top = antenna->dual ? ev_sub_place(&antenna->sub, antenna->sub.rim_centre).z
                               : antenna->focal_length;
    if (fate == EV_FATE_SHADOW_SUB)
        return top;
    if (fate == EV_FATE_SHADOW_FEED) {
        double nearest = INFINITY, height = top;
        for (int i = 0; i < antenna->feed_count; i++) {
            ev_vec3 at = antenna->feeds[i].position;
            double away = hypot(x - at.x, y - at.y);
            if (antenna->feeds[i].body > 0.0 && away < nearest) {
                nearest = away;
                height = at.z;
            }
        }
        return height;
    }
    /* a strut leans from the dish at its outer radius to the middle at its inner one */
    double from = 0.0, to = antenna->radius;
    for (int i = 0; i < antenna->shadows.strip_count; i++) {
        const ev_strip *strip = &antenna->shadows.strips[i];
        if (fabs(remainder(atan2(y, x - antenna->offset) - strip->angle, 2.0 * EV_PI)) <
                0.5 * EV_PI &&
            r >= strip->from && r <= strip->to) {
            from = strip->from;
            to = strip->to;
        }
    }
    double foot = ev_main_point(antenna, x, y).z;
    double part = to > from ? (to - r) / (to - from) : 1.0;
    return foot + fmin(1.0, fmax(0.0, part)) * fmax(top - foot, 0.0);
}

static bool within_sub(const ev_sub *sub, ev_vec3 point)
{
    if (sub->shape == EV_SUB_ELLIPSOID)
        return ev_sub_inside(sub, point) >= -1e-10;
    ev_vec3 arm = ev_vec3_sub(point, sub->placed_centre);
    double a = sub->semi_long + sub->oversize, b = sub->semi_short + sub->oversize;
    double u = b * ev_vec3_dot(arm, sub->placed_long), v = a * ev_vec3_dot(arm, sub->placed_short);
    return u * u + v * v <= a * a * b * b * (1.0 + 2e-10);
}

/* The nearest hit in front that lies within the sub's rim; its distance, or NaN. */
static double meet_sub(const ev_antenna *antenna, ev_vec3 from, ev_vec3 direction)
{
    double t[2];
    int count = ev_conic_intersect(&antenna->sub.placed, from, direction, t);
    for (int i = 0; i < count; i++)
        if (t[i] > 1e-9 && within_sub(&antenna->sub, ev_vec3_along(from, t[i], direction)))
            return t[i];
    return NAN;
}

/* A ray meets the front of the main reflector where it leaves the paraboloid's inside: at the
 * farther crossing. Its distance, or NaN. */
static double meet_main(const ev_antenna *antenna, ev_vec3 from, ev_vec3 direction)
{
    double t, reach = antenna->radius * (1.0 + 1e-12);
    if (!ev_conic_exit(&antenna->main, from, direction, &t) || t <= 1e-9)
        return NAN;
    double x = from.x + t * direction.x - antenna->offset, y = from.y + t * direction.y;
    return x * x + y * y <= reach * reach ? t : NAN;
}

/* Walks `t` on along the ray and turns it at the mirror there. */
static void walk(const ev_conic *mirror, double t, ev_ray *ray)
{
    ev_vec3 hit = ev_vec3_along(ray->points[ray->point_count - 1], t, ray->leaving);
    ray->points[ray->point_count++] = hit;
    ray->path += t;
    if (mirror)
        ray->leaving = ev_conic_reflect(mirror, hit, ray->leaving);
}

/* From the main reflector to the plane z = F, or to what stands in the way. */
static void leave_main(const ev_antenna *antenna, ev_ray *ray)
{
    ev_vec3 hit = ray->points[ray->point_count - 1];
    double height = antenna->focal_length;
    ray->fate = ev_shadow_at(&antenna->shadows, hit.x, hit.y);
    if (ray->fate == EV_FATE_PAST_MAIN)
        return; /* through the hole */
    ray->path_error = ray->path - ev_vec3_dot(antenna->feeds[ray->feed].wanted, hit);
    if (ray->fate != EV_FATE_APERTURE)
        height = shadow_height(antenna, ray->fate, hit.x, hit.y);
    ray->leaving = ev_conic_reflect(&antenna->main, hit, ray->leaving);
    double t = ray->leaving.z > 1e-6 ? (height - hit.z) / ray->leaving.z : 0.0;
    ray->points[ray->point_count++] = ev_vec3_along(hit, t > 0.0 ? t : 0.0, ray->leaving);
}

/* Written member by member: clearing the whole of it first would take longer than a mirror. */
static void begin(const ev_antenna *antenna, int feed, ev_vec3 direction, ev_ray *ray)
{
    ray->feed = feed;
    ray->fate = antenna->dual ? EV_FATE_PAST_SUB : EV_FATE_PAST_MAIN;
    ray->power = 0.0;
    ray->direction = ray->leaving = direction;
    ray->points[0] = antenna->feeds[feed].position;
    for (int i = 1; i < EV_RAY_POINT_CAPACITY; i++)
        ray->points[i] = (ev_vec3){0.0, 0.0, 0.0};
    ray->point_count = 1;
    ray->path = 0.0;
    ray->path_error = NAN;
}

static void trace(const ev_antenna *antenna, int feed, ev_vec3 direction, ev_ray *ray)
{
    begin(antenna, feed, direction, ray);
    if (antenna->dual) {
        double t = meet_sub(antenna, ray->points[0], direction);
        if (isnan(t)) {
            ray->path = NAN;
            return;
        }
        ray->fate = EV_FATE_PAST_MAIN;
        walk(&antenna->sub.placed, t, ray);
    }
    double t = meet_main(antenna, ray->points[ray->point_count - 1], ray->leaving);
    if (isnan(t)) {
        ray->path = NAN;
        return;
    }
    walk(NULL, t, ray);
    leave_main(antenna, ray);
}

ev_ray ev_trace(const ev_antenna *antenna, int feed, ev_vec3 direction)
{
    ev_ray ray;
    trace(antenna, feed, direction, &ray);
    return ray;
}

/* A direction theta from the feed's axis, phi from its x. */
static ev_vec3 direction_at(const ev_feed *feed, double theta, double phi)
{
    ev_vec3 side = ev_vec3_along(ev_vec3_scale(cos(phi), feed->ex), sin(phi), feed->ey);
    return ev_vec3_along(ev_vec3_scale(cos(theta), feed->axis), sin(theta), side);
}

enum { CUMULATIVE_STEPS = 720 };

/* Angle against power share, tabulated once a fan: cum[i] is the share within end (i/steps)^2. */
static void tabulate(const ev_pattern *pattern, double cumulative[CUMULATIVE_STEPS + 1])
{
    double sum = 0.0, last = 0.0;
    cumulative[0] = 0.0;
    for (int i = 1; i <= CUMULATIVE_STEPS; i++) {
        double part = (double)i / CUMULATIVE_STEPS, theta = pattern->end * part * part;
        double middle = 0.5 * (last + theta);
        ev_pattern_level level = ev_pattern_at(pattern, middle);
        sum += 0.25 * (level.e + level.h) * (cos(last) - cos(theta));
        cumulative[i] = sum;
        last = theta;
    }
    for (int i = 1; i <= CUMULATIVE_STEPS && sum > 0.0; i++)
        cumulative[i] /= sum;
}

static double angle_of(const ev_pattern *pattern, const double *cumulative, double share)
{
    int low = 0, high = CUMULATIVE_STEPS;
    while (high - low > 1) {
        int middle = (low + high) / 2;
        *(cumulative[middle] < share ? &low : &high) = middle;
    }
    double span = cumulative[high] - cumulative[low];
    double part = low + (span > 0.0 ? (share - cumulative[low]) / span : 0.0);
    part /= CUMULATIVE_STEPS;
    return pattern->end * part * part;
}

int ev_trace_fan(const ev_antenna *antenna, int feed, int count, ev_ray *rays)
{
    const ev_feed *source = &antenna->feeds[feed];
    double cumulative[CUMULATIVE_STEPS + 1];
    const double golden = EV_PI * (3.0 - sqrt(5.0));
    tabulate(&source->pattern, cumulative);
#pragma omp parallel for schedule(static)
    for (int i = 0; i < count; i++) {
        double theta = angle_of(&source->pattern, cumulative, (i + 0.5) / count);
        trace(antenna, feed, direction_at(source, theta, golden * i), &rays[i]);
        rays[i].power = 1.0 / count;
    }
    return count;
}

/* Candidates in the symmetry plane, spaced by the power of the rings that they stand for. */
enum { CANDIDATES = 1600 };

typedef struct candidate {
    double theta; /* signed, + toward the feed's side nearest +x */
    ev_fate fate; /* without struts */
    bool in_strut;
} candidate;

static ev_vec3 in_plane(const ev_feed *feed, double theta)
{
    /* square to the axis within the plane y = 0 as near as the axis allows */
    ev_vec3 side = ev_vec3_unit(ev_vec3_cross(ev_vec3_make(0.0, 1.0, 0.0), feed->axis));
    return ev_vec3_along(ev_vec3_scale(cos(theta), feed->axis), sin(theta), side);
}

/* A strut that lies in the plane would shade all of its half though it is thin: rays that stand for
 * the rest are drawn as if there were no struts. */
static void list_candidates(const ev_antenna *antenna, const ev_antenna *bare, int feed,
                            candidate *list)
{
    const ev_feed *source = &antenna->feeds[feed];
    double cumulative[CUMULATIVE_STEPS + 1];
    tabulate(&source->pattern, cumulative);
    for (int i = 0; i < CANDIDATES; i++) {
        double share = 2.0 * (i + 0.5) / CANDIDATES - 1.0;
        double theta = copysign(angle_of(&source->pattern, cumulative, fabs(share)), share);
        ev_vec3 direction = in_plane(source, theta);
        list[i].theta = theta;
        list[i].fate = ev_trace(bare, feed, direction).fate;
        list[i].in_strut = ev_trace(antenna, feed, direction).fate == EV_FATE_SHADOW_STRUTS;
    }
}

static bool stands_for(const candidate *one, ev_fate fate)
{
    return fate == EV_FATE_SHADOW_STRUTS ? one->in_strut : one->fate == fate;
}

int ev_trace_section(const ev_antenna *antenna, int feed, int count,
                     const double shares[EV_FATE_COUNT], ev_ray *rays)
{
    candidate *list = malloc(CANDIDATES * sizeof *list);
    ev_antenna *bare = malloc(sizeof *bare);
    int written = 0;
    if (!list || !bare)
        abort();
    *bare = *antenna;
    bare->shadows.strip_count = 0;
    list_candidates(antenna, bare, feed, list);
    for (int fate = 0; fate < EV_FATE_COUNT; fate++) {
        const ev_antenna *seen_by = fate == EV_FATE_SHADOW_STRUTS ? antenna : bare;
        int found = 0, wanted = (int)lround(shares[fate] * count), next = 0, seen = 0;
        for (int i = 0; i < CANDIDATES; i++)
            found += stands_for(&list[i], (ev_fate)fate);
        for (int i = 0; i < CANDIDATES && next < wanted && written < count; i++) {
            if (!stands_for(&list[i], (ev_fate)fate))
                continue;
            /* the next ray stands in the middle of its part of the fate's candidates */
            if (seen++ < (int)((next + 0.5) * found / wanted))
                continue;
            rays[written] = ev_trace(seen_by, feed, in_plane(&antenna->feeds[feed], list[i].theta));
            rays[written++].power = 1.0 / count;
            next++;
        }
    }
    free(bare);
    free(list);
    return written;
}
