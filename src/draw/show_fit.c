/* Fits the antenna of showing mode onto its page: turned by its elevation, lowest part over the
 * ground, clear of the words and of the target. A search over size and place; the points it looks
 * at are those of the antenna with every part where it belongs, so that nothing shifts under a
 * drag. */
#include "draw/show.h"

#include <math.h>

enum { POINT_CAPACITY = 96, STEPS = 16, SIZES = 60 };

/* Outline in antenna (z, x), turned about the origin, y down, in metres. */
typedef struct show_shape {
    double u[POINT_CAPACITY], v[POINT_CAPACITY];
    int count, post; /* points from `post` on may stand among the words' background */
    double left, right, top, bottom;
} show_shape;

static void add_point(show_shape *shape, double turn, double z, double x)
{
    if (shape->count == POINT_CAPACITY || !isfinite(z) || !isfinite(x))
        return;
    double u = z * cos(turn) - x * sin(turn), v = -z * sin(turn) - x * cos(turn);
    shape->u[shape->count] = u;
    shape->v[shape->count++] = v;
    shape->left = fmin(shape->left, u);
    shape->right = fmax(shape->right, u);
    shape->top = fmin(shape->top, v);
    shape->bottom = fmax(shape->bottom, v);
}

static double farthest_z(const ev_antenna *antenna)
{
    double z = ev_main_point(antenna, antenna->offset + antenna->radius, 0.0).z;
    for (int i = 0; antenna->dual && i < 8; ++i)
        z = fmax(z, ev_sub_rim_point(&antenna->sub, 0.25 * i * EV_PI).z);
    for (int f = 0; f < antenna->feed_count; ++f)
        z = fmax(z, antenna->feeds[f].nominal.z);
    return z;
}

/* Whether a post from a place down would stand in the dish, or too near it. */
static bool stands_in_dish(const ev_antenna *antenna, double turn, double u, double v)
{
    for (int i = -32; i <= 32; ++i) {
        ev_vec3 p = ev_main_point(antenna, antenna->offset + i / 32.0 * antenna->radius, 0.0);
        double across = p.z * cos(turn) - p.x * sin(turn) - u;
        double below = -p.z * sin(turn) - p.x * cos(turn) - v;
        if (below > 0.0 && fabs(across) < 0.1 * antenna->radius)
            return true;
    }
    return false;
}

/* The arm holds the dish below its hole; the joint is behind, toward the ground, and its post clear
 * of the dish. */
static void place_joint(const ev_antenna *antenna, ev_show *show)
{
    double c = cos(show->turn), s = sin(show->turn), reach = 0.36 * antenna->radius;
    double u = -0.45 * c, v = 0.45 * s + 0.9, length = hypot(u, v);
    show->held = ev_main_point(antenna, antenna->offset - 1.5 * antenna->hole_radius, 0.0);
    u = show->held.z * c - show->held.x * s + reach * u / length;
    v = -show->held.z * s - show->held.x * c + reach * v / length;
    for (int i = 0; i < 40 && stands_in_dish(antenna, show->turn, u, v); ++i)
        u -= 0.05 * antenna->radius;
    show->joint = (ev_vec3){-u * s - v * c, 0.0, u * c - v * s};
}

static show_shape make_shape(const ev_antenna *antenna, const ev_show *show)
{
    show_shape shape = {.left = INFINITY, .right = -INFINITY, .top = INFINITY, .bottom = -INFINITY};
    double turn = show->turn, r = antenna->radius, bend = 0.05 * 2.0 * r;
    for (int i = -4; i <= 4; ++i) {
        double x = antenna->offset + 0.25 * i * r;
        ev_vec3 p = ev_main_point(antenna, x, 0.0);
        add_point(&shape, turn, p.z, p.x);
        add_point(&shape, turn, show->front_z + bend, x);
    }
    for (int side = -1; side <= 1; side += 2)
        for (int i = 1; i < 8; ++i) {
            ev_vec3 rim = ev_main_point(antenna, antenna->offset + side * r, 0.0);
            add_point(&shape, turn, rim.z + i / 8.0 * (show->front_z - rim.z), rim.x);
        }
    for (int i = 0; antenna->dual && i < 8; ++i) {
        ev_vec3 p = ev_sub_rim_point(&antenna->sub, 0.25 * i * EV_PI);
        add_point(&shape, turn, p.z, p.x);
    }
    for (int f = 0; f < antenna->feed_count; ++f) {
        ev_vec3 p = antenna->feeds[f].nominal, a = antenna->feeds[f].nominal_axis;
        double horn = 3.2 * ev_outline_mouth(antenna, &antenna->feeds[f]);
        add_point(&shape, turn, p.z, p.x);
        add_point(&shape, turn, p.z - horn * a.z, p.x - horn * a.x);
    }
    shape.post = shape.count;
    add_point(&shape, turn, show->joint.z, show->joint.x);
    return shape;
}

