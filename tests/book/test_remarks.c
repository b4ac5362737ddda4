/* Remarks on days, points and limits, and answers to doubts: kept whole, taken back and never taken
 * out, found by their days. */
#include "book/books.h"
#include "book/store.h"

#include <stdio.h>
#include <string.h>

#define THIS ((struct shelf *)*state)

static void a_remark_is_kept_with_author_and_time(void **state)
{
    static const char *const limit[3] = {"EFF", "BOD5", "weekly-average"};
    struct shelf *s = THIS;
    assert_int_equal(
        shelf_remark(s, REMARK_CAUSE, "", "2025-03-10", "2025-03-12", limit, "blower 2 tripped"),
        2);
    assert_int_equal(shelf_remark(s, REMARK_EVENT, "wet-weather", "2025-03-11", "2025-03-11", NULL,
                                  "60 mm of rain \xe2\x80\x93 in a day"),
                     3);
    struct book *b = shelf_open(s, BOOK_READ);
    assert_string_equal(
        remarks_told(s, b, "", ""),
        "remark 2 cause '' 2025-03-10..2025-03-12 'EFF' 'BOD5' 'weekly-average': blower 2 tripped "
        "(tester, 2025-04-01T06:10:00Z)\n"
        "remark 3 event 'wet-weather' 2025-03-11..2025-03-11 '' '' '': 60 mm of rain "
        "\xe2\x80\x93 in a day (tester, 2025-04-01T06:10:00Z)\n");
    book_close(b);
    assert_string_equal(shelf_check(s), "");
    assert_string_equal(raw_text(s, "SELECT \"from\" || ' ' || \"to\" || ' ' || point || ' ' || "
                                    "text || ' ' || who FROM remarks WHERE number = 2"),
                        "2025-03-10 2025-03-12 EFF blower 2 tripped tester");
    assert_string_equal(raw_text(s, "SELECT kind || ' ' || reason FROM batches WHERE batch = 2"),
                        "remark blower 2 tripped");
}

/* A remark touches a span of days when they have one day in common. */
static void remarks_come_by_their_days(void **state)
{
    static const struct {
        const char *from, *to;
    } days[] = {{"2025-01-01", "2025-01-01"},
                {"2024-06-01", "2025-06-30"},
                {"2025-03-31", "2025-04-02"},
                {"2025-03-01", "2025-03-01"}};
    static const struct {
        const char *first, *last, *numbers;
    } cases[] = {
        {"", "", "3254"},
        {"2025-03-01", "2025-03-31", "354"},
        {"2025-04-01", "2025-04-30", "34"},
        {"2025-01-01", "2025-01-01", "32"},
        {"2025-07-01", "", ""},
        {"2025-06-30", "", "3"},
        {"", "2024-06-01", "3"},
        {"", "2024-05-31", ""},
        {"2025-04-03", "2025-04-03", "3"},
    };
    struct shelf *s = THIS;
    for (size_t i = 0; i < NELEM(days); i++)
        shelf_remark(s, REMARK_REMEDY, "", days[i].from, days[i].to, NULL, "x");
    struct book *b = shelf_open(s, BOOK_READ);
    for (size_t i = 0; i < NELEM(cases); i++) {
        const char *told = remarks_told(s, b, cases[i].first, cases[i].last);
        char numbers[10] = "";
        size_t count = 0;
        for (; *told; told = strchr(told, '\n') + 1)
            numbers[count++] = told[strlen("remark ")];
        assert_string_equal(numbers, cases[i].numbers);
    }
    book_close(b);
}

static void a_remark_taken_back_stays_with_the_reason(void **state)
{
    struct shelf *s = THIS;
    struct fault f = {0};
    int64_t id = shelf_remark(s, REMARK_CAUSE, "", "2025-03-10", "2025-03-10", NULL, "wrong plant");
    struct book *b = shelf_open(s, BOOK_WRITE);
    good(s, book_remark_withdraw(b, id, "it was the other plant", &tester, &s->fault));
    assert_string_equal(remarks_told(s, b, "", ""),
                        "remark 2 cause '' 2025-03-10..2025-03-10 '' '' '': wrong plant (tester, "
                        "2025-04-01T06:10:00Z) withdrawn: it was the other plant\n");
    assert_int_equal(book_remark_withdraw(b, id, "again", &tester, &f), FAULT);
    assert_string_equal(f.text, "remark 2 is withdrawn already (batch 3)");
    for (int64_t none = 0; none < 6; none++) {
        char said[80];
        if (none == id)
            continue;
        fault_clear(&f);
        assert_int_equal(book_remark_withdraw(b, none, "why", &tester, &f), FAULT);
        snprintf(said, sizeof said, "there is no remark %d; see 'weirbook remark --list'",
                 (int)none);
        assert_string_equal(f.text, said);
    }
    book_close(b);
    assert_string_equal(shelf_check(s), "");
    assert_string_equal(raw_text(s, "SELECT count(*) FROM batch"), "3");
    assert_string_equal(raw_text(s, "SELECT withdrawn FROM remarks"), "it was the other plant");
    assert_string_equal(raw_text(s, "SELECT kind || ' ' || subject || ' ' || reason FROM acts"),
                        "remark-withdraw 2 it was the other plant");
}

