/* Samples taken and required, allowed failures, conditions, groups, open periods, and which
 * readings a month needs. R2, R8, R9, R33 to R38, R46, R47, G1, G3 of weirbook-rules(7). */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "rows.h"

#include "base/poison.h"

#define SAMPLED(statistic, samples)                                                                \
    "001,EFF,BOD5,concentration," statistic ",max,30,mg/L,,,,," samples
#define ALLOWED(statistic, allowed, ceiling)                                                       \
    "001,EFF,FCOLI,concentration," statistic ",max,400,cfu/100mL,,,,,,," allowed "," ceiling

static void samples_required_by_frequency_and_row(void **state)
{
    (void)state;
    static const struct month_case cases[] = {
        {"R9: n/day times the days of the row", "2024-02", "", SAMPLED("daily", "1/day"),
         "EFF BOD5 mg/L 1..28=1", "02-01..02-29 @02-01 1 met x0 28/29"},
        {"R35: continuous is one a day; common practice, no source", "2024-02", "",
         SAMPLED("daily", "continuous"), "EFF BOD5 mg/L 1..29=1",
         "02-01..02-29 @02-01 1 met x0 29/29"},
        {"R9: n/week times the weeks counted in the month", "2023-10", "",
         SAMPLED("monthly-average", "3/week"), "EFF BOD5 mg/L 2..31=1", "10-01..10-31 1 met 30/12"},
        {"R9: n in a weekly row, a stub under split too", "2025-03", "week_counts_in,split",
         SAMPLED("weekly-average", "2/week"), "EFF BOD5 mg/L 1=1 30..31=1",
         "03-01..03-01 1 met 1/2\n03-02..03-08 - no-data 0/2\n03-09..03-15 - no-data 0/2\n"
         "03-16..03-22 - no-data 0/2\n03-23..03-29 - no-data 0/2\n03-30..03-31 1 met 2/2"},
        {"R35: a frequency longer than the row leaves it empty", "2023-03",
         "week_counts_in,days-1-7", SAMPLED("weekly-average", "2/month"), "",
         "03-01..03-07 - no-data 0\n03-08..03-14 - no-data 0\n03-15..03-21 - no-data 0\n"
         "03-22..03-28 - no-data 0"},
        {"R35: n/month times the months it holds", "2025-06", "",
         SAMPLED("quarterly-average", "2/month"), "EFF BOD5 mg/L 3=1", "04-01..06-30 1 met 1/6"},
        {"R35: n/quarter and n/year", "2025-12", "",
         SAMPLED("annual-average", "1/quarter") "\n001,EFF,BOD5,concentration,rolling-12-month,max,"
                                                "30,mg/L,,,,,1/year\n"
                                                "001,EFF,BOD5,concentration,monthly-average,max,30,"
                                                "mg/L,,,,,1/quarter",
         "EFF BOD5 mg/L 3=1",
         "01-01..12-31 1 met 1/4\n01-01..12-31 1 met 1/1\n12-01..12-31 1 met 1"},
        {"R35: weeks of a quarter, those counted in its months", "2023-03", "",
         SAMPLED("quarterly-average", "1/week"), "EFF BOD5 mg/L 3=1", "01-01..03-31 1 met 1/12"},
        {"R35: of a row cut by dates the weeks that end in it", "2023-03", "",
         "001,EFF,BOD5,concentration,monthly-average,max,30,mg/L,,2023-03-11,,,2/week",
         "EFF BOD5 mg/L 13=1", "03-11..03-31 1 met 1/6"},
        {"R8: less-thans count, codes do not", "2025-03", "sign,never",
         SAMPLED("monthly-average", "4/month"), "EFF BOD5 mg/L 3=<2 4=codeG 5=4 6=code9",
         "03-01..03-31 2 met 2/4"},
        {"R8: by reading, while the mean goes by days", "2025-03", "count_by,reading",
         SAMPLED("monthly-average", "4/month"), "EFF BOD5 mg/L 3@08:00=2 3@09:00=4 4=9",
         "03-01..03-31 6 met 3/4"},
        {"R8: of a load days with a load, even where readings are counted", "2025-03",
         "count_by,reading",
         "001,EFF,BOD5,load,monthly-average,max,300,lb/d\n"
         "001,EFF,BOD5,concentration,monthly-average,max,30,mg/L",
         "EFF FLOW MGD 3=1\nEFF BOD5 mg/L 3@08:00=10 3@09:00=20",
         "03-01..03-31 125 met 1\n03-01..03-31 15 met 2"},
        {"R34: of a removal days with an effluent value, even where readings are counted",
         "2025-03", "count_by,reading", "001,EFF,BOD5,removal,monthly-average,min,85,%",
         "INF BOD5 mg/L 3=100\nEFF BOD5 mg/L 3@08:00=9 3@09:00=11", "03-01..03-31 90 met 1"},
        {"R35: no-discharge days are taken out of n/day", "2025-03", "", SAMPLED("daily", "1/day"),
         "EFF FLOW MGD 1..10=0\nEFF BOD5 mg/L 11..31=3", "03-01..03-31 @03-11 3 met x0 21/21"},
        {"R35: a week wholly without discharge requires nothing", "2023-03",
         "week_counts_in,days-1-7", SAMPLED("monthly-average", "2/week"),
         "EFF FLOW MGD 1..7=C\nEFF BOD5 mg/L 8=3", "03-01..03-31 3 met 1/6"},
        {"R35: a week that discharged in the month before is not wholly without", "2024-03", "",
         SAMPLED("monthly-average", "1/week"), "EFF FLOW MGD 2024-02-28=2 2=C\nEFF BOD5 mg/L 4=3",
         "03-01..03-31 3 met 1/5"},
        {"R35: one that did not is", "2024-03", "", SAMPLED("monthly-average", "1/week"),
         "EFF FLOW MGD 2024-02-28=C 2=C\nEFF BOD5 mg/L 4=3", "03-01..03-31 3 met 1/4"},
        {"R35: a month too; otherwise n/month is not reduced", "2025-03", "",
         SAMPLED("monthly-average", "2/month"), "EFF FLOW MGD 1..31=C",
         "03-01..03-31 - no-discharge 0/0"},
        {"EPA's code 9: conditional monitoring not required that day", "2025-03", "",
         SAMPLED("daily", "1/day"), "EFF BOD5 mg/L 1..10=code9 11..31=3",
         "03-01..03-31 @03-11 3 met x0 21/21"},
    };

    check_months(cases, NELEM(cases));
}

