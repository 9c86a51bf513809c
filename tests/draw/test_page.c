/* The whole page over every scene: text inside its place and apart from other text, boxes where
 * the window looks for them, numbers drawn as the budget has them, nothing blank. */
#include "draw/pen.h"
#include "places.h"

#include <math.h>

static const double sizes[][2] = {{1280.0, 800.0}, {1100.0, 700.0}, {2560.0, 1440.0}};
enum { SIZE_COUNT = sizeof sizes / sizeof sizes[0] };

static void text_lies_inside_its_place(void **state)
{
    const scene_list *list = *state;
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    for (int i = 0; i < list->count; ++i)
        for (int size = 0; size < SIZE_COUNT; ++size)
            for (int variant = 0; variant < 6; ++variant) {
                ev_sheet sheet = list->items[i]->sheet;
                sheet.dark = variant % 2 == 1;
                sheet.detail = variant < 2;
                sheet.plate = (ev_plate)(variant / 2);
                sheet.settings = variant / 2 == 1;
                char what[128];
                snprintf(what, sizeof what, "%s at %g%s%s", list->items[i]->name, sizes[size][0],
                         sheet.dark ? " dark" : "", sheet.detail ? "" : " without detail");
                cairo_surface_destroy(draw_page(&sheet, sizes[size][0], sizes[size][1], boxes));
                check_places(what, boxes, sizes[size][0], sizes[size][1]);
                check_apart(what, boxes);
                check_whole(what, boxes);
            }
    free(boxes);
}

static void verdict_ends_before_its_button(void **state)
{
    const scene_list *list = *state;
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    int buttons = 0;
    for (int i = 0; i < list->count; ++i)
        for (int size = 0; size < SIZE_COUNT; ++size) {
            /* Far more to say than there is room for. */
            ev_sheet sheet = list->items[i]->sheet;
            ev_verdict wordy = *sheet.verdict;
            memset(wordy.text, 'w', 250);
            memset(wordy.advice, 'm', 250);
            for (int at = 9; at < 250; at += 10)
                wordy.text[at] = wordy.advice[at] = ' ';
            wordy.text[250] = wordy.advice[250] = 0;
            wordy.move_count = 1;
            wordy.bold_count = 0;
            sheet.verdict = &wordy;
            cairo_surface_destroy(draw_page(&sheet, sizes[size][0], sizes[size][1], boxes));
            const ev_box *button = ev_boxes_find(boxes, "button.move");
            assert_non_null(button);
            ++buttons;
            for (int line = 1; line <= 2; ++line) {
                char name[32];
                snprintf(name, sizeof name, "text.verdict.%d", line);
                const ev_box *text = ev_boxes_find(boxes, name);
                assert_non_null(text);
                assert_false(overlaps(text->rect, button->rect));
            }
            check_places("a wordy verdict", boxes, sizes[size][0], sizes[size][1]);
            check_apart("a wordy verdict", boxes);
        }
    assert_true(buttons > 0);
    free(boxes);
}

static void button_stands_only_where_there_is_a_move(void **state)
{
    const scene_list *list = *state;
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    int with = 0, without = 0;
    for (int i = 0; i < list->count; ++i) {
        const ev_sheet *sheet = &list->items[i]->sheet;
        cairo_surface_destroy(draw_page(sheet, 1280.0, 800.0, boxes));
        bool has = ev_boxes_find(boxes, "button.move") != NULL;
        assert_int_equal(has, sheet->verdict->move_count > 0);
        *(has ? &with : &without) += 1;
    }
    assert_true(with > 0 && without > 0);
    for (int i = 0; i < list->count; ++i) { /* and never on paper */
        ev_sheet sheet = list->items[i]->sheet;
        sheet.paper = sheet.settings = true;
        cairo_surface_destroy(draw_page(&sheet, 1280.0, 800.0, boxes));
        assert_null(ev_boxes_find(boxes, "button.move"));
        assert_null(ev_boxes_find(boxes, "tab.space"));
        assert_null(ev_boxes_find(boxes, "tab.cut"));
        assert_null(ev_boxes_find(boxes, "button.settings"));
    }
    free(boxes);
}

