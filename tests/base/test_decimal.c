/* Decimals as written. The grammar and its limits are the house's own (base.h); random cases are
 * compared with another implementation by the reference run (tests/reference). */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "base/base.h"

#include <string.h>

#include "base/poison.h"

static void a_number_keeps_its_digits(void **state)
{
    (void)state;
    static const struct {
        const char *text;
        int64_t coefficient;
        int scale;
        const char *written;
    } cases[] = {
        {"30", 30, 0, "30"},
        {"30.0", 300, 1, "30.0"},
        {"-1.5", -15, 1, "-1.5"},
        {"+5", 5, 0, "5"},
        {"5.", 5, 0, "5"},
        {".5", 5, 1, "0.5"},
        {"-.5", -5, 1, "-0.5"},
        {"007.50", 750, 2, "7.50"},
        {"2.4E3", 2400, 0, "2400"},
        {"1.5e-2", 15, 3, "0.015"},
        {"1.50E+1", 150, 1, "15.0"},
        {"12e0", 12, 0, "12"},
        {"0", 0, 0, "0"},
        {"-0", 0, 0, "0"},
        {"-0.00", 0, 2, "0.00"},
        {"0e99", 0, 0, "0"},
        {"0e-18", 0, 18, "0.000000000000000000"},
        {"999999999999999999", 999999999999999999, 0, "999999999999999999"},
        {"-999999999999999999", -999999999999999999, 0, "-999999999999999999"},
        {"-0.999999999999999999", -999999999999999999, 18, "-0.999999999999999999"},
        {"000000000000000000000000000001", 1, 0, "1"},
        {"1e17", 100000000000000000, 0, "100000000000000000"},
        {"1e-18", 1, 18, "0.000000000000000001"},
        {"0.0000000000000000000000001e25", 1, 0, "1"},
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct decimal d;
        char written[24];
        if (decimal_parse(cases[i].text, strlen(cases[i].text), &d) != DECIMAL_FINE)
            fail_msg("'%s' was refused", cases[i].text);
        assert_int_equal(d.coefficient, cases[i].coefficient);
        assert_int_equal(d.scale, cases[i].scale);
        decimal_write(d, written);
        assert_string_equal(written, cases[i].written);
    }
}

static void what_is_not_a_number_is_refused(void **state)
{
    (void)state;
    static const char *const cases[] = {
        "",      ".",  "-",   "+",   "+-1",    "--1",      "1.2.3", "1,5",  "1 000", " 1",  "1 ",
        "1O.2",  "e5", ".e5", "1e",  "1e+",    "1e5.",     "e",     "0x10", "inf",   "nan", "1_0",
        "1e5e5", "<2", "\t1", "1\n", "1e --5", "\xd9\xa1", "1/2",   "5-",   "1'000",
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct decimal d = {77, 7};
        if (decimal_parse(cases[i], strlen(cases[i]), &d) != DECIMAL_NOT_A_NUMBER)
            fail_msg("'%s' was not refused", cases[i]);
        assert_int_equal(d.coefficient, 77);
    }
    struct decimal d;
    assert_int_equal(decimal_parse("1\0002", 3, &d), DECIMAL_NOT_A_NUMBER);
    assert_int_equal(decimal_parse("12x", 2, &d), DECIMAL_FINE);
    assert_int_equal(d.coefficient, 12);
}

static void a_number_too_long_never_wraps(void **state)
{
    (void)state;
    static const char *const cases[] = {
        "1000000000000000000",   /* 19 digits */
        "0.1234567890123456789", /* 19 digits, 19 decimals */
        "0.0000000000000000001", /* one digit, 19 decimals */
        "0.0000000000000000000", /* none, 19 decimals */
        "1e18",
        "1e-19",
        "10e17",
        "18446744073709551617",   /* 2^64 + 1 */
        "9223372036854775808",    /* 2^63 */
        "1e4294967296",           /* 2^32 */
        "1e18446744073709551616", /* 2^64 */
        "1e-18446744073709551616",
        "1e-4294967297",
        "0e-19",
        "100000000000000000000e-3",
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct decimal d = {77, 7};
        if (decimal_parse(cases[i], strlen(cases[i]), &d) != DECIMAL_TOO_LONG)
            fail_msg("'%s' was not too long", cases[i]);
        assert_int_equal(d.coefficient, 77);
    }
}

static void comparing_looks_at_the_value(void **state)
{
    (void)state;
    static const struct {
        struct decimal a, b;
        int order;
    } cases[] = {
        {{30, 0}, {300, 1}, 0},
        {{304, 1}, {30, 0}, 1},
        {{-1, 0}, {0, 18}, -1},
        {{999999999999999999, 0}, {999999999999999999, 18}, 1},
        {{-999999999999999999, 0}, {999999999999999999, 18}, -1},
        {{1, 18}, {0, 0}, 1},
        {{INT64_MIN, 0}, {INT64_MAX, 18}, -1},
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        assert_int_equal(decimal_compare(cases[i].a, cases[i].b), cases[i].order);
        assert_int_equal(decimal_compare(cases[i].b, cases[i].a), -cases[i].order);
    }
    assert_true(decimal_is_zero((struct decimal){0, 3}));
    assert_false(decimal_is_zero((struct decimal){1, 18}));
}

static void figures_are_those_the_digits_show(void **state)
{
    (void)state;
    /* Leading zeros only place the point (NIST SP 811, B.7.2); that every other digit written
     * counts is the house's reading. */
    static const struct {
        const char *text;
        int figures;
    } cases[] = {{"30", 2}, {"0.067", 2}, {".067", 2},  {"1.0", 2},    {"0.0", 1},
                 {"0", 1},  {"100", 3},   {"-2.50", 3}, {"0.0500", 3}, {"2.4E3", 4}};
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct decimal d;
        assert_int_equal(decimal_parse(cases[i].text, strlen(cases[i].text), &d), DECIMAL_FINE);
        assert_int_equal(decimal_figures(d), cases[i].figures);
    }
}

static void the_largest_coefficients_can_be_written(void **state)
{
    (void)state;
    char written[24];
    decimal_write((struct decimal){INT64_MIN, 18}, written);
    assert_string_equal(written, "-9.223372036854775808"); /* -2^63 */
    decimal_write((struct decimal){INT64_MIN, 0}, written);
    assert_string_equal(written, "-9223372036854775808");
    decimal_write((struct decimal){INT64_MAX, 1}, written);
    assert_string_equal(written, "922337203685477580.7");
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(a_number_keeps_its_digits),
        cmocka_unit_test(what_is_not_a_number_is_refused),
        cmocka_unit_test(a_number_too_long_never_wraps),
        cmocka_unit_test(comparing_looks_at_the_value),
        cmocka_unit_test(figures_are_those_the_digits_show),
        cmocka_unit_test(the_largest_coefficients_can_be_written),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
