/* Curves of the Beam and Cut plates: the beam of a feed along a line, and the gain as a part is
 * moved along one of its axes. Computed on a worker. */
#pragma once

#include "optics/beam.h"
#include "study/part.h"

enum { EV_BEAM_CURVE_SAMPLES = 401, EV_GAIN_CURVE_SAMPLES = 81 };

/* Co- and cross-polar gain against the angle from +z, in the plane at phi from the symmetry plane:
 * 0 is up and down, 90 degrees across (positive left, facing the dish). */
typedef struct ev_beam_curve {
    int feed;
    double phi, span; /* rad; the angles run from -span to +span */
    ev_beam_quality quality;
    double angle[EV_BEAM_CURVE_SAMPLES];  /* rad */
    double co_dbi[EV_BEAM_CURVE_SAMPLES]; /* NaN beyond the horizon */
    double cross_dbi[EV_BEAM_CURVE_SAMPLES];
    double peak_angle, peak_dbi; /* of the beam itself, projected into the plane */
} ev_beam_curve;

/* Half width that shows the main beam, about six sidelobes each side and the wanted direction,
 * rounded up to a plain number of degrees (rad). */
double ev_beam_curve_span(const ev_antenna *antenna, int feed);

void ev_beam_curve_compute(const ev_antenna *antenna, int feed, double phi, double span,
                           ev_beam_quality quality, ev_beam_curve *curve);

/* ev_axis_gain_dbi as a part moves along one axis, all else as it stands; places are m from
 * nominal and cover `extent` on each side of the middle of nominal and where it is. */
typedef struct ev_gain_curve {
    ev_part part;
    ev_part_axis axis;
    double now;                            /* m, where the part is */
    double place[EV_GAIN_CURVE_SAMPLES];   /* m */
    double loss_db[EV_GAIN_CURVE_SAMPLES]; /* below the highest of the curve, >= 0 */
} ev_gain_curve;

void ev_gain_curve_compute(const ev_design *design, double frequency, ev_part part, int feed,
                           ev_part_axis axis, double extent, ev_gain_curve *curve);
