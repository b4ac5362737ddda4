/* permit: the permit summary as rows and as a page, from rows made by hand. Which columns and which
 * cells stay empty is the interface of the program (its manual); the wording is our own. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <stdlib.h>
#include <string.h>

#include "sample.h"

#define HEADER                                                                                     \
    "outfall,point,parameter,basis,statistic,from,to,on,figure,unit,bound,limit,verdict,times,"    \
    "samples,required,note\n"

static struct permit_row row(const struct limit *l, const char *from, const char *to,
                             const char *figure, enum verdict verdict)
{
    return (struct permit_row){.limit = l,
                               .from = sample_day(from),
                               .to = sample_day(to),
                               .on = DAY_NONE,
                               .figure = figure,
                               .unit = l->unit_text,
                               .verdict = verdict,
                               .samples = 13,
                               .note = ""};
}

static struct limit limit(const char *point, const char *parameter, enum statistic statistic,
                          enum bound bound, const char *number, const char *unit)
{
    struct limit l = {.outfall = "001",
                      .point_text = point,
                      .parameter_text = parameter,
                      .statistic = statistic,
                      .statistic_text = statistic_words[statistic],
                      .bound = bound,
                      .limit_text = number,
                      .unit_text = unit,
                      .group = "",
                      .note = ""};
    l.limit.set = number[0] != '\0';
    return l;
}

static const struct plant bare = {
    .name = "Quill Ford", .permit = "XX0012345", .receiving_water = "Quill Creek"};

static void a_row_has_seventeen_cells_and_empty_ones_where_nothing_is_said(void **state)
{
    (void)state;
    struct arena *a = arena_new();
    struct limit daily = limit("EFF", "CL2", STAT_DAILY, BOUND_MAX, "0.019", "mg/L");
    struct limit average = limit("EFF", "BOD5", STAT_MONTHLY_AVERAGE, BOUND_MIN, "85", "%");
    average.basis = BASIS_REMOVAL;
    struct limit report = limit("EFF+EF2", "FLOW", STAT_MONTHLY_TOTAL, BOUND_REPORT, "", "MG");
    report.basis = BASIS_FLOW;
    report.outfall = "";
    struct permit_row rows[] = {
        row(&daily, "2025-03-01", "2025-03-31", "0.031", VERDICT_EXCEEDED),
        row(&average, "2025-03-01", "2025-03-31", "-3", VERDICT_EXCEEDED),
        row(&report, "2025-03-01", "2025-03-31", "", VERDICT_NO_DATA),
    };
    rows[0].on = sample_day("2025-03-18");
    rows[0].has_times = true;
    rows[0].times = 1;
    rows[0].has_required = true;
    rows[0].required = 31;
    rows[2].note = "=no figure for its condition";
    struct permit_month m = {.month = sample_day("2025-03-01"),
                             .on = sample_day("2025-04-10"),
                             .rows = rows,
                             .count = 3};
    char *csv = written_csv(report_permit_table(a, &m, NULL));
    assert_string_equal(csv, HEADER
                        "001,EFF,CL2,concentration,daily,2025-03-01,2025-03-31,2025-03-18,0.031,"
                        "mg/L,max,0.019,exceeded,1,13,31,\n"
                        "001,EFF,BOD5,removal,monthly-average,2025-03-01,2025-03-31,,-3,%,min,85,"
                        "exceeded,,13,,\n"
                        ",EFF+EF2,FLOW,flow,monthly-total,2025-03-01,2025-03-31,,,MG,report,,"
                        "no-data,,13,,'=no figure for its condition\n");
    char *json = written_json(report_permit_table(a, &m, NULL));
    /* A figure is text, a limit and a count are numbers as written. */
    assert_non_null(strstr(json, "\"figure\":\"0.031\",\"unit\":\"mg/L\",\"bound\":\"max\","
                                 "\"limit\":0.019,\"verdict\":\"exceeded\",\"times\":1,"
                                 "\"samples\":13,\"required\":31,\"note\":null}"));
    assert_non_null(strstr(json, "\"figure\":\"-3\",\"unit\":\"%\""));
    assert_non_null(strstr(json, "{\"outfall\":null,\"point\":\"EFF+EF2\""));
    free(csv);
    free(json);
    arena_free(a);
}

