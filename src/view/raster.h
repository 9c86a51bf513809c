/* Antialiased strokes into an image on the CPU: the rays and the ink of the space view. No depth:
 * strokes blend in the order given, so that the picture is the same for any number of threads.
 * Knows nothing of antennas. */
#pragma once

#include "view/crew.h"

#include <stdbool.h>
#include <stdint.h>

typedef enum {
    EV_STROKE_SOLID,
    EV_STROKE_DASHES, /* 7 px on, 4 off */
    EV_STROKE_DOTS,   /* 2 on, 2.5 off */
} ev_stroke_style;

/* One straight piece. Pixels, y down, the first pixel's centre at (0.5, 0.5). Pieces of one curve
 * are `joined` at their shared ends, where each pixel then belongs to one piece only. */
typedef struct ev_stroke {
    float x0, y0, x1, y1;
    float width;          /* px; under 1 it is drawn 1 px wide and paler */
    float alpha0, alpha1; /* at the two ends, [0, 1], linear between: strokes that fade out */
    float start;          /* px along the curve at (x0, y0): keeps dashes going round corners */
    uint32_t colour;      /* 0xRRGGBB */
    uint8_t style;        /* ev_stroke_style */
    bool joined_start, joined_end;
} ev_stroke;

typedef struct ev_raster {
    int width, height;
    uint32_t *pixels;             /* premultiplied 0xAARRGGBB, rows of `width` */
    int left, top, right, bottom; /* what was drawn on lies within; right and bottom excluded */
} ev_raster;

/* Zero-sized at first; false when there is no memory, and the raster is then empty. */
bool ev_raster_resize(ev_raster *raster, int width, int height);
void ev_raster_free(ev_raster *raster);
/* Clears what was drawn on. */
void ev_raster_clear(ev_raster *raster);

/* Blends `count` strokes over what is there. Strokes with ends that are not finite are left out.
 * `crew` may be NULL. */
void ev_raster_draw(ev_raster *raster, const ev_stroke *strokes, int count, ev_crew *crew);

/* A growing list of strokes. */
typedef struct ev_strokes {
    ev_stroke *items;
    int count, capacity;
} ev_strokes;

/* False, and nothing added, when there is no memory. */
bool ev_strokes_add(ev_strokes *strokes, ev_stroke stroke);
/* The bar that ends a ray in a shadow: 10 px, square to the stroke at its end. */
bool ev_strokes_add_bar(ev_strokes *strokes, ev_stroke stroke);
void ev_strokes_free(ev_strokes *strokes);
