/* notice_page: the notices that exceedances ask for: a list, and drafts with the facts filled in.
 */
#include "report/content.h"

#include <stdlib.h>
#include <string.h>

#include "base/poison.h"

enum { DRAFT_WIDTH = 80, DRAFT_LINES = 58, BLANK_LINES = 3 };

/* ---- times ---- */

static const char *iso_day(struct arena *a, day_t day)
{
    char iso[11];
    day_write(day, iso);
    return arena_text(a, iso);
}

/* "2025-03-19 14:30"; without a time the day alone. */
static const char *moment_text(struct arena *a, struct moment m)
{
    char time[6];
    if (m.minute < 0)
        return iso_day(a, m.day);
    minute_write(m.minute, time);
    return arena_print(a, "%s %s", iso_day(a, m.day), time);
}

static const char *owed_text(struct arena *a, struct moment aware, int hours)
{
    return aware.day == DAY_NONE ? "" : moment_text(a, permit_owed(aware, hours));
}

/* ---- a draft ---- */

static void draft_limits(struct page *p, const struct notice *n)
{
    static const enum word titles[] = {WORD_COLUMN_WHAT, WORD_COLUMN_FIGURE, WORD_COLUMN_LIMIT,
                                       WORD_COLUMN_BEYOND_COUNT};
    struct arena *a = p->arena;
    struct column *columns = arena_alloc(a, NELEM(titles) * sizeof *columns);
    for (size_t i = 0; i < NELEM(titles); i++)
        columns[i] = (struct column){.title = word(titles[i]), .wraps = i != 3};
    columns[3].align = ALIGN_RIGHT;
    struct table *t = table_new(a, "", columns, NELEM(titles));
    for (size_t i = 0; i < n->findings; i++) {
        const struct permit_finding *x = n->finding[i];
        const struct limit *l = x->row->limit;
        struct cell *c = table_row(t);
        c[0] = cell_text(limit_name(a, l));
        c[1] = cell_text(arena_print(a, "%s %s", x->figure, l->unit_text));
        c[2] = cell_text(limit_bound(a, l, true));
        c[3] = cell_count(a, x->beyond);
    }
    page_heading(p, word(WORD_NOTICE_HEADING_LIMITS));
    page_table(p, t);
    page_space(p);
}

static void result_rows(struct table *t, const struct notice *n, int point, int parameter)
{
    struct arena *a = t->arena;
    size_t count = 0;
    const struct reading *const *r =
        frame_readings(n->frame, point, parameter, n->finding[0]->day, &count);
    for (size_t i = 0; i < count; i++) {
        const struct detail *d = r[i]->detail;
        char time[6];
        struct cell *c = table_row(t);
        minute_write(r[i]->minute, time);
        c[0] = cell_text(arena_print(a, "%s %s", n->plant->points[point].id,
                                     n->plant->parameters[parameter].id));
        c[1] = cell_text(arena_text(a, time));
        c[2] = cell_text(arena_print(a, "%s %s", r[i]->text, unit_at(r[i]->unit)->name));
        c[3] = cell_text(r[i]->sample);
        c[4] = cell_text(d != NULL && d->method != NULL ? d->method : "");
        c[5] = cell_text(d != NULL && d->collected_by != NULL ? d->collected_by : "");
        c[6] = cell_text(d != NULL && d->analyst != NULL ? d->analyst : "");
    }
}

/* Whether an earlier finding had this point and parameter. */
static bool shown_before(const struct notice *n, size_t upto, int point, int parameter)
{
    for (size_t i = 0; i < upto; i++) {
        const struct limit *l = n->finding[i]->row->limit;
        for (int j = 0; j < l->points * l->parameters; j++)
            if (l->point[j / l->parameters] == point &&
                l->parameter[j % l->parameters] == parameter)
                return true;
    }
    return false;
}

/* The flows a load was worked from, unless a load before it had the same. */
static void flow_rows(struct table *t, const struct notice *n, size_t finding)
{
    const struct limit *l = n->finding[finding]->row->limit;
    for (size_t i = 0; i < finding; i++) {
        const struct limit *before = n->finding[i]->row->limit;
        if (before->basis == BASIS_LOAD && text_equal(before->point_text, l->point_text))
            return;
    }
    for (int i = 0; i < l->points; i++) {
        int point = 0;
        int parameter = 0;
        if (frame_flow_of(n->frame, l->point[i], &l->rules, &point, &parameter))
            result_rows(t, n, point, parameter);
    }
}

