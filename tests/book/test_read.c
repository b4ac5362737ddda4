/* Reading: frames, spans, order, what was set aside and what was revised, and that every question
 * goes by index. */
#include "book/books.h"
#include "book/store.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#define THIS ((struct shelf *)*state)

static day_t day(const char *iso)
{
    day_t d = 0;
    assert_true(day_parse(iso, &d));
    return d;
}

static int point(struct shelf *s, const char *id)
{
    return plant_point(s->plant, id);
}

static int parameter(struct shelf *s, const char *id)
{
    return plant_parameter(s->plant, id);
}

static struct frame *filled(struct shelf *s, const struct frame_span *spans, size_t count,
                            const char *first, const char *last)
{
    struct book *b = shelf_open(s, BOOK_READ);
    struct frame *frame = frame_new(s->arena, s->plant, day(first), day(last));
    good(s, book_fill(b, s->arena, s->plant, spans, count, frame, &s->fault));
    book_close(b);
    frame_close(frame);
    return frame;
}

/* The texts of a day's readings, parted by blanks. */
static const char *texts(struct shelf *s, const struct frame *f, const char *p, const char *q,
                         const char *on)
{
    struct text t;
    size_t count;
    const struct reading *const *r =
        frame_readings(f, point(s, p), parameter(s, q), day(on), &count);
    text_init(&t, 4096);
    for (size_t i = 0; i < count; i++)
        text_print(&t, "%s%s", i ? " " : "", r[i]->text);
    const char *told = arena_text(s->arena, t.at);
    text_free(&t);
    return told;
}

static void a_frame_holds_the_newest_versions_of_what_was_asked_for(void **state)
{
    struct shelf *s = THIS;
    shelf_load(
        s, "a.csv", NULL,
        "EFF BOD5 2025-02-28 1 mg/L\nEFF BOD5 2025-03-01 2 mg/L\nEFF BOD5 2025-03-01 3 mg/L @08:00 "
        "note:n\n"
        "EFF BOD5 2025-03-31 4 mg/L #x\nEFF BOD5 2025-04-01 5 mg/L\nEFF TSS 2025-03-01 6 mg/L\n"
        "INF BOD5 2025-03-02 7 mg/L");
    shelf_load(s, "b.csv", "why",
               "EFF BOD5 2025-03-01 2.5 mg/L\nINF BOD5 2025-03-02 withdrawn mg/L");
    const struct frame_span spans[] = {
        {point(s, "EFF"), parameter(s, "BOD5"), day("2025-03-01"), day("2025-03-20")},
        {point(s, "EFF"), parameter(s, "BOD5"), day("2025-03-10"),
         day("2025-03-31")}, /* overlaps */
        {point(s, "INF"), parameter(s, "BOD5"), day("2025-03-01"), day("2025-03-31")},
    };
    struct frame *f = filled(s, spans, NELEM(spans), "2025-03-01", "2025-03-31");
    assert_string_equal(texts(s, f, "EFF", "BOD5", "2025-03-01"), "2.5 3");
    assert_string_equal(texts(s, f, "EFF", "BOD5", "2025-03-31"), "4");
    assert_string_equal(texts(s, f, "INF", "BOD5", "2025-03-02"), "");
    assert_false(frame_has(f, point(s, "EFF"), parameter(s, "TSS"))); /* not asked for */
    size_t count;
    const struct reading *r =
        frame_readings(f, point(s, "EFF"), parameter(s, "BOD5"), day("2025-03-01"), &count)[0];
    assert_string_equal(r->file, "b.csv");
    assert_int_equal(r->line, 2);
    assert_int_equal(r->version, 1);
    assert_string_equal(
        frame_readings(f, point(s, "EFF"), parameter(s, "BOD5"), day("2025-03-01"), &count)[1]
            ->detail->note,
        "n");
}

