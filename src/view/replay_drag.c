/* The verbs of a replay that move something with the hand, and their arguments. */
#include "view/player.h"

#include <stdio.h>
#include <string.h>

static const char *check_unit(const ev_step *step, int index, const char *unit, int *at)
{
    static char text[40];
    *at = index;
    snprintf(text, sizeof text, "The unit here is %s.", unit);
    return strcmp(step->tokens[index].text, unit) == 0 ? NULL : text;
}

const char *ev_player_check_pixels(const ev_step *step, int *at)
{
    return check_unit(step, step->token_count - 1, "px", at);
}

const char *ev_player_check_degrees(const ev_step *step, int *at)
{
    return check_unit(step, step->token_count - 1, "deg", at);
}

bool ev_player_drag_pixels(ev_player *player, const ev_step *step)
{
    double x, y;
    if (!ev_player_find(player, step->tokens[1].text, &x, &y)) {
        return false;
    }
    ev_player_drag(player, x, y, step->tokens[2].number, step->tokens[3].number, SDL_BUTTON_LEFT);
    return true;
}

bool ev_player_is_word(const char *text, const char *const *words)
{
    for (; *words; ++words) {
        if (strcmp(text, *words) == 0) {
            return true;
        }
    }
    return false;
}

const char *ev_player_check_along(const ev_step *step, int *at)
{
    static const char *const parts[] = {"feed", "sub", "handle", NULL};
    static const char *const axes[] = {"x", "z", "out", "up", NULL};
    char length[80];
    double value;
    *at = 1;
    if (!ev_player_is_word(step->tokens[1].text, parts)) {
        return "What moves along an axis is feed, sub (on the section) or handle (in the Detail).";
    }
    snprintf(length, sizeof length, "%.30s %.30s", step->tokens[2].text, step->tokens[3].text);
    const char *number = length[0] == '+' ? length + 1 : length;
    *at = 3;
    if (ev_quantity_parse(EV_QUANTITY_LENGTH, number, &value, NULL) != EV_PARSE_OK) {
        return "This is not a length with its unit, like +10 mm.";
    }
    *at = 4;
    if (strcmp(step->tokens[4].text, "along") != 0) {
        return "The word here is along.";
    }
    *at = 5;
    if (!ev_player_is_word(step->tokens[5].text, axes)) {
        return "An axis is x, z (of the antenna), out or up (of the part).";
    }
    bool own = strcmp(step->tokens[5].text, "out") == 0 || strcmp(step->tokens[5].text, "up") == 0;
    return own || strcmp(step->tokens[1].text, "handle") != 0
               ? NULL
               : "The handle moves along the part's own axes, out or up.";
}

/* The axis as (z, x) of the section. */
static void find_axis(const ev_view *view, ev_part part, const char *axis, double *z, double *x)
{
    *z = strcmp(axis, "z") == 0 ? 1.0 : 0.0;
    *x = strcmp(axis, "x") == 0 ? 1.0 : 0.0;
    if (axis[0] == 'o' || axis[0] == 'u') {
        ev_vec3 way = ev_part_axis_direction(&view->model.study->antenna, part, view->model.feed,
                                             axis[0] == 'o' ? EV_AXIS_OUT : EV_AXIS_UP);
        *z = way.z;
        *x = way.x;
    }
}

static double read_length(const ev_step *step)
{
    char length[80];
    double value = 0.0;
    snprintf(length, sizeof length, "%.30s %.30s", step->tokens[2].text, step->tokens[3].text);
    ev_quantity_parse(EV_QUANTITY_LENGTH, length[0] == '+' ? length + 1 : length, &value, NULL);
    return value;
}

/* Drags from the middle of a box by a step of a plot's data. */
static bool drag_data(ev_player *player, const char *name, const ev_plot_map *map, double a,
                      double b)
{
    double x, y, x0, y0, x1, y1;
    if (!ev_player_find(player, name, &x, &y)) {
        return false;
    }
    ev_plot_to_page(map, 0.0, 0.0, &x0, &y0);
    ev_plot_to_page(map, a, b, &x1, &y1);
    ev_player_drag(player, x, y, x1 - x0, y1 - y0, SDL_BUTTON_LEFT);
    return true;
}

bool ev_player_drag_along(ev_player *player, const ev_step *step)
{
    ev_view *view = player->view;
    const char *what = step->tokens[1].text, *axis = step->tokens[5].text;
    double by = read_length(step), z, x;
    char name[40];
    if (!view->model.scene) {
        return ev_player_fail(player, 2, "No scene is open.");
    }
    ev_player_frame(player);
    if (strcmp(what, "handle") == 0) {
        snprintf(name, sizeof name, "handle.%s", ev_part_word(view->model.part));
        return drag_data(player, name, &view->layers.detail, axis[0] == 'o' ? by : 0.0,
                         axis[0] == 'u' ? by : 0.0);
    }
    if (view->stage != EV_STAGE_SECTION) {
        return ev_player_fail(player, 2,
                              "Parts are dragged on the section; the Stage shows space.");
    }
    ev_part part = strcmp(what, "sub") == 0 ? EV_PART_SUB : EV_PART_FEED;
    find_axis(view, part, axis, &z, &x);
    snprintf(name, sizeof name, part == EV_PART_SUB ? "part.sub" : "part.feed.%d",
             view->model.feed);
    return drag_data(player, name, &view->layers.section, by * z, by * x);
}

bool ev_player_pan(ev_player *player, const ev_step *step)
{
    double x, y;
    ev_player_find(player, "stage", &x, &y);
    ev_player_drag(player, x, y, step->tokens[1].number, step->tokens[2].number, SDL_BUTTON_MIDDLE);
    return true;
}

bool ev_player_orbit(ev_player *player, const ev_step *step)
{
    double x, y, pixels = EV_PI / 180.0 / ev_turn_per_pixel;
    if (player->view->stage != EV_STAGE_SPACE) {
        return ev_player_fail(player, 2, "Only space can be turned; the Stage shows a section.");
    }
    /* from a corner of the Stage where no part can be in the way */
    x = player->view->page.stage.x + 12.0;
    y = player->view->page.stage.y + 70.0;
    ev_player_drag(player, x, y, pixels * step->tokens[1].number, pixels * step->tokens[2].number,
                   SDL_BUTTON_LEFT);
    return true;
}
