/* layout: from a header to the meaning of each column, for long and wide files. */
#include "intake/layout.h"
#include "intake/table.h"

#include <string.h>

#include "base/poison.h"

/* What a file of rows set aside has beside the columns of a long file; read past. */
static const char *const aside_columns[] = {"reason", "explanation", "file", "line", "column"};

struct header {
    struct arena *arena;
    const char *path;
    const struct row *row;
    const struct plant *plant;
    struct layout *layout;
};

static struct place place_of(const struct header *h, size_t i)
{
    return (struct place){h->path, h->row->line, (int)i + 1};
}

static int word_index(const char *const *words, size_t count, const char *word)
{
    for (size_t i = 0; i < count; i++)
        if (text_equal_nocase(words[i], word))
            return (int)i;
    return -1;
}

/* ---- long ---- */

/* Two of the columns that only a long file has: one alone may be a slip in a wide file's header. */
static bool looks_long(const struct layout *l)
{
    static const char *const telling[] = {"point", "parameter", "value", "unit"};
    int found = 0;
    for (size_t i = 0; i < l->columns; i++)
        found += word_index(telling, NELEM(telling), l->column[i].heading) >= 0;
    return found >= 2;
}

static enum status unknown_long(const struct header *h, size_t i, struct fault *f)
{
    const char *known[LONG_COLUMNS + NELEM(aside_columns)];
    memcpy(known, long_columns, sizeof long_columns);
    memcpy(known + LONG_COLUMNS, aside_columns, sizeof aside_columns);
    const char *heading = h->layout->column[i].heading;
    const struct place where = place_of(h, i);
    if (*heading == '\0')
        return fault_at(f, &where, "name it, or take it out", "the column has no heading");
    const char *nearest = text_nearest(heading, known, NELEM(known));
    return fault_at(f, &where, "correct the heading, or take the column out", "no column '%s'%s",
                    heading, nearest_told(h->arena, nearest));
}

static enum status read_long(struct header *h, struct fault *f)
{
    struct layout *l = h->layout;
    for (size_t i = 0; i < l->columns; i++) {
        struct column *c = &l->column[i];
        int part = word_index(long_columns, LONG_COLUMNS, c->heading);
        c->skip = word_index(aside_columns, NELEM(aside_columns), c->heading) >= 0;
        if (c->skip)
            continue;
        if (part < 0)
            return unknown_long(h, i, f);
        const struct place where = place_of(h, i);
        if (l->at[part] >= 0)
            return fault_at(f, &where, "take one of them out", "the column '%s' stands twice",
                            c->heading);
        l->at[part] = (int)i;
        c->number = part == LONG_VALUE || part == LONG_MDL || part == LONG_RL;
    }
    for (int part = 0; part <= LONG_UNIT; part++)
        if (l->at[part] < 0 && part != LONG_TIME)
            return fault_at(f, &(struct place){.file = h->path, .line = h->row->line},
                            "a long file has date, point, parameter, value and unit",
                            "the column '%s' is missing", long_columns[part]);
    return OK;
}

/* ---- wide ---- */

static const char *next_word(struct arena *a, const char **s)
{
    *s += strspn(*s, " ");
    size_t length = strcspn(*s, " ");
    const char *word = arena_bytes(a, *s, length);
    *s += length;
    *s += strspn(*s, " ");
    return word;
}

/* POINT PARAMETER [unit]; the unit may be left out. False: the heading is made otherwise. */
static bool split_heading(struct arena *a, const char *heading, const char **point,
                          const char **parameter, const char **unit)
{
    const char *s = heading;
    *point = next_word(a, &s);
    *parameter = next_word(a, &s);
    *unit = "";
    size_t rest = strlen(s);
    if (rest > 2 && s[0] == '[' && s[rest - 1] == ']') {
        const char *inside = arena_bytes(a, s + 1, rest - 2);
        *unit = next_word(a, &inside);
        rest = strlen(inside);
    }
    return **point != '\0' && **parameter != '\0' && **parameter != '[' && rest == 0;
}

/* The entry of the map that the heading may be a slip of; NULL: none. */
static const char *nearest_entry(const struct header *h, const struct map *map, const char *heading)
{
    const char **known = arena_alloc(h->arena, (map->count + 1) * sizeof *known);
    for (size_t k = 0; k < map->count; k++)
        known[k] = map->entry[k].heading;
    return text_nearest(heading, known, map->count);
}

static enum status read_heading(struct header *h, size_t i, const struct map *map, struct fault *f)
{
    struct column *c = &h->layout->column[i];
    const struct place where = place_of(h, i);
    const char *point;
    const char *parameter;
    const char *unit;
    const char *nearest = nearest_entry(h, map, c->heading);
    bool split = split_heading(h->arena, c->heading, &point, &parameter, &unit);
    if (!split || (nearest != NULL && plant_point(h->plant, point) < 0))
        return fault_at(f, &where, "correct it, or name the column in a column map (--map)",
                        "the heading '%s' is not POINT PARAMETER [unit]%s", c->heading,
                        nearest_told(h->arena, nearest));
    if (point_named(h->plant, point, &where, &c->point, f) != OK ||
        parameter_named(h->plant, parameter, &where, &c->parameter, f) != OK)
        return FAULT;
    c->unit = h->plant->parameters[c->parameter].unit;
    if (*unit != '\0' && unit_named(unit, &where, &c->unit, f) != OK)
        return FAULT;
    return unit_allowed(h->plant, c->point, c->parameter, c->unit, &where, f);
}

