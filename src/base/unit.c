/* Units: the table of schema/units.csv, compiled in, and exact conversion. */
#include "base/base.h"

#include <assert.h>
#include <string.h>

#include "base/poison.h"

/* spelling, kind, factor, offset: base value = value x factor + offset */
static const struct unit table[] = {
#include "units_table.inc"
};

size_t unit_count(void)
{
    return NELEM(table);
}

const struct unit *unit_at(size_t i)
{
    assert(i < NELEM(table));
    return &table[i];
}

const struct unit *unit_find(const char *name)
{
    if (name == NULL)
        return NULL;
    for (size_t i = 0; i < NELEM(table); i++) {
        /* The first byte rules most rows out without a call. */
        if (table[i].name[0] == name[0] && strcmp(table[i].name, name) == 0)
            return &table[i];
    }
    return NULL;
}

int unit_index(const struct unit *u)
{
    assert(u >= table && u < table + NELEM(table));
    return (int)(u - table);
}

bool unit_same_kind(const struct unit *a, const struct unit *b)
{
    return strcmp(a->kind, b->kind) == 0;
}

const char *unit_nearest(const char *name)
{
    const char *names[NELEM(table)];
    for (size_t i = 0; i < NELEM(table); i++)
        names[i] = table[i].name;
    return text_nearest(name, names, NELEM(table));
}

static const struct fraction *exact(struct arena *a, const char *s)
{
    const struct fraction *f = fraction_parse(a, s);
    assert(f != NULL);
    return f;
}

/* Only temperatures have one. */
static bool has_offset(const struct unit *u)
{
    return strcmp(u->offset, "0") != 0;
}

const struct fraction *unit_convert(struct arena *a, const struct fraction *value,
                                    const struct unit *from, const struct unit *to)
{
    assert(unit_same_kind(from, to));
    if (from == to)
        return value;
    const struct fraction *f = fraction_multiply(a, value, exact(a, from->factor));
    if (has_offset(from))
        f = fraction_add(a, f, exact(a, from->offset));
    if (has_offset(to))
        f = fraction_subtract(a, f, exact(a, to->offset));
    return fraction_divide(a, f, exact(a, to->factor));
}
