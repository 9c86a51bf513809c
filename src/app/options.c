/* Reads the command line by one table of options; a command names those that it takes. */
#include "app/options.h"

#include "base/text.h"

#include <errno.h>
#include <stdarg.h>
#include <stdlib.h>
#include <string.h>

typedef enum {
    TAKES_NOTHING,
    TAKES_COUNT,
    TAKES_SCALE,
    TAKES_DEGREES,
    TAKES_CUT,
    TAKES_SIZE,
    TAKES_TEXT,
    TAKES_SET
} takes;

typedef struct option {
    const char *name, *value, *meaning;
    takes takes;
    size_t offset;
    int low, high; /* TAKES_COUNT */
} option;

#define AT(member) offsetof(ev_options, member)

static const option table[] = {
    {"--set", "NAME=VALUE", "change one parameter; may be repeated, later ones win", TAKES_SET, 0,
     0, 0},
    {"--json", "", "print JSON", TAKES_NOTHING, AT(json), 0, 0},
    {"--csv", "", "print CSV", TAKES_NOTHING, AT(csv), 0, 0},
    {"--all-frequencies", "", "one budget for each frequency of the scene's list", TAKES_NOTHING,
     AT(all_frequencies), 0, 0},
    {"--feed", "NAME", "the feed meant, by name; otherwise the first", TAKES_TEXT, AT(feed), 0, 0},
    {"--rays", "COUNT", "number of rays (1000)", TAKES_COUNT, AT(rays), 1, 1000000},
    {"--section", "", "rays in the plane of symmetry instead of all round", TAKES_NOTHING,
     AT(section), 0, 0},
    {"--grid", "COUNT", "points across the aperture (65) or the map (129)", TAKES_COUNT, AT(grid),
     2, 2001},
    {"--cut", "PHI", "a cut through the peak, PHI degrees from the plane of symmetry", TAKES_CUT,
     AT(cut), -360, 360},
    {"--map", "", "the beam over direction cosines, as CSV", TAKES_NOTHING, AT(map), 0, 0},
    {"--span", "DEGREES", "half width of cut or map (twelve lobes; 90 with limits)", TAKES_DEGREES,
     AT(span), 0, 89},
    {"--limits", "NAME", "s465, s580 (ITU-R S.465-6, S.580-6) or a CSV angle_deg,level_dbi",
     TAKES_TEXT, AT(limits), 0, 0},
    {"--second", "", "a second opinion with the subreflector's own currents (slow)", TAKES_NOTHING,
     AT(second), 0, 0},
    {"--size", "WxH", "pixels of the page (1280x800), at least 1100x700", TAKES_SIZE, 0, 0, 0},
    {"--scale", "FACTOR", "pixels of the PNG for one of the page (1 to 8)", TAKES_SCALE, AT(scale),
     0, 0},
    {"--dark", "", "light lines on a dark ground", TAKES_NOTHING, AT(dark), 0, 0},
    {"--replay", "FILE", "drive the window from a file of steps", TAKES_TEXT, AT(replay), 0, 0},
};

enum { OPTION_COUNT = sizeof table / sizeof table[0] };

int ev_usage_error(const char *format, ...)
{
    va_list arguments;
    va_start(arguments, format);
    fputs("evenpath: ", stderr);
    vfprintf(stderr, format, arguments);
    fputs("\n`evenpath --help` shows what there is.\n", stderr);
    va_end(arguments);
    return EV_EXIT_BAD_INPUT;
}

void ev_options_print(FILE *stream)
{
    for (int i = 0; i < OPTION_COUNT; i++) {
        char form[48];
        snprintf(form, sizeof form, "%s %s", table[i].name, table[i].value);
        fprintf(stream, "  %-24s  %s\n", form, table[i].meaning);
    }
}

/* Is `name` one of the words of the list? */
static bool lists(const char *words, const char *name)
{
    size_t length = strlen(name);
    for (const char *at = words; (at = strstr(at, name)) != NULL; at += length)
        if ((at == words || at[-1] == ' ') && (at[length] == '\0' || at[length] == ' '))
            return true;
    return false;
}

static const option *find_option(const ev_command *command, const char *name)
{
    for (int i = 0; i < OPTION_COUNT; i++)
        if (strcmp(table[i].name, name) == 0 &&
            (table[i].takes == TAKES_SET || lists(command->options, name)))
            return &table[i];
    return NULL;
}

