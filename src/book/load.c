/* load: one file of readings into the book, in one transaction. A reading is put in as version 0
 * without asking whether its key is there; only where it is, the newest version is looked up and
 * compared. */
#include "book/codes.h"
#include "book/store.h"

#include <assert.h>
#include <string.h>

#include "base/poison.h"

struct load {
    struct arena *arena;
    const struct plant *plant;
    bool revise;
    struct stored_batch batch;
    struct book_counts counts;
    int64_t next_reading, next_aside, next_raw;
    struct digest *readings, *asides, *raws; /* running over all that was added */
    struct pack pack;
    int64_t *point, *parameter, *unit; /* codes by index; 0: not met yet */
    struct codes series, details;
    struct text key;                    /* of a series or a detail */
    struct text clash_text, clash_file; /* what the last contradiction met */
    uint8_t *confirmed; /* with revise: a bit for each older reading that a row of this file agreed
                           with */
};

enum { KEY_BYTES_MOST = 8 << 20 };

/* Three hundred years of a thousand readings an hour: more is a damaged number. */
#define READINGS_MOST INT64_C(3000000000)

/* ---- beginning and end ---- */

static enum status last_id(struct book *b, enum statement which, int64_t *out, struct fault *f)
{
    sqlite3_stmt *s = NULL;
    bool row;
    if (book_statement(b, which, &s, f) != OK || book_step(b, s, &row, f) != OK)
        return FAULT;
    *out = row ? sqlite3_column_int64(s, 0) : 0;
    sqlite3_reset(s);
    return OK;
}

static struct load *load_new(const struct plant *plant, bool revise)
{
    struct arena *a = arena_new();
    struct load *l = arena_alloc(a, sizeof *l);
    l->arena = a;
    l->plant = plant;
    l->revise = revise;
    l->readings = digest_new(a);
    l->asides = digest_new(a);
    l->raws = digest_new(a);
    l->point = arena_alloc(a, (plant->point_count + 1) * sizeof *l->point);
    l->parameter = arena_alloc(a, (plant->parameter_count + 1) * sizeof *l->parameter);
    l->unit = arena_alloc(a, (unit_count() + 1) * sizeof *l->unit);
    pack_init(&l->pack, a);
    codes_init(&l->series);
    codes_init(&l->details);
    text_init(&l->key, KEY_BYTES_MOST);
    text_init(&l->clash_text, KEY_BYTES_MOST);
    text_init(&l->clash_file, KEY_BYTES_MOST);
    return l;
}

void load_drop(struct book *b)
{
    struct load *l = b->load;
    if (!l)
        return;
    b->load = NULL;
    codes_free(&l->series);
    codes_free(&l->details);
    text_free(&l->key);
    text_free(&l->clash_text);
    text_free(&l->clash_file);
    arena_free(l->arena);
}

static enum status begin(struct book *b, const char *kind, const struct plant *plant,
                         const struct author *author, bool revise, struct fault *f)
{
    enum status rc = OK;
    assert(!b->load);
    TRY(book_begin(b, f));
    struct load *l = load_new(plant, revise);
    b->load = l;
    TRY(batch_add(b, &l->batch, kind, author, f));
    l->batch.at = arena_text(l->arena, author->when);
    l->batch.who = arena_text(l->arena, author->who);
    l->batch.is_load = true;
    TRY(last_id(b, LAST_READING, &l->next_reading, f));
    TRY(last_id(b, LAST_ASIDE, &l->next_aside, f));
    l->batch.first_reading = ++l->next_reading;
    l->batch.first_aside = ++l->next_aside;
    if (l->next_reading > READINGS_MOST) {
        rc = book_damaged(b, f, "it numbers a reading %lld", (long long)l->next_reading - 1);
        goto done;
    }
    if (revise)
        l->confirmed = arena_alloc(l->arena, (size_t)l->next_reading / 8 + 1);
done:
    if (rc != OK)
        book_rollback(b);
    return rc;
}

