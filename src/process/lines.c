/* The lines of the process table: which formulas, for which points and basins, and where each
 * argument comes from. One table; what is not in it is the plant's own (own.c). */
#include "process/lines.h"

#include <assert.h>
#include <stdlib.h>
#include <string.h>

#include "process/catalogue.h"
#include "process/roles.h"

#include "base/poison.h"

/* For what a formula has lines. */
enum extent {
    FOR_LOAD,     /* each strength at each point of the liquid and sludge streams */
    FOR_STAGE,    /* each strength measured before and after a stage */
    FOR_AERATION, /* each aeration point */
    FOR_BASIN,    /* each basin of the kinds */
    FOR_PLANT,    /* once */
    FOR_FOOD,     /* once for each measure of food */
    FOR_RETURN,   /* once, at the return */
    FOR_EFFLUENT  /* once, at the effluent */
};

enum supply {
    SUPPLY_NONE,
    /* of the point, the stage or the basin a line is about */
    SUPPLY_STRENGTH_HERE,
    SUPPLY_FLOW_HERE,
    SUPPLY_BEFORE,
    SUPPLY_AFTER,
    SUPPLY_SETTLED,
    SUPPLY_SOLIDS_HERE,
    SUPPLY_VOLUME,
    SUPPLY_AREA,
    SUPPLY_WEIR,
    SUPPLY_BASIN_SOLIDS, /* its volume, and its mixed liquor solids */
    SUPPLY_FOOD,         /* flow to aeration, and its strength in the line's parameter */
    /* of the plant */
    SUPPLY_PLANT_FLOW,
    SUPPLY_OUT_FLOW,
    SUPPLY_RETURN_FLOW,
    SUPPLY_WASTE,
    SUPPLY_OUT_SOLIDS,
    SUPPLY_ENTERING,
    SUPPLY_AERATION,
    SUPPLY_VOLATILE,
    SUPPLY_MIXED_LIQUOR,
    SUPPLY_CLARIFIERS,
    SUPPLY_CHLORINE,
    SUPPLY_LOAD_FACTOR
};

struct feed {
    const char *argument;
    enum supply supply;
    enum side side;
    bool shared; /* an even part for each basin of the kind in service */
};

enum { FEEDS_MOST = 8 };

struct plan {
    const char *formula;
    enum extent extent;
    unsigned kinds; /* FOR_BASIN: which, as bits */
    bool smoothed;
    const char *note;
    struct feed feed[FEEDS_MOST];
};

#define KIND(k)    (1u << (k))
#define CLARIFIERS (KIND(BASIN_PRIMARY_CLARIFIER) | KIND(BASIN_SECONDARY_CLARIFIER))
#define FACTOR                                                                                     \
    {                                                                                              \
        "load_factor", SUPPLY_LOAD_FACTOR, AMOUNT, false                                           \
    }
#define SOLIDS_HELD                                                                                \
    {"volume", SUPPLY_AERATION, AMOUNT, false},                                                    \
    {                                                                                              \
        "mlss", SUPPLY_AERATION, STRENGTH, false                                                   \
    }
#define WASTED                                                                                     \
    {"waste_flow", SUPPLY_WASTE, AMOUNT, false},                                                   \
    {                                                                                              \
        "waste_solids", SUPPLY_WASTE, STRENGTH, false                                              \
    }
#define LOST                                                                                       \
    {"effluent_flow", SUPPLY_OUT_SOLIDS, AMOUNT, false},                                           \
    {                                                                                              \
        "effluent_solids", SUPPLY_OUT_SOLIDS, STRENGTH, false                                      \
    }

