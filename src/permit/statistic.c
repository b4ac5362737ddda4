/* statistic: the values of a row to one exact figure, and what must be known of its sign. Nothing
 * is rounded here. */
#include "permit/statistic.h"

#include <assert.h>

#include "base/poison.h"

#define ROOT_DECIMALS 40
/* Days of several readings bring roots of their own; past this common root their geometric means
 * enter by their 40 decimals, as in a sum. */
#define ROOT_MOST 240

/* ---- signs ---- */

struct signs signs_of(struct list l)
{
    struct signs s = {.all_less = l.count > 0, .all_greater = l.count > 0};

    for (size_t i = 0; i < l.count; i++) {
        const struct amount *a = &l.at[i].amount;

        s.part_less = s.part_less || a->part_less;
        s.all_less = s.all_less && a->all_less;
        s.part_greater = s.part_greater || a->part_greater;
        s.all_greater = s.all_greater && a->all_greater;
        if (a->less && (!s.largest || fraction_compare(a->less, s.largest) > 0)) {
            s.largest = a->less;
            s.as_written = a->as_written;
        }
    }
    return s;
}

void set_signs(struct figure *x, const struct signs *s)
{
    x->part_less = s->part_less;
    x->all_less = s->all_less;
    x->part_greater = s->part_greater;
    x->all_greater = s->all_greater;
}

/* R13: where all were less-thans the figure is "<" and the largest of the numbers, under `full` "<"
 * and the figure itself. Colorado general permit COG-603000, definition 11. */
void set_stand(const struct work *w, const struct signs *s, const struct fraction *largest,
               struct figure *x)
{
    if (!s->all_less)
        return;
    if (w->rules->word[RULE_NONDETECT] == NONDETECT_FULL) {
        x->stand = x->exact;
        x->as_written =
            s->largest && x->exact.number && fraction_compare(x->exact.number, s->largest) == 0
                ? s->as_written
                : NULL;
        return;
    }
    x->stand.number = largest;
    x->as_written = largest == s->largest ? s->as_written : NULL;
}

/* ---- means ---- */

static const struct fraction *sum_of(const struct work *w, struct list l)
{
    const struct fraction *sum = fraction_from_int(w->arena, 0);

    for (size_t i = 0; i < l.count; i++)
        sum = fraction_add(w->arena, sum, l.at[i].amount.number);
    return sum;
}

/* 40 CFR 122.2: the sum of the daily discharges over the number of days measured. */
static const struct fraction *mean_of(const struct work *w, struct list l)
{
    if (l.count == 0)
        return NULL;
    return fraction_divide(w->arena, sum_of(w, l), fraction_from_int(w->arena, (int64_t)l.count));
}

/* R19: all daily concentrations of the period, all daily flows of the period; R43: each outfall by
 * itself. Common practice, no source. */
static void product_mean(const struct work *w, const struct series *s, struct figure *x)
{
    const struct fraction *sum = fraction_from_int(w->arena, 0), *largest = sum;
    struct signs signs = {.all_less = true, .all_greater = true};

    for (int i = 0; i < s->parts; i++) {
        const struct fraction *c = mean_of(w, s->top[i]), *q = mean_of(w, s->bottom[i]);
        struct signs part = signs_of(s->top[i]), flow = signs_of(s->bottom[i]);

        if (!c || !q)
            return;
        sum = fraction_add(w->arena, sum, load_of(w, c, q));
        largest = fraction_add(w->arena, largest, load_of(w, part.largest ? part.largest : c, q));
        signs.part_less = signs.part_less || part.part_less || flow.part_less;
        signs.all_less = signs.all_less && part.all_less;
        signs.part_greater = signs.part_greater || part.part_greater || flow.part_greater;
        signs.all_greater = signs.all_greater && part.all_greater;
    }
    x->exact.number = sum;
    set_signs(x, &signs);
    set_stand(w, &signs, largest, x);
}

static const struct fraction *removed(const struct work *w, const struct fraction *left,
                                      const struct fraction *of)
{
    const struct fraction *hundred = fraction_from_int(w->arena, 100);

    left = fraction_divide(w->arena, fraction_multiply(w->arena, hundred, left), of);
    return fraction_subtract(w->arena, hundred, left);
}

/* 40 CFR 133.101(j): from the average influent and the average effluent. The sign turns (R41). */
static void removal_mean(const struct work *w, const struct series *s, struct figure *x)
{
    const struct fraction *left = mean_of(w, s->top[0]), *of = mean_of(w, s->bottom[0]);
    struct signs signs = signs_of(s->top[0]);

    if (!left || !of || fraction_sign(of) <= 0)
        return;
    x->exact.number = removed(w, left, of);
    x->part_greater = signs.part_less;
    x->all_greater = signs.all_less;
    if (signs.all_less && w->rules->word[RULE_NONDETECT] != NONDETECT_FULL)
        x->stand.number = removed(w, signs.largest, of);
}

