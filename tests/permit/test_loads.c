/* Loads, removals, totals and days without discharge. R18 to R23, R34, R39 to R44 of
 * weirbook-rules(7). */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "rows.h"

#include "base/poison.h"

#define LOAD(statistic, unit) "001,EFF,BOD5,load," statistic ",max,50.00," unit
#define REMOVAL               "001,EFF,BOD5,removal,monthly-average,min,80.0,%"

static void loads_need_flow_and_concentration_of_the_day(void **state)
{
    (void)state;
    static const char readings[] = "EFF BOD5 mg/L 4=8 11=12 18=100\nEFF FLOW MGD 4=0.50 11=0.70 "
                                   "25=0.60";
    static const struct month_case cases[] = {
        {"40 CFR 122.2: the mean of the days' masses; no flow, no load", "2025-03", "",
         LOAD("monthly-average", "lb/d"), readings, "03-01..03-31 51.71 exceeded 2"},
        {"R19: mean flow times mean concentration; common practice, no source", "2025-03",
         "load_average,product", LOAD("monthly-average", "lb/d"), readings,
         "03-01..03-31 200.16 exceeded 2"},
        {"load_factor 8.3454; common practice, no source", "2025-03", "load_factor,8.3454",
         LOAD("daily", "lb/d"), "EFF BOD5 mg/L 4=8\nEFF FLOW MGD 4=0.50",
         "03-01..03-31 @03-04 33.38 met x0 1"},
        {"unit identity: m3/d x mg/L / 1000 is kg/d", "2025-03", "", LOAD("daily", "kg/d"),
         "EFF BOD5 mg/L 4=8\nEFF FLOW m3/d 4=5000", "03-01..03-31 @03-04 40.00 met x0 1"},
        {"R42: a limit in kg from MGD and ug/L, exactly; 1 MGD is 3785.411784 m3/d", "2025-03", "",
         LOAD("daily", "kg/d"), "EFF BOD5 ug/L 4=8000\nEFF FLOW MGD 4=1",
         "03-01..03-31 @03-04 30.28 met x0 1"},
        {"R42: short tons of 2000 lb", "2025-03", "", "001,EFF,BOD5,load,daily,max,0.0500,ton/d",
         "EFF BOD5 mg/L 4=10\nEFF FLOW MGD 4=1", "03-01..03-31 @03-04 0.0417 met x0 1"},
        {"R20, R30: less-thans in loads, R13's number times flow and factor", "2025-03", "",
         LOAD("monthly-average", "lb/d"), "EFF BOD5 mg/L 4=<2 11=<2\nEFF FLOW MGD 4=1 11=2",
         "03-01..03-31 <33.36 met 2"},
        {"R28: the median procedure has nothing to rank in loads", "2025-03", "nondetect,median",
         LOAD("monthly-average", "lb/d"), "EFF BOD5 mg/L 4=<2 11=1 18=1\nEFF FLOW MGD 1..31=1",
         "03-01..03-31 <11.12 met 3"},
        {"R28: nor has a percentile of loads: a less-than stands there as its number", "2025-03",
         "nondetect,median", LOAD("percentile-50", "lb/d"),
         "EFF BOD5 mg/L 4=<4 11=1 18=2\nEFF FLOW MGD 1..31=1", "03-01..03-31 16.68 met 3"},
        {"R40: the only parameter with a flow unit", "2025-03", "", LOAD("daily", "lb/d"),
         "EFF BOD5 mg/L 4=1\nEFF GATE MGD 4=1", "03-01..03-31 @03-04 8.34 met x0 1"},
        {"R40, G12: else the point of the rule flow", "2025-03", "flow,INF", LOAD("daily", "lb/d"),
         "EFF BOD5 mg/L 4=1\nINF FLOW MGD 4=2", "03-01..03-31 @03-04 16.68 met x0 1"},
        {"R40: chosen for the whole row, never day by day", "2025-03", "flow,INF",
         LOAD("daily", "lb/d"), "EFF BOD5 mg/L 4=1 5=1\nINF FLOW MGD 4=2\nEFF FLOW MGD 5=3",
         "03-01..03-31 @03-05 25.02 met x0 1"},
        {"no flow anywhere", "2025-03", "", LOAD("daily", "lb/d"), "EFF BOD5 mg/L 4=1",
         "03-01..03-31 - no-data x0 0"},
        {"R43: outfalls add on days that have both", "2025-03", "",
         "001,EFF+EF2,BOD5,load,monthly-average,max,50.00,lb/d",
         "EFF BOD5 mg/L 4=1 11=1\nEFF FLOW MGD 4=1 11=1\nEF2 BOD5 mg/L 4=2\nEF2 FLOW MGD 4=1",
         "03-01..03-31 25.02 met 1"},
        {"R43: a no-discharge day of one adds 0", "2025-03", "",
         "001,EFF+EF2,BOD5,load,monthly-average,max,50.00,lb/d",
         "EFF BOD5 mg/L 4=1 11=1\nEFF FLOW MGD 4=1 11=1\nEF2 BOD5 mg/L 4=2\nEF2 FLOW MGD 4=1 11=0",
         "03-01..03-31 16.68 met 2"},
        {"R43: product of each outfall by itself", "2025-03", "load_average,product",
         "001,EFF+EF2,BOD5,load,monthly-average,max,50.00,lb/d",
         "EFF BOD5 mg/L 4=1\nEFF FLOW MGD 4=1\nEF2 BOD5 mg/L 5=2\nEF2 FLOW MGD 5=1",
         "03-01..03-31 25.02 met 0"},
    };

    check_months(cases, NELEM(cases));
}

