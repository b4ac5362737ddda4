/* day: what a day's readings become: one value, by the parameter's day rule. 40 CFR 122.2: a daily
 * discharge is the day's average; which other rule a permit names stands in parameters.csv. */
#include "frame/store.h"

#include <assert.h>

#include "base/poison.h"

/* A day's geometric mean that enters a sum is taken to this many decimals (R48). */
#define ROOT_DECIMALS 40

struct entry {
    const struct reading *reading;
    struct amount amount;
};

/* ---- signs ---- */

/* R30: partly less-than when one part is, wholly when all are; R13's number is the largest. */
static void gather_signs(const struct entry *e, size_t count, struct amount *out)
{
    bool all_low = true, any_dnq = false;

    out->all_less = out->all_greater = true;
    for (size_t i = 0; i < count; i++) {
        const struct amount *a = &e[i].amount;

        out->part_less = out->part_less || a->part_less;
        out->all_less = out->all_less && a->all_less;
        out->part_greater = out->part_greater || a->part_greater;
        out->all_greater = out->all_greater && a->all_greater;
        any_dnq = any_dnq || a->dnq;
        all_low = all_low && (a->dnq || a->all_less);
        if (a->less && (!out->less || fraction_compare(a->less, out->less) > 0)) {
            out->less = a->less;
            out->as_written = a->as_written;
        }
    }
    out->dnq = all_low && any_dnq;
}

/* ---- the rules ---- */

typedef bool day_rule_function(const struct frame *f, struct entry *e, size_t count,
                               const struct rules *rules, struct amount *out);

static bool mean(const struct frame *f, struct entry *e, size_t count, const struct rules *rules,
                 struct amount *out)
{
    const struct fraction *total = e[0].amount.number;

    (void)rules;
    for (size_t i = 1; i < count; i++)
        total = fraction_add(f->arena, total, e[i].amount.number);
    gather_signs(e, count, out);
    out->number = fraction_divide(f->arena, total, fraction_from_int(f->arena, (int64_t)count));
    return true;
}

/* Under `sum` R13's number is the sum of the numbers (R30). */
static bool sum(const struct frame *f, struct entry *e, size_t count, const struct rules *rules,
                struct amount *out)
{
    const struct fraction *number = fraction_from_int(f->arena, 0), *less = number;

    (void)rules;
    gather_signs(e, count, out);
    for (size_t i = 0; i < count; i++) {
        number = fraction_add(f->arena, number, e[i].amount.number);
        if (e[i].amount.less)
            less = fraction_add(f->arena, less, e[i].amount.less);
    }
    out->number = number;
    if (out->part_less) {
        out->less = less;
        out->as_written = NULL;
    }
    return true;
}

/* The flow at the same time: the first flow reading there, in any unit of flow (R52). */
static const struct fraction *flow_beside(const struct frame *f, const struct reading *r, int point,
                                          int parameter)
{
    const struct column *c = frame_column(f, point, parameter);
    const struct rules *rules = &f->plant->parameters[parameter].rules;
    const struct reading *const *flow;
    struct amount amount;
    size_t count;

    if (!c || c->meter)
        return NULL;
    flow = column_day(c, r->day, &count);
    for (size_t i = 0; i < count; i++)
        if (flow[i]->minute == r->minute && frame_amount(f, flow[i], rules, NULL, &amount))
            return amount.number;
    return NULL;
}

/* R52: the plain mean where a reading has no flow of its time, or all flows are 0. */
static bool flow_weighted(const struct frame *f, struct entry *e, size_t count,
                          const struct rules *rules, struct amount *out)
{
    const struct fraction *total = fraction_from_int(f->arena, 0), *weights = total, *flow;
    int point, parameter;

    if (!frame_flow_of(f, e[0].reading->point, rules, &point, &parameter))
        return mean(f, e, count, rules, out);
    for (size_t i = 0; i < count; i++) {
        flow = flow_beside(f, e[i].reading, point, parameter);
        if (!flow)
            return mean(f, e, count, rules, out);
        weights = fraction_add(f->arena, weights, flow);
        total =
            fraction_add(f->arena, total, fraction_multiply(f->arena, flow, e[i].amount.number));
    }
    if (fraction_sign(weights) == 0)
        return mean(f, e, count, rules, out);
    gather_signs(e, count, out);
    out->number = fraction_divide(f->arena, total, weights);
    return true;
}

/* Whether b is taken rather than a when numbers tie: the less-than with the larger number (R32). */
static bool wins_tie(const struct amount *b, const struct amount *a)
{
    if (!b->all_less)
        return false;
    return !a->all_less || fraction_compare(b->less, a->less) > 0;
}

