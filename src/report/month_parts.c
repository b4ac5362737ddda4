/* month_parts: the parts of a monthly summary beside limits and daily values: rows set aside,
 * corrections, codes, process figures, rules in words, cautions, the foot. */
#include "report/content.h"

#include <string.h>

#include "base/poison.h"

static struct column *columns_of(struct arena *a, const enum word *title, size_t count)
{
    struct column *columns = arena_alloc(a, count * sizeof *columns);
    for (size_t i = 0; i < count; i++)
        columns[i] = (struct column){.title = word(title[i]), .wraps = true};
    return columns;
}

/* A date as written by a person: a true date when it is one. */
static struct cell date_cell(const char *text)
{
    day_t day = DAY_NONE;
    struct cell c = cell_text(text);
    if (day_parse(text, &day))
        c.kind = CELL_DATE;
    return c;
}

/* Readings after the day the month is judged on are ignored. */
static day_t last_day(const struct month_input *in)
{
    day_t last = month_last(in->permit->month);
    return in->permit->on < last ? in->permit->on : last;
}

/* ---- rows set aside, corrections, codes ---- */

struct table *aside_table(struct arena *a, const struct month_input *in)
{
    static const enum word titles[] = {WORD_COLUMN_DATE,  WORD_COLUMN_POINT,  WORD_COLUMN_PARAMETER,
                                       WORD_COLUMN_VALUE, WORD_COLUMN_REASON, WORD_COLUMN_TODO,
                                       WORD_COLUMN_WHERE};
    struct table *t = table_new(a, "", columns_of(a, titles, NELEM(titles)), NELEM(titles));
    for (size_t i = 0; i < in->asides; i++) {
        const struct month_aside *aside = &in->aside[i];
        struct cell *c = table_row(t);
        c[0] = date_cell(aside->date);
        c[1] = cell_text(aside->point);
        c[2] = cell_text(aside->parameter);
        c[3] = cell_text(aside->value);
        c[4] = cell_text(aside->reason);
        c[5] = cell_text(aside->explanation);
        c[6] = cell_text(aside->column > 0
                             ? arena_print(a, "%s:%ld:%d", aside->file, aside->line, aside->column)
                             : arena_print(a, "%s:%ld", aside->file, aside->line));
    }
    return t;
}

struct table *revision_table(struct arena *a, const struct month_input *in, bool paper)
{
    static const enum word titles[] = {
        WORD_COLUMN_DATE, WORD_COLUMN_POINT, WORD_COLUMN_PARAMETER, WORD_COLUMN_OLD,
        WORD_COLUMN_NEW,  WORD_COLUMN_UNIT,  WORD_COLUMN_REASON,    WORD_COLUMN_WHO,
        WORD_COLUMN_WHEN, WORD_COLUMN_WHERE,
    };
    struct table *t = table_new(a, "", columns_of(a, titles, NELEM(titles)), NELEM(titles));
    for (size_t i = 0; i < in->revisions; i++) {
        const struct month_revision *r = &in->revision[i];
        struct cell *c = table_row(t);
        c[0] = date_cell(r->date);
        c[1] = cell_text(r->point);
        c[2] = cell_text(r->parameter);
        c[3] = cell_text(r->old_text);
        c[4] = cell_text(r->new_text);
        c[5] = cell_text(r->unit);
        c[6] = cell_text(r->reason);
        c[7] = cell_text(r->who);
        c[8] = cell_text(paper ? arena_print(a, "%.10s", r->when) : r->when);
        c[9] = cell_text(r->line > 0 ? arena_print(a, "%s:%ld", r->file, r->line) : r->file);
    }
    return t;
}

static void add_codes(struct table *t, const struct month_input *in, int point, int parameter,
                      day_t day)
{
    size_t count = 0;
    const struct reading *const *r = frame_readings(in->frame, point, parameter, day, &count);
    for (size_t i = 0; i < count; i++) {
        if (r[i]->qualifier != QUALIFIER_CODE)
            continue;
        const struct no_data_code *code = no_data_code(r[i]->code);
        const char *note = r[i]->detail != NULL ? r[i]->detail->note : "";
        struct cell *c = table_row(t);
        c[0] = cell_day(t->arena, day);
        c[1] = cell_text(in->plant->points[point].id);
        c[2] = cell_text(in->plant->parameters[parameter].id);
        c[3] = cell_text(arena_print(t->arena, "%c", r[i]->code));
        c[4] = cell_text(code != NULL ? code->meaning : "");
        c[5] = cell_text(note);
    }
}

