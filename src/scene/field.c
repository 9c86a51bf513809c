/* Sections and fields of the scene format, and the access to members by row. Called by everything
 * in this folder; the only file that touches a design by offset. */
#include "scene/field.h"

#include "base/text.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

static const ev_section sections[] = {
    {"", "", EV_OWNER_DESIGN, false, false},
    {"main", "main", EV_OWNER_DESIGN, false, false},
    {"sub", "sub", EV_OWNER_SUB, false, true},
    {"feed", "feeds", EV_OWNER_FEED, true, false},
    {"strut", "struts", EV_OWNER_STRUT, true, false},
    {"site", "site", EV_OWNER_SITE, false, true},
    {"losses", "losses", EV_OWNER_DESIGN, false, false},
};

int ev_section_count(void)
{
    return sizeof sections / sizeof sections[0];
}

const ev_section *ev_section_at(int index)
{
    return &sections[index];
}

/* Length of the section's part of a row's name. */
static size_t measure_prefix(const char *name)
{
    const char *dot = strchr(name, '.');
    return dot ? (size_t)(dot - name) : 0;
}

const ev_section *ev_section_of(const ev_parameter *row)
{
    size_t length = measure_prefix(row->name);
    for (int i = 1; i < ev_section_count(); i++) {
        if (strlen(sections[i].prefix) == length &&
            memcmp(sections[i].prefix, row->name, length) == 0)
            return &sections[i];
    }
    return &sections[0];
}

int ev_section_capacity(const ev_section *section)
{
    switch (section->owner) {
    case EV_OWNER_FEED:
        return EV_FEED_CAPACITY;
    case EV_OWNER_STRUT:
        return EV_STRUT_CAPACITY;
    default:
        return 1;
    }
}

int ev_section_entries(const ev_design *design, const ev_section *section)
{
    switch (section->owner) {
    case EV_OWNER_SUB:
        return design->sub.present;
    case EV_OWNER_FEED:
        return design->feed_count;
    case EV_OWNER_STRUT:
        return design->strut_count;
    case EV_OWNER_SITE:
        return design->site.present;
    case EV_OWNER_DESIGN:
        break;
    }
    return 1;
}

void *ev_section_owner(ev_design *design, const ev_section *section, int index)
{
    switch (section->owner) {
    case EV_OWNER_SUB:
        return &design->sub;
    case EV_OWNER_FEED:
        return &design->feeds[index];
    case EV_OWNER_STRUT:
        return &design->struts[index];
    case EV_OWNER_SITE:
        return &design->site;
    case EV_OWNER_DESIGN:
        break;
    }
    return design;
}

const void *ev_section_owner_const(const ev_design *design, const ev_section *section, int index)
{
    return ev_section_owner((ev_design *)design, section, index);
}

void *ev_section_append(ev_design *design, const ev_section *section)
{
    switch (section->owner) {
    case EV_OWNER_SUB:
        design->sub = ev_default_sub();
        break;
    case EV_OWNER_FEED:
        design->feeds[design->feed_count++] = ev_default_feed();
        break;
    case EV_OWNER_STRUT:
        design->struts[design->strut_count++] = ev_default_strut();
        break;
    case EV_OWNER_SITE:
        design->site = ev_default_site();
        break;
    case EV_OWNER_DESIGN:
        break;
    }
    return ev_section_owner(design, section, ev_section_entries(design, section) - 1);
}

const char *ev_section_entry_name(const ev_design *design, const ev_section *section, int index)
{
    if (section->owner == EV_OWNER_FEED)
        return design->feeds[index].name;
    return section->owner == EV_OWNER_STRUT ? design->struts[index].name : "";
}

/* "shift.x" is a part of the key "shift". */
static bool is_part(const char *member)
{
    size_t length = strlen(member);
    return length > 2 && member[length - 2] == '.' && strchr("xyz", member[length - 1]);
}

static const char *member_name(const ev_parameter *row)
{
    size_t prefix = measure_prefix(row->name);
    return prefix > 0 ? row->name + prefix + 1 : row->name;
}

static void read_key(const ev_parameter *row, char *key)
{
    ev_text_copy(key, EV_KEY_CAPACITY, member_name(row));
    if (is_part(key))
        key[strlen(key) - 2] = 0;
}

