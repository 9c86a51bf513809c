/* One picture of the antenna in space, back to front: the Front when seen from behind, the hollow
 * of the dish, the rays, the solid parts with depth among themselves, the back of the dish, the
 * Front when seen from the sky. The outlines, whose hidden pieces the ink has dimmed, go into the
 * Stage's layer, under its words. */
#include "view/space.h"

#include "shaders.h"

#include <math.h>

enum { DISH, SUB, FRONT, HORNS };

bool ev_space_start(ev_space *space, ev_diagnostics *diagnostics)
{
    *space = (ev_space){0};
    space->mirror =
        ev_gl_program("mirror", ev_shader_surface_vert, ev_shader_mirror_frag, diagnostics);
    space->front =
        ev_gl_program("front", ev_shader_surface_vert, ev_shader_front_frag, diagnostics);
    return space->mirror && space->front;
}

void ev_space_end(ev_space *space)
{
    for (int i = 0; i < HORNS + EV_FEED_CAPACITY; ++i) {
        ev_mesh_free(&space->meshes[i]);
        ev_grid_free(&space->grids[i]);
    }
    ev_raster_free(&space->raster);
    ev_strokes_free(&space->strokes);
    ev_texture_free(&space->rays);
    ev_texture_free(&space->shadows);
    glDeleteProgram(space->mirror);
    glDeleteProgram(space->front);
    *space = (ev_space){0};
}

static void fill_outline(cairo_t *cairo, const ev_outline *outline)
{
    cairo_matrix_t held;
    cairo_get_matrix(cairo, &held);
    cairo_matrix_t to_page = {outline->ux, outline->uy, outline->vx,
                              outline->vy, outline->x,  outline->y};
    cairo_transform(cairo, &to_page);
    cairo_arc(cairo, 0.0, 0.0, 1.0, 0.0, 2.0 * EV_PI);
    cairo_set_matrix(cairo, &held);
    cairo_fill(cairo);
}

static void fill_strip(cairo_t *cairo, const ev_shadows *shadows, const ev_strip *strip)
{
    cairo_save(cairo);
    cairo_translate(cairo, shadows->centre_x, 0.0);
    cairo_rotate(cairo, strip->angle);
    cairo_rectangle(cairo, strip->from, -strip->half_width, strip->to - strip->from,
                    2.0 * strip->half_width);
    cairo_fill(cairo);
    cairo_restore(cairo);
}

/* The shadows over the aperture's square, white on black, as a texture. */
static void update_shadows(ev_space *space, const ev_antenna *antenna)
{
    enum { SIDE = 512 };
    const ev_shadows *shadows = &antenna->shadows;
    uint64_t stamp = ev_stamp(0, shadows, sizeof *shadows);
    if (stamp == space->shadow_stamp && space->shadows.id) {
        return;
    }
    cairo_surface_t *surface = cairo_image_surface_create(CAIRO_FORMAT_RGB24, SIDE, SIDE);
    cairo_t *cairo = cairo_create(surface);
    cairo_scale(cairo, 0.5 * SIDE / shadows->radius, 0.5 * SIDE / shadows->radius);
    cairo_translate(cairo, shadows->radius - shadows->centre_x, shadows->radius);
    cairo_set_source_rgb(cairo, 1.0, 1.0, 1.0);
    if (shadows->has_sub) {
        fill_outline(cairo, &shadows->sub);
    }
    for (int i = 0; i < shadows->body_count; ++i) {
        fill_outline(cairo, &shadows->bodies[i]);
    }
    for (int i = 0; i < shadows->strip_count; ++i) {
        fill_strip(cairo, shadows, &shadows->strips[i]);
    }
    cairo_destroy(cairo);
    cairo_surface_flush(surface);
    ev_pixels pixels = {.width = SIDE,
                        .height = SIDE,
                        .stride = cairo_image_surface_get_stride(surface) / 4,
                        .right = SIDE,
                        .bottom = SIDE,
                        .data = (const uint32_t *)(void *)cairo_image_surface_get_data(surface)};
    ev_texture_upload(&space->shadows, &pixels, true);
    cairo_surface_destroy(surface);
    space->shadow_stamp = stamp;
}

