/* The process table on a small plant whose figures are worked by hand. The formula behind a figure
 * and its source stand in the catalogue; the numbers beside each check put the readings into it. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <string.h>

#include "process/small.h"

static const struct small_row works[] = {
    {PLANT_FIELDS, "name,Small Works"},
    {PLANT_POINTS, "INF,Influent,influent,"},
    {PLANT_POINTS, "PE,Primary effluent,primary-effluent,"},
    {PLANT_POINTS, "AER,Aeration,aeration,"},
    {PLANT_POINTS, "RAS,Return,return-sludge,"},
    {PLANT_POINTS, "WAS,Waste,waste-sludge,"},
    {PLANT_POINTS, "EFF,Effluent,effluent,001"},
    {PLANT_POINTS, "CL2,Chlorine feed,chemical,"},
    {PLANT_POINTS, "SBS,Bisulfite for dechlorination,chemical,"},
    {PLANT_PARAMETERS, "FLOW,Flow,MGD,3,mean,arithmetic,,,,,,"},
    {PLANT_PARAMETERS, "BOD5,BOD,mg/L,1,mean,arithmetic,,,,,,"},
    {PLANT_PARAMETERS, "TSS,TSS,mg/L,1,mean,arithmetic,,,,,,"},
    {PLANT_PARAMETERS, "DO,DO,mg/L,1,mean,arithmetic,,,,,,"},
    {PLANT_PARAMETERS, "CU,Copper,ug/L,1,mean,arithmetic,,,,,,"},
    {PLANT_PARAMETERS, "MLSS,MLSS,mg/L,0,mean,arithmetic,,,,,,"},
    {PLANT_PARAMETERS, "MLVSS,MLVSS,mg/L,0,mean,arithmetic,,,,,,"},
    {PLANT_PARAMETERS, "SV30,Settled,mL/L,0,mean,arithmetic,,,,,,"},
    {PLANT_PARAMETERS, "FEED,Feed,lb/d,1,mean,arithmetic,,,,,,"},
    {PLANT_BASINS, "PC1,primary-clarifier,PE,0.1,MG,2000,ft2,150,ft,,"},
    {PLANT_BASINS, "PC2,primary-clarifier,PE,0.1,MG,2000,ft2,150,ft,,"},
    {PLANT_BASINS, "AB1,aeration,AER,0.5,MG,,,,,,"},
    {PLANT_BASINS, "AB2,aeration,AER,0.5,MG,,,,,,2025-03-03"},
    {PLANT_BASINS, "AB2,aeration,AER,0.5,MG,,,,,2025-03-05,"},
    {PLANT_BASINS, "SC1,secondary-clarifier,EFF,0.25,MG,2500,ft2,180,ft,,"},
    {PLANT_BASINS, "CC1,contact,EFF,0.05,MG,,,,,,"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,monthly-average,max,30,mg/L"},
};

/* The 1st is whole; the 2nd lacks MLSS; on the 3rd nothing is wasted and less leaves than can be
 * measured; on the 4th AB2 is out of service. */
static const struct small_reading readings[] = {
    {"2025-03-01", "INF", "FLOW", "2.0"},  {"2025-03-01", "INF", "BOD5", "200"},
    {"2025-03-01", "INF", "TSS", "220"},   {"2025-03-01", "INF", "DO", "1.0"},
    {"2025-03-01", "PE", "BOD5", "140"},   {"2025-03-01", "PE", "TSS", "90"},
    {"2025-03-01", "AER", "MLSS", "2500"}, {"2025-03-01", "AER", "MLVSS", "2000"},
    {"2025-03-01", "AER", "SV30", "250"},  {"2025-03-01", "RAS", "FLOW", "1.0"},
    {"2025-03-01", "RAS", "TSS", "7500"},  {"2025-03-01", "WAS", "FLOW", "0.03"},
    {"2025-03-01", "EFF", "FLOW", "1.9"},  {"2025-03-01", "EFF", "TSS", "11"},
    {"2025-03-01", "EFF", "CU", "100"},    {"2025-03-01", "CL2", "FEED", "79.23"},
    {"2025-03-01", "SBS", "FEED", "20"},

    {"2025-03-02", "INF", "FLOW", "2.0"},  {"2025-03-02", "AER", "SV30", "260"},
    {"2025-03-02", "INF", "BOD5", "E"},    {"2025-03-02", "WAS", "FLOW", "0.03"},
    {"2025-03-02", "RAS", "TSS", "7500"},  {"2025-03-02", "EFF", "FLOW", "1.9"},
    {"2025-03-02", "EFF", "TSS", "11"},

    {"2025-03-03", "INF", "FLOW", "2.0"},  {"2025-03-03", "AER", "MLSS", "2600"},
    {"2025-03-03", "WAS", "FLOW", "0"},    {"2025-03-03", "EFF", "FLOW", "1.9"},
    {"2025-03-03", "EFF", "TSS", "<5"},    {"2025-03-03", "PE", "TSS", "90"},

    {"2025-03-04", "INF", "FLOW", "2.0"},  {"2025-03-04", "AER", "MLSS", "2600"},
    {"2025-03-04", "RAS", "FLOW", "1.0"},
};

