/* The rings of the Detail. Called on a worker when a part is grabbed. */
#include "study/loss_map.h"

#include <stddef.h>

static double one_db_radius(double bend)
{
    return bend > 0.0 ? sqrt(2.0 / bend) : INFINITY;
}

/* The tighter 1 dB radius with room about it, and the part as it sits. */
static double choose_extent(const ev_best *best, const ev_part_axis axis[2])
{
    double ring = fmin(one_db_radius(best->bend[axis[0]]), one_db_radius(best->bend[axis[1]]));
    double away = hypot(best->by[axis[0]], best->by[axis[1]]);
    double extent = fmax(1.8 * (isfinite(ring) ? ring : 0.0), 1.35 * away);
    return extent > 0.0 ? extent : 0.01;
}

/* Along its axis the loss is flat, and its very lowest place can lie far from nominal for nothing:
 * where nominal is as good, that is where the part belongs. */
static void prefer_nominal(const ev_design *design, double frequency, const ev_antenna *antenna,
                           const ev_loss_map *map, ev_best *best)
{
    double by[EV_AXIS_COUNT] = {0};
    for (int i = 0; i < 2; i++)
        by[map->axis[i]] = -ev_part_place(design, antenna, map->part, map->feed, map->axis[i]);
    double gain = ev_part_gain_at(design, frequency, map->part, map->feed, by);
    if (best->best_dbi - gain > 0.05)
        return;
    for (int i = 0; i < 2; i++)
        best->by[map->axis[i]] = by[map->axis[i]];
}

void ev_loss_map_compute(const ev_design *design, double frequency, ev_part part, int feed,
                         ev_part_axis right, ev_part_axis up, double extent, ev_loss_map *map)
{
    bool axes[EV_AXIS_COUNT] = {false};
    ev_antenna antenna;
    axes[right] = axes[up] = true;
    ev_antenna_build(design, frequency, &antenna);
    ev_best best = ev_part_best(design, frequency, part, feed, axes);
    *map =
        (ev_loss_map){.part = part, .feed = feed, .axis = {right, up}, .best_dbi = best.best_dbi};
    prefer_nominal(design, frequency, &antenna, map, &best);
    for (int i = 0; i < 2; i++) {
        double now = ev_part_place(design, &antenna, part, feed, map->axis[i]);
        map->best[i] = map->centre[i] = now + best.by[map->axis[i]];
    }
    map->extent = extent > 0.0 ? extent : choose_extent(&best, map->axis);
    double step = 2.0 * map->extent / (EV_LOSS_MAP_SIDE - 1);
#pragma omp parallel for schedule(dynamic)
    for (int row = 0; row < EV_LOSS_MAP_SIDE; row++)
        for (int column = 0; column < EV_LOSS_MAP_SIDE; column++) {
            double by[EV_AXIS_COUNT] = {0};
            by[right] = best.by[right] - map->extent + column * step;
            by[up] = best.by[up] - map->extent + row * step;
            double gain = ev_part_gain_at(design, frequency, part, feed, by);
            map->loss_db[row][column] = fmax(map->best_dbi - gain, 0.0);
        }
}

/* Catmull-Rom weights at t in [0, 1] between the second and the third of four values. */
static void cubic_weights(double t, double w[4])
{
    w[0] = 0.5 * t * (-1.0 + t * (2.0 - t));
    w[1] = 1.0 + 0.5 * t * t * (3.0 * t - 5.0);
    w[2] = 0.5 * t * (1.0 + t * (4.0 - 3.0 * t));
    w[3] = 0.5 * t * t * (t - 1.0);
}

static int locate(double at, double *part)
{
    double clamped = fmin(fmax(at, 0.0), EV_LOSS_MAP_SIDE - 1.0);
    int index = (int)clamped;
    if (index > EV_LOSS_MAP_SIDE - 2)
        index = EV_LOSS_MAP_SIDE - 2;
    *part = clamped - index;
    return index;
}

static int clamp_index(int index)
{
    return index < 0 ? 0 : index >= EV_LOSS_MAP_SIDE ? EV_LOSS_MAP_SIDE - 1 : index;
}

double ev_loss_map_at(const ev_loss_map *map, double right, double up)
{
    double scale = 0.5 * (EV_LOSS_MAP_SIDE - 1) / map->extent, x, y, wx[4], wy[4], sum = 0.0;
    int column = locate((right - map->centre[0] + map->extent) * scale, &x);
    int row = locate((up - map->centre[1] + map->extent) * scale, &y);
    cubic_weights(x, wx);
    cubic_weights(y, wy);
    for (int j = 0; j < 4; j++)
        for (int i = 0; i < 4; i++)
            sum +=
                wy[j] * wx[i] * map->loss_db[clamp_index(row + j - 1)][clamp_index(column + i - 1)];
    return fmax(sum, 0.0);
}
