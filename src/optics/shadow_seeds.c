/* Where the make-up of a shadow's slices changes: tangents and corners. Called by the budget's
 * nodes before they sweep an obstacle; knows nothing of rays. */
#include "optics/shadow_curves.h"

#include <stdlib.h>

static int compare_doubles(const void *a, const void *b)
{
    double x = *(const double *)a, y = *(const double *)b;
    return (x > y) - (x < y);
}

typedef struct seeds {
    double *items;
    int count, capacity;
} seeds;

static void add_seed(seeds *to, double value)
{
    if (to->count < to->capacity && isfinite(value))
        to->items[to->count++] = value;
}

static void add_angle(seeds *to, double angle)
{
    add_seed(to, angle - 2.0 * EV_PI * floor(angle / (2.0 * EV_PI)));
}

/* Where radii of the first outline touch the second one: d^T K d = 0 with K from the discriminant
 * of cross_outline, in the angle of the first. */
static void seed_tangents(const ev_outline *own, const ev_outline *other, seeds *to)
{
    vec2 q = to_circle(other, own->x - other->x, own->y - other->y);
    vec2 cx = to_circle(other, own->ux, own->uy), cy = to_circle(other, own->vx, own->vy);
    double k = q.x * q.x + q.y * q.y - 1.0;
    double qx = q.x * cx.x + q.y * cx.y, qy = q.x * cy.x + q.y * cy.y;
    double kxx = qx * qx - k * (cx.x * cx.x + cx.y * cx.y);
    double kxy = qx * qy - k * (cx.x * cy.x + cx.y * cy.y);
    double kyy = qy * qy - k * (cy.x * cy.x + cy.y * cy.y);
    double disc = kxy * kxy - kxx * kyy;
    if (!(k > 0.0 && disc > 0.0))
        return;
    for (int sign = -1; sign <= 1; sign += 2) {
        /* kyy sin^2 + 2 kxy sin cos + kxx cos^2 = 0, by whichever form does not cancel */
        double root = sign * sqrt(disc);
        double angle = fabs(kyy) > fabs(kxx) ? atan2(-kxy + root, kyy) : atan2(kxx, -kxy + root);
        add_angle(to, angle);
        add_angle(to, angle + EV_PI);
    }
}

/* Lines of the strip that touch the outline: its centre's place across, and its half width there.
 */
static void seed_touches(const ev_shadows *shadows, const ev_strip *strip, const ev_outline *other,
                         seeds *to)
{
    double c = cos(strip->angle), s = sin(strip->angle);
    double middle = other->y * c - (other->x - shadows->centre_x) * s;
    double reach = hypot(other->uy * c - other->ux * s, other->vy * c - other->vx * s);
    for (int sign = -1; sign <= 1; sign += 2)
        if (fabs(middle + sign * reach) < strip->half_width)
            add_seed(to, middle + sign * reach);
}

/* Corners that another strip's edges make with circles where either of the two ends. */
static void seed_corners(const ev_shadows *shadows, const ev_strip *own, const ev_strip *other,
                         seeds *to)
{
    const double radii[] = {own->from,      own->to, other->from, other->to, shadows->hole_radius,
                            shadows->radius};
    double turn = other->angle - own->angle, c = cos(turn), s = sin(turn);
    for (int i = 0; i < 6; i++)
        for (int side = -1; side <= 1; side += 2) {
            double edge = side * other->half_width, along = along_at(radii[i], edge);
            double across = along * s + edge * c;
            if (along * c - edge * s > 0.0 && fabs(across) < own->half_width)
                add_seed(to, across);
        }
}

/* > 0 outside b, at the angle t of a. */
static double outside_at(const ev_outline *a, const ev_outline *b, double t)
{
    double c = cos(t), s = sin(t);
    vec2 q = to_circle(b, a->x + c * a->ux + s * a->vx - b->x, a->y + c * a->uy + s * a->vy - b->y);
    return q.x * q.x + q.y * q.y - 1.0;
}

enum { CROSSING_LOOKS = 64 };

