/* A scene: document, design, pattern tables and remembered spellings. The only way into and out of
 * scene files; reading is reader.c's, splicing is writer.c's. */
#include "scene/scene.h"

#include "base/file.h"
#include "base/message.h"
#include "base/text.h"
#include "scene/assign.h"
#include "scene/pattern_file.h"
#include "scene/problem.h"
#include "scene/reader.h"
#include "scene/value.h"
#include "scene/writer.h"

#include <stdlib.h>
#include <string.h>

struct ev_scene {
    char *path;            /* "" when it has none yet */
    ev_document *document; /* NULL when it was never written */
    ev_design design;
    ev_pattern_cache *patterns;
    ev_spelling *spellings;
};

/* What relative paths start from. */
static const char *scene_name(const ev_scene *scene)
{
    return scene->path[0] || scene->document == NULL ? scene->path : scene->document->name;
}

/* Gives every feed with a pattern table the table that its path names. */
static bool attach_tables(ev_pattern_cache *patterns, const char *beside, ev_design *design,
                          ev_diagnostics *diagnostics)
{
    bool right = true;
    for (int i = 0; i < design->feed_count; i++) {
        ev_feed_design *feed = &design->feeds[i];
        feed->table = NULL;
        if (feed->table_path[0] == 0 || feed->pattern != EV_PATTERN_TABLE)
            continue;
        feed->table = ev_pattern_cache_get(patterns, beside, feed->table_path, diagnostics);
        right = right && feed->table != NULL;
    }
    return right;
}

/* Text to a design that is whole and sound; NULL with diagnostics otherwise. */
static ev_document *read_document(const char *text, size_t size, const char *name,
                                  ev_pattern_cache *patterns, ev_design *design,
                                  ev_diagnostics *diagnostics)
{
    ev_document *document = ev_document_parse(text, size, name, diagnostics);
    if (document == NULL)
        return NULL;
    if (ev_design_read(document, design, diagnostics) &&
        attach_tables(patterns, name, design, diagnostics)) {
        ev_design_resolve(design);
        if (ev_design_report(design, document, diagnostics))
            return document;
    }
    ev_document_destroy(document);
    return NULL;
}

ev_scene *ev_scene_parse(const char *text, size_t size, const char *name,
                         ev_diagnostics *diagnostics)
{
    ev_scene *scene = ev_allocate(sizeof *scene);
    scene->path = ev_text_duplicate("", 0);
    scene->patterns = ev_pattern_cache_create();
    scene->document = read_document(text, size, name, scene->patterns, &scene->design, diagnostics);
    if (scene->document)
        return scene;
    ev_scene_destroy(scene);
    return NULL;
}

ev_scene *ev_scene_create(const ev_design *design)
{
    ev_scene *scene = ev_allocate(sizeof *scene);
    scene->path = ev_text_duplicate("", 0);
    scene->patterns = ev_pattern_cache_create();
    scene->design = *design;
    return scene;
}

static void set_path(ev_scene *scene, const char *path)
{
    char *copy = ev_text_duplicate(path, strlen(path));
    free(scene->path);
    scene->path = copy;
}

ev_scene *ev_scene_load(const char *path, ev_diagnostics *diagnostics)
{
    size_t size;
    char *text = ev_file_read(path, EV_DOCUMENT_BYTES, &size, diagnostics);
    if (text == NULL)
        return NULL;
    ev_scene *scene = ev_scene_parse(text, size, path, diagnostics);
    if (scene)
        set_path(scene, path);
    free(text);
    return scene;
}

void ev_scene_destroy(ev_scene *scene)
{
    if (scene == NULL)
        return;
    while (scene->spellings) {
        ev_spelling *spelling = scene->spellings;
        scene->spellings = spelling->next;
        free(spelling);
    }
    ev_document_destroy(scene->document);
    ev_pattern_cache_destroy(scene->patterns);
    free(scene->path);
    free(scene);
}

const char *ev_scene_path(const ev_scene *scene)
{
    return scene->path;
}

const ev_design *ev_scene_design(const ev_scene *scene)
{
    return &scene->design;
}

bool ev_scene_check(const ev_scene *scene, const ev_design *design, ev_diagnostics *diagnostics)
{
    return ev_design_report(design, scene->document, diagnostics);
}

const ev_pattern_table *ev_scene_pattern(ev_scene *scene, const char *path,
                                         ev_diagnostics *diagnostics)
{
    return ev_pattern_cache_get(scene->patterns, scene_name(scene), path, diagnostics);
}

