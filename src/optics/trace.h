/* Rays from a feed over the mirrors, each with one fate. For pictures and listings; the numbers of
 * the budget come from aimed rays (aperture.h). */
#pragma once

#include "optics/antenna.h"

enum { EV_RAY_POINT_CAPACITY = 4 };

typedef struct ev_ray {
    int feed;
    ev_fate fate;
    double power; /* share of the feed's power that the ray stands for; 0 when none was asked */
    ev_vec3 direction; /* unit, as it leaves the feed */
    ev_vec3 leaving;   /* unit, after the last mirror it met */
    /* Phase centre, hits in order, and for rays that met the main reflector the crossing of the
     * plane z = F (aperture) or the start of the shadow. A ray that misses ends at its last point
     * and goes on along `leaving`. */
    ev_vec3 points[EV_RAY_POINT_CAPACITY];
    int point_count;
    double
        path; /* m, from the phase centre over the mirrors to the main reflector; NaN if missed */
    double path_error; /* m, path - s.P (mean not removed); NaN if it missed the main reflector */
} ev_ray;

/* One ray in a given direction (unit, antenna frame). */
ev_ray ev_trace(const ev_antenna *antenna, int feed, ev_vec3 direction);

/* `count` rays through the sphere, each standing for 1/count of the power (stratified in the
 * pattern's own power, turned by the golden angle). `rays` holds `count`. Any thread count gives
 * the same rays. Returns count. */
int ev_trace_fan(const ev_antenna *antenna, int feed, int count, ev_ray *rays);

/* At most `count` rays in the plane through the feed and the antenna's symmetry plane, chosen so
 * that each fate has its share of `count` by `shares` (EV_FATE_COUNT values of the whole sphere),
 * each standing for 1/count. Fates that do not occur in the plane are left out. Returns the
 * number written. */
int ev_trace_section(const ev_antenna *antenna, int feed, int count,
                     const double shares[EV_FATE_COUNT], ev_ray *rays);
