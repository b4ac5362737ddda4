/* outlook: a period as it would end. The values that stand, the assumed ones behind them, and the
 * one engine over both. What may still come is searched for on the grid of printed numbers with
 * that engine as the judge: every statistic is monotone in each value, so the last number that is
 * met is found exactly, whatever is rounded or ranked on the way. For means the answer is plain
 * algebra: (limit x all - sum so far) / remaining. */
#include "permit/outlook.h"

#include <assert.h>

#include "base/poison.h"

#define MORE_DECIMALS 3
#define STEPS_MOST    INT64_C(1000000000000000) /* past these steps no number is a measurement */

/* ---- values behind values ---- */

static struct list grown(struct arena *a, struct list l, size_t more)
{
    struct list out = {arena_alloc(a, (l.count + more + 1) * sizeof *out.at), l.count};

    for (size_t i = 0; i < l.count; i++)
        out.at[i] = l.at[i];
    return out;
}

static struct amount scaled(struct arena *a, const struct amount *x, const struct fraction *by)
{
    struct amount out = *x;

    out.number = fraction_multiply(a, x->number, by);
    out.less = x->less ? fraction_multiply(a, x->less, by) : NULL;
    out.product = NULL;
    out.root = 0;
    out.as_written = NULL;
    return out;
}

static struct value value_on(day_t day, const struct amount *x)
{
    return (struct value){.day = day, .amount = *x, .readings = 1, .sample = true};
}

/* A single day's removal from its effluent; the sign turns (R41). */
static struct amount removal_of(const struct outlook *o, struct arena *a, const struct amount *left)
{
    const struct fraction *hundred = fraction_from_int(a, 100);
    struct amount share =
        scaled(a, left, fraction_divide(a, hundred, o->influent ? o->influent : hundred));

    return (struct amount){.number = fraction_subtract(a, hundred, share.number),
                           .part_greater = left->part_less,
                           .all_greater = left->all_less};
}

/* Behind the means that are divided or multiplied: effluent and influent, or their loads;
 * concentration and flow. */
static void put_parts(const struct outlook *o, struct arena *a, struct series *s, day_t day,
                      const struct amount *x)
{
    const struct fraction *one = fraction_from_int(a, 1);
    struct amount top = *x, bottom = {0};

    if (s->combine == COMBINE_PRODUCT) {
        top = scaled(a, x, fraction_divide(a, one, load_of(&o->w, one, o->flow)));
        bottom.number = o->flow;
    } else if (o->feed) {
        top = scaled(a, x, fraction_divide(a, o->feed, o->influent));
        bottom.number = o->feed;
    } else {
        bottom.number = o->influent;
    }
    s->top[0].at[s->top[0].count++] = value_on(day, &top);
    s->bottom[0].at[s->bottom[0].count++] = value_on(day, &bottom);
}

static struct series series_with(const struct outlook *o, struct arena *a,
                                 const struct amount *more)
{
    struct series s = o->now;
    bool divides = o->w.limit->basis == BASIS_REMOVAL && s.combine == COMBINE_NONE;

    s.days = grown(a, s.days, o->days);
    s.readings = grown(a, s.readings, o->days);
    if (s.combine != COMBINE_NONE) {
        s.top[0] = grown(a, s.top[0], o->days);
        s.bottom[0] = grown(a, s.bottom[0], o->days);
    }
    for (size_t i = 0; i < o->days; i++) {
        struct amount x = divides ? removal_of(o, a, &more[i]) : more[i];

        s.days.at[s.days.count++] = value_on(o->day[i], &x);
        s.readings.at[s.readings.count++] = value_on(o->day[i], &x);
        if (s.combine != COMBINE_NONE)
            put_parts(o, a, &s, o->day[i], &more[i]);
    }
    return s;
}

void outlook_figure(const struct outlook *o, struct arena *a, const struct amount *more,
                    struct figure *x)
{
    struct work w = o->w;
    struct series s = series_with(o, a, more);

    w.arena = a;
    figure_of(&w, &s, x);
}

/* ---- what was lately ---- */

struct list outlook_judged(const struct series *s)
{
    return s->by_reading ? s->readings : s->days;
}

struct amount outlook_typical(const struct outlook *o, const struct series *s, day_t from, day_t to)
{
    struct statistic_kind plain = {SPAN_WEEK, o->w.kind->measure, 0};
    bool removal = o->w.limit->basis == BASIS_REMOVAL;
    struct series part = {.days = list_between(removal ? o->parts.top[0] : s->days, from, to)};
    struct signs signs = signs_of(part.days);
    struct work w = o->w;
    struct figure x;

