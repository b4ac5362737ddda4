/* span: the months from one to another, for `permit --to`: each judged by itself, then side by
 * side. */
#include "command/month.h"
#include "command/session.h"

#include "base/poison.h"

enum { SPAN_MONTHS_MOST = 60 };

enum status span_print(struct session *s, const struct plant *plant, day_t first, day_t last,
                       day_t on, int as, struct fault *f)
{
    struct permit_month *months = NULL;
    size_t count = 0;
    size_t room = 0;
    struct permit_span span;

    if (last < first)
        return fault_usage(f, "name a month that is not before --month", "--to is before --month");
    for (day_t month = first; month <= last; month = month_last(month) + 1) {
        struct frame *frame = NULL;

        if (count == SPAN_MONTHS_MOST)
            return fault_usage(f, "ask for fewer", "at most %d months stand side by side",
                               SPAN_MONTHS_MOST);
        struct permit_month *m = arena_push(s->arena, &months, &count, &room, sizeof *months);
        if (month_judge(s, plant, month, on, &frame, m, f) != OK)
            return FAULT;
    }
    permit_span(s->arena, months, count, &span);
    session_print(s, as, as == AS_TEXT || as < 0 ? report_span_page(s->arena, plant, &span) : NULL,
                  report_span_table(s->arena, &span));
    s->found = span.exceeded > 0 || span.shortfalls > 0;
    return OK;
}
