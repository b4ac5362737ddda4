/* raw: raw values of bench sheets: every dialect a spreadsheet writes, and what is no such file,
 * with the line a person reads. No published source: the columns are the program's own. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "support.h"

#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

#define HEAD "sheet,date,time,point,run,argument,value,unit\n"
#define ROW  "suspended-solids,2025-03-04,08:00,EFF,1,dried,1.2345,g\n"
#define TOLD "suspended-solids|2025-03-04|08:00|EFF|1|dried|1.2345|g\n"

/* What became of a file: a line for each raw value, with its own line before it, or the fault with
 * the folder's name taken off. Every value stands for itself or nothing does. */
static const char *read_path(struct scene *s, const char *path)
{
    struct raw_value *value = NULL;
    struct fault f = {.set = false};
    size_t count = 99, folder = strlen(s->folder);
    text_clear(&s->said);
    if (intake_raw(s->arena, path, &value, &count, &s->summary, &f) != OK) {
        assert_true(f.set);
        assert_null(strchr(f.text, '\n'));
        assert_null(value);
        assert_int_equal(count, 0);
        text_add(&s->said, strncmp(f.text, s->folder, folder) == 0 ? f.text + folder + 1 : f.text);
        return s->said.at;
    }
    assert_int_equal(s->summary.rows, count);
    for (size_t i = 0; i < count; i++) {
        assert_string_equal(value[i].file, path);
        text_print(&s->said, "%ld ", value[i].line);
        for (size_t c = 0; c < RAW_COLUMNS; c++)
            text_print(&s->said, "%s%s", c == 0 ? "" : "|", value[i].cell[c]);
        text_add_char(&s->said, '\n');
    }
    return s->said.at;
}

static const char *read_bytes(struct scene *s, const char *bytes, size_t length)
{
    return read_path(s, scene_bytes(s, "raw.csv", bytes, length));
}

/* ---- what is read ---- */

static const struct {
    const char *text, *said, *dialect;
} fine[] = {
    {HEAD ROW, "2 " TOLD, "raw values, commas, UTF-8"},
    {HEAD "suspended-solids,2025-03-04,08:00,EFF,1,dried,1.2345,g", "2 " TOLD,
     "raw values, commas, UTF-8"},
    {"\xef\xbb\xbf" HEAD ROW, "2 " TOLD, "raw values, commas, UTF-8"},
    {"sheet;date;time;point;run;argument;value;unit\r\n"
     "suspended-solids;2025-03-04;08:00;EFF;1;dried;1,2345;g\r\n",
     "2 suspended-solids|2025-03-04|08:00|EFF|1|dried|1,2345|g\n", "raw values, semicolons, UTF-8"},
    {"sheet\tdate\ttime\tpoint\trun\targument\tvalue\tunit\n"
     "suspended-solids\t2025-03-04\t08:00\tEFF\t1\tdried\t1.2345\tg\n",
     "2 " TOLD, "raw values, tabs, UTF-8"},
    /* Lines that end in CR alone. */
    {"sheet,date,time,point,run,argument,value,unit\r"
     "suspended-solids,2025-03-04,08:00,EFF,1,dried,1.2345,g\r",
     "2 " TOLD, "raw values, commas, UTF-8"},
    /* Any order of columns, capitals, blanks round a cell, blank lines, blank columns behind. */
    {"\n\nUnit,Value,ARGUMENT, run ,point,time,date,sheet,,\n\n"
     " g , 1.2345 ,dried,1,EFF,08:00,2025-03-04,suspended-solids,,\n\n \n,,,,,,,,,\n"
     "mg,3,dried,2,EFF,08:00,2025-03-04,suspended-solids,,\n",
     "5 " TOLD "9 suspended-solids|2025-03-04|08:00|EFF|2|dried|3|mg\n",
     "raw values, commas, UTF-8"},
    /* Cells are text: nothing is made of them, neither a number nor a date. */
    {HEAD "Nonsense,31/12/24,noon,,blank,x,007.50,\nbod,,,,,,<2,",
     "2 Nonsense|31/12/24|noon||blank|x|007.50|\n3 bod||||||<2|\n", NULL},
    /* Quotes, also over the end of a line; the guard of a spreadsheet comes off. */
    {HEAD "\"suspended-solids\",2025-03-04,,EFF,\"a, \"\"b\"\"\nc\",dried,'=1+1,g\n" ROW,
     "2 suspended-solids|2025-03-04||EFF|a, \"b\"\nc|dried|=1+1|g\n4 " TOLD, NULL},
    {HEAD "titration,2025-03-04,,EFF,\xc2\xb5,dried,2,\xc2\xb5g\n",
     "2 titration|2025-03-04||EFF|\xc2\xb5|dried|2|\xc2\xb5g\n", "raw values, commas, UTF-8"},
    {HEAD "titration,2025-03-04,,EFF,\xb5,dried,2,g\n",
     "2 titration|2025-03-04||EFF|\xc2\xb5|dried|2|g\n", "raw values, commas, Windows-1252"},
};

