/* Text where it belongs: inside its place and the page, apart from other text, whole. Shared by the
 * tests of whole pages and panels. */
#pragma once

#include "draw/pen.h"
#include "sheet.h"

#include <math.h>

#define UNUSED __attribute__((unused))

UNUSED static bool lies_within(ev_rect inner, ev_rect outer)
{
    double slack = 0.75;
    return inner.x >= outer.x - slack && inner.y >= outer.y - slack &&
           inner.x + inner.width <= outer.x + outer.width + slack &&
           inner.y + inner.height <= outer.y + outer.height + slack;
}

UNUSED static bool overlaps(ev_rect a, ev_rect b)
{
    double slack = 1.0;
    return a.x + slack < b.x + b.width && b.x + slack < a.x + a.width &&
           a.y + slack < b.y + b.height && b.y + slack < a.y + a.height;
}

/* Returns the number of texts. */
UNUSED static int check_inside(const char *what, const ev_boxes *boxes)
{
    int texts = 0;
    for (int i = 0; i < boxes->count; ++i) {
        const ev_box *box = &boxes->items[i];
        if (box->kind != EV_BOX_TEXT)
            continue;
        ++texts;
        if (!lies_within(box->rect, box->within))
            fail_msg("%s: %s \"%s\" (%g %g %g %g) is not inside (%g %g %g %g)", what, box->name,
                     box->text, box->rect.x, box->rect.y, box->rect.width, box->rect.height,
                     box->within.x, box->within.y, box->within.width, box->within.height);
    }
    return texts;
}

/* Of a whole page. */
UNUSED static void check_places(const char *what, const ev_boxes *boxes, double width,
                                double height)
{
    ev_rect page = {0.0, 0.0, width, height};
    assert_in_range(check_inside(what, boxes), 60, EV_BOX_CAPACITY);
    assert_in_range(boxes->count, 80, EV_BOX_CAPACITY - 1); /* none was dropped */
    for (int i = 0; i < boxes->count; ++i)
        if (boxes->items[i].kind == EV_BOX_TEXT && !lies_within(boxes->items[i].rect, page))
            fail_msg("%s: %s is not on the page", what, boxes->items[i].name);
}

UNUSED static void check_apart(const char *what, const ev_boxes *boxes)
{
    for (int i = 0; i < boxes->count; ++i)
        for (int k = 0; k < i; ++k) {
            const ev_box *a = &boxes->items[i], *b = &boxes->items[k];
            if (a->kind == EV_BOX_TEXT && b->kind == EV_BOX_TEXT && overlaps(a->rect, b->rect))
                fail_msg("%s: %s \"%s\" lies on %s \"%s\"", what, a->name, a->text, b->name,
                         b->text);
        }
}

/* On a real scene only what a person wrote may lose its end; at the least size the rest fits. */
UNUSED static void check_whole(const char *what, const ev_boxes *boxes)
{
    static const char *const free_text[] = {"text.bar.title", "text.bar.notice", "text.verdict.1",
                                            "text.verdict.2"};
    for (int i = 0; i < boxes->count; ++i) {
        const ev_box *box = &boxes->items[i];
        bool may_end = box->kind != EV_BOX_TEXT;
        for (size_t k = 0; k < sizeof free_text / sizeof free_text[0]; ++k)
            may_end = may_end || strcmp(box->name, free_text[k]) == 0;
        double drawn = fmax(box->rect.width, box->rect.height);
        if (!may_end && drawn < ev_text_width(box->text, EV_FONT_SMALL) - 0.5)
            fail_msg("%s: %s \"%s\" has lost its end", what, box->name, box->text);
    }
}
