/* The Detail: a circle in which the part in hand is seen so large that a millimetre can be pointed
 * at, joined to the part by tangents. Ticks and axes are the part's own; the rings are its
 * tolerance; the handle is where it sits. Called by the Stage in section and in space. */
#include "draw/detail.h"
#include "draw/stage.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

static const double part_radius = 14.0;

static const ev_loss_map *usable_map(const ev_sheet *sheet)
{
    const ev_loss_map *map = sheet->loss_map;
    if (!map || map->part != sheet->part || !(map->extent > 0.0) ||
        map->axis[0] != sheet->detail_axis[0] || map->axis[1] != sheet->detail_axis[1])
        return NULL;
    return map->part == EV_PART_SUB || map->feed == sheet->feed ? map : NULL;
}

/* Directions of the two axes on the page, turned with it. One that points out of the section is
 * drawn square to the other. */
static void page_axes(const ev_sheet *sheet, double turn, double axis[2][2])
{
    bool seen[2];
    double c = cos(turn), s = sin(turn);
    for (int i = 0; i < 2; ++i) {
        ev_vec3 d =
            ev_part_axis_direction(sheet->antenna, sheet->part, sheet->feed, sheet->detail_axis[i]);
        double length = hypot(d.z, d.x);
        seen[i] = length > 0.5;
        axis[i][0] = seen[i] ? (c * d.z - s * d.x) / length : 0.0;
        axis[i][1] = seen[i] ? -(s * d.z + c * d.x) / length : 0.0;
    }
    if (!seen[0] && !seen[1]) {
        axis[0][0] = 1.0;
        seen[0] = true;
    }
    int good = seen[0] ? 0 : 1;
    if (!seen[1 - good]) {
        /* Counter-clockwise from axis 0 to axis 1, as up is from right. */
        double sense = good == 0 ? 1.0 : -1.0;
        axis[1 - good][0] = sense * axis[good][1];
        axis[1 - good][1] = -sense * axis[good][0];
    }
}

static ev_detail make_detail(const ev_sheet *sheet, ev_rect square, ev_detail_style style)
{
    ev_detail detail = {
        .radius = 0.5 * square.width, .handle = style.handle, .showing = style.showing};
    detail.x = square.x + detail.radius;
    detail.y = square.y + detail.radius;
    detail.loss = usable_map(sheet);
    for (int i = 0; i < 2; ++i)
        detail.place[i] = ev_part_place(sheet->design, sheet->antenna, sheet->part, sheet->feed,
                                        sheet->detail_axis[i]);
    double centre[2] = {0.0, 0.0};
    double away = hypot(detail.place[0], detail.place[1]);
    double extent = fmax(1.6 * away, sheet->antenna->wavelength);
    if (detail.loss) {
        extent = detail.loss->extent;
        memcpy(centre, detail.loss->centre, sizeof centre);
    }
    double axis[2][2], scale = detail.radius / extent;
    page_axes(sheet, style.turn, axis);
    detail.extent = extent;
    detail.map = (ev_plot_map){
        .x0 = detail.x - scale * (centre[0] * axis[0][0] + centre[1] * axis[1][0]),
        .x_scale = scale * axis[0][0],
        .x_cross = scale * axis[1][0],
        .y0 = detail.y - scale * (centre[0] * axis[0][1] + centre[1] * axis[1][1]),
        .y_scale = scale * axis[1][1],
        .y_cross = scale * axis[0][1],
    };
    memcpy(detail.axis, axis, sizeof axis);
    /* At the bottom of the circle, or at its top when the handle is down there. */
    double hx, hy, low = detail.y + detail.radius;
    ev_plot_to_page(&detail.map, detail.place[0], detail.place[1], &hx, &hy);
    detail.words_y = hy > low - 52.0 ? detail.y - detail.radius + 14.0 : low - 14.0;
    return detail;
}

static double step_of_words(double extent)
{
    return fmax(ev_step_below(extent / 3.0), 1e-4);
}

