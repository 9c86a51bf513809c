/* Design into document. Called by scene.c to save. It walks the sections and fields of the table,
 * compares the design that the document says with the one wanted, and edits only where they
 * differ: values in place, keys renamed when the given member of a choice changed, keys put in in
 * the document's own style. Sections and lists as a whole are writer_section.c's. scene.c reads
 * the result back before it trusts it. */
#include "scene/writer_part.h"

#include "scene/reader.h"

#include <stdlib.h>
#include <string.h>

bool ev_node_in_flow(const ev_node *node)
{
    for (; node; node = node->parent) {
        if (node->flow)
            return true;
    }
    return false;
}

ev_emitter ev_writer_emitter(const ev_writer *w, int index, bool in_flow)
{
    return (ev_emitter){w->after, index, in_flow, w->spellings};
}

/* Block lists and block texts start on lines of their own: they go with all that follows the
 * colon. */
static size_t find_value_start(const ev_writer *w, const ev_node *node)
{
    const char *text = w->splice.document->text;
    bool quoted = node->end > node->start && strchr("\"'", text[node->start]);
    bool own_lines = node->kind == EV_NODE_SCALAR ? !node->plain && !quoted : !node->flow;
    const char *colon = own_lines ? strchr(text + node->key->end, ':') : NULL;
    return colon ? (size_t)(colon - text) + 1 : node->start;
}

/* The text whose unit a new value of the node keeps. */
static const char *unit_source(const ev_node *node)
{
    while (node && node->kind != EV_NODE_SCALAR)
        node = node->first;
    return node ? node->text : NULL;
}

static void replace_value(ev_writer *w, const ev_mapping *m, const ev_field *field,
                          const ev_node *node)
{
    ev_buffer text = {0};
    size_t start = find_value_start(w, node);
    bool in_flow = ev_node_in_flow(node->parent);
    if (start != node->start)
        ev_buffer_add(&text, " ", 1);
    if (field->word && field->word->kind == EV_VALUE_TEXT) {
        ev_emit_text(&text, ev_row_text(m->after, field->word), in_flow,
                     w->splice.document->text[node->start] == '"');
    } else {
        ev_emitter emitter = ev_writer_emitter(w, m->index, in_flow);
        ev_emit_field(&text, &emitter, field, unit_source(node));
    }
    ev_splice_add(&w->splice, start, node->end, text.data);
}

static void replace_entry(ev_writer *w, const ev_mapping *m, const ev_parameter *row,
                          const ev_node *entry, double before, double after)
{
    if (before == after)
        return;
    ev_buffer text = {0};
    ev_emitter emitter = ev_writer_emitter(w, m->index, true);
    ev_emit_row(&text, &emitter, row, after, entry->text);
    ev_splice_add(&w->splice, entry->start, entry->end, text.data);
}

/* Only the members of a vector or list that changed; false when it changed its form. */
static bool replace_entries(ev_writer *w, const ev_mapping *m, const ev_field *field,
                            const ev_node *node)
{
    const ev_parameter *row = field->word;
    if (node->kind != EV_NODE_SEQUENCE)
        return false;
    if (ev_field_is_vector(m->before, field) && ev_field_is_vector(m->after, field)) {
        for (int i = 0; i < field->part_count; i++)
            replace_entry(w, m, field->part[i], ev_node_at(node, i),
                          ev_row_get(m->before, field->part[i]),
                          ev_row_get(m->after, field->part[i]));
        return true;
    }
    if (row == NULL || row->list_capacity == 0 ||
        ev_row_list_count(m->before, row) != ev_row_list_count(m->after, row))
        return false;
    for (int i = 0; i < ev_row_list_count(m->after, row); i++)
        replace_entry(w, m, row, ev_node_at(node, i), ev_row_list_get(m->before, row, i),
                      ev_row_list_get(m->after, row, i));
    return true;
}

static bool is_renamed(const ev_writer *w, const ev_node *node)
{
    for (int i = 0; i < w->renamed_count; i++) {
        if (w->renamed[i] == node)
            return true;
    }
    return false;
}

/* The key that gives a rival of the field, whose place the field takes: first of its own choice,
 * then of the three. */
