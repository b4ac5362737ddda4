/* Formulas worked by a function of their own: lists in pairs, counting rules, a root. The words of
 * each rule stand in the catalogue; where an equation can say it, the equation is worked instead.
 */
#include "process/rules.h"

#include <assert.h>
#include <math.h>

#include "base/poison.h"

static const struct fraction *number(const struct scope *s, int64_t n)
{
    return fraction_from_int(s->arena, n);
}

static const struct fraction *hundred_times(const struct scope *s, const struct fraction *x)
{
    return fraction_multiply(s->arena, x, number(s, 100));
}

/* ---- removals ---- */

/* 100 (influent - effluent) / influent, meant over the pairs. Arguments: influents, effluents. */
static enum status removal_paired(const struct scope *s, const struct fraction **out)
{
    const struct formula_value *influent = &s->values[0];
    const struct formula_value *effluent = &s->values[1];
    if (equation_paired(s, 0, 1) != OK)
        return FAULT;
    const struct fraction *total = number(s, 0);
    for (size_t i = 0; i < influent->count; i++) {
        if (fraction_sign(influent->number[i]) == 0)
            return fault_at(s->fault, NULL, "leave the pair out",
                            "pair %zu of '%s' has an influent of zero", i + 1, s->formula->name);
        const struct fraction *taken =
            fraction_subtract(s->arena, influent->number[i], effluent->number[i]);
        total =
            fraction_add(s->arena, total, fraction_divide(s->arena, taken, influent->number[i]));
    }
    *out = hundred_times(s, fraction_divide(s->arena, total, number(s, (int64_t)influent->count)));
    return OK;
}

/* What passes each stage is a share of what passed the one before. Argument: removals. */
static enum status removal_overall(const struct scope *s, const struct fraction **out)
{
    const struct fraction *passed = number(s, 1);
    for (size_t i = 0; i < s->values[0].count; i++) {
        const struct fraction *removed =
            fraction_divide(s->arena, s->values[0].number[i], number(s, 100));
        passed =
            fraction_multiply(s->arena, passed, fraction_subtract(s->arena, number(s, 1), removed));
    }
    *out = hundred_times(s, fraction_subtract(s->arena, number(s, 1), passed));
    return OK;
}

/* ---- means ---- */

/* The root is taken exactly and rounded to at least 17 figures; a double only finds the place of
 * the first one. Arguments: values, zero_as. */
static enum status geometric_mean(const struct scope *s, const struct fraction **out)
{
    const struct formula_value *values = &s->values[0];
    const struct fraction *product = number(s, 1);
    double logs = 0.0;
    for (size_t i = 0; i < values->count; i++) {
        const struct fraction *x = values->number[i];
        if (fraction_sign(x) == 0)
            x = s->values[1].number[0];
        product = fraction_multiply(s->arena, product, x);
        logs += log10(fraction_double(x));
    }
    double place = floor(logs / (double)values->count);
    *out = root_round(s->arena, product, (unsigned)values->count, 17 - (int)place, ROUND_HALF_EVEN);
    return OK;
}

/* ---- oxygen uptake ---- */

/* Minus 60 times (n Sxy - Sx Sy) / (n Sxx - Sx^2), the least-squares slope per minute. Arguments:
 * times, readings. */
static enum status uptake_by_slope(const struct scope *s, const struct fraction **out)
{
    struct arena *a = s->arena;
    const struct formula_value *x = &s->values[0];
    const struct formula_value *y = &s->values[1];
    if (equation_paired(s, 0, 1) != OK)
        return FAULT;
    const struct fraction *sx = number(s, 0);
    const struct fraction *sy = sx;
    const struct fraction *sxx = sx;
    const struct fraction *sxy = sx;
    for (size_t i = 0; i < x->count; i++) {
        sx = fraction_add(a, sx, x->number[i]);
        sy = fraction_add(a, sy, y->number[i]);
        sxx = fraction_add(a, sxx, fraction_power(a, x->number[i], 2));
        sxy = fraction_add(a, sxy, fraction_multiply(a, x->number[i], y->number[i]));
    }
    const struct fraction *n = number(s, (int64_t)x->count);
    const struct fraction *spread =
        fraction_subtract(a, fraction_multiply(a, n, sxx), fraction_power(a, sx, 2));
    if (fraction_sign(spread) == 0)
        return fault_at(s->fault, NULL, "give readings at two times at least",
                        "the times of '%s' are all the same", s->formula->name);
    const struct fraction *fall =
        fraction_subtract(a, fraction_multiply(a, sx, sy), fraction_multiply(a, n, sxy));
    *out = fraction_multiply(a, fraction_divide(a, fall, spread), number(s, 60));
    return OK;
}

/* Farrell and Bhide: theta 1.05 above 20 C, 1.07 below; percent solids times 10 are g/L. Arguments:
 * our, total_solids, temperature. */
