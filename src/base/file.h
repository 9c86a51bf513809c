/* Files: read one whole, replace one whole. Every failure becomes a diagnostic that says what to
 * do. */
#pragma once

#include "base/diagnostic.h"

/* The whole of a regular file, with a 0 after it; the caller frees. NULL with a diagnostic
 * (file_missing, file_is_folder, file_not_regular, file_unreadable, file_too_large) when it cannot
 * be had or holds more than `limit` bytes. Never blocks on a pipe or a device. */
char *ev_file_read(const char *path, size_t limit, size_t *size, ev_diagnostics *diagnostics);

/* Replaces (or makes) the file in one step: writes beside it, syncs, renames, syncs the folder.
 * An existing file keeps its permissions, and a symbolic link stays one: what it points to is
 * replaced. On failure the old file is untouched and a diagnostic (file_not_written) is added. */
bool ev_file_replace(const char *path, const char *text, size_t size, ev_diagnostics *diagnostics);

/* `name` seen from the folder that `beside` lies in, into `path`: absolute names stay. False when
 * it does not fit. */
bool ev_file_beside(const char *beside, const char *name, char *path, size_t size);
