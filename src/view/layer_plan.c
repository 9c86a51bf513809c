/* The table of layers. To add a region to the page: an id in layers.h and a row here. */
#include "view/layer_plan.h"

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

static ev_rect place_plate(const ev_page *page)
{
    return page->plates[0];
}

static ev_rect place_lower_plate(const ev_page *page)
{
    return page->plate_count > 1 ? page->plates[1] : (ev_rect){0.0, 0.0, 0.0, 0.0};
}

static ev_rect place_column(const ev_page *page)
{
    return (ev_rect){page->ledger.x, page->ledger.y, page->ledger.width,
                     page->height - page->ledger.y};
}

static ev_rect place_page(const ev_page *page)
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

static void draw_plate(ev_layers *layers, ev_layer *layer, const ev_layers_input *input,
                       cairo_t *cairo)
{
    (void)layers;
    ev_draw_plate(cairo, input->page, input->sheet, 0, &layer->boxes);
}

static void draw_lower_plate(ev_layers *layers, ev_layer *layer, const ev_layers_input *input,
                             cairo_t *cairo)
{
    (void)layers;
    ev_draw_plate(cairo, input->page, input->sheet, 1, &layer->boxes);
}

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

/* Over space the outlines of things lie under the words, in the same image. */
static void ink_outlines(ev_layer *layer, const ev_layers_input *input)
{
    cairo_surface_flush(layer->surface);
    ev_raster raster = {
        .width = cairo_image_surface_get_width(layer->surface),
        .height = cairo_image_surface_get_height(layer->surface),
        .pixels = (uint32_t *)(void *)cairo_image_surface_get_data(layer->surface),
    };
    ev_raster_draw(&raster, input->outlines->items, input->outlines->count, NULL);
    cairo_surface_mark_dirty(layer->surface);
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
        ink_outlines(layer, input);
        ev_draw_space_notes(cairo, input->page, sheet, &layer->boxes);
        add_part_boxes(&layer->boxes, input);
    }
    if (sheet->detail) {
        ev_draw_detail(cairo, input->page, sheet, x, y, &layer->boxes, &layers->detail);
    }
}

static void draw_drawer(ev_layers *layers, ev_layer *layer, const ev_layers_input *input,
                        cairo_t *cairo)
{
    (void)layers;
    ev_draw_drawer(cairo, input->page, input->sheet, input->drawer, &layer->boxes);
}

static void draw_show(ev_layers *layers, ev_layer *layer, const ev_layers_input *input,
                      cairo_t *cairo)
{
    ev_draw_show(cairo, input->page->width, input->page->height, input->sheet, &layer->boxes,
                 &layers->section, &layers->detail);
}

static void draw_finder(ev_layers *layers, ev_layer *layer, const ev_layers_input *input,
                        cairo_t *cairo)
{
    (void)layers;
    ev_draw_actions(cairo, input->page, input->dark, input->actions, &layer->boxes);
}

static void draw_gallery(ev_layers *layers, ev_layer *layer, const ev_layers_input *input,
                         cairo_t *cairo)
{
    (void)layers;
    ev_draw_gallery(cairo, input->page->width, input->page->height, input->dark, input->items,
                    input->item_count, input->pointed, &layer->boxes);
}

const ev_layer_plan ev_layer_plans[EV_LAYER_COUNT] = {
    [EV_LAYER_STAGE] = {ON(PAGE) | ON(NUMBERS) | ON(POINTED) | ON(STAGE), place_stage, draw_stage},
    [EV_LAYER_BAR] = {ON(PAGE) | ON(SCENE) | ON(POINTED), place_bar, draw_bar},
    [EV_LAYER_VERDICT] = {ON(PAGE) | ON(VERDICT) | ON(POINTED), place_verdict, draw_verdict},
    [EV_LAYER_WATTS] = {ON(PAGE) | ON(NUMBERS) | ON(POINTED), place_watts, draw_watts},
    [EV_LAYER_STRIP] = {ON(PAGE) | ON(FIELDS) | ON(POINTED), place_strip, draw_strip},
    [EV_LAYER_LEDGER] = {ON(PAGE) | ON(NUMBERS) | ON(POINTED), place_ledger, draw_ledger},
    [EV_LAYER_PLATE] = {ON(PAGE) | ON(NUMBERS) | ON(PLATES) | ON(POINTED), place_plate, draw_plate},
    [EV_LAYER_LOWER_PLATE] = {ON(PAGE) | ON(NUMBERS) | ON(PLATES) | ON(POINTED), place_lower_plate,
                              draw_lower_plate},
    [EV_LAYER_DRAWER] = {ON(PAGE) | ON(NUMBERS) | ON(DRAWER), place_column, draw_drawer},
    [EV_LAYER_SHOW] = {ON(PAGE) | ON(NUMBERS) | ON(VERDICT) | ON(STAGE) | ON(POINTED), place_page,
                       draw_show},
    [EV_LAYER_FINDER] = {ON(PAGE) | ON(FINDER), place_page, draw_finder},
    [EV_LAYER_GALLERY] = {ON(PAGE) | ON(GALLERY) | ON(POINTED), place_page, draw_gallery},
};
