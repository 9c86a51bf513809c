/* Surfaces of the space view as grids of quads: the reflectors, feed horns and the Front. Made from
 * the antenna in double; GL gets single precision relative to `origin`, the ink (outlines) works
 * on the doubles. Knows nothing of GL. */
#pragma once

#include "draw/draw.h"

#include <stdbool.h>

/* What GL gets of a grid point. */
typedef struct ev_vertex {
    float position[3]; /* m from the mesh's origin */
    float normal[3];   /* unit */
    float aperture[2]; /* (x - centre, y) / radius of the main aperture */
    float polar[2];    /* the same as distance from the centre and turns, 0 to 1 */
    float value;       /* Front: path error over the full-colour error, -1 early to 1 late */
} ev_vertex;

typedef struct ev_mesh {
    int rows, columns; /* quads; grid points are (rows + 1) x (columns + 1), the columns go round */
    int capacity;
    ev_vec3 origin;
    ev_vec3 *points, *normals; /* m, antenna frame; unit */
    ev_vertex *vertices;
} ev_mesh;

/* All of them replace what the mesh held; false, with an empty mesh, when there is no memory. */
bool ev_mesh_main(ev_mesh *mesh, const ev_antenna *antenna);
bool ev_mesh_sub(ev_mesh *mesh, const ev_antenna *antenna);
/* The horn from its mouth to the end of its neck, as large as on the section. */
bool ev_mesh_horn(ev_mesh *mesh, const ev_antenna *antenna, int feed);
/* The wave in the wanted direction, `stand` m along it from the origin, bent by the path error
 * times the sheet's exaggeration; late lags behind. */
bool ev_mesh_front(ev_mesh *mesh, const ev_sheet *sheet, double stand);
void ev_mesh_free(ev_mesh *mesh);

const ev_vec3 *ev_mesh_point(const ev_mesh *mesh, int row, int column);

/* Where the Front stands along the wanted direction, m: before everything else. */
double ev_front_stand(const ev_antenna *antenna);

/* Path error minus its mean at (x, y) m of the aperture, from the sheet's aperture picture;
 * NaN in the hole. */
double ev_sheet_path_error(const ev_sheet *sheet, double x, double y);

/* Ends of a strut copy: near the subreflector or feed, and on the dish. */
void ev_strut_ends(const ev_antenna *antenna, const ev_strip *strip, ev_vec3 *top, ev_vec3 *foot);

/* Points that a view of the whole antenna has to hold; returns their number. */
enum { EV_EXTENT_CAPACITY = 128 };
int ev_antenna_extent(const ev_antenna *antenna, ev_vec3 points[EV_EXTENT_CAPACITY]);
