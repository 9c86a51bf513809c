/* The Cut plate. Above: the path error along the plane of symmetry, from the bottom of the aperture
 * to its top. Below: what the gain loses as the part in hand moves along one of its axes, with the
 * lines of 0.1, 0.5 and 1 dB, which are the tolerance, and the place of the part. */
#include "draw/plate.h"
#include "draw/stage.h"

#include <math.h>
#include <stdio.h>

typedef struct cut_plots {
    ev_rect path, loss;
} cut_plots;

static cut_plots plots_of(const ev_page *page)
{
    ev_rect place = ev_plate_place(page, EV_PLATE_CUT);
    double top = place.y + ev_plate_head(page) + 5.0, bottom = place.y + place.height - 30.0;
    double gap = 17.0, share = 0.44, left = place.x + 68.0;
    double width = place.x + place.width - 24.0 - left, room = bottom - top - gap;
    return (cut_plots){.path = {left, top, width, share * room},
                       .loss = {left, top + share * room + gap, width, (1.0 - share) * room}};
}

/* The curve of the part that is shown; NULL while it is of another. */
static const ev_gain_curve *usable_curve(const ev_sheet *sheet)
{
    const ev_gain_curve *curve = sheet->gain_curve;
    bool usable = curve && curve->part == sheet->part &&
                  curve->place[EV_GAIN_CURVE_SAMPLES - 1] > curve->place[0];
    return usable ? curve : NULL;
}

static double place_now(const ev_sheet *sheet, const ev_gain_curve *curve)
{
    return ev_part_place(sheet->design, sheet->antenna, curve->part, sheet->feed, curve->axis);
}

/* Straight between samples; NaN beyond them. */
static double loss_at(const ev_gain_curve *curve, double place)
{
    for (int i = 1; i < EV_GAIN_CURVE_SAMPLES; ++i)
        if (place >= curve->place[i - 1] && place <= curve->place[i]) {
            double share = (place - curve->place[i - 1]) / (curve->place[i] - curve->place[i - 1]);
            return curve->loss_db[i - 1] + share * (curve->loss_db[i] - curve->loss_db[i - 1]);
        }
    return NAN;
}

double ev_cut_range(const ev_sheet *sheet)
{
    static const double ranges[] = {1.3, 2.6, 5.2, 10.4, 21.0, 42.0};
    const ev_gain_curve *curve = usable_curve(sheet);
    double loss = curve ? loss_at(curve, place_now(sheet, curve)) : NAN;
    for (size_t i = 0; isfinite(loss) && i < sizeof ranges / sizeof ranges[0]; ++i)
        if (ranges[i] >= 1.12 * loss)
            return ranges[i];
    return ranges[0];
}

ev_plot_map ev_cut_plot(const ev_page *page, const ev_sheet *sheet)
{
    ev_rect plot = plots_of(page).loss;
    const ev_gain_curve *curve = usable_curve(sheet);
    double from = -sheet->antenna->wavelength, to = sheet->antenna->wavelength;
    if (curve) {
        from = curve->place[0];
        to = curve->place[EV_GAIN_CURVE_SAMPLES - 1];
    }
    double scale = plot.width / (to - from);
    double range = sheet->cut_range > 0.0 ? sheet->cut_range : ev_cut_range(sheet);
    return (ev_plot_map){.x0 = plot.x - scale * from,
                         .x_scale = scale,
                         .y0 = plot.y,
                         .y_scale = -plot.height / range};
}

static ev_plot_map path_plot(const ev_sheet *sheet, ev_rect plot)
{
    const ev_antenna *antenna = sheet->antenna;
    double range = sheet->aperture_range > 0.0 ? sheet->aperture_range : ev_aperture_range(sheet);
    double scale = 0.5 * plot.width / antenna->radius;
    return (ev_plot_map){.x0 = plot.x + 0.5 * plot.width - scale * antenna->offset,
                         .x_scale = scale,
                         .y0 = plot.y + 0.5 * plot.height,
                         .y_scale = -0.5 * plot.height / range};
}