static void samples_limits_allow_so_many_beyond(void **state)
{
    (void)state;
    static const struct month_case cases[] = {
        {"EPA 2012 criteria: 1 of 10 is not more than 10 %", "2025-03", "",
         ALLOWED("monthly-samples", "10%", ""), "EFF FCOLI cfu/100mL 1..9=10 11=500",
         "03-01..03-31 @03-11 500 met x1 10"},
        {"EPA 2012 criteria: 1 of 9 is", "2025-03", "", ALLOWED("monthly-samples", "10%", ""),
         "EFF FCOLI cfu/100mL 1..8=10 11=500", "03-01..03-31 @03-11 500 exceeded x1 9"},
        {"R46: no allowed is 0", "2025-03", "", ALLOWED("monthly-samples", "", ""),
         "EFF FCOLI cfu/100mL 1..8=10 11=401", "03-01..03-31 @03-11 401 exceeded x1 9"},
        {"title 22: at most one above, none above the ceiling", "2025-03", "",
         ALLOWED("monthly-samples", "1", "500"), "EFF FCOLI cfu/100mL 1..8=10 11=500",
         "03-01..03-31 @03-11 500 met x1 9"},
        {"title 22: past the ceiling", "2025-03", "", ALLOWED("monthly-samples", "1", "500"),
         "EFF FCOLI cfu/100mL 1..8=10 11=501", "03-01..03-31 @03-11 501 exceeded x1 9"},
        {"R46: the ceiling at its own decimals", "2025-03", "",
         ALLOWED("monthly-samples", "1", "500"), "EFF FCOLI cfu/100mL 11=500.4",
         "03-01..03-31 @03-11 500 met x1 1"},
        {"R46: readings are judged under count_by=reading", "2025-03", "count_by,reading",
         ALLOWED("monthly-samples", "1", ""), "EFF FCOLI cfu/100mL 3@08:00=1 3@09:00=900 4=800",
         "03-01..03-31 @03-03 900 exceeded x2 3"},
        {"R46: days under count_by=day", "2025-03", "", ALLOWED("monthly-samples", "1", ""),
         "EFF FCOLI cfu/100mL 3@08:00=1 3@09:00=900 4=800", "03-01..03-31 @03-04 800 met x1 2"},
        {"91/271/EEC annex I table 3, from memory: none below 4 samples", "2025-12", "",
         ALLOWED("annual-samples", "eu-table-3", ""), "EFF FCOLI cfu/100mL 1..2=10 3=500",
         "01-01..12-31 @12-03 500 exceeded x1 3"},
        {"91/271/EEC annex I table 3: 4 to 7 allow 1", "2025-12", "",
         ALLOWED("annual-samples", "eu-table-3", ""), "EFF FCOLI cfu/100mL 1..3=10 4=500",
         "01-01..12-31 @12-04 500 met x1 4"},
        {"91/271/EEC annex I table 3: 17 to 28 allow 3", "2025-12", "",
         ALLOWED("annual-samples", "eu-table-3", ""), "EFF FCOLI cfu/100mL 1..13=10 14..17=500",
         "01-01..12-31 @12-14 500 exceeded x4 17"},
        {"G3: a quarter's samples", "2025-03", "", ALLOWED("quarterly-samples", "1", ""),
         "EFF FCOLI cfu/100mL 2025-01-03=500 3=600", "01-01..03-31 @03-03 600 exceeded x2 2"},
    };

    check_months(cases, NELEM(cases));
}

