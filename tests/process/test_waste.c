/* How much to waste, on small plants whose figures are worked by hand. Sources: the published
 * example named beside its check; where a check says "formula", the numbers put into the
 * catalogue's formula of that name, whose source stands there; bounds of warnings: common practice,
 * no source. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <string.h>

#include "process/small.h"

#define PARAMETER_ROWS                                                                             \
    {PLANT_PARAMETERS, "BOD5,BOD,mg/L,1,mean,arithmetic,,,,,,"},                                   \
        {PLANT_PARAMETERS, "TSS,TSS,mg/L,1,mean,arithmetic,,,,,,"},                                \
        {PLANT_PARAMETERS, "MLSS,MLSS,mg/L,0,mean,arithmetic,,,,,,"},                              \
        {PLANT_PARAMETERS, "MLVSS,MLVSS,mg/L,0,mean,arithmetic,,,,,,"},                            \
        {PLANT_POINTS, "INF,Influent,influent,"}, {PLANT_POINTS, "AER,Aeration,aeration,"},        \
        {PLANT_POINTS, "RAS,Return,return-sludge,"}, {PLANT_POINTS, "WAS,Waste,waste-sludge,"},    \
    {                                                                                              \
        PLANT_POINTS, "EFF,Effluent,effluent,001"                                                  \
    }

static const struct small_row works[] = {
    {PLANT_FIELDS, "name,Small Works"},
    PARAMETER_ROWS,
    {PLANT_PARAMETERS, "FLOW,Flow,MGD,4,mean,arithmetic,,,,,,"},
    {PLANT_BASINS, "AB1,aeration,AER,0.92,MG,,,,,,"},
};

static const struct small_row metric_works[] = {
    {PLANT_FIELDS, "name,Small Works"},
    {PLANT_FIELDS, "units,metric"},
    PARAMETER_ROWS,
    {PLANT_PARAMETERS, "FLOW,Flow,m3/d,1,mean,arithmetic,,,,,,"},
    {PLANT_BASINS, "AB1,aeration,AER,4000,m3,,,,,,"},
};

static const struct small_row round_works[] = {
    {PLANT_FIELDS, "name,Small Works"},
    PARAMETER_ROWS,
    {PLANT_PARAMETERS, "FLOW,Flow,MGD,4,mean,arithmetic,,,,,,"},
    {PLANT_BASINS, "AB1,aeration,AER,1,MG,,,,,,"},
};

/* ---- readings ---- */

struct table_of {
    struct arena *arena;
    struct small_reading *row;
    size_t count, room;
};

static const char *iso(struct arena *a, day_t day)
{
    char text[11];
    day_write(day, text);
    return arena_text(a, text);
}

/* The value on each day from `from` to `to`. */
static void put(struct table_of *t, const char *from, const char *to, const char *point,
                const char *parameter, const char *value)
{
    for (day_t day = small_day(from); day <= small_day(to); day++)
        *(struct small_reading *)arena_push(t->arena, &t->row, &t->count, &t->room,
                                            sizeof *t->row) =
            (struct small_reading){iso(t->arena, day), point, parameter, value};
}

static void put_one(struct table_of *t, const char *day, const char *point, const char *parameter,
                    const char *value)
{
    put(t, day, day, point, parameter, value);
}

/* 0.92 MG at 2640 mg/L, waste of 7150 mg/L, and 2.34 MGD that leave with 8.5 mg/L. */
static void put_week(struct table_of *t, const char *waste_flow)
{
    put(t, "2025-03-08", "2025-03-14", "AER", "MLSS", "2640");
    put(t, "2025-03-08", "2025-03-14", "EFF", "FLOW", "2.34");
    put(t, "2025-03-08", "2025-03-14", "EFF", "TSS", "8.5");
    put(t, "2025-03-08", "2025-03-14", "WAS", "TSS", "7150");
    put(t, "2025-03-08", "2025-03-14", "WAS", "FLOW", waste_flow);
}

