/* Feed patterns. Called when an antenna is built and once a ray; knows angles only. */
#include "optics/pattern.h"

#include "optics/quadrature.h"

#include <assert.h>
#include <stddef.h>

enum { SPHERE_PIECES = 16, SPHERE_NODES = 16 };

double ev_pattern_exponent_from_taper(double taper_db, double angle)
{
    double loss = -10.0 * log10(cos(angle));
    return cos(angle) > 0.0 && loss > 0.0 ? taper_db / loss : NAN;
}

double ev_pattern_taper_from_exponent(double exponent, double angle)
{
    return cos(angle) > 0.0 ? -10.0 * exponent * log10(cos(angle)) : INFINITY;
}

/* Slope at the middle of three points of the parabola through them, limited so that the cubic
 * rises and falls only where the data do. */
static double middle_slope(double h0, double d0, double h1, double d1)
{
    double slope = (h1 * d0 + h0 * d1) / (h0 + h1);
    if (d0 * d1 <= 0.0)
        return d0 == 0.0 || d1 == 0.0 ? 0.0 : slope;
    double limit = 3.0 * fmin(fabs(d0), fabs(d1));
    return copysign(fmin(fabs(slope), limit), d0);
}

/* The pattern is even about the axis, so a table that starts there starts flat. */
static void fill_slopes(int count, const double *theta, const double *value, double *slope)
{
    for (int i = 1; i + 1 < count; i++) {
        double h0 = theta[i] - theta[i - 1], h1 = theta[i + 1] - theta[i];
        slope[i] =
            middle_slope(h0, (value[i] - value[i - 1]) / h0, h1, (value[i + 1] - value[i]) / h1);
    }
    slope[0] = 0.0;
    if (count < 2)
        return;
    int n = count - 1;
    double last = (value[n] - value[n - 1]) / (theta[n] - theta[n - 1]);
    slope[n] = count > 2 ? 2.0 * last - slope[n - 1] : last;
    if (slope[n] * last < 0.0 || fabs(slope[n]) > 3.0 * fabs(last))
        slope[n] = last;
}

static double hermite(double h, double t, double v0, double v1, double s0, double s1)
{
    double u = 1.0 - t;
    return v0 * u * u * (1.0 + 2.0 * t) + v1 * t * t * (3.0 - 2.0 * t) +
           h * t * u * (s0 * u - s1 * t);
}

static ev_pattern_level table_level(const ev_pattern_table *table, double theta)
{
    int low = 0, high = table->count - 1;
    if (theta > table->theta[high])
        return (ev_pattern_level){0.0, 0.0, 0.0};
    double at = fmax(theta, table->theta[0]);
    while (high - low > 1) {
        int middle = (low + high) / 2;
        *(at < table->theta[middle] ? &high : &low) = middle;
    }
    double h = table->theta[high] - table->theta[low];
    double t = h > 0.0 ? (at - table->theta[low]) / h : 0.0;
    double e = hermite(h, t, table->e_db[low], table->e_db[high], table->e_slope[low],
                       table->e_slope[high]);
    double g = hermite(h, t, table->h_db[low], table->h_db[high], table->h_slope[low],
                       table->h_slope[high]);
    double phase = hermite(h, t, table->phase[low], table->phase[high], table->phase_slope[low],
                           table->phase_slope[high]);
    return (ev_pattern_level){pow(10.0, 0.1 * e), pow(10.0, 0.1 * g), phase};
}

ev_pattern_level ev_pattern_at(const ev_pattern *pattern, double theta)
{
    if (!(theta <= pattern->end))
        return (ev_pattern_level){0.0, 0.0, 0.0};
    double level = 0.0;
    switch (pattern->kind) {
    case EV_PATTERN_COS_POWER:
        level = pattern->norm * pow(fmax(cos(theta), 0.0), pattern->exponent);
        break;
    case EV_PATTERN_GAUSSIAN:
        level = pattern->norm * exp(-pattern->rate * theta * theta);
        break;
    case EV_PATTERN_TABLE: {
        assert(pattern->table);
        ev_pattern_level found = table_level(pattern->table, theta);
        found.e *= pattern->norm;
        found.h *= pattern->norm;
        return found;
    }
    }
    return (ev_pattern_level){level, level, 0.0};
}

