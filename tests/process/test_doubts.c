/* Doubts: published outlier examples, and for every kind of doubt a month that has it and one that
 * is like it and has not. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "process/process.h"
#include "process/small.h"

#include <stdlib.h>
#include <string.h>

/* ---- published examples ---- */

/* NIST/SEMATECH e-Handbook, 1.3.5.17.1 (from memory): uranium by mass spectrometer, G = 2.4687, cut
 * off there (exactly it is 2.46876...); critical value at 5 %, one-sided, 2.0317. */
static void the_handbooks_example_of_grubbs_test_is_met(void **state)
{
    (void)state;
    struct arena *a = arena_new();
    static const int64_t y[] = {19931, 19953, 20019, 20082, 20192, 20195, 20218, 24557};
    const struct fraction *square = doubt_grubbs(a, y, NELEM(y), 24557);
    const struct fraction *critical =
        fraction_from_double(a, doubt_grubbs_critical(NELEM(y), 0.05));
    assert_true(root_compare(a, square, 2, fraction_parse(a, "2.4687")) > 0);
    assert_true(root_compare(a, square, 2, fraction_parse(a, "2.4688")) < 0);
    assert_string_equal(fraction_print(a, critical, 4, ROUND_HALF_EVEN), "2.0317");
    assert_true(root_compare(a, square, 2, critical) > 0);
    arena_free(a);
}

/* Grubbs 1969 and later tables, two-sided at 5 % and one-sided at 5 % (from memory). */
static void critical_values_are_those_of_the_tables(void **state)
{
    (void)state;
    struct arena *a = arena_new();
    static const struct {
        size_t count;
        double tail;
        const char *value;
    } table[] = {
        {3, 0.025, "1.154"},  {5, 0.025, "1.715"},   {8, 0.025, "2.127"}, {10, 0.025, "2.290"},
        {20, 0.025, "2.708"}, {100, 0.025, "3.384"}, {10, 0.05, "2.176"}, {20, 0.05, "2.557"},
    };
    for (size_t i = 0; i < NELEM(table); i++)
        assert_string_equal(
            fraction_print(
                a, fraction_from_double(a, doubt_grubbs_critical(table[i].count, table[i].tail)), 3,
                ROUND_HALF_EVEN),
            table[i].value);
    arena_free(a);
}

/* Iglewicz and Hoaglin 1993, section 3 (from memory): of these ten the last two score 25.86 and
 * 26.31, and the first 1.57. */
static void the_example_of_the_modified_z_score_is_met(void **state)
{
    (void)state;
    struct arena *a = arena_new();
    int64_t y[] = {21, 26, 24, 25, 23, 21, 23, 26, 82, 83};
    struct doubt_spread s;
    doubt_spread(y, NELEM(y), &s);
    static const struct {
        int64_t y;
        const char *score;
    } expected[] = {{21, "1.57"}, {26, "0.67"}, {24, "0.22"}, {82, "25.86"}, {83, "26.31"}};
    assert_int_equal(s.twice_median, 49);
    assert_int_equal(s.four_mad, 6);
    for (size_t i = 0; i < NELEM(expected); i++)
        assert_string_equal(
            fraction_print(a, doubt_score(a, &s, expected[i].y), 2, ROUND_HALF_EVEN),
            expected[i].score);
    arena_free(a);
}

/* The example commonly given for Dixon's test (from memory): Q = 0.455, above 0.412 (90 %), not
 * above 0.466 (95 %). */
static void the_example_of_dixons_test_is_met(void **state)
{
    (void)state;
    struct arena *a = arena_new();
    static const int64_t y[] = {189, 167, 187, 183, 186, 182, 181, 184, 181, 177};
    assert_string_equal(fraction_print(a, doubt_dixon(a, y, NELEM(y), false), 3, ROUND_HALF_EVEN),
                        "0.455");
    assert_int_equal(doubt_dixon_critical(NELEM(y), false), 466);
    assert_int_equal(doubt_dixon_critical(3, true), 994);
    arena_free(a);
}