static struct waste_options asked(struct arena *a, enum waste_aim aim, const char *target)
{
    return (struct waste_options){.aim = aim,
                                  .target = fraction_parse(a, target),
                                  .on = small_day("2025-03-14"),
                                  .smooth = 7,
                                  .old = 3,
                                  .days = 0,
                                  .step = fraction_parse(a, "15")};
}

static enum status try_plan(struct table_of *t, const struct small_row *rows, size_t count,
                            const struct waste_options *o, struct waste_plan *out,
                            struct fault *fault)
{
    struct arena *a = t->arena;
    struct plant *p = small_plant(a, rows, count);
    struct frame *f =
        small_frame(a, p, iso(a, process_waste_reach(o)), iso(a, o->on), t->row, t->count);
    return process_waste(a, f, o, out, fault);
}

static struct waste_plan plan_of(struct table_of *t, const struct small_row *rows, size_t count,
                                 const struct waste_options *o)
{
    struct waste_plan p;
    struct fault fault = {.set = false};
    if (try_plan(t, rows, count, o, &p, &fault) != OK)
        fail_msg("%s", fault.text);
    return p;
}

#define PLAN(t, rows, o) plan_of(t, rows, NELEM(rows), o)

static void is(struct arena *a, const struct fraction *x, int decimals, const char *expected)
{
    assert_non_null(x);
    assert_string_equal(fraction_print(a, x, decimals, ROUND_HALF_EVEN), expected);
}

static bool warned(const struct waste_plan *p, const char *words)
{
    for (size_t i = 0; i < p->warnings; i++)
        if (strstr(p->warning[i], words) != NULL)
            return true;
    return false;
}

static const struct waste_part *part_named(const struct waste_plan *p, const char *name)
{
    for (size_t i = 0; i < p->parts; i++)
        if (text_equal(p->part[i].name, name))
            return &p->part[i];
    fail_msg("no part '%s'", name);
    return NULL;
}

/* ---- the answer ---- */

static void an_srt_takes_off_what_the_effluent_carries(void **state)
{
    (void)state;
    struct table_of t = {.arena = arena_new()};
    put_week(&t, "0.036");
    struct waste_options o = asked(t.arena, WASTE_FOR_SRT, "8.5");
    struct waste_plan p = PLAN(&t, works, &o);
    /* formula waste-flow-for-srt: (0.92 x 2640 / 8.5 - 2.34 x 8.5) / 7150 */
    is(t.arena, p.flow, 11, "0.03718198272");
    assert_string_equal(p.flow_unit, "MGD");
    /* formula waste-mass-for-srt: 20256.192 / 8.5 - 2.34 x 8.5 x 8.34 */
    is(t.arena, p.solids, 6, "2217.198812");
    assert_string_equal(p.solids_unit, "lb/d");
    is(t.arena, part_named(&p, "inventory in aeration")->value, 3, "20256.192");
    assert_int_equal(p.limited_by, WASTE_AS_ASKED);
    assert_int_equal(p.warnings, 0);
    arena_free(t.arena);
}

static void a_metric_plant_gets_the_published_answer(void **state)
{
    (void)state;
    struct table_of t = {.arena = arena_new()};
    put(&t, "2025-03-08", "2025-03-14", "AER", "MLSS", "3000");
    put(&t, "2025-03-08", "2025-03-14", "EFF", "FLOW", "9000");
    put(&t, "2025-03-08", "2025-03-14", "EFF", "TSS", "0");
    put(&t, "2025-03-08", "2025-03-14", "WAS", "TSS", "8000");
    put(&t, "2025-03-08", "2025-03-14", "WAS", "FLOW", "190");
    struct waste_options o = asked(t.arena, WASTE_FOR_SRT, "7.5");
    struct waste_plan p = PLAN(&t, metric_works, &o);
    /* Echelon Institute, WPI Class II sheet (metric examples): 4000 m3 at 3000 mg/L, 200 m3/d of
     * 8000 mg/L wasted: 7.5 d */
    is(t.arena, p.flow, 6, "200.000000");
    assert_string_equal(p.flow_unit, "m3/d");
    is(t.arena, p.solids, 6, "1600.000000"); /* 200 m3/d x 8 kg/m3 */
    assert_string_equal(p.solids_unit, "kg/d");
    assert_string_equal(p.mass_unit, "kg");
    arena_free(t.arena);
}

