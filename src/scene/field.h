/* Between the table and a file: a section is a mapping of the file ("main", "feeds"), a field is a
 * key in it and the rows behind that key. The reader, the writer and --set all walk these. */
#pragma once

#include "scene/parameter_table.h"

enum { EV_KEY_CAPACITY = 32, EV_FIELD_PARTS = 3, EV_CANONICAL_CAPACITY = 1024 };

typedef struct ev_section {
    const char *prefix; /* of the rows' names: "main", "feed"; "" at the top */
    const char *key;    /* in the file: "main", "feeds" */
    ev_owner owner;
    bool is_list;
    bool optional; /* present or not, as a whole */
} ev_section;

/* A key of a section. Single rows: `word` alone. Vectors: `part`s, and `word` when a word may stand
 * in their place. */
typedef struct ev_field {
    const ev_section *section;
    char key[EV_KEY_CAPACITY];
    const ev_parameter *word;
    const ev_parameter *part[EV_FIELD_PARTS];
    int part_count;
} ev_field;

int ev_section_count(void); /* the top section is number 0 */
const ev_section *ev_section_at(int index);
const ev_section *ev_section_of(const ev_parameter *row);

/* How many entries a design has of it (0 or 1 for those that are no list), and the owner of the
 * index-th. */
int ev_section_entries(const ev_design *design, const ev_section *section);
void *ev_section_owner(ev_design *design, const ev_section *section, int index);
const void *ev_section_owner_const(const ev_design *design, const ev_section *section, int index);
int ev_section_capacity(const ev_section *section);

/* Appends a default entry, or makes an optional section present. Returns its owner. */
void *ev_section_append(ev_design *design, const ev_section *section);

/* The name of a list entry. */
const char *ev_section_entry_name(const ev_design *design, const ev_section *section, int index);

/* Walks the fields of a section in table order: start with cursor 0. */
bool ev_field_next(const ev_section *section, int *cursor, ev_field *field);
bool ev_field_find(const ev_section *section, const char *key, ev_field *field);

/* The field that a row belongs to. */
ev_field ev_field_of(const ev_parameter *row);

/* Whether the vector stands (not a word) in a field that may hold either. */
bool ev_field_is_vector(const void *owner, const ev_field *field);

/* One row's value in its owner, as a double. */
double ev_row_get(const void *owner, const ev_parameter *row);
void ev_row_put(void *owner, const ev_parameter *row, double value);
const char *ev_row_text(const void *owner, const ev_parameter *row);
int ev_row_list_count(const void *owner, const ev_parameter *row);
double ev_row_list_get(const void *owner, const ev_parameter *row, int index);

/* Makes the row the given member of its choice group and, of three, not the derived one. */
void ev_row_choose(void *owner, const ev_parameter *row);
bool ev_row_is_derived(const void *owner, const ev_parameter *row);

/* What choices rule out: a gaussian has no exponent. Before every resolve. */
void ev_design_settle(ev_design *design);

/* The unit a file gets for a value that had none before, and that value written. */
const char *ev_row_file_unit(const ev_parameter *row, double value);
void ev_row_write(const ev_parameter *row, double value, const char *unit, char *text, size_t size);

/* The field's content as one line that differs when, and only when, the content does; "" when, and
 * only when, it is derived. */
void ev_field_canonical(const void *owner, const ev_field *field, char *text, size_t size);

/* Whether two designs say the same in every field. */
bool ev_design_same(const ev_design *a, const ev_design *b);
