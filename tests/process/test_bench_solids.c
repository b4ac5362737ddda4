/* Bench sheets of solids beside published answers, and their checks. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>
#include <string.h>

#include <cmocka.h>

#include "process/sheets.h"

struct answer {
    const char *sheet, *point, *rows, *parameter, *text, *source;
};

static void check_answers(const struct answer *cases, size_t count)
{
    for (size_t i = 0; i < count; i++) {
        struct sheets s = sheet_work(cases[i].sheet, cases[i].point, cases[i].rows);
        const char *text = sheets_text(&s, cases[i].parameter);
        if (strncmp(text, cases[i].text, strlen(cases[i].text)) != 0 ||
            (text[0] != 'r' && strcmp(text, cases[i].text) != 0))
            fail_msg("%s: '%s' where %s says '%s'", cases[i].rows, text, cases[i].source,
                     cases[i].text);
        sheets_free(&s);
    }
}

static const char by_hand[] = "worked by hand";

static void weights_give_what_is_published(void **state)
{
    (void)state;
    static const struct answer cases[] = {
        {"suspended-solids", "AB", "1 filter 27.8216; 1 dried 28.0003; 1 volume 50", "MLSS", "3574",
         "New York DEC operator laboratory questions, no. 1 (3570, printed to three figures)"},
        {"suspended-solids", "AB",
         "1 filter 27.8216; 1 dried 28.0003; 1 ashed 27.9673; 1 volume 50", "MLVSS", "660",
         "New York DEC, no. 1: 3574 - 2914 fixed"},
        {"suspended-solids", "EFF", "1 filter 2.297; 1 dried 2.305; 1 volume 250", "TSS", "32.0",
         "Spellman, The Science of Water (CRC Press), ex. 8.4"},
        {"suspended-solids", "INF", "- filter 2.297; - dried 2.305; - volume 0.25 L", "TSS", "32.0",
         "Spellman, ex. 8.4, the volume in litres"},
        {"suspended-solids", "AB", "1 filter 2.297; 1 dried 2.305; 1 volume 250; - parameter TSS",
         "TSS", "32.0", "Spellman, ex. 8.4"},
        /* 7.5 mg in 600 mL and 7.6 mg: 12.5 and 12.6667, whose mean is 12.58333. */
        {"suspended-solids", "EFF",
         "1 filter 0.1284; 1 dried 0.1359; 1 volume 600; 2 filter 0.1284; 2 dried 0.1360; 2 volume "
         "600",
         "TSS", "12.6", by_hand},
        {"total-solids", "INF", "1 dish 52.318; 1 wet 86.447; 1 dry 53.902", "TS", "4.64",
         "formula reference, case F630: 4.641214217"},
        {"total-solids", "INF", "1 dish 52.37; 1 wet 90; 1 dry 58.11; 1 ashed 54.96", "VS", "54.9",
         "formula reference, case F633: 54.87804878"},
    };
    check_answers(cases, NELEM(cases));
}

static void settling_gives_what_is_worked_by_hand(void **state)
{
    (void)state;
    static const struct answer cases[] = {
        /* 305 mL/L: F409, 610 of 2000 mL is 30.5 %. */
        {"settleability", "AB", "30 settled_volume 610; - sample_volume 2000", "SV30", "305",
         "formula reference, case F409: 30.5 %"},
        {"settleability", "AB",
         "5 settled_volume 700; 10 settled_volume 500; 30 settled_volume 250", "SV30", "250",
         by_hand},
        {"settleability", "AB", "- settled_volume 250", "SV30", "250", by_hand},
        {"settleability", "AB", "30 settled_volume 210; - dilution_factor 2", "SV30D", "210",
         by_hand},
        {"settleability", "AB", "30 settled_volume 210; - dilution_factor 2", "DILUTION", "2.0",
         by_hand},
        {"settleability", "AB", "30 settled_volume 210; - dilution_factor 1", "SV30", "210",
         by_hand},
        {"settleability", "AB", "5 settled_volume 700", "SV30",
         "refused: there is no reading at 30 minutes", by_hand},
        {"settleability", "AB", "half settled_volume 700", "SV30", "refused: run 'half' is no",
         by_hand},
        {"settleability", "AB", "30 settled_volume 1100", "SV30",
         "refused: minutes '30': ", by_hand},
        {"settleable-solids", "INF", "1 settled 12.5", "SETTLEABLE", "12.5", by_hand},
        {"settleable-solids", "INF",
         "1 settled 9; 1 sample_volume 500 mL; 2 settled 10; 2 "
         "sample_volume 500 mL",
         "SETTLEABLE", "19.0", by_hand},
        {"settleable-solids", "INF", "1 settled 1200", "SETTLEABLE", "refused: cone '1' settles",
         by_hand},
        {"spin", "AB", "1 sediment 0.45; 1 tube_volume 15; - ratio 1100", "MLSS", "E 3300",
         "3 % of 15 mL, 1100 mg/L a percent: by hand"},
        {"spin", "AB", "1 sediment 0.45; 1 tube_volume 15", "MLSS", "refused: a percentage has no",
         by_hand},
        {"spin", "AB", "1 sediment 0.45; 1 tube_volume 15; - parameter TS", "TS", "3.00", by_hand},
    };
    check_answers(cases, NELEM(cases));
}

