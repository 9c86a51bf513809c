/* The budget of each feed. Reads an antenna, calls the integrals, multiplies the efficiencies;
 * definitions in budget.h. */
#include "optics/budget.h"

#include "optics/field.h"
#include "optics/spill.h"

#include <stdlib.h>

/* All that one feed's budget is computed from. */
typedef struct account {
    const ev_antenna *antenna;
    int feed;
    ev_order order;
    bool edges;      /* the pattern ends somewhere over the aperture */
    ev_nodes rim;    /* around the rim, without weight */
    ev_nodes whole;  /* the aperture outside the hole */
    ev_nodes lit;    /* that part of it which the pattern reaches; may be `whole` itself */
    ev_nodes shadow; /* what is shadowed and lit */
    double captured_ground;
} account;

static bool is_unlit(const ev_antenna *antenna, int feed, ev_vec3 direction)
{
    const ev_feed *lit = &antenna->feeds[feed];
    return ev_vec3_angle(direction, lit->axis) > lit->pattern.end;
}

static bool find_edges(const account *sum)
{
    if (sum->antenna->feeds[sum->feed].pattern.end >= EV_PI)
        return false;
    const ev_nodes *sets[] = {&sum->rim, &sum->whole};
    for (int set = 0; set < 2; set++)
        for (int i = 0; i < sets[set]->count; i++)
            if (is_unlit(sum->antenna, sum->feed, sets[set]->items[i].direction))
                return true;
    return false;
}

static double path_span(const ev_nodes *nodes, ev_vec3 wanted)
{
    double low = INFINITY, high = -INFINITY;
    for (int i = 0; i < nodes->count; i++) {
        double error = nodes->items[i].path - ev_vec3_dot(wanted, nodes->items[i].point);
        low = fmin(low, error);
        high = fmax(high, error);
    }
    return high > low ? high - low : 0.0;
}

enum { RIM_NODES = 96 };

static void make_nodes(account *sum)
{
    const ev_antenna *antenna = sum->antenna;
    ev_nodes_circle(antenna, sum->feed, antenna->radius, RIM_NODES, &sum->rim);
    sum->order = ev_order_for(antenna, sum->feed, 0.0);
    ev_nodes_whole(antenna, sum->feed, sum->order, &sum->whole);
    double span = path_span(&sum->whole, antenna->feeds[sum->feed].wanted);
    ev_order needed = ev_order_for(antenna, sum->feed, 1.1 * span);
    if (needed.radial > sum->order.radial + 2) {
        ev_nodes_free(&sum->whole);
        sum->order = needed;
        ev_nodes_whole(antenna, sum->feed, needed, &sum->whole);
    }
    sum->edges = find_edges(sum);
    sum->lit = sum->whole;
    if (sum->edges) {
        ev_cut cut = {.antenna = antenna, .feed = sum->feed, .lit = true};
        ev_nodes_ring(&cut, antenna->hole_radius, antenna->radius, sum->order, &sum->lit);
    }
}

enum { OBSTACLE_CAPACITY = 1 + EV_SHADOW_BODY_CAPACITY + EV_SHADOW_STRIP_CAPACITY };

/* Whose shadows the sub's rim may cut: rays that come from near it or from beyond. */
static bool find_cut_shadows(const account *sum, bool flags[OBSTACLE_CAPACITY])
{
    bool beyond = false, any = false;
    for (int i = 0; i < sum->rim.count; i++)
        beyond |= sum->rim.items[i].sub_inside < -1e-10;
    for (int i = 0; beyond && i < sum->shadow.count; i++) {
        bool near = sum->shadow.items[i].sub_inside < 0.05;
        flags[sum->shadow.items[i].obstacle] |= near;
        any |= near;
    }
    return any;
}

static void add_power(const ev_nodes *nodes, const bool *left_out, double power[EV_FATE_COUNT])
{
    for (int i = 0; i < nodes->count; i++) {
        const ev_node *node = &nodes->items[i];
        if (!left_out || !left_out[node->obstacle])
            power[node->tag] += node->weight * node->density;
    }
}

/* Shadow shares honour the sub's rim, the shadowed field does not (it continues the conic). */
static void sum_shadows(account *sum, double power[EV_FATE_COUNT])
{
    const ev_antenna *antenna = sum->antenna;
    if (ev_shadow_count(&antenna->shadows) == 0)
        return;
    bool flags[OBSTACLE_CAPACITY] = {false};
    ev_cut cut = {.antenna = antenna, .feed = sum->feed, .lit = sum->edges};
    ev_nodes_shadow(&cut, NULL, sum->order, &sum->shadow);
    bool rim = antenna->dual && find_cut_shadows(sum, flags);
    add_power(&sum->shadow, rim ? flags : NULL, power);
    if (!rim)
        return;
    ev_nodes counted;
    cut.inside = true;
    ev_nodes_shadow(&cut, flags, sum->order, &counted);
    add_power(&counted, NULL, power);
    ev_nodes_free(&counted);
}