static bool extreme(struct entry *e, size_t count, int direction, struct amount *out)
{
    size_t taken = 0;

    for (size_t i = 1; i < count; i++) {
        int c = direction * fraction_compare(e[i].amount.number, e[taken].amount.number);

        if (c > 0 || (c == 0 && wins_tie(&e[i].amount, &e[taken].amount)))
            taken = i;
    }
    *out = e[taken].amount;
    return true;
}

static bool highest(const struct frame *f, struct entry *e, size_t count, const struct rules *rules,
                    struct amount *out)
{
    (void)f;
    (void)rules;
    return extreme(e, count, 1, out);
}

static bool lowest(const struct frame *f, struct entry *e, size_t count, const struct rules *rules,
                   struct amount *out)
{
    (void)f;
    (void)rules;
    return extreme(e, count, -1, out);
}

/* Readings stand in order of time, those without one first, then of loading (R52). */
static bool last(const struct frame *f, struct entry *e, size_t count, const struct rules *rules,
                 struct amount *out)
{
    (void)f;
    (void)rules;
    *out = e[count - 1].amount;
    return true;
}

/* Texas: a zero enters a geometric mean as geomean_zero (R16, R48). */
static bool geometric(const struct frame *f, struct entry *e, size_t count,
                      const struct rules *rules, struct amount *out)
{
    struct arena *a = f->arena;
    const struct fraction *zero = fraction_from_decimal(a, rules->number[RULE_GEOMEAN_ZERO]);
    const struct fraction *product = fraction_from_int(a, 1);
    unsigned n = (unsigned)count;

    for (size_t i = 0; i < count; i++) {
        const struct fraction *x = e[i].amount.number;

        if (fraction_sign(x) < 0)
            return false;
        product = fraction_multiply(a, product, fraction_sign(x) == 0 ? zero : x);
    }
    gather_signs(e, count, out);
    out->number = root_round(a, product, n, ROOT_DECIMALS, ROUND_HALF_EVEN);
    if (fraction_compare(fraction_power(a, out->number, n), product) != 0) {
        out->product = product;
        out->root = n;
    }
    return true;
}

static day_rule_function *const day_rules[DAY_RULES] = {
    [DAY_MEAN] = mean,
    [DAY_FLOW_WEIGHTED] = flow_weighted,
    [DAY_MAX] = highest,
    [DAY_MIN] = lowest,
    [DAY_SUM] = sum,
    [DAY_LAST] = last,
    [DAY_GEOMETRIC] = geometric,
};

/* ---- a day ---- */

/* Whether the number as written is the number that counts, in `unit`. */
static bool counts_as_written(const struct reading *r, const struct rules *rules,
                              const struct unit *unit)
{
    return r->qualifier == QUALIFIER_PLAIN && unit_at(r->unit) == unit &&
           (!r->has_rl || rules->word[RULE_DNQ] == DNQ_VALUE);
}

/* The mean of many readings in whole numbers, without a fraction for each. False: take the long
 * way. */
static bool quick_mean(const struct frame *f, const struct column *c,
                       const struct reading *const *r, size_t count, const struct rules *rules,
                       const struct unit *unit, struct day_value *out)
{
    const struct parameter *p = &f->plant->parameters[c->parameter];
    int64_t sum = 0, divisor = (int64_t)count, scaled;
    int scale = 0;

    if (p->day_rule != DAY_MEAN || count < 2)
        return false;
    for (size_t i = 0; i < count; i++) {
        if (!counts_as_written(r[i], rules, unit ? unit : p->unit))
            return false;
        scale = r[i]->value.scale > scale ? r[i]->value.scale : scale;
    }
    for (size_t i = 0; i < count; i++) {
        scaled = r[i]->value.coefficient;
        for (int k = r[i]->value.scale; k < scale; k++)
            if (__builtin_mul_overflow(scaled, 10, &scaled))
                return false;
        if (__builtin_add_overflow(sum, scaled, &sum))
            return false;
    }
    for (int k = 0; k < scale; k++)
        if (__builtin_mul_overflow(divisor, 10, &divisor))
            return false;
    out->state = DAY_VALUED;
    out->readings = count;
    out->amount.number = fraction_from_ratio(f->arena, sum, divisor);
    return true;
}

static const char *no_reading(const struct frame *f, int point, int parameter)
{
    const char **why = &f->empty[frame_cell(f, point, parameter)];

    if (!*why)
        *why = arena_print(f->arena, "no reading of %s %s", f->plant->points[point].id,
                           f->plant->parameters[parameter].id);
    return *why;
}

