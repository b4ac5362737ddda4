/* plant: what a plant is: points, parameters, basins, limits, meters, figures of its own, rules.
 * Plain data and its checks. Rows come as text cells, from CSV files (intake) or from a book, and
 * are read by the one set of rules that stands here. */
#ifndef WEIRBOOK_PLANT_H
#define WEIRBOOK_PLANT_H

#include "base/base.h"

/* ---- the files of a description ---- */

enum plant_file {
    PLANT_FIELDS,     /* plant.csv */
    PLANT_POINTS,     /* points.csv */
    PLANT_PARAMETERS, /* parameters.csv */
    PLANT_BASINS,     /* basins.csv */
    PLANT_LIMITS,     /* limits.csv */
    PLANT_METERS,     /* meters.csv */
    PLANT_PROCESS,    /* process.csv */
    PLANT_ROUND,      /* round.csv */
    PLANT_FILES
};

#define PLANT_COLUMNS_MOST 20

struct plant_layout {
    const char *file;                       /* "limits.csv" */
    bool required;                          /* the folder must have it */
    size_t columns;                         /* how many it may have */
    size_t needed;                          /* the first `needed` must be in the header */
    const char *column[PLANT_COLUMNS_MOST]; /* names, in the order of the design */
};

const struct plant_layout *plant_layout(enum plant_file file);
/* The index of a column, or -1; `nearest` (may be NULL) gets the nearest known name. */
int plant_column(enum plant_file file, const char *name, const char **nearest);

/* ---- rules: conventions that permits differ in ---- */

enum rule {
    RULE_NONDETECT,
    RULE_SIGN,
    RULE_GEOMEAN_ZERO,
    RULE_WEEK_STARTS,
    RULE_WEEK_COUNTS_IN,
    RULE_ROUNDING,
    RULE_DIGITS,
    RULE_COMPARE,
    RULE_REMOVAL,
    RULE_LOAD_FACTOR,
    RULE_LOAD_AVERAGE,
    RULE_COUNT_BY,
    RULE_NO_DISCHARGE,
    RULE_DNQ,
    RULE_LONG_AVERAGE,
    RULE_PERCENTILE,
    RULE_LOAD_TOTAL,
    RULE_FLOW,
    RULE_INFLUENT,
    RULE_WINDOW,
    RULES
};

/* The words of each rule, in the order of the design; the first is the default. */
enum { NONDETECT_ZERO, NONDETECT_HALF, NONDETECT_FULL, NONDETECT_MEDIAN };
enum { SIGN_ANY, SIGN_ALL, SIGN_NEVER };
/* week_starts: enum weekday */
enum {
    WEEK_COUNTS_END,
    WEEK_COUNTS_START,
    WEEK_COUNTS_MOST_DAYS,
    WEEK_COUNTS_SPLIT,
    WEEK_COUNTS_DAYS_1_7
};
/* rounding: enum rounding */
enum { DIGITS_LIMIT, DIGITS_FIGURES, DIGITS_NUMBER };
enum { COMPARE_ROUNDED, COMPARE_RAW };
enum { REMOVAL_AVERAGES, REMOVAL_PAIRED, REMOVAL_LOADS, REMOVAL_DAILY };
enum { LOAD_AVERAGE_DAILY, LOAD_AVERAGE_PRODUCT };
enum { COUNT_BY_DAY, COUNT_BY_READING };
enum { NO_DISCHARGE_SKIP, NO_DISCHARGE_ZERO };
enum { DNQ_VALUE, DNQ_ZERO, DNQ_HALF };
enum {
    LONG_AVERAGE_DEFAULT,
    LONG_AVERAGE_MONTHS,
    LONG_AVERAGE_DAYS
}; /* default: months for rolling, days for annual */
enum { PERCENTILE_NEAREST_RANK, PERCENTILE_LINEAR, PERCENTILE_WEIBULL };
enum { LOAD_TOTAL_DAYS, LOAD_TOTAL_SUM };
enum { WINDOW_DAYS, WINDOW_RESULTS };

