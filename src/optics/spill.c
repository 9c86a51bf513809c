/* Shares found on the feed's side. Called by the budget. */
#include "optics/spill.h"

#include <stdlib.h>

enum { CAP_PIECES = 12, CAP_NODES = 16 };

/* Share of the circle theta around the feed's axis that is below the horizon, and the same weighted
 * with cos(2 phi) (phi from the feed's x), for patterns that differ in E and H. `tip` is the angle
 * of the axis from up, `turn` the azimuth of up in the feed's frame. */
static void arc_below(double theta, double tip, double turn, double *plain, double *doubled)
{
    /* below: cos(theta) cos(tip) + sin(theta) sin(tip) cos(phi - turn) < 0 */
    double wave = sin(theta) * sin(tip), level = cos(theta) * cos(tip);
    double half = fabs(wave) < 1e-15 ? (level < 0.0 ? 0.0 : EV_PI)
                                     : acos(fmin(1.0, fmax(-1.0, -level / wave)));
    *plain = 1.0 - half / EV_PI;
    *doubled = -sin(2.0 * half) * cos(2.0 * turn) / (2.0 * EV_PI);
}

/* +1 for power cos^2(phi) E + sin^2(phi) H, -1 for y, 0 for circular. */
static double plane_sign(ev_polarization polarization)
{
    return polarization == EV_POLARIZATION_X ? 1.0 : polarization == EV_POLARIZATION_Y ? -1.0 : 0.0;
}

static double below_piece(const ev_feed *feed, const ev_gauss *gauss, double from, double to,
                          double tip, double turn)
{
    double sum = 0.0, sign = plane_sign(feed->polarization);
    for (int i = 0; i < gauss->count; i++) {
        double u = gauss->x[i], theta = from + (to - from) * u * u * (3.0 - 2.0 * u);
        double step = gauss->weight[i] * (to - from) * 6.0 * u * (1.0 - u);
        double plain, doubled;
        arc_below(theta, tip, turn, &plain, &doubled);
        ev_pattern_level level = ev_pattern_at(&feed->pattern, theta);
        sum += step * sin(theta) * 0.5 *
               (0.5 * (level.e + level.h) * plain + 0.5 * sign * (level.e - level.h) * doubled);
    }
    return sum;
}

double ev_spill_below_horizon(const ev_antenna *antenna, int index)
{
    const ev_feed *feed = &antenna->feeds[index];
    ev_vec3 up = ev_antenna_up(antenna);
    double tip = ev_vec3_angle(up, feed->axis);
    double turn = atan2(ev_vec3_dot(up, feed->ey), ev_vec3_dot(up, feed->ex));
    double touch = fabs(0.5 * EV_PI - tip), end = feed->pattern.end;
    ev_gauss gauss;
    ev_gauss_make(CAP_NODES, &gauss);
    double stops[4] = {0.0, fmin(touch, end), fmin(EV_PI - touch, end), end}, sum = 0.0;
    for (int k = 0; k < 3; k++)
        for (int i = 0; i < CAP_PIECES && stops[k] < stops[k + 1]; i++) {
            double span = stops[k + 1] - stops[k], a = (double)i / CAP_PIECES;
            double b = (i + 1.0) / CAP_PIECES;
            sum += below_piece(feed, &gauss, stops[k] + span * a * a, stops[k] + span * b * b, tip,
                               turn);
        }
    return sum;
}

/* A ray from the feed to a point of the subreflector and on. */
typedef struct sub_ray {
    ev_vec3 q, normal, out; /* out: unit, leaving the feed */
    double distance;
} sub_ray;

static sub_ray reach(const ev_antenna *antenna, int index, double r, double t)
{
    sub_ray ray = {.q = ev_sub_point(&antenna->sub, r, t)};
    ev_vec3 arm = ev_vec3_sub(ray.q, antenna->feeds[index].position);
    ray.normal = ev_conic_normal(&antenna->sub.placed, ray.q);
    ray.distance = ev_vec3_length(arm);
    ray.out = ev_vec3_scale(1.0 / ray.distance, arm);
    return ray;
}