/* Directive 91/271/EEC annex I, table 3, as permit descriptions copy it, from memory. */
static void the_european_table_allows_what_it_says(void **state)
{
    (void)state;
    static const struct {
        int samples, fail;
    } table[] = {{4, 1},    {7, 1},    {8, 2},    {16, 2},   {17, 3},   {28, 3},   {29, 4},
                 {40, 4},   {41, 5},   {53, 5},   {54, 6},   {67, 6},   {81, 7},   {95, 8},
                 {110, 9},  {125, 10}, {140, 11}, {155, 12}, {171, 13}, {187, 14}, {203, 15},
                 {219, 16}, {235, 17}, {251, 18}, {268, 19}, {284, 20}, {300, 21}, {317, 22},
                 {334, 23}, {350, 24}, {351, 25}, {365, 25}};

    for (size_t i = 0; i < NELEM(table); i++) {
        for (int more = 0; more < 2; more++) {
            struct made *m =
                made_plant("2025-12", "", ALLOWED("annual-samples", "eu-table-3", ""), "");
            struct permit_month pm;
            struct fault f = {0};
            day_t day = month_step(m->month, -11);

            for (int k = 0; k < table[i].samples; k++, day++) {
                struct reading r = {.day = day, .minute = -1, .sample = "", .text = "", .file = ""};
                r.point = (uint16_t)plant_point(m->plant, "EFF");
                r.parameter = (uint16_t)plant_parameter(m->plant, "FCOLI");
                r.unit = (uint16_t)unit_index(unit_find("cfu/100mL"));
                r.value.coefficient = k < table[i].fail + more ? 401 : 400;
                *(struct reading *)arena_push(m->arena, &m->readings, &m->count, &m->room,
                                              sizeof r) = r;
            }
            assert_int_equal(work_month(m, "2035-01-01", &pm, &f), OK);
            assert_int_equal(pm.rows[0].verdict, more ? VERDICT_EXCEEDED : VERDICT_MET);
            made_free(m);
        }
    }
}

/* ---- conditions and groups ---- */

#define TIER(limit, when) "001,EFF,NH3N,concentration,monthly-average,max," limit ",mg/L,,,," when

static void a_condition_chooses_the_row(void **state)
{
    (void)state;
    static const char tiers[] = TIER("4.0", "EFF FLOW monthly-average <= 2.5 MGD") "\n" TIER(
        "2.0", "EFF FLOW monthly-average > 2.5 MGD");
    static const struct month_case cases[] = {
        {"R2: tiers by flow, the exact figure: 2.5 is not above 2.5", "2025-03", "", tiers,
         "EFF FLOW MGD 1=2.4 2=2.6\nEFF NH3N mg/L 4=3", "03-01..03-31 3.0 met 1"},
        {"R2: 2.5000001 is", "2025-03", "", tiers,
         "EFF FLOW MGD 1=2.4 2=2.6000002\nEFF NH3N mg/L 4=3", "03-01..03-31 3.0 exceeded 1"},
        {"R37: in another unit, a load, by the unit of the condition", "2025-03", "",
         TIER("2.0", "EFF BOD5 monthly-average >= 83.4 lb/d"),
         "EFF FLOW MGD 4=1\nEFF BOD5 mg/L 4=10\nEFF NH3N mg/L 4=3", "03-01..03-31 3.0 exceeded 1"},
        {"R37: a removal", "2025-03", "", TIER("2.0", "EFF BOD5 monthly-average < 85 %"),
         "INF BOD5 mg/L 4=100\nEFF BOD5 mg/L 4=10\nEFF NH3N mg/L 4=3", ""},
        {"R37: a geometric mean through its power", "2025-03", "",
         TIER("2.0", "EFF ECOLI monthly-geomean > 6 MPN/100mL"),
         "EFF ECOLI MPN/100mL 4=4 5=9\nEFF NH3N mg/L 4=3", ""},
        {"R37: a figure without data is neither true nor false", "2025-03", "", tiers,
         "EFF NH3N mg/L 4=3", "03-01..03-31 3.0 no-data 1\n03-01..03-31 3.0 no-data 1"},
    };

    check_months(cases, NELEM(cases));
}

