/* Playing a replay: hands and clock, for the files that hold the verbs. Internal to the replay. */
#pragma once

#include "view/replay.h"

enum { EV_LATENCY_CAPACITY = 4096 };

struct ev_player {
    ev_view *view;
    const ev_replay *replay;
    const ev_step *step;                 /* being played */
    Uint16 held;                         /* modifiers of `hold` */
    double latency[EV_LATENCY_CAPACITY]; /* s, from a movement in a drag to its picture */
    int latency_count;
};

/* Says what went wrong at the step, sets the exit code; returns false. */
bool ev_player_fail(ev_player *player, int exit_code, const char *format, ...)
    __attribute__((format(printf, 3, 4)));

/* Time goes on by a frame; what the worker has is taken; draws when something changed. */
void ev_player_frame(ev_player *player);
void ev_player_settle(ev_player *player);
void ev_player_send(ev_player *player, ev_input input);
/* The same, with the frame, as the latency of a drag. */
void ev_player_send_timed(ev_player *player, ev_input input);

/* Middle of a box, by name; fails the step when there is none. */
bool ev_player_find(ev_player *player, const char *name, double *x, double *y);

void ev_player_press(ev_player *player, double x, double y, int clicks);
void ev_player_release(ev_player *player, double x, double y);
void ev_player_move(ev_player *player, double x, double y);
/* From the place to (dx, dy) px beyond it in steps, each a frame. */
void ev_player_drag(ev_player *player, double x, double y, double dx, double dy, int button);

/* replay_drag.c */
bool ev_player_is_word(const char *text, const char *const *words);
const char *ev_player_check_pixels(const ev_step *step, int *at);
const char *ev_player_check_degrees(const ev_step *step, int *at);
const char *ev_player_check_along(const ev_step *step, int *at);
bool ev_player_drag_pixels(ev_player *player, const ev_step *step);
bool ev_player_drag_along(ev_player *player, const ev_step *step);
bool ev_player_pan(ev_player *player, const ev_step *step);
bool ev_player_orbit(ev_player *player, const ev_step *step);

/* replay_report.c */
bool ev_player_print(ev_player *player, const ev_step *step);
bool ev_player_expect(ev_player *player, const ev_step *step);
bool ev_player_boxes(ev_player *player, const ev_step *step);
bool ev_player_latency(ev_player *player, const ev_step *step);
