/* limit: the rows of limits.csv, and what they must agree in among themselves. */
#include "plant/draft.h"

#include <string.h>

#include "base/poison.h"

/* ---- one row ---- */

/* Splits "A+B" and looks each part up; a part may stand once. */
static bool read_sum(struct plant_draft *d, const struct plant_row *row, int column,
                     bool (*find)(struct plant_draft *, const struct plant_row *, int, const char *,
                                  int *),
                     int *index, int *count)
{
    const char *part[SUM_PARTS_MOST];
    size_t parts = split(d, cell(row, column), '+', part, SUM_PARTS_MOST);
    bool ok = true;

    *count = 0;
    if (parts > SUM_PARTS_MOST) {
        problem(d, row, column, arena_print(d->arena, "keep to %d", SUM_PARTS_MOST),
                "'%s' has too many parts", cell(row, column));
        return false;
    }
    for (size_t i = 0; i < parts; i++) {
        if (*part[i] == '\0') {
            problem(d, row, column, "write a name on both sides of each +",
                    "a part of '%s' is blank", cell(row, column));
            return false;
        }
        ok = find(d, row, column, part[i], &index[i]) && ok;
        for (size_t j = 0; ok && j < i; j++) {
            if (index[j] == index[i]) {
                problem(d, row, column, "keep one", "'%s' stands twice in '%s'", part[i],
                        cell(row, column));
                ok = false;
            }
        }
    }
    *count = (int)parts;
    return ok;
}

static bool read_who(struct plant_draft *d, const struct plant_row *row, struct limit *l)
{
    bool ok;

    l->outfall = cell(row, LIMIT_OUTFALL);
    l->point_text = cell(row, LIMIT_POINT);
    l->parameter_text = cell(row, LIMIT_PARAMETER);
    ok = read_given(d, row, LIMIT_POINT) &&
         read_sum(d, row, LIMIT_POINT, point_in, l->point, &l->points);
    return read_given(d, row, LIMIT_PARAMETER) &&
           read_sum(d, row, LIMIT_PARAMETER, parameter_in, l->parameter, &l->parameters) && ok;
}

static bool read_what(struct plant_draft *d, const struct plant_row *row, struct limit *l)
{
    int basis = 0, bound = 0, sample = SAMPLE_ANY;
    bool ok = read_word(d, row, LIMIT_BASIS, "basis", basis_words, BASES, &basis);

    l->statistic_text = cell(row, LIMIT_STATISTIC);
    ok = statistic_in(d, row, LIMIT_STATISTIC, l->statistic_text, &l->statistic, &l->percentile) &&
         ok;
    ok = read_word(d, row, LIMIT_BOUND, "bound", bound_words, BOUNDS, &bound) && ok;
    if (!read_blank(row, LIMIT_SAMPLE))
        ok = read_word(d, row, LIMIT_SAMPLE, "kind of sample", sample_type_words, SAMPLE_TYPES,
                       &sample) &&
             ok;
    l->basis = (enum basis)basis;
    l->bound = (enum bound)bound;
    l->sample = (enum sample_type)sample;
    return ok;
}

/* The number; whether there must be one hangs on the bound, when that could be read. */
static bool read_limit_number(struct plant_draft *d, const struct plant_row *row, struct limit *l)
{
    bool report = text_equal(cell(row, LIMIT_BOUND), bound_words[BOUND_REPORT]);

    l->limit_text = cell(row, LIMIT_LIMIT);
    if (report && !read_blank(row, LIMIT_LIMIT)) {
        problem(d, row, LIMIT_LIMIT, "leave it blank, or write target as the bound",
                "report takes no limit, and here is '%s'", l->limit_text);
        return false;
    }
    if (!report && read_blank(row, LIMIT_LIMIT)) {
        problem(d, row, LIMIT_LIMIT, "write the number, or report as the bound", "limit is blank");
        return false;
    }
    return read_number(d, row, LIMIT_LIMIT, &l->limit);
}

static bool read_time(struct plant_draft *d, const struct plant_row *row, struct limit *l)
{
    bool ok = read_season(d, row, &l->season);

    ok = read_days(d, row, LIMIT_FROM, &l->from, &l->to) && ok;
    return read_condition(d, row, &l->when) && ok;
}

static bool read_rest(struct plant_draft *d, const struct plant_row *row, struct limit *l)
{
    bool ok;

    rules_inherit(&l->rules, l->parameters > 0 && l->parameter[0] >= 0
                                 ? &d->plant->parameters[l->parameter[0]].rules
                                 : &d->plant->rules);
    ok = read_rules(d, row, LIMIT_RULES, &l->rules);
    ok = read_frequency(d, row, &l->rules, &l->samples) && ok;
    ok = read_allowed(d, row, l) && ok;
    l->group = cell(row, LIMIT_GROUP);
    l->note = cell(row, LIMIT_NOTE);
    l->unit_text = cell(row, LIMIT_UNIT);
    return read_given(d, row, LIMIT_UNIT) && unit_in(d, row, LIMIT_UNIT, l->unit_text, &l->unit) &&
           ok;
}

