/* Aimed rays and the fields they carry: the Jacobian against differences, Ludwig's third
 * definition, the sense of circular waves, tables with unequal planes. */
#include "check.h"
#include "fixture.h"

#include "optics/aperture.h"

#include <stdlib.h>

static const double degree = EV_PI / 180.0;

static double size_of(ev_cvec3 v)
{
    return sqrt(pow(cabs(v.x), 2.0) + pow(cabs(v.y), 2.0) + pow(cabs(v.z), 2.0));
}

static double _Complex along(ev_cvec3 v, ev_vec3 u)
{
    return v.x * u.x + v.y * u.y + v.z * u.z;
}

static double _Complex project(ev_cvec3 v, ev_cvec3 on)
{
    return v.x * conj(on.x) + v.y * conj(on.y) + v.z * conj(on.z);
}

/* Solid angle between four aimed rays over their patch of aperture, times G / 4 pi. */
static double density_by_differences(const ev_antenna *antenna, double x, double y, double h)
{
    ev_vec3 d[4];
    for (int i = 0; i < 4; i++)
        d[i] = ev_aperture_sample(antenna, 0, x + (i % 2 ? h : -h), y + (i / 2 ? h : -h)).direction;
    ev_vec3 across = ev_vec3_cross(ev_vec3_sub(d[3], d[0]), ev_vec3_sub(d[2], d[1]));
    double solid_angle = 0.5 * ev_vec3_length(across) / (4.0 * h * h);
    ev_vec3 middle = ev_aperture_sample(antenna, 0, x, y).direction;
    double theta = ev_vec3_angle(middle, antenna->feeds[0].axis);
    double n = antenna->feeds[0].exponent;
    return 2.0 * (n + 1.0) * pow(cos(theta), n) * solid_angle / (4.0 * EV_PI);
}

static void test_density(void **state)
{
    (void)state;
    for (int fixture = 0; fixture < EV_FIXTURE_COUNT; fixture++) {
        ev_design design = ev_fixture_worn_design((ev_fixture)fixture);
        ev_antenna antenna;
        ev_fixture_build(&design, &antenna);
        for (int k = 0; k < 20; k++) {
            double r = antenna.radius * (k + 0.5) / 20.0, x = antenna.offset + r * cos(2.0 * k);
            double y = r * sin(2.0 * k), h = 1e-3 * antenna.radius;
            assert_ratio(ev_aperture_sample(&antenna, 0, x, y).density,
                         density_by_differences(&antenna, x, y, h), 2e-6);
        }
    }
}

/* In place, seen from the feed focus; singles have cos^4(theta/2)/F^2. */
static void test_solid_angle(void **state)
{
    (void)state;
    ev_design design = ev_fixture_design(EV_FIXTURE_PRIME);
    ev_antenna antenna;
    ev_fixture_build(&design, &antenna);
    for (double r = 0.0; r <= 5.0; r += 0.5) {
        double half = atan(r / 10.0);
        assert_ratio(ev_aperture_solid_angle(&antenna, r, 0.0), pow(cos(half), 4.0) / 25.0, 1e-12);
    }
    design = ev_fixture_design(EV_FIXTURE_GREGORIAN);
    ev_fixture_build(&design, &antenna);
    double f = antenna.layout.equivalent_focal_length;
    for (double r = 0.0; r <= 3.0; r += 0.3)
        assert_ratio(ev_aperture_solid_angle(&antenna, 0.0, r),
                     pow(cos(atan(r / (2.0 * f))), 4.0) / (f * f), 1e-9);
}

/* A feed of our own, looking along -z (so that +x stays x and y turns into -y). */
static ev_antenna with_feed(ev_polarization polarization, double roll)
{
    ev_design design = ev_fixture_design(EV_FIXTURE_PRIME);
    ev_antenna antenna;
    design.feeds[0].polarization = polarization;
    design.feeds[0].roll = roll;
    ev_fixture_build(&design, &antenna);
    return antenna;
}

