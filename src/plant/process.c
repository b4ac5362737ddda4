/* process: the rows of process.csv: the arguments of the plant's own figures. */
#include "plant/draft.h"

#include <string.h>

#include "base/poison.h"

static const char *const measure_words[] = {"volume", "area", "weir"};
static const char *const measure_kinds[] = {"volume", "area", "length"};

static bool basin_known(const struct plant *p, const char *id)
{
    for (size_t i = 0; i < p->basin_count; i++)
        if (text_equal(p->basins[i].id, id))
            return true;
    return false;
}

static bool basin_in(struct plant_draft *d, const struct plant_row *row, int column, const char *id)
{
    const struct plant *p = d->plant;
    const char **names;
    const char *near;

    if (basin_known(p, id))
        return true;
    names = arena_alloc(d->arena, (p->basin_count + 1) * sizeof *names);
    for (size_t i = 0; i < p->basin_count; i++)
        names[i] = p->basins[i].id;
    near = p->basin_count > 0 ? text_nearest(id, names, p->basin_count) : NULL;
    problem(d, row, column,
            near ? arena_print(d->arena, "the nearest is '%s'", near) : "add it to basins.csv",
            "no basin '%s'", id);
    return false;
}

/* Whether any row of the basin states the measure. */
static bool basin_measured(const struct plant *p, const char *id, enum process_source source)
{
    for (size_t i = 0; i < p->basin_count; i++) {
        const struct basin *b = &p->basins[i];

        if (text_equal(b->id, id) && ((source == SOURCE_BASIN_VOLUME && b->volume.set) ||
                                      (source == SOURCE_BASIN_AREA && b->area.set) ||
                                      (source == SOURCE_BASIN_WEIR && b->weir.set)))
            return true;
    }
    return false;
}

static bool read_basin_source(struct plant_draft *d, const struct plant_row *row,
                              const char *const *part, struct process_row *p)
{
    int measure = 0;

    p->basin = part[1];
    if (!word_in(d, row, PROCESS_SOURCE, "measure of a basin", part[2], measure_words,
                 NELEM(measure_words), &measure) ||
        !basin_in(d, row, PROCESS_SOURCE, part[1]))
        return false;
    p->source = (enum process_source)(SOURCE_BASIN_VOLUME + measure);
    if (!basin_measured(d->plant, part[1], p->source)) {
        problem(d, row, PROCESS_SOURCE, "add it to basins.csv", "basin '%s' has no %s", part[1],
                part[2]);
        return false;
    }
    if (!p->unit || text_equal(p->unit->kind, measure_kinds[measure]))
        return true;
    problem(d, row, PROCESS_UNIT,
            arena_print(d->arena, "name a unit of %s", measure_kinds[measure]),
            "'%s' is a unit of %s", p->unit->name, p->unit->kind);
    return false;
}

static bool read_reading_source(struct plant_draft *d, const struct plant_row *row,
                                const char *const *part, struct process_row *p)
{
    const struct unit *own;
    bool ok = point_in(d, row, PROCESS_SOURCE, part[0], &p->point);

    p->source = SOURCE_READING;
    ok = parameter_in(d, row, PROCESS_SOURCE, part[1], &p->source_parameter) && ok;
    if (!ok || !p->unit)
        return ok;
    own = d->plant->parameters[p->source_parameter].unit;
    if (!own || unit_same_kind(own, p->unit))
        return true;
    problem(d, row, PROCESS_UNIT,
            arena_print(d->arena, "%s is measured in %s; name a unit of %s", part[1], own->name,
                        own->kind),
            "'%s' is a unit of %s", p->unit->name, p->unit->kind);
    return false;
}

static bool read_source(struct plant_draft *d, const struct plant_row *row, struct process_row *p)
{
    const char *part[3];
    size_t parts = split(d, cell(row, PROCESS_SOURCE), ' ', part, NELEM(part));

    if (!read_given(d, row, PROCESS_SOURCE))
        return false;
    if (parts == 1) {
        p->source = SOURCE_NUMBER;
        return number_in(d, row, PROCESS_SOURCE, part[0], &p->number);
    }
    if (parts == 2)
        return read_reading_source(d, row, part, p);
    if (parts == 3 && text_equal(part[0], "basin"))
        return read_basin_source(d, row, part, p);
    problem(d, row, PROCESS_SOURCE,
            "write POINT PARAMETER, basin NAME volume (or area, weir), or a number",
            "cannot read the source '%s'", cell(row, PROCESS_SOURCE));
    return false;
}

/* `plant`, a point, a basin, or two points as FROM>TO; blank is `plant`. */
static bool read_at(struct plant_draft *d, const struct plant_row *row, struct process_row *p)
{
    const char *part[2];
    int point;

    if (read_blank(row, PROCESS_AT) || text_equal(cell(row, PROCESS_AT), "plant")) {
        p->at = "plant";
        return true;
    }
    p->at = cell(row, PROCESS_AT);
    if (strchr(p->at, '>') && split(d, p->at, '>', part, 2) == 2) {
        bool ok = point_in(d, row, PROCESS_AT, part[0], &point);

        return point_in(d, row, PROCESS_AT, part[1], &point) && ok;
    }
    return basin_known(d->plant, p->at) || point_in(d, row, PROCESS_AT, p->at, &point);
}

/* The rows of one figure name one formula, and each argument once. */
static bool process_agrees(struct plant_draft *d, const struct plant_row *row,
                           const struct process_row *p)
{
    for (size_t i = 0; i < d->plant->process_count; i++) {
        const struct process_row *q = &d->plant->process[i];

        if (!text_equal(p->name, q->name) || !text_equal(p->at, q->at) ||
            p->parameter != q->parameter)
            continue;
        if (!text_equal(p->formula, q->formula)) {
            problem(d, row, PROCESS_FORMULA, "name one formula, or another figure",
                    "'%s' at %s has the formula '%s' in line %ld", p->name, p->at, q->formula,
                    q->line);
            return false;
        }
        if (text_equal(p->argument, q->argument)) {
            problem(d, row, PROCESS_ARGUMENT, "keep one",
                    "the argument '%s' of '%s' at %s stands already in line %ld", p->argument,
                    p->name, p->at, q->line);
            return false;
        }
    }
    return true;
}

void read_process(struct plant_draft *d, const struct plant_row *row)
{
    struct process_row p = {.line = row->line,
                            .name = cell(row, PROCESS_NAME),
                            .formula = cell(row, PROCESS_FORMULA),
                            .argument = cell(row, PROCESS_ARGUMENT),
                            .parameter = -1,
                            .point = -1,
                            .source_parameter = -1,
                            .basin = ""};
    bool ok = read_given(d, row, PROCESS_NAME);

    ok = read_at(d, row, &p) && ok;
    if (!read_blank(row, PROCESS_PARAMETER))
        ok = parameter_in(d, row, PROCESS_PARAMETER, cell(row, PROCESS_PARAMETER), &p.parameter) &&
             ok;
    ok = read_given(d, row, PROCESS_FORMULA) && ok;
    ok = read_given(d, row, PROCESS_ARGUMENT) && ok;
    if (!read_blank(row, PROCESS_UNIT))
        ok = unit_in(d, row, PROCESS_UNIT, cell(row, PROCESS_UNIT), &p.unit) && ok;
    ok = read_source(d, row, &p) && ok;
    if (ok && process_agrees(d, row, &p)) {
        d->origin[PLANT_PROCESS][d->plant->process_count] = row;
        d->plant->process[d->plant->process_count++] = p;
    }
}