enum status book_load_begin(struct book *b, const struct plant *plant, const struct author *author,
                            bool revise, struct fault *f)
{
    return begin(b, "load", plant, author, revise, f);
}

enum status book_bench_begin(struct book *b, const struct plant *plant, const struct author *author,
                             bool revise, struct fault *f)
{
    if (begin(b, "bench", plant, author, revise, f) != OK)
        return FAULT;
    struct load *l = b->load;
    if (last_id(b, LAST_RAW, &l->next_raw, f) != OK) {
        book_rollback(b);
        return FAULT;
    }
    l->batch.is_bench = true;
    l->batch.first_raw = ++l->next_raw;
    return OK;
}

void book_load_abandon(struct book *b)
{
    if (b->load)
        book_rollback(b);
}

static enum status add_load(struct book *b, const struct stored_batch *s, struct fault *f)
{
    sqlite3_stmt *q = NULL;
    if (book_statement(b, ADD_LOAD, &q, f) != OK)
        return FAULT;
    bind_int(q, 1, s->id);
    bind_text(q, 2, s->file);
    bind_int(q, 3, s->bytes);
    bind_blob(q, 4, s->digest, sizeof s->digest);
    bind_text(q, 5, s->dialect);
    bind_text(q, 6, s->reason);
    bind_int(q, 7, s->rows);
    bind_int(q, 8, s->accepted);
    bind_int(q, 9, s->present);
    bind_int(q, 10, s->revised);
    bind_int(q, 11, s->aside);
    bind_int(q, 12, s->first_reading);
    bind_int(q, 13, s->first_aside);
    return book_run(b, q, f);
}

static enum status add_bench(struct book *b, struct load *l, struct fault *f)
{
    sqlite3_stmt *q = NULL;
    if (book_statement(b, ADD_BENCH, &q, f) != OK)
        return FAULT;
    l->batch.raw_values = l->next_raw - l->batch.first_raw;
    digest_end(l->raws, l->batch.raw_digest);
    bind_int(q, 1, l->batch.id);
    bind_int(q, 2, l->batch.raw_values);
    bind_int(q, 3, l->batch.first_raw);
    return book_run(b, q, f);
}

static void describe_batch(struct load *l, const struct book_source *source)
{
    struct stored_batch *s = &l->batch;
    s->file = source->file;
    s->bytes = source->bytes;
    memcpy(s->digest, source->digest, sizeof s->digest);
    s->dialect = source->dialect_told ? source->dialect_told : "";
    s->reason = source->reason ? source->reason : "";
    s->rows = l->counts.rows;
    s->accepted = l->counts.accepted;
    s->present = l->counts.present;
    s->revised = l->counts.revised;
    s->aside = l->counts.aside;
}

enum status book_load_end(struct book *b, const struct book_source *source, long rows,
                          struct book_counts *counts, int64_t *batch, struct fault *f)
{
    struct load *l = b->load;
    uint8_t readings[DIGEST_BYTES], asides[DIGEST_BYTES];
    enum status rc = OK;
    assert(l);
    struct book_counts *c = &l->counts;
    c->rows = rows;
    if (rows != c->accepted + c->present + c->revised + c->aside) {
        rc = fault_at(f, &(struct place){.file = source->file}, "please report it",
                      "%ld rows were read, but %ld ended in the book or aside; nothing was loaded",
                      rows, c->accepted + c->present + c->revised + c->aside);
        goto done;
    }
    describe_batch(l, source);
    TRY(add_load(b, &l->batch, f));
    if (l->batch.is_bench)
        TRY(add_bench(b, l, f));
    digest_end(l->readings, readings);
    digest_end(l->asides, asides);
    TRY(chain_add(b, &l->pack, l->readings, &l->batch, readings, asides, f));
    TRY(book_commit(b, f));
    *counts = *c;
    *batch = l->batch.id;
done:
    book_rollback(b); /* what was committed stays; the load is forgotten either way */
    return rc;
}

