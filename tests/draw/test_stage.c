/* The Stage: the section is to scale and in place for every layout, the Front bends by the factor
 * it states, the Detail shows the part where it sits, and its tangents cross no words. */
#include "draw/stage.h"
#include "sheet.h"

#include <math.h>

static bool holds(ev_rect rect, double x, double y)
{
    return x >= rect.x && y >= rect.y && x <= rect.x + rect.width && y <= rect.y + rect.height;
}

static void section_is_to_scale_and_inside_the_stage(void **state)
{
    const scene_list *list = *state;
    static const double sizes[][2] = {{1280.0, 800.0}, {1100.0, 700.0}, {2560.0, 1440.0}};
    for (int i = 0; i < list->count; ++i)
        for (int size = 0; size < 3; ++size) {
            const ev_sheet *sheet = &list->items[i]->sheet;
            const ev_antenna *antenna = sheet->antenna;
            ev_page page = ev_page_layout(sizes[size][0], sizes[size][1]);
            ev_section section = ev_section_fit(&page, sheet);
            assert_true(section.map.x_scale == -section.map.y_scale); /* one scale both ways */
            assert_true(section.map.x_scale == section.scale);
            for (int k = -1; k <= 1; ++k) {
                double x, y;
                ev_vec3 p = ev_main_point(antenna, antenna->offset + k * antenna->radius, 0.0);
                ev_plot_to_page(&section.map, p.z, p.x, &x, &y);
                assert_true(holds(page.stage, x, y));
            }
            for (int f = 0; f < antenna->feed_count; ++f) {
                double x, y;
                ev_vec3 p = antenna->feeds[f].position;
                ev_plot_to_page(&section.map, p.z, p.x, &x, &y);
                assert_true(holds(page.stage, x, y));
                assert_false(holds(page.detail, x, y));
            }
            for (int k = 0; antenna->dual && k < 8; ++k) {
                double x, y;
                ev_vec3 p = ev_sub_rim_point(&antenna->sub, 0.25 * k * EV_PI);
                ev_plot_to_page(&section.map, p.z, p.x, &x, &y);
                assert_true(holds(page.stage, x, y));
            }
            /* The dish is drawn large: at least a third of the Stage's height. */
            assert_true(2.0 * antenna->radius * section.scale > page.stage.height / 3.0);
            double front, unused;
            ev_plot_to_page(&section.map, section.front_z, 0.0, &front, &unused);
            assert_true(front < page.detail.x && front > page.stage.x + 0.5 * page.stage.width);
            assert_true(section.front_z > section.bounds.z1);
        }
}

static void zoom_keeps_the_middle(void **state)
{
    const scene_list *list = *state;
    ev_page page = ev_page_layout(1280.0, 800.0);
    ev_sheet sheet = list->items[0]->sheet;
    ev_section one = ev_section_fit(&page, &sheet);
    sheet.zoom = 3.0;
    sheet.pan_x = 17.0;
    ev_section three = ev_section_fit(&page, &sheet);
    assert_true(fabs(three.scale / one.scale - 3.0) < 1e-12);
    /* The point that stays is the same from either map, but for the pan. */
    double x = (3.0 * one.map.x0 - (three.map.x0 - 17.0)) / 2.0;
    assert_true(holds(page.stage, x, 300.0));
    sheet.zoom = NAN;
    sheet.pan_x = 0.0;
    assert_true(ev_section_fit(&page, &sheet).scale == one.scale);
}

static void front_bends_by_the_factor_it_states(void **state)
{
    const scene_list *list = *state;
    ev_page page = ev_page_layout(1280.0, 800.0);
    double room = ev_front_room(&page);
    int bent = 0;
    for (int i = 0; i < list->count; ++i) {
        ev_sheet sheet = list->items[i]->sheet;
        ev_sheet_scales(&page, &sheet);
        ev_section section = ev_section_fit(&page, &sheet);
        double largest = 0.0;
        for (int k = 0; k < sheet.front_count; ++k)
            if (isfinite(sheet.front[k]))
                largest = fmax(largest, fabs(sheet.front[k]));
        double bend = largest * section.scale * sheet.front_exaggeration;
        assert_true(bend <= room * (1.0 + 1e-9));
        if (!ev_is_even(20.0 * largest, &sheet) && largest > sheet.antenna->wavelength / 50.0) {
            assert_true(bend > 0.35 * room);
            ++bent;
        }
        assert_true(sheet.aperture_range >= largest * (1.0 - 1e-9));
        assert_true(sheet.ledger_range > 0.0);
    }
    assert_true(bent > 0);
}

