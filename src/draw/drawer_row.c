/* The items of the drawer: heads with their buttons, rows with value, unit and default mark,
 * choices by their words, rivals joined by a line. Called by the drawer for each item in sight. */
#include "draw/drawer_list.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

static const double indent = 14.0, reset_room = 22.0, unit_room = 36.0, baseline_drop = 16.5;

void ev_row_value_text(const ev_parameter *row, double value, char *text, size_t size)
{
    char digits[64], unit[24];
    if (row->kind == EV_VALUE_CHOICE) {
        snprintf(text, size, "%s", row->words[(int)value]);
        return;
    }
    if (row->kind == EV_VALUE_COUNT) {
        snprintf(text, size, "%.0f", value);
        return;
    }
    ev_quantity_format(row->quantity, value, digits, sizeof digits, unit, sizeof unit);
    char *end = digits + strlen(digits) - 1;
    while (strchr(digits, '.') && (*end == '0' || *end == '.'))
        *end-- = 0;
    snprintf(text, size, unit[0] ? "%s %s" : "%s%s", digits, unit);
}

bool ev_row_has_default(const ev_design *design, ev_parameter_ref ref)
{
    const ev_parameter *row = ref.parameter;
    return row->kind != EV_VALUE_TEXT && !row->required && !ev_parameter_is_derived(design, ref);
}

bool ev_row_is_off_default(const ev_design *design, ev_parameter_ref ref)
{
    double initial = ref.parameter->initial, value = ev_parameter_get(design, ref);
    return ev_row_has_default(design, ref) &&
           !(fabs(value - initial) <= 1e-9 * fmax(fabs(initial), 1e-9));
}

static bool is_pointed(const ev_drawer *drawer, const char *kind, const char *address)
{
    size_t length = strlen(kind);
    return strncmp(drawer->pointed, kind, length) == 0 &&
           strcmp(drawer->pointed + length, address) == 0;
}

/* A button of words; returns its left edge. `name` of the box. */
static double draw_words_button(ev_pen *pen, const ev_drawer *drawer, const char *name,
                                const char *words, double end, double baseline)
{
    double width = ev_text_width(words, EV_FONT_NOTE) + 1.0, x = end - width;
    bool pointed = strcmp(drawer->pointed, name) == 0;
    char text[48];
    snprintf(text, sizeof text, "text.%s", name);
    ev_boxes_add(pen->boxes, EV_BOX_BUTTON, name,
                 (ev_rect){x - 5.0, baseline - 16.0, width + 10.0, 23.0});
    ev_text(pen, (ev_words){.name = text,
                            .string = words,
                            .font = EV_FONT_NOTE,
                            .colour = pointed ? pen->theme->ink : pen->theme->second,
                            .x = x,
                            .width = width,
                            .baseline = baseline});
    ev_pen_line(pen, x, baseline + 3.0, end - 1.0, baseline + 3.0,
                pointed ? pen->theme->ink : pen->theme->third, 0.9, 1.0);
    return x;
}

static void draw_head(ev_pen *pen, const ev_drawer *drawer, const ev_drawer_frame *frame,
                      const ev_drawer_item *item, double top)
{
    double baseline = top + 31.0, end = frame->right;
    ev_pen_line(pen, frame->left, top + 11.5, frame->right, top + 11.5, pen->theme->rule, 1.0, 1.0);
    for (int i = 1; i >= 0; --i) {
        const char *name = item->button[i];
        char words[24];
        snprintf(words, sizeof words, "%.*s", (int)strcspn(name, "."), name);
        if (name[0])
            end = draw_words_button(pen, drawer, name, words, end, baseline) - 14.0;
    }
    char name[96];
    snprintf(name, sizeof name, "text.group.%s", item->title);
    ev_text(pen, (ev_words){.name = name,
                            .string = item->title,
                            .font = EV_FONT_HEAD,
                            .colour = pen->theme->ink,
                            .x = frame->left,
                            .width = end - frame->left,
                            .baseline = baseline,
                            .least = 11.0});
}

