/* permit: statistics, limits, verdicts. Pure: numbers in a frame to rows of a permit summary. The
 * rules it follows, with their sources, are listed in the manual, weirbook-rules(7). */
#ifndef WEIRBOOK_PERMIT_H
#define WEIRBOOK_PERMIT_H

#include "base/base.h"
#include "frame/frame.h"
#include "plant/plant.h"
#include "process/process.h"

/* Which readings a month's rows need: one entry per column, the days it must reach over. Weekly
 * rows reach into the neighbour month, rolling and long ones further back. month: the first day of
 * it. Entries are unique by point and parameter. */
void permit_needs(struct arena *a, const struct plant *plant, day_t month,
                  struct frame_span **needs, size_t *count);

enum verdict {
    VERDICT_MET,
    VERDICT_EXCEEDED,
    VERDICT_REPORT,
    VERDICT_TARGET_MET,
    VERDICT_TARGET_PASSED,
    VERDICT_NO_DATA,
    VERDICT_NO_DISCHARGE,
    VERDICT_OPEN,
    VERDICTS
};
extern const char *const verdict_words[VERDICTS];

/* One limit in one period (rules page, R2: in the order of limits.csv, then by date). */
struct permit_row {
    const struct limit *limit;
    day_t from, to;
    day_t on;                       /* the worst value's day; DAY_NONE for averages */
    const char *figure;             /* as it would be reported, sign included; "" without one */
    const struct fraction *exact;   /* before rounding (under a geometric mean NULL: see root) */
    const struct fraction *root;    /* a geometric mean's product, and */
    unsigned root_of;               /* its root; 0 when the figure is no geometric mean */
    const struct fraction *rounded; /* the figure as compared; NULL without one */
    int decimals;                   /* of `figure` */
    const char *unit;
    enum verdict verdict;
    bool has_times;
    long times;
    long samples;
    bool has_required;
    long required;
    const char *note; /* "" or one line: the group's row, the missing `when` figure */
};

struct permit_month {
    day_t month,
        on; /* first day of the month; the day it is judged on (readings after it are ignored) */
    struct permit_row *rows;
    size_t count;
    size_t exceeded, shortfalls; /* rows with either */
};

/* Works every row of the month. A limit that cannot be judged (a removal without an influent, R41)
 * is a fault that names limits.csv and its line. `on`: the period of a row that ends after it is
 * open. */
MUST_USE enum status permit_month(struct arena *a, const struct frame *frame, day_t month, day_t on,
                                  struct permit_month *out, struct fault *f);

/* Whether a row is a shortfall: fewer samples than required, the period over by `on`. */
bool permit_shortfall(const struct permit_row *row, day_t on);

/* One day's value as it is printed on the daily pages ("<2", "14.5"); "" where there is none. A
 * day's only reading keeps the laboratory's digits; what is worked from several has `decimals`. */
const char *permit_day_text(struct arena *a, const struct frame *frame, int point, int parameter,
                            day_t day, const struct rules *rules, int decimals);

/* Whether a daily or instantaneous limit is passed on a day, by the day's value or any of its
 * readings. Season, dates and condition are the caller's to look at. */
bool permit_day_beyond(struct arena *a, const struct frame *frame, const struct limit *l,
                       day_t day);

/* A parameter's mean over a month (geometric where its `average` says so) as a row without a limit
 * would report it, from readings up to the day `on`; "" without data. */
const char *permit_month_mean(struct arena *a, const struct frame *frame, int point, int parameter,
                              day_t month, day_t on);

/* Weeks, by the rules week_starts and week_counts_in: those that count in a month, in order.
 * Returns how many (at most 6); from and to are the week's real days, or the stub's under `split`.
 */
struct week {
    day_t from, to;
};
size_t permit_weeks(const struct rules *rules, day_t month, struct week out[6]);

#endif
