/* what_if: a month under other rules beside the month as it is: which verdicts hang on a
 * convention. */
#include "permit/work.h"

#include <assert.h>
#include <string.h>

#include "base/poison.h"

/* ---- which rules touch a limit ---- */

static bool is_geometric(const struct plant *plant, const struct limit *l)
{
    if (statistic_kind(l->statistic)->measure == MEASURE_GEOMEAN)
        return true;
    for (int i = 0; i < l->parameters; i++) /* R48: a day's geometric mean too */
        if (plant->parameters[l->parameter[i]].day_rule == DAY_GEOMETRIC)
            return true;
    return false;
}

static bool touches_load(const struct limit *l, enum rule rule)
{
    enum measure measure = statistic_kind(l->statistic)->measure;

    if (l->basis != BASIS_LOAD)
        return false;
    if (rule == RULE_LOAD_FACTOR) /* kilograms need no factor (R42) */
        return load_flow_unit(l) == unit_find("MGD");
    if (rule == RULE_LOAD_AVERAGE) /* totals under `product` are one too (R44) */
        return measure == MEASURE_MEAN || measure == MEASURE_TOTAL;
    return measure == MEASURE_TOTAL;
}

bool permit_rule_touches(const struct plant *plant, const struct limit *l, enum rule rule)
{
    const struct statistic_kind *k = statistic_kind(l->statistic);

    switch (rule) {
    case RULE_SIGN: /* R41 */
        return l->basis != BASIS_REMOVAL || l->rules.own[RULE_SIGN];
    case RULE_GEOMEAN_ZERO:
        return is_geometric(plant, l);
    case RULE_WEEK_STARTS:
    case RULE_WEEK_COUNTS_IN:
        return k->span == SPAN_WEEK;
    case RULE_COMPARE:
        return l->limit.set;
    case RULE_REMOVAL:
        return l->basis == BASIS_REMOVAL && k->measure == MEASURE_MEAN;
    case RULE_LOAD_FACTOR:
    case RULE_LOAD_AVERAGE:
    case RULE_LOAD_TOTAL:
        return touches_load(l, rule);
    case RULE_COUNT_BY: /* averages are over days whatever it says (R8) */
        return k->measure == MEASURE_SAMPLES;
    case RULE_NO_DISCHARGE: /* a concentration is absent either way (R23) */
        return l->basis == BASIS_FLOW || l->basis == BASIS_LOAD || l->basis == BASIS_REMOVAL;
    case RULE_LONG_AVERAGE: /* R45 */
        return l->statistic == STAT_ANNUAL_AVERAGE || l->statistic == STAT_ROLLING_12_MONTH;
    case RULE_PERCENTILE:
        return k->measure == MEASURE_PERCENTILE;
    case RULE_FLOW:
        return l->basis == BASIS_LOAD || l->basis == BASIS_REMOVAL;
    case RULE_INFLUENT:
        return l->basis == BASIS_REMOVAL;
    case RULE_WINDOW:
        return k->window > 0;
    default: /* nondetect, dnq, rounding, digits */
        return true;
    }
}

/* Its own figure, or that of its condition. */
static bool touches(const struct plant *plant, const struct limit *l, enum rule rule)
{
    struct limit asked;

    if (permit_rule_touches(plant, l, rule))
        return true;
    if (!l->when.set)
        return false;
    condition_limit(plant, l, &asked);
    return permit_rule_touches(plant, &asked, rule);
}

/* One of a group can let the others off (R47). */
static bool touches_group(const struct plant *plant, const struct limit *l, enum rule rule)
{
    if (touches(plant, l, rule))
        return true;
    for (size_t i = 0; *l->group != '\0' && i < plant->limit_count; i++)
        if (text_equal(plant->limits[i].group, l->group) && touches(plant, &plant->limits[i], rule))
            return true;
    return false;
}

/* ---- a plant under other rules ---- */

static bool is_point_rule(size_t rule)
{
    return rule_info((enum rule)rule)->kind == RULE_IS_POINT;
}

