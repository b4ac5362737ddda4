/* A blank sheet for paper, and the list of sheets. Both are read off the table of sheets, so that
 * paper and screen ask for the same. */
#include "command/bench.h"

#include <stdlib.h>
#include <string.h>

#include "base/poison.h"

enum {
    PAGE_WIDE = 100,
    TEXT_MOST = 4096,
    CELL_LEAST = 10,
    RUNS_ON_PAPER = 6,
    SHARED_ON_PAPER = 2,
    LOOK_BACK = 14
};

/* ---- the round's stops ---- */

const char *sheets_limits(struct arena *a, const struct parameter *p)
{
    char low[24] = "", high[24] = "";
    if (p->low.set)
        decimal_write(p->low.value, low);
    if (p->high.set)
        decimal_write(p->high.value, high);
    if (*low && *high)
        return arena_print(a, "%s to %s %s", low, high, p->unit->name);
    if (!*low && !*high)
        return "";
    return arena_print(a, "%s %s %s", *low ? "at least" : "at most", *low ? low : high,
                       p->unit->name);
}

static int by_place(const void *one, const void *other)
{
    const struct frame_span *p = one, *q = other;
    if (p->point != q->point)
        return p->point < q->point ? -1 : 1;
    return p->parameter < q->parameter ? -1 : p->parameter > q->parameter;
}

/* Without round.csv: what was read in the two weeks before. */
static enum status stops_of_habit(const struct bench *b, day_t day, struct round_stop **out,
                                  size_t *count, struct fault *f)
{
    struct arena *a = b->session->arena;
    struct frame_span *span = NULL;
    if (book_spans(b->session->book, a, b->plant, day - LOOK_BACK, day - 1, &span, count, f) != OK)
        return FAULT;
    if (*count > 0)
        qsort(span, *count, sizeof *span, by_place);
    *out = arena_alloc(a, (*count + 1) * sizeof **out);
    for (size_t i = 0; i < *count; i++)
        (*out)[i] = (struct round_stop){
            .point = span[i].point, .parameter = span[i].parameter, .sample = ""};
    return OK;
}

enum status sheets_stops(const struct bench *b, day_t day, struct bench_stop **out, size_t *count,
                         struct fault *f)
{
    struct arena *a = b->session->arena;
    struct round_stop *stop = b->plant->round;
    *count = b->plant->round_count;
    if (*count == 0 && stops_of_habit(b, day, &stop, count, f) != OK)
        return FAULT;
    *out = arena_alloc(a, (*count + 1) * sizeof **out);
    for (size_t i = 0; i < *count; i++) {
        struct bench_stop *s = &(*out)[i];
        s->stop = stop[i];
        if (book_last(b->session->book, a, b->plant, stop[i].point, stop[i].parameter,
                      stop[i].sample, day, &s->has_last, &s->last, f) != OK)
            return FAULT;
    }
    return OK;
}

/* ---- the blank sheet ---- */

static const char *line_for(struct arena *a, const char *what, int width)
{
    struct text t;
    text_init(&t, TEXT_MOST);
    text_print(&t, "%s ", what);
    while (text_width(t.at) < width)
        text_add_char(&t, '_');
    const char *line = arena_text(a, t.at);
    text_free(&t);
    return line;
}

static void head(const struct bench *b, struct page *page, const char *title, bool pointless)
{
    struct arena *a = b->session->arena;
    page_heading(page, title);
    page_line(page, FLAG_NONE, "%s", b->plant->name);
    page_space(page);
    page_line(page, FLAG_NONE, "%s  %s  %s", line_for(a, "Date sampled", 32),
              line_for(a, "Time", 20), pointless ? "" : line_for(a, "Point", 30));
    page_line(page, FLAG_NONE, "%s  %s  %s", line_for(a, "Date worked", 32),
              line_for(a, "Initials", 20), line_for(a, "Checked by", 30));
    page_space(page);
}

