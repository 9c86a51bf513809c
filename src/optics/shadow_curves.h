/* Curves of the aperture plane, as shadow.c and shadow_seeds.c both see them; private to them. */
#pragma once

#include "optics/shadow.h"

typedef struct vec2 {
    double x, y;
} vec2;

/* In coordinates where the outline is the unit circle. */
static inline vec2 to_circle(const ev_outline *outline, double x, double y)
{
    double det = outline->ux * outline->vy - outline->uy * outline->vx;
    return (vec2){(x * outline->vy - y * outline->vx) / det,
                  (y * outline->ux - x * outline->uy) / det};
}

static inline int outline_count(const ev_shadows *shadows)
{
    return (shadows->has_sub ? 1 : 0) + shadows->body_count;
}

static inline const ev_outline *outline_at(const ev_shadows *shadows, int obstacle)
{
    if (shadows->has_sub)
        return obstacle == 0 ? &shadows->sub : &shadows->bodies[obstacle - 1];
    return &shadows->bodies[obstacle];
}

static inline const ev_strip *strip_at(const ev_shadows *shadows, int obstacle)
{
    return &shadows->strips[obstacle - outline_count(shadows)];
}

static inline ev_outline circle(const ev_shadows *shadows, double radius)
{
    return (ev_outline){.x = shadows->centre_x, .ux = radius, .vy = radius};
}

/* Distance along a strip's line, `across` from its middle, at which it crosses a radius. */
static inline double along_at(double radius, double across)
{
    return sqrt(fmax(0.0, radius * radius - across * across));
}
