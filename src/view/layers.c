/* Drawing, uploading and compositing the flat regions. */
#include "view/layers.h"

#include "shaders.h"

#include <math.h>
#include <string.h>

typedef struct layer_plan {
    unsigned depends; /* bits of ev_stamp_kind */
    ev_rect (*place)(const ev_page *page);
    void (*draw)(ev_layers *layers, ev_layer *layer, const ev_layers_input *input, cairo_t *cairo);
} layer_plan;

#define ON(KIND) (1u << EV_STAMP_##KIND)

static ev_rect place_bar(const ev_page *page)
{
    return page->bar;
}

static ev_rect place_verdict(const ev_page *page)
{
    return page->verdict;
}

static ev_rect place_stage(const ev_page *page)
{
    return page->stage;
}

static ev_rect place_watts(const ev_page *page)
{
    return page->watts;
}

static ev_rect place_strip(const ev_page *page)
{
    return page->strip;
}

static ev_rect place_ledger(const ev_page *page)
{
    return page->ledger;
}

static ev_rect place_aperture(const ev_page *page)
{
    return page->plates[0];
}

static ev_rect place_gallery(const ev_page *page)
{
    return (ev_rect){0.0, 0.0, page->width, page->height};
}

/* Most regions are one call. */
#define DRAW_PLAIN(NAME)                                                                           \
    static void draw_##NAME(ev_layers *layers, ev_layer *layer, const ev_layers_input *input,      \
                            cairo_t *cairo)                                                        \
    {                                                                                              \
        (void)layers;                                                                              \
        ev_draw_##NAME(cairo, input->page, input->sheet, &layer->boxes);                           \
    }
DRAW_PLAIN(bar)
DRAW_PLAIN(verdict)
DRAW_PLAIN(watts)
DRAW_PLAIN(strip)
DRAW_PLAIN(ledger)
DRAW_PLAIN(aperture)

static void add_part_boxes(ev_boxes *boxes, const ev_layers_input *input)
{
    for (int i = 0; i < input->part_count && boxes->count < EV_BOX_CAPACITY; ++i) {
        boxes->items[boxes->count++] = input->parts[i];
    }
}

static void find_on_section(const ev_layers *layers, const ev_sheet *sheet, double *x, double *y)
{
    const ev_antenna *antenna = sheet->antenna;
    ev_vec3 place = sheet->part == EV_PART_SUB
                        ? ev_sub_place(&antenna->sub, antenna->layout.sub_vertex)
                        : antenna->feeds[sheet->feed].position;
    ev_plot_to_page(&layers->section, place.z, place.x, x, y);
}

static void draw_stage(ev_layers *layers, ev_layer *layer, const ev_layers_input *input,
                       cairo_t *cairo)
{
    const ev_sheet *sheet = input->sheet;
    double x = input->part_x, y = input->part_y;
    if (sheet->stage == EV_STAGE_SECTION) {
        ev_draw_section(cairo, input->page, sheet, &layer->boxes, &layers->section);
        find_on_section(layers, sheet, &x, &y);
    } else {
        ev_draw_space_notes(cairo, input->page, sheet, &layer->boxes);
        add_part_boxes(&layer->boxes, input);
    }
    if (sheet->detail) {
        ev_draw_detail(cairo, input->page, sheet, x, y, &layer->boxes, &layers->detail);
    }
}

static void draw_gallery(ev_layers *layers, ev_layer *layer, const ev_layers_input *input,
                         cairo_t *cairo)
{
    (void)layers;
    ev_draw_gallery(cairo, input->page->width, input->page->height, input->dark, input->items,
                    input->item_count, input->pointed, &layer->boxes);
}

static const layer_plan plans[EV_LAYER_COUNT] = {
    [EV_LAYER_STAGE] = {ON(PAGE) | ON(NUMBERS) | ON(POINTED) | ON(STAGE), place_stage, draw_stage},
    [EV_LAYER_BAR] = {ON(PAGE) | ON(SCENE) | ON(POINTED), place_bar, draw_bar},
    [EV_LAYER_VERDICT] = {ON(PAGE) | ON(VERDICT) | ON(POINTED), place_verdict, draw_verdict},
    [EV_LAYER_WATTS] = {ON(PAGE) | ON(NUMBERS) | ON(POINTED), place_watts, draw_watts},
    [EV_LAYER_STRIP] = {ON(PAGE) | ON(FIELDS) | ON(POINTED), place_strip, draw_strip},
    [EV_LAYER_LEDGER] = {ON(PAGE) | ON(NUMBERS) | ON(POINTED), place_ledger, draw_ledger},
    [EV_LAYER_APERTURE] = {ON(PAGE) | ON(NUMBERS) | ON(POINTED), place_aperture, draw_aperture},
    [EV_LAYER_GALLERY] = {ON(PAGE) | ON(GALLERY) | ON(POINTED), place_gallery, draw_gallery},
};

