/* `evenpath rays`: every leg of a fan as CSV. A cell is empty where a ray has no such point. */
#include "app/command.h"

#include "optics/budget.h"
#include "optics/trace.h"
#include "study/ledger.h"

#include <stdio.h>
#include <stdlib.h>

static void print_point(const ev_ray *ray, int index)
{
    if (index < 0 || index >= ray->point_count) {
        fputs(",,,", stdout);
        return;
    }
    ev_vec3 at = ray->points[index];
    printf(",%.12g,%.12g,%.12g", at.x, at.y, at.z);
}

static void print_leg(const ev_ray *ray, int from, int to)
{
    if (from < 0 || to >= ray->point_count)
        fputs(",", stdout);
    else
        printf(",%.12g", ev_vec3_length(ev_vec3_sub(ray->points[to], ray->points[from])));
}

static void print_number(double value)
{
    if (isfinite(value))
        printf(",%.12g", value);
    else
        fputs(",", stdout);
}

static void print_ray(const ev_loaded *loaded, const ev_ray *ray, int number)
{
    int sub = loaded->antenna.dual ? 1 : -1, main = loaded->antenna.dual ? 2 : 1;
    printf("%s,%d,%s,%.12g,%.12g,%.12g,%.12g", loaded->design.feeds[ray->feed].name, number,
           ev_watts_of(ray->fate).id, ray->power, ray->direction.x, ray->direction.y,
           ray->direction.z);
    print_point(ray, 0);
    print_point(ray, sub);
    print_point(ray, main);
    print_point(ray, main + 1);
    print_leg(ray, sub - 1, sub);
    print_leg(ray, main - 1, main);
    print_leg(ray, main, main + 1);
    print_number(ray->path);
    print_number(ray->path_error);
    printf(",%.12g,%.12g,%.12g\r\n", ray->leaving.x, ray->leaving.y, ray->leaving.z);
}

int ev_command_rays(const ev_options *options)
{
    ev_loaded loaded;
    int code = ev_load(options, &loaded);
    if (code != EV_EXIT_DONE)
        return code;
    int count = options->rays > 0 ? options->rays : 1000;
    ev_ray *rays = calloc((size_t)count, sizeof *rays);
    if (!rays)
        abort();
    if (options->section) {
        ev_feed_budget budget;
        ev_budget_compute_feed(&loaded.antenna, loaded.feed, &budget);
        count = ev_trace_section(&loaded.antenna, loaded.feed, count, budget.power, rays);
    } else {
        ev_trace_fan(&loaded.antenna, loaded.feed, count, rays);
    }
    fputs("feed,ray,fate,power,direction_x,direction_y,direction_z,feed_x_m,feed_y_m,feed_z_m,"
          "sub_x_m,sub_y_m,sub_z_m,main_x_m,main_y_m,main_z_m,end_x_m,end_y_m,end_z_m,"
          "to_sub_m,to_main_m,to_end_m,path_m,path_error_m,leaving_x,leaving_y,leaving_z\r\n",
          stdout);
    for (int i = 0; i < count; i++)
        print_ray(&loaded, &rays[i], i + 1);
    free(rays);
    ev_unload(&loaded);
    return ev_finish_output();
}
