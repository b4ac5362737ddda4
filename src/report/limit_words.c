/* limit_words: limits, periods, figures and verdicts in words. */
#include "report/content.h"

#include <string.h>

#include "base/poison.h"

static const enum word statistic_word[STATISTICS] = {
    [STAT_INSTANTANEOUS] = WORD_STAT_INSTANTANEOUS_MAX,
    [STAT_DAILY] = WORD_STAT_DAILY_MAX,
    [STAT_WEEKLY_AVERAGE] = WORD_STAT_WEEKLY_AVERAGE,
    [STAT_MONTHLY_AVERAGE] = WORD_STAT_MONTHLY_AVERAGE,
    [STAT_ROLLING_7_DAY] = WORD_STAT_ROLLING_7_DAY,
    [STAT_ROLLING_30_DAY] = WORD_STAT_ROLLING_30_DAY,
    [STAT_MONTHLY_GEOMEAN] = WORD_STAT_MONTHLY_GEOMEAN,
    [STAT_WEEKLY_GEOMEAN] = WORD_STAT_WEEKLY_GEOMEAN,
    [STAT_MONTHLY_TOTAL] = WORD_STAT_MONTHLY_TOTAL,
    [STAT_QUARTERLY_AVERAGE] = WORD_STAT_QUARTERLY_AVERAGE,
    [STAT_SEMIANNUAL_AVERAGE] = WORD_STAT_SEMIANNUAL_AVERAGE,
    [STAT_ANNUAL_AVERAGE] = WORD_STAT_ANNUAL_AVERAGE,
    [STAT_ROLLING_12_MONTH] = WORD_STAT_ROLLING_12_MONTH,
    [STAT_ANNUAL_TOTAL] = WORD_STAT_ANNUAL_TOTAL,
    [STAT_MONTHLY_MEDIAN] = WORD_STAT_MONTHLY_MEDIAN,
    [STAT_PERCENTILE] = WORD_STAT_PERCENTILE,
    [STAT_ROLLING_7_DAY_MEDIAN] = WORD_STAT_ROLLING_7_DAY_MEDIAN,
    [STAT_ROLLING_30_DAY_GEOMEAN] = WORD_STAT_ROLLING_30_DAY_GEOMEAN,
    [STAT_MONTHLY_SAMPLES] = WORD_STAT_MONTHLY_SAMPLES,
    [STAT_QUARTERLY_SAMPLES] = WORD_STAT_QUARTERLY_SAMPLES,
    [STAT_ANNUAL_SAMPLES] = WORD_STAT_ANNUAL_SAMPLES,
};

static bool is_lower_bound(const struct limit *l)
{
    return l->bound == BOUND_MIN || l->bound == BOUND_ABOVE;
}

static bool is_weekly(const struct limit *l)
{
    return l->statistic == STAT_WEEKLY_AVERAGE || l->statistic == STAT_WEEKLY_GEOMEAN;
}

static bool counts_samples(const struct limit *l)
{
    return l->statistic == STAT_MONTHLY_SAMPLES || l->statistic == STAT_QUARTERLY_SAMPLES ||
           l->statistic == STAT_ANNUAL_SAMPLES;
}

/* ---- names ---- */

const char *say_count(struct arena *a, long n, enum word one, enum word many)
{
    const char *value[PLACES] = {[PLACE_COUNT] = arena_print(a, "%ld", n)};
    return words_fill(a, n == 1 ? one : many, value);
}

const char *limit_what(struct arena *a, const struct limit *l)
{
    if (l->basis == BASIS_LOAD)
        return SAY(a, WHAT_LOAD, [PLACE_PARAMETER] = l->parameter_text);
    if (l->basis == BASIS_REMOVAL)
        return SAY(a, WHAT_REMOVAL, [PLACE_PARAMETER] = l->parameter_text);
    return l->parameter_text;
}

const char *limit_statistic(struct arena *a, const struct limit *l)
{
    if (l->statistic == STAT_PERCENTILE)
        return SAY(a, STAT_PERCENTILE, [PLACE_COUNT] = arena_print(a, "%d", l->percentile));
    if (l->statistic == STAT_DAILY && is_lower_bound(l))
        return word(WORD_STAT_DAILY_MIN);
    if (l->statistic == STAT_INSTANTANEOUS && is_lower_bound(l))
        return word(WORD_STAT_INSTANTANEOUS_MIN);
    return word(statistic_word[l->statistic]);
}

