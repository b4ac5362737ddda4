/* Units: the factors against published ones, typed anew from the tables named. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "base/base.h"

#include <string.h>

#include "base/poison.h"

static const char *converted(struct arena *a, const char *value, const char *from, const char *to,
                             int figures)
{
    const struct unit *u = unit_find(from);
    const struct unit *v = unit_find(to);
    if (u == NULL || v == NULL)
        fail_msg("unknown unit in '%s' to '%s'", from, to);
    const struct fraction *x = unit_convert(a, fraction_parse(a, value), u, v);
    int decimals = fraction_decimals_for(x, figures, ROUND_HALF_EVEN);
    return fraction_print(a, x, decimals, ROUND_HALF_EVEN);
}

static void factors_agree_with_published_ones(void **state)
{
    (void)state;
    /* NIST SP 811 (2008), appendix B.8; its exact factors are in bold. Shown to the figures given.
     */
    static const struct {
        const char *value, *from, *to;
        int figures;
        const char *result;
    } cases[] = {
        {"1", "ft", "m", 4, "0.3048"},               /* foot, exact */
        {"1", "in", "cm", 3, "2.54"},                /* inch, exact */
        {"1", "yd", "m", 4, "0.9144"},               /* yard, exact */
        {"1", "mi", "km", 7, "1.609344"},            /* mile, exact */
        {"1", "ft2", "m2", 7, "0.09290304"},         /* square foot, exact */
        {"1", "in2", "m2", 5, "0.00064516"},         /* square inch, exact */
        {"1", "gal", "L", 7, "3.785412"},            /* gallon (US) */
        {"1", "gal", "m3", 7, "0.003785412"},        /* gallon (US) */
        {"1", "ft3", "m3", 7, "0.02831685"},         /* cubic foot */
        {"1", "yd3", "m3", 7, "0.7645549"},          /* cubic yard */
        {"1", "lb", "kg", 8, "0.45359237"},          /* pound (avoirdupois), exact */
        {"1", "ton", "kg", 7, "907.1847"},           /* ton, short (2000 lb) */
        {"1", "gpm", "m3/s", 7, "0.00006309020"},    /* gallon (US) per minute */
        {"1", "gpd", "m3/s", 7, "0.00000004381264"}, /* gallon (US) per day */
        {"1", "cfs", "m3/s", 7, "0.02831685"},       /* cubic foot per second */
        {"1", "cfm", "m3/s", 7, "0.0004719474"},     /* cubic foot per minute */
        {"1", "ft/s", "m/s", 4, "0.3048"},           /* foot per second, exact */
        {"1", "psi", "kPa", 7, "6.894757"},          /* pound-force per square inch */
        {"1", "bar", "kPa", 3, "100"},               /* bar, exact */
        {"1", "hp", "W", 7, "745.6999"},             /* horsepower (550 ft.lbf/s) */
        {"1", "kWh", "MJ", 2, "3.6"},                /* kilowatt hour, exact */
        {"1", "lb/ft3", "lb/gal", 7, "0.1336806"},   /* 16.01846 over 119.8264 kg/m3 */
        {"1", "degF", "K", 7, "255.9278"},           /* (F + 459.67) / 1.8 */
        {"212", "degF", "degC", 3, "100"},           /* (F - 32) / 1.8 */
        {"-40", "degF", "degC", 2, "-40"},           /* (F - 32) / 1.8 */
        {"0", "K", "degC", 5, "-273.15"},            /* K - 273.15 */
        {"25", "degC", "degF", 2, "77"},             /* 1.8 C + 32 */
        {"1", "mS/cm", "uS/cm", 4, "1000"},          /* prefixes, SP 811 table 5 */
        {"1", "kWh/d", "Btu/d", 7,
         "3412.142"}, /* British thermal unit (IT) 1055.056 J: 3.6e6 / it */
        /* the factor of permits: 1 mg/L in 1 MGD is 8.3454 lb/d (permit rules page, section 5) */
        {"3785.411784", "kg/d", "lb/d", 5, "8345.4"},
        /* plain trade relations, common practice, no source */
        {"1", "MGD", "gpm", 7, "694.4444"},
        {"1", "ac-ft", "ft3", 5, "43560"},
        {"1", "ac", "ft2", 5, "43560"},
        {"1", "ft3", "gal", 7, "7.480519"},
        {"1", "m3/m2/d", "gpd/ft2", 5, "24.542"},
        {"1", "m3/m/d", "gpd/ft", 5, "80.520"},
        {"1", "lb/MG", "kg/ML", 4, "0.1198"},
        {"1", "/mL", "/100mL", 3, "100"},
        {"1", "ppb", "ug/L", 1, "1"},
    };
    struct arena *a = arena_new();
    for (size_t i = 0; i < NELEM(cases); i++) {
        const char *got =
            converted(a, cases[i].value, cases[i].from, cases[i].to, cases[i].figures);
        if (strcmp(got, cases[i].result) != 0)
            fail_msg("%s %s: %s %s, expected %s", cases[i].value, cases[i].from, got, cases[i].to,
                     cases[i].result);
    }
    arena_free(a);
}

