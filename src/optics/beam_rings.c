/* Far field of modes on rings: the inner loop of every cut and map. Sums run in a fixed order
 * within a direction, so threads over directions do not change a bit. */
#include "optics/beam_rings.h"

#include "optics/beam_bessel.h"
#include "optics/quadrature.h"

#include <stdlib.h>

/* Blocks of EV_LANES rings; per block, order and row, EV_LANES numbers side by side. The last block
 * is filled up with rings of no weight. */
struct ev_rings {
    int blocks, highest;
    double *radius, *table;
};

/* Each count is one or more panels of Gauss's rule; the steps rise by a third. */
static const short panel_sizes[EV_RINGS_STEPS] = {24,  32,  48,  64,  96,  128, 192, 256,
                                                  384, 512, 384, 512, 384, 512, 384, 512,
                                                  384, 512, 384, 512, 384, 512, 384, 512};
static const short panel_counts[EV_RINGS_STEPS] = {1, 1, 1, 1, 1,  1,  1,  1,  1,  1,  2,   2,
                                                   4, 4, 8, 8, 16, 16, 32, 32, 64, 64, 128, 128};

double ev_rings_phase(const ev_sheet *sheet, ev_vec3 s)
{
    ev_vec3 d = ev_vec3_sub(s, sheet->reference);
    double q = hypot(d.x + 2.0 * sheet->bend * sheet->offset * d.z, d.y);
    return sheet->wavenumber * sheet->radius * (q + sheet->bend * sheet->radius * fabs(d.z));
}

int ev_rings_count(int step)
{
    return panel_sizes[step] * panel_counts[step];
}

/* A panel of n nodes holds a phase of 4 n less some twenty nodes (the Chebyshev series of
 * exp(jx) ends soon after order x, and Gauss's rule holds degree 2n - 1); the modes' own degrees
 * share that budget. 0.3 nodes a radian keeps 17 % in hand. */
int ev_rings_step(const ev_modes *modes, double phase)
{
    for (int step = 0; step < EV_RINGS_STEPS - 1; step++) {
        double own = 10.0 + 0.5 * modes->degrees;
        if (ev_rings_count(step) >= own * panel_counts[step] + 0.3 * phase)
            return step;
    }
    return EV_RINGS_STEPS - 1;
}

static void fill_ring(const ev_modes *modes, double t, double weight, double *basis, double *to)
{
    double x = 2.0 * t - 1.0;
    basis[0] = weight;
    if (modes->degrees > 1)
        basis[1] = weight * x;
    for (int n = 2; n < modes->degrees; n++)
        basis[n] = ((2 * n - 1) * x * basis[n - 1] - (n - 1) * basis[n - 2]) / n;
    for (int row = 0; row < (modes->highest + 1) * EV_MODE_ROWS; row++) {
        const double *a = modes->coefficients + (size_t)row * (size_t)modes->degrees;
        double sum = 0.0;
        for (int n = 0; n < modes->degrees; n++)
            sum += a[n] * basis[n];
        to[(size_t)row * EV_LANES] = sum;
    }
}

static size_t block_size(int highest)
{
    return (size_t)(highest + 1) * EV_MODE_ROWS * EV_LANES;
}

ev_rings *ev_rings_create(const ev_sheet *sheet, const ev_modes *modes, int step)
{
    int count = ev_rings_count(step), size = panel_sizes[step], panels = panel_counts[step];
    ev_rings *rings = malloc(sizeof *rings);
    ev_gauss *gauss = malloc(sizeof *gauss);
    if (!rings || !gauss)
        abort();
    ev_gauss_make(size, gauss);
    *rings = (ev_rings){.blocks = (count + EV_LANES - 1) / EV_LANES, .highest = modes->highest};
    rings->radius = calloc((size_t)rings->blocks * EV_LANES, sizeof *rings->radius);
    rings->table = calloc((size_t)rings->blocks * block_size(modes->highest), sizeof(double));
    double *basis =
        malloc((size_t)rings->blocks * EV_LANES * (size_t)modes->degrees * sizeof *basis);
    if (!rings->radius || !rings->table || !basis)
        abort();
    double span = sheet->radius - sheet->hole_radius;
#pragma omp parallel for schedule(static)
    for (int i = 0; i < rings->blocks * EV_LANES; i++) {
        int node = i < count ? i : count - 1;
        double t = (node / size + gauss->x[node % size]) / panels;
        double r = sheet->hole_radius + span * t;
        double weight = gauss->weight[node % size] / panels * span * r * 2.0 * EV_PI;
        rings->radius[i] = r;
        fill_ring(modes, t, i < count ? weight : 0.0, basis + (size_t)i * (size_t)modes->degrees,
                  rings->table + (size_t)(i / EV_LANES) * block_size(modes->highest) +
                      i % EV_LANES);
    }
    free(basis);
    free(gauss);
    return rings;
}

