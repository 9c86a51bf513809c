/* Showing mode: words that fit and keep apart, targets for fingers, the antenna at its elevation
 * over the ground, and numbers that are the budget's. */
#include "draw/show.h"
#include "sheet.h"

#include <math.h>

static const double sizes[][2] = {{1280.0, 800.0}, {1100.0, 700.0}, {2560.0, 1440.0}};
enum { SIZE_COUNT = 3, SITE_COUNT = 5 };

/* No site, level, as most stand, steep, at the zenith. */
static void set_site(ev_antenna *antenna, int site)
{
    static const double elevations[SITE_COUNT] = {0.0, 0.0, 0.6, 1.2, 0.5 * EV_PI};
    antenna->site.present = site > 0;
    antenna->site.elevation = elevations[site];
}

typedef struct shown {
    cairo_surface_t *surface;
    ev_plot_map section, detail;
    ev_boxes boxes;
} shown;

static void show(const ev_sheet *sheet, double width, double height, shown *to)
{
    to->surface = cairo_image_surface_create(CAIRO_FORMAT_RGB24, (int)width, (int)height);
    cairo_t *cairo = cairo_create(to->surface);
    to->boxes.count = 0;
    ev_draw_show(cairo, width, height, sheet, &to->boxes, &to->section, &to->detail);
    assert_int_equal(cairo_status(cairo), CAIRO_STATUS_SUCCESS);
    cairo_destroy(cairo);
    cairo_surface_flush(to->surface);
}

static bool overlaps(ev_rect a, ev_rect b)
{
    return a.x + 1.0 < b.x + b.width && b.x + 1.0 < a.x + a.width && a.y + 1.0 < b.y + b.height &&
           b.y + 1.0 < a.y + a.height;
}

static void check_words(const char *what, const shown *s, double width, double height)
{
    const ev_box *target = ev_boxes_find(&s->boxes, "plot.detail");
    double radius = 0.5 * target->rect.width, cx = target->rect.x + radius;
    double cy = target->rect.y + radius;
    for (int i = 0; i < s->boxes.count; ++i) {
        const ev_box *a = &s->boxes.items[i];
        if (a->kind != EV_BOX_TEXT)
            continue;
        if (a->rect.x < 0.0 || a->rect.y < 0.0 || a->rect.x + a->rect.width > width ||
            a->rect.y + a->rect.height > height || a->rect.width > a->within.width + 0.75)
            fail_msg("%s: %s \"%s\" is not inside the page", what, a->name, a->text);
        double dx = fmax(fmax(a->rect.x - cx, cx - a->rect.x - a->rect.width), 0.0);
        double dy = fmax(fmax(a->rect.y - cy, cy - a->rect.y - a->rect.height), 0.0);
        bool is_ring = strncmp(a->name, "text.detail.ring", 16) == 0;
        if ((hypot(dx, dy) < radius) != is_ring)
            fail_msg("%s: %s \"%s\" lies on the target", what, a->name, a->text);
        for (int k = 0; k < i; ++k)
            if (s->boxes.items[k].kind == EV_BOX_TEXT && overlaps(a->rect, s->boxes.items[k].rect))
                fail_msg("%s: %s lies on %s", what, a->name, s->boxes.items[k].name);
    }
}

static void check_fingers(const char *what, const ev_boxes *boxes)
{
    int count = 0;
    for (int i = 0; i < boxes->count; ++i) {
        const ev_box *box = &boxes->items[i];
        if (box->kind != EV_BOX_BUTTON && box->kind != EV_BOX_HANDLE)
            continue;
        ++count;
        if (box->rect.width < 44.0 - 1e-9 || box->rect.height < 44.0 - 1e-9)
            fail_msg("%s: %s is too small for a finger", what, box->name);
    }
    assert_true(count >= 3);
}

