/* Beam facts for people. */
#include "report/beam.h"
#include "study/beam_words.h"

#include <math.h>

static double degrees(double radians)
{
    return radians * 180.0 / EV_PI;
}

/* Degrees with enough digits for a beam of this width. */
static int digits_for(double width)
{
    double wide = degrees(width);
    return wide > 10.0 ? 2 : wide > 1.0 ? 3 : wide > 0.1 ? 4 : 5;
}

/* A number in its column; a dash where there is none, and no sign on what rounds to nothing. */
static void print_cell(FILE *stream, double value, int digits)
{
    if (isnan(value))
        fprintf(stream, " %11s", "-");
    else
        fprintf(stream, " %11.*f", digits, fabs(value) < 0.5 * pow(10.0, -digits) ? 0.0 : value);
}

static void print_pair(FILE *stream, const char *label, double x, double y, int digits,
                       const char *unit)
{
    fprintf(stream, "  %-26s", label);
    print_cell(stream, x, digits);
    print_cell(stream, y, digits);
    fprintf(stream, "  %s\n", unit);
}

static void print_facts(FILE *stream, const ev_beam *beam)
{
    int digits = digits_for(beam->width_x);
    fprintf(stream, "  %-26s %11s %11s\n", "", "up-down", "across");
    print_pair(stream, "Beam from the axis", degrees(beam->x), degrees(beam->y), digits, "deg");
    print_pair(stream, "Width at half power", degrees(beam->width_x), degrees(beam->width_y),
               digits, "deg");
    print_pair(stream, "First sidelobe", beam->first_sidelobe_x_db, beam->first_sidelobe_y_db, 2,
               "dB");
    print_pair(stream, "First null, below", degrees(beam->null_x[0]), degrees(beam->null_y[0]),
               digits, "deg");
    print_pair(stream, "First null, above", degrees(beam->null_x[1]), degrees(beam->null_y[1]),
               digits, "deg");
    if (beam->cross_polar_db > -120.0)
        fprintf(stream, "  %-26s %11.2f dB at %.*f, %.*f deg\n", "Cross-polar, highest",
                beam->cross_polar_db, digits, degrees(beam->cross_polar_x), digits,
                degrees(beam->cross_polar_y));
    else
        fprintf(stream, "  %-26s %11s\n", "Cross-polar, highest", "none");
    if (isfinite(beam->deviation_factor))
        fprintf(stream, "  %-26s %11.4f\n", "Beam deviation factor", beam->deviation_factor);
    if (isfinite(beam->squint))
        fprintf(stream, "  %-26s %11.*f deg\n", "Squint of the sense", digits,
                degrees(beam->squint));
}

static void print_limit(FILE *stream, const ev_beam_report_cut *at, const char *name)
{
    const ev_limit_result *result = &at->result;
    if (!at->limited)
        return;
    fprintf(stream, "  %s, cut at phi %.4g deg: ", name, degrees(at->cut.phi));
    if (!result->applies) {
        fprintf(stream, "does not apply to a dish this small\n");
        return;
    }
    fprintf(stream, "%s", result->met ? "met" : "NOT met");
    if (isfinite(result->worst_db))
        fprintf(stream, "; worst %.2f dB %s at %.3f deg", fabs(result->worst_db),
                result->worst_db > 0.0 ? "over" : "in hand", degrees(result->worst_angle));
    if (result->peak_count > 0)
        fprintf(stream, "; %d of %d peaks over", result->peaks_over, result->peak_count);
    fputc('\n', stream);
}

void ev_beam_report_text(FILE *stream, const ev_beam_report *report)
{
    const ev_beam *beam = report->beam;
    ev_beam_note notes[EV_BEAM_NOTE_COUNT];
    fprintf(stream, "%s, feed \"%s\", %.5g GHz\n\n", report->design->title,
            report->design->feeds[report->feed].name, report->antenna->frequency * 1e-9);
    fprintf(stream, "  %-26s %11.3f dBi   (ledger %.3f, difference %+.3f dB)\n", "Gain at the peak",
            beam->gain_dbi, report->budget->gain_dbi, beam->ledger_gap_db);
    fprintf(stream, "  %-26s %11.3f dBi\n", "Gain on the wanted axis", beam->gain_on_axis_dbi);
    print_facts(stream, beam);
    if (report->second) {
        fprintf(stream, "\nSecond opinion, with the subreflector's own currents\n");
        fprintf(stream, "  %-26s %11.3f dBi   (%+.3f dB)\n", "Gain at the peak",
                report->second->gain_dbi, report->second->gain_dbi - beam->gain_dbi);
        print_facts(stream, report->second);
    }
    for (int i = 0; i < report->cut_count; i++) {
        if (i == 0 && report->limit_name)
            fprintf(stream, "\nLimits on side lobes\n");
        print_limit(stream, &report->cuts[i], report->limit_name);
    }
    int count = ev_beam_notes(report->antenna, report->feed, report->budget, beam, notes);
    for (int i = 0; i < count; i++) {
        char text[320];
        ev_beam_note_text(&notes[i], beam, text, sizeof text);
        fprintf(stream, "%sCaution: %s.\n", i == 0 ? "\n" : "", text);
    }
}
