/* Samples due, taken and missed. R8, R9, R35, R51 and section 7 of the rules page: frequencies are
 * permit terms (40 CFR 122.48(b)), extra samples count (122.41(l)(4)(ii)), codes that mean nothing
 * was owed take a sample out. The dates are counted by hand. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "rows.h"

#include "base/poison.h"

struct due_case {
    const char *what, *fields, *limits, *readings, *on;
    long days;
    const char *expected; /* FROM..TO PARAMETER TAKEN/REQUIRED STATE, parted by semicolons */
};

#define BOD(statistic, season, from, to, samples)                                                  \
    "001,EFF,BOD5,concentration," statistic ",max,30,mg/L," season "," from "," to ",," samples    \
    ",,,,,,"

static const char *due_text(struct made *m, const struct due_row *rows, size_t count)
{
    struct text t;
    char *out;

    text_init(&t, SIZE_MAX);
    for (size_t i = 0; i < count; i++) {
        const struct due_row *r = &rows[i];
        char from[11], to[11];

        day_write(r->from, from);
        day_write(r->to, to);
        text_print(&t, "%s%s..%s %s %s %ld/%ld %s", i > 0 ? "; " : "", from + 5, to + 5,
                   m->plant->points[r->point].id, m->plant->parameters[r->parameter].id, r->taken,
                   r->required, due_words[r->state]);
    }
    out = arena_bytes(m->arena, t.at, t.length);
    text_free(&t);
    return out;
}

static void check_due(const struct due_case *c)
{
    struct made *m = made_plant("2025-03", c->fields, c->limits, "");
    struct due_row *rows;
    struct fault f = {0};
    size_t count;
    const char *got;
    day_t on;

    assert_true(day_parse(c->on, &on));
    made_readings(m, c->readings);
    if (permit_due(m->arena, made_frame(m, on - 800, on), on, c->days, &rows, &count, &f) != OK)
        fail_msg("%s: %s", c->what, f.text);
    got = due_text(m, rows, count);
    if (!text_equal(got, c->expected))
        fail_msg("%s\n%s\n%s\nexpected:\n%s\ngot:\n%s", c->what, c->limits, c->readings,
                 c->expected, got);
    made_free(m);
}

/* 2025-03-12 is a Wednesday. */
static void a_week_is_due_until_it_cannot_be_met(void **state)
{
    (void)state;
    static const struct due_case cases[] = {
        {"the open week and the one before", "", BOD("monthly-average", "", "", "", "2/week"),
         "EFF BOD5 mg/L 3=1 5=1 10=1", "2025-03-12", 3,
         "03-09..03-15 EFF BOD5 1/2 due; 03-02..03-08 EFF BOD5 2/2 taken"},
        {"the closed week was short", "", BOD("monthly-average", "", "", "", "2/week"),
         "EFF BOD5 mg/L 3=1 10=1 11=1", "2025-03-12", 3,
         "03-02..03-08 EFF BOD5 1/2 missed; 03-09..03-15 EFF BOD5 2/2 taken"},
        {"an open week that has no days left is missed", "",
         BOD("monthly-average", "", "", "", "3/week"), "EFF BOD5 mg/L 3=1 4=1 5=1 10=1",
         "2025-03-15", 1, "03-09..03-15 EFF BOD5 1/3 missed; 03-02..03-08 EFF BOD5 3/3 taken"},
        {"its last day still is one", "", BOD("monthly-average", "", "", "", "3/week"),
         "EFF BOD5 mg/L 3=1 4=1 5=1 10=1 11=1", "2025-03-15", 1,
         "03-09..03-15 EFF BOD5 2/3 due; 03-02..03-08 EFF BOD5 3/3 taken"},
        {"the day's own sample is on record", "", BOD("monthly-average", "", "", "", "3/week"),
         "EFF BOD5 mg/L 3=1 4=1 5=1 10=1 15=1", "2025-03-15", 1,
         "03-09..03-15 EFF BOD5 2/3 missed; 03-02..03-08 EFF BOD5 3/3 taken"},
        {"extra samples count", "", BOD("monthly-average", "", "", "", "1/week"),
         "EFF BOD5 mg/L 3=1 4=1 10=1", "2025-03-12", 1,
         "03-02..03-08 EFF BOD5 2/1 taken; 03-09..03-15 EFF BOD5 1/1 taken"},
        {"weeks ahead", "", BOD("monthly-average", "", "", "", "1/week"), "EFF BOD5 mg/L 3=1 10=1",
         "2025-03-12", 5,
         "03-16..03-22 EFF BOD5 0/1 due; 03-02..03-08 EFF BOD5 1/1 taken; 03-09..03-15 EFF BOD5 "
         "1/1 taken"},
        {"the plant's week starts on Monday", "week_starts,monday",
         BOD("monthly-average", "", "", "", "1/week"), "EFF BOD5 mg/L 9=1", "2025-03-12", 1,
         "03-10..03-16 EFF BOD5 0/1 due; 03-03..03-09 EFF BOD5 1/1 taken"},
        {"days 29 to 31 are in no week", "week_counts_in,days-1-7",
         BOD("monthly-average", "", "", "", "1/week"), "EFF BOD5 mg/L 22=1", "2025-03-30", 1,
         "03-22..03-28 EFF BOD5 1/1 taken"},
    };

    for (size_t i = 0; i < NELEM(cases); i++)
        check_due(&cases[i]);
}

