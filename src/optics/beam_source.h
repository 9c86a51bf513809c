/* A current sheet with its shadows, ready for any direction. Private to optics (and to tests that
 * prescribe aperture fields): beam.h is the way in. */
#pragma once

#include "optics/beam.h"
#include "optics/beam_sheet.h"

typedef struct ev_beam_recipe {
    ev_sheet sheet;
    ev_polarization polarization;
    double efficiency;         /* power factor on all gains */
    double phase;              /* rad, of all fields */
    const ev_shadows *shadows; /* NULL: none; copied */
    ev_sheet shadow_sheet;     /* whose currents the shadows take out; without any: the sheet's */
    /* Where the currents end within the rim: called for points (x, y, weight malloc'd) dense enough
     * for `phase` radians from centre to rim; NULL where they cannot. */
    void (*edge_points)(const void *context, double phase, double **x, double **y, double **weight,
                        int *count);
    void *owned; /* freed with the source; what later calls of contexts point to */
} ev_beam_recipe;

/* NULL when the sheet gave up; `owned` is then freed. */
ev_beam_source *ev_beam_source_make(const ev_beam_recipe *recipe);

/* The sheet of an antenna's ray currents; context for it is malloc'd (recipe->owned). */
void ev_beam_currents_recipe(const ev_antenna *antenna, int feed, ev_beam_quality quality,
                             ev_beam_recipe *recipe);

double ev_beam_source_wavelengths(const ev_beam_source *source); /* across the aperture */
ev_polarization ev_beam_source_polarization(const ev_beam_source *source);