/* Share of the power per unit of (r dr dt) on the rim disc. */
static double density(const ev_antenna *antenna, int index, double r, double t)
{
    const ev_sub *sub = &antenna->sub;
    sub_ray ray = reach(antenna, index, r, t);
    /* area on the surface over area on the rim plane: 1 / |n . rim normal| */
    double plane = (sub->semi_long + sub->oversize) * (sub->semi_short + sub->oversize);
    double solid = fabs(ev_vec3_dot(ray.out, ray.normal)) / (ray.distance * ray.distance) * plane /
                   fabs(ev_vec3_dot(ray.normal, sub->placed_normal));
    return ev_feed_launch(antenna, index, ray.out).level * solid / (4.0 * EV_PI);
}

/* How far outside the main reflector's rim a ray comes down, in radii; < 0 within it. It comes down
 * where it leaves the paraboloid's inside: the farther crossing. */
static double miss(const ev_antenna *antenna, ev_vec3 from, ev_vec3 direction)
{
    double t;
    if (!ev_conic_exit(&antenna->main, from, direction, &t) || t <= 0.0)
        return 1.0;
    ev_vec3 hit = ev_vec3_along(from, t, direction);
    double dx = hit.x - antenna->offset;
    return sqrt(dx * dx + hit.y * hit.y) / antenna->radius - 1.0;
}

/* Conditions on the rim disc. */
typedef struct disc {
    const ev_antenna *antenna;
    int feed;
    bool lit, missed, out_ground, back_ground;
    ev_margin margin;
} disc;

static void take_least(double *least, int *which, double value, int condition)
{
    if (value < *least) {
        *least = value;
        *which = condition;
    }
}

static double disc_margin(const void *context, double t, double r, int *which)
{
    const disc *cut = context;
    const ev_antenna *antenna = cut->antenna;
    *which = 0;
    if (!cut->lit && !cut->missed && !cut->out_ground && !cut->back_ground)
        return 1.0;
    sub_ray ray = reach(antenna, cut->feed, r, t);
    ev_vec3 up = ev_antenna_up(antenna), back = ev_vec3_reflect(ray.out, ray.normal);
    const ev_feed *feed = &antenna->feeds[cut->feed];
    double least = INFINITY;
    if (cut->lit)
        take_least(&least, which, feed->pattern.end - ev_vec3_angle(ray.out, feed->axis), 1);
    if (cut->missed)
        take_least(&least, which, miss(antenna, ray.q, back) - 1e-10, 2);
    if (cut->out_ground)
        take_least(&least, which, -ev_vec3_dot(ray.out, up), 3);
    if (cut->back_ground)
        take_least(&least, which, -ev_vec3_dot(back, up), 4);
    return least;
}

static int disc_slice(const void *context, double t, ev_shadow_interval *intervals)
{
    const disc *cut = context;
    ev_shadow_interval whole = {0.0, 1.0, EV_FATE_APERTURE, 0, 1};
    return ev_clip_by_margin(&cut->margin, t, whole, intervals);
}

enum { DISC_SEEDS = 8, DISC_LOOKS = 180, DISC_CHANGES = 32, DISC_SAMPLES = 9 };

static int compare_doubles(const void *a, const void *b)
{
    double x = *(const double *)a, y = *(const double *)b;
    return (x > y) - (x < y);
}

