/* Bench sheets of solids: by weight, by settling, by spinning. */
#include "process/bench.h"
#include "process/ready.h"

#include "base/poison.h"

/* ---- suspended and volatile solids ---- */

static const char weight_source[] = "SM 2540 D";

/* Milligrams on a filter, from weights in grams. */
static const struct fraction *residue(struct bench_group *g, const struct bench_set *s)
{
    const struct fraction *grams =
        fraction_subtract(g->arena, bench_number(g, s, "dried"), bench_number(g, s, "filter"));
    return fraction_multiply(g->arena, grams, fraction_from_int(g->arena, 1000));
}

/* Standard Methods 2540 D: choose the volume for 2.5 to 200 mg of dried residue. */
static void check_residues(struct bench_group *g)
{
    struct text t;
    bool passed = true;
    text_init(&t, SIZE_MAX);
    for (const struct bench_set *s = bench_next(g, BENCH_SAMPLE, NULL); s != NULL;
         s = bench_next(g, BENCH_SAMPLE, s)) {
        const struct fraction *mg = residue(g, s);
        bool good = bench_within(g->arena, mg, "2.5", "200");
        if (good != passed && !good)
            text_clear(&t); /* tells those that fail, or all where none does */
        passed = passed && good;
        if (good == passed)
            text_print(&t, "%s%s", t.length > 0 ? ", " : "",
                       fraction_print(g->arena, mg, 1, ROUND_HALF_EVEN));
    }
    bench_check(g, passed, weight_source, "residue %s mg; 2.5 to 200", t.at);
    text_free(&t);
}

/* Standard Methods 2540 D, from memory: replicates agree within 5 % of their mean. */
static void check_replicates(struct bench_group *g, const struct fraction *const *x, size_t count)
{
    struct arena *a = g->arena;
    const struct fraction *mean = count > 1 ? bench_mean(a, x, count) : NULL;
    const struct fraction *most = fraction_from_int(a, 0);
    if (mean == NULL || fraction_sign(mean) <= 0)
        return;
    for (size_t i = 0; i < count; i++) {
        const struct fraction *away = fraction_subtract(a, x[i], mean);
        if (fraction_sign(away) < 0)
            away = fraction_subtract(a, mean, x[i]);
        away = fraction_divide(a, fraction_multiply(a, away, fraction_from_int(a, 100)), mean);
        if (fraction_compare(away, most) > 0)
            most = away;
    }
    bench_check(g, bench_within(a, most, NULL, "5"), "SM 2540 D, from memory",
                "replicates lie up to %s %% from their mean; at most 5",
                fraction_print(a, most, 1, ROUND_HALF_EVEN));
}

/* A filter through which only water went must weigh what it weighed. */
static void check_blank_filters(struct bench_group *g)
{
    for (const struct bench_set *s = bench_next(g, BENCH_BLANK, NULL); s != NULL;
         s = bench_next(g, BENCH_BLANK, s)) {
        const struct fraction *mg = residue(g, s);
        bench_check(g, bench_within(g->arena, mg, "-0.5", "0.5"), "common practice, no source",
                    "%s filter changes by %s mg; at most 0.5", s->name,
                    fraction_print(g->arena, mg, 1, ROUND_HALF_EVEN));
    }
}

struct solids {
    const struct fraction **total, **volatile_;
    size_t totals, volatiles;
};

static enum status weigh(struct bench_group *g, struct solids *out)
{
    size_t count = bench_sets(g, BENCH_SAMPLE);
    out->total = bench_numbers(g->arena, count);
    out->volatile_ = bench_numbers(g->arena, count);
    for (const struct bench_set *s = bench_next(g, BENCH_SAMPLE, NULL); s != NULL;
         s = bench_next(g, BENCH_SAMPLE, s)) {
        const struct fraction *filter = bench_number(g, s, "filter");
        const struct fraction *dried = bench_number(g, s, "dried");
        const struct fraction *ashed = bench_number(g, s, "ashed");
        const struct fraction *volume = bench_number(g, s, "volume");
        const struct fraction *whole[] = {filter, dried, volume};
        const struct fraction *burnt[] = {dried, ashed, volume};
        if (bench_formula(g, s, "total-suspended-solids", whole, &out->total[out->totals++]) != OK)
            return FAULT;
        if (ashed == NULL)
            continue;
        if (fraction_compare(ashed, filter) < 0)
            return bench_refuse(g, REASON_NO_RESULT,
                                "%s weighs less ashed than the filter alone did; check the weights",
                                bench_set_words(g, s));
        if (bench_formula(g, s, "volatile-suspended-solids", burnt,
                          &out->volatile_[out->volatiles++]) != OK)
            return FAULT;
    }
    return OK;
}

