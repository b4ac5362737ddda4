/* count: what an exceedance counts as, as courts and the agency's penalty policy have counted. An
 * exceedance is of a limit; whether it is a violation is for the agency to say. */
#include "permit/work.h"

#include "base/poison.h"

static bool is_average(enum measure m)
{
    return m == MEASURE_MEAN || m == MEASURE_GEOMEAN || m == MEASURE_MEDIAN;
}

static enum counted counted_as(const struct limit *l)
{
    const struct statistic_kind *k = statistic_kind(l->statistic);

    if (kind_counts_times(k)) /* daily, instantaneous, rolling and samples rows (G23) */
        return COUNTED_TIMES;
    if (is_average(k->measure) && k->span == SPAN_MONTH)
        return COUNTED_MONTH;
    if (is_average(k->measure) && k->span == SPAN_WEEK)
        return COUNTED_WEEK;
    return COUNTED_ONCE;
}

/* A row of a season or of an interim limit has the days it was in force. */
static long days_of(const struct permit_row *row, enum counted as)
{
    long days = 0;

    for (day_t day = row->from; day <= row->to; day++)
        days += as == COUNTED_WEEK || limit_in_force(row->limit, day);
    return days;
}

size_t permit_counts(struct arena *a, const struct permit_month *m, struct permit_count **out)
{
    size_t count = 0, room = 0;

    *out = NULL;
    for (size_t i = 0; i < m->count; i++) {
        const struct permit_row *row = &m->rows[i];
        struct permit_count *c;

        if (row->verdict != VERDICT_EXCEEDED)
            continue;
        c = arena_push(a, out, &count, &room, sizeof *c);
        c->row = row;
        c->as = counted_as(row->limit);
        if (c->as == COUNTED_TIMES)
            c->count = row->times;
        else
            c->count = c->as == COUNTED_ONCE ? 1 : days_of(row, c->as);
    }
    return count;
}
