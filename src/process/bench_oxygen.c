/* Bench sheets of oxygen in bottles: Standard Methods 5210 B. */
#include "process/bench.h"
#include "process/ready.h"

#include "base/poison.h"

static const char source[] = "SM 5210 B";

struct bottles {
    const struct fraction **bod; /* of the bottles used */
    size_t used, all;
    struct text failed;                            /* which bottle failed how */
    const struct fraction *seed_least, *seed_most; /* what the seed takes up; NULL: none */
};

static const struct fraction *depletion_of(struct bench_group *g, const struct bench_set *s)
{
    return fraction_subtract(g->arena, bench_number(g, s, "initial_do"),
                             bench_number(g, s, "final_do"));
}

static bool is_seeded(struct bench_group *g, const struct bench_set *s)
{
    const struct fraction *seed = bench_number(g, s, "seed_volume");
    return seed != NULL && fraction_sign(seed) > 0;
}

/* What the seed of a bottle takes up: the mean over the seed controls, each scaled to the bottle's
 * seed volume. */
static enum status seed_correction(struct bench_group *g, const struct bench_set *bottle,
                                   const struct fraction **out)
{
    size_t controls = bench_sets(g, BENCH_SEED);
    const struct fraction **x = bench_numbers(g->arena, controls);
    size_t count = 0;
    if (controls == 0)
        return bench_refuse(g, REASON_NO_RESULT,
                            "%s is seeded, but there is no seed control; add a run 'seed'",
                            bench_set_words(g, bottle));
    for (const struct bench_set *s = bench_next(g, BENCH_SEED, NULL); s != NULL;
         s = bench_next(g, BENCH_SEED, s)) {
        const struct fraction *numbers[] = {
            bench_number(g, s, "initial_do"), bench_number(g, s, "final_do"),
            bench_number(g, s, "seed_volume"), bench_number(g, bottle, "seed_volume")};
        if (numbers[2] == NULL)
            return bench_refuse(g, REASON_NO_RESULT, "seed control '%s' has no 'seed_volume'",
                                s->name);
        if (bench_formula(g, s, "bod-seed-correction-from-control", numbers, &x[count++]) != OK)
            return FAULT;
    }
    *out = bench_mean(g->arena, x, count);
    return OK;
}

static enum status bottle_bod(struct bench_group *g, const struct bench_set *s,
                              const struct fraction *correction, const struct fraction **out)
{
    const struct fraction *initial = bench_number(g, s, "initial_do");
    const struct fraction *final = bench_number(g, s, "final_do");
    const struct fraction *sample = bench_number(g, s, "sample_volume");
    const struct fraction *bottle = bench_number(g, s, "bottle_volume");
    const struct fraction *plain[] = {initial, final, sample, bottle};
    const struct fraction *seeded[] = {initial, final, correction, sample, bottle};
    return correction ? bench_formula(g, s, "bod-seeded", seeded, out)
                      : bench_formula(g, s, "bod-unseeded", plain, out);
}

static enum status volumes_fit(struct bench_group *g, const struct bench_set *s)
{
    const struct fraction *volume = bench_number(g, s, "sample_volume");
    if (is_seeded(g, s))
        volume = fraction_add(g->arena, volume, bench_number(g, s, "seed_volume"));
    if (fraction_compare(volume, bench_number(g, s, "bottle_volume")) > 0)
        return bench_refuse(g, REASON_NO_RESULT, "%s holds more sample and seed than the bottle",
                            bench_set_words(g, s));
    return OK;
}

/* Depletion of 2.0 mg/L at least, before the seed is taken off, and 1.0 mg/L left at least; the
 * bounds themselves pass. */
static bool may_be_used(struct bench_group *g, const struct bench_set *s, struct text *why)
{
    const struct fraction *depletion = depletion_of(g, s);
    const struct fraction *left = bench_number(g, s, "final_do");
    bool depleted = bench_within(g->arena, depletion, "2.0", NULL);
    bool enough = bench_within(g->arena, left, "1.0", NULL);
    if (!depleted || !enough)
        text_print(why, "%s%s", why->length > 0 ? ", " : "", bench_set_words(g, s));
    if (!depleted)
        text_print(why, " depletes %s mg/L (2.0 at least)", formula_number(g->arena, depletion));
    if (!enough)
        text_print(why, "%s has %s mg/L left (1.0 at least)", depleted ? "" : " and",
                   formula_number(g->arena, left));
    return depleted && enough;
}

