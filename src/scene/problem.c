/* Problems of a design as diagnostics. Called after loading and before saving; the judging is
 * ev_design_check's, the words are message.h's. */
#include "scene/problem.h"

#include "base/message.h"
#include "base/text.h"
#include "scene/field.h"
#include "scene/reader.h"

#include <stdlib.h>
#include <string.h>

enum { PROBLEM_CAPACITY = 32 };

typedef struct wording {
    const char *id, *text;
    ev_quantity quantity; /* of the values */
} wording;

#define WORDING(id, quantity)                                                                      \
    {                                                                                              \
#id, EV_MESSAGE_##id, quantity                                                             \
    }

static const wording wordings[EV_PROBLEM_COUNT] = {
    [EV_PROBLEM_NOT_POSITIVE] = WORDING(not_positive, EV_QUANTITY_NUMBER),
    [EV_PROBLEM_NOT_FINITE] = WORDING(geometry_not_finite, EV_QUANTITY_NUMBER),
    [EV_PROBLEM_DEPTH_WITH_OFFSET] = WORDING(depth_with_offset, EV_QUANTITY_NUMBER),
    [EV_PROBLEM_SUB_SHAPE] = WORDING(sub_shape, EV_QUANTITY_NUMBER),
    [EV_PROBLEM_SUB_IMPOSSIBLE] = WORDING(sub_impossible, EV_QUANTITY_NUMBER),
    [EV_PROBLEM_SUB_OVERSIZE] = WORDING(sub_oversize, EV_QUANTITY_LENGTH),
    [EV_PROBLEM_SUB_LARGER_THAN_DISH] = WORDING(sub_larger_than_dish, EV_QUANTITY_LENGTH),
    [EV_PROBLEM_SUB_TILT_ON_SYMMETRIC] = WORDING(sub_tilt_on_symmetric, EV_QUANTITY_NUMBER),
    [EV_PROBLEM_SUB_DIAMETER_ON_OFFSET] = WORDING(sub_diameter_on_offset, EV_QUANTITY_NUMBER),
    [EV_PROBLEM_HOLE_TOO_LARGE] = WORDING(hole_too_large, EV_QUANTITY_LENGTH),
    [EV_PROBLEM_FEED_IN_MIRROR] = WORDING(feed_in_mirror, EV_QUANTITY_LENGTH),
    [EV_PROBLEM_FEED_AIM] = WORDING(feed_aim, EV_QUANTITY_NUMBER),
    [EV_PROBLEM_FEED_WITHOUT_TABLE] = WORDING(feed_without_table, EV_QUANTITY_NUMBER),
    [EV_PROBLEM_TAPER_IMPOSSIBLE] = WORDING(taper_impossible, EV_QUANTITY_NUMBER),
    [EV_PROBLEM_TOWARD] = WORDING(toward_impossible, EV_QUANTITY_NUMBER),
    [EV_PROBLEM_STRUT_RADII] = WORDING(strut_radii, EV_QUANTITY_LENGTH),
    [EV_PROBLEM_NO_FEED] = WORDING(no_feed, EV_QUANTITY_NUMBER),
    [EV_PROBLEM_DISH_SMALL] = WORDING(dish_small, EV_QUANTITY_NUMBER),
    [EV_PROBLEM_SUB_SMALL] = WORDING(sub_small, EV_QUANTITY_NUMBER),
    [EV_PROBLEM_HOLE_IN_CONE] = WORDING(hole_in_cone, EV_QUANTITY_LENGTH),
    [EV_PROBLEM_FEED_MISSES] = WORDING(feed_misses, EV_QUANTITY_NUMBER),
    [EV_PROBLEM_TABLE_ENDS] = WORDING(table_ends, EV_QUANTITY_ANGLE),
    [EV_PROBLEM_CLEARANCE] = WORDING(clearance, EV_QUANTITY_LENGTH),
    [EV_PROBLEM_FEED_NEAR] = WORDING(feed_near, EV_QUANTITY_NUMBER),
};

static void format_value(ev_quantity quantity, double value, char *text, size_t size)
{
    char digits[48], unit[16];
    ev_quantity_format(quantity, value, digits, sizeof digits, unit, sizeof unit);
    bool apart = unit[0] != 0 && quantity != EV_QUANTITY_ANGLE;
    snprintf(text, size, "%s%s%s", digits, apart ? " " : "", unit);
}

/* Replaces {name}, {0} and {1}. */
static void fill_in(const wording *w, const ev_problem *problem, ev_buffer *text)
{
    for (const char *at = w->text; *at; at++) {
        char value[80];
        if (strncmp(at, "{name}", 6) == 0) {
            ev_buffer_format(text, "%s", problem->parameter);
            at += 5;
        } else if (at[0] == '{' && (at[1] == '0' || at[1] == '1') && at[2] == '}') {
            format_value(w->quantity, problem->value[at[1] - '0'], value, sizeof value);
            ev_buffer_format(text, "%s", value);
            at += 2;
        } else {
            ev_buffer_add(text, at, 1);
        }
    }
}

static void report_problem(const ev_design *design, const ev_problem *problem,
                           const ev_document *document, ev_diagnostics *diagnostics)
{
    const wording *w = &wordings[problem->id];
    ev_severity severity =
        ev_problem_is_error(problem->id) ? EV_SEVERITY_ERROR : EV_SEVERITY_WARNING;
    ev_buffer text = {0};
    fill_in(w, problem, &text);
    ev_parameter_ref ref;
    ev_document_place located = {{0}, NULL};
    if (document && ev_parameter_find(design, 0, problem->parameter, &ref, NULL)) {
        const ev_section *section = ev_section_of(ref.parameter);
        const ev_node *node = ev_document_find_row(
            document, ref.parameter, ev_section_entry_name(design, section, ref.index));
        if (node)
            located = ev_document_locate(document, node->start, node->end);
    }
    if (document)
        located.place.file = document->name;
    ev_diagnose(diagnostics, severity, w->id, document ? &located.place : NULL, "%s", text.data);
    free(located.line);
    free(text.data);
}

bool ev_design_report(const ev_design *design, const ev_document *document,
                      ev_diagnostics *diagnostics)
{
    ev_problem problems[PROBLEM_CAPACITY];
    int count = ev_design_check(design, problems, PROBLEM_CAPACITY);
    bool right = true;
    for (int i = 0; i < count; i++) {
        report_problem(design, &problems[i], document, diagnostics);
        right = right && !ev_problem_is_error(problems[i].id);
    }
    return right;
}