static void update_meshes(ev_space *space, const ev_sheet *sheet, double stand)
{
    const ev_antenna *antenna = sheet->antenna;
    for (int i = 0; i < HORNS + EV_FEED_CAPACITY; ++i) {
        space->meshes[i].rows = 0;
    }
    ev_mesh_main(&space->meshes[DISH], antenna);
    if (antenna->dual) {
        ev_mesh_sub(&space->meshes[SUB], antenna);
    }
    ev_mesh_front(&space->meshes[FRONT], sheet, stand);
    for (int i = 0; i < antenna->feed_count; ++i) {
        ev_mesh_horn(&space->meshes[HORNS + i], antenna, i);
    }
    for (int i = 0; i < HORNS + EV_FEED_CAPACITY; ++i) {
        if (space->meshes[i].rows > 0) {
            ev_grid_upload(&space->grids[i], &space->meshes[i]);
        }
    }
}

static void set_colour(GLuint program, const char *name, ev_colour colour)
{
    glUniform3f(glGetUniformLocation(program, name), (float)colour.r, (float)colour.g,
                (float)colour.b);
}

static void set_number(GLuint program, const char *name, double value)
{
    glUniform1f(glGetUniformLocation(program, name), (float)value);
}

/* How a surface is painted. */
typedef struct surface_coat {
    double opacity, grid, hatch_step, shade, side;
} surface_coat;

static void place_mesh(GLuint program, const ev_ink *ink, const ev_mesh *mesh)
{
    float clip[16];
    double radius = ink->sheet->antenna->radius;
    ev_vec3 eye = ev_vec3_sub(ink->eye.position, mesh->origin);
    double away = ev_vec3_length(ev_vec3_sub(
        ink->eye.position, ev_main_point(ink->sheet->antenna, ink->sheet->antenna->offset, 0.0)));
    double reach = 4.0 * (radius + ink->stand);
    ev_eye_matrix(&ink->eye, ink->place, mesh->origin, fmax(away - reach, 0.02 * away),
                  away + reach, clip);
    glUniformMatrix4fv(glGetUniformLocation(program, "clip"), 1, GL_FALSE, clip);
    glUniform2f(glGetUniformLocation(program, "polar_lines"), 6.0F, 24.0F);
    glUniform3f(glGetUniformLocation(program, "eye"), (float)eye.x, (float)eye.y, (float)eye.z);
}

static void draw_mirror(const ev_space *space, const ev_ink *ink, int id, surface_coat coat)
{
    const ev_theme *theme = ink->theme;
    if (space->meshes[id].rows == 0) {
        return;
    }
    glUseProgram(space->mirror);
    place_mesh(space->mirror, ink, &space->meshes[id]);
    set_colour(space->mirror, "fill", theme->fill);
    set_colour(space->mirror, "back", theme->ground);
    set_colour(space->mirror, "ink", theme->ink);
    set_number(space->mirror, "opacity", coat.opacity);
    set_number(space->mirror, "grid", coat.grid);
    set_number(space->mirror, "hatch_step", coat.hatch_step * ink->scale);
    set_number(space->mirror, "shade", coat.shade);
    set_number(space->mirror, "side", coat.side);
    glBindTexture(GL_TEXTURE_2D, space->shadows.id);
    ev_grid_draw(&space->grids[id]);
}

static void draw_front(const ev_space *space, const ev_ink *ink)
{
    const ev_theme *theme = ink->theme;
    if (space->meshes[FRONT].rows == 0) {
        return;
    }
    glUseProgram(space->front);
    place_mesh(space->front, ink, &space->meshes[FRONT]);
    set_colour(space->front, "ground", theme->ground);
    set_colour(space->front, "ink", theme->ink);
    set_colour(space->front, "early", theme->early);
    set_colour(space->front, "late", theme->late);
    set_number(space->front, "opacity", 0.86 * fmax(ink->emphasis.front, 0.3));
    glBindTexture(GL_TEXTURE_2D, space->shadows.id);
    ev_grid_draw(&space->grids[FRONT]);
}

/* The dish shows each line of sight its hollow side, its back, or first the back and behind it the
 * hollow; each alone never overlaps itself. Its triangles turn left as seen from the hollow. */
static void draw_dish_hollow(const ev_space *space, const ev_ink *ink)
{
    glEnable(GL_CULL_FACE);
    glCullFace(GL_BACK);
    draw_mirror(space, ink, DISH,
                (surface_coat){.opacity = 1.0, .grid = 0.13, .shade = 0.22, .side = 1.0});
    glDisable(GL_CULL_FACE);
}

static void draw_dish_back(const ev_space *space, const ev_ink *ink)
{
    glEnable(GL_CULL_FACE);
    glCullFace(GL_FRONT);
    draw_mirror(space, ink, DISH,
                (surface_coat){.opacity = 0.86, .hatch_step = EV_HATCH_STEP, .side = -1.0});
    glDisable(GL_CULL_FACE);
}

