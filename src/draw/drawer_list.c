/* The list of the drawer: groups in the order of the parameter table, feeds and struts one group
 * each. Called by the drawer; draws nothing. */
#include "draw/drawer_list.h"

#include <ctype.h>
#include <math.h>
#include <stdio.h>
#include <string.h>

static const double row_height = 24.0, head_height = 42.0, button_height = 30.0;

static bool is(const ev_parameter *row, const char *name)
{
    return strcmp(row->name, name) == 0;
}

static bool starts(const ev_parameter *row, const char *start)
{
    return strncmp(row->name, start, strlen(start)) == 0;
}

static bool feed_row_applies(const ev_feed_design *feed, const ev_parameter *row)
{
    if (is(row, "feed.exponent"))
        return feed->pattern == EV_PATTERN_COS_POWER;
    if (is(row, "feed.edge_taper"))
        return feed->pattern != EV_PATTERN_TABLE;
    if (is(row, "feed.table"))
        return feed->pattern == EV_PATTERN_TABLE;
    if (starts(row, "feed.aim."))
        return feed->aim == EV_AIM_DIRECTION;
    if (starts(row, "feed.toward."))
        return !feed->toward_peak;
    return true;
}

bool ev_row_applies(const ev_design *design, ev_parameter_ref ref)
{
    bool is_offset = design->main.offset != 0.0;
    switch (ref.parameter->owner) {
    case EV_OWNER_DESIGN:
        return !is(ref.parameter, "main.depth") || !is_offset;
    case EV_OWNER_SUB:
        return design->sub.present && (!is(ref.parameter, "sub.axis_tilt") || is_offset);
    case EV_OWNER_FEED:
        return feed_row_applies(&design->feeds[ref.index], ref.parameter);
    case EV_OWNER_STRUT:
        return true;
    case EV_OWNER_SITE:
        return design->site.present;
    }
    return true;
}

static bool holds_word(const char *text, const char *word, size_t length)
{
    for (; *text; ++text) {
        size_t i = 0;
        while (i < length && tolower((unsigned char)text[i]) == tolower((unsigned char)word[i]))
            ++i;
        if (i == length)
            return true;
    }
    return false;
}

bool ev_search_matches(const char *search, const char *text)
{
    for (;;) {
        search += strspn(search, " \t");
        size_t length = strcspn(search, " \t");
        if (length == 0)
            return true;
        if (!holds_word(text, search, length))
            return false;
        search += length;
    }
}

/* A group: rows of one owner whose name starts so; `index` of which feed or strut. */
typedef struct group {
    char title[80];
    const char *start;
    ev_owner owner;
    int index;
    char button[2][24];
} group;

static ev_drawer_item *add_item(ev_drawer_list *list, ev_item_kind kind, double height)
{
    if (list->count == EV_DRAWER_CAPACITY)
        return NULL;
    ev_drawer_item *item = &list->items[list->count++];
    memset(item, 0, sizeof *item);
    item->kind = kind;
    item->y = list->height;
    item->height = height;
    list->height += height;
    return item;
}

static void add_button(ev_drawer_list *list, const char *search, const char *name,
                       const char *title)
{
    ev_drawer_item *item =
        ev_search_matches(search, title) ? add_item(list, EV_ITEM_BUTTON, button_height) : NULL;
    if (!item)
        return;
    snprintf(item->title, sizeof item->title, "%s", title);
    snprintf(item->button[0], sizeof item->button[0], "%s", name);
}

static bool belongs(const ev_parameter *row, const group *g)
{
    if (row->owner != g->owner)
        return false;
    if (g->start[0])
        return starts(row, g->start);
    return !strchr(row->name, '.'); /* the top of the file */
}

static bool is_found(const ev_parameter *row, const group *g, const char *search)
{
    char text[512];
    snprintf(text, sizeof text, "%s %s %s %s", g->title, row->label, row->name, row->meaning);
    return ev_search_matches(search, text);
}

/* Rivals stand next to each other in the table; two of three do as well. */
static bool are_rivals(const ev_parameter *a, const ev_parameter *b)
{
    if (a->of_three && b->of_three)
        return true;
    return a->choice && b->choice && strcmp(a->choice, b->choice) == 0;
}

