/* The list of actions: what a search finds, what is chosen and in sight, what can be pressed. */
#include "draw/actions.h"
#include "sheet.h"

#include <math.h>

static const ev_action_entry items[] = {
    {"open", "Open a scene", "Ctrl O", true},    {"save", "Save the scene", "S", true},
    {"undo", "Undo the last change", "U", true}, {"redo", "Redo what was undone", "R", false},
    {"keep", "Keep this state", "K", true},      {"fit", "Fit the drawing", "", true},
};
enum { ITEM_COUNT = sizeof items / sizeof items[0] };

static ev_actions make(const char *search, int chosen)
{
    ev_actions actions = {.items = items, .count = ITEM_COUNT, .chosen = chosen};
    snprintf(actions.search, sizeof actions.search, "%s", search);
    actions.caret = actions.anchor = (int)strlen(search);
    return actions;
}

static cairo_surface_t *draw(const ev_actions *actions, bool dark, double width, double height,
                             ev_boxes *boxes)
{
    cairo_surface_t *surface =
        cairo_image_surface_create(CAIRO_FORMAT_RGB24, (int)width, (int)height);
    cairo_t *cairo = cairo_create(surface);
    ev_page page = ev_page_layout(width, height);
    boxes->count = 0;
    ev_draw_actions(cairo, &page, dark, actions, boxes);
    assert_int_equal(cairo_status(cairo), CAIRO_STATUS_SUCCESS);
    cairo_destroy(cairo);
    cairo_surface_flush(surface);
    return surface;
}

static void check_texts(const ev_boxes *boxes)
{
    const ev_box *panel = ev_boxes_find(boxes, "place.actions");
    for (int i = 0; i < boxes->count; ++i) {
        const ev_box *box = &boxes->items[i];
        if (box->kind != EV_BOX_TEXT)
            continue;
        assert_true(box->rect.x >= panel->rect.x && box->rect.y >= panel->rect.y);
        assert_true(box->rect.x + box->rect.width <= panel->rect.x + panel->rect.width);
        assert_true(box->rect.y + box->rect.height <= panel->rect.y + panel->rect.height);
        assert_true(box->rect.width <= box->within.width + 0.75);
    }
}

static void search_finds_by_words_name_and_key(void **state)
{
    (void)state;
    static const struct {
        const char *search;
        int found[ITEM_COUNT], count;
    } cases[] = {
        {"", {0, 1, 2, 3, 4, 5}, 6}, {"scene", {0, 1}, 2}, {"UNDO", {2, 3}, 2},
        {"last change", {2}, 1},     {"ctrl", {0}, 1},     {"draw fit", {5}, 1},
        {"nothing such", {0}, 0},    {"redo", {3}, 1},
    };
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    for (size_t i = 0; i < sizeof cases / sizeof cases[0]; ++i) {
        ev_actions actions = make(cases[i].search, 0);
        int indices[EV_ACTIONS_CAPACITY];
        assert_int_equal(ev_actions_match(&actions, indices), cases[i].count);
        for (int k = 0; k < cases[i].count; ++k)
            assert_int_equal(indices[k], cases[i].found[k]);
        cairo_surface_destroy(draw(&actions, i % 2, 1280.0, 800.0, boxes));
        check_texts(boxes);
        for (int k = 0; k < ITEM_COUNT; ++k) {
            char box[32], text[32];
            snprintf(box, sizeof box, "act.%s", items[k].name);
            snprintf(text, sizeof text, "text.act.%s", items[k].name);
            bool found = false;
            for (int m = 0; m < cases[i].count; ++m)
                found = found || cases[i].found[m] == k;
            assert_int_equal(ev_boxes_find(boxes, text) != NULL, found);
            assert_int_equal(ev_boxes_find(boxes, box) != NULL, found && items[k].enabled);
            if (found)
                assert_string_equal(ev_boxes_find(boxes, text)->text, items[k].words);
        }
        assert_int_equal(ev_boxes_find(boxes, "text.actions.nothing") != NULL, cases[i].count == 0);
    }
    free(boxes);
}

static void the_chosen_one_is_yellow(void **state)
{
    (void)state;
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    for (int chosen = -1; chosen <= ITEM_COUNT; ++chosen) {
        ev_actions actions = make("", chosen);
        cairo_surface_t *surface = draw(&actions, false, 1100.0, 700.0, boxes);
        int clamped = chosen < 0 ? 0 : chosen < ITEM_COUNT ? chosen : ITEM_COUNT - 1;
        for (int k = 0; k < ITEM_COUNT; ++k) {
            char name[32];
            snprintf(name, sizeof name, "act.%s", items[k].name);
            const ev_box *box = ev_boxes_find(boxes, name);
            if (box)
                assert_int_equal(pixel_at(surface, (int)box->rect.x + 6, (int)box->rect.y + 6) ==
                                     0xFFD23F,
                                 k == clamped);
        }
        cairo_surface_destroy(surface);
    }
    free(boxes);
}

/* More than fit: the chosen one is drawn, and none leaves the panel. */
static void a_long_list_shows_the_chosen_one(void **state)
{
    (void)state;
    static char names[EV_ACTIONS_CAPACITY][16];
    static ev_action_entry many[EV_ACTIONS_CAPACITY];
    for (int i = 0; i < EV_ACTIONS_CAPACITY; ++i) {
        snprintf(names[i], sizeof names[i], "n%d", i);
        many[i] = (ev_action_entry){names[i],
                                    "Does something that takes many words to say, and "
                                    "many more than there is any room for in a row",
                                    "Ctrl Shift F12", true};
    }
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    for (int chosen = 0; chosen < EV_ACTIONS_CAPACITY; chosen += 19) {
        ev_actions actions = {.items = many, .count = EV_ACTIONS_CAPACITY, .chosen = chosen};
        cairo_surface_destroy(draw(&actions, true, 1100.0, 700.0, boxes));
        char name[32];
        snprintf(name, sizeof name, "act.n%d", chosen);
        assert_non_null(ev_boxes_find(boxes, name));
        check_texts(boxes);
    }
    ev_actions none = {0};
    cairo_surface_destroy(draw(&none, false, 1280.0, 800.0, boxes));
    assert_non_null(ev_boxes_find(boxes, "text.actions.nothing"));
    free(boxes);
}

static void clicks_find_the_byte(void **state)
{
    (void)state;
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    ev_actions actions = make("undo", 0);
    ev_page page = ev_page_layout(1280.0, 800.0);
    cairo_surface_destroy(draw(&actions, false, 1280.0, 800.0, boxes));
    const ev_box *text = ev_boxes_find(boxes, "text.actions.search");
    assert_string_equal(text->text, "undo");
    assert_int_equal(ev_actions_byte_at(&page, &actions, text->rect.x - 9.0), 0);
    assert_int_equal(ev_actions_byte_at(&page, &actions, text->rect.x + 300.0), 4);
    assert_in_range(ev_actions_byte_at(&page, &actions, text->rect.x + 0.5 * text->rect.width), 1,
                    3);
    free(boxes);
}

static int release(void **state)
{
    (void)state;
    ev_draw_release();
    return 0;
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(search_finds_by_words_name_and_key),
        cmocka_unit_test(the_chosen_one_is_yellow),
        cmocka_unit_test(a_long_list_shows_the_chosen_one),
        cmocka_unit_test(clicks_find_the_byte),
    };
    return cmocka_run_group_tests(tests, NULL, release);
}
