/* Exact fractions over libgmp. Sums are worked in scratch numbers of libgmp's own; the result's
 * limbs are then copied into one piece of the arena and seen through mpz_roinit_n, so a fraction
 * has nothing to be cleared and goes when its arena goes. Always in lowest terms, denominator
 * positive. */
#include "base/base.h"
#include "base/memory.h"

#include <assert.h>
#include <gmp.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "base/poison.h"

static_assert(sizeof(long) == sizeof(int64_t), "libgmp takes our whole numbers as long");
static_assert(GMP_NUMB_BITS == 64, "a limb is 64 bits");

/* Whole numbers of two limbs; gcc and clang have them on every machine with 64 bits. */
__extension__ typedef unsigned __int128 wide;

struct fraction {
    mpq_t q; /* read only */
    mp_limb_t limbs[];
};

/* ---- memory ---- */

static void *gmp_get(size_t size)
{
    return base_resize(NULL, size);
}

static void *gmp_change(void *old, size_t old_size, size_t size)
{
    (void)old_size;
    return base_resize(old, size);
}

static void gmp_drop(void *old, size_t size)
{
    (void)size;
    free(old);
}

/* libgmp keeps one set of these for the whole program. Setting the same three again is harmless. */
void fraction_use_base_memory(void)
{
    mp_set_memory_functions(gmp_get, gmp_change, gmp_drop);
}

/* ---- making ---- */

/* Room for so many limbs above and below; they are to be filled in. */
static struct fraction *fraction_new(struct arena *a, bool negative, size_t nn, size_t nd)
{
    struct fraction *f = arena_alloc(a, sizeof *f + (nn + nd) * sizeof(mp_limb_t));
    f->limbs[nn + nd - 1] = 1; /* roinit looks for limbs that are 0 at the top */
    if (nn > 0)
        f->limbs[nn - 1] = 1;
    mpz_roinit_n(mpq_numref(f->q), f->limbs, negative ? -(mp_size_t)nn : (mp_size_t)nn);
    mpz_roinit_n(mpq_denref(f->q), f->limbs + nn, (mp_size_t)nd);
    return f;
}

/* n and d have no common factor, d > 0. */
static const struct fraction *keep(struct arena *a, const mpz_t n, const mpz_t d)
{
    size_t nn = mpz_size(n);
    size_t nd = mpz_size(d);
    struct fraction *f = fraction_new(a, mpz_sgn(n) < 0, nn, nd);
    memcpy(f->limbs, mpz_limbs_read(n), nn * sizeof(mp_limb_t));
    memcpy(f->limbs + nn, mpz_limbs_read(d), nd * sizeof(mp_limb_t));
    return f;
}

/* ---- small ones ----
 * Nearly all readings and figures have a numerator and a denominator of one limb. Those are worked
 * in whole numbers of 128 bits, without libgmp's allocations; what does not fit goes the long way.
 * Both ways give the same fraction: lowest terms are unique. */

struct small {
    bool negative;
    uint64_t n, d;
};

static bool is_small(const struct fraction *x, struct small *out)
{
    if (mpz_size(mpq_numref(x->q)) > 1 || mpz_size(mpq_denref(x->q)) > 1)
        return false;
    out->negative = mpq_sgn(x->q) < 0;
    out->n = mpz_getlimbn(mpq_numref(x->q), 0);
    out->d = mpz_getlimbn(mpq_denref(x->q), 0);
    return true;
}

static size_t limbs_of(wide n)
{
    return n >> 64 ? 2 : n > 0;
}

static void put_limbs(mp_limb_t *at, wide n)
{
    at[0] = (mp_limb_t)n;
    if (n >> 64)
        at[1] = (mp_limb_t)(n >> 64);
}

/* As keep. */
static const struct fraction *keep_wide(struct arena *a, bool negative, wide n, wide d)
{
    size_t nn = limbs_of(n);
    struct fraction *f = fraction_new(a, negative, nn, limbs_of(d));
    if (nn > 0)
        put_limbs(f->limbs, n);
    put_limbs(f->limbs + nn, d);
    return f;
}

