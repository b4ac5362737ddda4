/* Readings by day, and streams of amount and strength. */
#include "process/supply.h"

#include <assert.h>

#include "base/poison.h"

/* Small enough that its pieces come from the heap and go back to it. */
static const size_t passing_most = (size_t)1 << 16;

static size_t day_count(const struct supplies *s)
{
    return (size_t)(s->last - s->first) + 1;
}

void supplies_tidy(struct supplies *s)
{
    if (arena_used(s->passing) < passing_most)
        return;
    arena_free(s->passing);
    s->passing = arena_new();
}

/* ---- readings ---- */

static const char *missing(const struct supplies *s, const struct series *series, day_t day,
                           const struct day_value *v)
{
    const struct plant *p = s->plant;
    const char *point = p->points[series->point].id;
    char date[11];
    day_write(day, date);
    if (v->state == DAY_NO_DISCHARGE)
        return arena_print(s->arena, "no discharge at %s on %s", point, date);
    if (v->state == DAY_EMPTY || v->why == NULL)
        return arena_print(s->arena, "no %s at %s on %s", p->parameters[series->parameter].id,
                           point, date);
    return arena_print(s->arena, "no %s at %s on %s: %s", p->parameters[series->parameter].id,
                       point, date, v->why);
}

static void fill(struct supplies *s, struct series *series)
{
    const struct parameter *parameter = &s->plant->parameters[series->parameter];
    bool is_flow = parameter->unit && text_equal(parameter->unit->kind, "flow");
    for (size_t i = 0; i < day_count(s); i++) {
        struct cell *c = &series->cell[i];
        day_t day = s->first + (day_t)i;
        struct day_value v;
        frame_day(s->frame, series->point, series->parameter, day, &parameter->rules, series->unit,
                  &v);
        c->less = v.amount.part_less;
        c->greater = v.amount.part_greater;
        if (v.state == DAY_VALUED)
            c->number = v.amount.number;
        else if (v.state == DAY_NO_DISCHARGE && is_flow)
            c->number = s->zero; /* nothing flowed: that is a flow of 0 */
        if (c->number == NULL)
            c->why = missing(s, series, day, &v);
    }
}

struct series *series_of(struct supplies *s, int point, int parameter, const struct unit *unit)
{
    if (point < 0 || parameter < 0 || !frame_has(s->frame, point, parameter))
        return NULL;
    if (unit == NULL)
        unit = s->plant->parameters[parameter].unit;
    for (struct series *have = s->series; have != NULL; have = have->next)
        if (have->point == point && have->parameter == parameter && have->unit == unit)
            return have;
    struct series *series = arena_alloc(s->arena, sizeof *series);
    *series =
        (struct series){.point = point, .parameter = parameter, .unit = unit, .next = s->series};
    series->cell = arena_alloc(s->arena, day_count(s) * sizeof *series->cell);
    s->series = series;
    fill(s, series);
    return series;
}

const struct cell *series_cell(const struct supplies *s, const struct series *series, day_t day)
{
    assert(day >= s->first && day <= s->last);
    return &series->cell[day - s->first];
}

/* ---- streams ---- */

struct stream *stream_new(struct supplies *s)
{
    return arena_alloc(s->arena, sizeof(struct stream));
}

void stream_add(struct supplies *s, struct stream *stream, struct part part)
{
    struct part *p = arena_push(s->arena, &stream->part, &stream->parts, &stream->room, sizeof *p);
    *p = part;
}

struct stream *stream_of(struct supplies *s, struct series *series)
{
    if (series->stream == NULL) {
        series->stream = stream_new(s);
        stream_add(s, series->stream, (struct part){.reading = series});
    }
    return series->stream;
}

static const struct fraction *part_amount(struct supplies *s, const struct part *part, day_t day,
                                          struct carried *out)
{
    if (part->stream) {
        struct carried c = stream_day(s, part->stream, day);
        out->no_amount = c.no_amount;
        out->less = out->less || c.less;
        out->greater = out->greater || c.greater;
        return c.amount;
    }
    if (part->reading == NULL)
        return part->number;
    const struct cell *c = series_cell(s, part->reading, day);
    out->less = out->less || c->less;
    out->greater = out->greater || c->greater;
    if (c->number == NULL)
        out->no_amount = c->why;
    return c->number;
}

/* Where the numbers of a day's streams go. */
static struct arena *lasting(const struct supplies *s)
{
    return s->in_turn ? s->passing : s->arena;
}

