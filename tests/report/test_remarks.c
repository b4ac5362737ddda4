/* remarks: beside which rows a remark stands, and that it changes none of their figures. Which
 * weeks count in March 2025 (begun on Sunday, counted where they end): by the calendar, 23 February
 * to 1 March and four more; common practice, no source. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <stdlib.h>
#include <string.h>

#include "sample.h"

static struct month_remark remark(const char *point, const char *parameter, const char *statistic,
                                  const char *from, const char *to)
{
    return (struct month_remark){.number = 12,
                                 .kind = "cause",
                                 .event = "",
                                 .from = sample_day(from),
                                 .to = sample_day(to),
                                 .point = point,
                                 .parameter = parameter,
                                 .statistic = statistic,
                                 .text = "polymer pump failed",
                                 .who = "day shift",
                                 .when = "2025-04-02T09:10:11Z"};
}

static size_t count(const char *text, const char *part)
{
    size_t n = 0;
    for (const char *at = strstr(text, part); at != NULL; at = strstr(at + 1, part))
        n++;
    return n;
}

/* TSS at EFF has a weekly average, a monthly load and a daily target. */
static void a_remark_stands_beside_each_row_that_it_is_about(void **state)
{
    static const struct {
        const char *point, *parameter, *statistic, *from, *to;
        size_t rows;
        bool listed;
    } cases[] = {
        {"EFF", "TSS", "", "2025-03-18", "2025-03-18", 3, true},
        {"EFF", "TSS", "weekly-average", "2025-03-18", "2025-03-18", 1, true},
        {"EFF", "TSS", "daily", "2025-03-18", "2025-03-18", 1, true},
        {"EFF", "TSS", "monthly-median", "2025-03-18", "2025-03-18", 0, true},
        /* over a week's end: two weeks */
        {"EFF", "TSS", "weekly-average", "2025-03-22", "2025-03-23", 2, true},
        {"EFF", "TSS", "weekly-average", "2025-03-22", "2025-03-22", 1, true},
        /* the first week that counts begins on 23 February, the last one ends on 29 March */
        {"EFF", "TSS", "", "2025-02-23", "2025-02-23", 1, true},
        {"EFF", "TSS", "", "2025-02-22", "2025-02-22", 0, false},
        {"EFF", "TSS", "", "2025-03-30", "2025-03-30", 2, true},
        {"EFF", "TSS", "", "2025-04-01", "2025-04-01", 0, false},
        {"EFF", "TSS", "", "2024-01-01", "2026-12-31", 7, true},
        /* what does not name both is about no one row */
        {"EFF", "", "", "2025-03-18", "2025-03-18", 0, true},
        {"", "TSS", "", "2025-03-18", "2025-03-18", 0, true},
        {"", "", "", "2025-03-18", "2025-03-18", 0, true},
        {"INF", "TSS", "", "2025-03-18", "2025-03-18", 0, true},
    };
    (void)state;
    struct sample s;
    sample_make(&s, "2025-04-10");
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct month_remark one = remark(cases[i].point, cases[i].parameter, cases[i].statistic,
                                         cases[i].from, cases[i].to);
        const struct month_remarks remarks = {.at = &one, .count = 1};
        char *csv = written_csv(report_permit_table(s.arena, &s.month, &remarks));
        char *page =
            written_text(report_permit_page(s.arena, s.plant, &s.month, &remarks), 100, false);
        if (count(csv, "remark 12: polymer pump failed\n") != cases[i].rows)
            fail_msg("case %zu: %s", i, csv);
        if ((strstr(page, "\nRemarks\n") != NULL) != cases[i].listed)
            fail_msg("case %zu: %s", i, page);
        free(csv);
        free(page);
    }
    sample_free(&s);
}

static void no_figure_and_no_verdict_changes_by_a_remark(void **state)
{
    (void)state;
    struct sample s;
    sample_make(&s, "2025-04-10");
    struct month_remark one = remark("EFF", "TSS", "", "2025-03-01", "2025-03-31");
    const struct month_remarks remarks = {.at = &one, .count = 1};
    const struct table *without = report_permit_table(s.arena, &s.month, NULL);
    const struct table *with = report_permit_table(s.arena, &s.month, &remarks);
    assert_int_equal(without->rows, with->rows);
    for (size_t i = 0; i < without->rows * without->columns; i++)
        if (i % without->columns != without->columns - 1) /* the note */
            assert_string_equal(without->cell[i].text, with->cell[i].text);
    sample_free(&s);
}

static void a_note_of_its_own_stands_before_the_remark(void **state)
{
    (void)state;
    struct sample s;
    sample_make(&s, "2025-04-10");
    struct month_remark two[] = {remark("EFF", "TSS", "", "2025-03-18", "2025-03-18"),
                                 remark("EFF", "TSS", "", "2025-03-19", "2025-03-19")};
    two[1].number = 13;
    two[1].text = "spare pump, \"old\" one";
    const struct month_remarks remarks = {.at = two, .count = 2};
    for (size_t i = 0; i < s.month.count; i++)
        if (s.month.rows[i].figure[0] != '\0')
            s.month.rows[i].note = "noted";
    char *csv = written_csv(report_permit_table(s.arena, &s.month, &remarks));
    assert_int_equal(3, count(csv, ",\"noted; remark 12: polymer pump failed; "
                                   "remark 13: spare pump, \"\"old\"\" one\"\n"));
    free(csv);
    sample_free(&s);
}

static void remarks_come_after_what_is_beyond_and_before_every_limit(void **state)
{
    (void)state;
    struct sample s;
    sample_make(&s, "2025-04-10");
    struct month_remark two[] = {remark("EFF", "TSS", "weekly-average", "2025-03-16", "2025-03-22"),
                                 remark("", "", "", "2025-03-17", "2025-03-17")};
    two[1].kind = "event";
    two[1].event = "wet-weather";
    two[1].text = "rain for two days; the whole of it is told here at such a length that no line "
                  "of a page can hold it, and it goes on over several of them";
    s.input.remarks = (struct month_remarks){.at = two, .count = 2};
    char *text = written_text(report_month_page(s.arena, &s.input), 100, false);
    static const char *const order[] = {
        "\nExceedances\n", "\nShortfalls of samples\n",   "\nRemarks\n", "2025-03-16 to",
        "EFF TSS",         "polymer pump failed",         "2025-03-17",  "plant",
        "wet-weather",     "\nEvery limit of the month\n"};
    const char *at = text;
    for (size_t i = 0; i < NELEM(order); i++) {
        at = strstr(at, order[i]);
        if (at == NULL)
            fail_msg("not in its place: %s\n%s", order[i], text);
    }
    assert_true(widest(text) <= 100);
    free(text);
    sample_free(&s);
}

static void a_report_of_an_earlier_book_says_so(void **state)
{
    (void)state;
    struct sample s;
    sample_make(&s, "2025-04-10");
    s.input.as_of = "2025-04-12";
    char *text = written_text(report_month_page(s.arena, &s.input), 100, false);
    assert_non_null(strstr(text, "As the book stood at the end of 2025-04-12 (UTC)"));
    free(text);
    sample_free(&s);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(a_remark_stands_beside_each_row_that_it_is_about),
        cmocka_unit_test(no_figure_and_no_verdict_changes_by_a_remark),
        cmocka_unit_test(a_note_of_its_own_stands_before_the_remark),
        cmocka_unit_test(remarks_come_after_what_is_beyond_and_before_every_limit),
        cmocka_unit_test(a_report_of_an_earlier_book_says_so),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
