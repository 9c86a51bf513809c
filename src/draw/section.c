/* The Stage as a section to scale: fits the antenna and its Front into the room beside the Detail
 * and puts the parts of the drawing together. */
#include "draw/plate.h"
#include "draw/stage.h"

#include <math.h>
#include <stdio.h>

/* From the leftmost part of the antenna to the dimension line of the diameter. */
static const double dimension_reach = 38.0;

/* Room of the antenna proper: the dimension of the diameter stands to its left, that of the focal
 * length and the scale bar below, the Front to its right. */
static ev_rect antenna_room(const ev_page *page, bool below_tabs)
{
    ev_rect stage = page->stage;
    double left = stage.x + 72.0, top = stage.y + (below_tabs ? 60.0 : 36.0);
    double right = page->detail.x - ev_front_room(page) - 4.0 - 24.0;
    return (ev_rect){left, top, right - left, stage.y + stage.height - 70.0 - top};
}

static ev_section fit_room(ev_rect room, ev_bounds bounds, double clear_x)
{
    double wide = bounds.z1 - bounds.z0, high = bounds.x1 - bounds.x0;
    double scale = fmin(room.width / wide, room.height / high);
    double spare_x = room.width - scale * wide, spare_y = room.height - scale * high;
    /* The larger part of spare width goes to where the rays run together to the Front, but the
     * dimension line keeps clear of the tabs where it can. */
    double left = fmax(0.42 * spare_x, fmin(spare_x, clear_x - room.x));
    ev_section section = {.scale = scale, .bounds = bounds};
    section.map = (ev_plot_map){
        .x0 = room.x + left - scale * bounds.z0,
        .x_scale = scale,
        .y0 = room.y + 0.5 * spare_y + scale * bounds.x1,
        .y_scale = -scale,
    };
    section.front_z = (room.x + room.width + 24.0 - section.map.x0) / scale;
    return section;
}

static double dimension_x(const ev_section *section)
{
    return section->map.x0 + section->scale * section->bounds.z0 - dimension_reach;
}

static void zoom_section(ev_section *section, ev_rect room, const ev_sheet *sheet)
{
    double zoom = sheet->zoom > 0.0 && isfinite(sheet->zoom) ? sheet->zoom : 1.0;
    double cx = room.x + 0.5 * room.width, cy = room.y + 0.5 * room.height;
    ev_plot_map *map = &section->map;
    map->x0 = cx + zoom * (map->x0 - cx) + sheet->pan_x;
    map->y0 = cy + zoom * (map->y0 - cy) + sheet->pan_y;
    map->x_scale *= zoom;
    map->y_scale *= zoom;
    section->scale *= zoom;
}

ev_section ev_section_fit(const ev_page *page, const ev_sheet *sheet)
{
    ev_bounds bounds = ev_outline_bounds(sheet->antenna);
    ev_rect room = antenna_room(page, false);
    double clear_x = page->stage.x + 150.0 + dimension_reach;
    ev_section section = fit_room(room, bounds, clear_x);
    /* Where the dimension line comes under the tabs, everything moves below them. */
    if (dimension_x(&section) < page->stage.x + 149.0) {
        room = antenna_room(page, true);
        section = fit_room(room, bounds, 0.0);
    }
    zoom_section(&section, room, sheet);
    return section;
}

static void draw_diameter(ev_pen *pen, const ev_section *section, const ev_antenna *antenna)
{
    double x = dimension_x(section);
    ev_vec3 top = ev_main_point(antenna, antenna->offset + antenna->radius, 0.0);
    ev_vec3 bottom = ev_main_point(antenna, antenna->offset - antenna->radius, 0.0);
    double tx, ty, bx, by;
    ev_plot_to_page(&section->map, top.z, top.x, &tx, &ty);
    ev_plot_to_page(&section->map, bottom.z, bottom.x, &bx, &by);
    ev_pen_line(pen, x - 5.0, ty, tx - 4.0, ty, pen->theme->second, EV_LINE_HATCH, 0.7);
    ev_pen_line(pen, x - 5.0, by, bx - 4.0, by, pen->theme->second, EV_LINE_HATCH, 0.7);
    char label[48];
    ev_format_length(label, sizeof label, 2.0 * antenna->radius);
    double axis_x, axis_y;
    ev_plot_to_page(&section->map, 0.0, 0.0, &axis_x, &axis_y);
    ev_dimension_upright(pen, "text.stage.diameter", label, x, ty, by, axis_y);
}

/* Below the axis where the dish leaves room there, else below everything. */
static double focal_line_y(const ev_section *section, const ev_antenna *antenna)
{
    double x, axis, lowest;
    ev_plot_to_page(&section->map, 0.0, 0.0, &x, &axis);
    ev_plot_to_page(&section->map, 0.0, section->bounds.x0, &x, &lowest);
    bool clear = antenna->offset - antenna->radius >= -0.02 * antenna->radius;
    bool is_single = !antenna->dual;
    return clear && is_single ? axis + 25.0 : lowest + 19.0;
}

