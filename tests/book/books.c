/* books: making, loading, reading and damaging books for tests. */
#include "book/books.h"
#include "book/store.h"
#include "plant/describe.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

const struct author tester = {"tester", "2025-04-01T06:10:00Z"};

/* ---- the plant ---- */

struct plant_draft *draft_with(struct arena *a, enum plant_file file, const char *rows)
{
    struct plant_draft *d = plant_draft_new(a);
    add_rows(d, PLANT_PARAMETERS, true, 2,
             "FLOW,Flow,MGD,3,mean,arithmetic,50050,0,1000,,,\n"
             "BOD5,Biochemical oxygen demand,mg/L,1,mean,arithmetic,00310,0,20000,,2,\n"
             "TSS,Total suspended solids,mg/L,1,mean,arithmetic,00530,0,100000,,,\n"
             "ECOLI,E. coli,MPN/100mL,0,geometric,geometric,51040,0,,,1,");
    add_rows(d, PLANT_FIELDS, false, 2, "name,Marrow Bend\npermit,XX0000000\nunits,us");
    add_rows(d, PLANT_POINTS, false, 2,
             "INF,Raw influent,influent,\nEFF,Final effluent,effluent,001");
    add_rows(d, PLANT_LIMITS, false, 2,
             "001,EFF,BOD5,concentration,monthly-average,max,30.0,mg/L\n"
             "001,EFF,TSS,concentration,weekly-average,max,45,mg/L");
    add_rows(d, PLANT_METERS, false, 2, "INF,FLOW,totalizer,1000000,,,");
    if (rows)
        add_rows(d, file, false, 10, rows);
    return d;
}

struct shelf *shelf_new(void)
{
    struct arena *a = arena_new();
    struct shelf *s = arena_alloc(a, sizeof *s);
    const char *top = getenv("TMPDIR");
    s->arena = a;
    snprintf(s->folder, sizeof s->folder, "%.40s/book-XXXXXX", top ? top : "/tmp");
    assert_non_null(mkdtemp(s->folder));
    snprintf(s->path, sizeof s->path, "%s/plant.book", s->folder);
    s->draft = draft_with(a, PLANT_FIELDS, NULL);
    good(s, plant_draft_finish(s->draft, &s->plant, &s->fault));
    return s;
}

void shelf_free(struct shelf *s)
{
    char command[128];
    assert_int_equal(chdir("/"), 0);
    snprintf(command, sizeof command, "rm -rf '%s'", s->folder);
    assert_int_equal(system(command), 0);
    arena_free(s->arena);
}

int shelf_setup(void **state)
{
    struct shelf *s = shelf_new();
    good(s, book_create(s->path, s->draft, &tester, &s->fault));
    *state = s;
    return 0;
}

int shelf_setup_format_1(void **state)
{
    *state = shelf_new();
    shelf_put_format_1(*state);
    return 0;
}

int shelf_teardown(void **state)
{
    shelf_free(*state);
    return 0;
}

void good(struct shelf *s, enum status rc)
{
    if (rc != OK)
        fail_msg("%s", s->fault.set ? s->fault.text : "a fault without words");
    assert_false(s->fault.set);
}

struct book *shelf_open(struct shelf *s, enum book_mode mode)
{
    struct book *b = NULL;
    good(s, book_open(&b, s->path, mode, &s->fault));
    return b;
}

/* ---- readings from text ---- */

/* Cuts a copy of a line at blanks. */
static size_t words_of(struct arena *a, const char *line, size_t length, char **word, size_t most)
{
    char *copy = arena_bytes(a, line, length), *rest = copy;
    size_t count = 0;
    while (rest && count < most) {
        word[count++] = rest;
        rest = strchr(rest, ' ');
        if (rest)
            *rest++ = '\0';
    }
    return count;
}

static struct decimal number_of(const char *text)
{
    struct decimal d = {0};
    assert_int_equal(decimal_parse(text, strlen(text), &d), DECIMAL_FINE);
    return d;
}

