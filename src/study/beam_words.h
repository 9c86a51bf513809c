/* What limits the trust in a beam, in words; the window, `beam` and the JSON use the same. */
#pragma once

#include "optics/beam.h"

#include <stddef.h>

/* Stable word of a note: "dish_small". */
const char *ev_beam_note_word(ev_beam_note_id id);

/* One sentence without a full stop. */
void ev_beam_note_text(const ev_beam_note *note, const ev_beam *beam, char *text, size_t size);
