/* Sums over aperture nodes: statistics of the path, the aperture integral and its peak. Private to
 * optics. */
#pragma once

#include "optics/budget.h"
#include "optics/nodes.h"

typedef enum { EV_WEIGHT_AREA, EV_WEIGHT_POWER, EV_WEIGHT_AMPLITUDE } ev_weighting;

/* Weighted least-squares plane a + b x' + c y' of path - s.P, x' from the aperture centre. */
typedef struct ev_plane {
    double mean, a, b, c;
    double rms, rms_untilted;
} ev_plane;

ev_plane ev_fit_plane(const ev_antenna *antenna, const ev_nodes *nodes, ev_vec3 wanted,
                      ev_weighting weighting);

/* Sum of weight sqrt(density) exp(-j(k(path - s.P) + phase)). */
double _Complex ev_aperture_integral(const ev_antenna *antenna, const ev_nodes *nodes, ev_vec3 s);

/* Direction that maximises its magnitude: Newton from the amplitude-weighted tilt of the path, and
 * where that leaves much to find, from where the zones of the aperture point. */
ev_vec3 ev_aperture_peak(const ev_antenna *antenna, int feed, const ev_nodes *nodes,
                         ev_vec3 wanted);

/* |int E_co|^2 / (int |E|)^2, without the phase of the path. */
double ev_polarization_efficiency(const ev_nodes *nodes, ev_polarization polarization, ev_vec3 s);

/* Largest minus smallest of path - s.P over the aperture to its rims, and the same with the plane's
 * tilt removed. */
void ev_peak_to_valley(const ev_antenna *antenna, int feed, const ev_nodes *nodes, ev_vec3 wanted,
                       const ev_plane *plane, double *raw, double *untilted);
