/* Gauss-Legendre nodes, and integrals over polar regions cut by exact outlines. */
#pragma once

#include "optics/shadow.h"

enum { EV_GAUSS_CAPACITY = 512 };

typedef struct ev_gauss {
    int count;
    double x[EV_GAUSS_CAPACITY], weight[EV_GAUSS_CAPACITY]; /* on [0, 1], weights sum to 1 */
} ev_gauss;

/* count is clamped to [1, EV_GAUSS_CAPACITY]. Newton on the Legendre recurrence, to rounding. */
void ev_gauss_make(int count, ev_gauss *gauss);

/* A region of the plane in polar form: for each angle the radial intervals that belong to it, with
 * a tag (a fate) each. `slice` writes at most EV_SLICE_CAPACITY rising intervals and returns their
 * number; a change of make-up (number, tags, ends) between neighbouring angles marks a break. */
typedef struct ev_region {
    int (*slice)(const void *context, double phi, ev_shadow_interval *intervals);
    const void *context;
    const double *seeds; /* angles in [0, 2 pi], rising, first 0, last 2 pi: where breaks may be */
    int seed_count;
} ev_region;

/* Nodes of an integral over the region: polar coordinates, weight (r dr dphi) and tag. */
typedef struct ev_region_node {
    double r, phi, weight;
    ev_fate tag;
} ev_region_node;

typedef struct ev_region_nodes {
    ev_region_node *items; /* malloc'd, free() it */
    int count, capacity;
} ev_region_nodes;

/* Gauss nodes on the pieces between breaks, `around` angles a piece and `radial` radii an
 * interval. Angles are bunched toward the ends of a piece, which takes the square-root endings of
 * tangents out of the integrand. */
void ev_region_integrate(const ev_region *region, int radial, int around, ev_region_nodes *nodes);

/* A slice function for regions given by a continuous margin: the part of [from, to] along each
 * angle where the margin is positive, its ends found by bisection. context: an ev_margin_slice. */
typedef struct ev_margin_slice {
    double (*margin)(const void *context, double r, double phi);
    const void *context;
    double from, to;
} ev_margin_slice;

enum { EV_MARGIN_SAMPLES = 17 };

int ev_slice_by_margin(const void *context, double phi, ev_shadow_interval *intervals);