/* Subreflector and horns: opaque, hidden by each other. */
static void draw_solids(const ev_space *space, const ev_ink *ink)
{
    glEnable(GL_DEPTH_TEST);
    glClear(GL_DEPTH_BUFFER_BIT);
    draw_mirror(space, ink, SUB, (surface_coat){.opacity = 1.0, .grid = 0.1, .hatch_step = 4.0});
    for (int i = 0; i < ink->sheet->antenna->feed_count; ++i) {
        draw_mirror(space, ink, HORNS + i, (surface_coat){.opacity = 1.0});
    }
    glDisable(GL_DEPTH_TEST);
}

/* Rasterises the rays and lays them over what is drawn. */
static void show_rays(ev_space *space, const ev_layers *layers, const ev_space_input *input)
{
    ev_rect stage = input->page->stage;
    ev_raster *raster = &space->raster;
    int width = (int)ceil(stage.width * input->scale);
    int height = (int)ceil(stage.height * input->scale);
    ev_raster_clear(raster);
    if (!ev_raster_resize(raster, width, height)) {
        return;
    }
    ev_raster_draw(raster, space->strokes.items, space->strokes.count, input->crew);
    space->strokes.count = 0;
    if (raster->right > raster->left) {
        ev_pixels pixels = {width,       height,        width,          raster->left,
                            raster->top, raster->right, raster->bottom, raster->pixels};
        ev_rect part = {raster->left, raster->top, raster->right - raster->left,
                        raster->bottom - raster->top};
        ev_page local = {.width = width, .height = height};
        ev_texture_upload(&space->rays, &pixels, false);
        ev_layers_quad(layers, &local, part, &space->rays, part);
    }
}

static void ink_front(ev_space *space, const ev_ink *ink)
{
    if (space->meshes[FRONT].rows == 0) {
        return;
    }
    double alpha = 0.95 * fmax(ink->emphasis.front, 0.3);
    ev_nib nib = {
        .width = 1.9, .alpha = alpha, .colour = ink->theme->ink, .cast = true, .of_front = true};
    ev_ink_even(ink);
    ev_ink_outline(ink, nib, &space->meshes[FRONT], false, true, false);
}

static void ink_outlines(ev_space *space, const ev_ink *ink)
{
    const ev_antenna *antenna = ink->sheet->antenna;
    ev_nib nib = {.width = 2.4, .alpha = 0.95, .colour = ink->theme->ink, .cast = true};
    ev_ink_outline(ink, nib, &space->meshes[DISH], antenna->hole_radius > 0.0, true, true);
    ev_ink_struts(ink);
    nib.width = 1.7;
    if (space->meshes[SUB].rows > 0) {
        ev_ink_outline(ink, nib, &space->meshes[SUB], false, true, true);
    }
    nib.width = 1.3;
    for (int i = 0; i < antenna->feed_count; ++i) {
        ev_ink_outline(ink, nib, &space->meshes[HORNS + i], true, true, true);
    }
    ink_front(space, ink);
}

static void begin_viewport(const ev_space_input *input, int pixel_height)
{
    ev_rect stage = input->page->stage;
    double s = input->scale;
    int height = (int)ceil(stage.height * s);
    glViewport((int)lround(stage.x * s), pixel_height - (int)lround(stage.y * s) - height,
               (int)ceil(stage.width * s), height);
    glEnable(GL_BLEND);
    glBlendFunc(GL_ONE, GL_ONE_MINUS_SRC_ALPHA);
}

void ev_space_draw(ev_space *space, const ev_layers *layers, const ev_space_input *input,
                   int pixel_width, int pixel_height)
{
    const ev_antenna *antenna = input->sheet->antenna;
    ev_ink ink = {.sheet = input->sheet,
                  .eye = ev_camera_eye(input->camera, input->page->stage),
                  .place = input->page->stage,
                  .scale = input->scale,
                  .stand = ev_front_stand(antenna),
                  .theme = ev_theme_get(input->sheet->dark),
                  .emphasis = ev_emphasis_of(input->sheet),
                  .strokes = &space->strokes};
    bool from_sky = ink.eye.back.z > 0.0;
    update_shadows(space, antenna);
    update_meshes(space, input->sheet, ink.stand);
    begin_viewport(input, pixel_height);
    if (!from_sky) {
        draw_front(space, &ink);
    }
    draw_dish_hollow(space, &ink);
    ev_ink_rays(&ink);
    show_rays(space, layers, input);
    draw_solids(space, &ink);
    draw_dish_back(space, &ink);
    if (from_sky) {
        draw_front(space, &ink);
    }
    ink_outlines(space, &ink);
    glViewport(0, 0, pixel_width, pixel_height);
}