/* Beside a plain sort, on 300 lists with many ties. */
static void median_and_mad_are_those_of_a_sorted_list(void **state)
{
    (void)state;
    uint64_t seed = 20250316;
    for (int round = 0; round < 300; round++) {
        int64_t y[40], sorted[40];
        size_t n = (size_t)(round % 40) + 1;
        struct doubt_spread s;
        for (size_t i = 0; i < n; i++) {
            seed = seed * 6364136223846793005U + 1442695040888963407U;
            y[i] = sorted[i] = (int64_t)(seed >> 40) % (round % 3 ? 7 : 1000) - 3;
        }
        doubt_spread(y, n, &s);
        for (int pass = 0; pass < 2; pass++) {
            for (size_t i = 1; i < n; i++)
                for (size_t j = i; j > 0 && sorted[j] < sorted[j - 1]; j--) {
                    int64_t x = sorted[j];
                    sorted[j] = sorted[j - 1];
                    sorted[j - 1] = x;
                }
            int64_t middle = sorted[n / 2] + sorted[(n - 1) / 2];
            assert_int_equal(middle, pass ? s.four_mad : s.twice_median);
            for (size_t i = 0; i < n; i++)
                sorted[i] = llabs(2 * sorted[i] - s.twice_median);
        }
    }
}

/* ---- months ---- */

static const struct small_row rows[] = {
    {PLANT_FIELDS, "name,Small Works"},
    {PLANT_FIELDS, "permit,XX0000001"},
    {PLANT_FIELDS, "units,us"},
    {PLANT_POINTS, "INF,Raw influent,influent,"},
    {PLANT_POINTS, "EFF,Final effluent,effluent,001"},
    {PLANT_POINTS, "AER,Aeration,aeration,"},
    {PLANT_POINTS, "RAS,Return,return-sludge,"},
    {PLANT_POINTS, "WAS,Waste,waste-sludge,"},
    {PLANT_POINTS, "CL2,Chlorine,chemical,"},
    {PLANT_PARAMETERS, "FLOW,Flow,MGD,3,mean,arithmetic,50050,0,2000"},
    {PLANT_PARAMETERS, "BOD5,Oxygen demand,mg/L,1,mean,arithmetic,00310,0,20000"},
    {PLANT_PARAMETERS, "TSS,Solids,mg/L,1,mean,arithmetic,00530,0,100000"},
    {PLANT_PARAMETERS, "VSS,Volatile solids,mg/L,1,mean,arithmetic,00535,0,100000"},
    {PLANT_PARAMETERS, "MLSS,Mixed liquor,mg/L,0,mean,arithmetic,,0,30000"},
    {PLANT_PARAMETERS, "MLVSS,Volatile mixed liquor,mg/L,0,mean,arithmetic,,0,30000"},
    {PLANT_PARAMETERS, "NH3N,Ammonia,mg/L,2,mean,arithmetic,00610,0,5000"},
    {PLANT_PARAMETERS, "TKN,Kjeldahl,mg/L,2,mean,arithmetic,00625,0,10000"},
    {PLANT_PARAMETERS, "NO2N,Nitrite,mg/L,2,mean,arithmetic,00615,0,2000"},
    {PLANT_PARAMETERS, "NO3N,Nitrate,mg/L,2,mean,arithmetic,00620,0,5000"},
    {PLANT_PARAMETERS, "TN,Nitrogen,mg/L,2,mean,arithmetic,00600,0,10000"},
    {PLANT_PARAMETERS, "TP,Phosphorus,mg/L,2,mean,arithmetic,00665,0,5000"},
    {PLANT_PARAMETERS, "PO4P,Orthophosphate,mg/L,2,mean,arithmetic,70507,0,5000"},
    {PLANT_PARAMETERS, "PH,pH,pH,1,mean,arithmetic,00400,0,14"},
    {PLANT_PARAMETERS, "DO,Oxygen,mg/L,1,mean,arithmetic,00300,0,50"},
    {PLANT_PARAMETERS, "DOMETER,Oxygen by meter,mg/L,1,mean,arithmetic,00300,0,50"},
    {PLANT_PARAMETERS, "FEED,Feed,lb/d,1,mean,arithmetic,,0,100000000"},
    {PLANT_PARAMETERS, "TEMP,Temperature,degC,1,mean,arithmetic,00010,2,40"},
    {PLANT_PARAMETERS, "ECOLI,E. coli,MPN/100mL,0,geometric,geometric,51040,0,1000000000"},
    {PLANT_BASINS, "AB1,aeration,AER,1,MG,,,,,,"},
    {PLANT_LIMITS, "001,EFF,TSS,concentration,monthly-average,max,30,mg/L"},
};

