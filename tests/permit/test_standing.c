/* What exceedances count as, six months beside the screening criteria, and which notices a month
 * asks for, worked by hand. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "permit/rows.h"

static day_t day_of(const char *iso)
{
    day_t day;

    assert_true(day_parse(iso, &day));
    return day;
}

/* ---- counts ---- */

static void an_exceedance_counts_by_the_length_of_what_it_exceeds(void **state)
{
    static const struct {
        const char *source, *month, *limits, *readings;
        enum counted as;
        long count;
    } cases[] = {
        {"monthly average, each day of the month: Chesapeake Bay Foundation v. Gwaltney, 4th Cir. "
         "1986, 791 F.2d 304",
         "2025-03", ",EFF,TSS,concentration,monthly-average,max,30,mg/L", "EFF TSS mg/L 4=31",
         COUNTED_MONTH, 31},
        {"a leap year's February has 29 (the calendar)", "2024-02",
         ",EFF,TSS,concentration,monthly-average,max,30,mg/L", "EFF TSS mg/L 4=31", COUNTED_MONTH,
         29},
        {"bacteria's average is geometric (general instructions of EPA form 3320-1)", "2025-04",
         ",EFF,FCOLI,concentration,monthly-geomean,max,200,cfu/100mL", "EFF FCOLI cfu/100mL 4=201",
         COUNTED_MONTH, 30},
        {"a limit in force from the 11th has the days from then on (R3)", "2025-03",
         ",EFF,TSS,concentration,monthly-average,max,30,mg/L,,2025-03-11", "EFF TSS mg/L 14=31",
         COUNTED_MONTH, 21},
        {"weekly average, seven: EPA's settlement penalty policy of 1995, from memory", "2025-03",
         ",EFF,TSS,concentration,weekly-average,max,45,mg/L", "EFF TSS mg/L 4=46", COUNTED_WEEK, 7},
        {"daily maximum, each day beyond: 40 CFR 122.2, the daily discharge", "2025-03",
         ",EFF,TSS,concentration,daily,max,45,mg/L", "EFF TSS mg/L 4=46 5=45 6=47 7=60",
         COUNTED_TIMES, 3},
        {"instantaneous, each reading beyond (common practice, no source)", "2025-03",
         ",EFF,PH,concentration,instantaneous,max,9.0,pH",
         "EFF PH pH 4@08:00=9.1 4@09:00=9.2 5@08:00=9.0", COUNTED_TIMES, 2},
        {"a total is one figure (common practice, no source)", "2025-03",
         ",EFF,FLOW,flow,monthly-total,max,10,MG", "EFF FLOW MGD 4=11", COUNTED_ONCE, 1},
        {"an annual average is one figure (common practice, no source)", "2025-12",
         ",EFF,TSS,concentration,annual-average,max,30,mg/L", "EFF TSS mg/L 4=31", COUNTED_ONCE, 1},
    };

    (void)state;
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct made *m = made_plant(cases[i].month, "", cases[i].limits, "");
        struct permit_month pm;
        struct permit_count *counts;
        struct fault f = {0};

        made_readings(m, cases[i].readings);
        assert_int_equal(work_month(m, "2035-01-01", &pm, &f), OK);
        if (permit_counts(m->arena, &pm, &counts) != 1)
            fail_msg("%s: not one", cases[i].source);
        if (counts[0].as != cases[i].as || counts[0].count != cases[i].count)
            fail_msg("%s: %ld", cases[i].source, counts[0].count);
        made_free(m);
    }
}

static void what_is_met_counts_nothing(void **state)
{
    struct made *m = made_plant("2025-03", "",
                                ",EFF,TSS,concentration,monthly-average,max,30,mg/L\n"
                                ",EFF,TSS,concentration,monthly-average,target,20,mg/L",
                                "");
    struct permit_month pm;
    struct permit_count *counts;
    struct fault f = {0};

    (void)state;
    made_readings(m, "EFF TSS mg/L 4=30");
    assert_int_equal(work_month(m, "2035-01-01", &pm, &f), OK);
    assert_int_equal(permit_counts(m->arena, &pm, &counts), 0);
    made_free(m);
}

