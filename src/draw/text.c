/* Text that fits its place, and the cache that makes it cheap. Called by every region through
 * ev_text; knows nothing of antennas.
 *
 * Layouts are kept by what they say and how they are set, four ways in 256 sets, the oldest making
 * room; a page has about 200, and a drag changes a few digits of them. The cache belongs to its
 * thread, because Pango's objects do: a picture may be written beside the window. Metrics are not
 * hinted, so that a layout measures the same at every density and on paper. */
#include "base/text.h"
#include "draw/pen.h"

#include <math.h>
#include <pango/pangocairo.h>
#include <pthread.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

enum { CACHE_SETS = 256, CACHE_WAYS = 4 };

typedef struct text_layout {
    uint64_t hash, used;
    PangoLayout *layout;
    char *string;
    ev_font font;
    double limit; /* width in px, 0 for none */
    int lines;
    double width, height, baseline;
    int line_count;
} text_layout;

typedef struct text_cache {
    PangoFontMap *map;
    PangoContext *context;
    uint64_t clock;
    text_layout slots[CACHE_SETS][CACHE_WAYS];
} text_cache;

static pthread_key_t cache_key;
static pthread_once_t cache_once = PTHREAD_ONCE_INIT;

static void clear_layout(text_layout *slot)
{
    if (slot->layout)
        g_object_unref(slot->layout);
    free(slot->string);
    memset(slot, 0, sizeof *slot);
}

static void destroy_cache(void *data)
{
    text_cache *cache = data;
    for (int set = 0; set < CACHE_SETS; ++set)
        for (int way = 0; way < CACHE_WAYS; ++way)
            clear_layout(&cache->slots[set][way]);
    g_object_unref(cache->context);
    g_object_unref(cache->map);
    free(cache);
}

static void make_key(void)
{
    pthread_key_create(&cache_key, destroy_cache);
}

void ev_draw_release(void)
{
    pthread_once(&cache_once, make_key);
    text_cache *cache = pthread_getspecific(cache_key);
    if (!cache)
        return;
    pthread_setspecific(cache_key, NULL);
    destroy_cache(cache);
}

static text_cache *get_cache(void)
{
    pthread_once(&cache_once, make_key);
    text_cache *cache = pthread_getspecific(cache_key);
    if (cache)
        return cache;
    cache = ev_allocate(sizeof *cache);
    memset(cache, 0, sizeof *cache);
    cache->map = pango_cairo_font_map_new();
    cache->context = pango_font_map_create_context(cache->map);
    cairo_font_options_t *options = cairo_font_options_create();
    cairo_font_options_set_hint_metrics(options, CAIRO_HINT_METRICS_OFF);
    cairo_font_options_set_hint_style(options, CAIRO_HINT_STYLE_NONE);
    cairo_font_options_set_antialias(options, CAIRO_ANTIALIAS_GRAY);
    pango_cairo_context_set_font_options(cache->context, options);
    cairo_font_options_destroy(options);
    pango_context_set_round_glyph_positions(cache->context, FALSE);
    pthread_setspecific(cache_key, cache);
    return cache;
}

static uint64_t hash_bytes(uint64_t hash, const void *bytes, size_t size)
{
    const unsigned char *p = bytes;
    for (size_t i = 0; i < size; ++i)
        hash = (hash ^ p[i]) * 1099511628211u;
    return hash;
}

static uint64_t hash_layout(const ev_words *words, double size, double limit, int lines)
{
    uint64_t hash = hash_bytes(1469598103934665603u, words->string, strlen(words->string));
    hash = hash_bytes(hash, &words->font.display, sizeof words->font.display);
    hash = hash_bytes(hash, &words->font.weight, sizeof words->font.weight);
    hash = hash_bytes(hash, &size, sizeof size);
    hash = hash_bytes(hash, &limit, sizeof limit);
    hash = hash_bytes(hash, &lines, sizeof lines);
    hash = hash_bytes(hash, &words->line_height, sizeof words->line_height);
    for (int i = 0; i < words->bold_count; ++i)
        hash = hash_bytes(hash, words->bold[i], 2 * sizeof(int));
    return hash;
}

