/* What people have remarked, read for the pages that print it beside figures. A withdrawn remark
 * stays in the book and in the history, and is printed on no page. */
#include "command/month.h"

#include <string.h>

#include "base/poison.h"

struct gathering {
    struct arena *arena;
    struct month_remarks *to;
};

static enum status gather(void *context, const struct book_remark *from, struct fault *f)
{
    struct gathering *g = context;
    struct arena *a = g->arena;
    (void)f;
    if (from->withdrawn)
        return OK;
    struct month_remark *r =
        arena_push(a, &g->to->at, &g->to->count, &g->to->room, sizeof *g->to->at);
    *r = (struct month_remark){
        .number = (long)from->id,
        .kind = remark_kind_words[from->kind],
        .event = arena_text(a, from->event),
        .from = from->from,
        .to = from->to,
        .point = arena_text(a, from->point),
        .parameter = arena_text(a, from->parameter),
        .statistic = arena_text(a, from->statistic),
        .text = arena_text(a, from->text),
        .who = arena_text(a, from->who),
        .when = arena_text(a, from->when),
    };
    return OK;
}

enum status remarks_read(struct session *s, day_t first, day_t last, struct month_remarks *out,
                         struct fault *f)
{
    struct gathering g = {.arena = s->arena, .to = out};
    *out = (struct month_remarks){0};
    return book_remarks(s->book, first, last, gather, &g, f);
}

enum status month_remarks(struct session *s, const struct permit_month *month,
                          struct month_remarks *out, struct fault *f)
{
    day_t first = month->month, last = month_last(month->month);
    for (size_t i = 0; i < month->count; i++) {
        const struct permit_row *row = &month->rows[i];
        first = row->from < first ? row->from : first;
        last = row->to > last ? row->to : last;
    }
    return remarks_read(s, first, last, out, f);
}

/* A remark that names no point, or no parameter, is about all of them. */
static bool is_about(const char *named, const char *asked)
{
    return *named == '\0' || strcmp(named, asked) == 0;
}

enum status remarks_about(struct session *s, const char *point, const char *parameter, day_t first,
                          day_t last, const char *const **line, size_t *count, struct fault *f)
{
    struct month_remarks all;
    if (remarks_read(s, first, last, &all, f) != OK)
        return FAULT;
    const char **at = arena_alloc(s->arena, (all.count + 1) * sizeof *at);
    *count = 0;
    for (size_t i = 0; i < all.count; i++)
        if (is_about(all.at[i].point, point) && is_about(all.at[i].parameter, parameter))
            at[(*count)++] = remark_line(s->arena, &all.at[i]);
    *line = at;
    return OK;
}

const char *remark_line(struct arena *a, const struct month_remark *r)
{
    return arena_print(a, "remark %ld, %s%s%s: %s", r->number, r->kind, *r->event ? " " : "",
                       r->event, r->text);
}
