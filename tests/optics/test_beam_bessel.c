/* Bessel functions in lanes, and turns, against GSL. */
#include "beam_fixture.h"
#include "optics/beam_bessel.h"

#include <gsl/gsl_errno.h>
#include <gsl/gsl_sf_bessel.h>

enum { HIGHEST = 120 };

static double values[(HIGHEST + 1) * EV_LANES];

/* GSL's array fails as a whole where its last order underflows; then order by order. */
static void expect(double x, int highest, double *want)
{
    if (x > 0.0 && gsl_sf_bessel_Jn_array(0, highest, x, want) == GSL_SUCCESS)
        return;
    for (int m = 0; m <= highest; m++) {
        gsl_sf_result result;
        bool known = gsl_sf_bessel_Jn_e(m, x, &result) == GSL_SUCCESS;
        want[m] = known ? result.val : 0.0;
    }
}

static void check(const double *x, int highest)
{
    double want[HIGHEST + 1];
    ev_bessel_lanes(x, highest, values);
    for (int i = 0; i < EV_LANES; i++) {
        expect(x[i], highest, want);
        for (int m = 0; m <= highest; m++)
            assert_near(values[m * EV_LANES + i], want[m], 5e-13); /* what GSL holds */
    }
}

static void test_all_orders(void **state)
{
    (void)state;
    static const int orders[] = {0, 1, 7, 40, HIGHEST};
    gsl_set_error_handler_off(); /* underflow of far orders */
    for (int c = 0; c < 5; c++)
        for (double start = 0.0; start < 2e4; start = start * 1.7 + 0.9)
            for (double step = 0.0; step < 30.0; step = step * 6.0 + 0.02) {
                double x[EV_LANES];
                for (int i = 0; i < EV_LANES; i++)
                    x[i] = start + step * i;
                check(x, orders[c]);
            }
}

static void test_tiny_arguments(void **state)
{
    (void)state;
    double x[EV_LANES];
    for (int i = 0; i < EV_LANES; i++)
        x[i] = i == 0 ? 0.0 : pow(10.0, -300.0 + 9.0 * i);
    ev_bessel_lanes(x, 5, values);
    for (int i = 0; i < EV_LANES; i++) {
        assert_near(values[i], 1.0, 1e-13);
        assert_near(values[EV_LANES + i], 0.5 * x[i], 1e-13);
        assert_near(values[5 * EV_LANES + i], 0.0, 1e-13);
    }
}

static void test_turns(void **state)
{
    (void)state;
    double t[EV_LANES], c[EV_LANES], s[EV_LANES];
    for (int base = -4000; base < 4000; base += 37) {
        for (int i = 0; i < EV_LANES; i++)
            t[i] = base + 0.03125 * i + 0.011;
        ev_lanes_turn(t, c, s);
        for (int i = 0; i < EV_LANES; i++) {
            double part = t[i] - floor(t[i]);
            assert_near(c[i], cos(2.0 * EV_PI * part), 3e-15);
            assert_near(s[i], sin(2.0 * EV_PI * part), 3e-15);
        }
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_all_orders),
        cmocka_unit_test(test_tiny_arguments),
        cmocka_unit_test(test_turns),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
