/* Powers as contour integrals on the feed's sphere. With S(theta) the share within theta and
 * (theta, phi) about the feed's axis, the power inside a closed curve is 1/2pi of the integral of
 * S dphi along it (Stokes). Every outline (rims, hole, the sub's shadow, bodies, sides and ends of
 * struts) is walked once; each stretch of it counts, with its sign, for the fate on its left and
 * for the fate on its right. Stretches end where either fate changes.
 *
 * The stretches that bound a fate must close: their ends are summed, and where they do not meet the
 * walk is done again with more looks.
 *
 * Outlines must not run along one another, and the point opposite the feed's axis must lie outside
 * all of them. */
#include "reference.h"

#include <gsl/gsl_integration.h>
#include <math.h>
#include <stdlib.h>

static const double HAIR = 1e-11;

enum { PANELS = 12, STRIP_PANELS = 3, LOOKS = 16, MOST_LOOKS = 1024, NODES = 20 };

typedef enum {
    RIM_MAIN,
    RIM_HOLE,
    RIM_SUB,
    OUTLINE_SUB,
    OUTLINE_BODY,
    STRIP_SIDE,
    STRIP_END,
    STRIP_ROOT
} outline_kind;

/* One outline, walked over t in [0, 1]. */
typedef struct outline {
    const ev_reference *reference;
    outline_kind kind;
    double x, y, ux, uy, vx, vy; /* ellipses: centre and semi-axes */
    double angle, half_width, from, to;
    int side; /* strips: +1 or -1 across; ends: +1 outer, -1 inner */
} outline;

typedef struct place {
    double x, y, nx, ny; /* aperture point and its left-hand normal */
    ev_vec3 direction;
    ev_fate left, right;
} place;

static bool in_ellipse(const outline *o, double x, double y)
{
    double det = o->ux * o->vy - o->uy * o->vx, dx = x - o->x, dy = y - o->y;
    double p = (dx * o->vy - dy * o->vx) / det, q = (o->ux * dy - o->uy * dx) / det;
    return p * p + q * q < 1.0;
}

static outline sub_outline(const ev_reference *r)
{
    /* the rim's plane ellipse, as it sits, seen along z */
    ev_vec3 a = ev_vec3_scale(r->semi_long, r->rim_long);
    ev_vec3 b = ev_vec3_scale(r->semi_short, r->rim_short);
    ev_vec3 arm = ev_vec3_sub(r->rim_centre, r->pivot);
    return (outline){.reference = r,
                     .kind = OUTLINE_SUB,
                     .x = r->pivot.x + r->shift.x + ev_vec3_dot(r->turn[0], arm),
                     .y = r->pivot.y + r->shift.y + ev_vec3_dot(r->turn[1], arm),
                     .ux = ev_vec3_dot(r->turn[0], a),
                     .uy = ev_vec3_dot(r->turn[1], a),
                     .vx = ev_vec3_dot(r->turn[0], b),
                     .vy = ev_vec3_dot(r->turn[1], b)};
}

static bool in_body(const ev_reference *r, double x, double y)
{
    for (int i = 0; i < r->body_count; i++)
        if (hypot(x - r->bodies[i].x, y - r->bodies[i].y) < r->bodies[i].z)
            return true;
    return false;
}

static bool in_struts(const ev_reference *r, double x, double y)
{
    double dx = x - r->offset, radius = hypot(dx, y);
    for (int i = 0; i < r->design->strut_count; i++) {
        const ev_strut_design *strut = &r->design->struts[i];
        for (int k = 0; k < strut->count && radius >= strut->from && radius <= strut->to; k++) {
            double angle = strut->first + 2.0 * EV_PI * k / strut->count;
            double along = dx * cos(angle) + y * sin(angle);
            double across = y * cos(angle) - dx * sin(angle);
            if (along > 0.0 && fabs(across) < 0.5 * strut->width)
                return true;
        }
    }
    return false;
}

/* Fate of a ray that lands over (x, y). The rim is drawn in by a hair, so that a sub's rim that
 * lights the main's rim exactly does not count as inside it here and there. (A wider hair would
 * part the two rims where they cross at a small angle.) */
static ev_fate fate_at(const ev_reference *r, double x, double y, double hair)
{
    double radius = hypot(x - r->offset, y);
    if (radius > r->radius * (1.0 - hair) || radius < r->hole)
        return EV_FATE_PAST_MAIN;
    if (r->dual) {
        outline sub = sub_outline(r);
        if (in_ellipse(&sub, x, y))
            return EV_FATE_SHADOW_SUB;
    }
    if (in_body(r, x, y))
        return EV_FATE_SHADOW_FEED;
    return in_struts(r, x, y) ? EV_FATE_SHADOW_STRUTS : EV_FATE_APERTURE;
}

