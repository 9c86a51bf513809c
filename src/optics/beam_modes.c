/* From samples of a current sheet to Fourier modes in angle and Legendre series in radius, refined
 * until both have converged. Called once a source; knows nothing of rays or directions. */
#include "optics/beam_sheet.h"

#include "optics/quadrature.h"

#include <stdlib.h>
#include <string.h>

/* Samples and, after `transform`, Fourier coefficients: [ring][part][angle or order], the parts
 * being x, y, z real, then x, y, z imaginary. */
typedef struct grid {
    int radial, around;
    ev_gauss gauss;
    double *values;
    bool edged, given_up;
} grid;

enum { PARTS = 6 };

static void *take(size_t count, size_t size)
{
    void *memory = calloc(count ? count : 1, size);
    if (!memory)
        abort();
    return memory;
}

static double *ring_of(const grid *of, int ring, int part)
{
    return of->values + ((size_t)ring * PARTS + (size_t)part) * (size_t)of->around;
}

static double radius_of(const ev_sheet *sheet, double t)
{
    return sheet->hole_radius + (sheet->radius - sheet->hole_radius) * t;
}

/* Samples what `coarse`, with half the angles on the same radii, does not hold already (it may be
 * NULL). */
static void sample(const ev_sheet *sheet, const grid *coarse, grid *fine)
{
    int step = coarse ? 2 : 1, first = coarse ? 1 : 0;
    int each = fine->around / step, count = each * fine->radial;
    double *x = take((size_t)count, sizeof *x), *y = take((size_t)count, sizeof *y);
    ev_cvec3 *current = take((size_t)count, sizeof *current);
    bool *lit = take((size_t)count, sizeof *lit);
    for (int i = 0; i < count; i++) {
        double r = radius_of(sheet, fine->gauss.x[i / each]);
        double phi = 2.0 * EV_PI * (first + step * (i % each)) / fine->around;
        x[i] = sheet->offset + r * cos(phi);
        y[i] = r * sin(phi);
    }
    fine->given_up = !sheet->currents(sheet->context, x, y, count, current, lit);
    for (int i = 0; i < count && !fine->given_up; i++) {
        int ring = i / each, at = first + step * (i % each);
        double _Complex parts[3] = {current[i].x, current[i].y, current[i].z};
        for (int c = 0; c < 3; c++) {
            ring_of(fine, ring, c)[at] = creal(parts[c]);
            ring_of(fine, ring, c + 3)[at] = cimag(parts[c]);
        }
        fine->edged |= !lit[i];
    }
    for (int ring = 0; coarse && ring < fine->radial; ring++)
        for (int c = 0; c < PARTS; c++)
            for (int i = 0; i < coarse->around; i++)
                ring_of(fine, ring, c)[2 * i] = ring_of(coarse, ring, c)[i];
    free(x);
    free(y);
    free(current);
    free(lit);
}

static grid make_grid(const ev_sheet *sheet, const grid *coarse, int radial, int around)
{
    grid made = {.radial = radial, .around = around};
    ev_gauss_make(radial, &made.gauss);
    made.values = take((size_t)radial * PARTS * (size_t)around, sizeof *made.values);
    if (coarse)
        made.edged = coarse->edged;
    sample(sheet, coarse, &made);
    return made;
}

/* In-place transform of length n = 2^k, exp(-j), unscaled. turns: cos and sin of 2 pi i / n. */
static void fourier(int n, const double *turns, double *re, double *im)
{
    for (int i = 1, j = 0; i < n; i++) {
        int bit = n / 2;
        for (; j & bit; bit /= 2)
            j ^= bit;
        j ^= bit;
        if (i < j) {
            double a = re[i], b = im[i];
            re[i] = re[j];
            im[i] = im[j];
            re[j] = a;
            im[j] = b;
        }
    }
    for (int half = 1; half < n; half *= 2)
        for (int start = 0; start < n; start += 2 * half)
            for (int i = 0; i < half; i++) {
                int low = start + i, high = low + half, turn = i * (n / (2 * half));
                double c = turns[2 * turn], s = -turns[2 * turn + 1];
                double a = re[high] * c - im[high] * s, b = re[high] * s + im[high] * c;
                re[high] = re[low] - a;
                im[high] = im[low] - b;
                re[low] += a;
                im[low] += b;
            }
}