/* ---- standing ---- */

struct standing_case {
    const char *source, *limits, *readings;
    const char *expected; /* GROUP above technical exceeded run longest criteria, a line each */
};

#define MONTHLY(parameter, limit, unit)                                                            \
    "001,EFF," parameter ",concentration,monthly-average,max," limit "," unit

/* Figures of January to June 2025, one sample a month. */
#define SIX(parameter, unit, a, b, c, d, e, f)                                                     \
    "EFF " parameter " " unit " 2025-01-07=" a " 2025-02-07=" b " 2025-03-07=" c " 2025-04-07=" d  \
    " 2025-05-07=" e " 2025-06-07=" f

static const struct standing_case standings[] = {
    {"group I, two months at or above 1.4 times 30, which is 42 (40 CFR 123.45, appendix A)",
     MONTHLY("TSS", "30", "mg/L"), SIX("TSS", "mg/L", "42", "10", "10", "10", "42", "10"),
     "I 2 2 2 0 1 technical"},
    {"41 is above 30 and below 42: one month of technical review is not two",
     MONTHLY("TSS", "30", "mg/L"), SIX("TSS", "mg/L", "41", "10", "10", "10", "10", "42"),
     "I 2 1 2 1 1 near-technical"},
    {"group II, 1.2 times 20 is 24", MONTHLY("CU", "20", "ug/L"),
     SIX("CU", "ug/L", "10", "24", "24", "10", "10", "23"), "II 3 2 3 1 2 technical near-chronic"},
    {"four months above by any amount are chronic", MONTHLY("NH3N", "2.0", "mg/L"),
     SIX("NH3N", "mg/L", "2.1", "2.1", "1.0", "2.1", "2.1", "1.0"), "I 4 0 4 0 2 chronic"},
    {"three are not; the latest five months have three, so one more would",
     MONTHLY("NH3N", "2.0", "mg/L"), SIX("NH3N", "mg/L", "1.0", "2.1", "2.1", "1.0", "1.0", "2.1"),
     "I 3 0 3 1 2 near-chronic"},
    {"the month that falls out does not count for the next", MONTHLY("NH3N", "2.0", "mg/L"),
     SIX("NH3N", "mg/L", "2.1", "2.1", "2.1", "1.0", "1.0", "1.0"), "I 3 0 3 0 3"},
    {"2.04 is compared as 2.0 and meets it (R12)", MONTHLY("NH3N", "2.0", "mg/L"),
     SIX("NH3N", "mg/L", "2.04", "2.04", "2.04", "2.04", "1.0", "1.0"), "I 0 0 0 0 0"},
    {"both", MONTHLY("TSS", "30", "mg/L"), SIX("TSS", "mg/L", "50", "50", "50", "50", "50", "50"),
     "I 6 6 6 6 6 chronic technical"},
    {"in neither group no criterion is applied", MONTHLY("TEMP", "20", "degC"),
     SIX("TEMP", "degC", "50", "50", "50", "50", "50", "50"), "neither 6 0 6 6 6"},
    {"by parameter and outfall: concentration and load of one parameter are one line; a month "
     "counts once",
     MONTHLY("TSS", "30", "mg/L") "\n001,EFF,TSS,load,monthly-average,max,250,lb/d",
     SIX("TSS", "mg/L", "31", "31", "29", "29", "10",
         "10") "\n"
               "EFF FLOW MGD 2025-01-07=1 2025-02-07=1 2025-03-07=2 2025-04-07=2 2025-05-07=1 "
               "2025-06-07=1",
     "I 4 2 4 0 4 chronic technical"},
    {"daily and weekly exceedances stand in a row, and meet no criterion of monthly averages",
     "001,EFF,TSS,concentration,daily,max,45,mg/L\n001,EFF,TSS,concentration,weekly-average,max,"
     "45,mg/L",
     SIX("TSS", "mg/L", "46", "46", "46", "46", "10", "46"), "I 0 0 5 1 4"},
    {"interim and final limits of one parameter are one line",
     MONTHLY("TP", "4.0", "mg/L") ",,,2025-03-31\n" MONTHLY("TP", "1.0", "mg/L") ",,2025-04-01",
     SIX("TP", "mg/L", "3.0", "3.0", "3.0", "1.4", "1.4", "1.3"),
     "I 3 2 3 3 3 technical near-chronic"},
    {"minimums, removals and action levels take no part",
     "001,EFF,DO,concentration,monthly-average,min,5.0,mg/L\n"
     "001,EFF,TSS,concentration,monthly-average,target,5.0,mg/L\n"
     "001,EFF,TSS,concentration,annual-average,max,5.0,mg/L",
     SIX("TSS", "mg/L", "46", "46", "46", "46", "10", "46"), ""},
};

