/* Formulas that are not one line: each is worked by a function of its own. */
#ifndef WEIRBOOK_PROCESS_RULES_H
#define WEIRBOOK_PROCESS_RULES_H

#include "process/equation.h"

struct formula_rule {
    const char *formula;
    /* NULL: the equation is worked. */
    enum status (*work)(const struct scope *s, const struct fraction **out);
    /* What must hold that no condition of the catalogue can say; NULL: nothing. */
    enum status (*check)(const struct scope *s);
    int figures; /* that published tables of the result carry; 0: as many as the inputs */
};

/* NULL when the equation says it all. */
const struct formula_rule *formula_rule(const struct formula *formula);

#endif