static void every_unit_has_a_factor_and_goes_there_and_back(void **state)
{
    (void)state;
    struct arena *a = arena_new();
    assert_true(unit_count() > 100);
    for (size_t i = 0; i < unit_count(); i++) {
        const struct unit *u = unit_at(i);
        assert_ptr_equal(unit_find(u->name), u);
        assert_int_equal(unit_index(u), (int)i);
        const struct fraction *factor = fraction_parse(a, u->factor);
        assert_non_null(factor);
        assert_int_equal(fraction_sign(factor), 1);
        assert_non_null(fraction_parse(a, u->offset));
        for (size_t j = 0; j < unit_count(); j++) {
            const struct unit *v = unit_at(j);
            if (!unit_same_kind(u, v))
                continue;
            const struct fraction *x = fraction_parse(a, "12.345");
            const struct fraction *there = unit_convert(a, x, u, v);
            assert_int_equal(fraction_compare(unit_convert(a, there, v, u), x), 0);
        }
    }
    arena_free(a);
}

static void every_kind_has_a_base(void **state)
{
    (void)state;
    for (size_t i = 0; i < unit_count(); i++) {
        bool found = false;
        for (size_t j = 0; j < unit_count(); j++) {
            const struct unit *v = unit_at(j);
            found = found || (unit_same_kind(unit_at(i), v) && strcmp(v->factor, "1") == 0 &&
                              strcmp(v->offset, "0") == 0);
        }
        if (!found)
            fail_msg("no unit of the kind '%s' is its base", unit_at(i)->kind);
    }
}

static void case_tells_a_mass_from_a_volume(void **state)
{
    (void)state;
    assert_string_equal(unit_find("mg")->kind, "mass");
    assert_string_equal(unit_find("MG")->kind, "volume");
    assert_false(unit_same_kind(unit_find("mg"), unit_find("MG")));
    assert_null(unit_find("Mg"));
    assert_null(unit_find(""));
    assert_null(unit_find(NULL));
}

static void an_unknown_spelling_gets_the_nearest(void **state)
{
    (void)state;
    static const struct {
        const char *name, *nearest;
    } cases[] = {{"mg/l", "mg/L"},
                 {"mgd", "MGD"},
                 {"MGd", "MGD"},
                 {"gmp", "gpm"},
                 {"Kg", "kg"},
                 {"m3/day", "m3/d"},
                 {"furlong", NULL},
                 {"", NULL},
                 {"ug/l", "ug/L"},
                 {"NTUs", "NTU"},
                 {"cfu/100ml", "cfu/100mL"}};
    for (size_t i = 0; i < NELEM(cases); i++) {
        const char *got = unit_nearest(cases[i].name);
        if (!text_equal(got, cases[i].nearest))
            fail_msg("'%s': got '%s'", cases[i].name, got ? got : "none");
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(factors_agree_with_published_ones),
        cmocka_unit_test(every_unit_has_a_factor_and_goes_there_and_back),
        cmocka_unit_test(every_kind_has_a_base),
        cmocka_unit_test(case_tells_a_mass_from_a_volume),
        cmocka_unit_test(an_unknown_spelling_gets_the_nearest),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
