/* draft: what the readers of the eight files share: the rows as they came, the problems found, the
 * plant being built, and the reading of single cells. Private to this room. */
#ifndef WEIRBOOK_PLANT_DRAFT_H
#define WEIRBOOK_PLANT_DRAFT_H

#include "plant/plant.h"

/* Columns of each file, in the order of its layout. */
enum { FIELD_NAME, FIELD_VALUE };
enum { POINT_ID, POINT_NAME, POINT_ROLE, POINT_OUTFALL };
enum {
    PARAMETER_ID,
    PARAMETER_NAME,
    PARAMETER_UNIT,
    PARAMETER_DECIMALS,
    PARAMETER_DAY_RULE,
    PARAMETER_AVERAGE,
    PARAMETER_CODE,
    PARAMETER_LOW,
    PARAMETER_HIGH,
    PARAMETER_MDL,
    PARAMETER_RL,
    PARAMETER_RULES
};
enum {
    BASIN_ID,
    BASIN_KIND,
    BASIN_POINT,
    BASIN_VOLUME,
    BASIN_VOLUME_UNIT,
    BASIN_AREA,
    BASIN_AREA_UNIT,
    BASIN_WEIR,
    BASIN_WEIR_UNIT,
    BASIN_FROM,
    BASIN_TO
};
enum {
    LIMIT_OUTFALL,
    LIMIT_POINT,
    LIMIT_PARAMETER,
    LIMIT_BASIS,
    LIMIT_STATISTIC,
    LIMIT_BOUND,
    LIMIT_LIMIT,
    LIMIT_UNIT,
    LIMIT_SEASON,
    LIMIT_FROM,
    LIMIT_TO,
    LIMIT_WHEN,
    LIMIT_SAMPLES,
    LIMIT_SAMPLE,
    LIMIT_ALLOWED,
    LIMIT_CEILING,
    LIMIT_GROUP,
    LIMIT_RULES,
    LIMIT_NOTE
};
enum {
    METER_POINT,
    METER_PARAMETER,
    METER_KIND,
    METER_ROLLS_AT,
    METER_MULTIPLIER,
    METER_FROM,
    METER_TO
};
enum {
    PROCESS_NAME,
    PROCESS_AT,
    PROCESS_PARAMETER,
    PROCESS_FORMULA,
    PROCESS_ARGUMENT,
    PROCESS_SOURCE,
    PROCESS_UNIT
};
enum { ROUND_POINT, ROUND_PARAMETER, ROUND_SAMPLE };

#define WHOLE_LINE (-1) /* as a column: the problem is of the line, not of one cell */

struct problem {
    int file; /* order of the files; below 0: of the folder */
    long line;
    int column;
    size_t order; /* as found: sorting stays stable */
    const char *text;
};

struct plant_draft {
    struct arena *arena;
    struct plant_row *rows;
    size_t row_count, row_room;
    struct problem *problems;
    size_t problem_count, problem_room;
    bool told[PLANT_FILES]; /* a problem of the file came from outside */
    struct plant *plant;
    /* The row each element of the plant's arrays came from, for messages that name two lines. */
    const struct plant_row **origin[PLANT_FILES];
};

/* ---- problems ---- */

/* Keeps a problem at a cell. `todo` may be NULL. */
void problem(struct plant_draft *d, const struct plant_row *row, int column, const char *todo,
             const char *what, ...) PRINTS(5, 6);
/* Keeps a problem of a whole file, by its name in the folder the other rows came from. */
void problem_of_file(struct plant_draft *d, enum plant_file file, const char *todo,
                     const char *what);

/* ---- cells: each returns false once it has kept a problem ---- */

const char *cell(const struct plant_row *row, int column); /* "" when blank or absent */
bool read_blank(const struct plant_row *row, int column);
/* The index of a word in a list; a blank cell is a problem. */
bool read_word(struct plant_draft *d, const struct plant_row *row, int column, const char *what,
               const char *const *words, size_t count, int *out);
/* The same for a word that is not a whole cell. */
bool word_in(struct plant_draft *d, const struct plant_row *row, int column, const char *what,
             const char *word, const char *const *words, size_t count, int *out);
bool number_in(struct plant_draft *d, const struct plant_row *row, int column, const char *text,
               struct decimal *out);
