/* plant: what holds on a day, who is who, and what a description becomes. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "describe.h"

static day_t day(const char *iso)
{
    day_t d;

    if (!day_parse(iso, &d))
        fail_msg("no such day: %s", iso);
    return d;
}

static struct plant *finished(struct plant_draft *d)
{
    struct plant *p = NULL;
    struct fault f = {0};

    if (plant_draft_finish(d, &p, &f) != OK)
        fail_msg("%s", f.text);
    return p;
}

/* Season ends are inclusive, may wrap the year's end, and 02-28 takes in 02-29 (permit rules R36).
 */
static void a_season_holds_its_own_days(void **state)
{
    static const struct {
        struct season season;
        const char *day;
        bool holds;
    } cases[] = {
        {{false, 0, 0, 0, 0}, "2025-07-01", true},   {{true, 5, 1, 10, 31}, "2025-04-30", false},
        {{true, 5, 1, 10, 31}, "2025-05-01", true},  {{true, 5, 1, 10, 31}, "2025-10-31", true},
        {{true, 5, 1, 10, 31}, "2025-11-01", false}, {{true, 12, 1, 3, 31}, "2025-11-30", false},
        {{true, 12, 1, 3, 31}, "2025-12-01", true},  {{true, 12, 1, 3, 31}, "2025-12-31", true},
        {{true, 12, 1, 3, 31}, "2026-01-01", true},  {{true, 12, 1, 3, 31}, "2026-03-31", true},
        {{true, 12, 1, 3, 31}, "2026-04-01", false}, {{true, 11, 1, 2, 28}, "2024-02-28", true},
        {{true, 11, 1, 2, 28}, "2024-02-29", true},  {{true, 11, 1, 2, 28}, "2024-03-01", false},
        {{true, 11, 1, 2, 28}, "2025-03-01", false}, {{true, 11, 1, 2, 29}, "2024-02-29", true},
        {{true, 11, 1, 2, 29}, "2025-02-28", true},  {{true, 2, 29, 6, 30}, "2025-02-28", false},
        {{true, 2, 29, 6, 30}, "2025-03-01", true},  {{true, 2, 29, 6, 30}, "2024-02-29", true},
        {{true, 3, 1, 10, 31}, "2024-02-29", false}, {{true, 7, 4, 7, 4}, "2025-07-04", true},
        {{true, 7, 4, 7, 4}, "2025-07-05", false},
    };

    (void)state;
    for (size_t i = 0; i < NELEM(cases); i++)
        if (season_holds(&cases[i].season, day(cases[i].day)) != cases[i].holds)
            fail_msg("case %zu: %s", i, cases[i].day);
}

/* Two seasons that part the year leave no day out and hold none twice, leap years included. */
static void summer_and_winter_part_every_year(void **state)
{
    const struct season summer = {true, 3, 1, 10, 31}, winter = {true, 11, 1, 2, 28};

    (void)state;
    for (day_t d = day("1999-01-01"); d <= day("2005-12-31"); d++)
        assert_int_equal(season_holds(&summer, d) + season_holds(&winter, d), 1);
}

static void a_limit_is_in_force_within_season_and_dates(void **state)
{
    struct limit l = {.season = {true, 5, 1, 10, 31}, .from = day("2024-07-01"), .to = DAY_NONE};

    (void)state;
    assert_false(limit_in_force(&l, day("2024-06-30")));
    assert_true(limit_in_force(&l, day("2024-07-01")));
    assert_false(limit_in_force(&l, day("2024-11-01")));
    assert_true(limit_in_force(&l, day("2199-05-01")));
    l.to = day("2025-05-10");
    assert_true(limit_in_force(&l, day("2025-05-10")));
    assert_false(limit_in_force(&l, day("2025-05-11")));
}

static void a_basin_serves_from_its_first_day_to_its_last(void **state)
{
    struct arena *a = arena_new();
    struct plant_draft *d = small_plant(a);
    struct plant *p;

    (void)state;
    add_rows(d, PLANT_BASINS, false, NEXT,
             "AB1,aeration,,0.75,MG,,,,,2025-01-01,\nAB2,anoxic,RAS,2839.06,m3,,,,,2025-03-01,"
             "2025-03-31");
    p = finished(d);
    assert_int_equal(p->basin_count, 4);
    assert_true(basin_in_service(&p->basins[0], day("2024-12-31")));
    assert_false(basin_in_service(&p->basins[0], day("2025-01-01")));
    assert_true(basin_in_service(&p->basins[2], day("2025-01-01")));
    assert_false(basin_in_service(&p->basins[3], day("2025-02-28")));
    assert_true(basin_in_service(&p->basins[3], day("2025-03-31")));
    assert_false(basin_in_service(&p->basins[3], day("2025-04-01")));
    assert_int_equal(p->basins[3].point, plant_point(p, "RAS"));
    assert_string_equal(p->basins[3].volume_unit->name, "m3");
    assert_int_equal(p->basins[0].point, -1);
    assert_null(p->basins[0].weir_unit);
    arena_free(a);
}

