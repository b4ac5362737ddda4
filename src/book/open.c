/* open: making a book, opening one, refusing what is none, and the transactions on it. */
#include "book/store.h"

#include <assert.h>
#include <errno.h>
#include <string.h>
#include <sys/stat.h>
#include <sys/vfs.h>
#include <unistd.h>

#include "base/poison.h"

/* Longest cell, row and file name together stay far below; a damaged length does not fill memory.
 */
#define VALUE_BYTES_MOST (16 << 20)

const char *book_sqlite_version(void)
{
    return sqlite3_libversion();
}

/* ---- before SQLite sees the file ---- */

static enum status refuse_file(const char *path, struct fault *f)
{
    struct stat st;
    if (stat(path, &st) != 0) {
        if (errno == ENOENT || errno == ENOTDIR)
            return fault_at(f, NULL, "name the book, or make it with 'weirbook new BOOK DIR'",
                            "there is no book '%s'", path);
        return fault_at(f, NULL, "see that the file and its folder can be read",
                        "cannot open '%s': %s", path, strerror(errno));
    }
    if (S_ISDIR(st.st_mode))
        return fault_at(f, NULL, "name the book file in it", "'%s' is a folder", path);
    if (!S_ISREG(st.st_mode))
        return fault_at(f, NULL, "name a file that 'weirbook new' made",
                        "'%s' is not a weirbook book", path);
    if (st.st_size == 0)
        return fault_at(f, NULL, "name a file that 'weirbook new' made",
                        "'%s' is not a weirbook book: it is empty", path);
    /* Two names have two journals: a load that was cut short would be put right under one name
     * only. */
    if (st.st_nlink > 1)
        return fault_at(f, NULL, "keep one name, or work on a copy",
                        "'%s' has %lu names (hard links)", path, (unsigned long)st.st_nlink);
    return OK;
}

/* statfs(2) lists these numbers. */
const char *book_network_name(unsigned long type)
{
    static const struct {
        unsigned long type;
        const char *name;
    } known[] = {{0x6969, "NFS"},      {0x517b, "SMB"},       {0xff534d42, "SMB"},
                 {0xfe534d42, "SMB"},  {0x564c, "NetWare"},   {0x5346414f, "AFS"},
                 {0x73757245, "Coda"}, {0x01021997, "Plan 9"}};
    for (size_t i = 0; i < NELEM(known); i++)
        if (known[i].type == type)
            return known[i].name;
    return NULL;
}

static void look_at_drive(struct book *b)
{
    struct statfs drive;
    if (statfs(b->path, &drive) != 0)
        return;
    const char *name = book_network_name((unsigned long)drive.f_type & 0xffffffffUL);
    if (name)
        b->warning =
            arena_print(b->arena,
                        "'%s' lies on a network drive (%s), which may not keep two writers "
                        "apart; keep the book on a disk of this machine",
                        b->path, name);
}

const char *book_warning(const struct book *b)
{
    return b->warning;
}

/* SQLite takes such names for something other than a file. */
static const char *plain_name(struct arena *a, const char *path)
{
    bool special = strncmp(path, "file:", 5) == 0 || path[0] == ':';
    return special ? arena_print(a, "./%s", path) : path;
}

static uint32_t big_endian(const uint8_t *at)
{
    return (uint32_t)at[0] << 24 | (uint32_t)at[1] << 16 | (uint32_t)at[2] << 8 | at[3];
}

enum { HEADER_BYTES = 100, AT_TEXT_ENCODING = 56, AT_FORMAT = 60, AT_APPLICATION = 68, UTF_8 = 1 };

/* Reads the header of the file past SQLite, so that a leftover journal beside a file that is no
 * book is not acted upon; and through SQLite's own handle, since closing another one would give up
 * its locks. */
