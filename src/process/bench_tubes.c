/* Bench sheets of multiple tubes: the published table where it holds the reading, the published
 * approximation beyond it. */
#include <stdlib.h>

#include "process/bench.h"
#include "process/bench_tubes.h"
#include "process/ready.h"

#include "base/poison.h"

/* Standard Methods 9221 C, five tubes of 10, 1.0 and 0.1 mL, from memory; every entry is tested
 * against the likelihood equation. */
const struct mpn_entry mpn_table[] = {
    {{0, 0, 1}, "1.8"}, {{0, 1, 0}, "1.8"}, {{0, 1, 1}, "3.6"}, {{0, 2, 0}, "3.7"},
    {{0, 2, 1}, "5.5"}, {{0, 3, 0}, "5.6"}, {{1, 0, 0}, "2.0"}, {{1, 0, 1}, "4.0"},
    {{1, 0, 2}, "6.0"}, {{1, 1, 0}, "4.0"}, {{1, 1, 1}, "6.1"}, {{1, 1, 2}, "8.1"},
    {{1, 2, 0}, "6.1"}, {{1, 2, 1}, "8.2"}, {{1, 3, 0}, "8.3"}, {{1, 3, 1}, "10"},
    {{2, 0, 0}, "4.5"}, {{2, 0, 1}, "6.8"}, {{2, 0, 2}, "9.1"}, {{2, 1, 0}, "6.8"},
    {{2, 1, 1}, "9.2"}, {{2, 1, 2}, "12"},  {{2, 2, 0}, "9.3"}, {{2, 2, 1}, "12"},
    {{2, 2, 2}, "14"},  {{2, 3, 0}, "12"},  {{2, 3, 1}, "14"},  {{2, 4, 0}, "15"},
    {{3, 0, 0}, "7.8"}, {{3, 0, 1}, "11"},  {{3, 0, 2}, "13"},  {{3, 1, 0}, "11"},
    {{3, 1, 1}, "14"},  {{3, 1, 2}, "17"},  {{3, 2, 0}, "14"},  {{3, 2, 1}, "17"},
    {{3, 2, 2}, "20"},  {{3, 3, 0}, "17"},  {{3, 3, 1}, "21"},  {{3, 3, 2}, "24"},
    {{3, 4, 0}, "21"},  {{3, 4, 1}, "24"},  {{3, 5, 0}, "25"},  {{4, 0, 0}, "13"},
    {{4, 0, 1}, "17"},  {{4, 0, 2}, "21"},  {{4, 0, 3}, "25"},  {{4, 1, 0}, "17"},
    {{4, 1, 1}, "21"},  {{4, 1, 2}, "26"},  {{4, 1, 3}, "31"},  {{4, 2, 0}, "22"},
    {{4, 2, 1}, "26"},  {{4, 2, 2}, "32"},  {{4, 2, 3}, "38"},  {{4, 3, 0}, "27"},
    {{4, 3, 1}, "33"},  {{4, 3, 2}, "39"},  {{4, 4, 0}, "34"},  {{4, 4, 1}, "40"},
    {{4, 4, 2}, "47"},  {{4, 5, 0}, "41"},  {{4, 5, 1}, "48"},  {{5, 0, 0}, "23"},
    {{5, 0, 1}, "31"},  {{5, 0, 2}, "43"},  {{5, 0, 3}, "58"},  {{5, 1, 0}, "33"},
    {{5, 1, 1}, "46"},  {{5, 1, 2}, "63"},  {{5, 1, 3}, "84"},  {{5, 2, 0}, "49"},
    {{5, 2, 1}, "70"},  {{5, 2, 2}, "94"},  {{5, 2, 3}, "120"}, {{5, 2, 4}, "150"},
    {{5, 3, 0}, "79"},  {{5, 3, 1}, "110"}, {{5, 3, 2}, "140"}, {{5, 3, 3}, "170"},
    {{5, 3, 4}, "210"}, {{5, 4, 0}, "130"}, {{5, 4, 1}, "170"}, {{5, 4, 2}, "220"},
    {{5, 4, 3}, "280"}, {{5, 4, 4}, "350"}, {{5, 4, 5}, "430"}, {{5, 5, 0}, "240"},
    {{5, 5, 1}, "350"}, {{5, 5, 2}, "540"}, {{5, 5, 3}, "920"}, {{5, 5, 4}, "1600"},
};
const size_t mpn_entries = NELEM(mpn_table);

/* What the table prints where every tube is negative, and where every one is positive. */
static const char none_positive[] = "1.8";
static const char all_positive[] = "1600";

static const char table_words[] = "MPN index of the table (SM 9221 C)";

/* ---- a reading of tubes ---- */

struct dilution {
    const struct fraction *volume, *tubes, *positives;
};

