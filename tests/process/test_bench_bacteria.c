/* Bench sheets of bacteria beside published counts, and the table of most probable numbers beside
 * the likelihood equation. */
#include <math.h>
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

#include <cmocka.h>

#include "process/bench_tubes.h"
#include "process/sheets.h"

struct answer {
    const char *sheet, *rows, *parameter, *text, *source;
};

static void check_answers(const struct answer *cases, size_t count)
{
    for (size_t i = 0; i < count; i++) {
        struct sheets s = sheet_work(cases[i].sheet, "EFF", cases[i].rows);
        const char *text = sheets_text(&s, cases[i].parameter);
        if (strncmp(text, cases[i].text, strlen(cases[i].text)) != 0 ||
            (text[0] != 'r' && strcmp(text, cases[i].text) != 0))
            fail_msg("%s %s: '%s' where %s says '%s'", cases[i].sheet, cases[i].rows, text,
                     cases[i].source, cases[i].text);
        sheets_free(&s);
    }
}

static const char rule_1[] = "formula reference, membrane filters, rule 1";
static const char rule_2[] = "formula reference, membrane filters, rule 2";
static const char rule_3[] = "formula reference, membrane filters, rule 3";
static const char rule_4[] = "formula reference, membrane filters, rule 4";
static const char voided[] = "formula reference: more than 200 of all kinds voids a filter";

static void filters_give_what_is_published(void **state)
{
    (void)state;
    static const struct answer cases[] = {
        {"fecal-membrane", "1 colonies 34; 1 volume 50", "FCOLI", "68",
         "MWPCA coliform article, part 3"},
        {"fecal-membrane", "1 colonies 55; 1 volume 100", "FCOLI", "55",
         "MWPCA coliform article, part 3"},
        {"fecal-membrane", "1 colonies 15; 1 volume 25; 2 colonies 34; 2 volume 50", "FCOLI", "68",
         "MWPCA coliform article, part 3 (the 15-colony filter is set aside)"},
        /* 8 is below the range: 100 * 89 / 161.5 is 55.1. */
        {"fecal-membrane",
         "1 colonies 8; 1 volume 11.8; 2 colonies 31; 2 volume 48.5; 3 colonies 58; 3 volume 113",
         "FCOLI", "55", "formula reference, case F732"},
        {"fecal-membrane", "1 colonies 20; 1 volume 100", "FCOLI", "20", rule_1},
        {"fecal-membrane", "1 colonies 60; 1 volume 100", "FCOLI", "60", rule_1},
        {"fecal-membrane", "1 colonies 61; 1 volume 100", "FCOLI", "E 61", rule_2},
        {"fecal-membrane", "1 colonies 19; 1 volume 100", "FCOLI", "E 19", rule_3},
        /* The smallest volume alone: 750. */
        {"fecal-membrane", "1 colonies 75; 1 volume 10; 2 colonies 140; 2 volume 25", "FCOLI",
         "E 750", "formula reference, case F779"},
        {"ecoli-membrane", "1 colonies 72; 1 volume 50; 2 colonies 18; 2 volume 10", "ECOLI", "140",
         "formula reference, case F781: 144, to two figures"},
        {"ecoli-membrane", "1 colonies 80; 1 volume 100", "ECOLI", "80", rule_1},
        {"ecoli-membrane", "1 colonies 81; 1 volume 100", "ECOLI", "E 81", rule_2},
        {"enterococci-membrane", "1 colonies 61; 1 volume 100", "ENTERO", "E 61",
         "EPA Method 1600, from memory: 20 to 60"},
        /* 7 colonies in 160 mL: 4.375. */
        {"fecal-membrane", "1 colonies 5; 1 volume 100; 2 colonies 2; 2 volume 60", "FCOLI",
         "E 4.4", rule_3},
        {"fecal-membrane", "1 colonies 0; 1 volume 100; 2 colonies 0; 2 volume 50", "FCOLI", "<1",
         rule_4},
        {"fecal-membrane", "1 colonies 0; 1 volume 30", "FCOLI", "<3.3", rule_4},
        {"fecal-membrane", "1 colonies 201; 1 volume 10; 2 colonies 250; 2 volume 1", "FCOLI",
         ">20000", voided},
        {"fecal-membrane", "1 colonies 200; 1 volume 10", "FCOLI", "E 2000", rule_2},
        {"fecal-membrane",
         "1 colonies 30; 1 volume 50; 1 total_colonies 201; 2 colonies 22; 2 volume 25; 2 "
         "total_colonies 200",
         "FCOLI", "88", voided},
        {"fecal-membrane", "1 colonies 30; 1 volume 50; 1 total_colonies 29", "FCOLI",
         "refused: filter '1' has more colonies than its total", "by hand"},
        {"fecal-membrane", "1 volume 50; 1 colonies 3.5", "FCOLI",
         "refused: 'colonies' is '3.5'; count whole ones", "by hand"},
        {"fecal-membrane", "1 volume 50; 1 colonies TNTC", "FCOLI",
         "refused: 'TNTC' is not a number for 'colonies'", "by hand"},
        {"fecal-membrane", "1 colonies 30; 1 volume 0", "FCOLI", "refused: 'volume' is '0'",
         "by hand"},
    };
    check_answers(cases, NELEM(cases));
}

