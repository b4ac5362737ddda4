/* A good part of a long book is read in one pass over its table, a small part by index: both give
 * the same readings. */
#include "book/books.h"

#include "book/store.h"

#include <string.h>

enum { DAYS = 3600, EACH = 6 }; /* readings a day */

static day_t day(const char *iso)
{
    day_t d;
    assert_true(day_parse(iso, &d));
    return d;
}

/* 21,600 readings, of which one is revised, one withdrawn and one a code. */
static void load_years(struct shelf *s, day_t first)
{
    struct text t;
    text_init(&t, (size_t)1 << 22);
    for (int i = 0; i < DAYS; i++) {
        char date[11];
        day_write(first + i, date);
        text_print(&t, "EFF TSS %s %d.5 mg/L @08:00\nEFF TSS %s <%d mg/L @16:00\n", date, i % 40,
                   date, 1 + i % 5);
        text_print(&t, "INF TSS %s %d mg/L\nINF BOD5 %s %d mg/L\nEFF BOD5 %s %s mg/L\n", date,
                   100 + i % 90, date, 150 + i % 70, date, i == 2000 ? "code:C" : "4.2");
        text_print(&t, "INF FLOW %s %d.25 MGD\n", date, 1000 + 2 * i);
    }
    assert_int_equal(strspn(shelf_load(s, "years.csv", NULL, t.at), "A"), EACH * DAYS);
    text_free(&t);
    char date[11];
    day_write(first + 2500, date);
    const char *change = arena_print(s->arena, "EFF TSS %s 77 mg/L @08:00", date);
    assert_string_equal(shelf_load(s, "change.csv", "weighed again", change), "R");
    change = arena_print(s->arena, "INF TSS %s withdrawn mg/L", date);
    assert_string_equal(shelf_load(s, "gone.csv", "wrong bottle", change), "R");
}

static struct frame *filled(struct shelf *s, const struct frame_span *spans, size_t count,
                            day_t first, day_t last, bool by_pass)
{
    struct book *b = shelf_open(s, BOOK_READ);
    struct frame *frame = frame_new(s->arena, s->plant, first, last);
    good(s, book_fill(b, s->arena, s->plant, spans, count, frame, &s->fault));
    assert_int_equal(b->statement[ALL_OF_DAYS] != NULL, by_pass);
    book_close(b);
    frame_close(frame);
    return frame;
}

/* Whether the day's readings are the same ones, in the same order. */
static bool same_day(const struct frame *one, const struct frame *other, const struct frame_span *s,
                     day_t on)
{
    size_t n, m;
    const struct reading *const *x = frame_readings(one, s->point, s->parameter, on, &n);
    const struct reading *const *y = frame_readings(other, s->point, s->parameter, on, &m);
    bool same = n == m;
    for (size_t i = 0; same && i < n; i++)
        same = x[i]->id == y[i]->id && x[i]->minute == y[i]->minute &&
               x[i]->version == y[i]->version && x[i]->qualifier == y[i]->qualifier &&
               text_equal(x[i]->text, y[i]->text) && text_equal(x[i]->file, y[i]->file);
    return same;
}

static void one_pass_gives_what_the_index_gives(void **state)
{
    struct shelf *s = *state;
    day_t start = day("2015-01-01"), first = start + 100, last = start + 3500, gap = start + 1800;
    int inf = plant_point(s->plant, "INF"), eff = plant_point(s->plant, "EFF");
    int tss = plant_parameter(s->plant, "TSS"), bod = plant_parameter(s->plant, "BOD5");
    int flow = plant_parameter(s->plant, "FLOW");
    load_years(s, start);
    /* The last is in two pieces, which a pass does not take. */
    const struct frame_span spans[] = {{inf, tss, first, last},    {inf, bod, first, last},
                                       {eff, bod, first, last},    {inf, flow, first, last},
                                       {eff, tss, first, gap - 1}, {eff, tss, gap + 1, last}};
    struct frame_span whole[] = {spans[0], spans[1], spans[2], spans[3], {eff, tss, first, last}};
    struct frame *by_pass = filled(s, whole, NELEM(whole), first, last, true);
    struct frame *by_index = filled(s, spans, NELEM(spans), first, last, false);
    const struct rules *rules = &s->plant->parameters[flow].rules;
    for (day_t on = first; on <= last; on++) {
        struct day_value x, y;
        for (size_t i = 0; i < NELEM(whole); i++)
            if ((i < 4 || on != gap) && !same_day(by_pass, by_index, &whole[i], on))
                fail_msg("day %d of span %zu differs", (int)(on - start), i);
        /* The first day's volume takes a count from before it. */
        frame_day(by_pass, inf, flow, on, rules, NULL, &x);
        frame_day(by_index, inf, flow, on, rules, NULL, &y);
        assert_true(x.state == DAY_VALUED && y.state == DAY_VALUED);
        assert_int_equal(fraction_compare(x.amount.number, y.amount.number), 0);
        assert_int_equal(fraction_compare(x.amount.number, fraction_from_int(s->arena, 2)), 0);
    }
}

static void a_month_of_a_long_book_is_read_by_index(void **state)
{
    struct shelf *s = *state;
    day_t start = day("2015-01-01");
    int eff = plant_point(s->plant, "EFF"), tss = plant_parameter(s->plant, "TSS");
    load_years(s, start);
    const struct frame_span month = {eff, tss, start + 3000, start + 3030};
    (void)filled(s, &month, 1, month.first, month.last, false);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test_setup_teardown(one_pass_gives_what_the_index_gives, shelf_setup,
                                        shelf_teardown),
        cmocka_unit_test_setup_teardown(a_month_of_a_long_book_is_read_by_index, shelf_setup,
                                        shelf_teardown),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
