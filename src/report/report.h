/* report: the page model and its writers: text, CSV, JSON, workbook. Writers only render: they
 * neither compute nor round, so that all forms of a page agree. */
#ifndef WEIRBOOK_REPORT_H
#define WEIRBOOK_REPORT_H

#include "base/base.h"
#include "frame/frame.h"
#include "permit/permit.h"
#include "plant/plant.h"
#include "process/process.h"

/* ---- the page model ----------------------------------------------------------------------------
 * Everything a page points at belongs to its arena; writers only read. */

/* Colour follows the word, never alone. FLAG_LIGHT marks nothing bad: weekends, figures of habit.
 */
enum flag { FLAG_NONE, FLAG_BAD, FLAG_SHORT, FLAG_WATCH, FLAG_GOOD, FLAG_LIGHT, FLAGS };
enum align {
    ALIGN_LEFT,
    ALIGN_RIGHT,
    ALIGN_POINT
}; /* ALIGN_POINT: numbers by their decimal point */

enum cell_kind {
    CELL_EMPTY,
    CELL_TEXT,
    CELL_NUMBER, /* `text` is the number as printed; a workbook gets it as a number */
    CELL_DATE    /* `text` is YYYY-MM-DD; a workbook gets a true date */
};

struct cell {
    enum cell_kind kind;
    const char *text; /* never NULL */
    enum flag flag;
};

struct column {
    const char *key;   /* CSV heading and JSON key; NULL: not in those */
    const char *title; /* heading on a page, units included: "BOD5, mg/L" */
    enum align align;
    bool wraps; /* long text may run over several lines */
    int rank;   /* columns of a higher rank are dropped first when a page is too wide; 0: never */
};

struct table {
    const char *title; /* "" for none */
    const struct column *column;
    size_t columns;
    struct cell *cell; /* row after row */
    size_t rows, room;
    struct arena *arena;
};

struct table *table_new(struct arena *a, const char *title, const struct column *column,
                        size_t columns);
/* One more row, all cells empty; returns its first cell, which stays in place until the next row.
 */
struct cell *table_row(struct table *t);
struct cell cell_text(const char *text);
struct cell cell_number(const char *text); /* "" becomes CELL_EMPTY */
struct cell cell_count(struct arena *a, long n);
struct cell cell_day(struct arena *a, day_t day); /* DAY_NONE becomes CELL_EMPTY */
struct cell cell_flagged(struct cell c, enum flag flag);

enum block_kind { BLOCK_HEADING, BLOCK_LINE, BLOCK_TABLE, BLOCK_SPACE, BLOCK_NEW_PAGE };
struct block {
    enum block_kind kind;
    const char *text; /* BLOCK_HEADING, BLOCK_LINE (wrapped to the width) */
    enum flag flag;   /* of a BLOCK_LINE */
    const struct table *table;
};

struct page {
    struct arena *arena;
    struct block *block;
    size_t blocks, room;
};

struct page *page_new(struct arena *a);
void page_heading(struct page *p, const char *text);
void page_line(struct page *p, enum flag flag, const char *format, ...) PRINTS(3, 4);
void page_table(struct page *p, const struct table *t);
void page_space(struct page *p);
void page_break(struct page *p); /* a form feed on paper */

/* ---- writers ----
 * To a stream; the caller flushes and checks it once at the end (a full device is a failure). */

struct text_style {
    int width;   /* columns: 100, or less on a narrow terminal */
    bool colour; /* only on a terminal that wants it (NO_COLOR, TERM=dumb) */
};

void write_text(FILE *out, const struct page *p, const struct text_style *style);
void write_csv(FILE *out, const struct table *t);
/* The same without the line of names: more rows of a table whose first were written before. */
void write_csv_rows(FILE *out,
                    const struct table *t); /* columns with a key, RFC 4180, LF, guarded */
void write_json(
    FILE *out,
    const struct table *t); /* an array of objects; numbers as written, empty cells null */

/* ---- the month ----------------------------------------------------------------------------------
 */

struct month_aside { /* a row set aside, for the page */
    const char *file, *reason, *explanation, *date, *point, *parameter, *value;
    long line;
    int column;
};
struct month_revision {
    const char *date, *point, *parameter, *old_text, *new_text, *unit, *who, *when, *reason, *file;
    long line;
};

/* What people have said of days or limits of the month: a cause, a remedy, an event. It is printed
 * beside figures and changes none. */
struct month_remark {
    long number;
    const char *kind, *event; /* "cause", "remedy", "event"; which event, "" for the others */
    day_t from, to;
    const char *point, *parameter, *statistic; /* "" where it is about all */
    const char *text, *who, *when;
};
struct month_remarks {
    struct month_remark *at; /* in the order of their days */
    size_t count, room;
};

struct month_input {
    const struct plant *plant;
    const struct frame *frame;
    const struct permit_month *permit;
    const struct process_figure
        *process; /* of the days of the month, for the workbook; may be none */
    size_t process_count;
    /* The same by month (or week), for the page and below the days of the workbook; may be none. */
    const struct process_figure *process_month;
    size_t process_months;
    const struct month_aside *aside;
    size_t asides;
    const struct month_revision *revision;
    size_t revisions;
    struct month_remarks remarks;
    const char *as_of;   /* the day whose book it is, where that is not today's; NULL */
    const char *head;    /* the book's newest head, hex */
    const char *version; /* the program's */
    day_t printed;
};

/* `permit` as a table with the seventeen columns of the interface (for --as csv|json). */
struct table *report_permit_table(struct arena *a, const struct permit_month *m,
                                  const struct month_remarks *remarks);