static void days_months_quarters_and_years_too(void **state)
{
    (void)state;
    static const struct due_case cases[] = {
        {"daily samples by the week; Monday was missed", "", BOD("daily", "", "", "", "1/day"),
         "EFF BOD5 mg/L 2..8=1 9=1 11=1", "2025-03-12", 1,
         "03-09..03-15 EFF BOD5 2/7 missed; 03-02..03-08 EFF BOD5 7/7 taken"},
        {"continuous is every day: common practice, no source", "",
         BOD("daily", "", "", "", "continuous"), "EFF BOD5 mg/L 2..8=1 9..11=1", "2025-03-12", 1,
         "03-09..03-15 EFF BOD5 3/7 due; 03-02..03-08 EFF BOD5 7/7 taken"},
        {"two readings a day", "count_by,reading", BOD("daily", "", "", "", "2/day"),
         "EFF BOD5 mg/L 2..8@08:00=1 2..8@16:00=1 9..12@08:00=1 9..12@16:00=1", "2025-03-12", 1,
         "03-09..03-15 EFF BOD5 8/14 due; 03-02..03-08 EFF BOD5 14/14 taken"},
        {"a month", "", BOD("monthly-average", "", "", "", "2/month"),
         "EFF BOD5 mg/L 2025-02-03=1 3=1", "2025-03-12", 7,
         "02-01..02-28 EFF BOD5 1/2 missed; 03-01..03-31 EFF BOD5 1/2 due"},
        {"a quarter", "", BOD("quarterly-average", "", "", "", "1/quarter"),
         "EFF BOD5 mg/L 2024-12-31=1", "2025-03-12", 7,
         "01-01..03-31 EFF BOD5 0/1 due; 10-01..12-31 EFF BOD5 1/1 taken"},
        {"a year", "", BOD("annual-average", "", "", "", "1/year"), "EFF BOD5 mg/L 3=1",
         "2025-03-12", 7, "01-01..12-31 EFF BOD5 0/1 missed; 01-01..12-31 EFF BOD5 1/1 taken"},
    };

    for (size_t i = 0; i < NELEM(cases); i++)
        check_due(&cases[i]);
}

static void what_is_not_in_force_is_not_asked_for(void **state)
{
    (void)state;
    static const struct due_case cases[] = {
        {"out of season", "", BOD("monthly-average", "05-01..10-31", "", "", "1/week"), "",
         "2025-03-12", 7, ""},
        {"a season that has ended: its last whole week", "",
         BOD("monthly-average", "11-01..03-08", "", "", "1/week"), "", "2025-03-12", 7,
         "03-02..03-08 EFF BOD5 0/1 missed"},
        {"one that begins: daily samples from its first day", "",
         BOD("daily", "03-11..10-31", "", "", "1/day"), "EFF BOD5 mg/L 11=1 12=1", "2025-03-12", 1,
         "03-11..03-15 EFF BOD5 2/5 due"},
        {"dates in force", "", BOD("monthly-average", "", "", "2025-03-08", "1/week"),
         "EFF BOD5 mg/L 3=1", "2025-03-12", 7, "03-02..03-08 EFF BOD5 1/1 taken"},
        {"a tier that does not hold", "",
         "001,EFF,BOD5,concentration,monthly-average,max,30,mg/L,,,,EFF FLOW monthly-average > 2 "
         "MGD,1/week,,,,,,",
         "EFF FLOW MGD 3=1", "2025-03-12", 7, ""},
        {"before the plant's first day nothing is known", "since,2025-03-05",
         BOD("monthly-average", "", "", "", "1/week"), "EFF BOD5 mg/L 10=1", "2025-03-12", 1,
         "03-09..03-15 EFF BOD5 1/1 taken"},
    };

    for (size_t i = 0; i < NELEM(cases); i++)
        check_due(&cases[i]);
}