ev_pattern_level ev_pattern_toward(const ev_pattern *pattern, double along, double across)
{
    if (pattern->kind != EV_PATTERN_COS_POWER)
        return ev_pattern_at(pattern, atan2(across, along));
    double level = along > 0.0 ? pattern->norm * pow(along, pattern->exponent) : 0.0;
    return (ev_pattern_level){level, level, 0.0};
}

/* Half the integral of the level over [from, to] with sin(theta): a share of the sphere. Tables
 * are split at their entries, where the cubic changes. */
static double piece_share(const ev_pattern *pattern, const ev_gauss *gauss, double from, double to)
{
    double sum = 0.0;
    for (int i = 0; i < gauss->count; i++) {
        double theta = from + (to - from) * gauss->x[i];
        ev_pattern_level level = ev_pattern_at(pattern, theta);
        sum += gauss->weight[i] * 0.5 * (level.e + level.h) * sin(theta);
    }
    return 0.5 * (to - from) * sum;
}

static double integrate_share(const ev_pattern *pattern, double to)
{
    ev_gauss gauss;
    double end = fmin(to, pattern->end), sum = 0.0;
    const ev_pattern_table *table = pattern->kind == EV_PATTERN_TABLE ? pattern->table : NULL;
    ev_gauss_make(table ? 8 : SPHERE_NODES, &gauss);
    int pieces = table ? table->count : SPHERE_PIECES;
    double from = 0.0;
    for (int i = 0; i < pieces && from < end; i++) {
        double part = (i + 1.0) / pieces; /* graded toward the axis: narrow patterns */
        double next = fmin(table ? table->theta[i] : pattern->end * part * part * part, end);
        sum += piece_share(pattern, &gauss, from, next);
        from = next;
    }
    return sum;
}

void ev_pattern_table_prepare(ev_pattern_table *table)
{
    fill_slopes(table->count, table->theta, table->e_db, table->e_slope);
    fill_slopes(table->count, table->theta, table->h_db, table->h_slope);
    fill_slopes(table->count, table->theta, table->phase, table->phase_slope);
    ev_pattern raw = {.kind = EV_PATTERN_TABLE,
                      .norm = 1.0,
                      .end = table->theta[table->count - 1],
                      .table = table};
    table->mean_power = integrate_share(&raw, EV_PI);
}

ev_pattern ev_pattern_make(const ev_feed_design *feed, double half_extent)
{
    ev_pattern pattern = {.kind = feed->pattern, .norm = 1.0, .end = EV_PI};
    switch (feed->pattern) {
    case EV_PATTERN_COS_POWER:
        pattern.exponent = feed->exponent;
        pattern.norm = 2.0 * (feed->exponent + 1.0);
        pattern.end = 0.5 * EV_PI;
        break;
    case EV_PATTERN_GAUSSIAN:
        pattern.rate = 0.1 * log(10.0) * feed->edge_taper / (half_extent * half_extent);
        pattern.norm = 1.0 / integrate_share(&pattern, EV_PI);
        break;
    case EV_PATTERN_TABLE:
        pattern.table = feed->table;
        pattern.end = feed->table->theta[feed->table->count - 1];
        pattern.norm = 1.0 / feed->table->mean_power;
        break;
    }
    return pattern;
}

double ev_pattern_share_within(const ev_pattern *pattern, double theta)
{
    if (pattern->kind == EV_PATTERN_COS_POWER)
        return 1.0 - pow(fmax(cos(fmin(theta, pattern->end)), 0.0), pattern->exponent + 1.0);
    return integrate_share(pattern, theta);
}

double ev_pattern_angle_of_share(const ev_pattern *pattern, double share)
{
    if (pattern->kind == EV_PATTERN_COS_POWER)
        return acos(pow(fmax(1.0 - share, 0.0), 1.0 / (pattern->exponent + 1.0)));
    double low = 0.0, high = pattern->end;
    for (int i = 0; i < 50; i++) {
        double middle = 0.5 * (low + high);
        *(integrate_share(pattern, middle) < share ? &low : &high) = middle;
    }
    return 0.5 * (low + high);
}
