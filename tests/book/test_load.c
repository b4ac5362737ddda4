/* Loading: what becomes of each reading, and that nothing is ever lost or half done. */
#include "book/books.h"

#include <stdio.h>
#include <string.h>

#define THIS ((struct shelf *)*state)

static const char *told(struct shelf *s)
{
    const char *t = shelf_told(s, &s->fault);
    if (!t)
        fail_msg("%s", s->fault.text);
    return t;
}

static void contains(const char *text, const char *part)
{
    if (!strstr(text, part))
        fail_msg("'%s' is not in\n%s", part, text);
}

static void lacks(const char *text, const char *part)
{
    if (strstr(text, part))
        fail_msg("'%s' is in\n%s", part, text);
}

static void a_reading_is_kept_as_it_was_written(void **state)
{
    struct shelf *s = THIS;
    assert_string_equal(
        shelf_load(s, "march.csv", NULL,
                   "EFF BOD5 2025-03-05 30.0 mg/L @08:15 #grab note:spiked mdl:0.5 rl:2.00\n"
                   "EFF BOD5 2025-03-06 <2 mg/L\n"
                   "EFF TSS 2025-03-06 code:E mg/L"),
        "AAA");
    const char *t = told(s);
    contains(t, "2025-03-05 08:15 #grab v0 '30.0' plain  30.0 mg/L mdl 0.5 rl 2.00 "
                "[method 1|analyst|sampler|2025-03-06|spiked] march.csv:2 batch 2\n");
    contains(t, "2025-03-06  # v0 '<2' less  2 mg/L mdl  rl  [||||] march.csv:3 batch 2\n");
    contains(t, "'code:E' codeE  mg/L mdl  rl  [||||] march.csv:4 batch 2\n");
    assert_string_equal(shelf_check(s), "");
}

static void another_time_or_sample_is_another_reading(void **state)
{
    assert_string_equal(shelf_load(THIS, "a.csv", NULL,
                                   "EFF BOD5 2025-03-05 1 mg/L\n"
                                   "EFF BOD5 2025-03-05 2 mg/L @00:00\n"
                                   "EFF BOD5 2025-03-05 3 mg/L @24:00\n"
                                   "EFF BOD5 2025-03-05 4 mg/L #b\n"
                                   "INF BOD5 2025-03-05 5 mg/L"),
                        "AAAAA");
    assert_int_equal(THIS->counts.accepted, 5);
}

/* Two files with one row each: what becomes of the second. Unit factors: 1 US gallon is 231 cubic
 * inches of 2.54 cm exactly (NIST SP 811), so 1 MGD is 3785.411784 m3/d. */
static void the_same_value_is_present_and_another_contradicts(void **state)
{
    static const struct {
        const char *first, *second, *becomes;
    } cases[] = {
        {"EFF BOD5 2025-03-05 30 mg/L", "EFF BOD5 2025-03-05 30 mg/L", "P"},
        {"EFF BOD5 2025-03-05 30 mg/L", "EFF BOD5 2025-03-05 30.0 mg/L", "P"},
        {"EFF BOD5 2025-03-05 30 mg/L", "EFF BOD5 2025-03-05 30000 ug/L", "P"},
        {"EFF BOD5 2025-03-05 30 mg/L", "EFF BOD5 2025-03-05 30001 ug/L", "C"},
        {"EFF FLOW 2025-03-05 1 MGD", "EFF FLOW 2025-03-05 3785.411784 m3/d", "P"},
        {"EFF FLOW 2025-03-05 1 MGD", "EFF FLOW 2025-03-05 3785.411785 m3/d", "C"},
        {"EFF BOD5 2025-03-05 30 mg/L", "EFF BOD5 2025-03-05 30.1 mg/L", "C"},
        {"EFF BOD5 2025-03-05 2 mg/L", "EFF BOD5 2025-03-05 <2 mg/L", "C"},
        {"EFF BOD5 2025-03-05 <2 mg/L", "EFF BOD5 2025-03-05 <2.0 mg/L", "P"},
        {"EFF BOD5 2025-03-05 <2 mg/L", "EFF BOD5 2025-03-05 >2 mg/L", "C"},
        {"EFF BOD5 2025-03-05 code:E mg/L", "EFF BOD5 2025-03-05 code:E mg/L", "P"},
        {"EFF BOD5 2025-03-05 code:E mg/L", "EFF BOD5 2025-03-05 code:D mg/L", "C"},
        {"EFF BOD5 2025-03-05 code:E mg/L", "EFF BOD5 2025-03-05 3 mg/L", "C"},
        {"EFF BOD5 2025-03-05 3 mg/L note:one", "EFF BOD5 2025-03-05 3 mg/L note:two", "P"},
        {"EFF BOD5 2025-03-05 999999999999999999 mg/L",
         "EFF BOD5 2025-03-05 999999999999999998 mg/L", "C"},
        {"EFF BOD5 2025-03-05 withdrawn mg/L", "EFF BOD5 2025-03-05 3 mg/L", "A"},
        {"EFF BOD5 2025-03-05 withdrawn mg/L", "EFF BOD5 2025-03-05 withdrawn mg/L", "P"},
    };
    (void)state;
    for (size_t i = 0; i < NELEM(cases); i++) {
        void *shelf = NULL;
        shelf_setup(&shelf);
        assert_string_equal(shelf_load(shelf, "a.csv", NULL, cases[i].first), "A");
        const char *becomes = shelf_load(shelf, "b.csv", NULL, cases[i].second);
        if (strcmp(becomes, cases[i].becomes) != 0)
            fail_msg("%s, then %s: %s, not %s", cases[i].first, cases[i].second, becomes,
                     cases[i].becomes);
        assert_string_equal(shelf_check(shelf), "");
        shelf_teardown(&shelf);
    }
}

