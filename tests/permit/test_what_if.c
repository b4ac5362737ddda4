/* what_if: months under other rules, worked by hand; and the same month under a plant that has
 * those rules written in plant.csv, which must agree row for row. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "permit/rows.h"

struct what_if_case {
    const char *source, *month, *fields, *limits, *readings, *rules, *expected;
};

/* "nondetect zero>half: 03-01..03-31 1.0 met > 1.5 exceeded" */
static void side_text(struct text *t, const struct permit_row *r)
{
    if (!r)
        text_add(t, "none");
    else
        text_print(t, "%s %s", *r->figure ? r->figure : "-", verdict_words[r->verdict]);
}

static const char *differences_text(struct arena *a, const struct permit_comparison *c)
{
    struct text t;
    char *out;

    text_init(&t, SIZE_MAX);
    for (size_t i = 0; i < c->count; i++) {
        const struct permit_difference *d = &c->at[i];
        const struct permit_row *dated = d->row ? d->row : d->other;
        char from[11];

        day_write(dated->from, from);
        text_print(&t, "%s%s %s>%s: %s ", i > 0 ? "\n" : "", d->rule, d->in_force, d->value,
                   from + 5);
        side_text(&t, d->row);
        text_add(&t, " > ");
        side_text(&t, d->other);
    }
    out = arena_bytes(a, t.at, t.length);
    text_free(&t);
    return out;
}

static struct frame *frame_of(struct made *m, const struct rules *other)
{
    struct frame_span *needs;
    size_t count;
    day_t first = m->month, last = month_last(m->month);

    permit_needs_under(m->arena, m->plant, other, m->month, &needs, &count);
    for (size_t i = 0; i < count; i++) {
        first = needs[i].first < first ? needs[i].first : first;
        last = needs[i].last > last ? needs[i].last : last;
    }
    return made_frame(m, first, last);
}

static day_t later(void)
{
    day_t day;

    assert_true(day_parse("2035-01-01", &day));
    return day;
}

