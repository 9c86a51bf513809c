/* Sheets that nobody wants to see: not-a-number everywhere, nothing at all, far too much of
 * everything. A page is drawn all the same, its text stays where it belongs, and nothing crashes.
 */
#include "sheet.h"

#include <math.h>
#include <pthread.h>

static void check_drawn(const ev_sheet *sheet, bool apart)
{
    static const double sizes[][2] = {{1280.0, 800.0}, {1100.0, 700.0}, {1366.0, 768.0}};
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    for (int size = 0; size < 3; ++size) {
        double width = sizes[size][0], height = sizes[size][1];
        cairo_surface_destroy(draw_page(sheet, width, height, boxes));
        assert_in_range(boxes->count, 60, EV_BOX_CAPACITY - 1);
        for (int i = 0; i < boxes->count; ++i) {
            const ev_box *a = &boxes->items[i];
            if (a->kind != EV_BOX_TEXT)
                continue;
            double right = a->within.x + a->within.width + 0.75;
            if (!(a->rect.x >= a->within.x - 0.75) || !(a->rect.x + a->rect.width <= right))
                fail_msg("%s \"%s\" is not inside its place", a->name, a->text);
            for (int k = 0; apart && k < i; ++k) {
                const ev_box *b = &boxes->items[k];
                if (b->kind == EV_BOX_TEXT && a->rect.x + 1.0 < b->rect.x + b->rect.width &&
                    b->rect.x + 1.0 < a->rect.x + a->rect.width &&
                    a->rect.y + 1.0 < b->rect.y + b->rect.height &&
                    b->rect.y + 1.0 < a->rect.y + a->rect.height)
                    fail_msg("%s \"%s\" lies on %s \"%s\"", a->name, a->text, b->name, b->text);
            }
        }
    }
    free(boxes);
}

static void empty_sheet_is_drawn(void **state)
{
    drawn_scene *drawn = *state;
    ev_sheet sheet = drawn->sheet;
    sheet.kept = NULL;
    sheet.loss_map = NULL;
    sheet.rays = NULL;
    sheet.ray_count = 0;
    sheet.aperture = NULL;
    sheet.front = sheet.front_x = NULL;
    sheet.front_count = 0;
    sheet.action_count = 0;
    sheet.notice[0] = 0;
    check_drawn(&sheet, true);
    sheet.field_count = 0;
    sheet.detail = false;
    ev_page page = ev_page_layout(1280.0, 800.0);
    ev_sheet_scales(&page, &sheet);
    assert_true(sheet.front_exaggeration > 0.0 && isfinite(sheet.front_exaggeration));
}

static void nan_is_drawn_as_a_dash(void **state)
{
    drawn_scene *drawn = *state;
    ev_sheet sheet = drawn->sheet;
    ev_budget *budget = malloc(sizeof *budget);
    ev_loss_map *map = malloc(sizeof *map);
    double *front = calloc(EV_STUDY_FRONT_COUNT, sizeof *front);
    float *aperture = calloc(EV_APERTURE_SIDE * EV_APERTURE_SIDE, sizeof *aperture);
    *budget = *sheet.budget;
    *map = *sheet.loss_map;
    ev_efficiency *e = &budget->feeds[0].efficiency;
    e->phase = e->taper = NAN;
    e->blockage = 0.0;
    budget->feeds[0].gain_on_axis_dbi = NAN;
    budget->feeds[0].path_error.rms_area = NAN;
    for (int r = 0; r < EV_LOSS_MAP_SIDE; ++r)
        for (int c = 0; c < EV_LOSS_MAP_SIDE; ++c)
            map->loss_db[r][c] = NAN;
    for (int i = 0; i < EV_STUDY_FRONT_COUNT; ++i)
        front[i] = NAN;
    for (int i = 0; i < EV_APERTURE_SIDE * EV_APERTURE_SIDE; ++i)
        aperture[i] = NAN;
    sheet.budget = budget;
    sheet.loss_map = map;
    sheet.front = front;
    sheet.aperture = aperture;
    sheet.zoom = NAN;
    sheet.fields[0].value = NAN;
    sheet.fields[1].step = 0.0;
    sheet.fields[2].value = 1e300;
    sheet.fields[3].nominal = INFINITY;
    check_drawn(&sheet, true);
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    cairo_surface_destroy(draw_page(&sheet, 1280.0, 800.0, boxes));
    assert_string_equal(ev_boxes_find(boxes, "text.ledger.gain")->text, "\u2013");
    free(boxes);
    free(budget);
    free(map);
    free(front);
    free(aperture);
}

