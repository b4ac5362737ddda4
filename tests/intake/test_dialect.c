/* dialect: dates, decimal marks and encodings: what a file settles by itself, what a person must
 * state, and what is refused with both readings shown. The rules are the project's own; no
 * published source but ISO 8601 for dates with the year in front. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "support.h"

#include <string.h>

#define LONG  "date,point,parameter,value,unit\n"
#define TIMED "date,time,point,parameter,value,unit\n"
#define SEMI  "date;point;parameter;value;unit\n"
#define FIELD "field,value\n"
#define ASK_ORDER                                                                                  \
    "put the lines 'field,value' and 'date_order,mdy' (or dmy) in a file and give it with "        \
    "--dialect"

static const struct {
    const char *text, *dialect, *said, *told; /* dialect NULL: none; told NULL: a fault */
} dates[] = {
    {LONG "2025-03-04,EFF,TSS,1,mg/L\n2025-3-5,EFF,TSS,1,mg/L\n2025/03/06,EFF,TSS,1,mg/L\n", NULL,
     "2 2025-03-04 EFF TSS plain 1 mg/L\n3 2025-03-05 EFF TSS plain 1 mg/L\n"
     "4 2025-03-06 EFF TSS plain 1 mg/L\n",
     "long, commas, decimal point, dates year-month-day, UTF-8"},
    /* Dots put the day first. */
    {LONG "04.03.2025,EFF,TSS,1,mg/L\n", NULL, "2 2025-03-04 EFF TSS plain 1 mg/L\n",
     "long, commas, decimal point, dates day.month.year, UTF-8"},
    {LONG "03.14.2025,EFF,TSS,1,mg/L\n", NULL, "2 bad-date: there is no day '03.14.2025'\n",
     "long, commas, decimal point, dates day.month.year, UTF-8"},
    /* One day above 12 in any row settles the whole column. */
    {LONG "3/4/2025,EFF,TSS,1,mg/L\n3/14/2025,EFF,TSS,1,mg/L\n", NULL,
     "2 2025-03-04 EFF TSS plain 1 mg/L\n3 2025-03-14 EFF TSS plain 1 mg/L\n",
     "long, commas, decimal point, dates month/day/year, UTF-8"},
    {LONG "3/4/2025,EFF,TSS,1,mg/L\n14/3/2025,EFF,TSS,1,mg/L\n", NULL,
     "2 2025-04-03 EFF TSS plain 1 mg/L\n3 2025-03-14 EFF TSS plain 1 mg/L\n",
     "long, commas, decimal point, dates day/month/year, UTF-8"},
    {LONG "04-03-2025,EFF,TSS,1,mg/L\n14-03-2025,EFF,TSS,1,mg/L\n", NULL,
     "2 2025-03-04 EFF TSS plain 1 mg/L\n3 2025-03-14 EFF TSS plain 1 mg/L\n",
     "long, commas, decimal point, dates day-month-year, UTF-8"},
    {LONG "2/2/2025,EFF,TSS,1,mg/L\n", NULL, "2 2025-02-02 EFF TSS plain 1 mg/L\n",
     "long, commas, decimal point, dates month/day/year, UTF-8"},
    {LONG "2025-03-01,EFF,TSS,1,mg/L\n03/04/2025,EFF,TSS,1,mg/L\n", NULL,
     "readings.csv:3:1: '03/04/2025' is 2025-03-04 or 2025-04-03, and no date of the file settles "
     "it; " ASK_ORDER,
     NULL},
    {LONG "03/04/2025,EFF,TSS,1,mg/L\n", FIELD "date_order,dmy\n",
     "2 2025-04-03 EFF TSS plain 1 mg/L\n",
     "long, commas, decimal point, dates day/month/year, UTF-8"},
    {LONG "03/04/2025,EFF,TSS,1,mg/L\n", FIELD "date_order,mdy\n",
     "2 2025-03-04 EFF TSS plain 1 mg/L\n",
     "long, commas, decimal point, dates month/day/year, UTF-8"},
    {LONG "25/12/2024,EFF,TSS,1,mg/L\n12/26/2024,EFF,TSS,1,mg/L\n", NULL,
     "readings.csv:2:1: '25/12/2024' has the day first, '12/26/2024' in line 3 the month; put the "
     "lines 'field,value' and 'date_order,dmy' (or mdy) in a file and give it with --dialect; "
     "dates of the other order are then set aside",
     NULL},
    {LONG "25/12/2024,EFF,TSS,1,mg/L\n12/26/2024,EFF,TSS,1,mg/L\n", FIELD "date_order,mdy\n",
     "2 bad-date: there is no day '25/12/2024'\n3 2024-12-26 EFF TSS plain 1 mg/L\n",
     "long, commas, decimal point, dates month/day/year, UTF-8"},
    /* Years of two digits only when the order is stated. */
    {LONG "13/3/25,EFF,TSS,1,mg/L\n", NULL,
     "2 bad-date: '13/3/25' has a short year; write four digits, or state date_order in a dialect "
     "file\n",
     "long, commas, decimal point, UTF-8"},
    {LONG "13/3/25,EFF,TSS,1,mg/L\n1/2/99,EFF,TSS,1,mg/L\n", FIELD "date_order,dmy\n",
     "2 2025-03-13 EFF TSS plain 1 mg/L\n"
     "3 before-plant: '1/2/99' is before the plant's first day, 2024-01-01\n",
     "long, commas, decimal point, UTF-8"},
    {LONG "25.03.13,EFF,TSS,1,mg/L\n", FIELD "date_order,ymd\n",
     "2 2025-03-13 EFF TSS plain 1 mg/L\n",
     "long, commas, decimal point, dates year.month.day, UTF-8"},
    /* A time may stand behind the date. */
    {TIMED "2025-03-04 07:30,,EFF,TSS,1,mg/L\n2025-03-04T7:30:00,7:30,EFF,TSS,1,mg/L\n"
           "3/14/2025 7:30 PM,,EFF,TSS,1,mg/L\n2025-03-04 07:30,08:00,EFF,TSS,1,mg/L\n"
           "2025-03-04,12:05 am,EFF,TSS,1,mg/L\n2025-03-04,13:05 PM,EFF,TSS,1,mg/L\n"
           "2025-03-04,24:00,EFF,TSS,1,mg/L\n2025-03-04 25:10,,EFF,TSS,1,mg/L\n",
     NULL,
     "2 2025-03-04 07:30 EFF TSS plain 1 mg/L\n3 2025-03-04 07:30 EFF TSS plain 1 mg/L\n"
     "4 2025-03-14 19:30 EFF TSS plain 1 mg/L\n"
     "5 bad-time: the time '08:00' is not the one behind the date\n"
     "6 2025-03-04 00:05 EFF TSS plain 1 mg/L\n7 bad-time: cannot read '13:05 PM' as a time\n"
     "8 2025-03-04 24:00 EFF TSS plain 1 mg/L\n9 bad-date: cannot read '2025-03-04 25:10' as a "
     "date\n",
     "long, commas, decimal point, dates year-month-day and month/day/year, UTF-8"},
};

