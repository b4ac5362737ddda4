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

/* ---- several months side by side ---- */

struct span_month {
    const struct permit_row *worst; /* beyond the limit, else nearest to it; NULL: no row */
    long exceeded;                  /* rows beyond; of a daily limit days or readings beyond */
    long shortfalls;
};

struct span_row {
    const struct limit *limit;
    struct span_month *month; /* as many as the span has */
    const struct permit_row *highest, *lowest;
    size_t highest_in, lowest_in; /* in which month */
    const struct fraction *sum,
        *mean; /* of the figures as reported, one a row; `mean` is NULL without any, and where one
                  is signed: what a less-than counts as is settled inside a figure, not between
                  figures */
    bool is_signed; /* one of the figures has a < or > */
    long figures;   /* rows that have one */
    int decimals;   /* the most that one of them has */
    long exceeded, shortfalls;
};

struct permit_span {
    struct arena *arena;
    const struct permit_month *month;
    size_t months;
    struct span_row *rows; /* a row for each limit that was in force, in the order of limits.csv */
    size_t count;
    long exceeded, shortfalls; /* rows of the months, as each month counts them */
};

/* Gathers months that were judged, one after the other, by limit. */
void permit_span(struct arena *a, const struct permit_month *months, size_t count,
                 struct permit_span *out);

/* ---- under another rule ------------------------------------------------------------------------
 * The month worked again with rules put over the plant's, the parameters' and the limits' own:
 * those that `other` has of its own (plant_rules_read). */

struct permit_difference {
    const struct permit_row *row, *other; /* under the rules in force, and under others; NULL: the
                                             limit has no row there */
    const struct limit *limit;
    const char *rule, *in_force,
        *value;              /* "nondetect", "zero", "half"; of several with ; between */
    enum rule first;         /* the rule, or the first of several */
    size_t rules;            /* how many */
    int word_in_force, word; /* of `first`; no meaning under a number */
    bool verdict;            /* it differs; else the figure alone does */
};

struct permit_comparison {
    struct permit_month base;     /* the month under the rules in force */
    struct permit_difference *at; /* worst first: what would be exceeded, what would not be, other
                                     verdicts, figures; each in the order of the limits */
    size_t count, room, verdicts; /* all differences; those of verdicts, which come first */
    size_t limits, hang, figures; /* limits with a row; whose verdict differs; whose figure alone */
    size_t same;                  /* comparisons of rows that found no difference */
    bool other_periods;           /* somewhere the worst of other weeks stood for a limit */
    size_t tried;                 /* single values of rules that were tried */
};

/* What the month needs under the rules in force and under `other`; NULL: under every value that
 * permit_rules tries. */
void permit_needs_under(struct arena *a, const struct plant *plant, const struct rules *other,
                        day_t month, struct frame_span **needs, size_t *count);
/* The month under `other`, beside the month as it is. Rows are met by limit and period. Where the
 * other rules make other weeks, the worst week of the limit stands for it on either side. */
MUST_USE enum status permit_what_if(struct arena *a, const struct frame *frame, day_t month,
                                    day_t on, const struct rules *other,
                                    struct permit_comparison *out, struct fault *f);
/* Every value of every rule that has words, and the usual ones of those that are numbers (8.34 and
 * 8.345404, 1 and 0.5), one at a time; `flow`, `influent` and numbers of decimals are the plant's
 * own and are left out. */
MUST_USE enum status permit_rules(struct arena *a, const struct frame *frame, day_t month, day_t on,
                                  struct permit_comparison *out, struct fault *f);
/* Whether a rule can change a limit's figure or verdict. */
bool permit_rule_touches(const struct plant *plant, const struct limit *l, enum rule rule);

/* ---- what exceedances count as -----------------------------------------------------------------
 * A count of exceedances is no finding of law. */

enum counted {
    COUNTED_MONTH, /* each day of the month: Chesapeake Bay Foundation v. Gwaltney, 4th Cir. 1986,
                      791 F.2d 304; EPA's settlement penalty policy of 1995, from memory */
    COUNTED_WEEK,  /* each day of the week: the same policy, from memory */
    COUNTED_TIMES, /* each value, reading or window beyond: common practice, no source */
    COUNTED_ONCE,  /* once: nothing published says more */
    COUNTED_KINDS
};

struct permit_count {
    const struct permit_row *row;
    enum counted as;
    long count;
};

/* Of each exceeded row what it counts as, in the order of the rows. Counts of one parameter are not
 * to be added without a look: a day may stand in several. */
size_t permit_counts(struct arena *a, const struct permit_month *m, struct permit_count **out);

/* ---- standing: six months beside the federal screening criteria (40 CFR 123.45, appendix A) -----
 */

enum { STANDING_MONTHS = 6, CHRONIC_MONTHS = 4, TECHNICAL_MONTHS = 2 };
enum pollutant_group { GROUP_NEITHER, GROUP_I, GROUP_II, POLLUTANT_GROUPS };
extern const char *const group_words[POLLUTANT_GROUPS];

struct standing_month {
    bool limited, judged;  /* a monthly average has a limit; it was met or exceeded */
    bool above, technical; /* one above its limit; at or above the group's factor times it */
    int others;            /* daily, weekly and other monthly rows exceeded */
    const struct permit_row *worst; /* the monthly average furthest up; NULL without a figure */
    const struct fraction *ratio;   /* its figure over its limit; NULL under a limit of 0 */
};

