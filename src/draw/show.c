/* Showing mode: the antenna as it stands, for people who are shown why position matters. Called by
 * the window for a whole page. The section is drawn as on the Stage, turned as a whole. */
#include "draw/show.h"

#include "draw/detail.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

typedef struct show_state {
    ev_pen pen;
    const ev_sheet *sheet;
    ev_show show;
    double factor;    /* of the Front's bend */
    double stroke;    /* pixels a unit of the turned drawing: its lines are that much wider */
    ev_plot_map flat; /* antenna to units before the turn */
} show_state;

static ev_font sized(ev_font font, double size)
{
    font.size *= size;
    return font;
}

double ev_show_exaggeration(double width, double height, const ev_sheet *sheet)
{
    ev_show show = ev_show_fit(width, height, sheet);
    return ev_front_factor(sheet, show.scale, ev_show_front_room(&show));
}

/* Ground, hatched below, and the post that carries the dish. */
static void draw_ground(show_state *s)
{
    ev_pen *pen = &s->pen;
    double y = s->show.ground, k = s->show.size, width = s->show.page.width, jx, jy, mx, my;
    if (!isfinite(y))
        return;
    for (double x = 12.0 * k; x < width + 12.0 * k; x += 18.0 * k) {
        cairo_move_to(pen->cairo, x, y + 1.0);
        cairo_line_to(pen->cairo, x - 11.0 * k, y + 12.0 * k);
    }
    ev_pen_colour(pen, pen->theme->ink, 0.35);
    cairo_set_line_width(pen->cairo, EV_LINE_HATCH);
    cairo_stroke(pen->cairo);
    ev_plot_to_page(&s->show.map, s->show.joint.z, s->show.joint.x, &jx, &jy);
    ev_plot_to_page(&s->show.map, s->show.held.z, s->show.held.x, &mx, &my);
    double reach = hypot(mx - jx, my - jy);
    cairo_set_line_cap(pen->cairo, CAIRO_LINE_CAP_ROUND);
    ev_pen_line(pen, jx, jy, mx + 9.0 * (jx - mx) / reach, my + 9.0 * (jy - my) / reach,
                pen->theme->ink, 5.0 * k, 0.9);
    ev_pen_line(pen, jx, jy, jx, y, pen->theme->ink, 7.0 * k, 1.0);
    cairo_set_line_cap(pen->cairo, CAIRO_LINE_CAP_BUTT);
    ev_pen_circle(pen, jx, jy, 7.0 * k, pen->theme->ground, 0.0, 1.0);
    ev_pen_circle(pen, jx, jy, 7.0 * k, pen->theme->ink, 2.5 * k, 1.0);
    ev_pen_line(pen, 0.0, y, width, y, pen->theme->ink, 1.6, 1.0);
}

/* An offset dish holds its feed by an arm from the lower rim. */
static void draw_arm(show_state *s)
{
    const ev_antenna *antenna = s->sheet->antenna;
    if (antenna->dual || antenna->shadows.strip_count > 0 || antenna->offset < antenna->radius)
        return;
    ev_vec3 rim = ev_main_point(antenna, antenna->offset - antenna->radius, 0.0);
    const ev_feed *feed = &antenna->feeds[s->sheet->feed];
    double back = 2.0 * ev_outline_mouth(antenna, feed), x0, y0, x1, y1;
    ev_plot_to_page(&s->flat, rim.z, rim.x, &x0, &y0);
    ev_plot_to_page(&s->flat, feed->position.z - back * feed->axis.z,
                    feed->position.x - back * feed->axis.x, &x1, &y1);
    ev_pen_line(&s->pen, x0, y0, x1, y1, s->pen.theme->second, 2.8, 0.9);
}

/* The wave on its way from the dish: the Front's own shape, fainter the earlier it is. */
static void draw_waves(show_state *s)
{
    const ev_sheet *sheet = s->sheet;
    enum { WAVES = 4 };
    double from = 0.45 * s->show.front_z, step = (s->show.front_z - from) / (WAVES + 0.6);
    for (int w = 0; w < WAVES; ++w) {
        double base = (from + w * step) * s->flat.x_scale;
        bool is_down = false;
        for (int i = 0; i < sheet->front_count; ++i) {
            double error = sheet->front[i], x, y;
            ev_plot_to_page(&s->flat, 0.0, sheet->front_x[i], &x, &y);
            x = base - s->factor * s->flat.x_scale * error;
            if (!isfinite(error)) {
                is_down = false;
                continue;
            }
            if (is_down)
                cairo_line_to(s->pen.cairo, x, y);
            else
                cairo_move_to(s->pen.cairo, x, y);
            is_down = true;
        }
        ev_pen_colour(&s->pen, s->pen.theme->ink, 0.14 + 0.12 * w);
        cairo_set_line_width(s->pen.cairo, 0.9);
        cairo_stroke(s->pen.cairo);
    }
}

