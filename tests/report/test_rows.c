/* rows: tables for programs. CSV is RFC 4180, JSON RFC 8259; the guard is OWASP's against CSV
 * injection (CWE-1236). */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <stdlib.h>
#include <string.h>

#include "sample.h"

static const struct column columns[] = {
    {.key = "point", .title = "point"},       {.key = NULL, .title = "for people only"},
    {.key = "value", .title = "value, mg/L"}, {.key = "on", .title = "day"},
    {.key = "note", .title = "note"},
};

static void add(struct table *t, const char *point, const char *value, const char *day,
                const char *note)
{
    struct cell *c = table_row(t);
    c[0] = cell_text(point);
    c[1] = cell_text("not for programs");
    c[2] = cell_number(value);
    if (day != NULL)
        c[3] = cell_day(t->arena, sample_day(day));
    c[4] = cell_text(note);
}

static struct table *made(struct arena *a)
{
    struct table *t = table_new(a, "", columns, NELEM(columns));
    add(t, "EFF", "2.40", "2024-02-29", "a \"quoted\", comma");
    add(t, "=1+1", "-3", NULL, "-3");
    add(t, "", "", NULL, "two\nlines");
    add(t, "@x", "007", NULL, "+tail");
    return t;
}

static void csv_has_the_columns_with_keys_and_guards_formulas(void **state)
{
    (void)state;
    struct arena *a = arena_new();
    char *csv = written_csv(made(a));
    assert_string_equal(csv, "point,value,on,note\n"
                             "EFF,2.40,2024-02-29,\"a \"\"quoted\"\", comma\"\n"
                             "'=1+1,-3,,-3\n"
                             ",,,\"two\nlines\"\n"
                             "'@x,007,,'+tail\n");
    free(csv);
    arena_free(a);
}

static void json_keeps_numbers_as_written_and_empty_cells_null(void **state)
{
    (void)state;
    struct arena *a = arena_new();
    char *json = written_json(made(a));
    assert_string_equal(
        json,
        "[\n"
        "{\"point\":\"EFF\",\"value\":2.40,\"on\":\"2024-02-29\",\"note\":\"a \\\"quoted\\\", "
        "comma\"},\n"
        "{\"point\":\"=1+1\",\"value\":-3,\"on\":null,\"note\":\"-3\"},\n"
        "{\"point\":null,\"value\":null,\"on\":null,\"note\":\"two\\nlines\"},\n"
        /* 007 is no number in RFC 8259, section 6: it goes as text */
        "{\"point\":\"@x\",\"value\":\"007\",\"on\":null,\"note\":\"+tail\"}\n"
        "]\n");
    free(json);
    arena_free(a);
}

static void a_table_without_rows_is_still_a_table(void **state)
{
    (void)state;
    struct arena *a = arena_new();
    struct table *t = table_new(a, "", columns, NELEM(columns));
    char *csv = written_csv(t);
    char *json = written_json(t);
    assert_string_equal(csv, "point,value,on,note\n");
    assert_string_equal(json, "[]\n");
    free(csv);
    free(json);
    arena_free(a);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(csv_has_the_columns_with_keys_and_guards_formulas),
        cmocka_unit_test(json_keeps_numbers_as_written_and_empty_cells_null),
        cmocka_unit_test(a_table_without_rows_is_still_a_table),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
