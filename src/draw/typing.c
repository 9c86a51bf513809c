/* A line being typed into. Called by what has one; knows nothing of what is typed. */
#include "draw/typing.h"

#include "base/text.h"

#include <math.h>
#include <stdio.h>

static const double inset = 5.0;

static double room_of(const ev_typing *typing)
{
    return typing->frame.x + typing->frame.width - inset - typing->x;
}

/* How far the text stands to the left of its place. */
static double shift_of(const ev_typing *typing)
{
    if (typing->idle)
        return 0.0;
    double caret = ev_text_caret(typing->text, typing->font, typing->caret);
    return fmax(0.0, caret - room_of(typing));
}

int ev_typing_index(const ev_typing *typing, double x)
{
    return ev_text_index(typing->text, typing->font, x - typing->x + shift_of(typing));
}

static void draw_text(ev_pen *pen, const ev_typing *typing, double shift)
{
    double room = room_of(typing), width = ev_text_width(typing->text, typing->font);
    bool fits = width <= room || typing->idle;
    bool hinting = !typing->text[0] && typing->hint;
    ev_boxes *boxes = pen->boxes;
    if (!fits)
        pen->boxes = NULL; /* part of it is out of sight */
    ev_text(pen, (ev_words){.name = typing->name,
                            .string = hinting ? typing->hint : typing->text,
                            .font = typing->font,
                            .colour = hinting ? pen->theme->third : pen->theme->ink,
                            .x = typing->x - shift + (hinting ? 3.0 : 0.0),
                            .width = fits ? room - 3.0 : width + 1.0,
                            .baseline = typing->baseline});
    pen->boxes = boxes;
    if (fits)
        return;
    double height = 1.21 * typing->font.size;
    ev_box *box = ev_boxes_add(boxes, EV_BOX_TEXT, typing->name,
                               (ev_rect){typing->x, typing->baseline - 0.8 * height, room, height});
    if (box)
        ev_text_copy(box->text, sizeof box->text, typing->text);
}

void ev_typing_draw(ev_pen *pen, const ev_typing *typing)
{
    const ev_theme *theme = pen->theme;
    ev_pen_fill(pen, typing->frame, 3.0, theme->ground, 1.0);
    ev_pen_frame(pen, typing->frame, 3.0,
                 typing->wrong  ? theme->past_main
                 : typing->idle ? theme->third
                                : theme->ink,
                 typing->idle ? 0.9 : 1.4, 1.0);
    double shift = shift_of(typing), x = typing->x - shift;
    double caret = x + ev_text_caret(typing->text, typing->font, typing->caret);
    double anchor = x + ev_text_caret(typing->text, typing->font, typing->anchor);
    double top = typing->baseline - 0.9 * typing->font.size, height = 1.16 * typing->font.size;
    cairo_save(pen->cairo);
    cairo_rectangle(pen->cairo, typing->frame.x, typing->frame.y, typing->frame.width,
                    typing->frame.height);
    cairo_clip(pen->cairo);
    if (!typing->idle && caret != anchor)
        ev_pen_fill(pen, (ev_rect){fmin(caret, anchor), top, fabs(caret - anchor), height}, 0.0,
                    theme->hand, 0.6);
    draw_text(pen, typing, shift);
    if (!typing->idle)
        ev_pen_line(pen, caret, top, caret, top + height, theme->ink, 1.4, 1.0);
    cairo_restore(pen->cairo);
}
