/* A page as a file: PNG, SVG or PDF by its ending. Rendered to memory first and put in place in one
 * step, so that a failure leaves nothing half written. */
#include "base/file.h"
#include "base/text.h"
#include "draw/pen.h"

#include <cairo-pdf.h>
#include <cairo-svg.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <strings.h>

typedef enum { FILE_UNKNOWN, FILE_PNG, FILE_SVG, FILE_PDF } file_kind;

static _Thread_local char reason[512];

static file_kind kind_of(const char *path)
{
    const char *dot = strrchr(path, '.');
    if (!dot || strchr(dot, '/'))
        return FILE_UNKNOWN;
    return strcasecmp(dot, ".png") == 0   ? FILE_PNG
           : strcasecmp(dot, ".svg") == 0 ? FILE_SVG
           : strcasecmp(dot, ".pdf") == 0 ? FILE_PDF
                                          : FILE_UNKNOWN;
}

static cairo_status_t keep_bytes(void *closure, const unsigned char *data, unsigned length)
{
    ev_buffer_add(closure, (const char *)data, length);
    return CAIRO_STATUS_SUCCESS;
}

static cairo_surface_t *make_surface(file_kind kind, double width, double height, double scale,
                                     ev_buffer *buffer)
{
    /* Paper: a logical pixel is 1/96 in, a point 1/72 in. */
    if (kind == FILE_PDF)
        return cairo_pdf_surface_create_for_stream(keep_bytes, buffer, 0.75 * width, 0.75 * height);
    if (kind == FILE_SVG) {
        cairo_surface_t *surface =
            cairo_svg_surface_create_for_stream(keep_bytes, buffer, width, height);
        cairo_svg_surface_set_document_unit(surface, CAIRO_SVG_UNIT_PX);
        return surface;
    }
    return cairo_image_surface_create(CAIRO_FORMAT_RGB24, (int)lround(width * scale),
                                      (int)lround(height * scale));
}

static void draw_sheet(cairo_surface_t *surface, double width, double height, double scale,
                       const ev_sheet *sheet)
{
    ev_boxes *boxes = ev_allocate(sizeof *boxes);
    boxes->count = 0;
    cairo_t *cairo = cairo_create(surface);
    cairo_scale(cairo, scale, scale);
    ev_draw_handout(cairo, width, height, sheet, boxes);
    cairo_destroy(cairo);
    free(boxes);
}

static cairo_status_t render(file_kind kind, double width, double height, double scale,
                             const ev_sheet *sheet, ev_buffer *buffer)
{
    cairo_surface_t *surface = make_surface(kind, width, height, scale, buffer);
    if (kind == FILE_PDF)
        cairo_pdf_surface_set_metadata(surface, CAIRO_PDF_METADATA_TITLE, sheet->design->title);
    if (cairo_surface_status(surface) == CAIRO_STATUS_SUCCESS)
        draw_sheet(surface, width, height,
                   kind == FILE_PNG   ? scale
                   : kind == FILE_PDF ? 0.75
                                      : 1.0,
                   sheet);
    cairo_status_t status = CAIRO_STATUS_SUCCESS;
    if (kind == FILE_PNG)
        status = cairo_surface_write_to_png_stream(surface, keep_bytes, buffer);
    cairo_surface_finish(surface);
    if (status == CAIRO_STATUS_SUCCESS)
        status = cairo_surface_status(surface);
    cairo_surface_destroy(surface);
    return status;
}

static bool put_in_place(const char *path, const ev_buffer *buffer)
{
    ev_diagnostics *diagnostics = ev_allocate(sizeof *diagnostics);
    ev_diagnostics_init(diagnostics);
    bool written = ev_file_replace(path, buffer->data, buffer->size, diagnostics);
    if (!written)
        ev_text_copy(reason, sizeof reason,
                     diagnostics->count > 0 ? diagnostics->items[0].text : "it cannot be written");
    ev_diagnostics_clear(diagnostics);
    free(diagnostics);
    return written;
}

bool ev_picture_write(const char *path, double width, double height, double scale,
                      const ev_sheet *sheet, const char **why)
{
    *why = reason;
    reason[0] = 0;
    file_kind kind = kind_of(path);
    if (kind == FILE_UNKNOWN) {
        snprintf(reason, sizeof reason, "a picture ends in .png, .svg or .pdf");
        return false;
    }
    double largest = fmax(width, height) * (kind == FILE_PNG ? scale : 1.0);
    if (!(width >= 1.0 && height >= 1.0 && scale > 0.0 && largest <= 30000.0)) {
        snprintf(reason, sizeof reason, "a picture is between 1 and 30000 pixels a side");
        return false;
    }
    ev_buffer buffer = {0};
    cairo_status_t status = render(kind, width, height, scale, sheet, &buffer);
    bool written = false;
    if (status != CAIRO_STATUS_SUCCESS)
        snprintf(reason, sizeof reason, "%s", cairo_status_to_string(status));
    else
        written = put_in_place(path, &buffer);
    free(buffer.data);
    return written;
}
