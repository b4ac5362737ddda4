/* base: what every room stands on: faults, arenas, text, calendar days, decimals as written,
 * exact fractions, units. It knows nothing of plants. */
#ifndef WEIRBOOK_BASE_H
#define WEIRBOOK_BASE_H

#include <stdarg.h>
#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>
#include <stdio.h>

#define MUST_USE     __attribute__((warn_unused_result))
#define PRINTS(f, a) __attribute__((format(printf, f, a)))
#define NELEM(a)     (sizeof(a) / sizeof((a)[0]))

/* ---- faults -------------------------------------------------------------------------------
 * A function that can fail returns a status, gives results through pointers, and takes a fault as
 * its last argument. The first fault wins: whoever knows the cause writes it, callers pass it up.
 */

enum status { OK = 0, FAULT = 1 };

/* FAULT_FAILED ends the program with status 1 (could not be done), FAULT_USAGE with 2. */
enum fault_kind { FAULT_FAILED, FAULT_USAGE };

/* Where something stands. file may be NULL (no place); line 0: the whole file; column 0: the whole
 * line. Lines and columns count from 1; a column of a CSV file is the number of its cell. */
struct place {
    const char *file;
    long line;
    int column;
};

struct fault {
    bool set;
    enum fault_kind kind;
    char text[1024]; /* one line, "file:line:column: what; what to do", control bytes escaped */
};

/* Jumps to `done` when the call fails; `rc` is the function's result. */
#define TRY(call)                                                                                  \
    do {                                                                                           \
        if ((rc = (call)) != OK)                                                                   \
            goto done;                                                                             \
    } while (0)

/* Writes the fault unless one stands already, and returns FAULT, so that `return fault_at(...)`
 * reads well. `todo` says what to do (NULL: nothing to add). */
enum status fault_at(struct fault *f, const struct place *where, const char *todo, const char *what,
                     ...) PRINTS(4, 5);
enum status fault_usage(struct fault *f, const char *todo, const char *what, ...) PRINTS(3, 4);
void fault_clear(struct fault *f);

/* ---- arenas -------------------------------------------------------------------------------
 * Whatever lives as long as a command (or a file being read) stands in one arena and is dropped
 * once. arena_alloc never returns NULL: when memory runs out the program says so on standard error
 * and ends with status 1; a book that is being written is put right by its journal. */

struct arena;

struct arena *arena_new(void);
void arena_free(struct arena *a); /* accepts NULL */
/* Zeroed, aligned to 16 bytes. */
void *arena_alloc(struct arena *a, size_t size) __attribute__((returns_nonnull, malloc));
char *arena_text(struct arena *a, const char *s);                 /* copy of a C string */
char *arena_bytes(struct arena *a, const char *s, size_t length); /* copy, NUL added */
char *arena_print(struct arena *a, const char *format, ...) PRINTS(2, 3);
/* A growing array in an arena: returns room for one more element of `size` bytes (zeroed) and
 * counts it in *count. Pass the same `array`, `count`, `capacity` each time. */
void *arena_push(struct arena *a, void *array_pointer, size_t *count, size_t *capacity,
                 size_t size);
size_t arena_used(const struct arena *a);

/* ---- text ---------------------------------------------------------------------------------
 * A growing buffer. `at` is never NULL after text_init; at[length] is NUL. Growing past the ceiling
 * given at birth sets `overflowed` and drops the rest: the owner checks it and names the place. */

struct text {
    char *at;
    size_t length, room, ceiling;
    bool overflowed;
};

void text_init(struct text *t, size_t ceiling);
void text_free(struct text *t); /* accepts a zeroed one */
void text_clear(struct text *t);
void text_add(struct text *t, const char *s);
void text_add_bytes(struct text *t, const char *s, size_t length);
void text_add_char(struct text *t, char c);
void text_print(struct text *t, const char *format, ...) PRINTS(2, 3);
void text_vprint(struct text *t, const char *format, va_list ap);

bool text_equal(const char *a, const char *b);        /* accepts NULL on either side */
bool text_equal_nocase(const char *a, const char *b); /* ASCII letters only */
bool text_is_utf8(const char *s, size_t length);      /* strict */
int text_width(const char *utf8);                     /* columns on a terminal (utf8proc) */
/* Adds s with control bytes and bidirectional marks shown as \xNN, so that no file can draw on a
 * terminal. */
void text_add_escaped(struct text *t, const char *s);
/* The known word nearest to `word` (edit distance, case ignored), or NULL when none is near. */
const char *text_nearest(const char *word, const char *const *known, size_t count);