static const char *standing_text(struct arena *a, const struct permit_standing *s)
{
    const char *text = "";

    for (size_t i = 0; i < s->count; i++) {
        const struct standing_line *l = &s->lines[i];

        text = arena_print(
            a, "%s%s%s %d %d %d %d %d%s%s%s%s", text, i > 0 ? "\n" : "", group_words[l->group],
            l->above, l->technical, l->exceeded, l->run, l->longest,
            l->meets_chronic ? " chronic" : "", l->meets_technical ? " technical" : "",
            l->near_chronic ? " near-chronic" : "", l->near_technical ? " near-technical" : "");
    }
    return text;
}

static void six_months_meet_the_screening_criteria_as_published(void **state)
{
    (void)state;
    for (size_t i = 0; i < NELEM(standings); i++) {
        struct made *m = made_plant("2025-06", "", standings[i].limits, "");
        struct permit_standing s;
        struct fault f = {0};
        const char *got;

        made_readings(m, standings[i].readings);
        if (permit_standing(m->arena, made_frame(m, day_of("2024-12-25"), day_of("2025-07-05")),
                            m->month, day_of("2035-01-01"), permit_groups(m->arena, m->plant), &s,
                            &f) != OK)
            fail_msg("%s: %s", standings[i].source, f.text);
        got = standing_text(m->arena, &s);
        if (!text_equal(got, standings[i].expected))
            fail_msg("%s\nexpected:\n%s\ngot:\n%s", standings[i].source, standings[i].expected,
                     got);
        made_free(m);
    }
}

static void a_group_that_is_set_stands_over_the_table(void **state)
{
    struct made *m = made_plant("2025-06", "", MONTHLY("TEMP", "20", "degC"), "");
    enum pollutant_group *groups = permit_groups(m->arena, m->plant);
    struct permit_standing s;
    struct fault f = {0};

    (void)state;
    made_readings(m, SIX("TEMP", "degC", "24", "24", "10", "10", "10", "10"));
    groups[plant_parameter(m->plant, "TEMP")] = GROUP_II;
    assert_int_equal(permit_standing(m->arena,
                                     made_frame(m, day_of("2025-01-01"), day_of("2025-06-30")),
                                     m->month, day_of("2035-01-01"), groups, &s, &f),
                     OK);
    assert_string_equal(standing_text(m->arena, &s), "II 2 2 2 0 2 technical");
    made_free(m);
}

static void standing_needs_six_months_and_no_more(void **state)
{
    struct made *m = made_plant("2025-06", "",
                                MONTHLY("TSS", "30", "mg/L") "\n001,EFF,TSS,concentration,"
                                                             "annual-average,max,5.0,mg/L\n"
                                                             "001,EFF,TSS,concentration,rolling-12-"
                                                             "month,max,5.0,mg/L",
                                "");
    struct frame_span *needs;
    size_t count;

    (void)state;
    permit_standing_needs(m->arena, m->plant, m->month, &needs, &count);
    assert_true(count > 0);
    for (size_t i = 0; i < count; i++) {
        assert_int_equal(needs[i].first, day_of("2025-01-01"));
        assert_int_equal(needs[i].last, day_of("2025-06-30"));
    }
    made_free(m);
}