/* The runs of a grid: "1" to "6" (or every five minutes), then two of each other kind. */
static size_t grid_runs(struct arena *a, const struct bench_sheet *sheet, const char ***out)
{
    size_t count = 0;
    *out = arena_alloc(a, (RUNS_ON_PAPER + BENCH_RUNS * SHARED_ON_PAPER) * sizeof **out);
    for (int kind = 0; kind < BENCH_RUNS; kind++) {
        if ((sheet->runs & 1u << kind) == 0)
            continue;
        int most = kind == BENCH_SAMPLE ? RUNS_ON_PAPER : SHARED_ON_PAPER;
        int step = text_equal(sheet->run_name, "minutes") ? 5 : 1;
        for (int n = 1; n <= most; n++)
            (*out)[count++] = kind == BENCH_SAMPLE ? arena_print(a, "%d", n * step)
                              : n == 1             ? bench_run_words[kind]
                                       : arena_print(a, "%s-%d", bench_run_words[kind], n);
    }
    return count;
}

static bool asked_of(const struct bench_argument *g, const char *run)
{
    return (g->runs & 1u << bench_run_of(run)) != 0;
}

/* A run a row, an argument a column: boxes as wide as the paper allows. */
static void grid(const struct bench *b, struct page *page, const struct bench_sheet *sheet)
{
    struct arena *a = b->session->arena;
    const char **run = NULL;
    size_t runs = grid_runs(a, sheet, &run), columns = 1;
    const struct bench_argument *of[BENCH_ARGUMENTS_MOST + 1] = {NULL};
    struct column *column = arena_alloc(a, (BENCH_ARGUMENTS_MOST + 1) * sizeof *column);
    column[0] = (struct column){NULL, sheet->run_name, ALIGN_LEFT, false, 0};
    for (size_t i = 0; i < sheet->arguments; i++) {
        const struct bench_argument *g = &sheet->argument[i];
        if (g->once)
            continue;
        const char *unit = sheets_unit(g);
        of[columns] = g;
        column[columns++] = (struct column){
            NULL, arena_print(a, "%s%s%s", g->name, *unit ? ", " : "", unit), ALIGN_LEFT, false, 0};
    }
    int room = columns > 1 ? (PAGE_WIDE - 12) / (int)(columns - 1) - 2 : CELL_LEAST;
    const char *box = line_for(a, "", room < CELL_LEAST ? CELL_LEAST : room > 18 ? 18 : room);
    struct table *t = table_new(a, "", column, columns);
    for (size_t r = 0; r < runs; r++) {
        struct cell *cell = table_row(t);
        cell[0] = cell_text(run[r]);
        for (size_t c = 1; c < columns; c++)
            cell[c] = cell_text(asked_of(of[c], run[r]) ? box + 1 : "--");
        if (r + 1 == runs)
            break;
        cell = table_row(t);
        for (size_t c = 0; c < columns; c++)
            cell[c] = cell_text("");
    }
    page_table(page, t);
}

static void foot(const struct bench *b, struct page *page, const struct bench_sheet *sheet)
{
    struct arena *a = b->session->arena;
    page_space(page);
    for (size_t i = 0; i < sheet->arguments; i++) {
        const struct bench_argument *g = &sheet->argument[i];
        const char *bounds = sheets_bounds(a, g);
        if (!g->text)
            page_line(page, FLAG_NONE, "- %s: %s%s%s%s%s%s", g->name, g->asked, *bounds ? "; " : "",
                      bounds, g->fallback ? "; when blank: " : "", g->fallback ? g->fallback : "",
                      g->optional ? "; may be blank" : "");
    }
    if (sheet->beware)
        page_line(page, FLAG_NONE, "- Mind: %s", sheet->beware);
    page_line(page, FLAG_NONE, "Gives %s. Source: %s.", sheet->gives, sheet->source);
}

static void once_lines(const struct bench *b, struct page *page, const struct bench_sheet *sheet)
{
    struct arena *a = b->session->arena;
    for (size_t i = 0; i < sheet->arguments; i++) {
        const struct bench_argument *g = &sheet->argument[i];
        if (!g->once || text_equal(g->name, "analyst"))
            continue;
        const char *unit = sheets_unit(g);
        page_line(page, FLAG_NONE, "%s",
                  line_for(a,
                           arena_print(a, "%s: %s%s%s", g->name, g->asked, *unit ? ", " : "", unit),
                           PAGE_WIDE - 12));
    }
    page_space(page);
}

