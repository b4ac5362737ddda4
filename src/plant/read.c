/* read: the rows of plant.csv, points.csv, basins.csv, meters.csv and round.csv. */
#include "plant/draft.h"

#include "base/poison.h"

/* ---- plant.csv ---- */

enum field {
    PLANT_NAME,
    PLANT_PERMIT,
    PLANT_RECEIVING_WATER,
    PLANT_UNITS,
    PLANT_TIME_ZONE,
    PLANT_SINCE,
    PLANT_FIELD_COUNT
};

static const char *const field_names[PLANT_FIELD_COUNT] = {
    "name", "permit", "receiving_water", "units", "time_zone", "since",
};

static const char *const system_words[] = {"us", "metric"};

static const char *nearest_field(const char *name)
{
    const char *names[PLANT_FIELD_COUNT + RULES];

    for (size_t i = 0; i < PLANT_FIELD_COUNT; i++)
        names[i] = field_names[i];
    for (size_t i = 0; i < RULES; i++)
        names[PLANT_FIELD_COUNT + i] = rule_info((enum rule)i)->name;
    return text_nearest(name, names, NELEM(names));
}

static bool field_repeated(struct plant_draft *d, const struct plant_row *row)
{
    for (const struct plant_row *r = d->rows; r < row; r++) {
        if (r->file != PLANT_FIELDS || r->builtin ||
            !text_equal(cell(r, FIELD_NAME), cell(row, FIELD_NAME)))
            continue;
        problem(d, row, FIELD_NAME, "keep one", "'%s' stands already in line %ld",
                cell(row, FIELD_NAME), r->line);
        return true;
    }
    return false;
}

static void read_plant_field(struct plant_draft *d, const struct plant_row *row, int field)
{
    struct plant *p = d->plant;
    const char *value = cell(row, FIELD_VALUE);
    int word;

    switch ((enum field)field) {
    case PLANT_NAME:
        p->name = value;
        (void)read_given(d, row, FIELD_VALUE);
        break;
    case PLANT_PERMIT:
        p->permit = value;
        break;
    case PLANT_RECEIVING_WATER:
        p->receiving_water = value;
        break;
    case PLANT_UNITS:
        if (*value != '\0' && read_word(d, row, FIELD_VALUE, "system of units", system_words,
                                        NELEM(system_words), &word))
            p->metric = word == 1;
        break;
    case PLANT_TIME_ZONE:
        p->time_zone = value;
        break;
    case PLANT_SINCE:
        (void)read_day(d, row, FIELD_VALUE, &p->since);
        break;
    case PLANT_FIELD_COUNT:
        break;
    }
}

void read_field(struct plant_draft *d, const struct plant_row *row)
{
    const char *name = cell(row, FIELD_NAME);
    int rule;

    if (!read_given(d, row, FIELD_NAME) || field_repeated(d, row))
        return;
    for (int i = 0; i < PLANT_FIELD_COUNT; i++) {
        if (text_equal(field_names[i], name)) {
            read_plant_field(d, row, i);
            return;
        }
    }
    rule = rule_find(name);
    if (rule < 0) {
        const char *near = nearest_field(name);

        problem(d, row, FIELD_NAME,
                near ? arena_print(d->arena, "the nearest is '%s'", near)
                     : arena_print(d->arena, "%s, or a rule",
                                   one_of(d, field_names, NELEM(field_names))),
                "no field '%s'", name);
    } else if (rule_info((enum rule)rule)->kind != RULE_IS_POINT || !read_blank(row, FIELD_VALUE)) {
        (void)rule_set(d, row, FIELD_VALUE, &d->plant->rules, (enum rule)rule,
                       cell(row, FIELD_VALUE));
    }
}

/* ---- points.csv ---- */