struct month {
    struct arena *arena;
    struct plant *plant;
    struct reading *at;
    size_t count, room;
    struct doubt *doubt;
    size_t doubts;
};

static struct month *month_begin(void)
{
    struct arena *a = arena_new();
    struct month *m = arena_alloc(a, sizeof *m);
    m->arena = a;
    m->plant = small_plant(a, rows, NELEM(rows));
    return m;
}

/* A reading with a full record: "12.5", "<2" or ">2". */
static struct reading *put(struct month *m, const char *point, const char *parameter,
                           const char *day, const char *value)
{
    static const struct detail full = {"a method", "an analyst", "a sampler", "2025-03-02", ""};
    const char *digits = *value == '<' || *value == '>' ? value + 1 : value;
    struct reading *r = arena_push(m->arena, &m->at, &m->count, &m->room, sizeof *r);
    int what = plant_parameter(m->plant, parameter);
    *r = (struct reading){.day = small_day(day),
                          .minute = 480,
                          .point = (uint16_t)plant_point(m->plant, point),
                          .parameter = (uint16_t)what,
                          .unit = (uint16_t)unit_index(m->plant->parameters[what].unit),
                          .qualifier = *value == '<'   ? QUALIFIER_LESS
                                       : *value == '>' ? QUALIFIER_GREATER
                                                       : QUALIFIER_PLAIN,
                          .text = value,
                          .sample = "",
                          .detail = &full,
                          .file = "inline"};
    assert_int_equal(decimal_parse(digits, strlen(digits), &r->value), DECIMAL_FINE);
    return r;
}

/* A value a day in tenths, from 2025-02-01 to 2025-04-30, `middle` with a scatter of `step`; days
 * of March that have an own one (by date, in tenths; 0: none). */
static void put_days(struct month *m, const char *point, const char *parameter, int middle,
                     int step, const int own[32])
{
    static const int scatter[] = {0, 3, -2, 1, -3, 2, -1, 0, -4, 4, 1};
    day_t first = small_day("2025-02-01");
    for (int i = 0; i < 89; i++) {
        int year, month, date;
        char day[11];
        day_split(first + i, &year, &month, &date);
        day_write(first + i, day);
        int tenths = middle + step * scatter[i % 11];
        if (own && month == 3 && own[date])
            tenths = own[date];
        put(m, point, parameter, day, arena_print(m->arena, "%d.%d", tenths / 10, tenths % 10));
    }
}

static void work(struct month *m)
{
    struct frame *f =
        frame_new(m->arena, m->plant, small_day("2025-01-15"), small_day("2025-05-15"));
    for (size_t i = 0; i < m->count; i++)
        frame_add(f, &m->at[i]);
    frame_close(f);
    process_doubts(m->arena, f, NULL, small_day("2025-03-01"), &m->doubt, &m->doubts);
}

static const struct doubt *told(const struct month *m, enum doubt_kind kind, const char *point,
                                const char *parameter)
{
    for (size_t i = 0; i < m->doubts; i++)
        if (m->doubt[i].kind == kind &&
            (*point == '\0' ? m->doubt[i].point < 0
                            : m->doubt[i].point == plant_point(m->plant, point) &&
                                  m->doubt[i].parameter == plant_parameter(m->plant, parameter)))
            return &m->doubt[i];
    return NULL;
}

static void tells(struct month *m, enum doubt_kind kind, const char *point, const char *parameter,
                  const char *day, const char *evidence)
{
    work(m);
    const struct doubt *d = told(m, kind, point, parameter);
    if (!d)
        fail_msg("%s at %s %s is not told", doubt_words[kind], point, parameter);
    assert_int_equal(d->day, small_day(day));
    if (!strstr(d->evidence, evidence))
        fail_msg("'%s' lacks '%s'", d->evidence, evidence);
    arena_free(m->arena);
}

static void tells_nothing(struct month *m)
{
    work(m);
    for (size_t i = 0; i < m->doubts; i++)
        fail_msg("told: %s: %s", doubt_words[m->doubt[i].kind], m->doubt[i].evidence);
    arena_free(m->arena);
}

/* One day's readings that settle it by themselves. Two readings of a point and day, and what is
 * told of the first; NULL evidence: nothing. By the meaning of the parameters, no source. */
