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
static const float bend_slack = 0.1F, thin_width = 1.5F, least_alpha = 1.0F / 512.0F;

/* A stroke clipped to the image, with what its inner loop needs. */
typedef struct trace {
    float x0, y0, dx, dy, length; /* unit direction */
    float half, cap;              /* half width + 1/2; highest coverage */
    float alpha, alpha_rate, start;
    uint32_t colour;
    uint8_t style;
    bool joined_start, joined_end;
    bool thin;       /* and free at both ends */
    int top, bottom; /* rows it may touch, bottom excluded */
    int left, right; /* and columns */
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
    for (int y = raster->top; y < raster->bottom; ++y) {
        memset(&raster->pixels[(size_t)y * (size_t)raster->width + (size_t)raster->left], 0,
               (size_t)(raster->right - raster->left) * sizeof *raster->pixels);
    }
    raster->left = raster->top = raster->right = raster->bottom = 0;
}

/* The library's fminf and floorf cost a call each; in the inner loops these are a few instructions,
 * and no NaN gets that far. */
static inline float lesser(float a, float b)
{
    return a < b ? a : b;
}

static inline float greater(float a, float b)
{
    return a > b ? a : b;
}

static int least(int a, int b)
{
    return a < b ? a : b;
}

static int most(int a, int b)
{
    return a > b ? a : b;
}

/* Whole part within [low, high], both >= 0. */
static inline int clamp_int(float value, int low, int high)
{
    return value < (float)low ? low : value > (float)high ? high : (int)value;
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
    if (!(length > 1e-4) || !isfinite(length) || !(s->width > 0.0F && s->width < 1e4F) ||
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
                 .joined_end = s->joined_end,
                 .thin = s->width <= thin_width && !s->joined_start && !s->joined_end};
    float y_end = t->y0 + t->dy * t->length;
    t->top = (int)floorf(fminf(t->y0, y_end) - t->half) - 1;
    t->bottom = (int)ceilf(fmaxf(t->y0, y_end) + t->half) + 1;
    float x_end = t->x0 + t->dx * t->length;
    t->left = (int)floorf(fminf(t->x0, x_end) - t->half) - 1;
    t->right = (int)ceilf(fmaxf(t->x0, x_end) + t->half) + 1;
    return true;
}

/* Coverage along the stroke: butt ends smoothed over a pixel, or a hard limit where joined. The
 * limit leaves a little for the wedge that opens on the outside of a bend. */
static inline float cover_ends(const trace *t, float along)
{
    float in = t->joined_start ? (along >= -bend_slack ? 1.0F : 0.0F) : along + 0.5F;
    float out =
        t->joined_end ? (along < t->length + bend_slack ? 1.0F : 0.0F) : t->length - along + 0.5F;
    return lesser(greater(lesser(in, out), 0.0F), 1.0F);
}

static inline float cover_pattern(const trace *t, float along)
{
    float on = t->style == EV_STROKE_DASHES ? dash_on : dot_on;
    float period = t->style == EV_STROKE_DASHES ? dash_period : dot_period;
    float s = t->start + along;
    float phase = s - period * (float)(int)(s / period); /* s >= 0 but for the first half pixel */
    /* the dash is [0, on]; distance to its nearer end, positive inside */
    float inside = phase <= 0.5F * (on + period) ? lesser(phase, on - phase) : phase - period;
    return lesser(greater(inside + 0.5F, 0.0F), 1.0F);
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
    float cover = lesser(t->half - fabsf(rx * t->dy - ry * t->dx), t->cap);
    if (cover <= 0.0F) {
        return;
    }
    cover *= cover_ends(t, along);
    if (t->style != EV_STROKE_SOLID) {
        cover *= cover_pattern(t, along);
    }
    float alpha = cover * (t->alpha + t->alpha_rate * along);
    if (alpha > least_alpha) {
        blend(pixel, t->colour, lesser(alpha, 1.0F));
    }
}

/* Opacity along a thin stroke, where what happens across it can be left out. */
static inline float strength_at(const trace *t, float along)
{
    float strength = t->alpha + t->alpha_rate * along;
    if (along < 0.5F || along > t->length - 0.5F) {
        strength *= cover_ends(t, along);
    }
    return t->style == EV_STROKE_SOLID ? strength : strength * cover_pattern(t, along);
}

/* A stroke seen along its main direction: for level ones that is x, for upright ones y. `lane` is a
 * column or row, `cross` the pixels in it. */
