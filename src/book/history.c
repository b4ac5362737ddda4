/* history: what was done to the book, batch by batch: files and sheets, values that replaced
 * others, batches taken back, descriptions row by row, remarks and answers. */
#include "book/store.h"

#include <stdlib.h>
#include <string.h>

#include "base/poison.h"

struct history {
    struct book *book;
    const struct plant *plant;
    const struct book_history *ask;
    book_change_sink *sink;
    void *context;
    struct arena *arena; /* names; texts of one batch stand in `passing` */
    struct arena *passing;
    struct names names;
    struct pack pack;
    bool one_column; /* readings of one column are asked for: `id` lists them, in order */
    int64_t *id;
    size_t ids, id_room;
    struct book_change now; /* of the batch: who, when, what, reason */
};

/* ---- what is asked for ---- */

static bool is_asked(const struct book_history *ask, const struct book_change *c, day_t last)
{
    if (ask->first != DAY_NONE && (c->day == DAY_NONE || last < ask->first))
        return false;
    if (ask->last != DAY_NONE && (c->day == DAY_NONE || c->day > ask->last))
        return false;
    if (ask->point >= 0 && c->point != ask->point)
        return false;
    return ask->parameter < 0 || c->parameter == ask->parameter;
}

/* `last`: of the days that it is about. */
static enum status give(struct history *h, const struct book_change *c, day_t last, struct fault *f)
{
    return is_asked(h->ask, c, last) ? h->sink(h->context, c, f) : OK;
}

/* ---- readings ---- */

/* Its value with the unit, and what it is a reading of. */
static enum status read_one(struct history *h, int64_t id, struct stored *out, const char **value,
                            struct fault *f)
{
    sqlite3_stmt *q = NULL;
    bool row;
    enum status rc = OK;
    TRY(book_statement(h->book, READING_BY_ID, &q, f));
    bind_int(q, 1, id);
    TRY(book_step(h->book, q, &row, f));
    if (!row) {
        rc = book_damaged(h->book, f, "reading %lld is missing", (long long)id);
        goto done;
    }
    TRY(row_read(h->book, &h->names, q, out, f));
    if (!row_sound(&h->pack, out)) {
        rc = row_unsound(h->book, &h->names, out, f);
        goto done;
    }
    *value = out->qualifier == QUALIFIER_WITHDRAWN
                 ? "withdrawn"
                 : arena_print(h->passing, "%s %s", out->value, out->common->unit_name);
done:
    if (q)
        sqlite3_reset(q);
    return rc;
}

static enum status give_reading(struct history *h, int64_t id, int64_t replaced, struct fault *f)
{
    struct book_change c = h->now;
    struct stored old = {.id = 0}, new = {.id = 0};
    enum status rc = OK;
    TRY(read_one(h, id, &new, &c.new_text, f));
    const struct series_name *series = names_series(&h->names, new.series);
    if (!series)
        return book_damaged(h->book, f, "reading %lld is of no point", (long long)id);
    c.day = (day_t) new.day;
    c.point = series->plant_point;
    c.parameter = series->plant_parameter;
    c.sample = series->sample;
    c.line = (long)new.line;
    if (replaced)
        TRY(read_one(h, replaced, &old, &c.old_text, f));
    if (replaced && *c.file) /* of a load: a correction, and not the file itself */
        c.what = "revise";
    rc = give(h, &c, c.day, f);
done:
    return rc;
}

/* Texts of readings that were given are dropped once they have grown. */
static void turn(struct history *h)
{
    enum { PASSING_BYTES_MOST = 4 << 20 };
    if (arena_used(h->passing) <= PASSING_BYTES_MOST)
        return;
    arena_free(h->passing);
    h->passing = arena_new();
}

static enum status give_readings(struct history *h, int64_t first, int64_t count, struct fault *f)
{
    sqlite3_stmt *q = NULL;
    bool row = false, all = h->ask->every_reading && !h->one_column;
    enum status rc = OK;
    if (count <= 0)
        return OK;
    TRY(book_statement(h->book, all ? MADE : CHANGED, &q, f));
    bind_int(q, 1, first);
    bind_int(q, 2, first + count - 1);
    for (;;) {
        TRY(book_step(h->book, q, &row, f));
        if (!row)
            break;
        turn(h);
        TRY(give_reading(h, sqlite3_column_int64(q, 0), sqlite3_column_int64(q, 1), f));
    }
done:
    if (q)
        sqlite3_reset(q);
    return rc;
}

