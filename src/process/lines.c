/* The lines of the process table at one plant: each plan for each point, stage and basin that has
 * what it takes. */
#include "process/lines.h"

#include <assert.h>
#include <stdlib.h>
#include <string.h>

#include "process/catalogue.h"
#include "process/plans.h"
#include "process/roles.h"

#include "base/poison.h"

/* Strengths that are no burden or are made on the way: what they weigh or lose says nothing. */
static const struct {
    const char *parameter;
    bool load, removal;
} left_out[] = {
    {"DO", true, true},    {"ALK", false, true},   {"HARD", false, true}, {"TRC", false, true},
    {"FRC", false, true},  {"NO2N", false, true},  {"NO3N", false, true}, {"NOXN", false, true},
    {"MLSS", false, true}, {"MLVSS", false, true},
};

/* Stages a removal is taken over. The secondary stage ends at the effluent only where no point
 * before it has the parameter. */
static const struct {
    enum role from, to, unless;
} stages[] = {
    {ROLE_INFLUENT, ROLE_PRIMARY_EFFLUENT, ROLES},
    {ROLE_PRIMARY_EFFLUENT, ROLE_SECONDARY_EFFLUENT, ROLES},
    {ROLE_PRIMARY_EFFLUENT, ROLE_EFFLUENT, ROLE_SECONDARY_EFFLUENT},
    {ROLE_INFLUENT, ROLE_EFFLUENT, ROLES},
};

static const enum role load_roles[] = {ROLE_INFLUENT,           ROLE_PRIMARY_EFFLUENT,
                                       ROLE_SECONDARY_EFFLUENT, ROLE_EFFLUENT,
                                       ROLE_RETURN_SLUDGE,      ROLE_WASTE_SLUDGE};
static const char *const foods[] = {"BOD5", "CBOD5"};

/* What a line is about. */
struct about {
    const char *at;
    int point, to, parameter; /* -1: none */
    const char *basin;
    enum basin_kind kind;
};

struct finder {
    struct supplies *s;
    struct roles roles;
    struct lines *out;
};

/* ---- binding ---- */

static void start(struct supplies *s, struct line *line, const char *formula)
{
    const struct formula *f = formula_find(formula);
    assert(f != NULL);
    line->ready = formula_ready(s->arena, f);
    line->name = f->name;
    line->counted = text_equal(f->name, "log-removal") ? "effluent" : NULL;
    line->at = line->parameter = line->note = "";
    line->unit = s->plant->metric ? formula_metric_unit(f->unit) : f->unit;
    while (line->order < formula_count() && formula_at(line->order) != f)
        line->order++;
    if (!text_equal(line->unit, f->unit)) {
        const struct unit *from = unit_find(f->unit);
        const struct unit *to = unit_find(line->unit);
        const struct fraction *one = fraction_from_int(s->arena, 1);
        line->offset = unit_convert(s->arena, fraction_from_int(s->arena, 0), from, to);
        line->factor =
            fraction_subtract(s->arena, unit_convert(s->arena, one, from, to), line->offset);
    }
}

struct line *lines_add(struct supplies *s, struct lines *lines, const char *formula)
{
    struct line *line =
        arena_push(s->arena, &lines->line, &lines->count, &lines->room, sizeof *line);
    start(s, line, formula);
    return line;
}

/* Into the argument's unit, or from an amount in a day to a rate by the day and back. */
static void convert(struct supplies *s, struct input *input, const struct unit *from,
                    const struct unit *to)
{
    if (from == to)
        return;
    const struct fraction *one = fraction_from_int(s->arena, 1);
    input->offset = frame_in_unit(s->arena, fraction_from_int(s->arena, 0), from, to);
    input->factor =
        fraction_subtract(s->arena, frame_in_unit(s->arena, one, from, to), input->offset);
}

void line_feed_as(struct supplies *s, struct line *line, const char *argument,
                  struct stream *stream, enum side side, const struct unit *from,
                  const struct unit *to)
{
    int i = formula_argument_index(line->ready->formula, argument);
    assert(i >= 0 && stream != NULL);
    struct input *input = &line->input[i];
    *input = (struct input){.stream = stream, .side = side};
    convert(s, input, from, to);
}

