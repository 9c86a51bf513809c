/* Strokes to pixels. The image is cut into bands of fixed height; each band takes all strokes that
 * touch it in their order, and bands are shared out among the threads, so neither the arithmetic
 * nor the order of blending depends on their number.
 *
 * Coverage of a pixel: a box of the stroke's width smoothed over one pixel, evaluated at the
 * distance of the pixel's centre from the middle line. Its integral across the stroke is exactly
 * the width, also for widths under 1. */
#include "view/raster.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

enum { BAND = 24 };

static const float dash_on = 7.0F, dash_period = 11.0F;
static const float dot_on = 2.0F, dot_period = 4.5F;
static const float bar_length = 10.0F, bar_width = 1.6F;

/* A stroke clipped to the image, with what its inner loop needs. */
typedef struct trace {
    float x0, y0, dx, dy, length; /* unit direction */
    float half, cap;              /* half width + 1/2; highest coverage */
    float alpha, alpha_rate, start;
    uint32_t colour;
    uint8_t style;
    bool joined_start, joined_end;
    int top, bottom; /* rows it may touch, bottom excluded */
} trace;

bool ev_raster_resize(ev_raster *raster, int width, int height)
{
    if (raster->pixels && raster->width == width && raster->height == height) {
        return true;
    }
    ev_raster_free(raster);
    if (width < 1 || height < 1) {
        return false;
    }
    raster->pixels = calloc((size_t)width * (size_t)height, sizeof *raster->pixels);
    if (!raster->pixels) {
        return false;
    }
    raster->width = width;
    raster->height = height;
    return true;
}

void ev_raster_free(ev_raster *raster)
{
    free(raster->pixels);
    *raster = (ev_raster){0};
}

void ev_raster_clear(ev_raster *raster)
{
    if (raster->pixels) {
        memset(raster->pixels, 0,
               (size_t)raster->width * (size_t)raster->height * sizeof *raster->pixels);
    }
}

/* Liang and Barsky's bounds for one edge: keeps [*from, *to] where p t <= q. */
static bool clip_edge(double p, double q, double *from, double *to)
{
    if (p == 0.0) {
        return q >= 0.0;
    }
    double t = q / p;
    if (p < 0.0) {
        *from = t > *from ? t : *from;
    } else {
        *to = t < *to ? t : *to;
    }
    return *from < *to;
}

/* Clips to the image widened by the stroke, so that far ends cost nothing. */
static bool clip_stroke(const ev_raster *raster, const ev_stroke *s, double *from, double *to)
{
    double margin = s->width + 2.0;
    double dx = (double)s->x1 - s->x0, dy = (double)s->y1 - s->y0;
    *from = 0.0;
    *to = 1.0;
    return clip_edge(-dx, s->x0 + margin, from, to) &&
           clip_edge(dx, raster->width + margin - s->x0, from, to) &&
           clip_edge(-dy, s->y0 + margin, from, to) &&
           clip_edge(dy, raster->height + margin - s->y0, from, to);
}

static bool prepare(const ev_raster *raster, const ev_stroke *s, trace *t)
{
    double dx = (double)s->x1 - s->x0, dy = (double)s->y1 - s->y0;
    double length = hypot(dx, dy), from, to;
    if (!(length > 1e-4) || !isfinite(length) || !(s->width > 0.0F) ||
        !clip_stroke(raster, s, &from, &to)) {
        return false;
    }
    double rate = ((double)s->alpha1 - s->alpha0) / length;
    double half = 0.5 * s->width + 0.5;
    *t = (trace){.x0 = (float)(s->x0 + from * dx),
                 .y0 = (float)(s->y0 + from * dy),
                 .dx = (float)(dx / length),
                 .dy = (float)(dy / length),
                 .length = (float)((to - from) * length),
                 .half = (float)half,
                 .cap = s->width < 1.0F ? s->width : 1.0F,
                 .alpha = (float)(s->alpha0 + rate * from * length),
                 .alpha_rate = (float)rate,
                 .start = (float)(s->start + from * length),
                 .colour = s->colour,
                 .style = s->style,
                 .joined_start = s->joined_start,
                 .joined_end = s->joined_end};
    float y_end = t->y0 + t->dy * t->length;
    t->top = (int)floorf(fminf(t->y0, y_end) - t->half) - 1;
    t->bottom = (int)ceilf(fmaxf(t->y0, y_end) + t->half) + 1;
    return true;
}

