/* Faults: one line that says where, what and what to do. The form is the house's own. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "base/base.h"

#include <string.h>

#include "base/poison.h"

static const struct place cell = {"march.csv", 14, 3};

static void a_fault_says_where_what_and_what_to_do(void **state)
{
    (void)state;
    static const struct {
        struct place where;
        const char *todo, *expected;
    } cases[] = {
        {{"march.csv", 14, 3},
         "correct the cell or write ND",
         "march.csv:14:3: cannot read '1O.2' as a number; correct the cell or write ND"},
        {{"march.csv", 14, 3}, NULL, "march.csv:14:3: cannot read '1O.2' as a number"},
        {{"march.csv", 14, 0}, NULL, "march.csv:14: cannot read '1O.2' as a number"},
        {{"march.csv", 0, 0}, NULL, "march.csv: cannot read '1O.2' as a number"},
        {{"march.csv", 0, 3}, NULL, "march.csv: cannot read '1O.2' as a number"},
        {{NULL, 14, 3}, "try again", "cannot read '1O.2' as a number; try again"},
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct fault f = {0};
        assert_int_equal(fault_at(&f, &cases[i].where, cases[i].todo, "cannot read '%s' as a %s",
                                  "1O.2", "number"),
                         FAULT);
        assert_true(f.set);
        assert_int_equal(f.kind, FAULT_FAILED);
        assert_string_equal(f.text, cases[i].expected);
    }
}

static void a_fault_needs_no_place(void **state)
{
    (void)state;
    struct fault f = {0};
    assert_int_equal(fault_at(&f, NULL, NULL, "no book"), FAULT);
    assert_string_equal(f.text, "no book");
}

static void the_first_fault_wins(void **state)
{
    (void)state;
    struct fault f = {0};
    assert_int_equal(fault_at(&f, &cell, NULL, "first"), FAULT);
    assert_int_equal(fault_usage(&f, NULL, "second"), FAULT);
    assert_string_equal(f.text, "march.csv:14:3: first");
    assert_int_equal(f.kind, FAULT_FAILED);
    fault_clear(&f);
    assert_false(f.set);
    assert_int_equal(fault_usage(&f, "see 'weirbook help'", "no command '%s'", "permti"), FAULT);
    assert_string_equal(f.text, "no command 'permti'; see 'weirbook help'");
    assert_int_equal(f.kind, FAULT_USAGE);
}

static void a_file_cannot_draw_on_the_terminal(void **state)
{
    (void)state;
    struct fault f = {0};
    struct place where = {"a\x1b[2Jb.csv", 1, 1};
    assert_int_equal(fault_at(&f, &where, "line\none", "cannot read '%s'", "x\ny\xe2\x80\x8f"),
                     FAULT);
    assert_string_equal(f.text,
                        "a\\x1B[2Jb.csv:1:1: cannot read 'x\\x0Ay\\xE2\\x80\\x8F'; line\\x0Aone");
}

static void a_long_fault_keeps_its_advice(void **state)
{
    (void)state;
    static char value[5000];
    /* a two-byte letter, so that the cut may fall inside one */
    for (size_t start = 0; start < 2; start++) {
        memset(value, 'x', start);
        for (size_t i = start; i + 2 < sizeof value; i += 2)
            memcpy(value + i, "\xc3\xa9", 3);
        struct fault f = {0};
        assert_int_equal(fault_at(&f, &cell, "shorten it", "cannot read '%s'", value), FAULT);
        size_t length = strlen(f.text);
        assert_true(length >= sizeof f.text - 2 && length < sizeof f.text);
        assert_memory_equal(f.text, "march.csv:14:3: cannot read '", 29);
        assert_string_equal(f.text + length - 15, "...; shorten it");
        assert_true(text_is_utf8(f.text, length));
    }
}

static void a_long_file_name_leaves_room_for_the_rest(void **state)
{
    (void)state;
    char name[2000];
    memset(name, 'n', sizeof name - 1);
    name[sizeof name - 1] = '\0';
    struct place where = {name, 7, 0};
    struct fault f = {0};
    assert_int_equal(fault_at(&f, &where, "look", "bad"), FAULT);
    assert_non_null(strstr(f.text, "bad; look"));
}

static enum status step(int fails, struct fault *f)
{
    return fails ? fault_at(f, NULL, NULL, "step failed") : OK;
}

static enum status steps(int first, int second, int *reached, struct fault *f)
{
    enum status rc = OK;
    *reached = 0;
    TRY(step(first, f));
    *reached = 1;
    TRY(step(second, f));
    *reached = 2;
done:
    return rc;
}

static void try_goes_to_done_at_the_first_failure(void **state)
{
    (void)state;
    struct fault f = {0};
    int reached = 0;
    assert_int_equal(steps(0, 0, &reached, &f), OK);
    assert_int_equal(reached, 2);
    assert_int_equal(steps(0, 1, &reached, &f), FAULT);
    assert_int_equal(reached, 1);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(a_fault_says_where_what_and_what_to_do),
        cmocka_unit_test(a_fault_needs_no_place),
        cmocka_unit_test(the_first_fault_wins),
        cmocka_unit_test(a_file_cannot_draw_on_the_terminal),
        cmocka_unit_test(a_long_fault_keeps_its_advice),
        cmocka_unit_test(a_long_file_name_leaves_room_for_the_rest),
        cmocka_unit_test(try_goes_to_done_at_the_first_failure),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
