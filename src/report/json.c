/* JSON: the keys of the output contract. Called for --json and, flattened, for --csv. */
#include "report/json.h"

#include "study/ledger.h"

#include <math.h>
#include <stddef.h>

static double degrees(double radians)
{
    return radians * 180.0 / EV_PI;
}

void ev_json_put(json_t *to, const char *key, double value)
{
    if (isfinite(value))
        json_object_set_new(to, key, json_real(value));
}

static json_t *vector(ev_vec3 v)
{
    return json_pack("[fff]", v.x, v.y, v.z);
}

static json_t *rim(const ev_layout *layout)
{
    json_t *to = json_object();
    ev_json_put(to, "long_axis_m", layout->rim_long_axis);
    ev_json_put(to, "short_axis_m", layout->rim_short_axis);
    ev_json_put(to, "tilt_deg", degrees(layout->rim_tilt));
    ev_json_put(to, "depth_m", layout->rim_depth);
    ev_json_put(to, "focus_to_top_m", layout->focus_to_top);
    ev_json_put(to, "focus_to_bottom_m", layout->focus_to_bottom);
    ev_json_put(to, "focus_to_side_m", layout->focus_to_side);
    ev_json_put(to, "focus_to_centre_m", layout->focus_to_centre);
    return to;
}

static json_t *sub(const ev_antenna *antenna)
{
    const ev_layout *layout = &antenna->layout;
    bool hyperboloid = antenna->sub.shape == EV_SUB_HYPERBOLOID;
    json_t *to = json_object();
    json_object_set_new(to, "shape", json_string(hyperboloid ? "hyperboloid" : "ellipsoid"));
    ev_json_put(to, "eccentricity", layout->sub_eccentricity);
    ev_json_put(to, "magnification", layout->sub_magnification);
    ev_json_put(to, "interfocal_m", layout->sub_interfocal);
    ev_json_put(to, "half_angle_deg", degrees(layout->sub_half_angle));
    ev_json_put(to, "axis_tilt_deg", degrees(layout->sub_axis_tilt));
    json_object_set_new(to, "vertex_m", vector(layout->sub_vertex));
    json_object_set_new(to, "feed_focus_m", vector(layout->sub_feed_focus));
    ev_json_put(to, "long_axis_m", layout->sub_long_axis);
    ev_json_put(to, "short_axis_m", layout->sub_short_axis);
    return to;
}

static json_t *layout_of(const ev_antenna *antenna)
{
    const ev_layout *layout = &antenna->layout;
    json_t *to = json_object();
    json_object_set_new(to, "kind", json_string(ev_layout_name(layout->kind)));
    ev_json_put(to, "diameter_m", layout->diameter);
    ev_json_put(to, "focal_length_m", layout->focal_length);
    ev_json_put(to, "offset_m", layout->offset);
    ev_json_put(to, "half_angle_deg", degrees(layout->half_angle));
    ev_json_put(to, "equivalent_focal_length_m", layout->equivalent_focal_length);
    ev_json_put(to, "edge_space_loss_db", layout->edge_space_loss_db);
    json_object_set_new(to, "rim", rim(layout));
    if (antenna->dual)
        json_object_set_new(to, "sub", sub(antenna));
    ev_json_put(to, "feed_tilt_deg", degrees(layout->feed_tilt));
    return to;
}

static json_t *stats(const ev_path_stats *path)
{
    json_t *to = json_object();
    ev_json_put(to, "rms_area_m", path->rms_area);
    ev_json_put(to, "rms_power_m", path->rms_power);
    ev_json_put(to, "rms_amplitude_m", path->rms_amplitude);
    ev_json_put(to, "peak_to_valley_m", path->peak_to_valley);
    return to;
}

static json_t *efficiency(const ev_efficiency *eta)
{
    json_t *to = json_object();
    ev_json_put(to, "spillover", eta->spillover);
    ev_json_put(to, "taper", eta->taper);
    ev_json_put(to, "phase", eta->phase);
    ev_json_put(to, "pointing", eta->pointing);
    ev_json_put(to, "polarization", eta->polarization);
    ev_json_put(to, "blockage", eta->blockage);
    ev_json_put(to, "surface", eta->surface);
    ev_json_put(to, "ohmic", eta->ohmic);
    ev_json_put(to, "mismatch", eta->mismatch);
    ev_json_put(to, "total", eta->total);
    ev_json_put(to, "spillover_sub", eta->spillover_sub);
    ev_json_put(to, "spillover_main", eta->spillover_main);
    return to;
}