static void value_of(struct reading *r, const char *text)
{
    static const struct {
        const char *before;
        enum qualifier qualifier;
    } forms[] = {{"<", QUALIFIER_LESS},
                 {">", QUALIFIER_GREATER},
                 {"DNQ", QUALIFIER_DNQ},
                 {"E", QUALIFIER_ESTIMATED},
                 {"", QUALIFIER_PLAIN}};
    r->text = text;
    if (strcmp(text, "withdrawn") == 0) {
        r->qualifier = QUALIFIER_WITHDRAWN;
        return;
    }
    if (strncmp(text, "code:", 5) == 0) {
        r->qualifier = QUALIFIER_CODE;
        r->code = text[5];
        return;
    }
    for (size_t i = 0; i < NELEM(forms); i++) {
        size_t length = strlen(forms[i].before);
        if (strncmp(text, forms[i].before, length) != 0)
            continue;
        r->qualifier = (uint8_t)forms[i].qualifier;
        r->value = number_of(text + length);
        return;
    }
}

static void extra_of(struct arena *a, struct reading *r, const char *word)
{
    int minute;
    if (word[0] == '@') {
        assert_true(minute_parse(word + 1, &minute));
        r->minute = (int16_t)minute;
    } else if (word[0] == '#') {
        r->sample = word + 1;
    } else if (strncmp(word, "note:", 5) == 0) {
        struct detail *d = arena_alloc(a, sizeof *d);
        *d = (struct detail){"method 1", "analyst", "sampler", "2025-03-06", word + 5};
        r->detail = d;
    } else if (strncmp(word, "mdl:", 4) == 0) {
        r->has_mdl = true;
        r->mdl = number_of(word + 4);
    } else {
        assert_int_equal(strncmp(word, "rl:", 3), 0);
        r->has_rl = true;
        r->rl = number_of(word + 3);
    }
}

static struct reading reading_of(struct arena *a, const struct plant *p, char **word, size_t count)
{
    static const struct detail nothing = {"", "", "", "", ""};
    struct reading r = {.minute = -1, .sample = "", .detail = &nothing};
    assert_true(count >= 5);
    int point = plant_point(p, word[0]), parameter = plant_parameter(p, word[1]);
    assert_true(point >= 0 && parameter >= 0 && day_parse(word[2], &r.day));
    assert_non_null(unit_find(word[4]));
    r.point = (uint16_t)point;
    r.parameter = (uint16_t)parameter;
    r.unit = (uint16_t)unit_index(unit_find(word[4]));
    value_of(&r, word[3]);
    for (size_t i = 5; i < count; i++)
        extra_of(a, &r, word[i]);
    return r;
}

static enum reason reason_of(const char *word)
{
    for (size_t i = 0; i < REASON_COUNT; i++)
        if (text_equal(reason_words[i], word))
            return (enum reason)i;
    fail_msg("no reason '%s'", word);
    return REASON_COUNT;
}

static void add_aside(struct shelf *s, struct book *b, const struct row_text *from, char **word,
                      size_t count, enum reason reason, const char *why)
{
    struct row_text row = *from;
    for (size_t i = 0; i < LONG_COLUMNS; i++)
        row.cell[i] = i < count ? word[i] : "";
    row.raw = "";
    good(s, book_load_aside(b, &row, reason, why, &s->fault));
}

static void add_raw(struct shelf *s, struct book *b, const struct row_text *from, char **word,
                    size_t count)
{
    struct raw_value raw = {.file = from->file, .line = from->line};
    assert_int_equal(count, RAW_COLUMNS);
    for (size_t i = 0; i < RAW_COLUMNS; i++)
        raw.cell[i] = strcmp(word[i], "-") == 0 ? "" : word[i];
    good(s, book_load_raw(b, &raw, &s->fault));
}