bool ev_field_next(const ev_section *section, int *cursor, ev_field *field)
{
    while (*cursor < ev_parameter_table_count &&
           ev_section_of(&ev_parameter_table[*cursor]) != section)
        ++*cursor;
    if (*cursor >= ev_parameter_table_count)
        return false;
    *field = (ev_field){.section = section};
    read_key(&ev_parameter_table[*cursor], field->key);
    for (; *cursor < ev_parameter_table_count; ++*cursor) {
        const ev_parameter *row = &ev_parameter_table[*cursor];
        char key[EV_KEY_CAPACITY];
        read_key(row, key);
        if (ev_section_of(row) != section || strcmp(key, field->key) != 0)
            break;
        if (is_part(member_name(row)))
            field->part[field->part_count++] = row;
        else
            field->word = row;
    }
    return true;
}

bool ev_field_find(const ev_section *section, const char *key, ev_field *field)
{
    int cursor = 0;
    while (ev_field_next(section, &cursor, field)) {
        if (strcmp(field->key, key) == 0)
            return true;
    }
    return false;
}

ev_field ev_field_of(const ev_parameter *row)
{
    ev_field field = {0};
    char key[EV_KEY_CAPACITY];
    read_key(row, key);
    ev_field_find(ev_section_of(row), key, &field);
    return field;
}

static const void *member_of(const void *owner, const ev_parameter *row)
{
    return (const char *)owner + row->offset;
}

double ev_row_get(const void *owner, const ev_parameter *row)
{
    const void *member = member_of(owner, row);
    if (row->kind == EV_VALUE_NUMBER) {
        double value;
        memcpy(&value, member, sizeof value);
        return value;
    }
    if (row->size == sizeof(bool)) {
        bool value;
        memcpy(&value, member, sizeof value);
        return value;
    }
    int value = 0;
    if (row->kind != EV_VALUE_TEXT)
        memcpy(&value, member, sizeof value);
    return value;
}

void ev_row_put(void *owner, const ev_parameter *row, double value)
{
    void *member = (char *)owner + row->offset;
    if (row->kind == EV_VALUE_NUMBER) {
        memcpy(member, &value, sizeof value);
    } else if (row->size == sizeof(bool)) {
        bool flag = value != 0.0;
        memcpy(member, &flag, sizeof flag);
    } else if (row->kind != EV_VALUE_TEXT) {
        int whole = (int)value;
        memcpy(member, &whole, sizeof whole);
    }
}

const char *ev_row_text(const void *owner, const ev_parameter *row)
{
    return member_of(owner, row);
}

int ev_row_list_count(const void *owner, const ev_parameter *row)
{
    int count;
    memcpy(&count, (const char *)owner + row->list_count_offset, sizeof count);
    return count;
}

/* Of the three of a subreflector the one set holds, and so does the one of the others that was
 * given later; `older` remembers which that is not. */
static void choose_of_three(ev_sub_design *sub, ev_sub_derived chosen)
{
    if (sub->older == sub->derived)
        sub->older =
            sub->derived == EV_DERIVED_INTERFOCAL ? EV_DERIVED_DIAMETER : EV_DERIVED_INTERFOCAL;
    if (chosen == sub->derived) {
        ev_sub_derived dropped = sub->older;
        sub->older = (ev_sub_derived)(3 - (int)chosen - (int)dropped);
        sub->derived = dropped;
    } else {
        sub->older = (ev_sub_derived)(3 - (int)chosen - (int)sub->derived);
    }
}

double ev_row_list_get(const void *owner, const ev_parameter *row, int index)
{
    double value;
    memcpy(&value, (const char *)member_of(owner, row) + (size_t)index * sizeof value,
           sizeof value);
    return value;
}

void ev_row_choose(void *owner, const ev_parameter *row)
{
    if (row->choice)
        memcpy((char *)owner + row->given_offset, &row->given, sizeof row->given);
    if (row->of_three)
        choose_of_three(owner, (ev_sub_derived)(row->of_three - 1));
    ev_field field = ev_field_of(row);
    if (field.word && field.word != row) {
        for (int i = 0; field.word->words[i]; i++) {
            if (strcmp(field.word->words[i], EV_WORD_DIRECTION) == 0)
                ev_row_put(owner, field.word, i);
        }
    }
}

