/* Quantities: every unit, fractions, what is refused and where, shortest text that reads back. */
#include "base/quantity.h"
#include "base/vec3.h"

#include <locale.h>
#include <setjmp.h>
#include <stdarg.h>
#include <stdint.h>
#include <stdio.h>
#include <string.h>

#include <cmocka.h>

#define LENGTH EV_QUANTITY_LENGTH
#define FREQUENCY EV_QUANTITY_FREQUENCY
#define ANGLE EV_QUANTITY_ANGLE
#define LEVEL EV_QUANTITY_LEVEL
#define TEMPERATURE EV_QUANTITY_TEMPERATURE
#define NUMBER EV_QUANTITY_NUMBER

/* Expected values are the doubles nearest the exact ones. */
static void reads_every_unit(void **state)
{
    (void)state;
    static const struct {
        ev_quantity quantity;
        const char *text;
        double value;
    } cases[] = {
        {LENGTH, "1.2 m", 1.2},
        {LENGTH, "60 mm", 0.06},
        {LENGTH, "9 mm", 0.009},
        {LENGTH, "2.5cm", 0.025},
        {LENGTH, "3 km", 3000.0},
        {LENGTH, "250 um", 250e-6},
        {LENGTH, "250 \u00B5m", 250e-6},
        {LENGTH, "24 in", 0.6096},
        {LENGTH, "3/8 in", 0.009525},
        {LENGTH, "1 1/2 in", 0.0381},
        {LENGTH, "-1 1/2 in", -0.0381},
        {LENGTH, "3/8\"", 0.009525},
        {LENGTH, "2 ft", 0.6096},
        {LENGTH, "  +1.5e-3  m  ", 0.0015},
        {LENGTH, "\u22124.0 mm", -0.004},
        {LENGTH, ".5 m", 0.5},
        {LENGTH, "5. m", 5.0},
        {FREQUENCY, "50 Hz", 50.0},
        {FREQUENCY, "50 kHz", 50e3},
        {FREQUENCY, "1296 MHz", 1.296e9},
        {FREQUENCY, "12 GHz", 12e9},
        {FREQUENCY, "0.3 THz", 0.3e12},
        {ANGLE, "180 deg", EV_PI},
        {ANGLE, "90\u00B0", EV_PI / 2},
        {ANGLE, "2 rad", 2.0},
        {ANGLE, "60 arcmin", EV_PI / 180},
        {ANGLE, "3600 arcsec", EV_PI / 180},
        {LEVEL, "11 dB", 11.0},
        {TEMPERATURE, "290 K", 290.0},
        {NUMBER, "2", 2.0},
        {NUMBER, "-1e3", -1000.0},
        {NUMBER, "1/3", 1.0 / 3.0},
        {NUMBER, "-0", 0.0},
    };
    for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
        double value = -1.0;
        print_message("%s\n", cases[i].text);
        assert_int_equal(ev_quantity_parse(cases[i].quantity, cases[i].text, &value, NULL),
                         EV_PARSE_OK);
        assert_memory_equal(&value, &cases[i].value, sizeof value);
    }
}

