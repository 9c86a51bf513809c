/* The Beam plate: gain against the angle for every feed, in dB below the peak of the selected one,
 * with the limit that the side lobes have to keep. Called by the page and the window; the curves
 * come computed. */
#include "draw/plate.h"

#include <math.h>
#include <stdio.h>

static const double limit_step = 11.0, headroom = 7.0; /* px */

static const ev_beam_curve *selected_curve(const ev_sheet *sheet)
{
    return sheet->feed >= 0 && sheet->feed < EV_FEED_CAPACITY ? sheet->beams[sheet->feed] : NULL;
}

static double span_of(const ev_sheet *sheet)
{
    const ev_beam_curve *curve = selected_curve(sheet);
    bool usable = curve && curve->span > 0.0 && isfinite(curve->span);
    return usable ? curve->span : ev_beam_curve_span(sheet->antenna, sheet->feed);
}

/* Limit below the peak, dB, at an angle in the plane; NaN where nothing is asked. */
static double limit_level(const ev_sheet *sheet, const ev_beam_curve *curve, double angle)
{
    return ev_limit_at(sheet->limit, angle - curve->peak_angle) - curve->peak_dbi;
}

static ev_rect plot_of(const ev_page *page)
{
    ev_rect place = ev_plate_place(page, EV_PLATE_BEAM);
    double head = ev_plate_head(page) + 3.0;
    return (ev_rect){place.x + 48.0, place.y + head, place.width - 72.0,
                     place.height - head - 30.0};
}

/* As deep as there is room to read it; and as the limit asks somewhere in sight, with room below
 * for what keeps it. */
double ev_beam_range(const ev_page *page, const ev_sheet *sheet)
{
    static const double ranges[] = {36.0, 46.0, 56.0, 66.0, 86.0};
    enum { SAMPLES = 64, RANGE_COUNT = sizeof ranges / sizeof ranges[0] };
    const ev_beam_curve *curve = selected_curve(sheet);
    double highest = -INFINITY, height = plot_of(page).height;
    for (int i = 0; curve && sheet->limit && i <= SAMPLES; ++i)
        highest = fmax(highest, limit_level(sheet, curve, curve->span * (2.0 * i / SAMPLES - 1.0)));
    double needed = isfinite(highest) ? 14.0 - highest : 0.0;
    int i = height < 200.0 ? 0 : height < 320.0 ? 1 : 2;
    while (i + 1 < RANGE_COUNT && ranges[i] < needed)
        ++i;
    return ranges[i];
}

ev_plot_map ev_beam_plot(const ev_page *page, const ev_sheet *sheet)
{
    ev_rect plot = plot_of(page);
    double range = sheet->beam_range > 0.0 ? sheet->beam_range : ev_beam_range(page, sheet);
    return (ev_plot_map){.x0 = plot.x + 0.5 * plot.width,
                         .x_scale = 0.5 * plot.width / span_of(sheet),
                         .y0 = plot.y,
                         .y_scale = -plot.height / range};
}

static void draw_levels(ev_pen *pen, ev_rect plot, const ev_plot_map *map)
{
    double range = -plot.height / map->y_scale;
    double step = range / plot.height * 10.0 > 6.5 ? 20.0 : 10.0;
    for (double db = 0.0; db <= range; db += step) {
        double y = map->y0 - map->y_scale * db;
        char name[32], text[24];
        ev_pen_line(pen, plot.x, y, plot.x + plot.width, y, pen->theme->rule, 1.0, 1.0);
        snprintf(name, sizeof name, "beam.level.%g", db);
        ev_format_number(text, sizeof text, -db, 0, false);
        ev_axis_left(pen, name, text, plot.x - 6.0, y);
    }
}

