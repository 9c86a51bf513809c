/* The Ledger: what becomes of the gain of a full, even aperture, as a falling stair of decibels.
 * The same rows for every antenna; where one does not apply it says so with a dash. */
#include "study/ledger.h"
#include "draw/stage.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

enum { ROW_COUNT = EV_LEDGER_ROW_COUNT };

/* How a row is marked: as the rays it is about, as the path error's colours, or not at all. */
typedef enum { MARK_NONE, MARK_RAYS, MARK_PATH } row_mark;

typedef struct ledger_frame {
    double left, right;         /* of the text */
    double stair, stair_width;  /* px */
    double value_end, kept_end; /* right edges of the numbers */
    double top, pitch;          /* centre of row 0, and onward */
    double range_db;
} ledger_frame;

static const ev_feed_budget *kept_budget(const ev_sheet *sheet)
{
    return sheet->kept && sheet->feed < sheet->kept->feed_count ? &sheet->kept->feeds[sheet->feed]
                                                                : NULL;
}

double ev_ledger_range(const ev_sheet *sheet)
{
    static const double ranges[] = {1.0, 2.0, 3.0, 4.0, 6.0, 8.0, 10.0, 15.0, 20.0, 30.0, 60.0};
    double loss = -ev_ledger_total_db(&sheet->budget->feeds[sheet->feed]);
    if (kept_budget(sheet))
        loss = fmax(loss, -ev_ledger_total_db(kept_budget(sheet)));
    for (size_t i = 0; i < sizeof ranges / sizeof ranges[0]; ++i)
        if (ranges[i] >= loss)
            return ranges[i];
    return 100.0;
}

static ledger_frame make_frame(const ev_page *page, const ev_sheet *sheet)
{
    ev_rect place = page->ledger;
    ledger_frame frame = {.left = place.x + 22.0, .right = place.x + place.width - 24.0};
    frame.kept_end = frame.right;
    frame.value_end = frame.right - 44.0;
    frame.stair = frame.left + (place.width < 370.0 ? 151.0 : 164.0);
    frame.stair_width = frame.value_end - 50.0 - frame.stair;
    frame.pitch = (place.height - 119.0) / ROW_COUNT;
    frame.top = place.y + 55.5 + 0.5 * frame.pitch;
    frame.range_db = sheet->ledger_range > 0.0 ? sheet->ledger_range : ev_ledger_range(sheet);
    return frame;
}

static double stair_x(const ledger_frame *frame, double gain_db)
{
    double share = isnan(gain_db) ? 0.0 : fmin(-gain_db / frame->range_db, 1.0);
    return frame->stair + frame->stair_width * fmax(share, 0.0);
}

static double grid_step(double range_db)
{
    return range_db <= 4.0 ? 1.0 : range_db <= 10.0 ? 2.0 : range_db <= 20.0 ? 5.0 : 10.0;
}

static void draw_grid(ev_pen *pen, const ledger_frame *frame)
{
    double top = frame->top - 0.5 * frame->pitch + 2.0;
    double bottom = frame->top + (ROW_COUNT - 0.5) * frame->pitch + 4.0;
    double step = grid_step(frame->range_db);
    for (double db = 0.0; db <= frame->range_db * (1.0 + 1e-9); db += step) {
        double x = stair_x(frame, -db);
        ev_pen_line(pen, x, top, x, bottom, pen->theme->rule, 1.0, 1.0);
    }
    char text[32];
    snprintf(text, sizeof text, "%g dB a line", step);
    ev_text(pen, (ev_words){.name = "text.ledger.grid",
                            .string = text,
                            .font = EV_FONT_SMALL,
                            .colour = pen->theme->third,
                            .x = frame->stair - 1.0,
                            .width = frame->stair_width + 2.0,
                            .baseline = frame->top - 0.5 * frame->pitch - 7.0});
}

