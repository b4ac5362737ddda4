/* Room left: cases worked by hand, and the property that defines it, on random plant-months of
 * every statistic: with the remaining samples at exactly `room` the month is met, one step of the
 * printed number further it is exceeded. The month's own engine says so, over frames. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "rows.h"

#include "base/poison.h"

#define RUNS 1800

/* ---- random plant-months ---- */

static uint64_t seed = 20250401;

static unsigned next(unsigned below)
{
    seed ^= seed << 13;
    seed ^= seed >> 7;
    seed ^= seed << 17;
    return (unsigned)(seed >> 33) % below;
}

static const char *pick(const char *const *words, size_t count)
{
    return words[next((unsigned)count)];
}
#define PICK(...)                                                                                  \
    pick((const char *const[]){__VA_ARGS__}, NELEM(((const char *const[]){__VA_ARGS__})))

enum kind { KIND_PLAIN, KIND_BACTERIA, KIND_LOAD, KIND_REMOVAL, KIND_TOTAL, KIND_SAMPLES, KINDS };

struct trial {
    enum kind kind;
    struct made *m;
    const char *limits, *fields, *readings; /* to show a failure */
    day_t on;
    bool constant; /* all values so far alike */
    int point, parameter, influent, flow;
};

static const char *statistic_of(enum kind kind)
{
    switch (kind) {
    case KIND_BACTERIA:
        return PICK("monthly-geomean", "weekly-geomean", "rolling-30-day-geomean");
    case KIND_LOAD:
        return PICK("monthly-average", "weekly-average", "quarterly-average", "rolling-7-day",
                    "monthly-median", "percentile-90", "annual-average", "monthly-total");
    case KIND_REMOVAL:
        return PICK("monthly-average", "weekly-average", "quarterly-average", "monthly-median");
    case KIND_TOTAL:
        return PICK("monthly-total", "annual-total");
    case KIND_SAMPLES:
        return PICK("monthly-samples", "quarterly-samples", "annual-samples");
    default:
        return PICK("weekly-average", "monthly-average", "rolling-7-day", "rolling-30-day",
                    "quarterly-average", "semiannual-average", "annual-average", "rolling-12-month",
                    "monthly-median", "percentile-90", "percentile-50", "rolling-7-day-median");
    }
}

static bool is_rolling(const char *statistic)
{
    return strncmp(statistic, "rolling-", 8) == 0 && !text_equal(statistic, "rolling-12-month");
}

static const char *number_of(enum kind kind)
{
    static const char *const numbers[KINDS][4] = {
        [KIND_PLAIN] = {"30", "30.0", "12", "4.5"},  [KIND_BACTERIA] = {"126", "200", "12", "35.5"},
        [KIND_LOAD] = {"30", "25.0", "12", "18"},    [KIND_REMOVAL] = {"85", "85.0", "90", "80"},
        [KIND_TOTAL] = {"200", "150.0", "90", "31"}, [KIND_SAMPLES] = {"20", "30.0", "12", "4"}};
    return numbers[kind][next(4)];
}

/* One after the other, so that every compiler draws the same. */
static const char *fields_of(struct arena *a)
{
    const char *t = arena_print(a, "nondetect,%s", PICK("zero", "half", "full", "median"));

    t = arena_print(a, "%s\nrounding,%s", t, PICK("half-even", "half-up"));
    t = arena_print(a, "%s\ncompare,%s", t, PICK("rounded", "rounded", "raw"));
    t = arena_print(a, "%s\nweek_starts,%s", t, PICK("sunday", "monday", "thursday"));
    t = arena_print(a, "%s\nweek_counts_in,%s", t,
                    PICK("end", "start", "most-days", "split", "days-1-7"));
    t = arena_print(a, "%s\nno_discharge,%s", t, PICK("skip", "zero"));
    t = arena_print(a, "%s\npercentile,%s", t, PICK("nearest-rank", "linear", "weibull"));
    t = arena_print(a, "%s\nwindow,%s", t, PICK("days", "results"));
    t = arena_print(a, "%s\nlong_average,%s", t, PICK("months", "days"));
    t = arena_print(a, "%s\nload_average,%s", t, PICK("daily", "product"));
    t = arena_print(a, "%s\nload_total,%s", t, PICK("days", "sum"));
    t = arena_print(a, "%s\nremoval,%s", t, PICK("averages", "paired", "loads", "daily"));
    t = arena_print(a, "%s\ncount_by,%s", t, PICK("day", "reading"));
    return arena_print(a, "%s\nsign,%s", t, PICK("any", "all", "never"));
}

