/* read: readings, revisions and rows set aside out of the book. All questions go by index; what
 * they cost depends on what is asked for, not on how much the book holds. */
#include "book/store.h"

#include <stdlib.h>
#include <string.h>

#include "base/poison.h"

/* DAY_NONE: an open end. */
static void bind_days(sqlite3_stmt *s, int at, day_t first, day_t last)
{
    bind_int(s, at, first == DAY_NONE ? INT32_MIN : first);
    bind_int(s, at + 1, last == DAY_NONE ? INT32_MAX : last);
}

/* Whether a row of READING_COLUMNS came after the moment the book is read as of. */
static bool came_later(const struct book *b, sqlite3_stmt *s)
{
    enum { IN_BATCH = 5 };
    return sqlite3_column_int64(s, IN_BATCH) > b->as_of;
}

static bool as_it_is(const struct book *b)
{
    return b->as_of == INT64_MAX;
}

static bool names_column(const struct series_name *s, int point, int parameter)
{
    return s->plant_point == point && s->plant_parameter == parameter;
}

/* ---- into a frame ---- */

struct filling {
    struct book *book;
    struct names names;
    struct pack pack;
    struct arena *arena;
    struct frame *frame;
};

static enum status keep(struct filling *g, sqlite3_stmt *s, struct reading *r, struct fault *f)
{
    struct stored row;
    if (row_read(g->book, &g->names, s, &row, f) != OK ||
        row_reading(g->book, &g->names, &g->pack, &row, r, f) != OK)
        return FAULT;
    r->text = arena_text(g->arena, r->text); /* the other texts live in the arena already */
    return OK;
}

static enum status fill_series(struct filling *g, int64_t series, day_t first, day_t last,
                               struct fault *f)
{
    sqlite3_stmt *s = NULL;
    struct reading r;
    bool row = false;
    enum status rc = OK;
    TRY(book_statement(g->book, SERIES_SPAN, &s, f));
    bind_int(s, 1, series);
    bind_days(s, 2, first, last);
    for (;;) {
        TRY(book_step(g->book, s, &row, f));
        if (!row)
            break;
        if (came_later(g->book, s))
            continue;
        TRY(keep(g, s, &r, f));
        frame_add(g->frame, &r);
    }
done:
    if (s)
        sqlite3_reset(s);
    return rc;
}

/* The last number before a day: where a totalizer's first difference starts. Codes and readings
 * that were withdrawn are passed over; of each reading only the newest version counts. */
static enum status fill_start(struct filling *g, int64_t series, day_t first, struct fault *f)
{
    sqlite3_stmt *s = NULL;
    struct reading r, before = {.day = DAY_NONE};
    bool row = false;
    enum status rc = OK;
    TRY(book_statement(g->book, SERIES_BEFORE, &s, f));
    bind_int(s, 1, series);
    bind_int(s, 2, first);
    for (;;) {
        TRY(book_step(g->book, s, &row, f));
        if (!row)
            break;
        if (came_later(g->book, s))
            continue;
        TRY(keep(g, s, &r, f));
        bool older_version = r.day == before.day && r.minute == before.minute;
        before = r;
        if (older_version || r.qualifier >= QUALIFIER_CODE)
            continue;
        frame_add(g->frame, &r);
        break;
    }
done:
    if (s)
        sqlite3_reset(s);
    return rc;
}

static bool is_totalized(const struct plant *plant, const struct frame_span *span)
{
    for (size_t i = 0; i < plant->meter_count; i++) {
        const struct meter *m = &plant->meters[i];
        if (m->kind == METER_TOTALIZER && m->point == span->point &&
            m->parameter == span->parameter)
            return true;
    }
    return false;
}

static enum status fill_span(struct filling *g, const struct plant *plant,
                             const struct frame_span *span, struct fault *f)
{
    bool totalized = is_totalized(plant, span) && span->first != DAY_NONE;
    for (size_t i = 0; i < g->names.series_count; i++) {
        const struct series_name *s = &g->names.series[i];
        if (!names_column(s, span->point, span->parameter))
            continue;
        if (totalized && fill_start(g, s->id, span->first, f) != OK)
            return FAULT;
        if (fill_series(g, s->id, span->first, span->last, f) != OK)
            return FAULT;
    }
    return OK;
}