/* By halving: Knuth, The Art of Computer Programming 2, 4.5.2, algorithm B. gcd(0, b) is b. */
static uint64_t common_factor(uint64_t a, uint64_t b)
{
    if (a == 0 || b == 0)
        return a | b;
    int twos = __builtin_ctzll(a | b);
    a >>= __builtin_ctzll(a);
    while (b != 0) {
        b >>= __builtin_ctzll(b);
        uint64_t low = a < b ? a : b;
        b = a < b ? b - a : a - b;
        a = low;
    }
    return a << twos;
}

/* x + y in lowest terms: Knuth 2, 4.5.1. NULL when it does not fit. */
static const struct fraction *add_small(struct arena *a, struct small x, struct small y)
{
    uint64_t g = common_factor(x.d, y.d);
    wide p = (wide)x.n * (y.d / g);
    wide q = (wide)y.n * (x.d / g);
    wide sum = p + q;
    bool negative = x.negative;
    if (x.negative != y.negative) {
        negative = p >= q ? x.negative : y.negative;
        sum = p >= q ? p - q : q - p;
    } else if (sum < p) {
        return NULL;
    }
    if (sum == 0)
        return keep_wide(a, false, 0, 1);
    uint64_t rest = g == 1 ? 1 : common_factor((uint64_t)(sum % g), g);
    return keep_wide(a, negative, rest == 1 ? sum : sum / rest, (wide)(x.d / g) * (y.d / rest));
}

static const struct fraction *multiply_small(struct arena *a, struct small x, struct small y)
{
    if (x.n == 0 || y.n == 0)
        return keep_wide(a, false, 0, 1);
    uint64_t g = common_factor(x.n, y.d);
    uint64_t h = common_factor(y.n, x.d);
    return keep_wide(a, x.negative != y.negative, (wide)(x.n / g) * (y.n / h),
                     (wide)(x.d / h) * (y.d / g));
}

/* Reduces the scratch number, keeps it, clears it. */
static const struct fraction *keep_reduced(struct arena *a, mpq_t scratch)
{
    mpq_canonicalize(scratch);
    const struct fraction *f = keep(a, mpq_numref(scratch), mpq_denref(scratch));
    mpq_clear(scratch);
    return f;
}

const struct fraction *fraction_from_int(struct arena *a, int64_t n)
{
    return fraction_from_ratio(a, n, 1);
}

const struct fraction *fraction_from_ratio(struct arena *a, int64_t n, int64_t d)
{
    assert(d != 0);
    uint64_t above = n < 0 ? 0 - (uint64_t)n : (uint64_t)n;
    uint64_t below = d < 0 ? 0 - (uint64_t)d : (uint64_t)d;
    uint64_t g = common_factor(above, below);
    return keep_wide(a, n != 0 && (n < 0) != (d < 0), above / g, below / g);
}

const struct fraction *fraction_from_decimal(struct arena *a, struct decimal d)
{
    assert(d.scale >= 0 && d.scale <= 18);
    int64_t power = 1;
    for (int i = 0; i < d.scale; i++)
        power *= 10;
    return fraction_from_ratio(a, d.coefficient, power);
}

const struct fraction *fraction_from_double(struct arena *a, double x)
{
    assert(isfinite(x));
    mpq_t q;
    mpq_init(q);
    mpq_set_d(q, x);
    return keep_reduced(a, q);
}

static size_t digit_run(const char *s)
{
    return strspn(s, "0123456789");
}

/* Digits, then nothing, or a point and digits, or a stroke and digits. */
static bool parse_unsigned(mpq_t q, const char *s)
{
    size_t whole = digit_run(s);
    const char *mark = s + whole;
    const char *tail = *mark == '\0' ? mark : mark + 1;
    size_t more = digit_run(tail);
    if ((*mark != '\0' && *mark != '.' && *mark != '/') || tail[more] != '\0')
        return false;
    if (*mark == '.' ? whole + more == 0 : whole == 0 || (*mark == '/' && more == 0))
        return false;

    char *digits = base_zeroed(whole + more + 1);
    memcpy(digits, s, whole);
    if (*mark == '/') {
        mpz_set_str(mpq_numref(q), digits, 10);
        mpz_set_str(mpq_denref(q), tail, 10);
    } else {
        memcpy(digits + whole, tail, more);
        mpz_set_str(mpq_numref(q), digits, 10);
        mpz_ui_pow_ui(mpq_denref(q), 10, more);
    }
    free(digits);
    return mpz_sgn(mpq_denref(q)) != 0;
}

