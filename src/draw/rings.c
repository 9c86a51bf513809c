/* The rings of the Detail: lines of equal loss, which are the part's tolerance, seen. */
#include "draw/contour.h"
#include "draw/detail.h"

#include <math.h>
#include <stdio.h>

enum { FINE = 65, PADDED = FINE + 2, SPOT_CAPACITY = 128 };

/* Labels closer than this tell nothing apart. */
static const double label_room = 22.0;

typedef struct ring_level {
    double db;
    const char *label;
} ring_level;

/* Outermost first. Showing: the signal that is left, in percent. */
static const ring_level levels_db[] = {
    {4.0, "4"}, {2.0, "2"}, {1.0, "1 dB"}, {0.5, "0.5"}, {0.1, "0.1"}};
static const ring_level levels_percent[] = {{3.0103, "50 %"}, {0.9691, "80 %"}, {0.08774, "98 %"}};

/* Where a ring may carry its label; the higher the score the better. */
typedef struct ring_spot {
    double x, y, score;
} ring_spot;

typedef struct ring_spots {
    double width;
    ring_spot items[SPOT_CAPACITY];
    int count;
} ring_spots;

typedef struct rings {
    ev_pen *pen;
    const ev_detail *detail;
    int level; /* of the path being gathered, -1 before the first */
    double handle[2], best[2], heading;
    const ring_level *levels;
    int level_count;
    ev_font font;
    ring_spots spots[EV_RING_CAPACITY];
} rings;

/* Minus the square root of the loss: nearly straight across a ring, so that lines between samples
 * fall where they should, and falling outward. The low rim closes every ring at the map's edge. */
static void sample_field(const ev_loss_map *map, double field[PADDED][PADDED])
{
    for (int r = 0; r < PADDED; ++r)
        for (int c = 0; c < PADDED; ++c) {
            bool is_rim = r == 0 || c == 0 || r == PADDED - 1 || c == PADDED - 1;
            double right = map->centre[0] + map->extent * (2.0 * (c - 1) / (FINE - 1) - 1.0);
            double up = map->centre[1] + map->extent * (2.0 * (r - 1) / (FINE - 1) - 1.0);
            field[r][c] = is_rim ? -1e6 : -sqrt(fmax(ev_loss_map_at(map, right, up), 0.0));
        }
}

static void sample_to_page(const ev_detail *detail, const double point[2], double *x, double *y)
{
    const ev_loss_map *map = detail->loss;
    double right = map->centre[0] + map->extent * (2.0 * (point[0] - 1.0) / (FINE - 1) - 1.0);
    double up = map->centre[1] + map->extent * (2.0 * (point[1] - 1.0) / (FINE - 1) - 1.0);
    ev_plot_to_page(&detail->map, right, up, x, y);
}

/* Darker the more is lost. */
static ev_colour shade(const rings *r, int level)
{
    const ev_theme *theme = r->pen->theme;
    double share = 0.19 * (1.0 - (level + 1.0) / r->level_count);
    return ev_colour_mix(theme->ground, theme->ink, share);
}

static void flush_ring(rings *r)
{
    if (r->level < 0)
        return;
    ev_pen *pen = r->pen;
    ev_pen_colour(pen, shade(r, r->level), 1.0);
    cairo_fill_preserve(pen->cairo);
    ev_pen_colour(pen, pen->theme->ink, 0.5);
    cairo_set_line_width(pen->cairo, 0.8);
    cairo_stroke(pen->cairo);
}

/* A label stands best where its ring lies beyond the best place as seen from the handle. */
static void consider_spot(rings *r, ring_spots *spots, double x, double y)
{
    const ev_detail *detail = r->detail;
    double inset = detail->radius - 9.0 - 0.5 * spots->width;
    bool is_taken = !detail->showing && fabs(y - detail->words_y) < 17.0;
    if (spots->count == SPOT_CAPACITY || is_taken || hypot(x - detail->x, y - detail->y) > inset ||
        hypot(x - r->handle[0], y - r->handle[1]) < detail->handle + 14.0 + 0.5 * spots->width)
        return;
    double turn = remainder(atan2(y - r->best[1], x - r->best[0]) - r->heading, 2.0 * EV_PI);
    spots->items[spots->count++] = (ring_spot){x, y, EV_PI - fabs(turn)};
}

static void add_ring(void *context, int level, const double (*points)[2], int count, bool closed)
{
    rings *r = context;
    cairo_t *cairo = r->pen->cairo;
    if (level != r->level) {
        flush_ring(r);
        r->level = level;
    }
    for (int i = 0; i < count; ++i) {
        double x, y;
        sample_to_page(r->detail, points[i], &x, &y);
        if (i == 0)
            cairo_move_to(cairo, x, y);
        else
            cairo_line_to(cairo, x, y);
        if (i % 2 == 0)
            consider_spot(r, &r->spots[level], x, y);
    }
    if (closed)
        cairo_close_path(cairo);
}

