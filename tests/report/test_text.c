/* text: how a page looks as text. What is expected is laid out by hand here: common practice, no
 * source. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <stdlib.h>
#include <string.h>

#include "sample.h"

static const struct column figures[] = {
    {.title = "what"},
    {.title = "figure", .align = ALIGN_POINT},
    {.title = "n", .align = ALIGN_RIGHT},
};

static void expect_page(const struct page *p, int width, const char *expected)
{
    char *text = written_text(p, width, false);
    assert_string_equal(text, expected);
    free(text);
}

static void numbers_line_up_by_their_point(void **state)
{
    (void)state;
    struct arena *a = arena_new();
    struct table *t = table_new(a, "", figures, 3);
    static const char *const rows[][3] = {
        {"BOD5", "6.25 mg/L", "3"}, {"ECOLI", "<126 MPN/100mL", "12"}, {"TSS", ".5 mg/L", ""},
        {"PH", "no data", "0"},     {"REMOVAL", "-12.0 %", "1"},
    };
    for (size_t i = 0; i < NELEM(rows); i++) {
        struct cell *c = table_row(t);
        c[0] = cell_text(rows[i][0]);
        c[1] = cell_text(rows[i][1]);
        c[2] = cell_number(rows[i][2]);
    }
    struct page *p = page_new(a);
    page_heading(p, "A month");
    page_table(p, t);
    expect_page(p, 100,
                "A month\n"
                "=======\n"
                "what             figure   n\n"
                "-------  --------------  --\n"
                "BOD5        6.25 mg/L     3\n"
                "ECOLI    <126 MPN/100mL  12\n"
                "TSS          .5 mg/L\n"
                "PH              no data   0\n"
                "REMOVAL   -12.0 %         1\n");
    arena_free(a);
}

static void a_long_text_runs_over_lines_in_its_column(void **state)
{
    static const struct column columns[] = {
        {.title = "day"}, {.title = "what was done about it", .wraps = true}, {.title = "by"}};
    (void)state;
    struct arena *a = arena_new();
    struct table *t = table_new(a, "", columns, 3);
    struct cell *c = table_row(t);
    c[0] = cell_text("03-16");
    c[1] = cell_text("the clarifier was taken off line and cleaned");
    c[2] = cell_text("lab");
    struct page *p = page_new(a);
    page_table(p, t);
    expect_page(p, 36,
                "day    what was done about it    by\n"
                "-----  ------------------------  ---\n"
                "03-16  the clarifier was taken   lab\n"
                "       off line and cleaned\n");
    arena_free(a);
}

static void columns_of_a_high_rank_are_left_out_and_named(void **state)
{
    static const struct column columns[] = {{.title = "point"},
                                            {.title = "method", .rank = 1},
                                            {.title = "file", .rank = 2},
                                            {.title = "value", .align = ALIGN_POINT}};
    (void)state;
    struct arena *a = arena_new();
    struct table *t = table_new(a, "", columns, 4);
    struct cell *c = table_row(t);
    c[0] = cell_text("EFF");
    c[1] = cell_text("5210");
    c[2] = cell_text("laboratory-results-of-march.csv");
    c[3] = cell_number("6.5");
    struct page *p = page_new(a);
    page_table(p, t);
    expect_page(p, 30,
                "point  method  value\n"
                "-----  ------  -----\n"
                "EFF    5210      6.5\n"
                "Left out for want of width:\n"
                "file.\n");
    arena_free(a);
}

static void lines_wrap_and_hang_under_their_dash(void **state)
{
    (void)state;
    struct arena *a = arena_new();
    struct page *p = page_new(a);
    page_line(p, FLAG_NONE, "- %s", "weeks begin on Sunday and end on Saturday");
    page_line(p, FLAG_NONE, "  %s", "twoandtwentyletterslong");
    expect_page(p, 20,
                "- weeks begin on\n"
                "  Sunday and end on\n"
                "  Saturday\n"
                "  twoandtwentyletter\n" /* a word longer than the page is broken */
                "  slong\n");
    arena_free(a);
}

