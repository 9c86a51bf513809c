/* Reads feed patterns: theta_deg,e_db,h_db[,phase_deg]. Called by scene.c; what a table means is
 * optics/pattern.h's. */
#include "scene/pattern_file.h"

#include "base/file.h"
#include "base/message.h"
#include "base/quantity.h"
#include "base/text.h"
#include "scene/number_table.h"

#include <limits.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

enum { THETA, E_DB, H_DB, PHASE, COLUMNS, FILE_LIMIT = 4 << 20 };

typedef struct cached_table {
    char *path; /* resolved */
    ev_pattern_table table;
    struct cached_table *next;
} cached_table;

struct ev_pattern_cache {
    cached_table *first;
};

static void write_number(double value, char *text, size_t size)
{
    ev_quantity_write(EV_QUANTITY_NUMBER, value, "", text, size);
}

static bool check_row(const ev_pattern_table *table, const ev_number_row *row)
{
    static const char *const levels[COLUMNS] = {[E_DB] = "e_db", [H_DB] = "h_db"};
    const double *values = row->values;
    char shown[64], before[64];
    write_number(values[THETA], shown, sizeof shown);
    if (!(values[THETA] >= 0.0 && values[THETA] <= 180.0)) {
        ev_number_complain(row, 1, table_angle, shown);
        return false;
    }
    for (int i = E_DB; i <= H_DB; i++) {
        if (!(fabs(values[i]) <= 300.0)) {
            write_number(values[i], shown, sizeof shown);
            ev_number_complain(row, 0, table_level, levels[i], shown);
            return false;
        }
    }
    if (row->count == COLUMNS && !(fabs(values[PHASE]) <= 1e6)) {
        write_number(values[PHASE], shown, sizeof shown);
        ev_number_complain(row, 0, table_phase, shown);
        return false;
    }
    if (table->count > 0 && !(values[THETA] * EV_PI / 180.0 > table->theta[table->count - 1])) {
        write_number(table->theta[table->count - 1] * 180.0 / EV_PI, before, sizeof before);
        ev_number_complain(row, 1, table_order, shown, before);
        return false;
    }
    return true;
}

static bool add_row(void *context, const ev_number_row *row)
{
    ev_pattern_table *table = context;
    table->has_phase = row->count == COLUMNS;
    if (!check_row(table, row))
        return true;
    if (table->count == EV_PATTERN_TABLE_CAPACITY) {
        ev_number_complain(row, 0, table_long, EV_PATTERN_TABLE_CAPACITY);
        return false;
    }
    int i = table->count++;
    table->theta[i] = row->values[THETA] * EV_PI / 180.0;
    table->e_db[i] = row->values[E_DB];
    table->h_db[i] = row->values[H_DB];
    table->phase[i] = row->values[PHASE] * EV_PI / 180.0;
    return true;
}

bool ev_pattern_table_read(const char *text, const char *name, ev_pattern_table *table,
                           ev_diagnostics *diagnostics)
{
    static const char *const names[] = {"theta_deg", "e_db", "h_db", "phase_deg", NULL};
    ev_place place = {.file = name};
    memset(table, 0, sizeof *table);
    if (!ev_number_table_read(text, name, names, PHASE, add_row, table, diagnostics))
        return false;
    if (table->count < 2) {
        ev_report(diagnostics, EV_SEVERITY_ERROR, table_short, &place, table->count);
        return false;
    }
    ev_pattern_table_prepare(table);
    if (!(table->mean_power > 1e-20) || !isfinite(table->mean_power)) {
        ev_report(diagnostics, EV_SEVERITY_ERROR, table_no_power, &place, name);
        return false;
    }
    return true;
}

ev_pattern_cache *ev_pattern_cache_create(void)
{
    return ev_allocate(sizeof(ev_pattern_cache));
}

void ev_pattern_cache_destroy(ev_pattern_cache *cache)
{
    while (cache && cache->first) {
        cached_table *entry = cache->first;
        cache->first = entry->next;
        free(entry->path);
        free(entry);
    }
    free(cache);
}

const ev_pattern_table *ev_pattern_cache_get(ev_pattern_cache *cache, const char *beside,
                                             const char *path, ev_diagnostics *diagnostics)
{
    char resolved[PATH_MAX];
    if (!ev_file_beside(beside, path, resolved, sizeof resolved)) {
        ev_report(diagnostics, EV_SEVERITY_ERROR, path_too_long, NULL, path, PATH_MAX - 1);
        return NULL;
    }
    for (cached_table *entry = cache->first; entry; entry = entry->next) {
        if (strcmp(entry->path, resolved) == 0 && strcmp(entry->table.path, path) == 0)
            return &entry->table;
    }
    size_t size;
    char *text = ev_file_read(resolved, FILE_LIMIT, &size, diagnostics);
    if (text == NULL)
        return NULL;
    cached_table *entry = ev_allocate(sizeof *entry);
    bool read = ev_pattern_table_read(text, resolved, &entry->table, diagnostics);
    free(text);
    if (!read) {
        free(entry);
        return NULL;
    }
    ev_text_copy(entry->table.path, sizeof entry->table.path, path);
    entry->path = ev_text_duplicate(resolved, strlen(resolved));
    entry->next = cache->first;
    cache->first = entry;
    return &entry->table;
}