/* ---- calendar days ------------------------------------------------------------------------
 * A day is the number of days since 1970-01-01 in the proleptic Gregorian calendar. The plant's
 * local date as written: no time zone takes part. Years 1900 to 2199. */

typedef int32_t day_t;
#define DAY_NONE INT32_MIN

enum weekday { SUNDAY, MONDAY, TUESDAY, WEDNESDAY, THURSDAY, FRIDAY, SATURDAY };

bool day_from(int year, int month, int date, day_t *out); /* false: no such day */
void day_split(day_t day, int *year, int *month, int *date);
bool day_parse(const char *iso, day_t *out); /* YYYY-MM-DD exactly */
void day_write(day_t day, char out[11]);     /* YYYY-MM-DD */
enum weekday day_weekday(day_t day);
day_t month_first(day_t day);
day_t month_last(day_t day);
day_t month_step(day_t first, int months);       /* first day of the month `months` away */
bool month_parse(const char *iso, day_t *first); /* YYYY-MM */
const char *month_name(int month);               /* 1: "January" */
extern const char *const weekday_names[7];       /* "sunday" ... */
/* Minutes after midnight, 0 to 1440 ("24:00"); H:MM, HH:MM, HH:MM:SS. -1 stands for "no time". */
bool minute_parse(const char *s, int *out);
void minute_write(int minute, char out[6]); /* "" for -1 */

/* The only readers of the clock. */
day_t clock_today(void);
void clock_stamp(char out[21]); /* UTC, YYYY-MM-DDTHH:MM:SSZ */
double clock_seconds(void);     /* monotonic, for the progress line only */
/* A moment (seconds since 1970, UTC; -1: now) as the plant's wall clock shows it, YYYY-MM-DD HH:MM.
 * For people and names of batches only. */
void clock_wall(int64_t moment, char out[17]);

/* ---- decimals as written ------------------------------------------------------------------
 * value = coefficient / 10^scale. "30.0" is 300 and 1: its zero is kept. At most 18 digits. */

struct decimal {
    int64_t coefficient;
    int8_t scale; /* 0 to 18 */
};

enum decimal_problem { DECIMAL_FINE, DECIMAL_NOT_A_NUMBER, DECIMAL_TOO_LONG };

/* Optional sign, digits, optional point and digits (one of them at least), optional exponent
 * (E or e) that leaves at most 18 digits. Nothing before or after. */
enum decimal_problem decimal_parse(const char *s, size_t length, struct decimal *out);
void decimal_write(struct decimal d, char out[24]); /* as written: 30.0 stays 30.0 */
int decimal_compare(struct decimal a, struct decimal b);
bool decimal_is_zero(struct decimal d);
/* Significant figures as the digits show them: 30 has two, 0.067 two, 1.0 two, 0.0 one. */
int decimal_figures(struct decimal d);

/* ---- exact fractions ----------------------------------------------------------------------
 * Immutable, made in an arena; libgmp does the work behind this face. */

struct fraction;

enum rounding { ROUND_HALF_EVEN, ROUND_HALF_UP }; /* half-up: a tie goes away from zero */

const struct fraction *fraction_from_int(struct arena *a, int64_t n);
const struct fraction *fraction_from_ratio(struct arena *a, int64_t n, int64_t d); /* d not 0 */
const struct fraction *fraction_from_decimal(struct arena *a, struct decimal d);
/* "12.5", "-3", "2/3", "8896443230521/1290320000000", "3785411.784"; NULL when it is not one. */
const struct fraction *fraction_parse(struct arena *a, const char *s);
const struct fraction *fraction_add(struct arena *, const struct fraction *,
                                    const struct fraction *);
const struct fraction *fraction_subtract(struct arena *, const struct fraction *,
                                         const struct fraction *);
const struct fraction *fraction_multiply(struct arena *, const struct fraction *,
                                         const struct fraction *);
/* Asserts: not by 0. */
const struct fraction *fraction_divide(struct arena *, const struct fraction *,
                                       const struct fraction *);
const struct fraction *fraction_power(struct arena *, const struct fraction *, unsigned n);
int fraction_compare(const struct fraction *, const struct fraction *);
int fraction_sign(const struct fraction *); /* -1, 0, 1 */
/* Rounded to `decimals` places (negative: to tens, hundreds), exactly. */
const struct fraction *fraction_round(struct arena *, const struct fraction *, int decimals,
                                      enum rounding);
/* Rounded and written with that many decimals; never "-0". Negative decimals print zeros. */
void fraction_write(struct text *, const struct fraction *, int decimals, enum rounding);
char *fraction_print(struct arena *, const struct fraction *, int decimals, enum rounding);
/* As a terminating decimal with all its digits when it has one within `most` decimals; else rounded
 * half-even to `most` and followed by nothing. Returns whether it was exact. */
