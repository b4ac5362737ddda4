/* The whole catalogue: every row is complete, every equation can be worked, every bound holds, no
 * hostile value gives anything but a fault or a finite number, and every unit spelling of an
 * argument's kind gives the answer its own unit gives. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <math.h>
#include <string.h>

#include "process/catalogue.h"
#include "process/ready.h"

enum { LIST_LENGTH = 3 };

struct given {
    const struct fraction *number[FORMULA_ARGUMENTS_MOST][LIST_LENGTH];
    struct formula_value value[FORMULA_ARGUMENTS_MOST];
};

static void every_row_is_complete(void **state)
{
    (void)state;
    for (size_t i = 0; i < formula_count(); i++) {
        const struct formula *f = formula_at(i);
        assert_ptr_equal(formula_find(f->name), f); /* no name twice */
        assert_true(*f->subject && *f->result && *f->equation && *f->source);
        assert_non_null(unit_find(f->unit));
        assert_true(f->arguments > 0);
        for (size_t k = 0; k < FORMULA_ARGUMENTS_MOST; k++)
            assert_int_equal(k < f->arguments, f->argument[k].name != NULL);
        for (size_t k = 0; k < f->arguments; k++) {
            assert_non_null(unit_find(f->argument[k].unit));
            assert_int_equal(formula_argument_index(f, f->argument[k].name), (int)k);
        }
    }
    assert_true(formula_count() >= 233);
}

static void every_unit_has_a_metric_twin_of_its_kind(void **state)
{
    (void)state;
    static const char *const us[] = {"ft", "in",  "ac",  "gal", "lb",   "ton", "MGD",  "MG",
                                     "gp", "cfs", "psi", "hp",  "degF", "Btu", "$/lb", "$/MG"};
    for (size_t i = 0; i < formula_count(); i++) {
        const char *unit = formula_at(i)->unit;
        const char *metric = formula_metric_unit(unit);
        assert_non_null(unit_find(metric));
        assert_true(unit_same_kind(unit_find(unit), unit_find(metric)));
        for (size_t k = 0; k < NELEM(us); k++)
            if (strncmp(unit, us[k], strlen(us[k])) == 0 && strcmp(unit, metric) == 0)
                fail_msg("%s has no metric twin", unit);
    }
}

/* ---- values that work ---- */

static uint32_t next_random(uint32_t *seed)
{
    *seed = *seed * 1664525u + 1013904223u; /* Numerical Recipes, the quick generator */
    return *seed >> 8;
}

/* A whole number inside the argument's domain. */
static int64_t inside(struct arena *a, const struct formula_argument *arg, uint32_t *seed)
{
    const char *low_text = arg->at_least ? arg->at_least : arg->above ? arg->above : "0";
    const char *high_text = arg->at_most ? arg->at_most : arg->below;
    int64_t low = (int64_t)ceil(fraction_double(fraction_parse(a, low_text)));
    int64_t high = low + 60;
    if (high_text && fraction_double(fraction_parse(a, high_text)) < (double)high)
        high = (int64_t)fraction_double(fraction_parse(a, high_text));
    return low + (int64_t)(next_random(seed) % (uint32_t)(high - low + 1));
}

/* Tries seeded whole numbers until the formula works; ends the test when none do. */
static void find_good(struct arena *a, const struct formula *f, const struct ready *ready,
                      struct given *g)
{
    uint32_t seed = 7;
    for (int tries = 0; tries < 20000; tries++) {
        struct arena *passing = arena_new();
        const struct fraction *result;
        struct fault fault = {.set = false};
        for (size_t i = 0; i < f->arguments; i++) {
            g->value[i].count = f->argument[i].list ? LIST_LENGTH : 1;
            g->value[i].number = g->number[i];
            for (size_t k = 0; k < g->value[i].count; k++)
                g->number[i][k] = fraction_from_int(a, inside(passing, &f->argument[i], &seed));
        }
        enum status rc = ready_work(passing, ready, g->value, &result, &fault);
        arena_free(passing);
        if (rc == OK)
            return;
    }
    fail_msg("no values found that work for %s", f->name);
}