/* ---- codes ---- */

/* Runs a FIND_ statement, then where it found nothing an ADD_ one with the same things bound. */
static enum status find_or_add(struct book *b, enum statement find, enum statement add,
                               void bind(sqlite3_stmt *, const void *), const void *what,
                               int64_t *out, struct fault *f)
{
    sqlite3_stmt *s = NULL;
    bool row;
    enum status rc = OK;
    TRY(book_statement(b, find, &s, f));
    bind(s, what);
    TRY(book_step(b, s, &row, f));
    if (row) {
        *out = sqlite3_column_int64(s, 0);
        sqlite3_reset(s);
        goto done;
    }
    TRY(book_statement(b, add, &s, f));
    bind(s, what);
    TRY(book_run(b, s, f));
    *out = sqlite3_last_insert_rowid(b->db);
done:
    return rc;
}

static void bind_name(sqlite3_stmt *s, const void *what)
{
    bind_text(s, 1, what);
}

/* The code of a name, looked up where *out is still 0. */
static enum status name_code(struct book *b, enum statement find, enum statement add,
                             const char *name, int64_t *out, struct fault *f)
{
    return *out ? OK : find_or_add(b, find, add, bind_name, name, out, f);
}

struct series_key {
    int64_t point, parameter;
    const char *sample;
};

static void bind_series(sqlite3_stmt *s, const void *what)
{
    const struct series_key *key = what;
    bind_int(s, 1, key->point);
    bind_int(s, 2, key->parameter);
    bind_text(s, 3, key->sample);
}

static enum status series_code(struct book *b, struct load *l, const struct reading *r,
                               int64_t *out, struct fault *f)
{
    const uint16_t column[2] = {r->point, r->parameter};
    enum status rc = OK;
    text_clear(&l->key);
    text_add_bytes(&l->key, (const char *)column, sizeof column);
    text_add(&l->key, r->sample);
    *out = codes_find(&l->series, l->key.at, l->key.length);
    if (*out)
        return OK;
    TRY(name_code(b, FIND_POINT, ADD_POINT, l->plant->points[r->point].id, &l->point[r->point], f));
    TRY(name_code(b, FIND_PARAMETER, ADD_PARAMETER, l->plant->parameters[r->parameter].id,
                  &l->parameter[r->parameter], f));
    const struct series_key key = {l->point[r->point], l->parameter[r->parameter], r->sample};
    TRY(find_or_add(b, FIND_SERIES, ADD_SERIES, bind_series, &key, out, f));
    codes_add(&l->series, l->key.at, l->key.length, *out);
done:
    return rc;
}

/* What is bound of a row of table detail. */
struct detail_key {
    int64_t unit;
    char mdl[24], rl[24];
    const struct detail *detail;
};

static void bind_detail(sqlite3_stmt *s, const void *what)
{
    const struct detail_key *key = what;
    bind_int(s, 1, key->unit);
    bind_text(s, 2, key->mdl);
    bind_text(s, 3, key->rl);
    bind_text(s, 4, key->detail->method);
    bind_text(s, 5, key->detail->analyst);
    bind_text(s, 6, key->detail->collected_by);
    bind_text(s, 7, key->detail->analyzed);
    bind_text(s, 8, key->detail->note);
}

static void add_key(struct text *t, const void *bytes, size_t length)
{
    text_add_bytes(t, bytes, length);
}