const struct fraction *fraction_parse(struct arena *a, const char *s)
{
    bool negative = *s == '-';
    if (*s == '-' || *s == '+')
        s++;
    mpq_t q;
    mpq_init(q);
    if (!parse_unsigned(q, s)) {
        mpq_clear(q);
        return NULL;
    }
    if (negative)
        mpq_neg(q, q);
    return keep_reduced(a, q);
}

/* ---- arithmetic ---- */

typedef void operation(mpq_t, const mpq_t, const mpq_t);

static const struct fraction *work(struct arena *a, operation *op, const struct fraction *x,
                                   const struct fraction *y)
{
    mpq_t q;
    mpq_init(q);
    op(q, x->q, y->q);
    const struct fraction *f = keep(a, mpq_numref(q), mpq_denref(q));
    mpq_clear(q);
    return f;
}

const struct fraction *fraction_add(struct arena *a, const struct fraction *x,
                                    const struct fraction *y)
{
    struct small p, q;
    const struct fraction *sum = is_small(x, &p) && is_small(y, &q) ? add_small(a, p, q) : NULL;
    return sum ? sum : work(a, mpq_add, x, y);
}

const struct fraction *fraction_subtract(struct arena *a, const struct fraction *x,
                                         const struct fraction *y)
{
    struct small p, q;
    const struct fraction *rest = NULL;
    if (is_small(x, &p) && is_small(y, &q)) {
        q.negative = !q.negative && q.n != 0;
        rest = add_small(a, p, q);
    }
    return rest ? rest : work(a, mpq_sub, x, y);
}

const struct fraction *fraction_multiply(struct arena *a, const struct fraction *x,
                                         const struct fraction *y)
{
    struct small p, q;
    if (is_small(x, &p) && is_small(y, &q))
        return multiply_small(a, p, q);
    return work(a, mpq_mul, x, y);
}

const struct fraction *fraction_divide(struct arena *a, const struct fraction *x,
                                       const struct fraction *y)
{
    struct small p, q;
    assert(mpq_sgn(y->q) != 0);
    if (is_small(x, &p) && is_small(y, &q))
        return multiply_small(a, p, (struct small){q.negative, q.d, q.n});
    return work(a, mpq_div, x, y);
}

const struct fraction *fraction_power(struct arena *a, const struct fraction *x, unsigned n)
{
    mpq_t q;
    mpq_init(q);
    /* Powers of numbers without a common factor have none. */
    mpz_pow_ui(mpq_numref(q), mpq_numref(x->q), n);
    mpz_pow_ui(mpq_denref(q), mpq_denref(x->q), n);
    const struct fraction *f = keep(a, mpq_numref(q), mpq_denref(q));
    mpq_clear(q);
    return f;
}

int fraction_compare(const struct fraction *x, const struct fraction *y)
{
    struct small p, q;
    if (is_small(x, &p) && is_small(y, &q) && p.negative == q.negative) {
        wide left = (wide)p.n * q.d, right = (wide)q.n * p.d;
        int order = (left > right) - (left < right);
        return p.negative ? -order : order;
    }
    int c = mpq_cmp(x->q, y->q);
    return (c > 0) - (c < 0);
}

int fraction_sign(const struct fraction *x)
{
    return mpq_sgn(x->q);
}

/* ---- rounding ---- */