/* Late is drawn toward the dish, in the late colour; early ahead, in the early one. */
static void late_lags_and_early_leads(void **state)
{
    (void)state;
    static double x[3] = {-0.5, 0.0, 0.5}, error[3] = {0.01, 0.01, 0.01};
    ev_antenna antenna = {.radius = 0.5, .wavelength = 0.02};
    ev_sheet sheet = {.antenna = &antenna,
                      .front = error,
                      .front_x = x,
                      .front_count = 3,
                      .front_exaggeration = 10.0};
    ev_section section = {.map = {.x0 = 0.0, .x_scale = 200.0, .y0 = 150.0, .y_scale = -200.0},
                          .scale = 200.0,
                          .front_z = 1.0};
    for (int sign = -1; sign <= 1; sign += 2) {
        for (int i = 0; i < 3; ++i)
            error[i] = 0.01 * sign;
        cairo_surface_t *surface = cairo_image_surface_create(CAIRO_FORMAT_RGB24, 400, 300);
        cairo_t *cairo = cairo_create(surface);
        ev_pen pen = ev_pen_begin(cairo, false, NULL, "t", (ev_rect){0.0, 0.0, 400.0, 300.0});
        ev_pen_ground(&pen);
        ev_front_draw(&pen, &section, &sheet, 280.0, 1.0);
        ev_pen_end(&pen);
        cairo_destroy(cairo);
        cairo_surface_flush(surface);
        /* 0.01 m times 10 times 200 pixels a metre: 20 pixels from the even line at x = 200. */
        assert_int_equal(pixel_at(surface, 200 - 20 * sign, 200), sign > 0 ? 0x913000 : 0x003586);
        assert_int_equal(pixel_at(surface, 200 + 20 * sign, 200), 0xF6F3EA);
        cairo_surface_destroy(surface);
    }
}

static void detail_shows_the_part_where_it_sits(void **state)
{
    const scene_list *list = *state;
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    cairo_surface_t *surface = cairo_image_surface_create(CAIRO_FORMAT_RGB24, 1280, 800);
    cairo_t *cairo = cairo_create(surface);
    ev_page page = ev_page_layout(1280.0, 800.0);
    for (int i = 0; i < list->count; ++i) {
        const ev_sheet *sheet = &list->items[i]->sheet;
        ev_plot_map map;
        boxes->count = 0;
        ev_draw_detail(cairo, &page, sheet, 300.0, 400.0, boxes, &map);
        double place[2], x, y, out_x, out_y;
        for (int k = 0; k < 2; ++k)
            place[k] =
                ev_part_place(sheet->design, sheet->antenna, sheet->part, 0, sheet->detail_axis[k]);
        ev_plot_to_page(&map, place[0], place[1], &x, &y);
        const ev_box *handle =
            ev_boxes_find(boxes, sheet->part == EV_PART_SUB ? "handle.sub" : "handle.feed");
        assert_non_null(handle);
        assert_true(fabs(handle->rect.x + 0.5 * handle->rect.width - x) < 1e-6);
        assert_true(fabs(handle->rect.y + 0.5 * handle->rect.height - y) < 1e-6);
        /* The axes stand as the part's own do in the section, one scale for both. */
        ev_vec3 out = ev_part_axis_direction(sheet->antenna, sheet->part, 0, EV_AXIS_OUT);
        ev_plot_to_page(&map, place[0] + 1e-3, place[1], &out_x, &out_y);
        double length = hypot(out_x - x, out_y - y);
        assert_true(fabs((out_x - x) / length - out.z) < 1e-6);
        assert_true(fabs((out_y - y) / length + out.x) < 1e-6);
        assert_true(fabs(length * 1e3 * sheet->loss_map->extent - 0.5 * page.detail.width) < 1e-6);
        /* What it says is what the map says. */
        const ev_box *cost = ev_boxes_find(boxes, "text.detail.cost");
        assert_non_null(cost);
        double loss = ev_loss_map_at(sheet->loss_map, place[0], place[1]);
        assert_true(fabs(read_drawn(cost->text) + loss) <= 0.00501);
    }
    cairo_destroy(cairo);
    cairo_surface_destroy(surface);
    free(boxes);
}

