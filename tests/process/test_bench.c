/* The table of bench sheets, how rows come together, and what is refused. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

#include <cmocka.h>

#include "process/sheets.h"

static const char *const names[] = {
    "suspended-solids",
    "total-solids",
    "settleability",
    "settleable-solids",
    "spin",
    "bod",
    "cbod",
    "fecal-membrane",
    "ecoli-membrane",
    "enterococci-membrane",
    "ecoli-tubes",
    "fecal-tubes",
    "coliform-tubes",
    "enterococci-tubes",
    "residual",
    "ph-calibration",
    "do-calibration",
};

static void every_sheet_is_complete(void **state)
{
    (void)state;
    static const char *const texts[] = {"analyst", "method", "sample", "note"};
    assert_int_equal(bench_count(), NELEM(names));
    for (size_t i = 0; i < NELEM(names); i++) {
        const struct bench_sheet *s = bench_find(names[i]);
        assert_non_null(s);
        assert_true(*s->title && *s->run_name && *s->gives && *s->source);
        assert_true((s->runs & 1u << BENCH_SAMPLE) != 0);
        assert_true(s->arguments > NELEM(texts) && s->arguments <= BENCH_ARGUMENTS_MOST);
        size_t found = 0;
        for (size_t k = 0; k < BENCH_ARGUMENTS_MOST; k++)
            assert_int_equal(k < s->arguments, s->argument[k].name != NULL);
        for (size_t k = 0; k < s->arguments; k++) {
            const struct bench_argument *arg = &s->argument[k];
            assert_true(*arg->asked && arg->runs != 0);
            assert_int_equal(arg->runs & ~s->runs, 0);
            if (arg->text)
                assert_true(arg->once && arg->optional && *arg->unit == '\0');
            else
                assert_non_null(unit_find(arg->unit));
            for (size_t t = 0; t < NELEM(texts); t++)
                found += text_equal(arg->name, texts[t]);
            for (size_t n = 0; n < k; n++)
                assert_string_not_equal(arg->name, s->argument[n].name);
        }
        assert_int_equal(found, NELEM(texts));
    }
    assert_null(bench_find("round"));
    assert_null(bench_find(""));
    assert_string_equal(bench_nearest("rond"), "round");
    assert_string_equal(bench_nearest("suspended-solid"), "suspended-solids");
    assert_null(bench_at(bench_count()));
}

static void the_first_word_of_a_run_is_its_kind(void **state)
{
    (void)state;
    static const struct {
        const char *run;
        enum bench_run kind;
    } cases[] = {
        {"", BENCH_SAMPLE},           {"2", BENCH_SAMPLE},      {"blank", BENCH_BLANK},
        {"Blank", BENCH_BLANK},       {"blank-2", BENCH_BLANK}, {"blank 2", BENCH_BLANK},
        {"seed-2", BENCH_SEED},       {"seed2", BENCH_SEED},    {"seedling", BENCH_SAMPLE},
        {"standard", BENCH_STANDARD}, {"stand", BENCH_SAMPLE},  {"a-blank", BENCH_SAMPLE},
    };
    for (size_t i = 0; i < NELEM(cases); i++)
        assert_int_equal(bench_run_of(cases[i].run), cases[i].kind);
}

static void a_typed_value_is_held_against_its_argument(void **state)
{
    (void)state;
    static const struct {
        const char *sheet, *argument, *value, *unit, *says; /* NULL: fine */
    } cases[] = {
        {"suspended-solids", "volume", "250", "", NULL},
        {"suspended-solids", "volume", "0.25", "L", NULL},
        {"suspended-solids", "volume", "2.5e2", "mL", NULL},
        {"suspended-solids", "analyst", "KB", "", NULL},
        {"suspended-solids", "volume", "0", "", "'volume' is '0'; it must be above 0 mL"},
        {"suspended-solids", "volume", "-3", "", "'volume' is '-3'; it must be above 0 mL"},
        {"suspended-solids", "volume", "", "",
         "'volume' has no value; write the value, or leave the row out"},
        {"suspended-solids", "volume", "lots", "",
         "'lots' is not a number for 'volume'; write a number"},
        {"suspended-solids", "volume", "nan", "", "'nan' is not a number for 'volume'"},
        {"suspended-solids", "volume", "<5", "", "'<5' is not a number for 'volume'"},
        {"suspended-solids", "volume", "1e308", "", "'1e308' has too many digits for 'volume'"},
        {"suspended-solids", "volume", "250", "g",
         "'g' is a unit of mass, but 'volume' is a volume; give it in mL"},
        {"suspended-solids", "volume", "250", "ml",
         "unknown unit 'ml' for 'volume'; the nearest is 'mL'"},
        {"suspended-solids", "analyst", "KB", "mL", "'analyst' is a text and has no unit"},
        {"ph-calibration", "buffer", "15", "", "'buffer' is '15'; it must be at most 14 pH"},
        {"ecoli-tubes", "tubes", "2.5", "", "'tubes' is '2.5'; count whole ones"},
        {"settleability", "dilution_factor", "0.5", "",
         "'dilution_factor' is '0.5'; it must be at least 1"},
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct arena *a = arena_new();
        struct fault f = {.set = false};
        const struct bench_sheet *s = bench_find(cases[i].sheet);
        const struct bench_argument *arg = NULL;
        for (size_t k = 0; k < s->arguments; k++)
            if (text_equal(s->argument[k].name, cases[i].argument))
                arg = &s->argument[k];
        assert_non_null(arg);
        enum status rc = bench_value(a, arg, cases[i].value, cases[i].unit, &f);
        if (cases[i].says == NULL)
            assert_int_equal(rc, OK);
        else if (rc == OK || strncmp(f.text, cases[i].says, strlen(cases[i].says)) != 0)
            fail_msg("'%s' where '%s' was to come", f.text, cases[i].says);
        arena_free(a);
    }
}

