/* compare_page: a month beside itself under other rules: which verdicts hang on a convention. */
#include "report/content.h"

#include "base/poison.h"

/* ---- rules in words ---- */

/* What a value of a rule makes of a figure: "with less-thans as half". By rule and word; a sentence
 * with a place takes the value as written. */
#define WORDS_MOST 5

static const enum word how_words[RULES][WORDS_MOST] = {
    [RULE_NONDETECT] = {WORD_HOW_NONDETECT_ZERO, WORD_HOW_NONDETECT_HALF, WORD_HOW_NONDETECT_FULL,
                        WORD_HOW_NONDETECT_MEDIAN},
    [RULE_SIGN] = {WORD_HOW_SIGN_ANY, WORD_HOW_SIGN_ALL, WORD_HOW_SIGN_NEVER},
    [RULE_GEOMEAN_ZERO] = {WORD_HOW_GEOMEAN_ZERO},
    [RULE_WEEK_STARTS] = {WORD_HOW_WEEK_STARTS},
    [RULE_WEEK_COUNTS_IN] = {WORD_HOW_WEEK_END, WORD_HOW_WEEK_START, WORD_HOW_WEEK_MOST_DAYS,
                             WORD_HOW_WEEK_SPLIT, WORD_HOW_WEEK_DAYS_1_7},
    [RULE_ROUNDING] = {WORD_HOW_ROUNDING_HALF_EVEN, WORD_HOW_ROUNDING_HALF_UP},
    [RULE_DIGITS] = {WORD_HOW_DIGITS_LIMIT, WORD_HOW_DIGITS_FIGURES, WORD_HOW_DIGITS_NUMBER},
    [RULE_COMPARE] = {WORD_HOW_COMPARE_ROUNDED, WORD_HOW_COMPARE_RAW},
    [RULE_REMOVAL] = {WORD_HOW_REMOVAL_AVERAGES, WORD_HOW_REMOVAL_PAIRED, WORD_HOW_REMOVAL_LOADS,
                      WORD_HOW_REMOVAL_DAILY},
    [RULE_LOAD_FACTOR] = {WORD_HOW_LOAD_FACTOR},
    [RULE_LOAD_AVERAGE] = {WORD_HOW_LOAD_AVERAGE_DAILY, WORD_HOW_LOAD_AVERAGE_PRODUCT},
    [RULE_COUNT_BY] = {WORD_HOW_COUNT_BY_DAY, WORD_HOW_COUNT_BY_READING},
    [RULE_NO_DISCHARGE] = {WORD_HOW_NO_DISCHARGE_SKIP, WORD_HOW_NO_DISCHARGE_ZERO},
    [RULE_DNQ] = {WORD_HOW_DNQ_VALUE, WORD_HOW_DNQ_ZERO, WORD_HOW_DNQ_HALF},
    [RULE_LONG_AVERAGE] = {WORD_HOW_LONG_AVERAGE_DEFAULT, WORD_HOW_LONG_AVERAGE_MONTHS,
                           WORD_HOW_LONG_AVERAGE_DAYS},
    [RULE_PERCENTILE] = {WORD_HOW_PERCENTILE_NEAREST_RANK, WORD_HOW_PERCENTILE_LINEAR,
                         WORD_HOW_PERCENTILE_WEIBULL},
    [RULE_LOAD_TOTAL] = {WORD_HOW_LOAD_TOTAL_DAYS, WORD_HOW_LOAD_TOTAL_SUM},
    [RULE_FLOW] = {WORD_HOW_FLOW, WORD_HOW_FLOW_NONE},
    [RULE_INFLUENT] = {WORD_HOW_INFLUENT, WORD_HOW_INFLUENT_NONE},
    [RULE_WINDOW] = {WORD_HOW_WINDOW_DAYS, WORD_HOW_WINDOW_RESULTS},
};

static const char *how_one(struct arena *a, enum rule rule, int at, const char *value)
{
    enum rule_kind kind = rule_info(rule)->kind;
    if (kind == RULE_IS_POINT)
        at = at < 0 ? 1 : 0;
    else if (kind == RULE_IS_NUMBER)
        at = 0;
    if (rule == RULE_WEEK_STARTS) {
        value = arena_print(a, "%c%s", value[0] - 'a' + 'A', value + 1);
        at = 0;
    }
    return words_fill(a, how_words[rule][at], (const char *const[PLACES]){[PLACE_NAME] = value});
}

