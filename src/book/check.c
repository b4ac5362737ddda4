/* check: proving a book sound. SQLite proves its pages; the rest is walked batch by batch, every
 * reading, row set aside, raw value and row of a description against its mark, and every batch
 * against the chain. */
#include "book/store.h"

#include <stdlib.h>
#include <string.h>

#include "base/poison.h"

enum part { PAGES, KEYS, SCHEMA, CHAIN, BATCH, READING, ASIDE, RAW, DESCRIPTION, PARTS };
static const char *const part_words[PARTS] = {"pages",         "foreign keys", "schema",
                                              "chain",         "batch",        "reading",
                                              "row set aside", "raw value",    "description"};

/* More of one kind are counted, not told one by one. */
enum { TOLD_MOST = 20 };

#define GO_BACK "; go back to a sound copy"

struct check {
    struct book *book;
    book_finding_sink *sink;
    void *context;
    struct fault *fault;
    bool stopped; /* the check cannot go on: its fault stands */
    struct arena *arena;
    struct names names;
    struct pack pack;
    struct digest *content, *asides, *raws, *head;
    struct stored_batch batch;     /* the one that is walked */
    uint8_t running[DIGEST_BYTES]; /* the head so far */
    int64_t next_batch, next_reading, next_aside, next_raw;
    int64_t count[PARTS], bad[PARTS];
    int64_t newer;     /* readings that replaced one */
    int64_t rows_left; /* of the description that is walked */
};

/* ---- telling ---- */

static enum status hand_over(struct check *c, const struct book_finding *finding)
{
    if (c->sink(c->context, finding, c->fault) == OK)
        return OK;
    c->stopped = true;
    return FAULT;
}

static enum status tell(struct check *c, enum part part, int64_t batch, const char *file,
                        int64_t line, const char *note, ...) PRINTS(6, 7);

static enum status tell(struct check *c, enum part part, int64_t batch, const char *file,
                        int64_t line, const char *note, ...)
{
    char said[700];
    va_list ap;
    if (++c->bad[part] > TOLD_MOST)
        return OK;
    va_start(ap, note);
    vsnprintf(said, sizeof said, note, ap);
    va_end(ap);
    const struct book_finding finding = {.what = part_words[part],
                                         .batch = batch,
                                         .file = file ? file : "",
                                         .line = (long)line,
                                         .note = said};
    return hand_over(c, &finding);
}

/* A part that could not be walked to its end. What stems from the disk or from memory stops the
 * check; anything else is a finding. */
static enum status cannot_walk(struct check *c, enum part part, const struct fault *why)
{
    if (c->stopped)
        return FAULT;
    switch (c->book->last_code) {
    case SQLITE_IOERR:
    case SQLITE_NOMEM:
    case SQLITE_BUSY:
    case SQLITE_CANTOPEN:
        *c->fault = *why;
        return FAULT;
    default:
        return tell(c, part, 0, NULL, 0, "%s", why->text);
    }
}

static const char *escaped(struct check *c, const char *s)
{
    struct text t;
    text_init(&t, 200);
    text_add_escaped(&t, s ? s : "?");
    const char *out = arena_text(c->arena, t.at);
    text_free(&t);
    return out;
}

/* ---- what SQLite can prove ---- */

/* SQLite's check takes a page it could not read for a bad one. When it was for want of memory, or
 * the disk gave no answer, that says nothing of the book. */
static bool could_not_look(const char *said, int *code)
{
    static const char before[] = "error code=";
    const char *at = strstr(said, before);
    if (!at)
        return false;
    *code = (int)(strtol(at + sizeof before - 1, NULL, 10) & 0xff);
    return *code == SQLITE_NOMEM || *code == SQLITE_IOERR;
}

static enum status check_pages(struct check *c, struct fault *f)
{
    sqlite3_stmt *s = NULL;
    bool row;
    if (book_statement(c->book, CHECK_PAGES, &s, f) != OK)
        return FAULT;
    for (;;) {
        if (book_step(c->book, s, &row, f) != OK)
            return FAULT;
        if (!row)
            return OK;
        const char *said = column_text(s, 0);
        if (could_not_look(said, &c->book->last_code)) {
            fault_at(f, NULL, "see that the disk is well, and check again", "cannot check '%s': %s",
                     c->book->path, said);
            sqlite3_reset(s);
            return FAULT;
        }
        if (!text_equal(said, "ok") &&
            tell(c, PAGES, 0, NULL, 0, "%s" GO_BACK, escaped(c, said)) != OK)
            return FAULT;
    }
}

