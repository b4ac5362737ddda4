/* Working a formula on values: defaults, domains, conditions, then its equation or rule. */
#include "process/ready.h"

#include <assert.h>

#include "base/poison.h"

static const struct fraction *bound(struct arena *a, const char *text)
{
    if (text == NULL)
        return NULL;
    const struct fraction *x = fraction_parse(a, text);
    assert(x != NULL);
    return x;
}

const struct ready *formula_ready(struct arena *a, const struct formula *formula)
{
    struct ready *r = arena_alloc(a, sizeof *r);
    r->formula = formula;
    for (size_t i = 0; i < formula->arguments; i++) {
        const struct formula_argument *arg = &formula->argument[i];
        r->fallback[i] = bound(a, arg->fallback);
        r->above[i] = bound(a, arg->above);
        r->at_least[i] = bound(a, arg->at_least);
        r->below[i] = bound(a, arg->below);
        r->at_most[i] = bound(a, arg->at_most);
    }
    r->requirements = requirements_parse(a, formula, formula->requires);
    r->rule = formula_rule(formula);
    if (r->rule == NULL || r->rule->work == NULL)
        r->equation = equation_parse(a, formula, formula->equation);
    return r;
}

const char *formula_number(struct arena *a, const struct fraction *x)
{
    struct text t;
    text_init(&t, 4096);
    if (!fraction_write_all(&t, x, 10)) {
        text_clear(&t);
        fraction_write(&t, x, fraction_decimals_for(x, 10, ROUND_HALF_EVEN), ROUND_HALF_EVEN);
    }
    const char *s = arena_text(a, t.at);
    text_free(&t);
    return s;
}

static enum status outside(const struct scope *s, const struct formula_argument *arg,
                           const struct fraction *x, const char *words, const char *bound_text)
{
    const char *unit = text_equal(arg->unit, "1") ? "" : arg->unit;
    const char *todo =
        arena_print(s->arena, "it must be %s %s%s%s", words, bound_text, *unit ? " " : "", unit);
    return fault_at(s->fault, NULL, todo, "'%s' of '%s' is %s%s%s", arg->name, s->formula->name,
                    formula_number(s->arena, x), *unit ? " " : "", unit);
}

static enum status in_domain(const struct scope *s, const struct ready *r, size_t i,
                             const struct fraction *x)
{
    const struct formula_argument *arg = &s->formula->argument[i];
    if (r->above[i] && fraction_compare(x, r->above[i]) <= 0)
        return outside(s, arg, x, "above", arg->above);
    if (r->at_least[i] && fraction_compare(x, r->at_least[i]) < 0)
        return outside(s, arg, x, "at least", arg->at_least);
    if (r->below[i] && fraction_compare(x, r->below[i]) >= 0)
        return outside(s, arg, x, "below", arg->below);
    if (r->at_most[i] && fraction_compare(x, r->at_most[i]) > 0)
        return outside(s, arg, x, "at most", arg->at_most);
    return OK;
}

static enum status fill(const struct scope *s, const struct ready *r,
                        const struct formula_value *given, struct formula_value *full)
{
    const struct formula *formula = r->formula;
    for (size_t i = 0; i < formula->arguments; i++) {
        const struct formula_argument *arg = &formula->argument[i];
        full[i] = given[i];
        if (given[i].count == 0 && r->fallback[i]) {
            full[i].number = &r->fallback[i];
            full[i].count = 1;
        }
        if (full[i].count == 0)
            return fault_usage(s->fault, arena_print(s->arena, "give %s=VALUE", arg->name),
                               "'%s' needs '%s' (%s)", formula->name, arg->name, arg->unit);
        if (full[i].count > 1 && !arg->list)
            return fault_usage(s->fault, "give one", "'%s' of '%s' is one value, not %zu",
                               arg->name, formula->name, full[i].count);
        for (size_t k = 0; k < full[i].count; k++)
            if (in_domain(s, r, i, full[i].number[k]) != OK)
                return FAULT;
    }
    return OK;
}

static enum status work(const struct scope *s, const struct ready *r, const struct fraction **out)
{
    const struct formula_rule *rule = r->rule;
    if (rule == NULL)
        return equation_work(s, r->equation, out);
    if (rule->check && rule->check(s) != OK)
        return FAULT;
    return rule->work ? rule->work(s, out) : equation_work(s, r->equation, out);
}

enum status ready_work(struct arena *a, const struct ready *r, const struct formula_value *values,
                       const struct fraction **out, struct fault *f)
{
    struct formula_value full[FORMULA_ARGUMENTS_MOST] = {{0}};
    struct scope s = {.arena = a, .formula = r->formula, .values = full, .fault = f};
    enum status rc = OK;
    TRY(fill(&s, r, values, full));
    TRY(requirements_hold(&s, r->requirements));
    TRY(work(&s, r, out));
done:
    return rc;
}

enum status formula_work(struct arena *a, const struct formula *formula,
                         const struct formula_value *values, const struct fraction **out,
                         struct fault *f)
{
    return ready_work(a, formula_ready(a, formula), values, out, f);
}
