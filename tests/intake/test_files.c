/* files: what is no readings file at all, with the line a person reads; a file's identity; and that
 * memory does not grow with the file. Digests are those of FIPS 180-4's example. */
#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#include "support.h"

#include <string.h>
#include <sys/resource.h>
#include <sys/stat.h>
#include <unistd.h>

#define HEAD "date,point,parameter,value,unit\n"

static const struct {
    const char *bytes;
    size_t length;
    const char *said;
} files[] = {
#define FILE_OF(bytes, said)                                                                       \
    {                                                                                              \
        bytes, sizeof(bytes) - 1, "readings.csv: " said                                            \
    }
    FILE_OF("", "the file is empty; export it again"),
    FILE_OF("\n\r\n  \n", "the file holds only blank lines; export it again"),
    FILE_OF(HEAD, "the file has no readings below its header; export it again with its readings"),
    FILE_OF(HEAD ",,,,\n\n",
            "the file has no readings below its header; export it again with its readings"),
    FILE_OF("date,EFF TSS\n2025-03-04,\n",
            "the file has no readings below its header; export it again with its readings"),
    FILE_OF(HEAD "2025-03-04,EFF,TSS,1\0,mg/L\n",
            "the file has NUL bytes: it is no text; export it again as CSV in UTF-8"),
    FILE_OF("\x7f"
            "ELF\x02\x01\x01\0\0\0\0",
            "the file has NUL bytes: it is no text; export it again as CSV in UTF-8"),
    FILE_OF("\xff\xfe"
            "d\0a\0t\0e\0",
            "the file is UTF-16; save it as UTF-8"),
    FILE_OF("\xfe\xff"
            "\0d\0a\0t\0e",
            "the file is UTF-16; save it as UTF-8"),
    FILE_OF("PK\x03\x04"
            "xl/workbook.xml",
            "the file is a workbook, not CSV; save each sheet as CSV"),
};

static void what_is_no_readings_file_says_so(void **state)
{
    struct scene *s = *state;
    for (size_t i = 0; i < NELEM(files); i++) {
        const char *path = scene_bytes(s, "readings.csv", files[i].bytes, files[i].length);
        assert_said(scene_read_path(s, path, NULL, NULL), files[i].said, files[i].bytes);
    }
}

static void what_is_not_there_or_no_file_says_so(void **state)
{
    struct scene *s = *state;
    assert_string_equal(scene_read_path(s, scene_path(s, "none.csv"), NULL, NULL),
                        "none.csv: there is no such file; correct the name");
    assert_string_equal(scene_read_path(s, scene_path(s, "plant.csv/x"), NULL, NULL),
                        "plant.csv/x: there is no such file; correct the name");
    assert_int_equal(mkdir(scene_path(s, "folder.csv"), 0700), 0);
    assert_string_equal(scene_read_path(s, scene_path(s, "folder.csv"), NULL, NULL),
                        "folder.csv: it is a folder, not a file; name the files in it");
    assert_int_equal(mkfifo(scene_path(s, "pipe.csv"), 0600), 0);
    assert_string_equal(scene_read_path(s, scene_path(s, "pipe.csv"), NULL, NULL),
                        "pipe.csv: it is not an ordinary file; save it as a file first");
    const char *path = scene_file(s, "readings.csv", HEAD "2025-03-04,EFF,TSS,1,mg/L\n");
    assert_string_equal(scene_read_path(s, path, scene_path(s, "none.csv"), NULL),
                        "readings.csv:1: a long file takes no column map; leave the column map "
                        "out");
    assert_string_equal(scene_read_path(s, path, NULL, scene_path(s, "none.csv")),
                        "none.csv: there is no such file; correct the name");
}

/* Root may read and write everything: it lays that right down for a moment. */
static void become_nobody(bool nobody)
{
    static const uid_t user = 65534;
    if (getuid() == 0)
        assert_int_equal(seteuid(nobody ? user : 0), 0);
}

static void a_file_that_may_not_be_read_says_so(void **state)
{
    struct scene *s = *state;
    const char *path = scene_file(s, "locked.csv", HEAD);
    assert_int_equal(chmod(path, 0), 0);
    become_nobody(true);
    const char *said = scene_read_path(s, path, NULL, NULL);
    become_nobody(false);
    assert_string_equal(said, "locked.csv: the file cannot be read (Permission denied); see to it "
                              "that you may read it, and that its disk is sound");
}

static void a_folder_that_may_not_be_written_says_so(void **state)
{
    struct scene *s = *state;
    struct fault f = {.set = false};
    const char *folder = scene_path(s, "closed");
    assert_int_equal(mkdir(folder, 0500), 0);
    assert_int_equal(chmod(s->folder, 0755), 0);
    assert_int_equal(chmod(folder, 0555), 0);
    become_nobody(true);
    enum status rc = intake_example(folder, &f);
    become_nobody(false);
    assert_int_equal(rc, FAULT);
    assert_string_equal(f.text, arena_print(s->arena,
                                            "%s/plant.csv: cannot write the file: "
                                            "Permission denied; "
                                            "choose a folder that can be written",
                                            folder));
}

