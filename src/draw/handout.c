/* A page to hand out: nothing to press, and at its foot the cautions that apply, short, with
 * deference to local codes and licensed people. Called for pictures. */
#include "draw/pen.h"

#include <math.h>
#include <stdio.h>

static const double foot = 26.0, margin = 24.0;

/* About 1 kW of sunlight a square metre; two figures of it. */
static int write_sun(char *text, size_t size, const ev_antenna *antenna)
{
    double watts = 1e3 * EV_PI * antenna->radius * antenna->radius;
    double decade = pow(10.0, floor(log10(watts)) - 1.0), rounded = decade * round(watts / decade);
    bool kilo = rounded >= 999.5;
    return snprintf(text, size,
                    "Facing the Sun, a bright dish of this size gathers about %g %s at "
                    "its focus.",
                    kilo ? 1e-3 * rounded : rounded, kilo ? "kW" : "W");
}

static void write_cautions(const ev_sheet *sheet, char *text, size_t size)
{
    int at = write_sun(text, size, sheet->antenna);
    if (sheet->antenna->site.present)
        snprintf(
            text + at, size - (size_t)at,
            " Work at height, wind load and lightning bonding are for local codes and licensed "
            "people to decide.");
}

static void draw_foot(cairo_t *cairo, double width, double height, const ev_sheet *sheet,
                      ev_boxes *boxes)
{
    ev_rect place = {0.0, height - foot, width, foot};
    ev_pen pen = ev_pen_begin(cairo, sheet->dark, boxes, "foot", place);
    ev_pen_ground(&pen);
    ev_pen_line(&pen, 0.0, place.y + 0.5, width, place.y + 0.5, pen.theme->rule, 1.0, 1.0);
    double end = width - margin, baseline = place.y + 17.0;
    if (sheet->date[0]) {
        double room = ev_text_width(sheet->date, EV_FONT_SMALL) + 1.0;
        ev_text(&pen, (ev_words){.name = "text.foot.date",
                                 .string = sheet->date,
                                 .font = EV_FONT_SMALL,
                                 .colour = pen.theme->second,
                                 .x = end - room,
                                 .width = room,
                                 .baseline = baseline});
        end -= room + 24.0;
    }
    char text[256];
    write_cautions(sheet, text, sizeof text);
    ev_text(&pen, (ev_words){.name = "text.foot.caution",
                             .string = text,
                             .font = EV_FONT_SMALL,
                             .colour = pen.theme->second,
                             .x = margin,
                             .width = end - margin,
                             .baseline = baseline});
    ev_pen_end(&pen);
}

void ev_draw_handout(cairo_t *cairo, double width, double height, const ev_sheet *sheet,
                     ev_boxes *boxes)
{
    ev_sheet section = *sheet;
    section.stage = EV_STAGE_SECTION;
    section.paper = true;
    section.action_count = 0;
    section.pointed[0] = 0;
    ev_page page = ev_page_layout(width, height - foot);
    ev_draw_page(cairo, &page, &section, boxes);
    draw_foot(cairo, width, height, sheet, boxes);
}
