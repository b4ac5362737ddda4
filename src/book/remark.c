/* remark: remarks on days, points and limits, and answers to doubts: into the book and out of it,
 * each proved against its mark. */
#include "book/store.h"

#include <string.h>

#include "base/poison.h"

const char *const remark_kind_words[REMARK_KINDS] = {"cause", "remedy", "event"};

/* ---- in ---- */

static const char *plain(const char *s)
{
    return s ? s : "";
}

static enum status refuse_remark(const struct book_remark *r, struct fault *f)
{
    enum status rc = OK;
    TRY(act_text("the remark", r->text, true, f));
    TRY(act_text("the event", r->event, r->kind == REMARK_EVENT, f));
    TRY(act_text("the point", r->point, false, f));
    TRY(act_text("the parameter", r->parameter, false, f));
    TRY(act_text("the statistic", r->statistic, false, f));
    if (r->kind != REMARK_EVENT && *plain(r->event))
        return fault_at(f, NULL, "leave the event out", "a %s is no event",
                        remark_kind_words[r->kind]);
    if (r->from == DAY_NONE || r->to == DAY_NONE)
        return fault_at(f, NULL, "name its day, or the first and the last",
                        "the remark is of no day");
    if (r->from > r->to)
        return fault_at(f, NULL, "put the earlier day first", "the remark ends before it begins");
done:
    return rc;
}

static enum status add_remark(struct book *b, struct doing *d, struct stored_remark *s,
                              struct fault *f)
{
    const char *const place[] = {s->point, s->parameter, s->statistic, s->text};
    sqlite3_stmt *q = NULL;
    if (book_statement(b, ADD_REMARK, &q, f) != OK)
        return FAULT;
    pack_remark(&d->pack, s);
    bind_int(q, 1, s->batch);
    bind_text(q, 2, s->kind);
    bind_text(q, 3, s->event);
    bind_int(q, 4, s->first);
    bind_int(q, 5, s->last);
    for (int i = 0; i < (int)NELEM(place); i++)
        bind_text(q, 6 + i, place[i]);
    bind_int(q, 10, pack_mark(&d->pack));
    return book_run(b, q, f);
}

enum status book_remark_add(struct book *b, const struct book_remark *remark,
                            const struct author *author, int64_t *id, struct fault *f)
{
    struct doing d = {.arena = NULL};
    enum status rc = OK;
    TRY(refuse_remark(remark, f));
    TRY(act_begin(b, &d, "remark", author, f));
    struct stored_remark s = {
        .batch = d.batch.id,
        .first = remark->from,
        .last = remark->to,
        .kind = remark_kind_words[remark->kind],
        .event = plain(remark->event),
        .point = plain(remark->point),
        .parameter = plain(remark->parameter),
        .statistic = plain(remark->statistic),
        .text = remark->text,
    };
    d.batch.remark = &s;
    TRY(add_remark(b, &d, &s, f));
    TRY(act_end(b, &d, f));
    *id = d.batch.id;
done:
    act_drop(b, &d);
    return rc;
}

/* Whether it is a remark that stands. */
static enum status refuse_withdrawal(struct book *b, int64_t id, struct fault *f)
{
    sqlite3_stmt *q = NULL;
    bool row;
    if (book_statement(b, REMARK_AT, &q, f) != OK)
        return FAULT;
    bind_int(q, 1, id);
    if (book_step(b, q, &row, f) != OK)
        return FAULT;
    bool is_remark = row && text_equal(column_text(q, 0), "remark");
    bool gone = row && sqlite3_column_type(q, 1) != SQLITE_NULL;
    int64_t by = row ? sqlite3_column_int64(q, 1) : 0;
    sqlite3_reset(q);
    if (!is_remark)
        return fault_at(f, NULL, "see 'weirbook remark --list'", "there is no remark %lld",
                        (long long)id);
    if (gone)
        return fault_at(f, NULL, NULL, "remark %lld is withdrawn already (batch %lld)",
                        (long long)id, (long long)by);
    return OK;
}

enum status book_remark_withdraw(struct book *b, int64_t id, const char *reason,
                                 const struct author *author, struct fault *f)
{
    struct doing d = {.arena = NULL};
    enum status rc = OK;
    TRY(act_text("the reason", reason, true, f));
    TRY(act_begin(b, &d, "remark-withdraw", author, f));
    TRY(refuse_withdrawal(b, id, f));
    struct stored_act s = {.has_subject = true, .subject = id, .reason = reason};
    TRY(act_add(b, &d, &s, f));
    TRY(act_end(b, &d, f));
done:
    act_drop(b, &d);
    return rc;
}

