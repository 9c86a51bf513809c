/* SDL's events turned into the window's own inputs. Pointer movements that queue up while a frame
 * is drawn become one. */
#pragma once

#include "view/state.h"

/* Waits at most `timeout_ms` for something to happen and hands all that has come to the view.
 * `deaf`: under a replay, when hands and drops do not count. Returns the performance counter when
 * the first input that matters was seen, 0 when there was none. */
Uint64 ev_events_handle(ev_view *view, int timeout_ms, bool deaf);
