/* Cuts and maps: directions laid out, fields asked for, levels written. Called by the commands and
 * the Beam plate. */
#include "optics/beam.h"
#include "optics/beam_pedestal.h"

#include <stdlib.h>

double ev_beam_cut_angle(const ev_beam_cut *cut, int index)
{
    int last = cut->count > 1 ? cut->count - 1 : 1;
    return (cut->from * (last - index) + cut->to * index) / last;
}

/* Turns v by the rotation that takes +z to `centre` by the shortest way. */
static ev_vec3 turn_with(ev_vec3 v, ev_vec3 centre)
{
    ev_vec3 across = {-centre.y, centre.x, 0.0};
    double sine = ev_vec3_length(across);
    if (!(sine > 0.0))
        return v;
    return ev_vec3_turn(v, ev_vec3_scale(1.0 / sine, across), atan2(sine, centre.z));
}

ev_vec3 ev_beam_cut_direction(const ev_beam_cut *cut, int index)
{
    double t = ev_beam_cut_angle(cut, index);
    ev_vec3 s = {sin(t) * cos(cut->phi), sin(t) * sin(cut->phi), cos(t)};
    return turn_with(s, cut->centre);
}

static double level_of(ev_vec3 s, double _Complex field)
{
    double size = cabs(field);
    return s.z > 0.0 ? 10.0 * log10(fmax(size * size, 1e-30)) : NAN;
}

static void *take(int count, size_t size)
{
    void *memory = calloc((size_t)(count > 0 ? count : 1), size);
    if (!memory)
        abort();
    return memory;
}

void ev_beam_cut_compute(ev_beam_source *source, const ev_beam_cut *cut, double *co_dbi,
                         double *cross_dbi)
{
    ev_vec3 *directions = take(cut->count, sizeof *directions);
    ev_beam_field *fields = take(cut->count, sizeof *fields);
    for (int i = 0; i < cut->count; i++)
        directions[i] = ev_beam_cut_direction(cut, i);
    ev_beam_fields(source, directions, cut->count, fields);
    for (int i = 0; i < cut->count; i++) {
        co_dbi[i] = level_of(directions[i], fields[i].co);
        if (cross_dbi)
            cross_dbi[i] = level_of(directions[i], fields[i].cross);
    }
    free(directions);
    free(fields);
}

void ev_beam_cut_add_pedestal(const ev_antenna *antenna, const ev_feed_budget *budget, ev_vec3 peak,
                              const ev_beam_cut *cut, double *co_dbi)
{
    const double *power = budget->power;
    ev_pedestal pedestal = {.wavelength = antenna->wavelength,
                            .rms = antenna->surface_rms,
                            .correlation = antenna->surface_correlation,
                            .power = power[EV_FATE_APERTURE] * antenna->ohmic * antenna->mismatch};
    if (!(pedestal.rms > 0.0 && pedestal.correlation > 0.0))
        return;
    for (int i = 0; i < cut->count; i++)
        co_dbi[i] = ev_pedestal_add_dbi(
            &pedestal, ev_vec3_angle(peak, ev_beam_cut_direction(cut, i)), co_dbi[i]);
}

int ev_beam_cut_samples(const ev_antenna *antenna, double from, double to)
{
    double lobes = fabs(to - from) * 2.0 * antenna->radius / antenna->wavelength;
    return (int)fmin(fmax(10.0 * lobes, 100.0), 200000.0) + 1;
}

void ev_beam_map_compute(ev_beam_source *source, const ev_beam_map *map, float *co_dbi,
                         float *cross_dbi)
{
    int side = map->side, count = side * side;
    double step = 2.0 * map->half_width / (side > 1 ? side - 1 : 1);
    ev_vec3 *directions = take(count, sizeof *directions);
    ev_beam_field *fields = take(count, sizeof *fields);
    for (int i = 0; i < count; i++) {
        double u = map->x - map->half_width + step * (i % side);
        double v = map->y + map->half_width - step * (i / side);
        double rest = 1.0 - u * u - v * v;
        directions[i] = ev_vec3_make(u, v, rest > 0.0 ? sqrt(rest) : -1.0);
    }
    ev_beam_fields(source, directions, count, fields);
    for (int i = 0; i < count; i++) {
        co_dbi[i] = (float)level_of(directions[i], fields[i].co);
        if (cross_dbi)
            cross_dbi[i] = (float)level_of(directions[i], fields[i].cross);
    }
    free(directions);
    free(fields);
}