static const struct what_if_case cases[] = {
    {"1, 2 and less than the ML average 1 with the less-than as zero (a permit's definition, rules "
     "page 13); as half of <3 the mean is 4.5/3",
     "2025-03", "nondetect,zero\nsign,never",
     ",EFF,BOD5,concentration,monthly-average,max,1.2,mg/L", "EFF BOD5 mg/L 4=1 11=2 18=<3",
     "nondetect=half", "nondetect zero>half: 03-01 1.0 met > 1.5 exceeded"},
    {"the same with the rule in the limit itself: what is asked for stands over it", "2025-03",
     "sign,never", ",EFF,BOD5,concentration,monthly-average,max,1.2,mg/L,,,,,,,,,,nondetect=full",
     "EFF BOD5 mg/L 4=1 11=2 18=<3", "nondetect=zero",
     "nondetect full>zero: 03-01 2.0 exceeded > 1.0 met"},
    {"a value in force already changes nothing (no source needed)", "2025-03", "nondetect,half",
     ",EFF,BOD5,concentration,monthly-average,max,1.2,mg/L", "EFF BOD5 mg/L 4=1 11=2 18=<3",
     "nondetect=half", ""},
    {"0.0105 rounds half up to 0.011 (EPA drinking-water questions), half even to 0.010", "2025-03",
     "", ",EFF,TRC,concentration,daily,max,0.010,mg/L", "EFF TRC mg/L 5=0.0105", "rounding=half-up",
     "rounding half-even>half-up: 03-01 0.010 met > 0.011 exceeded"},
    {"a zero in a geometric mean enters as 1 (Texas): cube root of 10000 is 21.5; as 0.5 cube root "
     "of 5000 is 17.1",
     "2025-03", "", ",EFF,FCOLI,concentration,monthly-geomean,max,20.0,cfu/100mL",
     "EFF FCOLI cfu/100mL 4=0 5=100 6=100", "geomean_zero=0.5",
     "geomean_zero 1>0.5: 03-01 21.5 exceeded > 17.1 met"},
    {"wastewater101, discharge-report example: mean of daily loads 31.53 lb/d; mean flow 0.19 "
     "times "
     "mean concentration 19.75 times 8.34 is 31.29585",
     "2025-03", "", ",EFF,BOD5,load,monthly-average,max,31.40,lb/d",
     "EFF BOD5 mg/L 4=22 5=29 6=18 7=10\nEFF FLOW MGD 4=.19 5=.20 6=.18 7=.19",
     "load_average=product", "load_average daily>product: 03-01 31.53 exceeded > 31.30 met"},
    {"40 CFR 133.101(j): averages 100 (1 - 30/150) = 80; the mean of daily 90 and 60 is 75 (common "
     "practice)",
     "2025-03", "", ",EFF,BOD5,removal,monthly-average,min,78,%",
     "INF BOD5 mg/L 4=200 5=100\nEFF BOD5 mg/L 4=20 5=40", "removal=daily",
     "removal averages>daily: 03-01 80 met > 75 exceeded"},
    {"exact 30.4 rounds to 30, which meets 30; held raw it does not (rules page 4)", "2025-03", "",
     ",EFF,TSS,concentration,monthly-average,max,30,mg/L", "EFF TSS mg/L 4=30.4", "compare=raw",
     "compare rounded>raw: 03-01 30 met > 30 exceeded"},
    {"Sunday weeks put 40 on the 8th and 60 on the 9th apart, Monday weeks together: 50 (common "
     "practice); the worst week stands for the limit",
     "2025-03", "", ",EFF,TSS,concentration,weekly-average,max,55,mg/L", "EFF TSS mg/L 8=40 9=60",
     "week_starts=monday", "week_starts sunday>monday: 03-09 60 exceeded > 50 met"},
    {"a tier that stands on a convention: the condition's own figure is 1.0 with the less-than as "
     "zero and 1.5 as half, so the row is there under the one and not the other",
     "2025-03", "sign,never",
     ",EFF,TSS,concentration,monthly-average,max,10,mg/L,,,,EFF BOD5 monthly-average > 1.2 mg/L",
     "EFF BOD5 mg/L 4=1 11=2 18=<3\nEFF TSS mg/L 4=12", "nondetect=half",
     "nondetect zero>half: 03-01 none > 12 exceeded"},
    {"a group is met when one is: as half the value is above 1.2 and the percentage meets alone "
     "(91/271/EEC, "
     "value or percentage)",
     "2025-03", "sign,never",
     ",EFF,BOD5,concentration,monthly-average,max,1.2,mg/L,,,,,,,,,g,\n"
     ",EFF,BOD5,removal,monthly-average,min,90,%,,,,,,,,,g,",
     "EFF BOD5 mg/L 4=1 11=2 18=<3\nINF BOD5 mg/L 4=100", "nondetect=half",
     "nondetect zero>half: 03-01 1.0 met > 1.5 met\nnondetect zero>half: 03-01 99 met > 98 met"},
    {"two at once: of 1.5 and <2 the mean is 0.75 with the less-than as zero, 0.8 to the even "
     "digit; as half 1.25, which half "
     "up is 1.3 (EPA drinking-water questions)",
     "2025-03", "sign,never", ",EFF,BOD5,concentration,monthly-average,max,1.2,mg/L",
     "EFF BOD5 mg/L 4=1.5 11=<2", "nondetect=half;rounding=half-up",
     "nondetect;rounding zero;half-even>half;half-up: 03-01 0.8 met > 1.3 exceeded"},
};

