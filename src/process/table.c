/* The process table: every line worked for every day, or gathered by week, month or year. */
#include "process/process.h"

#include <assert.h>
#include <stdlib.h>
#include <string.h>

#include "process/catalogue.h"
#include "process/lines.h"

#include "base/poison.h"

/* Whether a figure's parts are measured at all is judged over a month at least, so that a day's
 * table names what is missing on it. */
enum { LOOK_BACK = 30 };

day_t process_reach(const struct process_options *o)
{
    int back = o->smooth - 1 > LOOK_BACK ? o->smooth - 1 : LOOK_BACK;
    return o->from - back;
}

/* What the days of a longer step come to, of one line. */
struct gathered {
    const struct fraction *sum, *least, *most;
    long count, present; /* days with a figure; days on which there could be one */
    bool less, greater;
    const char *first_missing;
};

struct table {
    struct supplies s;
    struct lines lines;
    const struct process_options *options;
    struct arena *results; /* where figures and their notes go */
    struct process_figure *figures;
    size_t count;
    struct gathered *gathered;
    struct arena *gathering; /* of one step alone */
    process_sink *sink;      /* takes each step's figures; NULL: all are kept */
    void *context;
};

/* ---- one figure of one day ---- */

struct day_figure {
    bool absent;                  /* its basin is out of service: no row */
    const struct fraction *value; /* NULL: `note` says why; in the arena that is passing */
    const char *note;             /* "" mostly */
    bool less, greater;
    int split;  /* basins in service that share a flow; 0: none do */
    int fewest; /* days of the scarcest smoothed part; 0: not smoothed */
};

static bool basin_runs(const struct plant *p, const struct line *line, day_t day)
{
    for (size_t i = 0; i < p->basin_count; i++)
        if (text_equal(p->basins[i].id, line->basin) && basin_in_service(&p->basins[i], day))
            return true;
    return false;
}

static int running(const struct plant *p, enum basin_kind kind, day_t day)
{
    int count = 0;
    for (size_t i = 0; i < p->basin_count; i++)
        count += p->basins[i].kind == kind && basin_in_service(&p->basins[i], day);
    return count;
}

static const struct fraction *strength(struct arena *a, const struct carried *c)
{
    if (c->product == NULL || fraction_sign(c->amount) == 0)
        return c->product;
    return fraction_divide(a, c->product, c->amount);
}

static void work_figure(struct table *t, const struct line *line, day_t day,
                        struct day_figure *out);

/* What another formula gives, in that formula's own unit; what must be known of it is passed on. */
static const struct fraction *part_number(struct table *t, const struct line *part, day_t day,
                                          struct day_figure *out)
{
    struct day_figure d;
    work_figure(t, part, day, &d);
    out->absent = out->absent || d.absent;
    if (d.value == NULL) {
        out->note = d.note;
        return NULL;
    }
    out->less = out->less || d.less;
    out->greater = out->greater || d.greater;
    out->split = d.split > out->split ? d.split : out->split;
    return d.value;
}

static const struct fraction *figure_number(struct table *t, const struct input *in, day_t day,
                                            struct day_figure *out)
{
    struct arena *a = t->s.passing;
    const struct fraction *x = part_number(t, in->figure, day, out);
    if (x == NULL || in->share == NULL)
        return x;
    const struct fraction *percent = part_number(t, in->share, day, out);
    if (percent == NULL)
        return NULL;
    return fraction_divide(a, fraction_multiply(a, x, percent), fraction_from_int(a, 100));
}

/* NULL when the input has no number on the day; the figure then has its note. */
static const struct fraction *stream_number(struct table *t, const struct line *line,
                                            const struct input *in, day_t day,
                                            struct day_figure *out)
{
    struct arena *a = t->s.passing;
    struct carried c = line->smoothed ? stream_smoothed(&t->s, in->stream, day)
                                      : stream_day(&t->s, in->stream, day);
    if (c.idle)
        out->absent = true;
    const struct fraction *x = in->side == AMOUNT ? c.amount : strength(a, &c);
    if (x == NULL) {
        out->note = in->side == AMOUNT ? c.no_amount : c.no_product;
        return NULL;
    }
    out->less = out->less || c.less;
    out->greater = out->greater || c.greater;
    if (c.days > 0 && (out->fewest == 0 || c.days < out->fewest))
        out->fewest = c.days;
    if (in->shared) {
        out->split = running(t->s.plant, line->kind, day);
        assert(out->split > 0);
        x = fraction_divide(a, x, fraction_from_int(a, out->split));
    }
    return x;
}

