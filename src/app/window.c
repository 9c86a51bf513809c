/* `evenpath [SCENE]`: the window. */
#include "app/command.h"

#include "view/view.h"

#include <stdio.h>
#include <string.h>
#include <unistd.h>

/* The example scenes: those of the installation that the program runs from, else the source's. */
static const char *find_examples(char *path, size_t size)
{
    ssize_t length = readlink("/proc/self/exe", path, size - 1);
    if (length > 0) {
        path[length] = '\0';
        char *slash = strrchr(path, '/');
        static const char share[] = "/../share/evenpath/scenes";
        if (slash && (size_t)(slash - path) + sizeof share <= size) {
            memcpy(slash, share, sizeof share);
            if (access(path, R_OK) == 0)
                return path;
        }
    }
    return access(EV_SCENE_FOLDER, R_OK) == 0 ? EV_SCENE_FOLDER : NULL;
}

int ev_command_window(const ev_options *options)
{
    char folder[4096];
    ev_diagnostics diagnostics;
    ev_diagnostics_init(&diagnostics);
    ev_view_options view = {.scene = options->operands[0],
                            .examples = find_examples(folder, sizeof folder),
                            .replay = options->replay,
                            .assignments = options->sets,
                            .assignment_count = options->set_count,
                            .width = (int)options->width,
                            .height = (int)options->height,
                            .dark = options->dark};
    int code = ev_view_run(&view, &diagnostics);
    ev_diagnostics_print(&diagnostics, stderr);
    ev_diagnostics_clear(&diagnostics);
    return code;
}
