/* The map of the Aperture plate: path error in diverging colours with level lines, and the shadows
 * on it by their exact outlines. No clip is set where a path does the same: on an image a clip that
 * is not a rectangle costs several times the drawing. */
#include "draw/aperture_map.h"

#include "draw/contour.h"
#include "draw/stage.h"

#include <math.h>
#include <stdint.h>
#include <string.h>

enum { SIDE = EV_APERTURE_SIDE, TONES = 255, LEVELS_A_SIDE = 4 };

static double largest_error(const ev_sheet *sheet)
{
    double largest = 0.0, middle = 0.5 * (SIDE - 1);
    for (int i = 0; sheet->aperture && i < SIDE * SIDE; ++i)
        if (isfinite(sheet->aperture[i]) && hypot(i / SIDE - middle, i % SIDE - middle) <= middle)
            largest = fmax(largest, fabs((double)sheet->aperture[i]));
    return largest;
}

double ev_aperture_range(const ev_sheet *sheet)
{
    static const double steps[] = {1.0, 1.5, 2.0, 3.0, 4.0, 5.0, 6.0, 8.0, 10.0};
    double largest = fmax(largest_error(sheet), sheet->antenna->wavelength / 50.0);
    double decade = pow(10.0, floor(log10(largest)));
    for (size_t i = 0; i < sizeof steps / sizeof steps[0]; ++i)
        if (steps[i] * decade >= largest)
            return steps[i] * decade;
    return 10.0 * decade;
}

/* Beyond the last samples, at the rim and in the hole, the map goes on straight for one more, so
 * that colours and lines reach the edge itself. */
static void extend_field(double field[SIDE][SIDE])
{
    static const int step[4][2] = {{0, 1}, {0, -1}, {1, 0}, {-1, 0}};
    double before[SIDE][SIDE];
    memcpy(before, field, sizeof before);
    for (int r = 0; r < SIDE; ++r)
        for (int c = 0; c < SIDE; ++c) {
            double sum = 0.0;
            int count = 0;
            for (int k = 0; isnan(before[r][c]) && k < 4; ++k) {
                int r2 = r + 2 * step[k][0], c2 = c + 2 * step[k][1];
                if (r2 < 0 || c2 < 0 || r2 >= SIDE || c2 >= SIDE)
                    continue;
                double on = 2.0 * before[r + step[k][0]][c + step[k][1]] - before[r2][c2];
                if (!isnan(on)) {
                    sum += on;
                    ++count;
                }
            }
            if (count > 0)
                field[r][c] = sum / count;
        }
}

static void load_field(const ev_sheet *sheet, double field[SIDE][SIDE])
{
    for (int r = 0; r < SIDE; ++r)
        for (int c = 0; c < SIDE; ++c)
            field[r][c] = (double)sheet->aperture[r * SIDE + c];
    extend_field(field);
}

static uint32_t pack_colour(ev_colour colour)
{
    return 0xFF000000u | (uint32_t)lround(255.0 * colour.r) << 16 |
           (uint32_t)lround(255.0 * colour.g) << 8 | (uint32_t)lround(255.0 * colour.b);
}

/* The colours of a theme as pixels, mixed once a thread. */
static const uint32_t *tones_of(const ev_theme *theme)
{
    static _Thread_local uint32_t tones[2][TONES];
    static _Thread_local bool ready[2];
    int dark = theme == ev_theme_get(true);
    for (int i = 0; !ready[dark] && i < TONES; ++i)
        tones[dark][i] = pack_colour(ev_theme_path_error(theme, 2.0 * i / (TONES - 1) - 1.0));
    ready[dark] = true;
    return tones[dark];
}

static void trace_aperture(ev_pen *pen, const ev_aperture_map *map, double hole)
{
    cairo_new_sub_path(pen->cairo);
    cairo_arc(pen->cairo, map->x, map->y, map->radius, 0.0, 2.0 * EV_PI);
    if (hole > 0.0) {
        cairo_new_sub_path(pen->cairo);
        cairo_arc_negative(pen->cairo, map->x, map->y, hole, 2.0 * EV_PI, 0.0);
    }
}

/* Samples lie on the corners of the square, so the picture reaches half a sample beyond it; it is
 * mirrored, because +y is to the left. */
