/* process: the process table: loads, SVI, F:M, SRT and the rest, by day or longer. */
#include "command/chart.h"
#include "command/figures.h"
#include "command/session.h"

#include "base/poison.h"

struct process_given {
    day_t from, to;
    int by, over, as;
    long smooth;
    bool chart;
};

static const struct option_spec options[] = {
    {"from", OPTION_DAY, offsetof(struct process_given, from), "DATE", "first day", true},
    {"to", OPTION_DAY, offsetof(struct process_given, to), "DATE", "last day", true},
    {"step", OPTION_ONE_OF, offsetof(struct process_given, by), "day|week|month|year",
     "a row for each of these (default: day)", false},
    {"smooth", OPTION_COUNT, offsetof(struct process_given, smooth), "DAYS",
     "days of the moving average behind the solids retention times (default 1)", false},
    {"over", OPTION_ONE_OF, offsetof(struct process_given, over), "weekday|month",
     "gather all days by weekday or by month of the year, with percentiles", false},
    {"chart", OPTION_FLAG, offsetof(struct process_given, chart), NULL,
     "draw each figure over time as a small chart in plain text", false},
    AS_OPTION(struct process_given),
};

static const struct example examples[] = {
    {"weirbook process --from 2025-03-14 --to 2025-03-14", "every figure of one day"},
    {"weirbook process --from 2025-01-01 --to 2025-12-31 --step month",
     "means, lowest and highest by month"},
    {"weirbook process --from 2025-03-01 --to 2025-03-31 --smooth 7 --as csv",
     "daily figures as CSV, retention times smoothed over a week"},
    {"weirbook process --from 2025-01-01 --to 2025-12-31 --over weekday",
     "count, mean, lowest, highest and percentiles of each weekday"},
    {"weirbook process --from 2025-01-01 --to 2025-12-31 --chart",
     "each figure of the year as a small chart"},
};

static const struct column day_columns[] = {
    {"date", "date", ALIGN_LEFT, false, 0},    {"name", "figure", ALIGN_LEFT, false, 0},
    {"at", "at", ALIGN_LEFT, false, 0},        {"parameter", "of", ALIGN_LEFT, false, 0},
    {"value", "value", ALIGN_POINT, false, 0}, {"unit", "unit", ALIGN_LEFT, false, 0},
    {"note", "note", ALIGN_LEFT, true, 0},
};

static const struct column step_columns[] = {
    {"from", "from", ALIGN_LEFT, false, 0},    {"to", "to", ALIGN_LEFT, false, 0},
    {"name", "figure", ALIGN_LEFT, false, 0},  {"at", "at", ALIGN_LEFT, false, 0},
    {"parameter", "of", ALIGN_LEFT, false, 0}, {"count", "days", ALIGN_RIGHT, false, 0},
    {"mean", "mean", ALIGN_POINT, false, 0},   {"min", "lowest", ALIGN_POINT, false, 0},
    {"max", "highest", ALIGN_POINT, false, 0}, {"unit", "unit", ALIGN_LEFT, false, 0},
};

/* In a file the columns of a longer step come first, so that one reader takes both. */
static const struct column over_columns[] = {
    {"from", "from", ALIGN_LEFT, false, 0},    {"to", "to", ALIGN_LEFT, false, 0},
    {"name", "figure", ALIGN_LEFT, false, 0},  {"at", "at", ALIGN_LEFT, false, 0},
    {"parameter", "of", ALIGN_LEFT, false, 0}, {"count", "days", ALIGN_RIGHT, false, 0},
    {"mean", "mean", ALIGN_POINT, false, 0},   {"min", "lowest", ALIGN_POINT, false, 0},
    {"max", "highest", ALIGN_POINT, false, 0}, {"unit", "unit", ALIGN_LEFT, false, 0},
    {"over", "over", ALIGN_LEFT, false, 0},    {"p10", "10 %", ALIGN_POINT, false, 0},
    {"p50", "50 %", ALIGN_POINT, false, 0},    {"p90", "90 %", ALIGN_POINT, false, 0},
};