static char add_line(struct shelf *s, struct book *b, const struct row_text *row, char **word,
                     size_t count)
{
    static const char letters[] = {[BOOK_ACCEPTED] = 'A',
                                   [BOOK_PRESENT] = 'P',
                                   [BOOK_REVISED] = 'R',
                                   [BOOK_CONTRADICTS] = 'C'};
    enum book_outcome outcome = BOOK_ACCEPTED;
    struct book_clash clash = {0};
    if (strncmp(word[0], "aside:", 6) == 0) {
        add_aside(s, b, row, word + 1, count - 1, reason_of(word[0] + 6), "because");
        return 'S';
    }
    if (strcmp(word[0], "raw:") == 0) {
        add_raw(s, b, row, word + 1, count - 1);
        return '\0';
    }
    struct reading r = reading_of(s->arena, s->plant, word, count);
    r.file = row->file;
    r.line = row->line;
    good(s, book_load_reading(b, &r, &outcome, &clash, &s->fault));
    if (outcome == BOOK_CONTRADICTS)
        add_aside(s, b, row, word, count, REASON_CONTRADICTS,
                  arena_print(s->arena, "holds '%s' %s (%s:%ld)", clash.text, clash.unit,
                              clash.file, clash.line));
    return letters[outcome];
}

const char *add_lines(struct shelf *s, struct book *b, const char *file, const char *lines)
{
    struct text out;
    struct row_text row = {.file = file, .line = 1};
    text_init(&out, 1 << 20);
    while (*lines) {
        char *word[LONG_COLUMNS + 1];
        size_t length = strcspn(lines, "\n");
        row.line++;
        size_t count = words_of(s->arena, lines, length, word, NELEM(word));
        char became = add_line(s, b, &row, word, count);
        if (became)
            text_add_char(&out, became);
        lines += length + (lines[length] == '\n');
    }
    const char *told = arena_text(s->arena, out.at);
    text_free(&out);
    return told;
}

enum status end_load(struct shelf *s, struct book *b, const char *file, const char *reason,
                     long rows)
{
    struct book_source source = {
        .file = file, .bytes = 100, .dialect_told = "long", .reason = reason ? reason : ""};
    snprintf((char *)source.digest, sizeof source.digest, "%s", file);
    return book_load_end(b, &source, rows, &s->counts, &s->batch, &s->fault);
}

const char *shelf_load(struct shelf *s, const char *file, const char *reason, const char *lines)
{
    struct book *b = shelf_open(s, BOOK_WRITE);
    good(s, book_load_begin(b, s->plant, &tester, reason != NULL, &s->fault));
    const char *told = add_lines(s, b, file, lines);
    good(s, end_load(s, b, file, reason, (long)strlen(told)));
    book_close(b);
    return told;
}

const char *shelf_bench(struct shelf *s, const char *file, const char *lines)
{
    struct book *b = shelf_open(s, BOOK_WRITE);
    good(s, book_bench_begin(b, s->plant, &tester, false, &s->fault));
    const char *told = add_lines(s, b, file, lines);
    good(s, end_load(s, b, file, NULL, (long)strlen(told)));
    book_close(b);
    return told;
}

/* ---- what a book says ---- */

static enum status tell_reading(void *context, const struct reading *r, struct fault *f)
{
    struct text *t = context;
    char date[11], time[6], value[24] = "", mdl[24] = "", rl[24] = "";
    (void)f;
    day_write(r->day, date);
    minute_write(r->minute, time);
    if (r->qualifier < QUALIFIER_CODE)
        decimal_write(r->value, value);
    if (r->has_mdl)
        decimal_write(r->mdl, mdl);
    if (r->has_rl)
        decimal_write(r->rl, rl);
    text_print(t, "%d %d %s %s #%s v%d '%s' %s%c %s %s mdl %s rl %s", r->point, r->parameter, date,
               time, r->sample, r->version, r->text, qualifier_words[r->qualifier],
               r->code ? r->code : ' ', value, unit_at(r->unit)->name, mdl, rl);
    text_print(t, " [%s|%s|%s|%s|%s] %s:%ld batch %d\n", r->detail->method, r->detail->analyst,
               r->detail->collected_by, r->detail->analyzed, r->detail->note, r->file, r->line,
               (int)r->batch);
    return OK;
}

static enum status tell_aside(void *context, const struct book_aside *a, struct fault *f)
{
    struct text *t = context;
    (void)f;
    text_print(t, "aside %s:%ld:%d %s (%s) batch %d:", a->row.file, a->row.line, a->row.column,
               a->reason, a->explanation, (int)a->batch);
    for (size_t i = 0; i < LONG_COLUMNS; i++)
        text_print(t, " %s", a->row.cell[i]);
    text_print(t, " %s\n", a->row.raw);
    return OK;
}

