/* What came out of a bench sheet, for tired eyes: what asks for a look first, and in words. */
#include "command/bench.h"

#include <string.h>

#include "base/poison.h"

enum { TEXT_MOST = 1 << 16 };

/* ---- words ---- */

static bool aside(const struct bench_result *r)
{
    return r->state == STATE_ASIDE || r->outcome->kind == BENCH_REFUSED;
}

bool sheets_found(const struct bench_results *r)
{
    for (size_t i = 0; i < r->results; i++)
        if (r->result[i].failed || aside(&r->result[i]))
            return true;
    return false;
}

const char *sheets_unit(const struct bench_argument *g)
{
    return g->text || text_equal(g->unit, "1") || text_equal(g->unit, "count") ? "" : g->unit;
}

const char *sheets_bounds(struct arena *a, const struct bench_argument *g)
{
    const char *low = g->at_least ? arena_print(a, "at least %s", g->at_least)
                      : g->above  ? arena_print(a, "above %s", g->above)
                                  : "";
    const char *high = g->at_most ? arena_print(a, "at most %s", g->at_most)
                       : g->below ? arena_print(a, "below %s", g->below)
                                  : "";
    if (!*low && !*high)
        return "";
    const char *unit = sheets_unit(g);
    return arena_print(a, "%s%s%s%s%s", low, *low && *high ? ", " : "", high, *unit ? " " : "",
                       unit);
}

/* The checks in one line, the failed ones first. */
static const char *checks_told(struct arena *a, const struct bench_outcome *o)
{
    struct text t;
    text_init(&t, TEXT_MOST);
    for (int passed = 0; passed < 2; passed++)
        for (size_t i = 0; i < o->checks; i++)
            if (o->check[i].passed == (passed == 1))
                text_print(&t, "%s%s%s", t.length ? "; " : "",
                           passed ? "" : "CHECK FAILED: ", o->check[i].text);
    const char *told = arena_text(a, t.at);
    text_free(&t);
    return told;
}

static const char *note_of(struct arena *a, const struct bench_result *r)
{
    const struct bench_outcome *o = r->outcome;
    if (r->clash)
        return r->clash;
    if (o->kind == BENCH_REFUSED)
        return arena_print(a, "%s: %s", reason_words[o->reason], o->explanation);
    if (o->kind == BENCH_READING && o->reading.detail && *o->reading.detail->note)
        return o->reading.detail->note;
    return checks_told(a, o);
}

/* ---- as a table ---- */

enum {
    SHOWN_SHEET,
    SHOWN_DATE,
    SHOWN_TIME,
    SHOWN_POINT,
    SHOWN_PARAMETER,
    SHOWN_VALUE,
    SHOWN_UNIT,
    SHOWN_STATE,
    SHOWN_NOTE
};

static const struct column columns[] = {
    {"sheet", NULL, ALIGN_LEFT, false, 0},     {"date", NULL, ALIGN_LEFT, false, 0},
    {"time", NULL, ALIGN_LEFT, false, 0},      {"point", NULL, ALIGN_LEFT, false, 0},
    {"parameter", NULL, ALIGN_LEFT, false, 0}, {"value", NULL, ALIGN_LEFT, false, 0},
    {"unit", NULL, ALIGN_LEFT, false, 0},      {"state", NULL, ALIGN_LEFT, false, 0},
    {"note", NULL, ALIGN_LEFT, true, 0},
};

static void add_reading(const struct bench *b, struct cell *cell, const struct reading *r)
{
    char time[6];
    minute_write(r->minute, time);
    cell[SHOWN_DATE] = cell_day(b->session->arena, r->day);
    cell[SHOWN_TIME] = cell_text(arena_text(b->session->arena, time));
    cell[SHOWN_POINT] = cell_text(b->plant->points[r->point].id);
    cell[SHOWN_PARAMETER] = cell_text(b->plant->parameters[r->parameter].id);
    cell[SHOWN_VALUE] = r->qualifier == QUALIFIER_PLAIN ? cell_number(r->text) : cell_text(r->text);
    cell[SHOWN_UNIT] = cell_text(unit_at(r->unit)->name);
}

static const char *row_cell(const struct row_text *row, enum long_column column)
{
    return row->cell[column] ? row->cell[column] : "";
}

