/* Everything flat: one function a region, on a cairo context in logical pixels (the caller scales
 * for dense displays and for paper). Screen, PNG, SVG and PDF use the same functions, so they
 * cannot differ. Drawing computes no physics: it shows an ev_sheet.
 *
 * Each region adds its hot boxes (what a pointer can hit, what a test can read) and, for plots, its
 * data-to-pixel map. Sizes, colours and type are those of draw/theme.h. */
#pragma once

#include "optics/antenna.h"
#include "optics/beam_limit.h"
#include "optics/budget.h"
#include "optics/design.h"
#include "optics/trace.h"
#include "study/beam_curve.h"
#include "study/loss_map.h"
#include "study/verdict.h"

#include <cairo.h>

typedef struct ev_rect {
    double x, y, width, height;
} ev_rect;

/* A thing on the sheet: text, a button, a ledger row, a handle... `name` is a dotted address:
 * "ledger.spillover", "button.move", "field.feed.defocus", "text.verdict.1", "handle.feed",
 * "plate.aperture". Text boxes carry the place they must lie inside. */
typedef enum {
    EV_BOX_TEXT,
    EV_BOX_BUTTON,
    EV_BOX_ROW,
    EV_BOX_FIELD,
    EV_BOX_HANDLE,
    EV_BOX_PLOT,
    EV_BOX_PLACE
} ev_box_kind;

typedef struct ev_box {
    char name[80];
    ev_box_kind kind;
    ev_rect rect;   /* logical pixels of the page */
    ev_rect within; /* text: the place it has to lie inside */
    char text[48];  /* text: what is drawn, cut at a whole character */
} ev_box;

enum { EV_BOX_CAPACITY = 512 };

typedef struct ev_boxes {
    ev_box items[EV_BOX_CAPACITY];
    int count;
} ev_boxes;

const ev_box *ev_boxes_find(const ev_boxes *boxes, const char *name);
/* The last one drawn of a kind that holds the point. */
const ev_box *ev_boxes_hit(const ev_boxes *boxes, double x, double y, ev_box_kind kind);

/* Affine map of a plot from data (a, b):
 *     x = x0 + x_scale a + x_cross b,    y = y0 + y_scale b + y_cross a.
 * Section: data are antenna (z, x) and nothing crosses. Detail: metres from nominal along the
 * part's own axes, which may stand askew on the page. */
typedef struct ev_plot_map {
    double x0, x_scale, y0, y_scale;
    double x_cross, y_cross;
} ev_plot_map;

void ev_plot_to_page(const ev_plot_map *map, double a, double b, double *x, double *y);
void ev_plot_to_data(const ev_plot_map *map, double x, double y, double *a, double *b);

/* A field of the Strip: one parameter in hand. */
typedef struct ev_field {
    char address[96]; /* parameter address */
    char label[40];
    char digits[24], unit[12]; /* "14.0", "mm"; minus is U+2212 */
    double value, nominal;     /* SI; where the tape stands and where its mark is */
    double step;               /* SI length of one small tick */
    bool grabbed;              /* yellow */
    bool editing;              /* digits show edit text and caret */
    char edit_text[48];
    int edit_caret, edit_anchor; /* bytes */
    char complaint[96];          /* under the field while the text is not legal */
} ev_field;

enum { EV_FIELD_CAPACITY = 6 };

/* An action of the top bar; its box is a button "action.NAME". Only what exists is listed. */
typedef struct ev_action {
    const char *name;  /* "save" */
    const char *label; /* "Save" */
    int key;           /* byte of `label` to underline: the key that does it; -1 for none */
    bool enabled;
} ev_action;

enum { EV_ACTION_CAPACITY = 10 };

typedef enum { EV_STAGE_SECTION, EV_STAGE_SPACE } ev_stage_mode;
typedef enum { EV_PLATE_APERTURE, EV_PLATE_BEAM, EV_PLATE_CUT } ev_plate;

/* Aperture picture data: path error minus its mean, n x n over the aperture's square, NaN outside
 * and in the hole; row 0 at +x, column 0 at -y. The plate draws it as one faces the dish from the
 * front: +x up, +y to the left. */
enum { EV_APERTURE_SIDE = 97 };