/* `own` stays as it was, so that a value that is in force already changes nothing; but an influent
 * that is asked for stands as one the row itself names (R41). */
static void put_over(struct rules *r, const struct rules *other)
{
    for (size_t i = 0; i < RULES; i++) {
        if (!other->own[i])
            continue;
        r->word[i] = other->word[i];
        r->number[i] = other->number[i];
        r->text[i] = other->text[i];
        r->own[i] = r->own[i] || is_point_rule(i);
    }
}

/* only: limits this rule cannot touch are left out; RULES: all stay. */
static const struct plant *plant_under(struct arena *a, const struct plant *plant,
                                       const struct rules *other, enum rule only)
{
    struct plant *p = arena_alloc(a, sizeof *p);
    size_t kept = 0;

    *p = *plant;
    p->parameters = arena_alloc(a, (p->parameter_count + 1) * sizeof *p->parameters);
    p->limits = arena_alloc(a, (p->limit_count + 1) * sizeof *p->limits);
    put_over(&p->rules, other);
    for (size_t i = 0; i < p->parameter_count; i++) {
        p->parameters[i] = plant->parameters[i];
        put_over(&p->parameters[i].rules, other);
    }
    for (size_t i = 0; i < plant->limit_count; i++) {
        if (only != RULES && !touches_group(plant, &plant->limits[i], only))
            continue;
        p->limits[kept] = plant->limits[i];
        put_over(&p->limits[kept++].rules, other);
    }
    p->limit_count = kept;
    return p;
}

/* ---- the values that are tried ---- */

/* 8.345404: the pounds in a million gallons of 3.785411784 L at 1 mg/L, with 0.45359237 kg to the
 * pound. 0.5, half a count, for a zero in a geometric mean: common practice, no source. */
static const char *const digits_tried[] = {"limit", "figures", NULL};
static const char *const factors_tried[] = {"8.34", "8.345404", NULL};
static const char *const zeros_tried[] = {"1", "0.5", NULL};

static const char *const *values_of(size_t rule)
{
    switch (rule) {
    case RULE_LOAD_FACTOR:
        return factors_tried;
    case RULE_GEOMEAN_ZERO:
        return zeros_tried;
    case RULE_DIGITS:
        return digits_tried;
    default:
        return rule_info((enum rule)rule)->words;
    }
}

static void only_rule(enum rule rule, const char *value, int word, struct rules *out)
{
    *out = (struct rules){0};
    out->own[rule] = true;
    out->word[rule] = rule_info(rule)->kind == RULE_IS_NUMBER ? 0 : word;
    out->text[rule] = value;
    if (rule_info(rule)->kind == RULE_IS_NUMBER) {
        enum decimal_problem is = decimal_parse(value, strlen(value), &out->number[rule]);

        assert(is == DECIMAL_FINE);
        (void)is;
    }
}

/* ---- needs ---- */

/* Rules that change which days a row reaches over. */
static bool moves_days(size_t rule)
{
    return rule == RULE_WEEK_STARTS || rule == RULE_WEEK_COUNTS_IN || rule == RULE_WINDOW;
}

void permit_needs_under(struct arena *a, const struct plant *plant, const struct rules *other,
                        day_t month, struct frame_span **needs, size_t *count)
{
    size_t room = 0;

    *needs = NULL;
    *count = 0;
    needs_add(a, plant, month, needs, count, &room);
    if (other) {
        needs_add(a, plant_under(a, plant, other, RULES), month, needs, count, &room);
        return;
    }
    for (size_t rule = 0; rule < RULES; rule++) {
        const char *const *values = values_of(rule);

        for (int i = 0; moves_days(rule) && values[i]; i++) {
            struct rules one;

            only_rule((enum rule)rule, values[i], i, &one);
            needs_add(a, plant_under(a, plant, &one, (enum rule)rule), month, needs, count, &room);
        }
    }
}

/* ---- rows side by side ---- */

struct rows {
    const struct permit_row *at;
    size_t count;
};

static struct rows rows_of(const struct permit_month *m, long line)
{
    struct rows r = {0};

