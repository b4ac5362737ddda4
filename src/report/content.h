/* content: what the pages and the workbook say, as tables and lines, so that no two forms of a
 * report can differ. Private to this room. */
#ifndef WEIRBOOK_REPORT_CONTENT_H
#define WEIRBOOK_REPORT_CONTENT_H

#include "report/report.h"
#include "report/words.h"

/* ---- limits in words (limit_words.c) ----------------------------------------------------------
 */

/* "TSS load": the parameter as written, and the basis where it is a load or a removal. */
const char *limit_what(struct arena *a, const struct limit *l);
/* "weekly average", "daily maximum". */
const char *limit_statistic(struct arena *a, const struct limit *l);
/* "at most 45 mg/L"; `with_unit` false leaves the unit out. */
const char *limit_bound(struct arena *a, const struct limit *l, bool with_unit);
/* "TSS weekly average at EFF", for lines. */
const char *limit_name(struct arena *a, const struct limit *l);
/* "0.031 mg/L"; "" without a figure. */
const char *row_figure(struct arena *a, const struct permit_row *row);
/* "Mar 16-22", "Mar 18", "month": the period as the page's month allows, short. */
const char *row_period(struct arena *a, const struct permit_row *row, day_t month);
/* "2025-03-16 to 2025-03-22", or the one day of the worst value: in full. */
const char *row_when(struct arena *a, const struct permit_row *row);
/* "EXCEEDED", "met, SHORT": verdict and shortfall in words, with the flag they deserve. */
struct cell row_verdict(struct arena *a, const struct permit_row *row, day_t on);
/* "12/13", or "12" where none are required. */
const char *row_samples(struct arena *a, const struct permit_row *row);
/* Whether the row is the highest (of a minimum: the lowest) of the weeks of its limit. */
bool row_is_worst_week(const struct permit_month *m, size_t row);
/* "2 exceedances, 1 shortfall", worst first. */
const char *month_headline(struct arena *a, const struct permit_month *m);
/* "March 2025" */
const char *month_title(struct arena *a, day_t month);
const char *say_count(struct arena *a, long n, enum word one, enum word many);
/* The outfalls of the month's rows: "001, 002"; "" when none is named. */
const char *month_outfalls(struct arena *a, const struct permit_month *m);

struct sentences {
    const char **at;
    size_t count, room;
};
void say(struct arena *a, struct sentences *s, const char *sentence);
bool said_already(const struct sentences *s, const char *sentence);
/* "Marrow Bend, March 2025" */
const char *title_line(struct arena *a, const struct plant *plant, const struct permit_month *m);
/* "Permit XX0000, outfall 001, discharging to Marrow Creek" */
const char *permit_line(struct arena *a, const struct plant *plant, const struct permit_month *m);
/* That the month is not over on the day it is judged. */
const char *judged_line(struct arena *a, const struct permit_month *m);
/* "EFF BOD5, monthly average (at most 30 mg/L): 11 taken of 12 required, FROM to TO" */
const char *shortfall_line(struct arena *a, const struct permit_row *row);
/* The highest weekly average of each limit that has several weeks. */
void week_sentences(struct arena *a, const struct permit_month *m, struct sentences *out);

/* ---- the permit page (permit_page.c) ----------------------------------------------------------
 */

void permit_title(struct page *p, const struct plant *plant, const struct permit_month *m);
void permit_blocks(struct page *p, const struct plant *plant, const struct permit_month *m,
                   const struct month_remarks *remarks);
/* Exceedances, shortfalls and targets passed, one row each, for the workbook. */
struct table *findings_table(struct arena *a, const struct permit_month *m,
                             const struct month_remarks *remarks);
/* Every row, for the workbook: figures as numbers, dates as dates. */
struct table *limits_table(struct arena *a, const struct permit_month *m,
                           const struct month_remarks *remarks);

/* ---- remarks (remarks.c) -----------------------------------------------------------------------
 */

/* A row's note with the remarks about it behind: "...; remark 12: TEXT". */
const char *row_note(struct arena *a, const struct permit_row *row,
                     const struct month_remarks *remarks);
/* The remarks whose days touch the month, and those about one of its rows. */
struct table *remark_table(struct arena *a, const struct permit_month *m,
                           const struct month_remarks *remarks);

/* ---- daily values (daily.c) --------------------------------------------------------------------
 */

enum { DAYS_MOST = 31 };

struct daily_column {
    int point, parameter;
    const char *name;  /* "EFF BOD5" */
    const char *title; /* "EFF BOD5 mg/L" */
    const char
        *value[DAYS_MOST];  /* as printed; "" where there is none; a code's letter for codes */
    bool beyond[DAYS_MOST]; /* beyond a daily or instantaneous limit in force on the day */
    const char *mean, *least, *most, *days; /* below; "" where it has no meaning */
    bool geometric;
};

struct daily {
    day_t first, last;
    struct daily_column *column;
    size_t columns, room;
    bool any_beyond, any_code, any_less, any_geometric;
    const char **broken; /* why a totalizer gave no difference, one line each */
    size_t broken_count, broken_room;
};

void daily_make(struct arena *a, const struct month_input *in, struct daily *out);
/* All columns as one table: the day, then each column, mean and extremes below. For `paper` values
 * beyond a limit get a star; for a workbook a column in words. */
struct table *daily_table(struct arena *a, const struct daily *d, bool paper);

/* ---- the other parts (month_parts.c) ------------------------------------------------------------
 */

struct table *aside_table(struct arena *a, const struct month_input *in);
/* On paper the day of a correction is enough. */
struct table *revision_table(struct arena *a, const struct month_input *in, bool paper);
/* Days whose reading is a no-data code, with its meaning. */
struct table *code_table(struct arena *a, const struct month_input *in);
/* Process figures by month or week: mean, lowest, highest. */
struct table *process_summary(struct arena *a, const struct month_input *in);
/* Process figures by day: a row a day, a column a figure, the month's below. */
struct table *process_by_day(struct arena *a, const struct month_input *in);
/* Sentences: the plant's rules, then those of parameters and limits that differ. */
void rules_sentences(struct arena *a, const struct month_input *in, struct sentences *out);
void rules_exceptions(struct arena *a, const struct month_input *in, struct sentences *out);
/* Which flow serves which load; notes of limits; methods on record. */
void flow_sentences(struct arena *a, const struct month_input *in, struct sentences *out);
void method_sentences(struct arena *a, const struct month_input *in, struct sentences *out);
void caution_sentences(struct arena *a, struct sentences *out);
/* Program, book head and printed date. */
void footer_sentences(struct arena *a, const struct month_input *in, struct sentences *out);

#endif
