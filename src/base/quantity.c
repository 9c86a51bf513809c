/* Quantities: text with a unit to SI and back. Called by the scene reader and writer and by every
 * field a person types into. Independent of the locale: numbers are read and written under "C".
 *
 * Scaling is done in long double with exact integer factors where the unit allows (1 in = 254 /
 * 10000 m), so that "60 mm" is the double nearest 0.06 and every double can be written in every
 * unit. */
#include "base/quantity.h"

#include "base/text.h"
#include "base/vec3.h"

#include <locale.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#define PI_LONG 3.14159265358979323846264338327950288L

typedef struct unit {
    const char *name;
    long double times, over; /* SI value = number * times / over */
} unit;

/* Spellings after the first NULL-free run that people also type ("µm", "°") are legal to read but
 * are not advertised; see ev_quantity_units. */
static const unit length_units[] = {{"m", 1, 1},
                                    {"mm", 1, 1000},
                                    {"cm", 1, 100},
                                    {"km", 1000, 1},
                                    {"um", 1, 1000000},
                                    {"in", 254, 10000},
                                    {"ft", 3048, 10000},
                                    {"\u00B5m", 1, 1000000},
                                    {"\u03BCm", 1, 1000000},
                                    {"\"", 254, 10000},
                                    {NULL, 0, 0}};
static const unit frequency_units[] = {{"Hz", 1, 1},     {"kHz", 1e3L, 1},  {"MHz", 1e6L, 1},
                                       {"GHz", 1e9L, 1}, {"THz", 1e12L, 1}, {NULL, 0, 0}};
static const unit angle_units[] = {{"deg", PI_LONG, 180},      {"rad", 1, 1},
                                   {"arcmin", PI_LONG, 10800}, {"arcsec", PI_LONG, 648000},
                                   {"\u00B0", PI_LONG, 180},   {NULL, 0, 0}};
static const unit level_units[] = {{"dB", 1, 1}, {NULL, 0, 0}};
static const unit temperature_units[] = {{"K", 1, 1}, {NULL, 0, 0}};

static const struct {
    const unit *units;
    const char *names;
} kinds[EV_QUANTITY_COUNT] = {
    [EV_QUANTITY_NUMBER] = {NULL, ""},
    [EV_QUANTITY_LENGTH] = {length_units, "m, mm, cm, km, um, in, ft"},
    [EV_QUANTITY_FREQUENCY] = {frequency_units, "Hz, kHz, MHz, GHz, THz"},
    [EV_QUANTITY_ANGLE] = {angle_units, "deg, rad, arcmin, arcsec"},
    [EV_QUANTITY_LEVEL] = {level_units, "dB"},
    [EV_QUANTITY_TEMPERATURE] = {temperature_units, "K"},
};

const char *ev_quantity_units(ev_quantity quantity)
{
    return kinds[quantity].names;
}

static const unit *find_unit(ev_quantity quantity, const char *name, size_t length)
{
    for (const unit *u = kinds[quantity].units; u && u->name; u++) {
        if (strlen(u->name) == length && memcmp(u->name, name, length) == 0)
            return u;
    }
    return NULL;
}

static bool is_digit(char c)
{
    return c >= '0' && c <= '9';
}

static const char *skip_digits(const char *at)
{
    while (is_digit(*at))
        at++;
    return at;
}

static const char *skip_spaces(const char *at)
{
    while (*at == ' ' || *at == '\t')
        at++;
    return at;
}

/* End of a plain decimal number at `at`, or `at` itself when there is none. An e belongs to the
 * number only with digits after it. */
static const char *skip_decimal(const char *at)
{
    const char *end = skip_digits(at);
    size_t digits = (size_t)(end - at);
    if (*end == '.') {
        const char *tail = skip_digits(end + 1);
        digits += (size_t)(tail - end - 1);
        end = tail;
    }
    if (digits == 0)
        return at;
    if (*end == 'e' || *end == 'E') {
        const char *power = end + 1;
        if (*power == '+' || *power == '-')
            power++;
        if (is_digit(*power))
            end = skip_digits(power);
    }
    return end;
}

