/* Moves of the parts along their own axes, and which part is in hand. */
#include "view/model.h"

#include <stdio.h>

/* How far a part stands from nominal along its own axes, as components of the design's own numbers
 * so that what was typed comes back exactly. */
static void find_places(const ev_model *model, const ev_design *design, ev_part part,
                        double place[EV_AXIS_COUNT])
{
    const ev_antenna *antenna = &model->study->antenna;
    const ev_feed_design *feed = &design->feeds[model->feed];
    ev_vec3 shift = part == EV_PART_SUB ? design->sub.shift : feed->shift;
    for (int axis = 0; axis < EV_AXIS_COUNT; ++axis) {
        place[axis] = ev_vec3_dot(
            shift, ev_part_axis_direction(antenna, part, model->feed, (ev_part_axis)axis));
    }
    if (part == EV_PART_FEED) {
        place[EV_AXIS_OUT] += feed->defocus;
    }
}

double ev_model_place(const ev_model *model, ev_part part, ev_part_axis axis)
{
    double place[EV_AXIS_COUNT];
    find_places(model, &model->design, part, place);
    return place[axis];
}

/* A feed's way out is its defocus, and its shift is square to it: the number on the field is then
 * the number in the file. */
ev_design ev_model_moved(const ev_model *model, const ev_design *from, ev_part part,
                         ev_part_axis axis, double place)
{
    ev_design moved = *from;
    double places[EV_AXIS_COUNT];
    find_places(model, from, part, places);
    places[axis] = place;
    ev_vec3 shift = {0.0, 0.0, 0.0};
    for (int i = part == EV_PART_FEED ? EV_AXIS_UP : EV_AXIS_OUT; i < EV_AXIS_COUNT; ++i) {
        ev_vec3 way =
            ev_part_axis_direction(&model->study->antenna, part, model->feed, (ev_part_axis)i);
        shift = ev_vec3_along(shift, places[i], way);
    }
    if (part == EV_PART_SUB) {
        moved.sub.shift = shift;
    } else {
        moved.feeds[model->feed].shift = shift;
        moved.feeds[model->feed].defocus = places[EV_AXIS_OUT];
    }
    return moved;
}

void ev_model_move_words(const ev_model *model, ev_part part, ev_part_axis axis,
                         char words[EV_WORDS_CAPACITY])
{
    const char *name = part == EV_PART_SUB ? "subreflector" : "feed";
    if (part == EV_PART_FEED && model->design.feed_count > 1) {
        snprintf(words, EV_WORDS_CAPACITY, "feed %.30s %s", model->design.feeds[model->feed].name,
                 ev_axis_word(axis));
        return;
    }
    snprintf(words, EV_WORDS_CAPACITY, "%s %s", name, ev_axis_word(axis));
}

void ev_model_part_name(const ev_model *model, char name[32])
{
    if (model->part == EV_PART_SUB) {
        snprintf(name, 32, "part.sub");
    } else {
        snprintf(name, 32, "part.feed.%d", model->feed);
    }
}

void ev_model_obey(ev_model *model)
{
    const ev_verdict *verdict = &model->verdict;
    if (verdict->move_count == 0 || ev_model_stale(model)) {
        snprintf(model->message, sizeof model->message, "%s",
                 ev_model_stale(model) ? "Still working out where it belongs"
                                       : "Nothing to move: it is in place");
        return;
    }
    ev_design moved = model->design;
    for (int i = 0; i < verdict->move_count; ++i) {
        const ev_move *move = &verdict->moves[i];
        ev_part_move(&moved, &model->study->antenna, move->part, model->feed, move->axis, move->by);
    }
    if (ev_model_try(model, &moved, false)) {
        ev_model_note(model, "moved where it belongs");
        snprintf(model->message, sizeof model->message, "Moved where it belongs");
    }
}

void ev_model_select(ev_model *model, ev_part part, int feed)
{
    if (part == model->part && feed == model->feed) {
        return;
    }
    if (feed != model->feed) {
        model->verdict_serial = 0; /* the words are about another feed */
    }
    model->part = part;
    model->feed = feed;
    model->has_map = model->has_gain = false;
    model->gain_axis = EV_AXIS_OUT;
}

void ev_model_next_part(ev_model *model)
{
    if (model->part == EV_PART_FEED && model->feed + 1 < model->design.feed_count) {
        ev_model_select(model, EV_PART_FEED, model->feed + 1);
    } else if (model->part == EV_PART_FEED && model->design.sub.present) {
        ev_model_select(model, EV_PART_SUB, model->feed);
    } else {
        ev_model_select(model, EV_PART_FEED, 0);
    }
}
