/* Numbers as drawn, text that fits its slot, and boxes and plot maps. */
#include "draw/pen.h"

#include <math.h>
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <string.h>

#include <cmocka.h>

static void numbers_have_a_true_minus_and_no_minus_zero(void **state)
{
    (void)state;
    static const struct {
        double value;
        int decimals;
        bool plus;
        const char *text;
    } cases[] = {
        {-0.304, 2, false, "\u22120.30"},
        {-0.004, 2, false, "0.00"},
        {0.004, 2, true, "0.00"},
        {0.03, 2, true, "+0.03"},
        {46.1, 2, false, "46.10"},
        {NAN, 2, false, "\u2013"},
        {-INFINITY, 2, false, "\u2212\u221e"},
    };
    for (size_t i = 0; i < sizeof cases / sizeof cases[0]; ++i) {
        char text[64];
        ev_format_number(text, sizeof text, cases[i].value, cases[i].decimals, cases[i].plus);
        assert_string_equal(text, cases[i].text);
    }
    char tiny[8];
    ev_format_number(tiny, sizeof tiny, 1e300, 2, false);
    assert_int_equal(strlen(tiny), sizeof tiny - 1);
}

static void lengths_and_errors_read_well(void **state)
{
    (void)state;
    char text[64];
    ev_format_length(text, sizeof text, 1.2);
    assert_string_equal(text, "1200 mm");
    ev_format_length(text, sizeof text, 0.0125);
    assert_string_equal(text, "12.5 mm");
    ev_format_length(text, sizeof text, 100.0);
    assert_string_equal(text, "100 m");
    ev_format_error(text, sizeof text, 1.4234e-3, false);
    assert_string_equal(text, "1.42 mm");
    ev_format_error(text, sizeof text, -14.26e-3, true);
    assert_string_equal(text, "\u221214.3 mm");
    ev_format_error(text, sizeof text, 3.2e-5, false);
    assert_string_equal(text, "0.032 mm");
    ev_format_error(text, sizeof text, 1e-9, false);
    assert_string_equal(text, "< 1 \u00b5m");
}

static void steps_are_one_two_five(void **state)
{
    (void)state;
    static const double cases[][2] = {{1.0, 1.0}, {1.99, 1.0}, {2.0, 2.0},    {4.99, 2.0},
                                      {5.0, 5.0}, {9.99, 5.0}, {0.037, 0.02}, {700.0, 500.0}};
    for (size_t i = 0; i < sizeof cases / sizeof cases[0]; ++i)
        assert_true(fabs(ev_step_below(cases[i][0]) / cases[i][1] - 1.0) < 1e-12);
}

static void plot_maps_go_both_ways(void **state)
{
    (void)state;
    const ev_plot_map map = {
        .x0 = 120.0, .x_scale = 3.0, .y0 = 80.0, .y_scale = -2.5, .x_cross = 1.5, .y_cross = 2.0};
    double x, y, a, b;
    ev_plot_to_page(&map, 0.7, -1.3, &x, &y);
    assert_true(fabs(x - (120.0 + 2.1 - 1.95)) < 1e-12 && fabs(y - (80.0 + 3.25 + 1.4)) < 1e-12);
    ev_plot_to_data(&map, x, y, &a, &b);
    assert_true(fabs(a - 0.7) < 1e-12 && fabs(b + 1.3) < 1e-12);
}

static void last_box_is_hit_first(void **state)
{
    (void)state;
    static ev_boxes boxes;
    boxes.count = 0;
    ev_boxes_add(&boxes, EV_BOX_ROW, "under", (ev_rect){0.0, 0.0, 50.0, 50.0});
    ev_boxes_add(&boxes, EV_BOX_ROW, "over", (ev_rect){10.0, 10.0, 20.0, 20.0});
    ev_boxes_add(&boxes, EV_BOX_BUTTON, "button", (ev_rect){0.0, 0.0, 50.0, 50.0});
    assert_string_equal(ev_boxes_hit(&boxes, 15.0, 15.0, EV_BOX_ROW)->name, "over");
    assert_string_equal(ev_boxes_hit(&boxes, 45.0, 45.0, EV_BOX_ROW)->name, "under");
    assert_null(ev_boxes_hit(&boxes, 50.0, 10.0, EV_BOX_ROW));
    assert_null(ev_boxes_find(&boxes, "unde"));
    for (int i = 0; i < 2 * EV_BOX_CAPACITY; ++i)
        ev_boxes_add(&boxes, EV_BOX_ROW, "more", (ev_rect){0.0, 0.0, 1.0, 1.0});
    assert_int_equal(boxes.count, EV_BOX_CAPACITY);
}