/* The C numeric locale, for one call. */
static locale_t enter_c_locale(locale_t *c)
{
    *c = newlocale(LC_ALL_MASK, "C", (locale_t)0);
    return uselocale(*c);
}

static void leave_c_locale(locale_t c, locale_t before)
{
    uselocale(before);
    freelocale(c);
}

static long double read_decimal(const char *from)
{
    locale_t c, before = enter_c_locale(&c);
    long double value = strtold(from, NULL);
    leave_c_locale(c, before);
    return value;
}

/* "3/8" or the "3/8" of "1 1/2": digits, slash, digits. Returns its end, or `at`. */
static const char *skip_fraction(const char *at)
{
    const char *slash = skip_digits(at);
    if (slash == at || *slash != '/')
        return at;
    const char *end = skip_digits(slash + 1);
    return end == slash + 1 || *end == '.' ? at : end;
}

static long double read_fraction(const char *from)
{
    return read_decimal(from) / read_decimal(strchr(from, '/') + 1);
}

/* Number, fraction, or whole number and fraction. Returns the end, or `at` when there is none. */
static const char *read_magnitude(const char *at, long double *value)
{
    const char *end = skip_fraction(at);
    if (end != at) {
        *value = read_fraction(at);
        return end;
    }
    end = skip_decimal(at);
    if (end == at)
        return at;
    *value = read_decimal(at);
    const char *part = skip_spaces(end);
    const char *part_end = skip_fraction(part);
    if (end == skip_digits(at) && part > end && part_end != part) {
        *value += read_fraction(part);
        end = part_end;
    }
    return end;
}

static const char *skip_sign(const char *at, bool *negative)
{
    static const char minus[] = "\u2212";
    *negative = *at == '-';
    if (*at == '-' || *at == '+')
        return at + 1;
    if (strncmp(at, minus, sizeof minus - 1) == 0) {
        *negative = true;
        return at + sizeof minus - 1;
    }
    return at;
}

static ev_parse_result fail_at(ev_parse_result result, const char *text, const char *at,
                               int *column)
{
    if (column)
        *column = (int)(at - text);
    return result;
}

/* "nan" and "inf" are words that other tools write for a number that is none. */
static bool looks_not_finite(const char *at)
{
    char word[4] = {0};
    for (int i = 0; i < 3 && at[i]; i++)
        word[i] = (char)(at[i] | 0x20);
    return strcmp(word, "nan") == 0 || strcmp(word, "inf") == 0;
}

ev_parse_result ev_quantity_parse(ev_quantity quantity, const char *text, double *value,
                                  int *column)
{
    bool negative;
    const char *start = skip_spaces(text);
    const char *at = skip_sign(start, &negative);
    at = *at == '.' && at[1] && looks_not_finite(at + 1) ? at + 1 : at; /* YAML's .nan, .inf */
    if (looks_not_finite(at))
        return fail_at(EV_PARSE_NOT_FINITE, text, start, column);
    long double number = 0;
    const char *end = read_magnitude(at, &number);
    if (end == at)
        return fail_at(EV_PARSE_NOT_A_NUMBER, text, start, column);
    const char *name = skip_spaces(end);
    size_t length = strlen(name);
    while (length > 0 && (name[length - 1] == ' ' || name[length - 1] == '\t'))
        length--;
    if (length > 0 && (is_digit(*name) || strchr(".,/'_", *name)))
        return fail_at(EV_PARSE_NOT_A_NUMBER, text, name, column);

    const unit *u = find_unit(quantity, name, length);
    if (quantity == EV_QUANTITY_NUMBER && length > 0)
        return fail_at(EV_PARSE_UNIT_UNWANTED, text, name, column);
    if (quantity != EV_QUANTITY_NUMBER && length == 0)
        return fail_at(EV_PARSE_UNIT_MISSING, text, end, column);
    if (quantity != EV_QUANTITY_NUMBER && u == NULL)
        return fail_at(EV_PARSE_UNIT_UNKNOWN, text, name, column);
    double si = (double)(u ? number * u->times / u->over : number);
    if (!isfinite(si))
        return fail_at(EV_PARSE_NOT_FINITE, text, start, column);
    *value = negative && si != 0.0 ? -si : si;
    return EV_PARSE_OK;
}