static void draw_path_axes(ev_pen *pen, ev_rect plot, const ev_plot_map *map)
{
    double range = 0.5 * plot.height / -map->y_scale;
    for (int i = -1; i <= 1; ++i) {
        double y = map->y0 - 0.5 * i * plot.height;
        char name[32], text[48];
        ev_pen_line(pen, plot.x, y, plot.x + plot.width, y, pen->theme->rule, 1.0, 1.0);
        snprintf(name, sizeof name, "cut.error.%d", i);
        snprintf(text, sizeof text, "%s%g%s",
                 i > 0   ? "+"
                 : i < 0 ? "\u2212"
                         : "",
                 i ? 1e3 * range : 0.0, i ? " mm" : "");
        ev_axis_left(pen, name, text, plot.x - 6.0, y);
    }
    double baseline = plot.y + plot.height + 13.0;
    const struct {
        const char *name, *word;
        double x;
        ev_align align;
    } ends[] = {{"text.cut.bottom", "bottom", plot.x, EV_ALIGN_LEFT},
                {"text.cut.top", "top", plot.x + plot.width - 60.0, EV_ALIGN_RIGHT}};
    for (int i = 0; i < 2; ++i)
        ev_text(pen, (ev_words){.name = ends[i].name,
                                .string = ends[i].word,
                                .font = EV_FONT_SMALL,
                                .colour = pen->theme->second,
                                .align = ends[i].align,
                                .x = ends[i].x,
                                .width = 60.0,
                                .baseline = baseline});
}

/* A stretch on one side of zero, filled and stroked in its colour. */
static void finish_stretch(ev_pen *pen, double zero, double from, double to, ev_colour colour)
{
    cairo_path_t *line = cairo_copy_path(pen->cairo);
    cairo_line_to(pen->cairo, to, zero);
    cairo_line_to(pen->cairo, from, zero);
    cairo_close_path(pen->cairo);
    ev_pen_colour(pen, colour, EV_FRONT_FILL);
    cairo_fill(pen->cairo);
    cairo_append_path(pen->cairo, line);
    cairo_path_destroy(line);
    ev_pen_colour(pen, colour, 1.0);
    cairo_set_line_width(pen->cairo, EV_LINE_CURVE);
    cairo_stroke(pen->cairo);
}

static void draw_path(ev_pen *pen, const ev_sheet *sheet, const ev_plot_map *map, ev_rect plot)
{
    double before = NAN, before_x = 0.0, from = 0.0;
    ev_colour colour = pen->theme->ink, late = pen->theme->late, early = pen->theme->early;
    if (ev_is_even(sheet->budget->feeds[sheet->feed].path_error.peak_to_valley, sheet))
        late = early = colour;
    for (int i = 0; i <= sheet->front_count; ++i) {
        double error = i < sheet->front_count ? sheet->front[i] : NAN, x = before_x, y = map->y0;
        if (i < sheet->front_count)
            ev_plot_to_page(map, sheet->front_x[i], error, &x, &y);
        y = fmin(fmax(y, plot.y), plot.y + plot.height);
        bool crosses = isfinite(before) && isfinite(error) && (before > 0.0) != (error > 0.0);
        if (isfinite(before) && (crosses || !isfinite(error))) {
            double end = crosses ? before_x + before / (before - error) * (x - before_x) : before_x;
            if (crosses)
                cairo_line_to(pen->cairo, end, map->y0);
            finish_stretch(pen, map->y0, from, end, colour);
            if (crosses)
                cairo_move_to(pen->cairo, from = end, map->y0);
        } else if (isfinite(error) && !isfinite(before)) {
            cairo_move_to(pen->cairo, from = x, y);
        }
        if (isfinite(error)) {
            cairo_line_to(pen->cairo, x, y);
            colour = error > 0.0 ? late : early;
        }
        before = error;
        before_x = x;
    }
    cairo_new_path(pen->cairo);
}