    if (s->combine == COMBINE_PRODUCT && s->parts == 1) {
        part.combine = COMBINE_PRODUCT;
        part.parts = 1;
        part.top[0] = list_between(s->top[0], from, to);
        part.bottom[0] = list_between(s->bottom[0], from, to);
    }
    if (plain.measure == MEASURE_TOTAL || plain.measure == MEASURE_SAMPLES)
        plain.measure = MEASURE_MEAN;
    w.kind = &plain;
    w.from = w.reach = from;
    w.to = w.end = to;
    figure_of(&w, &part, &x);
    if (x.exact.product) /* an assumption needs no root without end */
        x.exact.number =
            fraction_round(w.arena, x.exact.number, o->decimals + MORE_DECIMALS, ROUND_HALF_UP);
    return (struct amount){.number = x.exact.number,
                           .part_less = signs.part_less,
                           .all_less = signs.all_less,
                           .part_greater = signs.part_greater,
                           .all_greater = signs.all_greater,
                           .less = signs.part_less ? signs.largest : NULL};
}

/* ---- the judge ---- */

static bool beyond_with(const struct outlook *o, struct arena *a, const struct amount *more)
{
    struct outlook judged = *o;
    struct figure x;

    judged.w.verdict_only = true;
    outlook_figure(&judged, a, more, &x);
    return x.exact.number && x.beyond;
}

bool outlook_upwards(const struct outlook *o)
{
    return is_minimum(o->w.limit) == (o->w.limit->basis == BASIS_REMOVAL);
}

struct amount outlook_edge(const struct outlook *o, struct arena *a, bool beyond)
{
    const struct limit *l = o->w.limit;
    struct decimal d = l->limit.value;
    bool strict = l->bound == BOUND_BELOW || l->bound == BOUND_ABOVE;
    int out = is_minimum(l) ? -1 : 1; /* the way beyond */

    if (strict != beyond) /* equal is beyond a strict limit, and within the others */
        d.coefficient += strict ? -out : out;
    return (struct amount){.number = fraction_from_decimal(a, d)};
}

/* What a question asks about, beside the number that is searched for. */
struct question {
    const struct amount *others; /* of all samples but one; NULL: all have the number */
    bool counts;                 /* the number is how many are beyond */
};

/* Where months are averaged a value weighs most in the month that has the fewest: a single one is
 * taken to fall there, which is the safe side. */
static size_t single_at(const struct outlook *o)
{
    size_t at = o->days - 1, fewest = SIZE_MAX;

    if (o->w.kind->measure != MEASURE_MEAN ||
        (o->w.kind->span != SPAN_YEAR && o->w.kind->span != SPAN_12_MONTHS))
        return at;
    for (size_t i = 0, j; i < o->days; i = j) {
        day_t first = month_first(o->day[i]), last = month_last(first);
        size_t count = list_between(o->now.days, first, last).count;

        for (j = i; j < o->days && o->day[j] <= last; j++)
            count++;
        if (count < fewest) {
            fewest = count;
            at = i;
        }
    }
    return at;
}

/* The share of the number that one sample has: a total is all that may still be discharged. */
static const struct fraction *share_of(const struct outlook *o, struct arena *a)
{
    bool by_days =
        o->w.limit->basis == BASIS_LOAD &&
        (o->now.combine == COMBINE_PRODUCT || o->w.rules->word[RULE_LOAD_TOTAL] == LOAD_TOTAL_DAYS);

    if (o->w.kind->measure != MEASURE_TOTAL)
        return fraction_from_int(a, 1);
    return fraction_from_ratio(a, 1, by_days ? o->left : (int64_t)o->days);
}

/* What the remaining samples bring when the number is k steps. */
static struct amount *brought(const struct outlook *o, struct arena *a, const struct question *q,
                              int64_t k)
{
    struct amount *more = arena_alloc(a, (o->days + 1) * sizeof *more);
    struct decimal number = {k, (int8_t)o->decimals};
    struct amount asked = {.number = fraction_from_decimal(a, number)};
    struct amount good = outlook_edge(o, a, false), bad = outlook_edge(o, a, true);
    size_t single = single_at(o);

    if (!q->counts && !q->others)
        asked.number = fraction_multiply(a, asked.number, share_of(o, a));
    for (size_t i = 0; i < o->days; i++) {
        if (q->counts)
            more[i] = (int64_t)i < k ? bad : good;
        else
            more[i] = q->others && i != single ? *q->others : asked;
    }
    return more;
}