static const char *how(struct arena *a, const struct permit_difference *d, bool other)
{
    if (d->rules > 1)
        return word(other ? WORD_HOW_ASKED : WORD_HOW_IN_FORCE);
    return other ? how_one(a, d->first, d->word, d->value)
                 : how_one(a, d->first, d->word_in_force, d->in_force);
}

/* ---- for programs ---- */

static const char *figure_of(const struct permit_row *row)
{
    return row == NULL ? "" : row->figure;
}

static const char *verdict_of(const struct permit_row *row)
{
    return row == NULL ? "" : verdict_words[row->verdict];
}

struct table *report_compare_table(struct arena *a, const struct permit_comparison *c)
{
    static const struct column columns[] = {
        {.key = "outfall", .title = "outfall"},
        {.key = "point", .title = "point"},
        {.key = "parameter", .title = "parameter"},
        {.key = "basis", .title = "basis"},
        {.key = "statistic", .title = "statistic"},
        {.key = "from", .title = "from"},
        {.key = "to", .title = "to"},
        {.key = "rule", .title = "rule"},
        {.key = "in_force", .title = "in force"},
        {.key = "other", .title = "other"},
        {.key = "figure", .title = "figure"},
        {.key = "other_figure", .title = "other figure"},
        {.key = "bound", .title = "bound"},
        {.key = "limit", .title = "limit"},
        {.key = "unit", .title = "unit"},
        {.key = "verdict", .title = "verdict"},
        {.key = "other_verdict", .title = "other verdict"},
    };
    struct table *t = table_new(a, "", columns, NELEM(columns));
    for (size_t i = 0; i < c->count; i++) {
        const struct permit_difference *d = &c->at[i];
        const struct permit_row *dated = d->row != NULL ? d->row : d->other;
        const struct limit *l = d->limit;
        struct cell *to = table_row(t);
        *to++ = cell_text(l->outfall);
        *to++ = cell_text(l->point_text);
        *to++ = cell_text(l->parameter_text);
        *to++ = cell_text(basis_words[l->basis]);
        *to++ = cell_text(l->statistic_text);
        *to++ = cell_day(a, dated->from);
        *to++ = cell_day(a, dated->to);
        *to++ = cell_text(d->rule);
        *to++ = cell_text(d->in_force);
        *to++ = cell_text(d->value);
        *to++ = cell_text(figure_of(d->row));
        *to++ = cell_text(figure_of(d->other));
        *to++ = cell_text(bound_words[l->bound]);
        *to++ = cell_number(l->limit_text);
        *to++ = cell_text(l->unit_text);
        *to++ = cell_text(verdict_of(d->row));
        *to = cell_text(verdict_of(d->other));
    }
    return t;
}

/* ---- for people ---- */

/* "met with less-thans as zero (0.018 mg/L)"; a week that is not the other side's week says which
 * it is. */
static const char *side(struct arena *a, const struct permit_difference *d, bool other)
{
    const struct permit_row *row = other ? d->other : d->row;
    if (row == NULL)
        return SAY(
            a,
            DIFFERENCE_SIDE, [PLACE_VERDICT] = word(WORD_NO_ROW), [PLACE_HOW] = how(a, d, other));
    const char *verdict = row_verdict(a, row, DAY_NONE).text;
    const char *figure = row_figure(a, row);
    bool elsewhere = other && d->row != NULL &&
                     (row->from != d->row->from || row->to != d->row->to || row->on != d->row->on);
    if (figure[0] == '\0')
        return SAY(a, DIFFERENCE_SIDE, [PLACE_VERDICT] = verdict, [PLACE_HOW] = how(a, d, other));
    if (elsewhere)
        figure = SAY(a, DIFFERENCE_AT, [PLACE_FIGURE] = figure, [PLACE_FROM] = row_when(a, row));
    return SAY(a, DIFFERENCE_SIDE_AT, [PLACE_VERDICT] = verdict, [PLACE_HOW] = how(a, d, other),
               [PLACE_FIGURE] = figure);
}

/* Whether two differences are of one row and one rule, and are told in one sentence. */
static bool told_together(const struct permit_difference *a, const struct permit_difference *b)
{
    return a->limit == b->limit && a->row == b->row && a->row != NULL &&
           text_equal(a->rule, b->rule) && a->verdict == b->verdict;
}

static enum flag flag_of(const struct permit_difference *d)
{
    if (!d->verdict)
        return FLAG_NONE;
    if (d->other != NULL && d->other->verdict == VERDICT_EXCEEDED)
        return FLAG_BAD;
    return d->row != NULL && d->row->verdict == VERDICT_EXCEEDED ? FLAG_WATCH : FLAG_NONE;
}

