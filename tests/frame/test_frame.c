/* The day frame: what stays of the readings, what a day's readings become, registers, and days
 * without discharge. Where a rule has a published source it stands beside the check. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "made.h"

#include "base/poison.h"

/* ---- helpers ---- */

/* "21.5", "<2", "21.5 of <" (a less-than took part), or the state in words and why. */
static const char *day_text(struct made *m, const struct frame *f, const char *point,
                            const char *parameter, int date, const char *unit)
{
    static const char *const states[] = {"empty",  "value",        "no discharge",
                                         "missed", "not required", "broken"};
    struct rules set = m->plant->parameters[plant_parameter(m->plant, parameter)].rules;
    struct day_value v;
    struct text t;
    char *out;

    frame_day(f, plant_point(m->plant, point), plant_parameter(m->plant, parameter),
              m->month + date - 1, &set, unit ? unit_find(unit) : NULL, &v);
    text_init(&t, SIZE_MAX);
    if (v.state != DAY_VALUED)
        text_print(&t, "%s%s", states[v.state], v.amount.number ? " " : "");
    if (v.amount.number)
        fraction_write_all(&t, v.amount.number, 6);
    if (v.amount.part_less)
        text_add(&t, v.amount.all_less ? " all<" : " part<");
    if (v.amount.part_greater)
        text_add(&t, v.amount.all_greater ? " all>" : " part>");
    if (v.amount.less) {
        text_add_char(&t, ' ');
        fraction_write_all(&t, v.amount.less, 6);
    }
    if (v.amount.as_written)
        text_print(&t, " '%s'", v.amount.as_written);
    out = arena_bytes(m->arena, t.at, t.length);
    text_free(&t);
    return out;
}

struct day_case {
    const char *source, *fields, *readings, *point, *parameter, *unit, *expected;
};

static void check_days(const struct day_case *c, size_t count)
{
    for (size_t i = 0; i < count; i++) {
        struct made *m = made_plant("2025-03", c[i].fields, "", "");
        struct frame *f;
        const char *got;

        made_readings(m, c[i].readings);
        f = made_frame(m, m->month, month_last(m->month));
        got = day_text(m, f, c[i].point, c[i].parameter, 4, c[i].unit);
        if (!text_equal(got, c[i].expected))
            fail_msg("%s\n%s\n%s: expected '%s', got '%s'", c[i].source, c[i].fields, c[i].readings,
                     c[i].expected, got);
        made_free(m);
    }
}

/* ---- what stays ---- */

static void readings_of_a_day_stand_by_time_and_then_by_loading(void **state)
{
    (void)state;
    static const char *const order[] = {"5", "4", "1", "3", "2"};
    struct made *m = made_plant("2025-03", "", "", "");
    struct frame *f;
    const struct reading *const *r;
    size_t count;

    made_readings(m, "EFF PH pH 4@15:00#a=2\nEFF PH pH 4#a=5 4#b=4 4@07:00=1 4@08:00=3 5=9 3=8");
    f = made_frame(m, m->month, month_last(m->month));
    r = frame_readings(f, plant_point(m->plant, "EFF"), plant_parameter(m->plant, "PH"),
                       m->month + 3, &count);
    assert_int_equal(count, 5);
    for (size_t i = 0; i < count; i++)
        assert_string_equal(r[i]->text, order[i]);
    r = frame_readings(f, plant_point(m->plant, "EFF"), plant_parameter(m->plant, "PH"),
                       m->month + 7, &count);
    assert_null(r);
    assert_int_equal(count, 0);
    made_free(m);
}

static void the_newest_version_of_a_reading_stays_in_whatever_order_they_come(void **state)
{
    (void)state;
    static const char *const orders[] = {"EFF BOD5 mg/L 4@08:00=20 4@08:00!1=21 4@08:00!2=22",
                                         "EFF BOD5 mg/L 4@08:00!2=22 4@08:00!1=21 4@08:00=20",
                                         "EFF BOD5 mg/L 4@08:00!1=21 4@08:00!2=22 4@08:00=20"};

    for (size_t i = 0; i < NELEM(orders); i++) {
        struct made *m = made_plant("2025-03", "", "", "");
        struct frame *f;

        made_readings(m, orders[i]);
        f = made_frame(m, m->month, month_last(m->month));
        assert_string_equal(day_text(m, f, "EFF", "BOD5", 4, NULL), "22");
        made_free(m);
    }
}

