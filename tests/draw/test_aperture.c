/* The Aperture plate: seen as one faces the dish, +x up and +y to the left; colours by the sign of
 * the error; shadows where their outlines are; figures those of the budget. */
#include "draw/theme.h"
#include "sheet.h"

#include <math.h>

/* A plate of a made-up antenna, 1 m across. */
typedef struct plate_state {
    ev_antenna antenna;
    ev_budget budget;
    ev_sheet sheet;
    float field[EV_APERTURE_SIDE * EV_APERTURE_SIDE];
} plate_state;

static void fill_field(plate_state *s, double by_x, double by_y)
{
    for (int r = 0; r < EV_APERTURE_SIDE; ++r)
        for (int c = 0; c < EV_APERTURE_SIDE; ++c) {
            double x = 1.0 - 2.0 * r / (EV_APERTURE_SIDE - 1);
            double y = 2.0 * c / (EV_APERTURE_SIDE - 1) - 1.0;
            bool inside = hypot(x, y) <= 1.02;
            s->field[r * EV_APERTURE_SIDE + c] =
                inside ? (float)(0.001 * (by_x * x + by_y * y)) : NAN;
        }
}

static int begin(void **state)
{
    plate_state *s = calloc(1, sizeof *s);
    s->antenna.radius = s->antenna.shadows.radius = 0.5;
    s->antenna.wavelength = 0.01;
    s->budget.feeds[0].rim_top_db = -11.0;
    s->budget.feeds[0].rim_bottom_db = -9.0;
    s->budget.feeds[0].path_error.rms_area = 0.00125;
    s->budget.feeds[0].path_error.peak_to_valley = 0.002;
    s->budget.feeds[0].untilted.rms_area = 0.0004;
    s->sheet = (ev_sheet){.antenna = &s->antenna, .budget = &s->budget, .aperture = s->field};
    *state = s;
    return 0;
}

static int end(void **state)
{
    free(*state);
    ev_draw_release();
    return 0;
}

typedef struct plate_picture {
    cairo_surface_t *surface;
    ev_rect map;
    ev_boxes boxes;
} plate_picture;

static void draw_plate(const plate_state *s, plate_picture *picture)
{
    picture->surface = cairo_image_surface_create(CAIRO_FORMAT_RGB24, 1280, 800);
    cairo_t *cairo = cairo_create(picture->surface);
    ev_page page = ev_page_layout(1280.0, 800.0);
    picture->boxes.count = 0;
    ev_draw_aperture(cairo, &page, &s->sheet, &picture->boxes);
    cairo_destroy(cairo);
    cairo_surface_flush(picture->surface);
    picture->map = ev_boxes_find(&picture->boxes, "plate.aperture")->rect;
}

/* The colour at aperture coordinates, in units of the radius. */
static unsigned plate_pixel(const plate_picture *picture, double x, double y)
{
    double radius = 0.5 * picture->map.width;
    double px = picture->map.x + radius - y * radius, py = picture->map.y + radius - x * radius;
    return pixel_at(picture->surface, (int)px, (int)py);
}

static bool is_warm(unsigned pixel)
{
    return (pixel >> 16) > (pixel & 255) + 40;
}

static bool is_cold(unsigned pixel)
{
    return (pixel & 255) > (pixel >> 16) + 40;
}

static void up_is_x_and_left_is_y(void **state)
{
    plate_state *s = *state;
    plate_picture *picture = calloc(1, sizeof *picture);
    static const double slopes[][2] = {{1.0, 0.0}, {0.0, 1.0}, {-1.0, 0.0}, {0.0, -1.0}};
    for (int i = 0; i < 4; ++i) {
        fill_field(s, slopes[i][0], slopes[i][1]);
        draw_plate(s, picture);
        double x = 0.83 * slopes[i][0], y = 0.83 * slopes[i][1];
        assert_true(is_warm(plate_pixel(picture, x, y)));
        assert_true(is_cold(plate_pixel(picture, -x, -y)));
        cairo_surface_destroy(picture->surface);
    }
    free(picture);
}

