/* Reads tables of numbers, line by line. */
#include "scene/number_table.h"

#include "base/quantity.h"
#include "base/text.h"

#include <string.h>

enum { LINE_CAPACITY = 512 };

typedef struct csv {
    const char *const *names;
    int required;
    bool has_header, stopped;
    ev_number_row row;
} csv;

/* Cuts a line at its commas; spaces around the cells go. Returns the number of cells, of which at
 * most EV_NUMBER_COLUMNS + 1 are kept. */
static int split_cells(char *line, char *cells[EV_NUMBER_COLUMNS + 1])
{
    int count = 0;
    for (char *at = line; at; count++) {
        char *comma = strchr(at, ','), *end = comma ? comma : at + strlen(at);
        at += strspn(at, " \t");
        while (end > at && strchr(" \t", end[-1]))
            end--;
        *end = 0;
        if (count <= EV_NUMBER_COLUMNS)
            cells[count] = at;
        at = comma ? comma + 1 : NULL;
    }
    return count;
}

static int name_count(const csv *c)
{
    int count = 0;
    while (c->names[count])
        count++;
    return count;
}

/* "a,b,c' or 'a,b,c,d": the legal headers. */
static void complain_of_header(csv *c, const char *shown)
{
    char legal[160] = "";
    size_t length = 0;
    for (int count = c->required; count <= name_count(c); count++) {
        if (length > 0)
            length += (size_t)snprintf(legal + length, sizeof legal - length, "' or '");
        for (int i = 0; i < count; i++)
            length += (size_t)snprintf(legal + length, sizeof legal - length, "%s%s",
                                       i > 0 ? "," : "", c->names[i]);
    }
    ev_number_complain(&c->row, *shown ? 1 : 0, table_header, legal, *shown ? shown : "nothing");
}

static void read_header(csv *c, char *line)
{
    char shown[LINE_CAPACITY], *cells[EV_NUMBER_COLUMNS + 1];
    ev_text_copy(shown, sizeof shown, line);
    int count = split_cells(line, cells);
    bool right = count >= c->required && count <= name_count(c);
    for (int i = 0; right && i < count; i++)
        right = strcmp(cells[i], c->names[i]) == 0;
    if (!right)
        complain_of_header(c, shown);
    c->has_header = true;
    c->stopped = !right;
    c->row.count = count;
}

static bool read_numbers(csv *c, char *line)
{
    char *cells[EV_NUMBER_COLUMNS + 1];
    int count = split_cells(line, cells);
    if (count != c->row.count) {
        ev_number_complain(&c->row, 0, table_columns, count, c->row.count);
        return false;
    }
    for (int i = 0; i < count; i++) {
        double *value = &c->row.values[i];
        if (ev_quantity_parse(EV_QUANTITY_NUMBER, cells[i], value, NULL) != EV_PARSE_OK) {
            ev_number_complain(&c->row, (int)(cells[i] - line) + 1, table_number, cells[i]);
            return false;
        }
    }
    return true;
}

static void read_line(csv *c, const char *text, size_t length,
                      bool (*take)(void *context, const ev_number_row *row), void *context)
{
    char line[LINE_CAPACITY], source[LINE_CAPACITY];
    size_t kept = length < sizeof line ? length : sizeof line - 1;
    memcpy(line, text, kept);
    line[kept] = 0;
    memcpy(source, line, kept + 1);
    c->row.place.line++;
    c->row.place.source = source;
    line[strcspn(line, "#\r")] = 0;
    size_t blank = strspn(line, " \t");
    if (line[blank] != 0 && !c->has_header)
        read_header(c, line + blank);
    else if (line[blank] != 0 && read_numbers(c, line + blank))
        c->stopped = !take(context, &c->row);
    c->row.place.source = NULL;
}

bool ev_number_table_read(const char *text, const char *name, const char *const *names,
                          int required, bool (*take)(void *context, const ev_number_row *row),
                          void *context, ev_diagnostics *diagnostics)
{
    int errors_before = diagnostics->error_count;
    csv c = {.names = names,
             .required = required,
             .row = {.place = {.file = name}, .diagnostics = diagnostics}};
    if (strncmp(text, "\xEF\xBB\xBF", 3) == 0)
        text += 3;
    while (*text && !c.stopped) {
        size_t length = strcspn(text, "\n");
        read_line(&c, text, length, take, context);
        text += length + (text[length] == '\n');
    }
    if (!c.has_header) {
        c.row.place.line = 0;
        complain_of_header(&c, "");
    }
    return diagnostics->error_count == errors_before;
}
