/* older: books of older formats. For reading, a copy is brought to the newest format and is gone
 * with the command. For writing, the book itself is, once it is proved sound and kept as it was. */
#include "book/store.h"

#include <errno.h>
#include <fcntl.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

#include "base/poison.h"

enum { PIECE_BYTES = 1 << 16 };

/* ---- for reading: a copy ---- */

static enum status copy_all(struct book *b, sqlite3 *from, struct fault *f)
{
    sqlite3_backup *copy = sqlite3_backup_init(b->db, "main", from, "main");
    if (!copy)
        return book_fault(b, f);
    int code = sqlite3_backup_step(copy, -1);
    int end = sqlite3_backup_finish(copy);
    if (code == SQLITE_DONE && end == SQLITE_OK)
        return OK;
    return book_fault(b, f);
}

/* A copy at `name`, of the newest format. */
static enum status make_copy(struct book *b, sqlite3 *from, const char *name, struct fault *f)
{
    enum status rc = OK;
    b->db = NULL;
    int code = book_connect(name, SQLITE_OPEN_READWRITE | SQLITE_OPEN_CREATE, &b->db);
    b->mode = BOOK_WRITE; /* of the copy, until it is what is to be read */
    if (code != SQLITE_OK)
        TRY(book_fault(b, f));
    TRY(book_settings(b, f));
    TRY(copy_all(b, from, f));
    TRY(book_migrate(b, f));
done:
    b->mode = BOOK_READ;
    b->half_written = false;
    return rc;
}

static void drop_statements(struct book *b)
{
    for (size_t i = 0; i < STATEMENTS; i++) {
        sqlite3_finalize(b->statement[i]);
        b->statement[i] = NULL;
    }
}

/* "" is a file of SQLite's own in the folder for temporary files (TMPDIR), without a name from the
 * start. Where none can be had, or it is full, memory must do. */
enum status older_copied(struct book *b, struct fault *f)
{
    sqlite3 *from = b->db;
    enum status rc = OK;
    drop_statements(b);
    rc = make_copy(b, from, "", f);
    if (rc != OK && (b->last_code == SQLITE_IOERR || b->last_code == SQLITE_FULL ||
                     b->last_code == SQLITE_CANTOPEN)) {
        drop_statements(b);
        sqlite3_close(b->db);
        fault_clear(f);
        rc = make_copy(b, from, ":memory:", f);
    }
    sqlite3_close(from); /* its one state has been copied; what waits to write it may go on */
    return rc == OK ? book_exec(b, "PRAGMA query_only = ON; BEGIN", f) : rc;
}

/* ---- for writing: a backup ---- */

/* The book's own bytes, through SQLite's handle: closing another one would give up its locks. */
static enum status own_file(struct book *b, sqlite3_file **file, sqlite3_int64 *size,
                            struct fault *f)
{
    int code = sqlite3_file_control(b->db, "main", SQLITE_FCNTL_FILE_POINTER, file);
    if (code == SQLITE_OK && *file && (*file)->pMethods &&
        (*file)->pMethods->xFileSize(*file, size) == SQLITE_OK)
        return OK;
    return fault_at(f, NULL, "see that the disk is well", "cannot read '%s'", b->path);
}

static enum status read_piece(struct book *b, sqlite3_file *file, sqlite3_int64 at,
                              sqlite3_int64 size, uint8_t piece[PIECE_BYTES], int *length,
                              struct fault *f)
{
    *length = size - at < PIECE_BYTES ? (int)(size - at) : PIECE_BYTES;
    if (file->pMethods->xRead(file, piece, *length, at) == SQLITE_OK)
        return OK;
    return fault_at(f, NULL, "see that the disk is well", "cannot read '%s'", b->path);
}

