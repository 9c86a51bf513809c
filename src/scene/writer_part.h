/* Shared by the two halves of the writer: fields in a mapping (writer.c), sections and lists as a
 * whole (writer_section.c). */
#pragma once

#include "scene/emit.h"
#include "scene/splice.h"
#include "scene/writer.h"

enum { EV_WRITER_RENAMED = 64 };

typedef struct ev_writer {
    const ev_design *before, *after;
    const ev_spelling *spellings;
    ev_splice splice;
    const ev_node *renamed[EV_WRITER_RENAMED]; /* keys whose place another member took */
    int renamed_count;
} ev_writer;

/* One mapping of the document and its owners in both designs. */
typedef struct ev_mapping {
    const ev_section *section;
    const ev_node *node;
    const void *before, *after;
    int index; /* of the owner in `after` */
} ev_mapping;

/* Whether the node is, or stands in, a {...} or [...]. */
bool ev_node_in_flow(const ev_node *node);

ev_emitter ev_writer_emitter(const ev_writer *w, int index, bool in_flow);

/* Edits the fields of a mapping that differ. */
void ev_writer_mapping(ev_writer *w, const ev_mapping *m);

/* Puts "key: value" into a mapping after its neighbour above in the table; takes `member` over. */
void ev_writer_insert_key(ev_writer *w, const ev_node *node, const ev_section *section,
                          const char *key, char *member);

/* Edits a section: its fields, its entries, or itself as a whole. */
void ev_writer_section(ev_writer *w, const ev_section *section);
