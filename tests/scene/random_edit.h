/* Random edits of a design, for the saver's tests and the fuzz target: any parameter, any choice,
 * names and titles that YAML finds hard, entries and sections that come and go. */
#pragma once

#include "scene/parameter.h"
#include "scene/scene.h"

#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <string.h>

/* xorshift64*: small, and the same everywhere. */
static inline uint64_t random_next(uint64_t *state)
{
    *state ^= *state >> 12;
    *state ^= *state << 25;
    *state ^= *state >> 27;
    return *state * 0x2545F4914F6CDD1DULL;
}

static inline int random_below(uint64_t *state, int bound)
{
    return (int)((random_next(state) >> 33) % (uint64_t)bound);
}

static inline double random_unit(uint64_t *state)
{
    return (double)(random_next(state) >> 11) * 0x1p-53;
}

/* Around what is there, or anywhere in the legal range; round or with every bit. */
static inline double random_value(uint64_t *state, const ev_parameter *row, double now)
{
    double value = now * (0.5 + random_unit(state));
    if (random_below(state, 4) == 0 || now == 0.0)
        value = row->low + (row->high - row->low) * random_unit(state) * random_unit(state);
    if (random_below(state, 4) == 0)
        value = 0.0;
    return random_below(state, 2) ? value : round(value * 1000.0) / 1000.0;
}

static inline void edit_text(uint64_t *state, ev_design *design, ev_parameter_ref ref)
{
    static const char *const titles[] = {"plain",       "a: b",
                                         "x # y",       "\"q\" 'r'",
                                         "- dash",      "[list]",
                                         "{map}",       "tab\there",
                                         "two\nlines",  "caf\u00e9 \u2212 3",
                                         "end:",        " lead",
                                         "trail ",      "\u2028 odd \xC2\x85",
                                         "1.2 m",       "null",
                                         "---",         "...",
                                         "%YAML",       "@at",
                                         "back\\slash", "~",
                                         "*star",       "&and",
                                         "!bang",       "|",
                                         ">",           "?",
                                         "a,b",         "\uFEFF"};
    static const char *const names[] = {"horn", "second feed", "x-band", "A_1", "caf\u00e9", "7"};
    ev_diagnostics silent;
    ev_diagnostics_init(&silent);
    bool title = ref.parameter->owner == EV_OWNER_DESIGN;
    const char *text = title ? titles[random_below(state, sizeof titles / sizeof titles[0])]
                             : names[random_below(state, sizeof names / sizeof names[0])];
    if (strcmp(ref.parameter->name, "feed.table") != 0)
        ev_parameter_set_text(design, ref, text, &silent);
    ev_diagnostics_clear(&silent);
}

static inline void edit_parameter(uint64_t *state, ev_design *design)
{
    const ev_parameter *row = ev_parameter_at(random_below(state, ev_parameter_count()));
    ev_parameter_ref ref;
    if (!ev_parameter_find(design, 0, row->name, &ref, NULL))
        return;
    if (row->owner == EV_OWNER_FEED)
        ref.index = random_below(state, design->feed_count);
    if (row->owner == EV_OWNER_STRUT)
        ref.index = random_below(state, design->strut_count);
    if (row->kind == EV_VALUE_TEXT)
        edit_text(state, design, ref);
    else if (row->kind == EV_VALUE_CHOICE)
        ev_parameter_set(design, ref, random_below(state, (int)row->high + 1));
    else
        ev_parameter_set(design, ref, random_value(state, row, ev_parameter_get(design, ref)));
}

static inline void edit_feeds(uint64_t *state, ev_design *design)
{
    if (random_below(state, 2) && design->feed_count > 1) {
        int gone = random_below(state, design->feed_count);
        memmove(&design->feeds[gone], &design->feeds[gone + 1],
                (size_t)(design->feed_count - gone - 1) * sizeof design->feeds[0]);
        design->feed_count--;
    } else if (design->feed_count < EV_FEED_CAPACITY) {
        int at = random_below(state, design->feed_count + 1);
        memmove(&design->feeds[at + 1], &design->feeds[at],
                (size_t)(design->feed_count - at) * sizeof design->feeds[0]);
        design->feeds[at] = ev_default_feed();
        snprintf(design->feeds[at].name, EV_NAME_CAPACITY, "new%d", random_below(state, 1000000));
        design->feed_count++;
    }
}

static inline void edit_struts(uint64_t *state, ev_design *design)
{
    if (random_below(state, 2) && design->strut_count > 0) {
        int gone = random_below(state, design->strut_count);
        memmove(&design->struts[gone], &design->struts[gone + 1],
                (size_t)(design->strut_count - gone - 1) * sizeof design->struts[0]);
        design->strut_count--;
    } else if (design->strut_count < EV_STRUT_CAPACITY) {
        ev_strut_design *strut = &design->struts[design->strut_count++];
        *strut = ev_default_strut();
        snprintf(strut->name, EV_NAME_CAPACITY, "new%d", random_below(state, 1000000));
    }
}

static inline void edit_whole(uint64_t *state, ev_design *design)
{
    switch (random_below(state, 5)) {
    case 0:
        edit_feeds(state, design);
        break;
    case 1:
        edit_struts(state, design);
        break;
    case 2:
        design->site.present = !design->site.present;
        break;
    case 3:
        if (design->sub.present)
            design->sub.present = false;
        else
            design->sub = ev_default_sub();
        break;
    default:
        design->frequency_count = 1 + random_below(state, 3);
        for (int i = 1; i < design->frequency_count; i++)
            design->frequencies[i] = 1e9 * (1 + random_below(state, 300)) / 7.0;
        break;
    }
    ev_design_resolve(design);
}

/* One edit that leaves a sound design; an unsound one is taken back. */
static inline void random_edit(uint64_t *state, const ev_scene *scene, ev_design *design)
{
    ev_design trial = *design;
    ev_diagnostics silent;
    ev_diagnostics_init(&silent);
    if (random_below(state, 6) == 0)
        edit_whole(state, &trial);
    else
        edit_parameter(state, &trial);
    for (int i = 0; i < trial.feed_count; i++) {
        if (trial.feeds[i].pattern == EV_PATTERN_TABLE && trial.feeds[i].table_path[0] == 0)
            trial.feeds[i].pattern = EV_PATTERN_COS_POWER;
    }
    ev_design_resolve(&trial);
    if (ev_scene_check(scene, &trial, &silent))
        *design = trial;
    ev_diagnostics_clear(&silent);
}
