/* The words under the Detail: where the part sits along its own axes, what that costs, and what the
 * next millimetre away would. */
#include "draw/detail.h"

#include <math.h>
#include <stdio.h>

static const char *direction_word(ev_part_axis axis, double place)
{
    /* Left and right are as one faces the dish from the front: +y is to the left. */
    static const char *const words[EV_AXIS_COUNT][2] = {
        {"in", "out"}, {"down", "up"}, {"right", "left"}};
    return words[axis][place >= 0.0];
}

static void write_caption(const ev_sheet *sheet, const ev_detail *detail, char *text, size_t size,
                          int bold[2][2])
{
    int decimals = detail->extent < 0.004 ? 2 : 1;
    size_t at = 0;
    for (int i = 0; i < 2; ++i) {
        char digits[64];
        ev_format_number(digits, sizeof digits, 1e3 * fabs(detail->place[i]), decimals, false);
        at += (size_t)snprintf(text + at, size - at, "%s%s ", i ? "  " : "",
                               direction_word(sheet->detail_axis[i], detail->place[i]));
        bold[i][0] = (int)at;
        at += (size_t)snprintf(text + at, size - at, "%s", digits);
        bold[i][1] = (int)at;
    }
    snprintf(text + at, size - at, " mm");
}

/* What it costs here, and what the next millimetre away costs. */
static void write_cost(const ev_sheet *sheet, const ev_detail *detail, char *text, size_t size)
{
    const double *p = detail->place;
    double here = ev_loss_map_at(detail->loss, p[0], p[1]);
    double step = detail->extent >= 0.006 ? 1e-3 : 1e-4;
    while (step < detail->extent / 40.0)
        step *= 10.0;
    double right = ev_loss_map_at(detail->loss, p[0] + copysign(step, p[0]), p[1]);
    double up = ev_loss_map_at(detail->loss, p[0], p[1] + copysign(step, p[1]));
    char loss[32], next[2][32], unit[32];
    ev_format_number(loss, sizeof loss, -here, 2, false);
    ev_format_number(next[0], sizeof next[0], here - right, 2, true);
    ev_format_number(next[1], sizeof next[1], here - up, 2, true);
    snprintf(unit, sizeof unit, step < 1.1e-3 && step > 0.9e-3 ? "mm" : "%g mm", 1e3 * step);
    snprintf(text, size, "%s dB; next %s %s %s, %s %s", loss, unit,
             direction_word(sheet->detail_axis[0], p[0]), next[0],
             direction_word(sheet->detail_axis[1], p[1]), next[1]);
}

/* Under the circle; a line wider than the circle ends at the Stage's margin. */
static void draw_line_under(ev_pen *pen, const ev_detail *detail, ev_words words)
{
    double end = pen->region.x + pen->region.width - 24.0;
    double width = ev_text_extent(&words).width + 1.0;
    words.width = width;
    words.x = fmin(detail->x - 0.5 * width, end - width);
    ev_text(pen, words);
}

void ev_detail_caption(ev_pen *pen, const ev_sheet *sheet, const ev_detail *detail)
{
    char text[160];
    int bold[2][2];
    double bottom = detail->y + detail->radius;
    write_caption(sheet, detail, text, sizeof text, bold);
    draw_line_under(pen, detail,
                    (ev_words){.name = "text.detail.place",
                               .string = text,
                               .font = EV_FONT_BODY,
                               .colour = pen->theme->ink,
                               .width = 400.0,
                               .baseline = bottom + 20.0,
                               .halo = true,
                               .bold = (const int(*)[2])bold,
                               .bold_count = 2});
    if (!detail->loss)
        return;
    write_cost(sheet, detail, text, sizeof text);
    draw_line_under(pen, detail,
                    (ev_words){.name = "text.detail.cost",
                               .string = text,
                               .font = EV_FONT_NOTE,
                               .colour = pen->theme->second,
                               .width = 400.0,
                               .baseline = bottom + 38.0,
                               .halo = true});
}
