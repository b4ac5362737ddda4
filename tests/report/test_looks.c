/* looks: the month under other rules in words, and drafts of notices. Wording is our own; figures
 * are tested in tests/permit. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "permit/rows.h"
#include "report/report.h"

static char *printed(struct arena *a, const struct page *p)
{
    const struct text_style style = {.width = 100};
    char *text = NULL, *copy;
    size_t length = 0;
    FILE *out = open_memstream(&text, &length);

    assert_non_null(out);
    write_text(out, p, &style);
    assert_int_equal(fclose(out), 0);
    copy = arena_text(a, text);
    free(text);
    return copy;
}

/* ---- other rules ---- */

static const char *const limits = "001,EFF,BOD5,concentration,monthly-average,max,1.2,mg/L\n"
                                  "001,EFF,BOD5,load,monthly-average,max,10,lb/d\n"
                                  "001,EFF,BOD5,removal,monthly-average,min,85,%";
static const char *const readings = "EFF BOD5 mg/L 4=1 11=2 18=<3\nINF BOD5 mg/L 4=20 11=20\n"
                                    "PE BOD5 mg/L 4=9\nEFF FLOW MGD 1..31=1";

/* A value that is tried and the words it has in a sentence. */
static const struct {
    const char *rule, *words;
} values[] = {
    {"nondetect=zero", "with less-thans as zero"},
    {"nondetect=half", "with less-thans as half"},
    {"nondetect=full", "with less-thans as their number"},
    {"nondetect=median", "by the median where a less-than takes part"},
    {"sign=any", "with a sign when any result has it"},
    {"sign=all", "with a sign when all results have it"},
    {"sign=never", "without a sign"},
    {"geomean_zero=0.5", "with zeros as 0.5 in a geomean"},
    {"week_starts=monday", "with weeks from Monday"},
    {"week_counts_in=end", "with weeks in the month of their last day"},
    {"week_counts_in=start", "with weeks in the month of their first day"},
    {"week_counts_in=most-days", "with weeks in the month of most of their days"},
    {"week_counts_in=split", "with weeks cut at the month's ends"},
    {"week_counts_in=days-1-7", "with days 1-7, 8-14, 15-21 and 22-28 as weeks"},
    {"rounding=half-even", "with a dropped 5 to the even digit"},
    {"rounding=half-up", "with a dropped 5 up"},
    {"digits=limit", "with the limit's decimals"},
    {"digits=figures", "with the limit's significant figures"},
    {"digits=3", "with 3 decimals"},
    {"compare=rounded", "as the rounded figure"},
    {"compare=raw", "as the exact figure"},
    {"removal=averages", "as the removal of averages"},
    {"removal=paired", "as the removal of days with both"},
    {"removal=loads", "as the removal of average loads"},
    {"removal=daily", "as the mean of daily removals"},
    {"load_factor=8.345404", "with the load factor 8.345404"},
    {"load_average=daily", "as the mean of daily loads"},
    {"load_average=product", "as mean flow times mean concentration"},
    {"count_by=day", "with samples counted by day"},
    {"count_by=reading", "with samples counted by reading"},
    {"no_discharge=skip", "with days without discharge left out"},
    {"no_discharge=zero", "with days without discharge as zero"},
    {"dnq=value", "with results below the reporting limit as their number"},
    {"dnq=zero", "with results below the reporting limit as zero"},
    {"dnq=half", "with results below the reporting limit as half"},
    {"long_average=default", "with the usual long average"},
    {"long_average=months", "as the mean of months"},
    {"long_average=days", "as the mean of days"},
    {"percentile=nearest-rank", "as the percentile at its nearest rank"},
    {"percentile=linear", "as the percentile between ranks"},
    {"percentile=weibull", "as the percentile at its rank of n + 1"},
    {"load_total=days", "as mean load times days"},
    {"load_total=sum", "as the sum of measured loads"},
    {"flow=INF", "with the flow of INF"},
    {"influent=PE", "from the influent PE"},
    {"window=days", "over calendar days"},
    {"window=results", "over the last days with a result"},
};

/* The difference is made by hand, so that every value has its sentence whether it changes this
 * month or not. */
