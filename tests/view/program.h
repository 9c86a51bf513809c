/* Running the real program from a test: a replay in, its output and files back. Shared by the tests
 * of the window without and with a display. */
#pragma once

#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>

#include <cmocka.h>

#include <cairo.h>
#include <stdbool.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/wait.h>
#include <unistd.h>

/* What a run printed, both streams, and its exit code. */
typedef struct run_result {
    char *text; /* malloc'd */
    int code;
} run_result;

static inline char *read_stream(FILE *stream)
{
    size_t size = 0, capacity = 1 << 16;
    char *text = malloc(capacity);
    assert_non_null(text);
    for (size_t got; (got = fread(text + size, 1, capacity - size - 1, stream)) > 0;) {
        size += got;
        if (capacity - size < 2) {
            text = realloc(text, capacity *= 2);
            assert_non_null(text);
        }
    }
    text[size] = '\0';
    return text;
}

/* `command` by the shell. */
static inline run_result run_command(const char *command)
{
    run_result result;
    fflush(NULL);
    FILE *pipe = popen(command, "r");
    assert_non_null(pipe);
    result.text = read_stream(pipe);
    int status = pclose(pipe);
    result.code = WIFEXITED(status) ? WEXITSTATUS(status) : -1;
    return result;
}

/* The window on a scene ("" for none) by a replay's steps, in `folder`; `environment` is put before
 * the program, like "env -u DISPLAY". */
static inline run_result run_replay(const char *environment, const char *folder, const char *scene,
                                    const char *steps)
{
    char path[600], command[2400];
    snprintf(path, sizeof path, "%s/steps.replay", folder);
    FILE *file = fopen(path, "w");
    assert_non_null(file);
    fputs(steps, file);
    assert_int_equal(fclose(file), 0);
    snprintf(command, sizeof command, "cd '%s' && %s '%s' window %s%s%s --replay steps.replay 2>&1",
             folder, environment, EV_PROGRAM, *scene ? "'" : "", scene, *scene ? "'" : "");
    return run_command(command);
}

/* The number printed after a name at the start of a line; the last such line counts. */
static inline bool find_number(const char *text, const char *name, double *value)
{
    size_t length = strlen(name);
    bool found = false;
    for (const char *line = text; line; line = strchr(line, '\n')) {
        line += *line == '\n' ? 1 : 0;
        if (strncmp(line, name, length) == 0 && line[length] == ' ') {
            *value = strtod(line + length, NULL);
            found = true;
        }
        if (*line == '\n') {
            continue;
        }
    }
    return found;
}

/* How many different colours a PNG has in the upper left share of it, up to a thousand. */
static inline int count_colours(const char *path)
{
    static uint32_t seen[1000];
    int count = 0;
    cairo_surface_t *surface = cairo_image_surface_create_from_png(path);
    assert_int_equal(cairo_surface_status(surface), CAIRO_STATUS_SUCCESS);
    const unsigned char *pixels = cairo_image_surface_get_data(surface);
    int stride = cairo_image_surface_get_stride(surface);
    int width = cairo_image_surface_get_width(surface) * 2 / 3;
    int height = cairo_image_surface_get_height(surface) * 4 / 5;
    for (int y = height / 5; y < height && count < 1000; ++y) {
        for (int x = 0; x < width && count < 1000; ++x) {
            uint32_t colour;
            memcpy(&colour, pixels + (ptrdiff_t)y * stride + 4 * (ptrdiff_t)x, 4);
            int i = 0;
            while (i < count && seen[i] != colour) {
                ++i;
            }
            if (i == count) {
                seen[count++] = colour;
            }
        }
    }
    cairo_surface_destroy(surface);
    return count;
}
