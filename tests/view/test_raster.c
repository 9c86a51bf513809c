/* Strokes: how much ink a stroke lays down, that the thread count does not matter, that curves have
 * no gaps, dashes their measure, and that nothing odd gets past the clipping. */
#include "view/raster.h"

#include <math.h>
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdlib.h>
#include <string.h>

#include <cmocka.h>

enum { SIDE = 400 };

static ev_raster raster;

static int set_up(void **state)
{
    (void)state;
    return ev_raster_resize(&raster, SIDE, SIDE) ? 0 : -1;
}

static int tear_down(void **state)
{
    (void)state;
    ev_raster_free(&raster);
    return 0;
}

static ev_stroke stroke(double x0, double y0, double x1, double y1, double width)
{
    return (ev_stroke){.x0 = (float)x0,
                       .y0 = (float)y0,
                       .x1 = (float)x1,
                       .y1 = (float)y1,
                       .width = (float)width,
                       .alpha0 = 1.0F,
                       .alpha1 = 1.0F,
                       .colour = 0x204060};
}

static double ink(void)
{
    double sum = 0.0;
    for (int i = 0; i < SIDE * SIDE; ++i) {
        sum += (raster.pixels[i] >> 24) / 255.0;
    }
    return sum;
}

static double draw_one(ev_stroke one)
{
    ev_raster_clear(&raster);
    ev_raster_draw(&raster, &one, 1, NULL);
    return ink();
}

/* Ink laid down is length times width, whatever the direction. */
static void test_coverage(void **state)
{
    static const double widths[] = {0.3, 0.85, 1.0, 1.4, 2.4, 3.2, 9.0};
    (void)state;
    for (size_t w = 0; w < sizeof widths / sizeof widths[0]; ++w) {
        for (int i = 0; i < 24; ++i) {
            double angle = 0.03 + 2.0 * 3.14159265 * i / 24.0, length = 150.0;
            double x = 200.3 + length * cos(angle), y = 199.7 + length * sin(angle);
            double got = draw_one(stroke(200.3, 199.7, x, y, widths[w]));
            double want = length * widths[w];
            if (fabs(got - want) > 0.012 * want + 0.5) {
                print_error("width %g angle %g: %g of ink, expected %g\n", widths[w], angle, got,
                            want);
            }
            assert_true(fabs(got - want) <= 0.012 * want + 0.5);
        }
    }
}

static void test_pixel_centres(void **state)
{
    (void)state;
    draw_one(stroke(10.0, 20.5, 50.0, 20.5, 1.0));
    for (int x = 10; x < 50; ++x) {
        assert_int_equal(raster.pixels[20 * SIDE + x], 0xFF204060u);
        assert_int_equal(raster.pixels[19 * SIDE + x], 0);
        assert_int_equal(raster.pixels[21 * SIDE + x], 0);
    }
    assert_int_equal(raster.pixels[20 * SIDE + 8], 0);
    assert_int_equal(raster.pixels[20 * SIDE + 51], 0);
}

static uint64_t hash(void)
{
    uint64_t sum = 14695981039346656037u;
    for (int i = 0; i < SIDE * SIDE; ++i) {
        sum = (sum ^ raster.pixels[i]) * 1099511628211u;
    }
    return sum;
}

static float random_float(unsigned *seed, double low, double high)
{
    *seed = *seed * 1664525u + 1013904223u;
    return (float)(low + (high - low) * (*seed >> 8) / 16777216.0);
}

static void fill_random(ev_strokes *strokes, int count)
{
    unsigned seed = 7;
    for (int i = 0; i < count; ++i) {
        ev_stroke one = {.x0 = random_float(&seed, -300.0, 700.0),
                         .y0 = random_float(&seed, -300.0, 700.0),
                         .x1 = random_float(&seed, -300.0, 700.0),
                         .y1 = random_float(&seed, -300.0, 700.0),
                         .width = random_float(&seed, 0.2, 6.0),
                         .alpha0 = random_float(&seed, 0.0, 1.0),
                         .alpha1 = random_float(&seed, 0.0, 1.0),
                         .colour = seed >> 8,
                         .style = (uint8_t)(i % 3),
                         .joined_start = i % 5 == 0,
                         .joined_end = i % 7 == 0};
        assert_true(ev_strokes_add(strokes, one));
    }
}

static void test_same_for_any_threads(void **state)
{
    ev_strokes strokes = {0};
    (void)state;
    fill_random(&strokes, 2000);
    uint64_t first = 0;
    for (int threads = 1; threads <= 8; ++threads) {
        ev_crew *crew = ev_crew_create(threads);
        assert_true((crew != NULL) == (threads > 1));
        ev_raster_clear(&raster);
        ev_raster_draw(&raster, strokes.items, strokes.count, crew);
        ev_crew_destroy(crew);
        first = threads == 1 ? hash() : first;
        assert_true(hash() == first);
    }
    assert_true(ink() > 1000.0);
    ev_strokes_free(&strokes);
}

