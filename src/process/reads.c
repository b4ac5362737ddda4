/* Which columns of a book the process table can use, so that a command need not read the others. */
#include "process/plans.h"
#include "process/roles.h"

#include "base/poison.h"

static bool is_kind(const struct parameter *p, const char *kind)
{
    return p->unit && text_equal(p->unit->kind, kind);
}

static bool has_span(const struct plant *p, const struct frame_span *spans, size_t count, int point,
                     const char *parameter)
{
    int index = parameter ? plant_parameter(p, parameter) : -1;
    for (size_t i = 0; i < count && index >= 0; i++)
        if (spans[i].point == point && spans[i].parameter == index)
            return true;
    return false;
}

/* Whether the point has every reading the plan cannot do without. */
static bool can_serve(const struct plant *p, const struct plan *plan,
                      const struct frame_span *spans, size_t count, int point)
{
    for (size_t i = 0; i < FEEDS_MOST && plan->feed[i].argument; i++) {
        const struct feed *feed = &plan->feed[i];
        if (feed->supply == SUPPLY_READ && !feed->spare &&
            !has_span(p, spans, count, point, feed->parameter) &&
            !has_span(p, spans, count, point, feed->or_else))
            return false;
    }
    return true;
}

static bool takes(const struct plan *plan, const char *parameter)
{
    for (size_t i = 0; i < FEEDS_MOST && plan->feed[i].argument; i++) {
        const struct feed *feed = &plan->feed[i];
        if ((feed->parameter && text_equal(feed->parameter, parameter)) ||
            (feed->or_else && text_equal(feed->or_else, parameter)))
            return true;
    }
    return plan->unless && text_equal(plan->unless, parameter);
}

/* `parameter` NULL: whether the point has any line of its own. */
static bool of_a_point(const struct plant *p, const struct frame_span *spans, size_t count,
                       int point, const char *parameter)
{
    for (size_t i = 0; i < plan_count(); i++) {
        const struct plan *plan = plan_at(i);
        if (plan->extent == FOR_POINT && (plan->roles & (1u << p->points[point].role)) &&
            (parameter == NULL || takes(plan, parameter)) &&
            can_serve(p, plan, spans, count, point))
            return true;
    }
    return false;
}

/* Points that a basin, a rule or one of the plant's own figures names. */
static bool is_named(const struct plant *p, int point)
{
    for (size_t i = 0; i < p->basin_count; i++)
        if (p->basins[i].point == point)
            return true;
    for (size_t i = 0; i < p->process_count; i++)
        if (p->process[i].source == SOURCE_READING && p->process[i].point == point)
            return true;
    for (size_t i = 0; i < p->parameter_count; i++)
        if (p->parameters[i].rules.word[RULE_FLOW] == point ||
            p->parameters[i].rules.word[RULE_INFLUENT] == point)
            return true;
    return p->rules.word[RULE_FLOW] == point || p->rules.word[RULE_INFLUENT] == point ||
           roles_filtrate(p) == point;
}

static bool is_read(const struct plant *plant, const struct frame_span *spans, size_t count,
                    const struct frame_span *span)
{
    const struct point *at = &plant->points[span->point];
    const struct parameter *of = &plant->parameters[span->parameter];
    bool beside =
        at->role == ROLE_OTHER || at->role == ROLE_UPSTREAM || at->role == ROLE_DOWNSTREAM;
    if (!beside || *at->outfall || is_named(plant, span->point))
        return true;
    /* A flow may weigh the other readings of its point. */
    return of_a_point(plant, spans, count, span->point, is_kind(of, "flow") ? NULL : of->id);
}

size_t process_reads(const struct plant *plant, const struct frame_span *spans, size_t count,
                     struct frame_span *out)
{
    size_t kept = 0;
    for (size_t i = 0; i < count; i++)
        if (is_read(plant, spans, count, &spans[i]))
            out[kept++] = spans[i];
    return kept;
}
