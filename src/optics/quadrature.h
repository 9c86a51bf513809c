/* Gauss-Legendre nodes, and integrals over plane regions cut by exact outlines. */
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
    const double *seeds; /* rising; the first and the last bound phi, between them breaks may be */
    int seed_count;
    bool rows;   /* phi and r are straight coordinates: areas are dr dphi, not r dr dphi */
    bool shared; /* see ev_region_integrate */
} ev_region;

/* Nodes of an integral over the region: coordinates, weight (r dr dphi, or dr dphi) and tag. */
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
 * tangents out of the integrand.
 *
 * Every seed ends a piece, unless the region is `shared`: then seeds only hint where breaks may be,
 * `around` is for the whole of phi, of which a piece gets its share and some to spare, and without
 * any break a full circle has `around` equal angles and rows have that many plain Gauss nodes. */
void ev_region_integrate(const ev_region *region, int radial, int around, ev_region_nodes *nodes);

/* A region's further condition: positive inside, continuous; `which` names the condition that is
 * nearest to failing, 0 .. 7. */
typedef struct ev_margin {
    double (*value)(const void *context, double phi, double r, int *which);
    const void *context;
    int samples; /* looks along an interval, ends included; 3 to 32 */
} ev_margin;

/* The parts of an interval at phi where the margin is positive. Writes at most
 * 2 margin->samples of them and returns their number. */
int ev_clip_by_margin(const ev_margin *margin, double phi, ev_shadow_interval interval,
                      ev_shadow_interval *out);

/* Angles between from and to where the margin changes sign at the radius r: at most `capacity`,
 * rising. Looks `samples` times. */
int ev_margin_changes(const ev_margin *margin, double r, double from, double to, int samples,
                      double *changes, int capacity);