static void check(struct scene *s, const char *text, const char *dialect, const char *said,
                  const char *told)
{
    assert_said(scene_read_with(s, text, NULL, dialect), said, text);
    if (told != NULL)
        assert_said(s->summary.dialect_told, told, text);
}

static void dates_are_read_as_listed(void **state)
{
    for (size_t i = 0; i < NELEM(dates); i++)
        check(*state, dates[i].text, dates[i].dialect, dates[i].said, dates[i].told);
}

#define ROW_SEMI(value)   "2025-03-04;EFF;TSS;" value ";mg/L\n"
#define SEMI_COMMA        "long, semicolons, decimal comma, dates year-month-day, UTF-8"
#define ISO               ", dates year-month-day, UTF-8"
#define SEMI_GROUPS       "long, semicolons, decimal comma, thousands point" ISO
#define SEMI_SPACES       "long, semicolons, decimal comma, thousands space" ISO
#define COMMA_GROUPS      "long, commas, decimal point, thousands comma" ISO
#define SEMI_POINT        "long, semicolons, decimal point, dates year-month-day, UTF-8"
#define COMMA_POINT       "long, commas, decimal point, dates year-month-day, UTF-8"
#define SAID(line, value) line " 2025-03-04 EFF TSS " value " mg/L\n"
#define ROW(value)        "2025-03-04,EFF,TSS," value ",mg/L\n"