/* n / d to the nearest whole number. A tie goes to the even one or away from zero. */
static void divide_rounded(mpz_t out, const mpz_t n, const mpz_t d, enum rounding rule)
{
    mpz_t rest;
    mpz_init(rest);
    mpz_tdiv_qr(out, rest, n, d); /* toward zero; the rest has the sign of n */
    mpz_mul_2exp(rest, rest, 1);
    int c = mpz_cmpabs(rest, d);
    if (c > 0 || (c == 0 && (rule == ROUND_HALF_UP || mpz_odd_p(out)))) {
        if (mpz_sgn(n) < 0)
            mpz_sub_ui(out, out, 1);
        else
            mpz_add_ui(out, out, 1);
    }
    mpz_clear(rest);
}

/* Multiplies n or d by a power of ten, so that n / d becomes n / d times 10^exponent. */
static void shift_ten(mpz_t n, mpz_t d, long exponent)
{
    mpz_t power;
    mpz_init(power);
    mpz_ui_pow_ui(power, 10, (unsigned long)labs(exponent));
    if (exponent >= 0)
        mpz_mul(n, n, power);
    else
        mpz_mul(d, d, power);
    mpz_clear(power);
}

/* The value in units of its last decimal: 2.45 to one decimal is 24. */
static void round_to_units(mpz_t out, const struct fraction *x, int decimals, enum rounding rule)
{
    mpz_t n;
    mpz_t d;
    mpz_init_set(n, mpq_numref(x->q));
    mpz_init_set(d, mpq_denref(x->q));
    shift_ten(n, d, decimals);
    divide_rounded(out, n, d, rule);
    mpz_clear(n);
    mpz_clear(d);
}

/* 10^n for 0 to 19, which fits in 64 bits. */
enum { SMALL_POWER_MOST = 19 };

static uint64_t small_power(int n)
{
    uint64_t power = 1;
    while (n-- > 0)
        power *= 10;
    return power;
}

/* round_to_units without its sign; false when it is not small. */
static bool round_small(const struct fraction *x, int decimals, enum rounding rule, uint64_t *units)
{
    struct small s;
    if (decimals < -SMALL_POWER_MOST || decimals > SMALL_POWER_MOST || !is_small(x, &s))
        return false;
    wide n = s.n, d = s.d;
    if (decimals >= 0)
        n *= small_power(decimals);
    else
        d *= small_power(-decimals);
    wide whole = n / d, rest = n % d;
    if (whole >= UINT64_MAX)
        return false;
    bool up = rest > d - rest || (rest == d - rest && (rule == ROUND_HALF_UP || whole % 2 == 1));
    *units = (uint64_t)whole + up;
    return true;
}

/* The fraction units / 10^decimals; clears the units. */
static const struct fraction *keep_units(struct arena *a, mpz_t units, int decimals)
{
    mpq_t q;
    mpq_init(q);
    mpz_swap(mpq_numref(q), units);
    mpz_clear(units);
    shift_ten(mpq_numref(q), mpq_denref(q), -(long)decimals);
    return keep_reduced(a, q);
}

const struct fraction *fraction_round(struct arena *a, const struct fraction *x, int decimals,
                                      enum rounding rule)
{
    mpz_t units;
    mpz_init(units);
    round_to_units(units, x, decimals, rule);
    return keep_units(a, units, decimals);
}

static int digits_of(uint64_t n)
{
    int digits = 1;
    while (n >= 10) {
        n /= 10;
        digits++;
    }
    return digits;
}

static long first_place_small(struct small s)
{
    int place = digits_of(s.n) - digits_of(s.d); /* or one less */
    wide n = s.n, d = s.d;
    if (place >= 0)
        d *= small_power(place);
    else
        n *= small_power(-place);
    return n >= d ? place : place - 1;
}

/* The place of the first figure that is not 0: 0 for 1 to 9.99, -1 for 0.1 to 0.999. */
static long first_place(const struct fraction *x)
{
    struct small s;
    if (is_small(x, &s))
        return first_place_small(s);
    mpz_t n;
    mpz_t d;
    mpz_init(n);
    mpz_init(d);
    /* The counts of digits put it one too high or more; then it comes down to where |x| >=
     * 10^place. */
    long place =
        (long)mpz_sizeinbase(mpq_numref(x->q), 10) - (long)mpz_sizeinbase(mpq_denref(x->q), 10) + 1;
    for (;; place--) {
        mpz_set(n, mpq_numref(x->q));
        mpz_set(d, mpq_denref(x->q));
        shift_ten(n, d, -place);
        if (mpz_cmpabs(n, d) >= 0)
            break;
    }
    mpz_clear(n);
    mpz_clear(d);
    return place;
}