static void a_changed_meter_is_found_by_the_day(void **state)
{
    struct arena *a = arena_new();
    struct plant_draft *d = small_plant(a);
    struct plant *p;
    const struct meter *m;
    char number[24];
    int eff, flow;

    (void)state;
    add_rows(d, PLANT_METERS, false, NEXT, "EFF,FLOW,totalizer,9999999,0.001,2025-01-01,");
    p = finished(d);
    eff = plant_point(p, "EFF");
    flow = plant_parameter(p, "FLOW");
    m = plant_meter(p, eff, flow, day("2024-12-31"));
    assert_non_null(m);
    decimal_write(m->rolls_at.value, number);
    assert_string_equal(number, "1000000");
    decimal_write(m->multiplier, number);
    assert_string_equal(number, "1");
    m = plant_meter(p, eff, flow, day("2025-01-01"));
    assert_non_null(m);
    decimal_write(m->multiplier, number);
    assert_string_equal(number, "0.001");
    assert_null(plant_meter(p, plant_point(p, "INF"), flow, day("2025-01-01")));
    arena_free(a);
}

static void names_are_found_as_written_and_near_ones_are_offered(void **state)
{
    struct arena *a = arena_new();
    struct plant *p = finished(small_plant(a));

    (void)state;
    assert_int_equal(plant_point(p, "EFF"), 1);
    assert_int_equal(plant_point(p, "eff"), -1);
    assert_int_equal(plant_parameter(p, "NH3N"), 3);
    assert_int_equal(plant_parameter(p, ""), -1);
    assert_string_equal(plant_nearest_point(p, "EFFF"), "EFF");
    assert_string_equal(plant_nearest_parameter(p, "NH3-N"), "NH3N");
    assert_null(plant_nearest_point(p, "LABORATORY"));
    arena_free(a);
}

static void a_plant_holds_what_its_description_says(void **state)
{
    struct arena *a = arena_new();
    struct plant_draft *d = small_plant(a);
    const struct limit *l;
    struct plant *p;

    (void)state;
    add_rows(d, PLANT_FIELDS, false, NEXT,
             "receiving_water,Marrow Creek\nsince,2024-01-01\ntime_zone,America/Chicago");
    add_rows(d, PLANT_LIMITS, false, NEXT,
             "SUM,EFF + EF2,NH3N+NO3N,load,weekly-average,below,30.0,lb/d,12-01..03-31,2024-01-01,"
             "2026-12-31,INF  FLOW monthly-average >= 2.50 MGD,3/week,composite,,,,dnq=half,final");
    p = finished(d);
    assert_string_equal(p->name, "Marrow Bend");
    assert_string_equal(p->receiving_water, "Marrow Creek");
    assert_int_equal(p->since, day("2024-01-01"));
    assert_false(p->metric);
    l = &p->limits[p->limit_count - 1];
    assert_int_equal(l->points, 2);
    assert_int_equal(l->point[1], plant_point(p, "EF2"));
    assert_int_equal(l->parameters, 2);
    assert_int_equal(l->parameter[1], plant_parameter(p, "NO3N"));
    assert_string_equal(l->point_text, "EFF + EF2");
    assert_string_equal(l->limit_text, "30.0");
    assert_int_equal(l->limit.value.scale, 1);
    assert_int_equal(l->season.from_month, 12);
    assert_int_equal(l->season.to_date, 31);
    assert_int_equal(l->to, day("2026-12-31"));
    assert_true(l->when.set);
    assert_int_equal(l->when.point, plant_point(p, "INF"));
    assert_int_equal(l->when.statistic, STAT_MONTHLY_AVERAGE);
    assert_int_equal(l->when.comparison, WHEN_AT_LEAST);
    assert_int_equal(l->when.number.scale, 2);
    assert_string_equal(l->when.unit->name, "MGD");
    assert_int_equal(l->samples.count, 3);
    assert_int_equal(l->sample, SAMPLE_COMPOSITE);
    assert_string_equal(l->note, "final");
    arena_free(a);
}

static void a_metric_plant_is_known_as_one(void **state)
{
    struct arena *a = arena_new();
    struct plant_draft *d = plant_draft_new(a);

    (void)state;
    add_rows(d, PLANT_FIELDS, false, 2, "name,Marrow Bend\nunits,metric\nsince,");
    add_rows(d, PLANT_POINTS, false, 2, "EFF,,effluent,001");
    struct plant *p = finished(d);
    assert_true(p->metric);
    assert_int_equal(p->since, DAY_NONE);
    assert_string_equal(p->points[0].name, "EFF");
    arena_free(a);
}

