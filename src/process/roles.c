/* Which point serves for what, by the roles of points and the kinds of basins. */
#include "process/roles.h"

#include <assert.h>
#include <ctype.h>
#include <string.h>

#include "base/poison.h"

/* The parameters that have a part of their own in the table; ids of the built-in catalogue. */
#define MIXED_LIQUOR  "MLSS"
#define VOLATILE      "MLVSS"
#define SUSPENDED     "TSS"
#define CHEMICAL_FEED "FEED"

int roles_only(const struct plant *p, enum role role)
{
    int found = -1;
    for (size_t i = 0; i < p->point_count; i++) {
        if (p->points[i].role != role)
            continue;
        if (found >= 0)
            return -1;
        found = (int)i;
    }
    return found;
}

int roles_influent_for(const struct supplies *s, int to)
{
    const struct plant *p = s->plant;
    int only = roles_only(p, ROLE_INFLUENT);
    int found = -1;
    if (only >= 0)
        return only;
    for (size_t i = 0; i < p->point_count; i++)
        if (p->points[i].role == ROLE_INFLUENT && *p->points[i].outfall &&
            text_equal(p->points[i].outfall, p->points[to].outfall))
            found = found == -1 ? (int)i : -2;
    return found >= 0 ? found : p->rules.word[RULE_INFLUENT];
}

/* ---- single things ---- */

struct stream *roles_number(struct supplies *s, const struct fraction *number)
{
    struct stream *stream = stream_new(s);
    stream_add(s, stream, (struct part){.number = number});
    return stream;
}

struct stream *roles_reading(struct supplies *s, int point, int parameter, const struct unit *unit)
{
    struct series *series = series_of(s, point, parameter, unit);
    return series ? stream_of(s, series) : NULL;
}

static const struct series *strength_of(struct supplies *s, int point, const char *parameter)
{
    int index = plant_parameter(s->plant, parameter);
    const struct unit *mg_per_l = unit_find("mg/L");
    if (index < 0 || point < 0 || !unit_same_kind(s->plant->parameters[index].unit, mg_per_l))
        return NULL;
    return series_of(s, point, index, mg_per_l);
}

/* ---- flows ---- */

/* The point's own meter. */
static struct series *own_flow(struct supplies *s, int point)
{
    int at;
    int parameter;
    if (!frame_flow_of(s->frame, point, &s->plant->rules, &at, &parameter) || at != point)
        return NULL;
    return series_of(s, at, parameter, unit_find("MGD"));
}

/* The meter the rule `flow` names for a point that has none. */
static struct series *ruled_flow(struct supplies *s, int point)
{
    int at;
    int parameter;
    if (point < 0 || !frame_flow_of(s->frame, point, &s->plant->rules, &at, &parameter))
        return NULL;
    return series_of(s, at, parameter, unit_find("MGD"));
}

static bool has_role(const struct plant *p, enum role role)
{
    for (size_t i = 0; i < p->point_count; i++)
        if (p->points[i].role == role)
            return true;
    return false;
}

/* The flows of all points of a role together; NULL unless each has a meter of its own. */
static struct stream *flow_of_role(struct supplies *s, enum role role, const char **measured_at)
{
    const struct plant *p = s->plant;
    if (!has_role(p, role))
        return NULL;
    struct stream *stream = stream_new(s);
    for (size_t i = 0; i < p->point_count; i++) {
        if (p->points[i].role != role)
            continue;
        const struct series *flow = own_flow(s, (int)i);
        if (flow == NULL)
            return NULL;
        stream_add(s, stream, (struct part){.reading = flow});
        *measured_at = stream->parts == 1 ? p->points[i].id : "";
    }
    return stream;
}

static struct stream *main_flow(struct supplies *s, enum role first, enum role second,
                                const char **measured_at)
{
    struct series *ruled;
    struct stream *stream = flow_of_role(s, first, measured_at);
    if (stream != NULL)
        return stream;
    ruled = ruled_flow(s, roles_only(s->plant, first));
    if (ruled == NULL)
        return flow_of_role(s, second, measured_at);
    *measured_at = s->plant->points[ruled->point].id;
    return stream_of(s, ruled);
}

