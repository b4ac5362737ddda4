/* A formula worked from words, as a person types them: ARG=VALUE with unit suffixes. Every step is
 * kept as a line, so that what is printed is what was worked. */
#include "process/process.h"

#include <assert.h>
#include <ctype.h>
#include <string.h>

#include "process/catalogue.h"
#include "process/ready.h"

#include "base/poison.h"

struct question {
    struct arena *arena;
    const struct formula *formula;
    struct formula_value value[FORMULA_ARGUMENTS_MOST];
    struct formula_result *out;
    size_t room;      /* of out->steps */
    int figures;      /* fewest among measured values; 0: none yet */
    int figures_else; /* fewest among counts and zeros, which do not limit a result */
    struct fault *fault;
};

static void step(struct question *q, const char *text)
{
    struct formula_step *s =
        arena_push(q->arena, &q->out->steps, &q->out->step_count, &q->room, sizeof *s);
    s->text = text;
}

static const char *unit_words(const char *unit)
{
    return text_equal(unit, "1") ? "" : unit;
}

/* "3 mg/L", and "3" where the unit is a mere number. */
static const char *with_unit(struct arena *a, const char *number, const char *unit)
{
    const char *words = unit_words(unit);
    return *words ? arena_print(a, "%s %s", number, words) : number;
}

/* ---- reading the words ---- */

/* How much of s is a number: sign, digits, point, digits, exponent. */
static size_t number_length(const char *s)
{
    size_t i = s[0] == '+' || s[0] == '-' ? 1 : 0;
    i += strspn(s + i, "0123456789");
    if (s[i] == '.')
        i += 1 + strspn(s + i + 1, "0123456789");
    if (s[i] == 'e' || s[i] == 'E') {
        size_t sign = s[i + 1] == '+' || s[i + 1] == '-' ? 1 : 0;
        size_t digits = strspn(s + i + 1 + sign, "0123456789");
        if (digits > 0)
            i += 1 + sign + digits;
    }
    return i;
}

/* The unit written after a number; the catalogue's own where none is. */
static enum status read_unit(struct question *q, const struct formula_argument *arg,
                             const char *suffix, const struct unit **out)
{
    const struct unit *own = unit_find(arg->unit);
    assert(own != NULL);
    *out = own;
    if (*suffix == '\0')
        return OK;
    *out = unit_find(suffix);
    if (*out == NULL) {
        const char *near = unit_nearest(suffix);
        const char *todo = near ? arena_print(q->arena, "the nearest is '%s'", near)
                                : arena_print(q->arena, "give it in %s", arg->unit);
        return fault_usage(q->fault, todo, "unknown unit '%s' for '%s'", suffix, arg->name);
    }
    if (!unit_same_kind(own, *out))
        return fault_usage(q->fault, arena_print(q->arena, "give it in %s", arg->unit),
                           "'%s' is a unit of %s, but '%s' is a %s", suffix, (*out)->kind,
                           arg->name, own->kind);
    return OK;
}

static void count_figures(struct question *q, struct decimal d, const struct unit *u)
{
    int figures = decimal_figures(d);
    bool exact = text_equal(u->kind, "count") || decimal_is_zero(d);
    int *fewest = exact ? &q->figures_else : &q->figures;
    if (*fewest == 0 || figures < *fewest)
        *fewest = figures;
}

static enum status read_number(struct question *q, const struct formula_argument *arg,
                               const char *word, const struct fraction **out)
{
    size_t length = number_length(word);
    struct decimal d;
    enum decimal_problem problem = decimal_parse(word, length, &d);
    if (problem == DECIMAL_TOO_LONG)
        return fault_usage(q->fault, "write at most 18 digits", "'%s' has too many digits for '%s'",
                           word, arg->name);
    if (problem != DECIMAL_FINE)
        return fault_usage(q->fault, "write a number, with a unit after it where it needs one",
                           "'%s' is not a value for '%s'", word, arg->name);
    const char *suffix = word + length;
    while (*suffix == ' ')
        suffix++;
    const struct unit *unit = NULL;
    if (read_unit(q, arg, suffix, &unit) != OK)
        return FAULT;
    const struct unit *own = unit_find(arg->unit);
    const struct fraction *given = fraction_from_decimal(q->arena, d);
    *out = unit_convert(q->arena, given, unit, own);
    count_figures(q, d, unit);
    if (!text_equal(unit->name, own->name)) {
        char written[24];
        decimal_write(d, written);
        step(q, arena_print(q->arena, "%s: %s = %s", arg->name,
                            with_unit(q->arena, written, unit->name),
                            with_unit(q->arena, formula_number(q->arena, *out), own->name)));
    }
    return OK;
}

static size_t element_count(const char *text)
{
    size_t count = 1;
    for (; *text != '\0'; text++)
        count += *text == ',';
    return count;
}

static enum status read_value(struct question *q, const struct formula_argument *arg,
                              const char *text, struct formula_value *out)
{
    size_t count = arg->list ? element_count(text) : 1;
    const struct fraction **numbers =
        arena_alloc(q->arena, count * sizeof(const struct fraction *));
    for (size_t i = 0; i < count; i++) {
        size_t length = arg->list ? strcspn(text, ",") : strlen(text);
        if (read_number(q, arg, arena_bytes(q->arena, text, length), &numbers[i]) != OK)
            return FAULT;
        text += length + 1;
    }
    *out = (struct formula_value){.number = numbers, .count = count};
    return OK;
}

