/* What limits the trust in a beam. Called with a beam at hand; words are the caller's. */
#include "optics/beam.h"

typedef struct list {
    ev_beam_note *notes;
    int count;
} list;

static void add_if(list *to, bool holds, ev_beam_note_id id, double value)
{
    if (holds)
        to->notes[to->count++] = (ev_beam_note){id, value};
}

/* Where the feed's axis meets what it lights, from the phase centre. */
static double reach_of(const ev_antenna *antenna, const ev_feed *feed)
{
    double t[2];
    const ev_conic *mirror = antenna->dual ? &antenna->sub.placed : &antenna->main;
    int count = ev_conic_intersect(mirror, feed->position, feed->axis, t);
    for (int i = 0; i < count; i++)
        if (t[i] > 0.0)
            return t[i];
    return NAN;
}

/* A feed of gain G needs an aperture of diameter d = lambda sqrt(G) / pi at least, and is in its
 * far field from 2 d^2 / lambda on (S. Silver 1949, ch. 6). */
static double far_field_of(const ev_antenna *antenna, const ev_feed *feed)
{
    ev_pattern_level axis = ev_pattern_at(&feed->pattern, 0.0);
    double gain = 0.5 * (axis.e + axis.h);
    return 2.0 * antenna->wavelength * gain / (EV_PI * EV_PI);
}

static double thinnest_strut(const ev_antenna *antenna)
{
    double width = INFINITY;
    for (int i = 0; i < antenna->shadows.strip_count; i++)
        width = fmin(width, 2.0 * antenna->shadows.strips[i].half_width);
    return width / antenna->wavelength;
}

/* From here on the spill past the first mirror joins the far field: past the sub's rim for a dual,
 * past the main's for a single mirror (the rim's ray that turns farthest toward +z). */
static double spill_angle(const ev_antenna *antenna, int feed)
{
    ev_vec3 from = antenna->feeds[feed].position;
    double least = EV_PI;
    for (int i = 0; i < 72; i++) {
        double phi = 2.0 * EV_PI * i / 72;
        ev_vec3 rim = antenna->dual
                          ? ev_sub_rim_point(&antenna->sub, phi)
                          : ev_main_point(antenna, antenna->offset + antenna->radius * cos(phi),
                                          antenna->radius * sin(phi));
        ev_vec3 ray = ev_vec3_sub(rim, from);
        least = fmin(least, ev_vec3_angle(ray, ev_vec3_make(0.0, 0.0, 1.0)));
    }
    return least;
}

int ev_beam_notes(const ev_antenna *antenna, int feed, const ev_feed_budget *budget,
                  const ev_beam *beam, ev_beam_note notes[EV_BEAM_NOTE_COUNT])
{
    const ev_feed *lit = &antenna->feeds[feed];
    list found = {.notes = notes};
    double across = 2.0 * antenna->radius / antenna->wavelength;
    add_if(&found, across < 10.0, EV_BEAM_NOTE_DISH_SMALL, across);
    double sub = antenna->layout.sub_long_axis / antenna->wavelength;
    add_if(&found, antenna->dual && sub < 10.0, EV_BEAM_NOTE_SUB_SMALL, sub);
    double near = reach_of(antenna, lit) / far_field_of(antenna, lit);
    add_if(&found, near < 1.0, EV_BEAM_NOTE_FEED_NEAR, near);
    add_if(&found, budget->shadow_share > 0.1, EV_BEAM_NOTE_SHADOW_LARGE, budget->shadow_share);
    double strut = thinnest_strut(antenna);
    add_if(&found, strut < 1.0, EV_BEAM_NOTE_STRUT_THIN, strut);
    bool poor = beam && !beam->nodes.converged;
    add_if(&found, poor, EV_BEAM_NOTE_UNCONVERGED, poor ? beam->nodes.residual : 0.0);
    double gap = beam ? fabs(beam->ledger_gap_db) : 0.0;
    add_if(&found, gap > 0.1, EV_BEAM_NOTE_LEDGER_GAP, gap);
    double spill = spill_angle(antenna, feed);
    add_if(&found, spill < 0.5 * EV_PI, EV_BEAM_NOTE_WIDE_ANGLE, spill);
    return found.count;
}