/* ---- notices ---- */

static void each_day_beyond_a_daily_limit_is_a_finding(void **state)
{
    struct made *m = made_plant("2025-03", "",
                                "001,EFF,TRC,concentration,daily,max,0.019,mg/L\n"
                                "001,EFF,PH,concentration,instantaneous,min,6.0,pH\n"
                                "001,EFF,TSS,concentration,weekly-average,max,45,mg/L\n"
                                "001,EFF,BOD5,concentration,daily,target,10,mg/L",
                                "");
    struct permit_month pm;
    struct permit_finding *found;
    struct frame *frame;
    struct fault f = {0};
    const char *text = "";
    size_t count;

    (void)state;
    made_readings(m, "EFF TRC mg/L 3=0.019 4=0.020 9@08:00=0.01 9@14:00=0.03\n"
                     "EFF PH pH 6@08:00=5.9 6@10:00=5.8 6@12:00=6.1\nEFF TSS mg/L 12=46\n"
                     "EFF BOD5 mg/L 4=11");
    frame = needed_frame(m);
    assert_int_equal(permit_month(m->arena, frame, m->month, day_of("2025-05-01"), &pm, &f), OK);
    count = permit_findings(m->arena, frame, &pm, &found);
    for (size_t i = 0; i < count; i++) {
        char day[11] = "-";

        if (found[i].day != DAY_NONE)
            day_write(found[i].day, day);
        text = arena_print(m->arena, "%s%s %s %s x%ld%s\n", text,
                           found[i].row->limit->parameter_text, day, found[i].figure,
                           found[i].beyond, found[i].duty == DUTY_24_HOURS ? " 24" : "");
    }
    /* TRC's day is its highest (its day rule); 0.019 meets 0.019. */
    assert_string_equal(text, "TRC 2025-03-04 0.020 x1 24\nTRC 2025-03-09 0.030 x1 24\n"
                              "PH 2025-03-06 5.8 x2 24\nTSS - 46 x0\n");
    made_free(m);
}

static void notices_are_owed_24_hours_and_5_days_after_becoming_aware(void **state)
{
    /* 40 CFR 122.41(l)(6). Without a time of day the first minute counts. */
    static const struct {
        const char *day;
        int minute, hours;
        const char *owed_day;
        int owed_minute;
    } cases[] = {
        {"2025-03-20", 9 * 60 + 30, NOTICE_HOURS, "2025-03-21", 9 * 60 + 30},
        {"2025-03-20", 9 * 60 + 30, WRITTEN_HOURS, "2025-03-25", 9 * 60 + 30},
        {"2024-02-28", -1, NOTICE_HOURS, "2024-02-29", 0},
        {"2025-12-29", 23 * 60 + 59, WRITTEN_HOURS, "2026-01-03", 23 * 60 + 59},
    };

    (void)state;
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct moment owed =
            permit_owed((struct moment){day_of(cases[i].day), cases[i].minute}, cases[i].hours);

        assert_int_equal(owed.day, day_of(cases[i].owed_day));
        assert_int_equal(owed.minute, cases[i].owed_minute);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(an_exceedance_counts_by_the_length_of_what_it_exceeds),
        cmocka_unit_test(what_is_met_counts_nothing),
        cmocka_unit_test(six_months_meet_the_screening_criteria_as_published),
        cmocka_unit_test(a_group_that_is_set_stands_over_the_table),
        cmocka_unit_test(standing_needs_six_months_and_no_more),
        cmocka_unit_test(each_day_beyond_a_daily_limit_is_a_finding),
        cmocka_unit_test(notices_are_owed_24_hours_and_5_days_after_becoming_aware),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
