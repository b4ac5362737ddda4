/* Doubts that one day's readings settle by themselves: scales, bounds, parts and wholes, removals,
 * loads, and what the records lack. */
#include "process/doubt.h"

#include <string.h>

#include "base/poison.h"

/* ---- scale and bounds ---- */

static const char *with_unit(struct doubting *d, const struct parameter *p,
                             const struct optional *bound)
{
    char number[24];
    decimal_write(bound->value, number);
    return arena_print(d->arena, "%s %s", number, p->unit->name);
}

/* How a reading stands to a number in its parameter's unit: -1, 0, 1. */
static int beside(struct doubting *d, const struct reading *r, struct decimal number)
{
    if (unit_at(r->unit) == d->plant->parameters[r->parameter].unit)
        return decimal_compare(r->value, number);
    return fraction_compare(doubt_number(d, r), fraction_from_decimal(d->arena, number));
}

static void bounds_of(struct doubting *d, const struct reading *r)
{
    static const struct decimal none = {0, 0};
    static const struct decimal fourteen = {14, 0};
    const struct parameter *p = &d->plant->parameters[r->parameter];
    bool less = r->qualifier == QUALIFIER_LESS; /* may be anything below */
    bool more = r->qualifier == QUALIFIER_GREATER;
    const char *origin = p->builtin ? "built in, common practice" : "the plant's own bound";
    if (text_equal(p->unit->name, "pH") && !less &&
        ((beside(d, r, none) < 0 && !more) || beside(d, r, fourteen) > 0)) {
        doubt_tell(d, DOUBT_SCALE, r, 0, 0, 0, "",
                   "the pH scale runs from 0 to 14; common practice, no source");
        return;
    }
    if (p->high.set && !less && beside(d, r, p->high.value) > 0)
        doubt_tell(d, DOUBT_BOUNDS, r, 0, 0, 0, "",
                   arena_print(d->arena, "above the parameter's plausible high of %s; %s",
                               with_unit(d, p, &p->high), origin));
    if (p->low.set && !more && beside(d, r, p->low.value) < 0)
        doubt_tell(d, DOUBT_BOUNDS, r, 0, 0, 0, "",
                   arena_print(d->arena, "below the parameter's plausible low of %s; %s",
                               with_unit(d, p, &p->low), origin));
}

void doubt_bounds(struct doubting *d, int point, int parameter)
{
    for (day_t day = d->first; day <= d->last; day++) {
        size_t count = 0;
        const struct reading *const *r = frame_readings(d->frame, point, parameter, day, &count);
        for (size_t i = 0; i < count; i++)
            if (doubt_measured(r[i]) || r[i]->qualifier == QUALIFIER_LESS ||
                r[i]->qualifier == QUALIFIER_GREATER)
                bounds_of(d, r[i]);
    }
}

/* ---- parts and wholes ---- */

struct part {
    const char *whole, *part[2], *why;
};

/* By what the parameters are; Standard Methods defines each part as a share of its whole. */
static const struct part parts[] = {
    {"TSS", {"VSS", NULL}, "volatile solids are a part of the suspended solids"},
    {"MLSS", {"MLVSS", NULL}, "volatile solids are a part of the mixed liquor's solids"},
    {"TP", {"PO4P", NULL}, "orthophosphate is a part of total phosphorus"},
    {"TKN", {"NH3N", NULL}, "Kjeldahl nitrogen is organic nitrogen and ammonia"},
    {"NH3N", {"UIA", NULL}, "un-ionized ammonia is a part of the ammonia"},
    {"NOXN", {"NO2N", "NO3N"}, "it is the sum of nitrite and nitrate"},
    {"TN", {"NO2N", "NO3N"}, "total nitrogen is Kjeldahl nitrogen, nitrite and nitrate"},
    {"TN", {"NOXN", NULL}, "total nitrogen is Kjeldahl nitrogen, nitrite and nitrate"},
    {"TN", {"TKN", NULL}, "total nitrogen is Kjeldahl nitrogen, nitrite and nitrate"},
    {"TRC", {"FRC", NULL}, "free chlorine is a part of the total residual"},
};

/* The reading of the same sample: same time and sample, or the day's only one on both sides. */
static const struct reading *twin(struct doubting *d, const struct reading *of, size_t beside,
                                  int parameter)
{
    size_t count = 0;
    const struct reading *const *r =
        parameter < 0 ? NULL : frame_readings(d->frame, of->point, parameter, of->day, &count);
    for (size_t i = 0; i < count; i++)
        if (of->minute >= 0 && r[i]->minute == of->minute && text_equal(r[i]->sample, of->sample))
            return r[i];
    return count == 1 && beside == 1 ? r[0] : NULL;
}

/* At least the number is there: not of a less-than, DNQ or code. */
static bool at_least(const struct reading *r)
{
    return r && (doubt_measured(r) || r->qualifier == QUALIFIER_GREATER);
}

/* At most the number is there. */
static bool at_most(const struct reading *r)
{
    return r && (doubt_measured(r) || r->qualifier == QUALIFIER_LESS);
}