static void a_month_under_another_rule_is_worked_as_published(void **state)
{
    (void)state;
    for (size_t i = 0; i < NELEM(cases); i++) {
        const struct what_if_case *c = &cases[i];
        struct made *m = made_plant(c->month, c->fields, c->limits, "");
        struct rules *other = arena_alloc(m->arena, sizeof *other);
        struct permit_comparison got;
        struct fault f = {0};
        const char *text;

        made_readings(m, c->readings);
        if (plant_rules_read(m->arena, m->plant, "--what-if", c->rules, other, &f) != OK ||
            permit_what_if(m->arena, frame_of(m, other), m->month, later(), other, &got, &f) != OK)
            fail_msg("%s: %s", c->source, f.text);
        text = differences_text(m->arena, &got);
        if (!text_equal(text, c->expected))
            fail_msg("%s\nexpected:\n%s\ngot:\n%s", c->source, c->expected, text);
        made_free(m);
    }
}

/* ---- against plants that have the rule written ---- */

static const char *const every_value[] = {
    "nondetect=zero",
    "nondetect=half",
    "nondetect=full",
    "nondetect=median",
    "sign=any",
    "sign=all",
    "sign=never",
    "geomean_zero=1",
    "geomean_zero=0.5",
    "week_starts=sunday",
    "week_starts=monday",
    "week_starts=thursday",
    "week_counts_in=end",
    "week_counts_in=start",
    "week_counts_in=split",
    "week_counts_in=most-days",
    "week_counts_in=days-1-7",
    "rounding=half-even",
    "rounding=half-up",
    "digits=limit",
    "digits=figures",
    "compare=rounded",
    "compare=raw",
    "removal=averages",
    "removal=paired",
    "removal=loads",
    "removal=daily",
    "load_factor=8.34",
    "load_factor=8.345404",
    "load_average=daily",
    "load_average=product",
    "count_by=day",
    "count_by=reading",
    "no_discharge=skip",
    "no_discharge=zero",
    "dnq=value",
    "dnq=zero",
    "dnq=half",
    "long_average=default",
    "long_average=months",
    "long_average=days",
    "percentile=nearest-rank",
    "percentile=linear",
    "percentile=weibull",
    "load_total=days",
    "load_total=sum",
    "window=days",
    "window=results",
};

/* Every kind of statistic on readings with less-thans, a DNQ, a zero, a day without discharge, two
 * samples on a day and ties. */
static const char *const every_limit =
    "001,EFF,BOD5,concentration,monthly-average,max,1.2,mg/L\n"
    "001,EFF,BOD5,concentration,weekly-average,max,2.0,mg/L\n"
    "001,EFF,BOD5,concentration,daily,max,2.5,mg/L\n"
    "001,EFF,BOD5,concentration,instantaneous,max,2.5,mg/L\n"
    "001,EFF,BOD5,load,monthly-average,max,30,lb/d\n"
    "001,EFF,BOD5,load,monthly-average,max,14,kg/d\n"
    "001,EFF,BOD5,load,monthly-total,max,700,lb\n"
    "001,EFF,BOD5,load,weekly-average,max,30.5,lb/d\n"
    "001,EFF,BOD5,removal,monthly-average,min,98.5,%\n"
    "001,EFF,FCOLI,concentration,monthly-geomean,max,20.0,cfu/100mL\n"
    "001,EFF,FCOLI,concentration,weekly-geomean,max,20.0,cfu/100mL\n"
    "001,EFF,FCOLI,concentration,rolling-30-day-geomean,max,20,cfu/100mL\n"
    "001,EFF,TSS,concentration,rolling-7-day,max,30,mg/L\n"
    "001,EFF,TSS,concentration,rolling-7-day-median,max,30,mg/L\n"
    "001,EFF,TSS,concentration,monthly-median,max,30,mg/L\n"
    "001,EFF,TSS,concentration,percentile-90,max,30,mg/L\n"
    "001,EFF,TSS,concentration,quarterly-average,max,30,mg/L\n"
    "001,EFF,TSS,concentration,rolling-12-month,max,30,mg/L\n"
    "001,EFF,FLOW,flow,monthly-average,max,2.0,MGD\n"
    "001,EFF,FLOW,flow,monthly-total,report,,MG\n"
    "001,EFF,NH3N,concentration,monthly-average,max,10,mg/L,,,,EFF BOD5 monthly-average > 1.2 "
    "mg/L\n"
    "001,EFF,TSS,concentration,monthly-samples,max,30,mg/L,,,,,,,2,";