enum rule_kind { RULE_IS_WORD, RULE_IS_NUMBER, RULE_IS_DIGITS, RULE_IS_POINT };

struct rule_info {
    const char *name; /* "week_counts_in" */
    enum rule_kind kind;
    const char *const *words; /* RULE_IS_WORD, RULE_IS_DIGITS; NULL-terminated */
    const char *fallback;     /* the default, as written */
    const char *meaning;      /* one line, for the manual */
};

const struct rule_info *rule_info(enum rule r);

/* One full set: every rule has a value. */
struct rules {
    int word[RULES];              /* index of the word; of a point (RULE_IS_POINT), -1 when unset */
    struct decimal number[RULES]; /* RULE_IS_NUMBER; RULE_IS_DIGITS with DIGITS_NUMBER: the count */
    const char *text[RULES];      /* as written; "" for an unset point */
    bool own[RULES];              /* set by this row itself, not inherited (R41 needs it) */
};

/* A sentence that says the rule in force, for reports and the manual: "less-than results count as
 * zero in averages". In the arena. */
const char *rule_sentence(struct arena *a, const struct rules *rules, enum rule r);

struct plant;
/* Reads `name=value`, or several with ; between, as a column `rules` holds them, into *r, each
 * marked as its own. An unknown rule or word, and a rule that is its own already, is a fault of
 * usage; `where` says where it stands. */
MUST_USE enum status plant_rules_read(struct arena *a, const struct plant *plant, const char *where,
                                      const char *text, struct rules *r, struct fault *f);

/* ---- what a plant holds ----------------------------------------------------------------------
 * Cross references are indexes into the plant's arrays; -1 where there is none. */

enum role {
    ROLE_INFLUENT,
    ROLE_PRIMARY_EFFLUENT,
    ROLE_AERATION,
    ROLE_SECONDARY_EFFLUENT,
    ROLE_RETURN_SLUDGE,
    ROLE_WASTE_SLUDGE,
    ROLE_EFFLUENT,
    ROLE_UPSTREAM,
    ROLE_DOWNSTREAM,
    ROLE_DIGESTER_FEED,
    ROLE_DIGESTER,
    ROLE_DIGESTED_SLUDGE,
    ROLE_CAKE,
    ROLE_CHEMICAL,
    ROLE_OTHER,
    ROLES
};
enum basin_kind {
    BASIN_AERATION,
    BASIN_ANOXIC,
    BASIN_PRIMARY_CLARIFIER,
    BASIN_SECONDARY_CLARIFIER,
    BASIN_CONTACT,
    BASIN_DIGESTER,
    BASIN_THICKENER,
    BASIN_LAGOON,
    BASIN_GRIT,
    BASIN_FILTER,
    BASIN_MEMBRANE,
    BASIN_CARBON,
    BASIN_ULTRAVIOLET,
    BASIN_OZONE,
    BASIN_DRYING_BED,
    BASIN_KINDS
};
enum day_rule {
    DAY_MEAN,
    DAY_FLOW_WEIGHTED,
    DAY_MAX,
    DAY_MIN,
    DAY_SUM,
    DAY_LAST,
    DAY_GEOMETRIC,
    DAY_RULES
};
enum average { AVERAGE_ARITHMETIC, AVERAGE_GEOMETRIC, AVERAGES };
enum basis { BASIS_CONCENTRATION, BASIS_LOAD, BASIS_REMOVAL, BASIS_FLOW, BASIS_COUNT, BASES };
enum bound { BOUND_MAX, BOUND_MIN, BOUND_BELOW, BOUND_ABOVE, BOUND_REPORT, BOUND_TARGET, BOUNDS };
enum statistic {
    STAT_INSTANTANEOUS,
    STAT_DAILY,
    STAT_WEEKLY_AVERAGE,
    STAT_MONTHLY_AVERAGE,
    STAT_ROLLING_7_DAY,
    STAT_ROLLING_30_DAY,
    STAT_MONTHLY_GEOMEAN,
    STAT_WEEKLY_GEOMEAN,
    STAT_MONTHLY_TOTAL,
    STAT_QUARTERLY_AVERAGE,
    STAT_SEMIANNUAL_AVERAGE,
    STAT_ANNUAL_AVERAGE,
    STAT_ROLLING_12_MONTH,
    STAT_ANNUAL_TOTAL,
    STAT_MONTHLY_MEDIAN,
    STAT_PERCENTILE,
    STAT_ROLLING_7_DAY_MEDIAN,
    STAT_ROLLING_30_DAY_GEOMEAN,
    STAT_MONTHLY_SAMPLES,
    STAT_QUARTERLY_SAMPLES,
    STAT_ANNUAL_SAMPLES,
    STATISTICS
};
enum sample_type { SAMPLE_ANY, SAMPLE_GRAB, SAMPLE_COMPOSITE, SAMPLE_METER, SAMPLE_TYPES };
enum per { PER_NONE, PER_DAY, PER_WEEK, PER_MONTH, PER_QUARTER, PER_YEAR, PER_CONTINUOUS };
enum meter_kind { METER_TOTALIZER, METER_RATE, METER_KINDS };