static void characters_of_two_columns_keep_the_table_straight(void **state)
{
    (void)state;
    struct arena *a = arena_new();
    struct table *t = table_new(a, "", figures, 3);
    struct cell *c = table_row(t);
    c[0] = cell_text("\xe6\xb1\xa1\xe6\xb0\xb4"); /* two characters, four columns: UAX 11, Wide */
    c[1] = cell_number("1.5");
    c = table_row(t);
    c[0] = cell_text("abcd");
    c[1] = cell_number("10.25");
    struct page *p = page_new(a);
    page_table(p, t);
    expect_page(p, 100,
                "what  figure  n\n"
                "----  ------  -\n"
                "\xe6\xb1\xa1\xe6\xb0\xb4    1.5\n"
                "abcd   10.25\n");
    arena_free(a);
}

static void text_from_files_cannot_draw_on_a_terminal(void **state)
{
    (void)state;
    struct arena *a = arena_new();
    struct page *p = page_new(a);
    struct table *t = table_new(a, "", figures, 3);
    table_row(t)[0] = cell_text("\x1b[2J\nx");
    page_line(p, FLAG_NONE, "%s", "\x1b[31mred");
    page_table(p, t);
    char *text = written_text(p, 100, false);
    assert_null(strchr(text, '\x1b'));
    assert_non_null(strstr(text, "\\x1B[31mred"));
    assert_non_null(strstr(text, "\\x1B[2J\\x0Ax"));
    free(text);
    arena_free(a);
}

/* What is left when the colours are taken away is the page without colours. */
static void colour_adds_nothing_but_colour(void **state)
{
    (void)state;
    struct sample s;
    sample_make(&s, "2025-04-10");
    struct page *p = report_month_page(s.arena, &s.input);
    char *plain = written_text(p, 100, false);
    char *coloured = written_text(p, 100, true);
    assert_true(strlen(coloured) > strlen(plain));
    char *to = coloured;
    for (const char *from = coloured; *from != '\0';) {
        if (*from == '\x1b')
            from += strcspn(from, "m") + 1;
        else
            *to++ = *from++;
    }
    *to = '\0';
    assert_string_equal(coloured, plain);
    free(plain);
    free(coloured);
    sample_free(&s);
}

static void numbers_are_never_cut(void **state)
{
    (void)state;
    struct arena *a = arena_new();
    struct table *t = table_new(a, "", figures, 3);
    struct cell *c = table_row(t);
    c[0] = cell_text("total");
    c[1] = cell_number("123456789012345.678");
    c[2] = cell_number("999999999999999999");
    struct page *p = page_new(a);
    page_table(p, t);
    char *text = written_text(p, 20, false);
    assert_non_null(strstr(text, "123456789012345.678  999999999999999999"));
    free(text);
    arena_free(a);
}

static void a_form_feed_begins_a_page(void **state)
{
    (void)state;
    struct arena *a = arena_new();
    struct page *p = page_new(a);
    page_line(p, FLAG_NONE, "one");
    page_space(p);
    page_space(p);
    page_break(p);
    page_heading(p, "two");
    expect_page(p, 100, "one\n\n\f\ntwo\n===\n");
    arena_free(a);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(numbers_line_up_by_their_point),
        cmocka_unit_test(a_long_text_runs_over_lines_in_its_column),
        cmocka_unit_test(columns_of_a_high_rank_are_left_out_and_named),
        cmocka_unit_test(lines_wrap_and_hang_under_their_dash),
        cmocka_unit_test(characters_of_two_columns_keep_the_table_straight),
        cmocka_unit_test(text_from_files_cannot_draw_on_a_terminal),
        cmocka_unit_test(colour_adds_nothing_but_colour),
        cmocka_unit_test(numbers_are_never_cut),
        cmocka_unit_test(a_form_feed_begins_a_page),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
