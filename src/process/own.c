/* The plant's own figures: the rows of process.csv, checked against the catalogue and bound. */
#include "process/lines.h"

#include <assert.h>

#include "process/catalogue.h"
#include "process/roles.h"

#include "base/poison.h"

/* ---- checks ---- */

struct checking {
    struct arena *arena;
    const struct plant *plant;
    struct fault *fault;
};

static struct place row_place(const struct process_row *row)
{
    return (struct place){.file = plant_layout(PLANT_PROCESS)->file, .line = row->line};
}

static bool one_figure(const struct process_row *a, const struct process_row *b)
{
    return text_equal(a->name, b->name) && text_equal(a->at, b->at) && a->parameter == b->parameter;
}

static enum status near_word(const struct checking *c, const struct process_row *row,
                             const char *near, const char *what, const char *word)
{
    struct place place = row_place(row);
    const char *todo =
        near ? arena_print(c->arena, "the nearest is '%s'", near) : "see 'weirbook formula'";
    return fault_at(c->fault, &place, todo, "%s '%s'", what, word);
}

static const char *nearest_argument(const struct formula *formula, const char *word)
{
    const char *known[FORMULA_ARGUMENTS_MOST];
    for (size_t i = 0; i < formula->arguments; i++)
        known[i] = formula->argument[i].name;
    return text_nearest(word, known, formula->arguments);
}

static const struct unit *source_unit(const struct plant *p, const struct process_row *row,
                                      const struct unit *argument)
{
    if (row->unit)
        return row->unit;
    switch (row->source) {
    case SOURCE_READING:
        return p->parameters[row->source_parameter].unit;
    case SOURCE_BASIN_VOLUME:
        return unit_find("MG");
    case SOURCE_BASIN_AREA:
        return unit_find("ft2");
    case SOURCE_BASIN_WEIR:
        return unit_find("ft");
    default:
        return argument;
    }
}

/* The unit an argument is worked in: the catalogue's, or for a share of like in like that of the
 * figure's first row, whatever its kind. */
static const struct unit *worked_unit(const struct plant *p, const struct process_row *row,
                                      const struct formula *formula, int argument)
{
    const struct unit *own = unit_find(formula->argument[argument].unit);
    if (!formula->like)
        return own;
    for (size_t i = 0; i < p->process_count; i++)
        if (one_figure(&p->process[i], row))
            return source_unit(p, &p->process[i], own);
    return own;
}

static enum status check_row(const struct checking *c, const struct process_row *row)
{
    struct place place = row_place(row);
    const struct formula *formula = formula_find(row->formula);
    if (formula == NULL)
        return near_word(c, row, formula_nearest(row->formula), "unknown formula", row->formula);
    if (formula_find(row->name) && !text_equal(row->name, row->formula))
        return fault_at(c->fault, &place, "choose another name",
                        "the name '%s' is that of another formula than '%s'", row->name,
                        row->formula);
    int i = formula_argument_index(formula, row->argument);
    if (i < 0)
        return near_word(c, row, nearest_argument(formula, row->argument),
                         arena_print(c->arena, "'%s' has no argument", row->formula),
                         row->argument);
    const struct unit *argument = worked_unit(c->plant, row, formula, i);
    const struct unit *given = source_unit(c->plant, row, argument);
    if (given != NULL && !unit_same_kind(given, argument))
        return fault_at(c->fault, &place,
                        arena_print(c->arena, "take a source in %s or its like", argument->name),
                        "the source of '%s' is in %s, a unit of %s, but '%s' is a %s",
                        row->argument, given->name, given->kind, row->argument, argument->kind);
    return OK;
}

static bool is_given(const struct plant *p, const struct process_row *figure, const char *argument)
{
    for (size_t i = 0; i < p->process_count; i++)
        if (one_figure(&p->process[i], figure) && text_equal(p->process[i].argument, argument))
            return true;
    return false;
}

static enum status check_complete(const struct checking *c, const struct process_row *row)
{
    struct place place = row_place(row);
    const struct formula *formula = formula_find(row->formula);
    for (size_t i = 0; i < formula->arguments; i++) {
        const struct formula_argument *argument = &formula->argument[i];
        if (!argument->fallback && !is_given(c->plant, row, argument->name))
            return fault_at(c->fault, &place, "add a row for it",
                            "'%s' at %s has no source for '%s'", row->name, row->at,
                            argument->name);
    }
    return OK;
}

static bool is_first_row(const struct plant *p, size_t i)
{
    for (size_t k = 0; k < i; k++)
        if (one_figure(&p->process[k], &p->process[i]))
            return false;
    return true;
}