static void a_withdrawn_reading_leaves_nothing_and_another_sample_stays(void **state)
{
    (void)state;
    struct made *m = made_plant("2025-03", "", "", "");
    struct frame *f;

    made_readings(m, "EFF BOD5 mg/L 4#a=20 4#b=30 4#a!1=0");
    m->readings[2].qualifier = QUALIFIER_WITHDRAWN;
    f = made_frame(m, m->month, month_last(m->month));
    assert_string_equal(day_text(m, f, "EFF", "BOD5", 4, NULL), "30");
    made_free(m);
}

static void days_outside_the_frame_are_not_in_it(void **state)
{
    (void)state;
    struct made *m = made_plant("2025-03", "", "", "");
    struct frame *f;
    int eff = plant_point(m->plant, "EFF"), bod = plant_parameter(m->plant, "BOD5");

    made_readings(m, "EFF BOD5 mg/L 2025-02-28=20 2025-04-01=30");
    f = made_frame(m, m->month, month_last(m->month));
    assert_false(frame_has(f, eff, bod));
    assert_false(frame_entry(f, eff, m->month - 1));
    assert_string_equal(day_text(m, f, "EFF", "BOD5", 0, NULL), "empty");
    made_free(m);
}

/* ---- substitution: R14, R28, R29, G17 of weirbook-rules(7) ---- */

static void less_thans_and_dnq_count_by_their_rules(void **state)
{
    (void)state;
    static const struct day_case cases[] = {
        {"Colorado COG-603000, definition 11: a less-than counts as zero", "nondetect,zero",
         "EFF CU ug/L 4=<2.0", "EFF", "CU", NULL, "0 all< 2 '2.0'"},
        {"half: common practice, no source", "nondetect,half", "EFF CU ug/L 4=<2.0", "EFF", "CU",
         NULL, "1 all< 2 '2.0'"},
        {"Iowa DNR: the number itself", "nondetect,full", "EFF CU ug/L 4=<2.0", "EFF", "CU", NULL,
         "2 all< 2 '2.0'"},
        {"R28: under the median procedure compared as its number", "nondetect,median\ndnq,zero",
         "EFF CU ug/L 4=<2.0(,5)", "EFF", "CU", NULL, "2 all< 2 '2.0'"},
        {"R14: ND is <mdl, else <rl", "nondetect,full", "EFF CU ug/L 4=ND(0.2,1.0)", "EFF", "CU",
         NULL, "0.2 all< 0.2 '0.2'"},
        {"R14: DNQ n counts as n", "", "EFF CU ug/L 4=DNQ0.4(0.2,1.0)", "EFF", "CU", NULL, "0.4"},
        {"R29, Ohio: below the quantitation level as zero", "dnq,zero",
         "EFF CU ug/L 4=DNQ0.4(0.2,1.0)", "EFF", "CU", NULL, "0"},
        {"R29: half the number", "dnq,half", "EFF CU ug/L 4=DNQ0.4(0.2,1.0)", "EFF", "CU", NULL,
         "0.2"},
        {"R29: plain results below their rl too", "dnq,zero", "EFF CU ug/L 4=0.9(0.2,1.0)", "EFF",
         "CU", NULL, "0"},
        {"R29: at the rl it is quantified", "dnq,zero", "EFF CU ug/L 4=1.0(0.2,1.0)", "EFF", "CU",
         NULL, "1"},
        {"R29: dnq=zero makes less-thans below their rl 0", "nondetect,full\ndnq,zero",
         "EFF CU ug/L 4=<0.5(0.2,1.0)", "EFF", "CU", NULL, "0 all< 0.5 '0.5'"},
        {"R29: dnq=half leaves less-thans to nondetect", "nondetect,full\ndnq,half",
         "EFF CU ug/L 4=<0.5(0.2,1.0)", "EFF", "CU", NULL, "0.5 all< 0.5 '0.5'"},
        {"G17: a bare DNQ is rl under full", "nondetect,full", "EFF CU ug/L 4=DNQ(0.2,1.0)", "EFF",
         "CU", NULL, "1"},
        {"G17: half of rl under half", "nondetect,half", "EFF CU ug/L 4=DNQ(0.2,1.0)", "EFF", "CU",
         NULL, "0.5"},
        {"G17: 0 under zero", "nondetect,zero", "EFF CU ug/L 4=DNQ(0.2,1.0)", "EFF", "CU", NULL,
         "0"},
        {"R14: TNTC is >rl", "", "EFF FCOLI cfu/100mL 4=TNTC(,800)", "EFF", "FCOLI", NULL,
         "800 all>"},
        {"E n is its number, common practice, no source", "dnq,zero", "EFF CU ug/L 4=E0.5(,1.0)",
         "EFF", "CU", NULL, "0.5"},
        {"R42: exactly into another unit; as written only in its own", "nondetect,full",
         "EFF CU mg/L 4=<0.002", "EFF", "CU", NULL, "2 all< 2"},
    };

    check_days(cases, NELEM(cases));
}

