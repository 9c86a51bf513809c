/* Reads feed patterns: a header line theta_deg,e_db,h_db[,phase_deg], then plain numbers; # starts
 * a comment. Called by scene.c; what a table means is optics/pattern.h's. */
#include "scene/pattern_file.h"

#include "base/file.h"
#include "base/message.h"
#include "base/quantity.h"
#include "base/text.h"

#include <limits.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

enum { LINE_CAPACITY = 512, COLUMNS = 4, FILE_LIMIT = 4 << 20 };

typedef struct cached_table {
    char *path; /* resolved */
    ev_pattern_table table;
    struct cached_table *next;
} cached_table;

struct ev_pattern_cache {
    cached_table *first;
};

typedef struct csv {
    ev_place place;
    ev_diagnostics *diagnostics;
    ev_pattern_table *table;
    int columns; /* 0 until the header was read */
} csv;

#define report_line(c, at, id, ...)                                                                \
    do {                                                                                           \
        (c)->place.column = (at);                                                                  \
        ev_report((c)->diagnostics, EV_SEVERITY_ERROR, id, &(c)->place, __VA_ARGS__);              \
    } while (0)

/* Cuts a line at its commas; spaces around the cells go. Returns the number of cells, of which at
 * most COLUMNS + 1 are kept. */
static int split_cells(char *line, char *cells[COLUMNS + 1])
{
    int count = 0;
    for (char *at = line; at; count++) {
        char *comma = strchr(at, ','), *end = comma ? comma : at + strlen(at);
        at += strspn(at, " \t");
        while (end > at && strchr(" \t", end[-1]))
            end--;
        *end = 0;
        if (count <= COLUMNS)
            cells[count] = at;
        at = comma ? comma + 1 : NULL;
    }
    return count;
}

static void read_header(csv *c, char *line)
{
    static const char *const names[COLUMNS] = {"theta_deg", "e_db", "h_db", "phase_deg"};
    char shown[LINE_CAPACITY], *cells[COLUMNS + 1];
    ev_text_copy(shown, sizeof shown, line);
    int count = split_cells(line, cells);
    bool right = count == COLUMNS - 1 || count == COLUMNS;
    for (int i = 0; right && i < count; i++)
        right = strcmp(cells[i], names[i]) == 0;
    if (!right)
        report_line(c, 1, table_header, shown);
    c->columns = right ? count : -1;
    c->table->has_phase = count == COLUMNS;
}

static bool read_numbers(csv *c, char *line, double values[COLUMNS])
{
    char *cells[COLUMNS + 1];
    int count = split_cells(line, cells);
    if (count != c->columns) {
        report_line(c, 0, table_columns, count, c->columns);
        return false;
    }
    for (int i = 0; i < count; i++) {
        if (ev_quantity_parse(EV_QUANTITY_NUMBER, cells[i], &values[i], NULL) != EV_PARSE_OK) {
            report_line(c, (int)(cells[i] - line) + 1, table_number, cells[i]);
            return false;
        }
    }
    return true;
}

static void write_number(double value, char *text, size_t size)
{
    ev_quantity_write(EV_QUANTITY_NUMBER, value, "", text, size);
}

static bool check_numbers(csv *c, const double values[COLUMNS])
{
    static const char *const levels[COLUMNS] = {NULL, "e_db", "h_db", NULL};
    const ev_pattern_table *table = c->table;
    char shown[64], before[64];
    write_number(values[0], shown, sizeof shown);
    if (!(values[0] >= 0.0 && values[0] <= 180.0)) {
        report_line(c, 1, table_angle, shown);
        return false;
    }
    for (int i = 1; i <= 2; i++) {
        if (!(fabs(values[i]) <= 300.0)) {
            write_number(values[i], shown, sizeof shown);
            report_line(c, 0, table_level, levels[i], shown);
            return false;
        }
    }
    if (c->columns == COLUMNS && !(fabs(values[3]) <= 1e6)) {
        write_number(values[3], shown, sizeof shown);
        report_line(c, 0, table_phase, shown);
        return false;
    }
    if (table->count > 0 && !(values[0] * EV_PI / 180.0 > table->theta[table->count - 1])) {
        write_number(table->theta[table->count - 1] * 180.0 / EV_PI, before, sizeof before);
        report_line(c, 1, table_order, shown, before);
        return false;
    }
    return true;
}

static void read_row(csv *c, char *line)
{
    ev_pattern_table *table = c->table;
    double values[COLUMNS] = {0};
    if (!read_numbers(c, line, values) || !check_numbers(c, values))
        return;
    if (table->count == EV_PATTERN_TABLE_CAPACITY) {
        report_line(c, 0, table_long, EV_PATTERN_TABLE_CAPACITY);
        c->columns = -1;
        return;
    }
    int i = table->count++;
    table->theta[i] = values[0] * EV_PI / 180.0;
    table->e_db[i] = values[1];
    table->h_db[i] = values[2];
    table->phase[i] = values[3] * EV_PI / 180.0;
}

static void read_line(csv *c, const char *text, size_t length)
{
    char line[LINE_CAPACITY], source[LINE_CAPACITY];
    size_t kept = length < sizeof line ? length : sizeof line - 1;
    memcpy(line, text, kept);
    line[kept] = 0;
    memcpy(source, line, kept + 1);
    c->place.line++;
    c->place.source = source;
    line[strcspn(line, "#\r")] = 0;
    size_t blank = strspn(line, " \t");
    if (line[blank] != 0 && c->columns == 0)
        read_header(c, line + blank);
    else if (line[blank] != 0)
        read_row(c, line + blank);
    c->place.source = NULL;
}

bool ev_pattern_table_read(const char *text, const char *name, ev_pattern_table *table,
                           ev_diagnostics *diagnostics)
{
    int errors_before = diagnostics->error_count;
    csv c = {{.file = name}, diagnostics, table, 0};
    memset(table, 0, sizeof *table);
    if (strncmp(text, "\xEF\xBB\xBF", 3) == 0)
        text += 3;
    while (*text && c.columns >= 0) {
        size_t length = strcspn(text, "\n");
        read_line(&c, text, length);
        text += length + (text[length] == '\n');
    }
    c.place.line = 0;
    if (c.columns == 0)
        report_line(&c, 0, table_header, "nothing");
    else if (c.columns > 0 && diagnostics->error_count == errors_before && table->count < 2)
        report_line(&c, 0, table_short, table->count);
    if (diagnostics->error_count > errors_before)
        return false;
    ev_pattern_table_prepare(table);
    if (!(table->mean_power > 1e-20) || !isfinite(table->mean_power)) {
        report_line(&c, 0, table_no_power, name);
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
