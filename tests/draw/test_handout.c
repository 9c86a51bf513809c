/* Pages to hand out: cautions and date at the foot, nothing to press, all of it in its place. */
#include "places.h"

static const double sizes[][2] = {{1280.0, 800.0}, {1100.0, 700.0}, {2560.0, 1440.0}};
enum { SIZE_COUNT = sizeof sizes / sizeof sizes[0] };

static bool mentions(const ev_box *box, const char *word)
{
    return box && strstr(box->text, word) != NULL;
}

/* Cautions stand on what is handed out, by what applies, and nowhere else. */
static void hand_outs_carry_cautions(void **state)
{
    const scene_list *list = *state;
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    for (int i = 0; i < list->count; ++i)
        for (int size = 0; size < SIZE_COUNT; ++size)
            for (int site = 0; site < 2; ++site) {
                ev_sheet sheet = list->items[i]->sheet;
                ev_antenna antenna = *sheet.antenna;
                antenna.site.present = site;
                sheet.antenna = &antenna;
                snprintf(sheet.date, sizeof sheet.date, "1 December 2026");
                cairo_surface_t *surface = cairo_image_surface_create(
                    CAIRO_FORMAT_RGB24, (int)sizes[size][0], (int)sizes[size][1]);
                cairo_t *cairo = cairo_create(surface);
                boxes->count = 0;
                ev_draw_handout(cairo, sizes[size][0], sizes[size][1], &sheet, boxes);
                cairo_destroy(cairo);
                cairo_surface_destroy(surface);
                check_places("a hand-out", boxes, sizes[size][0], sizes[size][1]);
                check_apart("a hand-out", boxes);
                check_whole("a hand-out", boxes);
                const ev_box *caution = ev_boxes_find(boxes, "text.foot.caution");
                assert_true(mentions(caution, "Facing the Sun"));
                double wide = caution->rect.width, half = 0.45 * sizes[0][0];
                assert_int_equal(wide > half, site); /* the second sentence */
                assert_string_equal(ev_boxes_find(boxes, "text.foot.date")->text,
                                    "1 December 2026");
                assert_null(ev_boxes_find(boxes, "button.move"));
                cairo_surface_destroy(
                    draw_page(&list->items[i]->sheet, sizes[size][0], sizes[size][1], boxes));
                assert_null(ev_boxes_find(boxes, "text.foot.caution"));
            }
    free(boxes);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(hand_outs_carry_cautions),
    };
    return cmocka_run_group_tests(tests, load_scenes, free_scenes);
}