static void add_row(struct cell *cell, const struct row_text *row)
{
    cell[SHOWN_DATE] = cell_text(row_cell(row, LONG_DATE));
    cell[SHOWN_TIME] = cell_text(row_cell(row, LONG_TIME));
    cell[SHOWN_POINT] = cell_text(row_cell(row, LONG_POINT));
    cell[SHOWN_PARAMETER] = cell_text(row_cell(row, LONG_PARAMETER));
    cell[SHOWN_VALUE] = cell_text(row_cell(row, LONG_VALUE));
    cell[SHOWN_UNIT] = cell_text(row_cell(row, LONG_UNIT));
}

struct table *sheets_table(const struct bench *b, const struct bench_results *r)
{
    struct table *t = table_new(b->session->arena, "", columns, NELEM(columns));
    for (size_t i = 0; i < r->results; i++) {
        const struct bench_outcome *o = r->result[i].outcome;
        struct cell *cell = table_row(t);
        for (size_t k = 0; k < NELEM(columns); k++)
            cell[k] = cell_text("");
        if (o->kind == BENCH_READING)
            add_reading(b, cell, &o->reading);
        else
            add_row(cell, &o->row);
        cell[SHOWN_SHEET] = cell_text(o->sheet);
        cell[SHOWN_STATE] = cell_text(bench_state_words[r->result[i].state]);
        cell[SHOWN_NOTE] = cell_text(note_of(b->session->arena, &r->result[i]));
    }
    return t;
}

/* ---- as a page ---- */

static const char *when_where(struct arena *a, const char *date, const char *time,
                              const char *point)
{
    return arena_print(a, "%s%s%s%s%s", *point ? " at " : "", point, *date ? ", " : "", date,
                       *time ? arena_print(a, " %s", time) : "");
}

static const char *state_told(const struct bench *b, const struct bench_result *r)
{
    switch (r->state) {
    case STATE_WORKED:
    case STATE_RECORD:
    case STATE_ASIDE:
        return "";
    case STATE_PRESENT:
        return ", already present";
    default:
        return arena_print(b->session->arena, ", %s%s", b->options->dry_run ? "would be " : "",
                           bench_state_words[r->state]);
    }
}

static const char *reading_head(const struct bench *b, const struct bench_result *r)
{
    struct arena *a = b->session->arena;
    const struct reading *g = &r->outcome->reading;
    char date[11], time[6];
    day_write(g->day, date);
    minute_write(g->minute, time);
    bool code = g->qualifier == QUALIFIER_CODE;
    return arena_print(a, "%s%s%s%s: %s%s%s%s", b->plant->parameters[g->parameter].id,
                       g->sample && *g->sample ? " " : "", g->sample ? g->sample : "",
                       when_where(a, date, time, b->plant->points[g->point].id),
                       code ? "code " : "", g->text,
                       code ? "" : arena_print(a, " %s", unit_at(g->unit)->name), state_told(b, r));
}

static const char *head_of(const struct bench *b, const struct bench_result *r)
{
    struct arena *a = b->session->arena;
    const struct bench_outcome *o = r->outcome;
    if (o->kind == BENCH_READING)
        return reading_head(b, r);
    const char *what = row_cell(&o->row, LONG_PARAMETER);
    const char *where = when_where(a, row_cell(&o->row, LONG_DATE), row_cell(&o->row, LONG_TIME),
                                   row_cell(&o->row, LONG_POINT));
    if (o->kind == BENCH_RECORD)
        return arena_print(a, "%s%s: kept with its checks", o->sheet, where);
    return arena_print(a, "%s%s", *what ? what : o->sheet, where);
}

static void add_checks(struct page *page, const struct bench_outcome *o)
{
    for (int passed = 0; passed < 2; passed++)
        for (size_t i = 0; i < o->checks; i++) {
            const struct bench_check *c = &o->check[i];
            if (c->passed != (passed == 1))
                continue;
            if (c->passed)
                page_line(page, FLAG_NONE, "    met: %s", c->text);
            else
                page_line(page, FLAG_BAD, "    CHECK FAILED: %s (%s)", c->text, c->source);
        }
}