static int order_ids(const void *a, const void *b)
{
    const int64_t *x = a, *y = b;
    return (*x > *y) - (*x < *y);
}

/* First versions of a column's days, by index: a book of many years is not gone through for them.
 */
static enum status list_column(struct history *h, struct fault *f)
{
    const struct book_history *ask = h->ask;
    enum { AT_VERSION = 4 }; /* of READING_COLUMNS */
    h->one_column = true;
    for (size_t i = 0; i < h->names.series_count; i++) {
        const struct series_name *s = &h->names.series[i];
        sqlite3_stmt *q = NULL;
        bool row = true;
        if (s->plant_point != ask->point || s->plant_parameter != ask->parameter)
            continue;
        if (book_statement(h->book, SERIES_SPAN, &q, f) != OK)
            return FAULT;
        bind_int(q, 1, s->id);
        bind_int(q, 2, ask->first == DAY_NONE ? INT32_MIN : ask->first);
        bind_int(q, 3, ask->last == DAY_NONE ? INT32_MAX : ask->last);
        while (row) {
            if (book_step(h->book, q, &row, f) != OK)
                return FAULT;
            if (row && sqlite3_column_int64(q, AT_VERSION) == 0)
                *(int64_t *)arena_push(h->arena, &h->id, &h->ids, &h->id_room, sizeof *h->id) =
                    sqlite3_column_int64(q, 0);
        }
    }
    if (h->ids > 0)
        qsort(h->id, h->ids, sizeof *h->id, order_ids);
    return OK;
}

static enum status give_listed(struct history *h, int64_t first, int64_t count, struct fault *f)
{
    size_t low = 0, high = h->ids;
    while (low < high) {
        size_t middle = low + (high - low) / 2;
        if (h->id[middle] < first)
            low = middle + 1;
        else
            high = middle;
    }
    for (; low < h->ids && h->id[low] < first + count; low++)
        if (give_reading(h, h->id[low], 0, f) != OK)
            return FAULT;
    return OK;
}

/* ---- descriptions ---- */

static const char *row_told(struct arena *a, const struct plant_row *row)
{
    struct text t;
    size_t columns = plant_layout(row->file)->columns;
    while (columns > 1 && (!row->cell[columns - 1] || !*row->cell[columns - 1]))
        columns--;
    text_init(&t, 1 << 20);
    for (size_t i = 0; i < columns; i++)
        text_print(&t, "%s%s", i > 0 ? "," : "", row->cell[i] ? row->cell[i] : "");
    const char *told = arena_text(a, t.at);
    text_free(&t);
    return told;
}

/* Marks of two drafts the rows that stand in both. */
static void match(const struct plant_draft *x, const struct plant_draft *y, bool *in_x, bool *in_y)
{
    for (size_t i = 0; i < plant_draft_rows(x); i++) {
        const struct plant_row *row = plant_draft_row(x, i);
        for (size_t k = 0; k < plant_draft_rows(y) && !in_x[i]; k++) {
            const struct plant_row *other = plant_draft_row(y, k);
            if (in_y[k] || other->file != row->file || !description_same_row(row, other))
                continue;
            in_x[i] = in_y[k] = true;
        }
    }
}

static bool same_cell(const char *x, const char *y)
{
    return text_equal(x ? x : "", y ? y : "");
}

/* The old row that a new one took the place of: of the same file, with the most cells in common;
 * none when even the first that has words differs. */
static size_t nearest(const struct plant_draft *old, const bool *kept, const struct plant_row *row)
{
    size_t best = plant_draft_rows(old), most = 0;
    for (size_t i = 0; i < plant_draft_rows(old); i++) {
        const struct plant_row *other = plant_draft_row(old, i);
        size_t same = 0;
        if (kept[i] || other->file != row->file)
            continue;
        for (size_t c = 0; c < plant_layout(row->file)->columns; c++)
            same += row->cell[c] && *row->cell[c] && same_cell(row->cell[c], other->cell[c]);
        if (same <= most || !same_cell(row->cell[0], other->cell[0]))
            continue;
        most = same;
        best = i;
    }
    return best;
}