int fraction_decimals_for(const struct fraction *x, int figures, enum rounding rule)
{
    assert(figures >= 1);
    if (mpq_sgn(x->q) == 0)
        return figures - 1;
    int decimals = (int)(figures - 1 - first_place(x));
    uint64_t small_units;
    if (figures <= SMALL_POWER_MOST && round_small(x, decimals, rule, &small_units))
        return small_units >= small_power(figures) ? decimals - 1 : decimals;
    mpz_t units;
    mpz_t carried;
    mpz_init(units);
    mpz_init(carried);
    round_to_units(units, x, decimals, rule);
    mpz_ui_pow_ui(carried, 10, (unsigned long)figures);
    /* 99.6 to two figures carries into a third: 100, whose last 0 is then one decimal too many. */
    if (mpz_cmpabs(units, carried) >= 0)
        decimals--;
    mpz_clear(units);
    mpz_clear(carried);
    return decimals;
}

/* ---- roots ---- */

/* Whether the e-th root of n / d lies below, at or above k + 1/2: -1, 0, 1. Both sides are raised
 * to the e-th power and cleared of fractions: 2^e n against (2k + 1)^e d. */
static int compare_with_tie(const mpz_t n, const mpz_t d, const mpz_t k, unsigned e)
{
    mpz_t left;
    mpz_t right;
    mpz_init(left);
    mpz_init(right);
    mpz_mul_2exp(left, n, e);
    mpz_mul_2exp(right, k, 1);
    mpz_add_ui(right, right, 1);
    mpz_pow_ui(right, right, e);
    mpz_mul(right, right, d);
    int c = mpz_cmp(left, right);
    mpz_clear(left);
    mpz_clear(right);
    return c;
}

const struct fraction *root_round(struct arena *a, const struct fraction *product, unsigned n,
                                  int decimals, enum rounding rule)
{
    assert(n >= 1 && mpq_sgn(product->q) >= 0);
    mpz_t num;
    mpz_t den;
    mpz_t k;
    mpz_init_set(num, mpq_numref(product->q));
    mpz_init_set(den, mpq_denref(product->q));
    mpz_init(k);
    /* In units of the last decimal the root is that of num / den, and its whole part is the whole
     * part of the root of the quotient's whole part. */
    shift_ten(num, den, (long)decimals * (long)n);
    mpz_tdiv_q(k, num, den);
    mpz_root(k, k, n);
    int c = compare_with_tie(num, den, k, n);
    if (c > 0 || (c == 0 && (rule == ROUND_HALF_UP || mpz_odd_p(k))))
        mpz_add_ui(k, k, 1);
    mpz_clear(num);
    mpz_clear(den);
    return keep_units(a, k, decimals);
}

int root_compare(struct arena *a, const struct fraction *product, unsigned n,
                 const struct fraction *to)
{
    assert(n >= 1 && mpq_sgn(product->q) >= 0);
    if (mpq_sgn(to->q) < 0)
        return 1;
    return fraction_compare(product, fraction_power(a, to, n));
}

/* ---- writing ---- */

/* Writes units / 10^decimals with that many decimals; `s`: the units' digits. */
static void write_digits(struct text *t, const char *s, int decimals)
{
    bool zero = text_equal(s, "0");
    if (*s == '-') {
        text_add_char(t, '-');
        s++;
    }
    size_t count = strlen(s);
    size_t after = decimals > 0 ? (size_t)decimals : 0;
    if (count > after)
        text_add_bytes(t, s, count - after);
    else
        text_add_char(t, '0');
    if (after > 0) {
        text_add_char(t, '.');
        for (size_t i = count; i < after; i++)
            text_add_char(t, '0');
        text_add(t, count > after ? s + (count - after) : s);
    }
    for (int i = decimals; i < 0 && !zero; i++)
        text_add_char(t, '0');
}

