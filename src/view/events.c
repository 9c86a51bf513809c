/* The event queue. */
#include "view/events.h"

static bool from_motion(const SDL_Event *event, ev_input *input)
{
    *input = (ev_input){.kind = EV_INPUT_MOVE,
                        .x = event->motion.x,
                        .y = event->motion.y,
                        .modifiers = (Uint16)SDL_GetModState()};
    return true;
}

static bool from_button(const SDL_Event *event, ev_input *input)
{
    bool down = event->type == SDL_MOUSEBUTTONDOWN;
    *input = (ev_input){.kind = down ? EV_INPUT_PRESS : EV_INPUT_RELEASE,
                        .x = event->button.x,
                        .y = event->button.y,
                        .button = event->button.button,
                        .clicks = event->button.clicks,
                        .modifiers = (Uint16)SDL_GetModState()};
    return true;
}

static bool from_wheel(const SDL_Event *event, ev_input *input)
{
    int x, y;
    SDL_GetMouseState(&x, &y);
    double notches = (double)event->wheel.preciseY;
    if (event->wheel.direction == SDL_MOUSEWHEEL_FLIPPED) {
        notches = -notches;
    }
    *input = (ev_input){.kind = EV_INPUT_WHEEL, .x = x, .y = y, .wheel = notches};
    return notches != 0.0;
}

static bool from_window(const SDL_Event *event, ev_view *view, ev_input *input)
{
    switch (event->window.event) {
    case SDL_WINDOWEVENT_SIZE_CHANGED:
        *input = (ev_input){.kind = EV_INPUT_SIZE};
        return true;
    case SDL_WINDOWEVENT_EXPOSED:
        view->dirty = true;
        return false;
    case SDL_WINDOWEVENT_LEAVE:
        *input = (ev_input){.kind = EV_INPUT_MOVE, .x = -1.0, .y = -1.0};
        return view->drag.kind == EV_DRAG_NONE;
    default:
        return false;
    }
}

static bool translate(const SDL_Event *event, ev_view *view, ev_input *input)
{
    switch (event->type) {
    case SDL_MOUSEMOTION:
        return from_motion(event, input);
    case SDL_MOUSEBUTTONDOWN:
    case SDL_MOUSEBUTTONUP:
        return from_button(event, input);
    case SDL_MOUSEWHEEL:
        return from_wheel(event, input);
    case SDL_KEYDOWN:
        *input = (ev_input){
            .kind = EV_INPUT_KEY, .key = event->key.keysym.sym, .modifiers = event->key.keysym.mod};
        return true;
    case SDL_TEXTINPUT:
        *input = (ev_input){.kind = EV_INPUT_TEXT, .text = event->text.text};
        return true;
    case SDL_DROPFILE:
        *input = (ev_input){.kind = EV_INPUT_DROP, .text = event->drop.file};
        return true;
    case SDL_QUIT:
        *input = (ev_input){.kind = EV_INPUT_QUIT};
        return true;
    case SDL_WINDOWEVENT:
        return from_window(event, view, input);
    default:
        return false;
    }
}

/* Under a replay only what the window itself has to say counts. */
static bool is_of_window(ev_input_kind kind)
{
    return kind == EV_INPUT_SIZE;
}

/* Is another movement of the pointer next in the queue? Then this one need not be drawn. */
static bool is_overtaken(const SDL_Event *event)
{
    SDL_Event next;
    return event->type == SDL_MOUSEMOTION &&
           SDL_PeepEvents(&next, 1, SDL_PEEKEVENT, SDL_FIRSTEVENT, SDL_LASTEVENT) == 1 &&
           next.type == SDL_MOUSEMOTION;
}

static Uint64 handle(ev_view *view, const SDL_Event *event, bool deaf)
{
    ev_input input;
    Uint64 seen = 0;
    if (!is_overtaken(event) && translate(event, view, &input) &&
        (!deaf || is_of_window(input.kind))) {
        seen = SDL_GetPerformanceCounter();
        ev_view_input(view, &input);
    }
    if (event->type == SDL_DROPFILE) {
        SDL_free(event->drop.file);
    }
    return seen;
}

Uint64 ev_events_handle(ev_view *view, int timeout_ms, bool deaf)
{
    SDL_Event event;
    Uint64 first = 0;
    int got = timeout_ms > 0 ? SDL_WaitEventTimeout(&event, timeout_ms) : SDL_PollEvent(&event);
    while (got) {
        Uint64 seen = handle(view, &event, deaf);
        first = first ? first : seen;
        got = SDL_PollEvent(&event);
    }
    return first;
}