/* All that tells two rows of table detail apart, as bytes. */
static void make_detail_key(struct text *t, const struct reading *r, const struct detail *d)
{
    const char *const part[] = {d->method, d->analyst, d->collected_by, d->analyzed, d->note};
    text_clear(t);
    add_key(t, &r->unit, sizeof r->unit);
    text_add_char(t, (char)(r->has_mdl + 2 * r->has_rl));
    if (r->has_mdl) {
        add_key(t, &r->mdl.coefficient, sizeof r->mdl.coefficient);
        add_key(t, &r->mdl.scale, sizeof r->mdl.scale);
    }
    if (r->has_rl) {
        add_key(t, &r->rl.coefficient, sizeof r->rl.coefficient);
        add_key(t, &r->rl.scale, sizeof r->rl.scale);
    }
    for (size_t i = 0; i < NELEM(part); i++)
        add_key(t, part[i], strlen(part[i]) + 1);
    assert(!t->overflowed); /* cells are far shorter; half a key would stand for another */
}

static enum status detail_code(struct book *b, struct load *l, const struct reading *r,
                               const struct common *c, int64_t *out, struct fault *f)
{
    struct detail_key key = {.detail = &c->detail};
    enum status rc = OK;
    make_detail_key(&l->key, r, &c->detail);
    *out = codes_find(&l->details, l->key.at, l->key.length);
    if (*out)
        return OK;
    TRY(name_code(b, FIND_UNIT, ADD_UNIT, c->unit_name, &l->unit[r->unit], f));
    key.unit = l->unit[r->unit];
    if (r->has_mdl)
        decimal_write(r->mdl, key.mdl);
    if (r->has_rl)
        decimal_write(r->rl, key.rl);
    TRY(find_or_add(b, FIND_DETAIL, ADD_DETAIL, bind_detail, &key, out, f));
    codes_add(&l->details, l->key.at, l->key.length, *out);
done:
    return rc;
}

/* ---- one reading ---- */

static void to_common(const struct reading *r, struct common *c)
{
    *c = (struct common){.unit_name = unit_at(r->unit)->name,
                         .unit = r->unit,
                         .has_mdl = r->has_mdl,
                         .has_rl = r->has_rl,
                         .mdl = r->mdl,
                         .rl = r->rl,
                         .detail = {"", "", "", "", ""}};
    if (r->detail)
        c->detail = *r->detail;
}

/* What the table will hold. `code` gives the no-data code room for a NUL. */
static void to_stored(const struct load *l, const struct reading *r, const struct common *c,
                      char code[2], struct stored *s)
{
    code[0] = r->code;
    code[1] = '\0';
    *s = (struct stored){
        .id = l->next_reading,
        .batch = l->batch.id,
        .line = r->line,
        .day = r->day,
        .minute = r->minute,
        .qualifier = r->qualifier,
        .has_number = r->qualifier < QUALIFIER_CODE,
        .coefficient = r->value.coefficient,
        .scale = r->value.scale,
        .code = r->qualifier == QUALIFIER_CODE ? code : NULL,
        .value = r->text,
        .point = l->plant->points[r->point].id,
        .parameter = l->plant->parameters[r->parameter].id,
        .sample = r->sample,
        .common = c,
    };
}

/* *added is false when that version of its key is there already. */
static enum status add_reading(struct book *b, struct load *l, struct stored *s, bool *added,
                               struct fault *f)
{
    sqlite3_stmt *q = NULL;
    if (book_statement(b, ADD_READING, &q, f) != OK)
        return FAULT;
    pack_reading(&l->pack, s);
    bind_int(q, 1, s->id);
    bind_int(q, 2, s->series);
    bind_int(q, 3, s->day);
    bind_int(q, 4, s->minute);
    bind_int(q, 5, s->version);
    bind_int(q, 6, s->batch);
    bind_int(q, 7, s->line);
    bind_int(q, 8, s->qualifier);
    bind_text(q, 9, s->code);
    bind_text(q, 10, s->value);
    if (s->has_number) {
        bind_int(q, 11, s->coefficient);
        bind_int(q, 12, s->scale);
    } else {
        bind_null(q, 11);
        bind_null(q, 12);
    }
    bind_int(q, 13, s->detail);
    bind_int(q, 14, pack_mark(&l->pack));
    if (book_run(b, q, f) != OK)
        return FAULT;
    *added = sqlite3_changes(b->db) == 1;
    if (*added) {
        digest_add(l->readings, l->pack.at, l->pack.length);
        l->next_reading++;
    }
    return OK;
}