void line_feed(struct supplies *s, struct line *line, const char *argument, struct stream *stream,
               enum side side, const struct unit *from)
{
    int i = formula_argument_index(line->ready->formula, argument);
    assert(i >= 0);
    line_feed_as(s, line, argument, stream, side, from,
                 unit_find(line->ready->formula->argument[i].unit));
}

/* Strengths are in mg/L, bacteria in /100mL. */
static const struct unit *strength_unit(const struct finder *f, int parameter)
{
    const struct unit *own = f->s->plant->parameters[parameter].unit;
    return unit_find(own && text_equal(own->kind, "bacteria") ? "/100mL" : "mg/L");
}

static struct stream *of_item(struct finder *f, const struct about *a, enum supply supply,
                              const char **flow_at)
{
    struct supplies *s = f->s;
    switch (supply) {
    case SUPPLY_STRENGTH_HERE:
    case SUPPLY_BEFORE:
        return roles_reading(s, a->point, a->parameter, strength_unit(f, a->parameter));
    case SUPPLY_AFTER:
        return roles_reading(s, a->to, a->parameter, strength_unit(f, a->parameter));
    case SUPPLY_FLOW_HERE:
        return roles_flow_past(s, &f->roles, a->point, flow_at);
    case SUPPLY_VOLUME:
        return roles_basin(s, a->basin, MEASURE_VOLUME, NULL, unit_find("MG"));
    case SUPPLY_BASIN_SOLIDS:
        return roles_basin(s, a->basin, MEASURE_VOLUME, "MLSS", unit_find("MG"));
    case SUPPLY_AREA:
        return roles_basin(s, a->basin, MEASURE_AREA, NULL, unit_find("ft2"));
    case SUPPLY_WEIR:
        return roles_basin(s, a->basin, MEASURE_WEIR, NULL, unit_find("ft"));
    case SUPPLY_FOOD_LEFT:
        return roles_leaving(s, &f->roles, s->plant->parameters[a->parameter].id);
    default:
        assert(supply == SUPPLY_FOOD);
        return roles_entering(s, &f->roles, s->plant->parameters[a->parameter].id);
    }
}

static struct stream *of_plant(const struct roles *r, enum supply supply)
{
    switch (supply) {
    case SUPPLY_PLANT_FLOW:
        return r->plant_flow;
    case SUPPLY_OUT_FLOW:
        return r->out_flow;
    case SUPPLY_RETURN_FLOW:
        return r->return_flow;
    case SUPPLY_WASTE:
        return r->waste;
    case SUPPLY_OUT_SOLIDS:
        return r->out_solids;
    case SUPPLY_ENTERING:
        return r->entering;
    case SUPPLY_AERATION:
        return r->aeration;
    case SUPPLY_VOLATILE:
        return r->volatile_solids;
    case SUPPLY_MIXED_LIQUOR:
        return r->mixed_liquor;
    case SUPPLY_CLARIFIERS:
        return r->clarifiers;
    case SUPPLY_RETURN_SOLIDS:
        return r->return_solids;
    case SUPPLY_DIGESTERS:
        return r->digesters;
    case SUPPLY_CHLORINE:
        return r->chlorine;
    case SUPPLY_POLYMER:
        return r->polymer;
    case SUPPLY_AIR:
        return r->air;
    case SUPPLY_GAS:
        return r->gas;
    default:
        assert(supply == SUPPLY_LOAD_FACTOR);
        return r->load_factor;
    }
}

/* The unit streams carry an argument in. */
static const struct unit *carried_in(const struct finder *f, const struct about *a,
                                     enum supply supply, enum side side)
{
    if (side == STRENGTH)
        return unit_find("mg/L");
    switch (supply) {
    case SUPPLY_STRENGTH_HERE:
    case SUPPLY_BEFORE:
    case SUPPLY_AFTER:
        return strength_unit(f, a->parameter);
    case SUPPLY_AREA:
        return unit_find("ft2");
    case SUPPLY_WEIR:
        return unit_find("ft");
    case SUPPLY_VOLUME:
    case SUPPLY_BASIN_SOLIDS:
    case SUPPLY_AERATION:
    case SUPPLY_VOLATILE:
    case SUPPLY_CLARIFIERS:
    case SUPPLY_DIGESTERS:
        return unit_find("MG");
    case SUPPLY_CHLORINE:
    case SUPPLY_POLYMER:
        return unit_find("lb/d");
    case SUPPLY_AIR:
    case SUPPLY_GAS:
        return unit_find("ft3/d");
    case SUPPLY_LOAD_FACTOR:
        return unit_find("lb/gal");
    default:
        return unit_find("MGD");
    }
}