static enum status vector_attraction(const struct scope *s, const struct fraction **out)
{
    const struct fraction *twenty = number(s, 20);
    const struct fraction *away = fraction_subtract(s->arena, twenty, s->values[2].number[0]);
    double theta = fraction_sign(away) < 0 ? 1.05 : 1.07;
    const struct fraction *factor = NULL;
    if (equation_finite(s, pow(theta, fraction_double(away)), &factor) != OK)
        return FAULT;
    const struct fraction *solids =
        fraction_multiply(s->arena, s->values[1].number[0], number(s, 10));
    *out = fraction_multiply(s->arena, fraction_divide(s->arena, s->values[0].number[0], solids),
                             factor);
    return OK;
}

/* ---- BOD bottles ---- */

enum { INITIAL_DOS, FINAL_DOS, SAMPLE_VOLUMES, SEED_CORRECTION, BOTTLE_VOLUME };

/* Standard Methods 5210 B: depletion of 2.0 mg/L at least, before the seed is taken off, and 1.0
 * mg/L left at least; the bounds themselves pass. */
static enum status bottle(const struct scope *s, size_t i, const struct fraction **bod, bool *used)
{
    struct arena *a = s->arena;
    const struct fraction *left = s->values[FINAL_DOS].number[i];
    const struct fraction *volume = s->values[SAMPLE_VOLUMES].number[i];
    const struct fraction *full = s->values[BOTTLE_VOLUME].number[0];
    const struct fraction *depletion = fraction_subtract(a, s->values[INITIAL_DOS].number[i], left);
    *used =
        fraction_compare(depletion, number(s, 2)) >= 0 && fraction_compare(left, number(s, 1)) >= 0;
    if (!*used)
        return OK;
    if (fraction_compare(volume, full) > 0)
        return fault_at(s->fault, NULL, "check the volumes",
                        "bottle %zu of '%s' holds more sample than the bottle", i + 1,
                        s->formula->name);
    const struct fraction *rest =
        fraction_subtract(a, depletion, s->values[SEED_CORRECTION].number[0]);
    if (fraction_sign(rest) < 0)
        return fault_at(s->fault, NULL, "check the seed correction",
                        "the seed of '%s' takes up more than bottle %zu does", s->formula->name,
                        i + 1);
    *bod = fraction_divide(a, fraction_multiply(a, rest, full), volume);
    return OK;
}

static enum status bod_from_dilutions(const struct scope *s, const struct fraction **out)
{
    enum status rc = OK;
    const struct fraction *total = number(s, 0);
    int64_t count = 0;
    TRY(equation_paired(s, INITIAL_DOS, FINAL_DOS));
    TRY(equation_paired(s, INITIAL_DOS, SAMPLE_VOLUMES));
    for (size_t i = 0; i < s->values[INITIAL_DOS].count; i++) {
        const struct fraction *bod = NULL;
        bool used = false;
        TRY(bottle(s, i, &bod, &used));
        if (!used)
            continue;
        total = fraction_add(s->arena, total, bod);
        count++;
    }
    if (count == 0)
        return fault_at(s->fault, NULL, "there is no result to report",
                        "no bottle of '%s' has a depletion of 2.0 mg/L and 1.0 mg/L left",
                        s->formula->name);
    *out = fraction_divide(s->arena, total, number(s, count));
done:
    return rc;
}

/* ---- counts of bacteria ---- */

enum { COLONIES, FILTER_VOLUMES, LOW, HIGH };

/* Standard Methods 9222 D: a filter with more than this is not read. */
enum { COLONIES_MOST = 200 };

struct filters {
    const struct fraction *colonies, *volume; /* summed */
    size_t count;
};

static void filters_add(const struct scope *s, struct filters *f, size_t i)
{
    f->colonies = fraction_add(s->arena, f->colonies, s->values[COLONIES].number[i]);
    f->volume = fraction_add(s->arena, f->volume, s->values[FILTER_VOLUMES].number[i]);
    f->count++;
}

static struct filters filters_none(const struct scope *s)
{
    return (struct filters){.colonies = number(s, 0), .volume = number(s, 0)};
}

/* Standard Methods 9222 D, USGS National Field Manual 7.1.4: the filters in range together; all
 * above it: the smallest volume; else every filter that can be read. */
static enum status membrane_filters(const struct scope *s, const struct fraction **out)
{
    const struct formula_value *colonies = &s->values[COLONIES];
    const struct formula_value *volumes = &s->values[FILTER_VOLUMES];
    struct filters in_range = filters_none(s);
    struct filters readable = filters_none(s);
    size_t above = 0;
    size_t smallest = SIZE_MAX;
    if (equation_paired(s, COLONIES, FILTER_VOLUMES) != OK)
        return FAULT;
    for (size_t i = 0; i < colonies->count; i++) {
        const struct fraction *c = colonies->number[i];
        if (fraction_compare(c, number(s, COLONIES_MOST)) > 0)
            continue;
        filters_add(s, &readable, i);
        if (smallest == SIZE_MAX ||
            fraction_compare(volumes->number[i], volumes->number[smallest]) < 0)
            smallest = i;
        if (fraction_compare(c, s->values[HIGH].number[0]) > 0)
            above++;
        else if (fraction_compare(c, s->values[LOW].number[0]) >= 0)
            filters_add(s, &in_range, i);
    }
    if (readable.count == 0)
        return fault_at(s->fault, NULL, "report the count as greater than, or TNTC",
                        "every filter of '%s' has more than %d colonies", s->formula->name,
                        COLONIES_MOST);
    if (fraction_sign(readable.colonies) == 0)
        return fault_at(s->fault, NULL, "report less than 100 / the largest volume",
                        "no filter of '%s' has a colony", s->formula->name);
    struct filters chosen = in_range.count > 0 ? in_range : readable;
    if (in_range.count == 0 && above == readable.count) {
        chosen = filters_none(s);
        filters_add(s, &chosen, smallest);
    }
    *out = fraction_divide(s->arena, hundred_times(s, chosen.colonies), chosen.volume);
    return OK;
}

