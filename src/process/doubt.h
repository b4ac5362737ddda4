/* What the parts of `doubts` share: the work at hand and how a doubt is told. */
#ifndef WEIRBOOK_PROCESS_DOUBT_H
#define WEIRBOOK_PROCESS_DOUBT_H

#include "process/process.h"

__extension__ typedef __int128 doubt_wide;

struct doubting {
    struct arena *arena;
    const struct plant *plant;
    const struct frame *frame, *past; /* past: NULL for none */
    day_t first, last;                /* of the month */
    struct doubt *list;
    size_t count, room;
};

/* Tells a doubt about one reading, or, when `r` is NULL, about a day of a column (-1: none).
 * `other`: what it was compared with, part of its identity; "" mostly. */
void doubt_tell(struct doubting *d, enum doubt_kind kind, const struct reading *r, int point,
                int parameter, day_t day, const char *other, const char *evidence);
/* A reading's number in its parameter's unit, exactly. */
const struct fraction *doubt_number(struct doubting *d, const struct reading *r);
/* "12.5", all digits of a terminating one up to six decimals. */
const char *doubt_print(struct arena *a, const struct fraction *x);
const char *doubt_date(struct arena *a, day_t day);
bool doubt_measured(const struct reading *r); /* a number a person or an instrument gave */
/* The register of a totalizer only grows: it is no value to be compared with others. */
bool doubt_register(const struct doubting *d, int point, int parameter);

void doubt_bounds(struct doubting *d, int point, int parameter);  /* scale, bounds */
void doubt_parts(struct doubting *d, int point);                  /* parts above wholes */
void doubt_removals(struct doubting *d);                          /* removal below 0 */
void doubt_loads(struct doubting *d, int point, int parameter);   /* loads and flow */
void doubt_records(struct doubting *d);                           /* 40 CFR 122.41(j)(3) */
void doubt_seasons(struct doubting *d, int point, int parameter); /* slips, swaps, outliers */
void doubt_repeats(struct doubting *d, int point, int parameter); /* same values, weekends */
void doubt_drifts(struct doubting *d, int point, int parameter);  /* against the bench check */
void doubt_balance(struct doubting *d);                           /* solids */

#endif
