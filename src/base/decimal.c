/* Decimals as written: digits and the place of the point, nothing rounded, nothing dropped. Read by
 * hand, because the C library reads binary and follows the locale. */
#include "base/base.h"

#include <assert.h>
#include <string.h>

#include "base/poison.h"

enum { MOST_DIGITS = 18, FAR_EXPONENT = 1000000000 };

__extension__ typedef __int128 wide; /* 19 digits times 10^18 fit */

struct reading_head {
    const char *s, *end;
};

static bool next_digit(struct reading_head *h, int *digit)
{
    if (h->s == h->end || *h->s < '0' || *h->s > '9')
        return false;
    *digit = *h->s++ - '0';
    return true;
}

static bool next_is(struct reading_head *h, char a, char b)
{
    if (h->s == h->end || (*h->s != a && *h->s != b))
        return false;
    h->s++;
    return true;
}

/* The digits before and after the point. `digits` counts from the first that is not 0; past 18 of
 * them the coefficient is of no use and stands still. */
struct mantissa {
    int64_t coefficient;
    int64_t digits, seen, scale;
};

static void add_digits(struct reading_head *h, struct mantissa *m)
{
    int digit = 0;
    while (next_digit(h, &digit)) {
        m->seen++;
        if (m->digits == 0 && digit == 0)
            continue;
        if (++m->digits <= MOST_DIGITS)
            m->coefficient = m->coefficient * 10 + digit;
    }
}

static bool read_mantissa(struct reading_head *h, struct mantissa *m)
{
    add_digits(h, m);
    if (next_is(h, '.', '.')) {
        int64_t before = m->seen;
        add_digits(h, m);
        m->scale = m->seen - before;
    }
    return m->seen > 0;
}

/* An exponent too large to matter stops growing instead of wrapping. */
static bool read_exponent(struct reading_head *h, int64_t *exponent)
{
    bool negative = next_is(h, '-', '-');
    if (!negative)
        (void)next_is(h, '+', '+');
    int digit = 0;
    if (!next_digit(h, &digit))
        return false;
    int64_t n = digit;
    while (next_digit(h, &digit)) {
        if (n < FAR_EXPONENT)
            n = n * 10 + digit;
    }
    *exponent = negative ? -n : n;
    return true;
}

enum decimal_problem decimal_parse(const char *s, size_t length, struct decimal *out)
{
    struct reading_head h = {s, s + length};
    struct mantissa m = {0};
    int64_t exponent = 0;
    bool negative = next_is(&h, '-', '-');
    if (!negative)
        (void)next_is(&h, '+', '+');
    if (!read_mantissa(&h, &m))
        return DECIMAL_NOT_A_NUMBER;
    if (next_is(&h, 'e', 'E') && !read_exponent(&h, &exponent))
        return DECIMAL_NOT_A_NUMBER;
    if (h.s != h.end)
        return DECIMAL_NOT_A_NUMBER;

    int64_t scale = m.scale - exponent;
    if (m.digits > MOST_DIGITS || scale > MOST_DIGITS)
        return DECIMAL_TOO_LONG;
    if (m.coefficient == 0 && scale < 0)
        scale = 0;
    if (scale < 0 && m.digits - scale > MOST_DIGITS)
        return DECIMAL_TOO_LONG;
    for (; scale < 0; scale++)
        m.coefficient *= 10;
    out->coefficient = negative ? -m.coefficient : m.coefficient;
    out->scale = (int8_t)scale;
    return DECIMAL_FINE;
}

void decimal_write(struct decimal d, char out[24])
{
    assert(d.scale >= 0 && d.scale <= MOST_DIGITS);
    uint64_t n = (uint64_t)d.coefficient;
    if (d.coefficient < 0)
        n = 0 - n;
    char reversed[24];
    int count = 0;
    for (int place = 0; n > 0 || place <= d.scale; place++) {
        if (place == d.scale && place > 0)
            reversed[count++] = '.';
        reversed[count++] = (char)('0' + n % 10);
        n /= 10;
    }
    if (d.coefficient < 0)
        reversed[count++] = '-';
    for (int i = 0; i < count; i++)
        out[i] = reversed[count - 1 - i];
    out[count] = '\0';
}

static wide at_scale(struct decimal d, int scale)
{
    wide n = d.coefficient;
    for (int i = d.scale; i < scale; i++)
        n *= 10;
    return n;
}

int decimal_compare(struct decimal a, struct decimal b)
{
    int scale = a.scale > b.scale ? a.scale : b.scale;
    wide x = at_scale(a, scale);
    wide y = at_scale(b, scale);
    return (x > y) - (x < y);
}

bool decimal_is_zero(struct decimal d)
{
    return d.coefficient == 0;
}

int decimal_figures(struct decimal d)
{
    int figures = 0;
    for (int64_t n = d.coefficient; n != 0; n /= 10)
        figures++;
    return figures == 0 ? 1 : figures;
}
