/* The parts of the catalogue, one per subject, in the order people see them. */
#ifndef WEIRBOOK_PROCESS_CATALOGUE_H
#define WEIRBOOK_PROCESS_CATALOGUE_H

#include "process/process.h"

struct catalogue_part {
    const struct formula *formula;
    size_t count;
};

extern const struct catalogue_part catalogue_tanks, catalogue_flow, catalogue_loads,
    catalogue_sludge, catalogue_oxygen, catalogue_nutrients, catalogue_film, catalogue_tertiary,
    catalogue_solids, catalogue_disinfection, catalogue_bench, catalogue_costs;

/* The argument's index, or -1. */
int formula_argument_index(const struct formula *formula, const char *name);
/* The metric unit a metric plant reads in place of `unit`; `unit` itself where it is metric. */
const char *formula_metric_unit(const char *unit);

#endif