/* Ludwig 3 (A. Ludwig, IEEE Trans. AP-21, 1973): theta^ cos phi - phi^ sin phi for x. */
static void test_ludwig_three(void **state)
{
    (void)state;
    ev_antenna antenna = with_feed(EV_POLARIZATION_X, 0.3);
    const ev_feed *feed = &antenna.feeds[0];
    for (double theta = 0.05; theta < 1.5; theta += 0.1)
        for (double phi = 0.1; phi < 6.3; phi += 0.4) {
            ev_vec3 out = ev_vec3_along(ev_vec3_scale(cos(phi), feed->ex), sin(phi), feed->ey);
            ev_vec3 d = ev_vec3_along(ev_vec3_scale(cos(theta), feed->axis), sin(theta), out);
            ev_vec3 up = ev_vec3_along(ev_vec3_scale(cos(theta), out), -sin(theta), feed->axis);
            ev_vec3 turn = ev_vec3_along(ev_vec3_scale(-sin(phi), feed->ex), cos(phi), feed->ey);
            ev_launch launch = ev_feed_launch(&antenna, 0, d);
            assert_near(cabs(along(launch.field, up) - cos(phi)), 0.0, 1e-12);
            assert_near(cabs(along(launch.field, turn) + sin(phi)), 0.0, 1e-12);
            assert_near(cabs(along(launch.field, d)), 0.0, 1e-12);
            assert_ratio(launch.level, 6.0 * pow(cos(theta), 2.0), 1e-12);
        }
}

/* Unequal planes: E cos(phi) theta^ - H sin(phi) phi^ for x, and y a quarter turn of it. */
static void test_table_fields(void **state)
{
    (void)state;
    ev_pattern_table *table = calloc(1, sizeof *table);
    ev_design design = ev_fixture_design(EV_FIXTURE_PRIME);
    table->count = 2;
    table->theta[1] = 1.0;
    table->e_db[1] = -6.0;
    table->h_db[1] = -12.0;
    ev_pattern_table_prepare(table);
    design.feeds[0].pattern = EV_PATTERN_TABLE;
    design.feeds[0].table = table;
    ev_antenna antenna;
    ev_fixture_build(&design, &antenna);
    const ev_feed *feed = &antenna.feeds[0];
    double theta = 0.8, share = 0.0;
    ev_pattern_level level = ev_pattern_at(&feed->pattern, theta);
    for (int k = 0; k < 36; k++) {
        double phi = 10.0 * k * degree;
        ev_vec3 out = ev_vec3_along(ev_vec3_scale(cos(phi), feed->ex), sin(phi), feed->ey);
        ev_vec3 d = ev_vec3_along(ev_vec3_scale(cos(theta), feed->axis), sin(theta), out);
        ev_vec3 up = ev_vec3_along(ev_vec3_scale(cos(theta), out), -sin(theta), feed->axis);
        ev_vec3 turn = ev_vec3_cross(d, up);
        ev_launch launch = ev_feed_launch(&antenna, 0, d);
        double size = sqrt(launch.level);
        assert_near(size * creal(along(launch.field, up)), sqrt(level.e) * cos(phi), 1e-12);
        assert_near(size * creal(along(launch.field, turn)), -sqrt(level.h) * sin(phi), 1e-12);
        share += launch.level / 36.0;
    }
    assert_ratio(share, 0.5 * (level.e + level.h), 1e-12);
    free(table);
}

/* +1 right-hand, -1 left-hand (IEEE: receding, right-hand turns clockwise), for a wave along s:
 * with exp(+jwt) x - jy is right-hand for s = x cross y. */
static double sense(ev_cvec3 field, ev_vec3 s)
{
    ev_vec3 re = {creal(field.x), creal(field.y), creal(field.z)};
    ev_vec3 im = {cimag(field.x), cimag(field.y), cimag(field.z)};
    return -2.0 * ev_vec3_dot(ev_vec3_cross(re, im), s);
}

/* What is named leaves the antenna, over one mirror or two; the feed radiates what that takes. */
static void test_circular_sense(void **state)
{
    (void)state;
    ev_vec3 up = {0.0, 0.0, 1.0};
    for (int fixture = 0; fixture < EV_FIXTURE_COUNT; fixture++)
        for (int left = 0; left < 2; left++) {
            ev_design design = ev_fixture_design((ev_fixture)fixture);
            ev_antenna antenna;
            design.feeds[0].polarization = left ? EV_POLARIZATION_LHCP : EV_POLARIZATION_RHCP;
            ev_fixture_build(&design, &antenna);
            double wanted = left ? -1.0 : 1.0, at_feed = antenna.dual ? wanted : -wanted;
            ev_sample sample = ev_aperture_sample(&antenna, 0, antenna.offset + 0.1, 0.2);
            ev_launch launch = ev_feed_launch(&antenna, 0, sample.direction);
            assert_near(sense(launch.field, sample.direction), at_feed, 1e-9);
            assert_near(sense(sample.arriving, sample.incident), -wanted, 1e-9);
            assert_near(sense(sample.field, up), wanted, 1e-9);
            ev_cvec3 co = ev_copolar(design.feeds[0].polarization, up);
            assert_near(cabs(project(sample.field, co)), 1.0, 1e-9);
            assert_near(sense(co, up), wanted, 1e-12);
        }
}

