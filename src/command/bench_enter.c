/* Raw values read, worked, and entered into the book: one way for files and for what was typed. */
#include "command/bench.h"

#include "intake/intake.h"

#include <string.h>

#include "base/poison.h"

const char *const bench_state_words[BENCH_STATES] = {
    [STATE_WORKED] = "not entered", [STATE_ACCEPTED] = "accepted", [STATE_PRESENT] = "present",
    [STATE_REVISED] = "revised",    [STATE_ASIDE] = "set aside",   [STATE_RECORD] = "record",
};

/* ---- reading and working ---- */

static bool any_failed(const struct bench_outcome *o)
{
    for (size_t i = 0; i < o->checks; i++)
        if (!o->check[i].passed)
            return true;
    return false;
}

/* A sheet that was named is the only one the file may hold: what is left out in silence is lost. */
static enum status check_sheet(const struct bench *b, const struct raw_value *raw, size_t count,
                               struct fault *f)
{
    for (size_t i = 0; b->sheet && i < count; i++)
        if (strcmp(raw[i].cell[RAW_SHEET], b->sheet) != 0) {
            const struct place where = {.file = raw[i].file, .line = raw[i].line};
            return fault_at(f, &where, "leave the sheet's name out to take all sheets of the file",
                            "the row is of sheet '%s', not of '%s'", raw[i].cell[RAW_SHEET],
                            b->sheet);
        }
    return OK;
}

/* A record tells its day by the first of its raw values. */
static void date_record(const struct bench_results *r, struct bench_outcome *o)
{
    for (size_t i = 0; o->kind == BENCH_RECORD && i < r->raws; i++)
        if (r->raw[i].line == o->row.line) {
            o->row.cell[LONG_DATE] = r->raw[i].cell[RAW_DATE];
            o->row.cell[LONG_TIME] = r->raw[i].cell[RAW_TIME];
            return;
        }
}

enum status sheets_read(const struct bench *b, const char *path, const char *name,
                        struct bench_results *out, struct fault *f)
{
    struct arena *a = b->session->arena;
    struct intake_summary summary = {0};
    struct bench_outcome *outcome = NULL;
    *out = (struct bench_results){.name = name};
    if (intake_raw(a, path, &out->raw, &out->raws, &summary, f) != OK ||
        check_sheet(b, out->raw, out->raws, f) != OK)
        return FAULT;
    for (size_t i = 0; i < out->raws; i++)
        out->raw[i].file = name;
    out->bytes = summary.bytes;
    out->dialect_told = summary.dialect_told;
    memcpy(out->digest, summary.digest, sizeof out->digest);
    bench_work(a, b->plant, out->raw, out->raws, clock_today(), &outcome, &out->results);
    out->result = arena_alloc(a, (out->results + 1) * sizeof *out->result);
    for (size_t i = 0; i < out->results; i++)
        date_record(out, &outcome[i]);
    for (size_t i = 0; i < out->results; i++)
        out->result[i] = (struct bench_result){
            .outcome = &outcome[i],
            .failed = any_failed(&outcome[i]),
            .state = outcome[i].kind == BENCH_RECORD ? STATE_RECORD : STATE_WORKED};
    return OK;
}

/* ---- into the book ---- */

/* The reading as the row it would have been, for the rows set aside. */
static struct row_text row_of(const struct bench *b, const struct reading *r)
{
    char date[11], time[6];
    struct row_text row = {.file = r->file, .line = r->line, .raw = ""};
    day_write(r->day, date);
    minute_write(r->minute, time);
    for (size_t i = 0; i < LONG_COLUMNS; i++)
        row.cell[i] = "";
    row.cell[LONG_DATE] = arena_text(b->session->arena, date);
    row.cell[LONG_TIME] = arena_text(b->session->arena, time);
    row.cell[LONG_POINT] = b->plant->points[r->point].id;
    row.cell[LONG_PARAMETER] = b->plant->parameters[r->parameter].id;
    row.cell[LONG_VALUE] = r->text;
    row.cell[LONG_UNIT] = unit_at(r->unit)->name;
    row.cell[LONG_SAMPLE] = r->sample ? r->sample : "";
    if (r->detail) {
        row.cell[LONG_METHOD] = r->detail->method;
        row.cell[LONG_ANALYST] = r->detail->analyst;
        row.cell[LONG_NOTE] = r->detail->note;
    }
    return row;
}

