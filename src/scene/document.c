/* Text to tree, by libfyaml's events. Called by the scene reader and writer; knows nothing of
 * antennas. Everything a hostile file can do (depth, size, aliases) is stopped here. */
#include "scene/document.h"

#include "base/message.h"
#include "base/text.h"

#include <assert.h>
#include <libfyaml.h>
#include <stdlib.h>
#include <string.h>

/* What is known while events come in. */
typedef struct builder {
    ev_document *document;
    ev_diagnostics *diagnostics;
    ev_node *open;    /* the innermost mapping or sequence */
    ev_node *key;     /* of a mapping, waiting for its value */
    int depth, count; /* open nodes; nodes so far */
    size_t last_end;  /* where the last token ended */
    bool failed;
} builder;

ev_document_place ev_document_locate(const ev_document *document, size_t start, size_t end)
{
    const char *text = document->text;
    size_t from = start > document->size ? document->size : start;
    int line = 1;
    size_t line_start = 0;
    for (size_t i = 0; i < from; i++) {
        if (text[i] == '\n') {
            line++;
            line_start = i + 1;
        }
    }
    size_t line_end = line_start + strcspn(text + line_start, "\r\n");
    if (from > line_end)
        from = line_end;
    size_t to = end < from ? from : end > line_end ? line_end : end;
    char *copy = ev_text_duplicate(text + line_start, line_end - line_start);
    int column = (int)ev_text_characters(text + line_start, from - line_start) + 1;
    int width = (int)ev_text_characters(text + from, to - from);
    return (ev_document_place){{.file = document->name,
                                .line = line,
                                .column = column,
                                .source = copy,
                                .width = width > 0 ? width : 1},
                               copy};
}

ev_node *ev_node_member(const ev_node *mapping, const char *key)
{
    if (mapping == NULL || mapping->kind != EV_NODE_MAPPING)
        return NULL;
    for (ev_node *child = mapping->first; child; child = child->next) {
        if (strcmp(child->key->text, key) == 0)
            return child;
    }
    return NULL;
}

int ev_node_count(const ev_node *node)
{
    int count = 0;
    for (const ev_node *child = node->first; child; child = child->next)
        count++;
    return count;
}

ev_node *ev_node_at(const ev_node *node, int index)
{
    ev_node *child = node->first;
    while (child && index-- > 0)
        child = child->next;
    return child;
}

void ev_node_describe(const ev_node *node, char *text, size_t size)
{
    if (node->kind == EV_NODE_SEQUENCE)
        ev_text_copy(text, size, "a list");
    else if (node->kind == EV_NODE_MAPPING)
        ev_text_copy(text, size, "keys with values");
    else if (node->text[0] == 0)
        ev_text_copy(text, size, "nothing");
    else
        snprintf(text, size, "'%.40s'", node->text);
}

static ev_node *add_node(builder *b, ev_node_kind kind)
{
    ev_node *node = ev_allocate(sizeof *node);
    node->kind = kind;
    node->allocated = b->document->nodes;
    b->document->nodes = node;
    b->count++;
    return node;
}

/* Puts a finished or opened node where it belongs: root, key, member or entry. */
static void place_node(builder *b, ev_node *node)
{
    ev_node *parent = b->open;
    node->parent = parent;
    if (parent == NULL) {
        b->document->root = node;
        return;
    }
    if (parent->kind == EV_NODE_MAPPING && b->key == NULL) {
        b->key = node;
        return;
    }
    node->key = b->key;
    b->key = NULL;
    if (parent->last)
        parent->last->next = node;
    else
        parent->first = node;
    parent->last = node;
}

#define fail_builder(b, from, to, id, ...)                                                         \
    do {                                                                                           \
        ev_report_at((b)->document, from, to, (b)->diagnostics, EV_SEVERITY_ERROR, id,             \
                     __VA_ARGS__);                                                                 \
        (b)->failed = true;                                                                        \
    } while (0)

static size_t mark_or(const struct fy_mark *mark, size_t otherwise)
{
    return mark ? mark->input_pos : otherwise;
}

/* Nothing was written: the value is empty, right after the colon or dash. */
static size_t find_empty_place(const builder *b)
{
    const char *text = b->document->text;
    size_t at = b->last_end;
    while (text[at] == ' ' || text[at] == '\t')
        at++;
    return text[at] == ':' ? at + 1 : b->last_end;
}