/* Two names that differ in capitals alone would be mixed up at the bench. */
static bool point_new(struct plant_draft *d, const struct plant_row *row)
{
    for (size_t i = 0; i < d->plant->point_count; i++) {
        const char *known = d->plant->points[i].id, *id = cell(row, POINT_ID);
        long line = d->origin[PLANT_POINTS][i]->line;

        if (text_equal(known, id)) {
            problem(d, row, POINT_ID, "keep one", "point '%s' stands already in line %ld", id,
                    line);
            return false;
        }
        if (text_equal_nocase(known, id)) {
            problem(d, row, POINT_ID, "write it the same way, or name it otherwise",
                    "point '%s' differs from '%s' in line %ld only in capitals", id, known, line);
            return false;
        }
    }
    return true;
}

void read_point(struct plant_draft *d, const struct plant_row *row)
{
    struct point p = {.id = cell(row, POINT_ID),
                      .name = cell(row, read_blank(row, POINT_NAME) ? POINT_ID : POINT_NAME),
                      .outfall = cell(row, POINT_OUTFALL)};
    int role;

    /* A point with a doubtful role is known all the same: its limits are not to be blamed. */
    if (!read_word(d, row, POINT_ROLE, "role", role_words, ROLES, &role))
        role = ROLE_OTHER;
    p.role = (enum role)role;
    if (!read_id(d, row, POINT_ID) || !point_new(d, row))
        return;
    d->origin[PLANT_POINTS][d->plant->point_count] = row;
    d->plant->points[d->plant->point_count++] = p;
}

/* ---- basins.csv ---- */

bool spans_meet(day_t from_a, day_t to_a, day_t from_b, day_t to_b)
{
    bool a_ends_before = to_a != DAY_NONE && from_b != DAY_NONE && to_a < from_b;
    bool b_ends_before = to_b != DAY_NONE && from_a != DAY_NONE && to_b < from_a;

    return !a_ends_before && !b_ends_before;
}

/* A size and its unit, in neighbouring columns. */
static bool read_size(struct plant_draft *d, const struct plant_row *row, int column,
                      const char *kind, struct optional *size, const struct unit **unit)
{
    const char *text = cell(row, column + 1);
    bool ok = read_positive(d, row, column, size);

    *unit = NULL;
    if (read_blank(row, column + 1)) {
        if (!size->set)
            return ok;
        problem(d, row, column + 1, "name the unit", "%s '%s' has no unit",
                layout_column(row, column), cell(row, column));
        return false;
    }
    if (!unit_in(d, row, column + 1, text, unit))
        return false;
    if (!text_equal((*unit)->kind, kind)) {
        problem(d, row, column + 1, arena_print(d->arena, "name a unit of %s", kind),
                "'%s' is a unit of %s", text, (*unit)->kind);
        return false;
    }
    if (ok && !size->set) {
        problem(d, row, column, "write the number, or take the unit away",
                "%s has a unit and no number", layout_column(row, column));
        return false;
    }
    return ok;
}

static bool basin_new(struct plant_draft *d, const struct plant_row *row, const struct basin *b)
{
    for (size_t i = 0; i < d->plant->basin_count; i++) {
        const struct basin *known = &d->plant->basins[i];

        if (!text_equal(known->id, b->id) || !spans_meet(known->from, known->to, b->from, b->to))
            continue;
        problem(d, row, b->from == DAY_NONE ? BASIN_ID : BASIN_FROM,
                "part the days by from and to, or name another basin",
                "basin '%s' is in service already by line %ld on days of this one", b->id,
                d->origin[PLANT_BASINS][i]->line);
        return false;
    }
    return true;
}

void read_basin(struct plant_draft *d, const struct plant_row *row)
{
    struct basin b = {.id = cell(row, BASIN_ID), .point = -1};
    int kind = 0;
    bool ok = read_id(d, row, BASIN_ID);

    ok = read_word(d, row, BASIN_KIND, "kind of basin", basin_kind_words, BASIN_KINDS, &kind) && ok;
    b.kind = (enum basin_kind)kind;
    if (!read_blank(row, BASIN_POINT))
        ok = point_in(d, row, BASIN_POINT, cell(row, BASIN_POINT), &b.point) && ok;
    ok = read_size(d, row, BASIN_VOLUME, "volume", &b.volume, &b.volume_unit) && ok;
    ok = read_size(d, row, BASIN_AREA, "area", &b.area, &b.area_unit) && ok;
    ok = read_size(d, row, BASIN_WEIR, "length", &b.weir, &b.weir_unit) && ok;
    ok = read_days(d, row, BASIN_FROM, &b.from, &b.to) && ok;
    if (!ok || !basin_new(d, row, &b))
        return;
    d->origin[PLANT_BASINS][d->plant->basin_count] = row;
    d->plant->basins[d->plant->basin_count++] = b;
}

