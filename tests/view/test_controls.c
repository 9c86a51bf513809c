/* The one-line text edit: every key against the text, caret and anchor it should leave. */
#include "view/controls.h"

#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <string.h>

#include <cmocka.h>

static ev_edit edit_of(const char *text, int caret, int anchor)
{
    ev_edit edit = {.caret = caret, .anchor = anchor};
    strncpy(edit.text, text, sizeof edit.text - 1);
    return edit;
}

static void test_keys(void **state)
{
    static const struct {
        const char *text;
        int caret, anchor;
        SDL_Keycode key;
        Uint16 modifiers;
        const char *want;
        int want_caret, want_anchor;
    } cases[] = {
        {"14.0 mm", 2, 2, SDLK_LEFT, 0, "14.0 mm", 1, 1},
        {"14.0 mm", 0, 0, SDLK_LEFT, 0, "14.0 mm", 0, 0},
        {"14.0 mm", 7, 7, SDLK_RIGHT, 0, "14.0 mm", 7, 7},
        {"14.0 mm", 2, 2, SDLK_RIGHT, KMOD_LSHIFT, "14.0 mm", 3, 2},
        {"14.0 mm", 5, 1, SDLK_LEFT, 0, "14.0 mm", 1, 1},
        {"14.0 mm", 5, 1, SDLK_RIGHT, 0, "14.0 mm", 5, 5},
        {"14.0 mm", 3, 3, SDLK_HOME, 0, "14.0 mm", 0, 0},
        {"14.0 mm", 3, 3, SDLK_END, KMOD_LSHIFT, "14.0 mm", 7, 3},
        {"14.0 mm", 7, 7, SDLK_LEFT, KMOD_LCTRL, "14.0 mm", 5, 5},
        {"140 mm", 0, 0, SDLK_RIGHT, KMOD_LCTRL, "140 mm", 3, 3},
        {"14.0 mm", 2, 2, SDLK_BACKSPACE, 0, "1.0 mm", 1, 1},
        {"14.0 mm", 0, 0, SDLK_BACKSPACE, 0, "14.0 mm", 0, 0},
        {"14.0 mm", 2, 2, SDLK_DELETE, 0, "140 mm", 2, 2},
        {"14.0 mm", 7, 7, SDLK_DELETE, 0, "14.0 mm", 7, 7},
        {"14.0 mm", 0, 4, SDLK_DELETE, 0, " mm", 0, 0},
        {"14.0 mm", 4, 0, SDLK_BACKSPACE, 0, " mm", 0, 0},
        {"14.0 mm", 7, 7, SDLK_BACKSPACE, KMOD_LCTRL, "14.0 ", 5, 5},
        {"14.0 mm", 2, 2, SDLK_a, KMOD_LCTRL, "14.0 mm", 7, 0},
        /* characters of two and three bytes are one step */
        {"5 \xC2\xB5m", 4, 4, SDLK_LEFT, 0, "5 \xC2\xB5m", 2, 2},
        {"\xE2\x88\x92"
         "4",
         3, 3, SDLK_BACKSPACE, 0, "4", 0, 0},
        {"\xE2\x88\x92"
         "4",
         0, 0, SDLK_DELETE, 0, "4", 0, 0},
        {"", 0, 0, SDLK_LEFT, KMOD_LCTRL, "", 0, 0},
        {"", 0, 0, SDLK_BACKSPACE, 0, "", 0, 0},
    };
    (void)state;
    for (size_t i = 0; i < sizeof cases / sizeof cases[0]; ++i) {
        ev_edit edit = edit_of(cases[i].text, cases[i].caret, cases[i].anchor);
        assert_true(ev_edit_key(&edit, cases[i].key, cases[i].modifiers));
        if (strcmp(edit.text, cases[i].want) != 0 || edit.caret != cases[i].want_caret ||
            edit.anchor != cases[i].want_anchor) {
            print_error("case %d: \"%s\" %d %d\n", (int)i, edit.text, edit.caret, edit.anchor);
        }
        assert_string_equal(edit.text, cases[i].want);
        assert_int_equal(edit.caret, cases[i].want_caret);
        assert_int_equal(edit.anchor, cases[i].want_anchor);
    }
}

static void test_start_selects_all(void **state)
{
    ev_edit edit;
    (void)state;
    ev_edit_start(&edit, "14.0 mm");
    assert_int_equal(edit.anchor, 0);
    assert_int_equal(edit.caret, 7);
    ev_edit_insert(&edit, "3/8 in");
    assert_string_equal(edit.text, "3/8 in");
    assert_int_equal(edit.caret, 6);
    assert_int_equal(edit.anchor, 6);
}

static void test_insert_in_the_middle(void **state)
{
    ev_edit edit = edit_of("14 mm", 2, 2);
    (void)state;
    ev_edit_insert(&edit, ".5");
    assert_string_equal(edit.text, "14.5 mm");
    assert_int_equal(edit.caret, 4);
}

static void test_odd_text(void **state)
{
    ev_edit edit = edit_of("", 0, 0);
    char longer[2 * EV_EDIT_CAPACITY];
    (void)state;
    ev_edit_insert(&edit, "1\n2\t3\x7F");
    assert_string_equal(edit.text, "123");
    ev_edit_insert(&edit, "\xC3\x28"); /* not UTF-8 */
    assert_string_equal(edit.text, "123");
    memset(longer, '7', sizeof longer - 1);
    longer[sizeof longer - 1] = '\0';
    ev_edit_insert(&edit, longer);
    assert_int_equal(strlen(edit.text), EV_EDIT_CAPACITY - 1);
    assert_int_equal(edit.caret, EV_EDIT_CAPACITY - 1);
    /* no room for half a character */
    ev_edit_place(&edit, EV_EDIT_CAPACITY - 2, false);
    ev_edit_key(&edit, SDLK_DELETE, 0);
    ev_edit_insert(&edit, "\xE2\x88\x92");
    assert_int_equal(strlen(edit.text), EV_EDIT_CAPACITY - 2);
}

static void test_place(void **state)
{
    ev_edit edit = edit_of("14 mm", 2, 2);
    (void)state;
    ev_edit_place(&edit, 99, true);
    assert_int_equal(edit.caret, 5);
    assert_int_equal(edit.anchor, 2);
    ev_edit_place(&edit, -4, false);
    assert_int_equal(edit.caret, 0);
    assert_int_equal(edit.anchor, 0);
}

static void test_other_keys_are_not_ours(void **state)
{
    ev_edit edit = edit_of("14 mm", 2, 2);
    (void)state;
    assert_false(ev_edit_key(&edit, SDLK_s, KMOD_LCTRL));
    assert_false(ev_edit_key(&edit, SDLK_x, 0));
    assert_false(ev_edit_key(&edit, SDLK_RETURN, 0));
    assert_string_equal(edit.text, "14 mm");
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_keys),
        cmocka_unit_test(test_start_selects_all),
        cmocka_unit_test(test_insert_in_the_middle),
        cmocka_unit_test(test_odd_text),
        cmocka_unit_test(test_place),
        cmocka_unit_test(test_other_keys_are_not_ours),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
