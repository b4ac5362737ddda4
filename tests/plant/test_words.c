/* words: every word a description may use is read back as itself, and the layouts are those of the
 * design. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "describe.h"

#include <string.h>

/* The plant made of the small one and one more row; a row that is not taken fails the test. */
static struct plant *plant_with(struct arena *a, enum plant_file file, const char *row)
{
    struct plant_draft *d = small_plant(a);
    struct plant *p = NULL;
    struct fault f = {0};

    add_rows(d, file, false, NEXT, row);
    if (plant_draft_finish(d, &p, &f) != OK)
        fail_msg("%s\n%s", row, f.text);
    return p;
}

static const struct limit *last_limit(const struct plant *p)
{
    return &p->limits[p->limit_count - 1];
}

static void every_role_is_read_as_itself(void **state)
{
    (void)state;
    for (int i = 0; i < ROLES; i++) {
        struct arena *a = arena_new();
        struct plant *p = plant_with(a, PLANT_POINTS, arena_print(a, "NEW,New,%s,", role_words[i]));
        int point = plant_point(p, "NEW");

        assert_true(point >= 0);
        assert_int_equal(p->points[point].role, i);
        arena_free(a);
    }
}

static void every_kind_of_basin_is_read_as_itself(void **state)
{
    (void)state;
    for (int i = 0; i < BASIN_KINDS; i++) {
        struct arena *a = arena_new();
        struct plant *p =
            plant_with(a, PLANT_BASINS, arena_print(a, "NEW,%s", basin_kind_words[i]));

        assert_int_equal(p->basins[p->basin_count - 1].kind, i);
        assert_string_equal(p->basins[p->basin_count - 1].id, "NEW");
        arena_free(a);
    }
}

static void every_day_rule_and_average_is_read_as_itself(void **state)
{
    (void)state;
    for (int i = 0; i < DAY_RULES; i++) {
        for (int j = 0; j < AVERAGES; j++) {
            struct arena *a = arena_new();
            struct plant *p = plant_with(
                a, PLANT_PARAMETERS,
                arena_print(a, "NEW,,mg/L,3,%s,%s", day_rule_words[i], average_words[j]));
            int parameter = plant_parameter(p, "NEW");

            assert_true(parameter >= 0);
            assert_int_equal(p->parameters[parameter].day_rule, i);
            assert_int_equal(p->parameters[parameter].average, j);
            arena_free(a);
        }
    }
}

/* A unit each basis may have of a parameter that has it, by whether the statistic is a total. */
static const struct {
    const char *parameter, *unit, *total_unit;
} of_basis[BASES] = {
    [BASIS_CONCENTRATION] = {"TSS", "mg/L", "mg/L"},
    [BASIS_LOAD] = {"TSS", "lb/d", "lb"},
    [BASIS_REMOVAL] = {"TSS", "%", NULL},
    [BASIS_FLOW] = {"FLOW", "MGD", "MG"},
    [BASIS_COUNT] = {"EXCURSION", "min", "min"},
};

static void every_basis_statistic_and_bound_is_read_as_itself(void **state)
{
    (void)state;
    for (int basis = 0; basis < BASES; basis++) {
        for (int s = 0; s < STATISTICS; s++) {
            bool total = s == STAT_MONTHLY_TOTAL || s == STAT_ANNUAL_TOTAL;
            bool derived = basis == BASIS_LOAD || basis == BASIS_REMOVAL;
            const char *unit = total ? of_basis[basis].total_unit : of_basis[basis].unit;
            const char *word = s == STAT_PERCENTILE ? "percentile-90" : statistic_words[s];

            if (!unit || (derived && s == STAT_INSTANTANEOUS))
                continue;
            for (int bound = 0; bound < BOUNDS; bound++) {
                struct arena *a = arena_new();
                const char *row = arena_print(
                    a, "001,EFF,%s,%s,%s,%s,%s,%s", of_basis[basis].parameter, basis_words[basis],
                    word, bound_words[bound], bound == BOUND_REPORT ? "" : "7.50", unit);
                const struct limit *l = last_limit(plant_with(a, PLANT_LIMITS, row));

                assert_int_equal(l->basis, basis);
                assert_int_equal(l->statistic, s);
                assert_int_equal(l->percentile, s == STAT_PERCENTILE ? 90 : 0);
                assert_string_equal(l->statistic_text, word);
                assert_int_equal(l->bound, bound);
                assert_int_equal(l->limit.set, bound != BOUND_REPORT);
                assert_string_equal(l->limit_text, bound == BOUND_REPORT ? "" : "7.50");
                assert_string_equal(l->unit->name, unit);
                assert_int_equal(l->line, NEXT);
                arena_free(a);
            }
        }
    }
}