static enum status give_row(struct history *h, const struct plant_row *old,
                            const struct plant_row *new, struct fault *f)
{
    struct book_change c = h->now;
    const struct plant_row *at = new ? new : old;
    c.file = at->name ? at->name : "";
    c.line = at->line;
    c.old_text = old ? row_told(h->passing, old) : "";
    c.new_text = new ? row_told(h->passing, new) : "";
    return give(h, &c, DAY_NONE, f);
}

static enum status give_differences(struct history *h, const struct plant_draft *old,
                                    const struct plant_draft *new, struct fault *f)
{
    bool *kept = arena_alloc(h->passing, plant_draft_rows(old) + 1);
    bool *known = arena_alloc(h->passing, plant_draft_rows(new) + 1);
    match(old, new, kept, known);
    for (size_t i = 0; i < plant_draft_rows(new); i++) {
        const struct plant_row *row = plant_draft_row(new, i);
        if (known[i])
            continue;
        size_t was = nearest(old, kept, row);
        bool replaced = was < plant_draft_rows(old);
        if (replaced)
            kept[was] = true;
        if (give_row(h, replaced ? plant_draft_row(old, was) : NULL, row, f) != OK)
            return FAULT;
    }
    for (size_t i = 0; i < plant_draft_rows(old); i++)
        if (!kept[i] && give_row(h, plant_draft_row(old, i), NULL, f) != OK)
            return FAULT;
    return OK;
}

static enum status give_description(struct history *h, struct fault *f)
{
    struct plant_draft *old = NULL, *new = NULL;
    sqlite3_stmt *q = NULL;
    bool row;
    enum status rc = OK;
    TRY(give(h, &h->now, DAY_NONE, f));
    TRY(book_statement(h->book, DESCRIPTION_BEFORE, &q, f));
    bind_int(q, 1, h->now.batch);
    TRY(book_step(h->book, q, &row, f));
    int64_t before = row ? sqlite3_column_int64(q, 0) : 0;
    sqlite3_reset(q);
    if (before == 0)
        goto done;
    TRY(description_draft(h->book, h->passing, before, &old, f));
    TRY(description_draft(h->book, h->passing, h->now.batch, &new, f));
    rc = give_differences(h, old, new, f);
done:
    return rc;
}

/* ---- remarks, answers ---- */

static enum status give_remark(struct history *h, const struct stored_remark *s, bool withdrawn,
                               struct fault *f)
{
    struct book_change c = h->now;
    pack_remark(&h->pack, s);
    if (pack_mark(&h->pack) != s->mark)
        return act_unsound(h->book, "the remark", s->batch, f);
    c.what = "remark";
    c.day = (day_t)s->first;
    c.point = *s->point ? plant_point(h->plant, s->point) : -1;
    c.parameter = *s->parameter ? plant_parameter(h->plant, s->parameter) : -1;
    const char *said =
        arena_print(h->passing, "%s%s%s: %s", s->kind, *s->event ? " " : "", s->event, s->text);
    c.old_text = withdrawn ? said : "";
    c.new_text = withdrawn ? "withdrawn" : said;
    return give(h, &c, (day_t)s->last, f);
}

static enum status give_answer(struct history *h, const struct stored_answer *s, struct fault *f)
{
    struct book_change c = h->now;
    pack_answer(&h->pack, s);
    if (pack_mark(&h->pack) != s->mark)
        return act_unsound(h->book, "the answer", s->batch, f);
    c.new_text = s->doubt;
    c.reason = s->reason;
    return give(h, &c, DAY_NONE, f);
}

/* ---- batches ---- */

/* Columns of HISTORY. */
enum {
    AT_ID,
    AT_KIND,
    AT_AT,
    AT_WHO,
    AT_FILE,
    AT_REASON,
    AT_COUNT,
    AT_FIRST,
    AT_DESCRIPTION_REASON,
    AT_ACT,
    AT_REMARK = AT_ACT + ACT_CELLS,
    AT_ANSWER = AT_REMARK + REMARK_CELLS
};

