/* Random antennas for property tests: all six layouts, log-uniform sizes, parts misplaced by up to
 * some wavelengths, holes, bodies, struts, sites. */
#pragma once

#include "random.h"

#include "optics/antenna.h"

/* A resolved design that ev_design_check passes without errors. `layout` is honoured. Draws again
 * until one passes; `tries` (may be NULL) counts the draws. */
ev_design ev_random_design(ev_random *random, ev_layout_kind layout, int *tries);

/* The same with every part in its place and every feed on the focus. */
ev_design ev_design_in_place(const ev_design *design);
