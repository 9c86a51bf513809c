/* The space view: reflectors, horns, struts, the Front and the rays, drawn by GL and the rasteriser
 * into the Stage. Reads a sheet and a camera; keeps only meshes and textures. */
#pragma once

#include "view/ink.h"
#include "view/layers.h"

#include <SDL.h>

typedef struct ev_space {
    GLuint mirror, front;                 /* programs */
    ev_mesh meshes[3 + EV_FEED_CAPACITY]; /* dish, subreflector, Front, horns */
    ev_grid grids[3 + EV_FEED_CAPACITY];
    ev_raster raster;
    ev_strokes strokes; /* after drawing: the outlines, for the Stage's layer */
    ev_texture rays, shadows;
    uint64_t shadow_stamp;
} ev_space;

typedef struct ev_space_input {
    const ev_page *page;
    const ev_sheet *sheet;
    const ev_camera *camera;
    double scale;  /* device pixels per page pixel */
    ev_crew *crew; /* for the rasteriser */
} ev_space_input;

bool ev_space_start(ev_space *space, ev_diagnostics *diagnostics);
void ev_space_end(ev_space *space);

/* Draws into the Stage's place; the window's viewport is put back to `pixel_width` x
 * `pixel_height`. */
void ev_space_draw(ev_space *space, const ev_layers *layers, const ev_space_input *input,
                   int pixel_width, int pixel_height);

/* Turns the camera to hold the whole antenna in the part of the Stage that the Detail leaves. */
void ev_space_fit(const ev_antenna *antenna, const ev_page *page, bool detail, ev_camera *camera);

/* Where the parts are seen, as handles "part.feed.0", "part.sub"; returns their number. */
int ev_space_parts(const ev_antenna *antenna, const ev_page *page, const ev_camera *camera,
                   ev_box parts[EV_FEED_CAPACITY + 1]);
