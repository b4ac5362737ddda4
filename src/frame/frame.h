/* frame: a reading, and the day frame: one column per point and parameter, one row per day, each
 * cell the day's readings and, under a set of rules, the day's one value. */
#ifndef WEIRBOOK_FRAME_H
#define WEIRBOOK_FRAME_H

#include "base/base.h"
#include "plant/plant.h"

/* ---- a reading ---- */

enum qualifier {
    QUALIFIER_PLAIN,     /* 12.5 */
    QUALIFIER_LESS,      /* <2, <=2, ND (its number is the mdl, else the rl) */
    QUALIFIER_GREATER,   /* >2420, >=2420, TNTC (its number is the rl) */
    QUALIFIER_DNQ,       /* DNQ 0.4: detected, not quantified */
    QUALIFIER_DNQ_BARE,  /* DNQ alone: its number is the rl (rules page, G17) */
    QUALIFIER_ESTIMATED, /* E 12 */
    QUALIFIER_CODE,      /* a no-data code: no number */
    QUALIFIER_WITHDRAWN, /* a revision that takes the reading back: no number */
    QUALIFIERS
};
extern const char *const qualifier_words[QUALIFIERS]; /* "plain", "less", ... */

/* No-data codes (rules page, section 7) and what each means for the figures. */
enum code_effect {
    CODE_NO_DISCHARGE, /* C: the day is a no-discharge day */
    CODE_NOT_REQUIRED, /* not a sample and not missed: 9, A, F, 7, 1, 2, 4, 5, I, J, K, N, S, V, W
                        */
    CODE_MISSED        /* a missed sample: E, D, X, G, H, M; B, Q without a number */
};
struct no_data_code {
    char code;
    enum code_effect effect;
    const char *meaning; /* "sampler failure" */
};
const struct no_data_code *no_data_code(char code); /* NULL when unknown */

/* What is known of a reading beside its value; "" where nothing is. 40 CFR 122.41(j)(3) asks for
 * who sampled, when and by whom it was analysed, and the method. Shared by many readings. */
struct detail {
    const char *method, *analyst, *collected_by, *analyzed, *note;
};

struct reading {
    day_t day;
    int16_t minute; /* -1: no time given */
    uint16_t point, parameter;
    uint16_t unit; /* unit_at(): as written in the file */
    uint8_t qualifier;
    char code; /* QUALIFIER_CODE */
    bool has_mdl, has_rl;
    int version;            /* 0 as first loaded, 1... revisions */
    struct decimal value;   /* in `unit`; no meaning under CODE and WITHDRAWN */
    struct decimal mdl, rl; /* in `unit` */
    const char *text;       /* the value as written in the file: "<2", "TNTC", "30.0" */
    const char *sample;     /* which sample of the day, part of its identity; "" mostly */
    const struct detail *detail;
    const char *file;  /* the file it came from, as its batch names it */
    long line;         /* and the line */
    int64_t id, batch; /* in the book; 0 outside one */
};

/* ---- a row as a person wrote it ----------------------------------------------------------------
 * The columns of a long readings file; a cell of a wide file is put into the same words. */

enum long_column {
    LONG_DATE,
    LONG_TIME,
    LONG_POINT,
    LONG_PARAMETER,
    LONG_VALUE,
    LONG_UNIT,
    LONG_SAMPLE,
    LONG_METHOD,
    LONG_ANALYST,
    LONG_COLLECTED_BY,
    LONG_ANALYZED,
    LONG_MDL,
    LONG_RL,
    LONG_NOTE,
    LONG_COLUMNS
};
extern const char
    *const long_columns[LONG_COLUMNS]; /* "date", "time", ... the first six are required */

/* Why a row could not be accepted: word, and what to do about it. One list for the book's CHECK,
 * the manual and the tests. */
