/* Text: buffers with a ceiling, UTF-8, width, escapes, and the nearest known word. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "base/base.h"

#include <string.h>

#include "base/poison.h"

static void a_buffer_grows_and_stays_ended(void **state)
{
    (void)state;
    struct text t;
    text_init(&t, 100000);
    assert_string_equal(t.at, "");
    for (int i = 0; i < 1000; i++) {
        text_add(&t, "ab");
        text_add_char(&t, 'c');
        text_print(&t, "%d", i % 10);
    }
    assert_int_equal(t.length, 4000);
    assert_int_equal(strlen(t.at), 4000);
    assert_memory_equal(t.at + 3996, "abc9", 5);
    assert_false(t.overflowed);
    text_add_bytes(&t, "x\0y", 3);
    assert_int_equal(t.length, 4003);
    text_clear(&t);
    assert_string_equal(t.at, "");
    assert_int_equal(t.length, 0);
    text_add(&t, "x"); /* over what was there */
    assert_string_equal(t.at, "x");
    text_free(&t);
    text_free(&t);
    struct text zeroed = {0};
    text_free(&zeroed);
}

static void past_the_ceiling_the_rest_is_dropped(void **state)
{
    (void)state;
    struct text t;
    text_init(&t, 5);
    text_add(&t, "12345");
    assert_false(t.overflowed);
    text_add(&t, "");
    assert_false(t.overflowed);
    text_add_char(&t, '6');
    assert_true(t.overflowed);
    assert_string_equal(t.at, "12345");
    text_clear(&t);
    assert_false(t.overflowed);
    text_print(&t, "%s", "1234567");
    assert_true(t.overflowed);
    assert_string_equal(t.at, "12345");
    text_free(&t);

    text_init(&t, 0);
    text_add(&t, "x");
    assert_true(t.overflowed);
    assert_string_equal(t.at, "");
    text_free(&t);

    text_init(&t, 300);
    for (int i = 0; i < 301; i++)
        text_add_char(&t, 'x');
    assert_int_equal(t.length, 300);
    assert_true(t.overflowed);
    text_free(&t);
}

static void comparing_accepts_no_text(void **state)
{
    (void)state;
    assert_true(text_equal(NULL, NULL));
    assert_false(text_equal(NULL, ""));
    assert_false(text_equal("", NULL));
    assert_true(text_equal("MG", "MG"));
    assert_false(text_equal("MG", "mg"));
    assert_true(text_equal_nocase("MG", "mg"));
    assert_true(text_equal_nocase("AZ", "az"));
    assert_true(text_equal_nocase("", ""));
    assert_false(text_equal_nocase("mg", "mgd"));
    assert_false(text_equal_nocase("mgd", "mg"));
    assert_true(text_equal_nocase(NULL, NULL));
    assert_false(text_equal_nocase(NULL, "x"));
    assert_false(text_equal_nocase("x", NULL));
    /* '@' and '`', '[' and '{' differ by the bit that tells the cases of a letter apart */
    assert_false(text_equal_nocase("@", "`"));
    assert_false(text_equal_nocase("[", "{"));
}

static void bytes_that_are_not_utf8_are_known(void **state)
{
    (void)state;
    static const struct {
        const char *bytes;
        bool fine;
    } cases[] = {
        /* Unicode 15, table 3-7, well-formed byte sequences */
        {"", true},
        {"plain", true},
        {"\xc2\x80", true},
        {"\xdf\xbf", true},
        {"\xe0\xa0\x80", true},
        {"\xed\x9f\xbf", true},
        {"\xee\x80\x80", true},
        {"\xf0\x90\x80\x80", true},
        {"\xf4\x8f\xbf\xbf", true},
        {"\xc0\x80", false},         /* overlong */
        {"\xc1\xbf", false},         /* overlong */
        {"\xe0\x9f\xbf", false},     /* overlong */
        {"\xed\xa0\x80", false},     /* surrogate */
        {"\xf0\x8f\xbf\xbf", false}, /* overlong */
        {"\xf4\x90\x80\x80", false}, /* past U+10FFFF */
        {"\xf5\x80\x80\x80", false},
        {"\x80", false},
        {"\xff", false},
        {"a\xe2\x82", false}, /* cut short */
        {"\xe9t\xe9", false}, /* Latin-1 */
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        if (text_is_utf8(cases[i].bytes, strlen(cases[i].bytes)) != cases[i].fine)
            fail_msg("case %zu", i);
    }
    assert_true(text_is_utf8("a\0b", 3));
    assert_false(text_is_utf8("\xc2\x80", 1));
    assert_false(text_is_utf8("a\xc2\x80", 2));
}

static void width_counts_columns_not_bytes(void **state)
{
    (void)state;
    /* Unicode Standard Annex 11, East Asian Width: wide characters take two columns */
    assert_int_equal(text_width(""), 0);
    assert_int_equal(text_width("mg/L"), 4);
    assert_int_equal(text_width("\xc2\xb5g/L"), 4); /* micro sign */
    assert_int_equal(text_width("caf\xc3\xa9"), 4);
    assert_int_equal(text_width("cafe\xcc\x81"), 4); /* combining acute */
    assert_int_equal(text_width("\xe6\xb0\xb4"), 2); /* CJK water */
    assert_int_equal(text_width("\xff"), 1);
}

