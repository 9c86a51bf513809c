/* Rays a second on one core, and how true they are; CSV.
 *
 * First table: a fan over the 12 m Cassegrain with the sub's shadow, four struts and fates, traced
 * (a) by the full pipeline, (b) by a bare two-mirror kernel written for the purpose as the
 * machine's limit, (c) by Embree, a general ray tracer, on triangles of the same mirrors with
 * normals interpolated between their corners. Each with the error of its path, whose true length
 * from feed to focal plane is 2F + 2a. Second table: hits of Embree's triangles against ours as
 * their number rises, with the order of convergence; single precision ends it. */
#include "clock.h"
#include "fixture.h"
#include "mesh.h"

#include "optics/trace.h"

#include <omp.h>
#include <stdio.h>
#include <stdlib.h>

enum { RAYS = 200000, REPEATS = 7 };

typedef struct outcome {
    double time;
    double worst_path; /* m, among the rays that reached the main reflector */
    int reached;
} outcome;

static void note_path(outcome *out, double path, double truth)
{
    out->worst_path = fmax(out->worst_path, fabs(path - truth));
    out->reached++;
}

static outcome run_pipeline(const ev_antenna *antenna, const ev_vec3 *directions, double truth)
{
    outcome out = {.time = 1e9};
    for (int repeat = 0; repeat < REPEATS; repeat++) {
        double start = seconds_now(), sum = 0.0;
        for (int i = 0; i < RAYS; i++)
            sum += ev_trace(antenna, 0, directions[i]).points[1].x;
        out.time = fmin(out.time, seconds_now() - start + 0.0 * sum);
    }
    for (int i = 0; i < RAYS; i++) {
        ev_ray ray = ev_trace(antenna, 0, directions[i]);
        if (ray.point_count == 4)
            note_path(&out, ray.path + antenna->focal_length - ray.points[2].z, truth);
    }
    return out;
}

/* The bare kernel: two conics of revolution in any place, each met once and turned at, and two
 * round rims. No fates, shadows or records, no second crossing, no last digit polished. */
typedef struct bare {
    ev_conic sub, dish;
    ev_vec3 feed, sub_centre, dish_centre;
    double sub_reach, dish_reach; /* squares of radii about the centres, along z for the dish */
} bare;

static inline double meet_bare(const ev_conic *conic, ev_vec3 from, ev_vec3 d, bool far)
{
    double c = conic->curvature, e2 = conic->eccentricity * conic->eccentricity;
    ev_vec3 o = ev_vec3_sub(from, conic->vertex);
    double os = ev_vec3_dot(o, conic->axis), ds = ev_vec3_dot(d, conic->axis);
    double a = c * (1.0 - e2 * ds * ds), b = c * (ev_vec3_dot(o, d) - e2 * os * ds) - ds;
    double k = c * (ev_vec3_dot(o, o) - e2 * os * os) - 2.0 * os, root = sqrt(b * b - a * k);
    return far ? -k / (b + root) : k / (root - b);
}

static inline ev_vec3 turn_bare(const ev_conic *conic, ev_vec3 at, ev_vec3 d)
{
    double c = conic->curvature, e2 = conic->eccentricity * conic->eccentricity;
    ev_vec3 x = ev_vec3_sub(at, conic->vertex);
    ev_vec3 g = ev_vec3_along(ev_vec3_scale(c, x), -1.0 - c * e2 * ev_vec3_dot(x, conic->axis),
                              conic->axis);
    return ev_vec3_along(d, -2.0 * ev_vec3_dot(d, g) / ev_vec3_dot(g, g), g);
}

static bool trace_bare(const bare *b, ev_vec3 d, ev_vec3 *hit, ev_vec3 *out, double *path)
{
    double t = meet_bare(&b->sub, b->feed, d, false);
    ev_vec3 q = ev_vec3_along(b->feed, t, d), arm = ev_vec3_sub(q, b->sub_centre);
    if (!(ev_vec3_dot(arm, arm) <= b->sub_reach && t > 0.0))
        return false;
    ev_vec3 back = turn_bare(&b->sub, q, d);
    double u = meet_bare(&b->dish, q, back, true);
    *hit = ev_vec3_along(q, u, back);
    double x = hit->x - b->dish_centre.x, y = hit->y - b->dish_centre.y;
    if (!(x * x + y * y <= b->dish_reach))
        return false;
    *out = turn_bare(&b->dish, *hit, back);
    *path = t + u;
    return true;
}