static void take_scalar(builder *b, struct fy_event *event)
{
    ev_node *node = add_node(b, EV_NODE_SCALAR);
    struct fy_token *token = event->scalar.value;
    const struct fy_mark *start = fy_event_start_mark(event), *end = fy_event_end_mark(event);
    size_t length = 0;
    const char *text = token ? fy_token_get_text(token, &length) : NULL;
    node->text = ev_text_duplicate(text ? text : "", text ? length : 0);
    node->start = mark_or(start, find_empty_place(b));
    node->end = mark_or(end, node->start);
    enum fy_node_style style = fy_event_get_node_style(event);
    bool quoted = style == FYNS_SINGLE_QUOTED || style == FYNS_DOUBLE_QUOTED;
    node->plain = !quoted && (style == FYNS_PLAIN || length == 0);
    if (quoted && node->start > 0) { /* libfyaml marks what is between the quotes */
        node->start--;
        node->end++;
    }
    while (!quoted && node->end > node->start && strchr("\r\n", b->document->text[node->end - 1]))
        node->end--; /* a block scalar claims its line's end; the line is the writer's */
    b->last_end = node->end;
    if (b->open && b->open->kind == EV_NODE_MAPPING && b->key == NULL && length == 0)
        fail_builder(b, node->start, node->end, key_not_plain, "; here it is empty");
    place_node(b, node);
}

static void open_node(builder *b, struct fy_event *event, ev_node_kind kind)
{
    ev_node *node = add_node(b, kind);
    node->start = mark_or(fy_event_start_mark(event), b->last_end);
    node->end = mark_or(fy_event_end_mark(event), node->start);
    node->flow = node->end > node->start;
    if (b->open && b->open->kind == EV_NODE_MAPPING && b->key == NULL)
        fail_builder(b, node->start, node->end, key_not_plain, ", not a list or a mapping");
    if (++b->depth > EV_DOCUMENT_DEPTH)
        fail_builder(b, node->start, node->end, yaml_too_deep, EV_DOCUMENT_DEPTH);
    place_node(b, node);
    b->open = node;
    b->last_end = node->end;
}

static void close_node(builder *b, struct fy_event *event)
{
    ev_node *node = b->open;
    assert(node != NULL); /* libfyaml pairs its events */
    if (node->flow)
        b->last_end = mark_or(fy_event_end_mark(event), b->last_end);
    node->end = b->last_end;
    b->depth--;
    b->open = node->parent;
}

/* Anchors and tags have no use here; without them an alias cannot multiply anything. */
static void refuse_properties(builder *b, struct fy_token *anchor, struct fy_token *tag)
{
    struct fy_token *token = anchor ? anchor : tag;
    if (token == NULL)
        return;
    size_t start = mark_or(fy_token_start_mark(token), b->last_end);
    size_t end = mark_or(fy_token_end_mark(token), start);
    if (anchor)
        fail_builder(b, start, end, yaml_alias, "anchors ('&')");
    else
        fail_builder(b, start, end, yaml_alias, "tags ('!')");
}

static void take_event(builder *b, struct fy_event *event)
{
    size_t start = mark_or(fy_event_start_mark(event), b->last_end);
    switch (event->type) {
    case FYET_DOCUMENT_START:
        if (b->document->root)
            fail_builder(b, start, start + 3, yaml_several, "");
        break;
    case FYET_ALIAS:
        fail_builder(b, start, mark_or(fy_event_end_mark(event), start), yaml_alias,
                     "aliases ('*')");
        break;
    case FYET_SCALAR:
        refuse_properties(b, event->scalar.anchor, event->scalar.tag);
        take_scalar(b, event);
        break;
    case FYET_MAPPING_START:
        refuse_properties(b, event->mapping_start.anchor, event->mapping_start.tag);
        open_node(b, event, EV_NODE_MAPPING);
        break;
    case FYET_SEQUENCE_START:
        refuse_properties(b, event->sequence_start.anchor, event->sequence_start.tag);
        open_node(b, event, EV_NODE_SEQUENCE);
        break;
    case FYET_MAPPING_END:
    case FYET_SEQUENCE_END:
        close_node(b, event);
        break;
    default:
        break;
    }
    if (b->count > EV_DOCUMENT_NODES)
        fail_builder(b, start, start, yaml_too_many, EV_DOCUMENT_NODES);
}

