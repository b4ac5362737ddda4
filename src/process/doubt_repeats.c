/* Doubts about what repeats itself or wanders off: the same value day after day, weekends that copy
 * Friday, an instrument drifting against its bench check, solids that do not balance. */
#include "process/doubt.h"

#include <stdlib.h>

#include "base/poison.h"

/* The day's only reading, when it is a plain number that is not 0. */
static const struct reading *single(const struct doubting *d, int point, int parameter, day_t day)
{
    size_t count = 0;
    const struct reading *const *r = NULL;
    if (day < frame_first(d->frame) || day > frame_last(d->frame))
        return NULL;
    r = frame_readings(d->frame, point, parameter, day, &count);
    return count == 1 && r[0]->qualifier == QUALIFIER_PLAIN && !decimal_is_zero(r[0]->value) ? r[0]
                                                                                             : NULL;
}

static bool same(const struct reading *a, const struct reading *b)
{
    return a && b && a->unit == b->unit && decimal_compare(a->value, b->value) == 0;
}

/* ---- the same value day after day ---- */

/* How many days in a row are too many, by the digits a value shows: a value of three digits has
 * some tens of neighbours it could have been, one of two digits few. 0: never. */
static int too_many(int figures)
{
    static const int days[] = {0, 0, 10, 6, 4};
    return days[figures > 4 ? 4 : figures];
}

/* A value that makes up much of the season anyway is a setting, not a copy: how often it stands in
 * the days around the run. */
static bool usual(const struct doubting *d, const struct reading *r, day_t first, day_t last)
{
    long others = 0;
    long equal = 0;
    for (day_t day = d->first - DOUBT_AROUND; day <= d->last + DOUBT_AROUND; day++) {
        const struct reading *x = single(d, r->point, r->parameter, day);
        if (!x || (day >= first && day <= last))
            continue;
        others++;
        equal += same(x, r);
    }
    return equal * 5 > others || others == 0;
}

static void run_of(struct doubting *d, const struct reading *r, day_t first, day_t last, int days)
{
    int figures = decimal_figures(r->value);
    int most = too_many(figures);
    if (most == 0 || days < most || last < d->first || usual(d, r, first, last))
        return;
    doubt_tell(d, DOUBT_SAME, r, 0, 0, 0, "",
               arena_print(d->arena,
                           "the same on %d days that follow one another, %s to %s; with %d digits "
                           "%d are too many; common practice, no source",
                           days, doubt_date(d->arena, first), doubt_date(d->arena, last), figures,
                           most));
}

static void same_values(struct doubting *d, int point, int parameter)
{
    const struct reading *begin = NULL; /* of the run, in or before the month */
    const struct reading *newest = NULL;
    int days = 0;
    for (day_t day = d->first - DOUBT_AROUND; day <= d->last + 1; day++) {
        const struct reading *r = day > d->last ? NULL : single(d, point, parameter, day);
        if (begin && same(begin, r)) {
            newest = r;
            days++;
            continue;
        }
        if (begin)
            run_of(d, newest, begin->day, newest->day, days);
        begin = newest = r;
        days = r != NULL;
    }
}

/* ---- weekends ---- */

static void weekends(struct doubting *d, int point, int parameter)
{
    long copies = 0;
    long whole = 0;
    long equal = 0;
    long pairs = 0;
    const struct reading *last = NULL;
    const char *days = "";
    for (day_t day = d->first; day <= d->last; day++) {
        const struct reading *r = single(d, point, parameter, day);
        const struct reading *before = single(d, point, parameter, day - 1);
        enum weekday weekday = day_weekday(day);
        if (r && before && weekday >= TUESDAY && weekday <= FRIDAY) {
            pairs++;
            equal += same(r, before);
        }
        if (weekday != SUNDAY || !r || !before || !single(d, point, parameter, day - 2))
            continue;
        whole++;
        if (!same(r, before) || !same(r, single(d, point, parameter, day - 2)) ||
            decimal_figures(r->value) < 2)
            continue;
        copies++;
        last = r;
        days =
            arena_print(d->arena, "%s%s%s", days, *days ? ", " : "", doubt_date(d->arena, day) + 5);
    }
    if (copies < 2 || copies * 2 < whole || pairs < 6 || equal * 5 >= pairs)
        return;
    doubt_tell(d, DOUBT_WEEKEND, last, 0, 0, 0, "",
               arena_print(d->arena,
                           "Saturday and Sunday repeat Friday on %ld of %ld weekends (Sundays %s), "
                           "while %ld of %ld weekdays repeat the day before; common practice, no "
                           "source",
                           copies, whole, days, equal, pairs));
}

void doubt_repeats(struct doubting *d, int point, int parameter)
{
    same_values(d, point, parameter);
    weekends(d, point, parameter);
}

/* ---- drifting ---- */

#define PAIRS_LEAST 8
#define PAIRS_MOST  31

/* Differences of two measurements, by day: Mann-Kendall, S and its variance with ties left out of
 * it (Mann 1945, Kendall 1975); a trend at 1 %, two-sided: (|S| - 1)^2 > 2.576^2 n(n-1)(2n+5)/18.
 */
