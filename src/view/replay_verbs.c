/* The verbs of a replay. To add one: a row in the table at the end and its function; and a line in
 * replay.h. */
#include "view/player.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

static bool run_open(ev_player *player, const ev_step *step)
{
    if (!ev_view_open_scene(player->view, step->tokens[1].text)) {
        return ev_player_fail(player, 2, "%s", player->view->notice);
    }
    ev_player_frame(player);
    return true;
}

static bool run_drop(ev_player *player, const ev_step *step)
{
    ev_player_send(player, (ev_input){.kind = EV_INPUT_DROP, .text = step->tokens[1].text});
    ev_player_frame(player);
    return true;
}

static const char *check_size(const ev_step *step, int *at)
{
    for (*at = 1; *at <= 2; ++*at) {
        double least = *at == 1 ? EV_WINDOW_LEAST_WIDTH : EV_WINDOW_LEAST_HEIGHT;
        if (!(step->tokens[*at].number >= least && step->tokens[*at].number <= 8192.0)) {
            return "A window is from 1100 x 700 to 8192 x 8192 pixels.";
        }
    }
    return NULL;
}

static bool run_size(ev_player *player, const ev_step *step)
{
    ev_window_resize(&player->view->window, (int)step->tokens[1].number,
                     (int)step->tokens[2].number);
    SDL_Delay(player->view->window.width == step->tokens[1].number ? 0 : 50);
    ev_player_send(player, (ev_input){.kind = EV_INPUT_SIZE});
    ev_player_frame(player);
    return true;
}

static const char *check_wait(const ev_step *step, int *at)
{
    *at = 1;
    if (!(step->tokens[1].number >= 0.0 && step->tokens[1].number <= 1e6)) {
        return "A wait is from 0 to 1000000 ms.";
    }
    *at = 2;
    return strcmp(step->tokens[2].text, "ms") == 0 ? NULL : "A wait is in ms.";
}

static bool run_wait(ev_player *player, const ev_step *step)
{
    double until = player->view->now + 1e-3 * step->tokens[1].number;
    while (player->view->now < until) {
        ev_player_frame(player);
    }
    return true;
}

static bool run_settle(ev_player *player, const ev_step *step)
{
    (void)step;
    ev_player_settle(player);
    return true;
}

static bool run_point(ev_player *player, const ev_step *step)
{
    double x, y;
    if (!ev_player_find(player, step->tokens[1].text, &x, &y)) {
        return false;
    }
    ev_player_move(player, x, y);
    ev_player_frame(player);
    return true;
}

static bool run_click(ev_player *player, const ev_step *step)
{
    double x, y;
    if (!ev_player_find(player, step->tokens[1].text, &x, &y)) {
        return false;
    }
    ev_player_move(player, x, y);
    ev_player_press(player, x, y, 1);
    ev_player_release(player, x, y);
    return true;
}

static bool run_double_click(ev_player *player, const ev_step *step)
{
    double x, y;
    if (!run_click(player, step) || !ev_player_find(player, step->tokens[1].text, &x, &y)) {
        return false;
    }
    ev_player_press(player, x, y, 2);
    ev_player_release(player, x, y);
    return true;
}

static bool run_scroll(ev_player *player, const ev_step *step)
{
    double x, y;
    if (!ev_player_find(player, step->tokens[1].text, &x, &y)) {
        return false;
    }
    ev_player_send(
        player,
        (ev_input){.kind = EV_INPUT_WHEEL, .x = x, .y = y, .wheel = step->tokens[2].number});
    ev_player_frame(player);
    return true;
}

bool ev_replay_key(const char *name, SDL_Keycode *key, Uint16 *modifiers)
{
    static const struct {
        const char *prefix;
        Uint16 modifier;
    } prefixes[] = {{"ctrl+", KMOD_LCTRL}, {"shift+", KMOD_LSHIFT}, {"alt+", KMOD_LALT}};
    *modifiers = 0;
    for (size_t i = 0; i < sizeof prefixes / sizeof prefixes[0]; ++i) {
        size_t length = strlen(prefixes[i].prefix);
        if (strncmp(name, prefixes[i].prefix, length) == 0) {
            *modifiers |= prefixes[i].modifier;
            name += length;
        }
    }
    *key = SDL_GetKeyFromName(name);
    return *key != SDLK_UNKNOWN;
}

static const char *check_key(const ev_step *step, int *at)
{
    SDL_Keycode key;
    Uint16 modifiers;
    *at = 1;
    return ev_replay_key(step->tokens[1].text, &key, &modifiers)
               ? NULL
               : "There is no such key; write u, Return, Tab, Escape, Left, ctrl+z, shift+Tab.";
}