    for (size_t i = 0; i < m->count; i++) {
        if (m->rows[i].limit->line != line)
            continue;
        if (r.count++ == 0)
            r.at = &m->rows[i];
    }
    return r;
}

static bool same_periods(struct rows a, struct rows b)
{
    if (a.count != b.count)
        return false;
    for (size_t i = 0; i < a.count; i++)
        if (a.at[i].from != b.at[i].from || a.at[i].to != b.at[i].to)
            return false;
    return true;
}

static int badness(enum verdict v)
{
    static const int rank[VERDICTS] = {
        [VERDICT_EXCEEDED] = 7,   [VERDICT_TARGET_PASSED] = 6, [VERDICT_MET] = 5,
        [VERDICT_TARGET_MET] = 4, [VERDICT_REPORT] = 3,        [VERDICT_OPEN] = 2,
        [VERDICT_NO_DATA] = 1,    [VERDICT_NO_DISCHARGE] = 0};

    return rank[v];
}

static bool is_worse(const struct permit_row *a, const struct permit_row *b)
{
    int order = badness(a->verdict) - badness(b->verdict);

    if (order == 0 && a->rounded && b->rounded) {
        order = fraction_compare(a->rounded, b->rounded);
        order = is_minimum(a->limit) ? -order : order;
    }
    return order > 0;
}

static const struct permit_row *worst_of(struct rows r)
{
    const struct permit_row *worst = r.count > 0 ? r.at : NULL;

    for (size_t i = 1; i < r.count; i++)
        if (is_worse(&r.at[i], worst))
            worst = &r.at[i];
    return worst;
}

/* ---- differences ---- */

struct comparing {
    struct arena *arena;
    const struct rules *other;
    struct permit_comparison *out;
};

/* The rules of `other`, as this limit has them and as they are tried. */
static void name_rules(const struct comparing *c, struct permit_difference *d)
{
    const struct rules *own = &d->limit->rules;

    d->rule = d->in_force = d->value = "";
    for (size_t i = 0; i < RULES; i++) {
        const char *between = d->rules == 0 ? "" : ";";

        if (!c->other->own[i])
            continue;
        if (d->rules++ == 0) {
            d->first = (enum rule)i;
            d->word_in_force = own->word[i];
            d->word = c->other->word[i];
        }
        d->rule = arena_print(c->arena, "%s%s%s", d->rule, between, rule_info((enum rule)i)->name);
        d->in_force = arena_print(c->arena, "%s%s%s", d->in_force, between, own->text[i]);
        d->value = arena_print(c->arena, "%s%s%s", d->value, between, c->other->text[i]);
    }
}

static void compare_rows(const struct comparing *c, const struct limit *l,
                         const struct permit_row *row, const struct permit_row *other)
{
    bool verdict = !row || !other || row->verdict != other->verdict;
    struct permit_difference *d;

    if (!verdict && text_equal(row->figure, other->figure)) {
        c->out->same++;
        return;
    }
    d = arena_push(c->arena, &c->out->at, &c->out->count, &c->out->room, sizeof *d);
    *d = (struct permit_difference){.row = row, .other = other, .limit = l, .verdict = verdict};
    name_rules(c, d);
}

static void compare_limit(const struct comparing *c, const struct limit *l,
                          const struct permit_month *other)
{
    struct rows a = rows_of(&c->out->base, l->line), b = rows_of(other, l->line);

    if (a.count == 0 && b.count == 0)
        return;
    if (!same_periods(a, b)) {
        c->out->other_periods = c->out->other_periods || (a.count > 0 && b.count > 0);
        compare_rows(c, l, worst_of(a), worst_of(b));
        return;
    }
    for (size_t i = 0; i < a.count; i++)
        compare_rows(c, l, &a.at[i], &b.at[i]);
}

