/* Written values to members. Called by the reader for each key and by --set and typed fields;
 * knows neither files nor which sections there are. */
#include "scene/value.h"

#include "base/message.h"
#include "base/text.h"

#include <assert.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

enum { SHOWN = 80 };

/* At the node where there is one, in the text from byte `from` on. */
#define report_spot(spot, from, diagnostics, id, ...)                                              \
    do {                                                                                           \
        if ((spot).document) {                                                                     \
            size_t skip_ = (spot).node->plain ? (size_t)(from) : 0;                                \
            ev_report_at((spot).document, (spot).node->start + skip_, (spot).node->end,            \
                         diagnostics, EV_SEVERITY_ERROR, id, __VA_ARGS__);                         \
        } else {                                                                                   \
            ev_report(diagnostics, EV_SEVERITY_ERROR, id, NULL, __VA_ARGS__);                      \
        }                                                                                          \
    } while (0)

static void report_parse(ev_parse_result result, const ev_parameter *row, const char *text,
                         int column, ev_spot spot, ev_diagnostics *diagnostics)
{
    char shown[SHOWN];
    ev_text_copy(shown, sizeof shown, text);
    const char *rest = column <= (int)strlen(shown) ? shown + column : "";
    switch (result) {
    case EV_PARSE_UNIT_MISSING:
        report_spot(spot, 0, diagnostics, unit_missing, shown, row->name,
                    ev_quantity_units(row->quantity));
        break;
    case EV_PARSE_UNIT_UNKNOWN:
        report_spot(spot, column, diagnostics, unit_unknown, rest, row->name,
                    ev_quantity_units(row->quantity));
        break;
    case EV_PARSE_UNIT_UNWANTED:
        report_spot(spot, column, diagnostics, unit_unwanted, row->name, rest);
        break;
    case EV_PARSE_NOT_FINITE:
        report_spot(spot, 0, diagnostics, not_finite, shown, row->name);
        break;
    case EV_PARSE_NOT_A_NUMBER:
    case EV_PARSE_OK:
        report_spot(spot, column, diagnostics, not_number, shown, row->name, row->example);
        break;
    }
}

/* Limits are given in radians and the like; a typed "90 deg" must not miss one by a rounding. */
static bool in_range(const ev_parameter *row, double value)
{
    double slack = 1e-12 * fmax(fabs(row->low), fabs(row->high));
    return value >= row->low - slack && value <= row->high + slack;
}

static void report_range(const ev_parameter *row, const char *text, ev_spot spot,
                         ev_diagnostics *diagnostics)
{
    char low[SHOWN], high[SHOWN], shown[SHOWN];
    ev_row_write(row, row->low, ev_row_file_unit(row, row->low), low, sizeof low);
    ev_row_write(row, row->high, ev_row_file_unit(row, row->high), high, sizeof high);
    ev_text_copy(shown, sizeof shown, text);
    report_spot(spot, 0, diagnostics, out_of_range, row->name, low, high, shown);
}

/* "x, y, rhcp or lhcp" */
static void list_words(const ev_parameter *row, char *text, size_t size)
{
    text[0] = 0;
    for (int i = 0; row->words[i]; i++) {
        size_t length = strlen(text);
        const char *join = i == 0 ? "" : row->words[i + 1] ? ", " : " or ";
        bool vector = strcmp(row->words[i], EV_WORD_DIRECTION) == 0;
        snprintf(text + length, size - length, "%s%s", join,
                 vector ? "a direction" : row->words[i]);
    }
}

static bool read_choice(const ev_parameter *row, const char *text, ev_spot spot,
                        ev_diagnostics *diagnostics, double *value)
{
    for (int i = 0; row->words[i]; i++) {
        if (strcmp(row->words[i], text) == 0) {
            *value = i;
            return true;
        }
    }
    char words[160], shown[SHOWN];
    list_words(row, words, sizeof words);
    ev_text_copy(shown, sizeof shown, text);
    report_spot(spot, 0, diagnostics, word_unknown, shown, row->name, words);
    return false;
}

bool ev_value_read(const ev_parameter *row, const char *text, ev_spot spot,
                   ev_diagnostics *diagnostics, double *value)
{
    if (row->kind == EV_VALUE_CHOICE)
        return read_choice(row, text, spot, diagnostics, value);
    double number;
    int column = 0;
    ev_parse_result result = ev_quantity_parse(row->quantity, text, &number, &column);
    if (result != EV_PARSE_OK) {
        report_parse(result, row, text, column, spot, diagnostics);
        return false;
    }
    if (!in_range(row, number)) {
        report_range(row, text, spot, diagnostics);
        return false;
    }
    if (row->kind == EV_VALUE_COUNT && number != floor(number)) {
        report_spot(spot, 0, diagnostics, not_whole, row->name, text);
        return false;
    }
    *value = number;
    return true;
}

static bool is_name(const ev_parameter *row)
{
    size_t length = strlen(row->name);
    return length > 5 && strcmp(row->name + length - 5, ".name") == 0;
}

/* Names stand in addresses, so what parts an address cannot be in one. */
static bool is_legal_name(const char *text)
{
    size_t length = strlen(text);
    if (text[0] == ' ' || text[length - 1] == ' ' || strpbrk(text, ".=[]{}#\"'`:,"))
        return false;
    for (const char *at = text; *at; at++) {
        if ((unsigned char)*at < 0x20)
            return false;
    }
    return true;
}