/* Under nondetect=median the mean gives way to the median where a less-than or a DNQ is present:
 * California order R2-2012-0012, procedure of the State Implementation Policy. Loads and removals
 * have nothing to rank (R28). */
static bool gives_way(const struct work *w, struct list l)
{
    if (w->rules->word[RULE_NONDETECT] != NONDETECT_MEDIAN || w->limit->basis == BASIS_LOAD ||
        w->limit->basis == BASIS_REMOVAL)
        return false;
    for (size_t i = 0; i < l.count; i++)
        if (l.at[i].amount.part_less || l.at[i].amount.dnq)
            return true;
    return false;
}

void figure_mean(const struct work *w, const struct series *s, struct figure *x)
{
    struct signs signs = signs_of(s->days);

    if (s->combine == COMBINE_PRODUCT) {
        product_mean(w, s, x);
    } else if (s->combine == COMBINE_REMOVAL) {
        removal_mean(w, s, x);
    } else if (gives_way(w, s->days)) {
        ranked_median(w, s->days, x);
    } else {
        x->exact.number = mean_of(w, s->days);
        set_signs(x, &signs);
        set_stand(w, &signs, signs.largest, x);
    }
}

/* ---- geometric means ---- */

static unsigned common_multiple(unsigned a, unsigned b)
{
    unsigned x = a, y = b;

    assert(a > 0 && b > 0);
    while (y != 0) {
        unsigned rest = x % y;
        x = y;
        y = rest;
    }
    return a / x * b;
}

/* The root all days' values can be taken under. */
static unsigned common_root(struct list l)
{
    unsigned root = 1;

    for (size_t i = 0; i < l.count; i++)
        if (l.at[i].amount.product && root <= ROOT_MOST)
            root = common_multiple(root, l.at[i].amount.root);
    return root <= ROOT_MOST ? root : 1;
}

/* The n-th root of the product, through its n-th power. Texas: a zero enters as geomean_zero (R16).
 */
static void figure_geomean(const struct work *w, const struct series *s, struct figure *x)
{
    struct arena *a = w->arena;
    struct list l = s->days;
    struct signs signs = signs_of(l);
    const struct fraction *zero = fraction_from_decimal(a, w->rules->number[RULE_GEOMEAN_ZERO]);
    const struct fraction *product = fraction_from_int(a, 1);
    unsigned root = common_root(l);

    for (size_t i = 0; i < l.count; i++) {
        const struct amount *v = &l.at[i].amount;
        bool exactly = v->product && root > 1;
        const struct fraction *n = exactly ? v->product : v->number;

        if (fraction_sign(n) < 0) {
            x->note = "a geometric mean has no number below 0 in it";
            return;
        }
        if (fraction_sign(n) == 0)
            n = zero;
        product =
            fraction_multiply(a, product, fraction_power(a, n, root / (exactly ? v->root : 1)));
    }
    if (l.count == 0)
        return;
    x->exact.product = product;
    x->exact.root = root * (unsigned)l.count;
    x->exact.number = w->verdict_only
                          ? product
                          : root_round(a, product, x->exact.root, ROOT_DECIMALS, ROUND_HALF_EVEN);
    set_signs(x, &signs);
    set_stand(w, &signs, signs.largest, x);
}

/* ---- totals ---- */

static const struct fraction *days_of(const struct work *w)
{
    int64_t days = 0;

    for (day_t day = w->from; day <= w->end; day++)
        days += work_takes(w, day);
    return fraction_from_int(w->arena, days);
}

static void scale(const struct work *w, const struct fraction *by, struct figure *x)
{
    bool same = x->stand.number == x->exact.number;

    x->exact.number = fraction_multiply(w->arena, x->exact.number, by);
    if (x->stand.number)
        x->stand.number = same ? x->exact.number : fraction_multiply(w->arena, x->stand.number, by);
    x->as_written = NULL;
}

/* R21, R44: a load is the mean daily load times the days of the period (so far), or under
 * load_total=sum the loads measured; flow and all else is the sum of the days. */
