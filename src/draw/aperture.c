/* The Aperture plate: the map, its legend in millimetres and wavelengths, and what it comes to in
 * figures. */
#include "draw/aperture_map.h"
#include "draw/plate.h"
#include "draw/stage.h"

#include <math.h>
#include <stdio.h>

enum { FIGURE_CAPACITY = 8 };

static const double legend_room = 96.0, figure_pitch = 22.0;
/* Of figures beside the map, with the legend between them. */
static const double side_figures = 120.0;

typedef struct plate_plan {
    ev_aperture_map map;
    bool beside;       /* figures at the right of the map, not below it */
    double legend_end; /* right edge of the legend's words */
} plate_plan;

/* The figures go where they leave the larger map. */
static plate_plan make_plan(const ev_page *page, const ev_sheet *sheet, int figure_count)
{
    ev_rect place = ev_plate_place(page, EV_PLATE_APERTURE);
    double wide = place.width - 46.0, head = ev_plate_head(page), high = place.height - head;
    double below = (figure_count + 1) / 2 * figure_pitch + 20.0;
    double side_room = fmin(fmax(204.0 + 0.1 * (place.width - 392.0), 204.0), 236.0);
    double beside_diameter = fmin(wide - side_room, high - 13.0);
    double below_diameter = fmin(wide - legend_room, high - below);
    plate_plan plan = {.beside = beside_diameter > below_diameter};
    double diameter = fmax(plan.beside ? beside_diameter : below_diameter, 60.0);
    ev_aperture_map *map = &plan.map;
    map->radius = 0.5 * diameter;
    map->x = place.x + 22.0 + map->radius;
    map->y = place.y + head + map->radius;
    map->scale = map->radius / sheet->antenna->radius;
    map->range = sheet->aperture_range > 0.0 ? sheet->aperture_range : ev_aperture_range(sheet);
    plan.legend_end = place.x + place.width - (plan.beside ? 24.0 + side_figures + 3.0 : 20.0);
    return plan;
}

static void draw_legend_text(ev_pen *pen, const plate_plan *plan, const char *name,
                             const char *string, double x, double baseline)
{
    char box[64];
    snprintf(box, sizeof box, "text.aperture.%s", name);
    ev_text(pen, (ev_words){.name = box,
                            .string = string,
                            .font = EV_FONT_NOTE,
                            .colour = pen->theme->second,
                            .x = x,
                            .width = plan->legend_end - x,
                            .baseline = baseline,
                            .least = EV_LEAST_TYPE});
}

static void draw_legend_end(ev_pen *pen, const ev_sheet *sheet, const plate_plan *plan, double x,
                            double sign)
{
    const ev_aperture_map *map = &plan->map;
    char text[64], digits[32];
    double top = map->y - map->radius + 4.0, bottom = map->y + map->radius + 4.5;
    snprintf(digits, sizeof digits, "%g", 1e3 * map->range);
    snprintf(text, sizeof text, "%s%s mm", sign > 0.0 ? "+" : "\u2212", digits);
    draw_legend_text(pen, plan, sign > 0.0 ? "late" : "early", text, x,
                     sign > 0.0 ? top + 5.0 : bottom - 5.0);
    ev_format_number(digits, sizeof digits, sign * map->range / sheet->antenna->wavelength, 2,
                     true);
    snprintf(text, sizeof text, "%s \u03bb", digits);
    draw_legend_text(pen, plan, sign > 0.0 ? "late.waves" : "early.waves", text, x,
                     sign > 0.0 ? top + 20.0 : bottom - 20.0);
    draw_legend_text(pen, plan, sign > 0.0 ? "late.word" : "early.word",
                     sign > 0.0 ? "late" : "early", x, sign > 0.0 ? top + 35.0 : bottom - 35.0);
}

static void draw_legend(ev_pen *pen, const ev_sheet *sheet, const plate_plan *plan)
{
    const ev_aperture_map *map = &plan->map;
    double x = map->x + map->radius + (plan->beside ? 11.0 : 18.0), top = map->y - map->radius,
           width = 12.0;
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
    draw_legend_end(pen, sheet, plan, x + width + 6.0, 1.0);
    draw_legend_end(pen, sheet, plan, x + width + 6.0, -1.0);
    draw_legend_text(pen, plan, "zero", "0", x + width + 6.0, map->y + 4.0);
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

/* A name at x and its value, which ends at x + width. */
static void draw_figure(ev_pen *pen, const figure *f, double x, double width, double baseline)
{
    double value_width = ev_text_width(f->value, EV_FONT_BODY_STRONG) + 1.0;
    char name[80];
    snprintf(name, sizeof name, "text.aperture.%s.label", f->name);
    ev_text(pen, (ev_words){.name = name,
                            .string = f->label,
                            .font = EV_FONT_NOTE,
                            .colour = pen->theme->second,
                            .x = x,
                            .width = width - value_width - 3.0,
                            .baseline = baseline,
                            .least = EV_LEAST_TYPE});
    snprintf(name, sizeof name, "text.aperture.%s.value", f->name);
    ev_text(pen, (ev_words){.name = name,
                            .string = f->value,
                            .font = EV_FONT_BODY_STRONG,
                            .colour = pen->theme->ink,
                            .align = EV_ALIGN_RIGHT,
                            .x = x + width - value_width,
                            .width = value_width,
                            .baseline = baseline});
}

/* One column at the right of the map, or two below it. */
static void draw_figures(ev_pen *pen, const plate_plan *plan, const figure *figures, int count)
{
    const ev_aperture_map *map = &plan->map;
    double left = pen->region.x + 22.0, right = pen->region.x + pen->region.width - 24.0;
    double gap = 28.0, width = 0.5 * (right - left - gap);
    if (plan->beside) {
        double pitch = fmin(2.0 * (map->radius - 7.0) / fmax(count - 1, 1), 24.0);
        for (int i = 0; i < count; ++i)
            draw_figure(pen, &figures[i], right - side_figures, side_figures,
                        map->y - map->radius + 12.0 + i * pitch);
        return;
    }
    for (int i = 0; i < count; ++i)
        draw_figure(pen, &figures[i], left + (i % 2) * (width + gap), width,
                    map->y + map->radius + 28.0 + (i / 2) * figure_pitch);
}

void ev_draw_aperture(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, ev_boxes *boxes)
{
    double valley = sheet->budget->feeds[sheet->feed].path_error.peak_to_valley;
    ev_pen pen =
        ev_plate_begin(cairo, page, sheet, EV_PLATE_APERTURE,
                       ev_is_even(valley, sheet) ? "path error, seen from the sky: all even"
                                                 : "path error, seen from the sky",
                       sheet->stale, boxes);
    figure figures[FIGURE_CAPACITY];
    int count = list_figures(sheet, figures);
    plate_plan plan = make_plan(page, sheet, count);
    ev_aperture_picture(&pen, sheet, &plan.map);
    draw_legend(&pen, sheet, &plan);
    draw_figures(&pen, &plan, figures, count);
    ev_pen_end(&pen);
}