const char *limit_name(struct arena *a, const struct limit *l)
{
    return SAY(a, LIMIT_NAME, [PLACE_POINT] = l->point_text, [PLACE_WHAT] = limit_what(a, l),
               [PLACE_STATISTIC] = limit_statistic(a, l));
}

/* A number and its unit; a number without a unit stands alone. */
static const char *with_unit(struct arena *a, const char *number, const char *unit)
{
    return unit[0] == '\0' ? number : arena_print(a, "%s %s", number, unit);
}

const char *limit_bound(struct arena *a, const struct limit *l, bool unit)
{
    static const enum word bound_word[BOUNDS] = {
        [BOUND_MAX] = WORD_BOUND_MAX,       [BOUND_MIN] = WORD_BOUND_MIN,
        [BOUND_BELOW] = WORD_BOUND_BELOW,   [BOUND_ABOVE] = WORD_BOUND_ABOVE,
        [BOUND_REPORT] = WORD_BOUND_REPORT, [BOUND_TARGET] = WORD_BOUND_TARGET,
    };
    const char *suffix = unit ? l->unit_text : "";
    const char *value[PLACES] = {[PLACE_LIMIT] = with_unit(a, l->limit_text, suffix)};
    const char *bound = words_fill(a, bound_word[l->bound], value);
    char number[24] = "0";
    if (l->allowed_kind == ALLOWED_COUNT || l->allowed_kind == ALLOWED_PERCENT)
        decimal_write(l->allowed, number);
    if (counts_samples(l) && l->allowed_kind == ALLOWED_COUNT)
        bound = SAY(a, ALL_BUT_COUNT, [PLACE_BOUND] = bound, [PLACE_COUNT] = number);
    else if (counts_samples(l) && l->allowed_kind == ALLOWED_PERCENT)
        bound = SAY(a, ALL_BUT_PERCENT, [PLACE_BOUND] = bound, [PLACE_COUNT] = number);
    else if (counts_samples(l) && l->allowed_kind == ALLOWED_EU_TABLE_3)
        bound = SAY(a, ALL_BUT_TABLE, [PLACE_BOUND] = bound);
    if (l->ceiling.set) {
        decimal_write(l->ceiling.value, number);
        bound = SAY(
            a, NEVER_BEYOND, [PLACE_BOUND] = bound, [PLACE_LIMIT] = with_unit(a, number, suffix));
    }
    return bound;
}

/* ---- rows ---- */

const char *row_figure(struct arena *a, const struct permit_row *row)
{
    return row->figure[0] == '\0' ? "" : with_unit(a, row->figure, row->unit);
}

/* "Mar 16", or "16" beside another day of its month; the year stands at the head of the page. */
static const char *short_day(struct arena *a, day_t day, bool with_month)
{
    int year = 0;
    int month = 0;
    int date = 0;
    day_split(day, &year, &month, &date);
    if (!with_month)
        return arena_print(a, "%d", date);
    return arena_print(a, "%.3s %d", month_name(month), date);
}

static const char *short_month(struct arena *a, day_t day)
{
    int year = 0;
    int month = 0;
    int date = 0;
    day_split(day, &year, &month, &date);
    return arena_print(a, "%.3s %d", month_name(month), year);
}

static const char *iso_day(struct arena *a, day_t day)
{
    char iso[11];
    day_write(day, iso);
    return arena_text(a, iso);
}

const char *row_period(struct arena *a, const struct permit_row *row, day_t month)
{
    if (row->on != DAY_NONE)
        return short_day(a, row->on, true);
    if (row->from == month && row->to == month_last(month))
        return word(WORD_WHOLE_MONTH);
    /* Of several months the year matters, the days do not. */
    if (row->from == month_first(row->from) && row->to == month_last(row->to))
        return SAY(a, SHORT_PERIOD, [PLACE_FROM] = short_month(a, row->from),
                   [PLACE_TO] = short_month(a, row->to));
    bool crosses = month_first(row->from) != month_first(row->to);
    return SAY(a, SHORT_PERIOD, [PLACE_FROM] = short_day(a, row->from, true),
               [PLACE_TO] = short_day(a, row->to, crosses));
}