struct worked {
    struct arena *arena;
    struct process_figure *figures;
    size_t count;
};

static struct worked work(const struct small_row *rows, size_t row_count, const char *from,
                          const char *to, enum process_step step, int smooth)
{
    struct worked w = {.arena = arena_new()};
    struct plant *p = small_plant(w.arena, rows, row_count);
    struct process_options o = {
        .from = small_day(from), .to = small_day(to), .step = step, .smooth = smooth};
    struct frame *f =
        small_frame(w.arena, p, "2025-02-20", "2025-03-31", readings, NELEM(readings));
    struct fault fault = {.set = false};
    if (process_table(w.arena, f, &o, &w.figures, &w.count, &fault) != OK)
        fail_msg("%s", fault.text);
    return w;
}

static struct worked work_days(const char *from, const char *to, int smooth)
{
    return work(works, NELEM(works), from, to, STEP_DAY, smooth);
}

/* Compares with an exact fraction. */
static void check(const struct worked *w, const char *from, const char *name, const char *at,
                  const char *parameter, const char *value, const char *unit)
{
    const struct process_figure *f = small_figure(w->figures, w->count, from, name, at, parameter);
    if (f == NULL)
        fail_msg("no %s at %s on %s", name, at, from);
    if (f->value == NULL)
        fail_msg("%s at %s on %s has no value: %s", name, at, from, f->note);
    if (fraction_compare(f->value, fraction_parse(w->arena, value)) != 0)
        fail_msg("%s at %s on %s is %s, not %s; source: %s", name, at, from,
                 fraction_print(w->arena, f->value, 9, ROUND_HALF_EVEN), value,
                 formula_find(name)->source);
    assert_string_equal(f->unit, unit);
}

static const char *note_of(const struct worked *w, const char *from, const char *name,
                           const char *at, const char *parameter)
{
    const struct process_figure *f = small_figure(w->figures, w->count, from, name, at, parameter);
    if (f == NULL)
        fail_msg("no %s at %s on %s", name, at, from);
    return f->note;
}

