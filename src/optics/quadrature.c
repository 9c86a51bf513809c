/* Gauss-Legendre rules and plane regions with exact breaks. Called by the budget; knows nothing of
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

typedef struct slice_at {
    double phi;
    int count;
    ev_shadow_interval intervals[EV_SLICE_CAPACITY];
} slice_at;

static bool same_makeup(const slice_at *a, const slice_at *b)
{
    if (a->count != b->count)
        return false;
    for (int i = 0; i < a->count; i++) {
        const ev_shadow_interval *p = &a->intervals[i], *q = &b->intervals[i];
        if (p->fate != q->fate || p->from_id != q->from_id || p->to_id != q->to_id)
            return false;
    }
    return true;
}

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

/* An integral being made: rules, slices to compare, and the nodes written so far. */
typedef struct work {
    const ev_region *region;
    ev_gauss radial, around;
    slice_at slices[3];
    ev_region_nodes *nodes;
} work;

static void add_radius(work *to, double phi, double turn)
{
    slice_at *slice = &to->slices[0];
    cut(to->region, phi, slice);
    for (int i = 0; i < slice->count; i++) {
        ev_shadow_interval interval = slice->intervals[i];
        double length = interval.to - interval.from;
        for (int k = 0; k < to->radial.count; k++) {
            double r = interval.from + length * to->radial.x[k];
            double weight = turn * to->radial.weight[k] * length * (to->region->rows ? 1.0 : r);
            add_node(to->nodes, (ev_region_node){r, phi, weight, interval.fate});
        }
    }
}

/* Bunched: phi = from + span (3 x^2 - 2 x^3), slow at both ends. */
static void add_piece(work *to, double from, double span, int count, bool bunched)
{
    if (to->around.count != count)
        ev_gauss_make(count, &to->around);
    for (int j = 0; j < to->around.count; j++) {
        double x = to->around.x[j], turn = to->around.weight[j] * span;
        if (bunched) {
            turn *= 6.0 * x * (1.0 - x);
            x *= x * (3.0 - 2.0 * x);
        }
        add_radius(to, from + span * x, turn);
    }
}

enum { SAMPLES_PER_SEED = 3, BREAK_CAPACITY = 4096, PIECE_SPARE = 8 };

/* Angle at which the make-up changes between two that differ. An error d of it costs the integral
 * d^1.5. */
static double find_break(const ev_region *region, const slice_at *low, double high,
                         slice_at *middle)
{
    double a = low->phi, b = high, width = 1e-11 * (b - a + 1e-3 * fabs(b));
    while (b - a > width) {
        cut(region, 0.5 * (a + b), middle);
        if (middle->phi <= a || middle->phi >= b)
            break;
        *(same_makeup(low, middle) ? &a : &b) = middle->phi;
    }
    return 0.5 * (a + b);
}

static int find_breaks(work *at, double *breaks)
{
    const ev_region *region = at->region;
    slice_at *low = &at->slices[0], *high = &at->slices[1], *swap;
    int count = 0;
    bool any = false;
    breaks[count++] = region->seeds[0];
    for (int i = 0; i + 1 < region->seed_count; i++) {
        double from = region->seeds[i], span = region->seeds[i + 1] - from;
        if (!(span > 1e-12 * (fabs(from) + span)))
            continue;
        cut(region, from + 1e-9 * span, high);
        if (any && (!region->shared || !same_makeup(low, high)) && count < BREAK_CAPACITY)
            breaks[count++] = from;
        any = true;
        for (int k = 1; k <= SAMPLES_PER_SEED; k++) {
            swap = low, low = high, high = swap;
            double part = k == SAMPLES_PER_SEED ? 1.0 - 1e-9 : (double)k / SAMPLES_PER_SEED;
            cut(region, from + part * span, high);
            if (!same_makeup(low, high) && count < BREAK_CAPACITY)
                breaks[count++] = find_break(region, low, high->phi, &at->slices[2]);
        }
        swap = low, low = high, high = swap;
    }
    breaks[count++] = region->seeds[region->seed_count - 1];
    return count;
}

static void add_pieces(work *at, const double *breaks, int count, int around)
{
    const ev_region *region = at->region;
    double whole = breaks[count - 1] - breaks[0];
    bool unbroken = region->shared && count == 2;
    if (unbroken && region->rows)
        add_piece(at, breaks[0], whole, around, false);
    for (int j = 0; unbroken && !region->rows && j < around; j++)
        add_radius(at, breaks[0] + whole * j / around, whole / around);
    for (int i = 0; !unbroken && i + 1 < count; i++) {
        double span = breaks[i + 1] - breaks[i];
        int share = PIECE_SPARE + (int)(1.5 * around * span / whole);
        if (span > 1e-12 * whole)
            add_piece(at, breaks[i], span, region->shared ? share : around, true);
    }
}

void ev_region_integrate(const ev_region *region, int radial, int around, ev_region_nodes *nodes)
{
    double *breaks = malloc((BREAK_CAPACITY + 1) * sizeof *breaks);
    work *at = malloc(sizeof *at);
    if (!breaks || !at)
        abort();
    *nodes = (ev_region_nodes){0};
    at->region = region;
    at->nodes = nodes;
    at->around.count = 0;
    ev_gauss_make(radial, &at->radial);
    int count = find_breaks(at, breaks);
    add_pieces(at, breaks, count, around);
    free(breaks);
    free(at);
}

