/* Ledger and watts rows. Called by the drawings and the reports, so that all use the same words. */
#include "study/ledger.h"

static bool is_circular(ev_polarization polarization)
{
    return polarization == EV_POLARIZATION_RHCP || polarization == EV_POLARIZATION_LHCP;
}

static double decibels(double factor)
{
    return isnan(factor) ? NAN : 10.0 * log10(fmax(factor, 1e-30));
}

void ev_ledger_list(const ev_antenna *antenna, const ev_feed_budget *budget, int feed,
                    ev_ledger_row rows[EV_LEDGER_ROW_COUNT])
{
    const ev_efficiency *eta = &budget->efficiency;
    const ev_feed *source = &antenna->feeds[feed];
    const struct {
        ev_ledger_row row;
        double factor;
    } all[EV_LEDGER_ROW_COUNT] = {
        {{"past_sub", "Past the subreflector", antenna->dual, 0.0}, eta->spillover_sub},
        {{"past_main", "Past the dish", true, 0.0}, eta->spillover_main},
        {{"taper", "Uneven lighting", true, 0.0}, eta->taper},
        {{"phase", "Path error", true, 0.0}, eta->phase},
        {{"pointing", "Beam off axis", !source->toward_peak, 0.0}, eta->pointing},
        {{"polarization", "Polarization", !is_circular(source->polarization), 0.0},
         eta->polarization},
        {{"blockage", "Shadows", budget->shadow_share > 0.0, 0.0}, eta->blockage},
        {{"surface", "Surface, rms", true, 0.0}, eta->surface},
        {{"ohmic", "Ohmic loss", true, 0.0}, eta->ohmic},
        {{"mismatch", "Mismatch", true, 0.0}, eta->mismatch},
    };
    for (int i = 0; i < EV_LEDGER_ROW_COUNT; i++) {
        rows[i] = all[i].row;
        rows[i].db = decibels(all[i].factor);
    }
}

double ev_ledger_total_db(const ev_feed_budget *budget)
{
    return budget->gain_on_axis_dbi - budget->full_aperture_gain_dbi;
}

ev_watts_row ev_watts_of(ev_fate fate)
{
    static const ev_watts_row rows[EV_FATE_COUNT] = {
        {EV_FATE_APERTURE, "aperture", "through the aperture"},
        {EV_FATE_PAST_SUB, "past_sub", "past the subreflector"},
        {EV_FATE_PAST_MAIN, "past_main", "past the dish"},
        {EV_FATE_SHADOW_SUB, "shadow_sub", "in the subreflector's shadow"},
        {EV_FATE_SHADOW_FEED, "shadow_feed", "in the feed's shadow"},
        {EV_FATE_SHADOW_STRUTS, "shadow_struts", "in the struts' shadow"},
    };
    return rows[fate];
}