static void draw_angles(ev_pen *pen, ev_rect plot, const ev_plot_map *map)
{
    double span = 0.5 * plot.width / map->x_scale * 180.0 / EV_PI;
    double step = ev_step_below(span / 2.0), bottom = plot.y + plot.height;
    int decimals = step < 0.0995 ? 2 : step < 0.995 ? 1 : 0, count = (int)(span / step + 1e-6);
    for (int i = -2 * count - 1; i <= 2 * count + 1; ++i) {
        double x = map->x0 + map->x_scale * 0.5 * i * step * EV_PI / 180.0;
        if (x < plot.x - 0.5 || x > plot.x + plot.width + 0.5)
            continue;
        ev_pen_line(pen, x, bottom, x, bottom + (i % 2 == 0 ? 4.0 : 2.5), pen->theme->second, 1.0,
                    0.9);
        if (i % 2 != 0)
            continue;
        char name[32], digits[24], text[32];
        snprintf(name, sizeof name, "beam.angle.%d", i / 2);
        ev_format_number(digits, sizeof digits, 0.5 * i * step, decimals, false);
        snprintf(text, sizeof text, "%s\u00b0", digits);
        ev_axis_below(pen, name, text, x, bottom + 16.0);
    }
}

/* The wanted direction in the plane of the curve. */
static void draw_wanted(ev_pen *pen, const ev_sheet *sheet, ev_rect plot, const ev_plot_map *map)
{
    static const double dashes[] = {9.0, 3.0, 1.5, 3.0};
    const ev_beam_curve *curve = selected_curve(sheet);
    double phi = curve ? curve->phi : 0.0;
    ev_vec3 wanted = sheet->antenna->feeds[sheet->feed].wanted;
    double angle = atan2(wanted.x * cos(phi) + wanted.y * sin(phi), wanted.z);
    double x = map->x0 + map->x_scale * angle;
    cairo_set_dash(pen->cairo, dashes, 4, 0.0);
    ev_pen_line(pen, x, plot.y - headroom, x, plot.y + plot.height, pen->theme->second,
                EV_LINE_DIMENSION, 1.0);
    cairo_set_dash(pen->cairo, NULL, 0, 0.0);
}

/* What lies far from the plot is left out, or held at its edge: pixels beyond count for nothing,
 * and dashes out there cost. */
static void trace_levels(ev_pen *pen, const ev_plot_map *map, const ev_beam_curve *curve,
                         const double *levels, double peak)
{
    ev_rect region = pen->region;
    double most = 1.5 * region.height / fabs(map->y_scale);
    bool is_down = false;
    for (int i = 0; i < EV_BEAM_CURVE_SAMPLES; ++i) {
        double level = levels[i] - peak, x, y;
        ev_plot_to_page(map, curve->angle[i], fmin(fmax(level, -most), most), &x, &y);
        if (isnan(level) || !(fabs(x - region.x) < 2.0 * region.width)) {
            is_down = false;
            continue;
        }
        if (is_down)
            cairo_line_to(pen->cairo, x, y);
        else
            cairo_move_to(pen->cairo, x, y);
        is_down = true;
    }
    cairo_stroke(pen->cairo);
}

typedef struct beam_stroke {
    ev_colour colour;
    double width, opacity;
    bool dashed;
} beam_stroke;

static void draw_curve(ev_pen *pen, const ev_plot_map *map, const ev_beam_curve *curve,
                       const double *levels, double peak, beam_stroke stroke)
{
    static const double dashes[] = {3.5, 2.5};
    cairo_set_dash(pen->cairo, dashes, stroke.dashed ? 2 : 0, 0.0);
    cairo_set_line_join(pen->cairo, CAIRO_LINE_JOIN_ROUND);
    cairo_set_line_width(pen->cairo, stroke.width);
    ev_pen_colour(pen, stroke.colour, stroke.opacity);
    trace_levels(pen, map, curve, levels, peak);
    cairo_set_line_join(pen->cairo, CAIRO_LINE_JOIN_MITER);
    cairo_set_dash(pen->cairo, NULL, 0, 0.0);
}