/* ---- day rules: R30, R32, R48, R52 ---- */

static void a_day_of_several_readings_becomes_one_value_by_its_rule(void **state)
{
    (void)state;
    static const struct day_case cases[] = {
        {"40 CFR 122.2: the average of the day", "", "EFF BOD5 mg/L 4@08:00=10 4@16:00=21", "EFF",
         "BOD5", NULL, "15.5"},
        {"R30: partly less-than when one part is", "", "EFF BOD5 mg/L 4@08:00=<2.0 4@16:00=6",
         "EFF", "BOD5", NULL, "3 part< 2 '2.0'"},
        {"R30: wholly when all are, the largest number", "",
         "EFF BOD5 mg/L 4@08:00=<2.0 4@16:00=<5", "EFF", "BOD5", NULL, "0 all< 5 '5'"},
        {"max: common practice, no source", "", "EFF TEMP degC 4@08:00=21.0 4@15:00=24.5", "EFF",
         "TEMP", NULL, "24.5"},
        {"R30: under max the reading taken decides", "", "EFF TRC mg/L 4@08:00=<0.05 4@15:00=0.01",
         "EFF", "TRC", NULL, "0.01"},
        {"R32: of less-thans that tie the larger number", "",
         "EFF TRC mg/L 4@08:00=<0.02 4@15:00=<0.05 4@16:00=<0.03", "EFF", "TRC", NULL,
         "0 all< 0.05 '0.05'"},
        {"min: common practice, no source", "", "EFF DO mg/L 4@08:00=6.1 4@15:00=4.9", "EFF", "DO",
         NULL, "4.9"},
        {"R30: under sum R13's number is the sum of the numbers", "nondetect,half",
         "EFF RAIN in 4@08:00=<0.2 4@15:00=<0.4", "EFF", "RAIN", NULL, "0.3 all< 0.6"},
        {"R52: last goes by time, blank times first", "", "EFF SBD ft 4@15:00=3 4=9 4@08:00=2",
         "EFF", "SBD", NULL, "3"},
        {"R52: then by order of loading", "", "EFF SBD ft 4#a=3 4#b=2", "EFF", "SBD", NULL, "2"},
        {"R52: each reading by the flow of its time", "",
         "EFF TP mg/L 4@08:00=1 4@16:00=4\nEFF FLOW MGD 4@08:00=1.0 4@16:00=2.0", "EFF", "TP", NULL,
         "3"},
        {"R52: the plain mean where one has no flow", "",
         "EFF TP mg/L 4@08:00=1 4@16:00=4\nEFF FLOW MGD 4@08:00=1.0 4@15:00=2.0", "EFF", "TP", NULL,
         "2.5"},
        {"geometric: 10 and 1000 give 100, common practice, no source", "",
         "EFF ECOLI MPN/100mL 4@08:00=10 4@16:00=1000", "EFF", "ECOLI", NULL, "100"},
        {"R48, Texas: a zero enters a day's geometric mean as 1", "",
         "EFF ECOLI MPN/100mL 4@08:00=0 4@16:00=100", "EFF", "ECOLI", NULL, "10"},
        {"R48: a single reading is the day's value as it is", "", "EFF ECOLI MPN/100mL 4=0", "EFF",
         "ECOLI", NULL, "0"},
    };

    check_days(cases, NELEM(cases));
}

