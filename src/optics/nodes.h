/* Evaluated quadrature nodes over the main aperture; private to optics.
 *
 * Smooth lighting: Gauss in radius, uniform in angle. Where a pattern ends inside the aperture the
 * exact outline cuts the radii; every shadow is swept by lines of its own (shadow.h). */
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
    int obstacle;      /* shadows: whose (shadow.h) */
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

/* `count` nodes of no weight around the circle of `radius` about the aperture centre. */
void ev_nodes_circle(const ev_antenna *antenna, int feed, double radius, int count,
                     ev_nodes *nodes);

/* Conditions that cut a region; every condition that is asked for must hold. */
typedef struct ev_cut {
    const ev_antenna *antenna;
    int feed;
    bool lit;     /* the pattern has not ended */
    bool inside;  /* dual: the ray meets the sub within its rim */
    bool ground;  /* the ray leaves the feed below the horizon */
    bool landing; /* the ray comes down on the main reflector heading below the horizon */
} ev_cut;

/* The part of the ring between two radii about the aperture centre where the conditions hold. */
void ev_nodes_ring(const ev_cut *cut, double inner, double outer, ev_order order, ev_nodes *nodes);

/* All shadows, or those of the obstacles with a flag, where the conditions hold. */
void ev_nodes_shadow(const ev_cut *cut, const bool *flags, ev_order order, ev_nodes *nodes);

void ev_nodes_free(ev_nodes *nodes);

/* Sum of weight x density: a share of the feed's power. */
double ev_nodes_power(const ev_nodes *nodes);
