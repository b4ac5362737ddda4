/* map: column maps, and the names of points, parameters and units where a file gives them once for
 * a whole column. */
#include "intake/layout.h"
#include "intake/table.h"

#include <string.h>

#include "base/poison.h"

enum { MAP_COLUMN, MAP_POINT, MAP_PARAMETER, MAP_UNIT, MAP_SAMPLE, MAP_SKIP, MAP_COLUMNS };
static const char *const columns[MAP_COLUMNS] = {"column", "point",  "parameter",
                                                 "unit",   "sample", "skip"};

/* ---- names ---- */

enum status point_named(const struct plant *plant, const char *id, const struct place *where,
                        int *out, struct fault *f)
{
    *out = plant_point(plant, id);
    if (*out >= 0)
        return OK;
    const char *nearest = plant_nearest_point(plant, id);
    const char *todo = "correct it, or add the point to points.csv";
    if (nearest == NULL)
        return fault_at(f, where, todo, "no point '%s'", id);
    return fault_at(f, where, todo, "no point '%s'; the nearest is '%s'", id, nearest);
}

enum status parameter_named(const struct plant *plant, const char *id, const struct place *where,
                            int *out, struct fault *f)
{
    *out = plant_parameter(plant, id);
    if (*out >= 0)
        return OK;
    const char *nearest = plant_nearest_parameter(plant, id);
    const char *todo = "correct it, or add the parameter to parameters.csv";
    if (nearest == NULL)
        return fault_at(f, where, todo, "no parameter '%s'", id);
    return fault_at(f, where, todo, "no parameter '%s'; the nearest is '%s'", id, nearest);
}

enum status unit_named(const char *name, const struct place *where, const struct unit **out,
                       struct fault *f)
{
    *out = unit_find(name);
    if (*out != NULL)
        return OK;
    const char *nearest = unit_nearest(name);
    const char *todo = "use a unit spelling of weirbook-files(5)";
    if (nearest == NULL)
        return fault_at(f, where, todo, "no unit '%s'", name);
    return fault_at(f, where, todo, "no unit '%s'; the nearest is '%s'", name, nearest);
}

static bool ever_totalizer(const struct plant *plant, int point, int parameter)
{
    for (size_t i = 0; i < plant->meter_count; i++) {
        const struct meter *m = &plant->meters[i];
        if (m->point == point && m->parameter == parameter && m->kind == METER_TOTALIZER)
            return true;
    }
    return false;
}

enum status unit_allowed(const struct plant *plant, int point, int parameter,
                         const struct unit *unit, const struct place *where, struct fault *f)
{
    const struct parameter *p = &plant->parameters[parameter];
    if (unit_same_kind(unit, p->unit))
        return OK;
    if (text_equal(unit->kind, "volume") && ever_totalizer(plant, point, parameter))
        return OK;
    return fault_at(f, where, "use a unit of the parameter's kind",
                    "'%s' is a unit of %s, %s is measured in %s (%s)", unit->name, unit->kind,
                    p->id, p->unit->name, p->unit->kind);
}

/* ---- maps ---- */

const char *heading_plain(struct arena *a, const char *heading)
{
    char *s = arena_text(a, heading);
    char *to = s;
    for (const char *from = s; *from != '\0';) {
        if (from[0] == '\xc2' && from[1] == '\xa0') {
            *to++ = ' ';
            from += 2;
        } else {
            *to++ = *from++;
        }
    }
    *to = '\0';
    return trim(s);
}

struct map_entry *map_find(const struct map *m, const char *heading)
{
    for (size_t i = 0; i < m->count; i++)
        if (text_equal(m->entry[i].heading, heading))
            return &m->entry[i];
    return NULL;
}

static enum status read_entry(struct arena *a, const struct sheet *s, size_t row,
                              const struct plant *plant, const struct map *m, struct map_entry *e,
                              struct fault *f)
{
    static const char *const skip_words[] = {"yes"};
    int word = -1;
    e->heading = heading_plain(a, sheet_cell(s, row, MAP_COLUMN));
    e->where = sheet_place(s, row, MAP_COLUMN);
    e->point = e->parameter = -1;
    e->sample = arena_text(a, sheet_cell(s, row, MAP_SAMPLE));
    if (*e->heading == '\0')
        return fault_at(f, &e->where, "write the heading as the file has it",
                        "the column is not named");
    if (map_find(m, e->heading) != NULL)
        return fault_at(f, &e->where, "leave one of them out", "'%s' stands twice in the map",
                        e->heading);
    if (*sheet_cell(s, row, MAP_SKIP) != '\0' &&
        sheet_word(s, row, MAP_SKIP, skip_words, NELEM(skip_words), &word, f) != OK)
        return FAULT;
    e->skip = word == 0;
    if (e->skip)
        return OK;
    struct place at = sheet_place(s, row, MAP_POINT);
    if (point_named(plant, sheet_cell(s, row, MAP_POINT), &at, &e->point, f) != OK)
        return FAULT;
    at = sheet_place(s, row, MAP_PARAMETER);
    if (parameter_named(plant, sheet_cell(s, row, MAP_PARAMETER), &at, &e->parameter, f) != OK)
        return FAULT;
    e->unit = plant->parameters[e->parameter].unit;
    const char *unit = sheet_cell(s, row, MAP_UNIT);
    at = sheet_place(s, row, MAP_UNIT);
    if (*unit != '\0' && unit_named(unit, &at, &e->unit, f) != OK)
        return FAULT;
    return unit_allowed(plant, e->point, e->parameter, e->unit, &at, f);
}

enum status map_read(struct arena *a, const char *path, const struct plant *plant, struct map *out,
                     struct fault *f)
{
    struct sheet s;
    *out = (struct map){.count = 0};
    if (path == NULL)
        return OK;
    if (sheet_read(a, path, columns, MAP_COLUMNS, 1, &s, f) != OK)
        return FAULT;
    out->entry = arena_alloc(a, (s.table.rows + 1) * sizeof *out->entry);
    for (size_t i = 0; i < s.table.rows; i++) {
        struct map_entry entry = {.skip = false};
        if (read_entry(a, &s, i, plant, out, &entry, f) != OK)
            return FAULT;
        out->entry[out->count++] = entry;
    }
    return OK;
}
