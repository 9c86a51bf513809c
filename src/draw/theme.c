/* The two palettes and the arithmetic of colour. Called by everything in draw and by the window,
 * which colours its 3D picture with the same values. Knows nothing of Cairo. */
#include "draw/theme.h"

#include <math.h>

#define HEX(v)                                                                                     \
    {                                                                                              \
        ((v) >> 16 & 255) / 255.0, ((v) >> 8 & 255) / 255.0, ((v)&255) / 255.0                     \
    }

static const ev_theme light = {
    .ground = HEX(0xF6F3EA),
    .fill = HEX(0xE4DECF),
    .rule = HEX(0xD9D2C1),
    .ink = HEX(0x1C2126),
    .second = HEX(0x5A5D60),
    .third = HEX(0x9A988F),
    .late = HEX(0x913000),
    .early = HEX(0x003586),
    .past_main = HEX(0xC44773),
    .past_sub = HEX(0x7C4CB6),
    .hand = HEX(0xFFD23F),
    .hand_text = HEX(0x1C2126),
};

static const ev_theme dark = {
    .ground = HEX(0x14181B),
    .fill = HEX(0x262C30),
    .rule = HEX(0x31373B),
    .ink = HEX(0xECE6D8),
    .second = HEX(0xA3A49F),
    .third = HEX(0x6A6E6F),
    .late = HEX(0xFFA95E),
    .early = HEX(0x8DBDFF),
    .past_main = HEX(0xFF5F9F),
    .past_sub = HEX(0x9A70EB),
    .hand = HEX(0xFFD23F),
    .hand_text = HEX(0x14181B),
};

const ev_theme *ev_theme_get(bool is_dark)
{
    return is_dark ? &dark : &light;
}

ev_colour ev_theme_fate(const ev_theme *theme, ev_fate fate)
{
    switch (fate) {
    case EV_FATE_PAST_SUB:
        return theme->past_sub;
    case EV_FATE_PAST_MAIN:
        return theme->past_main;
    default:
        return theme->ink;
    }
}

static double linear_from_srgb(double v)
{
    return v <= 0.04045 ? v / 12.92 : pow((v + 0.055) / 1.055, 2.4);
}

static double srgb_from_linear(double v)
{
    double clipped = v < 0.0 ? 0.0 : v > 1.0 ? 1.0 : v;
    return clipped <= 0.0031308 ? 12.92 * clipped : 1.055 * pow(clipped, 1.0 / 2.4) - 0.055;
}

void ev_colour_oklab(ev_colour colour, double lab[3])
{
    double r = linear_from_srgb(colour.r), g = linear_from_srgb(colour.g),
           b = linear_from_srgb(colour.b);
    double l = cbrt(0.4122214708 * r + 0.5363325363 * g + 0.0514459929 * b);
    double m = cbrt(0.2119034982 * r + 0.6806995451 * g + 0.1073969566 * b);
    double s = cbrt(0.0883024619 * r + 0.2817188376 * g + 0.6299787005 * b);
    lab[0] = 0.2104542553 * l + 0.7936177850 * m - 0.0040720468 * s;
    lab[1] = 1.9779984951 * l - 2.4285922050 * m + 0.4505937099 * s;
    lab[2] = 0.0259040371 * l + 0.7827717662 * m - 0.8086757660 * s;
}

static ev_colour colour_from_oklab(const double lab[3])
{
    double l = lab[0] + 0.3963377774 * lab[1] + 0.2158037573 * lab[2];
    double m = lab[0] - 0.1055613458 * lab[1] - 0.0638541728 * lab[2];
    double s = lab[0] - 0.0894841775 * lab[1] - 1.2914855480 * lab[2];
    l *= l * l;
    m *= m * m;
    s *= s * s;
    return (ev_colour){
        srgb_from_linear(4.0767416621 * l - 3.3077115913 * m + 0.2309699292 * s),
        srgb_from_linear(-1.2684380046 * l + 2.6097574011 * m - 0.3413193965 * s),
        srgb_from_linear(-0.0041960863 * l - 0.7034186147 * m + 1.7076147010 * s),
    };
}

ev_colour ev_colour_mix(ev_colour a, ev_colour b, double share)
{
    double from[3], to[3], mixed[3];
    ev_colour_oklab(a, from);
    ev_colour_oklab(b, to);
    for (int i = 0; i < 3; ++i)
        mixed[i] = from[i] + share * (to[i] - from[i]);
    return colour_from_oklab(mixed);
}

ev_colour ev_theme_path_error(const ev_theme *theme, double error)
{
    if (isnan(error))
        return theme->ground;
    double share = fmin(fabs(error), 1.0);
    return ev_colour_mix(theme->ground, error > 0.0 ? theme->late : theme->early, share);
}