#define REASONS(X)                                                                                 \
    X(NOT_A_NUMBER, "not-a-number", "correct the value, or write ND with its limit")               \
    X(TOO_MANY_DIGITS, "too-many-digits", "write at most 18 digits")                               \
    X(BLANK_VALUE, "blank-value", "write the value, or a no-data code such as 'code E'")           \
    X(NO_LIMIT_FOR_ND, "no-limit-for-nd", "give mdl or rl in the row, or in parameters.csv")       \
    X(CODE_WITHOUT_NUMBER, "code-without-number", "write <n, ND or DNQ n in place of the code")    \
    X(NEGATIVE_VALUE, "negative-value", "correct the value")                                       \
    X(BAD_DATE, "bad-date", "write the date as YYYY-MM-DD")                                        \
    X(BAD_TIME, "bad-time", "write the time as HH:MM")                                             \
    X(FUTURE_DATE, "future-date", "correct the date")                                              \
    X(BEFORE_PLANT, "before-plant", "correct the date, or 'since' in plant.csv")                   \
    X(UNKNOWN_POINT, "unknown-point", "correct the point, or add it to points.csv")                \
    X(UNKNOWN_PARAMETER, "unknown-parameter",                                                      \
      "correct the parameter, or add it to parameters.csv")                                        \
    X(UNKNOWN_UNIT, "unknown-unit", "use a unit spelling of weirbook-files(5)")                    \
    X(WRONG_UNIT, "wrong-unit", "use a unit of the parameter's kind")                              \
    X(WRONG_COLUMNS, "wrong-columns", "give the row as many cells as the header")                  \
    X(BAD_QUOTES, "bad-quotes", "close the quotes, or double those inside a cell")                 \
    X(BAD_TEXT, "bad-text", "save the file as UTF-8 without control bytes")                        \
    X(TOO_LONG, "too-long", "shorten the cell")                                                    \
    X(CONTRADICTS, "contradicts", "keep the old value, or load again with --revise --reason TEXT") \
    X(UNKNOWN_SHEET, "unknown-sheet", "name a sheet that 'weirbook bench' lists")                  \
    X(UNKNOWN_ARGUMENT, "unknown-argument",                                                        \
      "name an argument of the sheet: 'weirbook bench --list'")                                    \
    X(NO_RESULT, "no-result", "correct the raw values and take the sheet again")

enum reason {
#define X(id, word, todo) REASON_##id,
    REASONS(X)
#undef X
        REASON_COUNT
};
extern const char *const reason_words[REASON_COUNT];
extern const char *const reason_todo[REASON_COUNT];

struct row_text {
    const char *file;
    long line;
    int column;                     /* of a wide file's cell; 0 in a long file */
    const char *cell[LONG_COLUMNS]; /* as written; "" where absent */
    const char *raw; /* the whole line where its cells could not be told apart; else "" */
};

/* ---- a raw value of a bench sheet, as a person wrote it ----------------------------------------
 * Columns of a raw values file, all required. A sheet's rows of one date, time and point belong
 * together; rows without a point (blanks, seed, standards) serve all points of their sheet and
 * date. */

enum raw_column {
    RAW_SHEET,    /* "suspended-solids" */
    RAW_DATE,     /* the day sampled */
    RAW_TIME,     /* or blank */
    RAW_POINT,    /* or blank */
    RAW_RUN,      /* which filter, bottle or tube row: "1", "blank", "seed-2"; or blank */
    RAW_ARGUMENT, /* "dried" */
    RAW_VALUE,
    RAW_UNIT, /* blank: the argument's own */
    RAW_COLUMNS
};
extern const char *const raw_columns[RAW_COLUMNS]; /* "sheet", "date", ... */

struct raw_value {
    const char *file;
    long line;
    const char *cell[RAW_COLUMNS]; /* as written */
};

/* ---- which readings a piece of work needs ------------------------------------------------------
 */

struct frame_span {
    int point, parameter;
    day_t first, last;
};

/* ---- the frame ---- */

struct frame;

/* A frame of the days first..last (both included). It, and all it hands out, live in the arena. */
struct frame *frame_new(struct arena *a, const struct plant *plant, day_t first, day_t last);
/* Copies the reading (its texts must outlive the frame). Of two versions of one reading the higher
 * stays. Days outside first..last are kept only as a totalizer's starting point. */
void frame_add(struct frame *f, const struct reading *r);
/* Sorts and groups; work out totalizers' daily differences. Call once, after the last frame_add. */
void frame_close(struct frame *f);
/* The same readings (not copied; the closed frame must outlive this one) under a plant that differs
 * in rules and limits alone. */
