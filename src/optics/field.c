/* Statistics and integrals over nodes. Sums run in node order, so they are the same for any number
 * of threads. */
#include "optics/field.h"

static double weight_of(const ev_node *node, ev_weighting weighting)
{
    switch (weighting) {
    case EV_WEIGHT_POWER:
        return node->weight * node->density;
    case EV_WEIGHT_AMPLITUDE:
        return node->weight * sqrt(node->density);
    case EV_WEIGHT_AREA:
        break;
    }
    return node->weight;
}

/* Solves the symmetric 3 x 3 system m x = v (m by rows) by Cramer's rule. */
static void solve3(double m[3][3], const double v[3], double x[3])
{
    ev_vec3 r0 = {m[0][0], m[0][1], m[0][2]}, r1 = {m[1][0], m[1][1], m[1][2]},
            r2 = {m[2][0], m[2][1], m[2][2]}, b = {v[0], v[1], v[2]};
    double det = ev_vec3_dot(r0, ev_vec3_cross(r1, r2));
    x[0] = ev_vec3_dot(b, ev_vec3_cross(r1, r2)) / det;
    x[1] = ev_vec3_dot(r0, ev_vec3_cross(b, r2)) / det;
    x[2] = ev_vec3_dot(r0, ev_vec3_cross(r1, b)) / det;
}

static double error_of(const ev_node *node, ev_vec3 wanted)
{
    return node->path - ev_vec3_dot(wanted, node->point);
}

ev_plane ev_fit_plane(const ev_antenna *antenna, const ev_nodes *nodes, ev_vec3 wanted,
                      ev_weighting weighting)
{
    /* errors are taken from the first node's, and x, y in radii, to keep the digits */
    double base = nodes->count ? error_of(&nodes->items[0], wanted) : 0.0, scale = antenna->radius;
    double m[3][3] = {{0}}, v[3] = {0}, x[3], sum = 0.0, squares = 0.0, rest = 0.0;
    for (int i = 0; i < nodes->count; i++) {
        const ev_node *node = &nodes->items[i];
        double w = weight_of(node, weighting), e = error_of(node, wanted) - base;
        if (!(w > 0.0) || !isfinite(e))
            continue;
        double row[3] = {1.0, (node->point.x - antenna->offset) / scale, node->point.y / scale};
        for (int a = 0; a < 3; a++) {
            v[a] += w * row[a] * e;
            for (int b = 0; b < 3; b++)
                m[a][b] += w * row[a] * row[b];
        }
        sum += w;
    }
    if (!(sum > 0.0))
        return (ev_plane){0};
    solve3(m, v, x);
    double mean = v[0] / sum;
    for (int i = 0; i < nodes->count; i++) {
        const ev_node *node = &nodes->items[i];
        double w = weight_of(node, weighting), e = error_of(node, wanted) - base;
        if (!(w > 0.0) || !isfinite(e))
            continue;
        double flat = e - x[0] - x[1] * (node->point.x - antenna->offset) / scale -
                      x[2] * node->point.y / scale;
        squares += w * (e - mean) * (e - mean);
        rest += w * flat * flat;
    }
    return (ev_plane){.mean = base + mean,
                      .a = base + x[0],
                      .b = x[1] / scale,
                      .c = x[2] / scale,
                      .rms = sqrt(squares / sum),
                      .rms_untilted = sqrt(rest / sum)};
}

/* The integral with its first and second derivatives by the direction cosines of s. */
typedef struct integral {
    double _Complex value, u, v, uu, uv, vv;
} integral;

static integral integrate(const ev_antenna *antenna, const ev_nodes *nodes, ev_vec3 s)
{
    integral sum = {0};
    double k = antenna->wavenumber, base = 0.0;
    bool based = false;
    for (int i = 0; i < nodes->count; i++) {
        const ev_node *node = &nodes->items[i];
        if (!(node->density > 0.0))
            continue;
        double error = error_of(node, s);
        if (!based) {
            base = error; /* a common phase; keeps the argument of the exponential small */
            based = true;
        }
        double angle = -k * (error - base) - node->phase;
        double _Complex field = node->weight * sqrt(node->density) * (cos(angle) + sin(angle) * I);
        double du = k * (node->point.x - node->point.z * s.x / s.z);
        double dv = k * (node->point.y - node->point.z * s.y / s.z);
        double bend = -k * node->point.z / s.z, s2 = s.z * s.z;
        sum.value += field;
        sum.u += I * du * field;
        sum.v += I * dv * field;
        sum.uu += (-du * du + I * bend * (1.0 + s.x * s.x / s2)) * field;
        sum.uv += (-du * dv + I * bend * s.x * s.y / s2) * field;
        sum.vv += (-dv * dv + I * bend * (1.0 + s.y * s.y / s2)) * field;
    }
    return sum;
}

double _Complex ev_aperture_integral(const ev_antenna *antenna, const ev_nodes *nodes, ev_vec3 s)
{
    double _Complex sum = 0.0;
    double k = antenna->wavenumber;
    for (int i = 0; i < nodes->count; i++) {
        const ev_node *node = &nodes->items[i];
        if (!(node->density > 0.0))
            continue;
        double angle = -k * error_of(node, s) - node->phase;
        sum += node->weight * sqrt(node->density) * (cos(angle) + sin(angle) * I);
    }
    return sum;
}

