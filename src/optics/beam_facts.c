/* Beam facts: peak, widths, sidelobes, cross-polarization, deviation and squint; definitions in
 * beam.h. Called by the commands and the window's worker. */
#include "optics/beam.h"

#include "optics/aperture.h"
#include "optics/beam_search.h"

static double decibels(double ratio)
{
    return 10.0 * log10(fmax(ratio, 1e-30));
}

static ev_beam no_facts(void)
{
    ev_vec3 none = {NAN, NAN, NAN};
    return (ev_beam){.peak = none,
                     .x = NAN,
                     .y = NAN,
                     .gain_dbi = NAN,
                     .gain_on_axis_dbi = NAN,
                     .width_x = NAN,
                     .width_y = NAN,
                     .first_sidelobe_x_db = NAN,
                     .first_sidelobe_y_db = NAN,
                     .null_x = {NAN, NAN},
                     .null_y = {NAN, NAN},
                     .cross_peak = none,
                     .cross_polar_db = NAN,
                     .cross_polar_x = NAN,
                     .cross_polar_y = NAN,
                     .deviation_factor = NAN,
                     .squint = NAN,
                     .unshadowed_dbi = NAN,
                     .ledger_gap_db = NAN,
                     .shadow_gap_db = NAN,
                     .lighting_gap_db = NAN};
}

/* Slopes of the path over the aperture's centre: by Fermat, the components along the surface of
 * the direction in which the ray arrives. */
static bool slopes_at_centre(const ev_antenna *antenna, int feed, double slope[2])
{
    ev_sample sample = ev_aperture_sample(antenna, feed, antenna->offset, 0.0);
    slope[0] =
        sample.incident.x + sample.incident.z * antenna->offset / (2.0 * antenna->focal_length);
    slope[1] = sample.incident.y;
    return sample.reached;
}

/* The tilt that the ray to the aperture's centre predicts, against the tilt of the beam. */
static double deviation_of(const ev_antenna *antenna, int feed, ev_vec3 peak)
{
    const ev_feed *placed = &antenna->feeds[feed];
    ev_vec3 moved = ev_vec3_sub(placed->position, placed->nominal);
    if (ev_vec3_length(moved) < antenna->wavelength / 500.0)
        return NAN;
    ev_antenna nominal = *antenna;
    nominal.feeds[feed].position = placed->nominal;
    nominal.sub.placed = nominal.sub.nominal;
    double now[2], meant[2];
    if (!slopes_at_centre(antenna, feed, now) || !slopes_at_centre(&nominal, feed, meant))
        return NAN;
    double ex = now[0] - meant[0], ey = now[1] - meant[1], size = hypot(ex, ey);
    if (!(size * antenna->radius > antenna->wavelength / 500.0) || !(size < 1.0))
        return NAN; /* moved along the ray: that tilts nothing */
    return asin((peak.x * ex + peak.y * ey) / size) / asin(size);
}

typedef struct line_facts {
    double width, sidelobe_db, null[2];
} line_facts;

static line_facts walk_line(ev_beam_source *source, ev_vec3 peak, double power, bool along_y)
{
    double at = along_y ? peak.y : peak.x, highest = NAN;
    ev_beam_side side[2];
    line_facts facts;
    for (int i = 0; i < 2; i++) {
        side[i] = ev_beam_walk(source, peak, power, along_y, i ? 1.0 : -1.0);
        facts.null[i] = asin(at + side[i].null);
        highest = fmax(highest, side[i].sidelobe_power); /* fmax passes over NaN */
    }
    facts.width = asin(at + side[1].half_power) - asin(at + side[0].half_power);
    facts.sidelobe_db = isnan(highest) ? NAN : decibels(highest);
    return facts;
}

static void fill_gaps(const ev_feed_budget *budget, ev_beam *beam)
{
    beam->ledger_gap_db = beam->gain_dbi - budget->gain_dbi;
    beam->shadow_gap_db =
        beam->gain_dbi - beam->unshadowed_dbi - decibels(budget->efficiency.blockage);
    beam->lighting_gap_db = beam->ledger_gap_db - beam->shadow_gap_db;
}

static double co_power(const ev_beam_field *field)
{
    double size = cabs(field->co);
    return size * size;
}

bool ev_beam_compute_from(ev_beam_source *source, const ev_antenna *antenna, int feed,
                          const ev_feed_budget *budget, ev_beam *beam)
{
    double power, cross;
    ev_beam_field field;
    *beam = no_facts();
    ev_vec3 peak = ev_beam_climb(source, budget->peak, false, &power);
    beam->nodes = ev_beam_source_nodes(source);
    if (!(power > 0.0))
        return false;
    beam->peak = peak;
    beam->x = asin(peak.x);
    beam->y = asin(peak.y);
    beam->gain_dbi = decibels(power);
    bool own = antenna->feeds[feed].toward_peak;
    ev_vec3 wanted = own ? peak : antenna->feeds[feed].wanted;
    ev_beam_fields(source, &wanted, 1, &field);
    beam->gain_on_axis_dbi = decibels(co_power(&field));
    line_facts x = walk_line(source, peak, power, false);
    line_facts y = walk_line(source, peak, power, true);
    beam->width_x = x.width;
    beam->width_y = y.width;
    beam->first_sidelobe_x_db = x.sidelobe_db;
    beam->first_sidelobe_y_db = y.sidelobe_db;
    for (int i = 0; i < 2; i++) {
        beam->null_x[i] = x.null[i];
        beam->null_y[i] = y.null[i];
    }
    beam->cross_peak = ev_beam_cross_peak(source, peak, &cross);
    beam->cross_polar_db = decibels(cross / power);
    beam->cross_polar_x = asin(beam->cross_peak.x);
    beam->cross_polar_y = asin(beam->cross_peak.y);
    beam->deviation_factor = deviation_of(antenna, feed, peak);
    ev_beam_fields_unshadowed(source, &peak, 1, &field);
    beam->unshadowed_dbi = decibels(co_power(&field));
    fill_gaps(budget, beam);
    beam->nodes = ev_beam_source_nodes(source);
    return true;
}

static bool is_circular(ev_polarization polarization)
{
    return polarization == EV_POLARIZATION_RHCP || polarization == EV_POLARIZATION_LHCP;
}

/* The beam of the other sense leans the other way (A. Rudge, N. Adatia, Proc. IEEE 66, 1978). */
static double squint_of(const ev_antenna *antenna, int feed, ev_beam_quality quality, ev_vec3 peak)
{
    ev_antenna other = *antenna;
    ev_polarization sense = antenna->feeds[feed].polarization;
    other.feeds[feed].polarization =
        sense == EV_POLARIZATION_RHCP ? EV_POLARIZATION_LHCP : EV_POLARIZATION_RHCP;
    ev_beam_source *source = ev_beam_source_create(&other, feed, quality);
    double gain;
    ev_vec3 opposite = ev_beam_climb(source, peak, false, &gain);
    ev_beam_source_destroy(source);
    return 0.5 * ev_vec3_angle(peak, opposite);
}

bool ev_beam_compute(const ev_antenna *antenna, int feed, const ev_feed_budget *budget,
                     ev_beam_quality quality, ev_beam *beam)
{
    ev_beam_source *source = ev_beam_source_create(antenna, feed, quality);
    bool lit = ev_beam_compute_from(source, antenna, feed, budget, beam);
    ev_beam_source_destroy(source);
    if (lit && is_circular(antenna->feeds[feed].polarization))
        beam->squint = squint_of(antenna, feed, quality, beam->peak);
    return lit;
}
