/* Titrations, calibrations and the round. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>
#include <string.h>

#include <cmocka.h>

#include "process/sheets.h"

static void chlorine_is_worked_by_the_published_equation(void **state)
{
    (void)state;
    static const struct {
        const char *rows, *parameter, *text;
    } cases[] = {
        /* SM 4500-Cl B: (A +/- B) x N x 35450 / mL; the numbers are worked by hand. */
        {"1 titrant_volume 5.6; 1 sample_volume 200; - normality 0.00125", "TRC", "1.24"},
        {"1 titrant_volume 5.6; 1 sample_volume 200; - normality 0.00125; - blank_volume 0.2",
         "TRC", "1.20"},
        {"1 titrant_volume 5.6; 1 sample_volume 200; - normality 0.00125; - blank_volume -0.2",
         "TRC", "1.29"},
        {"1 titrant_volume 5.4; 1 sample_volume 200; 2 titrant_volume 5.8; 2 sample_volume 200; - "
         "normality 0.00125; - parameter FRC",
         "FRC", "1.24"},
        {"1 titrant_volume 10; 1 sample_volume 10; - normality 0.1", "TRC", "3545.00"},
        {"1 titrant_volume 0.1; 1 sample_volume 200; - normality 0.00125; - blank_volume 0.2",
         "TRC", "refused: titration '1' takes less titrant than the blank; check the volumes"},
        {"1 titrant_volume 5.6; 1 sample_volume 200", "TRC",
         "refused: the sheet has no 'normality' (normality of the titrant); add it"},
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct sheets s = sheet_work("residual", "EFF", cases[i].rows);
        assert_string_equal(sheets_text(&s, cases[i].parameter), cases[i].text);
        sheets_free(&s);
    }
}

static void calibrations_are_records_with_their_checks(void **state)
{
    (void)state;
    static const struct {
        const char *sheet, *rows, *check, *source;
        bool passes;
    } cases[] = {
        {"ph-calibration", "1 buffer 7.00; 1 reading 7.10; 2 buffer 10.01; 2 reading 10.0",
         "buffer 7 reads 7.1, within 0.1", "SM 4500-H+ B, from memory", true},
        {"ph-calibration", "1 buffer 7.00; 1 reading 6.89; 1 temperature 21", "buffer 7 reads 6.89",
         "SM 4500-H+ B, from memory", false},
        {"ph-calibration", "1 buffer 7; 1 reading 7; - slope 92", "slope is 92 %, 92 to 102",
         "common practice, no source", true},
        {"ph-calibration", "1 buffer 7; 1 reading 7; - slope 91.9", "slope is 91.9 %",
         "common practice, no source", false},
        {"ph-calibration", "1 buffer 7; 1 reading 7; - slope 102.1", "slope is 102.1 %",
         "common practice, no source", false},
        /* Oxygen in fresh water under 101.325 kPa: 14.621 mg/L at 0, 11.288 at 10, 9.092 at 20,
         * 8.263 at 25, 7.559 at 30 degrees (Standard Methods 4500-O, table I, from memory). */
        {"do-calibration", "1 reading 14.62; 1 temperature 0",
         "meter reads 14.62 mg/L, saturation is 14.62, within 0.2", "common practice, no source",
         true},
        {"do-calibration", "1 reading 11.1; 1 temperature 10",
         "meter reads 11.1 mg/L, saturation is 11.29", "common practice, no source", true},
        {"do-calibration", "1 reading 9.29; 1 temperature 68 degF",
         "meter reads 9.29 mg/L, saturation is 9.09", "common practice, no source", true},
        {"do-calibration", "1 reading 9.30; 1 temperature 20",
         "meter reads 9.3 mg/L, saturation is 9.09", "common practice, no source", false},
        {"do-calibration", "1 reading 8.89; 1 temperature 20",
         "meter reads 8.89 mg/L, saturation is 9.09", "common practice, no source", true},
        {"do-calibration", "1 reading 8.88; 1 temperature 20",
         "meter reads 8.88 mg/L, saturation is 9.09", "common practice, no source", false},
        {"do-calibration", "1 reading 8.26; 1 temperature 25",
         "meter reads 8.26 mg/L, saturation is 8.26", "common practice, no source", true},
        {"do-calibration", "1 reading 7.56; 1 temperature 30",
         "meter reads 7.56 mg/L, saturation is 7.56", "common practice, no source", true},
        /* The same table under chlorinity 20 at 0 degrees: 11.355 at a salinity of 36.13. */
        {"do-calibration", "1 reading 11.3; 1 temperature 0; 1 salinity 36.13",
         "meter reads 11.3 mg/L, saturation is 11.3", "common practice, no source", true},
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct sheets s = sheet_work(cases[i].sheet, "-", cases[i].rows);
        assert_int_equal(s.outcomes, 1);
        assert_string_equal(sheets_text(&s, ""), "record");
        const struct bench_check *c = sheets_check(&s.outcome[0], cases[i].check);
        if (c == NULL || c->passed != cases[i].passes)
            fail_msg("%s: %s: %s", cases[i].rows, cases[i].check, s.outcome[0].check[0].text);
        assert_string_equal(c->source, cases[i].source);
        sheets_free(&s);
    }
}

