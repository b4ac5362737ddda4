/* file: a report is written beside its name and renamed once whole. A size limit on files stands in
 * for a full disk: the system then refuses the write as a full disk does. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <signal.h>
#include <stdlib.h>
#include <string.h>
#include <sys/resource.h>
#include <sys/stat.h>
#include <unistd.h>

#include "sample.h"

static void write_words(FILE *out, const void *context)
{
    fputs(context, out);
}

static void write_much(FILE *out, const void *context)
{
    (void)context;
    for (int i = 0; i < 100000; i++)
        fputs("0123456789", out);
}

static void most_bytes(rlim_t most)
{
    struct rlimit limit;
    assert_int_equal(getrlimit(RLIMIT_FSIZE, &limit), 0);
    limit.rlim_cur = most < limit.rlim_max ? most : limit.rlim_max;
    assert_int_equal(setrlimit(RLIMIT_FSIZE, &limit), 0);
    signal(SIGXFSZ, SIG_IGN);
}

struct place_for_files {
    struct arena *arena;
    char *folder;
    const char *path;
};

static struct place_for_files open_place(void)
{
    struct place_for_files p = {.arena = arena_new(), .folder = folder_new()};
    p.path = arena_print(p.arena, "%s/permit-2025-03.txt", p.folder);
    return p;
}

static void close_place(struct place_for_files *p)
{
    folder_drop(p->folder);
    arena_free(p->arena);
}

static void a_report_stands_under_its_name_once_whole(void **state)
{
    (void)state;
    struct place_for_files p = open_place();
    struct fault f = {0};
    assert_int_equal(beside_write(p.path, write_words, "first\n", &f), OK);
    assert_int_equal(beside_write(p.path, write_words, "second\n", &f), OK);
    size_t length = 0;
    char *bytes = file_bytes(p.path, &length);
    assert_string_equal(bytes, "second\n");
    assert_int_equal(folder_files(p.folder), 1);
    free(bytes);
    close_place(&p);
}

static void a_full_disk_leaves_the_old_report(void **state)
{
    (void)state;
    struct place_for_files p = open_place();
    struct fault f = {0};
    assert_int_equal(beside_write(p.path, write_words, "the good one\n", &f), OK);
    most_bytes(5000);
    enum status rc = beside_write(p.path, write_much, NULL, &f);
    most_bytes(RLIM_INFINITY);
    assert_int_equal(rc, FAULT);
    assert_non_null(strstr(f.text, "permit-2025-03.txt: cannot write the file: File too large"));
    assert_non_null(strstr(f.text, "free some space"));
    size_t length = 0;
    char *bytes = file_bytes(p.path, &length);
    assert_string_equal(bytes, "the good one\n");
    assert_int_equal(folder_files(p.folder), 1);
    free(bytes);
    close_place(&p);
}

static void a_folder_that_is_not_there_is_a_fault(void **state)
{
    (void)state;
    struct fault f = {0};
    assert_int_equal(beside_write("/nowhere/at/all/x.txt", write_words, "x", &f), FAULT);
    assert_string_equal(f.text, "/nowhere/at/all/x.txt: cannot write the file: No such file or "
                                "directory; choose a folder that can be written");
}

/* Renaming would put a file in the place of a device. */
static void nothing_but_a_file_is_replaced(void **state)
{
    (void)state;
    struct place_for_files p = open_place();
    struct fault f = {0};
    assert_int_equal(beside_write(p.folder, write_words, "x", &f), FAULT);
    assert_non_null(strstr(f.text, "there is something other than a file"));
    fault_clear(&f);
    assert_int_equal(beside_write("/dev/full", write_words, "x", &f), FAULT);
    struct stat there;
    assert_int_equal(stat("/dev/full", &there), 0);
    assert_true(S_ISCHR(there.st_mode));
    close_place(&p);
}

static void a_name_left_by_a_killed_run_is_passed_over(void **state)
{
    (void)state;
    struct place_for_files p = open_place();
    struct fault f = {0};
    const char *left = arena_print(p.arena, "%s.1.part", p.path);
    FILE *file = fopen(left, "w");
    assert_non_null(file);
    fputs("half", file);
    fclose(file);
    assert_int_equal(beside_write(p.path, write_words, "whole\n", &f), OK);
    size_t length = 0;
    char *bytes = file_bytes(left, &length);
    assert_string_equal(bytes, "half");
    free(bytes);
    close_place(&p);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(a_report_stands_under_its_name_once_whole),
        cmocka_unit_test(a_full_disk_leaves_the_old_report),
        cmocka_unit_test(a_folder_that_is_not_there_is_a_fault),
        cmocka_unit_test(nothing_but_a_file_is_replaced),
        cmocka_unit_test(a_name_left_by_a_killed_run_is_passed_over),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
