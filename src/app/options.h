/* The command line's options; private to app. */
#pragma once

#include "app/command.h"

#include <stdio.h>

/* Reads the words after the command. Exit code; says what is wrong on stderr. */
int ev_options_read(const ev_command *command, int count, char **words, ev_options *options);

/* One line an option. */
void ev_options_print(FILE *stream);
