/* worst: the worst value of a row, and how many are beyond the limit: daily and instantaneous
 * maxima, and the samples of which so many may fail. */
#include "permit/statistic.h"

#include "base/poison.h"

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
void take_worst(const struct work *w, const struct figure *x, struct figure *worst)
{
    long times = worst->times + exact_beyond(w, &x->exact);

    if (!worst->exact.number || is_worse(w, x, worst))
        *worst = *x;
    worst->times = times;
}

void figure_worst(const struct work *w, const struct series *s, struct figure *x)
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
void figure_samples(const struct work *w, const struct series *s, struct figure *x)
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