static grid transform(const grid *samples)
{
    grid modes = *samples;
    int n = samples->around;
    size_t size = (size_t)samples->radial * PARTS * (size_t)n;
    modes.values = take(size, sizeof *modes.values);
    double *turns = take(2 * (size_t)n, sizeof *turns);
    for (int i = 0; i < n; i++) {
        turns[2 * i] = cos(2.0 * EV_PI * i / n);
        turns[2 * i + 1] = sin(2.0 * EV_PI * i / n);
    }
    for (size_t i = 0; i < size; i++)
        modes.values[i] = samples->values[i] / n;
#pragma omp parallel for schedule(static)
    for (int ring = 0; ring < samples->radial; ring++)
        for (int c = 0; c < 3; c++)
            fourier(n, turns, ring_of(&modes, ring, c), ring_of(&modes, ring, c + 3));
    free(turns);
    return modes;
}

/* Mean square, over the rings' area, of all that order m and -m carry. */
static void order_energies(const ev_sheet *sheet, const grid *modes, double *energy)
{
    int n = modes->around;
    for (int m = 0; m <= n / 2; m++)
        energy[m] = 0.0;
    for (int ring = 0; ring < modes->radial; ring++) {
        double weight = modes->gauss.weight[ring] * radius_of(sheet, modes->gauss.x[ring]);
        for (int c = 0; c < PARTS; c++)
            for (int i = 0; i < n; i++) {
                double value = ring_of(modes, ring, c)[i];
                energy[i <= n / 2 ? i : n - i] += weight * value * value;
            }
    }
}

/* P_0 .. P_(count - 1) at x. */
static void legendre(double x, int count, double *values)
{
    values[0] = 1.0;
    if (count > 1)
        values[1] = x;
    for (int n = 2; n < count; n++)
        values[n] = ((2 * n - 1) * x * values[n - 1] - (n - 1) * values[n - 2]) / n;
}

/* The rows of order m on one ring, in the layout of ev_modes. */
static void rows_at(const grid *modes, int ring, int m, double rows[EV_MODE_ROWS])
{
    int n = modes->around;
    for (int c = 0; c < 3; c++) {
        rows[2 * c] = ring_of(modes, ring, c)[m];
        rows[2 * c + 1] = ring_of(modes, ring, c + 3)[m];
        rows[2 * c + 6] = m > 0 ? ring_of(modes, ring, c)[n - m] : 0.0;
        rows[2 * c + 7] = m > 0 ? ring_of(modes, ring, c + 3)[n - m] : 0.0;
    }
}

/* a_n = (2n + 1) sum of weight f P_n: exact for the degrees that Gauss's rule holds. */
static void expand(const grid *modes, int highest, double *coefficients)
{
    int count = modes->radial;
    double *basis = take((size_t)count, sizeof *basis), rows[EV_MODE_ROWS];
    for (int ring = 0; ring < count; ring++) {
        legendre(2.0 * modes->gauss.x[ring] - 1.0, count, basis);
        for (int n = 0; n < count; n++)
            basis[n] *= (2.0 * n + 1.0) * modes->gauss.weight[ring];
        for (int m = 0; m <= highest; m++) {
            rows_at(modes, ring, m, rows);
            for (int row = 0; row < EV_MODE_ROWS; row++) {
                double *to =
                    coefficients + ((size_t)m * EV_MODE_ROWS + (size_t)row) * (size_t)count;
                for (int n = 0; n < count; n++)
                    to[n] += basis[n] * rows[row];
            }
        }
    }
    free(basis);
}

static void degree_energies(const double *coefficients, int highest, int count, double *energy)
{
    memset(energy, 0, (size_t)count * sizeof *energy);
    for (int row = 0; row < (highest + 1) * EV_MODE_ROWS; row++)
        for (int n = 0; n < count; n++) {
            double a = coefficients[(size_t)row * (size_t)count + (size_t)n];
            energy[n] += a * a / (2.0 * n + 1.0);
        }
}

