/* What a bench sheet's function reads of its group, and how its results are rounded, marked and
 * told. */
#include "process/bench.h"

#include <assert.h>
#include <ctype.h>
#include <string.h>

#include "process/catalogue.h"
#include "process/ready.h"

#include "base/poison.h"

/* ---- small arithmetic ---- */

const struct fraction *bench_constant(struct arena *a, const char *text)
{
    const struct fraction *x = fraction_parse(a, text);
    assert(x != NULL);
    return x;
}

const struct fraction **bench_numbers(struct arena *a, size_t count)
{
    return arena_alloc(a, (count + 1) * sizeof(const struct fraction *));
}

const struct fraction *bench_mean(struct arena *a, const struct fraction *const *x, size_t count)
{
    const struct fraction *sum = fraction_from_int(a, 0);
    assert(count > 0);
    for (size_t i = 0; i < count; i++)
        sum = fraction_add(a, sum, x[i]);
    return fraction_divide(a, sum, fraction_from_int(a, (int64_t)count));
}

bool bench_within(struct arena *a, const struct fraction *x, const char *least, const char *most)
{
    return (least == NULL || fraction_compare(x, bench_constant(a, least)) >= 0) &&
           (most == NULL || fraction_compare(x, bench_constant(a, most)) <= 0);
}

bool bench_is_whole(struct arena *a, const struct fraction *x)
{
    return fraction_compare(x, fraction_round(a, x, 0, ROUND_HALF_EVEN)) == 0;
}

/* ---- reading a group ---- */

const struct fraction *bench_number(const struct bench_group *g, const struct bench_set *s,
                                    const char *argument)
{
    const struct bench_sheet *sheet = &g->entry->sheet;
    int i = bench_argument_index(sheet, argument);
    assert(i >= 0);
    const struct bench_argument *arg = &sheet->argument[i];
    const struct bench_row *row = arg->once || s == NULL ? g->once[i] : s->given[i];
    if (row != NULL)
        return row->number;
    return arg->fallback ? bench_constant(g->arena, arg->fallback) : NULL;
}

const char *bench_text(const struct bench_group *g, const char *argument)
{
    int i = bench_argument_index(&g->entry->sheet, argument);
    return i >= 0 && g->once[i] != NULL ? g->once[i]->raw->cell[RAW_VALUE] : NULL;
}

const struct bench_set *bench_next(const struct bench_group *g, enum bench_run kind,
                                   const struct bench_set *from)
{
    for (size_t i = from ? (size_t)(from - g->set) + 1 : 0; i < g->sets; i++)
        if (g->set[i].kind == kind)
            return &g->set[i];
    return NULL;
}

size_t bench_sets(const struct bench_group *g, enum bench_run kind)
{
    size_t count = 0;
    for (size_t i = 0; i < g->sets; i++)
        count += g->set[i].kind == kind;
    return count;
}

const char *bench_set_words(const struct bench_group *g, const struct bench_set *s)
{
    if (s->kind != BENCH_SAMPLE)
        return s->name;
    if (*s->name == '\0')
        return arena_print(g->arena, "the %s", g->entry->sheet.run_name);
    return arena_print(g->arena, "%s '%s'", g->entry->sheet.run_name, s->name);
}

/* ---- refusals, checks, working ---- */

static const char *printed(struct arena *a, const char *format, va_list ap)
{
    struct text t;
    text_init(&t, SIZE_MAX);
    text_vprint(&t, format, ap);
    const char *s = arena_text(a, t.at);
    text_free(&t);
    return s;
}

enum status bench_refuse(struct bench_group *g, enum reason reason, const char *format, ...)
{
    va_list ap;
    va_start(ap, format);
    g->reason = reason;
    g->explanation = printed(g->arena, format, ap);
    va_end(ap);
    return FAULT;
}

void bench_check(struct bench_group *g, bool passed, const char *source, const char *format, ...)
{
    va_list ap;
    va_start(ap, format);
    struct bench_check *c = arena_push(g->arena, &g->check, &g->checks, &g->check_room, sizeof *c);
    *c = (struct bench_check){printed(g->arena, format, ap), source, passed};
    va_end(ap);
}

static void keep_working(struct bench_group *g, const char *line)
{
    const char **at = arena_push(g->arena, &g->working, &g->workings, &g->working_room, sizeof *at);
    *at = line;
}

void bench_say(struct bench_group *g, const char *format, ...)
{
    va_list ap;
    va_start(ap, format);
    keep_working(g, printed(g->arena, format, ap));
    va_end(ap);
}

