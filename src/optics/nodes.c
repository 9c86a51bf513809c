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

static ev_node evaluate(const ev_antenna *antenna, int feed, double x, double y, double weight)
{
    ev_sample sample = ev_aperture_sample(antenna, feed, x, y);
    return (ev_node){.weight = weight,
                     .point = sample.point,
                     .path = sample.path,
                     .density = sample.density,
                     .phase = sample.phase,
                     .field = sample.field,
                     .sub_inside = sample.sub_inside,
                     .direction = sample.direction};
}

/* Below this a second thread costs more to wake than it saves, and where the machine is busy a
 * whole time slice. */
enum { WORTH_THREADS = 20000 };

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
#pragma omp parallel for schedule(static) if (nodes->count > WORTH_THREADS)
    for (int i = 0; i < nodes->count; i++) {
        double phi = 2.0 * EV_PI * (i / gauss.count) / order.around;
        double r = inner + span * gauss.x[i % gauss.count];
        double weight = gauss.weight[i % gauss.count] * span * r * 2.0 * EV_PI / order.around;
        nodes->items[i] =
            evaluate(antenna, feed, antenna->offset + r * cos(phi), r * sin(phi), weight);
    }
}

void ev_nodes_circle(const ev_antenna *antenna, int feed, double radius, int count, ev_nodes *nodes)
{
    allocate(nodes, count);
    for (int i = 0; i < count; i++) {
        double phi = 2.0 * EV_PI * i / count;
        nodes->items[i] =
            evaluate(antenna, feed, antenna->offset + radius * cos(phi), radius * sin(phi), 0.0);
    }
}

/* Lines over the aperture: radii of the aperture itself (obstacle < 0) or of an obstacle's sweep.
 */
typedef struct sweep {
    const ev_cut *cut;
    int obstacle;
    double inner, outer; /* of the aperture's radii */
    ev_margin margin;
    bool by_margin;
} sweep;

static ev_line line_of(const sweep *over, double phi)
{
    const ev_antenna *antenna = over->cut->antenna;
    if (over->obstacle >= 0)
        return ev_shadow_line(&antenna->shadows, over->obstacle, phi);
    return (ev_line){antenna->offset, 0.0, cos(phi), sin(phi)};
}

static void take_least(double *least, int *which, double value, int condition)
{
    if (value < *least) {
        *least = value;
        *which = condition;
    }
}

/* Positive where every condition of the cut holds. */
static double margin(const void *context, double phi, double r, int *which)
{
    const sweep *over = context;
    const ev_cut *cut = over->cut;
    const ev_antenna *antenna = cut->antenna;
    const ev_feed *feed = &antenna->feeds[cut->feed];
    *which = 0;
    if (!over->by_margin)
        return 1.0;
    ev_line line = line_of(over, phi);
    double x = line.x + r * line.dx, y = line.y + r * line.dy, least = INFINITY;
    ev_vec3 direction, sub_point;
    double path = ev_aperture_path(antenna, cut->feed, x, y, &direction, &sub_point);
    if (!isfinite(path))
        return -1.0;
    if (cut->lit)
        take_least(&least, which, feed->pattern.end - ev_vec3_angle(direction, feed->axis), 1);
    if (cut->inside && antenna->dual)
        take_least(&least, which, ev_sub_inside(&antenna->sub, sub_point) + 1e-10, 2);
    ev_vec3 up = {0.0, 0.0, 1.0};
    if (cut->ground || cut->landing)
        up = ev_antenna_up(antenna);
    if (cut->ground)
        take_least(&least, which, -ev_vec3_dot(direction, up), 3);
    if (cut->landing) {
        ev_vec3 from = antenna->dual ? sub_point : feed->position;
        ev_vec3 leg = ev_vec3_sub(ev_main_point(antenna, x, y), from);
        take_least(&least, which, -ev_vec3_dot(leg, up) / antenna->focal_length, 4);
    }
    return least;
}

