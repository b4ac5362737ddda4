/* standing_page: what a month's exceedances count as, and six months beside the federal screening
 * criteria. */
#include "report/content.h"

#include "base/poison.h"

static void title(struct page *p, const struct plant *plant, const struct permit_month *m)
{
    page_heading(p, title_line(p->arena, plant, m));
    page_line(p, FLAG_NONE, "%s", permit_line(p->arena, plant, m));
    if (m->on < month_last(m->month))
        page_line(p, FLAG_WATCH, "%s", judged_line(p->arena, m));
    page_space(p);
}

/* ---- counts ---- */

static const char *const counted_words[COUNTED_KINDS] = {[COUNTED_MONTH] = "month-days",
                                                         [COUNTED_WEEK] = "week-days",
                                                         [COUNTED_TIMES] = "times",
                                                         [COUNTED_ONCE] = "once"};

struct table *report_count_table(struct arena *a, const struct permit_count *counts, size_t count)
{
    static const struct column columns[] = {
        {.key = "outfall", .title = "outfall"},
        {.key = "point", .title = "point"},
        {.key = "parameter", .title = "parameter"},
        {.key = "basis", .title = "basis"},
        {.key = "statistic", .title = "statistic"},
        {.key = "from", .title = "from"},
        {.key = "to", .title = "to"},
        {.key = "on", .title = "on"},
        {.key = "figure", .title = "figure"},
        {.key = "unit", .title = "unit"},
        {.key = "bound", .title = "bound"},
        {.key = "limit", .title = "limit"},
        {.key = "count", .title = "count"},
        {.key = "counted_as", .title = "counted as"},
    };
    struct table *t = table_new(a, "", columns, NELEM(columns));
    for (size_t i = 0; i < count; i++) {
        const struct permit_row *row = counts[i].row;
        const struct limit *l = row->limit;
        struct cell *c = table_row(t);
        *c++ = cell_text(l->outfall);
        *c++ = cell_text(l->point_text);
        *c++ = cell_text(l->parameter_text);
        *c++ = cell_text(basis_words[l->basis]);
        *c++ = cell_text(l->statistic_text);
        *c++ = cell_day(a, row->from);
        *c++ = cell_day(a, row->to);
        *c++ = cell_day(a, row->on);
        *c++ = cell_text(row->figure);
        *c++ = cell_text(row->unit);
        *c++ = cell_text(bound_words[l->bound]);
        *c++ = cell_number(l->limit_text);
        *c++ = cell_count(a, counts[i].count);
        *c = cell_text(counted_words[counts[i].as]);
    }
    return t;
}

static struct table *counts_shown(struct arena *a, const struct permit_count *counts, size_t count)
{
    static const enum word titles[] = {WORD_COLUMN_POINT,  WORD_COLUMN_WHAT,  WORD_COLUMN_WHEN,
                                       WORD_COLUMN_FIGURE, WORD_COLUMN_LIMIT, WORD_COLUMN_COUNT,
                                       WORD_COLUMN_COUNTED};
    static const enum word as[COUNTED_KINDS] = {
        [COUNTED_MONTH] = WORD_COUNTED_MONTH,
        [COUNTED_WEEK] = WORD_COUNTED_WEEK,
        [COUNTED_TIMES] = WORD_COUNTED_TIMES,
        [COUNTED_ONCE] = WORD_COUNTED_ONCE,
    };
    struct column *columns = arena_alloc(a, NELEM(titles) * sizeof *columns);
    for (size_t i = 0; i < NELEM(titles); i++)
        columns[i] = (struct column){.title = word(titles[i]), .wraps = true};
    columns[3] = (struct column){.title = word(titles[3]), .align = ALIGN_POINT};
    columns[5] = (struct column){.title = word(titles[5]), .align = ALIGN_RIGHT};
    struct table *t = table_new(a, "", columns, NELEM(titles));
    for (size_t i = 0; i < count; i++) {
        const struct permit_row *row = counts[i].row;
        struct cell *c = table_row(t);
        c[0] = cell_text(row->limit->point_text);
        c[1] = cell_text(
            arena_print(a, "%s %s", limit_what(a, row->limit), limit_statistic(a, row->limit)));
        c[2] = cell_text(row_when(a, row));
        c[3] = cell_flagged(cell_text(row_figure(a, row)), FLAG_BAD);
        c[4] = cell_text(limit_bound(a, row->limit, true));
        c[5] = cell_count(a, counts[i].count);
        c[6] = cell_text(word(as[counts[i].as]));
    }
    return t;
}

