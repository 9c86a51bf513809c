/* Strokes of curves, outlines and struts, and what hides them. The rays are in ink_rays.c. */
#include "view/ink.h"

#include <math.h>

static const double behind_sub = 0.0, behind_dish = 0.22, behind_front = 0.45;

static bool blocked_by_dish(const ev_antenna *antenna, ev_vec3 point, ev_vec3 toward, double far)
{
    double t[2];
    int count = ev_conic_intersect(&antenna->main, point, toward, t);
    for (int i = 0; i < count; ++i) {
        ev_vec3 hit = ev_vec3_along(point, t[i], toward);
        double r = hypot(hit.x - antenna->offset, hit.y);
        if (t[i] > 0.02 * antenna->radius && t[i] < far && r < antenna->radius &&
            r > antenna->hole_radius) {
            return true;
        }
    }
    return false;
}

static bool blocked_by_sub(const ev_antenna *antenna, ev_vec3 point, ev_vec3 toward, double far)
{
    double t[2];
    if (!antenna->dual) {
        return false;
    }
    double own = 0.08 * antenna->sub.semi_long; /* a point of the subreflector's own outline */
    int count = ev_conic_intersect(&antenna->sub.placed, point, toward, t);
    for (int i = 0; i < count; ++i) {
        if (t[i] > own && t[i] < far &&
            ev_sub_inside(&antenna->sub, ev_vec3_along(point, t[i], toward)) > 0.0) {
            return true;
        }
    }
    return false;
}

static bool blocked_by_front(const ev_ink *ink, ev_vec3 point, ev_vec3 toward, double far)
{
    const ev_antenna *antenna = ink->sheet->antenna;
    double t = (ink->stand - point.z) / toward.z;
    ev_vec3 hit = ev_vec3_along(point, t, toward);
    double r = hypot(hit.x - antenna->offset, hit.y);
    return t > 0.02 * antenna->radius && t < far && r < antenna->radius;
}

double ev_ink_sight(const ev_ink *ink, ev_vec3 point, bool of_front)
{
    const ev_antenna *antenna = ink->sheet->antenna;
    ev_vec3 to_eye = ev_vec3_sub(ink->eye.position, point);
    double far = ev_vec3_length(to_eye);
    ev_vec3 toward = ev_vec3_scale(1.0 / far, to_eye);
    if (blocked_by_sub(antenna, point, toward, far)) {
        return behind_sub;
    }
    double sight = blocked_by_dish(antenna, point, toward, far) ? behind_dish : 1.0;
    return !of_front && blocked_by_front(ink, point, toward, far) ? sight * behind_front : sight;
}

static uint32_t pack_colour(ev_colour colour)
{
    uint32_t r = (uint32_t)lround(255.0 * colour.r), g = (uint32_t)lround(255.0 * colour.g);
    return r << 16 | g << 8 | (uint32_t)lround(255.0 * colour.b);
}

/* One piece in device pixels; *along counts them for the dashes. */
static void add_piece(const ev_ink *ink, ev_nib nib, const double at[4], const double sight[2],
                      double *along)
{
    double x0 = (at[0] - ink->place.x) * ink->scale, y0 = (at[1] - ink->place.y) * ink->scale;
    double x1 = (at[2] - ink->place.x) * ink->scale, y1 = (at[3] - ink->place.y) * ink->scale;
    ev_strokes_add(ink->strokes, (ev_stroke){.x0 = (float)x0,
                                             .y0 = (float)y0,
                                             .x1 = (float)x1,
                                             .y1 = (float)y1,
                                             .width = (float)(nib.width * ink->scale),
                                             .alpha0 = (float)(nib.alpha * sight[0]),
                                             .alpha1 = (float)(nib.alpha * sight[1]),
                                             .start = (float)*along,
                                             .colour = pack_colour(nib.colour),
                                             .style = (uint8_t)nib.style,
                                             .joined_start = nib.joined,
                                             .joined_end = nib.joined});
    *along += hypot(x1 - x0, y1 - y0);
}