static void the_worst_news_comes_first(void **state)
{
    (void)state;
    struct sample s;
    sample_make(&s, "2025-04-10");
    char *text = written_text(report_permit_page(s.arena, s.plant, &s.month, NULL), 100, false);
    static const char *const order[] = {
        "Quill Ford Wastewater Plant, March 2025\n",
        "Permit XX0012345, outfall 001, discharging to Quill Creek\n",
        "3 exceedances, 1 shortfall of samples, 1 target passed\n",
        "\nExceedances\n",
        "EFF    TSS weekly average",
        "\nShortfalls of samples\n",
        "EFF CL2, daily maximum (at most 0.019 mg/L): 30 taken of 31 required, ",
        "\nTargets passed",
        "\nEvery limit of the month\n",
        "EFF: Final effluent, outfall 001\n",
        "TSS           weekly average   Mar 16-22",
        "51 mg/L",
        "at most 45 mg/L",
        "3/3  EXCEEDED\n",
        "\nHighest weekly averages\n",
        /* 49, 51 and 53: the mean is 51 */
        "EFF TSS, weekly average: highest 51 mg/L, 2025-03-16 to 2025-03-22\n",
    };
    const char *at = text;
    for (size_t i = 0; i < NELEM(order); i++) {
        const char *found = strstr(at, order[i]);
        if (found == NULL)
            fail_msg("not found in its place: %s", order[i]);
        at = found;
    }
    free(text);
    sample_free(&s);
}

static void every_verdict_has_its_word(void **state)
{
    static const struct {
        enum verdict verdict;
        const char *word;
    } cases[] = {
        {VERDICT_MET, "met"},
        {VERDICT_EXCEEDED, "EXCEEDED"},
        {VERDICT_REPORT, "report"},
        {VERDICT_TARGET_MET, "target met"},
        {VERDICT_TARGET_PASSED, "target passed"},
        {VERDICT_NO_DATA, "no data"},
        {VERDICT_NO_DISCHARGE, "no discharge"},
        {VERDICT_OPEN, "open"},
    };
    (void)state;
    struct arena *a = arena_new();
    struct limit l = limit("EFF", "BOD5", STAT_MONTHLY_AVERAGE, BOUND_MAX, "30", "mg/L");
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct permit_row one = row(&l, "2025-03-01", "2025-03-31", "", cases[i].verdict);
        struct permit_month m = {.month = sample_day("2025-03-01"),
                                 .on = sample_day("2025-04-10"),
                                 .rows = &one,
                                 .count = 1};
        char *text = written_text(report_permit_page(a, &bare, &m, NULL), 100, false);
        const char *expected = arena_print(a, "  %s\n", cases[i].word);
        if (strstr(text, expected) == NULL)
            fail_msg("no word %s in:\n%s", cases[i].word, text);
        free(text);
    }
    arena_free(a);
}

static void a_month_that_is_not_over_says_so(void **state)
{
    (void)state;
    struct sample s;
    sample_make(&s, "2025-03-12");
    char *text = written_text(report_permit_page(s.arena, s.plant, &s.month, NULL), 100, false);
    assert_non_null(strstr(text, "Judged on 2025-03-12, before the end of the month"));
    assert_non_null(strstr(text, "open\n"));
    assert_null(strstr(text, "Exceedances\n"));
    free(text);
    sample_free(&s);
}