struct page *report_count_page(struct arena *a, const struct plant *plant,
                               const struct permit_month *m, const struct permit_count *counts,
                               size_t count)
{
    static const enum word source[COUNTED_KINDS] = {
        [COUNTED_MONTH] = WORD_COUNTED_MONTH_SOURCE,
        [COUNTED_WEEK] = WORD_COUNTED_WEEK_SOURCE,
        [COUNTED_TIMES] = WORD_COUNTED_TIMES_SOURCE,
        [COUNTED_ONCE] = WORD_COUNTED_ONCE_SOURCE,
    };
    struct page *p = page_new(a);
    bool used[COUNTED_KINDS] = {false};
    title(p, plant, m);
    page_heading(p, word(WORD_HEADING_COUNTS));
    if (count == 0) {
        page_line(p, FLAG_GOOD, "%s", word(WORD_COUNTS_NONE));
        return p;
    }
    page_table(p, counts_shown(a, counts, count));
    page_space(p);
    for (size_t i = 0; i < count; i++)
        used[counts[i].as] = true;
    for (size_t i = 0; i < COUNTED_KINDS; i++)
        if (used[i])
            page_line(p, FLAG_NONE, "%s", word(source[i]));
    page_line(p, FLAG_NONE, "%s", word(WORD_COUNTS_CAUTION));
    return p;
}

/* ---- standing ---- */

static const char *factor_text(struct arena *a, enum pollutant_group group)
{
    const struct fraction *factor = permit_standing_factor(a, group);
    return factor == NULL ? "" : fraction_print(a, factor, 1, ROUND_HALF_EVEN);
}

static const char *criteria(const struct standing_line *l)
{
    if (l->meets_chronic && l->meets_technical)
        return "chronic;technical";
    return l->meets_chronic ? "chronic" : l->meets_technical ? "technical" : "";
}

struct table *report_standing_table(struct arena *a, const struct permit_standing *s)
{
    static const struct column columns[] = {
        {.key = "outfall", .title = "outfall"},
        {.key = "point", .title = "point"},
        {.key = "parameter", .title = "parameter"},
        {.key = "group", .title = "group"},
        {.key = "from", .title = "from"},
        {.key = "to", .title = "to"},
        {.key = "above", .title = "months above"},
        {.key = "factor", .title = "factor"},
        {.key = "at_factor", .title = "months at factor"},
        {.key = "exceeded", .title = "months exceeded"},
        {.key = "in_a_row", .title = "in a row"},
        {.key = "longest", .title = "longest"},
        {.key = "criterion", .title = "criterion"},
    };
    struct table *t = table_new(a, "", columns, NELEM(columns));
    for (size_t i = 0; i < s->count; i++) {
        const struct standing_line *l = &s->lines[i];
        struct cell *c = table_row(t);
        *c++ = cell_text(l->limit->outfall);
        *c++ = cell_text(l->limit->point_text);
        *c++ = cell_text(l->limit->parameter_text);
        *c++ = cell_text(group_words[l->group]);
        *c++ = cell_day(a, s->first);
        *c++ = cell_day(a, month_last(s->month));
        *c++ = cell_count(a, l->above);
        *c++ = cell_number(factor_text(a, l->group));
        *c++ = cell_count(a, l->technical);
        *c++ = cell_count(a, l->exceeded);
        *c++ = cell_count(a, l->run);
        *c++ = cell_count(a, l->longest);
        *c = cell_text(criteria(l));
    }
    return t;
}

static const char *short_month(struct arena *a, day_t month)
{
    int year = 0;
    int number = 0;
    int date = 0;
    day_split(month, &year, &number, &date);
    return arena_print(a, "%.3s", month_name(number));
}

/* "1.25!+": see standing_key. */
static struct cell month_cell(struct arena *a, const struct standing_month *m)
{
    const char *share = m->ratio == NULL ? "-" : fraction_print(a, m->ratio, 2, ROUND_HALF_EVEN);
    const char *said =
        arena_print(a, "%s%s%s", share, m->above ? "!" : "", m->others > 0 ? "+" : "");
    enum flag flag = m->above ? FLAG_BAD : m->others > 0 ? FLAG_WATCH : FLAG_NONE;
    return cell_flagged(cell_text(said), flag);
}