static void a_missing_condition_is_told_in_the_note(void **state)
{
    (void)state;
    struct made *m =
        made_plant("2025-03", "", TIER("4.0", "EFF FLOW monthly-average <= 2.5 MGD"), "");
    struct permit_month pm;
    struct fault f = {0};

    assert_int_equal(work_month(m, "2035-01-01", &pm, &f), OK);
    assert_string_equal(
        pm.rows[0].note,
        "no figure for its condition: EFF FLOW monthly-average <= 2.5 MGD; load its readings");
    made_free(m);
}

/* R47; 91/271/EEC annex I table 1: the value or the percentage. */
static void a_group_is_met_when_one_of_it_is(void **state)
{
    (void)state;
    struct made *m = made_plant("2025-03", "",
                                "001,EFF,BOD5,concentration,monthly-average,max,25,mg/L,,,,,,,,,a\n"
                                "001,EFF,BOD5,removal,monthly-average,min,70,%,,,,,,,,,a\n"
                                "001,EFF,TSS,concentration,monthly-average,max,35,mg/L,,,,,,,,,b\n"
                                "001,EFF,TSS,removal,monthly-average,min,90,%,,,,,,,,,b",
                                "");
    struct permit_month pm;
    struct fault f = {0};

    made_readings(m, "INF BOD5 mg/L 4=200\nEFF BOD5 mg/L 4=40\nINF TSS mg/L 4=200\nEFF TSS mg/L "
                     "4=40");
    assert_int_equal(work_month(m, "2035-01-01", &pm, &f), OK);
    assert_string_equal(rows_text(m->arena, &pm),
                        "03-01..03-31 40 met 1\n03-01..03-31 80 met 1\n"
                        "03-01..03-31 40 exceeded 1\n03-01..03-31 80 exceeded 1");
    assert_string_equal(pm.rows[0].note,
                        "met by its group: EFF BOD5 removal monthly-average of line 3");
    assert_string_equal(pm.rows[1].note, "");
    assert_int_equal(pm.exceeded, 2);
    made_free(m);
}

/* ---- open periods ---- */