struct table *code_table(struct arena *a, const struct month_input *in)
{
    static const enum word titles[] = {WORD_COLUMN_DATE, WORD_COLUMN_POINT,   WORD_COLUMN_PARAMETER,
                                       WORD_COLUMN_CODE, WORD_COLUMN_MEANING, WORD_COLUMN_NOTE};
    struct table *t = table_new(a, "", columns_of(a, titles, NELEM(titles)), NELEM(titles));
    for (day_t day = in->permit->month; day <= last_day(in); day++)
        for (size_t point = 0; point < in->plant->point_count; point++)
            for (size_t parameter = 0; parameter < in->plant->parameter_count; parameter++)
                if (frame_has(in->frame, (int)point, (int)parameter))
                    add_codes(t, in, (int)point, (int)parameter, day);
    return t;
}

/* ---- process figures ---- */

/* For steering the plant, not for the regulator: four significant figures, whole units kept. */
static const char *process_number(struct arena *a, const struct fraction *value)
{
    enum { FIGURES = 4 };
    if (value == NULL)
        return "";
    int decimals = fraction_decimals_for(value, FIGURES, ROUND_HALF_EVEN);
    return fraction_print(a, value, decimals < 0 ? 0 : decimals, ROUND_HALF_EVEN);
}

struct table *process_summary(struct arena *a, const struct month_input *in)
{
    static const enum word titles[] = {
        WORD_COLUMN_PERIOD, WORD_COLUMN_NAME, WORD_COLUMN_AT,   WORD_COLUMN_OF,   WORD_COLUMN_MEAN,
        WORD_COLUMN_LEAST,  WORD_COLUMN_MOST, WORD_COLUMN_UNIT, WORD_COLUMN_DAYS,
    };
    struct column *columns = columns_of(a, titles, NELEM(titles));
    for (size_t i = 4; i < 7; i++)
        columns[i] = (struct column){.title = word(titles[i]), .align = ALIGN_POINT};
    columns[8] = (struct column){.title = word(titles[8]), .align = ALIGN_RIGHT};
    struct table *t = table_new(a, "", columns, NELEM(titles));
    for (size_t i = 0; i < in->process_months; i++) {
        const struct process_figure *figure = &in->process_month[i];
        const struct permit_row period = {.from = figure->from, .to = figure->to, .on = DAY_NONE};
        if (figure->count == 0)
            continue;
        struct cell *c = table_row(t);
        c[0] = cell_text(row_period(a, &period, in->permit->month));
        c[1] = cell_text(figure->name);
        c[2] = cell_text(figure->at);
        c[3] = cell_text(figure->parameter);
        c[4] = cell_number(process_number(a, figure->value));
        c[5] = cell_number(process_number(a, figure->least));
        c[6] = cell_number(process_number(a, figure->most));
        c[7] = cell_text(figure->unit);
        c[8] = cell_count(a, figure->count);
    }
    return t;
}

static bool same_figure(const struct process_figure *x, const struct process_figure *y)
{
    return text_equal(x->name, y->name) && text_equal(x->at, y->at) &&
           text_equal(x->parameter, y->parameter) && text_equal(x->unit, y->unit);
}

/* The distinct figures in order of their first day; which[i] is the column of figure i. */
static size_t distinct_figures(const struct month_input *in, size_t *which, size_t *first)
{
    size_t count = 0;
    for (size_t i = 0; i < in->process_count; i++) {
        size_t n = 0;
        while (n < count && !same_figure(&in->process[first[n]], &in->process[i]))
            n++;
        if (n == count)
            first[count++] = i;
        which[i] = n;
    }
    return count;
}

/* The catalogue's name with spaces, so that a title can be broken. */
static const char *figure_title(struct arena *a, const struct process_figure *f)
{
    char *name = arena_text(a, f->name);
    for (char *c = name; *c != '\0'; c++)
        *c = *c == '-' ? ' ' : *c;
    const char *what =
        f->parameter[0] == '\0' ? f->at : arena_print(a, "%s %s", f->at, f->parameter);
    return SAY(a, PROCESS_TITLE, [PLACE_NAME] = name, [PLACE_WHAT] = what, [PLACE_UNIT] = f->unit);
}

