/* plant: questions to a finished plant: who is who, and what holds on a day. */
#include "plant/plant.h"

#include <stdlib.h>

#include "base/poison.h"

int plant_point(const struct plant *p, const char *id)
{
    for (size_t i = 0; i < p->point_count; i++)
        if (text_equal(p->points[i].id, id))
            return (int)i;
    return -1;
}

int plant_parameter(const struct plant *p, const char *id)
{
    for (size_t i = 0; i < p->parameter_count; i++)
        if (text_equal(p->parameters[i].id, id))
            return (int)i;
    return -1;
}

/* The nearest of `count` names, each standing first in a structure of `size` bytes. */
static const char *nearest_of(const void *array, size_t count, size_t size, const char *id)
{
    const char **names = calloc(count + 1, sizeof *names);
    const char *found = NULL;

    if (!names) /* a hint is not worth ending the program for */
        return NULL;
    for (size_t i = 0; i < count; i++)
        names[i] = *(const char *const *)((const char *)array + i * size);
    if (count > 0)
        found = text_nearest(id, names, count);
    free(names);
    return found;
}

const char *plant_nearest_point(const struct plant *p, const char *id)
{
    _Static_assert(offsetof(struct point, id) == 0, "nearest_of reads the first member");
    return nearest_of(p->points, p->point_count, sizeof *p->points, id);
}

const char *plant_nearest_parameter(const struct plant *p, const char *id)
{
    _Static_assert(offsetof(struct parameter, id) == 0, "nearest_of reads the first member");
    return nearest_of(p->parameters, p->parameter_count, sizeof *p->parameters, id);
}

static bool span_holds(day_t from, day_t to, day_t day)
{
    return (from == DAY_NONE || from <= day) && (to == DAY_NONE || day <= to);
}

const struct meter *plant_meter(const struct plant *p, int point, int parameter, day_t day)
{
    for (size_t i = 0; i < p->meter_count; i++) {
        const struct meter *m = &p->meters[i];

        if (m->point == point && m->parameter == parameter && span_holds(m->from, m->to, day))
            return m;
    }
    return NULL;
}

bool basin_in_service(const struct basin *b, day_t day)
{
    return span_holds(b->from, b->to, day);
}

bool season_holds(const struct season *s, day_t day)
{
    int year, month, date, here, from, to;

    if (!s->set)
        return true;
    day_split(day, &year, &month, &date);
    here = month * 100 + date;
    from = s->from_month * 100 + s->from_date;
    to = s->to_month * 100 + s->to_date;
    if (to == 228) /* a season that ends on the last of February ends on the 29th in a leap year */
        to = 229;
    return from <= to ? from <= here && here <= to : here >= from || here <= to;
}

bool limit_in_force(const struct limit *l, day_t day)
{
    return season_holds(&l->season, day) && span_holds(l->from, l->to, day);
}