/* ---- whether the cells of one row go together ---- */

/* Loads and removals stand on day values, and a share removed cannot be added up. */
static bool statistic_fits(struct plant_draft *d, const struct plant_row *row,
                           const struct limit *l)
{
    bool derived = l->basis == BASIS_LOAD || l->basis == BASIS_REMOVAL;

    if (derived && l->statistic == STAT_INSTANTANEOUS) {
        problem(d, row, LIMIT_STATISTIC, "write daily, or another basis",
                "a %s has no instantaneous figure", basis_words[l->basis]);
        return false;
    }
    if (l->basis == BASIS_REMOVAL && statistic_is_total(l->statistic)) {
        problem(d, row, LIMIT_STATISTIC, "write an average, or another basis",
                "a removal has no total");
        return false;
    }
    return true;
}

static bool sum_fits(struct plant_draft *d, const struct plant_row *row, const struct limit *l)
{
    const struct parameter *all = d->plant->parameters;

    if (l->points > 1 && l->basis != BASIS_LOAD && l->basis != BASIS_FLOW) {
        problem(d, row, LIMIT_POINT, "write a limit for each point, or load or flow as the basis",
                "points can be added for loads and flows, not for %s", basis_words[l->basis]);
        return false;
    }
    for (int i = 1; i < l->parameters; i++) {
        const struct parameter *first = &all[l->parameter[0]], *other = &all[l->parameter[i]];

        if (!first->unit || !other->unit)
            return false;
        if (unit_same_kind(first->unit, other->unit))
            continue;
        problem(d, row, LIMIT_PARAMETER, "add only what is measured in units of one kind",
                "%s is measured in %s and %s in %s", first->id, first->unit->name, other->id,
                other->unit->name);
        return false;
    }
    return true;
}

void read_limit(struct plant_draft *d, const struct plant_row *row)
{
    struct limit l = {.line = row->line};
    bool ok = read_who(d, row, &l);

    ok = read_what(d, row, &l) && ok;
    ok = read_limit_number(d, row, &l) && ok;
    ok = read_time(d, row, &l) && ok;
    ok = read_rest(d, row, &l) && ok;
    if (!ok || !statistic_fits(d, row, &l) || !sum_fits(d, row, &l) ||
        !unit_fits(d, row, LIMIT_UNIT, l.parameter[0], l.basis, l.statistic, l.unit))
        return;
    d->origin[PLANT_LIMITS][d->plant->limit_count] = row;
    d->plant->limits[d->plant->limit_count++] = l;
}

/* ---- whether the rows go together ---- */

#define DAYS_OF_ALL_SEASONS 1461 /* four years hold every day of the year, 02-29 too */

/* Whether both rows are in force on some day. */
static bool share_a_day(const struct limit *a, const struct limit *b)
{
    day_t from = a->from, to = a->to;

    if (!spans_meet(a->from, a->to, b->from, b->to))
        return false;
    if (!a->season.set && !b->season.set)
        return true;
    if (from == DAY_NONE || (b->from != DAY_NONE && b->from > from))
        from = b->from;
    if (to == DAY_NONE || (b->to != DAY_NONE && b->to < to))
        to = b->to;
    if (from == DAY_NONE)
        from = to == DAY_NONE ? 0 : to - DAYS_OF_ALL_SEASONS;
    if (to == DAY_NONE || to > from + DAYS_OF_ALL_SEASONS)
        to = from + DAYS_OF_ALL_SEASONS;
    for (day_t day = from; day <= to; day++)
        if (season_holds(&a->season, day) && season_holds(&b->season, day))
            return true;
    return false;
}

static bool same_parts(const int *a, int count_a, const int *b, int count_b)
{
    return count_a == count_b && memcmp(a, b, (size_t)count_a * sizeof *a) == 0;
}

/* Both judge one figure. */
static bool one_figure(const struct limit *a, const struct limit *b)
{
    return a->basis == b->basis && a->statistic == b->statistic && a->percentile == b->percentile &&
           same_parts(a->point, a->points, b->point, b->points) &&
           same_parts(a->parameter, a->parameters, b->parameter, b->parameters);
}

/* Whether some figure fulfils both conditions: tiers must part what they ask of. Conditions on
 * different figures say nothing of each other, and a row without one is a limit for all tiers. */
