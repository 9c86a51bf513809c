/* What a cut costs. Without an argument: a 401-point cut over +-80 degrees of offset dishes from 25
 * to 400 wavelengths, as CSV, each time the least of N, with the growth against the smallest and
 * against what no method can beat (the rings that the sampling theorem asks for). With a file name:
 * also writes the nodes and currents of a plain direct sum of the 100-wavelength cut, which
 * bench_beam.py then times in the same run. */
#include "optics/beam.h"
#include "optics/beam_source.h"
#include "optics/quadrature.h"

#include <stdio.h>
#include <stdlib.h>
#include <time.h>

enum { SAMPLES = 401, REPEATS = 9 };

static const double span = 80.0 * EV_PI / 180.0, frequency = 12e9;

static double now(void)
{
    struct timespec t;
    clock_gettime(CLOCK_MONOTONIC, &t);
    return (double)t.tv_sec + 1e-9 * (double)t.tv_nsec;
}

static ev_antenna make_dish(double wavelengths)
{
    ev_design design = ev_default_design();
    ev_antenna antenna;
    design.main.diameter = wavelengths * EV_LIGHT_SPEED / frequency;
    design.main.offset = 0.55 * design.main.diameter;
    design.main.f_over_d = 0.6;
    ev_design_resolve(&design);
    ev_antenna_build(&design, frequency, &antenna);
    return antenna;
}

static ev_beam_cut cut_of(void)
{
    return (ev_beam_cut){.centre = {0.0, 0.0, 1.0}, .from = -span, .to = span, .count = SAMPLES};
}

typedef struct timing {
    double source, first, again; /* s */
    ev_beam_nodes nodes;
} timing;

static timing time_cut(double wavelengths)
{
    ev_antenna antenna = make_dish(wavelengths);
    timing best = {1e9, 1e9, 1e9, {0}};
    double levels[SAMPLES];
    ev_beam_cut cut = cut_of();
    for (int i = 0; i < REPEATS; i++) {
        double t0 = now();
        ev_beam_source *source = ev_beam_source_create(&antenna, 0, EV_BEAM_EXACT);
        double t1 = now();
        ev_beam_cut_compute(source, &cut, levels, NULL);
        double t2 = now();
        ev_beam_cut_compute(source, &cut, levels, NULL);
        double t3 = now();
        best.nodes = ev_beam_source_nodes(source);
        ev_beam_source_destroy(source);
        best.source = t1 - t0 < best.source ? t1 - t0 : best.source;
        best.first = t2 - t1 < best.first ? t2 - t1 : best.first;
        best.again = t3 - t2 < best.again ? t3 - t2 : best.again;
    }
    return best;
}

/* Nodes of the direct sum: 10 + 0.35 times the phase from centre to rim along a radius, 20 + 1.15
 * times that around, as few as hold the fields; the offset makes the far side the worse one. Rows
 * of x, y, z, weight, then J real and imaginary; then the directions with our fields. */
static void write_direct(const char *path)
{
    ev_antenna antenna = make_dish(100.0);
    ev_beam_recipe recipe;
    ev_beam_currents_recipe(&antenna, 0, EV_BEAM_EXACT, &recipe);
    double k = antenna.wavenumber, radius = antenna.radius;
    double slope = antenna.offset / (2.0 * antenna.focal_length), drop = 1.0 - cos(span);
    double turn = k * radius * (sin(span) + slope * drop);
    double bulge = k * radius * radius / (4.0 * antenna.focal_length) * drop;
    static ev_gauss gauss;
    ev_gauss_make((int)(10.0 + 0.35 * (turn + bulge)), &gauss);
    int around = (int)(20.0 + 1.15 * turn), count = around * gauss.count;
    double *x = malloc((size_t)count * sizeof *x), *y = malloc((size_t)count * sizeof *y);
    ev_cvec3 *current = malloc((size_t)count * sizeof *current);
    bool *lit = malloc((size_t)count * sizeof *lit);
    FILE *file = fopen(path, "wb");
    if (!x || !y || !current || !lit || !file)
        exit(3);
    for (int i = 0; i < count; i++) {
        double r = radius * gauss.x[i % gauss.count];
        double phi = 2.0 * EV_PI * (i / gauss.count) / around;
        x[i] = antenna.offset + r * cos(phi);
        y[i] = r * sin(phi);
    }
    recipe.sheet.currents(recipe.sheet.context, x, y, count, current, lit);
    double head[] = {k,
                     count,
                     SAMPLES,
                     recipe.sheet.reference.x,
                     recipe.sheet.reference.y,
                     recipe.sheet.reference.z};
    fwrite(head, sizeof(double), 6, file);
    for (int i = 0; i < count; i++) {
        ev_vec3 p = ev_main_point(&antenna, x[i], y[i]);
        double r = radius * gauss.x[i % gauss.count];
        double row[] = {p.x,
                        p.y,
                        p.z,
                        gauss.weight[i % gauss.count] * radius * r * 2.0 * EV_PI / around,
                        creal(current[i].x),
                        creal(current[i].y),
                        creal(current[i].z),
                        cimag(current[i].x),
                        cimag(current[i].y),
                        cimag(current[i].z)};
        fwrite(row, sizeof(double), 10, file);
    }
    ev_beam_source *source = ev_beam_source_make(&recipe);
    ev_beam_cut cut = cut_of();
    for (int i = 0; i < SAMPLES; i++) {
        ev_vec3 s = ev_beam_cut_direction(&cut, i);
        ev_beam_field field;
        ev_beam_fields(source, &s, 1, &field);
        double row[] = {s.x, s.y, s.z, cabs(field.co), cabs(field.cross)};
        fwrite(row, sizeof(double), 5, file);
    }
    fclose(file);
    ev_beam_source_destroy(source);
    free(x);
    free(y);
    free(current);
    free(lit);
}

int main(int argc, char **argv)
{
    double smallest = 0.0, least = 0.0;
    printf("wavelengths,source_ms,first_cut_ms,cut_ms,rays,rings,growth,best_possible\n");
    for (double wavelengths = 25.0; wavelengths < 401.0; wavelengths *= 2.0) {
        timing t = time_cut(wavelengths);
        double rings = wavelengths * sin(span); /* two samples a wavelength of the radius */
        smallest = smallest > 0.0 ? smallest : t.again;
        least = least > 0.0 ? least : rings;
        printf("%.0f,%.3f,%.3f,%.3f,%dx%d,%d,%.2f,%.2f\n", wavelengths, 1e3 * t.source,
               1e3 * t.first, 1e3 * t.again, t.nodes.radial, t.nodes.around, t.nodes.rings,
               t.again / smallest, rings / least);
    }
    if (argc > 1)
        write_direct(argv[1]);
    return 0;
}
