/* Published tests for a value that lies far from its fellows. All work on whole numbers (values
 * scaled by a power of ten), so that what is compared is exact. */
#include "process/doubt.h"

#include <assert.h>
#include <math.h>
#include <stdlib.h>

#include "base/poison.h"

/* ---- median and MAD ---- */

static int ascending(const void *a, const void *b)
{
    int64_t x = *(const int64_t *)a;
    int64_t y = *(const int64_t *)b;
    return (x > y) - (x < y);
}

/* Puts the k-th smallest in its place: what stands before it is not above it (Hoare's selection).
 */
static void select_at(int64_t *y, size_t count, size_t k)
{
    size_t low = 0;
    size_t high = count - 1;
    while (low < high) {
        int64_t pivot = y[low + (high - low) / 2];
        size_t i = low;
        size_t j = high;
        for (;;) {
            while (y[i] < pivot)
                i++;
            while (y[j] > pivot)
                j--;
            if (i >= j)
                break;
            int64_t swapped = y[i];
            y[i++] = y[j];
            y[j--] = swapped;
        }
        size_t end = y[j] > pivot ? j - 1 : j; /* low..end is not above the pivot */
        if (end == high)
            end--;
        if (k <= end)
            high = end;
        else
            low = end + 1;
    }
}

/* The two values in the middle, added: twice the median. */
static int64_t middle_sum(int64_t *y, size_t count)
{
    size_t upper = count / 2;
    select_at(y, count, upper);
    int64_t at = y[upper];
    if (count % 2)
        return 2 * at;
    int64_t below = y[0];
    for (size_t i = 1; i < upper; i++)
        below = y[i] > below ? y[i] : below;
    return at + below;
}

void doubt_spread(int64_t *y, size_t count, struct doubt_spread *out)
{
    assert(count > 0);
    out->count = count;
    out->twice_median = middle_sum(y, count);
    for (size_t i = 0; i < count; i++) {
        assert(y[i] <= DOUBT_MOST && y[i] >= -DOUBT_MOST);
        y[i] = llabs(2 * y[i] - out->twice_median);
    }
    out->four_mad = middle_sum(y, count);
}

const struct fraction *doubt_score(struct arena *a, const struct doubt_spread *s, int64_t y)
{
    if (s->four_mad == 0)
        return NULL;
    /* 0.6745 x (twice the distance / 2) / (four MADs / 4) */
    const struct fraction *away = fraction_from_ratio(a, llabs(2 * y - s->twice_median), 1);
    return fraction_multiply(a, fraction_divide(a, away, fraction_from_int(a, s->four_mad)),
                             fraction_from_ratio(a, 13490, 10000));
}

/* ---- Grubbs ---- */

static const struct fraction *from_wide(struct arena *a, doubt_wide x)
{
    const int64_t base = INT64_C(1) << 60;
    assert(x >= 0);
    return fraction_add(
        a,
        fraction_multiply(a, fraction_from_int(a, (int64_t)(x / base)), fraction_from_int(a, base)),
        fraction_from_int(a, (int64_t)(x % base)));
}

/* With S the sum and Q the sum of squares: G^2 = (n y - S)^2 (n - 1) / (n (n Q - S^2)). Of values
 * up to 10^14 and a million of them all fits 127 bits but the last products. */
const struct fraction *doubt_grubbs(struct arena *a, const int64_t *y, size_t count, int64_t of)
{
    assert(count >= 3 && count <= 1000000);
    doubt_wide n = (doubt_wide)count;
    doubt_wide sum = 0;
    doubt_wide squares = 0;
    for (size_t i = 0; i < count; i++) {
        sum += y[i] - of; /* a shift changes nothing, and keeps the numbers small */
        squares += (doubt_wide)(y[i] - of) * (y[i] - of);
    }
    const struct fraction *away = from_wide(a, sum < 0 ? -sum : sum);
    const struct fraction *spread =
        fraction_subtract(a, fraction_multiply(a, from_wide(a, n), from_wide(a, squares)),
                          fraction_power(a, away, 2));
    if (fraction_sign(spread) == 0)
        return NULL;
    const struct fraction *over =
        fraction_multiply(a, fraction_power(a, away, 2), from_wide(a, n - 1));
    return fraction_divide(a, over, fraction_multiply(a, from_wide(a, n), spread));
}

/* P(T > t) for whole degrees of freedom: the finite series of Abramowitz and Stegun 26.7.3 and
 * 26.7.4. */
static double student_tail(double t, size_t freedom)
{
    double angle = atan(t / sqrt((double)freedom));
    double cosine = cos(angle);
    double square = cosine * cosine;
    double term = freedom % 2 ? cosine : 1;
    double sum = freedom == 1 ? 0 : term;
    for (size_t k = freedom % 2 ? 3 : 2; k + 2 <= freedom; k += 2) {
        term *= square * (double)(k - 1) / (double)k;
        sum += term;
    }
    double inside = sin(angle) * sum;
    if (freedom % 2)
        inside = (angle + inside) * 2 / acos(-1);
    return (1 - inside) / 2;
}

double doubt_grubbs_critical(size_t count, double tail)
{
    assert(count >= 3);
    double n = (double)count;
    double low = 0;
    double high = 1e6;
    for (int i = 0; i < 200; i++) {
        double t = (low + high) / 2;
        if (student_tail(t, count - 2) > tail / n)
            low = t;
        else
            high = t;
    }
    return (n - 1) / sqrt(n) * sqrt(low * low / (n - 2 + low * low));
}

/* ---- Dixon ---- */

/* In thousandths, of 3 to 10 values, at 95 and at 99 %. */
static const int dixon[2][8] = {
    {970, 829, 710, 625, 568, 526, 493, 466},
    {994, 926, 821, 740, 680, 634, 598, 568},
};

int doubt_dixon_critical(size_t count, bool at_99)
{
    assert(count >= 3 && count <= 10);
    return dixon[at_99 ? 1 : 0][count - 3];
}

const struct fraction *doubt_dixon(struct arena *a, const int64_t *y, size_t count, bool top)
{
    int64_t *sorted = arena_alloc(a, count * sizeof *sorted);
    for (size_t i = 0; i < count; i++)
        sorted[i] = y[i];
    qsort(sorted, count, sizeof *sorted, ascending);
    int64_t range = sorted[count - 1] - sorted[0];
    if (range == 0)
        return fraction_from_int(a, 0);
    int64_t gap = top ? sorted[count - 1] - sorted[count - 2] : sorted[1] - sorted[0];
    return fraction_from_ratio(a, gap, range);
}