static void every_kind_of_sample_is_read_as_itself(void **state)
{
    (void)state;
    for (int i = 0; i < SAMPLE_TYPES; i++) {
        struct arena *a = arena_new();
        const char *row = arena_print(a, "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,,1/day,%s",
                                      sample_type_words[i]);

        assert_int_equal(last_limit(plant_with(a, PLANT_LIMITS, row))->sample, i);
        arena_free(a);
    }
}

static void every_kind_of_meter_is_read_as_itself(void **state)
{
    (void)state;
    for (int i = 0; i < METER_KINDS; i++) {
        struct arena *a = arena_new();
        struct plant *p =
            plant_with(a, PLANT_METERS, arena_print(a, "RAS,FLOW,%s", meter_kind_words[i]));

        assert_int_equal(p->meters[p->meter_count - 1].kind, i);
        arena_free(a);
    }
}

static void every_frequency_is_read_as_itself(void **state)
{
    static const struct {
        const char *text;
        int count;
        enum per per;
    } cases[] = {
        {"1/day", 1, PER_DAY},     {"3/week", 3, PER_WEEK},           {"7/week", 7, PER_WEEK},
        {"2/month", 2, PER_MONTH}, {"31/month", 31, PER_MONTH},       {"1/quarter", 1, PER_QUARTER},
        {"1/year", 1, PER_YEAR},   {"continuous", 0, PER_CONTINUOUS}, {"", 0, PER_NONE},
    };

    (void)state;
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct arena *a = arena_new();
        const struct limit *l = last_limit(plant_with(
            a, PLANT_LIMITS,
            arena_print(a, "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,,%s", cases[i].text)));

        assert_int_equal(l->samples.count, cases[i].count);
        assert_int_equal(l->samples.per, cases[i].per);
        assert_string_equal(l->samples.text, cases[i].text);
        arena_free(a);
    }
}

static void the_samples_allowed_are_read_as_written(void **state)
{
    static const struct {
        const char *text;
        enum allowed_kind kind;
        const char *number;
    } cases[] = {
        {"", ALLOWED_NONE, "0"},          {"0", ALLOWED_COUNT, "0"},
        {"2", ALLOWED_COUNT, "2"},        {"10%", ALLOWED_PERCENT, "10"},
        {"2.5%", ALLOWED_PERCENT, "2.5"}, {"eu-table-3", ALLOWED_EU_TABLE_3, "0"},
    };
    char number[24];

    (void)state;
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct arena *a = arena_new();
        const struct limit *l = last_limit(plant_with(
            a, PLANT_LIMITS,
            arena_print(a, "001,EFF,TSS,concentration,annual-samples,max,35,mg/L,,,,,,,%s,87.5",
                        cases[i].text)));

        assert_int_equal(l->allowed_kind, cases[i].kind);
        decimal_write(l->allowed, number);
        assert_string_equal(number, cases[i].number);
        assert_true(l->ceiling.set);
        decimal_write(l->ceiling.value, number);
        assert_string_equal(number, "87.5");
        arena_free(a);
    }
}