static void draw_path_swatch(ev_pen *pen, ev_rect rect)
{
    cairo_pattern_t *pattern = cairo_pattern_create_linear(rect.x, 0.0, rect.x + rect.width, 0.0);
    for (int i = 0; i <= 8; ++i) {
        ev_colour colour = ev_theme_path_error(pen->theme, -1.0 + 0.25 * i);
        cairo_pattern_add_color_stop_rgba(pattern, i / 8.0, colour.r, colour.g, colour.b,
                                          pen->strength);
    }
    cairo_set_source(pen->cairo, pattern);
    cairo_rectangle(pen->cairo, rect.x, rect.y, rect.width, rect.height);
    cairo_fill(pen->cairo);
    cairo_pattern_destroy(pattern);
}

static row_mark mark_of(const ev_ledger_row *row, ev_fate *fate)
{
    *fate = strcmp(row->id, ev_watts_of(EV_FATE_PAST_SUB).id) == 0    ? EV_FATE_PAST_SUB
            : strcmp(row->id, ev_watts_of(EV_FATE_PAST_MAIN).id) == 0 ? EV_FATE_PAST_MAIN
            : strcmp(row->id, "blockage") == 0                        ? EV_FATE_SHADOW_SUB
                                                                      : EV_FATE_COUNT;
    return *fate != EV_FATE_COUNT          ? MARK_RAYS
           : strcmp(row->id, "phase") == 0 ? MARK_PATH
                                           : MARK_NONE;
}

static void draw_swatch(ev_pen *pen, const ev_ledger_row *row, double x, double y)
{
    ev_fate fate;
    row_mark mark = mark_of(row, &fate);
    if (mark == MARK_RAYS)
        ev_pen_fate_sample(pen, fate, x, y, 20.0);
    else if (mark == MARK_PATH)
        draw_path_swatch(pen, (ev_rect){x, y - 3.5, 20.0, 7.0});
    else
        ev_pen_line(pen, x + 8.0, y, x + 12.0, y, pen->theme->third, 1.2, 1.0);
}

static void draw_step(ev_pen *pen, const ev_ledger_row *row, ev_rect bar)
{
    const ev_theme *theme = pen->theme;
    ev_fate fate;
    row_mark mark = mark_of(row, &fate);
    if (mark == MARK_PATH) {
        ev_pen_fill(pen, (ev_rect){bar.x, bar.y, 0.5 * bar.width, bar.height}, 0.0, theme->early,
                    1.0);
        ev_pen_fill(pen, (ev_rect){bar.x + 0.5 * bar.width, bar.y, 0.5 * bar.width, bar.height},
                    0.0, theme->late, 1.0);
        return;
    }
    ev_pen_fill(pen, bar, 0.0, mark == MARK_RAYS ? ev_theme_fate(theme, fate) : theme->third, 0.85);
}

static void draw_stair(ev_pen *pen, const ledger_frame *frame, const ev_ledger_row *rows,
                       const ev_ledger_row *kept)
{
    double sum = 0.0, y_before = frame->top - 0.5 * frame->pitch + 2.0;
    for (int i = 0; i < ROW_COUNT; ++i) {
        double y = frame->top + i * frame->pitch, half = 4.5;
        double from = stair_x(frame, sum);
        double gain = rows[i].applies && !isnan(rows[i].db) ? rows[i].db : 0.0;
        double to = stair_x(frame, sum + gain);
        ev_pen_line(pen, from, y_before, from, y - half, pen->theme->third, 1.0, 0.9);
        draw_step(pen, &rows[i], (ev_rect){from, y - half, fmax(to - from, 0.4), 2.0 * half});
        if (kept && rows[i].applies) {
            double end = stair_x(frame, sum + kept[i].db);
            ev_pen_frame(pen,
                         (ev_rect){from - 0.5, y - half - 2.0, end - from + 1.0, 2.0 * half + 4.0},
                         0.0, pen->theme->ink, 1.1, 0.45);
        }
        sum += gain;
        y_before = y - half;
    }
    double x = stair_x(frame, sum);
    ev_pen_line(pen, x, y_before, x, frame->top + (ROW_COUNT - 0.5) * frame->pitch + 7.0,
                pen->theme->third, 1.0, 0.9);
}

