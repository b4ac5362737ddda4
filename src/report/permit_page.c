/* permit_page: the permit summary of a month: the rows for programs, the page for people (worst
 * news first), and its tables for the workbook. */
#include "report/content.h"

#include "base/poison.h"

/* ---- for programs ------------------------------------------------------------------------------
 */

struct table *report_permit_table(struct arena *a, const struct permit_month *m,
                                  const struct month_remarks *remarks)
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
        {.key = "verdict", .title = "verdict"},
        {.key = "times", .title = "times"},
        {.key = "samples", .title = "samples"},
        {.key = "required", .title = "required"},
        {.key = "note", .title = "note"},
    };
    struct table *t = table_new(a, "", columns, NELEM(columns));
    for (size_t i = 0; i < m->count; i++) {
        const struct permit_row *row = &m->rows[i];
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
        *c++ = cell_text(row->figure); /* text: it may carry a sign, and its zeros count */
        *c++ = cell_text(row->unit);
        *c++ = cell_text(bound_words[l->bound]);
        *c++ = cell_number(l->limit_text);
        *c++ = cell_text(verdict_words[row->verdict]);
        if (row->has_times)
            *c = cell_count(a, row->times);
        c++;
        *c++ = cell_count(a, row->samples);
        if (row->has_required)
            *c = cell_count(a, row->required);
        c++;
        *c = cell_text(row_note(a, row, remarks));
    }
    return t;
}

/* ---- for people --------------------------------------------------------------------------------
 */

static bool is_exceeded(const struct permit_row *row, day_t on)
{
    (void)on;
    return row->verdict == VERDICT_EXCEEDED;
}

static bool is_passed(const struct permit_row *row, day_t on)
{
    (void)on;
    return row->verdict == VERDICT_TARGET_PASSED;
}

typedef bool row_test(const struct permit_row *row, day_t on);

/* Rows beyond their limit: what, when, figure, limit, how many times. NULL when there are none. */
static struct table *beyond_table(struct page *p, const struct permit_month *m, row_test *test,
                                  enum flag flag)
{
    struct arena *a = p->arena;
    struct column *columns = arena_alloc(a, 6 * sizeof *columns);
    columns[0] = (struct column){.title = word(WORD_COLUMN_POINT), .wraps = true};
    columns[1] = (struct column){.title = word(WORD_COLUMN_WHAT), .wraps = true};
    columns[2] = (struct column){.title = word(WORD_COLUMN_WHEN), .wraps = true};
    columns[3] = (struct column){.title = word(WORD_COLUMN_FIGURE), .align = ALIGN_POINT};
    columns[4] = (struct column){.title = word(WORD_COLUMN_LIMIT), .wraps = true};
    columns[5] = (struct column){.title = word(WORD_COLUMN_TIMES), .align = ALIGN_RIGHT};
    struct table *t = table_new(a, "", columns, 6);
    for (size_t i = 0; i < m->count; i++) {
        const struct permit_row *row = &m->rows[i];
        if (!test(row, m->on))
            continue;
        struct cell *c = table_row(t);
        c[0] = cell_text(row->limit->point_text);
        c[1] = cell_text(
            arena_print(a, "%s %s", limit_what(a, row->limit), limit_statistic(a, row->limit)));
        c[2] = cell_text(row_when(a, row));
        c[3] = cell_flagged(cell_text(row_figure(a, row)), flag);
        c[4] = cell_text(limit_bound(a, row->limit, true));
        if (row->has_times)
            c[5] = cell_count(a, row->times);
    }
    return t->rows == 0 ? NULL : t;
}

static void beyond_block(struct page *p, const struct permit_month *m, row_test *test,
                         enum flag flag, enum word heading)
{
    struct table *t = beyond_table(p, m, test, flag);
    if (t == NULL)
        return;
    page_heading(p, word(heading));
    page_table(p, t);
    page_space(p);
}

static void shortfall_block(struct page *p, const struct permit_month *m)
{
    bool any = false;
    for (size_t i = 0; i < m->count; i++) {
        if (!permit_shortfall(&m->rows[i], m->on))
            continue;
        if (!any)
            page_heading(p, word(WORD_HEADING_SHORTFALLS));
        any = true;
        page_line(p, FLAG_SHORT, "%s", shortfall_line(p->arena, &m->rows[i]));
    }
    if (any)
        page_space(p);
}

