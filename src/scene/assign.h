/* Assignments, "name=value", as --set and scripts write them. */
#pragma once

#include "scene/parameter.h"

/* Sets one parameter, or a whole field ("feed.shift=[0 mm, 5 mm, 0 mm]"), and resolves. False with
 * diagnostics, and the design untouched, when it is not legal. */
bool ev_design_assign(ev_design *design, int selected_feed, const char *assignment,
                      ev_diagnostics *diagnostics);
