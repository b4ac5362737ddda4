/* The only reader of the clock. It goes without poison.h, since reading the local day is its work.
 */
#ifndef _POSIX_C_SOURCE
#define _POSIX_C_SOURCE 200809L
#endif
#include "base/base.h"

#include <time.h>

day_t clock_today(void)
{
    time_t now = time(NULL);
    struct tm t;
    day_t day = 0;
    /* A clock outside 1900 to 2199 is broken; 1970-01-01 shows it without stopping the work. */
    if (localtime_r(&now, &t) == NULL || !day_from(t.tm_year + 1900, t.tm_mon + 1, t.tm_mday, &day))
        return 0;
    return day;
}

void clock_stamp(char out[21])
{
    time_t now = time(NULL);
    struct tm t;
    if (gmtime_r(&now, &t) == NULL || strftime(out, 21, "%Y-%m-%dT%H:%M:%SZ", &t) == 0)
        snprintf(out, 21, "1970-01-01T00:00:00Z");
}

void clock_wall(int64_t moment, char out[17])
{
    time_t when = moment < 0 ? time(NULL) : (time_t)moment;
    struct tm t;
    if (localtime_r(&when, &t) == NULL || strftime(out, 17, "%Y-%m-%d %H:%M", &t) == 0)
        snprintf(out, 17, "1970-01-01 00:00");
}

double clock_seconds(void)
{
    struct timespec t;
    if (clock_gettime(CLOCK_MONOTONIC, &t) != 0)
        return 0.0;
    return (double)t.tv_sec + (double)t.tv_nsec / 1e9;
}
