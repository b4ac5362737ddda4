/* ranks: medians and percentiles, and the ranking that puts less-thans lowest. */
#include "permit/statistic.h"

#include <stdlib.h>

#include "base/poison.h"

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

/* Loads and removals have nothing to rank: a less-than counts as its number there (R28). */
static bool by_the_procedure(const struct work *w)
{
    return w->rules->word[RULE_NONDETECT] == NONDETECT_MEDIAN && w->limit->basis != BASIS_LOAD &&
           w->limit->basis != BASIS_REMOVAL;
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
void ranked_median(const struct work *w, struct list l, struct figure *x)
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

void figure_median(const struct work *w, const struct series *s, struct figure *x)
{
    ranked_median(w, s->days, x);
}

/* G7, common practice, no source: nearest rank ceil(pn); linear between ranks 1 + p(n - 1); Weibull
 * p(n + 1), held inside the ranks there are. Ranks are kept in hundredths. */
void figure_percentile(const struct work *w, const struct series *s, struct figure *x)
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
