/* Programs, textures and grids. */
#include "view/gl.h"

#include <stddef.h>
#include <stdlib.h>

static GLuint compile(const char *name, GLenum kind, const char *text, ev_diagnostics *diagnostics)
{
    GLuint shader = glCreateShader(kind);
    glShaderSource(shader, 1, &text, NULL);
    glCompileShader(shader);
    GLint good = GL_FALSE;
    glGetShaderiv(shader, GL_COMPILE_STATUS, &good);
    if (good) {
        return shader;
    }
    char log[400] = "";
    glGetShaderInfoLog(shader, sizeof log, NULL, log);
    glDeleteShader(shader);
    ev_diagnose(diagnostics, EV_SEVERITY_ERROR, "shader", NULL,
                "The graphics driver refuses the shader \"%s\": %s. OpenGL 3.3 is needed; the "
                "packaged software driver (libgl1-mesa-dri) has it.",
                name, log);
    return 0;
}

GLuint ev_gl_program(const char *name, const char *vertex, const char *fragment,
                     ev_diagnostics *diagnostics)
{
    GLuint first = compile(name, GL_VERTEX_SHADER, vertex, diagnostics);
    GLuint second = first ? compile(name, GL_FRAGMENT_SHADER, fragment, diagnostics) : 0;
    if (!second) {
        glDeleteShader(first);
        return 0;
    }
    GLuint program = glCreateProgram();
    glAttachShader(program, first);
    glAttachShader(program, second);
    glLinkProgram(program);
    glDeleteShader(first);
    glDeleteShader(second);
    GLint good = GL_FALSE;
    glGetProgramiv(program, GL_LINK_STATUS, &good);
    if (!good) {
        glDeleteProgram(program);
        ev_diagnose(diagnostics, EV_SEVERITY_ERROR, "shader", NULL,
                    "The graphics driver cannot link the shader \"%s\".", name);
        return 0;
    }
    return program;
}

static void make_texture(ev_texture *texture, int width, int height, bool smooth)
{
    GLint filter = smooth ? GL_LINEAR : GL_NEAREST;
    glGenTextures(1, &texture->id);
    glBindTexture(GL_TEXTURE_2D, texture->id);
    glTexParameteri(GL_TEXTURE_2D, GL_TEXTURE_MIN_FILTER, filter);
    glTexParameteri(GL_TEXTURE_2D, GL_TEXTURE_MAG_FILTER, filter);
    glTexParameteri(GL_TEXTURE_2D, GL_TEXTURE_WRAP_S, GL_CLAMP_TO_EDGE);
    glTexParameteri(GL_TEXTURE_2D, GL_TEXTURE_WRAP_T, GL_CLAMP_TO_EDGE);
    glTexImage2D(GL_TEXTURE_2D, 0, GL_RGBA8, width, height, 0, GL_BGRA, GL_UNSIGNED_INT_8_8_8_8_REV,
                 NULL);
    texture->width = width;
    texture->height = height;
}

void ev_texture_upload(ev_texture *texture, const ev_pixels *pixels, bool smooth)
{
    if (texture->id && (texture->width != pixels->width || texture->height != pixels->height)) {
        ev_texture_free(texture);
    }
    if (!texture->id) {
        make_texture(texture, pixels->width, pixels->height, smooth);
    }
    glBindTexture(GL_TEXTURE_2D, texture->id);
    glPixelStorei(GL_UNPACK_ROW_LENGTH, pixels->stride);
    glTexSubImage2D(GL_TEXTURE_2D, 0, pixels->left, pixels->top, pixels->right - pixels->left,
                    pixels->bottom - pixels->top, GL_BGRA, GL_UNSIGNED_INT_8_8_8_8_REV,
                    pixels->data + (ptrdiff_t)pixels->top * pixels->stride + pixels->left);
    glPixelStorei(GL_UNPACK_ROW_LENGTH, 0);
}

void ev_texture_free(ev_texture *texture)
{
    if (texture->id) {
        glDeleteTextures(1, &texture->id);
    }
    *texture = (ev_texture){0};
}

static void describe_vertices(void)
{
    const struct {
        GLint size;
        size_t offset;
    } parts[] = {{3, offsetof(ev_vertex, position)},
                 {3, offsetof(ev_vertex, normal)},
                 {2, offsetof(ev_vertex, aperture)},
                 {2, offsetof(ev_vertex, polar)},
                 {1, offsetof(ev_vertex, value)}};
    for (GLuint i = 0; i < sizeof parts / sizeof parts[0]; ++i) {
        glEnableVertexAttribArray(i);
        /* GL takes the offset dressed as a pointer */
        /* NOLINTNEXTLINE(performance-no-int-to-ptr) */
        glVertexAttribPointer(i, parts[i].size, GL_FLOAT, GL_FALSE, sizeof(ev_vertex),
                              (const void *)parts[i].offset);
    }
}

static void upload_indices(int rows, int columns)
{
    size_t count = (size_t)rows * (size_t)columns * 6;
    GLuint *indices = malloc(count * sizeof *indices), *next = indices;
    if (!indices) {
        return;
    }
    for (int row = 0; row < rows; ++row) {
        for (int column = 0; column < columns; ++column) {
            GLuint a = (GLuint)(row * (columns + 1) + column), b = a + (GLuint)columns + 1;
            const GLuint quad[6] = {a, b, a + 1, a + 1, b, b + 1};
            for (int i = 0; i < 6; ++i) {
                *next++ = quad[i];
            }
        }
    }
    glBufferData(GL_ELEMENT_ARRAY_BUFFER, (GLsizeiptr)(count * sizeof *indices), indices,
                 GL_STATIC_DRAW);
    free(indices);
}

void ev_grid_upload(ev_grid *grid, const ev_mesh *mesh)
{
    if (!grid->array) {
        glGenVertexArrays(1, &grid->array);
        glGenBuffers(1, &grid->vertices);
        glGenBuffers(1, &grid->indices);
    }
    glBindVertexArray(grid->array);
    glBindBuffer(GL_ARRAY_BUFFER, grid->vertices);
    size_t count = (size_t)(mesh->rows + 1) * (size_t)(mesh->columns + 1);
    glBufferData(GL_ARRAY_BUFFER, (GLsizeiptr)(count * sizeof *mesh->vertices), mesh->vertices,
                 GL_STREAM_DRAW);
    describe_vertices();
    glBindBuffer(GL_ELEMENT_ARRAY_BUFFER, grid->indices);
    if (grid->rows != mesh->rows || grid->columns != mesh->columns) {
        upload_indices(mesh->rows, mesh->columns);
        grid->rows = mesh->rows;
        grid->columns = mesh->columns;
    }
    glBindVertexArray(0);
}

void ev_grid_draw(const ev_grid *grid)
{
    glBindVertexArray(grid->array);
    glDrawElements(GL_TRIANGLES, grid->rows * grid->columns * 6, GL_UNSIGNED_INT, NULL);
    glBindVertexArray(0);
}

void ev_grid_free(ev_grid *grid)
{
    if (grid->array) {
        glDeleteVertexArrays(1, &grid->array);
        glDeleteBuffers(1, &grid->vertices);
        glDeleteBuffers(1, &grid->indices);
    }
    *grid = (ev_grid){0};
}
