/* discharge: days without discharge, days with any entry, and which meter serves a point. */
#include "frame/store.h"

#include "base/poison.h"

static uint8_t *mark_of(const struct frame *f, int point, day_t day)
{
    return f->marks + (size_t)point * (size_t)(f->last - f->first + 1) + (size_t)(day - f->first);
}

/* The parameter that measures the point's own flow on any of the days (R40), or -1. */
static int own_flow(const struct frame *f, int point, day_t first, day_t last)
{
    int found = -1;

    if (f->flow_parameter >= 0 &&
        column_has(frame_column(f, point, f->flow_parameter), first, last))
        return f->flow_parameter;
    for (size_t i = 0; i < f->plant->parameter_count; i++) {
        const struct unit *unit = f->plant->parameters[i].unit;

        if (!unit || !text_equal(unit->kind, "flow") ||
            !column_has(frame_column(f, point, (int)i), first, last))
            continue;
        if (found >= 0) /* two, and neither is FLOW: none is the point's flow */
            return -1;
        found = (int)i;
    }
    return found;
}

/* Code C in a flow or a result marks the day (R23). EPA's no-data indicators: C is no discharge. */
static void mark_entries(struct frame *f, const struct column *c)
{
    for (day_t day = c->first < f->first ? f->first : c->first; day <= c->last; day++) {
        size_t count;
        const struct reading *const *r = column_day(c, day, &count);

        for (size_t i = 0; i < count; i++) {
            const struct no_data_code *code =
                r[i]->qualifier == QUALIFIER_CODE ? no_data_code(r[i]->code) : NULL;

            *mark_of(f, c->point, day) |= MARK_ENTRY;
            if (code && code->effect == CODE_NO_DISCHARGE)
                *mark_of(f, c->point, day) |= MARK_NO_DISCHARGE;
        }
    }
}

/* A flow of 0 marks the day too (G10); a flow above 0 takes the mark away again (R39). */
static void mark_flow(struct frame *f, const struct column *c)
{
    const struct rules *rules = &f->plant->parameters[c->parameter].rules;

    for (day_t day = c->first < f->first ? f->first : c->first; day <= c->last; day++) {
        struct day_value v;

        if (!day_work(f, c, day, rules, NULL, &v))
            continue;
        if (fraction_sign(v.amount.number) > 0)
            *mark_of(f, c->point, day) &= (uint8_t)~MARK_NO_DISCHARGE;
        else if (fraction_sign(v.amount.number) == 0 && !v.amount.part_less)
            *mark_of(f, c->point, day) |= MARK_NO_DISCHARGE;
    }
}

/* Only where water leaves the works does a flow of 0 mean no discharge: a waste pump at rest, or an
 * influent meter at 0, is a flow of 0 and nothing more. */
static bool discharges(const struct point *p)
{
    bool river = p->role == ROLE_UPSTREAM || p->role == ROLE_DOWNSTREAM;

    return p->role == ROLE_EFFLUENT || (*p->outfall != '\0' && !river);
}

void discharge_mark(struct frame *f)
{
    for (size_t i = 0; i < f->column_count; i++)
        mark_entries(f, &f->columns[i]);
    for (size_t i = 0; i < f->plant->point_count; i++) {
        int parameter = own_flow(f, (int)i, f->first, f->last);

        if (parameter >= 0 && discharges(&f->plant->points[i]))
            mark_flow(f, frame_column(f, (int)i, parameter));
    }
}

static bool marked(const struct frame *f, int point, day_t day, uint8_t mark)
{
    return day >= f->first && day <= f->last && (*mark_of(f, point, day) & mark) != 0;
}

bool frame_no_discharge(const struct frame *f, int point, day_t day)
{
    return marked(f, point, day, MARK_NO_DISCHARGE);
}

bool frame_entry(const struct frame *f, int point, day_t day)
{
    return marked(f, point, day, MARK_ENTRY);
}

bool frame_flow_within(const struct frame *f, int point, const struct rules *rules, day_t first,
                       day_t last, int *flow_point, int *flow_parameter)
{
    *flow_point = point;
    *flow_parameter = own_flow(f, point, first, last);
    if (*flow_parameter < 0 && rules->word[RULE_FLOW] >= 0) {
        *flow_point = rules->word[RULE_FLOW];
        *flow_parameter = own_flow(f, *flow_point, first, last);
    }
    return *flow_parameter >= 0;
}

bool frame_flow_of(const struct frame *f, int point, const struct rules *rules, int *flow_point,
                   int *flow_parameter)
{
    return frame_flow_within(f, point, rules, f->first, f->last, flow_point, flow_parameter);
}