static void words_fit_and_targets_suit_fingers(void **state)
{
    const scene_list *list = *state;
    shown *s = calloc(1, sizeof *s);
    for (int i = 0; i < list->count; ++i)
        for (int size = 0; size < SIZE_COUNT; ++size)
            for (int site = 0; site < SITE_COUNT; ++site) {
                ev_sheet sheet = list->items[i]->sheet;
                ev_antenna antenna = *sheet.antenna;
                set_site(&antenna, site);
                sheet.antenna = &antenna;
                sheet.dark = site % 2;
                char what[128];
                snprintf(what, sizeof what, "%s at %g, site %d", list->items[i]->name,
                         sizes[size][0], site);
                show(&sheet, sizes[size][0], sizes[size][1], s);
                check_words(what, s, sizes[size][0], sizes[size][1]);
                check_fingers(what, &s->boxes);
                bool moves = sheet.verdict->move_count > 0;
                assert_int_equal(ev_boxes_find(&s->boxes, "button.move") != NULL, moves);
                if (!ev_boxes_find(&s->boxes, "text.show.wave"))
                    fail_msg("%s: nothing said of the wave", what);
                cairo_surface_destroy(s->surface);
            }
    free(s);
}

/* Whether ink stands within two pixels of a place. */
static bool is_inked(cairo_surface_t *surface, double x, double y)
{
    for (int dy = -2; dy <= 2; ++dy)
        for (int dx = -2; dx <= 2; ++dx)
            if ((pixel_at(surface, (int)x + dx, (int)y + dy) & 0xFF) < 0x50)
                return true;
    return false;
}

static void antenna_stands_at_its_elevation(void **state)
{
    const scene_list *list = *state;
    shown *s = calloc(1, sizeof *s);
    for (int i = 0; i < list->count; ++i)
        for (int size = 0; size < SIZE_COUNT; ++size)
            for (int site = 0; site < SITE_COUNT; ++site) {
                ev_sheet sheet = list->items[i]->sheet;
                ev_antenna antenna = *sheet.antenna;
                set_site(&antenna, site);
                sheet.antenna = &antenna;
                show(&sheet, sizes[size][0], sizes[size][1], s);
                const ev_plot_map *map = &s->section;
                double elevation = site > 0 ? antenna.site.elevation : 0.0;
                double scale = hypot(map->x_scale, map->y_cross);
                assert_true(fabs(map->x_scale - scale * cos(elevation)) < 1e-9 * scale);
                assert_true(fabs(map->y_cross + scale * sin(elevation)) < 1e-9 * scale);
                assert_true(fabs(map->y_scale + scale * cos(elevation)) < 1e-9 * scale);
                assert_true(fabs(map->x_cross + scale * sin(elevation)) < 1e-9 * scale);
                ev_show fit = ev_show_fit(sizes[size][0], sizes[size][1], &sheet);
                double floor = site > 0 ? fit.ground : sizes[size][1] - 60.0;
                for (int k = -4; k <= 4; ++k) {
                    ev_vec3 p =
                        ev_main_point(&antenna, antenna.offset + 0.25 * k * antenna.radius, 0.0);
                    double x, y;
                    ev_plot_to_page(map, p.z, p.x, &x, &y);
                    assert_true(x > 0.0 && x < sizes[size][0] && y > 0.0 && y < floor);
                    bool hole = fabs(0.25 * k * antenna.radius) < 1.05 * antenna.hole_radius;
                    assert_true(hole || is_inked(s->surface, x, y));
                }
                assert_true(2.0 * antenna.radius * scale > 0.28 * sizes[size][1]);
                if (site > 0) { /* what is drawn is the ground's line, over the whole width */
                    double jx, jy;
                    ev_plot_to_page(map, fit.joint.z, fit.joint.x, &jx, &jy);
                    assert_true(jy < fit.ground - 10.0);
                    assert_int_not_equal(pixel_at(s->surface, 3, (int)fit.ground), 0xF6F3EA);
                    assert_int_not_equal(pixel_at(s->surface, (int)jx, (int)(fit.ground - 5.0)),
                                         0xF6F3EA);
                }
                cairo_surface_destroy(s->surface);
            }
    free(s);
}

static void nothing_shifts_while_a_part_moves(void **state)
{
    const scene_list *list = *state;
    for (int i = 0; i < list->count; ++i) {
        ev_sheet sheet = list->items[i]->sheet;
        ev_show before = ev_show_fit(1280.0, 800.0, &sheet);
        ev_antenna antenna = *sheet.antenna;
        antenna.feeds[0].position.z += 0.02 * antenna.radius;
        antenna.feeds[0].position.x -= 0.02 * antenna.radius;
        sheet.antenna = &antenna;
        ev_show after = ev_show_fit(1280.0, 800.0, &sheet);
        assert_memory_equal(&before.map, &after.map, sizeof before.map);
    }
}