/* ---- meters.csv ---- */

static bool meter_new(struct plant_draft *d, const struct plant_row *row, const struct meter *m)
{
    for (size_t i = 0; i < d->plant->meter_count; i++) {
        const struct meter *known = &d->plant->meters[i];

        if (known->point != m->point || known->parameter != m->parameter ||
            !spans_meet(known->from, known->to, m->from, m->to))
            continue;
        problem(d, row, m->from == DAY_NONE ? METER_POINT : METER_FROM,
                "part the days by from and to",
                "%s %s has a meter already by line %ld on days of this one", cell(row, METER_POINT),
                cell(row, METER_PARAMETER), d->origin[PLANT_METERS][i]->line);
        return false;
    }
    return true;
}

void read_meter(struct plant_draft *d, const struct plant_row *row)
{
    struct meter m = {.multiplier = {1, 0}};
    struct optional multiplier;
    int kind = METER_RATE;
    bool ok = point_in(d, row, METER_POINT, cell(row, METER_POINT), &m.point);

    ok = parameter_in(d, row, METER_PARAMETER, cell(row, METER_PARAMETER), &m.parameter) && ok;
    ok = read_word(d, row, METER_KIND, "kind of meter", meter_kind_words, METER_KINDS, &kind) && ok;
    m.kind = (enum meter_kind)kind;
    ok = read_positive(d, row, METER_ROLLS_AT, &m.rolls_at) && ok;
    if (ok && m.rolls_at.set && m.kind != METER_TOTALIZER) {
        problem(d, row, METER_ROLLS_AT, "take it away, or call the meter a totalizer",
                "a meter of rate does not roll over");
        ok = false;
    }
    ok = read_positive(d, row, METER_MULTIPLIER, &multiplier) && ok;
    if (multiplier.set)
        m.multiplier = multiplier.value;
    ok = read_days(d, row, METER_FROM, &m.from, &m.to) && ok;
    if (!ok || !meter_new(d, row, &m))
        return;
    d->origin[PLANT_METERS][d->plant->meter_count] = row;
    d->plant->meters[d->plant->meter_count++] = m;
}

/* ---- round.csv ---- */

static bool stop_new(struct plant_draft *d, const struct plant_row *row,
                     const struct round_stop *stop)
{
    for (size_t i = 0; i < d->plant->round_count; i++) {
        const struct round_stop *known = &d->plant->round[i];
        bool named = *stop->sample != '\0';

        if (known->point != stop->point || known->parameter != stop->parameter ||
            !text_equal(known->sample, stop->sample))
            continue;
        problem(d, row, named ? ROUND_SAMPLE : ROUND_PARAMETER, "keep one, or name another sample",
                "the stop %s %s%s%s stands already in line %ld", cell(row, ROUND_POINT),
                cell(row, ROUND_PARAMETER), named ? " " : "", stop->sample,
                d->origin[PLANT_ROUND][i]->line);
        return false;
    }
    return true;
}

void read_stop(struct plant_draft *d, const struct plant_row *row)
{
    struct round_stop stop = {.sample = cell(row, ROUND_SAMPLE)};
    bool ok = read_given(d, row, ROUND_POINT) &&
              point_in(d, row, ROUND_POINT, cell(row, ROUND_POINT), &stop.point);

    ok = read_given(d, row, ROUND_PARAMETER) &&
         parameter_in(d, row, ROUND_PARAMETER, cell(row, ROUND_PARAMETER), &stop.parameter) && ok;
    if (!ok || !stop_new(d, row, &stop))
        return;
    d->origin[PLANT_ROUND][d->plant->round_count] = row;
    d->plant->round[d->plant->round_count++] = stop;
}
