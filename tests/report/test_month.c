/* month: the monthly summary as a page. What a summary must hold: 40 CFR 122.41(j)(3) and (l)(4),
 * 122.22; figures are worked out by hand beside the checks. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <stdlib.h>
#include <string.h>

#include "sample.h"

static char *month_text(struct sample *s, const char *on)
{
    sample_make(s, on);
    return written_text(report_month_page(s->arena, &s->input), 100, false);
}

static void expect(const char *text, const char *part)
{
    if (strstr(text, part) == NULL)
        fail_msg("not in the page: %s\n%s", part, text);
}

/* The line of the daily table that begins with `day`, without its spaces. */
static const char *day_line(struct arena *a, const char *text, const char *day)
{
    const char *line = strstr(text, arena_print(a, "\n%s ", day));
    if (line == NULL)
        fail_msg("no line of %s", day);
    struct text t;
    text_init(&t, 1000);
    for (line++; *line != '\n'; line++)
        if (*line != ' ' || (t.length > 0 && t.at[t.length - 1] != ' '))
            text_add_char(&t, *line);
    const char *found = arena_text(a, t.at);
    text_free(&t);
    return found;
}

static void a_summary_holds_all_its_parts_in_order(void **state)
{
    static const char *const parts[] = {
        "Quill Ford Wastewater Plant, March 2025\n",
        "\nExceedances\n",
        "\nShortfalls of samples\n",
        "\nTargets passed",
        "\nEvery limit of the month\n",
        "\nHighest weekly averages\n",
        "\n\f\n",
        "Daily values, March 2025\n",
        "\nCodes in place of a value\n",
        "2025-03-10  EFF    CL2        E     analysis not conducted  sampler failed\n",
        "\nProcess figures\n",
        "\nRows set aside\n",
        "correct the value, or write ND",
        "march.csv:41:5\n",
        "\nCorrections\n",
        "88   8.8  mg/L  +decimal",
        "\nRules used\n",
        "- weeks begin on Sunday\n",
        "For these, another rule holds:\n",
        "- EFF ECOLI, monthly geomean: ",
        "\nFlows, loads and notes of limits\n",
        "- Loads at EFF use the flow EFF FLOW.\n",
        "- EFF BOD5, monthly average: =HYPERLINK(\"x\") is a note\n",
        "\nMethods on record\n",
        "- BOD5: SM 5210 B\n",
        "\nCautions\n",
        "- The permit governs over this summary.\n",
        "This is not legal advice.",
        "A licensed operator reviews this summary before anyone signs it.\n",
        "\nCertification\n",
        "the agency's own text must be used.\n",
        "\nName ____",
        "\nTitle ____",
        "\nSignature ____",
        "\nDate ____",
        "Made with weirbook 0.1.0, printed 2025-04-10\n",
        "Book head 3f2a9d0c4b7e1856",
    };
    (void)state;
    struct sample s;
    char *text = month_text(&s, "2025-04-10");
    const char *at = text;
    for (size_t i = 0; i < NELEM(parts); i++) {
        const char *found = strstr(at, parts[i]);
        if (found == NULL)
            fail_msg("not found in its place: %s\n%s", parts[i], at);
        at = found;
    }
    assert_in_range(widest(text), 1, 100);
    free(text);
    sample_free(&s);
}

/* Columns: INF BOD5, EFF FLOW, BOD5, TSS, CL2, PH, ECOLI. */
static void daily_values_show_signs_codes_weekends_and_marks(void **state)
{
    (void)state;
    struct sample s;
    char *text = month_text(&s, "2025-04-10");
    assert_string_equal(day_line(s.arena, text, "03-01"), "03-01 Sat 2.135 <0.010 6.8");
    assert_string_equal(day_line(s.arena, text, "03-03"), "03-03 182 2.149 <2.0 11 <0.010 6.8");
    assert_string_equal(day_line(s.arena, text, "03-10"), "03-10 189 2.107 6.5 8 E 6.9");
    assert_string_equal(day_line(s.arena, text, "03-18"), "03-18 4.163 0.031* 6.9");
    expect(text, "* beyond a daily or instantaneous limit in force on the day");
    free(text);
    sample_free(&s);
}

/* INF BOD5 on 13 days: 182+184+186+189+191+193+196+198+200+203+205+207+210 = 2544, / 13 = 195.69.
 * TSS: 11+8+10+8+10+12+49+51+53+12+9+11+9 = 253, / 13 = 19.46. CL2: one detection of 0.031 among
 * 30, less-thans as zero: 0.00103. No mean of pH: it is logarithmic (permit rules, section 4). The
 * mean of E. coli is geometric: (12 x 2420 x 12)^(1/3) = 70.4. BOD5 as the permit row has it: 11
 * x 6.5 / 13 = 5.5, a tie, to the even 6; with "<" as two results were less-thans. */
static void below_the_days_stand_mean_and_extremes(void **state)
{
    (void)state;
    struct sample s;
    char *text = month_text(&s, "2025-04-10");
    assert_string_equal(day_line(s.arena, text, "mean"), "mean 195.7 2.595 <6 19.5 <0.001 >70");
    assert_string_equal(day_line(s.arena, text, "lowest"), "lowest 182 2.100 <2.0 8 <0.010 6.8 12");
    assert_string_equal(day_line(s.arena, text, "highest"),
                        "highest 210 4.184 6.5 53 0.031 6.9 >2420");
    assert_string_equal(day_line(s.arena, text, "days"), "days 13 31 13 13 30 31 3");
    free(text);
    sample_free(&s);
}