/* A heading that comes twice, or two that mean the same readings. */
static enum status check_twice(const struct header *h, size_t i, struct fault *f)
{
    const struct column *c = &h->layout->column[i];
    const struct place where = place_of(h, i);
    for (size_t k = 0; k < i; k++) {
        const struct column *other = &h->layout->column[k];
        if (other->skip || other->point < 0)
            continue;
        if (text_equal(other->heading, c->heading))
            return fault_at(f, &where, "rename one of them, or skip both in a column map",
                            "the heading '%s' stands twice", c->heading);
        if (other->point == c->point && other->parameter == c->parameter &&
            text_equal(other->sample, c->sample))
            return fault_at(f, &where, "give one of them a sample in a column map, or skip it",
                            "'%s' and '%s' are both %s %s", other->heading, c->heading,
                            h->plant->points[c->point].id, h->plant->parameters[c->parameter].id);
    }
    return OK;
}

static enum status read_wide_column(struct header *h, size_t i, const struct map *map,
                                    struct fault *f)
{
    struct column *c = &h->layout->column[i];
    struct map_entry *entry = map_find(map, c->heading);
    const struct place where = place_of(h, i);
    if (entry != NULL) {
        entry->used = true;
        c->skip = entry->skip;
        c->point = entry->point;
        c->parameter = entry->parameter;
        c->unit = entry->unit;
        c->sample = entry->sample;
    } else if (h->layout->at[LONG_TIME] < 0 && text_equal_nocase(c->heading, "time")) {
        h->layout->at[LONG_TIME] = (int)i;
        return OK;
    } else if (*c->heading == '\0') {
        return fault_at(f, &where, "name it, or take it out", "the column has no heading");
    } else if (read_heading(h, i, map, f) != OK) {
        return FAULT;
    }
    c->number = !c->skip;
    return c->skip ? OK : check_twice(h, i, f);
}

static enum status check_map_used(const struct header *h, const struct map *map, struct fault *f)
{
    const char **known = arena_alloc(h->arena, (h->layout->columns + 1) * sizeof *known);
    for (size_t i = 0; i < h->layout->columns; i++)
        known[i] = h->layout->column[i].heading;
    for (size_t k = 0; k < map->count; k++) {
        const struct map_entry *e = &map->entry[k];
        if (e->used)
            continue;
        if (text_equal(e->heading, known[0]))
            return fault_at(f, &e->where, "leave it out of the map",
                            "'%s' is the first column of %s, which holds the date", e->heading,
                            h->path);
        return fault_at(
            f, &e->where, "write the heading as the file has it", "%s has no column '%s'%s",
            h->path, e->heading,
            nearest_told(h->arena, text_nearest(e->heading, known, h->layout->columns)));
    }
    return OK;
}

static enum status read_wide(struct header *h, const char *map_path, struct fault *f)
{
    struct map map;
    h->layout->wide = true;
    h->layout->at[LONG_DATE] = 0;
    if (map_read(h->arena, map_path, h->plant, &map, f) != OK)
        return FAULT;
    if (h->layout->columns < 2)
        return fault_at(
            f, &(struct place){.file = h->path, .line = h->row->line},
            "if its headings stand lower, or another sign parts its cells, state header_line or"
            " delimiter in a dialect file",
            "the header has one column alone, '%s'", h->layout->column[0].heading);
    for (size_t i = 1; i < h->layout->columns; i++)
        if (read_wide_column(h, i, &map, f) != OK)
            return FAULT;
    return check_map_used(h, &map, f);
}

/* ---- both ---- */

static enum status take_headings(struct header *h, struct fault *f)
{
    const struct row *row = h->row;
    struct layout *l = h->layout;
    const struct place where = {.file = h->path, .line = row->line};
    if (row->problem != REASON_COUNT)
        return fault_at(f, &where, reason_todo[row->problem], "%s", row_problem(row->problem));
    if (row->count > COLUMNS_MAX)
        return fault_at(f, &where, "split the file", "more than %zu columns", COLUMNS_MAX);
    l->columns = row->count;
    l->column = arena_alloc(h->arena, (row->count + 1) * sizeof *l->column);
    for (size_t i = 0; i < row->count; i++) {
        struct column *c = &l->column[i];
        *c = (struct column){.point = -1, .parameter = -1, .sample = "", .style = {'.', '\0'}};
        c->heading = heading_plain(h->arena, row->cell[i]);
    }
    while (l->columns > 1 && *l->column[l->columns - 1].heading == '\0')
        l->columns--;
    return OK;
}

enum status layout_read(struct arena *a, const char *path, const struct row *header,
                        const struct plant *plant, const struct dialect *dialect, const char *map,
                        struct layout *out, struct fault *f)
{
    struct header h = {a, path, header, plant, out};
    *out = (struct layout){.wide = false};
    for (size_t i = 0; i < LONG_COLUMNS; i++)
        out->at[i] = -1;
    if (take_headings(&h, f) != OK)
        return FAULT;
    bool is_long =
        dialect->layout == LAYOUT_LONG || (dialect->layout == LAYOUT_UNSTATED && looks_long(out));
    if (!is_long)
        return read_wide(&h, map, f);
    if (map != NULL)
        return fault_at(f, &(struct place){.file = path, .line = header->line},
                        "leave the column map out", "a long file takes no column map");
    return read_long(&h, f);
}