static void a_month_without_limits_says_so(void **state)
{
    (void)state;
    struct arena *a = arena_new();
    struct permit_month m = {.month = sample_day("2025-03-01"), .on = sample_day("2025-04-10")};
    char *text = written_text(report_permit_page(a, &bare, &m, NULL), 100, false);
    assert_string_equal(text, "Quill Ford, March 2025\n"
                              "======================\n"
                              "Permit XX0012345, discharging to Quill Creek\n"
                              "\n"
                              "no exceedance, no shortfall of samples\n"
                              "\n"
                              "Every limit of the month\n"
                              "========================\n"
                              "No limit is in force this month.\n"
                              "\n");
    free(text);
    arena_free(a);
}

/* Long and foreign names, long units, every statistic and bound, 200 limits. */
static void no_line_is_wider_than_the_page(void **state)
{
    static const char *const points[] = {
        "EFF", "THE-OUTFALL-AT-THE-END-OF-THE-OLD-ROAD-1",
        "\xd0\xa1\xd1\x82\xd0\xbe\xd0\xba-\xd0\xb8\xd0\xb7-\xd0\xbe\xd1\x87\xd0\xb8\xd1\x81\xd1\x82"
        "\xd0\xba\xd0\xb8",
        "\xe6\x9c\x80\xe7\xb5\x82\xe6\xb2\x88\xe6\xae\xbf\xe6\xb1\xa0\xe6\x94\xbe\xe6\xb5\x81"
        "\xe5\x8f\xa3\xe6\x9c\x80\xe7\xb5\x82\xe6\xb2\x88\xe6\xae\xbf\xe6\xb1\xa0\xe6\x94\xbe"};
    static const char *const units[] = {"mg/L", "MPN/100mL", "lb/d", "%"};
    static const char *const numbers[] = {"30", "0.019", "126000000", "85.0"};
    static const int widths[] = {100, 80};
    (void)state;
    struct arena *a = arena_new();
    struct limit *l = arena_alloc(a, 200 * sizeof *l);
    struct permit_row *rows = arena_alloc(a, 200 * sizeof *rows);
    for (size_t i = 0; i < 200; i++) {
        l[i] =
            limit(points[i % 4], i % 3 == 0 ? "NH3N+NO2N+NO3N" : "A-PARAMETER-OF-FORTY-LETTERS-X",
                  (enum statistic)(i % STATISTICS), (enum bound)(i % BOUNDS),
                  i % BOUNDS == BOUND_REPORT ? "" : numbers[i % 4], units[i % 4]);
        l[i].outfall = i % 2 == 0 ? "001" : "A-VERY-LONG-NAME-OF-AN-OUTFALL-INDEED-OK";
        l[i].basis = (enum basis)(i % BASES);
        rows[i] = row(&l[i], "2025-03-01", "2025-03-31", i % 5 == 0 ? "" : "<1234567.890",
                      (enum verdict)(i % VERDICTS));
        rows[i].note =
            i % 7 == 0 ? "another row of its group is met: EFF BOD5 monthly-average" : "";
        rows[i].has_required = i % 2 == 0;
        rows[i].required = 999;
    }
    struct permit_month m = {.month = sample_day("2025-03-01"),
                             .on = sample_day("2025-04-10"),
                             .rows = rows,
                             .count = 200,
                             .exceeded = 25};
    const struct page *p = report_permit_page(a, &bare, &m, NULL);
    for (size_t i = 0; i < NELEM(widths); i++) {
        char *text = written_text(p, widths[i], false);
        assert_in_range(widest(text), 1, widths[i]);
        free(text);
    }
    arena_free(a);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(a_row_has_seventeen_cells_and_empty_ones_where_nothing_is_said),
        cmocka_unit_test(the_worst_news_comes_first),
        cmocka_unit_test(every_verdict_has_its_word),
        cmocka_unit_test(a_month_that_is_not_over_says_so),
        cmocka_unit_test(a_month_without_limits_says_so),
        cmocka_unit_test(no_line_is_wider_than_the_page),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
