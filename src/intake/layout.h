/* layout: what each column of a readings file holds, told by its header and a column map. Private
 * to this room. */
#ifndef WEIRBOOK_INTAKE_LAYOUT_H
#define WEIRBOOK_INTAKE_LAYOUT_H

#include "intake/dialect.h"
#include "intake/numbers.h"
#include "intake/rows.h"

struct column {
    const char *heading;
    bool skip;
    bool number; /* holds numbers: the marks in it are evidence */
    /* Of a wide file's column of readings: */
    int point, parameter; /* -1: another kind of column */
    const struct unit *unit;
    const char *sample;
    struct number_style style;
    char grouped; /* the mark between thousands that its numbers prove, or '\0' */
};

struct layout {
    bool wide;
    size_t columns;
    struct column *column;
    int at[LONG_COLUMNS]; /* long: where each stands, -1: absent; wide: date and time only */
};

/* Reads the header. Faults name the cell and the nearest known word. */
MUST_USE enum status layout_read(struct arena *a, const char *path, const struct row *header,
                                 const struct plant *plant, const struct dialect *dialect,
                                 const char *map, struct layout *out, struct fault *f);
/* A heading as it is compared: no-break spaces are spaces, none at the ends. In the arena. */
const char *heading_plain(struct arena *a, const char *heading);

/* ---- column maps (map.c) ---- */

struct map_entry {
    const char *heading;
    struct place where;
    bool skip, used;
    int point, parameter;
    const struct unit *unit;
    const char *sample;
};

struct map {
    size_t count;
    struct map_entry *entry;
};

MUST_USE enum status map_read(struct arena *a, const char *path, const struct plant *plant,
                              struct map *out, struct fault *f);
struct map_entry *map_find(const struct map *m, const char *heading); /* NULL: not there */
/* Whether readings of a unit can stand at a point and parameter on any day: of the parameter's
 * kind, or a volume where a totalizer ever was. FAULT names what would be right. */
MUST_USE enum status unit_allowed(const struct plant *plant, int point, int parameter,
                                  const struct unit *unit, const struct place *where,
                                  struct fault *f);
/* Ids to indexes; faults at the place name the nearest. */
MUST_USE enum status point_named(const struct plant *plant, const char *id,
                                 const struct place *where, int *out, struct fault *f);
MUST_USE enum status parameter_named(const struct plant *plant, const char *id,
                                     const struct place *where, int *out, struct fault *f);
MUST_USE enum status unit_named(const char *name, const struct place *where,
                                const struct unit **out, struct fault *f);

#endif
