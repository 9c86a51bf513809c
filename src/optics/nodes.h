/* Evaluated quadrature nodes over the main aperture; private to optics.
 *
 * Smooth lighting: Gauss in radius, uniform in angle. Where a pattern ends inside the aperture, or
 * over shadows, the exact outlines cut the radii (quadrature.h). */
#pragma once

#include "optics/aperture.h"
#include "optics/quadrature.h"

typedef struct ev_node {
    double weight;     /* m^2 of projected aperture */
    ev_vec3 point;     /* on the main reflector */
    double path;       /* m; NaN where no ray comes */
    double density;    /* 1/m^2, dP/dA */
    double phase;      /* rad, the feed's own, + is late */
    ev_cvec3 field;    /* unit, after the last reflection */
    double sub_inside; /* >= 0 within the sub's rim */
    ev_vec3 direction; /* unit, leaving the feed */
    ev_fate tag;
} ev_node;

typedef struct ev_nodes {
    ev_node *items; /* malloc'd; ev_nodes_free */
    int count;
} ev_nodes;

/* Number of nodes: radial, and around the full circle. */
typedef struct ev_order {
    int radial, around;
} ev_order;

/* Enough for the lighting and for `path_span` (m) of path difference over the aperture. */
ev_order ev_order_for(const ev_antenna *antenna, int feed, double path_span);

/* The aperture outside the hole, ignoring where the pattern ends. */
void ev_nodes_whole(const ev_antenna *antenna, int feed, ev_order order, ev_nodes *nodes);

/* Conditions that cut radii; every condition that is asked for must hold. */
typedef struct ev_cut {
    const ev_antenna *antenna;
    int feed;
    bool lit;     /* the pattern has not ended */
    bool inside;  /* dual: the ray meets the sub within its rim */
    bool ground;  /* the ray leaves the feed below the horizon */
    bool shadows; /* only what is shadowed, tagged with whose shadow */
} ev_cut;

void ev_nodes_cut(const ev_cut *cut, ev_order order, ev_nodes *nodes);

void ev_nodes_free(ev_nodes *nodes);

/* Sum of weight x density: a share of the feed's power. */
double ev_nodes_power(const ev_nodes *nodes);
