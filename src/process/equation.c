/* Equations: from the catalogue's text to a tree, and the tree's working. */
#include "process/equation.h"

#include <assert.h>
#include <ctype.h>
#include <math.h>
#include <string.h>

#include "process/catalogue.h"

#include "base/poison.h"

enum op {
    OP_NUMBER,
    OP_ARGUMENT,
    OP_ADD,
    OP_SUBTRACT,
    OP_MULTIPLY,
    OP_DIVIDE,
    OP_POWER,
    OP_NEGATE,
    OP_MIN,
    OP_MAX,
    OP_ABS,
    OP_SQRT,
    OP_EXP,
    OP_LOG10,
    OP_SUM,
    OP_MEAN,
    OP_COUNT,
    OP_SUMPRODUCT
};

struct node {
    enum op op;
    const struct node *left, *right;
    const struct fraction *number;
    int argument;
    const char *text; /* the piece of the equation this node stands for */
    size_t length;
};

/* Above this a whole power goes through doubles: the exact number would only be long. */
static const double power_most = 64;

/* ---- parsing ---- */

struct reader {
    struct arena *arena;
    const struct formula *formula;
    const char *at;
};

static const struct node *parse_sum(struct reader *r);
static const struct node *parse_signed(struct reader *r);

static void skip_blanks(struct reader *r)
{
    while (*r->at == ' ')
        r->at++;
}

static bool take(struct reader *r, char c)
{
    skip_blanks(r);
    if (*r->at != c)
        return false;
    r->at++;
    return true;
}

static struct node *node_new(struct reader *r, enum op op, const char *from)
{
    struct node *n = arena_alloc(r->arena, sizeof *n);
    n->op = op;
    n->argument = -1;
    n->text = from;
    return n;
}

/* How long a piece is that ends before `to`, blanks behind it left out. */
static size_t piece_length(const char *from, const char *to)
{
    while (to > from && to[-1] == ' ')
        to--;
    return (size_t)(to - from);
}

static const struct node *node_end(const struct reader *r, struct node *n)
{
    n->length = piece_length(n->text, r->at);
    return n;
}

static const struct node *parse_number(struct reader *r)
{
    struct node *n = node_new(r, OP_NUMBER, r->at);
    while (isdigit((unsigned char)*r->at) || *r->at == '.')
        r->at++;
    n->number = fraction_parse(r->arena, arena_bytes(r->arena, n->text, (size_t)(r->at - n->text)));
    assert(n->number != NULL);
    return node_end(r, n);
}

/* pi to 40 decimals (OEIS A000796); the US gallon is 231 in3, a cubic foot 1728 in3. */
static const struct fraction *constant(struct arena *a, const char *name)
{
    if (text_equal(name, "pi"))
        return fraction_parse(a, "3.1415926535897932384626433832795028841972");
    if (text_equal(name, "gal_per_ft3"))
        return fraction_from_ratio(a, 1728, 231);
    return NULL;
}

static const struct {
    const char *name;
    enum op op;
    int arguments;
    bool list;
} functions[] = {
    {"min", OP_MIN, 2, false},    {"max", OP_MAX, 2, false},
    {"abs", OP_ABS, 1, false},    {"sqrt", OP_SQRT, 1, false},
    {"exp", OP_EXP, 1, false},    {"log10", OP_LOG10, 1, false},
    {"sum", OP_SUM, 1, true},     {"mean", OP_MEAN, 1, true},
    {"count", OP_COUNT, 1, true}, {"sumproduct", OP_SUMPRODUCT, 2, true},
};

static const struct node *parse_call(struct reader *r, const char *from, const char *name)
{
    size_t f = 0;
    while (f < NELEM(functions) && !text_equal(functions[f].name, name))
        f++;
    assert(f < NELEM(functions));
    struct node *n = node_new(r, functions[f].op, from);
    n->left = parse_sum(r);
    if (functions[f].arguments == 2) {
        bool comma = take(r, ',');
        assert(comma);
        (void)comma;
        n->right = parse_sum(r);
    }
    bool closed = take(r, ')');
    assert(closed);
    (void)closed;
    for (int side = 0; functions[f].list && side < functions[f].arguments; side++) {
        const struct node *list = side == 0 ? n->left : n->right;
        assert(list->op == OP_ARGUMENT && r->formula->argument[list->argument].list);
        (void)list;
    }
    return node_end(r, n);
}

static const struct node *parse_name(struct reader *r)
{
    const char *from = r->at;
    while (isalnum((unsigned char)*r->at) || *r->at == '_')
        r->at++;
    const char *name = arena_bytes(r->arena, from, (size_t)(r->at - from));
    int argument = formula_argument_index(r->formula, name);
    if (argument < 0 && take(r, '('))
        return parse_call(r, from, name);
    struct node *n = node_new(r, argument < 0 ? OP_NUMBER : OP_ARGUMENT, from);
    n->argument = argument;
    if (argument < 0) {
        n->number = constant(r->arena, name);
        assert(n->number != NULL);
    }
    return node_end(r, n);
}

