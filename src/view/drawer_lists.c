/* What the drawer's buttons add, copy and remove: feeds, struts, the subreflector, the site. Pure
 * changes of a design; the drawer tries them. */
#include "view/state.h"

#include "base/text.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

static bool is_taken(const ev_design *design, bool feed, const char *name)
{
    int count = feed ? design->feed_count : design->strut_count;
    for (int i = 0; i < count; ++i) {
        if (strcmp(feed ? design->feeds[i].name : design->struts[i].name, name) == 0) {
            return true;
        }
    }
    return false;
}

/* "legs", "legs_2", "legs_3": the first that is free. */
static void choose_name(const ev_design *design, bool feed, char name[EV_NAME_CAPACITY])
{
    char stem[EV_NAME_CAPACITY - 12]; /* leaves room for the number */
    ev_text_copy(stem, sizeof stem, name);
    char *mark = strrchr(stem, '_');
    if (mark && mark[1] && strspn(mark + 1, "0123456789") == strlen(mark + 1)) {
        *mark = '\0';
    }
    for (int i = 2; is_taken(design, feed, name); ++i) {
        snprintf(name, EV_NAME_CAPACITY, "%s_%d", stem, i);
    }
}

static bool add_feed(ev_design *design, ev_feed_design feed)
{
    if (design->feed_count >= EV_FEED_CAPACITY) {
        return false;
    }
    choose_name(design, true, feed.name);
    design->feeds[design->feed_count++] = feed;
    return true;
}

static bool add_strut(ev_design *design, ev_strut_design strut)
{
    if (design->strut_count >= EV_STRUT_CAPACITY) {
        return false;
    }
    choose_name(design, false, strut.name);
    design->struts[design->strut_count++] = strut;
    return true;
}

/* Over the lit part of this dish, whatever its size. */
static ev_strut_design fitting_strut(const ev_design *design)
{
    ev_strut_design strut = ev_default_strut();
    strut.to = 0.5 * design->main.diameter;
    strut.from = 0.1 * strut.to;
    return strut;
}

/* Four fifths of the way from the prime focus to the vertex. */
static ev_sub_design fitting_sub(const ev_design *design)
{
    ev_sub_design sub = ev_default_sub();
    sub.interfocal = 0.8 * design->main.focal_length;
    return sub;
}

static bool add(ev_design *design, const char *what)
{
    if (strcmp(what, "sub") == 0) {
        design->sub = fitting_sub(design);
        return true;
    }
    if (strcmp(what, "site") == 0) {
        design->site = ev_default_site();
        return true;
    }
    return strcmp(what, "feed") == 0 ? add_feed(design, ev_default_feed())
                                     : add_strut(design, fitting_strut(design));
}

static bool copy(ev_design *design, bool feed, int index)
{
    return feed ? add_feed(design, design->feeds[index]) : add_strut(design, design->struts[index]);
}

static void remove_member(ev_design *design, bool feed, int index)
{
    size_t after = (size_t)((feed ? design->feed_count : design->strut_count) - index - 1);
    if (feed) {
        memmove(&design->feeds[index], &design->feeds[index + 1], after * sizeof design->feeds[0]);
        design->feeds[--design->feed_count] = (ev_feed_design){0};
    } else {
        memmove(&design->struts[index], &design->struts[index + 1],
                after * sizeof design->struts[0]);
        design->struts[--design->strut_count] = (ev_strut_design){0};
    }
}

static bool take_away(ev_design *design, const char *what)
{
    if (strcmp(what, "sub") == 0) {
        design->sub = (ev_sub_design){0};
    } else {
        design->site = (ev_site_design){0};
    }
    return true;
}

/* "copy.feed.1" is a verb, a kind and for members an index. */
bool ev_lists_change(ev_design *design, const char *button, char words[EV_WORDS_CAPACITY])
{
    char verb[12] = "", what[12] = "";
    int index = -1;
    int got = sscanf(button, "%11[a-z].%11[a-z].%d", verb, what, &index);
    bool feed = strcmp(what, "feed") == 0, done = false;
    int count = feed ? design->feed_count : design->strut_count;
    if (got == 3 && (index < 0 || index >= count)) {
        return false;
    }
    if (strcmp(verb, "add") == 0) {
        done = add(design, what);
    } else if (strcmp(verb, "copy") == 0 && got == 3) {
        done = copy(design, feed, index);
    } else if (strcmp(verb, "remove") == 0 && got == 3) {
        remove_member(design, feed, index);
        done = true;
    } else if (strcmp(verb, "remove") == 0) {
        done = take_away(design, what);
    }
    snprintf(words, EV_WORDS_CAPACITY, "%s %s", verb,
             strcmp(what, "sub") == 0     ? "subreflector"
             : strcmp(what, "strut") == 0 ? "struts"
                                          : what);
    ev_design_resolve(design);
    return done;
}
