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
/* The same, a day or step at a time: the figures, and all they point at, die when `sink` returns.
 */
typedef void process_sink(void *context, const struct process_figure *figures, size_t count);
MUST_USE enum status process_each(const struct frame *frame, const struct process_options *o,
                                  process_sink *sink, void *context, struct fault *f);
/* Of all columns that have readings, those the table can use: the others need not be in its frame.
 * `out` has room for `count`; gives how many are in it. */
size_t process_reads(const struct plant *plant, const struct frame_span *spans, size_t count,
                     struct frame_span *out);

/* Days of a table gathered by weekday or by month of the year. */
enum process_group { GROUP_WEEKDAY, GROUP_MONTH };
#define PROCESS_PERCENTILES 3 /* the 10th, 50th, 90th */
struct process_summary {
    int group;                           /* enum weekday, or a month, 1 to 12 */
    const struct process_figure *figure; /* one of them: its name, place, parameter and unit */
    long count;                          /* days that have the figure */
    const struct fraction *mean, *least, *most, *percentile[PROCESS_PERCENTILES];
};
/* `figures`: of days. In order of the figures' first appearance, then of the group; groups without
 * a figure are left out. `rule`: a word of RULE_PERCENTILE, as process_percentile. */
void process_summarize(struct arena *a, const struct process_figure *figures, size_t count,
                       enum process_group by, int rule, struct process_summary **out,
                       size_t *out_count);
/* A percentile of `count` numbers, 1 or more, that stand lowest first. Common practice, no source:
 * nearest rank ceil(pn); linear between ranks 1 + p(n - 1); Weibull p(n + 1), held inside the ranks
 * there are. */
const struct fraction *process_percentile(struct arena *a, const struct fraction *const *ranked,
                                          size_t count, int percent, int rule);
/* Checks process.csv against the catalogue (formula, arguments, units) and tells every problem,
 * each in a fault's words with its line of process.csv. Returns how many. */
size_t process_problems(const struct plant *plant, void (*tell)(void *context, const char *fault),
                        void *context);
/* The same for those who only ask whether it is fine: the fault is the first problem. */
MUST_USE enum status process_check(const struct plant *plant, struct fault *f);

/* ---- bench sheets -------------------------------------------------------------------------------
 * From raw values (weights, oxygen in bottles, colonies) to readings, with the quality checks of
 * the published method. One table of sheets serves the command, the blank sheet, the manual and the
 * tests. */

enum bench_run { /* told by the first word of a row's run: "2", "blank", "seed-2", "standard" */
                 BENCH_SAMPLE,
                 BENCH_BLANK,
                 BENCH_SEED,
                 BENCH_STANDARD,
                 BENCH_RUNS
};
extern const char *const bench_run_words[BENCH_RUNS]; /* "", "blank", "seed", "standard" */

#define BENCH_ARGUMENTS_MOST 10

struct bench_argument {
    const char *name, *unit; /* as in the catalogue; unit "" for a text */
    const char *asked;       /* what a person is asked: "weight of the filter alone" */
    const char *fallback;    /* taken when not given; NULL: none */
    bool optional;           /* may be left out without a fallback */
    bool carries;            /* yesterday's value is a fair offer: a bottle's or a tube's volume */
    bool text;               /* a word, not a number: analyst, parameter, sample, note */
    bool once;               /* for the sheet's point, not for each run: run is blank */
    unsigned runs;           /* bits 1u << enum bench_run: kinds of run that have it */
    const char *above, *at_least, *below, *at_most; /* bounds; NULL: none */
};

struct bench_sheet {
    const char *name, *title; /* "suspended-solids", "Suspended and volatile solids by weight" */
    const char *run_name;     /* what a run is called: "filter", "bottle", "dilution" */
    const char *gives;        /* which parameters, in words */
    const char *source;       /* the published method */
    const char *beware;       /* one line or NULL */
    bool record;              /* gives no reading: a calibration that is kept with its checks */
    bool pointless;           /* has no point: a calibration */
    unsigned runs;            /* kinds of run that may come */
    struct bench_argument argument[BENCH_ARGUMENTS_MOST];
    size_t arguments;
};

/* The sheet "round" (plain readings in walking order) is not among them: its arguments are the
 * plant's parameters, its run says which sample of the day; bench_work knows it, and takes numbers,
 * <n, >n, E n and no-data codes. */
size_t bench_count(void);
const struct bench_sheet *bench_at(size_t i);
const struct bench_sheet *bench_find(const char *name); /* NULL when unknown */
const char *bench_nearest(const char *name);            /* "round" is known too */
enum bench_run bench_run_of(const char *run);
/* A typed value against the argument's bounds, kind of unit and form; the fault says what is wrong.
 * `unit` may be "" (the argument's own). */
MUST_USE enum status bench_value(struct arena *a, const struct bench_argument *argument,
                                 const char *value, const char *unit, struct fault *f);

struct bench_check {
    const char *text; /* "blank depletes 0.31 mg/L; at most 0.2" */
    const char *source;
    bool passed;
};