static enum status give_load(struct history *h, sqlite3_stmt *q, struct fault *f)
{
    int64_t first = sqlite3_column_int64(q, AT_FIRST), count = sqlite3_column_int64(q, AT_COUNT);
    h->now.file = column_text(q, AT_FILE);
    h->now.reason = column_text(q, AT_REASON);
    enum status rc = OK;
    TRY(give(h, &h->now, DAY_NONE, f));
    if (h->one_column)
        TRY(give_listed(h, first, count, f));
    TRY(give_readings(h, first, count, f));
done:
    return rc;
}

static enum status give_act(struct history *h, const struct stored_act *act,
                            const struct stored_remark *remark, struct fault *f)
{
    enum status rc = OK;
    pack_act(&h->pack, act);
    if (pack_mark(&h->pack) != act->mark)
        return act_unsound(h->book, "the act", act->batch, f);
    h->now.reason = act->reason;
    if (text_equal(h->now.what, "remark-withdraw"))
        return give_remark(h, remark, true, f);
    if (act->has_subject) {
        struct book_change c = h->now;
        c.old_text = arena_print(h->passing, "batch %lld", (long long)act->subject);
        c.new_text = "withdrawn";
        TRY(give(h, &c, DAY_NONE, f));
    }
    rc = give_readings(h, act->first_reading, act->readings, f);
done:
    return rc;
}

static enum status give_batch(struct history *h, sqlite3_stmt *q, struct fault *f)
{
    struct stored_act act;
    struct stored_remark remark;
    struct stored_answer answer;
    h->now = (struct book_change){.when = column_text(q, AT_AT),
                                  .who = column_text(q, AT_WHO),
                                  .what = column_text(q, AT_KIND),
                                  .reason = "",
                                  .batch = sqlite3_column_int64(q, AT_ID),
                                  .day = DAY_NONE,
                                  .point = -1,
                                  .parameter = -1,
                                  .sample = "",
                                  .old_text = "",
                                  .new_text = "",
                                  .file = ""};
    if (h->ask->who && !text_equal(h->ask->who, h->now.who))
        return OK;
    row_act(q, AT_ACT, &act);
    row_remark(q, AT_REMARK, &remark);
    row_answer(q, AT_ANSWER, &answer);
    if (sqlite3_column_type(q, AT_FIRST) != SQLITE_NULL)
        return give_load(h, q, f);
    if (act.batch)
        return give_act(h, &act, &remark, f);
    if (remark.batch)
        return give_remark(h, &remark, false, f);
    if (answer.batch)
        return give_answer(h, &answer, f);
    h->now.reason = column_text(q, AT_DESCRIPTION_REASON);
    return give_description(h, f);
}

static enum status give_all(struct history *h, struct fault *f)
{
    const struct book_history *ask = h->ask;
    sqlite3_stmt *q = NULL;
    bool row = false;
    enum status rc = OK;
    TRY(book_statement(h->book, HISTORY, &q, f));
    bind_int(q, 1, ask->batch ? ask->batch : 1);
    bind_int(q, 2, ask->batch && ask->batch < h->book->as_of ? ask->batch : h->book->as_of);
    for (;;) {
        TRY(book_step(h->book, q, &row, f));
        if (!row)
            break;
        arena_free(h->passing);
        h->passing = arena_new();
        TRY(give_batch(h, q, f));
    }
done:
    if (q)
        sqlite3_reset(q);
    return rc;
}

enum status book_history(struct book *b, const struct plant *plant, const struct book_history *ask,
                         book_change_sink *sink, void *context, struct fault *f)
{
    struct arena *a = arena_new();
    struct history *h = arena_alloc(a, sizeof *h);
    enum status rc = OK;
    *h = (struct history){.book = b, .plant = plant, .ask = ask, .sink = sink};
    h->context = context;
    h->arena = a;
    h->passing = arena_new();
    pack_init(&h->pack, a);
    TRY(names_begin(b, &h->names, a, plant, true, f));
    if (ask->every_reading && ask->point >= 0 && ask->parameter >= 0)
        TRY(list_column(h, f));
    TRY(give_all(h, f));
done:
    names_end(&h->names);
    arena_free(h->passing);
    arena_free(a);
    return rc;
}
