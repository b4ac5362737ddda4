/* amounts: a row to the values of its days: concentrations, flows, loads, removals, each in the
 * limit's unit and with what is known of its sign. */
#include "permit/work.h"

#include <assert.h>
#include <string.h>

#include "base/poison.h"

/* ---- single amounts ---- */

/* R30: a sum is partly less-than when one part is, wholly when all are; R13's number is the sum of
 * the parts'. */
static void amount_add(struct arena *a, struct amount *sum, const struct amount *part)
{
    const struct fraction *part_less = part->less ? part->less : part->number;

    if (!sum->number) {
        *sum = *part;
        return;
    }
    sum->less = sum->less || part->less
                    ? fraction_add(a, sum->less ? sum->less : sum->number, part_less)
                    : NULL;
    sum->number = fraction_add(a, sum->number, part->number);
    sum->product = NULL;
    sum->root = 0;
    sum->dnq = (sum->dnq && (part->dnq || part->all_less)) || (part->dnq && sum->all_less);
    sum->part_less = sum->part_less || part->part_less;
    sum->all_less = sum->all_less && part->all_less;
    sum->part_greater = sum->part_greater || part->part_greater;
    sum->all_greater = sum->all_greater && part->all_greater;
    sum->as_written = NULL;
}

const struct unit *load_flow_unit(const struct limit *l)
{
    bool pounds = strncmp(l->unit->name, "lb", 2) == 0 || strncmp(l->unit->name, "ton", 3) == 0;

    return unit_find(pounds ? "MGD" : "m3/d");
}

/* R42: MGD x mg/L x load_factor is lb/d; m3/d x mg/L / 1000 is kg/d, exactly. */
const struct fraction *load_of(const struct work *w, const struct fraction *concentration,
                               const struct fraction *flow)
{
    struct arena *a = w->arena;
    const struct fraction *x = fraction_multiply(a, concentration, flow);

    if (w->limit->basis == BASIS_REMOVAL) /* two loads are divided: any unit serves */
        return x;
    if (load_flow_unit(w->limit) == unit_find("MGD")) {
        x = fraction_multiply(a, x, fraction_from_decimal(a, w->rules->number[RULE_LOAD_FACTOR]));
        return frame_in_unit(a, x, unit_find("lb/d"), w->limit->unit);
    }
    x = fraction_divide(a, x, fraction_from_int(a, 1000));
    return frame_in_unit(a, x, unit_find("kg/d"), w->limit->unit);
}

/* R20, R30: substitute first; R13's number is the concentration's times flow and factor. */
static struct amount load_amount(const struct work *w, const struct amount *c,
                                 const struct amount *q)
{
    struct amount load = {.number = load_of(w, c->number, q->number),
                          .part_less = c->part_less || q->part_less,
                          .all_less = c->all_less || q->all_less,
                          .part_greater = c->part_greater || q->part_greater,
                          .all_greater = c->all_greater || q->all_greater,
                          .dnq = c->dnq};

    if (load.part_less)
        load.less = load_of(w, c->less ? c->less : c->number, q->less ? q->less : q->number);
    return load;
}

/* ---- what a part has on a day ---- */

enum state { STATE_NONE, STATE_VALUE, STATE_ZERO };

/* A place where concentrations and flows are read: an outfall or the influent. */
struct place_of {
    int point;
    int flow_point, flow_parameter; /* -1: no flow serves */
};

struct reader {
    const struct work *w;
    struct place_of place[SUM_PARTS_MOST];
    int places;
    const char *why;
};

typedef enum state part_function(struct reader *r, const struct place_of *p, day_t day,
                                 struct value *out);

/* One parameter or a sum of them, on days that have all (R43, G20). */
static enum state parameters_on(struct reader *r, int point, day_t day, const struct unit *unit,
                                struct value *out)
{
    const struct limit *l = r->w->limit;
    struct day_value v;

    *out = (struct value){.day = day, .sample = true};
    if (frame_no_discharge(r->w->frame, point, day))
        return STATE_ZERO;
    for (int i = 0; i < l->parameters; i++) {
        frame_day(r->w->frame, point, l->parameter[i], day, r->w->rules, unit, &v);
        if (v.state == DAY_BROKEN && !r->why)
            r->why = v.why;
        if (v.state != DAY_VALUED)
            return STATE_NONE;
        amount_add(r->w->arena, &out->amount, &v.amount);
        out->readings = i == 0 || v.readings < out->readings ? v.readings : out->readings;
    }
    return STATE_VALUE;
}