enum bench_kind {
    BENCH_READING, /* `reading` stands */
    BENCH_RECORD,  /* a calibration: checks alone */
    BENCH_REFUSED  /* `reason` and `explanation` say why there is no reading */
};

struct bench_outcome {
    enum bench_kind kind;
    const char *sheet;
    const char *parameter;  /* id; "" where not known */
    struct reading reading; /* file and line: of the first raw value of its group; its detail's note
                               tells the checks, failed ones first and in words */
    struct row_text row; /* of a refusal: what stands in its date, time, point, parameter, value */
    enum reason reason;
    const char *explanation;
    struct bench_check *check;
    size_t checks;
    const char **working; /* lines: the equation with the numbers put in, run by run */
    size_t workings;
};
/* Works all sheets of a file. Every raw value takes part in an outcome: a row that cannot be used
 * at all (unknown sheet, argument, point; no number) is a refusal of its own, and so is a group
 * whose formula refuses. A result is rounded once, by the plant's rounding rule, to the parameter's
 * decimals (counts: to two significant figures, as Standard Methods 9222 and 9221 report them, from
 * memory). A result with a failed check is QUALIFIER_ESTIMATED, or keeps its less-than. `today`:
 * later dates are refused. */
void bench_work(struct arena *a, const struct plant *plant, const struct raw_value *raw,
                size_t count, day_t today, struct bench_outcome **out, size_t *outcomes);

/* ---- wasting ----------------------------------------------------------------------------------
 * How much sludge to waste on a day. Aeration basins in service are taken as one, in a unit of the
 * plant: lb, lb/d, MGD, or kg, kg/d, m3/d. */

enum waste_aim { WASTE_FOR_SRT, WASTE_FOR_FM, WASTE_FOR_MLSS, WASTE_AIMS };

#define WASTE_LOOK_BACK 30 /* days; readings older than these take no part */

struct waste_options {
    enum waste_aim aim;
    const struct fraction *target; /* d, 1/d of volatile solids, or mg/L; above 0 */
    day_t on;                      /* no later reading takes part */
    int smooth; /* means are of so many of the last days with readings, 1 or more */
    int old;    /* days after which a reading is called old */
    int days;   /* to look ahead; 0: none */
    const struct fraction *step; /* most change from the day before, percent; 0 or more */
};

/* What the answer is worked from. */
struct waste_part {
    const char *name;
    const struct fraction *value;
    const char *unit;
    int days;             /* with readings; 0: no mean of days */
    day_t oldest, newest; /* of these readings; DAY_NONE where days is 0 */
    const char *note;     /* "" where nothing is to be said */
};

enum waste_limit {
    WASTE_AS_ASKED,
    WASTE_BY_STEP, /* the step from the day before holds it */
    WASTE_BY_ZERO  /* the target asks for less than nothing */
};

/* The end of a day to come. NULL figures: `note` says why. */
struct waste_day {
    day_t on;
    const struct fraction *inventory, *mlss, *srt;
    const char *note;
};

struct waste_plan {
    const struct fraction *solids, *flow;             /* what to waste in the day */
    const struct fraction *asked_solids, *asked_flow; /* the same before the step limit */
    enum waste_limit limited_by;
    const char *mass_unit, *solids_unit, *flow_unit; /* lb, lb/d, MGD */
    struct waste_part *part;
    size_t parts, part_room;
    const char **warning; /* sentences, the weightiest first */
    size_t warnings, warning_room;
    const struct fraction *yield; /* observed; NULL: no_yield says why, and there are no days */
    const char *no_yield;
    struct waste_day *day;
    size_t days;
};

/* The first day a frame for it must hold. */
day_t process_waste_reach(const struct waste_options *o);
/* Works the plan from readings of the look-back alone. Means are of the last `smooth` days with
 * readings. For an SRT: inventory / SRT less what the effluent carries, in a day. For F:M and MLSS:
 * the solids on hand above the target, taken off in one day; what the effluent carried is no longer
 * in the measured inventory. Floored at 0, then held within `step` percent of the newest waste flow
 * before `on`, unless that was 0. Formulas of the catalogue, with their sources:
 * waste-mass-for-srt, waste-flow-for-srt, waste-mass-for-food-to-microorganism,
 * waste-mass-for-mlss, waste-flow-from-mass, waste-flow-with-step-limit, solids-inventory.
 *
 * The days to come are a balance: inventory + observed yield x BOD removed - wasted - lost with the
 * effluent, where the load, the loss and the strength of the waste stay as they are. The yield
 * (observed-sludge-yield) is of the 30 days to `on`: wasted + lost + what the inventory gained by
 * its least-squares line, over BOD removed, each a mean of its own days with readings.
 *
 * Warnings (the bounds are common practice, no source): the target asks for less than nothing;
 * inventory falls by its least-squares line by more than 5 % within the days of its mean; a reading
 * is older than `old` days; nothing was wasted the day before, so that no step holds; the volume in
 * service changed. Faults: a part that no reading gives, named; what the catalogue's domains
 * refuse. */
MUST_USE enum status process_waste(struct arena *a, const struct frame *frame,
                                   const struct waste_options *o, struct waste_plan *out,
                                   struct fault *f);

#endif
