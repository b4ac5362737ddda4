/* books: books for the tests of this room, each in a folder of its own that goes with it. Readings
 * are lines of
 *     POINT PARAMETER DATE VALUE UNIT [@HH:MM] [#SAMPLE] [note:WORD] [mdl:NUMBER] [rl:NUMBER]
 * VALUE is 12.5, <2, >2420, E12, DNQ0.4, a no-data code as code:C, or withdrawn. A line that begins
 * with "aside:REASON " is a row set aside, its cells parted by blanks in the order of a long file.
 * One that begins with "raw: " is a raw value of a bench sheet, its cells in the order of
 * raw_columns, "-" for a blank; it is no row of the counts.
 */
#ifndef WEIRBOOK_TESTS_BOOKS_H
#define WEIRBOOK_TESTS_BOOKS_H

#include "book/book.h"

#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <sqlite3.h>

struct shelf {
    struct arena *arena;
    char folder[64], path[80]; /* path: of the book, folder/plant.book */
    struct plant_draft *draft;
    struct plant *plant;
    struct fault fault;
    struct book_counts counts; /* of the last load */
    int64_t batch;
};

extern const struct author tester;

/* As setup and teardown of a test: a folder with a book of a small plant in it. */
int shelf_setup(void **state);
int shelf_teardown(void **state);
struct shelf *shelf_new(void); /* the same without the book */
/* As setup: the book is one that the program of format 1 wrote (format-1.sql). */
int shelf_setup_format_1(void **state);
void shelf_put_format_1(struct shelf *s);
void shelf_free(struct shelf *s);

/* A draft of the small plant, with more rows of a file behind it (NULL: none). */
struct plant_draft *draft_with(struct arena *a, enum plant_file file, const char *rows);

/* Succeeds, or fails the test with the fault. */
void good(struct shelf *s, enum status rc);
struct book *shelf_open(struct shelf *s, enum book_mode mode);
/* Loads lines as a file, line 2 first. What became of each, as letters: accepted A, present P,
 * revised R, contradicts C (which is then set aside), set aside S. reason: NULL, or why it revises.
 */
const char *shelf_load(struct shelf *s, const char *file, const char *reason, const char *lines);
/* The same as a bench sheet. */
const char *shelf_bench(struct shelf *s, const char *file, const char *lines);
/* The same on an open book, up to its end; the load is still under way. */
const char *add_lines(struct shelf *s, struct book *b, const char *file, const char *lines);
/* Ends a load that add_lines fed. */
enum status end_load(struct shelf *s, struct book *b, const char *file, const char *reason,
                     long rows);

/* All that the program can read of the book, as text; NULL with a fault. */
const char *shelf_told(struct shelf *s, struct fault *f);
/* All bad findings of a check, one a line: "what batch file:line: note"; "" when it is sound. A
 * book that cannot be opened or checked gives the fault. */
const char *shelf_check(struct shelf *s);

/* Whole files. */
uint8_t *file_bytes(struct arena *a, const char *path, size_t *length);
void file_write(const char *path, const void *bytes, size_t length);
void same_file(const char *path, const uint8_t *bytes, size_t length);

/* Straight into the file, as with the sqlite3 shell. raw_text gives the first column of the first
 * row. */
void raw(struct shelf *s, const char *sql);
const char *raw_text(struct shelf *s, const char *sql);
/* Changes a table behind the back of its triggers, which stand again afterwards. */
void tamper(struct shelf *s, const char *table, const char *sql);

#endif