typedef struct lanes {
    bool level, thin;
    float slope;  /* cross per lane */
    float reach;  /* half its thickness in a lane */
    float cosine; /* distance from the middle line per pixel of a lane */
} lanes;

static void draw_lane(ev_raster *raster, const trace *t, const lanes *l, int lane, int low,
                      int high)
{
    float at = (float)lane + 0.5F, from_start = at - (l->level ? t->x0 : t->y0);
    float middle = (l->level ? t->y0 : t->x0) + l->slope * from_start;
    /* the pixels whose centres lie within */
    int from = clamp_int(middle - l->reach + 0.5F, low, high);
    int to = clamp_int(middle + l->reach + 0.5F, low, high);
    size_t across = (size_t)raster->width;
    size_t step = l->level ? across : 1;
    uint32_t *pixel =
        raster->pixels + (l->level ? (size_t)lane : (size_t)lane * across) + (size_t)from * step;
    if (!l->thin) {
        for (int i = from; i < to; ++i, pixel += step) {
            float cross = (float)i + 0.5F;
            shade(t, pixel, l->level ? at : cross, l->level ? cross : at);
        }
        return;
    }
    float strength = strength_at(t, from_start / (l->level ? t->dx : t->dy));
    for (int i = from; i < to; ++i, pixel += step) {
        float away = fabsf((float)i + 0.5F - middle) * l->cosine;
        float alpha = lesser(t->half - away, t->cap) * strength;
        if (alpha > least_alpha) {
            blend(pixel, t->colour, lesser(alpha, 1.0F));
        }
    }
}

/* The lanes a stroke touches while it runs through the rows from top to bottom. */
static void draw_rows(ev_raster *raster, const trace *t, int top, int bottom)
{
    bool level = fabsf(t->dx) >= fabsf(t->dy);
    float along = level ? t->dx : t->dy, cross = level ? t->dy : t->dx;
    lanes l = {.level = level,
               .thin = t->thin,
               .slope = cross / along,
               .reach = t->half / fabsf(along),
               .cosine = fabsf(along)};
    int first = level ? t->left : top, last = level ? t->right : bottom;
    if (level && fabsf(l.slope) > 1e-6F) {
        float a = t->x0 + ((float)top - l.reach - t->y0) / l.slope;
        float b = t->x0 + ((float)bottom + l.reach - t->y0) / l.slope;
        first = clamp_int(lesser(a, b) - 1.0F, most(first, 0), most(last, 0));
        last = clamp_int(greater(a, b) + 2.0F, most(first, 0), most(last, 0));
    }
    first = most(first, 0);
    last = least(last, level ? raster->width : raster->height);
    for (int lane = first; lane < last; ++lane) {
        draw_lane(raster, t, &l, lane, level ? top : 0, level ? bottom : raster->width);
    }
}

typedef struct banded {
    ev_raster *raster;
    const trace *traces;
    int count;
} banded;

static void draw_band(void *data, int band)
{
    const banded *work = data;
    ev_raster *raster = work->raster;
    int top = band * BAND;
    int bottom = top + BAND < raster->height ? top + BAND : raster->height;
    for (int i = 0; i < work->count; ++i) {
        const trace *t = &work->traces[i];
        int from = most(t->top, top), to = least(t->bottom, bottom);
        if (from < to) {
            draw_rows(raster, t, from, to);
        }
    }
}

static void widen_bounds(ev_raster *raster, const trace *t)
{
    int left = most(t->left, 0), top = most(t->top, 0);
    int right = least(t->right, raster->width), bottom = least(t->bottom, raster->height);
    bool empty = raster->right == 0;
    if (left >= right || top >= bottom) {
        return;
    }
    raster->left = empty ? left : least(raster->left, left);
    raster->top = empty ? top : least(raster->top, top);
    raster->right = most(raster->right, right);
    raster->bottom = most(raster->bottom, bottom);
}

void ev_raster_draw(ev_raster *raster, const ev_stroke *strokes, int count, ev_crew *crew)
{
    trace *traces = count > 0 ? malloc((size_t)count * sizeof *traces) : NULL;
    if (!traces || !raster->pixels) {
        free(traces);
        return;
    }
    int kept = 0;
    for (int i = 0; i < count; ++i) {
        if (prepare(raster, &strokes[i], &traces[kept])) {
            widen_bounds(raster, &traces[kept]);
            ++kept;
        }
    }
    banded work = {raster, traces, kept};
    ev_crew_run(crew, (raster->height + BAND - 1) / BAND, draw_band, &work);
    free(traces);
}