/* Mixed liquor has names of its own. NULL: a parameter of the plant's own has no volatile twin. */
static const char *volatile_of(const char *parameter)
{
    if (text_equal(parameter, "MLSS"))
        return "MLVSS";
    return text_equal(parameter, "TSS") ? "VSS" : NULL;
}

static enum status work_suspended(struct bench_group *g)
{
    struct solids found = {0};
    enum status rc = OK;
    const char *parameter = bench_text(g, "parameter");
    if (parameter == NULL)
        parameter = g->plant->points[g->point].role == ROLE_AERATION ? "MLSS" : "TSS";
    const char *burnt = volatile_of(parameter);
    g->parameter = parameter;
    TRY(weigh(g, &found));
    check_residues(g);
    check_replicates(g, found.total, found.totals);
    check_blank_filters(g);
    g->summary = arena_print(g->arena, "%zu filter%s", found.totals, found.totals == 1 ? "" : "s");
    if (found.volatiles > 0 && burnt == NULL)
        g->summary = arena_print(g->arena, "%s, ashed weights kept without a result", g->summary);
    TRY(bench_give(g, parameter, bench_mean(g->arena, found.total, found.totals), "mg/L",
                   QUALIFIER_PLAIN, BENCH_DECIMALS));
    if (found.volatiles > 0 && burnt != NULL)
        TRY(bench_give(g, burnt, bench_mean(g->arena, found.volatile_, found.volatiles), "mg/L",
                       QUALIFIER_PLAIN, BENCH_DECIMALS));
done:
    return rc;
}

/* ---- total solids ---- */

static enum status work_total(struct bench_group *g)
{
    enum status rc = OK;
    size_t count = bench_sets(g, BENCH_SAMPLE);
    const struct fraction **total = bench_numbers(g->arena, count);
    const struct fraction **burnt = bench_numbers(g->arena, count);
    size_t totals = 0;
    size_t burnts = 0;
    for (const struct bench_set *s = bench_next(g, BENCH_SAMPLE, NULL); s != NULL;
         s = bench_next(g, BENCH_SAMPLE, s)) {
        const struct fraction *dish = bench_number(g, s, "dish");
        const struct fraction *dry = bench_number(g, s, "dry");
        const struct fraction *whole[] = {dish, bench_number(g, s, "wet"), dry};
        const struct fraction *ash[] = {dish, dry, bench_number(g, s, "ashed")};
        TRY(bench_formula(g, s, "total-solids-percent", whole, &total[totals++]));
        if (ash[2] != NULL)
            TRY(bench_formula(g, s, "volatile-solids-percent", ash, &burnt[burnts++]));
    }
    g->summary = arena_print(g->arena, "%zu dish%s", totals, totals == 1 ? "" : "es");
    TRY(bench_give(g, "TS", bench_mean(g->arena, total, totals), "%", QUALIFIER_PLAIN,
                   BENCH_DECIMALS));
    if (burnts > 0)
        TRY(bench_give(g, "VS", bench_mean(g->arena, burnt, burnts), "%", QUALIFIER_PLAIN,
                       BENCH_DECIMALS));
done:
    return rc;
}

/* ---- settling ---- */

/* The run of 30 minutes; a run without a name is taken for it. */
static enum status after_thirty(struct bench_group *g, const struct bench_set **out)
{
    const struct fraction *thirty = fraction_from_int(g->arena, 30);
    *out = NULL;
    for (const struct bench_set *s = bench_next(g, BENCH_SAMPLE, NULL); s != NULL;
         s = bench_next(g, BENCH_SAMPLE, s)) {
        const struct fraction *minutes = *s->name ? fraction_parse(g->arena, s->name) : thirty;
        if (minutes == NULL || fraction_sign(minutes) < 0)
            return bench_refuse(g, REASON_NO_RESULT,
                                "run '%s' is no number of minutes; write 5, 10, 30", s->name);
        if (fraction_compare(minutes, thirty) != 0)
            continue;
        if (*out != NULL)
            return bench_refuse(g, REASON_NO_RESULT, "there are two readings at 30 minutes");
        *out = s;
    }
    if (*out == NULL)
        return bench_refuse(g, REASON_NO_RESULT, "there is no reading at 30 minutes");
    return OK;
}

/* Percent of the sample's volume. */
static enum status settled_percent(struct bench_group *g, const struct bench_set *s,
                                   const char *settled, const char *sample,
                                   const struct fraction **out)
{
    const struct fraction *numbers[] = {bench_number(g, s, settled), bench_number(g, s, sample)};
    return bench_formula(g, s, "settled-sludge-percent", numbers, out);
}

