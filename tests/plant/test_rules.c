/* rules: names, words and defaults as the design lists them, one level over another, and a sentence
 * for each. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "describe.h"

#include <string.h>

/* The design's list, typed anew: the first word is the default. */
static const struct {
    enum rule rule;
    const char *name, *words, *fallback;
} expected[] = {
    {RULE_NONDETECT, "nondetect", "zero|half|full|median", "zero"},
    {RULE_SIGN, "sign", "any|all|never", "any"},
    {RULE_GEOMEAN_ZERO, "geomean_zero", "", "1"},
    {RULE_WEEK_STARTS, "week_starts", "sunday|monday|tuesday|wednesday|thursday|friday|saturday",
     "sunday"},
    {RULE_WEEK_COUNTS_IN, "week_counts_in", "end|start|most-days|split|days-1-7", "end"},
    {RULE_ROUNDING, "rounding", "half-even|half-up", "half-even"},
    {RULE_DIGITS, "digits", "limit|figures", "limit"},
    {RULE_COMPARE, "compare", "rounded|raw", "rounded"},
    {RULE_REMOVAL, "removal", "averages|paired|loads|daily", "averages"},
    {RULE_LOAD_FACTOR, "load_factor", "", "8.34"},
    {RULE_LOAD_AVERAGE, "load_average", "daily|product", "daily"},
    {RULE_COUNT_BY, "count_by", "day|reading", "day"},
    {RULE_NO_DISCHARGE, "no_discharge", "skip|zero", "skip"},
    {RULE_DNQ, "dnq", "value|zero|half", "value"},
    {RULE_LONG_AVERAGE, "long_average", "default|months|days", "default"},
    {RULE_PERCENTILE, "percentile", "nearest-rank|linear|weibull", "nearest-rank"},
    {RULE_LOAD_TOTAL, "load_total", "days|sum", "days"},
    {RULE_FLOW, "flow", "", ""},
    {RULE_INFLUENT, "influent", "", ""},
    {RULE_WINDOW, "window", "days|results", "days"},
};

static void the_rules_are_those_of_the_design(void **state)
{
    (void)state;
    assert_int_equal(NELEM(expected), RULES);
    for (size_t i = 0; i < NELEM(expected); i++) {
        const struct rule_info *info = rule_info(expected[i].rule);
        struct text t;

        text_init(&t, 200);
        for (size_t w = 0; info->words && info->words[w]; w++)
            text_print(&t, "%s%s", w > 0 ? "|" : "", info->words[w]);
        assert_string_equal(info->name, expected[i].name);
        assert_string_equal(t.at, expected[i].words);
        assert_string_equal(info->fallback, expected[i].fallback);
        assert_true(strlen(info->meaning) > 0);
        text_free(&t);
    }
}

static void the_days_of_the_week_count_from_sunday(void **state)
{
    (void)state;
    for (int i = 0; i < 7; i++)
        assert_string_equal(rule_info(RULE_WEEK_STARTS)->words[i], weekday_names[i]);
}

static struct plant *plant_with(struct arena *a, enum plant_file file, const char *rows)
{
    struct plant_draft *d = small_plant(a);
    struct plant *p = NULL;
    struct fault f = {0};

    add_rows(d, file, false, NEXT, rows);
    if (plant_draft_finish(d, &p, &f) != OK)
        fail_msg("%s\n%s", rows, f.text);
    return p;
}

static void every_word_of_every_rule_is_read_as_itself(void **state)
{
    (void)state;
    for (int r = 0; r < RULES; r++) {
        const struct rule_info *info = rule_info((enum rule)r);

        for (int w = 0; info->words && info->words[w]; w++) {
            struct arena *a = arena_new();
            struct plant *p =
                plant_with(a, PLANT_FIELDS, arena_print(a, "%s,%s", info->name, info->words[w]));

            assert_int_equal(p->rules.word[r], w);
            assert_string_equal(p->rules.text[r], info->words[w]);
            assert_true(p->rules.own[r]);
            assert_true(strlen(rule_sentence(a, &p->rules, (enum rule)r)) > 0);
            arena_free(a);
        }
    }
}