static void draw_loss_lines(ev_pen *pen, ev_rect plot, const ev_plot_map *map)
{
    static const double lines[] = {0.1, 0.5, 1.0, 2.0, 5.0, 10.0, 20.0, 40.0};
    double above = plot.y - 20.0;
    ev_pen_line(pen, plot.x, plot.y, plot.x + plot.width, plot.y, pen->theme->rule, 1.0, 1.0);
    for (size_t i = 0; i < sizeof lines / sizeof lines[0]; ++i) {
        double y = map->y0 - map->y_scale * lines[i];
        if (y > plot.y + plot.height)
            break;
        ev_pen_line(pen, plot.x, y, plot.x + plot.width, y, pen->theme->rule, 1.0, 1.0);
        if (y - above < 14.0)
            continue;
        above = y;
        char name[32], digits[24], text[32];
        snprintf(name, sizeof name, "cut.loss.%g", lines[i]);
        ev_format_number(digits, sizeof digits, -lines[i], lines[i] < 1.0, false);
        snprintf(text, sizeof text, "%s dB", digits);
        ev_axis_left(pen, name, text, plot.x - 6.0, y);
    }
}

static void draw_places(ev_pen *pen, ev_rect plot, const ev_plot_map *map)
{
    double width = 1e3 * plot.width / map->x_scale, step = ev_step_below(width / 4.0);
    double bottom = plot.y + plot.height;
    int decimals = step < 0.0995 ? 2 : step < 0.995 ? 1 : 0;
    double first = ceil(1e3 * (plot.x - map->x0) / map->x_scale / step - 1e-6);
    for (int i = 0; i < 24; ++i) {
        double x = map->x0 + map->x_scale * 1e-3 * step * (first + i);
        if (x > plot.x + plot.width + 0.5)
            break;
        ev_pen_line(pen, x, bottom, x, bottom + 4.0, pen->theme->second, 1.0, 0.9);
        char name[32], text[48], digits[32];
        snprintf(name, sizeof name, "cut.place.%d", i);
        ev_format_number(digits, sizeof digits, step * (first + i), decimals, false);
        bool last = x + map->x_scale * 1e-3 * step > plot.x + plot.width + 0.5;
        snprintf(text, sizeof text, "%s%s", digits, last ? " mm" : "");
        ev_axis_below(pen, name, text, x, bottom + 16.0);
    }
}

static void draw_gain(ev_pen *pen, const ev_gain_curve *curve, ev_rect plot, const ev_plot_map *map)
{
    double lowest = -2.0 * plot.height / fabs(map->y_scale);
    cairo_save(pen->cairo);
    cairo_rectangle(pen->cairo, plot.x, plot.y - 3.0, plot.width, plot.height + 3.0);
    cairo_clip(pen->cairo);
    for (int i = 0; i < EV_GAIN_CURVE_SAMPLES; ++i) {
        double x, y;
        if (!isfinite(curve->loss_db[i]))
            continue;
        ev_plot_to_page(map, curve->place[i], fmax(-curve->loss_db[i], lowest), &x, &y);
        cairo_line_to(pen->cairo, x, y);
    }
    ev_pen_colour(pen, pen->theme->ink, 1.0);
    cairo_set_line_width(pen->cairo, EV_LINE_CURVE);
    cairo_set_line_join(pen->cairo, CAIRO_LINE_JOIN_ROUND);
    cairo_stroke(pen->cairo);
    cairo_restore(pen->cairo);
    if (map->x0 > plot.x && map->x0 < plot.x + plot.width)
        ev_pen_wedge(pen, map->x0, plot.y + plot.height - 1.0, 0.0, -1.0, 6.0, 4.0,
                     pen->theme->second);
}