/* ---- a reading whose key is taken ---- */

struct newest {
    int64_t id, version, batch, line, detail, qualifier;
    struct decimal number;
    char code;
};

static enum status find_newest(struct book *b, struct load *l, const struct stored *s,
                               struct newest *out, struct fault *f)
{
    sqlite3_stmt *q = NULL;
    bool row;
    if (book_statement(b, NEWEST_READING, &q, f) != OK)
        return FAULT;
    bind_int(q, 1, s->series);
    bind_int(q, 2, s->day);
    bind_int(q, 3, s->minute);
    if (book_step(b, q, &row, f) != OK)
        return FAULT;
    if (!row)
        return book_damaged(b, f, "an index leads nowhere");
    *out = (struct newest){
        .id = sqlite3_column_int64(q, 0),
        .version = sqlite3_column_int64(q, 4),
        .batch = sqlite3_column_int64(q, 5),
        .line = sqlite3_column_int64(q, 6),
        .qualifier = sqlite3_column_int64(q, 7),
        .code = column_text(q, 8)[0],
        .detail = sqlite3_column_int64(q, 12),
        .number = {.coefficient = sqlite3_column_int64(q, 10),
                   .scale = (int8_t)sqlite3_column_int(q, 11)},
    };
    text_clear(&l->clash_text);
    text_add(&l->clash_text,
             out->qualifier == QUALIFIER_WITHDRAWN ? "withdrawn" : column_text(q, 9));
    return book_step(b, q, &row, f);
}

/* The unit of a detail; NULL when this program does not know it. */
static enum status unit_of(struct book *b, int64_t detail, const struct unit **out, struct fault *f)
{
    sqlite3_stmt *q = NULL;
    bool row;
    *out = NULL;
    if (book_statement(b, DETAIL_AT, &q, f) != OK)
        return FAULT;
    bind_int(q, 1, detail);
    if (book_step(b, q, &row, f) != OK)
        return FAULT;
    if (row)
        *out = unit_find(column_text(q, 0));
    sqlite3_reset(q);
    return OK;
}

/* The same qualifier and, brought to one unit, exactly the same number: 30 and 30.0 are the same
 * value, and so are 1 MGD and 1000 kgal/d. */
static bool same_value(const struct reading *r, const struct newest *old,
                       const struct unit *old_unit)
{
    const struct unit *unit = unit_at(r->unit);
    if (r->qualifier != old->qualifier)
        return false;
    if (r->qualifier == QUALIFIER_CODE)
        return r->code == old->code;
    if (r->qualifier == QUALIFIER_WITHDRAWN)
        return true;
    if (unit == old_unit)
        return decimal_compare(r->value, old->number) == 0;
    if (!old_unit || !unit_same_kind(unit, old_unit))
        return false;
    struct arena *a = arena_new();
    const struct fraction *was = fraction_from_decimal(a, old->number),
                          *is = fraction_from_decimal(a, r->value);
    bool same = fraction_compare(unit_convert(a, was, old_unit, unit), is) == 0;
    arena_free(a);
    return same;
}

static enum status tell_clash(struct book *b, struct load *l, const struct newest *old,
                              const struct unit *unit, const struct reading *r,
                              struct book_clash *clash, struct fault *f)
{
    sqlite3_stmt *q = NULL;
    bool row;
    text_clear(&l->clash_file);
    if (old->batch == l->batch.id) {
        text_add(&l->clash_file, r->file ? r->file : ""); /* its own file */
    } else {
        if (book_statement(b, FILE_OF_BATCH, &q, f) != OK)
            return FAULT;
        bind_int(q, 1, old->batch);
        if (book_step(b, q, &row, f) != OK)
            return FAULT;
        text_add(&l->clash_file, row ? column_text(q, 0) : "");
        sqlite3_reset(q);
    }
    *clash = (struct book_clash){
        .text = l->clash_text.at, .file = l->clash_file.at, .line = (long)old->line};
    snprintf(clash->unit, sizeof clash->unit, "%s", unit ? unit->name : "");
    return OK;
}

