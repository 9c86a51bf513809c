/* The point of a subreflector that makes the path from the feed to the main reflector stationary,
 * and how it moves. The stationary path is a minimum over a Cassegrain's subreflector and a maximum
 * over a Gregorian's, so the gradient is solved, never minimised.
 *
 * With u = (Q - f)/|Q - f|, v = (Q - P)/|Q - P|, t_i two tangents, n the normal and k_ij the bend
 * of the surface: gradient g_i = t_i.(u + v), Hessian H_ij = t_i.[(1 - uu)/|Q - f| + (1 - vv)/|Q -
 * P|].t_j + k_ij n.(u + v). */
#include "optics/fermat.h"

static ev_vec3 square_to(ev_vec3 n)
{
    ev_vec3 hint = fabs(n.x) < 0.6 ? ev_vec3_make(1.0, 0.0, 0.0) : ev_vec3_make(0.0, 1.0, 0.0);
    return ev_vec3_unit(ev_vec3_along(hint, -ev_vec3_dot(hint, n), n));
}

void ev_fermat_at(const ev_conic *conic, ev_vec3 from, ev_vec3 point, ev_vec3 q, ev_fermat *state)
{
    ev_vec3 n = ev_conic_normal(conic, q);
    ev_vec3 t0 = square_to(n), t1 = ev_vec3_cross(n, t0);
    ev_vec3 a = ev_vec3_sub(q, from), b = ev_vec3_sub(q, point);
    double ra = ev_vec3_length(a), rb = ev_vec3_length(b);
    ev_vec3 u = ev_vec3_scale(1.0 / ra, a), v = ev_vec3_scale(1.0 / rb, b);
    ev_vec3 sum = ev_vec3_add(u, v);
    double bend = ev_vec3_dot(n, sum), ia = 1.0 / ra, ib = 1.0 / rb;
    double u0 = ev_vec3_dot(u, t0), u1 = ev_vec3_dot(u, t1);
    double v0 = ev_vec3_dot(v, t0), v1 = ev_vec3_dot(v, t1);
    *state = (ev_fermat){
        .q = q,
        .u = u,
        .v = v,
        .normal = n,
        .tangent = {t0, t1},
        .to_q = ra,
        .from_q = rb,
        .gradient = {u0 + v0, u1 + v1},
        .h00 = ia * (1.0 - u0 * u0) + ib * (1.0 - v0 * v0) + bend * ev_conic_bend(conic, q, t0, t0),
        .h01 = -ia * u0 * u1 - ib * v0 * v1 + bend * ev_conic_bend(conic, q, t0, t1),
        .h11 = ia * (1.0 - u1 * u1) + ib * (1.0 - v1 * v1) + bend * ev_conic_bend(conic, q, t1, t1),
    };
}

static double steepness(const ev_fermat *state)
{
    return hypot(state->gradient[0], state->gradient[1]);
}

/* One damped step; false when no shorter step brings the gradient down either. */
static bool improve(const ev_conic *conic, ev_vec3 from, ev_vec3 point, ev_fermat *state)
{
    double det = state->h00 * state->h11 - state->h01 * state->h01;
    double g0 = state->gradient[0], g1 = state->gradient[1];
    double s0 = -(state->h11 * g0 - state->h01 * g1) / det;
    double s1 = -(state->h00 * g1 - state->h01 * g0) / det;
    for (double part = 1.0; part > 1e-4; part *= 0.5) {
        ev_vec3 to = ev_vec3_along(ev_vec3_along(state->q, part * s0, state->tangent[0]), part * s1,
                                   state->tangent[1]);
        ev_fermat next;
        if (!ev_conic_project(conic, to, &to))
            continue;
        ev_fermat_at(conic, from, point, to, &next);
        if (steepness(&next) < steepness(state)) {
            *state = next;
            return true;
        }
    }
    return false;
}

enum { STEP_LIMIT = 40 };

bool ev_fermat_solve(const ev_sub *sub, ev_vec3 from, ev_vec3 point, ev_fermat *state)
{
    const ev_conic *conic = &sub->placed;
    double side = sub->shape == EV_SUB_HYPERBOLOID ? 1.0 : -1.0;
    ev_vec3 focus = ev_conic_near_focus(conic), q;
    if (!ev_conic_project(conic, ev_vec3_along(focus, side, ev_vec3_sub(point, focus)), &q))
        return false;
    ev_fermat_at(conic, from, point, q, state);
    for (int step = 0; step < STEP_LIMIT && steepness(state) > 1e-13; step++)
        if (!improve(conic, from, point, state))
            break;
    return steepness(state) < 1e-9;
}