/* A day of codes alone: missed when one of them means it. A no-discharge code on a day that did
 * discharge is a missed sample (R39). */
static void codes_alone(const struct frame *f, const struct column *c,
                        const struct reading *const *r, size_t count, struct day_value *out)
{
    const struct no_data_code *said = NULL;

    for (size_t i = 0; i < count; i++) {
        const struct no_data_code *code = no_data_code(r[i]->code);

        if (code && (!said || code->effect != CODE_NOT_REQUIRED))
            said = code;
    }
    out->state = said && said->effect == CODE_NOT_REQUIRED ? DAY_NOT_REQUIRED : DAY_MISSED;
    out->why = said ? arena_print(f->arena, "%s %s: code %c, %s", f->plant->points[c->point].id,
                                  f->plant->parameters[c->parameter].id, said->code, said->meaning)
                    : no_reading(f, c->point, c->parameter);
}

/* The description has given the parameter another kind of unit since the reading was loaded. */
static bool unit_lost(const struct frame *f, const struct column *c, const struct reading *r,
                      const struct unit *unit, struct day_value *out)
{
    const struct parameter *p = &f->plant->parameters[c->parameter];

    out->state = DAY_BROKEN;
    out->why = arena_print(f->arena, "%s %s was loaded in %s, which cannot be turned into %s",
                           f->plant->points[c->point].id, p->id, unit_at(r->unit)->name,
                           unit ? unit->name : p->unit->name);
    return false;
}

static bool register_day(const struct frame *f, const struct column *c, const struct meter_day *d,
                         const struct unit *unit, struct day_value *out)
{
    const struct unit *own = f->plant->parameters[c->parameter].unit;

    if (!d->volume) {
        out->state = DAY_BROKEN;
        out->why = d->why;
        return false;
    }
    out->state = DAY_VALUED;
    out->readings = d->readings;
    out->amount.number = frame_in_unit(f->arena, d->volume, own, unit ? unit : own);
    return true;
}

bool day_work(const struct frame *f, const struct column *c, day_t day, const struct rules *rules,
              const struct unit *unit, struct day_value *out)
{
    size_t count, valued = 0;
    const struct reading *const *r = column_day(c, day, &count);
    struct entry few[8], *e = few;

    *out = (struct day_value){.state = DAY_EMPTY};
    if (count == 0)
        return false;
    if (c->meter && (c->meter[day - c->first].volume || c->meter[day - c->first].why))
        return register_day(f, c, &c->meter[day - c->first], unit, out);
    if (quick_mean(f, c, r, count, rules, unit, out))
        return true;
    if (count > NELEM(few))
        e = arena_alloc(f->arena, count * sizeof *e);
    for (size_t i = 0; i < count; i++) {
        e[valued].reading = r[i];
        if (frame_amount(f, r[i], rules, unit, &e[valued].amount))
            valued++;
        else if (r[i]->qualifier != QUALIFIER_CODE)
            return unit_lost(f, c, r[i], unit, out);
    }
    out->readings = valued;
    if (valued == 0) {
        codes_alone(f, c, r, count, out);
        return false;
    }
    out->state = DAY_VALUED;
    if (valued == 1) { /* a single reading is the day's value as it is (R48) */
        out->amount = e[0].amount;
        return true;
    }
    if (day_rules[f->plant->parameters[c->parameter].day_rule](f, e, valued, rules, &out->amount))
        return true;
    *out = (struct day_value){.state = DAY_BROKEN,
                              .why = "a geometric mean has no number below 0 in it"};
    return false;
}

void frame_day(const struct frame *f, int point, int parameter, day_t day,
               const struct rules *rules, const struct unit *unit, struct day_value *out)
{
    const struct column *c = frame_column(f, point, parameter);
    const struct unit *own = f->plant->parameters[parameter].unit;

    if (frame_no_discharge(f, point, day)) {
        /* R23: under `zero` the flow is 0 that day and a concentration is absent. */
        *out = (struct day_value){.state = DAY_NO_DISCHARGE, .why = "no discharge"};
        if (rules->word[RULE_NO_DISCHARGE] == NO_DISCHARGE_ZERO && own &&
            text_equal(own->kind, "flow"))
            out->amount.number = fraction_from_int(f->arena, 0);
        return;
    }
    if (!c || day < f->first || day > f->last) {
        *out = (struct day_value){.state = DAY_EMPTY, .why = no_reading(f, point, parameter)};
        return;
    }
    if (!day_work(f, c, day, rules, unit, out) && !out->why)
        out->why = no_reading(f, point, parameter);
}
