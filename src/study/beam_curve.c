/* Curves for the plates. Called by the window's worker and by `picture`. */
#include "study/beam_curve.h"

#include "optics/budget.h"

static double round_up(double value)
{
    double step = pow(10.0, floor(log10(value)));
    static const double parts[] = {1.0, 2.0, 3.0, 4.0, 5.0, 6.0, 8.0, 10.0};
    for (int i = 0; i < 8; i++)
        if (parts[i] * step >= value * (1.0 - 1e-9))
            return parts[i] * step;
    return 10.0 * step;
}

double ev_beam_curve_span(const ev_antenna *antenna, int feed)
{
    double lobe = antenna->wavelength / (2.0 * antenna->radius) * 180.0 / EV_PI;
    ev_vec3 wanted = antenna->feeds[feed].wanted;
    double aside = asin(fmin(1.0, hypot(wanted.x, wanted.y))) * 180.0 / EV_PI;
    return fmin(round_up(7.0 * lobe + aside), 90.0) * EV_PI / 180.0;
}

void ev_beam_curve_compute(const ev_antenna *antenna, int feed, double phi, double span,
                           ev_beam_quality quality, ev_beam_curve *curve)
{
    *curve = (ev_beam_curve){.feed = feed, .phi = phi, .span = span, .quality = quality};
    ev_beam_cut cut = {.centre = {0.0, 0.0, 1.0},
                       .phi = phi,
                       .from = -span,
                       .to = span,
                       .count = EV_BEAM_CURVE_SAMPLES};
    ev_beam_source *source = ev_beam_source_create(antenna, feed, quality);
    ev_beam_cut_compute(source, &cut, curve->co_dbi, curve->cross_dbi);
    ev_feed_budget budget;
    ev_budget_compute_feed(antenna, feed, &budget);
    double gain;
    ev_vec3 peak = ev_beam_climb(source, budget.peak, false, &gain);
    ev_beam_cut_add_pedestal(antenna, &budget, peak, &cut, curve->co_dbi);
    curve->peak_angle = atan2(peak.x * cos(phi) + peak.y * sin(phi), peak.z);
    curve->peak_dbi = 10.0 * log10(fmax(gain, 1e-30));
    for (int i = 0; i < EV_BEAM_CURVE_SAMPLES; i++)
        curve->angle[i] = ev_beam_cut_angle(&cut, i);
    ev_beam_source_destroy(source);
}

void ev_gain_curve_compute(const ev_design *design, double frequency, ev_part part, int feed,
                           ev_part_axis axis, double extent, ev_gain_curve *curve)
{
    ev_antenna antenna;
    ev_antenna_build(design, frequency, &antenna);
    *curve = (ev_gain_curve){.part = part, .axis = axis};
    curve->now = ev_part_place(design, &antenna, part, feed, axis);
    double gain[EV_GAIN_CURVE_SAMPLES], highest = -INFINITY;
#pragma omp parallel for schedule(dynamic)
    for (int i = 0; i < EV_GAIN_CURVE_SAMPLES; i++) {
        double by[EV_AXIS_COUNT] = {0};
        curve->place[i] =
            0.5 * curve->now + extent * (2.0 * i / (EV_GAIN_CURVE_SAMPLES - 1.0) - 1.0);
        by[axis] = curve->place[i] - curve->now;
        gain[i] = ev_part_gain_at(design, frequency, part, feed, by);
    }
    for (int i = 0; i < EV_GAIN_CURVE_SAMPLES; i++)
        highest = fmax(highest, gain[i]);
    for (int i = 0; i < EV_GAIN_CURVE_SAMPLES; i++)
        curve->loss_db[i] = highest - gain[i];
}
