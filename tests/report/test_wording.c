/* wording: the sentences are made into a table at build time; a mistake in them stops the build
 * with the file and line. Each case is written to a file and given to the script the build uses. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <stdlib.h>
#include <string.h>

#include "sample.h"

struct build {
    int exit;
    char *told;
    char *made;
};

static char *read_or_nothing(const char *path)
{
    FILE *f = fopen(path, "r");
    if (f == NULL)
        return strdup("");
    fclose(f);
    size_t length = 0;
    return file_bytes(path, &length);
}

static struct build build(struct arena *a, const char *folder, const char *words)
{
    const char *in = arena_print(a, "%s/words.csv", folder);
    const char *out = arena_print(a, "%s/words.inc", folder);
    const char *told = arena_print(a, "%s/told", folder);
    FILE *f = fopen(in, "w");
    assert_non_null(f);
    fputs(words, f);
    fclose(f);
    remove(out);
    struct build b = {0};
    b.exit = system(arena_print(a,
                                "cmake -DIN='%s' -DOUT='%s' -P '%s/src/report/words.cmake' "
                                ">'%s' 2>&1",
                                in, out, getenv("WEIRBOOK_SOURCE"), told));
    b.told = read_or_nothing(told);
    b.made = read_or_nothing(out);
    return b;
}

static void sentences_become_a_table(void **state)
{
    (void)state;
    struct arena *a = arena_new();
    char *folder = folder_new();
    struct build b =
        build(a, folder,
              "name,text\n{limit},a limit\n{day},\"a day; or [two]\"\n"
              "over,\"beyond {limit}, on {day}; a \"\"word\"\" \\ {limit}\"\nplain,[met]\n");
    assert_int_equal(b.exit, 0);
    assert_string_equal(b.made, "/* Made from reports/words.csv; change that. */\n"
                                "#ifdef PLACE\nPLACE(LIMIT)\nPLACE(DAY)\n#endif\n"
                                "#ifdef SENTENCE\n"
                                "SENTENCE(OVER, \"beyond {0}, on {1}; a \\\"word\\\" \\\\ {0}\")\n"
                                "SENTENCE(PLAIN, \"[met]\")\n#endif\n");
    free(b.told);
    free(b.made);
    folder_drop(folder);
    arena_free(a);
}

static void a_mistake_stops_the_build_and_names_its_line(void **state)
{
    static const struct {
        const char *words, *told;
    } cases[] = {
        {"name,text\n{limit},x\nover,beyond {limti}\n", "words.csv:3: unknown place {limti}"},
        {"name,text\nover,beyond {\n", "words.csv:2: a brace without a place"},
        {"name,text\nover,a\nover,b\n", "words.csv:3: over stands twice"},
        {"name,text\nover,a, b\n", "words.csv:2: text with a comma or a quote must be quoted"},
        {"name;text\n", "words.csv:1: unknown header"},
        {"name,text\nOver,a\n", "words.csv:2: expected name,text"},
        {"name,text\nover,a", "words.csv:2: the last line does not end"},
    };
    (void)state;
    struct arena *a = arena_new();
    char *folder = folder_new();
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct build b = build(a, folder, cases[i].words);
        assert_int_not_equal(b.exit, 0);
        assert_string_equal(b.made, "");
        for (char *s = b.told; *s != '\0'; s++) /* the tool breaks its lines */
            *s = *s == '\n' ? ' ' : *s;
        if (strstr(b.told, cases[i].told) == NULL)
            fail_msg("not told: %s\n%s", cases[i].told, b.told);
        free(b.told);
        free(b.made);
    }
    folder_drop(folder);
    arena_free(a);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(sentences_become_a_table),
        cmocka_unit_test(a_mistake_stops_the_build_and_names_its_line),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
