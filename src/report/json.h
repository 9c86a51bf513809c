/* The output contract as JSON values; private to report. */
#pragma once

#include "report/report.h"

#include <jansson.h>

/* New references. The object of one report, without its feeds; and that of one feed. */
json_t *ev_json_of_report(const ev_report *report);
json_t *ev_json_of_feed(const ev_report *report, int feed);
