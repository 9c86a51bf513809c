/* Far fields of a sheet with shadows: keeps the expansion, makes rings and points when directions
 * first need them, and sums. The entry to all of it is ev_beam_fields. */
#include "optics/beam_source.h"

#include "optics/aperture.h"
#include "optics/beam_points.h"
#include "optics/beam_rings.h"
#include "optics/beam_shadow.h"

#include <stdlib.h>
#include <string.h>

/* Points are made for phases up to POINT_PHASE 2^level. */
enum { POINT_LEVELS = 10, POINT_PHASE = 32, EDGE_LEVELS = 4 };

struct ev_beam_source {
    ev_sheet sheet, shadow_sheet;
    ev_modes modes;
    ev_polarization polarization;
    bool shadowed, edged;
    ev_shadows shadows;
    void (*edge_points)(const void *context, double phase, double **x, double **y, double **weight,
                        int *count);
    double _Complex scale; /* from I to the field */
    ev_rings *rings[EV_RINGS_STEPS];
    ev_points *edge[POINT_LEVELS], *shadow[POINT_LEVELS];
    void *owned;
};

enum { RIM_SAMPLES = 64 };

/* The rim itself: Gauss's radii stop short of it. */
static bool rim_is_edged(const ev_sheet *sheet)
{
    double x[RIM_SAMPLES], y[RIM_SAMPLES];
    ev_cvec3 current[RIM_SAMPLES];
    bool lit[RIM_SAMPLES], edged = false;
    for (int i = 0; i < RIM_SAMPLES; i++) {
        double phi = 2.0 * EV_PI * i / RIM_SAMPLES;
        x[i] = sheet->offset + sheet->radius * cos(phi);
        y[i] = sheet->radius * sin(phi);
    }
    if (!sheet->currents(sheet->context, x, y, RIM_SAMPLES, current, lit))
        return false;
    for (int i = 0; i < RIM_SAMPLES; i++)
        edged |= !lit[i];
    return edged;
}

ev_beam_source *ev_beam_source_make(const ev_beam_recipe *recipe)
{
    ev_beam_source *source = calloc(1, sizeof *source);
    if (!source)
        abort();
    double size = recipe->sheet.wavenumber * sqrt(recipe->efficiency / (4.0 * EV_PI));
    /* far field of a current: -j times its integral */
    source->scale = -I * (size * (cos(recipe->phase) + I * sin(recipe->phase)));
    source->sheet = recipe->sheet;
    source->polarization = recipe->polarization;
    source->edge_points = recipe->edge_points;
    source->owned = recipe->owned;
    source->edged = recipe->edge_points && rim_is_edged(&source->sheet);
    if (!source->edged) {
        ev_modes_make(&source->sheet, &source->modes);
        source->edged = source->modes.edged;
    }
    if (source->modes.given_up) {
        ev_beam_source_destroy(source);
        return NULL;
    }
    const ev_shadows *shadows = recipe->shadows;
    source->shadowed = shadows && (shadows->has_sub || shadows->body_count || shadows->strip_count);
    if (source->shadowed)
        source->shadows = *shadows;
    source->shadow_sheet = recipe->shadow_sheet.currents ? recipe->shadow_sheet : recipe->sheet;
    return source;
}

void ev_beam_source_destroy(ev_beam_source *source)
{
    if (!source)
        return;
    for (int i = 0; i < EV_RINGS_STEPS; i++)
        ev_rings_destroy(source->rings[i]);
    for (int i = 0; i < POINT_LEVELS; i++) {
        ev_points_destroy(source->edge[i]);
        ev_points_destroy(source->shadow[i]);
    }
    ev_modes_free(&source->modes);
    free(source->owned);
    free(source);
}

double ev_beam_source_wavelengths(const ev_beam_source *source)
{
    return source->sheet.wavenumber * source->sheet.radius / EV_PI;
}

ev_polarization ev_beam_source_polarization(const ev_beam_source *source)
{
    return source->polarization;
}

ev_beam_nodes ev_beam_source_nodes(const ev_beam_source *source)
{
    ev_beam_nodes nodes = {.radial = source->edged ? 0 : source->modes.radial,
                           .around = source->edged ? 0 : source->modes.around,
                           .residual = source->edged ? 0.0 : source->modes.residual};
    nodes.converged = nodes.residual <= source->sheet.tolerance;
    for (int i = 0; i < EV_RINGS_STEPS; i++)
        if (source->rings[i])
            nodes.rings = ev_rings_count(i);
    for (int i = 0; i < POINT_LEVELS; i++) {
        if (source->edge[i]) {
            nodes.edge_points = ev_points_count(source->edge[i]);
            nodes.converged = i <= EDGE_LEVELS;
        }
        if (source->shadow[i])
            nodes.shadow_points = ev_points_count(source->shadow[i]);
    }
    return nodes;
}

/* What one direction needs; -1: nothing. */
typedef struct need {
    int step, level;
} need;

static bool is_visible(ev_vec3 s)
{
    return s.z > 0.0;
}

static need need_of(const ev_beam_source *source, ev_vec3 s)
{
    if (!is_visible(s))
        return (need){-1, -1};
    double phase = ev_rings_phase(&source->sheet, s);
    need found = {.step = source->edged ? -1 : ev_rings_step(&source->modes, phase)};
    while (found.level < POINT_LEVELS - 1 && phase > POINT_PHASE * (double)(1 << found.level))
        found.level++;
    return found;
}

