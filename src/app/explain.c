/* `evenpath explain`: the parameter table for people. */
#include "app/command.h"

#include "scene/parameter.h"

#include <stdio.h>
#include <string.h>

static const char *unit_words(const ev_parameter *parameter)
{
    if (parameter->kind == EV_VALUE_TEXT)
        return "text";
    if (parameter->kind == EV_VALUE_CHOICE)
        return "a word";
    if (parameter->kind == EV_VALUE_COUNT)
        return "a whole number";
    const char *units = ev_quantity_units(parameter->quantity);
    return *units ? units : "a plain number";
}

/* A value as it may stand in a file. */
static void write_value(const ev_parameter *parameter, double value, char *text, size_t size)
{
    static const char *const units[EV_QUANTITY_COUNT] = {"", "m", "GHz", "deg", "dB", "K"};
    if (parameter->kind == EV_VALUE_CHOICE)
        snprintf(text, size, "%s", parameter->words[(int)value]);
    else
        ev_quantity_write(parameter->quantity, value, units[parameter->quantity], text, size);
}

static void print_row(const ev_parameter *parameter)
{
    printf("  %-22s %s\n", parameter->name, parameter->meaning);
}

static void print_whole(const ev_parameter *parameter)
{
    char text[64], high[64];
    printf("%s\n  %s\n", parameter->name, parameter->meaning);
    printf("  unit     %s\n", unit_words(parameter));
    if (parameter->kind == EV_VALUE_CHOICE) {
        printf("  words   ");
        for (int i = 0; parameter->words[i]; i++)
            printf(" %s", parameter->words[i]);
        putchar('\n');
    } else if (parameter->kind != EV_VALUE_TEXT) {
        write_value(parameter, parameter->low, text, sizeof text);
        write_value(parameter, parameter->high, high, sizeof high);
        printf("  range    %s to %s\n", text, high);
    }
    if (parameter->required) {
        printf("  default  none: a scene has to give it%s\n",
               parameter->choice ? ", or another of its choice" : "");
    } else if (parameter->kind != EV_VALUE_TEXT) {
        write_value(parameter, parameter->initial, text, sizeof text);
        printf("  default  %s\n", text);
    }
    if (parameter->example)
        printf("  example  %s\n", parameter->example);
    if (!parameter->choice)
        return;
    printf("  choice   give one of");
    for (int i = 0; i < ev_parameter_count(); i++) {
        const ev_parameter *rival = ev_parameter_at(i);
        if (rival->owner == parameter->owner && rival->choice &&
            strcmp(rival->choice, parameter->choice) == 0)
            printf(" %s", rival->name);
    }
    printf("; the last one set holds\n");
}

/* "feeds.NAME.shift.x" and "feed.shift.x" mean the same row. */
static void singular(const char *name, char *text, size_t size)
{
    const char *dot = strncmp(name, "feeds.", 6) == 0    ? strchr(name + 6, '.')
                      : strncmp(name, "struts.", 7) == 0 ? strchr(name + 7, '.')
                                                         : NULL;
    if (dot)
        snprintf(text, size, "%s%s", name[0] == 'f' ? "feed" : "strut", dot);
    else
        snprintf(text, size, "%s", name);
}

int ev_command_explain(const ev_options *options)
{
    char name[128];
    int found = 0;
    if (options->operand_count == 0) {
        printf(
            "Parameters of a scene. `evenpath explain NAME` tells more; feed and strut stand for "
            "the\nlists feeds and struts (feeds.NAME.exponent).\n\n");
        for (int i = 0; i < ev_parameter_count(); i++)
            print_row(ev_parameter_at(i));
        return ev_finish_output();
    }
    singular(options->operands[0], name, sizeof name);
    size_t length = strlen(name);
    for (int i = 0; i < ev_parameter_count(); i++) {
        const ev_parameter *parameter = ev_parameter_at(i);
        bool below = strncmp(parameter->name, name, length) == 0 && parameter->name[length] == '.';
        if (strcmp(parameter->name, name) != 0 && !below)
            continue;
        if (found++ > 0)
            putchar('\n');
        print_whole(parameter);
    }
    if (found > 0)
        return ev_finish_output();
    return ev_usage_error("there is no parameter '%s'; `evenpath explain` lists them all",
                          options->operands[0]);
}