/* `permit` as a page: exceedances, shortfalls, then every limit with figure, limit, samples,
 * verdict; remarks (NULL: none) in a section, and in the note of each row they are about. */
struct page *report_permit_page(struct arena *a, const struct plant *plant,
                                const struct permit_month *m, const struct month_remarks *remarks);
/* Whether a remark is about a row's figure: it names the point and parameter of the row's limit
 * (and, if any, its statistic), and its days touch the row's period. */
bool report_remark_of_row(const struct month_remark *r, const struct permit_row *row);
/* "remark 12: TEXT", in the arena. */
const char *report_remark_note(struct arena *a, const struct month_remark *r);
/* A limit and a row in words, for roll-ups: "EFF TSS, weekly average", "at most 45 mg/L", "52
 * mg/L", "2025-03-16 to 2025-03-22". */
const char *report_limit_name(struct arena *a, const struct limit *l);
const char *report_limit_bound(struct arena *a, const struct limit *l);
const char *report_row_figure(struct arena *a, const struct permit_row *row);
const char *report_row_when(struct arena *a, const struct permit_row *row);
/* How far a row is beyond its limit, as a number with three decimals: the figure over the limit, of
 * a minimum the limit over the figure; for a shortfall of samples the share that is lacking. ""
 * where it cannot be said (a limit or figure of 0). */
char *report_share(struct arena *a, const struct permit_row *row);

struct fleet_plant {
    const char *book, *name, *exceeded, *shortfalls; /* counts as text */
};
struct fleet_finding {
    const char *book, *plant;
    bool exceeded;     /* else samples are short */
    const char *share; /* report_share */
    const char *what, *when, *figure, *limit, *times, *samples, *required;
};
struct fleet_missing {
    const char *book, *why;
};
struct fleet_summary {
    day_t month, on;
    struct fleet_plant *plants;
    size_t plant_count;
    struct fleet_finding *findings;
    size_t finding_count;
    struct fleet_missing *missing;
    size_t missing_count;
};
/* Many plants' month: books not read, exceedances and shortfalls, the farthest beyond first, and
 * how many plants have neither. Sorts the findings. */
struct page *report_fleet_page(struct arena *a, struct fleet_summary *summary);

/* Months side by side: exceedances by month, every limit's months (the worst figure of each), then
 * highest, lowest and mean. The table has a row for each limit and month, and one for the span,
 * whose month is empty. */
struct table *report_span_table(struct arena *a, const struct permit_span *span);
struct page *report_span_page(struct arena *a, const struct plant *plant,
                              const struct permit_span *span);
/* A month beside itself under other rules, a row for each difference, verdicts first: limit,
 * period, rule, both figures, both verdicts. */
struct table *report_compare_table(struct arena *a, const struct permit_comparison *c);
/* In words; `asked` is "nondetect=half, sign=all". */
struct page *report_what_if_page(struct arena *a, const struct plant *plant,
                                 const struct permit_comparison *c, const char *asked);
/* The limits whose verdict hangs on a rule, and how many others there are. */
struct page *report_rules_page(struct arena *a, const struct plant *plant,
                               const struct permit_comparison *c);
/* What the month's exceedances count as, one row each. */
struct table *report_count_table(struct arena *a, const struct permit_count *counts, size_t count);
struct page *report_count_page(struct arena *a, const struct plant *plant,
                               const struct permit_month *m, const struct permit_count *counts,
                               size_t count);
/* Six months beside the federal screening criteria: a row for each parameter at an outfall, worst
 * first. */
struct table *report_standing_table(struct arena *a, const struct permit_standing *s);
struct page *report_standing_page(struct arena *a, const struct plant *plant,
                                  const struct permit_standing *s);
/* ---- notices ---- */

struct notice {
    const struct plant *plant;
    const struct frame *frame;
    const struct permit_finding *const *finding; /* of one day and outfall */
    size_t findings;
    bool written;        /* the written one, of 5 days; else the first, of 24 hours */
    struct moment aware; /* day DAY_NONE: not known */
    /* What is on record about the day or its limits, one line each: printed above what the person
     * is to write, never in its place. */
    const char *const *remark;
    size_t remarks;
};

/* A draft as text, marked so on every page: facts filled in, cause and remedy left blank. */
void report_notice(FILE *out, struct arena *a, const struct notice *n);

struct notice_listed { /* a finding and its drafts; "" where there is none */
    const struct permit_finding *finding;
    struct moment aware; /* day DAY_NONE: not known */
    const char *draft, *written_draft;
};
struct table *report_notices_table(struct arena *a, const struct notice_listed *l, size_t count);
/* "drafts/notice-24-hours-2025-03-18-001.txt: draft written" */
const char *report_notice_file(struct arena *a, const char *path, bool was_there);
/* `files`: such a line for each draft. */
struct page *report_notices_page(struct arena *a, const struct plant *plant,
                                 const struct permit_month *m, const struct notice_listed *l,
                                 size_t count, const char *const *files, size_t file_count);

/* The monthly summary as text: the permit page, daily values, rows set aside, revisions, the rules
 * used, cautions, a place for the certification. Fits 100 columns, US Letter or A4. */
struct page *report_month_page(struct arena *a, const struct month_input *in);
/* The same as a workbook: Summary, Limits, Daily, Process (when given), Exceedances, Set aside,
 * Corrections (when there are any), Rules and notes. Written beside `path` and renamed. */
MUST_USE enum status report_month_workbook(struct arena *a, const struct month_input *in,
                                           const char *path, struct fault *f);

#endif