/* On a page each figure has a table of its own. */
static const struct column over_page_columns[] = {
    {NULL, "over", ALIGN_LEFT, false, 0},  {NULL, "days", ALIGN_RIGHT, false, 0},
    {NULL, "mean", ALIGN_POINT, false, 0}, {NULL, "lowest", ALIGN_POINT, false, 0},
    {NULL, "10 %", ALIGN_POINT, false, 0}, {NULL, "50 %", ALIGN_POINT, false, 0},
    {NULL, "90 %", ALIGN_POINT, false, 0}, {NULL, "highest", ALIGN_POINT, false, 0},
};

static const char *group_word(enum process_group by, int group)
{
    static const char *const days[] = {"Sun", "Mon", "Tue", "Wed", "Thu", "Fri", "Sat"};
    static const char *const months[] = {"Jan", "Feb", "Mar", "Apr", "May", "Jun",
                                         "Jul", "Aug", "Sep", "Oct", "Nov", "Dec"};
    return by == GROUP_WEEKDAY ? days[group] : months[group - 1];
}

static void add_day(struct arena *a, struct table *t, const struct process_figure *g, int figures)
{
    struct cell *c = table_row(t);
    c[0] = cell_day(a, g->from);
    c[1] = cell_text(g->name);
    c[2] = cell_text(g->at);
    c[3] = cell_text(g->parameter);
    c[4] = cell_number(figure_print(a, g->value, figures));
    c[5] = cell_text(g->unit);
    c[6] = cell_text(g->note);
}

static void add_step(struct arena *a, struct table *t, const struct process_figure *g, int figures)
{
    struct cell *c = table_row(t);
    c[0] = cell_day(a, g->from);
    c[1] = cell_day(a, g->to);
    c[2] = cell_text(g->name);
    c[3] = cell_text(g->at);
    c[4] = cell_text(g->parameter);
    c[5] = cell_count(a, g->count);
    c[6] = cell_number(figure_print(a, g->value, figures));
    c[7] = cell_number(figure_print(a, g->least, figures));
    c[8] = cell_number(figure_print(a, g->most, figures));
    c[9] = cell_text(g->unit);
}

static void add_over(struct arena *a, struct table *t, const struct process_summary *g,
                     const struct process_given *o)
{
    struct cell *c = table_row(t);
    c[0] = cell_day(a, o->from);
    c[1] = cell_day(a, o->to);
    c[2] = cell_text(g->figure->name);
    c[3] = cell_text(g->figure->at);
    c[4] = cell_text(g->figure->parameter);
    c[5] = cell_count(a, g->count);
    c[6] = cell_number(figure_print(a, g->mean, FIGURES_FILE));
    c[7] = cell_number(figure_print(a, g->least, FIGURES_FILE));
    c[8] = cell_number(figure_print(a, g->most, FIGURES_FILE));
    c[9] = cell_text(g->figure->unit);
    c[10] = cell_text(group_word((enum process_group)o->over, g->group));
    for (size_t i = 0; i < PROCESS_PERCENTILES; i++)
        c[11 + i] = cell_number(figure_print(a, g->percentile[i], FIGURES_FILE));
}

static void add_over_page(struct arena *a, struct table *t, const struct process_summary *g,
                          const struct process_given *o)
{
    struct cell *c = table_row(t);
    c[0] = cell_text(group_word((enum process_group)o->over, g->group));
    c[1] = cell_count(a, g->count);
    c[2] = cell_number(figure_print(a, g->mean, FIGURES_TEXT));
    c[3] = cell_number(figure_print(a, g->least, FIGURES_TEXT));
    for (size_t i = 0; i < PROCESS_PERCENTILES; i++)
        c[4 + i] = cell_number(figure_print(a, g->percentile[i], FIGURES_TEXT));
    c[7] = cell_number(figure_print(a, g->most, FIGURES_TEXT));
}

