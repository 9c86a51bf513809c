/* The watts bar: where the feed's power went, as a bar that sums to the whole and as the legend of
 * the rays. Shares are the budget's, as they are. */
#include "draw/pen.h"
#include "study/ledger.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

enum { ENTRY_COUNT = 4 };

typedef struct watts_entry {
    const char *name, *words, *brief;
    ev_fate fate;
    double share;
} watts_entry;

static int list_entries(const ev_sheet *sheet, watts_entry entries[ENTRY_COUNT])
{
    static const ev_fate fates[] = {EV_FATE_APERTURE, EV_FATE_PAST_SUB, EV_FATE_PAST_MAIN};
    static const char *const briefs[] = {"aperture", "past sub", "past dish"};
    const double *power = sheet->budget->feeds[sheet->feed].power;
    int count = 0;
    for (int i = 0; i < ENTRY_COUNT - 1; ++i) {
        ev_watts_row row = ev_watts_of(fates[i]);
        if (power[fates[i]] >= EV_LEAST_SHARE || i == 0)
            entries[count++] =
                (watts_entry){row.id, row.label, briefs[i], fates[i], power[fates[i]]};
    }
    double shadow =
        power[EV_FATE_SHADOW_SUB] + power[EV_FATE_SHADOW_FEED] + power[EV_FATE_SHADOW_STRUTS];
    if (shadow >= EV_LEAST_SHARE)
        entries[count++] =
            (watts_entry){"shadow", "in shadow", "shadow", EV_FATE_SHADOW_SUB, shadow};
    return count;
}

static void draw_segment(ev_pen *pen, const watts_entry *entry, ev_rect rect, double opacity)
{
    if (entry->fate != EV_FATE_SHADOW_SUB) {
        ev_pen_fill(pen, rect, 0.0, ev_theme_fate(pen->theme, entry->fate), opacity);
        return;
    }
    cairo_rectangle(pen->cairo, rect.x, rect.y - 1.0, rect.width, rect.height + 2.0);
    double strength = pen->strength;
    pen->strength *= opacity;
    ev_pen_hatch_path(pen, (ev_rect){rect.x, rect.y - 1.0, rect.width, rect.height + 2.0});
    pen->strength = strength;
}

static void draw_segments(ev_pen *pen, const watts_entry *entries, int count, int pointed)
{
    double x = pen->region.x + 24.0, width = pen->region.width - 50.0;
    for (int i = 0; i < count; ++i) {
        double length = width * entries[i].share;
        double gap = i + 1 < count ? fmin(2.0, 0.5 * length) : 0.0;
        draw_segment(pen, &entries[i], (ev_rect){x, pen->region.y + 10.0, length - gap, 5.0},
                     pointed < 0 || pointed == i ? 1.0 : 0.35);
        x += length;
    }
}

/* How wordy the legend may be: 0 full, 1 brief words, 2 a brief note too. */
typedef struct watts_style {
    int brevity;
    double gap, width; /* between entries; of everything */
} watts_style;

static const char *style_words(const watts_entry *entry, int brevity)
{
    return brevity > 0 ? entry->brief : entry->words;
}

static void format_entry(char *text, size_t size, const watts_entry *entry, int brevity, int *bold)
{
    char digits[32];
    ev_format_number(digits, sizeof digits, 100.0 * entry->share, 1, false);
    *bold = snprintf(text, size, "%s %%", digits);
    snprintf(text + *bold, size - (size_t)*bold, " %s", style_words(entry, brevity));
}

static void format_note(char *text, size_t size, const ev_sheet *sheet, int brevity)
{
    text[0] = 0;
    if (sheet->stage != EV_STAGE_SECTION || sheet->ray_count < 1 || !(sheet->rays[0].power > 0.0))
        return;
    snprintf(text, size, brevity > 1 ? "a ray: %.3g %%" : "each ray drawn carries %.3g %%",
             100.0 * sheet->rays[0].power);
}

static double entry_width(const watts_entry *entry, int brevity)
{
    char text[64];
    int bold;
    format_entry(text, sizeof text, entry, brevity, &bold);
    const int range[1][2] = {{0, bold}};
    ev_words words = {
        .string = text, .font = EV_FONT_NOTE, .width = INFINITY, .bold = range, .bold_count = 1};
    return ev_text_extent(&words).width;
}

static watts_style choose_style(const ev_sheet *sheet, const watts_entry *entries, int count,
                                double room)
{
    for (int brevity = 0;; ++brevity) {
        char note[64];
        format_note(note, sizeof note, sheet, brevity);
        double width = ev_text_width(note, EV_FONT_NOTE);
        for (int i = 0; i < count; ++i)
            width += 28.0 + entry_width(&entries[i], brevity);
        double gap = fmin(26.0, (room - width) / count);
        if (gap >= 12.0 || brevity == 2)
            return (watts_style){brevity, fmax(gap, 4.0), width};
    }
}

void ev_draw_watts(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, ev_boxes *boxes)
{
    ev_pen pen = ev_pen_begin(cairo, sheet->dark, boxes, "watts", page->watts);
    ev_pen_ground(&pen);
    watts_entry entries[ENTRY_COUNT];
    int count = list_entries(sheet, entries), pointed = -1;
    double x = page->watts.x + 24.0, right = page->watts.x + page->watts.width - 24.0;
    double baseline = page->watts.y + 34.5;
    watts_style style = choose_style(sheet, entries, count, right - x);
    for (int i = 0; i < count; ++i) {
        char name[80], text[64];
        int bold;
        format_entry(text, sizeof text, &entries[i], style.brevity, &bold);
        double width = entry_width(&entries[i], style.brevity);
        snprintf(name, sizeof name, "watts.%s", entries[i].name);
        if (ev_pointed(sheet, name))
            pointed = i;
        ev_rect row = {x - 4.0, baseline - 16.0, width + 36.0, 24.0};
        ev_boxes_add(boxes, EV_BOX_ROW, name, row);
        ev_colour colour = pointed == i ? pen.theme->hand_text : pen.theme->second;
        if (pointed == i)
            ev_pen_fill(&pen, row, 3.0, pen.theme->hand, 1.0);
        ev_pen_fate_sample(&pen, entries[i].fate, x, baseline - 4.0, 20.0);
        snprintf(name, sizeof name, "text.watts.%s", entries[i].name);
        const int range[1][2] = {{0, bold}};
        ev_text(&pen, (ev_words){.name = name,
                                 .string = text,
                                 .font = EV_FONT_NOTE,
                                 .colour = colour,
                                 .x = x + 28.0,
                                 .width = width + 1.0,
                                 .baseline = baseline,
                                 .bold = range,
                                 .bold_count = 1});
        x += 28.0 + width + style.gap;
    }
    draw_segments(&pen, entries, count, pointed);
    char note[64];
    format_note(note, sizeof note, sheet, style.brevity);
    if (note[0])
        ev_text(&pen, (ev_words){.name = "text.watts.note",
                                 .string = note,
                                 .font = EV_FONT_NOTE,
                                 .colour = pen.theme->second,
                                 .align = EV_ALIGN_RIGHT,
                                 .x = x,
                                 .width = right - x,
                                 .baseline = baseline});
    ev_pen_end(&pen);
}