static enum status check_keys(struct check *c, struct fault *f)
{
    sqlite3_stmt *s = NULL;
    bool row;
    if (book_statement(c->book, CHECK_KEYS, &s, f) != OK)
        return FAULT;
    for (;;) {
        if (book_step(c->book, s, &row, f) != OK)
            return FAULT;
        if (!row)
            return OK;
        if (tell(c, KEYS, 0, NULL, 0,
                 "row %lld of table %s points to a row of %s that is not there" GO_BACK,
                 (long long)sqlite3_column_int64(s, 1), escaped(c, column_text(s, 0)),
                 escaped(c, column_text(s, 2))) != OK)
            return FAULT;
    }
}

/* ---- the schema ---- */

struct object {
    const char *type, *name, *table, *sql;
};

struct objects {
    struct object *at;
    size_t count, room;
};

static enum status read_objects(struct book *b, struct arena *a, struct objects *out,
                                struct fault *f)
{
    sqlite3_stmt *s = NULL;
    bool row;
    if (book_statement(b, CHECK_SCHEMA, &s, f) != OK)
        return FAULT;
    for (;;) {
        if (book_step(b, s, &row, f) != OK)
            return FAULT;
        if (!row)
            return OK;
        struct object *o = arena_push(a, &out->at, &out->count, &out->room, sizeof *o);
        *o = (struct object){arena_text(a, column_text(s, 0)), arena_text(a, column_text(s, 1)),
                             arena_text(a, column_text(s, 2)), arena_text(a, column_text(s, 3))};
    }
}

static const struct object *find_object(const struct objects *in, const struct object *o)
{
    for (size_t i = 0; i < in->count; i++)
        if (text_equal(in->at[i].type, o->type) && text_equal(in->at[i].name, o->name))
            return &in->at[i];
    return NULL;
}

static enum status compare_objects(struct check *c, const struct objects *want,
                                   const struct objects *have)
{
    for (size_t i = 0; i < want->count; i++) {
        const struct object *w = &want->at[i], *h = find_object(have, w);
        const char *how = !h ? "is missing" : "is not as weirbook made it";
        if (h && text_equal(h->sql, w->sql) && text_equal(h->table, w->table))
            continue;
        if (tell(c, SCHEMA, 0, NULL, 0, "%s %s %s" GO_BACK, w->type, w->name, how) != OK)
            return FAULT;
    }
    for (size_t i = 0; i < have->count; i++) {
        const struct object *h = &have->at[i];
        if (!find_object(want, h) &&
            tell(c, SCHEMA, 0, NULL, 0, "%s %s is not weirbook's; take it out if nobody needs it",
                 escaped(c, h->type), escaped(c, h->name)) != OK)
            return FAULT;
    }
    return OK;
}

/* What the compiled-in SQL makes of an empty book. */
static enum status wanted_objects(struct check *c, struct objects *out, struct fault *f)
{
    sqlite3 *db = NULL;
    int code = book_connect(":memory:", SQLITE_OPEN_READWRITE | SQLITE_OPEN_MEMORY, &db);
    struct book *b = book_on(db, "a new book", BOOK_WRITE);
    enum status rc = OK;
    if (code != SQLITE_OK)
        rc = book_fault(b, f);
    if (rc == OK)
        rc = book_migrate(b, f);
    if (rc == OK)
        rc = read_objects(b, c->arena, out, f);
    book_close(b);
    return rc;
}

static enum status check_words(struct check *c, struct fault *f)
{
    sqlite3_stmt *s = NULL;
    bool row;
    if (book_statement(c->book, CHECK_QUALIFIERS, &s, f) != OK)
        return FAULT;
    for (int i = 0;; i++) {
        if (book_step(c->book, s, &row, f) != OK)
            return FAULT;
        bool good = row && i < QUALIFIERS && sqlite3_column_int64(s, 0) == i &&
                    text_equal(column_text(s, 1), qualifier_words[i]);
        if (!row && i == QUALIFIERS)
            return OK;
        if (good)
            continue;
        sqlite3_reset(s);
        return tell(c, SCHEMA, 0, NULL, 0,
                    "the words of table qualifier are not weirbook's" GO_BACK);
    }
}