bool ev_scene_assign(const ev_scene *scene, ev_design *design, int selected_feed,
                     const char *assignment, ev_diagnostics *diagnostics)
{
    ev_design trial = *design;
    if (!ev_design_assign(&trial, selected_feed, assignment, diagnostics) ||
        !attach_tables(scene->patterns, scene_name(scene), &trial, diagnostics))
        return false;
    *design = trial;
    return true;
}

void ev_scene_remember_spelling(ev_scene *scene, const char *address, double value,
                                const char *text)
{
    ev_spelling *spelling = ev_allocate(sizeof *spelling);
    spelling->value = value;
    bool fits = ev_text_copy(spelling->address, sizeof spelling->address, address) &&
                ev_text_copy(spelling->text, sizeof spelling->text, text);
    if (!fits) {
        free(spelling);
        return;
    }
    spelling->next = scene->spellings; /* the newest is found first */
    scene->spellings = spelling;
}

char *ev_scene_text(const ev_scene *scene, const ev_design *design, size_t *size)
{
    if (scene->document == NULL)
        return ev_document_write(design, scene->spellings, size);
    return ev_document_splice(scene->document, &scene->design, design, scene->spellings, size);
}

/* Errors are said, warnings were said when they came up. */
static bool is_sound(const ev_scene *scene, const ev_design *design, ev_diagnostics *diagnostics)
{
    ev_diagnostics silent;
    ev_diagnostics_init(&silent);
    bool sound = ev_scene_check(scene, design, &silent);
    ev_diagnostics_clear(&silent);
    return sound || ev_scene_check(scene, design, diagnostics);
}

/* Reads the new text back: nothing may be lost. */
static ev_document *read_back(ev_scene *scene, const ev_design *design, const char *text,
                              size_t size, const char *path, ev_diagnostics *diagnostics)
{
    ev_design back;
    ev_diagnostics own;
    ev_diagnostics_init(&own);
    ev_document *document = read_document(text, size, path, scene->patterns, &back, &own);
    if (document == NULL || !ev_design_same(&back, design)) {
        ev_place place = {.file = path};
        ev_report(diagnostics, EV_SEVERITY_ERROR, save_unfaithful, &place, path);
        ev_document_destroy(document);
        document = NULL;
    }
    ev_diagnostics_clear(&own);
    return document;
}

/* Whether the file still says what was read from it. A file that is gone is no one's work. */
static bool is_unchanged_on_disk(const ev_scene *scene, const char *target,
                                 ev_diagnostics *diagnostics)
{
    if (scene->document == NULL || strcmp(target, scene->path) != 0)
        return true;
    ev_diagnostics silent;
    ev_diagnostics_init(&silent);
    size_t size = 0;
    char *text = ev_file_read(target, EV_DOCUMENT_BYTES, &size, &silent);
    bool missing = silent.count > 0 && strcmp(silent.items[0].id, "file_missing") == 0;
    bool same =
        text && size == scene->document->size && memcmp(text, scene->document->text, size) == 0;
    ev_diagnostics_clear(&silent);
    free(text);
    if (!same && !missing) {
        ev_place place = {.file = target};
        ev_report(diagnostics, EV_SEVERITY_ERROR, save_changed, &place, target);
    }
    return same || missing;
}

bool ev_scene_save(ev_scene *scene, const ev_design *design, const char *path,
                   ev_diagnostics *diagnostics)
{
    const char *target = path ? path : scene->path;
    size_t size;
    if (target[0] == 0) {
        ev_report(diagnostics, EV_SEVERITY_ERROR, save_no_path, NULL, "");
        return false;
    }
    ev_design whole = *design;
    if (!attach_tables(scene->patterns, target, &whole, diagnostics) ||
        !is_sound(scene, &whole, diagnostics) || !is_unchanged_on_disk(scene, target, diagnostics))
        return false;
    char *text = ev_scene_text(scene, &whole, &size);
    ev_document *document = read_back(scene, &whole, text, size, target, diagnostics);
    bool saved = document && ev_file_replace(target, text, size, diagnostics);
    free(text);
    if (!saved) {
        ev_document_destroy(document);
        return false;
    }
    ev_document_destroy(scene->document);
    scene->document = document;
    scene->design = whole;
    set_path(scene, target);
    return true;
}