/* Whether a row of this very file has spoken for the value that stands: then another row of the
 * file that says otherwise is no correction, but one more contradiction. */
static bool spoken_for(const struct load *l, const struct newest *old)
{
    if (old->batch == l->batch.id)
        return true;
    return l->confirmed && l->confirmed[old->id / 8] >> old->id % 8 & 1;
}

static void confirm(struct load *l, const struct newest *old)
{
    if (l->confirmed && old->id < l->batch.first_reading)
        l->confirmed[old->id / 8] |= (uint8_t)(1U << old->id % 8);
}

static enum status add_revision(struct book *b, struct load *l, const struct newest *old,
                                struct stored *s, struct fault *f)
{
    sqlite3_stmt *q = NULL;
    bool added = false;
    enum status rc = OK;
    s->version = old->version + 1;
    TRY(add_reading(b, l, s, &added, f));
    if (!added)
        return book_damaged(b, f, "an index leads nowhere");
    TRY(book_statement(b, ADD_REVISION, &q, f));
    bind_int(q, 1, s->id);
    bind_int(q, 2, old->id);
    bind_int(q, 3, s->day);
    TRY(book_run(b, q, f));
done:
    return rc;
}

static enum status settle(struct book *b, struct load *l, const struct reading *r, struct stored *s,
                          enum book_outcome *outcome, struct book_clash *clash, struct fault *f)
{
    struct newest old = {0};
    const struct unit *unit = NULL;
    enum status rc = OK;

    TRY(find_newest(b, l, s, &old, f));
    TRY(unit_of(b, old.detail, &unit, f));
    bool gone = old.qualifier == QUALIFIER_WITHDRAWN && r->qualifier != QUALIFIER_WITHDRAWN;
    *outcome = BOOK_CONTRADICTS;
    if (same_value(r, &old, unit))
        *outcome = BOOK_PRESENT;
    else if (gone)
        *outcome = BOOK_ACCEPTED; /* nothing in force is contradicted */
    else if (l->revise && !spoken_for(l, &old))
        *outcome = BOOK_REVISED;
    if (*outcome == BOOK_ACCEPTED || *outcome == BOOK_REVISED)
        rc = add_revision(b, l, &old, s, f);
    else if (*outcome == BOOK_CONTRADICTS)
        rc = tell_clash(b, l, &old, unit, r, clash, f);
    else
        confirm(l, &old);
done:
    return rc;
}

enum status book_load_reading(struct book *b, const struct reading *r, enum book_outcome *outcome,
                              struct book_clash *clash, struct fault *f)
{
    struct load *l = b->load;
    struct common common;
    struct stored s;
    char code[2];
    bool added = false;
    enum status rc = OK;

    assert(l && r->point < l->plant->point_count && r->parameter < l->plant->parameter_count);
    to_common(r, &common);
    to_stored(l, r, &common, code, &s);
    TRY(series_code(b, l, r, &s.series, f));
    TRY(detail_code(b, l, r, &common, &s.detail, f));
    TRY(add_reading(b, l, &s, &added, f));
    *outcome = BOOK_ACCEPTED;
    if (!added)
        TRY(settle(b, l, r, &s, outcome, clash, f));
    l->counts.accepted += *outcome == BOOK_ACCEPTED;
    l->counts.present += *outcome == BOOK_PRESENT;
    l->counts.revised += *outcome == BOOK_REVISED;
done:
    return rc;
}

/* ---- one row set aside ---- */