static const struct node *parse_primary(struct reader *r)
{
    skip_blanks(r);
    if (isdigit((unsigned char)*r->at))
        return parse_number(r);
    if (isalpha((unsigned char)*r->at))
        return parse_name(r);
    bool opened = take(r, '(');
    assert(opened);
    (void)opened;
    const struct node *n = parse_sum(r);
    bool closed = take(r, ')');
    assert(closed);
    (void)closed;
    return n;
}

static const struct node *join(struct reader *r, enum op op, const struct node *left,
                               const struct node *right, const char *from)
{
    struct node *n = node_new(r, op, from);
    n->left = left;
    n->right = right;
    return node_end(r, n);
}

static const struct node *parse_power(struct reader *r)
{
    skip_blanks(r);
    const char *from = r->at;
    const struct node *base = parse_primary(r);
    if (!take(r, '^'))
        return base;
    return join(r, OP_POWER, base, parse_signed(r), from);
}

/* A sign binds less than a power: -a ^ 2 is -(a ^ 2), and 10 ^ -2 takes its sign with it. */
static const struct node *parse_signed(struct reader *r)
{
    skip_blanks(r);
    const char *from = r->at;
    if (take(r, '-'))
        return join(r, OP_NEGATE, parse_signed(r), NULL, from);
    return parse_power(r);
}

static const struct node *parse_product(struct reader *r)
{
    skip_blanks(r);
    const char *from = r->at;
    const struct node *n = parse_signed(r);
    for (;;) {
        if (take(r, '*'))
            n = join(r, OP_MULTIPLY, n, parse_signed(r), from);
        else if (take(r, '/'))
            n = join(r, OP_DIVIDE, n, parse_signed(r), from);
        else
            return n;
    }
}

static const struct node *parse_sum(struct reader *r)
{
    skip_blanks(r);
    const char *from = r->at;
    const struct node *n = parse_product(r);
    for (;;) {
        if (take(r, '+'))
            n = join(r, OP_ADD, n, parse_product(r), from);
        else if (take(r, '-'))
            n = join(r, OP_SUBTRACT, n, parse_product(r), from);
        else
            return n;
    }
}

const struct node *equation_parse(struct arena *a, const struct formula *formula, const char *text)
{
    struct reader r = {.arena = a, .formula = formula, .at = text};
    const struct node *n = parse_sum(&r);
    skip_blanks(&r);
    assert(*r.at == '\0');
    return n;
}

const struct requirement *requirements_parse(struct arena *a, const struct formula *formula,
                                             const char *text)
{
    if (text == NULL)
        return NULL;
    struct reader r = {.arena = a, .formula = formula, .at = text};
    skip_blanks(&r);
    const char *from = r.at;
    struct requirement *c = arena_alloc(a, sizeof *c);
    c->left = parse_sum(&r);
    bool over = take(&r, '>');
    bool under = !over && take(&r, '<');
    assert(over || under);
    bool equal = *r.at == '=';
    if (equal)
        r.at++;
    if (under)
        c->comparison = equal ? REQUIRE_AT_MOST : REQUIRE_UNDER;
    else
        c->comparison = equal ? REQUIRE_AT_LEAST : REQUIRE_OVER;
    c->right = parse_sum(&r);
    c->text = arena_bytes(a, from, piece_length(from, r.at));
    if (take(&r, ';'))
        c->next = requirements_parse(a, formula, r.at);
    else
        assert(*r.at == '\0');
    return c;
}

/* ---- working ---- */

enum status equation_finite(const struct scope *s, double x, const struct fraction **out)
{
    if (!isfinite(x))
        return fault_at(s->fault, NULL, "check the values", "'%s' has no finite result here",
                        s->formula->name);
    *out = fraction_from_double(s->arena, x);
    return OK;
}

enum status equation_paired(const struct scope *s, int one, int other)
{
    const struct formula_argument *argument = s->formula->argument;
    if (s->values[one].count == s->values[other].count)
        return OK;
    return fault_at(s->fault, NULL, "give one for each of the other",
                    "'%s' of '%s' has %zu values, '%s' has %zu", argument[one].name,
                    s->formula->name, s->values[one].count, argument[other].name,
                    s->values[other].count);
}

static enum status zero_divisor(const struct scope *s, const struct node *divisor)
{
    return fault_at(s->fault, NULL, "no figure can be worked from these values",
                    "'%.*s' of '%s' comes to zero and cannot divide", (int)divisor->length,
                    divisor->text, s->formula->name);
}

/* Whether the exponent is a whole number small enough to be worked exactly. */
static bool whole_power(const struct scope *s, const struct fraction *exponent, int *out)
{
    double e = fraction_double(exponent);
    if (fabs(e) > power_most ||
        fraction_compare(exponent, fraction_round(s->arena, exponent, 0, ROUND_HALF_EVEN)) != 0)
        return false;
    *out = (int)e;
    return true;
}

