/* Sections and lists of the document as a whole: made, taken out, and their entries matched with
 * those of the design. Called by writer.c. */
#include "scene/writer_part.h"

#include "scene/reader.h"

#include <assert.h>
#include <stdlib.h>
#include <string.h>

/* The indentation a document uses, from a mapping that is sure to be there. */
static int find_step(const ev_document *document)
{
    const ev_node *main_node = ev_node_member(document->root, "main");
    if (main_node == NULL || main_node->flow || main_node->first == NULL)
        return 2;
    size_t at = main_node->first->key->start;
    size_t column = at - ev_line_start(document, at);
    return column > 0 && column <= 8 ? (int)column : 2;
}

/* A section that the document does not have, with all its entries. */
static void insert_section(ev_writer *w, const ev_section *section)
{
    const ev_document *document = w->splice.document;
    assert(document->root != NULL);
    bool flow = document->root->flow;
    int step = find_step(document), entries = ev_section_entries(w->after, section);
    ev_buffer text = {0}, join = {0};
    ev_buffer_format(&join, flow ? ", " : "%s%*s", ev_newline(document),
                     section->is_list ? step + 2 : step, "");
    ev_buffer_format(&text, "%s:%s", section->key, !flow ? "" : section->is_list ? " [" : " {");
    for (int i = 0; i < entries; i++) {
        ev_emitter emitter = ev_writer_emitter(w, i, flow);
        if (flow)
            ev_buffer_format(&text, "%s%s", i > 0 ? ", " : "", section->is_list ? "{" : "");
        else
            ev_buffer_format(&text, "%s%*s%s", ev_newline(document), step, "",
                             section->is_list ? "- " : "");
        ev_emit_members(&text, &emitter, section, join.data);
        ev_buffer_format(&text, "%s", flow && section->is_list ? "}" : "");
    }
    ev_buffer_format(&text, "%s", !flow ? "" : section->is_list ? "]" : "}");
    free(join.data);
    ev_writer_insert_key(w, document->root, ev_section_at(0), section->key, text.data);
}

/* What stands between members of a {...} goes with the one that goes. */
static void remove_from_flow(ev_writer *w, const ev_node *previous, size_t start, size_t end,
                             const ev_node *next)
{
    size_t from = previous ? previous->end : start;
    size_t next_start = next ? (next->key ? next->key->start : next->start) : end;
    ev_splice_add(&w->splice, from, previous ? end : next_start, ev_text_duplicate("", 0));
}

static void remove_section(ev_writer *w, const ev_node *node)
{
    const ev_node *previous = NULL;
    for (const ev_node *child = node->parent->first; child != node; child = child->next)
        previous = child;
    if (ev_node_in_flow(node->parent))
        remove_from_flow(w, previous, node->key->start, node->end, node->next);
    else
        ev_splice_remove_lines(&w->splice, node->key->start, node->end);
}

/* Where the line of an entry's dash starts. */
static size_t find_dash_line(const ev_document *document, const ev_node *list, const ev_node *entry)
{
    assert(entry != NULL); /* entries are counted by the design that the document gave */
    size_t column = list->start - ev_line_start(document, list->start);
    size_t line = ev_line_start(document, entry->start);
    while (line > list->key->start) {
        size_t blank = strspn(document->text + line, " ");
        if (blank == column && document->text[line + blank] == '-')
            break;
        line = ev_line_start(document, line - 1);
    }
    return line;
}

static void remove_entry(ev_writer *w, const ev_node *list, const ev_node *entry,
                         const ev_node *kept_before)
{
    const ev_node *previous = NULL;
    for (const ev_node *child = list->first; child != entry; child = child->next)
        previous = child;
    if (list->flow)
        remove_from_flow(w, kept_before ? previous : NULL, entry->start, entry->end, entry->next);
    else
        ev_splice_remove_lines(&w->splice, find_dash_line(w->splice.document, list, entry),
                               entry->end);
}

/* A new entry in a list that the document has, after the entry kept before it. */
static void insert_entry(ev_writer *w, const ev_section *section, const ev_node *list, int index,
                         const ev_node *kept_before)
{
    const ev_document *document = w->splice.document;
    const char *newline = ev_newline(document);
    bool braces = list->flow || (list->first && list->first->flow);
    int column = (int)(list->start - ev_line_start(document, list->start));
    ev_buffer text = {0}, join = {0}, members = {0};
    ev_emitter emitter = ev_writer_emitter(w, index, braces);
    ev_buffer_format(&join, braces ? ", " : "%s%*s", newline, column + 2, "");
    ev_emit_members(&members, &emitter, section, join.data);
    size_t at;
    if (list->flow) {
        at = kept_before ? kept_before->end : list->first ? list->first->start : list->start + 1;
        ev_buffer_format(&text, "%s{%s}%s", kept_before ? ", " : "", members.data,
                         !kept_before && list->first ? ", " : "");
    } else {
        at = kept_before ? ev_line_end(document, kept_before->end)
                         : find_dash_line(document, list, list->first) - strlen(newline);
        ev_buffer_format(&text, braces ? "%s%*s- {%s}" : "%s%*s- %s", newline, column, "",
                         members.data);
    }
    free(join.data);
    free(members.data);
    ev_splice_add(&w->splice, at, at, text.data);
}

