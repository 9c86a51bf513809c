/* The drawer of all settings: search at the top, the list, and at the foot what the row in hand
 * means. Called by the window, over the column at the right. */
#include "draw/drawer_list.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

static const double head_room = 84.0, foot_room = 100.0;

ev_drawer_frame ev_drawer_frame_make(const ev_page *page, const ev_drawer_list *list, double scroll)
{
    ev_drawer_frame frame = {.panel = page->ledger};
    frame.panel.height = page->height - frame.panel.y;
    ev_rect p = frame.panel;
    frame.left = p.x + 22.0;
    frame.right = p.x + p.width - 24.0;
    frame.search = (ev_rect){frame.left - 8.0, p.y + 44.0, frame.right - frame.left + 16.0, 28.0};
    frame.list = (ev_rect){p.x, p.y + head_room, p.width, p.height - head_room - foot_room};
    frame.foot = (ev_rect){p.x, p.y + p.height - foot_room, p.width, foot_room};
    double limit = fmax(0.0, list->height + 12.0 - frame.list.height);
    frame.scroll = isfinite(scroll) ? fmin(fmax(scroll, 0.0), limit) : 0.0;
    return frame;
}

static ev_typing search_typing(const ev_drawer *drawer, const ev_drawer_frame *frame)
{
    return (ev_typing){.name = "text.drawer.search",
                       .text = drawer->search,
                       .font = EV_FONT_BODY,
                       .caret = drawer->search_caret,
                       .anchor = drawer->search_anchor,
                       .idle = !drawer->searching || drawer->editing[0],
                       .hint = "Search settings by name or meaning",
                       .frame = frame->search,
                       .x = frame->search.x + 9.0,
                       .baseline = frame->search.y + 18.5};
}

/* The item a row's address stands for; NULL when it is not listed. */
static const ev_drawer_item *find_item(const ev_design *design, const ev_drawer_list *list,
                                       const char *address)
{
    for (int i = 0; i < list->count; ++i) {
        const ev_drawer_item *item = &list->items[i];
        char own[EV_ADDRESS_CAPACITY];
        if (item->kind != EV_ITEM_ROW)
            continue;
        ev_parameter_address(design, item->ref, own, sizeof own);
        if (strcmp(own, address) == 0)
            return item;
    }
    return NULL;
}

double ev_drawer_scroll_limit(const ev_page *page, const ev_sheet *sheet, const ev_drawer *drawer)
{
    ev_drawer_list list;
    ev_drawer_list_make(sheet->design, drawer->search, &list);
    return ev_drawer_frame_make(page, &list, 1e9).scroll;
}

double ev_drawer_scroll_to(const ev_page *page, const ev_sheet *sheet, const ev_drawer *drawer,
                           const char *address)
{
    ev_drawer_list list;
    ev_drawer_list_make(sheet->design, drawer->search, &list);
    ev_drawer_frame frame = ev_drawer_frame_make(page, &list, drawer->scroll);
    const ev_drawer_item *item = find_item(sheet->design, &list, address);
    if (!item)
        return frame.scroll;
    double lowest = item->y + item->height - frame.list.height;
    double scroll = fmin(fmax(frame.scroll, lowest), item->y);
    return ev_drawer_frame_make(page, &list, scroll).scroll;
}

int ev_drawer_byte_at(const ev_page *page, const ev_sheet *sheet, const ev_drawer *drawer, double x)
{
    ev_drawer_list list;
    ev_drawer_list_make(sheet->design, drawer->search, &list);
    ev_drawer_frame frame = ev_drawer_frame_make(page, &list, drawer->scroll);
    const ev_drawer_item *item = find_item(sheet->design, &list, drawer->editing);
    ev_typing typing = search_typing(drawer, &frame);
    if (item)
        typing =
            ev_drawer_typing(drawer, &frame, ev_drawer_label_end(&frame, item->ref.parameter), 0.0);
    return ev_typing_index(&typing, x);
}

static void draw_top(ev_pen *pen, const ev_drawer *drawer, const ev_drawer_frame *frame)
{
    double baseline = frame->panel.y + 27.0;
    const char *close = "Esc: close";
    double width = ev_text_width(close, EV_FONT_NOTE) + 1.0;
    ev_text(pen, (ev_words){.name = "text.drawer.head",
                            .string = "All settings",
                            .font = EV_FONT_HEAD,
                            .colour = pen->theme->ink,
                            .x = frame->left,
                            .width = 160.0,
                            .baseline = baseline});
    ev_boxes_add(pen->boxes, EV_BOX_BUTTON, "close.drawer",
                 (ev_rect){frame->right - width - 8.0, baseline - 18.0, width + 16.0, 28.0});
    bool pointed = strcmp(drawer->pointed, "close.drawer") == 0;
    ev_text(pen, (ev_words){.name = "text.close.drawer",
                            .string = close,
                            .font = EV_FONT_NOTE,
                            .colour = pointed ? pen->theme->ink : pen->theme->second,
                            .x = frame->right - width,
                            .width = width,
                            .baseline = baseline});
    ev_boxes_add(pen->boxes, EV_BOX_FIELD, "search.drawer", frame->search);
    ev_typing typing = search_typing(drawer, frame);
    ev_typing_draw(pen, &typing);
}