static bool beyond_at(const struct outlook *o, const struct question *q, int64_t k)
{
    struct arena *a = arena_new();
    bool out = beyond_with(o, a, brought(o, a, q, k));

    arena_free(a);
    return out;
}

/* ---- the search ---- */

struct bracket {
    int64_t least, start, most;
};

/* Where k steps are met and k + toward are beyond. Goes from `start` in growing steps to the first
 * change, then halves: few questions where the start is a good guess. `far`: every number up to the
 * end of the bracket is met. */
static int64_t last_met(const struct outlook *o, const struct question *q, const struct bracket *b,
                        int toward, bool *far)
{
    int64_t k = b->start, step = 1, met, beyond;
    bool begun = beyond_at(o, q, k), is_beyond = begun;

    *far = false;
    met = beyond = k;
    while (is_beyond == begun) {
        int64_t up = begun ? -toward : toward; /* away from what it is */
        int64_t end = up > 0 ? b->most : b->least;

        *far = k == end;
        if (*far)
            return k;
        k = (up > 0 ? end - k : k - end) <= step ? end : k + up * step;
        step = step > b->most / 4 ? b->most : step * 4;
        is_beyond = beyond_at(o, q, k);
        met = is_beyond ? met : k;
        beyond = is_beyond ? k : beyond;
    }
    while (met - beyond > 1 || beyond - met > 1) {
        int64_t middle = met + (beyond - met) / 2;

        if (beyond_at(o, q, middle))
            beyond = middle;
        else
            met = middle;
    }
    return met;
}

/* The largest number of the bracket that is met. */
static enum room_state search_up(const struct outlook *o, const struct question *q,
                                 const struct bracket *b, int64_t *number)
{
    bool far;

    if (beyond_at(o, q, b->least))
        return ROOM_NONE;
    *number = last_met(o, q, b, 1, &far);
    return far && *number == b->most ? ROOM_ANY : ROOM_LEFT;
}

/* The smallest that is met. */
static enum room_state search_down(const struct outlook *o, const struct question *q,
                                   const struct bracket *b, int64_t *number)
{
    bool far;

    if (!beyond_at(o, q, b->least))
        return ROOM_ANY;
    *number = last_met(o, q, b, -1, &far);
    return far ? ROOM_NONE : ROOM_LEFT;
}

static int64_t power_of_ten(int n)
{
    int64_t p = 1;

    while (n-- > 0)
        p *= 10;
    return p;
}

/* The lowest number that a measurement can be: nothing, but of a temperature its plausible lowest;
 * in a geometric mean a 0 counts as another number (R16), so it begins with one step. */
static int64_t least_of(const struct outlook *o)
{
    const struct parameter *p = &o->w.plant->parameters[o->w.limit->parameter[0]];
    int64_t whole;

    if (o->w.kind->measure == MEASURE_GEOMEAN)
        return 1;
    if (o->w.limit->basis != BASIS_CONCENTRATION || !p->low.set || p->low.value.coefficient >= 0)
        return 0;
    whole = p->low.value.coefficient / power_of_ten(p->low.value.scale) - 1;
    return whole * power_of_ten(o->decimals);
}

static int64_t start_of(const struct outlook *o)
{
    struct decimal limit = o->w.limit->limit.value;
    int64_t start = power_of_ten(o->decimals);

    if (o->w.limit->basis != BASIS_REMOVAL && limit.coefficient > 0 && limit.scale <= o->decimals &&
        limit.coefficient < STEPS_MOST / power_of_ten(o->decimals - limit.scale))
        start = limit.coefficient * power_of_ten(o->decimals - limit.scale);
    return start;
}

static const struct fraction *figure_at(const struct outlook *o, struct arena *a,
                                        const struct question *q, int64_t k)
{
    struct figure x;

    outlook_figure(o, a, brought(o, a, q, k), &x);
    return x.exact.number;
}

static bool whole_number(struct arena *a, const struct fraction *x, int64_t *out)
{
    const char *digits = fraction_print(a, x, 0, ROUND_HALF_UP);
    struct decimal d;
    size_t length = 0;

    while (digits[length] != '\0')
        length++;
    if (length > 16 || decimal_parse(digits, length, &d) != DECIMAL_FINE)
        return false;
    *out = d.coefficient;
    return true;
}

