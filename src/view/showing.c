/* Showing mode under the hand: coming and going, and the keys that mean something there. The page
 * is drawn as a layer of its own; its ring and its parts are grabbed and dragged as those of the
 * Stage. */
#include "view/state.h"

#include <string.h>

void ev_showing_enter(ev_view *view)
{
    if (view->showing) {
        return;
    }
    ev_strip_leave(view, false);
    view->showing = true;
    view->stage_before = view->stage;
    view->stage = EV_STAGE_SECTION; /* the antenna is shown as a section, with its rays */
    view->grabbed = -1;             /* arrow keys move the part */
    view->pointed[0] = '\0';
    view->dirty = true;
}

void ev_showing_leave(ev_view *view)
{
    if (!view->showing) {
        return;
    }
    view->showing = false;
    view->stage = view->stage_before;
    view->pointed[0] = '\0';
    view->dirty = true;
}

/* What stays of the work with the antenna: what is seen on this page, and what leaves it. */
static bool is_kept(const char *name)
{
    static const char *const kept[] = {"move", "part", "undo", "redo", "light", "open", "quit"};
    for (size_t i = 0; i < sizeof kept / sizeof kept[0]; ++i) {
        if (strcmp(name, kept[i]) == 0) {
            return true;
        }
    }
    return false;
}

bool ev_showing_key(ev_view *view, const ev_input *input)
{
    if (!view->showing) {
        return false;
    }
    if (input->key == SDLK_ESCAPE) {
        ev_showing_leave(view);
        return true;
    }
    if (input->key == SDLK_SPACE) {
        ev_act_run(view, ev_act_find("move"));
        return true;
    }
    const ev_act *command = ev_act_of_key(input->key, input->modifiers);
    return command && !is_kept(command->name);
}
