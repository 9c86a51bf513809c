/* The collector of diagnostics and how they print. Called wherever input is read or a command
 * refuses; decides nothing about what is wrong. */
#include "base/diagnostic.h"

#include "base/text.h"

#include <stdarg.h>
#include <stdlib.h>
#include <string.h>

enum { TEXT_CAPACITY = 1024, SOURCE_SHOWN = 100 };

void ev_diagnostics_init(ev_diagnostics *diagnostics)
{
    memset(diagnostics, 0, sizeof *diagnostics);
}

void ev_diagnostics_clear(ev_diagnostics *diagnostics)
{
    for (int i = 0; i < diagnostics->count; i++) {
        free(diagnostics->items[i].file);
        free(diagnostics->items[i].source);
        free(diagnostics->items[i].text);
    }
    ev_diagnostics_init(diagnostics);
}

static char *duplicate_or_null(const char *text)
{
    return text ? ev_text_duplicate(text, strlen(text)) : NULL;
}

/* Control characters from a hostile file must not reach a terminal. */
static void blank_controls(char *text)
{
    for (; text && *text; text++) {
        unsigned char byte = (unsigned char)*text;
        if (byte < 0x20 || byte == 0x7F)
            *text = ' ';
    }
}

/* UTF-8 cut by the printf limit, or wrong from the start, ends where it is still right. */
static void trim_to_utf8(char *text)
{
    text[ev_text_utf8_end(text, strlen(text))] = 0;
}

void ev_diagnose(ev_diagnostics *diagnostics, ev_severity severity, const char *id,
                 const ev_place *place, const char *format, ...)
{
    if (severity == EV_SEVERITY_ERROR)
        diagnostics->error_count++;
    if (diagnostics->count == EV_DIAGNOSTIC_CAPACITY) {
        diagnostics->dropped++;
        return;
    }
    char text[TEXT_CAPACITY];
    va_list arguments;
    va_start(arguments, format);
    vsnprintf(text, sizeof text, format, arguments);
    va_end(arguments);
    blank_controls(text);
    trim_to_utf8(text);

    ev_diagnostic *item = &diagnostics->items[diagnostics->count++];
    *item = (ev_diagnostic){.id = id, .severity = severity, .text = duplicate_or_null(text)};
    if (place == NULL)
        return;
    item->file = duplicate_or_null(place->file);
    item->line = place->line;
    item->column = place->column;
    item->width = place->width > 0 ? place->width : 1;
    item->source = duplicate_or_null(place->source);
    blank_controls(item->source);
}

/* The caret line counts characters, not bytes, so that it stands right under any script. Long
 * lines are shown in part: the part that holds the caret. */
static void print_source(const ev_diagnostic *item, FILE *stream)
{
    const char *source = item->source;
    size_t length = strlen(source), count = ev_text_characters(source, length);
    bool on_line = item->column > 0 && (size_t)item->column <= count + 1;
    size_t column = on_line ? (size_t)item->column - 1 : 0;
    size_t skip = column > SOURCE_SHOWN * 3 / 4 ? column - SOURCE_SHOWN / 2 : 0;
    size_t from = 0, to, seen = 0;
    for (to = 0; to < length && seen < skip + SOURCE_SHOWN; to++) {
        bool starts = ((unsigned char)source[to] & 0xC0) != 0x80;
        if (starts && seen == skip)
            from = to;
        seen += starts;
    }
    while (to < length && ((unsigned char)source[to] & 0xC0) == 0x80)
        to++;
    fprintf(stream, "  %s%.*s%s\n", skip ? "..." : "", (int)(to - from), source + from,
            to < length ? "..." : "");
    if (!on_line)
        return;
    fprintf(stream, "  %*s", (int)(column - skip) + (skip ? 3 : 0), "");
    for (int i = 0; i < item->width && i < SOURCE_SHOWN; i++)
        fputc('^', stream);
    fputc('\n', stream);
}

static void print_one(const ev_diagnostic *item, FILE *stream)
{
    if (item->file && item->file[0]) {
        fprintf(stream, "%s:", item->file);
        if (item->line > 0)
            fprintf(stream, "%d:", item->line);
        if (item->line > 0 && item->column > 0)
            fprintf(stream, "%d:", item->column);
        fputc(' ', stream);
    }
    fprintf(stream, "%s: %s\n", item->severity == EV_SEVERITY_ERROR ? "error" : "warning",
            item->text);
    if (item->source && item->source[0])
        print_source(item, stream);
}

void ev_diagnostics_print(const ev_diagnostics *diagnostics, FILE *stream)
{
    for (int i = 0; i < diagnostics->count; i++)
        print_one(&diagnostics->items[i], stream);
    if (diagnostics->dropped > 0)
        fprintf(stream, "and %d more like these\n", diagnostics->dropped);
}
