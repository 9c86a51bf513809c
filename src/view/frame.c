/* One frame: bring the numbers up to date, put everything shown on one sheet, redraw the layers
 * that show something new, and lay them over the 3D picture. */
#include "view/state.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

static void fill_fields(ev_view *view, ev_sheet *sheet)
{
    sheet->field_count = view->row_count;
    for (int i = 0; i < view->row_count; ++i) {
        ev_field *field = &sheet->fields[i];
        *field = (ev_field){0};
        ev_field_show(&view->model, &view->rows[i], field);
        field->grabbed = i == view->grabbed || (ev_view_moving(view) && i == view->drag.field);
        field->editing = i == view->editing;
        if (field->editing) {
            ev_edit_show(&view->edit, field->edit_text, sizeof field->edit_text, &field->edit_caret,
                         &field->edit_anchor);
            memcpy(field->complaint, view->complaint, sizeof field->complaint);
        }
    }
}

static void fill_plates(const ev_view *view, ev_sheet *sheet)
{
    const ev_model *model = &view->model;
    for (int i = 0; model->has_beams && i < model->design.feed_count; ++i) {
        sheet->beams[i] = &model->beams[i];
    }
    sheet->limit = model->has_beams ? &model->limit : NULL;
    sheet->kept_beam = model->has_kept && model->has_kept_beam ? &model->kept_beam : NULL;
    sheet->gain_curve = model->has_gain ? &model->gain : NULL;
    sheet->beam_stale = ev_model_beams_stale(model);
    sheet->cut_stale = ev_model_gain_stale(model);
    sheet->plate = view->plate;
}

static void fill_numbers(const ev_view *view, ev_sheet *sheet)
{
    const ev_model *model = &view->model;
    const ev_study *study = model->study;
    sheet->design = &model->design;
    sheet->antenna = &study->antenna;
    sheet->budget = &study->budget;
    sheet->verdict = &model->verdict;
    sheet->kept = model->has_kept ? &model->kept : NULL;
    sheet->loss_map = model->has_map ? &model->map : NULL;
    sheet->rays = study->rays;
    sheet->ray_count = study->ray_count;
    sheet->aperture = study->aperture;
    sheet->front = study->front;
    sheet->front_x = study->front_x;
    sheet->front_count = EV_STUDY_FRONT_COUNT;
    sheet->feed = study->feed;
    sheet->part = model->part;
    sheet->detail_axis[0] = EV_AXIS_OUT;
    sheet->detail_axis[1] = EV_AXIS_UP;
    sheet->stale = ev_model_stale(model);
    sheet->unsaved = ev_model_unsaved(model);
    sheet->can_undo = ev_history_can_undo(model->history);
    sheet->can_redo = ev_history_can_redo(model->history);
}

/* During a drag scales stay, unless what is shown has outgrown or outshrunk them plainly. */
static bool is_far_off(double held, double suits)
{
    return !(held > 0.0) || held > 2.6 * suits || suits > 2.6 * held;
}

static void fill_scales(ev_view *view, ev_sheet *sheet)
{
    ev_sheet_scales(&view->page, sheet);
    if (view->showing) {
        sheet->front_exaggeration =
            ev_show_exaggeration(view->page.width, view->page.height, sheet);
    }
    double *const scales[] = {&sheet->front_exaggeration, &sheet->aperture_range,
                              &sheet->ledger_range, &sheet->beam_range, &sheet->cut_range};
    for (size_t i = 0; i < sizeof scales / sizeof scales[0]; ++i) {
        if (ev_view_moving(view) && !is_far_off(view->ranges[i], *scales[i])) {
            *scales[i] = view->ranges[i];
        }
        view->ranges[i] = *scales[i];
    }
}

const ev_sheet *ev_view_sheet(ev_view *view)
{
    ev_sheet *sheet = &view->sheet;
    if (!view->model.scene) {
        return NULL;
    }
    memset(sheet, 0, sizeof *sheet);
    fill_numbers(view, sheet);
    fill_plates(view, sheet);
    fill_fields(view, sheet);
    sheet->stage = view->stage;
    sheet->dark = view->dark;
    sheet->detail = view->detail;
    sheet->grabbed = ev_view_moving(view);
    sheet->zoom = view->zoom;
    sheet->pan_x = view->pan_x;
    sheet->pan_y = view->pan_y;
    snprintf(sheet->pointed, sizeof sheet->pointed, "%s",
             ev_view_moving(view) ? "" : view->pointed);
    memcpy(sheet->notice, view->notice, sizeof sheet->notice);
    sheet->action_count = ev_action_list(view, sheet->actions);
    fill_scales(view, sheet);
    return sheet;
}

