/* periods: which rows a limit has in a month, and which weeks count in it. */
#include "permit/work.h"

#include <assert.h>

#include "base/poison.h"

#define DAYS_A_WEEK 7

/* ---- statistics ---- */

static const struct statistic_kind kinds[STATISTICS] = {
    [STAT_INSTANTANEOUS] = {SPAN_MONTH, MEASURE_WORST, 0},
    [STAT_DAILY] = {SPAN_MONTH, MEASURE_WORST, 0},
    [STAT_WEEKLY_AVERAGE] = {SPAN_WEEK, MEASURE_MEAN, 0},
    [STAT_MONTHLY_AVERAGE] = {SPAN_MONTH, MEASURE_MEAN, 0},
    [STAT_ROLLING_7_DAY] = {SPAN_MONTH, MEASURE_MEAN, 7},
    [STAT_ROLLING_30_DAY] = {SPAN_MONTH, MEASURE_MEAN, 30},
    [STAT_MONTHLY_GEOMEAN] = {SPAN_MONTH, MEASURE_GEOMEAN, 0},
    [STAT_WEEKLY_GEOMEAN] = {SPAN_WEEK, MEASURE_GEOMEAN, 0},
    [STAT_MONTHLY_TOTAL] = {SPAN_MONTH, MEASURE_TOTAL, 0},
    [STAT_QUARTERLY_AVERAGE] = {SPAN_QUARTER, MEASURE_MEAN, 0},
    [STAT_SEMIANNUAL_AVERAGE] = {SPAN_HALF_YEAR, MEASURE_MEAN, 0},
    [STAT_ANNUAL_AVERAGE] = {SPAN_YEAR, MEASURE_MEAN, 0},
    [STAT_ROLLING_12_MONTH] = {SPAN_12_MONTHS, MEASURE_MEAN, 0},
    [STAT_ANNUAL_TOTAL] = {SPAN_YEAR, MEASURE_TOTAL, 0},
    [STAT_MONTHLY_MEDIAN] = {SPAN_MONTH, MEASURE_MEDIAN, 0},
    [STAT_PERCENTILE] = {SPAN_MONTH, MEASURE_PERCENTILE, 0},
    [STAT_ROLLING_7_DAY_MEDIAN] = {SPAN_MONTH, MEASURE_MEDIAN, 7},
    [STAT_ROLLING_30_DAY_GEOMEAN] = {SPAN_MONTH, MEASURE_GEOMEAN, 30},
    [STAT_MONTHLY_SAMPLES] = {SPAN_MONTH, MEASURE_SAMPLES, 0},
    [STAT_QUARTERLY_SAMPLES] = {SPAN_QUARTER, MEASURE_SAMPLES, 0},
    [STAT_ANNUAL_SAMPLES] = {SPAN_YEAR, MEASURE_SAMPLES, 0},
};

const struct statistic_kind *statistic_kind(enum statistic s)
{
    assert((size_t)s < NELEM(kinds));
    return &kinds[s];
}

bool kind_counts_times(const struct statistic_kind *k)
{
    return k->window > 0 || k->measure == MEASURE_WORST || k->measure == MEASURE_SAMPLES;
}

/* ---- weeks ---- */

/* Days 1-7, 8-14, 15-21, 22-28; later days are in no week (R17; Ohio EPA permits, part III, from
 * memory). */
static size_t fixed_weeks(day_t month, struct week out[6])
{
    for (day_t i = 0; i < 4; i++)
        out[i] = (struct week){month + i * DAYS_A_WEEK, month + i * DAYS_A_WEEK + DAYS_A_WEEK - 1};
    return 4;
}

static bool week_counts(int rule, const struct week *w, day_t month, day_t last)
{
    day_t middle = w->from + DAYS_A_WEEK / 2; /* of seven days four lie where the middle one does */

    switch (rule) {
    case WEEK_COUNTS_START: /* common practice, no source */
        return month <= w->from && w->from <= last;
    case WEEK_COUNTS_MOST_DAYS: /* common practice, no source */
        return month <= middle && middle <= last;
    case WEEK_COUNTS_SPLIT: /* common practice, no source */
        return w->to >= month && w->from <= last;
    default: /* Colorado general permit COG-603000, definition 10: the month of its last day */
        return month <= w->to && w->to <= last;
    }
}