bool fraction_write_all(struct text *, const struct fraction *, int most);
/* The number of decimals that shows `figures` significant figures once rounded, a carry included:
 * 0.9965 to two figures is 1.0 (one decimal), 9.96 is 10 (none). For zero: figures - 1. */
int fraction_decimals_for(const struct fraction *, int figures, enum rounding);
double fraction_double(const struct fraction *); /* nearest double: for workbooks and charts only */
/* The exact value of a finite double. */
const struct fraction *fraction_from_double(struct arena *, double);

/* A geometric mean is product^(1/n) and is rounded and compared through its n-th power, exactly.
 * product >= 0, n >= 1. */
const struct fraction *root_round(struct arena *, const struct fraction *product, unsigned n,
                                  int decimals, enum rounding);
int root_compare(struct arena *, const struct fraction *product, unsigned n,
                 const struct fraction *to);

/* ---- units --------------------------------------------------------------------------------
 * schema/units.csv compiled in: spelling, kind, exact factor and offset to the base of the kind.
 * Spellings are case sensitive: mg is a mass, MG a million gallons. */

struct unit {
    const char *name, *kind, *factor, *offset; /* factor, offset: text for fraction_parse */
};

size_t unit_count(void);
const struct unit *unit_at(size_t i);
const struct unit *unit_find(const char *name); /* NULL when unknown */
int unit_index(const struct unit *u);
bool unit_same_kind(const struct unit *a, const struct unit *b);
/* The nearest known spelling, or NULL. */
const char *unit_nearest(const char *name);
/* Exact; both of one kind (asserted). */
const struct fraction *unit_convert(struct arena *a, const struct fraction *value,
                                    const struct unit *from, const struct unit *to);

/* ---- files that people keep ---------------------------------------------------------------
 * Written under a temporary name beside their own and renamed once whole, so that no half-written
 * file ever stands in the place of a good one. */

struct beside {
    const char *path, *temporary;
    int fd; /* of the temporary file, open for writing; -1 once closed */
};

/* Makes the temporary file. Faults: the path is something other than a plain file, or its folder
 * cannot be written. */
MUST_USE enum status beside_open(struct arena *a, const char *path, struct beside *out,
                                 struct fault *f);
/* Writes all of the bytes to the temporary file. */
MUST_USE enum status beside_add(const struct beside *b, const void *bytes, size_t length,
                                struct fault *f);
/* Syncs and renames; on a fault nothing is left. The file at the temporary name may have been
 * written through another descriptor. */
MUST_USE enum status beside_keep(struct beside *b, struct fault *f);
/* Removes the temporary file; harmless after beside_keep. */
void beside_drop(struct beside *b);
/* The one fault for a file that could not be written, in the words of `error` (errno). */
enum status beside_fault(const struct beside *b, int error, struct fault *f);
/* All of it for what is written to a stream. */
MUST_USE enum status beside_write(const char *path, void (*write)(FILE *out, const void *context),
                                  const void *context, struct fault *f);

/* ---- digests ------------------------------------------------------------------------------
 * SHA-256 (FIPS 180-4) by libnettle, for the book's chain and the identity of files. */

#define DIGEST_BYTES 32
struct digest; /* one running hash, in an arena */
struct digest *digest_new(struct arena *a);
void digest_add(struct digest *d, const void *bytes, size_t length);
void digest_end(struct digest *d, uint8_t out[DIGEST_BYTES]); /* and starts afresh */
/* Lower-case hex. */
void digest_write(const uint8_t in[DIGEST_BYTES], char out[2 * DIGEST_BYTES + 1]);

/* ---- output -------------------------------------------------------------------------------
 * A cell of CSV: quoted where RFC 4180 asks for it. With `guard`, text that a spreadsheet would
 * take for a formula (first byte = + - @ tab CR) gets a leading apostrophe, unless it is a number;
 * a reader takes exactly one off again (OWASP, CSV injection; CWE-1236). Text with apostrophes of
 * its own before such a byte gets one more, so that every text comes back as it was. */
void csv_cell(struct text *t, const char *s, bool guard);
/* Takes the guard off a cell in place: drops one leading apostrophe when a guarded byte follows. */
const char *csv_unguard(const char *s);

/* ---- files compiled in --------------------------------------------------------------------
 * Made by src/embed.cmake, so that the installed program needs no data files. */
struct embedded_file {
    const char *name;           /* "001-book.sql" */
    const unsigned char *bytes; /* a NUL stands behind them */
    size_t length;
};

#endif