/* Every row at one point, in the order of the limits. */
static struct table *point_table(struct page *p, const struct permit_month *m, const char *point)
{
    static const enum word titles[] = {
        WORD_COLUMN_PARAMETER, WORD_COLUMN_STATISTIC, WORD_COLUMN_PERIOD, WORD_COLUMN_FIGURE,
        WORD_COLUMN_LIMIT,     WORD_COLUMN_SAMPLES,   WORD_COLUMN_VERDICT};
    struct arena *a = p->arena;
    struct column *columns = arena_alloc(a, NELEM(titles) * sizeof *columns);
    for (size_t i = 0; i < NELEM(titles); i++)
        columns[i] = (struct column){.title = word(titles[i]), .wraps = true};
    columns[3] = (struct column){.title = word(titles[3]), .align = ALIGN_POINT};
    columns[5] = (struct column){.title = word(titles[5]), .align = ALIGN_RIGHT};
    struct table *t = table_new(a, "", columns, NELEM(titles));
    for (size_t i = 0; i < m->count; i++) {
        const struct permit_row *row = &m->rows[i];
        if (!text_equal(row->limit->point_text, point))
            continue;
        struct cell *c = table_row(t);
        c[0] = cell_text(limit_what(a, row->limit));
        c[1] = cell_text(limit_statistic(a, row->limit));
        c[2] = cell_text(row_period(a, row, m->month));
        c[3] = cell_text(row_figure(a, row));
        c[4] = cell_text(limit_bound(a, row->limit, true));
        c[5] = cell_text(row_samples(a, row));
        c[6] = row_verdict(a, row, m->on);
        c[3].flag = row->verdict == VERDICT_EXCEEDED ? FLAG_BAD : FLAG_NONE;
    }
    return t;
}

/* "EFF: Final effluent, outfall 001"; a sum of points has no name of its own. */
static const char *point_title(struct arena *a, const struct plant *plant, const struct limit *l)
{
    const char *title = l->point_text;
    if (l->points == 1 && plant->points[l->point[0]].name[0] != '\0')
        title = SAY(
            a, POINT_NAME, [PLACE_POINT] = title, [PLACE_NAME] = plant->points[l->point[0]].name);
    if (l->outfall[0] == '\0')
        return title;
    return arena_print(a, "%s, %s", title, SAY(a, TITLE_OUTFALLS, [PLACE_OUTFALL] = l->outfall));
}

static void all_limits(struct page *p, const struct plant *plant, const struct permit_month *m)
{
    page_heading(p, word(WORD_HEADING_LIMITS));
    if (m->count == 0)
        page_line(p, FLAG_NONE, "%s", word(WORD_NO_LIMITS));
    for (size_t i = 0; i < m->count; i++) {
        const struct limit *l = m->rows[i].limit;
        bool seen = false;
        for (size_t j = 0; j < i && !seen; j++)
            seen = text_equal(l->point_text, m->rows[j].limit->point_text);
        if (seen)
            continue;
        if (i > 0)
            page_space(p);
        page_line(p, FLAG_NONE, "%s", point_title(p->arena, plant, l));
        page_space(p);
        page_table(p, point_table(p, m, l->point_text));
    }
    page_space(p);
}

static void worst_weeks(struct page *p, const struct permit_month *m)
{
    struct sentences weeks = {0};
    week_sentences(p->arena, m, &weeks);
    if (weeks.count == 0)
        return;
    page_heading(p, word(WORD_HEADING_WEEKS));
    for (size_t i = 0; i < weeks.count; i++)
        page_line(p, FLAG_NONE, "%s", weeks.at[i]);
    page_space(p);
}

static void row_notes(struct page *p, const struct permit_month *m)
{
    bool any = false;
    for (size_t i = 0; i < m->count; i++) {
        const struct permit_row *row = &m->rows[i];
        if (row->note[0] == '\0')
            continue;
        if (!any)
            page_heading(p, word(WORD_HEADING_ROW_NOTES));
        any = true;
        page_line(p, FLAG_NONE, "%s",
                  SAY(p->arena, ROW_NOTE, [PLACE_NAME] = limit_name(p->arena, row->limit),
                      [PLACE_FROM] = row_when(p->arena, row), [PLACE_NOTE] = row->note));
    }
    if (any)
        page_space(p);
}

