/* Drawing, uploading and compositing the flat regions. */
#include "view/layers.h"

#include "view/layer_plan.h"

#include "shaders.h"

#include <math.h>

static bool is_shown(const ev_layers_input *input, int id)
{
    bool empty = ev_layer_plans[id].place(input->page).width == 0.0;
    if (id == EV_LAYER_FINDER) {
        return input->actions != NULL;
    }
    if (empty || !input->sheet) {
        return id == EV_LAYER_GALLERY && !empty;
    }
    if (input->showing) {
        return id == EV_LAYER_SHOW;
    }
    bool covered = id == EV_LAYER_LEDGER || id == EV_LAYER_PLATE || id == EV_LAYER_LOWER_PLATE;
    return id == EV_LAYER_DRAWER ? input->drawer != NULL
                                 : id < EV_LAYER_DRAWER && !(covered && input->drawer);
}

bool ev_layers_start(ev_layers *layers, ev_diagnostics *diagnostics)
{
    *layers = (ev_layers){0};
    layers->program =
        ev_gl_program("layer", ev_shader_layer_vert, ev_shader_layer_frag, diagnostics);
    if (!layers->program) {
        return false;
    }
    layers->place_at = glGetUniformLocation(layers->program, "place");
    layers->part_at = glGetUniformLocation(layers->program, "part");
    glGenVertexArrays(1, &layers->empty_array);
    return true;
}

void ev_layers_end(ev_layers *layers)
{
    for (int i = 0; i < EV_LAYER_COUNT; ++i) {
        if (layers->items[i].surface) {
            cairo_surface_destroy(layers->items[i].surface);
        }
        ev_texture_free(&layers->items[i].texture);
    }
    if (layers->program) {
        glDeleteProgram(layers->program);
        glDeleteVertexArrays(1, &layers->empty_array);
    }
    *layers = (ev_layers){0};
}

uint64_t ev_stamp(uint64_t stamp, const void *bytes, size_t size)
{
    const unsigned char *at = bytes;
    stamp = stamp ? stamp : 0xCBF29CE484222325u;
    for (size_t i = 0; i < size; ++i) {
        stamp = (stamp ^ at[i]) * 0x100000001B3u;
    }
    return stamp;
}

/* An image of the region's size in whole device pixels. */
static bool prepare_surface(ev_layer *layer, ev_rect rect, double scale)
{
    int width = (int)lround(rect.width * scale), height = (int)lround(rect.height * scale);
    if (layer->surface && cairo_image_surface_get_width(layer->surface) == width &&
        cairo_image_surface_get_height(layer->surface) == height) {
        return true;
    }
    if (layer->surface) {
        cairo_surface_destroy(layer->surface);
    }
    layer->surface = cairo_image_surface_create(CAIRO_FORMAT_ARGB32, width, height);
    if (cairo_surface_status(layer->surface) != CAIRO_STATUS_SUCCESS) {
        cairo_surface_destroy(layer->surface);
        layer->surface = NULL;
        return false;
    }
    return true;
}

/* The region in whole device pixels, never smaller than it is. */
static ev_rect widen(ev_rect rect, double scale)
{
    double left = floor(rect.x * scale) / scale, top = floor(rect.y * scale) / scale;
    return (ev_rect){left, top, ceil((rect.x + rect.width) * scale) / scale - left,
                     ceil((rect.y + rect.height) * scale) / scale - top};
}

typedef struct redrawing {
    ev_layers *layers;
    const ev_layers_input *input;
    int ids[EV_LAYER_COUNT];
} redrawing;

