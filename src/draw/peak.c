/* The direction of the beam on the section: square to the mean of the Front, and so exaggerated as
 * the Front is. Drawn last on the Stage's right, where words may stand already. */
#include "draw/stage.h"

#include <math.h>
#include <stdio.h>

static const double ray_length = 84.0, least_share = 0.03;

bool ev_peak_is_off(const ev_sheet *sheet, double off[2])
{
    const ev_feed_budget *budget = &sheet->budget->feeds[sheet->feed];
    off[0] = atan2(budget->peak.x, budget->peak.z) - atan2(budget->wanted.x, budget->wanted.z);
    off[1] = atan2(budget->peak.y, budget->peak.z) - atan2(budget->wanted.y, budget->wanted.z);
    double beam = sheet->antenna->wavelength / (2.0 * sheet->antenna->radius);
    return hypot(off[0], off[1]) > least_share * beam;
}

/* Two figures of the larger part: 0.25, 3.1. */
static int add_angle(char *text, size_t size, double angle, double largest, const char *word)
{
    double degrees = fabs(angle) * 180.0 / EV_PI;
    int decimals = (int)fmin(fmax(1.0 - floor(log10(largest * 180.0 / EV_PI)), 0.0), 6.0);
    return snprintf(text, size, " %.*f\u00b0 %s", decimals, degrees, word);
}

static void write_words(char *text, size_t size, const double off[2])
{
    double largest = fmax(fabs(off[0]), fabs(off[1]));
    int at = snprintf(text, size, "beam");
    if (fabs(off[0]) > 0.1 * largest)
        at +=
            add_angle(text + at, size - (size_t)at, off[0], largest, off[0] > 0.0 ? "up" : "down");
    if (fabs(off[1]) > 0.1 * largest)
        add_angle(text + at, size - (size_t)at, off[1], largest, off[1] > 0.0 ? "left" : "right");
}

static bool is_clear(const ev_pen *pen, ev_rect rect)
{
    ev_rect region = pen->region;
    if (rect.x < region.x || rect.y < region.y || rect.x + rect.width > region.x + region.width ||
        rect.y + rect.height > region.y + region.height)
        return false;
    for (int i = 0; pen->boxes && i < pen->boxes->count; ++i) {
        const ev_box *box = &pen->boxes->items[i];
        if (box->kind == EV_BOX_TEXT && rect.x < box->rect.x + box->rect.width &&
            box->rect.x < rect.x + rect.width && rect.y < box->rect.y + box->rect.height &&
            box->rect.y < rect.y + rect.height)
            return false;
    }
    return true;
}

/* At the end of the ray, or as near above or below it as other words allow. */
static void draw_words(ev_pen *pen, const char *text, double x, double y)
{
    double width = ev_text_width(text, EV_FONT_NOTE) + 1.0;
    for (int i = 0; i < 24; ++i) {
        double aside = (i + 1) / 2 * 6.0 * (i % 2 ? 1.0 : -1.0);
        ev_rect rect = {x, y + aside - 9.0, width, 17.0};
        if (!is_clear(pen, rect))
            continue;
        ev_text(pen, (ev_words){.name = "text.stage.peak",
                                .string = text,
                                .font = EV_FONT_NOTE,
                                .colour = pen->theme->ink,
                                .x = x,
                                .width = width,
                                .baseline = y + aside + 4.0,
                                .halo = true});
        return;
    }
}

void ev_peak_draw(ev_pen *pen, const ev_section *section, const ev_sheet *sheet, double strength)
{
    double off[2], x, y, whole = pen->strength;
    if (!ev_peak_is_off(sheet, off))
        return;
    ev_plot_to_page(&section->map, section->front_z, sheet->antenna->offset, &x, &y);
    double slope = sheet->front_exaggeration * tan(off[0]);
    if (!isfinite(slope))
        return;
    slope = fmin(fmax(slope, -1.2), 1.2);
    double length = hypot(1.0, slope), dx = 1.0 / length, dy = -slope / length;
    const double from[2] = {x, y};
    const double to[2] = {x + ray_length * dx, y + ray_length * dy};
    char text[96];
    write_words(text, sizeof text, off);
    pen->strength *= strength;
    bool in_hand = sheet->grabbed;
    ev_line_around_text(pen, from, to, pen->theme->ink, in_hand ? 3.6 : 1.3, 1.0);
    if (in_hand)
        ev_line_around_text(pen, from, to, pen->theme->hand, 2.0, 1.0);
    ev_pen_wedge(pen, to[0] + 4.0 * dx, to[1] + 4.0 * dy, dx, dy, 9.0, 3.4, pen->theme->ink);
    draw_words(pen, text, to[0] + 10.0, to[1]);
    pen->strength = whole;
}