static bool same_figure(const struct process_figure *x, const struct process_figure *y)
{
    return text_equal(x->name, y->name) && text_equal(x->at, y->at) &&
           text_equal(x->parameter, y->parameter);
}

static void show_over(struct session *s, struct page *page, const struct process_summary *sum,
                      size_t sums, const struct process_given *o)
{
    for (size_t i = 0; i < sums;) {
        const struct process_figure *g = sum[i].figure;
        const char *unit = text_equal(g->unit, "1") ? "no unit" : g->unit;
        const char *title = arena_print(s->arena, "%s at %s%s%s, %s", g->name, g->at,
                                        *g->parameter ? " of " : "", g->parameter, unit);
        struct table *t = table_new(s->arena, title, over_page_columns, NELEM(over_page_columns));
        for (; i < sums && same_figure(sum[i].figure, g); i++)
            add_over_page(s->arena, t, &sum[i], o);
        page_space(page);
        page_table(page, t);
    }
}

/* Only the columns that the table can use are read from the book. */
static enum status read_frame(struct session *s, const struct plant *plant,
                              const struct process_options *how, struct frame **frame,
                              struct fault *f)
{
    struct frame_span *span = NULL;
    size_t count = 0;
    day_t first = process_reach(how);
    if (book_spans(s->book, s->arena, plant, first, how->to, &span, &count, f) != OK)
        return FAULT;
    struct frame_span *read = arena_alloc(s->arena, (count + 1) * sizeof *read);
    size_t reads = process_reads(plant, span, count, read);
    return session_frame(s, plant, read, reads, first, how->to, frame, f);
}

static enum status look_at(const struct process_given *o, struct fault *f)
{
    if (o->from > o->to)
        return fault_usage(f, "put the earlier date in --from", "--from is after --to");
    if (o->over >= 0 && o->by > STEP_DAY)
        return fault_usage(f, "leave out one of them", "--over gathers days, not a longer --step");
    if (o->chart && o->over >= 0)
        return fault_usage(f, "leave out one of them", "--chart draws time, which --over gathers");
    if (o->chart && (o->as == AS_CSV || o->as == AS_JSON))
        return fault_usage(f, "leave out one of them", "--chart draws text, not csv or json");
    return OK;
}

static struct page *new_page(struct session *s, const struct plant *plant, size_t count)
{
    struct page *page = page_new(s->arena);
    page_heading(page, plant->name);
    if (count == 0)
        page_line(page, FLAG_WATCH,
                  "no figures: nothing of what they are made of was measured in these days");
    return page;
}

static void print_over(struct session *s, const struct plant *plant, const struct process_given *o,
                       const struct process_figure *figure, size_t count)
{
    struct process_summary *sum = NULL;
    size_t sums = 0;
    struct page *page = new_page(s, plant, count);
    struct table *table = table_new(s->arena, "", over_columns, NELEM(over_columns));
    process_summarize(s->arena, figure, count, (enum process_group)o->over,
                      plant->rules.word[RULE_PERCENTILE], &sum, &sums);
    for (size_t i = 0; i < sums; i++)
        add_over(s->arena, table, &sum[i], o);
    page_line(page, FLAG_NONE, "%s", rule_sentence(s->arena, &plant->rules, RULE_PERCENTILE));
    show_over(s, page, sum, sums, o);
    session_print(s, o->as, page, table);
}

static struct table *table_of(struct arena *a, const struct process_given *o,
                              const struct process_figure *figure, size_t count)
{
    bool daily = o->by <= STEP_DAY;
    int figures = o->as == AS_CSV || o->as == AS_JSON ? FIGURES_FILE : FIGURES_TEXT;
    struct table *table = daily ? table_new(a, "", day_columns, NELEM(day_columns))
                                : table_new(a, "", step_columns, NELEM(step_columns));
    for (size_t i = 0; i < count; i++)
        (daily ? add_day : add_step)(a, table, &figure[i], figures);
    return table;
}

