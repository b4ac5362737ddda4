/* Bench sheets of meters and titrations: residual chlorine, calibrations of pH and oxygen. */
#include <math.h>

#include "process/bench.h"
#include "process/ready.h"

#include "base/poison.h"

/* ---- residual chlorine by titration ---- */

/* Standard Methods 4500-Cl B: (A +/- B) x N x 35450 / mL of sample. A blank that takes titrant is
 * taken off; one that is titrated back is written below zero and so added. */
static enum status work_residual(struct bench_group *g)
{
    struct arena *a = g->arena;
    const char *parameter = bench_text(g, "parameter");
    const struct fraction **x = bench_numbers(a, bench_sets(g, BENCH_SAMPLE));
    size_t count = 0;
    g->parameter = parameter ? parameter : g->entry->parameter;
    for (const struct bench_set *s = bench_next(g, BENCH_SAMPLE, NULL); s != NULL;
         s = bench_next(g, BENCH_SAMPLE, s)) {
        const struct fraction *titrant = bench_number(g, s, "titrant_volume");
        const struct fraction *blank = bench_number(g, s, "blank_volume");
        const struct fraction *normality = bench_number(g, s, "normality");
        const struct fraction *sample = bench_number(g, s, "sample_volume");
        const struct fraction *net = fraction_subtract(a, titrant, blank);
        if (fraction_sign(net) < 0)
            return bench_refuse(g, REASON_NO_RESULT,
                                "%s takes less titrant than the blank; check the volumes",
                                bench_set_words(g, s));
        const struct fraction *chlorine =
            fraction_multiply(a, fraction_multiply(a, net, normality), bench_constant(a, "35450"));
        x[count] = fraction_divide(a, chlorine, sample);
        bench_say(g, "%s: chlorine = (%s - %s) * %s * 35450 / %s = %s mg/L", bench_set_words(g, s),
                  formula_number(a, titrant), formula_number(a, blank),
                  formula_number(a, normality), formula_number(a, sample),
                  formula_number(a, x[count]));
        count++;
    }
    g->summary = arena_print(a, "%zu titration%s", count, count == 1 ? "" : "s");
    return bench_give(g, g->parameter, bench_mean(a, x, count), "mg/L", QUALIFIER_PLAIN,
                      BENCH_DECIMALS);
}

/* ---- pH ---- */

static enum status work_ph(struct bench_group *g)
{
    struct arena *a = g->arena;
    const struct fraction *slope = bench_number(g, NULL, "slope");
    for (const struct bench_set *s = bench_next(g, BENCH_SAMPLE, NULL); s != NULL;
         s = bench_next(g, BENCH_SAMPLE, s)) {
        const struct fraction *buffer = bench_number(g, s, "buffer");
        const struct fraction *reading = bench_number(g, s, "reading");
        const struct fraction *away = fraction_subtract(a, reading, buffer);
        bench_check(g, bench_within(a, away, "-0.1", "0.1"), "SM 4500-H+ B, from memory",
                    "buffer %s reads %s, within 0.1", formula_number(a, buffer),
                    formula_number(a, reading));
    }
    if (slope != NULL)
        bench_check(g, bench_within(a, slope, "92", "102"), "common practice, no source",
                    "slope is %s %%, 92 to 102", formula_number(a, slope));
    bench_record(g);
    return OK;
}

/* ---- dissolved oxygen ---- */

/* Benson and Krause 1984, as Standard Methods 4500-O prints it, from memory: oxygen in water under
 * moist air, mg/L; degrees C, g of salt in a kg, kPa. */
static double oxygen_saturation(double celsius, double salinity, double kilopascals)
{
    double t = celsius + 273.15;
    double p = kilopascals / 101.325;
    double logarithm = -139.34411 + 1.575701e5 / t - 6.642308e7 / (t * t) +
                       1.243800e10 / (t * t * t) - 8.621949e11 / (t * t * t * t);
    logarithm -= salinity * (1.7674e-2 - 1.0754e1 / t + 2.1407e3 / (t * t));
    double vapour = exp(11.8571 - 3840.70 / t - 216961.0 / (t * t));
    double theta = 0.000975 - 1.426e-5 * celsius + 6.436e-8 * celsius * celsius;
    return exp(logarithm) * p * ((1.0 - vapour / p) * (1.0 - theta * p)) /
           ((1.0 - vapour) * (1.0 - theta));
}

