/* statistic: the values of a row to one exact figure, and what must be known of its sign. Nothing
 * is rounded here. */
#include "permit/work.h"

#include <assert.h>
#include <stdlib.h>

#include "base/poison.h"

#define ROOT_DECIMALS 40
/* Days of several readings bring roots of their own; past this common root their geometric means
 * enter by their 40 decimals, as in a sum. */
#define ROOT_MOST 240

/* ---- signs ---- */

struct signs {
    bool part_less, all_less, part_greater, all_greater;
    const struct fraction *largest; /* of the numbers after "<" */
    const char *as_written;
};

static struct signs signs_of(struct list l)
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

static void set_signs(struct figure *x, const struct signs *s)
{
    x->part_less = s->part_less;
    x->all_less = s->all_less;
    x->part_greater = s->part_greater;
    x->all_greater = s->all_greater;
}

/* R13: where all were less-thans the figure is "<" and the largest of the numbers, under `full` "<"
 * and the figure itself. Colorado general permit COG-603000, definition 11. */
static void set_stand(const struct work *w, const struct signs *s, const struct fraction *largest,
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

static void ranked_median(const struct work *w, struct list l, struct figure *x);

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

static void figure_mean(const struct work *w, const struct series *s, struct figure *x)
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
    x->exact.number = root_round(a, product, x->exact.root, ROOT_DECIMALS, ROUND_HALF_EVEN);
    set_signs(x, &signs);
    set_stand(w, &signs, signs.largest, x);
}

/* ---- ranks ---- */

/* The procedure ranks less-thans lowest, then DNQ, then values; other rules go by the number alone.
 */
static int rank_class(const struct amount *a, bool procedure)
{
    if (!procedure || (!a->all_less && !a->dnq))
        return 2;
    return a->all_less ? 0 : 1;
}

static int compare_ranked(const struct value *x, const struct value *y, bool procedure)
{
    int c = rank_class(&x->amount, procedure) - rank_class(&y->amount, procedure);

    if (c == 0)
        c = fraction_compare(x->amount.number, y->amount.number);
    if (c == 0 && x->amount.all_less && y->amount.all_less)
        c = fraction_compare(x->amount.less, y->amount.less);
    if (c == 0)
        c = (int)x->amount.all_less - (int)y->amount.all_less;
    return c != 0 ? c : (x->day > y->day) - (x->day < y->day);
}

static int by_number(const void *x, const void *y)
{
    return compare_ranked(x, y, false);
}

static int by_procedure(const void *x, const void *y)
{
    return compare_ranked(x, y, true);
}

static bool by_the_procedure(const struct work *w)
{
    return w->rules->word[RULE_NONDETECT] == NONDETECT_MEDIAN;
}

static struct list ranked(const struct work *w, struct list l)
{
    struct list out = {arena_alloc(w->arena, (l.count + 1) * sizeof *out.at), l.count};

    for (size_t i = 0; i < l.count; i++)
        out.at[i] = l.at[i];
    qsort(out.at, out.count, sizeof *out.at, by_the_procedure(w) ? by_procedure : by_number);
    return out;
}

/* What was read off a ranking carries the sign of the values it was read from; R13 comes first
 * (R27). `taken` is one value or two neighbours, the figure lies `share` of the way between them.
 */
static void figure_read(const struct work *w, struct list all, struct list taken,
                        const struct fraction *share, struct figure *x)
{
    struct signs whole = signs_of(all), here = signs_of(taken);
    const struct amount *low = &taken.at[0].amount, *high = &taken.at[taken.count - 1].amount;

    x->read = true;
    if (taken.count == 1) {
        x->exact = (struct exact){low->number, low->product, low->root};
    } else {
        const struct fraction *step = fraction_subtract(w->arena, high->number, low->number);
        x->exact.number =
            fraction_add(w->arena, low->number, fraction_multiply(w->arena, step, share));
    }
    if (whole.all_less) {
        set_signs(x, &whole);
        set_stand(w, &whole, whole.largest, x);
        return;
    }
    set_signs(x, &here);
    if (here.all_less) {
        x->stand.number = here.largest;
        x->as_written = here.as_written;
    }
}

/* R24: the mean of the middle two; under the procedure the lower when either is a less-than or a
 * DNQ. */
static void ranked_median(const struct work *w, struct list l, struct figure *x)
{
    struct list r = ranked(w, l), taken = {NULL, 1};
    size_t middle = r.count / 2;

    if (r.count == 0)
        return;
    taken.at = r.at + middle;
    if (r.count % 2 == 0) {
        bool low = by_the_procedure(w) && (rank_class(&r.at[middle - 1].amount, true) < 2 ||
                                           rank_class(&r.at[middle].amount, true) < 2);
        taken.at = r.at + middle - 1;
        taken.count = low ? 1 : 2;
    }
    figure_read(w, l, taken, fraction_from_ratio(w->arena, 1, 2), x);
}

static void figure_median(const struct work *w, const struct series *s, struct figure *x)
{
    ranked_median(w, s->days, x);
}