enum { TUBE_VOLUMES, TUBES, POSITIVES };

static bool is_whole(const struct scope *s, const struct fraction *x)
{
    return fraction_compare(x, fraction_round(s->arena, x, 0, ROUND_HALF_EVEN)) == 0;
}

static enum status tubes_make_sense(const struct scope *s)
{
    enum status rc = OK;
    bool any_positive = false;
    bool any_negative = false;
    TRY(equation_paired(s, TUBE_VOLUMES, TUBES));
    TRY(equation_paired(s, TUBE_VOLUMES, POSITIVES));
    for (size_t i = 0; i < s->values[TUBES].count; i++) {
        const struct fraction *tubes = s->values[TUBES].number[i];
        const struct fraction *positives = s->values[POSITIVES].number[i];
        if (fraction_compare(positives, tubes) > 0)
            return fault_at(s->fault, NULL, "check the counts",
                            "row %zu of '%s' has more positive tubes than tubes", i + 1,
                            s->formula->name);
        if (!is_whole(s, tubes) || !is_whole(s, positives))
            return fault_at(s->fault, NULL, "count whole tubes",
                            "row %zu of '%s' has a part of a tube", i + 1, s->formula->name);
        any_positive = any_positive || fraction_sign(positives) > 0;
        any_negative = any_negative || fraction_compare(positives, tubes) < 0;
    }
    if (!any_positive)
        return fault_at(s->fault, NULL, "report it as less than", "no tube of '%s' is positive",
                        s->formula->name);
    if (!any_negative)
        return fault_at(s->fault, NULL, "report it as greater than",
                        "every tube of '%s' is positive", s->formula->name);
done:
    return rc;
}

/* Sum of p v / (1 - exp(-v x)) less the sum of n v. It falls from endless to below zero as x, in
 * organisms per mL, grows, so it has one root. */
static double likelihood_slope(const struct scope *s, double x)
{
    double sum = 0.0;
    for (size_t i = 0; i < s->values[TUBES].count; i++) {
        double v = fraction_double(s->values[TUBE_VOLUMES].number[i]);
        double n = fraction_double(s->values[TUBES].number[i]);
        double p = fraction_double(s->values[POSITIVES].number[i]);
        if (p > 0.0)
            sum += p * v / -expm1(-v * x);
        sum -= n * v;
    }
    return sum;
}

static enum status most_probable_number(const struct scope *s, const struct fraction **out)
{
    double low = 1.0;
    double high = 1.0;
    const struct fraction *per_ml = NULL;
    if (tubes_make_sense(s) != OK)
        return FAULT;
    while (likelihood_slope(s, low) < 0.0 && low > 1e-300)
        low /= 2.0;
    while (likelihood_slope(s, high) > 0.0 && high < 1e300)
        high *= 2.0;
    for (int halvings = 0; halvings < 200; halvings++) {
        double middle = low + (high - low) / 2.0;
        if (likelihood_slope(s, middle) > 0.0)
            low = middle;
        else
            high = middle;
    }
    if (equation_finite(s, low + (high - low) / 2.0, &per_ml) != OK)
        return FAULT;
    *out = hundred_times(s, per_ml);
    return OK;
}

/* ---- the table ---- */

static const struct formula_rule rules[] = {
    {.formula = "percent-removal-paired", .work = removal_paired},
    {.formula = "overall-percent-removal", .work = removal_overall},
    {.formula = "geometric-mean", .work = geometric_mean},
    {.formula = "oxygen-uptake-rate-by-slope", .work = uptake_by_slope},
    {.formula = "vector-attraction-uptake", .work = vector_attraction},
    {.formula = "bod-from-dilutions", .work = bod_from_dilutions},
    {.formula = "membrane-filter-combined", .work = membrane_filters},
    {.formula = "most-probable-number", .work = most_probable_number, .figures = 2},
    {.formula = "most-probable-number-thomas", .check = tubes_make_sense, .figures = 2},
};

const struct formula_rule *formula_rule(const struct formula *formula)
{
    for (size_t i = 0; i < NELEM(rules); i++)
        if (text_equal(rules[i].formula, formula->name))
            return &rules[i];
    return NULL;
}