static void a_whole_day_is_worked_as_by_hand(void **state)
{
    (void)state;
    struct worked w = work_days("2025-03-01", "2025-03-01", 1);
    static const struct {
        const char *name, *at, *parameter, *value, *unit;
    } expected[] = {
        {"mass-load", "INF", "BOD5", "3336", "lb/d"},       /* 2.0 x 200 x 8.34 */
        {"mass-load", "PE", "TSS", "1501.2", "lb/d"},       /* 2.0 x 90 x 8.34, flow of INF */
        {"mass-load", "EFF", "TSS", "174.306", "lb/d"},     /* 1.9 x 11 x 8.34 */
        {"mass-load", "EFF", "CU", "1.5846", "lb/d"},       /* 1.9 x 0.1 x 8.34 */
        {"percent-removal", "INF>PE", "BOD5", "30", "%"},   /* (200 - 140) / 200 */
        {"percent-removal", "INF>EFF", "TSS", "95", "%"},   /* (220 - 11) / 220 */
        {"percent-removal", "PE>EFF", "TSS", "790/9", "%"}, /* (90 - 11) / 90 */
        {"sludge-volume-index", "AER", "", "100", "mL/g"},  /* 250 x 1000 / 2500 */
        {"solids-inventory", "AB1", "", "10425", "lb"},     /* 0.5 x 2500 x 8.34 */
        {"solids-inventory", "plant", "", "20850", "lb"},   /* two basins */
        {"food-to-microorganism", "plant", "BOD5", "0.14", "1/d"}, /* 2 x 140 / (1 x 2000) */
        /* 2 x 140 x 8.34 lb/d over 231000 / 1728 kft3, which is 1 MG */
        {"volumetric-organic-loading", "plant", "BOD5", "40352256/2310000", "lb/d/kft3"},
        {"solids-retention-time-wasting-only", "plant", "", "100/9", "d"}, /* 2500 / 225 */
        {"solids-retention-time", "plant", "", "25000/2459", "d"},         /* 2500 / (225 + 20.9) */
        {"mean-cell-residence-time", "plant", "", "31250/2459", "d"},      /* 1.25 x 2500 / 245.9 */
        {"sludge-age", "plant", "", "125/9", "d"},                         /* 2500 / (2.0 x 90) */
        {"detention-time", "AB1", "", "12", "hr"},                         /* 0.5 / 1.0 x 24 */
        {"detention-time", "PC2", "", "2.4", "hr"},                        /* 0.1 / 1.0 x 24 */
        {"surface-overflow-rate", "PC1", "", "500", "gpd/ft2"},  /* 1.0 x 1000000 / 2000 */
        {"weir-overflow-rate", "PC1", "", "20000/3", "gpd/ft"},  /* 1.0 x 1000000 / 150 */
        {"solids-loading-rate", "SC1", "", "25.02", "lb/d/ft2"}, /* 3.0 x 2500 x 8.34 / 2500 */
        {"return-ratio", "RAS", "", "50", "%"},                  /* 1.0 / 2.0 */
        {"chlorine-dose", "EFF", "", "5", "mg/L"},               /* 79.23 / (1.9 x 8.34) */
        {"contact-time", "CC1", "", "720/19", "min"},            /* 0.05 / 1.9 x 1440 */
    };
    for (size_t i = 0; i < NELEM(expected); i++)
        check(&w, "2025-03-01", expected[i].name, expected[i].at, expected[i].parameter,
              expected[i].value, expected[i].unit);
    arena_free(w.arena);
}

static void loads_say_whose_flow_they_take(void **state)
{
    (void)state;
    struct worked w = work_days("2025-03-01", "2025-03-01", 1);
    assert_string_equal(note_of(&w, "2025-03-01", "mass-load", "PE", "TSS"),
                        "with the flow of INF");
    assert_string_equal(note_of(&w, "2025-03-01", "mass-load", "EFF", "TSS"), "");
    arena_free(w.arena);
}

static void what_is_never_measured_has_no_row(void **state)
{
    (void)state;
    struct worked w = work_days("2025-03-01", "2025-03-04", 1);
    assert_null(small_figure(w.figures, w.count, "2025-03-01", "mass-load", "EFF", "BOD5"));
    assert_null(
        small_figure(w.figures, w.count, "2025-03-01", "percent-removal", "INF>EFF", "BOD5"));
    assert_null(small_figure(w.figures, w.count, "2025-03-01", "mass-load", "INF", "DO"));
    assert_null(small_figure(w.figures, w.count, "2025-03-01", "chlorine-dose", "SBS", NULL));
    arena_free(w.arena);
}