static void draft_results(struct page *p, const struct notice *n)
{
    static const enum word titles[] = {
        WORD_COLUMN_OF,     WORD_COLUMN_TIME,    WORD_COLUMN_VALUE,  WORD_COLUMN_WHICH_SAMPLE,
        WORD_COLUMN_METHOD, WORD_COLUMN_BY_WHOM, WORD_COLUMN_ANALYST};
    struct arena *a = p->arena;
    struct column *columns = arena_alloc(a, NELEM(titles) * sizeof *columns);
    for (size_t i = 0; i < NELEM(titles); i++)
        columns[i] = (struct column){.title = word(titles[i]), .wraps = true};
    struct table *t = table_new(a, "", columns, NELEM(titles));
    for (size_t i = 0; i < n->findings; i++) {
        const struct limit *l = n->finding[i]->row->limit;
        for (int j = 0; j < l->points * l->parameters; j++) {
            int point = l->point[j / l->parameters];
            int parameter = l->parameter[j % l->parameters];
            if (!shown_before(n, i, point, parameter))
                result_rows(t, n, point, parameter);
        }
        if (l->basis == BASIS_LOAD)
            flow_rows(t, n, i);
    }
    if (t->rows == 0)
        return;
    page_heading(p, word(WORD_NOTICE_HEADING_RESULTS));
    page_table(p, t);
    page_space(p);
}

static void draft_head(struct page *p, const struct notice *n)
{
    struct arena *a = p->arena;
    const struct limit *l = n->finding[0]->row->limit;
    int hours = n->written ? WRITTEN_HOURS : NOTICE_HOURS;
    page_heading(p, word(n->written ? WORD_NOTICE_TITLE_5 : WORD_NOTICE_TITLE_24));
    page_line(p, FLAG_NONE, "%s", SAY(a, NOTICE_PLANT, [PLACE_PLANT] = n->plant->name));
    page_line(p, FLAG_NONE, "%s", SAY(a, NOTICE_PERMIT, [PLACE_PERMIT] = n->plant->permit));
    if (l->outfall[0] != '\0')
        page_line(p, FLAG_NONE, "%s", SAY(a, NOTICE_OUTFALL, [PLACE_OUTFALL] = l->outfall));
    if (n->plant->receiving_water[0] != '\0')
        page_line(p, FLAG_NONE, "%s",
                  SAY(a, NOTICE_WATER, [PLACE_WATER] = n->plant->receiving_water));
    page_line(p, FLAG_NONE, "%s", SAY(a, NOTICE_DAY, [PLACE_DAY] = iso_day(a, n->finding[0]->day)));
    if (n->aware.day == DAY_NONE) {
        page_line(p, FLAG_NONE, "%s", word(WORD_NOTICE_AWARE_BLANK));
    } else {
        page_line(p, FLAG_NONE, "%s",
                  SAY(a, NOTICE_AWARE, [PLACE_TIME] = moment_text(a, n->aware)));
        page_line(p, FLAG_NONE, "%s",
                  SAY(a, NOTICE_OWED, [PLACE_TIME] = owed_text(a, n->aware, hours)));
    }
    page_space(p);
}

static void blank_part(struct page *p, enum word heading)
{
    page_heading(p, word(heading));
    for (int i = 0; i < BLANK_LINES; i++) {
        page_space(p);
        page_line(p, FLAG_NONE, "%s", word(WORD_NOTICE_BLANK));
    }
    page_space(p);
}

