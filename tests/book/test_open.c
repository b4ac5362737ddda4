/* Opening: what is refused, in which words, and that it stays untouched; and books that cannot be
 * written. */
#include "book/books.h"
#include "book/store.h"

#include <errno.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <sys/wait.h>
#include <unistd.h>

#define THIS ((struct shelf *)*state)

/* Opening gives this fault, both ways, and leaves the file as it is. */
static void refused(struct shelf *s, const char *name, const char *said)
{
    size_t length = 0;
    struct stat st;
    bool is_file = stat(name, &st) == 0 && S_ISREG(st.st_mode);
    const uint8_t *before = is_file ? file_bytes(s->arena, name, &length) : NULL;
    for (enum book_mode mode = BOOK_READ; mode <= BOOK_WRITE; mode++) {
        struct book *b = NULL;
        assert_int_equal(book_open(&b, name, mode, &s->fault), FAULT);
        assert_null(b);
        assert_string_equal(s->fault.text, said);
        fault_clear(&s->fault);
        if (is_file)
            same_file(name, before, length);
    }
}

static void put_bytes(const char *name, long at, const void *bytes, size_t length)
{
    FILE *f = fopen(name, "r+b");
    assert_non_null(f);
    assert_int_equal(fseek(f, at, SEEK_SET), 0);
    assert_int_equal(fwrite(bytes, 1, length, f), length);
    assert_int_equal(fclose(f), 0);
}

static void what_is_no_book_is_refused_and_untouched(void **state)
{
    struct shelf *s = THIS;
    char text[4000];
    assert_int_equal(chdir(s->folder), 0);
    refused(
        s, "missing.book",
        "there is no book 'missing.book'; name the book, or make it with 'weirbook new BOOK DIR'");
    refused(
        s, "plant.book/x",
        "there is no book 'plant.book/x'; name the book, or make it with 'weirbook new BOOK DIR'");
    refused(s, ".", "'.' is a folder; name the book file in it");
    file_write("empty.book", "", 0);
    refused(
        s, "empty.book",
        "'empty.book' is not a weirbook book: it is empty; name a file that 'weirbook new' made");
    file_write("x.csv", "date,point\n", 11);
    refused(s, "x.csv", "'x.csv' is not a weirbook book; name a file that 'weirbook new' made");
    memset(text, 'x', sizeof text);
    file_write("long.csv", text, sizeof text);
    refused(s, "long.csv",
            "'long.csv' is not a weirbook book; name a file that 'weirbook new' made");
    assert_int_equal(mkfifo("fifo", 0600), 0);
    refused(s, "fifo", "'fifo' is not a weirbook book; name a file that 'weirbook new' made");
    refused(s, "/dev/null",
            "'/dev/null' is not a weirbook book; name a file that 'weirbook new' made");
}

static void another_programs_database_is_refused_with_its_journal(void **state)
{
    struct shelf *s = THIS;
    assert_int_equal(chdir(s->folder), 0);
    sqlite3 *db = NULL;
    assert_int_equal(sqlite3_open("other.db", &db), SQLITE_OK);
    assert_int_equal(sqlite3_exec(db, "CREATE TABLE t (x)", NULL, NULL, NULL), SQLITE_OK);
    sqlite3_close(db);
    file_write("other.db-journal", "a journal", 9);
    refused(s, "other.db",
            "'other.db' is not a weirbook book; name a file that 'weirbook new' made");
    same_file("other.db-journal", (const uint8_t *)"a journal", 9);
}

static void a_newer_book_is_refused_by_its_number(void **state)
{
    struct shelf *s = THIS;
    assert_int_equal(chdir(s->folder), 0);
    raw(s, "PRAGMA user_version = 7");
    refused(s, "plant.book",
            "'plant.book' is a book of format 7; this program knows formats up to 2; use a newer "
            "weirbook");
    raw(s, "PRAGMA user_version = 0");
    refused(s, "plant.book",
            "'plant.book' is damaged: its header is not one that weirbook writes; run 'weirbook "
            "check', and "
            "go back to a sound copy");
}