static enum state flow_on(struct reader *r, const struct place_of *p, day_t day,
                          const struct unit *unit, struct value *out)
{
    struct day_value v;

    *out = (struct value){.day = day, .sample = true};
    if (p->flow_point < 0)
        return STATE_NONE;
    frame_day(r->w->frame, p->flow_point, p->flow_parameter, day, r->w->rules, unit, &v);
    if (v.state == DAY_BROKEN && !r->why)
        r->why = v.why;
    out->amount = v.amount;
    out->readings = v.readings;
    if (v.state == DAY_NO_DISCHARGE)
        return STATE_ZERO;
    return v.state == DAY_VALUED ? STATE_VALUE : STATE_NONE;
}

/* Loads need mg/L; a removal divides, and any unit serves. */
static const struct unit *unit_of_concentration(const struct work *w)
{
    return w->limit->basis == BASIS_LOAD ? unit_find("mg/L")
                                         : w->plant->parameters[w->limit->parameter[0]].unit;
}

/* Without discharge there is a flow, of 0, and no concentration (R23). */
static enum state plain_part(struct reader *r, const struct place_of *p, day_t day,
                             struct value *out)
{
    enum state state = parameters_on(r, p->point, day, r->w->limit->unit, out);

    return state == STATE_ZERO && r->w->limit->basis != BASIS_FLOW ? STATE_NONE : state;
}

static enum state concentration_part(struct reader *r, const struct place_of *p, day_t day,
                                     struct value *out)
{
    return parameters_on(r, p->point, day, unit_of_concentration(r->w), out) == STATE_VALUE
               ? STATE_VALUE
               : STATE_NONE;
}

static enum state flow_part(struct reader *r, const struct place_of *p, day_t day,
                            struct value *out)
{
    return flow_on(r, p, day, load_flow_unit(r->w->limit), out);
}

/* 40 CFR 122.2: the daily discharge of a mass limit is the day's mass: a day with both flow and
 * concentration. A composite without that day's flow gives no load. */
static enum state load_part(struct reader *r, const struct place_of *p, day_t day,
                            struct value *out)
{
    struct value flow;
    enum state state = parameters_on(r, p->point, day, unit_of_concentration(r->w), out);

    if (state != STATE_VALUE)
        return state;
    if (flow_on(r, p, day, load_flow_unit(r->w->limit), &flow) == STATE_NONE || !flow.amount.number)
        return STATE_NONE;
    out->amount = load_amount(r->w, &out->amount, &flow.amount);
    return STATE_VALUE;
}

/* R41: the first place is the effluent, the second the influent. Nothing is removed from an
 * influent of 0. The sign turns: a less-than left in the effluent is a removal greater than. */
static enum state removal_part(struct reader *r, const struct place_of *p, day_t day,
                               struct value *out)
{
    struct arena *a = r->w->arena;
    const struct fraction *hundred = fraction_from_int(a, 100), *left;
    struct value in;

    if (concentration_part(r, p, day, out) != STATE_VALUE ||
        concentration_part(r, p + 1, day, &in) != STATE_VALUE ||
        fraction_sign(in.amount.number) <= 0)
        return STATE_NONE;
    left = fraction_divide(a, fraction_multiply(a, hundred, out->amount.number), in.amount.number);
    out->amount = (struct amount){.number = fraction_subtract(a, hundred, left),
                                  .part_greater = out->amount.part_less,
                                  .all_greater = out->amount.all_less};
    return STATE_VALUE;
}

/* ---- lists ---- */

/* R43: outfalls add on days that have all; one without discharge adds 0. A day without discharge at
 * any of them is 0, or absent, by the rule no_discharge (R23). */
static bool add_places(struct reader *r, part_function *part, int places, day_t day,
                       struct value *out)
{
    int valued = 0;
    struct value v;

