/* rows: CSV as RFC 4180 has it, and what no standard covers: lost quotes, odd line ends, ceilings.
 * Tables are read through intake_table; a faulty row in the middle of a readings file through
 * intake_readings, where reading must go on behind it. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "support.h"

#include <stdlib.h>
#include <string.h>

/* A table as text: cells in brackets, rows with their line. */
static const char *table_of(struct scene *s, const char *bytes)
{
    struct intake_table t;
    struct fault f = {.set = false};
    text_clear(&s->said);
    if (intake_table(s->arena, scene_file(s, "table.csv", bytes), &t, &f) != OK) {
        text_add(&s->said, f.text + strlen(s->folder) + 1);
        return s->said.at;
    }
    for (size_t c = 0; c < t.columns; c++)
        text_print(&s->said, "[%s]", t.header[c]);
    for (size_t i = 0; i < t.rows; i++) {
        text_print(&s->said, " %ld:", t.line[i]);
        for (size_t c = 0; c < t.columns; c++)
            text_print(&s->said, "[%s]", t.cell[i][c]);
    }
    return s->said.at;
}

static const struct {
    const char *bytes, *reads;
} tables[] = {
    /* The examples of RFC 4180, section 2: its numbers. */
    {"aaa,bbb,ccc\r\nzzz,yyy,xxx\r\n", "[aaa][bbb][ccc] 2:[zzz][yyy][xxx]"}, /* 1 */
    {"aaa,bbb,ccc\r\nzzz,yyy,xxx", "[aaa][bbb][ccc] 2:[zzz][yyy][xxx]"},     /* 2 */
    {"field_name,field_name2,field_name3\r\naaa,bbb,ccc\r\nzzz,yyy,xxx\r\n",
     "[field_name][field_name2][field_name3] 2:[aaa][bbb][ccc] 3:[zzz][yyy][xxx]"},        /* 3 */
    {"\"aaa\",\"bbb\",\"ccc\"\r\nzzz,yyy,xxx", "[aaa][bbb][ccc] 2:[zzz][yyy][xxx]"},       /* 5 */
    {"\"aaa\",\"b\r\nbb\",\"ccc\"\r\nzzz,yyy,xxx", "[aaa][b\nbb][ccc] 3:[zzz][yyy][xxx]"}, /* 6 */
    {"\"aaa\",\"b\"\"bb\",\"ccc\"", "[aaa][b\"bb][ccc]"},                                  /* 7 */
    /* Ours: no published source. */
    {"a;b\n1;2\n", "[a][b] 2:[1][2]"},
    {"a\tb\n1\t2\n", "[a][b] 2:[1][2]"},
    {"a\tb\tc\n\t\tx\n\t\t\n", "[a][b][c] 2:[][][x]"},
    {"a;b, c\n1,5;2,5\n3,5;4\n", "[a][b, c] 2:[1,5][2,5] 3:[3,5][4]"},
    {"a,b\r1,2\r3,4\r", "[a][b] 2:[1][2] 3:[3][4]"},
    {"a,b\r\r\n1,2\r\r\n", "[a][b] 2:[1][2]"},
    {"\n \n\na,b\n\n,,\n1,2\n", "[a][b] 7:[1][2]"},
    {"\xef\xbb\xbf\"a\",b\n1,2\n", "[a][b] 2:[1][2]"},
    {"a,b\n 1 ,\"2 \"\n\xc2\xa0x\xc2\xa0,y\n", "[a][b] 2:[1][2] 3:[x][y]"},
    {"a,b,,\n1,2,,\n1,2\n", "[a][b] 2:[1][2] 3:[1][2]"},
    {"a,b\n'=1+1,'-x\n'plain,''=1\n", "[a][b] 2:[=1+1][-x] 3:['plain]['=1]"},
    {"M\xb5,caf\xe9 \x80\n1,2\n", "[Mµ][café €] 2:[1][2]"},
    {"a,b\n1,2,3\n",
     "table.csv:2: the row has 3 cells, the header 2; give the row as many cells as the header"},
    {"a,b\n1\n",
     "table.csv:2: the row has 1 cells, the header 2; give the row as many cells as the header"},
    {"a,b\n1,6\" main\n", "table.csv:2: a quote is not closed, or stands inside a cell that is not "
                          "quoted; close the quotes, or double those inside a cell"},
    {"a,b\n1,\x81\n", "table.csv:2: the row has bytes that are no text; save the file as UTF-8 "
                      "without control bytes"},
    {"\n\n", "table.csv: the file holds only blank lines; export it again"},
};