static void put(place *at, double x, double y, double tx, double ty)
{
    double size = hypot(tx, ty);
    *at = (place){.x = x, .y = y, .nx = -ty / size, .ny = tx / size};
}

/* The point of an outline of the aperture plane at t, and its left-hand normal. */
static void walk(const outline *o, double t, place *at)
{
    double phi = 2.0 * EV_PI * t, c = cos(phi), s = sin(phi), centre = o->reference->offset;
    double ca = cos(o->angle), sa = sin(o->angle), half = o->half_width;
    if (o->kind == STRIP_SIDE) {
        double start = sqrt(fmax(0.0, o->from * o->from - half * half));
        double end = sqrt(fmax(0.0, o->to * o->to - half * half));
        double along = start + (end - start) * t, across = o->side * half;
        put(at, centre + along * ca - across * sa, along * sa + across * ca, ca, sa);
    } else if (o->kind == STRIP_ROOT) {
        double across = half * (2.0 * t - 1.0);
        put(at, centre - across * sa, across * ca, -sa, ca);
    } else if (o->kind == STRIP_END) {
        double radius = o->side > 0 ? o->to : o->from;
        double spread = asin(fmin(1.0, half / radius)), turn = o->angle + spread * (2.0 * t - 1.0);
        put(at, centre + radius * cos(turn), radius * sin(turn), -sin(turn), cos(turn));
    } else {
        put(at, o->x + c * o->ux + s * o->vx, o->y + c * o->uy + s * o->vy, -s * o->ux + c * o->vx,
            -s * o->uy + c * o->vy);
    }
}

/* Both fates and the direction at t. */
static place look(const outline *o, double t)
{
    const ev_reference *r = o->reference;
    place at = {0};
    ev_reference_ray ray;
    if (o->kind == RIM_SUB) {
        at.direction = ev_reference_rim(r, 2.0 * EV_PI * t);
        at.right = EV_FATE_PAST_SUB;
        at.left = EV_FATE_PAST_MAIN;
        if (!ev_reference_trace(r, at.direction, &ray))
            return at;
        at.x = ray.on_main.x;
        at.y = ray.on_main.y;
        at.left = fate_at(r, at.x, at.y, HAIR);
        return at;
    }
    walk(o, t, &at);
    double step = HAIR * r->radius;
    bool aimed = ev_reference_aim(r, at.x, at.y, &at.direction, &ray);
    if (!aimed || ray.inside < -HAIR) {
        at.left = at.right = EV_FATE_PAST_SUB;
        return at;
    }
    at.left = fate_at(r, at.x + step * at.nx, at.y + step * at.ny, 0.0);
    at.right = fate_at(r, at.x - step * at.nx, at.y - step * at.ny, 0.0);
    return at;
}

/* Gauss nodes on [0, 1] and the matrix that differentiates the polynomial through them. */
typedef struct rule {
    double t[NODES], weight[NODES], slope[NODES][NODES];
} rule;

static const rule *gauss_rule(void)
{
    static rule made;
    static bool done;
    if (done)
        return &made;
    gsl_integration_glfixed_table *table = gsl_integration_glfixed_table_alloc(NODES);
    double bary[NODES];
    for (size_t i = 0; i < NODES; i++)
        gsl_integration_glfixed_point(0.0, 1.0, i, &made.t[i], &made.weight[i], table);
    gsl_integration_glfixed_table_free(table);
    for (int i = 0; i < NODES; i++) {
        bary[i] = 1.0;
        for (int k = 0; k < NODES; k++)
            bary[i] /= k == i ? 1.0 : made.t[i] - made.t[k];
    }
    for (int i = 0; i < NODES; i++) {
        made.slope[i][i] = 0.0;
        for (int k = 0; k < NODES; k++) {
            if (k == i)
                continue;
            made.slope[i][k] = bary[k] / bary[i] / (made.t[i] - made.t[k]);
            made.slope[i][i] -= made.slope[i][k];
        }
    }
    done = true;
    return &made;
}

/* 1/2pi of the integral of S dphi over t in [from, to]. */
static double stretch(const outline *o, double from, double to)
{
    const ev_reference *r = o->reference;
    const rule *gauss = gauss_rule();
    double u[NODES], v[NODES], level[NODES], sum = 0.0;
    for (int i = 0; i < NODES; i++) {
        ev_vec3 d = look(o, from + (to - from) * gauss->t[i]).direction;
        u[i] = ev_vec3_dot(d, r->ex);
        v[i] = ev_vec3_dot(d, r->ey);
        double sine = hypot(u[i], v[i]);
        level[i] = sine > 1e-7
                       ? ev_reference_share(r, atan2(sine, ev_vec3_dot(d, r->axis))) / (sine * sine)
                       : 0.25 * ev_reference_gain(r, 0.0);
    }
    for (int i = 0; i < NODES; i++) {
        double du = 0.0, dv = 0.0;
        for (int k = 0; k < NODES; k++) {
            du += gauss->slope[i][k] * u[k];
            dv += gauss->slope[i][k] * v[k];
        }
        sum += gauss->weight[i] * level[i] * (u[i] * dv - v[i] * du);
    }
    return sum / (2.0 * EV_PI);
}

