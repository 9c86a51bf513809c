/* What the tests of draw share: every scene in scenes/ as a sheet, and pages drawn of it. */
#pragma once

#include "draw/draw.h"
#include "scene/scene.h"
#include "study/study.h"

#include <dirent.h>
#include <setjmp.h>
#include <stdarg.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include <cmocka.h>

enum { SCENE_CAPACITY = 40 };

typedef struct drawn_scene {
    char name[64];
    ev_scene *scene;
    ev_study *study;
    ev_loss_map map;
    ev_beam_curve beams[EV_FEED_CAPACITY];
    ev_gain_curve gain;
    ev_limit limit;
    ev_sheet sheet;
} drawn_scene;

typedef struct scene_list {
    drawn_scene *items[SCENE_CAPACITY];
    int count;
} scene_list;

static void fill_fields(ev_sheet *sheet)
{
    static const char *const labels[] = {"Feed out",  "Feed up",    "Feed across",
                                         "Frequency", "Edge taper", "Surface rms"};
    static const char *const digits[] = {"14.0", "\u2212104.0", "0.0", "118.70", "11.0", "0.25"};
    static const char *const units[] = {"mm", "mm", "mm", "GHz", "dB", "mm"};
    sheet->field_count = EV_FIELD_CAPACITY;
    for (int i = 0; i < EV_FIELD_CAPACITY; ++i) {
        ev_field *field = &sheet->fields[i];
        snprintf(field->address, sizeof field->address, "field.%d", i);
        snprintf(field->label, sizeof field->label, "%s", labels[i]);
        snprintf(field->digits, sizeof field->digits, "%s", digits[i]);
        snprintf(field->unit, sizeof field->unit, "%s", units[i]);
        field->value = 0.014;
        field->step = 0.001;
    }
}

static void fill_sheet(drawn_scene *drawn)
{
    static const ev_action actions[] = {
        {"open", "Open", 0, true},  {"save", "Save", 0, true},       {"undo", "Undo", 0, true},
        {"redo", "Redo", 0, false}, {"picture", "Picture", 0, true}, {"dark", "Dark", 0, true},
        {"fit", "Fit", 0, true},
    };
    ev_study *study = drawn->study;
    ev_sheet *sheet = &drawn->sheet;
    *sheet = (ev_sheet){
        .design = &study->design,
        .antenna = &study->antenna,
        .budget = &study->budget,
        .verdict = &study->verdict,
        .kept = &study->budget,
        .loss_map = &drawn->map,
        .rays = study->rays,
        .ray_count = study->ray_count,
        .aperture = study->aperture,
        .front = study->front,
        .front_x = study->front_x,
        .front_count = EV_STUDY_FRONT_COUNT,
        .part = drawn->map.part,
        .detail_axis = {EV_AXIS_OUT, EV_AXIS_UP},
        .detail = true,
        .unsaved = true,
        .action_count = (int)(sizeof actions / sizeof actions[0]),
    };
    memcpy(sheet->actions, actions, sizeof actions);
    snprintf(sheet->notice, sizeof sheet->notice, "Undid: feed out, by fourteen millimetres");
    fill_fields(sheet);
}

/* Beams of all feeds, one of them as the kept one; a limit; the gain along the Detail's first axis.
 */
static void fill_curves(drawn_scene *drawn, double frequency)
{
    ev_sheet *sheet = &drawn->sheet;
    const ev_antenna *antenna = sheet->antenna;
    double span = ev_beam_curve_span(antenna, 0);
    for (int f = 0; f < antenna->feed_count; ++f) {
        ev_beam_curve_compute(antenna, f, 0.0, span, EV_BEAM_COARSE, &drawn->beams[f]);
        sheet->beams[f] = &drawn->beams[f];
    }
    sheet->kept_beam = &drawn->beams[antenna->feed_count - 1];
    drawn->limit = ev_limit_s580(2.0 * antenna->radius / antenna->wavelength);
    sheet->limit = &drawn->limit;
    ev_gain_curve_compute(sheet->design, frequency, sheet->part, 0, EV_AXIS_OUT, drawn->map.extent,
                          &drawn->gain);
    sheet->gain_curve = &drawn->gain;
}