static void a_geometric_day_that_is_no_fraction_keeps_its_power(void **state)
{
    (void)state;
    struct made *m = made_plant("2025-03", "", "", "");
    struct rules rules = m->plant->rules;
    struct day_value v;
    struct frame *f;

    made_readings(m, "EFF ECOLI MPN/100mL 4@08:00=1 4@16:00=2 5@08:00=1 5@16:00=4");
    f = made_frame(m, m->month, month_last(m->month));
    frame_day(f, plant_point(m->plant, "EFF"), plant_parameter(m->plant, "ECOLI"), m->month + 3,
              &rules, NULL, &v);
    /* the square root of 2, Sloane's A002193, to 40 decimals */
    assert_string_equal(fraction_print(m->arena, v.amount.number, 40, ROUND_HALF_EVEN),
                        "1.4142135623730950488016887242096980785697");
    assert_string_equal(fraction_print(m->arena, v.amount.product, 0, ROUND_HALF_EVEN), "2");
    assert_int_equal(v.amount.root, 2);
    frame_day(f, plant_point(m->plant, "EFF"), plant_parameter(m->plant, "ECOLI"), m->month + 4,
              &rules, NULL, &v);
    assert_null(v.amount.product);
    made_free(m);
}

/* ---- days without a value ---- */

static void days_without_a_value_say_what_is_missing(void **state)
{
    (void)state;
    static const struct {
        const char *readings;
        enum day_state state;
        const char *why;
    } cases[] = {
        {"EFF BOD5 mg/L 5=1", DAY_EMPTY, "no reading of EFF BOD5"},
        {"EFF BOD5 mg/L 4=codeG", DAY_MISSED, "EFF BOD5: code G, sampling equipment failure"},
        {"EFF BOD5 mg/L 4=code9", DAY_NOT_REQUIRED,
         "EFF BOD5: code 9, conditional monitoring not required this period"},
        {"EFF BOD5 mg/L 4#a=code9 4#b=codeH", DAY_MISSED, "EFF BOD5: code H, invalid test"},
        {"EFF BOD5 mg/L 4#a=codeE 4#b=12", DAY_VALUED, NULL},
        {"EFF BOD5 mg/L 4=C", DAY_NO_DISCHARGE, "no discharge"},
    };

    for (size_t i = 0; i < NELEM(cases); i++) {
        struct made *m = made_plant("2025-03", "", "", "");
        struct day_value v;
        struct frame *f;

        made_readings(m, cases[i].readings);
        f = made_frame(m, m->month, month_last(m->month));
        frame_day(f, plant_point(m->plant, "EFF"), plant_parameter(m->plant, "BOD5"), m->month + 3,
                  &m->plant->rules, NULL, &v);
        assert_int_equal(v.state, cases[i].state);
        assert_true(text_equal(v.why, cases[i].why));
        made_free(m);
    }
}

/* A description can give a parameter another kind of unit after its readings were loaded. */
static void a_reading_in_a_unit_of_another_kind_is_no_number(void **state)
{
    (void)state;
    struct made *m = made_plant("2025-03", "", "", "INF,FLOW,totalizer,,,,");
    struct day_value v;
    struct frame *f;

    made_readings(m, "EFF BOD5 MGD 4=12\nINF FLOW mg/L 3=1 4=2");
    f = made_frame(m, m->month, month_last(m->month));
    frame_day(f, plant_point(m->plant, "EFF"), plant_parameter(m->plant, "BOD5"), m->month + 3,
              &m->plant->rules, NULL, &v);
    assert_int_equal(v.state, DAY_BROKEN);
    assert_string_equal(v.why, "EFF BOD5 was loaded in MGD, which cannot be turned into mg/L");
    assert_string_equal(day_text(m, f, "INF", "FLOW", 4, NULL), "broken");
    made_free(m);
}