bool ev_row_is_derived(const void *owner, const ev_parameter *row)
{
    int given = row->given;
    if (row->choice)
        memcpy(&given, (const char *)owner + row->given_offset, sizeof given);
    if (given != row->given)
        return true;
    return row->of_three && ((const ev_sub_design *)owner)->derived + 1 == (unsigned)row->of_three;
}

bool ev_field_is_vector(const void *owner, const ev_field *field)
{
    if (field->part_count == 0 || field->word == NULL)
        return field->part_count > 0;
    int choice = (int)ev_row_get(owner, field->word);
    return strcmp(field->word->words[choice], EV_WORD_DIRECTION) == 0;
}

void ev_design_settle(ev_design *design)
{
    for (int i = 0; i < design->feed_count; i++) {
        if (design->feeds[i].pattern == EV_PATTERN_GAUSSIAN)
            design->feeds[i].taper_given = EV_GIVEN_EDGE_TAPER;
    }
}

const char *ev_row_file_unit(const ev_parameter *row, double value)
{
    double size = fabs(value);
    if (row->kind != EV_VALUE_NUMBER)
        return "";
    switch (row->quantity) {
    case EV_QUANTITY_LENGTH:
        return size < 1.0 ? "mm" : "m";
    case EV_QUANTITY_FREQUENCY:
        return size < 1e9 ? "MHz" : "GHz";
    case EV_QUANTITY_ANGLE:
        return "deg";
    case EV_QUANTITY_LEVEL:
        return "dB";
    case EV_QUANTITY_TEMPERATURE:
        return "K";
    case EV_QUANTITY_NUMBER:
    case EV_QUANTITY_COUNT:
        break;
    }
    return "";
}

void ev_row_write(const ev_parameter *row, double value, const char *unit, char *text, size_t size)
{
    if (row->kind == EV_VALUE_CHOICE)
        ev_text_copy(text, size, row->words[(int)value]);
    else if (row->kind == EV_VALUE_COUNT)
        snprintf(text, size, "%d", (int)value);
    else
        ev_quantity_write(row->quantity, value, unit, text, size);
}

/* Bits, not spelling, decide; there is one zero. */
static void add_canonical(double value, char *text, size_t size)
{
    size_t length = strlen(text);
    snprintf(text + length, size - length, "%s%a", length ? " " : "", value + 0.0);
}

void ev_field_canonical(const void *owner, const ev_field *field, char *text, size_t size)
{
    const ev_parameter *row = field->word;
    text[0] = 0;
    if (ev_field_is_vector(owner, field)) {
        for (int i = 0; i < field->part_count; i++)
            add_canonical(ev_row_get(owner, field->part[i]), text, size);
    } else if (row->kind == EV_VALUE_TEXT) {
        snprintf(text, size, "=%s", ev_row_text(owner, row));
    } else if (row->list_capacity > 0) {
        for (int i = 0; i < ev_row_list_count(owner, row); i++)
            add_canonical(ev_row_list_get(owner, row, i), text, size);
    } else if (!ev_row_is_derived(owner, row)) {
        add_canonical(ev_row_get(owner, row), text, size);
    }
}

static bool owners_same(const void *a, const void *b, const ev_section *section)
{
    int cursor = 0;
    ev_field field;
    while (ev_field_next(section, &cursor, &field)) {
        char text_a[EV_CANONICAL_CAPACITY], text_b[EV_CANONICAL_CAPACITY];
        ev_field_canonical(a, &field, text_a, sizeof text_a);
        ev_field_canonical(b, &field, text_b, sizeof text_b);
        if (strcmp(text_a, text_b) != 0)
            return false;
    }
    return true;
}

bool ev_design_same(const ev_design *a, const ev_design *b)
{
    for (int i = 0; i < ev_section_count(); i++) {
        int count = ev_section_entries(a, &sections[i]);
        if (count != ev_section_entries(b, &sections[i]))
            return false;
        for (int entry = 0; entry < count; entry++) {
            if (!owners_same(ev_section_owner_const(a, &sections[i], entry),
                             ev_section_owner_const(b, &sections[i], entry), &sections[i]))
                return false;
        }
    }
    return true;
}
