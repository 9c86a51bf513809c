/* Small helpers on strings that more than one folder needs: bounded copies, UTF-8, the nearest of
 * several words, and a growing buffer. Nothing here depends on the locale. */
#pragma once

#include <stdbool.h>
#include <stddef.h>

/* Copies at most size - 1 bytes, never splitting a UTF-8 character, and ends with 0. Returns
 * whether all of it fitted. */
bool ev_text_copy(char *to, size_t size, const char *from);

/* Offset of the first byte that is not UTF-8 (overlong forms and surrogates count as wrong), or
 * `size` when all of it is. */
size_t ev_text_utf8_end(const char *text, size_t size);

/* Characters (code points) in the first `size` bytes; bytes that are not UTF-8 count one each. */
size_t ev_text_characters(const char *text, size_t size);

/* Edit distance: insertions, deletions, replacements and swaps of neighbours, each 1. Words beyond
 * 63 bytes are compared by their first 63. */
int ev_text_distance(const char *a, const char *b);

/* Keeps the best of several candidates; start with {0}. */
typedef struct ev_nearest {
    char word[96]; /* "" while there is none */
    int distance;
} ev_nearest;

void ev_nearest_offer(ev_nearest *nearest, const char *wanted, const char *candidate);

/* Whether the best is near enough to be what was meant. */
bool ev_nearest_is_plausible(const ev_nearest *nearest, const char *wanted);

/* A growing string, always ended with 0. Start with {0}; `data` is NULL until something is added
 * and is the caller's to free. */
typedef struct ev_buffer {
    char *data;
    size_t size, capacity;
} ev_buffer;

void ev_buffer_add(ev_buffer *buffer, const char *text, size_t size);
void ev_buffer_format(ev_buffer *buffer, const char *format, ...)
    __attribute__((format(printf, 2, 3)));

/* malloc and friends that end the program with a message when memory is out: a scene needs so
 * little that there is no way on from there. */
void *ev_allocate(size_t size);
void *ev_reallocate(void *pointer, size_t size);
char *ev_text_duplicate(const char *text, size_t size);
