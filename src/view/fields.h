/* The fields of the Strip: which parameters are in hand, what they show, and what happens to text
 * typed into them. Moves along a part's own axes are fields too; where such an axis lies along the
 * antenna's, the field is the parameter itself and a spelling is kept. */
#pragma once

#include "scene/parameter.h"
#include "view/model.h"

typedef struct ev_field_row {
    char address[96]; /* "feed.defocus", "frequency"; "feed.up" for a move askew to the antenna */
    char label[40];
    bool is_move; /* value is the place of `part` along `axis`, nominal 0 */
    ev_part part;
    ev_part_axis axis;
    bool has_parameter;
    ev_parameter_ref ref;
    double step; /* SI, of one small tick */
} ev_field_row;

/* The rows for the part in hand; returns their number, at most EV_FIELD_CAPACITY. */
int ev_fields_list(const ev_model *model, ev_field_row rows[EV_FIELD_CAPACITY]);

double ev_field_value(const ev_model *model, const ev_field_row *row);
double ev_field_nominal(const ev_model *model, const ev_field_row *row);

/* Digits, unit, value, nominal and step of a drawn field; leaves its editing state alone. */
void ev_field_show(const ev_model *model, const ev_field_row *row, ev_field *field);

/* `from` with the field at `value` (SI). */
ev_design ev_field_set(const ev_model *model, const ev_field_row *row, const ev_design *from,
                       double value);

/* Text as typed, "3/8 in"; a bare number takes the unit shown. False with a complaint when it is
 * not legal, and then nothing changes. On success the change can be undone. */
bool ev_field_commit(ev_model *model, const ev_field_row *row, const char *text, char *complaint,
                     size_t complaint_size);

/* 1, 2 or 5 times a power of ten, the nearest below `value` (> 0). */
double ev_round_step(double value);
/* Rounds a place to tenths of a step. */
double ev_round_place(double place, double step);

/* "feed out", "frequency": the words for undo. */
void ev_field_words(const ev_model *model, const ev_field_row *row, char words[EV_WORDS_CAPACITY]);