static bool alike(const place *a, const place *b)
{
    return a->left == b->left && a->right == b->right;
}

/* Where what lies beside the outline changes, between two looks that differ. */
static double find_change(const outline *o, double low, double high, place at_low)
{
    for (int i = 0; i < 44; i++) {
        double middle = 0.5 * (low + high);
        place there = look(o, middle);
        *(alike(&at_low, &there) ? &low : &high) = middle;
    }
    return 0.5 * (low + high);
}

/* What has been walked: shares, and what the ends of the stretches miss to close. */
typedef struct tally {
    double share[EV_FATE_COUNT];
    ev_vec3 open[EV_FATE_COUNT];
    int looks;
} tally;

static void add_stretch(const outline *o, double from, double to, tally *sums)
{
    if (to - from < 1e-12)
        return;
    place middle = look(o, 0.5 * (from + to));
    if (middle.left == middle.right)
        return;
    double value = stretch(o, from, to);
    ev_vec3 step = ev_vec3_sub(look(o, to).direction, look(o, from).direction);
    sums->share[middle.left] += value;
    sums->share[middle.right] -= value;
    sums->open[middle.left] = ev_vec3_add(sums->open[middle.left], step);
    sums->open[middle.right] = ev_vec3_sub(sums->open[middle.right], step);
}

/* The walk along one panel of an outline: what was seen last, and from where a stretch is open. */
typedef struct walker {
    const outline *outline;
    place last;
    double seen, from;
    tally *sums;
} walker;

static void visit(walker *at, double t)
{
    place now = look(at->outline, t);
    while (!alike(&at->last, &now) && at->seen < t) {
        double change = find_change(at->outline, at->seen, t, at->last);
        add_stretch(at->outline, at->from, change, at->sums);
        at->from = change;
        at->seen = change + 1e-11;
        at->last = look(at->outline, at->seen);
    }
    at->last = now;
    at->seen = t;
}

static int compare_doubles(const void *a, const void *b)
{
    double x = *(const double *)a, y = *(const double *)b;
    return (x > y) - (x < y);
}

/* Zero on a strip's curves: its two edges, its two ends. */
static double strip_curve(const ev_reference *r, const ev_strut_design *strut, int copy, int curve,
                          const place *at)
{
    double angle = strut->first + 2.0 * EV_PI * copy / strut->count, dx = at->x - r->offset;
    double across = at->y * cos(angle) - dx * sin(angle), radius = hypot(dx, at->y);
    switch (curve) {
    case 0:
        return across - 0.5 * strut->width;
    case 1:
        return across + 0.5 * strut->width;
    case 2:
        return radius - strut->from;
    default:
        return radius - strut->to;
    }
}

enum { STOP_CAPACITY = 4 * EV_SHADOW_STRIP_CAPACITY + 2 };

/* What lies beside may change and change back between two looks: visits the middles between all
 * crossings with curves of struts. */
static void visit_struts(walker *at, double t)
{
    const ev_reference *r = at->outline->reference;
    place now = look(at->outline, t), before = at->last;
    double stops[STOP_CAPACITY] = {at->seen, t}, start = at->seen;
    size_t count = 2;
    for (int i = 0; i < r->design->strut_count; i++)
        for (int k = 0; k < 4 * r->design->struts[i].count && count < STOP_CAPACITY; k++) {
            const ev_strut_design *strut = &r->design->struts[i];
            double low = strip_curve(r, strut, k / 4, k % 4, &before);
            double high = strip_curve(r, strut, k / 4, k % 4, &now);
            if (low * high < 0.0)
                stops[count++] = start + (t - start) * low / (low - high);
        }
    qsort(stops, count, sizeof stops[0], compare_doubles);
    for (size_t i = 0; i + 1 < count; i++)
        visit(at, 0.5 * (stops[i] + stops[i + 1]));
    visit(at, t);
}