static void detail_without_a_map_shows_no_rings_and_no_cost(void **state)
{
    const scene_list *list = *state;
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    ev_sheet sheet = list->items[0]->sheet;
    ev_loss_map other = *sheet.loss_map;
    other.axis[1] = EV_AXIS_ACROSS; /* of other axes: of no use here */
    const ev_loss_map *const maps[] = {NULL, &other};
    for (int i = 0; i < 2; ++i) {
        sheet.loss_map = maps[i];
        cairo_surface_destroy(draw_page(&sheet, 1280.0, 800.0, boxes));
        assert_null(ev_boxes_find(boxes, "text.detail.cost"));
        assert_null(ev_boxes_find(boxes, "text.detail.ring.0"));
        assert_non_null(ev_boxes_find(boxes, "text.detail.place"));
    }
    free(boxes);
}

/* Pixels of every caption are the same with the tangents passing as without any. */
static void tangents_cross_no_words(void **state)
{
    const scene_list *list = *state;
    ev_page page = ev_page_layout(1280.0, 800.0);
    ev_sheet sheet = list->items[0]->sheet;
    double middle_x = page.detail.x + 0.5 * page.detail.width;
    double middle_y = page.detail.y + 0.5 * page.detail.height;
    const double from[][2] = {{middle_x, middle_y}, {500.0, 655.0}, {120.0, 650.0}, {400.0, 640.0}};
    cairo_surface_t *surfaces[4];
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    for (int i = 0; i < 4; ++i) {
        surfaces[i] = cairo_image_surface_create(CAIRO_FORMAT_RGB24, 1280, 800);
        cairo_t *cairo = cairo_create(surfaces[i]);
        cairo_set_source_rgb(cairo, 0.9, 0.9, 0.9);
        cairo_paint(cairo);
        ev_plot_map map;
        boxes->count = 0;
        ev_draw_detail(cairo, &page, &sheet, from[i][0], from[i][1], boxes, &map);
        cairo_destroy(cairo);
        cairo_surface_flush(surfaces[i]);
    }
    static const char *const names[] = {"text.detail.place", "text.detail.cost"};
    for (int i = 1; i < 4; ++i)
        for (int k = 0; k < 2; ++k) {
            const ev_box *box = ev_boxes_find(boxes, names[k]);
            assert_non_null(box);
            for (int y = (int)box->rect.y; y < (int)(box->rect.y + box->rect.height); ++y)
                for (int x = (int)box->rect.x; x < (int)(box->rect.x + box->rect.width); ++x)
                    if (pixel_at(surfaces[i], x, y) != pixel_at(surfaces[0], x, y))
                        fail_msg("a tangent from %g %g crosses %s at %d %d", from[i][0], from[i][1],
                                 names[k], x, y);
        }
    for (int i = 0; i < 4; ++i)
        cairo_surface_destroy(surfaces[i]);
    free(boxes);
}

static void pointing_at_a_row_fades_the_rest(void **state)
{
    (void)state;
    ev_sheet sheet = {.dark = false};
    assert_true(ev_emphasis_of(&sheet).fate[EV_FATE_PAST_MAIN] == 1.0);
    strcpy(sheet.pointed, "ledger.past_main");
    ev_emphasis e = ev_emphasis_of(&sheet);
    assert_true(e.fate[EV_FATE_PAST_MAIN] == 1.0 && e.fate[EV_FATE_APERTURE] == EV_FADED &&
                e.front == EV_FADED && e.words[0]);
    strcpy(sheet.pointed, "ledger.phase");
    e = ev_emphasis_of(&sheet);
    assert_true(e.front == 1.0 && e.fate[EV_FATE_APERTURE] == EV_FADED);
    strcpy(sheet.pointed, "watts.shadow");
    e = ev_emphasis_of(&sheet);
    assert_true(e.fate[EV_FATE_SHADOW_STRUTS] == 1.0 && e.fate[EV_FATE_PAST_SUB] == EV_FADED);
    strcpy(sheet.pointed, "ledger.ohmic"); /* nothing on the Stage is about it */
    e = ev_emphasis_of(&sheet);
    assert_true(e.front == 1.0 && e.rest == 1.0 && !e.words[0]);
}