static void a_missing_reading_is_named_and_never_a_zero(void **state)
{
    (void)state;
    struct worked w = work_days("2025-03-02", "2025-03-02", 1);
    static const struct {
        const char *name, *at, *parameter, *note;
    } expected[] = {
        {"sludge-volume-index", "AER", "", "no MLSS at AER on 2025-03-02"},
        {"solids-inventory", "plant", "", "no MLSS at AER on 2025-03-02"},
        {"food-to-microorganism", "plant", "BOD5", "no BOD5 at PE on 2025-03-02"},
        {"return-ratio", "RAS", "", "no FLOW at RAS on 2025-03-02"},
        {"percent-removal", "INF>EFF", "TSS", "no TSS at INF on 2025-03-02"},
        {"chlorine-dose", "EFF", "", "no FEED at CL2 on 2025-03-02"},
    };
    for (size_t i = 0; i < NELEM(expected); i++) {
        const struct process_figure *f =
            small_figure(w.figures, w.count, "2025-03-02", expected[i].name, expected[i].at,
                         expected[i].parameter);
        assert_non_null(f);
        assert_null(f->value);
        assert_int_equal(f->count, 0);
        assert_string_equal(f->note, expected[i].note);
    }
    /* A lost sample says so. */
    assert_non_null(strstr(note_of(&w, "2025-03-02", "mass-load", "INF", "BOD5"),
                           "no BOD5 at INF on 2025-03-02: "));
    arena_free(w.arena);
}

static void nothing_wasted_is_a_zero_and_no_retention_time(void **state)
{
    (void)state;
    struct worked w = work_days("2025-03-03", "2025-03-03", 1);
    const struct process_figure *f = small_figure(
        w.figures, w.count, "2025-03-03", "solids-retention-time-wasting-only", "plant", "");
    assert_non_null(f);
    assert_null(f->value);
    assert_non_null(strstr(f->note, "waste_flow"));
    arena_free(w.arena);
}

static void a_less_than_is_told_and_counts_by_the_rule(void **state)
{
    (void)state;
    struct worked w = work_days("2025-03-03", "2025-03-03", 1);
    /* Rule nondetect zero: 1.9 x 0 x 8.34. */
    check(&w, "2025-03-03", "mass-load", "EFF", "TSS", "0", "lb/d");
    assert_string_equal(note_of(&w, "2025-03-03", "mass-load", "EFF", "TSS"), "with a less-than");
    arena_free(w.arena);
}

static void a_basin_out_of_service_has_no_row_and_counts_nowhere(void **state)
{
    (void)state;
    struct worked w = work_days("2025-03-03", "2025-03-05", 1);
    check(&w, "2025-03-03", "detention-time", "AB2", "", "12", "hr"); /* 0.5 / 1.0 x 24 */
    assert_string_equal(note_of(&w, "2025-03-03", "detention-time", "AB2", ""),
                        "return flow not counted; flow split evenly over 2 in service");
    assert_null(small_figure(w.figures, w.count, "2025-03-04", "detention-time", "AB2", NULL));
    assert_null(small_figure(w.figures, w.count, "2025-03-04", "solids-inventory", "AB2", NULL));
    check(&w, "2025-03-04", "detention-time", "AB1", "", "6", "hr");         /* 0.5 / 2.0 x 24 */
    check(&w, "2025-03-04", "solids-inventory", "plant", "", "10842", "lb"); /* 0.5 x 2600 x 8.34 */
    assert_non_null(small_figure(w.figures, w.count, "2025-03-05", "detention-time", "AB2", NULL));
    arena_free(w.arena);
}

static void retention_times_are_smoothed_over_the_days_that_have_readings(void **state)
{
    (void)state;
    struct worked w = work_days("2025-03-03", "2025-03-03", 3);
    /* Solids held: (2500 + 2600) / 2 = 2550, of the 1st and 3rd; wasted: (225 + 225 + 0) / 3 = 150.
     */
    check(&w, "2025-03-03", "solids-retention-time-wasting-only", "plant", "", "17", "d");
    assert_string_equal(
        note_of(&w, "2025-03-03", "solids-retention-time-wasting-only", "plant", ""),
        "means of 3 days, one part of only 2");
    /* With (20.9 + 20.9 + 0) / 3 over the weir: 2550 / (150 + 41.8 / 3) = 76500 / 4918. */
    check(&w, "2025-03-03", "solids-retention-time", "plant", "", "76500/4918", "d");
    /* Nothing else is smoothed: 1.0 x 2600 x 8.34. */
    check(&w, "2025-03-03", "solids-inventory", "plant", "", "21684", "lb");
    arena_free(w.arena);
}

