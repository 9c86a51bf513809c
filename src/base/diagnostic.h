/* Diagnostics: what is wrong, where, what was expected and what to do. Collected in a context that
 * is passed in; nothing below app prints or exits. Tests compare ids, people read the text; every
 * text lives in one table (message.h). */
#pragma once

#include <stdbool.h>
#include <stddef.h>
#include <stdio.h>

typedef enum { EV_SEVERITY_WARNING, EV_SEVERITY_ERROR } ev_severity;

typedef struct ev_place {
    const char *file;   /* borrowed for the call; copied by the context. NULL: not from a file */
    int line, column;   /* from 1; 0 = unknown */
    const char *source; /* the line's text, may be NULL */
    int width;          /* columns under the caret, at least 1 */
} ev_place;

typedef struct ev_diagnostic {
    const char *id; /* "unit_missing": stable word */
    ev_severity severity;
    char *file; /* may be NULL */
    int line, column, width;
    char *source; /* may be NULL */
    char *text;   /* one sentence or two */
} ev_diagnostic;

enum { EV_DIAGNOSTIC_CAPACITY = 64 };

typedef struct ev_diagnostics {
    ev_diagnostic items[EV_DIAGNOSTIC_CAPACITY];
    int count;
    int error_count;
    int dropped; /* beyond the capacity */
} ev_diagnostics;

void ev_diagnostics_init(ev_diagnostics *diagnostics);
void ev_diagnostics_clear(ev_diagnostics *diagnostics);

/* Adds a message; `format` takes printf arguments. */
void ev_diagnose(ev_diagnostics *diagnostics, ev_severity severity, const char *id,
                 const ev_place *place, const char *format, ...)
    __attribute__((format(printf, 5, 6)));

/* file:line:column: error: text, then the source line and a caret. */
void ev_diagnostics_print(const ev_diagnostics *diagnostics, FILE *stream);
