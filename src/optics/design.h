/* The numbers a user can set, as one plain value: what a scene file says, in SI units and radians.
 *
 * The parameter table (scene/parameter.h) addresses these members; ev_design_resolve fills in the
 * members that follow from a choice (focal length | f/D | depth, ...); ev_antenna_build turns the
 * result into surfaces and feeds. A design is copied freely (undo is a ring of them); its only
 * pointers are pattern tables, which live as long as the scene that read them.
 *
 * Frame: right-handed, vertex of the main paraboloid at the origin, +z along its axis toward the
 * sky, prime focus at (0, 0, focal_length), offset aperture centred at (+offset, 0). */
#pragma once

#include "base/vec3.h"

#include <stdbool.h>

enum {
    EV_NAME_CAPACITY = 48,
    EV_TITLE_CAPACITY = 160,
    EV_PATH_CAPACITY = 256,
    EV_FEED_CAPACITY = 8,
    EV_STRUT_CAPACITY = 12,
    EV_FREQUENCY_CAPACITY = 32,
};

/* Members of a choice group: the one given holds, the others are derived. */
typedef enum { EV_GIVEN_FOCAL_LENGTH, EV_GIVEN_F_OVER_D, EV_GIVEN_DEPTH } ev_focal_choice;
typedef enum { EV_GIVEN_OFFSET, EV_GIVEN_CLEARANCE } ev_offset_choice;
typedef enum { EV_GIVEN_EXPONENT, EV_GIVEN_EDGE_TAPER } ev_taper_choice;

/* Symmetric dual: two of {magnification | eccentricity, interfocal, diameter}; what is derived is
 * the third. Offset dual: the diameter is always the derived one. */
typedef enum { EV_GIVEN_MAGNIFICATION, EV_GIVEN_ECCENTRICITY } ev_shape_choice;
typedef enum { EV_DERIVED_DIAMETER, EV_DERIVED_INTERFOCAL, EV_DERIVED_SHAPE } ev_sub_derived;

typedef enum { EV_SUB_HYPERBOLOID, EV_SUB_ELLIPSOID } ev_sub_shape;
typedef enum { EV_PATTERN_COS_POWER, EV_PATTERN_GAUSSIAN, EV_PATTERN_TABLE } ev_pattern_kind;
typedef enum {
    EV_POLARIZATION_X,
    EV_POLARIZATION_Y,
    EV_POLARIZATION_RHCP, /* of the wave that leaves the antenna, IEEE sense */
    EV_POLARIZATION_LHCP,
} ev_polarization;
typedef enum { EV_AIM_BISECT, EV_AIM_CENTRE, EV_AIM_DIRECTION } ev_aim;

typedef struct ev_pattern_table ev_pattern_table; /* optics/pattern.h */

typedef struct ev_main_design {
    double diameter;     /* m, of the projected aperture */
    double focal_length; /* m */
    double f_over_d;
    double depth; /* m, at the rim of a symmetric dish; meaningless with an offset */
    ev_focal_choice focal_given;
    double offset;    /* m, aperture centre from the axis, along +x */
    double clearance; /* m, lower rim from the axis: offset - diameter / 2 */
    ev_offset_choice offset_given;
    double hole;                /* m, diameter of a central hole about the aperture centre */
    double surface_rms;         /* m, half-path rms error of all surfaces together */
    double surface_correlation; /* m, its correlation length; 0: unknown, no pedestal */
} ev_main_design;

typedef struct ev_sub_design {
    bool present;
    ev_sub_shape shape;
    double magnification; /* (e + 1) / |e - 1| */
    double eccentricity;
    ev_shape_choice shape_given;
    double interfocal; /* m, prime focus to feed focus */
    double diameter;   /* m, long axis of the geometric rim */
    ev_sub_derived derived;
    ev_sub_derived older;  /* of the two given, the one given first; derived next (scene/field.c) */
    double axis_tilt;      /* rad; positive moves the feed focus toward -x */
    double oversize;       /* m, added to the radius of the geometric rim */
    ev_vec3 shift;         /* m, antenna frame */
    double tilt_x, tilt_y; /* rad, right-handed about antenna x, then y, through the vertex */
} ev_sub_design;

typedef struct ev_feed_design {
    char name[EV_NAME_CAPACITY];
    ev_pattern_kind pattern;
    double exponent;   /* n of the power pattern cos^n */
    double edge_taper; /* dB, positive: pattern level at the half extent of what is lit */
    ev_taper_choice taper_given;
    char table_path[EV_PATH_CAPACITY]; /* as written in the scene */
    const ev_pattern_table *table;     /* not owned */
    ev_polarization polarization;
    ev_aim aim;
    ev_vec3 aim_direction;     /* EV_AIM_DIRECTION only; any length > 0 */
    ev_vec3 shift;             /* m, antenna frame */
    double tilt_x, tilt_y;     /* rad, about antenna x, then y, through the phase centre */
    double roll;               /* rad, right-handed about the feed's own axis */
    double defocus;            /* m, along the feed's own axis, + = away from what it lights */
    double toward_x, toward_y; /* rad, the beam meant: asin of its direction cosines */
    bool toward_peak;          /* judge it by wherever it points */
    double phase_centre;       /* m, inside the mouth */
    double body;               /* m, diameter of the shadow it casts */
} ev_feed_design;

