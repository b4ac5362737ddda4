/* frame: readings in, columns of days out. Readings are copied into blocks as they come; closing
 * the frame deals pointers to them into columns, sorts each, and keeps the newest version of each
 * reading. */
#include "frame/frame.h"
#include "frame/store.h"

#include <assert.h>
#include <string.h>

#include "base/poison.h"

#define BLOCK_READINGS 256

struct block {
    struct block *older;
    size_t count;
    struct reading at[BLOCK_READINGS];
};

struct frame *frame_new(struct arena *a, const struct plant *plant, day_t first, day_t last)
{
    struct frame *f = arena_alloc(a, sizeof *f);
    size_t cells = plant->point_count * plant->parameter_count;

    assert(first <= last);
    f->arena = a;
    f->plant = plant;
    f->first = first;
    f->last = last;
    f->flow_parameter = plant_parameter(plant, "FLOW");
    f->index = arena_alloc(a, (cells + 1) * sizeof *f->index);
    for (size_t i = 0; i < cells; i++)
        f->index[i] = -1;
    f->empty = arena_alloc(a, (cells + 1) * sizeof *f->empty);
    f->marks = arena_alloc(a, plant->point_count * (size_t)(last - first + 1) + 1);
    return f;
}

void frame_add(struct frame *f, const struct reading *r)
{
    assert(!f->closed);
    assert(r->point < f->plant->point_count && r->parameter < f->plant->parameter_count);
    if (r->day > f->last || (r->day < f->first && !totalizer_at(f->plant, r->point, r->parameter)))
        return;
    if (!f->newest || f->newest->count == BLOCK_READINGS) {
        struct block *b = arena_alloc(f->arena, sizeof *b);
        b->older = f->newest;
        f->newest = b;
    }
    f->newest->at[f->newest->count++] = *r;
    f->readings++;
}

/* ---- closing ---- */

typedef int compare(const struct reading *a, const struct reading *b);

static int order(int64_t a, int64_t b)
{
    return (a > b) - (a < b);
}

static int by_time(const struct reading *a, const struct reading *b)
{
    int c = order(a->point, b->point);

    if (c == 0)
        c = order(a->parameter, b->parameter);
    if (c == 0)
        c = order(a->day, b->day);
    return c != 0 ? c : order(a->minute, b->minute);
}

static int by_identity(const struct reading *a, const struct reading *b)
{
    int c = by_time(a, b);

    return c != 0 ? c : strcmp(a->sample, b->sample);
}

static int by_version(const struct reading *a, const struct reading *b)
{
    int c = by_identity(a, b);

    return c != 0 ? c : order(a->version, b->version);
}

/* Outside a book all ids are 0, and the sort keeps the order they were added in. */
static int by_loading(const struct reading *a, const struct reading *b)
{
    int c = by_time(a, b);

    return c != 0 ? c : order(a->id, b->id);
}

/* A stable merge sort; what is in order already costs one look. */
static void sort(const struct reading **at, size_t count, const struct reading **spare,
                 compare *cmp)
{
    size_t half = count / 2, i = 0, j = half, k = 0;

    if (count < 2)
        return;
    sort(at, half, spare, cmp);
    sort(at + half, count - half, spare, cmp);
    if (cmp(at[half - 1], at[half]) <= 0)
        return;
    memcpy(spare, at, half * sizeof(const struct reading *));
    while (i < half && j < count)
        at[k++] = cmp(spare[i], at[j]) <= 0 ? spare[i++] : at[j++];
    memcpy(at + k, spare + i, (half - i) * sizeof(const struct reading *));
}

/* Of each reading the newest version, and of equal versions the one added last; a withdrawn reading
 * leaves nothing. Returns how many stay. */
static size_t keep_newest(const struct reading **at, size_t count)
{
    size_t kept = 0;

    for (size_t i = 0; i < count; i++)
        if ((i + 1 == count || by_identity(at[i], at[i + 1]) != 0) &&
            at[i]->qualifier != QUALIFIER_WITHDRAWN)
            at[kept++] = at[i];
    return kept;
}

static void add_column(struct frame *f, const struct reading **at, size_t count)
{
    struct column *c =
        arena_push(f->arena, &f->columns, &f->column_count, &f->column_room, sizeof *c);
    size_t next = 0;

    c->point = at[0]->point;
    c->parameter = at[0]->parameter;
    c->first = at[0]->day;
    c->last = at[count - 1]->day;
    c->at = at;
    c->start = arena_alloc(f->arena, (size_t)(c->last - c->first + 2) * sizeof *c->start);
    for (day_t day = c->first; day <= c->last + 1; day++) {
        while (next < count && at[next]->day < day)
            next++;
        c->start[day - c->first] = (uint32_t)next;
    }
    f->index[frame_cell(f, c->point, c->parameter)] = (int32_t)(f->column_count - 1);
}