static void draw_number(ev_pen *pen, const char *row, const char *column, const char *string,
                        double end, double width, double baseline, ev_font font, ev_colour colour)
{
    char name[80];
    snprintf(name, sizeof name, "text.ledger.%s.%s", row, column);
    ev_text(pen, (ev_words){.name = name,
                            .string = string,
                            .font = font,
                            .colour = colour,
                            .align = EV_ALIGN_RIGHT,
                            .x = end - width,
                            .width = width,
                            .baseline = baseline,
                            .least = EV_LEAST_TYPE});
}

static void draw_difference(ev_pen *pen, const ledger_frame *frame, const char *row,
                            double difference, double baseline, ev_colour colour)
{
    char text[32];
    if (fabs(difference) < 0.005)
        snprintf(text, sizeof text, "\u00b7");
    else
        ev_format_number(text, sizeof text, difference, 2, true);
    draw_number(pen, row, "kept", text, frame->kept_end, 41.0, baseline, EV_FONT_NOTE, colour);
}

static void draw_row(ev_pen *pen, const ledger_frame *frame, const ev_ledger_row *row,
                     const ev_ledger_row *kept, int index, bool pointed)
{
    const ev_theme *theme = pen->theme;
    double y = frame->top + index * frame->pitch, baseline = y + 4.5;
    char name[80], text[32];
    ev_colour ink = pointed ? theme->hand_text : row->applies ? theme->ink : theme->third;
    draw_swatch(pen, row, frame->left, y);
    snprintf(name, sizeof name, "text.ledger.%s.label", row->id);
    ev_text(pen, (ev_words){.name = name,
                            .string = row->label,
                            .font = EV_FONT_BODY,
                            .colour = ink,
                            .x = frame->left + 28.0,
                            .width = frame->stair - frame->left - 31.0,
                            .baseline = baseline,
                            .least = EV_LEAST_TYPE});
    double gain = row->db > -100.0 || isnan(row->db) ? row->db : -INFINITY;
    if (row->applies)
        ev_format_number(text, sizeof text, gain, 2, false);
    else
        snprintf(text, sizeof text, "\u2013");
    bool heavy = row->applies && gain <= -0.5;
    draw_number(pen, row->id, "db", text, frame->value_end, 48.0, baseline,
                heavy ? EV_FONT_BODY_STRONG : EV_FONT_BODY, ink);
    if (kept && row->applies)
        draw_difference(pen, frame, row->id, row->db - kept->db, baseline,
                        pointed ? theme->hand_text : theme->second);
}

static void draw_head(ev_pen *pen, const ev_sheet *sheet, const ledger_frame *frame)
{
    double y = pen->region.y;
    const ev_theme *theme = pen->theme;
    ev_text(pen, (ev_words){.name = "text.ledger.head",
                            .string = "Ledger",
                            .font = EV_FONT_HEAD,
                            .colour = theme->ink,
                            .x = frame->left,
                            .width = 120.0,
                            .baseline = y + 27.0});
    draw_number(pen, "head", "db", "dB", frame->value_end, 48.0, y + 27.0, EV_FONT_NOTE,
                theme->second);
    if (kept_budget(sheet))
        draw_number(pen, "head", "kept", "kept", frame->kept_end, 41.0, y + 27.0, EV_FONT_NOTE,
                    theme->second);
    char text[32];
    ev_format_number(text, sizeof text, sheet->budget->feeds[sheet->feed].full_aperture_gain_dbi, 2,
                     false);
    ev_text(pen, (ev_words){.name = "text.ledger.full.label",
                            .string = "Full, even aperture",
                            .font = EV_FONT_BODY,
                            .colour = theme->second,
                            .x = frame->left,
                            .width = frame->stair - frame->left - 3.0,
                            .baseline = y + 49.0,
                            .least = EV_LEAST_TYPE});
    draw_number(pen, "full", "db", text, frame->value_end, 48.0, y + 49.0, EV_FONT_BODY,
                theme->second);
}