static void mlss_above_the_target_is_taken_off_in_one_day(void **state)
{
    (void)state;
    struct table_of t = {.arena = arena_new()};
    put_week(&t, "0.03");
    struct waste_options o = asked(t.arena, WASTE_FOR_MLSS, "2450");
    struct waste_plan p = PLAN(&t, works, &o);
    is(t.arena, p.asked_solids, 3, "1457.832");  /* formula: (2640 - 2450) x 0.92 x 8.34 */
    is(t.arena, p.asked_flow, 9, "0.024447552"); /* formula: 190 x 0.92 / 7150 */
    is(t.arena, p.flow, 6, "0.025500");          /* 0.03 less 15 % */
    assert_int_equal(p.limited_by, WASTE_BY_STEP);
    arena_free(t.arena);
}

static void food_to_microorganisms_turns_volatile_into_total_solids(void **state)
{
    (void)state;
    struct table_of t = {.arena = arena_new()};
    put_week(&t, "0.03");
    put(&t, "2025-03-08", "2025-03-14", "AER", "MLVSS", "1980"); /* 75 % of 2640 */
    put(&t, "2025-03-10", "2025-03-12", "INF", "BOD5", "184");   /* x 2 MGD = 0.92 x 400 */
    put(&t, "2025-03-08", "2025-03-14", "INF", "FLOW", "2");
    struct waste_options o = asked(t.arena, WASTE_FOR_FM, "0.25");
    o.step = fraction_parse(t.arena, "1000");
    struct waste_plan p = PLAN(&t, works, &o);
    /* formula: (0.92 x 1980 - 2 x 184 / 0.25) x 8.34 / 0.75 = 0.92 x (1980 - 1600) x 8.34 / 0.75 */
    is(t.arena, p.solids, 3, "3887.552");
    is(t.arena, p.flow, 9, "0.065193473"); /* 0.92 x 380 / 0.75 / 7150 */
    is(t.arena, part_named(&p, "volatile share")->value, 2, "75.00");
    arena_free(t.arena);
}

static void the_step_holds_the_rate_both_ways(void **state)
{
    (void)state;
    /* the target asks for 0.03718198272 MGD; steps of 15 %: common practice, no source */
    static const struct {
        const char *before, *flow;
        enum waste_limit limit;
    } cases[] = {{"0.0300", "0.0345000000", WASTE_BY_STEP},
                 {"0.0324", "0.0371819827", WASTE_AS_ASKED}, /* up to 0.03726 */
                 {"0.0437", "0.0371819827", WASTE_AS_ASKED}, /* down to 0.037145 */
                 {"0.0500", "0.0425000000", WASTE_BY_STEP}};
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct table_of t = {.arena = arena_new()};
        put_week(&t, cases[i].before);
        struct waste_options o = asked(t.arena, WASTE_FOR_SRT, "8.5");
        struct waste_plan p = PLAN(&t, works, &o);
        is(t.arena, p.flow, 10, cases[i].flow);
        assert_int_equal(p.limited_by, cases[i].limit);
        is(t.arena, p.asked_flow, 10, "0.0371819827");
        arena_free(t.arena);
    }
}

static void a_pump_that_stood_still_is_not_held_at_nothing(void **state)
{
    (void)state;
    struct table_of t = {.arena = arena_new()};
    put_week(&t, "0");
    struct waste_options o = asked(t.arena, WASTE_FOR_SRT, "8.5");
    struct waste_plan p = PLAN(&t, works, &o);
    is(t.arena, p.flow, 11, "0.03718198272");
    assert_true(warned(&p, "the step limit was not applied"));
    arena_free(t.arena);
}

