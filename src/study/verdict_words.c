/* The verdict in words: the sentences of the window, of `budget` and of its JSON. */
#include "study/verdict.h"

#include <stdarg.h>
#include <stdio.h>
#include <string.h>

/* A line being written; **...** in a format marks what is set in semibold. */
typedef struct line {
    char *text;
    size_t size, length;
    int (*bold)[2], *bold_count, bold_capacity;
} line;

__attribute__((format(printf, 2, 3))) static void add(line *to, const char *format, ...)
{
    char piece[320];
    va_list arguments;
    va_start(arguments, format);
    vsnprintf(piece, sizeof piece, format, arguments);
    va_end(arguments);
    for (const char *c = piece; *c && to->length + 1 < to->size; c++) {
        if (c[0] == '*' && c[1] == '*') {
            bool open = to->bold && *to->bold_count < to->bold_capacity;
            if (open && to->bold[*to->bold_count][0] < 0)
                to->bold[*to->bold_count][0] = (int)to->length;
            else if (open)
                to->bold[(*to->bold_count)++][1] = (int)to->length;
            c++;
            continue;
        }
        to->text[to->length++] = *c;
    }
    to->text[to->length] = '\0';
}

/* Millimetres without needless digits: 4, 0.3, 1250. */
static const char *millimetres(double metres, char text[24])
{
    double mm = fabs(metres) * 1e3;
    snprintf(text, 24, mm < 0.095 ? "%.2f" : "%.1f", mm);
    char *dot = strchr(text, '.');
    for (char *end = text + strlen(text) - 1; dot && end > dot && *end == '0'; end--)
        *end = '\0';
    if (dot && dot[1] == '\0')
        *dot = '\0';
    return text;
}

/* What is wrong, for a part that has to move by `move` to be right. */
static const char *fault(const ev_move *move)
{
    bool minus = move->by < 0.0;
    switch (move->axis) {
    case EV_AXIS_OUT:
        if (move->part == EV_PART_SUB)
            return minus ? "too far from the dish" : "too near the dish";
        return minus ? "too far out" : "too far in";
    case EV_AXIS_UP:
        return minus ? "too high" : "too low";
    default:
        return minus ? "too far left" : "too far right"; /* +y is left, facing the dish */
    }
}

static const char *remedy(const ev_design *design, const ev_move *move)
{
    bool minus = move->by < 0.0;
    switch (move->axis) {
    case EV_AXIS_OUT:
        if (move->part == EV_PART_SUB || !design->sub.present)
            return minus ? "toward the dish" : "away from the dish";
        return minus ? "toward the subreflector" : "away from the subreflector";
    case EV_AXIS_UP:
        return minus ? "down" : "up";
    default:
        return minus ? "right" : "left";
    }
}

static void say_faults(line *to, const char *who, const ev_verdict *verdict)
{
    char mm[24];
    add(to, "%s ", who);
    for (int i = 0; i < verdict->move_count; i++) {
        const char *joint = i == 0 ? "" : i + 1 == verdict->move_count ? " and " : ", ";
        add(to, "%s**%s mm %s**", joint, millimetres(verdict->moves[i].by, mm),
            fault(&verdict->moves[i]));
    }
    add(to, ": **%.*f dB** lost.", verdict->loss_db < 0.095 ? 2 : 1, verdict->loss_db);
}

/* "4 mm up, which wins back most of it, and 14 mm toward the dish" */
static void say_moves(line *to, const ev_design *design, const ev_verdict *verdict)
{
    char mm[24];
    bool aside = false; /* an aside is open and the next piece has to close it with a comma */
    add(to, "Move it ");
    for (int i = 0; i < verdict->move_count; i++) {
        const ev_move *move = &verdict->moves[i];
        bool last = i + 1 == verdict->move_count;
        add(to, "%s", i == 0 ? "" : last ? (aside ? ", and " : " and ") : ", ");
        add(to, "%s mm %s", millimetres(move->by, mm), remedy(design, move));
        aside = i == 0 && !last && move->wins_db >= 0.05;
        if (aside && move->wins_db > 0.6 * verdict->loss_db)
            add(to, ", which wins back most of it");
        else if (aside)
            add(to, ", which alone wins %.1f dB", move->wins_db);
    }
    add(to, ". Then %.1f dBi.", verdict->after_dbi);
}

static void say_feed_only(line *to, const ev_design *design, const ev_verdict *verdict)
{
    char mm[24];
    if (verdict->feed_only_db < 0.05 || verdict->feed_only.by == 0.0)
        add(to, " Moving only the feed wins back nothing.");
    else
        add(to, " Moving only the feed wins back %.1f dB: %s mm %s.", verdict->feed_only_db,
            millimetres(verdict->feed_only.by, mm), remedy(design, &verdict->feed_only));
}

static void say_rest(line *to, const ev_verdict_rest *rest)
{
    const char *names[] = {"lighting", "spill", "shadows", "surface", "smaller losses"};
    const double losses[] = {rest->lighting_db, rest->spill_db, rest->shadow_db, rest->surface_db,
                             rest->other_db};
    const char *kept[5];
    int count = 0;
    for (int i = 0; i < 5; i++)
        if (losses[i] >= 0.05)
            kept[count++] = names[i];
    if (count == 0)
        add(to, "Nothing of note is lost");
    else
        add(to, "What remains is ");
    for (int i = 0; i < count; i++)
        add(to, "%s%s", i == 0 ? "" : i + 1 == count ? " and " : ", ", kept[i]);
    add(to, "; moving the feed wins nothing.");
}