/* Outer tangents of the two circles, interrupted where there are words. */
static void draw_tangents(ev_pen *pen, const ev_detail *detail, double x, double y)
{
    double dx = detail->x - x, dy = detail->y - y, distance = hypot(dx, dy);
    ev_pen_circle(pen, x, y, part_radius, pen->theme->ink, 1.1, 0.9);
    if (!(distance > detail->radius + part_radius) || distance > 1e5)
        return;
    dx /= distance;
    dy /= distance;
    double along = (part_radius - detail->radius) / distance, across = sqrt(1.0 - along * along);
    for (int side = -1; side <= 1; side += 2) {
        double nx = along * dx - side * across * dy, ny = along * dy + side * across * dx;
        const double from[2] = {x + part_radius * nx, y + part_radius * ny};
        const double to[2] = {detail->x + detail->radius * nx, detail->y + detail->radius * ny};
        ev_line_around_text(pen, from, to, pen->theme->second, 0.8, 0.8);
    }
}

/* The part's own axes through where it should sit, ticked. */
static void draw_axes(ev_pen *pen, const ev_detail *detail)
{
    double scale = hypot(detail->map.x_scale, detail->map.y_cross);
    double step = step_of_words(detail->extent);
    int reach = (int)fmin(2.0 * detail->extent / step + 2.0, 200.0);
    for (int i = 0; i < 2; ++i) {
        double ax = detail->axis[i][0], ay = detail->axis[i][1];
        double far = 4.0 * detail->radius;
        ev_pen_line(pen, detail->map.x0 - far * ax, detail->map.y0 - far * ay,
                    detail->map.x0 + far * ax, detail->map.y0 + far * ay, pen->theme->second, 0.8,
                    0.75);
        for (int k = -2 * reach; k <= 2 * reach; ++k) {
            double px = detail->map.x0 + k * step * scale * ax;
            double py = detail->map.y0 + k * step * scale * ay;
            if (k == 0 || hypot(px - detail->x, py - detail->y) > detail->radius - 5.0)
                continue;
            ev_pen_line(pen, px - 4.0 * ay, py + 4.0 * ax, px + 4.0 * ay, py - 4.0 * ax,
                        pen->theme->second, 0.9, 0.9);
        }
    }
}

static void draw_tick_words(ev_pen *pen, const ev_detail *detail)
{
    char text[64], length[48];
    ev_format_length(length, sizeof length, step_of_words(detail->extent));
    snprintf(text, sizeof text, "ticks %s", length);
    double width = ev_text_width(text, EV_FONT_SMALL) + 1.0;
    ev_text(pen, (ev_words){.name = "text.detail.ticks",
                            .string = text,
                            .font = EV_FONT_SMALL,
                            .colour = pen->theme->second,
                            .x = detail->x - 0.5 * width,
                            .width = width,
                            .baseline = detail->words_y + 4.0,
                            .halo = true});
}

static void draw_arrow(ev_pen *pen, const ev_detail *detail, double hx, double hy)
{
    double bx, by;
    ev_plot_to_page(&detail->map, detail->loss->best[0], detail->loss->best[1], &bx, &by);
    double dx = bx - hx, dy = by - hy, distance = hypot(dx, dy);
    if (!(distance > detail->handle + 10.0))
        return;
    dx /= distance;
    dy /= distance;
    ev_pen_line(pen, hx + detail->handle * dx, hy + detail->handle * dy, bx - 6.0 * dx,
                by - 6.0 * dy, pen->theme->ink, 1.6, 1.0);
    ev_pen_wedge(pen, bx, by, dx, dy, 9.0, 3.6, pen->theme->ink);
}

static void draw_handle(ev_pen *pen, const ev_sheet *sheet, const ev_detail *detail, double x,
                        double y)
{
    const ev_theme *theme = pen->theme;
    double r = detail->handle, q = r / EV_HANDLE_RADIUS;
    ev_colour line = theme->hand_text;
    for (int i = 0; i < 4; ++i) {
        double sign = i < 2 ? 1.0 : -1.0;
        double ax = sign * detail->axis[i % 2][0], ay = sign * detail->axis[i % 2][1];
        double tip = r + 10.5 * q, base = r + 3.5 * q, half = 4.6 * q;
        cairo_move_to(pen->cairo, x + tip * ax, y + tip * ay);
        cairo_line_to(pen->cairo, x + base * ax - half * ay, y + base * ay + half * ax);
        cairo_line_to(pen->cairo, x + base * ax + half * ay, y + base * ay - half * ax);
        cairo_close_path(pen->cairo);
        ev_pen_colour(pen, theme->hand, 1.0);
        cairo_fill_preserve(pen->cairo);
        ev_pen_colour(pen, line, 1.0);
        cairo_set_line_width(pen->cairo, 1.0);
        cairo_stroke(pen->cairo);
    }
    ev_pen_circle(pen, x, y, r - 3.25 * q, theme->hand, 6.5 * q, 1.0);
    ev_pen_circle(pen, x, y, r, line, 1.3 * q, 1.0);
    ev_pen_circle(pen, x, y, r - 6.5 * q, line, 1.1 * q, 1.0);
    ev_pen_circle(pen, x, y, 2.2 * q, theme->ink, 0.0, 1.0);
    double reach = r + 8.0 * q;
    ev_boxes_add(pen->boxes, EV_BOX_HANDLE,
                 sheet->part == EV_PART_SUB ? "handle.sub" : "handle.feed",
                 (ev_rect){x - reach, y - reach, 2.0 * reach, 2.0 * reach});
}

