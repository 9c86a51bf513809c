/* What a replay says about the window: numbers, boxes, times; and what it expects of them. */
#include "view/player.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

static void print_number(const char *name, double value)
{
    printf("%s %.17g\n", name, value);
}

/* The numbers of the selected feed, under the names `budget --json` uses. */
static void print_budget(const ev_model *model)
{
    static const char *const fates[EV_FATE_COUNT] = {"aperture",   "past_sub",    "past_main",
                                                     "shadow_sub", "shadow_feed", "shadow_struts"};
    const ev_feed_budget *budget = &model->study->budget.feeds[model->feed];
    const ev_efficiency *e = &budget->efficiency;
    char name[64];
    for (int i = 0; i < EV_FATE_COUNT; ++i) {
        snprintf(name, sizeof name, "power.%s", fates[i]);
        print_number(name, budget->power[i]);
    }
    print_number("path_error.rms_area_m", budget->path_error.rms_area);
    print_number("path_error.rms_power_m", budget->path_error.rms_power);
    print_number("path_error.rms_amplitude_m", budget->path_error.rms_amplitude);
    print_number("path_error.peak_to_valley_m", budget->path_error.peak_to_valley);
    print_number("efficiency.spillover", e->spillover);
    print_number("efficiency.taper", e->taper);
    print_number("efficiency.phase", e->phase);
    print_number("efficiency.pointing", e->pointing);
    print_number("efficiency.polarization", e->polarization);
    print_number("efficiency.blockage", e->blockage);
    print_number("efficiency.surface", e->surface);
    print_number("efficiency.ohmic", e->ohmic);
    print_number("efficiency.mismatch", e->mismatch);
    print_number("efficiency.total", e->total);
    print_number("full_aperture_gain_dbi", budget->full_aperture_gain_dbi);
    print_number("gain_dbi", budget->gain_dbi);
    print_number("gain_on_axis_dbi", budget->gain_on_axis_dbi);
}

/* A field's value, or any parameter's. */
static bool get_value(const ev_view *view, const char *address, double *value,
                      ev_quantity *quantity)
{
    const ev_model *model = &view->model;
    ev_parameter_ref ref;
    for (int i = 0; i < view->row_count; ++i) {
        const ev_field_row *row = &view->rows[i];
        if (!row->has_parameter && strcmp(row->address, address) == 0) {
            *value = ev_field_value(model, row);
            *quantity = EV_QUANTITY_LENGTH;
            return true;
        }
    }
    if (!ev_parameter_find(&model->design, model->feed, address, &ref, NULL) ||
        ref.parameter->kind == EV_VALUE_TEXT) {
        return false;
    }
    *value = ev_parameter_get(&model->design, ref);
    *quantity = ref.parameter->quantity;
    return true;
}

bool ev_player_print(ev_player *player, const ev_step *step)
{
    ev_view *view = player->view;
    const char *what = step->tokens[1].text;
    double value;
    ev_quantity quantity;
    ev_player_frame(player);
    if (strcmp(what, "notice") == 0) {
        printf("notice %s\n", view->notice);
    } else if (strcmp(what, "driver") == 0) {
        printf("driver %s\n", SDL_GetCurrentVideoDriver());
    } else if (!view->model.scene) {
        return ev_player_fail(player, 2, "No scene is open.");
    } else if (strcmp(what, "budget") == 0) {
        print_budget(&view->model);
    } else if (strcmp(what, "verdict") == 0) {
        printf("verdict %s\n%s\n%s\n", ev_verdict_word(view->model.verdict.id),
               view->model.verdict.text, view->model.verdict.advice);
    } else if (get_value(view, what, &value, &quantity)) {
        print_number(what, value);
    } else {
        return ev_player_fail(player, 2, "There is no number called \"%s\".", what);
    }
    fflush(stdout);
    return true;
}

static bool expect_words(ev_player *player, const char *what, const char *found,
                         const char *expected)
{
    return strcmp(found, expected) == 0 ||
           ev_player_fail(player, 1, "The %s is \"%s\", expected \"%s\".", what, found, expected);
}

bool ev_player_expect(ev_player *player, const ev_step *step)
{
    ev_view *view = player->view;
    const char *what = step->tokens[1].text, *expected = step->tokens[2].text;
    double value, wanted;
    ev_quantity quantity;
    ev_player_frame(player);
    if (strcmp(what, "notice") == 0) {
        return expect_words(player, what, view->notice, expected);
    }
    if (!view->model.scene) {
        return ev_player_fail(player, 1, "No scene is open.");
    }
    if (strcmp(what, "verdict") == 0) {
        return expect_words(player, what, ev_verdict_word(view->model.verdict.id), expected);
    }
    if (strcmp(what, "title") == 0) {
        return expect_words(player, what, view->model.design.title, expected);
    }
    if (!get_value(view, what, &value, &quantity)) {
        return ev_player_fail(player, 2, "There is no number called \"%s\".", what);
    }
    if (ev_quantity_parse(quantity, expected, &wanted, NULL) != EV_PARSE_OK) {
        return ev_player_fail(player, 2, "\"%s\" is no value of %s (%s).", expected, what,
                              ev_quantity_units(quantity));
    }
    return fabs(value - wanted) <= 1e-9 * fmax(fabs(wanted), 1e-3) ||
           ev_player_fail(player, 1, "%s is %.12g, expected %s (%.12g).", what, value, expected,
                          wanted);
}

/* name, kind, rectangle, the place of a text, its words; separated by tabs. */
static void write_boxes(FILE *file, const ev_boxes *boxes)
{
    static const char *const kinds[] = {"text",   "button", "row",  "field",
                                        "handle", "plot",   "place"};
    for (int i = 0; i < boxes->count; ++i) {
        const ev_box *box = &boxes->items[i];
        fprintf(file, "%s\t%s\t%.2f %.2f %.2f %.2f\t%.2f %.2f %.2f %.2f\t%s\n", box->name,
                kinds[box->kind], box->rect.x, box->rect.y, box->rect.width, box->rect.height,
                box->within.x, box->within.y, box->within.width, box->within.height, box->text);
    }
}

bool ev_player_boxes(ev_player *player, const ev_step *step)
{
    const ev_view *view = player->view;
    ev_player_frame(player);
    FILE *file = fopen(step->tokens[1].text, "w");
    if (!file) {
        return ev_player_fail(player, 3, "The file %s cannot be written.", step->tokens[1].text);
    }
    for (int id = 0; id < EV_LAYER_COUNT; ++id) {
        if ((id == EV_LAYER_GALLERY) == (view->model.scene == NULL)) {
            write_boxes(file, &view->layers.items[id].boxes);
        }
    }
    return fclose(file) == 0 ||
           ev_player_fail(player, 3, "The file %s cannot be written.", step->tokens[1].text);
}

static int compare(const void *a, const void *b)
{
    double x = *(const double *)a, y = *(const double *)b;
    return (x > y) - (x < y);
}

bool ev_player_latency(ev_player *player, const ev_step *step)
{
    (void)step;
    int count = player->latency_count;
    if (count == 0) {
        return ev_player_fail(player, 2, "Nothing has been dragged since the last latency.");
    }
    qsort(player->latency, (size_t)count, sizeof player->latency[0], compare);
    printf("latency frames %d median_ms %.2f p95_ms %.2f max_ms %.2f\n", count,
           1e3 * player->latency[count / 2], 1e3 * player->latency[(int)(0.95 * (count - 1) + 0.5)],
           1e3 * player->latency[count - 1]);
    fflush(stdout);
    player->latency_count = 0;
    return true;
}
