/* The budget's integrals over a single mirror against GSL quadrature of the definitions, written
 * out here from vectors: cos^n and gaussian feeds, symmetric and offset dishes, in place and out of
 * it; what a subreflector misses; the ground seen past the rim by brute force. */
#include "check.h"
#include "fixture.h"

#include <complex.h>
#include <gsl/gsl_integration.h>

typedef struct dish {
    double radius, offset, f, hole, k;
    ev_vec3 feed, axis, ex, ey; /* ex x ey = axis */
    bool gaussian;
    double exponent, rate, norm;
    ev_polarization polarization;
} dish;

/* Amplitude, path and field of the ray to the main reflector over (x, y). */
typedef struct ray {
    double density, path;
    ev_vec3 point, field; /* field: real, linear polarization, after the reflection */
} ray;

static double gain(const dish *d, double theta)
{
    if (d->gaussian)
        return d->norm * exp(-d->rate * theta * theta);
    return theta < 0.5 * EV_PI ? 2.0 * (d->exponent + 1.0) * pow(cos(theta), d->exponent) : 0.0;
}

static ray ray_to(const dish *d, double x, double y)
{
    ray r = {.point = {x, y, (x * x + y * y) / (4.0 * d->f)}};
    ev_vec3 arm = ev_vec3_sub(r.point, d->feed);
    r.path = ev_vec3_length(arm);
    ev_vec3 u = ev_vec3_scale(1.0 / r.path, arm);
    ev_vec3 n = ev_vec3_unit(ev_vec3_make(-x / (2.0 * d->f), -y / (2.0 * d->f), 1.0));
    double theta = ev_vec3_angle(u, d->axis);
    double phi = atan2(ev_vec3_dot(u, d->ey), ev_vec3_dot(u, d->ex));
    r.density = gain(d, theta) / (4.0 * EV_PI) * -ev_vec3_dot(u, n) / n.z / (r.path * r.path);
    /* Ludwig's third definition, in spherical components about the feed's axis */
    ev_vec3 out = ev_vec3_along(ev_vec3_scale(cos(phi), d->ex), sin(phi), d->ey);
    ev_vec3 up = ev_vec3_along(ev_vec3_scale(cos(theta), out), -sin(theta), d->axis);
    ev_vec3 turn = ev_vec3_along(ev_vec3_scale(-sin(phi), d->ex), cos(phi), d->ey);
    bool y_polarized = d->polarization == EV_POLARIZATION_Y;
    double by_up = y_polarized ? sin(phi) : cos(phi), by_turn = y_polarized ? cos(phi) : -sin(phi);
    ev_vec3 e = ev_vec3_along(ev_vec3_scale(by_up, up), by_turn, turn);
    r.field = ev_vec3_along(ev_vec3_scale(-1.0, e), 2.0 * ev_vec3_dot(e, n), n);
    return r;
}

typedef struct sums {
    double power, amplitude, co;
    double _Complex wanted, peak;
} sums;

/* Gauss in radius, equal angles: on other nodes and more of them than the product's. */
static sums integrate(const dish *d, ev_vec3 wanted, ev_vec3 peak)
{
    enum { RADII = 90, ANGLES = 301 };
    gsl_integration_glfixed_table *rule = gsl_integration_glfixed_table_alloc(RADII);
    sums all = {0};
    for (size_t i = 0; i < RADII; i++) {
        double r, weight;
        gsl_integration_glfixed_point(d->hole, d->radius, i, &r, &weight, rule);
        for (int j = 0; j < ANGLES; j++) {
            double phi = 2.0 * EV_PI * (j + 0.25) / ANGLES,
                   area = weight * r * 2.0 * EV_PI / ANGLES;
            ray at = ray_to(d, d->offset + r * cos(phi), r * sin(phi));
            double amplitude = area * sqrt(at.density);
            all.power += area * at.density;
            all.amplitude += amplitude;
            all.co += amplitude * (d->polarization == EV_POLARIZATION_Y ? at.field.y : at.field.x);
            all.wanted += amplitude * cexp(-I * d->k * (at.path - ev_vec3_dot(wanted, at.point)));
            all.peak += amplitude * cexp(-I * d->k * (at.path - ev_vec3_dot(peak, at.point)));
        }
    }
    gsl_integration_glfixed_table_free(rule);
    return all;
}