/* ---- the whole table at once ----
 * By index every reading costs a search of its own in the table; in the table's own order it costs
 * the next step. Where much of a book is asked for, one pass over all of it is quicker. */

/* A pass takes about a fifth of the time for a reading that is not asked for. */
enum { PASS_SHARE = 5, PASS_READINGS_LEAST = 20000 };

struct asked {
    const struct frame_span *span; /* of a series; NULL: not asked for */
};

/* By the series' number in `names`. False: a column is asked for in two pieces. */
static bool ask_series(const struct names *n, const struct frame_span *spans, size_t count,
                       struct asked *asked)
{
    for (size_t i = 0; i < count; i++) {
        for (size_t k = 0; k < n->series_count; k++) {
            if (!names_column(&n->series[k], spans[i].point, spans[i].parameter))
                continue;
            if (asked[k].span)
                return false;
            asked[k].span = &spans[i];
        }
    }
    return true;
}

static enum status extreme(struct book *b, enum statement which, int64_t series, day_t *out,
                           struct fault *f);

/* As if a series had its readings evenly over its days. */
static enum status share_asked(struct filling *g, const struct asked *asked, bool *much,
                               struct fault *f)
{
    int64_t wanted = 0, there = 0;
    for (size_t i = 0; i < g->names.series_count; i++) {
        const struct frame_span *span = asked[i].span;
        day_t first, last;
        if (extreme(g->book, SERIES_FIRST, g->names.series[i].id, &first, f) != OK ||
            extreme(g->book, SERIES_LAST, g->names.series[i].id, &last, f) != OK)
            return FAULT;
        if (first == DAY_NONE || last == DAY_NONE)
            continue;
        there += (int64_t)last - first + 1;
        if (!span)
            continue;
        int64_t from = span->first > first ? span->first : first;
        int64_t to = span->last < last ? span->last : last;
        wanted += to >= from ? to - from + 1 : 0;
    }
    *much = wanted > 0 && wanted >= there / PASS_SHARE;
    return OK;
}

/* What is cheap is asked first: a month of a long book must not look at every series. */
static enum status worth_a_pass(struct filling *g, const struct asked *asked,
                                const struct frame_span *spans, size_t count, bool *much,
                                struct fault *f)
{
    sqlite3_stmt *s = NULL;
    bool row = false;
    int64_t readings = 0, days = 0;
    *much = false;
    if (book_statement(g->book, LAST_READING, &s, f) != OK || book_step(g->book, s, &row, f) != OK)
        return FAULT;
    if (row)
        readings = sqlite3_column_int64(s, 0);
    sqlite3_reset(s);
    for (size_t i = 0; i < count; i++)
        days += spans[i].first == DAY_NONE ? readings : (int64_t)spans[i].last - spans[i].first + 1;
    if (readings < PASS_READINGS_LEAST || days * 20 < readings)
        return OK;
    return share_asked(g, asked, much, f);
}

static const struct frame_span *asked_of(const struct filling *g, const struct asked *asked,
                                         int64_t series)
{
    const struct series_name *s = names_series(&g->names, series);
    return s ? asked[s - g->names.series].span : NULL;
}

/* A pass never comes back to a page: a small cache serves as well as a large one. */
static enum status pass_rows(struct filling *g, const struct asked *asked, day_t first, day_t last,
                             struct fault *f)
{
    enum { AT_SERIES = 1, AT_DAY = 2 }; /* of READING_COLUMNS */
    sqlite3_stmt *s = NULL;
    struct reading r;
    bool row = false;
    enum status rc = OK;
    TRY(book_statement(g->book, ALL_OF_DAYS, &s, f));
    bind_days(s, 1, first, last);
    for (;;) {
        TRY(book_step(g->book, s, &row, f));
        if (!row)
            break;
        const struct frame_span *span = asked_of(g, asked, sqlite3_column_int64(s, AT_SERIES));
        int64_t day = sqlite3_column_int64(s, AT_DAY);
        if (!span || day < span->first || day > span->last || came_later(g->book, s))
            continue;
        TRY(keep(g, s, &r, f));
        frame_add(g->frame, &r);
    }
done:
    if (s)
        sqlite3_reset(s);
    return rc;
}