/* ---- rows that cannot be used ---- */

static void a_row_that_cannot_be_used_is_told_by_itself(void **state)
{
    (void)state;
    static const struct {
        const char *line;
        enum reason reason;
        const char *says;
    } cases[] = {
        {"suspended-solid,2025-06-10,,EFF,1,dried,0.1,", REASON_UNKNOWN_SHEET,
         "no sheet 'suspended-solid'; the nearest is 'suspended-solids'"},
        {",2025-06-10,,EFF,1,dried,0.1,", REASON_UNKNOWN_SHEET, "no sheet ''"},
        {"suspended-solids,10/6/2025,,EFF,1,dried,0.1,", REASON_BAD_DATE, "'10/6/2025' is no date"},
        {"suspended-solids,2025-07-01,,EFF,1,dried,0.1,", REASON_FUTURE_DATE,
         "2025-07-01 is to come"},
        {"suspended-solids,2019-12-31,,EFF,1,dried,0.1,", REASON_BEFORE_PLANT,
         "2019-12-31 is before the plant's first day"},
        {"suspended-solids,2025-06-10,25:00,EFF,1,dried,0.1,", REASON_BAD_TIME,
         "'25:00' is no time"},
        {"suspended-solids,2025-06-10,,EF,1,dried,0.1,", REASON_UNKNOWN_POINT,
         "no point 'EF'; the nearest is 'EFF'"},
        {"suspended-solids,2025-06-10,,,1,dried,0.1,", REASON_UNKNOWN_POINT,
         "a sample's values need their point"},
        {"ph-calibration,2025-06-10,,EFF,1,buffer,7,", REASON_UNKNOWN_POINT,
         "a calibration has no point; leave it blank"},
        {"suspended-solids,2025-06-10,,EFF,1,dryed,0.1,", REASON_UNKNOWN_ARGUMENT,
         "'suspended-solids' has no argument 'dryed'; the nearest is 'dried'"},
        {"suspended-solids,2025-06-10,,EFF,blank,volume,100,", REASON_UNKNOWN_ARGUMENT,
         "'volume' is not asked of a blank"},
        {"suspended-solids,2025-06-10,,EFF,seed,dried,100,", REASON_UNKNOWN_ARGUMENT,
         "'suspended-solids' has no seed"},
        {"suspended-solids,2025-06-10,,EFF,1,dried,,", REASON_BLANK_VALUE, "'dried' has no value"},
        {"suspended-solids,2025-06-10,,EFF,1,dried,x,", REASON_NOT_A_NUMBER,
         "'x' is not a number for 'dried'"},
        {"suspended-solids,2025-06-10,,EFF,1,dried,1e308,", REASON_TOO_MANY_DIGITS,
         "'1e308' has too many digits"},
        {"suspended-solids,2025-06-10,,EFF,1,dried,-1,", REASON_NEGATIVE_VALUE, "'dried' is '-1'"},
        {"suspended-solids,2025-06-10,,EFF,1,dried,1,gram", REASON_UNKNOWN_UNIT,
         "unknown unit 'gram'"},
        {"suspended-solids,2025-06-10,,EFF,1,dried,1,mL", REASON_WRONG_UNIT,
         "'mL' is a unit of volume"},
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct sheets s = sheets_work(cases[i].line);
        assert_int_equal(s.outcomes, 1);
        const struct bench_outcome *o = &s.outcome[0];
        assert_int_equal(o->kind, BENCH_REFUSED);
        if (o->reason != cases[i].reason ||
            strncmp(o->explanation, cases[i].says, strlen(cases[i].says)) != 0)
            fail_msg("%s: %s: %s", cases[i].line, reason_words[o->reason], o->explanation);
        assert_int_equal(o->row.line, 2);
        assert_string_equal(o->row.cell[LONG_VALUE], s.raw[0].cell[RAW_VALUE]);
        sheets_free(&s);
    }
}