void ev_quantity_unit_of(const char *text, char *unit_text, size_t size)
{
    bool negative;
    long double number;
    const char *at = skip_sign(skip_spaces(text), &negative);
    const char *name = skip_spaces(read_magnitude(at, &number));
    size_t length = strcspn(name, " \t");
    char copy[32];
    snprintf(copy, sizeof copy, "%.*s", (int)(length < sizeof copy ? length : 0), name);
    ev_text_copy(unit_text, size, copy);
}

typedef struct display {
    const char *unit;
    double scale;
    int decimals;
} display;

static display choose_display(ev_quantity quantity, double value)
{
    double size = fabs(value);
    switch (quantity) {
    case EV_QUANTITY_LENGTH:
        if (size >= 9.99995)
            return (display){"m", 1.0, 3};
        return (display){"mm", 1e3, size > 0.0 && size < 0.9995e-3 ? 2 : 1};
    case EV_QUANTITY_FREQUENCY:
        return size < 0.999995e9 ? (display){"MHz", 1e-6, 2} : (display){"GHz", 1e-9, 2};
    case EV_QUANTITY_ANGLE:
        return (display){"\u00B0", 180.0 / EV_PI, 2};
    case EV_QUANTITY_LEVEL:
        return (display){"dB", 1.0, size > 0.0 && size < 0.995 ? 2 : 1};
    case EV_QUANTITY_TEMPERATURE:
        return (display){"K", 1.0, 1};
    case EV_QUANTITY_NUMBER:
    case EV_QUANTITY_COUNT:
        break;
    }
    return (display){"", 1.0, size >= 999.5 ? 0 : size >= 99.95 ? 1 : 3};
}

void ev_quantity_format(ev_quantity quantity, double value, char *digits, size_t digits_size,
                        char *unit_text, size_t unit_size)
{
    display d = choose_display(quantity, value);
    ev_text_copy(unit_text, unit_size, d.unit);
    if (!isfinite(value)) {
        ev_text_copy(digits, digits_size, "\u2013");
        return;
    }
    char plain[400];
    locale_t c, before = enter_c_locale(&c);
    snprintf(plain, sizeof plain, "%.*f", d.decimals, fabs(value * d.scale));
    leave_c_locale(c, before);
    bool zero = strspn(plain, "0.") == strlen(plain);
    char signed_text[sizeof plain + 4];
    snprintf(signed_text, sizeof signed_text, "%s%s", value < 0.0 && !zero ? "\u2212" : "", plain);
    ev_text_copy(digits, digits_size, signed_text);
}

/* `precision` significant digits, without an exponent while that is readable. */
static void write_digits(long double number, int precision, char *text, size_t size)
{
    char scientific[64];
    locale_t c, before = enter_c_locale(&c);
    snprintf(scientific, sizeof scientific, "%.*Le", precision - 1, number);
    const char *power = strchr(scientific, 'e');
    int exponent = power ? atoi(power + 1) : 0;
    int decimals = precision - 1 - exponent;
    if (exponent < -6 || exponent > 12)
        snprintf(text, size, "%.*Lg", precision, number);
    else
        snprintf(text, size, "%.*Lf", decimals > 0 ? decimals : 0, number);
    leave_c_locale(c, before);
}

void ev_quantity_write(ev_quantity quantity, double value, const char *unit_name, char *text,
                       size_t size)
{
    const unit *u = find_unit(quantity, unit_name, strlen(unit_name));
    long double number = value == 0.0 ? 0.0L : (long double)value;
    if (u)
        number = number * u->over / u->times;
    char digits[64], whole[64 + 16];
    for (int precision = 1; precision <= 24; precision++) {
        write_digits(number, precision, digits, sizeof digits);
        snprintf(whole, sizeof whole, "%s%s%s", digits, u ? " " : "", u ? unit_name : "");
        double back;
        if (ev_quantity_parse(quantity, whole, &back, NULL) == EV_PARSE_OK && back == value)
            break;
    }
    ev_text_copy(text, size, whole);
}
