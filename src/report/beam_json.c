/* Beam facts, cuts and limits as JSON and CSV. */
#include "report/json.h"

#include "study/beam_words.h"

#include <math.h>

static double degrees(double radians)
{
    return radians * 180.0 / EV_PI;
}

json_t *ev_json_of_beam(const ev_beam *beam)
{
    json_t *to = json_object();
    ev_json_put(to, "x_deg", degrees(beam->x));
    ev_json_put(to, "y_deg", degrees(beam->y));
    ev_json_put(to, "width_x_deg", degrees(beam->width_x));
    ev_json_put(to, "width_y_deg", degrees(beam->width_y));
    ev_json_put(to, "gain_dbi", beam->gain_dbi);
    ev_json_put(to, "gain_on_axis_dbi", beam->gain_on_axis_dbi);
    ev_json_put(to, "first_sidelobe_x_db", beam->first_sidelobe_x_db);
    ev_json_put(to, "first_sidelobe_y_db", beam->first_sidelobe_y_db);
    ev_json_put(to, "cross_polar_db", beam->cross_polar_db);
    ev_json_put(to, "cross_polar_x_deg", degrees(beam->cross_polar_x));
    ev_json_put(to, "cross_polar_y_deg", degrees(beam->cross_polar_y));
    ev_json_put(to, "deviation_factor", beam->deviation_factor);
    ev_json_put(to, "null_below_x_deg", degrees(beam->null_x[0]));
    ev_json_put(to, "null_above_x_deg", degrees(beam->null_x[1]));
    ev_json_put(to, "null_below_y_deg", degrees(beam->null_y[0]));
    ev_json_put(to, "null_above_y_deg", degrees(beam->null_y[1]));
    ev_json_put(to, "squint_deg", degrees(beam->squint));
    ev_json_put(to, "ledger_gap_db", beam->ledger_gap_db);
    return to;
}

json_t *ev_json_of_beam_notes(const ev_antenna *antenna, int feed, const ev_feed_budget *budget,
                              const ev_beam *beam)
{
    ev_beam_note notes[EV_BEAM_NOTE_COUNT];
    json_t *list = json_array();
    int count = ev_beam_notes(antenna, feed, budget, beam, notes);
    for (int i = 0; i < count; i++) {
        char text[320];
        ev_beam_note_text(&notes[i], beam, text, sizeof text);
        json_array_append_new(
            list, json_pack("{ssss}", "id", ev_beam_note_word(notes[i].id), "text", text));
    }
    return list;
}

static json_t *samples(const double *values, int count)
{
    json_t *list = json_array();
    for (int i = 0; i < count; i++)
        json_array_append_new(list, isfinite(values[i]) ? json_real(values[i]) : json_null());
    return list;
}

static json_t *limit_of(const ev_beam_report_cut *at, const char *name)
{
    const ev_limit_result *result = &at->result;
    json_t *to = json_object();
    json_object_set_new(to, "name", json_string(name));
    json_object_set_new(to, "applies", json_boolean(result->applies));
    json_object_set_new(to, "met", json_boolean(result->met));
    json_object_set_new(to, "peaks", json_integer(result->peak_count));
    json_object_set_new(to, "peaks_over", json_integer(result->peaks_over));
    ev_json_put(to, "share_within", result->share_within);
    ev_json_put(to, "worst_db", result->worst_db);
    ev_json_put(to, "worst_deg", degrees(result->worst_angle));
    return to;
}

static json_t *cut_of(const ev_beam_report_cut *at, const char *limit_name, bool with_samples)
{
    json_t *to = json_object();
    ev_json_put(to, "phi_deg", degrees(at->cut.phi));
    if (at->limited)
        json_object_set_new(to, "limit", limit_of(at, limit_name));
    if (!with_samples)
        return to;
    json_t *angles = json_array();
    for (int i = 0; i < at->cut.count; i++)
        json_array_append_new(angles, json_real(degrees(ev_beam_cut_angle(&at->cut, i))));
    json_object_set_new(to, "angle_deg", angles);
    json_object_set_new(to, "co_dbi", samples(at->co_dbi, at->cut.count));
    json_object_set_new(to, "cross_dbi", samples(at->cross_dbi, at->cut.count));
    return to;
}

static json_t *head_of(const ev_beam_report *report)
{
    json_t *to = json_object();
    json_object_set_new(to, "evenpath", json_integer(1));
    json_object_set_new(to, "title", json_string(report->design->title));
    ev_json_put(to, "frequency_hz", report->antenna->frequency);
    json_object_set_new(to, "feed", json_string(report->design->feeds[report->feed].name));
    ev_json_put(to, "ledger_gain_dbi", report->budget->gain_dbi);
    json_object_set_new(to, "beam", ev_json_of_beam(report->beam));
    if (report->second)
        json_object_set_new(to, "second_opinion", ev_json_of_beam(report->second));
    return to;
}

void ev_beam_report_json(FILE *stream, const ev_beam_report *report, bool with_cut)
{
    json_t *to = head_of(report), *cuts = json_array();
    json_object_set_new(
        to, "notes",
        ev_json_of_beam_notes(report->antenna, report->feed, report->budget, report->beam));
    for (int i = 0; i < report->cut_count; i++)
        json_array_append_new(cuts, cut_of(&report->cuts[i], report->limit_name, with_cut));
    json_object_set_new(to, "cuts", cuts);
    json_dumpf(to, stream, JSON_INDENT(2) | JSON_REAL_PRECISION(17));
    fputc('\n', stream);
    json_decref(to);
}

void ev_beam_report_csv(FILE *stream, const ev_beam_report *report)
{
    json_t *line = head_of(report);
    ev_json_print_csv(stream, &line, 1);
    json_decref(line);
}

static void print_cell(FILE *stream, double value)
{
    fputc(',', stream);
    if (isfinite(value))
        fprintf(stream, "%.9g", value);
}

void ev_beam_report_cut_csv(FILE *stream, const ev_beam_report *report)
{
    fprintf(stream, "phi_deg,angle_deg,co_dbi,cross_dbi%s\r\n",
            report->limit_name ? ",limit_dbi" : "");
    for (int k = 0; k < report->cut_count; k++) {
        const ev_beam_report_cut *at = &report->cuts[k];
        for (int i = 0; i < at->cut.count; i++) {
            double angle = ev_beam_cut_angle(&at->cut, i);
            fprintf(stream, "%.9g", degrees(at->cut.phi));
            print_cell(stream, degrees(angle));
            print_cell(stream, at->co_dbi[i]);
            print_cell(stream, at->cross_dbi[i]);
            if (report->limit_name)
                print_cell(stream, ev_limit_at(&at->limit, angle));
            fputs("\r\n", stream);
        }
    }
}