static struct table *standing_shown(struct arena *a, const struct permit_standing *s)
{
    size_t count = 4 + STANDING_MONTHS;
    struct column *columns = arena_alloc(a, count * sizeof *columns);
    columns[0] = (struct column){.title = word(WORD_COLUMN_OF), .wraps = true};
    columns[1] = (struct column){.title = word(WORD_COLUMN_GROUP)};
    for (int i = 0; i < STANDING_MONTHS; i++)
        columns[2 + i] = (struct column){.title = short_month(a, month_step(s->first, i))};
    columns[count - 2] =
        (struct column){.title = word(WORD_COLUMN_ABOVE), .align = ALIGN_RIGHT, .wraps = true};
    columns[count - 1] = (struct column){.title = word(WORD_COLUMN_RUN), .align = ALIGN_RIGHT};
    struct table *t = table_new(a, "", columns, count);
    for (size_t i = 0; i < s->count; i++) {
        const struct standing_line *l = &s->lines[i];
        if (l->exceeded == 0)
            continue;
        struct cell *c = table_row(t);
        c[0] = cell_text(arena_print(a, "%s %s", l->limit->point_text, l->limit->parameter_text));
        c[1] = cell_text(group_words[l->group]);
        for (int j = 0; j < STANDING_MONTHS; j++)
            c[2 + j] = month_cell(a, &l->month[j]);
        c[count - 2] = cell_count(a, l->above);
        c[count - 1] = cell_count(a, l->run);
    }
    return t;
}

static void criteria_lines(struct page *p, const struct standing_line *l)
{
    struct arena *a = p->arena;
    const char *value[PLACES] = {
        [PLACE_NAME] = arena_print(a, "%s %s", l->limit->point_text, l->limit->parameter_text),
        [PLACE_GROUP] = group_words[l->group],
        [PLACE_MONTHS] = arena_print(a, "%d", STANDING_MONTHS),
        [PLACE_LIMIT] = factor_text(a, l->group)};
    value[PLACE_COUNT] = arena_print(a, "%d", l->above);
    if (l->meets_chronic)
        page_line(p, FLAG_BAD, "%s.", words_fill(a, WORD_MEETS_CHRONIC, value));
    if (l->near_chronic)
        page_line(p, FLAG_WATCH, "%s.", words_fill(a, WORD_NEAR_CHRONIC, value));
    value[PLACE_COUNT] = arena_print(a, "%d", l->technical);
    if (l->meets_technical)
        page_line(p, FLAG_BAD, "%s.", words_fill(a, WORD_MEETS_TECHNICAL, value));
    if (l->near_technical)
        page_line(p, FLAG_WATCH, "%s.", words_fill(a, WORD_NEAR_TECHNICAL, value));
    if (l->group == GROUP_NEITHER && l->exceeded > 0)
        page_line(p, FLAG_NONE, "%s.", words_fill(a, WORD_STANDING_NEITHER, value));
}

/* The head of the page as a month has it: its outfalls are those of the lines. */
static struct permit_month as_month(struct arena *a, const struct permit_standing *s)
{
    struct permit_month m = {.month = s->month, .on = s->on, .count = s->count};
    m.rows = arena_alloc(a, (s->count + 1) * sizeof *m.rows);
    for (size_t i = 0; i < s->count; i++)
        m.rows[i].limit = s->lines[i].limit;
    return m;
}

struct page *report_standing_page(struct arena *a, const struct plant *plant,
                                  const struct permit_standing *s)
{
    struct page *p = page_new(a);
    long others = (long)(s->count - s->exceeding);
    struct permit_month last = as_month(a, s);
    title(p, plant, &last);
    page_heading(p, SAY(a, HEADING_STANDING, [PLACE_FROM] = month_title(a, s->first),
                        [PLACE_TO] = month_title(a, s->month)));
    if (s->meeting == 0)
        page_line(p, FLAG_GOOD, "%s", word(WORD_STANDING_MEETS_NONE));
    for (size_t i = 0; i < s->count; i++)
        criteria_lines(p, &s->lines[i]);
    page_space(p);
    if (s->exceeding == 0) {
        page_line(p, FLAG_GOOD, "%s", word(WORD_STANDING_NONE));
    } else {
        page_table(p, standing_shown(a, s));
        if (others > 0)
            page_line(p, FLAG_NONE, "%s.",
                      say_count(a, others, WORD_STANDING_OTHERS_ONE, WORD_STANDING_OTHERS_MANY));
        page_space(p);
        page_line(p, FLAG_NONE, "%s", word(WORD_STANDING_KEY));
    }
    if (s->unjudged > 0)
        page_line(p, FLAG_WATCH, "%s.",
                  say_count(a, (long)s->unjudged, WORD_STANDING_UNJUDGED_ONE,
                            WORD_STANDING_UNJUDGED_MANY));
    page_line(p, FLAG_NONE, "%s", word(WORD_STANDING_SOURCE));
    page_line(p, FLAG_NONE, "%s", word(WORD_STANDING_CAUTION));
    return p;
}