static void hard_links_are_refused(void **state)
{
    struct shelf *s = THIS;
    assert_int_equal(chdir(s->folder), 0);
    assert_int_equal(link("plant.book", "second.book"), 0);
    refused(s, "plant.book",
            "'plant.book' has 2 names (hard links); keep one name, or work on a copy");
    assert_int_equal(unlink("second.book"), 0);
    assert_int_equal(symlink("plant.book", "second.book"), 0); /* one file still */
    struct book *b = NULL;
    good(s, book_open(&b, "second.book", BOOK_WRITE, &s->fault));
    book_close(b);
}

static void foreign_triggers_are_refused(void **state)
{
    struct shelf *s = THIS;
    assert_int_equal(chdir(s->folder), 0);
    raw(s, "CREATE TRIGGER mine AFTER INSERT ON reading BEGIN DELETE FROM detail; END");
    refused(
        s, "plant.book",
        "'plant.book' holds a trigger that is not weirbook's, 'mine'; take it out, or go back to a "
        "sound copy");
    raw(s, "DROP TRIGGER mine; DROP TRIGGER reading_kept; "
           "CREATE TRIGGER reading_kept BEFORE DELETE ON reading BEGIN SELECT 1; END");
    refused(s, "plant.book",
            "'plant.book' holds a trigger that is not weirbook's, 'reading_kept'; take it out, or "
            "go back to "
            "a sound copy");
}

static void a_cut_off_book_is_damaged(void **state)
{
    struct shelf *s = THIS;
    assert_int_equal(chdir(s->folder), 0);
    assert_int_equal(truncate("plant.book", 8192), 0);
    struct book *b = NULL;
    assert_int_equal(book_open(&b, "plant.book", BOOK_READ, &s->fault), FAULT);
    assert_string_equal(
        s->fault.text,
        "'plant.book' is damaged: database disk image is malformed; run 'weirbook check', and "
        "go back to a sound copy");
    fault_clear(&s->fault);
    put_bytes("plant.book", 16, "\xff\xff", 2); /* no page size */
    assert_int_equal(book_open(&b, "plant.book", BOOK_READ, &s->fault), FAULT);
    assert_string_equal(
        s->fault.text,
        "'plant.book' is damaged: file is not a database; run 'weirbook check', and go back to "
        "a sound copy");
    fault_clear(&s->fault);
}

static void a_connection_is_set_as_it_must_be(void **state)
{
    static const struct {
        const char *pragma;
        int read, write;
    } settings[] = {
        {"PRAGMA foreign_keys", 1, 1},    {"PRAGMA trusted_schema", 0, 0},
        {"PRAGMA cell_size_check", 1, 1}, {"PRAGMA synchronous", -1, 3},
        {"PRAGMA query_only", 1, 0},      {"PRAGMA busy_timeout", 5000, 5000},
        {"PRAGMA page_size", 8192, 8192},
    };
    struct shelf *s = THIS;
    for (enum book_mode mode = BOOK_READ; mode <= BOOK_WRITE; mode++) {
        struct book *b = shelf_open(s, mode);
        sqlite3 *db = b->db;
        for (size_t i = 0; i < NELEM(settings); i++) {
            int wanted = mode == BOOK_READ ? settings[i].read : settings[i].write;
            sqlite3_stmt *q = NULL;
            assert_int_equal(sqlite3_prepare_v2(db, settings[i].pragma, -1, &q, NULL), SQLITE_OK);
            assert_int_equal(sqlite3_step(q), SQLITE_ROW);
            if (wanted >= 0)
                assert_int_equal(sqlite3_column_int(q, 0), wanted);
            sqlite3_finalize(q);
        }
        static const int off[] = {SQLITE_DBCONFIG_DQS_DML, SQLITE_DBCONFIG_DQS_DDL,
                                  SQLITE_DBCONFIG_TRUSTED_SCHEMA};
        int on = -1;
        for (size_t i = 0; i < NELEM(off); i++) {
            assert_int_equal(sqlite3_db_config(db, off[i], -1, &on), SQLITE_OK);
            assert_int_equal(on, 0);
        }
        assert_int_equal(sqlite3_db_config(db, SQLITE_DBCONFIG_DEFENSIVE, -1, &on), SQLITE_OK);
        assert_int_equal(on, 1);
        book_close(b);
    }
    assert_string_equal(raw_text(s, "PRAGMA application_id"), "1466263922");
    assert_string_equal(raw_text(s, "PRAGMA journal_mode"), "delete");
    assert_int_equal(book_format(), 2);
    assert_string_equal(book_sqlite_version(), sqlite3_libversion());
}

