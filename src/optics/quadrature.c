/* Gauss-Legendre rules and polar regions with exact breaks. Called by the budget; knows nothing of
 * antennas. */
#include "optics/quadrature.h"

#include <stdlib.h>

static double legendre(int n, double x, double *slope)
{
    double p0 = 1.0, p1 = x;
    for (int k = 2; k <= n; k++) {
        double p2 = ((2 * k - 1) * x * p1 - (k - 1) * p0) / k;
        p0 = p1;
        p1 = p2;
    }
    *slope = n * (x * p1 - p0) / (x * x - 1.0);
    return p1;
}

void ev_gauss_make(int count, ev_gauss *gauss)
{
    int n = count < 1 ? 1 : count > EV_GAUSS_CAPACITY ? EV_GAUSS_CAPACITY : count;
    gauss->count = n;
    gauss->x[0] = 0.5;
    gauss->weight[0] = 1.0;
    for (int i = 0; n > 1 && i < (n + 1) / 2; i++) {
        double x = cos(EV_PI * (i + 0.75) / (n + 0.5)), slope = 1.0;
        for (int pass = 0; pass < 20; pass++) {
            double step = legendre(n, x, &slope) / slope;
            x -= step;
            if (fabs(step) < 1e-15)
                break;
        }
        legendre(n, x, &slope);
        double weight = 1.0 / ((1.0 - x * x) * slope * slope);
        gauss->x[i] = 0.5 * (1.0 - x);
        gauss->x[n - 1 - i] = 0.5 * (1.0 + x);
        gauss->weight[i] = gauss->weight[n - 1 - i] = weight;
    }
}

static bool same_makeup(const ev_shadow_interval *a, int a_count, const ev_shadow_interval *b,
                        int b_count)
{
    if (a_count != b_count)
        return false;
    for (int i = 0; i < a_count; i++)
        if (a[i].fate != b[i].fate || a[i].from_id != b[i].from_id || a[i].to_id != b[i].to_id)
            return false;
    return true;
}

typedef struct slice_at {
    double phi;
    int count;
    ev_shadow_interval intervals[EV_SLICE_CAPACITY];
} slice_at;

static void cut(const ev_region *region, double phi, slice_at *slice)
{
    slice->phi = phi;
    slice->count = region->slice(region->context, phi, slice->intervals);
}

static void add_node(ev_region_nodes *nodes, ev_region_node node)
{
    if (nodes->count == nodes->capacity) {
        nodes->capacity = nodes->capacity ? 2 * nodes->capacity : 1024;
        nodes->items = realloc(nodes->items, (size_t)nodes->capacity * sizeof *nodes->items);
        if (!nodes->items)
            abort();
    }
    nodes->items[nodes->count++] = node;
}

static void integrate_piece(const ev_region *region, const ev_gauss *radial, const ev_gauss *around,
                            double from, double to, slice_at *slice, ev_region_nodes *nodes)
{
    for (int j = 0; j < around->count; j++) {
        /* phi = from + span (3 u^2 - 2 u^3): slow at both ends */
        double u = around->x[j], span = to - from;
        double turn = around->weight[j] * span * 6.0 * u * (1.0 - u);
        cut(region, from + span * u * u * (3.0 - 2.0 * u), slice);
        for (int i = 0; i < slice->count; i++) {
            ev_shadow_interval interval = slice->intervals[i];
            double length = interval.to - interval.from;
            for (int k = 0; k < radial->count; k++) {
                double r = interval.from + length * radial->x[k];
                add_node(nodes,
                         (ev_region_node){r, slice->phi, turn * radial->weight[k] * length * r,
                                          interval.fate});
            }
        }
    }
}

enum { SAMPLES_PER_SEED = 3, BREAK_CAPACITY = 4096 };

