/* The far field of a sheet's modes: one Bessel function a ring and an order. Private to optics.
 *
 * On the ring of radius r about (offset, 0) the phase toward s is, with d = s - reference and
 * c = offset,
 *
 *     k d.P = k [d_x c + b d_z (c^2 + r^2)] + k r q cos(phi - psi),   q (cos, sin)(psi) =
 *             (d_x + 2 b c d_z, d_y),  b = bend,
 *
 * so the integral over phi of exp(jm phi) is 2 pi j^m J_m(k r q) exp(jm psi) (the Jacobi-Bessel
 * idea of V. Galindo-Israel and R. Mittra, IEEE Trans. AP-25, 1977, without its expansion about a
 * direction: exact for every s). The radial integral is Gauss's, on as many rings as that direction
 * asks for. */
#pragma once

#include "optics/beam_sheet.h"

/* Modes evaluated on one number of rings, weights included. */
typedef struct ev_rings ev_rings;

/* How many radians the phase of the sheet turns from its centre to its rim, toward s at most. */
double ev_rings_phase(const ev_sheet *sheet, ev_vec3 s);

enum { EV_RINGS_STEPS = 24 };

/* Step of the ladder of ring counts that holds a phase and these modes, in [0, EV_RINGS_STEPS). */
int ev_rings_step(const ev_modes *modes, double phase);
int ev_rings_count(int step);

ev_rings *ev_rings_create(const ev_sheet *sheet, const ev_modes *modes, int step);
void ev_rings_destroy(ev_rings *rings);

/* I(s), three components. `scratch` holds ev_rings_scratch(modes) doubles, one per thread. */
int ev_rings_scratch(const ev_modes *modes);
void ev_rings_sum(const ev_rings *rings, const ev_sheet *sheet, ev_vec3 s, double *scratch,
                  double _Complex sum[3]);
