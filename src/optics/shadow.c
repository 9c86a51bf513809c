/* Outlines before the aperture, cut along radii. Called by the tracer (one point) and the budget
 * (slices); knows nothing of rays. */
#include "optics/shadow.h"

#include <stdlib.h>

typedef struct vec2 {
    double x, y;
} vec2;

/* In coordinates where the outline is the unit circle. */
static vec2 to_circle(const ev_outline *outline, double x, double y)
{
    double det = outline->ux * outline->vy - outline->uy * outline->vx;
    return (vec2){(x * outline->vy - y * outline->vx) / det,
                  (y * outline->ux - x * outline->uy) / det};
}

static bool inside_outline(const ev_outline *outline, double x, double y)
{
    vec2 q = to_circle(outline, x - outline->x, y - outline->y);
    return q.x * q.x + q.y * q.y < 1.0;
}

static bool inside_strip(const ev_strip *strip, double dx, double dy, double r)
{
    double c = cos(strip->angle), s = sin(strip->angle);
    return r >= strip->from && r <= strip->to && dx * c + dy * s > 0.0 &&
           fabs(dy * c - dx * s) < strip->half_width;
}

ev_fate ev_shadow_at(const ev_shadows *shadows, double x, double y)
{
    double dx = x - shadows->centre_x, r = hypot(dx, y);
    if (!(r >= shadows->hole_radius && r <= shadows->radius))
        return EV_FATE_PAST_MAIN;
    if (shadows->has_sub && inside_outline(&shadows->sub, x, y))
        return EV_FATE_SHADOW_SUB;
    for (int i = 0; i < shadows->body_count; i++)
        if (inside_outline(&shadows->bodies[i], x, y))
            return EV_FATE_SHADOW_FEED;
    for (int i = 0; i < shadows->strip_count; i++)
        if (inside_strip(&shadows->strips[i], dx, y, r))
            return EV_FATE_SHADOW_STRUTS;
    return EV_FATE_APERTURE;
}

enum { ID_HOLE = 1, ID_RIM = 2, ID_FIRST = 8, IDS_PER_OBSTACLE = 8 };

typedef struct slice {
    double inner, outer;
    ev_shadow_interval raw[2 + EV_SHADOW_BODY_CAPACITY + EV_SHADOW_STRIP_CAPACITY];
    int count;
} slice;

/* Clips to the reflecting part of the aperture and keeps what is left. */
static void add_raw(slice *cut, double from, double to, ev_fate fate, int from_id, int to_id)
{
    if (from < cut->inner) {
        from = cut->inner;
        from_id = ID_HOLE;
    }
    if (to > cut->outer) {
        to = cut->outer;
        to_id = ID_RIM;
    }
    if (from < to)
        cut->raw[cut->count++] = (ev_shadow_interval){from, to, fate, from_id, to_id};
}

static void cut_outline(const ev_shadows *shadows, const ev_outline *outline, double phi,
                        ev_fate fate, int id, slice *cut)
{
    vec2 q = to_circle(outline, shadows->centre_x - outline->x, -outline->y);
    vec2 d = to_circle(outline, cos(phi), sin(phi));
    double a = d.x * d.x + d.y * d.y, b = q.x * d.x + q.y * d.y;
    double k = q.x * q.x + q.y * q.y - 1.0, disc = b * b - a * k;
    if (!(disc > 0.0))
        return;
    double root = sqrt(disc);
    add_raw(cut, (-b - root) / a, (-b + root) / a, fate, id, id + 1);
}

static void cut_strip(const ev_strip *strip, double phi, int id, slice *cut)
{
    double delta = remainder(phi - strip->angle, 2.0 * EV_PI);
    if (fabs(delta) >= 0.5 * EV_PI)
        return;
    double edge = strip->half_width / fabs(sin(delta)); /* infinite on the strip's own axis */
    if (edge < strip->to)
        add_raw(cut, strip->from, edge, EV_FATE_SHADOW_STRUTS, id, delta < 0.0 ? id + 2 : id + 3);
    else
        add_raw(cut, strip->from, strip->to, EV_FATE_SHADOW_STRUTS, id, id + 1);
}

static int compare_doubles(const void *a, const void *b)
{
    double x = *(const double *)a, y = *(const double *)b;
    return (x > y) - (x < y);
}

/* The raw interval that rules over r: the lowest fate, by the order of precedence. */
static const ev_shadow_interval *ruler(const slice *cut, double r)
{
    const ev_shadow_interval *found = NULL;
    for (int i = 0; i < cut->count; i++)
        if (cut->raw[i].from < r && r < cut->raw[i].to &&
            (!found || cut->raw[i].fate < found->fate))
            found = &cut->raw[i];
    return found;
}

static int id_at(const slice *cut, double r)
{
    for (int i = 0; i < cut->count; i++) {
        if (cut->raw[i].from == r)
            return cut->raw[i].from_id;
        if (cut->raw[i].to == r)
            return cut->raw[i].to_id;
    }
    return 0;
}

