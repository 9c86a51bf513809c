/* The one table of parameters. To add a parameter: add the member to optics/design.h, its default
 * to optics, and a row here; loading, saving, --set, `explain` and the window follow.
 *
 * Order matters: a key that the saver inserts goes after its neighbour above. The members .x .y .z
 * of a vector stand together, after the word that may stand in their place. */
#include "scene/parameter_table.h"

#define DEG (EV_PI / 180.0)
#define MM 1e-3

#define OF(OWNER, TYPE, MEMBER)                                                                    \
    .owner = (OWNER), .offset = offsetof(TYPE, MEMBER), .size = sizeof(((TYPE *)0)->MEMBER)
#define DESIGN(MEMBER) OF(EV_OWNER_DESIGN, ev_design, MEMBER)
#define SUB(MEMBER) OF(EV_OWNER_SUB, ev_sub_design, MEMBER)
#define FEED(MEMBER) OF(EV_OWNER_FEED, ev_feed_design, MEMBER)
#define STRUT(MEMBER) OF(EV_OWNER_STRUT, ev_strut_design, MEMBER)
#define SITE(MEMBER) OF(EV_OWNER_SITE, ev_site_design, MEMBER)

#define NUMBER(LOW, HIGH, INITIAL)                                                                 \
    .kind = EV_VALUE_NUMBER, .quantity = EV_QUANTITY_NUMBER, .low = (LOW), .high = (HIGH),         \
    .initial = (INITIAL)
#define QUANTITY(KIND, LOW, HIGH, INITIAL)                                                         \
    .kind = EV_VALUE_NUMBER, .quantity = EV_QUANTITY_##KIND, .low = (LOW), .high = (HIGH),         \
    .initial = (INITIAL)
#define COUNT(LOW, HIGH, INITIAL)                                                                  \
    .kind = EV_VALUE_COUNT, .low = (LOW), .high = (HIGH), .initial = (INITIAL)
#define CHOICE(WORDS, LAST, INITIAL)                                                               \
    .kind = EV_VALUE_CHOICE, .words = (WORDS), .low = 0, .high = (LAST), .initial = (INITIAL)
#define GIVEN(GROUP, TYPE, MEMBER, VALUE)                                                          \
    .choice = (GROUP), .given = (VALUE), .given_offset = offsetof(TYPE, MEMBER)
#define OF_THREE(WHICH) .of_three = (1 + (WHICH))

static const char *const shape_words[] = {"hyperboloid", "ellipsoid", NULL};
static const char *const pattern_words[] = {"cos_power", "gaussian", "table", NULL};
static const char *const polarization_words[] = {"x", "y", "rhcp", "lhcp", NULL};
static const char *const aim_words[] = {"bisect", "centre", EV_WORD_DIRECTION, NULL};
static const char *const toward_words[] = {EV_WORD_DIRECTION, "peak", NULL};