static enum status tell_revision(void *context, const struct book_revision *r, struct fault *f)
{
    struct text *t = context;
    char date[11];
    (void)f;
    day_write(r->day, date);
    text_print(t, "revised %s %d %d %d #%s '%s' to '%s' %s by %s at %s: %s, %s:%ld v%d\n", date,
               r->minute, r->point, r->parameter, r->sample, r->old_text, r->new_text, r->unit,
               r->who, r->when, r->reason, r->file, r->line, r->version);
    return OK;
}

static enum status tell_raw(void *context, const struct raw_value *r, struct fault *f)
{
    struct text *t = context;
    (void)f;
    text_print(t, "raw %s:%ld", r->file, r->line);
    for (size_t i = 0; i < RAW_COLUMNS; i++)
        text_print(t, " '%s'", r->cell[i]);
    text_add(t, "\n");
    return OK;
}

enum { BENCHES_MOST = 16, BENCH_LINES = 40 };

struct benches {
    struct text *told;
    int64_t batch[BENCHES_MOST];
    size_t count;
};

static enum status tell_batch(void *context, const struct book_batch *x, struct fault *f)
{
    struct benches *all = context;
    (void)f;
    text_print(all->told, "batch %d %s %s\n", (int)x->batch, x->kind, x->file);
    if (strcmp(x->kind, "bench") == 0 && all->count < BENCHES_MOST)
        all->batch[all->count++] = x->batch;
    return OK;
}

/* By every line of every bench sheet. */
static enum status tell_benches(struct book *b, struct text *t, struct fault *f)
{
    struct benches all = {.told = t};
    enum status rc = OK;
    TRY(book_batches(b, tell_batch, &all, f));
    for (size_t i = 0; i < all.count; i++)
        for (long line = 2; line < BENCH_LINES; line++)
            TRY(book_raw_of(b, all.batch[i], line, tell_raw, t, f));
done:
    return rc;
}

static enum status tell_all(struct shelf *s, struct book *b, struct text *t, struct fault *f)
{
    struct plant_draft *draft = NULL;
    struct plant *plant = NULL;
    enum status rc = OK;
    TRY(book_plant(b, s->arena, &draft, &plant, f));
    for (size_t i = 0; i < plant_draft_rows(draft); i++) {
        const struct plant_row *row = plant_draft_row(draft, i);
        text_print(t, "%s:%ld %d", row->name, row->line, row->builtin);
        for (size_t c = 0; c < plant_layout(row->file)->columns; c++)
            text_print(t, "|%s", row->cell[c] ? row->cell[c] : "-");
        text_add(t, "\n");
    }
    TRY(book_each(b, plant, DAY_NONE, DAY_NONE, tell_reading, t, f));
    TRY(book_asides(b, DAY_NONE, DAY_NONE, tell_aside, t, f));
    TRY(book_revisions(b, plant, DAY_NONE, DAY_NONE, tell_revision, t, f));
    TRY(tell_benches(b, t, f));
done:
    return rc;
}

const char *shelf_told(struct shelf *s, struct fault *f)
{
    struct book *b = NULL;
    struct text t;
    const char *told = NULL;
    text_init(&t, 8 << 20);
    fault_clear(f);
    if (book_open(&b, s->path, BOOK_READ, f) == OK && tell_all(s, b, &t, f) == OK)
        told = arena_text(s->arena, t.at);
    book_close(b);
    text_free(&t);
    return told;
}

static enum status tell_finding(void *context, const struct book_finding *x, struct fault *f)
{
    (void)f;
    if (!x->good)
        text_print(context, "%s %d %s:%ld: %s\n", x->what, (int)x->batch, x->file, x->line,
                   x->note);
    return OK;
}

const char *shelf_check(struct shelf *s)
{
    struct book *b = NULL;
    struct text t;
    struct fault f = {0};
    text_init(&t, 1 << 20);
    if (book_open(&b, s->path, BOOK_READ, &f) != OK || book_check(b, tell_finding, &t, &f) != OK)
        text_print(&t, "fault: %s\n", f.text);
    book_close(b);
    const char *told = arena_text(s->arena, t.at);
    text_free(&t);
    return told;
}

