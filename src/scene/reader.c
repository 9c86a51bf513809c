/* Reads a scene's document into a design by walking the table. Called by scene.c; values are
 * value.c's, text is document.c's, geometry is for optics to judge. */
#include "scene/reader.h"

#include "base/message.h"
#include "base/text.h"
#include "scene/value.h"

#include <assert.h>
#include <stdlib.h>
#include <string.h>

#define VERSION_KEY "evenpath"
#define VERSION "1"

typedef struct reader {
    const ev_document *document;
    ev_diagnostics *diagnostics;
    ev_design *design;
} reader;

static bool is_top(const ev_section *section)
{
    return section == ev_section_at(0);
}

/* "the scene", "'main'", "an entry of 'feeds'" */
static void name_section(const ev_section *section, char *text, size_t size)
{
    if (is_top(section))
        ev_text_copy(text, size, "the scene");
    else if (section->is_list)
        snprintf(text, size, "an entry of '%s'", section->key);
    else
        snprintf(text, size, "'%s'", section->key);
}

static const ev_section *find_section(const char *key)
{
    for (int i = 1; i < ev_section_count(); i++) {
        if (strcmp(ev_section_at(i)->key, key) == 0)
            return ev_section_at(i);
    }
    return NULL;
}

/* Every key that is legal in a section: the nearest to `wanted`, and all of them as a list. */
static void offer_key(const char *wanted, const char *key, ev_nearest *nearest, ev_buffer *list)
{
    ev_nearest_offer(nearest, wanted, key);
    ev_buffer_format(list, "%s%s", list->size ? ", " : "", key);
}

static void offer_keys(const ev_section *section, const char *wanted, ev_nearest *nearest,
                       ev_buffer *list)
{
    int cursor = 0;
    ev_field field;
    while (ev_field_next(section, &cursor, &field))
        offer_key(wanted, field.key, nearest, list);
    for (int i = 1; is_top(section) && i < ev_section_count(); i++)
        offer_key(wanted, ev_section_at(i)->key, nearest, list);
}

/* The section that has the key, other than `section`. */
static const ev_section *find_home(const ev_section *section, const char *key)
{
    ev_field field;
    for (int i = 0; i < ev_section_count(); i++) {
        const ev_section *other = ev_section_at(i);
        if (other != section && !is_top(other) && ev_field_find(other, key, &field))
            return other;
    }
    return NULL;
}

static void report_unknown(reader *r, const ev_node *child, const ev_section *section)
{
    char where[64], key[EV_NAME_CAPACITY];
    name_section(section, where, sizeof where);
    ev_text_copy(key, sizeof key, child->key->text);
    ev_nearest nearest = {0};
    ev_buffer list = {0};
    offer_keys(section, key, &nearest, &list);
    const ev_section *home = find_home(section, key);
    if (home)
        ev_report_node(r->document, child->key, r->diagnostics, key_misplaced, key, where,
                       home->key);
    else if (ev_nearest_is_plausible(&nearest, key))
        ev_report_node(r->document, child->key, r->diagnostics, key_unknown, key, where,
                       nearest.word);
    else
        ev_report_node(r->document, child->key, r->diagnostics, key_unknown_list, key, where,
                       list.data);
    free(list.data);
}

static bool is_duplicate(reader *r, const ev_node *mapping, const ev_node *child)
{
    const ev_node *first = ev_node_member(mapping, child->key->text);
    if (first == child)
        return false;
    char key[EV_NAME_CAPACITY];
    ev_text_copy(key, sizeof key, child->key->text);
    ev_document_place place = ev_document_locate(r->document, first->key->start, first->key->end);
    free(place.line);
    ev_report_node(r->document, child->key, r->diagnostics, key_duplicate, key, place.place.line);
    return true;
}

static bool is_mapping(reader *r, const ev_node *node, const char *key)
{
    char found[80];
    ev_node_describe(node, found, sizeof found);
    if (node->kind != EV_NODE_MAPPING)
        ev_report_node(r->document, node, r->diagnostics, not_mapping, key, found);
    return node->kind == EV_NODE_MAPPING;
}

