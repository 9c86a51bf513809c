/* Edits of a text. Called by writer.c; knows lines and bytes, nothing of YAML. */
#include "scene/splice.h"

#include "base/text.h"

#include <stdlib.h>
#include <string.h>

void ev_splice_add(ev_splice *splice, size_t start, size_t end, char *text)
{
    if (splice->count == splice->capacity) {
        splice->capacity = 2 * splice->capacity + 16;
        splice->edits =
            ev_reallocate(splice->edits, (size_t)splice->capacity * sizeof *splice->edits);
    }
    ev_edit *edit = &splice->edits[splice->count];
    edit->start = start;
    edit->end = end;
    edit->text = text;
    edit->order = splice->count++;
}

static int compare_edits(const void *left, const void *right)
{
    const ev_edit *a = left, *b = right;
    if (a->start != b->start)
        return a->start < b->start ? -1 : 1;
    return a->order - b->order;
}

char *ev_splice_apply(ev_splice *splice, size_t *size)
{
    const ev_document *document = splice->document;
    ev_buffer text = {0};
    size_t at = 0;
    if (splice->count > 0)
        qsort(splice->edits, (size_t)splice->count, sizeof *splice->edits, compare_edits);
    for (int i = 0; i < splice->count; i++) {
        ev_edit *edit = &splice->edits[i];
        if (edit->start > at)
            ev_buffer_add(&text, document->text + at, edit->start - at);
        ev_buffer_add(&text, edit->text, strlen(edit->text));
        at = edit->end > at ? edit->end : at;
        free(edit->text);
    }
    ev_buffer_add(&text, document->text + at, document->size - at);
    free(splice->edits);
    *splice = (ev_splice){.document = document};
    *size = text.size;
    return text.data;
}

size_t ev_line_start(const ev_document *document, size_t at)
{
    while (at > 0 && document->text[at - 1] != '\n')
        at--;
    return at;
}

size_t ev_line_end(const ev_document *document, size_t at)
{
    return at + strcspn(document->text + at, "\r\n");
}

const char *ev_newline(const ev_document *document)
{
    const char *first = strchr(document->text, '\n');
    return first && first > document->text && first[-1] == '\r' ? "\r\n" : "\n";
}

void ev_splice_remove_lines(ev_splice *splice, size_t start, size_t end)
{
    const ev_document *document = splice->document;
    size_t from = ev_line_start(document, start), to = ev_line_end(document, end);
    if (from == 0) /* the first line has no break before it: the one behind goes */
        to += strspn(document->text + to, "\r") + 1;
    else
        from -= from > 1 && document->text[from - 2] == '\r' ? 2 : 1;
    ev_splice_add(splice, from, to < document->size ? to : document->size,
                  ev_text_duplicate("", 0));
}
