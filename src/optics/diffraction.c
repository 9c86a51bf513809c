/* Current integration over both mirrors. Called by the command and by the window's worker; the near
 * field is diffraction_sub.c's, the far field the beam's. */
#include "optics/diffraction.h"

#include "optics/beam_source.h"
#include "optics/diffraction_sub.h"
#include "optics/quadrature.h"

#include <stdlib.h>

enum { FLUX_RADIAL = 48, FLUX_AROUND = 24, FLUX_COST = 2, CHUNK = 64 };

typedef struct job {
    ev_antenna antenna;
    ev_sub_currents sub;
    ev_vec3 reference;
    ev_diffraction_progress *progress;
    void *context;
    double done, planned, shown; /* pairs, pairs, share */
    void *rays;                  /* what the ray field's sheet owns */
} job;

/* Toward the rim the wave from the sub's far edge turns, against the reflected one, by the whole
 * spread of the path: half that many degrees, and a margin. An offset sub is no body of revolution
 * and needs more angles. */
ev_diffraction_plan ev_diffraction_plan_for(const ev_antenna *antenna, int feed)
{
    ev_diffraction_plan plan = {0};
    if (!antenna->dual)
        return plan;
    double spread = antenna->wavenumber * ev_sub_currents_spread(antenna, feed);
    ev_sub_currents_order(antenna, feed, &plan.sub_radial, &plan.sub_around);
    plan.main_radial = (int)fmin(28.0 + 0.5 * spread, EV_MODE_RADIAL_LIMIT);
    plan.main_around = antenna->offset != 0.0 ? 64 : 32;
    plan.pairs = (double)plan.sub_radial * plan.sub_around *
                 (plan.main_radial * plan.main_around + FLUX_COST * FLUX_RADIAL * FLUX_AROUND);
    return plan;
}

static ev_vec3 normal_at(const ev_antenna *antenna, double x, double y)
{
    double twice = 2.0 * antenna->focal_length;
    return ev_vec3_make(-x / twice, -y / twice, 1.0);
}

/* j = 2 N x h with the reference direction's phase taken off. */
static ev_cvec3 current_at(const job *at, double x, double y)
{
    const ev_antenna *antenna = &at->antenna;
    ev_vec3 point = ev_main_point(antenna, x, y), n = normal_at(antenna, x, y);
    ev_cvec3 h = ev_sub_currents_field(&at->sub, point, false).h;
    double phase = antenna->wavenumber * ev_vec3_dot(at->reference, point);
    double _Complex turn = 2.0 * cos(phase) + I * (2.0 * sin(phase));
    return (ev_cvec3){turn * (n.y * h.z - n.z * h.y), turn * (n.z * h.x - n.x * h.z),
                      turn * (n.x * h.y - n.y * h.x)};
}

/* Tells the caller; true to go on. */
static bool report(job *at, double pairs)
{
    at->done += pairs;
    double share = fmin(at->done / at->planned, 1.0);
    at->shown = fmax(at->shown, share);
    return !at->progress || at->progress(at->context, at->shown);
}

static bool currents(const void *context, const double *x, const double *y, int count,
                     ev_cvec3 *current, bool *lit)
{
    job *at = (job *)context; /* its progress moves on */
    double pairs = (double)at->sub.count;
    at->planned = fmax(at->planned, at->done + pairs * count);
    for (int from = 0; from < count; from += CHUNK) {
        int to = from + CHUNK < count ? from + CHUNK : count;
#pragma omp parallel for schedule(dynamic)
        for (int i = from; i < to; i++) {
            current[i] = current_at(at, x[i], y[i]);
            lit[i] = true;
        }
        if (!report(at, pairs * (to - from)))
            return false;
    }
    return true;
}

/* Re(e x h*) through the main reflector at one node, onto its face. */
static double flux_at(const job *at, double x, double y)
{
    ev_vec3 n = normal_at(&at->antenna, x, y), point = ev_main_point(&at->antenna, x, y);
    ev_near_field f = ev_sub_currents_field(&at->sub, point, true);
    double _Complex hx = conj(f.h.x), hy = conj(f.h.y), hz = conj(f.h.z);
    return -creal(n.x * (f.e.y * hz - f.e.z * hy) + n.y * (f.e.z * hx - f.e.x * hz) +
                  n.z * (f.e.x * hy - f.e.y * hx));
}