/* "focal_length, f_over_d or depth": the members of a choice group, without their section. */
static void list_rivals(const ev_section *section, const char *choice, char *text, size_t size)
{
    int cursor = 0;
    ev_field field;
    text[0] = 0;
    while (ev_field_next(section, &cursor, &field)) {
        size_t length = strlen(text);
        if (field.word && field.word->choice && strcmp(field.word->choice, choice) == 0)
            snprintf(text + length, size - length, "%s%s", length ? ", " : "", field.key);
    }
}

static bool same_choice(const ev_parameter *a, const ev_parameter *b)
{
    return a && b && a->choice && b->choice && strcmp(a->choice, b->choice) == 0;
}

/* The member of the mapping that gives the row or a rival of it. */
static ev_node *find_given(const ev_node *mapping, const ev_parameter *row, const ev_node *before)
{
    const ev_section *section = ev_section_of(row);
    for (ev_node *child = mapping->first; child && child != before; child = child->next) {
        ev_field field;
        if (ev_field_find(section, child->key->text, &field) &&
            (field.word == row || same_choice(field.word, row)))
            return child;
    }
    return NULL;
}

static bool contradicts_choice(reader *r, const ev_node *mapping, const ev_node *child,
                               const ev_parameter *row)
{
    const ev_node *rival = row && row->choice ? find_given(mapping, row, child) : NULL;
    if (rival == NULL)
        return false;
    char rivals[160];
    list_rivals(ev_section_of(row), row->choice, rivals, sizeof rivals);
    ev_report_node(r->document, child->key, r->diagnostics, choice_two, rival->key->text,
                   child->key->text, rivals);
    return true;
}

/* Of a subreflector's three exactly two are given. */
static void check_two_of_three(reader *r, const ev_node *mapping, const ev_section *section)
{
    int seen = 0, which = 0;
    const ev_node *last = NULL;
    for (const ev_node *child = mapping->first; child; child = child->next) {
        ev_field field;
        if (!ev_field_find(section, child->key->text, &field) || !field.word ||
            !field.word->of_three || (which & (1 << field.word->of_three)))
            continue;
        which |= 1 << field.word->of_three;
        last = child;
        seen++;
    }
    if (seen == 3)
        ev_report_node(r->document, last->key, r->diagnostics, sub_three, last->key->text);
    if (seen < 2)
        ev_report_node(r->document, mapping->key, r->diagnostics, sub_one,
                       seen == 1 ? "here is only one" : "here is none");
}

/* What stands for a mapping as a whole: its key, in a list its first member. */
static const ev_node *find_handle(const ev_node *mapping)
{
    if (mapping->key)
        return mapping->key;
    return mapping->first ? mapping->first->key : mapping;
}

static void check_required(reader *r, const ev_node *mapping, const ev_section *section)
{
    char where[64], rivals[160], example[160];
    const ev_node *at = find_handle(mapping);
    const char *reported = "";
    int cursor = 0;
    ev_field field;
    name_section(section, where, sizeof where);
    while (ev_field_next(section, &cursor, &field)) {
        const ev_parameter *row = field.word;
        if (!row || !row->required || find_given(mapping, row, NULL))
            continue;
        snprintf(example, sizeof example, "%s: %s", field.key, row->example);
        if (!row->choice) {
            ev_report_node(r->document, at, r->diagnostics, key_missing, where, field.key, example);
        } else if (strcmp(reported, row->choice) != 0) {
            list_rivals(section, row->choice, rivals, sizeof rivals);
            ev_report_node(r->document, at, r->diagnostics, key_missing_choice, where, rivals,
                           example);
            reported = row->choice;
        }
    }
}

