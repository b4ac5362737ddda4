/* book: the one SQLite file that holds a plant's description and readings: made, opened, migrated,
 * loaded, read, checked. The only user of SQLite. Nothing is ever overwritten: corrections are new
 * versions, descriptions are kept, every batch and description hashes its content and the head
 * before it. */
#ifndef WEIRBOOK_BOOK_H
#define WEIRBOOK_BOOK_H

#include "base/base.h"
#include "frame/frame.h"
#include "plant/plant.h"

#define BOOK_APPLICATION_ID 0x57656972 /* "Weir" */

struct book;

enum book_mode { BOOK_READ, BOOK_WRITE };

struct author {
    const char *who;  /* from --by or the login */
    const char *when; /* clock_stamp() */
};

/* Makes a book from a finished draft. Never over an existing file. A failure leaves no file. */
MUST_USE enum status book_create(const char *path, const struct plant_draft *draft,
                                 const struct author *author, struct fault *f);
/* Opens a book. Says so, and touches nothing, when the file is no book, is a newer book, has hard
 * links, holds triggers that are not ours, or (BOOK_WRITE) cannot be written. A book that another
 * process is writing is waited for (5 s), then a fault names it. BOOK_READ never writes but to roll
 * back what a killed load left.
 * A book of an older format: BOOK_READ works on a copy brought to the newest format, which is gone
 * when the book is closed. BOOK_WRITE copies the book to BOOK.format-N.backup (a fault when that
 * stands there already and is not the same book), then migrates it; book_migrated says so. */
MUST_USE enum status book_open(struct book **out, const char *path, enum book_mode mode,
                               struct fault *f);
/* What a person should hear about where the book lies, in one line; NULL mostly. A network drive
 * may not keep locks, and two writers could then spoil a book (SQLite, "How to corrupt",
 * section 2.1). */
const char *book_warning(const struct book *b);
/* The backup's name when opening migrated the book; else NULL. */
const char *book_migrated(const struct book *b);
void book_close(struct book *b); /* accepts NULL; abandons a load that was not ended */
const char *book_sqlite_version(void);
int book_format(void); /* the newest format this program writes: user_version */

/* ---- description ---- */

/* The description in force as a draft (its rows as written) and, finished, as a plant. */
MUST_USE enum status book_plant(struct book *b, struct arena *a, struct plant_draft **draft,
                                struct plant **plant, struct fault *f);
/* Puts a changed description in force. Refuses to drop a point or parameter that has readings.
 * *changed is false (and nothing written) when it says the same as the one in force. */
MUST_USE enum status book_apply(struct book *b, const struct plant_draft *draft,
                                const struct author *author, const char *reason, bool *changed,
                                struct fault *f);

/* ---- loading: one transaction for one file ---- */

struct book_counts {
    long rows, accepted, present, revised, aside;
};

struct book_source {
    const char *file; /* as given */
    int64_t bytes;
    uint8_t digest[DIGEST_BYTES];
    const char *dialect_told; /* how it was understood */
    const char *reason;       /* why values were revised; "" when none were to be */
};

enum book_outcome { BOOK_ACCEPTED, BOOK_PRESENT, BOOK_REVISED, BOOK_CONTRADICTS };

/* What stands in the book under a reading's key, when it contradicts. */
struct book_clash {
    const char *text, *file; /* die with the next call */
    long line;
    char unit[32];
};

/* Whether a file with this digest was loaded before; *batch, *when, *file of that load (in the
 * arena). */
MUST_USE enum status book_known(struct book *b, struct arena *a, const uint8_t digest[DIGEST_BYTES],
                                bool *known, int64_t *batch, const char **file, const char **when,
                                struct book_counts *counts, struct fault *f);
/* With `revise`, a value that contradicts the book becomes a revision of it; it never revises a row
 * of its own file. A reading under a key whose newest version is withdrawn contradicts nothing and
 * is accepted. */
