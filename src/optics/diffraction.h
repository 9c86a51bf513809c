/* Second opinion on a dual reflector: currents on the subreflector, their exact near field on the
 * main reflector, and the far field of what that induces. It holds what the ray field leaves out:
 * diffraction at the subreflector's edge, its true near field and its finite rim. Slow by design:
 * pairs of points, one by one. Everything else (shadows, losses, polarization, facts) is as in
 * beam.h, with which the resulting source works. The shadowed currents that are taken out are the
 * ray field's. */
#pragma once

#include "optics/beam.h"

/* What it will take: `pairs` of points on the two mirrors. The time is that over what the machine
 * does a second, which ev_diffraction_probe lets the caller measure. */
typedef struct ev_diffraction_plan {
    int sub_radial, sub_around;   /* nodes on the subreflector */
    int main_radial, main_around; /* to begin with, on the main reflector */
    double pairs;                 /* without refinement beyond that, which is rarely needed */
} ev_diffraction_plan;

/* Zero for a single mirror. */
ev_diffraction_plan ev_diffraction_plan_for(const ev_antenna *antenna, int feed);

/* Does the work of about `pairs` pairs, on all threads, and returns how many they were; a caller
 * times it (1e7 pairs take a fraction of a second). */
double ev_diffraction_probe(const ev_antenna *antenna, int feed, double pairs);

/* Called between pieces of work, from the calling thread, with the share done, [0, 1], rising.
 * Returns false to stop. */
typedef bool ev_diffraction_progress(void *context, double share);

typedef struct ev_diffraction {
    double caught_by_main; /* share of the feed's power that arrives on the main reflector */
    double pairs;          /* as they came out */
    int main_radial, main_around;
    double residual; /* of the expansion on the main reflector (ev_beam_nodes) */
} ev_diffraction;

/* NULL when stopped, or for a single mirror. progress may be NULL. Destroy with
 * ev_beam_source_destroy. */
ev_beam_source *ev_diffraction_source(const ev_antenna *antenna, int feed,
                                      ev_diffraction_progress *progress, void *context,
                                      ev_diffraction *result);