#define GOOD                                                                                       \
    "suspended-solids,2025-06-10,,EFF,1,filter,0.1,\nsuspended-solids,2025-06-10,,EFF,1,dried,"    \
    "0.11,\nsuspended-solids,2025-06-10,,EFF,1,volume,100,"

static void a_group_with_a_bad_row_has_no_result_and_says_which(void **state)
{
    (void)state;
    struct sheets s = sheets_work(GOOD "\nsuspended-solids,2025-06-10,,EFF,2,filtr,0.1,\n"
                                       "suspended-solids,2025-06-11,,EFF,1,filter,0.1,\n"
                                       "suspended-solids,2025-06-11,,EFF,1,dried,0.11,\n"
                                       "suspended-solids,2025-06-11,,EFF,1,volume,100,");
    assert_int_equal(s.outcomes, 3);
    assert_string_equal(s.outcome[0].explanation,
                        "line 5 cannot be used: 'suspended-solids' has no argument 'filtr'; the "
                        "nearest is 'filter'");
    assert_int_equal(s.outcome[0].reason, REASON_NO_RESULT);
    assert_string_equal(s.outcome[0].row.cell[LONG_POINT], "EFF");
    assert_int_equal(s.outcome[1].row.line, 5);
    assert_int_equal(s.outcome[2].kind, BENCH_READING); /* another day is not touched */
    sheets_free(&s);
}

static void a_value_given_twice_is_refused(void **state)
{
    (void)state;
    struct sheets s = sheets_work(GOOD "\nsuspended-solids,2025-06-10,,EFF,1,dried,0.12,");
    assert_string_equal(sheets_text(&s, "TSS"), "refused: 'dried' of run '1' is given twice, in "
                                                "lines 3 and 5; leave one out");
    sheets_free(&s);
    s = sheets_work(GOOD "\nsuspended-solids,2025-06-10,,EFF,,analyst,KB,\n"
                         "suspended-solids,2025-06-10,,EFF,,analyst,LM,");
    assert_string_equal(sheets_text(&s, "TSS"),
                        "refused: 'analyst' is given twice, in lines 5 and 6; leave one out");
    sheets_free(&s);
    s = sheets_work(GOOD "\nsuspended-solids,2025-06-10,,EFF,1,analyst,KB,\n"
                         "suspended-solids,2025-06-10,,EFF,2,analyst,KB,");
    assert_string_equal(sheets_text(&s, "TSS"), "100.0"); /* the same said twice */
    sheets_free(&s);
}

