/* The far field against a brute-force integral in SI units that shares no code with the product:
 * electric and magnetic fields of a one-watt feed in V/m and A/m, the surface cut into Gauss radii
 * x uniform angles (GSL), vectors written out. And reciprocity: the same currents read as a
 * receiver. */
#include "beam_fixture.h"

#include <gsl/gsl_integration.h>

static const double impedance = 376.730313668; /* ohm */

typedef struct vector {
    double _Complex v[3];
} vector;

static vector real_vector(double x, double y, double z)
{
    return (vector){{x, y, z}};
}

static vector cross(vector a, vector b)
{
    return (vector){{a.v[1] * b.v[2] - a.v[2] * b.v[1], a.v[2] * b.v[0] - a.v[0] * b.v[2],
                     a.v[0] * b.v[1] - a.v[1] * b.v[0]}};
}

static double _Complex dot(vector a, vector b)
{
    return a.v[0] * b.v[0] + a.v[1] * b.v[1] + a.v[2] * b.v[2];
}

static vector mix(double _Complex p, vector a, double _Complex q, vector b)
{
    return (vector){{p * a.v[0] + q * b.v[0], p * a.v[1] + q * b.v[1], p * a.v[2] + q * b.v[2]}};
}

/* A cos^n feed at a point, axis and polarization vectors, one watt, exp(-jkr)/r from there.
 * `sense`: weight of its y polarization. */
typedef struct source {
    vector position, axis, ex, ey;
    double exponent, wavenumber;
    double _Complex weight_x, weight_y;
} source;

/* E of Ludwig's balanced feed in spherical components about its own axis. */
static vector electric(const source *from, vector arm, double distance)
{
    double c = creal(dot(arm, from->axis)) / distance;
    double theta = acos(c), phi = atan2(creal(dot(arm, from->ey)), creal(dot(arm, from->ex)));
    double gain = 2.0 * (from->exponent + 1.0) * pow(fmax(c, 0.0), from->exponent);
    double size = sqrt(2.0 * impedance * gain / (4.0 * EV_PI)) / distance;
    vector across = mix(cos(phi), from->ex, sin(phi), from->ey);
    vector e_theta = mix(cos(theta), across, -sin(theta), from->axis);
    vector e_phi = mix(-sin(phi), from->ex, cos(phi), from->ey);
    vector x = mix(cos(phi), e_theta, -sin(phi), e_phi);
    vector y = mix(sin(phi), e_theta, cos(phi), e_phi);
    vector e = mix(from->weight_x, x, from->weight_y, y);
    double _Complex turn = size * cexp(-I * from->wavenumber * distance);
    return mix(turn, e, 0.0, e);
}

/* Integral of J - (J.s) s over the paraboloid, exp(jk s.P) with it. */
static vector integrate(const source *from, double focal, double offset, double radius, double hole,
                        vector s, int radial, int around)
{
    gsl_integration_glfixed_table *table = gsl_integration_glfixed_table_alloc((size_t)radial);
    vector sum = real_vector(0.0, 0.0, 0.0);
    for (int i = 0; i < radial; i++) {
        double r, weight;
        gsl_integration_glfixed_point(hole, radius, (size_t)i, &r, &weight, table);
        for (int j = 0; j < around; j++) {
            double phi = 2.0 * EV_PI * (j + 0.37) / around;
            double x = offset + r * cos(phi), y = r * sin(phi);
            vector p = real_vector(x, y, (x * x + y * y) / (4.0 * focal));
            double slope = sqrt(1.0 + (x * x + y * y) / (4.0 * focal * focal));
            vector n =
                real_vector(-x / (2.0 * focal) / slope, -y / (2.0 * focal) / slope, 1.0 / slope);
            vector arm = mix(1.0, p, -1.0, from->position);
            double distance = sqrt(creal(dot(arm, arm)));
            vector e = electric(from, arm, distance);
            vector h = cross(mix(1.0 / (distance * impedance), arm, 0.0, arm), e);
            vector current = cross(n, h);
            double area = slope * weight * r * 2.0 * EV_PI / around;
            double _Complex turn = 2.0 * area * cexp(I * from->wavenumber * dot(s, p));
            current = mix(turn, current, -turn * dot(current, s), s);
            sum = mix(1.0, sum, 1.0, current);
        }
    }
    gsl_integration_glfixed_table_free(table);
    return sum;
}