static const char *limit_of(struct arena *a, enum kind kind, const char *statistic, day_t on)
{
    static const struct {
        const char *parameter, *basis, *unit;
    } kinds[KINDS] = {
        [KIND_PLAIN] = {"BOD5", "concentration", "mg/L"},
        [KIND_BACTERIA] = {"ECOLI", "concentration", "MPN/100mL"},
        [KIND_LOAD] = {"BOD5", "load", "kg/d"},
        [KIND_REMOVAL] = {"BOD5", "removal", "%"},
        [KIND_TOTAL] = {"FLOW", "flow", "m3"},
        [KIND_SAMPLES] = {"BOD5", "concentration", "mg/L"},
    };
    bool total = text_equal(statistic, "monthly-total") || text_equal(statistic, "annual-total");
    char from[11] = "";
    const char *bound = kind == KIND_REMOVAL ? PICK("min", "above") : PICK("max", "max", "below");
    /* What is still owed on how many days decides a total: one sample each day. */
    const char *samples =
        total ? "1/day" : PICK("", "1/day", "3/week", "1/week", "8/month", "2/month", "continuous");

    if (kind == KIND_PLAIN && next(4) == 0)
        bound = PICK("min", "above");
    if (is_rolling(statistic)) /* the window that closes on the next day, and no other */
        day_write(on + 1, from);
    const char *number = number_of(kind);
    const char *allowed =
        kind == KIND_SAMPLES ? PICK("", "1", "2", "10%", "25%", "eu-table-3") : "";

    return arena_print(a, "001,EFF,%s,%s,%s,%s,%s,%s,,%s,%s,,%s,,%s,,,,", kinds[kind].parameter,
                       kinds[kind].basis, statistic, bound, number,
                       kind == KIND_LOAD && total ? "kg" : kinds[kind].unit, from, from, samples,
                       allowed);
}

static void add_reading(struct trial *t, int point, int parameter, day_t day, const char *unit,
                        struct decimal value, enum qualifier qualifier)
{
    struct reading *r =
        arena_push(t->m->arena, &t->m->readings, &t->m->count, &t->m->room, sizeof *r);

    *r = (struct reading){.day = day,
                          .minute = -1,
                          .point = (uint16_t)point,
                          .parameter = (uint16_t)parameter,
                          .unit = (uint16_t)unit_index(unit_find(unit)),
                          .qualifier = (uint8_t)qualifier,
                          .code = qualifier == QUALIFIER_CODE ? 'C' : 0,
                          .value = value,
                          .text = "",
                          .sample = "",
                          .file = "readings.csv",
                          .line = (long)t->m->count + 1};
}

static const char *unit_of(const struct trial *t)
{
    return t->kind == KIND_TOTAL ? "m3/d" : t->kind == KIND_BACTERIA ? "MPN/100mL" : "mg/L";
}

/* A day's flow, influent and value. The flow is 1000 m3/d, so that a load in kg/d is the
 * concentration in mg/L; the influent is 200 mg/L, so that its mean is. */
static void add_day(struct trial *t, day_t day, struct decimal value, enum qualifier qualifier)
{
    if (t->kind == KIND_LOAD || t->kind == KIND_REMOVAL)
        add_reading(t, t->point, t->flow, day, "m3/d", (struct decimal){1000, 0}, QUALIFIER_PLAIN);
    if (t->kind == KIND_REMOVAL)
        add_reading(t, t->influent, t->parameter, day, "mg/L", (struct decimal){200, 0},
                    QUALIFIER_PLAIN);
    add_reading(t, t->point, t->parameter, day, unit_of(t), value, qualifier);
}