static const ev_node *find_rival(const ev_writer *w, const ev_mapping *m, const ev_field *field)
{
    const ev_parameter *row = field->word, *other;
    const ev_node *of_three = NULL;
    for (const ev_node *child = m->node->first; row && child; child = child->next) {
        ev_field rival;
        if (!ev_field_find(m->section, child->key->text, &rival) || !rival.word ||
            is_renamed(w, child) || !ev_row_is_derived(m->after, rival.word))
            continue;
        other = rival.word;
        if (row->choice && other->choice && strcmp(row->choice, other->choice) == 0)
            return child;
        if (row->of_three && other->of_three && of_three == NULL)
            of_three = child;
    }
    return of_three;
}

static void take_place(ev_writer *w, const ev_mapping *m, const ev_field *field,
                       const ev_node *rival)
{
    if (w->renamed_count < EV_WRITER_RENAMED)
        w->renamed[w->renamed_count++] = rival;
    ev_splice_add(&w->splice, rival->key->start, rival->key->end,
                  ev_text_duplicate(field->key, strlen(field->key)));
    replace_value(w, m, field, rival);
}

/* Order of keys in a mapping: the format's version, fields as in the table, then sections. */
static int rank_key(const ev_section *section, const char *key)
{
    ev_field field;
    if (ev_field_find(section, key, &field))
        return 1 + (int)((field.word ? field.word : field.part[0]) - ev_parameter_table);
    for (int i = 1; i < ev_section_count(); i++) {
        if (section == ev_section_at(0) && strcmp(ev_section_at(i)->key, key) == 0)
            return 1000 + i;
    }
    return 0;
}

void ev_writer_insert_key(ev_writer *w, const ev_node *node, const ev_section *section,
                          const char *key, char *member)
{
    const ev_document *document = w->splice.document;
    const ev_node *above = NULL;
    ev_buffer text = {0};
    for (const ev_node *child = node->first; child; child = child->next) {
        if (rank_key(section, child->key->text) <= rank_key(section, key))
            above = child;
    }
    size_t at = above ? above->end : node->first ? node->first->key->start : node->start + 1;
    if (ev_node_in_flow(node)) {
        bool last = node->first == NULL;
        ev_buffer_format(&text, above ? ", %s" : last ? "%s" : "%s, ", member);
    } else {
        size_t column = node->last->key->start - ev_line_start(document, node->last->key->start);
        if (above) {
            at = ev_line_end(document, above->end);
            ev_buffer_format(&text, "%s%*s%s", ev_newline(document), (int)column, "", member);
        } else {
            ev_buffer_format(&text, "%s%s%*s", member, ev_newline(document), (int)column, "");
        }
    }
    free(member);
    ev_splice_add(&w->splice, at, at, text.data);
}

static void insert_field(ev_writer *w, const ev_mapping *m, const ev_field *field)
{
    ev_buffer member = {0};
    ev_emitter emitter = ev_writer_emitter(w, m->index, ev_node_in_flow(m->node));
    ev_buffer_format(&member, "%s: ", field->key);
    ev_emit_field(&member, &emitter, field, NULL);
    ev_writer_insert_key(w, m->node, m->section, field->key, member.data);
}

static void write_field(ev_writer *w, const ev_mapping *m, const ev_field *field)
{
    char before[EV_CANONICAL_CAPACITY], after[EV_CANONICAL_CAPACITY];
    ev_field_canonical(m->before, field, before, sizeof before);
    ev_field_canonical(m->after, field, after, sizeof after);
    if (after[0] == 0 || strcmp(before, after) == 0)
        return;
    const ev_node *node = ev_node_member(m->node, field->key);
    const ev_node *rival = node ? NULL : find_rival(w, m, field);
    if (node && !replace_entries(w, m, field, node))
        replace_value(w, m, field, node);
    else if (rival)
        take_place(w, m, field, rival);
    else if (!node)
        insert_field(w, m, field);
}

void ev_writer_mapping(ev_writer *w, const ev_mapping *m)
{
    int cursor = 0;
    ev_field field;
    while (ev_field_next(m->section, &cursor, &field))
        write_field(w, m, &field);
}

char *ev_document_splice(const ev_document *document, const ev_design *before,
                         const ev_design *after, const ev_spelling *spellings, size_t *size)
{
    ev_writer w = {before, after, spellings, {.document = document}, {NULL}, 0};
    for (int i = 0; i < ev_section_count(); i++)
        ev_writer_section(&w, ev_section_at(i));
    return ev_splice_apply(&w.splice, size);
}
