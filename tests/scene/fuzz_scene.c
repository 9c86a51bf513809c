/* libFuzzer's way into the scene reader and writer: any bytes as a scene; if they load, the text of
 * the unchanged design must be those bytes, and edits must give a text that parses to the same
 * design or is refused. Built with EVENPATH_FUZZ; test_corpus.c runs the corpus through it. */
#include "random_edit.h"

#include <stdlib.h>

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size);

static void require(bool condition, const char *what)
{
    if (!condition) {
        fprintf(stderr, "fuzz_scene: %s\n", what);
        abort();
    }
}

static uint64_t seed_from(const uint8_t *data, size_t size)
{
    uint64_t hash = 1469598103934665603ULL; /* FNV-1a */
    for (size_t i = 0; i < size; i++)
        hash = (hash ^ data[i]) * 1099511628211ULL;
    return hash | 1;
}

static void check_unchanged(const ev_scene *scene, const uint8_t *data, size_t size)
{
    size_t length;
    char *text = ev_scene_text(scene, ev_scene_design(scene), &length);
    require(length == size && memcmp(text, data, size) == 0,
            "an unchanged design changed the text");
    free(text);
}

static void check_edits(const ev_scene *scene, uint64_t seed)
{
    ev_design design = *ev_scene_design(scene);
    ev_diagnostics diagnostics;
    for (int i = 0; i < 4; i++)
        random_edit(&seed, scene, &design);
    size_t length;
    char *text = ev_scene_text(scene, &design, &length);
    require(strlen(text) == length, "the text holds a zero");
    ev_diagnostics_init(&diagnostics);
    ev_scene *again = ev_scene_parse(text, length, "again", &diagnostics);
    require(again != NULL || diagnostics.error_count > 0, "refused without a reason");
    ev_scene_destroy(again);
    ev_diagnostics_clear(&diagnostics);
    free(text);
}

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size)
{
    ev_diagnostics diagnostics;
    ev_diagnostics_init(&diagnostics);
    ev_scene *scene = ev_scene_parse((const char *)data, size, "fuzz", &diagnostics);
    require(scene != NULL || diagnostics.error_count > 0, "refused without a reason");
    if (scene) {
        check_unchanged(scene, data, size);
        check_edits(scene, seed_from(data, size));
    }
    ev_scene_destroy(scene);
    ev_diagnostics_clear(&diagnostics);
    return 0;
}