static void readings_after_the_day_of_judgement_are_left_out(void **state)
{
    (void)state;
    struct sample s;
    char *text = month_text(&s, "2025-03-12");
    assert_string_equal(day_line(s.arena, text, "03-12"), "03-12 191 2.121 6.5 10 <0.010 6.9");
    expect(text, "\n03-13\n03-14\n03-15 Sat\n");
    free(text);
    sample_free(&s);
}

static void the_same_month_gives_the_same_bytes(void **state)
{
    (void)state;
    struct sample one;
    struct sample two;
    char *first = month_text(&one, "2025-04-10");
    char *second = month_text(&two, "2025-04-10");
    assert_string_equal(first, second);
    free(first);
    free(second);
    sample_free(&one);
    sample_free(&two);
}

static void a_month_without_readings_is_a_page_too(void **state)
{
    (void)state;
    struct sample s;
    struct fault f = {0};
    sample_make(&s, "2025-04-10");
    day_t month = sample_day("2025-02-01");
    s.frame = frame_new(s.arena, s.plant, month - 7, month_last(month));
    frame_close(s.frame);
    assert_int_equal(permit_month(s.arena, s.frame, month, sample_day("2025-04-10"), &s.month, &f),
                     OK);
    s.input = (struct month_input){.plant = s.plant,
                                   .frame = s.frame,
                                   .permit = &s.month,
                                   .version = "0.1.0",
                                   .head = "",
                                   .printed = sample_day("2025-04-10")};
    char *text = written_text(report_month_page(s.arena, &s.input), 100, false);
    expect(text,
           "Daily values, February 2025\n===========================\nNo readings this month.");
    expect(text, "no data");
    expect(text, "No row of this month was set aside.");
    expect(text, "No reading of this month was corrected.");
    assert_null(strstr(text, "Book head"));
    free(text);
    sample_free(&s);
}

/* Colorado discharge permits, definitions 11 and 12: all non-detects are reported as less than the
 * largest of their numbers. */
static void a_parameter_of_less_thans_alone_has_a_less_than_mean(void **state)
{
    (void)state;
    struct sample s;
    struct fault f = {0};
    sample_make(&s, "2025-04-10");
    day_t month = sample_day("2025-03-01");
    s.frame = frame_new(s.arena, s.plant, month - 7, month_last(month) + 7);
    sample_reading(s.arena, s.frame, "INF", "TSS", month, "<2.0");
    sample_reading(s.arena, s.frame, "INF", "TSS", month + 1, "<5.0");
    frame_close(s.frame);
    assert_int_equal(permit_month(s.arena, s.frame, month, sample_day("2025-04-10"), &s.month, &f),
                     OK);
    s.input.frame = s.frame;
    char *text = written_text(report_month_page(s.arena, &s.input), 100, false);
    assert_string_equal(day_line(s.arena, text, "mean"), "mean <5.0");
    free(text);
    sample_free(&s);
}

/* Sixty columns of long names: cut into tables that each fit. */
static void many_columns_are_cut_into_tables_that_fit(void **state)
{
    (void)state;
    struct arena *a = arena_new();
    struct plant_draft *d = sample_draft(a);
    struct text rows;
    text_init(&rows, 100000);
    for (int i = 0; i < 20; i++)
        text_print(&rows, "A-PARAMETER-OF-FORTY-LETTERS-INDEED-%04d|x|mg/L|3|mean|arithmetic|\n",
                   i);
    sample_rows(d, PLANT_FIELDS, "name|\xd0\x97\xd0\xb0\xd0\xb2\xd0\xbe\xd0\xb4\npermit|XX1\n");
    sample_rows(d, PLANT_POINTS, "INF|in|influent|\nMID|mid|other|\nEFF|out|effluent|\n");
    sample_rows(d, PLANT_PARAMETERS, rows.at);
    sample_rows(d, PLANT_LIMITS, "");
    text_free(&rows);
    struct plant *plant = sample_finish(d);
    day_t month = sample_day("2025-03-01");
    struct frame *frame = frame_new(a, plant, month, month_last(month));
    for (size_t i = 0; i < plant->parameter_count; i++)
        for (size_t point = 0; point < 3; point++)
            sample_reading(a, frame, plant->points[point].id, plant->parameters[i].id, month + 3,
                           "123456.789");
    frame_close(frame);
    struct permit_month m = {.month = month, .on = sample_day("2025-04-10")};
    const struct month_input in = {.plant = plant,
                                   .frame = frame,
                                   .permit = &m,
                                   .version = "0.1.0",
                                   .head = "",
                                   .printed = month};
    char *text = written_text(report_month_page(a, &in), 100, false);
    assert_in_range(widest(text), 1, 100);
    size_t found = 0;
    for (const char *at = text; (at = strstr(at, "123456.789")) != NULL; at++)
        found++;
    assert_int_equal(found, (int)(3 * plant->parameter_count) * 4); /* day, mean, lowest, highest */
    free(text);
    arena_free(a);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(a_summary_holds_all_its_parts_in_order),
        cmocka_unit_test(daily_values_show_signs_codes_weekends_and_marks),
        cmocka_unit_test(below_the_days_stand_mean_and_extremes),
        cmocka_unit_test(readings_after_the_day_of_judgement_are_left_out),
        cmocka_unit_test(the_same_month_gives_the_same_bytes),
        cmocka_unit_test(a_month_without_readings_is_a_page_too),
        cmocka_unit_test(a_parameter_of_less_thans_alone_has_a_less_than_mean),
        cmocka_unit_test(many_columns_are_cut_into_tables_that_fit),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