static void words_that_are_no_line_of_text_are_refused(void **state)
{
    static const struct {
        const char *text, *said;
    } cases[] = {
        {"", "the remark is missing; give it in a few words"},
        {NULL, "the remark is missing; give it in a few words"},
        {"two\nlines", "the remark holds a line break or control character, 'two\\x0Alines'; write "
                       "it in one line of plain UTF-8"},
        {"a\rb", "the remark holds a line break"},
        {"a\tb", "the remark holds a line break"},
        {"\x1b[31mred", "'\\x1B[31mred'"},
        {"\xff", "the remark holds a line break or control character, '\\xFF'"},
        {"\xe2\x80\xae right to left", "the remark holds a line break or control character"},
    };
    struct shelf *s = THIS;
    struct book_remark r = {.kind = REMARK_CAUSE, .from = 20000, .to = 20000};
    int64_t id = 0;
    struct book *b = shelf_open(s, BOOK_WRITE);
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct fault f = {0};
        r.text = cases[i].text;
        assert_int_equal(book_remark_add(b, &r, &tester, &id, &f), FAULT);
        if (!strstr(f.text, cases[i].said))
            fail_msg("%s\nwithout\n%s", f.text, cases[i].said);
    }
    struct fault f = {0};
    const struct author odd = {"K\nL", tester.when};
    r.text = "fine";
    assert_int_equal(book_remark_add(b, &r, &odd, &id, &f), FAULT);
    assert_non_null(strstr(f.text, "the name holds a line break"));
    fault_clear(&f);
    char *longest = arena_alloc(s->arena, 4002);
    memset(longest, 'x', 4001);
    r.text = longest;
    assert_int_equal(book_remark_add(b, &r, &tester, &id, &f), FAULT);
    assert_string_equal(f.text, "the remark has more than 4000 bytes; shorten it");
    longest[4000] = '\0';
    good(s, book_remark_add(b, &r, &tester, &id, &s->fault));
    book_close(b);
    assert_string_equal(raw_text(s, "SELECT count(*) FROM batch"), "2");
}

static void a_remark_that_makes_no_sense_is_refused(void **state)
{
    static const struct {
        struct book_remark remark;
        const char *said;
    } cases[] = {
        {{.kind = REMARK_EVENT, .text = "x", .from = 1, .to = 1}, "the event is missing"},
        {{.kind = REMARK_REMEDY, .event = "spill", .text = "x", .from = 1, .to = 1},
         "a remedy is no event; leave the event out"},
        {{.text = "x", .from = 2, .to = 1}, "the remark ends before it begins"},
        {{.text = "x", .from = DAY_NONE, .to = 1}, "the remark is of no day"},
        {{.text = "x", .from = 1, .to = DAY_NONE}, "the remark is of no day"},
        {{.text = "x", .point = "E\nF", .from = 1, .to = 1}, "the point holds a line break"},
    };
    struct shelf *s = THIS;
    struct book *b = shelf_open(s, BOOK_WRITE);
    for (size_t i = 0; i < NELEM(cases); i++) {
        struct fault f = {0};
        int64_t id = 0;
        assert_int_equal(book_remark_add(b, &cases[i].remark, &tester, &id, &f), FAULT);
        if (!strstr(f.text, cases[i].said))
            fail_msg("%s\nwithout\n%s", f.text, cases[i].said);
    }
    book_close(b);
    assert_string_equal(raw_text(s, "SELECT count(*) FROM batch"), "1");
}

static void an_answer_to_a_doubt_is_kept(void **state)
{
    struct shelf *s = THIS;
    int64_t batch = 0;
    struct fault f = {0};
    struct book *b = shelf_open(s, BOOK_WRITE);
    good(s, book_answer_add(b, "EFF-BOD5-2025-03-10-range", "checked the bench sheet", &tester,
                            &batch, &s->fault));
    assert_int_equal(batch, 2);
    good(s, book_answer_add(b, "EFF-BOD5-2025-03-10-range", "and once more", &tester, &batch,
                            &s->fault));
    assert_int_equal(book_answer_add(b, "x", "a\nb", &tester, &batch, &f), FAULT);
    assert_non_null(strstr(f.text, "the reason holds a line break"));
    fault_clear(&f);
    assert_int_equal(book_answer_add(b, "", "b", &tester, &batch, &f), FAULT);
    assert_non_null(strstr(f.text, "the doubt is missing"));
    assert_string_equal(answers_told(s, b),
                        "answer 2 to EFF-BOD5-2025-03-10-range: checked the bench sheet (tester, "
                        "2025-04-01T06:10:00Z)\n"
                        "answer 3 to EFF-BOD5-2025-03-10-range: and once more (tester, "
                        "2025-04-01T06:10:00Z)\n");
    book_close(b);
    assert_string_equal(shelf_check(s), "");
    assert_string_equal(raw_text(s, "SELECT group_concat(reason) FROM answers"),
                        "checked the bench sheet,and once more");
}