static const struct {
    enum doubt_kind kind;
    const char *point, *parameter, *value;
    const char *other_point, *other, *other_value, *evidence;
} pairs[] = {
    {DOUBT_PART, "EFF", "VSS", "12.1", "EFF", "TSS", "12.0", "VSS 12.1 mg/L is above TSS 12.0"},
    {DOUBT_PART, "EFF", "VSS", "12.0", "EFF", "TSS", "12.0", NULL},
    {DOUBT_PART, "EFF", "VSS", "<15", "EFF", "TSS", "12.0", NULL},
    {DOUBT_PART, "EFF", "VSS", "3", "EFF", "TSS", "<2", "above TSS <2"},
    {DOUBT_PART, "EFF", "VSS", "3", "EFF", "TSS", "<4", NULL},
    {DOUBT_PART, "EFF", "VSS", "3", "EFF", "TSS", ">2", NULL},
    {DOUBT_PART, "AER", "MLVSS", "2600", "AER", "MLSS", "2500", "above MLSS 2500"},
    {DOUBT_PART, "AER", "MLVSS", "1900", "AER", "MLSS", "2500", NULL},
    {DOUBT_PART, "EFF", "PO4P", "1.01", "EFF", "TP", "1.0", "above TP 1.0"},
    {DOUBT_PART, "EFF", "PO4P", "0.6", "EFF", "TP", "1.0", NULL},
    {DOUBT_PART, "INF", "NH3N", "32", "INF", "TKN", "30", "above TKN 30"},
    {DOUBT_PART, "INF", "NH3N", "28", "INF", "TKN", "30", NULL},
    {DOUBT_PART, "INF", "VSS", "200", "EFF", "TSS", "10", NULL}, /* another point */
    {DOUBT_REMOVAL, "EFF", "BOD5", "210", "INF", "BOD5", "200", "more leaves than comes"},
    {DOUBT_REMOVAL, "EFF", "BOD5", "200", "INF", "BOD5", "200", NULL},
    {DOUBT_REMOVAL, "EFF", "BOD5", "<300", "INF", "BOD5", "200", NULL},
    {DOUBT_SCALE, "EFF", "PH", "14.1", "EFF", "TP", "1", "0 to 14"},
    {DOUBT_SCALE, "EFF", "PH", "14.0", "EFF", "TP", "1", NULL},
    {DOUBT_BOUNDS, "EFF", "TEMP", "40.1", "EFF", "TP", "1", "plausible high of 40"},
    {DOUBT_BOUNDS, "EFF", "TEMP", "1.9", "EFF", "TP", "1", "plausible low of 2"},
    {DOUBT_BOUNDS, "EFF", "TEMP", "2", "EFF", "TP", "1", NULL},
    {DOUBT_BOUNDS, "EFF", "TEMP", ">1", "EFF", "TP", "1", NULL},
    {DOUBT_LOAD, "EFF", "FEED", "834001", "EFF", "FLOW", "1", "834000 lb/d"},
    {DOUBT_LOAD, "EFF", "FEED", "834000", "EFF", "FLOW", "1", NULL},
    {DOUBT_LOAD, "EFF", "BOD5", "12", "EFF", "FLOW", "0", "did not flow"},
    {DOUBT_LOAD, "EFF", "BOD5", "12", "EFF", "FLOW", "0.1", NULL},
};

static void what_one_day_settles_is_told(void **state)
{
    (void)state;
    for (size_t i = 0; i < NELEM(pairs); i++) {
        struct month *m = month_begin();
        put(m, pairs[i].point, pairs[i].parameter, "2025-03-05", pairs[i].value);
        put(m, pairs[i].other_point, pairs[i].other, "2025-03-05", pairs[i].other_value);
        if (pairs[i].evidence)
            tells(m, pairs[i].kind, pairs[i].point, pairs[i].parameter, "2025-03-05",
                  pairs[i].evidence);
        else
            tells_nothing(m);
    }
}

static void nitrite_and_nitrate_together_are_no_more_than_total_nitrogen(void **state)
{
    (void)state;
    for (int more = 0; more < 2; more++) {
        struct month *m = month_begin();
        put(m, "EFF", "NO2N", "2025-03-05", "0.5");
        put(m, "EFF", "NO3N", "2025-03-05", more ? "7.6" : "7.5");
        put(m, "EFF", "TN", "2025-03-05", "8.0");
        if (more)
            tells(m, DOUBT_PART, "EFF", "NO2N", "2025-03-05", "NO2N 0.5 mg/L with NO3N 7.6 mg/L");
        else
            tells_nothing(m);
    }
}