static int unknown_option(const ev_command *command, const char *name)
{
    ev_nearest nearest = {0};
    for (int i = 0; i < OPTION_COUNT; i++)
        if (table[i].takes == TAKES_SET || lists(command->options, table[i].name))
            ev_nearest_offer(&nearest, name, table[i].name);
    if (ev_nearest_is_plausible(&nearest, name))
        return ev_usage_error("'%s' takes no option '%s'; did you mean '%s'?", command->name, name,
                              nearest.word);
    return ev_usage_error("'%s' takes no option '%s'; it takes %s%s--set", command->name, name,
                          command->options, *command->options ? " " : "");
}

static int read_count(const option *found, const char *value, ev_options *options)
{
    char *end;
    errno = 0;
    long number = strtol(value, &end, 10);
    if (errno || end == value || *end || number < found->low || number > found->high)
        return ev_usage_error("'%s %s': expected a whole number from %d to %d", found->name, value,
                              found->low, found->high);
    *(int *)((char *)options + found->offset) = (int)number;
    return EV_EXIT_DONE;
}

static int read_size(const char *value, ev_options *options)
{
    int width = 0, height = 0, end = 0;
    if (sscanf(value, "%5dx%5d%n", &width, &height, &end) != 2 || value[end] || width < 1100 ||
        height < 700 || width > 16000 || height > 16000)
        return ev_usage_error(
            "'--size %s': expected WIDTHxHEIGHT from 1100x700 to 16000x16000, for "
            "example 1280x800",
            value);
    options->width = width;
    options->height = height;
    return EV_EXIT_DONE;
}

static int read_scale(const option *found, const char *value, ev_options *options)
{
    char *end;
    double number = strtod(value, &end);
    if (end == value || *end || !(number >= 1.0 && number <= 8.0))
        return ev_usage_error("'%s %s': expected a number from 1 to 8", found->name, value);
    *(double *)((char *)options + found->offset) = number;
    return EV_EXIT_DONE;
}

static int read_degrees(const option *found, const char *value, ev_options *options)
{
    char *end;
    double number = strtod(value, &end);
    bool zero_too = found->takes == TAKES_CUT;
    if (end == value || *end || !(number >= found->low && number <= found->high) ||
        (number == 0.0 && !zero_too))
        return ev_usage_error("'%s %s': expected degrees from %d to %d", found->name, value,
                              found->low, found->high);
    *(double *)((char *)options + found->offset) = number;
    options->has_cut |= found->takes == TAKES_CUT;
    return EV_EXIT_DONE;
}

static int take_value(const option *found, const char *value, ev_options *options)
{
    switch (found->takes) {
    case TAKES_COUNT:
        return read_count(found, value, options);
    case TAKES_DEGREES:
    case TAKES_CUT:
        return read_degrees(found, value, options);
    case TAKES_SIZE:
        return read_size(value, options);
    case TAKES_SCALE:
        return read_scale(found, value, options);
    case TAKES_SET:
        if (options->set_count == EV_SET_CAPACITY)
            return ev_usage_error("more than %d times --set; put the values into the scene",
                                  EV_SET_CAPACITY);
        options->sets[options->set_count++] = value;
        return EV_EXIT_DONE;
    case TAKES_TEXT:
        *(const char **)((char *)options + found->offset) = value;
        return EV_EXIT_DONE;
    case TAKES_NOTHING:
        *(bool *)((char *)options + found->offset) = true;
        return EV_EXIT_DONE;
    }
    return EV_EXIT_DONE;
}

static int read_word(const ev_command *command, int count, char **words, int *at,
                     ev_options *options)
{
    char *word = words[*at];
    if (word[0] != '-' || word[1] == '\0') {
        if (options->operand_count == command->operand_max)
            return ev_usage_error("'%s' is one operand too many; usage: evenpath %s %s", word,
                                  command->name, command->operands);
        options->operands[options->operand_count++] = word;
        return EV_EXIT_DONE;
    }
    const option *found = find_option(command, word);
    if (!found)
        return unknown_option(command, word);
    if (found->takes == TAKES_NOTHING)
        return take_value(found, NULL, options);
    if (*at + 1 >= count)
        return ev_usage_error("'%s' needs a value: %s %s", word, word, found->value);
    return take_value(found, words[++*at], options);
}

int ev_options_read(const ev_command *command, int count, char **words, ev_options *options)
{
    *options = (ev_options){0};
    for (int i = 0; i < count; i++) {
        int code = read_word(command, count, words, &i, options);
        if (code != EV_EXIT_DONE)
            return code;
    }
    if (options->operand_count < command->operand_min)
        return ev_usage_error("'%s' needs %s", command->name, command->operands);
    if (options->json && options->csv)
        return ev_usage_error("--json and --csv exclude each other; give one");
    return EV_EXIT_DONE;
}