static const struct plan plans[] = {
    {"mass-load",
     FOR_LOAD,
     0,
     false,
     "",
     {{"flow", SUPPLY_FLOW_HERE, AMOUNT, false},
      {"concentration", SUPPLY_STRENGTH_HERE, AMOUNT, false},
      FACTOR}},
    {"percent-removal",
     FOR_STAGE,
     0,
     false,
     "",
     {{"influent", SUPPLY_BEFORE, AMOUNT, false}, {"effluent", SUPPLY_AFTER, AMOUNT, false}}},
    {"sludge-volume-index",
     FOR_AERATION,
     0,
     false,
     "",
     {{"settled_volume", SUPPLY_SETTLED, AMOUNT, false},
      {"mlss", SUPPLY_SOLIDS_HERE, AMOUNT, false}}},
    {"solids-inventory",
     FOR_BASIN,
     KIND(BASIN_AERATION),
     false,
     "",
     {{"volume", SUPPLY_BASIN_SOLIDS, AMOUNT, false},
      {"mlss", SUPPLY_BASIN_SOLIDS, STRENGTH, false},
      FACTOR}},
    {"solids-inventory", FOR_PLANT, 0, false, "", {SOLIDS_HELD, FACTOR}},
    {"food-to-microorganism",
     FOR_FOOD,
     0,
     false,
     "",
     {{"flow", SUPPLY_FOOD, AMOUNT, false},
      {"bod", SUPPLY_FOOD, STRENGTH, false},
      {"volume", SUPPLY_VOLATILE, AMOUNT, false},
      {"mlvss", SUPPLY_VOLATILE, STRENGTH, false}}},
    {"volumetric-organic-loading",
     FOR_FOOD,
     0,
     false,
     "",
     {{"flow", SUPPLY_FOOD, AMOUNT, false},
      {"bod", SUPPLY_FOOD, STRENGTH, false},
      {"volume", SUPPLY_AERATION, AMOUNT, false},
      FACTOR}},
    {"solids-retention-time", FOR_PLANT, 0, true, "", {SOLIDS_HELD, WASTED, LOST}},
    {"solids-retention-time-wasting-only", FOR_PLANT, 0, true, "", {SOLIDS_HELD, WASTED}},
    {"mean-cell-residence-time",
     FOR_PLANT,
     0,
     true,
     "",
     {{"aeration_volume", SUPPLY_AERATION, AMOUNT, false},
      {"mlss", SUPPLY_AERATION, STRENGTH, false},
      {"clarifier_volume", SUPPLY_CLARIFIERS, AMOUNT, false},
      WASTED,
      LOST}},
    {"sludge-age",
     FOR_PLANT,
     0,
     true,
     "",
     {SOLIDS_HELD,
      {"flow", SUPPLY_ENTERING, AMOUNT, false},
      {"primary_effluent_solids", SUPPLY_ENTERING, STRENGTH, false}}},
    {"detention-time",
     FOR_BASIN,
     KIND(BASIN_AERATION) | KIND(BASIN_ANOXIC),
     false,
     "return flow not counted",
     {{"volume", SUPPLY_VOLUME, AMOUNT, false}, {"flow", SUPPLY_PLANT_FLOW, AMOUNT, true}}},
    {"detention-time",
     FOR_BASIN,
     CLARIFIERS | KIND(BASIN_GRIT),
     false,
     "",
     {{"volume", SUPPLY_VOLUME, AMOUNT, false}, {"flow", SUPPLY_PLANT_FLOW, AMOUNT, true}}},
    {"detention-time-days",
     FOR_BASIN,
     KIND(BASIN_LAGOON),
     false,
     "",
     {{"volume", SUPPLY_VOLUME, AMOUNT, false}, {"flow", SUPPLY_PLANT_FLOW, AMOUNT, true}}},
    {"surface-overflow-rate",
     FOR_BASIN,
     CLARIFIERS,
     false,
     "",
     {{"flow", SUPPLY_PLANT_FLOW, AMOUNT, true}, {"area", SUPPLY_AREA, AMOUNT, false}}},
    {"weir-overflow-rate",
     FOR_BASIN,
     CLARIFIERS,
     false,
     "",
     {{"flow", SUPPLY_PLANT_FLOW, AMOUNT, true}, {"weir_length", SUPPLY_WEIR, AMOUNT, false}}},
    {"solids-loading-rate",
     FOR_BASIN,
     KIND(BASIN_SECONDARY_CLARIFIER),
     false,
     "",
     {{"flow", SUPPLY_PLANT_FLOW, AMOUNT, true},
      {"return_flow", SUPPLY_RETURN_FLOW, AMOUNT, true},
      {"mlss", SUPPLY_MIXED_LIQUOR, STRENGTH, false},
      {"area", SUPPLY_AREA, AMOUNT, false},
      FACTOR}},
    {"return-ratio",
     FOR_RETURN,
     0,
     false,
     "",
     {{"return_flow", SUPPLY_RETURN_FLOW, AMOUNT, false},
      {"flow", SUPPLY_PLANT_FLOW, AMOUNT, false}}},
    {"chlorine-dose",
     FOR_EFFLUENT,
     0,
     false,
     "",
     {{"feed", SUPPLY_CHLORINE, AMOUNT, false}, {"flow", SUPPLY_OUT_FLOW, AMOUNT, false}, FACTOR}},
    {"contact-time",
     FOR_BASIN,
     KIND(BASIN_CONTACT),
     false,
     "baffling factor 1",
     {{"volume", SUPPLY_VOLUME, AMOUNT, false}, {"flow", SUPPLY_OUT_FLOW, AMOUNT, true}}},
};

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
    const struct plan *plan;
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