struct stream *roles_flow_past(struct supplies *s, const struct roles *r, int point,
                               const char **measured_at)
{
    enum role role = s->plant->points[point].role;
    struct series *flow = own_flow(s, point);
    bool early = role == ROLE_INFLUENT || role == ROLE_PRIMARY_EFFLUENT;
    bool late = role == ROLE_SECONDARY_EFFLUENT || role == ROLE_EFFLUENT;
    if (flow == NULL && (early || late))
        flow = ruled_flow(s, point);
    if (flow != NULL) {
        *measured_at = s->plant->points[flow->point].id;
        return stream_of(s, flow);
    }
    /* The plant's flow passes this point only where nothing runs beside it. */
    if (!(early || late) || roles_only(s->plant, role) != point)
        return NULL;
    *measured_at = early ? r->plant_flow_at : r->out_flow_at;
    return early ? r->plant_flow : r->out_flow;
}

/* ---- streams with a strength ---- */

/* Adds a point's flow with the strength of the first parameter that is measured. */
static bool add_carrying(struct supplies *s, struct stream *stream, struct stream *flow,
                         const struct series *strength)
{
    if (flow == NULL || strength == NULL)
        return false;
    stream_add(s, stream, (struct part){.stream = flow, .strength = strength});
    return true;
}

struct stream *roles_entering(struct supplies *s, const struct roles *r, const char *parameter)
{
    const struct plant *p = s->plant;
    enum role role = ROLE_INFLUENT;
    for (size_t i = 0; i < p->point_count; i++)
        if (p->points[i].role == ROLE_PRIMARY_EFFLUENT && strength_of(s, (int)i, parameter))
            role = ROLE_PRIMARY_EFFLUENT;
    if (!has_role(p, role))
        return NULL;
    struct stream *stream = stream_new(s);
    for (size_t i = 0; i < p->point_count; i++) {
        const char *at;
        if (p->points[i].role == role &&
            !add_carrying(s, stream, roles_flow_past(s, r, (int)i, &at),
                          strength_of(s, (int)i, parameter)))
            return NULL;
    }
    return stream;
}

struct stream *roles_leaving(struct supplies *s, const struct roles *r, const char *parameter)
{
    const struct plant *p = s->plant;
    const struct series *before = strength_of(s, roles_only(p, ROLE_SECONDARY_EFFLUENT), parameter);
    if (!has_role(p, ROLE_EFFLUENT))
        return NULL;
    struct stream *stream = stream_new(s);
    for (size_t i = 0; i < p->point_count; i++) {
        const char *at;
        const struct series *strength = strength_of(s, (int)i, parameter);
        if (p->points[i].role == ROLE_EFFLUENT &&
            !add_carrying(s, stream, roles_flow_past(s, r, (int)i, &at),
                          strength ? strength : before))
            return NULL;
    }
    return stream;
}

static const struct series *sludge_solids(struct supplies *s, int point)
{
    const struct series *solids = strength_of(s, point, SUSPENDED);
    return solids ? solids : strength_of(s, point, MIXED_LIQUOR);
}

/* Waste is as thick as the return where it is drawn from the return line and not sampled. */
static struct stream *find_waste(struct supplies *s)
{
    const struct plant *p = s->plant;
    const struct series *returned = sludge_solids(s, roles_only(p, ROLE_RETURN_SLUDGE));
    struct stream *stream = stream_new(s);
    for (size_t i = 0; i < p->point_count; i++) {
        const struct series *flow = NULL;
        if (p->points[i].role == ROLE_WASTE_SLUDGE)
            flow = own_flow(s, (int)i);
        if (flow == NULL)
            continue;
        const struct series *solids = sludge_solids(s, (int)i);
        if (solids == NULL)
            solids = returned;
        if (solids == NULL)
            return NULL;
        stream_add(s, stream, (struct part){.reading = flow, .strength = solids});
    }
    return stream->parts > 0 ? stream : NULL;
}

/* ---- basins ---- */

int roles_basin_point(const struct plant *p, const struct basin *b)
{
    return b->point >= 0 ? b->point : roles_only(p, ROLE_AERATION);
}

/* Adds a basin's row; false when it lacks the measure, or the strength that is asked for. */
static bool add_basin(struct supplies *s, struct stream *stream, const struct basin *b,
                      enum measure measure, const char *parameter, const struct unit *unit)
{
    const struct optional *value = measure == MEASURE_VOLUME ? &b->volume
                                   : measure == MEASURE_AREA ? &b->area
                                                             : &b->weir;
    const struct unit *own = measure == MEASURE_VOLUME ? b->volume_unit
                             : measure == MEASURE_AREA ? b->area_unit
                                                       : b->weir_unit;
    const struct series *strength = NULL;
    if (!value->set || own == NULL)
        return false;
    if (parameter != NULL) {
        strength = strength_of(s, roles_basin_point(s->plant, b), parameter);
        if (strength == NULL)
            return false;
    }
    const struct fraction *number =
        unit_convert(s->arena, fraction_from_decimal(s->arena, value->value), own, unit);
    stream_add(s, stream, (struct part){.number = number, .basin = b, .strength = strength});
    return true;
}

