/* The catalogue of formulas: its parts as one list, and how a formula is found. */
#include "process/catalogue.h"

#include <assert.h>
#include <string.h>

#include "base/poison.h"

static const struct catalogue_part *const parts[] = {
    &catalogue_tanks,  &catalogue_flow,         &catalogue_loads, &catalogue_sludge,
    &catalogue_oxygen, &catalogue_nutrients,    &catalogue_film,  &catalogue_tertiary,
    &catalogue_solids, &catalogue_disinfection, &catalogue_bench, &catalogue_costs,
};

enum { FORMULAS_MOST = 512 };

size_t formula_count(void)
{
    size_t count = 0;
    for (size_t p = 0; p < NELEM(parts); p++)
        count += parts[p]->count;
    assert(count <= FORMULAS_MOST);
    return count;
}

const struct formula *formula_at(size_t i)
{
    size_t p = 0;
    assert(i < formula_count());
    while (i >= parts[p]->count)
        i -= parts[p++]->count;
    return &parts[p]->formula[i];
}

const struct formula *formula_find(const char *name)
{
    if (name == NULL)
        return NULL;
    for (size_t p = 0; p < NELEM(parts); p++)
        for (size_t i = 0; i < parts[p]->count; i++)
            if (strcmp(parts[p]->formula[i].name, name) == 0)
                return &parts[p]->formula[i];
    return NULL;
}

const char *formula_nearest(const char *name)
{
    const char *known[FORMULAS_MOST];
    size_t count = formula_count();
    for (size_t i = 0; i < count; i++)
        known[i] = formula_at(i)->name;
    return text_nearest(name, known, count);
}

int formula_argument_index(const struct formula *formula, const char *name)
{
    for (size_t i = 0; i < formula->arguments; i++)
        if (strcmp(formula->argument[i].name, name) == 0)
            return (int)i;
    return -1;
}

/* Both units of a pair are of one kind. What the trade reads in metric plants decides where a kind
 * has several metric units: tanks in m3, pumps in L/s, chemicals in L/d. */
static const struct {
    const char *unit, *metric;
} twins[] = {
    {"ft", "m"},
    {"in", "cm"},
    {"ft2", "m2"},
    {"ac", "ha"},
    {"gal", "m3"},
    {"MG", "m3"},
    {"ft3", "m3"},
    {"lb", "kg"},
    {"ton", "t"},
    {"MGD", "m3/d"},
    {"gpm", "L/s"},
    {"gpd", "L/d"},
    {"cfs", "m3/s"},
    {"ft3/d", "m3/d"},
    {"lb/d", "kg/d"},
    {"lb/h", "kg/h"},
    {"ft/s", "m/s"},
    {"hp", "kW"},
    {"psi", "kPa"},
    {"degF", "degC"},
    {"ton/ac", "t/ha"},
    {"lb/ac", "kg/ha"},
    {"lb/ton", "kg/t"},
    {"lb/person/d", "g/person/d"},
    {"ft3/lb", "m3/kg"},
    {"ft3/MG", "m3/ML"},
    {"$/MG", "$/ML"},
    {"$/lb", "$/kg"},
    {"Btu/d", "kWh/d"},
    {"gal/ft2", "m3/m2"},
    {"gal/person/d", "L/person/d"},
    {"gpd/ft", "m3/m/d"},
    {"gpd/ft2", "m3/m2/d"},
    {"gpm/ft2", "m3/m2/h"},
    {"in/d", "mm/d"},
    {"kWh/MG", "kWh/ML"},
    {"lb/d/ft2", "kg/m2/d"},
    {"lb/h/ft2", "kg/m2/h"},
    {"lb/ft2/yr", "kg/m2/yr"},
    {"lb/MG", "kg/ML"},
    {"lb/d/ac", "kg/ha/d"},
    {"lb/d/kft2", "g/m2/d"},
    {"lb/d/kft3", "kg/m3/d"},
    {"lb/h/m", "kg/h/m"},
    {"lb/lb", "kg/kg"},
    {"person/ac", "person/ha"},
};

const char *formula_metric_unit(const char *unit)
{
    for (size_t i = 0; i < NELEM(twins); i++)
        if (strcmp(twins[i].unit, unit) == 0)
            return twins[i].metric;
    return unit;
}
