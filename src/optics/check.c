/* What is wrong or doubtful with a design. Called by the scene after every edit; words for each
 * problem live with the scene's messages. */
#include "optics/antenna.h"
#include "optics/aperture.h"
#include "optics/geometry.h"

#include <stdio.h>

typedef struct report {
    ev_problem *problems;
    int count, capacity;
} report;

static void add(report *to, ev_problem_id id, const char *owner, const char *member, double a,
                double b)
{
    if (to->count >= to->capacity)
        return;
    ev_problem *problem = &to->problems[to->count++];
    *problem = (ev_problem){.id = id, .value = {a, b}};
    snprintf(problem->parameter, sizeof problem->parameter, "%s%s", owner, member);
}

static bool need_positive(report *to, const char *owner, const char *member, double value)
{
    if (value > 0.0 && isfinite(value))
        return true;
    ev_problem_id id = isfinite(value) ? EV_PROBLEM_NOT_POSITIVE : EV_PROBLEM_NOT_FINITE;
    add(to, id, owner, member, value, 0.0);
    return false;
}

static bool need_finite(report *to, const char *owner, const char *member, double value)
{
    if (isfinite(value))
        return true;
    add(to, EV_PROBLEM_NOT_FINITE, owner, member, value, 0.0);
    return false;
}

static bool check_main(report *to, const ev_design *design)
{
    const ev_main_design *main = &design->main;
    bool sound = design->frequency_count > 0;
    for (int i = 0; i < design->frequency_count; i++)
        sound &= need_positive(to, "frequency", "", design->frequencies[i]);
    sound &= need_positive(to, "main.", "diameter", main->diameter);
    if (main->focal_given == EV_GIVEN_DEPTH && main->offset != 0.0)
        add(to, EV_PROBLEM_DEPTH_WITH_OFFSET, "main.", "depth", main->depth, 0.0);
    static const char *const members[] = {"focal_length", "f_over_d", "depth"};
    const double given[] = {main->focal_length, main->f_over_d, main->depth};
    sound =
        sound && need_positive(to, "main.", members[main->focal_given], given[main->focal_given]);
    sound = sound && need_positive(to, "main.", "focal_length", main->focal_length);
    sound &= need_finite(to, "main.", "offset", main->offset);
    sound &= need_finite(to, "main.", "surface_rms", main->surface_rms);
    if (!(main->hole >= 0.0 && main->hole < main->diameter)) {
        add(to, EV_PROBLEM_HOLE_TOO_LARGE, "main.", "hole", main->hole, main->diameter);
        sound = false;
    }
    return sound;
}

static const char *given_shape(const ev_sub_design *sub)
{
    return sub->shape_given == EV_GIVEN_MAGNIFICATION ? "magnification" : "eccentricity";
}

/* Where the widened rim reaches beyond the conic's own width there is no mirror to add. */
static bool rim_is_on_conic(const ev_sub *sub)
{
    enum { ANGLES = 24 };
    for (int i = 0; i < ANGLES; i++) {
        ev_vec3 point = ev_sub_rim_point(sub, 2.0 * EV_PI * i / ANGLES);
        if (!(fabs(ev_conic_side(&sub->placed, point)) <= 1e-6 * sub->semi_long))
            return false;
    }
    return true;
}

static bool check_sub(report *to, const ev_design *design)
{
    const ev_sub_design *sub = &design->sub;
    bool symmetric = design->main.offset == 0.0;
    if (symmetric && sub->axis_tilt != 0.0)
        add(to, EV_PROBLEM_SUB_TILT_ON_SYMMETRIC, "sub.", "axis_tilt", sub->axis_tilt, 0.0);
    if (!symmetric && sub->derived != EV_DERIVED_DIAMETER)
        add(to, EV_PROBLEM_SUB_DIAMETER_ON_OFFSET, "sub.", "diameter", sub->diameter, 0.0);
    double e = sub->eccentricity;
    bool fits = sub->shape == EV_SUB_HYPERBOLOID ? e > 1.0 && isfinite(e) : e > 0.0 && e < 1.0;
    if (!fits && sub->derived != EV_DERIVED_SHAPE) {
        add(to, EV_PROBLEM_SUB_SHAPE, "sub.", given_shape(sub), e, 0.0);
        return false;
    }
    if (sub->derived != EV_DERIVED_INTERFOCAL &&
        !need_positive(to, "sub.", "interfocal", sub->interfocal))
        return false;
    if (sub->derived != EV_DERIVED_DIAMETER &&
        !need_positive(to, "sub.", "diameter", sub->diameter))
        return false;
    ev_sub built;
    if (!fits || !ev_sub_build(&design->main, sub, &built)) {
        add(to, EV_PROBLEM_SUB_IMPOSSIBLE, "sub.", "shape", sub->interfocal, sub->diameter);
        return false;
    }
    double size = 2.0 * (fmax(built.semi_long, built.semi_short) + sub->oversize);
    if (!(size < design->main.diameter)) {
        add(to, EV_PROBLEM_SUB_LARGER_THAN_DISH, "sub.", "shape", size, design->main.diameter);
        return false;
    }
    if (!need_finite(to, "sub.", "shift",
                     sub->shift.x + sub->shift.y + sub->shift.z + sub->tilt_x + sub->tilt_y))
        return false;
    if (!rim_is_on_conic(&built)) {
        add(to, EV_PROBLEM_SUB_OVERSIZE, "sub.", "oversize", sub->oversize, 0.0);
        return false;
    }
    return true;
}