static PangoAttrList *make_attributes(const ev_words *words, double size)
{
    PangoAttrList *list = pango_attr_list_new();
    /* Digits of one width: proportional ones jitter while a number runs. */
    pango_attr_list_insert(list, pango_attr_font_features_new("tnum=1"));
    if (!words->font.display && size >= EV_LARGE_TYPE)
        pango_attr_list_insert(
            list, pango_attr_letter_spacing_new((int)(EV_LARGE_TRACKING * size * PANGO_SCALE)));
    for (int i = 0; i < words->bold_count; ++i) {
        PangoAttribute *bold = pango_attr_weight_new(PANGO_WEIGHT_SEMIBOLD);
        bold->start_index = (guint)words->bold[i][0];
        bold->end_index = (guint)words->bold[i][1];
        pango_attr_list_insert(list, bold);
    }
    return list;
}

static void measure_layout(text_layout *slot)
{
    PangoRectangle logical;
    pango_layout_get_extents(slot->layout, NULL, &logical);
    slot->width = (double)logical.width / PANGO_SCALE;
    slot->height = (double)logical.height / PANGO_SCALE;
    slot->baseline = (double)pango_layout_get_baseline(slot->layout) / PANGO_SCALE;
    slot->line_count = pango_layout_get_line_count(slot->layout);
}

static void set_layout(text_cache *cache, text_layout *slot, const ev_words *words, double size)
{
    PangoLayout *layout = pango_layout_new(cache->context);
    PangoFontDescription *font = pango_font_description_new();
    pango_font_description_set_family_static(font, words->font.display ? EV_FAMILY_DISPLAY
                                                                       : EV_FAMILY_TEXT);
    pango_font_description_set_weight(font, (PangoWeight)words->font.weight);
    pango_font_description_set_absolute_size(font, size * PANGO_SCALE);
    pango_layout_set_font_description(layout, font);
    pango_font_description_free(font);
    PangoAttrList *attributes = make_attributes(words, size);
    pango_layout_set_attributes(layout, attributes);
    pango_attr_list_unref(attributes);
    pango_layout_set_text(layout, words->string, -1);
    pango_layout_set_single_paragraph_mode(layout, TRUE);
    if (slot->limit > 0.0) {
        pango_layout_set_width(layout, (int)(slot->limit * PANGO_SCALE));
        pango_layout_set_height(layout, -slot->lines);
        pango_layout_set_ellipsize(layout, PANGO_ELLIPSIZE_END);
        if (slot->lines > 1 && words->line_height > 0.0)
            pango_layout_set_line_spacing(layout, (float)(words->line_height / (1.21 * size)));
    }
    slot->layout = layout;
    measure_layout(slot);
}

/* The layout of `words` at `size`, broken and cut at `limit` when that is not 0. */
static const text_layout *find_layout(const ev_words *words, double size, double limit, int lines)
{
    text_cache *cache = get_cache();
    uint64_t hash = hash_layout(words, size, limit, lines);
    text_layout *set = cache->slots[hash % CACHE_SETS], *oldest = set;
    for (int way = 0; way < CACHE_WAYS; ++way) {
        if (set[way].layout && set[way].hash == hash &&
            strcmp(set[way].string, words->string) == 0) {
            set[way].used = ++cache->clock;
            return &set[way];
        }
        if (set[way].used < oldest->used)
            oldest = &set[way];
    }
    clear_layout(oldest);
    oldest->hash = hash;
    oldest->used = ++cache->clock;
    oldest->string = ev_text_duplicate(words->string, strlen(words->string));
    oldest->font = words->font;
    oldest->limit = limit;
    oldest->lines = lines;
    set_layout(cache, oldest, words, size);
    return oldest;
}

/* Shrinks in quarter pixels, so that a text under a drag does not breathe. */
static const text_layout *fit_layout(const ev_words *words, double *size)
{
    *size = words->font.size;
    const text_layout *layout = find_layout(words, *size, 0.0, 1);
    if (layout->width <= words->width)
        return layout;
    if (words->least > 0.0 && words->least < *size) {
        *size = fmax(words->least, floor(4.0 * *size * words->width / layout->width) / 4.0);
        layout = find_layout(words, *size, 0.0, 1);
        if (layout->width <= words->width)
            return layout;
    }
    int lines = words->lines > 1 ? words->lines : 1;
    return find_layout(words, *size, fmax(words->width, 1.0), lines);
}

ev_extent ev_text_extent(const ev_words *words)
{
    double size;
    const text_layout *layout = fit_layout(words, &size);
    return (ev_extent){size, layout->width, layout->line_count};
}

