/* Defaults and the choice groups of a design. Called by the scene for every edit. */
#include "optics/design.h"

#include "optics/geometry.h"

#include <string.h>

ev_sub_design ev_default_sub(void)
{
    return (ev_sub_design){.present = true,
                           .shape = EV_SUB_HYPERBOLOID,
                           .magnification = 5.0,
                           .shape_given = EV_GIVEN_MAGNIFICATION,
                           .interfocal = 0.4,
                           .derived = EV_DERIVED_DIAMETER};
}

ev_feed_design ev_default_feed(void)
{
    return (ev_feed_design){.name = "main",
                            .pattern = EV_PATTERN_COS_POWER,
                            .exponent = 2.0,
                            .edge_taper = 11.0,
                            .taper_given = EV_GIVEN_EDGE_TAPER,
                            .polarization = EV_POLARIZATION_X,
                            .aim = EV_AIM_BISECT,
                            .aim_direction = {0.0, 0.0, -1.0}};
}

ev_strut_design ev_default_strut(void)
{
    return (ev_strut_design){
        .name = "legs", .count = 4, .width = 0.01, .from = 0.05, .to = 0.6, .first = 0.25 * EV_PI};
}

ev_site_design ev_default_site(void)
{
    return (ev_site_design){
        .present = true, .elevation = EV_PI / 6.0, .ground = 290.0, .sky = 10.0};
}

ev_design ev_default_design(void)
{
    ev_design design = {.title = "Untitled",
                        .frequencies = {12e9},
                        .frequency_count = 1,
                        .main = {.diameter = 1.2,
                                 .focal_length = 0.54,
                                 .f_over_d = 0.45,
                                 .focal_given = EV_GIVEN_F_OVER_D},
                        .feed_count = 1};
    design.feeds[0] = ev_default_feed();
    ev_design_resolve(&design);
    return design;
}

ev_layout_kind ev_design_layout(const ev_design *design)
{
    bool offset = design->main.offset != 0.0;
    if (!design->sub.present)
        return offset ? EV_LAYOUT_OFFSET : EV_LAYOUT_PRIME_FOCUS;
    if (design->sub.shape == EV_SUB_HYPERBOLOID)
        return offset ? EV_LAYOUT_OFFSET_CASSEGRAIN : EV_LAYOUT_CASSEGRAIN;
    return offset ? EV_LAYOUT_OFFSET_GREGORIAN : EV_LAYOUT_GREGORIAN;
}

const char *ev_layout_name(ev_layout_kind kind)
{
    static const char *const names[] = {"prime_focus",       "offset",
                                        "cassegrain",        "gregorian",
                                        "offset_cassegrain", "offset_gregorian"};
    return names[kind];
}

static void resolve_main(ev_main_design *main)
{
    double diameter = main->diameter;
    if (main->offset_given == EV_GIVEN_CLEARANCE)
        main->offset = main->clearance + 0.5 * diameter;
    else
        main->clearance = main->offset - 0.5 * diameter;
    switch (main->focal_given) {
    case EV_GIVEN_FOCAL_LENGTH:
        break;
    case EV_GIVEN_F_OVER_D:
        main->focal_length = main->f_over_d * diameter;
        break;
    case EV_GIVEN_DEPTH:
        main->focal_length = diameter * diameter / (16.0 * main->depth);
        break;
    }
    if (main->focal_given != EV_GIVEN_F_OVER_D)
        main->f_over_d = main->focal_length / diameter;
    if (main->focal_given != EV_GIVEN_DEPTH)
        main->depth = diameter * diameter / (16.0 * main->focal_length);
}

/* M = (e + 1) / |e - 1| for both shapes (Hannan 1961). */
static double magnification_of(double e)
{
    return (e + 1.0) / fabs(e - 1.0);
}

static double eccentricity_of(ev_sub_shape shape, double m)
{
    if (!(m > 1.0))
        return NAN;
    return shape == EV_SUB_HYPERBOLOID ? (m + 1.0) / (m - 1.0) : (m - 1.0) / (m + 1.0);
}

/* Symmetric dual whose rim (radius r) is seen under theta0 from the prime focus: along the axis it
 * is r cot(theta0) from the prime focus and r cot(theta_sub) from the feed focus. */
static double magnification_from_sizes(const ev_design *design)
{
    double theta = ev_main_span(&design->main).top, radius = 0.5 * design->sub.diameter;
    double side = design->sub.shape == EV_SUB_HYPERBOLOID ? -1.0 : 1.0;
    double sub_angle = atan2(radius, design->sub.interfocal + side * radius / tan(theta));
    return tan(0.5 * theta) / tan(0.5 * sub_angle);
}

static void resolve_sub(ev_design *design)
{
    ev_sub_design *sub = &design->sub;
    bool symmetric = design->main.offset == 0.0;
    if (symmetric && sub->derived == EV_DERIVED_SHAPE) {
        sub->magnification = magnification_from_sizes(design);
        sub->eccentricity = eccentricity_of(sub->shape, sub->magnification);
        return;
    }
    if (sub->shape_given == EV_GIVEN_MAGNIFICATION)
        sub->eccentricity = eccentricity_of(sub->shape, sub->magnification);
    else
        sub->magnification = magnification_of(sub->eccentricity);
    ev_sub built;
    if (symmetric && sub->derived == EV_DERIVED_INTERFOCAL) {
        /* everything about the sub scales with the interfocal distance */
        ev_sub_design trial = *sub;
        trial.interfocal = 1.0;
        sub->interfocal = ev_sub_build(&design->main, &trial, &built)
                              ? sub->diameter / (2.0 * built.semi_long)
                              : NAN;
    } else {
        sub->diameter = ev_sub_build(&design->main, sub, &built)
                            ? 2.0 * fmax(built.semi_long, built.semi_short)
                            : NAN;
    }
}

static void resolve_taper(ev_feed_design *feed, double half_extent)
{
    if (feed->pattern != EV_PATTERN_COS_POWER)
        return;
    if (feed->taper_given == EV_GIVEN_EDGE_TAPER)
        feed->exponent = ev_pattern_exponent_from_taper(feed->edge_taper, half_extent);
    else
        feed->edge_taper = ev_pattern_taper_from_exponent(feed->exponent, half_extent);
}

void ev_design_resolve(ev_design *design)
{
    resolve_main(&design->main);
    if (design->sub.present)
        resolve_sub(design);
    double half_extent = ev_design_half_extent(design);
    for (int i = 0; i < design->feed_count; i++)
        resolve_taper(&design->feeds[i], half_extent);
}