/* ---- books that cannot be written: as somebody without the rights of root ---- */

/* What a child that gave up its rights says; it may fail to open, too. */
static const char *as_nobody(struct shelf *s, const char *work(struct shelf *s))
{
    int pipes[2];
    char said[2000] = "";
    assert_int_equal(pipe(pipes), 0);
    pid_t child = fork();
    assert_true(child >= 0);
    if (child == 0) {
        if (getuid() == 0 && (setgid(65534) != 0 || setuid(65534) != 0))
            _exit(2);
        const char *told = work(s);
        ssize_t wrote = write(pipes[1], told, strnlen(told, sizeof said - 1));
        _exit(wrote >= 0 ? 0 : 1);
    }
    close(pipes[1]);
    size_t length = 0;
    for (ssize_t got = 1; got > 0 && length<sizeof said - 1; length += got> 0 ? (size_t)got : 0)
        got = read(pipes[0], said + length, sizeof said - 1 - length);
    said[length] = '\0';
    close(pipes[0]);
    int status;
    assert_int_equal(waitpid(child, &status, 0), child);
    assert_int_equal(status, 0);
    return arena_text(s->arena, said);
}

static const char *open_to_write(struct shelf *s)
{
    struct book *b = NULL;
    return book_open(&b, "plant.book", BOOK_WRITE, &s->fault) == OK ? "opened" : s->fault.text;
}

static const char *read_all(struct shelf *s)
{
    const char *told = shelf_told(s, &s->fault);
    return told ? strstr(told, "2025-03-05") : s->fault.text;
}

static void a_book_that_cannot_be_written_can_be_read(void **state)
{
    struct shelf *s = THIS;
    size_t length;
    shelf_load(s, "a.csv", NULL, "EFF BOD5 2025-03-05 30 mg/L");
    const uint8_t *before = file_bytes(s->arena, s->path, &length);
    assert_int_equal(chdir(s->folder), 0);
    assert_int_equal(chmod(s->path, 0444), 0);
    assert_int_equal(chmod(s->folder, 0777), 0);
    assert_non_null(strstr(as_nobody(s, read_all), "'30' plain"));
    assert_string_equal(
        as_nobody(s, open_to_write),
        "'plant.book' cannot be written; let yourself write the file, or work on a copy");
    assert_int_equal(chmod(s->path, 0666), 0);
    assert_int_equal(chmod(s->folder, 0555), 0);
    assert_non_null(strstr(as_nobody(s, read_all), "'30' plain"));
    assert_string_equal(as_nobody(s, open_to_write),
                        "'plant.book' cannot be written: its folder must take a journal beside "
                        "it; let yourself write the folder, or work on a copy");
    assert_int_equal(chmod(s->path, 0000), 0);
    assert_string_equal(as_nobody(s, open_to_write),
                        "cannot open 'plant.book': Permission denied; see that the file and its "
                        "folder can be read and written");
    assert_int_equal(chmod(s->path, 0644), 0);
    assert_int_equal(chmod(s->folder, 0755), 0);
    same_file(s->path, before, length);
}