/* ---- files ---- */

uint8_t *file_bytes(struct arena *a, const char *path, size_t *length)
{
    FILE *in = fopen(path, "rb");
    assert_non_null(in);
    assert_int_equal(fseek(in, 0, SEEK_END), 0);
    long size = ftell(in);
    assert_true(size >= 0);
    rewind(in);
    uint8_t *bytes = arena_alloc(a, (size_t)size + 1);
    assert_int_equal(fread(bytes, 1, (size_t)size, in), size);
    fclose(in);
    *length = (size_t)size;
    return bytes;
}

void file_write(const char *path, const void *bytes, size_t length)
{
    FILE *out = fopen(path, "wb");
    assert_non_null(out);
    assert_int_equal(fwrite(bytes, 1, length, out), length);
    assert_int_equal(fclose(out), 0);
}

void same_file(const char *path, const uint8_t *bytes, size_t length)
{
    struct arena *a = arena_new();
    size_t now;
    const uint8_t *at = file_bytes(a, path, &now);
    assert_int_equal(now, length);
    assert_memory_equal(at, bytes, length);
    arena_free(a);
}

/* ---- behind the program's back ---- */

static void run(sqlite3 *db, const char *sql)
{
    char *why = NULL;
    if (sqlite3_exec(db, sql, NULL, NULL, &why) != SQLITE_OK)
        fail_msg("%s: %s", sql, why ? why : "?");
}

static sqlite3 *raw_open(struct shelf *s)
{
    sqlite3 *db = NULL;
    assert_int_equal(sqlite3_open(s->path, &db), SQLITE_OK);
    return db;
}

void shelf_put_format_1(struct shelf *s)
{
    const char *source = getenv("WEIRBOOK_SOURCE");
    size_t length;
    sqlite3 *db = NULL;
    if (!source)
        fail_msg("WEIRBOOK_SOURCE is to name the checkout");
    const uint8_t *rows =
        file_bytes(s->arena, arena_print(s->arena, "%s/tests/book/format-1.sql", source), &length);
    assert_int_equal(sqlite3_open(s->path, &db), SQLITE_OK);
    run(db, "PRAGMA page_size = 8192; PRAGMA synchronous = OFF");
    run(db, book_file("001-book.sql"));
    run(db, arena_bytes(s->arena, (const char *)rows, length));
    sqlite3_close(db);
}

void raw(struct shelf *s, const char *sql)
{
    sqlite3 *db = raw_open(s);
    run(db, sql);
    sqlite3_close(db);
}

static const char *first_text(struct shelf *s, sqlite3 *db, const char *sql, const char *bound)
{
    sqlite3_stmt *q = NULL;
    if (sqlite3_prepare_v2(db, sql, -1, &q, NULL) != SQLITE_OK)
        fail_msg("%s: %s", sql, sqlite3_errmsg(db));
    if (bound)
        sqlite3_bind_text(q, 1, bound, -1, SQLITE_STATIC);
    int code = sqlite3_step(q);
    const char *told = code == SQLITE_ROW ? (const char *)sqlite3_column_text(q, 0) : NULL;
    told = told ? arena_text(s->arena, told) : NULL;
    sqlite3_finalize(q);
    return told;
}

const char *raw_text(struct shelf *s, const char *sql)
{
    sqlite3 *db = raw_open(s);
    const char *told = first_text(s, db, sql, NULL);
    sqlite3_close(db);
    return told;
}

void tamper(struct shelf *s, const char *table, const char *sql)
{
    sqlite3 *db = raw_open(s);
    const char *name =
        first_text(s, db,
                   "SELECT group_concat('DROP TRIGGER ' || name || ';', ' ') FROM sqlite_schema "
                   "WHERE type = 'trigger' AND tbl_name = ?1",
                   table);
    const char *text = first_text(s, db,
                                  "SELECT group_concat(sql || ';', ' ') FROM sqlite_schema "
                                  "WHERE type = 'trigger' AND tbl_name = ?1",
                                  table);
    assert_non_null(name);
    run(db, name);
    run(db, sql);
    run(db, text);
    sqlite3_close(db);
}