static bool conditions_meet(struct arena *arena, const struct condition *a,
                            const struct condition *b)
{
    bool over_a = a->comparison == WHEN_OVER || a->comparison == WHEN_AT_LEAST;
    bool over_b = b->comparison == WHEN_OVER || b->comparison == WHEN_AT_LEAST;
    const struct condition *least = over_a ? a : b, *most = over_a ? b : a;
    const struct fraction *from, *to;
    int order;

    if (!a->set || !b->set)
        return a->set == b->set;
    if (a->point != b->point || a->parameter != b->parameter || a->statistic != b->statistic ||
        a->percentile != b->percentile || !unit_same_kind(a->unit, b->unit))
        return false;
    if (over_a == over_b)
        return true;
    from =
        unit_convert(arena, fraction_from_decimal(arena, least->number), least->unit, most->unit);
    to = fraction_from_decimal(arena, most->number);
    order = fraction_compare(from, to);
    return order < 0 ||
           (order == 0 && least->comparison == WHEN_AT_LEAST && most->comparison == WHEN_AT_MOST);
}

/* Both hold at once; rows of a group are choices. */
static bool both_hold(struct arena *arena, const struct limit *a, const struct limit *b)
{
    return *a->group == '\0' && *b->group == '\0' && conditions_meet(arena, &a->when, &b->when) &&
           share_a_day(a, b);
}

/* A second row for one figure is meant where several can hold side by side: action levels, tables
 * of allowed samples, and a figure reported under two rules. Loads are often limited in lb/d and
 * in kg/d both, so another unit is another limit. */
static bool repeats(const struct plant_draft *d, size_t i, size_t j)
{
    const struct limit *a = &d->plant->limits[i], *b = &d->plant->limits[j];

    if (a->bound != b->bound || a->unit != b->unit || !text_equal(a->outfall, b->outfall))
        return false;
    if (a->bound == BOUND_TARGET || statistic_counts_samples(a->statistic))
        return text_equal(a->limit_text, b->limit_text);
    if (a->bound == BOUND_REPORT)
        return text_equal(cell(d->origin[PLANT_LIMITS][i], LIMIT_RULES),
                          cell(d->origin[PLANT_LIMITS][j], LIMIT_RULES));
    return true;
}

static bool is_upper(const struct limit *l)
{
    return l->bound == BOUND_MAX || l->bound == BOUND_BELOW;
}

static bool is_lower(const struct limit *l)
{
    return l->bound == BOUND_MIN || l->bound == BOUND_ABOVE;
}

/* Whether no figure can meet both a lower and an upper bound. */
static bool leaves_no_room(struct arena *arena, const struct limit *a, const struct limit *b)
{
    const struct limit *lower = is_lower(a) ? a : b, *upper = is_upper(a) ? a : b;
    const struct fraction *least, *most;
    int order;

    if (!is_lower(lower) || !is_upper(upper))
        return false;
    least = unit_convert(arena, fraction_from_decimal(arena, lower->limit.value), lower->unit,
                         upper->unit);
    most = fraction_from_decimal(arena, upper->limit.value);
    order = fraction_compare(least, most);
    return order > 0 ||
           (order == 0 && (lower->bound == BOUND_ABOVE || upper->bound == BOUND_BELOW));
}

static bool pair_agrees(struct plant_draft *d, size_t i, size_t j)
{
    const struct plant_row *row = d->origin[PLANT_LIMITS][i];
    const struct limit *a = &d->plant->limits[i], *b = &d->plant->limits[j];

    if (!one_figure(a, b) || !both_hold(d->arena, a, b))
        return true;
    if (repeats(d, i, j)) {
        problem(d, row, WHOLE_LINE, "part the two by from, to, season or when, or keep one",
                "this %s limit and the one of line %ld hold on the same days",
                bound_words[a->bound], b->line);
        return false;
    }
    if (leaves_no_room(d->arena, a, b)) {
        problem(d, row, LIMIT_LIMIT, "exchange them or correct one",
                "%s %s %s and %s %s %s of line %ld leave no room between them",
                bound_words[a->bound], a->limit_text, a->unit_text, bound_words[b->bound],
                b->limit_text, b->unit_text, b->line);
        return false;
    }
    return true;
}

/* A group of one is a group whose other name was mistyped. */
static void group_agrees(struct plant_draft *d, const struct plant_row *row)
{
    for (size_t i = 0; i < d->row_count; i++) {
        const struct plant_row *other = &d->rows[i];

        if (other != row && other->file == PLANT_LIMITS &&
            text_equal(cell(other, LIMIT_GROUP), cell(row, LIMIT_GROUP)))
            return;
    }
    problem(d, row, LIMIT_GROUP, "write it as the other rows do, or take it away",
            "no other limit is in the group '%s'", cell(row, LIMIT_GROUP));
}

void limits_agree(struct plant_draft *d)
{
    for (size_t i = 0; i < d->plant->limit_count; i++)
        for (size_t j = 0; j < i && pair_agrees(d, i, j); j++)
            ;
    for (size_t i = 0; i < d->row_count; i++)
        if (d->rows[i].file == PLANT_LIMITS && !read_blank(&d->rows[i], LIMIT_GROUP))
            group_agrees(d, &d->rows[i]);
}