/* Outside the hill beside the part; under it where there is no room. */
static void draw_part_words(ev_pen *pen, const char *text, ev_rect plot, double x, double y,
                            bool falls_right)
{
    double width = ev_text_width(text, EV_FONT_NOTE_STRONG) + 1.0, room = width + 9.0;
    bool under =
        y < plot.y + 15.0 || (falls_right ? x + room > plot.x + plot.width : x - room < plot.x);
    bool at_right = under != falls_right;
    double left = at_right ? x + 9.0 : x - room;
    ev_text(pen,
            (ev_words){.name = "text.cut.part",
                       .string = text,
                       .font = EV_FONT_NOTE_STRONG,
                       .colour = pen->theme->ink,
                       .x = fmin(fmax(left, plot.x), plot.x + plot.width - width),
                       .width = width,
                       .baseline = fmin(under ? y + 21.0 : y - 3.0, plot.y + plot.height - 5.0),
                       .halo = true});
}

static void draw_part(ev_pen *pen, const ev_sheet *sheet, const ev_gain_curve *curve, ev_rect plot,
                      const ev_plot_map *map)
{
    double place = place_now(sheet, curve), loss = loss_at(curve, place), x, y;
    if (!isfinite(loss))
        return;
    ev_plot_to_page(map, place, -loss, &x, &y);
    y = fmin(fmax(y, plot.y), plot.y + plot.height);
    ev_pen_line(pen, x, plot.y, x, plot.y + plot.height, pen->theme->second, EV_LINE_DIMENSION,
                0.7);
    char text[80], at[32], cost[32];
    ev_format_number(at, sizeof at, 1e3 * place, 1, false);
    ev_format_number(cost, sizeof cost, fabs(loss) < 100.0 ? -loss : -INFINITY, 2, false);
    snprintf(text, sizeof text, "%s mm: %s dB", at, cost);
    double step = 1e-3 * (curve->place[EV_GAIN_CURVE_SAMPLES - 1] - curve->place[0]);
    draw_part_words(pen, text, plot, x, y, !(loss_at(curve, place + step) < loss));
    ev_pen_circle(pen, x, y, 4.5, pen->theme->hand, 0.0, 1.0);
    ev_pen_circle(pen, x, y, 4.5, pen->theme->hand_text, 1.2, 1.0);
}

static void write_about(const ev_sheet *sheet, char *text, size_t size)
{
    static const char *const ways[EV_AXIS_COUNT] = {"out", "up", "left"};
    const ev_gain_curve *curve = usable_curve(sheet);
    ev_part_axis axis = curve ? curve->axis : sheet->detail_axis[0];
    snprintf(text, size, "path error; gain as the %s moves %s",
             sheet->part == EV_PART_SUB ? "subreflector" : "feed", ways[axis]);
}

void ev_draw_cut(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, ev_boxes *boxes)
{
    char about[96];
    const ev_gain_curve *curve = usable_curve(sheet);
    write_about(sheet, about, sizeof about);
    ev_pen pen =
        ev_plate_begin(cairo, page, sheet, EV_PLATE_CUT, about, sheet->cut_stale && curve, boxes);
    cut_plots plots = plots_of(page);
    ev_plot_map path = path_plot(sheet, plots.path), loss = ev_cut_plot(page, sheet);
    ev_boxes_add(boxes, EV_BOX_PLOT, "plate.cut.path", plots.path);
    ev_boxes_add(boxes, EV_BOX_PLOT, "plate.cut", plots.loss);
    draw_path_axes(&pen, plots.path, &path);
    draw_path(&pen, sheet, &path, plots.path);
    draw_loss_lines(&pen, plots.loss, &loss);
    if (curve) {
        draw_places(&pen, plots.loss, &loss);
        draw_gain(&pen, curve, plots.loss, &loss);
        draw_part(&pen, sheet, curve, plots.loss, &loss);
    } else {
        ev_plate_computing(&pen, "cut", plots.loss);
    }
    ev_pen_end(&pen);
}
