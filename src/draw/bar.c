/* The top bar: what is open, at which frequency, and what can be done. */
#include "draw/pen.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

static const double margin = 24.0, gap = 22.0, baseline_drop = 4.5;

static void format_frequency(char *text, size_t size, double hertz)
{
    double value = hertz >= 1e9 ? hertz * 1e-9 : hertz * 1e-6;
    int decimals = 2;
    while (decimals < 4 &&
           fabs(value * pow(10, decimals) - round(value * pow(10, decimals))) > 1e-4)
        ++decimals;
    char digits[32];
    ev_format_number(digits, sizeof digits, value, decimals, false);
    snprintf(text, size, "%s %s", digits, hertz >= 1e9 ? "GHz" : "MHz");
}

static void draw_action(ev_pen *pen, const ev_sheet *sheet, const ev_action *action, double x,
                        double width)
{
    char name[64], text[80];
    snprintf(name, sizeof name, "action.%s", action->name);
    snprintf(text, sizeof text, "text.action.%s", action->name);
    double centre = pen->region.y + 0.5 * pen->region.height;
    ev_rect target = {x - 0.5 * gap, pen->region.y, width + gap, pen->region.height};
    bool pointed = action->enabled && ev_pointed(sheet, name);
    ev_colour colour = !action->enabled ? pen->theme->third
                       : pointed        ? pen->theme->ink
                                        : pen->theme->second;
    if (action->enabled)
        ev_boxes_add(pen->boxes, EV_BOX_BUTTON, name, target);
    if (pointed)
        ev_pen_fill(pen, (ev_rect){x - 7.0, centre - 12.0, width + 14.0, 24.0}, 3.0,
                    pen->theme->fill, 1.0);
    double baseline = centre + baseline_drop;
    ev_text(pen, (ev_words){.name = text,
                            .string = action->label,
                            .font = EV_FONT_BODY,
                            .colour = colour,
                            .x = x,
                            .width = width + 1.0,
                            .baseline = baseline});
    if (action->key < 0)
        return;
    double from = ev_text_caret(action->label, EV_FONT_BODY, action->key);
    double to = ev_text_caret(action->label, EV_FONT_BODY, action->key + 1);
    ev_pen_line(pen, x + from, baseline + 2.5, x + to, baseline + 2.5, colour, 1.0, 0.8);
}

/* Right to left from the margin; returns the left end of what was drawn. */
static double draw_actions(ev_pen *pen, const ev_sheet *sheet)
{
    double x = pen->region.x + pen->region.width - margin;
    for (int i = sheet->action_count - 1; i >= 0; --i) {
        double width = ev_text_width(sheet->actions[i].label, EV_FONT_BODY);
        x -= width;
        draw_action(pen, sheet, &sheet->actions[i], x, width);
        x -= gap;
    }
    return x;
}

static double draw_note(ev_pen *pen, const char *name, const char *string, double x, double end)
{
    double baseline = pen->region.y + 0.5 * pen->region.height + baseline_drop;
    double width = fmin(ev_text_width(string, EV_FONT_BODY) + 1.0, end - x);
    if (width < 20.0)
        return x;
    ev_text(pen, (ev_words){.name = name,
                            .string = string,
                            .font = EV_FONT_BODY,
                            .colour = pen->theme->second,
                            .x = x,
                            .width = width,
                            .baseline = baseline,
                            .least = EV_LEAST_TYPE});
    return x + width;
}

static double draw_unsaved(ev_pen *pen, double x, double end)
{
    double y = pen->region.y + 0.5 * pen->region.height;
    if (end - x < 75.0)
        return x;
    ev_pen_circle(pen, x + 3.0, y, 3.0, pen->theme->ink, 0.0, 1.0);
    return draw_note(pen, "text.bar.unsaved", "not saved", x + 12.0, end);
}

void ev_draw_bar(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, ev_boxes *boxes)
{
    ev_pen pen = ev_pen_begin(cairo, sheet->dark, boxes, "bar", page->bar);
    ev_pen_ground(&pen);
    double end = draw_actions(&pen, sheet) - 8.0;
    double baseline = page->bar.y + 0.5 * page->bar.height + baseline_drop;
    const char *title = sheet->design->title[0] ? sheet->design->title : "Untitled";
    double facts = sheet->unsaved ? 280.0 : 190.0;
    ev_rect drawn = ev_text(&pen, (ev_words){.name = "text.bar.title",
                                             .string = title,
                                             .font = EV_FONT_HEAD,
                                             .colour = pen.theme->ink,
                                             .x = margin,
                                             .width = fmax(end - margin - facts, 120.0),
                                             .baseline = baseline,
                                             .least = 11.5});
    char text[64], digits[32];
    format_frequency(text, sizeof text, sheet->antenna->frequency);
    double x = draw_note(&pen, "text.bar.frequency", text, drawn.x + drawn.width + 16.0, end);
    ev_format_number(digits, sizeof digits, 1e3 * sheet->antenna->wavelength, 2, false);
    snprintf(text, sizeof text, "\u03bb %s mm", digits);
    x = draw_note(&pen, "text.bar.wavelength", text, x + 14.0, end);
    if (sheet->unsaved)
        x = draw_unsaved(&pen, x + 17.0, end);
    if (sheet->notice[0])
        draw_note(&pen, "text.bar.notice", sheet->notice, x + 20.0, end);
    ev_pen_end(&pen);
}