/* G7, common practice, no source: nearest rank ceil(pn); linear between ranks 1 + p(n - 1); Weibull
 * p(n + 1), held inside the ranks there are. Ranks are kept in hundredths. */
static void figure_percentile(const struct work *w, const struct series *s, struct figure *x)
{
    struct list r = ranked(w, s->days), taken = {NULL, 1};
    long n = (long)r.count, p = w->limit->percentile, rank;

    if (n == 0)
        return;
    switch (w->rules->word[RULE_PERCENTILE]) {
    case PERCENTILE_LINEAR:
        rank = 100 + p * (n - 1);
        break;
    case PERCENTILE_WEIBULL:
        rank = p * (n + 1);
        break;
    default:
        rank = (p * n + 99) / 100 * 100;
        break;
    }
    rank = rank < 100 ? 100 : rank > 100 * n ? 100 * n : rank;
    taken.at = r.at + rank / 100 - 1;
    taken.count = rank % 100 == 0 ? 1 : 2;
    figure_read(w, s->days, taken, fraction_from_ratio(w->arena, rank % 100, 100), x);
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

/* ---- worst values ---- */

void figure_of_value(const struct work *w, const struct value *v, struct figure *out)
{
    struct list one = {(struct value[]){*v}, 1};
    struct signs signs = signs_of(one);

    *out = (struct figure){.on = v->day};
    out->exact = (struct exact){v->amount.number, v->amount.product, v->amount.root};
    set_signs(out, &signs);
    set_stand(w, &signs, signs.largest, out);
}

/* R7: the lowest for a minimum, else the highest. Ties (R32): the less-than with the larger number,
 * then the earlier day, which came first. */
static bool is_worse(const struct work *w, const struct figure *b, const struct figure *a)
{
    int c = fraction_compare(b->exact.number, a->exact.number);

    if (is_minimum(w->limit))
        c = -c;
    if (c != 0 || !b->all_less)
        return c > 0;
    return !a->all_less || (b->stand.number && a->stand.number &&
                            fraction_compare(b->stand.number, a->stand.number) > 0);
}

/* The worst so far, and the count of those beyond the limit. */
static void take_worst(const struct work *w, const struct figure *x, struct figure *worst)
{
    long times = worst->times + exact_beyond(w, &x->exact);

    if (!worst->exact.number || is_worse(w, x, worst))
        *worst = *x;
    worst->times = times;
}

static void figure_worst(const struct work *w, const struct series *s, struct figure *x)
{
    struct list l = s->by_reading ? s->readings : s->days;

    for (size_t i = 0; i < l.count; i++) {
        struct figure one;

        figure_of_value(w, &l.at[i], &one);
        take_worst(w, &one, x);
    }
    x->beyond = x->certain = x->times > 0;
}

/* Directive 91/271/EEC, annex I, table 3, from memory: the most samples for which as many may fail
 * as the place in this list. */
static const int table_3[] = {3,   7,   16,  28,  40,  53,  67,  81,  95,  110, 125, 140, 155,
                              171, 187, 203, 219, 235, 251, 268, 284, 300, 317, 334, 350, 365};

static bool more_than_allowed(const struct work *w, long times, long samples)
{
    const struct limit *l = w->limit;
    size_t fail = 0;

    switch (l->allowed_kind) {
    case ALLOWED_PERCENT: /* G3: compared exactly; 1 of 10 is not more than 10 % */
        return fraction_compare(fraction_from_int(w->arena, times * 100),
                                fraction_multiply(w->arena,
                                                  fraction_from_decimal(w->arena, l->allowed),
                                                  fraction_from_int(w->arena, samples))) > 0;
    case ALLOWED_EU_TABLE_3:
        while (fail + 1 < NELEM(table_3) && table_3[fail] < samples)
            fail++;
        return times > (long)fail;
    case ALLOWED_COUNT:
        return decimal_compare((struct decimal){times, 0}, l->allowed) > 0;
    default: /* R46 */
        return times > 0;
    }
}

/* G3: the worst value stands in the row; none may pass the ceiling, which is compared at its own
 * decimals (R46). */
static void figure_samples(const struct work *w, const struct series *s, struct figure *x)
{
    const struct limit *l = w->limit;
    struct list judged = s->by_reading ? s->readings : s->days;
    bool passed = false, too_many;

    figure_worst(w, s, x);
    for (size_t i = 0; i < judged.count && l->ceiling.set; i++) {
        struct figure one;
        int c;

        figure_of_value(w, &judged.at[i], &one);
        c = exact_against(w, &one.exact, l->ceiling.value);
        passed = passed || (is_minimum(l) ? c < 0 : c > 0);
    }
    too_many = more_than_allowed(w, x->times, (long)judged.count);
    x->beyond = l->bound != BOUND_REPORT && (too_many || passed);
    /* Later samples can still bring a percentage or the table down again (R38). */
    x->certain = x->beyond &&
                 (passed || l->allowed_kind == ALLOWED_NONE || l->allowed_kind == ALLOWED_COUNT);
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
