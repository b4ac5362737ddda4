/* Equations: what binds to what, and what is worked exactly. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <math.h>
#include <string.h>

#include "process/equation.h"

/* A formula of the tests' own, so that its arguments are known. */
static const struct formula sample = {
    .name = "sample",
    .argument = {{.name = "a", .unit = "1"},
                 {.name = "b", .unit = "1"},
                 {.name = "xs", .unit = "1", .list = true},
                 {.name = "ys", .unit = "1", .list = true}},
    .arguments = 4,
};

static enum status work(struct arena *arena, const char *text, const struct fraction **out,
                        struct fault *fault)
{
    const struct fraction *xs[] = {fraction_from_int(arena, 1), fraction_from_int(arena, 2),
                                   fraction_from_int(arena, 6)};
    const struct fraction *ys[] = {fraction_from_int(arena, 5), fraction_from_int(arena, 7),
                                   fraction_from_int(arena, 11)};
    const struct fraction *a = fraction_from_int(arena, 3);
    const struct fraction *b = fraction_from_int(arena, -2);
    const struct formula_value values[FORMULA_ARGUMENTS_MOST] = {
        {&a, 1}, {&b, 1}, {xs, 3}, {ys, 3}};
    struct scope s = {.arena = arena, .formula = &sample, .values = values, .fault = fault};
    return equation_work(&s, equation_parse(arena, &sample, text), out);
}

static void signs_bind_as_they_do_on_paper(void **state)
{
    (void)state;
    /* a = 3, b = -2, xs = 1 2 6, ys = 5 7 11; arithmetic */
    static const struct {
        const char *text, *value;
    } cases[] = {
        {"a + b * 2", "-1"},
        {"(a + b) * 2", "2"},
        {"a - b - 1", "4"},
        {"12 / a / 2", "2"},
        {"12 / (a / 2)", "8"},
        {"-a ^ 2", "-9"},
        {"(-a) ^ 2", "9"},
        {"2 ^ a ^ 2", "512"},
        {"2 ^ -a", "1/8"},
        {"b ^ 3", "-8"},
        {"-b - -a", "5"},
        {"0.1 + 0.2", "3/10"},
        {"gal_per_ft3 * 231", "1728"},
        {"min(a, b) + max(a, b) * 10", "28"},
        {"abs(b) * a", "6"},
        {"sum(xs)", "9"},
        {"mean(xs)", "3"},
        {"count(xs) / 2", "3/2"},
        {"sumproduct(xs, ys) / sum(xs)", "85/9"},
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct arena *arena = arena_new();
        const struct fraction *x;
        struct fault fault = {.set = false};
        assert_int_equal(work(arena, cases[i].text, &x, &fault), OK);
        if (fraction_compare(x, fraction_parse(arena, cases[i].value)) != 0)
            fail_msg("%s is not %s", cases[i].text, cases[i].value);
        arena_free(arena);
    }
}

static void roots_and_logarithms_are_near(void **state)
{
    (void)state;
    /* Tables of logarithms: log10 2 = 0.30103, e = 2.718281828459, the root of 2 = 1.414213562373
     */
    static const struct {
        const char *text;
        double value;
    } cases[] = {
        {"log10(2)", 0.301029995664},       {"exp(1)", 2.718281828459}, {"sqrt(2)", 1.414213562373},
        {"2 ^ 0.5", 1.414213562373},        {"pi / 2", 1.570796326795}, {"sqrt(a * 3)", 3.0},
        {"10 ^ (0.5 - 1)", 0.316227766017},
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct arena *arena = arena_new();
        const struct fraction *x;
        struct fault fault = {.set = false};
        assert_int_equal(work(arena, cases[i].text, &x, &fault), OK);
        if (fabs(fraction_double(x) - cases[i].value) > 1e-12)
            fail_msg("%s is not %.12f", cases[i].text, cases[i].value);
        arena_free(arena);
    }
}

static void what_has_no_value_is_a_fault(void **state)
{
    (void)state;
    static const struct {
        const char *text, *says;
    } cases[] = {
        {"a / (b + 2)", "'b + 2' of 'sample'"},
        {"a / (a - a)", "zero"},
        {"(b + 2) ^ -1", "zero"},
        {"sqrt(b)", "no finite"},
        {"log10(b)", "no finite"},
        {"log10(b + 2)", "no finite"},
        {"b ^ 0.5", "no finite"},
        {"exp(1000)", "no finite"},
        {"10 ^ 400.5", "no finite"},
        {"10 ^ 400", "no finite"},
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct arena *arena = arena_new();
        const struct fraction *x;
        struct fault fault = {.set = false};
        if (work(arena, cases[i].text, &x, &fault) == OK)
            fail_msg("%s has a value", cases[i].text);
        if (strstr(fault.text, cases[i].says) == NULL)
            fail_msg("%s: \"%s\" does not say %s", cases[i].text, fault.text, cases[i].says);
        arena_free(arena);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(signs_bind_as_they_do_on_paper),
        cmocka_unit_test(roots_and_logarithms_are_near),
        cmocka_unit_test(what_has_no_value_is_a_fault),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
