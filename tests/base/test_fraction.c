/* Exact fractions, rounding and roots: published worked examples, and the edges of each rule.
 * Random cases are compared with another implementation by the reference run (tests/reference). */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "base/base.h"

#include <math.h>
#include <string.h>

#include "base/poison.h"

static struct arena *a;

static int open_arena(void **state)
{
    (void)state;
    a = arena_new();
    return 0;
}

static int close_arena(void **state)
{
    (void)state;
    arena_free(a);
    return 0;
}

static const struct fraction *f(const char *s)
{
    const struct fraction *x = fraction_parse(a, s);
    if (x == NULL)
        fail_msg("'%s' is not a fraction", s);
    return x;
}

static void same(const struct fraction *x, const char *expected)
{
    if (fraction_compare(x, f(expected)) != 0)
        fail_msg("got %s, expected %s", fraction_print(a, x, 30, ROUND_HALF_EVEN), expected);
}

static void published_means_come_out(void **state)
{
    (void)state;
    /* State reporting sheet: 5.30, 6.21, 4.00, 5.25, 8.72: sum 29.48, mean 5.896, reported 5.90 */
    static const char *const sheet[] = {"5.30", "6.21", "4.00", "5.25", "8.72"};
    const struct fraction *sum = fraction_from_int(a, 0);
    for (size_t i = 0; i < NELEM(sheet); i++)
        sum = fraction_add(a, sum, f(sheet[i]));
    same(sum, "29.48");
    const struct fraction *mean = fraction_divide(a, sum, fraction_from_int(a, 5));
    same(mean, "5.896");
    assert_string_equal(fraction_print(a, mean, 2, ROUND_HALF_EVEN), "5.90");

    /* wastewater101, discharge-report example: daily loads 34.86, 48.37, 27.02, 15.85 lb/d, mean
     * 31.53; BOD5 mean 19.75 mg/L */
    static const struct {
        const char *flow, *bod, *load;
    } days[] = {{".19", "22", "34.86"},
                {".20", "29", "48.37"},
                {".18", "18", "27.02"},
                {".19", "10", "15.85"}};
    const struct fraction *loads = f("0");
    const struct fraction *bods = f("0");
    for (size_t i = 0; i < NELEM(days); i++) {
        const struct fraction *load = fraction_multiply(a, f(days[i].flow), f(days[i].bod));
        load = fraction_multiply(a, load, f("8.34"));
        assert_string_equal(fraction_print(a, load, 2, ROUND_HALF_UP), days[i].load);
        loads = fraction_add(a, loads, load);
        bods = fraction_add(a, bods, f(days[i].bod));
    }
    loads = fraction_divide(a, loads, f("4"));
    assert_string_equal(fraction_print(a, loads, 2, ROUND_HALF_EVEN), "31.53");
    same(fraction_divide(a, bods, f("4")), "19.75");
}

static void a_mean_of_thirds_is_exact(void **state)
{
    (void)state;
    /* The house's promise: three daily means of 7/3 and one of 2.8 make 2.45, not 2.4499999. */
    const struct fraction *mean = fraction_multiply(a, f("3"), f("7/3"));
    mean = fraction_divide(a, fraction_add(a, mean, f("2.8")), f("4"));
    same(mean, "2.45");
    assert_string_equal(fraction_print(a, mean, 1, ROUND_HALF_EVEN), "2.4");
    assert_string_equal(fraction_print(a, mean, 1, ROUND_HALF_UP), "2.5");
}