#define STAMP(KIND, MEMBER)                                                                        \
    input->stamps[EV_STAMP_##KIND] =                                                               \
        ev_stamp(input->stamps[EV_STAMP_##KIND], &(MEMBER), sizeof(MEMBER))

static void stamp_page(const ev_view *view, ev_layers_input *input)
{
    STAMP(PAGE, view->page.width);
    STAMP(PAGE, view->page.height);
    STAMP(PAGE, view->window.scale);
    STAMP(PAGE, view->dark);
    STAMP(POINTED, view->pointed);
    STAMP(GALLERY, view->gallery.count);
}

static void stamp_numbers(const ev_view *view, ev_layers_input *input)
{
    const ev_sheet *sheet = &view->sheet;
    const ev_model *model = &view->model;
    STAMP(NUMBERS, model->study_serial);
    STAMP(NUMBERS, model->want.feed);
    STAMP(NUMBERS, model->want.rays);
    STAMP(NUMBERS, model->want.coarse);
    STAMP(NUMBERS, model->has_kept);
    STAMP(NUMBERS, sheet->front_exaggeration);
    STAMP(NUMBERS, sheet->aperture_range);
    STAMP(NUMBERS, sheet->ledger_range);
    if (model->has_kept) {
        STAMP(NUMBERS, model->kept);
    }
    STAMP(PLATES, sheet->plate);
    STAMP(PLATES, sheet->beam_range);
    STAMP(PLATES, sheet->cut_range);
    STAMP(PLATES, sheet->beam_stale);
    STAMP(PLATES, sheet->cut_stale);
    STAMP(PLATES, model->answers);
    STAMP(VERDICT, model->verdict);
    STAMP(VERDICT, sheet->stale);
}

static void stamp_rest(const ev_view *view, ev_layers_input *input)
{
    const ev_sheet *sheet = &view->sheet;
    STAMP(SCENE, sheet->design->title);
    STAMP(SCENE, sheet->design->frequencies[0]);
    STAMP(SCENE, sheet->unsaved);
    STAMP(SCENE, sheet->can_undo);
    STAMP(SCENE, sheet->can_redo);
    STAMP(SCENE, sheet->notice);
    STAMP(FIELDS, sheet->fields);
    STAMP(STAGE, sheet->stage);
    STAMP(STAGE, sheet->zoom);
    STAMP(STAGE, sheet->pan_x);
    STAMP(STAGE, sheet->pan_y);
    STAMP(STAGE, sheet->part);
    STAMP(STAGE, sheet->feed);
    STAMP(STAGE, sheet->detail);
    STAMP(STAGE, sheet->grabbed);
    STAMP(STAGE, view->model.has_map);
    STAMP(STAGE, view->model.map_serial);
    if (sheet->stage == EV_STAGE_SPACE) {
        STAMP(STAGE, view->camera);
    }
}

/* Drawer and list of actions are stamped as they are shown: the whole of each is small. */
static void stamp_overlays(ev_layers_input *input)
{
    if (input->actions) {
        STAMP(FINDER, *input->actions);
    }
    if (input->drawer) {
        STAMP(DRAWER, *input->drawer);
    }
}

static void measure_page(ev_view *view)
{
    double width = fmax(view->window.width, EV_WINDOW_LEAST_WIDTH);
    double height = fmax(view->window.height, EV_WINDOW_LEAST_HEIGHT);
    if (width != view->page.width || height != view->page.height) {
        view->page = ev_page_layout(width, height);
    }
}

static void compute(ev_view *view)
{
    if (!view->model.scene) {
        return;
    }
    view->model.wants_gain = view->plate == EV_PLATE_CUT;
    ev_model_compute(&view->model, view->stage, ev_view_moving(view));
    view->row_count = ev_fields_list(&view->model, view->rows);
    view->grabbed = view->grabbed < view->row_count ? view->grabbed : -1;
    if (view->stage == EV_STAGE_SPACE && !view->camera_kept && !ev_view_moving(view)) {
        ev_space_fit(&view->model.study->antenna, &view->page, view->detail, &view->camera);
    }
}

static void place_parts(const ev_view *view, ev_layers_input *input,
                        ev_box parts[EV_FEED_CAPACITY + 1])
{
    const ev_antenna *antenna = &view->model.study->antenna;
    char name[32];
    input->parts = parts;
    input->part_count = ev_space_parts(antenna, &view->page, &view->camera, parts);
    ev_model_part_name(&view->model, name);
    for (int i = 0; i < input->part_count; ++i) {
        if (strcmp(parts[i].name, name) == 0) {
            input->part_x = parts[i].rect.x + 0.5 * parts[i].rect.width;
            input->part_y = parts[i].rect.y + 0.5 * parts[i].rect.height;
        }
    }
}

static void clear(const ev_view *view)
{
    const ev_theme *theme = ev_theme_get(view->dark);
    glViewport(0, 0, view->window.pixel_width, view->window.pixel_height);
    glClearColor((float)theme->ground.r, (float)theme->ground.g, (float)theme->ground.b, 1.0F);
    glClear(GL_COLOR_BUFFER_BIT);
}

void ev_view_draw(ev_view *view)
{
    measure_page(view);
    compute(view);
    ev_box parts[EV_FEED_CAPACITY + 1];
    ev_layers_input input = {.page = &view->page,
                             .sheet = ev_view_sheet(view),
                             .items = view->gallery.items,
                             .item_count = view->gallery.count,
                             .dark = view->dark,
                             .showing = view->showing,
                             .drawer = ev_drawer_shown(view),
                             .actions = ev_finder_shown(view),
                             .pointed = view->pointed,
                             .scale = view->window.scale,
                             .crew = view->crew,
                             .outlines = &view->space.strokes};
    stamp_page(view, &input);
    if (input.sheet) {
        stamp_numbers(view, &input);
        stamp_rest(view, &input);
    }
    stamp_overlays(&input);
    clear(view);
    if (input.sheet && view->stage == EV_STAGE_SPACE) {
        ev_space_input space = {.page = &view->page,
                                .sheet = input.sheet,
                                .camera = &view->camera,
                                .scale = view->window.scale,
                                .crew = view->crew};
        place_parts(view, &input, parts);
        ev_space_draw(&view->space, &view->layers, &space, view->window.pixel_width,
                      view->window.pixel_height);
        glFlush(); /* the driver's threads begin while the layers are drawn */
    }
    ev_layers_update(&view->layers, &input);
    ev_layers_show(&view->layers, &input);
}

void ev_view_frame(ev_view *view)
{
    ev_view_draw(view);
    SDL_GL_SwapWindow(view->window.window);
    glFinish();
    view->dirty = false;
}