static void widen(struct bottles *b, const struct fraction *seed)
{
    if (b->seed_least == NULL || fraction_compare(seed, b->seed_least) < 0)
        b->seed_least = seed;
    if (b->seed_most == NULL || fraction_compare(seed, b->seed_most) > 0)
        b->seed_most = seed;
}

static enum status work_bottles(struct bench_group *g, struct bottles *b)
{
    enum status rc = OK;
    b->bod = bench_numbers(g->arena, bench_sets(g, BENCH_SAMPLE));
    for (const struct bench_set *s = bench_next(g, BENCH_SAMPLE, NULL); s != NULL;
         s = bench_next(g, BENCH_SAMPLE, s)) {
        const struct fraction *correction = NULL;
        TRY(volumes_fit(g, s));
        b->all++;
        if (is_seeded(g, s))
            TRY(seed_correction(g, s, &correction));
        if (!may_be_used(g, s, &b->failed))
            continue;
        if (correction != NULL)
            widen(b, correction);
        TRY(bottle_bod(g, s, correction, &b->bod[b->used++]));
    }
done:
    return rc;
}

/* ---- checks ---- */

static void check_blanks(struct bench_group *g)
{
    for (const struct bench_set *s = bench_next(g, BENCH_BLANK, NULL); s != NULL;
         s = bench_next(g, BENCH_BLANK, s)) {
        const struct fraction *depletion = depletion_of(g, s);
        bench_check(g, bench_within(g->arena, depletion, NULL, "0.2"), source,
                    "%s depletes %s mg/L, at most 0.2", s->name,
                    formula_number(g->arena, depletion));
    }
}

static void check_seed(struct bench_group *g, const struct bottles *b)
{
    if (b->seed_least == NULL)
        return;
    const char *least = fraction_print(g->arena, b->seed_least, 2, ROUND_HALF_EVEN);
    const char *most = fraction_print(g->arena, b->seed_most, 2, ROUND_HALF_EVEN);
    bool one = text_equal(least, most);
    bench_check(g,
                bench_within(g->arena, b->seed_least, "0.6", NULL) &&
                    bench_within(g->arena, b->seed_most, NULL, "1.0"),
                source, "seed takes up %s%s%s mg/L in a bottle, 0.6 to 1.0", least,
                one ? "" : " to ", one ? "" : most);
}

/* From memory: the highest and the lowest of the bottles used, apart by their mean. */
static void check_agreement(struct bench_group *g, const struct bottles *b)
{
    struct arena *a = g->arena;
    const struct fraction *least = b->bod[0];
    const struct fraction *most = b->bod[0];
    for (size_t i = 1; i < b->used; i++) {
        least = fraction_compare(b->bod[i], least) < 0 ? b->bod[i] : least;
        most = fraction_compare(b->bod[i], most) > 0 ? b->bod[i] : most;
    }
    const struct fraction *mean = bench_mean(a, b->bod, b->used);
    if (b->used < 2 || fraction_sign(mean) <= 0)
        return;
    const struct fraction *apart = fraction_divide(
        a, fraction_multiply(a, fraction_subtract(a, most, least), fraction_from_int(a, 100)),
        mean);
    bench_check(g, bench_within(a, apart, NULL, "30"), "SM 5210 B, from memory",
                "bottles used differ by %s %%, at most 30",
                fraction_print(a, apart, 0, ROUND_HALF_EVEN));
}

/* Glucose-glutamic acid at 2 %: 198 +/- 30.5 mg/L. */
static enum status check_standards(struct bench_group *g)
{
    enum status rc = OK;
    struct arena *a = g->arena;
    const struct fraction **x = bench_numbers(a, bench_sets(g, BENCH_STANDARD));
    size_t count = 0;
    struct text why;
    text_init(&why, SIZE_MAX);
    for (const struct bench_set *s = bench_next(g, BENCH_STANDARD, NULL); s != NULL;
         s = bench_next(g, BENCH_STANDARD, s)) {
        const struct fraction *correction = NULL;
        TRY(volumes_fit(g, s));
        if (is_seeded(g, s))
            TRY(seed_correction(g, s, &correction));
        if (!may_be_used(g, s, &why))
            continue;
        TRY(bottle_bod(g, s, correction, &x[count++]));
    }
    if (why.length > 0)
        bench_check(g, false, source, "%s", why.at);
    if (count > 0) {
        const struct fraction *mean = bench_mean(a, x, count);
        bench_check(g, bench_within(a, mean, "167.5", "228.5"), source,
                    "glucose-glutamic acid gives %s mg/L, 198 +/- 30.5",
                    fraction_print(a, mean, 1, ROUND_HALF_EVEN));
    }
done:
    text_free(&why);
    return rc;
}