/* Dissolved oxygen follows the pressure of the air but for the water's vapour: at 20 degrees
 * (vapour 2.34 kPa) and 90 kPa about 9.09 * (90 - 2.34) / (101.325 - 2.34) = 8.05. By hand. */
static void oxygen_follows_the_pressure(void **state)
{
    (void)state;
    struct sheets s =
        sheet_work("do-calibration", "-", "1 reading 8.05; 1 temperature 20; 1 pressure 0.9 bar");
    assert_true(s.outcome[0].check[0].passed);
    assert_non_null(strstr(s.outcome[0].check[0].text, "saturation is 8.05"));
    sheets_free(&s);
}

/* ---- the round ---- */

static void the_round_gives_readings_as_written(void **state)
{
    (void)state;
    static const struct {
        const char *value, *unit, *text;
        enum qualifier qualifier;
        const char *number; /* NULL: none */
    } cases[] = {
        {"7.10", "", "7.10", QUALIFIER_PLAIN, "7.10"},
        {"<0.1", "", "<0.1", QUALIFIER_LESS, "0.1"},
        {"<= 0.1", "mg/L", "<= 0.1", QUALIFIER_LESS, "0.1"},
        {">9", "", ">9", QUALIFIER_GREATER, "9"},
        {"E 3", "", "E 3", QUALIFIER_ESTIMATED, "3"},
        {"E", "", "E", QUALIFIER_CODE, NULL},
        {"code 9", "", "code 9", QUALIFIER_CODE, NULL},
        {"250", "ug/L", "250", QUALIFIER_PLAIN, "250"},
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct arena *a = arena_new();
        struct sheets s = sheets_work(arena_print(a, "round,2025-06-10,06:30,EFF,am,TRC,%s,%s",
                                                  cases[i].value, cases[i].unit));
        assert_string_equal(sheets_text(&s, "TRC"), cases[i].text);
        const struct reading *r = &sheets_reading(&s, "TRC")->reading;
        char written[24];
        decimal_write(r->value, written);
        assert_int_equal(r->qualifier, cases[i].qualifier);
        if (cases[i].number)
            assert_string_equal(written, cases[i].number);
        assert_string_equal(unit_at(r->unit)->name, *cases[i].unit ? cases[i].unit : "mg/L");
        assert_string_equal(r->sample, "am");
        assert_int_equal(r->minute, 390);
        sheets_free(&s);
        arena_free(a);
    }
}

static void the_round_refuses_row_by_row(void **state)
{
    (void)state;
    static const struct {
        const char *cells;
        enum reason reason;
    } cases[] = {
        {"EFF,,TRC,,", REASON_BLANK_VALUE},          {"EFF,,TRC,lots,", REASON_NOT_A_NUMBER},
        {"EFF,,TRC,-1,", REASON_NEGATIVE_VALUE},     {"EFF,,TRC,1e308,", REASON_TOO_MANY_DIGITS},
        {"EFF,,TRC,B,", REASON_CODE_WITHOUT_NUMBER}, {"EFF,,TRCC,1,", REASON_UNKNOWN_PARAMETER},
        {",,TRC,1,", REASON_UNKNOWN_POINT},          {"EFF,,TRC,1,mL", REASON_WRONG_UNIT},
        {"EFF,,TRC,1,mgl", REASON_UNKNOWN_UNIT},     {"EFF,,TRC,<<1,", REASON_NOT_A_NUMBER},
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct arena *a = arena_new();
        struct sheets s = sheets_work(
            arena_print(a,
                        "round,2025-06-10,,EFF,,PH,7.1,\nround,2025-06-10,,%s\n"
                        "round,2025-06-10,,EFF,,TEMP,-1.5,\nround,2025-06-10,,,,analyst,KB,",
                        cases[i].cells));
        assert_int_equal(s.outcomes, 3); /* the others stand */
        assert_string_equal(sheets_text(&s, "PH"), "7.1");
        assert_string_equal(sheets_text(&s, "TEMP"), "-1.5");
        assert_string_equal(s.outcome[0].reading.detail->analyst, "KB");
        assert_int_equal(s.outcome[1].kind, BENCH_REFUSED);
        if (s.outcome[1].reason != cases[i].reason)
            fail_msg("%s: %s", cases[i].cells, reason_words[s.outcome[1].reason]);
        sheets_free(&s);
        arena_free(a);
    }
    struct sheets s = sheets_work("round,2025-06-10,,EFF,,note,all well,");
    assert_string_equal(sheets_text(&s, "PH"), "refused: there is no reading beside its texts");
    sheets_free(&s);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(chlorine_is_worked_by_the_published_equation),
        cmocka_unit_test(calibrations_are_records_with_their_checks),
        cmocka_unit_test(oxygen_follows_the_pressure),
        cmocka_unit_test(the_round_gives_readings_as_written),
        cmocka_unit_test(the_round_refuses_row_by_row),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