static void draw_content(ev_pen *pen, const ev_detail *detail, double hx, double hy)
{
    ev_ring_labels labels = {.count = 0};
    ev_pen_colour(pen, pen->theme->ground, 1.0);
    cairo_paint(pen->cairo);
    if (detail->loss)
        ev_rings_draw(pen, detail, &labels);
    draw_axes(pen, detail);
    if (!detail->showing)
        draw_tick_words(pen, detail);
    ev_rings_label(pen, detail, &labels);
    if (detail->loss)
        draw_arrow(pen, detail, hx, hy);
}

/* On an image drawn square and then cut out round at once: a round clip would slow every stroke. On
 * paper the clip is the simpler drawing. */
static void draw_inside(ev_pen *pen, const ev_detail *detail, double hx, double hy)
{
    cairo_t *cairo = pen->cairo;
    bool grouped = ev_pen_is_image(pen);
    cairo_save(cairo);
    if (grouped)
        cairo_rectangle(cairo, detail->x - detail->radius, detail->y - detail->radius,
                        2.0 * detail->radius, 2.0 * detail->radius);
    else
        cairo_arc(cairo, detail->x, detail->y, detail->radius, 0.0, 2.0 * EV_PI);
    cairo_clip(cairo);
    if (grouped)
        cairo_push_group(cairo);
    draw_content(pen, detail, hx, hy);
    if (grouped) {
        cairo_pop_group_to_source(cairo);
        cairo_arc(cairo, detail->x, detail->y, detail->radius, 0.0, 2.0 * EV_PI);
        cairo_fill(cairo);
    }
    cairo_restore(cairo);
}

static void draw_circle(ev_pen *pen, const ev_sheet *sheet, const ev_detail *detail)
{
    double hx, hy;
    ev_plot_to_page(&detail->map, detail->place[0], detail->place[1], &hx, &hy);
    draw_inside(pen, detail, hx, hy);
    ev_pen_circle(pen, detail->x, detail->y, detail->radius, pen->theme->ink, 1.6, 1.0);
    /* A handle outside the circle stays in reach at its edge. */
    double away = hypot(hx - detail->x, hy - detail->y), most = detail->radius - 4.0;
    if (away > most) {
        hx = detail->x + (hx - detail->x) * most / away;
        hy = detail->y + (hy - detail->y) * most / away;
    }
    draw_handle(pen, sheet, detail, hx, hy);
}

void ev_detail_draw(ev_pen *pen, const ev_sheet *sheet, ev_rect square, ev_detail_style style,
                    double part_x, double part_y, ev_plot_map *map)
{
    ev_detail detail = make_detail(sheet, square, style);
    ev_boxes_add(pen->boxes, EV_BOX_PLOT, "plot.detail", square);
    if (!style.showing)
        ev_detail_caption(pen, sheet, &detail);
    draw_tangents(pen, &detail, part_x, part_y);
    draw_circle(pen, sheet, &detail);
    *map = detail.map;
}

void ev_draw_detail(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, double part_x,
                    double part_y, ev_boxes *boxes, ev_plot_map *map)
{
    ev_pen pen = ev_pen_begin(cairo, sheet->dark, boxes, "detail", page->stage);
    ev_detail_style style = {.handle = EV_HANDLE_RADIUS};
    ev_detail_draw(&pen, sheet, page->detail, style, part_x, part_y, map);
    ev_pen_end(&pen);
}