static const struct {
    const char *text, *dialect, *said, *told;
} marks[] = {
    {SEMI ROW_SEMI("3,14") ROW_SEMI("<5,0") ROW_SEMI("12"), NULL,
     SAID("2", "plain 3.14") SAID("3", "less 5.0") SAID("4", "plain 12"), SEMI_COMMA},
    {SEMI ROW_SEMI("3.14") ROW_SEMI("12"), NULL, SAID("2", "plain 3.14") SAID("3", "plain 12"),
     SEMI_POINT},
    /* 28.209,00 is certain, and shows what the points of its column are. */
    {SEMI ROW_SEMI("28.209,00") ROW_SEMI("1.674") ROW_SEMI("2.064.100"), NULL,
     SAID("2", "plain 28209.00") SAID("3", "plain 1674") SAID("4", "plain 2064100"), SEMI_GROUPS},
    /* A decimal comma is certain here, what the point is is not. */
    {SEMI ROW_SEMI("1,5") ROW_SEMI("1.674"), NULL,
     SAID("2", "plain 1.5") "3 not-a-number: cannot read '1.674' as a number; if its mark parts "
                            "thousands, state "
                            "thousands in a dialect file\n",
     SEMI_COMMA},
    {SEMI ROW_SEMI("1,5") ROW_SEMI("1.674"), FIELD "thousands,point\n",
     SAID("2", "plain 1.5") SAID("3", "plain 1674"), SEMI_GROUPS},
    {SEMI ROW_SEMI("1,5") ROW_SEMI("2.5"), NULL,
     "readings.csv:2:4: '1,5' has a decimal comma, '2.5' in line 3 a decimal point; put the lines "
     "'field,value' and 'decimal,comma' (or point) in a file and give it with --dialect; numbers "
     "with the other mark are then set aside",
     NULL},
    {SEMI ROW_SEMI("1,5") ROW_SEMI("2.5"), FIELD "decimal,comma\n",
     SAID("2", "plain 1.5") "3 not-a-number: cannot read '2.5' as a number: the decimal mark of "
                            "the file is a comma\n",
     SEMI_COMMA},
    /* 1,234 alone may be either. */
    {SEMI ROW_SEMI("<1,234") ROW_SEMI("7"), NULL,
     "readings.csv:2:4: '<1,234' is 1.234 or 1234, and no number of the file settles it; put the "
     "lines 'field,value' and 'decimal,comma' (or 'thousands,comma') in a file and give it with "
     "--dialect",
     NULL},
    {LONG ROW("\"1,234\""), NULL,
     "readings.csv:2:4: '1,234' is 1.234 or 1234, and no number of the file settles it; put the "
     "lines 'field,value' and 'decimal,comma' (or 'thousands,comma') in a file and give it with "
     "--dialect",
     NULL},
    {LONG ROW("\"1,234\""), FIELD "decimal,comma\n", SAID("2", "plain 1.234"),
     "long, commas, decimal comma, dates year-month-day, UTF-8"},
    {LONG ROW("\"1,234\""), FIELD "thousands,comma\n", SAID("2", "plain 1234"), COMMA_GROUPS},
    {LONG ROW("\"1,234\"") ROW("\"2,345.6\""), NULL,
     SAID("2", "plain 1234") SAID("3", "plain 2345.6"), COMMA_GROUPS},
    {LONG ROW("\"1,234\"") ROW("2.5"), NULL,
     "2 not-a-number: cannot read '1,234' as a number; if its mark parts thousands, state "
     "thousands in a dialect file\n" SAID("3", "plain 2.5"),
     COMMA_POINT},
    {LONG ROW("\"2,5\"") ROW("2.5"), NULL,
     "2 not-a-number: cannot read '2,5' as a number: the decimal mark of the file is a "
     "point\n" SAID("3", "plain 2.5"),
     COMMA_POINT},
    {LONG ROW("\"2,5\"") ROW("7"), NULL, SAID("2", "plain 2.5") SAID("3", "plain 7"),
     "long, commas, decimal comma, dates year-month-day, UTF-8"},
    {LONG ROW("1.234") ROW("7"), NULL, SAID("2", "plain 1.234") SAID("3", "plain 7"), COMMA_POINT},
    /* Semicolons stand where commas are decimal: there 1.234 may be thousands. */
    {SEMI ROW_SEMI("1.234") ROW_SEMI("7"), NULL,
     "readings.csv:2:4: '1.234' is 1.234 or 1234, and no number of the file settles it; put the "
     "lines 'field,value' and 'decimal,point' (or 'thousands,point') in a file and give it with "
     "--dialect",
     NULL},
    {SEMI ROW_SEMI("0.234") ROW_SEMI("1.234"), NULL,
     SAID("2", "plain 0.234") SAID("3", "plain 1.234"), SEMI_POINT},
    {SEMI ROW_SEMI("1 234,5") ROW_SEMI("12\xc2\xa0"
                                       "345"),
     FIELD "thousands,space\ndecimal,comma\n", SAID("2", "plain 1234.5") SAID("3", "plain 12345"),
     SEMI_SPACES},
    {LONG ROW("\"12,34,567\""), FIELD "thousands,comma\n",
     "2 not-a-number: cannot read '12,34,567' as a number\n", COMMA_GROUPS},
};