const char *row_when(struct arena *a, const struct permit_row *row)
{
    if (row->on != DAY_NONE)
        return iso_day(a, row->on);
    return SAY(a, FROM_TO, [PLACE_FROM] = iso_day(a, row->from), [PLACE_TO] = iso_day(a, row->to));
}

const char *row_samples(struct arena *a, const struct permit_row *row)
{
    if (row->has_required)
        return arena_print(a, "%ld/%ld", row->samples, row->required);
    return arena_print(a, "%ld", row->samples);
}

struct cell row_verdict(struct arena *a, const struct permit_row *row, day_t on)
{
    static const struct {
        enum word word;
        enum flag flag;
    } verdict[VERDICTS] = {
        [VERDICT_MET] = {WORD_VERDICT_MET, FLAG_NONE},
        [VERDICT_EXCEEDED] = {WORD_VERDICT_EXCEEDED, FLAG_BAD},
        [VERDICT_REPORT] = {WORD_VERDICT_REPORT, FLAG_NONE},
        [VERDICT_TARGET_MET] = {WORD_VERDICT_TARGET_MET, FLAG_NONE},
        [VERDICT_TARGET_PASSED] = {WORD_VERDICT_TARGET_PASSED, FLAG_WATCH},
        [VERDICT_NO_DATA] = {WORD_VERDICT_NO_DATA, FLAG_WATCH},
        [VERDICT_NO_DISCHARGE] = {WORD_VERDICT_NO_DISCHARGE, FLAG_NONE},
        [VERDICT_OPEN] = {WORD_VERDICT_OPEN, FLAG_LIGHT},
    };
    const char *said = word(verdict[row->verdict].word);
    enum flag flag = verdict[row->verdict].flag;
    if (permit_shortfall(row, on)) {
        said = SAY(a, VERDICT_AND_SHORT, [PLACE_VERDICT] = said);
        if (flag != FLAG_BAD)
            flag = FLAG_SHORT;
    }
    return cell_flagged(cell_text(said), flag);
}

bool row_is_worst_week(const struct permit_month *m, size_t row)
{
    const struct permit_row *mine = &m->rows[row];
    if (!is_weekly(mine->limit) || mine->rounded == NULL)
        return false;
    size_t weeks = 0;
    for (size_t i = 0; i < m->count; i++) {
        const struct permit_row *other = &m->rows[i];
        if (other->limit != mine->limit || other->rounded == NULL)
            continue;
        weeks++;
        int order = fraction_compare(other->rounded, mine->rounded);
        if (is_lower_bound(mine->limit))
            order = -order;
        if (order > 0 || (order == 0 && i < row))
            return false;
    }
    return weeks > 1;
}

/* ---- the month ---- */

const char *month_title(struct arena *a, day_t month)
{
    int year = 0;
    int number = 0;
    int date = 0;
    day_split(month, &year, &number, &date);
    return SAY(
        a,
        MONTH_TITLE, [PLACE_MONTH] = month_name(number), [PLACE_YEAR] = arena_print(a, "%d", year));
}

const char *month_headline(struct arena *a, const struct permit_month *m)
{
    long exceeded = 0;
    long shortfalls = 0;
    long passed = 0;
    long no_data = 0;
    long open = 0;
    for (size_t i = 0; i < m->count; i++) {
        const struct permit_row *row = &m->rows[i];
        exceeded += row->verdict == VERDICT_EXCEEDED;
        passed += row->verdict == VERDICT_TARGET_PASSED;
        no_data += row->verdict == VERDICT_NO_DATA;
        open += row->verdict == VERDICT_OPEN;
        shortfalls += permit_shortfall(row, m->on);
    }
    struct text t;
    text_init(&t, 4096);
    text_add(&t, exceeded == 0
                     ? word(WORD_EXCEEDANCES_NONE)
                     : say_count(a, exceeded, WORD_EXCEEDANCES_ONE, WORD_EXCEEDANCES_MANY));
    text_print(&t, ", %s",
               shortfalls == 0
                   ? word(WORD_SHORTFALLS_NONE)
                   : say_count(a, shortfalls, WORD_SHORTFALLS_ONE, WORD_SHORTFALLS_MANY));
    if (passed > 0)
        text_print(&t, ", %s", say_count(a, passed, WORD_TARGETS_ONE, WORD_TARGETS_MANY));
    if (no_data > 0)
        text_print(&t, ", %s", say_count(a, no_data, WORD_NO_DATA_ONE, WORD_NO_DATA_MANY));
    if (open > 0)
        text_print(&t, ", %s", say_count(a, open, WORD_OPEN_ONE, WORD_OPEN_MANY));
    const char *headline = arena_bytes(a, t.at, t.length);
    text_free(&t);
    return headline;
}