size_t permit_weeks(const struct rules *rules, day_t month, struct week out[6])
{
    int rule = rules->word[RULE_WEEK_COUNTS_IN];
    day_t last = month_last(month);
    int back =
        ((int)day_weekday(month) - rules->word[RULE_WEEK_STARTS] + DAYS_A_WEEK) % DAYS_A_WEEK;
    size_t count = 0;

    if (rule == WEEK_COUNTS_DAYS_1_7)
        return fixed_weeks(month, out);
    for (day_t from = month - back; from <= last; from += DAYS_A_WEEK) {
        struct week w = {from, from + DAYS_A_WEEK - 1};

        if (!week_counts(rule, &w, month, last))
            continue;
        if (rule == WEEK_COUNTS_SPLIT) { /* R4 */
            w.from = w.from < month ? month : w.from;
            w.to = w.to > last ? last : w.to;
        }
        out[count++] = w;
    }
    return count;
}

/* ---- rows ---- */

/* Daily, instantaneous, monthly and rolling-N-day rows are cut to the days in force (R3, R36). */
static size_t month_cut(const struct limit *l, day_t month, struct period *out)
{
    size_t count = 0;

    for (day_t day = month; day <= month_last(month); day++) {
        if (!limit_in_force(l, day))
            continue;
        if (count == 0)
            out->from = day;
        out->to = day;
        count = 1;
    }
    return count;
}

/* Other rows stand whole when the limit is in force on their last day (R36, G15). */
static size_t keep_in_force(const struct limit *l, const struct week *w, size_t count,
                            struct period *out)
{
    size_t kept = 0;

    for (size_t i = 0; i < count; i++)
        if (limit_in_force(l, w[i].to))
            out[kept++] = (struct period){w[i].from, w[i].to};
    return kept;
}

/* Quarters come with their last month, half-years with June and December, years with December,
 * twelve months with every month (R5). */
static size_t long_period(const struct limit *l, day_t month, int months, int with,
                          struct period *out)
{
    int year, number, date;
    struct week whole = {month_step(month, 1 - months), month_last(month)};

    day_split(month, &year, &number, &date);
    return number % with == 0 ? keep_in_force(l, &whole, 1, out) : 0;
}

size_t periods_of(const struct limit *l, day_t month, struct period out[PERIODS_MOST])
{
    struct week weeks[6];

    switch (statistic_kind(l->statistic)->span) {
    case SPAN_WEEK:
        return keep_in_force(l, weeks, permit_weeks(&l->rules, month, weeks), out);
    case SPAN_QUARTER:
        return long_period(l, month, 3, 3, out);
    case SPAN_HALF_YEAR:
        return long_period(l, month, 6, 6, out);
    case SPAN_YEAR:
        return long_period(l, month, 12, 12, out);
    case SPAN_12_MONTHS:
        return long_period(l, month, 12, 1, out);
    default:
        return month_cut(l, month, out);
    }
}

/* The window of a rolling row reaches before the month (R6); a window of results as far as the
 * records do. */
day_t period_reach(const struct plant *plant, const struct limit *l, const struct period *p)
{
    const struct statistic_kind *kind = statistic_kind(l->statistic);
    day_t first;

    if (kind->window == 0)
        return p->from;
    if (l->rules.word[RULE_WINDOW] == WINDOW_DAYS)
        return p->from - (kind->window - 1);
    if (plant->since != DAY_NONE && plant->since < p->from)
        return plant->since;
    return day_from(1900, 1, 1, &first) ? first : p->from;
}

int months_held(day_t from, day_t to)
{
    int count = 0;

    if (month_first(from) != from || month_last(to) != to)
        return 0;
    for (day_t month = from; month <= to; month = month_step(month, 1))
        count++;
    return count;
}
