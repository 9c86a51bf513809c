/* The gallery: one card a scene, all on the page, words apart, drawings not blank. */
#include "sheet.h"

static void cards_tile_the_page(void **state)
{
    const scene_list *list = *state;
    static const double sizes[][2] = {{1280.0, 800.0}, {1100.0, 700.0}, {2560.0, 1440.0}};
    ev_gallery_item items[SCENE_CAPACITY] = {0};
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    for (int i = 0; i < list->count; ++i) {
        const ev_sheet *sheet = &list->items[i]->sheet;
        items[i] = (ev_gallery_item){.design = sheet->design,
                                     .antenna = sheet->antenna,
                                     .rays = sheet->rays,
                                     .ray_count = 30};
        snprintf(items[i].comment, sizeof items[i].comment,
                 "Whose problem this is takes a sentence or two to say, and more than one line, "
                 "and in the end there may not be room for all of it on the card.");
    }
    for (int size = 0; size < 3; ++size)
        for (int count = 0; count <= list->count; ++count) {
            double width = sizes[size][0], height = sizes[size][1];
            cairo_surface_t *surface =
                cairo_image_surface_create(CAIRO_FORMAT_RGB24, (int)width, (int)height);
            cairo_t *cairo = cairo_create(surface);
            boxes->count = 0;
            ev_draw_gallery(cairo, width, height, count % 2, items, count, "scene.1", boxes);
            cairo_destroy(cairo);
            cairo_surface_flush(surface);
            for (int i = 0; i < count; ++i) {
                char name[32];
                snprintf(name, sizeof name, "scene.%d", i);
                const ev_box *card = ev_boxes_find(boxes, name);
                assert_non_null(card);
                assert_true(card->rect.x >= 0.0 && card->rect.y >= 80.0);
                assert_true(card->rect.x + card->rect.width <= width);
                assert_true(card->rect.y + card->rect.height <= height);
                unsigned ground = pixel_at(surface, 2, 2);
                int inked = 0;
                for (int y = (int)card->rect.y; y < (int)(card->rect.y + card->rect.height); ++y)
                    for (int x = (int)card->rect.x; x < (int)(card->rect.x + card->rect.width); ++x)
                        inked += pixel_at(surface, x, y) != ground;
                assert_in_range(inked, 500, 300000);
                for (int k = 0; k < boxes->count; ++k) {
                    const ev_box *text = &boxes->items[k];
                    if (text->kind != EV_BOX_TEXT || strncmp(text->name, "text.scene.", 11) != 0 ||
                        atoi(text->name + 11) != i)
                        continue;
                    assert_true(text->rect.y > card->rect.y);
                    assert_true(text->rect.x + text->rect.width <=
                                card->rect.x + card->rect.width + 1.5);
                    assert_true(text->rect.y + text->rect.height <=
                                card->rect.y + card->rect.height + 1.0);
                }
            }
            cairo_surface_destroy(surface);
        }
    free(boxes);
}

int main(void)
{
    const struct CMUnitTest tests[] = {cmocka_unit_test(cards_tile_the_page)};
    return cmocka_run_group_tests(tests, load_scenes, free_scenes);
}
