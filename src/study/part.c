/* Moving parts along their own axes, and where they sit best. Called by the verdict, the loss map
 * and the window's handle. */
#include "study/part.h"

#include "optics/budget.h"

const char *ev_part_word(ev_part part)
{
    return part == EV_PART_FEED ? "feed" : "sub";
}

const char *ev_axis_word(ev_part_axis axis)
{
    static const char *const words[] = {"out", "up", "across"};
    return words[axis];
}

ev_vec3 ev_part_axis_direction(const ev_antenna *antenna, ev_part part, int feed, ev_part_axis axis)
{
    static const ev_vec3 fixed[] = {{0.0, 0.0, 1.0}, {1.0, 0.0, 0.0}, {0.0, 1.0, 0.0}};
    if (part == EV_PART_SUB)
        return fixed[axis];
    ev_vec3 out = ev_vec3_scale(-1.0, antenna->feeds[feed].axis);
    if (axis == EV_AXIS_OUT)
        return out;
    ev_vec3 hint = fabs(out.x) < 0.999 ? fixed[EV_AXIS_UP] : fixed[EV_AXIS_OUT];
    ev_vec3 up = ev_vec3_unit(ev_vec3_along(hint, -ev_vec3_dot(hint, out), out));
    if (axis == EV_AXIS_UP)
        return up;
    ev_vec3 across = ev_vec3_cross(out, up);
    return across.y < 0.0 ? ev_vec3_scale(-1.0, across) : across;
}

void ev_part_move(ev_design *design, const ev_antenna *antenna, ev_part part, int feed,
                  ev_part_axis axis, double by)
{
    ev_vec3 direction = ev_part_axis_direction(antenna, part, feed, axis);
    if (part == EV_PART_SUB)
        design->sub.shift = ev_vec3_along(design->sub.shift, by, direction);
    else if (axis == EV_AXIS_OUT)
        design->feeds[feed].defocus += by;
    else
        design->feeds[feed].shift = ev_vec3_along(design->feeds[feed].shift, by, direction);
}

double ev_part_place(const ev_design *design, const ev_antenna *antenna, ev_part part, int feed,
                     ev_part_axis axis)
{
    ev_vec3 direction = ev_part_axis_direction(antenna, part, feed, axis);
    if (part == EV_PART_SUB)
        return ev_vec3_dot(design->sub.shift, direction);
    const ev_feed *at = &antenna->feeds[feed];
    return ev_vec3_dot(ev_vec3_sub(at->position, at->nominal), direction);
}

/* One part of one design, being moved. */
typedef struct mover {
    ev_design design;
    ev_antenna antenna; /* of the design as it stands */
    double frequency;
    ev_part part;
    int feed;
} mover;

static double gain_at(const mover *from, const double by[EV_AXIS_COUNT])
{
    ev_design design = from->design;
    ev_antenna antenna;
    for (int axis = 0; axis < EV_AXIS_COUNT; axis++)
        ev_part_move(&design, &from->antenna, from->part, from->feed, (ev_part_axis)axis, by[axis]);
    ev_antenna_build(&design, from->frequency, &antenna);
    return ev_axis_gain_dbi(&antenna, from->feed);
}

static void make_mover(const ev_design *design, double frequency, ev_part part, int feed,
                       mover *out)
{
    *out = (mover){.design = *design, .frequency = frequency, .part = part, .feed = feed};
    ev_antenna_build(design, frequency, &out->antenna);
}

double ev_part_gain_at(const ev_design *design, double frequency, ev_part part, int feed,
                       const double by[EV_AXIS_COUNT])
{
    mover from;
    make_mover(design, frequency, part, feed, &from);
    return gain_at(&from, by);
}

/* Steps for differences: a small part of the range over which the loss grows, which goes with the
 * wavelength, sideways with f/D and along the axis with its square. */
static double step_of(const mover *from, ev_part_axis axis)
{
    const ev_antenna *antenna = &from->antenna;
    double f = from->part == EV_PART_FEED ? antenna->layout.equivalent_focal_length
                                          : antenna->focal_length;
    double ratio = fmax(0.3, f / (2.0 * antenna->radius));
    double step = 0.05 * antenna->wavelength * ratio;
    return axis == EV_AXIS_OUT ? 3.0 * step * ratio : step;
}

/* Moves that would put the part where the geometry wants it for the beam: nominal, and for a feed
 * with a beam of its own, aside by the focal length times the angle (either way: an ellipsoid
 * turns the picture over). */
static void geometric_move(const mover *from, double side, double by[EV_AXIS_COUNT])
{
    const ev_feed *feed = &from->antenna.feeds[from->feed];
    double f = from->antenna.layout.equivalent_focal_length * side;
    ev_vec3 aside = {f * feed->wanted.x, f * feed->wanted.y, 0.0};
    for (int i = 0; i < EV_AXIS_COUNT; i++) {
        ev_part_axis axis = (ev_part_axis)i;
        ev_vec3 direction = ev_part_axis_direction(&from->antenna, from->part, from->feed, axis);
        by[i] = -ev_part_place(&from->design, &from->antenna, from->part, from->feed, axis);
        if (from->part == EV_PART_FEED && axis != EV_AXIS_OUT)
            by[i] += ev_vec3_dot(aside, direction);
    }
}

