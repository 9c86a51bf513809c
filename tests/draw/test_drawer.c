/* The drawer of all settings: every row that applies is there once, with the value the design has;
 * marks, choices and buttons as the design stands; search, scrolling and typing. */
#include "draw/drawer_list.h"
#include "places.h"

#include <math.h>

static const double sizes[][2] = {{1280.0, 800.0}, {1100.0, 700.0}, {2560.0, 1440.0}};
enum { SIZE_COUNT = 3 };

static void draw(const ev_sheet *sheet, const ev_drawer *drawer, double width, double height,
                 ev_boxes *boxes)
{
    cairo_surface_t *surface =
        cairo_image_surface_create(CAIRO_FORMAT_RGB24, (int)width, (int)height);
    cairo_t *cairo = cairo_create(surface);
    ev_page page = ev_page_layout(width, height);
    boxes->count = 0;
    ev_draw_drawer(cairo, &page, sheet, drawer, boxes);
    assert_int_equal(cairo_status(cairo), CAIRO_STATUS_SUCCESS);
    cairo_destroy(cairo);
    cairo_surface_destroy(surface);
}

static void check_texts(const char *what, const ev_boxes *boxes)
{
    check_inside(what, boxes);
    check_apart(what, boxes);
    assert_in_range(boxes->count, 20, EV_BOX_CAPACITY - 1);
}

static bool has(const ev_boxes *boxes, const char *kind, const char *address)
{
    char name[128];
    snprintf(name, sizeof name, "%s.%s", kind, address);
    return ev_boxes_find(boxes, name) != NULL;
}

/* Scrolled to each row in turn, it is in sight and says what the design has. */
static void every_row_is_reached_and_true(void **state)
{
    const scene_list *list = *state;
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    static ev_parameter_ref rows[EV_DRAWER_CAPACITY];
    for (int i = 0; i < list->count; ++i)
        for (int size = 0; size < SIZE_COUNT; ++size) {
            const ev_sheet *sheet = &list->items[i]->sheet;
            const ev_design *design = sheet->design;
            ev_page page = ev_page_layout(sizes[size][0], sizes[size][1]);
            int count = ev_drawer_rows(design, "", rows);
            assert_in_range(count, 30, EV_DRAWER_CAPACITY);
            ev_drawer drawer = {.scroll = 0.0};
            for (int k = 0; k < count; k += size == 0 ? 1 : 5) {
                char address[EV_ADDRESS_CAPACITY], name[128], digits[160], unit[24];
                ev_parameter_address(design, rows[k], address, sizeof address);
                drawer.scroll = ev_drawer_scroll_to(&page, sheet, &drawer, address);
                draw(sheet, &drawer, sizes[size][0], sizes[size][1], boxes);
                check_texts(list->items[i]->name, boxes);
                if (!has(boxes, "row", address))
                    fail_msg("%s: no row %s", list->items[i]->name, address);
                ev_parameter_format(design, rows[k], digits, sizeof digits, unit, sizeof unit);
                bool choice = rows[k].parameter->kind == EV_VALUE_CHOICE;
                snprintf(name, sizeof name, choice ? "text.choice.%s.%s" : "text.row.%s.value",
                         address, digits);
                const ev_box *value = ev_boxes_find(boxes, name);
                if (digits[0] && !value)
                    fail_msg("%s: no value of %s", list->items[i]->name, address);
                if (value)
                    assert_memory_equal(value->text, digits,
                                        strlen(digits) < 47 ? strlen(digits) : 40);
                assert_int_equal(has(boxes, "reset", address),
                                 ev_row_is_off_default(design, rows[k]));
                /* What a file must give, and what follows, has nothing to go back to. */
                if (rows[k].parameter->required || ev_parameter_is_derived(design, rows[k]))
                    assert_false(has(boxes, "reset", address));
            }
        }
    free(boxes);
}

static bool is_listed(const ev_design *design, const char *search, const char *name)
{
    static ev_parameter_ref rows[EV_DRAWER_CAPACITY];
    int count = ev_drawer_rows(design, search, rows), seen = 0;
    for (int i = 0; i < count; ++i)
        seen += strcmp(rows[i].parameter->name, name) == 0;
    return seen > 0;
}

