/* span_page: months side by side, on one page: what was exceeded when, every limit's months, and
 * the extremes. */
#include "report/content.h"

#include "base/poison.h"

enum { MONTHS_IN_A_TABLE = 6 };

static struct cell month_cell(struct arena *a, day_t month)
{
    int year = 0;
    int number = 0;
    int date = 0;
    day_split(month, &year, &number, &date);
    return cell_text(arena_print(a, "%04d-%02d", year, number));
}

static const char *mean_text(struct arena *a, const struct span_row *row)
{
    if (!row->mean)
        return "";
    return fraction_print(a, row->mean, row->decimals,
                          (enum rounding)row->limit->rules.word[RULE_ROUNDING]);
}

/* ---- for programs ---- */

static struct cell *key_cells(struct table *t, const struct limit *l)
{
    struct cell *c = table_row(t);
    *c++ = cell_text(l->outfall);
    *c++ = cell_text(l->point_text);
    *c++ = cell_text(l->parameter_text);
    *c++ = cell_text(basis_words[l->basis]);
    *c++ = cell_text(l->statistic_text);
    *c++ = cell_text(l->unit_text);
    *c++ = cell_text(bound_words[l->bound]);
    *c++ = cell_number(l->limit_text);
    return c;
}

struct table *report_span_table(struct arena *a, const struct permit_span *span)
{
    static const struct column columns[] = {
        {.key = "outfall", .title = "outfall"},     {.key = "point", .title = "point"},
        {.key = "parameter", .title = "parameter"}, {.key = "basis", .title = "basis"},
        {.key = "statistic", .title = "statistic"}, {.key = "unit", .title = "unit"},
        {.key = "bound", .title = "bound"},         {.key = "limit", .title = "limit"},
        {.key = "month", .title = "month"},         {.key = "figure", .title = "figure"},
        {.key = "verdict", .title = "verdict"},     {.key = "exceeded", .title = "exceeded"},
        {.key = "short", .title = "short"},         {.key = "highest", .title = "highest"},
        {.key = "lowest", .title = "lowest"},       {.key = "mean", .title = "mean"},
    };
    struct table *t = table_new(a, "", columns, NELEM(columns));
    for (size_t i = 0; i < span->count; i++) {
        const struct span_row *row = &span->rows[i];
        for (size_t m = 0; m < span->months; m++) {
            const struct span_month *month = &row->month[m];
            if (!month->worst)
                continue;
            struct cell *c = key_cells(t, row->limit);
            c[0] = month_cell(a, span->month[m].month);
            c[1] = cell_text(month->worst->figure);
            c[2] = cell_text(verdict_words[month->worst->verdict]);
            c[3] = cell_count(a, month->exceeded);
            c[4] = cell_count(a, month->shortfalls);
        }
        struct cell *c = key_cells(t, row->limit);
        c[3] = cell_count(a, row->exceeded);
        c[4] = cell_count(a, row->shortfalls);
        c[5] = cell_text(row->highest ? row->highest->figure : "");
        c[6] = cell_text(row->lowest ? row->lowest->figure : "");
        c[7] = cell_number(mean_text(a, row));
    }
    return t;
}

/* ---- for people ---- */

/* "Jan 25": twelve of them and what they belong to stand on a page. */
static const char *short_month(struct arena *a, day_t month)
{
    int year = 0;
    int number = 0;
    int date = 0;
    day_split(month, &year, &number, &date);
    return arena_print(a, "%.3s %02d", month_name(number), year % 100);
}

/* "BOD5 weekly average": the point is said once, above, where there is only one. */
static const char *row_name(struct arena *a, const struct permit_span *s, const struct limit *l)
{
    for (size_t i = 0; i < s->count; i++)
        if (!text_equal(s->rows[i].limit->point_text, l->point_text))
            return limit_name(a, l);
    return arena_print(a, "%s %s", limit_what(a, l), limit_statistic(a, l));
}

