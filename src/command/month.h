/* A month judged, for the commands that print or write it. */
#ifndef WEIRBOOK_MONTH_H
#define WEIRBOOK_MONTH_H

#include "command/session.h"
#include "permit/permit.h"

/* Reads what the month's limits need and judges it as of `on` (DAY_NONE: today). */
MUST_USE enum status month_judge(struct session *s, const struct plant *plant, day_t month,
                                 day_t on, struct frame **frame, struct permit_month *out,
                                 struct fault *f);
/* Judges the months first..last, each by itself, and prints them side by side. */
MUST_USE enum status span_print(struct session *s, const struct plant *plant, day_t first,
                                day_t last, day_t on, int as, struct fault *f);
/* The month beside itself under other rules: those of `what_if`, or with none every other value of
 * each rule, one at a time. */
MUST_USE enum status compare_print(struct session *s, const struct plant *plant, day_t month,
                                   day_t on, int as, const struct option_texts *what_if,
                                   struct fault *f);
/* A month over all books of the session, as a roll-up or as rows with a column `book`. */
struct fleet_month {
    day_t month, on; /* `on`: a day, today by default */
    int as;
};
MUST_USE enum status permit_fleet(struct session *s, const struct fleet_month *o, struct fault *f);
/* What the month's exceedances count as; six months beside the federal screening criteria, with
 * groups as `group` sets them ("CU=II"). */
MUST_USE enum status count_print(struct session *s, const struct plant *plant, day_t month,
                                 day_t on, int as, struct fault *f);
MUST_USE enum status standing_print(struct session *s, const struct plant *plant, day_t month,
                                    day_t on, int as, const struct option_texts *group,
                                    struct fault *f);
/* The notices that the month's exceedances ask for, and drafts of them in the folder. A draft that
 * is there already is left as it is: a person may have filled it in. */
MUST_USE enum status notices_print(struct session *s, const struct plant *plant, day_t month,
                                   day_t on, int as, const char *folder, const char *aware,
                                   struct fault *f);
/* Makes a folder that is not there yet. */
MUST_USE enum status month_folder(const char *folder, struct fault *f);

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
