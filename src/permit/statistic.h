/* statistic: what the makers of figures share: how signs are gathered, and which measures there
 * are. Private to this room. */
#ifndef WEIRBOOK_PERMIT_STATISTIC_H
#define WEIRBOOK_PERMIT_STATISTIC_H

#include "permit/work.h"

struct signs {
    bool part_less, all_less, part_greater, all_greater;
    const struct fraction *largest; /* of the numbers after "<" */
    const char *as_written;
};

struct signs signs_of(struct list l);
void set_signs(struct figure *x, const struct signs *s);
/* R13: what stands after "<" where all were less-thans; `largest` is its number but under `full`.
 */
void set_stand(const struct work *w, const struct signs *s, const struct fraction *largest,
               struct figure *x);

/* statistic.c */
void figure_mean(const struct work *w, const struct series *s, struct figure *x);
/* ranks.c */
void ranked_median(const struct work *w, struct list l, struct figure *x);
void figure_median(const struct work *w, const struct series *s, struct figure *x);
void figure_percentile(const struct work *w, const struct series *s, struct figure *x);
/* worst.c: the worst of a row's values, or of its windows, and how many are beyond the limit */
void take_worst(const struct work *w, const struct figure *x, struct figure *worst);
void figure_worst(const struct work *w, const struct series *s, struct figure *x);
void figure_samples(const struct work *w, const struct series *s, struct figure *x);

#endif