MUST_USE enum status book_load_begin(struct book *b, const struct plant *plant,
                                     const struct author *author, bool revise, struct fault *f);
MUST_USE enum status book_load_reading(struct book *b, const struct reading *r,
                                       enum book_outcome *outcome, struct book_clash *clash,
                                       struct fault *f);
MUST_USE enum status book_load_aside(struct book *b, const struct row_text *row, enum reason reason,
                                     const char *explanation, struct fault *f);
/* The same as book_load_begin for a bench sheet: its batch is of kind "bench", and book_load_raw
 * keeps its raw values (every row of the file, in order, those without a result too). The chain
 * hashes them. */
MUST_USE enum status book_bench_begin(struct book *b, const struct plant *plant,
                                      const struct author *author, bool revise, struct fault *f);
MUST_USE enum status book_load_raw(struct book *b, const struct raw_value *raw, struct fault *f);
/* Writes the batch with its counts and hash and commits; rows must equal the four counts. */
MUST_USE enum status book_load_end(struct book *b, const struct book_source *source, long rows,
                                   struct book_counts *counts, int64_t *batch, struct fault *f);
void book_load_abandon(struct book *b); /* rolls back: a dry run, a fault */

/* ---- acts: what people do to a book beside loading
 * ------------------------------------------------ Each is a batch of its own with author and
 * reason, hashed into the chain; nothing is rewritten. */

/* The new version of one reading (QUALIFIER_WITHDRAWN: a spoiled sample; its text is "withdrawn").
 * The reading is named by point, parameter, day, minute and sample of `r`; a fault says so when
 * there is none, or when the value is the one in force. *old is what it replaces (in the arena).
 * What `r` does not say (detail NULL; no mdl and rl) stays as it was. Such readings stand on no
 * line of a file: `line` is 0, and `file` says "amended by WHO", or "batch N taken back by WHO". */
MUST_USE enum status book_amend(struct book *b, struct arena *a, const struct plant *plant,
                                const struct reading *r, const char *reason,
                                const struct author *author, struct reading *old, int64_t *batch,
                                struct fault *f);

struct book_withdrawn {
    long taken_back; /* readings that have no value now */
    long restored;   /* readings that have the value again that the batch had replaced */
    long left;       /* readings amended since: they stay as they are */
};
/* Takes back a whole load or bench sheet. Its rows are kept; each of its readings that is the
 * newest version gets a version more: the value that it had replaced, unless that was taken back
 * too, else withdrawn. Its file is no longer known and may be loaded again. A batch that
 * is no load, or was taken back already, is a fault. */
MUST_USE enum status book_withdraw(struct book *b, const struct plant *plant, int64_t batch,
                                   const char *reason, const struct author *author,
                                   struct book_withdrawn *out, int64_t *act, struct fault *f);

enum remark_kind { REMARK_CAUSE, REMARK_REMEDY, REMARK_EVENT, REMARK_KINDS };
extern const char *const remark_kind_words[REMARK_KINDS]; /* "cause", "remedy", "event" */

/* A remark on days, on a point or on a limit of them; it never changes a figure. */
struct book_remark {
    int64_t id; /* its batch */
    enum remark_kind kind;
    const char *event; /* "bypass", "spill", "outage", "wet-weather", "other"; "" for no event */
    day_t from, to;
    const char *point, *parameter, *statistic; /* "" where it is about all */
    const char *text, *who, *when;
    bool withdrawn;
    const char *withdrawn_why; /* "" */
};
MUST_USE enum status book_remark_add(struct book *b, const struct book_remark *remark,
                                     const struct author *author, int64_t *id, struct fault *f);
MUST_USE enum status book_remark_withdraw(struct book *b, int64_t id, const char *reason,
                                          const struct author *author, struct fault *f);
typedef enum status book_remark_sink(void *context, const struct book_remark *remark,
                                     struct fault *f);
/* Remarks whose days touch first..last (DAY_NONE: open), in the order of their days, withdrawn ones
 * too. By index: only those rows are touched. */