/* The equation with its arguments' numbers in place of their names. */
static const char *numbers_put_in(struct arena *a, const struct formula *formula,
                                  const struct fraction *const *numbers)
{
    struct text t;
    text_init(&t, SIZE_MAX);
    for (const char *at = formula->equation; *at != '\0';) {
        size_t length = 0;
        while (isalnum((unsigned char)at[length]) || at[length] == '_')
            length++;
        int i = length == 0 ? -1 : formula_argument_index(formula, arena_bytes(a, at, length));
        length = length == 0 ? 1 : length;
        if (i >= 0)
            text_add(&t,
                     numbers[i] ? formula_number(a, numbers[i]) : formula->argument[i].fallback);
        else
            text_add_bytes(&t, at, length);
        at += length;
    }
    const char *s = arena_text(a, t.at);
    text_free(&t);
    return s;
}

enum status bench_formula_lists(struct bench_group *g, const char *name,
                                const struct formula_value *values, const struct fraction **out)
{
    struct fault f = {.set = false};
    const struct formula *formula = formula_find(name);
    assert(formula != NULL);
    if (formula_work(g->arena, formula, values, out, &f) != OK)
        return bench_refuse(g, REASON_NO_RESULT, "%s", f.text);
    return OK;
}

enum status bench_formula(struct bench_group *g, const struct bench_set *s, const char *name,
                          const struct fraction *const *numbers, const struct fraction **out)
{
    struct fault f = {.set = false};
    const struct formula *formula = formula_find(name);
    assert(formula != NULL);
    struct formula_value values[FORMULA_ARGUMENTS_MOST] = {{0}};
    const char *who = bench_set_words(g, s);
    for (size_t i = 0; i < formula->arguments; i++)
        values[i] = (struct formula_value){.number = &numbers[i], .count = numbers[i] ? 1 : 0};
    if (formula_work(g->arena, formula, values, out, &f) != OK)
        return bench_refuse(g, REASON_NO_RESULT, "%s: %s", who, f.text);
    const char *unit = text_equal(formula->unit, "1") ? "" : formula->unit;
    keep_working(g, arena_print(g->arena, "%s: %s = %s = %s %s", who, formula->result,
                                numbers_put_in(g->arena, formula, numbers),
                                formula_number(g->arena, *out), unit));
    return OK;
}

/* ---- outcomes ---- */

struct bench_outcome *bench_outcome_add(struct bench_made_list *made, struct arena *a, size_t order)
{
    struct bench_made *m = arena_push(a, &made->at, &made->count, &made->room, sizeof *m);
    m->order = order;
    return &m->outcome;
}

static struct bench_outcome *outcome_of(struct bench_group *g, enum bench_kind kind)
{
    struct bench_outcome *o = bench_outcome_add(g->made, g->arena, g->first->order);
    *o = (struct bench_outcome){.kind = kind,
                                .sheet = g->entry->sheet.name,
                                .parameter = g->parameter,
                                .explanation = "",
                                .check = g->check,
                                .checks = g->checks,
                                .working = g->working,
                                .workings = g->workings};
    for (size_t i = 0; i < LONG_COLUMNS; i++)
        o->row.cell[i] = "";
    o->row.raw = "";
    o->row.file = g->first->raw->file;
    o->row.line = g->first->raw->line;
    return o;
}

void bench_record(struct bench_group *g)
{
    outcome_of(g, BENCH_RECORD);
}

void bench_refused(struct bench_group *g)
{
    struct bench_outcome *o = outcome_of(g, BENCH_REFUSED);
    o->reason = g->reason;
    o->explanation = g->explanation;
    o->row.cell[LONG_DATE] = g->first->raw->cell[RAW_DATE];
    o->row.cell[LONG_TIME] = g->first->raw->cell[RAW_TIME];
    o->row.cell[LONG_POINT] = g->first->raw->cell[RAW_POINT];
    o->row.cell[LONG_PARAMETER] = g->parameter;
    o->row.cell[LONG_NOTE] = arena_print(g->arena, "sheet %s", g->entry->sheet.name);
}

static void part(struct text *t, const char *words)
{
    if (t->length > 0)
        text_add(t, "; ");
    text_add(t, words);
}