/* How deep the phase centre is behind the surface that it should light (m), or <= 0. */
static double depth_in_mirror(const ev_antenna *antenna, const ev_feed *feed)
{
    ev_vec3 at = feed->position;
    if (!antenna->dual) {
        bool over = hypot(at.x - antenna->offset, at.y) <= antenna->radius;
        double depth = ev_main_point(antenna, at.x, at.y).z - at.z;
        return over ? depth : at.z < 0.0 ? -at.z : -1.0;
    }
    /* a hyperboloid's feed sees its outside, an ellipsoid's its inside */
    const ev_sub *sub = &antenna->sub;
    bool behind = ev_conic_contains(&sub->placed, at) == (sub->shape == EV_SUB_HYPERBOLOID);
    return behind ? fabs(ev_conic_side(&sub->placed, at)) : -1.0;
}

static bool check_feed(report *to, const ev_design *design, int index, double half_extent)
{
    const ev_feed_design *feed = &design->feeds[index];
    char owner[EV_NAME_CAPACITY + 8];
    bool sound = true;
    snprintf(owner, sizeof owner, "feeds.%s.", feed->name);
    bool by_taper =
        feed->taper_given == EV_GIVEN_EDGE_TAPER || feed->pattern == EV_PATTERN_GAUSSIAN;
    if (feed->pattern == EV_PATTERN_TABLE) {
        if (!feed->table || feed->table->count < 1 || !(feed->table->mean_power > 0.0)) {
            add(to, EV_PROBLEM_FEED_WITHOUT_TABLE, owner, "table", 0.0, 0.0);
            sound = false;
        }
    } else if (by_taper) {
        sound &= need_positive(to, owner, "edge_taper", feed->edge_taper);
        if (feed->pattern == EV_PATTERN_COS_POWER && !(half_extent < 0.5 * EV_PI - 1e-9)) {
            add(to, EV_PROBLEM_TAPER_IMPOSSIBLE, owner, "edge_taper", half_extent, 0.0);
            sound = false;
        }
    } else if (!(feed->exponent >= 0.0 && isfinite(feed->exponent))) {
        sound = need_positive(to, owner, "exponent", feed->exponent);
    }
    ev_vec3 aim = feed->aim_direction;
    if (feed->aim == EV_AIM_DIRECTION && !(ev_vec3_dot(aim, aim) > 0.0)) {
        add(to, EV_PROBLEM_FEED_AIM, owner, "aim", 0.0, 0.0);
        sound = false;
    }
    double x = sin(feed->toward_x), y = sin(feed->toward_y);
    if (!feed->toward_peak && !(x * x + y * y < 1.0 && fabs(feed->toward_x) < 0.5 * EV_PI &&
                                fabs(feed->toward_y) < 0.5 * EV_PI)) {
        add(to, EV_PROBLEM_TOWARD, owner, "toward", feed->toward_x, feed->toward_y);
        sound = false;
    }
    sound &= need_finite(to, owner, "defocus", feed->defocus);
    sound &= need_finite(to, owner, "shift",
                         feed->shift.x + feed->shift.y + feed->shift.z + feed->tilt_x +
                             feed->tilt_y + feed->roll);
    return sound;
}

static void check_struts(report *to, const ev_design *design)
{
    for (int i = 0; i < design->strut_count; i++) {
        const ev_strut_design *strut = &design->struts[i];
        char owner[EV_NAME_CAPACITY + 8];
        snprintf(owner, sizeof owner, "struts.%s.", strut->name);
        if (!(strut->from < strut->to))
            add(to, EV_PROBLEM_STRUT_RADII, owner, "from", strut->from, strut->to);
    }
}