static void tables_read_as_listed(void **state)
{
    for (size_t i = 0; i < NELEM(tables); i++)
        assert_said(table_of(*state, tables[i].bytes), tables[i].reads, tables[i].bytes);
}

#define HEAD          "date,point,parameter,value,unit,note\n"
#define GOOD(n)       "2025-03-0" n ",EFF,TSS," n ",mg/L,\n"
#define TOLD(line, n) line " 2025-03-0" n " EFF TSS plain " n " mg/L\n"
#define BAD_QUOTES                                                                                 \
    "bad-quotes: a quote is not closed, or stands inside a cell that is not quoted | "
#define BAD_TEXT "bad-text: the row has bytes that are no text | "

static const struct {
    const char *text, *said;
} faulty[] = {
    {HEAD GOOD("1") "2025-03-02,EFF,TSS,2,mg/L,6\" main\n" GOOD("3"),
     TOLD("2", "1") "3 " BAD_QUOTES "2025-03-02,EFF,TSS,2,mg/L,6\" main\n" TOLD("4", "3")},
    /* A quote that never closes costs its own line, not those behind it. */
    {HEAD GOOD("1") "2025-03-02,EFF,TSS,2,mg/L,\"6 inch\n" GOOD("3") GOOD("4"),
     TOLD("2", "1") "3 " BAD_QUOTES "2025-03-02,EFF,TSS,2,mg/L,\"6 inch\n" TOLD("4", "3")
         TOLD("5", "4")},
    /* Nor does one that a later quote seems to close. */
    {HEAD "2025-03-01,EFF,TSS,1,mg/L,\"6 inch\n" GOOD(
         "2") "2025-03-03,EFF,TSS,3,mg/L,\"well, well\"\n" GOOD("4"),
     "2 " BAD_QUOTES "2025-03-01,EFF,TSS,1,mg/L,\"6 inch\n" TOLD("3", "2") TOLD("4", "3")
         TOLD("5", "4")},
    /* Two of them, the second among lines that are read again. */
    {HEAD "2025-03-01,EFF,TSS,1,mg/L,\"a\n" GOOD("2") "2025-03-03,EFF,TSS,3,mg/L,x\"\"\n" GOOD("4"),
     "2 " BAD_QUOTES "2025-03-01,EFF,TSS,1,mg/L,\"a\n" TOLD(
         "3", "2") "4 " BAD_QUOTES "2025-03-03,EFF,TSS,3,mg/L,x\"\"\n" TOLD("5", "4")},
    /* A cell may hold a line end. */
    {HEAD "2025-03-01,EFF,TSS,1,mg/L,\"two\nlines\"\n" GOOD("2"), TOLD("2", "1") TOLD("4", "2")},
    {HEAD GOOD("1") "2025-03-02,EFF,TSS,2,mg/L,a\x07z\n" GOOD("3"),
     TOLD("2", "1") "3 " BAD_TEXT "2025-03-02,EFF,TSS,2,mg/L,a\\x07z\n" TOLD("4", "3")},
    {HEAD GOOD("1") "2025-03-02,EFF,TSS,2,mg/L,a\rz\n" GOOD("3"),
     TOLD("2", "1") "3 " BAD_TEXT "2025-03-02,EFF,TSS,2,mg/L,a\\x0Dz\n" TOLD("4", "3")},
    /* Marked as UTF-8, so a byte that is none is a slip, not another encoding. */
    {"\xef\xbb\xbf" HEAD GOOD("1") "2025-03-02,EFF,TSS,2,mg/L,\xb5g\n" GOOD("3"),
     TOLD("2", "1") "3 " BAD_TEXT "2025-03-02,EFF,TSS,2,mg/L,\\xB5g\n" TOLD("4", "3")},
    {HEAD GOOD("1") "2025-03-02,EFF,TSS,2\n" GOOD("3"),
     TOLD("2", "1") "3 wrong-columns: the row has 4 cells, the header 6 | "
                    "2025-03-02,EFF,TSS,2\n" TOLD("4", "3")},
    {HEAD GOOD("1") "2025-03-02,EFF,TSS,2,mg/L,,x\n2025-03-03,EFF,TSS,3,mg/L,,,\n",
     TOLD("2", "1") "3 wrong-columns: the row has 7 cells, the header 6 | "
                    "2025-03-02,EFF,TSS,2,mg/L,,x\n" TOLD("4", "3")},
};