/* libfyaml's own words, at the place it names. */
static void report_syntax(builder *b, struct fy_diag *diag)
{
    void *iterator = NULL;
    struct fy_diag_error *error = fy_diag_errors_iterate(diag, &iterator);
    size_t at = b->last_end;
    const char *text = b->document->text;
    if (error && error->line > 0) {
        at = 0;
        for (int line = 1; line < error->line && strchr(text + at, '\n'); line++)
            at = (size_t)(strchr(text + at, '\n') - text) + 1;
        for (int column = 1; column < error->column && text[at] && text[at] != '\n'; column++)
            at += ev_text_characters(text + at, 2) == 1 && text[at + 1] ? 2 : 1;
    }
    fail_builder(b, at, at + 1, yaml_syntax,
                 error && error->msg ? error->msg : "something is wrong here");
}

static void run_parser(builder *b)
{
    struct fy_diag_cfg diag_settings;
    fy_diag_cfg_default(&diag_settings);
    diag_settings.fp = NULL;
    diag_settings.colorize = false;
    struct fy_diag *diag = fy_diag_create(&diag_settings);
    fy_diag_set_collect_errors(diag, true);
    struct fy_parse_cfg settings = {.flags = FYPCF_QUIET | FYPCF_COLLECT_DIAG |
                                             FYPCF_DEFAULT_VERSION_1_2 | FYPCF_JSON_NONE,
                                    .diag = diag};
    struct fy_parser *parser = fy_parser_create(&settings);
    bool ready = parser && fy_parser_set_string(parser, b->document->text, b->document->size) == 0;
    struct fy_event *event;
    while (ready && !b->failed && (event = fy_parser_parse(parser)) != NULL) {
        take_event(b, event);
        fy_parser_event_free(parser, event);
    }
    if (!b->failed && (!ready || fy_parser_get_stream_error(parser)))
        report_syntax(b, diag);
    fy_parser_destroy(parser);
    fy_diag_destroy(diag);
}

/* Text that people can read: UTF-8 without control characters, not empty, not absurdly long. */
static bool check_text(const ev_document *document, ev_diagnostics *diagnostics)
{
    const unsigned char *text = (const unsigned char *)document->text;
    ev_place file = {.file = document->name};
    if (document->size > EV_DOCUMENT_BYTES) {
        ev_report(diagnostics, EV_SEVERITY_ERROR, file_too_large, &file,
                  EV_DOCUMENT_BYTES / 1048576.0);
        return false;
    }
    size_t valid = ev_text_utf8_end(document->text, document->size);
    for (size_t i = 0; i < valid; i++) {
        if ((text[i] < 0x20 && !strchr("\t\r\n", text[i])) || text[i] == 0x7F || text[i] == 0) {
            ev_report_at(document, i, i + 1, diagnostics, EV_SEVERITY_ERROR, control_character,
                         text[i]);
            return false;
        }
    }
    if (valid < document->size)
        ev_report_at(document, valid, valid + 1, diagnostics, EV_SEVERITY_ERROR, not_utf8,
                     text[valid]);
    return valid == document->size;
}

ev_document *ev_document_parse(const char *text, size_t size, const char *name,
                               ev_diagnostics *diagnostics)
{
    ev_document *document = ev_allocate(sizeof *document);
    document->name = ev_text_duplicate(name, strlen(name));
    document->text = ev_text_duplicate(text, size);
    document->size = size;
    builder b = {.document = document, .diagnostics = diagnostics};
    if (check_text(document, diagnostics)) {
        run_parser(&b);
        if (!b.failed && document->root == NULL)
            fail_builder(&b, 0, 0, scene_empty, size == 0 ? "empty" : "without any value");
        if (!b.failed)
            return document;
    }
    ev_document_destroy(document);
    return NULL;
}

void ev_document_destroy(ev_document *document)
{
    if (document == NULL)
        return;
    while (document->nodes) {
        ev_node *node = document->nodes;
        document->nodes = node->allocated;
        free(node->text);
        free(node);
    }
    free(document->name);
    free(document->text);
    free(document);
}