static int slice(const void *context, double phi, ev_shadow_interval *intervals)
{
    const sweep *over = context;
    const ev_shadows *shadows = &over->cut->antenna->shadows;
    ev_shadow_interval whole = {over->inner, over->outer, EV_FATE_APERTURE, 0, 1};
    if (over->obstacle < 0)
        return ev_clip_by_margin(&over->margin, phi, whole, intervals);
    if (!over->by_margin)
        return ev_shadow_slice(shadows, over->obstacle, phi, intervals);
    ev_shadow_interval bare[EV_SLICE_CAPACITY];
    int bare_count = ev_shadow_slice(shadows, over->obstacle, phi, bare), count = 0;
    for (int i = 0; i < bare_count && count + 2 * over->margin.samples <= EV_SLICE_CAPACITY; i++)
        count += ev_clip_by_margin(&over->margin, phi, bare[i], intervals + count);
    return count;
}

static void prepare(const ev_cut *cut, int obstacle, int samples, sweep *over)
{
    over->cut = cut;
    over->obstacle = obstacle;
    over->by_margin = cut->lit || cut->inside || cut->ground || cut->landing;
    over->margin = (ev_margin){.value = margin, .context = over, .samples = samples};
}

/* Nodes being gathered, bare ones first, all evaluated at the end. */
static void append(const sweep *over, const ev_region_nodes *bare, double scale, ev_nodes *nodes)
{
    size_t count = (size_t)nodes->count + (size_t)bare->count;
    nodes->items = realloc(nodes->items, (count ? count : 1) * sizeof *nodes->items);
    if (!nodes->items)
        abort();
    for (int i = 0; i < bare->count; i++) {
        ev_region_node node = bare->items[i];
        ev_line line = line_of(over, node.phi);
        nodes->items[nodes->count++] = (ev_node){.weight = scale * node.weight,
                                                 .point.x = line.x + node.r * line.dx,
                                                 .point.y = line.y + node.r * line.dy,
                                                 .obstacle = over->obstacle,
                                                 .tag = node.tag};
    }
}

static void evaluate_all(const ev_cut *cut, ev_nodes *nodes)
{
#pragma omp parallel for schedule(static) if (nodes->count > WORTH_THREADS)
    for (int i = 0; i < nodes->count; i++) {
        ev_node bare = nodes->items[i], *node = &nodes->items[i];
        *node = evaluate(cut->antenna, cut->feed, bare.point.x, bare.point.y, bare.weight);
        node->obstacle = bare.obstacle;
        node->tag = bare.tag;
    }
}

enum { SEED_CAPACITY = 512, RING_SEEDS = 8, RING_LOOKS = 96 };
enum { RING_SAMPLES = 13, SHADOW_SAMPLES = 5 };

static int compare_doubles(const void *a, const void *b)
{
    double x = *(const double *)a, y = *(const double *)b;
    return (x > y) - (x < y);
}

/* Where the conditions begin and end along the two circles of a ring, and some angles more. */
static int ring_seeds(const sweep *over, double seeds[SEED_CAPACITY])
{
    const double full = 2.0 * EV_PI;
    int count = 0;
    for (int i = 0; i < RING_SEEDS; i++)
        seeds[count++] = full * i / RING_SEEDS;
    for (int side = 0; side < 2; side++) {
        double r = side ? over->inner : over->outer;
        if (r > 0.0)
            count += ev_margin_changes(&over->margin, r, 0.0, full, RING_LOOKS, seeds + count,
                                       SEED_CAPACITY / 2 - RING_SEEDS);
    }
    qsort(seeds, (size_t)count, sizeof seeds[0], compare_doubles);
    seeds[count++] = full;
    return count;
}

void ev_nodes_ring(const ev_cut *cut, double inner, double outer, ev_order order, ev_nodes *nodes)
{
    double seeds[SEED_CAPACITY];
    sweep over = {.inner = inner, .outer = outer};
    prepare(cut, -1, RING_SAMPLES, &over);
    ev_region region = {.slice = slice, .context = &over, .seeds = seeds, .shared = true};
    ev_region_nodes bare;
    region.seed_count = ring_seeds(&over, seeds);
    ev_region_integrate(&region, order.radial, order.around, &bare);
    *nodes = (ev_nodes){0};
    append(&over, &bare, 1.0, nodes);
    free(bare.items);
    evaluate_all(cut, nodes);
}