    *out = (struct value){.day = day, .sample = true};
    for (int i = 0; i < places; i++) {
        enum state state = part(r, &r->place[i], day, &v);

        if (state == STATE_NONE)
            return false;
        if (state == STATE_ZERO)
            continue;
        amount_add(r->w->arena, &out->amount, &v.amount);
        out->readings = valued++ == 0 || v.readings < out->readings ? v.readings : out->readings;
    }
    if (valued > 0)
        return true;
    out->sample = false;
    out->amount.number = fraction_from_int(r->w->arena, 0);
    return r->w->rules->word[RULE_NO_DISCHARGE] == NO_DISCHARGE_ZERO;
}

static struct list list_of(struct reader *r, part_function *part, int places)
{
    const struct work *w = r->w;
    day_t first = w->reach < frame_first(w->frame) ? frame_first(w->frame) : w->reach;
    day_t last = w->end > frame_last(w->frame) ? frame_last(w->frame) : w->end;
    struct list l = {0};

    if (first > last)
        return l;
    l.at = arena_alloc(w->arena, (size_t)(last - first + 1) * sizeof *l.at);
    for (day_t day = first; day <= last; day++)
        if (work_takes(w, day) && add_places(r, part, places, day, &l.at[l.count]))
            l.count++;
    return l;
}

/* The same for one of several places. */
static struct list list_at(struct reader *r, part_function *part, int place)
{
    struct reader one = {.w = r->w, .place = {r->place[place]}, .places = 1, .why = r->why};
    struct list l = list_of(&one, part, 1);

    r->why = one.why;
    return l;
}

struct list list_between(struct list l, day_t from, day_t to)
{
    size_t i = 0, j = l.count;

    while (i < j && l.at[i].day < from)
        i++;
    while (j > i && l.at[j - 1].day > to)
        j--;
    return (struct list){l.at ? l.at + i : NULL, j - i};
}

/* ---- series ---- */

/* A register's readings are no values: the day's difference stands for them. */
static bool is_register(const struct work *w, day_t day)
{
    const struct meter *m = plant_meter(w->plant, w->limit->point[0], w->limit->parameter[0], day);

    return m && m->kind == METER_TOTALIZER;
}

/* Each reading by itself (R7, R46), of the days that have a value: those of days without discharge
 * are absent. Sums, loads and removals have no readings of their own; their days are judged. */
static void add_readings(struct reader *r, struct series *out)
{
    const struct work *w = r->w;
    const struct limit *l = w->limit;
    size_t room = 0, count;

    if (l->parameters > 1 || l->points > 1 || l->basis == BASIS_LOAD || l->basis == BASIS_REMOVAL)
        return;
    out->by_reading = true;
    for (size_t i = 0; i < out->days.count; i++) {
        struct value v = out->days.at[i];
        bool whole = !v.sample || is_register(w, v.day);
        const struct reading *const *at =
            frame_readings(w->frame, l->point[0], l->parameter[0], v.day, &count);

        for (size_t j = 0; j < (whole ? 1 : count); j++) {
            if (!whole && !frame_amount(w->frame, at[j], w->rules, l->unit, &v.amount))
                continue;
            v.readings = whole ? v.readings : 1;
            *(struct value *)arena_push(w->arena, &out->readings.at, &out->readings.count, &room,
                                        sizeof v) = v;
        }
    }
}

static bool works_with_means(const struct work *w)
{
    return w->kind->measure == MEASURE_MEAN;
}

static void load_series(struct reader *r, struct series *out)
{
    const struct work *w = r->w;
    bool averaged = works_with_means(w) || w->kind->measure == MEASURE_TOTAL;

    out->days = list_of(r, load_part, r->places);
    if (w->rules->word[RULE_LOAD_AVERAGE] != LOAD_AVERAGE_PRODUCT || !averaged)
        return;
    out->combine = COMBINE_PRODUCT; /* R19 */
    out->parts = r->places;
    for (int i = 0; i < r->places; i++) {
        out->top[i] = list_at(r, concentration_part, i);
        out->bottom[i] = list_at(r, flow_part, i);
    }
}

/* Keeps of two lists the days both have. */
static void pair_up(struct list *a, struct list *b)
{
    size_t i = 0, j = 0, kept = 0;

    while (i < a->count && j < b->count) {
        if (a->at[i].day < b->at[j].day) {
            i++;
        } else if (a->at[i].day > b->at[j].day) {
            j++;
        } else {
            a->at[kept] = a->at[i++];
            b->at[kept++] = b->at[j++];
        }
    }
    a->count = b->count = kept;
}

