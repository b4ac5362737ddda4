/* verdict: a figure's sign, digits and text, and what it means against the limit. A sign never
 * changes a verdict: the number is compared. */
#include "permit/work.h"

#include <assert.h>

#include "base/poison.h"

#define WRITTEN_MOST 18 /* decimals of a number that rounds to nothing */

const char *const verdict_words[VERDICTS] = {
    [VERDICT_MET] = "met",
    [VERDICT_EXCEEDED] = "exceeded",
    [VERDICT_REPORT] = "report",
    [VERDICT_TARGET_MET] = "target-met",
    [VERDICT_TARGET_PASSED] = "target-passed",
    [VERDICT_NO_DATA] = "no-data",
    [VERDICT_NO_DISCHARGE] = "no-discharge",
    [VERDICT_OPEN] = "open",
};

static enum rounding rounding_of(const struct work *w)
{
    return (enum rounding)w->rules->word[RULE_ROUNDING];
}

/* ---- against a bound ---- */

bool is_minimum(const struct limit *l)
{
    return l->bound == BOUND_MIN || l->bound == BOUND_ABOVE;
}

static const struct fraction *exact_round(const struct work *w, const struct exact *x, int decimals)
{
    if (x->product)
        return root_round(w->arena, x->product, x->root, decimals, rounding_of(w));
    return fraction_round(w->arena, x->number, decimals, rounding_of(w));
}

int exact_against(const struct work *w, const struct exact *x, struct decimal bound)
{
    const struct fraction *to = fraction_from_decimal(w->arena, bound);

    if (w->rules->word[RULE_COMPARE] == COMPARE_ROUNDED) /* R12 */
        return fraction_compare(exact_round(w, x, bound.scale), to);
    return x->product ? root_compare(w->arena, x->product, x->root, to)
                      : fraction_compare(x->number, to);
}

/* Equal meets max and min, but not the strict below and above; a target is read as max (R25). */
bool exact_beyond(const struct work *w, const struct exact *x)
{
    const struct limit *l = w->limit;
    int c;

    if (l->bound == BOUND_REPORT || !l->limit.set)
        return false;
    c = exact_against(w, x, l->limit.value);
    switch (l->bound) {
    case BOUND_MIN:
        return c < 0;
    case BOUND_BELOW:
        return c >= 0;
    case BOUND_ABOVE:
        return c <= 0;
    default:
        return c > 0;
    }
}

/* ---- text ---- */

/* New York DEC: as many significant figures as the limit has, also after a carry (R11); a figure of
 * 0 has the limit's decimals (R31). Rows without a limit: digits=N, else the parameter's (R10,
 * R43). */
int figure_decimals(const struct work *w, const struct exact *x)
{
    const struct limit *l = w->limit;

    if (w->rules->word[RULE_DIGITS] == DIGITS_NUMBER)
        return (int)w->rules->number[RULE_DIGITS].coefficient;
    if (!l->limit.set)
        return w->plant->parameters[l->parameter[0]].decimals;
    if (w->rules->word[RULE_DIGITS] == DIGITS_FIGURES && x->number && fraction_sign(x->number) != 0)
        return fraction_decimals_for(x->number, decimal_figures(l->limit.value), rounding_of(w));
    return l->limit.value.scale;
}

/* '<', '>' or 0. R15: ">" wins over "<", but not for a minimum limit (New York DEC). */
static char sign_of(const struct work *w, const struct figure *x)
{
    int rule = w->rules->word[RULE_SIGN];
    bool any = rule == SIGN_ANY || x->read; /* R27 */
    bool less = any ? x->part_less : x->all_less;
    bool greater = any ? x->part_greater : x->all_greater;

    if (rule == SIGN_NEVER)
        return 0;
    if (w->limit->basis == BASIS_REMOVAL && !w->rules->own[RULE_SIGN]) /* R41 */
        return 0;
    if (less && (!greater || is_minimum(w->limit)))
        return '<';
    return greater ? '>' : 0;
}

/* R31: the number of a less-than is rounded like the figure, and where that gives 0 printed as
 * written. */
static void add_stand(const struct work *w, const struct figure *x, int decimals, struct text *t)
{
    const struct fraction *rounded;

    if (w->rules->word[RULE_DIGITS] == DIGITS_FIGURES)
        decimals = figure_decimals(w, &x->stand);
    rounded = exact_round(w, &x->stand, decimals);
    if (fraction_sign(rounded) != 0 || fraction_sign(x->stand.number) == 0)
        fraction_write(t, rounded, decimals, rounding_of(w));
    else if (x->as_written)
        text_add(t, x->as_written);
    else
        fraction_write_all(t, x->stand.number, WRITTEN_MOST);
}

char *figure_text(const struct work *w, const struct figure *x, int decimals)
{
    char sign = sign_of(w, x);
    /* In a removal the sign has turned: what stands after ">" is its number. */
    bool stands = x->stand.number && (sign == '<' || (sign == '>' && x->all_greater));
    struct text t;
    char *out;

    if (!x->exact.number)
        return arena_text(w->arena, "");
    text_init(&t, SIZE_MAX);
    if (sign)
        text_add_char(&t, sign);
    if (stands)
        add_stand(w, x, decimals, &t);
    else
        fraction_write(&t, exact_round(w, &x->exact, decimals), decimals, rounding_of(w));
    out = arena_bytes(w->arena, t.at, t.length);
    text_free(&t);
    return out;
}

/* ---- verdict ---- */

/* R38: what is already certain, then open, no-discharge, no-data, then the rest. A row whose
 * condition has no figure can be no more than no-data (R37). */
static enum verdict verdict_of(const struct work *w, const struct figure *x, bool when_missing)
{
    enum bound bound = w->limit->bound;
    enum verdict beyond = bound == BOUND_TARGET ? VERDICT_TARGET_PASSED : VERDICT_EXCEEDED;

    if (x->certain && !when_missing)
        return beyond;
    if (w->to > w->end)
        return VERDICT_OPEN;
    if (work_without_discharge(w, w->from, w->end))
        return VERDICT_NO_DISCHARGE;
    if (!x->exact.number || when_missing)
        return VERDICT_NO_DATA;
    if (bound == BOUND_REPORT)
        return VERDICT_REPORT;
    if (x->beyond)
        return beyond;
    return bound == BOUND_TARGET ? VERDICT_TARGET_MET : VERDICT_MET;
}

static const struct fraction *as_compared(const struct work *w, const struct exact *x)
{
    if (!x->number)
        return NULL;
    if (w->rules->word[RULE_COMPARE] == COMPARE_RAW || !w->limit->limit.set)
        return x->number;
    return exact_round(w, x, w->limit->limit.value.scale);
}

void verdict_row(const struct work *w, const struct figure *x, bool when_missing,
                 struct permit_row *row)
{
    row->limit = w->limit;
    row->from = w->from;
    row->to = w->to;
    row->on = x->exact.number ? x->on : DAY_NONE;
    row->unit = w->limit->unit_text;
    row->exact = x->exact.product ? NULL : x->exact.number;
    row->root = x->exact.product;
    row->root_of = x->exact.root;
    row->rounded = as_compared(w, &x->exact);
    row->decimals = figure_decimals(w, &x->exact);
    row->figure = figure_text(w, x, row->decimals);
    row->verdict = verdict_of(w, x, when_missing);
    row->has_times = kind_counts_times(w->kind) && w->limit->bound != BOUND_REPORT; /* R33 */
    row->times = row->has_times ? x->times : 0;
    row->note = x->note ? x->note : "";
}
