/* needs: which readings a month's rows are worked from. */
#include "permit/work.h"

#include "base/poison.h"

#define TOTALIZER_REACH 7 /* days before the first, to find the register's last reading */

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

    for (int i = 0; i < l->points; i++)
        need(n, l->point[i], first, p->to);
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

void permit_needs(struct arena *a, const struct plant *plant, day_t month,
                  struct frame_span **needs, size_t *count)
{
    size_t cells = plant->point_count * plant->parameter_count;
    struct needs n = {plant, arena_alloc(a, (cells + 1) * sizeof *n.span)};

    for (size_t i = 0; i < cells; i++)
        n.span[i] = (struct frame_span){(int)(i / plant->parameter_count),
                                        (int)(i % plant->parameter_count), 1, 0};
    for (size_t i = 0; i < plant->limit_count; i++)
        need_month(&n, &plant->limits[i], month);
    *count = 0;
    for (size_t i = 0; i < cells; i++) {
        if (n.span[i].first > n.span[i].last)
            continue;
        if (is_totalizer(plant, &n.span[i]))
            n.span[i].first -= TOTALIZER_REACH;
        n.span[(*count)++] = n.span[i];
    }
    *needs = n.span;
}
