/* The budget as text for people, and as JSON and CSV for programs. Numbers come from the study;
 * nothing is computed here. Keys and units are those of the project's output contract (README,
 * "Output"): SI with the unit as a suffix, angles in degrees. */
#pragma once

#include "base/diagnostic.h"
#include "optics/beam.h"
#include "optics/budget.h"
#include "study/verdict.h"

#include <stdio.h>

/* One design at one frequency. */
typedef struct ev_report {
    const ev_design *design;
    const ev_antenna *antenna;
    const ev_budget *budget;
    const ev_verdict *verdict;      /* of the first feed */
    const ev_diagnostics *warnings; /* may be NULL */
    const ev_beam *beams;           /* of each feed; NULL: not computed */
} ev_report;

/* One JSON object, or with `as_list` a list of them. Numbers carry 17 digits. Values that do not
 * exist for this antenna are left out. */
void ev_report_json(FILE *stream, const ev_report *reports, int count, bool as_list);

/* One line a feed and frequency under a header; columns are the JSON keys joined with dots. */
void ev_report_csv(FILE *stream, const ev_report *reports, int count);

void ev_report_text(FILE *stream, const ev_report *report);

/* The first feeds of two reports side by side with second - first. */
void ev_report_compare_text(FILE *stream, const ev_report *a, const ev_report *b);
void ev_report_compare_json(FILE *stream, const ev_report *a, const ev_report *b);
