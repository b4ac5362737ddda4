/* amend: one reading corrected, and a whole batch taken back. Both make new versions of readings;
 * the old ones stay. */
#include "book/loading.h"

#include <string.h>

#include "base/poison.h"

/* ---- what both share ---- */

static enum status begin(struct book *b, const char *kind, const struct plant *plant,
                         const char *reason, const struct author *author, struct fault *f)
{
    enum status rc = OK;
    TRY(act_text("the reason", reason, true, f));
    TRY(act_text("the name", author->who, true, f));
    TRY(loading_begin(b, kind, plant, author, false, f));
    b->load->batch.is_load = false;
    b->load->batch.reason = "";
done:
    return rc;
}

/* The act's own row and its head, once its readings stand. */
static enum status end(struct book *b, struct stored_act *s, struct fault *f)
{
    struct load *l = b->load;
    struct doing d = {.arena = l->arena, .pack = l->pack, .batch = l->batch};
    enum status rc = OK;
    d.content = l->readings;
    d.none = l->asides;
    s->first_reading = l->batch.first_reading;
    s->readings = l->next_reading - l->batch.first_reading;
    TRY(act_add(b, &d, s, f));
    rc = act_end(b, &d, f);
done:
    return rc;
}

/* ---- one reading ---- */

static enum status find(struct book *b, enum statement which, const char *name, int64_t *out,
                        struct fault *f)
{
    sqlite3_stmt *q = NULL;
    bool row;
    if (book_statement(b, which, &q, f) != OK)
        return FAULT;
    bind_text(q, 1, name);
    if (book_step(b, q, &row, f) != OK)
        return FAULT;
    *out = row ? sqlite3_column_int64(q, 0) : 0;
    sqlite3_reset(q);
    return OK;
}

/* 0: there is none; no name is added for the asking. */
static enum status find_series(struct book *b, const struct plant *plant, const struct reading *r,
                               int64_t *out, struct fault *f)
{
    int64_t point, parameter;
    sqlite3_stmt *q = NULL;
    bool row;
    enum status rc = OK;
    TRY(find(b, FIND_POINT, plant->points[r->point].id, &point, f));
    TRY(find(b, FIND_PARAMETER, plant->parameters[r->parameter].id, &parameter, f));
    TRY(book_statement(b, FIND_SERIES, &q, f));
    bind_int(q, 1, point);
    bind_int(q, 2, parameter);
    bind_text(q, 3, r->sample ? r->sample : "");
    TRY(book_step(b, q, &row, f));
    *out = row ? sqlite3_column_int64(q, 0) : 0;
    sqlite3_reset(q);
done:
    return rc;
}

/* The version in force of a series at a reading's day and minute, in the arena. */
static enum status newest_of(struct book *b, struct arena *a, const struct plant *plant,
                             int64_t series, const struct reading *r, bool *found,
                             struct reading *out, struct fault *f)
{
    struct names *n = arena_alloc(a, sizeof *n);
    sqlite3_stmt *q = NULL;
    struct stored row;
    struct pack p;
    enum status rc = OK;
    pack_init(&p, a);
    TRY(names_begin(b, n, a, plant, false, f));
    TRY(book_statement(b, NEWEST_READING, &q, f));
    bind_int(q, 1, series);
    bind_int(q, 2, r->day);
    bind_int(q, 3, r->minute);
    TRY(book_step(b, q, found, f));
    if (!*found)
        goto done;
    TRY(row_read(b, n, q, &row, f));
    TRY(row_reading(b, n, &p, &row, out, f));
    out->text = arena_text(a, out->text);
done:
    if (q)
        sqlite3_reset(q);
    names_end(n);
    return rc;
}

/* "EFF BOD5 on 2025-03-05 at 08:15, sample 'b'" */
static const char *told(struct arena *a, const struct plant *plant, const struct reading *r)
{
    char date[11], time[6];
    bool sampled = r->sample && *r->sample;
    day_write(r->day, date);
    minute_write(r->minute, time);
    return arena_print(a, "%s %s on %s%s%s%s%s%s", plant->points[r->point].id,
                       plant->parameters[r->parameter].id, date, *time ? " at " : "", time,
                       sampled ? ", sample '" : "", sampled ? r->sample : "", sampled ? "'" : "");
}

