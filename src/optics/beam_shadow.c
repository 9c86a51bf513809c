/* Points over shadows. Called by the beam's source when a direction first needs them; knows nothing
 * of rays. */
#include "optics/beam_shadow.h"

#include "optics/quadrature.h"

#include <stdlib.h>

typedef struct obstacle {
    const ev_shadows *shadows;
    int index;
    int panels; /* equal parts of every interval: a Gauss rule only holds so many nodes */
} obstacle;

/* Cuts intervals into panels, the last first, so that one list serves both. */
static int slice(const void *context, double u, ev_shadow_interval *list)
{
    const obstacle *work = context;
    int count = ev_shadow_slice(work->shadows, work->index, u, list), panels = work->panels;
    if (count > 0 && panels * count > EV_SLICE_CAPACITY)
        panels = EV_SLICE_CAPACITY / count;
    for (int i = count - 1; i >= 0; i--) {
        ev_shadow_interval whole = list[i];
        double length = (whole.to - whole.from) / panels;
        for (int p = panels - 1; p >= 0; p--) {
            list[i * panels + p] = whole;
            list[i * panels + p].from = whole.from + p * length;
            list[i * panels + p].to = whole.from + (p + 1) * length;
        }
    }
    return count * panels;
}

static void append(const obstacle *work, const ev_region_nodes *nodes, ev_shadow_points *points)
{
    int needed = points->count + nodes->count;
    if (needed > points->capacity) {
        points->capacity = 2 * needed;
        size_t size = (size_t)points->capacity * sizeof(double);
        points->x = realloc(points->x, size);
        points->y = realloc(points->y, size);
        points->weight = realloc(points->weight, size);
        if (!points->x || !points->y || !points->weight)
            abort();
    }
    double scale = ev_shadow_scale(work->shadows, work->index);
    for (int i = 0; i < nodes->count; i++) {
        ev_region_node node = nodes->items[i];
        ev_line line = ev_shadow_line(work->shadows, work->index, node.phi);
        points->x[points->count] = line.x + node.r * line.dx;
        points->y[points->count] = line.y + node.r * line.dy;
        points->weight[points->count++] = scale * node.weight;
    }
}

enum { PANEL = 256, SEED_CAPACITY = 8 * EV_SHADOW_BODY_CAPACITY + 64 };

/* Nodes a radian: 0.31 by Gauss, after a few to begin with (beam_rings.c); uniform angles need one
 * a radian. */
static void add_obstacle(const ev_shadows *shadows, int index, double phase,
                         ev_shadow_points *points)
{
    double seeds[SEED_CAPACITY], extent[2];
    ev_shadow_extent(shadows, index, extent);
    bool strip = ev_shadow_is_strip(shadows, index);
    double along = phase * fmin(1.0, extent[0] / shadows->radius);
    double across = phase * fmin(1.0, extent[1] / shadows->radius);
    int radial = (int)(12.0 + 0.31 * along);
    int lines = (int)(strip ? 7.0 + 0.31 * across : 28.0 + 1.2 * across);
    obstacle work = {.shadows = shadows, .index = index, .panels = (radial + PANEL - 1) / PANEL};
    ev_region region = {
        .slice = slice, .context = &work, .seeds = seeds, .rows = strip, .shared = true};
    region.seed_count = ev_shadow_seeds(shadows, index, seeds, SEED_CAPACITY);
    ev_region_nodes nodes;
    ev_region_integrate(&region, (radial + work.panels - 1) / work.panels, lines, &nodes);
    append(&work, &nodes, points);
    free(nodes.items);
}

void ev_shadow_points_make(const ev_shadows *shadows, double phase, ev_shadow_points *points)
{
    *points = (ev_shadow_points){0};
    for (int i = 0; i < ev_shadow_count(shadows); i++)
        add_obstacle(shadows, i, phase, points);
}

void ev_shadow_points_free(ev_shadow_points *points)
{
    free(points->x);
    free(points->y);
    free(points->weight);
    *points = (ev_shadow_points){0};
}
