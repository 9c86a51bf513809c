/* Embree on triangles of an antenna's mirrors: `side` rings of `side` sectors each. Only for the
 * benchmark. */
#pragma once

#include "optics/antenna.h"

typedef struct ev_mesh ev_mesh;

ev_mesh *ev_mesh_create(const ev_antenna *antenna, int side);
void ev_mesh_destroy(ev_mesh *mesh);
int ev_mesh_triangle_count(const ev_mesh *mesh);

/* Nearest hit of the dish, or of the sub. */
bool ev_mesh_hit(const ev_mesh *mesh, bool dish, ev_vec3 from, ev_vec3 direction, ev_vec3 *hit);

/* Sub, then dish: where the ray meets the dish, and its path to there. Reflects at the normal
 * interpolated between the corners. False when it misses. */
bool ev_mesh_trace(const ev_mesh *mesh, ev_vec3 from, ev_vec3 direction, ev_vec3 *hit,
                   double *path);