static void less_than_nothing_is_floored_and_said(void **state)
{
    (void)state;
    static const struct {
        enum waste_aim aim;
        const char *target, *before, *flow;
        enum waste_limit limit;
    } cases[] = {
        /* 20256.192 / 200 lb/d may leave, and 165.8826 leave with the effluent */
        {WASTE_FOR_SRT, "200", "0", "0.0000", WASTE_BY_ZERO},
        {WASTE_FOR_SRT, "200", "0.04", "0.0340", WASTE_BY_STEP},
        {WASTE_FOR_MLSS, "2641", "0", "0.0000", WASTE_BY_ZERO},
        {WASTE_FOR_MLSS, "2641", "0.04", "0.0340", WASTE_BY_STEP},
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct table_of t = {.arena = arena_new()};
        put_week(&t, cases[i].before);
        struct waste_options o = asked(t.arena, cases[i].aim, cases[i].target);
        struct waste_plan p = PLAN(&t, works, &o);
        is(t.arena, p.flow, 4, cases[i].flow);
        assert_int_equal(p.limited_by, cases[i].limit);
        assert_non_null(strstr(p.warning[0], "asks for less than nothing"));
        arena_free(t.arena);
    }
}

static void means_are_of_the_last_days_with_readings(void **state)
{
    (void)state;
    struct table_of t = {.arena = arena_new()};
    put_week(&t, "0.036");
    put_one(&t, "2025-02-20", "EFF", "TSS", "100"); /* a day without flow takes no part */
    struct waste_options o = asked(t.arena, WASTE_FOR_SRT, "8.5");
    o.on = small_day("2025-03-16"); /* two days without readings are passed over */
    o.smooth = 3;
    put_one(&t, "2025-03-11", "AER", "MLSS", "9000"); /* the fourth newest day */
    struct waste_plan p = PLAN(&t, works, &o);
    const struct waste_part *held = part_named(&p, "mixed liquor solids");
    is(t.arena, held->value, 1, "2640.0");
    assert_int_equal(held->days, 3);
    assert_int_equal(held->oldest, small_day("2025-03-12"));
    assert_int_equal(held->newest, small_day("2025-03-14"));
    assert_true(warned(&p, "the step is counted from 2025-03-14"));
    arena_free(t.arena);
}

static void unsampled_waste_is_as_thick_as_the_return(void **state)
{
    (void)state;
    struct table_of t = {.arena = arena_new()};
    put(&t, "2025-03-12", "2025-03-14", "AER", "MLSS", "2640");
    put(&t, "2025-03-12", "2025-03-14", "EFF", "FLOW", "2.34");
    put(&t, "2025-03-12", "2025-03-14", "EFF", "TSS", "8.5");
    put(&t, "2025-03-12", "2025-03-14", "WAS", "FLOW", "0.036");
    put(&t, "2025-03-09", "2025-03-10", "RAS", "TSS", "7150");
    struct waste_options o = asked(t.arena, WASTE_FOR_SRT, "8.5");
    struct waste_plan p = PLAN(&t, works, &o);
    is(t.arena, p.flow, 11, "0.03718198272");
    assert_true(warned(&p, "newest TSS at RAS"));
    assert_true(warned(&p, "4 days old (2025-03-10)"));
    o.old = 4;
    p = PLAN(&t, works, &o);
    assert_int_equal(p.warnings, 0);
    arena_free(t.arena);
}

