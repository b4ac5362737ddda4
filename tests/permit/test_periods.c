/* Weeks under each convention, and periods: seasons, dates in force, quarters to twelve months,
 * rolling windows. R3 to R7, R17, R22, R36, R45 of weirbook-rules(7). */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "rows.h"

#include "base/poison.h"

#define LIMIT(statistic) "001,EFF,BOD5,concentration," statistic ",max,30,mg/L"

/* ---- weeks ---- */

static const char *weeks_text(struct arena *a, const char *month, const char *fields)
{
    struct made *m = made_plant(month, fields, "", "");
    struct week weeks[6];
    size_t count = permit_weeks(&m->plant->rules, m->month, weeks);
    struct text t;
    char *out, from[11], to[11];

    text_init(&t, SIZE_MAX);
    for (size_t i = 0; i < count; i++) {
        day_write(weeks[i].from, from);
        day_write(weeks[i].to, to);
        text_print(&t, "%s%s..%s", i > 0 ? " " : "", from + 5, to + 5);
    }
    out = arena_bytes(a, t.at, t.length);
    text_free(&t);
    made_free(m);
    return out;
}

static void weeks_of_a_month_by_each_convention(void **state)
{
    (void)state;
    static const struct {
        const char *source, *month, *fields, *expected;
    } cases[] = {
        {"Colorado COG-603000, definition 10: the month of the Saturday", "2023-03",
         "week_starts,sunday\nweek_counts_in,end",
         "02-26..03-04 03-05..03-11 03-12..03-18 03-19..03-25"},
        {"first day decides: common practice, no source", "2024-05",
         "week_starts,sunday\nweek_counts_in,start",
         "05-05..05-11 05-12..05-18 05-19..05-25 05-26..06-01"},
        {"four or more days: common practice, no source", "2024-05",
         "week_starts,sunday\nweek_counts_in,most-days",
         "04-28..05-04 05-05..05-11 05-12..05-18 05-19..05-25 05-26..06-01"},
        {"four or more days: three are not enough", "2024-08",
         "week_starts,sunday\nweek_counts_in,most-days",
         "08-04..08-10 08-11..08-17 08-18..08-24 08-25..08-31"},
        {"cut at the month's ends: common practice, no source", "2024-10",
         "week_starts,sunday\nweek_counts_in,split",
         "10-01..10-05 10-06..10-12 10-13..10-19 10-20..10-26 10-27..10-31"},
        {"six rows in a month of 31 days that begins on a Saturday", "2025-03",
         "week_starts,sunday\nweek_counts_in,split",
         "03-01..03-01 03-02..03-08 03-09..03-15 03-16..03-22 03-23..03-29 03-30..03-31"},
        {"Ohio EPA permits, part III, from memory: fixed weeks", "2024-02",
         "week_counts_in,days-1-7", "02-01..02-07 02-08..02-14 02-15..02-21 02-22..02-28"},
        {"Monday weeks: common practice, no source", "2023-07",
         "week_starts,monday\nweek_counts_in,end",
         "06-26..07-02 07-03..07-09 07-10..07-16 07-17..07-23 07-24..07-30"},
        {"a February of four whole weeks", "2026-02", "week_starts,sunday\nweek_counts_in,end",
         "02-01..02-07 02-08..02-14 02-15..02-21 02-22..02-28"},
    };
    struct arena *a = arena_new();

    for (size_t i = 0; i < NELEM(cases); i++) {
        const char *got = weeks_text(a, cases[i].month, cases[i].fields);
        if (!text_equal(got, cases[i].expected))
            fail_msg("%s: expected %s, got %s", cases[i].source, cases[i].expected, got);
    }
    arena_free(a);
}

/* A calendar week has seven days whichever the month, and under end, start and most-days each is in
 * exactly one. */
static void every_week_counts_in_exactly_one_month(void **state)
{
    (void)state;
    static const char *const rules[] = {"week_counts_in,end", "week_counts_in,start",
                                        "week_counts_in,most-days"};

    for (size_t i = 0; i < NELEM(rules); i++) {
        struct made *m = made_plant("2023-01", rules[i], "", "");
        day_t month = m->month, next = DAY_NONE;

        for (int k = 0; k < 48; k++, month = month_step(month, 1)) {
            struct week weeks[6];
            size_t count = permit_weeks(&m->plant->rules, month, weeks);

            for (size_t j = 0; j < count; j++) {
                assert_int_equal(weeks[j].to - weeks[j].from, 6);
                assert_true(next == DAY_NONE || weeks[j].from == next);
                next = weeks[j].to + 1;
            }
        }
        made_free(m);
    }
}

