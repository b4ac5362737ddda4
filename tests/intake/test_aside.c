/* aside: each reason to set a row aside that a file alone can give, with the line a person reads,
 * in a long and in a wide file; and how units, meters and limits of the method are taken. Wording
 * and rules are the project's own; no published source. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "support.h"

#include <string.h>

#define HEAD "date,time,point,parameter,value,unit,sample,mdl,rl,note\n"

/* Each row stands alone as line 2. Its answer begins behind "2 ". */
static const struct {
    const char *row, *said;
} rows[] = {
    {"2025-03-04,08:00,EFF,TSS,9.6,mg/L,composite,,,", "2025-03-04 08:00 EFF TSS plain 9.6 mg/L "
                                                       "composite"},
    {"2025-03-04,,EFF,TSS,9600,ug/L,,,,", "2025-03-04 EFF TSS plain 9600 ug/L"},
    {"2025-03-04,,EFF,TSS,'-,mg/L,,,,", "not-a-number: cannot read '-' as a number"},
    {"2025-03-04,,EFF,TSS,1O.2,mg/L,,,,", "not-a-number: cannot read '1O.2' as a number"},
    {"2025-03-04,,EFF,TSS,=2+1,mg/L,,,,", "not-a-number: cannot read '=2+1' as a number"},
    {"2025-03-04,,EFF,TSS,12345678901234567890123456789012345678901234567890123456789012345,mg/L,,"
     ",,",
     "too-many-digits: '123456789012345678901234567890123456789012345678901234567890...' has more "
     "than 18 digits"},
    {"2025-03-04,,EFF,TSS,,mg/L,,,,", "blank-value: the value is blank"},
    {"2025-03-04,,EFF,TSS,ND,mg/L,,,,",
     "no-limit-for-nd: 'ND' has no limit to stand for it, and TSS has none of its own"},
    {"2025-03-04,,EFF,TSS,TNTC,mg/L,,2,,",
     "no-limit-for-nd: 'TNTC' has no limit to stand for it, and TSS has none of its own"},
    {"2025-03-04,,EFF,TSS,B,mg/L,,,,",
     "code-without-number: 'B' says below a limit, but not below which"},
    {"2025-03-04,,EFF,TSS,-3.1,mg/L,,,,", "negative-value: '-3.1' is below zero"},
    {"2025-02-30,,EFF,TSS,1,mg/L,,,,", "bad-date: there is no day '2025-02-30'"},
    {"last week,,EFF,TSS,1,mg/L,,,,", "bad-date: cannot read 'last week' as a date"},
    {",,EFF,TSS,1,mg/L,,,,", "bad-date: the date is blank"},
    {"2025-03-04,25:10,EFF,TSS,1,mg/L,,,,", "bad-time: cannot read '25:10' as a time"},
    {"2025-03-04,noon,EFF,TSS,1,mg/L,,,,", "bad-time: cannot read 'noon' as a time"},
    {"2025-06-30,,EFF,TSS,1,mg/L,,,,", "2025-06-30 EFF TSS plain 1 mg/L"},
    {"2025-07-01,,EFF,TSS,1,mg/L,,,,", "future-date: '2025-07-01' is after today, 2025-06-30"},
    {"2024-01-01,,EFF,TSS,1,mg/L,,,,", "2024-01-01 EFF TSS plain 1 mg/L"},
    {"2023-12-31,,EFF,TSS,1,mg/L,,,,",
     "before-plant: '2023-12-31' is before the plant's first day, 2024-01-01"},
    {"2025-03-04,,EFE,TSS,1,mg/L,,,,", "unknown-point: no point 'EFE'; the nearest is 'EFF'"},
    {"2025-03-04,,eff,TSS,1,mg/L,,,,", "unknown-point: no point 'eff'; the nearest is 'EFF'"},
    {"2025-03-04,,somewhere,TSS,1,mg/L,,,,", "unknown-point: no point 'somewhere'"},
    {"2025-03-04,,,TSS,1,mg/L,,,,", "unknown-point: the point is blank"},
    {"2025-03-04,,EFF,TSM,1,mg/L,,,,", "unknown-parameter: no parameter 'TSM'; the nearest is "
                                       "'TSS'"},
    {"2025-03-04,,EFF,,1,mg/L,,,,", "unknown-parameter: the parameter is blank"},
    {"2025-03-04,,EFF,TSS,1,mg/l,,,,", "unknown-unit: no unit 'mg/l'; the nearest is 'mg/L'"},
    {"2025-03-04,,EFF,TSS,1,lb,,,,",
     "wrong-unit: 'lb' is a unit of mass, TSS is measured in mg/L (concentration)"},
    {"2025-03-04,,EFF,TSS,1,,,,,", "2025-03-04 EFF TSS plain 1 mg/L"}, /* the parameter's own */
    {"2025-03-04,,EFF,TSS,1,mg/L,,x,,", "not-a-number: cannot read the mdl 'x' as a number"},
    {"2025-03-04,,EFF,TSS,1,mg/L,,,<2,", "not-a-number: cannot read the rl '<2' as a number"},
    {"2025-03-04,,EFF,TSS,1,mg/L,,-1,,", "negative-value: the mdl '-1' is below zero"},
    {"2025-03-04,,EFF,TSS,1,mg/L,,,1234567890123456789,",
     "too-many-digits: the rl '1234567890123456789' has more than 18 digits"},
    {"2025-03-04,,EFF,TEMP,-3.1,degC,,,,", "2025-03-04 EFF TEMP plain -3.1 degC"},
    /* Limits of the method: the row's, else the parameter's, in the unit of the row. */
    {"2025-03-04,,EFF,CU,ND,ug/L,,0.2,1,", "2025-03-04 EFF CU less 0.2 ug/L"},
    {"2025-03-04,,EFF,CU,ND,ug/L,,,1,", "2025-03-04 EFF CU less 1 ug/L"},
    {"2025-03-04,,EFF,CU,ND,ug/L,,,,", "2025-03-04 EFF CU less 0.5 ug/L"},
    {"2025-03-04,,EFF,CU,ND,mg/L,,,,", "2025-03-04 EFF CU less 0.0005 mg/L"},
    {"2025-03-04,,EFF,PB,ND,ug/L,,,,", "2025-03-04 EFF PB less 2.0 ug/L"},
    {"2025-03-04,,EFF,PB,DNQ,ug/L,,,,", "2025-03-04 EFF PB dnq-bare 2.0 ug/L"},
    {"2025-03-04,,EFF,ECOLI,TNTC,MPN/100mL,,,2420,", "2025-03-04 EFF ECOLI greater 2420 MPN/100mL"},
    {"2025-03-04,,EFF,TSS,code 9,mg/L,,,,", "2025-03-04 EFF TSS code 9 mg/L"},
    /* A totalizer counts volumes while it is in force; the flow itself stands before and after. */
    {"2025-03-04,,INF,FLOW,650621,kgal,,,,", "2025-03-04 INF FLOW plain 650621 kgal"},
    {"2025-03-04,,INF,FLOW,2.4,MGD,,,,",
     "wrong-unit: 'MGD' is a unit of flow, the totalizer of INF FLOW counts a volume"},
    {"2025-04-01,,INF,FLOW,2.4,MGD,,,,", "2025-04-01 INF FLOW plain 2.4 MGD"},
    {"2025-04-01,,INF,FLOW,650621,kgal,,,,",
     "wrong-unit: 'kgal' is a unit of volume, FLOW is measured in MGD (flow)"},
    {"2025-03-04,,EFF,FLOW,650621,kgal,,,,",
     "wrong-unit: 'kgal' is a unit of volume, FLOW is measured in MGD (flow)"},
    /* What a file holds is never let loose on a terminal. */
    {"2025-03-04,,EFF,TSS,\xe2\x80\xae"
     "1,mg/L,,,,",
     "not-a-number: cannot read '\\xE2\\x80\\xAE1' as a number"},
};

