/* One value as a person wrote it, in a file or after an equals sign, to the member it is for, with
 * every complaint in words. The reader and --set share it. */
#pragma once

#include "scene/document.h"
#include "scene/field.h"

/* Where a value was written; document NULL when it was typed. */
typedef struct ev_spot {
    const ev_document *document;
    const ev_node *node;
} ev_spot;

/* The text of a number, count or choice: its value, within the row's range. */
bool ev_value_read(const ev_parameter *row, const char *text, ev_spot spot,
                   ev_diagnostics *diagnostics, double *value);

/* Sets a text row (title, name, table). */
bool ev_value_set_text(void *owner, const ev_parameter *row, const char *text, ev_spot spot,
                       ev_diagnostics *diagnostics);

/* Sets all of a field from a node: word, vector, list or single value. Nothing is set when it is
 * not legal. Choices are not touched; see ev_row_choose. */
bool ev_field_read(void *owner, const ev_field *field, ev_spot spot, ev_diagnostics *diagnostics);

/* "a length, for example 1.2 m": what a field takes. */
void ev_field_describe(const ev_field *field, char *text, size_t size);