static enum status enter_reading(const struct bench *b, struct bench_results *r,
                                 struct bench_result *result, struct fault *f)
{
    struct arena *a = b->session->arena;
    const struct reading *reading = &result->outcome->reading;
    enum book_outcome outcome = BOOK_ACCEPTED;
    struct book_clash clash = {0};
    if (book_load_reading(b->session->book, reading, &outcome, &clash, f) != OK)
        return FAULT;
    if (outcome == BOOK_CONTRADICTS) {
        result->state = STATE_ASIDE;
        result->clash = arena_print(a, "the book holds '%s' %s (%s:%ld), this sheet says '%s' %s",
                                    clash.text, clash.unit, clash.file, clash.line, reading->text,
                                    unit_at(reading->unit)->name);
        r->counts.aside++;
        const struct row_text row = row_of(b, reading);
        return book_load_aside(b->session->book, &row, REASON_CONTRADICTS, result->clash, f);
    }
    r->counts.accepted += outcome == BOOK_ACCEPTED;
    r->counts.present += outcome == BOOK_PRESENT;
    r->counts.revised += outcome == BOOK_REVISED;
    result->state = outcome == BOOK_ACCEPTED  ? STATE_ACCEPTED
                    : outcome == BOOK_PRESENT ? STATE_PRESENT
                                              : STATE_REVISED;
    return OK;
}

static enum status enter_rows(const struct bench *b, struct bench_results *r, struct fault *f)
{
    struct book *book = b->session->book;
    r->counts = (struct book_counts){0};
    for (size_t i = 0; i < r->raws; i++)
        if (book_load_raw(book, &r->raw[i], f) != OK)
            return FAULT;
    for (size_t i = 0; i < r->results; i++) {
        struct bench_result *result = &r->result[i];
        const struct bench_outcome *o = result->outcome;
        if (o->kind == BENCH_RECORD)
            continue;
        r->counts.rows++;
        if (o->kind == BENCH_READING) {
            if (enter_reading(b, r, result, f) != OK)
                return FAULT;
            continue;
        }
        result->state = STATE_ASIDE;
        r->counts.aside++;
        if (book_load_aside(book, &o->row, o->reason, o->explanation, f) != OK)
            return FAULT;
    }
    return OK;
}

/* Commits, or takes all of it back where nothing is to change. */
static enum status end(const struct bench *b, struct bench_results *r, bool known,
                       const char *known_told, struct fault *f)
{
    const struct bench_options *o = b->options;
    int64_t batch = 0;
    if (o->dry_run || (known && r->counts.accepted == 0 && r->counts.revised == 0)) {
        book_load_abandon(b->session->book);
        r->told = known ? known_told : NULL;
        return OK;
    }
    struct book_source source = {.file = r->name,
                                 .bytes = r->bytes,
                                 .dialect_told = r->dialect_told,
                                 .reason = o->reason ? o->reason : ""};
    memcpy(source.digest, r->digest, sizeof source.digest);
    if (book_load_end(b->session->book, &source, r->counts.rows, &r->counts, &batch, f) != OK)
        return FAULT;
    r->told = arena_print(b->session->arena, "%zu raw values kept; batch %lld", r->raws,
                          (long long)batch);
    return OK;
}

enum status sheets_enter(const struct bench *b, struct bench_results *r, struct fault *f)
{
    struct session *s = b->session;
    struct author author = {0};
    bool known = false;
    int64_t batch = 0;
    const char *file = "", *when = "", *told = NULL;
    struct book_counts before = {0};
    if (book_known(s->book, s->arena, r->digest, &known, &batch, &file, &when, &before, f) != OK ||
        session_author(s, b->options->by, &author, f) != OK ||
        book_bench_begin(s->book, b->plant, &author, b->options->revise, f) != OK)
        return FAULT;
    if (known)
        told = arena_print(
            s->arena, "the same file was entered on %.10s as %s (batch %lld); nothing was changed",
            when, file, (long long)batch);
    if (enter_rows(b, r, f) == OK && end(b, r, known, told, f) == OK)
        return OK;
    book_load_abandon(s->book);
    return FAULT;
}
