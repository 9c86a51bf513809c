/* The Beam and Cut plates: what is drawn is where the numbers are, the limit stands about the beam,
 * and a plate without its numbers says so. */
#include "sheet.h"

#include "draw/plate.h"
#include "draw/stage.h"

#include <math.h>

static unsigned pack(ev_colour colour)
{
    return (unsigned)lround(255.0 * colour.r) << 16 | (unsigned)lround(255.0 * colour.g) << 8 |
           (unsigned)lround(255.0 * colour.b);
}

static double distance(unsigned a, unsigned b)
{
    double sum = 0.0;
    for (int shift = 0; shift < 24; shift += 8) {
        double d = (double)(a >> shift & 0xFF) - (double)(b >> shift & 0xFF);
        sum += d * d;
    }
    return sqrt(sum);
}

/* The nearest any pixel within `reach` of a place comes to a colour. */
static double nearest(cairo_surface_t *surface, double x, double y, int reach, ev_colour colour)
{
    double least = INFINITY;
    for (int dy = -reach; dy <= reach; ++dy)
        for (int dx = -reach; dx <= reach; ++dx)
            least =
                fmin(least, distance(pixel_at(surface, (int)x + dx, (int)y + dy), pack(colour)));
    return least;
}

static bool holds(ev_rect rect, double x, double y)
{
    return x > rect.x + 3.0 && y > rect.y + 3.0 && x < rect.x + rect.width - 3.0 &&
           y < rect.y + rect.height - 3.0;
}

/* A curve of our own: a steep notch and a step, so that a curve drawn elsewhere cannot pass. */
static ev_beam_curve make_curve(const ev_sheet *sheet)
{
    ev_beam_curve curve = *sheet->beams[sheet->feed];
    curve.span = 0.05;
    curve.peak_angle = 0.012;
    curve.peak_dbi = 40.0;
    for (int i = 0; i < EV_BEAM_CURVE_SAMPLES; ++i) {
        double t = curve.angle[i] = curve.span * (2.0 * i / (EV_BEAM_CURVE_SAMPLES - 1.0) - 1.0);
        curve.co_dbi[i] = 40.0 - 9e3 * (t - 0.012) * (t - 0.012);
        curve.cross_dbi[i] = 15.0 + 100.0 * t;
    }
    return curve;
}

static void curves_are_where_their_numbers_are(void **state)
{
    const scene_list *list = *state;
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    for (int dark = 0; dark < 2; ++dark) {
        ev_sheet sheet = list->items[0]->sheet;
        ev_beam_curve curve = make_curve(&sheet);
        sheet.dark = dark;
        sheet.plate = EV_PLATE_BEAM;
        sheet.beams[0] = &curve;
        sheet.kept_beam = NULL;
        sheet.limit = NULL;
        ev_page page = ev_page_layout(1280.0, 800.0);
        ev_plot_map map = ev_beam_plot(&page, &sheet);
        cairo_surface_t *surface = draw_page(&sheet, 1280.0, 800.0, boxes);
        ev_rect plot = ev_boxes_find(boxes, "plate.beam")->rect;
        const ev_theme *theme = ev_theme_get(dark);
        int seen = 0;
        for (int i = 4; i < EV_BEAM_CURVE_SAMPLES - 4; i += 12) {
            double x, y, cx, cy;
            ev_plot_to_page(&map, curve.angle[i], curve.co_dbi[i] - 40.0, &x, &y);
            ev_plot_to_page(&map, curve.angle[i], curve.cross_dbi[i] - 40.0, &cx, &cy);
            assert_true(fabs((x - plot.x) - plot.width * (curve.angle[i] + 0.05) / 0.1) < 1e-6);
            if (holds(plot, x, y))
                assert_true(nearest(surface, x, y, 1, theme->ink) < 60.0);
            if (holds(plot, cx, cy) && fabs(cy - y) > 6.0)
                assert_true(nearest(surface, cx, cy, 1, theme->third) < 90.0);
            seen += holds(plot, x, y);
        }
        assert_true(seen > 8);
        cairo_surface_destroy(surface);
    }
    free(boxes);
}