static void each_comparison_of_a_condition_is_read_as_itself(void **state)
{
    static const struct {
        const char *sign;
        int comparison;
    } cases[] = {{">", WHEN_OVER}, {">=", WHEN_AT_LEAST}, {"<", WHEN_UNDER}, {"<=", WHEN_AT_MOST}};

    (void)state;
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct arena *a = arena_new();
        struct plant_draft *d = small_plant(a);
        struct plant *p;

        add_rows(d, PLANT_LIMITS, false, NEXT,
                 arena_print(a,
                             "001,EFF,TSS,concentration,daily,max,30,mg/L,,,,EFF FLOW "
                             "percentile-95 %s 2.5 MGD",
                             cases[i].sign));
        p = finished(d);
        assert_int_equal(p->limits[p->limit_count - 1].when.comparison, cases[i].comparison);
        assert_int_equal(p->limits[p->limit_count - 1].when.percentile, 95);
        arena_free(a);
    }
}

/* ---- parameters over the catalogue ---- */

static void a_row_replaces_what_it_fills_in_and_leaves_the_rest(void **state)
{
    struct arena *a = arena_new();
    struct plant_draft *d = small_plant(a);
    const struct parameter *tss, *bod;
    struct plant *p;
    char number[24];

    (void)state;
    add_rows(d, PLANT_PARAMETERS, false, NEXT,
             "TSS,,,0,flow-weighted,,,,,1,2.5,\nNOXN,,mg/L\nUIA,Un-ionized ammonia,mg/L,3,max");
    p = finished(d);
    tss = &p->parameters[plant_parameter(p, "TSS")];
    assert_string_equal(tss->name, "Total suspended solids");
    assert_string_equal(tss->code, "00530");
    assert_int_equal(tss->decimals, 0);
    assert_int_equal(tss->day_rule, DAY_FLOW_WEIGHTED);
    assert_false(tss->builtin);
    decimal_write(tss->high.value, number);
    assert_string_equal(number, "100000");
    decimal_write(tss->rl.value, number);
    assert_string_equal(number, "2.5");
    bod = &p->parameters[plant_parameter(p, "BOD5")];
    assert_true(bod->builtin);
    assert_false(bod->mdl.set);
    tss = &p->parameters[plant_parameter(p, "NOXN")]; /* new, with the least a row may say */
    assert_string_equal(tss->name, "NOXN");
    assert_string_equal(tss->code, "");
    assert_int_equal(tss->decimals, 2);
    assert_int_equal(tss->day_rule, DAY_MEAN);
    assert_int_equal(tss->average, AVERAGE_ARITHMETIC);
    assert_false(tss->low.set);
    arena_free(a);
}

/* 1 mg/L is 1000 ug/L and 20 degC is 68 degF, both exact; 1 MGD is 3785.411784 m3/d (231 cubic
 * inches a gallon, 2.54 cm an inch). */
static void built_in_bounds_follow_into_another_unit(void **state)
{
    static const struct {
        const char *row, *parameter, *low, *high;
    } cases[] = {
        {"ZN,,mg/L", "ZN", "0.0005", "50"},           {"TEMP,,degF", "TEMP", "23", "140"},
        {"FLOW,,m3/d,0", "FLOW", "0", "3785411.784"}, {"FLOW,,MGD", "FLOW", "0", "1000"},
        {"ZN,,mg/L,3,,,,0.001", "ZN", "0.001", "50"}, {"ZN,,lb/d", "ZN", NULL, NULL},
    };

    (void)state;
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct arena *a = arena_new();
        struct plant_draft *d = small_plant(a);
        struct plant *p;
        const struct parameter *q;

        add_rows(d, PLANT_PARAMETERS, false, NEXT, cases[i].row);
        p = finished(d);
        q = &p->parameters[plant_parameter(p, cases[i].parameter)];
        assert_int_equal(q->low.set, cases[i].low != NULL);
        assert_int_equal(q->high.set, cases[i].high != NULL);
        if (cases[i].low) {
            char number[24];

            decimal_write(q->low.value, number);
            assert_string_equal(number, cases[i].low);
            decimal_write(q->high.value, number);
            assert_string_equal(number, cases[i].high);
        }
        arena_free(a);
    }
}

/* ---- figures of the plant's own, and the rows themselves ---- */