size_t process_problems(const struct plant *plant, void (*tell)(void *context, const char *fault),
                        void *context)
{
    struct fault fault = {.set = false};
    struct checking c = {.arena = arena_new(), .plant = plant, .fault = &fault};
    size_t found = 0;
    for (size_t i = 0; i < plant->process_count; i++) {
        /* Whether a figure is complete can be said once its own row is fine. */
        fault_clear(&fault);
        if (check_row(&c, &plant->process[i]) == OK &&
            (!is_first_row(plant, i) || check_complete(&c, &plant->process[i]) == OK))
            continue;
        tell(context, fault.text);
        found++;
    }
    arena_free(c.arena);
    return found;
}

static void keep_first(void *context, const char *text)
{
    struct fault *f = context;
    if (f->set)
        return;
    f->set = true;
    f->kind = FAULT_FAILED;
    snprintf(f->text, sizeof f->text, "%s", text);
}

enum status process_check(const struct plant *plant, struct fault *f)
{
    return process_problems(plant, keep_first, f) == 0 ? OK : FAULT;
}

/* ---- binding ---- */

/* NULL when the frame holds no reading of the source. */
static struct stream *source_stream(struct supplies *s, const struct process_row *row,
                                    const struct unit *unit)
{
    switch (row->source) {
    case SOURCE_READING:
        return roles_reading(s, row->point, row->source_parameter, unit);
    case SOURCE_BASIN_VOLUME:
        return roles_basin(s, row->basin, MEASURE_VOLUME, NULL, unit);
    case SOURCE_BASIN_AREA:
        return roles_basin(s, row->basin, MEASURE_AREA, NULL, unit);
    case SOURCE_BASIN_WEIR:
        return roles_basin(s, row->basin, MEASURE_WEIR, NULL, unit);
    default:
        return roles_number(s, fraction_from_decimal(s->arena, row->number));
    }
}

static bool all_measured(const struct supplies *s, const struct process_row *figure)
{
    const struct plant *p = s->plant;
    for (size_t i = 0; i < p->process_count; i++) {
        const struct process_row *row = &p->process[i];
        if (one_figure(row, figure) && row->source == SOURCE_READING &&
            !frame_has(s->frame, row->point, row->source_parameter))
            return false;
    }
    return true;
}

/* The plant's row stands in place of the line found by roles. */
static void drop_found(struct lines *lines, size_t found, const struct process_row *row,
                       const char *parameter)
{
    for (size_t i = 0; i < found; i++) {
        struct line *line = &lines->line[i];
        if (text_equal(line->name, row->name) && text_equal(line->at, row->at) &&
            text_equal(line->parameter, parameter))
            line->ready = NULL;
    }
}

/* False when the source is not known: a basin with a row that lacks the measure. */
static bool feed_own(struct supplies *s, struct line *line, const struct process_row *row)
{
    const struct formula *formula = line->ready->formula;
    int i = formula_argument_index(formula, row->argument);
    assert(i >= 0);
    const struct unit *to = worked_unit(s->plant, row, formula, i);
    const struct unit *unit = source_unit(s->plant, row, to);
    struct stream *stream = source_stream(s, row, unit);
    if (stream == NULL)
        return false;
    line_feed_as(s, line, row->argument, stream, AMOUNT, unit, to);
    return true;
}

/* What the plant counts a gallon as holds for its own figures too. */
static void feed_load_factor(struct supplies *s, struct line *line)
{
    int i = formula_argument_index(line->ready->formula, "load_factor");
    if (i >= 0 && line->input[i].stream == NULL)
        line_feed(s, line, "load_factor", roles_load_factor(s), AMOUNT, unit_find("lb/gal"));
}

void lines_own(struct supplies *s, struct lines *out)
{
    const struct plant *p = s->plant;
    size_t found = out->count;
    for (size_t i = 0; i < p->process_count; i++) {
        const struct process_row *row = &p->process[i];
        const char *parameter = row->parameter >= 0 ? p->parameters[row->parameter].id : "";
        if (!is_first_row(p, i) || !all_measured(s, row))
            continue;
        struct line *line = lines_add(s, out, row->formula);
        bool fed = true;
        for (size_t k = i; k < p->process_count; k++)
            if (one_figure(&p->process[k], row))
                fed = feed_own(s, line, &p->process[k]) && fed;
        feed_load_factor(s, line);
        line->name = row->name;
        line->at = row->at;
        line->parameter = parameter;
        if (fed)
            drop_found(out, found, row, parameter);
        else
            out->count--;
    }
}