/* INF FLOW is a totalizer: the first day needs the register before it. 1005 - 1000 = 5. */
static void a_totalizer_gets_the_reading_before_its_span(void **state)
{
    struct shelf *s = THIS;
    struct day_value v;
    shelf_load(s, "a.csv", NULL,
               "INF FLOW 2025-02-27 900 MGD\nINF FLOW 2025-02-28 950 MGD @06:00\nINF FLOW "
               "2025-02-28 999 MGD @07:00\n"
               "INF FLOW 2025-02-28 777 MGD @08:00\nINF FLOW 2025-02-28 code:E MGD @09:00\n"
               "INF FLOW 2025-03-01 1005 MGD");
    shelf_load(s, "b.csv", "why",
               "INF FLOW 2025-02-28 1000 MGD @07:00\nINF FLOW 2025-02-28 withdrawn MGD @08:00");
    const struct frame_span span = {point(s, "INF"), parameter(s, "FLOW"), day("2025-03-01"),
                                    day("2025-03-31")};
    struct frame *f = filled(s, &span, 1, "2025-03-01", "2025-03-31");
    frame_day(f, span.point, span.parameter, day("2025-03-01"), &s->plant->rules, NULL, &v);
    assert_int_equal(v.state, DAY_VALUED);
    assert_string_equal(fraction_print(s->arena, v.amount.number, 3, ROUND_HALF_EVEN), "5.000");
}

static void spans_and_extent_tell_what_there_is(void **state)
{
    struct shelf *s = THIS;
    struct frame_span *spans = NULL;
    size_t count = 9;
    day_t first, last;
    struct book *b = shelf_open(s, BOOK_READ);
    good(s, book_extent(b, &first, &last, &s->fault));
    assert_int_equal(first, DAY_NONE);
    assert_int_equal(last, DAY_NONE);
    good(s, book_spans(b, s->arena, s->plant, DAY_NONE, DAY_NONE, &spans, &count, &s->fault));
    assert_int_equal(count, 0);
    book_close(b);
    shelf_load(
        s, "a.csv", NULL,
        "INF TSS 2025-03-05 1 mg/L\nINF TSS 2025-03-05 1 mg/L #b\nEFF BOD5 2025-02-01 1 mg/L\n"
        "EFF TSS 2025-05-01 1 mg/L");
    b = shelf_open(s, BOOK_READ);
    good(s, book_extent(b, &first, &last, &s->fault));
    assert_int_equal(first, day("2025-02-01"));
    assert_int_equal(last, day("2025-05-01"));
    good(s, book_spans(b, s->arena, s->plant, day("2025-02-01"), day("2025-03-05"), &spans, &count,
                       &s->fault));
    assert_int_equal(count, 2);
    assert_int_equal(spans[0].point, point(s, "INF"));
    assert_int_equal(spans[0].parameter, parameter(s, "TSS"));
    assert_int_equal(spans[0].first, day("2025-02-01"));
    assert_int_equal(spans[1].point, point(s, "EFF"));
    book_close(b);
}

static enum status gather(void *context, const struct reading *r, struct fault *f)
{
    (void)f;
    text_print(context, "%s ", r->text);
    return OK;
}

static enum status stop_at_second(void *context, const struct reading *r, struct fault *f)
{
    int *seen = context;
    (void)r;
    return ++*seen == 2 ? fault_at(f, NULL, NULL, "enough") : OK;
}

static void every_reading_in_force_comes_once_in_order(void **state)
{
    struct shelf *s = THIS;
    struct text t;
    shelf_load(s, "a.csv", NULL,
               "EFF TSS 2025-03-02 9 mg/L\nEFF BOD5 2025-03-02 6 mg/L @10:00\nEFF BOD5 2025-03-02 "
               "5 mg/L @09:00 #z\n"
               "EFF BOD5 2025-03-02 4 mg/L @09:00 #a\nEFF BOD5 2025-03-02 3 mg/L\nEFF BOD5 "
               "2025-03-01 2 mg/L\n"
               "INF TSS 2025-04-01 1 mg/L\nEFF BOD5 2025-03-03 7 mg/L");
    shelf_load(s, "b.csv", "why",
               "EFF BOD5 2025-03-03 withdrawn mg/L\nEFF BOD5 2025-03-02 3.3 mg/L");
    struct book *b = shelf_open(s, BOOK_READ);
    text_init(&t, 1000);
    good(s, book_each(b, s->plant, DAY_NONE, DAY_NONE, gather, &t, &s->fault));
    assert_string_equal(t.at, "1 2 3.3 4 5 6 9 ");
    text_clear(&t);
    good(s, book_each(b, s->plant, day("2025-03-02"), day("2025-03-02"), gather, &t, &s->fault));
    assert_string_equal(t.at, "3.3 4 5 6 9 ");
    int seen = 0;
    assert_int_equal(book_each(b, s->plant, DAY_NONE, DAY_NONE, stop_at_second, &seen, &s->fault),
                     FAULT);
    assert_string_equal(s->fault.text, "enough");
    assert_int_equal(seen, 2);
    fault_clear(&s->fault);
    text_free(&t);
    book_close(b);
}

