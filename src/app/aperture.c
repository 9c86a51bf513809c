/* `evenpath aperture`: path error, lighting and shadow on a square grid over the aperture. */
#include "app/command.h"

#include "optics/aperture.h"
#include "optics/budget.h"
#include "study/ledger.h"

#include <stdio.h>

/* Amplitude is relative to the highest on the grid's own points, which a first pass finds. */
static double highest_density(const ev_loaded *loaded, int grid)
{
    const ev_antenna *antenna = &loaded->antenna;
    double highest = 0.0, step = 2.0 * antenna->radius / (grid - 1);
    for (int i = 0; i < grid * grid; i++) {
        double u = (i % grid) * step - antenna->radius, y = (i / grid) * step - antenna->radius;
        if (hypot(u, y) <= antenna->radius)
            highest = fmax(
                highest, ev_aperture_sample(antenna, loaded->feed, antenna->offset + u, y).density);
    }
    return highest;
}

static void print_point(const ev_loaded *loaded, const ev_feed_budget *budget, double x, double y,
                        double highest)
{
    const ev_antenna *antenna = &loaded->antenna;
    ev_sample sample = ev_aperture_sample(antenna, loaded->feed, x, y);
    ev_fate fate = ev_shadow_at(&antenna->shadows, x, y);
    bool hole = fate == EV_FATE_PAST_MAIN;
    printf("%.12g,%.12g,", x, y);
    if (!hole && sample.reached)
        printf("%.12g", ev_sample_error(&sample, budget->wanted) - budget->mean_path_error);
    if (!hole && sample.density > 0.0)
        printf(",%.9g", 10.0 * log10(sample.density / highest));
    else
        fputc(',', stdout);
    printf(",%s\r\n", hole ? "hole" : fate == EV_FATE_APERTURE ? "" : ev_watts_of(fate).id);
}

int ev_command_aperture(const ev_options *options)
{
    ev_loaded loaded;
    int code = ev_load(options, &loaded);
    if (code != EV_EXIT_DONE)
        return code;
    int grid = options->grid > 0 ? options->grid : 65;
    ev_feed_budget budget;
    ev_budget_compute_feed(&loaded.antenna, loaded.feed, &budget);
    double radius = loaded.antenna.radius, step = 2.0 * radius / (grid - 1);
    double highest = highest_density(&loaded, grid);
    fputs("x_m,y_m,path_error_m,amplitude_db,shadow\r\n", stdout);
    for (int row = 0; row < grid; row++)
        for (int column = 0; column < grid; column++) {
            double u = column * step - radius, y = row * step - radius;
            if (hypot(u, y) <= radius * (1.0 + 1e-12))
                print_point(&loaded, &budget, loaded.antenna.offset + u, y, highest);
        }
    ev_unload(&loaded);
    return ev_finish_output();
}
