/* A month judged, for the commands that print or write it. */
#ifndef WEIRBOOK_MONTH_H
#define WEIRBOOK_MONTH_H

#include "command/session.h"
#include "permit/permit.h"

/* Reads what the month's limits need and judges it as of `on` (DAY_NONE: today). */
MUST_USE enum status month_judge(struct session *s, const struct plant *plant, day_t month,
                                 day_t on, struct frame **frame, struct permit_month *out,
                                 struct fault *f);

#endif