/* A wide curve of short pieces is solid along its middle. */
static void test_joined_curve_has_no_gaps(void **state)
{
    enum { PIECES = 72 };
    ev_strokes strokes = {0};
    double radius = 150.0, step = 2.0 * 3.141592653589793 / PIECES;
    (void)state;
    for (int i = 0; i < PIECES; ++i) {
        ev_stroke one =
            stroke(200.0 + radius * cos(i * step), 200.0 + radius * sin(i * step),
                   200.0 + radius * cos((i + 1) * step), 200.0 + radius * sin((i + 1) * step), 3.2);
        one.joined_start = one.joined_end = true;
        ev_strokes_add(&strokes, one);
    }
    ev_raster_clear(&raster);
    ev_raster_draw(&raster, strokes.items, strokes.count, NULL);
    for (int i = 0; i < 3600; ++i) {
        double t = 2.0 * 3.141592653589793 * i / 3600.0,
               inside = radius * (1.0 - 0.25 * step * step / 2.0);
        int x = (int)(200.0 + inside * cos(t)), y = (int)(200.0 + inside * sin(t));
        assert_true(raster.pixels[y * SIDE + x] >> 24 > 240);
    }
    ev_strokes_free(&strokes);
}

static void test_dashes(void **state)
{
    ev_stroke one = stroke(5.0, 50.5, 390.0, 50.5, 1.0);
    (void)state;
    one.style = EV_STROKE_DASHES;
    double dashes = draw_one(one) / 385.0;
    assert_true(fabs(dashes - 7.0 / 11.0) < 0.02);
    one.style = EV_STROKE_DOTS;
    double dots = draw_one(one) / 385.0;
    assert_true(fabs(dots - 2.0 / 4.5) < 0.02);
}

/* Cut in two where it is joined, a dashed stroke looks the same. */
static void test_dashes_go_on(void **state)
{
    ev_stroke whole = stroke(5.0, 50.5, 385.0, 50.5, 1.0), parts[2];
    (void)state;
    whole.style = EV_STROKE_DASHES;
    draw_one(whole);
    uint64_t once = hash();
    parts[0] = parts[1] = whole;
    parts[0].x1 = parts[1].x0 = 203.0F;
    parts[1].start = 198.0F;
    parts[0].joined_end = parts[1].joined_start = true;
    ev_raster_clear(&raster);
    ev_raster_draw(&raster, parts, 2, NULL);
    assert_true(hash() == once);
}

static void test_fade(void **state)
{
    ev_stroke one = stroke(20.0, 30.5, 220.0, 30.5, 1.0);
    (void)state;
    one.alpha1 = 0.0F;
    draw_one(one);
    for (int x = 21; x < 219; ++x) {
        double want = 255.0 * (1.0 - (x + 0.5 - 20.0) / 200.0);
        double got = raster.pixels[30 * SIDE + x] >> 24;
        assert_true(fabs(got - want) < 2.5);
    }
}

static void test_bar(void **state)
{
    ev_strokes strokes = {0};
    (void)state;
    ev_strokes_add_bar(&strokes, stroke(100.0, 100.0, 130.0, 140.0, 1.0));
    assert_int_equal(strokes.count, 1);
    ev_stroke bar = strokes.items[0];
    double dx = (double)bar.x1 - bar.x0, dy = (double)bar.y1 - bar.y0;
    assert_true(fabs(hypot(dx, dy) - 10.0) < 1e-4);
    assert_true(fabs(dx * 30.0 + dy * 40.0) < 1e-3);
    assert_true(fabs(0.5 * ((double)bar.x0 + bar.x1) - 130.0) < 1e-4);
    assert_true(fabs(0.5 * ((double)bar.y0 + bar.y1) - 140.0) < 1e-4);
    ev_strokes_free(&strokes);
}

static void test_nasty(void **state)
{
    const float odd[] = {NAN, INFINITY, -INFINITY};
    (void)state;
    for (size_t i = 0; i < sizeof odd / sizeof odd[0]; ++i) {
        ev_stroke one = stroke(10.0, 10.0, 20.0, 20.0, 1.0);
        one.x1 = odd[i];
        assert_true(draw_one(one) == 0.0);
        one = stroke(10.0, 10.0, 20.0, 20.0, 1.0);
        one.width = odd[i];
        ev_raster_clear(&raster);
        ev_raster_draw(&raster, &one, 1, NULL);
    }
    assert_true(draw_one(stroke(50.0, 50.0, 50.0, 50.0, 3.0)) == 0.0);
    assert_true(draw_one(stroke(10.0, 10.0, 20.0, 20.0, 0.0)) == 0.0);
    assert_true(draw_one(stroke(-90.0, -90.0, -10.0, -20.0, 3.0)) == 0.0);
    /* from far outside right through: the width of the image, not of the stroke */
    double through = draw_one(stroke(-1e7, 100.5, 1e7, 100.5, 2.0));
    assert_true(fabs(through - 2.0 * SIDE) < 3.0);
}

static void test_clear_and_bounds(void **state)
{
    (void)state;
    draw_one(stroke(100.0, 120.0, 200.0, 180.0, 2.0));
    for (int y = 0; y < SIDE; ++y) {
        for (int x = 0; x < SIDE; ++x) {
            bool inside =
                x >= raster.left && x < raster.right && y >= raster.top && y < raster.bottom;
            assert_true(inside || raster.pixels[y * SIDE + x] == 0);
        }
    }
    assert_true(raster.right - raster.left < 110);
    ev_raster_clear(&raster);
    assert_true(ink() == 0.0);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_coverage),
        cmocka_unit_test(test_pixel_centres),
        cmocka_unit_test(test_same_for_any_threads),
        cmocka_unit_test(test_joined_curve_has_no_gaps),
        cmocka_unit_test(test_dashes),
        cmocka_unit_test(test_dashes_go_on),
        cmocka_unit_test(test_fade),
        cmocka_unit_test(test_bar),
        cmocka_unit_test(test_nasty),
        cmocka_unit_test(test_clear_and_bounds),
    };
    return cmocka_run_group_tests(tests, set_up, tear_down);
}