static enum status write_backup(struct book *b, const char *name, sqlite3_file *file,
                                sqlite3_int64 size, struct fault *f)
{
    uint8_t *piece = arena_alloc(b->arena, PIECE_BYTES);
    struct beside out;
    struct stat st;
    int length = 0;
    enum status rc = OK;
    TRY(beside_open(b->arena, name, &out, f));
    /* Whoever may not read the book may not read its backup either. */
    if (stat(b->path, &st) != 0 || fchmod(out.fd, st.st_mode & 0777) != 0)
        TRY(beside_fault(&out, errno, f));
    for (sqlite3_int64 at = 0; at < size; at += length) {
        TRY(read_piece(b, file, at, size, piece, &length, f));
        TRY(beside_add(&out, piece, (size_t)length, f));
    }
    TRY(beside_keep(&out, f));
done:
    beside_drop(&out);
    return rc;
}

static bool read_exactly(int fd, uint8_t *at, size_t length)
{
    while (length > 0) {
        ssize_t got = read(fd, at, length);
        if (got < 0 && errno == EINTR)
            continue;
        if (got <= 0)
            return false;
        at += got;
        length -= (size_t)got;
    }
    return true;
}

/* Whether a file that stands there is this book, byte for byte: a migration was cut short after its
 * backup. */
static enum status compare_backup(struct book *b, const char *name, sqlite3_file *file,
                                  sqlite3_int64 size, bool *same, struct fault *f)
{
    uint8_t *mine = arena_alloc(b->arena, PIECE_BYTES),
            *theirs = arena_alloc(b->arena, PIECE_BYTES);
    struct stat st;
    int length = 0;
    enum status rc = OK;
    *same = false;
    int fd = open(name, O_RDONLY | O_NOFOLLOW | O_NONBLOCK | O_CLOEXEC);
    if (fd < 0 || fstat(fd, &st) != 0 || !S_ISREG(st.st_mode) || st.st_size != size)
        goto done;
    for (sqlite3_int64 at = 0; at < size; at += length) {
        TRY(read_piece(b, file, at, size, mine, &length, f));
        if (!read_exactly(fd, theirs, (size_t)length) || memcmp(mine, theirs, (size_t)length) != 0)
            goto done;
    }
    *same = true;
done:
    if (fd >= 0)
        close(fd);
    return rc;
}

static enum status keep_backup(struct book *b, const char *name, struct fault *f)
{
    sqlite3_file *file = NULL;
    sqlite3_int64 size = 0;
    struct stat st;
    bool same = false;
    enum status rc = OK;
    TRY(own_file(b, &file, &size, f));
    if (lstat(name, &st) != 0) {
        rc = write_backup(b, name, file, size, f);
        goto done;
    }
    TRY(compare_backup(b, name, file, size, &same, f));
    if (!same)
        rc = fault_at(f, NULL, "move it away, then do it again",
                      "'%s' stands where the backup of '%s' is to be, and is not the same book",
                      name, b->path);
done:
    return rc;
}

/* One transaction from the first look at the format to the end: nobody writes between the backup
 * and the migration. Until it is committed the file stands as it was, since no page is written
 * early (cache_spill), so the backup is made of the old book's own bytes. */
enum status older_migrated(struct book *b, struct fault *f)
{
    const char *name = NULL;
    int version = 0;
    enum status rc = OK;
    TRY(book_exec(b, "PRAGMA cache_spill = OFF", f));
    TRY(book_begin(b, f));
    TRY(book_format_of(b, &version, f));
    if (version < book_format()) { /* else another program was quicker */
        name = arena_print(b->arena, "%s.format-%d.backup", b->path, version);
        TRY(book_steps(b, f));
        TRY(book_proved(b, f));
        TRY(keep_backup(b, name, f));
    }
    TRY(book_commit(b, f));
    TRY(book_exec(b, "PRAGMA cache_spill = ON", f));
    b->migrated = name;
done:
    if (rc != OK)
        book_rollback(b);
    return rc;
}

const char *book_migrated(const struct book *b)
{
    return b->migrated;
}