/* Linear waves leave a symmetric dish along their co-polar vector in the principal planes; fields
 * stay of unit size and square to the ray everywhere. */
static void test_linear_fields(void **state)
{
    (void)state;
    for (int fixture = 0; fixture < EV_FIXTURE_COUNT; fixture++)
        for (int y = 0; y < 2; y++) {
            ev_design design = ev_fixture_worn_design((ev_fixture)fixture);
            ev_antenna antenna;
            design.feeds[0].polarization = y ? EV_POLARIZATION_Y : EV_POLARIZATION_X;
            ev_fixture_build(&design, &antenna);
            for (int k = 0; k < 12; k++) {
                double r = antenna.radius * k / 12.0;
                ev_sample sample =
                    ev_aperture_sample(&antenna, 0, antenna.offset + r * cos(k), r * sin(k));
                ev_vec3 normal = ev_conic_normal(&antenna.main, sample.point);
                ev_vec3 out = ev_vec3_reflect(sample.incident, normal);
                assert_near(size_of(sample.arriving), 1.0, 1e-12);
                assert_near(size_of(sample.field), 1.0, 1e-12);
                assert_near(cabs(along(sample.arriving, sample.incident)), 0.0, 1e-12);
                assert_near(cabs(along(sample.field, out)), 0.0, 1e-12);
            }
        }
    ev_antenna antenna = with_feed(EV_POLARIZATION_Y, 0.0);
    ev_sample sample = ev_aperture_sample(&antenna, 0, 3.0, 0.0);
    assert_near(fabs(creal(sample.field.y)), 1.0, 1e-12);
}

static void test_copolar_vectors(void **state)
{
    (void)state;
    ev_vec3 up = {0.0, 0.0, 1.0}, s = ev_vec3_unit(ev_vec3_make(0.2, -0.3, 1.0));
    assert_near(creal(ev_copolar(EV_POLARIZATION_X, up).x), 1.0, 1e-15);
    assert_near(creal(ev_copolar(EV_POLARIZATION_Y, up).y), 1.0, 1e-15);
    for (int i = 0; i < 4; i++) {
        ev_cvec3 a = ev_copolar((ev_polarization)i, s), b = ev_copolar((ev_polarization)(i ^ 1), s);
        assert_near(size_of(a), 1.0, 1e-14);
        assert_near(cabs(along(a, s)), 0.0, 1e-14);
        assert_near(cabs(project(a, b)), 0.0, 1e-14);
    }
}

static void test_path_alone_is_the_samples(void **state)
{
    (void)state;
    for (int fixture = 0; fixture < EV_FIXTURE_COUNT; fixture++) {
        ev_design design = ev_fixture_worn_design((ev_fixture)fixture);
        ev_antenna antenna;
        ev_fixture_build(&design, &antenna);
        ev_vec3 direction, sub_point;
        double x = antenna.offset + 0.3 * antenna.radius, y = -0.5 * antenna.radius;
        ev_sample sample = ev_aperture_sample(&antenna, 0, x, y);
        double path = ev_aperture_path(&antenna, 0, x, y, &direction, &sub_point);
        assert_near(path, sample.path, 0.0);
        assert_memory_equal(&direction, &sample.direction, sizeof direction);
        ev_vec3 wanted = ev_vec3_unit(ev_vec3_make(0.01, 0.02, 1.0));
        assert_near(ev_sample_error(&sample, wanted), path - ev_vec3_dot(wanted, sample.point),
                    1e-12 * path);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_density),         cmocka_unit_test(test_solid_angle),
        cmocka_unit_test(test_ludwig_three),    cmocka_unit_test(test_table_fields),
        cmocka_unit_test(test_circular_sense),  cmocka_unit_test(test_linear_fields),
        cmocka_unit_test(test_copolar_vectors), cmocka_unit_test(test_path_alone_is_the_samples),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