static void figure_total(const struct work *w, const struct series *s, struct figure *x)
{
    bool by_days =
        w->limit->basis == BASIS_LOAD &&
        (s->combine == COMBINE_PRODUCT || w->rules->word[RULE_LOAD_TOTAL] == LOAD_TOTAL_DAYS);
    struct signs signs = signs_of(s->days);
    const struct fraction *less = fraction_from_int(w->arena, 0);

    if (by_days) {
        figure_mean(w, s, x);
        if (x->exact.number)
            scale(w, days_of(w), x);
        return;
    }
    if (s->days.count == 0)
        return;
    for (size_t i = 0; i < s->days.count; i++)
        if (s->days.at[i].amount.less)
            less = fraction_add(w->arena, less, s->days.at[i].amount.less);
    x->exact.number = sum_of(w, s->days);
    set_signs(x, &signs);
    set_stand(w, &signs, less, x);
}

/* ---- spans ---- */

typedef void measure_function(const struct work *w, const struct series *s, struct figure *x);

static measure_function *const measures[] = {
    [MEASURE_WORST] = figure_worst,           [MEASURE_MEAN] = figure_mean,
    [MEASURE_GEOMEAN] = figure_geomean,       [MEASURE_MEDIAN] = figure_median,
    [MEASURE_PERCENTILE] = figure_percentile, [MEASURE_TOTAL] = figure_total,
    [MEASURE_SAMPLES] = figure_samples,
};

static struct series series_between(const struct series *s, day_t from, day_t to)
{
    struct series out = *s;

    out.days = list_between(s->days, from, to);
    for (int i = 0; i < s->parts; i++) {
        out.top[i] = list_between(s->top[i], from, to);
        out.bottom[i] = list_between(s->bottom[i], from, to);
    }
    return out;
}

/* R22, G6: the mean of the months' figures, months without data left out; R44: unrounded, and the
 * sign is that of all the days together. From memory: nitrogen permits of EPA New England. */
static void mean_of_months(const struct work *w, const struct series *s, struct figure *x)
{
    const struct fraction *sum = fraction_from_int(w->arena, 0);
    int64_t months = 0;

    figure_mean(w, s, x);
    for (day_t month = w->from; month <= w->end; month = month_step(month, 1)) {
        struct series in = series_between(s, month, month_last(month));
        struct figure one = {0};

        figure_mean(w, &in, &one);
        if (!one.exact.number)
            continue;
        sum = fraction_add(w->arena, sum, one.exact.number);
        months++;
    }
    if (months == 0)
        return;
    x->exact = (struct exact){
        .number = fraction_divide(w->arena, sum, fraction_from_int(w->arena, months))};
    if (x->read) {
        struct signs signs = signs_of(s->days);

        x->read = false;
        set_signs(x, &signs);
        x->stand = (struct exact){.number = signs.all_less ? signs.largest : NULL};
    }
    if (x->stand.number && w->rules->word[RULE_NONDETECT] == NONDETECT_FULL)
        x->stand = x->exact;
}

/* R6: each window that ends on a day in force and has a value; the worst stands in the row. Under
 * window=results a window is the latest N days with a value (California title 22, 60301.230), and
 * ends on one. */
static void worst_window(const struct work *w, const struct series *s, struct figure *worst)
{
    bool results = w->rules->word[RULE_WINDOW] == WINDOW_RESULTS;
    size_t window = (size_t)w->kind->window;

    for (day_t day = w->from; day <= w->end; day++) {
        struct list upto = list_between(s->days, w->reach, day);
        day_t from = day - (w->kind->window - 1);
        struct figure one = {0};
        struct series in;

        if (!limit_in_force(w->limit, day))
            continue;
        if (results) {
            if (upto.count == 0 || upto.at[upto.count - 1].day != day)
                continue;
            from = upto.at[upto.count > window ? upto.count - window : 0].day;
        }
        in = series_between(s, from, day);
        measures[w->kind->measure](w, &in, &one);
        one.on = day;
        if (one.exact.number)
            take_worst(w, &one, worst);
        else if (one.note)
            worst->note = one.note;
    }
    worst->beyond = worst->certain = worst->times > 0;
}

static bool by_months(const struct work *w)
{
    int rule = w->rules->word[RULE_LONG_AVERAGE];

    if (w->kind->measure != MEASURE_MEAN)
        return false;
    if (w->kind->span == SPAN_12_MONTHS)
        return rule != LONG_AVERAGE_DAYS;
    return w->kind->span == SPAN_YEAR && rule == LONG_AVERAGE_MONTHS; /* R45 */
}

void figure_of(const struct work *w, const struct series *s, struct figure *out)
{
    *out = (struct figure){.on = DAY_NONE};
    if (w->kind->window > 0) {
        worst_window(w, s, out);
        return;
    }
    if (by_months(w))
        mean_of_months(w, s, out);
    else
        measures[w->kind->measure](w, s, out);
    if (!kind_counts_times(w->kind)) {
        out->on = DAY_NONE;
        out->beyond = out->exact.number && exact_beyond(w, &out->exact);
    }
}