struct stream *roles_basin(struct supplies *s, const char *basin, enum measure measure,
                           const char *parameter, const struct unit *unit)
{
    struct stream *stream = stream_new(s);
    for (size_t i = 0; i < s->plant->basin_count; i++) {
        const struct basin *b = &s->plant->basins[i];
        if (text_equal(b->id, basin) && !add_basin(s, stream, b, measure, parameter, unit))
            return NULL;
    }
    return stream->parts > 0 ? stream : NULL;
}

/* All basins of a kind together; NULL unless each can be counted. */
static struct stream *basins_of_kind(struct supplies *s, enum basin_kind kind,
                                     const char *parameter)
{
    struct stream *stream = stream_new(s);
    for (size_t i = 0; i < s->plant->basin_count; i++) {
        const struct basin *b = &s->plant->basins[i];
        if (b->kind == kind && !add_basin(s, stream, b, MEASURE_VOLUME, parameter, unit_find("MG")))
            return NULL;
    }
    return stream->parts > 0 ? stream : NULL;
}

/* By volume where the aeration volumes are known; else the plain mean of the aeration points. */
static struct stream *find_mixed_liquor(struct supplies *s, const struct roles *r)
{
    const struct plant *p = s->plant;
    if (r->aeration != NULL)
        return r->aeration;
    struct stream *stream = stream_new(s);
    for (size_t i = 0; i < p->point_count; i++) {
        const struct series *solids = NULL;
        if (p->points[i].role == ROLE_AERATION)
            solids = strength_of(s, (int)i, MIXED_LIQUOR);
        if (solids != NULL)
            stream_add(s, stream,
                       (struct part){.number = fraction_from_int(s->arena, 1), .strength = solids});
    }
    return stream->parts > 0 ? stream : NULL;
}

/* The only basin that stands at a point has what its meter counts. */
static bool alone_at(const struct plant *p, const char *basin, int point)
{
    for (size_t i = 0; i < p->basin_count; i++)
        if (p->basins[i].point == point && !text_equal(p->basins[i].id, basin))
            return false;
    return true;
}

struct stream *roles_through(struct supplies *s, const struct roles *r, const char *basin,
                             int point, bool *shared)
{
    struct series *meter = NULL;
    if (point >= 0 && s->plant->points[point].role == ROLE_OTHER &&
        alone_at(s->plant, basin, point))
        meter = own_flow(s, point);
    *shared = meter == NULL;
    return meter ? stream_of(s, meter) : r->out_flow;
}

/* ---- chemicals ---- */

enum { WORDS_MOST = 5 };

static bool mentions(const char *text, const char *word)
{
    size_t length = strlen(word);
    for (; *text != '\0'; text++) {
        size_t i = 0;
        while (i < length && tolower((unsigned char)text[i]) == word[i])
            i++;
        if (i == length)
            return true;
    }
    return false;
}

static bool named(const struct point *p, const char *const words[WORDS_MOST])
{
    for (size_t i = 0; i < WORDS_MOST && words[i]; i++)
        if (mentions(p->id, words[i]) || mentions(p->name, words[i]))
            return true;
    return false;
}

/* Points of chemicals do not say which chemical: their names do. */
static bool is_chlorine(const struct point *p)
{
    static const char *const words[WORDS_MOST] = {"chlor", "hypo", "cl2", "naocl"};
    static const char *const others[WORDS_MOST] = {"dechlor", "chloride"};
    return p->role == ROLE_CHEMICAL && named(p, words) && !named(p, others);
}

static bool is_polymer(const struct point *p)
{
    static const char *const words[WORDS_MOST] = {"poly", "flocculant"};
    static const char *const others[WORDS_MOST] = {"polyalum", "polyphos"};
    return p->role == ROLE_CHEMICAL && named(p, words) && !named(p, others);
}

static bool is_aeration(const struct point *p)
{
    return p->role == ROLE_AERATION;
}

static bool is_digester(const struct point *p)
{
    return p->role == ROLE_DIGESTER;
}

