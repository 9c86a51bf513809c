/* Which layers there are: where each lies, what it depends on, how it is drawn. Internal to the
 * layers. */
#pragma once

#include "view/layers.h"

typedef struct ev_layer_plan {
    unsigned depends; /* bits of ev_stamp_kind */
    ev_rect (*place)(const ev_page *page);
    void (*draw)(ev_layers *layers, ev_layer *layer, const ev_layers_input *input, cairo_t *cairo);
} ev_layer_plan;

extern const ev_layer_plan ev_layer_plans[EV_LAYER_COUNT];
