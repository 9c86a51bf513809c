/* From a design to all numbers that a page shows. Called once a frame by the window and once by
 * `picture`, so that both show the same. */
#include "study/study.h"

#include "optics/aperture.h"

static void fill_front(ev_study *study)
{
    const ev_antenna *antenna = &study->antenna;
    const ev_feed_budget *budget = &study->budget.feeds[study->feed];
    for (int i = 0; i < EV_STUDY_FRONT_COUNT; i++) {
        double part = 2.0 * i / (EV_STUDY_FRONT_COUNT - 1.0) - 1.0;
        double x = antenna->offset + part * antenna->radius;
        ev_vec3 direction, sub_point, point = ev_main_point(antenna, x, 0.0);
        double path = ev_aperture_path(antenna, study->feed, x, 0.0, &direction, &sub_point);
        bool hole = fabs(part) * antenna->radius < antenna->hole_radius;
        study->front_x[i] = x;
        study->front[i] =
            hole ? NAN : path - ev_vec3_dot(budget->wanted, point) - budget->mean_path_error;
    }
}

static void fill_aperture(ev_study *study)
{
    const ev_antenna *antenna = &study->antenna;
    const ev_feed_budget *budget = &study->budget.feeds[study->feed];
    double step = 2.0 / (EV_STUDY_APERTURE_SIDE - 1.0);
#pragma omp parallel for schedule(static)
    for (int row = 0; row < EV_STUDY_APERTURE_SIDE; row++)
        for (int column = 0; column < EV_STUDY_APERTURE_SIDE; column++) {
            double up = (1.0 - step * row) * antenna->radius;
            double y = (step * column - 1.0) * antenna->radius, r = hypot(up, y);
            float *value = &study->aperture[row * EV_STUDY_APERTURE_SIDE + column];
            *value = NAN;
            /* one cell beyond the rim, so that what is drawn can be clipped to the exact circle */
            if (r > antenna->radius * (1.0 + 1.5 * step) || r < antenna->hole_radius)
                continue;
            ev_vec3 direction, sub_point, point = ev_main_point(antenna, antenna->offset + up, y);
            double path = ev_aperture_path(antenna, study->feed, antenna->offset + up, y,
                                           &direction, &sub_point);
            *value = (float)(path - ev_vec3_dot(budget->wanted, point) - budget->mean_path_error);
        }
}

void ev_study_compute(const ev_design *design, double frequency, ev_study_want want,
                      ev_study *study)
{
    study->design = *design;
    study->feed = want.feed < design->feed_count ? want.feed : 0;
    ev_antenna_build(design, frequency, &study->antenna);
    ev_budget_compute(&study->antenna, &study->budget);
    if (want.verdict)
        ev_verdict_find(design, frequency, study->feed, &study->verdict);
    int count = want.ray_count < EV_STUDY_RAY_CAPACITY ? want.ray_count : EV_STUDY_RAY_CAPACITY;
    study->ray_count = want.rays == EV_STUDY_RAYS_SECTION
                           ? ev_trace_section(&study->antenna, study->feed, count,
                                              study->budget.feeds[study->feed].power, study->rays)
                           : ev_trace_fan(&study->antenna, study->feed, count, study->rays);
    fill_front(study);
    if (want.aperture)
        fill_aperture(study);
}
