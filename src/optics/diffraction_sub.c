/* Physical optics on the subreflector: nodes over its rim, and the sum over them. Called for every
 * node of the main reflector by diffraction.c; knows nothing of far fields. */
#include "optics/diffraction_sub.h"

#include "optics/aperture.h"
#include "optics/beam_lanes.h"
#include "optics/quadrature.h"

#include <stdlib.h>

enum { COLUMNS = 9, RIM_LOOKS = 12, SUB_LOOKS = 24 };

static double path_over(const ev_antenna *antenna, int feed, ev_vec3 q, ev_vec3 p)
{
    return ev_vec3_length(ev_vec3_sub(q, antenna->feeds[feed].position)) +
           ev_vec3_length(ev_vec3_sub(p, q));
}

/* Spread of the path over the sub's rim and middle for one P. */
static double spread_for(const ev_antenna *antenna, int feed, ev_vec3 p)
{
    double low = INFINITY, high = -INFINITY;
    for (int i = 0; i <= SUB_LOOKS; i++) {
        double r = i == SUB_LOOKS ? 0.0 : 1.0, t = 2.0 * EV_PI * i / SUB_LOOKS;
        double path = path_over(antenna, feed, ev_sub_point(&antenna->sub, r, t), p);
        low = fmin(low, path);
        high = fmax(high, path);
    }
    return high - low;
}

double ev_sub_currents_spread(const ev_antenna *antenna, int feed)
{
    double spread = 0.0;
    for (int i = 0; i < RIM_LOOKS; i++) {
        double phi = 2.0 * EV_PI * i / RIM_LOOKS;
        ev_vec3 p = ev_main_point(antenna, antenna->offset + antenna->radius * cos(phi),
                                  antenna->radius * sin(phi));
        spread = fmax(spread, spread_for(antenna, feed, p));
    }
    return spread;
}

/* Half the spread is what the phase turns from the middle to the rim; a quarter more for a path
 * that is stationary near the rim and turns all of it across. Node rules as for the main. */
void ev_sub_currents_order(const ev_antenna *antenna, int feed, int *radial, int *around)
{
    double phase = 0.625 * antenna->wavenumber * ev_sub_currents_spread(antenna, feed);
    *radial = (int)fmin(14.0 + 0.35 * phase, EV_GAUSS_CAPACITY);
    *around = (int)fmin(24.0 + 1.15 * phase, 8192.0);
}

/* 2 n x h at Q, times the area, n on the lit side. */
static void current_at(const ev_antenna *antenna, int feed, ev_vec3 q, double area, double base,
                       double _Complex current[3])
{
    const ev_feed *lit = &antenna->feeds[feed];
    ev_vec3 arm = ev_vec3_sub(q, lit->position);
    double distance = ev_vec3_length(arm), k = antenna->wavenumber;
    ev_vec3 i = ev_vec3_scale(1.0 / distance, arm), n = ev_conic_normal(&antenna->sub.placed, q);
    if (ev_vec3_dot(n, i) > 0.0)
        n = ev_vec3_scale(-1.0, n);
    ev_launch launch = ev_feed_launch(antenna, feed, i);
    double size = 2.0 * area * sqrt(launch.level / (4.0 * EV_PI)) / distance;
    double phase = -k * (distance - base) - launch.phase;
    double _Complex turn = size * cos(phase) + I * (size * sin(phase));
    ev_cvec3 e = launch.field;
    double _Complex along = turn * (n.x * e.x + n.y * e.y + n.z * e.z);
    double _Complex facing = -turn * ev_vec3_dot(n, i);
    current[0] = i.x * along + facing * e.x;
    current[1] = i.y * along + facing * e.y;
    current[2] = i.z * along + facing * e.z;
}

static void write_node(const ev_sub_currents *currents, int index, ev_vec3 q,
                       const double _Complex j[3])
{
    double *to =
        currents->table + (size_t)(index / EV_LANES) * COLUMNS * EV_LANES + index % EV_LANES;
    double columns[COLUMNS] = {q.x,         q.y,         q.z,         creal(j[0]), creal(j[1]),
                               creal(j[2]), cimag(j[0]), cimag(j[1]), cimag(j[2])};
    for (int c = 0; c < COLUMNS; c++)
        to[c * EV_LANES] = columns[c];
}

/* Lanes past the last node carry no current and stand where no R is zero: on the first node. */
void ev_sub_currents_make(const ev_antenna *antenna, int feed, int radial, int around, double base,
                          ev_sub_currents *currents)
{
    const ev_sub *sub = &antenna->sub;
    ev_gauss *gauss = malloc(sizeof *gauss);
    int count = radial * around, blocks = (count + EV_LANES - 1) / EV_LANES;
    double *table = calloc((size_t)blocks * COLUMNS * EV_LANES, sizeof *table);
    if (!gauss || !table)
        abort();
    ev_gauss_make(radial, gauss);
    *currents = (ev_sub_currents){
        .table = table, .count = count, .blocks = blocks, .wavenumber = antenna->wavenumber};
    double ellipse = (sub->semi_long + sub->oversize) * (sub->semi_short + sub->oversize);
    ev_vec3 up = ev_vec3_sub(ev_sub_place(sub, ev_vec3_add(sub->rim_centre, sub->rim_normal)),
                             ev_sub_place(sub, sub->rim_centre));
#pragma omp parallel for schedule(static)
    for (int i = 0; i < blocks * EV_LANES; i++) {
        int node = i < count ? i : 0;
        double r = gauss->x[node % radial], t = 2.0 * EV_PI * (node / radial) / around;
        ev_vec3 q = ev_sub_point(sub, r, t);
        double foot = gauss->weight[node % radial] * ellipse * r * 2.0 * EV_PI / around;
        double area = foot / fabs(ev_vec3_dot(up, ev_conic_normal(&sub->placed, q)));
        double _Complex current[3];
        current_at(antenna, feed, q, i < count ? area : 0.0, base, current);
        write_node(currents, i, q, current);
    }
    free(gauss);
}

