/* backup: a copy of the book as it stands, proved sound before it is put in its place. */
#include "book/store.h"

#include <errno.h>
#include <string.h>
#include <sys/stat.h>

#include "base/poison.h"

/* Whoever may not read the book may not read its copy either. */
static enum status same_rights(const char *from, const char *to, struct fault *f)
{
    struct stat st;
    if (stat(from, &st) == 0 && chmod(to, st.st_mode & 0777) == 0)
        return OK;
    return fault_at(f, NULL, "see that the folder can be written", "cannot make '%s': %s", to,
                    strerror(errno));
}

/* What another writes meanwhile is not waited for longer than the copying takes: the proof goes
 * over the copy, once the book is let go. */
static enum status copy(struct book *b, struct book *to, struct fault *f)
{
    enum status rc = OK;
    TRY(book_settings(to, f));
    TRY(book_exec(to, "PRAGMA journal_mode = DELETE; PRAGMA synchronous = EXTRA", f));
    TRY(book_copy_all(to, b->db, f));
    if (!sqlite3_get_autocommit(b->db))
        TRY(book_exec(b, "COMMIT", f));
    rc = book_proved(to, f);
done:
    return rc;
}

enum status book_backup(struct book *b, const char *path, struct fault *f)
{
    struct arena *a = arena_new();
    const char *beside = place_beside(a, path, f);
    struct book *to = NULL;
    sqlite3 *db = NULL;
    enum status rc = beside ? OK : FAULT;
    bool was_open = !sqlite3_get_autocommit(b->db);
    if (rc != OK)
        goto done;
    TRY(same_rights(b->path, beside, f));
    int code = book_connect(beside, SQLITE_OPEN_READWRITE, &db);
    to = book_on(db, path, BOOK_WRITE);
    if (code != SQLITE_OK)
        TRY(book_fault(to, f));
    rc = copy(b, to, f);
    book_close(to);
    to = NULL;
    if (rc == OK)
        rc = place_keep(a, beside, path, f);
    /* What is read from now on is one state again. */
    if (was_open && sqlite3_get_autocommit(b->db) && book_exec(b, "BEGIN", f) != OK)
        rc = FAULT;
done:
    book_close(to);
    place_drop(a, beside);
    arena_free(a);
    return rc;
}
