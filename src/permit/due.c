/* due: which samples the permit asks for now, which were taken and which were missed. Required and
 * taken are counted as a month's rows count them (samples.c); 40 CFR 122.48(b): the frequency is a
 * permit term; 122.41(l)(4)(ii): extra samples count. */
#include "permit/outlook.h"

#include <stdlib.h>

#include "base/poison.h"

#define DAYS_A_WEEK 7

const char *const due_words[DUE_STATES] = {
    [DUE_MISSED] = "missed",
    [DUE_DUE] = "due",
    [DUE_TAKEN] = "taken",
};

struct looking {
    struct arena *arena;
    const struct plant *plant;
    const struct frame *frame;
    day_t on, last; /* the last day looked ahead to */
    const bool *asked;
};

/* ---- the strictest ---- */

/* Samples in 2800 years of 365.25 days, so that all are whole numbers. */
static int64_t samples_long(const struct frequency *f)
{
    static const int64_t times[] = {
        [PER_DAY] = 1022700, [PER_CONTINUOUS] = 1022700, [PER_WEEK] = 146100,
        [PER_MONTH] = 33600, [PER_QUARTER] = 11200,      [PER_YEAR] = 2800};

    return f->per == PER_NONE ? 0 : times[f->per] * (f->per == PER_CONTINUOUS ? 1 : f->count);
}

static bool asks_of(const struct limit *l, int point, int parameter)
{
    bool at = false, of = false;

    for (int i = 0; i < l->points; i++)
        at = at || l->point[i] == point;
    for (int i = 0; i < l->parameters; i++)
        of = of || l->parameter[i] == parameter;
    return at && of;
}

/* Of limits on one series the one that asks for most holds, of equal ones the first. */
static bool is_strictest(const struct looking *k, size_t mine, int point, int parameter, day_t day)
{
    const struct limit *l = k->plant->limits;
    int64_t my = samples_long(&l[mine].samples);

    for (size_t i = 0; i < k->plant->limit_count; i++) {
        int64_t other = samples_long(&l[i].samples);

        if (i == mine || !k->asked[i] || !asks_of(&l[i], point, parameter) ||
            !limit_in_force(&l[i], day))
            continue;
        if (other > my || (other == my && i < mine))
            return false;
    }
    return true;
}

/* ---- stretches ---- */

static day_t week_first(const struct rules *rules, day_t day)
{
    int back = ((int)day_weekday(day) - rules->word[RULE_WEEK_STARTS] + DAYS_A_WEEK) % DAYS_A_WEEK;

    return day - back;
}

static bool is_daily(const struct limit *l)
{
    return l->samples.per == PER_DAY || l->samples.per == PER_CONTINUOUS;
}

/* How far back the stretch before the open one can begin. */
static day_t reach_back(enum per per, day_t on)
{
    static const int days[] = {
        [PER_NONE] = 0,   [PER_DAY] = 14,      [PER_CONTINUOUS] = 14, [PER_WEEK] = 45,
        [PER_MONTH] = 62, [PER_QUARTER] = 184, [PER_YEAR] = 731};
    return on - days[per];
}

static size_t daily_stretches(const struct looking *k, const struct limit *l, struct period **out)
{
    day_t from = week_first(&l->rules, k->on) - DAYS_A_WEEK;
    size_t count = 0, room = 0;

    *out = NULL;
    for (; from <= k->last; from += DAYS_A_WEEK)
        *(struct period *)arena_push(k->arena, out, &count, &room, sizeof **out) =
            (struct period){from, from + DAYS_A_WEEK - 1};
    return count;
}

/* The open stretch, the one before it and those ahead. */
static size_t stretches_shown(const struct looking *k, const struct limit *l, struct period **out)
{
    size_t count, first = 0;

    if (is_daily(l))
        return daily_stretches(k, l, out);
    count = stretches_of(k->arena, &l->rules, l->samples.per, reach_back(l->samples.per, k->on),
                         k->last, out);
    while (first + 1 < count && (*out)[first + 1].to < k->on)
        first++;
    *out += first;
    return count - first;
}

/* A week and longer stretches stand whole when the limit is in force on their last day (R36); of
 * days those in force count. */
static bool cut_stretch(const struct limit *l, struct period *p)
{
    day_t from = DAY_NONE, to = DAY_NONE;

    if (!is_daily(l))
        return limit_in_force(l, p->to);
    for (day_t day = p->from; day <= p->to; day++) {
        if (!limit_in_force(l, day))
            continue;
        from = from == DAY_NONE ? day : from;
        to = day;
    }
    *p = (struct period){from, to};
    return from != DAY_NONE;
}

/* ---- one row ---- */

static enum statistic statistic_for(enum per per)
{
    static const enum statistic statistics[] = {
        [PER_NONE] = STAT_DAILY,
        [PER_DAY] = STAT_DAILY,
        [PER_WEEK] = STAT_WEEKLY_AVERAGE,
        [PER_MONTH] = STAT_QUARTERLY_AVERAGE, /* whole months, in force or not */
        [PER_QUARTER] = STAT_QUARTERLY_AVERAGE,
        [PER_YEAR] = STAT_ANNUAL_AVERAGE,
        [PER_CONTINUOUS] = STAT_DAILY,
    };
    return statistics[per];
}