/* Failed checks first, then what passed, then the person's own words. */
static const char *note_of(const struct bench_group *g)
{
    struct text t;
    const char *own = bench_text(g, "note");
    text_init(&t, SIZE_MAX);
    if (g->summary != NULL)
        part(&t, g->summary);
    for (int passed = 0; passed < 2; passed++)
        for (size_t i = 0; i < g->checks; i++)
            if (g->check[i].passed == (passed == 1)) {
                part(&t, passed == 1 ? "passed: " : "CHECK FAILED: ");
                text_print(&t, "%s (%s)", g->check[i].text, g->check[i].source);
            }
    if (own != NULL)
        part(&t, own);
    const char *s = arena_text(g->arena, t.at);
    text_free(&t);
    return s;
}

static const char *or_nothing(const char *s)
{
    return s ? s : "";
}

const struct detail *bench_detail(struct bench_group *g)
{
    struct detail *d = arena_alloc(g->arena, sizeof *d);
    *d = (struct detail){.method = or_nothing(bench_text(g, "method")),
                         .analyst = or_nothing(bench_text(g, "analyst")),
                         .collected_by = "",
                         .analyzed = "",
                         .note = note_of(g)};
    return d;
}

static bool any_failed(const struct bench_group *g)
{
    for (size_t i = 0; i < g->checks; i++)
        if (!g->check[i].passed)
            return true;
    return false;
}

/* Two figures, and no more decimals than the rounded number needs: 6.8, 7, 33, 140. */
static int two_figures(struct arena *a, const struct fraction *x, enum rounding rounding)
{
    int decimals = fraction_decimals_for(x, 2, rounding);
    while (decimals > 0 && fraction_compare(fraction_round(a, x, decimals, rounding),
                                            fraction_round(a, x, decimals - 1, rounding)) == 0)
        decimals--;
    return decimals;
}

static const char *marked(struct arena *a, enum qualifier qualifier, const char *digits)
{
    switch (qualifier) {
    case QUALIFIER_LESS:
        return arena_print(a, "<%s", digits);
    case QUALIFIER_GREATER:
        return arena_print(a, ">%s", digits);
    case QUALIFIER_ESTIMATED:
        return arena_print(a, "E %s", digits);
    default:
        return digits;
    }
}

enum status bench_give(struct bench_group *g, const char *id, const struct fraction *x,
                       const char *unit, enum qualifier qualifier, enum bench_digits digits)
{
    int parameter = plant_parameter(g->plant, id);
    if (parameter < 0) {
        const char *near = plant_nearest_parameter(g->plant, id);
        return bench_refuse(g, REASON_UNKNOWN_PARAMETER, "the plant has no parameter '%s'%s%s%s",
                            id, near ? "; the nearest is '" : "", near ? near : "",
                            near ? "'" : "");
    }
    const struct parameter *p = &g->plant->parameters[parameter];
    g->parameter = p->id;
    if (!unit_same_kind(unit_find(unit), p->unit))
        return bench_refuse(g, REASON_WRONG_UNIT, "the result is in %s, but '%s' is measured in %s",
                            unit, p->id, p->unit->name);
    enum rounding rounding = (enum rounding)p->rules.word[RULE_ROUNDING];
    const struct fraction *own = unit_convert(g->arena, x, unit_find(unit), p->unit);
    int decimals = digits == BENCH_TWO_FIGURES ? two_figures(g->arena, own, rounding) : p->decimals;
    const char *number = fraction_print(g->arena, own, decimals, rounding);
    struct decimal value;
    if (decimal_parse(number, strlen(number), &value) != DECIMAL_FINE)
        return bench_refuse(g, REASON_TOO_MANY_DIGITS, "the result has more than 18 digits");
    if (fraction_sign(own) < 0 && !text_equal(p->unit->kind, "temperature"))
        return bench_refuse(g, REASON_NEGATIVE_VALUE, "the result is below zero: %s", number);
    if (qualifier == QUALIFIER_PLAIN && (g->estimated || any_failed(g)))
        qualifier = QUALIFIER_ESTIMATED;
    struct bench_outcome *o = outcome_of(g, BENCH_READING);
    o->reading = (struct reading){.day = g->day,
                                  .minute = (int16_t)g->minute,
                                  .point = (uint16_t)g->point,
                                  .parameter = (uint16_t)parameter,
                                  .unit = (uint16_t)unit_index(p->unit),
                                  .qualifier = (uint8_t)qualifier,
                                  .value = value,
                                  .text = marked(g->arena, qualifier, number),
                                  .sample = or_nothing(bench_text(g, "sample")),
                                  .detail = bench_detail(g),
                                  .file = g->first->raw->file,
                                  .line = g->first->raw->line};
    return OK;
}
