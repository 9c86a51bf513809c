/* All that the window knows, in one place. Functions that act on it live in files named for what
 * they do: frame.c draws it, input.c feeds it, grab.c and drag.c move things, acts.c holds the
 * table of actions, strip.c the fields, gallery.c the scenes to choose from, showing.c, drawer.c
 * and finder.c what comes over the page. */
#pragma once

#include "draw/actions.h"
#include "draw/drawer.h"
#include "view/controls.h"
#include "view/fields.h"
#include "view/layers.h"
#include "view/model.h"
#include "view/space.h"
#include "view/view.h"
#include "view/window.h"

typedef enum {
    EV_DRAG_NONE,
    EV_DRAG_BUTTON, /* pressed on a button, a part or a scene: acts on release */
    EV_DRAG_FIELD,  /* a tape */
    EV_DRAG_TEXT,   /* selecting in the edited field */
    EV_DRAG_DETAIL, /* the yellow handle */
    EV_DRAG_PART,   /* a part on the section */
    EV_DRAG_PAN,
    EV_DRAG_ORBIT,
} ev_drag_kind;

typedef struct ev_drag {
    ev_drag_kind kind;
    bool moved;       /* beyond what a click may shake */
    double x, y;      /* where it began */
    char name[80];    /* of the box pressed */
    int field;        /* of the Strip */
    ev_design from;   /* as it stood */
    double place[2];  /* of the part, out and up, as it stood */
    ev_plot_map map;  /* held still while it moves */
    ev_camera camera; /* as it stood */
    double pan_x, pan_y;
} ev_drag;

typedef enum {
    EV_INPUT_MOVE,
    EV_INPUT_PRESS,
    EV_INPUT_RELEASE,
    EV_INPUT_WHEEL,
    EV_INPUT_KEY,
    EV_INPUT_TEXT,
    EV_INPUT_DROP,
    EV_INPUT_SIZE,
    EV_INPUT_QUIT,
} ev_input_kind;

/* One thing that came in, from SDL or from a replay. */
typedef struct ev_input {
    ev_input_kind kind;
    double x, y;  /* page pixels */
    int button;   /* SDL_BUTTON_LEFT.. */
    int clicks;   /* of a press: 2 for a double click */
    double wheel; /* notches, + away from the person */
    SDL_Keycode key;
    Uint16 modifiers;
    const char *text; /* text or path; valid during the call */
} ev_input;

typedef struct ev_gallery {
    ev_scene **scenes;
    ev_antenna *antennas;
    ev_gallery_item *items;
    char **paths;
    ev_ray *rays;
    int count;
} ev_gallery;

/* The drawer of all settings: what is typed, and what of it is shown. */
typedef struct ev_drawer_hand {
    bool is_open;
    ev_edit search, edit;
    char offered[EV_EDIT_CAPACITY]; /* the text that typing began with */
    ev_drawer shown;                /* its scroll, editing and complaint are the drawer's own */
} ev_drawer_hand;

/* The list of actions, as it was when it was opened. */
typedef struct ev_finder_words {
    char key[16], words[80];
} ev_finder_words;

typedef struct ev_finder {
    bool is_open;
    ev_edit search;
    ev_finder_words words[EV_ACTIONS_CAPACITY];
    ev_action_entry items[EV_ACTIONS_CAPACITY];
    ev_actions shown;
} ev_finder;

typedef struct ev_view {
    const ev_view_options *options;
    ev_diagnostics *diagnostics;
    ev_window window;
    ev_layers layers;
    ev_space space;
    ev_model model;
    ev_crew *crew; /* two threads: this one and a helper */
    ev_gallery gallery;

    ev_page page;
    ev_sheet sheet; /* what the last frame showed */
    ev_stage_mode stage;
    bool dark, detail;          /* detail: the enlarged part is shown */
    bool showing;               /* the page of showing mode; then the Stage is a section, */
    ev_stage_mode stage_before; /* and goes back to this */
    ev_plate plate;
    double zoom, pan_x, pan_y;
    ev_camera camera;
    bool camera_kept; /* turned by hand: a new size does not fit it again */

    double x, y; /* of the pointer */
    char pointed[80];
    char notice[160];
    double notice_until; /* s */

    ev_field_row rows[EV_FIELD_CAPACITY];
    int row_count;
    int grabbed; /* field in hand, -1: none; then the part is */
    int editing; /* field being typed into, -1: none */
    ev_edit edit;
    ev_drawer_hand drawer;
    ev_finder finder;
    bool fresh; /* a click has just opened it: a second one means nominal */
    char complaint[96];
    ev_drag drag;
    char nudged[96];     /* address or part last nudged: goes on as one change */
    double nudged_until; /* s */

    double ranges[5]; /* held during a drag; see frame.c */
    double now;       /* s, of the clock: real, or the replay's */
    bool dirty;       /* something to draw */
    bool leaving;
    const char *asked; /* how the person wanted to leave unsaved changes; NULL: not asked */
    int help;          /* line of the help to show next */
    int exit_code;
    double frame_seconds; /* real time from the last input handled to the picture shown */
} ev_view;