static void only_what_applies_is_listed(void **state)
{
    (void)state;
    ev_design design = ev_default_design();
    ev_design_resolve(&design);
    assert_true(is_listed(&design, "", "main.depth"));
    assert_true(is_listed(&design, "", "feed.exponent"));
    assert_true(is_listed(&design, "", "feed.toward.x"));
    assert_false(is_listed(&design, "", "sub.shape"));
    assert_false(is_listed(&design, "", "feed.table"));
    assert_false(is_listed(&design, "", "feed.aim.x"));
    assert_false(is_listed(&design, "", "site.elevation"));
    assert_false(is_listed(&design, "", "strut.width"));
    design.main.offset = 0.7;
    design.main.offset_given = EV_GIVEN_OFFSET;
    design.sub = ev_default_sub();
    design.sub.present = true;
    design.site.present = true;
    design.feeds[0].pattern = EV_PATTERN_TABLE;
    design.feeds[0].aim = EV_AIM_DIRECTION;
    design.feeds[0].toward_peak = true;
    assert_false(is_listed(&design, "", "main.depth"));
    assert_false(is_listed(&design, "", "feed.exponent"));
    assert_false(is_listed(&design, "", "feed.edge_taper"));
    assert_false(is_listed(&design, "", "feed.toward.x"));
    assert_true(is_listed(&design, "", "feed.table"));
    assert_true(is_listed(&design, "", "feed.aim.x"));
    assert_true(is_listed(&design, "", "sub.axis_tilt"));
    assert_true(is_listed(&design, "", "site.elevation"));
    design.main.offset = 0.0;
    assert_false(is_listed(&design, "", "sub.axis_tilt"));
}

/* As much of everything as a design holds is still listed whole. */
static void the_largest_design_is_listed(void **state)
{
    const scene_list *list = *state;
    ev_sheet sheet = list->items[0]->sheet;
    ev_design *design = malloc(sizeof *design);
    *design = *sheet.design;
    design->sub = ev_default_sub();
    design->sub.present = design->site.present = true;
    design->main.offset = 0.7;
    design->feed_count = EV_FEED_CAPACITY;
    design->strut_count = EV_STRUT_CAPACITY;
    for (int i = 0; i < EV_FEED_CAPACITY; ++i) {
        design->feeds[i] = ev_default_feed();
        design->feeds[i].aim = EV_AIM_DIRECTION;
        memset(design->feeds[i].name, 'a' + i, EV_NAME_CAPACITY - 1);
        design->feeds[i].name[EV_NAME_CAPACITY - 1] = 0;
    }
    for (int i = 0; i < EV_STRUT_CAPACITY; ++i) {
        design->struts[i] = ev_default_strut();
        snprintf(design->struts[i].name, EV_NAME_CAPACITY, "s%d", i);
    }
    sheet.design = design;
    static ev_parameter_ref rows[EV_DRAWER_CAPACITY];
    ev_drawer_list *items = malloc(sizeof *items);
    ev_drawer_list_make(design, "", items);
    int count = ev_drawer_rows(design, "", rows);
    assert_true(items->count < EV_DRAWER_CAPACITY);
    assert_string_equal(rows[count - 1].parameter->name, "losses.mismatch");
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    ev_drawer drawer = {0};
    ev_page page = ev_page_layout(1100.0, 700.0);
    double limit = ev_drawer_scroll_limit(&page, &sheet, &drawer);
    for (double scroll = 0.0; scroll < limit; scroll += 333.0) {
        drawer.scroll = scroll;
        draw(&sheet, &drawer, 1100.0, 700.0, boxes);
        check_texts("the largest", boxes);
        assert_null(ev_boxes_find(boxes, "add.feed"));
    }
    free(items);
    free(boxes);
    free(design);
}

/* Where the buttons are, whatever is in sight: with the list searched for each. */
static bool offers(const ev_sheet *sheet, const char *search, const char *name)
{
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    ev_drawer drawer = {0};
    bool found = false;
    ev_page page = ev_page_layout(1280.0, 800.0);
    snprintf(drawer.search, sizeof drawer.search, "%s", search);
    double limit = ev_drawer_scroll_limit(&page, sheet, &drawer);
    for (double scroll = 0.0; scroll < limit + 300.0; scroll += 300.0) {
        drawer.scroll = scroll;
        draw(sheet, &drawer, 1280.0, 800.0, boxes);
        const ev_box *box = ev_boxes_find(boxes, name);
        found = found || (box && box->kind == EV_BOX_BUTTON);
    }
    free(boxes);
    return found;
}

