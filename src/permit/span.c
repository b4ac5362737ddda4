/* span: months side by side. Nothing is judged anew here: a span only gathers the rows that the
 * months have. */
#include "permit/work.h"

#include <assert.h>
#include <stdlib.h>

#include "base/poison.h"

static bool towards_low(const struct limit *l)
{
    return l->bound == BOUND_MIN || l->bound == BOUND_ABOVE;
}

/* Orders two rows of one limit by what a reader should see first: beyond the limit, then nearer to
 * it, then one that has a figure at all. Above 0 when `x` goes before `y`. */
static int worse(const struct permit_row *x, const struct permit_row *y)
{
    if ((x->verdict == VERDICT_EXCEEDED) != (y->verdict == VERDICT_EXCEEDED))
        return x->verdict == VERDICT_EXCEEDED ? 1 : -1;
    if (!x->rounded || !y->rounded)
        return (x->rounded != NULL) - (y->rounded != NULL);
    int order = fraction_compare(x->rounded, y->rounded);
    return towards_low(x->limit) ? -order : order;
}

/* A daily limit's row stands for all the month's days or readings beyond it. */
static long exceedances_of(const struct permit_row *row)
{
    if (row->verdict != VERDICT_EXCEEDED)
        return 0;
    return row->has_times ? row->times : 1;
}

static struct span_row *row_of(struct permit_span *s, const struct limit *l, size_t *room)
{
    for (size_t i = 0; i < s->count; i++)
        if (s->rows[i].limit == l)
            return &s->rows[i];
    struct span_row *row = arena_push(s->arena, &s->rows, &s->count, room, sizeof *row);
    row->limit = l;
    row->month = arena_alloc(s->arena, s->months * sizeof *row->month);
    return row;
}

static void add_figure(struct arena *a, struct span_row *into, size_t month,
                       const struct permit_row *row)
{
    into->figures++;
    into->is_signed = into->is_signed || row->figure[0] == '<' || row->figure[0] == '>';
    if (row->decimals > into->decimals)
        into->decimals = row->decimals;
    into->sum = into->sum ? fraction_add(a, into->sum, row->rounded) : row->rounded;
    if (!into->highest || fraction_compare(row->rounded, into->highest->rounded) > 0) {
        into->highest = row;
        into->highest_in = month;
    }
    if (!into->lowest || fraction_compare(row->rounded, into->lowest->rounded) < 0) {
        into->lowest = row;
        into->lowest_in = month;
    }
}

static void add_row(struct permit_span *s, struct span_row *into, size_t month,
                    const struct permit_row *row, day_t on)
{
    struct span_month *m = &into->month[month];

    if (!m->worst || worse(row, m->worst) > 0)
        m->worst = row;
    m->exceeded += exceedances_of(row);
    m->shortfalls += permit_shortfall(row, on);
    into->exceeded += exceedances_of(row);
    into->shortfalls += permit_shortfall(row, on);
    s->exceeded += row->verdict == VERDICT_EXCEEDED;
    s->shortfalls += permit_shortfall(row, on);
    if (row->rounded)
        add_figure(s->arena, into, month, row);
}

/* Limits stand in one array, in the order of limits.csv. */
static int by_limit(const void *x, const void *y)
{
    const struct span_row *left = x;
    const struct span_row *right = y;

    return (left->limit > right->limit) - (left->limit < right->limit);
}

void permit_span(struct arena *a, const struct permit_month *months, size_t count,
                 struct permit_span *out)
{
    size_t room = 0;

    assert(count > 0);
    *out = (struct permit_span){.arena = a, .month = months, .months = count};
    for (size_t i = 0; i < count; i++)
        for (size_t r = 0; r < months[i].count; r++) {
            const struct permit_row *row = &months[i].rows[r];

            add_row(out, row_of(out, row->limit, &room), i, row, months[i].on);
        }
    if (out->count > 0)
        qsort(out->rows, out->count, sizeof *out->rows, by_limit);
    for (size_t i = 0; i < out->count; i++)
        if (out->rows[i].figures > 0 && !out->rows[i].is_signed)
            out->rows[i].mean =
                fraction_divide(a, out->rows[i].sum, fraction_from_int(a, out->rows[i].figures));
}
