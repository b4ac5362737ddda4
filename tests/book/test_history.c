/* The history: everything that was done, oldest first, as asked for. */
#include "book/books.h"
#include "book/store.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

#define THIS ((struct shelf *)*state)

static const struct book_history all = {
    .first = DAY_NONE, .last = DAY_NONE, .point = -1, .parameter = -1};

static enum status tell(void *context, const struct book_change *c, struct fault *f)
{
    char date[11] = "-";
    (void)f;
    if (c->day != DAY_NONE)
        day_write(c->day, date);
    text_print(context, "%d %s %s %d %d %s'%s'>'%s' (%s) %s:%ld %s %s\n", (int)c->batch, c->what,
               date, c->point, c->parameter, c->sample, c->old_text, c->new_text, c->reason,
               c->file, c->line, c->who, c->when + 11);
    return OK;
}

static const char *told(struct shelf *s, struct book_history ask)
{
    struct text t;
    struct plant_draft *draft;
    struct plant *plant;
    text_init(&t, 1 << 20);
    struct book *b = shelf_open(s, BOOK_READ);
    good(s, book_plant(b, s->arena, &draft, &plant, &s->fault));
    good(s, book_history(b, plant, &ask, tell, &t, &s->fault));
    book_close(b);
    const char *out = arena_text(s->arena, t.at);
    text_free(&t);
    return out;
}

static const char *batches_of(struct shelf *s, struct book_history ask)
{
    struct text t;
    text_init(&t, 1000);
    for (const char *at = told(s, ask); *at; at = strchr(at, '\n') + 1)
        text_print(&t, "%.*s ", (int)strcspn(strchr(at, ' ') + 1, " ") + 2, at);
    const char *out = arena_text(s->arena, t.at);
    text_free(&t);
    return out;
}

static void fill(struct shelf *s)
{
    static const char *const place[3] = {"EFF", "BOD5", ""};
    const struct author other = {"M.R.", tester.when};
    bool changed;
    int64_t batch;
    shelf_load(s, "a.csv", NULL, "EFF BOD5 2025-03-05 30.0 mg/L\nEFF TSS 2025-03-06 9 mg/L #g");
    shelf_load(s, "b.csv", "second look",
               "EFF BOD5 2025-03-05 3000 ug/L\nINF TSS 2025-03-07 5 mg/L");
    shelf_amend(s, "EFF TSS 2025-03-06 withdrawn mg/L #g", "bottle broke");
    shelf_remark(s, REMARK_EVENT, "spill", "2025-03-04", "2025-03-08", place, "a drum");
    struct book *b = shelf_open(s, BOOK_WRITE);
    good(s, book_remark_withdraw(b, 5, "no drum", &other, &s->fault));
    good(s, book_answer_add(b, "d1", "seen", &other, &batch, &s->fault));
    good(s,
         book_apply(
             b, draft_with(s->arena, PLANT_LIMITS, "001,EFF,TSS,concentration,daily,max,60,mg/L"),
             &tester, "renewed", &changed, &s->fault));
    book_close(b);
    shelf_withdraw(s, 3, "wrong file");
}

