/* Which fields there are, and how values get in and out of them. */
#include "view/fields.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

double ev_round_step(double value)
{
    if (!(value > 0.0) || !isfinite(value)) {
        return 1.0;
    }
    double power = pow(10.0, floor(log10(value)));
    double lead = value / power;
    return power * (lead >= 5.0 ? 5.0 : lead >= 2.0 ? 2.0 : 1.0);
}

double ev_round_place(double place, double step)
{
    double grain = 0.1 * step, count = round(place / grain);
    /* by division where that gives the number a person would write */
    double rounded = grain < 1.0 ? count / round(1.0 / grain) : count * round(grain);
    return rounded == 0.0 ? 0.0 : rounded; /* no minus zero */
}

/* A small tick of the tape: a fiftieth of a wavelength for lengths that move things, finer for the
 * surface, and about half a percent of anything that scales. */
static double choose_step(const ev_model *model, const ev_field_row *row)
{
    double wavelength = EV_LIGHT_SPEED / model->design.frequencies[0];
    if (!row->has_parameter) {
        return ev_round_step(wavelength / 50.0);
    }
    switch (row->ref.parameter->quantity) {
    case EV_QUANTITY_LENGTH:
        return ev_round_step(strcmp(row->address, "main.surface_rms") == 0 ? wavelength / 1000.0
                                                                           : wavelength / 50.0);
    case EV_QUANTITY_FREQUENCY:
        return ev_round_step(ev_field_nominal(model, row) / 200.0);
    case EV_QUANTITY_ANGLE:
        return 0.05 * EV_PI / 180.0;
    case EV_QUANTITY_LEVEL:
        return 0.5;
    case EV_QUANTITY_NUMBER:
    case EV_QUANTITY_TEMPERATURE:
    case EV_QUANTITY_COUNT:
        break;
    }
    return 1.0;
}

static bool find_parameter(const ev_model *model, const char *address, ev_parameter_ref *ref)
{
    return ev_parameter_find(&model->design, model->feed, address, ref, NULL);
}

/* `label` NULL: the parameter's own. */
static void add_parameter(const ev_model *model, ev_field_row *rows, int *count,
                          const char *address, const char *label)
{
    ev_field_row row = {0};
    if (*count == EV_FIELD_CAPACITY || !find_parameter(model, address, &row.ref)) {
        return;
    }
    row.has_parameter = true;
    snprintf(row.address, sizeof row.address, "%s", address);
    snprintf(row.label, sizeof row.label, "%s", label ? label : row.ref.parameter->label);
    row.step = choose_step(model, &row);
    rows[(*count)++] = row;
}

/* The parameter that is a move along an axis of a part, where there is one. */
static const char *parameter_of_move(const ev_model *model, ev_part part, ev_part_axis axis)
{
    static const char *const feed[EV_AXIS_COUNT] = {"feed.defocus", "feed.shift.x", "feed.shift.y"};
    static const char *const sub[EV_AXIS_COUNT] = {"sub.shift.z", "sub.shift.x", "sub.shift.y"};
    if (part == EV_PART_SUB) {
        return sub[axis];
    }
    if (axis == EV_AXIS_UP) {
        ev_vec3 up = ev_part_axis_direction(&model->study->antenna, part, model->feed, axis);
        return fabs(up.x - 1.0) < 1e-12 ? feed[axis] : NULL;
    }
    return feed[axis];
}

static void add_move(const ev_model *model, ev_field_row *rows, int *count, ev_part part,
                     ev_part_axis axis)
{
    ev_field_row row = {.is_move = true, .part = part, .axis = axis};
    if (*count == EV_FIELD_CAPACITY) {
        return;
    }
    const char *parameter = parameter_of_move(model, part, axis);
    row.has_parameter = parameter && find_parameter(model, parameter, &row.ref);
    if (row.has_parameter) {
        snprintf(row.address, sizeof row.address, "%s", parameter);
    } else {
        snprintf(row.address, sizeof row.address, "%s.%s", ev_part_word(part), ev_axis_word(axis));
    }
    snprintf(row.label, sizeof row.label, "%s %s", part == EV_PART_SUB ? "Subreflector" : "Feed",
             ev_axis_word(axis));
    row.step = choose_step(model, &row);
    rows[(*count)++] = row;
}