/* A gaussian is fixed by its taper alone, a table by nothing else. */
static void check_taper(reader *r, const ev_node *mapping, const ev_feed_design *feed)
{
    static const char *const keys[] = {"exponent", "edge_taper"};
    for (int i = 0; i < 2 && feed->pattern == EV_PATTERN_TABLE; i++) {
        const ev_node *unused = ev_node_member(mapping, keys[i]);
        if (unused)
            ev_report_at(r->document, unused->key->start, unused->key->end, r->diagnostics,
                         EV_SEVERITY_WARNING, taper_on_table, keys[i]);
    }
    const ev_node *exponent = ev_node_member(mapping, "exponent");
    if (feed->pattern == EV_PATTERN_GAUSSIAN && exponent)
        ev_report_node(r->document, exponent->key, r->diagnostics, exponent_on_gaussian,
                       exponent->text ? exponent->text : "");
}

static void read_section(reader *r, const ev_node *child, const ev_section *section);

static void read_member(reader *r, const ev_node *mapping, const ev_node *child,
                        const ev_section *section, void *owner)
{
    const char *key = child->key->text;
    const ev_section *inner = is_top(section) ? find_section(key) : NULL;
    ev_field field;
    if (is_duplicate(r, mapping, child) || (is_top(section) && strcmp(key, VERSION_KEY) == 0))
        return;
    if (inner) {
        read_section(r, child, inner);
        return;
    }
    if (!ev_field_find(section, key, &field)) {
        report_unknown(r, child, section);
        return;
    }
    if (contradicts_choice(r, mapping, child, field.word))
        return;
    bool read = ev_field_read(owner, &field, (ev_spot){r->document, child}, r->diagnostics);
    if (read && field.part_count == 0)
        ev_row_choose(owner, field.word);
}

static void read_mapping(reader *r, const ev_node *mapping, const ev_section *section, void *owner)
{
    for (const ev_node *child = mapping->first; child; child = child->next)
        read_member(r, mapping, child, section, owner);
    check_required(r, mapping, section);
    if (section->owner == EV_OWNER_SUB)
        check_two_of_three(r, mapping, section);
    if (section->owner == EV_OWNER_FEED)
        check_taper(r, mapping, owner);
}

void ev_default_entry_name(const ev_section *section, int index, char *name, size_t size)
{
    ev_design design = {0};
    ev_section_append(&design, section);
    const char *base = ev_section_entry_name(&design, section, 0);
    if (index == 0)
        ev_text_copy(name, size, base);
    else
        snprintf(name, size, "%.30s%d", base, index + 1);
}

/* Two entries of one name could not be told apart in an address. */
static void check_names(reader *r, const ev_node *list, const ev_section *section)
{
    int count = ev_section_entries(r->design, section);
    for (int i = 1; i < count; i++) {
        const char *name = ev_section_entry_name(r->design, section, i);
        for (int j = 0; j < i; j++) {
            if (strcmp(name, ev_section_entry_name(r->design, section, j)) != 0)
                continue;
            const ev_node *entry = ev_node_at(list, i), *at = ev_node_member(entry, "name");
            ev_report_node(r->document, at ? at : entry, r->diagnostics, name_twice, name,
                           section->key);
            break;
        }
    }
}

static void read_list(reader *r, const ev_node *list, const ev_section *section)
{
    char found[80];
    ev_node_describe(list, found, sizeof found);
    int count = list->kind == EV_NODE_SEQUENCE ? ev_node_count(list) : 0;
    if (list->kind != EV_NODE_SEQUENCE) {
        ev_report_node(r->document, list, r->diagnostics, not_list, section->key, found);
        return;
    }
    if (count > ev_section_capacity(section)) {
        ev_report_node(r->document, list->key, r->diagnostics, list_count, section->key,
                       ev_section_capacity(section), count);
        return;
    }
    ev_field name_field;
    ev_field_find(section, "name", &name_field);
    for (int i = 0; i < count; i++) {
        const ev_node *entry = ev_node_at(list, i);
        char *owner = ev_section_append(r->design, section);
        ev_default_entry_name(section, i, owner + name_field.word->offset, EV_NAME_CAPACITY);
        if (is_mapping(r, entry, section->key))
            read_mapping(r, entry, section, owner);
    }
    check_names(r, list, section);
}

