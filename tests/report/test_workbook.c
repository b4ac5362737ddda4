/* workbook: the monthly summary as a workbook. What is in it is read by a second reader, openpyxl,
 * in workbook.py; here stand the same bytes, the faults, and the names no library likes. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <fcntl.h>
#include <signal.h>
#include <stdlib.h>
#include <string.h>
#include <sys/resource.h>
#include <unistd.h>

#include "sample.h"

struct workbook_test {
    struct sample sample;
    char *folder;
    const char *path;
};

static void begin(struct workbook_test *t)
{
    sample_make(&t->sample, "2025-04-10");
    t->folder = folder_new();
    t->path = arena_print(t->sample.arena, "%s/permit-2025-03.xlsx", t->folder);
}

static void end(struct workbook_test *t)
{
    folder_drop(t->folder);
    sample_free(&t->sample);
}

static void make(struct workbook_test *t, const char *path)
{
    struct fault f = {0};
    if (report_month_workbook(t->sample.arena, &t->sample.input, path, &f) != OK)
        fail_msg("%s", f.text);
}

/* The first Python that has openpyxl, or NULL. */
static const char *python(void)
{
    static const char *const tried[] = {"python3", "/usr/bin/python3"};
    for (size_t i = 0; i < NELEM(tried); i++) {
        char command[100];
        snprintf(command, sizeof command, "%s -c 'import openpyxl' 2>/dev/null", tried[i]);
        if (system(command) == 0)
            return tried[i];
    }
    return NULL;
}

static void a_second_reader_finds_what_a_person_relies_on(void **state)
{
    (void)state;
    struct workbook_test t;
    const char *reader = python();
    const char *source = getenv("WEIRBOOK_SOURCE");
    if (reader == NULL || source == NULL)
        fail_msg("python3-openpyxl and WEIRBOOK_SOURCE are needed here: sh .ci/setup");
    begin(&t);
    make(&t, t.path);
    char *command = arena_print(t.sample.arena, "%s '%s/tests/report/workbook.py' '%s'", reader,
                                source, t.path);
    assert_int_equal(system(command), 0);
    assert_int_equal(folder_files(t.folder), 1);
    end(&t);
}

static void the_same_month_gives_the_same_bytes(void **state)
{
    (void)state;
    struct workbook_test t;
    begin(&t);
    const char *other = arena_print(t.sample.arena, "%s/again.xlsx", t.folder);
    setenv("TZ", "Pacific/Auckland", 1);
    make(&t, t.path);
    sleep(2); /* a zip counts in steps of two seconds */
    setenv("TZ", "America/Anchorage", 1);
    make(&t, other);
    unsetenv("TZ");
    size_t length = 0;
    size_t other_length = 0;
    char *bytes = file_bytes(t.path, &length);
    char *other_bytes = file_bytes(other, &other_length);
    assert_int_equal(length, other_length);
    assert_memory_equal(bytes, other_bytes, length);
    free(bytes);
    free(other_bytes);
    end(&t);
}

/* Runs with standard error going to a file, and files of at most `most` bytes; returns what was
 * written on standard error. */
static char *errors_of(struct workbook_test *t, rlim_t most, enum status *rc, struct fault *f)
{
    struct rlimit limit;
    getrlimit(RLIMIT_FSIZE, &limit);
    const struct rlimit small = {.rlim_cur = most, .rlim_max = limit.rlim_max};
    FILE *errors = tmpfile();
    assert_non_null(errors);
    int kept = dup(STDERR_FILENO);
    dup2(fileno(errors), STDERR_FILENO);
    signal(SIGXFSZ, SIG_IGN);
    setrlimit(RLIMIT_FSIZE, &small);
    *rc = report_month_workbook(t->sample.arena, &t->sample.input, t->path, f);
    setrlimit(RLIMIT_FSIZE, &limit);
    dup2(kept, STDERR_FILENO);
    close(kept);
    char *text = calloc(1, 10000);
    assert_non_null(text);
    rewind(errors);
    text[fread(text, 1, 9999, errors)] = '\0';
    fclose(errors);
    return text;
}