static void control_bytes_are_shown_not_sent(void **state)
{
    (void)state;
    static const struct {
        const char *from, *to;
    } cases[] = {
        {"plain \xc2\xb5g/L", "plain \xc2\xb5g/L"},
        {"\x1b[31m", "\\x1B[31m"},
        {"a\tb\r\n", "a\\x09b\\x0D\\x0A"},
        {"\x7f", "\\x7F"},
        {"\xc2\x9b", "\\xC2\\x9B"},          /* C1 control sequence introducer */
        {"\xc2\x80", "\\xC2\\x80"},          /* first of C1 */
        {"\xc2\x9f", "\\xC2\\x9F"},          /* last of C1 */
        {"\xe2\x80\xa8", "\\xE2\\x80\\xA8"}, /* line separator */
        {"\x9b", "\\x9B"},                   /* the same on an 8-bit terminal */
        {"\xd8\x9c", "\\xD8\\x9C"},          /* Unicode Annex 9: Arabic letter mark */
        {"\xe2\x80\x8e", "\\xE2\\x80\\x8E"}, /* left-to-right mark */
        {"\xe2\x80\x8f", "\\xE2\\x80\\x8F"}, /* right-to-left mark */
        /* NOLINTBEGIN(misc-misleading-bidirectional): written as escapes, nothing misleads */
        {"\xe2\x80\xaa", "\\xE2\\x80\\xAA"}, /* left-to-right embedding */
        {"\xe2\x80\xae", "\\xE2\\x80\\xAE"}, /* right-to-left override */
        {"\xe2\x81\xa6", "\\xE2\\x81\\xA6"}, /* left-to-right isolate */
        /* NOLINTEND(misc-misleading-bidirectional) */
        {"\xe2\x81\xa9", "\\xE2\\x81\\xA9"}, /* pop directional isolate */
        {"\xe2\x81\xa5", "\xe2\x81\xa5"},
        {"\xe2\x81\xaa", "\xe2\x81\xaa"}, /* next to the last isolate */
        {"\xe2\x80\xa7", "\xe2\x80\xa7"}, /* hyphenation point, next to the line separator */
        {"\xe2\x80\xaf", "\xe2\x80\xaf"}, /* narrow space, next to the override */
        {"\xc2\xa0", "\xc2\xa0"},
        {"~", "~"},
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct text t;
        text_init(&t, 200);
        text_add_escaped(&t, cases[i].from);
        assert_string_equal(t.at, cases[i].to);
        text_free(&t);
    }
}

static void a_typo_gets_the_nearest_word(void **state)
{
    (void)state;
    static const char *const known[] = {"permit", "process",        "day",           "load",
                                        "report", "recheck",        "plant",         "MG",
                                        "mg",     "weekly-average", "weekly-geomean"};
    static const struct {
        const char *word, *nearest;
    } cases[] = {
        {"permti", "permit"},  /* neighbours swapped */
        {"permi", "permit"},   /* one left out */
        {"perrmit", "permit"}, /* one put in */
        {"pernit", "permit"},  /* one mistaken */
        {"PERMIT", "permit"},  /* case ignored */
        {"lod", "load"},
        {"laod", "load"}, /* two letters changed, but one swap */
        {"olad", "load"},
        {"lxod", NULL},         /* one letter moved is no swap */
        {"pexxit", "permit"},   /* two edits in six letters */
        {"loxx", NULL},         /* two edits in four letters */
        {"rechxxk", "recheck"}, /* two in seven */
        {"rexxxck", NULL},      /* three in seven */
        {"wxxkly-avxxage", "weekly-average"},
        {"wxxkly-xvxxage", NULL},
        {"weekly average", "weekly-average"},
        {"wekly-averge", "weekly-average"},
        {"mg", "mg"}, /* case decides between equals */
        {"MG", "MG"},
        {"zebra", NULL},
        {"q", NULL}, /* nothing of it would be left */
        {"", NULL},
        {"dy", "day"},
        {"pe", NULL},
    };
    for (size_t i = 0; i < NELEM(cases); i++) {
        const char *got = text_nearest(cases[i].word, known, NELEM(known));
        if (!text_equal(got, cases[i].nearest))
            fail_msg("'%s': got '%s', expected '%s'", cases[i].word, got ? got : "none",
                     cases[i].nearest ? cases[i].nearest : "none");
    }
    assert_null(text_nearest("day", known, 0));
    static const char *const letters[] = {"d", "h"};
    assert_null(text_nearest("q", letters, NELEM(letters))); /* nothing of it would be left */
    assert_string_equal(text_nearest("H", letters, NELEM(letters)), "h");
}

static void a_word_of_any_length_is_safe(void **state)
{
    (void)state;
    char word[200];
    for (size_t length = 1; length < sizeof word; length++) {
        memset(word, 'w', length);
        word[length] = '\0';
        const char *const known[] = {word};
        const char *got = text_nearest(word, known, 1);
        if (length <= 63)
            assert_ptr_equal(got, word);
        else
            assert_null(got);
        assert_null(text_nearest("abcdef", known, 1));
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(a_buffer_grows_and_stays_ended),
        cmocka_unit_test(past_the_ceiling_the_rest_is_dropped),
        cmocka_unit_test(comparing_accepts_no_text),
        cmocka_unit_test(bytes_that_are_not_utf8_are_known),
        cmocka_unit_test(width_counts_columns_not_bytes),
        cmocka_unit_test(control_bytes_are_shown_not_sent),
        cmocka_unit_test(a_typo_gets_the_nearest_word),
        cmocka_unit_test(a_word_of_any_length_is_safe),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