static void add_past(struct trial *t)
{
    unsigned often = 1 + next(5), high = 1 + next(t->kind == KIND_BACTERIA ? 4000 : 700);
    struct decimal alike = {1 + next(high), 1};
    /* A mean flow is assumed for the rest where flows are averaged: no day without one, then. */
    bool steady = t->kind == KIND_TOTAL ||
                  (t->kind == KIND_LOAD && strstr(t->fields, "load_average,product")) ||
                  (t->kind == KIND_REMOVAL && strstr(t->fields, "removal,loads"));

    for (day_t day = t->on - 400; day <= t->on; day++) {
        struct decimal v = {(int64_t)next(high), 1};
        enum qualifier q = next(8) == 0 ? QUALIFIER_LESS : QUALIFIER_PLAIN;

        if (day < t->on && next(often) != 0) /* the day itself always has one */
            continue;
        if (t->constant) {
            v = alike;
            q = QUALIFIER_PLAIN;
        }
        if (!t->constant && day < t->on && next(20) == 0 && !steady)
            add_reading(t, t->point, t->parameter, day, unit_of(t), v, QUALIFIER_CODE);
        else
            add_day(t, day, v, q);
    }
}

static void make_trial(struct trial *t, enum kind kind)
{
    struct arena *a = arena_new(); /* for the texts: the plant's own arena comes with it */
    const char *statistic = statistic_of(kind);
    char on[11];
    day_t first;

    *t = (struct trial){.kind = kind, .constant = next(3) == 0};
    assert_true(day_from(2025, 1, 1, &first));
    t->on = first + (day_t)next(360);
    day_write(t->on, on);
    on[7] = '\0';
    t->fields = fields_of(a);
    t->limits = limit_of(a, kind, statistic, t->on);
    t->m = made_plant(on, t->fields, t->limits, "");
    t->fields = arena_text(t->m->arena, t->fields);
    t->limits = arena_text(t->m->arena, t->limits);
    arena_free(a);
    t->point = plant_point(t->m->plant, "EFF");
    t->influent = plant_point(t->m->plant, "INF");
    t->flow = plant_parameter(t->m->plant, "FLOW");
    t->parameter = t->m->plant->limits[0].parameter[0];
    add_past(t);
}

/* ---- the month's engine, asked ---- */

/* The verdict of the period once it is over, from the readings there are. */
static enum verdict verdict_of(struct trial *t, const struct room_row *r)
{
    struct arena *a = t->m->arena;
    struct frame *f = made_frame(t->m, t->on - 400, r->to > t->on ? r->to : t->on);

    for (int i = -1; i < 13; i++) {
        day_t month = month_step(month_first(t->on), i);
        struct permit_month pm;
        struct fault fault = {0};

        if (permit_month(a, f, month, r->to + 400, &pm, &fault) != OK)
            fail_msg("%s", fault.text);
        for (size_t j = 0; j < pm.count; j++)
            if (pm.rows[j].to == r->to &&
                (pm.rows[j].from == r->from || is_rolling(r->limit->statistic_text)))
                return pm.rows[j].verdict;
    }
    return VERDICT_OPEN;
}

/* The verdict with these numbers on the days of the remaining samples: `one` on one of them, `rest`
 * on the others. */
static enum verdict verdict_at(struct trial *t, const struct room_row *r, size_t at,
                               struct decimal one, struct decimal rest)
{
    size_t before = t->m->count;
    enum verdict v;

    for (size_t i = 0; i < r->days; i++)
        add_day(t, r->day[i], i == at ? one : rest, QUALIFIER_PLAIN);
    v = verdict_of(t, r);
    t->m->count = before;
    return v;
}

static enum verdict verdict_with(struct trial *t, const struct room_row *r, struct decimal one,
                                 struct decimal rest)
{
    return verdict_at(t, r, 0, one, rest);
}

static struct decimal printed(const char *s)
{
    struct decimal d = {0};

    assert_int_equal(decimal_parse(s, strlen(s), &d), DECIMAL_FINE);
    return d;
}

static void expect(struct trial *t, const struct room_row *r, const char *what, enum verdict got,
                   enum verdict wanted)
{
    char on[11];

    /* A flow of 0 on all days is no discharge (G10). */
    if (got == wanted || (wanted == VERDICT_MET && got == VERDICT_NO_DISCHARGE))
        return;
    day_write(t->on, on);
    fail_msg("%s: %s, not %s\non %s\n%s\n%s\ntaken %ld, remaining %ld, so far %s, room %s, single "
             "%s, %s %s",
             what, verdict_words[got], verdict_words[wanted], on, t->fields, t->limits, r->taken,
             r->remaining, r->so_far, r->room, r->single, r->note, r->single_note);
}