static void draw_even_line(show_state *s)
{
    static const double dashes[] = {4.0, 3.0};
    const ev_antenna *antenna = s->sheet->antenna;
    double x, y0, y1;
    ev_plot_to_page(&s->flat, s->show.front_z, antenna->offset + antenna->radius, &x, &y0);
    ev_plot_to_page(&s->flat, s->show.front_z, antenna->offset - antenna->radius, &x, &y1);
    cairo_set_dash(s->pen.cairo, dashes, 2, 0.0);
    ev_pen_line(&s->pen, x, y0, x, y1, s->pen.theme->second, EV_LINE_DIMENSION, 0.8);
    cairo_set_dash(s->pen.cairo, NULL, 0, 0.0);
}

/* All that turns with the antenna. Above the ground: a spilled ray ends there. */
static void draw_antenna(show_state *s)
{
    cairo_t *cairo = s->pen.cairo;
    const ev_sheet *sheet = s->sheet;
    const ev_antenna *antenna = sheet->antenna;
    ev_emphasis emphasis = {.front = 1.0, .rest = 1.0, .words = ""};
    for (int i = 0; i < EV_FATE_COUNT; ++i)
        emphasis.fate[i] = 1.0;
    cairo_save(cairo);
    double floor = isfinite(s->show.ground) ? s->show.ground : s->show.page.height;
    cairo_rectangle(cairo, 0.0, 0.0, s->show.page.width, floor);
    cairo_clip(cairo);
    cairo_translate(cairo, s->show.x, s->show.y);
    cairo_rotate(cairo, -s->show.turn);
    cairo_scale(cairo, s->stroke, s->stroke);
    ev_outline_struts(&s->pen, &s->flat, antenna);
    draw_arm(s);
    ev_rays_draw(&s->pen, &s->flat, sheet->rays, sheet->ray_count, s->show.front_z,
                 2.2 * antenna->radius * s->flat.x_scale, &emphasis);
    draw_waves(s);
    ev_outline_mirrors(&s->pen, &s->flat, antenna);
    draw_even_line(s);
    ev_front_curve(&s->pen, &s->flat, sheet, s->show.front_z * s->flat.x_scale,
                   s->factor * s->flat.x_scale, 3.4);
    ev_outline_feeds(&s->pen, &s->flat, antenna, sheet->feed);
    cairo_restore(cairo);
}

static void add_part(show_state *s, const char *name, ev_vec3 place, double *x, double *y)
{
    ev_plot_to_page(&s->show.map, place.z, place.x, x, y);
    double side = EV_TOUCH * s->show.size;
    ev_boxes_add(s->pen.boxes, EV_BOX_HANDLE, name,
                 (ev_rect){*x - 0.5 * side, *y - 0.5 * side, side, side});
}

/* Boxes of all parts; (x, y) is where the one in the target stands. */
static void add_parts(show_state *s, double *x, double *y)
{
    const ev_antenna *antenna = s->sheet->antenna;
    double px, py;
    if (antenna->dual) {
        add_part(s, "part.sub", ev_sub_place(&antenna->sub, antenna->layout.sub_vertex), &px, &py);
        if (s->sheet->part == EV_PART_SUB)
            *x = px, *y = py;
    }
    for (int f = 0; f < antenna->feed_count; ++f) {
        char name[32];
        snprintf(name, sizeof name, "part.feed.%d", f);
        add_part(s, name, antenna->feeds[f].position, &px, &py);
        if (s->sheet->part == EV_PART_FEED && f == s->sheet->feed)
            *x = px, *y = py;
    }
}