/* A line along which a margin's zero is sought: a radius (phi fixed) or a circle (r fixed). */
typedef struct bracket {
    const ev_margin *margin;
    bool circle;
    double fixed; /* the coordinate that stays */
} bracket;

static double margin_at(const bracket *line, double at, int *which)
{
    const ev_margin *margin = line->margin;
    return line->circle ? margin->value(margin->context, at, line->fixed, which)
                        : margin->value(margin->context, line->fixed, at, which);
}

/* False position with the retained end halved (the Illinois rule), bisection when it stalls. */
static double find_zero(const bracket *line, double a, double fa, double b, double fb, int *which)
{
    double width = 1e-13 * fmax(fabs(a), fabs(b)), last = NAN;
    for (int i = 0; i < 60 && fabs(b - a) > width; i++) {
        double x = i % 12 == 11 ? 0.5 * (a + b) : a + (b - a) * fa / (fa - fb);
        if (!(x > fmin(a, b) && x < fmax(a, b)))
            x = 0.5 * (a + b);
        double fx = margin_at(line, x, which);
        if (fx == 0.0 || fabs(x - last) < width)
            return x;
        last = x;
        if ((fx > 0.0) == (fb > 0.0)) {
            fa *= 0.5;
        } else {
            a = b;
            fa = fb;
        }
        b = x;
        fb = fx;
    }
    return b;
}

enum { ID_EDGE = 1 << 20, LOOK_CAPACITY = 64 };

/* The margin at some places of a line, rising. */
typedef struct looks {
    int count;
    double at[LOOK_CAPACITY], value[LOOK_CAPACITY];
} looks;

/* Between three looks of one sign the margin may reach over zero and back: where the parabola
 * through them comes near zero, looks there too. */
static void look_between(const bracket *line, looks *seen)
{
    for (int i = 1; i + 1 < seen->count && seen->count < LOOK_CAPACITY; i++) {
        double *x = &seen->at[i - 1], *f = &seen->value[i - 1];
        double h0 = x[1] - x[0], h1 = x[2] - x[1], d0 = (f[1] - f[0]) / h0, d1 = (f[2] - f[1]) / h1;
        double bend = (d1 - d0) / (h0 + h1), slope = (h1 * d0 + h0 * d1) / (h0 + h1);
        double top = x[1] - 0.5 * slope / bend, height = f[1] - 0.25 * slope * slope / bend;
        bool one_sign = (f[0] > 0.0) == (f[1] > 0.0) && (f[1] > 0.0) == (f[2] > 0.0);
        double sign = f[1] > 0.0 ? 1.0 : -1.0, size = fmax(fabs(f[0]), fabs(f[2]));
        if (!one_sign || !(top > x[0] && top < x[2]) || sign * height > 0.3 * size || top == x[1])
            continue;
        int which, to = top < x[1] ? i : i + 1;
        double value = margin_at(line, top, &which);
        if ((value > 0.0) == (f[1] > 0.0))
            continue;
        for (int k = seen->count++; k > to; k--) {
            seen->at[k] = seen->at[k - 1];
            seen->value[k] = seen->value[k - 1];
        }
        seen->at[to] = top;
        seen->value[to] = value;
        i++;
    }
}

int ev_clip_by_margin(const ev_margin *margin, double phi, ev_shadow_interval interval,
                      ev_shadow_interval *out)
{
    bracket line = {margin, false, phi};
    looks seen = {.count = margin->samples};
    double span = interval.to - interval.from;
    int which, count = 0;
    for (int i = 0; i < seen.count; i++) {
        seen.at[i] = interval.from + span * (i ? (double)i / (seen.count - 1) : 1e-12);
        seen.value[i] = margin_at(&line, seen.at[i], &which);
    }
    look_between(&line, &seen);
    ev_shadow_interval open = interval;
    for (int i = 1; i < seen.count; i++) {
        double last = seen.value[i - 1], now = seen.value[i];
        if ((now > 0.0) == (last > 0.0))
            continue;
        double edge = find_zero(&line, seen.at[i - 1], last, seen.at[i], now, &which);
        if (last > 0.0) {
            open.to = edge;
            open.to_id = ID_EDGE + which;
            out[count++] = open;
        }
        open = interval;
        open.from = edge;
        open.from_id = ID_EDGE + which;
    }
    if (seen.value[seen.count - 1] > 0.0)
        out[count++] = open;
    return count;
}

int ev_margin_changes(const ev_margin *margin, double r, double from, double to, int samples,
                      double *changes, int capacity)
{
    bracket line = {margin, true, r};
    int which, count = 0;
    double last_phi = from, last = margin_at(&line, from, &which);
    for (int i = 1; i <= samples && count < capacity; i++) {
        double phi = from + (to - from) * i / samples, now = margin_at(&line, phi, &which);
        if ((now > 0.0) != (last > 0.0))
            changes[count++] = find_zero(&line, last_phi, last, phi, now, &which);
        last_phi = phi;
        last = now;
    }
    return count;
}