static void draw_gain(ev_pen *pen, const ev_sheet *sheet, const ledger_frame *frame, double rule)
{
    const ev_feed_budget *budget = &sheet->budget->feeds[sheet->feed];
    const ev_theme *theme = pen->theme;
    char text[32];
    ev_format_number(text, sizeof text, budget->gain_on_axis_dbi, 2, false);
    ev_rect gain = ev_text(pen, (ev_words){.name = "text.ledger.gain",
                                           .string = text,
                                           .font = EV_FONT_GAIN,
                                           .colour = theme->ink,
                                           .x = frame->left,
                                           .width = 110.0,
                                           .baseline = rule + 31.0,
                                           .least = 16.0});
    double x = gain.x + gain.width + 7.0;
    bool to_peak = sheet->antenna->feeds[sheet->feed].toward_peak;
    ev_text(pen, (ev_words){.name = "text.ledger.gain.unit",
                            .string = to_peak ? "dBi where it points" : "dBi on the wanted axis",
                            .font = EV_FONT_BODY,
                            .colour = theme->second,
                            .x = x,
                            .width = frame->value_end - 46.0 - x,
                            .baseline = rule + 31.0,
                            .least = EV_LEAST_TYPE});
    double total = ev_ledger_total_db(budget);
    ev_format_number(text, sizeof text, total, 2, false);
    draw_number(pen, "total", "db", text, frame->value_end, 46.0, rule + 23.0, EV_FONT_BODY_STRONG,
                theme->ink);
    if (kept_budget(sheet))
        draw_difference(pen, frame, "total", total - ev_ledger_total_db(kept_budget(sheet)),
                        rule + 23.0, theme->second);
    snprintf(text, sizeof text, "%.0f %% of full", 100.0 * pow(10.0, 0.1 * total));
    draw_number(pen, "total", "share", text, frame->right, 100.0, rule + 39.0, EV_FONT_NOTE,
                theme->second);
}

static ev_rect row_rect(const ledger_frame *frame, int index)
{
    return (ev_rect){frame->left - 10.0, frame->top + (index - 0.5) * frame->pitch + 0.5,
                     frame->right - frame->left + 20.0, frame->pitch - 1.0};
}

void ev_draw_ledger(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, ev_boxes *boxes)
{
    ev_pen pen = ev_pen_begin(cairo, sheet->dark, boxes, "ledger", page->ledger);
    ev_pen_ground(&pen);
    ledger_frame frame = make_frame(page, sheet);
    ev_ledger_row rows[ROW_COUNT], kept[ROW_COUNT];
    bool pointed[ROW_COUNT], has_kept = kept_budget(sheet) != NULL;
    ev_ledger_list(sheet->antenna, &sheet->budget->feeds[sheet->feed], sheet->feed, rows);
    if (has_kept)
        ev_ledger_list(sheet->antenna, kept_budget(sheet), sheet->feed, kept);
    draw_head(&pen, sheet, &frame);
    draw_grid(&pen, &frame);
    for (int i = 0; i < ROW_COUNT; ++i) {
        char name[80];
        snprintf(name, sizeof name, "ledger.%s", rows[i].id);
        pointed[i] = ev_pointed(sheet, name);
        ev_boxes_add(boxes, EV_BOX_ROW, name, row_rect(&frame, i));
        if (pointed[i])
            ev_pen_fill(&pen, row_rect(&frame, i), 3.0, pen.theme->hand, 1.0);
    }
    draw_stair(&pen, &frame, rows, has_kept ? kept : NULL);
    for (int i = 0; i < ROW_COUNT; ++i)
        draw_row(&pen, &frame, &rows[i], has_kept ? &kept[i] : NULL, i, pointed[i]);
    double rule = frame.top + (ROW_COUNT - 0.5) * frame.pitch + 7.0;
    ev_pen_line(&pen, frame.left, rule, frame.right, rule, pen.theme->ink, 1.2, 1.0);
    draw_gain(&pen, sheet, &frame, rule);
    ev_pen_end(&pen);
}
