/* Bench sheets: what the files bench*.c share. A sheet's raw values come from a file or from a
 * conversation; both ways end in the same reading, working and entering. */
#ifndef WEIRBOOK_BENCH_H
#define WEIRBOOK_BENCH_H

#include "command/session.h"

#define BENCH_ROUND "round" /* the sheet that bench_at() does not have */

struct bench_options {
    const char *from, *point, *reason, *by;
    day_t date;
    bool revise, dry_run, print, list;
    int as;
};

struct bench {
    struct session *session;
    const struct bench_options *options;
    const struct plant *plant;
    const char *sheet;             /* its name; NULL: whatever the file says */
    const struct bench_sheet *its; /* NULL: the round, or whatever the file says */
};

/* ---- results (bench_enter.c) ---- */

enum bench_state {
    STATE_WORKED, /* not entered yet */
    STATE_ACCEPTED,
    STATE_PRESENT,
    STATE_REVISED,
    STATE_ASIDE,
    STATE_RECORD,
    BENCH_STATES
};
extern const char *const bench_state_words[BENCH_STATES];

struct bench_result {
    const struct bench_outcome *outcome;
    enum bench_state state;
    const char *clash; /* what the book holds, when it contradicts; else NULL */
    bool failed;       /* one of its checks */
};

struct bench_results {
    const char *name; /* of the file, as its batch has it */
    struct raw_value *raw;
    size_t raws;
    struct bench_result *result;
    size_t results;
    struct book_counts counts;
    int64_t bytes;
    uint8_t digest[DIGEST_BYTES];
    const char *dialect_told;
    const char *told; /* one line about the batch; NULL: none */
};

/* Reads a raw values file and works its sheets; `name` is what the book will call the file. */
MUST_USE enum status sheets_read(const struct bench *b, const char *path, const char *name,
                                 struct bench_results *out, struct fault *f);
/* All of it into the book, in one transaction; a dry run and a file that brings nothing new change
 * nothing. */
MUST_USE enum status sheets_enter(const struct bench *b, struct bench_results *r, struct fault *f);

/* ---- printing (bench_tell.c) ---- */

/* Results as a page, those that ask for a look first; with `counts` the line of counts as well. */
void sheets_tell(const struct bench *b, const struct bench_results *r, bool counts);
/* The counts, and what the book said, alone. */
void sheets_tell_counts(const struct bench *b, const struct bench_results *r);
struct table *sheets_table(const struct bench *b, const struct bench_results *r);
bool sheets_found(const struct bench_results *r); /* a failed check, or something set aside */
/* "0 to 14 pH", "above 0 g"; "" where an argument has no bounds. */
/* An argument's unit as shown: "" for texts, counts and plain numbers. */
const char *sheets_unit(const struct bench_argument *argument);
const char *sheets_bounds(struct arena *a, const struct bench_argument *argument);

/* ---- the blank sheet, and the list (bench_blank.c) ---- */

MUST_USE enum status sheets_blank(const struct bench *b, struct fault *f);
void sheets_list(const struct bench *b);

/* A stop of the round with what is shown beside it. */
struct bench_stop {
    struct round_stop stop;
    bool has_last;
    struct reading last;
};
/* The stops of the plant's round as of a day: those of round.csv, else what was read in the two
 * weeks before. */
MUST_USE enum status sheets_stops(const struct bench *b, day_t day, struct bench_stop **out,
                                  size_t *count, struct fault *f);
/* "0 to 50 mg/L", or "" */
const char *sheets_limits(struct arena *a, const struct parameter *p);

/* ---- the unfinished sheet on disk (bench_journal.c) ---- */

struct journal {
    struct arena *arena;
    const char *path;
    int fd; /* -1: no file yet */
    size_t rows;
};

/* Opens BOOK-bench-SHEET.csv when it is there and locks it; what a cut-off write left behind its
 * last whole line is taken off. */
MUST_USE enum status journal_open(struct journal *j, struct arena *a, const char *book,
                                  const char *sheet, struct fault *f);
MUST_USE enum status journal_read(struct journal *j, struct raw_value **out, size_t *count,
                                  struct fault *f);
/* When it was last written to, as the wall clock shows it. */
void journal_when(const struct journal *j, char out[17]);
/* One more row, on the disk when it returns. */
MUST_USE enum status journal_add(struct journal *j, const struct raw_value *row, struct fault *f);
MUST_USE enum status journal_rewrite(struct journal *j, const struct raw_value *rows, size_t count,
                                     struct fault *f);
/* Gives it another name, which is told; it is never deleted so. */
MUST_USE enum status journal_discard(struct journal *j, const char **name, struct fault *f);
MUST_USE enum status journal_remove(struct journal *j, struct fault *f);
void journal_close(struct journal *j);

/* ---- lines from a person (bench_line.c) ---- */

struct bench_line;

enum bench_heard {
    HEARD_LINE,
    HEARD_END,   /* ^D, the end of the input, a terminal that is gone */
    HEARD_SIGNAL /* ^C, SIGHUP, SIGTERM, SIGQUIT */
};

/* With editing when both ends are a terminal; else lines are read as they come and what is asked is
 * printed with the answer. Signals wait until a line is asked for, so that no write is cut off by
 * one. */
struct bench_line *bench_line_open(struct arena *a, FILE *out);
/* `words` complete on TAB. */
enum bench_heard bench_line_ask(struct bench_line *l, const char *prompt, const char *const *words,
                                size_t count, const char **out);
void bench_line_close(struct bench_line *l); /* accepts NULL */

/* ---- the conversation (bench_ask.c) ---- */

MUST_USE enum status sheets_ask(struct bench *b, struct fault *f);

#endif