static void a_longer_step_gives_mean_least_and_most(void **state)
{
    (void)state;
    struct worked w = work(works, NELEM(works), "2025-03-01", "2025-03-31", STEP_MONTH, 1);
    const struct process_figure *f =
        small_figure(w.figures, w.count, "2025-03-01", "solids-inventory", "plant", "");
    assert_non_null(f);
    assert_int_equal(f->to, small_day("2025-03-31"));
    assert_int_equal(f->count, 3);
    /* 20850, 21684 and 10842 lb */
    assert_int_equal(fraction_compare(f->least, fraction_from_int(w.arena, 10842)), 0);
    assert_int_equal(fraction_compare(f->most, fraction_from_int(w.arena, 21684)), 0);
    assert_int_equal(fraction_compare(f->value, fraction_from_int(w.arena, 17792)), 0);
    assert_string_equal(f->note, "3 of 31 days; no MLSS at AER on 2025-03-02");
    arena_free(w.arena);
}

static void weeks_start_by_the_plants_rule(void **state)
{
    (void)state;
    struct small_row rows[NELEM(works) + 1];
    memcpy(rows, works, sizeof works);
    rows[NELEM(works)] = (struct small_row){PLANT_FIELDS, "week_starts,tuesday"};
    struct worked w = work(rows, NELEM(rows), "2025-03-01", "2025-03-14", STEP_WEEK, 1);
    /* 1 March 2025 is a Saturday, 4 March a Tuesday. */
    const struct process_figure *f =
        small_figure(w.figures, w.count, "2025-03-01", "return-ratio", "RAS", "");
    assert_non_null(f);
    assert_int_equal(f->to, small_day("2025-03-03"));
    f = small_figure(w.figures, w.count, "2025-03-04", "return-ratio", "RAS", "");
    assert_non_null(f);
    assert_int_equal(f->to, small_day("2025-03-10"));
    assert_non_null(small_figure(w.figures, w.count, "2025-03-11", "return-ratio", "RAS", ""));
    arena_free(w.arena);
}

static void a_metric_plant_reads_the_same_in_its_units(void **state)
{
    (void)state;
    struct small_row rows[NELEM(works) + 1];
    memcpy(rows, works, sizeof works);
    rows[NELEM(works)] = (struct small_row){PLANT_FIELDS, "units,metric"};
    struct worked w = work(rows, NELEM(rows), "2025-03-01", "2025-03-01", STEP_DAY, 1);
    /* Exact: 2.0 x 3785.411784 m3/d x 200 mg/L / 1000. */
    check(&w, "2025-03-01", "mass-load", "INF", "BOD5", "1514.1647136", "kg/d");
    check(&w, "2025-03-01", "solids-inventory", "AB1", "", "4731.76473", "kg");
    check(&w, "2025-03-01", "detention-time", "AB1", "", "12", "hr");
    check(&w, "2025-03-01", "percent-removal", "INF>EFF", "TSS", "95", "%");
    /* 500 gpd/ft2 x 9779/240000 (exact: foot, gallon). */
    check(&w, "2025-03-01", "surface-overflow-rate", "PC1", "", "4889500/240000", "m3/m2/d");
    arena_free(w.arena);
}

static void figures_stand_in_order_of_day_and_catalogue(void **state)
{
    (void)state;
    struct worked w = work_days("2025-03-01", "2025-03-03", 2);
    size_t last = 0;
    for (size_t i = 1; i < w.count; i++) {
        size_t here = 0;
        while (!text_equal(formula_at(here)->name, w.figures[i].name))
            here++;
        assert_true(w.figures[i - 1].from <= w.figures[i].from);
        assert_true(w.figures[i - 1].from < w.figures[i].from || last <= here);
        last = here;
    }
    arena_free(w.arena);
}

