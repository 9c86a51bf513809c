/* Reads limit tables. Called by the beam command; what a limit means is optics/beam_limit.h's. */
#include "scene/limit_file.h"

#include "base/file.h"
#include "base/quantity.h"
#include "base/vec3.h"
#include "scene/number_table.h"

#include <stdlib.h>

enum { FILE_LIMIT = 1 << 20 };

typedef struct limit_rows {
    double angle[EV_LIMIT_CAPACITY], level[EV_LIMIT_CAPACITY];
    int count;
} limit_rows;

static bool add_row(void *context, const ev_number_row *row)
{
    limit_rows *rows = context;
    double angle = row->values[0], level = row->values[1];
    char shown[64], before[64];
    ev_quantity_write(EV_QUANTITY_NUMBER, angle, "", shown, sizeof shown);
    if (!(angle >= 0.0 && angle <= 180.0)) {
        ev_number_complain(row, 1, limit_angle, shown);
        return true;
    }
    if (rows->count > 0 && angle < rows->angle[rows->count - 1]) {
        ev_quantity_write(EV_QUANTITY_NUMBER, rows->angle[rows->count - 1], "", before,
                          sizeof before);
        ev_number_complain(row, 1, limit_order, shown, before);
        return true;
    }
    if (!(fabs(level) <= 300.0)) {
        ev_quantity_write(EV_QUANTITY_NUMBER, level, "", shown, sizeof shown);
        ev_number_complain(row, 0, table_level, "level_dbi", shown);
        return true;
    }
    if (rows->count == EV_LIMIT_CAPACITY) {
        ev_number_complain(row, 0, table_long, EV_LIMIT_CAPACITY);
        return false;
    }
    rows->angle[rows->count] = angle;
    rows->level[rows->count++] = level;
    return true;
}

bool ev_limit_read(const char *path, ev_limit *limit, ev_diagnostics *diagnostics)
{
    static const char *const names[] = {"angle_deg", "level_dbi", NULL};
    limit_rows rows = {.count = 0};
    size_t size;
    char *text = ev_file_read(path, FILE_LIMIT, &size, diagnostics);
    if (!text)
        return false;
    bool read = ev_number_table_read(text, path, names, 2, add_row, &rows, diagnostics);
    free(text);
    if (!read)
        return false;
    for (int i = 0; i < rows.count; i++)
        rows.angle[i] *= EV_PI / 180.0;
    if (ev_limit_table(rows.angle, rows.level, rows.count, limit))
        return true;
    ev_place place = {.file = path};
    ev_report(diagnostics, EV_SEVERITY_ERROR, limit_short, &place, rows.count);
    return false;
}
