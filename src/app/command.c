/* The table of commands and the help made from it. The command line is read in options.c. */
#include "app/command.h"

#include "app/options.h"
#include "base/text.h"

#include <stdio.h>
#include <string.h>
#include <unistd.h>

static const ev_command commands[] = {
    {"window", "[SCENE]", "open the window; without a scene, choose from the examples",
     "--size --dark --replay", 0, 1, ev_command_window},
    {"budget", "SCENE", "verdict, watts, ledger of losses, path error, noise, cautions",
     "--json --csv --all-frequencies", 1, 1, ev_command_budget},
    {"beam", "SCENE", "gain, widths, sidelobes, cross-polarization; cuts, maps, limits",
     "--feed --cut --map --span --grid --limits --second --json --csv", 1, 1, ev_command_beam},
    {"rays", "SCENE", "a fan of rays as CSV: hit points, lengths, fate, power",
     "--feed --rays --section", 1, 1, ev_command_rays},
    {"aperture", "SCENE", "the aperture as CSV: path error, lighting, shadow on a grid",
     "--feed --grid", 1, 1, ev_command_aperture},
    {"picture", "SCENE OUT", "the page as OUT.png, OUT.svg or OUT.pdf",
     "--feed --size --scale --dark", 2, 2, ev_command_picture},
    {"compare", "SCENE SCENE", "two budgets side by side and their difference", "--json", 2, 2,
     ev_command_compare},
    {"explain", "[NAME]", "what a parameter means, its unit, range and default", "", 0, 1,
     ev_command_explain},
};

enum { COMMAND_COUNT = sizeof commands / sizeof commands[0] };

const ev_command *ev_command_list(int *count)
{
    *count = COMMAND_COUNT;
    return commands;
}

static void print_help(void)
{
    printf("evenpath: where feed and subreflector of a reflector antenna go, how exactly they must "
           "sit,\nand what each millimetre costs.\n\n"
           "  evenpath [SCENE]            open the window\n"
           "  evenpath COMMAND ...\n\nCommands\n");
    for (int i = 0; i < COMMAND_COUNT; i++) {
        char form[48];
        snprintf(form, sizeof form, "%s %s", commands[i].name, commands[i].operands);
        printf("  %-24s  %s\n", form, commands[i].summary);
    }
    printf("\nOptions\n");
    ev_options_print(stdout);
    printf("\nResults go to stdout, messages to stderr. Exit: 0 done, 1 a check asked for did not "
           "pass,\n2 bad input or usage, 3 could not read or write.\n"
           "`evenpath explain` lists the parameters that a scene and --set know.\n");
}

static const ev_command *find_command(const char *word)
{
    for (int i = 0; word && i < COMMAND_COUNT; i++)
        if (strcmp(word, commands[i].name) == 0)
            return &commands[i];
    return NULL;
}

/* A word that is neither a command, an option nor a file, but nearly a command. */
static int misspelt(const char *word)
{
    ev_nearest nearest = {0};
    for (int i = 0; i < COMMAND_COUNT; i++)
        ev_nearest_offer(&nearest, word, commands[i].name);
    if (!ev_nearest_is_plausible(&nearest, word))
        return EV_EXIT_DONE;
    return ev_usage_error("there is no command and no file '%s'; did you mean '%s'?", word,
                          nearest.word);
}

int ev_app_run(int argc, char **argv)
{
    const char *first = argc > 1 ? argv[1] : NULL;
    if (first && strcmp(first, "--help") == 0) {
        print_help();
        return ev_finish_output();
    }
    if (first && strcmp(first, "--version") == 0) {
        printf("evenpath %s\n", EV_VERSION);
        return ev_finish_output();
    }
    const ev_command *command = find_command(first);
    int skip = command ? 2 : 1;
    int code = EV_EXIT_DONE;
    if (!command && first && first[0] != '-' && access(first, F_OK) != 0)
        code = misspelt(first);
    if (code != EV_EXIT_DONE)
        return code;
    if (!command)
        command = &commands[0];
    ev_options options;
    code = ev_options_read(command, argc - skip, argv + skip, &options);
    return code == EV_EXIT_DONE ? command->run(&options) : code;
}