static const char *const every_reading =
    "EFF BOD5 mg/L 1=1.5 4@08:00=1 4@14:00=3 11=2 12=<3 18=DNQ0.4(,2) 19=2.25 25=0 26=<1 31=2.75\n"
    "INF BOD5 mg/L 4=200 11=150 12=100 19=210 25=180 31=190\n"
    "EFF FLOW MGD 1..9=1.9 10=0 11..31=2.1\n"
    "EFF FCOLI cfu/100mL 4=0 11=100 18=100 25=<2\n"
    "EFF TSS mg/L 2025-01-15=44 2025-02-10=20 2025-02-27=41 3=30.5 3#b=31 6=12 14=29.5 17=30.5 "
    "24=<5 31=33\n"
    "EFF NH3N mg/L 4=10.5 18=9";

/* Put over the plant, a rule gives the rows of a plant that was written with it. */
static void a_rule_put_over_is_the_rule_written(void **state)
{
    struct arena *a = arena_new();

    (void)state;
    for (size_t i = 0; i < NELEM(every_value); i++) {
        const char *sign = strchr(every_value[i], '=');
        const char *field =
            arena_print(a, "%.*s,%s", (int)(sign - every_value[i]), every_value[i], sign + 1);
        struct made *m = made_plant("2025-03", "", every_limit, "");
        struct made *written = made_plant("2025-03", field, every_limit, "");
        struct rules *other = arena_alloc(a, sizeof *other);
        struct permit_comparison c;
        struct fault f = {0};
        struct permit_month direct;
        size_t differ = 0;

        made_readings(m, every_reading);
        made_readings(written, every_reading);
        assert_int_equal(plant_rules_read(a, m->plant, "", every_value[i], other, &f), OK);
        assert_int_equal(
            permit_what_if(m->arena, frame_of(m, other), m->month, later(), other, &c, &f), OK);
        assert_int_equal(permit_month(written->arena, frame_of(written, NULL), written->month,
                                      later(), &direct, &f),
                         OK);
        for (size_t d = 0; d < c.count; d++) {
            const struct permit_row *mine = c.at[d].other;
            bool found = mine == NULL;

            for (size_t r = 0; r < direct.count && !found; r++)
                found = direct.rows[r].limit->line == mine->limit->line &&
                        direct.rows[r].from == mine->from && direct.rows[r].to == mine->to &&
                        direct.rows[r].verdict == mine->verdict &&
                        text_equal(direct.rows[r].figure, mine->figure);
            if (!found)
                fail_msg("%s: no such row in a plant with %s", differences_text(a, &c), field);
            differ++;
        }
        /* And nothing differs that is not told; of other weeks the worst alone is, and how many
         * samples there are is not compared. */
        if (differ == 0 && strncmp(every_value[i], "week_", 5) != 0 &&
            strncmp(every_value[i], "count_by", 8) != 0)
            assert_string_equal(rows_text(a, &direct), rows_text(a, &c.base));
        made_free(m);
        made_free(written);
    }
    arena_free(a);
}

/* What is left out of --rules as out of reach must be so: over the whole plant, no rule changes a
 * limit it is said not to touch. */