static void difference_lines(struct page *p, const struct permit_comparison *c, size_t count)
{
    struct arena *a = p->arena;
    for (size_t i = 0, next; i < count; i = next) {
        const struct permit_difference *d = &c->at[i];
        const struct permit_row *dated = d->row != NULL ? d->row : d->other;
        const char *others = side(a, d, true);
        for (next = i + 1; next < count && told_together(d, &c->at[next]); next++)
            others = SAY(a, DIFFERENCE_MORE, [PLACE_OTHER] = others,
                         [PLACE_VERDICT] = side(a, &c->at[next], true));
        page_line(
            p, flag_of(d), "%s",
            SAY(a, DIFFERENCE, [PLACE_NAME] = limit_name(a, d->limit),
                [PLACE_LIMIT] = limit_bound(a, d->limit, true), [PLACE_FROM] = row_when(a, dated),
                [PLACE_VERDICT] = side(a, d, false), [PLACE_OTHER] = others));
    }
}

/* "; of 20 more the figure alone changes"; nothing at none. */
static const char *also(struct arena *a, const char *before, size_t n, enum word one,
                        enum word many)
{
    if (n == 0)
        return before;
    return arena_print(a, "%s; %s", before, say_count(a, (long)n, one, many));
}

static void title(struct page *p, const struct plant *plant, const struct permit_month *m)
{
    page_heading(p, title_line(p->arena, plant, m));
    page_line(p, FLAG_NONE, "%s", permit_line(p->arena, plant, m));
    if (m->on < month_last(m->month))
        page_line(p, FLAG_WATCH, "%s", judged_line(p->arena, m));
    page_space(p);
}

struct page *report_rules_page(struct arena *a, const struct plant *plant,
                               const struct permit_comparison *c)
{
    struct page *p = page_new(a);
    size_t same = c->limits - c->hang - c->figures;
    const char *said = c->hang == 0
                           ? word(WORD_RULES_HANG_NONE)
                           : say_count(a, (long)c->hang, WORD_RULES_HANG_ONE, WORD_RULES_HANG_MANY);
    title(p, plant, &c->base);
    page_heading(p, word(WORD_HEADING_RULES_TRIED));
    said = also(a, said, c->figures, WORD_RULES_FIGURE_ONE, WORD_RULES_FIGURE_MANY);
    said = also(a, said, same, WORD_RULES_SAME_ONE, WORD_RULES_SAME_MANY);
    page_line(p, c->hang > 0 ? FLAG_WATCH : FLAG_GOOD, "%s.", said);
    page_space(p);
    difference_lines(p, c, c->verdicts);
    if (c->verdicts > 0)
        page_space(p);
    if (c->other_periods)
        page_line(p, FLAG_NONE, "%s", word(WORD_OTHER_PERIODS));
    page_line(p, FLAG_NONE, "%s",
              SAY(a, RULES_INTRO, [PLACE_COUNT] = arena_print(a, "%zu", c->tried)));
    return p;
}

struct page *report_what_if_page(struct arena *a, const struct plant *plant,
                                 const struct permit_comparison *c, const char *asked)
{
    struct page *p = page_new(a);
    size_t figures = c->count - c->verdicts;
    const char *said = c->verdicts == 0 ? word(WORD_WHAT_IF_VERDICTS_NONE)
                                        : say_count(a, (long)c->verdicts, WORD_WHAT_IF_VERDICTS_ONE,
                                                    WORD_WHAT_IF_VERDICTS_MANY);
    title(p, plant, &c->base);
    page_heading(p, word(WORD_HEADING_WHAT_IF));
    page_line(p, FLAG_NONE, "%s", SAY(a, WHAT_IF_INTRO, [PLACE_NAMES] = asked));
    said = also(a, said, figures, WORD_WHAT_IF_FIGURES_ONE, WORD_WHAT_IF_FIGURES_MANY);
    said = also(a, said, c->same, WORD_WHAT_IF_SAME_ONE, WORD_WHAT_IF_SAME_MANY);
    page_line(p, c->verdicts > 0 ? FLAG_WATCH : FLAG_GOOD, "%s.", said);
    if (c->count > 0)
        page_space(p);
    difference_lines(p, c, c->count);
    if (c->other_periods) {
        page_space(p);
        page_line(p, FLAG_NONE, "%s", word(WORD_OTHER_PERIODS));
    }
    return p;
}
