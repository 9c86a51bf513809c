/* Loss of gain on the wanted axis as a part is moved in the plane of two of its own axes: the
 * rings of the Detail. Computed once per grab; under the pointer it is a look-up. */
#pragma once

#include "study/verdict.h"

enum { EV_LOSS_MAP_SIDE = 33 };

typedef struct ev_loss_map {
    ev_part part;
    int feed;
    ev_part_axis axis[2]; /* right, up on the map */
    double extent;        /* m: the map covers [-extent, +extent] about `centre` on both axes */
    double centre[2];     /* m from nominal, along the axes */
    double best[2];       /* m from nominal: where it belongs, which is nominal
                              itself when that is within 0.05 dB of the highest gain */
    double best_dbi;
    double loss_db[EV_LOSS_MAP_SIDE][EV_LOSS_MAP_SIDE]; /* [row: axis 1][column: axis 0], >= 0 */
} ev_loss_map;

/* extent <= 0: chosen so that the 1 dB ring and the part as it sits both show. */
void ev_loss_map_compute(const ev_design *design, double frequency, ev_part part, int feed,
                         ev_part_axis right, ev_part_axis up, double extent, ev_loss_map *map);

/* dB lost with the part at (right, up) m from nominal; bicubic, clamped to the map. */
double ev_loss_map_at(const ev_loss_map *map, double right, double up);