static void words_are_the_verdicts(void **state)
{
    const scene_list *list = *state;
    shown *s = calloc(1, sizeof *s);
    int wrong = 0, right = 0;
    for (int i = 0; i < list->count; ++i) {
        const ev_sheet *sheet = &list->items[i]->sheet;
        const ev_verdict *verdict = sheet->verdict;
        show(sheet, 1280.0, 800.0, s);
        const ev_box *lines[3];
        for (int k = 0; k < 3; ++k) {
            char name[32];
            snprintf(name, sizeof name, "text.show.%d", k + 1);
            lines[k] = ev_boxes_find(&s->boxes, name);
        }
        assert_non_null(lines[0]);
        assert_non_null(lines[2]);
        bool misplaced =
            verdict->id == EV_VERDICT_FEED_MISPLACED || verdict->id == EV_VERDICT_SUB_MISPLACED;
        for (int k = 0; misplaced && k < verdict->move_count && k < 2; ++k) {
            char fault[64];
            const int *range = verdict->bold[k];
            snprintf(fault, sizeof fault, "%.*s", range[1] - range[0], verdict->text + range[0]);
            assert_non_null(strstr(lines[k]->text, fault));
        }
        double gain = sheet->budget->feeds[0].gain_on_axis_dbi;
        if (verdict->move_count > 0) {
            double percent = 100.0 * pow(10.0, 0.1 * (gain - verdict->after_dbi));
            assert_true(fabs(read_drawn(lines[2]->text) - percent) <= 0.501);
            assert_non_null(strstr(lines[2]->text, " % of the signal is left."));
            ++wrong;
        } else {
            ++right;
        }
        cairo_surface_destroy(s->surface);
    }
    assert_true(wrong > 1 && right > 1);
    free(s);
}

/* Every verdict there can be has its two lines, and they fit. */
static void every_verdict_has_words(void **state)
{
    const scene_list *list = *state;
    shown *s = calloc(1, sizeof *s);
    for (int id = EV_VERDICT_IN_PLACE; id <= EV_VERDICT_DARK; ++id) {
        ev_sheet sheet = list->items[0]->sheet;
        ev_verdict verdict = *sheet.verdict;
        verdict.id = (ev_verdict_id)id;
        bool misplaced = id == EV_VERDICT_FEED_MISPLACED || id == EV_VERDICT_SUB_MISPLACED;
        verdict.move_count = misplaced ? 3 : 0;
        for (int k = 0; k < 3; ++k)
            verdict.moves[k] =
                (ev_move){(ev_part)(id == EV_VERDICT_SUB_MISPLACED), (ev_part_axis)k, -0.1234, 0.5};
        ev_verdict_word_out(sheet.design, 0, &verdict);
        sheet.verdict = &verdict;
        show(&sheet, 1100.0, 700.0, s);
        check_words("a verdict", s, 1100.0, 700.0);
        assert_non_null(ev_boxes_find(&s->boxes, "text.show.1"));
        assert_non_null(ev_boxes_find(&s->boxes, "text.show.2"));
        cairo_surface_destroy(s->surface);
    }
    free(s);
}