/* Square roots of gains, from E in spherical components about +z (Ludwig's third definition). */
static void brute_fields(const source *from, double focal, double offset, double radius,
                         double hole, double theta, double phi, double _Complex *x,
                         double _Complex *y)
{
    double k = from->wavenumber;
    vector s = real_vector(sin(theta) * cos(phi), sin(theta) * sin(phi), cos(theta));
    vector e_theta = real_vector(cos(theta) * cos(phi), cos(theta) * sin(phi), -sin(theta));
    vector e_phi = real_vector(-sin(phi), cos(phi), 0.0);
    vector j = integrate(from, focal, offset, radius, hole, s, 90, 260);
    double _Complex far = -I * k * impedance / (4.0 * EV_PI);
    double _Complex a = far * dot(j, e_theta), b = far * dot(j, e_phi);
    double to_gain = sqrt(4.0 * EV_PI / (2.0 * impedance));
    *x = to_gain * (a * cos(phi) - b * sin(phi));
    *y = to_gain * (a * sin(phi) + b * cos(phi));
}

static vector from_vec3(ev_vec3 v)
{
    return real_vector(v.x, v.y, v.z);
}

static source source_of(const ev_antenna *antenna)
{
    const ev_feed *feed = &antenna->feeds[0];
    source from = {.position = from_vec3(feed->position),
                   .axis = from_vec3(feed->axis),
                   .ex = from_vec3(feed->ex),
                   .ey = from_vec3(feed->ey),
                   .exponent = feed->exponent,
                   .wavenumber = 2.0 * EV_PI * antenna->frequency / 299792458.0,
                   .weight_x = 1.0};
    if (feed->polarization == EV_POLARIZATION_Y) {
        from.weight_x = 0.0;
        from.weight_y = 1.0;
    }
    if (feed->polarization == EV_POLARIZATION_RHCP) { /* of the antenna: the feed's is left-hand */
        from.weight_x = sqrt(0.5);
        from.weight_y = sqrt(0.5) * I;
    }
    return from;
}

/* D 0.8 m, F 0.45 m, offset 0.5 m, 11 GHz: 29 wavelengths, a feed out of place in every way. */
static ev_design crooked_dish(ev_polarization polarization)
{
    ev_design design = ev_test_dish(0.8, 0.45, 0.5, 6.0);
    design.main.hole = 0.1;
    design.feeds[0].shift = ev_vec3_make(0.011, -0.017, 0.009);
    design.feeds[0].defocus = 0.006;
    design.feeds[0].tilt_x = 0.06;
    design.feeds[0].tilt_y = -0.04;
    design.feeds[0].roll = 0.2;
    design.feeds[0].polarization = polarization;
    return design;
}

static const double looks[][2] = {{0.0, 0.0},   {0.8, 30.0},   {2.1, 95.0},
                                  {3.3, 200.0}, {6.0, 310.0},  {14.0, 150.0},
                                  {33.0, 45.0}, {61.0, 250.0}, {84.0, 10.0}};

static void test_against_brute_force(void **state)
{
    (void)state;
    static const ev_polarization cases[] = {EV_POLARIZATION_X, EV_POLARIZATION_Y,
                                            EV_POLARIZATION_RHCP};
    for (int c = 0; c < 3; c++) {
        ev_antenna antenna = ev_test_antenna(crooked_dish(cases[c]), 11e9);
        source from = source_of(&antenna);
        ev_beam_source *beam = ev_beam_source_create(&antenna, 0, EV_BEAM_EXACT);
        double peak = 2.0 * EV_PI * 0.4 * 11e9 / 299792458.0; /* of the full aperture */
        for (size_t i = 0; i < sizeof looks / sizeof looks[0]; i++) {
            double _Complex x, y, co, other;
            double t = ev_test_rad(looks[i][0]), p = ev_test_rad(looks[i][1]);
            ev_beam_field got = ev_test_field(beam, ev_test_direction(looks[i][0], looks[i][1]));
            brute_fields(&from, 0.45, 0.5, 0.4, 0.05, t, p, &x, &y);
            co = cases[c] == EV_POLARIZATION_Y ? y : x;
            other = cases[c] == EV_POLARIZATION_Y ? x : y;
            if (cases[c] == EV_POLARIZATION_RHCP) { /* along (x - jy) / sqrt 2 and (x + jy) */
                co = sqrt(0.5) * (x + I * y);
                other = sqrt(0.5) * (x - I * y);
            }
            assert_near(cabs(got.co - co) / peak, 0.0, 1e-9);
            assert_near(cabs(got.cross - other) / peak, 0.0, 1e-9);
        }
        ev_beam_source_destroy(beam);
    }
}

/* A hole and a body's shadow of the same outline take out the same currents. */
static void test_shadow_is_hole(void **state)
{
    (void)state;
    ev_design holed = ev_test_dish(1.2, 0.5, 0.0, 4.0), shaded = holed;
    holed.main.hole = 0.15;
    shaded.feeds[0].body = 0.15;
    ev_antenna a = ev_test_antenna(holed, 12e9), b = ev_test_antenna(shaded, 12e9);
    ev_beam_source *with_hole = ev_beam_source_create(&a, 0, EV_BEAM_EXACT);
    ev_beam_source *with_body = ev_beam_source_create(&b, 0, EV_BEAM_EXACT);
    double peak = cabs(ev_test_field(with_hole, ev_test_direction(0.0, 0.0)).co);
    for (double theta = 0.0; theta < 88.0; theta += 1.7) {
        ev_vec3 s = ev_test_direction(theta, 40.0);
        ev_beam_field h = ev_test_field(with_hole, s), f = ev_test_field(with_body, s);
        assert_near(cabs(h.co - f.co) / peak, 0.0, 1e-8);
        assert_near(cabs(h.cross - f.cross) / peak, 0.0, 1e-8);
    }
    ev_beam_source_destroy(with_hole);
    ev_beam_source_destroy(with_body);
}

