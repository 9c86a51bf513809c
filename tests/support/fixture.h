/* Example antennas shared by tests and benchmarks. Each is a resolved design. */
#pragma once

#include "optics/antenna.h"
#include "optics/budget.h"

typedef enum {
    EV_FIXTURE_PRIME,             /* 10 m, f/D 0.5, cos^2 feed, 3 GHz */
    EV_FIXTURE_OFFSET,            /* 1.2 m, F 0.72 m, centre 0.66 m up, 12 GHz */
    EV_FIXTURE_CASSEGRAIN,        /* 12 m, F 4.8 m, magnification 20, sub 0.75 m, 12 GHz */
    EV_FIXTURE_GREGORIAN,         /* 6 m, F 2.1 m, magnification 8, 8 GHz */
    EV_FIXTURE_OFFSET_CASSEGRAIN, /* 2.4 m, F 1.5 m, axis tilted, 20 GHz */
    EV_FIXTURE_OFFSET_GREGORIAN,  /* 100 m, F 60 m, 4 m to 104 m off axis, e 0.528, 1.4 GHz */
    EV_FIXTURE_COUNT,
} ev_fixture;

ev_design ev_fixture_design(ev_fixture fixture);

/* The same with everything that makes it harder: feed and subreflector out of place, a hole, an
 * oversize subreflector, a feed body, four struts, a site. */
ev_design ev_fixture_worn_design(ev_fixture fixture);

/* Resolves (in a copy) and builds at the working frequency. */
void ev_fixture_build(const ev_design *design, ev_antenna *antenna);

/* The budget of feed 0. */
ev_feed_budget ev_fixture_budget(const ev_design *design);