static void the_plants_own_figures_are_worked(void **state)
{
    (void)state;
    struct small_row rows[NELEM(works) + 6];
    memcpy(rows, works, sizeof works);
    size_t n = NELEM(works);
    rows[n++] =
        (struct small_row){PLANT_PROCESS, "bisulfite-dose,EFF,,chlorine-dose,feed,SBS FEED,"};
    rows[n++] =
        (struct small_row){PLANT_PROCESS, "bisulfite-dose,EFF,,chlorine-dose,flow,EFF FLOW,"};
    rows[n++] =
        (struct small_row){PLANT_PROCESS, "bisulfite-dose,EFF,,chlorine-dose,strength,40,%"};
    /* Stands in place of the line found by roles. */
    rows[n++] = (struct small_row){PLANT_PROCESS,
                                   "detention-time,CC1,,detention-time,volume,basin CC1 volume,"};
    rows[n++] =
        (struct small_row){PLANT_PROCESS, "detention-time,CC1,,detention-time,flow,694.444444,gpm"};
    rows[n++] = (struct small_row){PLANT_FIELDS, "load_factor,8.345404"};
    struct worked w = work(rows, n, "2025-03-01", "2025-03-02", STEP_DAY, 1);
    const struct process_figure *f =
        small_figure(w.figures, w.count, "2025-03-01", "bisulfite-dose", "EFF", "");
    assert_non_null(f);
    /* 20 x 40 / 100 / (1.9 x 8.345404): the plant's load factor. */
    assert_int_equal(fraction_compare(f->value, fraction_parse(w.arena, "80000000/158562676")), 0);
    assert_string_equal(note_of(&w, "2025-03-02", "bisulfite-dose", "EFF", ""),
                        "no FEED at SBS on 2025-03-02");
    f = small_figure(w.figures, w.count, "2025-03-01", "detention-time", "CC1", "");
    assert_non_null(f);
    /* 0.05 MG at 694.444444 gpm, which is 0.99999999936 MGD, for 24 hr a day. */
    assert_int_equal(
        fraction_compare(f->value, fraction_parse(w.arena, "120000000000/99999999936")), 0);
    /* 2.0 x 200 x 8.345404: the plant's own load factor. */
    check(&w, "2025-03-01", "mass-load", "INF", "BOD5", "3338.1616", "lb/d");
    arena_free(w.arena);
}

static void the_table_asks_for_the_days_it_looks_back_on(void **state)
{
    (void)state;
    struct process_options o = {.from = small_day("2025-03-31"), .smooth = 1};
    assert_int_equal(process_reach(&o), small_day("2025-03-01"));
    o.smooth = 60;
    assert_int_equal(process_reach(&o), small_day("2025-03-31") - 59);
}

static void smoothing_over_no_days_is_refused(void **state)
{
    (void)state;
    struct arena *a = arena_new();
    struct plant *p = small_plant(a, works, NELEM(works));
    struct frame *f = small_frame(a, p, "2025-03-01", "2025-03-01", readings, 1);
    struct process_options o = {.from = small_day("2025-03-01"), .to = small_day("2025-03-01")};
    struct process_figure *figures;
    size_t count;
    struct fault fault = {.set = false};
    assert_int_equal(process_table(a, f, &o, &figures, &count, &fault), FAULT);
    assert_int_equal(fault.kind, FAULT_USAGE);
    arena_free(a);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(a_whole_day_is_worked_as_by_hand),
        cmocka_unit_test(loads_say_whose_flow_they_take),
        cmocka_unit_test(what_is_never_measured_has_no_row),
        cmocka_unit_test(a_missing_reading_is_named_and_never_a_zero),
        cmocka_unit_test(nothing_wasted_is_a_zero_and_no_retention_time),
        cmocka_unit_test(a_less_than_is_told_and_counts_by_the_rule),
        cmocka_unit_test(a_basin_out_of_service_has_no_row_and_counts_nowhere),
        cmocka_unit_test(retention_times_are_smoothed_over_the_days_that_have_readings),
        cmocka_unit_test(a_longer_step_gives_mean_least_and_most),
        cmocka_unit_test(weeks_start_by_the_plants_rule),
        cmocka_unit_test(a_metric_plant_reads_the_same_in_its_units),
        cmocka_unit_test(figures_stand_in_order_of_day_and_catalogue),
        cmocka_unit_test(the_plants_own_figures_are_worked),
        cmocka_unit_test(the_table_asks_for_the_days_it_looks_back_on),
        cmocka_unit_test(smoothing_over_no_days_is_refused),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
