/* Peaks, nulls and crossings of the far field, each by refining samples of the field itself. Called
 * by the beam facts. Lengths in direction cosine are counted in lobe widths, lambda / D. */
#include "optics/beam_search.h"

#include "optics/beam_source.h"

#include <stdlib.h>

static ev_vec3 direction_at(double u, double v)
{
    double rest = 1.0 - u * u - v * v;
    return ev_vec3_make(u, v, rest > 0.0 ? sqrt(rest) : -1.0);
}

static double square_of(double _Complex a)
{
    return creal(a) * creal(a) + cimag(a) * cimag(a);
}

static double lobe_width(const ev_beam_source *source)
{
    return 1.0 / ev_beam_source_wavelengths(source);
}

enum { STENCIL = 9 };

/* Powers on the 3 x 3 stencil of step h about (u, v); [4] is its middle. */
static void stencil(ev_beam_source *source, double u, double v, double h, bool cross,
                    double power[STENCIL])
{
    ev_vec3 directions[STENCIL];
    ev_beam_field fields[STENCIL];
    for (int i = 0; i < STENCIL; i++)
        directions[i] = direction_at(u + h * (i % 3 - 1), v + h * (i / 3 - 1));
    ev_beam_fields(source, directions, STENCIL, fields);
    for (int i = 0; i < STENCIL; i++)
        power[i] = square_of(cross ? fields[i].cross : fields[i].co);
}

/* Newton's step of log power from a stencil; uphill by a twentieth of a lobe where it is not
 * convex, and never more than a third of one. */
static void climb_step(const double power[STENCIL], double h, double lobe, double step[2])
{
    double f = power[4], gu = (power[5] - power[3]) / (2.0 * h * f);
    double gv = (power[7] - power[1]) / (2.0 * h * f);
    double huu = (power[5] - 2.0 * f + power[3]) / (h * h * f) - gu * gu;
    double hvv = (power[7] - 2.0 * f + power[1]) / (h * h * f) - gv * gv;
    double huv = (power[8] - power[6] - power[2] + power[0]) / (4.0 * h * h * f) - gu * gv;
    double det = huu * hvv - huv * huv, slope = hypot(gu, gv), limit = lobe / 3.0;
    if (huu < 0.0 && det > 0.0) {
        step[0] = -(hvv * gu - huv * gv) / det;
        step[1] = -(huu * gv - huv * gu) / det;
    } else {
        step[0] = slope > 0.0 ? 0.05 * lobe * gu / slope : 0.0;
        step[1] = slope > 0.0 ? 0.05 * lobe * gv / slope : 0.0;
    }
    double size = hypot(step[0], step[1]);
    if (size > limit) {
        step[0] *= limit / size;
        step[1] *= limit / size;
    }
}

enum { CLIMB_LIMIT = 60 };

ev_vec3 ev_beam_climb(ev_beam_source *source, ev_vec3 from, bool cross, double *gain)
{
    double lobe = lobe_width(source), h = 2e-3 * lobe, u = from.x, v = from.y;
    double power[STENCIL], next[STENCIL] = {0}, step[2];
    stencil(source, u, v, h, cross, power);
    for (int pass = 0; pass < CLIMB_LIMIT && power[4] > 0.0; pass++) {
        climb_step(power, h, lobe, step);
        if (!(hypot(step[0], step[1]) > 1e-7 * lobe))
            break;
        double part = 1.0;
        for (; part > 1e-3; part *= 0.5) {
            stencil(source, u + part * step[0], v + part * step[1], h, cross, next);
            if (next[4] > power[4])
                break;
        }
        if (part <= 1e-3)
            break;
        u += part * step[0];
        v += part * step[1];
        for (int i = 0; i < STENCIL; i++)
            power[i] = next[i];
    }
    *gain = power[4];
    return direction_at(u, v);
}

/* The co-polar power along a line, relative to the peak's; t is the offset from the peak. */
typedef struct profile {
    ev_beam_source *source;
    ev_vec3 peak;
    double peak_power, sign;
    bool along_y;
} profile;

enum { BLOCK = 48 };

static void look(const profile *line, const double *t, int count, double *power)
{
    ev_vec3 directions[BLOCK];
    ev_beam_field fields[BLOCK];
    for (int i = 0; i < count; i++) {
        double offset = line->sign * t[i];
        directions[i] = line->along_y ? direction_at(line->peak.x, line->peak.y + offset)
                                      : direction_at(line->peak.x + offset, line->peak.y);
    }
    ev_beam_fields(line->source, directions, count, fields);
    for (int i = 0; i < count; i++)
        power[i] = square_of(fields[i].co) / line->peak_power;
}

static double look_once(const profile *line, double t)
{
    double power;
    look(line, &t, 1, &power);
    return power;
}

