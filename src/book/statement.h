/* statement: every statement this program runs on a book, by name, prepared once; and what goes
 * wrong in SQLite, put into words. No SQL is ever put together at run time. */
#ifndef WEIRBOOK_BOOK_STATEMENT_H
#define WEIRBOOK_BOOK_STATEMENT_H

#include "base/base.h"
#include "plant/plant.h"

#include <sqlite3.h>

enum statement {
    /* batches and the chain */
    LAST_BATCH,
    LAST_HEAD,
    ADD_BATCH,
    ADD_LOAD,
    ADD_DESCRIPTION,
    ADD_CHAIN,
    KNOWN_LOAD,
    BATCHES,
    FILE_OF_BATCH,
    /* names and their codes */
    FIND_POINT,
    ADD_POINT,
    FIND_PARAMETER,
    ADD_PARAMETER,
    FIND_UNIT,
    ADD_UNIT,
    FIND_SERIES,
    ADD_SERIES,
    FIND_DETAIL,
    ADD_DETAIL,
    SERIES_NAMES,

    DETAIL_AT,
    /* readings in */
    LAST_READING,
    ADD_READING,
    ADD_REVISION,
    NEWEST_READING,
    LAST_ASIDE,
    ADD_ASIDE,
    LAST_RAW,
    ADD_RAW,
    ADD_BENCH,
    /* readings out */
    SERIES_SPAN,
    ALL_OF_DAYS,
    SERIES_BEFORE,
    SERIES_HAS,
    SERIES_FIRST,
    SERIES_LAST,
    COLUMN_IN_FORCE,
    REVISIONS,
    ASIDES_OF_DAYS,
    ASIDES_ALL,
    RAW_OF_LINE,
    RAW_OF_BATCH,
    RAW_NEWEST,
    /* the description */
    DESCRIPTION_IN_FORCE,
    ADD_ROW,                          /* one for each file of a description */
    GET_ROWS = ADD_ROW + PLANT_FILES, /* likewise */
    /* proof, and opening */
    CHECK_PAGES = GET_ROWS + PLANT_FILES,
    CHECK_KEYS,
    CHECK_SCHEMA,
    CHECK_TRIGGERS,
    CHECK_QUALIFIERS,
    CHECK_BATCHES,
    CHECK_READINGS,
    CHECK_REVISIONS,
    CHECK_ASIDES,
    CHECK_RAW,
    ADD_QUALIFIER,
    ADD_REASON,
    GET_FORMAT,
    STATEMENTS
};

/* The text of each; for the room's own tests too. */
extern const char *const book_sql[STATEMENTS];

struct book;

/* The statement, prepared and reset, its parameters free to bind. */
MUST_USE enum status book_statement(struct book *b, enum statement which, sqlite3_stmt **out,
                                    struct fault *f);
/* The next row; *row is false, and the statement reset, when there is none. */
MUST_USE enum status book_step(struct book *b, sqlite3_stmt *s, bool *row, struct fault *f);
/* Runs a statement that gives no row, and resets it. */
MUST_USE enum status book_run(struct book *b, sqlite3_stmt *s, struct fault *f);
/* Runs constant text of several statements. */
MUST_USE enum status book_exec(struct book *b, const char *sql, struct fault *f);
/* What SQLite's last error means to a person. */
enum status book_fault(struct book *b, struct fault *f);
/* Something in the book that no program of ours can have put there. */
enum status book_damaged(const struct book *b, struct fault *f, const char *what, ...) PRINTS(3, 4);

/* Binding the program's own values cannot fail. Texts and blobs must stand until the statement ran.
 */
void bind_int(sqlite3_stmt *s, int at, int64_t n);
void bind_text(sqlite3_stmt *s, int at, const char *text); /* NULL: a null */
void bind_blob(sqlite3_stmt *s, int at, const void *bytes, size_t length);
void bind_null(sqlite3_stmt *s, int at);

/* A column's text; "" for a null. Dies with the next step. */
const char *column_text(sqlite3_stmt *s, int at);
/* A blob of that length; false when it is not. */
bool column_digest(sqlite3_stmt *s, int at, uint8_t out[DIGEST_BYTES]);

#endif