static void a_contradiction_shows_what_stands_and_changes_nothing(void **state)
{
    struct shelf *s = THIS;
    shelf_load(s, "a.csv", NULL, "EFF BOD5 2025-03-05 30.0 mg/L");
    assert_string_equal(shelf_load(s, "b.csv", NULL, "EFF BOD5 2025-03-05 31 mg/L"), "C");
    const char *t = told(s);
    contains(t, "'30.0' plain");
    lacks(t, "'31' plain");
    contains(t, "aside b.csv:2:0 contradicts (holds '30.0' mg/L (a.csv:2)) batch 3: EFF BOD5");
    assert_int_equal(s->counts.aside, 1);
    assert_int_equal(s->counts.rows, 1);
}

static void a_revised_reading_keeps_the_old_one(void **state)
{
    struct shelf *s = THIS;
    shelf_load(s, "a.csv", NULL, "EFF BOD5 2025-03-05 30.0 mg/L\nEFF BOD5 2025-03-06 7 mg/L");
    assert_string_equal(shelf_load(s, "b.csv", "typing error",
                                   "EFF BOD5 2025-03-05 3.00 mg/L\nEFF BOD5 2025-03-06 7.0 mg/L"),
                        "RP");
    assert_string_equal(shelf_load(s, "c.csv", "second look", "EFF BOD5 2025-03-05 3.2 mg/L"), "R");
    const char *t = told(s);
    contains(t, "2025-03-05  # v2 '3.2' plain  3.2 mg/L");
    lacks(t, "v0 '30.0'");
    contains(t, "revised 2025-03-05 -1 1 1 # '30.0' to '3.00' mg/L by tester at "
                "2025-04-01T06:10:00Z: typing error, "
                "b.csv:2 v1\n");
    contains(t,
             "'3.00' to '3.2' mg/L by tester at 2025-04-01T06:10:00Z: second look, c.csv:2 v2\n");
    assert_string_equal(
        raw_text(s, "SELECT group_concat(value) FROM (SELECT value FROM reading WHERE day = "
                    "julianday('2025-03-05') - julianday('1970-01-01') ORDER BY version)"),
        "30.0,3.00,3.2");
    assert_string_equal(shelf_check(s), "");
}