static void exceedance_block(struct page *p, const struct permit_month *months, size_t count)
{
    struct arena *a = p->arena;
    struct column *columns = arena_alloc(a, 5 * sizeof *columns);
    columns[0] = (struct column){.title = word(WORD_COLUMN_WHEN), .wraps = true};
    columns[1] = (struct column){.title = word(WORD_COLUMN_WHAT), .wraps = true};
    columns[2] = (struct column){.title = word(WORD_COLUMN_FIGURE), .align = ALIGN_POINT};
    columns[3] = (struct column){.title = word(WORD_COLUMN_LIMIT), .wraps = true};
    columns[4] = (struct column){.title = word(WORD_COLUMN_TIMES), .align = ALIGN_RIGHT};
    struct table *t = table_new(a, "", columns, 5);
    for (size_t m = 0; m < count; m++)
        for (size_t i = 0; i < months[m].count; i++) {
            const struct permit_row *row = &months[m].rows[i];
            if (row->verdict != VERDICT_EXCEEDED)
                continue;
            struct cell *c = table_row(t);
            c[0] = cell_text(row_when(a, row));
            c[1] = cell_text(limit_name(a, row->limit));
            c[2] = cell_flagged(cell_text(row_figure(a, row)), FLAG_BAD);
            c[3] = cell_text(limit_bound(a, row->limit, true));
            if (row->has_times)
                c[4] = cell_count(a, row->times);
        }
    if (t->rows == 0)
        return;
    page_heading(p, word(WORD_HEADING_EXCEEDANCES));
    page_table(p, t);
    page_space(p);
}

static void shortfall_block(struct page *p, const struct permit_month *months, size_t count)
{
    bool any = false;
    for (size_t m = 0; m < count; m++)
        for (size_t i = 0; i < months[m].count; i++) {
            if (!permit_shortfall(&months[m].rows[i], months[m].on))
                continue;
            if (!any)
                page_heading(p, word(WORD_HEADING_SHORTFALLS));
            any = true;
            page_line(p, FLAG_SHORT, "%s", shortfall_line(p->arena, &months[m].rows[i]));
        }
    if (any)
        page_space(p);
}

static const char *bound_unit(struct arena *a, const struct limit *l)
{
    return l->bound == BOUND_REPORT
               ? arena_print(a, "%s, %s", limit_bound(a, l, true), l->unit_text)
               : limit_bound(a, l, true);
}

/* "31!" and "12 s": the mark is explained below the table, and stands in words above it. */
static struct cell figure_cell(struct arena *a, const struct span_month *m)
{
    if (!m->worst)
        return (struct cell){.kind = CELL_EMPTY, .text = ""};
    const char *figure = m->worst->figure[0] == '\0' ? "-" : m->worst->figure;
    const char *text =
        arena_print(a, "%s%s%s", figure, m->exceeded > 0 ? "!" : "", m->shortfalls > 0 ? "s" : "");
    enum flag flag = m->exceeded > 0 ? FLAG_BAD : m->shortfalls > 0 ? FLAG_SHORT : FLAG_NONE;
    return cell_flagged(cell_text(text), flag);
}

static void months_table(struct page *p, const struct permit_span *s, size_t first, size_t last)
{
    struct arena *a = p->arena;
    size_t columns = 2 + last - first;
    struct column *column = arena_alloc(a, columns * sizeof *column);
    column[0] = (struct column){.title = word(WORD_COLUMN_WHAT), .wraps = true};
    column[1] = (struct column){.title = word(WORD_COLUMN_LIMIT), .wraps = true};
    for (size_t m = first; m < last; m++)
        column[2 + m - first] =
            (struct column){.title = short_month(a, s->month[m].month), .align = ALIGN_RIGHT};
    struct table *t = table_new(a, "", column, columns);
    for (size_t i = 0; i < s->count; i++) {
        struct cell *c = table_row(t);
        c[0] = cell_text(row_name(a, s, s->rows[i].limit));
        c[1] = cell_text(bound_unit(a, s->rows[i].limit));
        for (size_t m = first; m < last; m++)
            c[2 + m - first] = figure_cell(a, &s->rows[i].month[m]);
    }
    page_table(p, t);
    page_space(p);
}

static struct cell month_of(struct arena *a, const struct permit_span *s,
                            const struct permit_row *which, size_t month)
{
    return which ? cell_text(short_month(a, s->month[month].month)) : (struct cell){.text = ""};
}