static void paint_field(ev_pen *pen, const ev_aperture_map *map, double hole,
                        double field[SIDE][SIDE])
{
    const uint32_t *tones = tones_of(pen->theme);
    cairo_surface_t *image = cairo_image_surface_create(CAIRO_FORMAT_RGB24, SIDE, SIDE);
    unsigned char *data = cairo_image_surface_get_data(image);
    if (!data) {
        cairo_surface_destroy(image);
        return;
    }
    int stride = cairo_image_surface_get_stride(image);
    for (int r = 0; r < SIDE; ++r)
        for (int c = 0; c < SIDE; ++c) {
            double error = isnan(field[r][c]) ? 0.0 : field[r][c] / map->range;
            double tone = 0.5 * (fmin(fmax(error, -1.0), 1.0) + 1.0) * (TONES - 1);
            uint32_t pixel = tones[(int)lround(tone)];
            memcpy(data + r * stride + 4 * (SIDE - 1 - c), &pixel, sizeof pixel);
        }
    cairo_surface_mark_dirty(image);
    double step = 2.0 * map->radius / (SIDE - 1);
    cairo_pattern_t *pattern = cairo_pattern_create_for_surface(image);
    cairo_matrix_t matrix;
    cairo_matrix_init_scale(&matrix, 1.0 / step, 1.0 / step);
    cairo_matrix_translate(&matrix, -(map->x - map->radius - 0.5 * step),
                           -(map->y - map->radius - 0.5 * step));
    cairo_pattern_set_matrix(pattern, &matrix);
    cairo_pattern_set_filter(pattern, CAIRO_FILTER_BILINEAR);
    cairo_pattern_set_extend(pattern, CAIRO_EXTEND_PAD);
    cairo_set_source(pen->cairo, pattern);
    trace_aperture(pen, map, hole);
    cairo_fill(pen->cairo);
    cairo_pattern_destroy(pattern);
    cairo_surface_destroy(image);
}

typedef struct line_path {
    ev_pen *pen;
    cairo_t *cairo;
    int level; /* of the path being gathered, -1 before the first */
    const ev_aperture_map *map;
    double hole; /* page */
} line_path;

static void sample_to_page(const line_path *path, const double point[2], double page[2])
{
    double step = 2.0 * path->map->radius / (SIDE - 1);
    page[0] = path->map->x + path->map->radius - step * point[0];
    page[1] = path->map->y - path->map->radius + step * point[1];
}

/* How far a point is inside the ring between hole and rim, page; negative outside. */
static double inside_ring(const line_path *path, const double page[2])
{
    double away = hypot(page[0] - path->map->x, page[1] - path->map->y);
    return fmin(path->map->radius - away, path->hole > 0.0 ? away - path->hole : away);
}

static void flush_lines(line_path *path)
{
    bool is_even = path->level == LEVELS_A_SIDE;
    ev_pen_colour(path->pen, path->pen->theme->ink, is_even ? 0.85 : 0.32);
    cairo_set_line_width(path->cairo, is_even ? 1.1 : 0.75);
    cairo_stroke(path->cairo);
}

/* The stretches of a line inside the ring. */
static void add_line(void *context, int level, const double (*points)[2], int count, bool closed)
{
    line_path *path = context;
    if (level != path->level) {
        flush_lines(path);
        path->level = level;
    }
    double before[2], now[2];
    sample_to_page(path, points[0], before);
    double inside_before = inside_ring(path, before);
    cairo_move_to(path->cairo, before[0], before[1]);
    for (int i = 1; i < count + closed; ++i) {
        sample_to_page(path, points[i % count], now);
        double inside = inside_ring(path, now);
        double share = inside_before / (inside_before - inside);
        double cross[2] = {before[0] + share * (now[0] - before[0]),
                           before[1] + share * (now[1] - before[1])};
        if (inside_before < 0.0 && inside >= 0.0)
            cairo_move_to(path->cairo, cross[0], cross[1]);
        if (inside >= 0.0)
            cairo_line_to(path->cairo, now[0], now[1]);
        else if (inside_before >= 0.0)
            cairo_line_to(path->cairo, cross[0], cross[1]);
        memcpy(before, now, sizeof before);
        inside_before = inside;
    }
}

static void draw_lines(ev_pen *pen, const ev_aperture_map *map, double hole,
                       double field[SIDE][SIDE])
{
    double levels[2 * LEVELS_A_SIDE + 1];
    for (int i = -LEVELS_A_SIDE; i <= LEVELS_A_SIDE; ++i)
        levels[i + LEVELS_A_SIDE] = i * map->range / LEVELS_A_SIDE;
    line_path path = {.pen = pen, .cairo = pen->cairo, .level = -1, .map = map, .hole = hole};
    cairo_set_line_join(pen->cairo, CAIRO_LINE_JOIN_ROUND);
    ev_contour(&field[0][0], SIDE, SIDE, levels, 2 * LEVELS_A_SIDE + 1, add_line, &path);
    flush_lines(&path);
    cairo_set_line_join(pen->cairo, CAIRO_LINE_JOIN_MITER);
}

