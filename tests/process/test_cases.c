/* The full set of worked cases, where it stands beside the project. Without it the test is skipped
 * (exit 77); the published cases of test_published.c always run. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "process/cases.h"

static void every_worked_case_is_met(void **state)
{
    const struct case_file *file = *state;
    size_t passed = 0;
    for (size_t i = 0; i < file->count; i++) {
        const struct case_row *row = &file->rows[i];
        struct case_asked c = {.formula = case_cell(file, row, "formula"),
                               .arguments = case_cell(file, row, "arguments"),
                               .expected = case_cell(file, row, "expected"),
                               .within = case_cell(file, row, "tolerance"),
                               .unit = case_cell(file, row, "unit"),
                               .source = case_cell(file, row, "source"),
                               .where = case_cell(file, row, "case")};
        passed += case_passes(&c);
    }
    print_message("%zu of %zu worked cases passed\n", passed, file->count);
    assert_true(file->count > 400);
    assert_int_equal(passed, file->count);
}

int main(void)
{
    struct arena *a = arena_new();
    struct case_file file;
    const char *path =
        case_path(a, "WEIRBOOK_SHARED", "../shared", "domain/cases/formula-cases.csv");
    int rc = 77;
    if (case_file_read(a, path, &file)) {
        const struct CMUnitTest tests[] = {
            cmocka_unit_test_prestate(every_worked_case_is_met, &file),
        };
        rc = cmocka_run_group_tests(tests, NULL, NULL);
    } else {
        print_message("skipped: no worked cases beside the project\n");
    }
    arena_free(a);
    return rc;
}
