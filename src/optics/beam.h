/* The beam: far field of the currents on the main reflector, and what people read off it.
 *
 * Currents J = 2 n x H (physical optics; S. Silver, "Microwave Antenna Theory and Design", 1949,
 * ch. 5), H from the feed (single mirror) or from the ray field over the subreflector (aperture.h).
 * Shadowed currents are taken out on the shadows' exact outlines. Gains are absolute: relative to
 * the power the feed radiates, with surface (J. Ruze 1966), ohmic and mismatch loss in them. Only
 * the main reflector radiates: the feed's own spill past it, and what edges of obstacles scatter,
 * are not in the field (ev_beam_notes says where that matters).
 *
 * Directions are unit vectors in the antenna frame with z > 0; angles in rad. Co-polar and
 * cross-polar are Ludwig's third definition about +z (ev_copolar), circular senses likewise. Same
 * input, same bits, whatever the number of threads. */
#pragma once

#include "optics/budget.h"

/* The currents of one feed, expanded once and then good for any number of directions. Holds its own
 * copy of the antenna. Its caches grow with use: one thread at a time. */
typedef struct ev_beam_source ev_beam_source;

/* Coarse: expansion to -100 dB of the whole, for a beam that follows a dragged part; exact: -180 dB
 * (pattern tables, cubic between their entries: -108 dB). */
typedef enum { EV_BEAM_COARSE, EV_BEAM_EXACT } ev_beam_quality;

ev_beam_source *ev_beam_source_create(const ev_antenna *antenna, int feed, ev_beam_quality quality);
void ev_beam_source_destroy(ev_beam_source *source);

/* What was used so far. */
typedef struct ev_beam_nodes {
    int radial, around; /* rays: Gauss radii x uniform angles; 0 where the lighting has an edge */
    int rings;          /* radii of the far-field sum, for the widest direction asked */
    int edge_points;    /* points of currents that end within the rim */
    int shadow_points;
    double residual; /* of the expansion, amplitude relative to the whole; 0 with an edge */
    /* The expansion reached the accuracy asked for; with an edge: no direction asked had more than
     * 500 rad from centre to rim, beyond which the points around an edge are too few. */
    bool converged;
} ev_beam_nodes;

ev_beam_nodes ev_beam_source_nodes(const ev_beam_source *source);

/* Field at infinity with exp(-jkr)/r dropped; |co|^2 is the co-polar gain. Phase is that of the
 * wave at the antenna's origin. Zero for z <= 0, NaN for what is no direction. */
typedef struct ev_beam_field {
    double _Complex co, cross;
} ev_beam_field;

void ev_beam_fields(ev_beam_source *source, const ev_vec3 *directions, int count,
                    ev_beam_field *fields);
/* The same without taking the shadows out. */
void ev_beam_fields_unshadowed(ev_beam_source *source, const ev_vec3 *directions, int count,
                               ev_beam_field *fields);

/* Highest co-polar (or cross-polar) gain near a direction, by Newton on the field itself. */
ev_vec3 ev_beam_climb(ev_beam_source *source, ev_vec3 from, bool cross, double *gain);

/* Beam facts (rad, dBi, dB; NaN where there is none). x and y: asin of the direction cosines.
 * Widths, sidelobes and nulls are along the lines of constant y, and constant x, direction cosine
 * through the peak. */
typedef struct ev_beam {
    ev_vec3 peak; /* unit, of the co-polar gain */
    double x, y;
    double gain_dbi, gain_on_axis_dbi;               /* at the peak; in the wanted direction */
    double width_x, width_y;                         /* between half-power points, in asin */
    double first_sidelobe_x_db, first_sidelobe_y_db; /* the higher side, < 0, to the peak */
    double null_x[2], null_y[2]; /* first minima below and above the peak, asin of the cosine */
    ev_vec3 cross_peak;
    double cross_polar_db, cross_polar_x,
        cross_polar_y; /* highest anywhere, to the co-polar peak */
    /* Where a displaced feed throws the beam, against the angle it is displaced by as seen from the
     * reflector (Y. Lo, IRE Trans. AP-8, 1960); NaN while it sits within 1/500 wavelength. */
    double deviation_factor;
    double
        squint; /* circular feeds: half the angle between the beams of the two senses; else NaN */
    double unshadowed_dbi; /* at the peak, before the shadows are taken out */
    /* Far field minus ledger at the peak, and its two parts: what shadows, and what everything
     * else does differently from the product of efficiencies. */
    double ledger_gap_db, shadow_gap_db, lighting_gap_db;
    ev_beam_nodes nodes;
} ev_beam;