static void a_blank_with_colonies_marks_the_count(void **state)
{
    (void)state;
    struct sheets s =
        sheet_work("fecal-membrane", "EFF", "1 colonies 34; 1 volume 50; blank colonies 1");
    assert_string_equal(sheets_text(&s, "FCOLI"), "E 68");
    sheets_free(&s);
    s = sheet_work("fecal-membrane", "EFF", "1 colonies 34; 1 volume 50; blank colonies 0");
    assert_string_equal(sheets_text(&s, "FCOLI"), "68");
    sheets_free(&s);
    s = sheet_work("fecal-membrane", "EFF", "1 colonies 0; 1 volume 50; blank colonies 1");
    assert_string_equal(sheets_text(&s, "FCOLI"), "<2"); /* keeps its less-than */
    assert_non_null(strstr(sheets_reading(&s, "FCOLI")->reading.detail->note, "CHECK FAILED"));
    sheets_free(&s);
}

/* ---- tubes ---- */

#define SERIES(p, q, r)                                                                            \
    "1 volume 10; 1 tubes 5; 1 positives " p "; 2 volume 1; 2 tubes 5; 2 positives " q             \
    "; 3 volume 0.1; 3 tubes 5; 3 positives " r

static void tubes_give_what_is_published(void **state)
{
    (void)state;
    static const struct answer cases[] = {
        {"ecoli-tubes", SERIES("5", "1", "0"), "ECOLI", "33",
         "Health Canada MPN Table I, reading 5-1-0"},
        {"fecal-tubes", SERIES("4", "2", "1"), "FCOLI", "26",
         "formula reference, case F733: 26.44168073"},
        {"coliform-tubes", SERIES("0", "0", "0"), "TCOLI", "<1.8", "SM 9221 C, from memory"},
        {"enterococci-tubes", SERIES("5", "5", "5"), "ENTERO", ">1600", "SM 9221 C, from memory"},
        {"ecoli-tubes", SERIES("0", "1", "0"), "ECOLI", "1.8", "SM 9221 C, from memory"},
        /* A tenth of the volumes: ten times the index. */
        {"ecoli-tubes",
         "a volume 0.01; a tubes 5; a positives 0; b volume 1; b tubes 5; b positives 5; c volume "
         "0.1; c tubes 5; c positives 1",
         "ECOLI", "330", "by hand: 33 scaled by 10 / 1"},
        {"ecoli-tubes",
         "1 volume 100; 1 tubes 5; 1 positives 0; 2 volume 10; 2 tubes 5; 2 positives 0; 3 volume "
         "1; 3 tubes 5; 3 positives 0",
         "ECOLI", "<0.18", "by hand: 1.8 x 10 / 100"},
        {"ecoli-tubes", "1 volume 10; 1 tubes 5; 1 positives 3", "ECOLI", "9.5",
         "formula reference, case F788: 9.486832981 by Thomas"},
        /* Three tubes each: 300 / sqrt(12.3 * 33.3) by Thomas. */
        {"ecoli-tubes",
         "1 volume 10; 1 tubes 3; 1 positives 2; 2 volume 1; 2 tubes 3; 2 positives 1; 3 volume "
         "0.1; 3 tubes 3; 3 positives 0",
         "ECOLI", "15", "by hand: 14.8"},
        /* Four dilutions: 600 / sqrt(4.55 * 55.55) by Thomas. */
        {"ecoli-tubes", SERIES("5", "1", "0") "; 4 volume 0.01; 4 tubes 5; 4 positives 0", "ECOLI",
         "38", "by hand: 37.7"},
        {"ecoli-tubes", "1 volume 10; 1 tubes 5; 1 positives 0", "ECOLI", "<2",
         "by hand: 100 / 50 mL"},
        /* One of five left negative: ln(5) / 10 * 100 = 16.09. */
        {"ecoli-tubes", "1 volume 10; 1 tubes 5; 1 positives 5", "ECOLI", ">16", "by hand"},
        {"ecoli-tubes", "1 volume 10; 1 tubes 1; 1 positives 1", "ECOLI",
         "refused: a single tube that is positive bounds nothing", "by hand"},
        {"ecoli-tubes", "1 volume 10; 1 tubes 5; 1 positives 6", "ECOLI",
         "refused: dilution '1' has more positive tubes than tubes", "by hand"},
        {"ecoli-tubes", "1 volume 10; 1 tubes 0; 1 positives 0", "ECOLI", "refused: 'tubes' is '0'",
         "by hand"},
        {"ecoli-tubes", "1 volume 10; 1 tubes 5; 1 positives 1e308", "ECOLI",
         "refused: '1e308' has too many digits for 'positives'", "by hand"},
    };
    check_answers(cases, NELEM(cases));
}

