/* The output contract as JSON values; private to report. */
#pragma once

#include "report/report.h"

#include "report/beam.h"

#include <jansson.h>

/* New references. The object of one report, without its feeds; and that of one feed. */
json_t *ev_json_of_report(const ev_report *report);
json_t *ev_json_of_feed(const ev_report *report, int feed);
json_t *ev_json_of_beam(const ev_beam *beam);
json_t *ev_json_of_beam_notes(const ev_antenna *antenna, int feed, const ev_feed_budget *budget,
                              const ev_beam *beam);

/* Adds a number under a key; what is not a number is left out: an absent key says "does not
 * apply". */
void ev_json_put(json_t *to, const char *key, double value);

/* One object a line under a header of keys joined with dots (RFC 4180). */
void ev_json_print_csv(FILE *stream, json_t *const *lines, int count);