static enum status check_schema(struct check *c, struct fault *f)
{
    struct objects want = {0}, have = {0};
    if (wanted_objects(c, &want, f) != OK) { /* nothing the book could be blamed for */
        *c->fault = *f;
        c->stopped = true;
        return FAULT;
    }
    if (read_objects(c->book, c->arena, &have, f) != OK || compare_objects(c, &want, &have) != OK)
        return FAULT;
    return check_words(c, f);
}

/* ---- a load ---- */

static enum status tell_reading(struct check *c, const struct stored *s)
{
    char date[11] = "?";
    day_t least, most;
    if (day_from(1900, 1, 1, &least) && day_from(2199, 12, 31, &most) && s->day >= least &&
        s->day <= most)
        day_write((day_t)s->day, date);
    return tell(c, READING, c->batch.id, c->batch.file, s->line,
                "%s %s on %s, '%s' (reading %lld), is not what was loaded" GO_BACK,
                escaped(c, s->point), escaped(c, s->parameter), date, escaped(c, s->value),
                (long long)s->id);
}

static enum status walk_readings(struct check *c, int64_t first, int64_t count, struct fault *f)
{
    sqlite3_stmt *s = NULL;
    struct stored row;
    bool more;
    int64_t next = first;
    if (book_statement(c->book, CHECK_READINGS, &s, f) != OK)
        return FAULT;
    bind_int(s, 1, first);
    bind_int(s, 2, first + count - 1);
    for (;;) {
        if (book_step(c->book, s, &more, f) != OK)
            return FAULT;
        if (!more)
            break;
        if (row_read(c->book, &c->names, s, &row, f) != OK)
            return FAULT;
        bool sound = row_sound(&c->pack, &row);
        digest_add(c->content, c->pack.at, c->pack.length);
        c->count[READING]++;
        c->newer += row.version > 0;
        next++;
        if (!sound && tell_reading(c, &row) != OK)
            return FAULT;
    }
    if (next != first + count)
        return tell(c, READING, c->batch.id, c->batch.file, 0,
                    "%lld of its %lld readings are missing" GO_BACK,
                    (long long)(first + count - next), (long long)count);
    return OK;
}

static enum status walk_asides(struct check *c, int64_t first, int64_t count, struct fault *f)
{
    sqlite3_stmt *s = NULL;
    struct stored_aside row;
    bool more;
    int64_t next = first;
    if (book_statement(c->book, CHECK_ASIDES, &s, f) != OK)
        return FAULT;
    bind_int(s, 1, first);
    bind_int(s, 2, first + count - 1);
    for (;;) {
        if (book_step(c->book, s, &more, f) != OK)
            return FAULT;
        if (!more)
            break;
        row_aside(s, &row);
        pack_aside(&c->pack, &row);
        digest_add(c->asides, c->pack.at, c->pack.length);
        c->count[ASIDE]++;
        next++;
        if (pack_mark(&c->pack) != row.mark &&
            tell(c, ASIDE, c->batch.id, c->batch.file, row.line,
                 "row %lld set aside is not what was loaded" GO_BACK, (long long)row.id) != OK)
            return FAULT;
    }
    if (next != first + count)
        return tell(c, ASIDE, c->batch.id, c->batch.file, 0,
                    "%lld of its %lld rows set aside are missing" GO_BACK,
                    (long long)(first + count - next), (long long)count);
    return OK;
}

static enum status tell_raw(struct check *c, const struct stored_raw *s)
{
    return tell(c, RAW, c->batch.id, c->batch.file, s->line,
                "%s of sheet %s, '%s' (raw value %lld), is not what was loaded" GO_BACK,
                escaped(c, s->cell[RAW_ARGUMENT]), escaped(c, s->cell[RAW_SHEET]),
                escaped(c, s->cell[RAW_VALUE]), (long long)s->id);
}

static enum status walk_raws(struct check *c, int64_t first, int64_t count, struct fault *f)
{
    sqlite3_stmt *s = NULL;
    struct stored_raw row;
    bool more;
    int64_t next = first;
    if (book_statement(c->book, CHECK_RAW, &s, f) != OK)
        return FAULT;
    bind_int(s, 1, first);
    bind_int(s, 2, first + count - 1);
    for (;;) {
        if (book_step(c->book, s, &more, f) != OK)
            return FAULT;
        if (!more)
            break;
        row_raw(s, &row);
        pack_raw(&c->pack, &row);
        digest_add(c->raws, c->pack.at, c->pack.length);
        c->count[RAW]++;
        next++;
        if (pack_mark(&c->pack) != row.mark && tell_raw(c, &row) != OK)
            return FAULT;
    }
    if (next != first + count)
        return tell(c, RAW, c->batch.id, c->batch.file, 0,
                    "%lld of its %lld raw values are missing" GO_BACK,
                    (long long)(first + count - next), (long long)count);
    return OK;
}

