/* The ink of the space view: rays, outlines and struts as strokes on the page. Outlines are hidden
 * exactly, by casting a line from each of their points to the eye against the mirrors' own
 * equations; rays are not hidden (ink under translucent surfaces). Knows nothing of GL. */
#pragma once

#include "draw/draw.h"
#include "draw/stage.h"
#include "view/camera.h"
#include "view/mesh.h"
#include "view/raster.h"

typedef struct ev_ink {
    const ev_sheet *sheet;
    ev_eye eye;
    ev_rect place; /* of the Stage on the page; strokes count from its corner */
    double scale;  /* device pixels per page pixel */
    double stand;  /* of the Front, m */
    const ev_theme *theme;
    ev_emphasis emphasis;
    ev_strokes *strokes;
} ev_ink;

/* How a curve is drawn. */
typedef struct ev_nib {
    double width; /* page pixels */
    double alpha;
    ev_colour colour;
    ev_stroke_style style;
    bool joined;
    bool fade;     /* to nothing at its end */
    bool cast;     /* dims where something stands before it */
    bool of_front; /* part of the Front, which then does not hide it */
} ev_nib;

void ev_ink_curve(const ev_ink *ink, ev_nib nib, const ev_vec3 *points, int count);

/* Edges of a mesh (its first and last row) and its contour as the eye sees it. */
void ev_ink_outline(const ev_ink *ink, ev_nib nib, const ev_mesh *mesh, bool first, bool last,
                    bool contour);

void ev_ink_rays(const ev_ink *ink);
void ev_ink_struts(const ev_ink *ink);
/* The dashed outline of the wave that would be even. */
void ev_ink_even(const ev_ink *ink);

/* 1 where a point is in plain sight; less behind the dish, the Front (unless it belongs to it) or
 * the subreflector. */
double ev_ink_sight(const ev_ink *ink, ev_vec3 point, bool of_front);
