/* The Strip: the parameters in hand, each a value over a tape that slides under a fixed mark. Also
 * tells the window which byte of an edited text lies under the pointer, and what a drag is worth.
 */
#include "draw/typing.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

static const double margin = 24.0, tick_pitch = 6.0, tape_width = 96.0, settings_room = 96.0;

/* "All settings" takes the end of the Strip, and on a narrow one the place of the last field. */
static int shown_fields(const ev_page *page, const ev_sheet *sheet)
{
    bool is_narrow = sheet->settings && page->strip.width < 800.0;
    int most = is_narrow ? EV_FIELD_CAPACITY - 1 : EV_FIELD_CAPACITY;
    return sheet->field_count < most ? sheet->field_count : most;
}

static ev_rect field_place(const ev_page *page, const ev_sheet *sheet, int field)
{
    bool is_narrow = sheet->settings && page->strip.width < 800.0;
    double room = page->strip.width - 2.0 * margin - (sheet->settings ? settings_room : 0.0);
    double pitch = room / (is_narrow ? EV_FIELD_CAPACITY - 1 : EV_FIELD_CAPACITY);
    return (ev_rect){page->strip.x + margin + pitch * field, page->strip.y, pitch - 12.0,
                     page->strip.height};
}

/* Baseline of the value; the rest hangs on it. */
static double value_baseline(const ev_page *page)
{
    return page->strip.y + 0.5 * page->strip.height + 5.0;
}

double ev_field_drag(const ev_field *field, double dx)
{
    return -dx / tick_pitch * field->step;
}

static void draw_tick(ev_pen *pen, double x, double centre, double top, bool major)
{
    double away = fabs(x - centre) / (0.5 * tape_width);
    if (away > 1.0)
        return;
    double opacity = 0.9 * (1.0 - away * away * away);
    double height = major ? 8.0 : 4.0;
    ev_pen_line(pen, x, top, x, top + height, pen->theme->second, major ? 1.2 : 1.0, opacity);
}

static void draw_tape(ev_pen *pen, const ev_field *field, double x, double top)
{
    double centre = x + 0.5 * tape_width;
    double step = field->step > 0.0 && isfinite(field->step) ? field->step : 1.0;
    double value = field->value / step;
    /* Beyond 2^40 steps a tick is finer than the value's own rounding shows. */
    if (!isfinite(value) || fabs(value) > 1e12)
        value = 0.0;
    double first = ceil(value - 0.5 * tape_width / tick_pitch);
    for (int i = 0; i <= (int)(tape_width / tick_pitch); ++i) {
        double tick = first + i;
        draw_tick(pen, centre + (tick - value) * tick_pitch, centre, top, fmod(tick, 5.0) == 0.0);
    }
    ev_pen_wedge(pen, centre, top + 0.5, 0.0, 1.0, 5.5, 4.5, pen->theme->ink);
    if (!isfinite(field->nominal))
        return;
    double reach = 0.5 * tape_width - 4.0;
    double away = fmin(fmax((field->nominal / step - value) * tick_pitch, -reach), reach);
    ev_pen_wedge(pen, centre + away, top + 10.5, 0.0, -1.0, 5.0, 4.0, pen->theme->second);
}

static ev_typing make_typing(const ev_field *field, const char *name, ev_rect place,
                             double baseline)
{
    return (ev_typing){.name = name,
                       .text = field->edit_text,
                       .font = EV_FONT_FIELD,
                       .caret = field->edit_caret,
                       .anchor = field->edit_anchor,
                       .wrong = field->complaint[0],
                       .frame = {place.x - 6.0, baseline - 20.0, place.width + 6.0, 27.0},
                       .x = place.x,
                       .baseline = baseline};
}

int ev_field_byte_at(const ev_page *page, const ev_sheet *sheet, int field, double x)
{
    ev_typing typing = make_typing(&sheet->fields[field], "", field_place(page, sheet, field), 0.0);
    return ev_typing_index(&typing, x);
}

static void draw_value(ev_pen *pen, const ev_sheet *sheet, const ev_field *field, const char *box,
                       ev_rect place, double baseline)
{
    char name[100];
    bool pointed = ev_pointed(sheet, box);
    ev_rect line = {place.x - 6.0, baseline - 20.0, fmin(104.0, place.width + 6.0), 27.0};
    if (field->grabbed || pointed)
        ev_pen_fill(pen, line, 3.0, field->grabbed ? pen->theme->hand : pen->theme->fill, 1.0);
    ev_colour ink = field->grabbed ? pen->theme->hand_text : pen->theme->ink;
    double unit_width = ev_text_width(field->unit, EV_FONT_BODY);
    snprintf(name, sizeof name, "text.%.70s.value", box);
    ev_rect drawn = ev_text(pen, (ev_words){.name = name,
                                            .string = field->digits,
                                            .font = EV_FONT_FIELD,
                                            .colour = ink,
                                            .x = place.x,
                                            .width = place.width - unit_width - 6.0,
                                            .baseline = baseline,
                                            .least = 12.5});
    snprintf(name, sizeof name, "text.%.70s.unit", box);
    ev_text(pen, (ev_words){.name = name,
                            .string = field->unit,
                            .font = EV_FONT_BODY,
                            .colour = field->grabbed ? ink : pen->theme->second,
                            .x = drawn.x + drawn.width + 4.0,
                            .width = unit_width + 1.0,
                            .baseline = baseline});
}

