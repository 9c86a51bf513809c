/* Undo: the ring keeps order, forgets what was undone once something new happens, and forgets the
 * oldest when it is full. */
#include "view/history.h"

#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdio.h>
#include <stdlib.h>

#include <cmocka.h>

static int set_up(void **state)
{
    *state = calloc(1, sizeof(ev_history));
    return *state ? 0 : -1;
}

static int tear_down(void **state)
{
    free(*state);
    return 0;
}

static ev_design design_with(double offset)
{
    ev_design design = {.main.offset = offset};
    return design;
}

static void push(ev_history *history, double offset, const char *words)
{
    ev_design design = design_with(offset);
    ev_history_push(history, &design, words);
}

static void start(ev_history *history)
{
    ev_design design = design_with(0.0);
    ev_history_start(history, &design);
}

static void test_back_and_forth(void **state)
{
    ev_history *history = *state;
    const char *words = NULL;
    start(history);
    assert_false(ev_history_can_undo(history));
    assert_null(ev_history_undo(history, &words));
    push(history, 1.0, "feed out");
    push(history, 2.0, "feed up");
    assert_true(ev_history_undo(history, &words)->main.offset == 1.0);
    assert_string_equal(words, "feed up");
    assert_true(ev_history_undo(history, &words)->main.offset == 0.0);
    assert_string_equal(words, "feed out");
    assert_false(ev_history_can_undo(history));
    assert_true(ev_history_redo(history, &words)->main.offset == 1.0);
    assert_string_equal(words, "feed out");
    push(history, 3.0, "frequency");
    assert_false(ev_history_can_redo(history));
    assert_null(ev_history_redo(history, &words));
    assert_true(ev_history_undo(history, &words)->main.offset == 1.0);
}

static void test_ids_tell_moments_apart(void **state)
{
    ev_history *history = *state;
    const char *words;
    start(history);
    unsigned first = ev_history_id(history);
    push(history, 1.0, "feed out");
    unsigned second = ev_history_id(history);
    assert_true(first != 0 && first != second);
    ev_history_undo(history, &words);
    assert_int_equal(ev_history_id(history), first);
    push(history, 1.0, "feed out");
    assert_true(ev_history_id(history) != second);
}

static void test_amend(void **state)
{
    ev_history *history = *state;
    const char *words;
    start(history);
    push(history, 1.0, "feed out");
    ev_design design = design_with(1.5);
    ev_history_amend(history, &design);
    assert_true(ev_history_undo(history, &words)->main.offset == 0.0);
    assert_string_equal(words, "feed out");
    assert_true(ev_history_redo(history, &words)->main.offset == 1.5);
}

static void test_full_ring(void **state)
{
    ev_history *history = *state;
    const char *words;
    char text[32];
    start(history);
    for (int i = 1; i <= 3 * EV_HISTORY_CAPACITY; ++i) {
        snprintf(text, sizeof text, "change %d", i);
        push(history, i, text);
    }
    int steps = 0;
    double last = 3.0 * EV_HISTORY_CAPACITY;
    while (ev_history_can_undo(history)) {
        const ev_design *design = ev_history_undo(history, &words);
        assert_true(design->main.offset == last - 1.0);
        snprintf(text, sizeof text, "change %d", (int)last);
        assert_string_equal(words, text);
        last = design->main.offset;
        ++steps;
    }
    assert_int_equal(steps, EV_HISTORY_CAPACITY - 1);
    while (ev_history_can_redo(history)) {
        last = ev_history_redo(history, &words)->main.offset;
    }
    assert_true(last == 3.0 * EV_HISTORY_CAPACITY);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test_setup_teardown(test_back_and_forth, set_up, tear_down),
        cmocka_unit_test_setup_teardown(test_ids_tell_moments_apart, set_up, tear_down),
        cmocka_unit_test_setup_teardown(test_amend, set_up, tear_down),
        cmocka_unit_test_setup_teardown(test_full_ring, set_up, tear_down),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