/* What only the person knows. */
static void draft_blanks(struct page *p, const struct notice *n)
{
    page_heading(p, word(WORD_NOTICE_HEADING_PERIOD));
    page_line(p, FLAG_NONE, "%s", word(WORD_NOTICE_PERIOD_HINT));
    page_line(p, FLAG_NONE, "%s", word(WORD_NOTICE_CONTINUES));
    page_space(p);
    blank_part(p, WORD_NOTICE_HEADING_CAUSE);
    blank_part(p, WORD_NOTICE_HEADING_REMEDY);
    if (n->written) {
        page_line(p, FLAG_NONE, "%s", word(WORD_SIGN_NAME));
        page_line(p, FLAG_NONE, "%s", word(WORD_SIGN_TITLE));
        page_line(p, FLAG_NONE, "%s", word(WORD_SIGN_SIGNATURE));
        page_line(p, FLAG_NONE, "%s", word(WORD_SIGN_DATE));
    } else {
        page_heading(p, word(WORD_NOTICE_HEADING_TOLD));
        page_line(p, FLAG_NONE, "%s", word(WORD_NOTICE_TOLD_WHOM));
        page_line(p, FLAG_NONE, "%s", word(WORD_NOTICE_TOLD_WHEN));
        page_line(p, FLAG_NONE, "%s", word(WORD_NOTICE_TOLD_BY));
    }
    page_space(p);
}

static struct page *draft_page(struct arena *a, const struct notice *n)
{
    struct page *p = page_new(a);
    draft_head(p, n);
    draft_limits(p, n);
    draft_results(p, n);
    if (n->remarks > 0) {
        page_heading(p, word(WORD_NOTICE_HEADING_REMARKS));
        for (size_t i = 0; i < n->remarks; i++)
            page_line(p, FLAG_NONE, "%s", n->remark[i]);
        page_space(p);
    }
    draft_blanks(p, n);
    page_line(p, FLAG_NONE, "%s", word(n->written ? WORD_NOTICE_SOURCE_5 : WORD_NOTICE_SOURCE_24));
    page_line(p, FLAG_NONE, "%s", word(WORD_NOTICE_CAUTION));
    return p;
}

/* How many bytes go on the next page: as many lines as it holds, back to the last empty one, so
 * that a block is not torn. */
static size_t page_bytes(const char *text)
{
    size_t bytes = 0;
    size_t whole = 0;
    for (size_t line = 0; line < DRAFT_LINES; line++) {
        if (text[bytes] == '\0')
            return bytes;
        if (text[bytes] == '\n')
            whole = bytes + 1;
        bytes += strcspn(text + bytes, "\n") + 1;
    }
    return text[bytes] == '\0' || whole == 0 ? bytes : whole;
}

/* Cuts the text into pages; each says at its head and foot that it is a draft. */
static void write_pages(FILE *out, struct arena *a, const char *text)
{
    size_t pages = 0;
    for (const char *at = text; *at != '\0'; at += page_bytes(at))
        pages++;
    for (size_t page = 1; page <= pages; page++) {
        size_t bytes = page_bytes(text);
        fprintf(out, "%s%s\n\n", page > 1 ? "\f" : "", word(WORD_NOTICE_DRAFT));
        fwrite(text, 1, bytes, out);
        fprintf(out, "\n%s\n",
                SAY(a, NOTICE_PAGE, [PLACE_COUNT] = arena_print(a, "%zu", page),
                    [PLACE_TO] = arena_print(a, "%zu", pages)));
        text += bytes;
    }
}

void report_notice(FILE *out, struct arena *a, const struct notice *n)
{
    const struct text_style style = {.width = DRAFT_WIDTH};
    char *text = NULL;
    size_t length = 0;
    FILE *memory = open_memstream(&text, &length);
    if (memory != NULL) {
        write_text(memory, draft_page(a, n), &style);
        if (fclose(memory) == 0)
            write_pages(out, a, text);
    }
    if (length == 0) { /* as arenas end it */
        fputs("weirbook: out of memory\n", stderr);
        exit(1);
    }
    free(text);
}

/* ---- the list ---- */