static void decimal_marks_are_read_as_listed(void **state)
{
    for (size_t i = 0; i < NELEM(marks); i++)
        check(*state, marks[i].text, marks[i].dialect, marks[i].said, marks[i].told);
}

static void an_mdl_has_the_decimal_mark_of_its_file(void **state)
{
    check(*state, "date;point;parameter;value;unit;mdl;rl\n2025-03-04;EFF;TSS;ND;mg/L;0,25;1,0\n",
          NULL, SAID("2", "less 0.25"), SEMI_COMMA);
}

static void a_skipped_column_settles_nothing(void **state)
{
    const char *text = "Datum;TSS;Rest\n2025-03-04;1,5;2.5\n";
    assert_said(scene_read_with(*state, text,
                                "column,point,parameter,unit,sample,skip\n"
                                "TSS,EFF,TSS,mg/L,,\nRest,,,,,yes\n",
                                NULL),
                "2:2 2025-03-04 EFF TSS plain 1.5 mg/L\n", text);
}

static const struct {
    const char *text, *dialect, *said, *told;
} encodings[] = {
    {"Datum;EFF CU [ug/L];EFF TSS\n01.03.2025;1,5;\xb5\n", NULL,
     "2:2 2025-03-01 EFF CU plain 1.5 ug/L\n2:3 not-a-number: cannot read 'µ' as a number\n",
     "wide, semicolons, decimal comma, dates day.month.year, Windows-1252"},
    {"Datum;EFF CU [ug/L];EFF TSS\n01.03.2025;1,5;\xc2\xb5\n", NULL,
     "2:2 2025-03-01 EFF CU plain 1.5 ug/L\n2:3 not-a-number: cannot read 'µ' as a number\n",
     "wide, semicolons, decimal comma, dates day.month.year, UTF-8"},
    {"Datum;EFF CU [ug/L];EFF TSS\n01.03.2025;1,5;\xc2\xb5\n", FIELD "encoding,windows-1252\n",
     "2:2 2025-03-01 EFF CU plain 1.5 ug/L\n2:3 not-a-number: cannot read 'Âµ' as a number\n",
     "wide, semicolons, decimal comma, dates day.month.year, Windows-1252"},
    {LONG "2025-03-04,EFF,TSS,1,mg/L\n2025-03-05,EFF,TSS,\xb5,mg/L\n", FIELD "encoding,utf-8\n",
     "2 2025-03-04 EFF TSS plain 1 mg/L\n3 bad-text: the row has bytes that are no text | "
     "2025-03-05,EFF,TSS,\\xB5,mg/L\n",
     "long, commas, decimal point, dates year-month-day, UTF-8"},
    /* Lines above the header, and a footer. */
    {"Plant report\nprinted, 2025\n\nDate,EFF TSS\n2025-03-04,7\nAverage of all,7\nx,y,z\n",
     FIELD "header_line,4\nfooter,Average\n", "5:2 2025-03-04 EFF TSS plain 7 mg/L\n",
     "wide, commas, decimal point, dates year-month-day, UTF-8"},
    {"date|x,point\n", FIELD "delimiter,tab\nlayout,long\n",
     "readings.csv:1:1: no column 'date|x,point'; correct the heading, or take the column out",
     NULL},
    {"date,EFF TSS\n2025-03-04,7\n", FIELD "layout,long\n",
     "readings.csv:1:2: no column 'EFF TSS'; correct the heading, or take the column out", NULL},
};