/* Counts that cannot be are not followed: the batch itself is reported by its hash. */
static bool counts_can_be(const struct stored_batch *s)
{
    const int64_t most = INT64_C(1) << 40;
    return s->accepted >= 0 && s->accepted < most && s->revised >= 0 && s->revised < most &&
           s->aside >= 0 && s->aside < most && s->raw_values >= 0 && s->raw_values < most;
}

static enum status walk_load(struct check *c, struct fault *f)
{
    const struct stored_batch *s = &c->batch;
    if (!counts_can_be(s))
        return OK;
    int64_t readings = s->accepted + s->revised;
    if (walk_readings(c, c->next_reading, readings, f) != OK ||
        walk_asides(c, c->next_aside, s->aside, f) != OK ||
        walk_raws(c, c->next_raw, s->raw_values, f) != OK)
        return FAULT;
    c->next_reading += readings;
    c->next_raw += s->raw_values;
    c->next_aside += s->aside;
    return OK;
}

/* ---- a description ---- */

static enum status walk_row(void *context, const struct stored_row *row, struct fault *f)
{
    struct check *c = context;
    (void)f;
    pack_row(&c->pack, row);
    digest_add(c->content, c->pack.at, c->pack.length);
    c->count[DESCRIPTION]++;
    c->rows_left--;
    if (pack_mark(&c->pack) == row->mark)
        return OK;
    return tell(c, DESCRIPTION, c->batch.id, escaped(c, row->file), row->line,
                "this row of %s is not what was put in" GO_BACK, plant_layout(row->kind)->file);
}

static enum status walk_description(struct check *c, struct fault *f)
{
    c->rows_left = c->batch.rows;
    for (enum plant_file kind = 0; kind < PLANT_FILES; kind++)
        if (description_rows(c->book, c->batch.id, kind, walk_row, c, f) != OK)
            return FAULT;
    if (c->rows_left != 0)
        return tell(c, DESCRIPTION, c->batch.id, NULL, 0, "it should have %lld rows" GO_BACK,
                    (long long)c->batch.rows);
    return OK;
}

/* ---- the chain ---- */

/* Columns of CHECK_BATCHES. */
enum {
    AT_ID,
    AT_KIND,
    AT_AT,
    AT_WHO,
    AT_LOAD,
    AT_FILE,
    AT_BYTES,
    AT_DIGEST,
    AT_DIALECT,
    AT_REASON,
    AT_ROWS,
    AT_ACCEPTED,
    AT_PRESENT,
    AT_REVISED,
    AT_ASIDE,
    AT_FIRST_READING,
    AT_FIRST_ASIDE,
    AT_DESCRIPTION,
    AT_DESCRIPTION_REASON,
    AT_DESCRIPTION_ROWS,
    AT_BENCH,
    AT_RAW_VALUES,
    AT_FIRST_RAW,
    AT_PREVIOUS,
    AT_HEAD
};

static void read_batch(struct check *c, sqlite3_stmt *s)
{
    struct stored_batch *out = &c->batch;
    bool is_load = sqlite3_column_type(s, AT_LOAD) != SQLITE_NULL;
    *out = (struct stored_batch){
        .id = sqlite3_column_int64(s, AT_ID),
        .kind = column_text(s, AT_KIND),
        .at = column_text(s, AT_AT),
        .who = column_text(s, AT_WHO),
        .is_load = is_load,
        .is_description = sqlite3_column_type(s, AT_DESCRIPTION) != SQLITE_NULL,
        .file = column_text(s, AT_FILE),
        .bytes = sqlite3_column_int64(s, AT_BYTES),
        .dialect = column_text(s, AT_DIALECT),
        .reason = column_text(s, is_load ? AT_REASON : AT_DESCRIPTION_REASON),
        .rows = sqlite3_column_int64(s, is_load ? AT_ROWS : AT_DESCRIPTION_ROWS),
        .accepted = sqlite3_column_int64(s, AT_ACCEPTED),
        .present = sqlite3_column_int64(s, AT_PRESENT),
        .revised = sqlite3_column_int64(s, AT_REVISED),
        .aside = sqlite3_column_int64(s, AT_ASIDE),
        .first_reading = sqlite3_column_int64(s, AT_FIRST_READING),
        .first_aside = sqlite3_column_int64(s, AT_FIRST_ASIDE),
        .is_bench = sqlite3_column_type(s, AT_BENCH) != SQLITE_NULL,
        .raw_values = sqlite3_column_int64(s, AT_RAW_VALUES),
        .first_raw = sqlite3_column_int64(s, AT_FIRST_RAW),
    };
    (void)column_digest(s, AT_DIGEST,
                        out->digest); /* one that is none stays zero, and the head differs */
}