static void fill_curve(ev_beam_curve *beam, ev_gain_curve *gain, double value)
{
    for (int i = 0; i < EV_BEAM_CURVE_SAMPLES; ++i)
        beam->co_dbi[i] = beam->cross_dbi[i] = value;
    for (int i = 0; i < EV_GAIN_CURVE_SAMPLES; ++i)
        gain->loss_db[i] = value;
    beam->peak_dbi = beam->peak_angle = value;
}

/* Curves of nonsense: axes all the same, and no coordinate that Cairo cannot hold. */
static void nonsense_curves_are_drawn(void **state)
{
    drawn_scene *drawn = *state;
    static const double values[] = {NAN, INFINITY, -INFINITY, 1e300, -1e300, 0.0};
    static const double spans[] = {0.0, NAN, 1e-9, 1.5};
    ev_beam_curve *beam = malloc(sizeof *beam);
    ev_gain_curve *gain = malloc(sizeof *gain);
    for (size_t i = 0; i < sizeof values / sizeof values[0]; ++i)
        for (size_t k = 0; k < sizeof spans / sizeof spans[0]; ++k) {
            ev_sheet sheet = drawn->sheet;
            *beam = drawn->beams[0];
            *gain = drawn->gain;
            fill_curve(beam, gain, values[i]);
            beam->span = spans[k];
            sheet.beams[0] = sheet.kept_beam = beam;
            sheet.gain_curve = gain;
            sheet.plate = k % 2 ? EV_PLATE_CUT : EV_PLATE_BEAM;
            check_drawn(&sheet, true);
            gain->place[0] = gain->place[EV_GAIN_CURVE_SAMPLES - 1] = values[i];
            sheet.plate = EV_PLATE_CUT;
            check_drawn(&sheet, true);
            ev_page page = ev_page_layout(1280.0, 800.0);
            ev_sheet_scales(&page, &sheet);
            assert_true(isfinite(sheet.beam_range) && sheet.beam_range > 0.0);
            assert_true(isfinite(sheet.cut_range) && sheet.cut_range > 0.0);
        }
    free(beam);
    free(gain);
}

static void too_much_of_everything_fits(void **state)
{
    drawn_scene *drawn = *state;
    ev_sheet sheet = drawn->sheet;
    ev_design *design = malloc(sizeof *design);
    *design = *sheet.design;
    memset(design->title, 'W', sizeof design->title - 1);
    design->title[sizeof design->title - 1] = 0;
    sheet.design = design;
    memset(sheet.notice, 'M', sizeof sheet.notice - 1);
    for (int i = 0; i < EV_FIELD_CAPACITY; ++i) {
        memset(sheet.fields[i].label, 'W', sizeof sheet.fields[i].label - 1);
        snprintf(sheet.fields[i].digits, sizeof sheet.fields[i].digits, "\u2212123456789.12345");
        snprintf(sheet.fields[i].unit, sizeof sheet.fields[i].unit, "MHz");
    }
    sheet.action_count = EV_ACTION_CAPACITY;
    for (int i = 0; i < EV_ACTION_CAPACITY; ++i)
        sheet.actions[i] = (ev_action){"save", "Action", 5, true};
    check_drawn(&sheet, true);
    free(design);
}

static void far_away_and_close_up_are_drawn(void **state)
{
    drawn_scene *drawn = *state;
    static const double views[][3] = {{50.0, 0.0, 0.0},   {0.05, 0.0, 0.0}, {1.0, 5000.0, 0.0},
                                      {8.0, -900.0, 2e3}, {1.0, 1e7, -1e7}, {1e6, 0.0, 0.0}};
    for (size_t i = 0; i < sizeof views / sizeof views[0]; ++i) {
        ev_sheet sheet = drawn->sheet;
        sheet.zoom = views[i][0];
        sheet.pan_x = views[i][1];
        sheet.pan_y = views[i][2];
        check_drawn(&sheet, false);
    }
}

