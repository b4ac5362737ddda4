/* process: the process table: loads, SVI, F:M, SRT and the rest, by day or longer. */
#include "command/figures.h"
#include "command/session.h"

#include "base/poison.h"

struct process_given {
    day_t from, to;
    int by, as;
    long smooth;
};

static const struct option_spec options[] = {
    {"from", OPTION_DAY, offsetof(struct process_given, from), "DATE", "first day", true},
    {"to", OPTION_DAY, offsetof(struct process_given, to), "DATE", "last day", true},
    {"step", OPTION_ONE_OF, offsetof(struct process_given, by), "day|week|month|year",
     "a row for each of these (default: day)", false},
    {"smooth", OPTION_COUNT, offsetof(struct process_given, smooth), "DAYS",
     "days of the moving average behind the solids retention times (default 1)", false},
    AS_OPTION(struct process_given),
};

static const struct example examples[] = {
    {"weirbook process --from 2025-03-14 --to 2025-03-14", "every figure of one day"},
    {"weirbook process --from 2025-01-01 --to 2025-12-31 --step month",
     "means, lowest and highest by month"},
    {"weirbook process --from 2025-03-01 --to 2025-03-31 --smooth 7 --as csv",
     "daily figures as CSV, retention times smoothed over a week"},
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

static enum status run(struct session *s, const void *given, struct fault *f)
{
    const struct process_given *o = given;
    struct plant *plant = NULL;
    struct frame *frame = NULL;
    struct process_figure *figure = NULL;
    size_t count = 0;
    if (o->from > o->to)
        return fault_usage(f, "put the earlier date in --from", "--from is after --to");
    const struct process_options how = {.from = o->from,
                                        .to = o->to,
                                        .step = o->by < 0 ? STEP_DAY : (enum process_step)o->by,
                                        .smooth = o->smooth ? (int)o->smooth : 1};
    if (session_book(s, BOOK_READ, NULL, &plant, f) != OK ||
        session_frame_all(s, plant, process_reach(&how), o->to, &frame, f) != OK ||
        process_table(s->arena, frame, &how, &figure, &count, f) != OK)
        return FAULT;
    bool daily = how.step == STEP_DAY;
    int figures = o->as == AS_CSV || o->as == AS_JSON ? FIGURES_FILE : FIGURES_TEXT;
    struct table *table = daily ? table_new(s->arena, "", day_columns, NELEM(day_columns))
                                : table_new(s->arena, "", step_columns, NELEM(step_columns));
    for (size_t i = 0; i < count; i++)
        (daily ? add_day : add_step)(s->arena, table, &figure[i], figures);
    struct page *page = page_new(s->arena);
    page_heading(page, plant->name);
    if (count == 0)
        page_line(page, FLAG_WATCH,
                  "no figures: nothing of what they are made of was measured in these days");
    page_table(page, table);
    session_print(s, o->as, page, table);
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
