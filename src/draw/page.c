/* Where the regions of a page lie, and the page as a whole. Called by the window, by picture and by
 * tests. Sizes are those of the page at 1280 x 800 and at 1100 x 700, in between them a mixture;
 * what is beyond goes to the Stage and the plates. */
#include "draw/pen.h"

#include <math.h>

/* Two plates need this much, px; the upper one's share leaves the beam a little more. */
static const double two_plates = 360.0, upper_share = 191.0 / 387.0;

static double mix(double compact, double full, double share)
{
    return compact + share * (full - compact);
}

ev_page ev_page_layout(double width, double height)
{
    double share = fmin((width - 1100.0) / 180.0, (height - 700.0) / 100.0);
    share = fmin(fmax(share, 0.0), 1.0);
    double bar = 44.0, verdict = mix(80.0, 76.0, share), strip = mix(80.0, 88.0, share),
           watts = 50.0, ledger = mix(339.0, 369.0, share);
    double column = mix(344.0, 392.0, share) + fmax(0.0, 0.25 * (width - 1280.0));
    column = fmin(column, fmax(392.0, 0.5 * height));
    double left = width - column;
    ev_page page = {.width = width, .height = height, .plate_count = 1};
    page.bar = (ev_rect){0.0, 0.0, width, bar};
    page.verdict = (ev_rect){0.0, bar, left, verdict};
    page.strip = (ev_rect){0.0, height - strip, left, strip};
    page.watts = (ev_rect){0.0, height - strip - watts, left, watts};
    page.stage = (ev_rect){0.0, bar + verdict, left, page.watts.y - bar - verdict};
    page.ledger = (ev_rect){left, bar, column, ledger};
    page.plates[0] = (ev_rect){left, bar + ledger, column, height - bar - ledger};
    if (page.plates[0].height >= two_plates) {
        ev_rect *upper = &page.plates[0], *lower = &page.plates[1];
        *lower = *upper;
        upper->height = round(upper_share * lower->height);
        lower->y += upper->height;
        lower->height -= upper->height;
        page.plate_count = 2;
    }
    double radius = mix(72.0, 88.0, share);
    radius *= fmax(1.0, fmin(left / 888.0, page.stage.height / 542.0));
    radius = fmin(radius, 170.0);
    page.detail = (ev_rect){left - 24.0 - 2.0 * radius,
                            page.stage.y + page.stage.height - 56.0 - 2.0 * radius, 2.0 * radius,
                            2.0 * radius};
    return page;
}

void ev_draw_rules(cairo_t *cairo, const ev_page *page, bool dark)
{
    const ev_theme *theme = ev_theme_get(dark);
    double left = page->ledger.x, right = page->width;
    const double lines[][4] = {
        {0.0, page->bar.height, right, page->bar.height},
        {0.0, page->stage.y, left, page->stage.y},
        {0.0, page->strip.y, left, page->strip.y},
        {left, page->ledger.y, left, page->height},
        {left, page->plates[0].y, right, page->plates[0].y},
        {left, page->plates[page->plate_count - 1].y, right, page->plates[page->plate_count - 1].y},
    };
    cairo_set_source_rgb(cairo, theme->rule.r, theme->rule.g, theme->rule.b);
    cairo_set_line_width(cairo, 1.0);
    for (size_t i = 0; i < sizeof lines / sizeof lines[0]; ++i) {
        cairo_move_to(cairo, lines[i][0] + 0.5, lines[i][1] + 0.5);
        cairo_line_to(cairo, lines[i][2] + 0.5, lines[i][3] + 0.5);
    }
    cairo_stroke(cairo);
}

/* Where the part of the Detail stands on the section. */
static void find_part(const ev_sheet *sheet, const ev_plot_map *map, double *x, double *y)
{
    const ev_antenna *antenna = sheet->antenna;
    ev_vec3 place = sheet->part == EV_PART_SUB
                        ? ev_sub_place(&antenna->sub, antenna->layout.sub_vertex)
                        : antenna->feeds[sheet->feed].position;
    ev_plot_to_page(map, place.z, place.x, x, y);
}

static void draw_stage(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, ev_boxes *boxes)
{
    if (sheet->stage == EV_STAGE_SPACE) {
        ev_draw_space_notes(cairo, page, sheet, boxes);
        return;
    }
    ev_plot_map map;
    ev_draw_section(cairo, page, sheet, boxes, &map);
    if (!sheet->detail)
        return;
    ev_plot_map detail_map;
    double x, y;
    find_part(sheet, &map, &x, &y);
    ev_draw_detail(cairo, page, sheet, x, y, boxes, &detail_map);
}

void ev_draw_page(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, ev_boxes *boxes)
{
    draw_stage(cairo, page, sheet, boxes);
    ev_draw_bar(cairo, page, sheet, boxes);
    ev_draw_verdict(cairo, page, sheet, boxes);
    ev_draw_watts(cairo, page, sheet, boxes);
    ev_draw_strip(cairo, page, sheet, boxes);
    ev_draw_ledger(cairo, page, sheet, boxes);
    for (int i = 0; i < page->plate_count; ++i)
        ev_draw_plate(cairo, page, sheet, i, boxes);
    ev_draw_rules(cairo, page, sheet->dark);
}