static bool trends(const struct fraction *const *x, size_t n, long *s)
{
    *s = 0;
    for (size_t i = 0; i < n; i++)
        for (size_t j = i + 1; j < n; j++)
            *s += fraction_compare(x[j], x[i]);
    long over = labs(*s) - 1;
    long k = (long)n;
    return over > 0 && over * over * 18 * 1000 > 6636 * k * (k - 1) * (2 * k + 5);
}

static void drift_between(struct doubting *d, int point, int parameter, const char *sample,
                          int other, const char *other_sample)
{
    const struct fraction *x[PAIRS_MOST];
    const struct reading *last = NULL;
    day_t first = DAY_NONE;
    size_t n = 0;
    for (day_t day = d->first; day <= d->last; day++) {
        size_t count = 0;
        size_t others = 0;
        const struct reading *a = NULL;
        const struct reading *b = NULL;
        const struct reading *const *r = frame_readings(d->frame, point, parameter, day, &count);
        const struct reading *const *q = frame_readings(d->frame, point, other, day, &others);
        for (size_t i = 0; i < count; i++)
            if (doubt_measured(r[i]) && text_equal(r[i]->sample, sample))
                a = r[i];
        for (size_t i = 0; i < others; i++)
            if (doubt_measured(q[i]) && text_equal(q[i]->sample, other_sample))
                b = q[i];
        if (!a || !b)
            continue;
        const struct unit *own = d->plant->parameters[parameter].unit;
        const struct fraction *check =
            unit_convert(d->arena, doubt_number(d, b), d->plant->parameters[other].unit, own);
        first = n == 0 ? day : first;
        last = a;
        x[n++] = fraction_subtract(d->arena, doubt_number(d, a), check);
    }
    long s = 0;
    if (n < PAIRS_LEAST || !trends(x, n, &s) ||
        fraction_compare(fraction_power(d->arena, x[n - 1], 2),
                         fraction_power(d->arena, x[0], 2)) <= 0)
        return; /* what comes together is no drift */
    doubt_tell(d, DOUBT_DRIFT, last, 0, 0, 0, d->plant->parameters[other].id,
               arena_print(d->arena,
                           "the difference to %s %s went from %s on %s to %s on %s, S %ld over %zu "
                           "pairs; Mann 1945, Kendall 1975, at 1 %%",
                           d->plant->parameters[other].id, other_sample,
                           doubt_print(d->arena, x[0]), doubt_date(d->arena, first),
                           doubt_print(d->arena, x[n - 1]), doubt_date(d->arena, last->day), s, n));
}

/* Two sample names of a column on the same days: the first two that stand side by side. */
static void drift_of_samples(struct doubting *d, int point, int parameter)
{
    for (day_t day = d->first; day <= d->last; day++) {
        size_t count = 0;
        const struct reading *const *r = frame_readings(d->frame, point, parameter, day, &count);
        for (size_t i = 1; i < count; i++) {
            if (text_equal(r[i]->sample, r[0]->sample))
                continue;
            drift_between(d, point, parameter, r[0]->sample, parameter, r[i]->sample);
            return;
        }
    }
}

/* Two parameters with one five-digit code are two measurements of the same thing. */
void doubt_drifts(struct doubting *d, int point, int parameter)
{
    const struct parameter *p = &d->plant->parameters[parameter];
    if (doubt_register(d, point, parameter))
        return;
    drift_of_samples(d, point, parameter);
    for (int other = parameter + 1; *p->code && other < (int)d->plant->parameter_count; other++) {
        const struct parameter *q = &d->plant->parameters[other];
        if (text_equal(p->code, q->code) && unit_same_kind(p->unit, q->unit) &&
            frame_has(d->frame, point, other))
            drift_between(d, point, parameter, "", other, "");
    }
}

/* ---- solids ---- */

/* What was wasted, lost and gained in a month, over the oxygen demand removed: sludge cannot be
 * made of nothing, and does not vanish. The bounds lie well outside textbook yields (0.4 to 0.8 lb
 * of volatile solids per lb, Metcalf and Eddy, from memory). */
void doubt_balance(struct doubting *d)
{
    static const char *const least = "0.2";
    static const char *const most = "1.6";
    struct waste_plan plan = {0};
    struct fault f = {0};
    const struct waste_options o = {.aim = WASTE_FOR_SRT,
                                    .target = fraction_from_int(d->arena, 10),
                                    .on = d->last,
                                    .smooth = 1,
                                    .old = WASTE_LOOK_BACK,
                                    .step = fraction_from_int(d->arena, 100)};
    if (process_waste_reach(&o) < frame_first(d->frame) ||
        process_waste(d->arena, d->frame, &o, &plan, &f) != OK || !plan.yield)
        return; /* what is not measured cannot be balanced */
    if (fraction_compare(plan.yield, fraction_parse(d->arena, least)) >= 0 &&
        fraction_compare(plan.yield, fraction_parse(d->arena, most)) <= 0)
        return;
    doubt_tell(d, DOUBT_BALANCE, NULL, -1, -1, d->last, "",
               arena_print(d->arena,
                           "in the %d days to it the solids wasted, lost and gained are %s of the "
                           "oxygen demand removed; %s to %s would close; Metcalf and Eddy's yields "
                           "with room to spare, from memory",
                           WASTE_LOOK_BACK,
                           fraction_print(d->arena, plan.yield, 2, ROUND_HALF_EVEN), least, most));
}
