/* What a budget costs on one core: CSV of the least of N evaluations for the example antennas, in
 * place and worn (parts out of place, hole, oversize, body, four struts, site), beside its target
 * and in units of a thousand aimed rays over one mirror, measured in the same run. */
#include "clock.h"
#include "fixture.h"

#include "optics/aperture.h"

#include <omp.h>
#include <stdio.h>

enum { REPEATS = 40, AIMED = 1000 };

static const double target_single_ms = 2.0, target_dual_ms = 10.0;

static double time_aimed_rays(void)
{
    ev_design design = ev_fixture_design(EV_FIXTURE_PRIME);
    ev_antenna antenna;
    double best = 1e9, sum = 0.0;
    ev_fixture_build(&design, &antenna);
    for (int repeat = 0; repeat < REPEATS; repeat++) {
        double start = seconds_now();
        for (int i = 0; i < AIMED; i++)
            sum += ev_aperture_sample(&antenna, 0, 4.9 * i / AIMED, 0.1).density;
        best = fmin(best, seconds_now() - start);
    }
    return sum > 0.0 ? best : 0.0;
}

static double time_budget(const ev_design *design)
{
    ev_antenna antenna;
    ev_feed_budget budget;
    double best = 1e9;
    ev_fixture_build(design, &antenna);
    for (int repeat = 0; repeat < REPEATS; repeat++) {
        double start = seconds_now();
        ev_budget_compute_feed(&antenna, 0, &budget);
        best = fmin(best, seconds_now() - start);
    }
    return best;
}

static double time_axis_gain(const ev_design *design)
{
    ev_antenna antenna;
    double best = 1e9, sum = 0.0;
    ev_fixture_build(design, &antenna);
    for (int repeat = 0; repeat < REPEATS; repeat++) {
        double start = seconds_now();
        sum += ev_axis_gain_dbi(&antenna, 0);
        best = fmin(best, seconds_now() - start);
    }
    return isfinite(sum) ? best : 0.0;
}

int main(void)
{
    omp_set_num_threads(1);
    double unit = time_aimed_rays();
    printf("antenna,state,budget_ms,target_ms,share_of_target,in_thousand_aimed_rays,"
           "axis_gain_ms\n");
    for (int i = 0; i < 2 * EV_FIXTURE_COUNT; i++) {
        ev_fixture fixture = (ev_fixture)(i / 2);
        bool worn = i % 2;
        ev_design design = worn ? ev_fixture_worn_design(fixture) : ev_fixture_design(fixture);
        double time = time_budget(&design), target = target_single_ms;
        if (design.sub.present)
            target = target_dual_ms;
        printf("%s,%s,%.3f,%.0f,%.2f,%.1f,%.3f\n", ev_layout_name(ev_design_layout(&design)),
               worn ? "worn" : "in place", 1e3 * time, target, 1e3 * time / target, time / unit,
               1e3 * time_axis_gain(&design));
    }
    return 0;
}