static void totals_take_the_unit_without_the_day(void **state)
{
    (void)state;
    static const char readings[] = "EFF BOD5 mg/L 4=8 11=12\nEFF FLOW MGD 4=1 11=1 12=2";
    static const struct month_case cases[] = {
        {"R21: mean daily load times days; common practice, no source", "2025-06", "",
         LOAD("monthly-total", "lb"), readings, "06-01..06-30 2502.00 exceeded 2"},
        {"G8: or the sum of measured loads", "2025-06", "load_total,sum",
         LOAD("monthly-total", "lb"), readings, "06-01..06-30 166.80 exceeded 2"},
        {"R44: product times days", "2025-06", "load_average,product\nload_total,sum",
         LOAD("monthly-total", "lb"), readings, "06-01..06-30 3336.00 exceeded 2"},
        {"R21: flow is the sum of the days, MGD to MG", "2025-06", "",
         "001,EFF,FLOW,flow,monthly-total,report,,MG", readings, "06-01..06-30 4.000 report 3"},
        {"R42: and into m3", "2025-06", "digits,2", "001,EFF,FLOW,flow,monthly-total,report,,m3",
         readings, "06-01..06-30 15141.65 report 3"},
        {"R42: other totals are sums of daily values", "2025-06", "",
         "001,EFF,RAIN,concentration,monthly-total,report,,in",
         "EFF RAIN in 4=0.5 11@08:00=0.25 "
         "11@20:00=0.25",
         "06-01..06-30 1.00 report 2"},
        {"40 CFR 401.17, G22: minutes of excursion", "2025-06", "",
         "001,EFF,EXC,count,monthly-total,max,446,min\n001,EFF,EXC,count,daily,max,60,min",
         "EFF EXC min 4=60 5@08:00=30 5@09:00=31 6=326",
         "06-01..06-30 447 exceeded 3\n06-01..06-30 @06-06 326 exceeded x2 3"},
        {"R21: a year's load, 365 days", "2025-12", "", LOAD("annual-total", "lb"),
         "EFF BOD5 mg/L 2025-02-03=1 2=3\nEFF FLOW MGD 2025-02-03=1 2=1",
         "01-01..12-31 6088.20 exceeded 2"},
        {"R13 of a total: the largest times the days", "2025-06", "", LOAD("monthly-total", "lb"),
         "EFF BOD5 mg/L 4=<1 11=<2\nEFF FLOW MGD 4=1 11=1", "06-01..06-30 <500.40 met 2"},
        {"R13 of a sum: the sum of the numbers", "2025-06", "load_total,sum",
         LOAD("monthly-total", "lb"), "EFF BOD5 mg/L 4=<1 11=<2\nEFF FLOW MGD 4=1 11=1",
         "06-01..06-30 <25.02 met 2"},
    };

    check_months(cases, NELEM(cases));
}

