/* The equations of the catalogue, parsed into a small tree and worked over exact fractions. Only
 * the catalogue's own texts come here: a text that cannot be read is a bug and asserts.
 *
 * Read are + - * / ^ (powers from the right, before a sign), parentheses, numbers, arguments, pi,
 * gal_per_ft3 (1728/231), min max abs sqrt exp log10, and over lists sum mean count sumproduct.
 * Roots, logarithms and powers that are not whole numbers go through doubles; all else is exact. */
#ifndef WEIRBOOK_PROCESS_EQUATION_H
#define WEIRBOOK_PROCESS_EQUATION_H

#include "process/process.h"

struct node;

/* What is worked: the arguments' values, and where results and faults go. */
struct scope {
    struct arena *arena;
    const struct formula *formula;
    const struct formula_value *values; /* by argument; scalars have one number */
    struct fault *fault;
};

const struct node *equation_parse(struct arena *a, const struct formula *formula, const char *text);
/* Faults: a zero divisor, lists of unequal length, a result that is not finite. */
MUST_USE enum status equation_work(const struct scope *s, const struct node *n,
                                   const struct fraction **out);

/* What must hold between arguments: "dried >= filter; ashed <= dried". */
struct requirement {
    const struct node *left, *right;
    enum { REQUIRE_OVER, REQUIRE_AT_LEAST, REQUIRE_UNDER, REQUIRE_AT_MOST } comparison;
    const char *text; /* this condition alone */
    const struct requirement *next;
};

const struct requirement *requirements_parse(struct arena *a, const struct formula *formula,
                                             const char *text);
MUST_USE enum status requirements_hold(const struct scope *s, const struct requirement *first);

/* The value of a finite double as a fraction; a fault for infinity and what is no number. */
MUST_USE enum status equation_finite(const struct scope *s, double x, const struct fraction **out);
/* Values of two arguments' lists go in pairs: a fault when the lists differ in length. */
MUST_USE enum status equation_paired(const struct scope *s, int one, int other);

#endif