static void every_value_of_every_rule_has_words(void **state)
{
    struct made *m = made_plant("2025-03", "", limits, "");
    struct permit_month pm;
    struct fault f = {0};

    (void)state;
    made_readings(m, readings);
    assert_int_equal(work_month(m, "2025-05-01", &pm, &f), OK);
    for (size_t i = 0; i < NELEM(values); i++) {
        struct rules *r = arena_alloc(m->arena, sizeof *r);
        struct permit_row other = pm.rows[0];
        struct permit_difference d = {
            &pm.rows[0], &other, pm.rows[0].limit, "", "zero", "", RULE_NONDETECT, 1, 0, 0, true};
        struct permit_comparison c = {.base = pm, .at = &d, .count = 1, .verdicts = 1};
        const char *page, *said;

        assert_int_equal(plant_rules_read(m->arena, m->plant, "", values[i].rule, r, &f), OK);
        while (!r->own[d.first])
            d.first++;
        d.word = r->word[d.first];
        d.value = r->text[d.first];
        d.word_in_force = d.word;
        d.in_force = d.value;
        other.verdict = VERDICT_EXCEEDED;
        page = printed(m->arena, report_rules_page(m->arena, m->plant, &c));
        said = arena_print(m->arena, "EXCEEDED %s (<1.0", values[i].words);
        /* Lines are broken at the page's width: words alone are compared. */
        char *flat = arena_text(m->arena, page);
        for (char *s = flat; *s != '\0'; s++)
            if (*s == '\n')
                *s = ' ';
        if (strstr(flat, said) == NULL)
            fail_msg("%s: no '%s' in\n%s", values[i].rule, said, page);
    }
    made_free(m);
}

/* ---- notices ---- */

/* Sixty readings of one day take more than one page. */
static const char *many_readings(struct arena *a)
{
    const char *text = "EFF PH pH";

    for (int i = 0; i < 60; i++)
        text = arena_print(a, "%s 6@%02d:%02d=5.%d", text, 8 + i / 10, i % 10 * 6, 1 + i % 9);
    return text;
}

static char *drafted(struct made *m, const struct notice *n)
{
    char *text = NULL, *copy;
    size_t length = 0;
    FILE *out = open_memstream(&text, &length);

    assert_non_null(out);
    report_notice(out, m->arena, n);
    assert_int_equal(fclose(out), 0);
    copy = arena_text(m->arena, text);
    free(text);
    return copy;
}

static void every_page_of_a_draft_says_so(void **state)
{
    static const char head[] = "DRAFT - not sent.";
    static const char *const remarks[] = {"2025-03-06: acid feed stuck open"};
    struct made *m =
        made_plant("2025-03", "", "001,EFF,PH,concentration,instantaneous,min,6.0,pH", "");
    struct permit_month pm;
    struct permit_finding *found;
    struct frame *frame;
    struct fault f = {0};
    size_t pages = 1, marked = 0;
    char *text;

    (void)state;
    made_readings(m, many_readings(m->arena));
    frame = needed_frame(m);
    assert_int_equal(permit_month(m->arena, frame, m->month, m->month + 60, &pm, &f), OK);
    assert_int_equal(permit_findings(m->arena, frame, &pm, &found), 1);
    assert_int_equal(found[0].beyond, 60);
    for (int written = 0; written < 2; written++) {
        const struct permit_finding *one = &found[0];
        const struct notice n = {.plant = m->plant,
                                 .frame = frame,
                                 .finding = &one,
                                 .findings = 1,
                                 .written = written == 1,
                                 .aware = {m->month + 6, 540},
                                 .remark = remarks,
                                 .remarks = NELEM(remarks)};

        text = drafted(m, &n);
        assert_int_equal(strncmp(text, head, sizeof head - 1), 0);
        pages = 1;
        for (const char *s = text; (s = strchr(s, '\f')) != NULL; pages++)
            assert_int_equal(strncmp(++s, head, sizeof head - 1), 0);
        assert_true(pages >= 2);
        marked = 0;
        for (const char *s = text; (s = strstr(s, "DRAFT, page ")) != NULL; s++)
            marked++;
        assert_int_equal(marked, pages);
        assert_non_null(strstr(text, remarks[0]));
        assert_non_null(strstr(text, written == 1 ? "To be given by: 2025-03-12 09:00"
                                                  : "To be given by: 2025-03-08 09:00"));
        assert_non_null(strstr(text, "What happened and its cause"));
        for (const char *s = text; *s != '\0'; s += strcspn(s, "\n") + 1)
            assert_true(strcspn(s, "\n") <= 80);
    }
    made_free(m);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(every_value_of_every_rule_has_words),
        cmocka_unit_test(every_page_of_a_draft_says_so),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
