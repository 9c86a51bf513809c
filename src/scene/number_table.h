/* Tables of plain numbers as CSV: a header line of fixed column names, then numbers; # starts a
 * comment. The one reader behind pattern and limit files; what the numbers mean is the caller's. */
#pragma once

#include "base/diagnostic.h"
#include "base/message.h"

enum { EV_NUMBER_COLUMNS = 4 };

typedef struct ev_number_row {
    double values[EV_NUMBER_COLUMNS]; /* 0 where the file has no such column */
    int count;                        /* columns of the file */
    ev_place place;
    ev_diagnostics *diagnostics;
} ev_number_row;

/* A diagnostic about the row, at a column of its text (0: the line as a whole). */
#define ev_number_complain(row, at, id, ...)                                                       \
    do {                                                                                           \
        ev_place where = (row)->place;                                                             \
        where.column = (at);                                                                       \
        ev_report((row)->diagnostics, EV_SEVERITY_ERROR, id, &where, __VA_ARGS__);                 \
    } while (0)

/* Calls `take` for each row; it returns false to stop. `names` ends with NULL; columns from
 * `required` on may be missing from the end of the header. `name` is for messages. False with
 * diagnostics (also those of `take`). */
bool ev_number_table_read(const char *text, const char *name, const char *const *names,
                          int required, bool (*take)(void *context, const ev_number_row *row),
                          void *context, ev_diagnostics *diagnostics);