static ev_vec3 direction_of(double u, double v)
{
    double size = hypot(u, v);
    if (size > 0.99) {
        u *= 0.99 / size;
        v *= 0.99 / size;
    }
    return ev_vec3_make(u, v, sqrt(1.0 - u * u - v * v));
}

/* Newton step of log |I|^2; uphill by a tenth of a beamwidth where it is not convex there. */
static void newton_step(const ev_antenna *antenna, const integral *at, double *du, double *dv)
{
    double _Complex u = at->u / at->value, v = at->v / at->value;
    double gu = 2.0 * creal(u), gv = 2.0 * creal(v);
    double huu = 2.0 * creal(at->uu / at->value - u * u);
    double huv = 2.0 * creal(at->uv / at->value - u * v);
    double hvv = 2.0 * creal(at->vv / at->value - v * v);
    double det = huu * hvv - huv * huv;
    if (huu < 0.0 && det > 0.0) {
        *du = -(hvv * gu - huv * gv) / det;
        *dv = -(huu * gv - huv * gu) / det;
        return;
    }
    double size = hypot(gu, gv), step = 0.05 * antenna->wavelength / antenna->radius;
    *du = size > 0.0 ? step * gu / size : 0.0;
    *dv = size > 0.0 ? step * gv / size : 0.0;
}

/* Newton converges by squares: after a step of 1e-5 of a beamwidth what is left is rounding. */
static ev_vec3 climb(const ev_antenna *antenna, const ev_nodes *nodes, ev_vec3 from, double *height)
{
    ev_vec3 s = from;
    integral at = integrate(antenna, nodes, s);
    double beam = antenna->wavelength / antenna->radius, moved = INFINITY;
    *height = cabs(at.value);
    for (int pass = 0; pass < 30 && *height > 0.0 && moved > 1e-5 * beam; pass++) {
        double du, dv, part = 1.0;
        newton_step(antenna, &at, &du, &dv);
        for (; part > 1e-3; part *= 0.5) {
            ev_vec3 next = direction_of(s.x + part * du, s.y + part * dv);
            integral there = integrate(antenna, nodes, next);
            if (cabs(there.value) >= *height) {
                s = next;
                at = there;
                *height = cabs(there.value);
                break;
            }
        }
        if (part <= 1e-3)
            break;
        moved = part * hypot(du, dv);
    }
    return s;
}

static double whole_amplitude(const ev_nodes *nodes)
{
    double sum = 0.0;
    for (int i = 0; i < nodes->count; i++)
        sum += nodes->items[i].weight * sqrt(nodes->items[i].density);
    return sum;
}

/* Where the zone of the main reflector over (x, y) points: the ray's direction as it leaves. */
static ev_vec3 pointing_of(const ev_antenna *antenna, int feed, double x, double y)
{
    ev_sample sample = ev_aperture_sample(antenna, feed, x, y);
    return ev_conic_reflect(&antenna->main, sample.point, sample.incident);
}

enum { ZONE_RINGS = 4, ZONE_SECTORS = 8, ZONES = ZONE_RINGS * ZONE_SECTORS + 1, CLIMBS = 3 };
enum { ZONE_NODES = 60000 };

/* The directions of the zones that give most, best first. */
static void rank_zones(const ev_antenna *antenna, int feed, const ev_nodes *nodes,
                       ev_vec3 best[CLIMBS])
{
    double heights[CLIMBS] = {0};
    for (int zone = 0; zone < ZONES && nodes->count < ZONE_NODES; zone++) {
        double r =
            antenna->radius * ((zone + ZONE_SECTORS - 1) / ZONE_SECTORS) / (ZONE_RINGS + 0.5);
        double phi = 2.0 * EV_PI * (zone % ZONE_SECTORS) / ZONE_SECTORS;
        ev_vec3 s = pointing_of(antenna, feed, antenna->offset + r * cos(phi), r * sin(phi));
        if (!(s.z > 0.1))
            continue;
        double height = cabs(ev_aperture_integral(antenna, nodes, s));
        for (int i = 0; i < CLIMBS; i++)
            if (height > heights[i]) {
                for (int k = CLIMBS - 1; k > i; k--) {
                    heights[k] = heights[k - 1];
                    best[k] = best[k - 1];
                }
                heights[i] = height;
                best[i] = s;
                break;
            }
    }
}

/* A lobe that holds most of what the aperture can give leaves too little for a higher one. Where
 * none does, the lobe is broken up: the highest piece stands where many zones point. */