struct table *report_notices_table(struct arena *a, const struct notice_listed *l, size_t count)
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
        {.key = "duty", .title = "duty"},
        {.key = "owed_by", .title = "owed by"},
        {.key = "written_by", .title = "in writing by"},
        {.key = "draft", .title = "draft"},
        {.key = "written_draft", .title = "written draft"},
    };
    struct table *t = table_new(a, "", columns, NELEM(columns));
    for (size_t i = 0; i < count; i++) {
        const struct permit_finding *x = l[i].finding;
        const struct limit *limit = x->row->limit;
        bool hours = x->duty == DUTY_24_HOURS;
        struct cell *c = table_row(t);
        *c++ = cell_text(limit->outfall);
        *c++ = cell_text(limit->point_text);
        *c++ = cell_text(limit->parameter_text);
        *c++ = cell_text(basis_words[limit->basis]);
        *c++ = cell_text(limit->statistic_text);
        *c++ = cell_day(a, x->row->from);
        *c++ = cell_day(a, x->row->to);
        *c++ = cell_day(a, x->day);
        *c++ = cell_text(x->figure);
        *c++ = cell_text(x->row->unit);
        *c++ = cell_text(bound_words[limit->bound]);
        *c++ = cell_number(limit->limit_text);
        *c++ = cell_text(hours ? "24-hours" : "report");
        *c++ = cell_text(hours ? owed_text(a, l[i].aware, NOTICE_HOURS) : "");
        *c++ = cell_text(hours ? owed_text(a, l[i].aware, WRITTEN_HOURS) : "");
        *c++ = cell_text(l[i].draft);
        *c = cell_text(l[i].written_draft);
    }
    return t;
}

/* The time, or in words what it is counted from. */
static struct cell owed_cell(struct arena *a, const struct notice_listed *l, int hours,
                             enum word unknown)
{
    if (l->finding->duty == DUTY_REPORT)
        return cell_text(hours == NOTICE_HOURS ? word(WORD_OWED_WITH_REPORT) : "");
    if (l->aware.day == DAY_NONE)
        return cell_text(word(unknown));
    return cell_flagged(cell_text(owed_text(a, l->aware, hours)), FLAG_BAD);
}

static struct table *notices_shown(struct arena *a, const struct notice_listed *l, size_t count)
{
    static const enum word titles[] = {WORD_COLUMN_WHAT,    WORD_COLUMN_WHEN,
                                       WORD_COLUMN_FIGURE,  WORD_COLUMN_LIMIT,
                                       WORD_COLUMN_TOLD_BY, WORD_COLUMN_WRITTEN_BY};
    struct column *columns = arena_alloc(a, NELEM(titles) * sizeof *columns);
    for (size_t i = 0; i < NELEM(titles); i++)
        columns[i] = (struct column){.title = word(titles[i]), .wraps = true};
    struct table *t = table_new(a, "", columns, NELEM(titles));
    for (size_t i = 0; i < count; i++) {
        const struct permit_finding *x = l[i].finding;
        struct cell *c = table_row(t);
        c[0] = cell_text(limit_name(a, x->row->limit));
        c[1] = cell_text(x->day != DAY_NONE ? iso_day(a, x->day) : row_when(a, x->row));
        c[2] = cell_text(arena_print(a, "%s %s", x->figure, x->row->unit));
        c[3] = cell_text(limit_bound(a, x->row->limit, true));
        c[4] = owed_cell(a, &l[i], NOTICE_HOURS, WORD_OWED_24_HOURS);
        c[5] = owed_cell(a, &l[i], WRITTEN_HOURS, WORD_OWED_5_DAYS);
    }
    return t;
}

const char *report_notice_file(struct arena *a, const char *path, bool was_there)
{
    return was_there ? SAY(a, NOTICE_FILE_LEFT, [PLACE_NAME] = path)
                     : SAY(a, NOTICE_FILE_WRITTEN, [PLACE_NAME] = path);
}

struct page *report_notices_page(struct arena *a, const struct plant *plant,
                                 const struct permit_month *m, const struct notice_listed *l,
                                 size_t count, const char *const *files, size_t file_count)
{
    struct page *p = page_new(a);
    page_heading(p, title_line(a, plant, m));
    page_line(p, FLAG_NONE, "%s", permit_line(a, plant, m));
    page_space(p);
    page_heading(p, word(WORD_HEADING_NOTICES));
    if (count == 0) {
        page_line(p, FLAG_GOOD, "%s", word(WORD_NOTICES_NONE));
        return p;
    }
    page_table(p, notices_shown(a, l, count));
    page_space(p);
    for (size_t i = 0; i < file_count; i++)
        page_line(p, FLAG_NONE, "%s", files[i]);
    if (file_count > 0 && l[0].aware.day == DAY_NONE)
        page_line(p, FLAG_WATCH, "%s", word(WORD_NOTICES_AWARE));
    page_line(p, FLAG_NONE, "%s", word(WORD_NOTICES_WHICH));
    return p;
}