static outcome run_bare(const ev_antenna *antenna, const ev_vec3 *directions, double truth)
{
    const ev_sub *sub = &antenna->sub;
    ev_vec3 rim = ev_vec3_sub(ev_sub_rim_point(sub, 0.0), sub->placed_centre), hit = {0}, out = {0};
    const bare b = {.sub = sub->placed,
                    .dish = antenna->main,
                    .feed = antenna->feeds[0].position,
                    .sub_centre = sub->placed_centre,
                    .dish_centre = {antenna->offset, 0.0, 0.0},
                    .sub_reach = ev_vec3_dot(rim, rim) * (1.0 + 1e-9),
                    .dish_reach = antenna->radius * antenna->radius * (1.0 + 1e-9)};
    outcome found = {.time = 1e9};
    double path = 0.0;
    for (int repeat = 0; repeat < REPEATS; repeat++) {
        double start = seconds_now(), sum = 0.0;
        for (int i = 0; i < RAYS; i++)
            sum += trace_bare(&b, directions[i], &hit, &out, &path) ? hit.x + out.x + path : 0.0;
        found.time = fmin(found.time, seconds_now() - start + 0.0 * sum);
    }
    for (int i = 0; i < RAYS; i++)
        if (trace_bare(&b, directions[i], &hit, &out, &path))
            note_path(&found, path + antenna->focal_length - hit.z, truth);
    return found;
}

static outcome run_triangles(const ev_antenna *antenna, const ev_vec3 *directions, double truth,
                             int side)
{
    outcome out = {.time = 1e9};
    ev_mesh *mesh = ev_mesh_create(antenna, side);
    ev_vec3 hit, from = antenna->feeds[0].position;
    double path;
    for (int repeat = 0; repeat < REPEATS; repeat++) {
        double start = seconds_now(), sum = 0.0;
        for (int i = 0; i < RAYS; i++)
            sum += ev_mesh_trace(mesh, from, directions[i], &hit, &path) ? hit.x + path : 0.0;
        out.time = fmin(out.time, seconds_now() - start + 0.0 * sum);
    }
    for (int i = 0; i < RAYS; i++)
        if (ev_mesh_trace(mesh, from, directions[i], &hit, &path))
            note_path(&out, path + antenna->focal_length - hit.z, truth);
    ev_mesh_destroy(mesh);
    return out;
}

static void print_row(const char *name, outcome out, double bare_time)
{
    printf("%s,%d,%.1f,%.3g,%.2f,%.2g\n", name, out.reached, 1e9 * out.time / RAYS, RAYS / out.time,
           bare_time / out.time, out.worst_path);
}

/* Directions of a fan of equal power, made beforehand. */
static ev_vec3 *make_directions(const ev_antenna *antenna)
{
    ev_ray *rays = malloc(RAYS * sizeof *rays);
    ev_vec3 *directions = malloc(RAYS * sizeof *directions);
    if (!rays || !directions)
        abort();
    ev_trace_fan(antenna, 0, RAYS, rays);
    for (int i = 0; i < RAYS; i++)
        directions[i] = rays[i].direction;
    free(rays);
    return directions;
}

/* Rays from the feed over the sub: largest distance of Embree's hits on each mirror from ours. */
static void print_convergence(const ev_antenna *antenna, const ev_vec3 *directions)
{
    double last = NAN;
    printf("\ntriangles,hit_error_m,order\n");
    for (int side = 8; side <= 1024; side *= 2) {
        ev_mesh *mesh = ev_mesh_create(antenna, side);
        double worst = 0.0;
        for (int i = 0; i < RAYS; i += 97) {
            ev_ray ray = ev_trace(antenna, 0, directions[i]);
            ev_vec3 hit, from = antenna->feeds[0].position;
            if (ray.point_count < 4 || !ev_mesh_hit(mesh, false, from, directions[i], &hit))
                continue;
            worst = fmax(worst, ev_vec3_length(ev_vec3_sub(hit, ray.points[1])));
            ev_vec3 on = ev_vec3_unit(ev_vec3_sub(ray.points[2], ray.points[1]));
            if (ev_mesh_hit(mesh, true, ray.points[1], on, &hit))
                worst = fmax(worst, ev_vec3_length(ev_vec3_sub(hit, ray.points[2])));
        }
        printf("%d,%.3g,%.2f\n", ev_mesh_triangle_count(mesh), worst, log2(last / worst));
        last = worst;
        ev_mesh_destroy(mesh);
    }
}

int main(void)
{
    omp_set_num_threads(1);
    ev_design design = ev_fixture_design(EV_FIXTURE_CASSEGRAIN);
    ev_antenna antenna;
    design.strut_count = 1;
    design.struts[0] = ev_default_strut();
    design.struts[0].width = 0.04;
    design.struts[0].from = 0.375;
    design.struts[0].to = 6.0;
    ev_fixture_build(&design, &antenna);
    ev_vec3 *directions = make_directions(&antenna);
    double truth = 2.0 * antenna.focal_length + design.sub.interfocal / design.sub.eccentricity;
    outcome limit = run_bare(&antenna, directions, truth);
    printf("tracer,reached,ns_per_ray,rays_per_s,of_the_bare_kernel,path_error_m\n");
    print_row("bare kernel", limit, limit.time);
    print_row("full pipeline", run_pipeline(&antenna, directions, truth), limit.time);
    for (int side = 64; side <= 1024; side *= 4) {
        char name[48];
        snprintf(name, sizeof name, "embree %d x %d", side, side);
        print_row(name, run_triangles(&antenna, directions, truth, side), limit.time);
    }
    print_convergence(&antenna, directions);
    free(directions);
    return 0;
}