/* The month's mean and extremes under the days of a figure. */
static void month_below(struct table *t, const struct month_input *in, size_t rows, size_t column,
                        const struct process_figure *of)
{
    for (size_t i = 0; i < in->process_months; i++) {
        const struct process_figure *f = &in->process_month[i];
        if (f->from != in->permit->month || f->to != month_last(f->from) || !same_figure(f, of))
            continue;
        struct cell *c = t->cell + rows * t->columns + column;
        c[0] = cell_number(process_number(t->arena, f->value));
        c[t->columns] = cell_number(process_number(t->arena, f->least));
        c[2 * t->columns] = cell_number(process_number(t->arena, f->most));
        c[3 * t->columns] = cell_count(t->arena, f->count);
    }
}

static void add_months(struct table *t, const struct month_input *in, const size_t *first)
{
    static const enum word titles[] = {WORD_MEAN, WORD_LEAST, WORD_MOST, WORD_DAYS};
    size_t rows = t->rows;
    for (size_t i = 0; i < NELEM(titles); i++)
        table_row(t)[0] = cell_flagged(cell_text(word(titles[i])), FLAG_WATCH);
    for (size_t i = 1; i < t->columns; i++)
        month_below(t, in, rows, i, &in->process[first[i - 1]]);
}

struct table *process_by_day(struct arena *a, const struct month_input *in)
{
    size_t *which = arena_alloc(a, in->process_count * sizeof *which);
    size_t *first = arena_alloc(a, in->process_count * sizeof *first);
    size_t figures = distinct_figures(in, which, first);
    struct column *columns = arena_alloc(a, (figures + 1) * sizeof *columns);
    columns[0] = (struct column){.title = word(WORD_COLUMN_DAY)};
    for (size_t i = 0; i < figures; i++)
        columns[i + 1] =
            (struct column){.title = figure_title(a, &in->process[first[i]]), .align = ALIGN_RIGHT};
    struct table *t = table_new(a, "", columns, figures + 1);
    day_t last = month_last(in->permit->month);
    for (day_t day = in->permit->month; day <= last; day++)
        table_row(t)[0] = cell_day(a, day);
    for (size_t i = 0; i < in->process_count; i++) {
        const struct process_figure *f = &in->process[i];
        if (f->from >= in->permit->month && f->from <= last)
            t->cell[(size_t)(f->from - in->permit->month) * t->columns + which[i] + 1] =
                cell_number(process_number(a, f->value));
    }
    if (in->process_months > 0)
        add_months(t, in, first);
    return t;
}

/* ---- rules ---- */

void rules_sentences(struct arena *a, const struct month_input *in, struct sentences *out)
{
    for (int r = 0; r < RULES; r++) {
        const char *sentence = rule_sentence(a, &in->plant->rules, (enum rule)r);
        if (sentence != NULL && sentence[0] != '\0')
            say(a, out, sentence);
    }
}

static bool same_rule(const struct rules *a, const struct rules *b, int r)
{
    return a->word[r] == b->word[r] && decimal_compare(a->number[r], b->number[r]) == 0 &&
           text_equal(a->text[r], b->text[r]);
}

static void say_differences(struct arena *a, struct sentences *out, const char *name,
                            const struct rules *mine, const struct rules *base)
{
    for (int r = 0; r < RULES; r++) {
        if (same_rule(mine, base, r))
            continue;
        const char *line = SAY(a, RULE_EXCEPTION, [PLACE_NAME] = name,
                               [PLACE_RULE] = rule_sentence(a, mine, (enum rule)r));
        if (!said_already(out, line))
            say(a, out, line);
    }
}

/* A limit's rules stand on its parameter's, and those on the plant's: each difference is said once,
 * where it enters. */
void rules_exceptions(struct arena *a, const struct month_input *in, struct sentences *out)
{
    for (size_t i = 0; i < in->plant->parameter_count; i++) {
        const struct parameter *p = &in->plant->parameters[i];
        bool used = false;
        for (size_t point = 0; point < in->plant->point_count && !used; point++)
            used = frame_has(in->frame, (int)point, (int)i);
        if (used)
            say_differences(a, out, p->id, &p->rules, &in->plant->rules);
    }
    for (size_t i = 0; i < in->permit->count; i++) {
        const struct limit *l = in->permit->rows[i].limit;
        if (i == 0 || in->permit->rows[i - 1].limit != l)
            say_differences(a, out, limit_name(a, l), &l->rules,
                            l->parameters > 0 ? &in->plant->parameters[l->parameter[0]].rules
                                              : &in->plant->rules);
    }
}