static void add_row(ev_drawer_list *list, const ev_design *design, ev_parameter_ref ref)
{
    ev_drawer_item *item = add_item(list, EV_ITEM_ROW, row_height);
    if (!item)
        return;
    item->ref = ref;
    item->is_derived = ev_parameter_is_derived(design, ref);
    ev_drawer_item *before = item - 1;
    if (before->kind == EV_ITEM_ROW && are_rivals(before->ref.parameter, ref.parameter))
        before->joins = before->joins_next = item->joins = true;
}

static void add_group(ev_drawer_list *list, const ev_design *design, const char *search,
                      const group *g)
{
    bool has_head = false;
    for (int i = 0; i < ev_parameter_count(); ++i) {
        const ev_parameter *row = ev_parameter_at(i);
        ev_parameter_ref ref = {row, g->index};
        if (!belongs(row, g) || !ev_row_applies(design, ref) || !is_found(row, g, search))
            continue;
        ev_drawer_item *head = has_head ? NULL : add_item(list, EV_ITEM_HEAD, head_height);
        if (head) {
            memcpy(head->title, g->title, sizeof head->title);
            memcpy(head->button, g->button, sizeof head->button);
        }
        has_head = true;
        add_row(list, design, ref);
    }
}

static void add_members(ev_drawer_list *list, const ev_design *design, const char *search,
                        ev_owner owner)
{
    bool is_feed = owner == EV_OWNER_FEED;
    const char *word = is_feed ? "feed" : "strut";
    int count = is_feed ? design->feed_count : design->strut_count;
    int capacity = is_feed ? EV_FEED_CAPACITY : EV_STRUT_CAPACITY;
    for (int i = 0; i < count; ++i) {
        group g = {.start = is_feed ? "feed." : "strut.", .owner = owner, .index = i};
        snprintf(g.title, sizeof g.title, "%s \u201c%s\u201d", is_feed ? "Feed" : "Struts",
                 is_feed ? design->feeds[i].name : design->struts[i].name);
        if (count < capacity)
            snprintf(g.button[0], sizeof g.button[0], "copy.%s.%d", word, i);
        if (!is_feed || count > 1)
            snprintf(g.button[1], sizeof g.button[1], "remove.%s.%d", word, i);
        add_group(list, design, search, &g);
    }
    if (count < capacity)
        add_button(list, search, is_feed ? "add.feed" : "add.strut",
                   is_feed ? "add a feed" : "add struts");
}

void ev_drawer_list_make(const ev_design *design, const char *search, ev_drawer_list *list)
{
    list->count = 0;
    list->height = 0.0;
    add_group(list, design, search, &(group){"Antenna", "", EV_OWNER_DESIGN, 0, {"", ""}});
    add_group(list, design, search, &(group){"Dish", "main.", EV_OWNER_DESIGN, 0, {"", ""}});
    add_group(list, design, search,
              &(group){"Subreflector", "sub.", EV_OWNER_SUB, 0, {"", "remove.sub"}});
    if (!design->sub.present)
        add_button(list, search, "add.sub", "add a subreflector");
    add_members(list, design, search, EV_OWNER_FEED);
    add_members(list, design, search, EV_OWNER_STRUT);
    add_group(list, design, search,
              &(group){"Site", "site.", EV_OWNER_SITE, 0, {"", "remove.site"}});
    if (!design->site.present)
        add_button(list, search, "add.site", "add a site");
    add_group(list, design, search, &(group){"Losses", "losses.", EV_OWNER_DESIGN, 0, {"", ""}});
}

int ev_drawer_rows(const ev_design *design, const char *search,
                   ev_parameter_ref rows[EV_DRAWER_CAPACITY])
{
    ev_drawer_list list;
    int count = 0;
    ev_drawer_list_make(design, search, &list);
    for (int i = 0; i < list.count; ++i)
        if (list.items[i].kind == EV_ITEM_ROW)
            rows[count++] = list.items[i].ref;
    return count;
}