static enum status work_oxygen(struct bench_group *g)
{
    struct arena *a = g->arena;
    for (const struct bench_set *s = bench_next(g, BENCH_SAMPLE, NULL); s != NULL;
         s = bench_next(g, BENCH_SAMPLE, s)) {
        const struct fraction *reading = bench_number(g, s, "reading");
        const struct fraction *temperature = bench_number(g, s, "temperature");
        const struct fraction *pressure = bench_number(g, s, "pressure");
        const struct fraction *salinity = bench_number(g, s, "salinity");
        double saturation = oxygen_saturation(fraction_double(temperature),
                                              fraction_double(salinity), fraction_double(pressure));
        const struct fraction *expected =
            fraction_round(a, fraction_from_double(a, saturation), 2, ROUND_HALF_EVEN);
        const struct fraction *away = fraction_subtract(a, reading, expected);
        bench_say(g, "saturation at %s degC, %s kPa, salinity %s = %s mg/L",
                  formula_number(a, temperature), fraction_print(a, pressure, 2, ROUND_HALF_EVEN),
                  formula_number(a, salinity), formula_number(a, expected));
        bench_check(g, bench_within(a, away, "-0.2", "0.2"), "common practice, no source",
                    "meter reads %s mg/L, saturation is %s, within 0.2", formula_number(a, reading),
                    formula_number(a, expected));
    }
    bench_record(g);
    return OK;
}

/* ---- the sheets ---- */

#define SAMPLES (1u << BENCH_SAMPLE)

static const struct bench_entry entries[] = {
    {
        .sheet = {.name = "residual",
                  .title = "Residual chlorine by titration",
                  .run_name = "titration",
                  .gives = "TRC",
                  .source = "Standard Methods 4500-Cl B",
                  .beware = "a blank that is titrated back has a volume below zero",
                  .runs = SAMPLES,
                  .argument = {{.name = "titrant_volume",
                                .unit = "mL",
                                .asked = "titrant used by the sample",
                                .runs = SAMPLES,
                                .at_least = "0"},
                               {.name = "normality",
                                .unit = "N",
                                .asked = "normality of the titrant",
                                .carries = true,
                                .once = true,
                                .runs = SAMPLES,
                                .above = "0"},
                               {.name = "sample_volume",
                                .unit = "mL",
                                .asked = "volume of the sample",
                                .carries = true,
                                .runs = SAMPLES,
                                .above = "0"},
                               {.name = "blank_volume",
                                .unit = "mL",
                                .asked = "titrant used by the blank",
                                .fallback = "0",
                                .once = true,
                                .runs = SAMPLES},
                               BENCH_PARAMETER,
                               BENCH_TEXTS},
                  .arguments = 9},
        .work = work_residual,
        .parameter = "TRC",
    },
    {
        .sheet = {.name = "ph-calibration",
                  .title = "Calibration of a pH meter",
                  .run_name = "buffer",
                  .gives = "a record with its checks",
                  .source = "Standard Methods 4500-H+ B",
                  .record = true,
                  .pointless = true,
                  .runs = SAMPLES,
                  .argument = {{.name = "buffer",
                                .unit = "pH",
                                .asked = "pH of the buffer",
                                .carries = true,
                                .runs = SAMPLES,
                                .at_least = "0",
                                .at_most = "14"},
                               {.name = "reading",
                                .unit = "pH",
                                .asked = "what the meter reads",
                                .runs = SAMPLES,
                                .at_least = "0",
                                .at_most = "14"},
                               {.name = "temperature",
                                .unit = "degC",
                                .asked = "temperature of the buffer",
                                .optional = true,
                                .runs = SAMPLES,
                                .at_least = "0",
                                .at_most = "50"},
                               {.name = "slope",
                                .unit = "%",
                                .asked = "slope the meter tells",
                                .optional = true,
                                .once = true,
                                .runs = SAMPLES,
                                .above = "0"},
                               BENCH_TEXTS},
                  .arguments = 8},
        .work = work_ph,
    },
    {
        .sheet = {.name = "do-calibration",
                  .title = "Calibration of an oxygen meter in saturated air",
                  .run_name = "reading",
                  .gives = "a record with its checks",
                  .source = "Benson and Krause 1984; Standard Methods 4500-O, from memory",
                  .record = true,
                  .pointless = true,
                  .runs = SAMPLES,
                  .argument = {{.name = "reading",
                                .unit = "mg/L",
                                .asked = "what the meter reads",
                                .runs = SAMPLES,
                                .at_least = "0"},
                               {.name = "temperature",
                                .unit = "degC",
                                .asked = "temperature",
                                .runs = SAMPLES,
                                .at_least = "0",
                                .at_most = "40"},
                               {.name = "pressure",
                                .unit = "kPa",
                                .asked = "pressure of the air at the place itself",
                                .fallback = "101.325",
                                .carries = true,
                                .runs = SAMPLES,
                                .at_least = "50",
                                .at_most = "110"},
                               {.name = "salinity",
                                .unit = "1",
                                .asked = "grams of salt in a kilogram",
                                .fallback = "0",
                                .carries = true,
                                .runs = SAMPLES,
                                .at_least = "0",
                                .at_most = "40"},
                               BENCH_TEXTS},
                  .arguments = 8},
        .work = work_oxygen,
    },
};

const struct bench_part bench_meters = {entries, NELEM(entries)};