enum status book_load_aside(struct book *b, const struct row_text *row, enum reason reason,
                            const char *explanation, struct fault *f)
{
    struct load *l = b->load;
    sqlite3_stmt *q = NULL;
    day_t day = 0;
    assert(l && reason < REASON_COUNT);
    struct stored_aside s = {.id = l->next_aside,
                             .batch = l->batch.id,
                             .line = row->line,
                             .column = row->column,
                             .raw = row->raw ? row->raw : "",
                             .reason = reason_words[reason],
                             .explanation = explanation ? explanation : ""};
    for (size_t i = 0; i < LONG_COLUMNS; i++)
        s.cell[i] = row->cell[i] ? row->cell[i] : "";
    s.has_day = day_parse(s.cell[LONG_DATE], &day);
    s.day = s.has_day ? day : 0;
    if (book_statement(b, ADD_ASIDE, &q, f) != OK)
        return FAULT;
    pack_aside(&l->pack, &s);
    bind_int(q, 1, s.id);
    bind_int(q, 2, s.batch);
    bind_int(q, 3, s.line);
    bind_int(q, 4, s.column);
    if (s.has_day)
        bind_int(q, 5, s.day);
    else
        bind_null(q, 5);
    for (int i = 0; i < LONG_COLUMNS; i++)
        bind_text(q, 6 + i, s.cell[i]);
    bind_text(q, 20, s.raw);
    bind_text(q, 21, s.reason);
    bind_text(q, 22, s.explanation);
    bind_int(q, 23, pack_mark(&l->pack));
    if (book_run(b, q, f) != OK)
        return FAULT;
    digest_add(l->asides, l->pack.at, l->pack.length);
    l->next_aside++;
    l->counts.aside++;
    return OK;
}

/* ---- one raw value of a bench sheet ---- */

enum status book_load_raw(struct book *b, const struct raw_value *raw, struct fault *f)
{
    struct load *l = b->load;
    sqlite3_stmt *q = NULL;
    assert(l && l->batch.is_bench);
    struct stored_raw s = {.id = l->next_raw, .batch = l->batch.id, .line = raw->line};
    if (book_statement(b, ADD_RAW, &q, f) != OK)
        return FAULT;
    bind_int(q, 1, s.id);
    bind_int(q, 2, s.batch);
    bind_int(q, 3, s.line);
    for (int i = 0; i < RAW_COLUMNS; i++) {
        s.cell[i] = raw->cell[i] ? raw->cell[i] : "";
        bind_text(q, 4 + i, s.cell[i]);
    }
    pack_raw(&l->pack, &s);
    bind_int(q, 4 + RAW_COLUMNS, pack_mark(&l->pack));
    if (book_run(b, q, f) != OK)
        return FAULT;
    digest_add(l->raws, l->pack.at, l->pack.length);
    l->next_raw++;
    return OK;
}

/* ---- files known already ---- */

enum status book_known(struct book *b, struct arena *a, const uint8_t digest[DIGEST_BYTES],
                       bool *known, int64_t *batch, const char **file, const char **when,
                       struct book_counts *counts, struct fault *f)
{
    sqlite3_stmt *q = NULL;
    bool row;
    enum status rc = OK;
    TRY(book_statement(b, KNOWN_LOAD, &q, f));
    bind_blob(q, 1, digest, DIGEST_BYTES);
    TRY(book_step(b, q, known, f));
    if (!*known)
        goto done;
    *batch = sqlite3_column_int64(q, 0);
    *file = arena_text(a, column_text(q, 1));
    *when = arena_text(a, column_text(q, 2));
    *counts = (struct book_counts){sqlite3_column_int64(q, 3), sqlite3_column_int64(q, 4),
                                   sqlite3_column_int64(q, 5), sqlite3_column_int64(q, 6),
                                   sqlite3_column_int64(q, 7)};
    rc = book_step(b, q, &row, f);
done:
    return rc;
}