static bool is_shown(const ev_layers_input *input, int id)
{
    return (id == EV_LAYER_GALLERY) == (input->sheet == NULL);
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

static void redraw(ev_layers *layers, int id, const ev_layers_input *input, ev_rect rect)
{
    ev_layer *layer = &layers->items[id];
    if (!prepare_surface(layer, rect, input->scale)) {
        return;
    }
    cairo_t *cairo = cairo_create(layer->surface);
    cairo_set_operator(cairo, CAIRO_OPERATOR_CLEAR);
    cairo_paint(cairo);
    cairo_set_operator(cairo, CAIRO_OPERATOR_OVER);
    cairo_scale(cairo, input->scale, input->scale);
    cairo_translate(cairo, -rect.x, -rect.y);
    layer->boxes.count = 0;
    plans[id].draw(layers, layer, input, cairo);
    if (input->sheet) {
        ev_draw_rules(cairo, input->page, input->dark);
    }
    cairo_destroy(cairo);
    cairo_surface_flush(layer->surface);
    ev_texture_upload(&layer->texture, cairo_image_surface_get_width(layer->surface),
                      cairo_image_surface_get_height(layer->surface),
                      cairo_image_surface_get_stride(layer->surface) / 4,
                      (const uint32_t *)(void *)cairo_image_surface_get_data(layer->surface),
                      false);
    ++layers->redrawn;
}

static uint64_t stamp_of(const ev_layers_input *input, int id)
{
    uint64_t stamp = 0;
    for (int kind = 0; kind < EV_STAMP_COUNT; ++kind) {
        if (plans[id].depends & (1u << kind)) {
            stamp = ev_stamp(stamp, &input->stamps[kind], sizeof input->stamps[kind]);
        }
    }
    return stamp;
}

void ev_layers_update(ev_layers *layers, const ev_layers_input *input)
{
    layers->redrawn = 0;
    for (int id = 0; id < EV_LAYER_COUNT; ++id) {
        ev_layer *layer = &layers->items[id];
        uint64_t stamp = stamp_of(input, id);
        if (is_shown(input, id) && layer->stamp != stamp) {
            layer->stamp = stamp;
            layer->rect = widen(plans[id].place(input->page), input->scale);
            redraw(layers, id, input, layer->rect);
        }
    }
}

void ev_layers_quad(const ev_layers *layers, const ev_page *page, ev_rect rect, GLuint texture)
{
    float left = (float)(2.0 * rect.x / page->width - 1.0);
    float top = (float)(1.0 - 2.0 * rect.y / page->height);
    float right = (float)(2.0 * (rect.x + rect.width) / page->width - 1.0);
    float bottom = (float)(1.0 - 2.0 * (rect.y + rect.height) / page->height);
    glUseProgram(layers->program);
    glUniform4f(layers->place_at, left, top, right, bottom);
    glBindVertexArray(layers->empty_array);
    glBindTexture(GL_TEXTURE_2D, texture);
    glDrawArrays(GL_TRIANGLE_STRIP, 0, 4);
    glBindVertexArray(0);
}

void ev_layers_show(ev_layers *layers, const ev_layers_input *input)
{
    glDisable(GL_DEPTH_TEST);
    glEnable(GL_BLEND);
    glBlendFunc(GL_ONE, GL_ONE_MINUS_SRC_ALPHA);
    for (int id = 0; id < EV_LAYER_COUNT; ++id) {
        const ev_layer *layer = &layers->items[id];
        if (is_shown(input, id) && layer->texture.id) {
            ev_layers_quad(layers, input->page, layer->rect, layer->texture.id);
        }
    }
}

const ev_box *ev_layers_hit(const ev_layers *layers, bool gallery, double x, double y,
                            ev_box_kind kind)
{
    for (int id = 0; id < EV_LAYER_COUNT; ++id) {
        if ((id == EV_LAYER_GALLERY) == gallery) {
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
        if ((id == EV_LAYER_GALLERY) == gallery) {
            const ev_box *box = ev_boxes_find(&layers->items[id].boxes, name);
            if (box) {
                return box;
            }
        }
    }
    return NULL;
}
