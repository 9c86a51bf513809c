/* CSV: the JSON of a feed flattened into one line, RFC 4180 quoting. */
#include "report/json.h"

#include <stdlib.h>
#include <string.h>

enum { KEY_CAPACITY = 160, COLUMN_CAPACITY = 256 };

typedef struct row {
    char keys[COLUMN_CAPACITY][KEY_CAPACITY];
    json_t *values[COLUMN_CAPACITY]; /* borrowed */
    int count;
} row;

static void flatten(const char *prefix, json_t *value, row *to)
{
    char key[2 * KEY_CAPACITY];
    const char *name, *joint = *prefix ? "." : "";
    json_t *child;
    size_t index;
    if (json_is_object(value)) {
        json_object_foreach(value, name, child)
        {
            snprintf(key, sizeof key, "%s%s%s", prefix, joint, name);
            flatten(key, child, to);
        }
    } else if (json_is_array(value)) {
        json_array_foreach(value, index, child)
        {
            snprintf(key, sizeof key, "%s%s%zu", prefix, joint, index);
            flatten(key, child, to);
        }
    } else if (to->count < COLUMN_CAPACITY && strlen(prefix) < KEY_CAPACITY) {
        memcpy(to->keys[to->count], prefix, strlen(prefix) + 1);
        to->values[to->count++] = value;
    }
}

static void print_text(FILE *stream, const char *text)
{
    if (!strpbrk(text, ",\"\r\n")) {
        fputs(text, stream);
        return;
    }
    fputc('"', stream);
    for (const char *c = text; *c; c++) {
        if (*c == '"')
            fputc('"', stream);
        fputc(*c, stream);
    }
    fputc('"', stream);
}

static void print_value(FILE *stream, const json_t *value)
{
    if (json_is_string(value))
        print_text(stream, json_string_value(value));
    else if (json_is_integer(value))
        fprintf(stream, "%lld", (long long)json_integer_value(value));
    else if (json_is_real(value))
        fprintf(stream, "%.17g", json_real_value(value));
}

static json_t *line_of(const ev_report *report, int feed)
{
    json_t *line = ev_json_of_report(report);
    /* lists of no fixed length have no columns */
    json_object_del(line, "warnings");
    json_object_del(json_object_get(line, "verdict"), "moves");
    json_object_set_new(line, "feed", ev_json_of_feed(report, feed));
    return line;
}

static int column_of(const row *header, const char *key)
{
    for (int i = 0; i < header->count; i++)
        if (strcmp(header->keys[i], key) == 0)
            return i;
    return -1;
}

/* Feeds of different patterns have different keys: the header is the union, in order of meeting. */
static void merge_header(row *header, const row *line)
{
    for (int i = 0; i < line->count; i++)
        if (column_of(header, line->keys[i]) < 0 && header->count < COLUMN_CAPACITY)
            memcpy(header->keys[header->count++], line->keys[i], KEY_CAPACITY);
}

static void print_line(FILE *stream, const row *header, const row *line)
{
    for (int i = 0; i < header->count; i++) {
        int at = column_of(line, header->keys[i]);
        if (i > 0)
            fputc(',', stream);
        if (at >= 0)
            print_value(stream, line->values[at]);
    }
    fputs("\r\n", stream);
}

void ev_json_print_csv(FILE *stream, json_t *const *lines, int count)
{
    row *header = calloc(2, sizeof *header), *line = header + 1;
    if (!header)
        abort();
    for (int i = 0; i < count; i++) {
        line->count = 0;
        flatten("", lines[i], line);
        merge_header(header, line);
    }
    for (int i = 0; i < header->count; i++)
        fprintf(stream, "%s%s", i > 0 ? "," : "", header->keys[i]);
    fputs("\r\n", stream);
    for (int i = 0; i < count; i++) {
        line->count = 0;
        flatten("", lines[i], line);
        print_line(stream, header, line);
    }
    free(header);
}

void ev_report_csv(FILE *stream, const ev_report *reports, int count)
{
    json_t **lines = calloc((size_t)count * EV_FEED_CAPACITY, sizeof(json_t *));
    int line_count = 0;
    if (!lines)
        abort();
    for (int i = 0; i < count; i++)
        for (int feed = 0; feed < reports[i].budget->feed_count; feed++)
            lines[line_count++] = line_of(&reports[i], feed);
    ev_json_print_csv(stream, lines, line_count);
    for (int i = 0; i < line_count; i++)
        json_decref(lines[i]);
    free(lines);
}