static void a_week_uses_its_days_in_whatever_month(void **state)
{
    (void)state;
    static const struct month_case cases[] = {
        {"R4; Colorado COG-603000, definitions 10 and 11", "2023-03", "",
         LIMIT("weekly-average") "\n" LIMIT("monthly-average"),
         "EFF BOD5 mg/L 2023-02-27=8 2=9 10=12 28=30 2023-04-01=50",
         "02-26..03-04 8 met 2\n03-05..03-11 12 met 1\n03-12..03-18 - no-data 0\n"
         "03-19..03-25 - no-data 0\n03-01..03-31 17 met 3"},
        {"R36: a week stands whole where the row is in force on its last day", "2023-03", "",
         LIMIT(
             "weekly-average") ",,2023-03-11,\n"
                               "001,EFF,BOD5,concentration,weekly-average,max,10,mg/L,,,2023-03-10",
         "EFF BOD5 mg/L 6=20 13=9",
         "03-05..03-11 20 met 1\n03-12..03-18 9 met 1\n03-19..03-25 - no-data 0\n"
         "02-26..03-04 - no-data 0"},
        {"weekly geometric mean, washington WAC 173-221: geometric", "2023-03",
         "week_counts_in,split", "001,EFF,ECOLI,concentration,weekly-geomean,max,400,MPN/100mL",
         "EFF ECOLI MPN/100mL 6=4 8=9",
         "03-01..03-04 - no-data 0\n03-05..03-11 6 met 2\n03-12..03-18 - no-data 0\n"
         "03-19..03-25 - no-data 0\n03-26..03-31 - no-data 0"},
    };

    check_months(cases, NELEM(cases));
}

/* ---- in force ---- */

static void seasons_and_dates_cut_a_row_to_its_own_days(void **state)
{
    (void)state;
    static const struct month_case cases[] = {
        {"R3: common practice, no source", "2025-05", "",
         "001,EFF,NH3N,concentration,daily,max,2.0,mg/L,05-16..10-31\n"
         "001,EFF,NH3N,concentration,daily,max,6.0,mg/L,11-01..05-15",
         "EFF NH3N mg/L 3=3.1 10=5.0 15=5.2 16=2.1 24=2.6",
         "05-16..05-31 @05-24 2.6 exceeded x2 2\n05-01..05-15 @05-15 5.2 met x0 3"},
        {"R2: a season that is not on is not printed", "2025-01", "",
         "001,EFF,NH3N,concentration,monthly-average,max,5.0,mg/L,12-01..03-31\n"
         "001,EFF,NH3N,concentration,monthly-average,max,1.5,mg/L,04-01..11-30",
         "EFF NH3N mg/L 3=4.0 10=5.6", "01-01..01-31 4.8 met 2"},
        {"R36: a season that ends on 02-28 includes 02-29", "2024-02", "",
         "001,EFF,NH3N,concentration,daily,max,5.0,mg/L,12-01..02-28", "EFF NH3N mg/L 29=5.1",
         "02-01..02-29 @02-29 5.1 exceeded x1 1"},
        {"R3: interim and final inside one month", "2025-06", "",
         LIMIT("monthly-average") ",,,2025-06-10\n"
                                  "001,EFF,BOD5,concentration,monthly-average,max,20,mg/"
                                  "L,,2025-06-11,",
         "EFF BOD5 mg/L 5=28 10=30 11=18 20=20", "06-01..06-10 29 met 2\n06-11..06-30 19 met 2"},
        {"a season that holds the month's two ends: its own days alone", "2025-05", "",
         "001,EFF,NH3N,concentration,daily,max,2.0,mg/L,05-20..05-10",
         "EFF NH3N mg/L 5=1.0 15=9.0 25=1.5", "05-01..05-31 @05-25 1.5 met x0 2"},
    };

    check_months(cases, NELEM(cases));
}

/* ---- long periods ---- */