static void boxes_are_where_the_window_looks(void **state)
{
    static const char *const names[] = {
        "place.bar",      "place.verdict",    "place.stage",      "place.watts",
        "place.strip",    "place.ledger",     "place.aperture",   "tab.section",
        "place.beam",     "plate.beam",       "tab.beam",         "tab.cut",
        "tab.space",      "plot.section",     "plot.detail",      "plate.aperture",
        "ledger.phase",   "ledger.past_sub",  "ledger.blockage",  "watts.aperture",
        "action.save",    "action.fit",       "field.field.0",    "part.feed.0",
        "text.bar.title", "text.stage.front", "text.ledger.gain",
    };
    const scene_list *list = *state;
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    for (int i = 0; i < list->count; ++i) {
        const ev_sheet *sheet = &list->items[i]->sheet;
        cairo_surface_destroy(draw_page(sheet, 1280.0, 800.0, boxes));
        for (size_t k = 0; k < sizeof names / sizeof names[0]; ++k)
            if (!ev_boxes_find(boxes, names[k]))
                fail_msg("%s: no box %s", list->items[i]->name, names[k]);
        assert_null(ev_boxes_find(boxes, "action.redo")); /* not enabled: not to be hit */
        assert_int_equal(ev_boxes_find(boxes, "part.sub") != NULL, sheet->antenna->dual);
        const char *handle = sheet->part == EV_PART_SUB ? "handle.sub" : "handle.feed";
        assert_non_null(ev_boxes_find(boxes, handle));
        const ev_box *row = ev_boxes_find(boxes, "ledger.taper");
        const ev_box *hit = ev_boxes_hit(boxes, row->rect.x + 0.5 * row->rect.width,
                                         row->rect.y + 0.5 * row->rect.height, EV_BOX_ROW);
        assert_ptr_equal(hit, row);
    }
    free(boxes);
}

static void settings_are_offered_beside_the_fields(void **state)
{
    const scene_list *list = *state;
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    for (int size = 0; size < SIZE_COUNT; ++size)
        for (int offered = 0; offered < 2; ++offered) {
            ev_sheet sheet = list->items[0]->sheet;
            sheet.settings = offered;
            cairo_surface_destroy(draw_page(&sheet, sizes[size][0], sizes[size][1], boxes));
            const ev_box *button = ev_boxes_find(boxes, "button.settings");
            assert_int_equal(button != NULL, offered);
            int fields = 0;
            for (int i = 0; i < boxes->count; ++i) {
                const ev_box *box = &boxes->items[i];
                fields += box->kind == EV_BOX_FIELD;
                if (box->kind == EV_BOX_FIELD && button)
                    assert_false(overlaps(box->rect, button->rect));
            }
            assert_int_equal(fields, offered && sizes[size][0] < 1200.0 ? 5 : 6);
        }
    free(boxes);
}

static void check_row(const ev_boxes *boxes, const char *row, double factor, bool applies)
{
    char name[80];
    snprintf(name, sizeof name, "text.ledger.%s.db", row);
    const ev_box *box = ev_boxes_find(boxes, name);
    assert_non_null(box);
    if (!applies) {
        assert_string_equal(box->text, "\u2013");
        return;
    }
    double db = 10.0 * log10(factor);
    if (fabs(read_drawn(box->text) - db) > 0.00501)
        fail_msg("%s is drawn as %s, the budget has %.4f dB", row, box->text, db);
    if (fabs(db) < 0.005)
        assert_string_equal(box->text, "0.00"); /* never with a minus */
}