static void each_row_of_a_long_file_ends_as_listed(void **state)
{
    struct scene *s = *state;
    for (size_t i = 0; i < NELEM(rows); i++) {
        const char *text = arena_print(s->arena, "%s%s\n", HEAD, rows[i].row);
        assert_said(scene_read(s, text), arena_print(s->arena, "2 %s\n", rows[i].said), text);
    }
}

/* The words of the reasons that the tables of this folder reach, so that none is forgotten.
 * "contradicts" is the book's; bad-quotes, bad-text, too-long and wrong-columns are in test_rows.c;
 * the three behind "contradicts" come of bench sheets alone, never of a readings file. */
static void every_reason_of_a_single_row_has_a_case(void **state)
{
    (void)state;
    for (int reason = 0; reason < REASON_COUNT; reason++) {
        size_t cases = 0;
        if (reason == REASON_CONTRADICTS || reason == REASON_BAD_QUOTES ||
            reason == REASON_BAD_TEXT || reason == REASON_TOO_LONG ||
            reason == REASON_WRONG_COLUMNS || reason == REASON_UNKNOWN_SHEET ||
            reason == REASON_UNKNOWN_ARGUMENT || reason == REASON_NO_RESULT)
            continue;
        for (size_t i = 0; i < NELEM(rows); i++)
            cases += strncmp(rows[i].said, reason_words[reason], strlen(reason_words[reason])) == 0;
        if (cases == 0)
            fail_msg("no case for %s", reason_words[reason]);
    }
}

