/* statistic: the cells of a limit that have a grammar of their own: statistic, season, condition,
 * sampling frequency, allowed samples; and which units a figure may have. */
#include "plant/draft.h"

#include <string.h>

#include "base/poison.h"

#define PERCENTILE_MOST 99
#define COUNT_MOST      99999
#define MINUTES_A_DAY   1440

bool statistic_counts_samples(enum statistic s)
{
    return s == STAT_MONTHLY_SAMPLES || s == STAT_QUARTERLY_SAMPLES || s == STAT_ANNUAL_SAMPLES;
}

bool statistic_is_total(enum statistic s)
{
    return s == STAT_MONTHLY_TOTAL || s == STAT_ANNUAL_TOTAL;
}

bool statistic_in(struct plant_draft *d, const struct plant_row *row, int column, const char *text,
                  enum statistic *out, int *percentile)
{
    static const char stem[] = "percentile-";
    int word;

    *percentile = 0;
    if (strncmp(text, stem, sizeof stem - 1) == 0) {
        *out = STAT_PERCENTILE;
        if (whole_parse(text + sizeof stem - 1, PERCENTILE_MOST, percentile) && *percentile > 0)
            return true;
        problem(d, row, column, "write percentile-1 to percentile-99, such as percentile-90",
                "no statistic '%s'", text);
        return false;
    }
    if (!word_in(d, row, column, "statistic", text, statistic_words, STATISTICS, &word))
        return false;
    *out = (enum statistic)word;
    return true;
}

/* ---- season: MM-DD..MM-DD ---- */

#define LEAP_YEAR 2000 /* 02-29 is a day of the year */

static bool two_digits(const char *s, int *out)
{
    if (s[0] < '0' || s[0] > '9' || s[1] < '0' || s[1] > '9')
        return false;
    *out = (s[0] - '0') * 10 + (s[1] - '0');
    return true;
}

static bool season_parse(const char *s, struct season *out)
{
    return strlen(s) == strlen("MM-DD..MM-DD") && s[2] == '-' && s[5] == '.' && s[6] == '.' &&
           s[9] == '-' && two_digits(s, &out->from_month) && two_digits(s + 3, &out->from_date) &&
           two_digits(s + 7, &out->to_month) && two_digits(s + 10, &out->to_date);
}

bool read_season(struct plant_draft *d, const struct plant_row *row, struct season *out)
{
    const char *s = cell(row, LIMIT_SEASON);
    day_t day;

    *out = (struct season){0};
    if (*s == '\0')
        return true;
    if (!season_parse(s, out)) {
        problem(d, row, LIMIT_SEASON, "write month and day twice, such as 05-01..10-31",
                "cannot read '%s' as a season", s);
        return false;
    }
    out->set = true;
    if (day_from(LEAP_YEAR, out->from_month, out->from_date, &day) &&
        day_from(LEAP_YEAR, out->to_month, out->to_date, &day))
        return true;
    problem(d, row, LIMIT_SEASON, "write months 01 to 12 and days they have",
            "the season '%s' has a day that does not exist", s);
    return false;
}

/* ---- units ---- */

static const struct {
    const char *kind, *hint;
} hints[] = {
    {"mass-rate", "name a unit of mass-rate, such as lb/d or kg/d"},
    {"mass", "name a unit of mass, such as lb or kg"},
    {"flow", "name a unit of flow, such as MGD or m3/d"},
    {"volume", "name a unit of volume, such as MG or m3"},
    {"percent", "write %"},
};

static const char *unit_hint(struct plant_draft *d, const char *kind)
{
    for (size_t i = 0; i < NELEM(hints); i++)
        if (text_equal(hints[i].kind, kind))
            return hints[i].hint;
    return arena_print(d->arena, "name a unit of %s", kind);
}

/* The kind of unit a figure has; totals drop the "per day" of flows and loads. */
static const char *kind_of_figure(const struct parameter *p, enum basis basis, enum statistic s)
{
    switch (basis) {
    case BASIS_LOAD:
        return statistic_is_total(s) ? "mass" : "mass-rate";
    case BASIS_FLOW:
        return statistic_is_total(s) ? "volume" : "flow";
    case BASIS_REMOVAL:
        return "percent";
    default:
        return p->unit->kind;
    }
}

bool unit_fits(struct plant_draft *d, const struct plant_row *row, int column, int parameter,
               enum basis basis, enum statistic statistic, const struct unit *unit)
{
    const struct parameter *p = &d->plant->parameters[parameter];
    const char *needed, *kind;