static void removals_by_each_of_the_four_methods(void **state)
{
    (void)state;
    static const char both[] = "INF BOD5 mg/L 4=200 11=100\nEFF BOD5 mg/L 4=20 11=30\n"
                               "EFF FLOW MGD 4=1.0 11=3.0";
    static const char missing[] = "INF BOD5 mg/L 4=200 11=100\nEFF BOD5 mg/L 4=20 11=30 18=40";
    static const struct month_case cases[] = {
        {"40 CFR 133.101(j): averages", "2025-03", "", REMOVAL, both, "03-01..03-31 83.3 met 2"},
        {"paired; common practice, no source", "2025-03", "removal,paired", REMOVAL, both,
         "03-01..03-31 83.3 met 2"},
        {"loads, R18: the effluent's flow serves; common practice, no source", "2025-03",
         "removal,loads", REMOVAL, both, "03-01..03-31 78.0 exceeded 2"},
        {"daily; common practice, no source", "2025-03", "removal,daily", REMOVAL, both,
         "03-01..03-31 80.0 met 2"},
        {"40 CFR 133.101(j): each over its own days", "2025-03", "", REMOVAL, missing,
         "03-01..03-31 80.0 met 3"},
        {"paired: the days with both; R34", "2025-03", "removal,paired", REMOVAL, missing,
         "03-01..03-31 83.3 met 2"},
        {"daily: the days with both; R34", "2025-03", "removal,daily", REMOVAL, missing,
         "03-01..03-31 80.0 met 2"},
        {"a negative removal is printed", "2025-03", "", REMOVAL,
         "INF BOD5 mg/L 4=20\nEFF BOD5 mg/L 4=25", "03-01..03-31 -25.0 exceeded 1"},
        {"nothing is removed from 0", "2025-03", "", REMOVAL,
         "INF BOD5 mg/L 4=0\nEFF BOD5 mg/L 4=2", "03-01..03-31 - no-data 1"},
        {"R41: no sign unless the row sets it", "2025-03", "", REMOVAL,
         "INF BOD5 mg/L 4=200\nEFF BOD5 mg/L 4=<10 11=20", "03-01..03-31 95.0 met 2"},
        {"R41: then a less-than in the effluent gives >", "2025-03", "",
         REMOVAL ",,,,,,,,,,sign=any", "INF BOD5 mg/L 4=200\nEFF BOD5 mg/L 4=<10 11=20",
         "03-01..03-31 >95.0 met 2"},
        {"R41, R13: all less-thans, from the largest of their numbers", "2025-03", "",
         REMOVAL ",,,,,,,,,,sign=any", "INF BOD5 mg/L 4=200\nEFF BOD5 mg/L 4=<10 11=<2",
         "03-01..03-31 >95.0 met 2"},
        {"a daily removal", "2025-03", "", "001,EFF,BOD5,removal,daily,min,80.0,%", both,
         "03-01..03-31 @03-11 70.0 exceeded x1 2"},
    };

    check_months(cases, NELEM(cases));
}

static void days_without_discharge_are_skipped_or_0(void **state)
{
    (void)state;
    static const char flow[] = "001,EFF,FLOW,flow,monthly-average,max,1.5,MGD";
    static const char load[] = "001,EFF,BOD5,load,monthly-average,max,100.0,lb/d";
    static const char readings[] = "EFF FLOW MGD 1..6=2.0 7..10=C\nEFF BOD5 mg/L 2=10 4=10 8=50";
    static const struct month_case cases[] = {
        {"State definitions: zero-discharge days left out of the divisor", "2025-03", "", flow,
         readings, "03-01..03-31 2.0 exceeded 6"},
        {"counted as zero: common practice, no source; R34: no samples", "2025-03",
         "no_discharge,zero", flow, readings, "03-01..03-31 1.2 met 6"},
        {"skip: two loads; the result on a marked day is absent (R39)", "2025-03", "", load,
         readings, "03-01..03-31 166.8 exceeded 2"},
        {"zero: two loads and four zeros", "2025-03", "no_discharge,zero", load, readings,
         "03-01..03-31 55.6 met 2"},
        {"G10: a flow of 0 is the same as C", "2025-03", "", flow, "EFF FLOW MGD 1..6=2.0 7..10=0",
         "03-01..03-31 2.0 exceeded 6"},
        {"R39: every day with an entry", "2025-03", "", load, "EFF FLOW MGD 3=C 9=0",
         "03-01..03-31 - no-discharge 0"},
        {"R39: under zero such a row has the figure 0", "2025-03", "no_discharge,zero", load,
         "EFF FLOW MGD 3=C 9=0", "03-01..03-31 0.0 no-discharge 0"},
        {"R39: there must be one", "2025-03", "", load, "", "03-01..03-31 - no-data 0"},
        {"R23: a code C under any result marks the day", "2025-03", "",
         "001,EFF,BOD5,concentration,monthly-average,max,30,mg/L",
         "EFF BOD5 mg/L 3=10 4=20\nEFF TSS mg/L 4=C", "03-01..03-31 10 met 1"},
        {"R23: concentrations are absent under zero too", "2025-03", "no_discharge,zero",
         "001,EFF,BOD5,concentration,monthly-average,max,30,mg/L", "EFF BOD5 mg/L 3=10 4=C",
         "03-01..03-31 10 met 1"},
        {"a week wholly without discharge", "2023-03", "week_counts_in,days-1-7",
         "001,EFF,BOD5,concentration,weekly-average,max,45,mg/L",
         "EFF FLOW MGD 1..7=0 8=1\nEFF BOD5 mg/L 8=20",
         "03-01..03-07 - no-discharge 0\n03-08..03-14 20 met 1\n03-15..03-21 - no-data 0\n"
         "03-22..03-28 - no-data 0"},
    };

    check_months(cases, NELEM(cases));
}

