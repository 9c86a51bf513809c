/* A user's own side-lobe limit from a CSV file: angle_deg,level_dbi. */
#pragma once

#include "base/diagnostic.h"
#include "optics/beam_limit.h"

/* False with diagnostics. Angles are off the beam, 0 to 180, and do not fall; two equal ones make a
 * step. */
bool ev_limit_read(const char *path, ev_limit *limit, ev_diagnostics *diagnostics);