/* A line from rival to rival; the given one is a full dot, the others follow from it. */
static void draw_rivalry(ev_pen *pen, const ev_drawer_frame *frame, const ev_drawer_item *item,
                         double top)
{
    double x = frame->left + 4.0, y = top + 0.5 * item->height;
    if (item->joins_next)
        ev_pen_line(pen, x, y, x, y + item->height, pen->theme->third, 1.0, 0.8);
    ev_pen_circle(pen, x, y, 3.0, item->is_derived ? pen->theme->ground : pen->theme->ink, 0.0,
                  1.0);
    if (item->is_derived)
        ev_pen_circle(pen, x, y, 3.0, pen->theme->third, 1.1, 1.0);
}

/* A turn back, with an arrow head; a small ring where the value is the default. */
static void draw_reset(ev_pen *pen, const ev_sheet *sheet, const ev_drawer *drawer,
                       const ev_drawer_frame *frame, const ev_drawer_item *item,
                       const char *address, double top)
{
    double x = frame->right - 7.0, y = top + 0.5 * item->height, r = 4.4;
    if (!ev_row_has_default(sheet->design, item->ref))
        return;
    if (!ev_row_is_off_default(sheet->design, item->ref)) {
        ev_pen_circle(pen, x, y, 2.0, pen->theme->third, 0.9, 1.0);
        return;
    }
    char name[80];
    snprintf(name, sizeof name, "reset.%.70s", address);
    ev_colour colour = is_pointed(drawer, "reset.", address) ? pen->theme->ink : pen->theme->second;
    ev_boxes_add(pen->boxes, EV_BOX_BUTTON, name, (ev_rect){x - 12.0, top, 24.0, item->height});
    ev_pen_colour(pen, colour, 1.0);
    cairo_set_line_width(pen->cairo, 1.3);
    cairo_new_sub_path(pen->cairo);
    cairo_arc(pen->cairo, x, y, r, -0.6 * EV_PI, 0.85 * EV_PI);
    cairo_stroke(pen->cairo);
    ev_pen_wedge(pen, x - 5.4, y - r - 0.4, -1.0, 0.12, 6.0, 3.0, colour);
}

/* All legal words, the one that holds in semibold; returns the left edge. */
static double draw_choice(ev_pen *pen, const ev_sheet *sheet, const ev_drawer *drawer,
                          const ev_drawer_frame *frame, const ev_drawer_item *item,
                          const char *address, double top)
{
    const ev_parameter *row = item->ref.parameter;
    int chosen = (int)ev_parameter_get(sheet->design, item->ref), count = 0;
    double end = frame->right - reset_room;
    while (row->words[count])
        ++count;
    for (int i = count - 1; i >= 0; --i) {
        char name[96], text[104];
        snprintf(name, sizeof name, "choice.%.60s.%.12s", address, row->words[i]);
        snprintf(text, sizeof text, "text.%s", name);
        ev_font font = i == chosen ? EV_FONT_NOTE_STRONG : EV_FONT_NOTE;
        double width = ev_text_width(row->words[i], font) + 1.0;
        bool strong = i == chosen || strncmp(drawer->pointed, name, sizeof drawer->pointed) == 0;
        ev_boxes_add(pen->boxes, EV_BOX_BUTTON, name,
                     (ev_rect){end - width - 6.0, top, width + 12.0, item->height});
        ev_text(pen, (ev_words){.name = text,
                                .string = row->words[i],
                                .font = font,
                                .colour = strong ? pen->theme->ink : pen->theme->second,
                                .x = end - width,
                                .width = width,
                                .baseline = top + baseline_drop});
        if (i == chosen)
            ev_pen_line(pen, end - width, top + baseline_drop + 3.0, end - 1.0,
                        top + baseline_drop + 3.0, pen->theme->ink, 1.2, 1.0);
        end -= width + 12.0;
    }
    return end;
}