static const struct {
    const char *text, *said;
} wide[] = {
    /* Blank cells are no readings, filled ones are one each. */
    {"date,time,EFF TSS [mg/L],EFF PH,INF FLOW [kgal]\n"
     "2025-03-04,07:30,<2,,650621\n"
     "2025-03-05,,,,\n"
     "2025-03-06,25:00,1,7.1,\n"
     "2025-02-30,,1,7.1,\n"
     ",,1,,\n"
     "2025-03-07,,about 3,7.1,ND\n"
     "2025-04-01,,,,650621\n"
     "2025-03-08,,1,7.1\n",
     "2:3 2025-03-04 07:30 EFF TSS less 2 mg/L\n2:5 2025-03-04 07:30 INF FLOW plain 650621 kgal\n"
     "4:3 bad-time: cannot read '25:00' as a time\n4:4 bad-time: cannot read '25:00' as a time\n"
     "5:3 bad-date: there is no day '2025-02-30'\n5:4 bad-date: there is no day '2025-02-30'\n"
     "6:3 bad-date: the date is blank\n"
     "7:3 not-a-number: cannot read 'about 3' as a number\n7:4 2025-03-07 EFF PH plain 7.1 pH\n"
     "7:5 no-limit-for-nd: 'ND' has no limit to stand for it, and FLOW has none of its own\n"
     "8:5 wrong-unit: 'kgal' is a unit of volume, FLOW is measured in MGD (flow)\n"
     "9 wrong-columns: the row has 4 cells, the header 5 | 2025-03-08,,1,7.1\n"},
    {"date,EFF TSS [mg/L]\n\"2025-03-04,1\n2025-03-05,2\n",
     "2 bad-quotes: a quote is not closed, or stands inside a cell that is not quoted | "
     "\"2025-03-04,1\n3:2 2025-03-05 EFF TSS plain 2 mg/L\n"},
};

static void each_cell_of_a_wide_file_ends_as_listed(void **state)
{
    for (size_t i = 0; i < NELEM(wide); i++)
        assert_said(scene_read(*state, wide[i].text), wide[i].said, wide[i].text);
}

/* ---- what the sink is given beside the reading ---- */

struct kept {
    struct text said;
};

static enum status keep_reading(void *context, const struct reading *r, const struct row_text *row,
                                struct fault *f)
{
    struct kept *k = context;
    (void)f;
    char mdl[24] = "";
    char rl[24] = "";
    if (r->has_mdl)
        decimal_write(r->mdl, mdl);
    if (r->has_rl)
        decimal_write(r->rl, rl);
    text_print(&k->said, "%s|%s|%s|%s|%s|%s|%s|%s|%s|%ld", r->text, r->detail->method,
               r->detail->analyst, r->detail->collected_by, r->detail->analyzed, r->detail->note,
               mdl, rl, row->cell[LONG_VALUE], r->line);
    return OK;
}

static enum status keep_aside(void *context, const struct row_text *row, enum reason reason,
                              const char *explanation, struct fault *f)
{
    struct kept *k = context;
    (void)reason;
    (void)explanation;
    (void)f;
    for (size_t i = 0; i < LONG_COLUMNS; i++)
        text_print(&k->said, "%s|", row->cell[i]);
    text_print(&k->said, "%s|%ld:%d", row->raw, row->line, row->column);
    return OK;
}

