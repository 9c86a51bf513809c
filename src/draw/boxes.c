/* Hot boxes and plot maps: what was drawn where. Filled by the drawings, read by the window (hits)
 * and by tests (text inside its place). Knows nothing of what the boxes mean. */
#include "draw/pen.h"

#include "base/text.h"

#include <string.h>

static bool holds(ev_rect rect, double x, double y)
{
    return x >= rect.x && x < rect.x + rect.width && y >= rect.y && y < rect.y + rect.height;
}

const ev_box *ev_boxes_find(const ev_boxes *boxes, const char *name)
{
    for (int i = 0; i < boxes->count; ++i)
        if (strcmp(boxes->items[i].name, name) == 0)
            return &boxes->items[i];
    return NULL;
}

const ev_box *ev_boxes_hit(const ev_boxes *boxes, double x, double y, ev_box_kind kind)
{
    for (int i = boxes->count - 1; i >= 0; --i)
        if (boxes->items[i].kind == kind && holds(boxes->items[i].rect, x, y))
            return &boxes->items[i];
    return NULL;
}

ev_box *ev_boxes_add(ev_boxes *boxes, ev_box_kind kind, const char *name, ev_rect rect)
{
    if (!boxes || boxes->count >= EV_BOX_CAPACITY)
        return NULL;
    ev_box *box = &boxes->items[boxes->count++];
    memset(box, 0, sizeof *box);
    ev_text_copy(box->name, sizeof box->name, name);
    box->kind = kind;
    box->rect = rect;
    box->within = rect;
    return box;
}

void ev_plot_to_page(const ev_plot_map *map, double a, double b, double *x, double *y)
{
    *x = map->x0 + map->x_scale * a + map->x_cross * b;
    *y = map->y0 + map->y_scale * b + map->y_cross * a;
}

void ev_plot_to_data(const ev_plot_map *map, double x, double y, double *a, double *b)
{
    double determinant = map->x_scale * map->y_scale - map->x_cross * map->y_cross;
    double dx = x - map->x0, dy = y - map->y0;
    *a = (map->y_scale * dx - map->x_cross * dy) / determinant;
    *b = (map->x_scale * dy - map->y_cross * dx) / determinant;
}
