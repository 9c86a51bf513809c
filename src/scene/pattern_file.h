/* Pattern tables from CSV files, kept for as long as their scene. */
#pragma once

#include "base/diagnostic.h"
#include "optics/pattern.h"

typedef struct ev_pattern_cache ev_pattern_cache;

ev_pattern_cache *ev_pattern_cache_create(void);
void ev_pattern_cache_destroy(ev_pattern_cache *cache);

/* The table at `path`, relative to the folder of `beside`; read once. NULL with diagnostics. */
const ev_pattern_table *ev_pattern_cache_get(ev_pattern_cache *cache, const char *beside,
                                             const char *path, ev_diagnostics *diagnostics);

/* Reads a table from its text; false with diagnostics. `name` is for messages. */
bool ev_pattern_table_read(const char *text, const char *name, ev_pattern_table *table,
                           ev_diagnostics *diagnostics);
