/* store: what the files of this room share: the open book, its transactions, and readings and names
 * as the tables hold them. */
#ifndef WEIRBOOK_BOOK_STORE_H
#define WEIRBOOK_BOOK_STORE_H

#include "book/book.h"
#include "book/pack.h"
#include "book/statement.h"

struct load;

struct book {
    struct arena *arena;
    const char *path;     /* as the person named it */
    const char *warning;  /* of book_warning */
    const char *migrated; /* of book_migrated */
    sqlite3 *db;
    enum book_mode mode;
    sqlite3_stmt *statement[STATEMENTS];
    struct load *load; /* NULL: none is under way */
    int last_code;     /* of SQLite, when book_fault last put one into words */
    bool half_written; /* a write failed: pages of it may stand in the file, with a journal beside
                          it */
};

/* ---- opening (open.c), formats (schema.c) ---- */

/* How long another program's writing is waited for. */
#define BOOK_WAIT_MS 5000

/* The name of a network file system by its number (statfs), or NULL. */
const char *book_network_name(unsigned long type);
/* sqlite3_open_v2, with what must be set before the first of them. */
int book_connect(const char *name, int flags, sqlite3 **out);
/* Settings of a connection, before anything is read or written. */
MUST_USE enum status book_settings(struct book *b, struct fault *f);
/* The same for a file that is not at its final place: book_create's. */
struct book *book_on(sqlite3 *db, const char *path, enum book_mode mode);

struct migration {
    int version;      /* user_version once it ran */
    const char *file; /* of book_files */
};
extern const struct migration book_migrations[];
extern const size_t book_migrations_count;
/* The text of a compiled-in file. */
const char *book_file(const char *name);
/* Brings an open, empty or older book to the newest format, in one transaction. */
MUST_USE enum status book_migrate(struct book *b, struct fault *f);
/* The steps of it, in the transaction under way. */
MUST_USE enum status book_steps(struct book *b, struct fault *f);
/* The format the book has now; 0 for an empty file. */
MUST_USE enum status book_format_of(struct book *b, int *version, struct fault *f);
/* Refuses triggers that are not ours: they would run inside our transactions. */
MUST_USE enum status book_refuse_triggers(struct book *b, struct fault *f);

MUST_USE enum status book_begin(struct book *b, struct fault *f); /* to write */
MUST_USE enum status book_commit(struct book *b, struct fault *f);
void book_rollback(struct book *b); /* nothing when none is under way */

/* ---- batches and the chain (chain.c) ---- */

/* Adds the next batch; id and the rest of `s` stand then. */
MUST_USE enum status batch_add(struct book *b, struct stored_batch *s, const char *kind,
                               const struct author *author, struct fault *f);
/* Works out the new head, and adds it. */
MUST_USE enum status chain_add(struct book *b, struct pack *p, struct digest *d,
                               const struct stored_batch *s, const uint8_t content[DIGEST_BYTES],
                               const uint8_t asides[DIGEST_BYTES], struct fault *f);

/* ---- names of codes (names.c) ---- */

struct series_name {
    int64_t id;
    const char *point, *parameter, *sample;
    int plant_point, plant_parameter; /* of the plant given; -1 without one */
};

enum { NAMES_SLOTS = 1024 };

/* The last details and files that were looked up, by their number; what falls out is read again. */
struct names_slot {
    int64_t id;
    const void *what;
};

struct names {
    struct arena *arena;   /* series, and all the rest unless `passing` */
    struct arena *passing; /* for a pass over a whole book: dropped when it has grown; NULL: nothing
                              is dropped */
    struct series_name *series;
    size_t series_count, series_room;
    struct names_slot detail[NAMES_SLOTS], file[NAMES_SLOTS];
};

/* With `passing`, texts handed out die when the next reading is read. names_end frees then. */
MUST_USE enum status names_begin(struct book *b, struct names *n, struct arena *a,
                                 const struct plant *plant, bool passing, struct fault *f);
void names_end(struct names *n); /* accepts a zeroed one */
/* Between two readings: a pass over a whole book drops what it looked up once that has grown. */
void names_turn(struct names *n);
const struct series_name *names_series(const struct names *n, int64_t id); /* NULL: no such code */
MUST_USE enum status names_common(struct book *b, struct names *n, int64_t detail,
                                  const struct common **out,
                                  struct fault *f); /* NULL when there is none */
MUST_USE enum status names_file(struct book *b, struct names *n, int64_t batch, const char **out,
                                struct fault *f);

/* ---- readings as they stand in the tables (row.c) ---- */

/* Columns of every statement that gives readings, in this order. */
#define READING_COLUMNS                                                                            \
    "r.id, r.series, r.day, r.minute, r.version, r.batch, r.line, r.qualifier, r.code, r.value, "  \
    "r.coefficient, r.scale, r.detail, r.mark"

/* A row of such a statement. Texts die with the next step; unknown codes give NULL names. */
MUST_USE enum status row_read(struct book *b, struct names *n, sqlite3_stmt *s, struct stored *out,
                              struct fault *f);
/* Whether it is what was loaded. */
bool row_sound(struct pack *p, const struct stored *s);
/* As the rest of the program knows it. A damaged one is a fault that names batch, file and line. */
MUST_USE enum status row_reading(struct book *b, struct names *n, struct pack *p,
                                 const struct stored *s, struct reading *out, struct fault *f);
/* A row of statement ASIDES_... or CHECK_ASIDES. */
void row_aside(sqlite3_stmt *s, struct stored_aside *out);
/* A row of statement RAW_... or CHECK_RAW. */
void row_raw(sqlite3_stmt *s, struct stored_raw *out);

/* ---- descriptions (describe.c) ---- */

/* Adds a description as a new batch, in the transaction under way. */
MUST_USE enum status description_add(struct book *b, const struct plant_draft *draft,
                                     const struct author *author, const char *reason,
                                     struct fault *f);
/* Reads the rows of one file of a description, in order, into `sink`. */
typedef enum status row_sink(void *context, const struct stored_row *row, struct fault *f);
MUST_USE enum status description_rows(struct book *b, int64_t batch, enum plant_file kind,
                                      row_sink *sink, void *context, struct fault *f);

/* ---- books of older formats (older.c) ---- */

/* Puts a migrated copy, for reading alone, in the place of the book that is open. */
MUST_USE enum status older_copied(struct book *b, struct fault *f);
/* Keeps the book as BOOK.format-N.backup and migrates it. */
MUST_USE enum status older_migrated(struct book *b, struct fault *f);

/* ---- proof (check.c) ---- */

/* Everything that was written against pages, keys and hashes, in the transaction under way; what
 * tables, views and triggers there are is left out. What is found first is the fault. */
MUST_USE enum status book_proved(struct book *b, struct fault *f);

/* ---- loading (load.c) ---- */

void load_drop(struct book *b); /* forgets a load; its transaction is the caller's */

#endif