/* Common practice, no source: a meter at rest inside the works is a flow of 0, not a day without
 * discharge. */
static void a_flow_of_zero_inside_the_works_is_a_flow(void **state)
{
    (void)state;
    struct made *m = made_plant("2025-03", "no_discharge,skip", "", "");
    struct frame *f;

    made_readings(m, "PE FLOW MGD 1=0\nPE TSS mg/L 1=80\nEFF FLOW MGD 1=0\n");
    f = made_frame(m, m->month, month_last(m->month));
    assert_false(frame_no_discharge(f, plant_point(m->plant, "PE"), m->month));
    assert_true(frame_no_discharge(f, plant_point(m->plant, "EFF"), m->month));
    assert_string_equal(day_text(m, f, "PE", "FLOW", 1, NULL), "0");
    assert_string_equal(day_text(m, f, "PE", "TSS", 1, NULL), "80");
    made_free(m);
}

/* R23, R39, G10: EPA's no-data indicator C, and a flow of 0. */
static void a_code_c_or_a_flow_of_0_marks_the_day_and_a_flow_above_0_clears_it(void **state)
{
    (void)state;
    struct made *m = made_plant("2025-03", "no_discharge,zero", "", "");
    struct frame *f;
    int eff = plant_point(m->plant, "EFF");

    made_readings(m, "EFF FLOW MGD 1=1.0 2=0 3=C 4=0.5 6=<0.01\n"
                     "EFF BOD5 mg/L 1=10 2=11 3=12 4=C 5=C\nEFF TSS mg/L 4=7 5=8");
    f = made_frame(m, m->month, month_last(m->month));
    assert_false(frame_no_discharge(f, eff, m->month));
    assert_true(frame_no_discharge(f, eff, m->month + 1));
    assert_true(frame_no_discharge(f, eff, m->month + 2));
    assert_false(frame_no_discharge(f, eff, m->month + 3)); /* it flowed: C is a missed sample */
    assert_true(frame_no_discharge(f, eff, m->month + 4));
    assert_false(
        frame_no_discharge(f, eff, m->month + 5)); /* below what the meter shows is not 0 */
    assert_false(frame_no_discharge(f, plant_point(m->plant, "EF2"), m->month + 1));
    assert_string_equal(day_text(m, f, "EFF", "BOD5", 2, NULL), "no discharge");
    assert_string_equal(day_text(m, f, "EFF", "FLOW", 3, NULL), "no discharge 0");
    assert_string_equal(day_text(m, f, "EFF", "BOD5", 4, NULL), "missed");
    assert_string_equal(day_text(m, f, "EFF", "TSS", 4, NULL), "7");
    assert_string_equal(day_text(m, f, "EFF", "TSS", 5, NULL), "no discharge");
    assert_true(frame_entry(f, eff, m->month + 4));
    assert_false(frame_entry(f, eff, m->month + 6));
    made_free(m);
}

/* ---- which meter: R40 ---- */

static void the_flow_of_a_point_is_its_own_meter_then_the_rules(void **state)
{
    (void)state;
    struct made *m = made_plant("2025-03", "flow,INF", "", "");
    struct frame *f;
    int point, parameter, inf = plant_point(m->plant, "INF"), eff = plant_point(m->plant, "EFF"),
                          ef2 = plant_point(m->plant, "EF2");

    made_readings(m, "INF FLOW MGD 1=1\nEFF FLOW MGD 1=1\nEFF GATE MGD 1=1\nEF2 GATE MGD 20=1");
    f = made_frame(m, m->month, month_last(m->month));
    assert_true(frame_flow_of(f, eff, &m->plant->rules, &point, &parameter));
    assert_int_equal(point, eff);
    assert_int_equal(parameter, plant_parameter(m->plant, "FLOW"));
    assert_true(frame_flow_of(f, ef2, &m->plant->rules, &point, &parameter));
    assert_int_equal(point, ef2);
    assert_int_equal(parameter, plant_parameter(m->plant, "GATE"));
    assert_true(
        frame_flow_within(f, ef2, &m->plant->rules, m->month, m->month + 9, &point, &parameter));
    assert_int_equal(point, inf);
    m->plant->rules.word[RULE_FLOW] = -1;
    assert_false(
        frame_flow_within(f, ef2, &m->plant->rules, m->month, m->month + 9, &point, &parameter));
    made_free(m);
}

