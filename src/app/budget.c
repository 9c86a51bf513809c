/* `evenpath budget`: the ledger as text, JSON or CSV. */
#include "app/command.h"

#include "report/report.h"

#include <stdlib.h>

/* The numbers of one frequency. */
typedef struct page {
    ev_antenna antenna;
    ev_budget budget;
    ev_verdict verdict;
    ev_beam beams[EV_FEED_CAPACITY];
} page;

/* The radiated beams go into what programs read; for people there is `evenpath beam`. */
static void fill_page(const ev_options *options, const ev_loaded *loaded, double frequency,
                      page *at)
{
    ev_antenna_build(&loaded->design, frequency, &at->antenna);
    ev_budget_compute(&at->antenna, &at->budget);
    ev_verdict_find(&loaded->design, frequency, 0, &at->verdict);
    for (int i = 0; (options->json || options->csv) && i < at->budget.feed_count; i++)
        ev_beam_compute(&at->antenna, i, &at->budget.feeds[i], EV_BEAM_EXACT, &at->beams[i]);
}

static void print(const ev_options *options, const ev_report *reports, int count)
{
    if (options->json) {
        ev_report_json(stdout, reports, count, options->all_frequencies);
    } else if (options->csv) {
        ev_report_csv(stdout, reports, count);
    } else {
        for (int i = 0; i < count; i++) {
            if (i > 0)
                fputs("\n\n", stdout);
            ev_report_text(stdout, &reports[i]);
        }
    }
}

int ev_command_budget(const ev_options *options)
{
    ev_loaded loaded;
    int code = ev_load(options, &loaded);
    if (code != EV_EXIT_DONE)
        return code;
    int count = options->all_frequencies ? loaded.design.frequency_count : 1;
    page *pages = calloc((size_t)count, sizeof *pages);
    ev_report *reports = calloc((size_t)count, sizeof *reports);
    if (!pages || !reports)
        abort();
    for (int i = 0; i < count; i++) {
        page *at = &pages[i];
        fill_page(options, &loaded, loaded.design.frequencies[i], at);
        reports[i] = (ev_report){.design = &loaded.design,
                                 .antenna = &at->antenna,
                                 .budget = &at->budget,
                                 .verdict = &at->verdict,
                                 .warnings = &loaded.cautions,
                                 .beams = options->json || options->csv ? at->beams : NULL};
    }
    print(options, reports, count);
    free(pages);
    free(reports);
    ev_unload(&loaded);
    return ev_finish_output();
}
