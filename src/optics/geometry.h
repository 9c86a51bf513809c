/* Derived geometry of a design, before there is an antenna: the subreflector's conic and rim, the
 * angles a feed has to fill. Shared by ev_design_resolve and ev_antenna_build; private to optics.
 */
#pragma once

#include "optics/antenna.h"

/* Signed angles at the prime focus between -z and the rays to the main's upper and lower rim point
 * in the symmetry plane (rad): 2 atan(x / 2F). */
typedef struct ev_span {
    double top, bottom;
} ev_span;

ev_span ev_main_span(const ev_main_design *main);

/* The subreflector of a dual design, in place and misplaced. False when the numbers give none. */
bool ev_sub_build(const ev_main_design *main, const ev_sub_design *design, ev_sub *sub);

/* Signed angles at the feed focus from the line feed focus -> prime focus to the sub's extreme rim
 * points (toward +x positive), geometric rim as designed. */
ev_span ev_sub_span(const ev_sub *sub);

/* The point of the sub as designed that lights `main_point`. False where the conic has none. */
bool ev_sub_point_for(const ev_sub *sub, ev_vec3 main_point, ev_vec3 *point);

/* Half the angle between the two extreme rim rays of what the feeds light (rad); NaN when the sub
 * cannot be built. */
double ev_design_half_extent(const ev_design *design);
