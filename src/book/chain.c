/* chain: batches, and the head that each leaves: a hash of all that came with it and of the head
 * before. */
#include "book/store.h"

#include <string.h>

#include "base/poison.h"

enum status batch_add(struct book *b, struct stored_batch *s, const char *kind,
                      const struct author *author, struct fault *f)
{
    sqlite3_stmt *q = NULL;
    bool row;
    enum status rc = OK;
    TRY(book_statement(b, LAST_BATCH, &q, f));
    TRY(book_step(b, q, &row, f));
    *s = (struct stored_batch){
        .id = sqlite3_column_int64(q, 0) + 1, .kind = kind, .at = author->when, .who = author->who};
    TRY(book_statement(b, ADD_BATCH, &q, f));
    bind_int(q, 1, s->id);
    bind_text(q, 2, kind);
    bind_text(q, 3, author->when);
    bind_text(q, 4, author->who);
    TRY(book_run(b, q, f));
done:
    return rc;
}

static enum status last_head(struct book *b, int64_t as_of, uint8_t head[DIGEST_BYTES],
                             struct fault *f)
{
    sqlite3_stmt *q = NULL;
    bool row;
    memset(head, 0, DIGEST_BYTES);
    if (book_statement(b, LAST_HEAD, &q, f) != OK)
        return FAULT;
    bind_int(q, 1, as_of);
    if (book_step(b, q, &row, f) != OK)
        return FAULT;
    bool good = !row || column_digest(q, 0, head);
    sqlite3_reset(q);
    return good ? OK : book_damaged(b, f, "the newest head of its chain is not one");
}

enum status chain_add(struct book *b, struct pack *p, struct digest *d,
                      const struct stored_batch *s, const uint8_t content[DIGEST_BYTES],
                      const uint8_t asides[DIGEST_BYTES], struct fault *f)
{
    sqlite3_stmt *q = NULL;
    uint8_t previous[DIGEST_BYTES], head[DIGEST_BYTES];
    enum status rc = OK;
    TRY(last_head(b, INT64_MAX, previous, f));
    pack_head(p, d, s, previous, content, asides, head);
    TRY(book_statement(b, ADD_CHAIN, &q, f));
    bind_int(q, 1, s->id);
    bind_blob(q, 2, previous, sizeof previous);
    bind_blob(q, 3, head, sizeof head);
    TRY(book_run(b, q, f));
done:
    return rc;
}

enum status book_head(struct book *b, char out[2 * DIGEST_BYTES + 1], struct fault *f)
{
    uint8_t head[DIGEST_BYTES];
    if (last_head(b, b->as_of, head, f) != OK)
        return FAULT;
    digest_write(head, out);
    return OK;
}

enum status book_batches(struct book *b, book_batch_sink *sink, void *context, struct fault *f)
{
    sqlite3_stmt *q = NULL;
    bool row = false;
    enum status rc = OK;
    TRY(book_statement(b, BATCHES, &q, f));
    bind_int(q, 1, b->as_of);
    for (;;) {
        TRY(book_step(b, q, &row, f));
        if (!row)
            break;
        struct book_batch out = {
            .batch = sqlite3_column_int64(q, 0),
            .kind = column_text(q, 1),
            .when = column_text(q, 2),
            .who = column_text(q, 3),
            .file = column_text(q, 4),
            .reason = column_text(q, 5),
            .counts = {sqlite3_column_int64(q, 6), sqlite3_column_int64(q, 7),
                       sqlite3_column_int64(q, 8), sqlite3_column_int64(q, 9),
                       sqlite3_column_int64(q, 10)},
        };
        uint8_t head[DIGEST_BYTES];
        if (column_digest(q, 11, head))
            digest_write(head, out.head);
        TRY(sink(context, &out, f));
    }
done:
    if (q)
        sqlite3_reset(q);
    return rc;
}