static void extremes_table(struct page *p, const struct permit_span *s)
{
    static const enum word titles[] = {
        WORD_COLUMN_WHAT,       WORD_COLUMN_LIMIT,    WORD_COLUMN_MOST,
        WORD_COLUMN_HIGHEST_IN, WORD_COLUMN_LEAST,    WORD_COLUMN_LOWEST_IN,
        WORD_COLUMN_MEAN,       WORD_COLUMN_EXCEEDED, WORD_COLUMN_SHORT};
    struct arena *a = p->arena;
    struct column *columns = arena_alloc(a, NELEM(titles) * sizeof *columns);
    for (size_t i = 0; i < NELEM(titles); i++)
        columns[i] = (struct column){
            .title = word(titles[i]), .wraps = i < 2, .align = i < 2 ? ALIGN_LEFT : ALIGN_RIGHT};
    struct table *t = table_new(a, "", columns, NELEM(titles));
    for (size_t i = 0; i < s->count; i++) {
        const struct span_row *row = &s->rows[i];
        struct cell *c = table_row(t);
        c[0] = cell_text(row_name(a, s, row->limit));
        c[1] = cell_text(bound_unit(a, row->limit));
        c[2] = cell_text(row->highest ? row->highest->figure : "");
        c[3] = month_of(a, s, row->highest, row->highest_in);
        c[4] = cell_text(row->lowest ? row->lowest->figure : "");
        c[5] = month_of(a, s, row->lowest, row->lowest_in);
        c[6] = cell_text(mean_text(a, row));
        c[7] = cell_flagged(cell_count(a, row->exceeded), row->exceeded ? FLAG_BAD : FLAG_NONE);
        c[8] =
            cell_flagged(cell_count(a, row->shortfalls), row->shortfalls ? FLAG_SHORT : FLAG_NONE);
    }
    page_table(p, t);
}

static void span_title(struct page *p, const struct plant *plant, const struct permit_span *s)
{
    struct arena *a = p->arena;
    const struct permit_month *last = &s->month[s->months - 1];
    page_heading(p, SAY(a, SPAN_TITLE, [PLACE_PLANT] = plant->name,
                        [PLACE_FROM] = month_title(a, s->month[0].month),
                        [PLACE_TO] = month_title(a, last->month)));
    page_line(p, FLAG_NONE, "%s", permit_line(a, plant, last));
    page_space(p);
    const char *exceeded =
        s->exceeded == 0 ? word(WORD_EXCEEDANCES_NONE)
                         : say_count(a, s->exceeded, WORD_EXCEEDANCES_ONE, WORD_EXCEEDANCES_MANY);
    const char *shortfalls =
        s->shortfalls == 0 ? word(WORD_SHORTFALLS_NONE)
                           : say_count(a, s->shortfalls, WORD_SHORTFALLS_ONE, WORD_SHORTFALLS_MANY);
    page_line(p,
              s->exceeded     ? FLAG_BAD
              : s->shortfalls ? FLAG_SHORT
                              : FLAG_GOOD,
              "%s, %s", exceeded, shortfalls);
    if (last->on < month_last(last->month)) {
        char day[11];
        day_write(last->on, day);
        page_line(p, FLAG_WATCH, "%s", SAY(a, SPAN_JUDGED, [PLACE_DAY] = day));
    }
    page_space(p);
}

struct page *report_span_page(struct arena *a, const struct plant *plant,
                              const struct permit_span *span)
{
    struct page *p = page_new(a);
    span_title(p, plant, span);
    if (span->count == 0) {
        page_line(p, FLAG_NONE, "%s", word(WORD_SPAN_NO_LIMITS));
        return p;
    }
    exceedance_block(p, span->month, span->months);
    shortfall_block(p, span->month, span->months);
    page_heading(p, word(WORD_HEADING_SPAN_MONTHS));
    for (size_t m = 0; m < span->months; m += MONTHS_IN_A_TABLE)
        months_table(p, span, m,
                     m + MONTHS_IN_A_TABLE < span->months ? m + MONTHS_IN_A_TABLE : span->months);
    page_line(p, FLAG_NONE, "%s", word(WORD_SPAN_MARKS));
    page_space(p);
    page_heading(p, word(WORD_HEADING_SPAN_EXTREMES));
    extremes_table(p, span);
    page_line(p, FLAG_NONE, "%s", word(WORD_SPAN_MEANS));
    page_line(p, FLAG_NONE, "%s", word(WORD_CAUTION_PERMIT));
    return p;
}
