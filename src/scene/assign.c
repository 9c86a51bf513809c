/* "name=value" on a design. Called by scene.c for --set and scripts. Whole fields ([x, y, z]) go
 * the way the reader goes, single rows the way a typed field goes. */
#include "scene/assign.h"

#include "base/message.h"
#include "base/text.h"
#include "scene/value.h"

#include <stdlib.h>
#include <string.h>

/* Copies without the blanks around it. */
static bool copy_trimmed(char *to, size_t size, const char *from, size_t length)
{
    while (length > 0 && strchr(" \t", from[0])) {
        from++;
        length--;
    }
    while (length > 0 && strchr(" \t", from[length - 1]))
        length--;
    if (length >= size)
        length = size - 1;
    memcpy(to, from, length);
    to[length] = 0;
    return length > 0;
}

/* A section that is not there: a site appears when one of its values is set, a subreflector when
 * its shape is. */
static bool make_present(ev_design *design, const char *address, ev_diagnostics *diagnostics)
{
    size_t length = strcspn(address, ".");
    for (int i = 1; i < ev_section_count(); i++) {
        const ev_section *section = ev_section_at(i);
        if (strlen(section->prefix) != length || memcmp(section->prefix, address, length) != 0 ||
            ev_section_entries(design, section) > 0)
            continue;
        if (section->is_list) {
            ev_report(diagnostics, EV_SEVERITY_ERROR, entry_absent, NULL, address, section->key);
            return false;
        }
        if (section->owner == EV_OWNER_SUB && strcmp(address, "sub.shape") != 0) {
            ev_report(diagnostics, EV_SEVERITY_ERROR, sub_absent, NULL, address);
            return false;
        }
        ev_section_append(design, section);
    }
    return true;
}

static bool assign_list(ev_design *design, ev_parameter_ref ref, const ev_field *field,
                        const char *text, ev_diagnostics *diagnostics)
{
    ev_document *document = ev_document_parse(text, strlen(text), "", diagnostics);
    if (document == NULL)
        return false;
    void *owner = ev_section_owner(design, field->section, ref.index);
    bool read = ev_field_read(owner, field, (ev_spot){document, document->root}, diagnostics);
    ev_document_destroy(document);
    ev_design_resolve(design);
    return read;
}

static bool assign_value(ev_design *design, int selected_feed, const char *address,
                         const char *text, ev_diagnostics *diagnostics)
{
    char first_part[EV_ADDRESS_CAPACITY + 2], nearest[EV_ADDRESS_CAPACITY], wanted[300];
    ev_parameter_ref ref;
    bool is_row = ev_parameter_find(design, selected_feed, address, &ref, nearest);
    snprintf(first_part, sizeof first_part, "%s.x", address);
    if (!is_row && !ev_parameter_find(design, selected_feed, first_part, &ref, NULL)) {
        ev_report(diagnostics, EV_SEVERITY_ERROR, address_unknown, NULL, address, nearest);
        return false;
    }
    ev_field field = ev_field_of(ref.parameter);
    bool is_part = is_row && ref.parameter != field.word;
    if (text[0] == '[' && !is_part && ref.parameter->kind != EV_VALUE_TEXT)
        return assign_list(design, ref, &field, text, diagnostics);
    if (is_row)
        return ev_parameter_set_text(design, ref, text, diagnostics);
    ev_field_describe(&field, wanted, sizeof wanted);
    ev_report(diagnostics, EV_SEVERITY_ERROR, not_value, NULL, address, wanted, text);
    return false;
}

bool ev_design_assign(ev_design *design, int selected_feed, const char *assignment,
                      ev_diagnostics *diagnostics)
{
    char address[EV_ADDRESS_CAPACITY], text[EV_CANONICAL_CAPACITY];
    const char *equals = strchr(assignment, '=');
    size_t length = equals ? (size_t)(equals - assignment) : 0;
    if (!copy_trimmed(address, sizeof address, assignment, length)) {
        char shown[EV_ADDRESS_CAPACITY];
        ev_text_copy(shown, sizeof shown, assignment);
        ev_report(diagnostics, EV_SEVERITY_ERROR, assignment_form, NULL, shown,
                  "feed.defocus=5 mm");
        return false;
    }
    copy_trimmed(text, sizeof text, equals + 1, strlen(equals + 1));
    ev_design trial = *design;
    if (!make_present(&trial, address, diagnostics) ||
        !assign_value(&trial, selected_feed, address, text, diagnostics))
        return false;
    *design = trial;
    return true;
}