static enum status gather_aside(void *context, const struct book_aside *a, struct fault *f)
{
    (void)f;
    text_print(context, "%s:%ld:%d %s '%s' ", a->row.file, a->row.line, a->row.column, a->reason,
               a->row.cell[LONG_DATE]);
    return OK;
}

static void rows_set_aside_come_by_their_days_and_the_unreadable_always(void **state)
{
    struct shelf *s = THIS;
    struct text t;
    struct row_text row = {
        .file = "wide.csv", .line = 8, .column = 3, .cell = {"2025-03-09"}, .raw = "raw; \"line"};
    shelf_load(s, "a.csv", NULL,
               "aside:not-a-number 2025-03-01 - EFF BOD5 1O mg/L\naside:bad-date 03/04/05 - EFF "
               "BOD5 1 mg/L\n"
               "aside:not-a-number 2025-04-01 - EFF BOD5 x mg/L");
    struct book *b = shelf_open(s, BOOK_WRITE);
    good(s, book_load_begin(b, s->plant, &tester, false, &s->fault));
    good(s, book_load_aside(b, &row, REASON_WRONG_COLUMNS, "three cells, the header has five",
                            &s->fault));
    good(s, end_load(s, b, "wide.csv", NULL, 1));
    book_close(b);
    b = shelf_open(s, BOOK_READ);
    text_init(&t, 2000);
    good(s, book_asides(b, day("2025-03-01"), day("2025-03-31"), gather_aside, &t, &s->fault));
    assert_string_equal(t.at, "a.csv:2:0 not-a-number '2025-03-01' a.csv:3:0 bad-date '03/04/05' "
                              "wide.csv:8:3 wrong-columns '2025-03-09' ");
    text_clear(&t);
    good(s, book_asides(b, DAY_NONE, DAY_NONE, gather_aside, &t, &s->fault));
    assert_non_null(strstr(t.at, "2025-04-01"));
    text_free(&t);
    book_close(b);
    assert_string_equal(
        raw_text(s, "SELECT raw || explanation FROM rows_set_aside WHERE file = 'wide.csv'"),
        "raw; \"linethree cells, the header has five");
}

static enum status gather_revision(void *context, const struct book_revision *r, struct fault *f)
{
    (void)f;
    text_print(context, "%s>%s ", r->old_text, r->new_text);
    return OK;
}

static void revisions_come_by_day(void **state)
{
    struct shelf *s = THIS;
    struct text t;
    shelf_load(s, "a.csv", NULL, "EFF TSS 2025-03-02 9 mg/L\nEFF TSS 2025-04-02 8 mg/L");
    shelf_load(s, "b.csv", "why", "EFF TSS 2025-04-02 7 mg/L\nEFF TSS 2025-03-02 6 mg/L");
    shelf_load(s, "c.csv", "why", "EFF TSS 2025-03-02 5 mg/L");
    struct book *b = shelf_open(s, BOOK_READ);
    text_init(&t, 1000);
    good(s, book_revisions(b, s->plant, DAY_NONE, DAY_NONE, gather_revision, &t, &s->fault));
    assert_string_equal(t.at, "9>6 6>5 8>7 ");
    text_clear(&t);
    good(s, book_revisions(b, s->plant, day("2025-04-01"), day("2025-04-30"), gather_revision, &t,
                           &s->fault));
    assert_string_equal(t.at, "8>7 ");
    text_free(&t);
    book_close(b);
}

static enum status gather_batch(void *context, const struct book_batch *x, struct fault *f)
{
    (void)f;
    text_print(context, "%d %s %s %s %s %ld=%ld+%ld+%ld+%ld '%s' %d; ", (int)x->batch, x->kind,
               x->file, x->when, x->who, x->counts.rows, x->counts.accepted, x->counts.present,
               x->counts.revised, x->counts.aside, x->reason, (int)strlen(x->head));
    return OK;
}