/* A size limit on files stands in for a full disk. */
static void a_full_disk_leaves_the_old_workbook_and_says_it_once(void **state)
{
    static const rlim_t most[] = {0, 1000, 9000};
    (void)state;
    struct workbook_test t;
    begin(&t);
    FILE *old = fopen(t.path, "w");
    assert_non_null(old);
    fputs("the good one", old);
    fclose(old);
    for (size_t i = 0; i < NELEM(most); i++) {
        struct fault f = {0};
        enum status rc = OK;
        char *errors = errors_of(&t, most[i], &rc, &f);
        assert_int_equal(rc, FAULT);
        assert_non_null(strstr(f.text, "permit-2025-03.xlsx: cannot write the file: "));
        assert_string_equal(errors, "");
        free(errors);
        size_t length = 0;
        char *bytes = file_bytes(t.path, &length);
        assert_string_equal(bytes, "the good one");
        free(bytes);
        assert_int_equal(folder_files(t.folder), 1);
    }
    end(&t);
}

static void a_folder_that_is_not_there_is_one_fault(void **state)
{
    (void)state;
    struct workbook_test t;
    begin(&t);
    t.path = "/nowhere/at/all/permit.xlsx";
    struct fault f = {0};
    enum status rc = OK;
    char *errors = errors_of(&t, RLIM_INFINITY, &rc, &f);
    assert_int_equal(rc, FAULT);
    assert_string_equal(errors, "");
    assert_string_equal(f.text,
                        "/nowhere/at/all/permit.xlsx: cannot write the file: No such file or "
                        "directory; choose a folder that can be written");
    free(errors);
    end(&t);
}

/* Names with & (a code in headers), of great length, in another script, with control bytes, and
 * bytes that are no UTF-8: none may spoil the file or be told on standard error. */
static void awkward_names_make_a_sound_workbook(void **state)
{
    (void)state;
    struct workbook_test t;
    struct text name;
    begin(&t);
    text_init(&name, 1 << 20);
    for (int i = 0; i < 40; i++)
        text_add(&name, "&P&N Очистные & 最終 ");
    text_add(&name, "\x01\xff\x1b[2J");
    t.sample.plant->name = name.at;
    t.sample.plant->permit = name.at;
    t.sample.plant->receiving_water = name.at;
    struct text note; /* longer than a cell may be */
    text_init(&note, 1 << 20);
    for (int i = 0; i < 9000; i++)
        text_add(&note, "=long");
    struct month_aside aside = {"f.csv", "bad-text", note.at, "2025-02-30", "@", "-", "=1", 1, 1};
    t.sample.input.aside = &aside;
    t.sample.input.asides = 1;
    struct fault f = {0};
    enum status rc = OK;
    char *errors = errors_of(&t, RLIM_INFINITY, &rc, &f);
    if (rc != OK)
        fail_msg("%s", f.text);
    assert_string_equal(errors, "");
    const char *reader = python();
    if (reader != NULL) {
        char *command = arena_print(t.sample.arena,
                                    "%s -c 'import sys, openpyxl; b = "
                                    "openpyxl.load_workbook(sys.argv[1]); s = b[\"Set aside\"]; "
                                    "sys.exit(not (s[\"A2\"].value == \"2025-02-30\" and "
                                    "s[\"F2\"].value.endswith(\"cell)\")))' '%s'",
                                    reader, t.path);
        assert_int_equal(system(command), 0);
    }
    free(errors);
    text_free(&name);
    text_free(&note);
    end(&t);
}

static void a_workbook_without_readings_is_made_too(void **state)
{
    (void)state;
    struct workbook_test t;
    begin(&t);
    struct permit_month empty = {.month = sample_day("2025-02-01"), .on = sample_day("2025-04-10")};
    t.sample.frame =
        frame_new(t.sample.arena, t.sample.plant, empty.month, month_last(empty.month));
    frame_close(t.sample.frame);
    t.sample.input = (struct month_input){.plant = t.sample.plant,
                                          .frame = t.sample.frame,
                                          .permit = &empty,
                                          .version = "0.1.0",
                                          .head = "",
                                          .printed = sample_day("2025-04-10")};
    make(&t, t.path);
    assert_int_equal(folder_files(t.folder), 1);
    end(&t);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(a_second_reader_finds_what_a_person_relies_on),
        cmocka_unit_test(the_same_month_gives_the_same_bytes),
        cmocka_unit_test(a_full_disk_leaves_the_old_workbook_and_says_it_once),
        cmocka_unit_test(a_folder_that_is_not_there_is_one_fault),
        cmocka_unit_test(awkward_names_make_a_sound_workbook),
        cmocka_unit_test(a_workbook_without_readings_is_made_too),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