static void the_words_of_a_list_all_differ(void **state)
{
    static const struct {
        const char *const *words;
        size_t count;
    } lists[] = {
        {role_words, ROLES},
        {basin_kind_words, BASIN_KINDS},
        {day_rule_words, DAY_RULES},
        {average_words, AVERAGES},
        {basis_words, BASES},
        {bound_words, BOUNDS},
        {statistic_words, STATISTICS},
        {sample_type_words, SAMPLE_TYPES},
        {meter_kind_words, METER_KINDS},
    };

    (void)state;
    for (size_t i = 0; i < NELEM(lists); i++) {
        for (size_t j = 0; j < lists[i].count; j++) {
            assert_non_null(lists[i].words[j]);
            for (size_t k = 0; k < j; k++)
                assert_string_not_equal(lists[i].words[j], lists[i].words[k]);
        }
    }
}

/* The header rows of the design, typed anew. */
static void the_layouts_are_those_of_the_design(void **state)
{
    static const char *const headers[PLANT_FILES] = {
        [PLANT_FIELDS] = "plant.csv:field,value",
        [PLANT_POINTS] = "points.csv:point,name,role,outfall",
        [PLANT_PARAMETERS] = "parameters.csv:parameter,name,unit,decimals,day_rule,average,code,"
                             "low,high,mdl,rl,rules",
        [PLANT_BASINS] = "basins.csv:basin,kind,point,volume,volume_unit,area,area_unit,weir,"
                         "weir_unit,from,to",
        [PLANT_LIMITS] = "limits.csv:outfall,point,parameter,basis,statistic,bound,limit,unit,"
                         "season,from,to,when,samples,sample,allowed,ceiling,group,rules,note",
        [PLANT_METERS] = "meters.csv:point,parameter,kind,rolls_at,multiplier,from,to",
        [PLANT_PROCESS] = "process.csv:name,at,parameter,formula,argument,source,unit",
        [PLANT_ROUND] = "round.csv:point,parameter,sample",
    };

    (void)state;
    for (int i = 0; i < PLANT_FILES; i++) {
        const struct plant_layout *layout = plant_layout((enum plant_file)i);
        struct text t;

        text_init(&t, 1000);
        text_print(&t, "%s:", layout->file);
        for (size_t c = 0; c < layout->columns; c++) {
            text_print(&t, "%s%s", c > 0 ? "," : "", layout->column[c]);
            assert_int_equal(plant_column((enum plant_file)i, layout->column[c], NULL), c);
        }
        assert_string_equal(t.at, headers[i]);
        assert_true(layout->needed <= layout->columns);
        text_free(&t);
    }
    assert_int_equal(plant_layout(PLANT_LIMITS)->needed, 8);
    assert_true(plant_layout(PLANT_FIELDS)->required && plant_layout(PLANT_POINTS)->required &&
                plant_layout(PLANT_LIMITS)->required);
    assert_false(plant_layout(PLANT_BASINS)->required);
    assert_false(plant_layout(PLANT_ROUND)->required);
    assert_int_equal(plant_layout(PLANT_ROUND)->needed, 2);
}

static void an_unknown_column_gets_the_nearest_one(void **state)
{
    const char *nearest = "";

    (void)state;
    assert_int_equal(plant_column(PLANT_LIMITS, "statistik", &nearest), -1);
    assert_string_equal(nearest, "statistic");
    assert_int_equal(plant_column(PLANT_LIMITS, "zzzzzzzz", &nearest), -1);
    assert_null(nearest);
    assert_int_equal(plant_column(PLANT_LIMITS, "Point", NULL), -1);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(every_role_is_read_as_itself),
        cmocka_unit_test(every_kind_of_basin_is_read_as_itself),
        cmocka_unit_test(every_day_rule_and_average_is_read_as_itself),
        cmocka_unit_test(every_basis_statistic_and_bound_is_read_as_itself),
        cmocka_unit_test(every_kind_of_sample_is_read_as_itself),
        cmocka_unit_test(every_kind_of_meter_is_read_as_itself),
        cmocka_unit_test(every_frequency_is_read_as_itself),
        cmocka_unit_test(the_samples_allowed_are_read_as_written),
        cmocka_unit_test(the_words_of_a_list_all_differ),
        cmocka_unit_test(the_layouts_are_those_of_the_design),
        cmocka_unit_test(an_unknown_column_gets_the_nearest_one),
    };

    return cmocka_run_group_tests(tests, NULL, NULL);
}
