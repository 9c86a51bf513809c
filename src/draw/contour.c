/* Marching squares, chained. One sweep finds the edges of the grid that any level crosses; each
 * level then follows its own: lines that leave the grid first, closed ones after. Knows nothing of
 * what the field means. */
#include "draw/contour.h"

#include <math.h>
#include <stdint.h>

enum {
    SIDE = EV_CONTOUR_SIDE,
    POINT_CAPACITY = 2 * SIDE * SIDE,
    NO_VALUE = 255,
};

/* Sides of a cell; an edge of the grid is a side seen from either of its cells. */
typedef enum { SIDE_LOW, SIDE_HIGH, SIDE_LEFT, SIDE_RIGHT, SIDE_COUNT } side;

/* Where to look for the start of a line: the side of a cell. */
typedef struct edge_place {
    uint8_t column, row, side;
} edge_place;

typedef struct walk {
    const double *field;
    int columns, rows, level;
    double value;                 /* of the level followed */
    uint8_t above[SIDE][SIDE];    /* how many levels a sample reaches; NO_VALUE for NaN */
    uint16_t along[SIDE][SIDE];   /* bit a level: crossings of the edge to the next column */
    uint16_t upright[SIDE][SIDE]; /* the same to the next row */
    edge_place places[POINT_CAPACITY];
    int place_count;
    double points[POINT_CAPACITY][2];
} walk;

static double at(const walk *w, int column, int row)
{
    return w->field[row * w->columns + column];
}

static uint16_t *edge_of(walk *w, int column, int row, side s)
{
    switch (s) {
    case SIDE_LOW:
        return &w->along[row][column];
    case SIDE_HIGH:
        return &w->along[row + 1][column];
    case SIDE_LEFT:
        return &w->upright[row][column];
    default:
        return &w->upright[row][column + 1];
    }
}

static void count_levels(walk *w, const double *levels, int level_count)
{
    for (int r = 0; r < w->rows; ++r)
        for (int c = 0; c < w->columns; ++c) {
            double value = at(w, c, r);
            int count = 0;
            while (count < level_count && value >= levels[count])
                ++count;
            w->above[r][c] = isnan(value) ? NO_VALUE : (uint8_t)count;
        }
}

/* One bit for each level between two samples. */
static uint16_t bits_between(uint8_t a, uint8_t b)
{
    if (a == b || a == NO_VALUE || b == NO_VALUE)
        return 0;
    unsigned low = a < b ? a : b, high = a < b ? b : a;
    return (uint16_t)((1u << high) - (1u << low));
}

static void note_edge(walk *w, uint16_t bits, int column, int row, side s)
{
    if (bits)
        w->places[w->place_count++] = (edge_place){(uint8_t)column, (uint8_t)row, (uint8_t)s};
}

static void find_edges(walk *w)
{
    for (int r = 0; r < w->rows; ++r)
        for (int c = 0; c < w->columns; ++c) {
            bool last_column = c + 1 == w->columns, last_row = r + 1 == w->rows;
            w->along[r][c] = last_column ? 0 : bits_between(w->above[r][c], w->above[r][c + 1]);
            w->upright[r][c] = last_row ? 0 : bits_between(w->above[r][c], w->above[r + 1][c]);
            note_edge(w, w->along[r][c], c, last_row ? r - 1 : r, last_row ? SIDE_HIGH : SIDE_LOW);
            note_edge(w, w->upright[r][c], last_column ? c - 1 : c, r,
                      last_column ? SIDE_RIGHT : SIDE_LEFT);
        }
}

static void edge_point(const walk *w, int column, int row, side s, double point[2])
{
    int c = column + (s == SIDE_RIGHT), r = row + (s == SIDE_HIGH);
    bool along_row = s == SIDE_LOW || s == SIDE_HIGH;
    double a = at(w, c, r), b = along_row ? at(w, c + 1, r) : at(w, c, r + 1);
    double share = fmin(fmax((w->value - a) / (b - a), 0.0), 1.0);
    point[0] = c + (along_row ? share : 0.0);
    point[1] = r + (along_row ? 0.0 : share);
}

static bool is_whole(const walk *w, int column, int row)
{
    return column >= 0 && row >= 0 && column + 1 < w->columns && row + 1 < w->rows &&
           w->above[row][column] != NO_VALUE && w->above[row][column + 1] != NO_VALUE &&
           w->above[row + 1][column] != NO_VALUE && w->above[row + 1][column + 1] != NO_VALUE;
}

