/* Published answers: published.csv beside this file holds what books, examinations and standards
 * print, each with its source. `within` is half the last printed digit, wider where the source
 * column says why. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "process/cases.h"

static void published_answers_come_out(void **state)
{
    (void)state;
    struct arena *a = arena_new();
    struct case_file file;
    const char *path = case_path(a, "WEIRBOOK_SOURCE", ".", "tests/process/published.csv");
    assert_true(case_file_read(a, path, &file));
    assert_true(file.count >= 116);
    size_t passed = 0;
    for (size_t i = 0; i < file.count; i++) {
        const struct case_row *row = &file.rows[i];
        struct case_asked c = {.formula = case_cell(&file, row, "formula"),
                               .arguments = case_cell(&file, row, "given"),
                               .expected = case_cell(&file, row, "result"),
                               .within = case_cell(&file, row, "within"),
                               .unit = case_cell(&file, row, "unit"),
                               .source = case_cell(&file, row, "source"),
                               .where = arena_print(a, "published.csv:%ld", row->line)};
        passed += case_passes(&c);
    }
    print_message("%zu of %zu published answers came out\n", passed, file.count);
    assert_int_equal(passed, file.count);
    arena_free(a);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(published_answers_come_out),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
