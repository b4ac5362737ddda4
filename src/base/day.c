/* Calendar days and times of day. The Gregorian calendar repeats every 400 years of 146097 days;
 * counting years from March puts the leap day at the end, where it disturbs nothing. */
#include "base/base.h"

#include <assert.h>
#include <string.h>

#include "base/poison.h"

enum {
    FIRST_YEAR = 1900,
    LAST_YEAR = 2199,
    CYCLE_YEARS = 400,
    CYCLE_DAYS = 146097,
    DAYS_TO_EPOCH = 719468 /* from 0000-03-01 to 1970-01-01 */
};

const char *const weekday_names[7] = {"sunday",   "monday", "tuesday", "wednesday",
                                      "thursday", "friday", "saturday"};

static bool is_leap(int year)
{
    return (year % 4 == 0 && year % 100 != 0) || year % 400 == 0;
}

static int month_days(int year, int month)
{
    static const int days[12] = {31, 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31};
    return days[month - 1] + (month == 2 && is_leap(year) ? 1 : 0);
}

static int floor_divide(int a, int b)
{
    return a / b - (a % b < 0 ? 1 : 0);
}

static day_t day_number(int year, int month, int date)
{
    int y = month <= 2 ? year - 1 : year;
    int m = month <= 2 ? month + 9 : month - 3; /* March is 0 */
    int cycle = floor_divide(y, CYCLE_YEARS);
    int in_cycle = y - cycle * CYCLE_YEARS;
    /* (153 m + 2) / 5 is the number of days before month m: 0, 31, 61, 92, 122, 153, 184, ... */
    int in_year = (153 * m + 2) / 5 + date - 1;
    return cycle * CYCLE_DAYS + in_cycle * 365 + in_cycle / 4 - in_cycle / 100 + in_year -
           DAYS_TO_EPOCH;
}

bool day_from(int year, int month, int date, day_t *out)
{
    if (year < FIRST_YEAR || year > LAST_YEAR || month < 1 || month > 12 || date < 1 ||
        date > month_days(year, month))
        return false;
    *out = day_number(year, month, date);
    return true;
}

void day_split(day_t day, int *year, int *month, int *date)
{
    /* A step or two past the years we read is fine, DAY_NONE is a bug. */
    assert(day > -1000000 && day < 1000000);
    int from_march = day + DAYS_TO_EPOCH;
    int cycle = floor_divide(from_march, CYCLE_DAYS);
    int in_cycle = from_march - cycle * CYCLE_DAYS;
    /* Takes the leap days out, so that 365 divides: 1460, 36524 and 146096 are the last days of a
     * four-year, a hundred-year and a four-hundred-year span. */
    int y = (in_cycle - in_cycle / 1460 + in_cycle / 36524 - in_cycle / 146096) / 365;
    int in_year = in_cycle - (y * 365 + y / 4 - y / 100);
    int m = (5 * in_year + 2) / 153;
    *date = in_year - (153 * m + 2) / 5 + 1;
    *month = m < 10 ? m + 3 : m - 9;
    *year = y + cycle * CYCLE_YEARS + (*month <= 2 ? 1 : 0);
}

/* Reads exactly `count` digits; -1 when one is missing. */
static int digits(const char *s, int count)
{
    int n = 0;
    for (int i = 0; i < count; i++) {
        if (s[i] < '0' || s[i] > '9')
            return -1;
        n = n * 10 + (s[i] - '0');
    }
    return n;
}

bool day_parse(const char *iso, day_t *out)
{
    if (strlen(iso) != 10 || iso[4] != '-' || iso[7] != '-')
        return false;
    return day_from(digits(iso, 4), digits(iso + 5, 2), digits(iso + 8, 2), out);
}

bool month_parse(const char *iso, day_t *first)
{
    if (strlen(iso) != 7 || iso[4] != '-')
        return false;
    return day_from(digits(iso, 4), digits(iso + 5, 2), 1, first);
}

static void write_digits(char *out, int count, int n)
{
    for (int i = count - 1; i >= 0; i--) {
        out[i] = (char)('0' + n % 10);
        n /= 10;
    }
}

void day_write(day_t day, char out[11])
{
    int year = 0;
    int month = 0;
    int date = 0;
    day_split(day, &year, &month, &date);
    assert(year >= 0 && year <= 9999);
    write_digits(out, 4, year);
    out[4] = '-';
    write_digits(out + 5, 2, month);
    out[7] = '-';
    write_digits(out + 8, 2, date);
    out[10] = '\0';
}

enum weekday day_weekday(day_t day)
{
    int n = (day % 7 + 4) % 7; /* 1970-01-01 was a Thursday */
    return (enum weekday)(n < 0 ? n + 7 : n);
}

day_t month_first(day_t day)
{
    int year = 0;
    int month = 0;
    int date = 0;
    day_split(day, &year, &month, &date);
    return day - (date - 1);
}

day_t month_last(day_t day)
{
    int year = 0;
    int month = 0;
    int date = 0;
    day_split(day, &year, &month, &date);
    return day + (month_days(year, month) - date);
}

day_t month_step(day_t first, int months)
{
    int year = 0;
    int month = 0;
    int date = 0;
    day_split(first, &year, &month, &date);
    int all = year * 12 + (month - 1) + months;
    int y = floor_divide(all, 12);
    return day_number(y, all - y * 12 + 1, 1);
}

const char *month_name(int month)
{
    static const char *const names[12] = {"January",   "February", "March",    "April",
                                          "May",       "June",     "July",     "August",
                                          "September", "October",  "November", "December"};
    assert(month >= 1 && month <= 12);
    return names[month - 1];
}

bool minute_parse(const char *s, int *out)
{
    int width = s[0] != '\0' && s[1] == ':' ? 1 : 2;
    int hour = digits(s, width);
    if (hour < 0 || s[width] != ':')
        return false;
    const char *rest = s + width + 1;
    int minute = digits(rest, 2);
    if (minute < 0 || minute > 59)
        return false;
    rest += 2;
    int second = 0;
    if (*rest == ':') {
        second = digits(rest + 1, 2);
        if (second < 0 || second > 59)
            return false;
        rest += 3;
    }
    if (*rest != '\0' || hour > 24 || (hour == 24 && (minute > 0 || second > 0)))
        return false;
    *out = hour * 60 + minute;
    return true;
}

void minute_write(int minute, char out[6])
{
    assert(minute >= -1 && minute <= 24 * 60);
    if (minute < 0) {
        out[0] = '\0';
        return;
    }
    write_digits(out, 2, minute / 60);
    out[2] = ':';
    write_digits(out + 3, 2, minute % 60);
    out[5] = '\0';
}
