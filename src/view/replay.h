/* A replay: a text file of steps that drive the real window by named targets, on a clock of its
 * own. One step a line; empty lines and what follows a # (at the start of a word) do not count.
 *
 *   open PATH                   open a scene              drop PATH     as dropped on the window
 *   size WIDTH HEIGHT           of the window             wait N ms     let the clock run
 *   settle                      until the worker has answered everything and all is drawn
 *   point NAME                  the pointer onto a box    click NAME, double-click NAME
 *   drag NAME N UNIT along AXIS NAME is feed or sub (on the section), or handle (in the Detail);
 *                               AXIS is x, z, out or up
 *   drag NAME DX DY px          any box
 *   pan DX DY px                the Stage                 orbit DX DY deg   space
 *   scroll NAME NOTCHES
 *   key NAME                    u, Tab, Return, ctrl+z    hold alt, hold none   for what follows
 *   text WORDS                  typed as they are         type ADDRESS WORDS    into a field
 *   shot FILE.png               what the window shows     boxes FILE    hot boxes as text
 *   print budget | verdict | notice | driver | ADDRESS    to standard output; the driver is SDL's
 *   expect ADDRESS VALUE, expect notice WORDS, expect verdict WORD
 *   latency                     print and forget the times from input to picture in drags
 *   quit
 *
 * NAME is that of a hot box: "button.move", "field.feed.defocus", "ledger.past_main", "tab.space";
 * "stage" is the middle of the Stage. */
#pragma once

#include "view/state.h"

typedef struct ev_token {
    const char *text;
    int column;    /* from 1 */
    double number; /* NaN when it is none */
} ev_token;

enum { EV_TOKEN_CAPACITY = 7 };

typedef struct ev_step {
    const struct ev_verb *verb;
    int line;
    char *copy;                         /* of the line, cut into tokens */
    char *source;                       /* the line as written */
    ev_token tokens[EV_TOKEN_CAPACITY]; /* [0] is the verb */
    int token_count;
} ev_step;

typedef struct ev_replay {
    char *path;
    ev_step *steps;
    int count, capacity;
} ev_replay;

/* NULL with diagnostics at file:line:column. */
ev_replay *ev_replay_read(const char *path, ev_diagnostics *diagnostics);
ev_replay *ev_replay_parse(const char *text, const char *name, ev_diagnostics *diagnostics);
void ev_replay_free(ev_replay *replay);

/* Exit code: 0, 1 when something expected did not hold, 2 when a step could not be done, 3 when a
 * file could not be written; with diagnostics in view->diagnostics. Stops at the first. */
int ev_replay_run(const ev_replay *replay, ev_view *view);

/* One kind of step. Arguments: n a number, w a word, r the rest of the line. */
typedef struct ev_player ev_player;
typedef struct ev_verb {
    const char *name, *arguments, *usage;
    /* NULL, or what is wrong with token *at of a well-formed step */
    const char *(*check)(const ev_step *step, int *at);
    bool (*run)(ev_player *player, const ev_step *step);
} ev_verb;

/* The table of verbs (replay_verbs.c); *count rows. A verb may have several. */
const ev_verb *ev_replay_verbs(int *count);

/* SDL's key and modifiers of "ctrl+z"; false when there is no such key. */
bool ev_replay_key(const char *name, SDL_Keycode *key, Uint16 *modifiers);