static void add_outline(const outline *o, tally *sums)
{
    int panels = o->kind >= STRIP_SIDE ? STRIP_PANELS : PANELS;
    for (int panel = 0; panel < panels; panel++) {
        double low = (double)panel / panels, high = (panel + 1.0) / panels;
        walker at = {o, look(o, low + 1e-12), low + 1e-12, low, sums};
        for (int i = 1; i < sums->looks; i++)
            visit_struts(&at, low + (high - low) * i / sums->looks);
        visit_struts(&at, high - 1e-12);
        add_stretch(o, at.from, high, sums);
    }
}

static void add_circle(const ev_reference *r, outline_kind kind, double x, double y, double radius,
                       tally *sums)
{
    outline circle = {.reference = r, .kind = kind, .x = x, .y = y, .ux = radius, .vy = radius};
    if (radius > 0.0)
        add_outline(&circle, sums);
}

static void add_strut(const ev_reference *r, const ev_strut_design *strut, int copy, tally *sums)
{
    outline strip = {.reference = r,
                     .angle = strut->first + 2.0 * EV_PI * copy / strut->count,
                     .half_width = 0.5 * strut->width,
                     .from = strut->from,
                     .to = fmin(strut->to, 1.01 * r->radius)};
    for (int side = -1; side <= 1; side += 2) {
        strip.side = side;
        strip.kind = STRIP_SIDE;
        add_outline(&strip, sums);
        strip.kind = STRIP_END;
        double end = side > 0 ? strut->to : strut->from;
        if (end < r->radius && end > r->hole)
            add_outline(&strip, sums);
    }
    strip.kind = STRIP_ROOT;
    if (strut->from < strip.half_width)
        add_outline(&strip, sums);
}

/* +1 where the aperture's x, y turn into the feed's directions the same way round, else -1. */
static double image_hand(const ev_reference *r)
{
    double x = r->offset + 0.5 * r->radius, y = 0.1 * r->radius, h = 1e-4 * r->radius;
    ev_vec3 d, dx, dy;
    ev_reference_ray ray;
    ev_reference_aim(r, x, y, &d, &ray);
    ev_reference_aim(r, x + h, y, &dx, &ray);
    ev_reference_aim(r, x, y + h, &dy, &ray);
    return ev_vec3_dot(d, ev_vec3_cross(ev_vec3_sub(dx, d), ev_vec3_sub(dy, d))) < 0.0 ? -1.0 : 1.0;
}

/* +1 where the sub's rim runs about what it encloses as phi runs about the feed's axis. */
static double rim_hand(const ev_reference *r)
{
    ev_vec3 a = ev_reference_rim(r, 0.0), b = ev_reference_rim(r, 2.0),
            c = ev_reference_rim(r, 4.0);
    ev_vec3 middle = ev_vec3_add(a, ev_vec3_add(b, c));
    ev_vec3 turn = ev_vec3_cross(ev_vec3_sub(b, a), ev_vec3_sub(c, a));
    return ev_vec3_dot(middle, turn) > 0.0 ? 1.0 : -1.0;
}

static void walk_all(const ev_reference *r, tally *aperture, tally *rim)
{
    add_circle(r, RIM_MAIN, r->offset, 0.0, r->radius, aperture);
    add_circle(r, RIM_HOLE, r->offset, 0.0, r->hole, aperture);
    for (int i = 0; i < r->body_count; i++)
        add_circle(r, OUTLINE_BODY, r->bodies[i].x, r->bodies[i].y, r->bodies[i].z, aperture);
    for (int i = 0; i < r->design->strut_count; i++)
        for (int k = 0; k < r->design->struts[i].count; k++)
            add_strut(r, &r->design->struts[i], k, aperture);
    if (r->dual) {
        outline shadow = sub_outline(r), edge = {.reference = r, .kind = RIM_SUB};
        add_outline(&shadow, aperture);
        add_outline(&edge, rim);
    }
}

bool ev_reference_shares(const ev_reference *r, double shares[EV_FATE_COUNT])
{
    double hand = image_hand(r), hand_of_rim = r->dual ? rim_hand(r) : 1.0, open = INFINITY;
    for (int looks = LOOKS; looks <= MOST_LOOKS && open > 3e-6; looks *= 4) {
        tally aperture = {.looks = looks}, rim = {.looks = looks};
        walk_all(r, &aperture, &rim);
        open = 0.0;
        for (int fate = 0; fate < EV_FATE_COUNT; fate++) {
            shares[fate] = hand * aperture.share[fate] + hand_of_rim * rim.share[fate];
            ev_vec3 gap = ev_vec3_scale(hand, aperture.open[fate]);
            open = fmax(open, ev_vec3_length(ev_vec3_along(gap, hand_of_rim, rim.open[fate])));
        }
    }
    /* the outside of the outermost outline holds the rest of the sphere */
    shares[r->dual ? EV_FATE_PAST_SUB : EV_FATE_PAST_MAIN] += 1.0;
    return open <= 3e-6;
}
