/* Bench sheets from inside: a group of raw values that give one set of readings, what its sheet's
 * function reads of it, and what it hands back. */
#ifndef WEIRBOOK_PROCESS_BENCH_H
#define WEIRBOOK_PROCESS_BENCH_H

#include "process/process.h"

struct bench_group;
/* FAULT: the group is refused, by bench_refuse. Checks come before the first bench_give. */
typedef enum status bench_worker(struct bench_group *g);

struct bench_entry {
    struct bench_sheet sheet;
    bench_worker *work;
    const char *parameter;  /* what it gives where the sheet does not choose; NULL: it chooses */
    const char *low, *high; /* a membrane filter's countable range */
};

struct bench_part {
    const struct bench_entry *entry;
    size_t count;
};
extern const struct bench_part bench_solids, bench_oxygen, bench_filters, bench_tubes, bench_meters;
/* The round's arguments are the plant's parameters, beside the texts of every sheet. */
extern const struct bench_entry bench_round;

const struct bench_entry *bench_entry_find(const char *name); /* knows "round"; NULL when unknown */
int bench_argument_index(const struct bench_sheet *sheet, const char *name); /* -1 when unknown */

/* Reads a value and turns it into the argument's unit; REASON_COUNT: fine, else the fault says what
 * is wrong. `*out` is NULL for a text. */
enum reason bench_read_value(struct arena *a, const struct bench_argument *arg, const char *value,
                             const char *unit, const struct fraction **out, struct fault *f);
enum reason bench_read_unit(struct arena *a, const char *own_name, const char *name,
                            const char *what, const struct unit **out, struct fault *f);

/* The once-per-sheet texts that every sheet has. */
#define BENCH_TEXT(id, words)                                                                      \
    {                                                                                              \
        .name = (id), .unit = "", .asked = (words), .optional = true, .text = true, .once = true,  \
        .runs = 1u << BENCH_SAMPLE                                                                 \
    }
#define BENCH_TEXTS                                                                                \
    BENCH_TEXT("analyst", "who analysed it"),                                                      \
        BENCH_TEXT("method", "the method, when it is other"),                                      \
        BENCH_TEXT("sample", "which sample of the day"), BENCH_TEXT("note", "a note")
#define BENCH_PARAMETER BENCH_TEXT("parameter", "the parameter, when it is other")

/* A raw value, read. */
struct bench_row {
    const struct raw_value *raw;
    size_t order; /* in the file */
    const struct bench_entry *entry;
    enum bench_run kind;
    int argument; /* of the sheet */
    day_t day;
    int minute, point;             /* -1: none */
    bool placed;                   /* sheet, date, time and point are known */
    bool bad;                      /* has an outcome of its own */
    const struct fraction *number; /* in the argument's unit; NULL for a text */
    enum reason reason;            /* of a bad one */
    const char *explanation;
};

/* A run: one filter, bottle, dilution. */
struct bench_set {
    const char *name;
    enum bench_run kind;
    const struct bench_row *given[BENCH_ARGUMENTS_MOST];
};

struct bench_made { /* an outcome and where its group begins, to be put in order */
    size_t order;
    struct bench_outcome outcome;
};
struct bench_made_list {
    struct bench_made *at;
    size_t count, room;
};

struct bench_group {
    struct arena *arena;
    const struct plant *plant;
    const struct bench_entry *entry;
    const struct bench_row *first;
    const struct bench_row *const *rows; /* its own, bad ones too */
    size_t row_count;
    day_t day;
    int minute, point;
    struct bench_set *set; /* its own and those shared by the sheet and date */
    size_t sets, room;
    const struct bench_row *once[BENCH_ARGUMENTS_MOST];
    const char *parameter; /* what it gives; "" until known */
    const char *summary;   /* what the note begins with: "3 of 4 bottles used" */
    struct bench_check *check;
    size_t checks, check_room;
    const char **working;
    size_t workings, working_room;
    bool estimated; /* whatever the checks say */
    enum reason reason;
    const char *explanation;
    struct bench_made_list *made;
};

/* ---- reading a group ---- */

/* A run's number in the argument's unit, or its fallback, or NULL; a number given once per sheet is
 * the same for all runs. */
const struct fraction *bench_number(const struct bench_group *g, const struct bench_set *s,
                                    const char *argument);
/* A text given once, or NULL. */
const char *bench_text(const struct bench_group *g, const char *argument);
/* The first run of a kind after `from` (NULL: from the start), or NULL. */
const struct bench_set *bench_next(const struct bench_group *g, enum bench_run kind,
                                   const struct bench_set *from);
size_t bench_sets(const struct bench_group *g, enum bench_run kind);
/* "bottle '2'", "the filter", "blank". */
const char *bench_set_words(const struct bench_group *g, const struct bench_set *s);

/* ---- handing back ---- */

enum status bench_refuse(struct bench_group *g, enum reason reason, const char *format, ...)
    PRINTS(3, 4);
void bench_check(struct bench_group *g, bool passed, const char *source, const char *format, ...)
    PRINTS(4, 5);
void bench_say(struct bench_group *g, const char *format, ...) PRINTS(2, 3); /* a working line */

/* Works a formula of the catalogue on single numbers in the order of its arguments (NULL: not
 * given) and keeps the line of working. The fault becomes the group's refusal. */
MUST_USE enum status bench_formula(struct bench_group *g, const struct bench_set *s,
                                   const char *name, const struct fraction *const *numbers,
                                   const struct fraction **out);
/* The same on lists; the line of working is the caller's. */
MUST_USE enum status bench_formula_lists(struct bench_group *g, const char *name,
                                         const struct formula_value *values,
                                         const struct fraction **out);

enum bench_digits { BENCH_DECIMALS, BENCH_TWO_FIGURES };
/* Gives a reading, rounded once; `unit` is that of x. */
MUST_USE enum status bench_give(struct bench_group *g, const char *parameter,
                                const struct fraction *x, const char *unit,
                                enum qualifier qualifier, enum bench_digits digits);
/* Gives a record of checks alone. */
void bench_record(struct bench_group *g);
void bench_refused(struct bench_group *g); /* what bench_refuse said, as an outcome */
struct bench_outcome *bench_outcome_add(struct bench_made_list *made, struct arena *a,
                                        size_t order);
/* The note and details of the group's readings. */
const struct detail *bench_detail(struct bench_group *g);

/* ---- small arithmetic ---- */

/* Room for so many numbers. */
const struct fraction **bench_numbers(struct arena *a, size_t count);
const struct fraction *bench_mean(struct arena *a, const struct fraction *const *x, size_t count);
/* A constant of the sheets: "2.5". */
const struct fraction *bench_constant(struct arena *a, const char *text);
bool bench_within(struct arena *a, const struct fraction *x, const char *least, const char *most);
bool bench_is_whole(struct arena *a, const struct fraction *x);

/* ---- the round ---- */

/* One plain reading, its value token read; REASON_COUNT: fine, else the fault says what is wrong.
 */
enum reason bench_round_read(struct arena *a, const struct plant *plant,
                             const struct bench_row *row, struct reading *out, struct fault *f);

#endif
