/* Books of older formats: read through a migrated copy, migrated for writing after a backup, and
 * whole whatever happens meanwhile. The book of format 1 was written by the program of that format.
 */
#include "book/books.h"
#include "book/failing.h"
#include "book/store.h"

#include <signal.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/resource.h>
#include <sys/stat.h>
#include <sys/wait.h>
#include <unistd.h>

#define THIS ((struct shelf *)*state)

/* The newest head, as its program showed it. */
static const char *const head_of_format_1 =
    "154964ce738c0f6d4de854419acec8c728f82d0502ff11ae52c468887031dd1d";
static const char *const head_of_format_2 =
    "a8c7108178a04e7f9577a9cde5aaf1cea5c91c0ed7bb50de53bc7e4e6d93c87f";

static const char *head_of(const struct shelf *s)
{
    return s->format == 1 ? head_of_format_1 : head_of_format_2;
}

static const char *backup_of(struct shelf *s)
{
    return arena_print(s->arena, "%s.format-%d.backup", s->path, s->format);
}

static bool stands(const char *path)
{
    return access(path, F_OK) == 0;
}

static const char *format_in(struct shelf *s)
{
    return raw_text(s, "PRAGMA user_version");
}

static const char *newest(struct shelf *s)
{
    return arena_print(s->arena, "%d", book_format());
}

static const char *told_of(struct shelf *s)
{
    const char *told = shelf_told(s, &s->fault);
    if (!told)
        fail_msg("%s", s->fault.text);
    return told;
}

static const char *files_beside(struct shelf *s)
{
    char names[2000] = "", command[160];
    snprintf(command, sizeof command, "ls -A '%s' | tr '\n' ' '", s->folder);
    FILE *in = popen(command, "r");
    assert_non_null(in);
    size_t length = fread(names, 1, sizeof names - 1, in);
    assert_int_equal(pclose(in), 0);
    return arena_bytes(s->arena, names, length);
}

static enum status migrate(struct shelf *s, struct fault *f)
{
    struct book *b = NULL;
    enum status rc = book_open(&b, s->path, BOOK_WRITE, f);
    book_close(b);
    return rc;
}

/* ---- reading ---- */

static void reading_works_on_a_copy_and_leaves_the_book_alone(void **state)
{
    struct shelf *s = THIS;
    char head[2 * DIGEST_BYTES + 1];
    size_t length;
    const uint8_t *before = file_bytes(s->arena, s->path, &length);
    struct book *b = shelf_open(s, BOOK_READ);
    assert_null(book_migrated(b));
    good(s, book_head(b, head, &s->fault));
    assert_string_equal(head, head_of(s));
    book_close(b);
    assert_non_null(strstr(told_of(s), "description \n"));
    assert_string_equal(shelf_check(s), "");
    same_file(s->path, before, length);
    assert_string_equal(files_beside(s), "plant.book ");
    assert_string_equal(format_in(s), arena_print(s->arena, "%d", s->format));
}

static void what_is_read_cannot_be_written(void **state)
{
    struct shelf *s = THIS;
    struct book *b = shelf_open(s, BOOK_READ);
    assert_int_equal(
        sqlite3_exec(b->db, "INSERT INTO point_code (name) VALUES ('X')", NULL, NULL, NULL),
        SQLITE_READONLY);
    book_close(b);
}

/* In a child, without the rights of root: 0 when the book reads as it should. */
static void reads_where_nothing_can_be_written(void **state)
{
    struct shelf *s = THIS;
    size_t length;
    int status;
    const char *right = told_of(s);
    const uint8_t *before = file_bytes(s->arena, s->path, &length);
    assert_int_equal(chmod(s->path, 0444), 0);
    assert_int_equal(chmod(s->folder, 0555), 0);
    pid_t child = fork();
    assert_true(child >= 0);
    if (child == 0) {
        const struct rlimit nothing = {0, 0};
        signal(SIGXFSZ, SIG_IGN);
        if ((getuid() == 0 && (setgid(65534) != 0 || setuid(65534) != 0)) ||
            setrlimit(RLIMIT_FSIZE, &nothing) != 0)
            _exit(2);
        const char *told = shelf_told(s, &s->fault);
        _exit(told && strcmp(told, right) == 0 ? 0 : 1);
    }
    assert_int_equal(waitpid(child, &status, 0), child);
    assert_int_equal(status, 0);
    assert_int_equal(chmod(s->folder, 0755), 0);
    assert_int_equal(chmod(s->path, 0644), 0);
    same_file(s->path, before, length);
}

/* ---- writing ---- */

