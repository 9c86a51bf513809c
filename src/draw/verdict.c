/* The Verdict: one sentence of what is wrong, one of what to do, and the button that does it. The
 * words come with the sheet; here they are only made to fit before the button, never under it. */
#include "draw/pen.h"

#include <math.h>

static const double margin = 24.0;

static double draw_button(ev_pen *pen, const ev_sheet *sheet)
{
    const char *label = "Move it there", *key = "Enter";
    double label_width = ev_text_width(label, EV_FONT_HEAD);
    double key_width = ev_text_width(key, EV_FONT_NOTE);
    double width = 14.0 + label_width + 18.0 + key_width + 15.0, height = 32.0;
    ev_rect region = pen->region;
    ev_rect button = {region.x + region.width - margin - width,
                      region.y + 0.5 * (region.height - height), width, height};
    bool pointed = ev_pointed(sheet, "button.move");
    ev_boxes_add(pen->boxes, EV_BOX_BUTTON, "button.move", button);
    ev_pen_fill(pen, button, 3.0, pen->theme->hand, 1.0);
    if (pointed)
        ev_pen_frame(pen, button, 3.0, pen->theme->ink, 1.4, 1.0);
    double baseline = button.y + 0.5 * height + 4.5;
    ev_text(pen, (ev_words){.name = "text.button.move",
                            .string = label,
                            .font = EV_FONT_HEAD,
                            .colour = pen->theme->hand_text,
                            .x = button.x + 14.0,
                            .width = label_width + 1.0,
                            .baseline = baseline});
    double x = button.x + 14.0 + label_width + 18.0;
    ev_text(pen, (ev_words){.name = "text.button.key",
                            .string = key,
                            .font = EV_FONT_NOTE,
                            .colour = pen->theme->hand_text,
                            .x = x,
                            .width = key_width + 1.0,
                            .baseline = baseline});
    ev_pen_frame(pen, (ev_rect){x - 3.5, baseline - 11.5, key_width + 7.0, 15.0}, 1.5,
                 pen->theme->hand_text, 0.9, 0.7);
    return button.x;
}

static int copy_bold(const ev_verdict *verdict, int bold[EV_BOLD_CAPACITY][2])
{
    int count = verdict->bold_count < EV_BOLD_CAPACITY ? verdict->bold_count : EV_BOLD_CAPACITY;
    for (int i = 0; i < count; ++i) {
        bold[i][0] = verdict->bold[i][0];
        bold[i][1] = verdict->bold[i][1];
    }
    return count;
}

void ev_draw_verdict(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, ev_boxes *boxes)
{
    ev_pen pen = ev_pen_begin(cairo, sheet->dark, boxes, "verdict", page->verdict);
    ev_pen_ground(&pen);
    const ev_verdict *verdict = sheet->verdict;
    double end = page->verdict.x + page->verdict.width - margin;
    if (verdict->move_count > 0 && !sheet->paper)
        end = draw_button(&pen, sheet) - 20.0;
    pen.strength = sheet->stale ? EV_STALE : 1.0;

    int bold[EV_BOLD_CAPACITY][2];
    double x = page->verdict.x + margin, middle = page->verdict.y + 0.5 * page->verdict.height;
    ev_words first = {.name = "text.verdict.1",
                      .string = verdict->text,
                      .font = EV_FONT_VERDICT,
                      .colour = pen.theme->ink,
                      .x = x,
                      .width = end - x,
                      .least = 17.0,
                      .lines = 1,
                      .bold = (const int(*)[2])bold,
                      .bold_count = copy_bold(verdict, bold)};
    ev_words second = {.name = "text.verdict.2",
                       .string = verdict->advice,
                       .font = EV_FONT_ADVICE,
                       .colour = pen.theme->second,
                       .x = x,
                       .width = end - x,
                       .least = 12.5,
                       .lines = 1};
    bool long_text =
        ev_text_width(first.string, EV_FONT_VERDICT) * 17.0 / 21.0 > 0.96 * first.width;
    bool long_advice = ev_text_width(second.string, EV_FONT_ADVICE) * 12.5 / 14.0 > second.width;
    first.baseline = middle - 5.0;
    second.baseline = middle + 21.0;
    if (long_text || long_advice) {
        /* Up to two lines each, in the room of one large and one small. */
        first.font.size = long_text ? 16.0 : 19.0;
        first.least = long_text ? 0.0 : 16.0;
        first.lines = long_text ? 2 : 1;
        first.line_height = 19.0;
        second.font.size = 12.5;
        second.least = 0.0;
        second.lines = 2;
        second.line_height = 16.0;
        int text_lines = ev_text_extent(&first).lines, advice_lines = ev_text_extent(&second).lines;
        double height = 19.0 * text_lines + 5.0 + 16.0 * advice_lines;
        first.baseline = middle - 0.5 * height + 15.5;
        second.baseline = middle + 0.5 * height - 16.0 * (advice_lines - 1) - 4.0;
    }
    ev_text(&pen, first);
    ev_text(&pen, second);
    ev_pen_end(&pen);
}