/* Numbers at the axes say what the map has there. */
static void axes_say_what_the_map_has(void **state)
{
    const scene_list *list = *state;
    static const double sizes[][2] = {{1280.0, 800.0}, {1100.0, 700.0}, {2560.0, 1440.0}};
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    for (int i = 0; i < list->count; ++i)
        for (int size = 0; size < 3; ++size) {
            ev_sheet sheet = list->items[i]->sheet;
            sheet.plate = EV_PLATE_BEAM;
            ev_page page = ev_page_layout(sizes[size][0], sizes[size][1]);
            ev_sheet_scales(&page, &sheet);
            ev_plot_map map = ev_beam_plot(&page, &sheet);
            cairo_surface_destroy(draw_page(&sheet, sizes[size][0], sizes[size][1], boxes));
            ev_rect plot = ev_boxes_find(boxes, "plate.beam")->rect;
            assert_true(fabs(map.y0 - map.y_scale * sheet.beam_range - plot.y - plot.height) <
                        1e-6);
            int levels = 0, angles = 0;
            for (int k = 0; k < boxes->count; ++k) {
                const ev_box *box = &boxes->items[k];
                double value = read_drawn(box->text), x, y;
                double middle_x = box->rect.x + 0.5 * box->rect.width;
                double middle_y = box->rect.y + 0.5 * box->rect.height;
                bool level = strncmp(box->name, "text.beam.level.", 16) == 0;
                bool angle = strncmp(box->name, "text.beam.angle.", 16) == 0;
                ev_plot_to_page(&map, angle ? value * EV_PI / 180.0 : 0.0, level ? value : 0.0, &x,
                                &y);
                if (level)
                    assert_true(fabs(y - middle_y) < 2.0);
                if (angle)
                    assert_true(fabs(x - middle_x) < 2.0);
                levels += level;
                angles += angle;
            }
            assert_in_range(levels, 3, 7);
            assert_in_range(angles, 3, 9);
        }
    free(boxes);
}

static void limit_stands_about_the_beam(void **state)
{
    const scene_list *list = *state;
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    ev_sheet sheet = list->items[0]->sheet;
    ev_beam_curve curve = make_curve(&sheet);
    double angles[] = {0.005, 0.06}, levels[] = {24.0, 18.0};
    ev_limit limit;
    assert_true(ev_limit_table(angles, levels, 2, &limit));
    sheet.plate = EV_PLATE_BEAM;
    sheet.beams[0] = &curve;
    sheet.kept_beam = NULL;
    sheet.limit = &limit;
    ev_page page = ev_page_layout(1280.0, 800.0);
    ev_plot_map map = ev_beam_plot(&page, &sheet);
    cairo_surface_t *surface = draw_page(&sheet, 1280.0, 800.0, boxes);
    for (int side = -1; side <= 1; side += 2)
        for (double off = 0.02; off < 0.036; off += 0.005) {
            double x, y;
            double level = ev_limit_at(&limit, off) - 40.0;
            ev_plot_to_page(&map, 0.012 + side * off, level, &x, &y);
            assert_true(nearest(surface, x, y, 1, ev_theme_get(false)->past_main) < 105.0);
        }
    assert_string_equal(ev_boxes_find(boxes, "text.beam.limit")->text, "limit");
    cairo_surface_destroy(surface);
    const ev_limit known[] = {ev_limit_s465(75.0), ev_limit_s580(75.0)};
    static const char *const words[] = {"limit S.465", "limit S.580"};
    for (int i = 0; i < 2; ++i) {
        sheet.limit = &known[i];
        cairo_surface_destroy(draw_page(&sheet, 1280.0, 800.0, boxes));
        assert_string_equal(ev_boxes_find(boxes, "text.beam.limit")->text, words[i]);
        /* Deep enough to see what the limit asks, of the largest dishes as well. */
        for (double gain = 40.0; gain < 91.0; gain += 10.0) {
            curve.peak_dbi = gain;
            double asked = ev_limit_at(&known[i], ev_limit_start(&known[i])) - gain;
            assert_true(asked > -ev_beam_range(&page, &sheet) + 10.0);
        }
        curve.peak_dbi = 40.0;
    }
    sheet.limit = NULL;
    cairo_surface_destroy(draw_page(&sheet, 1280.0, 800.0, boxes));
    assert_null(ev_boxes_find(boxes, "text.beam.limit"));
    free(boxes);
}

