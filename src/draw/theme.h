/* Colours, type and line widths of everything drawn, in one place; light and dark.
 *
 * Ink pays nothing, colour costs, yellow is in hand. Every fate has a line style beside its colour,
 * so that no reading depends on colour alone. Colours are sRGB, 0 to 1; sizes are logical pixels.
 * Mixed colours (the path error's scale) are mixed in OKLab, where equal steps look equal
 * (B. Ottosson, "A perceptual color space for image processing", 2020). */
#pragma once

#include "optics/shadow.h"

#include <stdbool.h>

typedef struct ev_colour {
    double r, g, b;
} ev_colour;

typedef struct ev_theme {
    ev_colour ground, fill, rule;
    ev_colour ink, second, third;
    ev_colour late, early; /* path error */
    ev_colour past_main, past_sub;
    ev_colour hand, hand_text; /* what is in hand, and text on it */
} ev_theme;

const ev_theme *ev_theme_get(bool dark);

/* Colour of a fate: its rays, its share of the watts bar, its row of the ledger. */
ev_colour ev_theme_fate(const ev_theme *theme, ev_fate fate);

/* Path error, from -1 (early) over the ground to +1 (late); beyond is clamped, NaN is ground. */
ev_colour ev_theme_path_error(const ev_theme *theme, double error);

/* Mix in OKLab: 0 gives a, 1 gives b. */
ev_colour ev_colour_mix(ev_colour a, ev_colour b, double share);

/* OKLab coordinates of an sRGB colour: lightness 0 to 1, then green-red and blue-yellow. */
void ev_colour_oklab(ev_colour colour, double lab[3]);

/* Type. Families fall back in the order given where one is missing. */
#define EV_FAMILY_TEXT "Inter, DejaVu Sans"
#define EV_FAMILY_DISPLAY "Inter Display, Inter, DejaVu Sans"
#define EV_LEAST_TYPE 10.5 /* nothing smaller is drawn */
/* Numbers that run are set in the text cut even when large, drawn together by this share of an em:
 * the tabular digits of Inter Display 4.0 are not all of one width (its 1 is 15 % narrower). */
#define EV_LARGE_TYPE 18.0
#define EV_LARGE_TRACKING -0.022

typedef struct ev_font {
    bool display; /* cut for large sizes */
    double size;
    int weight; /* 400 regular, 500 medium, 600 semibold */
} ev_font;

#define EV_FONT_SMALL ((ev_font){false, 10.5, 400})
#define EV_FONT_NOTE ((ev_font){false, 11.5, 400})
#define EV_FONT_NOTE_STRONG ((ev_font){false, 11.5, 600})
#define EV_FONT_BODY ((ev_font){false, 12.5, 400})
#define EV_FONT_BODY_STRONG ((ev_font){false, 12.5, 600})
#define EV_FONT_HEAD ((ev_font){false, 13.0, 600})
#define EV_FONT_ADVICE ((ev_font){false, 14.0, 400})
#define EV_FONT_FIELD ((ev_font){false, 19.0, 500})
#define EV_FONT_VERDICT ((ev_font){true, 21.0, 400})
#define EV_FONT_GAIN ((ev_font){false, 28.0, 600})
#define EV_FONT_SHOW ((ev_font){true, 44.0, 400})
#define EV_FONT_SHOW_SHARE ((ev_font){true, 28.0, 400})
#define EV_FONT_SHOW_NOTE ((ev_font){false, 15.0, 400})
#define EV_FONT_SHOW_STRONG ((ev_font){false, 16.5, 600})

/* Lines. */
#define EV_LINE_MIRROR 3.2
#define EV_LINE_HATCH 0.75
#define EV_HATCH_STEP 6.5
#define EV_HATCH_LENGTH 10.0
#define EV_LINE_FRONT 2.4
#define EV_FRONT_FILL 0.26
#define EV_LINE_CURVE 1.9
#define EV_LINE_KEPT 1.1
#define EV_LINE_DIMENSION 0.9
#define EV_LINE_RAY 0.85
#define EV_RAY_INK 0.38
#define EV_LINE_LOST 1.15
#define EV_SHADOW_BAR 10.0
#define EV_FADED 0.10 /* what is not pointed at */
#define EV_STALE 0.60 /* what is older than the settings */
#define EV_HANDLE_RADIUS 13.0
#define EV_HANDLE_SHOWING 22.0
#define EV_TOUCH 44.0 /* least side of what a finger is to hit */