struct frame *frame_under(struct arena *a, const struct frame *f, const struct plant *plant);

day_t frame_first(const struct frame *f);
day_t frame_last(const struct frame *f);
const struct plant *frame_plant(const struct frame *f);
/* Whether any reading of the column stands in the frame. */
bool frame_has(const struct frame *f, int point, int parameter);
/* A day's readings, in order of time (none first), then of loading; withdrawn ones left out. Codes
 * stand among them. NULL and 0 where there are none. */
const struct reading *const *frame_readings(const struct frame *f, int point, int parameter,
                                            day_t day, size_t *count);

/* A number with what must be known of it when its sign is printed (rules page, R13, R15, R27-R31).
 */
struct amount {
    const struct fraction *number; /* after substitution; NULL: no value */
    /* A day's geometric mean that is no fraction: number^root is product, and number holds it to 40
     * decimals. Else NULL and 0. (rules page, R48) */
    const struct fraction *product;
    unsigned root;
    bool part_less, all_less; /* a less-than took part; nothing but less-thans did */
    bool part_greater, all_greater;
    bool dnq;                    /* nothing but less-thans and DNQ took part, and one was a DNQ */
    const struct fraction *less; /* R13's number: what would stand after "<"; NULL without one */
    const char *as_written;      /* the digits of `less` as the file has them (R31); NULL where it
                                  * is no one reading's number, or was in another unit */
};

enum day_state {
    DAY_EMPTY, /* nothing at all */
    DAY_VALUED,
    DAY_NO_DISCHARGE, /* code C or zero flow (R23, R39, G10): how it counts is rule no_discharge */
    DAY_MISSED,       /* only codes that mean a missed sample */
    DAY_NOT_REQUIRED, /* only codes that mean nothing was owed */
    DAY_BROKEN        /* a totalizer that cannot give the day's difference: `why` says so */
};

struct day_value {
    enum day_state state;
    struct amount amount; /* DAY_VALUED; of no-discharge days under `zero` too */
    size_t readings;      /* how many took part */
    const char *why;      /* one line when there is no value, naming what is missing; else NULL */
};

/* The day's value of a column, by the parameter's day rule under `rules` (nondetect, dnq,
 * geomean_zero, no_discharge), in `unit` (NULL: the parameter's own; of its kind otherwise).
 * A totalizer's column gives the day's difference, counted from the last reading of the day before:
 * a reading less the one before, plus `rolls_at` where it fell, times the multiplier. A reading
 * whose sample is `start` sets the register anew (reset, new meter) and nothing is counted across
 * it. A difference over more than one day is no day's: such a day is DAY_BROKEN. */
void frame_day(const struct frame *f, int point, int parameter, day_t day,
               const struct rules *rules, const struct unit *unit, struct day_value *out);
/* One reading's amount under the rules, in `unit` (NULL: the parameter's own). False for codes. */
bool frame_amount(const struct frame *f, const struct reading *r, const struct rules *rules,
                  const struct unit *unit, struct amount *out);
/* Whether the point did not discharge on the day (R23, R39, G10): code C under any parameter, or at
 * a point that discharges (an effluent, or one with an outfall) a flow of 0; not where its flow is
 * above 0. */
bool frame_no_discharge(const struct frame *f, int point, day_t day);
/* Whether anything stands on record at the point on the day, codes included. */
bool frame_entry(const struct frame *f, int point, day_t day);
/* The parameter that measures a point's flow (R40), and at which point; false where none serves:
 * its FLOW, else its only parameter with a flow unit, else that of the rule `flow`. Only what has a
 * reading in the frame, or in its days first..last, counts. */
bool frame_flow_of(const struct frame *f, int point, const struct rules *rules, int *flow_point,
                   int *flow_parameter);
bool frame_flow_within(const struct frame *f, int point, const struct rules *rules, day_t first,
                       day_t last, int *flow_point, int *flow_parameter);
/* Exact, like unit_convert; also from an amount in a day to a rate by the day and back (kgal to
 * MGD, lb/d to lb). `from` and `to` of one kind, or volume and flow, or mass and mass-rate. */
const struct fraction *frame_in_unit(struct arena *a, const struct fraction *x,
                                     const struct unit *from, const struct unit *to);

#endif
