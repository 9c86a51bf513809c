/* Finds the largest mendable loss of a feed and the move that mends it. Called at rest by the
 * study; the words are made in verdict_words.c from the numbers found here. */
#include "study/verdict.h"

#include <stddef.h>
#include <string.h>

static const double worth_db = 0.02; /* a single move is worth making, and rounding to, from here */
static const double loss_to_name_db = 0.05; /* a part is called misplaced from here on */

const char *ev_verdict_word(ev_verdict_id id)
{
    static const char *const words[] = {"in_place", "feed_misplaced", "sub_misplaced", "turned",
                                        "as_meant", "struts",         "too_small",     "dark"};
    return words[id];
}

/* Largest 1-2-5 step (m) whose length costs no more than `worth_db` off the best place. */
static double rounding_step(double bend)
{
    double widest = sqrt(2.0 * worth_db / fmax(bend, 1e-9)), step = 1e-5;
    static const double next[] = {2.0, 2.5, 2.0};
    for (int i = 0; step * next[i % 3] <= widest && step < 0.01; i++)
        step *= next[i % 3];
    return step;
}

static void sort_moves(ev_verdict *verdict)
{
    for (int i = 1; i < verdict->move_count; i++)
        for (int k = i; k > 0 && verdict->moves[k].wins_db > verdict->moves[k - 1].wins_db; k--) {
            ev_move swap = verdict->moves[k];
            verdict->moves[k] = verdict->moves[k - 1];
            verdict->moves[k - 1] = swap;
        }
}

/* The state of one look at a design. */
typedef struct look {
    const ev_design *design;
    double frequency;
    int feed;
} look;

static double gain_by(const look *at, ev_part part, const double by[EV_AXIS_COUNT])
{
    return ev_part_gain_at(at->design, at->frequency, part, at->feed, by);
}

/* Rounds the best place's moves, drops those that are worth nothing, and says what each wins alone
 * and all together. Returns what they win together. */
static double list_moves(const look *at, ev_part part, const ev_best *best, ev_verdict *verdict)
{
    double by[EV_AXIS_COUNT];
    for (int i = 0; i < EV_AXIS_COUNT; i++) {
        double step = rounding_step(best->bend[i]);
        by[i] = step * round(best->by[i] / step);
    }
    double together = gain_by(at, part, by);
    verdict->move_count = 0;
    for (int i = 0; i < EV_AXIS_COUNT; i++) {
        double without[EV_AXIS_COUNT] = {by[0], by[1], by[2]}, alone[EV_AXIS_COUNT] = {0};
        without[i] = 0.0;
        alone[i] = by[i];
        if (by[i] == 0.0 || together - gain_by(at, part, without) < worth_db) {
            by[i] = 0.0;
            continue;
        }
        double wins = gain_by(at, part, alone) - best->now_dbi;
        verdict->moves[verdict->move_count++] =
            (ev_move){.part = part, .axis = (ev_part_axis)i, .by = by[i], .wins_db = wins};
    }
    sort_moves(verdict);
    return verdict->move_count > 0 ? gain_by(at, part, by) - best->now_dbi : 0.0;
}

static bool sub_is_off(const ev_sub_design *sub)
{
    return ev_vec3_length(sub->shift) > 0.0 || sub->tilt_x != 0.0 || sub->tilt_y != 0.0;
}

static void find_moves(const look *at, ev_verdict *verdict)
{
    static const bool all[EV_AXIS_COUNT] = {true, true, true};
    bool dual = at->design->sub.present && sub_is_off(&at->design->sub);
    ev_best feed = ev_part_best(at->design, at->frequency, EV_PART_FEED, at->feed, all);
    ev_verdict by_feed = *verdict;
    double feed_wins = list_moves(at, EV_PART_FEED, &feed, &by_feed), sub_wins = 0.0;
    if (dual) {
        ev_best sub = ev_part_best(at->design, at->frequency, EV_PART_SUB, at->feed, all);
        sub_wins = list_moves(at, EV_PART_SUB, &sub, verdict);
    }
    if (dual && sub_wins >= loss_to_name_db && sub_wins >= feed_wins - worth_db) {
        verdict->id = EV_VERDICT_SUB_MISPLACED;
        verdict->loss_db = sub_wins;
        verdict->feed_only_db = by_feed.move_count > 0 ? by_feed.moves[0].wins_db : 0.0;
        if (by_feed.move_count > 0)
            verdict->feed_only = by_feed.moves[0];
        return;
    }
    *verdict = by_feed;
    if (feed_wins < loss_to_name_db) {
        verdict->move_count = 0;
        return;
    }
    verdict->id = EV_VERDICT_FEED_MISPLACED;
    verdict->loss_db = feed_wins;
}

static double decibels(double ratio)
{
    return -10.0 * log10(fmax(ratio, 1e-30));
}

