/* Dimension lines, the scale bar, lines that give way to words. Called by the section and the
 * Detail. */
#include "draw/stage.h"

#include <math.h>
#include <string.h>

static const double tip = 6.5;

/* Two halves of a line around its text, or one line with the text beside it. */
void ev_dimension_level(ev_pen *pen, const char *name, const char *label, double x0, double x1,
                        double y)
{
    ev_colour colour = pen->theme->second;
    double width = ev_text_width(label, EV_FONT_NOTE), middle = 0.5 * (x0 + x1);
    bool inside = x1 - x0 > width + 36.0;
    double gap = inside ? 0.5 * width + 6.0 : 0.0;
    ev_pen_line(pen, x0, y, middle - gap, y, colour, EV_LINE_DIMENSION, 1.0);
    ev_pen_line(pen, middle + gap, y, x1, y, colour, EV_LINE_DIMENSION, 1.0);
    ev_pen_arrow(pen, x0, y, -1.0, 0.0, tip, colour, EV_LINE_DIMENSION);
    ev_pen_arrow(pen, x1, y, 1.0, 0.0, tip, colour, EV_LINE_DIMENSION);
    double x = inside ? middle - 0.5 * width : x1 + 8.0;
    ev_rect region = pen->region;
    if (x < region.x || x + width > region.x + region.width || y < region.y + 12.0 ||
        y > region.y + region.height - 8.0)
        return;
    ev_text(pen, (ev_words){.name = name,
                            .string = label,
                            .font = EV_FONT_NOTE,
                            .colour = colour,
                            .x = x,
                            .width = width + 1.0,
                            .baseline = y + 4.0,
                            .halo = true});
}

void ev_dimension_upright(ev_pen *pen, const char *name, const char *label, double x, double y0,
                          double y1, double avoid)
{
    ev_colour colour = pen->theme->second;
    double width = ev_text_width(label, EV_FONT_NOTE), middle = 0.5 * (y0 + y1);
    ev_rect region = pen->region;
    if (fabs(middle - avoid) < 0.5 * width + 10.0)
        middle = avoid - 0.5 * width - 24.0;
    /* Zoomed in, the text stays in sight. */
    middle = fmin(fmax(middle, region.y + 0.5 * width + 40.0),
                  region.y + region.height - 0.5 * width - 40.0);
    double gap = 0.5 * width + 6.0;
    bool inside = x > region.x + 14.0 && x < region.x + region.width && y0 < middle - gap &&
                  y1 > middle + gap;
    if (!inside)
        gap = 0.0;
    ev_pen_line(pen, x, y0, x, middle - gap, colour, EV_LINE_DIMENSION, 1.0);
    ev_pen_line(pen, x, middle + gap, x, y1, colour, EV_LINE_DIMENSION, 1.0);
    ev_pen_arrow(pen, x, y0, 0.0, -1.0, tip, colour, EV_LINE_DIMENSION);
    ev_pen_arrow(pen, x, y1, 0.0, 1.0, tip, colour, EV_LINE_DIMENSION);
    if (inside)
        ev_text(pen, (ev_words){.name = name,
                                .string = label,
                                .font = EV_FONT_NOTE,
                                .colour = colour,
                                .x = x + 4.0,
                                .width = width + 2.0,
                                .baseline = middle,
                                .upright = true});
}

/* Three alternating pieces and the length of all; about a hundred pixels on a small Stage. */
void ev_scale_bar(ev_pen *pen, double x, double y, double scale)
{
    double target = 42.0 * fmax(1.0, pen->region.height / 542.0);
    double piece = ev_step_below(target / scale), width = 3.0 * piece * scale;
    ev_pen_fill(pen, (ev_rect){x, y - 2.5, width, 5.0}, 0.0, pen->theme->ink, 1.0);
    ev_pen_fill(pen, (ev_rect){x + width / 3.0, y - 1.3, width / 3.0, 2.6}, 0.0, pen->theme->ground,
                1.0);
    char label[64];
    ev_format_length(label, sizeof label, 3.0 * piece);
    ev_text(pen, (ev_words){.name = "text.stage.scale",
                            .string = label,
                            .font = EV_FONT_NOTE,
                            .colour = pen->theme->second,
                            .x = x + width + 8.0,
                            .width = 90.0,
                            .baseline = y + 4.0,
                            .halo = true});
}

void ev_line_around_text(ev_pen *pen, const double from[2], const double to[2], ev_colour colour,
                         double width, double opacity)
{
    enum { PIECES = 400 };
    bool free_piece[PIECES];
    memset(free_piece, 1, sizeof free_piece);
    for (int i = 0; pen->boxes && i < pen->boxes->count; ++i) {
        const ev_box *box = &pen->boxes->items[i];
        for (int k = 0; box->kind == EV_BOX_TEXT && k < PIECES; ++k) {
            double share = (k + 0.5) / PIECES;
            double x = from[0] + share * (to[0] - from[0]) - box->rect.x;
            double y = from[1] + share * (to[1] - from[1]) - box->rect.y;
            if (x > -5.0 && x < box->rect.width + 5.0 && y > -2.0 && y < box->rect.height + 2.0)
                free_piece[k] = false;
        }
    }
    for (int k = 0, start = 0; k <= PIECES; ++k) {
        if (k < PIECES && free_piece[k])
            continue;
        double a = (double)start / PIECES, b = (double)k / PIECES;
        if (k > start)
            ev_pen_line(pen, from[0] + a * (to[0] - from[0]), from[1] + a * (to[1] - from[1]),
                        from[0] + b * (to[0] - from[0]), from[1] + b * (to[1] - from[1]), colour,
                        width, opacity);
        start = k + 1;
    }
}
