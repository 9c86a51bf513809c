/* `evenpath compare`: two scenes, the same columns that a kept state shows in the window. */
#include "app/command.h"

#include "report/report.h"

#include <stdlib.h>

typedef struct side {
    ev_loaded loaded;
    ev_budget budget;
    ev_verdict verdict;
    ev_report report;
} side;

static int load_side(const ev_options *options, int operand, side *at)
{
    ev_options one = *options;
    one.operands[0] = options->operands[operand];
    int code = ev_load(&one, &at->loaded);
    if (code != EV_EXIT_DONE)
        return code;
    ev_budget_compute(&at->loaded.antenna, &at->budget);
    ev_verdict_find(&at->loaded.design, at->loaded.antenna.frequency, 0, &at->verdict);
    at->report = (ev_report){.design = &at->loaded.design,
                             .antenna = &at->loaded.antenna,
                             .budget = &at->budget,
                             .verdict = &at->verdict,
                             .warnings = &at->loaded.cautions};
    return EV_EXIT_DONE;
}

int ev_command_compare(const ev_options *options)
{
    side *sides = calloc(2, sizeof *sides);
    if (!sides)
        abort();
    int code = load_side(options, 0, &sides[0]);
    if (code == EV_EXIT_DONE)
        code = load_side(options, 1, &sides[1]);
    if (code == EV_EXIT_DONE) {
        if (options->json)
            ev_report_compare_json(stdout, &sides[0].report, &sides[1].report);
        else
            ev_report_compare_text(stdout, &sides[0].report, &sides[1].report);
        code = ev_finish_output();
    }
    ev_unload(&sides[0].loaded);
    ev_unload(&sides[1].loaded);
    free(sides);
    return code;
}
