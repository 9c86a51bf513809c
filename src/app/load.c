/* From a scene's path and --set to a design and its antenna. Called by every command. */
#include "app/command.h"

#include <stdio.h>
#include <string.h>

int ev_exit_code_of(const ev_diagnostics *diagnostics)
{
    static const char *const about_files[] = {"file_missing", "file_unreadable", "file_not_written",
                                              "save_changed"};
    for (int i = 0; i < diagnostics->count; i++)
        for (size_t k = 0; k < sizeof about_files / sizeof about_files[0]; k++)
            if (diagnostics->items[i].severity == EV_SEVERITY_ERROR &&
                strcmp(diagnostics->items[i].id, about_files[k]) == 0)
                return EV_EXIT_IO;
    return EV_EXIT_BAD_INPUT;
}

int ev_finish_output(void)
{
    if (fflush(stdout) == 0 && !ferror(stdout))
        return EV_EXIT_DONE;
    fputs("evenpath: the output could not be written; is the disk full or the pipe closed?\n",
          stderr);
    return EV_EXIT_IO;
}

static int find_feed(const ev_design *design, const char *name, int *feed)
{
    *feed = 0;
    if (!name)
        return EV_EXIT_DONE;
    for (int i = 0; i < design->feed_count; i++)
        if (strcmp(design->feeds[i].name, name) == 0) {
            *feed = i;
            return EV_EXIT_DONE;
        }
    fprintf(stderr, "evenpath: there is no feed '%s'; the scene has", name);
    for (int i = 0; i < design->feed_count; i++)
        fprintf(stderr, "%s '%s'", i > 0 ? "," : "", design->feeds[i].name);
    fputc('\n', stderr);
    return EV_EXIT_BAD_INPUT;
}

/* Prints the diagnostics and empties them. */
static int fail(ev_loaded *loaded, ev_diagnostics *diagnostics)
{
    int code = ev_exit_code_of(diagnostics);
    ev_diagnostics_print(diagnostics, stderr);
    ev_diagnostics_clear(diagnostics);
    ev_unload(loaded);
    return code;
}

int ev_load(const ev_options *options, ev_loaded *loaded)
{
    ev_diagnostics diagnostics;
    ev_diagnostics_init(&diagnostics);
    memset(loaded, 0, sizeof *loaded);
    ev_diagnostics_init(&loaded->cautions);
    loaded->scene = ev_scene_load(options->operands[0], &diagnostics);
    if (!loaded->scene)
        return fail(loaded, &diagnostics);
    loaded->design = *ev_scene_design(loaded->scene);
    for (int i = 0; i < options->set_count; i++)
        ev_scene_assign(loaded->scene, &loaded->design, 0, options->sets[i], &diagnostics);
    if (diagnostics.error_count > 0)
        return fail(loaded, &diagnostics);
    ev_diagnostics_clear(&diagnostics);
    if (!ev_scene_check(loaded->scene, &loaded->design, &loaded->cautions))
        return fail(loaded, &loaded->cautions);
    int code = find_feed(&loaded->design, options->feed, &loaded->feed);
    if (code != EV_EXIT_DONE) {
        ev_unload(loaded);
        return code;
    }
    ev_antenna_build(&loaded->design, loaded->design.frequencies[0], &loaded->antenna);
    return EV_EXIT_DONE;
}

void ev_unload(ev_loaded *loaded)
{
    if (loaded->scene)
        ev_scene_destroy(loaded->scene);
    loaded->scene = NULL;
    ev_diagnostics_clear(&loaded->cautions);
}
