/* What the scene tests share: parsing a text, expecting a diagnostic, saving and reading back. */
#pragma once

#include "scene/parameter.h"
#include "scene/scene.h"

#include <setjmp.h>
#include <stdarg.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include <cmocka.h>

/* Every scene in scenes/. */
static const char *const scene_names[] = {
    "rooftop_terminal", "moonbounce_mesh", "ridge_station", "valley_observatory",
    "campus_gregorian", "harbour_gateway", "snow_line",     "two_satellites",
    "four_legs",        "borrowed_horn",   "quarry_link",
};
enum { SCENE_COUNT = sizeof scene_names / sizeof scene_names[0] };

static inline ev_scene *load_example(const char *name)
{
    char path[512];
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    snprintf(path, sizeof path, "%s/%s.yaml", EV_SCENES, name);
    ev_scene *scene = ev_scene_load(path, &d);
    if (scene == NULL || d.error_count > 0)
        ev_diagnostics_print(&d, stderr);
    assert_non_null(scene);
    ev_diagnostics_clear(&d);
    return scene;
}

static inline ev_scene *parse_good(const char *text)
{
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    ev_scene *scene = ev_scene_parse(text, strlen(text), "test.yaml", &d);
    if (scene == NULL)
        ev_diagnostics_print(&d, stderr);
    assert_non_null(scene);
    ev_diagnostics_clear(&d);
    return scene;
}

static inline void assign_good(const ev_scene *scene, ev_design *design, const char *assignment)
{
    ev_diagnostics d;
    ev_diagnostics_init(&d);
    if (!ev_scene_assign(scene, design, 0, assignment, &d)) {
        ev_diagnostics_print(&d, stderr);
        fail_msg("%s", assignment);
    }
    ev_diagnostics_clear(&d);
}

static inline double get_value(const ev_design *design, const char *address)
{
    ev_parameter_ref ref;
    if (!ev_parameter_find(design, 0, address, &ref, NULL))
        fail_msg("no parameter %s", address);
    return ev_parameter_get(design, ref);
}
