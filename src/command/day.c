/* day: one day: its readings, its daily values, and every figure worked from them. */
#include "command/figures.h"
#include "command/session.h"

#include <string.h>

#include "base/poison.h"

struct day_options {
    int as;
    long smooth;
};

static const struct option_spec options[] = {
    {"smooth", OPTION_COUNT, offsetof(struct day_options, smooth), "DAYS",
     "days of the moving average behind the solids retention times (default 1)", false},
    AS_OPTION(struct day_options),
};

static const struct example examples[] = {
    {"weirbook day 2025-03-14", "the readings of that day and the figures worked from them"},
    {"weirbook day 2025-03-14 --as csv", "the same as CSV"},
};

static const struct column file_columns[] = {
    {"point", "at", ALIGN_LEFT, false, 0},     {"parameter", "what", ALIGN_LEFT, false, 0},
    {"value", "value", ALIGN_POINT, false, 0}, {"unit", "unit", ALIGN_LEFT, false, 0},
    {"kind", NULL, ALIGN_LEFT, false, 0},      {"note", "note", ALIGN_LEFT, true, 0},
};

enum { FILE_POINT, FILE_PARAMETER, FILE_VALUE, FILE_UNIT, FILE_KIND, FILE_NOTE };

/* The page shows three tables of these columns, the file one with a kind in each row. */
static const struct column page_columns[] = {
    {NULL, "at", ALIGN_LEFT, false, 0},     {NULL, "what", ALIGN_LEFT, false, 0},
    {NULL, "value", ALIGN_POINT, false, 0}, {NULL, "unit", ALIGN_LEFT, false, 0},
    {NULL, "note", ALIGN_LEFT, true, 0},
};

struct making {
    struct arena *arena;
    const struct plant *plant;
    struct table *file, *readings, *daily, *figures;
};

static void add(struct making *m, struct table *shown, const char *kind, const char *at,
                const char *what, struct cell on_page, struct cell in_file, const char *unit,
                const char *note)
{
    struct cell *page = table_row(shown);
    page[0] = cell_text(at);
    page[1] = cell_text(what);
    page[2] = on_page;
    page[3] = cell_text(unit);
    page[4] = cell_flagged(cell_text(note), strstr(note, "CHECK FAILED") ? FLAG_BAD : FLAG_NONE);
    struct cell *file = table_row(m->file);
    file[FILE_POINT] = cell_text(at);
    file[FILE_PARAMETER] = cell_text(what);
    file[FILE_VALUE] = in_file;
    file[FILE_UNIT] = cell_text(unit);
    file[FILE_KIND] = cell_text(kind);
    file[FILE_NOTE] = cell_text(note);
}

/* Where a reading came from, and what is known of it, in one line. */
static const char *reading_note(struct arena *a, const struct reading *r)
{
    char time[6];
    minute_write(r->minute, time);
    struct text t;
    text_init(&t, 4096);
    text_print(&t, "%s%s%s%s", time, *time ? " " : "", r->sample, *r->sample ? " " : "");
    if (r->version > 0)
        text_print(&t, "revision %d, ", r->version);
    text_print(&t, "%s:%ld", r->file, r->line);
    if (r->detail && *r->detail->note)
        text_print(&t, "; %s", r->detail->note);
    const char *note = arena_text(a, t.at);
    text_free(&t);
    return note;
}

static struct cell reading_cell(const struct reading *r)
{
    return r->qualifier == QUALIFIER_PLAIN ? cell_number(r->text) : cell_text(r->text);
}

static void add_readings(struct making *m, const struct frame *frame, day_t day, int point,
                         int parameter)
{
    size_t count = 0;
    const struct reading *const *all = frame_readings(frame, point, parameter, day, &count);
    for (size_t i = 0; i < count; i++)
        add(m, m->readings, "reading", m->plant->points[point].id,
            m->plant->parameters[parameter].id, reading_cell(all[i]), reading_cell(all[i]),
            unit_at(all[i]->unit)->name, reading_note(m->arena, all[i]));
}