static const char *keep(struct scene *s, struct kept *k, const char *text)
{
    const struct intake_options options = {.today = s->today};
    const struct intake_sink sink = {.context = k, .reading = keep_reading, .aside = keep_aside};
    struct fault f = {.set = false};
    text_clear(&k->said);
    if (intake_readings(s->arena, scene_file(s, "readings.csv", text), s->plant, &options, &sink,
                        &s->summary, &f) != OK)
        fail_msg("%s", f.text);
    return k->said.at;
}

static void a_reading_brings_its_details_and_a_row_set_aside_its_cells(void **state)
{
    struct scene *s = *state;
    struct kept k;
    text_init(&k.said, 1 << 16);
    assert_string_equal(
        keep(s, &k,
             "note,rl,mdl,analyzed,collected_by,analyst,method,value,unit,parameter,point,date\n"
             "'=odd,1.0,0.25,2025-03-05 9 am,O1,A1,SM 2540 D,< 2.50,mg/L,TSS,EFF,2025-03-04\n"),
        "< 2.50|SM 2540 D|A1|O1|2025-03-05 9 am|=odd|0.25|1.0|< 2.50|2");
    /* As written, in the order of a long file: ready to be corrected. */
    assert_string_equal(keep(s, &k,
                             "note,value,unit,parameter,point,date,time\nx,1O,mg/L,TSS,EFF,"
                             "14/3/2025,7:30\n"),
                        "14/3/2025|7:30|EFF|TSS|1O|mg/L||||||||x||2:0");
    /* A cell of a wide file is put into the same words. */
    assert_string_equal(keep(s, &k, "Datum;EFF TSS [mg/L]\n14.03.2025 7:30;1,5x\n"),
                        "2025-03-14|07:30|EFF|TSS|1,5x|mg/L||||||||||2:2");
    assert_string_equal(keep(s, &k, "date,point,parameter,value,unit\n2025-03-04,\"EFF\n"),
                        "||||||||||||||2025-03-04,\"EFF|2:0");
    text_free(&k.said);
}

static void rows_set_aside_load_again_once_corrected(void **state)
{
    const char *text =
        "date,time,point,parameter,value,unit,sample,method,analyst,collected_by,analyzed,mdl,rl,"
        "note,reason,explanation,file,line,column\n"
        "2025-03-04,,EFF,TSS,10.2,mg/L,,,,,,,,,not-a-number,cannot read it,march.csv,7,\n";
    assert_said(scene_read(*state, text), "2 2025-03-04 EFF TSS plain 10.2 mg/L\n", text);
}

static enum status refuse(void *context, const struct reading *r, const struct row_text *row,
                          struct fault *f)
{
    (void)context;
    (void)r;
    return fault_at(f, &(struct place){row->file, row->line, 0}, NULL, "the sink is full");
}

static void a_fault_of_the_sink_stops_the_reading(void **state)
{
    struct scene *s = *state;
    const struct intake_options options = {.today = s->today};
    const struct intake_sink sink = {.reading = refuse, .aside = keep_aside};
    struct fault f = {.set = false};
    const char *path = scene_file(s, "readings.csv", HEAD "2025-03-04,,EFF,TSS,1,mg/L,,,,\n");
    assert_int_equal(intake_readings(s->arena, path, s->plant, &options, &sink, &s->summary, &f),
                     FAULT);
    assert_string_equal(f.text, arena_print(s->arena, "%s:2: the sink is full", path));
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(each_row_of_a_long_file_ends_as_listed),
        cmocka_unit_test(every_reason_of_a_single_row_has_a_case),
        cmocka_unit_test(each_cell_of_a_wide_file_ends_as_listed),
        cmocka_unit_test(a_reading_brings_its_details_and_a_row_set_aside_its_cells),
        cmocka_unit_test(rows_set_aside_load_again_once_corrected),
        cmocka_unit_test(a_fault_of_the_sink_stops_the_reading),
    };
    return cmocka_run_group_tests(tests, scene_setup, scene_teardown);
}