/* The lines of an obstacle that run through points where two outlines cross. */
static void seed_crossings(const ev_shadows *shadows, int obstacle, const ev_outline *a,
                           const ev_outline *b, seeds *to)
{
    double step = 2.0 * EV_PI / CROSSING_LOOKS, last = outside_at(a, b, 0.0);
    for (int i = 1; i <= CROSSING_LOOKS; i++) {
        double low = (i - 1) * step, high = i * step, now = outside_at(a, b, high);
        bool crosses = (now > 0.0) != (last > 0.0), outside = last > 0.0;
        last = now;
        for (int k = 0; crosses && k < 46; k++) {
            double middle = 0.5 * (low + high);
            *((outside_at(a, b, middle) > 0.0) == outside ? &low : &high) = middle;
        }
        if (crosses)
            add_seed(to, ev_shadow_line_through(shadows, obstacle,
                                                a->x + cos(low) * a->ux + sin(low) * a->vx,
                                                a->y + cos(low) * a->uy + sin(low) * a->vy));
    }
}

enum { BASE_ANGLES = 8, CIRCLES = 4 };

/* Circles about the aperture centre that can end what an obstacle shadows: rim, hole, and a
 * strip's own two ends. */
static int list_circles(const ev_shadows *shadows, int obstacle, ev_outline circles[CIRCLES])
{
    int count = 0;
    circles[count++] = circle(shadows, shadows->radius);
    if (shadows->hole_radius > 0.0)
        circles[count++] = circle(shadows, shadows->hole_radius);
    if (!ev_shadow_is_strip(shadows, obstacle))
        return count;
    const ev_strip *strip = strip_at(shadows, obstacle);
    if (strip->from > 0.0)
        circles[count++] = circle(shadows, strip->from);
    if (strip->to < shadows->radius)
        circles[count++] = circle(shadows, strip->to);
    return count;
}

/* Breaks that one earlier outline causes: tangents, and its corners with the others and itself. */
static void seed_outline(const ev_shadows *shadows, int obstacle, int earlier, seeds *to)
{
    const ev_outline *outline = outline_at(shadows, earlier);
    ev_outline circles[CIRCLES];
    int circle_count = list_circles(shadows, obstacle, circles);
    bool strip = ev_shadow_is_strip(shadows, obstacle);
    if (strip)
        seed_touches(shadows, strip_at(shadows, obstacle), outline, to);
    else if (earlier < obstacle)
        seed_tangents(outline_at(shadows, obstacle), outline, to);
    for (int i = 0; i < circle_count; i++)
        seed_crossings(shadows, obstacle, outline, &circles[i], to);
    for (int i = 0; i < earlier; i++)
        seed_crossings(shadows, obstacle, outline, outline_at(shadows, i), to);
}

/* Sorts, and drops what is outside the sweep. */
static int finish_seeds(seeds *found, double low, double high)
{
    int kept = 0;
    for (int i = 0; i < found->count; i++)
        if (found->items[i] > low && found->items[i] < high)
            found->items[kept++] = found->items[i];
    qsort(found->items, (size_t)kept, sizeof found->items[0], compare_doubles);
    for (int i = kept; i > 0; i--)
        found->items[i] = found->items[i - 1];
    found->items[0] = low;
    found->items[kept + 1] = high;
    return kept + 2;
}

int ev_shadow_seeds(const ev_shadows *shadows, int obstacle, double *items, int capacity)
{
    seeds found = {items, 0, capacity - 2};
    bool strip = ev_shadow_is_strip(shadows, obstacle);
    double low = strip ? -strip_at(shadows, obstacle)->half_width : 0.0;
    double high = strip ? -low : 2.0 * EV_PI;
    for (int i = 1; i < BASE_ANGLES && !strip; i++)
        add_seed(&found, high * i / BASE_ANGLES);
    ev_outline circles[CIRCLES];
    int circle_count = strip ? 0 : list_circles(shadows, obstacle, circles);
    for (int i = 0; i < circle_count; i++)
        seed_tangents(outline_at(shadows, obstacle), &circles[i], &found);
    for (int i = 0; i < outline_count(shadows) && i <= obstacle; i++)
        seed_outline(shadows, obstacle, i, &found);
    for (int i = outline_count(shadows); strip && i < obstacle; i++)
        seed_corners(shadows, strip_at(shadows, obstacle), strip_at(shadows, i), &found);
    return finish_seeds(&found, low, high);
}