static void samples_of_other_times_are_not_compared(void **state)
{
    (void)state;
    struct month *m = month_begin();
    put(m, "EFF", "VSS", "2025-03-05", "12");
    put(m, "EFF", "TSS", "2025-03-05", "10")->minute = 600;
    put(m, "EFF", "TSS", "2025-03-05", "9")->minute = 900;
    tells_nothing(m);
}

/* ---- a reading beside its season ---- */

static void a_month_like_its_season_is_not_doubted(void **state)
{
    (void)state;
    struct month *m = month_begin();
    put_days(m, "INF", "BOD5", 1867, 31, NULL);
    put_days(m, "EFF", "TSS", 102, 4, NULL);
    tells_nothing(m);
}

/* The season's median is 20.0 and its values lie within 4 steps of 1.0. */
static const struct {
    int value; /* of 12 March, in tenths */
    enum doubt_kind kind;
    const char *evidence;
} far[] = {
    {2037, DOUBT_SLIP, "divided by 10 "},
    {21, DOUBT_SLIP, "times 10 "},
    {4752, DOUBT_SLIP, "divided by 24 "},
    {200000, DOUBT_SLIP, "divided by 1000 "},
    {910, DOUBT_SWAP, "swapped, 19.0"},
    {350, DOUBT_SEASON, "Grubbs' test agrees"},
    {325, DOUBT_SEASON, "above 3.5"}, /* 23.5 would be usual, but this is not far enough */
    {1250, DOUBT_SEASON, "median of 45 values of the season is 20"},
};

static void a_far_value_is_a_slip_a_swap_or_a_question(void **state)
{
    (void)state;
    for (size_t i = 0; i < NELEM(far); i++) {
        struct month *m = month_begin();
        int own[32] = {0};
        own[12] = far[i].value;
        put_days(m, "EFF", "TSS", 200, 10, own);
        tells(m, far[i].kind, "EFF", "TSS", "2025-03-12", far[i].evidence);
    }
}

/* Three days of a storm: no slip, though a tenth of each would be usual. */
static void what_rises_and_falls_is_one_question(void **state)
{
    (void)state;
    struct month *m = month_begin();
    const int own[32] = {[11] = 1500, [12] = 2037, [13] = 1700};
    put_days(m, "EFF", "TSS", 200, 10, own);
    work(m);
    assert_int_equal(m->doubts, 1);
    tells(m, DOUBT_SEASON, "EFF", "TSS", "2025-03-12", "also 150.0 of 03-11, 170.0 of 03-13");
}

/* One neighbour that is not as usual is enough for a question. */
static void a_slip_stands_alone(void **state)
{
    (void)state;
    for (int day = 11; day <= 13; day += 2) {
        struct month *m = month_begin();
        int own[32] = {[12] = 2037};
        own[day] = 280;
        put_days(m, "EFF", "TSS", 200, 10, own);
        work(m);
        assert_null(told(m, DOUBT_SLIP, "EFF", "TSS"));
        tells(m, DOUBT_SEASON, "EFF", "TSS", "2025-03-12", "modified z-score");
    }
}

/* Ten times as many is no doubt in bacteria. */
static void bacteria_are_judged_by_their_logarithms(void **state)
{
    (void)state;
    static const char *const counts[] = {"20", "45", "110", "8", "230", "60", "15"};
    for (int many = 0; many < 2; many++) {
        struct month *m = month_begin();
        day_t first = small_day("2025-02-01");
        for (int i = 0; i < 89; i++) {
            char day[11];
            day_write(first + i, day);
            bool own = text_equal(day, "2025-03-12");
            put(m, "EFF", "ECOLI", day, own ? (many ? "2000000" : "900") : counts[i % 7]);
        }
        if (many)
            tells(m, DOUBT_SEASON, "EFF", "ECOLI", "2025-03-12", "on logarithms");
        else
            tells_nothing(m);
    }
}

