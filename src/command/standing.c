/* standing: `permit --count` and `permit --standing`: what exceedances count as, and six months
 * beside the federal screening criteria. */
#include "command/month.h"
#include "command/session.h"

#include <string.h>

#include "base/poison.h"

enum status count_print(struct session *s, const struct plant *plant, day_t month, day_t on, int as,
                        struct fault *f)
{
    struct frame *frame = NULL;
    struct permit_month m = {0};
    struct permit_count *counts = NULL;
    if (month_judge(s, plant, month, on, &frame, &m, f) != OK)
        return FAULT;
    size_t count = permit_counts(s->arena, &m, &counts);
    session_print(s, as, report_count_page(s->arena, plant, &m, counts, count),
                  report_count_table(s->arena, counts, count));
    s->found = m.exceeded > 0 || m.shortfalls > 0;
    return OK;
}

/* PARAMETER=I, II or neither. */
static enum status set_group(struct session *s, const struct plant *plant, const char *text,
                             enum pollutant_group *groups, struct fault *f)
{
    const char *sign = strchr(text, '=');
    if (sign == NULL)
        return fault_usage(f, "write it as PARAMETER=GROUP, such as CU=II",
                           "--group cannot read '%s'", text);
    const char *id = arena_bytes(s->arena, text, (size_t)(sign - text));
    int parameter = plant_parameter(plant, id);
    if (parameter < 0) {
        const char *near = plant_nearest_parameter(plant, id);
        return fault_usage(f,
                           near ? arena_print(s->arena, "the nearest is '%s'", near)
                                : "take one of the plant's",
                           "--group: no parameter '%s'", id);
    }
    for (int i = 0; i < POLLUTANT_GROUPS; i++)
        if (text_equal_nocase(group_words[i], sign + 1)) {
            groups[parameter] = (enum pollutant_group)i;
            return OK;
        }
    return fault_usage(f, "write I, II or neither", "--group: no group '%s'", sign + 1);
}

enum status standing_print(struct session *s, const struct plant *plant, day_t month, day_t on,
                           int as, const struct option_texts *group, struct fault *f)
{
    struct frame_span *needs = NULL;
    struct frame *frame = NULL;
    struct permit_standing standing = {0};
    enum pollutant_group *groups = permit_groups(s->arena, plant);
    size_t count = 0;
    day_t judged = on == DAY_NONE ? clock_today() : on;
    for (size_t i = 0; i < group->count; i++)
        if (set_group(s, plant, group->at[i], groups, f) != OK)
            return FAULT;
    permit_standing_needs(s->arena, plant, month, &needs, &count);
    if (session_frame(s, plant, needs, count, month_step(month, 1 - STANDING_MONTHS),
                      month_last(month), &frame, f) != OK ||
        permit_standing(s->arena, frame, month, judged, groups, &standing, f) != OK)
        return FAULT;
    session_print(s, as, report_standing_page(s->arena, plant, &standing),
                  report_standing_table(s->arena, &standing));
    s->found = standing.exceeding > 0;
    return OK;
}