static void a_faulty_row_is_set_aside_alone(void **state)
{
    for (size_t i = 0; i < NELEM(faulty); i++)
        assert_said(scene_read(*state, faulty[i].text), faulty[i].said, faulty[i].text);
}

static char *repeated(struct scene *s, const char *before, char c, size_t count, const char *after)
{
    size_t head = strlen(before);
    char *text = arena_alloc(s->arena, head + count + strlen(after) + 1);
    memcpy(text, before, head);
    memset(text + head, c, count);
    memcpy(text + head + count, after, strlen(after));
    return text;
}

static void a_cell_of_64_kB_is_read_and_a_longer_one_set_aside(void **state)
{
    struct scene *s = *state;
    const char *row = HEAD "2025-03-01,EFF,TSS,1,mg/L,";
    scene_read(s, repeated(s, row, 'x', 65536, "\n" GOOD("2")));
    assert_string_equal(s->said.at, TOLD("2", "1") TOLD("3", "2"));
    scene_read(s, repeated(s, row, 'x', 65537, "\n" GOOD("2")));
    assert_non_null(strstr(s->said.at, "2 too-long: a cell is longer than 64 kB | 2025-03-01"));
    assert_int_equal(s->readings, 1);
    /* A quote left open stops at a megabyte, and the lines behind it are read again. */
    struct text many;
    text_init(&many, 4 << 20);
    text_add(&many, HEAD "2025-03-01,EFF,TSS,1,mg/L,\"open\n");
    for (int i = 0; i < 60000; i++)
        text_add(&many, GOOD("2"));
    assert_true(many.length > 1 << 20);
    scene_read(s, many.at);
    text_free(&many);
    assert_int_equal(s->asides, 1);
    assert_int_equal(s->readings, 60000);
}

static void a_line_longer_than_a_megabyte_is_no_csv(void **state)
{
    struct scene *s = *state;
    const char *told = "readings.csv:2: the line is longer than 1 MB; see whether it is CSV at all";
    scene_read(s, repeated(s, HEAD, 'x', (1 << 20) + 1, "\n"));
    assert_string_equal(s->said.at, told);
    scene_read(s, repeated(s, HEAD, 'x', 100 << 20, ""));
    assert_string_equal(s->said.at, told);
}

static void more_than_2000_columns_are_refused(void **state)
{
    struct scene *s = *state;
    assert_said(scene_read(s, repeated(s, "date", ',', 2000, "x\n2025-03-01\n")),
                "readings.csv:1: more than 2000 columns; split the file", "2001 columns");
}

/* Rows written by the rules of RFC 4180 come back as they were, whatever is in them. Seeded. */
static void any_text_comes_back_as_it_was_written(void **state)
{
    struct scene *s = *state;
    static const char *const bits[] = {",", "\"", "\n", "a", "é", ";", "'", "=", "b", "\"\"", "1"};
    uint32_t seed = 20250301;
    struct text file, expected;
    text_init(&file, 1 << 20);
    text_init(&expected, 1 << 20);
    text_add(&file, "a,b,c\n");
    text_add(&expected, "[a][b][c]");
    long line = 2;
    for (int row = 0; row < 500; row++) {
        text_print(&expected, " %ld:", line);
        for (int c = 0; c < 3; c++) {
            struct text cell;
            text_init(&cell, 1000);
            text_add_char(&cell, (char)('p' + c));
            for (int n = 0; n < 6; n++) {
                seed = seed * 1664525U + 1013904223U;
                text_add(&cell, bits[(seed >> 16) % NELEM(bits)]);
            }
            text_add_char(&cell, '.');
            for (const char *p = cell.at; *p != '\0'; p++)
                line += *p == '\n';
            text_add(&file, c == 0 ? "" : ",");
            csv_cell(&file, cell.at, true);
            text_print(&expected, "[%s]", cell.at);
            text_free(&cell);
        }
        text_add_char(&file, '\n');
        line++;
    }
    assert_said(table_of(s, file.at), expected.at, "500 rows");
    text_free(&file);
    text_free(&expected);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(tables_read_as_listed),
        cmocka_unit_test(a_faulty_row_is_set_aside_alone),
        cmocka_unit_test(a_cell_of_64_kB_is_read_and_a_longer_one_set_aside),
        cmocka_unit_test(a_line_longer_than_a_megabyte_is_no_csv),
        cmocka_unit_test(more_than_2000_columns_are_refused),
        cmocka_unit_test(any_text_comes_back_as_it_was_written),
    };
    return cmocka_run_group_tests(tests, scene_setup, scene_teardown);
}