static void rows_come_together_by_sheet_date_time_and_point(void **state)
{
    (void)state;
    struct sheets s = sheets_work("suspended-solids,2025-06-10,08:00,EFF,1,filter,0.1,\n"
                                  "suspended-solids,2025-06-10,08:00,INF,1,filter,0.1,\n"
                                  "suspended-solids,2025-06-10,16:00,EFF,1,filter,0.1,\n"
                                  "suspended-solids,2025-06-10,08:00,EFF,1,dried,0.11,\n"
                                  "suspended-solids,2025-06-10,16:00,EFF,1,dried,0.12,\n"
                                  "suspended-solids,2025-06-10,8:00,INF,1,dried,0.13,\n"
                                  "suspended-solids,2025-06-10,,,blank,filter,0.1,\n"
                                  "suspended-solids,2025-06-10,,,blank,dried,0.1006,\n"
                                  "suspended-solids,2025-06-10,,,,analyst,KB,\n"
                                  "suspended-solids,2025-06-10,08:00,EFF,,analyst,LM,\n"
                                  "suspended-solids,2025-06-10,08:00,EFF,1,volume,100,\n"
                                  "suspended-solids,2025-06-10,16:00,EFF,1,volume,100,\n"
                                  "suspended-solids,2025-06-10,08:00,INF,1,volume,100,");
    static const struct {
        long line;
        const char *text, *analyst, *point;
        int minute;
    } expected[] = {{2, "E 100.0", "LM", "EFF", 480},
                    {3, "E 300.0", "KB", "INF", 480},
                    {4, "E 200.0", "KB", "EFF", 960}};
    assert_int_equal(s.outcomes, NELEM(expected));
    for (size_t i = 0; i < NELEM(expected); i++) {
        const struct reading *r = &s.outcome[i].reading;
        assert_int_equal(s.outcome[i].kind, BENCH_READING);
        assert_int_equal(r->line, expected[i].line);
        assert_int_equal(r->minute, expected[i].minute);
        assert_string_equal(r->text, expected[i].text); /* one blank serves them all */
        assert_string_equal(r->detail->analyst, expected[i].analyst);
        assert_string_equal(s.plant->points[r->point].id, expected[i].point);
    }
    sheets_free(&s);
}

static void blanks_without_a_sample_are_not_lost(void **state)
{
    (void)state;
    struct sheets s = sheets_work(GOOD "\nsuspended-solids,2025-06-11,,,blank,filter,0.1,\n"
                                       "suspended-solids,2025-06-11,,,blank,dried,0.1,");
    assert_int_equal(s.outcomes, 2);
    assert_string_equal(sheets_text(&s, "VSS"),
                        "refused: no sample of 'suspended-solids' on 2025-06-11 uses these rows "
                        "without a point; check the date");
    assert_int_equal(s.outcome[1].row.line, 5);
    sheets_free(&s);
}

static void another_parameter_may_be_named(void **state)
{
    (void)state;
    struct sheets s = sheets_work(GOOD "\nsuspended-solids,2025-06-10,,EFF,,parameter,MLSS,");
    assert_string_equal(sheets_text(&s, "MLSS"), "100");
    sheets_free(&s);
    s = sheets_work(GOOD "\nsuspended-solids,2025-06-10,,EFF,,parameter,TS,");
    assert_string_equal(sheets_text(&s, "TS"),
                        "refused: the result is in mg/L, but 'TS' is measured in %");
    assert_int_equal(s.outcome[0].reason, REASON_WRONG_UNIT);
    sheets_free(&s);
    s = sheets_work(GOOD "\nsuspended-solids,2025-06-10,,EFF,,parameter,TSSS,");
    assert_int_equal(s.outcome[0].reason, REASON_UNKNOWN_PARAMETER);
    assert_string_equal(s.outcome[0].explanation,
                        "the plant has no parameter 'TSSS'; the nearest is 'TSS'");
    sheets_free(&s);
}