/* Metres from the aperture's centre, (x, y), to the page. */
static void enter_aperture(ev_pen *pen, const ev_aperture_map *map)
{
    cairo_matrix_t matrix;
    cairo_matrix_init(&matrix, 0.0, -map->scale, -map->scale, 0.0, map->x, map->y);
    cairo_save(pen->cairo);
    cairo_transform(pen->cairo, &matrix);
}

static void trace_outline(cairo_t *cairo, const ev_outline *outline, double centre_x)
{
    cairo_matrix_t matrix;
    cairo_matrix_init(&matrix, outline->ux, outline->uy, outline->vx, outline->vy,
                      outline->x - centre_x, outline->y);
    cairo_save(cairo);
    cairo_transform(cairo, &matrix);
    cairo_new_sub_path(cairo);
    cairo_arc(cairo, 0.0, 0.0, 1.0, 0.0, 2.0 * EV_PI);
    cairo_restore(cairo);
}

static void trace_strip(cairo_t *cairo, const ev_strip *strip, double radius)
{
    double to = fmin(strip->to, radius), from = fmax(strip->from, strip->half_width);
    if (!(to > from))
        return;
    double inner = asin(strip->half_width / from), outer = asin(strip->half_width / to);
    cairo_new_sub_path(cairo);
    cairo_arc(cairo, 0.0, 0.0, to, strip->angle - outer, strip->angle + outer);
    cairo_arc_negative(cairo, 0.0, 0.0, from, strip->angle + inner, strip->angle - inner);
    cairo_close_path(cairo);
}

/* Every shadow by its own outline. Strips end at the rim; ellipses may lie across it. */
static void draw_shadows(ev_pen *pen, const ev_aperture_map *map, const ev_shadows *shadows,
                         double hole)
{
    /* Opaque, so that what overlaps is not darker. */
    ev_pen_colour(pen, ev_colour_mix(pen->theme->ground, pen->theme->ink, 0.88), 1.0);
    enter_aperture(pen, map);
    for (int i = 0; i < shadows->strip_count; ++i)
        if (shadows->strips[i].half_width > 0.0)
            trace_strip(pen->cairo, &shadows->strips[i], shadows->radius);
    cairo_fill(pen->cairo);
    cairo_restore(pen->cairo);
    if (!shadows->has_sub && shadows->body_count == 0)
        return;
    cairo_save(pen->cairo);
    trace_aperture(pen, map, hole);
    cairo_clip(pen->cairo);
    enter_aperture(pen, map);
    for (int i = 0; i < shadows->body_count; ++i)
        trace_outline(pen->cairo, &shadows->bodies[i], shadows->centre_x);
    if (shadows->has_sub)
        trace_outline(pen->cairo, &shadows->sub, shadows->centre_x);
    cairo_fill(pen->cairo);
    cairo_restore(pen->cairo);
    cairo_restore(pen->cairo);
}

void ev_aperture_picture(ev_pen *pen, const ev_sheet *sheet, const ev_aperture_map *map)
{
    double hole = map->scale * sheet->antenna->hole_radius;
    if (sheet->aperture) {
        double field[SIDE][SIDE];
        load_field(sheet, field);
        paint_field(pen, map, hole, field);
        if (!ev_is_even(largest_error(sheet), sheet))
            draw_lines(pen, map, hole, field);
    }
    draw_shadows(pen, map, &sheet->antenna->shadows, hole);
    if (pen->strength < 1.0) {
        /* What is stale pales toward the ground, picture and all. */
        trace_aperture(pen, map, hole);
        cairo_set_source_rgba(pen->cairo, pen->theme->ground.r, pen->theme->ground.g,
                              pen->theme->ground.b, 1.0 - pen->strength);
        cairo_fill(pen->cairo);
    }
    ev_pen_circle(pen, map->x, map->y, map->radius, pen->theme->ink, 1.8, 1.0);
    if (hole > 0.0)
        ev_pen_circle(pen, map->x, map->y, hole, pen->theme->ink, 1.2, 1.0);
    ev_boxes_add(pen->boxes, EV_BOX_PLOT, "plate.aperture",
                 (ev_rect){map->x - map->radius, map->y - map->radius, 2.0 * map->radius,
                           2.0 * map->radius});
}