/* Leaves the book half written with a journal beside it, as a kill in mid-load does. */
static void leave_half_written(struct shelf *s)
{
    pid_t child = fork();
    assert_true(child >= 0);
    if (child == 0) {
        sqlite3 *db = NULL;
        if (sqlite3_open(s->path, &db) != SQLITE_OK)
            _exit(1);
        _exit(
            sqlite3_exec(
                db,
                "PRAGMA cache_size = 1; BEGIN IMMEDIATE; DROP TRIGGER detail_kept; "
                "WITH RECURSIVE n (i) AS (SELECT 1 UNION ALL SELECT i + 1 FROM n WHERE i < 5000) "
                "INSERT INTO detail (unit, mdl, rl, method, analyst, collected_by, analyzed, note) "
                "SELECT 1, '', '', i, 'x', 'x', 'x', hex(zeroblob(50)) FROM n",
                NULL, NULL, NULL) == SQLITE_OK
                ? 0
                : 2);
    }
    int status;
    assert_int_equal(waitpid(child, &status, 0), child);
    assert_int_equal(status, 0);
    assert_int_equal(access("plant.book-journal", F_OK), 0);
}

static void a_half_written_book_is_put_right_where_it_can_be_and_refused_where_not(void **state)
{
    struct shelf *s = THIS;
    shelf_load(s, "a.csv", NULL, "EFF BOD5 2025-03-05 30 mg/L");
    assert_int_equal(chdir(s->folder), 0);
    leave_half_written(s);
    assert_int_equal(chmod(s->path, 0444), 0);
    assert_int_equal(chmod("plant.book-journal", 0444), 0);
    assert_int_equal(chmod(s->folder, 0555), 0);
    assert_string_equal(
        as_nobody(s, read_all),
        arena_print(s->arena,
                    "'%s' was left half written, and the file '%s-journal' that puts it right "
                    "cannot be used "
                    "here; copy both to a folder that can be written, and open the copy there",
                    s->path, s->path));
    assert_int_equal(access("plant.book-journal", F_OK), 0);
    assert_int_equal(chmod(s->folder, 0755), 0);
    assert_int_equal(chmod(s->path, 0644), 0);
    assert_int_equal(chmod("plant.book-journal", 0644), 0);
    assert_non_null(strstr(read_all(s), "'30' plain")); /* reading alone puts it right */
    assert_int_equal(access("plant.book-journal", F_OK), -1);
    assert_string_equal(shelf_check(s), "");
}

/* ---- somebody else at work: waited for, then named ---- */

static sqlite3 *holding(struct shelf *s, const char *sql)
{
    sqlite3 *db = NULL;
    assert_int_equal(sqlite3_open(s->path, &db), SQLITE_OK);
    assert_int_equal(sqlite3_exec(db, sql, NULL, NULL, NULL), SQLITE_OK);
    return db;
}

static void a_book_being_written_is_waited_for_and_then_named(void **state)
{
    struct shelf *s = THIS;
    struct book *b = NULL;
    assert_int_equal(chdir(s->folder), 0);
    sqlite3 *db = holding(s, "BEGIN EXCLUSIVE");
    double began = clock_seconds();
    assert_int_equal(book_open(&b, "plant.book", BOOK_READ, &s->fault), FAULT);
    assert_true(clock_seconds() - began > 4.5);
    assert_string_equal(
        s->fault.text,
        "'plant.book' is being written by another program; try again when it is done");
    fault_clear(&s->fault);
    sqlite3_close(db);

    db = holding(s, "BEGIN IMMEDIATE");
    b = shelf_open(s, BOOK_READ); /* readers pass until it is done */
    book_close(b);
    good(s, book_open(&b, "plant.book", BOOK_WRITE, &s->fault));
    assert_int_equal(book_load_begin(b, s->plant, &tester, false, &s->fault), FAULT);
    assert_string_equal(
        s->fault.text,
        "'plant.book' is being written by another program; try again when it is done");
    fault_clear(&s->fault);
    sqlite3_close(db);
    good(s, book_load_begin(b, s->plant, &tester, false, &s->fault));
    book_close(b);
}

