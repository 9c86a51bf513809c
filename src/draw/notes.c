/* What the Stage says whatever it shows: the tabs; and over the 3D picture, what a ray carries and
 * how far the Front's bend is exaggerated. */
#include "draw/stage.h"

#include <stdio.h>

static double draw_tab(ev_pen *pen, const ev_sheet *sheet, const char *name, const char *label,
                       double x, bool chosen)
{
    char text[64];
    snprintf(text, sizeof text, "text.%s", name);
    double baseline = pen->region.y + 27.5;
    double width = ev_text_width(label, chosen ? EV_FONT_HEAD : (ev_font){false, 13.0, 400});
    ev_colour colour = chosen || ev_pointed(sheet, name) ? pen->theme->ink : pen->theme->second;
    ev_boxes_add(pen->boxes, EV_BOX_BUTTON, name,
                 (ev_rect){x - 8.0, pen->region.y + 8.0, width + 16.0, 30.0});
    ev_text(pen, (ev_words){.name = text,
                            .string = label,
                            .font = chosen ? EV_FONT_HEAD : (ev_font){false, 13.0, 400},
                            .colour = colour,
                            .x = x,
                            .width = width + 1.0,
                            .baseline = baseline,
                            .halo = true});
    if (chosen)
        ev_pen_fill(pen, (ev_rect){x, baseline + 6.0, width, 2.4}, 0.0, pen->theme->ink, 1.0);
    return x + width + 18.0;
}

void ev_stage_tabs(ev_pen *pen, const ev_sheet *sheet, const char *words)
{
    double x = pen->region.x + 24.0;
    if (sheet->paper)
        return;
    x = draw_tab(pen, sheet, "tab.section", "Section", x, sheet->stage == EV_STAGE_SECTION);
    x = draw_tab(pen, sheet, "tab.space", "Space", x, sheet->stage == EV_STAGE_SPACE);
    if (words[0])
        ev_text(pen, (ev_words){.name = "text.stage.shown",
                                .string = words,
                                .font = EV_FONT_NOTE,
                                .colour = pen->theme->second,
                                .x = x + 8.0,
                                .width = 320.0,
                                .baseline = pen->region.y + 27.5,
                                .halo = true});
}

void ev_draw_space_notes(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet,
                         ev_boxes *boxes)
{
    ev_pen pen = ev_pen_begin(cairo, sheet->dark, boxes, "stage", page->stage);
    ev_boxes_add(boxes, EV_BOX_PLOT, "plot.space", page->stage);
    ev_emphasis emphasis = ev_emphasis_of(sheet);
    ev_stage_tabs(&pen, sheet, emphasis.words);
    double x = page->stage.x + 24.0, bottom = page->stage.y + page->stage.height;
    char text[80];
    if (sheet->ray_count > 0 && sheet->rays[0].power > 0.0) {
        snprintf(text, sizeof text, "each ray carries %.3g %% of the power",
                 100.0 * sheet->rays[0].power);
        ev_text(&pen, (ev_words){.name = "text.stage.rays",
                                 .string = text,
                                 .font = EV_FONT_NOTE,
                                 .colour = pen.theme->second,
                                 .x = x,
                                 .width = 300.0,
                                 .baseline = page->stage.y + 49.5,
                                 .halo = true});
    }
    if (sheet->front_exaggeration > 0.0) {
        ev_text(&pen, (ev_words){.name = "text.stage.front",
                                 .string = "The front",
                                 .font = EV_FONT_HEAD,
                                 .colour = pen.theme->ink,
                                 .x = x,
                                 .width = 300.0,
                                 .baseline = bottom - 44.0,
                                 .halo = true});
        snprintf(text, sizeof text, "path error \u00d7%g; dashed: even", sheet->front_exaggeration);
        ev_text(&pen, (ev_words){.name = "text.stage.front.factor",
                                 .string = text,
                                 .font = EV_FONT_NOTE,
                                 .colour = pen.theme->second,
                                 .x = x,
                                 .width = 300.0,
                                 .baseline = bottom - 27.0,
                                 .halo = true});
    }
    ev_pen_end(&pen);
}
