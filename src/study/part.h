/* The parts that can be moved, and moving them along their own axes. */
#pragma once

#include "optics/antenna.h"

#include <stdbool.h>

typedef enum { EV_PART_FEED, EV_PART_SUB } ev_part;

/* A part's own axes. Feed: out = away from what it lights (as defocus), up = square to it in the
 * symmetry plane (toward +x), across = the third (+y). Sub: out = along +z away from the dish,
 * up = +x, across = +y. */
typedef enum { EV_AXIS_OUT, EV_AXIS_UP, EV_AXIS_ACROSS, EV_AXIS_COUNT } ev_part_axis;

/* "feed", "sub"; "out", "up", "across". */
const char *ev_part_word(ev_part part);
const char *ev_axis_word(ev_part_axis axis);

/* Unit direction of a part's axis in the antenna frame. */
ev_vec3 ev_part_axis_direction(const ev_antenna *antenna, ev_part part, int feed,
                               ev_part_axis axis);

/* Displaces a part of the design along its axis by `by` m (feeds: `out` goes into defocus, the rest
 * into shift; sub: shift). */
void ev_part_move(ev_design *design, const ev_antenna *antenna, ev_part part, int feed,
                  ev_part_axis axis, double by);

/* Where the part sits from nominal along its axis, m. */
double ev_part_place(const ev_design *design, const ev_antenna *antenna, ev_part part, int feed,
                     ev_part_axis axis);

/* Where the gain on the wanted axis is highest as a part is moved along the axes whose flag is set:
 * Newton by differences on ev_axis_gain_dbi, from the better of where the part is and where the
 * geometry would put it for the wanted beam. Takes some tens of evaluations. */
typedef struct ev_best {
    double by[EV_AXIS_COUNT];   /* m to move from where the part is */
    double bend[EV_AXIS_COUNT]; /* dB/m^2, second derivative of the loss there */
    double now_dbi, best_dbi;   /* ev_axis_gain_dbi before and after */
} ev_best;

ev_best ev_part_best(const ev_design *design, double frequency, ev_part part, int feed,
                     const bool axes[EV_AXIS_COUNT]);

/* ev_axis_gain_dbi of the design with the part moved by `by` along its axes. */
double ev_part_gain_at(const ev_design *design, double frequency, ev_part part, int feed,
                       const double by[EV_AXIS_COUNT]);