/* *done: all spans are filled. */
static enum status fill_by_pass(struct filling *g, const struct plant *plant,
                                const struct frame_span *spans, size_t count, bool *done,
                                struct fault *f)
{
    struct asked *asked = arena_alloc(g->arena, (g->names.series_count + 1) * sizeof *asked);
    day_t first = INT32_MAX, last = INT32_MIN;
    enum status rc = OK;
    *done = false;
    if (!ask_series(&g->names, spans, count, asked))
        return OK;
    TRY(worth_a_pass(g, asked, spans, count, done, f));
    if (!*done)
        return OK;
    for (size_t i = 0; i < count; i++) {
        first = spans[i].first < first ? spans[i].first : first;
        last = spans[i].last > last ? spans[i].last : last;
    }
    for (size_t i = 0; i < g->names.series_count; i++)
        if (asked[i].span && asked[i].span->first != DAY_NONE && is_totalized(plant, asked[i].span))
            TRY(fill_start(g, g->names.series[i].id, asked[i].span->first, f));
    TRY(book_exec(g->book, "PRAGMA cache_size = -2048", f));
    rc = pass_rows(g, asked, first, last, f);
    if (book_exec(g->book, "PRAGMA cache_size = -65536", f) != OK)
        rc = FAULT;
done:
    return rc;
}

static int order_spans(const void *a, const void *b)
{
    const struct frame_span *x = a, *y = b;
    if (x->point != y->point)
        return x->point < y->point ? -1 : 1;
    if (x->parameter != y->parameter)
        return x->parameter < y->parameter ? -1 : 1;
    return (x->first > y->first) - (x->first < y->first);
}

/* Spans of one column that meet become one: no reading is handed over twice. */
static struct frame_span *merge_spans(struct arena *a, const struct frame_span *spans,
                                      size_t *count)
{
    struct frame_span *out = arena_alloc(a, (*count + 1) * sizeof *out);
    size_t kept = 0;
    if (*count == 0)
        return out;
    memcpy(out, spans, *count * sizeof *out);
    for (size_t i = 0; i < *count; i++)
        if (out[i].last == DAY_NONE)
            out[i].last = INT32_MAX;
    qsort(out, *count, sizeof *out, order_spans);
    for (size_t i = 1; i < *count; i++) {
        struct frame_span *last = &out[kept];
        if (out[i].point == last->point && out[i].parameter == last->parameter &&
            out[i].first <= last->last) {
            if (out[i].last > last->last)
                last->last = out[i].last;
        } else {
            out[++kept] = out[i];
        }
    }
    *count = kept + 1;
    return out;
}

enum status book_fill(struct book *b, struct arena *a, const struct plant *plant,
                      const struct frame_span *spans, size_t count, struct frame *frame,
                      struct fault *f)
{
    struct filling *g = arena_alloc(a, sizeof *g);
    bool passed = false;
    enum status rc = OK;
    g->book = b;
    g->arena = a;
    g->frame = frame;
    pack_init(&g->pack, a);
    TRY(names_begin(b, &g->names, a, plant, false, f));
    const struct frame_span *merged = merge_spans(a, spans, &count);
    TRY(fill_by_pass(g, plant, merged, count, &passed, f));
    for (size_t i = 0; i < count && !passed; i++)
        TRY(fill_span(g, plant, &merged[i], f));
done:
    names_end(&g->names);
    return rc;
}

/* ---- what there is ---- */