/* The new version in full: what the correction does not say is as it was. */
static struct reading corrected(const struct reading *r, const struct reading *old)
{
    struct reading out = *r;
    bool gone = r->qualifier == QUALIFIER_WITHDRAWN;
    out.sample = r->sample ? r->sample : "";
    out.line = 0;
    if (gone) {
        out.text = "withdrawn";
        out.code = '\0';
        out.unit = old->unit;
    }
    if (gone || !r->detail)
        out.detail = old->detail;
    if (gone || (!r->has_mdl && !r->has_rl && r->unit == old->unit)) {
        out.has_mdl = old->has_mdl;
        out.has_rl = old->has_rl;
        out.mdl = old->mdl;
        out.rl = old->rl;
    }
    return out;
}

static enum status refuse_value(struct arena *a, const struct plant *plant, const struct reading *r,
                                const struct reading *old, const struct newest *is, struct fault *f)
{
    const struct unit *unit = unit_at(r->unit), *own = plant->parameters[r->parameter].unit;
    const char *what = told(a, plant, r);
    if (act_text("the value", r->text, true, f) != OK)
        return FAULT;
    if (!unit_same_kind(unit, own))
        return fault_at(f, NULL, "use a unit of the parameter's kind",
                        "%s is in %s, which '%s' does not convert to", what, own->name, unit->name);
    if (!loading_same(r, is, unit_at(old->unit)))
        return OK;
    if (r->qualifier == QUALIFIER_WITHDRAWN)
        return fault_at(f, NULL, NULL, "%s is withdrawn already", what);
    return fault_at(f, NULL, NULL, "%s is '%s' %s already; nothing was changed", what, old->text,
                    unit_at(old->unit)->name);
}

static enum status add_version(struct book *b, const struct reading *r, int64_t series,
                               const struct newest *is, struct fault *f)
{
    struct load *l = b->load;
    struct common common;
    struct stored s;
    char code[2];
    enum status rc = OK;
    loading_common(r, &common);
    loading_stored(l, r, &common, code, &s);
    s.series = series;
    TRY(loading_detail(b, l, r, &common, &s.detail, f));
    rc = loading_revision(b, l, is, &s, f);
done:
    return rc;
}

enum status book_amend(struct book *b, struct arena *a, const struct plant *plant,
                       const struct reading *r, const char *reason, const struct author *author,
                       struct reading *old, int64_t *batch, struct fault *f)
{
    struct stored_act act = {.reason = reason};
    int64_t series = 0;
    bool found = false;
    enum status rc = OK;
    TRY(begin(b, "amend", plant, reason, author, f));
    TRY(find_series(b, plant, r, &series, f));
    if (series)
        TRY(newest_of(b, a, plant, series, r, &found, old, f));
    if (!found) {
        rc = fault_at(f, NULL, "see what there is with 'weirbook day DATE'",
                      "there is no reading of %s", told(a, plant, r));
        goto done;
    }
    const struct reading new = corrected(r, old);
    const struct newest is = {.id = old->id,
                              .version = old->version,
                              .qualifier = old->qualifier,
                              .number = old->value,
                              .code = old->code};
    TRY(refuse_value(a, plant, &new, old, &is, f));
    TRY(add_version(b, &new, series, &is, f));
    *batch = b->load->batch.id;
    TRY(end(b, &act, f));
done:
    book_rollback(b); /* what was committed stays */
    return rc;
}

/* ---- a whole batch ---- */

struct withdrawing {
    struct book *book;
    struct names names;
    int64_t batch; /* that is taken back */
    int64_t first, count;
    struct book_withdrawn out;
};

static enum status refuse_batch(struct withdrawing *w, struct fault *f)
{
    static const char see[] = "see 'weirbook history --batches'";
    struct book *b = w->book;
    sqlite3_stmt *q = NULL;
    bool row;
    enum status rc = OK;
    TRY(book_statement(b, TO_WITHDRAW, &q, f));
    bind_int(q, 1, w->batch);
    TRY(book_step(b, q, &row, f));
    if (!row || w->batch == b->load->batch.id) /* which this act is */
        rc = fault_at(f, NULL, see, "there is no batch %lld", (long long)w->batch);
    else if (sqlite3_column_type(q, 1) == SQLITE_NULL)
        rc = fault_at(f, NULL, see, "batch %lld is no load or bench sheet (%s)",
                      (long long)w->batch, column_text(q, 0));
    else if (sqlite3_column_type(q, 3) != SQLITE_NULL)
        rc = fault_at(f, NULL, NULL, "batch %lld was taken back already (batch %lld)",
                      (long long)w->batch, (long long)sqlite3_column_int64(q, 3));
    w->count = sqlite3_column_int64(q, 1);
    w->first = sqlite3_column_int64(q, 2);
done:
    if (q)
        sqlite3_reset(q);
    return rc;
}

enum { AT_KIND = 14, AT_TAKEN }; /* columns of VERSIONS behind READING_COLUMNS */

