/* Document to design: keys, required keys, choices, names. All mistakes are found in one go. */
#pragma once

#include "scene/document.h"
#include "scene/field.h"

/* Fills `design` from the document; false with diagnostics when anything is wrong. Neither pattern
 * tables are read nor is the design resolved or checked. */
bool ev_design_read(const ev_document *document, ev_design *design, ev_diagnostics *diagnostics);

/* The node of the document where a row stands: its own value, else its rival's in a choice, else
 * the mapping that would hold it, else NULL. `entry_name` finds the entry of a list. */
const ev_node *ev_document_find_row(const ev_document *document, const ev_parameter *row,
                                    const char *entry_name);

/* The mapping of the index-th entry of a section, NULL when the document has none. */
ev_node *ev_document_entry(const ev_document *document, const ev_section *section, int index);

/* The name a list entry without one gets. */
void ev_default_entry_name(const ev_section *section, int index, char *name, size_t size);