static const struct fraction *input_number(struct table *t, const struct line *line,
                                           const struct input *in, day_t day,
                                           struct day_figure *out)
{
    struct arena *a = t->s.passing;
    const struct fraction *x =
        in->figure ? figure_number(t, in, day, out) : stream_number(t, line, in, day, out);
    if (x != NULL && in->factor)
        x = fraction_add(a, fraction_multiply(a, x, in->factor), in->offset);
    return x;
}

/* The count's most: what it is with every less-than at its number. NULL: nothing above 0. */
static const struct fraction *most_of(struct table *t, const struct series *series, day_t day)
{
    struct day_value v;
    struct rules rules = t->s.plant->parameters[series->parameter].rules;
    rules.word[RULE_NONDETECT] = NONDETECT_FULL;
    frame_day(t->s.frame, series->point, series->parameter, day, &rules, series->unit, &v);
    bool any = v.state == DAY_VALUED && fraction_sign(v.amount.number) > 0;
    return any ? v.amount.number : NULL;
}

/* Cut, not rounded: a bound must not promise more than there is. */
static const char *cut(struct table *t, const struct fraction *x)
{
    struct arena *a = t->s.passing;
    const struct fraction *low = fraction_subtract(a, x, fraction_from_ratio(a, 1, 200));
    return fraction_print(a, low, 2, ROUND_HALF_UP);
}

/* What a count that was not found tells: the figure at its most, as a bound. */
static const char *bound_note(struct table *t, const struct line *line, size_t argument, day_t day,
                              struct formula_value *value)
{
    struct arena *a = t->s.passing;
    struct fault fault = {.set = false};
    const struct part *part = line->input[argument].stream->part;
    const struct fraction *most = part->reading ? most_of(t, part->reading, day) : NULL;
    const struct fraction *least = NULL;
    const char *at = part->reading ? t->s.plant->points[part->reading->point].id : "the effluent";
    bool none = most == NULL;
    if (none) /* the least a count can be */
        most = fraction_from_int(a, 1);
    const struct fraction **bound = arena_alloc(a, sizeof(const struct fraction *));
    *bound = most;
    value[argument] = (struct formula_value){.number = bound, .count = 1};
    if (ready_work(a, line->ready, value, &least, &fault) != OK)
        return arena_text(t->results, fault.text);
    if (none)
        return arena_print(t->results, "none counted at %s: more than %s if below 1", at,
                           cut(t, least));
    return arena_print(t->results, "more than %s: a less-than at %s, at most %s", cut(t, least), at,
                       formula_number(a, most));
}

/* Whether the count is one: more than none, and no less-than. Else the note has the bound. */
static bool is_counted(struct table *t, const struct line *line, day_t day,
                       struct formula_value *value, struct day_figure *out)
{
    int i = formula_argument_index(line->ready->formula, line->counted);
    assert(i >= 0);
    const struct input *in = &line->input[i];
    if (in->stream == NULL)
        return true;
    assert(value[i].number != NULL); /* what has a stream has a number by now */
    bool less = stream_day(&t->s, in->stream, day).less;
    if (!less && fraction_sign(value[i].number[0]) != 0)
        return true;
    out->note = bound_note(t, line, (size_t)i, day, value);
    return false;
}

static void work_figure(struct table *t, const struct line *line, day_t day, struct day_figure *out)
{
    const struct fraction *number[FORMULA_ARGUMENTS_MOST];
    struct formula_value value[FORMULA_ARGUMENTS_MOST] = {{0}};
    const struct formula *formula = line->ready->formula;
    struct arena *a = t->s.passing;
    struct fault fault = {.set = false};
    *out = (struct day_figure){.note = ""};
    out->absent = line->basin && !basin_runs(t->s.plant, line, day);
    for (size_t i = 0; i < formula->arguments && !out->absent; i++) {
        if (line->input[i].stream == NULL && line->input[i].figure == NULL)
            continue;
        number[i] = input_number(t, line, &line->input[i], day, out);
        if (number[i] == NULL)
            return;
        value[i] = (struct formula_value){.number = &number[i], .count = 1};
    }
    if (out->absent || (line->counted && !is_counted(t, line, day, value, out)))
        return;
    if (ready_work(a, line->ready, value, &out->value, &fault) != OK) {
        out->value = NULL;
        out->note = arena_text(t->results, fault.text);
        return;
    }
}

/* In the plant's unit. */
static void work_line(struct table *t, const struct line *line, day_t day, struct day_figure *out)
{
    struct arena *a = t->s.passing;
    work_figure(t, line, day, out);
    if (out->value != NULL && line->factor)
        out->value = fraction_add(a, fraction_multiply(a, out->value, line->factor), line->offset);
}