static double disc_power(disc *cut, ev_order order)
{
    double seeds[DISC_SEEDS + DISC_CHANGES + 1], sum = 0.0;
    int count = 0;
    cut->margin = (ev_margin){.value = disc_margin, .context = cut, .samples = DISC_SAMPLES};
    for (int i = 0; i < DISC_SEEDS; i++)
        seeds[count++] = 2.0 * EV_PI * i / DISC_SEEDS;
    count += ev_margin_changes(&cut->margin, 1.0, 0.0, 2.0 * EV_PI, DISC_LOOKS, seeds + count,
                               DISC_CHANGES);
    qsort(seeds, (size_t)count, sizeof seeds[0], compare_doubles);
    seeds[count++] = 2.0 * EV_PI;
    ev_region region = {
        .slice = disc_slice, .context = cut, .seeds = seeds, .seed_count = count, .shared = true};
    ev_region_nodes nodes;
    ev_region_integrate(&region, order.radial, order.around, &nodes);
    for (int i = 0; i < nodes.count; i++)
        sum += nodes.items[i].weight *
               density(cut->antenna, cut->feed, nodes.items[i].r, nodes.items[i].phi);
    free(nodes.items);
    return sum;
}

/* Whether the conditions hold anywhere, and everywhere, on the disc: looks along its rim, where
 * parts are cut off first, and here and there inside. */
typedef struct seen {
    bool any, all;
} seen;

enum { LOOK_RADII = 4 };

static seen look(const disc *cut)
{
    seen found = {false, true};
    int which;
    for (int i = 0; i <= LOOK_RADII; i++) {
        int angles = i == LOOK_RADII ? DISC_LOOKS : 6 * i + 1;
        for (int k = 0; k < angles; k++) {
            double t = 2.0 * EV_PI * k / angles;
            bool holds = disc_margin(cut, t, (double)i / LOOK_RADII, &which) > 0.0;
            found.any |= holds;
            found.all &= holds;
        }
    }
    return found;
}

/* Power on the disc under conditions; nothing is integrated where none can be. */
static double power_where(disc cut, ev_order order)
{
    return look(&cut).any ? disc_power(&cut, order) : 0.0;
}

/* What falls through the hole, and (ground) what of it is heading below the horizon. */
static double hole_power(const ev_antenna *antenna, int feed, ev_order order, bool lit, bool ground)
{
    double part = antenna->hole_radius / antenna->radius;
    ev_order own = {6 + (int)(order.radial * part), 16 + (int)(order.around * part)};
    ev_cut cut = {.antenna = antenna, .feed = feed, .lit = lit, .landing = ground};
    ev_nodes nodes;
    ev_nodes_ring(&cut, 0.0, antenna->hole_radius, own, &nodes);
    for (int i = 0; i < nodes.count && !cut.inside; i++)
        cut.inside = nodes.items[i].sub_inside < 0.1;
    if (cut.inside) {
        ev_nodes_free(&nodes);
        ev_nodes_ring(&cut, 0.0, antenna->hole_radius, own, &nodes);
    }
    double power = ev_nodes_power(&nodes);
    ev_nodes_free(&nodes);
    return power;
}

ev_sub_shares ev_spill_sub_shares(const ev_antenna *antenna, int feed)
{
    ev_order order = ev_order_for(antenna, feed, 0.0);
    bool site = antenna->site.present, ends = antenna->feeds[feed].pattern.end < EV_PI;
    disc bare = {.antenna = antenna, .feed = feed, .lit = ends};
    bare.lit = ends && !look(&bare).all;
    disc missed = bare, below = bare;
    missed.missed = true;
    below.out_ground = true;
    ev_sub_shares shares = {.caught = disc_power(&bare, order),
                            .missed = power_where(missed, order)};
    if (antenna->hole_radius > 0.0)
        shares.missed += hole_power(antenna, feed, order, bare.lit, false);
    if (!site)
        return shares;
    shares.caught_ground = power_where(below, order);
    missed.back_ground = true;
    shares.missed_ground = shares.missed > 0.0 ? power_where(missed, order) : 0.0;
    if (antenna->hole_radius > 0.0)
        shares.missed_ground += hole_power(antenna, feed, order, bare.lit, true);
    return shares;
}