const char *month_outfalls(struct arena *a, const struct permit_month *m)
{
    struct text t;
    text_init(&t, 4096);
    for (size_t i = 0; i < m->count; i++) {
        const char *outfall = m->rows[i].limit->outfall;
        bool seen = outfall[0] == '\0';
        for (size_t j = 0; j < i && !seen; j++)
            seen = text_equal(outfall, m->rows[j].limit->outfall);
        if (!seen)
            text_print(&t, "%s%s", t.length > 0 ? ", " : "", outfall);
    }
    const char *outfalls = arena_bytes(a, t.at, t.length);
    text_free(&t);
    return outfalls;
}

/* ---- sentences of the month ---- */

void say(struct arena *a, struct sentences *s, const char *sentence)
{
    const char **at = arena_push(a, &s->at, &s->count, &s->room, sizeof *at);
    *at = sentence;
}

bool said_already(const struct sentences *s, const char *sentence)
{
    for (size_t i = 0; i < s->count; i++)
        if (text_equal(s->at[i], sentence))
            return true;
    return false;
}

const char *title_line(struct arena *a, const struct plant *plant, const struct permit_month *m)
{
    return SAY(a,
               PAGE_TITLE, [PLACE_PLANT] = plant->name, [PLACE_MONTH] = month_title(a, m->month));
}

const char *permit_line(struct arena *a, const struct plant *plant, const struct permit_month *m)
{
    const char *outfalls = month_outfalls(a, m);
    const char *said = SAY(a, TITLE_PERMIT, [PLACE_PERMIT] = plant->permit);
    if (outfalls[0] != '\0')
        said = arena_print(a, "%s, %s", said, SAY(a, TITLE_OUTFALLS, [PLACE_OUTFALL] = outfalls));
    if (plant->receiving_water[0] != '\0')
        said = arena_print(a, "%s, %s", said,
                           SAY(a, TITLE_WATER, [PLACE_WATER] = plant->receiving_water));
    return said;
}

const char *judged_line(struct arena *a, const struct permit_month *m)
{
    return SAY(a, JUDGED_ON, [PLACE_DAY] = iso_day(a, m->on));
}

const char *shortfall_line(struct arena *a, const struct permit_row *row)
{
    return SAY(a, SHORTFALL_LINE, [PLACE_NAME] = limit_name(a, row->limit),
               [PLACE_BOUND] = limit_bound(a, row->limit, true),
               [PLACE_TAKEN] = arena_print(a, "%ld", row->samples),
               [PLACE_REQUIRED] = arena_print(a, "%ld", row->required),
               [PLACE_FROM] = iso_day(a, row->from), [PLACE_TO] = iso_day(a, row->to));
}

/* Forms ask for the highest weekly average, which is not the average of the weeks. */
void week_sentences(struct arena *a, const struct permit_month *m, struct sentences *out)
{
    for (size_t i = 0; i < m->count; i++) {
        const struct permit_row *row = &m->rows[i];
        if (!row_is_worst_week(m, i))
            continue;
        const char *value[PLACES] = {[PLACE_NAME] = limit_name(a, row->limit),
                                     [PLACE_FIGURE] = row_figure(a, row),
                                     [PLACE_FROM] = iso_day(a, row->from),
                                     [PLACE_TO] = iso_day(a, row->to)};
        say(a, out,
            words_fill(a, is_lower_bound(row->limit) ? WORD_LOWEST_WEEK : WORD_HIGHEST_WEEK,
                       value));
    }
}