struct tubes {
    struct dilution *at; /* the largest volume first */
    size_t count;
    bool any_positive, any_negative;
};

static int larger_volume_first(const void *one, const void *other)
{
    const struct dilution *p = one;
    const struct dilution *q = other;
    int c = fraction_compare(q->volume, p->volume);
    return c ? c : fraction_compare(q->positives, p->positives);
}

static enum status gather(struct bench_group *g, struct tubes *t)
{
    t->at = arena_alloc(g->arena, bench_sets(g, BENCH_SAMPLE) * sizeof *t->at);
    for (const struct bench_set *s = bench_next(g, BENCH_SAMPLE, NULL); s != NULL;
         s = bench_next(g, BENCH_SAMPLE, s)) {
        struct dilution d = {bench_number(g, s, "volume"), bench_number(g, s, "tubes"),
                             bench_number(g, s, "positives")};
        if (fraction_compare(d.positives, d.tubes) > 0)
            return bench_refuse(g, REASON_NO_RESULT, "%s has more positive tubes than tubes",
                                bench_set_words(g, s));
        t->any_positive = t->any_positive || fraction_sign(d.positives) > 0;
        t->any_negative = t->any_negative || fraction_compare(d.positives, d.tubes) < 0;
        bench_say(g, "%s: %s of %s tubes of %s mL positive", bench_set_words(g, s),
                  formula_number(g->arena, d.positives), formula_number(g->arena, d.tubes),
                  formula_number(g->arena, d.volume));
        t->at[t->count++] = d;
    }
    qsort(t->at, t->count, sizeof *t->at, larger_volume_first);
    return OK;
}

static bool is_series(struct arena *a, const struct tubes *t)
{
    const struct fraction *five = fraction_from_int(a, 5);
    const struct fraction *ten = fraction_from_int(a, 10);
    if (t->count != 3)
        return false;
    for (size_t i = 0; i < 3; i++) {
        if (fraction_compare(t->at[i].tubes, five) != 0)
            return false;
        if (i > 0 &&
            fraction_compare(fraction_multiply(a, t->at[i].volume, ten), t->at[i - 1].volume) != 0)
            return false;
    }
    return true;
}

/* The table is for 10, 1.0 and 0.1 mL: other series scale by their largest volume. */
static const struct fraction *scaled(struct arena *a, const char *index, const struct tubes *t)
{
    const struct fraction *x =
        fraction_multiply(a, bench_constant(a, index), fraction_from_int(a, 10));
    return fraction_divide(a, x, t->at[0].volume);
}

static const char *index_of(struct arena *a, const struct tubes *t)
{
    for (size_t i = 0; i < mpn_entries; i++) {
        bool same = true;
        for (size_t k = 0; k < 3; k++)
            same = same && fraction_compare(fraction_from_int(a, mpn_table[i].positive[k]),
                                            t->at[k].positives) == 0;
        if (same)
            return mpn_table[i].index;
    }
    return NULL;
}

static enum status work_lists(struct bench_group *g, const char *formula, const struct tubes *t,
                              const struct fraction **out)
{
    const struct fraction **list[3];
    for (size_t k = 0; k < 3; k++)
        list[k] = bench_numbers(g->arena, t->count);
    for (size_t i = 0; i < t->count; i++) {
        list[0][i] = t->at[i].volume;
        list[1][i] = t->at[i].tubes;
        list[2][i] = t->at[i].positives;
    }
    const struct formula_value values[FORMULA_ARGUMENTS_MOST] = {
        {list[0], t->count}, {list[1], t->count}, {list[2], t->count}};
    return bench_formula_lists(g, formula, values, out);
}

/* ---- what is given ---- */

static enum status give(struct bench_group *g, const struct fraction *x, enum qualifier qualifier)
{
    bench_say(g, "mpn = %s /100mL", formula_number(g->arena, x));
    return bench_give(g, g->entry->parameter, x, "/100mL", qualifier, BENCH_TWO_FIGURES);
}

/* Less than one organism in all that was looked at. */
static enum status give_negative(struct bench_group *g, const struct tubes *t)
{
    struct arena *a = g->arena;
    const struct fraction *ml = fraction_from_int(a, 0);
    if (is_series(a, t)) {
        g->summary = table_words;
        return give(g, scaled(a, none_positive, t), QUALIFIER_LESS);
    }
    for (size_t i = 0; i < t->count; i++)
        ml = fraction_add(a, ml, fraction_multiply(a, t->at[i].volume, t->at[i].tubes));
    g->summary =
        arena_print(a, "no tube positive: less than one in all %s mL", formula_number(a, ml));
    return give(g, fraction_divide(a, fraction_from_int(a, 100), ml), QUALIFIER_LESS);
}