/* The pattern ends (90 degrees off the feed's axis) inside the rim of a deep dish with a tilted
 * feed: the brute force simply finds no field there. */
static void test_lighting_with_an_edge(void **state)
{
    (void)state;
    ev_design design = ev_test_dish(0.6, 0.14, 0.0, 2.0);
    design.feeds[0].tilt_y = 0.25;
    ev_antenna antenna = ev_test_antenna(design, 11e9);
    source from = source_of(&antenna);
    ev_beam_source *beam = ev_beam_source_create(&antenna, 0, EV_BEAM_EXACT);
    double peak = cabs(ev_test_field(beam, ev_test_direction(0.0, 0.0)).co);
    for (double theta = 0.0; theta < 80.0; theta += 13.0) {
        double _Complex x, y;
        ev_beam_field got = ev_test_field(beam, ev_test_direction(theta, 20.0));
        brute_fields(&from, 0.14, 0.0, 0.3, 0.0, ev_test_rad(theta), ev_test_rad(20.0), &x, &y);
        assert_near(cabs(got.co - x) / peak, 0.0, 3e-5);
    }
    ev_beam_nodes nodes = ev_beam_source_nodes(beam);
    assert_true(nodes.edge_points > 0 && nodes.converged);
    ev_beam_source_destroy(beam);
}

/* Receiving: a plane wave from s induces 2 n x H on the dish; what the feed takes of it is the
 * reaction with the feed's own field. For a beam that a shifted feed throws aside the receive
 * pattern has its peak and its width where the transmit pattern has them. */
static double _Complex reaction(const source *from, double focal, double offset, double radius,
                                vector s, vector wanted)
{
    double k = from->wavenumber;
    double _Complex sum = 0.0;
    gsl_integration_glfixed_table *table = gsl_integration_glfixed_table_alloc(60);
    for (int i = 0; i < 60; i++) {
        double r, weight;
        gsl_integration_glfixed_point(0.0, radius, (size_t)i, &r, &weight, table);
        for (int j = 0; j < 160; j++) {
            double phi = 2.0 * EV_PI * j / 160;
            double x = offset + r * cos(phi), y = r * sin(phi);
            vector p = real_vector(x, y, (x * x + y * y) / (4.0 * focal));
            vector n = real_vector(-x / (2.0 * focal), -y / (2.0 * focal), 1.0); /* with the area */
            vector arm = mix(1.0, p, -1.0, from->position);
            vector e = electric(from, arm, sqrt(creal(dot(arm, arm))));
            vector h = cross(mix(-1.0 / impedance, s, 0.0, s), wanted);
            double area = weight * r * 2.0 * EV_PI / 160;
            sum += 2.0 * area * cexp(I * k * dot(s, p)) * dot(cross(n, h), e);
        }
    }
    gsl_integration_glfixed_table_free(table);
    return sum;
}

static void test_reciprocity(void **state)
{
    (void)state;
    ev_design design = ev_test_dish(0.8, 0.5, 0.0, 4.0);
    design.feeds[0].shift.x = 0.02;
    design.feeds[0].polarization = EV_POLARIZATION_Y;
    ev_antenna antenna = ev_test_antenna(design, 11e9);
    source from = source_of(&antenna);
    ev_beam beam = ev_test_beam(&antenna);
    ev_beam_source *sent = ev_beam_source_create(&antenna, 0, EV_BEAM_EXACT);
    double first = NAN;
    for (int i = -3; i <= 3; i++) {
        double u = beam.peak.x + 0.25 * i * 2.0 * sin(0.5 * beam.width_x);
        vector s = real_vector(u, 0.0, sqrt(1.0 - u * u));
        double received = cabs(reaction(&from, 0.5, 0.0, 0.4, s, real_vector(0.0, 1.0, 0.0)));
        double gain =
            cabs(ev_test_field(sent, ev_vec3_make(u, 0.0, sqrt(1.0 - u * u))).co) / received;
        first = isnan(first) ? gain : first;
        assert_near(20.0 * log10(gain / first), 0.0, 0.01);
    }
    ev_beam_source_destroy(sent);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_against_brute_force),
        cmocka_unit_test(test_shadow_is_hole),
        cmocka_unit_test(test_lighting_with_an_edge),
        cmocka_unit_test(test_reciprocity),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
