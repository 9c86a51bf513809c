/* Edits of a text: collected in any order, applied in one go. */
#pragma once

#include "scene/document.h"

typedef struct ev_edit {
    size_t start, end; /* bytes of the document that go */
    char *text;        /* what stands there instead, owned */
    int order;
} ev_edit;

typedef struct ev_splice {
    const ev_document *document;
    ev_edit *edits;
    int count, capacity;
} ev_splice;

/* Takes `text` over. Edits at one place keep the order in which they were made. */
void ev_splice_add(ev_splice *splice, size_t start, size_t end, char *text);

/* The document with the edits made, malloc'd; frees them. */
char *ev_splice_apply(ev_splice *splice, size_t *size);

/* Bytes of the line around `at`: its first, and the end of what is on it (before \r\n). */
size_t ev_line_start(const ev_document *document, size_t at);
size_t ev_line_end(const ev_document *document, size_t at);

/* "\n", or "\r\n" where the document has that. */
const char *ev_newline(const ev_document *document);

/* Where a node's own text ends as a whole line, and the whole lines from `start` to there, with the
 * line break before them. */
void ev_splice_remove_lines(ev_splice *splice, size_t start, size_t end);