static void draw_layer(void *data, int index)
{
    const redrawing *work = data;
    ev_layers *layers = work->layers;
    const ev_layers_input *input = work->input;
    int id = work->ids[index];
    ev_layer *layer = &layers->items[id];
    ev_rect rect = layer->rect;
    cairo_t *cairo = cairo_create(layer->surface);
    cairo_set_operator(cairo, CAIRO_OPERATOR_CLEAR);
    cairo_paint(cairo);
    cairo_set_operator(cairo, CAIRO_OPERATOR_OVER);
    cairo_scale(cairo, input->scale, input->scale);
    cairo_translate(cairo, -rect.x, -rect.y);
    layer->boxes.count = 0;
    ev_layer_plans[id].draw(layers, layer, input, cairo);
    if (id < EV_LAYER_DRAWER) {
        ev_draw_rules(cairo, input->page, input->dark);
    }
    cairo_destroy(cairo);
    cairo_surface_flush(layer->surface);
}

static void upload_layer(ev_layer *layer)
{
    int width = cairo_image_surface_get_width(layer->surface);
    int height = cairo_image_surface_get_height(layer->surface);
    ev_pixels pixels = {.width = width,
                        .height = height,
                        .stride = cairo_image_surface_get_stride(layer->surface) / 4,
                        .right = width,
                        .bottom = height,
                        .data =
                            (const uint32_t *)(void *)cairo_image_surface_get_data(layer->surface)};
    ev_texture_upload(&layer->texture, &pixels, false);
}

static uint64_t stamp_of(const ev_layers_input *input, int id)
{
    uint64_t stamp = 0;
    for (int kind = 0; kind < EV_STAMP_COUNT; ++kind) {
        if (ev_layer_plans[id].depends & (1u << kind)) {
            stamp = ev_stamp(stamp, &input->stamps[kind], sizeof input->stamps[kind]);
        }
    }
    return stamp;
}

/* The layers whose stamp has changed and that have an image; returns their number. */
static int find_outdated(ev_layers *layers, const ev_layers_input *input, int ids[EV_LAYER_COUNT])
{
    int count = 0;
    for (int id = 0; id < EV_LAYER_COUNT; ++id) {
        ev_layer *layer = &layers->items[id];
        uint64_t stamp = stamp_of(input, id);
        if (!is_shown(input, id)) {
            layer->boxes.count = 0;
            layer->stamp = 0;
            continue;
        }
        if (layer->stamp == stamp) {
            continue;
        }
        layer->rect = widen(ev_layer_plans[id].place(input->page), input->scale);
        if (prepare_surface(layer, layer->rect, input->scale)) {
            layer->stamp = stamp;
            ids[count++] = id;
        }
    }
    return count;
}

/* Regions are drawn side by side, the largest first; GL takes them one after another. */
void ev_layers_update(ev_layers *layers, const ev_layers_input *input)
{
    redrawing work = {.layers = layers, .input = input};
    int count = find_outdated(layers, input, work.ids);
    ev_crew_run(input->crew, count, draw_layer, &work);
    for (int i = 0; i < count; ++i) {
        upload_layer(&layers->items[work.ids[i]]);
    }
    layers->redrawn = count;
}

void ev_layers_quad(const ev_layers *layers, const ev_page *page, ev_rect rect,
                    const ev_texture *texture, ev_rect part)
{
    float left = (float)(2.0 * rect.x / page->width - 1.0);
    float top = (float)(1.0 - 2.0 * rect.y / page->height);
    float right = (float)(2.0 * (rect.x + rect.width) / page->width - 1.0);
    float bottom = (float)(1.0 - 2.0 * (rect.y + rect.height) / page->height);
    glUseProgram(layers->program);
    glUniform4f(layers->place_at, left, top, right, bottom);
    glUniform4f(layers->part_at, (float)(part.x / texture->width),
                (float)(part.y / texture->height), (float)((part.x + part.width) / texture->width),
                (float)((part.y + part.height) / texture->height));
    glBindVertexArray(layers->empty_array);
    glBindTexture(GL_TEXTURE_2D, texture->id);
    glDrawArrays(GL_TRIANGLE_STRIP, 0, 4);
    glBindVertexArray(0);
}