static void add_strut_width(const ev_model *model, ev_field_row *rows, int *count)
{
    char address[96];
    if (model->design.strut_count > 0) {
        snprintf(address, sizeof address, "struts.%s.width", model->design.struts[0].name);
        add_parameter(model, rows, count, address, NULL);
    }
}

int ev_fields_list(const ev_model *model, ev_field_row rows[EV_FIELD_CAPACITY])
{
    int count = 0;
    if (model->part == EV_PART_SUB) {
        add_move(model, rows, &count, EV_PART_SUB, EV_AXIS_OUT);
        add_move(model, rows, &count, EV_PART_SUB, EV_AXIS_UP);
        add_parameter(model, rows, &count, "sub.tilt.y", "Subreflector tilt");
        add_move(model, rows, &count, EV_PART_FEED, EV_AXIS_OUT);
        add_parameter(model, rows, &count, "frequency", NULL);
        add_strut_width(model, rows, &count);
        add_parameter(model, rows, &count, "main.surface_rms", NULL);
        return count;
    }
    for (int axis = 0; axis < EV_AXIS_COUNT; ++axis) {
        add_move(model, rows, &count, EV_PART_FEED, (ev_part_axis)axis);
    }
    add_parameter(model, rows, &count, "frequency", NULL);
    if (model->design.feeds[model->feed].pattern != EV_PATTERN_TABLE) {
        add_parameter(model, rows, &count, "feed.edge_taper", NULL);
    }
    add_parameter(model, rows, &count, "main.surface_rms", NULL);
    return count;
}

double ev_field_value(const ev_model *model, const ev_field_row *row)
{
    return row->is_move ? ev_model_place(model, row->part, row->axis)
                        : ev_parameter_get(&model->design, row->ref);
}

/* Added since the scene was opened: its tape is marked where it stands. */
static bool is_new(const ev_model *model, ev_parameter_ref ref)
{
    ev_owner owner = ref.parameter->owner;
    return (owner == EV_OWNER_FEED && ref.index >= model->opened.feed_count) ||
           (owner == EV_OWNER_STRUT && ref.index >= model->opened.strut_count);
}

double ev_field_nominal(const ev_model *model, const ev_field_row *row)
{
    const ev_design *from =
        !row->is_move && is_new(model, row->ref) ? &model->design : &model->opened;
    return row->is_move ? 0.0 : ev_parameter_get(from, row->ref);
}

void ev_field_show(const ev_model *model, const ev_field_row *row, ev_field *field)
{
    memcpy(field->address, row->address, sizeof field->address);
    memcpy(field->label, row->label, sizeof field->label);
    field->value = ev_field_value(model, row);
    field->nominal = ev_field_nominal(model, row);
    field->step = row->step;
    if (row->is_move) {
        ev_quantity_format(EV_QUANTITY_LENGTH, field->value, field->digits, sizeof field->digits,
                           field->unit, sizeof field->unit);
    } else {
        ev_parameter_format(&model->design, row->ref, field->digits, sizeof field->digits,
                            field->unit, sizeof field->unit);
    }
}

ev_design ev_field_set(const ev_model *model, const ev_field_row *row, const ev_design *from,
                       double value)
{
    ev_design set = *from;
    if (row->is_move) {
        set = ev_model_moved(model, from, row->part, row->axis, value);
    }
    /* a move that is a parameter gets the very number, without the rounding of directions */
    if (!row->is_move ||
        (row->has_parameter && fabs(ev_parameter_get(&set, row->ref) - value) < 1e-12)) {
        ev_parameter_set(&set, row->ref, value);
    }
    return set;
}

