/* Strokes, fills and the marks of a technical drawing. Called by every region; knows nothing of
 * antennas but the line styles of the fates. */
#include "draw/pen.h"

#include <math.h>
#include <stdio.h>

ev_pen ev_pen_begin(cairo_t *cairo, bool dark, ev_boxes *boxes, const char *name, ev_rect region)
{
    ev_pen pen = {cairo, ev_theme_get(dark), boxes, region, 1.0};
    cairo_save(cairo);
    cairo_rectangle(cairo, region.x, region.y, region.width, region.height);
    cairo_clip(cairo);
    cairo_new_path(cairo);
    char place[80];
    snprintf(place, sizeof place, "place.%s", name);
    ev_boxes_add(boxes, EV_BOX_PLACE, place, region);
    return pen;
}

void ev_pen_ground(ev_pen *pen)
{
    ev_pen_colour(pen, pen->theme->ground, 1.0);
    cairo_paint(pen->cairo);
}

void ev_pen_end(ev_pen *pen)
{
    cairo_restore(pen->cairo);
}

bool ev_pen_is_image(const ev_pen *pen)
{
    return cairo_surface_get_type(cairo_get_group_target(pen->cairo)) == CAIRO_SURFACE_TYPE_IMAGE;
}

void ev_pen_colour(ev_pen *pen, ev_colour colour, double opacity)
{
    cairo_set_source_rgba(pen->cairo, colour.r, colour.g, colour.b, opacity * pen->strength);
}

void ev_pen_line(ev_pen *pen, double x0, double y0, double x1, double y1, ev_colour colour,
                 double width, double opacity)
{
    ev_pen_colour(pen, colour, opacity);
    cairo_set_line_width(pen->cairo, width);
    cairo_move_to(pen->cairo, x0, y0);
    cairo_line_to(pen->cairo, x1, y1);
    cairo_stroke(pen->cairo);
}

static void trace_rect(cairo_t *cairo, ev_rect r, double corner)
{
    if (corner <= 0.0) {
        cairo_rectangle(cairo, r.x, r.y, r.width, r.height);
        return;
    }
    double right = r.x + r.width, bottom = r.y + r.height;
    cairo_new_sub_path(cairo);
    cairo_arc(cairo, right - corner, r.y + corner, corner, -0.5 * EV_PI, 0.0);
    cairo_arc(cairo, right - corner, bottom - corner, corner, 0.0, 0.5 * EV_PI);
    cairo_arc(cairo, r.x + corner, bottom - corner, corner, 0.5 * EV_PI, EV_PI);
    cairo_arc(cairo, r.x + corner, r.y + corner, corner, EV_PI, 1.5 * EV_PI);
    cairo_close_path(cairo);
}

void ev_pen_fill(ev_pen *pen, ev_rect rect, double corner, ev_colour colour, double opacity)
{
    ev_pen_colour(pen, colour, opacity);
    trace_rect(pen->cairo, rect, corner);
    cairo_fill(pen->cairo);
}

void ev_pen_frame(ev_pen *pen, ev_rect rect, double corner, ev_colour colour, double width,
                  double opacity)
{
    ev_pen_colour(pen, colour, opacity);
    cairo_set_line_width(pen->cairo, width);
    trace_rect(pen->cairo, rect, corner);
    cairo_stroke(pen->cairo);
}

void ev_pen_circle(ev_pen *pen, double x, double y, double radius, ev_colour colour, double width,
                   double opacity)
{
    ev_pen_colour(pen, colour, opacity);
    cairo_new_sub_path(pen->cairo);
    cairo_arc(pen->cairo, x, y, radius, 0.0, 2.0 * EV_PI);
    if (width > 0.0) {
        cairo_set_line_width(pen->cairo, width);
        cairo_stroke(pen->cairo);
    } else {
        cairo_fill(pen->cairo);
    }
}

void ev_pen_arrow(ev_pen *pen, double x, double y, double dx, double dy, double length,
                  ev_colour colour, double width)
{
    double spread = 0.36;
    ev_pen_colour(pen, colour, 1.0);
    cairo_set_line_width(pen->cairo, width);
    cairo_move_to(pen->cairo, x - length * (dx - spread * dy), y - length * (dy + spread * dx));
    cairo_line_to(pen->cairo, x, y);
    cairo_line_to(pen->cairo, x - length * (dx + spread * dy), y - length * (dy - spread * dx));
    cairo_stroke(pen->cairo);
}

void ev_pen_wedge(ev_pen *pen, double x, double y, double dx, double dy, double length,
                  double half_width, ev_colour colour)
{
    ev_pen_colour(pen, colour, 1.0);
    double bx = x - length * dx, by = y - length * dy;
    cairo_move_to(pen->cairo, x, y);
    cairo_line_to(pen->cairo, bx - half_width * dy, by + half_width * dx);
    cairo_line_to(pen->cairo, bx + half_width * dy, by - half_width * dx);
    cairo_close_path(pen->cairo);
    cairo_fill(pen->cairo);
}

void ev_pen_dashes(ev_pen *pen, ev_fate fate)
{
    static const double past_main[] = {7.0, 4.0}, past_sub[] = {2.0, 2.5};
    if (fate == EV_FATE_PAST_MAIN)
        cairo_set_dash(pen->cairo, past_main, 2, 0.0);
    else if (fate == EV_FATE_PAST_SUB)
        cairo_set_dash(pen->cairo, past_sub, 2, 0.0);
    else
        cairo_set_dash(pen->cairo, NULL, 0, 0.0);
}

void ev_pen_fate_sample(ev_pen *pen, ev_fate fate, double x, double y, double width)
{
    ev_pen_dashes(pen, fate);
    ev_pen_line(pen, x, y, x + width, y, ev_theme_fate(pen->theme, fate), 1.8, 1.0);
    ev_pen_dashes(pen, EV_FATE_APERTURE);
    if (fate >= EV_FATE_SHADOW_SUB)
        ev_pen_line(pen, x + width - 0.9, y - 4.0, x + width - 0.9, y + 4.0, pen->theme->ink, 1.8,
                    1.0);
}

void ev_pen_hatch_path(ev_pen *pen, ev_rect bounds)
{
    cairo_save(pen->cairo);
    cairo_clip(pen->cairo);
    for (double x = bounds.x - bounds.height; x < bounds.x + bounds.width; x += 3.5) {
        cairo_move_to(pen->cairo, x, bounds.y + bounds.height);
        cairo_line_to(pen->cairo, x + bounds.height, bounds.y);
    }
    ev_pen_colour(pen, pen->theme->ink, 1.0);
    cairo_set_line_width(pen->cairo, 1.3);
    cairo_stroke(pen->cairo);
    cairo_restore(pen->cairo);
}