/* From the side a line comes in by to the one it goes out by. */
static side leave_by(const walk *w, int column, int row, side in)
{
    bool a = w->above[row][column] > w->level, b = w->above[row][column + 1] > w->level;
    bool c = w->above[row + 1][column] > w->level, d = w->above[row + 1][column + 1] > w->level;
    const bool crossed[SIDE_COUNT] = {a != b, c != d, a != c, b != d};
    if (crossed[0] && crossed[1] && crossed[2] && crossed[3]) {
        /* The middle belongs with corners a and d, and b and c are cut off; or the other way. */
        static const side cut_bc[SIDE_COUNT] = {SIDE_RIGHT, SIDE_LEFT, SIDE_HIGH, SIDE_LOW};
        static const side cut_ad[SIDE_COUNT] = {SIDE_LEFT, SIDE_RIGHT, SIDE_LOW, SIDE_HIGH};
        double mean = 0.25 * (at(w, column, row) + at(w, column + 1, row) + at(w, column, row + 1) +
                              at(w, column + 1, row + 1));
        return (mean >= w->value) == a ? cut_bc[in] : cut_ad[in];
    }
    for (int s = 0; s < SIDE_COUNT; ++s)
        if (s != (int)in && crossed[s])
            return (side)s;
    return in;
}

static const int column_over[SIDE_COUNT] = {0, 0, -1, 1};
static const int row_over[SIDE_COUNT] = {-1, 1, 0, 0};
static const side side_over[SIDE_COUNT] = {SIDE_HIGH, SIDE_LOW, SIDE_RIGHT, SIDE_LEFT};

/* Follows the line that enters the cell by `in` to its end or back to its start. */
static int follow(walk *w, int column, int row, side in, bool *closed)
{
    uint16_t bit = (uint16_t)(1u << w->level);
    int count = 0;
    *closed = false;
    edge_point(w, column, row, in, w->points[count++]);
    *edge_of(w, column, row, in) &= (uint16_t)~bit;
    while (is_whole(w, column, row) && count < POINT_CAPACITY) {
        side out = leave_by(w, column, row, in);
        uint16_t *edge = edge_of(w, column, row, out);
        if (!(*edge & bit)) {
            *closed = true;
            break;
        }
        *edge &= (uint16_t)~bit;
        edge_point(w, column, row, out, w->points[count++]);
        column += column_over[out];
        row += row_over[out];
        in = side_over[out];
    }
    return count;
}

/* A line that ends does so where the cell beyond an edge is missing: start there, else the line is
 * found from its middle and comes in two. */
static bool find_start(const walk *w, const edge_place *place, bool ends_only, int *column,
                       int *row, side *s)
{
    *column = place->column;
    *row = place->row;
    *s = (side)place->side;
    int beyond_column = *column + column_over[*s], beyond_row = *row + row_over[*s];
    bool here = is_whole(w, *column, *row), beyond = is_whole(w, beyond_column, beyond_row);
    if (!here && !beyond)
        return false;
    if (!here) {
        *s = side_over[*s];
        *column = beyond_column;
        *row = beyond_row;
    }
    return !ends_only || here != beyond;
}

void ev_contour(const double *field, int columns, int rows, const double *levels, int level_count,
                ev_contour_sink sink, void *context)
{
    if (columns < 2 || rows < 2 || columns > SIDE || rows > SIDE || level_count > EV_CONTOUR_LEVELS)
        return;
    static _Thread_local walk w;
    w.field = field;
    w.columns = columns;
    w.rows = rows;
    w.place_count = 0;
    count_levels(&w, levels, level_count);
    find_edges(&w);
    for (w.level = 0; w.level < level_count; ++w.level) {
        w.value = levels[w.level];
        for (int pass = 0; pass < 2; ++pass)
            for (int i = 0; i < w.place_count; ++i) {
                int column, row;
                side s;
                bool closed;
                const edge_place *place = &w.places[i];
                if (!(*edge_of(&w, place->column, place->row, (side)place->side) >> w.level & 1) ||
                    !find_start(&w, place, pass == 0, &column, &row, &s))
                    continue;
                int count = follow(&w, column, row, s, &closed);
                if (count >= 2)
                    sink(context, w.level, (const double(*)[2])w.points, count, closed);
            }
    }
}
