/* The Front: the wave as it leaves the aperture, its bend drawn larger by a stated factor, flat
 * when every path is even. Late lags behind, to the left; early runs ahead. */
#include "draw/stage.h"

#include <math.h>
#include <stdio.h>

enum { RUN_CAPACITY = 2048 };

/* A stretch of the Front on one side of the even line. */
typedef struct front_run {
    double x[RUN_CAPACITY], y[RUN_CAPACITY];
    int count;
    bool late;
    double width; /* px, of the line */
} front_run;

typedef struct front_extremes {
    double late, early;     /* m, both >= 0 */
    double late_y, early_y; /* page */
} front_extremes;

double ev_front_room(const ev_page *page)
{
    return 30.0 * fmax(1.0, page->stage.height / 542.0);
}

static double largest_error(const ev_sheet *sheet)
{
    double largest = 0.0;
    for (int i = 0; i < sheet->front_count; ++i)
        if (isfinite(sheet->front[i]))
            largest = fmax(largest, fabs(sheet->front[i]));
    return largest;
}

bool ev_is_even(double error, const ev_sheet *sheet)
{
    return !(error >= sheet->antenna->wavelength / 500.0);
}

double ev_front_factor(const ev_sheet *sheet, double scale, double room)
{
    /* An error of under a fiftieth of a wavelength shows as what it is: a flat front. */
    double error = fmax(largest_error(sheet), sheet->antenna->wavelength / 50.0);
    return ev_step_below(room / (error * scale));
}

static void flush_run(ev_pen *pen, front_run *run, double base, bool even)
{
    if (run->count >= 2) {
        ev_colour colour = even        ? pen->theme->ink
                           : run->late ? pen->theme->late
                                       : pen->theme->early;
        cairo_move_to(pen->cairo, base, run->y[0]);
        for (int i = 0; i < run->count; ++i)
            cairo_line_to(pen->cairo, run->x[i], run->y[i]);
        cairo_line_to(pen->cairo, base, run->y[run->count - 1]);
        cairo_close_path(pen->cairo);
        ev_pen_colour(pen, colour, EV_FRONT_FILL);
        cairo_fill(pen->cairo);
        for (int i = 0; i < run->count; ++i)
            cairo_line_to(pen->cairo, run->x[i], run->y[i]);
        ev_pen_colour(pen, colour, 1.0);
        cairo_set_line_width(pen->cairo, run->width);
        cairo_set_line_cap(pen->cairo, CAIRO_LINE_CAP_ROUND);
        cairo_stroke(pen->cairo);
        cairo_set_line_cap(pen->cairo, CAIRO_LINE_CAP_BUTT);
    }
    run->count = 0;
}

static void add_point(front_run *run, double x, double y)
{
    if (run->count < RUN_CAPACITY) {
        run->x[run->count] = x;
        run->y[run->count++] = y;
    }
}

void ev_front_curve(ev_pen *pen, const ev_plot_map *map, const ev_sheet *sheet, double base,
                    double bend, double width)
{
    bool even = ev_is_even(largest_error(sheet), sheet);
    front_run run = {.width = width};
    double before_error = NAN, before_y = 0.0;
    for (int i = 0; i < sheet->front_count; ++i) {
        double error = sheet->front[i], x, y;
        ev_plot_to_page(map, 0.0, sheet->front_x[i], &x, &y);
        bool late = error > 0.0;
        if (!isfinite(error)) {
            flush_run(pen, &run, base, even);
        } else {
            if (run.count > 0 && late != run.late && !even) {
                double share = before_error / (before_error - error);
                double cross = before_y + share * (y - before_y);
                add_point(&run, base, cross);
                flush_run(pen, &run, base, even);
                add_point(&run, base, cross);
            }
            run.late = late;
            add_point(&run, base - bend * error, y);
        }
        before_error = error;
        before_y = y;
    }
    flush_run(pen, &run, base, even);
}

static front_extremes find_extremes(const ev_plot_map *map, const ev_sheet *sheet)
{
    front_extremes e = {0.0, 0.0, 0.0, 0.0};
    for (int i = 0; i < sheet->front_count; ++i) {
        double error = sheet->front[i], x, y;
        if (!isfinite(error))
            continue;
        ev_plot_to_page(map, 0.0, sheet->front_x[i], &x, &y);
        if (error > e.late) {
            e.late = error;
            e.late_y = y;
        }
        if (-error > e.early) {
            e.early = -error;
            e.early_y = y;
        }
    }
    return e;
}

