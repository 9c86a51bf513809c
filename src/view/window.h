/* The window and its GL context. Asks SDL which video driver it took: without a display SDL would
 * quietly draw where nobody can see, which only a replay may do. */
#pragma once

#include "base/diagnostic.h"

#include <SDL.h>
#include <cairo.h>

typedef struct ev_window {
    SDL_Window *window;
    SDL_GLContext context;
    double width, height;                        /* logical pixels */
    int pixel_width, pixel_height;               /* device pixels */
    double scale;                                /* device pixels per logical pixel */
    SDL_Cursor *cursors[SDL_NUM_SYSTEM_CURSORS]; /* made when first wanted */
} ev_window;

enum { EV_WINDOW_LEAST_WIDTH = 1100, EV_WINDOW_LEAST_HEIGHT = 700 };

/* False with a diagnostic when there is no display (unless `unseen` is allowed) or no OpenGL 3.3;
 * nothing is left open then. */
bool ev_window_open(ev_window *window, int width, int height, bool unseen,
                    ev_diagnostics *diagnostics);
void ev_window_close(ev_window *window);

void ev_window_resize(ev_window *window, int width, int height);
/* Reads the size again after the window changed. */
void ev_window_measure(ev_window *window);
void ev_window_title(ev_window *window, const char *scene);

/* The shape of the pointer; none where the display has no such shape. */
void ev_window_cursor(ev_window *window, SDL_SystemCursor shape);

/* The pixels last drawn, before they are shown; the caller destroys the surface. NULL: no memory.
 */
cairo_surface_t *ev_window_grab(const ev_window *window);
