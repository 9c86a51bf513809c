/* The text of a scene file as a small tree with the place of every node in the text: what the
 * reader walks and the writer splices. The only file that knows libfyaml is document.c.
 *
 * A document is a subset of YAML 1.2: one document, no anchors, aliases or tags, at most
 * EV_DOCUMENT_DEPTH levels. */
#pragma once

#include "base/diagnostic.h"

#include <stdbool.h>
#include <stddef.h>

enum {
    EV_DOCUMENT_DEPTH = 16,
    EV_DOCUMENT_NODES = 20000,
    EV_DOCUMENT_BYTES = 1 << 20,
};

typedef enum { EV_NODE_SCALAR, EV_NODE_MAPPING, EV_NODE_SEQUENCE } ev_node_kind;

typedef struct ev_node ev_node;
struct ev_node {
    ev_node_kind kind;
    bool flow;         /* {...} or [...] */
    bool plain;        /* a scalar without quotes: where a unit can be read */
    size_t start, end; /* bytes of the text, quotes and brackets included */
    char *text;        /* scalars: the value, "" when there is nothing; never NULL for scalars */
    ev_node *key;      /* of a member of a mapping */
    ev_node *parent, *first, *last, *next;
    ev_node *allocated; /* the document's chain of all nodes */
};

typedef struct ev_document {
    char *name; /* for messages */
    char *text;
    size_t size;
    ev_node *root; /* NULL while empty */
    ev_node *nodes;
} ev_document;

/* Reads `text` (copied). NULL with diagnostics when it is not such a document. */
ev_document *ev_document_parse(const char *text, size_t size, const char *name,
                               ev_diagnostics *diagnostics);
void ev_document_destroy(ev_document *document);

/* The member of a mapping with that key, or NULL; NULL for other nodes. */
ev_node *ev_node_member(const ev_node *mapping, const char *key);
int ev_node_count(const ev_node *node);
ev_node *ev_node_at(const ev_node *node, int index);

/* "a list", "keys with values", "'12 GHz'", "nothing": what a node is, for messages. */
void ev_node_describe(const ev_node *node, char *text, size_t size);

/* The place of `width` bytes at `offset` bytes into the document. The result borrows the document's
 * name and `line`, which is freed by the caller. */
typedef struct ev_document_place {
    ev_place place;
    char *line;
} ev_document_place;

ev_document_place ev_document_locate(const ev_document *document, size_t start, size_t end);

/* Reports at a range of the text: ev_report_at(document, start, end, diagnostics, severity, id,
 * ...) */
#define ev_report_at(document, start, end, diagnostics, severity, id, ...)                         \
    do {                                                                                           \
        ev_document_place located_ = ev_document_locate(document, start, end);                     \
        ev_report(diagnostics, severity, id, &located_.place, __VA_ARGS__);                        \
        free(located_.line);                                                                       \
    } while (0)

#define ev_report_node(document, node, diagnostics, id, ...)                                       \
    ev_report_at(document, (node)->start, (node)->end, diagnostics, EV_SEVERITY_ERROR, id,         \
                 __VA_ARGS__)
