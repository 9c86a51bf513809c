/* YAML text for values. Called by writer.c, for splices and for whole documents. */
#include "scene/emit.h"

#include <string.h>

/* What may stand without quotes, in the strictest reading of YAML 1.2. */
static bool is_plain(const char *text, bool in_flow)
{
    size_t length = strlen(text);
    if (length == 0 || strchr("-?:,[]{}#&*!|>'\"%@` \t=.", text[0]) || text[length - 1] == ' ' ||
        text[length - 1] == ':')
        return false;
    if (strstr(text, ": ") || strstr(text, " #") || (in_flow && strpbrk(text, ",[]{}:")))
        return false;
    for (const char *at = text; *at; at++) {
        if ((unsigned char)*at < 0x20 || (unsigned char)*at == 0x7F)
            return false;
    }
    /* line breaks of other kinds (U+0085, U+2028, U+2029) and the byte order mark */
    return !strstr(text, "\u2028") && !strstr(text, "\u2029") && !strstr(text, "\uFEFF") &&
           !strstr(text, "\xC2\x85");
}

void ev_emit_text(ev_buffer *buffer, const char *text, bool in_flow, bool quoted)
{
    static const struct {
        const char *bytes, *escape;
    } special[] = {{"\\", "\\\\"},    {"\"", "\\\""},    {"\n", "\\n"},
                   {"\r", "\\r"},     {"\t", "\\t"},     {"\xC2\x85", "\\N"},
                   {"\u2028", "\\L"}, {"\u2029", "\\P"}, {"\uFEFF", "\\uFEFF"}};
    if (!quoted && is_plain(text, in_flow)) {
        ev_buffer_add(buffer, text, strlen(text));
        return;
    }
    ev_buffer_add(buffer, "\"", 1);
    while (*text) {
        size_t i = 0, count = sizeof special / sizeof special[0];
        while (i < count && strncmp(text, special[i].bytes, strlen(special[i].bytes)) != 0)
            i++;
        if (i < count)
            ev_buffer_format(buffer, "%s", special[i].escape);
        else if ((unsigned char)*text < 0x20 || (unsigned char)*text == 0x7F)
            ev_buffer_format(buffer, "\\x%02X", (unsigned)(unsigned char)*text);
        else
            ev_buffer_add(buffer, text, 1);
        text += i < count ? strlen(special[i].bytes) : 1;
    }
    ev_buffer_add(buffer, "\"", 1);
}

/* A text that reads as a quantity needs no quotes anywhere. */
static bool says(const ev_spelling *spelling, const ev_parameter *row, double value)
{
    double read;
    return row->kind == EV_VALUE_NUMBER && spelling->value == value &&
           ev_quantity_parse(row->quantity, spelling->text, &read, NULL) == EV_PARSE_OK &&
           read == value;
}

void ev_emit_row(ev_buffer *buffer, const ev_emitter *emitter, const ev_parameter *row,
                 double value, const char *unit_from)
{
    char address[EV_ADDRESS_CAPACITY], unit[16] = "", text[128];
    ev_parameter_address(emitter->design, (ev_parameter_ref){row, emitter->index}, address,
                         sizeof address);
    for (const ev_spelling *s = emitter->spellings; s; s = s->next) {
        if (strcmp(s->address, address) == 0 && says(s, row, value)) {
            ev_buffer_add(buffer, s->text, strlen(s->text));
            return;
        }
    }
    double read; /* "peak", or a length where an angle comes, has no unit to keep */
    if (unit_from && ev_quantity_parse(row->quantity, unit_from, &read, NULL) == EV_PARSE_OK)
        ev_quantity_unit_of(unit_from, unit, sizeof unit);
    ev_row_write(row, value, unit[0] ? unit : ev_row_file_unit(row, value), text, sizeof text);
    ev_buffer_add(buffer, text, strlen(text));
}

void ev_emit_field(ev_buffer *buffer, const ev_emitter *emitter, const ev_field *field,
                   const char *unit_from)
{
    const void *owner = ev_section_owner_const(emitter->design, field->section, emitter->index);
    const ev_parameter *row = field->word;
    if (ev_field_is_vector(owner, field)) {
        for (int i = 0; i < field->part_count; i++) {
            ev_buffer_format(buffer, "%s", i > 0 ? ", " : "[");
            ev_emit_row(buffer, emitter, field->part[i], ev_row_get(owner, field->part[i]),
                        unit_from);
        }
        ev_buffer_add(buffer, "]", 1);
    } else if (row->kind == EV_VALUE_TEXT) {
        ev_emit_text(buffer, ev_row_text(owner, row), emitter->in_flow, false);
    } else if (row->list_capacity == 0 || ev_row_list_count(owner, row) == 1) {
        ev_emit_row(buffer, emitter, row, ev_row_get(owner, row), unit_from);
    } else {
        for (int i = 0; i < ev_row_list_count(owner, row); i++) {
            ev_buffer_format(buffer, "%s", i > 0 ? ", " : "[");
            ev_emit_row(buffer, emitter, row, ev_row_list_get(owner, row, i), unit_from);
        }
        ev_buffer_add(buffer, "]", 1);
    }
}

static bool wants_field(const void *owner, const void *usual, const ev_field *field)
{
    char text[EV_CANONICAL_CAPACITY], usual_text[EV_CANONICAL_CAPACITY];
    ev_field_canonical(owner, field, text, sizeof text);
    ev_field_canonical(usual, field, usual_text, sizeof usual_text);
    if (text[0] == 0)
        return false;
    const ev_parameter *row = field->word;
    bool always = row && (row->required || row->of_three || strcmp(field->key, "name") == 0);
    return always || strcmp(text, usual_text) != 0;
}

void ev_emit_members(ev_buffer *buffer, const ev_emitter *emitter, const ev_section *section,
                     const char *join)
{
    ev_design usual = ev_default_design();
    usual.feed_count = usual.strut_count = 0;
    const void *usual_owner = ev_section_append(&usual, section);
    const void *owner = ev_section_owner_const(emitter->design, section, emitter->index);
    int cursor = 0, written = 0;
    ev_field field;
    while (ev_field_next(section, &cursor, &field)) {
        if (!wants_field(owner, usual_owner, &field))
            continue;
        ev_buffer_format(buffer, "%s%s: ", written++ ? join : "", field.key);
        ev_emit_field(buffer, emitter, &field, NULL);
    }
}