static void batches_come_in_order_each_with_its_head(void **state)
{
    struct shelf *s = THIS;
    struct text t;
    char head[2 * DIGEST_BYTES + 1];
    shelf_load(s, "a.csv", NULL, "EFF TSS 2025-03-02 9 mg/L\naside:bad-date x");
    shelf_load(s, "b.csv", "why", "EFF TSS 2025-03-02 6 mg/L");
    struct book *b = shelf_open(s, BOOK_READ);
    text_init(&t, 2000);
    good(s, book_batches(b, gather_batch, &t, &s->fault));
    assert_string_equal(
        t.at, "1 description  2025-04-01T06:10:00Z tester 12=0+0+0+0 'first description' 64; "
              "2 load a.csv 2025-04-01T06:10:00Z tester 2=1+0+0+1 '' 64; "
              "3 load b.csv 2025-04-01T06:10:00Z tester 1=0+0+1+0 'why' 64; ");
    text_free(&t);
    good(s, book_head(b, head, &s->fault));
    book_close(b);
    assert_string_equal(head, raw_text(s, "SELECT head FROM batches ORDER BY batch DESC"));
    assert_string_equal(raw_text(s, "SELECT lower(hex(previous)) FROM chain WHERE batch = 1"),
                        "0000000000000000000000000000000000000000000000000000000000000000");
}

static void a_damaged_reading_is_never_handed_over(void **state)
{
    struct shelf *s = THIS;
    char said[300];
    shelf_load(s, "a.csv", NULL, "EFF TSS 2025-03-02 9 mg/L\nEFF TSS 2025-03-03 9 mg/L");
    tamper(s, "reading", "UPDATE reading SET value = '8', coefficient = 8 WHERE line = 3");
    assert_null(shelf_told(s, &s->fault));
    snprintf(said, sizeof said,
             "'%s' is damaged: reading 2 (EFF TSS) of batch 2, a.csv:3, is not what was loaded; "
             "run 'weirbook check', and "
             "go back to a sound copy",
             s->path);
    assert_string_equal(s->fault.text, said);
    fault_clear(&s->fault);
    const struct frame_span span = {point(s, "EFF"), parameter(s, "TSS"), day("2025-03-01"),
                                    day("2025-03-31")};
    struct book *b = shelf_open(s, BOOK_READ);
    struct frame *frame = frame_new(s->arena, s->plant, span.first, span.last);
    assert_int_equal(book_fill(b, s->arena, s->plant, &span, 1, frame, &s->fault), FAULT);
    assert_string_equal(s->fault.text, said);
    fault_clear(&s->fault);
    book_close(b);
}

/* ---- query plans ---- */

/* Tables that grow with the years may be searched, and scanned only where a statement is for all of
 * them. */
static bool may_scan(enum statement which, const char *what)
{
    static const char *const small[] = {"SCAN s", "SCAN sqlite_schema", "SCAN qualifier"};
    for (size_t i = 0; i < NELEM(small); i++)
        if (strcmp(what, small[i]) == 0)
            return true;
    switch ((int)which) {
    case BATCHES:
    case CHECK_BATCHES:
        return strcmp(what, "SCAN b") == 0;
    case CHECK_REVISIONS:
        return strcmp(what, "SCAN v") == 0;
    case ASIDES_ALL:
        return strcmp(what, "SCAN a") == 0;
    case ALL_OF_DAYS: /* asked only for a good part of all there is: see test_pass.c */
        return strcmp(what, "SCAN r") == 0;
    case LAST_HEAD: /* one row from the end */
        return strcmp(what, "SCAN chain") == 0;
    default:
        return false;
    }
}

static void no_question_scans_what_grows_with_the_years(void **state)
{
    struct shelf *s = THIS;
    sqlite3 *db = NULL;
    assert_int_equal(sqlite3_open(s->path, &db), SQLITE_OK);
    for (enum statement which = 0; which < STATEMENTS; which++) {
        sqlite3_stmt *q = NULL;
        if (strncmp(book_sql[which], "PRAGMA", 6) == 0)
            continue;
        char *sql = arena_print(s->arena, "EXPLAIN QUERY PLAN %s", book_sql[which]);
        if (sqlite3_prepare_v2(db, sql, -1, &q, NULL) != SQLITE_OK)
            fail_msg("%s: %s", book_sql[which], sqlite3_errmsg(db));
        while (sqlite3_step(q) == SQLITE_ROW) {
            const char *step = (const char *)sqlite3_column_text(q, 3);
            if (strncmp(step, "SCAN", 4) == 0 && !may_scan(which, step))
                fail_msg("%s: %s", step, book_sql[which]);
        }
        sqlite3_finalize(q);
    }
    sqlite3_close(db);
}

