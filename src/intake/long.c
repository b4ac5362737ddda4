/* long: a row of a long file to a reading. */
#include "intake/reader.h"
#include "intake/value.h"

#include "base/poison.h"

static const char *cell(const struct reader *r, enum long_column part)
{
    return r->text.cell[part];
}

static struct number_style style_of(const struct reader *r, enum long_column part)
{
    return r->layout.column[r->layout.at[part]].style;
}

static enum reason unknown(struct reader *r, enum reason reason, const char *what, const char *word,
                           const char *nearest)
{
    char before[32];
    char after[128] = "";
    if (*word == '\0') {
        snprintf(before, sizeof before, "the %s is blank", what);
        return reader_tell(r, reason, before, NULL, "");
    }
    snprintf(before, sizeof before, "no %s ", what);
    if (nearest != NULL)
        snprintf(after, sizeof after, "; the nearest is '%.64s'", nearest);
    return reader_tell(r, reason, before, word, after);
}

static enum reason read_series(struct reader *r)
{
    const char *point = cell(r, LONG_POINT);
    const char *parameter = cell(r, LONG_PARAMETER);
    int at = names_find(&r->points, point);
    if (at < 0)
        return unknown(r, REASON_UNKNOWN_POINT, "point", point,
                       plant_nearest_point(r->plant, point));
    r->reading.point = (uint16_t)at;
    at = names_find(&r->parameters, parameter);
    if (at < 0)
        return unknown(r, REASON_UNKNOWN_PARAMETER, "parameter", parameter,
                       plant_nearest_parameter(r->plant, parameter));
    r->reading.parameter = (uint16_t)at;
    return REASON_COUNT;
}

/* A blank unit is the parameter's own. */
static enum reason read_unit(struct reader *r)
{
    const char *name = cell(r, LONG_UNIT);
    if (*name == '\0')
        return reader_unit_fits(r, r->plant->parameters[r->reading.parameter].unit);
    int at = names_find(&r->units, name);
    if (at < 0)
        return unknown(r, REASON_UNKNOWN_UNIT, "unit", name, unit_nearest(name));
    return reader_unit_fits(r, unit_at((size_t)at));
}

static enum reason read_limit(struct reader *r, enum long_column part, bool *has,
                              struct decimal *out)
{
    *has = false;
    if (*cell(r, part) == '\0')
        return REASON_COUNT;
    enum reason reason = value_limit(cell(r, part), style_of(r, part), has, out);
    if (reason == REASON_NOT_A_NUMBER)
        return reader_tell(r, reason,
                           part == LONG_MDL ? "cannot read the mdl " : "cannot read the rl ",
                           cell(r, part), " as a number");
    if (reason == REASON_TOO_MANY_DIGITS)
        return reader_tell(r, reason, part == LONG_MDL ? "the mdl " : "the rl ", cell(r, part),
                           " has more than 18 digits");
    if (reason == REASON_NEGATIVE_VALUE)
        return reader_tell(r, reason, part == LONG_MDL ? "the mdl " : "the rl ", cell(r, part),
                           " is below zero");
    return REASON_COUNT;
}

static enum reason read_reading(struct reader *r)
{
    struct reading *g = &r->reading;
    enum reason reason = reader_day(r, cell(r, LONG_DATE));
    if (reason == REASON_COUNT)
        reason = reader_minute(r, cell(r, LONG_TIME));
    if (reason == REASON_COUNT)
        reason = read_series(r);
    if (reason == REASON_COUNT)
        reason = read_unit(r);
    if (reason == REASON_COUNT)
        reason = read_limit(r, LONG_MDL, &g->has_mdl, &g->mdl);
    if (reason == REASON_COUNT)
        reason = read_limit(r, LONG_RL, &g->has_rl, &g->rl);
    if (reason == REASON_COUNT)
        reason = reader_value(r, cell(r, LONG_VALUE), style_of(r, LONG_VALUE));
    return reason;
}

enum status reader_long_row(struct reader *r, const struct row *row, struct fault *f)
{
    if (row->problem != REASON_COUNT || !row_fits(row, r->layout.columns))
        return reader_raw_aside(r, row, f);
    for (size_t i = 0; i < LONG_COLUMNS; i++)
        r->text.cell[i] = r->layout.at[i] < 0 ? "" : row->cell[r->layout.at[i]];
    r->text.line = r->reading.line = row->line;
    r->reading.sample = cell(r, LONG_SAMPLE);
    r->detail =
        (struct detail){cell(r, LONG_METHOD), cell(r, LONG_ANALYST), cell(r, LONG_COLLECTED_BY),
                        cell(r, LONG_ANALYZED), cell(r, LONG_NOTE)};
    if (reader_part_date(r, cell(r, LONG_DATE), f) != OK)
        return FAULT;
    return reader_give(r, read_reading(r), f);
}
