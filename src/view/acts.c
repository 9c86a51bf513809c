/* The table of what can be done by name: by key, by a button, by a step of a replay. To add one: a
 * row here and its function; a key in `keys`; a label to have it on the bar. */
#include "view/state.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

static bool is_open(const ev_view *view)
{
    return view->model.scene != NULL;
}

static bool can_undo(const ev_view *view)
{
    return is_open(view) && ev_history_can_undo(view->model.history);
}

static bool can_redo(const ev_view *view)
{
    return is_open(view) && ev_history_can_redo(view->model.history);
}

static bool can_save(const ev_view *view)
{
    return ev_model_unsaved(&view->model);
}

static bool always(const ev_view *view)
{
    (void)view;
    return true;
}

bool ev_view_may_leave(ev_view *view, const char *how, const char *question)
{
    bool asked = view->asked && strcmp(view->asked, how) == 0;
    if (ev_model_unsaved(&view->model) && !asked) {
        view->asked = how;
        ev_finder_close(view);
        ev_showing_leave(view); /* to where the question can be read */
        ev_view_notice(view, question);
        return false;
    }
    view->asked = NULL;
    return true;
}

static void run_save(ev_view *view)
{
    ev_model_save(&view->model);
}

static void run_undo(ev_view *view)
{
    ev_model_undo(&view->model);
}

static void run_redo(ev_view *view)
{
    ev_model_redo(&view->model);
}

static void run_keep(ev_view *view)
{
    ev_model_keep(&view->model);
}

static void run_move(ev_view *view)
{
    ev_model_obey(&view->model);
}

static void run_section(ev_view *view)
{
    view->stage = EV_STAGE_SECTION;
}

static void run_space(ev_view *view)
{
    view->stage = EV_STAGE_SPACE;
}

static void run_stage(ev_view *view)
{
    view->stage = view->stage == EV_STAGE_SPACE ? EV_STAGE_SECTION : EV_STAGE_SPACE;
}

static void run_part(ev_view *view)
{
    ev_model_next_part(&view->model);
    view->grabbed = -1;
}

static void run_fit(ev_view *view)
{
    view->zoom = 1.0;
    view->pan_x = view->pan_y = 0.0;
    view->camera_kept = false;
}

static void run_detail(ev_view *view)
{
    view->detail = !view->detail;
}

static void run_aperture(ev_view *view)
{
    view->plate = EV_PLATE_APERTURE;
}

static void run_beam(ev_view *view)
{
    view->plate = EV_PLATE_BEAM;
}

static void run_cut(ev_view *view)
{
    view->plate = EV_PLATE_CUT;
}

/* With two plates in the column the Aperture is always there: Beam and Cut take turns. */
static void run_plate(ev_view *view)
{
    bool two = view->page.plate_count > 1;
    view->plate = view->plate == EV_PLATE_CUT    ? (two ? EV_PLATE_BEAM : EV_PLATE_APERTURE)
                  : view->plate == EV_PLATE_BEAM ? EV_PLATE_CUT
                                                 : (two ? EV_PLATE_CUT : EV_PLATE_BEAM);
}

static void run_light(ev_view *view)
{
    view->dark = !view->dark;
}

static void run_open(ev_view *view)
{
    if (view->gallery.count == 0) {
        ev_gallery_load(&view->gallery, view->options->examples);
    }
    if (view->gallery.count == 0) {
        ev_view_notice(view, "No example scenes are installed; drop a scene file on this window");
    } else if (ev_view_may_leave(view, "open",
                                 "Not saved. Press o again to give up the changes, s to save")) {
        ev_strip_leave(view, false);
        ev_showing_leave(view);
        ev_drawer_close(view);
        ev_model_close_scene(&view->model);
        view->pointed[0] = '\0';
    }
}

/* A free name beside the scene: "quarry.png", "quarry-2.png", ... */
static void choose_picture_path(const ev_view *view, char *path, size_t size)
{
    const char *scene = ev_scene_path(view->model.scene);
    const char *slash = strrchr(scene, '/'), *dot = strrchr(scene, '.');
    int stem = dot && (!slash || dot > slash) ? (int)(dot - scene) : (int)strlen(scene);
    snprintf(path, size, "%.*s.png", stem, scene);
    for (int i = 2; i < 1000 && access(path, F_OK) == 0; ++i) {
        snprintf(path, size, "%.*s-%d.png", stem, scene, i);
    }
}