static void say_direction(line *to, const ev_feed_design *feed)
{
    double x = feed->toward_x * 180.0 / EV_PI, y = feed->toward_y * 180.0 / EV_PI;
    if (y != 0.0)
        add(to, "**%.1f degrees %s**", fabs(y), y > 0.0 ? "left" : "right");
    if (x != 0.0)
        add(to, "%s**%.1f degrees %s**", y != 0.0 ? " and " : "", fabs(x), x > 0.0 ? "up" : "down");
}

static const char *count_word(int count, char text[24])
{
    static const char *const words[] = {"No",   "One", "Two",   "Three", "Four",
                                        "Five", "Six", "Seven", "Eight"};
    snprintf(text, 24, "%d", count);
    return count >= 0 && count <= 8 ? words[count] : text;
}

static void say_struts(line *first, line *second, const ev_design *design,
                       const ev_verdict *verdict)
{
    char number[24], mm[24], half[24];
    int count = 0;
    for (int i = 0; i < design->strut_count; i++)
        count += design->struts[i].count;
    add(first, "Focus is right: %.1f dBi. **%s %s mm %s** **%.1f dB**.", verdict->now_dbi,
        count_word(count, number), millimetres(verdict->strut_width, mm),
        count == 1 ? "strut costs" : "struts cost", verdict->strut_db);
    add(second, "At half the width, %s mm, they would cost %.1f dB; moving the feed wins nothing.",
        millimetres(0.5 * verdict->strut_width, half), verdict->strut_half_db);
}

static void say_small(line *first, line *second, const ev_verdict *verdict)
{
    char mm[24];
    add(first, "**%.1f wavelengths across**: rays are only a guide here.", verdict->wavelengths);
    if (verdict->move_count == 0) {
        add(second, "By them, the feed is in place: %.1f dBi.", verdict->now_dbi);
        return;
    }
    const ev_move *move = &verdict->moves[0];
    add(second, "By them, the %s is about %s mm %s.",
        move->part == EV_PART_FEED ? "feed" : "subreflector", millimetres(move->by, mm),
        fault(move));
}

static void say_turn(line *first, line *second, const char *who, const ev_verdict *verdict)
{
    static const char *const faults[] = {"turned by %.1f degrees about its own axis",
                                         "aimed %.1f degrees off", "tilted by %.1f degrees"};
    static const char *const remedies[] = {"Turn it back until its polarization is upright",
                                           "Aim it as the design says", "Straighten it"};
    char fault[80];
    snprintf(fault, sizeof fault, faults[verdict->turn], fabs(verdict->turn_by) * 180.0 / EV_PI);
    add(first, "%s **%s**: **%.*f dB** lost.",
        verdict->turn == EV_TURN_SUB_TILT ? "Subreflector" : who, fault,
        verdict->loss_db < 0.095 ? 2 : 1, verdict->loss_db);
    add(second, "%s. Then %.1f dBi.", remedies[verdict->turn], verdict->after_dbi);
}

static const char *feed_name(const ev_design *design, int feed, char text[EV_NAME_CAPACITY + 8])
{
    if (design->feed_count == 1)
        return "Feed";
    snprintf(text, EV_NAME_CAPACITY + 8, "Feed \"%s\"", design->feeds[feed].name);
    return text;
}

void ev_verdict_word_out(const ev_design *design, int feed, ev_verdict *verdict)
{
    char name[EV_NAME_CAPACITY + 8];
    const char *who = feed_name(design, feed, name);
    line first = {.text = verdict->text,
                  .size = sizeof verdict->text,
                  .bold = verdict->bold,
                  .bold_count = &verdict->bold_count,
                  .bold_capacity = sizeof verdict->bold / sizeof verdict->bold[0]};
    line second = {.text = verdict->advice, .size = sizeof verdict->advice};
    for (int i = 0; i < first.bold_capacity; i++)
        verdict->bold[i][0] = -1;
    verdict->bold_count = 0;
    switch (verdict->id) {
    case EV_VERDICT_IN_PLACE:
        add(&first, "%s in place: **%.1f dBi**.", who, verdict->now_dbi);
        say_rest(&second, &verdict->rest);
        break;
    case EV_VERDICT_FEED_MISPLACED:
        say_faults(&first, who, verdict);
        say_moves(&second, design, verdict);
        break;
    case EV_VERDICT_SUB_MISPLACED:
        say_faults(&first, "Subreflector", verdict);
        say_moves(&second, design, verdict);
        say_feed_only(&second, design, verdict);
        break;
    case EV_VERDICT_TURNED:
        say_turn(&first, &second, who, verdict);
        break;
    case EV_VERDICT_AS_MEANT:
        add(&first, "%s points ", who);
        say_direction(&first, &design->feeds[feed]);
        add(&first, " as meant, **%.1f dB** below the first.", verdict->below_first_db);
        say_rest(&second, &verdict->rest);
        break;
    case EV_VERDICT_STRUTS:
        say_struts(&first, &second, design, verdict);
        break;
    case EV_VERDICT_TOO_SMALL:
        say_small(&first, &second, verdict);
        break;
    case EV_VERDICT_DARK:
        add(&first, "%s lights **almost nothing** of its mirror.", who);
        add(&second, "%.2f %% of its power is caught; turn it with aim, or check its place.",
            100.0 * pow(10.0, -0.1 * verdict->rest.spill_db));
        break;
    }
}