/* One immutable snapshot: everything a page shows. */
typedef struct ev_sheet {
    const ev_design *design;
    const ev_antenna *antenna;
    const ev_budget *budget;
    const ev_verdict *verdict;
    const ev_budget *kept;       /* NULL: nothing kept */
    const ev_loss_map *loss_map; /* NULL: not computed yet */
    const ev_ray *rays;          /* of ev_trace_section or ev_trace_fan */
    int ray_count;
    const float *aperture; /* EV_APERTURE_SIDE squared, m; NULL: not drawn */
    const double *front;   /* path error minus mean at front_x along y = 0, m: the Front */
    const double *front_x; /* m, antenna x */
    int front_count;
    double front_exaggeration; /* the stated factor */
    int feed;                  /* selected */
    ev_part part;              /* shown in the Detail */
    ev_part_axis detail_axis[2];
    ev_stage_mode stage;
    const ev_beam_curve *beams[EV_FEED_CAPACITY]; /* of each feed, selected one first drawn; NULL:
                                                   not computed */
    const ev_beam_curve *kept_beam;               /* of the selected feed; NULL */
    const ev_limit *limit;                        /* drawn over the Beam plate; NULL */
    const ev_gain_curve *gain_curve;              /* Cut plate; NULL: not computed */
    ev_plate plate; /* chosen by a tab: the only one, or the one below the Aperture */
    bool dark;
    bool settings; /* the Strip offers "All settings", key A: button "button.settings" */
    bool paper;    /* nothing to press: no button, tabs or marks of the pointer */
    bool unsaved, can_undo, can_redo, detail, grabbed, stale;
    char pointed[80]; /* name of the hot box under the pointer, or "" */
    char notice[160]; /* one line of news: "Undid: feed out", or "" */
    char date[32];    /* of a hand-out, as people write it; "" leaves it out */
    ev_field fields[EV_FIELD_CAPACITY];
    int field_count;
    double zoom;         /* section: 1 = fit */
    double pan_x, pan_y; /* section: logical pixels */
    ev_action actions[EV_ACTION_CAPACITY];
    int action_count;
    /* Scales held still during a drag; 0: the drawing chooses (ev_sheet_scales). The same goes for
     * front_exaggeration. */
    double aperture_range; /* m, path error of the full colour */
    double ledger_range;   /* dB, width of the stair */
    double beam_range;     /* dB, depth of the Beam plate */
    double cut_range;      /* dB, depth of the loss on the Cut plate */
    /* Older than the settings on screen: dimmed, with a hairline along the top. */
    bool beam_stale, cut_stale;
} ev_sheet;

/* Places of the regions for a page of width x height logical pixels (at least 1100 x 700). */
typedef struct ev_page {
    double width, height;
    ev_rect bar, verdict, stage, watts, strip, ledger, plates[2];
    int plate_count; /* one above the other in the column: 2, or 1 where there is no more room */
    ev_rect detail;  /* square of the enlarged circle, inside the stage */
} ev_page;

ev_page ev_page_layout(double width, double height);

/* Which plate is shown at plates[index]: the Aperture above and Beam or Cut below it, or the one
 * chosen. */
ev_plate ev_page_plate(const ev_page *page, const ev_sheet *sheet, int index);

/* Fills front_exaggeration and the ranges with what suits the sheet now, whatever they held: call
 * it at rest, keep the values while something moves. */
void ev_sheet_scales(const ev_page *page, ev_sheet *sheet);

/* Every region paints its own ground, but the two that lie over the 3D picture: the space notes and
 * the Detail. */
void ev_draw_bar(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, ev_boxes *boxes);
void ev_draw_verdict(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, ev_boxes *boxes);
/* Section to scale with hatching, dimensions, rays, Front, scale bar; without the Detail. Boxes:
 * "tab.section", "tab.space" (buttons), "plot.section", and the parts as handles, "part.feed.0",
 * "part.sub", to grab them where they stand. */
void ev_draw_section(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, ev_boxes *boxes,
                     ev_plot_map *map);
/* What the Stage shows over space: tabs, captions, scale; the 3D picture itself is the window's. */
void ev_draw_space_notes(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet,
                         ev_boxes *boxes);
/* Enlarged circle with rings, ticks, handle, arrow, tangents from `part_x, part_y` (page pixels).
 * map: data are metres from nominal along detail_axis. */
