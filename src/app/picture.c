/* `evenpath picture`: the page of a scene as PNG, SVG or PDF. */
#include "app/command.h"

#include "draw/draw.h"
#include "scene/parameter.h"
#include "study/study.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

enum { SECTION_RAYS = 100 };

static void add_parameter(const ev_loaded *loaded, const char *address, ev_sheet *sheet)
{
    ev_parameter_ref ref;
    ev_field *field = &sheet->fields[sheet->field_count];
    if (!ev_parameter_find(&loaded->design, loaded->feed, address, &ref, NULL))
        return;
    snprintf(field->address, sizeof field->address, "%s", address);
    snprintf(field->label, sizeof field->label, "%s", ref.parameter->label);
    ev_parameter_format(&loaded->design, ref, field->digits, sizeof field->digits, field->unit,
                        sizeof field->unit);
    field->value = field->nominal = ev_parameter_get(&loaded->design, ref);
    field->step = 1.0;
    sheet->field_count++;
}

/* Where a part sits along an axis of its own, as the Detail and the window's Strip say it. */
static void add_place(const ev_loaded *loaded, ev_part part, ev_part_axis axis, ev_sheet *sheet)
{
    ev_field *field = &sheet->fields[sheet->field_count++];
    field->value = ev_part_place(&loaded->design, &loaded->antenna, part, loaded->feed, axis);
    field->step = 1e-3;
    snprintf(field->address, sizeof field->address, "%s.%s", ev_part_word(part),
             ev_axis_word(axis));
    snprintf(field->label, sizeof field->label, "%s %s",
             part == EV_PART_FEED ? "Feed" : "Subreflector", ev_axis_word(axis));
    ev_quantity_format(EV_QUANTITY_LENGTH, field->value, field->digits, sizeof field->digits,
                       field->unit, sizeof field->unit);
}

/* The Strip of a printed page: where the parts stand and what they work with. */
static void list_fields(const ev_loaded *loaded, ev_sheet *sheet)
{
    if (loaded->antenna.dual) {
        add_place(loaded, EV_PART_SUB, EV_AXIS_OUT, sheet);
        add_place(loaded, EV_PART_SUB, EV_AXIS_UP, sheet);
    }
    add_place(loaded, EV_PART_FEED, EV_AXIS_OUT, sheet);
    add_place(loaded, EV_PART_FEED, EV_AXIS_UP, sheet);
    if (!loaded->antenna.dual)
        add_place(loaded, EV_PART_FEED, EV_AXIS_ACROSS, sheet);
    add_parameter(loaded, "frequency", sheet);
    if (!loaded->antenna.dual)
        add_parameter(loaded, "feed.edge_taper", sheet);
    add_parameter(loaded, "main.surface_rms", sheet);
}

static void fill_sheet(const ev_loaded *loaded, const ev_study *study, bool dark, ev_sheet *sheet)
{
    *sheet = (ev_sheet){.design = &study->design,
                        .antenna = &study->antenna,
                        .budget = &study->budget,
                        .verdict = &study->verdict,
                        .rays = study->rays,
                        .ray_count = study->ray_count,
                        .aperture = study->aperture,
                        .front = study->front,
                        .front_x = study->front_x,
                        .front_count = EV_STUDY_FRONT_COUNT,
                        .feed = study->feed,
                        .detail_axis = {EV_AXIS_OUT, EV_AXIS_UP},
                        .dark = dark,
                        .zoom = 1.0};
    list_fields(loaded, sheet);
}

/* Beams of all feeds in the plane that most of them point apart in, and the objective that their
 * side lobes have to keep at this size of dish. */
typedef struct page_beams {
    ev_beam_curve curves[EV_FEED_CAPACITY];
    ev_limit limit;
} page_beams;

static double plane_of_beams(const ev_antenna *antenna)
{
    double up = 0.0, across = 0.0;
    for (int f = 0; f < antenna->feed_count; f++) {
        up = fmax(up, fabs(antenna->feeds[f].wanted.x - antenna->feeds[0].wanted.x));
        across = fmax(across, fabs(antenna->feeds[f].wanted.y - antenna->feeds[0].wanted.y));
    }
    return across > up ? 0.5 * EV_PI : 0.0;
}

static void fill_beams(const ev_study *study, page_beams *beams, ev_sheet *sheet)
{
    const ev_antenna *antenna = &study->antenna;
    double phi = plane_of_beams(antenna), span = 0.0;
    double wavelengths = 2.0 * antenna->radius / antenna->wavelength;
    for (int f = 0; f < antenna->feed_count; f++)
        span = fmax(span, ev_beam_curve_span(antenna, f));
    for (int f = 0; f < antenna->feed_count; f++) {
        ev_beam_curve_compute(antenna, f, phi, span, EV_BEAM_EXACT, &beams->curves[f]);
        sheet->beams[f] = &beams->curves[f];
    }
    beams->limit = ev_limit_s580(wavelengths);
    if (!ev_limit_applies(&beams->limit))
        beams->limit = ev_limit_s465(wavelengths);
    sheet->limit = &beams->limit;
    sheet->plate = EV_PLATE_BEAM;
}

/* Where the part sits off its place, the page shows the Detail with its rings. */
static bool wants_detail(const ev_verdict *verdict)
{
    return verdict->move_count > 0;
}

int ev_command_picture(const ev_options *options)
{
    ev_loaded loaded;
    int code = ev_load(options, &loaded);
    if (code != EV_EXIT_DONE)
        return code;
    ev_study *study = calloc(1, sizeof *study);
    ev_loss_map *map = calloc(1, sizeof *map);
    page_beams *beams = calloc(1, sizeof *beams);
    if (!study || !map || !beams)
        abort();
    ev_study_want want = {.feed = loaded.feed,
                          .verdict = true,
                          .aperture = true,
                          .rays = EV_STUDY_RAYS_SECTION,
                          .ray_count = SECTION_RAYS};
    ev_study_compute(&loaded.design, loaded.design.frequencies[0], want, study);
    ev_sheet sheet;
    fill_sheet(&loaded, study, options->dark, &sheet);
    fill_beams(study, beams, &sheet);
    if (wants_detail(&study->verdict)) {
        sheet.part = study->verdict.moves[0].part;
        ev_loss_map_compute(&loaded.design, loaded.design.frequencies[0], sheet.part, loaded.feed,
                            sheet.detail_axis[0], sheet.detail_axis[1], 0.0, map);
        sheet.loss_map = map;
        sheet.detail = true;
    }
    const char *why = NULL;
    double width = options->width > 0.0 ? options->width : 1280.0;
    double height = options->height > 0.0 ? options->height : 800.0;
    if (!ev_picture_write(options->operands[1], width, height,
                          options->scale > 0.0 ? options->scale : 1.0, &sheet, &why)) {
        fprintf(stderr, "evenpath: '%s' was not written: %s\n", options->operands[1], why);
        code = EV_EXIT_IO;
    }
    free(beams);
    free(map);
    free(study);
    ev_unload(&loaded);
    return code;
}