static bool upwards(const struct room_row *r)
{
    bool minimum = r->limit->bound == BOUND_MIN || r->limit->bound == BOUND_ABOVE;
    return minimum == (r->limit->basis == BASIS_REMOVAL);
}

static const struct decimal nothing = {0, 0}, lots = {1000000000000, 1};

/* All have the number; or one has it and the others that: whichever one, as long as it is met, and
 * one of them at least where it is not (a value weighs more in a month of few). */
static void check_number(struct trial *t, const struct room_row *r, const char *text, bool all,
                         struct decimal others)
{
    struct decimal n = printed(text), step = n;
    enum verdict past = VERDICT_MET;

    step.coefficient += upwards(r) ? 1 : -1;
    for (size_t i = 0; i < r->days; i += all || r->days < 4 ? r->days : r->days / 4)
        expect(t, r, all ? "at room" : "at single", verdict_at(t, r, i, n, all ? n : others),
               VERDICT_MET);
    if (step.coefficient < 0)
        return;
    for (size_t i = 0; i < r->days && past != VERDICT_EXCEEDED; i++)
        past = verdict_at(t, r, i, step, all ? step : others);
    expect(t, r, all ? "past room" : "past single", past, VERDICT_EXCEEDED);
}

/* A total's room is one day's if the others have nothing. */
static bool is_total(const struct room_row *r)
{
    return r->limit->statistic == STAT_MONTHLY_TOTAL || r->limit->statistic == STAT_ANNUAL_TOTAL;
}

static void check_room(struct trial *t, const struct room_row *r)
{
    struct decimal best = upwards(r) ? nothing : lots, worst = upwards(r) ? lots : nothing;

    if (t->kind == KIND_BACTERIA && upwards(r)) /* 0 counts as another number there */
        best = (struct decimal){1, (int8_t)(strchr(r->limit->limit_text, '.') ? 1 : 0)};
    if (r->state == ROOM_NONE)
        expect(t, r, "no room", verdict_with(t, r, best, best), VERDICT_EXCEEDED);
    else if (r->state == ROOM_ANY)
        expect(t, r, "any", verdict_with(t, r, worst, worst), VERDICT_MET);
    else if (is_total(r))
        check_number(t, r, r->room, false, nothing);
    else
        check_number(t, r, r->room, true, nothing);
}

/* Samples rows: so many beyond are met, one more is not. */
static void check_count(struct trial *t, const struct room_row *r)
{
    size_t before = t->m->count, count = (size_t)printed(r->room).coefficient;

    for (size_t more = 0; more < 2; more++) {
        for (size_t i = 0; i < r->days; i++)
            add_day(t, r->day[i], i < count + more ? lots : nothing, QUALIFIER_PLAIN);
        if (count + more <= r->days)
            expect(t, r, more ? "one more beyond" : "so many beyond", verdict_of(t, r),
                   more ? VERDICT_EXCEEDED : VERDICT_MET);
        t->m->count = before;
    }
}

/* With every value from the day on at its best it is met, with those after the day it is not. */
static void check_gone(struct trial *t, const struct room_row *r)
{
    struct reading *kept = t->m->readings;
    struct decimal best = {t->kind == KIND_BACTERIA, 0};

    if (r->gone == DAY_NONE || t->kind == KIND_SAMPLES || !upwards(r))
        return;
    if (t->kind == KIND_BACTERIA && strchr(r->limit->limit_text, '.'))
        best.scale = 1;
    for (int keep = 0; keep < 2; keep++) {
        t->m->readings = arena_alloc(t->m->arena, (t->m->count + 2000) * sizeof *kept);
        memcpy(t->m->readings, kept, t->m->count * sizeof *kept);
        t->m->room = t->m->count + 2000;
        for (size_t i = 0; i < t->m->count; i++) {
            struct reading *x = &t->m->readings[i];

            if (x->day < r->gone + keep || x->point != t->point || x->parameter != t->parameter ||
                x->qualifier == QUALIFIER_CODE)
                continue;
            x->value = best;
            x->qualifier = QUALIFIER_PLAIN;
        }
        expect(t, r, keep ? "gone by then" : "not gone before", verdict_with(t, r, best, best),
               keep ? VERDICT_EXCEEDED : VERDICT_MET);
    }
}