static void a_plant_without_rules_has_the_defaults(void **state)
{
    struct arena *a = arena_new();
    struct plant *p = plant_with(a, PLANT_FIELDS, "time_zone,America/Chicago");
    char number[24];

    (void)state;
    for (int r = 0; r < RULES; r++) {
        const struct rule_info *info = rule_info((enum rule)r);

        assert_string_equal(p->rules.text[r], info->fallback);
        assert_false(p->rules.own[r]);
        if (info->kind == RULE_IS_POINT)
            assert_int_equal(p->rules.word[r], -1);
        else if (info->kind != RULE_IS_NUMBER)
            assert_int_equal(p->rules.word[r], 0);
    }
    decimal_write(p->rules.number[RULE_LOAD_FACTOR], number);
    assert_string_equal(number, "8.34");
    decimal_write(p->rules.number[RULE_GEOMEAN_ZERO], number);
    assert_string_equal(number, "1");
    arena_free(a);
}

static const struct limit *limit_of(const struct plant *p, long line)
{
    for (size_t i = 0; i < p->limit_count; i++)
        if (p->limits[i].line == line)
            return &p->limits[i];
    fail();
    return NULL;
}

static void a_limit_overrides_its_parameter_which_overrides_the_plant(void **state)
{
    struct arena *a = arena_new();
    struct plant_draft *d = small_plant(a);
    struct plant *p = NULL;
    struct fault f = {0};
    const struct limit *plain, *set;
    const struct parameter *tss;
    char number[24];

    (void)state;
    add_rows(d, PLANT_FIELDS, false, NEXT,
             "nondetect,half\nweek_starts,monday\nload_factor,8.3454\ninfluent,INF");
    add_rows(d, PLANT_PARAMETERS, false, NEXT, "TSS,,,,,,,,,,,nondetect=full;sign=never");
    add_rows(d, PLANT_LIMITS, false, NEXT,
             "001,EFF,TSS,load,daily,max,30,lb/d\n"
             "001,EFF,TSS,removal,monthly-average,min,85,%,,,,,,,,,,sign=all;digits=2;flow=EF2\n"
             "001,EFF,NO3N,concentration,daily,max,30,mg/L");
    assert_int_equal(plant_draft_finish(d, &p, &f), OK);
    tss = &p->parameters[plant_parameter(p, "TSS")];
    plain = limit_of(p, NEXT);
    set = limit_of(p, NEXT + 1);

    assert_int_equal(p->rules.word[RULE_NONDETECT], NONDETECT_HALF);
    assert_int_equal(tss->rules.word[RULE_NONDETECT], NONDETECT_FULL);
    assert_true(tss->rules.own[RULE_NONDETECT]);
    assert_int_equal(tss->rules.word[RULE_WEEK_STARTS], MONDAY);
    assert_false(tss->rules.own[RULE_WEEK_STARTS]);

    assert_int_equal(plain->rules.word[RULE_NONDETECT], NONDETECT_FULL);
    assert_false(plain->rules.own[RULE_NONDETECT]);
    assert_int_equal(plain->rules.word[RULE_SIGN], SIGN_NEVER);
    assert_int_equal(plain->rules.word[RULE_INFLUENT], plant_point(p, "INF"));
    decimal_write(plain->rules.number[RULE_LOAD_FACTOR], number);
    assert_string_equal(number, "8.3454");

    assert_int_equal(set->rules.word[RULE_SIGN], SIGN_ALL);
    assert_true(set->rules.own[RULE_SIGN]);
    assert_int_equal(set->rules.word[RULE_NONDETECT], NONDETECT_FULL);
    assert_int_equal(set->rules.word[RULE_DIGITS], DIGITS_NUMBER);
    decimal_write(set->rules.number[RULE_DIGITS], number);
    assert_string_equal(number, "2");
    assert_int_equal(set->rules.word[RULE_FLOW], plant_point(p, "EF2"));

    assert_int_equal(limit_of(p, NEXT + 2)->rules.word[RULE_NONDETECT], NONDETECT_HALF);
    arena_free(a);
}

