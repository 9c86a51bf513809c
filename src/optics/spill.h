/* Power that misses a mirror, found on the feed's side: over the sphere and over the subreflector.
 * Private to optics. All shares are of the feed's power. */
#pragma once

#include "optics/nodes.h"

/* Share of the feed's power that it radiates below the horizon. */
double ev_spill_below_horizon(const ev_antenna *antenna, int feed);

/* Dual: what the subreflector catches within its rim, what of it then misses the main reflector or
 * falls through its hole, and the parts of both whose rays head below the horizon (0 without a
 * site): the first as they leave the feed, the second as they leave the subreflector. */
typedef struct ev_sub_shares {
    double caught, missed;
    double caught_ground, missed_ground;
} ev_sub_shares;

ev_sub_shares ev_spill_sub_shares(const ev_antenna *antenna, int feed);