static void ledger_draws_the_budget(void **state)
{
    const scene_list *list = *state;
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    for (int i = 0; i < list->count; ++i) {
        const ev_sheet *sheet = &list->items[i]->sheet;
        const ev_antenna *antenna = sheet->antenna;
        const ev_feed_budget *budget = &sheet->budget->feeds[0];
        const ev_efficiency *e = &budget->efficiency;
        cairo_surface_destroy(draw_page(sheet, 1100.0, 700.0, boxes));
        check_row(boxes, "past_sub", e->spillover_sub, antenna->dual);
        check_row(boxes, "past_main", e->spillover_main, true);
        check_row(boxes, "taper", e->taper, true);
        check_row(boxes, "phase", e->phase, true);
        check_row(boxes, "pointing", e->pointing, !antenna->feeds[0].toward_peak);
        check_row(boxes, "surface", e->surface, true);
        check_row(boxes, "ohmic", e->ohmic, true);
        check_row(boxes, "mismatch", e->mismatch, true);
        const ev_box *gain = ev_boxes_find(boxes, "text.ledger.gain");
        assert_true(fabs(read_drawn(gain->text) - budget->gain_on_axis_dbi) <= 0.00501);
        const ev_box *full = ev_boxes_find(boxes, "text.ledger.full.db");
        assert_true(fabs(read_drawn(full->text) - budget->full_aperture_gain_dbi) <= 0.00501);
        const ev_box *share = ev_boxes_find(boxes, "text.ledger.total.share");
        double of_full =
            pow(10.0, 0.1 * (budget->gain_on_axis_dbi - budget->full_aperture_gain_dbi));
        assert_true(fabs(read_drawn(share->text) - 100.0 * of_full) <= 0.501);
        assert_non_null(strstr(share->text, " % of full"));
        /* What is drawn adds up: full gain, ten rows, gain. */
        double sum = read_drawn(full->text);
        static const char *const rows[] = {"past_sub", "past_main",    "taper",    "phase",
                                           "pointing", "polarization", "blockage", "surface",
                                           "ohmic",    "mismatch"};
        for (size_t k = 0; k < sizeof rows / sizeof rows[0]; ++k) {
            char name[80];
            snprintf(name, sizeof name, "text.ledger.%s.db", rows[k]);
            sum += read_drawn(ev_boxes_find(boxes, name)->text);
        }
        assert_true(fabs(sum - read_drawn(gain->text)) < 0.06);
    }
    free(boxes);
}

static void watts_draw_the_budget(void **state)
{
    const scene_list *list = *state;
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    for (int i = 0; i < list->count; ++i) {
        const ev_sheet *sheet = &list->items[i]->sheet;
        const double *power = sheet->budget->feeds[0].power;
        cairo_surface_destroy(draw_page(sheet, 1280.0, 800.0, boxes));
        const ev_box *box = ev_boxes_find(boxes, "text.watts.aperture");
        assert_true(fabs(read_drawn(box->text) - 100.0 * power[EV_FATE_APERTURE]) <= 0.0501);
        static const char *const names[] = {"aperture", "past_sub", "past_main", "shadow"};
        double sum = 0.0;
        for (int k = 0; k < 4; ++k) {
            char name[80];
            snprintf(name, sizeof name, "text.watts.%s", names[k]);
            if ((box = ev_boxes_find(boxes, name)))
                sum += read_drawn(box->text);
        }
        assert_true(fabs(sum - 100.0) <= 0.21);
        assert_int_equal(ev_boxes_find(boxes, "text.watts.past_sub") != NULL,
                         power[EV_FATE_PAST_SUB] >= EV_LEAST_SHARE);
    }
    free(boxes);
}

/* Share of the region's pixels that are not ground. */
static double inked(cairo_surface_t *surface, ev_rect place, bool dark)
{
    const ev_theme *theme = ev_theme_get(dark);
    unsigned ground = (unsigned)lround(255.0 * theme->ground.r) << 16 |
                      (unsigned)lround(255.0 * theme->ground.g) << 8 |
                      (unsigned)lround(255.0 * theme->ground.b);
    int count = 0, all = 0;
    for (int y = (int)place.y + 2; y < (int)(place.y + place.height) - 2; ++y)
        for (int x = (int)place.x + 2; x < (int)(place.x + place.width) - 2; ++x, ++all)
            count += pixel_at(surface, x, y) != ground;
    return (double)count / all;
}