void permit_title(struct page *p, const struct plant *plant, const struct permit_month *m)
{
    page_heading(p, title_line(p->arena, plant, m));
    page_line(p, FLAG_NONE, "%s", permit_line(p->arena, plant, m));
    page_space(p);
    enum flag flag = m->exceeded > 0 ? FLAG_BAD : m->shortfalls > 0 ? FLAG_SHORT : FLAG_GOOD;
    page_line(p, flag, "%s", month_headline(p->arena, m));
    if (m->on < month_last(m->month))
        page_line(p, FLAG_WATCH, "%s", judged_line(p->arena, m));
    page_space(p);
}

static void remark_block(struct page *p, const struct permit_month *m,
                         const struct month_remarks *remarks)
{
    struct table *t = remark_table(p->arena, m, remarks);
    if (t->rows == 0)
        return;
    page_heading(p, word(WORD_HEADING_REMARKS));
    page_table(p, t);
    page_space(p);
}

void permit_blocks(struct page *p, const struct plant *plant, const struct permit_month *m,
                   const struct month_remarks *remarks)
{
    beyond_block(p, m, is_exceeded, FLAG_BAD, WORD_HEADING_EXCEEDANCES);
    shortfall_block(p, m);
    beyond_block(p, m, is_passed, FLAG_WATCH, WORD_HEADING_TARGETS);
    remark_block(p, m, remarks);
    all_limits(p, plant, m);
    worst_weeks(p, m);
    row_notes(p, m);
}

struct page *report_permit_page(struct arena *a, const struct plant *plant,
                                const struct permit_month *m, const struct month_remarks *remarks)
{
    struct page *p = page_new(a);
    permit_title(p, plant, m);
    permit_blocks(p, plant, m, remarks);
    return p;
}

/* ---- for the workbook ---------------------------------------------------------------------------
 */

/* A figure that is a number goes as one; one with a sign is text. */
static struct cell figure_cell(const char *figure)
{
    struct decimal d;
    size_t length = 0;
    while (figure[length] != '\0')
        length++;
    bool number = length > 0 && decimal_parse(figure, length, &d) == DECIMAL_FINE;
    return number ? cell_number(figure) : cell_text(figure);
}

/* An empty table for a sheet; numbers stand to the right. */
static struct table *sheet_table(struct arena *a, const enum word *titles, size_t count)
{
    struct column *columns = arena_alloc(a, count * sizeof *columns);
    for (size_t i = 0; i < count; i++) {
        bool number = titles[i] == WORD_COLUMN_FIGURE || titles[i] == WORD_COLUMN_NUMBER ||
                      titles[i] == WORD_COLUMN_TIMES || titles[i] == WORD_COLUMN_TAKEN ||
                      titles[i] == WORD_COLUMN_REQUIRED;
        columns[i] = (struct column){
            .title = word(titles[i]), .align = number ? ALIGN_RIGHT : ALIGN_LEFT, .wraps = !number};
    }
    return table_new(a, "", columns, count);
}