/* Orders of the whole aperture, for a part of it of such an extent. */
static int part_of(int order, double extent, double whole)
{
    double part = fmin(fmax(extent / whole, 0.0), 1.0);
    return 5 + (int)ceil(order * part);
}

/* Lines along a strip want nodes by its length, and only some lines; an outline by its size. */
static ev_order order_of(const ev_antenna *antenna, int obstacle, ev_order order)
{
    double extent[2], radius = antenna->radius;
    ev_shadow_extent(&antenna->shadows, obstacle, extent);
    bool strip = ev_shadow_is_strip(&antenna->shadows, obstacle);
    int along = part_of(order.radial, extent[0], radius);
    int lines = strip ? part_of(order.radial, extent[1], radius) - 1
                      : part_of(order.around, extent[1], radius) + 16;
    return (ev_order){along, lines};
}

enum { CORNER_CAPACITY = 16, OUTLINE_LOOKS = 48 };

/* Where the conditions begin and end along the aperture's rim: corners of what is shadowed. */
static int find_corners(const ev_cut *cut, double corners[CORNER_CAPACITY])
{
    sweep over = {.outer = cut->antenna->radius};
    prepare(cut, -1, RING_SAMPLES, &over);
    return !over.by_margin ? 0
                           : ev_margin_changes(&over.margin, over.outer, 0.0, 2.0 * EV_PI,
                                               RING_LOOKS, corners, CORNER_CAPACITY);
}

static int shadow_seeds(const sweep *over, const double *corners, int corner_count,
                        double seeds[SEED_CAPACITY])
{
    const ev_antenna *antenna = over->cut->antenna;
    const ev_shadows *shadows = &antenna->shadows;
    int room = SEED_CAPACITY - 2 * CORNER_CAPACITY;
    int count = ev_shadow_seeds(shadows, over->obstacle, seeds, room);
    double low = seeds[0], high = seeds[count - 1];
    for (int i = 0; i < corner_count; i++) {
        double x = antenna->offset + antenna->radius * cos(corners[i]);
        double y = antenna->radius * sin(corners[i]);
        double at = ev_shadow_line_through(shadows, over->obstacle, x, y);
        if (at > low && at < high)
            seeds[count++] = at;
    }
    if (over->by_margin && !ev_shadow_is_strip(shadows, over->obstacle))
        count += ev_margin_changes(&over->margin, 1.0, low, high, OUTLINE_LOOKS, seeds + count,
                                   CORNER_CAPACITY);
    qsort(seeds, (size_t)count, sizeof seeds[0], compare_doubles);
    return count;
}

static void add_shadow(const ev_cut *cut, int obstacle, ev_order order, const double *corners,
                       int corner_count, ev_nodes *nodes)
{
    const ev_shadows *shadows = &cut->antenna->shadows;
    double seeds[SEED_CAPACITY];
    sweep over = {0};
    ev_region_nodes bare;
    prepare(cut, obstacle, SHADOW_SAMPLES, &over);
    ev_region region = {.slice = slice,
                        .context = &over,
                        .seeds = seeds,
                        .seed_count = shadow_seeds(&over, corners, corner_count, seeds),
                        .rows = ev_shadow_is_strip(shadows, obstacle),
                        .shared = true};
    ev_order own = order_of(cut->antenna, obstacle, order);
    ev_region_integrate(&region, own.radial, own.around, &bare);
    append(&over, &bare, ev_shadow_scale(shadows, obstacle), nodes);
    free(bare.items);
}

void ev_nodes_shadow(const ev_cut *cut, const bool *flags, ev_order order, ev_nodes *nodes)
{
    double corners[CORNER_CAPACITY];
    int corner_count = find_corners(cut, corners);
    *nodes = (ev_nodes){0};
    for (int obstacle = 0; obstacle < ev_shadow_count(&cut->antenna->shadows); obstacle++)
        if (!flags || flags[obstacle])
            add_shadow(cut, obstacle, order, corners, corner_count, nodes);
    evaluate_all(cut, nodes);
}

double ev_nodes_power(const ev_nodes *nodes)
{
    double sum = 0.0;
    for (int i = 0; i < nodes->count; i++)
        sum += nodes->items[i].weight * nodes->items[i].density;
    return sum;
}
