/* formula: the catalogue: list it, show one, work one. */
#include "command/figures.h"
#include "command/session.h"

#include <string.h>

#include "base/poison.h"

struct formula_options {
    int units, as;
};

static const struct option_spec options[] = {
    {"units", OPTION_ONE_OF, offsetof(struct formula_options, units), "us|metric",
     "units of the result (default: as the catalogue has it)", false},
    AS_OPTION(struct formula_options),
};

static const struct example examples[] = {
    {"weirbook formula", "lists the formulas by subject"},
    {"weirbook formula sludge-volume-index", "shows its arguments, equation and source"},
    {"weirbook formula sludge-volume-index settled_volume=250 mlss=2500",
     "works it, showing every step"},
    {"weirbook formula mass-load flow=3785m3/d concentration=20",
     "takes values in other units of the kind"},
};

static const struct column list_columns[] = {
    {"subject", NULL, ALIGN_LEFT, false, 0}, {"formula", "formula", ALIGN_LEFT, false, 0},
    {"unit", "gives", ALIGN_LEFT, false, 0}, {"equation", "equation", ALIGN_LEFT, true, 0},
    {"source", NULL, ALIGN_LEFT, true, 0},
};

/* The subject stands over each table of the page, and the source on a formula's own. */
static const struct column page_columns[] = {
    {NULL, "formula", ALIGN_LEFT, false, 0},
    {NULL, "gives", ALIGN_LEFT, false, 0},
    {NULL, "equation", ALIGN_LEFT, true, 0},
};

static void add_to_page(struct table *t, const struct formula *g)
{
    struct cell *c = table_row(t);
    c[0] = cell_text(g->name);
    c[1] = cell_text(g->unit);
    c[2] = cell_text(g->equation);
}

static void add_formula(struct table *t, const struct formula *g)
{
    struct cell *c = table_row(t);
    c[0] = cell_text(g->subject);
    c[1] = cell_text(g->name);
    c[2] = cell_text(g->unit);
    c[3] = cell_text(g->equation);
    c[4] = cell_text(g->source);
}

static enum status list(struct session *s, const struct formula_options *o)
{
    struct page *page = page_new(s->arena);
    struct table *all = table_new(s->arena, "", list_columns, NELEM(list_columns));
    struct table *part = NULL;
    const char *subject = "";
    for (size_t i = 0; i < formula_count(); i++) {
        const struct formula *g = formula_at(i);
        if (strcmp(subject, g->subject) != 0) {
            subject = g->subject;
            part = table_new(s->arena, subject, page_columns, NELEM(page_columns));
            page_table(page, part);
        }
        add_formula(all, g);
        add_to_page(part, g);
    }
    page_line(page, FLAG_NONE,
              "weirbook formula NAME shows one with its source; figures are for a licensed "
              "operator to confirm.");
    session_print(s, o->as, page, all);
    return OK;
}

static const char *domain(struct arena *a, const struct formula_argument *g)
{
    const char *low = g->above      ? arena_print(a, "above %s", g->above)
                      : g->at_least ? arena_print(a, "at least %s", g->at_least)
                                    : "";
    const char *high = g->below     ? arena_print(a, "below %s", g->below)
                       : g->at_most ? arena_print(a, "at most %s", g->at_most)
                                    : "";
    return arena_print(a, "%s%s%s", low, *low && *high ? ", " : "", high);
}

static const struct column argument_columns[] = {
    {"argument", "argument", ALIGN_LEFT, false, 0},
    {"unit", "unit", ALIGN_LEFT, false, 0},
    {"default", "default", ALIGN_LEFT, false, 0},
    {"domain", "domain", ALIGN_LEFT, true, 0},
};

static enum status show(struct session *s, const struct formula_options *o, const struct formula *g)
{
    struct page *page = page_new(s->arena);
    struct table *t = table_new(s->arena, "", argument_columns, NELEM(argument_columns));
    for (size_t i = 0; i < g->arguments; i++) {
        const struct formula_argument *from = &g->argument[i];
        struct cell *c = table_row(t);
        c[0] =
            cell_text(from->list ? arena_print(s->arena, "%s=1,2,3...", from->name) : from->name);
        c[1] = cell_text(strcmp(from->unit, "1") == 0 ? "" : from->unit);
        c[2] = cell_text(from->fallback ? from->fallback : "");
        c[3] = cell_text(domain(s->arena, from));
    }
    page_heading(page, g->name);
    page_line(page, FLAG_NONE, "%s [%s] = %s", g->result, g->unit, g->equation);
    page_space(page);
    page_table(page, t);
    page_line(page, FLAG_NONE, "Source: %s", g->source);
    if (g->usual)
        page_line(page, FLAG_NONE, "Usual: %s", g->usual);
    if (g->trap)
        page_line(page, FLAG_WATCH, "Beware: %s", g->trap);
    session_print(s, o->as, page, t);
    return OK;
}

static const struct column result_columns[] = {
    {"formula", NULL, ALIGN_LEFT, false, 0},
    {"value", NULL, ALIGN_RIGHT, false, 0},
    {"unit", NULL, ALIGN_LEFT, false, 0},
};

static enum status work(struct session *s, const struct formula_options *o, struct fault *f)
{
    struct formula_result r = {0};
    if (formula_ask(s->arena, s->operand[0], s->operand + 1, s->operands - 1, o->units == 1, &r,
                    f) != OK)
        return FAULT;
    struct page *page = page_new(s->arena);
    for (size_t i = 0; i < r.step_count; i++)
        page_line(page, FLAG_NONE, "%s", r.steps[i].text);
    struct table *t = table_new(s->arena, "", result_columns, NELEM(result_columns));
    struct cell *c = table_row(t);
    c[0] = cell_text(r.formula->name);
    c[1] = cell_number(figure_print(s->arena, r.value, 15));
    c[2] = cell_text(r.unit);
    session_print(s, o->as, page, t);
    return OK;
}

static enum status run(struct session *s, const void *given, struct fault *f)
{
    const struct formula_options *o = given;
    if (s->operands == 0)
        return list(s, o);
    const struct formula *g = formula_find(s->operand[0]);
    if (g && s->operands == 1)
        return show(s, o, g);
    return work(s, o, f);
}

const struct command command_formula = {
    .name = "formula",
    .summary = "list the formulas; work one, showing every step",
    .operands = "[NAME [ARG=VALUE...]]",
    .most = SIZE_MAX,
    .operand = OPERAND_FORMULA,
    .option = options,
    .options = NELEM(options),
    .options_size = sizeof(struct formula_options),
    .example = examples,
    .examples = NELEM(examples),
    .about = "Values take a unit: flow=3785m3/d. A list is written with commas: values=12,28,37.\n"
             "Figures are for a licensed operator to confirm; the permit governs.",
    .run = run,
};