static int find_name(const ev_design *design, const ev_section *section, const char *name, int from)
{
    for (int i = from; i < ev_section_entries(design, section); i++) {
        if (strcmp(ev_section_entry_name(design, section, i), name) == 0)
            return i;
    }
    return -1;
}

/* The entry before that became the index-th after: the same name, or in the same place a name that
 * is gone (it was renamed). Order must be kept, so the search starts at `from`. */
static int match_entry(const ev_writer *w, const ev_section *section, int index, int from)
{
    int same = find_name(w->before, section, ev_section_entry_name(w->after, section, index), from);
    if (same >= 0 || from >= ev_section_entries(w->before, section))
        return same;
    if (find_name(w->before, section, ev_section_entry_name(w->after, section, index), 0) >= 0)
        return -1;
    const char *there = ev_section_entry_name(w->before, section, from);
    return find_name(w->after, section, there, 0) < 0 ? from : -1;
}

/* An entry without a name of its own is called by its place, which may have changed. */
static void edit_entry(ev_writer *w, const ev_section *section, const ev_node *entry, int before,
                       int after)
{
    union {
        ev_feed_design feed;
        ev_strut_design strut;
    } owner;
    ev_field name;
    size_t size = section->owner == EV_OWNER_FEED ? sizeof owner.feed : sizeof owner.strut;
    memcpy(&owner, ev_section_owner_const(w->before, section, before), size);
    ev_field_find(section, "name", &name);
    if (ev_node_member(entry, "name") == NULL)
        ev_default_entry_name(section, after, (char *)&owner + name.word->offset, EV_NAME_CAPACITY);
    ev_mapping m = {section, entry, &owner, ev_section_owner_const(w->after, section, after),
                    after};
    ev_writer_mapping(w, &m);
}

static void write_list(ev_writer *w, const ev_section *section, const ev_node *list)
{
    const ev_node *kept = NULL;
    int next = 0; /* of the entries before, not yet dealt with */
    for (int i = 0; i < ev_section_entries(w->after, section); i++) {
        int match = match_entry(w, section, i, next);
        for (; match >= 0 && next < match; next++)
            remove_entry(w, list, ev_node_at(list, next), kept);
        if (match < 0) {
            insert_entry(w, section, list, i, kept);
            continue;
        }
        kept = ev_node_at(list, match);
        edit_entry(w, section, kept, match, i);
        next = match + 1;
    }
    for (; next < ev_section_entries(w->before, section); next++)
        remove_entry(w, list, ev_node_at(list, next), kept);
}

/* Whether any field of a section that is no list differs. */
static bool differs(const ev_writer *w, const ev_section *section)
{
    ev_buffer before = {0}, after = {0};
    ev_emitter emitter = {w->before, 0, false, NULL};
    ev_emit_members(&before, &emitter, section, "\n");
    emitter.design = w->after;
    ev_emit_members(&after, &emitter, section, "\n");
    bool same = before.data == NULL ? after.data == NULL
                                    : after.data && strcmp(before.data, after.data) == 0;
    free(before.data);
    free(after.data);
    return !same;
}

void ev_writer_section(ev_writer *w, const ev_section *section)
{
    bool top = section == ev_section_at(0);
    const ev_node *root = w->splice.document->root;
    const ev_node *node = top ? root : ev_node_member(root, section->key);
    int entries = ev_section_entries(w->after, section);
    if (node == NULL) {
        if (entries > 0 && (section->optional || section->is_list || differs(w, section)))
            insert_section(w, section);
    } else if (entries == 0) {
        if (ev_section_entries(w->before, section) > 0)
            remove_section(w, node);
    } else if (section->is_list) {
        write_list(w, section, node);
    } else {
        ev_mapping m = {section, node, ev_section_owner_const(w->before, section, 0),
                        ev_section_owner_const(w->after, section, 0), 0};
        ev_writer_mapping(w, &m);
    }
}

char *ev_document_write(const ev_design *design, const ev_spelling *spellings, size_t *size)
{
    ev_buffer text = {0};
    ev_buffer_format(&text, "evenpath: 1\n");
    for (int i = 0; i < ev_section_count(); i++) {
        const ev_section *section = ev_section_at(i);
        for (int entry = 0; entry < ev_section_entries(design, section); entry++) {
            ev_emitter emitter = {design, entry, false, spellings};
            ev_buffer members = {0};
            ev_emit_members(&members, &emitter, section,
                            i == 0             ? "\n"
                            : section->is_list ? "\n    "
                                               : "\n  ");
            if (members.size > 0 && i > 0 && entry == 0)
                ev_buffer_format(&text, "%s:\n", section->key);
            if (members.size > 0)
                ev_buffer_format(&text, "%s%s\n",
                                 i == 0             ? ""
                                 : section->is_list ? "  - "
                                                    : "  ",
                                 members.data);
            free(members.data);
        }
    }
    *size = text.size;
    return text.data;
}