static void draw_words(show_state *s)
{
    ev_show_words words;
    double k = s->show.size;
    ev_rect block = s->show.words;
    const double baselines[EV_SHOW_LINES] = {48.0, 102.0, 153.0};
    ev_show_word_out(s->sheet, &words);
    s->pen.strength = s->sheet->stale ? EV_STALE : 1.0;
    for (int i = 0; i < EV_SHOW_LINES; ++i) {
        char name[32];
        snprintf(name, sizeof name, "text.show.%d", i + 1);
        bool last = i + 1 == EV_SHOW_LINES;
        ev_text(&s->pen, (ev_words){.name = name,
                                    .string = words.line[i],
                                    .font = sized(last ? EV_FONT_SHOW_SHARE : EV_FONT_SHOW, k),
                                    .colour = last ? s->pen.theme->second : s->pen.theme->ink,
                                    .x = block.x,
                                    .width = block.width,
                                    .baseline = block.y + k * baselines[i],
                                    .least = 18.0 * k,
                                    .bold = (const int(*)[2])words.bold[i],
                                    .bold_count = words.bold_count[i]});
    }
    s->pen.strength = 1.0;
}

static ev_rect draw_button(show_state *s, const char *name, const char *label, double end)
{
    double k = s->show.size, width = ev_text_width(label, sized(EV_FONT_SHOW_NOTE, k)) + 1.0;
    double middle = s->show.page.height - 36.0 * k;
    ev_rect box = {end - width - 14.0 * k, middle - 0.5 * EV_TOUCH * k, width + 28.0 * k,
                   EV_TOUCH * k};
    char text[48];
    snprintf(text, sizeof text, "text.%s", name);
    bool pointed = ev_pointed(s->sheet, name);
    ev_boxes_add(s->pen.boxes, EV_BOX_BUTTON, name, box);
    if (pointed)
        ev_pen_fill(&s->pen, box, 4.0 * k, s->pen.theme->fill, 1.0);
    ev_text(&s->pen, (ev_words){.name = text,
                                .string = label,
                                .font = sized(EV_FONT_SHOW_NOTE, k),
                                .colour = pointed ? s->pen.theme->ink : s->pen.theme->second,
                                .x = end - width,
                                .width = width,
                                .baseline = middle + 5.0 * k});
    return box;
}

static void draw_foot(show_state *s)
{
    double k = s->show.size, end = s->show.page.width - 48.0 * k;
    ev_rect box = draw_button(s, "button.back", "Esc: back to work", end);
    if (s->sheet->verdict->move_count > 0)
        box = draw_button(s, "button.move", "Space: where it belongs", box.x - 10.0 * k);
    ev_text(&s->pen,
            (ev_words){.name = "text.show.hint",
                       .string = "Drag the yellow ring to the middle of the target, or use the "
                                 "arrow keys.",
                       .font = sized(EV_FONT_SHOW_NOTE, k),
                       .colour = s->pen.theme->second,
                       .x = 48.0 * k,
                       .width = box.x - 60.0 * k,
                       .baseline = s->show.page.height - 31.0 * k,
                       .least = EV_LEAST_TYPE});
}

void ev_draw_show(cairo_t *cairo, double width, double height, const ev_sheet *sheet,
                  ev_boxes *boxes, ev_plot_map *section, ev_plot_map *detail)
{
    show_state s = {.sheet = sheet, .show = ev_show_fit(width, height, sheet)};
    s.pen = ev_pen_begin(cairo, sheet->dark, boxes, "show", s.show.page);
    s.stroke = 1.3 * s.show.size;
    s.flat = (ev_plot_map){.x_scale = s.show.scale / s.stroke, .y_scale = -s.show.scale / s.stroke};
    s.factor = sheet->front_exaggeration > 0.0
                   ? sheet->front_exaggeration
                   : ev_front_factor(sheet, s.show.scale, ev_show_front_room(&s.show));
    double x = 0.0, y = 0.0;
    ev_pen_ground(&s.pen);
    ev_boxes_add(boxes, EV_BOX_PLOT, "plot.section", s.show.page);
    draw_ground(&s);
    draw_antenna(&s);
    add_parts(&s, &x, &y);
    draw_words(&s);
    ev_show_labels(&s.pen, sheet, &s.show, s.factor);
    ev_detail_style style = {
        .showing = true, .turn = s.show.turn, .handle = EV_HANDLE_SHOWING * s.show.size};
    ev_detail_draw(&s.pen, sheet, s.show.target, style, x, y, detail);
    draw_foot(&s);
    *section = s.show.map;
    ev_pen_end(&s.pen);
}
