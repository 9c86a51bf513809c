/* The rings of the Detail against direct evaluation. */
#include "check.h"
#include "fixture.h"

#include "study/loss_map.h"

enum { MIDDLE = EV_LOSS_MAP_SIDE / 2 };

static ev_loss_map map_of(const ev_design *design, ev_part part, ev_part_axis right,
                          ev_part_axis up, double extent)
{
    ev_loss_map map;
    ev_loss_map_compute(design, design->frequencies[0], part, 0, right, up, extent, &map);
    return map;
}

/* Loss with the part at (right, up) m from nominal, by moving it there. */
static double direct(const ev_design *design, const ev_loss_map *map, double right, double up)
{
    ev_antenna antenna;
    double by[EV_AXIS_COUNT] = {0};
    ev_fixture_build(design, &antenna);
    by[map->axis[0]] = right - ev_part_place(design, &antenna, map->part, 0, map->axis[0]);
    by[map->axis[1]] = up - ev_part_place(design, &antenna, map->part, 0, map->axis[1]);
    return map->best_dbi - ev_part_gain_at(design, design->frequencies[0], map->part, 0, by);
}

static void test_nodes_and_between(void **state)
{
    (void)state;
    for (int fixture = 0; fixture < EV_FIXTURE_COUNT; fixture += 2)
        for (int part = 0; part < 2; part++) {
            ev_design design = ev_fixture_worn_design((ev_fixture)fixture);
            if (part == EV_PART_SUB && !design.sub.present)
                continue;
            ev_loss_map map = map_of(&design, (ev_part)part, EV_AXIS_OUT, EV_AXIS_UP, 0.0);
            double step = 2.0 * map.extent / (EV_LOSS_MAP_SIDE - 1);
            for (int k = 0; k < 40; k++) {
                int column = 7 * k % EV_LOSS_MAP_SIDE, row = 11 * k % EV_LOSS_MAP_SIDE;
                double right = map.centre[0] - map.extent + step * column;
                double up = map.centre[1] - map.extent + step * row;
                double loss = fmax(direct(&design, &map, right, up), 0.0);
                assert_near(map.loss_db[row][column], loss, 1e-9);
                assert_near(ev_loss_map_at(&map, right, up), loss, 1e-9);
                right = map.centre[0] + map.extent * (0.9 * cos(k)) * 0.5;
                up = map.centre[1] + map.extent * (0.9 * sin(k)) * 0.5;
                loss = direct(&design, &map, right, up);
                assert_near(ev_loss_map_at(&map, right, up), loss, 0.01 + 0.03 * fabs(loss));
            }
        }
}

/* The part as it sits is on the map, and so is a ring of 1 dB about the best place. */
static void test_extent(void **state)
{
    (void)state;
    for (int fixture = 1; fixture < EV_FIXTURE_COUNT; fixture += 2) {
        ev_design design = ev_fixture_worn_design((ev_fixture)fixture);
        ev_antenna antenna;
        ev_fixture_build(&design, &antenna);
        ev_loss_map map = map_of(&design, EV_PART_FEED, EV_AXIS_UP, EV_AXIS_ACROSS, 0.0);
        for (int i = 0; i < 2; i++) {
            double place = ev_part_place(&design, &antenna, EV_PART_FEED, 0, map.axis[i]);
            assert_true(fabs(place - map.centre[i]) < map.extent);
        }
        assert_true(map.loss_db[MIDDLE][MIDDLE] < 0.06);
        assert_true(map.loss_db[MIDDLE][0] > 1.0 &&
                    map.loss_db[MIDDLE][EV_LOSS_MAP_SIDE - 1] > 1.0);
        assert_true(map.loss_db[0][MIDDLE] > 1.0 &&
                    map.loss_db[EV_LOSS_MAP_SIDE - 1][MIDDLE] > 1.0);
    }
}

/* A symmetric dish with its feed in place: the same loss either way, left and right, up and down.
 */
static void test_symmetry(void **state)
{
    (void)state;
    ev_design design = ev_fixture_design(EV_FIXTURE_PRIME);
    ev_loss_map map = map_of(&design, EV_PART_FEED, EV_AXIS_UP, EV_AXIS_ACROSS, 0.05);
    assert_near(map.extent, 0.05, 0.0);
    assert_near(map.centre[0], 0.0, 1e-6);
    for (int row = 0; row < EV_LOSS_MAP_SIDE; row++)
        for (int column = 0; column < EV_LOSS_MAP_SIDE; column++) {
            int back = EV_LOSS_MAP_SIDE - 1 - row;
            assert_near(map.loss_db[row][column], map.loss_db[back][column], 1e-3);
            assert_near(map.loss_db[row][column], map.loss_db[column][row], 0.02);
        }
}

static void test_beyond_the_map_it_is_clamped(void **state)
{
    (void)state;
    ev_design design = ev_fixture_design(EV_FIXTURE_OFFSET);
    ev_loss_map map = map_of(&design, EV_PART_FEED, EV_AXIS_OUT, EV_AXIS_UP, 0.02);
    double far = ev_loss_map_at(&map, 1.0, map.centre[1]);
    assert_near(far, ev_loss_map_at(&map, map.centre[0] + map.extent, map.centre[1]), 1e-9);
    assert_true(isfinite(ev_loss_map_at(&map, -1e9, 1e9)));
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_nodes_and_between),
        cmocka_unit_test(test_extent),
        cmocka_unit_test(test_symmetry),
        cmocka_unit_test(test_beyond_the_map_it_is_clamped),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