int ev_shadow_slice(const ev_shadows *shadows, double phi,
                    ev_shadow_interval intervals[EV_SLICE_CAPACITY])
{
    slice cut = {.inner = shadows->hole_radius, .outer = shadows->radius};
    int id = ID_FIRST;
    if (shadows->has_sub)
        cut_outline(shadows, &shadows->sub, phi, EV_FATE_SHADOW_SUB, id, &cut);
    for (int i = 0; i < shadows->body_count; i++)
        cut_outline(shadows, &shadows->bodies[i], phi, EV_FATE_SHADOW_FEED, id += IDS_PER_OBSTACLE,
                    &cut);
    for (int i = 0; i < shadows->strip_count; i++)
        cut_strip(&shadows->strips[i], phi, id += IDS_PER_OBSTACLE, &cut);
    double ends[2 * (sizeof cut.raw / sizeof cut.raw[0])];
    int end_count = 0, count = 0;
    for (int i = 0; i < cut.count; i++) {
        ends[end_count++] = cut.raw[i].from;
        ends[end_count++] = cut.raw[i].to;
    }
    qsort(ends, (size_t)end_count, sizeof ends[0], compare_doubles);
    for (int i = 0; i + 1 < end_count; i++) {
        const ev_shadow_interval *rule =
            ends[i] < ends[i + 1] ? ruler(&cut, 0.5 * (ends[i] + ends[i + 1])) : NULL;
        if (!rule)
            continue;
        ev_shadow_interval *last = count ? &intervals[count - 1] : NULL;
        if (last && last->fate == rule->fate && last->to == ends[i]) {
            last->to = ends[i + 1];
            last->to_id = id_at(&cut, ends[i + 1]);
        } else {
            intervals[count++] = (ev_shadow_interval){
                ends[i], ends[i + 1], rule->fate, id_at(&cut, ends[i]), id_at(&cut, ends[i + 1])};
        }
    }
    return count;
}

static void add_angle(double *angles, int *count, int capacity, double angle)
{
    if (*count < capacity && isfinite(angle))
        angles[(*count)++] = angle - 2.0 * EV_PI * floor(angle / (2.0 * EV_PI));
}

/* Where radii touch the outline: d^T K d = 0 with K from the discriminant of cut_outline; plus the
 * direction of its centre and the directions in which its four vertices lie. */
static void seed_outline(const ev_shadows *shadows, const ev_outline *outline, double *angles,
                         int *count, int capacity)
{
    vec2 q = to_circle(outline, shadows->centre_x - outline->x, -outline->y);
    vec2 cx = to_circle(outline, 1.0, 0.0), cy = to_circle(outline, 0.0, 1.0);
    double k = q.x * q.x + q.y * q.y - 1.0;
    double qx = q.x * cx.x + q.y * cx.y, qy = q.x * cy.x + q.y * cy.y;
    double kxx = qx * qx - k * (cx.x * cx.x + cx.y * cx.y);
    double kxy = qx * qy - k * (cx.x * cy.x + cx.y * cy.y);
    double kyy = qy * qy - k * (cy.x * cy.x + cy.y * cy.y);
    double disc = kxy * kxy - kxx * kyy;
    if (k > 0.0 && disc > 0.0) {
        double root = sqrt(disc);
        for (int sign = -1; sign <= 1; sign += 2) {
            /* kyy sin^2 + 2 kxy sin cos + kxx cos^2 = 0, by whichever form does not cancel */
            double angle = fabs(kyy) > fabs(kxx) ? atan2(-kxy + sign * root, kyy)
                                                 : atan2(kxx, -kxy + sign * root);
            add_angle(angles, count, capacity, angle);
            add_angle(angles, count, capacity, angle + EV_PI);
        }
    }
    double dx = outline->x - shadows->centre_x, dy = outline->y;
    add_angle(angles, count, capacity, atan2(dy, dx));
    for (int sign = -1; sign <= 1; sign += 2) {
        add_angle(angles, count, capacity, atan2(dy + sign * outline->uy, dx + sign * outline->ux));
        add_angle(angles, count, capacity, atan2(dy + sign * outline->vy, dx + sign * outline->vx));
    }
}

static void seed_strip(const ev_shadows *shadows, const ev_strip *strip, double *angles, int *count,
                       int capacity)
{
    double radii[2] = {fmax(strip->from, shadows->hole_radius), fmin(strip->to, shadows->radius)};
    for (int i = 0; i < 2; i++) {
        double spread = asin(fmin(1.0, strip->half_width / fmax(radii[i], strip->half_width)));
        add_angle(angles, count, capacity, strip->angle - spread);
        add_angle(angles, count, capacity, strip->angle + spread);
    }
}

int ev_shadow_seeds(const ev_shadows *shadows, double *angles, int capacity)
{
    int count = 0, kept = 0;
    for (int quarter = 0; quarter < 4; quarter++)
        add_angle(angles, &count, capacity - 1, 0.5 * EV_PI * quarter);
    if (shadows->has_sub)
        seed_outline(shadows, &shadows->sub, angles, &count, capacity - 1);
    for (int i = 0; i < shadows->body_count; i++)
        seed_outline(shadows, &shadows->bodies[i], angles, &count, capacity - 1);
    for (int i = 0; i < shadows->strip_count; i++)
        seed_strip(shadows, &shadows->strips[i], angles, &count, capacity - 1);
    qsort(angles, (size_t)count, sizeof angles[0], compare_doubles);
    for (int i = 0; i < count; i++)
        if (kept == 0 || angles[i] - angles[kept - 1] > 1e-12)
            angles[kept++] = angles[i];
    angles[kept++] = 2.0 * EV_PI;
    return kept;
}