static enum status follow_chain(struct check *c, sqlite3_stmt *s)
{
    struct stored_batch *b = &c->batch;
    uint8_t previous[DIGEST_BYTES], stored[DIGEST_BYTES], head[DIGEST_BYTES], content[DIGEST_BYTES],
        asides[DIGEST_BYTES];
    digest_end(c->content, content);
    digest_end(c->asides, asides);
    digest_end(c->raws, b->raw_digest);
    if (!column_digest(s, AT_PREVIOUS, previous) || !column_digest(s, AT_HEAD, stored))
        return tell(c, CHAIN, b->id, b->file, 0, "it has no link in the chain" GO_BACK);
    if (memcmp(previous, c->running, DIGEST_BYTES) != 0 &&
        tell(c, CHAIN, b->id, b->file, 0, "it does not follow the head before it" GO_BACK) != OK)
        return FAULT;
    pack_head(&c->pack, c->head, b, previous, content, asides, head);
    memcpy(c->running, stored, DIGEST_BYTES); /* what comes after is judged by itself */
    if (memcmp(head, stored, DIGEST_BYTES) != 0)
        return tell(c, BATCH, b->id, b->file, 0,
                    "what stands in it is not what its hash was made of" GO_BACK);
    return OK;
}

static enum status walk_batch(struct check *c, sqlite3_stmt *s, struct fault *f)
{
    const struct stored_batch *b = &c->batch;
    read_batch(c, s);
    c->count[BATCH]++;
    if (b->id != c->next_batch &&
        tell(c, CHAIN, b->id, b->file, 0, "batch %lld should come here" GO_BACK,
             (long long)c->next_batch) != OK)
        return FAULT;
    c->next_batch = b->id + 1;
    bool told = b->is_load != b->is_description && b->is_bench == text_equal(b->kind, "bench");
    if (!told && tell(c, BATCH, b->id, b->file, 0, "nothing says what came with it" GO_BACK) != OK)
        return FAULT;
    if (b->is_load && walk_load(c, f) != OK)
        return FAULT;
    if (b->is_description && walk_description(c, f) != OK)
        return FAULT;
    return follow_chain(c, s);
}

/* Rows past those of the last batch. */
static enum status check_strays(struct check *c, enum statement last, enum part part, int64_t next,
                                struct fault *f)
{
    sqlite3_stmt *s = NULL;
    bool row;
    if (book_statement(c->book, last, &s, f) != OK || book_step(c->book, s, &row, f) != OK)
        return FAULT;
    int64_t id = row ? sqlite3_column_int64(s, 0) : 0;
    sqlite3_reset(s);
    if (id < next)
        return OK;
    return tell(c, part, 0, NULL, 0, "number %lld belongs to no batch" GO_BACK, (long long)id);
}

/* Every newer version is joined to the one before it, and nothing else is. */
static enum status check_revisions(struct check *c, struct fault *f)
{
    sqlite3_stmt *s = NULL;
    bool row;
    if (book_statement(c->book, CHECK_REVISIONS, &s, f) != OK ||
        book_step(c->book, s, &row, f) != OK)
        return FAULT;
    int64_t rows = sqlite3_column_int64(s, 0), joined = sqlite3_column_int64(s, 1);
    sqlite3_reset(s);
    if (rows == c->newer && joined == c->newer)
        return OK;
    return tell(
        c, READING, 0, NULL, 0,
        "of %lld newer versions %lld are joined to what they replaced, by %lld rows" GO_BACK,
        (long long)c->newer, (long long)joined, (long long)rows);
}

