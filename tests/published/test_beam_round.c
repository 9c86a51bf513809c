/* Beams of round apertures with prescribed fields, through the same integrator as every antenna,
 * against closed forms: S. Silver, "Microwave Antenna Theory and Design", 1949, ch. 6; C. Balanis,
 * "Antenna Theory", ch. 12 (values recomputed), and Bessel functions from GSL. */
#include "beam_fixture.h"
#include "optics/beam_search.h"
#include "optics/beam_source.h"

#include <gsl/gsl_sf_bessel.h>
#include <gsl/gsl_sf_gamma.h>

/* E(r) = pedestal + (1 - pedestal) (1 - r^2)^power over a flat disc of radius 1. */
typedef struct lighting {
    const char *name;
    double pedestal, power;
    double efficiency, width, sidelobe; /* published */
} lighting;

static const lighting table[] = {
    {"uniform", 1.0, 0.0, 1.0, 58.96, -17.57},
    {"1 - r^2", 0.0, 1.0, 0.75, 72.75, -24.64},
    {"(1 - r^2)^2", 0.0, 2.0, 0.5556, 84.38, -30.61},
    {"-10 dB, n = 1", 0.31622776601683794, 1.0, 0.9175, 65.16, -22.28},
    {"-10 dB, n = 2", 0.31622776601683794, 2.0, 0.8769, 66.83, -27.05},
};

enum { CASES = sizeof table / sizeof table[0] };

static double field_at(const lighting *light, double r2)
{
    return light->pedestal + (1.0 - light->pedestal) * pow(fmax(0.0, 1.0 - r2), light->power);
}

static bool currents(const void *context, const double *x, const double *y, int count,
                     ev_cvec3 *current, bool *lit)
{
    for (int i = 0; i < count; i++) {
        current[i] = (ev_cvec3){2.0 * field_at(context, x[i] * x[i] + y[i] * y[i]), 0.0, 0.0};
        lit[i] = true;
    }
    return true;
}

static ev_beam_source *make_source(const lighting *light, double wavelengths)
{
    ev_beam_recipe recipe = {.sheet = {.wavenumber = EV_PI * wavelengths,
                                       .radius = 1.0,
                                       .reference = {0.0, 0.0, 1.0},
                                       .currents = currents,
                                       .context = light,
                                       .tolerance = 1e-12},
                             .polarization = EV_POLARIZATION_X,
                             .efficiency = 1.0};
    return ev_beam_source_make(&recipe);
}

/* int E^2 dA and int E dA over the unit disc. */
static double power_in(const lighting *light)
{
    double p = light->pedestal, q = 1.0 - p, n = light->power;
    return EV_PI * (p * p + 2.0 * p * q / (n + 1.0) + q * q / (2.0 * n + 1.0));
}

/* int E exp(jk u y) dA: pedestal 2 pi J1(x)/x, (1 - r^2)^n: 2 pi 2^n n! J_(n+1)(x) / x^(n+1). */
static double closed_form(const lighting *light, double x)
{
    int n = (int)light->power;
    double p = light->pedestal, q = 1.0 - p;
    if (x < 1e-9)
        return EV_PI * (p + q / (n + 1.0));
    double taper = pow(2.0, n) * gsl_sf_fact((unsigned)n) * gsl_sf_bessel_Jn(n + 1, x);
    return 2.0 * EV_PI * (p * gsl_sf_bessel_J1(x) / x + q * taper / pow(x, n + 1));
}

static void test_table(void **state)
{
    (void)state;
    const double wavelengths = 1000.0;
    ev_vec3 axis = {0.0, 0.0, 1.0};
    for (int i = 0; i < CASES; i++) {
        ev_beam_source *source = make_source(&table[i], wavelengths);
        double gain = ev_test_power(ev_test_field(source, axis).co);
        double k = EV_PI * wavelengths;
        assert_near(gain / (power_in(&table[i]) * k * k), table[i].efficiency, 6e-5);
        ev_beam_side side = ev_beam_walk(source, axis, gain, true, 1.0);
        double width = ev_test_deg(2.0 * asin(side.half_power)) * wavelengths;
        assert_near(width, table[i].width, 0.006);
        assert_near(ev_test_db(side.sidelobe_power), table[i].sidelobe, 0.006);
        ev_beam_source_destroy(source);
    }
}

static void test_first_null(void **state)
{
    (void)state;
    ev_vec3 axis = {0.0, 0.0, 1.0};
    ev_beam_source *source = make_source(&table[0], 500.0);
    double gain = ev_test_power(ev_test_field(source, axis).co);
    ev_beam_side side = ev_beam_walk(source, axis, gain, true, -1.0);
    assert_near(-side.null * 500.0, gsl_sf_bessel_zero_J1(1) / EV_PI, 1e-6);
    assert_near(-side.null * 500.0, 1.2197, 5e-5);
    ev_beam_source_destroy(source);
}

/* The whole half-plane square to the field, where it meets no obliquity: to 1e-11 of the peak,
 * also on a thousand wavelengths. */
static void test_every_angle(void **state)
{
    (void)state;
    static const double sizes[] = {3.0, 40.0, 1000.0};
    for (int c = 0; c < CASES; c++)
        for (int d = 0; d < 3; d++) {
            ev_beam_source *source = make_source(&table[c], sizes[d]);
            double k = EV_PI * sizes[d], peak = closed_form(&table[c], 0.0);
            for (double theta = 0.0; theta < 89.0; theta += 0.37) {
                ev_vec3 s = ev_test_direction(theta, 90.0);
                double _Complex got = ev_test_field(source, s).co;
                double size = k / sqrt(EV_PI) * closed_form(&table[c], k * s.y);
                double _Complex want = -I * size;
                assert_true(cabs(got - want) < 1e-11 * peak * k);
            }
            ev_beam_source_destroy(source);
        }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_table),
        cmocka_unit_test(test_first_null),
        cmocka_unit_test(test_every_angle),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
