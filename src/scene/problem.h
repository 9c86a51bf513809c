/* What optics finds wrong with a design, in words, at the parameter's place in the document. */
#pragma once

#include "scene/document.h"
#include "scene/parameter.h"

/* Returns true when there is no error. `document` may be NULL. */
bool ev_design_report(const ev_design *design, const ev_document *document,
                      ev_diagnostics *diagnostics);
