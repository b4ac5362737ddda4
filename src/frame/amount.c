/* amount: one reading's number under the rules: what a less-than, a DNQ or a bare DNQ counts as,
 * and in which unit. The reading keeps its sign; the rule decides what it counts. */
#include "frame/store.h"

#include <assert.h>

#include "base/poison.h"

/* ---- units ---- */

/* An amount, and the same by the day: their factors have one base (litres and litres a day, ...).
 */
static const char *const by_the_day[][2] = {{"volume", "flow"}, {"mass", "mass-rate"}};

static bool are_by_the_day(const char *a, const char *b)
{
    for (size_t i = 0; i < NELEM(by_the_day); i++)
        if ((text_equal(a, by_the_day[i][0]) && text_equal(b, by_the_day[i][1])) ||
            (text_equal(b, by_the_day[i][0]) && text_equal(a, by_the_day[i][1])))
            return true;
    return false;
}

bool units_meet(const struct unit *a, const struct unit *b)
{
    return unit_same_kind(a, b) || are_by_the_day(a->kind, b->kind);
}

const struct fraction *frame_in_unit(struct arena *a, const struct fraction *x,
                                     const struct unit *from, const struct unit *to)
{
    if (from == to)
        return x;
    if (unit_same_kind(from, to))
        return unit_convert(a, x, from, to);
    assert(are_by_the_day(from->kind, to->kind));
    x = fraction_multiply(a, x, fraction_parse(a, from->factor));
    return fraction_divide(a, x, fraction_parse(a, to->factor));
}

/* ---- substitution ---- */

static const struct fraction *half(struct arena *a, const struct fraction *x)
{
    return fraction_divide(a, x, fraction_from_int(a, 2));
}

/* Colorado, Ohio: a less-than counts as zero; Iowa: as its number; half: common practice, no
 * source. Under the median procedure (California, State Implementation Policy) it is compared as
 * its number (R28). */
static const struct fraction *as_nondetect(struct arena *a, const struct fraction *x, int rule)
{
    switch (rule) {
    case NONDETECT_ZERO:
        return fraction_from_int(a, 0);
    case NONDETECT_HALF:
        return half(a, x);
    default:
        return x;
    }
}

/* R29; Ohio and Colorado count what is detected but not quantified as zero. */
static const struct fraction *as_dnq(struct arena *a, const struct fraction *x, int rule)
{
    switch (rule) {
    case DNQ_ZERO:
        return fraction_from_int(a, 0);
    case DNQ_HALF:
        return half(a, x);
    default:
        return x;
    }
}

static bool below_rl(const struct reading *r)
{
    return r->has_rl && decimal_compare(r->value, r->rl) < 0;
}

static const struct fraction *substitute(struct arena *a, const struct reading *r,
                                         const struct fraction *x, const struct rules *rules)
{
    int nondetect = rules->word[RULE_NONDETECT];
    int dnq = nondetect == NONDETECT_MEDIAN ? DNQ_VALUE : rules->word[RULE_DNQ]; /* R28 */
    const struct fraction *y;

    switch (r->qualifier) {
    case QUALIFIER_LESS:
        y = as_nondetect(a, x, nondetect);
        return dnq == DNQ_ZERO && below_rl(r) ? as_dnq(a, y, dnq) : y;
    case QUALIFIER_DNQ:
        return as_dnq(a, x, dnq);
    case QUALIFIER_DNQ_BARE: /* G17: as a less-than of its rl; never more than the dnq rule leaves
                              */
        y = as_nondetect(a, x, nondetect);
        x = as_dnq(a, x, dnq);
        return fraction_compare(x, y) < 0 ? x : y;
    case QUALIFIER_PLAIN:
        return below_rl(r) ? as_dnq(a, x, dnq) : x;
    default:
        return x;
    }
}

bool frame_amount(const struct frame *f, const struct reading *r, const struct rules *rules,
                  const struct unit *unit, struct amount *out)
{
    struct arena *a = f->arena;
    const struct unit *own = unit_at(r->unit);
    const struct fraction *x;
    char digits[24];

    *out = (struct amount){0};
    if (r->qualifier == QUALIFIER_CODE || r->qualifier == QUALIFIER_WITHDRAWN)
        return false;
    if (!unit)
        unit = frame_plant(f)->parameters[r->parameter].unit;
    if (!units_meet(own, unit)) /* the parameter has changed its kind since */
        return false;
    x = fraction_from_decimal(a, r->value);
    out->number = frame_in_unit(a, substitute(a, r, x, rules), own, unit);
    out->dnq = r->qualifier == QUALIFIER_DNQ || r->qualifier == QUALIFIER_DNQ_BARE;
    out->part_greater = out->all_greater = r->qualifier == QUALIFIER_GREATER;
    out->part_less = out->all_less = r->qualifier == QUALIFIER_LESS;
    if (out->all_less) {
        out->less = frame_in_unit(a, x, own, unit);
        decimal_write(r->value, digits);
        out->as_written = own == unit ? arena_text(a, digits) : NULL;
    }
    return true;
}