static void a_file_larger_than_a_gigabyte_is_refused_unread(void **state)
{
    struct scene *s = *state;
    const char *path = scene_file(s, "huge.csv", HEAD);
    if (truncate(path, (off_t)1 << 31) != 0) /* sparse; not every file system can */
        return;
    assert_string_equal(scene_read_path(s, path, NULL, NULL),
                        "huge.csv: the file is larger than 1 GB; split it");
}

static void a_file_is_known_by_its_size_and_digest(void **state)
{
    struct scene *s = *state;
    struct fault f = {.set = false};
    uint8_t digest[DIGEST_BYTES];
    char hex[2 * DIGEST_BYTES + 1];
    int64_t bytes = 0;
    /* FIPS 180-4, example SHA256("abc") of the NIST example values. */
    const char *path = scene_file(s, "abc.csv", "abc");
    assert_int_equal(intake_identify(s->arena, path, &bytes, digest, &f), OK);
    digest_write(digest, hex);
    assert_int_equal(bytes, 3);
    assert_string_equal(hex, "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad");
    assert_int_equal(intake_identify(s->arena, scene_path(s, "none.csv"), &bytes, digest, &f),
                     FAULT);
}

/* The digest is of the bytes that were read, those below a footer and behind a mark included. */
static void a_read_file_has_the_digest_it_is_known_by(void **state)
{
    struct scene *s = *state;
    struct fault f = {.set = false};
    uint8_t digest[DIGEST_BYTES];
    int64_t bytes = 0;
    const char *text = "\xef\xbb\xbf" HEAD "2025-03-04,EFF,TSS,1,mg/L\nEnd\n\"rest\n";
    scene_read_with(s, text, NULL, "field,value\nfooter,End\n");
    assert_string_equal(s->said.at, "2 2025-03-04 EFF TSS plain 1 mg/L\n");
    const char *path = scene_path(s, "readings.csv");
    assert_int_equal(intake_identify(s->arena, path, &bytes, digest, &f), OK);
    assert_int_equal(s->summary.bytes, bytes);
    assert_memory_equal(s->summary.digest, digest, DIGEST_BYTES);
}

/* ---- size ---- */

struct count {
    long rows, calls;
    int last;
};

static enum status count_reading(void *context, const struct reading *r, const struct row_text *row,
                                 struct fault *f)
{
    struct count *c = context;
    (void)r;
    (void)row;
    (void)f;
    c->rows++;
    return OK;
}

static enum status count_aside(void *context, const struct row_text *row, enum reason reason,
                               const char *explanation, struct fault *f)
{
    struct count *c = context;
    (void)row;
    (void)reason;
    (void)explanation;
    (void)f;
    c->rows++;
    return OK;
}

static void count_progress(void *context, const char *file, int percent)
{
    struct count *c = context;
    assert_non_null(file);
    assert_true(percent > c->last && percent <= 100);
    c->last = percent;
    c->calls++;
}

static void memory_does_not_grow_with_the_file(void **state)
{
    struct scene *s = *state;
    enum { ROWS = 200000 };
    struct text t;
    struct count c = {.last = -1};
    struct fault f = {.set = false};
    struct rusage before, after;
    text_init(&t, (size_t)64 << 20);
    text_add(&t, HEAD);
    for (int i = 0; i < ROWS; i++)
        text_add(&t, i % 10 == 0 ? "2025-03-04,EFF,TSS,\"x\",mg/L\n"
                                 : "2025-03-04,EFF,TSS,12.5,mg/L\n");
    const char *path = scene_file(s, "large.csv", t.at);
    const struct intake_options options = {
        .today = s->today, .progress = count_progress, .progress_context = &c};
    const struct intake_sink sink = {&c, count_reading, count_aside};
    size_t used = arena_used(s->arena);
    getrusage(RUSAGE_SELF, &before);
    if (intake_readings(s->arena, path, s->plant, &options, &sink, &s->summary, &f) != OK)
        fail_msg("%s", f.text);
    getrusage(RUSAGE_SELF, &after);
    assert_int_equal(c.rows, ROWS);
    assert_int_equal(s->summary.rows, ROWS);
    assert_true(c.calls > 1 && c.last == 100);
    assert_true(arena_used(s->arena) - used < 1024);
    assert_true(after.ru_maxrss - before.ru_maxrss < 20L * 1024); /* kilobytes */
    text_free(&t);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(what_is_no_readings_file_says_so),
        cmocka_unit_test(what_is_not_there_or_no_file_says_so),
        cmocka_unit_test(a_file_that_may_not_be_read_says_so),
        cmocka_unit_test(a_folder_that_may_not_be_written_says_so),
        cmocka_unit_test(a_file_larger_than_a_gigabyte_is_refused_unread),
        cmocka_unit_test(a_file_is_known_by_its_size_and_digest),
        cmocka_unit_test(a_read_file_has_the_digest_it_is_known_by),
        cmocka_unit_test(memory_does_not_grow_with_the_file),
    };
    return cmocka_run_group_tests(tests, scene_setup, scene_teardown);
}
