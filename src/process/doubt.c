/* Doubts: which readings of a month cannot be right or deserve a question. Here: how they are told,
 * named and put in order; the kinds stand in doubt_*.c. */
#include "process/doubt.h"

#include <string.h>

#include "base/poison.h"

const char *const doubt_words[DOUBTS] = {
    "outside-scale",  "not-plausible",     "part-above-whole", "removal-below-zero",
    "load-at-flow",   "unit-slip",         "digits-swapped",   "same-day-after-day",
    "weekend-copies", "outside-season",    "far-from-the-few", "balance-does-not-close",
    "drifting",       "record-incomplete",
};

bool doubt_impossible(enum doubt_kind kind)
{
    return kind < DOUBT_SEASON;
}

/* ---- shared ---- */

bool doubt_measured(const struct reading *r)
{
    return r->qualifier == QUALIFIER_PLAIN || r->qualifier == QUALIFIER_ESTIMATED;
}

bool doubt_register(const struct doubting *d, int point, int parameter)
{
    const struct meter *m = plant_meter(d->plant, point, parameter, d->last);
    const struct meter *before = plant_meter(d->plant, point, parameter, d->first);
    return (m && m->kind == METER_TOTALIZER) || (before && before->kind == METER_TOTALIZER);
}

const struct fraction *doubt_number(struct doubting *d, const struct reading *r)
{
    const struct unit *own = d->plant->parameters[r->parameter].unit;
    const struct fraction *x = fraction_from_decimal(d->arena, r->value);
    return unit_at(r->unit) == own ? x : frame_in_unit(d->arena, x, unit_at(r->unit), own);
}

const char *doubt_print(struct arena *a, const struct fraction *x)
{
    struct text t;
    text_init(&t, 400);
    if (!fraction_write_all(&t, x, 6)) {
        text_clear(&t);
        int decimals = fraction_decimals_for(x, 4, ROUND_HALF_EVEN);
        fraction_write(&t, x, decimals < 0 ? 0 : decimals, ROUND_HALF_EVEN);
    }
    const char *s = arena_text(a, t.at);
    text_free(&t);
    return s;
}

const char *doubt_date(struct arena *a, day_t day)
{
    char date[11];
    day_write(day, date);
    return arena_text(a, date);
}

/* ---- telling ---- */

static const char *make_id(struct doubting *d, const struct doubt *x, const struct reading *r,
                           const char *other)
{
    uint8_t raw[DIGEST_BYTES];
    char hex[2 * DIGEST_BYTES + 1];
    struct digest *sum = digest_new(d->arena);
    const char *key =
        arena_print(d->arena, "%s\n%s\n%s\n%d\n%d\n%s\n%s\n%s", doubt_words[x->kind],
                    x->point < 0 ? "" : d->plant->points[x->point].id,
                    x->parameter < 0 ? "" : d->plant->parameters[x->parameter].id, (int)x->day,
                    r ? r->minute : -1, r ? r->sample : "", x->value, other);
    digest_add(sum, key, strlen(key));
    digest_end(sum, raw);
    digest_write(raw, hex);
    return arena_print(d->arena, "%.7s-%.6s", doubt_date(d->arena, d->first), hex);
}

void doubt_tell(struct doubting *d, enum doubt_kind kind, const struct reading *r, int point,
                int parameter, day_t day, const char *other, const char *evidence)
{
    struct doubt x = {.kind = kind,
                      .day = r ? r->day : day,
                      .point = r ? r->point : point,
                      .parameter = r ? r->parameter : parameter,
                      .value = r ? r->text : "",
                      .unit = r ? unit_at(r->unit)->name : "",
                      .evidence = evidence};
    x.id = make_id(d, &x, r, other);
    struct doubt *to = arena_push(d->arena, &d->list, &d->count, &d->room, sizeof *to);
    *to = x;
}

static bool before(const struct doubt *a, const struct doubt *b)
{
    if (a->kind != b->kind)
        return a->kind < b->kind;
    if (a->day != b->day)
        return a->day < b->day;
    if (a->point != b->point)
        return a->point < b->point;
    return a->parameter < b->parameter;
}

/* Few by nature, and mostly in order: put in place one by one, which keeps equals as told. */
static void put_in_order(struct doubt *at, size_t count)
{
    for (size_t i = 1; i < count; i++) {
        struct doubt x = at[i];
        size_t j = i;
        for (; j > 0 && before(&x, &at[j - 1]); j--)
            at[j] = at[j - 1];
        at[j] = x;
    }
}

/* ---- what to read ---- */

/* Readings in the 45 days about the middle of the month. */
static size_t in_season(const struct frame *frame, int point, int parameter, day_t month)
{
    size_t all = 0;
    day_t middle = month + 14;
    for (day_t day = middle - DOUBT_AROUND; day <= middle + DOUBT_AROUND; day++) {
        size_t count = 0;
        if (day < frame_first(frame) || day > frame_last(frame))
            continue;
        (void)frame_readings(frame, point, parameter, day, &count);
        all += count;
    }
    return all;
}

void process_doubt_past(struct arena *a, const struct frame *frame, day_t month,
                        struct frame_span **out, size_t *spans)
{
    const struct plant *plant = frame_plant(frame);
    size_t room = 0;
    *out = NULL;
    *spans = 0;
    for (int point = 0; point < (int)plant->point_count; point++) {
        for (int parameter = 0; parameter < (int)plant->parameter_count; parameter++) {
            size_t each =
                frame_has(frame, point, parameter) ? in_season(frame, point, parameter, month) : 0;
            for (int years = 1;
                 each > 0 && years < DOUBT_YEARS && each * (size_t)years < DOUBT_ENOUGH; years++) {
                day_t first = month_step(month, -12 * years);
                struct frame_span *to = arena_push(a, out, spans, &room, sizeof *to);
                *to = (struct frame_span){.point = point,
                                          .parameter = parameter,
                                          .first = first - DOUBT_AROUND - 1,
                                          .last = month_last(first) + DOUBT_AROUND + 1};
            }
        }
    }
}

void process_doubts(struct arena *a, const struct frame *frame, const struct frame *past,
                    day_t month, struct doubt **out, size_t *count)
{
    struct doubting d = {.arena = a,
                         .plant = frame_plant(frame),
                         .frame = frame,
                         .past = past,
                         .first = month,
                         .last = month_last(month)};
    for (int point = 0; point < (int)d.plant->point_count; point++) {
        for (int parameter = 0; parameter < (int)d.plant->parameter_count; parameter++) {
            if (!frame_has(frame, point, parameter))
                continue;
            doubt_drifts(&d, point, parameter);
            if (doubt_register(&d, point, parameter))
                continue;
            doubt_bounds(&d, point, parameter);
            doubt_loads(&d, point, parameter);
            doubt_seasons(&d, point, parameter);
            doubt_repeats(&d, point, parameter);
        }
        doubt_parts(&d, point);
    }
    doubt_removals(&d);
    doubt_balance(&d);
    doubt_records(&d);
    put_in_order(d.list, d.count);
    *out = d.list;
    *count = d.count;
}
