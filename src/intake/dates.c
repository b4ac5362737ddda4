/* dates: taking apart what people write for days and times, and putting it together in order. */
#include "intake/dates.h"

#include <string.h>

#include "base/poison.h"

enum { NOON = 720, TIME_BYTES = 16, CENTURY_TURN = 69 };

static bool take_number(const char **s, int *number, int *digits)
{
    *number = *digits = 0;
    for (; **s >= '0' && **s <= '9'; ++*s) {
        if (++*digits > 4)
            return false;
        *number = *number * 10 + (**s - '0');
    }
    return *digits > 0;
}

bool time_read(const char *s, int *out)
{
    char clock[TIME_BYTES];
    size_t length = strcspn(s, " aApP");
    *out = -1;
    if (*s == '\0')
        return true;
    if (length >= sizeof clock)
        return false;
    memcpy(clock, s, length);
    clock[length] = '\0';
    s += length;
    s += strspn(s, " ");
    bool before = text_equal_nocase(s, "am");
    bool after = text_equal_nocase(s, "pm");
    if (!minute_parse(clock, out) || (*s != '\0' && !before && !after))
        return false;
    if (*s == '\0')
        return true;
    if (*out < 60 || *out >= NOON + 60) /* a clock of twelve hours goes from 1:00 to 12:59 */
        return false;
    *out = *out % NOON + (after ? NOON : 0);
    return true;
}

bool date_split(const char *s, struct date_parts *out)
{
    *out = (struct date_parts){.minute = -1};
    for (int i = 0; i < 3; i++) {
        if (!take_number(&s, &out->number[i], &out->digits[i]))
            return false;
        if (i == 2)
            break;
        if (i == 0)
            out->separator = *s;
        if (*s != out->separator || *s == '\0' || strchr("-/.", *s) == NULL)
            return false;
        s++;
    }
    if (*s == '\0')
        return true;
    if (*s != ' ' && *s != 'T')
        return false;
    s++;
    s += strspn(s, " ");
    return *s != '\0' && time_read(s, &out->minute);
}

bool date_needs_order(const struct date_parts *p)
{
    return p->digits[0] <= 2 && p->digits[2] == 4 && p->separator != '.';
}

enum date_order date_proves(const struct date_parts *p, bool *same)
{
    int a = p->number[0];
    int b = p->number[1];
    *same = a == b;
    if (a > 12 && b <= 12)
        return ORDER_DMY;
    return b > 12 && a <= 12 ? ORDER_MDY : ORDER_UNKNOWN;
}

static enum date_order order_of(const struct date_parts *p, enum date_order order, bool stated)
{
    if (p->digits[0] == 4)
        return ORDER_YMD;
    if (!stated && p->separator == '.')
        return ORDER_DMY;
    /* Unknown is left only where both orders give the same day. */
    return order == ORDER_UNKNOWN ? ORDER_MDY : order;
}

enum date_problem date_read(const struct date_parts *p, enum date_order order, bool stated,
                            day_t *out)
{
    order = order_of(p, order, stated);
    int y = order == ORDER_YMD ? 0 : 2;
    int m = order == ORDER_MDY ? 0 : 1;
    int d = order == ORDER_YMD ? 2 : order == ORDER_MDY ? 1 : 0;
    int year = p->number[y];
    if (p->digits[m] > 2 || p->digits[d] > 2)
        return DATE_UNREADABLE;
    if (p->digits[y] <= 2) {
        if (!stated || p->digits[y] != 2)
            return DATE_SHORT_YEAR;
        year += year < CENTURY_TURN ? 2000 : 1900;
    } else if (p->digits[y] != 4) {
        return DATE_UNREADABLE;
    }
    return day_from(year, p->number[m], p->number[d], out) ? DATE_FINE : DATE_NO_SUCH_DAY;
}