/* Coverage along the stroke: butt ends smoothed over a pixel, or a hard limit where joined. */
static inline float cover_ends(const trace *t, float along)
{
    float in = t->joined_start ? (along >= 0.0F ? 1.0F : 0.0F) : along + 0.5F;
    float out = t->joined_end ? (along < t->length ? 1.0F : 0.0F) : t->length - along + 0.5F;
    float cover = fminf(in, out);
    return fminf(fmaxf(cover, 0.0F), 1.0F);
}

static inline float cover_pattern(const trace *t, float along)
{
    float on = t->style == EV_STROKE_DASHES ? dash_on : dot_on;
    float period = t->style == EV_STROKE_DASHES ? dash_period : dot_period;
    float s = t->start + along;
    float phase = s - period * floorf(s / period);
    /* the dash is [0, on]; distance to its nearer end, positive inside */
    float inside = phase <= 0.5F * (on + period) ? fminf(phase, on - phase) : phase - period;
    return fminf(fmaxf(inside + 0.5F, 0.0F), 1.0F);
}

static inline void blend(uint32_t *pixel, uint32_t colour, float alpha)
{
    uint32_t a = (uint32_t)(alpha * 256.0F + 0.5F);
    uint32_t keep = 256 - a;
    uint32_t under = *pixel;
    uint32_t rb = ((colour & 0xFF00FFu) * a + (under & 0xFF00FFu) * keep + 0x800080u) >> 8;
    uint32_t ag = (((colour >> 8) & 0xFFu) | 0xFF0000u) * a + ((under >> 8) & 0xFF00FFu) * keep;
    *pixel = (rb & 0xFF00FFu) | ((ag + 0x800080u) & 0xFF00FF00u);
}

static inline void shade(const trace *t, uint32_t *pixel, float px, float py)
{
    float rx = px - t->x0, ry = py - t->y0;
    float along = rx * t->dx + ry * t->dy;
    float cover = fminf(t->half - fabsf(rx * t->dy - ry * t->dx), t->cap);
    if (cover <= 0.0F) {
        return;
    }
    cover *= cover_ends(t, along);
    if (t->style != EV_STROKE_SOLID) {
        cover *= cover_pattern(t, along);
    }
    float alpha = cover * (t->alpha + t->alpha_rate * along);
    if (alpha > 1.0F / 512.0F) {
        blend(pixel, t->colour, fminf(alpha, 1.0F));
    }
}

static inline int clamp_int(float value, int low, int high)
{
    return value < (float)low ? low : value > (float)high ? high : (int)value;
}

/* Mostly level strokes: column by column. */
static void draw_level(ev_raster *raster, const trace *t, int top, int bottom)
{
    float slope = t->dy / t->dx, reach = t->half / fabsf(t->dx);
    float end = t->x0 + t->dx * t->length;
    float left = fminf(t->x0, end) - t->half, right = fmaxf(t->x0, end) + t->half;
    if (fabsf(slope) > 1e-6F) { /* only the columns where it crosses these rows */
        float a = t->x0 + ((float)top - reach - t->y0) / slope;
        float b = t->x0 + ((float)bottom + reach - t->y0) / slope;
        left = fmaxf(left, fminf(a, b) - 1.0F);
        right = fminf(right, fmaxf(a, b) + 1.0F);
    }
    int first = clamp_int(floorf(left), 0, raster->width);
    int last = clamp_int(ceilf(right), 0, raster->width);
    for (int x = first; x < last; ++x) {
        float px = (float)x + 0.5F;
        float middle = t->y0 + slope * (px - t->x0);
        int from = clamp_int(floorf(middle - reach), top, bottom);
        int to = clamp_int(ceilf(middle + reach), top, bottom);
        for (int y = from; y < to; ++y) {
            shade(t, &raster->pixels[(size_t)y * (size_t)raster->width + (size_t)x], px,
                  (float)y + 0.5F);
        }
    }
}