static void weights_that_cannot_be_are_refused(void **state)
{
    (void)state;
    static const struct answer cases[] = {
        {"suspended-solids", "EFF", "1 filter 0.1359; 1 dried 0.1284; 1 volume 600", "TSS",
         "refused: filter '1': ", "formula reference, case F850"},
        {"suspended-solids", "EFF", "1 filter 0.1284; 1 dried 0.1359; 1 volume 0", "TSS",
         "refused: 'volume' is '0'; it must be above 0 mL", "formula reference, case F851"},
        {"suspended-solids", "EFF", "1 filter 0.1284; 1 dried 0.1359", "TSS",
         "refused: filter '1' has no 'volume' (volume filtered); add it", by_hand},
        {"suspended-solids", "EFF", "1 filter 0.1284; 1 dried 0.1359; 1 ashed 0.1200; 1 volume 600",
         "TSS", "refused: filter '1' weighs less ashed than the filter", by_hand},
        {"suspended-solids", "EFF", "1 filter 0.1284; 1 dried 0.1359; 1 ashed 0.1400; 1 volume 600",
         "TSS", "refused: filter '1': ", by_hand},
        {"total-solids", "INF", "1 dish 52.318; 1 wet 52.318; 1 dry 52.318", "TS",
         "refused: dish '1': ", "formula reference, case F870"},
    };
    check_answers(cases, NELEM(cases));
}

/* Bounds of Standard Methods 2540 D; the bounds themselves pass. */
static void weights_are_checked(void **state)
{
    (void)state;
    static const struct {
        const char *rows, *check, *text;
        bool passes;
    } cases[] = {
        {"1 filter 0.1000; 1 dried 0.1025; 1 volume 1000", "residue 2.5 mg; 2.5 to 200", "2.5",
         true},
        {"1 filter 0.1000; 1 dried 0.1024; 1 volume 1000", "residue 2.4 mg; 2.5 to 200", "E 2.4",
         false},
        {"1 filter 0.1; 1 dried 0.3; 1 volume 1000", "residue 200.0 mg", "200.0", true},
        {"1 filter 0.1; 1 dried 0.3001; 1 volume 1000", "residue 200.1 mg", "E 200.1", false},
        /* 95 and 105 lie 5 % from 100; 94 and 106 lie 6 %. */
        {"1 filter 0.1; 1 dried 0.1095; 1 volume 100; 2 filter 0.1; 2 dried 0.1105; 2 volume 100",
         "replicates lie up to 5.0 % from their mean; at most 5", "100.0", true},
        {"1 filter 0.1; 1 dried 0.1094; 1 volume 100; 2 filter 0.1; 2 dried 0.1106; 2 volume 100",
         "replicates lie up to 6.0 %", "E 100.0", false},
        {"1 filter 0.1; 1 dried 0.11; 1 volume 100; blank filter 0.1200; blank dried 0.1205",
         "blank filter changes by 0.5 mg; at most 0.5", "100.0", true},
        {"1 filter 0.1; 1 dried 0.11; 1 volume 100; blank filter 0.1200; blank dried 0.1194",
         "blank filter changes by -0.6 mg", "E 100.0", false},
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct sheets s = sheet_work("suspended-solids", "EFF", cases[i].rows);
        assert_string_equal(sheets_text(&s, "TSS"), cases[i].text);
        const struct bench_check *c = sheets_check(sheets_reading(&s, "TSS"), cases[i].check);
        if (c == NULL || c->passed != cases[i].passes)
            fail_msg("%s: %s", cases[i].rows, cases[i].check);
        sheets_free(&s);
    }
}

static void volatiles_share_the_checks_of_their_filters(void **state)
{
    (void)state;
    struct sheets s = sheet_work("suspended-solids", "EFF",
                                 "1 filter 0.1000; 1 dried 0.1020; 1 ashed 0.1005; 1 volume 1000");
    assert_int_equal(s.outcomes, 2);
    assert_string_equal(sheets_text(&s, "TSS"), "E 2.0");
    assert_string_equal(sheets_text(&s, "VSS"), "E 1.5");
    assert_string_equal(sheets_reading(&s, "VSS")->reading.detail->note,
                        "1 filter; CHECK FAILED: residue 2.0 mg; 2.5 to 200 (SM 2540 D)");
    sheets_free(&s);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(weights_give_what_is_published),
        cmocka_unit_test(settling_gives_what_is_worked_by_hand),
        cmocka_unit_test(weights_that_cannot_be_are_refused),
        cmocka_unit_test(weights_are_checked),
        cmocka_unit_test(volatiles_share_the_checks_of_their_filters),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