static void rounding_follows_the_stated_rule(void **state)
{
    (void)state;
    static const struct {
        const char *value;
        int decimals;
        const char *even, *up;
    } cases[] = {
        /* EPA drinking-water questions: half up, 0.0105 is 0.011 and 0.0104 is 0.010 */
        {"0.0105", 3, "0.010", "0.011"},
        {"0.0104", 3, "0.010", "0.010"},
        /* Standard Methods 1050 B: a dropped 5 goes to the even digit; these values from memory */
        {"2.25", 1, "2.2", "2.3"},
        {"2.35", 1, "2.4", "2.4"},
        {"2.25000000000000000000000000001", 1, "2.3", "2.3"},
        {"2.24999999999999999999999999999", 1, "2.2", "2.2"},
        /* a tie goes away from zero on both sides of it (permit rule R31) */
        {"-2.25", 1, "-2.2", "-2.3"},
        {"-0.5", 0, "0", "-1"},
        {"0.5", 0, "0", "1"},
        {"1.5", 0, "2", "2"},
        /* never -0 (permit rule R31) */
        {"-0.04", 1, "0.0", "0.0"},
        {"-0.4", 0, "0", "0"},
        {"0", 2, "0.00", "0.00"},
        /* tens and hundreds */
        {"25", -1, "20", "30"},
        {"35", -1, "40", "40"},
        {"1250", -2, "1200", "1300"},
        {"-50", -2, "0", "-100"},
        {"4", -1, "0", "0"},
        {"999.95", 1, "1000.0", "1000.0"},
        {"2/3", 4, "0.6667", "0.6667"},
        {"-1/3", 4, "-0.3333", "-0.3333"},
        {"1/1024", 3, "0.001", "0.001"},
        {"5", 3, "5.000", "5.000"},
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        const struct fraction *x = f(cases[i].value);
        assert_string_equal(fraction_print(a, x, cases[i].decimals, ROUND_HALF_EVEN),
                            cases[i].even);
        assert_string_equal(fraction_print(a, x, cases[i].decimals, ROUND_HALF_UP), cases[i].up);
        same(fraction_round(a, x, cases[i].decimals, ROUND_HALF_EVEN), cases[i].even);
        same(fraction_round(a, x, cases[i].decimals, ROUND_HALF_UP), cases[i].up);
    }
}

static void figures_count_the_carry(void **state)
{
    (void)state;
    static const struct {
        const char *value;
        int figures, decimals;
    } cases[] = {
        {"0.9965", 2, 1}, /* base.h: 1.0 */
        {"9.96", 2, 0},   /* base.h: 10 */
        {"0.067", 2, 3},  /* New York DEC: limit 1.0, result .067 entered .067 */
        {"5", 1, 0},      {"0.95", 2, 2},    {"0.994", 2, 2}, {"0.9951", 2, 1}, {"99.6", 2, -1},
        {"123", 2, -1},   {"-0.9965", 2, 1}, {"1/3", 3, 3},   {"0", 3, 2},      {"0", 1, 0},
        {"1000", 1, -3},  {"999", 3, 0},     {"1/999", 1, 3}, {"1/1001", 1, 3},
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        int got = fraction_decimals_for(f(cases[i].value), cases[i].figures, ROUND_HALF_EVEN);
        if (got != cases[i].decimals)
            fail_msg("%s to %d figures: %d decimals, expected %d", cases[i].value, cases[i].figures,
                     got, cases[i].decimals);
    }
}

static void published_geometric_means_come_out(void **state)
{
    (void)state;
    static const struct {
        const char *values[4];
        int decimals;
        const char *mean;
    } cases[] = {
        {{"12", "28", "37", "25"}, 1, "23.6"},      /* Spellman, operators' mathematics */
        {{"50", "100", "150", "200"}, 2, "110.67"}, /* State reporting sheet */
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        const struct fraction *product = f("1");
        for (size_t j = 0; j < 4; j++)
            product = fraction_multiply(a, product, f(cases[i].values[j]));
        same(root_round(a, product, 4, cases[i].decimals, ROUND_HALF_EVEN), cases[i].mean);
        same(root_round(a, product, 4, cases[i].decimals, ROUND_HALF_UP), cases[i].mean);
    }
}

