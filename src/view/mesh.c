/* Grids from surfaces. Everything is polar: rows outward (or along a horn), columns around. */
#include "view/mesh.h"

#include "draw/stage.h"

#include <math.h>
#include <stdlib.h>

enum {
    MAIN_ROWS = 16,
    MAIN_COLUMNS = 96,
    SUB_ROWS = 10,
    SUB_COLUMNS = 64,
    HORN_ROWS = 3,
    HORN_COLUMNS = 32,
};

static bool reserve(ev_mesh *mesh, int rows, int columns, ev_vec3 origin)
{
    int count = (rows + 1) * (columns + 1);
    if (mesh->capacity < count) {
        ev_mesh_free(mesh);
        mesh->points = malloc((size_t)count * sizeof *mesh->points);
        mesh->normals = malloc((size_t)count * sizeof *mesh->normals);
        mesh->vertices = malloc((size_t)count * sizeof *mesh->vertices);
        if (!mesh->points || !mesh->normals || !mesh->vertices) {
            ev_mesh_free(mesh);
            return false;
        }
        mesh->capacity = count;
    }
    mesh->rows = rows;
    mesh->columns = columns;
    mesh->origin = origin;
    return true;
}

void ev_mesh_free(ev_mesh *mesh)
{
    free(mesh->points);
    free(mesh->normals);
    free(mesh->vertices);
    *mesh = (ev_mesh){0};
}

static int index_at(const ev_mesh *mesh, int row, int column)
{
    return row * (mesh->columns + 1) + column;
}

const ev_vec3 *ev_mesh_point(const ev_mesh *mesh, int row, int column)
{
    return &mesh->points[index_at(mesh, row, column)];
}

static void put(ev_mesh *mesh, int row, int column, ev_vec3 point, ev_vec3 normal)
{
    int i = index_at(mesh, row, column);
    ev_vec3 local = ev_vec3_sub(point, mesh->origin);
    mesh->points[i] = point;
    mesh->normals[i] = normal;
    mesh->vertices[i] = (ev_vertex){.position = {(float)local.x, (float)local.y, (float)local.z},
                                    .normal = {(float)normal.x, (float)normal.y, (float)normal.z}};
}

static double angle_of(int column, int columns)
{
    return 2.0 * EV_PI * (column % columns) / columns;
}

/* Aperture coordinates of a grid point, for the shadows and the grid drawn on a surface. */
static void put_aperture(ev_mesh *mesh, int row, int column, double r, double value)
{
    double t = angle_of(column, mesh->columns);
    ev_vertex *vertex = &mesh->vertices[index_at(mesh, row, column)];
    vertex->aperture[0] = (float)(r * cos(t));
    vertex->aperture[1] = (float)(r * sin(t));
    vertex->polar[0] = (float)r;
    vertex->polar[1] = (float)column / (float)mesh->columns;
    vertex->value = (float)value;
}

bool ev_mesh_main(ev_mesh *mesh, const ev_antenna *antenna)
{
    ev_vec3 centre = ev_main_point(antenna, antenna->offset, 0.0);
    if (!reserve(mesh, MAIN_ROWS, MAIN_COLUMNS, centre)) {
        return false;
    }
    double inner = antenna->hole_radius / antenna->radius;
    for (int row = 0; row <= MAIN_ROWS; ++row) {
        double r = inner + (1.0 - inner) * row / MAIN_ROWS;
        for (int column = 0; column <= MAIN_COLUMNS; ++column) {
            double t = angle_of(column, MAIN_COLUMNS), u = r * cos(t), v = r * sin(t);
            ev_vec3 point =
                ev_main_point(antenna, antenna->offset + antenna->radius * u, antenna->radius * v);
            put(mesh, row, column, point, ev_conic_normal(&antenna->main, point));
            put_aperture(mesh, row, column, r, 0.0);
        }
    }
    return true;
}

bool ev_mesh_sub(ev_mesh *mesh, const ev_antenna *antenna)
{
    const ev_sub *sub = &antenna->sub;
    if (!reserve(mesh, SUB_ROWS, SUB_COLUMNS, ev_sub_place(sub, sub->rim_centre))) {
        return false;
    }
    for (int row = 0; row <= SUB_ROWS; ++row) {
        for (int column = 0; column <= SUB_COLUMNS; ++column) {
            double t = angle_of(column, SUB_COLUMNS), r = (double)row / SUB_ROWS;
            ev_vec3 point = ev_sub_point(sub, r, t);
            put(mesh, row, column, point, ev_conic_normal(&sub->placed, point));
            put_aperture(mesh, row, column, r, 0.0);
        }
    }
    return true;
}

bool ev_mesh_horn(ev_mesh *mesh, const ev_antenna *antenna, int index)
{
    const ev_feed *feed = &antenna->feeds[index];
    double mouth = ev_outline_mouth(antenna, feed), neck = 0.43 * mouth;
    /* mouth, throat, neck twice: the horn's profile as (back from the mouth, radius) */
    const double profile[HORN_ROWS + 1][2] = {
        {0.0, mouth}, {1.4 * mouth, neck}, {1.4 * mouth, neck}, {2.95 * mouth, neck}};
    double slope = atan2(mouth - neck, 1.4 * mouth);
    ev_vec3 front = ev_vec3_along(feed->position, feed->phase_centre, feed->axis);
    if (!reserve(mesh, HORN_ROWS, HORN_COLUMNS, feed->position)) {
        return false;
    }
    for (int row = 0; row <= HORN_ROWS; ++row) {
        double lean = row < 2 ? sin(slope) : 0.0;
        ev_vec3 centre = ev_vec3_along(front, -profile[row][0], feed->axis);
        for (int column = 0; column <= HORN_COLUMNS; ++column) {
            double t = angle_of(column, HORN_COLUMNS);
            ev_vec3 out = ev_vec3_along(ev_vec3_scale(cos(t), feed->ex), sin(t), feed->ey);
            ev_vec3 normal =
                ev_vec3_along(ev_vec3_scale(sqrt(1.0 - lean * lean), out), -lean, feed->axis);
            put(mesh, row, column, ev_vec3_along(centre, profile[row][1], out), normal);
        }
    }
    return true;
}

