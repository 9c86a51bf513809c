/* The gallery: the example scenes as small sections, each with its title and whose problem it is.
 * Called by the window when no scene is open. */
#include "draw/stage.h"

#include <math.h>
#include <stdio.h>

static const double margin = 40.0, gap = 32.0, head = 96.0, words = 76.0;
/* Lines and hatching of a small drawing are drawn smaller too. */
static const double shrink = 0.7;

typedef struct gallery_grid {
    int columns, rows;
    double width, height; /* of a cell */
} gallery_grid;

/* As many rows as make the cells least unlike a card; the columns follow, none to spare. */
static gallery_grid make_grid(double width, double height, int count)
{
    gallery_grid best = {.columns = count, .rows = 1};
    double least = INFINITY;
    for (int rows = 1; rows <= count; ++rows) {
        gallery_grid grid = {.columns = (count + rows - 1) / rows, .rows = rows};
        grid.width = (width - 2.0 * margin - gap * (grid.columns - 1)) / grid.columns;
        grid.height = (height - head - margin - gap * (rows - 1)) / rows;
        double unlike = fabs(log(fmax(grid.width, 1.0) / fmax(grid.height, 1.0) / 1.25));
        if (unlike < least) {
            least = unlike;
            best = grid;
        }
    }
    return best;
}

static ev_plot_map fit_map(ev_rect place, ev_bounds bounds)
{
    double wide = bounds.z1 - bounds.z0, high = bounds.x1 - bounds.x0;
    double scale = fmin(place.width / wide, place.height / high);
    return (ev_plot_map){
        .x0 = place.x + 0.5 * (place.width - scale * wide) - scale * bounds.z0,
        .x_scale = scale,
        .y0 = place.y + 0.5 * (place.height - scale * high) + scale * bounds.x1,
        .y_scale = -scale,
    };
}

static void draw_antenna(ev_pen *pen, const ev_gallery_item *item, ev_rect place)
{
    ev_bounds bounds = ev_outline_bounds(item->antenna);
    double reach = 0.18 * (bounds.z1 - bounds.z0);
    bounds.z1 += reach;
    ev_rect inner = {place.x / shrink, place.y / shrink, place.width / shrink,
                     place.height / shrink};
    ev_plot_map map = fit_map(inner, bounds);
    cairo_save(pen->cairo);
    cairo_rectangle(pen->cairo, place.x - 10.0, place.y - 10.0, place.width + 20.0,
                    place.height + 20.0);
    cairo_clip(pen->cairo);
    cairo_scale(pen->cairo, shrink, shrink);
    ev_emphasis emphasis = {.front = 1.0, .rest = 1.0, .words = ""};
    for (int i = 0; i < EV_FATE_COUNT; ++i)
        emphasis.fate[i] = 0.8;
    ev_outline_axis(pen, &map, item->antenna, bounds.z0, bounds.z1);
    ev_outline_struts(pen, &map, item->antenna);
    ev_rays_draw(pen, &map, item->rays, item->ray_count, bounds.z1,
                 0.4 * (inner.width + inner.height), &emphasis);
    ev_outline_mirrors(pen, &map, item->antenna);
    ev_outline_feeds(pen, &map, item->antenna, -1);
    cairo_restore(pen->cairo);
}

static void draw_item(ev_pen *pen, const ev_gallery_item *item, int index, const char *pointed,
                      ev_rect cell)
{
    char box[32], name[48];
    snprintf(box, sizeof box, "scene.%d", index);
    ev_boxes_add(pen->boxes, EV_BOX_BUTTON, box, cell);
    ev_sheet sheet_pointed = {.dark = false};
    snprintf(sheet_pointed.pointed, sizeof sheet_pointed.pointed, "%s", pointed ? pointed : "");
    bool in_hand = ev_pointed(&sheet_pointed, box);
    draw_antenna(
        pen, item,
        (ev_rect){cell.x + 14.0, cell.y + 10.0, cell.width - 28.0, cell.height - words - 26.0});
    double baseline = cell.y + cell.height - words + 16.0;
    const char *title = item->design->title[0] ? item->design->title : "Untitled";
    double width = fmin(ev_text_width(title, EV_FONT_HEAD) + 1.0, cell.width);
    if (in_hand)
        ev_pen_fill(pen, (ev_rect){cell.x - 6.0, baseline - 14.5, width + 12.0, 20.0}, 3.0,
                    pen->theme->hand, 1.0);
    snprintf(name, sizeof name, "text.scene.%d.title", index);
    ev_text(pen, (ev_words){.name = name,
                            .string = title,
                            .font = EV_FONT_HEAD,
                            .colour = in_hand ? pen->theme->hand_text : pen->theme->ink,
                            .x = cell.x,
                            .width = width,
                            .baseline = baseline,
                            .least = 11.0});
    snprintf(name, sizeof name, "text.scene.%d.comment", index);
    ev_text(pen, (ev_words){.name = name,
                            .string = item->comment,
                            .font = EV_FONT_NOTE,
                            .colour = pen->theme->second,
                            .x = cell.x,
                            .width = cell.width,
                            .baseline = baseline + 18.0,
                            .lines = 3,
                            .line_height = 15.0});
}

void ev_draw_gallery(cairo_t *cairo, double width, double height, bool dark,
                     const ev_gallery_item *items, int count, const char *pointed, ev_boxes *boxes)
{
    ev_pen pen = ev_pen_begin(cairo, dark, boxes, "gallery", (ev_rect){0.0, 0.0, width, height});
    ev_pen_ground(&pen);
    ev_text(&pen, (ev_words){.name = "text.gallery.head",
                             .string = "Choose an antenna",
                             .font = EV_FONT_VERDICT,
                             .colour = pen.theme->ink,
                             .x = margin,
                             .width = width - 2.0 * margin,
                             .baseline = 50.0});
    ev_text(&pen, (ev_words){.name = "text.gallery.about",
                             .string = "or drop a scene file of your own on this window.",
                             .font = EV_FONT_ADVICE,
                             .colour = pen.theme->second,
                             .x = margin,
                             .width = width - 2.0 * margin,
                             .baseline = 74.0});
    gallery_grid grid = make_grid(width, height, count > 0 ? count : 1);
    for (int i = 0; i < count; ++i) {
        ev_rect cell = {margin + (i % grid.columns) * (grid.width + gap),
                        head + (i / grid.columns) * (grid.height + gap), grid.width, grid.height};
        draw_item(&pen, &items[i], i, pointed, cell);
    }
    ev_pen_end(&pen);
}