static void few_values_are_judged_by_dixons_test(void **state)
{
    (void)state;
    static const char *const days[] = {"2025-02-20", "2025-02-27", "2025-03-06",
                                       "2025-03-13", "2025-03-20", "2025-03-27"};
    static const char *const values[2][6] = {{"5.0", "5.3", "4.8", "19.0", "5.1", "4.9"},
                                             {"5.0", "5.3", "4.8", "5.6", "5.1", "4.9"}};
    for (int usual = 0; usual < 2; usual++) {
        struct month *m = month_begin();
        for (size_t i = 0; i < NELEM(days); i++)
            put(m, "EFF", "TP", days[i], values[usual][i]);
        if (usual)
            tells_nothing(m);
        else /* (19.0 - 5.3) / (19.0 - 4.8) = 0.965; critical for 6 values 0.740 */
            tells(m, DOUBT_FEW, "EFF", "TP", "2025-03-13", "0.965, above 0.740");
    }
}

/* Earlier years take part: alone, this year has too few values to judge by. */
static void earlier_years_are_the_same_season(void **state)
{
    (void)state;
    for (int known = 0; known < 2; known++) {
        struct month *m = month_begin();
        struct frame *past =
            frame_new(m->arena, m->plant, small_day("2021-02-01"), small_day("2024-04-30"));
        struct frame *now =
            frame_new(m->arena, m->plant, small_day("2025-02-06"), small_day("2025-04-23"));
        for (int year = 2021; year < 2025; year++)
            for (int i = 0; i < 6; i++)
                put(m, "EFF", "TP", arena_print(m->arena, "%d-03-%02d", year, 3 + 4 * i),
                    arena_print(m->arena, "1.%d", i));
        for (size_t i = 0; i < m->count; i++)
            frame_add(past, &m->at[i]);
        frame_add(now, put(m, "EFF", "TP", "2025-03-12", "7.77"));
        frame_close(past);
        frame_close(now);
        struct frame_span *spans = NULL;
        size_t count = 0;
        process_doubt_past(m->arena, now, small_day("2025-03-01"), &spans, &count);
        assert_int_equal(count, DOUBT_YEARS - 1);
        assert_int_equal(spans[0].first, small_day("2024-02-07")); /* 1 March less 23 days */
        process_doubts(m->arena, now, known ? past : NULL, small_day("2025-03-01"), &m->doubt,
                       &m->doubts);
        assert_int_equal(m->doubts, known ? 1 : 0);
        if (known)
            assert_non_null(strstr(m->doubt[0].evidence, "median of 25 values"));
        arena_free(m->arena);
    }
}

/* ---- what repeats itself or wanders off ---- */

static void the_same_value_on_too_many_days_is_told(void **state)
{
    (void)state;
    for (int days = 5; days <= 6; days++) {
        struct month *m = month_begin();
        int own[32] = {0};
        for (int i = 0; i < days; i++)
            own[10 + i] = 195; /* three digits: six in a row are too many */
        put_days(m, "EFF", "TSS", 200, 10, own);
        if (days == 6)
            tells(m, DOUBT_SAME, "EFF", "TSS", "2025-03-15", "2025-03-10 to 2025-03-15");
        else
            tells_nothing(m);
    }
}

static void a_setting_is_no_copy(void **state)
{
    (void)state;
    struct month *m = month_begin();
    put_days(m, "CL2", "FEED", 1250, 0, NULL);
    tells_nothing(m);
}

/* March 2025 has Fridays on the 7th, 14th, 21st and 28th; its first Sunday is the 2nd. */
static void weekends_that_copy_friday_are_told(void **state)
{
    (void)state;
    struct month *m = month_begin();
    const int own[32] = {[7] = 193,  [8] = 193,  [9] = 193,  [14] = 207, [15] = 207,
                         [16] = 207, [21] = 211, [22] = 211, [23] = 211};
    put_days(m, "EFF", "TSS", 200, 10, own);
    tells(m, DOUBT_WEEKEND, "EFF", "TSS", "2025-03-23", "on 3 of 5 weekends");
}

static void one_weekend_like_its_friday_is_chance(void **state)
{
    (void)state;
    struct month *m = month_begin();
    const int own[32] = {[7] = 193, [8] = 193, [9] = 193};
    put_days(m, "EFF", "TSS", 200, 10, own);
    tells_nothing(m);
}

static void the_only_weekend_of_a_short_series_is_chance_too(void **state)
{
    (void)state;
    static const char *const values[] = {"19.1", "20.3", "18.7", "21.2", "19.3", "19.3",
                                         "19.3", "20.9", "18.2", "19.9", "20.1", "21.4"};
    struct month *m = month_begin();
    for (int i = 0; i < 12; i++) /* from Monday the 3rd */
        put(m, "EFF", "TSS", arena_print(m->arena, "2025-03-%02d", 3 + i), values[i]);
    tells_nothing(m);
}