void ev_rings_destroy(ev_rings *rings)
{
    if (!rings)
        return;
    free(rings->radius);
    free(rings->table);
    free(rings);
}

int ev_rings_scratch(const ev_modes *modes)
{
    return (modes->highest + 1) * EV_LANES;
}

/* Over one block and order: sums of J g a for the twelve rows, g = exp(jk b r^2 d_z). */
static void sum_rows(const double *restrict bessel, const double *restrict cosine,
                     const double *restrict sine, const double *restrict rows,
                     double _Complex sums[6])
{
    double gr[EV_LANES], gi[EV_LANES];
    for (int i = 0; i < EV_LANES; i++) {
        gr[i] = bessel[i] * cosine[i];
        gi[i] = bessel[i] * sine[i];
    }
    for (int c = 0; c < 6; c++) {
        const double *re = rows + (size_t)(2 * c) * EV_LANES, *im = re + EV_LANES;
        double a[8] = {0}, b[8] = {0};
        for (int i = 0; i < EV_LANES; i += 8)
            for (int l = 0; l < 8; l++) {
                a[l] += gr[i + l] * re[i + l] - gi[i + l] * im[i + l];
                b[l] += gr[i + l] * im[i + l] + gi[i + l] * re[i + l];
            }
        sums[c] = (((a[0] + a[4]) + (a[1] + a[5])) + ((a[2] + a[6]) + (a[3] + a[7]))) +
                  I * (((b[0] + b[4]) + (b[1] + b[5])) + ((b[2] + b[6]) + (b[3] + b[7])));
    }
}

static double _Complex times(double _Complex a, double _Complex b)
{
    double ar = creal(a), ai = cimag(a), br = creal(b), bi = cimag(b);
    return (ar * br - ai * bi) + I * (ar * bi + ai * br);
}

/* Adds j^m (exp(jm psi) S_m + exp(-jm psi) S_-m) of one block; turn = exp(j psi). */
static void sum_block(const ev_rings *rings, int block, const double *bessel, const double *cosine,
                      const double *sine, double _Complex turn, double _Complex sum[3])
{
    const double *table = rings->table + (size_t)block * block_size(rings->highest);
    double _Complex plus = 1.0, minus = 1.0, back = conj(turn), sums[6];
    for (int m = 0; m <= rings->highest; m++) {
        sum_rows(bessel + m * EV_LANES, cosine, sine, table + (size_t)m * EV_MODE_ROWS * EV_LANES,
                 sums);
        for (int c = 0; c < 3; c++)
            sum[c] += times(plus, sums[c]) + times(minus, sums[c + 3]);
        plus = times(times(I, plus), turn);
        minus = times(times(I, minus), back);
    }
}

void ev_rings_sum(const ev_rings *rings, const ev_sheet *sheet, ev_vec3 s, double *scratch,
                  double _Complex sum[3])
{
    ev_vec3 d = ev_vec3_sub(s, sheet->reference);
    double k = sheet->wavenumber, b = sheet->bend, c = sheet->offset;
    double qx = d.x + 2.0 * b * c * d.z, q = hypot(qx, d.y);
    double _Complex turn = q > 0.0 ? qx / q + I * (d.y / q) : 1.0;
    double bulge = k / (2.0 * EV_PI) * b * d.z;
    double _Complex total[3] = {0.0, 0.0, 0.0};
    for (int block = 0; block < rings->blocks; block++) {
        const double *r = rings->radius + (size_t)block * EV_LANES;
        double x[EV_LANES], t[EV_LANES], cosine[EV_LANES], sine[EV_LANES];
        for (int i = 0; i < EV_LANES; i++) {
            x[i] = k * q * r[i];
            t[i] = bulge * r[i] * r[i];
        }
        ev_lanes_turn(t, cosine, sine);
        ev_bessel_lanes(x, rings->highest, scratch);
        sum_block(rings, block, scratch, cosine, sine, turn, total);
    }
    double phase = k * (d.x * c + b * c * c * d.z);
    double _Complex common = cos(phase) + I * sin(phase);
    for (int i = 0; i < 3; i++)
        sum[i] = times(common, total[i]);
}