const ev_parameter ev_parameter_table[] = {
    {"title", "Title", DESIGN(title), .kind = EV_VALUE_TEXT,
     .example = "Rooftop terminal, 1.2 m offset", .meaning = "what the antenna is called"},
    {"frequency", "Frequency", DESIGN(frequencies[0]), QUANTITY(FREQUENCY, 1e6, 1e13, 12e9),
     .list_capacity = EV_FREQUENCY_CAPACITY,
     .list_count_offset = offsetof(ev_design, frequency_count), .required = true,
     .example = "12 GHz", .meaning = "working frequency; in a list, the first"},

    {"main.diameter", "Dish diameter", DESIGN(main.diameter), QUANTITY(LENGTH, MM, 1e4, 1.2),
     .required = true, .example = "1.2 m", .meaning = "of the projected aperture"},
    {"main.focal_length", "Focal length", DESIGN(main.focal_length),
     QUANTITY(LENGTH, MM, 1e5, 0.54),
     GIVEN("focal length", ev_design, main.focal_given, EV_GIVEN_FOCAL_LENGTH), .required = true,
     .example = "0.72 m", .meaning = "of the parent paraboloid, vertex to focus"},
    {"main.f_over_d", "f/D", DESIGN(main.f_over_d), NUMBER(0.01, 1e4, 0.45),
     GIVEN("focal length", ev_design, main.focal_given, EV_GIVEN_F_OVER_D), .required = true,
     .example = "0.6", .meaning = "focal length over diameter"},
    {"main.depth", "Dish depth", DESIGN(main.depth),
     QUANTITY(LENGTH, 1e-6, 1e4, 1.44 / (16 * 0.54)),
     GIVEN("focal length", ev_design, main.focal_given, EV_GIVEN_DEPTH), .required = true,
     .example = "180 mm", .meaning = "vertex to rim plane of a symmetric dish"},
    {"main.offset", "Offset", DESIGN(main.offset), QUANTITY(LENGTH, 0.0, 1e4, 0.0),
     GIVEN("offset", ev_design, main.offset_given, EV_GIVEN_OFFSET), .example = "0.66 m",
     .meaning = "aperture centre from the axis; 0 is a symmetric dish"},
    {"main.clearance", "Clearance", DESIGN(main.clearance), QUANTITY(LENGTH, -1e4, 1e4, -0.6),
     GIVEN("offset", ev_design, main.offset_given, EV_GIVEN_CLEARANCE), .example = "60 mm",
     .meaning = "lower rim from the axis; an offset dish's feed stays out of the beam with it"},
    {"main.hole", "Central hole", DESIGN(main.hole), QUANTITY(LENGTH, 0.0, 1e4, 0.0),
     .example = "0.4 m", .meaning = "diameter of a hole about the aperture centre"},
    {"main.surface_rms", "Surface rms", DESIGN(main.surface_rms), QUANTITY(LENGTH, 0.0, 0.1, 0.0),
     .example = "0.3 mm", .meaning = "half-path rms error of all surfaces together"},
    {"main.surface_correlation", "Correlation length", DESIGN(main.surface_correlation),
     QUANTITY(LENGTH, 0.0, 1e3, 0.0), .example = "150 mm",
     .meaning = "how far surface errors hang together; adds their scatter to the beam's cuts"},

    {"sub.shape", "Subreflector shape", SUB(shape), CHOICE(shape_words, 1, 0), .required = true,
     .example = "hyperboloid", .meaning = "hyperboloid (Cassegrain) or ellipsoid (Gregorian)"},
    {"sub.magnification", "Magnification", SUB(magnification), NUMBER(1.0, 1e4, 5.0),
     GIVEN("subreflector shape", ev_sub_design, shape_given, EV_GIVEN_MAGNIFICATION),
     OF_THREE(EV_DERIVED_SHAPE), .example = "8",
     .meaning = "equivalent focal length over the dish's, (e + 1) / |e - 1|"},
    {"sub.eccentricity", "Eccentricity", SUB(eccentricity), NUMBER(0.0, 1e3, 1.5),
     GIVEN("subreflector shape", ev_sub_design, shape_given, EV_GIVEN_ECCENTRICITY),
     OF_THREE(EV_DERIVED_SHAPE), .example = "1.3",
     .meaning = "above 1 for a hyperboloid, below 1 for an ellipsoid"},
    {"sub.interfocal", "Interfocal distance", SUB(interfocal), QUANTITY(LENGTH, MM, 1e5, 0.4),
     OF_THREE(EV_DERIVED_INTERFOCAL), .example = "0.36 m", .meaning = "prime focus to feed focus"},
    {"sub.diameter", "Subreflector diameter", SUB(diameter), QUANTITY(LENGTH, MM, 1e4, 0.15),
     OF_THREE(EV_DERIVED_DIAMETER), .example = "0.15 m",
     .meaning = "long axis of the geometric rim; follows from the rest on an offset antenna"},
    {"sub.axis_tilt", "Subreflector axis tilt", SUB(axis_tilt),
     QUANTITY(ANGLE, -90 * DEG, 90 * DEG, 0.0), .example = "5.57 deg",
     .meaning = "of the line of foci to the dish's axis; positive moves the feed focus toward -x"},
    {"sub.oversize", "Oversize", SUB(oversize), QUANTITY(LENGTH, 0.0, 1e3, 0.0), .example = "10 mm",
     .meaning = "radius added beyond the geometric rim"},
    {"sub.shift.x", "Subreflector up", SUB(shift.x), QUANTITY(LENGTH, -1e3, 1e3, 0.0),
     .example = "2 mm", .meaning = "misplaced along antenna x"},
    {"sub.shift.y", "Subreflector across", SUB(shift.y), QUANTITY(LENGTH, -1e3, 1e3, 0.0),
     .example = "0 mm", .meaning = "misplaced along antenna y"},
    {"sub.shift.z", "Subreflector out", SUB(shift.z), QUANTITY(LENGTH, -1e3, 1e3, 0.0),
     .example = "0 mm", .meaning = "misplaced along antenna z, away from the dish"},
    {"sub.tilt.x", "Subreflector tilt about x", SUB(tilt_x),
     QUANTITY(ANGLE, -90 * DEG, 90 * DEG, 0.0), .example = "0.2 deg",
     .meaning = "turned about antenna x through its vertex"},
    {"sub.tilt.y", "Subreflector tilt about y", SUB(tilt_y),
     QUANTITY(ANGLE, -90 * DEG, 90 * DEG, 0.0), .example = "0 deg",
     .meaning = "then about antenna y through its vertex"},

    {"feed.name", "Feed", FEED(name), .kind = EV_VALUE_TEXT, .example = "main",
     .meaning = "how addresses call this feed"},
    {"feed.pattern", "Pattern", FEED(pattern), CHOICE(pattern_words, 2, 0), .example = "cos_power",
     .meaning = "cos_power, gaussian, or table (a CSV file)"},
    {"feed.exponent", "Exponent", FEED(exponent), NUMBER(0.0, 1e5, 2.0),
     GIVEN("taper", ev_feed_design, taper_given, EV_GIVEN_EXPONENT), .example = "2",
     .meaning = "n of the power pattern cos^n"},
    {"feed.edge_taper", "Edge taper", FEED(edge_taper), QUANTITY(LEVEL, 0.0, 300.0, 11.0),
     GIVEN("taper", ev_feed_design, taper_given, EV_GIVEN_EDGE_TAPER), .example = "11 dB",
     .meaning = "how far the pattern has fallen at the half extent of what it lights"},
    {"feed.table", "Pattern table", FEED(table_path), .kind = EV_VALUE_TEXT, .example = "horn.csv",
     .meaning =
         "CSV file of the pattern, relative to the scene: theta_deg, e_db, h_db[, phase_deg]"},
    {"feed.polarization", "Polarization", FEED(polarization), CHOICE(polarization_words, 3, 0),
     .example = "x", .meaning = "x, y, rhcp or lhcp, of the wave that leaves the antenna"},
    {"feed.aim", "Aim", FEED(aim), CHOICE(aim_words, 2, 0), .example = "bisect",
     .meaning = "bisect (between the rims), centre (of the aperture), or a direction [x, y, z]"},
    {"feed.aim.x", "Aim x", FEED(aim_direction.x), NUMBER(-1e6, 1e6, 0.0), .example = "0",
     .meaning = "aim along x, when given by its direction"},
    {"feed.aim.y", "Aim y", FEED(aim_direction.y), NUMBER(-1e6, 1e6, 0.0), .example = "0",
     .meaning = "aim along y, when given by its direction"},
    {"feed.aim.z", "Aim z", FEED(aim_direction.z), NUMBER(-1e6, 1e6, -1.0), .example = "-1",
     .meaning = "aim along z, when given by its direction"},
    {"feed.shift.x", "Feed up", FEED(shift.x), QUANTITY(LENGTH, -1e3, 1e3, 0.0), .example = "-4 mm",
     .meaning = "misplaced along antenna x"},
    {"feed.shift.y", "Feed across", FEED(shift.y), QUANTITY(LENGTH, -1e3, 1e3, 0.0),
     .example = "0 mm", .meaning = "misplaced along antenna y"},
    {"feed.shift.z", "Feed along", FEED(shift.z), QUANTITY(LENGTH, -1e3, 1e3, 0.0),
     .example = "0 mm", .meaning = "misplaced along antenna z, the dish's axis"},
    {"feed.tilt.x", "Feed tilt about x", FEED(tilt_x), QUANTITY(ANGLE, -180 * DEG, 180 * DEG, 0.0),
     .example = "1 deg", .meaning = "turned about antenna x through its phase centre"},
    {"feed.tilt.y", "Feed tilt about y", FEED(tilt_y), QUANTITY(ANGLE, -180 * DEG, 180 * DEG, 0.0),
     .example = "0 deg", .meaning = "then about antenna y through its phase centre"},
    {"feed.roll", "Feed roll", FEED(roll), QUANTITY(ANGLE, -360 * DEG, 360 * DEG, 0.0),
     .example = "15 deg", .meaning = "turned about its own axis, which turns the polarization"},
    {"feed.defocus", "Feed out", FEED(defocus), QUANTITY(LENGTH, -1e3, 1e3, 0.0),
     .example = "14 mm", .meaning = "along the feed's own axis, away from what it lights"},
    {"feed.toward", "Beam meant", FEED(toward_peak), CHOICE(toward_words, 1, 0), .example = "peak",
     .meaning =
         "the beam this feed is meant to make: a direction [x, y], or peak: where it points"},
    {"feed.toward.x", "Beam up", FEED(toward_x), QUANTITY(ANGLE, -89 * DEG, 89 * DEG, 0.0),
     .example = "0 deg", .meaning = "wanted beam toward +x, from the dish's axis"},
    {"feed.toward.y", "Beam across", FEED(toward_y), QUANTITY(ANGLE, -89 * DEG, 89 * DEG, 0.0),
     .example = "3 deg", .meaning = "wanted beam toward +y, from the dish's axis"},
    {"feed.phase_centre", "Phase centre", FEED(phase_centre), QUANTITY(LENGTH, -10.0, 10.0, 0.0),
     .example = "5 mm",
     .meaning = "inside the mouth; only the drawing and the tape distances use it"},
    {"feed.body", "Feed body", FEED(body), QUANTITY(LENGTH, 0.0, 1e3, 0.0), .example = "60 mm",
     .meaning = "diameter of the shadow it casts"},

    {"strut.name", "Struts", STRUT(name), .kind = EV_VALUE_TEXT, .example = "legs",
     .meaning = "how addresses call these struts"},
    {"strut.count", "Strut count", STRUT(count), COUNT(1, 64, 4), .example = "4",
     .meaning = "copies, turned evenly about the aperture centre"},
    {"strut.width", "Strut width", STRUT(width), QUANTITY(LENGTH, 0.0, 100.0, 0.01),
     .example = "40 mm", .meaning = "of the shadow of one strut"},
    {"strut.from", "Strut from", STRUT(from), QUANTITY(LENGTH, 0.0, 1e4, 0.05), .example = "0.2 m",
     .meaning = "radius in the aperture where the shadow starts"},
    {"strut.to", "Strut to", STRUT(to), QUANTITY(LENGTH, 0.0, 1e4, 0.6), .example = "0.6 m",
     .meaning = "radius in the aperture where it ends"},
    {"strut.first", "Strut angle", STRUT(first), QUANTITY(ANGLE, -360 * DEG, 360 * DEG, 45 * DEG),
     .example = "45 deg", .meaning = "of the first copy, from +x toward +y"},

    {"site.elevation", "Elevation", SITE(elevation), QUANTITY(ANGLE, 0.0, 90 * DEG, 30 * DEG),
     .example = "32 deg", .meaning = "of the dish's axis above the horizon"},
    {"site.ground", "Ground temperature", SITE(ground), QUANTITY(TEMPERATURE, 0.0, 1e4, 290.0),
     .example = "290 K", .meaning = "what spilled rays below the horizon see"},
    {"site.sky", "Sky temperature", SITE(sky), QUANTITY(TEMPERATURE, 0.0, 1e4, 10.0),
     .example = "10 K", .meaning = "what all other rays see"},

    {"losses.ohmic", "Ohmic loss", DESIGN(ohmic), QUANTITY(LEVEL, 0.0, 100.0, 0.0),
     .example = "0.05 dB", .meaning = "in the feed line and the surfaces"},
    {"losses.mismatch", "Mismatch", DESIGN(mismatch), QUANTITY(LEVEL, 0.0, 100.0, 0.0),
     .example = "0.04 dB", .meaning = "reflected at the feed's input"},
};

const int ev_parameter_table_count = sizeof ev_parameter_table / sizeof ev_parameter_table[0];