/* Mostly upright strokes: row by row. */
static void draw_upright(ev_raster *raster, const trace *t, int top, int bottom)
{
    float slope = t->dx / t->dy, reach = t->half / fabsf(t->dy);
    for (int y = top; y < bottom; ++y) {
        float py = (float)y + 0.5F;
        float middle = t->x0 + slope * (py - t->y0);
        int from = clamp_int(floorf(middle - reach), 0, raster->width);
        int to = clamp_int(ceilf(middle + reach), 0, raster->width);
        uint32_t *row = &raster->pixels[(size_t)y * (size_t)raster->width];
        for (int x = from; x < to; ++x) {
            shade(t, &row[x], (float)x + 0.5F, py);
        }
    }
}

static void draw_band(ev_raster *raster, const trace *traces, int count, int band)
{
    int top = band * BAND;
    int bottom = top + BAND < raster->height ? top + BAND : raster->height;
    for (int i = 0; i < count; ++i) {
        const trace *t = &traces[i];
        int from = t->top > top ? t->top : top;
        int to = t->bottom < bottom ? t->bottom : bottom;
        if (from >= to) {
            continue;
        }
        if (fabsf(t->dx) >= fabsf(t->dy)) {
            draw_level(raster, t, from, to);
        } else {
            draw_upright(raster, t, from, to);
        }
    }
}

void ev_raster_draw(ev_raster *raster, const ev_stroke *strokes, int count, int threads)
{
    trace *traces = count > 0 ? malloc((size_t)count * sizeof *traces) : NULL;
    if (!traces || !raster->pixels) {
        free(traces);
        return;
    }
    int kept = 0;
    for (int i = 0; i < count; ++i) {
        kept += prepare(raster, &strokes[i], &traces[kept]) ? 1 : 0;
    }
    int bands = (raster->height + BAND - 1) / BAND;
#pragma omp parallel for schedule(dynamic) num_threads(threads < 1 ? 1 : threads)
    for (int band = 0; band < bands; ++band) {
        draw_band(raster, traces, kept, band);
    }
    free(traces);
}

bool ev_strokes_add(ev_strokes *strokes, ev_stroke stroke)
{
    if (strokes->count == strokes->capacity) {
        int capacity = strokes->capacity ? 2 * strokes->capacity : 1024;
        ev_stroke *items = realloc(strokes->items, (size_t)capacity * sizeof *items);
        if (!items) {
            return false;
        }
        strokes->items = items;
        strokes->capacity = capacity;
    }
    strokes->items[strokes->count++] = stroke;
    return true;
}

bool ev_strokes_add_bar(ev_strokes *strokes, ev_stroke stroke)
{
    float dx = stroke.x1 - stroke.x0, dy = stroke.y1 - stroke.y0;
    float length = hypotf(dx, dy);
    if (!(length > 0.0F)) {
        return true;
    }
    float nx = -0.5F * bar_length * dy / length, ny = 0.5F * bar_length * dx / length;
    ev_stroke bar = stroke;
    bar.x0 = stroke.x1 - nx;
    bar.y0 = stroke.y1 - ny;
    bar.x1 = stroke.x1 + nx;
    bar.y1 = stroke.y1 + ny;
    bar.width = bar_width;
    bar.alpha0 = bar.alpha1 = stroke.alpha1;
    bar.style = EV_STROKE_SOLID;
    bar.joined_start = bar.joined_end = false;
    return ev_strokes_add(strokes, bar);
}

void ev_strokes_free(ev_strokes *strokes)
{
    free(strokes->items);
    *strokes = (ev_strokes){0};
}
