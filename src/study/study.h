/* From a design to the numbers a page shows: antenna, budget, verdict, rays, aperture picture,
 * Front. One owner of all of it; the window makes a new one a frame, `picture` makes one. */
#pragma once

#include "optics/antenna.h"
#include "optics/budget.h"
#include "optics/trace.h"
#include "study/verdict.h"

enum {
    EV_STUDY_RAY_CAPACITY = 20000,
    EV_STUDY_FRONT_COUNT = 161,
    EV_STUDY_APERTURE_SIDE = 97,
};

typedef enum { EV_STUDY_RAYS_SECTION, EV_STUDY_RAYS_SPACE } ev_study_rays;

typedef struct ev_study {
    ev_design design;
    ev_antenna antenna;
    ev_budget budget;
    ev_verdict verdict; /* of `feed`; kept from the last full run in a quick one */
    int feed;
    int ray_count;
    ev_ray rays[EV_STUDY_RAY_CAPACITY];
    double front_x[EV_STUDY_FRONT_COUNT],
        front[EV_STUDY_FRONT_COUNT]; /* path error minus mean, NaN in the hole */
    /* path error minus mean; row 0 at +x, column 0 at -y; NaN in the hole and well outside the rim
     */
    float aperture[EV_STUDY_APERTURE_SIDE * EV_STUDY_APERTURE_SIDE];
} ev_study;

/* What to compute. The budget always is. */
typedef struct ev_study_want {
    int feed;
    bool verdict;
    bool aperture;
    bool coarse; /* aperture: every other node, the rest half-way between; for frames of a drag */
    ev_study_rays rays;
    int ray_count;
} ev_study_want;

/* The design must be checked (no errors). `study` is large: allocate it. */
void ev_study_compute(const ev_design *design, double frequency, ev_study_want want,
                      ev_study *study);