/* What the note says before its checks: which runs were used. */
static void add_summary(const struct bench *b, struct page *page, const struct bench_outcome *o)
{
    if (o->kind != BENCH_READING || !o->reading.detail || o->checks == 0)
        return;
    const char *note = o->reading.detail->note;
    const char *failed = strstr(note, "CHECK FAILED: "), *passed = strstr(note, "passed: ");
    const char *end = !failed || (passed && passed < failed) ? passed : failed;
    if (end && end > note + 2)
        page_line(page, FLAG_NONE, "    %s",
                  arena_bytes(b->session->arena, note, (size_t)(end - note) - 2));
}

static void add_head(const struct bench *b, struct page *page, const struct bench_result *r)
{
    const struct bench_outcome *o = r->outcome;
    const char *head = head_of(b, r);
    if (o->kind == BENCH_REFUSED) {
        page_line(page, FLAG_BAD, "NO RESULT: %s", head);
        page_line(page, FLAG_NONE, "    %s:%ld: %s", o->row.file, o->row.line, o->explanation);
        page_line(page, FLAG_NONE, "    %s: %s", reason_words[o->reason], reason_todo[o->reason]);
    } else if (r->clash) {
        page_line(page, FLAG_BAD, "CONTRADICTS THE BOOK: %s", head);
        page_line(page, FLAG_NONE, "    %s", r->clash);
        page_line(page, FLAG_NONE,
                  "    contradicts: keep the old value, or enter the sheet again "
                  "with --revise --reason TEXT");
    } else if (r->failed) {
        page_line(page, FLAG_BAD, "CHECK FAILED: %s", head);
    } else {
        page_line(page, FLAG_NONE, "%s", head);
    }
}

static void add_result(const struct bench *b, struct page *page, const struct bench_result *r,
                       bool more)
{
    const struct bench_outcome *o = r->outcome;
    add_head(b, page, r);
    if (more)
        return; /* the next one has the same checks and working: they are shown once */
    add_summary(b, page, o);
    add_checks(page, o);
    for (size_t i = 0; i < o->workings; i++)
        page_line(page, FLAG_LIGHT, "      %s", o->working[i]);
}

static bool same_body(const struct bench_result *one, const struct bench_result *other)
{
    const struct bench_outcome *p = one->outcome, *q = other->outcome;
    return p->working && p->working == q->working && p->workings == q->workings &&
           p->check == q->check && p->checks == q->checks;
}

/* Worst first: what has no place in the book, failed checks, the rest. */
static int rank_of(const struct bench_result *r)
{
    return aside(r) ? 0 : r->failed ? 1 : 2;
}

static void add_counts(const struct bench *b, struct page *page, const struct bench_results *r,
                       bool apart)
{
    const struct book_counts *c = &r->counts;
    if (apart)
        page_line(page, FLAG_NONE, "%s", r->name);
    page_line(page, FLAG_NONE,
              "%s%s%ld result%s: %ld accepted, %ld already present, %ld revised, %ld set aside",
              apart ? "  " : r->name, apart ? "" : ": ", c->rows, c->rows == 1 ? "" : "s",
              c->accepted, c->present, c->revised, c->aside);
    if (r->told)
        page_line(page, FLAG_NONE, "  %s", r->told);
    if (b->options->dry_run)
        page_line(page, FLAG_NONE, "  dry run: nothing was changed");
}

void sheets_tell(const struct bench *b, const struct bench_results *r, bool counts)
{
    struct page *page = page_new(b->session->arena);
    size_t *in_order = arena_alloc(b->session->arena, (r->results + 1) * sizeof *in_order);
    size_t n = 0;
    for (int rank = 0; rank < 3; rank++)
        for (size_t i = 0; i < r->results; i++)
            if (rank_of(&r->result[i]) == rank)
                in_order[n++] = i;
    for (size_t i = 0; i < n; i++) {
        const struct bench_result *one = &r->result[in_order[i]];
        add_result(b, page, one, i + 1 < n && same_body(one, &r->result[in_order[i + 1]]));
    }
    if (counts) {
        page_space(page);
        add_counts(b, page, r, false);
    }
    session_print(b->session, AS_TEXT, page, NULL);
}

/* After a conversation the results have been shown; what only the book could know is not. */
void sheets_tell_counts(const struct bench *b, const struct bench_results *r)
{
    struct page *page = page_new(b->session->arena);
    for (size_t i = 0; i < r->results; i++)
        if (r->result[i].clash)
            add_head(b, page, &r->result[i]);
    add_counts(b, page, r, true);
    session_print(b->session, AS_TEXT, page, NULL);
}