static bool lies_in(ev_rect rect, double reach, double x, double y)
{
    return x > rect.x - reach && x < rect.x + rect.width + reach && y > rect.y - reach &&
           y < rect.y + rect.height + reach;
}

static bool is_clear(const ev_show *show, const show_shape *shape, double x, double y)
{
    double reach = 18.0 * show->size, radius = 0.5 * show->target.width + reach;
    double cx = show->target.x + 0.5 * show->target.width;
    double cy = show->target.y + 0.5 * show->target.height;
    for (int i = 0; i < shape->post; ++i) {
        double px = x + show->scale * shape->u[i], py = y + show->scale * shape->v[i];
        if (lies_in(show->words, reach, px, py) || hypot(px - cx, py - cy) < radius)
            return false;
    }
    return true;
}

/* Page y of the origin with the lowest part and the joint as high over the ground as they need. */
static double stand(const ev_show *show, const show_shape *shape)
{
    double lowest = -INFINITY, joint = shape->v[shape->count - 1];
    for (int i = 0; i < shape->post; ++i)
        lowest = fmax(lowest, shape->v[i]);
    return show->ground -
           fmax(show->scale * lowest + 12.0 * show->size, show->scale * joint + 30.0 * show->size);
}

/* The first place that is clear, from the middle of what slack there is outward. */
static bool place(ev_show *show, const show_shape *shape, ev_rect room)
{
    bool stands = isfinite(show->ground);
    double wide = show->scale * (shape->right - shape->left);
    double high = show->scale * (shape->bottom - shape->top);
    double y = stands ? stand(show, shape) : room.y - show->scale * shape->top;
    double spare_y = stands ? 0.0 : room.height - high;
    if (wide > room.width || spare_y < 0.0 || y + show->scale * shape->top < room.y)
        return false;
    for (int row = 0; row <= (stands ? 0 : STEPS); ++row)
        for (int i = 0; i <= STEPS; ++i) {
            double aside = (i + 1) / 2 * (i % 2 ? 1.0 : -1.0) / STEPS;
            double down = (row + 1) / 2 * (row % 2 ? 1.0 : -1.0) / STEPS;
            show->x = room.x - show->scale * shape->left + (0.5 + aside) * (room.width - wide);
            show->y = y + (stands ? 0.0 : (0.5 + down) * spare_y);
            if (is_clear(show, shape, show->x, show->y))
                return true;
        }
    return false;
}

static void lay_out(double width, double height, ev_show *show)
{
    double k = show->size = fmin(fmax(fmin(width / 1280.0, height / 800.0), 1.0), 2.5);
    double tight = fmin(fmin(width / 1280.0, height / 800.0), 1.0), radius = 122.0 * k * tight;
    show->page = (ev_rect){0.0, 0.0, width, height};
    show->words = (ev_rect){48.0 * k, 44.0 * k, fmin(0.48 * width, 620.0 * k), 172.0 * k};
    double floor = height - 74.0 * k;
    show->target = (ev_rect){width - 40.0 * k - 2.0 * radius, floor - 14.0 * k - 2.0 * radius,
                             2.0 * radius, 2.0 * radius};
}

ev_show ev_show_fit(double width, double height, const ev_sheet *sheet)
{
    const ev_antenna *antenna = sheet->antenna;
    ev_show show = {.ground = NAN};
    lay_out(width, height, &show);
    double floor = height - 74.0 * show.size, margin = 44.0 * show.size;
    if (antenna->site.present) {
        show.ground = floor;
        show.turn = antenna->site.elevation;
    }
    show.front_z = farthest_z(antenna) + 0.5 * antenna->radius;
    show.front_z = fmax(show.front_z, 1.5 * antenna->radius);
    place_joint(antenna, &show);
    show_shape shape = make_shape(antenna, &show);
    ev_rect room = {margin, 36.0 * show.size, width - 2.0 * margin, floor - 36.0 * show.size};
    double largest =
        fmin(room.width / (shape.right - shape.left), room.height / (shape.bottom - shape.top));
    show.scale = largest;
    for (int i = 0; i < SIZES && !place(&show, &shape, room); ++i)
        show.scale *= 0.965;
    double c = show.scale * cos(show.turn), s = show.scale * sin(show.turn);
    show.map = (ev_plot_map){
        .x0 = show.x, .x_scale = c, .x_cross = -s, .y0 = show.y, .y_scale = -c, .y_cross = -s};
    return show;
}

double ev_show_front_room(const ev_show *show)
{
    return 46.0 * show->size;
}
