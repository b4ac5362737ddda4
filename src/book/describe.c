/* describe: plant descriptions into the book and out of it, every row as written. */
#include "book/store.h"

#include <assert.h>
#include <string.h>

#include "base/poison.h"

enum { ROW_FIRST_CELL = 6 }; /* columns of GET_ROWS before the file's own */

/* ---- in ---- */

static enum status add_row(struct book *b, struct pack *p, struct digest *d, struct stored_row *row,
                           struct fault *f)
{
    sqlite3_stmt *s = NULL;
    const struct plant_layout *layout = plant_layout(row->kind);
    if (book_statement(b, ADD_ROW + row->kind, &s, f) != OK)
        return FAULT;
    assert(sqlite3_bind_parameter_count(s) == ROW_FIRST_CELL + (int)layout->columns);
    pack_row(p, row);
    digest_add(d, p->at, p->length);
    bind_int(s, 1, row->batch);
    bind_int(s, 2, row->place);
    bind_int(s, 3, row->builtin);
    bind_text(s, 4, row->file);
    bind_int(s, 5, row->line);
    bind_int(s, 6, pack_mark(p));
    for (size_t i = 0; i < layout->columns; i++)
        bind_text(s, ROW_FIRST_CELL + 1 + (int)i, row->cell[i]);
    return book_run(b, s, f);
}

/* File by file, in the order of the layouts: the order in which check goes over them again. */
static enum status add_rows(struct book *b, const struct plant_draft *draft, int64_t batch,
                            struct arena *a, uint8_t content[DIGEST_BYTES], struct fault *f)
{
    struct pack p;
    struct digest *d = digest_new(a);
    pack_init(&p, a);
    for (enum plant_file kind = 0; kind < PLANT_FILES; kind++) {
        for (size_t i = 0; i < plant_draft_rows(draft); i++) {
            const struct plant_row *from = plant_draft_row(draft, i);
            if (from->file != kind)
                continue;
            struct stored_row row = {.batch = batch,
                                     .place = (int64_t)i + 1,
                                     .builtin = from->builtin,
                                     .line = from->line,
                                     .kind = kind,
                                     .file = from->name ? from->name : ""};
            memcpy(row.cell, from->cell, sizeof row.cell);
            if (add_row(b, &p, d, &row, f) != OK)
                return FAULT;
        }
    }
    digest_end(d, content);
    return OK;
}

enum status description_add(struct book *b, const struct plant_draft *draft,
                            const struct author *author, const char *reason, struct fault *f)
{
    struct arena *a = arena_new();
    struct stored_batch batch;
    sqlite3_stmt *s = NULL;
    struct pack p;
    struct digest *d = digest_new(a);
    uint8_t content[DIGEST_BYTES], none[DIGEST_BYTES];
    enum status rc = OK;

    pack_init(&p, a);
    digest_end(d, none);
    TRY(batch_add(b, &batch, "description", author, f));
    batch.is_description = true;
    batch.reason = reason;
    batch.rows = (int64_t)plant_draft_rows(draft);
    TRY(book_statement(b, ADD_DESCRIPTION, &s, f));
    bind_int(s, 1, batch.id);
    bind_text(s, 2, reason);
    bind_int(s, 3, batch.rows);
    TRY(book_run(b, s, f));
    TRY(add_rows(b, draft, batch.id, a, content, f));
    TRY(chain_add(b, &p, d, &batch, content, none, f));
done:
    arena_free(a);
    return rc;
}

/* ---- out ---- */

enum status description_rows(struct book *b, int64_t batch, enum plant_file kind, row_sink *sink,
                             void *context, struct fault *f)
{
    const struct plant_layout *layout = plant_layout(kind);
    sqlite3_stmt *s = NULL;
    bool more = false;
    enum status rc = OK;
    TRY(book_statement(b, GET_ROWS + kind, &s, f));
    assert(sqlite3_column_count(s) == ROW_FIRST_CELL + (int)layout->columns);
    bind_int(s, 1, batch);
    for (;;) {
        TRY(book_step(b, s, &more, f));
        if (!more)
            break;
        struct stored_row row = {
            .batch = sqlite3_column_int64(s, 0),
            .place = sqlite3_column_int64(s, 1),
            .builtin = sqlite3_column_int64(s, 2),
            .file = column_text(s, 3),
            .line = sqlite3_column_int64(s, 4),
            .mark = sqlite3_column_int64(s, 5),
            .kind = kind,
        };
        for (int i = 0; i < (int)layout->columns; i++)
            row.cell[i] = (const char *)sqlite3_column_text(s, ROW_FIRST_CELL + i);
        TRY(sink(context, &row, f));
    }
done:
    if (s)
        sqlite3_reset(s);
    return rc;
}