static void writing_keeps_a_backup_and_migrates(void **state)
{
    struct shelf *s = THIS;
    char head[2 * DIGEST_BYTES + 1];
    size_t length;
    struct stat st;
    assert_int_equal(chmod(s->path, 0640), 0);
    const uint8_t *before = file_bytes(s->arena, s->path, &length);
    const char *told = told_of(s);
    struct book *b = shelf_open(s, BOOK_WRITE);
    assert_string_equal(book_migrated(b), backup_of(s));
    good(s, book_head(b, head, &s->fault));
    assert_string_equal(head, head_of(s));
    book_close(b);
    same_file(backup_of(s), before, length);
    assert_int_equal(stat(backup_of(s), &st), 0);
    assert_int_equal(st.st_mode & 0777, 0640);
    assert_string_equal(
        files_beside(s),
        arena_print(s->arena, "plant.book plant.book.format-%d.backup ", s->format));
    assert_string_equal(format_in(s), newest(s));
    assert_string_equal(told_of(s), told);
    assert_string_equal(shelf_check(s), ""); /* the chain of the old batches among it */
    b = shelf_open(s, BOOK_WRITE);
    assert_null(book_migrated(b)); /* once */
    book_close(b);
}

static void a_migrated_book_takes_loads_and_bench_sheets(void **state)
{
    struct shelf *s = THIS;
    assert_string_equal(shelf_load(s, "a.csv", NULL,
                                   "EFF BOD5 2025-04-01 12 mg/L\nEFF BOD5 2025-03-09 31.0 mg/L\n"
                                   "aside:no-result 2025-04-02 - EFF TSS 1 mg/L"),
                        "ACS");
    assert_string_equal(shelf_bench(s, "bench.csv",
                                    "raw: suspended-solids 2025-04-01 - EFF 1 dried 1.2 g\n"
                                    "EFF TSS 2025-04-01 8 mg/L"),
                        "A");
    assert_string_equal(shelf_check(s), "");
    assert_non_null(strstr(told_of(s), "raw bench.csv:2 'suspended-solids' '2025-04-01' ''"));
}

/* Raw values of the old bench sheets among what is read; acts on old readings. */
static void a_migrated_book_takes_acts(void **state)
{
    struct shelf *s = THIS;
    struct fault f = {0};
    struct plant_draft *draft;
    struct book_withdrawn out;
    int64_t batch;
    struct reading old;
    assert_non_null(strstr(told_of(s), "raw suspended-solids.csv:2 'suspended-solids'"));
    struct book *b = shelf_open(s, BOOK_WRITE);
    good(s, book_plant(b, s->arena, &draft, &s->plant, &s->fault));
    const struct reading r = shelf_reading(s, "EFF BOD5 2025-03-04 21 mg/L");
    good(s, book_amend(b, s->arena, s->plant, &r, "typing error", &tester, &old, &batch, &f));
    assert_int_equal(batch, 7);
    assert_string_equal(old.text, "20.0");
    good(s, book_withdraw(b, s->plant, 3, "wrong file", &tester, &out, &batch, &f));
    assert_int_equal(out.taken_back, 1); /* 2025-03-28 */
    assert_int_equal(out.restored, 1);   /* 2025-03-18: <2 again */
    assert_int_equal(out.left, 0);
    good(s, book_withdraw(b, s->plant, 4, "a broken dish", &tester, &out, &batch, &f));
    assert_int_equal(out.taken_back, 2);
    book_close(b);
    shelf_remark(s, REMARK_CAUSE, "", "2025-03-10", "2025-03-10", NULL, "a remark");
    assert_string_equal(shelf_check(s), "");
    assert_string_equal(raw_text(s, "SELECT group_concat(value) FROM readings WHERE point = 'EFF' "
                                    "AND parameter = 'BOD5' AND date IN ('2025-03-04', "
                                    "'2025-03-18', '2025-03-28')"),
                        "21,<2");
}

/* The words of the newest program, in the place of those that stood there. */
static void words_are_brought_up_to_date(void **state)
{
    struct shelf *s = THIS;
    raw(s, "UPDATE aside_reason SET todo = 'as it was once' WHERE reason = 'bad-date'");
    good(s, migrate(s, &s->fault));
    assert_string_equal(raw_text(s, "SELECT count(*) FROM aside_reason"),
                        arena_print(s->arena, "%d", REASON_COUNT));
    assert_string_equal(raw_text(s, "SELECT todo FROM aside_reason WHERE reason = 'bad-date'"),
                        reason_todo[REASON_BAD_DATE]);
    assert_string_equal(raw_text(s, "SELECT meaning FROM batch_kind WHERE kind = 'bench'"),
                        "one bench sheet");
}