struct seen {
    long left, none, any, not_worked, single, gone, rows;
};

static void check_trial(struct trial *t, struct seen *seen)
{
    struct frame *f = made_frame(t->m, t->on - 400, t->on);
    struct room_row *rows;
    struct fault fault = {0};
    size_t count;

    if (permit_room(t->m->arena, f, t->on, &rows, &count, &fault) != OK)
        fail_msg("%s", fault.text);
    for (size_t i = 0; i < count; i++) {
        struct room_row *r = &rows[i];

        seen->rows++;
        seen->left += r->state == ROOM_LEFT;
        seen->none += r->state == ROOM_NONE;
        seen->any += r->state == ROOM_ANY;
        seen->not_worked += r->state == ROOM_NOT_WORKED;
        seen->gone += r->state == ROOM_NONE && r->gone != DAY_NONE;
        if (r->state == ROOM_NOT_WORKED)
            continue;
        if (t->kind == KIND_SAMPLES && r->state == ROOM_LEFT)
            check_count(t, r);
        else
            check_room(t, r);
        if (r->state == ROOM_NONE)
            check_gone(t, r);
        /* The others as so far: a value that can be written where all so far are alike. */
        if (*r->single && t->constant && t->kind != KIND_SAMPLES && r->taken > 0 &&
            r->state == ROOM_LEFT) {
            struct decimal alike = t->m->readings[t->m->count - 1].value;

            check_number(t, r, r->single, false, alike);
            seen->single++;
        }
    }
}

static void at_room_the_month_is_met_and_one_step_further_exceeded(void **state)
{
    (void)state;
    struct seen seen = {0};

    for (int i = 0; i < RUNS; i++) {
        struct trial t;

        make_trial(&t, (enum kind)(i % KINDS));
        check_trial(&t, &seen);
        made_free(t.m);
    }
    print_message("%ld rows: %ld with room, %ld without (%ld with its day), %ld that nothing "
                  "breaks, %ld singles, %ld not worked\n",
                  seen.rows, seen.left, seen.none, seen.gone, seen.any, seen.single,
                  seen.not_worked);
    assert_true(seen.left > RUNS / 4 && seen.none > RUNS / 40 && seen.any > RUNS / 100);
    assert_true(seen.single > RUNS / 40 && seen.gone > RUNS / 100);
    assert_int_equal(seen.not_worked, 0);
}

/* ---- by hand ---- */

struct room_case {
    const char *source, *fields, *limits, *readings, *on, *expected, *note;
};

#define BOD(statistic, bound, limit, samples)                                                      \
    "001,EFF,BOD5,concentration," statistic "," bound "," limit ",mg/L,,,,," samples ",,,,,,"

static const char *room_text(struct arena *a, const struct room_row *r)
{
    static const char *const states[] = {
        [ROOM_LEFT] = "", [ROOM_NONE] = "NONE", [ROOM_ANY] = "any", [ROOM_NOT_WORKED] = "?"};
    char from[11], to[11];

    day_write(r->from, from);
    day_write(r->to, to);
    return arena_print(a, "%s..%s %ld+%ld %s room %s%s single %s as %s %s", from + 5, to + 5,
                       r->taken, r->remaining, *r->so_far ? r->so_far : "-", states[r->state],
                       r->room, *r->single ? r->single : "-",
                       *r->projected_7 ? r->projected_7 : "-",
                       *r->projected_30 ? r->projected_30 : "-");
}

static void check_case(const struct room_case *c)
{
    struct made *m = made_plant("2025-03", c->fields, c->limits, "");
    struct room_row *rows;
    struct fault f = {0};
    size_t count;
    day_t on;
    const char *got, *note;

    assert_true(day_parse(c->on, &on));
    made_readings(m, c->readings);
    if (permit_room(m->arena, made_frame(m, on - 500, on), on, &rows, &count, &f) != OK)
        fail_msg("%s: %s", c->source, f.text);
    got = count > 0 ? room_text(m->arena, &rows[0]) : "none";
    note = count > 0 ? arena_print(m->arena, "%s|%s", rows[0].note, rows[0].single_note) : "";
    if (!text_equal(got, c->expected) || !strstr(note, c->note))
        fail_msg("%s\n%s\n%s\nexpected:\n%s\n%s\ngot:\n%s\n%s", c->source, c->limits, c->readings,
                 c->expected, c->note, got, note);
    made_free(m);
}