static drawn_scene *load_scene(const char *file)
{
    drawn_scene *drawn = calloc(1, sizeof *drawn);
    ev_diagnostics *diagnostics = calloc(1, sizeof *diagnostics);
    char path[512];
    snprintf(path, sizeof path, "%s/%s", EV_SCENES, file);
    snprintf(drawn->name, sizeof drawn->name, "%s", file);
    ev_diagnostics_init(diagnostics);
    drawn->scene = ev_scene_load(path, diagnostics);
    if (!drawn->scene)
        ev_diagnostics_print(diagnostics, stderr);
    assert_non_null(drawn->scene);
    ev_diagnostics_clear(diagnostics);
    free(diagnostics);
    const ev_design *design = ev_scene_design(drawn->scene);
    drawn->study = calloc(1, sizeof *drawn->study);
    assert_non_null(drawn->study);
    ev_study_want want = {
        .verdict = true, .aperture = true, .rays = EV_STUDY_RAYS_SECTION, .ray_count = 100};
    double frequency = design->frequencies[0];
    ev_study_compute(design, frequency, want, drawn->study);
    ev_part part =
        drawn->study->verdict.id == EV_VERDICT_SUB_MISPLACED ? EV_PART_SUB : EV_PART_FEED;
    ev_loss_map_compute(design, frequency, part, 0, EV_AXIS_OUT, EV_AXIS_UP, 0.0, &drawn->map);
    fill_sheet(drawn);
    fill_curves(drawn, frequency);
    return drawn;
}

static void free_scene(drawn_scene *drawn)
{
    ev_scene_destroy(drawn->scene);
    free(drawn->study);
    free(drawn);
}

/* Every scene; fails when there are fewer than nine. */
__attribute__((unused)) static int load_scenes(void **state)
{
    scene_list *list = calloc(1, sizeof *list);
    DIR *folder = opendir(EV_SCENES);
    assert_non_null(folder);
    for (struct dirent *entry; (entry = readdir(folder));) {
        const char *dot = strrchr(entry->d_name, '.');
        if (dot && strcmp(dot, ".yaml") == 0 && list->count < SCENE_CAPACITY)
            list->items[list->count++] = load_scene(entry->d_name);
    }
    closedir(folder);
    assert_in_range(list->count, 9, SCENE_CAPACITY);
    *state = list;
    return 0;
}

__attribute__((unused)) static int free_scenes(void **state)
{
    scene_list *list = *state;
    for (int i = 0; i < list->count; ++i)
        free_scene(list->items[i]);
    free(list);
    ev_draw_release();
    return 0;
}

/* A page drawn to an image; the caller destroys the surface. */
__attribute__((unused)) static cairo_surface_t *draw_page(const ev_sheet *sheet, double width,
                                                          double height, ev_boxes *boxes)
{
    cairo_surface_t *surface =
        cairo_image_surface_create(CAIRO_FORMAT_RGB24, (int)width, (int)height);
    cairo_t *cairo = cairo_create(surface);
    ev_page page = ev_page_layout(width, height);
    boxes->count = 0;
    ev_draw_page(cairo, &page, sheet, boxes);
    assert_int_equal(cairo_status(cairo), CAIRO_STATUS_SUCCESS);
    cairo_destroy(cairo);
    cairo_surface_flush(surface);
    return surface;
}

__attribute__((unused)) static unsigned pixel_at(cairo_surface_t *surface, int x, int y)
{
    const unsigned char *data = cairo_image_surface_get_data(surface);
    unsigned pixel;
    memcpy(&pixel, data + y * cairo_image_surface_get_stride(surface) + 4 * x, sizeof pixel);
    return pixel & 0xFFFFFFu;
}

/* A number as it is drawn, with its true minus, back to a double. */
__attribute__((unused)) static double read_drawn(const char *text)
{
    char ascii[64];
    size_t at = 0;
    for (const char *p = text; *p && at + 1 < sizeof ascii;) {
        if (strncmp(p, "\u2212", 3) == 0) {
            ascii[at++] = '-';
            p += 3;
        } else {
            ascii[at++] = *p++;
        }
    }
    ascii[at] = 0;
    return strtod(ascii, NULL);
}
