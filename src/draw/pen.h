/* What the drawings share: a pen (context, palette, boxes and the region being drawn), text that
 * fits its place, and the marks of a technical drawing. Internal to draw. */
#pragma once

#include "draw/draw.h"
#include "draw/theme.h"

#include <stddef.h>

#define EV_LEAST_SHARE 0.0005 /* of the power: less would be drawn as 0.0 % */

typedef struct ev_pen {
    cairo_t *cairo;
    const ev_theme *theme;
    ev_boxes *boxes; /* may be NULL */
    ev_rect region;  /* clip; text of the region has to lie inside it */
    double strength; /* 0 to 1, multiplies every opacity: stale answers, faded parts */
} ev_pen;

/* Saves the context and clips it to the region. `name` becomes its place box. */
ev_pen ev_pen_begin(cairo_t *cairo, bool dark, ev_boxes *boxes, const char *name, ev_rect region);
void ev_pen_ground(ev_pen *pen);
void ev_pen_end(ev_pen *pen);

/* Whether pixels are drawn, not paper: some marks are made differently for speed. */
bool ev_pen_is_image(const ev_pen *pen);

void ev_pen_colour(ev_pen *pen, ev_colour colour, double opacity);

/* Strokes and fills of one call each; a width of 0 means a fill. */
void ev_pen_line(ev_pen *pen, double x0, double y0, double x1, double y1, ev_colour colour,
                 double width, double opacity);
void ev_pen_fill(ev_pen *pen, ev_rect rect, double corner, ev_colour colour, double opacity);
void ev_pen_frame(ev_pen *pen, ev_rect rect, double corner, ev_colour colour, double width,
                  double opacity);
void ev_pen_circle(ev_pen *pen, double x, double y, double radius, ev_colour colour, double width,
                   double opacity);
/* Open arrow head with its tip at (x, y), pointing along the unit vector (dx, dy). */
void ev_pen_arrow(ev_pen *pen, double x, double y, double dx, double dy, double length,
                  ev_colour colour, double width);
/* Filled triangle with its tip at (x, y), pointing along (dx, dy). */
void ev_pen_wedge(ev_pen *pen, double x, double y, double dx, double dy, double length,
                  double half_width, ev_colour colour);
/* A sample of the line style of a fate, from (x, y) over `width` pixels; also sets the dashes of a
 * ray's stroke. */
void ev_pen_dashes(ev_pen *pen, ev_fate fate);
void ev_pen_fate_sample(ev_pen *pen, ev_fate fate, double x, double y, double width);

/* Hatching of a shadow inside the current path, which is consumed. */
void ev_pen_hatch_path(ev_pen *pen, ev_rect bounds);

typedef enum { EV_ALIGN_LEFT, EV_ALIGN_CENTRE, EV_ALIGN_RIGHT } ev_align;

enum { EV_BOLD_CAPACITY = 4 };

/* Text in a slot: from x over `width`, first baseline at `baseline`. Where it is too wide it first
 * shrinks to `least` (0: does not shrink), then breaks into `lines`, then loses its end. */
typedef struct ev_words {
    const char *name;   /* of its box, "text.ledger.total" */
    const char *string; /* UTF-8 */
    ev_font font;
    ev_colour colour;
    ev_align align;
    double x, width, baseline;
    double least;
    int lines;          /* 0 means 1 */
    double line_height; /* with lines > 1 */
    bool halo;          /* ground behind the letters, over a busy drawing */
    bool upright;       /* turned to read upward: x is the baseline, baseline is the centre in y */
    const int (*bold)[2]; /* byte ranges in semibold */
    int bold_count;
} ev_words;

/* Draws and records; returns where the text came to lie. */
ev_rect ev_text(ev_pen *pen, ev_words words);

/* The size, in px, at which the text would be drawn, its width and number of lines. */
typedef struct ev_extent {
    double size, width;
    int lines;
} ev_extent;
ev_extent ev_text_extent(const ev_words *words);
double ev_text_width(const char *string, ev_font font);

/* Left edge, from the text's own, of the byte `index`; and the byte under x. */
double ev_text_caret(const char *string, ev_font font, int index);
int ev_text_index(const char *string, ev_font font, double x);

/* Digits with a true minus (U+2212), never "-0.00"; `plus` shows the sign of what is positive. NaN
 * gives an en dash, infinities the sign of infinity. */
void ev_format_number(char *text, size_t size, double value, int decimals, bool plus);
/* "1200 mm", "12.5 mm", "100 m": mm below 10 m, with no more decimals than the number has. */
void ev_format_length(char *text, size_t size, double metres);
/* "1.42 mm", "0.032 mm", "134 mm": about three figures, for errors and moves. */
void ev_format_error(char *text, size_t size, double metres, bool plus);
/* The largest of 1, 2, 5 times a power of ten that is not above `value` (> 0). */
double ev_step_below(double value);

ev_box *ev_boxes_add(ev_boxes *boxes, ev_box_kind kind, const char *name, ev_rect rect);

static inline bool ev_pointed(const ev_sheet *sheet, const char *name)
{
    const char *a = sheet->pointed, *b = name;
    while (*a && *a == *b)
        ++a, ++b;
    return *a == *b && *name;
}