/* Blank: not set. */
bool read_number(struct plant_draft *d, const struct plant_row *row, int column,
                 struct optional *out);
/* Blank: not set. Zero and less are problems. */
bool read_positive(struct plant_draft *d, const struct plant_row *row, int column,
                   struct optional *out);
/* A whole number from `least` to `most`; a blank cell leaves *out alone. */
bool read_whole(struct plant_draft *d, const struct plant_row *row, int column, int least, int most,
                int *out);
/* Digits alone, at most `most`; false without a problem. */
bool whole_parse(const char *text, int most, int *out);
bool read_day(struct plant_draft *d, const struct plant_row *row, int column, day_t *out);
/* Two day cells, the first not after the second where both are given. */
bool read_days(struct plant_draft *d, const struct plant_row *row, int from_column, day_t *from,
               day_t *to);
bool unit_in(struct plant_draft *d, const struct plant_row *row, int column, const char *text,
             const struct unit **out);
bool point_in(struct plant_draft *d, const struct plant_row *row, int column, const char *text,
              int *out);
bool parameter_in(struct plant_draft *d, const struct plant_row *row, int column, const char *text,
                  int *out);
/* The name something new is known by: no blanks, none of the signs that other columns use. */
bool read_id(struct plant_draft *d, const struct plant_row *row, int column);
bool read_given(struct plant_draft *d, const struct plant_row *row, int column);
/* Splits at blanks (sign ' ') or at another sign, trimmed, into at most `most` parts; returns how
 * many there are, `most` + 1 when there are more. The parts live in the draft's arena. */
size_t split(struct plant_draft *d, const char *text, char sign, const char **parts, size_t most);
/* "write one of max, min, below"; the list, in the draft's arena. */
const char *one_of(struct plant_draft *d, const char *const *words, size_t count);
const char *layout_column(const struct plant_row *row, int column);

/* ---- rules ---- */

void rules_default(struct rules *r);
/* What a lower level starts from: the same values, none of them its own. */
void rules_inherit(struct rules *r, const struct rules *from);
int rule_find(const char *name); /* -1 when unknown */
bool rule_set(struct plant_draft *d, const struct plant_row *row, int column, struct rules *r,
              enum rule rule, const char *value);
/* A cell of `name=value;name=value`. */
bool read_rules(struct plant_draft *d, const struct plant_row *row, int column, struct rules *r);

/* ---- limits ---- */

bool statistic_in(struct plant_draft *d, const struct plant_row *row, int column, const char *text,
                  enum statistic *out, int *percentile);
bool statistic_counts_samples(enum statistic s); /* monthly-, quarterly-, annual-samples */
bool statistic_is_total(enum statistic s);
bool read_season(struct plant_draft *d, const struct plant_row *row, struct season *out);
bool read_condition(struct plant_draft *d, const struct plant_row *row, struct condition *out);
bool read_frequency(struct plant_draft *d, const struct plant_row *row, const struct rules *rules,
                    struct frequency *out);
bool read_allowed(struct plant_draft *d, const struct plant_row *row, struct limit *l);
/* Whether the unit can carry a figure of this basis and statistic of this parameter. */
bool unit_fits(struct plant_draft *d, const struct plant_row *row, int column, int parameter,
               enum basis basis, enum statistic statistic, const struct unit *unit);

/* ---- readers of the files, one row at a time ---- */

void read_field(struct plant_draft *d, const struct plant_row *row);
void read_point(struct plant_draft *d, const struct plant_row *row);
void read_parameter(struct plant_draft *d, const struct plant_row *row);
void read_basin(struct plant_draft *d, const struct plant_row *row);
void read_limit(struct plant_draft *d, const struct plant_row *row);
void read_meter(struct plant_draft *d, const struct plant_row *row);
void read_process(struct plant_draft *d, const struct plant_row *row);
void read_stop(struct plant_draft *d, const struct plant_row *row);
/* What only the whole plant shows: limits that contradict, groups of one. */
void limits_agree(struct plant_draft *d);
/* Whether two spans of days share one; DAY_NONE is an open end. */
bool spans_meet(day_t from_a, day_t to_a, day_t from_b, day_t to_b);

#endif