static void beyond_the_table_the_note_says_so(void **state)
{
    (void)state;
    /* 0-0-2: 100 * 2 / sqrt((55.5 - 0.2) * 55.5) = 3.61 by Thomas; by hand. */
    struct sheets s = sheet_work("ecoli-tubes", "EFF", SERIES("0", "0", "2"));
    assert_string_equal(sheets_text(&s, "ECOLI"), "3.6");
    assert_non_null(strstr(sheets_reading(&s, "ECOLI")->reading.detail->note,
                           "not in the table of SM 9221 C: approximation of Thomas (the likelihood "
                           "equation gives 3.6)"));
    sheets_free(&s);
    s = sheet_work("ecoli-tubes", "EFF", SERIES("5", "1", "0"));
    assert_string_equal(sheets_reading(&s, "ECOLI")->reading.detail->note,
                        "MPN index of the table (SM 9221 C)");
    sheets_free(&s);
}

/* Every entry of the table, to within its two printed figures or 5 %. */
static void the_table_proves_itself(void **state)
{
    (void)state;
    struct arena *a = arena_new();
    const struct formula *formula = formula_find("most-probable-number");
    assert_true(mpn_entries > 80);
    for (size_t i = 0; i < mpn_entries; i++) {
        const struct mpn_entry *e = &mpn_table[i];
        const struct fraction *volume[] = {fraction_parse(a, "10"), fraction_parse(a, "1"),
                                           fraction_parse(a, "0.1")};
        const struct fraction *tubes[3];
        const struct fraction *positive[3];
        for (size_t k = 0; k < 3; k++) {
            tubes[k] = fraction_from_int(a, 5);
            positive[k] = fraction_from_int(a, e->positive[k]);
        }
        const struct formula_value values[FORMULA_ARGUMENTS_MOST] = {
            {volume, 3}, {tubes, 3}, {positive, 3}};
        const struct fraction *x = NULL;
        struct fault f = {.set = false};
        assert_int_equal(formula_work(a, formula, values, &x, &f), OK);
        int decimals = fraction_decimals_for(x, 2, ROUND_HALF_UP);
        bool same = fraction_compare(fraction_round(a, x, decimals, ROUND_HALF_UP),
                                     fraction_parse(a, e->index)) == 0;
        double apart = fraction_double(fraction_parse(a, e->index)) / fraction_double(x) - 1.0;
        if (!same && fabs(apart) > 0.05)
            fail_msg("%d-%d-%d: %s, by the likelihood equation %f", e->positive[0], e->positive[1],
                     e->positive[2], e->index, fraction_double(x));
        for (size_t k = 0; k < i; k++)
            assert_memory_not_equal(mpn_table[k].positive, e->positive, sizeof e->positive);
    }
    arena_free(a);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(filters_give_what_is_published),
        cmocka_unit_test(a_blank_with_colonies_marks_the_count),
        cmocka_unit_test(tubes_give_what_is_published),
        cmocka_unit_test(beyond_the_table_the_note_says_so),
        cmocka_unit_test(the_table_proves_itself),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