static void a_built_in_parameter_keeps_its_rules_where_the_plants_own_row_has_none(void **state)
{
    struct arena *a = arena_new();
    struct plant_draft *d = plant_draft_new(a);
    struct plant *p = NULL;
    struct fault f = {0};

    (void)state;
    add_rows(d, PLANT_PARAMETERS, true, 2,
             "ECOLI,E. coli,MPN/100mL,0,geometric,geometric,51040,,,,,count_by=reading");
    add_rows(d, PLANT_PARAMETERS, false, 2, "ECOLI,,cfu/100mL,,,,,,,,,sign=never");
    add_rows(d, PLANT_POINTS, false, 2, "EFF,,effluent,001");
    add_rows(d, PLANT_FIELDS, false, 2, "name,Marrow Bend");
    assert_int_equal(plant_draft_finish(d, &p, &f), OK);
    assert_int_equal(p->parameters[0].rules.word[RULE_COUNT_BY], COUNT_BY_READING);
    assert_int_equal(p->parameters[0].rules.word[RULE_SIGN], SIGN_NEVER);
    arena_free(a);
}

static void a_sentence_says_the_rule_and_its_number(void **state)
{
    static const struct {
        const char *field;
        enum rule rule;
        const char *sentence;
    } cases[] = {
        {"nondetect,zero", RULE_NONDETECT, "less-than results count as zero in averages"},
        {"load_factor,8.345", RULE_LOAD_FACTOR, "pounds a day are MGD x mg/L x 8.345"},
        {"geomean_zero,0.5", RULE_GEOMEAN_ZERO, "a zero enters a geometric mean as 0.5"},
        {"week_starts,monday", RULE_WEEK_STARTS, "weeks begin on Monday"},
        {"rounding,half-even", RULE_ROUNDING,
         "figures are rounded once, at the end; a dropped 5 goes to the even digit"},
        {"digits,1", RULE_DIGITS, "figures have 1 decimal"},
        {"digits,3", RULE_DIGITS, "figures have 3 decimals"},
        {"flow,EF2", RULE_FLOW, "a point without a flow of its own takes the flow of EF2"},
        {"influent,INF", RULE_INFLUENT,
         "where several influent points could serve, a removal starts from INF"},
        {"time_zone,UTC", RULE_FLOW, "a load takes the flow of its own point"},
    };

    (void)state;
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct arena *a = arena_new();
        struct plant *p = plant_with(a, PLANT_FIELDS, cases[i].field);

        assert_string_equal(rule_sentence(a, &p->rules, cases[i].rule), cases[i].sentence);
        arena_free(a);
    }
}

static void no_two_words_of_a_rule_say_the_same(void **state)
{
    (void)state;
    for (int r = 0; r < RULES; r++) {
        const struct rule_info *info = rule_info((enum rule)r);
        struct arena *a = arena_new();
        const char *said[10] = {0};

        for (int w = 0; info->words && info->words[w]; w++) {
            struct plant *p =
                plant_with(a, PLANT_FIELDS, arena_print(a, "%s,%s", info->name, info->words[w]));

            said[w] = rule_sentence(a, &p->rules, (enum rule)r);
            for (int v = 0; v < w; v++)
                assert_string_not_equal(said[v], said[w]);
        }
        arena_free(a);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(the_rules_are_those_of_the_design),
        cmocka_unit_test(the_days_of_the_week_count_from_sunday),
        cmocka_unit_test(every_word_of_every_rule_is_read_as_itself),
        cmocka_unit_test(a_plant_without_rules_has_the_defaults),
        cmocka_unit_test(a_limit_overrides_its_parameter_which_overrides_the_plant),
        cmocka_unit_test(a_built_in_parameter_keeps_its_rules_where_the_plants_own_row_has_none),
        cmocka_unit_test(a_sentence_says_the_rule_and_its_number),
        cmocka_unit_test(no_two_words_of_a_rule_say_the_same),
    };

    return cmocka_run_group_tests(tests, NULL, NULL);
}
