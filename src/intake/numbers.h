/* numbers: the marks people write in numbers: a decimal point or comma, and marks between
 * thousands. Private to this room. */
#ifndef WEIRBOOK_INTAKE_NUMBERS_H
#define WEIRBOOK_INTAKE_NUMBERS_H

#include "base/base.h"

struct number_style {
    char decimal;   /* '.' or ',' */
    char thousands; /* '.', ',' or ' '; 0: none are allowed */
};

/* Reads one number, nothing before or after it. U+2212 serves as a minus sign. */
enum decimal_problem number_read(const char *s, struct number_style style, struct decimal *out);

/* What the way a number is written tells of the marks. */
enum number_shape {
    NUMBER_SILENT,        /* 5, or no number */
    NUMBER_COMMA,         /* 2,5 0,125: a decimal comma for certain */
    NUMBER_POINT,         /* 2.5 0.125 */
    NUMBER_MAYBE_COMMA,   /* 1,234: that, or a thousands comma */
    NUMBER_MAYBE_POINT,   /* 1.234 */
    NUMBER_GROUPS_COMMAS, /* 1,234.5 1,234,567: thousands commas */
    NUMBER_GROUPS_POINTS, /* 1.234,5 1.234.567: thousands points */
};
/* The shape of the number in a value such as "<1,234" or "DNQ 0,5". */
enum number_shape number_shape(const char *value);

#endif