static void buttons_are_those_that_can_be_pressed(void **state)
{
    const scene_list *list = *state;
    for (int i = 0; i < list->count; ++i) {
        const ev_sheet *sheet = &list->items[i]->sheet;
        const ev_design *design = sheet->design;
        assert_int_equal(offers(sheet, "", "add.sub"), !design->sub.present);
        assert_int_equal(offers(sheet, "", "remove.sub"), design->sub.present);
        assert_true(offers(sheet, "", "add.feed"));
        assert_true(offers(sheet, "", "copy.feed.0"));
        assert_int_equal(offers(sheet, "", "remove.feed.0"), design->feed_count > 1);
        assert_int_equal(offers(sheet, "", "remove.strut.0"), design->strut_count > 0);
        assert_int_equal(offers(sheet, "", "remove.site"), design->site.present);
        assert_int_equal(offers(sheet, "", "add.site"), !design->site.present);
    }
    const ev_sheet *sheet = &list->items[0]->sheet;
    assert_true(offers(sheet, "add feed", "add.feed"));
    assert_false(offers(sheet, "taper", "add.feed"));
}

static void given_and_derived_are_told_apart(void **state)
{
    const scene_list *list = *state;
    const ev_design *design = list->items[0]->sheet.design;
    ev_drawer_list *items = malloc(sizeof *items);
    for (int i = 0; i < list->count; ++i) {
        design = list->items[i]->sheet.design;
        ev_drawer_list_make(design, "", items);
        int given = 0, joined = 0;
        for (int k = 0; k < items->count; ++k) {
            const ev_drawer_item *item = &items->items[k];
            if (item->kind != EV_ITEM_ROW)
                continue;
            assert_int_equal(item->is_derived, ev_parameter_is_derived(design, item->ref));
            if (item->ref.parameter->choice &&
                strcmp(item->ref.parameter->choice, "focal length") == 0) {
                assert_true(item->joins);
                given += !item->is_derived;
            }
            joined += item->joins_next;
            if (item->joins_next)
                assert_true(items->items[k + 1].joins);
        }
        assert_int_equal(given, 1);
        assert_true(joined >= 2);
    }
    free(items);
}

static void search_finds_by_name_and_meaning(void **state)
{
    const scene_list *list = *state;
    const ev_design *design = list->items[0]->sheet.design;
    assert_true(is_listed(design, "TAPER", "feed.edge_taper"));
    assert_false(is_listed(design, "taper", "main.diameter"));
    assert_true(is_listed(design, "aperture projected", "main.diameter")); /* of its meaning */
    assert_true(is_listed(design, " dish  hole ", "main.hole"));
    assert_false(is_listed(design, "dish hole zebra", "main.hole"));
    assert_true(ev_search_matches("", "x"));
    assert_false(ev_search_matches("x", ""));
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    ev_drawer drawer = {.search = "zebra"};
    draw(&list->items[0]->sheet, &drawer, 1280.0, 800.0, boxes);
    assert_non_null(ev_boxes_find(boxes, "text.drawer.nothing"));
    free(boxes);
}

static void foot_says_what_a_row_means(void **state)
{
    const scene_list *list = *state;
    const ev_sheet *sheet = &list->items[0]->sheet;
    static const char *const pointed[] = {"row.main.hole", "reset.main.hole"};
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    for (int i = 0; i < 2; ++i) {
        ev_drawer drawer = {0};
        snprintf(drawer.pointed, sizeof drawer.pointed, "%s", pointed[i]);
        draw(sheet, &drawer, 1280.0, 800.0, boxes);
        assert_string_equal(ev_boxes_find(boxes, "text.drawer.address")->text, "main.hole");
        assert_string_equal(ev_boxes_find(boxes, "text.drawer.label")->text, "Central hole");
        assert_memory_equal(ev_boxes_find(boxes, "text.drawer.range")->text,
                            "Default 0 mm. Legal from 0 mm to 10000 m.", 40);
        check_texts("pointed", boxes);
    }
    char address[EV_ADDRESS_CAPACITY];
    ev_parameter_ref ref;
    assert_true(ev_parameter_find(sheet->design, 0, "feed.pattern", &ref, NULL));
    ev_parameter_address(sheet->design, ref, address, sizeof address);
    ev_drawer drawer = {0};
    snprintf(drawer.pointed, sizeof drawer.pointed, "choice.%.60s.gaussian", address);
    draw(sheet, &drawer, 1280.0, 800.0, boxes);
    assert_string_equal(ev_boxes_find(boxes, "text.drawer.label")->text, "Pattern");
    free(boxes);
}

