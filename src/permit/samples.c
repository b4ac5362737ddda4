/* samples: how many were taken and how many the permit asks for. 40 CFR 122.48(b): the frequency is
 * a permit term; 122.41(l)(4)(ii): extra samples count. */
#include "permit/work.h"

#include "base/poison.h"

#define DAYS_A_WEEK 7

/* R8, R34: days with a value, or their readings; of loads and removals days, whatever count_by
 * says; in a rolling row those of its own days. */
long samples_taken(const struct work *w, const struct series *s)
{
    struct list l = list_between(s->days, w->from, w->end);
    bool by_reading = w->rules->word[RULE_COUNT_BY] == COUNT_BY_READING &&
                      w->limit->basis != BASIS_LOAD && w->limit->basis != BASIS_REMOVAL;
    long taken = 0;

    for (size_t i = 0; i < l.count; i++) {
        if (!l.at[i].sample || !work_takes(w, l.at[i].day))
            continue;
        taken += by_reading ? (long)l.at[i].readings : 1;
    }
    return taken;
}

/* ---- required ---- */

/* Whether codes 9 or A are all that stands there on the day: conditional monitoring, general-permit
 * exemption; such a sample is not required (EPA's no-data indicators). */
static bool is_exempt(const struct work *w, day_t day)
{
    const struct limit *l = w->limit;

    for (int i = 0; i < l->points * l->parameters; i++) {
        size_t count;
        const struct reading *const *r = frame_readings(
            w->frame, l->point[i / l->parameters], l->parameter[i % l->parameters], day, &count);

        if (count == 0)
            return false;
        for (size_t j = 0; j < count; j++)
            if (r[j]->qualifier != QUALIFIER_CODE || (r[j]->code != '9' && r[j]->code != 'A'))
                return false;
    }
    return true;
}

/* What stands on record after the day it is judged on is passed over (G1). */
static bool is_owed(const struct work *w, day_t day)
{
    return day > w->on || (!work_no_discharge(w, day) && !is_exempt(w, day));
}

static long days_required(const struct work *w)
{
    long days = 0;

    for (day_t day = w->from; day <= w->to; day++)
        if (work_takes(w, day) && is_owed(w, day))
            days++;
    return days;
}

/* R9, R35: the weeks counted in the months of the row; of a row cut by dates those that end in it.
 * A week wholly without discharge requires nothing. */
static long weeks_required(const struct work *w)
{
    bool cut = months_held(w->from, w->to) == 0;
    long weeks = 0;

    if (w->kind->span == SPAN_WEEK)
        return work_without_discharge(w, w->from, w->to) ? 0 : 1;
    for (day_t month = month_first(w->from); month <= w->to; month = month_step(month, 1)) {
        struct week in[6];
        size_t count = permit_weeks(w->rules, month, in);

        for (size_t i = 0; i < count; i++) {
            bool ends_inside = w->from <= in[i].to && in[i].to <= w->to;

            if ((!cut || ends_inside) && !work_without_discharge(w, in[i].from, in[i].to))
                weeks++;
        }
    }
    return weeks;
}

/* Months, quarters or years, by their length in months, that the row holds. */
static long stretches_required(const struct work *w, int months)
{
    int held = months_held(w->from, w->to) / months;
    long stretches = 0;

    for (int i = 0; i < held; i++) {
        day_t from = month_step(w->from, i * months);

        if (!work_without_discharge(w, from, month_step(from, months) - 1))
            stretches++;
    }
    return stretches;
}

/* A frequency longer than the row leaves it empty. */
bool samples_required(const struct work *w, long *out)
{
    static const int months[] = {[PER_MONTH] = 1, [PER_QUARTER] = 3, [PER_YEAR] = 12};
    const struct frequency *f = &w->limit->samples;

    switch (f->per) {
    case PER_NONE:
        return false;
    case PER_CONTINUOUS: /* every day is expected: common practice, no source */
        *out = days_required(w);
        return true;
    case PER_DAY:
        *out = f->count * days_required(w);
        return true;
    case PER_WEEK:
        *out = f->count * weeks_required(w);
        return w->kind->span == SPAN_WEEK || w->to - w->from + 1 >= DAYS_A_WEEK;
    default:
        *out = f->count * stretches_required(w, months[f->per]);
        return months_held(w->from, w->to) >= months[f->per];
    }
}