/* Where the power crosses 1/2 between two samples: regula falsi, halving the end that stays. */
static double find_half(const profile *line, double low, double low_power, double high,
                        double high_power)
{
    double a = low, b = high, fa = low_power - 0.5, fb = high_power - 0.5, t = low;
    for (int pass = 0; pass < 40 && b - a > 1e-13; pass++) {
        t = (a * fb - b * fa) / (fb - fa);
        double f = look_once(line, t) - 0.5;
        if (fabs(f) < 1e-13)
            break;
        if (f > 0.0) {
            a = t;
            fa = f;
            fb *= 0.5;
        } else {
            b = t;
            fb = f;
            fa *= 0.5;
        }
    }
    return t;
}

/* An extreme near t by parabolas of shrinking reach. */
static double find_extreme(const profile *line, double t, double reach, double *power)
{
    for (int pass = 0; pass < 6; pass++) {
        double at[3] = {t - reach, t, t + reach}, f[3];
        look(line, at, 3, f);
        double bend = f[0] - 2.0 * f[1] + f[2];
        double move = bend != 0.0 ? 0.5 * (f[0] - f[2]) / bend : 0.0;
        t += reach * fmax(-1.0, fmin(1.0, move));
        reach *= 0.3;
    }
    *power = look_once(line, t);
    return t;
}

enum { STEPS_A_LOBE = 10, LOBES_AT_MOST = 60 };

/* What one more sample f[2] after f[0], f[1] (at t, spaced `step`) says; true when all is found. */
static bool note_sample(const profile *line, const double f[3], double t, double step,
                        ev_beam_side *side)
{
    if (isnan(side->half_power) && f[2] < 0.5)
        side->half_power = line->sign * find_half(line, t - step, f[1], t, f[2]);
    if (isnan(side->null)) {
        if (f[1] <= f[0] && f[1] < f[2])
            side->null = line->sign * find_extreme(line, t - step, step, &side->null_power);
        return false;
    }
    if (f[1] >= f[0] && f[1] > f[2]) {
        side->sidelobe = line->sign * find_extreme(line, t - step, step, &side->sidelobe_power);
        return true;
    }
    return false;
}

ev_beam_side ev_beam_walk(ev_beam_source *source, ev_vec3 peak, double peak_power, bool along_y,
                          double sign)
{
    profile line = {source, peak, peak_power, sign, along_y};
    ev_beam_side side = {NAN, NAN, NAN, NAN, NAN};
    double step = lobe_width(source) / STEPS_A_LOBE, f[3] = {1.0, 1.0, 1.0};
    double other = along_y ? peak.x : peak.y, own = sign * (along_y ? peak.y : peak.x);
    double horizon = 0.9999 * sqrt(1.0 - other * other) - own;
    int limit = (int)fmin(LOBES_AT_MOST * STEPS_A_LOBE, horizon / step);
    for (int from = 1; from <= limit; from += BLOCK) {
        int count = limit - from + 1 < BLOCK ? limit - from + 1 : BLOCK;
        double t[BLOCK], power[BLOCK];
        for (int i = 0; i < count; i++)
            t[i] = step * (from + i);
        look(&line, t, count, power);
        for (int i = 0; i < count; i++) {
            f[0] = f[1];
            f[1] = f[2];
            f[2] = power[i];
            if (note_sample(&line, f, t[i], step, &side))
                return side;
        }
    }
    return side;
}

enum { CROSS_HALF = 6, CROSS_HALF_MOST = 24, CROSS_STEPS = 3 };

/* Highest sample of the square of `half` lobes each way; returns whether it lies well inside. */
static bool scan_cross(ev_beam_source *source, ev_vec3 peak, int half, ev_vec3 *best)
{
    int side = 2 * half * CROSS_STEPS + 1, count = side * side, highest = 0;
    double step = lobe_width(source) / CROSS_STEPS, power = -1.0;
    ev_vec3 *directions = malloc((size_t)count * sizeof *directions);
    ev_beam_field *fields = malloc((size_t)count * sizeof *fields);
    if (!directions || !fields)
        abort();
    for (int i = 0; i < count; i++)
        directions[i] = direction_at(peak.x + step * (i % side - side / 2),
                                     peak.y + step * (i / side - side / 2));
    ev_beam_fields(source, directions, count, fields);
    for (int i = 0; i < count; i++)
        if (square_of(fields[i].cross) > power) {
            power = square_of(fields[i].cross);
            highest = i;
        }
    *best = directions[highest];
    int column = abs(highest % side - side / 2), row = abs(highest / side - side / 2);
    free(directions);
    free(fields);
    return 5 * (column > row ? column : row) <= 4 * (side / 2);
}

ev_vec3 ev_beam_cross_peak(ev_beam_source *source, ev_vec3 peak, double *power)
{
    ev_vec3 best = peak;
    for (int half = CROSS_HALF; half <= CROSS_HALF_MOST; half *= 2)
        if (scan_cross(source, peak, half, &best))
            break;
    return ev_beam_climb(source, best, true, power);
}