    if (!p->unit) /* told with the parameter */
        return false;
    needed = basis == BASIS_LOAD ? "concentration" : basis == BASIS_FLOW ? "flow" : NULL;
    if (needed && !text_equal(p->unit->kind, needed)) {
        problem(d, row, column,
                arena_print(d->arena, "only what is measured as a %s has one", needed),
                "no %s of %s, which is measured in %s", basis_words[basis], p->id, p->unit->name);
        return false;
    }
    kind = kind_of_figure(p, basis, statistic);
    if (text_equal(unit->kind, kind))
        return true;
    problem(d, row, column, unit_hint(d, kind), "'%s' is a unit of %s, not one for the %s %s of %s",
            unit->name, unit->kind, statistic_words[statistic], basis_words[basis], p->id);
    return false;
}

/* ---- condition: POINT PARAMETER STATISTIC OP NUMBER UNIT ---- */

enum { WHEN_POINT, WHEN_PARAMETER, WHEN_STATISTIC, WHEN_SIGN, WHEN_NUMBER, WHEN_UNIT, WHEN_PARTS };

static bool comparison_in(struct plant_draft *d, const struct plant_row *row, const char *sign,
                          struct condition *out)
{
    if (text_equal(sign, ">"))
        out->comparison = WHEN_OVER;
    else if (text_equal(sign, ">="))
        out->comparison = WHEN_AT_LEAST;
    else if (text_equal(sign, "<"))
        out->comparison = WHEN_UNDER;
    else if (text_equal(sign, "<="))
        out->comparison = WHEN_AT_MOST;
    else {
        problem(d, row, LIMIT_WHEN, "write one of > >= < <=", "no comparison '%s'", sign);
        return false;
    }
    return true;
}

/* The basis a unit belongs to, as far as the parameter leaves it open. */
static enum basis basis_of(const struct plant *p, int parameter, const struct unit *unit)
{
    const struct unit *own = p->parameters[parameter].unit;

    if (text_equal(unit->kind, "flow") || text_equal(unit->kind, "volume"))
        return BASIS_FLOW;
    if (own && unit_same_kind(own, unit))
        return BASIS_CONCENTRATION;
    if (text_equal(unit->kind, "mass-rate") || text_equal(unit->kind, "mass"))
        return BASIS_LOAD;
    return text_equal(unit->kind, "percent") ? BASIS_REMOVAL : BASIS_CONCENTRATION;
}

/* Only these have one figure a month, whichever the bound. */
static bool statistic_is_monthly(enum statistic s)
{
    return s == STAT_MONTHLY_AVERAGE || s == STAT_MONTHLY_GEOMEAN || s == STAT_MONTHLY_TOTAL ||
           s == STAT_MONTHLY_MEDIAN || s == STAT_PERCENTILE || s == STAT_ROLLING_12_MONTH;
}

bool read_condition(struct plant_draft *d, const struct plant_row *row, struct condition *out)
{
    const char *text = cell(row, LIMIT_WHEN), *part[WHEN_PARTS];
    bool ok;

    *out = (struct condition){.point = -1, .parameter = -1, .text = text};
    if (*text == '\0')
        return true;
    if (split(d, text, ' ', part, WHEN_PARTS) != WHEN_PARTS) {
        problem(d, row, LIMIT_WHEN, "write it as EFF FLOW monthly-average > 2.5 MGD",
                "cannot read the condition '%s'", text);
        return false;
    }
    ok = point_in(d, row, LIMIT_WHEN, part[WHEN_POINT], &out->point);
    ok = parameter_in(d, row, LIMIT_WHEN, part[WHEN_PARAMETER], &out->parameter) && ok;
    ok =
        statistic_in(d, row, LIMIT_WHEN, part[WHEN_STATISTIC], &out->statistic, &out->percentile) &&
        ok;
    ok = comparison_in(d, row, part[WHEN_SIGN], out) && ok;
    ok = number_in(d, row, LIMIT_WHEN, part[WHEN_NUMBER], &out->number) && ok;
    ok = unit_in(d, row, LIMIT_WHEN, part[WHEN_UNIT], &out->unit) && ok;
    if (!ok)
        return false;
    if (!statistic_is_monthly(out->statistic)) {
        problem(d, row, LIMIT_WHEN, "name one, such as monthly-average",
                "'%s' is not one figure a month", part[WHEN_STATISTIC]);
        return false;
    }
    out->set = unit_fits(d, row, LIMIT_WHEN, out->parameter,
                         basis_of(d->plant, out->parameter, out->unit), out->statistic, out->unit);
    return out->set;
}

