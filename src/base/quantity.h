/* Quantities and units: text to SI and back. "1.2 m", "3/8 in", "5.57 deg", "12 GHz". */
#pragma once

#include <stdbool.h>
#include <stddef.h>

typedef enum {
    EV_QUANTITY_NUMBER, /* no unit */
    EV_QUANTITY_LENGTH, /* m */
    EV_QUANTITY_FREQUENCY,
    EV_QUANTITY_ANGLE,       /* rad */
    EV_QUANTITY_LEVEL,       /* dB */
    EV_QUANTITY_TEMPERATURE, /* K */
    EV_QUANTITY_COUNT,
} ev_quantity;

typedef enum {
    EV_PARSE_OK,
    EV_PARSE_NOT_A_NUMBER,
    EV_PARSE_UNIT_MISSING,
    EV_PARSE_UNIT_UNKNOWN,
    EV_PARSE_UNIT_UNWANTED, /* a unit on a plain number */
    EV_PARSE_NOT_FINITE,
} ev_parse_result;

/* Whole-string parse: number or fraction ("3/8", "1 1/2"), then a unit. On failure *column (may
 * be NULL) is the offset in bytes of what is wrong. Locale-independent. */
ev_parse_result ev_quantity_parse(ev_quantity quantity, const char *text, double *value,
                                  int *column);

/* "m, mm, cm, km, in, ft": the units a person may write. */
const char *ev_quantity_units(ev_quantity quantity);

/* The unit that a legal text ends with, as written there: "GHz" of "12 GHz"; "" without one. */
void ev_quantity_unit_of(const char *text, char *unit, size_t size);

/* Digits and unit in the customary unit for display: lengths in mm below 10 m (else m), GHz
 * or MHz, degrees, dB, K. `resolution` decimals of that unit are chosen for the quantity. A minus
 * is U+2212. */
void ev_quantity_format(ev_quantity quantity, double value, char *digits, size_t digits_size,
                        char *unit, size_t unit_size);

/* Shortest text that reads back to the same double, in the given unit (one of ev_quantity_units),
 * ASCII minus: for files. */
void ev_quantity_write(ev_quantity quantity, double value, const char *unit, char *text,
                       size_t size);
