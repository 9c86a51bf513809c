/* Direct sums over points of current. Points lie in blocks of EV_LANES; within a direction the
 * order of summation is fixed. */
#include "optics/beam_points.h"

#include "optics/beam_lanes.h"

#include <stdlib.h>

enum { COLUMNS = 9 }; /* x, y, z from the sheet's middle; j: x, y, z real, x, y, z imaginary */

struct ev_points {
    int count, blocks;
    ev_vec3 middle;
    double *table; /* [block][column][lane] */
};

ev_points *ev_points_create(const ev_sheet *sheet, const double *x, const double *y,
                            const double *weights, int count)
{
    ev_points *points = malloc(sizeof *points);
    size_t size = (size_t)(count > 0 ? count : 1);
    ev_cvec3 *current = malloc(size * sizeof *current);
    bool *lit = malloc(size * sizeof *lit);
    int blocks = (count + EV_LANES - 1) / EV_LANES;
    double *table = calloc((size_t)(blocks > 0 ? blocks : 1) * COLUMNS * EV_LANES, sizeof *table);
    if (!points || !current || !lit || !table)
        abort();
    double c = sheet->offset;
    *points = (ev_points){
        .count = count, .blocks = blocks, .middle = {c, 0.0, sheet->bend * c * c}, .table = table};
    bool whole = sheet->currents(sheet->context, x, y, count, current, lit);
    for (int i = 0; i < count; i++) {
        double *to = table + (size_t)(i / EV_LANES) * COLUMNS * EV_LANES + i % EV_LANES;
        double w = weights[i];
        double columns[COLUMNS] = {x[i] - c,
                                   y[i],
                                   sheet->bend * (x[i] * x[i] + y[i] * y[i] - c * c),
                                   w * creal(current[i].x),
                                   w * creal(current[i].y),
                                   w * creal(current[i].z),
                                   w * cimag(current[i].x),
                                   w * cimag(current[i].y),
                                   w * cimag(current[i].z)};
        for (int column = 0; column < COLUMNS; column++)
            to[column * EV_LANES] = columns[column];
    }
    free(current);
    free(lit);
    if (!whole) {
        ev_points_destroy(points);
        return NULL;
    }
    return points;
}

void ev_points_destroy(ev_points *points)
{
    if (!points)
        return;
    free(points->table);
    free(points);
}

int ev_points_count(const ev_points *points)
{
    return points->count;
}

static double fold(const double *restrict a, const double *restrict b, const double *restrict c,
                   const double *restrict d, double sign)
{
    double part[8] = {0};
    for (int i = 0; i < EV_LANES; i += 8)
        for (int l = 0; l < 8; l++)
            part[l] += a[i + l] * b[i + l] + sign * (c[i + l] * d[i + l]);
    return ((part[0] + part[4]) + (part[1] + part[5])) +
           ((part[2] + part[6]) + (part[3] + part[7]));
}

/* d: (s - reference) k / 2 pi. */
static void sum_block(const double *table, ev_vec3 d, double _Complex sum[3])
{
    const double *x = table, *y = x + EV_LANES, *z = y + EV_LANES, *j = z + EV_LANES;
    double t[EV_LANES], c[EV_LANES], s[EV_LANES];
    for (int i = 0; i < EV_LANES; i++)
        t[i] = d.x * x[i] + d.y * y[i] + d.z * z[i];
    ev_lanes_turn(t, c, s);
    for (int part = 0; part < 3; part++) {
        const double *re = j + part * EV_LANES, *im = re + 3 * EV_LANES;
        sum[part] += fold(c, re, s, im, -1.0) + I * fold(c, im, s, re, 1.0);
    }
}

enum { BLOCKS_AT_ONCE = 12 }; /* 27 kB: stays in the first cache while directions pass */

void ev_points_sum(const ev_points *points, const ev_sheet *sheet, const ev_vec3 *directions,
                   int count, double _Complex (*sums)[3])
{
    double scale = sheet->wavenumber / (2.0 * EV_PI);
    for (int i = 0; i < count; i++)
        sums[i][0] = sums[i][1] = sums[i][2] = 0.0;
    for (int from = 0; from < points->blocks; from += BLOCKS_AT_ONCE) {
        int to = from + BLOCKS_AT_ONCE < points->blocks ? from + BLOCKS_AT_ONCE : points->blocks;
        for (int i = 0; i < count; i++) {
            ev_vec3 d = ev_vec3_scale(scale, ev_vec3_sub(directions[i], sheet->reference));
            for (int block = from; block < to; block++)
                sum_block(points->table + (size_t)block * COLUMNS * EV_LANES, d, sums[i]);
        }
    }
    for (int i = 0; i < count; i++) {
        ev_vec3 d = ev_vec3_sub(directions[i], sheet->reference);
        double phase = sheet->wavenumber * ev_vec3_dot(d, points->middle);
        double _Complex common = cos(phase) + I * sin(phase);
        for (int part = 0; part < 3; part++)
            sums[i][part] *= common;
    }
}
