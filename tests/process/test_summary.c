/* Days gathered by weekday or month, and a month that gives back the SRT it was made with. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "process/small.h"

/* The example of the NIST/SEMATECH e-Handbook of Statistical Methods, 7.2.6.2 (from memory): its
 * 90th percentile is 95.1981 by p(N + 1), and 95.1957 by 1 + p(N - 1). */
static const char *const ranked[] = {"95.0610", "95.0925", "95.1065", "95.1195",
                                     "95.1442", "95.1567", "95.1591", "95.1682",
                                     "95.1772", "95.1937", "95.1959", "95.1990"};

static void percentiles_are_those_of_the_named_method(void **state)
{
    (void)state;
    struct arena *a = arena_new();
    const struct fraction *x[NELEM(ranked)];
    static const struct {
        int percent, rule;
        const char *value;
    } expected[] = {
        {90, PERCENTILE_WEIBULL, "95.1981"},      {90, PERCENTILE_LINEAR, "95.1957"},
        {90, PERCENTILE_NEAREST_RANK, "95.1959"}, /* the 11th, ceil(10.8) */
        {50, PERCENTILE_NEAREST_RANK, "95.1567"}, /* the 6th */
        {50, PERCENTILE_LINEAR, "95.1579"},       /* between the 6th and 7th */
        {100, PERCENTILE_WEIBULL, "95.1990"},     /* held inside the ranks there are */
        {0, PERCENTILE_LINEAR, "95.0610"},
    };
    for (size_t i = 0; i < NELEM(ranked); i++)
        x[i] = fraction_parse(a, ranked[i]);
    for (size_t i = 0; i < NELEM(expected); i++)
        assert_string_equal(fraction_print(a,
                                           process_percentile(a, x, NELEM(x), expected[i].percent,
                                                              expected[i].rule),
                                           4, ROUND_HALF_EVEN),
                            expected[i].value);
    arena_free(a);
}

/* Figures of 14 days from Saturday 2025-03-01, worth 1, 2, 3 ..., the last without a value. */
static void days_are_gathered_by_weekday_and_a_day_without_a_figure_counts_nowhere(void **state)
{
    (void)state;
    struct arena *a = arena_new();
    struct process_figure f[28];
    for (int i = 0; i < 28; i++)
        f[i] = (struct process_figure){.from = small_day("2025-03-01") + i / 2,
                                       .to = small_day("2025-03-01") + i / 2,
                                       .name = i % 2 ? "b" : "a",
                                       .at = "X",
                                       .parameter = "",
                                       .value = fraction_from_int(a, i / 2 + 1)};
    f[26].value = NULL;
    struct process_summary *s;
    size_t count;
    process_summarize(a, f, 28, GROUP_WEEKDAY, PERCENTILE_NEAREST_RANK, &s, &count);
    assert_int_equal(count, 14);
    assert_string_equal(s[0].figure->name, "a");
    assert_int_equal(s[0].group, SUNDAY);
    assert_int_equal(s[0].count, 2); /* the 2nd and the 9th: 2 and 9 */
    assert_string_equal(fraction_print(a, s[0].mean, 1, ROUND_HALF_EVEN), "5.5");
    assert_string_equal(fraction_print(a, s[0].least, 0, ROUND_HALF_EVEN), "2");
    assert_string_equal(fraction_print(a, s[0].most, 0, ROUND_HALF_EVEN), "9");
    assert_string_equal(fraction_print(a, s[0].percentile[2], 0, ROUND_HALF_EVEN), "9");
    assert_int_equal(s[5].group, FRIDAY);
    assert_int_equal(s[5].count, 1); /* the 14th has no value */
    assert_string_equal(s[7].figure->name, "b");
    process_summarize(a, f, 28, GROUP_MONTH, PERCENTILE_NEAREST_RANK, &s, &count);
    assert_int_equal(count, 2);
    assert_int_equal(s[0].group, 3);
    assert_int_equal(s[0].count, 13);
    arena_free(a);
}

static const struct small_row works[] = {
    {PLANT_FIELDS, "name,Steady Works"},
    {PLANT_POINTS, "AER,Aeration,aeration,"},
    {PLANT_POINTS, "WAS,Waste,waste-sludge,"},
    {PLANT_POINTS, "EFF,Effluent,effluent,001"},
    {PLANT_PARAMETERS, "FLOW,Flow,MGD,6,mean,arithmetic,,,,,,"},
    {PLANT_PARAMETERS, "TSS,TSS,mg/L,1,mean,arithmetic,,,,,,"},
    {PLANT_PARAMETERS, "MLSS,MLSS,mg/L,0,mean,arithmetic,,,,,,"},
    {PLANT_BASINS, "AB,aeration,AER,1,MG,,,,,,"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,monthly-average,max,30,mg/L"},
};

/* A tenth of the solids leaves each day: 2 MGD of 10 mg/L over the weir, the rest wasted at 8000
 * mg/L. What the month gives back may differ by the meter's last digit alone: 0.000001 MGD of some
 * 0.03, which is 0.01 %. */
static void a_month_made_with_an_srt_gives_it_back(void **state)
{
    (void)state;
    struct arena *a = arena_new();
    struct small_reading r[31 * 5];
    size_t n = 0;
    for (int d = 0; d < 31; d++) {
        long mlss = 2500 + (d * 37 % 11 - 5) * 40;
        long waste = (mlss * 1000 - 200000) / 80; /* millionths of a MGD: (mlss / 10 - 20) / 8000 */
        const char *day = arena_print(a, "2025-03-%02d", d + 1);
        r[n++] = (struct small_reading){day, "AER", "MLSS", arena_print(a, "%ld", mlss)};
        r[n++] = (struct small_reading){day, "WAS", "FLOW", arena_print(a, "0.%06ld", waste)};
        r[n++] = (struct small_reading){day, "WAS", "TSS", "8000"};
        r[n++] = (struct small_reading){day, "EFF", "FLOW", "2.0"};
        r[n++] = (struct small_reading){day, "EFF", "TSS", "10"};
    }
    struct plant *p = small_plant(a, works, NELEM(works));
    struct frame *f = small_frame(a, p, "2025-03-01", "2025-03-31", r, n);
    for (int smooth = 1; smooth <= 7; smooth += 6) {
        struct process_options o = {.from = small_day("2025-03-01"),
                                    .to = small_day("2025-03-31"),
                                    .step = STEP_MONTH,
                                    .smooth = smooth};
        struct process_figure *figures;
        size_t count;
        struct fault fault = {.set = false};
        assert_int_equal(process_table(a, f, &o, &figures, &count, &fault), OK);
        const struct process_figure *srt =
            small_figure(figures, count, "2025-03-01", "solids-retention-time", "plant", "");
        assert_non_null(srt);
        assert_int_equal(srt->count, 31);
        assert_true(fraction_compare(srt->least, fraction_parse(a, "9.999")) > 0);
        assert_true(fraction_compare(srt->most, fraction_parse(a, "10.001")) < 0);
    }
    arena_free(a);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(percentiles_are_those_of_the_named_method),
        cmocka_unit_test(days_are_gathered_by_weekday_and_a_day_without_a_figure_counts_nowhere),
        cmocka_unit_test(a_month_made_with_an_srt_gives_it_back),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