/* A mean and a total rise evenly with the number: two figures say where the last one that rounds to
 * the limit lies. Only a place to begin at. */
static int64_t guess(const struct outlook *o, const struct question *q, int64_t start)
{
    struct arena *a = arena_new();
    struct decimal limit = o->w.limit->limit.value, half = {is_minimum(o->w.limit) ? -5 : 5, 0};
    const struct fraction *aim = fraction_from_decimal(a, limit), *low, *high, *rise;
    int64_t k = start;

    if (o->w.kind->measure != MEASURE_MEAN && o->w.kind->measure != MEASURE_TOTAL)
        goto done;
    half.scale = (int8_t)(limit.scale + 1);
    if (o->w.rules->word[RULE_COMPARE] == COMPARE_ROUNDED && half.scale <= 18)
        aim = fraction_add(a, aim, fraction_from_decimal(a, half));
    low = figure_at(o, a, q, start);
    high = figure_at(o, a, q, 2 * start);
    if (!low || !high)
        goto done;
    rise = fraction_subtract(a, high, low);
    if (fraction_sign(rise) == 0)
        goto done;
    rise = fraction_divide(a, fraction_subtract(a, aim, low), rise);
    rise = fraction_multiply(a, rise, fraction_from_int(a, start));
    if (!whole_number(a, fraction_add(a, rise, fraction_from_int(a, start)), &k))
        k = start;
done:
    arena_free(a);
    return k;
}

enum room_state outlook_search(const struct outlook *o, const struct amount *others,
                               int64_t *number)
{
    struct question q = {.others = others};
    struct bracket b = {.least = least_of(o), .most = STEPS_MOST};

    b.start = guess(o, &q, start_of(o));
    b.start = b.start <= b.least ? b.least + 1 : b.start > b.most ? b.most : b.start;
    return outlook_upwards(o) ? search_up(o, &q, &b, number) : search_down(o, &q, &b, number);
}

enum room_state outlook_count(const struct outlook *o, int64_t *number)
{
    struct question q = {.counts = true};
    struct bracket b = {0, 1, (int64_t)o->days};

    return search_up(o, &q, &b, number);
}

/* ---- no room ---- */

/* The best that a sample can bring. */
static struct amount best_of(const struct outlook *o)
{
    struct decimal d = {outlook_upwards(o) ? least_of(o) : STEPS_MOST, (int8_t)o->decimals};

    if (o->w.kind->measure == MEASURE_SAMPLES)
        return outlook_edge(o, o->w.arena, false);
    return (struct amount){.number = fraction_from_decimal(o->w.arena, d)};
}

static struct list best_after(struct arena *a, struct list l, day_t day, const struct amount *best)
{
    struct list out = grown(a, l, 0);

    for (size_t i = 0; i < out.count; i++)
        if (out.at[i].day > day)
            out.at[i].amount = *best;
    return out;
}

/* Whether nothing could help any more on the evening of a day: all later values at their best. */
static bool gone_by(const struct outlook *o, day_t day)
{
    struct arena *a = arena_new();
    struct outlook then = *o;
    struct amount best = best_of(o), *more = arena_alloc(a, (o->days + 1) * sizeof *more);
    bool divides = o->w.limit->basis == BASIS_REMOVAL && o->now.combine == COMBINE_NONE;
    struct amount in_list = divides ? removal_of(o, a, &best) : best;
    bool gone;

    then.now.days = best_after(a, o->now.days, day, &in_list);
    then.now.readings = best_after(a, o->now.readings, day, &in_list);
    if (o->now.combine != COMBINE_NONE)
        then.now.top[0] = best_after(a, o->now.top[0], day, &best);
    for (size_t i = 0; i < o->days; i++)
        more[i] = best;
    gone = beyond_with(&then, a, more);
    arena_free(a);
    return gone;
}

day_t outlook_gone(const struct outlook *o)
{
    struct list l = o->now.combine != COMBINE_NONE ? o->now.top[0] : o->now.days;
    size_t low = 0, high = l.count;

    if (l.count == 0 || gone_by(o, l.at[0].day - 1))
        return DAY_NONE;
    while (low < high) { /* the first value after which it was gone */
        size_t middle = low + (high - low) / 2;

        if (gone_by(o, l.at[middle].day))
            high = middle;
        else
            low = middle + 1;
    }
    return low < l.count ? l.at[low].day : DAY_NONE;
}
