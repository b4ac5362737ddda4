/* needs: which readings a month's rows are worked from. */
#include "permit/work.h"

#include "base/poison.h"

#define TOTALIZER_REACH 7 /* days before the first, to find the register's last reading */
#define DAYS_BESIDE     6 /* of a week that reaches over the ends of a row */

struct needs {
    const struct plant *plant;
    struct frame_span *span; /* by point and parameter; first > last: not needed */
};

static void need(struct needs *n, int point, day_t first, day_t last)
{
    for (size_t i = 0; i < n->plant->parameter_count; i++) {
        struct frame_span *s = &n->span[(size_t)point * n->plant->parameter_count + i];
        bool is_new = s->first > s->last;

        s->first = is_new || first < s->first ? first : s->first;
        s->last = is_new || last > s->last ? last : s->last;
    }
}

/* Whatever stands at a point can mark its day as one without discharge, or as one with an entry
 * (R23, R39): all its columns are needed. So are those of the points that lend a flow or an
 * influent. */
static void need_limit(struct needs *n, const struct limit *l, const struct period *p)
{
    day_t first = period_reach(n->plant, l, p);
    int lent = l->rules.word[RULE_FLOW];
    int influent = -1;
    struct fault unheard = {0}; /* a missing influent is told when the row is worked */

    /* A week asks for nothing when all of it is without discharge, and may reach over the ends. */
    bool by_week = l->samples.per == PER_WEEK;

    for (int i = 0; i < l->points; i++)
        need(n, l->point[i],
             by_week && p->from - DAYS_BESIDE < first ? p->from - DAYS_BESIDE : first,
             by_week ? p->to + DAYS_BESIDE : p->to);
    if (l->basis == BASIS_REMOVAL && find_influent(n->plant, l, &influent, &unheard) == OK)
        need(n, influent, first, p->to);
    if (lent >= 0)
        need(n, lent, first, p->to);
}

static void need_month(struct needs *n, const struct limit *l, day_t month)
{
    struct period periods[PERIODS_MOST];
    size_t count = periods_of(l, month, periods);

    for (size_t i = 0; i < count; i++)
        need_limit(n, l, &periods[i]);
    if (l->when.set && count > 0) {
        struct limit asked;

        condition_limit(n->plant, l, &asked);
        need_month(n, &asked, month);
    }
}

static bool is_totalizer(const struct plant *p, const struct frame_span *s)
{
    for (size_t i = 0; i < p->meter_count; i++)
        if (p->meters[i].point == s->point && p->meters[i].parameter == s->parameter &&
            p->meters[i].kind == METER_TOTALIZER)
            return true;
    return false;
}

static struct needs no_needs(struct arena *a, const struct plant *plant)
{
    size_t cells = plant->point_count * plant->parameter_count;
    struct needs n = {plant, arena_alloc(a, (cells + 1) * sizeof *n.span)};

    for (size_t i = 0; i < cells; i++)
        n.span[i] = (struct frame_span){(int)(i / plant->parameter_count),
                                        (int)(i % plant->parameter_count), 1, 0};
    return n;
}

static void end_needs(struct needs *n, struct frame_span **needs, size_t *count)
{
    size_t cells = n->plant->point_count * n->plant->parameter_count;

    *count = 0;
    for (size_t i = 0; i < cells; i++) {
        if (n->span[i].first > n->span[i].last)
            continue;
        if (is_totalizer(n->plant, &n->span[i]))
            n->span[i].first -= TOTALIZER_REACH;
        n->span[(*count)++] = n->span[i];
    }
    *needs = n->span;
}

void permit_needs(struct arena *a, const struct plant *plant, day_t month,
                  struct frame_span **needs, size_t *count)
{
    struct needs n = no_needs(a, plant);

    for (size_t i = 0; i < plant->limit_count; i++)
        need_month(&n, &plant->limits[i], month);
    end_needs(&n, needs, count);
}

void needs_of_periods(struct arena *a, const struct plant *plant, day_t month,
                      const struct period *periods, struct frame_span **needs, size_t *count)
{
    struct needs n = no_needs(a, plant);

    for (size_t i = 0; i < plant->limit_count; i++) {
        const struct limit *l = &plant->limits[i];
        struct limit asked;

        if (periods[i].from > periods[i].to)
            continue;
        need_limit(&n, l, &periods[i]);
        if (l->when.set) {
            condition_limit(plant, l, &asked);
            need_month(&n, &asked, month);
        }
    }
    end_needs(&n, needs, count);
}

void needs_add(struct arena *a, const struct plant *plant, day_t month, struct frame_span **needs,
               size_t *count, size_t *room)
{
    struct frame_span *more = NULL;
    size_t added = 0;

    permit_needs(a, plant, month, &more, &added);
    for (size_t i = 0; i < added; i++) {
        struct frame_span *s = NULL;

        for (size_t j = 0; j < *count && !s; j++)
            if ((*needs)[j].point == more[i].point && (*needs)[j].parameter == more[i].parameter)
                s = &(*needs)[j];
        if (!s) {
            s = arena_push(a, needs, count, room, sizeof *s);
            *s = more[i];
        }
        s->first = more[i].first < s->first ? more[i].first : s->first;
        s->last = more[i].last > s->last ? more[i].last : s->last;
    }
}