static const char *const four = "EFF BOD5 mg/L 3=22 5=29 7=18 9=10";

static void room_is_what_algebra_says(void **state)
{
    (void)state;
    const struct room_case cases[] = {
        {"algebra by hand: 79 so far; 30.5 still rounds to 30, so 244 in all, (244 - 79) / 4",
         "rounding,half-even", BOD("monthly-average", "max", "30", "8/month"), four, "2025-03-10",
         "03-01..03-31 4+4 20 room 41.2 single 105.7 as 19 20", "single: the others as so far"},
        {"algebra by hand: half up 30.5 is 31: less than 244", "rounding,half-up",
         BOD("monthly-average", "max", "30", "8/month"), four, "2025-03-10",
         "03-01..03-31 4+4 20 room 41.2 single 105.7 as 19 20", ""},
        {"algebra by hand: raw, 240 in all", "compare,raw",
         BOD("monthly-average", "max", "30", "8/month"), four, "2025-03-10",
         "03-01..03-31 4+4 20 room 40.2 single 101.7 as 19 20", ""},
        {"algebra by hand: raw and strict, less than (240 - 79 - 3) / 4 = 39.5", "compare,raw",
         BOD("monthly-average", "below", "30", "8/month"), "EFF BOD5 mg/L 3=22 5=29 7=18 9=13",
         "2025-03-10", "03-01..03-31 4+4 20 room 39.4 single 96.4 as 20 20", ""},
        {"published: 50 x 100 x 150 x 200 = 1.5 x 10^8 (State reporting sheet); 126.5^5 / 1.5e8 "
         "= 215.95",
         "", "001,EFF,ECOLI,concentration,monthly-geomean,max,126,MPN/100mL,,,,,5/month,,,,,,",
         "EFF ECOLI MPN/100mL 3=50 5=100 7=150 9=200", "2025-03-10",
         "03-01..03-31 4+1 111 room 215 single 215 as 117 111", ""},
        {"algebra by hand: 62.5 rounds to 62, less 20", "",
         "001,EFF,FLOW,flow,monthly-total,max,62,MG,,,,,1/day,,,,,,", "EFF FLOW MGD 1..10=2",
         "2025-03-10", "03-01..03-31 10+21 20 room 42.5 single 2.5 as 62 62",
         "room is all that may still be discharged in 21 days"},
        {"algebra by hand: two may be beyond, one is", "",
         "001,EFF,FCOLI,concentration,monthly-samples,max,400,cfu/100mL,,,,,1/week,,2,,,,",
         "EFF FCOLI cfu/100mL 4=10 11=500", "2025-03-11",
         "03-01..03-31 2+2 1 room 1 single - as 3 2", "counts of samples beyond the limit"},
        {"algebra by hand: after 100 and 60 of four 160 are more than 122", "",
         BOD("monthly-average", "max", "30", "4/month"), "EFF BOD5 mg/L 3=100 5=60 7=2",
         "2025-03-10", "03-01..03-31 3+1 54 room NONE single - as 48 54",
         "NO ROOM since 2025-03-05"},
        {"algebra by hand: 84.5 rounds to 84, so the mean effluent stays under 31 of 200", "",
         "001,EFF,BOD5,removal,monthly-average,min,85,%,,,,,4/month,,,,,,",
         "INF BOD5 mg/L 3=200 5=200\nEFF BOD5 mg/L 3=20 5=40", "2025-03-10",
         "03-01..03-31 2+2 85 room 31.9 single 33.9 as 82 85",
         "room and single are effluent in mg/L, the influent staying at 200.0 mg/L"},
        {"algebra by hand: 14 lb/d at 8.34 and 1 MGD is 1.678 mg/L", "",
         "001,EFF,BOD5,load,monthly-average,max,14,lb/d,,,,,2/month,,,,,,",
         "EFF FLOW MGD 3=1\nEFF BOD5 mg/L 3=1.8", "2025-03-10",
         "03-01..03-31 1+1 15 room 13.9 single 13.9 as - 15",
         "room is 1.6 mg/L at the flow of the last 30 days, 1.000 MGD"},
        {"algebra by hand: seven days with 10 and 20: (10.4999... x 3 - 30)", "",
         BOD("rolling-7-day", "max", "10", "3/week"), "EFF BOD5 mg/L 8=10 11=20", "2025-03-11",
         "03-06..03-12 2+1 15 room 1.5 single 1.5 as 15 15",
         "the window that closes with the sample of 2025-03-12"},
        {"algebra by hand: 45.5 rounds to 46, so less than 136.5 - 90; a day whose sample is not "
         "on "
         "record may still bring it",
         "", BOD("weekly-average", "max", "45", "3/week"), "EFF BOD5 mg/L 10=45 11=45",
         "2025-03-15", "03-09..03-15 2+1 45 room 46.4 single 46.4 as 45 45", ""},
        {"the week is over", "", BOD("weekly-average", "max", "45", "3/week"),
         "EFF BOD5 mg/L 10=45 11=45 15=45", "2025-03-15", "none", ""},
        {"algebra by hand: less than 91 - 45; samples owed that no day is left for", "",
         BOD("weekly-average", "max", "45", "3/week"), "EFF BOD5 mg/L 10=45", "2025-03-15",
         "03-09..03-15 1+1 45 room 45.9 single 45.9 as 45 45", "1 sample owed can no longer"},
        {"all taken: one more is looked at", "", BOD("weekly-average", "max", "45", "2/week"),
         "EFF BOD5 mg/L 10=45 11=45", "2025-03-12",
         "03-09..03-15 2+0 45 room 46.4 single 46.4 as 45 45", "room is for one more"},
        {"no frequency: every other day lately, so half of the days left", "",
         BOD("monthly-average", "max", "30", ""),
         "EFF BOD5 mg/L 2025-02-09=30 2025-02-11=30 2025-02-13=30 2025-02-15=30 2025-02-17=30 "
         "2025-02-19=30 2025-02-21=30 2025-02-23=30 2025-02-25=30 2025-02-27=30 1=30 3=30 5=30 "
         "7=30 9=30",
         "2025-03-09", "03-01..03-31 5+11 30 room 30.7 single 38.0 as 30 30",
         "no frequency is named: 15 days with a value in the last 30, so 11 more assumed"},
        {"a daily maximum holds a single value", "",
         BOD("monthly-average", "max", "30", "8/month") "\n" BOD("daily", "max", "60", ""), four,
         "2025-03-10", "03-01..03-31 4+4 20 room 41.2 single 60.5 as 19 20",
         "held there by the daily limit of 60"},
        {"nothing can break a median that stands", "",
         BOD("monthly-median", "max", "30", "4/month"), "EFF BOD5 mg/L 3=2 5=2 7=2", "2025-03-10",
         "03-01..03-31 3+1 2 room any single - as 2 2", "whatever comes keeps it"},
        {"algebra by hand: 4.95 still rounds to 5.0, so 4 x 4.95 - 15.3", "",
         "001,EFF,DO,concentration,monthly-average,min,5.0,mg/L,,,,,4/month,,,,,,",
         "EFF DO mg/L 3=5.1 4=5.1 5=5.1", "2025-03-10",
         "03-01..03-31 3+1 5.1 room 4.5 single 4.5 as 5.1 5.1", ""},
        {"a report has no room", "", BOD("monthly-average", "report", "", "4/month"), four,
         "2025-03-10", "none", ""},
        {"out of season", "",
         "001,EFF,BOD5,concentration,monthly-average,max,30,mg/L,05-01..10-31,,,,4/month,,,,,,",
         four, "2025-03-10", "none", ""},
        {"a tier that does not hold", "",
         "001,EFF,BOD5,concentration,monthly-average,max,30,mg/L,,,,EFF FLOW monthly-average > 2 "
         "MGD,4/month,,,,,,",
         "EFF FLOW MGD 3=1\nEFF BOD5 mg/L 3=22", "2025-03-10", "none", ""},
        {"a tier that has no figure yet", "",
         "001,EFF,BOD5,concentration,monthly-average,max,30,mg/L,,,,EFF FLOW monthly-average > 2 "
         "MGD,2/month,,,,,,",
         "EFF BOD5 mg/L 3=22", "2025-03-10", "03-01..03-31 1+1 22 room 39.0 single 39.0 as - 22",
         "which has no figure yet"},
    };

    for (size_t i = 0; i < NELEM(cases); i++)
        check_case(&cases[i]);
}