static int error_count(const report *all)
{
    int count = 0;
    for (int i = 0; i < all->count; i++)
        count += ev_problem_is_error(all->problems[i].id);
    return count;
}

static void check_placement(report *to, const ev_design *design, const ev_antenna *antenna)
{
    for (int i = 0; i < antenna->feed_count; i++) {
        char owner[EV_NAME_CAPACITY + 8];
        double depth = depth_in_mirror(antenna, &antenna->feeds[i]);
        snprintf(owner, sizeof owner, "feeds.%s.", design->feeds[i].name);
        if (depth >= 0.0)
            add(to, EV_PROBLEM_FEED_IN_MIRROR, owner, "shift", depth, 0.0);
    }
}

enum { LIT_ANGLES = 12 };

static bool lights_anything(const ev_antenna *antenna, int feed)
{
    for (int i = 0; i < 2 * LIT_ANGLES; i++) {
        double r = antenna->radius * (i < LIT_ANGLES ? 0.5 : 1.0);
        double phi = 2.0 * EV_PI * i / LIT_ANGLES;
        ev_sample sample =
            ev_aperture_sample(antenna, feed, antenna->offset + r * cos(phi), r * sin(phi));
        if (sample.density > 0.0)
            return true;
    }
    return ev_aperture_sample(antenna, feed, antenna->offset, 0.0).density > 0.0;
}

static void warn_feeds(report *to, const ev_design *design, const ev_antenna *antenna)
{
    for (int i = 0; i < antenna->feed_count; i++) {
        const ev_feed *feed = &antenna->feeds[i];
        char owner[EV_NAME_CAPACITY + 8];
        snprintf(owner, sizeof owner, "feeds.%s.", design->feeds[i].name);
        if (!lights_anything(antenna, i)) {
            add(to, EV_PROBLEM_FEED_MISSES, owner, "aim", 0.0, 0.0);
            continue;
        }
        if (feed->pattern.kind == EV_PATTERN_TABLE && feed->pattern.end < EV_PI)
            add(to, EV_PROBLEM_TABLE_ENDS, owner, "table", feed->pattern.end, 0.0);
        ev_sample centre = ev_aperture_sample(antenna, i, antenna->offset, 0.0);
        ev_vec3 lit = antenna->dual ? centre.sub_point : centre.point;
        double waves = ev_vec3_length(ev_vec3_sub(lit, feed->position)) / antenna->wavelength;
        if (waves < 2.0)
            add(to, EV_PROBLEM_FEED_NEAR, owner, "shift", waves, 0.0);
    }
}

static void warn(report *to, const ev_design *design, const ev_antenna *antenna)
{
    double across = 2.0 * antenna->radius / antenna->wavelength;
    if (across < 10.0)
        add(to, EV_PROBLEM_DISH_SMALL, "main.", "diameter", across, 0.0);
    double sub = antenna->layout.sub_short_axis / antenna->wavelength;
    if (antenna->dual && sub < 5.0)
        add(to, EV_PROBLEM_SUB_SMALL, "sub.", "shape", sub, 0.0);
    double rim = antenna->layout.sub_short_axis + 2.0 * antenna->sub.oversize;
    if (antenna->dual && antenna->offset == 0.0 && design->main.hole > rim)
        add(to, EV_PROBLEM_HOLE_IN_CONE, "main.", "hole", design->main.hole, rim);
    double low_edge = antenna->offset - antenna->radius;
    if (!antenna->dual && antenna->offset != 0.0 && low_edge < 0.0)
        add(to, EV_PROBLEM_CLEARANCE, "main.", "offset", -low_edge, 0.0);
    warn_feeds(to, design, antenna);
}

int ev_design_check(const ev_design *design, ev_problem *problems, int capacity)
{
    report all = {.problems = problems, .capacity = capacity};
    bool sound = check_main(&all, design);
    if (sound && design->sub.present)
        sound = check_sub(&all, design);
    if (design->feed_count < 1)
        add(&all, EV_PROBLEM_NO_FEED, "feeds", "", 0.0, 0.0);
    double half_extent = sound ? ev_design_half_extent(design) : NAN;
    for (int i = 0; sound && i < design->feed_count; i++)
        check_feed(&all, design, i, half_extent);
    check_struts(&all, design);
    if (error_count(&all) > 0 || !sound)
        return all.count;
    static _Thread_local ev_antenna antenna; /* large; not shared, and its content not kept */
    ev_antenna_build(design, design->frequencies[0], &antenna);
    check_placement(&all, design, &antenna);
    if (error_count(&all) == 0)
        warn(&all, design, &antenna);
    return all.count;
}
