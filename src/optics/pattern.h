/* Feed patterns: power over angle, normalised so that the average over the sphere is 1.
 *
 * cos^n:    G = 2 (n + 1) cos^n(theta), theta < 90 deg (S. Silver, Microwave Antenna Theory and
 *           Design, 1949; C. Balanis, Antenna Theory, ch. 15).
 * gaussian: 10^(-(T/10) (theta/theta_e)^2) over the whole sphere, normalised by quadrature.
 * table:    E- and H-plane levels in dB, smoothed between entries by a cubic that follows the
 *           data's rises and falls; no power beyond the last angle. Field of an x-polarized feed:
 *           E(theta) cos(phi) theta^ - H(theta) sin(phi) phi^. */
#pragma once

#include "optics/design.h"

#include <complex.h>

enum { EV_PATTERN_TABLE_CAPACITY = 2048 };

struct ev_pattern_table {
    char path[EV_PATH_CAPACITY];
    int count;
    bool has_phase;
    double theta[EV_PATTERN_TABLE_CAPACITY]; /* rad, rising, first may be > 0 */
    double e_db[EV_PATTERN_TABLE_CAPACITY];
    double h_db[EV_PATTERN_TABLE_CAPACITY];
    double phase[EV_PATTERN_TABLE_CAPACITY]; /* rad, unwrapped; + is late */
    double e_slope[EV_PATTERN_TABLE_CAPACITY], h_slope[EV_PATTERN_TABLE_CAPACITY],
        phase_slope[EV_PATTERN_TABLE_CAPACITY];
    double mean_power; /* over the sphere, before normalisation */
};

/* Fills slopes and mean_power from count, theta, e_db, h_db, phase. theta must rise strictly. */
void ev_pattern_table_prepare(ev_pattern_table *table);

typedef struct ev_pattern {
    ev_pattern_kind kind;
    double exponent; /* cos_power */
    double rate;     /* gaussian: nepers of power per rad^2 */
    double norm;     /* makes the mean over the sphere 1 */
    double end;      /* rad, no power beyond: pi/2, pi, or the last angle of a table */
    const ev_pattern_table *table;
} ev_pattern;

ev_pattern ev_pattern_make(const ev_feed_design *feed, double half_extent);

/* E- and H-plane power levels at theta (rad), mean over the sphere 1; for balanced patterns both
 * are the gain G(theta). */
typedef struct ev_pattern_level {
    double e, h;
    double phase; /* rad, + is late */
} ev_pattern_level;

ev_pattern_level ev_pattern_at(const ev_pattern *pattern, double theta);

/* The same by the components of a unit direction along the axis and across it: what rays have. */
ev_pattern_level ev_pattern_toward(const ev_pattern *pattern, double along, double across);

/* Power within theta of the axis as a share of the whole, [0, 1] (mean of E and H planes). */
double ev_pattern_share_within(const ev_pattern *pattern, double theta);

/* Inverse of ev_pattern_share_within. */
double ev_pattern_angle_of_share(const ev_pattern *pattern, double share);

/* Exponent of cos^n whose level at `angle` is `taper_db` below the axis, and back. */
double ev_pattern_exponent_from_taper(double taper_db, double angle);
double ev_pattern_taper_from_exponent(double exponent, double angle);
