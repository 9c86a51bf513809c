/* The one table of parameters: every number or choice a user can set is a row. The loader, the
 * saver, --set, sweeps, the window's fields and `explain` all read it.
 *
 * Addresses: "main.diameter"; list members by name, "feeds.NAME.shift.x", "struts.NAME.width";
 * "feed.shift.x" is the selected feed (the first unless said otherwise). Vector members carry
 * ".x" ".y" ".z". */
#pragma once

#include "base/diagnostic.h"
#include "base/quantity.h"
#include "optics/design.h"

#include <stddef.h>

typedef enum {
    EV_OWNER_DESIGN, /* the design itself: title, frequency, main.*, losses.* */
    EV_OWNER_SUB,
    EV_OWNER_FEED,
    EV_OWNER_STRUT,
    EV_OWNER_SITE,
} ev_owner;

typedef enum { EV_VALUE_NUMBER, EV_VALUE_COUNT, EV_VALUE_CHOICE, EV_VALUE_TEXT } ev_value_kind;

typedef struct ev_parameter {
    const char *name;  /* "main.diameter", "feed.shift.x", "strut.width": owner first, singular */
    const char *label; /* for the window: "Feed across" */
    ev_owner owner;
    ev_value_kind kind;
    ev_quantity quantity;
    size_t offset;            /* of the member, from the owner's struct */
    size_t size;              /* of the member, bytes */
    double low, high;         /* legal range, SI; inclusive */
    double initial;           /* default, SI (choices: the enumerator) */
    const char *const *words; /* EV_VALUE_CHOICE: legal words, NULL-terminated, by enumerator */
    const char *choice;       /* name of the choice group it belongs to, or NULL */
    const char *meaning;      /* one line */
    const char *example;      /* as it may stand in a file: "1.2 m" */
    bool required;            /* a file must give it, or a rival of its choice group */
    int given;                /* its enumerator in the choice group, */
    size_t given_offset;      /* and where the owner keeps which one is given */
    int of_three;             /* 0, or 1 + its ev_sub_derived: two of three are given */
    int list_capacity;        /* 0, or of a list of numbers of which this row is the first */
    size_t list_count_offset; /* where the owner keeps their number */
} ev_parameter;

int ev_parameter_count(void);
const ev_parameter *ev_parameter_at(int index);

enum { EV_ADDRESS_CAPACITY = 2 * EV_NAME_CAPACITY };

/* A row and, for lists, which member. */
typedef struct ev_parameter_ref {
    const ev_parameter *parameter;
    int index; /* feed or strut; 0 otherwise */
} ev_parameter_ref;

/* Resolves an address against the lists of a design. False when there is none; `nearest` (may be
 * NULL, else of EV_ADDRESS_CAPACITY chars) then gets the nearest legal address. */
bool ev_parameter_find(const ev_design *design, int selected_feed, const char *address,
                       ev_parameter_ref *ref, char *nearest);

/* The full address, "feeds.NAME.shift.x". */
void ev_parameter_address(const ev_design *design, ev_parameter_ref ref, char *address,
                          size_t size);

/* Numbers, counts and choices as a double, SI. */
double ev_parameter_get(const ev_design *design, ev_parameter_ref ref);

/* Whether it follows from others at present: a choice whose rival is given, the third of three. */
bool ev_parameter_is_derived(const ev_design *design, ev_parameter_ref ref);

/* Sets a number and resolves the design: the member of a choice set last holds. The value is
 * clamped to the legal range. */
void ev_parameter_set(ev_design *design, ev_parameter_ref ref, double value);

/* As typed by a person: "3/8 in", "12 GHz", "rhcp". False with diagnostics, and the design
 * untouched, when it is not legal. */
bool ev_parameter_set_text(ev_design *design, ev_parameter_ref ref, const char *text,
                           ev_diagnostics *diagnostics);

/* The same for display: digits and unit apart, in the unit people use at that size. */
void ev_parameter_format(const ev_design *design, ev_parameter_ref ref, char *digits,
                         size_t digits_size, char *unit, size_t unit_size);
