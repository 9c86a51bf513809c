/* The common part of the plates: where one lies, which are shown, their heading and tabs. Called by
 * the Aperture, Beam and Cut plates and by the page; knows nothing of what they show. */
#include "draw/plate.h"

#include <stdio.h>

enum { PLATE_COUNT = 3 };

static const char *const words[PLATE_COUNT] = {"Aperture", "Beam", "Cut"};
static const char *const names[PLATE_COUNT] = {"aperture", "beam", "cut"};

static const ev_font plain_head = {false, 13.0, 400};
static const double margin_left = 22.0, margin_right = 24.0;

ev_plate ev_page_plate(const ev_page *page, const ev_sheet *sheet, int index)
{
    if (page->plate_count < 2)
        return sheet->plate;
    return index == 0                     ? EV_PLATE_APERTURE
           : sheet->plate == EV_PLATE_CUT ? EV_PLATE_CUT
                                          : EV_PLATE_BEAM;
}

ev_rect ev_plate_place(const ev_page *page, ev_plate plate)
{
    return page->plates[page->plate_count > 1 && plate != EV_PLATE_APERTURE ? 1 : 0];
}

double ev_plate_head(const ev_page *page)
{
    return page->plate_count > 1 ? 36.0 : 60.0;
}

static ev_rect draw_head(ev_pen *pen, const char *name, const char *word, double x, bool chosen,
                         ev_colour colour)
{
    ev_font font = chosen ? EV_FONT_HEAD : plain_head;
    return ev_text(pen, (ev_words){.name = name,
                                   .string = word,
                                   .font = font,
                                   .colour = colour,
                                   .x = x,
                                   .width = ev_text_width(word, font) + 1.0,
                                   .baseline = pen->region.y + 22.5});
}

/* From the first plate that can stand in this place; returns where the last one ends. */
static double draw_tabs(ev_pen *pen, const ev_sheet *sheet, ev_plate plate, int first)
{
    double x = pen->region.x + margin_left;
    for (int i = first; i < PLATE_COUNT; ++i) {
        char name[32], text[48];
        snprintf(name, sizeof name, "tab.%s", names[i]);
        snprintf(text, sizeof text, "text.%s", name);
        bool chosen = i == (int)plate;
        ev_colour colour = chosen || ev_pointed(sheet, name) ? pen->theme->ink : pen->theme->second;
        ev_rect drawn = draw_head(pen, text, words[i], x, chosen, colour);
        ev_boxes_add(pen->boxes, EV_BOX_BUTTON, name,
                     (ev_rect){x - 8.0, pen->region.y + 4.0, drawn.width + 16.0, 28.0});
        if (chosen)
            ev_pen_fill(pen, (ev_rect){x, pen->region.y + 28.0, drawn.width, 2.4}, 0.0,
                        pen->theme->ink, 1.0);
        x += drawn.width + 18.0;
    }
    return x - 8.0;
}

static void draw_about(ev_pen *pen, ev_plate plate, const char *about, double x, double baseline)
{
    char name[48];
    snprintf(name, sizeof name, "text.%s.about", names[plate]);
    ev_text(pen, (ev_words){.name = name,
                            .string = about,
                            .font = EV_FONT_NOTE,
                            .colour = pen->theme->second,
                            .x = x,
                            .width = pen->region.x + pen->region.width - margin_right - x,
                            .baseline = baseline,
                            .least = EV_LEAST_TYPE});
}

ev_pen ev_plate_begin(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, ev_plate plate,
                      const char *about, bool stale, ev_boxes *boxes)
{
    ev_rect place = ev_plate_place(page, plate);
    ev_pen pen = ev_pen_begin(cairo, sheet->dark, boxes, names[plate], place);
    ev_pen_ground(&pen);
    bool alone = page->plate_count < 2, choice = alone || plate != EV_PLATE_APERTURE;
    double x;
    if (choice && !sheet->paper) {
        x = draw_tabs(&pen, sheet, plate, alone ? EV_PLATE_APERTURE : EV_PLATE_BEAM);
    } else {
        char name[48];
        snprintf(name, sizeof name, "text.%s.head", names[plate]);
        ev_rect head =
            draw_head(&pen, name, words[plate], place.x + margin_left, true, pen.theme->ink);
        x = head.x + head.width + 8.0;
    }
    if (alone)
        draw_about(&pen, plate, about, place.x + margin_left, place.y + 48.0);
    else
        draw_about(&pen, plate, about, x, place.y + 22.5);
    if (stale) {
        ev_pen_fill(&pen, (ev_rect){place.x, place.y, place.width, 2.0}, 0.0, pen.theme->hand, 1.0);
        pen.strength = EV_STALE;
    }
    return pen;
}

static void draw_axis_text(ev_pen *pen, const char *name, const char *string, double x,
                           double width, double baseline, ev_align align)
{
    char box[80];
    snprintf(box, sizeof box, "text.%s", name);
    ev_text(pen, (ev_words){.name = box,
                            .string = string,
                            .font = EV_FONT_NOTE,
                            .colour = pen->theme->second,
                            .align = align,
                            .x = x,
                            .width = width,
                            .baseline = baseline,
                            .least = EV_LEAST_TYPE});
}

void ev_axis_left(ev_pen *pen, const char *name, const char *string, double end, double y)
{
    double width = ev_text_width(string, EV_FONT_NOTE) + 1.0;
    draw_axis_text(pen, name, string, end - width, width, y + 4.0, EV_ALIGN_RIGHT);
}

void ev_axis_below(ev_pen *pen, const char *name, const char *string, double x, double baseline)
{
    double width = ev_text_width(string, EV_FONT_NOTE) + 1.0;
    draw_axis_text(pen, name, string, x - 0.5 * width, width, baseline, EV_ALIGN_CENTRE);
}

void ev_plate_computing(ev_pen *pen, const char *name, ev_rect plot)
{
    char box[64];
    snprintf(box, sizeof box, "text.%s.computing", name);
    double width = ev_text_width("computing", EV_FONT_NOTE) + 1.0;
    ev_text(pen, (ev_words){.name = box,
                            .string = "computing",
                            .font = EV_FONT_NOTE,
                            .colour = pen->theme->third,
                            .x = plot.x + 0.5 * (plot.width - width),
                            .width = width,
                            .baseline = plot.y + 0.5 * plot.height + 4.0,
                            .halo = true});
}

void ev_draw_plate(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, int index,
                   ev_boxes *boxes)
{
    switch (ev_page_plate(page, sheet, index)) {
    case EV_PLATE_APERTURE:
        ev_draw_aperture(cairo, page, sheet, boxes);
        break;
    case EV_PLATE_BEAM:
        ev_draw_beam(cairo, page, sheet, boxes);
        break;
    case EV_PLATE_CUT:
        ev_draw_cut(cairo, page, sheet, boxes);
        break;
    }
}
