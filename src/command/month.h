/* A month judged, for the commands that print or write it. */
#ifndef WEIRBOOK_MONTH_H
#define WEIRBOOK_MONTH_H

#include "command/session.h"
#include "permit/permit.h"

/* Reads what the month's limits need and judges it as of `on` (DAY_NONE: today). */
MUST_USE enum status month_judge(struct session *s, const struct plant *plant, day_t month,
                                 day_t on, struct frame **frame, struct permit_month *out,
                                 struct fault *f);

/* ---- remarks (remarks.c): those that were not withdrawn, in the order of their days ---- */

/* Those whose days touch first..last. */
MUST_USE enum status remarks_read(struct session *s, day_t first, day_t last,
                                  struct month_remarks *out, struct fault *f);
/* Those that touch the month or the period of one of its rows. */
MUST_USE enum status month_remarks(struct session *s, const struct permit_month *month,
                                   struct month_remarks *out, struct fault *f);
/* What is on record about a point and parameter on first..last, one line each, as it stands above
 * what a person is to write in a notice. Remarks about the whole point or plant are among them. */
MUST_USE enum status remarks_about(struct session *s, const char *point, const char *parameter,
                                   day_t first, day_t last, const char *const **line, size_t *count,
                                   struct fault *f);
/* "remark 12, event bypass: TEXT" */
const char *remark_line(struct arena *a, const struct month_remark *r);

#endif
