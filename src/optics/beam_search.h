/* Extremes of a beam: along lines of direction cosine, and over the sky. Private to optics. */
#pragma once

#include "optics/beam.h"

/* What a walk from the peak along a line of constant y (or x) direction cosine meets. Offsets in
 * direction cosine, signed; powers relative to the peak's. NaN where there is none. */
typedef struct ev_beam_side {
    double half_power; /* first crossing of 1/2 */
    double null, null_power;
    double sidelobe, sidelobe_power; /* first maximum beyond the null */
} ev_beam_side;

/* along_y: vary y, not x. sign: -1 or +1. peak_power: |co|^2 there. */
ev_beam_side ev_beam_walk(ev_beam_source *source, ev_vec3 peak, double peak_power, bool along_y,
                          double sign);

/* Highest cross-polar power: the square of 12 lobe widths about the peak is sampled three times a
 * lobe width, doubled (to 48) while the highest lies in its outer fifth, and climbed from there. */
ev_vec3 ev_beam_cross_peak(ev_beam_source *source, ev_vec3 peak, double *power);