static void add_daily(struct making *m, const struct frame *frame, day_t day, int point,
                      int parameter)
{
    const struct parameter *p = &m->plant->parameters[parameter];
    struct day_value value;
    frame_day(frame, point, parameter, day, &p->rules, NULL, &value);
    if (value.state == DAY_EMPTY)
        return;
    const char *text =
        permit_day_text(m->arena, frame, point, parameter, day, &p->rules, p->decimals);
    struct cell cell = strpbrk(text, "<>") ? cell_text(text) : cell_number(text);
    const char *note =
        value.why ? value.why
                  : arena_print(m->arena, "%s of %zu reading%s", day_rule_words[p->day_rule],
                                value.readings, value.readings == 1 ? "" : "s");
    add(m, m->daily, "daily", m->plant->points[point].id, p->id, cell, cell, p->unit->name, note);
}

static enum status add_figures(struct making *m, const struct frame *frame, day_t day, int smooth,
                               struct fault *f)
{
    const struct process_options o = {.from = day, .to = day, .step = STEP_DAY, .smooth = smooth};
    struct process_figure *figure = NULL;
    size_t count = 0;
    if (process_table(m->arena, frame, &o, &figure, &count, f) != OK)
        return FAULT;
    for (size_t i = 0; i < count; i++) {
        const struct process_figure *g = &figure[i];
        const char *what =
            *g->parameter ? arena_print(m->arena, "%s %s", g->name, g->parameter) : g->name;
        add(m, m->figures, "figure", g->at, what,
            cell_number(figure_print(m->arena, g->value, FIGURES_TEXT)),
            cell_number(figure_print(m->arena, g->value, FIGURES_FILE)), g->unit, g->note);
    }
    return OK;
}

static struct page *make_page(struct making *m, day_t day)
{
    static const char *const names[] = {"Sunday",   "Monday", "Tuesday", "Wednesday",
                                        "Thursday", "Friday", "Saturday"};
    char date[11];
    day_write(day, date);
    struct page *page = page_new(m->arena);
    page_heading(page,
                 arena_print(m->arena, "%s, %s %s", m->plant->name, names[day_weekday(day)], date));
    if (m->readings->rows == 0)
        page_line(page, FLAG_WATCH, "no readings on this day");
    struct table *const shown[] = {m->readings, m->daily, m->figures};
    for (size_t i = 0; i < NELEM(shown); i++) {
        if (shown[i]->rows == 0)
            continue;
        page_space(page);
        page_table(page, shown[i]);
    }
    return page;
}

static enum status run(struct session *s, const void *given, struct fault *f)
{
    const struct day_options *o = given;
    struct plant *plant = NULL;
    struct frame *frame = NULL;
    day_t day;
    if (!day_parse(s->operand[0], &day))
        return fault_usage(f, "write it as YYYY-MM-DD", "cannot read '%s' as a date",
                           s->operand[0]);
    int smooth = o->smooth ? (int)o->smooth : 1;
    const struct process_options reach = {
        .from = day, .to = day, .step = STEP_DAY, .smooth = smooth};
    if (session_book(s, BOOK_READ, NULL, &plant, f) != OK ||
        session_frame_all(s, plant, process_reach(&reach), day, &frame, f) != OK)
        return FAULT;
    struct making m = {
        .arena = s->arena,
        .plant = plant,
        .file = table_new(s->arena, "", file_columns, NELEM(file_columns)),
        .readings = table_new(s->arena, "Readings", page_columns, NELEM(page_columns)),
        .daily = table_new(s->arena, "Daily values", page_columns, NELEM(page_columns)),
        .figures = table_new(s->arena, "Figures", page_columns, NELEM(page_columns)),
    };
    for (int point = 0; point < (int)plant->point_count; point++)
        for (int parameter = 0; parameter < (int)plant->parameter_count; parameter++)
            add_readings(&m, frame, day, point, parameter);
    for (int point = 0; point < (int)plant->point_count; point++)
        for (int parameter = 0; parameter < (int)plant->parameter_count; parameter++)
            if (frame_has(frame, point, parameter))
                add_daily(&m, frame, day, point, parameter);
    if (add_figures(&m, frame, day, smooth, f) != OK)
        return FAULT;
    session_print(s, o->as, make_page(&m, day), m.file);
    return OK;
}

const struct command command_day = {
    .name = "day",
    .summary = "one day: readings and every figure worked from them",
    .operands = "DATE",
    .least = 1,
    .most = 1,
    .operand = OPERAND_DAY,
    .book = true,
    .option = options,
    .options = NELEM(options),
    .options_size = sizeof(struct day_options),
    .example = examples,
    .examples = NELEM(examples),
    .about = "A figure whose readings are not all there stays empty, and its note names the "
             "missing one.",
    .run = run,
};