void ev_field_words(const ev_model *model, const ev_field_row *row, char words[EV_WORDS_CAPACITY])
{
    if (row->is_move) {
        ev_model_move_words(model, row->part, row->axis, words);
        return;
    }
    snprintf(words, EV_WORDS_CAPACITY, "%s", row->label);
    if (words[0] >= 'A' && words[0] <= 'Z' && words[1] >= 'a') {
        words[0] = (char)(words[0] - 'A' + 'a');
    }
}

static ev_quantity quantity_of(const ev_field_row *row)
{
    return row->is_move ? EV_QUANTITY_LENGTH : row->ref.parameter->quantity;
}

/* The text with the unit that the field shows, when it has none of its own. */
static void complete_unit(const ev_model *model, const ev_field_row *row, const char *text,
                          char *complete, size_t size)
{
    double value;
    ev_field field = {0};
    snprintf(complete, size, "%s", text);
    if (ev_quantity_parse(quantity_of(row), text, &value, NULL) == EV_PARSE_UNIT_MISSING) {
        ev_field_show(model, row, &field);
        bool degrees = quantity_of(row) == EV_QUANTITY_ANGLE;
        snprintf(complete, size, "%s %s", text, degrees ? "deg" : field.unit);
    }
}

static const char *complain_about(ev_parse_result result)
{
    switch (result) {
    case EV_PARSE_NOT_A_NUMBER:
        return "not a number";
    case EV_PARSE_UNIT_UNKNOWN:
        return "not a unit it can have";
    case EV_PARSE_UNIT_UNWANTED:
        return "a plain number, without a unit";
    case EV_PARSE_NOT_FINITE:
        return "too large";
    case EV_PARSE_OK:
    case EV_PARSE_UNIT_MISSING:
        break;
    }
    return "the unit is missing";
}

/* Reads the value, in range; the complaint names what was expected. */
static bool read_value(const ev_field_row *row, const char *text, double *value, char *complaint,
                       size_t size)
{
    ev_quantity quantity = quantity_of(row);
    ev_parse_result result = ev_quantity_parse(quantity, text, value, NULL);
    if (result != EV_PARSE_OK) {
        const char *units = ev_quantity_units(quantity);
        snprintf(complaint, size, "%s%s%s", complain_about(result),
                 units && *units ? "; write a number and one of " : "", units ? units : "");
        return false;
    }
    if (row->has_parameter &&
        !(*value >= row->ref.parameter->low && *value <= row->ref.parameter->high)) {
        char digits[2][24], unit[2][12];
        ev_quantity_format(quantity, row->ref.parameter->low, digits[0], 24, unit[0], 12);
        ev_quantity_format(quantity, row->ref.parameter->high, digits[1], 24, unit[1], 12);
        snprintf(complaint, size, "must be from %s %s to %s %s", digits[0], unit[0], digits[1],
                 unit[1]);
        return false;
    }
    return true;
}

bool ev_field_commit(ev_model *model, const ev_field_row *row, const char *text, char *complaint,
                     size_t complaint_size)
{
    char complete[64], address[96], words[EV_WORDS_CAPACITY];
    double value;
    complete_unit(model, row, text, complete, sizeof complete);
    if (!read_value(row, complete, &value, complaint, complaint_size)) {
        return false;
    }
    ev_design set = ev_field_set(model, row, &model->design, value);
    bool own_move = row->is_move && row->part == model->part && row->axis != EV_AXIS_ACROSS;
    if (!ev_model_try(model, &set, own_move)) {
        snprintf(complaint, complaint_size, "%s", model->message);
        model->message[0] = '\0';
        return false;
    }
    if (row->has_parameter && ev_parameter_get(&model->design, row->ref) == value) {
        ev_parameter_address(&model->design, row->ref, address, sizeof address);
        ev_worker_finish(model->worker, EV_JOB_SAVE);
        ev_scene_remember_spelling(model->scene, address, value, complete);
    }
    ev_field_words(model, row, words);
    ev_model_note(model, words);
    complaint[0] = '\0';
    return true;
}
