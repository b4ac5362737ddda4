/* Formulas asked in words: units, steps, figures, and what is refused with what advice. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <string.h>

#include "process/process.h"

enum { WORDS_MOST = 8 };

struct asked {
    struct arena *arena;
    struct formula_result result;
    struct fault fault;
    enum status rc;
};

static struct asked ask(const char *formula, const char *const words[WORDS_MOST], bool metric)
{
    struct asked k = {.arena = arena_new(), .fault = {.set = false}};
    size_t count = 0;
    while (count < WORDS_MOST && words[count])
        count++;
    k.rc = formula_ask(k.arena, formula, words, count, metric, &k.result, &k.fault);
    return k;
}

static void the_steps_show_what_was_worked(void **state)
{
    (void)state;
    struct asked k =
        ask("mass-load", (const char *[WORDS_MOST]){"flow=1000gpm", "concentration=21"}, false);
    /* 1000 gpm is 1.44 MGD; 1.44 x 21 x 8.34 = 252.2016, and 21 has two figures. */
    static const char *const steps[] = {
        "flow: 1000 gpm = 1.44 MGD",
        "load_factor: 8.34 lb/gal unless given",
        "load = flow * concentration * load_factor",
        "load = 1.44 * 21 * 8.34",
        "load = 250 lb/d",
    };
    assert_int_equal(k.rc, OK);
    assert_int_equal(k.result.step_count, NELEM(steps) + 1);
    for (size_t i = 0; i < NELEM(steps); i++)
        assert_string_equal(k.result.steps[i].text, steps[i]);
    assert_int_equal(strncmp(k.result.steps[NELEM(steps)].text, "source: ", 8), 0);
    assert_int_equal(k.result.figures, 2);
    arena_free(k.arena);
}

static void a_rule_lists_its_arguments(void **state)
{
    (void)state;
    struct asked k =
        ask("percent-removal-paired",
            (const char *[WORDS_MOST]){"influents=200,190.0", "effluents=20,19.0"}, false);
    assert_int_equal(k.rc, OK);
    assert_int_equal(strncmp(k.result.steps[0].text, "removal = rule: ", 16), 0);
    assert_string_equal(k.result.steps[1].text, "influents: 200, 190 mg/L");
    assert_string_equal(k.result.steps[2].text, "effluents: 20, 19 mg/L");
    assert_string_equal(k.result.unit, "%");
    assert_int_equal(fraction_compare(k.result.value, fraction_from_int(k.arena, 90)), 0);
    arena_free(k.arena);
}

static void metric_gives_the_twin_unit(void **state)
{
    (void)state;
    struct asked k =
        ask("mass-load", (const char *[WORDS_MOST]){"flow=2.00", "concentration=150"}, true);
    /* 2.00 x 150 x 8.34 = 2502 lb/d; x 0.45359237 (NIST SP 811); three figures */
    assert_int_equal(k.rc, OK);
    assert_string_equal(k.result.unit, "kg/d");
    assert_int_equal(fraction_compare(k.result.value, fraction_parse(k.arena, "1134.88810974")), 0);
    assert_string_equal(k.result.steps[3].text, "load = 2500 lb/d = 1130 kg/d");
    arena_free(k.arena);
}

static void figures_are_the_fewest_of_what_was_measured(void **state)
{
    (void)state;
    static const struct {
        const char *formula, *words[WORDS_MOST];
        int figures;
    } cases[] = {
        {"mass-load", {"flow=2.370", "concentration=187"}, 3},
        {"mass-load", {"flow=2.370", "concentration=187", "load_factor=8.34"}, 3},
        {"mass-load", {"flow=2.3700", "concentration=187.0"}, 4},
        {"chlorine-demand", {"dose=8.25", "residual=0"}, 3}, /* a zero has no figures to give */
        {"membrane-filter-count", {"colonies=8", "volume=25.0"}, 3}, /* a count is exact */
        {"most-probable-number", /* published tables carry two */
         {"volumes=10,1,0.1", "tubes=5,5,5", "positives=5,1,0"},
         2},
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct asked k = ask(cases[i].formula, cases[i].words, false);
        if (k.rc != OK)
            fail_msg("%s", k.fault.text);
        assert_int_equal(k.result.figures, cases[i].figures);
        arena_free(k.arena);
    }
}