/* Boxes of what is only partly in sight are cut to the part that is; its text has none. */
static void draw_item(ev_pen *pen, const ev_sheet *sheet, const ev_drawer *drawer,
                      const ev_drawer_frame *frame, const ev_drawer_item *item)
{
    ev_rect list = frame->list;
    double top = list.y + item->y - frame->scroll, bottom = top + item->height;
    if (bottom <= list.y || top >= list.y + list.height)
        return;
    int before = pen->boxes ? pen->boxes->count : 0, kept = before;
    ev_drawer_item_draw(pen, sheet, drawer, frame, item, top);
    if (!pen->boxes || (top >= list.y && bottom <= list.y + list.height))
        return;
    for (int i = before; i < pen->boxes->count; ++i) {
        ev_box box = pen->boxes->items[i];
        double y0 = fmax(box.rect.y, list.y);
        double y1 = fmin(box.rect.y + box.rect.height, list.y + list.height);
        if (box.kind == EV_BOX_TEXT || y1 <= y0)
            continue;
        box.rect.y = box.within.y = y0;
        box.rect.height = box.within.height = y1 - y0;
        pen->boxes->items[kept++] = box;
    }
    pen->boxes->count = kept;
}

static void draw_list(cairo_t *cairo, const ev_sheet *sheet, const ev_drawer *drawer,
                      const ev_drawer_frame *frame, const ev_drawer_list *list, ev_boxes *boxes)
{
    ev_pen pen = ev_pen_begin(cairo, sheet->dark, boxes, "drawer.list", frame->list);
    for (int i = 0; i < list->count; ++i)
        draw_item(&pen, sheet, drawer, frame, &list->items[i]);
    if (list->count == 0)
        ev_text(&pen, (ev_words){.name = "text.drawer.nothing",
                                 .string = "No setting has that in its name or meaning.",
                                 .font = EV_FONT_NOTE,
                                 .colour = pen.theme->second,
                                 .x = frame->left,
                                 .width = frame->right - frame->left,
                                 .baseline = frame->list.y + 30.0});
    double whole = list->height + 12.0, seen = frame->list.height;
    if (whole > seen) {
        double length = fmax(seen * seen / whole, 24.0);
        double top = frame->list.y + frame->scroll / (whole - seen) * (seen - length);
        ev_rect bar = {frame->list.x + frame->list.width - 7.0, top, 3.0, length};
        ev_pen_fill(&pen, bar, 1.5, pen.theme->third, 0.7);
    }
    ev_pen_end(&pen);
}

/* The row typed into, else the one that is pointed at. */
static const ev_drawer_item *row_in_hand(const ev_sheet *sheet, const ev_drawer *drawer,
                                         const ev_drawer_list *list)
{
    static const char *const kinds[] = {"row.", "reset.", "choice."};
    if (drawer->editing[0])
        return find_item(sheet->design, list, drawer->editing);
    for (int i = 0; i < 3; ++i) {
        size_t length = strlen(kinds[i]);
        if (strncmp(drawer->pointed, kinds[i], length) != 0)
            continue;
        char address[EV_ADDRESS_CAPACITY];
        snprintf(address, sizeof address, "%s", drawer->pointed + length);
        char *last = strrchr(address, '.');
        if (i == 2 && last)
            *last = 0; /* the word */
        return find_item(sheet->design, list, address);
    }
    return NULL;
}

/* "Default 0.0 mm. Legal from −1000 m to 1000 m." */
static void write_range(const ev_parameter *row, bool is_derived, char *text, size_t size)
{
    char low[64], high[64], initial[64];
    size_t at = 0;
    text[0] = 0;
    if (row->kind == EV_VALUE_TEXT)
        return;
    ev_row_value_text(row, row->initial, initial, sizeof initial);
    if (is_derived)
        at = (size_t)snprintf(text, size, "Follows from the others; typing here makes it hold. ");
    else if (!row->required)
        at = (size_t)snprintf(text, size, "Default %s. ", initial);
    if (row->kind == EV_VALUE_CHOICE)
        return;
    ev_row_value_text(row, row->low, low, sizeof low);
    ev_row_value_text(row, row->high, high, sizeof high);
    snprintf(text + at, size - at, "Legal from %s to %s.", low, high);
}