/* Word lists, indexed by the enums above, for parser, help, reports and CHECKs. */
extern const char *const role_words[ROLES];
extern const char *const basin_kind_words[BASIN_KINDS];
extern const char *const day_rule_words[DAY_RULES];
extern const char *const average_words[AVERAGES];
extern const char *const basis_words[BASES];
extern const char *const bound_words[BOUNDS];
extern const char *const statistic_words[STATISTICS]; /* STAT_PERCENTILE: "percentile-N" */
extern const char *const sample_type_words[SAMPLE_TYPES];
extern const char *const meter_kind_words[METER_KINDS];

struct point {
    const char *id, *name, *outfall; /* outfall "" when none */
    enum role role;
};

/* A decimal that may be absent. */
struct optional {
    bool set;
    struct decimal value;
};

struct parameter {
    const char *id, *name, *code; /* five-digit code as text, "" when none */
    const struct unit *unit;
    int decimals;
    enum day_rule day_rule;
    enum average average;
    struct optional low, high, mdl, rl; /* in `unit` */
    bool builtin;
    struct rules rules; /* plant's, with this parameter's on top */
};

struct basin {
    const char *id;
    enum basin_kind kind;
    int point; /* -1 when none */
    struct optional volume, area, weir;
    const struct unit *volume_unit, *area_unit, *weir_unit; /* NULL with no value */
    day_t from, to;                                         /* in service; DAY_NONE: open end */
};

struct season {
    bool set;
    int from_month, from_date, to_month, to_date; /* inclusive; may wrap the year's end */
};

struct condition { /* EFF FLOW monthly-average > 2.5 MGD */
    bool set;
    int point, parameter;
    enum statistic statistic;
    int percentile;
    enum { WHEN_OVER, WHEN_AT_LEAST, WHEN_UNDER, WHEN_AT_MOST } comparison; /* > >= < <= */
    struct decimal number;
    const struct unit *unit;
    const char *text;
};

struct frequency {
    int count;    /* 3 of 3/week */
    enum per per; /* PER_NONE: the limit names none */
    const char *text;
};

enum allowed_kind { ALLOWED_NONE, ALLOWED_COUNT, ALLOWED_PERCENT, ALLOWED_EU_TABLE_3 };

#define SUM_PARTS_MOST 8

struct limit {
    long line; /* of limits.csv: rows are told apart by it */
    const char *outfall;
    int point[SUM_PARTS_MOST], points;         /* a sum of outfalls has several */
    int parameter[SUM_PARTS_MOST], parameters; /* a sum of parameters has several */
    const char *point_text, *parameter_text;   /* as written: "EFF+EF2" */
    enum basis basis;
    enum statistic statistic;
    int percentile; /* STAT_PERCENTILE */
    const char *statistic_text;
    enum bound bound;
    struct optional limit;
    const char *limit_text; /* as written; "" under report */
    const struct unit *unit;
    const char *unit_text;
    struct season season;
    day_t from, to; /* in force; DAY_NONE: open end */
    struct condition when;
    struct frequency samples;
    enum sample_type sample;
    enum allowed_kind allowed_kind;
    struct decimal allowed;
    struct optional ceiling;
    const char *group; /* "" when none */
    struct rules rules;
    const char *note;
};