/* ---- totalizers ---- */

static void a_register_gives_the_days_difference(void **state)
{
    (void)state;
    static const struct {
        const char *what, *meters, *readings, *expected;
    } cases[] = {
        {"counted from the last reading before the day, in the parameter's unit",
         "INF,FLOW,totalizer,,,,", "INF FLOW kgal 2@23:55=100 3@23:55=600 4@08:00=900 4@23:55=2600",
         "2"},
        {"the first reading may lie before the frame", "INF,FLOW,totalizer,,,,",
         "INF FLOW kgal 2025-02-28@23:55=100 1@23:55=1100 2@23:55=2100 3=3100 4=4600", "1.5"},
        {"a register that passes its highest number starts again", "INF,FLOW,totalizer,1000000,,,",
         "INF FLOW kgal 3=999500 4=1500", "2"},
        {"times the multiplier", "INF,FLOW,totalizer,,0.1,,", "INF FLOW kgal 3=100 4=20100", "2"},
        {"a start reading sets it anew", "INF,FLOW,totalizer,,,,",
         "INF FLOW kgal 3@23:00=5000 4@06:00=5400 4@06:05#start=0 4@23:00=1100", "1.5"},
        {"another meter takes over with its start reading",
         "INF,FLOW,totalizer,,1,,2025-03-03\nINF,FLOW,totalizer,,0.1,2025-03-04,",
         "INF FLOW kgal 3@23:55=5000 4@00:05#start=100 4@23:55=20100", "2"},
        {"and cannot without it",
         "INF,FLOW,totalizer,,1,,2025-03-03\nINF,FLOW,totalizer,,0.1,2025-03-04,",
         "INF FLOW kgal 3@23:55=5000 4@23:55=20100", "broken"},
        {"it fell and nothing says it rolls", "INF,FLOW,totalizer,,,,",
         "INF FLOW kgal 3=5000 4=100", "broken"},
        {"nothing to count from", "INF,FLOW,totalizer,,,,", "INF FLOW kgal 4=100", "broken"},
        {"a difference over two days is no day's", "INF,FLOW,totalizer,,,,",
         "INF FLOW kgal 2=100 4=4100", "broken"},
        {"a rate on that day is read as such", "INF,FLOW,totalizer,,,2025-03-10,",
         "INF FLOW MGD 3=1.5 4=2.5", "2.5"},
        {"no reading, no difference", "INF,FLOW,totalizer,,,,", "INF FLOW kgal 3=100 5=200",
         "empty"},
    };

    for (size_t i = 0; i < NELEM(cases); i++) {
        struct made *m = made_plant("2025-03", "", "", cases[i].meters);
        struct frame *f;
        const char *got;

        made_readings(m, cases[i].readings);
        f = made_frame(m, m->month, month_last(m->month));
        got = day_text(m, f, "INF", "FLOW", 4, NULL);
        if (!text_equal(got, cases[i].expected))
            fail_msg("%s: expected '%s', got '%s'", cases[i].what, cases[i].expected, got);
        made_free(m);
    }
}

static void a_day_the_register_cannot_tell_says_why(void **state)
{
    (void)state;
    struct made *m = made_plant("2025-03", "", "", "INF,FLOW,totalizer,,,,");
    struct day_value v;
    struct frame *f;

    made_readings(m, "INF FLOW kgal 3=5000 4=100 7=300");
    f = made_frame(m, m->month, month_last(m->month));
    frame_day(f, plant_point(m->plant, "INF"), plant_parameter(m->plant, "FLOW"), m->month + 3,
              &m->plant->rules, NULL, &v);
    assert_int_equal(v.state, DAY_BROKEN);
    assert_string_equal(v.why, "the register fell from 5000 to 100 and has no rolls_at at INF FLOW "
                               "on 2025-03-04");
    frame_day(f, plant_point(m->plant, "INF"), plant_parameter(m->plant, "FLOW"), m->month + 6,
              &m->plant->rules, NULL, &v);
    assert_int_equal(v.state, DAY_BROKEN);
    assert_string_equal(v.why, "the register was last read 3 days before INF FLOW on 2025-03-07");
    made_free(m);
}