static void a_row_never_revises_a_row_of_its_own_file(void **state)
{
    static const struct {
        const char *before, *lines, *becomes;
    } cases[] = {
        {"EFF BOD5 2025-03-01 9 mg/L", "EFF BOD5 2025-03-05 1 mg/L\nEFF BOD5 2025-03-05 2 mg/L",
         "AC"},
        {"EFF BOD5 2025-03-05 9 mg/L", "EFF BOD5 2025-03-05 1 mg/L\nEFF BOD5 2025-03-05 2 mg/L",
         "RC"},
        {"EFF BOD5 2025-03-05 9 mg/L", "EFF BOD5 2025-03-05 1 mg/L\nEFF BOD5 2025-03-05 9 mg/L",
         "RC"},
        {"EFF BOD5 2025-03-05 9 mg/L", "EFF BOD5 2025-03-05 9 mg/L\nEFF BOD5 2025-03-05 2 mg/L",
         "PC"},
        {"EFF BOD5 2025-03-05 9 mg/L", "EFF BOD5 2025-03-05 1 mg/L\nEFF BOD5 2025-03-05 1.0 mg/L",
         "RP"},
    };
    (void)state;
    for (size_t i = 0; i < NELEM(cases); i++) {
        void *shelf = NULL;
        shelf_setup(&shelf);
        shelf_load(shelf, "a.csv", NULL, cases[i].before);
        assert_string_equal(shelf_load(shelf, "b.csv", "why not", cases[i].lines),
                            cases[i].becomes);
        assert_string_equal(shelf_check(shelf), "");
        shelf_teardown(&shelf);
    }
}

static void a_withdrawn_reading_leaves_room_and_stays_on_record(void **state)
{
    struct shelf *s = THIS;
    shelf_load(s, "a.csv", NULL, "EFF BOD5 2025-03-05 30 mg/L");
    assert_string_equal(
        shelf_load(s, "b.csv", "sample spoiled", "EFF BOD5 2025-03-05 withdrawn mg/L"), "R");
    lacks(told(s), "'30' plain");
    assert_string_equal(shelf_load(s, "c.csv", NULL, "EFF BOD5 2025-03-05 31 mg/L"), "A");
    const char *t = told(s);
    contains(t, "v2 '31' plain");
    contains(t, "'30' to 'withdrawn' mg/L by tester");
}

static void the_four_counts_add_up_and_are_kept(void **state)
{
    struct shelf *s = THIS;
    shelf_load(s, "a.csv", NULL, "EFF BOD5 2025-03-05 30 mg/L\nEFF BOD5 2025-03-06 30 mg/L");
    assert_string_equal(shelf_load(s, "b.csv", "why",
                                   "EFF BOD5 2025-03-05 31 mg/L\nEFF BOD5 2025-03-06 30 mg/L\n"
                                   "EFF BOD5 2025-03-07 1 mg/L\nEFF BOD5 2025-03-07 2 mg/L\n"
                                   "aside:bad-date 2025-13-01 08:00 EFF BOD5 3 mg/L"),
                        "RPACS");
    const struct book_counts *c = &s->counts;
    assert_int_equal(c->rows, 5);
    assert_int_equal(c->accepted, 1);
    assert_int_equal(c->present, 1);
    assert_int_equal(c->revised, 1);
    assert_int_equal(c->aside, 2);
    assert_string_equal(
        raw_text(s, "SELECT rows || ' ' || accepted || ' ' || present || ' ' || revised || ' ' || "
                    "set_aside FROM batches WHERE file = 'b.csv'"),
        "5 1 1 1 2");
}

static void counts_that_do_not_add_up_load_nothing(void **state)
{
    struct shelf *s = THIS;
    size_t length;
    const uint8_t *before = file_bytes(s->arena, s->path, &length);
    struct book *b = shelf_open(s, BOOK_WRITE);
    good(s, book_load_begin(b, s->plant, &tester, false, &s->fault));
    add_lines(s, b, "a.csv", "EFF BOD5 2025-03-05 30 mg/L");
    assert_int_equal(end_load(s, b, "a.csv", NULL, 2), FAULT);
    assert_string_equal(s->fault.text,
                        "a.csv: 2 rows were read, but 1 ended in the book or aside; nothing was "
                        "loaded; please report it");
    book_load_abandon(b); /* harmless */
    book_close(b);
    same_file(s->path, before, length);
}