static void the_source_of_an_argument_is_a_reading_a_basin_or_a_number(void **state)
{
    struct arena *a = arena_new();
    struct plant_draft *d = small_plant(a);
    const struct process_row *r;
    struct plant *p;

    (void)state;
    add_rows(d, PLANT_PROCESS, false, NEXT,
             "detention,AB1,,hydraulic-detention,volume,basin AB1 volume,MG\n"
             "detention,AB1,,hydraulic-detention,flow,INF FLOW,MGD\n"
             "detention,AB1,,hydraulic-detention,share,0.50,\n"
             "overflow,SC1,,surface-overflow,area,basin SC1 area,\n"
             "weir,SC1,,weir-overflow,length,basin SC1 weir,ft\n"
             "weir,,,weir-overflow,length,basin SC1 weir,ft");
    p = finished(d);
    assert_int_equal(p->process_count, 8);
    r = &p->process[2];
    assert_int_equal(r->source, SOURCE_BASIN_VOLUME);
    assert_string_equal(r->basin, "AB1");
    assert_string_equal(r->unit->name, "MG");
    r = &p->process[3];
    assert_int_equal(r->source, SOURCE_READING);
    assert_int_equal(r->point, plant_point(p, "INF"));
    assert_int_equal(r->source_parameter, plant_parameter(p, "FLOW"));
    r = &p->process[4];
    assert_int_equal(r->source, SOURCE_NUMBER);
    assert_int_equal(r->number.coefficient, 50);
    assert_null(r->unit);
    assert_int_equal(p->process[5].source, SOURCE_BASIN_AREA);
    assert_int_equal(p->process[6].source, SOURCE_BASIN_WEIR);
    assert_string_equal(p->process[7].at, "plant");
    arena_free(a);
}

static void a_round_is_walked_in_the_order_of_its_rows(void **state)
{
    static const struct {
        const char *point, *parameter, *sample;
    } stops[] = {{"RAS", "FLOW", ""}, {"EFF", "PH", "grab"}, {"INF", "TEMP", ""},
                 {"EFF", "TEMP", ""}, {"EFF", "PH", ""},     {"INF", "PH", ""}};
    struct arena *a = arena_new();
    struct plant_draft *d = small_plant(a);
    struct plant *p;

    (void)state;
    add_rows(d, PLANT_ROUND, false, NEXT,
             "RAS,FLOW,\nEFF, PH ,grab\nINF,TEMP\nEFF,TEMP,\nEFF,PH,\nINF,PH");
    p = finished(d);
    assert_int_equal(p->round_count, NELEM(stops));
    for (size_t i = 0; i < NELEM(stops); i++) {
        assert_string_equal(p->points[p->round[i].point].id, stops[i].point);
        assert_string_equal(p->parameters[p->round[i].parameter].id, stops[i].parameter);
        assert_string_equal(p->round[i].sample, stops[i].sample);
    }
    arena_free(a);
}

static void a_plant_may_have_no_round(void **state)
{
    struct arena *a = arena_new();
    struct plant *p = finished(small_plant(a));

    (void)state;
    assert_int_equal(p->round_count, 0);
    arena_free(a);
}

static void the_rows_are_kept_as_they_came(void **state)
{
    struct arena *a = arena_new();
    struct plant_draft *d = plant_draft_new(a);
    const struct plant_row *row;

    (void)state;
    add_rows(d, PLANT_POINTS, false, 2,
             "EFF,\"Final, after chlorine\",effluent,001\nINF,, influent");
    assert_int_equal(plant_draft_rows(d), 2);
    row = plant_draft_row(d, 0);
    assert_int_equal(row->file, PLANT_POINTS);
    assert_int_equal(row->line, 2);
    assert_string_equal(row->cell[1], "Final, after chlorine");
    row = plant_draft_row(d, 1);
    assert_string_equal(row->cell[2], "influent"); /* blanks around a cell are not part of it */
    assert_null(row->cell[3]);
    arena_free(a);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(a_season_holds_its_own_days),
        cmocka_unit_test(summer_and_winter_part_every_year),
        cmocka_unit_test(a_limit_is_in_force_within_season_and_dates),
        cmocka_unit_test(a_basin_serves_from_its_first_day_to_its_last),
        cmocka_unit_test(a_changed_meter_is_found_by_the_day),
        cmocka_unit_test(names_are_found_as_written_and_near_ones_are_offered),
        cmocka_unit_test(a_plant_holds_what_its_description_says),
        cmocka_unit_test(a_metric_plant_is_known_as_one),
        cmocka_unit_test(each_comparison_of_a_condition_is_read_as_itself),
        cmocka_unit_test(a_row_replaces_what_it_fills_in_and_leaves_the_rest),
        cmocka_unit_test(built_in_bounds_follow_into_another_unit),
        cmocka_unit_test(the_source_of_an_argument_is_a_reading_a_basin_or_a_number),
        cmocka_unit_test(a_round_is_walked_in_the_order_of_its_rows),
        cmocka_unit_test(a_plant_may_have_no_round),
        cmocka_unit_test(the_rows_are_kept_as_they_came),
    };

    return cmocka_run_group_tests(tests, NULL, NULL);
}
