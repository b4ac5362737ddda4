/* compare: `permit --what-if` and `permit --rules`: the month under other rules. */
#include "command/month.h"
#include "command/session.h"

#include "base/poison.h"

static enum status read_rules(struct session *s, const struct plant *plant,
                              const struct option_texts *given, struct rules *out, struct fault *f)
{
    for (size_t i = 0; i < given->count; i++)
        if (plant_rules_read(s->arena, plant, "--what-if", given->at[i], out, f) != OK)
            return FAULT;
    return OK;
}

static const char *in_a_row(struct arena *a, const struct option_texts *given)
{
    const char *all = given->at[0];
    for (size_t i = 1; i < given->count; i++)
        all = arena_print(a, "%s, %s", all, given->at[i]);
    return all;
}

enum status compare_print(struct session *s, const struct plant *plant, day_t month, day_t on,
                          int as, const struct option_texts *what_if, struct fault *f)
{
    struct frame_span *needs = NULL;
    struct frame *frame = NULL;
    struct rules *other = NULL;
    struct permit_comparison c = {0};
    size_t count = 0;
    day_t judged = on == DAY_NONE ? clock_today() : on;
    bool asked = what_if->count > 0;
    if (asked) {
        other = arena_alloc(s->arena, sizeof *other);
        if (read_rules(s, plant, what_if, other, f) != OK)
            return FAULT;
    }
    permit_needs_under(s->arena, plant, other, month, &needs, &count);
    if (session_frame(s, plant, needs, count, month, month_last(month), &frame, f) != OK)
        return FAULT;
    if ((asked ? permit_what_if(s->arena, frame, month, judged, other, &c, f)
               : permit_rules(s->arena, frame, month, judged, &c, f)) != OK)
        return FAULT;
    session_print(s, as,
                  asked ? report_what_if_page(s->arena, plant, &c, in_a_row(s->arena, what_if))
                        : report_rules_page(s->arena, plant, &c),
                  report_compare_table(s->arena, &c));
    s->found = c.verdicts > 0 || c.base.exceeded > 0 || c.base.shortfalls > 0;
    return OK;
}