/* Goes down the versions of a reading's key. The newest decides; one that an earlier taking back
 * made stands for the version it restored. *mine: that is the reading `x`; then `s` is the version
 * to be restored, where *restored, and its texts live until the statement is reset. */
static enum status walk_versions(struct withdrawing *w, const struct stored *x, sqlite3_stmt *q,
                                 struct newest *newest, bool *mine, struct stored *s,
                                 bool *restored, struct fault *f)
{
    bool row, settled = false;
    for (bool first = true;; first = false) {
        if (book_step(w->book, q, &row, f) != OK)
            return FAULT;
        if (!row)
            return OK;
        if (row_read(w->book, &w->names, q, s, f) != OK)
            return FAULT;
        if (first)
            *newest = (struct newest){.id = s->id, .version = s->version};
        bool made = text_equal(column_text(q, AT_KIND), "withdraw");
        bool taken = sqlite3_column_type(q, AT_TAKEN) != SQLITE_NULL;
        if (made || (taken && !first))
            continue;
        if (!settled) {
            settled = true;
            *mine = s->id == x->id;
            if (!*mine)
                return OK;
        } else if (s->batch != w->batch) {
            *restored = s->qualifier != QUALIFIER_WITHDRAWN;
            return row_sound(&w->book->load->pack, s) ? OK : row_unsound(w->book, &w->names, s, f);
        }
    }
}

static enum status restore(struct withdrawing *w, const struct newest *newest, struct stored *s,
                           struct fault *f)
{
    struct load *l = w->book->load;
    s->id = l->next_reading;
    s->batch = l->batch.id;
    s->line = 0;
    /* Looked up anew: a pass drops what it had. */
    if (names_common(w->book, &w->names, s->detail, &s->common, f) != OK)
        return FAULT;
    return loading_revision(w->book, l, newest, s, f);
}

static enum status take_back(struct withdrawing *w, const struct stored *x, struct fault *f)
{
    sqlite3_stmt *q = NULL;
    struct newest newest = {0};
    struct stored s;
    bool mine = false, restored = false;
    enum status rc = OK;
    TRY(book_statement(w->book, VERSIONS, &q, f));
    bind_int(q, 1, x->series);
    bind_int(q, 2, x->day);
    bind_int(q, 3, x->minute);
    TRY(walk_versions(w, x, q, &newest, &mine, &s, &restored, f));
    w->out.left += !mine;
    if (!mine)
        goto done;
    if (!restored) {
        s = *x;
        s.qualifier = QUALIFIER_WITHDRAWN;
        s.code = NULL;
        s.value = "withdrawn";
        s.has_number = false;
    }
    w->out.restored += restored;
    w->out.taken_back += !restored;
    rc = restore(w, &newest, &s, f);
done:
    if (q)
        sqlite3_reset(q);
    return rc;
}

static enum status take_back_all(struct withdrawing *w, struct fault *f)
{
    sqlite3_stmt *q = NULL;
    struct stored x;
    bool row = false;
    enum status rc = OK;
    TRY(book_statement(w->book, CHECK_READINGS, &q, f));
    bind_int(q, 1, w->first);
    bind_int(q, 2, w->first + w->count - 1);
    for (;;) {
        TRY(book_step(w->book, q, &row, f));
        if (!row)
            break;
        TRY(row_read(w->book, &w->names, q, &x, f));
        if (!row_sound(&w->book->load->pack, &x)) {
            rc = row_unsound(w->book, &w->names, &x, f);
            goto done;
        }
        TRY(take_back(w, &x, f));
    }
done:
    if (q)
        sqlite3_reset(q);
    return rc;
}

enum status book_withdraw(struct book *b, const struct plant *plant, int64_t batch,
                          const char *reason, const struct author *author,
                          struct book_withdrawn *out, int64_t *act, struct fault *f)
{
    struct stored_act s = {.reason = reason, .has_subject = true, .subject = batch};
    struct arena *a = arena_new();
    struct withdrawing *w = arena_alloc(a, sizeof *w);
    enum status rc = OK;
    *w = (struct withdrawing){.book = b, .batch = batch};
    TRY(begin(b, "withdraw", plant, reason, author, f));
    TRY(refuse_batch(w, f));
    TRY(names_begin(b, &w->names, a, NULL, true, f));
    TRY(take_back_all(w, f));
    *act = b->load->batch.id;
    TRY(end(b, &s, f));
    *out = w->out;
done:
    book_rollback(b); /* what was committed stays */
    names_end(&w->names);
    arena_free(a);
    return rc;
}