static enum status refuse_header(struct book *b, struct fault *f)
{
    sqlite3_file *file = NULL;
    uint8_t header[HEADER_BYTES] = {0};
    int code = sqlite3_file_control(b->db, "main", SQLITE_FCNTL_FILE_POINTER, &file);
    if (code != SQLITE_OK || !file || !file->pMethods)
        return fault_at(f, NULL, NULL, "cannot read '%s'", b->path);
    code = file->pMethods->xRead(file, header, sizeof header, 0);
    if (code != SQLITE_OK && code != SQLITE_IOERR_SHORT_READ)
        return fault_at(f, NULL, "see that the disk is well", "cannot read '%s'", b->path);
    if (memcmp(header, "SQLite format 3", 16) != 0 ||
        big_endian(header + AT_APPLICATION) != BOOK_APPLICATION_ID)
        return fault_at(f, NULL, "name a file that 'weirbook new' made",
                        "'%s' is not a weirbook book", b->path);
    uint32_t format = big_endian(header + AT_FORMAT);
    if (format > (uint32_t)book_format())
        return fault_at(f, NULL, "use a newer weirbook",
                        "'%s' is a book of format %lu; this program knows formats up to %d",
                        b->path, (unsigned long)format, book_format());
    if (format < 1 || big_endian(header + AT_TEXT_ENCODING) != UTF_8)
        return book_damaged(b, f, "its header is not one that weirbook writes");
    return OK;
}

/* ---- settings ---- */

struct book *book_on(sqlite3 *db, const char *path, enum book_mode mode)
{
    struct arena *a = arena_new();
    struct book *b = arena_alloc(a, sizeof *b);
    *b = (struct book){.arena = a, .path = arena_text(a, path), .db = db, .mode = mode};
    return b;
}

int book_connect(const char *name, int flags, sqlite3 **out)
{
    /* This program has one thread: locks inside SQLite and its bookkeeping of memory are 8 % of a
     * load. Once SQLite is at work they cannot be changed, and it says so; that does no harm. */
    (void)sqlite3_config(SQLITE_CONFIG_SINGLETHREAD);
    (void)sqlite3_config(SQLITE_CONFIG_MEMSTATUS, 0);
    return sqlite3_open_v2(name, out, flags, NULL);
}

enum status book_settings(struct book *b, struct fault *f)
{
    static const struct {
        int what, on;
    } config[] = {
        {SQLITE_DBCONFIG_DEFENSIVE, 1},
        {SQLITE_DBCONFIG_DQS_DML, 0},
        {SQLITE_DBCONFIG_DQS_DDL, 0},
        {SQLITE_DBCONFIG_TRUSTED_SCHEMA, 0},
        {SQLITE_DBCONFIG_ENABLE_FKEY, 1},
        {SQLITE_DBCONFIG_ENABLE_TRIGGER, 1},
        {SQLITE_DBCONFIG_ENABLE_LOAD_EXTENSION, 0},
    };
    for (size_t i = 0; i < NELEM(config); i++)
        if (sqlite3_db_config(b->db, config[i].what, config[i].on, NULL) != SQLITE_OK)
            return book_fault(b, f);
    sqlite3_limit(b->db, SQLITE_LIMIT_LENGTH, VALUE_BYTES_MOST);
    sqlite3_limit(b->db, SQLITE_LIMIT_ATTACHED, 0);
    sqlite3_busy_timeout(b->db, BOOK_WAIT_MS);
    /* Rows come in the order of their files and go out in the order of their columns: 64 MiB hold
     * the pages that either way comes back to. */
    return book_exec(b, "PRAGMA cell_size_check = ON; PRAGMA cache_size = -65536", f);
}

/* A load is one transaction, with a journal that is gone when it ends: the book is one file. EXTRA,
 * not FULL: the folder is synced too once the journal is gone, or a power cut could take back a
 * load that was told as done. */
static enum status writing_settings(struct book *b, struct fault *f)
{
    return book_exec(b, "PRAGMA journal_mode = DELETE; PRAGMA synchronous = EXTRA", f);
}

/* ---- opening ---- */

