/* The growing list of strokes that the ink fills and the rasteriser draws. */
#include "view/raster.h"

#include <math.h>
#include <stdlib.h>

static const float bar_length = 10.0F, bar_width = 1.6F;

bool ev_strokes_add(ev_strokes *strokes, ev_stroke stroke)
{
    if (strokes->count == strokes->capacity) {
        int capacity = strokes->capacity ? 2 * strokes->capacity : 1024;
        ev_stroke *items = realloc(strokes->items, (size_t)capacity * sizeof *items);
        if (!items) {
            return false;
        }
        strokes->items = items;
        strokes->capacity = capacity;
    }
    strokes->items[strokes->count++] = stroke;
    return true;
}

bool ev_strokes_add_bar(ev_strokes *strokes, ev_stroke stroke)
{
    float dx = stroke.x1 - stroke.x0, dy = stroke.y1 - stroke.y0;
    float length = hypotf(dx, dy);
    if (!(length > 0.0F)) {
        return true;
    }
    float nx = -0.5F * bar_length * dy / length, ny = 0.5F * bar_length * dx / length;
    ev_stroke bar = stroke;
    bar.x0 = stroke.x1 - nx;
    bar.y0 = stroke.y1 - ny;
    bar.x1 = stroke.x1 + nx;
    bar.y1 = stroke.y1 + ny;
    bar.width = bar_width;
    bar.alpha0 = bar.alpha1 = stroke.alpha1;
    bar.style = EV_STROKE_SOLID;
    bar.joined_start = bar.joined_end = false;
    return ev_strokes_add(strokes, bar);
}

void ev_strokes_free(ev_strokes *strokes)
{
    free(strokes->items);
    *strokes = (ev_strokes){0};
}
