/* Reading replays: what is good is cut into steps, and every mistake is found at its place. */
#include "view/replay.h"

#include <math.h>
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <string.h>

#include <cmocka.h>

static ev_diagnostics diagnostics;

static ev_replay *parse(const char *text)
{
    ev_diagnostics_init(&diagnostics);
    return ev_replay_parse(text, "steps.replay", &diagnostics);
}

static void test_good(void **state)
{
    (void)state;
    ev_replay *replay = parse("# the feed, and back\n"
                              "\n"
                              "size 1280 800\r\n"
                              "  drag feed +10 mm along z   # out\n"
                              "drag ledger.phase 5 -7.5 px\n"
                              "type feed.defocus 3/8 in\n"
                              "key ctrl+z\n"
                              "wait 300 ms\n"
                              "settle\n"
                              "shot a picture.png  \n"
                              "expect notice Undid: feed out");
    assert_non_null(replay);
    assert_int_equal(diagnostics.count, 0);
    assert_int_equal(replay->count, 9);
    assert_string_equal(replay->steps[0].verb->name, "size");
    assert_int_equal(replay->steps[0].line, 3);
    assert_true(replay->steps[0].tokens[2].number == 800.0);
    assert_int_equal(replay->steps[1].token_count, 6);
    assert_int_equal(replay->steps[1].tokens[5].column, 26);
    assert_string_equal(replay->steps[2].tokens[1].text, "ledger.phase");
    assert_true(replay->steps[2].tokens[3].number == -7.5);
    assert_string_equal(replay->steps[3].tokens[2].text, "3/8 in");
    assert_string_equal(replay->steps[7].tokens[1].text, "a picture.png");
    assert_string_equal(replay->steps[8].tokens[2].text, "Undid: feed out");
    ev_replay_free(replay);
    ev_diagnostics_clear(&diagnostics);
}

static void test_mistakes(void **state)
{
    static const struct {
        const char *text;
        int line, column;
    } cases[] = {
        {"settle\nslide feed 3\n", 2, 1},
        {"  size 1280\n", 1, 3},
        {"size wide 800\n", 1, 1},
        {"size 10 800\n", 1, 6},
        {"size 1280 90000\n", 1, 11},
        {"drag feed +10 mm along y\n", 1, 24},
        {"drag feed +10 furlong along z\n", 1, 15},
        {"drag feed +10 mm across z\n", 1, 18},
        {"drag horn +10 mm along z\n", 1, 6},
        {"drag handle +10 mm along z\n", 1, 26},
        {"drag feed 10 20 mm\n", 1, 17},
        {"orbit 10 20 px\n", 1, 13},
        {"wait 10 s\n", 1, 9},
        {"wait -1 ms\n", 1, 6},
        {"key Nonsense\n", 1, 5},
        {"key ctrl+\n", 1, 5},
        {"hold tail\n", 1, 6},
        {"click\n", 1, 1},
        {"settle now\n", 1, 1},
        {"\n\n\nshot\n", 4, 1},
    };
    (void)state;
    for (size_t i = 0; i < sizeof cases / sizeof cases[0]; ++i) {
        ev_replay *replay = parse(cases[i].text);
        if (replay || diagnostics.count != 1 || diagnostics.items[0].line != cases[i].line ||
            diagnostics.items[0].column != cases[i].column) {
            print_error("%s: %d messages, the first at %d:%d\n", cases[i].text, diagnostics.count,
                        diagnostics.count ? diagnostics.items[0].line : 0,
                        diagnostics.count ? diagnostics.items[0].column : 0);
        }
        assert_null(replay);
        assert_int_equal(diagnostics.count, 1);
        assert_string_equal(diagnostics.items[0].id, "replay");
        assert_string_equal(diagnostics.items[0].file, "steps.replay");
        assert_int_equal(diagnostics.items[0].line, cases[i].line);
        assert_int_equal(diagnostics.items[0].column, cases[i].column);
        assert_non_null(diagnostics.items[0].source);
        ev_diagnostics_clear(&diagnostics);
    }
}

static void test_all_mistakes_in_one_go(void **state)
{
    (void)state;
    assert_null(parse("slide\nsettle\nsize 1\nkey Nonsense\n"));
    assert_int_equal(diagnostics.count, 3);
    ev_diagnostics_clear(&diagnostics);
}

/* Every verb of the table is told apart from others and says how it is written. */
static void test_table(void **state)
{
    int count;
    const ev_verb *verbs = ev_replay_verbs(&count);
    (void)state;
    assert_true(count > 15);
    for (int i = 0; i < count; ++i) {
        assert_non_null(verbs[i].run);
        assert_int_equal(strncmp(verbs[i].usage, verbs[i].name, strlen(verbs[i].name)), 0);
        assert_true(strlen(verbs[i].arguments) < EV_TOKEN_CAPACITY);
    }
}

static void test_keys(void **state)
{
    SDL_Keycode key;
    Uint16 modifiers;
    (void)state;
    assert_true(ev_replay_key("u", &key, &modifiers));
    assert_int_equal(key, SDLK_u);
    assert_int_equal(modifiers, 0);
    assert_true(ev_replay_key("ctrl+shift+z", &key, &modifiers));
    assert_int_equal(key, SDLK_z);
    assert_int_equal(modifiers, KMOD_LCTRL | KMOD_LSHIFT);
    assert_true(ev_replay_key("Return", &key, &modifiers));
    assert_int_equal(key, SDLK_RETURN);
    assert_false(ev_replay_key("", &key, &modifiers));
}

static void test_unreadable(void **state)
{
    (void)state;
    ev_diagnostics_init(&diagnostics);
    assert_null(ev_replay_read("/nowhere/at/all.replay", &diagnostics));
    assert_string_equal(diagnostics.items[0].id, "replay_unreadable");
    assert_null(ev_replay_read(EV_SCENES, &diagnostics)); /* a folder */
    assert_int_equal(diagnostics.count, 2);
    ev_diagnostics_clear(&diagnostics);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_good),  cmocka_unit_test(test_mistakes),
        cmocka_unit_test(test_table), cmocka_unit_test(test_all_mistakes_in_one_go),
        cmocka_unit_test(test_keys),  cmocka_unit_test(test_unreadable),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
