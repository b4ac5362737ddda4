/* rows: a month worked from text, and its rows as text, one line each:
 *     FROM..TO [@ON] FIGURE VERDICT [xTIMES] SAMPLES[/REQUIRED]
 * with dates as MM-DD and "-" for no figure. The same case in many tests is one line of a table. */
#ifndef WEIRBOOK_TESTS_ROWS_H
#define WEIRBOOK_TESTS_ROWS_H

#include "frame/made.h"
#include "permit/permit.h"

struct month_case {
    const char *source; /* published source, or "common practice, no source" */
    const char *month, *fields, *limits, *readings, *expected;
};

static inline void made_dates(struct text *t, const struct permit_row *r)
{
    char from[11], to[11], on[11];

    day_write(r->from, from);
    day_write(r->to, to);
    text_print(t, "%s..%s ", from + 5, to + 5);
    if (r->on != DAY_NONE) {
        day_write(r->on, on);
        text_print(t, "@%s ", on + 5);
    }
}

static inline const char *rows_text(struct arena *a, const struct permit_month *pm)
{
    struct text t;
    char *out;

    text_init(&t, SIZE_MAX);
    for (size_t i = 0; i < pm->count; i++) {
        const struct permit_row *r = &pm->rows[i];

        text_add(&t, i > 0 ? "\n" : "");
        made_dates(&t, r);
        text_print(&t, "%s %s ", *r->figure ? r->figure : "-", verdict_words[r->verdict]);
        if (r->has_times)
            text_print(&t, "x%ld ", r->times);
        text_print(&t, "%ld", r->samples);
        if (r->has_required)
            text_print(&t, "/%ld", r->required);
    }
    out = arena_bytes(a, t.at, t.length);
    text_free(&t);
    return out;
}

/* The frame of what the month needs, and nothing else. */
static inline struct frame *needed_frame(struct made *m)
{
    struct frame_span *needs;
    struct frame *f;
    size_t count;
    day_t first = m->month, last = month_last(m->month);

    permit_needs(m->arena, m->plant, m->month, &needs, &count);
    for (size_t i = 0; i < count; i++) {
        first = needs[i].first < first ? needs[i].first : first;
        last = needs[i].last > last ? needs[i].last : last;
    }
    f = frame_new(m->arena, m->plant, first, last);
    for (size_t i = 0; i < m->count; i++)
        for (size_t j = 0; j < count; j++)
            if (needs[j].point == m->readings[i].point &&
                needs[j].parameter == m->readings[i].parameter &&
                needs[j].first <= m->readings[i].day && m->readings[i].day <= needs[j].last)
                frame_add(f, &m->readings[i]);
    frame_close(f);
    return f;
}

static inline enum status work_month(struct made *m, const char *on, struct permit_month *out,
                                     struct fault *f)
{
    day_t judged;

    assert_true(day_parse(on, &judged));
    return permit_month(m->arena, needed_frame(m), m->month, judged, out, f);
}

static inline void check_month(const struct month_case *c, const char *on)
{
    struct made *m = made_plant(c->month, c->fields, c->limits, "");
    struct permit_month pm;
    struct fault f = {0};
    const char *got;

    made_readings(m, c->readings);
    if (work_month(m, on, &pm, &f) != OK)
        fail_msg("%s: %s", c->source, f.text);
    got = rows_text(m->arena, &pm);
    if (!text_equal(got, c->expected))
        fail_msg("%s\n%s\n%s\n%s\nexpected:\n%s\ngot:\n%s", c->source, c->fields, c->limits,
                 c->readings, c->expected, got);
    made_free(m);
}

static inline void check_months(const struct month_case *cases, size_t count)
{
    for (size_t i = 0; i < count; i++)
        check_month(&cases[i], "2035-01-01");
}

#endif