static ev_font label_font(const ev_detail *detail)
{
    return detail->showing ? (ev_font){false, 14.0, 600} : EV_FONT_NOTE_STRONG;
}

static rings start_rings(ev_pen *pen, const ev_detail *detail)
{
    rings r = {.pen = pen, .detail = detail, .level = -1};
    r.levels = detail->showing ? levels_percent : levels_db;
    r.level_count = (int)(detail->showing ? sizeof levels_percent / sizeof levels_percent[0]
                                          : sizeof levels_db / sizeof levels_db[0]);
    r.font = label_font(detail);
    ev_plot_to_page(&detail->map, detail->place[0], detail->place[1], &r.handle[0], &r.handle[1]);
    ev_plot_to_page(&detail->map, detail->loss->best[0], detail->loss->best[1], &r.best[0],
                    &r.best[1]);
    double dx = r.best[0] - r.handle[0], dy = r.best[1] - r.handle[1];
    r.heading = hypot(dx, dy) > 3.0 ? atan2(dy, dx) : -2.4;
    for (int i = 0; i < r.level_count; ++i)
        r.spots[i].width = ev_text_width(r.levels[i].label, r.font);
    return r;
}

/* Distance to the nearest label chosen before, page; negative where they would touch. */
static double room_at(const ring_spot *spot, double width, const ev_ring_labels *labels)
{
    double room = 60.0;
    for (int i = 0; i < labels->count; ++i) {
        const ev_ring_label *other = &labels->items[i];
        double dx = fabs(spot->x - other->x), dy = fabs(spot->y - other->y);
        if (dx < 0.5 * (width + other->width) + 5.0 && dy < 15.0)
            return -1.0;
        room = fmin(room, hypot(dx, dy));
    }
    return room;
}

/* Inner rings choose first; each takes the best of its spots that are clear of those before. */
static void choose_labels(const rings *r, ev_ring_labels *labels)
{
    for (int i = r->level_count - 1; i >= 0; --i) {
        const ring_spots *spots = &r->spots[i];
        ev_ring_label best = {.width = spots->width};
        double score = -1.0;
        for (int k = 0; k < spots->count; ++k) {
            const ring_spot *spot = &spots->items[k];
            double room = room_at(spot, spots->width, labels);
            if (room >= label_room && spot->score + 0.03 * room > score) {
                score = spot->score + 0.03 * room;
                best.x = spot->x;
                best.y = spot->y;
            }
        }
        if (score < 0.0)
            continue;
        snprintf(best.text, sizeof best.text, "%s", r->levels[i].label);
        labels->items[labels->count++] = best;
    }
}

void ev_rings_draw(ev_pen *pen, const ev_detail *detail, ev_ring_labels *labels)
{
    double field[PADDED][PADDED], levels[EV_RING_CAPACITY];
    sample_field(detail->loss, field);
    rings r = start_rings(pen, detail);
    for (int i = 0; i < r.level_count; ++i)
        levels[i] = -sqrt(r.levels[i].db);
    ev_pen_colour(pen, shade(&r, -1), 1.0);
    cairo_paint(pen->cairo);
    cairo_set_fill_rule(pen->cairo, CAIRO_FILL_RULE_EVEN_ODD);
    cairo_set_line_join(pen->cairo, CAIRO_LINE_JOIN_ROUND);
    ev_contour(&field[0][0], PADDED, PADDED, levels, r.level_count, add_ring, &r);
    flush_ring(&r);
    cairo_set_line_join(pen->cairo, CAIRO_LINE_JOIN_MITER);
    cairo_set_fill_rule(pen->cairo, CAIRO_FILL_RULE_WINDING);
    labels->count = 0;
    choose_labels(&r, labels);
}

void ev_rings_label(ev_pen *pen, const ev_detail *detail, const ev_ring_labels *labels)
{
    for (int i = 0; i < labels->count; ++i) {
        const ev_ring_label *label = &labels->items[i];
        char name[48];
        snprintf(name, sizeof name, "text.detail.ring.%d", i);
        ev_text(pen, (ev_words){.name = name,
                                .string = label->text,
                                .font = label_font(detail),
                                .colour = pen->theme->ink,
                                .x = label->x - 0.5 * label->width,
                                .width = label->width + 1.0,
                                .baseline = label->y + 4.0,
                                .halo = true});
    }
}