static const char *shown(struct doubting *d, const struct reading *r)
{
    return arena_print(d->arena, "%s %s %s", d->plant->parameters[r->parameter].id, r->text,
                       unit_at(r->unit)->name);
}

static void part_of_whole(struct doubting *d, const struct part *p, const struct reading *first,
                          size_t beside)
{
    const struct reading *whole = twin(d, first, beside, plant_parameter(d->plant, p->whole));
    const struct reading *second =
        p->part[1] ? twin(d, first, beside, plant_parameter(d->plant, p->part[1])) : NULL;
    if (!at_least(first) || !at_most(whole))
        return;
    const struct unit *unit = d->plant->parameters[whole->parameter].unit;
    const struct unit *own = d->plant->parameters[first->parameter].unit;
    if (!unit_same_kind(unit, own))
        return;
    const struct fraction *sum = unit_convert(d->arena, doubt_number(d, first), own, unit);
    bool both = at_least(second);
    if (both) {
        own = d->plant->parameters[second->parameter].unit;
        if (!unit_same_kind(unit, own))
            return;
        sum =
            fraction_add(d->arena, sum, unit_convert(d->arena, doubt_number(d, second), own, unit));
    }
    if (fraction_compare(sum, doubt_number(d, whole)) <= 0)
        return;
    doubt_tell(d, DOUBT_PART, first, 0, 0, 0, p->whole,
               arena_print(d->arena,
                           "%s%s%s is above %s, its whole: %s; Standard Methods, from "
                           "memory",
                           shown(d, first), both ? " with " : "", both ? shown(d, second) : "",
                           shown(d, whole), p->why));
}

void doubt_parts(struct doubting *d, int point)
{
    for (size_t i = 0; i < NELEM(parts); i++) {
        int part = plant_parameter(d->plant, parts[i].part[0]);
        int whole = plant_parameter(d->plant, parts[i].whole);
        if (part < 0 || whole < 0 || !frame_has(d->frame, point, part) ||
            !frame_has(d->frame, point, whole))
            continue;
        for (day_t day = d->first; day <= d->last; day++) {
            size_t count = 0;
            const struct reading *const *r = frame_readings(d->frame, point, part, day, &count);
            for (size_t k = 0; k < count; k++)
                part_of_whole(d, &parts[i], r[k], count);
        }
    }
}

/* ---- removal ---- */

/* What a plant takes out and never makes: oxygen demand and solids. */
static const char *const removed[] = {"BOD5", "CBOD5", "COD", "TOC", "TSS", "VSS"};

/* The day's lowest (or highest) number among all points of a role; *any false: none, or one that
 * may lie beyond. */
static const struct reading *extreme(struct doubting *d, enum role role, int point, int parameter,
                                     day_t day, bool highest)
{
    const struct reading *found = NULL;
    const struct fraction *number = NULL;
    for (int at = 0; at < (int)d->plant->point_count; at++) {
        size_t count = 0;
        if (d->plant->points[at].role != role || (point >= 0 && at != point))
            continue;
        const struct reading *const *r = frame_readings(d->frame, at, parameter, day, &count);
        for (size_t i = 0; i < count; i++) {
            if (r[i]->qualifier == QUALIFIER_CODE)
                continue;
            if (!(highest ? at_most(r[i]) : at_least(r[i])))
                return NULL;
            const struct fraction *x = doubt_number(d, r[i]);
            if (!found || (fraction_compare(x, number) > 0) == highest) {
                found = r[i];
                number = x;
            }
        }
    }
    return found;
}

void doubt_removals(struct doubting *d)
{
    for (size_t i = 0; i < NELEM(removed); i++) {
        int parameter = plant_parameter(d->plant, removed[i]);
        for (int point = 0; parameter >= 0 && point < (int)d->plant->point_count; point++) {
            if (d->plant->points[point].role != ROLE_EFFLUENT)
                continue;
            for (day_t day = d->first; day <= d->last; day++) {
                const struct reading *out = extreme(d, ROLE_EFFLUENT, point, parameter, day, false);
                const struct reading *in =
                    out ? extreme(d, ROLE_INFLUENT, -1, parameter, day, true) : NULL;
                if (!in || fraction_compare(doubt_number(d, out), doubt_number(d, in)) <= 0)
                    continue;
                doubt_tell(d, DOUBT_REMOVAL, out, 0, 0, 0, "",
                           arena_print(d->arena,
                                       "the influent, %s, has %s on that day: more leaves than "
                                       "comes; common practice, no source",
                                       d->plant->points[in->point].id, shown(d, in)));
            }
        }
    }
}

/* ---- loads ---- */