static void note_rest(const ev_feed_budget *budget, ev_verdict_rest *rest)
{
    const ev_efficiency *eta = &budget->efficiency;
    *rest = (ev_verdict_rest){.lighting_db = decibels(eta->taper),
                              .spill_db = decibels(eta->spillover),
                              .shadow_db = decibels(eta->blockage),
                              .surface_db = decibels(eta->surface),
                              .other_db = decibels(eta->polarization * eta->ohmic * eta->mismatch)};
}

static void budget_of(const ev_design *design, double frequency, int feed, ev_feed_budget *budget)
{
    ev_antenna antenna;
    ev_antenna_build(design, frequency, &antenna);
    ev_budget_compute_feed(&antenna, feed, budget);
}

/* Struts are worth naming from 0.3 dB of their own; half the width is what to compare with. */
static void weigh_struts(const look *at, const ev_feed_budget *now, ev_verdict *verdict)
{
    ev_design bare = *at->design;
    ev_feed_budget without, thinner;
    bare.strut_count = 0;
    budget_of(&bare, at->frequency, at->feed, &without);
    verdict->strut_db = without.gain_on_axis_dbi - now->gain_on_axis_dbi;
    if (verdict->strut_db < 0.3)
        return;
    bare = *at->design;
    for (int i = 0; i < bare.strut_count; i++) {
        verdict->strut_width = fmax(verdict->strut_width, bare.struts[i].width);
        bare.struts[i].width *= 0.5;
    }
    budget_of(&bare, at->frequency, at->feed, &thinner);
    verdict->strut_half_db = without.gain_on_axis_dbi - thinner.gain_on_axis_dbi;
    verdict->id = EV_VERDICT_STRUTS;
}

/* Gain on the wanted axis with some moves made, shadows and the subreflector's rim in it. */
static double gain_with(const look *at, const ev_move *moves, int count)
{
    ev_design moved = *at->design;
    ev_antenna antenna;
    ev_feed_budget budget;
    ev_antenna_build(at->design, at->frequency, &antenna);
    for (int i = 0; i < count; i++)
        ev_part_move(&moved, &antenna, moves[i].part, at->feed, moves[i].axis, moves[i].by);
    budget_of(&moved, at->frequency, at->feed, &budget);
    return budget.gain_on_axis_dbi;
}

/* The moves were found on the smooth part of the gain; what they are said to win is the budget's
 * difference. */
static void price_moves(const look *at, ev_verdict *verdict)
{
    double now = verdict->now_dbi;
    for (int i = 0; i < verdict->move_count; i++)
        verdict->moves[i].wins_db = gain_with(at, &verdict->moves[i], 1) - now;
    if (verdict->feed_only.by != 0.0)
        verdict->feed_only_db = gain_with(at, &verdict->feed_only, 1) - now;
    verdict->after_dbi = gain_with(at, verdict->moves, verdict->move_count);
    verdict->loss_db = verdict->after_dbi - now;
    sort_moves(verdict);
}

static void settle_in_place(const look *at, const ev_feed_budget *now, ev_verdict *verdict)
{
    const ev_feed_design *feed = &at->design->feeds[at->feed];
    if (at->design->strut_count > 0)
        weigh_struts(at, now, verdict);
    bool own_beam = feed->toward_x != 0.0 || feed->toward_y != 0.0;
    if (verdict->id != EV_VERDICT_IN_PLACE || !own_beam || feed->toward_peak || at->feed == 0)
        return;
    ev_feed_budget first;
    budget_of(at->design, at->frequency, 0, &first);
    verdict->below_first_db = first.gain_on_axis_dbi - now->gain_on_axis_dbi;
    verdict->id = EV_VERDICT_AS_MEANT;
}

void ev_verdict_find(const ev_design *design, double frequency, int feed, ev_verdict *verdict)
{
    look at = {.design = design, .frequency = frequency, .feed = feed};
    ev_feed_budget now;
    budget_of(design, frequency, feed, &now);
    *verdict = (ev_verdict){.id = EV_VERDICT_IN_PLACE,
                            .now_dbi = now.gain_on_axis_dbi,
                            .after_dbi = now.gain_on_axis_dbi,
                            .wavelengths = design->main.diameter * frequency / EV_LIGHT_SPEED};
    note_rest(&now, &verdict->rest);
    if (now.efficiency.spillover < 1e-3) {
        verdict->id = EV_VERDICT_DARK;
    } else {
        find_moves(&at, verdict);
        if (verdict->id == EV_VERDICT_IN_PLACE)
            settle_in_place(&at, &now, verdict);
        else
            price_moves(&at, verdict);
        ev_verdict_weigh_turns(design, frequency, feed, verdict);
        if (verdict->wavelengths < 10.0)
            verdict->id = EV_VERDICT_TOO_SMALL;
    }
    ev_verdict_word_out(design, feed, verdict);
}