static void a_backup_that_is_this_book_serves_again(void **state)
{
    struct shelf *s = THIS;
    size_t length;
    const uint8_t *before = file_bytes(s->arena, s->path, &length);
    file_write(backup_of(s), before, length);
    good(s, migrate(s, &s->fault));
    same_file(backup_of(s), before, length);
    assert_string_equal(format_in(s), newest(s));
}

/* Whatever else stands in its place is left, and so is the book. */
static void another_file_in_the_backups_place_is_refused(void **state)
{
    struct shelf *s = THIS;
    struct fault f = {0};
    size_t length;
    uint8_t *before = file_bytes(s->arena, s->path, &length);
    const char *said = arena_print(s->arena,
                                   "'%s' stands where the backup of '%s' is to be, and is not the "
                                   "same book; move it away, then do it again",
                                   backup_of(s), s->path);
    for (int i = 0; i < 5; i++) {
        remove(backup_of(s));
        before[length - 1] ^= 1;
        if (i == 0)
            file_write(backup_of(s), before, length); /* one bit */
        else if (i == 1)
            file_write(backup_of(s), before, length - 1);
        else if (i == 2)
            assert_int_equal(symlink(s->path, backup_of(s)), 0);
        else if (i == 3)
            assert_int_equal(mkdir(backup_of(s), 0755), 0);
        else
            assert_int_equal(symlink("nowhere", backup_of(s)), 0);
        before[length - 1] ^= 1;
        fault_clear(&f);
        assert_int_equal(migrate(s, &f), FAULT);
        assert_string_equal(f.text, said);
        same_file(s->path, before, length);
    }
}

static void a_damaged_book_is_not_migrated(void **state)
{
    static const struct {
        const char *table, *sql, *said;
    } cases[] = {
        {"reading", "UPDATE reading SET value = '99' WHERE id = 2",
         "reading, batch 2, march.csv:3: EFF FLOW on 2025-03-01, '99' (reading 2), is not what was "
         "loaded; run 'weirbook check', and go back to a sound copy"},
        {"batch", "UPDATE batch SET who = 'X' WHERE id = 3",
         "batch, batch 3, again.csv:0: what stands in it is not what its hash was made of"},
        {"reading", "PRAGMA foreign_keys = OFF; UPDATE reading SET detail = 9999 WHERE id = 2",
         "foreign keys: row 2 of table reading points to"},
        {"chain", "DELETE FROM chain WHERE batch = 4",
         "chain, batch 4, :0: it has no link in the chain"},
    };
    struct shelf *s = THIS;
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct fault f = {0};
        size_t length;
        remove(s->path);
        shelf_put_format(s, 1);
        tamper(s, cases[i].table, cases[i].sql);
        const uint8_t *before = file_bytes(s->arena, s->path, &length);
        assert_int_equal(migrate(s, &f), FAULT);
        if (!strstr(f.text, "' is damaged: ") || !strstr(f.text, cases[i].said))
            fail_msg("%s\ngave\n%s", cases[i].sql, f.text);
        same_file(s->path, before, length);
        assert_string_equal(files_beside(s), "plant.book ");
    }
}

static void what_is_in_the_way_is_named(void **state)
{
    struct shelf *s = THIS;
    size_t length;
    raw(s, "CREATE TABLE bench (mine)");
    const uint8_t *before = file_bytes(s->arena, s->path, &length);
    for (enum book_mode mode = BOOK_READ; mode <= BOOK_WRITE; mode++) {
        struct book *b = NULL;
        struct fault f = {0};
        assert_int_equal(book_open(&b, s->path, mode, &f), FAULT);
        assert_string_equal(f.text,
                            arena_print(s->arena,
                                        "cannot bring '%s' to format 2: table bench already "
                                        "exists; take it out, if it is not weirbook's",
                                        s->path));
    }
    same_file(s->path, before, length);
}

/* A view that somebody added is no damage. */
static void views_of_ones_own_come_along(void **state)
{
    struct shelf *s = THIS;
    raw(s, "CREATE VIEW mine AS SELECT count(*) AS n FROM reading");
    good(s, migrate(s, &s->fault));
    assert_string_equal(raw_text(s, "SELECT n FROM mine"), "98");
}

static void a_trigger_of_others_is_refused_before_anything_is_done(void **state)
{
    struct shelf *s = THIS;
    struct fault f = {0};
    raw(s, "CREATE TRIGGER mine AFTER INSERT ON reading BEGIN DELETE FROM detail; END");
    assert_int_equal(migrate(s, &f), FAULT);
    assert_non_null(strstr(f.text, "holds a trigger that is not weirbook's, 'mine'"));
    assert_string_equal(files_beside(s), "plant.book ");
}