static void what_cannot_be_worked_is_refused_with_advice(void **state)
{
    (void)state;
    static const struct {
        const char *formula, *words[WORDS_MOST];
        enum fault_kind kind;
        const char *says[3]; /* all of these stand in the line */
    } cases[] = {
        {"mas-load", {NULL}, FAULT_USAGE, {"'mas-load'", "'mass-load'"}},
        {"mass-load", {"flow"}, FAULT_USAGE, {"'flow'", "ARG=VALUE"}},
        {"mass-load", {"flw=2"}, FAULT_USAGE, {"'flw'", "'flow'"}},
        {"mass-load", {"flow=2", "flow=3"}, FAULT_USAGE, {"'flow' is given twice"}},
        {"mass-load", {"flow=2"}, FAULT_USAGE, {"'concentration'", "mg/L"}},
        {"mass-load", {"flow="}, FAULT_USAGE, {"'flow'", "number"}},
        {"mass-load", {"flow=<5"}, FAULT_USAGE, {"'<5'"}},
        {"mass-load", {"flow=ND"}, FAULT_USAGE, {"'ND'"}},
        {"mass-load", {"flow=2,37"}, FAULT_USAGE, {"',37'"}},
        {"mass-load", {"flow=nan"}, FAULT_USAGE, {"'nan'"}},
        {"mass-load", {"flow=1e308"}, FAULT_USAGE, {"'1e308'", "18 digits"}},
        {"mass-load", {"flow=2Mgd"}, FAULT_USAGE, {"'Mgd'", "'MGD'"}},
        {"mass-load", {"flow=2lb"}, FAULT_USAGE, {"mass", "flow", "MGD"}},
        {"mass-load", {"flow=-1", "concentration=2"}, FAULT_FAILED, {"'flow'", "at least 0"}},
        {"mass-load",
         {"flow=1", "concentration=2", "load_factor=0"},
         FAULT_FAILED,
         {"'load_factor'", "above 0"}},
        {"percent-removal-of-averages",
         {"influents=0,0", "effluents=0,0"},
         FAULT_FAILED,
         {"'mean(influents)'", "zero"}},
        {"flow-weighted-mean",
         {"concentrations=5,6", "flows=0,0"},
         FAULT_FAILED,
         {"'sum(flows)'", "zero"}},
        {"flow-weighted-mean",
         {"concentrations=5,6", "flows=1"},
         FAULT_FAILED,
         {"2 values", "has 1"}},
        {"most-probable-number",
         {"volumes=10,1,0.1", "tubes=5,5,5", "positives=5,5,5"},
         FAULT_FAILED,
         {"every tube", "greater than"}},
        {"most-probable-number-thomas",
         {"volumes=10,1,0.1", "tubes=5,5,5", "positives=0,0,0"},
         FAULT_FAILED,
         {"no tube", "less than"}},
        {"most-probable-number",
         {"volumes=10,1", "tubes=5,5", "positives=6,1"},
         FAULT_FAILED,
         {"row 1", "more positive tubes"}},
        {"most-probable-number",
         {"volumes=10,1", "tubes=5,5", "positives=2.5,1"},
         FAULT_FAILED,
         {"part of a tube"}},
        {"membrane-filter-combined",
         {"colonies=0,0", "volumes=10,100"},
         FAULT_FAILED,
         {"colony", "less than"}},
        {"membrane-filter-combined",
         {"colonies=201,300", "volumes=10,100"},
         FAULT_FAILED,
         {"200", "TNTC"}},
        {"bod-from-dilutions",
         {"initial_dos=8.0,8.0", "final_dos=6.1,0.9", "sample_volumes=50,300"},
         FAULT_FAILED,
         {"no bottle"}},
        {"bod-from-dilutions",
         {"initial_dos=8.0", "final_dos=5.0", "sample_volumes=50", "seed_correction=3.5"},
         FAULT_FAILED,
         {"seed"}},
        {"oxygen-uptake-rate-by-slope",
         {"times=2,2", "readings=7.8,7.1"},
         FAULT_FAILED,
         {"times", "the same"}},
        {"percent-removal-paired",
         {"influents=200,0", "effluents=20,1"},
         FAULT_FAILED,
         {"above 0"}},
        {"volatile-fraction", {"mlvss=2100", "mlss=2000"}, FAULT_FAILED, {"mlvss <= mlss"}},
        {"total-suspended-solids",
         {"filter=0.14", "dried=0.13", "volume=100"},
         FAULT_FAILED,
         {"dried >= filter"}},
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct asked k = ask(cases[i].formula, cases[i].words, false);
        if (k.rc == OK)
            fail_msg("%s %s was not refused", cases[i].formula, cases[i].words[0]);
        assert_int_equal(k.fault.kind, cases[i].kind);
        for (size_t s = 0; s < 3 && cases[i].says[s]; s++)
            if (strstr(k.fault.text, cases[i].says[s]) == NULL)
                fail_msg("\"%s\" does not say \"%s\"", k.fault.text, cases[i].says[s]);
        arena_free(k.arena);
    }
}

static void filters_are_chosen_by_the_counting_rules(void **state)
{
    (void)state;
    /* Standard Methods 9222 D: 20 to 60 colonies in range; more than 200 are not read. By hand:
     * 100 x colonies / mL. */
    static const struct {
        const char *words[WORDS_MOST], *value;
    } cases[] = {
        {{"colonies=20,60", "volumes=10,50"}, "400/3"}, /* both ends in range: 8000 / 60 */
        {{"colonies=19,61", "volumes=10,50"}, "400/3"}, /* none in range: all of them */
        {{"colonies=15,250", "volumes=10,100"}, "150"}, /* the second is not read */
        {{"colonies=90,150", "volumes=5,10"}, "1800"},  /* all above: the smallest volume */
        {{"colonies=70,30", "volumes=50,25", "high=80"}, "400/3"}, /* 10000 / 75 */
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct asked k = ask("membrane-filter-combined", cases[i].words, false);
        if (k.rc != OK)
            fail_msg("%s", k.fault.text);
        if (fraction_compare(k.result.value, fraction_parse(k.arena, cases[i].value)) != 0)
            fail_msg("%s is not %s", cases[i].words[0], cases[i].value);
        arena_free(k.arena);
    }
}

static void a_unit_may_stand_apart_from_its_number(void **state)
{
    (void)state;
    struct asked k =
        ask("solids-for-food-to-microorganism",
            (const char *[WORDS_MOST]){"bod_load=1000 lb/d", "target=0.25 1/d"}, false);
    assert_int_equal(k.rc, OK); /* 1000 / 0.25 */
    assert_int_equal(fraction_compare(k.result.value, fraction_from_int(k.arena, 4000)), 0);
    arena_free(k.arena);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(the_steps_show_what_was_worked),
        cmocka_unit_test(a_rule_lists_its_arguments),
        cmocka_unit_test(metric_gives_the_twin_unit),
        cmocka_unit_test(figures_are_the_fewest_of_what_was_measured),
        cmocka_unit_test(what_cannot_be_worked_is_refused_with_advice),
        cmocka_unit_test(filters_are_chosen_by_the_counting_rules),
        cmocka_unit_test(a_unit_may_stand_apart_from_its_number),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