/* The ray stands square to the mean of the Front, drawn as much too steep; nothing where the beam
 * is where it is wanted. */
static void beam_off_its_axis_is_marked(void **state)
{
    const scene_list *list = *state;
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    int off_count = 0, on_count = 0;
    for (int i = 0; i < list->count; ++i) {
        const ev_sheet *sheet = &list->items[i]->sheet;
        double off[2];
        bool is_off = ev_peak_is_off(sheet, off);
        cairo_surface_destroy(draw_page(sheet, 1280.0, 800.0, boxes));
        const ev_box *box = ev_boxes_find(boxes, "text.stage.peak");
        assert_int_equal(box != NULL, is_off);
        *(is_off ? &off_count : &on_count) += 1;
        if (is_off) {
            assert_memory_equal(box->text, "beam ", 5);
            double largest = fmax(fabs(off[0]), fabs(off[1])) * 180.0 / EV_PI;
            assert_true(fabs(read_drawn(box->text + 5) - largest) <= 0.05 * largest);
            const char *word = off[0] > 0.0 ? "up" : "down";
            assert_int_equal(strstr(box->text, word) != NULL, fabs(off[0]) > 0.1 * fabs(off[1]));
        }
    }
    assert_true(off_count > 1 && on_count > 1);
    free(boxes);
}

static void beam_ray_leans_as_the_front_does(void **state)
{
    const scene_list *list = *state;
    ev_sheet sheet = list->items[0]->sheet;
    ev_budget *budget = malloc(sizeof *budget);
    *budget = *sheet.budget;
    sheet.budget = budget;
    sheet.front_exaggeration = 10.0;
    ev_section section = {.map = {.x0 = 100.0, .x_scale = 1.0, .y0 = 100.0, .y_scale = -1.0},
                          .scale = 1.0};
    for (int sign = -1; sign <= 1; ++sign) {
        budget->feeds[0].wanted = (ev_vec3){0.0, 0.0, 1.0};
        budget->feeds[0].peak = (ev_vec3){sin(0.03 * sign), 0.0, cos(0.03 * sign)};
        cairo_surface_t *surface = cairo_image_surface_create(CAIRO_FORMAT_RGB24, 400, 200);
        cairo_t *cairo = cairo_create(surface);
        ev_pen pen = ev_pen_begin(cairo, false, NULL, "t", (ev_rect){0.0, 0.0, 400.0, 200.0});
        ev_pen_ground(&pen);
        ev_peak_draw(&pen, &section, &sheet, 1.0);
        ev_pen_end(&pen);
        cairo_destroy(cairo);
        cairo_surface_flush(surface);
        int y = 100 - (int)lround(sheet.antenna->offset) - (int)lround(50.0 * 0.3 * sign);
        unsigned darkest = 0xFFFFFF;
        for (int dy = -1; dy <= 1; ++dy)
            darkest =
                pixel_at(surface, 150, y + dy) < darkest ? pixel_at(surface, 150, y + dy) : darkest;
        assert_int_equal(darkest < 0x808080, sign != 0);
        cairo_surface_destroy(surface);
    }
    free(budget);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(section_is_to_scale_and_inside_the_stage),
        cmocka_unit_test(zoom_keeps_the_middle),
        cmocka_unit_test(front_bends_by_the_factor_it_states),
        cmocka_unit_test(late_lags_and_early_leads),
        cmocka_unit_test(detail_shows_the_part_where_it_sits),
        cmocka_unit_test(detail_without_a_map_shows_no_rings_and_no_cost),
        cmocka_unit_test(tangents_cross_no_words),
        cmocka_unit_test(pointing_at_a_row_fades_the_rest),
        cmocka_unit_test(beam_off_its_axis_is_marked),
        cmocka_unit_test(beam_ray_leans_as_the_front_does),
    };
    return cmocka_run_group_tests(tests, load_scenes, free_scenes);
}