/* What the check names is never handed over either. */
static void a_damaged_act_is_named_and_never_handed_over(void **state)
{
    static const struct {
        const char *table, *sql, *check, *reading;
    } cases[] = {
        {"remark", "UPDATE remark SET text = 'blower 3' WHERE batch = 2",
         "remark 2 :0: this remark, 'blower 3', is not what was written; go back to a sound copy\n",
         "the remark of batch 2 is not what was written"},
        {"remark", "UPDATE remark SET first_day = first_day - 1 WHERE batch = 2", "remark 2 ",
         "the remark of batch 2"},
        {"remark", "UPDATE remark SET last_day = last_day + 1 WHERE batch = 2", "remark 2 ",
         "the remark of batch 2"},
        {"remark", "UPDATE remark SET point = 'INF' WHERE batch = 2", "remark 2 ", "batch 2"},
        {"remark", "UPDATE remark SET parameter = 'TSS' WHERE batch = 2", "remark 2 ", "batch 2"},
        {"remark", "UPDATE remark SET statistic = 'daily' WHERE batch = 2", "remark 2 ", "batch 2"},
        {"remark", "UPDATE remark SET kind = 'remedy' WHERE batch = 2", "remark 2 ", "batch 2"},
        {"remark", "UPDATE remark SET kind = 'event', event = 'spill' WHERE batch = 2", "remark 2 ",
         "batch 2"},
        {"remark", "UPDATE remark SET mark = 7 WHERE batch = 2", "remark 2 ", "batch 2"},
        {"remark", "DELETE FROM remark WHERE batch = 2",
         "batch 2 :0: nothing says what came with it", NULL},
        {"act", "UPDATE act SET reason = 'none'",
         "act 3 :0: this act, 'none', is not what was written", "the act of batch 3"},
        {"act", "UPDATE act SET subject = 1", "act 3 ", NULL},
        {"act", "UPDATE act SET readings = 1", "act 3 ", "the act of batch 3"},
        {"act", "UPDATE act SET readings = 1", "reading 3 :0: 1 of its 1 readings are missing",
         NULL},
        {"act", "UPDATE act SET first_reading = 9", "act 3 ", "the act of batch 3"},
        {"act", "DELETE FROM act", "batch 3 :0: nothing says what came with it", NULL},
        {"act", "INSERT INTO act VALUES (4, 'x', NULL, 0, 0, 0)",
         "batch 4 :0: nothing says what came with it", NULL},
        {"answer", "UPDATE answer SET reason = 'none'",
         "answer 4 :0: this answer, 'none', is not what was written",
         "the answer of batch 4 is not what was written"},
        {"answer", "UPDATE answer SET doubt = 'd2'", "answer 4 ", "the answer of batch 4"},
        {"answer", "UPDATE answer SET mark = 7", "answer 4 ", "the answer of batch 4"},
        {"answer", "DELETE FROM answer", "batch 4 :0: what stands in it", NULL},
        {"batch", "UPDATE batch SET kind = 'answer' WHERE id = 2",
         "batch 2 :0: nothing says what came with it", NULL},
        {"batch", "UPDATE batch SET kind = 'withdraw' WHERE id = 3",
         "batch 3 :0: what stands in it is not what its hash was made of", NULL},
        {"batch", "UPDATE batch SET who = 'X' WHERE id = 2", "batch 2 :0: what stands", NULL},
    };
    static const char *const place[3] = {"EFF", "BOD5", "monthly-average"};
    (void)state;
    for (size_t i = 0; i < NELEM(cases); i++) {
        void *shelf = NULL;
        struct fault f = {0};
        int64_t batch;
        shelf_setup(&shelf);
        shelf_remark(shelf, REMARK_CAUSE, "", "2025-03-10", "2025-03-10", place, "blower 2");
        struct book *b = shelf_open(shelf, BOOK_WRITE);
        good(shelf, book_remark_withdraw(b, 2, "other plant", &tester, &f));
        good(shelf, book_answer_add(b, "d1", "seen", &tester, &batch, &f));
        book_close(b);
        tamper(shelf, cases[i].table, cases[i].sql);
        const char *told = shelf_check(shelf);
        if (!strstr(told, cases[i].check))
            fail_msg("%s\ngave\n%s\nwithout\n%s", cases[i].sql, told, cases[i].check);
        if (cases[i].reading) {
            assert_null(shelf_told(shelf, &f));
            assert_non_null(strstr(f.text, cases[i].reading));
        }
        shelf_teardown(&shelf);
    }
}

int main(void)
{
#define SHELVED(test) cmocka_unit_test_setup_teardown(test, shelf_setup, shelf_teardown)
    const struct CMUnitTest tests[] = {
        SHELVED(a_remark_is_kept_with_author_and_time),
        SHELVED(remarks_come_by_their_days),
        SHELVED(a_remark_taken_back_stays_with_the_reason),
        SHELVED(words_that_are_no_line_of_text_are_refused),
        SHELVED(a_remark_that_makes_no_sense_is_refused),
        SHELVED(an_answer_to_a_doubt_is_kept),
        cmocka_unit_test(a_damaged_act_is_named_and_never_handed_over),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