static enum status unknown_argument(struct question *q, const char *name)
{
    const char *known[FORMULA_ARGUMENTS_MOST];
    for (size_t i = 0; i < q->formula->arguments; i++)
        known[i] = q->formula->argument[i].name;
    const char *near = text_nearest(name, known, q->formula->arguments);
    const char *todo = near ? arena_print(q->arena, "the nearest is '%s'", near)
                            : arena_print(q->arena, "see 'formula %s'", q->formula->name);
    return fault_usage(q->fault, todo, "'%s' has no argument '%s'", q->formula->name, name);
}

static enum status read_word(struct question *q, const char *word)
{
    const char *equals = strchr(word, '=');
    if (equals == NULL)
        return fault_usage(q->fault, "write ARG=VALUE", "'%s' is not an argument with a value",
                           word);
    const char *name = arena_bytes(q->arena, word, (size_t)(equals - word));
    int i = formula_argument_index(q->formula, name);
    if (i < 0)
        return unknown_argument(q, name);
    if (q->value[i].count > 0)
        return fault_usage(q->fault, "give it once", "'%s' is given twice", name);
    return read_value(q, &q->formula->argument[i], equals + 1, &q->value[i]);
}

/* ---- showing the steps ---- */

static void add_values(struct question *q, struct text *t, size_t i)
{
    const struct formula_value *v = &q->value[i];
    if (v->count == 0) {
        text_add(t, q->formula->argument[i].fallback);
        return;
    }
    for (size_t k = 0; k < v->count; k++) {
        bool negative = fraction_sign(v->number[k]) < 0;
        text_print(t, "%s%s%s%s", k > 0 ? ", " : "", negative ? "(" : "",
                   formula_number(q->arena, v->number[k]), negative ? ")" : "");
    }
}

/* The equation with its arguments' numbers in place of their names. */
static const char *numbers_put_in(struct question *q)
{
    struct text t;
    text_init(&t, SIZE_MAX);
    for (const char *at = q->formula->equation; *at != '\0';) {
        size_t length = 0;
        while (isalnum((unsigned char)at[length]) || at[length] == '_')
            length++;
        int i = -1;
        if (length > 0)
            i = formula_argument_index(q->formula, arena_bytes(q->arena, at, length));
        else
            length = 1;
        if (i >= 0)
            add_values(q, &t, (size_t)i);
        else
            text_add_bytes(&t, at, length);
        at += length;
    }
    const char *s = arena_text(q->arena, t.at);
    text_free(&t);
    return s;
}

/* A rule's words hold no place for numbers, so its arguments are listed. */
static void list_arguments(struct question *q)
{
    for (size_t i = 0; i < q->formula->arguments; i++) {
        struct text t;
        text_init(&t, SIZE_MAX);
        add_values(q, &t, i);
        step(q, arena_print(q->arena, "%s: %s", q->formula->argument[i].name,
                            with_unit(q->arena, t.at, q->formula->argument[i].unit)));
        text_free(&t);
    }
}

static void show_equation(struct question *q)
{
    const struct formula *formula = q->formula;
    for (size_t i = 0; i < formula->arguments; i++) {
        const struct formula_argument *arg = &formula->argument[i];
        if (q->value[i].count == 0 && arg->fallback)
            step(q, arena_print(q->arena, "%s: %s unless given", arg->name,
                                with_unit(q->arena, arg->fallback, arg->unit)));
    }
    step(q, arena_print(q->arena, "%s = %s", formula->result, formula->equation));
    if (strncmp(formula->equation, "rule:", 5) == 0)
        list_arguments(q);
    else
        step(q, arena_print(q->arena, "%s = %s", formula->result, numbers_put_in(q)));
}

static const char *rounded(struct question *q, const struct fraction *x, const char *unit)
{
    int decimals = fraction_decimals_for(x, q->out->figures, ROUND_HALF_EVEN);
    return with_unit(q->arena, fraction_print(q->arena, x, decimals, ROUND_HALF_EVEN), unit);
}

static void show_result(struct question *q, const struct fraction *value, bool metric)
{
    const struct formula *formula = q->formula;
    const char *unit = metric ? formula_metric_unit(formula->unit) : formula->unit;
    const char *line =
        arena_print(q->arena, "%s = %s", formula->result, rounded(q, value, formula->unit));
    q->out->value = value;
    q->out->unit = unit;
    if (!text_equal(unit, formula->unit)) {
        q->out->value = unit_convert(q->arena, value, unit_find(formula->unit), unit_find(unit));
        line = arena_print(q->arena, "%s = %s", line, rounded(q, q->out->value, unit));
    }
    step(q, line);
    step(q, arena_print(q->arena, "source: %s", formula->source));
}

static int figures_of(const struct question *q)
{
    const struct formula_rule *rule = formula_rule(q->formula);
    if (rule && rule->figures > 0)
        return rule->figures;
    if (q->figures > 0)
        return q->figures;
    return q->figures_else > 0 ? q->figures_else : 1;
}

enum status formula_ask(struct arena *a, const char *name, const char *const *words, size_t count,
                        bool metric, struct formula_result *out, struct fault *f)
{
    enum status rc = OK;
    const struct fraction *value = NULL;
    struct question q = {.arena = a, .formula = formula_find(name), .out = out, .fault = f};
    *out = (struct formula_result){.formula = q.formula};
    if (q.formula == NULL) {
        const char *near = formula_nearest(name);
        return fault_usage(f, near ? arena_print(a, "the nearest is '%s'", near) : "see 'formula'",
                           "unknown formula '%s'", name);
    }
    for (size_t i = 0; i < count; i++)
        TRY(read_word(&q, words[i]));
    TRY(formula_work(a, q.formula, q.value, &value, f));
    out->figures = figures_of(&q);
    show_equation(&q);
    show_result(&q, value, metric);
done:
    return rc;
}
