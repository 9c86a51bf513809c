/* Numbers as they are drawn. Called by every region; knows nothing of where they go. */
#include "draw/pen.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

#define MINUS "\u2212"

void ev_format_number(char *text, size_t size, double value, int decimals, bool plus)
{
    if (isnan(value)) {
        snprintf(text, size, "\u2013");
        return;
    }
    if (isinf(value)) {
        snprintf(text, size, "%s\u221e", value < 0.0 ? MINUS : plus ? "+" : "");
        return;
    }
    char digits[400];
    snprintf(digits, sizeof digits, "%.*f", decimals, fabs(value));
    bool is_zero = strspn(digits, "0.") == strlen(digits);
    const char *sign = is_zero ? "" : value < 0.0 ? MINUS : plus ? "+" : "";
    snprintf(text, size, "%s%s", sign, digits);
}

static void drop_trailing_zeros(char *digits)
{
    if (!strchr(digits, '.'))
        return;
    size_t end = strlen(digits);
    while (digits[end - 1] == '0')
        --end;
    if (digits[end - 1] == '.')
        --end;
    digits[end] = 0;
}

void ev_format_length(char *text, size_t size, double metres)
{
    bool in_metres = fabs(metres) >= 9.9995;
    char digits[400];
    ev_format_number(digits, sizeof digits, in_metres ? metres : 1e3 * metres, in_metres ? 3 : 1,
                     false);
    drop_trailing_zeros(digits);
    snprintf(text, size, "%s %s", digits, in_metres ? "m" : "mm");
}

void ev_format_error(char *text, size_t size, double metres, bool plus)
{
    double mm = 1e3 * metres, magnitude = fabs(mm);
    if (magnitude < 5e-4) {
        snprintf(text, size, magnitude > 0.0 ? "< 1 \u00b5m" : "0 mm");
        return;
    }
    int decimals = magnitude >= 99.95 ? 0 : magnitude >= 4.95 ? 1 : magnitude >= 0.095 ? 2 : 3;
    char digits[400];
    ev_format_number(digits, sizeof digits, mm, decimals, plus);
    snprintf(text, size, "%s mm", digits);
}

double ev_step_below(double value)
{
    double decade = pow(10.0, floor(log10(value)));
    double lead = value / decade * (1.0 + 1e-9);
    return decade * (lead >= 10.0 ? 10.0 : lead >= 5.0 ? 5.0 : lead >= 2.0 ? 2.0 : 1.0);
}