struct meter {
    int point, parameter;
    enum meter_kind kind;
    struct optional rolls_at;
    struct decimal multiplier; /* 1 when blank */
    day_t from, to;
};

enum process_source {
    SOURCE_READING,
    SOURCE_BASIN_VOLUME,
    SOURCE_BASIN_AREA,
    SOURCE_BASIN_WEIR,
    SOURCE_NUMBER
};

/* One argument of one of the plant's own figures. Whether the formula and argument exist is for the
 * process room to say (it owns the catalogue). */
struct process_row {
    long line;
    const char *name, *at, *formula, *argument;
    int parameter; /* -1 when blank */
    enum process_source source;
    int point, source_parameter; /* SOURCE_READING */
    const char *basin;           /* SOURCE_BASIN_... */
    struct decimal number;       /* SOURCE_NUMBER */
    const struct unit *unit;     /* NULL when blank */
};

/* A stop of the shift round: what is read where, in walking order. */
struct round_stop {
    int point, parameter;
    const char *sample; /* which sample of the day; "" mostly */
};

struct plant {
    const char *name, *permit, *receiving_water, *time_zone;
    bool metric;
    day_t since; /* DAY_NONE when not given */
    struct rules rules;
    struct point *points;
    struct parameter *parameters;
    struct basin *basins;
    struct limit *limits;
    struct meter *meters;
    struct process_row *process;
    struct round_stop *round; /* in the order of round.csv */
    size_t point_count, parameter_count, basin_count, limit_count, meter_count, process_count,
        round_count;
};

int plant_point(const struct plant *p, const char *id);     /* -1 when unknown */
int plant_parameter(const struct plant *p, const char *id); /* -1 when unknown */
const char *plant_nearest_point(const struct plant *p, const char *id);
const char *plant_nearest_parameter(const struct plant *p, const char *id);
/* The meter in force at a point and parameter on a day, or NULL. */
const struct meter *plant_meter(const struct plant *p, int point, int parameter, day_t day);
bool basin_in_service(const struct basin *b, day_t day);
/* Whether a day lies in the season (an unset one holds every day; 02-28 as its end takes in 02-29).
 */
bool season_holds(const struct season *s, day_t day);
/* Whether season, from and to of a limit all hold on a day. */
bool limit_in_force(const struct limit *l, day_t day);

/* ---- from rows to a plant --------------------------------------------------------------------
 * Rows are added file by file, in file order; every problem is kept, none stops the reading. */

struct plant_draft;

struct plant_row {
    enum plant_file file;
    const char *name; /* the file as the person knows it: "marrow-bend/plant/limits.csv" */
    long line;
    bool builtin;                         /* a row of the built-in catalogue */
    const char *cell[PLANT_COLUMNS_MOST]; /* by column of the layout; NULL: no such column */
    int at[PLANT_COLUMNS_MOST]; /* where the cell stands in its row, from 1; 0: not known */
};

struct plant_draft *plant_draft_new(struct arena *a);
/* Copies the row. */
void plant_draft_add(struct plant_draft *d, const struct plant_row *row);
/* Adds a problem found outside (an unreadable file, an unknown column), in the fault's words. */
void plant_draft_problem(struct plant_draft *d, const char *fault_text);
size_t plant_draft_problems(const struct plant_draft *d);
const char *plant_draft_problem_at(const struct plant_draft *d, size_t i);
/* Reads and checks all rows. FAULT when there are problems: the fault holds the first, the draft
 * all of them, in order of file and line. */
MUST_USE enum status plant_draft_finish(struct plant_draft *d, struct plant **out, struct fault *f);
/* The rows as they were added, for writing the description back out and for the book. */
size_t plant_draft_rows(const struct plant_draft *d);
const struct plant_row *plant_draft_row(const struct plant_draft *d, size_t i);

#endif
