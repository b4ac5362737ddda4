/* Cells of CSV: RFC 4180, section 2, and the guard against formulas (OWASP, CSV injection). */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "base/base.h"

#include <string.h>

#include "base/poison.h"

static void a_cell_is_quoted_where_rfc_4180_asks(void **state)
{
    (void)state;
    static const struct {
        const char *text, *cell;
    } cases[] = {
        {"", ""},
        {"plain text", "plain text"},
        {"a,b", "\"a,b\""},       /* section 2, rule 6 */
        {"a\r\nb", "\"a\r\nb\""}, /* rule 6 */
        {"a\nb", "\"a\nb\""},
        {"b\"bb", "\"b\"\"bb\""}, /* rule 7 */
        {"=1+1", "=1+1"},         /* no guard asked for */
        {"a;b", "a;b"},
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct text t;
        text_init(&t, 100);
        csv_cell(&t, cases[i].text, false);
        assert_string_equal(t.at, cases[i].cell);
        text_free(&t);
    }
}

static void a_guarded_cell_is_no_formula_and_comes_back(void **state)
{
    (void)state;
    static const struct {
        const char *text, *cell;
    } cases[] = {
        {"=1+1", "'=1+1"},
        {"=HYPERLINK(\"x\",\"y\")", "\"'=HYPERLINK(\"\"x\"\",\"\"y\"\")\""},
        {"+cmd", "'+cmd"},
        {"-cmd", "'-cmd"},
        {"@SUM(A1)", "'@SUM(A1)"},
        {"\tx", "'\tx"},
        {"\rx", "\"'\rx\""},
        {"-1.5", "-1.5"}, /* a number */
        {"+5", "+5"},
        {"-1e-30", "-1e-30"}, /* a number, though longer than we keep */
        {"-", "'-"},
        {"-1.5 mg/L", "'-1.5 mg/L"},
        {"plain", "plain"},
        {"a=b", "a=b"},
        {"", ""},
        {"'quoted'", "'quoted'"},
        {"'=x", "''=x"}, /* its own apostrophe is kept */
        {"''=x", "'''=x"},
        {"'-1.5", "''-1.5"},
        {"'", "'"},
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct text t;
        text_init(&t, 100);
        csv_cell(&t, cases[i].text, true);
        assert_string_equal(t.at, cases[i].cell);
        text_clear(&t);
        /* What a reader of CSV sees is the cell without its quotes. */
        const char *seen = cases[i].cell;
        for (const char *p = seen[0] == '"' ? seen + 1 : seen; *p != '\0'; p++) {
            if (*p == '"' && (p[1] == '"' || p[1] == '\0'))
                p++;
            if (*p == '\0')
                break;
            text_add_char(&t, *p);
        }
        assert_string_equal(csv_unguard(t.at), cases[i].text);
        text_free(&t);
    }
}

static void only_a_guard_is_taken_off(void **state)
{
    (void)state;
    assert_string_equal(csv_unguard("'=x"), "=x");
    assert_string_equal(csv_unguard("''=x"), "'=x");
    assert_string_equal(csv_unguard("'x"), "'x");
    assert_string_equal(csv_unguard("'"), "'");
    assert_string_equal(csv_unguard(""), "");
    assert_string_equal(csv_unguard("=x"), "=x");
    assert_string_equal(csv_unguard("x'=y"), "x'=y");
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(a_cell_is_quoted_where_rfc_4180_asks),
        cmocka_unit_test(a_guarded_cell_is_no_formula_and_comes_back),
        cmocka_unit_test(only_a_guard_is_taken_off),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
