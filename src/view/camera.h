/* The camera of the space view: it turns about a target with the antenna frame's +x up. Positions
 * are double and are subtracted from the eye before anything is demoted to single precision. */
#pragma once

#include "base/vec3.h"
#include "draw/draw.h"

#include <stdbool.h>

typedef struct ev_camera {
    ev_vec3 target;  /* m, antenna frame */
    double yaw;      /* rad about +x: 0 looks along -z, onto the dish from the sky */
    double pitch;    /* rad, within a little of +-90 degrees */
    double distance; /* m, eye to target */
} ev_camera;

/* A camera looking into a place of the page: what projection needs. */
typedef struct ev_eye {
    ev_vec3 position;
    ev_vec3 right, up, back; /* unit; `back` points at the viewer */
    double scale;            /* px at 1 m distance per m */
    double x, y;             /* px, where the axis of view meets the page */
} ev_eye;

ev_camera ev_default_camera(void);

ev_eye ev_camera_eye(const ev_camera *camera, ev_rect place);

/* Page pixels of a point; false when it is behind the eye. */
bool ev_eye_project(const ev_eye *eye, ev_vec3 point, double *x, double *y);

/* Pixels a length at `point` covers. */
double ev_eye_pixels(const ev_eye *eye, ev_vec3 point, double length);

/* Clip space from coordinates relative to `origin`, column-major, for a viewport that covers
 * `place`; depth runs from `near_m` to `far_m`. */
void ev_eye_matrix(const ev_eye *eye, ev_rect place, ev_vec3 origin, double near_m, double far_m,
                   float matrix[16]);

/* Turns by pointer movement in radians, keeping short of the poles. */
void ev_camera_orbit(ev_camera *camera, double yaw, double pitch);
/* Moves the target so that it follows the pointer by (dx, dy) px. */
void ev_camera_pan(ev_camera *camera, ev_rect place, double dx, double dy);
/* Brings the target nearer by a factor, holding what is under (x, y). */
void ev_camera_zoom(ev_camera *camera, ev_rect place, double factor, double x, double y);
/* Keeps the direction; chooses target and distance so that all points lie in `inside`. */
void ev_camera_fit(ev_camera *camera, ev_rect place, ev_rect inside, const ev_vec3 *points,
                   int count);