/* Below the horizon over the main reflector of a single-mirror antenna. */
static double captured_below(const account *sum)
{
    ev_vec3 up = ev_antenna_up(sum->antenna);
    bool below = false, above = false;
    for (int i = 0; i < sum->lit.count; i++)
        *(ev_vec3_dot(sum->lit.items[i].direction, up) < 0.0 ? &below : &above) = true;
    if (!below || !above)
        return below ? ev_nodes_power(&sum->lit) : 0.0;
    ev_cut cut = {.antenna = sum->antenna, .feed = sum->feed, .lit = sum->edges, .ground = true};
    const ev_antenna *antenna = sum->antenna;
    ev_nodes nodes;
    ev_nodes_ring(&cut, antenna->hole_radius, antenna->radius, sum->order, &nodes);
    double power = ev_nodes_power(&nodes);
    ev_nodes_free(&nodes);
    return power;
}

/* Each lost share is an integral of its own; `aperture` is what is left of 1. */
static void sum_power(account *sum, ev_feed_budget *out)
{
    const ev_antenna *antenna = sum->antenna;
    double spill_ground = 0.0;
    bool site = antenna->site.present;
    double below = site ? ev_spill_below_horizon(antenna, sum->feed) : 0.0;
    double *power = out->power;
    sum_shadows(sum, power);
    if (antenna->dual) {
        ev_sub_shares shares = ev_spill_sub_shares(antenna, sum->feed);
        power[EV_FATE_PAST_SUB] = 1.0 - shares.caught;
        power[EV_FATE_PAST_MAIN] = shares.missed;
        spill_ground = below - shares.caught_ground + shares.missed_ground;
    } else {
        power[EV_FATE_PAST_MAIN] = 1.0 - ev_nodes_power(&sum->lit);
        spill_ground = site ? below - captured_below(sum) : 0.0;
    }
    double lost = 0.0;
    for (int fate = EV_FATE_APERTURE + 1; fate < EV_FATE_COUNT; fate++) {
        power[fate] = fmax(power[fate], 0.0); /* rounding below an empty share */
        lost += power[fate];
    }
    /* where nothing is left, the quadrature's last digits may lose a hair more than all */
    for (int fate = EV_FATE_APERTURE + 1; fate < EV_FATE_COUNT && lost > 1.0; fate++)
        power[fate] /= lost;
    power[EV_FATE_APERTURE] = fmax(1.0 - lost, 0.0);
    double spill = power[EV_FATE_PAST_SUB] + power[EV_FATE_PAST_MAIN];
    out->noise = (ev_noise){NAN, NAN, NAN, NAN};
    if (!site)
        return;
    /* what is not spilled sees the sky; ohmic loss radiates at the ground's temperature */
    spill_ground = fmin(fmax(spill_ground, 0.0), spill);
    out->noise.spill_ground = spill_ground;
    out->noise.spill_sky = spill - spill_ground;
    out->noise.spill_k =
        spill_ground * antenna->site.ground + out->noise.spill_sky * antenna->site.sky;
    double outside = out->noise.spill_k + (1.0 - spill) * antenna->site.sky;
    out->noise.antenna_k = antenna->ohmic * outside + (1.0 - antenna->ohmic) * antenna->site.ground;
}

static void sum_paths(const account *sum, ev_feed_budget *out)
{
    const ev_antenna *antenna = sum->antenna;
    ev_plane area = ev_fit_plane(antenna, &sum->whole, out->wanted, EV_WEIGHT_AREA);
    ev_plane power = ev_fit_plane(antenna, &sum->lit, out->wanted, EV_WEIGHT_POWER);
    ev_plane amplitude = ev_fit_plane(antenna, &sum->lit, out->wanted, EV_WEIGHT_AMPLITUDE);
    out->path_error = (ev_path_stats){area.rms, power.rms, amplitude.rms, 0.0};
    out->untilted =
        (ev_path_stats){area.rms_untilted, power.rms_untilted, amplitude.rms_untilted, 0.0};
    out->mean_path_error = area.mean;
    out->tilt_x = area.b;
    out->tilt_y = area.c;
    ev_peak_to_valley(antenna, sum->feed, &sum->whole, out->wanted, &area,
                      &out->path_error.peak_to_valley, &out->untilted.peak_to_valley);
}

static double ratio_of(double part, double whole)
{
    return whole > 0.0 ? part / whole : 0.0;
}

static double square(double x)
{
    return x * x;
}

static void sum_fields(const account *sum, ev_feed_budget *out)
{
    const ev_antenna *antenna = sum->antenna;
    const ev_feed *feed = &antenna->feeds[sum->feed];
    ev_efficiency *eta = &out->efficiency;
    double amplitude = 0.0, squares = 0.0;
    for (int i = 0; i < sum->lit.count; i++) {
        amplitude += sum->lit.items[i].weight * sqrt(sum->lit.items[i].density);
        squares += sum->lit.items[i].weight * sum->lit.items[i].density;
    }
    double area = EV_PI * square(antenna->radius);
    double _Complex all = ev_aperture_integral(antenna, &sum->lit, out->peak);
    double _Complex shaded = ev_aperture_integral(antenna, &sum->shadow, out->peak);
    double _Complex wanted = ev_aperture_integral(antenna, &sum->lit, out->wanted);
    eta->taper = ratio_of(square(amplitude), area * squares);
    eta->phase = fmin(1.0, ratio_of(square(cabs(all)), square(amplitude)));
    eta->pointing = fmin(1.0, ratio_of(square(cabs(wanted)), square(cabs(all))));
    eta->polarization = ev_polarization_efficiency(&sum->lit, feed->polarization, out->wanted);
    eta->blockage = ratio_of(square(cabs(all - shaded)), square(cabs(all)));
}