double ev_text_width(const char *string, ev_font font)
{
    ev_words words = {.string = string, .font = font, .width = INFINITY};
    return ev_text_extent(&words).width;
}

static ev_rect place_layout(const ev_words *words, const text_layout *layout)
{
    double slack = words->width - layout->width;
    double shift = words->align == EV_ALIGN_RIGHT    ? slack
                   : words->align == EV_ALIGN_CENTRE ? 0.5 * slack
                                                     : 0.0;
    if (words->upright)
        return (ev_rect){words->x - layout->baseline, words->baseline - 0.5 * layout->width,
                         layout->height, layout->width};
    return (ev_rect){words->x + shift, words->baseline - layout->baseline, layout->width,
                     layout->height};
}

static void record(ev_pen *pen, const ev_words *words, ev_rect rect)
{
    ev_box *box = ev_boxes_add(pen->boxes, EV_BOX_TEXT, words->name, rect);
    if (!box)
        return;
    ev_rect region = pen->region;
    box->within = words->upright ? (ev_rect){rect.x, words->baseline - 0.5 * words->width,
                                             rect.width, words->width}
                                 : (ev_rect){words->x, region.y, words->width, region.height};
    ev_text_copy(box->text, sizeof box->text, words->string);
}

/* Ground around the letters. On an image a few shifted copies are several times faster than a
 * stroke of the outlines; on paper they would be found as text. */
static void draw_halo(ev_pen *pen, PangoLayout *layout)
{
    ev_pen_colour(pen, pen->theme->ground, 0.85);
    if (!ev_pen_is_image(pen)) {
        pango_cairo_layout_path(pen->cairo, layout);
        cairo_set_line_width(pen->cairo, 4.0);
        cairo_set_line_join(pen->cairo, CAIRO_LINE_JOIN_ROUND);
        cairo_stroke(pen->cairo);
        cairo_set_line_join(pen->cairo, CAIRO_LINE_JOIN_MITER);
    } else {
        static const double reach = 1.7;
        for (int i = 0; i < 8; ++i) {
            double angle = 0.25 * EV_PI * i;
            cairo_move_to(pen->cairo, reach * cos(angle), reach * sin(angle));
            pango_cairo_show_layout(pen->cairo, layout);
        }
    }
    cairo_move_to(pen->cairo, 0.0, 0.0);
}

ev_rect ev_text(ev_pen *pen, ev_words words)
{
    if (!words.string[0])
        return (ev_rect){words.x, words.baseline, 0.0, 0.0};
    double size;
    const text_layout *layout = fit_layout(&words, &size);
    ev_rect rect = place_layout(&words, layout);
    cairo_save(pen->cairo);
    if (words.upright) {
        cairo_translate(pen->cairo, rect.x, rect.y + rect.height);
        cairo_rotate(pen->cairo, -0.5 * EV_PI);
    } else {
        cairo_translate(pen->cairo, rect.x, rect.y);
    }
    cairo_move_to(pen->cairo, 0.0, 0.0);
    if (words.halo)
        draw_halo(pen, layout->layout);
    ev_pen_colour(pen, words.colour, 1.0);
    pango_cairo_show_layout(pen->cairo, layout->layout);
    cairo_new_path(pen->cairo); /* text leaves a current point behind */
    cairo_restore(pen->cairo);
    record(pen, &words, rect);
    return rect;
}

double ev_text_caret(const char *string, ev_font font, int index)
{
    ev_words words = {.string = string, .font = font};
    const text_layout *layout = find_layout(&words, font.size, 0.0, 1);
    PangoRectangle strong;
    pango_layout_get_cursor_pos(layout->layout, index, &strong, NULL);
    return (double)strong.x / PANGO_SCALE;
}

int ev_text_index(const char *string, ev_font font, double x)
{
    ev_words words = {.string = string, .font = font};
    const text_layout *layout = find_layout(&words, font.size, 0.0, 1);
    int index = 0, trailing = 0;
    pango_layout_xy_to_index(layout->layout, (int)(x * PANGO_SCALE), 0, &index, &trailing);
    for (; trailing > 0 && string[index]; --trailing)
        do
            ++index;
        while (((unsigned char)string[index] & 0xC0) == 0x80);
    return index;
}
