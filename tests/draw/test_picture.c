/* Pictures as files: written whole in each format, the page's own size, and a reason when not. */
#include "sheet.h"

#include <errno.h>
#include <sys/stat.h>
#include <unistd.h>

typedef struct picture_state {
    drawn_scene *drawn;
    char folder[64];
} picture_state;

static int begin(void **state)
{
    picture_state *s = calloc(1, sizeof *s);
    s->drawn = load_scene("quarry_link.yaml");
    snprintf(s->folder, sizeof s->folder, "/tmp/evenpath_picture_XXXXXX");
    assert_non_null(mkdtemp(s->folder));
    *state = s;
    return 0;
}

static int end(void **state)
{
    picture_state *s = *state;
    rmdir(s->folder);
    free_scene(s->drawn);
    free(s);
    ev_draw_release();
    return 0;
}

static char *read_file(const char *path, size_t *size)
{
    FILE *file = fopen(path, "rb");
    assert_non_null(file);
    fseek(file, 0, SEEK_END);
    *size = (size_t)ftell(file);
    rewind(file);
    char *text = calloc(1, *size + 1);
    assert_int_equal(fread(text, 1, *size, file), *size);
    fclose(file);
    return text;
}

static void every_format_is_written(void **state)
{
    static const struct {
        const char *name, *start;
    } formats[] = {{"page.png", "\x89PNG"}, {"page.svg", "<?xml"}, {"page.PDF", "%PDF-"}};
    const picture_state *s = *state;
    for (size_t i = 0; i < sizeof formats / sizeof formats[0]; ++i) {
        char path[128];
        const char *why = NULL;
        size_t size;
        snprintf(path, sizeof path, "%s/%s", s->folder, formats[i].name);
        if (!ev_picture_write(path, 1280.0, 800.0, 1.0, &s->drawn->sheet, &why))
            fail_msg("%s: %s", path, why);
        char *text = read_file(path, &size);
        assert_memory_equal(text, formats[i].start, strlen(formats[i].start));
        assert_in_range(size, 20000, 20000000);
        free(text);
        assert_int_equal(unlink(path), 0);
    }
}

static void png_has_the_pixels_asked_for_and_is_not_blank(void **state)
{
    const picture_state *s = *state;
    char path[128];
    const char *why;
    snprintf(path, sizeof path, "%s/dense.png", s->folder);
    assert_true(ev_picture_write(path, 1100.0, 700.0, 2.0, &s->drawn->sheet, &why));
    cairo_surface_t *surface = cairo_image_surface_create_from_png(path);
    assert_int_equal(cairo_image_surface_get_width(surface), 2200);
    assert_int_equal(cairo_image_surface_get_height(surface), 1400);
    unsigned ground = pixel_at(surface, 3, 3);
    int inked = 0;
    for (int y = 0; y < 1400; y += 3)
        for (int x = 0; x < 2200; x += 3)
            inked += pixel_at(surface, x, y) != ground;
    assert_in_range(inked, 1400 * 2200 / 9 / 20, 1400 * 2200 / 9 * 3 / 5);
    cairo_surface_destroy(surface);
    assert_int_equal(unlink(path), 0);
}

static void same_sheet_gives_the_same_png(void **state)
{
    const picture_state *s = *state;
    char path[2][128];
    char *text[2];
    size_t size[2];
    const char *why;
    for (int i = 0; i < 2; ++i) {
        snprintf(path[i], sizeof path[i], "%s/%d.png", s->folder, i);
        assert_true(ev_picture_write(path[i], 1280.0, 800.0, 1.0, &s->drawn->sheet, &why));
        text[i] = read_file(path[i], &size[i]);
    }
    assert_int_equal(size[0], size[1]);
    assert_memory_equal(text[0], text[1], size[0]);
    for (int i = 0; i < 2; ++i) {
        free(text[i]);
        unlink(path[i]);
    }
}

static void what_cannot_be_written_says_why(void **state)
{
    const picture_state *s = *state;
    char path[128], folder[128];
    const char *why = NULL;
    snprintf(folder, sizeof folder, "%s/folder.png", s->folder);
    assert_int_equal(mkdir(folder, 0755), 0);
    snprintf(path, sizeof path, "%s/nowhere/page.png", s->folder);
    const char *const bad[] = {path, folder, "page.bmp", "page", ".hidden/page"};
    for (size_t i = 0; i < sizeof bad / sizeof bad[0]; ++i) {
        why = NULL;
        assert_false(ev_picture_write(bad[i], 1280.0, 800.0, 1.0, &s->drawn->sheet, &why));
        assert_non_null(why);
        assert_true(strlen(why) > 10);
    }
    assert_int_not_equal(access(path, F_OK), 0);
    assert_int_equal(rmdir(folder), 0);
    snprintf(path, sizeof path, "%s/odd.png", s->folder);
    static const double odd[][3] = {
        {0.0, 800.0, 1.0}, {1280.0, 1e9, 1.0}, {1280.0, 800.0, 0.0}, {1280.0, 800.0, 100.0}};
    for (size_t i = 0; i < sizeof odd / sizeof odd[0]; ++i) {
        assert_false(
            ev_picture_write(path, odd[i][0], odd[i][1], odd[i][2], &s->drawn->sheet, &why));
        assert_true(strlen(why) > 10);
        assert_int_not_equal(access(path, F_OK), 0);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(every_format_is_written),
        cmocka_unit_test(png_has_the_pixels_asked_for_and_is_not_blank),
        cmocka_unit_test(same_sheet_gives_the_same_png),
        cmocka_unit_test(what_cannot_be_written_says_why),
    };
    return cmocka_run_group_tests(tests, begin, end);
}
