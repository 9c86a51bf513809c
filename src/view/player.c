/* The replay's hands and clock. */
#include "view/player.h"

#include "view/events.h"

#include <math.h>
#include <stdarg.h>
#include <stdio.h>
#include <string.h>

static const double frame_seconds = 1.0 / 60.0;

enum { DRAG_STEPS = 24, SETTLE_LIMIT = 400 };

bool ev_player_fail(ev_player *player, int exit_code, const char *format, ...)
{
    char text[300];
    va_list arguments;
    va_start(arguments, format);
    vsnprintf(text, sizeof text, format, arguments);
    va_end(arguments);
    const ev_step *step = player->step;
    ev_place place = {.file = player->replay->path,
                      .line = step->line,
                      .column = step->tokens[0].column,
                      .source = step->source,
                      .width = (int)strlen(step->tokens[0].text)};
    ev_diagnose(player->view->diagnostics, EV_SEVERITY_ERROR,
                exit_code == 1 ? "expectation" : "replay_step", &place, "%s", text);
    player->view->exit_code = exit_code;
    return false;
}

void ev_player_frame(ev_player *player)
{
    ev_view *view = player->view;
    view->now += frame_seconds;
    ev_events_handle(view, 0, true);
    ev_view_tick(view);
    if (view->dirty) {
        ev_view_frame(view);
        ev_view_tick(view);
    }
}

void ev_player_settle(ev_player *player)
{
    ev_view *view = player->view;
    for (int i = 0; i < SETTLE_LIMIT; ++i) {
        ev_player_frame(player);
        if (!view->dirty && !ev_model_waiting(&view->model)) {
            return;
        }
        ev_worker_settle(view->model.worker);
    }
}

void ev_player_send(ev_player *player, ev_input input)
{
    input.modifiers |= player->held;
    ev_view_input(player->view, &input);
}

void ev_player_send_timed(ev_player *player, ev_input input)
{
    Uint64 start = SDL_GetPerformanceCounter();
    ev_player_send(player, input);
    ev_player_frame(player);
    double seconds =
        (double)(SDL_GetPerformanceCounter() - start) / (double)SDL_GetPerformanceFrequency();
    if (player->latency_count < EV_LATENCY_CAPACITY) {
        player->latency[player->latency_count++] = seconds;
    }
}

bool ev_player_find(ev_player *player, const char *name, double *x, double *y)
{
    ev_view *view = player->view;
    if (view->dirty) {
        ev_player_frame(player);
    }
    if (strcmp(name, "stage") == 0) {
        ev_rect stage = view->page.stage;
        *x = stage.x + 0.5 * stage.width;
        *y = stage.y + 0.5 * stage.height;
        return true;
    }
    const ev_box *box = ev_layers_find(&view->layers, view->model.scene == NULL, name);
    if (!box) {
        return ev_player_fail(player, 2, "There is nothing called \"%s\" in the window now.", name);
    }
    *x = box->rect.x + 0.5 * box->rect.width;
    *y = box->rect.y + 0.5 * box->rect.height;
    return true;
}

void ev_player_move(ev_player *player, double x, double y)
{
    ev_player_send(player, (ev_input){.kind = EV_INPUT_MOVE, .x = x, .y = y});
}

static void press(ev_player *player, double x, double y, int button, int clicks)
{
    ev_player_send(
        player,
        (ev_input){.kind = EV_INPUT_PRESS, .x = x, .y = y, .button = button, .clicks = clicks});
    ev_player_frame(player);
}

static void release(ev_player *player, double x, double y, int button)
{
    ev_player_send(player, (ev_input){.kind = EV_INPUT_RELEASE, .x = x, .y = y, .button = button});
    ev_player_frame(player);
}

void ev_player_press(ev_player *player, double x, double y, int clicks)
{
    press(player, x, y, SDL_BUTTON_LEFT, clicks);
}

void ev_player_release(ev_player *player, double x, double y)
{
    release(player, x, y, SDL_BUTTON_LEFT);
}

/* A hand begins with a jerk that is more than a click's shake; only then does a drag of a fraction
 * of a pixel mean anything. */
void ev_player_drag(ev_player *player, double x, double y, double dx, double dy, int button)
{
    double length = hypot(dx, dy), jerk = length < 6.0 ? 6.0 - length : 0.0;
    double jx = length > 0.0 ? jerk * dx / length : jerk,
           jy = length > 0.0 ? jerk * dy / length : 0;
    ev_player_move(player, x, y);
    press(player, x, y, button, 1);
    for (int i = 1; i <= DRAG_STEPS; ++i) {
        double share = (double)i / DRAG_STEPS, extra = 4.0 * share * (1.0 - share);
        ev_player_send_timed(player, (ev_input){.kind = EV_INPUT_MOVE,
                                                .x = x + share * dx + extra * jx,
                                                .y = y + share * dy + extra * jy});
    }
    release(player, x + dx, y + dy, button);
}

int ev_replay_run(const ev_replay *replay, ev_view *view)
{
    ev_player player = {.view = view, .replay = replay};
    view->dirty = true;
    for (int i = 0; i < replay->count && !view->leaving; ++i) {
        player.step = &replay->steps[i];
        if (!player.step->verb->run(&player, player.step)) {
            return view->exit_code;
        }
    }
    return view->exit_code;
}
