/* The flat regions as textures. Each is drawn by src/draw into an image of its own and redrawn only
 * when something it shows has changed; hot boxes stay with the image they belong to. */
#pragma once

#include "draw/actions.h"
#include "draw/drawer.h"
#include "view/gl.h"
#include "view/raster.h"

typedef enum {
    EV_LAYER_STAGE, /* section and Detail; or, over space, notes and Detail on nothing */
    EV_LAYER_BAR,
    EV_LAYER_VERDICT,
    EV_LAYER_WATTS,
    EV_LAYER_STRIP,
    EV_LAYER_LEDGER,
    EV_LAYER_PLATE, /* the only plate, or the upper of two */
    EV_LAYER_LOWER_PLATE,
    EV_LAYER_DRAWER,  /* in place of ledger and plates */
    EV_LAYER_SHOW,    /* showing mode: the whole page, alone */
    EV_LAYER_GALLERY, /* the whole page, alone */
    EV_LAYER_FINDER,  /* over the whole page or the gallery, which it covers from the hand */
    EV_LAYER_COUNT
} ev_layer_id;

/* What a layer can depend on; a stamp a kind, equal while nothing of the kind has changed. */
typedef enum {
    EV_STAMP_PAGE,    /* size, scale, light or dark */
    EV_STAMP_SCENE,   /* title, frequency, unsaved, actions, notice */
    EV_STAMP_NUMBERS, /* study, kept state, scales */
    EV_STAMP_VERDICT,
    EV_STAMP_PLATES, /* beams, gain curve, which plate */
    EV_STAMP_POINTED,
    EV_STAMP_FIELDS,
    EV_STAMP_STAGE, /* mode, zoom, pan, part in hand, loss map, camera */
    EV_STAMP_DRAWER,
    EV_STAMP_FINDER,
    EV_STAMP_GALLERY,
    EV_STAMP_COUNT
} ev_stamp_kind;

typedef struct ev_layer {
    cairo_surface_t *surface;
    ev_texture texture;
    ev_rect rect; /* page pixels */
    uint64_t stamp;
    ev_boxes boxes;
} ev_layer;

typedef struct ev_layers {
    ev_layer items[EV_LAYER_COUNT];
    GLuint program, empty_array;
    GLint place_at, part_at;
    ev_plot_map section, detail; /* of the Stage as last drawn */
    int redrawn;                 /* by the last update, for tests */
} ev_layers;

/* What there is to draw. */
typedef struct ev_layers_input {
    const ev_page *page;
    const ev_sheet *sheet; /* NULL: the gallery */
    const ev_gallery_item *items;
    int item_count;
    bool dark, showing;
    const ev_drawer *drawer;   /* NULL: closed */
    const ev_actions *actions; /* NULL: closed */
    const char *pointed;
    double scale; /* device pixels per page pixel */
    ev_crew *crew;
    const ev_strokes *outlines; /* space: device pixels from the Stage's corner */
    double part_x, part_y;      /* space: where the part in hand is seen, page pixels */
    const ev_box *parts;        /* space: handles of the parts */
    int part_count;
    uint64_t stamps[EV_STAMP_COUNT];
} ev_layers_input;

bool ev_layers_start(ev_layers *layers, ev_diagnostics *diagnostics);
void ev_layers_end(ev_layers *layers);

/* Redraws what is out of date. */
void ev_layers_update(ev_layers *layers, const ev_layers_input *input);
/* Lays the page (or the gallery) over what is in the window. */
void ev_layers_show(ev_layers *layers, const ev_layers_input *input);

/* The first box of the kind under the pointer among the layers shown; NULL when there is none. */
const ev_box *ev_layers_hit(const ev_layers *layers, bool gallery, double x, double y,
                            ev_box_kind kind);
const ev_box *ev_layers_find(const ev_layers *layers, bool gallery, const char *name);

/* FNV-1a over bytes, to make stamps with; start from 0. */
uint64_t ev_stamp(uint64_t stamp, const void *bytes, size_t size);
/* Part of a texture (in its pixels) over a place of the page; used by the space view too. */
void ev_layers_quad(const ev_layers *layers, const ev_page *page, ev_rect rect,
                    const ev_texture *texture, ev_rect part);