static void the_tightest_limit_comes_first(void **state)
{
    (void)state;
    static const char *const limits = BOD("monthly-median", "max", "90", "4/month") "\n" /* any */
        BOD("annual-average", "max", "60", "4/month") "\n" BOD(
            "monthly-average", "max", "50", "4/month") "\n" BOD("percentile-50", "max", "3",
                                                                "4/month"); /* none */
    struct made *m = made_plant("2025-03", "", limits, "");
    static const long lines[] = {5, 4, 3, 2};
    struct room_row *rows;
    struct fault f = {0};
    size_t count;

    made_readings(m, "EFF BOD5 mg/L 3=10 5=80 7=80");
    assert_int_equal(permit_room(m->arena, made_frame(m, m->month - 100, m->month + 9),
                                 m->month + 9, &rows, &count, &f),
                     OK);
    assert_int_equal(count, NELEM(lines));
    for (size_t i = 0; i < count; i++)
        assert_int_equal(rows[i].limit->line, lines[i]);
    made_free(m);
}

/* R47: one limit of a group is enough. The load has no room: 10 x 8.34 + 0 over two is more than
 * 40; the concentration still has. */
static void one_of_a_group_is_enough(void **state)
{
    (void)state;
    struct made *m = made_plant(
        "2025-03", "",
        "001,EFF,BOD5,concentration,monthly-average,max,30,mg/L,,,,,2/month,,,,either,,\n"
        "001,EFF,BOD5,load,monthly-average,max,40,lb/d,,,,,2/month,,,,either,,",
        "");
    struct room_row *rows;
    struct fault f = {0};
    size_t count;

    made_readings(m, "EFF BOD5 mg/L 3=10\nEFF FLOW MGD 3=1");
    assert_int_equal(permit_room(m->arena, made_frame(m, m->month - 100, m->month + 9),
                                 m->month + 9, &rows, &count, &f),
                     OK);
    assert_int_equal(count, 2);
    assert_int_equal(rows[0].state, ROOM_NONE);
    assert_true(rows[0].let_off);
    assert_int_equal(rows[1].state, ROOM_LEFT);
    assert_false(rows[1].let_off);
    made_free(m);
}