/* A description's rows on their way back into a draft, by their place in it. */
struct gathering {
    struct book *book;
    struct arena *arena;
    struct pack pack;
    struct plant_row *row;
    size_t rows, row_room;
    int64_t *place; /* of each row */
    size_t places, place_room;
};

static enum status gather(void *context, const struct stored_row *from, struct fault *f)
{
    struct gathering *g = context;
    pack_row(&g->pack, from);
    if (pack_mark(&g->pack) != from->mark) {
        if (sqlite3_errcode(g->book->db) == SQLITE_NOMEM)
            return book_fault(g->book, f);
        return book_damaged(g->book, f,
                            "its description is not what was put in: %s:%lld (batch %lld)",
                            from->file, (long long)from->line, (long long)from->batch);
    }
    struct plant_row *row = arena_push(g->arena, &g->row, &g->rows, &g->row_room, sizeof *row);
    int64_t *place = arena_push(g->arena, &g->place, &g->places, &g->place_room, sizeof *place);
    *place = from->place;
    *row = (struct plant_row){.file = from->kind,
                              .name = arena_text(g->arena, from->file),
                              .line = (long)from->line,
                              .builtin = from->builtin != 0};
    for (size_t i = 0; i < PLANT_COLUMNS_MOST; i++)
        row->cell[i] = from->cell[i] ? arena_text(g->arena, from->cell[i]) : NULL;
    return OK;
}

/* In the order in which they were put in: files one after another is not it, when the built-in
 * catalogue came first. Places count from 1 without gaps. */
static enum status add_in_order(struct gathering *g, struct plant_draft *draft, struct fault *f)
{
    size_t *at =
        arena_alloc(g->arena, (g->rows + 1) * sizeof *at); /* by place: the row's index + 1 */
    for (size_t i = 0; i < g->rows; i++) {
        int64_t place = g->place[i];
        if (place < 1 || (uint64_t)place > g->rows || at[place - 1])
            return book_damaged(g->book, f, "rows of its description are missing");
        at[place - 1] = i + 1;
    }
    for (size_t i = 0; i < g->rows; i++)
        plant_draft_add(draft, &g->row[at[i] - 1]);
    return OK;
}

enum status description_draft(struct book *b, struct arena *a, int64_t batch,
                              struct plant_draft **draft, struct fault *f)
{
    struct gathering g = {.book = b, .arena = a};
    enum status rc = OK;
    pack_init(&g.pack, a);
    for (enum plant_file kind = 0; kind < PLANT_FILES; kind++)
        TRY(description_rows(b, batch, kind, gather, &g, f));
    *draft = plant_draft_new(a);
    TRY(add_in_order(&g, *draft, f));
done:
    return rc;
}

static enum status description_in_force(struct book *b, struct arena *a, struct plant_draft **draft,
                                        struct fault *f)
{
    sqlite3_stmt *s = NULL;
    bool row;
    enum status rc = OK;
    TRY(book_statement(b, DESCRIPTION_IN_FORCE, &s, f));
    bind_int(s, 1, b->as_of);
    TRY(book_step(b, s, &row, f));
    int64_t batch = sqlite3_column_int64(s, 0);
    sqlite3_reset(s);
    if (batch == 0)
        return book_damaged(b, f, "it has no plant description");
    rc = description_draft(b, a, batch, draft, f);
done:
    return rc;
}

enum status book_plant(struct book *b, struct arena *a, struct plant_draft **draft,
                       struct plant **plant, struct fault *f)
{
    if (description_in_force(b, a, draft, f) != OK)
        return FAULT;
    return plant_draft_finish(*draft, plant, f);
}

/* ---- a changed description ---- */

static const struct plant_row *next_of(const struct plant_draft *d, enum plant_file kind, size_t *i)
{
    while (*i < plant_draft_rows(d)) {
        const struct plant_row *row = plant_draft_row(d, (*i)++);
        if (row->file == kind)
            return row;
    }
    return NULL;
}