static void draw_focal_length(ev_pen *pen, const ev_section *section, const ev_antenna *antenna)
{
    static const double dots[] = {1.5, 3.0};
    double x0, x1, axis, y = focal_line_y(section, antenna);
    ev_plot_to_page(&section->map, 0.0, 0.0, &x0, &axis);
    ev_plot_to_page(&section->map, antenna->focal_length, 0.0, &x1, &axis);
    cairo_set_dash(pen->cairo, dots, 2, 0.0);
    ev_pen_line(pen, x0, axis, x0, y + 5.0, pen->theme->second, EV_LINE_HATCH, 0.9);
    ev_pen_line(pen, x1, axis, x1, y + 5.0, pen->theme->second, EV_LINE_HATCH, 0.9);
    cairo_set_dash(pen->cairo, NULL, 0, 0.0);
    char label[64], length[48];
    ev_format_length(length, sizeof length, antenna->focal_length);
    snprintf(label, sizeof label, "F %s", length);
    ev_dimension_level(pen, "text.stage.focal", label, x0, x1, y);
}

/* Handles to grab the parts where they stand. */
static void add_parts(ev_boxes *boxes, const ev_section *section, const ev_antenna *antenna)
{
    double x, y, reach = 14.0;
    if (antenna->dual) {
        ev_vec3 vertex = ev_sub_place(&antenna->sub, antenna->layout.sub_vertex);
        ev_plot_to_page(&section->map, vertex.z, vertex.x, &x, &y);
        ev_boxes_add(boxes, EV_BOX_HANDLE, "part.sub",
                     (ev_rect){x - reach, y - reach, 2.0 * reach, 2.0 * reach});
    }
    for (int f = 0; f < antenna->feed_count; ++f) {
        char name[32];
        snprintf(name, sizeof name, "part.feed.%d", f);
        ev_vec3 place = antenna->feeds[f].position;
        ev_plot_to_page(&section->map, place.z, place.x, &x, &y);
        ev_boxes_add(boxes, EV_BOX_HANDLE, name,
                     (ev_rect){x - reach, y - reach, 2.0 * reach, 2.0 * reach});
    }
}

void ev_draw_section(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, ev_boxes *boxes,
                     ev_plot_map *map)
{
    ev_pen pen = ev_pen_begin(cairo, sheet->dark, boxes, "stage", page->stage);
    ev_pen_ground(&pen);
    const ev_antenna *antenna = sheet->antenna;
    ev_section section = ev_section_fit(page, sheet);
    ev_emphasis emphasis = ev_emphasis_of(sheet);
    ev_sheet scaled = *sheet;
    if (!(scaled.front_exaggeration > 0.0))
        scaled.front_exaggeration = ev_front_factor(sheet, section.scale, ev_front_room(page));
    ev_boxes_add(boxes, EV_BOX_PLOT, "plot.section", page->stage);

    double reach = 60.0 / section.scale;
    ev_outline_axis(&pen, &section.map, antenna, section.bounds.z0 - reach,
                    section.front_z + 0.5 * reach);
    pen.strength = emphasis.rest;
    ev_outline_struts(&pen, &section.map, antenna);
    pen.strength = 1.0;
    double fade = 1.1 * 2.0 * antenna->radius * section.scale;
    ev_rays_draw(&pen, &section.map, sheet->rays, sheet->ray_count, section.front_z, fade,
                 &emphasis);
    ev_outline_mirrors(&pen, &section.map, antenna);
    double floor = sheet->detail ? page->detail.y - 8.0 : page->stage.y + page->stage.height - 14.0;
    ev_front_draw(&pen, &section, &scaled, floor, emphasis.front);
    ev_peak_draw(&pen, &section, &scaled, emphasis.front);
    ev_outline_feeds(&pen, &section.map, antenna, sheet->feed);
    draw_diameter(&pen, &section, antenna);
    draw_focal_length(&pen, &section, antenna);
    ev_scale_bar(&pen, page->stage.x + 24.0, page->stage.y + page->stage.height - 12.0,
                 section.scale);
    ev_stage_tabs(&pen, sheet, emphasis.words);
    add_parts(boxes, &section, antenna);
    *map = section.map;
    ev_pen_end(&pen);
}

void ev_sheet_scales(const ev_page *page, ev_sheet *sheet)
{
    ev_section section = ev_section_fit(page, sheet);
    sheet->front_exaggeration = ev_front_factor(sheet, section.scale, ev_front_room(page));
    sheet->aperture_range = ev_aperture_range(sheet);
    sheet->ledger_range = ev_ledger_range(sheet);
    sheet->beam_range = ev_beam_range(page, sheet);
    sheet->cut_range = ev_cut_range(sheet);
}