MUST_USE enum status book_remarks(struct book *b, day_t first, day_t last, book_remark_sink *sink,
                                  void *context, struct fault *f);

/* A person's answer to a doubt about readings; the newest of an id is in force. */
struct book_answer {
    const char *doubt, *reason, *who, *when;
    int64_t batch;
};
MUST_USE enum status book_answer_add(struct book *b, const char *doubt, const char *reason,
                                     const struct author *author, int64_t *batch, struct fault *f);
typedef enum status book_answer_sink(void *context, const struct book_answer *answer,
                                     struct fault *f);
MUST_USE enum status book_answers(struct book *b, book_answer_sink *sink, void *context,
                                  struct fault *f);

/* ---- as it was
 * ------------------------------------------------------------------------------------
 */

/* From now on the book is read as it stood after `batch`: later readings, versions, descriptions,
 * remarks and answers do not count (book_plant, book_fill, book_each, book_last, book_spans,
 * book_extent, book_asides, book_revisions, book_remarks, book_batches, book_head). 0: as it is.
 * For a book opened to be read. */
MUST_USE enum status book_as_of(struct book *b, int64_t batch, struct fault *f);
/* The last batch written at or before a moment (UTC, "2025-04-01T23:59:59Z"); 0 when the book is
 * younger. Clocks may have run backwards: it is the last one such that it and all before it are not
 * later; *odd is true when a later batch claims an earlier time. */
MUST_USE enum status book_batch_at(struct book *b, const char *when, int64_t *batch, bool *odd,
                                   struct fault *f);

struct book_change {                        /* one row of the history */
    const char *when, *who, *what, *reason; /* what: "load", "bench", "revise", "amend",
                                             * "withdraw", "description", "remark", "answer" */
    int64_t batch;
    day_t day;            /* DAY_NONE where it is about no day */
    int point, parameter; /* -1 where none */
    const char *sample;
    const char *old_text, *new_text; /* values with their unit; "" where none */
    const char *file;
    long line;
};
struct book_history {
    day_t first, last;    /* DAY_NONE: open */
    int point, parameter; /* -1: all */
    int64_t batch;        /* 0: all */
    const char *who;      /* NULL: all */
    bool every_reading;   /* first loads of readings too, not only their changes */
};
typedef enum status book_change_sink(void *context, const struct book_change *change,
                                     struct fault *f);
/* What was done, oldest first. Description changes name the file and row that differ. */
MUST_USE enum status book_history(struct book *b, const struct plant *plant,
                                  const struct book_history *ask, book_change_sink *sink,
                                  void *context, struct fault *f);

/* A copy of the book as it stands, made while others may write; checked, then put in its place
 * under `path` (never over a file). */
MUST_USE enum status book_backup(struct book *b, const char *path, struct fault *f);
/* Whether a head (hex) printed earlier is an ancestor of the book's newest: *batch is the batch it
 * was the head of, 0 when it never was. */
MUST_USE enum status book_has_head(struct book *b, const char *head, int64_t *batch,
                                   struct fault *f);

/* ---- reading ---- */

/* Adds the readings of the spans to a frame (all versions; the frame keeps the newest), and for a
 * totalizer's column the last reading before the span. Touches only those rows (by index). Texts
 * live in the arena. */
MUST_USE enum status book_fill(struct book *b, struct arena *a, const struct plant *plant,
                               const struct frame_span *spans, size_t count, struct frame *frame,
                               struct fault *f);
/* One span per column that has a reading in first..last, for commands that want all. */
MUST_USE enum status book_spans(struct book *b, struct arena *a, const struct plant *plant,
                                day_t first, day_t last, struct frame_span **spans, size_t *count,
                                struct fault *f);