/* Over the tapes beside it: a sentence is longer than a field is wide. */
static void draw_complaint(ev_pen *pen, const ev_field *field, ev_rect place, double baseline)
{
    double end = pen->region.x + pen->region.width - margin;
    double width = fmin(ev_text_width(field->complaint, EV_FONT_NOTE) + 2.0, end - margin);
    double x = fmin(place.x, end - width);
    ev_pen_fill(pen, (ev_rect){x - 8.0, baseline - 16.5, width + 16.0, 35.0}, 0.0,
                pen->theme->ground, 1.0);
    ev_text(pen, (ev_words){.name = "text.complaint",
                            .string = field->complaint,
                            .font = EV_FONT_NOTE,
                            .colour = pen->theme->past_main,
                            .x = x,
                            .width = width,
                            .baseline = baseline,
                            .least = EV_LEAST_TYPE});
}

static void draw_field(ev_pen *pen, const ev_page *page, const ev_sheet *sheet, int index)
{
    const ev_field *field = &sheet->fields[index];
    ev_rect place = field_place(page, sheet, index);
    double baseline = value_baseline(page);
    char box[80], name[100];
    snprintf(box, sizeof box, "field.%.70s", field->address);
    ev_boxes_add(pen->boxes, EV_BOX_FIELD, box,
                 (ev_rect){place.x - 6.0, place.y, place.width + 6.0, place.height});
    snprintf(name, sizeof name, "text.%.70s.label", box);
    ev_text(pen, (ev_words){.name = name,
                            .string = field->label,
                            .font = EV_FONT_NOTE,
                            .colour = pen->theme->second,
                            .x = place.x,
                            .width = place.width,
                            .baseline = baseline - 28.0,
                            .least = EV_LEAST_TYPE});
    snprintf(name, sizeof name, "text.%.70s.edit", box);
    ev_typing typing = make_typing(field, name, place, baseline);
    if (field->editing)
        ev_typing_draw(pen, &typing);
    else
        draw_value(pen, sheet, field, box, place, baseline);
    if (!field->complaint[0])
        draw_tape(pen, field, place.x, baseline + 10.0);
}

static void draw_settings(ev_pen *pen, const ev_page *page, const ev_sheet *sheet)
{
    const char *label = "All settings";
    double width = ev_text_width(label, EV_FONT_BODY) + 1.0;
    double x = page->strip.x + page->strip.width - margin - width;
    double baseline = value_baseline(page);
    ev_rect box = {x - 10.0, baseline - 22.0, width + 20.0, 32.0};
    bool pointed = ev_pointed(sheet, "button.settings");
    ev_colour colour = pointed ? pen->theme->ink : pen->theme->second;
    ev_boxes_add(pen->boxes, EV_BOX_BUTTON, "button.settings", box);
    if (pointed)
        ev_pen_fill(pen, (ev_rect){x - 7.0, baseline - 16.5, width + 14.0, 24.0}, 3.0,
                    pen->theme->fill, 1.0);
    ev_text(pen, (ev_words){.name = "text.button.settings",
                            .string = label,
                            .font = EV_FONT_BODY,
                            .colour = colour,
                            .x = x,
                            .width = width,
                            .baseline = baseline});
    ev_pen_line(pen, x, baseline + 2.5, x + ev_text_caret(label, EV_FONT_BODY, 1), baseline + 2.5,
                colour, 1.0, 0.8);
}

void ev_draw_strip(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, ev_boxes *boxes)
{
    ev_pen pen = ev_pen_begin(cairo, sheet->dark, boxes, "strip", page->strip);
    ev_pen_ground(&pen);
    for (int i = 0; i < shown_fields(page, sheet); ++i)
        draw_field(&pen, page, sheet, i);
    if (sheet->settings && !sheet->paper)
        draw_settings(&pen, page, sheet);
    for (int i = 0; i < shown_fields(page, sheet); ++i)
        if (sheet->fields[i].complaint[0])
            draw_complaint(&pen, &sheet->fields[i], field_place(page, sheet, i),
                           value_baseline(page) + 21.0);
    ev_pen_end(&pen);
}
