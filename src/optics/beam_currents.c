/* Currents that aimed rays induce on the main reflector, as a sheet. Called when a source is made;
 * knows nothing of far fields. */
#include "optics/beam_source.h"

#include "optics/field.h"

#include <stdlib.h>

typedef struct lamp {
    ev_antenna antenna;
    int feed;
    ev_vec3 reference;
    double base; /* m, path taken off everywhere */
} lamp;

static double _Complex dot(ev_vec3 a, ev_cvec3 e)
{
    return a.x * e.x + a.y * e.y + a.z * e.z;
}

/* 2 [i (N.e) - e (N.i)] with |e|^2 |N.i| = dP/dA and the path's phase; false: unlit. */
static bool current_at(const lamp *light, double x, double y, ev_cvec3 *current)
{
    const ev_antenna *antenna = &light->antenna;
    const ev_feed *feed = &antenna->feeds[light->feed];
    ev_sample sample = ev_aperture_sample(antenna, light->feed, x, y);
    double twice = 2.0 * antenna->focal_length;
    ev_vec3 normal = {-x / twice, -y / twice, 1.0};
    double facing = -ev_vec3_dot(sample.incident, normal);
    *current = (ev_cvec3){0.0, 0.0, 0.0};
    if (!sample.reached || !(facing > 0.0) ||
        ev_vec3_angle(sample.direction, feed->axis) > feed->pattern.end)
        return false;
    double size = 2.0 * sqrt(sample.density / facing);
    double phase = -antenna->wavenumber *
                       (sample.path - light->base - ev_vec3_dot(light->reference, sample.point)) -
                   sample.phase;
    double _Complex turn = size * cos(phase) + I * (size * sin(phase));
    double _Complex along = turn * dot(normal, sample.arriving), across = turn * facing;
    current->x = sample.incident.x * along + across * sample.arriving.x;
    current->y = sample.incident.y * along + across * sample.arriving.y;
    current->z = sample.incident.z * along + across * sample.arriving.z;
    return true;
}

static bool currents(const void *context, const double *x, const double *y, int count,
                     ev_cvec3 *current, bool *lit)
{
    const lamp *light = context;
#pragma omp parallel for schedule(static)
    for (int i = 0; i < count; i++)
        lit[i] = current_at(light, x[i], y[i], &current[i]);
    return true;
}

/* The pattern's end cuts the radii where it falls within the rim (nodes.h). */
static void edge_points(const void *context, double phase, double **x, double **y, double **weight,
                        int *count)
{
    const lamp *light = context;
    ev_cut cut = {.antenna = &light->antenna, .feed = light->feed, .lit = true};
    double radial = fmin(24.0 + 0.35 * phase, EV_GAUSS_CAPACITY);
    ev_order order = {(int)radial, (int)fmin(48.0 + 1.15 * phase, 4096.0)};
    ev_nodes nodes;
    ev_nodes_ring(&cut, light->antenna.hole_radius, light->antenna.radius, order, &nodes);
    size_t size = (size_t)(nodes.count > 0 ? nodes.count : 1) * sizeof(double);
    *x = malloc(size);
    *y = malloc(size);
    *weight = malloc(size);
    if (!*x || !*y || !*weight)
        abort();
    for (int i = 0; i < nodes.count; i++) {
        (*x)[i] = nodes.items[i].point.x;
        (*y)[i] = nodes.items[i].point.y;
        (*weight)[i] = nodes.items[i].weight;
    }
    *count = nodes.count;
    ev_nodes_free(&nodes);
}

/* Where the currents' own tilt points, so that a displaced feed's slope does not cost modes. */
static ev_vec3 find_reference(const ev_antenna *antenna, int feed)
{
    ev_nodes nodes;
    ev_order order = {10, 20};
    ev_nodes_whole(antenna, feed, order, &nodes);
    ev_vec3 axis = {0.0, 0.0, 1.0};
    ev_plane plane = ev_fit_plane(antenna, &nodes, axis, EV_WEIGHT_AMPLITUDE);
    ev_nodes_free(&nodes);
    double size = hypot(plane.b, plane.c), most = 0.9;
    if (!(size < INFINITY))
        return axis;
    double part = size > most ? most / size : 1.0;
    double u = part * plane.b, v = part * plane.c;
    return ev_vec3_make(u, v, sqrt(1.0 - u * u - v * v));
}

static double path_at_centre(const lamp *light)
{
    const ev_antenna *antenna = &light->antenna;
    ev_vec3 direction, sub_point, point = ev_main_point(antenna, antenna->offset, 0.0);
    double path = ev_aperture_path(antenna, light->feed, point.x, point.y, &direction, &sub_point);
    return isfinite(path) ? path - ev_vec3_dot(light->reference, point) : 0.0;
}

void ev_beam_currents_recipe(const ev_antenna *antenna, int feed, ev_beam_quality quality,
                             ev_beam_recipe *recipe)
{
    lamp *light = malloc(sizeof *light);
    if (!light)
        abort();
    light->antenna = *antenna;
    light->feed = feed;
    light->reference = find_reference(antenna, feed);
    light->base = 0.0;
    light->base = path_at_centre(light);
    double k = antenna->wavenumber, rough = 2.0 * k * antenna->surface_rms;
    bool table = antenna->feeds[feed].pattern.kind == EV_PATTERN_TABLE;
    double tolerance = quality == EV_BEAM_COARSE ? 1e-5 : table ? 4e-6 : 1e-9;
    *recipe =
        (ev_beam_recipe){.sheet = {.wavenumber = k,
                                   .radius = antenna->radius,
                                   .hole_radius = antenna->hole_radius,
                                   .offset = antenna->offset,
                                   .bend = 0.25 / antenna->focal_length,
                                   .reference = light->reference,
                                   .currents = currents,
                                   .context = light,
                                   .tolerance = tolerance},
                         .polarization = antenna->feeds[feed].polarization,
                         .efficiency = exp(-rough * rough) * antenna->ohmic * antenna->mismatch,
                         .phase = -k * light->base,
                         .shadows = &antenna->shadows,
                         .edge_points = edge_points,
                         .owned = light};
}

ev_beam_source *ev_beam_source_create(const ev_antenna *antenna, int feed, ev_beam_quality quality)
{
    ev_beam_recipe recipe;
    ev_beam_currents_recipe(antenna, feed, quality, &recipe);
    return ev_beam_source_make(&recipe);
}
