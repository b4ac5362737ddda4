/* process: the formula catalogue, and the process table worked from a frame. Pure: no files, no
 * SQL, no clock. */
#ifndef WEIRBOOK_PROCESS_H
#define WEIRBOOK_PROCESS_H

#include "base/base.h"
#include "frame/frame.h"
#include "plant/plant.h"

/* ---- the catalogue ---------------------------------------------------------------------------
 * One table serves the process table, the `formula` command, the manual and the tests. */

#define FORMULA_ARGUMENTS_MOST 12

struct formula_argument {
    const char *name, *unit;                        /* "flow", "MGD"; "1": dimensionless */
    bool list;                                      /* written name=1,2,3 */
    const char *fallback;                           /* default, as text; NULL: must be given */
    const char *above, *at_least, *below, *at_most; /* the domain; NULL: no bound */
};

struct formula {
    const char *name, *subject;
    struct formula_argument argument[FORMULA_ARGUMENTS_MOST];
    size_t arguments;
    const char *result, *unit;
    const char *equation; /* what is worked: + - * / ^ ( ) and named functions; or "rule: ..." */
    const char *requires; /* what must hold between arguments: "dried >= filter; ..."; or NULL */
    bool like; /* a share of like in like: in process.csv its arguments may be of any one kind */
    const char *source; /* published source, or "common practice, no source" */
    const char *trap;   /* one line, or NULL */
    const char *usual;  /* usual range with its source, or NULL */
};

size_t formula_count(void);
const struct formula *formula_at(size_t i);
const struct formula *formula_find(const char *name); /* NULL when unknown */
const char *formula_nearest(const char *name);

/* One argument's value(s), in the catalogue's unit. */
struct formula_value {
    const struct fraction *const *number;
    size_t count; /* 0: not given */
};

/* Works the formula on values in catalogue units (index as in argument[]); defaults are filled in.
 * Faults: a missing argument, one outside its domain, a zero divisor, lists of unequal length, a
 * result that is not finite. Exact where the equation is rational. */
MUST_USE enum status formula_work(struct arena *a, const struct formula *formula,
                                  const struct formula_value *values, const struct fraction **out,
                                  struct fault *f);

/* The same from text: "ARG=VALUE" words with unit suffixes (flow=3785m3/d); keeps the steps for
 * printing. */
struct formula_step {
    const char *text; /* one line: a conversion, the equation, the numbers put in, the result */
};
struct formula_result {
    const struct formula *formula;
    const struct fraction *value; /* in `unit` */
    const char *unit;             /* the metric twin when asked for */
    int figures;                  /* significant figures the inputs carry */
    struct formula_step *steps;
    size_t step_count;
};
MUST_USE enum status formula_ask(struct arena *a, const char *name, const char *const *words,
                                 size_t count, bool metric, struct formula_result *out,
                                 struct fault *f);

/* ---- the process table ------------------------------------------------------------------------
 */

enum process_step { STEP_DAY, STEP_WEEK, STEP_MONTH, STEP_YEAR };

struct process_figure {
    day_t from, to;
    const char *name;             /* the formula's, or the plant's own figure's */
    const char *at;               /* a point, a basin, "plant", or "FROM>TO" */
    const char *parameter;        /* "" where none */
    const struct fraction *value; /* of a day; the mean of a longer step; NULL: none, see note */
    const struct fraction *least, *most; /* longer steps */
    long count;                          /* days that have the figure; 1 or 0 for a day */
    const char *unit;
    const char *note; /* which reading is missing, or ""; never a silent zero */
};

struct process_options {
    day_t from, to;
    enum process_step step;
    int smooth; /* days of the moving average under inventory and wasting for SRT; 1: none */
};

/* The first day a frame for the table must hold: smoothing reaches back, and whether a figure's
 * parts are measured at all is judged over the 30 days before `from` too. */
day_t process_reach(const struct process_options *o);
/* Every figure whose parts are measured at this plant at all, for each day or step; figures come
 * out in order of date, then of the catalogue. Weeks start by the plant's rule. */
MUST_USE enum status process_table(struct arena *a, const struct frame *frame,
                                   const struct process_options *o, struct process_figure **out,
                                   size_t *count, struct fault *f);
/* Checks process.csv against the catalogue (formula, arguments, units); faults name its lines. */
MUST_USE enum status process_check(const struct plant *plant, struct fault *f);

#endif
