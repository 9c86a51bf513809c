/* Words for the notes on a beam. */
#include "study/beam_words.h"

#include <math.h>
#include <stdio.h>

const char *ev_beam_note_word(ev_beam_note_id id)
{
    static const char *const words[EV_BEAM_NOTE_COUNT] = {
        [EV_BEAM_NOTE_DISH_SMALL] = "dish_small",   [EV_BEAM_NOTE_SUB_SMALL] = "sub_small",
        [EV_BEAM_NOTE_FEED_NEAR] = "feed_near",     [EV_BEAM_NOTE_SHADOW_LARGE] = "shadow_large",
        [EV_BEAM_NOTE_STRUT_THIN] = "strut_thin",   [EV_BEAM_NOTE_WIDE_ANGLE] = "wide_angle",
        [EV_BEAM_NOTE_UNCONVERGED] = "unconverged", [EV_BEAM_NOTE_LEDGER_GAP] = "ledger_gap"};
    return words[id];
}

/* Which of the ledger's assumptions the difference comes from. */
static void gap_text(double gap, const ev_beam *beam, char *text, size_t size)
{
    const char *why = "the ledger takes losses one by one, as if none changed another";
    if (beam && fabs(beam->shadow_gap_db) > fabs(beam->lighting_gap_db))
        why = "the ledger weighs shadows at its own peak, and the field is uneven over them";
    else if (beam)
        why =
            "the ledger adds amplitudes as if every current radiated alike toward the peak, which "
            "fails for a strongly bent path, a beam far off the axis or a turned polarization";
    snprintf(text, size, "the radiated gain is %.2f dB %s the ledger's: %s", fabs(gap),
             gap > 0.0 ? "above" : "below", why);
}

void ev_beam_note_text(const ev_beam_note *note, const ev_beam *beam, char *text, size_t size)
{
    double v = note->value;
    switch (note->id) {
    case EV_BEAM_NOTE_DISH_SMALL:
        snprintf(text, size,
                 "the dish is %.1f wavelengths across; under 10 its edge adds as much as "
                 "its surface currents miss",
                 v);
        return;
    case EV_BEAM_NOTE_SUB_SMALL:
        snprintf(text, size,
                 "the subreflector is %.1f wavelengths across; under 10 waves from its "
                 "edge matter, and a second opinion is worth its time",
                 v);
        return;
    case EV_BEAM_NOTE_FEED_NEAR:
        snprintf(text, size,
                 "the mirror stands at %.2g of the feed's far-field distance; its "
                 "pattern is not settled there",
                 v);
        return;
    case EV_BEAM_NOTE_SHADOW_LARGE:
        snprintf(text, size,
                 "%.0f %% of the power is in shadow; plane-wave shadows are a rough "
                 "guide from 10 %% on",
                 100.0 * v);
        return;
    case EV_BEAM_NOTE_STRUT_THIN:
        snprintf(text, size, "struts %.2g wavelengths wide scatter more than their width shades",
                 v);
        return;
    case EV_BEAM_NOTE_WIDE_ANGLE:
        snprintf(text, size,
                 "beyond %.0f degrees from the beam what the feed radiates past the dish "
                 "adds to these levels",
                 v * 180.0 / EV_PI);
        return;
    case EV_BEAM_NOTE_UNCONVERGED:
        snprintf(text, size,
                 "the sum over the currents is settled to %.1f dB of the whole only; low "
                 "levels are not to be trusted",
                 20.0 * log10(fmax(v, 1e-15)));
        return;
    case EV_BEAM_NOTE_LEDGER_GAP:
        gap_text(v, beam, text, size);
        return;
    case EV_BEAM_NOTE_COUNT:
        break;
    }
    text[0] = '\0';
}
