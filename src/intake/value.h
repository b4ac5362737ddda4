/* value: what stands in the value column. Private to this room; intake_value is its public face. */
#ifndef WEIRBOOK_INTAKE_VALUE_H
#define WEIRBOOK_INTAKE_VALUE_H

#include "frame/frame.h"
#include "intake/numbers.h"

/* As intake_value, with the marks of the file. */
enum reason value_read(struct reading *r, const struct parameter *p, const char *text,
                       struct number_style style);
/* An mdl or rl: a plain number not below zero; blank: none. */
enum reason value_limit(const char *text, struct number_style style, bool *has,
                        struct decimal *out);

#endif