/* Does the image have anything in these device pixels? */
static bool has_ink(const ev_layer *layer, int left, int top, int right, int bottom)
{
    const uint32_t *pixels =
        (const uint32_t *)(const void *)cairo_image_surface_get_data(layer->surface);
    int across = cairo_image_surface_get_stride(layer->surface) / 4;
    for (int y = top; y < bottom; ++y) {
        uint32_t all = 0;
        for (int x = left; x < right; ++x) {
            all |= pixels[(ptrdiff_t)y * across + x];
        }
        if (all) {
            return true;
        }
    }
    return false;
}

static void show_part(const ev_layers *layers, const ev_layers_input *input, const ev_layer *layer,
                      ev_rect part)
{
    double s = input->scale;
    ev_rect rect = {layer->rect.x + part.x / s, layer->rect.y + part.y / s, part.width / s,
                    part.height / s};
    ev_layers_quad(layers, input->page, rect, &layer->texture, part);
}

/* What lies over space is mostly nothing: only the tiles with ink in them, in runs along a row. */
static void show_inked_tiles(const ev_layers *layers, const ev_layers_input *input,
                             const ev_layer *layer)
{
    enum { TILE = 48 };
    int width = layer->texture.width, height = layer->texture.height;
    for (int top = 0; top < height; top += TILE) {
        int bottom = top + TILE < height ? top + TILE : height, from = -1;
        for (int left = 0; left < width + TILE; left += TILE) {
            int right = left + TILE < width ? left + TILE : width;
            bool inked = left < width && has_ink(layer, left, top, right, bottom);
            if (inked && from < 0) {
                from = left;
            } else if (!inked && from >= 0) {
                int end = left < width ? left : width;
                show_part(layers, input, layer, (ev_rect){from, top, end - from, bottom - top});
                from = -1;
            }
        }
    }
}

void ev_layers_show(ev_layers *layers, const ev_layers_input *input)
{
    glDisable(GL_DEPTH_TEST);
    glBlendFunc(GL_ONE, GL_ONE_MINUS_SRC_ALPHA);
    for (int id = 0; id < EV_LAYER_COUNT; ++id) {
        const ev_layer *layer = &layers->items[id];
        if (!is_shown(input, id) || !layer->texture.id) {
            continue;
        }
        if (id == EV_LAYER_FINDER) {
            glEnable(GL_BLEND); /* what lies below fades */
            ev_rect all = {0.0, 0.0, layer->texture.width, layer->texture.height};
            ev_layers_quad(layers, input->page, layer->rect, &layer->texture, all);
        } else if (id == EV_LAYER_STAGE && input->sheet->stage == EV_STAGE_SPACE) {
            glEnable(GL_BLEND);
            show_inked_tiles(layers, input, layer);
        } else {
            glDisable(GL_BLEND);
            ev_rect all = {0.0, 0.0, layer->texture.width, layer->texture.height};
            ev_layers_quad(layers, input->page, layer->rect, &layer->texture, all);
        }
    }
}

/* Whether a hand gets at the layer: all but the list of actions is out of reach while that is
 * there. */
static bool is_in_reach(const ev_layers *layers, bool gallery, int id)
{
    if (layers->items[EV_LAYER_FINDER].boxes.count > 0) {
        return id == EV_LAYER_FINDER;
    }
    return (id == EV_LAYER_GALLERY) == gallery;
}

const ev_box *ev_layers_hit(const ev_layers *layers, bool gallery, double x, double y,
                            ev_box_kind kind)
{
    for (int id = 0; id < EV_LAYER_COUNT; ++id) {
        if (is_in_reach(layers, gallery, id)) {
            const ev_box *box = ev_boxes_hit(&layers->items[id].boxes, x, y, kind);
            if (box) {
                return box;
            }
        }
    }
    return NULL;
}

const ev_box *ev_layers_find(const ev_layers *layers, bool gallery, const char *name)
{
    for (int id = 0; id < EV_LAYER_COUNT; ++id) {
        if (is_in_reach(layers, gallery, id)) {
            const ev_box *box = ev_boxes_find(&layers->items[id].boxes, name);
            if (box) {
                return box;
            }
        }
    }
    return NULL;
}