static void roots_are_rounded_and_compared_exactly(void **state)
{
    (void)state;
    /* Exact squares and cubes: arithmetic, no source. */
    static const struct {
        const char *product;
        unsigned n;
        int decimals;
        const char *even, *up;
    } cases[] = {
        {"6.25", 2, 0, "2", "3"},  /* 2.5 */
        {"12.25", 2, 0, "4", "4"}, /* 3.5 */
        {"6.2501", 2, 0, "3", "3"},
        {"6.2499", 2, 0, "2", "2"},
        {"0.25", 2, 0, "0", "1"},
        {"0", 7, 2, "0", "0"},
        {"1", 31, 3, "1", "1"},
        {"7", 1, 0, "7", "7"},
        {"2.5", 1, 0, "2", "3"},
        {"15.625", 3, 0, "2", "3"},
        {"225", 2, -1, "20", "20"},
        {"625", 2, -1, "20", "30"},
        {"2", 2, 9, "1.414213562", "1.414213562"},
        {"1/4", 2, 1, "0.5", "0.5"},
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        same(root_round(a, f(cases[i].product), cases[i].n, cases[i].decimals, ROUND_HALF_EVEN),
             cases[i].even);
        same(root_round(a, f(cases[i].product), cases[i].n, cases[i].decimals, ROUND_HALF_UP),
             cases[i].up);
    }
    assert_int_equal(root_compare(a, f("15876"), 2, f("126")), 0);
    assert_int_equal(root_compare(a, f("15876.0000001"), 2, f("126")), 1);
    assert_int_equal(root_compare(a, f("15875.9999999"), 2, f("126")), -1);
    assert_int_equal(root_compare(a, f("0"), 5, f("0")), 0);
    assert_int_equal(root_compare(a, f("0"), 5, f("-1")), 1);
    assert_int_equal(root_compare(a, f("4"), 2, f("-2")), 1);
    assert_int_equal(root_compare(a, f("4"), 2, f("-3")), 1);
}

static void fractions_are_read_as_written(void **state)
{
    (void)state;
    static const struct {
        const char *text;
        int64_t n, d;
    } cases[] = {{"12.5", 25, 2}, {"-3", -3, 1},
                 {"2/3", 2, 3},   {"+4/6", 2, 3},
                 {"-4/6", -2, 3}, {".5", 1, 2},
                 {"5.", 5, 1},    {"0/7", 0, 1},
                 {"-0", 0, 1},    {"007/010", 7, 10},
                 {"0.000", 0, 1}, {"8896443230521/1290320000000", 8896443230521, 1290320000000}};
    for (size_t i = 0; i < NELEM(cases); i++) {
        const struct fraction *x = f(cases[i].text);
        assert_int_equal(fraction_compare(x, fraction_from_ratio(a, cases[i].n, cases[i].d)), 0);
    }
    static const char *const not [] = {
        "",    "-",  ".",  "/",    "1/",  "/2",  "1/0",  "1/00", "1/-2", "1.5/2", "1/.5", "1/2/3",
        "1e3", " 1", "1 ", "1..2", "--1", "+-1", "1/2.", "x",    "1,5",  "./2",   "1./2"};
    for (size_t i = 0; i < NELEM(not ); i++) {
        if (fraction_parse(a, not [i]) != NULL)
            fail_msg("'%s' was taken for a fraction", not [i]);
    }
}

static void whole_numbers_of_any_size_are_kept(void **state)
{
    (void)state;
    assert_string_equal(fraction_print(a, fraction_from_int(a, INT64_MIN), 0, ROUND_HALF_EVEN),
                        "-9223372036854775808"); /* -2^63 */
    same(fraction_from_ratio(a, INT64_MIN, INT64_MIN), "1");
    same(fraction_from_ratio(a, 1, INT64_MIN), "-1/9223372036854775808");
    same(fraction_from_ratio(a, 6, -4), "-1.5");
    same(fraction_from_decimal(a, (struct decimal){300, 1}), "30");
    same(fraction_from_decimal(a, (struct decimal){-1, 18}), "-1/1000000000000000000");
    same(fraction_power(a, f("2"), 100), "1267650600228229401496703205376"); /* 2^100 */
    same(fraction_power(a, f("-2/3"), 3), "-8/27");
    same(fraction_power(a, f("0"), 0), "1");
}