static void refuses_and_says_where(void **state)
{
    (void)state;
    static const struct {
        ev_quantity quantity;
        const char *text;
        ev_parse_result result;
        int column;
    } cases[] = {
        {LENGTH, "", EV_PARSE_NOT_A_NUMBER, 0},
        {LENGTH, "m", EV_PARSE_NOT_A_NUMBER, 0},
        {LENGTH, "big", EV_PARSE_NOT_A_NUMBER, 0},
        {LENGTH, "1,2 m", EV_PARSE_NOT_A_NUMBER, 1},
        {LENGTH, "1.2.3 m", EV_PARSE_NOT_A_NUMBER, 3},
        {LENGTH, "1 2 m", EV_PARSE_NOT_A_NUMBER, 2},
        {LENGTH, "0x10 m", EV_PARSE_UNIT_UNKNOWN, 1},
        {LENGTH, "1/ m", EV_PARSE_NOT_A_NUMBER, 1},
        {LENGTH, "--1 m", EV_PARSE_NOT_A_NUMBER, 0},
        {LENGTH, "1.2", EV_PARSE_UNIT_MISSING, 3},
        {LENGTH, "1.2 GHz", EV_PARSE_UNIT_UNKNOWN, 4},
        {LENGTH, "1.2 M", EV_PARSE_UNIT_UNKNOWN, 4},
        {LENGTH, "1.2 m m", EV_PARSE_UNIT_UNKNOWN, 4},
        {FREQUENCY, "12 ghz", EV_PARSE_UNIT_UNKNOWN, 3},
        {NUMBER, "2 m", EV_PARSE_UNIT_UNWANTED, 2},
        {NUMBER, "nan", EV_PARSE_NOT_FINITE, 0},
        {LENGTH, ".inf m", EV_PARSE_NOT_FINITE, 0},
        {LENGTH, "-Infinity m", EV_PARSE_NOT_FINITE, 0},
        {LENGTH, "1e999 m", EV_PARSE_NOT_FINITE, 0},
        {LENGTH, "1/0 in", EV_PARSE_NOT_FINITE, 0},
        {LENGTH, "0/0 in", EV_PARSE_NOT_FINITE, 0},
    };
    for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
        double value = 77.0;
        int column = -1;
        print_message("'%s'\n", cases[i].text);
        assert_int_equal(ev_quantity_parse(cases[i].quantity, cases[i].text, &value, &column),
                         cases[i].result);
        assert_int_equal(column, cases[i].column);
        assert_true(value == 77.0);
    }
}

static uint64_t next_random(uint64_t *state)
{
    *state ^= *state << 13;
    *state ^= *state >> 7;
    *state ^= *state << 17;
    return *state;
}

/* Every double in every unit, digits no longer than they must be. */
static void writes_what_reads_back(void **state)
{
    (void)state;
    static const struct {
        ev_quantity quantity;
        const char *unit;
    } units[] = {{LENGTH, "m"},     {LENGTH, "mm"},     {LENGTH, "cm"},    {LENGTH, "km"},
                 {LENGTH, "um"},    {LENGTH, "in"},     {LENGTH, "ft"},    {FREQUENCY, "GHz"},
                 {ANGLE, "deg"},    {ANGLE, "rad"},     {ANGLE, "arcmin"}, {ANGLE, "arcsec"},
                 {LEVEL, "dB"},     {TEMPERATURE, "K"}, {NUMBER, ""},      {FREQUENCY, "Hz"},
                 {FREQUENCY, "kHz"}};
    uint64_t random = 20261201;
    print_message("seed 20261201\n");
    for (int i = 0; i < 20000; i++) {
        double mantissa = 0.5 + 0.5 * (double)(next_random(&random) >> 11) * 0x1p-53;
        double value = ldexp(mantissa, (int)(next_random(&random) % 80) - 40), back = 0.0;
        size_t which = next_random(&random) % (sizeof units / sizeof units[0]);
        char text[80];
        ev_quantity_write(units[which].quantity, i % 2 ? value : -value, units[which].unit, text,
                          sizeof text);
        assert_int_equal(ev_quantity_parse(units[which].quantity, text, &back, NULL), EV_PARSE_OK);
        if (back != (i % 2 ? value : -value))
            fail_msg("%a in %s became %s", value, units[which].unit, text);
    }
}

static void writes_the_shortest(void **state)
{
    (void)state;
    static const struct {
        ev_quantity quantity;
        double value;
        const char *unit, *text;
    } cases[] = {
        {LENGTH, 0.06, "mm", "60 mm"},
        {LENGTH, 0.06, "m", "0.06 m"},
        {LENGTH, 0.009525, "in", "0.375 in"},
        {LENGTH, 0.0, "mm", "0 mm"},
        {LENGTH, -0.0, "mm", "0 mm"},
        {LENGTH, -0.004, "mm", "-4 mm"},
        {LENGTH, 0.4, "mm", "400 mm"},
        {FREQUENCY, 10e9, "GHz", "10 GHz"},
        {FREQUENCY, 18.7e9, "GHz", "18.7 GHz"},
        {ANGLE, EV_PI / 2, "deg", "90 deg"},
        {NUMBER, 0.1, "", "0.1"},
        {NUMBER, 1e30, "", "1e+30"},
        {LEVEL, 11.0, "dB", "11 dB"},
    };
    for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
        char text[80];
        ev_quantity_write(cases[i].quantity, cases[i].value, cases[i].unit, text, sizeof text);
        assert_string_equal(text, cases[i].text);
    }
}