static void a_period_that_is_not_over_is_open_unless_certain(void **state)
{
    (void)state;
    static const struct month_case cases[] = {
        {"G1, R38: as of 15 May", "2024-05", "",
         "001,EFF,BOD5,concentration,weekly-average,max,45,mg/L\n"
         "001,EFF,BOD5,concentration,monthly-average,max,30,mg/L",
         "EFF BOD5 mg/L 2=20 7=22 9=30 14=40 16=99",
         "04-28..05-04 20 met 1\n05-05..05-11 26 met 2\n05-12..05-18 40 open 1\n"
         "05-19..05-25 - open 0\n05-01..05-31 28 open 4"},
        {"R38: a daily value beyond its limit is certain", "2024-05", "",
         "001,EFF,BOD5,concentration,daily,max,30,mg/L\n"
         "001,EFF,BOD5,concentration,daily,max,40,mg/L,,,,EFF BOD5 monthly-average > 0 mg/L\n"
         "001,EFF,BOD5,concentration,daily,target,20,mg/L",
         "EFF BOD5 mg/L 2=31",
         "05-01..05-31 @05-02 31 exceeded x1 1\n05-01..05-31 @05-02 31 open x0 1\n"
         "05-01..05-31 @05-02 31 target-passed x1 1"},
        {"R38: an ended window", "2024-05", "",
         "001,EFF,BOD5,concentration,rolling-7-day,max,30,mg/L", "EFF BOD5 mg/L 14=31",
         "05-01..05-31 @05-14 31 exceeded x2 1"},
        {"R38: more samples beyond than a whole number allows", "2024-05", "",
         ALLOWED("monthly-samples", "1", ""), "EFF FCOLI cfu/100mL 2=401 3=402",
         "05-01..05-31 @05-03 402 exceeded x2 2"},
        {"R38: a percentage can still come down", "2024-05", "",
         ALLOWED("monthly-samples", "10%", ""), "EFF FCOLI cfu/100mL 2=401 3=402",
         "05-01..05-31 @05-03 402 open x2 2"},
        {"R38: a passed ceiling", "2024-05", "", ALLOWED("monthly-samples", "10%", "800"),
         "EFF FCOLI cfu/100mL 2=801", "05-01..05-31 @05-02 801 exceeded x1 1"},
        {"G1: a day without discharge after that day is not known yet", "2024-05", "",
         SAMPLED("daily", "1/day"), "EFF FLOW MGD 2=C 20=C\nEFF BOD5 mg/L 3=4 21=code9",
         "05-01..05-31 @05-03 4 open x0 1/30"},
        {"R38: open comes before no-discharge", "2024-05", "",
         "001,EFF,BOD5,concentration,monthly-average,max,30,mg/L", "EFF FLOW MGD 2=C",
         "05-01..05-31 - open 0"},
    };

    for (size_t i = 0; i < NELEM(cases); i++)
        check_month(&cases[i], "2024-05-15");
}

static void a_period_is_over_on_its_last_day(void **state)
{
    (void)state;
    static const struct month_case over = {"G1",
                                           "2024-05",
                                           "",
                                           "001,EFF,BOD5,concentration,monthly-average,max,30,mg/L",
                                           "EFF BOD5 mg/L 2=20",
                                           "05-01..05-31 20 met 1"};

    check_month(&over, "2024-05-31");
}

static void shortfalls_are_counted_once_the_period_is_over(void **state)
{
    (void)state;
    struct made *m = made_plant(
        "2024-05", "",
        SAMPLED("weekly-average",
                "2/week") "\n"
                          "001,EFF,BOD5,concentration,monthly-average,max,30,mg/L,,,,,9/month",
        "");
    struct permit_month pm;
    struct fault f = {0};

    made_readings(m, "EFF BOD5 mg/L 2=20 7=22 9=30 14=40");
    assert_int_equal(work_month(m, "2024-05-15", &pm, &f), OK);
    assert_int_equal(pm.shortfalls, 1); /* the week that ended on the 4th */
    assert_true(permit_shortfall(&pm.rows[0], pm.on));
    assert_false(permit_shortfall(&pm.rows[2], pm.on));
    made_free(m);
}

/* ---- needs ---- */

static const char *need_text(struct made *m, const char *point, const char *parameter)
{
    struct frame_span *needs;
    size_t count;
    char first[11], last[11];

    permit_needs(m->arena, m->plant, m->month, &needs, &count);
    for (size_t i = 0; i < count; i++) {
        if (needs[i].point != plant_point(m->plant, point) ||
            needs[i].parameter != plant_parameter(m->plant, parameter))
            continue;
        day_write(needs[i].first, first);
        day_write(needs[i].last, last);
        return arena_print(m->arena, "%s %s", first, last);
    }
    return "none";
}