/* Up to two lines; returns the baseline for what comes below. */
static double draw_foot_line(ev_pen *pen, const ev_drawer_frame *frame, const char *name,
                             const char *string, ev_colour colour, double baseline)
{
    ev_words words = {.name = name,
                      .string = string,
                      .font = EV_FONT_NOTE,
                      .colour = colour,
                      .x = frame->left,
                      .width = frame->right - frame->left,
                      .baseline = frame->foot.y + baseline,
                      .lines = 2,
                      .line_height = 15.0};
    ev_text(pen, words);
    return baseline + 3.0 + 15.0 * ev_text_extent(&words).lines;
}

static void draw_meaning(ev_pen *pen, const ev_sheet *sheet, const ev_drawer *drawer,
                         const ev_drawer_frame *frame, const ev_drawer_item *item)
{
    const ev_parameter *row = item->ref.parameter;
    char text[320], address[EV_ADDRESS_CAPACITY];
    ev_parameter_address(sheet->design, item->ref, address, sizeof address);
    double width = ev_text_width(row->label, EV_FONT_BODY_STRONG) + 1.0;
    ev_text(pen, (ev_words){.name = "text.drawer.label",
                            .string = row->label,
                            .font = EV_FONT_BODY_STRONG,
                            .colour = pen->theme->ink,
                            .x = frame->left,
                            .width = width,
                            .baseline = frame->foot.y + 22.0});
    ev_text(pen, (ev_words){.name = "text.drawer.address",
                            .string = address,
                            .font = EV_FONT_NOTE,
                            .colour = pen->theme->second,
                            .x = frame->left + width + 10.0,
                            .width = frame->right - frame->left - width - 10.0,
                            .baseline = frame->foot.y + 22.0,
                            .least = EV_LEAST_TYPE});
    double below =
        draw_foot_line(pen, frame, "text.drawer.meaning", row->meaning, pen->theme->second, 40.0);
    write_range(row, item->is_derived, text, sizeof text);
    const char *last = drawer->editing[0] && drawer->complaint[0] ? drawer->complaint : text;
    draw_foot_line(pen, frame, "text.drawer.range", last,
                   last == text ? pen->theme->second : pen->theme->past_main, below);
}

static void draw_foot(ev_pen *pen, const ev_sheet *sheet, const ev_drawer *drawer,
                      const ev_drawer_frame *frame, const ev_drawer_list *list)
{
    ev_rect foot = frame->foot;
    ev_pen_line(pen, foot.x, foot.y + 0.5, foot.x + foot.width, foot.y + 0.5, pen->theme->rule, 1.0,
                1.0);
    const ev_drawer_item *item = row_in_hand(sheet, drawer, list);
    if (item) {
        draw_meaning(pen, sheet, drawer, frame, item);
        return;
    }
    draw_foot_line(pen, frame, "text.drawer.hint",
                   "Point at a row for what it means; click it to type a value with its unit.",
                   pen->theme->second, 22.0);
    ev_pen_circle(pen, frame->left + 3.0, foot.y + 52.0, 2.0, pen->theme->third, 0.9, 1.0);
    ev_text(pen, (ev_words){.name = "text.drawer.ring",
                            .string = "as by default",
                            .font = EV_FONT_NOTE,
                            .colour = pen->theme->second,
                            .x = frame->left + 14.0,
                            .width = 120.0,
                            .baseline = foot.y + 56.0});
}

void ev_draw_drawer(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet,
                    const ev_drawer *drawer, ev_boxes *boxes)
{
    ev_drawer_list list;
    ev_drawer_list_make(sheet->design, drawer->search, &list);
    ev_drawer_frame frame = ev_drawer_frame_make(page, &list, drawer->scroll);
    ev_pen pen = ev_pen_begin(cairo, sheet->dark, boxes, "drawer", frame.panel);
    ev_pen_ground(&pen);
    draw_top(&pen, drawer, &frame);
    draw_list(cairo, sheet, drawer, &frame, &list, boxes);
    draw_foot(&pen, sheet, drawer, &frame, &list);
    ev_pen_line(&pen, frame.panel.x + 0.5, frame.panel.y, frame.panel.x + 0.5,
                frame.panel.y + frame.panel.height, pen.theme->rule, 1.0, 1.0);
    ev_pen_end(&pen);
}