static enum status series_has(struct book *b, int64_t series, day_t first, day_t last, bool *has,
                              struct fault *f)
{
    sqlite3_stmt *s = NULL;
    if (book_statement(b, as_it_is(b) ? SERIES_HAS : SERIES_HAS_THEN, &s, f) != OK)
        return FAULT;
    bind_int(s, 1, series);
    bind_days(s, 2, first, last);
    if (!as_it_is(b))
        bind_int(s, 4, b->as_of);
    if (book_step(b, s, has, f) != OK)
        return FAULT;
    sqlite3_reset(s);
    return OK;
}

static bool has_span(const struct frame_span *spans, size_t count, const struct series_name *s)
{
    for (size_t i = 0; i < count; i++)
        if (names_column(s, spans[i].point, spans[i].parameter))
            return true;
    return false;
}

enum status book_spans(struct book *b, struct arena *a, const struct plant *plant, day_t first,
                       day_t last, struct frame_span **spans, size_t *count, struct fault *f)
{
    struct names *n = arena_alloc(a, sizeof *n);
    size_t room = 0;
    enum status rc = OK;
    *spans = NULL;
    *count = 0;
    TRY(names_begin(b, n, a, plant, false, f));
    for (size_t i = 0; i < n->series_count; i++) {
        const struct series_name *s = &n->series[i];
        bool has = false;
        if (s->plant_point < 0 || s->plant_parameter < 0 || has_span(*spans, *count, s))
            continue;
        TRY(series_has(b, s->id, first, last, &has, f));
        if (has)
            *(struct frame_span *)arena_push(a, spans, count, &room, sizeof **spans) =
                (struct frame_span){s->plant_point, s->plant_parameter, first, last};
    }
    if (*count > 0)
        qsort(*spans, *count, sizeof **spans, order_spans);
done:
    names_end(n);
    return rc;
}

static enum status extreme(struct book *b, enum statement which, int64_t series, day_t *out,
                           struct fault *f)
{
    sqlite3_stmt *s = NULL;
    bool row;
    *out = DAY_NONE;
    if (!as_it_is(b))
        which = which == SERIES_FIRST ? SERIES_FIRST_THEN : SERIES_LAST_THEN;
    if (book_statement(b, which, &s, f) != OK)
        return FAULT;
    bind_int(s, 1, series);
    if (!as_it_is(b))
        bind_int(s, 2, b->as_of);
    if (book_step(b, s, &row, f) != OK)
        return FAULT;
    if (row && sqlite3_column_type(s, 0) != SQLITE_NULL)
        *out = (day_t)sqlite3_column_int64(s, 0);
    sqlite3_reset(s);
    return OK;
}

enum status book_extent(struct book *b, day_t *first, day_t *last, struct fault *f)
{
    struct arena *a = arena_new();
    struct names *n = arena_alloc(a, sizeof *n);
    enum status rc = OK;
    *first = *last = DAY_NONE;
    TRY(names_begin(b, n, a, NULL, false, f));
    for (size_t i = 0; i < n->series_count; i++) {
        day_t low, high;
        TRY(extreme(b, SERIES_FIRST, n->series[i].id, &low, f));
        TRY(extreme(b, SERIES_LAST, n->series[i].id, &high, f));
        if (low != DAY_NONE && (*first == DAY_NONE || low < *first))
            *first = low;
        if (high != DAY_NONE && (*last == DAY_NONE || high > *last))
            *last = high;
    }
done:
    names_end(n);
    arena_free(a);
    return rc;
}

/* ---- every reading in force ---- */

static enum status each_of_column(struct book *b, struct names *n, struct pack *p,
                                  const char *const column[2], day_t first, day_t last,
                                  book_reading_sink *sink, void *context, struct fault *f)
{
    sqlite3_stmt *s = NULL;
    struct stored stored;
    struct reading r;
    bool row = false;
    enum status rc = OK;
    TRY(book_statement(b, as_it_is(b) ? COLUMN_IN_FORCE : COLUMN_IN_FORCE_THEN, &s, f));
    bind_text(s, 1, column[0]);
    bind_text(s, 2, column[1]);
    bind_days(s, 3, first, last);
    if (!as_it_is(b))
        bind_int(s, 5, b->as_of);
    for (;;) {
        TRY(book_step(b, s, &row, f));
        if (!row)
            break;
        TRY(row_read(b, n, s, &stored, f));
        TRY(row_reading(b, n, p, &stored, &r, f));
        TRY(sink(context, &r, f));
    }
done:
    if (s)
        sqlite3_reset(s);
    return rc;
}