static void typing_is_shown_with_its_complaint(void **state)
{
    const scene_list *list = *state;
    const ev_sheet *sheet = &list->items[0]->sheet;
    ev_page page = ev_page_layout(1280.0, 800.0);
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    ev_drawer drawer = {.editing = "main.hole", .edit_text = "3/8 in", .edit_caret = 6};
    snprintf(drawer.complaint, sizeof drawer.complaint, "3/8 in is more than the dish");
    draw(sheet, &drawer, 1280.0, 800.0, boxes);
    const ev_box *text = ev_boxes_find(boxes, "text.drawer.edit");
    assert_string_equal(text->text, "3/8 in");
    assert_null(ev_boxes_find(boxes, "text.row.main.hole.value"));
    assert_string_equal(ev_boxes_find(boxes, "text.drawer.range")->text, drawer.complaint);
    assert_int_equal(ev_drawer_byte_at(&page, sheet, &drawer, text->rect.x - 50.0), 0);
    assert_int_equal(ev_drawer_byte_at(&page, sheet, &drawer, text->rect.x + 500.0), 6);
    /* A title longer than its field: the caret stays in sight, and the text box in its place. */
    snprintf(drawer.editing, sizeof drawer.editing, "title");
    memset(drawer.edit_text, 'W', sizeof drawer.edit_text - 1);
    drawer.complaint[0] = 0;
    drawer.edit_caret = drawer.edit_anchor = (int)strlen(drawer.edit_text);
    draw(sheet, &drawer, 1280.0, 800.0, boxes);
    check_texts("a long title", boxes);
    text = ev_boxes_find(boxes, "text.drawer.edit");
    int byte = ev_drawer_byte_at(&page, sheet, &drawer, text->rect.x + text->rect.width);
    assert_in_range(byte, (int)strlen(drawer.edit_text) - 1, (int)strlen(drawer.edit_text));
    assert_int_equal(ev_drawer_byte_at(&page, sheet, &drawer, text->rect.x - 1e4), 0);
    /* Without a row in hand it is the search. */
    ev_drawer search = {.search = "edge", .search_caret = 4, .searching = true};
    draw(sheet, &search, 1280.0, 800.0, boxes);
    text = ev_boxes_find(boxes, "text.drawer.search");
    assert_int_equal(ev_drawer_byte_at(&page, sheet, &search, text->rect.x + 500.0), 4);
    free(boxes);
}

static void scroll_is_held_to_the_list(void **state)
{
    const scene_list *list = *state;
    const ev_sheet *sheet = &list->items[0]->sheet;
    ev_page page = ev_page_layout(1280.0, 800.0);
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    const double wild[] = {-1e9, NAN, 1e9, INFINITY};
    for (int i = 0; i < 4; ++i) {
        ev_drawer drawer = {.scroll = wild[i]};
        draw(sheet, &drawer, 1280.0, 800.0, boxes);
        bool at_top = ev_boxes_find(boxes, "row.title") != NULL;
        assert_int_equal(at_top, wild[i] != 1e9);
        check_texts("scrolled", boxes);
    }
    ev_drawer drawer = {0};
    drawer.scroll = ev_drawer_scroll_limit(&page, sheet, &drawer);
    draw(sheet, &drawer, 1280.0, 800.0, boxes);
    assert_non_null(ev_boxes_find(boxes, "row.losses.mismatch"));
    ev_rect place = ev_boxes_find(boxes, "place.drawer.list")->rect;
    for (int i = 0; i < boxes->count; ++i) { /* boxes of rows in part are cut to what is seen */
        const ev_box *box = &boxes->items[i];
        if (box->kind == EV_BOX_ROW)
            assert_true(box->rect.y >= place.y - 1e-9 &&
                        box->rect.y + box->rect.height <= place.y + place.height + 1e-9);
    }
    free(boxes);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(every_row_is_reached_and_true),
        cmocka_unit_test(only_what_applies_is_listed),
        cmocka_unit_test(the_largest_design_is_listed),
        cmocka_unit_test(buttons_are_those_that_can_be_pressed),
        cmocka_unit_test(given_and_derived_are_told_apart),
        cmocka_unit_test(search_finds_by_name_and_meaning),
        cmocka_unit_test(foot_says_what_a_row_means),
        cmocka_unit_test(typing_is_shown_with_its_complaint),
        cmocka_unit_test(scroll_is_held_to_the_list),
    };
    return cmocka_run_group_tests(tests, load_scenes, free_scenes);
}
