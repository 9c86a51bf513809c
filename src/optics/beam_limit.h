/* Limits on side lobes, and a cut held against them. Pure functions of numbers: the cut is given as
 * angles and levels, from whichever feed, polarization or measurement.
 *
 * ITU-R S.465-6 (reference pattern of earth stations): 32 - 25 log10(phi) dBi from phi_min to 48
 * deg, then -10 dBi to 180 deg; phi_min = max(1 deg, 100 lambda/D), and below D/lambda = 50
 * max(2 deg, 114 (D/lambda)^-1.09).
 * ITU-R S.580-6 (design objective): 29 - 25 log10(phi) dBi from max(1 deg, 100 lambda/D) to 20 deg,
 * -3.5 dBi to 26.3 deg, 32 - 25 log10(phi) to 48 deg, then -10 dBi; for D/lambda of 50 and more; 90
 * percent of the side-lobe PEAKS have to keep it. */
#pragma once

#include <stdbool.h>

typedef enum { EV_LIMIT_S465, EV_LIMIT_S580, EV_LIMIT_TABLE } ev_limit_kind;

enum { EV_LIMIT_CAPACITY = 256 };

/* A user's table: levels between entries are straight over log10(angle), or over the angle where
 * an entry is at 0; nothing is asked outside the first and last angle. Two equal angles make a
 * step: the later level holds at and beyond it. */
typedef struct ev_limit {
    ev_limit_kind kind;
    double wavelengths;                                            /* D / lambda */
    int count;                                                     /* EV_LIMIT_TABLE */
    double angle[EV_LIMIT_CAPACITY], level_dbi[EV_LIMIT_CAPACITY]; /* rad, not falling; dBi */
    /* Share of side-lobe peaks that must keep the limit. 1: every sample must, peak or not. */
    double share;
} ev_limit;

ev_limit ev_limit_s465(double wavelengths);
ev_limit ev_limit_s580(double wavelengths);
/* Fails (false) without at least two entries, finite, of angles in [0, pi] that do not fall. */
bool ev_limit_table(const double *angle, const double *level_dbi, int count, ev_limit *limit);

/* S.580 asks for D/lambda >= 50; tables and S.465 always apply. */
bool ev_limit_applies(const ev_limit *limit);

/* First angle (rad) from which the limit asks anything. */
double ev_limit_start(const ev_limit *limit);

/* Limit (dBi) at an angle (rad) off the beam, either sign. NaN where nothing is asked. */
double ev_limit_at(const ev_limit *limit, double angle);

typedef struct ev_limit_result {
    bool applies, met;
    int sample_count, peak_count; /* where the limit asks */
    int peaks_over;
    double share_within; /* of the peaks; 1 without any */
    /* Largest level minus limit among what is judged, dB (< 0: that margin is in hand), and where
     * (rad). NaN when nothing was judged. */
    double worst_db, worst_angle;
    double worst_peak_db, worst_peak_angle; /* the same among the peaks only */
} ev_limit_result;

/* `angle` (rad, rising, 0 = the beam) and levels (dBi; NaN is passed over). A peak is a sample
 * above both its neighbours, its height that of the parabola through the three. */
ev_limit_result ev_limit_check(const ev_limit *limit, const double *angle, const double *level_dbi,
                               int count);