static void draw_number(ev_pen *pen, const ev_sheet *sheet, const ev_drawer_frame *frame,
                        const ev_drawer_item *item, const char *address, double from, double top)
{
    char digits[EV_TITLE_CAPACITY], unit[24], name[100];
    ev_parameter_format(sheet->design, item->ref, digits, sizeof digits, unit, sizeof unit);
    bool is_text = item->ref.parameter->kind == EV_VALUE_TEXT;
    double end = frame->right - reset_room - (is_text ? 0.0 : unit_room);
    bool off = ev_row_is_off_default(sheet->design, item->ref) || item->ref.parameter->required;
    snprintf(name, sizeof name, "text.row.%.64s.value", address);
    ev_text(pen, (ev_words){.name = name,
                            .string = digits,
                            .font = off && !item->is_derived ? EV_FONT_BODY_STRONG : EV_FONT_BODY,
                            .colour = item->is_derived ? pen->theme->second : pen->theme->ink,
                            .align = EV_ALIGN_RIGHT,
                            .x = from,
                            .width = end - from,
                            .baseline = top + baseline_drop,
                            .least = EV_LEAST_TYPE});
    snprintf(name, sizeof name, "text.row.%.64s.unit", address);
    ev_text(pen, (ev_words){.name = name,
                            .string = unit,
                            .font = EV_FONT_NOTE,
                            .colour = pen->theme->second,
                            .x = end + 5.0,
                            .width = unit_room - 5.0,
                            .baseline = top + baseline_drop,
                            .least = EV_LEAST_TYPE});
}

double ev_drawer_label_end(const ev_drawer_frame *frame, const ev_parameter *row)
{
    double most = 0.5 * (frame->right - frame->left);
    return frame->left + indent + fmin(ev_text_width(row->label, EV_FONT_BODY) + 1.0, most);
}

ev_typing ev_drawer_typing(const ev_drawer *drawer, const ev_drawer_frame *frame, double label_end,
                           double top)
{
    double x = label_end + 10.0, end = frame->right - reset_room + 4.0;
    return (ev_typing){.name = "text.drawer.edit",
                       .text = drawer->edit_text,
                       .font = EV_FONT_BODY,
                       .caret = drawer->edit_caret,
                       .anchor = drawer->edit_anchor,
                       .wrong = drawer->complaint[0],
                       .frame = {x, top + 1.0, end - x, 22.0},
                       .x = x + 6.0,
                       .baseline = top + baseline_drop};
}

static void draw_row(ev_pen *pen, const ev_sheet *sheet, const ev_drawer *drawer,
                     const ev_drawer_frame *frame, const ev_drawer_item *item, double top)
{
    char address[EV_ADDRESS_CAPACITY], name[100];
    const ev_parameter *row = item->ref.parameter;
    ev_parameter_address(sheet->design, item->ref, address, sizeof address);
    snprintf(name, sizeof name, "row.%.75s", address);
    ev_rect box = {frame->left - 10.0, top, frame->right - frame->left + 20.0, item->height};
    ev_boxes_add(pen->boxes, EV_BOX_ROW, name, box);
    if (is_pointed(drawer, "row.", address))
        ev_pen_fill(pen, box, 3.0, pen->theme->fill, 1.0);
    if (item->joins)
        draw_rivalry(pen, frame, item, top);
    double label_end = ev_drawer_label_end(frame, row);
    snprintf(name, sizeof name, "text.row.%.64s.label", address);
    ev_text(pen, (ev_words){.name = name,
                            .string = row->label,
                            .font = EV_FONT_BODY,
                            .colour = item->is_derived ? pen->theme->second : pen->theme->ink,
                            .x = frame->left + indent,
                            .width = label_end - frame->left - indent,
                            .baseline = top + baseline_drop,
                            .least = EV_LEAST_TYPE});
    ev_typing typing = ev_drawer_typing(drawer, frame, label_end, top);
    if (strcmp(drawer->editing, address) == 0)
        ev_typing_draw(pen, &typing);
    else if (row->kind == EV_VALUE_CHOICE)
        draw_choice(pen, sheet, drawer, frame, item, address, top);
    else
        draw_number(pen, sheet, frame, item, address, label_end + 6.0, top);
    draw_reset(pen, sheet, drawer, frame, item, address, top);
}

void ev_drawer_item_draw(ev_pen *pen, const ev_sheet *sheet, const ev_drawer *drawer,
                         const ev_drawer_frame *frame, const ev_drawer_item *item, double top)
{
    if (item->kind == EV_ITEM_HEAD)
        draw_head(pen, drawer, frame, item, top);
    else if (item->kind == EV_ITEM_ROW)
        draw_row(pen, sheet, drawer, frame, item, top);
    else
        draw_words_button(pen, drawer, item->button[0], item->title,
                          frame->left + indent + ev_text_width(item->title, EV_FONT_NOTE) + 1.0,
                          top + 20.0);
}
