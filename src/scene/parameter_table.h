/* The rows themselves; see parameter.h for the functions that most callers want. */
#pragma once

#include "scene/parameter.h"

extern const ev_parameter ev_parameter_table[];
extern const int ev_parameter_table_count;

/* The word of a choice that says: by numbers, in the members .x .y (.z). It is never written. */
#define EV_WORD_DIRECTION "direction"