static bool blank(const char *cell)
{
    return !cell || !*cell;
}

bool description_same_row(const struct plant_row *a, const struct plant_row *b)
{
    if (a->builtin != b->builtin)
        return false;
    for (size_t i = 0; i < plant_layout(a->file)->columns; i++)
        if (!(blank(a->cell[i]) && blank(b->cell[i])) && !text_equal(a->cell[i], b->cell[i]))
            return false;
    return true;
}

/* Whether two drafts say the same: file by file the same cells in the same order, wherever they
 * stood. */
static bool same_description(const struct plant_draft *a, const struct plant_draft *b)
{
    for (enum plant_file kind = 0; kind < PLANT_FILES; kind++) {
        size_t i = 0, j = 0;
        for (;;) {
            const struct plant_row *x = next_of(a, kind, &i), *y = next_of(b, kind, &j);
            if (!x || !y) {
                if (x != y)
                    return false;
                break;
            }
            if (!description_same_row(x, y))
                return false;
        }
    }
    return true;
}

static enum status series_used(struct book *b, int64_t series, bool *used, struct fault *f)
{
    sqlite3_stmt *s = NULL;
    if (book_statement(b, SERIES_HAS, &s, f) != OK)
        return FAULT;
    bind_int(s, 1, series);
    bind_int(s, 2, INT32_MIN);
    bind_int(s, 3, INT32_MAX);
    if (book_step(b, s, used, f) != OK)
        return FAULT;
    sqlite3_reset(s);
    return OK;
}

static enum status refuse_loss(const struct series_name *s, const struct plant *old,
                               const struct plant *new, struct fault *f)
{
    int parameter = plant_parameter(new, s->parameter), before = plant_parameter(old, s->parameter);
    if (plant_point(new, s->point) < 0)
        return fault_at(f, NULL, "keep it in points.csv",
                        "point '%s' has readings and cannot be left out", s->point);
    if (parameter < 0)
        return fault_at(f, NULL, "keep it in parameters.csv",
                        "parameter '%s' has readings and cannot be left out", s->parameter);
    const struct unit *unit = new->parameters[parameter].unit;
    if (before >= 0 && !unit_same_kind(unit, old->parameters[before].unit))
        return fault_at(f, NULL, "name the new measure otherwise",
                        "parameter '%s' has readings in %s, which do not convert to %s",
                        s->parameter, old->parameters[before].unit->name, unit->name);
    return OK;
}

static enum status refuse_losses(struct book *b, struct arena *a, const struct plant *old,
                                 const struct plant *new, struct fault *f)
{
    struct names *n = arena_alloc(a, sizeof *n);
    enum status rc = OK;
    TRY(names_begin(b, n, a, NULL, false, f));
    for (size_t i = 0; i < n->series_count; i++) {
        bool used = false;
        TRY(series_used(b, n->series[i].id, &used, f));
        if (used)
            TRY(refuse_loss(&n->series[i], old, new, f));
    }
done:
    names_end(n);
    return rc;
}

/* The draft again, from its rows: the caller's stays untouched, and an unsound one is never put in.
 */
static enum status finish_copy(struct arena *a, const struct plant_draft *draft, struct plant **out,
                               struct fault *f)
{
    struct plant_draft *copy = plant_draft_new(a);
    for (size_t i = 0; i < plant_draft_rows(draft); i++)
        plant_draft_add(copy, plant_draft_row(draft, i));
    return plant_draft_finish(copy, out, f);
}

enum status book_apply(struct book *b, const struct plant_draft *draft, const struct author *author,
                       const char *reason, bool *changed, struct fault *f)
{
    struct arena *a = arena_new();
    struct plant_draft *in_force = NULL;
    struct plant *old = NULL, *new = NULL;
    enum status rc = OK;

    *changed = false;
    TRY(finish_copy(a, draft, &new, f));
    TRY(book_begin(b, f));
    TRY(book_plant(b, a, &in_force, &old, f));
    if (same_description(in_force, draft)) {
        book_rollback(b);
        goto done;
    }
    TRY(refuse_losses(b, a, old, new, f));
    TRY(description_add(b, draft, author, reason, f));
    TRY(book_commit(b, f));
    *changed = true;
done:
    if (rc != OK)
        book_rollback(b);
    arena_free(a);
    return rc;
}