static enum status work_settleability(struct bench_group *g)
{
    enum status rc = OK;
    const struct bench_set *s = NULL;
    const struct fraction *percent = NULL;
    const struct fraction *dilution = bench_number(g, NULL, "dilution_factor");
    bool diluted = dilution != NULL && !bench_within(g->arena, dilution, NULL, "1");
    g->parameter = diluted ? "SV30D" : "SV30";
    TRY(after_thirty(g, &s));
    TRY(settled_percent(g, s, "settled_volume", "sample_volume", &percent));
    /* 1 % of a litre is 10 mL. */
    const struct fraction *settled =
        fraction_multiply(g->arena, percent, fraction_from_int(g->arena, 10));
    TRY(bench_give(g, g->parameter, settled, "mL/L", QUALIFIER_PLAIN, BENCH_DECIMALS));
    if (diluted)
        TRY(bench_give(g, "DILUTION", dilution, "1", QUALIFIER_PLAIN, BENCH_DECIMALS));
done:
    return rc;
}

static enum status work_settleable(struct bench_group *g)
{
    struct arena *a = g->arena;
    const struct fraction **x = bench_numbers(a, bench_sets(g, BENCH_SAMPLE));
    size_t count = 0;
    for (const struct bench_set *s = bench_next(g, BENCH_SAMPLE, NULL); s != NULL;
         s = bench_next(g, BENCH_SAMPLE, s)) {
        const struct fraction *settled = bench_number(g, s, "settled");
        const struct fraction *litres = bench_number(g, s, "sample_volume");
        /* Standard Methods 2540 F: millilitres settled in a litre. */
        x[count] = fraction_divide(a, settled, litres);
        if (!bench_within(a, x[count], NULL, "1000"))
            return bench_refuse(g, REASON_NO_RESULT, "%s settles more than its sample",
                                bench_set_words(g, s));
        bench_say(g, "%s: settleable = settled / sample_volume = %s mL/L", bench_set_words(g, s),
                  fraction_print(a, x[count], 2, ROUND_HALF_EVEN));
        count++;
    }
    return bench_give(g, "SETTLEABLE", bench_mean(a, x, count), "mL/L", QUALIFIER_PLAIN,
                      BENCH_DECIMALS);
}

/* ---- spin ---- */

static enum status work_spin(struct bench_group *g)
{
    enum status rc = OK;
    struct arena *a = g->arena;
    const char *parameter = bench_text(g, "parameter");
    const struct fraction *ratio = bench_number(g, NULL, "ratio");
    const struct fraction **x = bench_numbers(a, bench_sets(g, BENCH_SAMPLE));
    size_t count = 0;
    if (ratio == NULL && parameter == NULL)
        return bench_refuse(g, REASON_NO_RESULT,
                            "a percentage has no parameter of its own; give 'ratio', the MLSS for "
                            "each percent, or 'parameter', one of the plant's measured in %%");
    g->parameter = parameter ? parameter : "MLSS";
    for (const struct bench_set *s = bench_next(g, BENCH_SAMPLE, NULL); s != NULL;
         s = bench_next(g, BENCH_SAMPLE, s))
        TRY(settled_percent(g, s, "sediment", "tube_volume", &x[count++]));
    const struct fraction *percent = bench_mean(a, x, count);
    const char *words = fraction_print(a, percent, 2, ROUND_HALF_EVEN);
    g->summary = arena_print(a, "spin %s %%", words);
    if (ratio == NULL)
        return bench_give(g, parameter, percent, "%", QUALIFIER_PLAIN, BENCH_DECIMALS);
    const struct fraction *mlss = fraction_multiply(a, percent, ratio);
    const char *for_each = formula_number(a, ratio);
    bench_say(g, "mlss = %s %% * %s mg/L = %s mg/L", words, for_each,
              fraction_print(a, mlss, 1, ROUND_HALF_EVEN));
    g->summary = arena_print(a, "%s, taken as %s mg/L a percent", g->summary, for_each);
    g->estimated = true;
    TRY(bench_give(g, g->parameter, mlss, "mg/L", QUALIFIER_PLAIN, BENCH_DECIMALS));
done:
    return rc;
}

/* ---- the sheets ---- */

#define SAMPLES  (1u << BENCH_SAMPLE)
#define FILTERED (1u << BENCH_SAMPLE | 1u << BENCH_BLANK)