static enum status refuse_unwritable(struct book *b, struct fault *f)
{
    const char *slash = strrchr(b->path, '/');
    const char *folder =
        slash ? arena_bytes(b->arena, b->path, (size_t)(slash - b->path) + 1) : ".";
    if (sqlite3_db_readonly(b->db, "main") == 1)
        return fault_at(f, NULL, "let yourself write the file, or work on a copy",
                        "'%s' cannot be written", b->path);
    if (access(folder, W_OK | X_OK) != 0)
        return fault_at(f, NULL, "let yourself write the folder, or work on a copy",
                        "'%s' cannot be written: its folder must take a journal beside it",
                        b->path);
    return OK;
}

/* The first look under a lock: a load that was killed is rolled back here. A book for reading stays
 * as it is now until it is closed: all that a command shows comes from one state. */
static enum status first_look(struct book *b, struct fault *f)
{
    sqlite3_stmt *s = NULL;
    bool row;
    enum status rc = OK;
    if (b->mode == BOOK_READ)
        TRY(book_exec(b, "PRAGMA query_only = ON; BEGIN", f));
    TRY(book_statement(b, LAST_BATCH, &s, f));
    TRY(book_step(b, s, &row, f));
    sqlite3_reset(s);
    /* Its format may have been another one before the roll-back. */
    TRY(refuse_header(b, f));
    TRY(book_refuse_triggers(b, f));
done:
    return rc;
}

enum status book_open(struct book **out, const char *path, enum book_mode mode, struct fault *f)
{
    sqlite3 *db = NULL;
    int format = 0;
    enum status rc = OK;
    *out = NULL;
    struct book *b = NULL;
    TRY(refuse_file(path, f));
    b = book_on(NULL, path, mode);
    sqlite3_config(SQLITE_CONFIG_MEMSTATUS, 0);
    sqlite3_config(SQLITE_CONFIG_SINGLETHREAD);
    /* Read-write for reading too, or a load that was killed could not be rolled back; where that is
     * not allowed SQLite opens the file for reading alone. */
    int code = book_connect(plain_name(b->arena, path), SQLITE_OPEN_READWRITE, &db);
    b->db = db;
    if (code != SQLITE_OK)
        TRY(book_fault(b, f));
    TRY(refuse_header(b, f));
    if (mode == BOOK_WRITE)
        TRY(refuse_unwritable(b, f));
    TRY(book_settings(b, f));
    if (mode == BOOK_WRITE)
        TRY(writing_settings(b, f));
    TRY(first_look(b, f));
    TRY(book_format_of(b, &format, f));
    if (format < book_format())
        TRY(mode == BOOK_READ ? older_copied(b, f) : older_migrated(b, f));
    look_at_drive(b);
    *out = b;
done:
    if (rc != OK)
        book_close(b);
    return rc;
}

void book_close(struct book *b)
{
    if (!b)
        return;
    book_rollback(b);
    for (size_t i = 0; i < STATEMENTS; i++)
        sqlite3_finalize(b->statement[i]);
    int code = sqlite3_close(b->db);
    assert(code == SQLITE_OK);
    (void)code;
    arena_free(b->arena);
}

/* ---- transactions ---- */

enum status book_begin(struct book *b, struct fault *f)
{
    assert(b->mode == BOOK_WRITE && sqlite3_get_autocommit(b->db));
    return book_exec(b, "BEGIN IMMEDIATE", f);
}

enum status book_commit(struct book *b, struct fault *f)
{
    assert(!sqlite3_get_autocommit(b->db));
    return book_exec(b, "COMMIT", f);
}

void book_rollback(struct book *b)
{
    load_drop(b);
    if (b->db && !sqlite3_get_autocommit(b->db))
        (void)sqlite3_exec(b->db, "ROLLBACK", NULL, NULL, NULL);
    /* Where writing failed half way (a full disk) SQLite leaves the journal for the next look at
     * the book: that is now. What cannot be put right now is put right by whoever opens the book
     * next. */
    if (b->half_written)
        (void)sqlite3_exec(b->db, "PRAGMA user_version", NULL, NULL, NULL);
    b->half_written = false;
}