enum status book_each(struct book *b, const struct plant *plant, day_t first, day_t last,
                      book_reading_sink *sink, void *context, struct fault *f)
{
    struct arena *a = arena_new();
    struct names *n = arena_alloc(a, sizeof *n);
    struct frame_span *spans = NULL;
    struct pack p;
    size_t count = 0;
    enum status rc = OK;
    pack_init(&p, a);
    TRY(names_begin(b, n, a, plant, true, f));
    TRY(book_spans(b, a, plant, first, last, &spans, &count, f));
    for (size_t i = 0; i < count; i++) {
        const char *const column[2] = {plant->points[spans[i].point].id,
                                       plant->parameters[spans[i].parameter].id};
        TRY(each_of_column(b, n, &p, column, first, last, sink, context, f));
    }
done:
    names_end(n);
    arena_free(a);
    return rc;
}

/* ---- the newest reading ---- */

static enum status last_of_series(struct filling *g, int64_t series, day_t before, bool *found,
                                  struct reading *out, struct fault *f)
{
    sqlite3_stmt *s = NULL;
    struct reading older = {.day = DAY_NONE};
    bool row = false;
    enum status rc = OK;
    TRY(book_statement(g->book, SERIES_BEFORE, &s, f));
    bind_int(s, 1, series);
    bind_int(s, 2, before == DAY_NONE ? INT32_MAX : before);
    while (!*found) {
        TRY(book_step(g->book, s, &row, f));
        if (!row)
            break;
        if (came_later(g->book, s))
            continue;
        TRY(keep(g, s, out, f));
        bool replaced = out->day == older.day && out->minute == older.minute;
        *found = !replaced && out->qualifier != QUALIFIER_WITHDRAWN;
        older = *out;
    }
done:
    if (s)
        sqlite3_reset(s);
    return rc;
}

enum status book_last(struct book *b, struct arena *a, const struct plant *plant, int point,
                      int parameter, const char *sample, day_t before, bool *found,
                      struct reading *out, struct fault *f)
{
    struct filling *g = arena_alloc(a, sizeof *g);
    enum status rc = OK;
    *found = false;
    g->book = b;
    g->arena = a;
    pack_init(&g->pack, a);
    TRY(names_begin(b, &g->names, a, plant, false, f));
    for (size_t i = 0; i < g->names.series_count && !*found; i++) {
        const struct series_name *s = &g->names.series[i];
        if (names_column(s, point, parameter) && text_equal(s->sample, sample ? sample : ""))
            TRY(last_of_series(g, s->id, before, found, out, f));
    }
done:
    names_end(&g->names);
    return rc;
}

/* ---- rows set aside ---- */

static enum status give_aside(struct book *b, struct names *n, struct pack *p, sqlite3_stmt *s,
                              book_aside_sink *sink, void *context, struct fault *f)
{
    struct stored_aside row;
    const char *file = "";
    row_aside(s, &row);
    if (row.batch > b->as_of)
        return OK;
    names_turn(n);
    if (names_file(b, n, row.batch, &file, f) != OK)
        return FAULT;
    pack_aside(p, &row);
    if (pack_mark(p) != row.mark) {
        if (sqlite3_errcode(b->db) == SQLITE_NOMEM)
            return book_fault(b, f);
        return book_damaged(b, f, "a row set aside, %s:%lld of batch %lld, is not what was loaded",
                            file, (long long)row.line, (long long)row.batch);
    }
    struct book_aside out = {
        .batch = row.batch,
        .row = {.file = file, .line = (long)row.line, .column = (int)row.column, .raw = row.raw},
        .reason = row.reason,
        .explanation = row.explanation};
    memcpy(out.row.cell, row.cell, sizeof out.row.cell);
    return sink(context, &out, f);
}