static void plates_without_numbers_say_so(void **state)
{
    const scene_list *list = *state;
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    for (int i = 0; i < list->count; ++i) {
        ev_sheet sheet = list->items[i]->sheet;
        for (int f = 0; f < EV_FEED_CAPACITY; ++f)
            sheet.beams[f] = NULL;
        sheet.kept_beam = NULL;
        sheet.gain_curve = NULL;
        sheet.plate = EV_PLATE_BEAM;
        cairo_surface_destroy(draw_page(&sheet, 1280.0, 800.0, boxes));
        assert_non_null(ev_boxes_find(boxes, "text.beam.computing"));
        assert_non_null(ev_boxes_find(boxes, "text.beam.level.0"));
        sheet.plate = EV_PLATE_CUT;
        cairo_surface_destroy(draw_page(&sheet, 1280.0, 800.0, boxes));
        assert_non_null(ev_boxes_find(boxes, "text.cut.computing"));
        ev_gain_curve other = *list->items[i]->sheet.gain_curve; /* of the other part */
        other.part = other.part == EV_PART_SUB ? EV_PART_FEED : EV_PART_SUB;
        sheet.gain_curve = &other;
        cairo_surface_destroy(draw_page(&sheet, 1280.0, 800.0, boxes));
        assert_non_null(ev_boxes_find(boxes, "text.cut.computing"));
        assert_null(ev_boxes_find(boxes, "text.cut.part"));
    }
    free(boxes);
}

static void stale_plates_wear_a_hairline(void **state)
{
    const scene_list *list = *state;
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    ev_page page = ev_page_layout(1280.0, 800.0);
    int x = (int)page.plates[1].x + 100, y = (int)page.plates[1].y + 1;
    for (int plate = EV_PLATE_BEAM; plate <= EV_PLATE_CUT; ++plate)
        for (int stale = 0; stale < 2; ++stale) {
            ev_sheet sheet = list->items[0]->sheet;
            sheet.plate = (ev_plate)plate;
            sheet.beam_stale = stale && plate == EV_PLATE_BEAM;
            sheet.cut_stale = stale && plate == EV_PLATE_CUT;
            cairo_surface_t *surface = draw_page(&sheet, 1280.0, 800.0, boxes);
            assert_int_equal(pixel_at(surface, x, y) == 0xFFD23F, stale);
            cairo_surface_destroy(surface);
        }
    free(boxes);
}

static void cut_marks_the_part_on_its_curve(void **state)
{
    const scene_list *list = *state;
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    ev_page page = ev_page_layout(1280.0, 800.0);
    for (int i = 0; i < list->count; ++i) {
        ev_sheet sheet = list->items[i]->sheet;
        const ev_gain_curve *curve = sheet.gain_curve;
        sheet.plate = EV_PLATE_CUT;
        ev_sheet_scales(&page, &sheet);
        ev_plot_map map = ev_cut_plot(&page, &sheet);
        cairo_surface_t *surface = draw_page(&sheet, 1280.0, 800.0, boxes);
        ev_rect plot = ev_boxes_find(boxes, "plate.cut")->rect;
        int k = 0;
        while (k + 2 < EV_GAIN_CURVE_SAMPLES && curve->place[k + 1] < curve->now)
            ++k;
        double share = (curve->now - curve->place[k]) / (curve->place[k + 1] - curve->place[k]);
        double loss = curve->loss_db[k] + share * (curve->loss_db[k + 1] - curve->loss_db[k]);
        double x, y;
        ev_plot_to_page(&map, curve->now, -loss, &x, &y);
        assert_true(holds((ev_rect){plot.x, plot.y - 4.0, plot.width, plot.height + 4.0}, x, y));
        assert_int_equal(pixel_at(surface, (int)x, (int)y), 0xFFD23F);
        char expected[64], digits[32];
        ev_format_number(digits, sizeof digits, 1e3 * curve->now, 1, false);
        snprintf(expected, sizeof expected, "%s mm: ", digits);
        const ev_box *words = ev_boxes_find(boxes, "text.cut.part");
        assert_memory_equal(words->text, expected, strlen(expected));
        assert_true(fabs(read_drawn(words->text + strlen(expected)) + loss) <= 0.00501);
        const ev_box *line = ev_boxes_find(boxes, "text.cut.loss.1");
        if (line) {
            ev_plot_to_page(&map, 0.0, read_drawn(line->text), &x, &y);
            assert_true(fabs(line->rect.y + 0.5 * line->rect.height - y) < 2.0);
        }
        cairo_surface_destroy(surface);
    }
    free(boxes);
}