/* Adds what the part carries to the product. Nothing carries nothing, whatever its strength. */
static void part_product(struct supplies *s, const struct part *part, day_t day,
                         const struct fraction *amount, struct carried *out)
{
    if (part->strength == NULL || out->product == NULL || fraction_sign(amount) == 0)
        return;
    const struct cell *c = series_cell(s, part->strength, day);
    out->less = out->less || c->less;
    out->greater = out->greater || c->greater;
    if (c->number == NULL) {
        out->product = NULL;
        out->no_product = c->why;
        return;
    }
    out->product =
        fraction_add(lasting(s), out->product, fraction_multiply(s->passing, amount, c->number));
}

static struct carried work_day(struct supplies *s, const struct stream *stream, day_t day)
{
    struct carried out = {.known = true, .idle = true, .amount = s->zero, .product = s->zero};
    for (size_t i = 0; i < stream->parts; i++) {
        const struct part *part = &stream->part[i];
        if (part->basin && !basin_in_service(part->basin, day))
            continue;
        const struct fraction *amount = part_amount(s, part, day, &out);
        if (amount == NULL) {
            out.idle = false;
            out.amount = out.product = NULL;
            out.no_product = out.no_amount;
            return out;
        }
        if (part->minus)
            out.amount = fraction_subtract(lasting(s), out.amount, amount);
        else
            out.amount = out.idle ? amount : fraction_add(lasting(s), out.amount, amount);
        out.idle = false;
        part_product(s, part, day, amount, &out);
    }
    return out;
}

/* Whether working the stream anew costs no more than looking it up. */
static bool is_simple(const struct stream *stream)
{
    return stream->parts == 1 && stream->part->strength == NULL && stream->part->stream == NULL;
}

static struct carried *slot(struct supplies *s, struct carried **by_day, day_t day)
{
    assert(day >= s->first && day <= s->last);
    if (*by_day == NULL)
        *by_day = arena_alloc(s->arena, day_count(s) * sizeof **by_day);
    return &(*by_day)[day - s->first];
}

static struct carried latest(struct supplies *s, struct stream *stream, day_t day)
{
    if (stream->latest == NULL)
        stream->latest = arena_alloc(s->arena, sizeof *stream->latest);
    if (!stream->latest->known || stream->day != day) {
        *stream->latest = work_day(s, stream, day);
        stream->day = day;
    }
    return *stream->latest;
}

struct carried stream_day(struct supplies *s, struct stream *stream, day_t day)
{
    if (is_simple(stream))
        return work_day(s, stream, day);
    if (s->in_turn)
        return latest(s, stream, day);
    struct carried *c = slot(s, &stream->daily, day);
    if (!c->known)
        *c = work_day(s, stream, day);
    return *c;
}

static struct carried nothing_in_window(struct supplies *s, const struct carried *today)
{
    struct carried out = {.known = true, .idle = today->idle};
    const char *why = today->no_amount ? today->no_amount : today->no_product;
    if (why != NULL)
        out.no_amount = out.no_product =
            arena_print(s->arena, "%s, nor in the %d days to it", why, s->smooth);
    return out;
}

/* Amount and product are meant over the same days, so that their quotient is the strength of all
 * that was carried in them. */
static struct carried work_window(struct supplies *s, struct stream *stream, day_t day)
{
    const struct fraction *amount = s->zero;
    const struct fraction *product = s->zero;
    struct carried today = stream_day(s, stream, day);
    struct carried out = {.known = true, .idle = today.idle};
    for (day_t d = day - s->smooth + 1; d <= day; d++) {
        if (d < s->first)
            continue;
        struct carried c = stream_day(s, stream, d);
        if (c.idle || c.amount == NULL || c.product == NULL)
            continue;
        amount = fraction_add(s->passing, amount, c.amount);
        product = fraction_add(s->passing, product, c.product);
        out.less = out.less || c.less;
        out.greater = out.greater || c.greater;
        out.days++;
    }
    if (out.days == 0)
        return nothing_in_window(s, &today);
    const struct fraction *days = fraction_from_int(s->passing, out.days);
    out.amount = fraction_divide(s->arena, amount, days);
    out.product = fraction_divide(s->arena, product, days);
    return out;
}

struct carried stream_smoothed(struct supplies *s, struct stream *stream, day_t day)
{
    if (s->smooth <= 1)
        return stream_day(s, stream, day);
    struct carried *c = slot(s, &stream->smoothed, day);
    if (!c->known)
        *c = work_window(s, stream, day);
    return *c;
}