static void raw_values_are_read_as_they_were_written(void **state)
{
    struct scene *s = *state;
    for (size_t i = 0; i < NELEM(fine); i++) {
        assert_said(read_bytes(s, fine[i].text, strlen(fine[i].text)), fine[i].said, fine[i].text);
        if (fine[i].dialect != NULL)
            assert_string_equal(s->summary.dialect_told, fine[i].dialect);
    }
}

/* ---- what is refused ---- */

static const struct {
    const char *bytes;
    size_t length;
    const char *said;
} refused[] = {
#define FILE_OF(bytes, said)                                                                       \
    {                                                                                              \
        bytes, sizeof(bytes) - 1, "raw.csv" said                                                   \
    }
    FILE_OF("", ": the file is empty; export it again"),
    FILE_OF("\n\r\n  \n", ": the file holds only blank lines; export it again"),
    FILE_OF(HEAD, ": the file has no raw values below its header; write a row for each raw value"),
    FILE_OF(HEAD ",,,,,,,\n\n",
            ": the file has no raw values below its header; write a row for each raw value"),
    FILE_OF("\x7f"
            "ELF\x02\x01\x01\0\0\0\0",
            ": the file has NUL bytes: it is no text; export it again as CSV in UTF-8"),
    FILE_OF("\x01\x02\x03\x7f\n\x1a\n",
            ":1: the row has bytes that are no text; save the file as UTF-8 without control bytes"),
    FILE_OF("\x89PNG\r\n\x1a\n\x01\x02\x03", /* a first line that could be text */
            ":1:1: no column '\xe2\x80\xb0PNG'; correct the heading, or take the column out"),
    FILE_OF(HEAD "suspended-solids,2025-03-04,,EFF,1,dried,1\0,g\n",
            ": the file has NUL bytes: it is no text; export it again as CSV in UTF-8"),
    FILE_OF(HEAD ROW "suspended-solids,2025-03-04,,EFF,1,dried,1\x01,g\n" ROW,
            ":3: the row has bytes that are no text; save the file as UTF-8 without control bytes"),
    FILE_OF("\xff\xfe"
            "s\0h\0",
            ": the file is UTF-16; save it as UTF-8"),
    FILE_OF("PK\x03\x04"
            "xl/workbook.xml",
            ": the file is a workbook, not CSV; save each sheet as CSV"),
    /* Columns. */
    FILE_OF("sheet,date,time,point,run,argumnet,value,unit\n" ROW,
            ":1:6: no column 'argumnet'; the nearest is 'argument'; correct the heading, or take "
            "the column out"),
    FILE_OF("sheet,date,time,point,run,argument,value,unit,colour\n" ROW,
            ":1:9: no column 'colour'; correct the heading, or take the column out"),
    FILE_OF("\nsheet,date,time,point,run,argument,value\n" ROW,
            ":2: the column 'unit' is missing; add it; its cells may be blank where nothing is "
            "known"),
    FILE_OF("sheet,date,time,point,run,argument,value,unit,Value\n" ROW,
            ":1:9: the column 'Value' stands twice; take one of them out"),
    FILE_OF("sheet,date,,time,point,run,argument,value,unit\n" ROW,
            ":1:3: the column has no heading; name it, or take it out"),
    FILE_OF("date,point,parameter,value,unit\n2025-03-04,EFF,TSS,1,mg/L\n",
            ":1:3: no column 'parameter'; correct the heading, or take the column out"),
    FILE_OF("\"sheet,date\n" ROW,
            ":1: a quote is not closed, or stands inside a cell that is not quoted; close the "
            "quotes, or double those inside a cell"),
    /* Rows: the first that is wrong stops the file, good rows before and behind it or not. */
    FILE_OF(HEAD ROW "\nsuspended-solids,2025-03-04,,EFF,1,dried,1.2345\n" ROW,
            ":4: the row has 7 cells, the header 8; give the row as many cells as the header"),
    FILE_OF(HEAD ROW "suspended-solids,2025-03-04,,EFF,1,dried,1,2345,g\n",
            ":3: the row has 9 cells, the header 8; give the row as many cells as the header"),
    FILE_OF(HEAD ROW "suspended-solids,2025-03-04,,EFF,1,\"dried,1.2345,g\n" ROW,
            ":3: a quote is not closed, or stands inside a cell that is not quoted; close the "
            "quotes, or double those inside a cell"),
    FILE_OF(HEAD "suspended-solids,2025-03-04,,EFF,6\" filter,dried,1.2345,g\n",
            ":2: a quote is not closed, or stands inside a cell that is not quoted; close the "
            "quotes, or double those inside a cell"),
};

