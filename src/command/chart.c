/* Charts in plain text: see chart.h. */
#include "command/chart.h"

#include <string.h>

#include "command/figures.h"

#include "base/poison.h"

enum { CHART_COLUMNS = 80, CHART_ROWS = 8, LABEL_WIDTH = 12 };

struct chart {
    const struct process_figure *figure; /* one of them: its name, place and unit */
    double sum[CHART_COLUMNS];           /* where marks stand: never a figure that is printed */
    long count[CHART_COLUMNS];
    const struct fraction *least, *most;
};

struct charts {
    struct arena *arena;
    struct chart **chart;
    size_t count, room;
    day_t from;
    long days;
    int columns;
};

static bool same_line(const struct process_figure *x, const struct process_figure *y)
{
    return text_equal(x->name, y->name) && text_equal(x->at, y->at) &&
           text_equal(x->parameter, y->parameter);
}

static struct chart *chart_for(struct charts *c, const struct process_figure *f, size_t *next)
{
    for (size_t tried = 0; tried < c->count; tried++) {
        size_t i = (*next + tried) % c->count;
        if (same_line(c->chart[i]->figure, f)) {
            *next = i + 1;
            return c->chart[i];
        }
    }
    struct chart **slot = arena_push(c->arena, &c->chart, &c->count, &c->room, sizeof(void *));
    *slot = arena_alloc(c->arena, sizeof **slot);
    (*slot)->figure = f;
    *next = c->count;
    return *slot;
}

static void add_figure(const struct charts *c, struct chart *chart, const struct process_figure *f)
{
    if (f->value == NULL)
        return;
    if (chart->least == NULL || fraction_compare(f->value, chart->least) < 0)
        chart->least = f->value;
    if (chart->most == NULL || fraction_compare(f->value, chart->most) > 0)
        chart->most = f->value;
    double value = fraction_double(f->value);
    long first = (long)(f->from - c->from) * c->columns / c->days;
    long last = (long)(f->to - c->from) * c->columns / c->days;
    for (long i = first; i <= last; i++) {
        chart->sum[i] += value;
        chart->count[i]++;
    }
}

/* The row of a column's mark, 0 at the bottom; -1: none. */
static int row_of(const struct chart *chart, int column)
{
    if (chart->count[column] == 0)
        return -1;
    double low = fraction_double(chart->least);
    double high = fraction_double(chart->most);
    if (!(high > low))
        return 0;
    double value = chart->sum[column] / (double)chart->count[column];
    int row = (int)((value - low) / (high - low) * (CHART_ROWS - 1) + 0.5);
    return row < 0 ? 0 : row >= CHART_ROWS ? CHART_ROWS - 1 : row;
}

static void write_row(FILE *out, const struct charts *c, const struct chart *chart, int row,
                      const char *label)
{
    char line[CHART_COLUMNS + 1];
    int end = 0;
    for (int i = 0; i < c->columns; i++) {
        bool marked = row_of(chart, i) == row;
        line[i] = marked ? '*' : ' ';
        end = marked ? i + 1 : end;
    }
    line[end] = '\0';
    fprintf(out, "%*s |%s\n", LABEL_WIDTH, label, line);
}

static void write_axis(FILE *out, const struct charts *c)
{
    char from[11], to[11], rule[CHART_COLUMNS + 1];
    day_write(c->from, from);
    day_write(c->from + (day_t)c->days - 1, to);
    for (int i = 0; i < c->columns; i++)
        rule[i] = '-';
    rule[c->columns] = '\0';
    fprintf(out, "%*s +%s\n", LABEL_WIDTH, "", rule);
    if (c->days == 1)
        fprintf(out, "%*s  %s\n", LABEL_WIDTH, "", from);
    else
        fprintf(out, "%*s  %-*s %s\n", LABEL_WIDTH, "", c->columns > 22 ? c->columns - 11 : 10,
                from, to);
}

static void write_chart(FILE *out, const struct charts *c, const struct chart *chart)
{
    const struct process_figure *f = chart->figure;
    const char *unit = text_equal(f->unit, "1") ? "no unit" : f->unit;
    fprintf(out, "%s at %s%s%s, %s\n", f->name, f->at, *f->parameter ? " of " : "", f->parameter,
            unit);
    if (chart->least == NULL) {
        fprintf(out, "%*s no figure in these days\n\n", LABEL_WIDTH, "");
        return;
    }
    bool flat = fraction_compare(chart->least, chart->most) == 0;
    for (int row = flat ? 0 : CHART_ROWS - 1; row >= 0; row--) {
        const char *label = row == CHART_ROWS - 1
                                ? figure_print(c->arena, chart->most, FIGURES_TEXT)
                            : row == 0 ? figure_print(c->arena, chart->least, FIGURES_TEXT)
                                       : "";
        write_row(out, c, chart, row, label);
    }
    write_axis(out, c);
    fputc('\n', out);
}

void charts_write(FILE *out, struct arena *a, const struct process_figure *figures, size_t count,
                  day_t from, day_t to)
{
    struct charts c = {.arena = a, .from = from, .days = (long)(to - from) + 1};
    size_t next = 0;
    c.columns = c.days < CHART_COLUMNS ? (int)c.days : CHART_COLUMNS;
    for (size_t i = 0; i < count; i++)
        add_figure(&c, chart_for(&c, &figures[i], &next), &figures[i]);
    for (size_t i = 0; i < c.count; i++)
        write_chart(out, &c, c.chart[i]);
}