bool ev_value_set_text(void *owner, const ev_parameter *row, const char *text, ev_spot spot,
                       ev_diagnostics *diagnostics)
{
    char shown[SHOWN];
    ev_text_copy(shown, sizeof shown, text);
    if (strlen(text) >= row->size) {
        report_spot(spot, 0, diagnostics, text_too_long, row->name, (int)row->size - 1);
        return false;
    }
    if (is_name(row) && text[0] == 0) {
        report_spot(spot, 0, diagnostics, text_empty, row->name);
        return false;
    }
    if (is_name(row) && !is_legal_name(text)) {
        report_spot(spot, 0, diagnostics, name_illegal, shown);
        return false;
    }
    memcpy((char *)owner + row->offset, text, strlen(text) + 1);
    return true;
}

void ev_field_describe(const ev_field *field, char *text, size_t size)
{
    const ev_parameter *row = field->word;
    assert(row != NULL || field->part_count > 0);
    if (field->part_count > 0) {
        char examples[120] = "", words[160] = "";
        for (int i = 0; i < field->part_count; i++) {
            size_t length = strlen(examples);
            snprintf(examples + length, sizeof examples - length, "%s%s", i ? ", " : "",
                     field->part[i]->example);
        }
        if (row)
            list_words(row, words, sizeof words);
        snprintf(text, size, "%s%s[%s]", row ? words : "values", row ? ", for example " : " like ",
                 examples);
    } else if (row->kind == EV_VALUE_CHOICE) {
        list_words(row, text, size);
    } else if (row->kind == EV_VALUE_TEXT) {
        snprintf(text, size, "a text, for example '%s'", row->example);
    } else {
        snprintf(text, size, "one value%s, for example '%s'",
                 row->list_capacity > 0 ? " or a list of them" : "", row->example);
    }
}

static void report_kind(const ev_field *field, ev_spot spot, ev_diagnostics *diagnostics)
{
    char wanted[300], found[SHOWN];
    ev_field_describe(field, wanted, sizeof wanted);
    ev_node_describe(spot.node, found, sizeof found);
    report_spot(spot, 0, diagnostics, not_value, field->key, wanted, found);
}

static ev_spot spot_at(ev_spot spot, int index)
{
    return (ev_spot){spot.document, ev_node_at(spot.node, index)};
}

/* Entries of a list as numbers: rows[i], or rows[0] for all when `same`. */
static bool read_entries(const ev_field *field, const ev_parameter *const *rows, bool same,
                         int count, ev_spot spot, ev_diagnostics *diagnostics, double *values)
{
    bool right = true;
    for (int i = 0; i < count; i++) {
        ev_spot entry = spot_at(spot, i);
        if (entry.node->kind != EV_NODE_SCALAR) {
            report_kind(field, entry, diagnostics);
            right = false;
        } else if (!ev_value_read(rows[same ? 0 : i], entry.node->text, entry, diagnostics,
                                  &values[i])) {
            right = false;
        }
    }
    return right;
}

static bool read_vector(void *owner, const ev_field *field, ev_spot spot,
                        ev_diagnostics *diagnostics)
{
    double values[EV_FIELD_PARTS];
    int count = ev_node_count(spot.node);
    if (count != field->part_count) {
        report_spot(spot, 0, diagnostics, vector_count, field->key, field->part_count, count);
        return false;
    }
    if (!read_entries(field, field->part, false, count, spot, diagnostics, values))
        return false;
    for (int i = 0; i < count; i++)
        ev_row_put(owner, field->part[i], values[i]);
    return true;
}

static bool read_list(void *owner, const ev_field *field, ev_spot spot, ev_diagnostics *diagnostics)
{
    const ev_parameter *row = field->word;
    assert(row != NULL && row->list_capacity <= EV_FREQUENCY_CAPACITY);
    double values[EV_FREQUENCY_CAPACITY];
    int count = ev_node_count(spot.node);
    if (count == 0) {
        report_kind(field, spot, diagnostics);
        return false;
    }
    if (count > row->list_capacity) {
        report_spot(spot, 0, diagnostics, list_count, field->key, row->list_capacity, count);
        return false;
    }
    if (!read_entries(field, &row, true, count, spot, diagnostics, values))
        return false;
    memcpy((char *)owner + row->offset, values, (size_t)count * sizeof values[0]);
    memcpy((char *)owner + row->list_count_offset, &count, sizeof count);
    return true;
}

static bool read_word(void *owner, const ev_field *field, ev_spot spot, ev_diagnostics *diagnostics)
{
    const ev_parameter *row = field->word;
    const char *text = spot.node->text;
    double value;
    if (row->kind == EV_VALUE_TEXT)
        return ev_value_set_text(owner, row, text, spot, diagnostics);
    if (field->part_count > 0 && strcmp(text, EV_WORD_DIRECTION) == 0) {
        report_spot(spot, 0, diagnostics, word_is_vector, field->key, text, field->key,
                    field->part_count == 3 ? "0, 0, -1" : "0 deg, 0 deg");
        return false;
    }
    if (!ev_value_read(row, text, spot, diagnostics, &value))
        return false;
    ev_row_put(owner, row, value);
    return true;
}

bool ev_field_read(void *owner, const ev_field *field, ev_spot spot, ev_diagnostics *diagnostics)
{
    ev_node_kind kind = spot.node->kind;
    if (kind == EV_NODE_SEQUENCE && field->part_count > 0) {
        bool read = read_vector(owner, field, spot, diagnostics);
        if (read && field->word)
            ev_row_choose(owner, field->part[0]);
        return read;
    }
    if (kind == EV_NODE_SEQUENCE && field->word && field->word->list_capacity > 0)
        return read_list(owner, field, spot, diagnostics);
    bool nothing = kind == EV_NODE_SCALAR && spot.node->text[0] == 0 && spot.node->plain;
    if (kind == EV_NODE_SCALAR && field->word && !nothing)
        return read_word(owner, field, spot, diagnostics);
    report_kind(field, spot, diagnostics);
    return false;
}