static void print_table(struct session *s, const struct plant *plant, const struct process_given *o,
                        const struct process_figure *figure, size_t count)
{
    struct table *table = table_of(s->arena, o, figure, count);
    struct page *page = new_page(s, plant, count);
    if (count > 0)
        page_table(page, table);
    session_print(s, o->as, page, table);
}

/* A file of many years is written as it is worked: a page needs all rows for its widths, a file
 * does not. */
struct writing {
    FILE *out;
    const struct process_given *given;
    bool begun; /* the line of names stands: not before the first figures are worked */
};

static void begin_file(struct writing *w, struct arena *a)
{
    if (!w->begun)
        write_csv(w->out, table_of(a, w->given, NULL, 0));
    w->begun = true;
}

static void write_step(void *context, const struct process_figure *figures, size_t count)
{
    struct writing *w = context;
    struct arena *a = arena_new();
    begin_file(w, a);
    write_csv_rows(w->out, table_of(a, w->given, figures, count));
    arena_free(a);
}

static enum status write_file(struct session *s, const struct frame *frame,
                              const struct process_given *o, const struct process_options *how,
                              struct fault *f)
{
    struct writing w = {.out = s->out, .given = o};
    if (frame && process_each(frame, how, write_step, &w, f) != OK)
        return FAULT;
    begin_file(&w, s->arena);
    return OK;
}

/* A table of days ends where the book ends: a century asked for would be one of empty rows. *any is
 * false when the book holds none of the days. */
static enum status keep_to_book(struct session *s, struct process_options *how, bool *any,
                                struct fault *f)
{
    day_t first = DAY_NONE;
    day_t last = DAY_NONE;
    *any = true;
    if (how->step != STEP_DAY)
        return OK;
    if (book_extent(s->book, &first, &last, f) != OK)
        return FAULT;
    how->from = first > how->from ? first : how->from;
    how->to = last < how->to ? last : how->to;
    *any = first != DAY_NONE && how->from <= how->to;
    return OK;
}

static enum status run(struct session *s, const void *given, struct fault *f)
{
    const struct process_given *o = given;
    struct plant *plant = NULL;
    struct frame *frame = NULL;
    struct process_figure *figure = NULL;
    size_t count = 0;
    bool any = false;
    struct process_options how = {.from = o->from,
                                  .to = o->to,
                                  .step = o->by < 0 ? STEP_DAY : (enum process_step)o->by,
                                  .smooth = o->smooth ? (int)o->smooth : 1};
    if (look_at(o, f) != OK || session_book(s, BOOK_READ, NULL, &plant, f) != OK ||
        keep_to_book(s, &how, &any, f) != OK)
        return FAULT;
    if (any && read_frame(s, plant, &how, &frame, f) != OK)
        return FAULT;
    if (o->as == AS_CSV && o->over < 0)
        return write_file(s, frame, o, &how, f);
    if (any && process_table(s->arena, frame, &how, &figure, &count, f) != OK)
        return FAULT;
    if (o->over >= 0) {
        print_over(s, plant, o, figure, count);
    } else if (o->chart) {
        session_print(s, AS_TEXT, new_page(s, plant, count), NULL);
        charts_write(s->out, s->arena, figure, count, o->from, o->to);
    } else {
        print_table(s, plant, o, figure, count);
    }
    return OK;
}

const struct command command_process = {
    .name = "process",
    .summary = "the process table: loads, removals, SVI, F:M, SRT and more",
    .book = true,
    .option = options,
    .options = NELEM(options),
    .options_size = sizeof(struct process_given),
    .example = examples,
    .examples = NELEM(examples),
    .about = "Each figure is a formula of the catalogue: weirbook formula NAME shows its equation "
             "and source. A figure whose\n"
             "readings are not all there stays empty, and its note names the missing one. For a "
             "licensed operator to confirm.",
    .run = run,
};