static void a_month_needs_what_its_rows_reach_over(void **state)
{
    (void)state;
    static const struct {
        const char *fields, *limits, *meters, *point, *parameter, *expected;
    } cases[] = {
        {"", SAMPLED("monthly-average", ""), "", "EFF", "BOD5", "2025-03-01 2025-03-31"},
        {"", SAMPLED("monthly-average", ""), "", "EFF", "FLOW", "2025-03-01 2025-03-31"},
        {"", SAMPLED("monthly-average", ""), "", "INF", "BOD5", "none"},
        {"week_counts_in,start", SAMPLED("weekly-average", ""), "", "EFF", "BOD5",
         "2025-03-02 2025-04-05"},
        {"week_counts_in,end", SAMPLED("weekly-average", ""), "", "EFF", "BOD5",
         "2025-02-23 2025-03-29"},
        {"", SAMPLED("rolling-30-day", ""), "", "EFF", "BOD5", "2025-01-31 2025-03-31"},
        {"since,2019-07-01\nwindow,results", SAMPLED("rolling-7-day", ""), "", "EFF", "BOD5",
         "2019-07-01 2025-03-31"},
        {"", SAMPLED("rolling-12-month", ""), "", "EFF", "BOD5", "2024-04-01 2025-03-31"},
        {"", SAMPLED("quarterly-average", ""), "", "EFF", "BOD5", "2025-01-01 2025-03-31"},
        {"", SAMPLED("annual-average", ""), "", "EFF", "BOD5", "none"},
        {"", "001,EFF,BOD5,removal,monthly-average,min,85,%", "", "INF", "BOD5",
         "2025-03-01 2025-03-31"},
        {"flow,INF", "001,EFF,BOD5,load,monthly-average,max,85,lb/d", "", "INF", "FLOW",
         "2025-03-01 2025-03-31"},
        {"", TIER("4.0", "EF2 FLOW rolling-12-month <= 2.5 MGD"), "", "EF2", "FLOW",
         "2024-04-01 2025-03-31"},
        {"", SAMPLED("monthly-average", ""), "EFF,FLOW,totalizer,,,,", "EFF", "FLOW",
         "2025-02-22 2025-03-31"},
    };

    for (size_t i = 0; i < NELEM(cases); i++) {
        struct made *m = made_plant("2025-03", cases[i].fields, cases[i].limits, cases[i].meters);
        const char *got = need_text(m, cases[i].point, cases[i].parameter);

        if (!text_equal(got, cases[i].expected))
            fail_msg("%s, %s %s: expected %s, got %s", cases[i].limits, cases[i].point,
                     cases[i].parameter, cases[i].expected, got);
        made_free(m);
    }
}

/* What is needed is enough: a frame of the needs alone gives the rows of a frame of everything. */
static void needs_are_enough_and_order_does_not_matter(void **state)
{
    (void)state;
    struct made *m = made_plant(
        "2025-03", "flow,INF",
        SAMPLED("weekly-average", "2/week") "\n" SAMPLED(
            "rolling-30-day", "") "\n"
                                  "001,EFF,BOD5,load,rolling-12-month,max,50,lb/"
                                  "d\n001,EFF,BOD5,removal,monthly-average,"
                                  "min,85,%\n" TIER("4.0", "EF2 FLOW rolling-12-month <= 2.5 MGD"),
        "");
    struct permit_month few, all;
    struct fault f = {0};
    const char *expected;
    day_t on = m->month + 365;

    made_readings(m, "INF FLOW MGD 2024-04-02=1 2024-12-31=2 1..31=3 2025-04-01=9\n"
                     "INF BOD5 mg/L 1..31=200\n"
                     "EFF BOD5 mg/L 2024-04-02=9 2024-12-31=8 2025-02-25=7 3=30 20=40\n"
                     "EF2 FLOW MGD 2024-05-05=2.5\nEFF NH3N mg/L 5=1");
    assert_int_equal(work_month(m, "2026-03-01", &few, &f), OK);
    expected = rows_text(m->arena, &few);
    for (size_t i = 0, j = m->count - 1; i < j; i++, j--) {
        struct reading r = m->readings[i];
        m->readings[i] = m->readings[j];
        m->readings[j] = r;
    }
    assert_int_equal(permit_month(m->arena, made_frame(m, m->month - 800, m->month + 100), m->month,
                                  on, &all, &f),
                     OK);
    assert_string_equal(rows_text(m->arena, &all), expected);
    made_free(m);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(samples_required_by_frequency_and_row),
        cmocka_unit_test(samples_limits_allow_so_many_beyond),
        cmocka_unit_test(the_european_table_allows_what_it_says),
        cmocka_unit_test(a_condition_chooses_the_row),
        cmocka_unit_test(a_missing_condition_is_told_in_the_note),
        cmocka_unit_test(a_group_is_met_when_one_of_it_is),
        cmocka_unit_test(a_period_that_is_not_over_is_open_unless_certain),
        cmocka_unit_test(a_period_is_over_on_its_last_day),
        cmocka_unit_test(shortfalls_are_counted_once_the_period_is_over),
        cmocka_unit_test(a_month_needs_what_its_rows_reach_over),
        cmocka_unit_test(needs_are_enough_and_order_does_not_matter),
    };

    return cmocka_run_group_tests(tests, NULL, NULL);
}