static void a_meter_that_wanders_from_its_bench_check_is_told(void **state)
{
    (void)state;
    for (int drift = 0; drift < 2; drift++) {
        struct month *m = month_begin();
        int own[32] = {0};
        static const int scatter[] = {0, 3, -2, 1, -3, 2, -1, 0, -4, 4, 1};
        for (int i = 1; i < 32; i++) /* as put_days makes it from 1 March, the 28th day */
            own[i] = 70 + scatter[(i + 27) % 11] + (drift ? i / 2 : i % 2);
        put_days(m, "EFF", "DO", 70, 1, NULL);
        put_days(m, "EFF", "DOMETER", 70, 1, own);
        work(m);
        const struct doubt *d = told(m, DOUBT_DRIFT, "EFF", "DO");
        assert_int_equal(d != NULL, drift);
        if (drift)
            assert_non_null(strstr(d->evidence, "from 0 on 2025-03-01 to -1.5 on 2025-03-31"));
        arena_free(m->arena);
    }
}

/* The same with two samples of one parameter. */
static void a_sample_that_wanders_from_the_other_is_told(void **state)
{
    (void)state;
    struct month *m = month_begin();
    for (int i = 1; i <= 12; i++) {
        const char *day = arena_print(m->arena, "2025-03-%02d", i);
        put(m, "EFF", "DO", day, arena_print(m->arena, "7.%d", i % 3))->sample = "bench";
        put(m, "EFF", "DO", day,
            arena_print(m->arena, "%d.%d", 7 + (i % 3 + i) / 10, (i % 3 + i) % 10))
            ->sample = "meter";
    }
    tells(m, DOUBT_DRIFT, "EFF", "DO", "2025-03-12",
          "from -0.1 on 2025-03-01 to -1.2 on 2025-03-12, S -66 over 12 pairs");
}

/* 1 MGD that loses 200 mg/L of BOD5 is 1668 lb/d; wasting 0.02 MGD at 8000 mg/L is 1334 lb/d, and
 * 20 mg/L leave as 167 lb/d: 1501 of 1668 lb/d, 0.90. With a tenth of the wasting 300 lb/d, 0.18.
 */
static void solids_that_do_not_balance_are_told(void **state)
{
    (void)state;
    for (int lost = 0; lost < 2; lost++) {
        struct month *m = month_begin();
        day_t first = small_day("2025-02-20");
        for (int i = 0; i < 60; i++) {
            char day[11];
            day_write(first + i, day);
            put(m, "INF", "FLOW", day, "1");
            put(m, "EFF", "FLOW", day, "1");
            put(m, "INF", "BOD5", day, "220");
            put(m, "EFF", "BOD5", day, "20");
            put(m, "EFF", "TSS", day, "20");
            put(m, "AER", "MLSS", day, "2500");
            put(m, "AER", "MLVSS", day, "2000");
            put(m, "WAS", "FLOW", day, lost ? "0.002" : "0.02");
            put(m, "WAS", "TSS", day, "8000");
        }
        work(m);
        const struct doubt *d = told(m, DOUBT_BALANCE, "", "");
        assert_int_equal(d != NULL, lost);
        if (lost)
            assert_non_null(strstr(d->evidence, "0.18 of the oxygen demand removed"));
        arena_free(m->arena);
    }
}

/* 40 CFR 122.41(j)(3), item by item. */
static void records_that_lack_what_the_regulation_asks_are_counted(void **state)
{
    (void)state;
    static const struct detail none = {"", "", "", "", ""};
    static const struct detail no_method = {"", "an analyst", "a sampler", "2025-03-02", ""};
    struct month *m = month_begin();
    put(m, "EFF", "TSS", "2025-03-05", "10");
    put(m, "EFF", "TSS", "2025-03-06", "11")->detail = &no_method;
    struct reading *r = put(m, "EFF", "TSS", "2025-03-07", "12");
    r->detail = &none;
    r->minute = -1;
    put(m, "INF", "TSS", "2025-03-07", "190")->detail = &none; /* no limit asks for it */
    work(m);
    assert_int_equal(m->doubts, 1);
    tells(
        m, DOUBT_RECORD, "EFF", "TSS", "2025-03-01",
        "2 of 3 readings lack the time (1), who sampled (1), when analysed (1), who analysed (1), "
        "the method (2); 40 CFR 122.41(j)(3)");
}