static ev_points *make_edge(const ev_beam_source *source, double phase)
{
    double *x, *y, *weight;
    int count;
    source->edge_points(source->sheet.context, phase, &x, &y, &weight, &count);
    ev_points *points = ev_points_create(&source->sheet, x, y, weight, count);
    free(x);
    free(y);
    free(weight);
    return points;
}

static ev_points *make_shadow(const ev_beam_source *source, double phase)
{
    ev_shadow_points bare;
    ev_shadow_points_make(&source->shadows, phase, &bare);
    ev_points *points =
        ev_points_create(&source->shadow_sheet, bare.x, bare.y, bare.weight, bare.count);
    ev_shadow_points_free(&bare);
    return points;
}

static void prepare(ev_beam_source *source, const need *needs, int count, bool shadows)
{
    for (int i = 0; i < count; i++) {
        need n = needs[i];
        if (n.level < 0)
            continue;
        double phase = POINT_PHASE * (double)(1 << n.level);
        if (n.step >= 0 && !source->rings[n.step])
            source->rings[n.step] = ev_rings_create(&source->sheet, &source->modes, n.step);
        if (source->edged && !source->edge[n.level])
            source->edge[n.level] = make_edge(source, phase);
        if (shadows && !source->shadow[n.level])
            source->shadow[n.level] = make_shadow(source, phase);
    }
}

/* Adds sign times the field of points, a run of one level at a time. */
static void add_points(const ev_beam_source *source, ev_points *const *levels, double sign,
                       const ev_vec3 *directions, const need *needs, int count,
                       double _Complex (*sums)[3])
{
    double _Complex part[EV_POINTS_BATCH][3];
    for (int from = 0, to; from < count; from = to) {
        for (to = from + 1; to < count && needs[to].level == needs[from].level; to++)
            ;
        const ev_points *points = needs[from].level >= 0 ? levels[needs[from].level] : NULL;
        if (!points)
            continue;
        ev_points_sum(points, &source->sheet, directions + from, to - from, part);
        for (int i = from; i < to; i++)
            for (int c = 0; c < 3; c++)
                sums[i][c] += sign * part[i - from][c];
    }
}

/* Components of the integral along the co- and cross-polar vectors, which are square to s. */
static ev_beam_field project(const ev_beam_source *source, ev_vec3 s, const double _Complex sum[3])
{
    static const ev_polarization opposite[] = {EV_POLARIZATION_Y, EV_POLARIZATION_X,
                                               EV_POLARIZATION_LHCP, EV_POLARIZATION_RHCP};
    ev_cvec3 co = ev_copolar(source->polarization, s);
    ev_cvec3 cross = ev_copolar(opposite[source->polarization], s);
    ev_beam_field field = {.co = sum[0] * conj(co.x) + sum[1] * conj(co.y) + sum[2] * conj(co.z),
                           .cross = sum[0] * conj(cross.x) + sum[1] * conj(cross.y) +
                                    sum[2] * conj(cross.z)};
    field.co *= source->scale;
    field.cross *= source->scale;
    return field;
}

static void sum_batch(const ev_beam_source *source, bool shadows, const ev_vec3 *directions,
                      const need *needs, int count, double *scratch, ev_beam_field *fields)
{
    double _Complex sums[EV_POINTS_BATCH][3];
    memset(sums, 0, sizeof sums);
    for (int i = 0; i < count; i++)
        if (needs[i].step >= 0)
            ev_rings_sum(source->rings[needs[i].step], &source->sheet, directions[i], scratch,
                         sums[i]);
    if (source->edged)
        add_points(source, source->edge, 1.0, directions, needs, count, sums);
    if (shadows)
        add_points(source, source->shadow, -1.0, directions, needs, count, sums);
    for (int i = 0; i < count; i++) {
        ev_beam_field none = {0.0, 0.0};
        if (!(ev_vec3_length(directions[i]) < INFINITY))
            none = (ev_beam_field){NAN, NAN};
        fields[i] = is_visible(directions[i]) ? project(source, directions[i], sums[i]) : none;
    }
}

static void sum_all(ev_beam_source *source, bool shadows, const ev_vec3 *directions, int count,
                    ev_beam_field *fields)
{
    need *needs = calloc((size_t)(count > 0 ? count : 1), sizeof *needs);
    if (!needs)
        abort();
    for (int i = 0; i < count; i++)
        needs[i] = need_of(source, directions[i]);
    prepare(source, needs, count, shadows);
    size_t scratch_size = (size_t)(source->edged ? 1 : ev_rings_scratch(&source->modes));
    int batches = (count + EV_POINTS_BATCH - 1) / EV_POINTS_BATCH;
#pragma omp parallel if (batches > 4)
    {
        double *scratch = malloc(scratch_size * sizeof *scratch);
        if (!scratch)
            abort();
#pragma omp for schedule(dynamic)
        for (int batch = 0; batch < batches; batch++) {
            int from = batch * EV_POINTS_BATCH;
            int size = count - from < EV_POINTS_BATCH ? count - from : EV_POINTS_BATCH;
            sum_batch(source, shadows, directions + from, needs + from, size, scratch,
                      fields + from);
        }
        free(scratch);
    }
    free(needs);
}

void ev_beam_fields(ev_beam_source *source, const ev_vec3 *directions, int count,
                    ev_beam_field *fields)
{
    sum_all(source, source->shadowed, directions, count, fields);
}

void ev_beam_fields_unshadowed(ev_beam_source *source, const ev_vec3 *directions, int count,
                               ev_beam_field *fields)
{
    sum_all(source, false, directions, count, fields);
}
