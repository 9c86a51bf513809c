/* The rows of the ledger, the same for every antenna, screen and printout: from the gain of a full,
 * even aperture down to the gain on the wanted axis, in decibels. */
#pragma once

#include "optics/budget.h"

enum { EV_LEDGER_ROW_COUNT = 10 };

typedef struct ev_ledger_row {
    const char *id; /* "past_sub", "past_main", "taper", "phase", "pointing", "polarization", ... */
    const char *label; /* "Past the subreflector" */
    bool applies;      /* false: show a dash, never 0.00 */
    double db;         /* <= 0, as the gain changes */
} ev_ledger_row;

void ev_ledger_list(const ev_antenna *antenna, const ev_feed_budget *budget, int feed,
                    ev_ledger_row rows[EV_LEDGER_ROW_COUNT]);

/* Sum of all rows: gain on the wanted axis below that of a full, even aperture. */
double ev_ledger_total_db(const ev_feed_budget *budget);

/* Where the watts went, for the watts bar and its printout: fates with any power, shadows apart. */
typedef struct ev_watts_row {
    ev_fate fate;
    const char *id;    /* JSON's key: "aperture", "past_sub", ... */
    const char *label; /* "through the aperture" */
} ev_watts_row;

/* The row of a fate. */
ev_watts_row ev_watts_of(ev_fate fate);
