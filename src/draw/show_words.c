/* The words of showing mode: the verdict's own faults, set apart for large type, and what is left
 * of the signal. Called by ev_draw_show. */
#include "draw/show.h"

#include "base/text.h"

#include <math.h>
#include <stdarg.h>
#include <stdio.h>
#include <string.h>

__attribute__((format(printf, 4, 5))) static void add(ev_show_words *words, int line, bool bold,
                                                      const char *format, ...)
{
    char *text = words->line[line];
    size_t size = sizeof words->line[line], at = strlen(text);
    va_list arguments;
    va_start(arguments, format);
    vsnprintf(text + at, size - at, format, arguments);
    va_end(arguments);
    int *count = &words->bold_count[line];
    if (!bold || *count == EV_BOLD_CAPACITY)
        return;
    words->bold[line][*count][0] = (int)at;
    words->bold[line][(*count)++][1] = (int)strlen(text);
}

/* The faults are what the verdict sets in bold, one a move: "4 mm too low". */
static void add_faults(const ev_verdict *verdict, ev_show_words *words)
{
    int count =
        verdict->move_count < verdict->bold_count ? verdict->move_count : verdict->bold_count;
    add(words, 0, false, "%.*s", count > 0 ? verdict->bold[0][0] : 0, verdict->text);
    for (int i = 0; i < count; ++i) {
        const int *range = verdict->bold[i];
        int line = i > 0;
        add(words, line, true, "%.*s", range[1] - range[0], verdict->text + range[0]);
        add(words, line, false, "%s", i + 1 == count ? "." : i == 1 ? ", " : ",");
    }
}

static void add_lines(const ev_sheet *sheet, ev_show_words *words)
{
    const ev_verdict *verdict = sheet->verdict;
    switch (verdict->id) {
    case EV_VERDICT_FEED_MISPLACED:
    case EV_VERDICT_SUB_MISPLACED:
        add_faults(verdict, words);
        break;
    case EV_VERDICT_TURNED:
        add(words, 0, false, verdict->turn == EV_TURN_SUB_TILT ? "Subreflector" : "Feed");
        add(words, 1, true,
            verdict->turn == EV_TURN_ROLL ? "turned by %.0f degrees" : "aimed %.1f degrees off",
            fabs(verdict->turn_by) * 180.0 / EV_PI);
        add(words, 1, false, ".");
        break;
    case EV_VERDICT_IN_PLACE:
    case EV_VERDICT_STRUTS:
        add(words, 0, false, "The feed is");
        add(words, 1, true, "where it belongs");
        add(words, 1, false, ".");
        break;
    case EV_VERDICT_AS_MEANT:
        add(words, 0, false, "This feed points");
        add(words, 1, true, "where it is meant to");
        add(words, 1, false, ".");
        break;
    case EV_VERDICT_TOO_SMALL:
        add(words, 0, false, "Rays are only a guide here.");
        add(words, 1, false, "%s", verdict->advice);
        break;
    case EV_VERDICT_DARK:
        add(words, 0, false, "The feed lights");
        add(words, 1, true, "almost nothing");
        add(words, 1, false, ".");
        break;
    }
}

static void add_percent(ev_show_words *words, double share, const char *rest)
{
    double percent = 100.0 * share;
    int decimals = percent >= 9.95 || !(percent > 0.0) ? 0 : percent >= 0.095 ? 1 : 2;
    char digits[32];
    ev_format_number(digits, sizeof digits, percent, decimals, false);
    add(words, 2, true, "%s %%", digits);
    add(words, 2, false, " %s", rest);
}

void ev_show_word_out(const ev_sheet *sheet, ev_show_words *words)
{
    const ev_verdict *verdict = sheet->verdict;
    const ev_feed_budget *budget = &sheet->budget->feeds[sheet->feed];
    memset(words, 0, sizeof *words);
    add_lines(sheet, words);
    if (verdict->id == EV_VERDICT_DARK)
        add_percent(words, budget->power[EV_FATE_APERTURE], "of its power reaches the sky.");
    else if (verdict->move_count > 0 || verdict->id == EV_VERDICT_TURNED)
        add_percent(words,
                    fmin(pow(10.0, 0.1 * (budget->gain_on_axis_dbi - verdict->after_dbi)), 1.0),
                    "of the signal is left.");
    else
        add(words, 2, false, "All of the signal is there.");
}