/* ---- the whole ---- */

static void an_id_is_of_the_doubt_alone(void **state)
{
    (void)state;
    char id[2][16];
    for (int more = 0; more < 2; more++) {
        struct month *m = month_begin();
        if (more) { /* other readings change nothing */
            put(m, "EFF", "TEMP", "2025-03-02", "99");
            put_days(m, "INF", "TSS", 2000, 10, NULL);
        }
        put(m, "EFF", "PH", "2025-03-05", "15");
        put(m, "EFF", "PH", "2025-03-06", "16");
        work(m);
        const struct doubt *d = told(m, DOUBT_SCALE, "EFF", "PH");
        assert_non_null(d);
        assert_int_equal(strlen(d->id), 14);
        assert_memory_equal(d->id, "2025-03-", 8);
        memcpy(id[more], d->id, 15);
        for (size_t i = 1; i < m->doubts; i++) {
            assert_string_not_equal(m->doubt[i].id, m->doubt[i - 1].id);
            assert_true(m->doubt[i].kind >= m->doubt[i - 1].kind);
        }
        arena_free(m->arena);
    }
    assert_string_equal(id[0], id[1]);
}

static void hostile_values_end_in_doubts_and_not_in_a_crash(void **state)
{
    (void)state;
    static const char *const values[] = {"999999999999999999",
                                         "-999999999999999999",
                                         "0.000000000000000001",
                                         "-0.5",
                                         "0",
                                         "<0",
                                         "100000000000000",
                                         "1e17",
                                         ">999999999999999999"};
    struct month *m = month_begin();
    put_days(m, "EFF", "TSS", 200, 10, NULL);
    put_days(m, "EFF", "ECOLI", 200, 10, NULL);
    for (size_t i = 0; i < NELEM(values); i++) {
        for (int k = 0; k < (int)m->plant->parameter_count; k++) {
            struct reading *r = put(m, "EFF", m->plant->parameters[k].id, "2025-03-31", values[i]);
            r->minute = (int16_t)i;
        }
    }
    work(m);
    assert_non_null(told(m, DOUBT_BOUNDS, "EFF", "TSS"));
    assert_non_null(told(m, DOUBT_SCALE, "EFF", "PH"));
    arena_free(m->arena);
    tells_nothing(month_begin()); /* an empty month */
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(the_handbooks_example_of_grubbs_test_is_met),
        cmocka_unit_test(critical_values_are_those_of_the_tables),
        cmocka_unit_test(the_example_of_the_modified_z_score_is_met),
        cmocka_unit_test(the_example_of_dixons_test_is_met),
        cmocka_unit_test(median_and_mad_are_those_of_a_sorted_list),
        cmocka_unit_test(what_one_day_settles_is_told),
        cmocka_unit_test(nitrite_and_nitrate_together_are_no_more_than_total_nitrogen),
        cmocka_unit_test(samples_of_other_times_are_not_compared),
        cmocka_unit_test(a_month_like_its_season_is_not_doubted),
        cmocka_unit_test(a_far_value_is_a_slip_a_swap_or_a_question),
        cmocka_unit_test(what_rises_and_falls_is_one_question),
        cmocka_unit_test(a_slip_stands_alone),
        cmocka_unit_test(bacteria_are_judged_by_their_logarithms),
        cmocka_unit_test(few_values_are_judged_by_dixons_test),
        cmocka_unit_test(earlier_years_are_the_same_season),
        cmocka_unit_test(the_same_value_on_too_many_days_is_told),
        cmocka_unit_test(a_setting_is_no_copy),
        cmocka_unit_test(weekends_that_copy_friday_are_told),
        cmocka_unit_test(one_weekend_like_its_friday_is_chance),
        cmocka_unit_test(the_only_weekend_of_a_short_series_is_chance_too),
        cmocka_unit_test(a_meter_that_wanders_from_its_bench_check_is_told),
        cmocka_unit_test(a_sample_that_wanders_from_the_other_is_told),
        cmocka_unit_test(solids_that_do_not_balance_are_told),
        cmocka_unit_test(records_that_lack_what_the_regulation_asks_are_counted),
        cmocka_unit_test(an_id_is_of_the_doubt_alone),
        cmocka_unit_test(hostile_values_end_in_doubts_and_not_in_a_crash),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