static long may_still(const struct limit *l, const struct work *w, day_t next)
{
    bool readings = w->rules->word[RULE_COUNT_BY] == COUNT_BY_READING;
    long days = 0;

    for (day_t day = next > w->from ? next : w->from; day <= w->to; day++)
        days += work_takes(w, day);
    if (is_daily(l))
        return days * (l->samples.per == PER_DAY ? l->samples.count : 1);
    return readings && days > 0 ? l->samples.count : days;
}

static bool make_row(const struct looking *k, const struct limit *l, int point, int parameter,
                     const struct period *p, struct due_row *row)
{
    struct limit asked = plain_limit(k->plant, point, parameter, statistic_for(l->samples.per),
                                     k->plant->parameters[parameter].unit);
    struct series series;
    struct work w;
    size_t count = 0;

    asked.rules = l->rules;
    asked.samples = l->samples;
    asked.season = l->season;
    asked.from = l->from;
    asked.to = l->to;
    w = work_on(k->arena, k->frame, &asked, p, k->on);
    amounts_of(&w, &series);
    frame_readings(k->frame, point, parameter, k->on, &count);
    *row = (struct due_row){.point = point,
                            .parameter = parameter,
                            .limit = l,
                            .from = p->from,
                            .to = p->to,
                            .sample = l->sample,
                            .next = count > 0 ? k->on + 1 : k->on};
    row->taken = samples_taken(&w, &series);
    if (!samples_required(&w, &row->required) || row->required == 0)
        return false;
    row->state = DUE_DUE;
    if (row->taken >= row->required)
        row->state = DUE_TAKEN;
    else if (row->from <= k->on && row->taken + may_still(l, &w, row->next) < row->required)
        row->state = DUE_MISSED;
    return true;
}

/* ---- all ---- */

struct rows {
    struct due_row *at;
    size_t count, room;
};

static void add_series(const struct looking *k, size_t index, int point, int parameter,
                       struct rows *out)
{
    const struct limit *l = &k->plant->limits[index];
    struct period *stretch;
    size_t count = stretches_shown(k, l, &stretch);

    for (size_t i = 0; i < count; i++) {
        struct period p = stretch[i];
        struct due_row row;

        if (!cut_stretch(l, &p) || !is_strictest(k, index, point, parameter, p.to))
            continue;
        /* What was asked for before the plant's first day is not known. */
        if (k->plant->since != DAY_NONE && p.from < k->plant->since && p.to < k->on)
            continue;
        if (make_row(k, l, point, parameter, &p, &row))
            *(struct due_row *)arena_push(k->arena, &out->at, &out->count, &out->room, sizeof row) =
                row;
    }
}

static int missed_first(const void *x, const void *y)
{
    const struct due_row *a = x, *b = y;

    if (a->state != b->state)
        return (int)a->state - (int)b->state;
    if (a->to != b->to)
        return a->to > b->to ? 1 : -1;
    if (a->from != b->from)
        return a->from > b->from ? 1 : -1;
    if (a->limit->line != b->limit->line)
        return a->limit->line > b->limit->line ? 1 : -1;
    if (a->point != b->point)
        return a->point - b->point;
    return a->parameter - b->parameter;
}

/* A limit whose condition is false on the day asks for nothing. */
static enum status find_asked(struct looking *k, struct fault *f)
{
    bool *asked = arena_alloc(k->arena, k->plant->limit_count + 1);
    enum status rc = OK;

    for (size_t i = 0; i < k->plant->limit_count; i++) {
        const struct limit *l = &k->plant->limits[i];
        enum holds holds = HOLDS;

        if (l->samples.per == PER_NONE)
            continue;
        TRY(condition_holds(k->arena, k->frame, l, month_first(k->on), k->on, &holds, f));
        asked[i] = holds != HOLDS_NOT;
    }
    k->asked = asked;
done:
    return rc;
}

enum status permit_due(struct arena *a, const struct frame *frame, day_t on, long days,
                       struct due_row **rows, size_t *count, struct fault *f)
{
    const struct plant *plant = frame_plant(frame);
    struct looking k = {
        .arena = a, .plant = plant, .frame = frame, .on = on, .last = on + (day_t)days - 1};
    struct rows out = {0};
    enum status rc = OK;

    TRY(find_asked(&k, f));
    for (size_t i = 0; i < plant->limit_count; i++) {
        const struct limit *l = &plant->limits[i];

        for (int j = 0; k.asked[i] && j < l->points * l->parameters; j++)
            add_series(&k, i, l->point[j / l->parameters], l->parameter[j % l->parameters], &out);
    }
    if (out.count > 0)
        qsort(out.at, out.count, sizeof *out.at, missed_first);
    *rows = out.at;
    *count = out.count;
done:
    return rc;
}

void permit_due_needs(struct arena *a, const struct plant *plant, day_t on, long days,
                      struct frame_span **needs, size_t *count)
{
    struct period *periods = arena_alloc(a, (plant->limit_count + 1) * sizeof *periods);
    struct looking k = {.arena = a, .plant = plant, .on = on, .last = on + (day_t)days - 1};

    for (size_t i = 0; i < plant->limit_count; i++) {
        const struct limit *l = &plant->limits[i];
        struct period *stretch;

        periods[i] = (struct period){1, 0};
        if (l->samples.per == PER_NONE)
            continue;
        if (stretches_shown(&k, l, &stretch) > 0)
            periods[i] = (struct period){stretch[0].from, on};
    }
    needs_of_periods(a, plant, month_first(on), periods, needs, count);
}
