/* Bench sheets of colonies on membrane filters. */
#include "process/bench.h"
#include "process/ready.h"

#include "base/poison.h"

/* Standard Methods 9222 D: a filter with more colonies of all kinds than this is not read. */
static const char colonies_most[] = "200";

struct filters {
    const struct fraction **colonies, **volumes; /* of the filters that can be read */
    size_t count, voided, in_range;
    const struct fraction *smallest, *largest; /* volumes: of all, and of those read */
    bool any_colony;
};

static enum status add_filter(struct bench_group *g, const struct bench_set *s, struct filters *f)
{
    const struct fraction *colonies = bench_number(g, s, "colonies");
    const struct fraction *total = bench_number(g, s, "total_colonies");
    const struct fraction *volume = bench_number(g, s, "volume");
    if (total != NULL && fraction_compare(total, colonies) < 0)
        return bench_refuse(g, REASON_NO_RESULT, "%s has more colonies than its total",
                            bench_set_words(g, s));
    if (f->smallest == NULL || fraction_compare(volume, f->smallest) < 0)
        f->smallest = volume;
    if (!bench_within(g->arena, total ? total : colonies, NULL, colonies_most)) {
        f->voided++;
        return OK;
    }
    if (f->largest == NULL || fraction_compare(volume, f->largest) > 0)
        f->largest = volume;
    f->in_range += bench_within(g->arena, colonies, g->entry->low, g->entry->high);
    f->any_colony = f->any_colony || fraction_sign(colonies) > 0;
    f->colonies[f->count] = colonies;
    f->volumes[f->count++] = volume;
    bench_say(g, "%s: %s colonies in %s mL", bench_set_words(g, s),
              formula_number(g->arena, colonies), formula_number(g->arena, volume));
    return OK;
}

static void check_blanks(struct bench_group *g)
{
    for (const struct bench_set *s = bench_next(g, BENCH_BLANK, NULL); s != NULL;
         s = bench_next(g, BENCH_BLANK, s)) {
        const struct fraction *colonies = bench_number(g, s, "colonies");
        bench_check(g, fraction_sign(colonies) == 0, "SM 9222 B, from memory",
                    "%s has %s colonies, none allowed", s->name,
                    formula_number(g->arena, colonies));
    }
}

/* A bound where no number can be had: so many colonies, or one, by a volume. */
static enum status give_bound(struct bench_group *g, const char *colonies,
                              const struct fraction *volume, enum qualifier qualifier)
{
    const struct fraction *x =
        fraction_divide(g->arena,
                        fraction_multiply(g->arena, bench_constant(g->arena, colonies),
                                          fraction_from_int(g->arena, 100)),
                        volume);
    bench_say(g, "%s %s * 100 / %s mL", qualifier == QUALIFIER_LESS ? "less than" : "more than",
              colonies, formula_number(g->arena, volume));
    return bench_give(g, g->entry->parameter, x, "/100mL", qualifier, BENCH_TWO_FIGURES);
}

static enum status give_count(struct bench_group *g, const struct filters *f)
{
    struct arena *a = g->arena;
    const struct fraction *low = bench_constant(a, g->entry->low);
    const struct fraction *high = bench_constant(a, g->entry->high);
    const struct fraction *count = NULL;
    const struct formula_value values[FORMULA_ARGUMENTS_MOST] = {
        {f->colonies, f->count}, {f->volumes, f->count}, {&low, 1}, {&high, 1}};
    if (bench_formula_lists(g, "membrane-filter-combined", values, &count) != OK)
        return FAULT;
    bench_say(g, "100 * colonies / mL, over the filters chosen = %s /100mL",
              formula_number(a, count));
    g->estimated = f->in_range == 0;
    return bench_give(g, g->entry->parameter, count, "/100mL", QUALIFIER_PLAIN, BENCH_TWO_FIGURES);
}

static enum status work_membrane(struct bench_group *g)
{
    size_t all = bench_sets(g, BENCH_SAMPLE);
    struct filters f = {0};
    f.colonies = bench_numbers(g->arena, all);
    f.volumes = bench_numbers(g->arena, all);
    for (const struct bench_set *s = bench_next(g, BENCH_SAMPLE, NULL); s != NULL;
         s = bench_next(g, BENCH_SAMPLE, s))
        if (add_filter(g, s, &f) != OK)
            return FAULT;
    check_blanks(g);
    g->summary = arena_print(g->arena, "%zu of %zu filter%s with %s to %s colonies", f.in_range,
                             all, all == 1 ? "" : "s", g->entry->low, g->entry->high);
    if (f.voided > 0)
        g->summary = arena_print(g->arena, "%s, %zu with more than %s of all kinds not read",
                                 g->summary, f.voided, colonies_most);
    if (f.count == 0)
        return give_bound(g, colonies_most, f.smallest, QUALIFIER_GREATER);
    if (!f.any_colony)
        return give_bound(g, "1", f.largest, QUALIFIER_LESS);
    return give_count(g, &f);
}

/* ---- the sheets ---- */

#define SAMPLES (1u << BENCH_SAMPLE)
#define COUNTED (SAMPLES | 1u << BENCH_BLANK)

#define MEMBRANE(id, words, gives_id, from, least, most)                                           \
    {                                                                                              \
        .sheet = {.name = (id),                                                                    \
                  .title = (words),                                                                \
                  .run_name = "filter",                                                            \
                  .gives = (gives_id),                                                             \
                  .source = (from),                                                                \
                  .beware = "a filter too crowded to count: colonies=201",                         \
                  .runs = COUNTED,                                                                 \
                  .argument = {{.name = "colonies",                                                \
                                .unit = "count",                                                   \
                                .asked = "colonies of the kind counted",                           \
                                .runs = COUNTED,                                                   \
                                .at_least = "0"},                                                  \
                               {.name = "volume",                                                  \
                                .unit = "mL",                                                      \
                                .asked = "sample filtered",                                        \
                                .carries = true,                                                   \
                                .runs = SAMPLES,                                                   \
                                .above = "0"},                                                     \
                               {.name = "total_colonies",                                          \
                                .unit = "count",                                                   \
                                .asked = "colonies of all kinds",                                  \
                                .optional = true,                                                  \
                                .runs = SAMPLES,                                                   \
                                .at_least = "0"},                                                  \
                               BENCH_TEXTS},                                                       \
                  .arguments = 7},                                                                 \
        .work = work_membrane, .parameter = (gives_id), .low = (least), .high = (most)             \
    }

static const struct bench_entry entries[] = {
    MEMBRANE("fecal-membrane", "Fecal coliform on membrane filters", "FCOLI",
             "Standard Methods 9222 D", "20", "60"),
    MEMBRANE("ecoli-membrane", "E. coli on membrane filters", "ECOLI",
             "USGS National Field Manual 7.1.4", "20", "80"),
    MEMBRANE("enterococci-membrane", "Enterococci on membrane filters", "ENTERO",
             "EPA Method 1600, from memory", "20", "60"),
};

const struct bench_part bench_filters = {entries, NELEM(entries)};