/* ---- size ---- */

/* Ten years of a hundred series: 365,300 readings. */
static void ten_years_of_a_hundred_series_stay_small(void **state)
{
    (void)state;
    struct made *m = made_plant("2025-03", "", "", "");
    struct arena *a = arena_new();
    struct frame *f;
    day_t first = 0, last = 0;
    size_t parameters = m->plant->parameter_count, added = 0, count;
    struct reading r = {.minute = -1, .sample = "", .text = "1.5", .file = "f", .value = {15, 1}};

    assert_true(day_parse("2015-01-01", &first) && day_parse("2024-12-31", &last));
    f = frame_new(a, m->plant, first, last);
    for (size_t series = 0; series < 100; series++) {
        r.point = (uint16_t)(series / parameters % m->plant->point_count);
        r.parameter = (uint16_t)(series % parameters);
        r.minute = (int16_t)(series / parameters / m->plant->point_count);
        r.unit = (uint16_t)unit_index(m->plant->parameters[r.parameter].unit);
        for (r.day = first; r.day <= last; r.day++, added++)
            frame_add(f, &r);
    }
    frame_close(f);
    assert_int_equal(added, 365300);
    assert_true(arena_used(a) < (size_t)60 * 1024 * 1024);
    assert_non_null(frame_readings(f, 0, 0, last, &count));
    arena_free(a);
    made_free(m);
}

static void every_code_and_word_is_there(void **state)
{
    (void)state;
    const char *codes =
        "C9ABQEDXGHMF71245IJKNSVW"; /* EPA, no-data indicators of the monitoring report form */

    for (const char *c = codes; *c != '\0'; c++)
        assert_non_null(no_data_code(*c));
    assert_null(no_data_code('Z'));
    assert_null(no_data_code('\0'));
    for (size_t i = 0; i < QUALIFIERS; i++)
        assert_non_null(qualifier_words[i]);
    for (size_t i = 0; i < LONG_COLUMNS; i++)
        assert_non_null(long_columns[i]);
    for (size_t i = 0; i < RAW_COLUMNS; i++)
        assert_non_null(raw_columns[i]);
    for (size_t i = 0; i < REASON_COUNT; i++) {
        assert_non_null(reason_words[i]);
        assert_non_null(reason_todo[i]);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(readings_of_a_day_stand_by_time_and_then_by_loading),
        cmocka_unit_test(the_newest_version_of_a_reading_stays_in_whatever_order_they_come),
        cmocka_unit_test(a_withdrawn_reading_leaves_nothing_and_another_sample_stays),
        cmocka_unit_test(days_outside_the_frame_are_not_in_it),
        cmocka_unit_test(less_thans_and_dnq_count_by_their_rules),
        cmocka_unit_test(a_day_of_several_readings_becomes_one_value_by_its_rule),
        cmocka_unit_test(a_geometric_day_that_is_no_fraction_keeps_its_power),
        cmocka_unit_test(days_without_a_value_say_what_is_missing),
        cmocka_unit_test(a_reading_in_a_unit_of_another_kind_is_no_number),
        cmocka_unit_test(a_code_c_or_a_flow_of_0_marks_the_day_and_a_flow_above_0_clears_it),
        cmocka_unit_test(a_flow_of_zero_inside_the_works_is_a_flow),
        cmocka_unit_test(the_flow_of_a_point_is_its_own_meter_then_the_rules),
        cmocka_unit_test(a_register_gives_the_days_difference),
        cmocka_unit_test(a_day_the_register_cannot_tell_says_why),
        cmocka_unit_test(ten_years_of_a_hundred_series_stay_small),
        cmocka_unit_test(every_code_and_word_is_there),
    };

    return cmocka_run_group_tests(tests, NULL, NULL);
}