void ev_draw_detail(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, double part_x,
                    double part_y, ev_boxes *boxes, ev_plot_map *map);
void ev_draw_watts(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, ev_boxes *boxes);
void ev_draw_strip(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, ev_boxes *boxes);
void ev_draw_ledger(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, ev_boxes *boxes);

/* The plate shown at plates[index]; or each by itself, in its own place. Boxes: "tab.aperture",
 * "tab.beam", "tab.cut" (buttons, where there is a choice); "plate.aperture", "plate.beam",
 * "plate.cut" (plots). A plate whose numbers are not there yet says so over its axes. */
void ev_draw_plate(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, int index,
                   ev_boxes *boxes);
void ev_draw_aperture(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, ev_boxes *boxes);
/* Curves against the angle, in dB below the peak of the selected feed's beam; the limit stands
 * about that peak. */
void ev_draw_beam(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, ev_boxes *boxes);
/* Above, the path error along the plane of symmetry; below, the loss as the part in hand moves. */
void ev_draw_cut(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, ev_boxes *boxes);

/* Data to page: (rad, dB below the peak, <= 0), and of the lower half of the Cut plate (m, dB of
 * gain, <= 0). */
ev_plot_map ev_beam_plot(const ev_page *page, const ev_sheet *sheet);
ev_plot_map ev_cut_plot(const ev_page *page, const ev_sheet *sheet);

/* The hairlines between regions, over all of them. */
void ev_draw_rules(cairo_t *cairo, const ev_page *page, bool dark);

/* Byte of the edit text of a field under page x: for clicks and selections. */
int ev_field_byte_at(const ev_page *page, const ev_sheet *sheet, int field, double x);
/* SI change of the value for a drag of the tape by dx logical pixels. */
double ev_field_drag(const ev_field *field, double dx);

/* The whole page: what `picture` writes, and the window. Over space the Stage is left as it was:
 * clear it, and lay the page over the 3D picture. In the section the Detail, when asked for, hangs
 * on its part; over space the window adds it, knowing where the part is seen. */
void ev_draw_page(cairo_t *cairo, const ev_page *page, const ev_sheet *sheet, ev_boxes *boxes);

/* Showing mode, a page of its own: what is wrong in two lines, how much of the signal is left, the
 * antenna as it stands (turned by the site's elevation, over the ground; level where there is no
 * site), the wave that should leave flat, and the target to bring the part into. Boxes:
 * "handle.feed" or "handle.sub", "part.feed.0".., "part.sub", "button.move" (Space), "button.back"
 * (Esc), all for fingers; "plot.section", "plot.detail". Maps: as those of ev_draw_section and
 * ev_draw_detail. Where the antenna lies depends on where the parts belong, not on where they are.
 */
void ev_draw_show(cairo_t *cairo, double width, double height, const ev_sheet *sheet,
                  ev_boxes *boxes, ev_plot_map *section, ev_plot_map *detail);
/* What suits front_exaggeration there: as with ev_sheet_scales, keep it while something moves. */
double ev_show_exaggeration(double width, double height, const ev_sheet *sheet);

/* A page to hand out: as a section, nothing to press, the date and the cautions that apply at its
 * foot. */
void ev_draw_handout(cairo_t *cairo, double width, double height, const ev_sheet *sheet,
                     ev_boxes *boxes);

/* Writes that page to a file by its ending: .png, .svg, .pdf; `scale` is pixels of the file per
 * logical pixel (png only). False with *why (a phrase, valid until the next call in this thread)
 * when it cannot; then nothing is left at `path`. */
bool ev_picture_write(const char *path, double width, double height, double scale,
                      const ev_sheet *sheet, const char **why);

/* Example scenes to choose from: a grid of small sections with titles. Boxes "scene.0".. */
typedef struct ev_gallery_item {
    const ev_design *design;
    const ev_antenna *antenna;
    char comment[200];  /* whose problem it is */
    const ev_ray *rays; /* a few, or NULL */
    int ray_count;
} ev_gallery_item;

void ev_draw_gallery(cairo_t *cairo, double width, double height, bool dark,
                     const ev_gallery_item *items, int count, const char *pointed, ev_boxes *boxes);

/* Frees this thread's text layouts; threads other than the first do so by themselves on ending. */
void ev_draw_release(void);