static void a_rule_said_not_to_touch_a_limit_changes_nothing_in_it(void **state)
{
    struct made *m = made_plant("2025-03", "", every_limit, "");
    struct frame *frame;

    (void)state;
    made_readings(m, every_reading);
    frame = frame_of(m, NULL);
    for (size_t i = 0; i < NELEM(every_value); i++) {
        struct rules *other = arena_alloc(m->arena, sizeof *other);
        struct permit_comparison c;
        struct fault f = {0};

        assert_int_equal(plant_rules_read(m->arena, m->plant, "", every_value[i], other, &f), OK);
        assert_int_equal(permit_what_if(m->arena, frame, m->month, later(), other, &c, &f), OK);
        for (size_t d = 0; d < c.count; d++)
            if (!c.at[d].limit->when.set &&
                !permit_rule_touches(m->plant, c.at[d].limit, c.at[d].first))
                fail_msg("%s touches %s", every_value[i], differences_text(m->arena, &c));
    }
    made_free(m);
}

/* --rules finds exactly what the single questions find. */
static void every_rule_at_once_is_the_single_ones_together(void **state)
{
    struct made *m = made_plant("2025-03", "", every_limit, "");
    struct permit_comparison all;
    struct fault f = {0};
    struct frame *frame;
    size_t count = 0, verdicts = 0, days = 0;

    (void)state;
    made_readings(m, every_reading);
    frame = frame_of(m, NULL);
    assert_int_equal(permit_rules(m->arena, frame, m->month, later(), &all, &f), OK);
    for (size_t i = 0; i < NELEM(every_value); i++) {
        struct rules *other = arena_alloc(m->arena, sizeof *other);
        struct permit_comparison one;

        assert_int_equal(plant_rules_read(m->arena, m->plant, "", every_value[i], other, &f), OK);
        assert_int_equal(permit_what_if(m->arena, frame, m->month, later(), other, &one, &f), OK);
        count += one.count;
        verdicts += one.verdicts;
    }
    for (size_t i = 0; i < all.count; i++) /* week days that the list above leaves out */
        if (text_equal(all.at[i].rule, "week_starts") && !text_equal(all.at[i].value, "monday") &&
            !text_equal(all.at[i].value, "thursday")) {
            days++;
            verdicts += all.at[i].verdict;
        }
    assert_true(all.verdicts > 0);
    assert_int_equal(all.count, count + days);
    assert_int_equal(all.verdicts, verdicts);
    for (size_t i = 1; i < all.count; i++) /* verdicts first */
        assert_true(all.at[i - 1].verdict || !all.at[i].verdict);
    assert_int_equal(all.limits, 22);
    made_free(m);
}

static void a_wrong_rule_is_refused_with_the_nearest(void **state)
{
    static const struct {
        const char *text, *fault;
    } wrong[] = {
        {"nondetct=half", "--what-if: no rule 'nondetct'; the nearest is 'nondetect'"},
        {"nondetect=haf", "--what-if: no nondetect rule 'haf'; the nearest is 'half'"},
        {"nondetect=half;nondetect=full", "--what-if: the rule 'nondetect' is set twice; keep one"},
        {"", "--what-if: no rule; write it as RULE=VALUE, such as nondetect=half"},
        {"flow=EFX", "--what-if: no point 'EFX'; the nearest is 'EFF'"},
        {"load_factor=0", "--what-if: load_factor '0' is not above 0; write a number above 0"},
    };
    struct made *m = made_plant("2025-03", "", "", "");

    (void)state;
    for (size_t i = 0; i < NELEM(wrong); i++) {
        struct rules *r = arena_alloc(m->arena, sizeof *r);
        struct fault f = {0};

        assert_int_equal(plant_rules_read(m->arena, m->plant, "--what-if", wrong[i].text, r, &f),
                         FAULT);
        assert_int_equal(f.kind, FAULT_USAGE);
        assert_string_equal(f.text, wrong[i].fault);
    }
    made_free(m);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(a_month_under_another_rule_is_worked_as_published),
        cmocka_unit_test(a_rule_put_over_is_the_rule_written),
        cmocka_unit_test(a_rule_said_not_to_touch_a_limit_changes_nothing_in_it),
        cmocka_unit_test(every_rule_at_once_is_the_single_ones_together),
        cmocka_unit_test(a_wrong_rule_is_refused_with_the_nearest),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