ev_vec3 ev_aperture_peak(const ev_antenna *antenna, int feed, const ev_nodes *nodes, ev_vec3 wanted)
{
    ev_plane plane = ev_fit_plane(antenna, nodes, wanted, EV_WEIGHT_AMPLITUDE);
    double highest, most = whole_amplitude(nodes);
    ev_vec3 peak =
        climb(antenna, nodes, direction_of(wanted.x + plane.b, wanted.y + plane.c), &highest);
    if (highest * highest >= 0.6 * most * most)
        return peak;
    ev_vec3 starts[CLIMBS + 1] = {wanted, wanted, wanted, wanted};
    rank_zones(antenna, feed, nodes, starts + 1);
    for (int i = 0; i <= CLIMBS; i++) {
        double height;
        ev_vec3 found = climb(antenna, nodes, starts[i], &height);
        if (height > highest * (1.0 + 1e-9)) {
            highest = height;
            peak = found;
        }
    }
    return peak;
}

double ev_polarization_efficiency(const ev_nodes *nodes, ev_polarization polarization, ev_vec3 s)
{
    ev_cvec3 co = ev_copolar(polarization, s);
    bool circular = polarization == EV_POLARIZATION_RHCP || polarization == EV_POLARIZATION_LHCP;
    double _Complex along = 0.0;
    double whole = 0.0;
    for (int i = 0; i < nodes->count; i++) {
        const ev_node *node = &nodes->items[i];
        double size = node->weight * sqrt(node->density);
        double _Complex part =
            node->field.x * conj(co.x) + node->field.y * conj(co.y) + node->field.z * conj(co.z);
        /* a circular wave turned in space only shifts in phase: that is squint, not loss */
        along += size * (circular ? cabs(part) : part);
        whole += size;
    }
    double ratio = whole > 0.0 ? cabs(along) / whole : 0.0;
    return ratio * ratio;
}

typedef struct extremes {
    double low, high, low_x, low_y, high_x, high_y;
} extremes;

static void see(extremes *seen, double value, double x, double y)
{
    if (value < seen->low) {
        seen->low = value;
        seen->low_x = x;
        seen->low_y = y;
    }
    if (value > seen->high) {
        seen->high = value;
        seen->high_x = x;
        seen->high_y = y;
    }
}

typedef struct surface_error {
    const ev_antenna *antenna;
    int feed;
    ev_vec3 wanted;
    double tilt_x, tilt_y; /* taken off */
} surface_error;

static double error_at(const surface_error *error, double x, double y)
{
    ev_vec3 direction, sub_point, point = ev_main_point(error->antenna, x, y);
    return ev_aperture_path(error->antenna, error->feed, x, y, &direction, &sub_point) -
           ev_vec3_dot(error->wanted, point) - error->tilt_x * (x - error->antenna->offset) -
           error->tilt_y * y;
}

/* Compass search from a sampled extreme, along the circles about the aperture centre and across
 * them, so that it can follow the rims. sign: +1 highest, -1 lowest. */
static double refine(const surface_error *error, double x, double y, double start, double sign)
{
    const ev_antenna *antenna = error->antenna;
    double best = start, r = hypot(x - antenna->offset, y), phi = atan2(y, x - antenna->offset);
    for (double step = 0.1 * antenna->radius; step > 1e-5 * antenna->radius; step *= 0.5) {
        for (int side = 0; side < 4; side++) {
            double out = side == 0 ? step : side == 1 ? -step : 0.0;
            double turn = (side == 2 ? step : side == 3 ? -step : 0.0) / fmax(r, step);
            double to = fmin(fmax(r + out, antenna->hole_radius), antenna->radius);
            double value =
                error_at(error, antenna->offset + to * cos(phi + turn), to * sin(phi + turn));
            if (sign * value > sign * best) {
                best = value;
                r = to;
                phi += turn;
            }
        }
    }
    return best;
}

enum { RIM_SAMPLES = 72 };

static double spread(const surface_error *error, const ev_nodes *nodes)
{
    const ev_antenna *antenna = error->antenna;
    extremes seen = {.low = INFINITY, .high = -INFINITY};
    for (int i = 0; i < nodes->count; i++) {
        const ev_node *node = &nodes->items[i];
        double value = error_of(node, error->wanted) -
                       error->tilt_x * (node->point.x - antenna->offset) -
                       error->tilt_y * node->point.y;
        see(&seen, value, node->point.x, node->point.y);
    }
    for (int i = 0; i < RIM_SAMPLES; i++) {
        double phi = 2.0 * EV_PI * i / RIM_SAMPLES;
        for (int rim = 0; rim < 2; rim++) {
            double r = rim ? antenna->hole_radius : antenna->radius;
            double x = antenna->offset + r * cos(phi), y = r * sin(phi);
            see(&seen, error_at(error, x, y), x, y);
        }
    }
    if (!(seen.high >= seen.low))
        return 0.0;
    return refine(error, seen.high_x, seen.high_y, seen.high, 1.0) -
           refine(error, seen.low_x, seen.low_y, seen.low, -1.0);
}

void ev_peak_to_valley(const ev_antenna *antenna, int feed, const ev_nodes *nodes, ev_vec3 wanted,
                       const ev_plane *plane, double *raw, double *untilted)
{
    surface_error error = {.antenna = antenna, .feed = feed, .wanted = wanted};
    *raw = spread(&error, nodes);
    error.tilt_x = plane->b;
    error.tilt_y = plane->c;
    *untilted = spread(&error, nodes);
}