static void a_months_readings_come_by_the_key_alone(void **state)
{
    static const struct {
        enum statement which;
        const char *plan;
    } cases[] = {
        {SERIES_SPAN, "SEARCH r USING INDEX reading_key (series=? AND day>? AND day<?)"},
        {SERIES_BEFORE, "SEARCH r USING INDEX reading_key (series=? AND day<?)"},
        {SERIES_HAS,
         "SEARCH reading USING COVERING INDEX reading_key (series=? AND day>? AND day<?)"},
        {NEWEST_READING, "SEARCH r USING INDEX reading_key (series=? AND day=? AND minute=?)"},
        {RAW_NEWEST, "SEARCH v USING INDEX bench_value_newest (sheet=? AND point=? AND run=? AND "
                     "argument=?)"},
        {RAW_OF_LINE, "SEARCH v USING INDEX bench_value_by_batch (batch=? AND line=?)"},
    };
    struct shelf *s = THIS;
    for (size_t i = 0; i < NELEM(cases); i++) {
        sqlite3 *db = NULL;
        sqlite3_stmt *q = NULL;
        assert_int_equal(sqlite3_open(s->path, &db), SQLITE_OK);
        char *sql = arena_print(s->arena, "EXPLAIN QUERY PLAN %s", book_sql[cases[i].which]);
        assert_int_equal(sqlite3_prepare_v2(db, sql, -1, &q, NULL), SQLITE_OK);
        assert_int_equal(sqlite3_step(q), SQLITE_ROW);
        assert_string_equal((const char *)sqlite3_column_text(q, 3), cases[i].plan);
        assert_int_equal(sqlite3_step(q), SQLITE_DONE); /* nothing is sorted */
        sqlite3_finalize(q);
        sqlite3_close(db);
    }
}

/* ---- bench sheets, and the newest of things ---- */

static enum status gather_raw(void *context, const struct raw_value *r, struct fault *f)
{
    (void)f;
    text_print(context, "%s:%ld %s %s %s;", r->file, r->line, r->cell[RAW_POINT], r->cell[RAW_RUN],
               r->cell[RAW_VALUE]);
    return OK;
}

static const char *raw_behind(struct shelf *s, struct book *b, int64_t batch, long line)
{
    struct text t;
    text_init(&t, 4000);
    good(s, book_raw_of(b, batch, line, gather_raw, &t, &s->fault));
    const char *told = arena_text(s->arena, t.at);
    text_free(&t);
    return told;
}

static const char *const sheets = "raw: solids 2025-03-05 08:00 EFF 1 dried 1.1 g\n"
                                  "raw: solids 2025-03-05 - - blank dried 1.2 g\n"
                                  "raw: solids 2025-03-05 8:00 EFF 2 dried 1.3 -\n"
                                  "raw: solids 2025-03-05 14:00 EFF 1 dried 1.4 g\n"
                                  "raw: solids 2025-03-05 08:00 INF 1 dried 1.5 g\n"
                                  "raw: bod 2025-03-05 08:00 EFF 1 dried 1.6 g\n"
                                  "raw: solids 2025-03-06 08:00 EFF 1 dried 1.7 mg\n"
                                  "EFF TSS 2025-03-05 8 mg/L @08:00";

static void raw_values_come_with_their_group_and_those_that_serve_all(void **state)
{
    struct shelf *s = THIS;
    shelf_load(s, "a.csv", NULL, "EFF BOD5 2025-03-04 3 mg/L");
    assert_string_equal(shelf_bench(s, "b.csv", sheets), "A");
    int64_t batch = s->batch;
    struct book *b = shelf_open(s, BOOK_READ);
    const char *group = "b.csv:2 EFF 1 1.1;b.csv:3  blank 1.2;b.csv:4 EFF 2 1.3;";
    assert_string_equal(raw_behind(s, b, batch, 2), group);
    assert_string_equal(raw_behind(s, b, batch, 4), group);
    assert_string_equal(raw_behind(s, b, batch, 5), "b.csv:3  blank 1.2;b.csv:5 EFF 1 1.4;");
    assert_string_equal(raw_behind(s, b, batch, 6), "b.csv:3  blank 1.2;b.csv:6 INF 1 1.5;");
    assert_string_equal(raw_behind(s, b, batch, 7), "b.csv:7 EFF 1 1.6;");
    assert_string_equal(raw_behind(s, b, batch, 3), "b.csv:3  blank 1.2;");
    assert_string_equal(raw_behind(s, b, batch, 99), "");
    assert_string_equal(raw_behind(s, b, batch - 1, 2), ""); /* of a readings file */
    book_close(b);
}

