/* Values and fresh mappings as YAML text. */
#pragma once

#include "base/text.h"
#include "scene/field.h"
#include "scene/writer.h"

/* What is written, and how: the design, the member of the list that its owner is, whether a comma
 * or bracket would be taken for YAML's, and the spellings to use again. */
typedef struct ev_emitter {
    const ev_design *design;
    int index;
    bool in_flow;
    const ev_spelling *spellings;
} ev_emitter;

/* A text as a scalar, quoted when it must be. */
void ev_emit_text(ev_buffer *buffer, const char *text, bool in_flow, bool quoted);

/* One number, count or word. A remembered spelling of the same value is used again; otherwise the
 * unit is that of `unit_from` (a text as it stood, may be NULL). */
void ev_emit_row(ev_buffer *buffer, const ev_emitter *emitter, const ev_parameter *row,
                 double value, const char *unit_from);

/* A whole field: "[0 mm, 5 mm, 0 mm]". */
void ev_emit_field(ev_buffer *buffer, const ev_emitter *emitter, const ev_field *field,
                   const char *unit_from);

/* The members "key: value" of a mapping written anew, with `join` between them: names, required
 * ones, and what is not as it would be without. */
void ev_emit_members(ev_buffer *buffer, const ev_emitter *emitter, const ev_section *section,
                     const char *join);