/* ---- whatever happens meanwhile ---- */

/* The old book or the migrated one, and no backup but a whole one; then as it was for the next. */
static bool is_whole(struct shelf *s, const uint8_t *before, size_t length, const char *told)
{
    struct arena *kept = s->arena;
    size_t now;
    s->arena = arena_new();
    const uint8_t *bytes = file_bytes(s->arena, s->path, &now);
    bool untouched = now == length && memcmp(bytes, before, length) == 0 &&
                     !stands(arena_print(s->arena, "%s-journal", s->path));
    if (!untouched) /* else there is nothing that opening would put right */
        assert_string_equal(told_of(s), told);
    bool migrated = strcmp(format_in(s), newest(s)) == 0;
    if (migrated)
        assert_string_equal(shelf_check(s), "");
    else
        same_file(s->path, before, length);
    assert_true(!migrated || stands(backup_of(s)));
    if (stands(backup_of(s)))
        same_file(backup_of(s), before, length);
    remove(backup_of(s));
    file_write(s->path, before, length);
    arena_free(s->arena);
    s->arena = kept;
    return migrated;
}

static long stride(enum failing kind)
{
    bool all = getenv("WEIRBOOK_ALL") != NULL;
    return kind == FAIL_MEMORY ? (all ? 5 : 411) : (all ? 1 : 5);
}

static void a_migration_that_fails_leaves_a_whole_book(void **state)
{
    struct shelf *s = THIS;
    size_t length;
    long failed = 0, done = 0;
    const uint8_t *before = file_bytes(s->arena, s->path, &length);
    const char *told = told_of(s);
    for (int turn = 0; turn < 4; turn++) {
        enum failing kind = turn % 2 ? FAIL_FILES : FAIL_MEMORY;
        bool came = true;
        for (long n = 1; came; n += stride(kind)) {
            struct fault f = {0};
            failing_at(kind, n, turn >= 2);
            enum status rc = migrate(s, &f);
            came = failing_came();
            failing_at(kind, 0, false);
            assert_true(rc == OK || (f.set && came));
            assert_null(strstr(files_beside(s), ".part"));
            bool migrated = is_whole(s, before, length, told);
            assert_true(migrated || rc != OK);
            failed += rc != OK;
            done += rc != OK && migrated;
        }
    }
    assert_true(failed > 20);
    print_message("%ld requests failed; %ld of them once the migration was done\n", failed, done);
}

static void reading_an_older_book_is_right_or_a_fault(void **state)
{
    struct shelf *s = THIS;
    size_t length;
    long failed = 0, passed = 0;
    const uint8_t *before = file_bytes(s->arena, s->path, &length);
    const char *right = told_of(s);
    struct arena *kept = s->arena;
    for (int turn = 0; turn < 4; turn++) {
        enum failing kind = turn % 2 ? FAIL_FILES : FAIL_MEMORY;
        bool came = true;
        for (long n = 1; came; n += stride(kind)) {
            struct fault f = {0};
            s->arena = arena_new();
            failing_at(kind, n, turn >= 2);
            const char *told = shelf_told(s, &f);
            came = failing_came();
            failing_at(kind, 0, false);
            assert_true(told || (f.set && came));
            if (told)
                assert_string_equal(told, right);
            failed += !told;
            passed += told && came;
            arena_free(s->arena);
            s->arena = kept;
        }
    }
    same_file(s->path, before, length);
    assert_string_equal(files_beside(s), "plant.book ");
    assert_true(failed > 20);
    print_message("%ld requests failed; %ld more did no harm\n", failed, passed);
}

static void a_kill_at_any_file_operation_leaves_a_whole_book(void **state)
{
    struct shelf *s = THIS;
    size_t length;
    long old = 0, new = 0;
    const uint8_t *before = file_bytes(s->arena, s->path, &length);
    const char *told = told_of(s);
    for (long n = 1;; n += getenv("WEIRBOOK_ALL") ? 1 : 5) {
        int status;
        pid_t child = fork();
        assert_true(child >= 0);
        if (child == 0) {
            struct fault f = {0};
            failing_at(FAIL_KILL, n, false);
            _exit(migrate(s, &f) == OK ? 0 : 1);
        }
        assert_int_equal(waitpid(child, &status, 0), child);
        bool killed = WIFSIGNALED(status);
        assert_true(killed || status == 0);
        bool migrated = is_whole(s, before, length, told);
        old += killed && !migrated;
        new += killed &&migrated;
        assert_true(killed || migrated);
        if (!killed)
            break;
    }
    assert_true(old > 8);
    print_message("%ld kills left the old book, %ld the migrated one\n", old, new);
}