typedef struct slope {
    double value, gradient[EV_AXIS_COUNT], hessian[EV_AXIS_COUNT][EV_AXIS_COUNT];
} slope;

/* Gradient and Hessian of the loss by central differences, along the free axes. */
static slope measure(const mover *from, const double at[EV_AXIS_COUNT],
                     const bool axes[EV_AXIS_COUNT])
{
    slope found = {.value = -gain_at(from, at)};
    double plus[EV_AXIS_COUNT], minus[EV_AXIS_COUNT], h[EV_AXIS_COUNT];
    for (int i = 0; i < EV_AXIS_COUNT; i++) {
        double moved[EV_AXIS_COUNT] = {at[0], at[1], at[2]};
        h[i] = step_of(from, (ev_part_axis)i);
        found.hessian[i][i] = 1.0;
        if (!axes[i])
            continue;
        moved[i] = at[i] + h[i];
        plus[i] = -gain_at(from, moved);
        moved[i] = at[i] - h[i];
        minus[i] = -gain_at(from, moved);
        found.gradient[i] = (plus[i] - minus[i]) / (2.0 * h[i]);
        found.hessian[i][i] = (plus[i] - 2.0 * found.value + minus[i]) / (h[i] * h[i]);
    }
    for (int i = 0; i < EV_AXIS_COUNT; i++)
        for (int k = 0; k < i; k++) {
            if (!axes[i] || !axes[k])
                continue;
            double moved[EV_AXIS_COUNT] = {at[0], at[1], at[2]};
            moved[i] += h[i];
            moved[k] += h[k];
            double both = -gain_at(from, moved);
            found.hessian[i][k] = found.hessian[k][i] =
                (both - plus[i] - plus[k] + found.value) / (h[i] * h[k]);
        }
    return found;
}

static ev_vec3 row(const slope *s, int i)
{
    return ev_vec3_make(s->hessian[i][0], s->hessian[i][1], s->hessian[i][2]);
}

/* Newton step where the loss is convex, else a fixed step downhill along each axis. */
static void descend(const mover *from, const slope *s, double step[EV_AXIS_COUNT])
{
    ev_vec3 r0 = row(s, 0), r1 = row(s, 1), r2 = row(s, 2);
    ev_vec3 g = {-s->gradient[0], -s->gradient[1], -s->gradient[2]};
    double det = ev_vec3_dot(r0, ev_vec3_cross(r1, r2));
    double minor = r0.x * r1.y - r0.y * r1.x;
    if (r0.x > 0.0 && minor > 0.0 && det > 0.0) {
        step[0] = ev_vec3_dot(g, ev_vec3_cross(r1, r2)) / det;
        step[1] = ev_vec3_dot(r0, ev_vec3_cross(g, r2)) / det;
        step[2] = ev_vec3_dot(r0, ev_vec3_cross(r1, g)) / det;
        return;
    }
    for (int i = 0; i < EV_AXIS_COUNT; i++)
        step[i] = s->gradient[i] == 0.0
                      ? 0.0
                      : -copysign(4.0 * step_of(from, (ev_part_axis)i), s->gradient[i]);
}

enum { DESCENT_LIMIT = 12 };

static slope descend_from(const mover *from, double at[EV_AXIS_COUNT],
                          const bool axes[EV_AXIS_COUNT])
{
    slope here = measure(from, at, axes);
    for (int pass = 0; pass < DESCENT_LIMIT; pass++) {
        double step[EV_AXIS_COUNT], part = 1.0, won = 0.0;
        descend(from, &here, step);
        for (; part > 0.05; part *= 0.5) {
            double next[EV_AXIS_COUNT];
            for (int i = 0; i < EV_AXIS_COUNT; i++)
                next[i] = at[i] + part * step[i];
            won = here.value + gain_at(from, next);
            if (won >= 0.0) {
                for (int i = 0; i < EV_AXIS_COUNT; i++)
                    at[i] = next[i];
                break;
            }
        }
        if (part <= 0.05)
            break;
        here = measure(from, at, axes);
        if (won < 1e-5)
            break;
    }
    return here;
}

ev_best ev_part_best(const ev_design *design, double frequency, ev_part part, int feed,
                     const bool axes[EV_AXIS_COUNT])
{
    mover from;
    make_mover(design, frequency, part, feed, &from);
    ev_best best = {0};
    double at[EV_AXIS_COUNT] = {0};
    best.now_dbi = best.best_dbi = gain_at(&from, at);
    double start = best.now_dbi;
    for (int side = -1; side <= 1; side += 2) {
        double by[EV_AXIS_COUNT];
        geometric_move(&from, side, by);
        for (int i = 0; i < EV_AXIS_COUNT; i++)
            by[i] = axes[i] ? by[i] : 0.0;
        double there = gain_at(&from, by);
        for (int i = 0; i < EV_AXIS_COUNT && there > start; i++)
            at[i] = by[i];
        start = fmax(start, there);
    }
    slope end = descend_from(&from, at, axes);
    best.best_dbi = -end.value;
    for (int i = 0; i < EV_AXIS_COUNT; i++) {
        best.by[i] = at[i];
        best.bend[i] = axes[i] ? fmax(end.hessian[i][i], 0.0) : 0.0;
    }
    return best;
}