/* ---- the sheet ---- */

static const char what_next[] =
    "there is no result for the day: write the reason beside it, and next time set a wider range "
    "of "
    "sample volumes, more where little was depleted, less where little was left";

static enum status work_bod(struct bench_group *g)
{
    enum status rc = OK;
    struct bottles b = {0};
    text_init(&b.failed, SIZE_MAX);
    TRY(work_bottles(g, &b));
    if (b.used == 0) {
        TRY(bench_refuse(g, REASON_NO_RESULT, "no bottle of %zu can be used: %s; %s", b.all,
                         b.failed.at, what_next));
    }
    check_blanks(g);
    check_seed(g, &b);
    TRY(check_standards(g));
    check_agreement(g, &b);
    g->summary =
        arena_print(g->arena, "%zu of %zu bottles used%s%s%s", b.used, b.all,
                    b.failed.length > 0 ? " (" : "", b.failed.at, b.failed.length > 0 ? ")" : "");
    TRY(bench_give(g, g->entry->parameter, bench_mean(g->arena, b.bod, b.used), "mg/L",
                   QUALIFIER_PLAIN, BENCH_DECIMALS));
done:
    text_free(&b.failed);
    return rc;
}

#define SAMPLES (1u << BENCH_SAMPLE)
#define ALL     (SAMPLES | 1u << BENCH_BLANK | 1u << BENCH_SEED | 1u << BENCH_STANDARD)
#define FED     (SAMPLES | 1u << BENCH_STANDARD)

#define BOTTLES                                                                                    \
    {.name = "initial_do",                                                                         \
     .unit = "mg/L",                                                                               \
     .asked = "dissolved oxygen on the first day",                                                 \
     .runs = ALL,                                                                                  \
     .at_least = "0"},                                                                             \
        {.name = "final_do",                                                                       \
         .unit = "mg/L",                                                                           \
         .asked = "dissolved oxygen after five days",                                              \
         .runs = ALL,                                                                              \
         .at_least = "0"},                                                                         \
        {.name = "sample_volume",                                                                  \
         .unit = "mL",                                                                             \
         .asked = "sample in the bottle",                                                          \
         .carries = true,                                                                          \
         .runs = FED,                                                                              \
         .above = "0"},                                                                            \
        {.name = "seed_volume",                                                                    \
         .unit = "mL",                                                                             \
         .asked = "seed in the bottle",                                                            \
         .optional = true,                                                                         \
         .carries = true,                                                                          \
         .runs = FED | 1u << BENCH_SEED,                                                           \
         .at_least = "0"},                                                                         \
        {.name = "bottle_volume",                                                                  \
         .unit = "mL",                                                                             \
         .asked = "volume of the bottle",                                                          \
         .fallback = "300",                                                                        \
         .carries = true,                                                                          \
         .runs = FED,                                                                              \
         .above = "0"},                                                                            \
        BENCH_TEXTS

static const struct bench_entry entries[] = {
    {
        .sheet = {.name = "bod",
                  .title = "Biochemical oxygen demand by dilutions",
                  .run_name = "bottle",
                  .gives = "BOD5",
                  .source = "Standard Methods 5210 B",
                  .beware = "bottles count that deplete 2.0 mg/L and keep 1.0; the date is the "
                            "sample's",
                  .runs = ALL,
                  .argument = {BOTTLES},
                  .arguments = 9},
        .work = work_bod,
        .parameter = "BOD5",
    },
    {
        .sheet = {.name = "cbod",
                  .title = "Carbonaceous biochemical oxygen demand by dilutions",
                  .run_name = "bottle",
                  .gives = "CBOD5",
                  .source = "Standard Methods 5210 B with nitrification inhibited",
                  .beware = "bottles count that deplete 2.0 mg/L and keep 1.0; inhibited bottles "
                            "need seed",
                  .runs = ALL,
                  .argument = {BOTTLES},
                  .arguments = 9},
        .work = work_bod,
        .parameter = "CBOD5",
    },
};

const struct bench_part bench_oxygen = {entries, NELEM(entries)};