static double bell(double theta, void *context)
{
    return 0.5 * exp(-*(double *)context * theta * theta) * sin(theta);
}

static double bell_norm(double rate)
{
    gsl_integration_workspace *work = gsl_integration_workspace_alloc(1000);
    gsl_function function = {bell, &rate};
    double value, error;
    gsl_integration_qag(&function, 0.0, EV_PI, 1e-13, 1e-11, 1000, GSL_INTEG_GAUSS61, work, &value,
                        &error);
    gsl_integration_workspace_free(work);
    return 1.0 / value;
}

/* The frame of the feed by its own rules: aimed between the two extreme rim rays, turned about x
 * and y, ex the direction square to the axis nearest to x as it was before. */
static dish dish_of(const ev_design *design)
{
    const ev_feed_design *feed = &design->feeds[0];
    dish d = {.radius = 0.5 * design->main.diameter,
              .offset = design->main.offset,
              .f = design->main.focal_length,
              .hole = 0.5 * design->main.hole,
              .k = 2.0 * EV_PI * design->frequencies[0] / EV_LIGHT_SPEED,
              .gaussian = feed->pattern == EV_PATTERN_GAUSSIAN,
              .exponent = feed->exponent,
              .polarization = feed->polarization};
    double top = 2.0 * atan((d.offset + d.radius) / (2.0 * d.f));
    double bottom = 2.0 * atan((d.offset - d.radius) / (2.0 * d.f)), half = 0.5 * (top - bottom);
    double lean = 0.5 * (top + bottom), cx = cos(feed->tilt_x), sx = sin(feed->tilt_x);
    ev_vec3 axis = {sin(lean), 0.0, -cos(lean)}, ex = {cos(lean), 0.0, sin(lean)};
    d.axis = ev_vec3_make(axis.x, -sx * axis.z, cx * axis.z);
    d.ex = ev_vec3_make(ex.x, -sx * ex.z, cx * ex.z);
    d.ey = ev_vec3_cross(d.axis, d.ex);
    d.feed = ev_vec3_add(ev_vec3_make(0.0, 0.0, d.f), feed->shift);
    d.feed = ev_vec3_along(d.feed, -feed->defocus, d.axis);
    d.rate = 0.1 * feed->edge_taper * log(10.0) / (half * half);
    d.norm = d.gaussian ? bell_norm(d.rate) : 1.0;
    return d;
}

static void compare(const ev_design *design)
{
    ev_feed_budget budget = ev_fixture_budget(design);
    dish d = dish_of(design);
    ev_vec3 up = {0.0, 0.0, 1.0};
    sums all = integrate(&d, up, budget.peak);
    double area = EV_PI * d.radius * d.radius, size = all.amplitude * all.amplitude;
    const ev_efficiency *eta = &budget.efficiency;
    assert_near(eta->spillover, all.power, 1e-8);
    assert_near(budget.power[EV_FATE_PAST_MAIN], 1.0 - all.power, 1e-8);
    assert_near(eta->taper, size / (area * all.power), 1e-6);
    assert_near(eta->phase, pow(cabs(all.peak), 2.0) / size, 1e-6);
    assert_near(eta->phase * eta->pointing, pow(cabs(all.wanted), 2.0) / size, 1e-6);
    assert_near(eta->polarization, all.co * all.co / size, 1e-6);
    double total = eta->spillover * eta->taper * eta->phase * eta->polarization;
    assert_near(eta->total, total, 1e-9);
    assert_near(budget.gain_dbi, 10.0 * log10(pow(d.k * d.radius, 2.0) * total), 1e-6);
}

static void test_single_mirrors(void **state)
{
    (void)state;
    const ev_fixture fixtures[] = {EV_FIXTURE_PRIME, EV_FIXTURE_OFFSET};
    for (int i = 0; i < 2; i++)
        for (int pattern = 0; pattern < 2; pattern++)
            for (int place = 0; place < 4; place++) {
                ev_design design = ev_fixture_design(fixtures[i]);
                ev_feed_design *feed = &design.feeds[0];
                double wave = EV_LIGHT_SPEED / design.frequencies[0];
                feed->pattern = pattern ? EV_PATTERN_GAUSSIAN : EV_PATTERN_COS_POWER;
                feed->edge_taper = 11.5;
                feed->taper_given = EV_GIVEN_EDGE_TAPER;
                feed->polarization = place % 2 ? EV_POLARIZATION_Y : EV_POLARIZATION_X;
                feed->defocus = place == 1 ? 0.6 * wave : 0.0;
                if (place >= 2)
                    feed->shift = ev_vec3_make(0.8 * wave, -0.5 * wave, 0.3 * wave);
                feed->tilt_x = place == 3 ? 0.05 : 0.0;
                design.main.hole = place == 3 ? 0.1 * design.main.diameter : 0.0;
                ev_design_resolve(&design);
                compare(&design);
            }
}