static void a_full_disk_leaves_a_whole_book(void **state)
{
    struct shelf *s = THIS;
    size_t length;
    long tries = 0;
    const uint8_t *before = file_bytes(s->arena, s->path, &length);
    const char *told = told_of(s);
    for (size_t limit = 1024;; limit += getenv("WEIRBOOK_ALL") ? 4096 : 49152, tries++) {
        int status;
        pid_t child = fork();
        assert_true(child >= 0);
        if (child == 0) {
            const struct rlimit most = {limit, limit};
            struct fault f = {0};
            signal(SIGXFSZ, SIG_IGN); /* as the program does */
            if (setrlimit(RLIMIT_FSIZE, &most) != 0)
                _exit(9);
            _exit(migrate(s, &f) == OK ? 0 : f.set ? 1 : 2);
        }
        assert_int_equal(waitpid(child, &status, 0), child);
        assert_true(WIFEXITED(status) && WEXITSTATUS(status) <= 1);
        assert_null(strstr(files_beside(s), ".part"));
        assert_int_equal(is_whole(s, before, length, told), status == 0);
        if (status == 0)
            break;
    }
    assert_true(tries > 5);
}

static void several_at_once_migrate_it_once(void **state)
{
    enum { AT_ONCE = 4 };
    struct shelf *s = THIS;
    pid_t child[AT_ONCE];
    size_t length;
    const uint8_t *before = file_bytes(s->arena, s->path, &length);
    const char *told = told_of(s);
    for (int i = 0; i < AT_ONCE; i++) {
        child[i] = fork();
        assert_true(child[i] >= 0);
        if (child[i] == 0) {
            struct fault f = {0};
            struct book *b = NULL;
            if (book_open(&b, s->path, BOOK_WRITE, &f) != OK)
                _exit(2);
            bool mine = book_migrated(b) != NULL;
            book_close(b);
            _exit(mine);
        }
    }
    int migrated = 0;
    for (int i = 0; i < AT_ONCE; i++) {
        int status;
        assert_int_equal(waitpid(child[i], &status, 0), child[i]);
        assert_true(WIFEXITED(status) && WEXITSTATUS(status) <= 1);
        migrated += WEXITSTATUS(status);
    }
    assert_int_equal(migrated, 1);
    assert_true(is_whole(s, before, length, told));
}

int main(void)
{
#define SHELVED(test) cmocka_unit_test_setup_teardown(test, shelf_setup_format_1, shelf_teardown)
#define SHELVED_2(test)                                                                            \
    {                                                                                              \
#test "_format_2", test, shelf_setup_format_2, shelf_teardown, NULL                        \
    }
    const struct CMUnitTest tests[] = {
        SHELVED(reading_works_on_a_copy_and_leaves_the_book_alone),
        SHELVED(what_is_read_cannot_be_written),
        SHELVED(reads_where_nothing_can_be_written),
        SHELVED(writing_keeps_a_backup_and_migrates),
        SHELVED(a_migrated_book_takes_loads_and_bench_sheets),
        SHELVED(words_are_brought_up_to_date),
        SHELVED(a_backup_that_is_this_book_serves_again),
        SHELVED(another_file_in_the_backups_place_is_refused),
        SHELVED(a_damaged_book_is_not_migrated),
        SHELVED(what_is_in_the_way_is_named),
        SHELVED(views_of_ones_own_come_along),
        SHELVED(a_trigger_of_others_is_refused_before_anything_is_done),
        SHELVED(a_migration_that_fails_leaves_a_whole_book),
        SHELVED(reading_an_older_book_is_right_or_a_fault),
        SHELVED(a_kill_at_any_file_operation_leaves_a_whole_book),
        SHELVED(a_full_disk_leaves_a_whole_book),
        SHELVED(several_at_once_migrate_it_once),
        SHELVED_2(reading_works_on_a_copy_and_leaves_the_book_alone),
        SHELVED_2(writing_keeps_a_backup_and_migrates),
        SHELVED_2(a_migrated_book_takes_acts),
        SHELVED_2(a_migration_that_fails_leaves_a_whole_book),
        SHELVED_2(a_kill_at_any_file_operation_leaves_a_whole_book),
    };
    failing_install();
    return cmocka_run_group_tests(tests, NULL, NULL);
}