static void run_picture(ev_view *view)
{
    ev_job *job = calloc(1, sizeof *job);
    if (!job || ev_worker_busy(view->model.worker, EV_JOB_PICTURE)) {
        ev_view_notice(view, "The last picture is still being written");
        free(job);
        return;
    }
    ev_view_draw(view);
    job->pixels = ev_window_grab(&view->window);
    choose_picture_path(view, job->path, sizeof job->path);
    if (job->pixels) {
        ev_worker_ask(view->model.worker, EV_JOB_PICTURE, job);
    } else {
        ev_view_notice(view, "No memory for a picture");
    }
    free(job);
}

static void run_help(ev_view *view);

static void run_quit(ev_view *view)
{
    if (ev_view_may_leave(view, "quit",
                          "Not saved. Press q again to leave without saving, s to save")) {
        view->leaving = true;
    }
}

static const ev_act commands[] = {
    {"open", "Open", 0, "o: example scenes", always, run_open},
    {"save", "Save", 0, "s: save", can_save, run_save},
    {"undo", "Undo", 0, "u: undo", can_undo, run_undo},
    {"redo", "Redo", 0, "r: do again", can_redo, run_redo},
    {"keep", "Keep", 0, "k: keep this state to compare with", is_open, run_keep},
    {"settings", "Settings", 2, "t: all settings", is_open, ev_drawer_open},
    {"show", "Show", 3, "w: show it large, to people", is_open, ev_showing_enter},
    {"picture", "Picture", 0, "p: picture beside the scene", is_open, run_picture},
    {"help", "Help", 0, "h: the next line of the help", is_open, run_help},
    {"move", NULL, -1, "Enter: move it where it belongs", is_open, run_move},
    {"part", NULL, -1, "Tab: next feed or subreflector", is_open, run_part},
    {"back", NULL, -1, "", is_open, ev_showing_leave},
    {"section", NULL, -1, "1: section", is_open, run_section},
    {"space", NULL, -1, "2: space", is_open, run_space},
    {"stage", NULL, -1, "v: section or space", is_open, run_stage},
    {"fit", NULL, -1, "f: fit the view", is_open, run_fit},
    {"detail", NULL, -1, "e: show or hide the enlarged part", is_open, run_detail},
    {"aperture", NULL, -1, "", is_open, run_aperture},
    {"beam", NULL, -1, "", is_open, run_beam},
    {"cut", NULL, -1, "", is_open, run_cut},
    {"plate", NULL, -1, "b: beam, cut", is_open, run_plate},
    {"light", NULL, -1, "d: light or dark", always, run_light},
    {"find", NULL, -1, "/: find what can be done", always, ev_finder_open},
    {"quit", NULL, -1, "q: leave", always, run_quit},
};

enum { COMMAND_COUNT = sizeof commands / sizeof commands[0] };

static const struct {
    SDL_Keycode key;
    bool control, shift;
    const char *command;
} keys[] = {
    {SDLK_o, false, false, "open"},     {SDLK_o, true, false, "open"},
    {SDLK_s, false, false, "save"},     {SDLK_s, true, false, "save"},
    {SDLK_u, false, false, "undo"},     {SDLK_z, true, false, "undo"},
    {SDLK_r, false, false, "redo"},     {SDLK_y, true, false, "redo"},
    {SDLK_z, true, true, "redo"},       {SDLK_k, false, false, "keep"},
    {SDLK_p, false, false, "picture"},  {SDLK_h, false, false, "help"},
    {SDLK_F1, false, false, "help"},    {SDLK_RETURN, false, false, "move"},
    {SDLK_TAB, false, false, "part"},   {SDLK_1, false, false, "section"},
    {SDLK_2, false, false, "space"},    {SDLK_v, false, false, "stage"},
    {SDLK_f, false, false, "fit"},      {SDLK_e, false, false, "detail"},
    {SDLK_b, false, false, "plate"},    {SDLK_d, false, false, "light"},
    {SDLK_w, false, false, "show"},     {SDLK_t, false, false, "settings"},
    {SDLK_SLASH, false, false, "find"}, {SDLK_f, true, false, "find"},
    {SDLK_q, false, false, "quit"},     {SDLK_q, true, false, "quit"},
};

