/* The little of OpenGL that the window uses: programs, textures, grids of quads. One context, made
 * current by window.c before any of these is called. */
#pragma once

#include "base/diagnostic.h"
#include "view/mesh.h"

#include <epoxy/gl.h>

/* 0 with a diagnostic when a shader does not compile. */
GLuint ev_gl_program(const char *name, const char *vertex, const char *fragment,
                     ev_diagnostics *diagnostics);

typedef struct ev_texture {
    GLuint id;
    int width, height;
} ev_texture;

/* Pixels to upload: premultiplied 0xAARRGGBB, an image of width x height of which only the part
 * from (left, top) to (right, bottom), both excluded, has changed. */
typedef struct ev_pixels {
    int width, height, stride; /* stride in pixels */
    int left, top, right, bottom;
    const uint32_t *data;
} ev_pixels;

/* The texture is made or resized as needed. */
void ev_texture_upload(ev_texture *texture, const ev_pixels *pixels, bool smooth);
void ev_texture_free(ev_texture *texture);

/* A mesh in GL. Quads' indices are rebuilt only when the grid changes its size. */
typedef struct ev_grid {
    GLuint array, vertices, indices;
    int rows, columns;
} ev_grid;

void ev_grid_upload(ev_grid *grid, const ev_mesh *mesh);
void ev_grid_draw(const ev_grid *grid);
void ev_grid_free(ev_grid *grid);
