/* Design into document: the text with only what changed spliced in. */
#pragma once

#include "base/text.h"
#include "scene/document.h"
#include "scene/field.h"

/* How a person spelled a value: used again for as long as the value is the design's. */
typedef struct ev_spelling {
    char address[EV_ADDRESS_CAPACITY];
    double value;
    char text[48];
    struct ev_spelling *next;
} ev_spelling;

/* `before` is the design that the document says. Returns malloc'd text. */
char *ev_document_splice(const ev_document *document, const ev_design *before,
                         const ev_design *after, const ev_spelling *spellings, size_t *size);

/* A new document for a design that has none. */
char *ev_document_write(const ev_design *design, const ev_spelling *spellings, size_t *size);