static const char *const more_help[] = {
    "Press / or Ctrl F to find anything that can be done, by its words, with its key",
    "Drag the yellow ring, the part itself or a tape; arrows nudge, Shift by ten, Alt by a tenth",
    "Click a value to type it (3/8 in); double-click puts it back to nominal",
    "Wheel zooms, drag moves the section or turns space; Shift or the right button moves space",
};

enum { HELP_WIDTH = 110, MORE_COUNT = sizeof more_help / sizeof more_help[0] };

/* Line `wanted` of the help: first how to move things, then the keys, as many as fit a line. */
static bool write_help(int wanted, char *text, size_t size)
{
    if (wanted < MORE_COUNT) {
        snprintf(text, size, "%s", more_help[wanted]);
        return true;
    }
    int line = MORE_COUNT;
    size_t used = 0;
    text[0] = '\0';
    for (int i = 0; i < COMMAND_COUNT; ++i) {
        size_t length = strlen(commands[i].words);
        if (length == 0) { /* a tab, that speaks for itself */
            continue;
        }
        if (used > 0 && used + length + 2 > HELP_WIDTH) {
            ++line;
            used = 0;
        }
        if (line == wanted) {
            snprintf(text + used, size - used, "%s%s", used > 0 ? ", " : "", commands[i].words);
        }
        used += length + (used > 0 ? 2 : 0);
    }
    return text[0] != '\0';
}

static void run_help(ev_view *view)
{
    char text[160];
    if (!write_help(view->help, text, sizeof text)) {
        view->help = 0;
        write_help(view->help, text, sizeof text);
    }
    ++view->help;
    ev_view_notice(view, text);
    view->notice_until = view->now + 20.0;
}

const ev_act *ev_act_at(int index)
{
    return index >= 0 && index < COMMAND_COUNT ? &commands[index] : NULL;
}

const ev_act *ev_act_find(const char *name)
{
    for (int i = 0; i < COMMAND_COUNT; ++i) {
        if (strcmp(commands[i].name, name) == 0) {
            return &commands[i];
        }
    }
    return NULL;
}

const ev_act *ev_act_of_key(SDL_Keycode key, Uint16 modifiers)
{
    bool control = (modifiers & KMOD_CTRL) != 0, shift = (modifiers & KMOD_SHIFT) != 0;
    for (size_t i = 0; i < sizeof keys / sizeof keys[0]; ++i) {
        if (keys[i].key == key && keys[i].control == control && keys[i].shift == shift &&
            !(modifiers & KMOD_ALT)) {
            return ev_act_find(keys[i].command);
        }
    }
    return NULL;
}

bool ev_act_possible(const ev_view *view, const ev_act *command)
{
    return is_open(view) || command->enabled == always;
}

void ev_act_run(ev_view *view, const ev_act *command)
{
    if (ev_act_possible(view, command)) {
        view->nudged[0] = '\0';
        command->run(view);
        view->dirty = true;
    }
}

int ev_action_list(const ev_view *view, ev_action actions[EV_ACTION_CAPACITY])
{
    int count = 0;
    for (int i = 0; i < COMMAND_COUNT && count < EV_ACTION_CAPACITY; ++i) {
        if (commands[i].label) {
            actions[count++] = (ev_action){commands[i].name, commands[i].label,
                                           commands[i].underline, commands[i].enabled(view)};
        }
    }
    return count;
}

/* "action.undo", "tab.space" and "button.move" carry the name of a command. */
void ev_view_click(ev_view *view, const char *name)
{
    const char *dot = strchr(name, '.');
    if (ev_finder_click(view, name)) {
        return;
    }
    if (strncmp(name, "scene.", 6) == 0) {
        int index = atoi(name + 6);
        if (index >= 0 && index < view->gallery.count) {
            ev_view_open_scene(view, view->gallery.paths[index]);
        }
        return;
    }
    if (strncmp(name, "part.", 5) == 0 || ev_drawer_click(view, name)) {
        return; /* pressing has chosen a part */
    }
    const ev_act *command = dot ? ev_act_find(dot + 1) : NULL;
    if (command) {
        ev_act_run(view, command);
    }
}
