/* totalizer: what the readings of a register become: the day's difference. A register that passes
 * its highest number starts again at 0 (rolls_at); a `start` reading sets it anew. Nothing is
 * guessed: a day whose difference cannot be told gets none, and says why. */
#include "frame/store.h"

#include <assert.h>

#include "base/poison.h"

#define START "start"

bool totalizer_at(const struct plant *p, int point, int parameter)
{
    for (size_t i = 0; i < p->meter_count; i++)
        if (p->meters[i].point == point && p->meters[i].parameter == parameter &&
            p->meters[i].kind == METER_TOTALIZER)
            return true;
    return false;
}

static const char *named(struct frame *f, const struct reading *r)
{
    char date[11];

    day_write(r->day, date);
    return arena_print(f->arena, "%s %s on %s", f->plant->points[r->point].id,
                       f->plant->parameters[r->parameter].id, date);
}

static bool is_number(const struct reading *r)
{
    return r->qualifier == QUALIFIER_PLAIN || r->qualifier == QUALIFIER_ESTIMATED;
}

/* The register's way from one reading to the next, in the later one's unit, before the multiplier.
 */
static const struct fraction *way(struct frame *f, const struct meter *m,
                                  const struct reading *before, const struct reading *r)
{
    struct arena *a = f->arena;
    const struct fraction *from = frame_in_unit(a, fraction_from_decimal(a, before->value),
                                                unit_at(before->unit), unit_at(r->unit));
    const struct fraction *passed = fraction_subtract(a, fraction_from_decimal(a, r->value), from);

    if (fraction_sign(passed) < 0 && m->rolls_at.set)
        passed = fraction_add(a, passed, fraction_from_decimal(a, m->rolls_at.value));
    return passed;
}

/* Adds the stretch that ends at r to the day; false once the day is spoilt. */
static bool count_on(struct frame *f, struct meter_day *d, const struct reading *before,
                     const struct reading *r)
{
    const struct plant *p = f->plant;
    const struct meter *m = plant_meter(p, r->point, r->parameter, r->day);
    const struct fraction *passed;
    struct arena *a = f->arena;

    if (!before)
        d->why = arena_print(a, "no register reading before %s", named(f, r));
    else if (before->day < r->day - 1)
        d->why = arena_print(a, "the register was last read %d days before %s",
                             (int)(r->day - before->day), named(f, r));
    else if (plant_meter(p, r->point, r->parameter, before->day) != m)
        d->why = arena_print(a, "another meter than the day before, and no start reading, at %s",
                             named(f, r));
    else if (!units_meet(unit_at(before->unit), unit_at(r->unit)) ||
             !units_meet(unit_at(r->unit), p->parameters[r->parameter].unit))
        d->why = arena_print(a, "the register's unit %s cannot be turned into another, at %s",
                             unit_at(r->unit)->name, named(f, r));
    if (d->why)
        return false;
    assert(before && m);
    passed = way(f, m, before, r);
    if (fraction_sign(passed) < 0) {
        d->why = arena_print(a, "the register fell from %s to %s%s at %s", before->text, r->text,
                             m->rolls_at.set ? "" : " and has no rolls_at", named(f, r));
        return false;
    }
    passed = fraction_multiply(a, passed, fraction_from_decimal(a, m->multiplier));
    passed = frame_in_unit(a, passed, unit_at(r->unit), p->parameters[r->parameter].unit);
    d->volume = d->volume ? fraction_add(a, d->volume, passed) : passed;
    return true;
}

/* Works one day; `before` is the last register reading so far, and moves on. */
static void work_day(struct frame *f, const struct column *c, day_t day,
                     const struct reading **before, struct meter_day *d)
{
    size_t count;
    const struct reading *const *r = column_day(c, day, &count);
    const struct meter *m = plant_meter(f->plant, c->point, c->parameter, day);
    bool sound = true;

    if (!m || m->kind != METER_TOTALIZER) { /* a rate on that day: the day rule serves */
        *before = NULL;
        return;
    }
    for (size_t i = 0; i < count; i++) {
        if (r[i]->qualifier == QUALIFIER_CODE)
            continue;
        if (!is_number(r[i])) {
            d->why = arena_print(f->arena, "'%s' is no register reading, at %s", r[i]->text,
                                 named(f, r[i]));
            sound = false;
        } else if (!text_equal(r[i]->sample, START)) {
            sound = sound && count_on(f, d, *before, r[i]);
            d->readings++;
        }
        *before = is_number(r[i]) ? r[i] : NULL;
    }
    if (!sound)
        d->volume = NULL;
    else if (!d->volume && *before && (*before)->day == day)
        d->why = arena_print(f->arena, "only a start reading at %s", named(f, *before));
}

void totalizer_work(struct frame *f, struct column *c)
{
    const struct reading *before = NULL;

    c->meter = arena_alloc(f->arena, (size_t)(c->last - c->first + 1) * sizeof *c->meter);
    for (day_t day = c->first; day <= c->last; day++)
        work_day(f, c, day, &before, &c->meter[day - c->first]);
}