static void formats_for_people(void **state)
{
    (void)state;
    static const struct {
        ev_quantity quantity;
        double value;
        const char *digits, *unit;
    } cases[] = {
        {LENGTH, 0.014, "14.0", "mm"},       {LENGTH, -0.004, "\u22124.0", "mm"},
        {LENGTH, 0.00025, "0.25", "mm"},     {LENGTH, 12.0, "12.000", "m"},
        {LENGTH, 0.0, "0.0", "mm"},          {LENGTH, -1e-9, "0.00", "mm"},
        {LENGTH, NAN, "\u2013", "mm"},       {FREQUENCY, 18.7e9, "18.70", "GHz"},
        {FREQUENCY, 432e6, "432.00", "MHz"}, {ANGLE, EV_PI / 6, "30.00", "\u00B0"},
        {LEVEL, 11.0, "11.0", "dB"},         {LEVEL, 0.05, "0.05", "dB"},
        {TEMPERATURE, 290.0, "290.0", "K"},  {NUMBER, 2.0, "2.000", ""},
    };
    for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
        char digits[32], unit[8];
        ev_quantity_format(cases[i].quantity, cases[i].value, digits, sizeof digits, unit,
                           sizeof unit);
        assert_string_equal(digits, cases[i].digits);
        assert_string_equal(unit, cases[i].unit);
    }
}

static void finds_the_unit_of_a_text(void **state)
{
    (void)state;
    static const char *const cases[][2] = {{"12 GHz", "GHz"}, {"12GHz", "GHz"}, {"1 1/2 in ", "in"},
                                           {"-3/8\"", "\""},  {"2", ""},        {"1e3 m", "m"}};
    for (size_t i = 0; i < sizeof cases / sizeof cases[0]; i++) {
        char unit[16];
        ev_quantity_unit_of(cases[i][0], unit, sizeof unit);
        assert_string_equal(unit, cases[i][1]);
    }
}

/* A program with a window runs under the user's locale; many have a decimal comma. */
static void ignores_the_locale(void **state)
{
    (void)state;
    static const char *const names[] = {"de_DE.UTF-8", "fr_FR.UTF-8", "es_ES.UTF-8", "ru_RU.UTF-8"};
    const char *set = NULL;
    for (size_t i = 0; set == NULL && i < sizeof names / sizeof names[0]; i++)
        set = setlocale(LC_ALL, names[i]);
    if (set == NULL) {
        print_message("no locale with a decimal comma is installed\n");
        skip();
    }
    double value;
    char text[32], unit[8];
    assert_int_equal(ev_quantity_parse(LENGTH, "1.25 m", &value, NULL), EV_PARSE_OK);
    assert_true(value == 1.25);
    ev_quantity_write(LENGTH, 1.25, "m", text, sizeof text);
    assert_string_equal(text, "1.25 m");
    ev_quantity_format(LENGTH, 0.0145, text, sizeof text, unit, sizeof unit);
    assert_string_equal(text, "14.5");
    setlocale(LC_ALL, "C");
}

/* Texts that do not fit are cut, never written past. */
static void respects_small_buffers(void **state)
{
    (void)state;
    char text[5] = "....", unit[2];
    ev_quantity_write(LENGTH, 0.123456789, "mm", text, sizeof text);
    assert_int_equal(strlen(text), 4);
    ev_quantity_format(LENGTH, 123.0, text, sizeof text, unit, sizeof unit);
    assert_int_equal(strlen(text), 4);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(reads_every_unit),       cmocka_unit_test(refuses_and_says_where),
        cmocka_unit_test(writes_what_reads_back), cmocka_unit_test(writes_the_shortest),
        cmocka_unit_test(formats_for_people),     cmocka_unit_test(finds_the_unit_of_a_text),
        cmocka_unit_test(ignores_the_locale),     cmocka_unit_test(respects_small_buffers),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