enum status book_answer_add(struct book *b, const char *doubt, const char *reason,
                            const struct author *author, int64_t *batch, struct fault *f)
{
    struct doing d = {.arena = NULL};
    sqlite3_stmt *q = NULL;
    enum status rc = OK;
    TRY(act_text("the doubt", doubt, true, f));
    TRY(act_text("the reason", reason, true, f));
    TRY(act_begin(b, &d, "answer", author, f));
    const struct stored_answer s = {.batch = d.batch.id, .doubt = doubt, .reason = reason};
    d.batch.answer = &s;
    pack_answer(&d.pack, &s);
    TRY(book_statement(b, ADD_ANSWER, &q, f));
    bind_int(q, 1, s.batch);
    bind_text(q, 2, s.doubt);
    bind_text(q, 3, s.reason);
    bind_int(q, 4, pack_mark(&d.pack));
    TRY(book_run(b, q, f));
    TRY(act_end(b, &d, f));
    *batch = d.batch.id;
done:
    act_drop(b, &d);
    return rc;
}

/* ---- out ---- */

static bool kind_of(const char *word, enum remark_kind *out)
{
    for (enum remark_kind kind = 0; kind < REMARK_KINDS; kind++) {
        *out = kind;
        if (text_equal(word, remark_kind_words[kind]))
            return true;
    }
    return false;
}

static enum status give_remark(struct book *b, struct pack *p, sqlite3_stmt *q,
                               book_remark_sink *sink, void *context, struct fault *f)
{
    enum { AT_ACT = REMARK_CELLS, AT_WHO = AT_ACT + ACT_CELLS };
    struct stored_remark s;
    struct stored_act act;
    struct book_remark out = {.kind = REMARK_CAUSE};
    row_remark(q, 0, &s);
    row_act(q, AT_ACT, &act);
    bool withdrawn = act.batch > 0 && act.batch <= b->as_of;
    pack_remark(p, &s);
    if (pack_mark(p) != s.mark || !kind_of(s.kind, &out.kind))
        return act_unsound(b, "the remark", s.batch, f);
    pack_act(p, &act);
    if (withdrawn && pack_mark(p) != act.mark)
        return act_unsound(b, "the act", act.batch, f);
    out.id = s.batch;
    out.event = s.event;
    out.from = (day_t)s.first;
    out.to = (day_t)s.last;
    out.point = s.point;
    out.parameter = s.parameter;
    out.statistic = s.statistic;
    out.text = s.text;
    out.who = column_text(q, AT_WHO);
    out.when = column_text(q, AT_WHO + 1);
    out.withdrawn = withdrawn;
    out.withdrawn_why = withdrawn ? act.reason : "";
    return sink(context, &out, f);
}

enum status book_remarks(struct book *b, day_t first, day_t last, book_remark_sink *sink,
                         void *context, struct fault *f)
{
    struct arena *a = arena_new();
    sqlite3_stmt *q = NULL;
    struct pack p;
    bool row = false;
    enum status rc = OK;
    pack_init(&p, a);
    TRY(book_statement(b, REMARKS, &q, f));
    bind_int(q, 1, first == DAY_NONE ? INT32_MIN : first);
    bind_int(q, 2, last == DAY_NONE ? INT32_MAX : last);
    for (;;) {
        TRY(book_step(b, q, &row, f));
        if (!row)
            break;
        if (sqlite3_column_int64(q, 0) <= b->as_of)
            TRY(give_remark(b, &p, q, sink, context, f));
    }
done:
    if (q)
        sqlite3_reset(q);
    arena_free(a);
    return rc;
}

enum status book_answers(struct book *b, book_answer_sink *sink, void *context, struct fault *f)
{
    struct arena *a = arena_new();
    sqlite3_stmt *q = NULL;
    struct stored_answer s;
    struct pack p;
    bool row = false;
    enum status rc = OK;
    pack_init(&p, a);
    TRY(book_statement(b, ANSWERS, &q, f));
    for (;;) {
        TRY(book_step(b, q, &row, f));
        if (!row)
            break;
        row_answer(q, 0, &s);
        if (s.batch > b->as_of)
            continue;
        pack_answer(&p, &s);
        if (pack_mark(&p) != s.mark) {
            rc = act_unsound(b, "the answer", s.batch, f);
            goto done;
        }
        const struct book_answer out = {s.doubt, s.reason, column_text(q, ANSWER_CELLS),
                                        column_text(q, ANSWER_CELLS + 1), s.batch};
        TRY(sink(context, &out, f));
    }
done:
    if (q)
        sqlite3_reset(q);
    arena_free(a);
    return rc;
}
