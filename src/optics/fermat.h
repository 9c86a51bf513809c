/* Stationary paths over the subreflector; private to optics. */
#pragma once

#include "optics/antenna.h"

typedef struct ev_fermat {
    ev_vec3 q;            /* on the placed conic */
    ev_vec3 u, v;         /* unit, from the feed to q, from the main point to q */
    ev_vec3 normal;       /* of the conic at q */
    ev_vec3 tangent[2];   /* orthonormal */
    double to_q, from_q;  /* m */
    double gradient[2];   /* of the path along the tangents */
    double h00, h01, h11; /* its Hessian, 1/m */
} ev_fermat;

/* Gradient and Hessian of |q - from| + |point - q| at a point q of the conic. */
void ev_fermat_at(const ev_conic *conic, ev_vec3 from, ev_vec3 point, ev_vec3 q, ev_fermat *state);

/* Solves gradient = 0 from the closed form of the undisplaced system, on the sheet nearer the prime
 * focus. False where there is no such point. */
bool ev_fermat_solve(const ev_sub *sub, ev_vec3 from, ev_vec3 point, ev_fermat *state);