/* 12.25 is a tie: half-even 12.2, half-up 12.3. */
static void a_result_is_rounded_once_by_the_plants_rule(void **state)
{
    (void)state;
    static const char rows[] = "suspended-solids,2025-06-10,,EFF,1,filter,0.1,\n"
                               "suspended-solids,2025-06-10,,EFF,1,dried,0.10490,\n"
                               "suspended-solids,2025-06-10,,EFF,1,volume,400,";
    struct sheets s = sheets_work(rows);
    assert_string_equal(sheets_text(&s, "TSS"), "12.2");
    sheets_free(&s);
    s = sheets_work_at(rows, "rounding,half-up", NULL);
    assert_string_equal(sheets_text(&s, "TSS"), "12.3");
    sheets_free(&s);
}

static void a_result_of_too_many_digits_is_refused(void **state)
{
    (void)state;
    struct sheets s = sheet_work("suspended-solids", "EFF",
                                 "1 filter 1; 1 dried 999999999999999999; 1 volume 0.001");
    assert_string_equal(sheets_text(&s, "TSS"), "refused: the result has more than 18 digits");
    sheets_free(&s);
    s = sheet_work("residual", "EFF",
                   "1 titrant_volume 1e-17; 1 sample_volume 1e17; - normality 1e-17");
    assert_string_equal(sheets_text(&s, "TRC"), "0.00");
    sheets_free(&s);
}

static void a_sheet_has_no_more_runs_than_a_bench(void **state)
{
    (void)state;
    for (int runs = 200; runs <= 201; runs++) {
        struct text t;
        text_init(&t, 1 << 20);
        for (int i = 0; i < runs; i++)
            text_print(&t, "%d filter 0.1; %d dried 0.11; %d volume 100; ", i, i, i);
        struct sheets s = sheet_work("suspended-solids", "EFF", t.at);
        assert_int_equal(s.outcomes, 1);
        assert_int_equal(s.outcome[0].kind, runs == 200 ? BENCH_READING : BENCH_REFUSED);
        sheets_free(&s);
        text_free(&t);
    }
}

static void a_group_is_refused_whole(void **state)
{
    (void)state;
    struct sheets s = sheet_work("settleability", "AB",
                                 "30 settled_volume 210; - dilution_factor 999999999999999999");
    assert_int_equal(s.outcomes, 1); /* no SV30D without its dilution */
    assert_string_equal(sheets_text(&s, "SV30D"), "refused: the result has more than 18 digits");
    sheets_free(&s);
}

static void a_result_is_told_in_the_parameters_unit(void **state)
{
    (void)state;
    struct sheets s = sheets_work_at(GOOD "\nsuspended-solids,2025-06-10,,EFF,,parameter,FINE,",
                                     NULL, "FINE,Fine solids,ug/L,0,mean,arithmetic,,,,,,");
    assert_string_equal(sheets_text(&s, "FINE"), "100000");
    assert_string_equal(unit_at(sheets_reading(&s, "FINE")->reading.unit)->name, "ug/L");
    sheets_free(&s);
}

static void no_rows_give_nothing(void **state)
{
    (void)state;
    struct sheets s = sheets_work("");
    assert_int_equal(s.outcomes, 0);
    sheets_free(&s);
}

/* ---- whatever comes ---- */

static uint32_t next_random(uint32_t *seed)
{
    *seed = *seed * 1664525u + 1013904223u;
    return *seed >> 16;
}

static const char *const hostile[] = {
    "0",    "-1",  "1",    "5",  "1e308", "1e-18", "999999999999999999",
    "nan",  "inf", "0x10", "",   "<5",    "100",   "0.0000001",
    "TNTC", "8.5", "3",    "30",
};

static const char *pick(uint32_t *seed, const char *const *words, size_t count)
{
    return words[next_random(seed) % count];
}

static const char *const tame[] = {"1", "3", "5", "8.5", "30", "100"};