static const struct bench_entry entries[] = {
    {
        .sheet = {.name = "suspended-solids",
                  .title = "Suspended and volatile solids by weight",
                  .run_name = "filter",
                  .gives = "TSS and VSS; of an aeration point MLSS and MLVSS",
                  .source = "Standard Methods 2540 D and E",
                  .beware = "weights in grams; filters without an ashed weight give no volatiles",
                  .runs = FILTERED,
                  .argument = {{.name = "filter",
                                .unit = "g",
                                .asked = "weight of the filter alone",
                                .runs = FILTERED,
                                .above = "0"},
                               {.name = "dried",
                                .unit = "g",
                                .asked = "weight of filter and residue, dried at 104 C",
                                .runs = FILTERED,
                                .above = "0"},
                               {.name = "ashed",
                                .unit = "g",
                                .asked = "weight after 550 C",
                                .optional = true,
                                .runs = SAMPLES,
                                .above = "0"},
                               {.name = "volume",
                                .unit = "mL",
                                .asked = "volume filtered",
                                .carries = true,
                                .runs = SAMPLES,
                                .above = "0"},
                               BENCH_PARAMETER,
                               BENCH_TEXTS},
                  .arguments = 9},
        .work = work_suspended,
    },
    {
        .sheet = {.name = "total-solids",
                  .title = "Total and volatile solids of a sludge",
                  .run_name = "dish",
                  .gives = "TS and VS",
                  .source = "Standard Methods 2540 G",
                  .runs = SAMPLES,
                  .argument = {{.name = "dish",
                                .unit = "g",
                                .asked = "weight of the dish alone",
                                .runs = SAMPLES,
                                .at_least = "0"},
                               {.name = "wet",
                                .unit = "g",
                                .asked = "weight of dish and wet sample",
                                .runs = SAMPLES,
                                .above = "0"},
                               {.name = "dry",
                                .unit = "g",
                                .asked = "weight after 104 C",
                                .runs = SAMPLES,
                                .above = "0"},
                               {.name = "ashed",
                                .unit = "g",
                                .asked = "weight after 550 C",
                                .optional = true,
                                .runs = SAMPLES,
                                .above = "0"},
                               BENCH_TEXTS},
                  .arguments = 8},
        .work = work_total,
        .parameter = "TS",
    },
    {
        .sheet = {.name = "settleability",
                  .title = "Settled volume after 30 minutes",
                  .run_name = "minutes",
                  .gives = "SV30; of a diluted sample SV30D and DILUTION",
                  .source = "Standard Methods 2710 C",
                  .beware = "the run is the minutes: 30 is the result, others are kept",
                  .runs = SAMPLES,
                  .argument = {{.name = "settled_volume",
                                .unit = "mL",
                                .asked = "settled volume",
                                .runs = SAMPLES,
                                .at_least = "0"},
                               {.name = "sample_volume",
                                .unit = "mL",
                                .asked = "volume of the sample",
                                .fallback = "1000",
                                .carries = true,
                                .once = true,
                                .runs = SAMPLES,
                                .above = "0"},
                               {.name = "dilution_factor",
                                .unit = "1",
                                .asked = "how many times diluted",
                                .optional = true,
                                .once = true,
                                .runs = SAMPLES,
                                .at_least = "1"},
                               BENCH_TEXTS},
                  .arguments = 7},
        .work = work_settleability,
    },
    {
        .sheet = {.name = "settleable-solids",
                  .title = "Settleable solids by volume",
                  .run_name = "cone",
                  .gives = "SETTLEABLE",
                  .source = "Standard Methods 2540 F",
                  .runs = SAMPLES,
                  .argument = {{.name = "settled",
                                .unit = "mL",
                                .asked = "settled after an hour",
                                .runs = SAMPLES,
                                .at_least = "0"},
                               {.name = "sample_volume",
                                .unit = "L",
                                .asked = "volume of the sample",
                                .fallback = "1",
                                .carries = true,
                                .runs = SAMPLES,
                                .above = "0"},
                               BENCH_TEXTS},
                  .arguments = 6},
        .work = work_settleable,
        .parameter = "SETTLEABLE",
    },
    {
        .sheet = {.name = "spin",
                  .title = "Suspended solids by centrifuge",
                  .run_name = "tube",
                  .gives = "MLSS, estimated; or the percentage as a parameter of the plant's own",
                  .source = "common practice, no source",
                  .beware = "the ratio is the plant's own, from its weighed solids",
                  .runs = SAMPLES,
                  .argument = {{.name = "sediment",
                                .unit = "mL",
                                .asked = "sediment in the tube",
                                .runs = SAMPLES,
                                .at_least = "0"},
                               {.name = "tube_volume",
                                .unit = "mL",
                                .asked = "volume of the tube",
                                .carries = true,
                                .runs = SAMPLES,
                                .above = "0"},
                               {.name = "ratio",
                                .unit = "mg/L",
                                .asked = "MLSS for each percent",
                                .optional = true,
                                .carries = true,
                                .once = true,
                                .runs = SAMPLES,
                                .above = "0"},
                               BENCH_PARAMETER,
                               BENCH_TEXTS},
                  .arguments = 8},
        .work = work_spin,
    },
};

const struct bench_part bench_solids = {entries, NELEM(entries)};