static void a_shrinking_inventory_is_said(void **state)
{
    (void)state;
    /* a straight line over three days: falls of 4.9 % and 5.1 % of the mean of 2000 mg/L */
    static const struct {
        const char *first, *last;
        bool warned;
    } cases[] = {{"2049", "1951", false}, {"2051", "1949", true}, {"1949", "2051", false}};
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct table_of t = {.arena = arena_new()};
        put(&t, "2025-03-12", "2025-03-14", "EFF", "FLOW", "2.34");
        put(&t, "2025-03-12", "2025-03-14", "EFF", "TSS", "8.5");
        put(&t, "2025-03-12", "2025-03-14", "WAS", "TSS", "7150");
        put(&t, "2025-03-12", "2025-03-14", "WAS", "FLOW", "0.036");
        put_one(&t, "2025-03-12", "AER", "MLSS", cases[i].first);
        put_one(&t, "2025-03-13", "AER", "MLSS", "2000");
        put_one(&t, "2025-03-14", "AER", "MLSS", cases[i].last);
        struct waste_options o = asked(t.arena, WASTE_FOR_SRT, "8.5");
        struct waste_plan p = PLAN(&t, works, &o);
        assert_int_equal(warned(&p, "inventory is shrinking"), cases[i].warned);
        arena_free(t.arena);
    }
}

static void what_is_missing_is_named(void **state)
{
    (void)state;
    static const struct {
        const char *left_out_point, *left_out, *words;
    } cases[] = {{"AER", "MLSS", "MLSS"},
                 {"EFF", "TSS", "effluent flow with TSS"},
                 {"WAS", "FLOW", "waste flow"},
                 {"WAS", "TSS", "waste or return solids"}};
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct table_of t = {.arena = arena_new()};
        struct table_of less = {.arena = t.arena};
        struct waste_plan p;
        struct fault fault = {.set = false};
        put_week(&t, "0.036");
        for (size_t k = 0; k < t.count; k++)
            if (!text_equal(t.row[k].point, cases[i].left_out_point) ||
                !text_equal(t.row[k].parameter, cases[i].left_out))
                put_one(&less, t.row[k].day, t.row[k].point, t.row[k].parameter, t.row[k].value);
        struct waste_options o = asked(t.arena, WASTE_FOR_SRT, "8.5");
        assert_int_equal(try_plan(&less, works, NELEM(works), &o, &p, &fault), FAULT);
        assert_non_null(strstr(fault.text, cases[i].words));
        arena_free(t.arena);
    }
}

static void more_volatile_than_total_solids_is_refused(void **state)
{
    (void)state;
    struct table_of t = {.arena = arena_new()};
    struct waste_plan p;
    struct fault fault = {.set = false};
    put_week(&t, "0.03");
    put(&t, "2025-03-08", "2025-03-14", "AER", "MLVSS", "2641");
    put(&t, "2025-03-08", "2025-03-14", "INF", "BOD5", "184");
    put(&t, "2025-03-08", "2025-03-14", "INF", "FLOW", "2");
    struct waste_options o = asked(t.arena, WASTE_FOR_FM, "0.25");
    assert_int_equal(try_plan(&t, works, NELEM(works), &o, &p, &fault), FAULT);
    assert_non_null(strstr(fault.text, "'volatile'"));
    arena_free(t.arena);
}

static void a_volume_that_changed_is_said(void **state)
{
    (void)state;
    static const struct small_row two_basins[] = {
        {PLANT_FIELDS, "name,Small Works"},
        PARAMETER_ROWS,
        {PLANT_PARAMETERS, "FLOW,Flow,MGD,4,mean,arithmetic,,,,,,"},
        {PLANT_BASINS, "AB1,aeration,AER,0.46,MG,,,,,,"},
        {PLANT_BASINS, "AB2,aeration,AER,0.46,MG,,,,,,2025-03-12"},
    };
    struct table_of t = {.arena = arena_new()};
    put_week(&t, "0.036");
    struct waste_options o = asked(t.arena, WASTE_FOR_SRT, "8.5");
    struct waste_plan p = PLAN(&t, two_basins, &o);
    assert_true(warned(&p, "volume in service changed"));
    /* five days of 0.92 MG and two of 0.46: 5.52 / 7 x 2640 x 8.34 */
    is(t.arena, part_named(&p, "inventory in aeration")->value, 3, "17362.450");
    arena_free(t.arena);
}

