/* The collector: copies what it is given, counts, caps, and prints with a caret that stands under
 * the right character. */
#include "base/diagnostic.h"
#include "base/message.h"

#include <setjmp.h>
#include <stdarg.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

#include <cmocka.h>

static void print_to_text(const ev_diagnostics *diagnostics, char *text, size_t size)
{
    FILE *stream = tmpfile();
    assert_non_null(stream);
    ev_diagnostics_print(diagnostics, stream);
    rewind(stream);
    size_t length = fread(text, 1, size - 1, stream);
    text[length] = 0;
    fclose(stream);
}

static void copies_and_counts(void **state)
{
    (void)state;
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    char file[] = "a.yaml", source[] = "main: 3";
    ev_place place = {.file = file, .line = 2, .column = 7, .source = source, .width = 0};
    ev_report(&d, EV_SEVERITY_ERROR, not_mapping, &place, "main", "'3'");
    ev_report(&d, EV_SEVERITY_WARNING, unit_missing, NULL, "3", "main.diameter", "m");
    file[0] = source[0] = '?';
    assert_int_equal(d.count, 2);
    assert_int_equal(d.error_count, 1);
    assert_string_equal(d.items[0].id, "not_mapping");
    assert_string_equal(d.items[0].file, "a.yaml");
    assert_string_equal(d.items[0].source, "main: 3");
    assert_int_equal(d.items[0].width, 1);
    assert_null(d.items[1].file);
    ev_diagnostics_clear(&d);
    assert_int_equal(d.count, 0);
}

static void stops_at_its_capacity(void **state)
{
    (void)state;
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    for (int i = 0; i < EV_DIAGNOSTIC_CAPACITY + 7; i++)
        ev_report(&d, EV_SEVERITY_ERROR, unit_missing, NULL, "1", "x", "m");
    assert_int_equal(d.count, EV_DIAGNOSTIC_CAPACITY);
    assert_int_equal(d.dropped, 7);
    assert_int_equal(d.error_count, EV_DIAGNOSTIC_CAPACITY + 7);
    char text[16384];
    print_to_text(&d, text, sizeof text);
    assert_non_null(strstr(text, "and 7 more like these\n"));
    ev_diagnostics_clear(&d);
}

static void prints_place_line_and_caret(void **state)
{
    (void)state;
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    ev_place place = {"s.yaml", 3, 8, "caf\u00e9:\t12 m", 4};
    ev_report(&d, EV_SEVERITY_ERROR, text_empty, &place, "title");
    char text[512];
    print_to_text(&d, text, sizeof text);
    assert_string_equal(text, "s.yaml:3:8: error: 'title' is empty; give it a name or leave it "
                              "out\n  caf\u00e9: 12 m\n         ^^^^\n");
    ev_diagnostics_clear(&d);
}

/* A caret far to the right of a long line stays on the screen, under its character. */
static void shortens_long_lines(void **state)
{
    (void)state;
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    char source[2001];
    memset(source, 'a', 2000);
    source[2000] = 0;
    source[1499] = 'X';
    ev_place place = {"s.yaml", 1, 1500, source, 1};
    ev_report(&d, EV_SEVERITY_ERROR, text_empty, &place, "t");
    char text[2048];
    print_to_text(&d, text, sizeof text);
    char *line = strchr(text, '\n') + 1, *caret_line = strchr(line, '\n') + 1;
    assert_true(caret_line - line < 120);
    assert_int_equal(strchr(line, 'X') - line, strchr(caret_line, '^') - caret_line);
    ev_diagnostics_clear(&d);
}

/* A place that the line does not have gets no caret. */
static void keeps_the_caret_on_the_line(void **state)
{
    (void)state;
    static const int columns[] = {0, -3, 7, 2000000000};
    for (size_t i = 0; i < sizeof columns / sizeof columns[0]; i++) {
        ev_diagnostics d;
        ev_diagnostics_init(&d);
        ev_place place = {"s.yaml", 1, columns[i], "caf\u00e9", 1};
        ev_report(&d, EV_SEVERITY_ERROR, text_empty, &place, "t");
        char text[512];
        print_to_text(&d, text, sizeof text);
        assert_non_null(strstr(text, "\n  caf\u00e9\n"));
        assert_null(strchr(text, '^'));
        ev_diagnostics_clear(&d);
    }
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    ev_place place = {"s.yaml", 1, 6, "caf\u00e9", 1}; /* more bytes than characters */
    ev_report(&d, EV_SEVERITY_ERROR, text_empty, &place, "t");
    char text[512];
    print_to_text(&d, text, sizeof text);
    assert_null(strchr(text, '^'));
    ev_diagnostics_clear(&d);
}

/* Bytes of a hostile file must not steer a terminal. */
static void blanks_control_characters(void **state)
{
    (void)state;
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    ev_place place = {"s.yaml", 1, 1, "a\x1B[31m", 1};
    ev_report(&d, EV_SEVERITY_ERROR, text_empty, &place, "\x1B[2J");
    char text[512];
    print_to_text(&d, text, sizeof text);
    assert_null(strchr(text, 0x1B));
    ev_diagnostics_clear(&d);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(copies_and_counts),           cmocka_unit_test(stops_at_its_capacity),
        cmocka_unit_test(prints_place_line_and_caret), cmocka_unit_test(shortens_long_lines),
        cmocka_unit_test(keeps_the_caret_on_the_line), cmocka_unit_test(blanks_control_characters),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
