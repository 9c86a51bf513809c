/* Side-lobe limits; texts and rules in the header. Called by the commands and the Beam plate. */
#include "optics/beam_limit.h"

#include "base/vec3.h"

static double rad(double degrees)
{
    return degrees * EV_PI / 180.0;
}

static double deg(double radians)
{
    return radians * 180.0 / EV_PI;
}

ev_limit ev_limit_s465(double wavelengths)
{
    return (ev_limit){.kind = EV_LIMIT_S465, .wavelengths = wavelengths, .share = 1.0};
}

ev_limit ev_limit_s580(double wavelengths)
{
    return (ev_limit){.kind = EV_LIMIT_S580, .wavelengths = wavelengths, .share = 0.9};
}

bool ev_limit_table(const double *angle, const double *level_dbi, int count, ev_limit *limit)
{
    *limit = (ev_limit){.kind = EV_LIMIT_TABLE, .count = count, .share = 1.0};
    if (count < 2 || count > EV_LIMIT_CAPACITY)
        return false;
    for (int i = 0; i < count; i++) {
        if (!(angle[i] >= 0.0 && angle[i] <= EV_PI) || !isfinite(level_dbi[i]) ||
            (i > 0 && angle[i] < angle[i - 1]))
            return false;
        limit->angle[i] = angle[i];
        limit->level_dbi[i] = level_dbi[i];
    }
    return angle[0] < angle[count - 1];
}

bool ev_limit_applies(const ev_limit *limit)
{
    return limit->kind != EV_LIMIT_S580 || limit->wavelengths >= 50.0;
}

double ev_limit_start(const ev_limit *limit)
{
    double across = limit->wavelengths;
    if (limit->kind == EV_LIMIT_TABLE)
        return limit->angle[0];
    if (limit->kind == EV_LIMIT_S465 && across < 50.0)
        return rad(fmax(2.0, 114.0 * pow(across, -1.09)));
    return rad(fmax(1.0, 100.0 / across));
}

static double table_at(const ev_limit *limit, double angle)
{
    int last = limit->count - 1, high = 1;
    if (!(angle >= limit->angle[0] && angle <= limit->angle[last]))
        return NAN;
    while (high < last && angle >= limit->angle[high])
        high++;
    double from = limit->angle[high - 1], to = limit->angle[high];
    double low_level = limit->level_dbi[high - 1], level = limit->level_dbi[high];
    if (!(to > from))
        return level;
    double part = from > 0.0 ? log(angle / from) / log(to / from) : (angle - from) / (to - from);
    return low_level + part * (level - low_level);
}

double ev_limit_at(const ev_limit *limit, double angle)
{
    double phi = deg(fabs(angle));
    if (limit->kind == EV_LIMIT_TABLE)
        return table_at(limit, fabs(angle));
    if (!ev_limit_applies(limit) || !(phi >= deg(ev_limit_start(limit)) && phi <= 180.0))
        return NAN;
    if (phi > 48.0)
        return -10.0;
    double far = 32.0 - 25.0 * log10(phi);
    if (limit->kind == EV_LIMIT_S465 || phi > 26.3)
        return far;
    return phi <= 20.0 ? far - 3.0 : -3.5;
}

/* Height and place of the parabola's top through three samples of any spacing. */
static void top_of(const double *angle, const double *level, double *at, double *height)
{
    double h0 = angle[1] - angle[0], h1 = angle[2] - angle[1];
    double d0 = (level[1] - level[0]) / h0, d1 = (level[2] - level[1]) / h1;
    double bend = (d1 - d0) / (h0 + h1), slope = (d0 * h1 + d1 * h0) / (h0 + h1);
    double move = bend < 0.0 ? -0.5 * slope / bend : 0.0;
    *at = angle[1] + move;
    *height = level[1] + 0.5 * slope * move;
}

static void take_worst(double excess, double angle, double *worst, double *worst_angle)
{
    if (!(excess <= *worst)) { /* also when there is none yet */
        *worst = excess;
        *worst_angle = angle;
    }
}

static void judge_peak(const ev_limit *limit, const double *angle, const double *level,
                       ev_limit_result *result)
{
    double at, height;
    if (!(level[1] > level[0] && level[1] >= level[2]))
        return;
    top_of(angle, level, &at, &height);
    double allowed = ev_limit_at(limit, at);
    if (isnan(allowed))
        return;
    result->peak_count++;
    result->peaks_over += height > allowed;
    take_worst(height - allowed, at, &result->worst_peak_db, &result->worst_peak_angle);
}

ev_limit_result ev_limit_check(const ev_limit *limit, const double *angle, const double *level_dbi,
                               int count)
{
    ev_limit_result result = {.applies = ev_limit_applies(limit),
                              .share_within = 1.0,
                              .worst_db = NAN,
                              .worst_angle = NAN,
                              .worst_peak_db = NAN,
                              .worst_peak_angle = NAN};
    for (int i = 0; i < count; i++) {
        double allowed = ev_limit_at(limit, angle[i]);
        if (isnan(allowed) || isnan(level_dbi[i]))
            continue;
        result.sample_count++;
        take_worst(level_dbi[i] - allowed, angle[i], &result.worst_db, &result.worst_angle);
    }
    for (int i = 1; i + 1 < count; i++)
        judge_peak(limit, angle + i - 1, level_dbi + i - 1, &result);
    if (result.peak_count > 0)
        result.share_within = 1.0 - (double)result.peaks_over / result.peak_count;
    if (limit->share < 1.0) {
        result.met = result.share_within >= limit->share;
        result.worst_db = result.worst_peak_db;
        result.worst_angle = result.worst_peak_angle;
    } else {
        take_worst(result.worst_peak_db, result.worst_peak_angle, &result.worst_db,
                   &result.worst_angle);
        result.met = !(result.worst_db > 0.0);
    }
    result.met &= result.applies;
    return result;
}
