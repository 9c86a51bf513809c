/* Commands and their options. Each command is one file and one row of the table in command.c. */
#pragma once

#include "base/diagnostic.h"
#include "optics/antenna.h"
#include "scene/scene.h"

#include <stdbool.h>

enum { EV_EXIT_DONE = 0, EV_EXIT_CHECK_FAILED = 1, EV_EXIT_BAD_INPUT = 2, EV_EXIT_IO = 3 };

enum { EV_SET_CAPACITY = 256 };

/* What the command line said. Strings are borrowed from argv. */
typedef struct ev_options {
    const char *operands[2];
    int operand_count;
    const char *sets[EV_SET_CAPACITY];
    int set_count;
    bool json, csv, all_frequencies, dark, section, map, second, has_cut;
    int rays, grid;       /* 0: not given */
    double width, height; /* of --size; 0: not given */
    double scale;
    double cut, span;   /* degrees; cut holds when has_cut, span 0: not given */
    const char *limits; /* "s465", "s580" or a file; NULL: none */
    const char *feed;   /* name; NULL: the first */
    const char *replay; /* NULL: none */
} ev_options;

typedef struct ev_command {
    const char *name;
    const char *operands; /* "SCENE OUT" */
    const char *summary;
    const char *options; /* names of the options it takes, apart from --set, with spaces between */
    int operand_min, operand_max;
    int (*run)(const ev_options *options);
} ev_command;

/* The whole program: parses, finds the command, runs it. Returns the exit code. */
int ev_app_run(int argc, char **argv);

/* One file a command. */
int ev_command_window(const ev_options *options);
int ev_command_budget(const ev_options *options);
int ev_command_beam(const ev_options *options);
int ev_command_rays(const ev_options *options);
int ev_command_aperture(const ev_options *options);
int ev_command_picture(const ev_options *options);
int ev_command_compare(const ev_options *options);
int ev_command_explain(const ev_options *options);

/* The table, for the help text. */
const ev_command *ev_command_list(int *count);

/* A scene read from options->operands[0] with --set applied, checked and built at the working
 * frequency. Says what is wrong on stderr. */
typedef struct ev_loaded {
    ev_scene *scene;
    ev_design design;
    ev_antenna antenna;
    int feed;                /* of --feed */
    ev_diagnostics cautions; /* warnings of the design as set */
} ev_loaded;

/* Exit code; EV_EXIT_DONE means `loaded` holds everything and has to be unloaded. */
int ev_load(const ev_options *options, ev_loaded *loaded);
void ev_unload(ev_loaded *loaded);

/* EV_EXIT_IO when an error among them is about reading or writing, else EV_EXIT_BAD_INPUT. */
int ev_exit_code_of(const ev_diagnostics *diagnostics);

/* Prints a usage error and returns EV_EXIT_BAD_INPUT. */
int ev_usage_error(const char *format, ...) __attribute__((format(printf, 1, 2)));

/* Flushes stdout; EV_EXIT_IO with a message when something could not be written. */
int ev_finish_output(void);
