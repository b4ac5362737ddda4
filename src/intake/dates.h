/* dates: days and times as people write them. Private to this room. */
#ifndef WEIRBOOK_INTAKE_DATES_H
#define WEIRBOOK_INTAKE_DATES_H

#include "base/base.h"

enum date_order { ORDER_UNKNOWN, ORDER_YMD, ORDER_MDY, ORDER_DMY };

/* A date taken apart, before its order is known: 3/4/2025, 04.03.2025 07:30, 2025-03-04T07:30. */
struct date_parts {
    int number[3];
    int digits[3]; /* how many digits each was written with */
    char separator;
    int minute; /* of a time behind the date; -1 without one */
};

enum date_problem { DATE_FINE, DATE_UNREADABLE, DATE_NO_SUCH_DAY, DATE_SHORT_YEAR };

/* False when it is no date at all. */
bool date_split(const char *s, struct date_parts *out);
/* Whether the file must say which of the first two numbers is the month. Dots put the day first,
 * a year of four digits in front the month second; the rest goes either way. */
bool date_needs_order(const struct date_parts *p);
/* Which order such a date proves by a number above 12; ORDER_UNKNOWN: none. *same: both orders give
 * the same day. */
enum date_order date_proves(const struct date_parts *p, bool *same);
/* `stated`: the person named the order: then it holds for dots too, and years may have two digits
 * (69 to 99: 1969 to 1999; 00 to 68: 2000 to 2068, as in POSIX strptime). */
enum date_problem date_read(const struct date_parts *p, enum date_order order, bool stated,
                            day_t *out);
/* A time of day, "7:30", "07:30:00", "7:30 PM"; -1 for a blank. */
bool time_read(const char *s, int *out);

#endif