/* One parameter at one outfall, all its limits together. */
struct standing_line {
    const struct limit *limit; /* the first of them */
    enum pollutant_group group;
    struct standing_month month[STANDING_MONTHS];
    int above, technical; /* months of each */
    int exceeded;         /* months with any exceedance */
    int run, longest;     /* months in a row with one: up to the last month, and at most */
    bool meets_chronic, meets_technical;
    bool near_chronic, near_technical; /* one more such month, next month, would meet it */
};

struct permit_standing {
    day_t first, month, on;      /* first day of the first and of the last month */
    struct standing_line *lines; /* worst first */
    size_t count;
    size_t meeting, exceeding; /* lines that meet a criterion; with any exceedance */
    size_t unjudged; /* months of lines without data or still open: they count as not above */
};

/* The group of each parameter of the plant, by its name; the caller may set others. */
enum pollutant_group *permit_groups(struct arena *a, const struct plant *plant);
/* 1.4 or 1.2; NULL for neither group. */
const struct fraction *permit_standing_factor(struct arena *a, enum pollutant_group group);
/* What the six months that end with `month` need. */
void permit_standing_needs(struct arena *a, const struct plant *plant, day_t month,
                           struct frame_span **needs, size_t *count);
MUST_USE enum status permit_standing(struct arena *a, const struct frame *frame, day_t month,
                                     day_t on, const enum pollutant_group *group,
                                     struct permit_standing *out, struct fault *f);

/* ---- notices (40 CFR 122.41(l)(6) and (7)) -----------------------------------------------------
 */

enum duty {
    DUTY_24_HOURS, /* (l)(6): 24 hours, and in writing within 5 days, where the permit lists the
                      limit or harm may be done */
    DUTY_REPORT    /* (l)(7): with the monitoring report */
};
enum { NOTICE_HOURS = 24, WRITTEN_HOURS = 5 * 24 };

struct permit_finding {
    const struct permit_row *row;
    day_t day;          /* of a daily or instantaneous limit, one finding a day; else DAY_NONE */
    const char *figure; /* the day's, or the row's */
    long beyond;        /* values of the day beyond */
    enum duty duty;
};

/* Every exceedance of a judged month, in the order of its rows, then by day. */
size_t permit_findings(struct arena *a, const struct frame *frame, const struct permit_month *m,
                       struct permit_finding **out);

struct moment {
    day_t day;
    int minute; /* after midnight; -1: not known */
};
/* So many hours after the plant became aware. Without a time of day they are counted from the first
 * minute of it, so that no hour is promised that may not be there. */
struct moment permit_owed(struct moment aware, int hours);

/* ---- room left ----------------------------------------------------------------------------------
 * What the samples still to come in a period may be. The figures are made by the same rules as a
 * month's; what room is, is algebra on them (for a mean (limit x all - sum so far) / remaining),
 * and no published source is needed for it. */

enum room_state {
    ROOM_LEFT,
    ROOM_NONE,      /* beyond the limit at the end, whatever comes */
    ROOM_ANY,       /* nothing that may come brings it beyond the limit */
    ROOM_NOT_WORKED /* `note` says why */
};

struct room_row {
    const struct limit *limit;
    day_t from, to;
    long taken, remaining;
    const day_t *day; /* the days that the remaining samples are taken to fall on, and how many */
    size_t days;
    /* As printed; "" where there is none. Of a removal room and single are effluent in `room_unit`,
     * of samples rows all but single are counts. */
    const char *so_far, *room, *single, *projected_7, *projected_30, *room_unit;
    enum room_state state;
    day_t gone;                   /* ROOM_NONE: since when; DAY_NONE where no day brought it */
    bool let_off;                 /* ROOM_NONE, but another of its group can still be met (R47) */
    const struct fraction *share; /* ROOM_LEFT: room over what the whole period may have */
    const char *note;             /* "" or one line */
    const char *single_note;      /* what the other samples are in `single`, what holds it */
};

/* Which readings permit_room needs on a day. */
void permit_room_needs(struct arena *a, const struct plant *plant, day_t on,
                       struct frame_span **needs, size_t *count);
/* Every limit with a number that has an open week, month, quarter, half-year or year on the day, or
 * a rolling window that closes with the next sample; worst first: those without room by the day it
 * went, then by the share of room, then those that nothing can break. Daily and instantaneous
 * limits have no period: they hold `single`. Readings after `on` are ignored. */
MUST_USE enum status permit_room(struct arena *a, const struct frame *frame, day_t on,
                                 struct room_row **rows, size_t *count, struct fault *f);

/* ---- samples due --------------------------------------------------------------------------------
 */

enum due_state { DUE_MISSED, DUE_DUE, DUE_TAKEN, DUE_STATES };
extern const char *const due_words[DUE_STATES];

struct due_row {
    int point, parameter;
    const struct limit *limit; /* whose frequency it is: the strictest of the series */
    day_t from, to;            /* the stretch of the frequency; daily ones by the plant's week */
    enum sample_type sample;
    long required, taken;
    enum due_state state; /* missed: what is taken and may still be taken is not enough */
    day_t next;           /* the first day that may still bring one */
};

/* Which readings permit_due needs. */
void permit_due_needs(struct arena *a, const struct plant *plant, day_t on, long days,
                      struct frame_span **needs, size_t *count);
/* Each series (a point and a parameter) that a limit in force asks samples of: the stretch that is
 * open on the day, the one before it and those that begin within `days` days; missed first, then
 * due, then taken, each by its last day. Readings after `on` are ignored. */
MUST_USE enum status permit_due(struct arena *a, const struct frame *frame, day_t on, long days,
                                struct due_row **rows, size_t *count, struct fault *f);

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