static void bend_is_as_stated(void **state)
{
    const scene_list *list = *state;
    shown *s = calloc(1, sizeof *s);
    int bent = 0;
    for (int i = 0; i < list->count; ++i) {
        ev_sheet sheet = list->items[i]->sheet;
        sheet.front_exaggeration = ev_show_exaggeration(1280.0, 800.0, &sheet);
        show(&sheet, 1280.0, 800.0, s);
        const ev_box *words = ev_boxes_find(&s->boxes, "text.show.wave.2");
        ev_show fit = ev_show_fit(1280.0, 800.0, &sheet);
        for (int k = 2; words && k + 2 < sheet.front_count; k += 7) {
            double error = sheet.front[k], x, y;
            if (!isfinite(error) || fabs(error) < 0.15 * sheet.antenna->wavelength / 2.0)
                continue;
            char expected[64];
            snprintf(expected, sizeof expected, "Its bend is drawn %g times larger.",
                     sheet.front_exaggeration);
            assert_memory_equal(words->text, expected,
                                strlen(expected) < 47 ? strlen(expected) : 47);
            ev_plot_to_page(&s->section, fit.front_z - sheet.front_exaggeration * error,
                            sheet.front_x[k], &x, &y);
            const ev_theme *theme = ev_theme_get(false);
            ev_colour colour = error > 0.0 ? theme->late : theme->early;
            unsigned pixel = pixel_at(s->surface, (int)x, (int)y);
            double off = fabs((double)(pixel >> 16) - 255.0 * colour.r) +
                         fabs((double)(pixel & 0xFF) - 255.0 * colour.b);
            assert_true(off < 60.0);
            ++bent;
        }
        cairo_surface_destroy(s->surface);
    }
    assert_true(bent > 3);
    free(s);
}

static void handle_is_where_the_part_sits(void **state)
{
    const scene_list *list = *state;
    shown *s = calloc(1, sizeof *s);
    for (int i = 0; i < list->count; ++i) {
        const ev_sheet *sheet = &list->items[i]->sheet;
        show(sheet, 1280.0, 800.0, s);
        double place[2], x, y;
        for (int k = 0; k < 2; ++k)
            place[k] =
                ev_part_place(sheet->design, sheet->antenna, sheet->part, 0, sheet->detail_axis[k]);
        ev_plot_to_page(&s->detail, place[0], place[1], &x, &y);
        const ev_box *handle =
            ev_boxes_find(&s->boxes, sheet->part == EV_PART_SUB ? "handle.sub" : "handle.feed");
        assert_true(fabs(handle->rect.x + 0.5 * handle->rect.width - x) < 1e-6);
        assert_true(fabs(handle->rect.y + 0.5 * handle->rect.height - y) < 1e-6);
        assert_int_equal(pixel_at(s->surface, (int)x + 18, (int)y), 0xFFD23F);
        assert_non_null(ev_boxes_find(&s->boxes, "text.detail.ring.0"));
        cairo_surface_destroy(s->surface);
    }
    free(s);
}

/* Nothing to show, or nonsense: a page all the same. */
static void odd_sheets_are_shown(void **state)
{
    const scene_list *list = *state;
    shown *s = calloc(1, sizeof *s);
    ev_sheet sheet = list->items[0]->sheet;
    ev_budget *budget = malloc(sizeof *budget);
    double *front = malloc(EV_STUDY_FRONT_COUNT * sizeof *front);
    *budget = *sheet.budget;
    budget->feeds[0].gain_on_axis_dbi = NAN;
    for (int i = 0; i < EV_STUDY_FRONT_COUNT; ++i)
        front[i] = i % 2 ? NAN : 1e9;
    sheet.budget = budget;
    sheet.front = front;
    sheet.front_exaggeration = 1e9;
    show(&sheet, 1280.0, 800.0, s);
    check_words("nonsense", s, 1280.0, 800.0);
    cairo_surface_destroy(s->surface);
    sheet.loss_map = NULL;
    sheet.front = sheet.front_x = NULL;
    sheet.front_count = sheet.ray_count = 0;
    sheet.rays = NULL;
    show(&sheet, 1100.0, 700.0, s);
    check_words("nothing", s, 1100.0, 700.0);
    cairo_surface_destroy(s->surface);
    free(budget);
    free(front);
    free(s);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(words_fit_and_targets_suit_fingers),
        cmocka_unit_test(antenna_stands_at_its_elevation),
        cmocka_unit_test(nothing_shifts_while_a_part_moves),
        cmocka_unit_test(words_are_the_verdicts),
        cmocka_unit_test(every_verdict_has_words),
        cmocka_unit_test(bend_is_as_stated),
        cmocka_unit_test(handle_is_where_the_part_sits),
        cmocka_unit_test(odd_sheets_are_shown),
    };
    return cmocka_run_group_tests(tests, load_scenes, free_scenes);
}
