/* `evenpath beam`: what the antenna radiates, held against limits on request. */
#include "app/command.h"

#include "report/beam.h"
#include "scene/limit_file.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

/* All that the report points into. */
typedef struct work {
    ev_loaded loaded;
    ev_feed_budget budget;
    ev_beam_source *source;
    ev_beam beam, second;
    ev_beam_report report;
    double *samples[EV_BEAM_REPORT_CUTS][2]; /* co, cross */
} work;

static double seconds(void)
{
    struct timespec now;
    clock_gettime(CLOCK_MONOTONIC, &now);
    return (double)now.tv_sec + 1e-9 * (double)now.tv_nsec;
}

typedef struct progress {
    double start, shown;
} progress;

/* On stderr, once a second, when a person is there to read it. */
static bool show_progress(void *context, double share)
{
    progress *at = context;
    double now = seconds(), spent = now - at->start;
    if (now - at->shown > 1.0 && share > 0.01) {
        fprintf(stderr, "\rsecond opinion: %3.0f %%, %.0f s to go ", 100.0 * share,
                spent * (1.0 - share) / share);
        at->shown = now;
    }
    return true;
}

/* Says how long it will take before it starts. */
static void find_second(work *all)
{
    const ev_antenna *antenna = &all->loaded.antenna;
    int feed = all->loaded.feed;
    ev_diffraction_plan plan = ev_diffraction_plan_for(antenna, feed);
    double start = seconds(), done = ev_diffraction_probe(antenna, feed, 1e7);
    double rate = done / (seconds() - start);
    fprintf(stderr, "second opinion: about %.0f s\n", plan.pairs / rate);
    progress at = {.start = seconds(), .shown = seconds()};
    ev_diffraction how;
    ev_beam_source *source = ev_diffraction_source(antenna, feed, show_progress, &at, &how);
    fputc('\r', stderr);
    if (!source)
        return;
    if (ev_beam_compute_from(source, antenna, feed, &all->budget, &all->second))
        all->report.second = &all->second;
    ev_beam_source_destroy(source);
}

/* "s465", "s580" or a file. */
static int find_limit(const ev_options *options, const ev_antenna *antenna, ev_limit *limit)
{
    double waves = 2.0 * antenna->radius / antenna->wavelength;
    if (strcmp(options->limits, "s465") == 0)
        *limit = ev_limit_s465(waves);
    else if (strcmp(options->limits, "s580") == 0)
        *limit = ev_limit_s580(waves);
    else {
        ev_diagnostics diagnostics;
        ev_diagnostics_init(&diagnostics);
        bool read = ev_limit_read(options->limits, limit, &diagnostics);
        int code = read ? EV_EXIT_DONE : ev_exit_code_of(&diagnostics);
        ev_diagnostics_print(&diagnostics, stderr);
        ev_diagnostics_clear(&diagnostics);
        return code;
    }
    return EV_EXIT_DONE;
}

/* Half width of a cut: as asked, far enough for limits, else some lobes about the beam. */
static double span_of(const ev_options *options, const work *all)
{
    if (options->span > 0.0)
        return options->span * EV_PI / 180.0;
    if (options->limits)
        return 0.5 * EV_PI * (1.0 - 1e-9);
    double lobe = all->loaded.antenna.wavelength / (2.0 * all->loaded.antenna.radius);
    return fmin(12.0 * lobe, 0.5 * EV_PI * (1.0 - 1e-9));
}

static void add_cut(const ev_options *options, work *all, double phi, const ev_limit *limit)
{
    int index = all->report.cut_count++;
    ev_beam_report_cut *at = &all->report.cuts[index];
    double span = span_of(options, all);
    int count = ev_beam_cut_samples(&all->loaded.antenna, -span, span) | 1;
    at->cut = (ev_beam_cut){
        .centre = all->beam.peak, .phi = phi, .from = -span, .to = span, .count = count};
    for (int k = 0; k < 2; k++)
        if (!(all->samples[index][k] = calloc((size_t)count, sizeof(double))))
            abort();
    ev_beam_cut_compute(all->source, &at->cut, all->samples[index][0], all->samples[index][1]);
    ev_beam_cut_add_pedestal(&all->loaded.antenna, &all->budget, all->beam.peak, &at->cut,
                             all->samples[index][0]);
    at->co_dbi = all->samples[index][0];
    at->cross_dbi = all->samples[index][1];
    if (!limit)
        return;
    double *angles = calloc((size_t)count, sizeof *angles);
    if (!angles)
        abort();
    for (int i = 0; i < count; i++)
        angles[i] = ev_beam_cut_angle(&at->cut, i);
    at->limited = true;
    at->limit = *limit;
    at->result = ev_limit_check(limit, angles, at->co_dbi, count);
    free(angles);
}