static void long_periods_come_with_their_last_month(void **state)
{
    (void)state;
    static const struct month_case cases[] = {
        {"R5: no quarter in May", "2025-05", "", LIMIT("quarterly-average"), "EFF BOD5 mg/L 5=1",
         ""},
        {"R5: the quarter with June, its days", "2025-06", "", LIMIT("quarterly-average"),
         "EFF BOD5 mg/L 2025-03-31=90 2025-04-01=10 2025-04-20=10 5=25", "04-01..06-30 15 met 3"},
        {"R45: a quarter is over days, whatever long_average says", "2025-06",
         "long_average,months", LIMIT("quarterly-average"),
         "EFF BOD5 mg/L 2025-04-01=10 2025-04-20=10 5=25", "04-01..06-30 15 met 3"},
        {"G21: half-years with June and December", "2025-12", "", LIMIT("semiannual-average"),
         "EFF BOD5 mg/L 2025-06-30=90 2025-07-01=10 5=20", "07-01..12-31 15 met 2"},
        {"G6: a year is over its days", "2025-12", "", LIMIT("annual-average"),
         "EFF BOD5 mg/L 2025-01-01=10 2025-01-20=10 5=40", "01-01..12-31 20 met 3"},
        {"G6: or over its months", "2025-12", "long_average,months", LIMIT("annual-average"),
         "EFF BOD5 mg/L 2025-01-01=10 2025-01-20=10 5=40", "01-01..12-31 25 met 3"},
        {"R22: twelve months are the mean of their months, those without data left out", "2025-03",
         "", LIMIT("rolling-12-month"),
         "EFF BOD5 mg/L 2024-03-31=99 2024-04-01=10 2024-04-20=20 5=25", "04-01..03-31 20 met 3"},
        {"G6: or of their days", "2025-03", "long_average,days", LIMIT("rolling-12-month"),
         "EFF BOD5 mg/L 2024-04-01=10 2024-04-20=20 5=25", "04-01..03-31 18 met 3"},
        {"R44: the sign is that of all the days", "2025-03", "", LIMIT("rolling-12-month"),
         "EFF BOD5 mg/L 2024-04-01=<2 5=26", "04-01..03-31 <13 met 2"},
        {"R13 over twelve months: all less-thans, the largest", "2025-03", "",
         LIMIT("rolling-12-month"), "EFF BOD5 mg/L 2024-04-01=<2 5=<5", "04-01..03-31 <5 met 2"},
    };

    check_months(cases, NELEM(cases));
}

/* ---- rolling ---- */

static void rolling_windows_end_in_the_month_and_reach_before_it(void **state)
{
    (void)state;
    static const struct month_case cases[] = {
        {"40 CFR 133.101(b), seven days; R6", "2025-03", "", LIMIT("rolling-7-day"),
         "EFF BOD5 mg/L 2025-02-20=99 2025-02-24=10 2=50 20=31",
         "03-01..03-31 @03-03 50 exceeded x13 2"},
        {"40 CFR 133.101(a), thirty days", "2025-03", "", LIMIT("rolling-30-day"),
         "EFF BOD5 mg/L 2025-02-25=20 20=40", "03-01..03-31 @03-27 40 exceeded x5 1"},
        {"R36: windows that end on days in force", "2025-03", "",
         LIMIT("rolling-7-day") ",,2025-03-10,", "EFF BOD5 mg/L 6=50",
         "03-10..03-31 @03-10 50 exceeded x3 0"},
        {"California title 22, 60301.230: median of the last seven days with results", "2025-03",
         "window,results", "001,EFF,FCOLI,concentration,rolling-7-day-median,max,2.2,cfu/100mL",
         "EFF FCOLI cfu/100mL 2024-11-01=1 2024-11-20=1 2024-12-01=1 2025-01-01=1 2=8 9=9 10=9 "
         "16=7",
         "03-01..03-31 @03-16 7.0 exceeded x1 4"},
        {"the same over calendar days", "2025-03", "window,days",
         "001,EFF,FCOLI,concentration,rolling-7-day-median,max,2.2,cfu/100mL",
         "EFF FCOLI cfu/100mL 2024-12-01=1 2=8 16=1", "03-01..03-31 @03-02 8.0 exceeded x7 2"},
        {"G21: a running geometric mean", "2025-03", "",
         "001,EFF,ECOLI,concentration,rolling-30-day-geomean,max,126,MPN/100mL",
         "EFF ECOLI MPN/100mL 2025-02-27=4 10=9 28=4", "03-01..03-31 @03-10 6 met x0 2"},
        {"R33: 0 where there is nothing", "2025-03", "", LIMIT("rolling-7-day"), "",
         "03-01..03-31 - no-data x0 0"},
    };

    check_months(cases, NELEM(cases));
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(weeks_of_a_month_by_each_convention),
        cmocka_unit_test(every_week_counts_in_exactly_one_month),
        cmocka_unit_test(a_week_uses_its_days_in_whatever_month),
        cmocka_unit_test(seasons_and_dates_cut_a_row_to_its_own_days),
        cmocka_unit_test(long_periods_come_with_their_last_month),
        cmocka_unit_test(rolling_windows_end_in_the_month_and_reach_before_it),
    };

    return cmocka_run_group_tests(tests, NULL, NULL);
}
