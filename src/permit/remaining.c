/* remaining: which samples of a period are still to come, by the frequency that the permit names,
 * and on which days they are taken to fall. 40 CFR 122.48(b): the frequency is a permit term. */
#include "permit/outlook.h"

#include "base/poison.h"

#define DAYS_A_WEEK  7
#define NEARLY_DAILY 27 /* of the last 30 days: common practice, no source */

/* ---- stretches ---- */

static day_t year_first(day_t day)
{
    int year, month, date;

    day_split(day, &year, &month, &date);
    return month_step(month_first(day), 1 - month);
}

static void add_stretch(struct arena *a, struct period **out, size_t *count, size_t *room,
                        day_t from, day_t to)
{
    struct period *p = arena_push(a, out, count, room, sizeof *p);

    *p = (struct period){from, to};
}

static void add_weeks(struct arena *a, const struct rules *rules, day_t first, day_t last,
                      struct period **out, size_t *count)
{
    size_t room = 0;

    /* A week may count in the month before its first day's or after its last day's. */
    for (day_t month = month_step(month_first(first), -1); month <= month_step(last, 1);
         month = month_step(month, 1)) {
        struct week in[6];
        size_t weeks = permit_weeks(rules, month, in);

        for (size_t i = 0; i < weeks; i++)
            if (in[i].from <= last && in[i].to >= first)
                add_stretch(a, out, count, &room, in[i].from, in[i].to);
    }
}

size_t stretches_of(struct arena *a, const struct rules *rules, enum per per, day_t first,
                    day_t last, struct period **out)
{
    static const int months[] = {[PER_MONTH] = 1, [PER_QUARTER] = 3, [PER_YEAR] = 12};
    size_t count = 0, room = 0;

    *out = NULL;
    if (per == PER_WEEK) {
        add_weeks(a, rules, first, last, out, &count);
        return count;
    }
    if (per != PER_MONTH && per != PER_QUARTER && per != PER_YEAR)
        return 0;
    for (day_t from = year_first(first); from <= last; from = month_step(from, months[per])) {
        day_t to = month_step(from, months[per]) - 1;

        if (to >= first)
            add_stretch(a, out, &count, &room, from, to);
    }
    return count;
}

/* ---- what is owed ---- */

static bool may_bring(const struct outlook *o, day_t day)
{
    return day >= o->next && day >= o->w.from && day <= o->w.to && work_takes(&o->w, day);
}

static long days_between(const struct outlook *o, day_t from, day_t to)
{
    long days = 0;

    from = from < o->next ? o->next : from;
    to = to > o->w.to ? o->w.to : to;
    for (day_t day = from; day <= to; day++)
        days += may_bring(o, day);
    return days;
}

/* Spreads `count` samples evenly over the days of from..to that may bring one. */
static void spread(const struct outlook *o, day_t from, day_t to, long count, struct remaining *out)
{
    long all = days_between(o, from, to), at = 0, done = 0;

    for (day_t day = from < o->next ? o->next : from; day <= to && done < count; day++) {
        if (!may_bring(o, day))
            continue;
        if (at++ != (2 * done + 1) * all / (2 * count))
            continue;
        *(day_t *)arena_push(o->w.arena, &out->day, &out->days, &out->room, sizeof day) = day;
        done++;
    }
}

static bool by_readings(const struct outlook *o)
{
    return o->w.rules->word[RULE_COUNT_BY] == COUNT_BY_READING;
}

/* Samples of from..to on record: days with a value, or their readings (R8). */
static long taken_in(const struct outlook *o, day_t from, day_t to)
{
    const struct list *all = from >= o->w.reach ? &o->now.days : &o->past.days;
    struct list l = list_between(*all, from, to);
    long taken = 0;

    for (size_t i = 0; i < l.count; i++)
        if (l.at[i].sample)
            taken += by_readings(o) ? (long)l.at[i].readings : 1;
    return taken;
}

/* What a stretch still owes falls evenly on the days it has left; the part of them that lies in the
 * period is the period's. */
static void owe_stretch(const struct outlook *o, const struct period *s, int count,
                        struct remaining *out)
{
    day_t from = s->from < o->next ? o->next : s->from;
    long whole = s->to < from ? 0 : s->to - from + 1, here = days_between(o, from, s->to);
    long owed = count - taken_in(o, s->from, s->to < o->on ? s->to : o->on), days;

    if (owed <= 0 || here <= 0 || whole <= 0)
        return;
    if (here < whole)
        owed = (2 * owed * here + whole) / (2 * whole);
    days = owed < here ? owed : here;
    out->lost += by_readings(o) ? 0 : owed - days;
    out->samples += by_readings(o) ? owed : days;
    spread(o, from, s->to, days, out);
}

static void owe_days(const struct outlook *o, int count, struct remaining *out)
{
    out->samples = out->left * (by_readings(o) ? (long)count : 1);
    spread(o, o->next, o->w.to, out->left, out);
}

/* Without a frequency the rest is taken to look like the last 30 days: common practice, no source.
 */
static void owe_lately(const struct outlook *o, struct remaining *out)
{
    struct list l = list_between(o->past.days, o->on - (DAYS_LATELY - 1), o->on);
    long days;

    out->lately = true;
    for (size_t i = 0; i < l.count; i++)
        out->seen += l.at[i].sample;
    days = (2 * out->left * out->seen + DAYS_LATELY) / (2L * DAYS_LATELY);
    days = out->seen >= NEARLY_DAILY ? out->left : days < 1 ? 1 : days;
    out->samples = days;
    spread(o, o->next, o->w.to, days, out);
}

void remaining_of(const struct outlook *o, struct remaining *out)
{
    const struct frequency *f = &o->w.limit->samples;
    struct period *stretch = NULL;
    size_t count;

    *out = (struct remaining){.left = days_between(o, o->w.from, o->w.to)};
    if (out->left == 0)
        return;
    if (o->w.kind->window > 0) { /* the next window needs its last day alone */
        out->samples = 1;
        spread(o, o->next, o->w.to, 1, out);
    } else if (f->per == PER_NONE) {
        owe_lately(o, out);
    } else if (f->per == PER_DAY || f->per == PER_CONTINUOUS) {
        owe_days(o, f->per == PER_DAY ? f->count : 1, out);
    } else {
        count = stretches_of(o->w.arena, o->w.rules, f->per, o->next, o->w.to, &stretch);
        /* Of a frequency longer than the period what is taken already is not looked up. */
        out->longer =
            count > 0 && stretch[0].from < o->w.reach && stretch[0].from < o->on - PAST_DAYS;
        if (out->longer)
            owe_lately(o, out);
        for (size_t i = 0; i < count && !out->longer; i++)
            owe_stretch(o, &stretch[i], f->count, out);
    }
    out->extra = out->days == 0;
    if (out->extra)
        spread(o, o->next, o->w.to, 1, out);
}