static size_t cell_of(const struct frame *f, const struct reading *r)
{
    return frame_cell(f, r->point, r->parameter);
}

/* Readings by point and parameter, each in the order they were added in: `end` then holds where
 * each cell's end. They come by series or by day; either way this is one look at each. */
static void deal(const struct frame *f, const struct reading **at, size_t *end, size_t cells)
{
    size_t total = 0;

    for (const struct block *b = f->newest; b; b = b->older)
        for (size_t i = 0; i < b->count; i++)
            end[cell_of(f, &b->at[i])]++;
    for (size_t i = 0; i < cells; i++)
        end[i] = total += end[i];
    /* The newest come first, so that each cell is filled from its end. */
    for (const struct block *b = f->newest; b; b = b->older)
        for (size_t i = b->count; i > 0; i--)
            at[--end[cell_of(f, &b->at[i - 1])]] = &b->at[i - 1];
    for (size_t i = 0; i < cells; i++)
        end[i] = i + 1 < cells ? end[i + 1] : total;
}

void frame_close(struct frame *f)
{
    struct arena *passing = arena_new();
    const struct reading **at =
        arena_alloc(f->arena, (f->readings + 1) * sizeof(const struct reading *));
    const struct reading **spare =
        arena_alloc(passing, (f->readings + 1) * sizeof(const struct reading *));
    size_t cells = f->plant->point_count * f->plant->parameter_count;
    size_t *end = arena_alloc(passing, (cells + 1) * sizeof *end);

    assert(!f->closed);
    f->closed = true;
    deal(f, at, end, cells);
    for (size_t i = 0, from = 0; i < cells; from = end[i++]) {
        size_t count = end[i] - from;

        sort(at + from, count, spare, by_version);
        count = keep_newest(at + from, count);
        sort(at + from, count, spare, by_loading);
        if (count > 0)
            add_column(f, at + from, count);
    }
    for (size_t i = 0; i < f->column_count; i++)
        if (totalizer_at(f->plant, f->columns[i].point, f->columns[i].parameter))
            totalizer_work(f, &f->columns[i]);
    discharge_mark(f);
    arena_free(passing);
}

struct frame *frame_under(struct arena *a, const struct frame *f, const struct plant *plant)
{
    struct frame *other = arena_alloc(a, sizeof *other);

    assert(f->closed && plant->point_count == f->plant->point_count &&
           plant->parameter_count == f->plant->parameter_count);
    *other = *f;
    other->arena = a;
    other->plant = plant;
    other->empty =
        arena_alloc(a, (plant->point_count * plant->parameter_count + 1) * sizeof *other->empty);
    /* Rules can change what a flow amounts to, and so which days are without discharge. */
    other->marks = arena_alloc(a, plant->point_count * (size_t)(f->last - f->first + 1) + 1);
    discharge_mark(other);
    return other;
}

/* ---- questions ---- */

day_t frame_first(const struct frame *f)
{
    return f->first;
}

day_t frame_last(const struct frame *f)
{
    return f->last;
}

const struct plant *frame_plant(const struct frame *f)
{
    return f->plant;
}

size_t frame_cell(const struct frame *f, int point, int parameter)
{
    assert(point >= 0 && (size_t)point < f->plant->point_count);
    assert(parameter >= 0 && (size_t)parameter < f->plant->parameter_count);
    return (size_t)point * f->plant->parameter_count + (size_t)parameter;
}

const struct column *frame_column(const struct frame *f, int point, int parameter)
{
    int32_t i = f->index[frame_cell(f, point, parameter)];

    assert(f->closed);
    return i < 0 ? NULL : &f->columns[i];
}

const struct reading *const *column_day(const struct column *c, day_t day, size_t *count)
{
    size_t i;

    *count = 0;
    if (!c || day < c->first || day > c->last)
        return NULL;
    i = (size_t)(day - c->first);
    *count = c->start[i + 1] - c->start[i];
    return *count > 0 ? c->at + c->start[i] : NULL;
}

bool column_has(const struct column *c, day_t first, day_t last)
{
    if (!c)
        return false;
    if (first < c->first)
        first = c->first;
    if (last > c->last)
        last = c->last;
    return first <= last && c->start[last + 1 - c->first] > c->start[first - c->first];
}

bool frame_has(const struct frame *f, int point, int parameter)
{
    return column_has(frame_column(f, point, parameter), f->first, f->last);
}

const struct reading *const *frame_readings(const struct frame *f, int point, int parameter,
                                            day_t day, size_t *count)
{
    *count = 0;
    if (day < f->first || day > f->last)
        return NULL;
    return column_day(frame_column(f, point, parameter), day, count);
}