static void what_is_no_file_of_raw_values_says_so(void **state)
{
    struct scene *s = *state;
    for (size_t i = 0; i < NELEM(refused); i++)
        assert_said(read_bytes(s, refused[i].bytes, refused[i].length), refused[i].said,
                    refused[i].bytes);
}

static void what_is_not_there_or_no_file_says_so(void **state)
{
    struct scene *s = *state;
    assert_string_equal(read_path(s, scene_path(s, "none.csv")),
                        "none.csv: there is no such file; correct the name");
    assert_int_equal(mkdir(scene_path(s, "raw-folder.csv"), 0700), 0);
    assert_string_equal(read_path(s, scene_path(s, "raw-folder.csv")),
                        "raw-folder.csv: it is a folder, not a file; name the files in it");
    assert_int_equal(mkfifo(scene_path(s, "raw-pipe.csv"), 0600), 0);
    assert_string_equal(read_path(s, scene_path(s, "raw-pipe.csv")),
                        "raw-pipe.csv: it is not an ordinary file; save it as a file first");
}

/* ---- size ---- */

/* A row whose last cell has so many bytes. */
static const char *read_long_cell(struct scene *s, size_t bytes)
{
    struct text t;
    text_init(&t, (size_t)4 << 20);
    text_add(&t, HEAD ROW "suspended-solids,2025-03-04,,EFF,1,dried,1,");
    for (size_t i = 0; i < bytes; i++)
        text_add_char(&t, 'x');
    text_add(&t, "\n" ROW);
    const char *said = read_bytes(s, t.at, t.length);
    text_free(&t);
    return said;
}

static void long_cells_and_lines_have_their_ends(void **state)
{
    struct scene *s = *state;
    read_long_cell(s, 65536);
    assert_int_equal(s->summary.rows, 3);
    assert_string_equal(read_long_cell(s, 65537),
                        "raw.csv:3: a cell is longer than 64 kB; shorten the cell");
    assert_string_equal(read_long_cell(s, (size_t)1 << 20),
                        "raw.csv:3: the line is longer than 1 MB; see whether it is CSV at all");
}