static bool run_key(ev_player *player, const ev_step *step)
{
    ev_input input = {.kind = EV_INPUT_KEY};
    ev_replay_key(step->tokens[1].text, &input.key, &input.modifiers);
    ev_player_send(player, input);
    ev_player_frame(player);
    return true;
}

static const char *check_hold(const ev_step *step, int *at)
{
    static const char *const words[] = {"alt", "shift", "ctrl", "none", NULL};
    *at = 1;
    return ev_player_is_word(step->tokens[1].text, words) ? NULL : "Hold alt, shift, ctrl or none.";
}

static bool run_hold(ev_player *player, const ev_step *step)
{
    const char *word = step->tokens[1].text;
    player->held = word[0] == 'a'   ? KMOD_LALT
                   : word[0] == 's' ? KMOD_LSHIFT
                   : word[0] == 'c' ? KMOD_LCTRL
                                    : KMOD_NONE;
    return true;
}

static void send_text(ev_player *player, const char *text)
{
    ev_player_send(player, (ev_input){.kind = EV_INPUT_TEXT, .text = text});
    ev_player_frame(player);
}

static bool run_text(ev_player *player, const ev_step *step)
{
    send_text(player, step->tokens[1].text);
    return true;
}

static bool run_type(ev_player *player, const ev_step *step)
{
    char name[110];
    double x, y;
    snprintf(name, sizeof name, "field.%.95s", step->tokens[1].text);
    if (!ev_player_find(player, name, &x, &y)) {
        return false;
    }
    ev_player_move(player, x, y);
    ev_player_press(player, x, y, 1);
    ev_player_release(player, x, y);
    ev_player_send(player,
                   (ev_input){.kind = EV_INPUT_KEY, .key = SDLK_a, .modifiers = KMOD_LCTRL});
    send_text(player, step->tokens[2].text);
    ev_player_send(player, (ev_input){.kind = EV_INPUT_KEY, .key = SDLK_RETURN});
    ev_player_frame(player);
    return true;
}

static bool run_shot(ev_player *player, const ev_step *step)
{
    ev_view_draw(player->view);
    cairo_surface_t *surface = ev_window_grab(&player->view->window);
    cairo_status_t status = surface ? cairo_surface_write_to_png(surface, step->tokens[1].text)
                                    : CAIRO_STATUS_NO_MEMORY;
    if (surface) {
        cairo_surface_destroy(surface);
    }
    player->view->dirty = true;
    return status == CAIRO_STATUS_SUCCESS ||
           ev_player_fail(player, 3, "The picture %s cannot be written: %s.", step->tokens[1].text,
                          cairo_status_to_string(status));
}

static bool run_quit(ev_player *player, const ev_step *step)
{
    (void)step;
    player->view->leaving = true;
    return true;
}

static const ev_verb verbs[] = {
    {"open", "r", "open PATH", NULL, run_open},
    {"drop", "r", "drop PATH", NULL, run_drop},
    {"size", "nn", "size WIDTH HEIGHT", check_size, run_size},
    {"wait", "nw", "wait N ms", check_wait, run_wait},
    {"settle", "", "settle", NULL, run_settle},
    {"point", "w", "point NAME", NULL, run_point},
    {"click", "w", "click NAME", NULL, run_click},
    {"double-click", "w", "double-click NAME", NULL, run_double_click},
    {"drag", "wnnw", "drag NAME DX DY px", ev_player_check_pixels, ev_player_drag_pixels},
    {"drag", "wnwww", "drag NAME N UNIT along AXIS, or drag NAME DX DY px", ev_player_check_along,
     ev_player_drag_along},
    {"pan", "nnw", "pan DX DY px", ev_player_check_pixels, ev_player_pan},
    {"orbit", "nnw", "orbit DX DY deg", ev_player_check_degrees, ev_player_orbit},
    {"scroll", "wn", "scroll NAME NOTCHES", NULL, run_scroll},
    {"key", "w", "key NAME, like u, Return or ctrl+z", check_key, run_key},
    {"hold", "w", "hold alt, or hold none", check_hold, run_hold},
    {"text", "r", "text WORDS", NULL, run_text},
    {"type", "wr", "type ADDRESS VALUE", NULL, run_type},
    {"shot", "r", "shot FILE.png", NULL, run_shot},
    {"boxes", "r", "boxes FILE", NULL, ev_player_boxes},
    {"print", "w", "print budget, verdict, notice, driver or ADDRESS", NULL, ev_player_print},
    {"expect", "wr", "expect ADDRESS VALUE, expect notice WORDS, expect verdict WORD", NULL,
     ev_player_expect},
    {"latency", "", "latency", NULL, ev_player_latency},
    {"quit", "", "quit", NULL, run_quit},
};

const ev_verb *ev_replay_verbs(int *count)
{
    *count = sizeof verbs / sizeof verbs[0];
    return verbs;
}
