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
    ev_vec3 out, back; /* unit, leaving the feed and leaving the sub */
    double density;    /* share of the power per unit of (r dr dt) on the rim disc */
    double miss;       /* > 0 where it misses the main reflector's rim or falls in its hole */
} sub_ray;

static double miss_margin(const ev_antenna *antenna, ev_vec3 from, ev_vec3 direction)
{
    double t[2];
    int count = ev_conic_intersect(&antenna->main, from, direction, t);
    if (count == 0 || t[count - 1] <= 0.0)
        return 1.0;
    ev_vec3 hit = ev_vec3_along(from, t[0] > 0.0 ? t[0] : t[1], direction);
    double r = hypot(hit.x - antenna->offset, hit.y);
    return fmax(r / antenna->radius - 1.0,
                antenna->hole_radius / antenna->radius - r / antenna->radius);
}

static sub_ray launch(const ev_antenna *antenna, int index, double r, double t)
{
    const ev_sub *sub = &antenna->sub;
    ev_vec3 from = antenna->feeds[index].position, q = ev_sub_point(sub, r, t);
    ev_vec3 arm = ev_vec3_sub(q, from), n = ev_conic_normal(&sub->placed, q);
    double distance = ev_vec3_length(arm);
    ev_vec3 out = ev_vec3_scale(1.0 / distance, arm);
    /* area on the surface over area on the rim plane: 1 / |n . rim normal|, as designed */
    ev_vec3 level = ev_conic_normal(&sub->nominal, ev_sub_unplace(sub, q));
    double plane = (sub->semi_long + sub->oversize) * (sub->semi_short + sub->oversize);
    double solid = fabs(ev_vec3_dot(out, n)) / (distance * distance) * plane /
                   fabs(ev_vec3_dot(level, sub->rim_normal));
    sub_ray ray = {.out = out, .back = ev_vec3_reflect(out, n)};
    ray.density = ev_feed_launch(antenna, index, out).level * solid / (4.0 * EV_PI);
    ray.miss = miss_margin(antenna, q, ray.back);
    return ray;
}

/* Conditions on the rim disc. */
typedef struct disc_cut {
    const ev_antenna *antenna;
    int feed;
    bool lit, missed, out_ground, back_ground;
} disc_cut;

static double disc_margin(const void *context, double r, double t)
{
    const disc_cut *cut = context;
    const ev_antenna *antenna = cut->antenna;
    sub_ray ray = launch(antenna, cut->feed, r, t);
    ev_vec3 up = ev_antenna_up(antenna);
    const ev_feed *feed = &antenna->feeds[cut->feed];
    double least = INFINITY;
    if (cut->lit)
        least = fmin(least, feed->pattern.end - ev_vec3_angle(ray.out, feed->axis));
    if (cut->missed)
        least = fmin(least, ray.miss - 1e-10);
    if (cut->out_ground)
        least = fmin(least, -ev_vec3_dot(ray.out, up));
    if (cut->back_ground)
        least = fmin(least, -ev_vec3_dot(ray.back, up));
    return least;
}

static double disc_power(const disc_cut *cut, ev_order order)
{
    static const double quarters[5] = {0.0, 0.5 * EV_PI, EV_PI, 1.5 * EV_PI, 2.0 * EV_PI};
    ev_margin_slice slice = {.margin = disc_margin, .context = cut, .from = 0.0, .to = 1.0};
    ev_region region = {
        .slice = ev_slice_by_margin, .context = &slice, .seeds = quarters, .seed_count = 5};
    ev_region_nodes nodes;
    double sum = 0.0;
    ev_region_integrate(&region, order.radial, order.around, &nodes);
    for (int i = 0; i < nodes.count; i++)
        sum += nodes.items[i].weight *
               launch(cut->antenna, cut->feed, nodes.items[i].r, nodes.items[i].phi).density;
    free(nodes.items);
    return sum;
}

/* What the rim disc shows about its rim and its inside, coarsely: is any of it missed, unlit... */
typedef struct disc_look {
    bool missed, unlit, out_below, out_above, back_below;
} disc_look;

enum { LOOK_RADII = 17, LOOK_ANGLES = 24 };

static disc_look look(const ev_antenna *antenna, int index)
{
    disc_look seen = {0};
    const ev_feed *feed = &antenna->feeds[index];
    ev_vec3 up = ev_antenna_up(antenna);
    for (int i = 0; i < LOOK_RADII; i++)
        for (int k = 0; k < LOOK_ANGLES; k++) {
            sub_ray ray =
                launch(antenna, index, i / (LOOK_RADII - 1.0), 2.0 * EV_PI * k / LOOK_ANGLES);
            seen.missed |= ray.miss > 1e-10;
            seen.unlit |= ev_vec3_angle(ray.out, feed->axis) > feed->pattern.end;
            *(ev_vec3_dot(ray.out, up) < 0.0 ? &seen.out_below : &seen.out_above) = true;
            seen.back_below |= ev_vec3_dot(ray.back, up) < 0.0;
        }
    return seen;
}

static double whole_disc(const ev_antenna *antenna, int feed, ev_order order)
{
    ev_gauss gauss;
    double sum = 0.0;
    ev_gauss_make(order.radial, &gauss);
    for (int k = 0; k < order.around; k++)
        for (int i = 0; i < gauss.count; i++)
            sum += gauss.weight[i] * gauss.x[i] *
                   launch(antenna, feed, gauss.x[i], 2.0 * EV_PI * k / order.around).density;
    return sum * 2.0 * EV_PI / order.around;
}

ev_sub_shares ev_spill_sub_shares(const ev_antenna *antenna, int feed)
{
    ev_sub_shares shares = {0};
    disc_look seen = look(antenna, feed);
    ev_order whole = ev_order_for(antenna, feed, 0.0), cut_order = {whole.radial, whole.around / 4};
    disc_cut cut = {.antenna = antenna, .feed = feed, .lit = true};
    shares.caught = seen.unlit ? disc_power(&cut, cut_order) : whole_disc(antenna, feed, whole);
    if (seen.missed) {
        cut.missed = true;
        shares.missed = disc_power(&cut, cut_order);
        cut.back_ground = true;
        if (antenna->site.present && seen.back_below)
            shares.missed_ground = disc_power(&cut, cut_order);
    }
    if (!antenna->site.present || !seen.out_below)
        return shares;
    cut = (disc_cut){.antenna = antenna, .feed = feed, .lit = true, .out_ground = true};
    shares.caught_ground = seen.out_above ? disc_power(&cut, cut_order) : shares.caught;
    return shares;
}
