/* Outlines before the aperture, and lines across them. Called by the tracer (one point) and the
 * budget (slices); knows nothing of rays. */
#include "optics/shadow_curves.h"

static bool inside_outline(const ev_outline *outline, double x, double y)
{
    double dx = x - outline->x, dy = y - outline->y;
    double det = outline->ux * outline->vy - outline->uy * outline->vx;
    double p = dx * outline->vy - dy * outline->vx, q = dy * outline->ux - dx * outline->uy;
    return p * p + q * q < det * det;
}

ev_strip ev_strip_make(double angle, double width, double from, double to, int strut)
{
    return (ev_strip){.angle = angle,
                      .cos_angle = cos(angle),
                      .sin_angle = sin(angle),
                      .half_width = 0.5 * width,
                      .from = from,
                      .to = to,
                      .strut = strut};
}

static bool inside_strip(const ev_strip *strip, double dx, double dy, double r)
{
    double c = strip->cos_angle, s = strip->sin_angle;
    return r >= strip->from && r <= strip->to && dx * c + dy * s > 0.0 &&
           fabs(dy * c - dx * s) < strip->half_width;
}

ev_fate ev_shadow_at(const ev_shadows *shadows, double x, double y)
{
    double dx = x - shadows->centre_x, r = sqrt(dx * dx + y * y);
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

int ev_shadow_count(const ev_shadows *shadows)
{
    return (shadows->has_sub ? 1 : 0) + shadows->body_count + shadows->strip_count;
}

bool ev_shadow_is_strip(const ev_shadows *shadows, int obstacle)
{
    return obstacle >= outline_count(shadows);
}

ev_fate ev_shadow_fate(const ev_shadows *shadows, int obstacle)
{
    if (ev_shadow_is_strip(shadows, obstacle))
        return EV_FATE_SHADOW_STRUTS;
    return shadows->has_sub && obstacle == 0 ? EV_FATE_SHADOW_SUB : EV_FATE_SHADOW_FEED;
}

ev_line ev_shadow_line(const ev_shadows *shadows, int obstacle, double u)
{
    if (!ev_shadow_is_strip(shadows, obstacle)) {
        const ev_outline *outline = outline_at(shadows, obstacle);
        double c = cos(u), s = sin(u);
        return (ev_line){outline->x, outline->y, c * outline->ux + s * outline->vx,
                         c * outline->uy + s * outline->vy};
    }
    double c = strip_at(shadows, obstacle)->cos_angle, s = strip_at(shadows, obstacle)->sin_angle;
    return (ev_line){shadows->centre_x - u * s, u * c, c, s};
}

double ev_shadow_line_through(const ev_shadows *shadows, int obstacle, double x, double y)
{
    if (!ev_shadow_is_strip(shadows, obstacle)) {
        const ev_outline *outline = outline_at(shadows, obstacle);
        vec2 q = to_circle(outline, x - outline->x, y - outline->y);
        double u = atan2(q.y, q.x);
        return u < 0.0 ? u + 2.0 * EV_PI : u;
    }
    const ev_strip *strip = strip_at(shadows, obstacle);
    return y * strip->cos_angle - (x - shadows->centre_x) * strip->sin_angle;
}

double ev_shadow_scale(const ev_shadows *shadows, int obstacle)
{
    if (ev_shadow_is_strip(shadows, obstacle))
        return 1.0;
    const ev_outline *outline = outline_at(shadows, obstacle);
    return fabs(outline->ux * outline->vy - outline->uy * outline->vx);
}

void ev_shadow_extent(const ev_shadows *shadows, int obstacle, double extent[2])
{
    if (ev_shadow_is_strip(shadows, obstacle)) {
        const ev_strip *strip = strip_at(shadows, obstacle);
        extent[0] = fmin(strip->to, shadows->radius) - fmax(strip->from, shadows->hole_radius);
        extent[1] = 2.0 * strip->half_width;
        return;
    }
    const ev_outline *outline = outline_at(shadows, obstacle);
    extent[0] = extent[1] = fmax(hypot(outline->ux, outline->uy), hypot(outline->vx, outline->vy));
}

/* Ends of intervals: the line's own, the hole's, the rim's, then some for every obstacle, one for
 * each of its curves. */
enum { ID_OWN = 0, ID_HOLE = 2, ID_RIM = 4, ID_FIRST = 8, IDS = 4 };

typedef struct slice {
    ev_shadow_interval whole;
    ev_shadow_interval gaps[2 + EV_SHADOW_BODY_CAPACITY + EV_SHADOW_STRIP_CAPACITY];
    int gap_count;
} slice;

/* Where the line is within an outline. */
static bool cross_outline(const ev_outline *outline, ev_line line, double *from, double *to)
{
    vec2 q = to_circle(outline, line.x - outline->x, line.y - outline->y);
    vec2 d = to_circle(outline, line.dx, line.dy);
    double a = d.x * d.x + d.y * d.y, b = q.x * d.x + q.y * d.y;
    double k = q.x * q.x + q.y * q.y - 1.0, disc = b * b - a * k;
    if (!(disc > 0.0))
        return false;
    double root = sqrt(disc), far = -(b + copysign(root, b));
    *from = fmin(far / a, k / far);
    *to = fmax(far / a, k / far);
    return true;
}

static void add_gap(slice *cut, double from, double to, int from_id, int to_id)
{
    if (!(from < cut->whole.to && to > cut->whole.from && from < to))
        return;
    int i = cut->gap_count++;
    for (; i > 0 && cut->gaps[i - 1].from > from; i--)
        cut->gaps[i] = cut->gaps[i - 1];
    cut->gaps[i] = (ev_shadow_interval){from, to, EV_FATE_APERTURE, from_id, to_id};
}

static void add_outline_gap(slice *cut, const ev_outline *outline, ev_line line, int id)
{
    double from, to;
    if (cross_outline(outline, line, &from, &to))
        add_gap(cut, from, to, id, id + 1);
}

/* One end of a gap and the curve that makes it. */
typedef struct gap_end {
    double at;
    int id;
} gap_end;

static gap_end later(gap_end a, double at, int id)
{
    return at > a.at ? (gap_end){at, id} : a;
}

static gap_end sooner(gap_end a, double at, int id)
{
    return at < a.at ? (gap_end){at, id} : a;
}

/* Where a strip's line, `across` from its middle, is within another strip: within its radii, on its
 * side of the centre (along = v c - across s > 0) and between its edges (|v s + across c|). */
static void add_strip_gap(slice *cut, const ev_strip *strip, const ev_strip *other, double across,
                          int id)
{
    double turn = strip->angle - other->angle, c = cos(turn), s = sin(turn);
    double low = (-other->half_width - across * c) / s, high = (other->half_width - across * c) / s;
    gap_end from = {along_at(other->from, across), id}, to = {along_at(other->to, across), id};
    if (fabs(across) >= other->to)
        return;
    if (s != 0.0) {
        int low_id = s > 0.0 ? id + 1 : id + 2, high_id = s > 0.0 ? id + 2 : id + 1;
        from = later(from, fmin(low, high), low_id);
        to = sooner(to, fmax(low, high), high_id);
    } else if (!(fabs(across) < other->half_width)) {
        return;
    }
    if (c > 0.0)
        from = later(from, across * s / c, id + 3);
    else if (c < 0.0)
        to = sooner(to, across * s / c, id + 3);
    else if (!(across * s < 0.0))
        return;
    add_gap(cut, from.at, to.at, from.id, to.id);
}

/* The line's own extent, within the rim. */
static bool begin(const ev_shadows *shadows, int obstacle, double u, ev_line line, slice *cut)
{
    cut->whole =
        (ev_shadow_interval){0.0, 1.0, ev_shadow_fate(shadows, obstacle), ID_OWN, ID_OWN + 1};
    if (ev_shadow_is_strip(shadows, obstacle)) {
        const ev_strip *strip = strip_at(shadows, obstacle);
        cut->whole.from = along_at(strip->from, u);
        cut->whole.to = fabs(u) < strip->to ? along_at(strip->to, u) : 0.0;
    }
    ev_outline rim = circle(shadows, shadows->radius);
    double from, to;
    if (!cross_outline(&rim, line, &from, &to))
        return false;
    if (from > cut->whole.from) {
        cut->whole.from = from;
        cut->whole.from_id = ID_RIM;
    }
    if (to < cut->whole.to) {
        cut->whole.to = to;
        cut->whole.to_id = ID_RIM + 1;
    }
    return cut->whole.from < cut->whole.to;
}

static int keep_between_gaps(const slice *cut, ev_shadow_interval *intervals)
{
    ev_shadow_interval open = cut->whole;
    int count = 0;
    for (int i = 0; i < cut->gap_count; i++) {
        const ev_shadow_interval *gap = &cut->gaps[i];
        if (gap->from > open.from) {
            ev_shadow_interval kept = open;
            kept.to = gap->from;
            kept.to_id = gap->from_id;
            intervals[count++] = kept;
        }
        if (gap->to > open.from) {
            open.from = gap->to;
            open.from_id = gap->to_id;
        }
    }
    if (open.from < open.to)
        intervals[count++] = open;
    return count;
}

int ev_shadow_slice(const ev_shadows *shadows, int obstacle, double u,
                    ev_shadow_interval intervals[EV_SLICE_CAPACITY])
{
    slice cut;
    ev_line line = ev_shadow_line(shadows, obstacle, u);
    cut.gap_count = 0;
    if (!begin(shadows, obstacle, u, line, &cut))
        return 0;
    if (shadows->hole_radius > 0.0) {
        ev_outline hole = circle(shadows, shadows->hole_radius);
        add_outline_gap(&cut, &hole, line, ID_HOLE);
    }
    int outlines = outline_count(shadows);
    for (int i = 0; i < outlines && i < obstacle; i++)
        add_outline_gap(&cut, outline_at(shadows, i), line, ID_FIRST + IDS * i);
    for (int i = outlines; i < obstacle; i++)
        add_strip_gap(&cut, strip_at(shadows, obstacle), strip_at(shadows, i), u,
                      ID_FIRST + IDS * i);
    return keep_between_gaps(&cut, intervals);
}