struct line *lines_add(struct supplies *s, struct lines *lines, const char *formula)
{
    struct line *line =
        arena_push(s->arena, &lines->line, &lines->count, &lines->room, sizeof *line);
    const struct formula *f = formula_find(formula);
    assert(f != NULL);
    line->ready = formula_ready(s->arena, f);
    line->name = f->name;
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
    return line;
}

void line_feed_as(struct supplies *s, struct line *line, const char *argument,
                  struct stream *stream, enum side side, const struct unit *from,
                  const struct unit *to)
{
    int i = formula_argument_index(line->ready->formula, argument);
    assert(i >= 0 && stream != NULL);
    struct input *input = &line->input[i];
    *input = (struct input){.stream = stream, .side = side};
    if (from == to)
        return;
    const struct fraction *one = fraction_from_int(s->arena, 1);
    input->offset = unit_convert(s->arena, fraction_from_int(s->arena, 0), from, to);
    input->factor =
        fraction_subtract(s->arena, unit_convert(s->arena, one, from, to), input->offset);
}

void line_feed(struct supplies *s, struct line *line, const char *argument, struct stream *stream,
               enum side side, const struct unit *from)
{
    int i = formula_argument_index(line->ready->formula, argument);
    assert(i >= 0);
    line_feed_as(s, line, argument, stream, side, from,
                 unit_find(line->ready->formula->argument[i].unit));
}

static struct stream *strength_at(struct finder *f, int point, int parameter)
{
    return roles_reading(f->s, point, parameter, unit_find("mg/L"));
}

static struct stream *settled_at(struct finder *f, int point)
{
    int parameter = plant_parameter(f->s->plant, "SV30");
    const struct unit *unit = unit_find("mL/L");
    if (parameter < 0 || !unit_same_kind(f->s->plant->parameters[parameter].unit, unit))
        return NULL;
    return roles_reading(f->s, point, parameter, unit);
}

static struct stream *solids_at(struct finder *f, int point)
{
    int parameter = plant_parameter(f->s->plant, "MLSS");
    if (parameter < 0 ||
        !unit_same_kind(f->s->plant->parameters[parameter].unit, unit_find("mg/L")))
        return NULL;
    return strength_at(f, point, parameter);
}

static struct stream *of_item(struct finder *f, const struct about *a, enum supply supply,
                              const char **flow_at)
{
    struct supplies *s = f->s;
    switch (supply) {
    case SUPPLY_STRENGTH_HERE:
    case SUPPLY_BEFORE:
        return strength_at(f, a->point, a->parameter);
    case SUPPLY_AFTER:
        return strength_at(f, a->to, a->parameter);
    case SUPPLY_FLOW_HERE:
        return roles_flow_past(s, &f->roles, a->point, flow_at);
    case SUPPLY_SETTLED:
        return settled_at(f, a->point);
    case SUPPLY_SOLIDS_HERE:
        return solids_at(f, a->point);
    case SUPPLY_VOLUME:
        return roles_basin(s, a->basin, MEASURE_VOLUME, NULL, unit_find("MG"));
    case SUPPLY_BASIN_SOLIDS:
        return roles_basin(s, a->basin, MEASURE_VOLUME, "MLSS", unit_find("MG"));
    case SUPPLY_AREA:
        return roles_basin(s, a->basin, MEASURE_AREA, NULL, unit_find("ft2"));
    case SUPPLY_WEIR:
        return roles_basin(s, a->basin, MEASURE_WEIR, NULL, unit_find("ft"));
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
    case SUPPLY_CHLORINE:
        return r->chlorine;
    default:
        assert(supply == SUPPLY_LOAD_FACTOR);
        return r->load_factor;
    }
}

/* The unit streams carry an argument in. */
static const struct unit *carried_in(enum supply supply, enum side side)
{
    if (side == STRENGTH)
        return unit_find("mg/L");
    switch (supply) {
    case SUPPLY_STRENGTH_HERE:
    case SUPPLY_BEFORE:
    case SUPPLY_AFTER:
    case SUPPLY_SOLIDS_HERE:
        return unit_find("mg/L");
    case SUPPLY_SETTLED:
        return unit_find("mL/L");
    case SUPPLY_AREA:
        return unit_find("ft2");
    case SUPPLY_WEIR:
        return unit_find("ft");
    case SUPPLY_VOLUME:
    case SUPPLY_BASIN_SOLIDS:
    case SUPPLY_AERATION:
    case SUPPLY_VOLATILE:
    case SUPPLY_CLARIFIERS:
        return unit_find("MG");
    case SUPPLY_CHLORINE:
        return unit_find("lb/d");
    case SUPPLY_LOAD_FACTOR:
        return unit_find("lb/gal");
    default:
        return unit_find("MGD");
    }
}