static void every_formula_can_be_worked(void **state)
{
    (void)state;
    for (size_t i = 0; i < formula_count(); i++) {
        struct arena *a = arena_new();
        struct given g = {0};
        find_good(a, formula_at(i), formula_ready(a, formula_at(i)), &g);
        arena_free(a);
    }
}

/* ---- bounds ---- */

/* One argument at a value, the others good. */
static bool refused(struct arena *a, const struct ready *ready, struct given g, size_t argument,
                    const struct fraction *x, struct fault *fault)
{
    const struct fraction *result;
    for (size_t i = 0; i < ready->formula->arguments; i++)
        g.value[i].number = g.number[i];
    for (size_t k = 0; k < LIST_LENGTH; k++)
        g.number[argument][k] = x;
    *fault = (struct fault){.set = false};
    return ready_work(a, ready, g.value, &result, fault) != OK;
}

static void check_bound(struct arena *a, const struct ready *ready, const struct given *g, size_t i,
                        const char *bound, const char *beyond)
{
    struct fault fault;
    if (bound == NULL)
        return;
    const struct fraction *x = fraction_add(a, fraction_parse(a, bound), fraction_parse(a, beyond));
    if (!refused(a, ready, *g, i, x, &fault))
        fail_msg("%s takes %s beyond its bound %s", ready->formula->name,
                 ready->formula->argument[i].name, bound);
    assert_non_null(strstr(fault.text, ready->formula->argument[i].name));
    assert_non_null(strstr(fault.text, bound));
    assert_int_equal(fault.kind, FAULT_FAILED);
}

static void every_stated_bound_is_refused_beyond_it(void **state)
{
    (void)state;
    for (size_t i = 0; i < formula_count(); i++) {
        struct arena *a = arena_new();
        const struct formula *f = formula_at(i);
        const struct ready *ready = formula_ready(a, f);
        struct given g = {0};
        find_good(a, f, ready, &g);
        for (size_t k = 0; k < f->arguments; k++) {
            check_bound(a, ready, &g, k, f->argument[k].above, "0");
            check_bound(a, ready, &g, k, f->argument[k].at_least, "-0.000000001");
            check_bound(a, ready, &g, k, f->argument[k].below, "0");
            check_bound(a, ready, &g, k, f->argument[k].at_most, "0.000000001");
        }
        arena_free(a);
    }
}

/* ---- hostile values ---- */

static const char *const hostile[] = {"0",
                                      "-1",
                                      "-0.000000000000000001",
                                      "0.000000000000000001",
                                      "999999999999999999",
                                      "-999999999999999999",
                                      "0.5",
                                      "1",
                                      "100",
                                      "1/3",
                                      "273.15"};

static void check_hostile(struct arena *a, const struct ready *ready, const struct given *g)
{
    const struct fraction *result = NULL;
    struct fault fault = {.set = false};
    if (ready_work(a, ready, g->value, &result, &fault) != OK) {
        assert_true(fault.set && *fault.text != '\0');
        return;
    }
    if (!isfinite(fraction_double(result)))
        fail_msg("%s came to no finite number", ready->formula->name);
    assert_true(*formula_number(a, result) != '\0');
}

static void hostile_values_give_a_fault_or_a_finite_number(void **state)
{
    (void)state;
    for (size_t i = 0; i < formula_count(); i++) {
        struct arena *a = arena_new();
        const struct formula *f = formula_at(i);
        const struct ready *ready = formula_ready(a, f);
        struct given good = {0};
        find_good(a, f, ready, &good);
        for (size_t h = 0; h < NELEM(hostile); h++) {
            const struct fraction *x = fraction_parse(a, hostile[h]);
            struct given all = good;
            for (size_t k = 0; k < f->arguments; k++) {
                struct given one = good;
                for (size_t n = 0; n < f->arguments; n++)
                    one.value[n].number = one.number[n];
                all.value[k].number = all.number[k];
                for (size_t n = 0; n < LIST_LENGTH; n++)
                    one.number[k][n] = all.number[k][n] = x;
                check_hostile(a, ready, &one);
            }
            check_hostile(a, ready, &all);
        }
        arena_free(a);
    }
}