/* What is drawn last lies on top: others, cross-polar, kept, selected. */
static void draw_curves(ev_pen *pen, const ev_sheet *sheet, const ev_plot_map *map)
{
    const ev_theme *theme = pen->theme;
    const ev_beam_curve *curve = selected_curve(sheet), *kept = sheet->kept_beam;
    double peak = curve->peak_dbi;
    for (int f = 0; f < sheet->antenna->feed_count; ++f)
        if (f != sheet->feed && sheet->beams[f])
            draw_curve(pen, map, sheet->beams[f], sheet->beams[f]->co_dbi, peak,
                       (beam_stroke){theme->ink, 0.9, 0.75, false});
    draw_curve(pen, map, curve, curve->cross_dbi, peak,
               (beam_stroke){theme->third, 0.9, 1.0, false});
    if (kept)
        draw_curve(pen, map, kept, kept->co_dbi, peak,
                   (beam_stroke){theme->ink, EV_LINE_KEPT, 0.8, true});
    draw_curve(pen, map, curve, curve->co_dbi, peak,
               (beam_stroke){theme->ink, EV_LINE_CURVE, 1.0, false});
}

/* One pixel after the other; hatching stands on it a step apart, on the side that is not allowed.
 */
static void draw_limit_line(ev_pen *pen, const ev_sheet *sheet, ev_rect plot,
                            const ev_plot_map *map)
{
    const ev_beam_curve *curve = selected_curve(sheet);
    double before = NAN, run = 0.5 * limit_step;
    for (double along = 0.0; along <= plot.width; along += 1.0) {
        double x = plot.x + along;
        double level = limit_level(sheet, curve, (x - map->x0) / map->x_scale);
        double y = map->y0 + map->y_scale * level;
        if (!isfinite(y) || y > plot.y + 2.0 * plot.height)
            y = NAN;
        if (!isnan(before) && !isnan(y)) {
            double rise = y - before, length = hypot(1.0, rise);
            cairo_move_to(pen->cairo, x - 1.0, before);
            cairo_line_to(pen->cairo, x, y);
            run += length;
            /* Off the line by 60 degrees, leaning outward from the beam. */
            double lean = x > map->x0 ? 0.5 : -0.5, across = 7.0 / length;
            if (run >= limit_step) {
                cairo_rel_line_to(pen->cairo, across * (lean + 0.87 * rise),
                                  across * (lean * rise - 0.87));
                run = 0.0;
            }
        }
        before = y;
    }
    ev_pen_colour(pen, pen->theme->past_main, 0.95);
    cairo_set_line_width(pen->cairo, 1.1);
    cairo_stroke(pen->cairo);
}

/* Above the limit's outer end at the right. */
static void draw_limit_name(ev_pen *pen, const ev_sheet *sheet, ev_rect plot,
                            const ev_plot_map *map)
{
    static const char *const words[] = {"limit S.465", "limit S.580", "limit"};
    const char *string = words[sheet->limit->kind];
    double width = ev_text_width(string, EV_FONT_NOTE) + 1.0, right = plot.x + plot.width;
    double highest = INFINITY;
    for (double x = right - width; x <= right; x += 2.0) {
        double level = limit_level(sheet, selected_curve(sheet), (x - map->x0) / map->x_scale);
        if (!isnan(level))
            highest = fmin(highest, map->y0 + map->y_scale * level);
    }
    if (!isfinite(highest) || highest > plot.y + plot.height + 20.0)
        return;
    ev_text(pen, (ev_words){.name = "text.beam.limit",
                            .string = string,
                            .font = EV_FONT_NOTE,
                            .colour = pen->theme->past_main,
                            .align = EV_ALIGN_RIGHT,
                            .x = right - width,
                            .width = width,
                            .baseline = fmax(highest - 12.0, plot.y + 14.0),
                            .halo = true});
}

/* Whether no other beam peaks between two places of the page. */
static bool is_free(const ev_sheet *sheet, const ev_plot_map *map, int feed, double from, double to)
{
    for (int f = 0; f < sheet->antenna->feed_count; ++f) {
        const ev_beam_curve *other = sheet->beams[f];
        double x = other ? map->x0 + map->x_scale * other->peak_angle : NAN;
        if (f != feed && x > from && x < to)
            return false;
    }
    return true;
}