/* ---- the days to come ---- */

/* 1 MG; each day 1 MGD brings 300 mg/L and leaves with 20 mg/L BOD and 10 mg/L TSS; 0.02 MGD of
 * 6000 mg/L is wasted; MLSS stays at 2000. */
static void put_month(struct table_of *t, const char *first, const char *last)
{
    put(t, first, last, "AER", "MLSS", "2000");
    put(t, first, last, "INF", "FLOW", "1");
    put(t, first, last, "INF", "BOD5", "300");
    put(t, first, last, "EFF", "FLOW", "1");
    put(t, first, last, "EFF", "BOD5", "20");
    put(t, first, last, "EFF", "TSS", "10");
    put(t, first, last, "WAS", "TSS", "6000");
    put(t, first, last, "WAS", "FLOW", "0.02");
}

static void the_days_to_come_are_a_balance_on_the_observed_yield(void **state)
{
    (void)state;
    struct table_of t = {.arena = arena_new()};
    put_month(&t, "2025-02-10", "2025-03-14");
    struct waste_options o = asked(t.arena, WASTE_FOR_SRT, "12.5");
    o.days = 3;
    struct waste_plan p = PLAN(&t, round_works, &o);
    /* made and wasted, both by 1 MG x 8.34: 120 + 10 = 130 mg/L a day; 130 / 280 */
    is(t.arena, p.yield, 10, "0.4642857143");
    is(t.arena, p.flow, 4, "0.0230"); /* asked: (2000 / 12.5 - 10) / 6000 = 0.025, held at + 15 % */
    /* each day 2000 + 130 - 138 - 10 = - 18 mg/L */
    static const char *const mlss[] = {"1982", "1964", "1946"};
    static const char *const srt[] = {"13.391892", "13.270270", "13.148649"}; /* MLSS / 148 */
    assert_int_equal(p.days, 3);
    for (size_t i = 0; i < 3; i++) {
        assert_int_equal(p.day[i].on, o.on + (day_t)i);
        is(t.arena, p.day[i].mlss, 0, mlss[i]);
        is(t.arena, p.day[i].srt, 6, srt[i]);
    }
    is(t.arena, p.day[2].inventory, 2, "16229.64"); /* 1946 x 8.34 */
    arena_free(t.arena);
}

static void a_tank_that_runs_empty_has_no_figures(void **state)
{
    (void)state;
    struct table_of t = {.arena = arena_new()};
    put_month(&t, "2025-02-10", "2025-03-14");
    struct waste_options o = asked(t.arena, WASTE_FOR_SRT, "1");
    o.step = fraction_parse(t.arena, "100000");
    o.days = 3;
    struct waste_plan p = PLAN(&t, round_works, &o);
    is(t.arena, p.day[0].mlss, 0, "130"); /* all 2000 leave, 130 are made */
    for (size_t i = 1; i < 3; i++) {
        assert_null(p.day[i].mlss);
        assert_null(p.day[i].srt);
        assert_string_not_equal(p.day[i].note, "");
    }
    arena_free(t.arena);
}

static void without_a_yield_the_answer_stands_and_the_reason_is_given(void **state)
{
    (void)state;
    struct table_of t = {.arena = arena_new()};
    put_week(&t, "0.036");
    struct waste_options o = asked(t.arena, WASTE_FOR_SRT, "8.5");
    o.days = 14;
    struct waste_plan p = PLAN(&t, works, &o);
    is(t.arena, p.flow, 11, "0.03718198272");
    assert_int_equal(p.days, 0);
    assert_null(p.yield);
    assert_non_null(strstr(p.no_yield, "BOD5"));
    arena_free(t.arena);
}

/* A plant that makes 2000 lb a day (from 5000 lb of BOD removed) and is wasted as advised comes to
 * hold 2000 lb times the target. Readings are written as a laboratory does, to 1 mg/L. */