/* ---- readings by name ---- */

/* Whether numbers of one can be had from the other: of one kind, or an amount in a day and a rate
 * by the day. */
static bool turns_into(const struct unit *from, const struct unit *to)
{
    static const char *const pairs[][2] = {{"volume", "flow"}, {"mass", "mass-rate"}};
    if (unit_same_kind(from, to))
        return true;
    for (size_t i = 0; i < NELEM(pairs); i++)
        if ((text_equal(from->kind, pairs[i][0]) && text_equal(to->kind, pairs[i][1])) ||
            (text_equal(from->kind, pairs[i][1]) && text_equal(to->kind, pairs[i][0])))
            return true;
    return false;
}

/* Sludge is weighed in percent, its liquor in mg/L: 1 % is taken as 10000 mg/L (the trade's rule,
 * for a litre that weighs a kilogram). NULL when the units are not these two. */
static const struct fraction *percent_factor(struct finder *f, const struct unit *from,
                                             const struct unit *to)
{
    if (text_equal(from->name, "%") && text_equal(to->name, "mg/L"))
        return fraction_from_int(f->s->arena, 10000);
    if (text_equal(from->name, "mg/L") && text_equal(to->name, "%"))
        return fraction_parse(f->s->arena, "1/10000");
    return NULL;
}

static bool read_one(struct finder *f, int point, const char *parameter, const struct unit *to,
                     struct input *out)
{
    int index = plant_parameter(f->s->plant, parameter);
    if (index < 0 || point < 0 || f->s->plant->parameters[index].unit == NULL)
        return false;
    const struct unit *from = f->s->plant->parameters[index].unit;
    const struct fraction *factor = percent_factor(f, from, to);
    if (factor == NULL && !turns_into(from, to))
        return false;
    struct stream *stream = roles_reading(f->s, point, index, from);
    if (stream == NULL)
        return false;
    *out = (struct input){.stream = stream, .side = AMOUNT};
    if (factor != NULL) {
        out->factor = factor;
        out->offset = f->s->zero;
    } else {
        convert(f->s, out, from, to);
    }
    return true;
}

static bool feed_reading(struct finder *f, const struct about *a, const struct feed *feed,
                         const struct unit *to, struct input *out)
{
    int point = feed->supply == SUPPLY_READ_TO         ? a->to
                : feed->supply == SUPPLY_READ_FILTRATE ? roles_filtrate(f->s->plant)
                                                       : a->point;
    return read_one(f, point, feed->parameter, to, out) ||
           (feed->or_else && read_one(f, point, feed->or_else, to, out));
}

static bool feed_fall(struct finder *f, const struct about *a, const struct feed *feed,
                      const struct unit *to, struct input *out)
{
    int index = plant_parameter(f->s->plant, feed->parameter);
    if (index < 0 || !unit_same_kind(f->s->plant->parameters[index].unit, to))
        return false;
    const struct series *before = series_of(f->s, a->point, index, to);
    const struct series *after = series_of(f->s, a->to, index, to);
    if (before == NULL || after == NULL)
        return false;
    *out = (struct input){.stream = stream_new(f->s), .side = AMOUNT};
    stream_add(f->s, out->stream, (struct part){.reading = before});
    stream_add(f->s, out->stream, (struct part){.reading = after, .minus = true});
    return true;
}

/* ---- binding a plan ---- */

static bool bind(struct finder *f, const struct about *a, const struct plan *plan,
                 struct line *line);

static const struct line *part_line(struct finder *f, const struct about *a,
                                    const struct plan *plan)
{
    struct line *line = arena_alloc(f->s->arena, sizeof *line);
    return bind(f, a, plan, line) ? line : NULL;
}