void ev_ink_curve(const ev_ink *ink, ev_nib nib, const ev_vec3 *points, int count)
{
    double at[4], sight[2], along = 0.0;
    bool have = false;
    for (int i = 0; i < count; ++i) {
        double x, y;
        if (!ev_eye_project(&ink->eye, points[i], &x, &y)) {
            have = false;
            continue;
        }
        at[2] = x;
        at[3] = y;
        sight[1] = nib.cast ? ev_ink_sight(ink, points[i], nib.of_front) : 1.0;
        sight[1] *= nib.fade && i == count - 1 ? 0.0 : 1.0;
        if (have) {
            add_piece(ink, nib, at, sight, &along);
        }
        at[0] = at[2];
        at[1] = at[3];
        sight[0] = sight[1];
        have = true;
    }
}

static void ink_row(const ev_ink *ink, ev_nib nib, const ev_mesh *mesh, int row)
{
    nib.joined = true;
    ev_ink_curve(ink, nib, ev_mesh_point(mesh, row, 0), mesh->columns + 1);
}

/* Which side of the surface the eye is on at a grid point. */
static double facing(const ev_ink *ink, const ev_mesh *mesh, int i)
{
    return ev_vec3_dot(mesh->normals[i], ev_vec3_sub(ink->eye.position, mesh->points[i]));
}

static ev_vec3 cross_point(const ev_mesh *mesh, int a, int b, double fa, double fb)
{
    ev_vec3 step = ev_vec3_sub(mesh->points[b], mesh->points[a]);
    return ev_vec3_along(mesh->points[a], fa / (fa - fb), step);
}

/* The contour through one quad: where its edges change sides. */
static void ink_quad(const ev_ink *ink, ev_nib nib, const ev_mesh *mesh, const int corner[4])
{
    ev_vec3 ends[4];
    int count = 0;
    for (int i = 0; i < 4; ++i) {
        int a = corner[i], b = corner[(i + 1) % 4];
        double fa = facing(ink, mesh, a), fb = facing(ink, mesh, b);
        if ((fa < 0.0) != (fb < 0.0)) {
            ends[count++] = cross_point(mesh, a, b, fa, fb);
        }
    }
    if (count == 2) {
        ev_ink_curve(ink, nib, ends, 2);
    }
}

static void ink_contour(const ev_ink *ink, ev_nib nib, const ev_mesh *mesh)
{
    nib.joined = true;
    int across = mesh->columns + 1;
    for (int row = 0; row < mesh->rows; ++row) {
        for (int column = 0; column < mesh->columns; ++column) {
            int i = row * across + column;
            const int corner[4] = {i, i + 1, i + across + 1, i + across};
            ink_quad(ink, nib, mesh, corner);
        }
    }
}

void ev_ink_outline(const ev_ink *ink, ev_nib nib, const ev_mesh *mesh, bool first, bool last,
                    bool contour)
{
    if (first) {
        ink_row(ink, nib, mesh, 0);
    }
    if (last) {
        ink_row(ink, nib, mesh, mesh->rows);
    }
    if (contour) {
        ink_contour(ink, nib, mesh);
    }
}

/* A strut as a straight bar: a rim of ground on both sides parts it from what it crosses. */
static void ink_strut(const ev_ink *ink, const ev_strip *strip)
{
    enum { PIECES = 24 };
    ev_vec3 top, foot, points[PIECES + 1];
    ev_strut_ends(ink->sheet->antenna, strip, &top, &foot);
    for (int i = 0; i <= PIECES; ++i) {
        ev_vec3 way = ev_vec3_sub(foot, top);
        points[i] = ev_vec3_along(top, 0.995 * i / PIECES, way);
    }
    double dim = fmax(0.5, fmax(ink->emphasis.rest, ink->emphasis.fate[EV_FATE_SHADOW_STRUTS]));
    double width = ev_eye_pixels(&ink->eye, top, 2.0 * strip->half_width);
    width = fmax(2.0, fmin(width, 12.0));
    ev_nib nib = {.width = width + 2.5,
                  .alpha = 0.9 * dim,
                  .colour = ink->theme->ground,
                  .joined = true,
                  .cast = true};
    ev_ink_curve(ink, nib, points, PIECES + 1);
    nib.width = width;
    nib.alpha = 0.95 * dim;
    nib.colour = ink->theme->ink;
    ev_ink_curve(ink, nib, points, PIECES + 1);
}

void ev_ink_struts(const ev_ink *ink)
{
    const ev_shadows *shadows = &ink->sheet->antenna->shadows;
    for (int i = 0; i < shadows->strip_count; ++i) {
        ink_strut(ink, &shadows->strips[i]);
    }
}