/* ---- notes ---- */

static void add_note(struct text *t, const char *note)
{
    if (*note == '\0')
        return;
    if (t->length > 0)
        text_add(t, "; ");
    text_add(t, note);
}

static const char *kept(struct table *t, const char *s)
{
    return *s == '\0' ? "" : arena_text(t->results, s);
}

/* What must be known of a figure that has a value. */
static const char *value_note(struct table *t, const struct line *line, const struct day_figure *d)
{
    bool smoothed = line->smoothed && t->options->smooth > 1;
    if (!smoothed && d->split <= 1 && !d->less && !d->greater)
        return line->note;
    struct text note;
    text_init(&note, 512);
    add_note(&note, line->note);
    if (d->split > 1)
        text_print(&note, "%sflow split evenly over %d in service", note.length ? "; " : "",
                   d->split);
    if (smoothed)
        text_print(&note, "%smeans of %d days", note.length ? "; " : "", t->options->smooth);
    if (smoothed && d->fewest > 0 && d->fewest < t->options->smooth)
        text_print(&note, ", one part of only %d", d->fewest);
    if (d->less)
        add_note(&note, "with a less-than");
    if (d->greater)
        add_note(&note, "with a greater-than");
    const char *s = kept(t, note.at);
    text_free(&note);
    return s;
}

/* ---- days ---- */

static struct process_figure *figure_new(struct table *t, const struct line *line, day_t from,
                                         day_t to)
{
    struct process_figure *f = &t->figures[t->count++];
    *f = (struct process_figure){.from = from,
                                 .to = to,
                                 .name = line->name,
                                 .at = line->at,
                                 .parameter = line->parameter,
                                 .unit = line->unit,
                                 .note = ""};
    return f;
}

static void add_day(struct table *t, const struct line *line, day_t day)
{
    struct day_figure d;
    work_line(t, line, day, &d);
    if (d.absent)
        return;
    struct process_figure *f = figure_new(t, line, day, day);
    if (d.value == NULL) {
        f->note = d.note;
        return;
    }
    f->value = fraction_add(t->results, d.value, t->s.zero);
    f->count = 1;
    f->note = value_note(t, line, &d);
}

/* ---- weeks, months, years ---- */

static day_t year_last(day_t day)
{
    int year;
    int month;
    int date;
    day_t last = day;
    day_split(day, &year, &month, &date);
    bool there = day_from(year, 12, 31, &last);
    assert(there);
    (void)there;
    return last;
}

/* The last day of the step that holds `day`. Weeks start by the plant's rule. */
static day_t step_last(const struct table *t, day_t day)
{
    int into;
    switch (t->options->step) {
    case STEP_WEEK:
        into = ((int)day_weekday(day) - t->s.plant->rules.word[RULE_WEEK_STARTS] + 7) % 7;
        return day + 6 - into;
    case STEP_MONTH:
        return month_last(day);
    case STEP_YEAR:
        return year_last(day);
    default:
        return day;
    }
}

static void gather(struct table *t, const struct line *line, day_t day, struct gathered *g)
{
    struct day_figure d;
    work_line(t, line, day, &d);
    if (d.absent)
        return;
    g->present++;
    if (d.value == NULL) {
        if (g->first_missing == NULL)
            g->first_missing = d.note;
        return;
    }
    const struct fraction *x = fraction_add(t->gathering, d.value, t->s.zero);
    g->sum = g->count == 0 ? x : fraction_add(t->gathering, g->sum, x);
    if (g->count == 0 || fraction_compare(x, g->least) < 0)
        g->least = x;
    if (g->count == 0 || fraction_compare(x, g->most) > 0)
        g->most = x;
    g->count++;
    g->less = g->less || d.less;
    g->greater = g->greater || d.greater;
}

static const char *step_note(struct table *t, const struct line *line, const struct gathered *g)
{
    struct text note;
    text_init(&note, 512);
    add_note(&note, line->note);
    if (g->count < g->present)
        text_print(&note, "%s%ld of %ld days; %s", note.length ? "; " : "", g->count, g->present,
                   g->first_missing);
    if (g->less)
        add_note(&note, "with a less-than");
    if (g->greater)
        add_note(&note, "with a greater-than");
    const char *s = kept(t, note.at);
    text_free(&note);
    return s;
}

static void add_gathered(struct table *t, const struct line *line, day_t from, day_t to,
                         const struct gathered *g)
{
    struct process_figure *f = figure_new(t, line, from, to);
    f->count = g->count;
    f->note = step_note(t, line, g);
    if (g->count == 0)
        return;
    f->value = fraction_divide(t->results, g->sum, fraction_from_int(t->gathering, g->count));
    f->least = fraction_add(t->results, g->least, t->s.zero);
    f->most = fraction_add(t->results, g->most, t->s.zero);
}