enum status book_asides(struct book *b, day_t first, day_t last, book_aside_sink *sink,
                        void *context, struct fault *f)
{
    struct arena *a = arena_new();
    struct names *n = arena_alloc(a, sizeof *n);
    sqlite3_stmt *s = NULL;
    struct pack p;
    bool all = first == DAY_NONE && last == DAY_NONE, row = false;
    enum status rc = OK;
    pack_init(&p, a);
    TRY(names_begin(b, n, a, NULL, true, f));
    TRY(book_statement(b, all ? ASIDES_ALL : ASIDES_OF_DAYS, &s, f));
    if (!all)
        bind_days(s, 1, first, last);
    for (;;) {
        TRY(book_step(b, s, &row, f));
        if (!row)
            break;
        TRY(give_aside(b, n, &p, s, sink, context, f));
    }
done:
    if (s)
        sqlite3_reset(s);
    names_end(n);
    arena_free(a);
    return rc;
}

/* ---- revisions ---- */

/* Columns of REVISIONS. */
enum {
    AT_DAY,
    AT_MINUTE,
    AT_SERIES,
    AT_DETAIL,
    AT_QUALIFIER,
    AT_NEW,
    AT_OLD,
    AT_VERSION,
    AT_BATCH,
    AT_LINE,
    AT_WHO,
    AT_WHEN,
    AT_REASON,
    AT_FILE,
    AT_OLD_DETAIL
};

static enum status give_revision(struct book *b, struct names *n, sqlite3_stmt *s,
                                 book_revision_sink *sink, void *context, struct fault *f)
{
    const struct series_name *series = names_series(n, sqlite3_column_int64(s, AT_SERIES));
    const struct common *common = NULL, *old = NULL;
    if (names_common(b, n, sqlite3_column_int64(s, AT_DETAIL), &common, f) != OK ||
        names_common(b, n, sqlite3_column_int64(s, AT_OLD_DETAIL), &old, f) != OK)
        return FAULT;
    if (!series || series->plant_point < 0 || series->plant_parameter < 0 || !common || !old)
        return book_damaged(b, f, "a revision is of a reading its description does not know");
    bool withdrawn = sqlite3_column_int(s, AT_QUALIFIER) == QUALIFIER_WITHDRAWN;
    const struct book_revision out = {
        .day = (day_t)sqlite3_column_int64(s, AT_DAY),
        .minute = sqlite3_column_int(s, AT_MINUTE),
        .point = series->plant_point,
        .parameter = series->plant_parameter,
        .sample = series->sample,
        .old_text = column_text(s, AT_OLD),
        .new_text = withdrawn ? "withdrawn" : column_text(s, AT_NEW),
        .unit = common->unit_name,
        .old_unit = old->unit_name,
        .who = column_text(s, AT_WHO),
        .when = column_text(s, AT_WHEN),
        .reason = column_text(s, AT_REASON),
        .file = column_text(s, AT_FILE),
        .line = (long)sqlite3_column_int64(s, AT_LINE),
        .version = sqlite3_column_int(s, AT_VERSION),
    };
    return sink(context, &out, f);
}

enum status book_revisions(struct book *b, const struct plant *plant, day_t first, day_t last,
                           book_revision_sink *sink, void *context, struct fault *f)
{
    struct arena *a = arena_new();
    struct names *n = arena_alloc(a, sizeof *n);
    sqlite3_stmt *s = NULL;
    bool row = false;
    enum status rc = OK;
    TRY(names_begin(b, n, a, plant, false, f));
    TRY(book_statement(b, REVISIONS, &s, f));
    bind_days(s, 1, first, last);
    for (;;) {
        TRY(book_step(b, s, &row, f));
        if (!row)
            break;
        if (sqlite3_column_int64(s, AT_BATCH) <= b->as_of)
            TRY(give_revision(b, n, s, sink, context, f));
    }
done:
    if (s)
        sqlite3_reset(s);
    names_end(n);
    arena_free(a);
    return rc;
}