static enum status power(const struct scope *s, const struct node *n, const struct fraction *base,
                         const struct fraction *exponent, const struct fraction **out)
{
    if (fraction_sign(base) == 0 && fraction_sign(exponent) < 0)
        return zero_divisor(s, n->left);
    int whole;
    if (!whole_power(s, exponent, &whole))
        return equation_finite(s, pow(fraction_double(base), fraction_double(exponent)), out);
    *out = fraction_power(s->arena, base, (unsigned)(whole < 0 ? -whole : whole));
    if (whole < 0)
        *out = fraction_divide(s->arena, fraction_from_int(s->arena, 1), *out);
    return OK;
}

static enum status over_list(const struct scope *s, const struct node *n,
                             const struct fraction **out)
{
    const struct formula_value *list = &s->values[n->left->argument];
    const struct formula_value *second = n->right ? &s->values[n->right->argument] : NULL;
    const struct fraction *total = fraction_from_int(s->arena, 0);
    const struct fraction *count = fraction_from_int(s->arena, (int64_t)list->count);
    if (second && equation_paired(s, n->left->argument, n->right->argument) != OK)
        return FAULT;
    for (size_t i = 0; i < list->count; i++) {
        const struct fraction *x = list->number[i];
        if (second)
            x = fraction_multiply(s->arena, x, second->number[i]);
        total = fraction_add(s->arena, total, x);
    }
    if (n->op == OP_COUNT)
        *out = count;
    else if (n->op == OP_MEAN)
        *out = fraction_divide(s->arena, total, count);
    else
        *out = total;
    return OK;
}

static enum status through_double(const struct scope *s, enum op op, const struct fraction *x,
                                  const struct fraction **out)
{
    double d = fraction_double(x);
    switch (op) {
    case OP_SQRT:
        return equation_finite(s, sqrt(d), out);
    case OP_EXP:
        return equation_finite(s, exp(d), out);
    default:
        return equation_finite(s, log10(d), out);
    }
}

static enum status one_number(const struct scope *s, enum op op, const struct fraction *x,
                              const struct fraction **out)
{
    if (op == OP_NEGATE || (op == OP_ABS && fraction_sign(x) < 0))
        *out = fraction_subtract(s->arena, fraction_from_int(s->arena, 0), x);
    else if (op == OP_ABS)
        *out = x;
    else
        return through_double(s, op, x, out);
    return OK;
}

static enum status two_numbers(const struct scope *s, const struct node *n,
                               const struct fraction *x, const struct fraction *y,
                               const struct fraction **out)
{
    switch (n->op) {
    case OP_ADD:
        *out = fraction_add(s->arena, x, y);
        return OK;
    case OP_SUBTRACT:
        *out = fraction_subtract(s->arena, x, y);
        return OK;
    case OP_MULTIPLY:
        *out = fraction_multiply(s->arena, x, y);
        return OK;
    case OP_DIVIDE:
        if (fraction_sign(y) == 0)
            return zero_divisor(s, n->right);
        *out = fraction_divide(s->arena, x, y);
        return OK;
    case OP_MIN:
        *out = fraction_compare(x, y) <= 0 ? x : y;
        return OK;
    case OP_MAX:
        *out = fraction_compare(x, y) >= 0 ? x : y;
        return OK;
    default:
        assert(n->op == OP_POWER);
        return power(s, n, x, y, out);
    }
}

enum status equation_work(const struct scope *s, const struct node *n, const struct fraction **out)
{
    const struct fraction *x = NULL;
    const struct fraction *y = NULL;
    if (n->op == OP_NUMBER) {
        *out = n->number;
        return OK;
    }
    if (n->op == OP_ARGUMENT) {
        assert(s->values[n->argument].count == 1);
        *out = s->values[n->argument].number[0];
        return OK;
    }
    if (n->op >= OP_SUM)
        return over_list(s, n, out);
    if (equation_work(s, n->left, &x) != OK)
        return FAULT;
    if (n->right == NULL)
        return one_number(s, n->op, x, out);
    if (equation_work(s, n->right, &y) != OK)
        return FAULT;
    return two_numbers(s, n, x, y, out);
}

enum status requirements_hold(const struct scope *s, const struct requirement *first)
{
    for (const struct requirement *c = first; c != NULL; c = c->next) {
        const struct fraction *left = NULL;
        const struct fraction *right = NULL;
        if (equation_work(s, c->left, &left) != OK || equation_work(s, c->right, &right) != OK)
            return FAULT;
        int order = fraction_compare(left, right);
        bool holds = (c->comparison == REQUIRE_OVER && order > 0) ||
                     (c->comparison == REQUIRE_AT_LEAST && order >= 0) ||
                     (c->comparison == REQUIRE_UNDER && order < 0) ||
                     (c->comparison == REQUIRE_AT_MOST && order <= 0);
        if (!holds)
            return fault_at(s->fault, NULL, "check the readings", "'%s' needs %s", s->formula->name,
                            c->text);
    }
    return OK;
}
