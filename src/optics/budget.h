/* The budget: where every watt goes and what becomes of the gain. One call, all feeds.
 *
 * Definitions are those of the project's conventions (DEVELOPERS.md, "What the numbers mean"):
 *   spillover = 1 - past_sub - past_main
 *   taper     = |int |E||^2 / (A int |E|^2), A = pi D^2 / 4
 *   phase     = max over s of |int |E| exp(-jk(path - s.P))|^2 / (int |E|)^2
 *   pointing  = the same integral on the wanted axis over that maximum
 *   polarization, blockage (null field), surface (J. Ruze, Proc. IEEE 54, 1966), ohmic, mismatch
 *   total     = product of all but pointing; gain = (pi D / lambda)^2 total. */
#pragma once

#include "optics/antenna.h"

typedef struct ev_path_stats {
    double rms_area, rms_power, rms_amplitude, peak_to_valley; /* m, full path */
} ev_path_stats;

typedef struct ev_efficiency {
    double spillover, taper, phase, pointing, polarization, blockage, surface, ohmic, mismatch,
        total;
    double spillover_sub, spillover_main; /* 1 - past_sub; spillover / spillover_sub */
} ev_efficiency;

typedef struct ev_noise {
    double spill_ground, spill_sky; /* shares of the feed's power */
    double spill_k, antenna_k;      /* K */
} ev_noise;

typedef struct ev_feed_budget {
    double power[EV_FATE_COUNT]; /* shares, sum 1 */
    ev_path_stats path_error, untilted;
    double mean_path_error; /* m, area-weighted, of path - s.P; what the Front is drawn about */
    double tilt_x, tilt_y;  /* slope of the removed area-weighted plane, m/m */
    ev_efficiency efficiency;
    double full_aperture_gain_dbi, gain_dbi, gain_on_axis_dbi;
    ev_noise noise; /* NaN without a site */
    ev_vec3 peak;   /* unit, direction of the aperture integral's maximum */
    ev_vec3 wanted; /* unit, what path error and pointing refer to (the peak for toward: peak) */
    double rim_top_db, rim_bottom_db; /* lighting at the rim relative to its highest */
    double shadow_share;              /* of captured power */
} ev_feed_budget;

typedef struct ev_budget {
    ev_feed_budget feeds[EV_FEED_CAPACITY];
    int feed_count;
} ev_budget;

void ev_budget_compute(const ev_antenna *antenna, ev_budget *budget);

/* One feed only. */
void ev_budget_compute_feed(const ev_antenna *antenna, int feed, ev_feed_budget *budget);

/* Gain on the wanted axis (dBi) without shadows, surface, ohmic and mismatch: the smooth part of
 * the budget, 20 to 50 times cheaper. For loss maps and for finding the best place. */
double ev_axis_gain_dbi(const ev_antenna *antenna, int feed);