/* frame.c: computes what is out of date and draws it; `frame` also shows it. */
void ev_view_draw(ev_view *view);
void ev_view_frame(ev_view *view);
/* Fills `view->sheet` and returns it; NULL while nothing is open. */
const ev_sheet *ev_view_sheet(ev_view *view);

/* input.c */
void ev_view_input(ev_view *view, const ev_input *input);
void ev_view_point(ev_view *view, double x, double y);

/* grab.c: a press. drag.c: what follows until the release. */
void ev_drag_begin(ev_view *view, const ev_input *input);
extern const double ev_turn_per_pixel; /* rad of space per pixel of the hand */
void ev_drag_move(ev_view *view, const ev_input *input);
void ev_drag_end(ev_view *view, const ev_input *input);
/* Puts back what was being moved. */
void ev_drag_cancel(ev_view *view);
bool ev_view_moving(const ev_view *view);
/* Moves the part in hand by steps along the page. */
void ev_view_nudge(ev_view *view, int right, int up, double factor);

/* strip.c */
void ev_strip_edit(ev_view *view, int field);
void ev_strip_leave(ev_view *view, bool commit); /* a complaint keeps it open */
bool ev_strip_key(ev_view *view, const ev_input *input);
void ev_strip_nominal(ev_view *view, int field);
void ev_strip_nudge(ev_view *view, int field, double steps);
int ev_strip_find(const ev_view *view, const char *box_name); /* "field.ADDRESS"; -1 */

/* The value as one types it: a true minus is for reading, a keyboard has the short one. */
void ev_strip_typed(const char *digits, const char *unit, char *text, size_t size);

/* acts.c */
typedef struct ev_act {
    const char *name;  /* "undo" */
    const char *label; /* on the bar, NULL: not there */
    int underline;     /* byte of the label; -1 */
    const char *words; /* for the help line */
    bool (*enabled)(const ev_view *view);
    void (*run)(ev_view *view);
} ev_act;

/* By its place in the table; NULL beyond the end. */
const ev_act *ev_act_at(int index);
const ev_act *ev_act_find(const char *name);
/* The command of a key, NULL when it has none. */
const ev_act *ev_act_of_key(SDL_Keycode key, Uint16 modifiers);
/* Most need an open scene. */
bool ev_act_possible(const ev_view *view, const ev_act *command);
void ev_act_run(ev_view *view, const ev_act *command);
int ev_action_list(const ev_view *view, ev_action actions[EV_ACTION_CAPACITY]);

/* showing.c; true of a key: it has been seen to, or means nothing there */
void ev_showing_enter(ev_view *view);
void ev_showing_leave(ev_view *view);
bool ev_showing_key(ev_view *view, const ev_input *input);

/* drawer.c; true of an input: the drawer has taken it */
void ev_drawer_open(ev_view *view); /* or closes it, when it is open */
void ev_drawer_close(ev_view *view);
const ev_drawer *ev_drawer_shown(ev_view *view); /* NULL: not there */
bool ev_drawer_listens(const ev_view *view);     /* for text */
bool ev_drawer_press(ev_view *view, const ev_input *input);
bool ev_drawer_wheel(ev_view *view, const ev_input *input);
bool ev_drawer_key(ev_view *view, const ev_input *input);
bool ev_drawer_text(ev_view *view, const char *text);
bool ev_drawer_click(ev_view *view, const char *name);

/* drawer_lists.c: what a button "add.feed" or "copy.strut.0" does to a design, and the words for
 * undo. False when it cannot. */
bool ev_lists_change(ev_design *design, const char *button, char words[EV_WORDS_CAPACITY]);

/* finder.c; true of an input: the list of actions has taken it */
void ev_finder_open(ev_view *view);
void ev_finder_close(ev_view *view);
const ev_actions *ev_finder_shown(ev_view *view); /* NULL: not there */
bool ev_finder_press(ev_view *view, const ev_input *input);
bool ev_finder_key(ev_view *view, const ev_input *input);
bool ev_finder_text(ev_view *view, const char *text);
bool ev_finder_click(ev_view *view, const char *name);

/* gallery.c */
void ev_gallery_load(ev_gallery *gallery, const char *folder);
void ev_gallery_free(ev_gallery *gallery);

/* Asks once before changes are lost; the second time the same way it may. `how` is kept. */
bool ev_view_may_leave(ev_view *view, const char *how, const char *question);
/* acts.c: a named button or scene was clicked. */
void ev_view_click(ev_view *view, const char *name);

/* view.c */
void ev_view_notice(ev_view *view, const char *text);
bool ev_view_open_scene(ev_view *view, const char *path); /* false with a notice */
/* Answers of the worker, notices that have been up long enough. */
void ev_view_tick(ev_view *view);
