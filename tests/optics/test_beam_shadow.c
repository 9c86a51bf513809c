/* Shadow points against closed forms and GSL's quadrature, and shadows in the far field. */
#include "beam_fixture.h"
#include "optics/aperture.h"
#include "optics/beam_shadow.h"

#include <gsl/gsl_integration.h>
#include <gsl/gsl_sf_bessel.h>

/* Sum of weight exp(j (ux x + uy y)). */
static double _Complex transform(const ev_shadows *shadows, double ux, double uy)
{
    ev_shadow_points points;
    double _Complex sum = 0.0;
    ev_shadow_points_make(shadows, hypot(ux, uy) * shadows->radius, &points);
    for (int i = 0; i < points.count; i++)
        sum += points.weight[i] * cexp(I * (ux * points.x[i] + uy * points.y[i]));
    ev_shadow_points_free(&points);
    return sum;
}

/* A disc off the centre: 2 pi a J1(a u) / u. */
static void test_disc(void **state)
{
    (void)state;
    ev_shadows shadows = {.radius = 2.0, .body_count = 1};
    shadows.bodies[0] = (ev_outline){.x = 0.4, .y = -0.3, .ux = 0.5, .vy = 0.5};
    for (double u = 0.5; u < 300.0; u *= 1.9) {
        double ux = u * cos(0.7), uy = u * sin(0.7);
        double _Complex want =
            2.0 * EV_PI * 0.5 * gsl_sf_bessel_J1(0.5 * u) / u * cexp(I * (0.4 * ux - 0.3 * uy));
        assert_near(cabs(transform(&shadows, ux, uy) - want), 0.0, 1e-9);
    }
}

/* One strut: rows between two circles, each in closed form, over the width by GSL. */
typedef struct row {
    double from, to, along, across;
    int part;
} row;

static double row_integral(double t, void *context)
{
    const row *r = context;
    double a = sqrt(r->from * r->from - t * t), b = sqrt(r->to * r->to - t * t);
    double _Complex ends = cexp(I * r->along * b) - cexp(I * r->along * a);
    double _Complex value = ends / (I * r->along) * cexp(I * r->across * t);
    return r->part ? cimag(value) : creal(value);
}

static void test_strut(void **state)
{
    (void)state;
    const double width = 0.03, angle = 0.6;
    ev_shadows shadows = {.radius = 1.0, .strip_count = 1};
    shadows.strips[0] = ev_strip_make(angle, width, 0.1, 0.9, 0);
    gsl_integration_workspace *work = gsl_integration_workspace_alloc(200);
    for (double u = 2.0; u < 2000.0; u *= 2.7)
        for (double turn = 0.0; turn < 3.0; turn += 0.7) {
            double part[2], error;
            row r = {0.1, 0.9, u * cos(turn - angle), u * sin(turn - angle), 0};
            for (r.part = 0; r.part < 2; r.part++) {
                gsl_function f = {row_integral, &r};
                gsl_integration_qag(&f, -0.5 * width, 0.5 * width, 1e-13, 1e-10, 200,
                                    GSL_INTEG_GAUSS61, work, &part[r.part], &error);
            }
            double _Complex got = transform(&shadows, u * cos(turn), u * sin(turn));
            assert_near(creal(got), part[0], 3e-10);
            assert_near(cimag(got), part[1], 3e-10);
        }
    gsl_integration_workspace_free(work);
}

/* Power in the shadows of everything at once: the ledger's shares. */
static void test_shares_of_the_ledger(void **state)
{
    (void)state;
    ev_design design = ev_test_cassegrain(12.0);
    design.strut_count = 2;
    design.struts[0] = (ev_strut_design){
        .name = "legs", .count = 4, .width = 0.06, .from = 0.2, .to = 6.0, .first = 0.3};
    design.struts[1] = (ev_strut_design){
        .name = "tray", .count = 1, .width = 0.2, .from = 0.3, .to = 4.0, .first = 1.0};
    design.feeds[0].body = 0.9;
    design.main.hole = 0.5;
    ev_antenna antenna = ev_test_antenna(design, 6e9);
    ev_feed_budget budget;
    ev_budget_compute_feed(&antenna, 0, &budget);
    ev_shadow_points points;
    ev_shadow_points_make(&antenna.shadows, 60.0, &points);
    double power = 0.0;
    for (int i = 0; i < points.count; i++)
        power +=
            points.weight[i] * ev_aperture_sample(&antenna, 0, points.x[i], points.y[i]).density;
    ev_shadow_points_free(&points);
    /* the ledger's shadows end at the sub's rim, whose rays meet the dish's: the same here */
    assert_near(power,
                budget.power[EV_FATE_SHADOW_SUB] + budget.power[EV_FATE_SHADOW_FEED] +
                    budget.power[EV_FATE_SHADOW_STRUTS],
                1e-9);
}

/* Null field: in phase over the dish, the loss at the peak is the ledger's blockage; and struts
 * raise the sidelobes in the planes square to them. */
static void test_struts_in_the_beam(void **state)
{
    (void)state;
    ev_design design = ev_test_dish(3.0, 1.2, 0.0, 2.5);
    ev_antenna clear = ev_test_antenna(design, 12e9);
    design.strut_count = 1;
    design.struts[0] = (ev_strut_design){
        .name = "legs", .count = 4, .width = 0.06, .from = 0.1, .to = 1.5, .first = 0.25 * EV_PI};
    ev_antenna shaded = ev_test_antenna(design, 12e9);
    ev_beam beam = ev_test_beam(&shaded), before = ev_test_beam(&clear);
    assert_near(beam.unshadowed_dbi, before.gain_dbi, 1e-9);
    assert_true(before.gain_dbi - beam.gain_dbi > 0.3);
    assert_near(beam.shadow_gap_db, 0.0, 1e-6);
    ev_beam_source *a = ev_beam_source_create(&clear, 0, EV_BEAM_EXACT);
    ev_beam_source *b = ev_beam_source_create(&shaded, 0, EV_BEAM_EXACT);
    double far = 0.0, struck = 0.0, between = 0.0;
    for (double theta = 8.0; theta < 20.0; theta += 0.11) {
        far += ev_test_power(ev_test_field(a, ev_test_direction(theta, 45.0)).co);
        struck += ev_test_power(ev_test_field(b, ev_test_direction(theta, 45.0)).co);
        between += ev_test_power(ev_test_field(b, ev_test_direction(theta, 20.0)).co);
    }
    assert_true(struck > 10.0 * far && struck > 10.0 * between);
    ev_beam_source_destroy(a);
    ev_beam_source_destroy(b);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_disc),
        cmocka_unit_test(test_strut),
        cmocka_unit_test(test_shares_of_the_ledger),
        cmocka_unit_test(test_struts_in_the_beam),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
