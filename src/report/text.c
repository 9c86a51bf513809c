/* The budget as text: short, aligned, for someone who has not read the manual. */
#include "report/report.h"
#include "study/ledger.h"

#include <math.h>
#include <stddef.h>
#include <string.h>

static const char *layout_words(ev_layout_kind kind)
{
    static const char *const words[] = {"prime-focus dish",  "offset dish",
                                        "Cassegrain",        "Gregorian",
                                        "offset Cassegrain", "offset Gregorian"};
    return words[kind];
}

/* A length with its unit in the size that people use: mm below 10 m. */
static const char *length(double metres, char text[32])
{
    bool big = fabs(metres) >= 9.9995;
    double value = big ? metres : metres * 1e3, size = fabs(value);
    int decimals = big ? 3 : size >= 99.95 ? 1 : size >= 0.995 ? 2 : 3;
    snprintf(text, 32, "%.*f", decimals, value);
    for (char *end = text + strlen(text) - 1; strchr(text, '.') && (*end == '0' || *end == '.');
         end--) {
        bool dot = *end == '.';
        *end = '\0';
        if (dot)
            break;
    }
    strcat(text, big ? " m" : " mm");
    return text;
}

static void print_head(FILE *stream, const ev_report *report)
{
    const ev_antenna *antenna = report->antenna;
    const ev_layout *layout = &antenna->layout;
    char a[32], b[32], c[32];
    fprintf(stream, "%s\n", report->design->title);
    fprintf(stream, "%s %s, focal length %s (f/D %.3g), %.5g GHz, wavelength %s\n",
            layout_words(layout->kind), length(layout->diameter, a),
            length(layout->focal_length, b), layout->focal_length / layout->diameter,
            antenna->frequency * 1e-9, length(antenna->wavelength, c));
    if (antenna->dual)
        fprintf(stream, "subreflector %s, magnification %.4g, equivalent focal length %s\n",
                length(layout->sub_long_axis, a), layout->sub_magnification,
                length(layout->equivalent_focal_length, b));
}

static void print_watts(FILE *stream, const ev_feed_budget *budget)
{
    fprintf(stream, "\nWhere the feed's power goes\n");
    for (int fate = 0; fate < EV_FATE_COUNT; fate++)
        if (budget->power[fate] > 0.0 || fate == EV_FATE_APERTURE)
            fprintf(stream, "  %6.2f %%  %s\n", 100.0 * budget->power[fate],
                    ev_watts_of((ev_fate)fate).label);
}

static void print_ledger(FILE *stream, const ev_report *report, int feed)
{
    const ev_feed_budget *budget = &report->budget->feeds[feed];
    ev_ledger_row rows[EV_LEDGER_ROW_COUNT];
    ev_ledger_list(report->antenna, budget, feed, rows);
    fprintf(stream, "\nLedger                          dB\n");
    fprintf(stream, "  %-24s %8.2f dBi\n", "Full, even aperture", budget->full_aperture_gain_dbi);
    for (int i = 0; i < EV_LEDGER_ROW_COUNT; i++) {
        /* a loss that rounds to nothing is printed without a sign */
        double shown = fabs(rows[i].db) < 0.005 ? 0.0 : rows[i].db;
        if (rows[i].applies)
            fprintf(stream, "  %-24s %8.2f\n", rows[i].label, shown);
        else
            fprintf(stream, "  %-24s %8s\n", rows[i].label, "-");
    }
    double total = ev_ledger_total_db(budget);
    fprintf(stream, "  %-24s %8.2f dBi  (%.2f dB, %.0f %% of full)\n", "Gain on the wanted axis",
            budget->gain_on_axis_dbi, total, 100.0 * pow(10.0, 0.1 * total));
    if (budget->efficiency.pointing < 0.9999)
        fprintf(stream, "  %-24s %8.2f dBi\n", "Gain where it points", budget->gain_dbi);
}

static void print_path(FILE *stream, const ev_report *report, const ev_feed_budget *budget)
{
    char a[32], b[32];
    const ev_path_stats *raw = &budget->path_error, *flat = &budget->untilted;
    double rms = raw->rms_area;
    fprintf(stream, "\nPath error over the aperture    as it is     tilt removed\n");
    fprintf(stream, "  rms, even weight          %12s %16s", length(rms, a),
            length(flat->rms_area, b));
    if (rms > 1e-6 * report->antenna->wavelength)
        fprintf(stream, "    lambda/%.3g as it is", report->antenna->wavelength / rms);
    fprintf(stream, "\n  rms, weighted by power    %12s %16s\n", length(raw->rms_power, a),
            length(flat->rms_power, b));
    fprintf(stream, "  peak to valley            %12s %16s\n", length(raw->peak_to_valley, a),
            length(flat->peak_to_valley, b));
}

static void print_noise(FILE *stream, const ev_report *report, const ev_feed_budget *budget)
{
    const ev_noise *noise = &budget->noise;
    if (!report->antenna->site.present)
        return;
    fprintf(stream, "\nNoise at %.3g deg elevation\n",
            report->antenna->site.elevation * 180.0 / EV_PI);
    fprintf(stream,
            "  %6.1f K from spill (%.2f %% of the power to the ground, %.2f %% to the sky)\n",
            noise->spill_k, 100.0 * noise->spill_ground, 100.0 * noise->spill_sky);
    fprintf(stream, "  %6.1f K antenna temperature, without scatter from what stands before it\n",
            noise->antenna_k);
}

static void print_feed(FILE *stream, const ev_report *report, int index)
{
    const ev_feed *feed = &report->antenna->feeds[index];
    const ev_feed_budget *budget = &report->budget->feeds[index];
    char a[32], b[32], c[32];
    fprintf(stream, "\nFeed \"%s\" at %s, %s, %s; edge taper %.1f dB\n",
            report->design->feeds[index].name, length(feed->position.x, a),
            length(feed->position.y, b), length(feed->position.z, c), feed->edge_taper_db);
    print_watts(stream, budget);
    print_ledger(stream, report, index);
    print_path(stream, report, budget);
    print_noise(stream, report, budget);
}

void ev_report_text(FILE *stream, const ev_report *report)
{
    print_head(stream, report);
    fprintf(stream, "\n%s\n%s\n", report->verdict->text, report->verdict->advice);
    for (int i = 0; i < report->budget->feed_count; i++)
        print_feed(stream, report, i);
    for (int i = 0; report->warnings && i < report->warnings->count; i++)
        fprintf(stream, "%sCaution: %s.\n", i == 0 ? "\n" : "", report->warnings->items[i].text);
}