static void write_units(struct text *t, const mpz_t units, int decimals)
{
    char *digits = base_zeroed(mpz_sizeinbase(units, 10) + 2);
    mpz_get_str(digits, 10, units);
    write_digits(t, digits, decimals);
    free(digits);
}

static void write_small(struct text *t, bool negative, uint64_t units, int decimals)
{
    char digits[24];
    size_t at = sizeof digits - 1;
    digits[at] = '\0';
    negative = negative && units > 0;
    do {
        digits[--at] = (char)('0' + units % 10);
        units /= 10;
    } while (units > 0);
    if (negative)
        digits[--at] = '-';
    write_digits(t, digits + at, decimals);
}

void fraction_write(struct text *t, const struct fraction *x, int decimals, enum rounding rule)
{
    uint64_t small_units;
    if (round_small(x, decimals, rule, &small_units)) {
        write_small(t, mpq_sgn(x->q) < 0, small_units, decimals);
        return;
    }
    mpz_t units;
    mpz_init(units);
    round_to_units(units, x, decimals, rule);
    write_units(t, units, decimals);
    mpz_clear(units);
}

char *fraction_print(struct arena *a, const struct fraction *x, int decimals, enum rounding rule)
{
    struct text t;
    text_init(&t, SIZE_MAX);
    fraction_write(&t, x, decimals, rule);
    char *s = arena_bytes(a, t.at, t.length);
    text_free(&t);
    return s;
}

/* The number of decimals that shows the value whole; -1 when none does. A fraction ends as a
 * decimal when its denominator has no prime factors but 2 and 5. */
static long decimals_of(const struct fraction *x)
{
    mpz_t d;
    mpz_t five;
    mpz_init(d);
    mpz_init_set_ui(five, 5);
    mp_bitcnt_t twos = mpz_scan1(mpq_denref(x->q), 0);
    mpz_fdiv_q_2exp(d, mpq_denref(x->q), twos);
    mp_bitcnt_t fives = mpz_remove(d, d, five);
    bool ends = mpz_cmp_ui(d, 1) == 0;
    mpz_clear(d);
    mpz_clear(five);
    return ends ? (long)(twos > fives ? twos : fives) : -1;
}

bool fraction_write_all(struct text *t, const struct fraction *x, int most)
{
    assert(most >= 0);
    long decimals = decimals_of(x);
    bool exact = decimals >= 0 && decimals <= most;
    fraction_write(t, x, exact ? (int)decimals : most, ROUND_HALF_EVEN);
    return exact;
}

/* ---- doubles ---- */

double fraction_double(const struct fraction *x)
{
    if (mpq_sgn(x->q) == 0)
        return 0.0;
    mpz_t n;
    mpz_t d;
    mpz_t q;
    mpz_init_set(n, mpq_numref(x->q));
    mpz_init_set(d, mpq_denref(x->q));
    mpz_init(q);
    /* Scale so that the quotient has 53 bits or 54, or ends at the last bit of the smallest
     * doubles, and round it once: mpq_get_d would cut it off. */
    long shift = 53 - ((long)mpz_sizeinbase(n, 2) - (long)mpz_sizeinbase(d, 2));
    if (shift > 1074)
        shift = 1074;
    if (shift > 0)
        mpz_mul_2exp(n, n, (mp_bitcnt_t)shift);
    else
        mpz_mul_2exp(d, d, (mp_bitcnt_t)-shift);
    mpz_tdiv_q(q, n, d);
    if (mpz_sizeinbase(q, 2) > 53) {
        mpz_mul_2exp(d, d, 1);
        shift--;
    }
    divide_rounded(q, n, d, ROUND_HALF_EVEN);
    double out = ldexp(mpz_get_d(q), (int)-shift);
    mpz_clear(n);
    mpz_clear(d);
    mpz_clear(q);
    return out;
}
