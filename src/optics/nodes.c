/* Builds and evaluates aperture nodes. Called by the budget; each node is computed apart from the
 * others, so any number of threads gives the same bits. */
#include "optics/nodes.h"

#include <stdlib.h>

ev_order ev_order_for(const ev_antenna *antenna, int feed, double path_span)
{
    const ev_feed *lit = &antenna->feeds[feed];
    double taper = fmin(fmax(lit->edge_taper_db, 0.0), 1e5);
    double steep = sqrt(0.23 * taper), waves = fmin(antenna->wavenumber * path_span, 4000.0);
    int radial = 16 + (int)(2.5 * steep + 0.35 * waves);
    int around = 36 + (int)(6.0 * steep + 1.15 * waves);
    return (ev_order){radial < 320 ? radial : 320, around < 960 ? around : 960};
}

static ev_node evaluate(const ev_antenna *antenna, int feed, double x, double y, double weight,
                        ev_fate tag)
{
    ev_sample sample = ev_aperture_sample(antenna, feed, x, y);
    return (ev_node){.weight = weight,
                     .point = sample.point,
                     .path = sample.path,
                     .density = sample.density,
                     .phase = sample.phase,
                     .field = sample.field,
                     .sub_inside = sample.sub_inside,
                     .direction = sample.direction,
                     .tag = tag};
}

static void allocate(ev_nodes *nodes, int count)
{
    nodes->count = count;
    nodes->items = malloc((size_t)(count > 0 ? count : 1) * sizeof *nodes->items);
    if (!nodes->items)
        abort();
}

void ev_nodes_free(ev_nodes *nodes)
{
    free(nodes->items);
    *nodes = (ev_nodes){0};
}

void ev_nodes_whole(const ev_antenna *antenna, int feed, ev_order order, ev_nodes *nodes)
{
    ev_gauss gauss;
    ev_gauss_make(order.radial, &gauss);
    allocate(nodes, gauss.count * order.around);
    double inner = antenna->hole_radius, span = antenna->radius - inner;
#pragma omp parallel for schedule(static)
    for (int i = 0; i < nodes->count; i++) {
        double phi = 2.0 * EV_PI * (i / gauss.count) / order.around;
        double r = inner + span * gauss.x[i % gauss.count];
        double weight = gauss.weight[i % gauss.count] * span * r * 2.0 * EV_PI / order.around;
        nodes->items[i] = evaluate(antenna, feed, antenna->offset + r * cos(phi), r * sin(phi),
                                   weight, EV_FATE_APERTURE);
    }
}

/* Positive where every condition of the cut holds; continuous along a radius. */
static double margin(const void *context, double r, double phi)
{
    const ev_cut *cut = context;
    const ev_antenna *antenna = cut->antenna;
    const ev_feed *feed = &antenna->feeds[cut->feed];
    ev_vec3 direction, sub_point;
    double path = ev_aperture_path(antenna, cut->feed, antenna->offset + r * cos(phi), r * sin(phi),
                                   &direction, &sub_point);
    if (!isfinite(path))
        return -1.0;
    double least = INFINITY;
    if (cut->lit)
        least = fmin(least, feed->pattern.end - ev_vec3_angle(direction, feed->axis));
    if (cut->inside && antenna->dual)
        least = fmin(least, ev_sub_inside(&antenna->sub, sub_point) + 1e-10);
    if (cut->ground)
        least = fmin(least, -ev_vec3_dot(direction, ev_antenna_up(antenna)));
    return least;
}

static int slice_margin(const ev_cut *cut, double phi, ev_shadow_interval *intervals)
{
    ev_margin_slice slice = {.margin = margin,
                             .context = cut,
                             .from = cut->antenna->hole_radius,
                             .to = cut->antenna->radius};
    return ev_slice_by_margin(&slice, phi, intervals);
}

static int intersect(const ev_shadow_interval *a, int a_count, const ev_shadow_interval *b,
                     int b_count, ev_shadow_interval *out)
{
    int count = 0;
    for (int i = 0; i < a_count; i++)
        for (int k = 0; k < b_count && count < EV_SLICE_CAPACITY; k++) {
            ev_shadow_interval both = a[i];
            if (b[k].from > both.from) {
                both.from = b[k].from;
                both.from_id = b[k].from_id;
            }
            if (b[k].to < both.to) {
                both.to = b[k].to;
                both.to_id = b[k].to_id;
            }
            if (both.from < both.to)
                out[count++] = both;
        }
    return count;
}

static int slice_cut(const void *context, double phi, ev_shadow_interval *intervals)
{
    const ev_cut *cut = context;
    bool by_margin = cut->lit || cut->inside || cut->ground;
    if (!cut->shadows)
        return slice_margin(cut, phi, intervals);
    if (!by_margin)
        return ev_shadow_slice(&cut->antenna->shadows, phi, intervals);
    ev_shadow_interval shadowed[EV_SLICE_CAPACITY], kept[EV_MARGIN_SAMPLES];
    int shadow_count = ev_shadow_slice(&cut->antenna->shadows, phi, shadowed);
    int kept_count = shadow_count > 0 ? slice_margin(cut, phi, kept) : 0;
    return intersect(shadowed, shadow_count, kept, kept_count, intervals);
}

enum { SEED_CAPACITY = 4 * EV_SHADOW_STRIP_CAPACITY + 128 };

void ev_nodes_cut(const ev_cut *cut, ev_order order, ev_nodes *nodes)
{
    double *seeds = malloc(SEED_CAPACITY * sizeof *seeds);
    if (!seeds)
        abort();
    ev_region region = {.slice = slice_cut, .context = cut, .seeds = seeds};
    region.seed_count = ev_shadow_seeds(&cut->antenna->shadows, seeds, SEED_CAPACITY);
    ev_region_nodes bare;
    ev_region_integrate(&region, order.radial, order.around, &bare);
    free(seeds);
    allocate(nodes, bare.count);
    double centre = cut->antenna->offset;
#pragma omp parallel for schedule(static)
    for (int i = 0; i < bare.count; i++) {
        ev_region_node node = bare.items[i];
        nodes->items[i] = evaluate(cut->antenna, cut->feed, centre + node.r * cos(node.phi),
                                   node.r * sin(node.phi), node.weight, node.tag);
    }
    free(bare.items);
}

double ev_nodes_power(const ev_nodes *nodes)
{
    double sum = 0.0;
    for (int i = 0; i < nodes->count; i++)
        sum += nodes->items[i].weight * nodes->items[i].density;
    return sum;
}
