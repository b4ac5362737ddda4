/* layout: headers and column maps: what each column is taken for, and the line a person reads when
 * it cannot be told. The layouts are the project's own; no published source. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "support.h"

#include <string.h>

#define MAP     "column,point,parameter,unit,sample,skip\n"
#define TO_NAME "; correct it, or name the column in a column map (--map)"

static const struct {
    const char *text, *map, *said;
} cases[] = {
    /* long: any order, any case, optional columns by name */
    {"Value,UNIT,Parameter,Point,Date\n1,mg/L,TSS,EFF,2025-03-04\n", NULL,
     "2 2025-03-04 EFF TSS plain 1 mg/L\n"},
    {"date,point,parameter,value\n2025-03-04,EFF,TSS,1\n", NULL,
     "readings.csv:1: the column 'unit' is missing; a long file has date, point, parameter, value "
     "and unit"},
    {"date,poin,parameter,value,unit\n", NULL,
     "readings.csv:1:2: no column 'poin'; the nearest is 'point'; correct the heading, or take the "
     "column out"},
    {"date,point,parameter,value,unit,value\n", NULL,
     "readings.csv:1:6: the column 'value' stands twice; take one of them out"},
    {"date,point,,parameter,value,unit\n", NULL,
     "readings.csv:1:3: the column has no heading; name it, or take it out"},
    {"date,point,parameter,value,unit\n2025-03-04,EFF,TSS,1,mg/L\n", MAP "x,EFF,TSS,,,\n",
     "readings.csv:1: a long file takes no column map; leave the column map out"},
    {"\"date,point\n", NULL,
     "readings.csv:1: a quote is not closed, or stands inside a cell that is not quoted; close the "
     "quotes, or double those inside a cell"},
    /* wide: POINT PARAMETER [unit]; the first column is the date, whatever it is called */
    {"Tag,EFF TSS [mg/L],EFF FLOW\n2025-03-04,1,2.4\n", NULL,
     "2:2 2025-03-04 EFF TSS plain 1 mg/L\n2:3 2025-03-04 EFF FLOW plain 2.4 MGD\n"},
    {"date,EFF  TSS  [ mg/L ],\n2025-03-04,1,\n", NULL, "2:2 2025-03-04 EFF TSS plain 1 mg/L\n"},
    {"date,EFF\xc2\xa0TSS\n2025-03-04,1\n", NULL, "2:2 2025-03-04 EFF TSS plain 1 mg/L\n"},
    {"date,Remarks\n", NULL,
     "readings.csv:1:2: the heading 'Remarks' is not POINT PARAMETER [unit]" TO_NAME},
    {"date,EFF TSS mg/L\n", NULL,
     "readings.csv:1:2: the heading 'EFF TSS mg/L' is not POINT PARAMETER [unit]" TO_NAME},
    {"date,EFE TSS\n", NULL,
     "readings.csv:1:2: no point 'EFE'; the nearest is 'EFF'; correct it, or add the point to "
     "points.csv"},
    {"date,EFF TSM\n", NULL,
     "readings.csv:1:2: no parameter 'TSM'; the nearest is 'TSS'; correct it, or add the parameter "
     "to parameters.csv"},
    {"date,EFF TSS [mg/l]\n", NULL,
     "readings.csv:1:2: no unit 'mg/l'; the nearest is 'mg/L'; use a unit spelling of "
     "weirbook-files(5)"},
    {"date,EFF TSS [lb]\n", NULL,
     "readings.csv:1:2: 'lb' is a unit of mass, TSS is measured in mg/L (concentration); use a "
     "unit of the parameter's kind"},
    {"date,EFF TSS,EFF TSS\n", NULL,
     "readings.csv:1:3: the heading 'EFF TSS' stands twice; rename one of them, or skip both in a "
     "column map"},
    {"date,EFF TSS,EFF TSS [ug/L]\n", NULL,
     "readings.csv:1:3: 'EFF TSS' and 'EFF TSS [ug/L]' are both EFF TSS; give one of them a sample "
     "in a column map, or skip it"},
    {"date,,EFF TSS\n", NULL,
     "readings.csv:1:2: the column has no heading; name it, or take it out"},
    {"date\n2025-03-04\n", NULL,
     "readings.csv:1: the header has one column alone, 'date'; if its headings stand lower, or "
     "another sign parts its cells, state header_line or delimiter in a dialect file"},
    /* maps */
    {"Datum;Ablauf AFS in mg/l;Ablauf AFS Tropfen;Rest;EFF PH\n04.03.2025;1;2;x;7,1\n",
     MAP "Ablauf AFS in mg/l,EFF,TSS,mg/L,composite,\nAblauf AFS Tropfen,EFF,TSS,,grab,\n"
         "Rest,,,,,yes\n",
     "2:2 2025-03-04 EFF TSS plain 1 mg/L composite\n2:3 2025-03-04 EFF TSS plain 2 mg/L grab\n"
     "2:5 2025-03-04 EFF PH plain 7.1 pH\n"},
    /* A heading that comes twice, skipped; saved by a spreadsheet with semicolons. */
    {"Datum;Rest;Rest;TSS\xc2\xa0out\n04.03.2025;x;y;1\n",
     "column;point;parameter;unit;sample;skip\nRest;;;;;yes\nTSS out;EFF;TSS;;;\n",
     "2:4 2025-03-04 EFF TSS plain 1 mg/L\n"},
    {"date,TSS out\n2025-03-04,1\n", "skip,parameter,column,point\n,TSS,TSS out,EFF\n",
     "2:2 2025-03-04 EFF TSS plain 1 mg/L\n"},
    {"date,TSS out\n", MAP "TSS uot,EFF,TSS,,,\n",
     "readings.csv:1:2: the heading 'TSS out' is not POINT PARAMETER [unit]; the nearest is 'TSS "
     "uot'" TO_NAME},
    {"date,TSS out\n", MAP "TSS out,EFF,TSS,,,\nTSS in,INF,TSS,,,\n",
     "map.csv:3:1: readings.csv has no column 'TSS in'; write the heading as the file has it"},
    {"date,TSS out,pH of out\n",
     MAP "TSS out,EFF,TSS,,,\npH of out,EFF,PH,,,\npH off out,EFF,DO,,,"
         "\n",
     "map.csv:4:1: readings.csv has no column 'pH off out'; the nearest is 'pH of out'; write the "
     "heading as the file has it"},
    {"date,TSS out\n", MAP "date,,,,,yes\nTSS out,EFF,TSS,,,\n",
     "map.csv:2:1: 'date' is the first column of readings.csv, which holds the date; leave it out "
     "of the map"},
    {"date,x,y\n", MAP "x,EFF,TSS,,,\ny,EFF,TSS,,,\n",
     "readings.csv:1:3: 'x' and 'y' are both EFF TSS; give one of them a sample in a column map, "
     "or skip it"},
    {"date,x\n", MAP "x,EFF,TSS,,,\nx,EFF,PH,,,\n",
     "map.csv:3:1: 'x' stands twice in the map; leave one of them out"},
    {"date,x\n", MAP "x,EFE,TSS,,,\n",
     "map.csv:2:2: no point 'EFE'; the nearest is 'EFF'; correct it, or add the point to "
     "points.csv"},
    {"date,x\n", MAP "x,EFF,TSM,,,\n",
     "map.csv:2:3: no parameter 'TSM'; the nearest is 'TSS'; correct it, or add the parameter to "
     "parameters.csv"},
    {"date,x\n", MAP "x,EFF,TSS,mg/l,,\n",
     "map.csv:2:4: no unit 'mg/l'; the nearest is 'mg/L'; use a unit spelling of "
     "weirbook-files(5)"},
    {"date,x\n", MAP "x,EFF,TSS,kg,,\n",
     "map.csv:2:4: 'kg' is a unit of mass, TSS is measured in mg/L (concentration); use a unit of "
     "the parameter's kind"},
    {"date,x\n", MAP "x,EFF,TSS,,,no\n", "map.csv:2:6: no skip 'no'; write yes"},
    {"date,x\n", MAP ",EFF,TSS,,,\n",
     "map.csv:2:1: the column is not named; write the heading as the file has it"},
    {"date,x\n", "column,pont\n",
     "map.csv:1:2: no column 'pont'; the nearest is 'point'; correct the heading"},
    {"date,x\n", "point,parameter\n", "map.csv:1: the column 'column' is missing; add it"},
};

/* The folder of the scene stands in some messages; its name changes from run to run. */
static const char *plain(struct scene *s, const char *said)
{
    struct text *t = &s->said;
    struct text out;
    const char *prefix = arena_print(s->arena, "%s/", s->folder);
    size_t length = strlen(prefix);
    text_init(&out, 1 << 16);
    for (const char *p = said; *p != '\0'; p++) {
        while (strncmp(p, prefix, length) == 0)
            p += length;
        text_add_char(&out, *p);
    }
    text_clear(t);
    text_add(t, out.at);
    text_free(&out);
    return t->at;
}

static void headers_and_maps_read_as_listed(void **state)
{
    struct scene *s = *state;
    for (size_t i = 0; i < NELEM(cases); i++)
        assert_said(plain(s, scene_read_with(s, cases[i].text, cases[i].map, NULL)), cases[i].said,
                    cases[i].text);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(headers_and_maps_read_as_listed),
    };
    return cmocka_run_group_tests(tests, scene_setup, scene_teardown);
}
