/* Addresses, and getting and setting by row. Called by --set, sweeps, the window's fields and
 * `explain`; knows nothing of files. */
#include "scene/parameter.h"

#include "base/message.h"
#include "base/text.h"
#include "scene/field.h"
#include "scene/value.h"

#include <math.h>
#include <string.h>

int ev_parameter_count(void)
{
    return ev_parameter_table_count;
}

const ev_parameter *ev_parameter_at(int index)
{
    return &ev_parameter_table[index];
}

void ev_parameter_address(const ev_design *design, ev_parameter_ref ref, char *address, size_t size)
{
    const ev_section *section = ev_section_of(ref.parameter);
    if (section->is_list)
        snprintf(address, size, "%s.%s%s", section->key,
                 ev_section_entry_name(design, section, ref.index),
                 ref.parameter->name + strlen(section->prefix));
    else
        ev_text_copy(address, size, ref.parameter->name);
}

static bool find_exactly(const ev_design *design, int selected_feed, const char *address,
                         ev_parameter_ref *ref)
{
    for (int i = 0; i < ev_parameter_table_count; i++) {
        const ev_parameter *row = &ev_parameter_table[i];
        const ev_section *section = ev_section_of(row);
        int entries = ev_section_entries(design, section);
        int selected = section->owner == EV_OWNER_FEED && selected_feed > 0 ? selected_feed : 0;
        if (strcmp(row->name, address) == 0 && selected < entries) {
            *ref = (ev_parameter_ref){row, selected};
            return true;
        }
        for (int entry = 0; section->is_list && entry < entries; entry++) {
            char own[EV_ADDRESS_CAPACITY];
            *ref = (ev_parameter_ref){row, entry};
            ev_parameter_address(design, *ref, own, sizeof own);
            if (strcmp(own, address) == 0)
                return true;
        }
    }
    return false;
}

/* Offered as written: "feed..." to those who wrote that, full names to the others. */
static void find_nearest(const ev_design *design, const char *address, char *nearest)
{
    ev_nearest best = {0};
    for (int i = 0; i < ev_parameter_table_count; i++) {
        const ev_parameter *row = &ev_parameter_table[i];
        const ev_section *section = ev_section_of(row);
        int entries = ev_section_entries(design, section);
        if (entries > 0)
            ev_nearest_offer(&best, address, row->name);
        for (int entry = 0; section->is_list && entry < entries; entry++) {
            char own[EV_ADDRESS_CAPACITY];
            ev_parameter_address(design, (ev_parameter_ref){row, entry}, own, sizeof own);
            ev_nearest_offer(&best, address, own);
        }
    }
    ev_text_copy(nearest, EV_ADDRESS_CAPACITY, best.word);
}

bool ev_parameter_find(const ev_design *design, int selected_feed, const char *address,
                       ev_parameter_ref *ref, char *nearest)
{
    if (find_exactly(design, selected_feed, address, ref))
        return true;
    *ref = (ev_parameter_ref){NULL, 0};
    if (nearest)
        find_nearest(design, address, nearest);
    return false;
}

static const void *owner_of(const ev_design *design, ev_parameter_ref ref)
{
    return ev_section_owner_const(design, ev_section_of(ref.parameter), ref.index);
}

double ev_parameter_get(const ev_design *design, ev_parameter_ref ref)
{
    return ev_row_get(owner_of(design, ref), ref.parameter);
}

bool ev_parameter_is_derived(const ev_design *design, ev_parameter_ref ref)
{
    return ev_row_is_derived(owner_of(design, ref), ref.parameter);
}

void ev_parameter_set(ev_design *design, ev_parameter_ref ref, double value)
{
    void *owner = ev_section_owner(design, ev_section_of(ref.parameter), ref.index);
    if (ref.parameter->kind == EV_VALUE_TEXT || isnan(value))
        return;
    if (ref.parameter->kind != EV_VALUE_NUMBER)
        value = round(value);
    ev_row_put(owner, ref.parameter, fmin(fmax(value, ref.parameter->low), ref.parameter->high));
    ev_row_choose(owner, ref.parameter);
    ev_design_settle(design);
    ev_design_resolve(design);
}

/* A feed renamed to its neighbour's name could not be addressed any more. */
static bool name_is_free(const ev_design *design, ev_parameter_ref ref, const char *text,
                         ev_diagnostics *diagnostics)
{
    const ev_section *section = ev_section_of(ref.parameter);
    ev_field field = ev_field_of(ref.parameter);
    if (!section->is_list || strcmp(field.key, "name") != 0)
        return true;
    for (int i = 0; i < ev_section_entries(design, section); i++) {
        if (i != ref.index && strcmp(ev_section_entry_name(design, section, i), text) == 0) {
            ev_report(diagnostics, EV_SEVERITY_ERROR, name_twice, NULL, text, section->key);
            return false;
        }
    }
    return true;
}

bool ev_parameter_set_text(ev_design *design, ev_parameter_ref ref, const char *text,
                           ev_diagnostics *diagnostics)
{
    ev_spot typed = {NULL, NULL};
    double value;
    if (ref.parameter->kind == EV_VALUE_TEXT) {
        void *owner = ev_section_owner(design, ev_section_of(ref.parameter), ref.index);
        return name_is_free(design, ref, text, diagnostics) &&
               ev_value_set_text(owner, ref.parameter, text, typed, diagnostics);
    }
    if (!ev_value_read(ref.parameter, text, typed, diagnostics, &value))
        return false;
    ev_design trial = *design;
    ev_parameter_set(&trial, ref, value);
    if (ev_parameter_is_derived(&trial, ref)) { /* settled away: the pattern has no such number */
        ev_report(diagnostics, EV_SEVERITY_ERROR, exponent_on_gaussian, NULL, text);
        return false;
    }
    *design = trial;
    return true;
}

void ev_parameter_format(const ev_design *design, ev_parameter_ref ref, char *digits,
                         size_t digits_size, char *unit, size_t unit_size)
{
    const ev_parameter *row = ref.parameter;
    unit[0] = 0;
    if (row->kind == EV_VALUE_TEXT)
        ev_text_copy(digits, digits_size, ev_row_text(owner_of(design, ref), row));
    else if (row->kind == EV_VALUE_NUMBER)
        ev_quantity_format(row->quantity, ev_parameter_get(design, ref), digits, digits_size, unit,
                           unit_size);
    else
        ev_row_write(row, ev_parameter_get(design, ref), "", digits, digits_size);
}
