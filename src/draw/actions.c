/* The list of actions over the page. Called by the window; runs nothing. */
#include "draw/actions.h"

#include "draw/drawer.h"
#include "draw/typing.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

static const double row_height = 30.0, head_room = 58.0, panel_width = 560.0;

int ev_actions_match(const ev_actions *actions, int indices[EV_ACTIONS_CAPACITY])
{
    int count = 0;
    for (int i = 0; i < actions->count && count < EV_ACTIONS_CAPACITY; ++i) {
        const ev_action_entry *item = &actions->items[i];
        char text[256];
        snprintf(text, sizeof text, "%s %s %s", item->words, item->name, item->key);
        if (ev_search_matches(actions->search, text))
            indices[count++] = i;
    }
    return count;
}

/* As tall as the whole list is at its longest, or the page allows: it does not jump while typing.
 */
static ev_rect panel_of(const ev_page *page, const ev_actions *actions)
{
    double most = page->height - page->bar.height - 96.0;
    double rows = fmin(floor((most - head_room - 10.0) / row_height), fmax(actions->count, 1));
    return (ev_rect){round(0.5 * (page->width - panel_width)), page->bar.height + 36.0, panel_width,
                     head_room + rows * row_height + 10.0};
}

static ev_typing search_of(const ev_actions *actions, ev_rect panel)
{
    ev_rect frame = {panel.x + 14.0, panel.y + 14.0, panel.width - 28.0, 32.0};
    return (ev_typing){.name = "text.actions.search",
                       .text = actions->search,
                       .font = EV_FONT_BODY,
                       .caret = actions->caret,
                       .anchor = actions->anchor,
                       .hint = "What would you do? Type a word of it",
                       .frame = frame,
                       .x = frame.x + 10.0,
                       .baseline = frame.y + 20.5};
}

int ev_actions_byte_at(const ev_page *page, const ev_actions *actions, double x)
{
    ev_typing typing = search_of(actions, panel_of(page, actions));
    return ev_typing_index(&typing, x);
}

static void draw_key(ev_pen *pen, const ev_action_entry *item, double end, double baseline,
                     ev_colour colour)
{
    if (!item->key[0])
        return;
    char name[64];
    snprintf(name, sizeof name, "text.act.%.40s.key", item->name);
    double width = ev_text_width(item->key, EV_FONT_NOTE) + 1.0;
    ev_text(pen, (ev_words){.name = name,
                            .string = item->key,
                            .font = EV_FONT_NOTE,
                            .colour = colour,
                            .x = end - width,
                            .width = width,
                            .baseline = baseline});
    ev_pen_frame(pen, (ev_rect){end - width - 4.5, baseline - 12.0, width + 8.0, 16.0}, 1.5, colour,
                 0.9, 0.6);
}

static void draw_item(ev_pen *pen, const ev_actions *actions, const ev_action_entry *item,
                      ev_rect row, bool chosen)
{
    const ev_theme *theme = pen->theme;
    char box[64], name[64];
    snprintf(box, sizeof box, "act.%.40s", item->name);
    snprintf(name, sizeof name, "text.%.50s", box);
    bool pointed = strcmp(actions->pointed, box) == 0;
    if (item->enabled)
        ev_boxes_add(pen->boxes, EV_BOX_BUTTON, box, row);
    if (chosen || (pointed && item->enabled))
        ev_pen_fill(pen, row, 3.0, chosen ? theme->hand : theme->fill, item->enabled ? 1.0 : 0.4);
    ev_colour colour = !item->enabled ? theme->third : chosen ? theme->hand_text : theme->ink;
    double baseline = row.y + 0.5 * row.height + 4.5, key = ev_text_width(item->key, EV_FONT_NOTE);
    ev_text(pen, (ev_words){.name = name,
                            .string = item->words,
                            .font = EV_FONT_BODY,
                            .colour = colour,
                            .x = row.x + 10.0,
                            .width = row.width - 40.0 - key,
                            .baseline = baseline,
                            .least = EV_LEAST_TYPE});
    draw_key(pen, item, row.x + row.width - 14.0, baseline,
             item->enabled && !chosen ? theme->second : colour);
}

static void draw_matches(ev_pen *pen, const ev_actions *actions, ev_rect panel)
{
    int indices[EV_ACTIONS_CAPACITY];
    int count = ev_actions_match(actions, indices);
    int rows = (int)((panel.height - head_room - 9.0) / row_height);
    int chosen = actions->chosen < 0 ? 0 : actions->chosen < count ? actions->chosen : count - 1;
    int first = chosen - rows + 1 > 0 ? chosen - rows + 1 : 0;
    for (int i = first; i < count && i < first + rows; ++i)
        draw_item(pen, actions, &actions->items[indices[i]],
                  (ev_rect){panel.x + 14.0, panel.y + head_room + (i - first) * row_height,
                            panel.width - 28.0, row_height},
                  i == chosen);
    if (count > 0)
        return;
    ev_text(pen, (ev_words){.name = "text.actions.nothing",
                            .string = "Nothing here goes by that word.",
                            .font = EV_FONT_BODY,
                            .colour = pen->theme->second,
                            .x = panel.x + 24.0,
                            .width = panel.width - 48.0,
                            .baseline = panel.y + head_room + 20.0});
}

void ev_draw_actions(cairo_t *cairo, const ev_page *page, bool dark, const ev_actions *actions,
                     ev_boxes *boxes)
{
    ev_rect panel = panel_of(page, actions);
    ev_pen whole =
        ev_pen_begin(cairo, dark, NULL, "page", (ev_rect){0.0, 0.0, page->width, page->height});
    ev_pen_colour(&whole, whole.theme->ground, 0.6);
    cairo_paint(cairo);
    ev_pen_end(&whole);
    ev_pen pen = ev_pen_begin(cairo, dark, boxes, "actions", panel);
    ev_pen_ground(&pen);
    ev_typing typing = search_of(actions, panel);
    ev_boxes_add(boxes, EV_BOX_FIELD, "search.actions", typing.frame);
    ev_typing_draw(&pen, &typing);
    draw_matches(&pen, actions, panel);
    ev_pen_frame(&pen,
                 (ev_rect){panel.x + 0.5, panel.y + 0.5, panel.width - 1.0, panel.height - 1.0},
                 0.0, pen.theme->second, 1.0, 1.0);
    ev_pen_end(&pen);
}
