/* A formula made ready once and worked many times: its bounds, defaults, conditions and equation.
 */
#ifndef WEIRBOOK_PROCESS_READY_H
#define WEIRBOOK_PROCESS_READY_H

#include "process/equation.h"
#include "process/rules.h"

struct ready {
    const struct formula *formula;
    const struct fraction *fallback[FORMULA_ARGUMENTS_MOST];
    const struct fraction *above[FORMULA_ARGUMENTS_MOST], *at_least[FORMULA_ARGUMENTS_MOST];
    const struct fraction *below[FORMULA_ARGUMENTS_MOST], *at_most[FORMULA_ARGUMENTS_MOST];
    const struct requirement *requirements;
    const struct node *equation;     /* NULL where the rule works the formula */
    const struct formula_rule *rule; /* NULL where the equation says it all */
};

const struct ready *formula_ready(struct arena *a, const struct formula *formula);
/* As formula_work, on a formula that is ready. The result stands in `a`. */
MUST_USE enum status ready_work(struct arena *a, const struct ready *ready,
                                const struct formula_value *values, const struct fraction **out,
                                struct fault *f);
/* A number as people read it: whole where it ends within ten decimals, else ten figures. */
const char *formula_number(struct arena *a, const struct fraction *x);

#endif
