/* Colours stay apart for every eye: at least 12 OKLab units (a hundredth of its scale each) between
 * what a reader has to tell apart, in normal sight and under simulated protanopia, deuteranopia and
 * tritanopia. Simulation: G. Machado, M. Oliveira, L. Fernandes, "A physiologically-based model for
 * simulation of color vision deficiency", IEEE TVCG 15(6), 2009, severity 1, on linear RGB. */
#include "draw/theme.h"

#include <math.h>
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>

#include <cmocka.h>

static const double sight[4][3][3] = {
    {{1.0, 0.0, 0.0}, {0.0, 1.0, 0.0}, {0.0, 0.0, 1.0}},
    {{0.152286, 1.052583, -0.204868},
     {0.114503, 0.786281, 0.099216},
     {-0.003882, -0.048116, 1.051998}},
    {{0.367322, 0.860646, -0.227968},
     {0.280085, 0.672501, 0.047413},
     {-0.011820, 0.042940, 0.968881}},
    {{1.255528, -0.076749, -0.178779},
     {-0.078411, 0.930809, 0.147602},
     {0.004733, 0.691367, 0.303900}},
};

static double to_linear(double v)
{
    return v <= 0.04045 ? v / 12.92 : pow((v + 0.055) / 1.055, 2.4);
}

static double to_srgb(double v)
{
    v = fmin(fmax(v, 0.0), 1.0);
    return v <= 0.0031308 ? 12.92 * v : 1.055 * pow(v, 1.0 / 2.4) - 0.055;
}

static ev_colour seen_by(const double m[3][3], ev_colour c)
{
    double linear[3] = {to_linear(c.r), to_linear(c.g), to_linear(c.b)}, seen[3];
    for (int i = 0; i < 3; ++i)
        seen[i] = to_srgb(m[i][0] * linear[0] + m[i][1] * linear[1] + m[i][2] * linear[2]);
    return (ev_colour){seen[0], seen[1], seen[2]};
}

static double difference(ev_colour a, ev_colour b)
{
    double x[3], y[3];
    ev_colour_oklab(a, x);
    ev_colour_oklab(b, y);
    return 100.0 * sqrt(pow(x[0] - y[0], 2) + pow(x[1] - y[1], 2) + pow(x[2] - y[2], 2));
}

static void colours_stay_apart_for_every_eye(void **state)
{
    (void)state;
    for (int dark = 0; dark < 2; ++dark) {
        const ev_theme *t = ev_theme_get(dark);
        const ev_colour told[] = {t->ground,
                                  ev_theme_fate(t, EV_FATE_APERTURE),
                                  ev_theme_fate(t, EV_FATE_PAST_MAIN),
                                  ev_theme_fate(t, EV_FATE_PAST_SUB),
                                  t->late,
                                  t->early};
        enum { COUNT = sizeof told / sizeof told[0] };
        for (int eye = 0; eye < 4; ++eye)
            for (int i = 0; i < COUNT; ++i)
                for (int k = 0; k < i; ++k) {
                    double apart =
                        difference(seen_by(sight[eye], told[i]), seen_by(sight[eye], told[k]));
                    if (apart < 12.0)
                        fail_msg("theme %d, eye %d: colours %d and %d are %.1f apart", dark, eye, i,
                                 k, apart);
                }
    }
}

static void hand_stands_out_from_the_ground(void **state)
{
    (void)state;
    for (int dark = 0; dark < 2; ++dark) {
        const ev_theme *t = ev_theme_get(dark);
        for (int eye = 0; eye < 4; ++eye) {
            assert_true(difference(seen_by(sight[eye], t->hand), seen_by(sight[eye], t->ground)) >=
                        12.0);
            assert_true(difference(seen_by(sight[eye], t->hand),
                                   seen_by(sight[eye], t->hand_text)) >= 40.0);
        }
    }
}

/* OKLab of known colours: white and mid reds from the published definition. */
static void oklab_is_oklab(void **state)
{
    (void)state;
    double lab[3];
    ev_colour_oklab((ev_colour){1.0, 1.0, 1.0}, lab);
    assert_true(fabs(lab[0] - 1.0) < 1e-6 && fabs(lab[1]) < 1e-6 && fabs(lab[2]) < 1e-6);
    ev_colour_oklab((ev_colour){1.0, 0.0, 0.0}, lab);
    assert_true(fabs(lab[0] - 0.62796) < 1e-4 && fabs(lab[1] - 0.22486) < 1e-4 &&
                fabs(lab[2] - 0.12585) < 1e-4);
}

static void path_error_diverges_through_the_ground(void **state)
{
    (void)state;
    for (int dark = 0; dark < 2; ++dark) {
        const ev_theme *t = ev_theme_get(dark);
        assert_true(difference(ev_theme_path_error(t, 0.0), t->ground) < 0.01);
        assert_true(difference(ev_theme_path_error(t, NAN), t->ground) < 0.01);
        assert_true(difference(ev_theme_path_error(t, 1.0), t->late) < 0.1);
        assert_true(difference(ev_theme_path_error(t, -7.0), t->early) < 0.1);
        double before = 0.0;
        for (int i = 1; i <= 20; ++i) {
            double away = difference(ev_theme_path_error(t, 0.05 * i), t->ground);
            assert_true(away > before);
            before = away;
        }
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(colours_stay_apart_for_every_eye),
        cmocka_unit_test(hand_stands_out_from_the_ground),
        cmocka_unit_test(oklab_is_oklab),
        cmocka_unit_test(path_error_diverges_through_the_ground),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
