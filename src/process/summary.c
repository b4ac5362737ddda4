/* Daily figures gathered by weekday or by month of the year: count, mean, least, most and
 * percentiles. */
#include "process/process.h"

#include <assert.h>
#include <stdlib.h>

#include "base/poison.h"

struct entry {
    const struct process_figure *figure;
    size_t line; /* which figure it is, in order of first appearance */
    int group;
};

struct sorting {
    struct arena *arena;
    const struct process_figure **line;
    size_t lines, room;
};

static int group_of(day_t day, enum process_group by)
{
    int year, month, date;
    if (by == GROUP_WEEKDAY)
        return (int)day_weekday(day);
    day_split(day, &year, &month, &date);
    return month;
}

static bool same_line(const struct process_figure *x, const struct process_figure *y)
{
    return text_equal(x->name, y->name) && text_equal(x->at, y->at) &&
           text_equal(x->parameter, y->parameter);
}

/* Days repeat their lines in one order: the next is looked at first. */
static size_t line_of(struct sorting *s, const struct process_figure *figure, size_t next)
{
    for (size_t tried = 0; tried < s->lines; tried++) {
        size_t i = (next + tried) % s->lines;
        if (same_line(s->line[i], figure))
            return i;
    }
    const struct process_figure **slot =
        arena_push(s->arena, &s->line, &s->lines, &s->room, sizeof(const struct process_figure *));
    *slot = figure;
    return s->lines - 1;
}

static int by_place(const void *one, const void *other)
{
    const struct entry *a = one, *b = other;
    if (a->line != b->line)
        return a->line < b->line ? -1 : 1;
    if (a->group != b->group)
        return a->group < b->group ? -1 : 1;
    int c = fraction_compare(a->figure->value, b->figure->value);
    return c ? c : (a->figure->from > b->figure->from) - (a->figure->from < b->figure->from);
}

const struct fraction *process_percentile(struct arena *a, const struct fraction *const *ranked,
                                          size_t count, int percent, int rule)
{
    assert(count > 0 && percent >= 0 && percent <= 100);
    long n = (long)count, rank;
    switch (rule) {
    case PERCENTILE_LINEAR:
        rank = 100 + percent * (n - 1);
        break;
    case PERCENTILE_WEIBULL:
        rank = percent * (n + 1);
        break;
    default:
        rank = (percent * n + 99) / 100 * 100;
        break;
    }
    rank = rank < 100 ? 100 : rank > 100 * n ? 100 * n : rank;
    const struct fraction *low = ranked[rank / 100 - 1];
    if (rank % 100 == 0)
        return low;
    const struct fraction *step = fraction_subtract(a, ranked[rank / 100], low);
    return fraction_add(a, low,
                        fraction_multiply(a, step, fraction_from_ratio(a, rank % 100, 100)));
}

/* Entries of one line and group, lowest first. */
static void sum_up(struct arena *a, const struct entry *e, size_t count, int rule,
                   struct process_summary *out)
{
    static const int percents[PROCESS_PERCENTILES] = {10, 50, 90};
    const struct fraction **ranked = arena_alloc(a, count * sizeof(const struct fraction *));
    const struct fraction *sum = fraction_from_int(a, 0);
    for (size_t i = 0; i < count; i++) {
        ranked[i] = e[i].figure->value;
        sum = fraction_add(a, sum, ranked[i]);
    }
    *out = (struct process_summary){.group = e->group, .figure = e->figure, .count = (long)count};
    out->mean = fraction_divide(a, sum, fraction_from_int(a, (int64_t)count));
    out->least = ranked[0];
    out->most = ranked[count - 1];
    for (size_t i = 0; i < PROCESS_PERCENTILES; i++)
        out->percentile[i] = process_percentile(a, ranked, count, percents[i], rule);
}

void process_summarize(struct arena *a, const struct process_figure *figures, size_t count,
                       enum process_group by, int rule, struct process_summary **out,
                       size_t *out_count)
{
    struct sorting s = {.arena = a};
    struct entry *entry = arena_alloc(a, (count + 1) * sizeof *entry);
    size_t entries = 0, next = 0;
    for (size_t i = 0; i < count; i++) {
        if (figures[i].value == NULL)
            continue;
        size_t line = line_of(&s, &figures[i], next);
        next = line + 1;
        entry[entries++] = (struct entry){&figures[i], line, group_of(figures[i].from, by)};
    }
    if (entries > 1)
        qsort(entry, entries, sizeof *entry, by_place);
    *out = arena_alloc(a, (entries + 1) * sizeof **out);
    *out_count = 0;
    for (size_t first = 0, last; first < entries; first = last) {
        for (last = first + 1; last < entries && entry[last].line == entry[first].line &&
                               entry[last].group == entry[first].group;)
            last++;
        sum_up(a, &entry[first], last - first, rule, &(*out)[(*out_count)++]);
    }
}
