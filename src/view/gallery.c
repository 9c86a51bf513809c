/* The example scenes to choose from: every scene of a folder that loads, with a few rays and the
 * comment it opens with. */
#include "view/state.h"

#include <dirent.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

enum { GALLERY_CAPACITY = 24, GALLERY_RAYS = 40 };

static int is_scene(const struct dirent *entry)
{
    const char *dot = strrchr(entry->d_name, '.');
    return dot && (strcmp(dot, ".yaml") == 0 || strcmp(dot, ".yml") == 0);
}

/* The comment at the head of a file as one line, without its marks. */
static void read_comment(const char *path, char *comment, size_t size)
{
    char line[512];
    size_t used = 0;
    comment[0] = '\0';
    FILE *file = fopen(path, "r");
    while (file && fgets(line, sizeof line, file) && line[0] == '#') {
        const char *text = line + 1 + strspn(line + 1, "# \t");
        size_t length = strcspn(text, "\r\n");
        int written =
            snprintf(comment + used, size - used, "%s%.*s", used > 0 ? " " : "", (int)length, text);
        used += written > 0 ? (size_t)written : 0;
        if (used >= size) {
            break;
        }
    }
    if (file) {
        fclose(file);
    }
    while (used > 0 && ((unsigned char)comment[strlen(comment)] & 0xC0) == 0x80) {
        comment[strlen(comment) - 1] = '\0';
    }
}

static bool reserve(ev_gallery *gallery)
{
    gallery->scenes = calloc(GALLERY_CAPACITY, sizeof(ev_scene *));
    gallery->antennas = calloc(GALLERY_CAPACITY, sizeof *gallery->antennas);
    gallery->items = calloc(GALLERY_CAPACITY, sizeof *gallery->items);
    gallery->paths = calloc(GALLERY_CAPACITY, sizeof(char *));
    gallery->rays = calloc((size_t)GALLERY_CAPACITY * GALLERY_RAYS, sizeof *gallery->rays);
    return gallery->scenes && gallery->antennas && gallery->items && gallery->paths &&
           gallery->rays;
}

static void trace_few(ev_gallery_item *item, ev_ray *rays)
{
    ev_budget budget;
    ev_budget_compute(item->antenna, &budget);
    item->rays = rays;
    item->ray_count = ev_trace_section(item->antenna, 0, GALLERY_RAYS, budget.feeds[0].power, rays);
}

static void add_scene(ev_gallery *gallery, const char *path, ev_diagnostics *diagnostics)
{
    int at = gallery->count;
    ev_scene *scene = ev_scene_load(path, diagnostics);
    char *copy = scene ? SDL_strdup(path) : NULL;
    if (!copy) {
        ev_scene_destroy(scene);
        return;
    }
    ev_gallery_item *item = &gallery->items[at];
    gallery->scenes[at] = scene;
    gallery->paths[at] = copy;
    item->design = ev_scene_design(scene);
    item->antenna = &gallery->antennas[at];
    ev_antenna_build(item->design, item->design->frequencies[0], &gallery->antennas[at]);
    read_comment(path, item->comment, sizeof item->comment);
    trace_few(item, gallery->rays + (size_t)at * GALLERY_RAYS);
    ++gallery->count;
}

void ev_gallery_load(ev_gallery *gallery, const char *folder)
{
    struct dirent **entries = NULL;
    ev_diagnostics *diagnostics = malloc(sizeof *diagnostics);
    *gallery = (ev_gallery){0};
    int count = folder && diagnostics ? scandir(folder, &entries, is_scene, alphasort) : 0;
    if (diagnostics) {
        ev_diagnostics_init(diagnostics);
    }
    bool room = count > 0 && reserve(gallery);
    for (int i = 0; i < count; ++i) {
        char path[1024];
        snprintf(path, sizeof path, "%s/%s", folder, entries[i]->d_name);
        if (room && gallery->count < GALLERY_CAPACITY) {
            add_scene(gallery, path, diagnostics);
        }
        free(entries[i]);
    }
    free(entries);
    if (diagnostics) {
        ev_diagnostics_clear(diagnostics);
    }
    free(diagnostics);
}

void ev_gallery_free(ev_gallery *gallery)
{
    for (int i = 0; i < gallery->count; ++i) {
        ev_scene_destroy(gallery->scenes[i]);
        SDL_free(gallery->paths[i]);
    }
    free(gallery->scenes);
    free(gallery->antennas);
    free(gallery->items);
    free(gallery->paths);
    free(gallery->rays);
    *gallery = (ev_gallery){0};
}