/* Whose beam is whose, beside its peak, on the side where no other beam stands. */
static void draw_feed_name(ev_pen *pen, const ev_sheet *sheet, ev_rect plot, const ev_plot_map *map,
                           int feed)
{
    const char *string = sheet->design->feeds[feed].name;
    ev_font font = feed == sheet->feed ? EV_FONT_NOTE_STRONG : EV_FONT_NOTE;
    double width = fmin(ev_text_width(string, font) + 1.0, 90.0), reach = 6.0;
    double peak = map->x0 + map->x_scale * sheet->beams[feed]->peak_angle;
    double right = peak + reach + width, left = peak - reach - width;
    bool at_right = right < plot.x + plot.width && is_free(sheet, map, feed, peak - 1.0, right);
    bool at_left = left > plot.x && is_free(sheet, map, feed, left, peak + 1.0);
    if (!(peak > plot.x && peak < plot.x + plot.width) || (!at_right && !at_left))
        return;
    char name[32];
    snprintf(name, sizeof name, "text.beam.feed.%d", feed);
    ev_text(pen, (ev_words){.name = name,
                            .string = string,
                            .font = font,
                            .colour = pen->theme->second,
                            .x = at_right ? peak + reach : left,
                            .width = width,
                            .baseline = plot.y + 3.0,
                            .halo = true});
}

static void draw_feed_names(ev_pen *pen, const ev_sheet *sheet, ev_rect plot,
                            const ev_plot_map *map)
{
    int count = sheet->antenna->feed_count;
    for (int f = 0; count > 1 && f < count; ++f)
        if (sheet->beams[f])
            draw_feed_name(pen, sheet, plot, map, f);
}

static void draw_peak(ev_pen *pen, const ev_sheet *sheet, ev_rect plot, const ev_plot_map *map)
{
    double x = map->x0 + map->x_scale * selected_curve(sheet)->peak_angle;
    if (!(x >= plot.x && x <= plot.x + plot.width))
        return;
    ev_pen_wedge(pen, x, plot.y - 1.0, 0.0, 1.0, 6.0, 3.6,
                 sheet->grabbed ? pen->theme->hand : pen->theme->ink);
}

static void write_about(const ev_sheet *sheet, char *text, size_t size)
{
    const ev_beam_curve *curve = selected_curve(sheet);
    double turn = curve ? curve->phi * 180.0 / EV_PI : 0.0;
    int at;
    if (fabs(turn) < 0.05)
        at = snprintf(text, size, "down to up");
    else if (fabs(turn - 90.0) < 0.05)
        at = snprintf(text, size, "right to left");
    else
        at = snprintf(text, size, "%.0f\u00b0 from upright", turn);
    snprintf(text + at, size - (size_t)at, "; thin: cross-polar%s",
             sheet->kept_beam ? "; dashed: kept" : "");
}

void ev_draw_beam(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, ev_boxes *boxes)
{
    char about[96];
    const ev_beam_curve *curve = selected_curve(sheet);
    write_about(sheet, about, sizeof about);
    ev_pen pen =
        ev_plate_begin(cairo, page, sheet, EV_PLATE_BEAM, about, sheet->beam_stale && curve, boxes);
    ev_rect plot = plot_of(page);
    ev_plot_map map = ev_beam_plot(page, sheet);
    ev_boxes_add(boxes, EV_BOX_PLOT, "plate.beam", plot);
    draw_levels(&pen, plot, &map);
    draw_angles(&pen, plot, &map);
    bool lit = curve && isfinite(curve->peak_dbi);
    cairo_save(cairo);
    cairo_rectangle(cairo, plot.x, plot.y - headroom, plot.width, plot.height + headroom);
    cairo_clip(cairo);
    draw_wanted(&pen, sheet, plot, &map);
    if (lit)
        draw_curves(&pen, sheet, &map);
    if (lit && sheet->limit)
        draw_limit_line(&pen, sheet, plot, &map);
    cairo_restore(cairo);
    if (lit) {
        draw_peak(&pen, sheet, plot, &map);
        draw_feed_names(&pen, sheet, plot, &map);
        if (sheet->limit)
            draw_limit_name(&pen, sheet, plot, &map);
    } else if (!curve) {
        ev_plate_computing(&pen, "beam", plot);
    }
    ev_pen_end(&pen);
}
