/* Is it a turn rather than a move? Called by the verdict once the moves are priced. */
#include "study/verdict.h"

static double gain_of(const ev_design *design, double frequency, int feed)
{
    ev_antenna antenna;
    ev_feed_budget budget;
    ev_antenna_build(design, frequency, &antenna);
    ev_budget_compute_feed(&antenna, feed, &budget);
    return budget.gain_on_axis_dbi;
}

/* Takes one turn out of the design; returns how large it was (rad). */
static double undo_turn(ev_design *design, int feed, ev_turn turn)
{
    ev_feed_design *at = &design->feeds[feed];
    double by = 0.0;
    switch (turn) {
    case EV_TURN_ROLL:
        by = at->roll;
        at->roll = 0.0;
        break;
    case EV_TURN_FEED_TILT:
        by = hypot(at->tilt_x, at->tilt_y);
        at->tilt_x = at->tilt_y = 0.0;
        break;
    case EV_TURN_SUB_TILT:
        if (!design->sub.present)
            return 0.0;
        by = hypot(design->sub.tilt_x, design->sub.tilt_y);
        design->sub.tilt_x = design->sub.tilt_y = 0.0;
        break;
    case EV_TURN_COUNT:
        break;
    }
    return by;
}

void ev_verdict_weigh_turns(const ev_design *design, double frequency, int feed,
                            ev_verdict *verdict)
{
    double most = fmax(verdict->loss_db, 0.05);
    for (int i = 0; i < EV_TURN_COUNT; i++) {
        ev_design straight = *design;
        double by = undo_turn(&straight, feed, (ev_turn)i);
        double after = by != 0.0 ? gain_of(&straight, frequency, feed) : verdict->now_dbi;
        if (after - verdict->now_dbi < most)
            continue;
        most = after - verdict->now_dbi;
        verdict->id = EV_VERDICT_TURNED;
        verdict->turn = (ev_turn)i;
        verdict->turn_by = by;
        verdict->loss_db = most;
        verdict->after_dbi = after;
        verdict->move_count = 0;
    }
}
