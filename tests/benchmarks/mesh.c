/* Used by bench_rays. */
#include "mesh.h"

#include <embree3/rtcore.h>
#include <stdio.h>
#include <stdlib.h>

struct ev_mesh {
    RTCDevice device;
    RTCScene scenes[2];  /* sub, dish: a feed behind the dish looks through its missing hole */
    ev_vec3 *normals[2]; /* at the corners */
    unsigned *corners[2];
    int triangle_count;
};

/* Corner (ring, sector) of a mirror, and its normal. */
static ev_vec3 corner_of(const ev_antenna *antenna, bool dish, int side, int ring, int sector,
                         ev_vec3 *normal)
{
    double r = (double)ring / side, phi = 2.0 * EV_PI * sector / side;
    double x = antenna->offset + r * antenna->radius * cos(phi), y = r * antenna->radius * sin(phi);
    ev_vec3 point = dish ? ev_main_point(antenna, x, y) : ev_sub_point(&antenna->sub, r, phi);
    *normal = ev_conic_normal(dish ? &antenna->main : &antenna->sub.placed, point);
    return point;
}

static void fill_corners(const ev_antenna *antenna, bool dish, int side, float *points,
                         ev_vec3 *normals)
{
    for (int i = 0; i < (side + 1) * side; i++) {
        ev_vec3 point = corner_of(antenna, dish, side, i / side, i % side, &normals[i]);
        points[3 * i] = (float)point.x;
        points[3 * i + 1] = (float)point.y;
        points[3 * i + 2] = (float)point.z;
    }
}

static void fill_triangles(int side, unsigned *corners)
{
    for (int i = 0; i < side * side; i++) {
        int ring = i / side, next = (i + 1) % side;
        unsigned a = (unsigned)i, b = (unsigned)(ring * side + next);
        unsigned c = a + (unsigned)side, d = b + (unsigned)side;
        const unsigned both[6] = {a, c, d, a, d, b};
        for (int k = 0; k < 6; k++)
            corners[6 * i + k] = both[k];
    }
}

static void attach(ev_mesh *mesh, const ev_antenna *antenna, bool dish, int side)
{
    size_t points = (size_t)(side + 1) * (size_t)side, triangles = 2 * (size_t)side * (size_t)side;
    RTCGeometry geometry = rtcNewGeometry(mesh->device, RTC_GEOMETRY_TYPE_TRIANGLE);
    float *buffer = rtcSetNewGeometryBuffer(geometry, RTC_BUFFER_TYPE_VERTEX, 0, RTC_FORMAT_FLOAT3,
                                            3 * sizeof(float), points);
    unsigned *corners = rtcSetNewGeometryBuffer(geometry, RTC_BUFFER_TYPE_INDEX, 0,
                                                RTC_FORMAT_UINT3, 3 * sizeof(unsigned), triangles);
    mesh->normals[dish] = malloc(points * sizeof *mesh->normals[dish]);
    if (!buffer || !corners || !mesh->normals[dish])
        abort();
    fill_corners(antenna, dish, side, buffer, mesh->normals[dish]);
    fill_triangles(side, corners);
    mesh->corners[dish] = corners; /* Embree's own copy, alive with the scene */
    mesh->triangle_count += (int)triangles;
    rtcCommitGeometry(geometry);
    rtcAttachGeometry(mesh->scenes[dish], geometry);
    rtcReleaseGeometry(geometry);
}

ev_mesh *ev_mesh_create(const ev_antenna *antenna, int side)
{
    ev_mesh *mesh = calloc(1, sizeof *mesh);
    if (!mesh)
        abort();
    mesh->device = rtcNewDevice("threads=1");
    for (int dish = 0; dish < 2; dish++) {
        mesh->scenes[dish] = rtcNewScene(mesh->device);
        rtcSetSceneFlags(mesh->scenes[dish], RTC_SCENE_FLAG_ROBUST);
        rtcSetSceneBuildQuality(mesh->scenes[dish], RTC_BUILD_QUALITY_HIGH);
        attach(mesh, antenna, dish, side);
        rtcCommitScene(mesh->scenes[dish]);
    }
    return mesh;
}

void ev_mesh_destroy(ev_mesh *mesh)
{
    rtcReleaseScene(mesh->scenes[0]);
    rtcReleaseScene(mesh->scenes[1]);
    rtcReleaseDevice(mesh->device);
    free(mesh->normals[0]);
    free(mesh->normals[1]);
    free(mesh);
}

int ev_mesh_triangle_count(const ev_mesh *mesh)
{
    return mesh->triangle_count;
}

static struct RTCRayHit shoot(const ev_mesh *mesh, bool dish, ev_vec3 from, ev_vec3 direction)
{
    struct RTCIntersectContext context;
    rtcInitIntersectContext(&context);
    struct RTCRayHit ray = {.ray = {.org_x = (float)from.x,
                                    .org_y = (float)from.y,
                                    .org_z = (float)from.z,
                                    .dir_x = (float)direction.x,
                                    .dir_y = (float)direction.y,
                                    .dir_z = (float)direction.z,
                                    .tfar = INFINITY,
                                    .mask = ~0u}};
    ray.hit.geomID = RTC_INVALID_GEOMETRY_ID;
    rtcIntersect1(mesh->scenes[dish], &context, &ray);
    return ray;
}

bool ev_mesh_hit(const ev_mesh *mesh, bool dish, ev_vec3 from, ev_vec3 direction, ev_vec3 *hit)
{
    struct RTCRayHit ray = shoot(mesh, dish, from, direction);
    *hit = ev_vec3_along(from, (double)ray.ray.tfar, direction);
    return ray.hit.geomID != RTC_INVALID_GEOMETRY_ID;
}

static ev_vec3 normal_at(const ev_mesh *mesh, bool dish, const struct RTCRayHit *ray)
{
    const unsigned *corner = mesh->corners[dish] + 3 * ray->hit.primID;
    const ev_vec3 *normals = mesh->normals[dish];
    double u = (double)ray->hit.u, v = (double)ray->hit.v;
    ev_vec3 n = ev_vec3_scale(1.0 - u - v, normals[corner[0]]);
    n = ev_vec3_along(ev_vec3_along(n, u, normals[corner[1]]), v, normals[corner[2]]);
    return ev_vec3_unit(n);
}

bool ev_mesh_trace(const ev_mesh *mesh, ev_vec3 from, ev_vec3 direction, ev_vec3 *hit, double *path)
{
    struct RTCRayHit first = shoot(mesh, false, from, direction);
    if (first.hit.geomID == RTC_INVALID_GEOMETRY_ID)
        return false;
    ev_vec3 at = ev_vec3_along(from, (double)first.ray.tfar, direction);
    ev_vec3 on = ev_vec3_reflect(direction, normal_at(mesh, false, &first));
    struct RTCRayHit second = shoot(mesh, true, at, on);
    if (second.hit.geomID == RTC_INVALID_GEOMETRY_ID)
        return false;
    *hit = ev_vec3_along(at, (double)second.ray.tfar, on);
    *path = (double)first.ray.tfar + (double)second.ray.tfar;
    return true;
}