static void read_section(reader *r, const ev_node *child, const ev_section *section)
{
    if (section->is_list) {
        read_list(r, child, section);
    } else if (is_mapping(r, child, section->key)) {
        void *owner = section->optional ? ev_section_append(r->design, section) : r->design;
        read_mapping(r, child, section, owner);
    }
}

static bool check_version(reader *r)
{
    const ev_node *root = r->document->root, *version = ev_node_member(root, VERSION_KEY);
    if (version == NULL) {
        ev_report_at(r->document, 0, 0, r->diagnostics, EV_SEVERITY_ERROR, version_missing,
                     VERSION_KEY ": " VERSION);
        return false;
    }
    if (version->kind == EV_NODE_SCALAR && strcmp(version->text, VERSION) == 0)
        return true;
    char found[80];
    ev_node_describe(version, found, sizeof found);
    ev_report_node(r->document, version, r->diagnostics, version_wrong, found);
    return false;
}

/* A mapping or list that is missing altogether. */
static void check_sections(reader *r)
{
    const ev_node *root = r->document->root;
    assert(root->first != NULL); /* the version, at least */
    if (ev_node_member(root, "main") == NULL)
        ev_report_node(r->document, root->first->key, r->diagnostics, key_missing, "the scene",
                       "main", "main: {diameter: 1.2 m, f_over_d: 0.6}");
    const ev_node *feeds = ev_node_member(root, "feeds");
    if (feeds == NULL)
        ev_report_node(r->document, root->first->key, r->diagnostics, key_missing, "the scene",
                       "feeds", "feeds: [{name: main, edge_taper: 11 dB}]");
    else if (feeds->kind == EV_NODE_SEQUENCE && feeds->first == NULL)
        ev_report_node(r->document, feeds, r->diagnostics, key_missing, "'feeds'", "name",
                       "- name: main");
}

bool ev_design_read(const ev_document *document, ev_design *design, ev_diagnostics *diagnostics)
{
    reader r = {document, diagnostics, design};
    int errors_before = diagnostics->error_count;
    *design = ev_default_design();
    design->feed_count = 0;
    if (!is_mapping(&r, document->root, "evenpath") || !check_version(&r))
        return false;
    read_mapping(&r, document->root, ev_section_at(0), design);
    check_sections(&r);
    ev_design_settle(design);
    return diagnostics->error_count == errors_before;
}

ev_node *ev_document_entry(const ev_document *document, const ev_section *section, int index)
{
    assert(document->root != NULL);
    if (is_top(section))
        return document->root;
    ev_node *node = ev_node_member(document->root, section->key);
    return node && section->is_list ? ev_node_at(node, index) : node;
}

/* The index of the list entry of that name in the document. */
static int find_entry(const ev_document *document, const ev_section *section, const char *name)
{
    const ev_node *list = ev_node_member(document->root, section->key);
    for (int i = 0; list && i < ev_node_count(list); i++) {
        const ev_node *given = ev_node_member(ev_node_at(list, i), "name");
        char own[EV_NAME_CAPACITY];
        ev_default_entry_name(section, i, own, sizeof own);
        if (strcmp(given ? given->text : own, name) == 0)
            return i;
    }
    return -1;
}

const ev_node *ev_document_find_row(const ev_document *document, const ev_parameter *row,
                                    const char *entry_name)
{
    const ev_section *section = ev_section_of(row);
    int index = section->is_list ? find_entry(document, section, entry_name) : 0;
    const ev_node *mapping = index < 0 ? NULL : ev_document_entry(document, section, index);
    if (mapping == NULL)
        return NULL;
    ev_field field = ev_field_of(row);
    const ev_node *node = ev_node_member(mapping, field.key);
    for (int i = 0; node && node->kind == EV_NODE_SEQUENCE && i < field.part_count; i++) {
        if (field.part[i] == row)
            return ev_node_at(node, i);
    }
    if (node == NULL)
        node = find_given(mapping, row, NULL);
    return node ? node : find_handle(mapping);
}
