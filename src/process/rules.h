/* Formulas that are not one line: each is worked by a function of its own. */
#ifndef WEIRBOOK_PROCESS_RULES_H
#define WEIRBOOK_PROCESS_RULES_H

#include "process/equation.h"

struct formula_rule {
    const char *formula;
    enum status (*work)(const struct scope *s, const struct fraction **out);
    int figures; /* that published tables of the result carry; 0: as many as the inputs */
};

/* NULL when the formula is worked by its equation. */
const struct formula_rule *formula_rule(const struct formula *formula);

#endif