static bool sum_flux(job *at, double *flux)
{
    const ev_antenna *antenna = &at->antenna;
    ev_gauss gauss;
    ev_gauss_make(FLUX_RADIAL, &gauss);
    double inner = antenna->hole_radius, span = antenna->radius - inner;
    double flows[FLUX_RADIAL];
    *flux = 0.0;
    for (int j = 0; j < FLUX_AROUND; j++) {
        double phi = 2.0 * EV_PI * j / FLUX_AROUND;
#pragma omp parallel for schedule(dynamic)
        for (int i = 0; i < FLUX_RADIAL; i++) {
            double r = inner + span * gauss.x[i];
            double weight = gauss.weight[i] * span * r * 2.0 * EV_PI / FLUX_AROUND;
            flows[i] = weight * flux_at(at, antenna->offset + r * cos(phi), r * sin(phi));
        }
        for (int i = 0; i < FLUX_RADIAL; i++)
            *flux += flows[i];
        if (!report(at, (double)FLUX_COST * FLUX_RADIAL * at->sub.count))
            return false;
    }
    return true;
}

/* The ray field's recipe with other currents; the ray field's stay for the shadows. */
static void make_recipe(const ev_antenna *antenna, int feed, const ev_diffraction_plan *plan,
                        job *at, ev_beam_recipe *recipe)
{
    ev_beam_currents_recipe(antenna, feed, EV_BEAM_EXACT, recipe);
    at->antenna = *antenna;
    at->reference = recipe->sheet.reference;
    at->rays = recipe->owned;
    at->planned = plan->pairs;
    ev_sub_currents_make(antenna, feed, plan->sub_radial, plan->sub_around,
                         -recipe->phase / antenna->wavenumber, &at->sub);
    recipe->shadow_sheet = recipe->sheet;
    recipe->sheet.currents = currents;
    recipe->sheet.context = at;
    recipe->sheet.tolerance = 1e-5;
    recipe->sheet.first_radial = plan->main_radial;
    recipe->sheet.around = plan->main_around;
    recipe->edge_points = NULL;
    recipe->owned = at->rays;
}

ev_beam_source *ev_diffraction_source(const ev_antenna *antenna, int feed,
                                      ev_diffraction_progress *progress, void *context,
                                      ev_diffraction *result)
{
    *result = (ev_diffraction){.caught_by_main = NAN};
    if (!antenna->dual)
        return NULL;
    job *at = calloc(1, sizeof *at);
    if (!at)
        abort();
    at->progress = progress;
    at->context = context;
    ev_diffraction_plan plan = ev_diffraction_plan_for(antenna, feed);
    ev_beam_recipe recipe;
    make_recipe(antenna, feed, &plan, at, &recipe);
    ev_beam_source *source = NULL;
    if (sum_flux(at, &result->caught_by_main))
        source = ev_beam_source_make(&recipe);
    else
        free(recipe.owned);
    if (source) {
        ev_beam_nodes nodes = ev_beam_source_nodes(source);
        result->main_radial = nodes.radial;
        result->main_around = nodes.around;
        result->residual = nodes.residual;
    }
    result->pairs = at->done;
    ev_sub_currents_free(&at->sub);
    free(at);
    return source;
}

double ev_diffraction_probe(const ev_antenna *antenna, int feed, double pairs)
{
    ev_sub_currents sub;
    ev_diffraction_plan plan = ev_diffraction_plan_for(antenna, feed);
    if (!antenna->dual)
        return 0.0;
    ev_sub_currents_make(antenna, feed, plan.sub_radial, plan.sub_around, 0.0, &sub);
    int count = (int)ceil(pairs / sub.count);
    bool finite = true;
#pragma omp parallel for schedule(dynamic)
    for (int i = 0; i < count; i++) {
        double x = antenna->offset + antenna->radius * i / count;
        ev_near_field field = ev_sub_currents_field(&sub, ev_main_point(antenna, x, 0.0), false);
        if (i == 0)
            finite = cabs(field.h.x) < INFINITY;
    }
    double worked = finite ? (double)count * sub.count : 0.0;
    ev_sub_currents_free(&sub);
    return worked;
}