static void a_plant_wasted_as_advised_comes_to_the_target(void **state)
{
    (void)state;
    static const struct {
        int smooth;
        const char *step;
    } cases[] = {{1, "100000"}, {3, "15"}, {7, "15"}};
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct table_of t = {.arena = arena_new()};
        struct arena *a = t.arena;
        const struct fraction *made = fraction_from_int(a, 2000);
        const struct fraction *lost = fraction_parse(a, "83.4"); /* 1 MGD x 10 mg/L */
        const struct fraction *factor = fraction_parse(a, "8.34");
        const struct fraction *held = fraction_from_int(a, 14000); /* 7 d */
        const struct fraction *flow = fraction_parse(a, "0.0383"); /* (2000 - 83.4) / 50040 */
        struct waste_plan p = {0};
        day_t first = small_day("2025-02-01");
        for (day_t day = first; day < first + 60; day++) {
            const char *on = iso(a, day);
            put_one(&t, on, "AER", "MLSS",
                    fraction_print(a, fraction_divide(a, held, factor), 0, ROUND_HALF_EVEN));
            put_one(&t, on, "INF", "FLOW", "1");
            put_one(&t, on, "INF", "BOD5", "619.5204"); /* 20 more than 5000 / 8.34 */
            put_one(&t, on, "EFF", "FLOW", "1");
            put_one(&t, on, "EFF", "BOD5", "20");
            put_one(&t, on, "EFF", "TSS", "10");
            put_one(&t, on, "WAS", "TSS", "6000");
            if (day >= first + 10) {
                struct waste_options o = asked(a, WASTE_FOR_SRT, "5");
                o.on = day;
                o.smooth = cases[i].smooth;
                o.step = fraction_parse(a, cases[i].step);
                p = PLAN(&t, round_works, &o);
                flow = fraction_round(a, p.flow, 6, ROUND_HALF_EVEN);
            }
            put_one(&t, on, "WAS", "FLOW", fraction_print(a, flow, 6, ROUND_HALF_EVEN));
            const struct fraction *wasted = fraction_multiply(
                a, fraction_multiply(a, flow, fraction_from_int(a, 6000)), factor);
            held = fraction_subtract(a, fraction_add(a, held, made), fraction_add(a, wasted, lost));
        }
        double srt = fraction_double(fraction_divide(a, held, made));
        if (srt < 4.9 || srt > 5.1)
            fail_msg("means of %d days: %f d in place of 5", cases[i].smooth, srt);
        double yield = fraction_double(p.yield); /* 2000 / 5000 */
        if (yield < 0.392 || yield > 0.408)
            fail_msg("means of %d days: a yield of %f in place of 0.4", cases[i].smooth, yield);
        arena_free(t.arena);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(an_srt_takes_off_what_the_effluent_carries),
        cmocka_unit_test(a_metric_plant_gets_the_published_answer),
        cmocka_unit_test(mlss_above_the_target_is_taken_off_in_one_day),
        cmocka_unit_test(food_to_microorganisms_turns_volatile_into_total_solids),
        cmocka_unit_test(the_step_holds_the_rate_both_ways),
        cmocka_unit_test(a_pump_that_stood_still_is_not_held_at_nothing),
        cmocka_unit_test(less_than_nothing_is_floored_and_said),
        cmocka_unit_test(means_are_of_the_last_days_with_readings),
        cmocka_unit_test(unsampled_waste_is_as_thick_as_the_return),
        cmocka_unit_test(a_shrinking_inventory_is_said),
        cmocka_unit_test(what_is_missing_is_named),
        cmocka_unit_test(more_volatile_than_total_solids_is_refused),
        cmocka_unit_test(a_volume_that_changed_is_said),
        cmocka_unit_test(the_days_to_come_are_a_balance_on_the_observed_yield),
        cmocka_unit_test(a_tank_that_runs_empty_has_no_figures),
        cmocka_unit_test(without_a_yield_the_answer_stands_and_the_reason_is_given),
        cmocka_unit_test(a_plant_wasted_as_advised_comes_to_the_target),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
