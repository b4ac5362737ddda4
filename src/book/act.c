/* act: what people do to a book beside loading has this in common: a batch of its own, words that
 * are checked, and a head in the chain. */
#include "book/store.h"

#include <string.h>

#include "base/poison.h"

enum { ACT_TEXT_MOST = 4000 };

enum status act_text(const char *what, const char *text, bool needed, struct fault *f)
{
    struct text shown;
    if (!text || !*text)
        return needed ? fault_at(f, NULL, "give it in a few words", "%s is missing", what) : OK;
    if (strlen(text) > ACT_TEXT_MOST)
        return fault_at(f, NULL, "shorten it", "%s has more than %d bytes", what, ACT_TEXT_MOST);
    text_init(&shown, 4 * ACT_TEXT_MOST + 1);
    text_add_escaped(&shown, text); /* as it is, unless something of it draws on a terminal */
    enum status rc = OK;
    if (!text_equal(shown.at, text))
        rc = fault_at(f, NULL, "write it in one line of plain UTF-8",
                      "%s holds a line break or control character, '%.200s'", what, shown.at);
    text_free(&shown);
    return rc;
}

enum status act_unsound(struct book *b, const char *what, int64_t batch, struct fault *f)
{
    if (sqlite3_errcode(b->db) == SQLITE_NOMEM) /* a text could not be had */
        return book_fault(b, f);
    return book_damaged(b, f, "%s of batch %lld is not what was written", what, (long long)batch);
}

enum status act_begin(struct book *b, struct doing *d, const char *kind,
                      const struct author *author, struct fault *f)
{
    enum status rc = OK;
    *d = (struct doing){.arena = NULL};
    TRY(act_text("the name", author->who, true, f));
    d->arena = arena_new();
    pack_init(&d->pack, d->arena);
    d->content = digest_new(d->arena);
    d->none = digest_new(d->arena);
    TRY(book_begin(b, f));
    TRY(batch_add(b, &d->batch, kind, author, f));
    d->batch.reason = "";
done:
    return rc;
}

enum status act_add(struct book *b, struct doing *d, struct stored_act *s, struct fault *f)
{
    sqlite3_stmt *q = NULL;
    if (book_statement(b, ADD_ACT, &q, f) != OK)
        return FAULT;
    s->batch = d->batch.id;
    d->batch.act = s;
    pack_act(&d->pack, s);
    bind_int(q, 1, s->batch);
    bind_text(q, 2, s->reason);
    if (s->has_subject)
        bind_int(q, 3, s->subject);
    else
        bind_null(q, 3);
    bind_int(q, 4, s->readings);
    bind_int(q, 5, s->first_reading);
    bind_int(q, 6, pack_mark(&d->pack));
    return book_run(b, q, f);
}

enum status act_end(struct book *b, struct doing *d, struct fault *f)
{
    uint8_t content[DIGEST_BYTES], none[DIGEST_BYTES];
    enum status rc = OK;
    digest_end(d->content, content);
    digest_end(d->none, none);
    TRY(chain_add(b, &d->pack, d->content, &d->batch, content, none, f));
    TRY(book_commit(b, f));
done:
    return rc;
}

void act_drop(struct book *b, struct doing *d)
{
    if (!d->arena)
        return;
    book_rollback(b); /* what was committed stays */
    arena_free(d->arena);
    d->arena = NULL;
}