static void encodings_headers_and_footers_are_read_as_listed(void **state)
{
    for (size_t i = 0; i < NELEM(encodings); i++)
        check(*state, encodings[i].text, encodings[i].dialect, encodings[i].said,
              encodings[i].told);
}

static const struct {
    const char *dialect, *said;
} wrong[] = {
    {FIELD "decimel,comma\n",
     "dialect.csv:2:1: no field 'decimel'; the nearest is 'decimal'; write one of layout, "
     "delimiter, decimal, date_order, encoding, thousands, header_line, footer"},
    {FIELD "decimal,coma\n",
     "dialect.csv:2:2: no value 'coma'; the nearest is 'comma'; write one of point, comma"},
    {FIELD "decimal,comma\ndecimal,point\n",
     "dialect.csv:3:1: the field 'decimal' stands twice; leave one of them out"},
    {FIELD "decimal,comma\nthousands,comma\n",
     "dialect.csv: 'decimal' and 'thousands' cannot be the same mark; correct one of them"},
    {FIELD "header_line,0\n", "dialect.csv:2:2: cannot read '0' as the number of a line; write the "
                              "number of the line that holds the headings"},
    {FIELD "header_line,9\n",
     "readings.csv: the file has no line 9; correct header_line in the dialect file"},
    {"field,vlue\n",
     "dialect.csv:1:2: no column 'vlue'; the nearest is 'value'; correct the heading"},
    {"field\n", "dialect.csv:1: the column 'value' is missing; add it"},
};

static void a_dialect_file_is_read_strictly(void **state)
{
    for (size_t i = 0; i < NELEM(wrong); i++)
        check(*state, LONG ROW("1"), wrong[i].dialect, wrong[i].said, NULL);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(dates_are_read_as_listed),
        cmocka_unit_test(decimal_marks_are_read_as_listed),
        cmocka_unit_test(an_mdl_has_the_decimal_mark_of_its_file),
        cmocka_unit_test(a_skipped_column_settles_nothing),
        cmocka_unit_test(encodings_headers_and_footers_are_read_as_listed),
        cmocka_unit_test(a_dialect_file_is_read_strictly),
    };
    return cmocka_run_group_tests(tests, scene_setup, scene_teardown);
}