/* budget: of the same antenna and feed (its peak is where the search starts). False: the feed
 * lights nothing, the facts are NaN. */
bool ev_beam_compute(const ev_antenna *antenna, int feed, const ev_feed_budget *budget,
                     ev_beam_quality quality, ev_beam *beam);

/* The same from a source that is at hand. */
bool ev_beam_compute_from(ev_beam_source *source, const ev_antenna *antenna, int feed,
                          const ev_feed_budget *budget, ev_beam *beam);

/* A cut: angles t from `centre`, in the half-planes at phi from the plane through +x (turned with
 * the centre as Ludwig's vectors are): s = R (sin t cos phi, sin t sin phi, cos t), R z = centre.
 */
typedef struct ev_beam_cut {
    ev_vec3 centre; /* (0, 0, 1), or the peak */
    double phi;
    double from, to; /* rad, |t| <= pi */
    int count;       /* samples, both ends included; at least 2 */
} ev_beam_cut;

ev_vec3 ev_beam_cut_direction(const ev_beam_cut *cut, int index);
double ev_beam_cut_angle(const ev_beam_cut *cut, int index);

/* Gains (dBi) at each sample; arrays of `count`. NaN beyond the horizon. cross may be NULL. */
void ev_beam_cut_compute(ev_beam_source *source, const ev_beam_cut *cut, double *co_dbi,
                         double *cross_dbi);

/* Samples enough to see every lobe of a cut: ten a lobe width. */
int ev_beam_cut_samples(const ev_antenna *antenna, double from, double to);

/* Adds in power what a rough surface scatters under the beam (beam_pedestal.h), about `peak`.
 * Nothing without a correlation length. */
void ev_beam_cut_add_pedestal(const ev_antenna *antenna, const ev_feed_budget *budget, ev_vec3 peak,
                              const ev_beam_cut *cut, double *co_dbi);

/* A map over direction cosines: `side` x `side` samples of a square about (x, y), row 0 at the
 * highest y, column 0 at the lowest x. NaN outside the visible circle. cross may be NULL. */
typedef struct ev_beam_map {
    double x, y, half_width; /* direction cosines */
    int side;                /* at least 2 */
} ev_beam_map;

void ev_beam_map_compute(ev_beam_source *source, const ev_beam_map *map, float *co_dbi,
                         float *cross_dbi);

/* What limits the trust in these numbers, worst first; value: its figure. */
typedef enum {
    EV_BEAM_NOTE_DISH_SMALL,   /* D / lambda under 10 */
    EV_BEAM_NOTE_SUB_SMALL,    /* sub / lambda under 10 (dual): its edge waves matter */
    EV_BEAM_NOTE_FEED_NEAR,    /* feed to mirror over the feed's own far-field distance, under 1 */
    EV_BEAM_NOTE_SHADOW_LARGE, /* share of the captured power in shadows, over 0.1 */
    EV_BEAM_NOTE_STRUT_THIN,   /* strut width / lambda under 1: scatters more than it shades */
    EV_BEAM_NOTE_WIDE_ANGLE,   /* asked beyond this angle (rad) the feed's spill is missing */
    EV_BEAM_NOTE_UNCONVERGED,  /* residual of the expansion, where nodes.converged is false */
    EV_BEAM_NOTE_LEDGER_GAP,   /* far field and ledger differ by this, dB, over 0.1 */
    EV_BEAM_NOTE_COUNT,
} ev_beam_note_id;

typedef struct ev_beam_note {
    ev_beam_note_id id;
    double value;
} ev_beam_note;

/* Writes at most EV_BEAM_NOTE_COUNT notes; beam may be NULL. Returns their number. */
int ev_beam_notes(const ev_antenna *antenna, int feed, const ev_feed_budget *budget,
                  const ev_beam *beam, ev_beam_note notes[EV_BEAM_NOTE_COUNT]);