/* Adds the line when everything it takes is measured here. */
static void add(struct finder *f, const struct about *a)
{
    struct stream *stream[FEEDS_MOST];
    const char *flow_at = NULL;
    const struct plan *plan = a->plan;
    size_t feeds = 0;
    for (; feeds < FEEDS_MOST && plan->feed[feeds].argument; feeds++) {
        enum supply supply = plan->feed[feeds].supply;
        stream[feeds] = supply < SUPPLY_PLANT_FLOW ? of_item(f, a, supply, &flow_at)
                                                   : of_plant(&f->roles, supply);
        if (stream[feeds] == NULL)
            return;
    }
    struct line *line = lines_add(f->s, f->out, plan->formula);
    for (size_t i = 0; i < feeds; i++) {
        const struct feed *feed = &plan->feed[i];
        line_feed(f->s, line, feed->argument, stream[i], feed->side,
                  carried_in(feed->supply, feed->side));
        line->input[formula_argument_index(line->ready->formula, feed->argument)].shared =
            feed->shared;
    }
    line->at = a->at;
    line->parameter = a->parameter >= 0 ? f->s->plant->parameters[a->parameter].id : "";
    line->smoothed = plan->smoothed;
    line->basin = a->basin;
    line->kind = a->kind;
    line->note = plan->note;
    if (flow_at != NULL && *flow_at && !text_equal(flow_at, a->at))
        line->note = arena_print(f->s->arena, "with the flow of %s", flow_at);
}

/* ---- going through the plant ---- */

static struct about about(const struct plan *plan, const char *at)
{
    return (struct about){.plan = plan, .at = at, .point = -1, .to = -1, .parameter = -1};
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
                struct about a = about(plan, p->points[i].id);
                a.point = (int)i;
                a.parameter = (int)k;
                if (counts(&p->parameters[k], true) && frame_has(f->s->frame, (int)i, (int)k))
                    add(f, &a);
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
            about(plan, arena_print(f->s->arena, "%s>%s", p->points[from].id, p->points[to].id));
        a.point = from;
        a.to = to;
        a.parameter = (int)k;
        add(f, &a);
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

static void add_aeration_points(struct finder *f, const struct plan *plan)
{
    const struct plant *p = f->s->plant;
    for (size_t i = 0; i < p->point_count; i++) {
        struct about a = about(plan, p->points[i].id);
        a.point = (int)i;
        if (p->points[i].role == ROLE_AERATION)
            add(f, &a);
    }
}

static bool seen_before(const struct plant *p, size_t i)
{
    for (size_t k = 0; k < i; k++)
        if (text_equal(p->basins[k].id, p->basins[i].id))
            return true;
    return false;
}

/* A basin may have several rows, one for each time it was in service. */
static void add_basins(struct finder *f, const struct plan *plan)
{
    const struct plant *p = f->s->plant;
    for (size_t i = 0; i < p->basin_count; i++) {
        struct about a = about(plan, p->basins[i].id);
        a.basin = p->basins[i].id;
        a.kind = p->basins[i].kind;
        if ((plan->kinds & KIND(a.kind)) && !seen_before(p, i))
            add(f, &a);
    }
}

static void add_foods(struct finder *f, const struct plan *plan)
{
    for (size_t i = 0; i < NELEM(foods); i++) {
        struct about a = about(plan, "plant");
        a.parameter = plant_parameter(f->s->plant, foods[i]);
        if (a.parameter >= 0)
            add(f, &a);
    }
}

/* At the only point of the role; where there are several, at the plant. */
static void add_at_role(struct finder *f, const struct plan *plan, enum role role)
{
    int point = roles_only(f->s->plant, role);
    struct about a = about(plan, point >= 0 ? f->s->plant->points[point].id : "plant");
    add(f, &a);
}

static void add_plan(struct finder *f, const struct plan *plan)
{
    struct about a = about(plan, "plant");
    switch (plan->extent) {
    case FOR_LOAD:
        add_loads(f, plan);
        break;
    case FOR_STAGE:
        add_stages(f, plan);
        break;
    case FOR_AERATION:
        add_aeration_points(f, plan);
        break;
    case FOR_BASIN:
        add_basins(f, plan);
        break;
    case FOR_PLANT:
        add(f, &a);
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
    for (size_t i = 0; i < NELEM(plans); i++)
        add_plan(&f, &plans[i]);
}
