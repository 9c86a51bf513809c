/* A scene: the document a design was read from, and the design. The only reader and writer of
 * scene files. Loading is all or nothing; saving splices only what changed and replaces the file
 * atomically (write beside it, fsync, rename). */
#pragma once

#include "base/diagnostic.h"
#include "optics/design.h"

typedef struct ev_scene ev_scene;

/* NULL with diagnostics when there is any error. Warnings alone still load. */
ev_scene *ev_scene_load(const char *path, ev_diagnostics *diagnostics);
ev_scene *ev_scene_parse(const char *text, size_t size, const char *name,
                         ev_diagnostics *diagnostics);

/* A scene that no file says yet; saving writes a clean one. `design` must be resolved. */
ev_scene *ev_scene_create(const ev_design *design);
void ev_scene_destroy(ev_scene *scene);

const char *ev_scene_path(const ev_scene *scene); /* "" when it has none yet */

/* The design as in the document, resolved. */
const ev_design *ev_scene_design(const ev_scene *scene);

/* The problems of a design in words, errors and warnings, as diagnostics that point into the
 * document where the parameter stands. Returns true when there is no error. */
bool ev_scene_check(const ev_scene *scene, const ev_design *design, ev_diagnostics *diagnostics);

/* "name=value": sets one parameter of `design` (a copy of the scene's). */
bool ev_scene_assign(const ev_scene *scene, ev_design *design, int selected_feed,
                     const char *assignment, ev_diagnostics *diagnostics);

/* Remembers how a person spelled a value ("3/8 in"), so that saving writes it so, for as long as
 * that is the parameter's value. */
void ev_scene_remember_spelling(ev_scene *scene, const char *address, double value,
                                const char *text);

/* The document with `design` spliced in; malloc'd, *size without the final 0. */
char *ev_scene_text(const ev_scene *scene, const ev_design *design, size_t *size);

/* Writes that text to `path` (NULL: where it came from) and makes it the scene's document. What was
 * written is read back first: false with diagnostics, and no file touched, when the design is not
 * sound, the text would not say the same design, or someone else changed the file meanwhile. */
bool ev_scene_save(ev_scene *scene, const ev_design *design, const char *path,
                   ev_diagnostics *diagnostics);

/* Reads a pattern table (CSV: theta_deg, e_db, h_db[, phase_deg]) for use by designs of this
 * scene; cached by path, lives as long as the scene. NULL with diagnostics. Relative paths are
 * against the scene's folder. */
const ev_pattern_table *ev_scene_pattern(ev_scene *scene, const char *path,
                                         ev_diagnostics *diagnostics);