/* ---- flows, loads, methods ---- */

static void say_flow(struct arena *a, const struct month_input *in, const struct limit *l,
                     struct sentences *out)
{
    for (int i = 0; i < l->points; i++) {
        int flow_point = -1;
        int flow_parameter = -1;
        const char *name = in->plant->points[l->point[i]].id;
        const char *line = NULL;
        if (frame_flow_of(in->frame, l->point[i], &l->rules, &flow_point, &flow_parameter))
            line = SAY(a, FLOW_OF, [PLACE_POINT] = name,
                       [PLACE_NAME] = arena_print(a, "%s %s", in->plant->points[flow_point].id,
                                                  in->plant->parameters[flow_parameter].id));
        else
            line = SAY(a, FLOW_OF_NONE, [PLACE_POINT] = name);
        if (!said_already(out, line))
            say(a, out, line);
    }
}

void flow_sentences(struct arena *a, const struct month_input *in, struct sentences *out)
{
    bool loads = false;
    for (size_t i = 0; i < in->permit->count; i++) {
        const struct limit *l = in->permit->rows[i].limit;
        bool removal = l->basis == BASIS_REMOVAL && l->rules.word[RULE_REMOVAL] == REMOVAL_LOADS;
        if (l->basis != BASIS_LOAD && !removal)
            continue;
        say_flow(a, in, l, out);
        loads = true;
    }
    if (loads) {
        say(a, out, word(WORD_LOADS_US));
        say(a, out, word(WORD_LOADS_METRIC));
        say(a, out, word(WORD_LOADS_NEED_FLOW));
    }
    for (size_t i = 0; i < in->permit->count; i++) {
        const struct limit *l = in->permit->rows[i].limit;
        if (l->note[0] == '\0' || (i > 0 && in->permit->rows[i - 1].limit == l))
            continue;
        say(a, out, SAY(a, LIMIT_NOTE, [PLACE_NAME] = limit_name(a, l), [PLACE_NOTE] = l->note));
    }
}

static void say_methods(struct arena *a, const struct month_input *in, int point, int parameter,
                        struct sentences *out)
{
    for (day_t day = in->permit->month; day <= last_day(in); day++) {
        size_t count = 0;
        const struct reading *const *r = frame_readings(in->frame, point, parameter, day, &count);
        for (size_t i = 0; i < count; i++) {
            if (r[i]->detail == NULL || r[i]->detail->method[0] == '\0')
                continue;
            const char *line =
                SAY(a, METHOD_LINE, [PLACE_PARAMETER] = in->plant->parameters[parameter].id,
                    [PLACE_METHOD] = r[i]->detail->method);
            if (!said_already(out, line))
                say(a, out, line);
        }
    }
}

void method_sentences(struct arena *a, const struct month_input *in, struct sentences *out)
{
    for (size_t parameter = 0; parameter < in->plant->parameter_count; parameter++)
        for (size_t point = 0; point < in->plant->point_count; point++)
            if (frame_has(in->frame, (int)point, (int)parameter))
                say_methods(a, in, (int)point, (int)parameter, out);
}

/* ---- cautions and the foot ---- */

void caution_sentences(struct arena *a, struct sentences *out)
{
    static const enum word cautions[] = {
        WORD_CAUTION_PERMIT, WORD_CAUTION_RULES,    WORD_CAUTION_ADVICE,
        WORD_CAUTION_CODES,  WORD_CAUTION_CHEMICAL, WORD_CAUTION_OPERATOR,
    };
    for (size_t i = 0; i < NELEM(cautions); i++)
        say(a, out, word(cautions[i]));
}

void footer_sentences(struct arena *a, const struct month_input *in, struct sentences *out)
{
    char printed[11];
    day_write(in->printed, printed);
    say(a, out, SAY(a, FOOT_PROGRAM, [PLACE_VERSION] = in->version, [PLACE_DAY] = printed));
    if (in->head != NULL && in->head[0] != '\0')
        say(a, out, SAY(a, FOOT_HEAD, [PLACE_HEAD] = in->head));
    if (in->as_of != NULL)
        say(a, out, SAY(a, FOOT_AS_OF, [PLACE_DAY] = in->as_of));
}