static double decibels(double ratio)
{
    return 10.0 * log10(fmax(ratio, 1e-30));
}

static void sum_gain(const account *sum, ev_feed_budget *out)
{
    const ev_antenna *antenna = sum->antenna;
    ev_efficiency *eta = &out->efficiency;
    eta->spillover_sub = 1.0 - out->power[EV_FATE_PAST_SUB];
    eta->spillover = fmax(eta->spillover_sub - out->power[EV_FATE_PAST_MAIN], 0.0);
    eta->spillover_main = ratio_of(eta->spillover, eta->spillover_sub);
    eta->surface = exp(-square(2.0 * antenna->wavenumber * antenna->surface_rms));
    eta->ohmic = antenna->ohmic;
    eta->mismatch = antenna->mismatch;
    eta->total = eta->spillover * eta->taper * eta->phase * eta->polarization * eta->blockage *
                 eta->surface * eta->ohmic * eta->mismatch;
    out->full_aperture_gain_dbi = decibels(square(antenna->wavenumber * antenna->radius));
    out->gain_dbi = out->full_aperture_gain_dbi + decibels(eta->total);
    out->gain_on_axis_dbi = out->gain_dbi + decibels(eta->pointing);
}

static double density_at(const ev_antenna *antenna, int feed, double x)
{
    return ev_aperture_sample(antenna, feed, x, 0.0).density;
}

static void sum_rim(const account *sum, ev_feed_budget *out)
{
    const ev_antenna *antenna = sum->antenna;
    double highest = 0.0,
           captured = 1.0 - out->power[EV_FATE_PAST_SUB] - out->power[EV_FATE_PAST_MAIN];
    for (int i = 0; i < sum->lit.count; i++)
        highest = fmax(highest, sum->lit.items[i].density);
    double top = density_at(antenna, sum->feed, antenna->offset + antenna->radius);
    double bottom = density_at(antenna, sum->feed, antenna->offset - antenna->radius);
    out->rim_top_db = decibels(ratio_of(top, highest));
    out->rim_bottom_db = decibels(ratio_of(bottom, highest));
    double shadows = out->power[EV_FATE_SHADOW_SUB] + out->power[EV_FATE_SHADOW_FEED] +
                     out->power[EV_FATE_SHADOW_STRUTS];
    out->shadow_share = ratio_of(shadows, captured);
}

void ev_budget_compute_feed(const ev_antenna *antenna, int feed, ev_feed_budget *budget)
{
    account sum = {.antenna = antenna, .feed = feed};
    *budget = (ev_feed_budget){.wanted = antenna->feeds[feed].wanted};
    make_nodes(&sum);
    budget->peak = ev_aperture_peak(antenna, feed, &sum.lit, budget->wanted);
    if (antenna->feeds[feed].toward_peak)
        budget->wanted = budget->peak;
    sum_paths(&sum, budget);
    sum_power(&sum, budget);
    sum_fields(&sum, budget);
    sum_gain(&sum, budget);
    sum_rim(&sum, budget);
    if (sum.edges)
        ev_nodes_free(&sum.lit);
    ev_nodes_free(&sum.rim);
    ev_nodes_free(&sum.whole);
    ev_nodes_free(&sum.shadow);
}

void ev_budget_compute(const ev_antenna *antenna, ev_budget *budget)
{
    *budget = (ev_budget){.feed_count = antenna->feed_count};
    for (int i = 0; i < antenna->feed_count; i++)
        ev_budget_compute_feed(antenna, i, &budget->feeds[i]);
}

double ev_axis_gain_dbi(const ev_antenna *antenna, int feed)
{
    ev_nodes nodes;
    ev_vec3 wanted = antenna->feeds[feed].wanted;
    ev_order order = {12, 24};
    ev_nodes_whole(antenna, feed, order, &nodes);
    double waves = antenna->wavenumber * path_span(&nodes, wanted);
    if (waves > 12.0) {
        ev_nodes_free(&nodes);
        ev_nodes_whole(antenna, feed, ev_order_for(antenna, feed, waves / antenna->wavenumber),
                       &nodes);
    }
    if (antenna->feeds[feed].toward_peak)
        wanted = ev_aperture_peak(antenna, feed, &nodes, wanted);
    double size = cabs(ev_aperture_integral(antenna, &nodes, wanted));
    double polarization =
        ev_polarization_efficiency(&nodes, antenna->feeds[feed].polarization, wanted);
    ev_nodes_free(&nodes);
    return decibels(square(antenna->wavenumber * size) * polarization / EV_PI);
}