static const ev_box *write_words(ev_boxes *boxes, ev_words words)
{
    cairo_surface_t *surface = cairo_image_surface_create(CAIRO_FORMAT_RGB24, 400, 100);
    cairo_t *cairo = cairo_create(surface);
    boxes->count = 0;
    ev_pen pen = ev_pen_begin(cairo, false, boxes, "test", (ev_rect){0.0, 0.0, 400.0, 100.0});
    words.name = "text.test";
    words.colour = pen.theme->ink;
    ev_text(&pen, words);
    ev_pen_end(&pen);
    cairo_destroy(cairo);
    cairo_surface_destroy(surface);
    return ev_boxes_find(boxes, "text.test");
}

static void text_shrinks_then_loses_its_end(void **state)
{
    (void)state;
    static ev_boxes boxes;
    const char *string = "A sentence that is wider than its slot";
    double natural = ev_text_width(string, EV_FONT_BODY);
    ev_words words = {.string = string,
                      .font = EV_FONT_BODY,
                      .x = 10.0,
                      .width = 0.9 * natural,
                      .baseline = 50.0,
                      .least = EV_LEAST_TYPE};
    ev_extent extent = ev_text_extent(&words);
    assert_true(extent.size < 12.5 && extent.size >= EV_LEAST_TYPE);
    const ev_box *box = write_words(&boxes, words);
    assert_true(box->rect.width <= words.width && box->rect.width > 0.85 * words.width);
    words.width = 0.4 * natural;
    box = write_words(&boxes, words);
    assert_true(box->rect.width <= words.width && box->rect.width > 0.6 * words.width);
    assert_true(ev_text_extent(&words).size == EV_LEAST_TYPE);
    words.least = 0.0;
    words.lines = 3;
    words.line_height = 15.0;
    assert_int_equal(ev_text_extent(&words).lines, 3);
    assert_string_equal(box->text, string);
}

static void digits_are_all_one_width(void **state)
{
    (void)state;
    const ev_font fonts[] = {EV_FONT_BODY, EV_FONT_FIELD, EV_FONT_GAIN};
    for (int i = 0; i < 3; ++i)
        assert_true(fabs(ev_text_width("1111", fonts[i]) - ev_text_width("0000", fonts[i])) < 0.02);
}

static void aligned_text_keeps_to_its_edge(void **state)
{
    (void)state;
    static ev_boxes boxes;
    ev_words words = {.string = "edge",
                      .font = EV_FONT_BODY,
                      .x = 100.0,
                      .width = 200.0,
                      .baseline = 50.0,
                      .align = EV_ALIGN_RIGHT};
    ev_rect rect = write_words(&boxes, words)->rect;
    assert_true(fabs(rect.x + rect.width - 300.0) < 1e-6);
    words.align = EV_ALIGN_CENTRE;
    rect = write_words(&boxes, words)->rect;
    assert_true(fabs(rect.x + 0.5 * rect.width - 200.0) < 1e-6);
    words.upright = true;
    rect = write_words(&boxes, words)->rect;
    assert_true(rect.height > rect.width && fabs(rect.y + 0.5 * rect.height - 50.0) < 1e-6);
}

static void cut_text_in_a_box_stays_whole_characters(void **state)
{
    (void)state;
    static ev_boxes boxes;
    char string[64];
    memset(string, 'x', 46);
    strcpy(string + 46, "\u2212\u2212");
    const ev_box *box = write_words(
        &boxes,
        (ev_words){.string = string, .font = EV_FONT_BODY, .width = 380.0, .baseline = 50.0});
    assert_int_equal(strlen(box->text), 46);
}

static void carets_and_bytes_agree(void **state)
{
    (void)state;
    const char *string = "3/8 \u2212in";
    int at = 0;
    for (const char *p = string; *p; ++at) {
        int byte = (int)(p - string);
        double x = ev_text_caret(string, EV_FONT_FIELD, byte);
        assert_int_equal(ev_text_index(string, EV_FONT_FIELD, x + 0.5), byte);
        ++p;
        while (((unsigned char)*p & 0xC0) == 0x80)
            ++p;
    }
    assert_int_equal(ev_text_index(string, EV_FONT_FIELD, 1e4), (int)strlen(string));
    assert_int_equal(ev_text_index(string, EV_FONT_FIELD, -5.0), 0);
}

static int release(void **state)
{
    (void)state;
    ev_draw_release();
    return 0;
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(numbers_have_a_true_minus_and_no_minus_zero),
        cmocka_unit_test(lengths_and_errors_read_well),
        cmocka_unit_test(steps_are_one_two_five),
        cmocka_unit_test(plot_maps_go_both_ways),
        cmocka_unit_test(last_box_is_hit_first),
        cmocka_unit_test(text_shrinks_then_loses_its_end),
        cmocka_unit_test(digits_are_all_one_width),
        cmocka_unit_test(aligned_text_keeps_to_its_edge),
        cmocka_unit_test(cut_text_in_a_box_stays_whole_characters),
        cmocka_unit_test(carets_and_bytes_agree),
    };
    return cmocka_run_group_tests(tests, NULL, release);
}
