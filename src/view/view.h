/* The window. One call opens it, runs until it is closed (or until a replay ends) and says how it
 * went. Under a replay the steps of a text file drive the same code that a person's hands do, by a
 * clock of its own; see view/replay.h for what can be said in one. */
#pragma once

#include "base/diagnostic.h"

#include <stdbool.h>

typedef struct ev_view_options {
    const char *scene;              /* path, or NULL: choose among the examples */
    const char *examples;           /* folder of the example scenes; NULL: there are none */
    const char *replay;             /* path of a replay, or NULL */
    const char *const *assignments; /* "name=value", applied to `scene` once it is open */
    int assignment_count;
    int width, height; /* logical pixels; 0: 1280 x 800 */
    bool dark;
} ev_view_options;

/* Exit code: 0 done; 1 an `expect` of the replay did not hold; 2 bad scene, assignment or replay; 3
 * no display, no OpenGL or a file that cannot be written. Anything but 0 comes with diagnostics. */
int ev_view_run(const ev_view_options *options, ev_diagnostics *diagnostics);