static void draw_label(ev_pen *pen, const char *name, const char *string, double x, double baseline,
                       ev_font font, ev_colour colour)
{
    double end = pen->region.x + pen->region.width - 14.0;
    if (x > end - 40.0 || x < pen->region.x)
        return;
    ev_text(pen, (ev_words){.name = name,
                            .string = string,
                            .font = font,
                            .colour = colour,
                            .x = x,
                            .width = end - x,
                            .baseline = baseline,
                            .least = EV_LEAST_TYPE,
                            .halo = true});
}

/* How far the drawn front runs ahead of the even line within `reach` of a height, page. */
static double ahead_at(const ev_section *section, const ev_sheet *sheet, double middle,
                       double reach)
{
    double ahead = 0.0;
    for (int i = 0; i < sheet->front_count; ++i) {
        double x, y;
        ev_plot_to_page(&section->map, 0.0, sheet->front_x[i], &x, &y);
        if (fabs(y - middle) < reach && isfinite(sheet->front[i]))
            ahead = fmax(ahead, -sheet->front[i]);
    }
    return ahead * sheet->front_exaggeration * section->scale;
}

/* Beside where the front is latest and earliest, below the heading and above what lies under. */
static void draw_extremes(ev_pen *pen, const ev_sheet *sheet, const ev_section *section,
                          const front_extremes *e, double base, double top, double bottom)
{
    double x = base + 14.0;
    char text[64], error[48];
    if (ev_is_even(fmax(e->late, e->early), sheet)) {
        draw_label(pen, "text.stage.even", "even", x, top, EV_FONT_BODY_STRONG, pen->theme->ink);
        return;
    }
    double gap = 20.0;
    double late_y = fmin(fmax(e->late_y + 4.0, top), bottom);
    double early_y = fmin(fmax(e->early_y + 4.0, top), bottom);
    bool both = !ev_is_even(fmin(e->late, e->early), sheet);
    if (both && fabs(late_y - early_y) < gap) {
        bool late_above = e->late_y <= e->early_y;
        double *upper = late_above ? &late_y : &early_y, *lower = late_above ? &early_y : &late_y;
        *upper = fmax(fmin(*upper, bottom - gap), top);
        *lower = *upper + gap;
    }
    ev_format_error(error, sizeof error, e->late, false);
    snprintf(text, sizeof text, "late %s", error);
    if (!ev_is_even(e->late, sheet))
        draw_label(pen, "text.stage.late", text,
                   base + 14.0 + fmax(0.0, ahead_at(section, sheet, late_y - 4.0, 11.0)), late_y,
                   EV_FONT_BODY_STRONG, pen->theme->late);
    ev_format_error(error, sizeof error, e->early, false);
    snprintf(text, sizeof text, "early %s", error);
    if (!ev_is_even(e->early, sheet))
        draw_label(pen, "text.stage.early", text,
                   base + 14.0 + fmax(0.0, ahead_at(section, sheet, early_y - 4.0, 11.0)), early_y,
                   EV_FONT_BODY_STRONG, pen->theme->early);
}

void ev_front_draw(ev_pen *pen, const ev_section *section, const ev_sheet *sheet, double floor,
                   double strength)
{
    if (sheet->front_count < 2)
        return;
    const ev_antenna *antenna = sheet->antenna;
    double base, top, bottom, unused;
    ev_plot_to_page(&section->map, section->front_z, antenna->offset + antenna->radius, &base,
                    &top);
    ev_plot_to_page(&section->map, section->front_z, antenna->offset - antenna->radius, &unused,
                    &bottom);
    double factor = sheet->front_exaggeration, whole = pen->strength;
    pen->strength *= strength;
    static const double dashes[] = {4.0, 3.0};
    cairo_set_dash(pen->cairo, dashes, 2, 0.0);
    ev_pen_line(pen, base, top, base, bottom, pen->theme->second, EV_LINE_DIMENSION, 0.8);
    cairo_set_dash(pen->cairo, NULL, 0, 0.0);
    ev_front_curve(pen, &section->map, sheet, base, factor * section->scale, EV_LINE_FRONT);
    pen->strength = whole;

    front_extremes extremes = find_extremes(&section->map, sheet);
    double head = fmin(fmax(top + 13.0, pen->region.y + 22.0), floor - 90.0);
    char text[64];
    double x = base + 14.0 + fmax(0.0, ahead_at(section, sheet, head + 12.0, 28.0));
    draw_label(pen, "text.stage.front", "The front", x, head, EV_FONT_BODY_STRONG, pen->theme->ink);
    snprintf(text, sizeof text, "path error \u00d7%g", factor);
    draw_label(pen, "text.stage.front.factor", text, x, head + 17.0, EV_FONT_NOTE,
               pen->theme->second);
    draw_label(pen, "text.stage.front.even", "dashed: even", x, head + 32.0, EV_FONT_NOTE,
               pen->theme->second);
    draw_extremes(pen, sheet, section, &extremes, base, head + 56.0, floor);
}
