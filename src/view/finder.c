/* The list of actions under the hand: everything of the table of acts that has words, found by
 * typing, chosen by arrows or by a click. */
#include "view/state.h"

#include <ctype.h>
#include <stdio.h>
#include <string.h>

/* "Ctrl Z: undo" as the table of acts has it becomes key and words. */
static void add_item(ev_finder *finder, const ev_view *view, const ev_act *act)
{
    ev_actions *shown = &finder->shown;
    const char *colon = strstr(act->words, ": ");
    if (!colon || shown->count == EV_ACTIONS_CAPACITY) {
        return;
    }
    ev_finder_words *words = &finder->words[shown->count];
    snprintf(words->key, sizeof words->key, "%.*s", (int)(colon - act->words), act->words);
    snprintf(words->words, sizeof words->words, "%s", colon + 2);
    words->key[0] = (char)toupper((unsigned char)words->key[0]);
    words->words[0] = (char)toupper((unsigned char)words->words[0]);
    finder->items[shown->count++] = (ev_action_entry){
        act->name, words->words, words->key, ev_act_possible(view, act) && act->enabled(view)};
}

void ev_finder_open(ev_view *view)
{
    ev_finder *finder = &view->finder;
    ev_showing_leave(view);
    ev_strip_leave(view, false);
    *finder = (ev_finder){.is_open = true};
    finder->shown.items = finder->items;
    for (int i = 0; ev_act_at(i); ++i) {
        if (strcmp(ev_act_at(i)->name, "find") != 0) {
            add_item(finder, view, ev_act_at(i));
        }
    }
    view->pointed[0] = '\0';
    view->dirty = true;
}

void ev_finder_close(ev_view *view)
{
    view->finder.is_open = false;
    view->pointed[0] = '\0';
    view->dirty = true;
}

const ev_actions *ev_finder_shown(ev_view *view)
{
    ev_actions *shown = &view->finder.shown;
    if (!view->finder.is_open) {
        return NULL;
    }
    ev_edit_show(&view->finder.search, shown->search, sizeof shown->search, &shown->caret,
                 &shown->anchor);
    memcpy(shown->pointed, view->pointed, sizeof shown->pointed);
    return shown;
}

/* Closes first: what is run may open something else. */
static void run(ev_view *view, const char *name)
{
    const ev_act *act = ev_act_find(name);
    ev_finder_close(view);
    if (act) {
        ev_act_run(view, act);
    }
}

static void run_chosen(ev_view *view)
{
    int indices[EV_ACTIONS_CAPACITY];
    const ev_actions *shown = ev_finder_shown(view);
    int count = ev_actions_match(shown, indices);
    const ev_action_entry *item =
        shown->chosen < count ? &shown->items[indices[shown->chosen]] : NULL;
    if (item && item->enabled) {
        run(view, item->name);
    }
}

static void step(ev_view *view, int by)
{
    int indices[EV_ACTIONS_CAPACITY], count = ev_actions_match(ev_finder_shown(view), indices);
    int chosen = view->finder.shown.chosen + by;
    view->finder.shown.chosen = chosen < 0 || count == 0 ? 0 : SDL_min(chosen, count - 1);
}

bool ev_finder_key(ev_view *view, const ev_input *input)
{
    if (!view->finder.is_open) {
        return false;
    }
    view->dirty = true;
    switch (input->key) {
    case SDLK_ESCAPE:
        ev_finder_close(view);
        break;
    case SDLK_UP:
        step(view, -1);
        break;
    case SDLK_DOWN:
        step(view, 1);
        break;
    case SDLK_RETURN:
    case SDLK_KP_ENTER:
        run_chosen(view);
        break;
    default:
        ev_edit_key(&view->finder.search, input->key, input->modifiers);
        step(view, 0);
        break;
    }
    return true;
}

bool ev_finder_text(ev_view *view, const char *text)
{
    if (!view->finder.is_open) {
        return false;
    }
    ev_edit_insert(&view->finder.search, text);
    view->finder.shown.chosen = 0;
    view->dirty = true;
    return true;
}

/* A press beside the list closes it; one on an action acts when it is let go. */
bool ev_finder_press(ev_view *view, const ev_input *input)
{
    if (!view->finder.is_open) {
        return false;
    }
    bool gallery = view->model.scene == NULL;
    double x = input->x, y = input->y;
    if (ev_layers_hit(&view->layers, gallery, x, y, EV_BOX_FIELD)) {
        int byte = ev_actions_byte_at(&view->page, ev_finder_shown(view), x);
        ev_edit_place(&view->finder.search, byte, (input->modifiers & KMOD_SHIFT) != 0);
    } else if (ev_layers_hit(&view->layers, gallery, x, y, EV_BOX_BUTTON)) {
        return false;
    } else if (!ev_layers_hit(&view->layers, gallery, x, y, EV_BOX_PLACE)) {
        ev_finder_close(view);
    }
    view->dirty = true;
    return true;
}

bool ev_finder_click(ev_view *view, const char *name)
{
    if (!view->finder.is_open || strncmp(name, "act.", 4) != 0) {
        return false;
    }
    run(view, name + 4);
    return true;
}