static void an_abandoned_load_leaves_nothing(void **state)
{
    struct shelf *s = THIS;
    size_t length;
    shelf_load(s, "a.csv", NULL, "EFF BOD5 2025-03-05 30 mg/L");
    const uint8_t *before = file_bytes(s->arena, s->path, &length);
    struct book *b = shelf_open(s, BOOK_WRITE);
    good(s, book_load_begin(b, s->plant, &tester, true, &s->fault));
    assert_string_equal(
        add_lines(s, b, "b.csv",
                  "EFF BOD5 2025-03-05 31 mg/L note:x\nINF TSS 2025-03-05 1 ug/L #new\n"
                  "aside:bad-date x y"),
        "RAS");
    book_load_abandon(b);
    same_file(s->path, before, length);
    /* And the connection goes on as if nothing had been. */
    good(s, book_load_begin(b, s->plant, &tester, false, &s->fault));
    assert_string_equal(
        add_lines(s, b, "c.csv", "EFF BOD5 2025-03-05 30 mg/L\nINF TSS 2025-03-05 1 ug/L #new"),
        "PA");
    book_close(b); /* abandons it */
    same_file(s->path, before, length);
}

static void a_file_loaded_before_is_known(void **state)
{
    struct shelf *s = THIS;
    struct book_source source = {.file = "b.csv"};
    const char *file = NULL, *when = NULL;
    struct book_counts counts;
    int64_t batch = 0;
    bool known = true;
    snprintf((char *)source.digest, sizeof source.digest, "a.csv"); /* as end_load makes it */
    struct book *b = shelf_open(s, BOOK_READ);
    good(s,
         book_known(b, s->arena, source.digest, &known, &batch, &file, &when, &counts, &s->fault));
    assert_false(known);
    book_close(b);
    shelf_load(s, "a.csv", NULL, "EFF BOD5 2025-03-05 30 mg/L\naside:bad-date x");
    b = shelf_open(s, BOOK_READ);
    good(s,
         book_known(b, s->arena, source.digest, &known, &batch, &file, &when, &counts, &s->fault));
    assert_true(known);
    assert_int_equal(batch, 2);
    assert_string_equal(file, "a.csv");
    assert_string_equal(when, tester.when);
    assert_int_equal(counts.rows, 2);
    assert_int_equal(counts.aside, 1);
    book_close(b);
}

/* More different notes and samples than a load remembers at once. */
static void many_different_notes_each_stay_with_their_reading(void **state)
{
    struct shelf *s = THIS;
    struct text lines;
    text_init(&lines, 4 << 20);
    for (int i = 0; i < 9000; i++)
        text_print(&lines, "EFF BOD5 2025-03-%02d %d mg/L #s%d note:n%d\n", 1 + i % 28, i, i, i);
    const char *outcome = shelf_load(s, "a.csv", NULL, lines.at);
    assert_int_equal(strspn(outcome, "A"), 9000);
    outcome = shelf_load(s, "b.csv", NULL, lines.at);
    assert_int_equal(strspn(outcome, "P"), 9000);
    text_free(&lines);
    assert_string_equal(raw_text(s, "SELECT count(*) FROM detail"), "9000");
    assert_string_equal(
        raw_text(
            s, "SELECT count(*) FROM readings WHERE note = 'n' || value AND sample = 's' || value"),
        "9000");
    assert_string_equal(shelf_check(s), "");
}