static void editing_shows_what_is_typed_and_the_complaint(void **state)
{
    drawn_scene *drawn = *state;
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    ev_page page = ev_page_layout(1100.0, 700.0);
    for (int i = 0; i < EV_FIELD_CAPACITY; ++i) {
        ev_sheet sheet = drawn->sheet;
        ev_field *field = &sheet.fields[i];
        field->editing = true;
        snprintf(field->edit_text, sizeof field->edit_text, "3/8 furlongs and some");
        field->edit_anchor = 4;
        field->edit_caret = (int)strlen(field->edit_text);
        snprintf(field->complaint, sizeof field->complaint,
                 "no such unit of length: write m, mm, cm, km, in or ft");
        check_drawn(&sheet, true);
        cairo_surface_destroy(draw_page(&sheet, 1100.0, 700.0, boxes));
        char name[64];
        snprintf(name, sizeof name, "text.field.field.%d.edit", i);
        assert_string_equal(ev_boxes_find(boxes, name)->text, field->edit_text);
        const ev_box *complaint = ev_boxes_find(boxes, "text.complaint");
        assert_memory_equal(complaint->text, field->complaint, sizeof complaint->text - 1);
        const ev_box *box = ev_boxes_find(boxes, name);
        assert_int_equal(ev_field_byte_at(&page, &sheet, i, box->rect.x - 1000.0), 0);
        assert_int_equal(ev_field_byte_at(&page, &sheet, i, box->rect.x + 1000.0),
                         (int)strlen(field->edit_text));
    }
    /* A tick of the tape is a step of the value, and the tape goes the way it is dragged. */
    const ev_field *field = &drawn->sheet.fields[0];
    assert_true(fabs(ev_field_drag(field, -6.0) - field->step) < 1e-15);
    free(boxes);
}

static void space_notes_leave_the_stage_alone(void **state)
{
    drawn_scene *drawn = *state;
    ev_sheet sheet = drawn->sheet;
    sheet.stage = EV_STAGE_SPACE;
    sheet.front_exaggeration = 60.0;
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    cairo_surface_t *surface = cairo_image_surface_create(CAIRO_FORMAT_ARGB32, 1280, 800);
    cairo_t *cairo = cairo_create(surface);
    ev_page page = ev_page_layout(1280.0, 800.0);
    ev_draw_page(cairo, &page, &sheet, boxes);
    cairo_destroy(cairo);
    cairo_surface_flush(surface);
    const unsigned char *data = cairo_image_surface_get_data(surface);
    size_t at = (size_t)(300 * cairo_image_surface_get_stride(surface) + 4 * 500);
    assert_int_equal(data[at + 3], 0); /* the 3D picture shows through */
    const char *const names[] = {"text.stage.rays", "text.stage.front", "tab.section",
                                 "plot.space"};
    for (int i = 0; i < 4; ++i)
        assert_non_null(ev_boxes_find(boxes, names[i]));
    assert_null(ev_boxes_find(boxes, "plot.section"));
    cairo_surface_destroy(surface);
    free(boxes);
}

static void *draw_in_thread(void *data)
{
    const ev_sheet *sheet = data;
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    cairo_surface_t *surface = draw_page(sheet, 1280.0, 800.0, boxes);
    free(boxes);
    return surface; /* the thread's text cache goes with the thread */
}

static void threads_draw_the_same_page(void **state)
{
    drawn_scene *drawn = *state;
    pthread_t threads[2];
    void *surfaces[2];
    for (int i = 0; i < 2; ++i)
        assert_int_equal(pthread_create(&threads[i], NULL, draw_in_thread, &drawn->sheet), 0);
    for (int i = 0; i < 2; ++i)
        assert_int_equal(pthread_join(threads[i], &surfaces[i]), 0);
    size_t size = (size_t)(cairo_image_surface_get_stride(surfaces[0]) * 800);
    assert_memory_equal(cairo_image_surface_get_data(surfaces[0]),
                        cairo_image_surface_get_data(surfaces[1]), size);
    for (int i = 0; i < 2; ++i)
        cairo_surface_destroy(surfaces[i]);
}

static int begin(void **state)
{
    *state = load_scene("ridge_station.yaml");
    return 0;
}

static int end(void **state)
{
    free_scene(*state);
    ev_draw_release();
    return 0;
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(empty_sheet_is_drawn),
        cmocka_unit_test(nan_is_drawn_as_a_dash),
        cmocka_unit_test(nonsense_curves_are_drawn),
        cmocka_unit_test(too_much_of_everything_fits),
        cmocka_unit_test(far_away_and_close_up_are_drawn),
        cmocka_unit_test(editing_shows_what_is_typed_and_the_complaint),
        cmocka_unit_test(space_notes_leave_the_stage_alone),
        cmocka_unit_test(threads_draw_the_same_page),
    };
    return cmocka_run_group_tests(tests, begin, end);
}