/* The month under the other rules, held beside the base. `under` has the limits to look at. */
static enum status compare_month(const struct comparing *c, const struct frame *frame,
                                 const struct plant *under, struct fault *f)
{
    const struct plant *plant = frame_plant(frame);
    struct permit_month other;
    size_t next = 0;

    if (under->limit_count == 0)
        return OK;
    if (permit_month(c->arena, frame_under(c->arena, frame, under), c->out->base.month,
                     c->out->base.on, &other, f) != OK)
        return FAULT;
    for (size_t i = 0; i < plant->limit_count && next < under->limit_count; i++)
        if (plant->limits[i].line == under->limits[next].line) {
            compare_limit(c, &plant->limits[i], &other);
            next++;
        }
    return OK;
}

/* ---- in order, and counted ---- */

static bool is_exceeded(const struct permit_row *row)
{
    return row && row->verdict == VERDICT_EXCEEDED;
}

static int rank_of(const struct permit_difference *d)
{
    if (!d->verdict)
        return 3;
    if (is_exceeded(d->other))
        return 0;
    return is_exceeded(d->row) ? 1 : 2;
}

static bool comes_before(const struct permit_difference *a, const struct permit_difference *b)
{
    if (rank_of(a) != rank_of(b))
        return rank_of(a) < rank_of(b);
    if (a->limit != b->limit)
        return a->limit < b->limit; /* they stand in one array, as rows do */
    return a->row && b->row && a->row < b->row;
}

/* A stable merge: rules stay in their order. */
static void put_in_order(struct arena *a, struct permit_difference *at, size_t count)
{
    struct permit_difference *sorted = arena_alloc(a, (count + 1) * sizeof *sorted);
    size_t half = count / 2, i = 0, j = half;

    if (count < 2)
        return;
    put_in_order(a, at, half);
    put_in_order(a, at + half, count - half);
    for (size_t k = 0; k < count; k++)
        sorted[k] = j == count || (i < half && !comes_before(&at[j], &at[i])) ? at[i++] : at[j++];
    memcpy(at, sorted, count * sizeof *sorted);
}

static void count_limit(struct permit_comparison *c, const struct limit *l)
{
    bool verdict = false, any = false;
    bool rows = rows_of(&c->base, l->line).count > 0;

    for (size_t i = 0; i < c->count; i++) {
        any = any || c->at[i].limit == l;
        verdict = verdict || (c->at[i].limit == l && c->at[i].verdict);
    }
    c->limits += rows || any;
    c->hang += verdict;
    c->figures += any && !verdict;
}

static void finish(struct arena *a, const struct plant *plant, struct permit_comparison *c)
{
    put_in_order(a, c->at, c->count);
    for (size_t i = 0; i < c->count; i++)
        c->verdicts += c->at[i].verdict;
    for (size_t i = 0; i < plant->limit_count; i++)
        count_limit(c, &plant->limits[i]);
}

/* ---- the two questions ---- */

enum status permit_what_if(struct arena *a, const struct frame *frame, day_t month, day_t on,
                           const struct rules *other, struct permit_comparison *out,
                           struct fault *f)
{
    const struct plant *plant = frame_plant(frame);
    struct comparing c = {a, other, out};
    enum status rc = OK;

    *out = (struct permit_comparison){.tried = 1};
    TRY(permit_month(a, frame, month, on, &out->base, f));
    TRY(compare_month(&c, frame, plant_under(a, plant, other, RULES), f));
    finish(a, plant, out);
done:
    return rc;
}

enum status permit_rules(struct arena *a, const struct frame *frame, day_t month, day_t on,
                         struct permit_comparison *out, struct fault *f)
{
    const struct plant *plant = frame_plant(frame);
    enum status rc = OK;

    *out = (struct permit_comparison){0};
    TRY(permit_month(a, frame, month, on, &out->base, f));
    for (size_t rule = 0; rule < RULES; rule++) {
        const char *const *values = values_of(rule);

        for (int i = 0; values && values[i]; i++) {
            struct rules one;
            struct comparing c = {a, &one, out};

            only_rule((enum rule)rule, values[i], i, &one);
            TRY(compare_month(&c, frame, plant_under(a, plant, &one, (enum rule)rule), f));
            out->tried++;
        }
    }
    finish(a, plant, out);
done:
    return rc;
}