/* The four ways of a removal; 40 CFR 133.101(j) is `averages`, the others common practice, no
 * source. Samples are the effluent's days, or those with both (R34). */
static void removal_series(struct reader *r, struct series *out)
{
    int method = works_with_means(r->w) ? r->w->rules->word[RULE_REMOVAL] : REMOVAL_DAILY;

    if (method == REMOVAL_DAILY) {
        out->days = list_of(r, removal_part, 1);
        return;
    }
    out->combine = COMBINE_REMOVAL;
    out->parts = 1;
    out->top[0] = out->days = list_at(r, concentration_part, 0);
    out->bottom[0] = list_at(r, concentration_part, 1);
    if (method == REMOVAL_PAIRED) {
        pair_up(&out->top[0], &out->bottom[0]);
        out->days = out->top[0];
    } else if (method == REMOVAL_LOADS) {
        out->top[0] = list_at(r, load_part, 0);
        out->bottom[0] = list_at(r, load_part, 1);
    }
}

/* R40, R18: each place's own flow, chosen for the whole row; an influent without one takes the
 * effluent's. */
static void find_flow(const struct work *w, struct place_of *p, const struct rules *rules)
{
    if (!frame_flow_within(w->frame, p->point, rules, w->reach, w->end, &p->flow_point,
                           &p->flow_parameter))
        p->flow_point = p->flow_parameter = -1;
}

static void find_places(const struct work *w, struct reader *r)
{
    struct rules own = *w->rules;

    r->places = w->limit->points;
    for (int i = 0; i < r->places; i++) {
        r->place[i].point = w->limit->point[i];
        find_flow(w, &r->place[i], w->rules);
    }
    if (w->limit->basis != BASIS_REMOVAL)
        return;
    own.word[RULE_FLOW] = -1;
    r->place[1].point = w->influent;
    find_flow(w, &r->place[1], &own);
    if (r->place[1].flow_point < 0) {
        r->place[1].flow_point = r->place[0].flow_point;
        r->place[1].flow_parameter = r->place[0].flow_parameter;
    }
}

void amounts_of(const struct work *w, struct series *out)
{
    struct reader r = {.w = w};
    bool by_reading = w->rules->word[RULE_COUNT_BY] == COUNT_BY_READING;

    *out = (struct series){0};
    find_places(w, &r);
    if (w->limit->basis == BASIS_LOAD)
        load_series(&r, out);
    else if (w->limit->basis == BASIS_REMOVAL)
        removal_series(&r, out);
    else
        out->days = list_of(&r, plain_part, r.places);
    if (w->limit->statistic == STAT_INSTANTANEOUS ||
        (w->kind->measure == MEASURE_SAMPLES && by_reading))
        add_readings(&r, out);
    out->why = r.why;
    if (!out->why && w->limit->basis == BASIS_LOAD && r.place[0].flow_point < 0)
        out->why = arena_print(w->arena, "no flow is on record for %s",
                               w->plant->points[r.place[0].point].id);
}

/* ---- influents ---- */

/* R41. A row that names its influent itself has decided. */
enum status find_influent(const struct plant *plant, const struct limit *l, int *influent,
                          struct fault *f)
{
    const char *outfall = plant->points[l->point[0]].outfall;
    int named = l->rules.word[RULE_INFLUENT], all = 0, sharing = 0, only = -1, shared = -1;
    struct place where = {"limits.csv", l->line, 0};

    for (size_t i = 0; i < plant->point_count; i++) {
        const struct point *p = &plant->points[i];

        if (p->role != ROLE_INFLUENT)
            continue;
        all++;
        only = (int)i;
        if (*p->outfall != '\0' && text_equal(p->outfall, outfall)) {
            sharing++;
            shared = (int)i;
        }
    }
    *influent = named;
    if (named >= 0 && l->rules.own[RULE_INFLUENT])
        return OK;
    if (all == 1 || sharing == 1)
        *influent = all == 1 ? only : shared;
    if (*influent >= 0)
        return OK;
    return fault_at(f, &where, "set the rule influent=POINT, in plant.csv or in this row",
                    all == 0 ? "the removal of '%s' has no influent to start from"
                             : "the removal of '%s' has more than one influent to start from",
                    l->parameter_text);
}