/* ---- units ---- */

/* "flow=7" for the argument's own unit, "flow=7gpm" for another. */
static bool ask(struct arena *a, const struct formula *f, const struct given *g, size_t other,
                const struct unit *unit, const struct fraction **out, struct fault *fault)
{
    const char *words[FORMULA_ARGUMENTS_MOST];
    struct formula_result result;
    for (size_t i = 0; i < f->arguments; i++) {
        struct text t;
        text_init(&t, 4096);
        text_print(&t, "%s=", f->argument[i].name);
        for (size_t k = 0; k < g->value[i].count; k++)
            text_print(&t, "%s%s%s%s", k > 0 ? "," : "",
                       fraction_print(a, g->number[i][k], 0, ROUND_HALF_EVEN),
                       i == other ? " " : "", i == other ? unit->name : "");
        words[i] = arena_text(a, t.at);
        text_free(&t);
    }
    enum status rc = formula_ask(a, f->name, words, f->arguments, false, &result, fault);
    *out = result.value;
    return rc == OK;
}

/* The values of one argument are taken as numbers of another unit and turned by hand. */
static void check_unit(struct arena *a, const struct ready *ready, const struct given *g, size_t i,
                       const struct unit *unit)
{
    const struct formula *f = ready->formula;
    const struct unit *own = unit_find(f->argument[i].unit);
    struct given turned = *g;
    struct fault asked = {.set = false};
    struct fault worked = {.set = false};
    const struct fraction *one;
    const struct fraction *other;
    for (size_t k = 0; k < f->arguments; k++)
        turned.value[k].number = turned.number[k];
    for (size_t k = 0; k < g->value[i].count; k++)
        turned.number[i][k] = unit_convert(a, g->number[i][k], unit, own);
    bool rc_asked = ask(a, f, g, i, unit, &one, &asked);
    bool rc_worked = ready_work(a, ready, turned.value, &other, &worked) == OK;
    if (rc_asked != rc_worked)
        fail_msg("%s with %s in %s: %s%s", f->name, f->argument[i].name, unit->name, asked.text,
                 worked.text);
    if (rc_asked && fraction_compare(one, other) != 0)
        fail_msg("%s with %s in %s gives another answer", f->name, f->argument[i].name, unit->name);
}

static void every_unit_of_the_kind_gives_the_same_answer(void **state)
{
    (void)state;
    for (size_t i = 0; i < formula_count(); i++) {
        struct arena *a = arena_new();
        const struct formula *f = formula_at(i);
        const struct ready *ready = formula_ready(a, f);
        struct given g = {0};
        find_good(a, f, ready, &g);
        for (size_t k = 0; k < f->arguments; k++)
            for (size_t u = 0; u < unit_count(); u++)
                if (unit_same_kind(unit_at(u), unit_find(f->argument[k].unit)))
                    check_unit(a, ready, &g, k, unit_at(u));
        arena_free(a);
    }
}

static void a_word_near_a_formula_finds_it(void **state)
{
    (void)state;
    assert_string_equal(formula_nearest("mas-load"), "mass-load");
    assert_string_equal(formula_nearest("Percent-Removal"), "percent-removal");
    assert_null(formula_find("mas-load"));
    assert_null(formula_find(""));
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(every_row_is_complete),
        cmocka_unit_test(every_unit_has_a_metric_twin_of_its_kind),
        cmocka_unit_test(every_formula_can_be_worked),
        cmocka_unit_test(every_stated_bound_is_refused_beyond_it),
        cmocka_unit_test(hostile_values_give_a_fault_or_a_finite_number),
        cmocka_unit_test(every_unit_of_the_kind_gives_the_same_answer),
        cmocka_unit_test(a_word_near_a_formula_finds_it),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