static void shadows_lie_where_their_outlines_are(void **state)
{
    plate_state *s = *state;
    plate_picture *picture = calloc(1, sizeof *picture);
    ev_shadows *shadows = &s->antenna.shadows;
    fill_field(s, 0.0, 0.0);
    shadows->strips[0] = ev_strip_make(0.5 * EV_PI, 0.04, 0.1, 3.0, 0);
    shadows->strip_count = 1;
    shadows->has_sub = true;
    shadows->sub = (ev_outline){.x = 0.2, .y = -0.1, .ux = 0.06, .vy = 0.09};
    draw_plate(s, picture);
    const ev_theme *theme = ev_theme_get(false);
    ev_colour dark = ev_colour_mix(theme->ground, theme->ink, 0.88);
    unsigned shadow = (unsigned)lround(255.0 * dark.r) << 16 |
                      (unsigned)lround(255.0 * dark.g) << 8 | (unsigned)lround(255.0 * dark.b);
    const struct {
        double x, y;
        bool shaded;
    } points[] = {
        {0.0, 0.6, true},    {0.0, 0.97, true}, {0.0, -0.6, false},  {0.0, 0.1, false},
        {0.06, 0.6, false},  {0.4, -0.2, true}, {0.4, -0.35, true},  {0.5, -0.2, true},
        {0.55, -0.2, false}, {0.4, 0.2, false}, {0.4, -0.42, false},
    };
    for (size_t i = 0; i < sizeof points / sizeof points[0]; ++i) {
        bool shaded = plate_pixel(picture, points[i].x, points[i].y) == shadow;
        if (shaded != points[i].shaded)
            fail_msg("%g %g is %s", points[i].x, points[i].y, shaded ? "shaded" : "free");
    }
    cairo_surface_destroy(picture->surface);
    shadows->strip_count = 0;
    shadows->has_sub = false;
    free(picture);
}

static void hole_and_outside_stay_ground(void **state)
{
    plate_state *s = *state;
    plate_picture *picture = calloc(1, sizeof *picture);
    fill_field(s, 3.0, 0.0);
    s->antenna.hole_radius = 0.1;
    draw_plate(s, picture);
    assert_int_equal(plate_pixel(picture, 0.1, 0.05), 0xF6F3EA);
    assert_int_equal(plate_pixel(picture, 0.8, 0.8), 0xF6F3EA);
    assert_int_not_equal(plate_pixel(picture, 0.5, 0.5), 0xF6F3EA);
    s->antenna.hole_radius = 0.0;
    cairo_surface_destroy(picture->surface);
    free(picture);
}

static void figures_are_the_budgets(void **state)
{
    plate_state *s = *state;
    plate_picture *picture = calloc(1, sizeof *picture);
    s->budget.feeds[0].power[EV_FATE_SHADOW_STRUTS] = 0.05;
    s->budget.feeds[0].power[EV_FATE_SHADOW_SUB] = 0.006;
    fill_field(s, 1.0, 0.0);
    s->sheet.aperture_range = 0.004;
    draw_plate(s, picture);
    static const char *const figures[][2] = {
        {"rms.value", "1.25 mm"},           {"waves.value", "\u03bb/8"},
        {"untilted.value", "0.40 mm"},      {"valley.value", "2.00 mm"},
        {"rim.top.value", "\u221211.0 dB"}, {"rim.bottom.value", "\u22129.0 dB"},
        {"shadow.value", "5.6 %"},          {"late", "+4 mm"},
        {"late.waves", "+0.40 \u03bb"},     {"early", "\u22124 mm"},
    };
    for (size_t i = 0; i < sizeof figures / sizeof figures[0]; ++i) {
        char name[64];
        snprintf(name, sizeof name, "text.aperture.%s", figures[i][0]);
        const ev_box *box = ev_boxes_find(&picture->boxes, name);
        assert_non_null(box);
        assert_string_equal(box->text, figures[i][1]);
    }
    s->sheet.aperture_range = 0.0;
    cairo_surface_destroy(picture->surface);
    free(picture);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(up_is_x_and_left_is_y),
        cmocka_unit_test(shadows_lie_where_their_outlines_are),
        cmocka_unit_test(hole_and_outside_stay_ground),
        cmocka_unit_test(figures_are_the_budgets),
    };
    return cmocka_run_group_tests(tests, begin, end);
}