static json_t *noise(const ev_noise *from)
{
    json_t *to = json_object();
    ev_json_put(to, "spill_ground", from->spill_ground);
    ev_json_put(to, "spill_sky", from->spill_sky);
    ev_json_put(to, "spill_k", from->spill_k);
    ev_json_put(to, "antenna_k", from->antenna_k);
    return to;
}

json_t *ev_json_of_feed(const ev_report *report, int index)
{
    const ev_feed *feed = &report->antenna->feeds[index];
    const ev_feed_budget *budget = &report->budget->feeds[index];
    json_t *to = json_object(), *power = json_object(), *path = stats(&budget->path_error);
    json_object_set_new(to, "name", json_string(report->design->feeds[index].name));
    json_object_set_new(to, "position_m", vector(feed->position));
    json_object_set_new(to, "axis", vector(feed->axis));
    ev_json_put(to, "exponent", feed->exponent);
    ev_json_put(to, "edge_taper_db", feed->edge_taper_db);
    for (int fate = 0; fate < EV_FATE_COUNT; fate++)
        ev_json_put(power, ev_watts_of((ev_fate)fate).id, budget->power[fate]);
    json_object_set_new(to, "power", power);
    json_object_set_new(path, "untilted", stats(&budget->untilted));
    json_object_set_new(to, "path_error", path);
    json_object_set_new(to, "efficiency", efficiency(&budget->efficiency));
    ev_json_put(to, "full_aperture_gain_dbi", budget->full_aperture_gain_dbi);
    ev_json_put(to, "gain_dbi", budget->gain_dbi);
    ev_json_put(to, "gain_on_axis_dbi", budget->gain_on_axis_dbi);
    ev_json_put(to, "rim_top_db", budget->rim_top_db);
    ev_json_put(to, "rim_bottom_db", budget->rim_bottom_db);
    if (report->antenna->site.present)
        json_object_set_new(to, "noise", noise(&budget->noise));
    if (report->beams)
        json_object_set_new(to, "beam", ev_json_of_beam(&report->beams[index]));
    return to;
}

static json_t *verdict_of(const ev_verdict *verdict)
{
    json_t *to = json_object(), *moves = json_array();
    json_object_set_new(to, "id", json_string(ev_verdict_word(verdict->id)));
    json_object_set_new(to, "text", json_string(verdict->text));
    json_object_set_new(to, "advice", json_string(verdict->advice));
    ev_json_put(to, "loss_db", verdict->loss_db);
    ev_json_put(to, "after_dbi", verdict->after_dbi);
    for (int i = 0; i < verdict->move_count; i++) {
        const ev_move *move = &verdict->moves[i];
        json_t *entry = json_object();
        json_object_set_new(entry, "part", json_string(ev_part_word(move->part)));
        json_object_set_new(entry, "axis", json_string(ev_axis_word(move->axis)));
        ev_json_put(entry, "by_m", move->by);
        ev_json_put(entry, "wins_db", move->wins_db);
        json_array_append_new(moves, entry);
    }
    json_object_set_new(to, "moves", moves);
    return to;
}

static json_t *warnings_of(const ev_diagnostics *warnings)
{
    json_t *list = json_array();
    for (int i = 0; warnings && i < warnings->count; i++)
        json_array_append_new(list, json_pack("{ssss}", "id", warnings->items[i].id, "text",
                                              warnings->items[i].text));
    return list;
}

json_t *ev_json_of_report(const ev_report *report)
{
    json_t *to = json_object();
    json_object_set_new(to, "evenpath", json_integer(1));
    json_object_set_new(to, "title", json_string(report->design->title));
    ev_json_put(to, "frequency_hz", report->antenna->frequency);
    ev_json_put(to, "wavelength_m", report->antenna->wavelength);
    json_object_set_new(to, "layout", layout_of(report->antenna));
    json_object_set_new(to, "verdict", verdict_of(report->verdict));
    json_object_set_new(to, "warnings", warnings_of(report->warnings));
    return to;
}

static json_t *whole(const ev_report *report)
{
    json_t *to = ev_json_of_report(report), *feeds = json_array();
    for (int i = 0; i < report->budget->feed_count; i++)
        json_array_append_new(feeds, ev_json_of_feed(report, i));
    json_object_set_new(to, "feeds", feeds);
    return to;
}

void ev_report_json(FILE *stream, const ev_report *reports, int count, bool as_list)
{
    json_t *all = as_list ? json_array() : whole(&reports[0]);
    for (int i = 0; as_list && i < count; i++)
        json_array_append_new(all, whole(&reports[i]));
    json_dumpf(all, stream, JSON_INDENT(2) | JSON_REAL_PRECISION(17));
    fputc('\n', stream);
    json_decref(all);
}