/* Late above the zero line and early below it, each in its colour, at the path error's own place.
 */
static void cut_draws_the_path_error(void **state)
{
    const scene_list *list = *state;
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    int late = 0, early = 0;
    for (int i = 0; i < list->count; ++i) {
        ev_sheet sheet = list->items[i]->sheet;
        const ev_antenna *antenna = sheet.antenna;
        sheet.plate = EV_PLATE_CUT;
        sheet.aperture_range = ev_aperture_range(&sheet);
        cairo_surface_t *surface = draw_page(&sheet, 1280.0, 800.0, boxes);
        ev_rect plot = ev_boxes_find(boxes, "plate.cut.path")->rect;
        for (int k = 4; k + 4 < sheet.front_count; k += 9) {
            double error = sheet.front[k] / sheet.aperture_range;
            if (!(fabs(error) > 0.2) || fabs(error) > 0.95)
                continue;
            double along = (sheet.front_x[k] - antenna->offset) / antenna->radius;
            double x = plot.x + 0.5 * plot.width * (1.0 + along);
            double y = plot.y + 0.5 * plot.height * (1.0 - error);
            const ev_theme *theme = ev_theme_get(false);
            assert_true(nearest(surface, x, y, 2, error > 0.0 ? theme->late : theme->early) < 40.0);
            ++*(error > 0.0 ? &late : &early);
        }
        cairo_surface_destroy(surface);
    }
    assert_true(late > 5 && early > 5);
    free(boxes);
}

static void tabs_choose_the_plate(void **state)
{
    const scene_list *list = *state;
    static const char *const plots[] = {"plate.aperture", "plate.beam", "plate.cut"};
    ev_boxes *boxes = calloc(1, sizeof *boxes);
    for (int plate = EV_PLATE_APERTURE; plate <= EV_PLATE_CUT; ++plate) {
        ev_sheet sheet = list->items[0]->sheet;
        sheet.plate = (ev_plate)plate;
        cairo_surface_destroy(draw_page(&sheet, 1100.0, 700.0, boxes));
        for (int k = 0; k < 3; ++k)
            assert_int_equal(ev_boxes_find(boxes, plots[k]) != NULL, k == plate);
        assert_non_null(ev_boxes_find(boxes, "tab.aperture"));
        cairo_surface_destroy(draw_page(&sheet, 1280.0, 800.0, boxes));
        assert_non_null(ev_boxes_find(boxes, "plate.aperture"));
        assert_int_equal(ev_boxes_find(boxes, "plate.cut") != NULL, plate == EV_PLATE_CUT);
        assert_int_equal(ev_boxes_find(boxes, "plate.beam") != NULL, plate != EV_PLATE_CUT);
        assert_null(ev_boxes_find(boxes, "tab.aperture"));
        assert_non_null(ev_boxes_find(boxes, "tab.beam"));
    }
    free(boxes);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(curves_are_where_their_numbers_are),
        cmocka_unit_test(axes_say_what_the_map_has),
        cmocka_unit_test(limit_stands_about_the_beam),
        cmocka_unit_test(plates_without_numbers_say_so),
        cmocka_unit_test(stale_plates_wear_a_hairline),
        cmocka_unit_test(cut_marks_the_part_on_its_curve),
        cmocka_unit_test(cut_draws_the_path_error),
        cmocka_unit_test(tabs_choose_the_plate),
    };
    return cmocka_run_group_tests(tests, load_scenes, free_scenes);
}