static void work_day(struct table *t, day_t day)
{
    for (size_t i = 0; i < t->lines.count; i++)
        add_day(t, &t->lines.line[i], day);
    supplies_tidy(&t->s);
}

static void work_step(struct table *t, day_t from, day_t to)
{
    t->gathering = arena_new();
    memset(t->gathered, 0, t->lines.count * sizeof *t->gathered);
    for (day_t day = from; day <= to; day++) {
        for (size_t i = 0; i < t->lines.count; i++)
            gather(t, &t->lines.line[i], day, &t->gathered[i]);
        supplies_tidy(&t->s);
    }
    for (size_t i = 0; i < t->lines.count; i++)
        if (t->gathered[i].present > 0)
            add_gathered(t, &t->lines.line[i], from, to, &t->gathered[i]);
    arena_free(t->gathering);
}

/* ---- all of it ---- */

static int by_order(const void *one, const void *other)
{
    const struct line *a = one;
    const struct line *b = other;
    return (a->order > b->order) - (a->order < b->order);
}

/* In the catalogue's order; lines of one formula stay as they were found. */
static void sort_lines(struct lines *lines)
{
    size_t kept_lines = 0;
    for (size_t i = 0; i < lines->count; i++)
        if (lines->line[i].ready != NULL)
            lines->line[kept_lines++] = lines->line[i];
    lines->count = kept_lines;
    for (size_t i = 0; i < lines->count; i++)
        lines->line[i].order = lines->line[i].order * (lines->count + 1) + i;
    if (lines->count > 1)
        qsort(lines->line, lines->count, sizeof *lines->line, by_order);
}

static size_t step_count(const struct table *t)
{
    size_t steps = 0;
    for (day_t day = t->options->from; day <= t->options->to; day = step_last(t, day) + 1)
        steps++;
    return steps;
}

static void hand_over(struct table *t)
{
    t->sink(t->context, t->figures, t->count);
    t->count = 0;
    arena_free(t->results);
    t->results = arena_new();
}

/* Room for every line in every step that is kept is taken at once: growing would leave copies
 * behind. */
static void work_all(struct table *t)
{
    const struct process_options *o = t->options;
    size_t lines = t->lines.count;
    size_t kept_steps = t->sink ? 1 : step_count(t);
    t->figures = arena_alloc(t->s.arena, kept_steps * lines * sizeof *t->figures);
    t->gathered = arena_alloc(t->s.arena, lines * sizeof *t->gathered);
    for (day_t from = o->from, to; from <= o->to; from = to + 1) {
        to = step_last(t, from);
        if (to > o->to)
            to = o->to;
        if (o->step == STEP_DAY)
            work_day(t, from);
        else
            work_step(t, from, to);
        if (t->sink)
            hand_over(t);
    }
}

/* `a` holds what lasts as long as the table is worked. */
static enum status work_table(struct table *t, struct arena *a, const struct frame *frame,
                              struct fault *f)
{
    const struct process_options *o = t->options;
    assert(o->from <= o->to);
    if (o->smooth < 1)
        return fault_usage(f, "give at least 1 day", "cannot take a mean over %d days", o->smooth);
    if (process_check(frame_plant(frame), f) != OK)
        return FAULT;
    t->s = (struct supplies){.arena = a,
                             .passing = arena_new(),
                             .frame = frame,
                             .zero = fraction_from_int(a, 0),
                             .plant = frame_plant(frame),
                             .first = o->from - (o->smooth - 1),
                             .last = o->to,
                             .smooth = o->smooth,
                             .in_turn = o->smooth == 1};
    lines_find(&t->s, &t->lines);
    lines_own(&t->s, &t->lines);
    sort_lines(&t->lines);
    work_all(t);
    arena_free(t->s.passing);
    return OK;
}

enum status process_table(struct arena *a, const struct frame *frame,
                          const struct process_options *o, struct process_figure **out,
                          size_t *count, struct fault *f)
{
    struct table t = {.options = o, .results = a};
    enum status rc = work_table(&t, a, frame, f);
    *out = t.figures;
    *count = t.count;
    return rc;
}

enum status process_each(const struct frame *frame, const struct process_options *o,
                         process_sink *sink, void *context, struct fault *f)
{
    struct arena *a = arena_new();
    struct table t = {.options = o, .results = arena_new(), .sink = sink, .context = context};
    enum status rc = work_table(&t, a, frame, f);
    arena_free(t.results);
    arena_free(a);
    return rc;
}