/* Past a symmetric subreflector: the gaussian's tail beyond its half angle. */
static void test_past_the_sub(void **state)
{
    (void)state;
    const ev_fixture fixtures[] = {EV_FIXTURE_CASSEGRAIN, EV_FIXTURE_GREGORIAN};
    for (int i = 0; i < 2; i++) {
        ev_design design = ev_fixture_design(fixtures[i]);
        design.feeds[0].pattern = EV_PATTERN_GAUSSIAN;
        design.feeds[0].edge_taper = 9.0;
        ev_antenna antenna;
        ev_fixture_build(&design, &antenna);
        double half = antenna.layout.sub_half_angle, rate = 0.9 * log(10.0) / (half * half), tail;
        double norm = bell_norm(rate), error;
        gsl_function function = {bell, &rate};
        gsl_integration_workspace *work = gsl_integration_workspace_alloc(1000);
        gsl_integration_qag(&function, half, 1.5, 1e-13, 1e-10, 1000, GSL_INTEG_GAUSS31, work,
                            &tail, &error);
        gsl_integration_workspace_free(work);
        assert_near(ev_fixture_budget(&design).power[EV_FATE_PAST_SUB], norm * tail, 1e-8);
    }
}

/* Every direction of the sphere looked at: past the rim and below the horizon. */
static void test_ground_by_brute_force(void **state)
{
    (void)state;
    enum { THETAS = 1500, PHIS = 1501 };
    const ev_fixture fixtures[] = {EV_FIXTURE_PRIME, EV_FIXTURE_OFFSET};
    for (int i = 0; i < 2; i++) {
        ev_design design = ev_fixture_design(fixtures[i]);
        design.site = (ev_site_design){true, 0.4, 290.0, 10.0};
        design.feeds[0].shift = ev_vec3_make(0.01, 0.02, 0.0);
        dish d = dish_of(&design);
        ev_vec3 up = {cos(0.4), 0.0, sin(0.4)};
        double ground = 0.0, step = 0.5 * EV_PI / THETAS;
        for (int a = 0; a < THETAS; a++)
            for (int b = 0; b < PHIS; b++) {
                double theta = (a + 0.5) * step, phi = 2.0 * EV_PI * b / PHIS;
                ev_vec3 out = ev_vec3_along(ev_vec3_scale(cos(phi), d.ex), sin(phi), d.ey);
                ev_vec3 u = ev_vec3_along(ev_vec3_scale(cos(theta), d.axis), sin(theta), out);
                if (ev_vec3_dot(u, up) >= 0.0)
                    continue;
                /* where it meets the paraboloid */
                double qa = u.x * u.x + u.y * u.y, qc = d.feed.x * d.feed.x + d.feed.y * d.feed.y;
                double qb = d.feed.x * u.x + d.feed.y * u.y - 2.0 * d.f * u.z;
                qc -= 4.0 * d.f * d.feed.z;
                double t = (-qb + sqrt(qb * qb - qa * qc)) / qa;
                double x = d.feed.x + t * u.x - d.offset, y = d.feed.y + t * u.y;
                if (hypot(x, y) > d.radius)
                    ground +=
                        gain(&d, theta) / (4.0 * EV_PI) * sin(theta) * step * 2.0 * EV_PI / PHIS;
            }
        ev_feed_budget budget = ev_fixture_budget(&design);
        assert_near(budget.noise.spill_ground, ground, 1e-5);
        double sky = budget.power[EV_FATE_PAST_MAIN] - budget.noise.spill_ground;
        assert_near(budget.noise.spill_k, 290.0 * budget.noise.spill_ground + 10.0 * sky, 1e-9);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_single_mirrors),
        cmocka_unit_test(test_past_the_sub),
        cmocka_unit_test(test_ground_by_brute_force),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
