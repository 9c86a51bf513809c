/* Strings: bounded copies, UTF-8, edit distance, a growing buffer. Called by every folder above;
 * knows nothing of scenes or optics. */
#include "base/text.h"

#include <stdarg.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

enum { DISTANCE_CAPACITY = 63 };

/* Length of the well-formed character at `text`, 0 when it is not one (Unicode 15, table 3-7). */
static size_t measure_character(const unsigned char *text, size_t size)
{
    unsigned char first = text[0];
    if (first < 0x80)
        return 1;
    size_t length = first >= 0xF0 ? 4 : first >= 0xE0 ? 3 : 2;
    if (first < 0xC2 || first > 0xF4 || size < length)
        return 0;
    unsigned char low = first == 0xE0 ? 0xA0 : first == 0xF0 ? 0x90 : 0x80;
    unsigned char high = first == 0xED ? 0x9F : first == 0xF4 ? 0x8F : 0xBF;
    if (text[1] < low || text[1] > high)
        return 0;
    for (size_t i = 2; i < length; i++) {
        if (text[i] < 0x80 || text[i] > 0xBF)
            return 0;
    }
    return length;
}

size_t ev_text_utf8_end(const char *text, size_t size)
{
    size_t at = 0;
    while (at < size) {
        size_t length = measure_character((const unsigned char *)text + at, size - at);
        if (length == 0)
            break;
        at += length;
    }
    return at;
}

size_t ev_text_characters(const char *text, size_t size)
{
    size_t count = 0;
    for (size_t at = 0; at < size; count++) {
        size_t length = measure_character((const unsigned char *)text + at, size - at);
        at += length > 0 ? length : 1;
    }
    return count;
}

bool ev_text_copy(char *to, size_t size, const char *from)
{
    size_t length = strlen(from);
    bool fits = length < size;
    if (!fits) {
        length = size - 1;
        while (length > 0 && ((unsigned char)from[length] & 0xC0) == 0x80)
            length--;
    }
    memmove(to, from, length);
    to[length] = 0;
    return fits;
}

static int smaller(int a, int b)
{
    return a < b ? a : b;
}

/* Optimal string alignment: three rows of the distance table suffice. */
int ev_text_distance(const char *a, const char *b)
{
    int rows[3][DISTANCE_CAPACITY + 1];
    int length_a = smaller((int)strnlen(a, DISTANCE_CAPACITY), DISTANCE_CAPACITY);
    int length_b = smaller((int)strnlen(b, DISTANCE_CAPACITY), DISTANCE_CAPACITY);
    for (int j = 0; j <= length_b; j++)
        rows[0][j] = j;
    for (int i = 1; i <= length_a; i++) {
        int *row = rows[i % 3];
        const int *above = rows[(i + 2) % 3], *above_two = rows[(i + 1) % 3];
        row[0] = i;
        for (int j = 1; j <= length_b; j++) {
            int replaced = above[j - 1] + (a[i - 1] != b[j - 1]);
            row[j] = smaller(replaced, smaller(above[j], row[j - 1]) + 1);
            if (i > 1 && j > 1 && a[i - 1] == b[j - 2] && a[i - 2] == b[j - 1])
                row[j] = smaller(row[j], above_two[j - 2] + 1);
        }
    }
    return rows[length_a % 3][length_b];
}

void ev_nearest_offer(ev_nearest *nearest, const char *wanted, const char *candidate)
{
    int distance = ev_text_distance(wanted, candidate);
    if (nearest->word[0] != 0 && distance >= nearest->distance)
        return;
    ev_text_copy(nearest->word, sizeof nearest->word, candidate);
    nearest->distance = distance;
}

bool ev_nearest_is_plausible(const ev_nearest *nearest, const char *wanted)
{
    int allowed = 1 + (int)strnlen(wanted, DISTANCE_CAPACITY) / 3;
    return nearest->word[0] != 0 && nearest->distance <= allowed;
}

void *ev_reallocate(void *pointer, size_t size)
{
    void *moved = realloc(pointer, size > 0 ? size : 1);
    if (moved == NULL) {
        fputs("evenpath: out of memory\n", stderr);
        abort();
    }
    return moved;
}

void *ev_allocate(size_t size)
{
    return memset(ev_reallocate(NULL, size), 0, size > 0 ? size : 1);
}

char *ev_text_duplicate(const char *text, size_t size)
{
    char *copy = ev_allocate(size + 1);
    if (size > 0)
        memcpy(copy, text, size);
    return copy;
}

void ev_buffer_add(ev_buffer *buffer, const char *text, size_t size)
{
    if (buffer->size + size + 1 > buffer->capacity) {
        buffer->capacity = 2 * (buffer->size + size) + 64;
        buffer->data = ev_reallocate(buffer->data, buffer->capacity);
    }
    if (size > 0)
        memcpy(buffer->data + buffer->size, text, size);
    buffer->size += size;
    buffer->data[buffer->size] = 0;
}

void ev_buffer_format(ev_buffer *buffer, const char *format, ...)
{
    va_list arguments;
    va_start(arguments, format);
    int length = vsnprintf(NULL, 0, format, arguments);
    va_end(arguments);
    if (length <= 0)
        return;
    char *text = ev_allocate((size_t)length + 1);
    va_start(arguments, format);
    vsnprintf(text, (size_t)length + 1, format, arguments);
    va_end(arguments);
    ev_buffer_add(buffer, text, (size_t)length);
    free(text);
}