static void a_file_of_more_than_64_megabytes_is_refused(void **state)
{
    struct scene *s = *state;
    struct text t;
    text_init(&t, (size_t)80 << 20);
    text_add(&t, HEAD);
    while (t.length <= (size_t)64 << 20)
        text_add(&t, ROW);
    const char *path = scene_bytes(s, "large.csv", t.at, t.length);
    text_free(&t);
    assert_string_equal(read_path(s, path), "large.csv: the file is larger than 64 MB; split it");
    assert_int_equal(unlink(path), 0);
}

static void a_header_of_many_columns_is_refused(void **state)
{
    struct scene *s = *state;
    struct text t;
    text_init(&t, (size_t)1 << 20);
    for (int i = 0; i < 3000; i++)
        text_add(&t, "x,");
    text_add(&t, "\n" ROW);
    assert_string_equal(read_bytes(s, t.at, t.length),
                        "raw.csv:1: more than 2000 columns; see whether it is a file of raw "
                        "values");
    text_free(&t);
}

static void many_rows_come_whole_and_in_order(void **state)
{
    enum { ROWS = 20000 };
    struct scene *s = *state;
    struct raw_value *value = NULL;
    struct fault f = {.set = false};
    struct text t;
    size_t count = 0;
    text_init(&t, (size_t)4 << 20);
    text_add(&t, HEAD);
    for (int i = 0; i < ROWS; i++)
        text_print(&t, "bod,2025-03-04,,EFF,%d,initial,8.%02d,\n", i, i % 100);
    const char *path = scene_bytes(s, "rows.csv", t.at, t.length);
    text_free(&t);
    if (intake_raw(s->arena, path, &value, &count, &s->summary, &f) != OK)
        fail_msg("%s", f.text);
    assert_int_equal(count, ROWS);
    assert_ptr_equal(value[ROWS - 1].cell[RAW_SHEET], value[0].cell[RAW_SHEET]); /* kept once */
    for (int i = 0; i < ROWS; i++) {
        assert_int_equal(value[i].line, i + 2);
        assert_string_equal(value[i].cell[RAW_SHEET], "bod");
        assert_string_equal(value[i].cell[RAW_RUN], arena_print(s->arena, "%d", i));
        assert_string_equal(value[i].cell[RAW_VALUE], arena_print(s->arena, "8.%02d", i % 100));
    }
}

/* ---- identity ---- */

static void the_summary_has_the_file_s_size_and_digest(void **state)
{
    static const char *const texts[] = {HEAD ROW, "\xef\xbb\xbf" HEAD "\r\n" ROW ROW "\n\n"};
    struct scene *s = *state;
    struct fault f = {.set = false};
    for (size_t i = 0; i < NELEM(texts); i++) {
        uint8_t digest[DIGEST_BYTES];
        int64_t bytes = 0;
        const char *path = scene_file(s, "raw.csv", texts[i]);
        read_path(s, path);
        assert_int_equal(intake_identify(s->arena, path, &bytes, digest, &f), OK);
        assert_int_equal(s->summary.bytes, bytes);
        assert_int_equal(s->summary.bytes, strlen(texts[i]));
        assert_memory_equal(s->summary.digest, digest, DIGEST_BYTES);
        assert_int_equal(s->summary.rows, i + 1);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(raw_values_are_read_as_they_were_written),
        cmocka_unit_test(what_is_no_file_of_raw_values_says_so),
        cmocka_unit_test(what_is_not_there_or_no_file_says_so),
        cmocka_unit_test(long_cells_and_lines_have_their_ends),
        cmocka_unit_test(a_file_of_more_than_64_megabytes_is_refused),
        cmocka_unit_test(a_header_of_many_columns_is_refused),
        cmocka_unit_test(many_rows_come_whole_and_in_order),
        cmocka_unit_test(the_summary_has_the_file_s_size_and_digest),
    };
    return cmocka_run_group_tests(tests, scene_setup, scene_teardown);
}