static enum status check_chain(struct check *c, struct fault *f)
{
    sqlite3_stmt *s = NULL;
    bool row = false;
    enum status rc = OK;
    c->next_batch = c->next_reading = c->next_aside = c->next_raw = 1;
    TRY(names_begin(c->book, &c->names, c->arena, NULL, true, f));
    TRY(book_statement(c->book, CHECK_BATCHES, &s, f));
    for (;;) {
        TRY(book_step(c->book, s, &row, f));
        if (!row)
            break;
        TRY(walk_batch(c, s, f));
    }
    TRY(check_revisions(c, f));
    TRY(check_strays(c, LAST_READING, READING, c->next_reading, f));
    TRY(check_strays(c, LAST_ASIDE, ASIDE, c->next_aside, f));
    TRY(check_strays(c, LAST_RAW, RAW, c->next_raw, f));
done:
    if (s)
        sqlite3_reset(s);
    return rc;
}

/* ---- all of it ---- */

static enum status sum_up(struct check *c)
{
    for (enum part part = 0; part < PARTS; part++) {
        char said[160];
        struct book_finding finding = {
            .what = part_words[part], .good = c->bad[part] == 0, .file = "", .note = said};
        static const char *const good[PARTS] = {
            [PAGES] = "SQLite finds every page, index and constraint in order",
            [KEYS] = "every reference leads somewhere",
            [SCHEMA] = "tables, views and triggers are as weirbook makes them",
            [CHAIN] = "every batch follows the one before it",
        };
        if (c->bad[part] > TOLD_MOST)
            snprintf(said, sizeof said, "%lld more like these",
                     (long long)c->bad[part] - TOLD_MOST);
        else if (c->bad[part] > 0)
            continue;
        else if (good[part])
            snprintf(said, sizeof said, "%s", good[part]);
        else
            snprintf(said, sizeof said, "%lld checked, all as they were written",
                     (long long)c->count[part]);
        if (hand_over(c, &finding) != OK)
            return FAULT;
    }
    return OK;
}

struct part_check {
    enum part part;
    enum status (*run)(struct check *c, struct fault *f);
};

static struct check *check_new(struct arena *a, struct book *b, book_finding_sink *sink,
                               void *context, struct fault *f)
{
    struct check *c = arena_alloc(a, sizeof *c);
    *c = (struct check){.book = b, .sink = sink, .context = context, .fault = f, .arena = a};
    c->content = digest_new(a);
    c->asides = digest_new(a);
    c->raws = digest_new(a);
    c->head = digest_new(a);
    pack_init(&c->pack, a);
    return c;
}

static enum status run_parts(struct check *c, const struct part_check *parts, size_t count)
{
    for (size_t i = 0; i < count; i++) {
        struct fault why = {.set = false};
        c->book->last_code = SQLITE_OK;
        if (parts[i].run(c, &why) != OK && cannot_walk(c, parts[i].part, &why) != OK)
            return FAULT;
    }
    return OK;
}

enum status book_check(struct book *b, book_finding_sink *sink, void *context, struct fault *f)
{
    static const struct part_check parts[] = {
        {PAGES, check_pages}, {KEYS, check_keys}, {SCHEMA, check_schema}, {CHAIN, check_chain}};
    struct arena *a = arena_new();
    struct check *c = check_new(a, b, sink, context, f);
    enum status rc = OK;
    TRY(run_parts(c, parts, NELEM(parts)));
    TRY(sum_up(c));
done:
    names_end(&c->names);
    arena_free(a);
    return rc;
}

static enum status first_finding(void *context, const struct book_finding *x, struct fault *f)
{
    const struct book *b = context;
    const char *more = strstr(x->note, GO_BACK); /* the fault says so itself */
    int length = more ? (int)(more - x->note) : (int)strlen(x->note);
    if (x->batch == 0)
        return book_damaged(b, f, "%s: %.*s", x->what, length, x->note);
    return book_damaged(b, f, "%s, batch %lld, %s:%ld: %.*s", x->what, (long long)x->batch, x->file,
                        x->line, length, x->note);
}

enum status book_proved(struct book *b, struct fault *f)
{
    static const struct part_check parts[] = {
        {PAGES, check_pages}, {KEYS, check_keys}, {CHAIN, check_chain}};
    struct arena *a = arena_new();
    struct check *c = check_new(a, b, first_finding, b, f);
    enum status rc = run_parts(c, parts, NELEM(parts));
    names_end(&c->names);
    arena_free(a);
    return rc;
}