static void a_register_serves_loads_and_totals(void **state)
{
    (void)state;
    struct made *m = made_plant("2025-03", "",
                                "001,EFF,FLOW,flow,monthly-total,report,,MG\n"
                                "001,EFF,BOD5,load,daily,max,50.00,lb/d\n"
                                "001,EFF,FLOW,flow,instantaneous,report,,MGD",
                                "EFF,FLOW,totalizer,1000000,1,,");
    struct permit_month pm;
    struct fault f = {0};

    made_readings(m, "EFF FLOW kgal 2025-02-28=999000 1=500 2=2500 4=3000\nEFF BOD5 mg/L 2=2 4=5");
    assert_int_equal(work_month(m, "2035-01-01", &pm, &f), OK);
    assert_string_equal(rows_text(m->arena, &pm), "03-01..03-31 3.500 report 2\n"
                                                  "03-01..03-31 @03-02 33.36 met x0 1\n"
                                                  "03-01..03-31 @03-02 2.000 report 2");
    assert_string_equal(pm.rows[1].note,
                        "the register was last read 2 days before EFF FLOW on 2025-03-04");
    made_free(m);
}

static void a_removal_without_an_influent_is_refused_by_its_line(void **state)
{
    (void)state;
    struct made *m = made_plant("2025-03", "", "001,EFF,FLOW,flow,daily,report,,MGD\n" REMOVAL, "");
    struct permit_month pm;
    struct fault f = {0};

    m->plant->points[plant_point(m->plant, "INF")].role = ROLE_OTHER;
    assert_int_equal(work_month(m, "2035-01-01", &pm, &f), FAULT);
    assert_string_equal(f.text,
                        "limits.csv:3: the removal of 'BOD5' has no influent to start from; "
                        "set the rule influent=POINT, in plant.csv or in this row");
    made_free(m);
}

/* R41: the only influent, else the one that shares the outfall, else the rule. */
static void the_influent_of_a_removal(void **state)
{
    (void)state;
    static const char readings[] = "INF BOD5 mg/L 4=100\nPE BOD5 mg/L 4=200\nEFF BOD5 mg/L 4=20";
    static const struct {
        const char *fields, *limits, *outfall;
        bool second;
        const char *expected;
    } cases[] = {
        {"", REMOVAL, "", false, "80.0"},
        {"", REMOVAL ",,,,,,,,,,influent=PE", "", false, "90.0"}, /* the row has decided */
        {"", REMOVAL, "001", true, "90.0"},
        {"influent,INF", REMOVAL, "", true, "80.0"},
        {"", REMOVAL, "", true, NULL},
    };

    for (size_t i = 0; i < NELEM(cases); i++) {
        struct made *m = made_plant("2025-03", cases[i].fields, cases[i].limits, "");
        struct permit_month pm;
        struct fault f = {0};

        if (cases[i].second) {
            m->plant->points[plant_point(m->plant, "PE")].role = ROLE_INFLUENT;
            m->plant->points[plant_point(m->plant, "PE")].outfall = cases[i].outfall;
        }
        made_readings(m, readings);
        assert_int_equal(work_month(m, "2035-01-01", &pm, &f), cases[i].expected ? OK : FAULT);
        if (cases[i].expected)
            assert_string_equal(pm.rows[0].figure, cases[i].expected);
        made_free(m);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(loads_need_flow_and_concentration_of_the_day),
        cmocka_unit_test(totals_take_the_unit_without_the_day),
        cmocka_unit_test(removals_by_each_of_the_four_methods),
        cmocka_unit_test(days_without_discharge_are_skipped_or_0),
        cmocka_unit_test(a_register_serves_loads_and_totals),
        cmocka_unit_test(a_removal_without_an_influent_is_refused_by_its_line),
        cmocka_unit_test(the_influent_of_a_removal),
    };

    return cmocka_run_group_tests(tests, NULL, NULL);
}