static void no_region_is_blank_or_flooded(void **state)
{
    const scene_list *list = *state;
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    ev_page page = ev_page_layout(1280.0, 800.0);
    const struct {
        ev_rect place;
        double least, most;
    } regions[] = {{page.bar, 0.01, 0.15},      {page.verdict, 0.01, 0.25},
                   {page.stage, 0.1, 0.6},      {page.watts, 0.06, 0.35},
                   {page.strip, 0.01, 0.25},    {page.ledger, 0.03, 0.2},
                   {page.plates[0], 0.02, 0.7}, {page.plates[1], 0.02, 0.3}};
    for (int i = 0; i < list->count; ++i)
        for (int dark = 0; dark < 2; ++dark) {
            ev_sheet sheet = list->items[i]->sheet;
            sheet.dark = dark;
            sheet.plate = i % 2 ? EV_PLATE_BEAM : EV_PLATE_CUT;
            cairo_surface_t *surface = draw_page(&sheet, 1280.0, 800.0, boxes);
            for (size_t k = 0; k < sizeof regions / sizeof regions[0]; ++k) {
                double share = inked(surface, regions[k].place, dark);
                if (share < regions[k].least || share > regions[k].most)
                    fail_msg("%s: region %zu is inked to %.3f", list->items[i]->name, k, share);
            }
            cairo_surface_destroy(surface);
        }
    free(boxes);
}

static void regions_tile_the_page(void **state)
{
    (void)state;
    for (double width = 1100.0; width < 4000.0; width += 90.0)
        for (double height = 700.0; height < 2200.0; height += 75.0) {
            ev_page page = ev_page_layout(width, height);
            double left = page.bar.height + page.verdict.height + page.stage.height +
                          page.watts.height + page.strip.height;
            double right = page.bar.height + page.ledger.height;
            for (int i = 0; i < page.plate_count; ++i) {
                assert_true(fabs(page.plates[i].y - right) < 1e-9);
                assert_true(page.plates[i].height > 170.0);
                right += page.plates[i].height;
            }
            assert_true(fabs(left - height) < 1e-9 && fabs(right - height) < 1e-9);
            assert_true(fabs(page.stage.width + page.ledger.width - width) < 1e-9);
            assert_true(lies_within(page.detail, page.stage));
            assert_true(page.stage.width > 0.6 * width);
        }
    assert_int_equal(ev_page_layout(1100.0, 700.0).plate_count, 1);
    ev_page page = ev_page_layout(1280.0, 800.0);
    assert_int_equal(page.plate_count, 2);
    assert_true(page.plates[0].y == 413.0 && page.plates[1].y == 604.0);
}

static void row_pointed_at_turns_yellow(void **state)
{
    const scene_list *list = *state;
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    ev_sheet sheet = list->items[0]->sheet;
    snprintf(sheet.pointed, sizeof sheet.pointed, "ledger.taper");
    cairo_surface_t *surface = draw_page(&sheet, 1280.0, 800.0, boxes);
    const ev_box *row = ev_boxes_find(boxes, "ledger.taper");
    const ev_box *other = ev_boxes_find(boxes, "ledger.phase");
    assert_int_equal(pixel_at(surface, (int)row->rect.x + 5, (int)row->rect.y + 4), 0xFFD23F);
    assert_int_not_equal(pixel_at(surface, (int)other->rect.x + 5, (int)other->rect.y + 4),
                         0xFFD23F);
    cairo_surface_destroy(surface);
    free(boxes);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(text_lies_inside_its_place),
        cmocka_unit_test(verdict_ends_before_its_button),
        cmocka_unit_test(button_stands_only_where_there_is_a_move),
        cmocka_unit_test(boxes_are_where_the_window_looks),
        cmocka_unit_test(settings_are_offered_beside_the_fields),
        cmocka_unit_test(ledger_draws_the_budget),
        cmocka_unit_test(watts_draw_the_budget),
        cmocka_unit_test(no_region_is_blank_or_flooded),
        cmocka_unit_test(regions_tile_the_page),
        cmocka_unit_test(row_pointed_at_turns_yellow),
    };
    return cmocka_run_group_tests(tests, load_scenes, free_scenes);
}
