/* The pedestal that a rough surface scatters under the beam (J. Ruze, "Antenna tolerance theory, a
 * review", Proc. IEEE 54, 1966, eq. 8):
 *
 *   G(theta) = G0(theta) exp(-d^2) + (2 pi c / lambda)^2 exp(-d^2)
 *              sum over n >= 1 of d^2n / (n n!) exp(-(pi c sin(theta) / lambda)^2 / n),
 *
 * d = 4 pi e / lambda the phase rms, e the half-path rms, c the correlation length (the error's
 * correlation is exp(-(distance / c)^2)). It adds in power. The mean pattern of beam.h holds the
 * first term already. For c much below the diameter and theta small enough for sin. */
#pragma once

typedef struct ev_pedestal {
    double wavelength, rms, correlation; /* m */
    double power;                        /* share of the feed's power that the aperture radiates */
} ev_pedestal;

/* Gain (a power ratio) of the pedestal at theta (rad) from the peak. */
double ev_pedestal_gain(const ev_pedestal *pedestal, double theta);

/* A level (dBi) with the pedestal added; NaN stays NaN. */
double ev_pedestal_add_dbi(const ev_pedestal *pedestal, double theta, double level_dbi);