static void signs_and_orders(void **state)
{
    (void)state;
    assert_int_equal(fraction_sign(f("-1/7")), -1);
    assert_int_equal(fraction_sign(f("0")), 0);
    assert_int_equal(fraction_sign(f("1/7")), 1);
    assert_int_equal(fraction_compare(f("1/3"), f("0.3333333333333333333")), 1);
    assert_int_equal(fraction_compare(f("0.3333333333333333333"), f("1/3")), -1);
    same(fraction_subtract(a, f("1/3"), f("1/3")), "0");
    same(fraction_divide(a, f("-1"), f("-3")), "1/3");
}

static void a_decimal_that_ends_is_shown_whole(void **state)
{
    (void)state;
    static const struct {
        const char *value;
        int most;
        const char *text;
        bool exact;
    } cases[] = {
        {"2.45", 10, "2.45", true},  {"2.450", 10, "2.45", true},
        {"100", 10, "100", true},    {"-1/8", 10, "-0.125", true},
        {"1/3", 4, "0.3333", false}, {"2/3", 4, "0.6667", false},
        {"1/8", 2, "0.12", false},   {"1/8", 3, "0.125", true},
        {"0", 5, "0", true},         {"7/40", 3, "0.175", true},
        {"1/3", 0, "0", false},      {"8.345404452", 9, "8.345404452", true},
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct text t;
        text_init(&t, 100);
        assert_int_equal(fraction_write_all(&t, f(cases[i].value), cases[i].most), cases[i].exact);
        assert_string_equal(t.at, cases[i].text);
        text_free(&t);
    }
}

static void writing_keeps_to_the_buffer(void **state)
{
    (void)state;
    struct text t;
    text_init(&t, 4);
    fraction_write(&t, f("12345.678"), 3, ROUND_HALF_EVEN);
    assert_true(t.overflowed);
    assert_string_equal(t.at, "1234");
    text_free(&t);
}

static void doubles_are_the_nearest(void **state)
{
    (void)state;
    /* The compiler reads each constant to the nearest double: C17, 6.4.4.2, as IEEE 754 asks. */
    static const struct {
        const char *value;
        double nearest;
    } cases[] = {{"0.1", 0.1},
                 {"2/3", 2.0 / 3.0},
                 {"-7.3", -7.3},
                 {"0", 0.0},
                 {"9007199254740993", 9007199254740992.0}, /* 2^53 + 1: a tie, to even */
                 {"9007199254740995", 9007199254740996.0},
                 {"3785411.784", 3785411.784},
                 {"123456789012345678901234567890", 123456789012345678901234567890.0}};
    for (size_t i = 0; i < NELEM(cases); i++) {
        double got = fraction_double(f(cases[i].value));
        assert_memory_equal(&got, &cases[i].nearest, sizeof got);
    }
    const struct fraction *tiny = fraction_divide(a, f("1"), fraction_power(a, f("2"), 1074));
    double smallest = fraction_double(tiny);
    assert_true(smallest > 0 && smallest / 2 == 0);
    assert_true(fraction_double(fraction_divide(a, tiny, f("2"))) == 0); /* a tie, to even */
    assert_true(isinf(fraction_double(fraction_power(a, f("2"), 1024))));
    same(fraction_from_double(a, 0.5), "1/2");
    same(fraction_from_double(a, 0.1), "0.1000000000000000055511151231257827021181583404541015625");
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(published_means_come_out),
        cmocka_unit_test(a_mean_of_thirds_is_exact),
        cmocka_unit_test(rounding_follows_the_stated_rule),
        cmocka_unit_test(figures_count_the_carry),
        cmocka_unit_test(published_geometric_means_come_out),
        cmocka_unit_test(roots_are_rounded_and_compared_exactly),
        cmocka_unit_test(fractions_are_read_as_written),
        cmocka_unit_test(whole_numbers_of_any_size_are_kept),
        cmocka_unit_test(signs_and_orders),
        cmocka_unit_test(a_decimal_that_ends_is_shown_whole),
        cmocka_unit_test(writing_keeps_to_the_buffer),
        cmocka_unit_test(doubles_are_the_nearest),
    };
    return cmocka_run_group_tests(tests, open_arena, close_arena);
}
