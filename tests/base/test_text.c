/* Strings: UTF-8, bounded copies, edit distance, the buffer. */
#include "base/text.h"

#include <setjmp.h>
#include <stdarg.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

#include <cmocka.h>

static void finds_where_utf8_ends(void **state)
{
    (void)state;
    static const struct {
        const char *text;
        size_t end;
    } cases[] = {
        {"", 0},
        {"plain", 5},
        {"caf\u00e9 \u2212 \U0001F4E1", 14},
        {"a\x80", 1},             /* a tail without a head */
        {"a\xC0\xAF", 1},         /* overlong */
        {"a\xE0\x80\x80", 1},     /* overlong */
        {"a\xED\xA0\x80", 1},     /* surrogate */
        {"a\xF4\x90\x80\x80", 1}, /* beyond U+10FFFF */
        {"a\xE2\x88", 1},         /* cut short */
        {"a\xFF", 1},
    };
    for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++)
        assert_int_equal(ev_text_utf8_end(cases[i].text, strlen(cases[i].text)), cases[i].end);
}

static void counts_characters(void **state)
{
    (void)state;
    assert_int_equal(ev_text_characters("caf\u00e9", 5), 4);
    assert_int_equal(ev_text_characters("\x80\x80", 2), 2);
}

static void copies_whole_characters(void **state)
{
    (void)state;
    char text[5];
    assert_true(ev_text_copy(text, sizeof text, "four"));
    assert_string_equal(text, "four");
    assert_false(ev_text_copy(text, sizeof text, "abc\u2212"));
    assert_string_equal(text, "abc");
}

static void measures_distance(void **state)
{
    (void)state;
    static const struct {
        const char *a, *b;
        int distance;
    } cases[] = {
        {"", "", 0},
        {"", "abc", 3},
        {"offset", "offset", 0},
        {"ofset", "offset", 1},
        {"foacl", "focal", 1},
        {"diamter", "diameter", 1},
        {"kitten", "sitting", 3},
        {"ab", "ba", 1},
    };
    for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
        assert_int_equal(ev_text_distance(cases[i].a, cases[i].b), cases[i].distance);
        assert_int_equal(ev_text_distance(cases[i].b, cases[i].a), cases[i].distance);
    }
    char longest[300];
    memset(longest, 'x', sizeof longest - 1);
    longest[sizeof longest - 1] = 0;
    assert_int_equal(ev_text_distance(longest, longest), 0);
}

static void keeps_the_nearest(void **state)
{
    (void)state;
    ev_nearest nearest = {0};
    assert_false(ev_nearest_is_plausible(&nearest, "focl"));
    ev_nearest_offer(&nearest, "focl", "offset");
    assert_false(ev_nearest_is_plausible(&nearest, "focl"));
    ev_nearest_offer(&nearest, "focl", "focal");
    ev_nearest_offer(&nearest, "focl", "depth");
    assert_string_equal(nearest.word, "focal");
    assert_true(ev_nearest_is_plausible(&nearest, "focl"));
}

static void buffers_grow(void **state)
{
    (void)state;
    ev_buffer buffer = {0};
    for (int i = 0; i < 1000; i++)
        ev_buffer_format(&buffer, "%d,", i);
    assert_int_equal(strlen(buffer.data), buffer.size);
    assert_int_equal(buffer.size, 10 * 2 + 90 * 3 + 900 * 4);
    assert_memory_equal(buffer.data, "0,1,2,", 6);
    free(buffer.data);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(finds_where_utf8_ends),   cmocka_unit_test(counts_characters),
        cmocka_unit_test(copies_whole_characters), cmocka_unit_test(measures_distance),
        cmocka_unit_test(keeps_the_nearest),       cmocka_unit_test(buffers_grow),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