/* The frame of what permit_room_needs says gives the same as one with everything. */
static void needs_are_enough(void **state)
{
    (void)state;

    for (int i = 0; i < 300; i++) {
        struct trial t;
        struct room_row *all, *some;
        struct frame_span *needs;
        struct frame *f;
        struct fault fault = {0};
        size_t count, same, spans;

        make_trial(&t, (enum kind)(i % KINDS));
        permit_room_needs(t.m->arena, t.m->plant, t.on, &needs, &spans);
        f = frame_new(t.m->arena, t.m->plant, t.on - 400, t.on);
        for (size_t j = 0; j < t.m->count; j++)
            for (size_t k = 0; k < spans; k++)
                if (needs[k].point == t.m->readings[j].point &&
                    needs[k].parameter == t.m->readings[j].parameter &&
                    needs[k].first <= t.m->readings[j].day && t.m->readings[j].day <= needs[k].last)
                    frame_add(f, &t.m->readings[j]);
        frame_close(f);
        assert_int_equal(
            permit_room(t.m->arena, made_frame(t.m, t.on - 400, t.on), t.on, &all, &count, &fault),
            OK);
        assert_int_equal(permit_room(t.m->arena, f, t.on, &some, &same, &fault), OK);
        assert_int_equal(count, same);
        for (size_t j = 0; j < count; j++) {
            assert_string_equal(room_text(t.m->arena, &all[j]), room_text(t.m->arena, &some[j]));
            assert_string_equal(all[j].note, some[j].note);
        }
        made_free(t.m);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(room_is_what_algebra_says),
        cmocka_unit_test(the_tightest_limit_comes_first),
        cmocka_unit_test(one_of_a_group_is_enough),
        cmocka_unit_test(at_room_the_month_is_met_and_one_step_further_exceeded),
        cmocka_unit_test(needs_are_enough),
    };

    return cmocka_run_group_tests(tests, NULL, NULL);
}