static enum status blank_round(const struct bench *b, struct page *page, struct fault *f)
{
    static const struct column columns[] = {
        {NULL, "at", ALIGN_LEFT, false, 0},         {NULL, "what", ALIGN_LEFT, false, 0},
        {NULL, "reading", ALIGN_LEFT, false, 0},    {NULL, "unit", ALIGN_LEFT, false, 0},
        {NULL, "last value", ALIGN_LEFT, false, 0}, {NULL, "bounds", ALIGN_LEFT, false, 0},
    };
    struct arena *a = b->session->arena;
    struct bench_stop *stop = NULL;
    size_t count = 0;
    day_t day = b->options->date == DAY_NONE ? clock_today() : b->options->date;
    if (sheets_stops(b, day, &stop, &count, f) != OK)
        return FAULT;
    head(b, page, "The shift round", true);
    struct table *t = table_new(a, "", columns, NELEM(columns));
    for (size_t i = 0; i < count; i++) {
        const struct parameter *p = &b->plant->parameters[stop[i].stop.parameter];
        struct cell *cell = table_row(t);
        char date[11] = "";
        if (stop[i].has_last)
            day_write(stop[i].last.day, date);
        cell[0] = cell_text(b->plant->points[stop[i].stop.point].id);
        cell[1] = cell_text(
            arena_print(a, "%s%s%s", p->id, *stop[i].stop.sample ? " " : "", stop[i].stop.sample));
        cell[2] = cell_text("______________");
        cell[3] = cell_text(p->unit->name);
        cell[4] = cell_text(stop[i].has_last ? arena_print(a, "%s on %s", stop[i].last.text, date)
                                             : "none yet");
        cell[5] = cell_text(sheets_limits(a, p));
    }
    page_table(page, t);
    page_space(page);
    page_line(page, FLAG_NONE, "%s", line_for(a, "Remarks", PAGE_WIDE - 12));
    return OK;
}

enum status sheets_blank(const struct bench *b, struct fault *f)
{
    struct page *page = page_new(b->session->arena);
    const struct bench_sheet *sheet = b->its;
    if (!sheet) {
        if (blank_round(b, page, f) != OK)
            return FAULT;
    } else {
        head(b, page, sheet->title, sheet->pointless);
        once_lines(b, page, sheet);
        grid(b, page, sheet);
        foot(b, page, sheet);
    }
    session_print(b->session, AS_TEXT, page, NULL);
    return OK;
}

/* ---- the list ---- */

static void list_one(struct page *page, const struct bench_sheet *sheet)
{
    page_space(page);
    page_line(page, FLAG_WATCH, "%s: %s", sheet->name, sheet->title);
    page_line(page, FLAG_NONE, "    gives %s", sheet->gives);
    page_line(page, FLAG_NONE, "    source: %s", sheet->source);
    for (size_t i = 0; i < sheet->arguments; i++) {
        const struct bench_argument *g = &sheet->argument[i];
        const char *unit = sheets_unit(g);
        page_line(page, FLAG_NONE, "    %s: %s%s%s%s", g->name, g->asked, *unit ? ", " : "", unit,
                  g->optional || g->fallback ? " (may be left out)" : "");
    }
}

static const struct column columns[] = {
    {NULL, "sheet", ALIGN_LEFT, false, 0},
    {NULL, "gives", ALIGN_LEFT, true, 0},
    {NULL, "source", ALIGN_LEFT, true, 0},
};

void sheets_list(const struct bench *b)
{
    struct arena *a = b->session->arena;
    struct page *page = page_new(a);
    struct table *t = table_new(a, "", columns, NELEM(columns));
    if (b->its) {
        list_one(page, b->its);
        session_print(b->session, AS_TEXT, page, NULL);
        return;
    }
    struct cell *cell = table_row(t);
    cell[0] = cell_text(BENCH_ROUND);
    cell[1] = cell_text("plain readings, stop by stop; its arguments are the plant's parameters");
    cell[2] = cell_text("round.csv");
    for (size_t i = 0; i < bench_count(); i++) {
        cell = table_row(t);
        cell[0] = cell_text(bench_at(i)->name);
        cell[1] = cell_text(bench_at(i)->gives);
        cell[2] = cell_text(bench_at(i)->source);
    }
    page_table(page, t);
    page_space(page);
    page_line(page, FLAG_NONE, "Arguments of a sheet: weirbook bench --list SHEET");
    session_print(b->session, AS_TEXT, page, NULL);
}