static void everything_comes_once_oldest_first(void **state)
{
    struct shelf *s = THIS;
    fill(s);
    int eff = plant_point(s->plant, "EFF"), inf = plant_point(s->plant, "INF");
    int bod = plant_parameter(s->plant, "BOD5"), tss = plant_parameter(s->plant, "TSS");
    const char *now = "tester 06:10:00Z";
    const char *want = arena_print(
        s->arena,
        "1 description - -1 -1 ''>'' (first description) :0 %s\n"
        "2 load - -1 -1 ''>'' () a.csv:0 %s\n"
        "3 load - -1 -1 ''>'' (second look) b.csv:0 %s\n"
        "3 revise 2025-03-05 %d %d '30.0 mg/L'>'3000 ug/L' (second look) b.csv:2 %s\n"
        "4 amend 2025-03-06 %d %d g'9 mg/L'>'withdrawn' (bottle broke) :0 %s\n"
        "5 remark 2025-03-04 %d %d ''>'event spill: a drum' () :0 %s\n"
        "6 remark 2025-03-04 %d %d 'event spill: a drum'>'withdrawn' (no drum) :0 M.R. 06:10:00Z\n"
        "7 answer - -1 -1 ''>'d1' (seen) :0 M.R. 06:10:00Z\n"
        "8 description - -1 -1 ''>'' (renewed) :0 %s\n",
        now, now, now, eff, bod, now, eff, tss, now, eff, bod, now, eff, bod, now);
    const char *got = told(s, all);
    if (strncmp(got, want, strlen(want)) != 0)
        fail_msg("%s\nand not\n%s", got, want);
    got += strlen(want);
    assert_non_null(strstr(got, "'001,EFF,TSS,concentration,daily,max,60,mg/L' (renewed)"));
    const char *end =
        arena_print(s->arena,
                    "9 withdraw - -1 -1 'batch 3'>'withdrawn' (wrong file) :0 %s\n"
                    "9 withdraw 2025-03-05 %d %d '3000 ug/L'>'30.0 mg/L' (wrong file) :0 %s\n"
                    "9 withdraw 2025-03-07 %d %d '5 mg/L'>'withdrawn' (wrong file) :0 %s\n",
                    now, eff, bod, now, inf, tss, now);
    assert_string_equal(strstr(got, "9 withdraw"), end);
}

static void only_what_is_asked_for_comes(void **state)
{
    struct shelf *s = THIS;
    struct book_history ask;
    fill(s);
    int eff = plant_point(s->plant, "EFF"), bod = plant_parameter(s->plant, "BOD5");
    day_t day = 0;
    assert_true(day_parse("2025-03-05", &day));
    ask = all;
    ask.batch = 4;
    assert_string_equal(batches_of(s, ask), "4 amend ");
    ask.batch = 99;
    assert_string_equal(batches_of(s, ask), "");
    ask = all;
    ask.who = "M.R.";
    assert_string_equal(batches_of(s, ask), "6 remark 7 answer ");
    ask = all;
    ask.first = ask.last = day;
    assert_string_equal(batches_of(s, ask), "3 revise 5 remark 6 remark 9 withdraw ");
    ask.every_reading = true;
    assert_string_equal(batches_of(s, ask), "2 load 3 revise 5 remark 6 remark 9 withdraw ");
    ask.point = eff;
    ask.parameter = bod;
    assert_string_equal(batches_of(s, ask), "2 load 3 revise 5 remark 6 remark 9 withdraw ");
    ask.every_reading = false;
    assert_string_equal(batches_of(s, ask), "3 revise 5 remark 6 remark 9 withdraw ");
    ask = all;
    ask.point = plant_point(s->plant, "INF");
    assert_string_equal(batches_of(s, ask), "9 withdraw ");
    ask.every_reading = true;
    assert_string_equal(batches_of(s, ask), "3 load 9 withdraw ");
    ask = all;
    ask.first = day + 2;
    assert_string_equal(batches_of(s, ask), "5 remark 6 remark 9 withdraw ");
}

static void the_history_stops_where_the_book_is_read_as_of(void **state)
{
    struct shelf *s = THIS;
    struct text t;
    fill(s);
    struct book *b = shelf_open(s, BOOK_READ);
    text_init(&t, 4000);
    good(s, book_as_of(b, 2, &s->fault));
    good(s, book_history(b, s->plant, &all, tell, &t, &s->fault));
    book_close(b);
    assert_null(strstr(t.at, "3 load"));
    assert_non_null(strstr(t.at, "2 load"));
    text_free(&t);
}