/* ---- frequency: 3/week, continuous ---- */

static const struct {
    const char *word;
    enum per per;
    int days; /* the most it holds */
} periods[] = {
    {"day", PER_DAY, 1},          {"week", PER_WEEK, 7},   {"month", PER_MONTH, 31},
    {"quarter", PER_QUARTER, 92}, {"year", PER_YEAR, 366},
};

static bool frequency_parse(struct plant_draft *d, const char *text, int *count, size_t *period)
{
    const char *part[2];

    if (split(d, text, '/', part, 2) != 2 || !whole_parse(part[0], COUNT_MOST, count) ||
        *count == 0)
        return false;
    for (*period = 0; *period < NELEM(periods); ++*period)
        if (text_equal(periods[*period].word, part[1]))
            return true;
    return false;
}

bool read_frequency(struct plant_draft *d, const struct plant_row *row, const struct rules *rules,
                    struct frequency *out)
{
    const char *text = cell(row, LIMIT_SAMPLES);
    bool by_day = rules->word[RULE_COUNT_BY] == COUNT_BY_DAY;
    size_t period;
    int count;

    *out = (struct frequency){.text = text};
    if (*text == '\0')
        return true;
    if (text_equal(text, "continuous")) {
        out->per = PER_CONTINUOUS;
        return true;
    }
    if (!frequency_parse(d, text, &count, &period)) {
        problem(d, row, LIMIT_SAMPLES,
                "write a number per day, week, month, quarter or year, such as 3/week, or "
                "continuous",
                "cannot read '%s' as a sampling frequency", text);
        return false;
    }
    if (count > periods[period].days * (by_day ? 1 : MINUTES_A_DAY)) {
        problem(d, row, LIMIT_SAMPLES,
                by_day ? "lower it, or set count_by=reading in the rules of this row" : "lower it",
                "a %s cannot hold '%s'%s", periods[period].word, text,
                by_day ? " where samples are counted by day" : "");
        return false;
    }
    out->count = count;
    out->per = periods[period].per;
    return true;
}

/* ---- allowed and ceiling ---- */

static bool allowed_parse(const char *text, struct limit *l)
{
    static const char table[] = "eu-table-3";
    size_t length = strlen(text);
    int count;

    if (length == 0)
        return true;
    if (text_equal(text, table)) {
        l->allowed_kind = ALLOWED_EU_TABLE_3;
        return true;
    }
    if (text[length - 1] == '%') {
        l->allowed_kind = ALLOWED_PERCENT;
        return decimal_parse(text, length - 1, &l->allowed) == DECIMAL_FINE &&
               l->allowed.coefficient >= 0 &&
               decimal_compare(l->allowed, (struct decimal){100, 0}) <= 0;
    }
    l->allowed_kind = ALLOWED_COUNT;
    if (!whole_parse(text, COUNT_MOST, &count))
        return false;
    l->allowed = (struct decimal){count, 0};
    return true;
}

static bool ceiling_is_beyond(const struct limit *l)
{
    int order = decimal_compare(l->ceiling.value, l->limit.value);

    return l->bound == BOUND_MIN || l->bound == BOUND_ABOVE ? order <= 0 : order >= 0;
}

bool read_allowed(struct plant_draft *d, const struct plant_row *row, struct limit *l)
{
    bool ok = true;

    for (int column = LIMIT_ALLOWED; column <= LIMIT_CEILING; column++) {
        if (read_blank(row, column) || statistic_counts_samples(l->statistic))
            continue;
        problem(d, row, column, "take it away, or name monthly-, quarterly- or annual-samples",
                "%s does not go with %s", layout_column(row, column), cell(row, LIMIT_STATISTIC));
        ok = false;
    }
    if (!allowed_parse(cell(row, LIMIT_ALLOWED), l)) {
        problem(d, row, LIMIT_ALLOWED,
                "write a whole number, a percentage such as 10%, or eu-table-3",
                "cannot read '%s' as the samples allowed", cell(row, LIMIT_ALLOWED));
        ok = false;
    }
    if (!read_number(d, row, LIMIT_CEILING, &l->ceiling))
        return false;
    if (ok && l->ceiling.set && l->limit.set && !ceiling_is_beyond(l)) {
        problem(d, row, LIMIT_CEILING, "exchange them or correct one",
                "the ceiling '%s' is not beyond the limit '%s'", cell(row, LIMIT_CEILING),
                l->limit_text);
        ok = false;
    }
    return ok;
}
