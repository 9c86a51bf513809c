/* Every text that a diagnostic says, one line an id, in the order in which a person meets them.
 * Use ev_report: it joins the id to its text, and the compiler checks the arguments. Rules: what is
 * wrong, then what was expected, then what to do; names and values in single quotes; no full stop.
 */
#pragma once

#include "base/diagnostic.h"

/* ev_report(&diagnostics, EV_SEVERITY_ERROR, unit_missing, &place, ...): the arguments of the text
 * EV_MESSAGE_unit_missing. */
#define ev_report(diagnostics, severity, id, place, ...)                                           \
    ev_diagnose(diagnostics, severity, #id, place, EV_MESSAGE_##id, __VA_ARGS__)

/* Files */
#define EV_MESSAGE_file_missing "there is no file '%s'; check the name and the folder"
#define EV_MESSAGE_file_is_folder "'%s' is a folder; name a file in it"
#define EV_MESSAGE_file_not_regular                                                                \
    "'%s' is not an ordinary file (a device or a pipe?); name a file"
#define EV_MESSAGE_file_unreadable "cannot be read (%s)"
#define EV_MESSAGE_file_too_large                                                                  \
    "too large: files of this kind hold at most %.3g MB; is this the right file?"
#define EV_MESSAGE_file_not_written                                                                \
    "cannot be written (%s); the file that was there, if any, is untouched"
#define EV_MESSAGE_path_too_long "the path '%.60s...' is too long; at most %d bytes are kept"

/* The text of a scene */
#define EV_MESSAGE_scene_empty "the file is %s; a scene starts with 'evenpath: 1'"
#define EV_MESSAGE_not_utf8 "byte 0x%02X is not UTF-8 text; save the file as UTF-8"
#define EV_MESSAGE_control_character                                                               \
    "control character 0x%02X in the text; is this a scene file? If so, remove it"
#define EV_MESSAGE_yaml_syntax "not readable as YAML: %s"
#define EV_MESSAGE_yaml_alias                                                                      \
    "%s are not used in scene files; write the value itself where it is needed"
#define EV_MESSAGE_yaml_several "a second document starts here; a scene is one document%s"
#define EV_MESSAGE_yaml_too_deep "nested more than %d deep; a scene needs four levels"
#define EV_MESSAGE_yaml_too_many "more than %d values; a scene has a few hundred at most"

/* Keys */
#define EV_MESSAGE_key_unknown "unknown key '%s' in %s; did you mean '%s'?"
#define EV_MESSAGE_key_unknown_list "unknown key '%s' in %s; known are: %s"
#define EV_MESSAGE_key_misplaced "'%s' does not belong in %s; it belongs in '%s'"
#define EV_MESSAGE_key_duplicate "'%s' is given twice (first in line %d); remove one"
#define EV_MESSAGE_key_not_plain "a key must be a plain word%s"
#define EV_MESSAGE_key_missing "%s needs '%s'; add for example '%s'"
#define EV_MESSAGE_key_missing_choice "%s needs one of %s; add for example '%s'"
#define EV_MESSAGE_choice_two "'%s' and '%s' say the same thing; give one of %s"
#define EV_MESSAGE_sub_three                                                                       \
    "'%s' is one too many: the shape (magnification or eccentricity), interfocal and diameter of " \
    "a "                                                                                           \
    "subreflector follow from any two; remove one"
#define EV_MESSAGE_sub_one                                                                         \
    "a subreflector needs two of: magnification or eccentricity, interfocal, diameter; %s"
#define EV_MESSAGE_version_missing "the scene does not say its format; start it with '%s'"
#define EV_MESSAGE_version_wrong "format '%s' is not known; this program reads 'evenpath: 1'"
#define EV_MESSAGE_exponent_on_gaussian                                                            \
    "a gaussian pattern has no exponent ('%s'); give its edge_taper, for example 'edge_taper: 11 " \
    "dB'"

#define EV_MESSAGE_taper_on_table "'%s' has no effect: the table is the whole pattern"

/* Values */
#define EV_MESSAGE_not_mapping "'%s' takes keys with values below it, not %s"
#define EV_MESSAGE_not_list "'%s' takes a list, each entry starting with '-', not %s"
#define EV_MESSAGE_not_value "'%s' takes %s, not %s"
#define EV_MESSAGE_vector_count "'%s' takes %d values, here are %d"
#define EV_MESSAGE_list_count "'%s' holds at most %d entries, here are %d"
#define EV_MESSAGE_not_number "'%s' in '%s' is no number; expected for example '%s'"
#define EV_MESSAGE_unit_missing "'%s' in '%s' needs its unit: %s"
#define EV_MESSAGE_unit_unknown "unknown unit '%s' in '%s'; expected %s"
#define EV_MESSAGE_unit_unwanted "'%s' takes a plain number; remove the unit '%s'"
#define EV_MESSAGE_not_finite "'%s' in '%s' is not a finite number"
#define EV_MESSAGE_out_of_range "'%s' must lie between %s and %s, here it is %s"
#define EV_MESSAGE_not_whole "'%s' takes a whole number, here it is %s"
#define EV_MESSAGE_word_unknown "'%s' is not known for '%s'; expected %s"
#define EV_MESSAGE_word_is_vector "'%s: %s' is given by its numbers: write '%s: [%s]'"
#define EV_MESSAGE_text_too_long "'%s' is too long: at most %d bytes"
#define EV_MESSAGE_text_empty "'%s' is empty; give it a name or leave it out"
#define EV_MESSAGE_name_illegal                                                                    \
    "'%s' cannot be a name: use letters, digits, spaces, '-' and '_', no '.', '=' or control "     \
    "characters"
#define EV_MESSAGE_name_twice "the name '%s' is taken by another entry of '%s'; names must differ"

/* Assignments */
#define EV_MESSAGE_assignment_form "'%s' is not an assignment; write name=value, for example '%s'"
#define EV_MESSAGE_address_unknown "there is no parameter '%s'; did you mean '%s'?"
#define EV_MESSAGE_sub_absent                                                                      \
    "'%s' cannot be set: this antenna has no subreflector; set sub.shape=hyperboloid (or "         \
    "ellipsoid) first"
#define EV_MESSAGE_entry_absent "'%s' cannot be set: this antenna has no %s"

/* Tables of numbers: patterns, limits */
#define EV_MESSAGE_table_header "the first line of this table must be '%s', here it is '%.60s'"
#define EV_MESSAGE_table_columns "%d values in a line, expected %d as in the header"
#define EV_MESSAGE_table_number "'%.40s' is no number; expected plain numbers between commas"
#define EV_MESSAGE_table_angle "theta_deg is %s; expected 0 to 180"
#define EV_MESSAGE_table_order "theta_deg must rise from line to line: %s comes after %s"
#define EV_MESSAGE_table_level "%s is %s dB; expected -300 to 300"
#define EV_MESSAGE_table_phase "phase_deg is %s; expected -1e6 to 1e6"
#define EV_MESSAGE_table_short "%d angles; a pattern needs at least 2, better one every few degrees"
#define EV_MESSAGE_table_long "more than %d angles; thin the table out"
#define EV_MESSAGE_limit_angle "angle_deg is %s; expected 0 to 180"
#define EV_MESSAGE_limit_order "angle_deg must not fall from line to line: %s comes after %s"
#define EV_MESSAGE_limit_short "%d angles; a limit needs at least 2"
#define EV_MESSAGE_table_no_power                                                                  \
    "the table '%s' radiates nothing: all its levels are below -200 dB"

/* Saving */
#define EV_MESSAGE_save_no_path "the scene has no file name yet%s; give one"
#define EV_MESSAGE_save_unfaithful                                                                 \
    "not saved: written into '%s', the settings would not read back the same; save under a new "   \
    "name"
#define EV_MESSAGE_save_changed                                                                    \
    "not saved: '%s' was changed by someone else since it was read; open it again, or save under " \
    "another name"

/* Problems of an antenna: {name} is the parameter, {0} and {1} are the problem's values. */
#define EV_MESSAGE_not_positive "'{name}' comes out as {0}; it must be more than zero"
#define EV_MESSAGE_geometry_not_finite                                                             \
    "'{name}' cannot be worked out from the values given; check those it follows from"
#define EV_MESSAGE_depth_with_offset                                                               \
    "'{name}' fixes the focal length of a symmetric dish only; with an offset give focal_length "  \
    "or "                                                                                          \
    "f_over_d"
#define EV_MESSAGE_sub_shape                                                                       \
    "'{name}' does not suit the shape (eccentricity {0}): a hyperboloid's is above 1, an "         \
    "ellipsoid's below 1, and the magnification of both above 1"
#define EV_MESSAGE_sub_impossible                                                                  \
    "'{name}': no subreflector meets these values; change the magnification, interfocal distance " \
    "or diameter"
#define EV_MESSAGE_sub_oversize                                                                    \
    "the subreflector's surface is not wide enough for {0} of oversize; give less"
#define EV_MESSAGE_sub_larger_than_dish                                                            \
    "the subreflector ({0}) is larger than the dish ({1}); make it smaller"
#define EV_MESSAGE_sub_tilt_on_symmetric                                                           \
    "'{name}' is for offset antennas; set it to 0 deg, or give the dish an offset"
#define EV_MESSAGE_sub_diameter_on_offset                                                          \
    "on an offset antenna the subreflector's rim follows from the dish's; give magnification (or " \
    "eccentricity) and interfocal instead of '{name}'"
#define EV_MESSAGE_hole_too_large "the hole ({0}) is larger than the dish ({1}); make it smaller"
#define EV_MESSAGE_feed_in_mirror                                                                  \
    "the feed lies {0} behind the surface it should light; check its shift and defocus, and the "  \
    "focal length"
#define EV_MESSAGE_feed_aim "the direction in '{name}' has no length; give for example [0, 0, -1]"
#define EV_MESSAGE_feed_without_table "'{name}': a pattern of kind table needs 'table: FILE.csv'"
#define EV_MESSAGE_taper_impossible                                                                \
    "'{name}' cannot be met: what the feed lights reaches 90 degrees from its axis; give an "      \
    "exponent"
#define EV_MESSAGE_toward_impossible "'{name}': there is no such direction in front of the dish"
#define EV_MESSAGE_strut_radii                                                                     \
    "a strut goes outward: its 'from' ({0}) must be less than its 'to' ({1})"
#define EV_MESSAGE_no_feed "an antenna needs at least one feed"
#define EV_MESSAGE_dish_small                                                                      \
    "the dish is only {0} wavelengths across; under 10 rays are a guide, not a measure"
#define EV_MESSAGE_sub_small                                                                       \
    "the subreflector is only {0} wavelengths across; under 5 its diffraction loss, which rays "   \
    "do "                                                                                          \
    "not show, matters"
#define EV_MESSAGE_hole_in_cone                                                                    \
    "the hole ({0}) is wider than the shadow in the middle ({1}): power of the feed falls "        \
    "through it"
#define EV_MESSAGE_feed_misses                                                                     \
    "'{name}': the feed lights none of its mirror; check its aim and tilt"
#define EV_MESSAGE_table_ends "'{name}': the pattern table ends at {0}; no power is assumed beyond"
#define EV_MESSAGE_clearance                                                                       \
    "the feed or the subreflector reaches {0} into the beam; '{name}' decides it"
#define EV_MESSAGE_feed_near                                                                       \
    "the feed is only {0} wavelengths from its mirror; under 2 it is no point source there"
