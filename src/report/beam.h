/* The beam as text, JSON and CSV. Like report.h: numbers in, nothing computed. */
#pragma once

#include "optics/beam.h"
#include "optics/beam_limit.h"
#include "optics/diffraction.h"

#include <stdio.h>

/* One cut with what it was held against. Arrays of cut.count. */
typedef struct ev_beam_report_cut {
    ev_beam_cut cut;
    const double *co_dbi, *cross_dbi;
    bool limited;
    ev_limit limit;
    ev_limit_result result;
} ev_beam_report_cut;

enum { EV_BEAM_REPORT_CUTS = 2 };

typedef struct ev_beam_report {
    const ev_design *design;
    const ev_antenna *antenna;
    int feed;
    const ev_feed_budget *budget;
    const ev_beam *beam;
    const ev_beam *second;  /* the second opinion; NULL: not asked for */
    const char *limit_name; /* as given on the command line; NULL: none */
    ev_beam_report_cut cuts[EV_BEAM_REPORT_CUTS];
    int cut_count;
} ev_beam_report;

void ev_beam_report_text(FILE *stream, const ev_beam_report *report);
/* `with_cut`: the cuts' samples too. */
void ev_beam_report_json(FILE *stream, const ev_beam_report *report, bool with_cut);
/* Samples of the cuts: phi_deg,angle_deg,co_dbi,cross_dbi[,limit_dbi]. */
void ev_beam_report_cut_csv(FILE *stream, const ev_beam_report *report);
/* Facts as one line under a header of the JSON keys. */
void ev_beam_report_csv(FILE *stream, const ev_beam_report *report);
