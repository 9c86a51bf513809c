/* The fuzz target's corpus, and each of its texts cut and bent, through the same entry point. */
#include "support.h"

#include "fuzz_scene.c"

#include <dirent.h>

static int run_file(const char *folder, const char *name)
{
    char path[512];
    static uint8_t bytes[1 << 16];
    snprintf(path, sizeof path, "%s/%s", folder, name);
    FILE *file = fopen(path, "r");
    assert_non_null(file);
    size_t size = fread(bytes, 1, sizeof bytes, file);
    fclose(file);
    LLVMFuzzerTestOneInput(bytes, size);
    uint64_t random = 7 + size;
    for (int i = 0; i < 40 && size > 0; i++) { /* cut short */
        LLVMFuzzerTestOneInput(bytes, (size_t)random_below(&random, (int)size));
    }
    for (int i = 0; i < 40 && size > 0; i++) { /* one byte changed, for good */
        bytes[random_below(&random, (int)size)] = (uint8_t)random_below(&random, 256);
        LLVMFuzzerTestOneInput(bytes, size);
    }
    return 1;
}

static int run_folder(const char *name)
{
    DIR *folder = opendir(name);
    assert_non_null(folder);
    int run = 0;
    for (struct dirent *entry = readdir(folder); entry; entry = readdir(folder)) {
        if (entry->d_name[0] != '.')
            run += run_file(name, entry->d_name);
    }
    closedir(folder);
    return run;
}

static void corpus_is_harmless(void **state)
{
    (void)state;
    assert_true(run_folder(EV_TESTS "/scene/corpus") >= 10);
}

static void bent_scenes_are_harmless(void **state)
{
    (void)state;
    assert_true(run_folder(EV_SCENES) >= SCENE_COUNT);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(corpus_is_harmless),
        cmocka_unit_test(bent_scenes_are_harmless),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