static void a_book_being_read_is_waited_for_and_stays_as_it_was(void **state)
{
    struct shelf *s = THIS;
    struct book *b = NULL;
    size_t length;
    assert_int_equal(chdir(s->folder), 0);
    const uint8_t *before = file_bytes(s->arena, s->path, &length);
    sqlite3 *db = holding(s, "BEGIN; SELECT count(*) FROM batch");
    good(s, book_open(&b, "plant.book", BOOK_WRITE, &s->fault));
    good(s, book_load_begin(b, s->plant, &tester, false, &s->fault));
    add_lines(s, b, "a.csv", "EFF BOD5 2025-03-05 30 mg/L");
    assert_int_equal(end_load(s, b, "a.csv", NULL, 1), FAULT);
    assert_string_equal(s->fault.text,
                        "'plant.book' is being read by another program; try again when it is done");
    fault_clear(&s->fault);
    sqlite3_close(db);
    same_file(s->path, before, length);
    book_close(b);
}

/* Loads a row once a byte comes through the pipe. In a process of its own from the start: one that
 * is forked while a book is open would share locks it does not hold. */
static pid_t loader_waiting(struct shelf *s, int start[2])
{
    assert_int_equal(pipe(start), 0);
    pid_t child = fork();
    assert_true(child >= 0);
    if (child > 0)
        return child;
    struct book *b = NULL;
    struct fault f = {0};
    char byte;
    if (read(start[0], &byte, 1) != 1 || book_open(&b, s->path, BOOK_WRITE, &f) != OK ||
        book_load_begin(b, s->plant, &tester, false, &f) != OK)
        _exit(1);
    add_lines(s, b, "a.csv", "EFF BOD5 2025-03-05 30 mg/L");
    _exit(end_load(s, b, "a.csv", NULL, 1) == OK ? 0 : 2);
}

static day_t first_day(struct shelf *s, struct book *b)
{
    day_t first, last;
    good(s, book_extent(b, &first, &last, &s->fault));
    return first;
}

/* What one command shows comes from one state, whatever is loaded meanwhile. */
static void a_reader_sees_one_state(void **state)
{
    struct shelf *s = THIS;
    int start[2], status;
    pid_t child = loader_waiting(s, start);
    struct book *reader = shelf_open(s, BOOK_READ);
    assert_int_equal(first_day(s, reader), DAY_NONE);
    assert_int_equal(write(start[1], "x", 1), 1);
    usleep(500000);
    assert_int_equal(first_day(s, reader), DAY_NONE);
    book_close(reader);
    assert_int_equal(waitpid(child, &status, 0), child);
    assert_int_equal(status, 0);
    close(start[0]);
    close(start[1]);
    reader = shelf_open(s, BOOK_READ);
    assert_int_not_equal(first_day(s, reader), DAY_NONE);
    book_close(reader);
}

/* The numbers are those of statfs(2) and linux/magic.h. A book on this machine's own disk has no
 * warning. */
static void network_drives_are_known_by_their_numbers(void **state)
{
    struct shelf *s = THIS;
    assert_string_equal(book_network_name(0x6969), "NFS");
    assert_string_equal(book_network_name(0xff534d42), "SMB");
    assert_string_equal(book_network_name(0xfe534d42), "SMB");
    assert_null(book_network_name(0xef53));     /* ext4 */
    assert_null(book_network_name(0x01021994)); /* tmpfs */
    struct book *book = shelf_open(s, BOOK_READ);
    assert_null(book_warning(book));
    book_close(book);
}

int main(void)
{
#define SHELVED(test) cmocka_unit_test_setup_teardown(test, shelf_setup, shelf_teardown)
    const struct CMUnitTest tests[] = {
        SHELVED(what_is_no_book_is_refused_and_untouched),
        SHELVED(another_programs_database_is_refused_with_its_journal),
        SHELVED(a_newer_book_is_refused_by_its_number),
        SHELVED(hard_links_are_refused),
        SHELVED(foreign_triggers_are_refused),
        SHELVED(a_cut_off_book_is_damaged),
        SHELVED(a_connection_is_set_as_it_must_be),
        SHELVED(a_book_that_cannot_be_written_can_be_read),
        SHELVED(a_half_written_book_is_put_right_where_it_can_be_and_refused_where_not),
        SHELVED(a_book_being_written_is_waited_for_and_then_named),
        SHELVED(a_book_being_read_is_waited_for_and_stays_as_it_was),
        SHELVED(a_reader_sees_one_state),
        SHELVED(network_drives_are_known_by_their_numbers),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