static void the_connection_refuses_what_the_tables_forbid(void **state)
{
    static const struct {
        const char *sql, *said;
    } cases[] = {
        {"UPDATE reading SET value = '1'", "readings are never rewritten"},
        {"DELETE FROM reading", "readings are never taken out"},
        {"UPDATE revision SET day = 1", "readings are never rewritten"},
        {"DELETE FROM revision", "readings are never taken out"},
        {"UPDATE aside SET value = '1'", "rows set aside are never rewritten"},
        {"DELETE FROM aside", "rows set aside are never taken out"},
        {"UPDATE batch SET who = 'x'", "batches are never rewritten"},
        {"DELETE FROM load", "batches are never taken out"},
        {"UPDATE chain SET head = previous", "the chain is never rewritten"},
        {"DELETE FROM chain", "the chain is never shortened"},
        {"UPDATE plant_limit SET \"limit\" = '99'", "descriptions are never rewritten"},
        {"DELETE FROM plant_point", "descriptions are never taken out"},
        {"UPDATE point_code SET name = 'X'", "names that readings use are never rewritten"},
        {"DELETE FROM series", "names that readings use are never taken out"},
        {"INSERT INTO batch (kind, at, who) VALUES ('load', '2025-04-01', 'x')",
         "CHECK constraint failed: batch_at"},
        {"INSERT INTO batch (kind, at, who) VALUES ('load', '2025-04-01T06:10:00Z', '')",
         "CHECK constraint failed: batch_who"},
        {"INSERT INTO load VALUES (9, 'f', 1, zeroblob(32), '', '', 3, 1, 1, 0, 0, 1, 1)",
         "CHECK constraint failed: load_counts_add_up"},
        {"INSERT INTO load VALUES (9, 'f', 1, zeroblob(32), '', '', 1, 0, 0, 1, 0, 1, 1)",
         "CHECK constraint failed: load_revisions_have_a_reason"},
        {"INSERT INTO load VALUES (9, 'f', 1, 'x', '', '', 1, 0, 0, 1, 0, 1, 1)",
         "cannot store TEXT value in BLOB column load.digest"},
    };
    struct shelf *s = THIS;
    sqlite3 *db = NULL;
    shelf_load(s, "a.csv", NULL, "EFF BOD5 2025-03-05 30 mg/L\naside:bad-date x");
    shelf_load(s, "b.csv", "why", "EFF BOD5 2025-03-05 31 mg/L");
    assert_int_equal(sqlite3_open(s->path, &db), SQLITE_OK);
    for (size_t i = 0; i < NELEM(cases); i++) {
        assert_int_equal(sqlite3_exec(db, cases[i].sql, NULL, NULL, NULL), SQLITE_CONSTRAINT);
        assert_string_equal(sqlite3_errmsg(db), cases[i].said);
    }
    sqlite3_close(db);
    assert_string_equal(shelf_check(s), "");
}

/* Every CHECK of table reading, by a row that breaks that one alone. */
static void every_check_on_readings_is_named(void **state)
{
    static const struct {
        const char *set, *check;
    } cases[] = {
        {"day = 84006", "reading_day"},      {"minute = 1441", "reading_minute"},
        {"version = -1", "reading_version"}, {"qualifier = 8", "reading_qualifier"},
        {"code = 'E'", "reading_code"},      {"coefficient = NULL", "reading_number"},
        {"scale = 19", "reading_scale"},
    };
    struct shelf *s = THIS;
    sqlite3 *db = NULL;
    shelf_load(s, "a.csv", NULL, "EFF BOD5 2025-03-05 30 mg/L");
    assert_int_equal(sqlite3_open(s->path, &db), SQLITE_OK);
    assert_int_equal(sqlite3_exec(db, "DROP TRIGGER reading_stays", NULL, NULL, NULL), SQLITE_OK);
    for (size_t i = 0; i < NELEM(cases); i++) {
        char sql[80], said[80];
        snprintf(sql, sizeof sql, "UPDATE reading SET %s", cases[i].set);
        snprintf(said, sizeof said, "CHECK constraint failed: %s", cases[i].check);
        assert_int_equal(sqlite3_exec(db, sql, NULL, NULL, NULL), SQLITE_CONSTRAINT);
        assert_string_equal(sqlite3_errmsg(db), said);
    }
    sqlite3_close(db);
}

int main(void)
{
#define SHELVED(test) cmocka_unit_test_setup_teardown(test, shelf_setup, shelf_teardown)
    const struct CMUnitTest tests[] = {
        SHELVED(a_reading_is_kept_as_it_was_written),
        SHELVED(another_time_or_sample_is_another_reading),
        cmocka_unit_test(the_same_value_is_present_and_another_contradicts),
        SHELVED(a_contradiction_shows_what_stands_and_changes_nothing),
        SHELVED(a_revised_reading_keeps_the_old_one),
        cmocka_unit_test(a_row_never_revises_a_row_of_its_own_file),
        SHELVED(a_withdrawn_reading_leaves_room_and_stays_on_record),
        SHELVED(the_four_counts_add_up_and_are_kept),
        SHELVED(counts_that_do_not_add_up_load_nothing),
        SHELVED(an_abandoned_load_leaves_nothing),
        SHELVED(a_file_loaded_before_is_known),
        SHELVED(many_different_notes_each_stay_with_their_reading),
        SHELVED(the_connection_refuses_what_the_tables_forbid),
        SHELVED(every_check_on_readings_is_named),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