/* The first and last day that has a reading; DAY_NONE in an empty book. */
MUST_USE enum status book_extent(struct book *b, day_t *first, day_t *last, struct fault *f);
/* Every reading in force of first..last (DAY_NONE: open), in order of point, parameter, day and
 * time; withdrawn ones left out. What is handed over dies with the call. */
typedef enum status book_reading_sink(void *context, const struct reading *r, struct fault *f);
MUST_USE enum status book_each(struct book *b, const struct plant *plant, day_t first, day_t last,
                               book_reading_sink *sink, void *context, struct fault *f);

typedef enum status book_raw_sink(void *context, const struct raw_value *raw, struct fault *f);
/* The raw values behind a bench sheet's reading, in the order of their file: those of its sheet,
 * date, time and point, and those of the sheet and date that have no point. None for a reading that
 * was loaded from a readings file. */
MUST_USE enum status book_raw_of(struct book *b, int64_t batch, long line, book_raw_sink *sink,
                                 void *context, struct fault *f);
/* The newest raw value of an argument at a sheet, point and run, in the arena; NULL when there is
 * none. Touches only that row (by index). */
MUST_USE enum status book_raw_last(struct book *b, struct arena *a, const char *sheet,
                                   const char *point, const char *run, const char *argument,
                                   const char **value, const char **unit, struct fault *f);
/* The newest reading in force of a point and parameter before a day (or on it, when `before` is
 * DAY_NONE: of all); *found is false when there is none. Texts live in the arena. */
MUST_USE enum status book_last(struct book *b, struct arena *a, const struct plant *plant,
                               int point, int parameter, const char *sample, day_t before,
                               bool *found, struct reading *out, struct fault *f);

struct book_aside {
    int64_t batch;
    struct row_text row;
    const char *reason, *explanation;
};
typedef enum status book_aside_sink(void *context, const struct book_aside *aside, struct fault *f);
/* Rows set aside; first..last bounds the days of those whose date could be read, others always come
 * (DAY_NONE: all). */
MUST_USE enum status book_asides(struct book *b, day_t first, day_t last, book_aside_sink *sink,
                                 void *context, struct fault *f);

struct book_revision {
    day_t day;
    int minute;
    int point, parameter;
    const char *sample, *old_text, *old_unit, *new_text, *unit, *who, *when, *reason, *file;
    long line;
    int version;
};
typedef enum status book_revision_sink(void *context, const struct book_revision *r,
                                       struct fault *f);
MUST_USE enum status book_revisions(struct book *b, const struct plant *plant, day_t first,
                                    day_t last, book_revision_sink *sink, void *context,
                                    struct fault *f);

struct book_batch {
    int64_t batch;
    const char *file, *when, *who, *kind; /* kind: "load", "bench", "description" */
    const char *reason;
    struct book_counts counts;
    char head[2 * DIGEST_BYTES + 1];
};
typedef enum status book_batch_sink(void *context, const struct book_batch *batch, struct fault *f);
MUST_USE enum status book_batches(struct book *b, book_batch_sink *sink, void *context,
                                  struct fault *f);
/* The newest head of the hash chain, as hex. */
MUST_USE enum status book_head(struct book *b, char out[2 * DIGEST_BYTES + 1], struct fault *f);

/* ---- proving the book sound ---- */

struct book_finding {
    const char *what; /* "pages", "foreign keys", "schema", "chain", "batch", "reading",
                       * "row set aside", "raw value", "description", "act", "remark", "answer" */
    bool good;
    int64_t batch;    /* 0 when none */
    const char *file; /* "" when none */
    long line;        /* 0 when none */
    const char *note; /* what was found, and what to do */
};
typedef enum status book_finding_sink(void *context, const struct book_finding *finding,
                                      struct fault *f);
/* SQLite's integrity check, foreign keys, schema, then every batch, reading and description against
 * its hash chain. One good finding per kind of check when all is well; of one kind twenty are told
 * and the rest counted. */
MUST_USE enum status book_check(struct book *b, book_finding_sink *sink, void *context,
                                struct fault *f);

#endif
