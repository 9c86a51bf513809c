/* Shares found on the feed's side, each against a sum over directions or rays. */
#include "check.h"
#include "fixture.h"

#include "optics/aperture.h"
#include "optics/spill.h"
#include "optics/trace.h"

#include <stdlib.h>

/* All directions of the sphere by equal steps of cos(theta) and phi. */
static double below_by_directions(const ev_antenna *antenna)
{
    enum { RINGS = 1800, SECTORS = 1201 };
    const ev_feed *feed = &antenna->feeds[0];
    ev_vec3 up = ev_antenna_up(antenna);
    double sum = 0.0;
    for (int i = 0; i < RINGS; i++) {
        double theta = EV_PI * (i + 0.5) / RINGS, ring = sin(theta) * EV_PI / RINGS;
        for (int k = 0; k < SECTORS; k++) {
            double phi = 2.0 * EV_PI * (k + 0.5) / SECTORS;
            ev_vec3 side = ev_vec3_along(ev_vec3_scale(cos(phi), feed->ex), sin(phi), feed->ey);
            ev_vec3 d = ev_vec3_along(ev_vec3_scale(cos(theta), feed->axis), sin(theta), side);
            if (ev_vec3_dot(d, up) < 0.0)
                sum += ring * ev_feed_launch(antenna, 0, d).level * 0.5 / SECTORS;
        }
    }
    return sum;
}

/* E and H planes 3 dB and more apart, to 110 degrees. */
static ev_pattern_table *lopsided_table(void)
{
    ev_pattern_table *table = calloc(1, sizeof *table);
    table->count = 12;
    for (int i = 0; i < 12; i++) {
        table->theta[i] = 10.0 * i * EV_PI / 180.0;
        table->e_db[i] = -0.15 * i * i;
        table->h_db[i] = -0.30 * i * i;
    }
    ev_pattern_table_prepare(table);
    return table;
}

/* Feeds that look at the ground, at the horizon and at the sky; round and lopsided, turned, in all
 * polarizations. */
static void test_below_the_horizon(void **state)
{
    (void)state;
    ev_pattern_table *table = lopsided_table();
    const double elevations[] = {0.1, 0.7, 1.5};
    for (int k = 0; k < 12; k++) {
        ev_design design = ev_fixture_design(k % 2 ? EV_FIXTURE_OFFSET : EV_FIXTURE_GREGORIAN);
        ev_feed_design *feed = &design.feeds[0];
        ev_antenna antenna;
        design.site = (ev_site_design){true, elevations[k % 3], 290.0, 10.0};
        feed->polarization = (ev_polarization)(k % 4);
        feed->roll = 0.3 * k;
        feed->tilt_y = 0.1 * (k % 5);
        feed->pattern = k % 3 == 1 ? EV_PATTERN_GAUSSIAN : EV_PATTERN_COS_POWER;
        feed->edge_taper = 6.0;
        if (k >= 4) {
            feed->pattern = EV_PATTERN_TABLE;
            feed->table = table;
        }
        ev_fixture_build(&design, &antenna);
        assert_near(ev_spill_below_horizon(&antenna, 0), below_by_directions(&antenna), 1e-4);
    }
    free(table);
}

/* What the sub catches and what of it misses, with rays of equal power; the hole counts as missed.
 */
static void test_sub_shares(void **state)
{
    (void)state;
    enum { RAYS = 100000 };
    ev_ray *rays = malloc(RAYS * sizeof *rays);
    for (int fixture = EV_FIXTURE_CASSEGRAIN; fixture < EV_FIXTURE_COUNT; fixture++) {
        ev_design design = ev_fixture_worn_design((ev_fixture)fixture);
        ev_antenna antenna;
        ev_fixture_build(&design, &antenna);
        ev_sub_shares shares = ev_spill_sub_shares(&antenna, 0);
        ev_trace_fan(&antenna, 0, RAYS, rays);
        double caught = 0.0, missed = 0.0;
        for (int i = 0; i < RAYS; i++) {
            caught += rays[i].fate != EV_FATE_PAST_SUB ? 1.0 / RAYS : 0.0;
            missed += rays[i].fate == EV_FATE_PAST_MAIN ? 1.0 / RAYS : 0.0;
        }
        assert_near(shares.caught, caught, 5e-4);
        assert_near(shares.missed, missed, 5e-4);
        assert_true(shares.caught_ground <= shares.caught && shares.missed_ground <= shares.missed);
        assert_true(shares.missed > 1e-3);
    }
    free(rays);
}

/* In place and without oversize or hole, nothing that the sub catches misses the dish. */
static void test_nothing_missed_in_place(void **state)
{
    (void)state;
    for (int fixture = EV_FIXTURE_CASSEGRAIN; fixture < EV_FIXTURE_COUNT; fixture++) {
        ev_design design = ev_fixture_design((ev_fixture)fixture);
        ev_antenna antenna;
        ev_fixture_build(&design, &antenna);
        ev_sub_shares shares = ev_spill_sub_shares(&antenna, 0);
        assert_near(shares.missed, 0.0, 1e-15);
        double n = antenna.feeds[0].exponent;
        if (design.main.offset == 0.0)
            assert_near(shares.caught, 1.0 - pow(cos(antenna.layout.sub_half_angle), n + 1.0),
                        1e-9);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_below_the_horizon),
        cmocka_unit_test(test_sub_shares),
        cmocka_unit_test(test_nothing_missed_in_place),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