static bool feed_figure(struct finder *f, const struct about *a, const struct feed *feed,
                        const struct unit *to, struct input *out)
{
    *out = (struct input){.figure = part_line(f, a, feed->figure)};
    if (out->figure == NULL)
        return false;
    if (feed->lowers != NULL) {
        out->share = part_line(f, a, feed->lowers);
        if (out->share == NULL)
            return false;
    }
    convert(f->s, out, unit_find(out->figure->ready->formula->unit), to);
    return true;
}

static bool feed_one(struct finder *f, const struct about *a, const struct feed *feed,
                     const struct unit *to, struct input *out, const char **flow_at)
{
    bool shared = feed->shared;
    struct stream *stream;
    switch (feed->supply) {
    case SUPPLY_READ:
    case SUPPLY_READ_TO:
    case SUPPLY_READ_FILTRATE:
        return feed_reading(f, a, feed, to, out);
    case SUPPLY_FALL:
        return feed_fall(f, a, feed, to, out);
    case SUPPLY_FIGURE:
        return feed_figure(f, a, feed, to, out);
    case SUPPLY_THROUGH:
        stream = roles_through(f->s, &f->roles, a->basin, a->point, &shared);
        break;
    default:
        stream = feed->supply < SUPPLY_PLANT_FLOW ? of_item(f, a, feed->supply, flow_at)
                                                  : of_plant(&f->roles, feed->supply);
    }
    if (stream == NULL)
        return false;
    *out = (struct input){.stream = stream, .side = feed->side, .shared = shared};
    convert(f->s, out, carried_in(f, a, feed->supply, feed->side), to);
    return true;
}

/* False when something it takes is not measured here. */
static bool bind(struct finder *f, const struct about *a, const struct plan *plan,
                 struct line *line)
{
    const char *flow_at = NULL;
    *line = (struct line){.ready = NULL};
    start(f->s, line, plan->formula);
    for (size_t i = 0; i < FEEDS_MOST && plan->feed[i].argument; i++) {
        const struct feed *feed = &plan->feed[i];
        int argument = formula_argument_index(line->ready->formula, feed->argument);
        assert(argument >= 0);
        const struct unit *to = unit_find(line->ready->formula->argument[argument].unit);
        if (!feed_one(f, a, feed, to, &line->input[argument], &flow_at)) {
            if (!feed->spare)
                return false;
            line->input[argument] = (struct input){.stream = NULL};
        }
    }
    line->at = a->at;
    line->parameter = a->parameter >= 0 ? f->s->plant->parameters[a->parameter].id : "";
    line->smoothed = plan->smoothed;
    line->basin = a->basin;
    line->kind = a->kind;
    line->note = plan->note ? plan->note : "";
    if (flow_at != NULL && *flow_at && !text_equal(flow_at, a->at))
        line->note = arena_print(f->s->arena, "with the flow of %s", flow_at);
    return true;
}

/* Adds the line when everything it takes is measured here. */
static void add(struct finder *f, const struct plan *plan, const struct about *a)
{
    struct line line;
    if (!bind(f, a, plan, &line))
        return;
    struct line *kept =
        arena_push(f->s->arena, &f->out->line, &f->out->count, &f->out->room, sizeof *kept);
    *kept = line;
}

/* ---- going through the plant ---- */

static struct about about(const char *at)
{
    return (struct about){.at = at, .point = -1, .to = -1, .parameter = -1};
}

static bool counts(const struct parameter *p, bool for_load)
{
    if (p->unit == NULL || !text_equal(p->unit->kind, "concentration"))
        return false;
    for (size_t i = 0; i < NELEM(left_out); i++)
        if (text_equal(left_out[i].parameter, p->id))
            return for_load ? !left_out[i].load : !left_out[i].removal;
    return true;
}

static void add_loads(struct finder *f, const struct plan *plan)
{
    const struct plant *p = f->s->plant;
    for (size_t role = 0; role < NELEM(load_roles); role++)
        for (size_t i = 0; i < p->point_count; i++) {
            if (p->points[i].role != load_roles[role])
                continue;
            for (size_t k = 0; k < p->parameter_count; k++) {
                struct about a = about(p->points[i].id);
                a.point = (int)i;
                a.parameter = (int)k;
                if (counts(&p->parameters[k], true) && frame_has(f->s->frame, (int)i, (int)k))
                    add(f, plan, &a);
            }
        }
}