bool roles_has_chemical(const struct plant *p, enum chemical chemical)
{
    static const char *const bisulfite[WORDS_MOST] = {"bisulf", "metabisulf", "sbs", "nahso3"};
    static const char *const dioxide[WORDS_MOST] = {"sulfur dioxide", "sulphur dioxide", "so2"};
    for (size_t i = 0; i < p->point_count; i++)
        if (p->points[i].role == ROLE_CHEMICAL &&
            named(&p->points[i], chemical == CHEMICAL_BISULFITE ? bisulfite : dioxide))
            return true;
    return chemical == CHEMICAL_ANY;
}

int roles_filtrate(const struct plant *p)
{
    static const char *const words[WORDS_MOST] = {"filtrate", "centrate", "pressate"};
    int found = -1;
    for (size_t i = 0; i < p->point_count; i++) {
        if (p->points[i].role != ROLE_OTHER || !named(&p->points[i], words))
            continue;
        if (found >= 0)
            return -1;
        found = (int)i;
    }
    return found;
}

/* What is read of the parameter at all such points together; NULL where nowhere. */
static struct stream *sum_at(struct supplies *s, bool (*is_such)(const struct point *p),
                             const char *parameter, const char *unit_name)
{
    int index = plant_parameter(s->plant, parameter);
    const struct unit *unit = unit_find(unit_name);
    struct stream *stream = stream_new(s);
    if (index < 0 || !unit_same_kind(s->plant->parameters[index].unit, unit))
        return NULL;
    for (size_t i = 0; i < s->plant->point_count; i++) {
        const struct series *read = NULL;
        if (is_such(&s->plant->points[i]))
            read = series_of(s, (int)i, index, unit);
        if (read != NULL)
            stream_add(s, stream, (struct part){.reading = read});
    }
    return stream->parts > 0 ? stream : NULL;
}

static struct stream *find_return_solids(struct supplies *s)
{
    const struct series *solids = sludge_solids(s, roles_only(s->plant, ROLE_RETURN_SLUDGE));
    if (solids == NULL)
        return NULL;
    struct stream *stream = stream_new(s);
    stream_add(s, stream,
               (struct part){.number = fraction_from_int(s->arena, 1), .strength = solids});
    return stream;
}

/* ---- all of them ---- */

/* A metric plant counts kg/d as m3/d x mg/L / 1000, so its factor is the exact weight of a gallon
 * of 1 kg/L: 3.785411784 L / 0.45359237 kg (NIST SP 811). */
struct stream *roles_load_factor(struct supplies *s)
{
    const struct fraction *factor =
        s->plant->metric
            ? fraction_parse(s->arena, "3785411784/453592370")
            : fraction_from_decimal(s->arena, s->plant->rules.number[RULE_LOAD_FACTOR]);
    return roles_number(s, factor);
}

void roles_find(struct supplies *s, struct roles *r)
{
    const char *at;
    *r = (struct roles){.plant_flow_at = "", .out_flow_at = ""};
    r->plant_flow = main_flow(s, ROLE_INFLUENT, ROLE_EFFLUENT, &r->plant_flow_at);
    r->out_flow = main_flow(s, ROLE_EFFLUENT, ROLE_INFLUENT, &r->out_flow_at);
    r->return_flow = flow_of_role(s, ROLE_RETURN_SLUDGE, &at);
    r->waste = find_waste(s);
    r->out_solids = roles_leaving(s, r, SUSPENDED);
    r->entering = roles_entering(s, r, SUSPENDED);
    r->aeration = basins_of_kind(s, BASIN_AERATION, MIXED_LIQUOR);
    r->volatile_solids = basins_of_kind(s, BASIN_AERATION, VOLATILE);
    r->mixed_liquor = find_mixed_liquor(s, r);
    r->clarifiers = basins_of_kind(s, BASIN_SECONDARY_CLARIFIER, NULL);
    r->return_solids = find_return_solids(s);
    r->digesters = basins_of_kind(s, BASIN_DIGESTER, NULL);
    r->chlorine = sum_at(s, is_chlorine, CHEMICAL_FEED, "lb/d");
    r->polymer = sum_at(s, is_polymer, CHEMICAL_FEED, "lb/d");
    r->air = sum_at(s, is_aeration, "AIR", "ft3/d");
    r->gas = sum_at(s, is_digester, "GAS", "ft3/d");
    r->load_factor = roles_load_factor(s);
}