typedef struct ev_strut_design {
    char name[EV_NAME_CAPACITY];
    int count;    /* copies turned evenly about the aperture centre */
    double width; /* m */
    double from;  /* m, radius in the aperture */
    double to;    /* m */
    double first; /* rad, from +x toward +y */
} ev_strut_design;

typedef struct ev_site_design {
    bool present;
    double elevation; /* rad, of +z above the horizon */
    double ground;    /* K */
    double sky;       /* K */
} ev_site_design;

typedef struct ev_design {
    char title[EV_TITLE_CAPACITY];
    double frequencies[EV_FREQUENCY_CAPACITY]; /* Hz; the first is the working frequency */
    int frequency_count;
    ev_main_design main;
    ev_sub_design sub;
    ev_feed_design feeds[EV_FEED_CAPACITY];
    int feed_count;
    ev_strut_design struts[EV_STRUT_CAPACITY];
    int strut_count;
    ev_site_design site;
    double ohmic;    /* dB, positive */
    double mismatch; /* dB, positive */
} ev_design;

typedef enum {
    EV_LAYOUT_PRIME_FOCUS,
    EV_LAYOUT_OFFSET,
    EV_LAYOUT_CASSEGRAIN,
    EV_LAYOUT_GREGORIAN,
    EV_LAYOUT_OFFSET_CASSEGRAIN,
    EV_LAYOUT_OFFSET_GREGORIAN,
} ev_layout_kind;

/* A sensible 1.2 m class prime-focus dish with one feed; every default of the scene format. */
ev_design ev_default_design(void);
ev_sub_design ev_default_sub(void);
ev_feed_design ev_default_feed(void);
ev_strut_design ev_default_strut(void);
ev_site_design ev_default_site(void);

ev_layout_kind ev_design_layout(const ev_design *design);

/* The word design.md's JSON uses: "prime_focus", "offset", ... */
const char *ev_layout_name(ev_layout_kind kind);

/* Derives the members that a choice leaves open. Idempotent. Impossible combinations leave NaN in
 * the derived member, which ev_design_check reports. */
void ev_design_resolve(ev_design *design);

/* What is wrong, or doubtful, with a resolved design. */
typedef enum {
    EV_PROBLEM_NONE,
    /* errors: no antenna can be built */
    EV_PROBLEM_NOT_POSITIVE,      /* value[0] */
    EV_PROBLEM_NOT_FINITE,        /* value[0] */
    EV_PROBLEM_DEPTH_WITH_OFFSET, /* depth fixes the focal length of symmetric dishes only */
    EV_PROBLEM_SUB_SHAPE,      /* eccentricity or magnification against the shape: value[0] = e */
    EV_PROBLEM_SUB_IMPOSSIBLE, /* no such conic: the two given do not meet */
    EV_PROBLEM_SUB_OVERSIZE,   /* the conic is not that wide; value[0] = oversize (m) */
    EV_PROBLEM_SUB_LARGER_THAN_DISH,   /* value: sub diameter, dish diameter (m) */
    EV_PROBLEM_SUB_TILT_ON_SYMMETRIC,  /* axis_tilt without an offset */
    EV_PROBLEM_SUB_DIAMETER_ON_OFFSET, /* the rim of an offset sub follows from the main rim */
    EV_PROBLEM_HOLE_TOO_LARGE,         /* value: hole, dish diameter */
    EV_PROBLEM_FEED_IN_MIRROR, /* feed behind the surface it should light; value: depth (m) */
    EV_PROBLEM_FEED_AIM,       /* aim direction of zero length */
    EV_PROBLEM_FEED_WITHOUT_TABLE,
    EV_PROBLEM_TAPER_IMPOSSIBLE, /* edge_taper with a half extent of 90 deg or more */
    EV_PROBLEM_TOWARD,           /* no such direction in front of the dish */
    EV_PROBLEM_STRUT_RADII,      /* from >= to; value: from, to */
    EV_PROBLEM_NO_FEED,
    /* warnings: computed, with a caution */
    EV_PROBLEM_FIRST_WARNING,
    EV_PROBLEM_DISH_SMALL =
        EV_PROBLEM_FIRST_WARNING, /* under 10 wavelengths; value[0] = D/lambda */
    EV_PROBLEM_SUB_SMALL,         /* sub under 5 wavelengths; value[0] = d/lambda */
    EV_PROBLEM_HOLE_IN_CONE,      /* the dish's hole is wider than the sub's shadow; value: m, m */
    EV_PROBLEM_FEED_MISSES,       /* the feed lights none of its mirror */
    EV_PROBLEM_TABLE_ENDS,        /* no power assumed beyond value[0] (rad) */
    EV_PROBLEM_CLEARANCE,         /* feed or sub reaches into the aperture; value[0] = m */
    EV_PROBLEM_FEED_NEAR, /* feed less than 2 wavelengths from its mirror; value[0] wavelengths */
    EV_PROBLEM_COUNT,
} ev_problem_id;

typedef struct ev_problem {
    ev_problem_id id;
    char parameter[2 * EV_NAME_CAPACITY]; /* "main.diameter", "feeds.NAME.exponent": a table row */
    double value[2];
} ev_problem;

static inline bool ev_problem_is_error(ev_problem_id id)
{
    return id > EV_PROBLEM_NONE && id < EV_PROBLEM_FIRST_WARNING;
}

/* Checks a resolved design at its working frequency; writes at most `capacity` problems, errors
 * first, and returns their number. With no error among them ev_antenna_build succeeds. */
int ev_design_check(const ev_design *design, ev_problem *problems, int capacity);