static const char *newest_raw(struct shelf *s, struct book *b, const char *sheet, const char *point,
                              const char *run)
{
    const char *value = NULL, *unit = NULL;
    good(s, book_raw_last(b, s->arena, sheet, point, run, "dried", &value, &unit, &s->fault));
    assert_int_equal(value == NULL, unit == NULL);
    return value ? arena_print(s->arena, "%s %s", value, unit) : "none";
}

static void the_newest_raw_value_is_the_one_loaded_last(void **state)
{
    struct shelf *s = THIS;
    shelf_bench(s, "b.csv", sheets);
    shelf_bench(s, "c.csv", "raw: solids 2025-03-01 08:00 INF 1 dried 9.9 g");
    struct book *b = shelf_open(s, BOOK_READ);
    assert_string_equal(newest_raw(s, b, "solids", "EFF", "1"), "1.7 mg");
    assert_string_equal(newest_raw(s, b, "solids", "EFF", "2"), "1.3 ");
    assert_string_equal(newest_raw(s, b, "solids", "", "blank"), "1.2 g");
    assert_string_equal(newest_raw(s, b, "solids", "INF", "1"), "9.9 g");
    assert_string_equal(newest_raw(s, b, "bod", "INF", "1"), "none");
    book_close(b);
}

static void a_damaged_raw_value_is_never_handed_over(void **state)
{
    struct shelf *s = THIS;
    const char *value = NULL, *unit = NULL;
    struct text t;
    text_init(&t, 4000);
    shelf_bench(s, "b.csv", sheets);
    tamper(s, "bench_value", "UPDATE bench_value SET value = '1.9' WHERE id = 7");
    const char *said =
        arena_print(s->arena,
                    "'%s' is damaged: raw value 7 of batch 2, line 8, is not what was loaded; run "
                    "'weirbook check', and go back to a sound copy",
                    s->path);
    struct book *b = shelf_open(s, BOOK_READ);
    assert_int_equal(
        book_raw_last(b, s->arena, "solids", "EFF", "1", "dried", &value, &unit, &s->fault), FAULT);
    assert_string_equal(s->fault.text, said);
    fault_clear(&s->fault);
    assert_int_equal(book_raw_of(b, 2, 8, gather_raw, &t, &s->fault), FAULT);
    assert_string_equal(s->fault.text, said);
    fault_clear(&s->fault);
    book_close(b);
    text_free(&t);
}

/* A bench sheet is known as a loaded file is, and its batch says what it is. */
static void a_bench_sheet_is_a_batch_of_its_own_kind(void **state)
{
    struct shelf *s = THIS;
    uint8_t digest[DIGEST_BYTES] = "b.csv";
    bool known = false;
    int64_t batch = 0;
    const char *file, *when;
    struct book_counts counts;
    shelf_bench(s, "b.csv", sheets);
    struct book *b = shelf_open(s, BOOK_READ);
    good(s, book_known(b, s->arena, digest, &known, &batch, &file, &when, &counts, &s->fault));
    book_close(b);
    assert_true(known);
    assert_int_equal(batch, 2);
    assert_int_equal(counts.accepted, 1);
    assert_string_equal(raw_text(s, "SELECT kind || ' ' || file || ' ' || rows FROM batches "
                                    "WHERE batch = 2"),
                        "bench b.csv 1");
    assert_string_equal(raw_text(s, "SELECT sheet || date || time || point || run || argument || "
                                    "value || unit || file || line || who FROM bench_values"),
                        "solids2025-03-0508:00EFF1dried1.1gb.csv2tester");
    assert_string_equal(raw_text(s, "SELECT count(*) FROM bench_values"), "7");
}