/* Angle at which the make-up changes between two that differ. */
static double find_break(const ev_region *region, const slice_at *low, double high,
                         slice_at *middle)
{
    double a = low->phi, b = high;
    while (b - a > 4e-15 * (1.0 + b)) {
        cut(region, 0.5 * (a + b), middle);
        if (middle->phi <= a || middle->phi >= b)
            break;
        if (same_makeup(low->intervals, low->count, middle->intervals, middle->count))
            a = middle->phi;
        else
            b = middle->phi;
    }
    return 0.5 * (a + b);
}

static int find_breaks(const ev_region *region, double *breaks)
{
    slice_at *work = malloc(3 * sizeof *work), *low = work, *high = work + 1;
    int count = 0;
    if (!work)
        abort();
    for (int i = 0; i + 1 < region->seed_count; i++) {
        double from = region->seeds[i], span = region->seeds[i + 1] - from;
        if (count < BREAK_CAPACITY)
            breaks[count++] = from;
        if (span < 1e-12)
            continue;
        cut(region, from + 1e-9 * span, low);
        for (int k = 1; k <= SAMPLES_PER_SEED && count < BREAK_CAPACITY; k++) {
            double part = k == SAMPLES_PER_SEED ? 1.0 - 1e-9 : (double)k / SAMPLES_PER_SEED;
            cut(region, from + part * span, high);
            if (!same_makeup(low->intervals, low->count, high->intervals, high->count))
                breaks[count++] = find_break(region, low, high->phi, work + 2);
            slice_at *swap = low;
            low = high;
            high = swap;
        }
    }
    breaks[count++] = 2.0 * EV_PI;
    free(work);
    return count;
}

void ev_region_integrate(const ev_region *region, int radial, int around, ev_region_nodes *nodes)
{
    double *breaks = malloc((BREAK_CAPACITY + 1) * sizeof *breaks);
    slice_at *slice = malloc(sizeof *slice);
    ev_gauss *rules = malloc(2 * sizeof *rules);
    if (!breaks || !slice || !rules)
        abort();
    ev_gauss_make(radial, &rules[0]);
    ev_gauss_make(around, &rules[1]);
    *nodes = (ev_region_nodes){0};
    int count = find_breaks(region, breaks);
    for (int i = 0; i + 1 < count; i++)
        if (breaks[i + 1] - breaks[i] > 1e-13)
            integrate_piece(region, &rules[0], &rules[1], breaks[i], breaks[i + 1], slice, nodes);
    free(breaks);
    free(slice);
    free(rules);
}

enum { ID_FROM = 1, ID_TO = 2, ID_EDGE = 3 };

static double find_edge(const ev_margin_slice *slice, double phi, double low, double high,
                        bool inside_low)
{
    for (int i = 0; i < 50 && high - low > 1e-15 * high; i++) {
        double middle = 0.5 * (low + high);
        bool inside = slice->margin(slice->context, middle, phi) > 0.0;
        *(inside == inside_low ? &low : &high) = middle;
    }
    return 0.5 * (low + high);
}

int ev_slice_by_margin(const void *context, double phi, ev_shadow_interval *intervals)
{
    const ev_margin_slice *slice = context;
    double span = slice->to - slice->from, last_r = slice->from;
    bool last = slice->margin(slice->context, slice->from + 1e-12 * span, phi) > 0.0;
    int count = 0;
    ev_shadow_interval open = {slice->from, 0.0, EV_FATE_APERTURE, ID_FROM, ID_TO};
    for (int i = 1; i < EV_MARGIN_SAMPLES; i++) {
        double r = slice->from + span * i / (EV_MARGIN_SAMPLES - 1);
        bool now = slice->margin(slice->context, r, phi) > 0.0;
        if (now != last) {
            double edge = find_edge(slice, phi, last_r, r, last);
            if (last) {
                open.to = edge;
                open.to_id = ID_EDGE;
                intervals[count++] = open;
            }
            open = (ev_shadow_interval){edge, 0.0, EV_FATE_APERTURE, ID_EDGE, ID_TO};
        }
        last_r = r;
        last = now;
    }
    if (last) {
        open.to = slice->to;
        intervals[count++] = open;
    }
    return count;
}