/* More than if one tube of the smallest volume had stayed negative, as the table has it. */
static enum status give_positive(struct bench_group *g, struct tubes *t)
{
    struct arena *a = g->arena;
    const struct fraction *x = NULL;
    if (is_series(a, t)) {
        g->summary = table_words;
        return give(g, scaled(a, all_positive, t), QUALIFIER_GREATER);
    }
    struct dilution *last = &t->at[t->count - 1];
    last->positives = fraction_subtract(a, last->positives, fraction_from_int(a, 1));
    g->summary = "every tube positive: more than with one of the smallest volume negative "
                 "(likelihood equation)";
    if (t->count == 1 && fraction_sign(last->positives) == 0)
        return bench_refuse(g, REASON_NO_RESULT,
                            "a single tube that is positive bounds nothing; set more dilutions");
    if (work_lists(g, "most-probable-number", t, &x) != OK)
        return FAULT;
    return give(g, x, QUALIFIER_GREATER);
}

static enum status give_approximation(struct bench_group *g, const struct tubes *t)
{
    struct arena *a = g->arena;
    const struct fraction *thomas = NULL;
    const struct fraction *likely = NULL;
    if (work_lists(g, "most-probable-number-thomas", t, &thomas) != OK ||
        work_lists(g, "most-probable-number", t, &likely) != OK)
        return FAULT;
    int decimals = fraction_decimals_for(likely, 2, ROUND_HALF_EVEN);
    g->summary = arena_print(a,
                             "not in the table of SM 9221 C: approximation of Thomas (the "
                             "likelihood equation gives %s)",
                             fraction_print(a, likely, decimals, ROUND_HALF_EVEN));
    return give(g, thomas, QUALIFIER_PLAIN);
}

static void check_blanks(struct bench_group *g)
{
    for (const struct bench_set *s = bench_next(g, BENCH_BLANK, NULL); s != NULL;
         s = bench_next(g, BENCH_BLANK, s)) {
        const struct fraction *positives = bench_number(g, s, "positives");
        bench_check(g, fraction_sign(positives) == 0, "SM 9020 B, from memory",
                    "%s has %s positive tubes, none allowed", s->name,
                    formula_number(g->arena, positives));
    }
}

static enum status work_tubes(struct bench_group *g)
{
    struct tubes t = {0};
    if (gather(g, &t) != OK)
        return FAULT;
    check_blanks(g);
    if (!t.any_positive)
        return give_negative(g, &t);
    if (!t.any_negative)
        return give_positive(g, &t);
    const char *index = is_series(g->arena, &t) ? index_of(g->arena, &t) : NULL;
    if (index == NULL)
        return give_approximation(g, &t);
    g->summary = table_words;
    return give(g, scaled(g->arena, index, &t), QUALIFIER_PLAIN);
}

/* ---- the sheets ---- */

#define SAMPLES (1u << BENCH_SAMPLE)

#define IN_TUBES(id, words, gives_id, from)                                                        \
    {                                                                                              \
        .sheet = {.name = (id),                                                                    \
                  .title = (words),                                                                \
                  .run_name = "dilution",                                                          \
                  .gives = (gives_id),                                                             \
                  .source = (from),                                                                \
                  .beware = "the volume is of sample: 1 mL of a tenfold dilution is 0.1 mL",       \
                  .runs = SAMPLES | 1u << BENCH_BLANK,                                             \
                  .argument = {{.name = "volume",                                                  \
                                .unit = "mL",                                                      \
                                .asked = "sample in each tube",                                    \
                                .carries = true,                                                   \
                                .runs = SAMPLES,                                                   \
                                .above = "0"},                                                     \
                               {.name = "tubes",                                                   \
                                .unit = "count",                                                   \
                                .asked = "how many tubes",                                         \
                                .carries = true,                                                   \
                                .runs = SAMPLES,                                                   \
                                .above = "0"},                                                     \
                               {.name = "positives",                                               \
                                .unit = "count",                                                   \
                                .asked = "how many are positive",                                  \
                                .runs = SAMPLES | 1u << BENCH_BLANK,                               \
                                .at_least = "0"},                                                  \
                               BENCH_TEXTS},                                                       \
                  .arguments = 7},                                                                 \
        .work = work_tubes, .parameter = (gives_id)                                                \
    }

static const struct bench_entry entries[] = {
    IN_TUBES("ecoli-tubes", "E. coli in multiple tubes", "ECOLI", "Standard Methods 9221 C and F"),
    IN_TUBES("fecal-tubes", "Fecal coliform in multiple tubes", "FCOLI",
             "Standard Methods 9221 C and E"),
    IN_TUBES("coliform-tubes", "Total coliform in multiple tubes", "TCOLI",
             "Standard Methods 9221 B and C"),
    IN_TUBES("enterococci-tubes", "Enterococci in multiple tubes", "ENTERO",
             "Standard Methods 9230 B, from memory"),
};

const struct bench_part bench_tubes = {entries, NELEM(entries)};
