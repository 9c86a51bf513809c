/* Two budgets side by side, with the difference: what a kept state shows in the window. */
#include "report/json.h"
#include "study/ledger.h"

#include <math.h>
#include <string.h>

static void print_line(FILE *stream, const char *label, double a, double b, int digits)
{
    fprintf(stream, "  %-26s", label);
    double values[] = {a, b, b - a};
    for (int i = 0; i < 3; i++) {
        double shown = fabs(values[i]) < 0.5 * pow(10.0, -digits) ? 0.0 : values[i];
        if (isnan(values[i]))
            fprintf(stream, " %12s", "-");
        else
            fprintf(stream, i == 2 && shown != 0.0 ? " %+12.*f" : " %12.*f", digits, shown);
    }
    fputc('\n', stream);
}

static double row_db(const ev_ledger_row *row)
{
    return row->applies ? row->db : NAN;
}

/* Where only one of two has the row, the other loses nothing there. */
static void print_ledger(FILE *stream, const ev_report *a, int feed_a, const ev_report *b,
                         int feed_b)
{
    const ev_feed_budget *x = &a->budget->feeds[feed_a], *y = &b->budget->feeds[feed_b];
    ev_ledger_row left[EV_LEDGER_ROW_COUNT], right[EV_LEDGER_ROW_COUNT];
    ev_ledger_list(a->antenna, x, feed_a, left);
    ev_ledger_list(b->antenna, y, feed_b, right);
    fprintf(stream, "\n  %-26s %12s %12s %12s\n", "Ledger, dB", "first", "second", "change");
    print_line(stream, "Full, even aperture, dBi", x->full_aperture_gain_dbi,
               y->full_aperture_gain_dbi, 2);
    for (int i = 0; i < EV_LEDGER_ROW_COUNT; i++) {
        bool either = left[i].applies || right[i].applies;
        print_line(stream, left[i].label, either && !left[i].applies ? 0.0 : row_db(&left[i]),
                   either && !right[i].applies ? 0.0 : row_db(&right[i]), 2);
    }
    print_line(stream, "Gain on the wanted axis", x->gain_on_axis_dbi, y->gain_on_axis_dbi, 2);
    print_line(stream, "Gain where it points", x->gain_dbi, y->gain_dbi, 2);
}

static void print_rest(FILE *stream, const ev_feed_budget *x, const ev_feed_budget *y)
{
    fprintf(stream, "\n  %-26s\n", "Share of the power, %");
    for (int fate = 0; fate < EV_FATE_COUNT; fate++)
        if (x->power[fate] > 0.0 || y->power[fate] > 0.0)
            print_line(stream, ev_watts_of((ev_fate)fate).label, 100.0 * x->power[fate],
                       100.0 * y->power[fate], 2);
    fprintf(stream, "\n  %-26s\n", "Path error, mm");
    print_line(stream, "rms", 1e3 * x->path_error.rms_area, 1e3 * y->path_error.rms_area, 3);
    print_line(stream, "rms, tilt removed", 1e3 * x->untilted.rms_area, 1e3 * y->untilted.rms_area,
               3);
    print_line(stream, "peak to valley", 1e3 * x->path_error.peak_to_valley,
               1e3 * y->path_error.peak_to_valley, 3);
    if (isfinite(x->noise.antenna_k) || isfinite(y->noise.antenna_k))
        print_line(stream, "Antenna temperature, K", x->noise.antenna_k, y->noise.antenna_k, 1);
}

void ev_report_compare_text(FILE *stream, const ev_report *a, const ev_report *b)
{
    const ev_report *both[] = {a, b};
    static const char *const words[] = {"First", "Second"};
    for (int i = 0; i < 2; i++)
        fprintf(stream, "%-7s %s, %.5g GHz, feed \"%s\"\n        %s\n", words[i],
                both[i]->design->title, both[i]->antenna->frequency * 1e-9,
                both[i]->design->feeds[0].name, both[i]->verdict->text);
    print_ledger(stream, a, 0, b, 0);
    print_rest(stream, &a->budget->feeds[0], &b->budget->feeds[0]);
}

static json_t *with_feed(const ev_report *report)
{
    json_t *to = ev_json_of_report(report);
    json_object_set_new(to, "feed", ev_json_of_feed(report, 0));
    return to;
}

/* second - first of every number that both have. */
static json_t *difference(json_t *a, json_t *b)
{
    const char *key;
    json_t *value, *to = json_object();
    json_object_foreach(a, key, value)
    {
        json_t *other = json_object_get(b, key);
        if (json_is_real(value) && json_is_real(other)) {
            ev_json_put(to, key, json_real_value(other) - json_real_value(value));
        } else if (json_is_object(value) && json_is_object(other)) {
            json_t *inner = difference(value, other);
            if (json_object_size(inner) > 0)
                json_object_set(to, key, inner);
            json_decref(inner);
        }
    }
    return to;
}

void ev_report_compare_json(FILE *stream, const ev_report *a, const ev_report *b)
{
    json_t *to = json_object(), *first = with_feed(a), *second = with_feed(b);
    json_object_set_new(to, "evenpath", json_integer(1));
    json_object_set_new(to, "change", difference(first, second));
    json_object_set_new(to, "first", first);
    json_object_set_new(to, "second", second);
    json_dumpf(to, stream, JSON_INDENT(2) | JSON_REAL_PRECISION(17));
    fputc('\n', stream);
    json_decref(to);
}
