/* The Aperture plate: the map, its legend in millimetres and wavelengths, and what it comes to in
 * figures. */
#include "draw/aperture_map.h"
#include "draw/stage.h"

#include <math.h>
#include <stdio.h>

enum { FIGURE_CAPACITY = 8 };

static const double legend_room = 96.0, figure_pitch = 22.0;

static ev_aperture_map make_map(const ev_sheet *sheet, ev_rect place, double figures)
{
    double wide = place.width - 22.0 - 24.0 - legend_room;
    double high = place.height - 36.0 - 20.0 - figures;
    double diameter = fmax(fmin(wide, high), 60.0);
    ev_aperture_map map = {.radius = 0.5 * diameter};
    map.x = place.x + 22.0 + map.radius;
    map.y = place.y + 36.0 + map.radius;
    map.scale = map.radius / sheet->antenna->radius;
    map.range = sheet->aperture_range > 0.0 ? sheet->aperture_range : ev_aperture_range(sheet);
    return map;
}

static void draw_legend_text(ev_pen *pen, const char *name, const char *string, double x,
                             double baseline)
{
    char box[64];
    snprintf(box, sizeof box, "text.aperture.%s", name);
    ev_text(pen, (ev_words){.name = box,
                            .string = string,
                            .font = EV_FONT_NOTE,
                            .colour = pen->theme->second,
                            .x = x,
                            .width = pen->region.x + pen->region.width - 20.0 - x,
                            .baseline = baseline,
                            .least = EV_LEAST_TYPE});
}

static void draw_legend_end(ev_pen *pen, const ev_sheet *sheet, const ev_aperture_map *map,
                            double x, double sign)
{
    char text[64], digits[32];
    double top = map->y - map->radius + 4.0, bottom = map->y + map->radius + 4.5;
    snprintf(digits, sizeof digits, "%g", 1e3 * map->range);
    snprintf(text, sizeof text, "%s%s mm", sign > 0.0 ? "+" : "\u2212", digits);
    draw_legend_text(pen, sign > 0.0 ? "late" : "early", text, x,
                     sign > 0.0 ? top + 5.0 : bottom - 5.0);
    ev_format_number(digits, sizeof digits, sign * map->range / sheet->antenna->wavelength, 2,
                     true);
    snprintf(text, sizeof text, "%s \u03bb", digits);
    draw_legend_text(pen, sign > 0.0 ? "late.waves" : "early.waves", text, x,
                     sign > 0.0 ? top + 20.0 : bottom - 20.0);
    draw_legend_text(pen, sign > 0.0 ? "late.word" : "early.word", sign > 0.0 ? "late" : "early", x,
                     sign > 0.0 ? top + 35.0 : bottom - 35.0);
}

static void draw_legend(ev_pen *pen, const ev_sheet *sheet, const ev_aperture_map *map)
{
    double x = map->x + map->radius + 18.0, top = map->y - map->radius, width = 12.0;
    double height = 2.0 * map->radius;
    cairo_pattern_t *pattern = cairo_pattern_create_linear(0.0, top + height, 0.0, top);
    for (int i = 0; i <= 16; ++i) {
        ev_colour colour = ev_theme_path_error(pen->theme, 0.125 * i - 1.0);
        cairo_pattern_add_color_stop_rgba(pattern, i / 16.0, colour.r, colour.g, colour.b,
                                          pen->strength);
    }
    cairo_set_source(pen->cairo, pattern);
    cairo_rectangle(pen->cairo, x, top, width, height);
    cairo_fill(pen->cairo);
    cairo_pattern_destroy(pattern);
    ev_pen_frame(pen, (ev_rect){x, top, width, height}, 0.0, pen->theme->third, 0.75, 0.8);
    for (int i = -4; i <= 4; ++i) {
        double y = map->y - 0.25 * i * map->radius, reach = i % 4 == 0 ? 4.0 : 2.0;
        ev_pen_line(pen, x + width, y, x + width + reach, y, pen->theme->second, 1.0, 0.9);
    }
    draw_legend_end(pen, sheet, map, x + width + 7.0, 1.0);
    draw_legend_end(pen, sheet, map, x + width + 7.0, -1.0);
    draw_legend_text(pen, "zero", "0", x + width + 7.0, map->y + 4.0);
}

typedef struct figure {
    const char *name, *label;
    char value[48];
} figure;

static void add_figure(figure *figures, int *count, const char *name, const char *label,
                       const char *value)
{
    figure *f = &figures[(*count)++];
    f->name = name;
    f->label = label;
    snprintf(f->value, sizeof f->value, "%s", value);
}

static void add_level(figure *figures, int *count, const char *name, const char *label, double db)
{
    char digits[32], text[48];
    ev_format_number(digits, sizeof digits, db, 1, false);
    snprintf(text, sizeof text, "%s dB", digits);
    add_figure(figures, count, name, label, text);
}

