/* Used by property tests. */
#include "random_antenna.h"

static ev_vec3 random_shift(ev_random *random, double reach)
{
    return ev_vec3_make(ev_random_between(random, -reach, reach),
                        ev_random_between(random, -reach, reach),
                        ev_random_between(random, -reach, reach));
}

static void draw_main(ev_random *random, bool offset, ev_design *design)
{
    ev_main_design *main = &design->main;
    *main = (ev_main_design){.diameter = ev_random_log(random, 0.3, 100.0),
                             .focal_given = EV_GIVEN_F_OVER_D,
                             .f_over_d = offset ? ev_random_log(random, 0.45, 1.3)
                                                : ev_random_log(random, 0.28, 1.2)};
    if (offset)
        main->offset = main->diameter * ev_random_between(random, 0.5, 0.75) *
                       (ev_random_chance(random, 0.2) ? -1.0 : 1.0);
    if (ev_random_chance(random, 0.3))
        main->hole = main->diameter * ev_random_log(random, 0.01, 0.15);
    if (ev_random_chance(random, 0.3))
        main->surface_rms = 0.02 * ev_random_unit(random) * EV_LIGHT_SPEED / design->frequencies[0];
}

static void draw_sub(ev_random *random, ev_sub_shape shape, double wavelength, ev_design *design)
{
    ev_sub_design *sub = &design->sub;
    bool offset = design->main.offset != 0.0;
    *sub = ev_default_sub();
    sub->shape = shape;
    sub->magnification = ev_random_log(random, 1.8, offset ? 6.0 : 20.0);
    sub->interfocal = design->main.diameter * (offset ? ev_random_between(random, 0.15, 0.5)
                                                      : ev_random_between(random, 0.2, 0.6));
    if (offset && ev_random_chance(random, 0.7))
        sub->axis_tilt = ev_random_between(random, -0.1, 0.2);
    if (ev_random_chance(random, 0.4))
        sub->oversize = design->main.diameter * ev_random_log(random, 1e-3, 1e-2);
    if (ev_random_chance(random, 0.7))
        sub->shift = random_shift(random, ev_random_log(random, 0.01, 1.0) * wavelength);
    if (ev_random_chance(random, 0.4)) {
        double reach = ev_random_log(random, 0.01, 1.0) * wavelength / design->main.diameter;
        sub->tilt_x = ev_random_between(random, -reach, reach);
        sub->tilt_y = ev_random_between(random, -reach, reach);
    }
}

static void draw_feed(ev_random *random, double wavelength, const ev_design *design,
                      ev_feed_design *feed)
{
    double ratio = design->main.f_over_d;
    *feed = ev_default_feed();
    feed->pattern = ev_random_chance(random, 0.3) ? EV_PATTERN_GAUSSIAN : EV_PATTERN_COS_POWER;
    feed->edge_taper = ev_random_between(random, 4.0, 20.0);
    feed->polarization = (ev_polarization)ev_random_pick(random, 4);
    feed->aim = ev_random_chance(random, 0.7) ? EV_AIM_BISECT : EV_AIM_CENTRE;
    feed->roll = ev_random_chance(random, 0.2) ? ev_random_between(random, -1.0, 1.0) : 0.0;
    feed->toward_peak = ev_random_chance(random, 0.2);
    if (ev_random_chance(random, 0.7))
        feed->shift = random_shift(random, ev_random_log(random, 0.02, 2.0) * wavelength * ratio);
    if (ev_random_chance(random, 0.5))
        feed->defocus = ev_random_between(random, -2.0, 2.0) * wavelength * ratio;
    if (ev_random_chance(random, 0.3)) {
        feed->tilt_x = ev_random_between(random, -0.1, 0.1);
        feed->tilt_y = ev_random_between(random, -0.1, 0.1);
    }
    if (ev_random_chance(random, 0.4))
        feed->body = design->main.diameter * ev_random_log(random, 0.01, 0.1);
}

static void draw_struts(ev_random *random, ev_design *design)
{
    design->strut_count = ev_random_chance(random, 0.5) ? 1 + ev_random_pick(random, 2) : 0;
    for (int i = 0; i < design->strut_count; i++) {
        ev_strut_design *strut = &design->struts[i];
        double radius = 0.5 * design->main.diameter;
        *strut = ev_default_strut();
        strut->name[0] = (char)('a' + i);
        strut->name[1] = '\0';
        strut->count = 1 + ev_random_pick(random, 5);
        strut->width = radius * ev_random_log(random, 0.004, 0.05);
        strut->from = radius * ev_random_between(random, 0.06, 0.3);
        strut->to = radius * ev_random_between(random, 0.5, 1.1);
        strut->first = ev_random_between(random, 0.0, 6.28);
    }
}

static ev_design draw(ev_random *random, ev_layout_kind layout)
{
    bool offset = layout == EV_LAYOUT_OFFSET || layout >= EV_LAYOUT_OFFSET_CASSEGRAIN;
    bool dual = layout >= EV_LAYOUT_CASSEGRAIN;
    bool cassegrain = layout == EV_LAYOUT_CASSEGRAIN || layout == EV_LAYOUT_OFFSET_CASSEGRAIN;
    ev_design design = ev_default_design();
    draw_main(random, offset, &design);
    double waves = ev_random_log(random, 15.0, 2000.0);
    double wavelength = design.main.diameter / waves;
    design.frequencies[0] = EV_LIGHT_SPEED / wavelength;
    if (dual)
        draw_sub(random, cassegrain ? EV_SUB_HYPERBOLOID : EV_SUB_ELLIPSOID, wavelength, &design);
    draw_feed(random, wavelength, &design, &design.feeds[0]);
    draw_struts(random, &design);
    design.site = ev_default_site();
    design.site.present = ev_random_chance(random, 0.5);
    design.site.elevation = ev_random_between(random, 0.05, 1.5);
    design.ohmic = 0.2 * ev_random_unit(random);
    design.mismatch = 0.2 * ev_random_unit(random);
    ev_design_resolve(&design);
    return design;
}

ev_design ev_random_design(ev_random *random, ev_layout_kind layout, int *tries)
{
    for (;;) {
        ev_problem problems[16];
        ev_design design = draw(random, layout);
        if (tries)
            (*tries)++;
        int count = ev_design_check(&design, problems, 16), errors = 0;
        for (int i = 0; i < count; i++)
            errors += ev_problem_is_error(problems[i].id);
        if (errors == 0 && ev_design_layout(&design) == layout)
            return design;
    }
}

ev_design ev_design_in_place(const ev_design *design)
{
    ev_design placed = *design;
    ev_vec3 none = {0.0, 0.0, 0.0};
    placed.sub.shift = none;
    placed.sub.tilt_x = placed.sub.tilt_y = 0.0;
    for (int i = 0; i < placed.feed_count; i++) {
        ev_feed_design *feed = &placed.feeds[i];
        feed->shift = none;
        feed->tilt_x = feed->tilt_y = feed->defocus = feed->toward_x = feed->toward_y = 0.0;
    }
    return placed;
}