double ev_front_stand(const ev_antenna *antenna)
{
    double rim = ev_main_point(antenna, antenna->offset + antenna->radius, 0.0).z;
    double stand = fmax(antenna->focal_length, rim);
    for (int i = 0; antenna->dual && i < 16; ++i) {
        stand = fmax(stand, ev_sub_rim_point(&antenna->sub, EV_PI * i / 8.0).z);
    }
    for (int i = 0; i < antenna->feed_count; ++i) {
        stand = fmax(stand, antenna->feeds[i].nominal.z);
    }
    return stand + 0.35 * antenna->radius;
}

/* Bilinear among the cells that have a value; NaN when none has. */
static double interpolate(const float *picture, double row, double column)
{
    int r = (int)floor(row), c = (int)floor(column);
    double sum = 0.0, weights = 0.0;
    for (int i = 0; i < 4; ++i) {
        int y = r + (i >> 1), x = c + (i & 1);
        if (y < 0 || x < 0 || y >= EV_APERTURE_SIDE || x >= EV_APERTURE_SIDE) {
            continue;
        }
        double value = (double)picture[y * EV_APERTURE_SIDE + x];
        double weight = (1.0 - fabs(row - y)) * (1.0 - fabs(column - x));
        if (isfinite(value)) {
            sum += weight * value;
            weights += weight;
        }
    }
    return weights > 1e-6 ? sum / weights : NAN;
}

double ev_sheet_path_error(const ev_sheet *sheet, double x, double y)
{
    const ev_antenna *antenna = sheet->antenna;
    double half = 0.5 * (EV_APERTURE_SIDE - 1);
    double u = (x - antenna->offset) / antenna->radius, v = y / antenna->radius;
    return interpolate(sheet->aperture, half * (1.0 - u), half * (1.0 + v));
}

bool ev_mesh_front(ev_mesh *mesh, const ev_sheet *sheet, double stand)
{
    const ev_antenna *antenna = sheet->antenna;
    ev_vec3 s = sheet->budget->feeds[sheet->feed].wanted;
    if (!sheet->aperture || !reserve(mesh, MAIN_ROWS, MAIN_COLUMNS, ev_vec3_scale(stand, s))) {
        return false;
    }
    double inner = antenna->hole_radius / antenna->radius;
    double range = fmax(sheet->aperture_range, 1e-12);
    for (int row = 0; row <= MAIN_ROWS; ++row) {
        double r = inner + (1.0 - inner) * row / MAIN_ROWS;
        for (int column = 0; column <= MAIN_COLUMNS; ++column) {
            double t = angle_of(column, MAIN_COLUMNS), u = r * cos(t), v = r * sin(t);
            ev_vec3 foot = {antenna->offset + antenna->radius * u, antenna->radius * v, 0.0};
            double error = ev_sheet_path_error(sheet, foot.x, foot.y);
            error = isfinite(error) ? error : 0.0;
            double along = stand - sheet->front_exaggeration * error - ev_vec3_dot(s, foot);
            put(mesh, row, column, ev_vec3_along(foot, along, s), s);
            put_aperture(mesh, row, column, r, error / range);
        }
    }
    return true;
}

void ev_strut_ends(const ev_antenna *antenna, const ev_strip *strip, ev_vec3 *top, ev_vec3 *foot)
{
    double c = cos(strip->angle), s = sin(strip->angle);
    double out = fmin(strip->to, antenna->radius);
    double height = antenna->feed_count > 0 ? antenna->feeds[0].nominal.z : antenna->focal_length;
    if (antenna->dual) {
        height = ev_sub_place(&antenna->sub, antenna->sub.rim_centre).z;
    }
    *foot = ev_main_point(antenna, antenna->offset + out * c, out * s);
    *top = ev_vec3_make(antenna->offset + strip->from * c, strip->from * s, height);
}

int ev_antenna_extent(const ev_antenna *antenna, ev_vec3 points[EV_EXTENT_CAPACITY])
{
    int count = 0;
    double stand = ev_front_stand(antenna);
    for (int i = 0; i < 32; ++i) {
        double t = 2.0 * EV_PI * i / 32.0;
        double x = antenna->offset + antenna->radius * cos(t), y = antenna->radius * sin(t);
        points[count++] = ev_main_point(antenna, x, y);
        points[count++] = ev_vec3_make(x, y, stand);
        if (antenna->dual) {
            points[count++] = ev_sub_rim_point(&antenna->sub, t);
        }
    }
    points[count++] = ev_main_point(antenna, antenna->offset, 0.0);
    for (int i = 0; i < antenna->feed_count; ++i) {
        const ev_feed *feed = &antenna->feeds[i];
        double horn = 3.0 * ev_outline_mouth(antenna, feed);
        points[count++] = feed->nominal;
        points[count++] = ev_vec3_along(feed->nominal, -horn, feed->nominal_axis);
    }
    return count;
}