static bool measured_at_role(const struct finder *f, enum role role, size_t parameter)
{
    const struct plant *p = f->s->plant;
    for (size_t i = 0; i < p->point_count; i++)
        if (p->points[i].role == role && frame_has(f->s->frame, (int)i, (int)parameter))
            return true;
    return false;
}

/* `unless`: a role that, where it has the parameter, ends the stage earlier; ROLES: none. */
static void add_stage(struct finder *f, const struct plan *plan, int from, int to, enum role unless)
{
    const struct plant *p = f->s->plant;
    if (from < 0)
        return;
    for (size_t k = 0; k < p->parameter_count; k++) {
        if (!counts(&p->parameters[k], false) || !frame_has(f->s->frame, from, (int)k) ||
            !frame_has(f->s->frame, to, (int)k) ||
            (unless != ROLES && measured_at_role(f, unless, k)))
            continue;
        struct about a =
            about(arena_print(f->s->arena, "%s>%s", p->points[from].id, p->points[to].id));
        a.point = from;
        a.to = to;
        a.parameter = (int)k;
        add(f, plan, &a);
    }
}

static void add_stages(struct finder *f, const struct plan *plan)
{
    const struct plant *p = f->s->plant;
    for (size_t stage = 0; stage < NELEM(stages); stage++) {
        for (size_t i = 0; i < p->point_count; i++) {
            if (p->points[i].role != stages[stage].to)
                continue;
            int from = stages[stage].from == ROLE_INFLUENT ? roles_influent_for(f->s, (int)i)
                                                           : roles_only(p, stages[stage].from);
            add_stage(f, plan, from, (int)i, stages[stage].unless);
        }
    }
}

/* The line's parameter, when the plan names one; false when the plant has it not. */
static bool name_parameter(const struct finder *f, const struct plan *plan, struct about *a)
{
    if (plan->of == NULL)
        return true;
    a->parameter = plant_parameter(f->s->plant, plan->of);
    return a->parameter >= 0;
}

static void add_points(struct finder *f, const struct plan *plan)
{
    const struct plant *p = f->s->plant;
    int unless = plan->unless ? plant_parameter(p, plan->unless) : -1;
    for (size_t i = 0; i < p->point_count; i++) {
        struct about a = about(p->points[i].id);
        a.point = (int)i;
        if ((plan->roles & (1u << p->points[i].role)) &&
            !(unless >= 0 && frame_has(f->s->frame, (int)i, unless)) && name_parameter(f, plan, &a))
            add(f, plan, &a);
    }
}

/* ---- passages ---- */

/* Where each starts and ends: the first role of the two that serves. ROLES: there is no second. */
static const struct {
    enum role from, or_from, to, or_to;
} passages[PASSAGES] = {
    [THROUGH_AERATION] = {ROLE_PRIMARY_EFFLUENT, ROLE_INFLUENT, ROLE_SECONDARY_EFFLUENT,
                          ROLE_EFFLUENT},
    [THROUGH_CHLORINE] = {ROLE_SECONDARY_EFFLUENT, ROLES, ROLE_EFFLUENT, ROLES},
    [THROUGH_DIGESTION] = {ROLE_DIGESTER_FEED, ROLES, ROLE_DIGESTED_SLUDGE, ROLE_DIGESTER},
    [THROUGH_DEWATERING] = {ROLE_DIGESTED_SLUDGE, ROLES, ROLE_CAKE, ROLES},
};

static bool serves(const struct finder *f, int point, int parameter)
{
    return point >= 0 && (parameter < 0 || frame_has(f->s->frame, point, parameter));
}

/* The only point of the role that has the parameter; -1: none. */
static int passage_end(const struct finder *f, enum role role, enum role other, int parameter)
{
    int point = role == ROLES ? -1 : roles_only(f->s->plant, role);
    if (serves(f, point, parameter))
        return point;
    return other == ROLES ? -1 : passage_end(f, other, ROLES, parameter);
}