/* Every line of the file is told of, or is a row without a point that serves a group that is. */
static void lines_are_not_lost(const struct sheets *s)
{
    for (size_t i = 0; i < s->raws; i++) {
        bool told = false;
        const char *const *c = s->raw[i].cell;
        for (size_t k = 0; k < s->outcomes; k++) {
            const struct bench_outcome *o = &s->outcome[k];
            long line = o->kind == BENCH_READING ? o->reading.line : o->row.line;
            const char *const *first = s->raw[line - 2].cell;
            told =
                told || line == s->raw[i].line ||
                (text_equal(o->sheet, c[RAW_SHEET]) && text_equal(first[RAW_DATE], c[RAW_DATE]) &&
                 (*c[RAW_POINT] == '\0' || text_equal(first[RAW_POINT], c[RAW_POINT])));
        }
        if (!told)
            fail_msg("line %ld is lost", s->raw[i].line);
    }
}

/* Rows of a sheet with runs, values and points drawn at random: hostile ones, or tame ones that
 * make whole runs. */
static void draw_rows(struct text *t, const struct bench_sheet *s, bool wild, uint32_t *seed)
{
    static const char *const runs[] = {"", "1", "2", "30", "blank", "seed", "standard"};
    static const char *const points[] = {"EFF", "AB", "EFF", ""};
    const char *point = s->pointless ? "" : points[next_random(seed) % 2];
    for (size_t run = 0; run < NELEM(runs); run++)
        for (size_t k = 0; k < s->arguments; k++) {
            const struct bench_argument *arg = &s->argument[k];
            bool asked = (arg->runs & 1u << bench_run_of(runs[run])) != 0;
            bool odd = next_random(seed) % 8 == 0;
            if (wild ? odd : !asked || (arg->once && run > 0) || text_equal(arg->name, "parameter"))
                continue;
            text_print(t, "%s%s,2025-06-1%u,,%s,%s,%s,%s,", t->length > 0 ? "\n" : "", s->name,
                       wild ? next_random(seed) % 2 : 0,
                       wild && odd ? pick(seed, points, NELEM(points)) : point,
                       arg->once ? "" : runs[run], arg->name,
                       wild ? pick(seed, hostile, NELEM(hostile)) : pick(seed, tame, NELEM(tame)));
        }
}

static void whatever_is_written_comes_out_whole(void **state)
{
    (void)state;
    size_t readings = 0;
    uint32_t seed = 7;
    for (size_t round = 0; round < 30 * bench_count(); round++) {
        struct text t;
        text_init(&t, 1 << 20);
        draw_rows(&t, bench_at(round % bench_count()), round % 3 == 0, &seed);
        struct sheets worked = sheets_work(t.at);
        lines_are_not_lost(&worked);
        for (size_t i = 0; i < worked.outcomes; i++)
            readings += worked.outcome[i].kind == BENCH_READING;
        sheets_free(&worked);
        text_free(&t);
    }
    assert_true(readings > bench_count());
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(every_sheet_is_complete),
        cmocka_unit_test(the_first_word_of_a_run_is_its_kind),
        cmocka_unit_test(a_typed_value_is_held_against_its_argument),
        cmocka_unit_test(a_row_that_cannot_be_used_is_told_by_itself),
        cmocka_unit_test(a_group_with_a_bad_row_has_no_result_and_says_which),
        cmocka_unit_test(a_value_given_twice_is_refused),
        cmocka_unit_test(rows_come_together_by_sheet_date_time_and_point),
        cmocka_unit_test(blanks_without_a_sample_are_not_lost),
        cmocka_unit_test(another_parameter_may_be_named),
        cmocka_unit_test(a_result_is_rounded_once_by_the_plants_rule),
        cmocka_unit_test(a_result_of_too_many_digits_is_refused),
        cmocka_unit_test(a_sheet_has_no_more_runs_than_a_bench),
        cmocka_unit_test(a_group_is_refused_whole),
        cmocka_unit_test(a_result_is_told_in_the_parameters_unit),
        cmocka_unit_test(no_rows_give_nothing),
        cmocka_unit_test(whatever_is_written_comes_out_whole),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
