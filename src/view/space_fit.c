/* What the space view tells others: how to hold the whole antenna and where its parts are seen. */
#include "view/space.h"

void ev_space_fit(const ev_antenna *antenna, const ev_page *page, bool detail, ev_camera *camera)
{
    ev_vec3 points[EV_EXTENT_CAPACITY];
    int count = ev_antenna_extent(antenna, points);
    ev_rect inside = {page->stage.x + 40.0, page->stage.y + 56.0, page->stage.width - 80.0,
                      page->stage.height - 84.0};
    if (detail) { /* the circle keeps its corner free */
        inside.width -= 0.75 * page->detail.width;
    }
    ev_camera_fit(camera, page->stage, inside, points, count);
}

static void add_part(ev_box *parts, int *count, const ev_eye *eye, ev_vec3 at, const char *name)
{
    double x, y, half = 14.0;
    if (ev_eye_project(eye, at, &x, &y)) {
        ev_box *box = &parts[(*count)++];
        *box = (ev_box){.kind = EV_BOX_HANDLE, .rect = {x - half, y - half, 2 * half, 2 * half}};
        SDL_strlcpy(box->name, name, sizeof box->name);
    }
}

int ev_space_parts(const ev_antenna *antenna, const ev_page *page, const ev_camera *camera,
                   ev_box parts[EV_FEED_CAPACITY + 1])
{
    ev_eye eye = ev_camera_eye(camera, page->stage);
    int count = 0;
    for (int i = 0; i < antenna->feed_count; ++i) {
        char name[32];
        SDL_snprintf(name, sizeof name, "part.feed.%d", i);
        add_part(parts, &count, &eye, antenna->feeds[i].position, name);
    }
    if (antenna->dual) {
        add_part(parts, &count, &eye, ev_sub_place(&antenna->sub, antenna->layout.sub_vertex),
                 "part.sub");
    }
    return count;
}