enum { MAP_SIDE = 129 };

/* A square of direction cosines about the peak. */
static void print_map(const ev_options *options, const work *all)
{
    int side = options->grid > 0 ? options->grid : MAP_SIDE;
    ev_beam_map map = {.x = all->beam.peak.x,
                       .y = all->beam.peak.y,
                       .half_width = sin(span_of(options, all)),
                       .side = side};
    float *co = calloc((size_t)side * (size_t)side, sizeof *co);
    float *cross = calloc((size_t)side * (size_t)side, sizeof *cross);
    if (!co || !cross)
        abort();
    ev_beam_map_compute(all->source, &map, co, cross);
    fputs("x,y,co_dbi,cross_dbi\r\n", stdout);
    double step = 2.0 * map.half_width / (side - 1);
    for (int row = 0; row < side; row++)
        for (int column = 0; column < side; column++) {
            size_t at = (size_t)row * (size_t)side + (size_t)column;
            double x = map.x - map.half_width + column * step;
            double y = map.y + map.half_width - row * step;
            if (isfinite(co[at]))
                printf("%.9g,%.9g,%.6g,%.6g\r\n", x, y, (double)co[at], (double)cross[at]);
        }
    free(co);
    free(cross);
}

static int print(const ev_options *options, const work *all)
{
    bool met = true;
    if (options->map)
        print_map(options, all);
    else if (options->json)
        ev_beam_report_json(stdout, &all->report, options->has_cut);
    else if (options->csv && options->has_cut)
        ev_beam_report_cut_csv(stdout, &all->report);
    else if (options->csv)
        ev_beam_report_csv(stdout, &all->report);
    else
        ev_beam_report_text(stdout, &all->report);
    for (int i = 0; i < all->report.cut_count; i++)
        met &= !all->report.cuts[i].limited || all->report.cuts[i].result.met;
    int code = ev_finish_output();
    return code != EV_EXIT_DONE ? code : met ? EV_EXIT_DONE : EV_EXIT_CHECK_FAILED;
}

static int compute(const ev_options *options, work *all)
{
    ev_limit limit;
    const ev_antenna *antenna = &all->loaded.antenna;
    if (options->limits) {
        int code = find_limit(options, antenna, &limit);
        if (code != EV_EXIT_DONE)
            return code;
    }
    ev_budget_compute_feed(antenna, all->loaded.feed, &all->budget);
    all->source = ev_beam_source_create(antenna, all->loaded.feed, EV_BEAM_EXACT);
    if (!ev_beam_compute_from(all->source, antenna, all->loaded.feed, &all->budget, &all->beam)) {
        fprintf(stderr, "evenpath: the feed lights nothing, so there is no beam; check its aim\n");
        return EV_EXIT_BAD_INPUT;
    }
    all->report = (ev_beam_report){.design = &all->loaded.design,
                                   .antenna = antenna,
                                   .feed = all->loaded.feed,
                                   .budget = &all->budget,
                                   .beam = &all->beam,
                                   .limit_name = options->limits};
    const ev_limit *held = options->limits ? &limit : NULL;
    if (options->has_cut) {
        add_cut(options, all, options->cut * EV_PI / 180.0, held);
    } else if (held) {
        add_cut(options, all, 0.0, held);
        add_cut(options, all, 0.5 * EV_PI, held);
    }
    if (options->second && antenna->dual)
        find_second(all);
    return print(options, all);
}

int ev_command_beam(const ev_options *options)
{
    work *all = calloc(1, sizeof *all);
    if (!all)
        abort();
    int code = ev_load(options, &all->loaded);
    if (code == EV_EXIT_DONE) {
        code = compute(options, all);
        ev_unload(&all->loaded);
    }
    if (all->source)
        ev_beam_source_destroy(all->source);
    for (int i = 0; i < EV_BEAM_REPORT_CUTS; i++)
        for (int k = 0; k < 2; k++)
            free(all->samples[i][k]);
    free(all);
    return code;
}
