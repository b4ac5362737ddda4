/* schema: the formats of the book, the steps between them, and triggers that are not ours. */
#include "book/embedded.h"
#include "book/store.h"

#include <assert.h>
#include <string.h>

#include "base/poison.h"

/* Each file ends in the user_version of its step, which stands or falls with the rest of it. */
const struct migration book_migrations[] = {
    {1, "001-book.sql"},
    {2, "002-bench.sql"},
};
const size_t book_migrations_count = NELEM(book_migrations);

int book_format(void)
{
    return book_migrations[NELEM(book_migrations) - 1].version;
}

const char *book_file(const char *name)
{
    size_t i = 0;
    while (i < book_files_count && !text_equal(book_files[i].name, name))
        i++;
    assert(i < book_files_count); /* every migration's file is compiled in */
    return (const char *)book_files[i].bytes;
}

/* Words that stand in the code once, and in the book for its foreign keys and for people. */
static enum status add_words(struct book *b, struct fault *f)
{
    sqlite3_stmt *s = NULL;
    enum status rc = OK;
    for (int i = 0; i < QUALIFIERS; i++) {
        TRY(book_statement(b, ADD_QUALIFIER, &s, f));
        bind_int(s, 1, i);
        bind_text(s, 2, qualifier_words[i]);
        TRY(book_run(b, s, f));
    }
    for (size_t i = 0; i < REASON_COUNT; i++) {
        TRY(book_statement(b, ADD_REASON, &s, f));
        bind_text(s, 1, reason_words[i]);
        bind_text(s, 2, reason_todo[i]);
        TRY(book_run(b, s, f));
    }
done:
    return rc;
}

enum status book_format_of(struct book *b, int *version, struct fault *f)
{
    sqlite3_stmt *s = NULL;
    bool row;
    if (book_statement(b, GET_FORMAT, &s, f) != OK || book_step(b, s, &row, f) != OK)
        return FAULT;
    *version = row ? sqlite3_column_int(s, 0) : 0;
    sqlite3_reset(s);
    return OK;
}

static enum status run_step(struct book *b, const struct migration *m, struct fault *f)
{
    if (sqlite3_exec(b->db, book_file(m->file), NULL, NULL, NULL) == SQLITE_OK)
        return OK;
    if (sqlite3_errcode(b->db) != SQLITE_ERROR)
        return book_fault(b, f);
    return fault_at(f, NULL, "take it out, if it is not weirbook's",
                    "cannot bring '%s' to format %d: %s", b->path, m->version,
                    sqlite3_errmsg(b->db));
}

enum status book_steps(struct book *b, struct fault *f)
{
    int version = 0;
    enum status rc = OK;
    TRY(book_format_of(b, &version, f));
    if (version == book_format())
        return OK;
    for (size_t i = 0; i < NELEM(book_migrations); i++)
        if (book_migrations[i].version > version)
            TRY(run_step(b, &book_migrations[i], f));
    rc = add_words(b, f);
done:
    return rc;
}

enum status book_migrate(struct book *b, struct fault *f)
{
    enum status rc = OK;
    TRY(book_begin(b, f));
    TRY(book_steps(b, f));
    TRY(book_commit(b, f));
done:
    if (rc != OK)
        book_rollback(b);
    return rc;
}

/* SQLite keeps a trigger's text as it was written, so ours stand in one of our files, word for
 * word. */
static bool trigger_is_ours(const char *sql)
{
    for (size_t i = 0; i < NELEM(book_migrations); i++) {
        const char *at = strstr(book_file(book_migrations[i].file), sql);
        if (at && at[strlen(sql)] == ';')
            return true;
    }
    return false;
}

enum status book_refuse_triggers(struct book *b, struct fault *f)
{
    sqlite3_stmt *s = NULL;
    bool row;
    if (book_statement(b, CHECK_TRIGGERS, &s, f) != OK)
        return FAULT;
    for (;;) {
        if (book_step(b, s, &row, f) != OK)
            return FAULT;
        if (!row)
            return OK;
        const char *sql = column_text(s, 1);
        if (*sql && trigger_is_ours(sql))
            continue;
        fault_at(f, NULL, "take it out, or go back to a sound copy",
                 "'%s' holds a trigger that is not weirbook's, '%s'", b->path, column_text(s, 0));
        sqlite3_reset(s);
        return FAULT;
    }
}
