/* work: how a row of a permit summary is worked, from left to right:
 *   periods.c    a limit and a month to the rows it has there
 *   amounts.c    a row to the values of its days
 *   statistic.c  those values to one exact figure (ranks.c, worst.c)
 *   verdict.c    the figure to its text, and against the limit
 *   samples.c    how many samples were taken and required
 *   month.c      all limits of a month, conditions and groups
 *   needs.c      which readings all that is worked from
 * Private to this room. R and G numbers are those of weirbook-rules(7). */
#ifndef WEIRBOOK_PERMIT_WORK_H
#define WEIRBOOK_PERMIT_WORK_H

#include "permit/permit.h"

/* ---- statistics ---- */

enum span { SPAN_MONTH, SPAN_WEEK, SPAN_QUARTER, SPAN_HALF_YEAR, SPAN_YEAR, SPAN_12_MONTHS };
enum measure {
    MEASURE_WORST,
    MEASURE_MEAN,
    MEASURE_GEOMEAN,
    MEASURE_MEDIAN,
    MEASURE_PERCENTILE,
    MEASURE_TOTAL,
    MEASURE_SAMPLES
};

struct statistic_kind {
    enum span span;
    enum measure measure;
    int window; /* days of a rolling statistic; 0: none */
};

const struct statistic_kind *statistic_kind(enum statistic s);
/* Whether `times` is a number in the rows of this kind (R33). */
bool kind_counts_times(const struct statistic_kind *k);

/* ---- periods ---- */

#define PERIODS_MOST 6

struct period {
    day_t from, to;
};

/* The rows the limit has in the month, `when` aside. */
size_t periods_of(const struct limit *l, day_t month, struct period out[PERIODS_MOST]);
/* The first day whose readings a row uses. */
day_t period_reach(const struct plant *plant, const struct limit *l, const struct period *p);
/* The whole months from..to holds; 0 where it begins or ends inside one. */
int months_held(day_t from, day_t to);

/* ---- the work on one row ---- */

struct work {
    struct arena *arena;
    const struct frame *frame;
    const struct plant *plant;
    const struct limit *limit;
    const struct rules *rules;
    const struct statistic_kind *kind;
    day_t from, to;    /* the row's */
    day_t reach;       /* the first day whose readings take part */
    day_t end;         /* the last one: `to`, or the day the month is judged on */
    day_t on;          /* that day */
    int influent;      /* of a removal */
    bool verdict_only; /* a geometric mean is compared by its product alone: its 40 decimals, most
                        * of the work, are left out */
};

/* The work on a period as it stands on the day `on`; the influent of a removal is still to find. */
struct work work_on(struct arena *a, const struct frame *frame, const struct limit *l,
                    const struct period *p, day_t on);
/* A day in force, where only those count (R3). */
bool work_takes(const struct work *w, day_t day);
/* Whether the days from..to that have any entry are all without discharge; there must be one (R39).
 */
bool work_without_discharge(const struct work *w, day_t from, day_t to);
bool work_no_discharge(const struct work *w, day_t day);

/* ---- amounts ---- */

struct value {
    day_t day;
    struct amount amount;
    size_t readings;
    bool sample; /* false: a no-discharge day taken as 0 (R34) */
};

struct list {
    struct value *at;
    size_t count;
};

enum combine {
    COMBINE_NONE,    /* the figure is worked from `days` */
    COMBINE_PRODUCT, /* mean concentration (top) times mean flow (bottom), for each outfall */
    COMBINE_REMOVAL  /* 100 (1 - mean of top / mean of bottom) */
};

struct series {
    struct list days;     /* one value a day; what counts as samples */
    struct list readings; /* one value a reading, where readings are judged */
    bool by_reading;
    enum combine combine;
    int parts;
    struct list top[SUM_PARTS_MOST], bottom[SUM_PARTS_MOST];
    const char *why; /* the first day that could not be worked, or NULL */
};

/* A removal without an influent is a fault (R41). */
MUST_USE enum status find_influent(const struct plant *plant, const struct limit *l, int *influent,
                                   struct fault *f);
void amounts_of(const struct work *w, struct series *out);
struct list list_between(struct list l, day_t from, day_t to);
/* The load of a concentration in mg/L and a flow in load_flow_unit(), in the unit of the limit. */
const struct unit *load_flow_unit(const struct limit *l);
const struct fraction *load_of(const struct work *w, const struct fraction *concentration,
                               const struct fraction *flow);

/* ---- figures ---- */

/* number, or the root of product; number then holds it to 40 decimals. */
struct exact {
    const struct fraction *number; /* NULL: none */
    const struct fraction *product;
    unsigned root;
};

struct figure {
    struct exact exact;
    bool part_less, all_less, part_greater, all_greater;
    bool read; /* a value that was read off a ranking: its sign stands under any and all (R27) */
    struct exact stand; /* what stands after the sign where all were less-thans (R13, R27) */
    const char *as_written;
    day_t on;
    long times;
    bool beyond;  /* the limit */
    bool certain; /* beyond it whatever the rest of the period brings (R38) */
    const char *note;
};

void figure_of(const struct work *w, const struct series *s, struct figure *out);
void figure_of_value(const struct work *w, const struct value *v, struct figure *out);

/* ---- against the limit ---- */

bool is_minimum(const struct limit *l);
/* -1, 0, 1: the figure against a bound, rounded to its decimals or raw (R12). */
int exact_against(const struct work *w, const struct exact *x, struct decimal bound);
bool exact_beyond(const struct work *w, const struct exact *x);
char *figure_text(const struct work *w, const struct figure *x, int decimals);
int figure_decimals(const struct work *w, const struct exact *x);
void verdict_row(const struct work *w, const struct figure *x, bool when_missing,
                 struct permit_row *row);

/* ---- samples ---- */

long samples_taken(const struct work *w, const struct series *s);
bool samples_required(const struct work *w, long *out);

/* ---- needs ---- */

/* Widens `needs` by what another month, or the same under other rules, needs. */
void needs_add(struct arena *a, const struct plant *plant, day_t month, struct frame_span **needs,
               size_t *count, size_t *room);

/* What these days of each limit need, one period a limit (from > to: none), and the conditions of
 * those limits in the month. */
void needs_of_periods(struct arena *a, const struct plant *plant, day_t month,
                      const struct period *periods, struct frame_span **needs, size_t *count);

/* ---- conditions ---- */

enum holds { HOLDS_NOT, HOLDS, HOLDS_UNKNOWN };

/* A row that only reports, under the parameter's own rules. */
struct limit plain_limit(const struct plant *plant, int point, int parameter,
                         enum statistic statistic, const struct unit *unit);
/* Whether the condition holds by the month's figure as it stands on `on` (R2, R37). */
MUST_USE enum status condition_holds(struct arena *a, const struct frame *frame,
                                     const struct limit *l, day_t month, day_t on, enum holds *out,
                                     struct fault *f);
/* The limit whose figure a condition asks for. */
void condition_limit(const struct plant *plant, const struct limit *l, struct limit *out);

#endif