static void limits_on_one_series_merge_to_the_strictest(void **state)
{
    (void)state;
    static const struct due_case cases[] = {
        {"3/week over 1/month", "",
         BOD("monthly-average", "", "", "", "1/month") "\n" BOD("weekly-average", "", "", "",
                                                                "3/week"),
         "EFF BOD5 mg/L 3=1 4=1 5=1", "2025-03-12", 1,
         "03-09..03-15 EFF BOD5 0/3 due; 03-02..03-08 EFF BOD5 3/3 taken"},
        {"a load and a concentration of one frequency are one series", "",
         BOD("weekly-average", "", "", "",
             "1/week") "\n"
                       "001,EFF,BOD5,load,weekly-average,max,300,lb/d,,,,,1/week,,,,,,",
         "EFF BOD5 mg/L 3=1", "2025-03-12", 1,
         "03-09..03-15 EFF BOD5 0/1 due; 03-02..03-08 EFF BOD5 1/1 taken"},
        {"an interim and a final frequency, each on its days", "",
         BOD("weekly-average", "", "", "2025-03-08", "1/week") "\n" BOD("weekly-average", "",
                                                                        "2025-03-09", "", "3/week"),
         "EFF BOD5 mg/L 3=1", "2025-03-12", 1,
         "03-09..03-15 EFF BOD5 0/3 due; 03-02..03-08 EFF BOD5 1/1 taken"},
        {"a sum asks for its parts, at each of its points", "",
         "001,EFF+EF2,BOD5,load,weekly-average,max,300,lb/d,,,,,1/week,,,,,,\n"
         "001,EFF,NH3N+NO2N,concentration,monthly-average,max,9,mg/L,,,,,1/week,,,,,,",
         "EFF BOD5 mg/L 3=1 10=1\nEFF NH3N mg/L 3=1 10=1\nEFF NO2N mg/L 3=1 10=1", "2025-03-12", 1,
         "03-02..03-08 EF2 BOD5 0/1 missed; 03-09..03-15 EF2 BOD5 0/1 due; 03-02..03-08 EFF BOD5 "
         "1/1 taken; 03-02..03-08 EFF NH3N 1/1 taken; 03-02..03-08 EFF NO2N 1/1 taken; "
         "03-09..03-15 EFF BOD5 1/1 taken; 03-09..03-15 EFF NH3N 1/1 taken; 03-09..03-15 EFF NO2N "
         "1/1 taken"},
    };

    for (size_t i = 0; i < NELEM(cases); i++)
        check_due(&cases[i]);
}

static void codes_take_out_what_was_not_owed(void **state)
{
    (void)state;
    static const struct due_case cases[] = {
        {"R35: days without discharge are not required", "", BOD("daily", "", "", "", "1/day"),
         "EFF BOD5 mg/L 2..3=C 4..8=1 9..12=1", "2025-03-12", 1,
         "03-09..03-15 EFF BOD5 4/7 due; 03-02..03-08 EFF BOD5 5/5 taken"},
        {"R35: nor a week wholly without discharge", "",
         BOD("weekly-average", "", "", "", "1/week"), "EFF BOD5 mg/L 2..8=C 10=1", "2025-03-12", 1,
         "03-09..03-15 EFF BOD5 1/1 taken"},
        {"code 9: conditional monitoring not required", "", BOD("daily", "", "", "", "1/day"),
         "EFF BOD5 mg/L 2..3=code9 4..8=1 9..12=1", "2025-03-12", 1,
         "03-09..03-15 EFF BOD5 4/7 due; 03-02..03-08 EFF BOD5 5/5 taken"},
        {"code X: a lost sample is a missed one", "", BOD("daily", "", "", "", "1/day"),
         "EFF BOD5 mg/L 2..3=codeX 4..8=1 9..12=1", "2025-03-12", 1,
         "03-02..03-08 EFF BOD5 5/7 missed; 03-09..03-15 EFF BOD5 4/7 due"},
        {"less-thans are samples", "", BOD("weekly-average", "", "", "", "1/week"),
         "EFF BOD5 mg/L 3=<2 10=<2", "2025-03-12", 1,
         "03-02..03-08 EFF BOD5 1/1 taken; 03-09..03-15 EFF BOD5 1/1 taken"},
    };

    for (size_t i = 0; i < NELEM(cases); i++)
        check_due(&cases[i]);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(a_week_is_due_until_it_cannot_be_met),
        cmocka_unit_test(days_months_quarters_and_years_too),
        cmocka_unit_test(what_is_not_in_force_is_not_asked_for),
        cmocka_unit_test(limits_on_one_series_merge_to_the_strictest),
        cmocka_unit_test(codes_take_out_what_was_not_owed),
    };

    return cmocka_run_group_tests(tests, NULL, NULL);
}