void ev_sub_currents_free(ev_sub_currents *currents)
{
    free(currents->table);
    *currents = (ev_sub_currents){0};
}

/* One block seen from P: unit vectors, k R, and g with the current's phases yet to come. */
typedef struct view {
    double ux[EV_LANES], uy[EV_LANES], uz[EV_LANES], inverse[EV_LANES];
    double gr[EV_LANES], gi[EV_LANES];
} view;

static void look(const double *restrict table, ev_vec3 p, double k, view *restrict seen)
{
    const double *x = table, *y = x + EV_LANES, *z = y + EV_LANES;
    double t[EV_LANES], c[EV_LANES], s[EV_LANES], turns = k / (2.0 * EV_PI);
    for (int i = 0; i < EV_LANES; i++) {
        double dx = p.x - x[i], dy = p.y - y[i], dz = p.z - z[i];
        double r = sqrt(dx * dx + dy * dy + dz * dz), inverse = 1.0 / r;
        seen->inverse[i] = inverse;
        seen->ux[i] = dx * inverse;
        seen->uy[i] = dy * inverse;
        seen->uz[i] = dz * inverse;
        t[i] = turns * r;
    }
    ev_lanes_turn(t, c, s);
    for (int i = 0; i < EV_LANES; i++) {
        double size = seen->inverse[i] / (4.0 * EV_PI);
        seen->gr[i] = size * c[i];
        seen->gi[i] = -size * s[i];
    }
}

static double fold(const double *restrict v)
{
    double part[8];
    for (int l = 0; l < 8; l++)
        part[l] = (v[l] + v[l + 8]) + (v[l + 16] + v[l + 24]);
    return ((part[0] + part[4]) + (part[1] + part[5])) +
           ((part[2] + part[6]) + (part[3] + part[7]));
}

/* Adds (jk + 1/R) g (a b' - b a') to h: one component of J x u. */
static void add_h(const view *restrict seen, double k, const double *restrict ar,
                  const double *restrict br, const double *restrict u, const double *restrict v,
                  double _Complex *h)
{
    const double *ai = ar + 3 * EV_LANES, *bi = br + 3 * EV_LANES;
    double re[EV_LANES], im[EV_LANES];
    for (int i = 0; i < EV_LANES; i++) {
        double fr = seen->inverse[i] * seen->gr[i] - k * seen->gi[i];
        double fi = seen->inverse[i] * seen->gi[i] + k * seen->gr[i];
        double cr = ar[i] * v[i] - br[i] * u[i], ci = ai[i] * v[i] - bi[i] * u[i];
        re[i] = fr * cr - fi * ci;
        im[i] = fr * ci + fi * cr;
    }
    *h += fold(re) + I * fold(im);
}

/* Adds one component of e: -jk g [J a - u (u.J) b]. */
static void add_e(const view *restrict seen, double k, const double *restrict j,
                  const double *restrict jr, const double *restrict u, double _Complex *e)
{
    const double *ji = jr + 3 * EV_LANES;
    double re[EV_LANES], im[EV_LANES];
    for (int i = 0; i < EV_LANES; i++) {
        double near = seen->inverse[i] / k, a = 1.0 - near * near, b = 1.0 - 3.0 * near * near;
        double dr =
            seen->ux[i] * j[i] + seen->uy[i] * j[i + EV_LANES] + seen->uz[i] * j[i + 2 * EV_LANES];
        double di = seen->ux[i] * j[i + 3 * EV_LANES] + seen->uy[i] * j[i + 4 * EV_LANES] +
                    seen->uz[i] * j[i + 5 * EV_LANES];
        double vr = a * jr[i] + near * ji[i] - u[i] * (b * dr + 3.0 * near * di);
        double vi = a * ji[i] - near * jr[i] - u[i] * (b * di - 3.0 * near * dr);
        re[i] = k * (seen->gr[i] * vi + seen->gi[i] * vr);
        im[i] = -k * (seen->gr[i] * vr - seen->gi[i] * vi);
    }
    *e += fold(re) + I * fold(im);
}

ev_near_field ev_sub_currents_field(const ev_sub_currents *currents, ev_vec3 point, bool with_e)
{
    ev_near_field field = {{0.0, 0.0, 0.0}, {0.0, 0.0, 0.0}};
    double k = currents->wavenumber;
    for (int block = 0; block < currents->blocks; block++) {
        const double *table = currents->table + (size_t)block * COLUMNS * EV_LANES;
        const double *jx = table + 3 * EV_LANES, *jy = jx + EV_LANES, *jz = jy + EV_LANES;
        view seen;
        look(table, point, k, &seen);
        add_h(&seen, k, jy, jz, seen.uy, seen.uz, &field.h.x);
        add_h(&seen, k, jz, jx, seen.uz, seen.ux, &field.h.y);
        add_h(&seen, k, jx, jy, seen.ux, seen.uy, &field.h.z);
        if (!with_e)
            continue;
        add_e(&seen, k, jx, jx, seen.ux, &field.e.x);
        add_e(&seen, k, jx, jy, seen.uy, &field.e.y);
        add_e(&seen, k, jx, jz, seen.uz, &field.e.z);
    }
    return field;
}