/* Water weighs 1,000,000 mg in a litre; no stream that a flow meter reads carries a tenth of it. */
static void heavy_load(struct doubting *d, const struct reading *r)
{
    int flow_point = -1;
    int flow_parameter = -1;
    const struct unit *own = d->plant->parameters[r->parameter].unit;
    const struct unit *mass = text_equal(own->kind, "mass-rate") ? unit_find("lb/d") : NULL;
    const struct rules *rules = &d->plant->rules;
    struct day_value flow;
    if (!mass || !frame_flow_of(d->frame, r->point, rules, &flow_point, &flow_parameter))
        return;
    frame_day(d->frame, flow_point, flow_parameter, r->day, rules, unit_find("MGD"), &flow);
    if (flow.state != DAY_VALUED || !flow.amount.number)
        return;
    const struct fraction *water = fraction_multiply(
        d->arena, flow.amount.number, fraction_parse(d->arena, "834000")); /* 0.1 x 8.34 x 10^6 */
    const struct fraction *load = unit_convert(d->arena, doubt_number(d, r), own, mass);
    if (fraction_compare(load, water) <= 0)
        return;
    doubt_tell(d, DOUBT_LOAD, r, 0, 0, 0, "",
               arena_print(d->arena,
                           "at a flow of %s MGD it would be more than a tenth of the water's "
                           "weight, %s lb/d; the bound is common practice, no source",
                           doubt_print(d->arena, flow.amount.number),
                           doubt_print(d->arena, water)));
}

/* A result of a sample on a day whose flow, on record, is 0. */
static void load_of_nothing(struct doubting *d, const struct reading *r)
{
    int flow = plant_parameter(d->plant, "FLOW");
    size_t count = 0;
    const struct unit *own = d->plant->parameters[r->parameter].unit;
    if (flow < 0 || d->plant->points[r->point].role != ROLE_EFFLUENT ||
        !text_equal(own->kind, "concentration") || !frame_no_discharge(d->frame, r->point, r->day))
        return;
    const struct reading *const *f = frame_readings(d->frame, r->point, flow, r->day, &count);
    if (count == 0)
        return;
    doubt_tell(d, DOUBT_LOAD, r, 0, 0, 0, "flow",
               arena_print(d->arena,
                           "a sample of an effluent that did not flow: FLOW %s on that day; common "
                           "practice, no source",
                           f[0]->text));
}

void doubt_loads(struct doubting *d, int point, int parameter)
{
    for (day_t day = d->first; day <= d->last; day++) {
        size_t count = 0;
        const struct reading *const *r = frame_readings(d->frame, point, parameter, day, &count);
        for (size_t i = 0; i < count; i++) {
            if (!at_least(r[i]))
                continue;
            heavy_load(d, r[i]);
            load_of_nothing(d, r[i]);
        }
    }
}

/* ---- records ---- */

enum { LACK_TIME, LACK_SAMPLER, LACK_ANALYZED, LACK_ANALYST, LACK_METHOD, LACKS };
static const char *const lack_words[LACKS] = {"the time", "who sampled", "when analysed",
                                              "who analysed", "the method"};

static void records_of(struct doubting *d, int point, int parameter)
{
    long lacking[LACKS] = {0};
    long readings = 0;
    long any = 0;
    for (day_t day = d->first; day <= d->last; day++) {
        size_t count = 0;
        const struct reading *const *r = frame_readings(d->frame, point, parameter, day, &count);
        for (size_t i = 0; i < count; i++) {
            const struct detail *x = r[i]->detail;
            if (r[i]->qualifier == QUALIFIER_CODE)
                continue;
            const bool lacks[LACKS] = {r[i]->minute < 0, !x || !*x->collected_by,
                                       !x || !*x->analyzed, !x || !*x->analyst, !x || !*x->method};
            bool one = false;
            for (int k = 0; k < LACKS; k++) {
                lacking[k] += lacks[k];
                one = one || lacks[k];
            }
            readings++;
            any += one;
        }
    }
    if (any == 0)
        return;
    struct text t;
    text_init(&t, 600);
    text_print(&t, "%ld of %ld readings lack", any, readings);
    const char *comma = " ";
    for (int k = 0; k < LACKS; k++) {
        if (lacking[k] == 0)
            continue;
        text_print(&t, "%s%s (%ld)", comma, lack_words[k], lacking[k]);
        comma = ", ";
    }
    text_add(&t, "; 40 CFR 122.41(j)(3)");
    doubt_tell(d, DOUBT_RECORD, NULL, point, parameter, d->first, "", arena_text(d->arena, t.at));
    text_free(&t);
}

/* The regulation is about what the permit asks to be monitored: what a limit in force names. */
void doubt_records(struct doubting *d)
{
    size_t parameters = d->plant->parameter_count;
    bool *asked = arena_alloc(d->arena, d->plant->point_count * parameters + 1);
    for (size_t i = 0; i < d->plant->limit_count; i++) {
        const struct limit *l = &d->plant->limits[i];
        if (!limit_in_force(l, d->first) && !limit_in_force(l, d->last))
            continue;
        for (int p = 0; p < l->points; p++)
            for (int k = 0; k < l->parameters; k++)
                if (l->point[p] >= 0 && l->parameter[k] >= 0)
                    asked[(size_t)l->point[p] * parameters + (size_t)l->parameter[k]] = true;
    }
    for (size_t i = 0; i < d->plant->point_count * parameters; i++)
        if (asked[i])
            records_of(d, (int)(i / parameters), (int)(i % parameters));
}
