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

/* The node at (row, column) of the picture; NaN in the hole and further than `beyond` steps outside
 * the rim, where what is drawn is clipped to the exact circle. */
static float aperture_node(const ev_study *study, int row, int column, double beyond)
{
    const ev_antenna *antenna = &study->antenna;
    const ev_feed_budget *budget = &study->budget.feeds[study->feed];
    double step = 2.0 / (EV_STUDY_APERTURE_SIDE - 1.0);
    double up = (1.0 - step * row) * antenna->radius;
    double y = (step * column - 1.0) * antenna->radius, r = hypot(up, y);
    if (r > antenna->radius * (1.0 + beyond * step) || r < antenna->hole_radius)
        return NAN;
    ev_vec3 direction, sub_point, point = ev_main_point(antenna, antenna->offset + up, y);
    double path =
        ev_aperture_path(antenna, study->feed, antenna->offset + up, y, &direction, &sub_point);
    return (float)(path - ev_vec3_dot(budget->wanted, point) - budget->mean_path_error);
}

/* Mean of those of the computed neighbours of a node that have a value. */
static float between_nodes(const ev_study *study, int row, int column)
{
    float sum = 0.0F;
    int count = 0;
    for (int i = row - row % 2; i <= row + row % 2; i += 2)
        for (int k = column - column % 2; k <= column + column % 2; k += 2) {
            float value = study->aperture[i * EV_STUDY_APERTURE_SIDE + k];
            sum += isfinite(value) ? value : 0.0F;
            count += isfinite(value) ? 1 : 0;
        }
    return count > 0 ? sum / (float)count : NAN;
}

static void fill_aperture(ev_study *study, bool coarse)
{
    int step = coarse ? 2 : 1;
    double beyond = coarse ? 3.0 : 1.5;
#pragma omp parallel for schedule(static)
    for (int row = 0; row < EV_STUDY_APERTURE_SIDE; row += step)
        for (int column = 0; column < EV_STUDY_APERTURE_SIDE; column += step)
            study->aperture[row * EV_STUDY_APERTURE_SIDE + column] =
                aperture_node(study, row, column, beyond);
    for (int row = 0; coarse && row < EV_STUDY_APERTURE_SIDE; row++)
        for (int column = 0; column < EV_STUDY_APERTURE_SIDE; column++)
            if (row % 2 || column % 2)
                study->aperture[row * EV_STUDY_APERTURE_SIDE + column] =
                    between_nodes(study, row, column);
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
        fill_aperture(study, want.coarse);
}
