/* raw: raw values of bench sheets out of the book, each proved against its mark. */
#include "book/store.h"

#include <string.h>

#include "base/poison.h"

static enum status sound(struct book *b, struct pack *p, const struct stored_raw *s,
                         struct fault *f)
{
    pack_raw(p, s);
    if (pack_mark(p) == s->mark)
        return OK;
    if (sqlite3_errcode(b->db) == SQLITE_NOMEM) /* a text could not be had */
        return book_fault(b, f);
    return book_damaged(b, f, "raw value %lld of batch %lld, line %lld, is not what was loaded",
                        (long long)s->id, (long long)s->batch, (long long)s->line);
}

/* Times are written in more than one way: 8:05 is 08:05. */
static bool same_time(const char *x, const char *y)
{
    int at = 0, other = 0;
    if (minute_parse(x, &at) && minute_parse(y, &other))
        return at == other;
    return text_equal(x, y);
}

static bool belongs(const struct stored_raw *s, const struct stored_raw *to)
{
    const char *const *mine = s->cell, *const *cell = to->cell;
    if (!text_equal(mine[RAW_SHEET], cell[RAW_SHEET]) ||
        !text_equal(mine[RAW_DATE], cell[RAW_DATE]))
        return false;
    return *mine[RAW_POINT] == '\0' || (text_equal(mine[RAW_POINT], cell[RAW_POINT]) &&
                                        same_time(mine[RAW_TIME], cell[RAW_TIME]));
}

/* The first row of a group: what its reading names. Nothing in `out` outlives the arena. */
static enum status find_line(struct book *b, struct arena *a, struct pack *p, int64_t batch,
                             long line, bool *found, struct stored_raw *out, struct fault *f)
{
    sqlite3_stmt *q = NULL;
    enum status rc = OK;
    TRY(book_statement(b, RAW_OF_LINE, &q, f));
    bind_int(q, 1, batch);
    bind_int(q, 2, line);
    TRY(book_step(b, q, found, f));
    if (!*found)
        return OK;
    row_raw(q, out);
    TRY(sound(b, p, out, f));
    for (int i = 0; i < RAW_COLUMNS; i++)
        out->cell[i] = arena_text(a, out->cell[i]);
done:
    if (q)
        sqlite3_reset(q);
    return rc;
}

static enum status file_of(struct book *b, struct arena *a, int64_t batch, const char **out,
                           struct fault *f)
{
    sqlite3_stmt *q = NULL;
    bool row;
    *out = "";
    if (book_statement(b, FILE_OF_BATCH, &q, f) != OK)
        return FAULT;
    bind_int(q, 1, batch);
    if (book_step(b, q, &row, f) != OK)
        return FAULT;
    if (!row)
        return OK;
    *out = arena_text(a, column_text(q, 0));
    return book_step(b, q, &row, f); /* tells when the text could not be had */
}

static enum status give_group(struct book *b, struct pack *p, const struct stored_raw *of,
                              const char *file, book_raw_sink *sink, void *context, struct fault *f)
{
    sqlite3_stmt *q = NULL;
    struct stored_raw s;
    bool row = false;
    enum status rc = OK;
    TRY(book_statement(b, RAW_OF_BATCH, &q, f));
    bind_int(q, 1, of->batch);
    for (;;) {
        TRY(book_step(b, q, &row, f));
        if (!row)
            break;
        row_raw(q, &s);
        TRY(sound(b, p, &s, f));
        if (!belongs(&s, of))
            continue;
        struct raw_value out = {.file = file, .line = (long)s.line};
        memcpy(out.cell, s.cell, sizeof out.cell);
        TRY(sink(context, &out, f));
    }
done:
    if (q)
        sqlite3_reset(q);
    return rc;
}

enum status book_raw_of(struct book *b, int64_t batch, long line, book_raw_sink *sink,
                        void *context, struct fault *f)
{
    struct arena *a = arena_new();
    struct stored_raw of;
    struct pack p;
    const char *file = "";
    bool found = false;
    enum status rc = OK;
    pack_init(&p, a);
    TRY(find_line(b, a, &p, batch, line, &found, &of, f));
    if (!found)
        goto done;
    TRY(file_of(b, a, batch, &file, f));
    TRY(give_group(b, &p, &of, file, sink, context, f));
done:
    arena_free(a);
    return rc;
}

enum status book_raw_last(struct book *b, struct arena *a, const char *sheet, const char *point,
                          const char *run, const char *argument, const char **value,
                          const char **unit, struct fault *f)
{
    const char *const key[] = {sheet, point, run, argument};
    sqlite3_stmt *q = NULL;
    struct stored_raw s;
    struct pack p;
    bool row = false;
    enum status rc = OK;
    *value = *unit = NULL;
    TRY(book_statement(b, RAW_NEWEST, &q, f));
    for (int i = 0; i < (int)NELEM(key); i++)
        bind_text(q, i + 1, key[i] ? key[i] : "");
    TRY(book_step(b, q, &row, f));
    if (!row)
        goto done;
    row_raw(q, &s);
    pack_init(&p, a);
    TRY(sound(b, &p, &s, f));
    *value = arena_text(a, s.cell[RAW_VALUE]);
    *unit = arena_text(a, s.cell[RAW_UNIT]);
done:
    if (q)
        sqlite3_reset(q);
    return rc;
}