struct table *limits_table(struct arena *a, const struct permit_month *m,
                           const struct month_remarks *remarks)
{
    static const enum word titles[] = {
        WORD_COLUMN_OUTFALL, WORD_COLUMN_POINT, WORD_COLUMN_PARAMETER, WORD_COLUMN_STATISTIC,
        WORD_COLUMN_FROM,    WORD_COLUMN_TO,    WORD_COLUMN_ON,        WORD_COLUMN_FIGURE,
        WORD_COLUMN_UNIT,    WORD_COLUMN_LIMIT, WORD_COLUMN_NUMBER,    WORD_COLUMN_VERDICT,
        WORD_COLUMN_TIMES,   WORD_COLUMN_TAKEN, WORD_COLUMN_REQUIRED,  WORD_COLUMN_SAMPLE,
        WORD_COLUMN_NOTE,
    };
    struct table *t = sheet_table(a, titles, NELEM(titles));
    for (size_t i = 0; i < m->count; i++) {
        const struct permit_row *row = &m->rows[i];
        const struct limit *l = row->limit;
        struct cell *c = table_row(t);
        c[0] = cell_text(l->outfall);
        c[1] = cell_text(l->point_text);
        c[2] = cell_text(limit_what(a, l));
        c[3] = cell_text(limit_statistic(a, l));
        c[4] = cell_day(a, row->from);
        c[5] = cell_day(a, row->to);
        c[6] = cell_day(a, row->on);
        c[7] = figure_cell(row->figure);
        c[8] = cell_text(row->unit);
        c[9] = cell_text(limit_bound(a, l, true));
        c[10] = cell_number(l->limit_text);
        c[11] = row_verdict(a, row, m->on);
        if (row->has_times)
            c[12] = cell_count(a, row->times);
        c[13] = cell_count(a, row->samples);
        if (row->has_required)
            c[14] = cell_count(a, row->required);
        c[15] = cell_text(l->sample == SAMPLE_ANY ? "" : sample_type_words[l->sample]);
        const char *note = row_note(a, row, remarks);
        c[16] = cell_text(note[0] != '\0' ? note : l->note);
        c[7].flag = row->verdict == VERDICT_EXCEEDED ? FLAG_BAD : FLAG_NONE;
    }
    return t;
}

static void add_finding(struct table *t, const struct permit_month *m, size_t i, struct cell kind,
                        const struct month_remarks *remarks)
{
    const struct permit_row *row = &m->rows[i];
    const struct limit *l = row->limit;
    struct arena *a = t->arena;
    struct cell *c = table_row(t);
    c[0] = kind;
    c[1] = cell_text(l->outfall);
    c[2] = cell_text(l->point_text);
    c[3] = cell_text(limit_what(a, l));
    c[4] = cell_text(limit_statistic(a, l));
    c[5] = cell_day(a, row->from);
    c[6] = cell_day(a, row->to);
    c[7] = cell_day(a, row->on);
    c[8] = cell_flagged(figure_cell(row->figure), kind.flag);
    c[9] = cell_text(row->unit);
    c[10] = cell_text(limit_bound(a, l, true));
    if (row->has_times)
        c[11] = cell_count(a, row->times);
    c[12] = cell_count(a, row->samples);
    if (row->has_required)
        c[13] = cell_count(a, row->required);
    const char *note = row_note(a, row, remarks);
    c[14] = cell_text(note[0] != '\0' ? note : l->note);
}

struct table *findings_table(struct arena *a, const struct permit_month *m,
                             const struct month_remarks *remarks)
{
    static const enum word titles[] = {
        WORD_COLUMN_FINDING,   WORD_COLUMN_OUTFALL,  WORD_COLUMN_POINT, WORD_COLUMN_PARAMETER,
        WORD_COLUMN_STATISTIC, WORD_COLUMN_FROM,     WORD_COLUMN_TO,    WORD_COLUMN_ON,
        WORD_COLUMN_FIGURE,    WORD_COLUMN_UNIT,     WORD_COLUMN_LIMIT, WORD_COLUMN_TIMES,
        WORD_COLUMN_TAKEN,     WORD_COLUMN_REQUIRED, WORD_COLUMN_NOTE,
    };
    struct table *t = sheet_table(a, titles, NELEM(titles));
    for (size_t i = 0; i < m->count; i++)
        if (is_exceeded(&m->rows[i], m->on))
            add_finding(t, m, i, cell_flagged(cell_text(word(WORD_VERDICT_EXCEEDED)), FLAG_BAD),
                        remarks);
    for (size_t i = 0; i < m->count; i++)
        if (permit_shortfall(&m->rows[i], m->on))
            add_finding(t, m, i, cell_flagged(cell_text(word(WORD_SHORT)), FLAG_SHORT), remarks);
    for (size_t i = 0; i < m->count; i++)
        if (is_passed(&m->rows[i], m->on))
            add_finding(t, m, i,
                        cell_flagged(cell_text(word(WORD_VERDICT_TARGET_PASSED)), FLAG_WATCH),
                        remarks);
    return t;
}