/* An abandoned sheet leaves nothing, and the next one's numbers have no gap. */
static void an_abandoned_bench_sheet_leaves_nothing(void **state)
{
    struct shelf *s = THIS;
    struct book *b = shelf_open(s, BOOK_WRITE);
    good(s, book_bench_begin(b, s->plant, &tester, false, &s->fault));
    add_lines(s, b, "b.csv", sheets);
    book_load_abandon(b);
    book_close(b);
    assert_string_equal(raw_text(s, "SELECT count(*) FROM bench_value"), "0");
    shelf_bench(s, "b.csv", sheets);
    shelf_bench(s, "c.csv", ""); /* records alone would do, and so would nothing */
    shelf_bench(s, "d.csv", "raw: solids 2025-03-07 - EFF 1 dried 2 g");
    assert_string_equal(
        raw_text(s, "SELECT group_concat(raw_values || '@' || first_raw) FROM bench"),
        "7@1,0@8,1@8");
    assert_string_equal(shelf_check(s), "");
}

static const char *last_of(struct shelf *s, struct book *b, const char *parameter,
                           const char *sample, const char *before)
{
    struct reading r;
    bool found = false;
    day_t day = DAY_NONE;
    char date[11], time[6];
    assert_true(!before || day_parse(before, &day));
    good(s, book_last(b, s->arena, s->plant, plant_point(s->plant, "EFF"),
                      plant_parameter(s->plant, parameter), sample, day, &found, &r, &s->fault));
    if (!found)
        return "none";
    day_write(r.day, date);
    minute_write(r.minute, time);
    return arena_print(s->arena, "%s %s '%s' v%d %s:%ld", date, time, r.text, r.version, r.file,
                       r.line);
}

static void the_last_reading_is_the_newest_in_force(void **state)
{
    struct shelf *s = THIS;
    shelf_load(s, "a.csv", NULL,
               "EFF BOD5 2025-03-04 3 mg/L\nEFF BOD5 2025-03-05 4 mg/L @08:00\n"
               "EFF BOD5 2025-03-05 5 mg/L @14:00\nEFF BOD5 2025-03-06 6 mg/L\n"
               "EFF BOD5 2025-03-07 7 mg/L #dup\nEFF TSS 2025-03-02 code:E mg/L");
    shelf_load(s, "b.csv", "why",
               "EFF BOD5 2025-03-04 3.5 mg/L\nEFF BOD5 2025-03-06 withdrawn mg/L");
    struct book *b = shelf_open(s, BOOK_READ);
    assert_string_equal(last_of(s, b, "BOD5", "", NULL), "2025-03-05 14:00 '5' v0 a.csv:4");
    assert_string_equal(last_of(s, b, "BOD5", "", "2025-03-06"), "2025-03-05 14:00 '5' v0 a.csv:4");
    assert_string_equal(last_of(s, b, "BOD5", "", "2025-03-05"), "2025-03-04  '3.5' v1 b.csv:2");
    assert_string_equal(last_of(s, b, "BOD5", "", "2025-03-04"), "none");
    assert_string_equal(last_of(s, b, "BOD5", "dup", NULL), "2025-03-07  '7' v0 a.csv:6");
    assert_string_equal(last_of(s, b, "TSS", NULL, NULL), "2025-03-02  'code:E' v0 a.csv:7");
    assert_string_equal(last_of(s, b, "FLOW", "", NULL), "none");
    book_close(b);
}

int main(void)
{
#define SHELVED(test) cmocka_unit_test_setup_teardown(test, shelf_setup, shelf_teardown)
    const struct CMUnitTest tests[] = {
        SHELVED(a_frame_holds_the_newest_versions_of_what_was_asked_for),
        SHELVED(a_totalizer_gets_the_reading_before_its_span),
        SHELVED(spans_and_extent_tell_what_there_is),
        SHELVED(every_reading_in_force_comes_once_in_order),
        SHELVED(rows_set_aside_come_by_their_days_and_the_unreadable_always),
        SHELVED(revisions_come_by_day),
        SHELVED(batches_come_in_order_each_with_its_head),
        SHELVED(a_damaged_reading_is_never_handed_over),
        SHELVED(no_question_scans_what_grows_with_the_years),
        SHELVED(a_months_readings_come_by_the_key_alone),
        SHELVED(raw_values_come_with_their_group_and_those_that_serve_all),
        SHELVED(the_newest_raw_value_is_the_one_loaded_last),
        SHELVED(a_damaged_raw_value_is_never_handed_over),
        SHELVED(a_bench_sheet_is_a_batch_of_its_own_kind),
        SHELVED(an_abandoned_bench_sheet_leaves_nothing),
        SHELVED(the_last_reading_is_the_newest_in_force),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