static void add_between(struct finder *f, const struct plan *plan, int parameter)
{
    const struct plant *p = f->s->plant;
    enum passage way = plan->passage;
    int from = passage_end(f, passages[way].from, passages[way].or_from, parameter);
    int to = passage_end(f, passages[way].to, passages[way].or_to, parameter);
    if (from < 0 || to < 0)
        return;
    struct about a = about(arena_print(f->s->arena, "%s>%s", p->points[from].id, p->points[to].id));
    a.point = from;
    a.to = to;
    a.parameter = parameter;
    add(f, plan, &a);
}

static void add_passage(struct finder *f, const struct plan *plan)
{
    struct about a = about("");
    if (name_parameter(f, plan, &a))
        add_between(f, plan, a.parameter);
}

static void add_bacteria(struct finder *f, const struct plan *plan)
{
    const struct plant *p = f->s->plant;
    for (size_t k = 0; k < p->parameter_count; k++)
        if (p->parameters[k].unit && text_equal(p->parameters[k].unit->kind, "bacteria"))
            add_between(f, plan, (int)k);
}

/* ---- basins and the plant ---- */

static bool seen_before(const struct plant *p, size_t i)
{
    for (size_t k = 0; k < i; k++)
        if (text_equal(p->basins[k].id, p->basins[i].id))
            return true;
    return false;
}

/* Where a basin is sampled; a contact basin that names no point, at the only effluent. */
static int basin_stands(const struct plant *p, const struct basin *b)
{
    return b->point < 0 && b->kind == BASIN_CONTACT ? roles_only(p, ROLE_EFFLUENT) : b->point;
}

/* A basin may have several rows, one for each time it was in service. */
static void add_basins(struct finder *f, const struct plan *plan)
{
    const struct plant *p = f->s->plant;
    for (size_t i = 0; i < p->basin_count; i++) {
        struct about a = about(p->basins[i].id);
        a.basin = p->basins[i].id;
        a.kind = p->basins[i].kind;
        a.point = basin_stands(p, &p->basins[i]);
        if (!name_parameter(f, plan, &a))
            return;
        if ((plan->kinds & (1u << a.kind)) && !seen_before(p, i))
            add(f, plan, &a);
    }
}

static void add_foods(struct finder *f, const struct plan *plan)
{
    for (size_t i = 0; i < NELEM(foods); i++) {
        struct about a = about("plant");
        a.parameter = plant_parameter(f->s->plant, foods[i]);
        if (a.parameter >= 0)
            add(f, plan, &a);
    }
}

/* At the only point of the role; where there are several, at the plant. */
static void add_at_role(struct finder *f, const struct plan *plan, enum role role)
{
    int point = roles_only(f->s->plant, role);
    struct about a = about(point >= 0 ? f->s->plant->points[point].id : "plant");
    add(f, plan, &a);
}

static void add_plan(struct finder *f, const struct plan *plan)
{
    struct about a = about("plant");
    if (!roles_has_chemical(f->s->plant, plan->chemical))
        return;
    switch (plan->extent) {
    case FOR_LOAD:
        add_loads(f, plan);
        break;
    case FOR_STAGE:
        add_stages(f, plan);
        break;
    case FOR_POINT:
        add_points(f, plan);
        break;
    case FOR_PASSAGE:
        add_passage(f, plan);
        break;
    case FOR_BACTERIA:
        add_bacteria(f, plan);
        break;
    case FOR_BASIN:
        add_basins(f, plan);
        break;
    case FOR_PLANT:
        add(f, plan, &a);
        break;
    case FOR_FOOD:
        add_foods(f, plan);
        break;
    case FOR_RETURN:
        add_at_role(f, plan, ROLE_RETURN_SLUDGE);
        break;
    case FOR_EFFLUENT:
        add_at_role(f, plan, ROLE_EFFLUENT);
        break;
    }
}

void lines_find(struct supplies *s, struct lines *out)
{
    struct finder f = {.s = s, .out = out};
    roles_find(s, &f.roles);
    for (size_t i = 0; i < plan_count(); i++)
        add_plan(&f, plan_at(i));
}