static double sum_from(const double *energy, int from, int count)
{
    double sum = 0.0;
    for (int i = count - 1; i >= from; i--)
        sum += energy[i];
    return sum;
}

/* Smallest number of leading terms whose rest is below `part` of the whole. */
static int terms_needed(const double *energy, int count, double part)
{
    double rest = 0.0, allowed = part * sum_from(energy, 0, count);
    int keep = count;
    while (keep > 1 && rest + energy[keep - 1] <= allowed)
        rest += energy[--keep];
    return keep;
}

static double share_from(const double *energy, int from, int count)
{
    double whole = sum_from(energy, 0, count);
    return whole > 0.0 ? sqrt(sum_from(energy, from, count) / whole) : 0.0;
}

/* What of a grid's transform is worth keeping. */
static void keep(const double *coefficients, const double *energy, int count, double part,
                 ev_modes *modes)
{
    modes->degrees = terms_needed(energy, count, part);
    size_t rows = (size_t)(modes->highest + 1) * EV_MODE_ROWS;
    modes->coefficients = take(rows * (size_t)modes->degrees, sizeof *modes->coefficients);
    for (size_t row = 0; row < rows; row++)
        memcpy(modes->coefficients + row * (size_t)modes->degrees,
               coefficients + row * (size_t)count,
               (size_t)modes->degrees * sizeof *modes->coefficients);
}

/* One pass: transforms the grid; when converged (or at the limits) fills `modes` and returns true,
 * else says which way to refine. */
static bool digest(const ev_sheet *sheet, const grid *samples, bool *finer_around,
                   bool *finer_radial, ev_modes *modes)
{
    grid orders = transform(samples);
    int half = samples->around / 2, count = samples->radial;
    double *energy = take((size_t)(half + 1 > count ? half + 1 : count), sizeof *energy);
    order_energies(sheet, &orders, energy);
    double part = 0.01 * sheet->tolerance * sheet->tolerance;
    double around = share_from(energy, 3 * half / 4, half + 1);
    modes->highest = terms_needed(energy, half, part) - 1;
    size_t size = (size_t)(modes->highest + 1) * EV_MODE_ROWS * (size_t)count;
    double *coefficients = take(size, sizeof *coefficients);
    expand(&orders, modes->highest, coefficients);
    degree_energies(coefficients, modes->highest, count, energy);
    double radial = share_from(energy, 3 * count / 4, count);
    *finer_around = around > sheet->tolerance && samples->around < EV_MODE_AROUND_LIMIT;
    *finer_radial = radial > sheet->tolerance && samples->radial < EV_MODE_RADIAL_LIMIT;
    modes->radial = samples->radial;
    modes->around = samples->around;
    modes->residual = fmax(around, radial);
    bool done = !*finer_around && !*finer_radial;
    if (done)
        keep(coefficients, energy, count, part, modes);
    free(coefficients);
    free(energy);
    free(orders.values);
    return done;
}

void ev_modes_make(const ev_sheet *sheet, ev_modes *modes)
{
    *modes = (ev_modes){0};
    grid samples = make_grid(sheet, NULL, sheet->first_radial ? sheet->first_radial : 20,
                             sheet->around ? sheet->around : 32);
    bool finer_around, finer_radial;
    while (!samples.given_up && !samples.edged &&
           !digest(sheet, &samples, &finer_around, &finer_radial, modes)) {
        int radial = samples.radial, around = samples.around * (finer_around ? 2 : 1);
        if (finer_radial)
            radial = radial * 3 / 2 < EV_MODE_RADIAL_LIMIT ? radial * 3 / 2 : EV_MODE_RADIAL_LIMIT;
        grid next = make_grid(sheet, finer_radial ? NULL : &samples, radial, around);
        free(samples.values);
        samples = next;
    }
    modes->edged = samples.edged;
    modes->given_up = samples.given_up;
    free(samples.values);
}

void ev_modes_free(ev_modes *modes)
{
    free(modes->coefficients);
    *modes = (ev_modes){0};
}
