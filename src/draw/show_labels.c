/* Words beside the Front in showing mode. The Front may stand at any angle, so each label looks for
 * room along it, ahead of the wave. Called by ev_draw_show. */
#include "draw/show.h"

#include <math.h>
#include <stdio.h>

enum { LABEL_CAPACITY = 3, TRIES = 21, TIERS = 3 };

typedef struct show_label {
    const char *name, *string[2];
    ev_font font[2];
    ev_colour colour[2];
    double width, height;
} show_label;

typedef struct label_search {
    ev_pen *pen;
    const ev_sheet *sheet;
    const ev_show *show;
    double factor;
    ev_rect taken[LABEL_CAPACITY];
    int taken_count;
} label_search;

static bool overlaps(ev_rect a, ev_rect b, double reach)
{
    return a.x < b.x + b.width + reach && b.x < a.x + a.width + reach &&
           a.y < b.y + b.height + reach && b.y < a.y + a.height + reach;
}

/* m the Front is ahead of the even line near a height, by which words have to give way. */
static double ahead_near(const ev_sheet *sheet, double x, double reach)
{
    double ahead = 0.0;
    for (int i = 0; i < sheet->front_count; ++i)
        if (fabs(sheet->front_x[i] - x) < reach && isfinite(sheet->front[i]))
            ahead = fmax(ahead, -sheet->front[i]);
    return ahead;
}

/* Where a label would stand that is ahead of the Front at antenna height x, by `away` more pixels
 * than it has to be. */
static ev_rect rect_at(const label_search *search, const show_label *label, double x, double away)
{
    const ev_show *show = search->show;
    double c = cos(show->turn), s = sin(show->turn), px, py;
    double along = 0.5 * (fabs(s) * label->width + fabs(c) * label->height) / show->scale;
    double bend = search->factor * ahead_near(search->sheet, x, along);
    double deep = 0.5 * (fabs(c) * label->width + fabs(s) * label->height);
    double ahead = show->front_z + bend + (deep + away + 16.0 * show->size) / show->scale;
    ev_plot_to_page(&show->map, ahead, x, &px, &py);
    return (ev_rect){px - 0.5 * label->width, py - 0.5 * label->height, label->width,
                     label->height};
}

static bool is_free(const label_search *search, ev_rect rect)
{
    const ev_show *show = search->show;
    double margin = 14.0 * show->size, page = show->page.width - margin;
    double floor = isfinite(show->ground) ? show->ground : show->page.height - 70.0 * show->size;
    double radius = 0.5 * show->target.width + 8.0, cx = show->target.x + 0.5 * show->target.width;
    double cy = show->target.y + 0.5 * show->target.height;
    double dx = fmax(fmax(rect.x - cx, cx - rect.x - rect.width), 0.0);
    double dy = fmax(fmax(rect.y - cy, cy - rect.y - rect.height), 0.0);
    if (rect.x < margin || rect.x + rect.width > page || rect.y < margin ||
        rect.y + rect.height > floor || hypot(dx, dy) < radius || overlaps(rect, show->words, 4.0))
        return false;
    for (int i = 0; i < search->taken_count; ++i)
        if (overlaps(rect, search->taken[i], 6.0))
            return false;
    return true;
}

static void draw_label(label_search *search, const show_label *label, ev_rect rect)
{
    double y = rect.y;
    for (int i = 0; i < 2 && label->string[i]; ++i) {
        char name[48];
        snprintf(name, sizeof name, "text.show.%s%s", label->name, i ? ".2" : "");
        y += 1.45 * label->font[i].size;
        ev_text(search->pen, (ev_words){.name = name,
                                        .string = label->string[i],
                                        .font = label->font[i],
                                        .colour = label->colour[i],
                                        .x = rect.x,
                                        .width = rect.width,
                                        .baseline = y - 0.4 * label->font[i].size,
                                        .halo = true});
    }
    search->taken[search->taken_count++] = rect;
}

/* No room along the Front: a corner of the page, or under the large words. */
static void place_apart(label_search *search, const show_label *label)
{
    const ev_show *show = search->show;
    double margin = 48.0 * show->size, right = show->page.width - margin - label->width;
    const double corners[][2] = {{right, 24.0 * show->size},
                                 {right, show->target.y - label->height - margin},
                                 {margin, show->words.y + show->words.height + margin}};
    for (size_t i = 0; i < sizeof corners / sizeof corners[0]; ++i) {
        ev_rect rect = {corners[i][0], corners[i][1], label->width, label->height};
        if (!is_free(search, rect))
            continue;
        draw_label(search, label, rect);
        return;
    }
}

/* Nearest to `x` first, then away from it both ways. */
static void place_label(label_search *search, show_label *label, double x)
{
    const ev_antenna *antenna = search->sheet->antenna;
    label->width = label->height = 0.0;
    for (int i = 0; i < 2 && label->string[i]; ++i) {
        double width = ev_text_width(label->string[i], label->font[i]) + 1.0;
        label->width = fmax(label->width, width);
        label->height += 1.45 * label->font[i].size;
    }
    for (int i = 0; i < 2 * TRIES * TIERS; ++i) {
        int step = i % (2 * TRIES);
        double away = i / (2 * TRIES) * 34.0 * search->show->size;
        double aside = (step + 1) / 2 * (step % 2 ? -1.0 : 1.0) * 2.0 * antenna->radius / TRIES;
        ev_rect rect = rect_at(search, label, x + aside, away);
        bool is_near = fabs(x + aside - antenna->offset) < 1.25 * antenna->radius;
        if (!is_near || !is_free(search, rect))
            continue;
        draw_label(search, label, rect);
        return;
    }
    place_apart(search, label);
}

/* Where the Front is farthest from even on one side: +1 late, -1 early. */
static bool find_extreme(const ev_sheet *sheet, double sign, double *x)
{
    double largest = 0.0;
    for (int i = 0; i < sheet->front_count; ++i)
        if (sign * sheet->front[i] > largest) {
            largest = sign * sheet->front[i];
            *x = sheet->front_x[i];
        }
    return !ev_is_even(largest, sheet);
}

void ev_show_labels(ev_pen *pen, const ev_sheet *sheet, const ev_show *show, double factor)
{
    label_search search = {.pen = pen, .sheet = sheet, .show = show, .factor = factor};
    ev_font strong = EV_FONT_SHOW_STRONG, note = EV_FONT_SHOW_NOTE;
    strong.size *= show->size;
    note.size *= show->size;
    double late_x = 0.0, early_x = 0.0;
    bool late = find_extreme(sheet, 1.0, &late_x), early = find_extreme(sheet, -1.0, &early_x);
    char bend[96];
    snprintf(bend, sizeof bend, "Its bend is drawn %g times larger.", factor);
    show_label wave = {.name = "wave",
                       .string = {late || early ? "The wave should leave flat."
                                                : "The wave leaves flat, as it should.",
                                  late || early ? bend : NULL},
                       .font = {strong, note},
                       .colour = {pen->theme->ink, pen->theme->second}};
    show_label ends[2] = {
        {.name = "late", .string = {"late"}, .font = {strong}, .colour = {pen->theme->late}},
        {.name = "early", .string = {"early"}, .font = {strong}, .colour = {pen->theme->early}}};
    if (late)
        place_label(&search, &ends[0], late_x);
    if (early)
        place_label(&search, &ends[1], early_x);
    place_label(&search, &wave, sheet->antenna->offset + 0.92 * sheet->antenna->radius);
}