static void a_damaged_value_is_not_told(void **state)
{
    static const char *const damage[][2] = {
        {"reading", "UPDATE reading SET value = '31' WHERE id = 1"},
        {"reading", "UPDATE reading SET value = '31' WHERE id = 3"},
        {"act", "UPDATE act SET reason = 'x' WHERE batch = 4"},
        {"remark", "UPDATE remark SET text = 'x'"},
        {"answer", "UPDATE answer SET reason = 'x'"},
        {"plant_limit", "UPDATE plant_limit SET unit = 'x' WHERE batch = 1"},
    };
    (void)state;
    for (size_t i = 0; i < NELEM(damage); i++) {
        void *shelf = NULL;
        struct text t;
        struct fault f = {0};
        shelf_setup(&shelf);
        fill(shelf);
        tamper(shelf, damage[i][0], damage[i][1]);
        text_init(&t, 1 << 16);
        struct book *b = shelf_open(shelf, BOOK_READ);
        assert_int_equal(book_history(b, ((struct shelf *)shelf)->plant, &all, tell, &t, &f),
                         FAULT);
        assert_non_null(strstr(f.text, "is damaged"));
        book_close(b);
        text_free(&t);
        shelf_teardown(&shelf);
    }
}

/* ---- backups ---- */

static const char *copy_name(struct shelf *s)
{
    return arena_print(s->arena, "%s/copy.book", s->folder);
}

static void a_backup_is_the_same_book(void **state)
{
    struct shelf *s = THIS;
    struct stat st;
    fill(s);
    assert_int_equal(chmod(s->path, 0640), 0);
    const char *before = shelf_told(s, &s->fault);
    struct book *b = shelf_open(s, BOOK_READ);
    good(s, book_backup(b, copy_name(s), &s->fault));
    book_close(b);
    assert_int_equal(stat(copy_name(s), &st), 0);
    assert_int_equal(st.st_mode & 0777, 0640);
    snprintf(s->path, sizeof s->path, "%s", copy_name(s));
    assert_string_equal(shelf_told(s, &s->fault), before);
    assert_string_equal(shelf_check(s), "");
    assert_string_equal(shelf_load(s, "z.csv", NULL, "EFF TSS 2025-05-01 1 mg/L"), "A");
    assert_int_equal(system(arena_print(s->arena, "test $(ls -A '%s' | wc -l) = 2", s->folder)), 0);
}

static void a_backup_is_never_put_over_a_file(void **state)
{
    struct shelf *s = THIS;
    struct fault f = {0};
    file_write(copy_name(s), "mine", 4);
    struct book *b = shelf_open(s, BOOK_READ);
    assert_int_equal(book_backup(b, copy_name(s), &f), FAULT);
    assert_string_equal(
        f.text, arena_print(s->arena, "'%s' exists already; choose another name", copy_name(s)));
    fault_clear(&f);
    assert_int_equal(book_backup(b, arena_print(s->arena, "%s/none/x.book", s->folder), &f), FAULT);
    assert_non_null(strstr(f.text, "cannot make"));
    book_close(b);
    same_file(copy_name(s), (const uint8_t *)"mine", 4);
}

static void a_damaged_book_is_not_backed_up(void **state)
{
    struct shelf *s = THIS;
    struct fault f = {0};
    fill(s);
    tamper(s, "reading", "UPDATE reading SET value = '31' WHERE id = 1");
    struct book *b = shelf_open(s, BOOK_READ);
    assert_int_equal(book_backup(b, copy_name(s), &f), FAULT);
    assert_non_null(strstr(f.text, "is not what was loaded"));
    book_close(b);
    assert_int_equal(system(arena_print(s->arena, "test $(ls -A '%s' | wc -l) = 1", s->folder)), 0);
}

int main(void)
{
#define SHELVED(test) cmocka_unit_test_setup_teardown(test, shelf_setup, shelf_teardown)
    const struct CMUnitTest tests[] = {
        SHELVED(everything_comes_once_oldest_first),
        SHELVED(only_what_is_asked_for_comes),
        SHELVED(the_history_stops_where_the_book_is_read_as_of),
        cmocka_unit_test(a_damaged_value_is_not_told),
        SHELVED(a_backup_is_the_same_book),
        SHELVED(a_backup_is_never_put_over_a_file),
        SHELVED(a_damaged_book_is_not_backed_up),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
