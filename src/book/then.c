/* then: the book as it stood after a batch, and which batch that was. */
#include "book/store.h"

#include <assert.h>
#include <string.h>

#include "base/poison.h"

static enum status no_batch(struct book *b, int64_t batch, struct fault *f)
{
    sqlite3_stmt *q = NULL;
    bool row;
    if (book_statement(b, LAST_BATCH, &q, f) != OK || book_step(b, q, &row, f) != OK)
        return FAULT;
    int64_t last = row ? sqlite3_column_int64(q, 0) : 0;
    sqlite3_reset(q);
    if (batch >= 1 && batch <= last)
        return OK;
    return fault_at(f, NULL, "see 'weirbook history --batches'",
                    "there is no batch %lld; '%s' has %lld", (long long)batch, b->path,
                    (long long)last);
}

enum status book_as_of(struct book *b, int64_t batch, struct fault *f)
{
    assert(b->mode == BOOK_READ);
    if (batch != 0 && no_batch(b, batch, f) != OK)
        return FAULT;
    b->as_of = batch == 0 ? INT64_MAX : batch;
    return OK;
}

/* "2025-04-01T23:59:59Z": such moments compare as texts. */
static bool is_moment(const char *s)
{
    static const char form[] = "0000-00-00T00:00:00Z";
    if (strlen(s) != sizeof form - 1)
        return false;
    for (size_t i = 0; form[i]; i++)
        if (form[i] == '0' ? s[i] < '0' || s[i] > '9' : s[i] != form[i])
            return false;
    return true;
}

enum status book_batch_at(struct book *b, const char *when, int64_t *batch, bool *odd,
                          struct fault *f)
{
    sqlite3_stmt *q = NULL;
    bool row;
    enum status rc = OK;
    if (!is_moment(when))
        return fault_at(f, NULL, "write it as 2025-04-01T23:59:59Z", "cannot read the moment '%s'",
                        when);
    TRY(book_statement(b, BATCH_AT, &q, f));
    bind_text(q, 1, when);
    TRY(book_step(b, q, &row, f));
    *batch = sqlite3_column_int64(q, 0);
    *odd = sqlite3_column_int(q, 1) != 0;
done:
    if (q)
        sqlite3_reset(q);
    return rc;
}

static int digit_of(char c)
{
    if (c >= '0' && c <= '9')
        return c - '0';
    if (c >= 'a' && c <= 'f')
        return c - 'a' + 10;
    return c >= 'A' && c <= 'F' ? c - 'A' + 10 : -1;
}

enum status book_has_head(struct book *b, const char *head, int64_t *batch, struct fault *f)
{
    uint8_t wanted[DIGEST_BYTES];
    sqlite3_stmt *q = NULL;
    bool row, good = strlen(head) == sizeof wanted * 2;
    enum status rc = OK;
    for (size_t i = 0; good && i < sizeof wanted; i++) {
        int high = digit_of(head[2 * i]), low = digit_of(head[2 * i + 1]);
        good = high >= 0 && low >= 0;
        wanted[i] = (uint8_t)(good ? high * 16 + low : 0);
    }
    if (!good)
        return fault_at(f, NULL, "copy it whole: 64 digits and letters from a to f",
                        "'%s' is no head of a book", head);
    TRY(book_statement(b, HAS_HEAD, &q, f));
    bind_blob(q, 1, wanted, sizeof wanted);
    TRY(book_step(b, q, &row, f));
    *batch = row ? sqlite3_column_int64(q, 0) : 0;
done:
    if (q)
        sqlite3_reset(q);
    return rc;
}