static int list_figures(const ev_sheet *sheet, figure figures[FIGURE_CAPACITY])
{
    const ev_feed_budget *budget = &sheet->budget->feeds[sheet->feed];
    const double *power = budget->power;
    int count = 0;
    char text[48], digits[32];
    double rms = budget->path_error.rms_area, wavelength = sheet->antenna->wavelength;
    ev_format_error(text, sizeof text, rms, false);
    add_figure(figures, &count, "rms", "rms", text);
    if (wavelength / rms < 1000.0)
        snprintf(text, sizeof text, "\u03bb/%.0f", wavelength / rms);
    else
        snprintf(text, sizeof text, "< \u03bb/1000");
    add_figure(figures, &count, "waves", "that is", text);
    ev_format_error(text, sizeof text, budget->untilted.rms_area, false);
    add_figure(figures, &count, "untilted", "tilt removed", text);
    ev_format_error(text, sizeof text, budget->path_error.peak_to_valley, false);
    add_figure(figures, &count, "valley", "peak to valley", text);
    if (fabs(budget->rim_top_db - budget->rim_bottom_db) < 0.05) {
        add_level(figures, &count, "rim", "rim", budget->rim_top_db);
    } else {
        add_level(figures, &count, "rim.top", "rim, top", budget->rim_top_db);
        add_level(figures, &count, "rim.bottom", "rim, bottom", budget->rim_bottom_db);
    }
    double shadow =
        power[EV_FATE_SHADOW_SUB] + power[EV_FATE_SHADOW_FEED] + power[EV_FATE_SHADOW_STRUTS];
    if (shadow >= EV_LEAST_SHARE) {
        ev_format_number(digits, sizeof digits, 100.0 * shadow, 1, false);
        snprintf(text, sizeof text, "%s %%", digits);
        add_figure(figures, &count, "shadow", "in shadow", text);
    }
    return count;
}

/* Two columns below the map. */
static void draw_figures(ev_pen *pen, const figure *figures, int count, double top)
{
    double left = pen->region.x + 22.0, right = pen->region.x + pen->region.width - 24.0;
    double gap = 28.0, width = 0.5 * (right - left - gap);
    for (int i = 0; i < count; ++i) {
        double x = left + (i % 2) * (width + gap), baseline = top + (i / 2) * figure_pitch;
        double value_width = ev_text_width(figures[i].value, EV_FONT_BODY_STRONG) + 1.0;
        char name[80];
        snprintf(name, sizeof name, "text.aperture.%s.label", figures[i].name);
        ev_text(pen, (ev_words){.name = name,
                                .string = figures[i].label,
                                .font = EV_FONT_NOTE,
                                .colour = pen->theme->second,
                                .x = x,
                                .width = width - value_width - 6.0,
                                .baseline = baseline,
                                .least = EV_LEAST_TYPE});
        snprintf(name, sizeof name, "text.aperture.%s.value", figures[i].name);
        ev_text(pen, (ev_words){.name = name,
                                .string = figures[i].value,
                                .font = EV_FONT_BODY_STRONG,
                                .colour = pen->theme->ink,
                                .align = EV_ALIGN_RIGHT,
                                .x = x + width - value_width,
                                .width = value_width,
                                .baseline = baseline});
    }
}

static void draw_heading(ev_pen *pen, bool even)
{
    double x = pen->region.x + 22.0, baseline = pen->region.y + 22.5;
    ev_rect head = ev_text(pen, (ev_words){.name = "text.aperture.head",
                                           .string = "Aperture",
                                           .font = EV_FONT_HEAD,
                                           .colour = pen->theme->ink,
                                           .x = x,
                                           .width = 120.0,
                                           .baseline = baseline});
    x = head.x + head.width + 8.0;
    ev_text(pen, (ev_words){.name = "text.aperture.about",
                            .string = even ? "path error, seen from the sky: all even"
                                           : "path error, seen from the sky",
                            .font = EV_FONT_NOTE,
                            .colour = pen->theme->second,
                            .x = x,
                            .width = pen->region.x + pen->region.width - 24.0 - x,
                            .baseline = baseline,
                            .least = EV_LEAST_TYPE});
}

void ev_draw_aperture(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, ev_boxes *boxes)
{
    ev_pen pen = ev_pen_begin(cairo, sheet->dark, boxes, "aperture", page->plates[0]);
    ev_pen_ground(&pen);
    figure figures[FIGURE_CAPACITY];
    int count = list_figures(sheet, figures);
    double rows = (count + 1) / 2;
    ev_aperture_map map = make_map(sheet, page->plates[0], rows * figure_pitch);
    draw_heading(&pen,
                 ev_is_even(sheet->budget->feeds[sheet->feed].path_error.peak_to_valley, sheet));
    if (sheet->stale) {
        ev_pen_fill(&pen,
                    (ev_rect){page->plates[0].x, page->plates[0].y, page->plates[0].width, 2.0},
                    0.0, pen.theme->hand, 1.0);
        pen.strength = EV_STALE;
    }
    ev_aperture_picture(&pen, sheet, &map);
    draw_legend(&pen, sheet, &map);
    draw_figures(&pen, figures, count, map.y + map.radius + 28.0);
    ev_pen_end(&pen);
}
