/* draft: from rows to a plant. Rows are kept as they came; finishing reads them in the order the
 * cross references need (points before rules, parameters before limits) and sorts the problems back
 * into the order of the files. */
#include "plant/draft.h"

#include <assert.h>
#include <stdlib.h>
#include <string.h>

#include "base/poison.h"

#define FILE_ORDER_FOLDER (-1)

struct plant_draft *plant_draft_new(struct arena *a)
{
    struct plant_draft *d = arena_alloc(a, sizeof *d);

    d->arena = a;
    return d;
}

/* A copy without the blanks around it. */
static const char *trimmed(struct arena *a, const char *s)
{
    size_t length;

    while (*s == ' ' || *s == '\t')
        s++;
    length = strlen(s);
    while (length > 0 && (s[length - 1] == ' ' || s[length - 1] == '\t'))
        length--;
    return arena_bytes(a, s, length);
}

void plant_draft_add(struct plant_draft *d, const struct plant_row *row)
{
    const char *last = d->row_count > 0 ? d->rows[d->row_count - 1].name : NULL;
    struct plant_row *copy;

    copy = arena_push(d->arena, &d->rows, &d->row_count, &d->row_room, sizeof *copy);
    *copy = *row;
    copy->name = text_equal(last, row->name) ? last : arena_text(d->arena, row->name);
    for (size_t i = 0; i < PLANT_COLUMNS_MOST; i++)
        if (row->cell[i])
            copy->cell[i] = trimmed(d->arena, row->cell[i]);
}

size_t plant_draft_rows(const struct plant_draft *d)
{
    return d->row_count;
}

const struct plant_row *plant_draft_row(const struct plant_draft *d, size_t i)
{
    assert(i < d->row_count);
    return &d->rows[i];
}

/* ---- problems ---- */

static void keep(struct plant_draft *d, int file, long line, int column, const char *text)
{
    struct problem *p =
        arena_push(d->arena, &d->problems, &d->problem_count, &d->problem_room, sizeof *p);

    *p = (struct problem){file, line, column, d->problem_count, text};
}

/* The built-in catalogue is read before the plant's own file of parameters. */
static int file_order(const struct plant_row *row)
{
    return 2 * (int)row->file + !row->builtin;
}

void problem(struct plant_draft *d, const struct plant_row *row, int column, const char *todo,
             const char *what, ...)
{
    struct place where = {row->name, row->line, 0};
    struct fault f = {0};
    struct text t;
    va_list ap;

    if (column >= 0)
        where.column = row->at[column] > 0 ? row->at[column] : column + 1;
    text_init(&t, sizeof f.text);
    va_start(ap, what);
    text_vprint(&t, what, ap);
    va_end(ap);
    if (fault_at(&f, &where, todo, "%s", t.at) != OK)
        keep(d, file_order(row), row->line, where.column, arena_text(d->arena, f.text));
    text_free(&t);
}

void problem_of_file(struct plant_draft *d, enum plant_file file, const char *todo,
                     const char *what)
{
    struct plant_row row = {.file = file, .name = plant_layout(file)->file};

    if (d->told[file])
        return;
    for (size_t i = 0; i < d->row_count; i++) {
        const char *slash = strrchr(d->rows[i].name, '/');

        if (d->rows[i].builtin || !slash)
            continue;
        row.name = arena_print(d->arena, "%.*s/%s", (int)(slash - d->rows[i].name), d->rows[i].name,
                               plant_layout(file)->file);
        break;
    }
    problem(d, &row, WHOLE_LINE, todo, "%s", what);
}

static int digits_after(const char **s)
{
    int n = 0;

    if (**s != ':')
        return 0;
    for (++*s; **s >= '0' && **s <= '9'; ++*s)
        n = n < 100000000 ? n * 10 + (**s - '0') : n;
    return n;
}

/* A text such as "DIR/limits.csv:7:6: ..." is put among the problems of its file. */
void plant_draft_problem(struct plant_draft *d, const char *fault_text)
{
    int file = FILE_ORDER_FOLDER, column;
    long line = 0;
    const char *rest = fault_text;

    for (int i = 0; i < PLANT_FILES && file == FILE_ORDER_FOLDER; i++) {
        const char *name = plant_layout((enum plant_file)i)->file;
        const char *found = strstr(fault_text, name);

        if (!found || (found > fault_text && found[-1] != '/' && found[-1] != '\''))
            continue;
        file = 2 * i + 1;
        d->told[i] = true;
        rest = found + strlen(name);
    }
    if (file != FILE_ORDER_FOLDER)
        line = digits_after(&rest);
    column = line > 0 ? digits_after(&rest) : 0;
    keep(d, file, line, column, arena_text(d->arena, fault_text));
}

size_t plant_draft_problems(const struct plant_draft *d)
{
    return d->problem_count;
}

const char *plant_draft_problem_at(const struct plant_draft *d, size_t i)
{
    assert(i < d->problem_count);
    return d->problems[i].text;
}

static int by_place(const void *left, const void *right)
{
    const struct problem *a = left, *b = right;

    if (a->file != b->file)
        return a->file < b->file ? -1 : 1;
    if (a->line != b->line)
        return a->line < b->line ? -1 : 1;
    if (a->column != b->column)
        return a->column < b->column ? -1 : 1;
    return a->order < b->order ? -1 : a->order > b->order;
}

/* ---- finishing ---- */

static const struct reader {
    enum plant_file file;
    void (*read)(struct plant_draft *, const struct plant_row *);
} readers[] = {
    /* Rules may name points, so points come before the fields of the plant. */
    {PLANT_POINTS, read_point},    {PLANT_FIELDS, read_field}, {PLANT_PARAMETERS, read_parameter},
    {PLANT_BASINS, read_basin},    {PLANT_LIMITS, read_limit}, {PLANT_METERS, read_meter},
    {PLANT_PROCESS, read_process}, {PLANT_ROUND, read_stop},
};

/* Arrays as long as their files: no element ever moves. */
static void make_room(struct plant_draft *d)
{
    struct plant *p = d->plant;
    size_t rows[PLANT_FILES] = {0};

    for (size_t i = 0; i < d->row_count; i++)
        rows[d->rows[i].file]++;
    for (size_t i = 0; i < PLANT_FILES; i++)
        d->origin[i] = arena_alloc(d->arena, (rows[i] + 1) * sizeof(const struct plant_row *));
    p->points = arena_alloc(d->arena, (rows[PLANT_POINTS] + 1) * sizeof *p->points);
    p->parameters = arena_alloc(d->arena, (rows[PLANT_PARAMETERS] + 1) * sizeof *p->parameters);
    p->basins = arena_alloc(d->arena, (rows[PLANT_BASINS] + 1) * sizeof *p->basins);
    p->limits = arena_alloc(d->arena, (rows[PLANT_LIMITS] + 1) * sizeof *p->limits);
    p->meters = arena_alloc(d->arena, (rows[PLANT_METERS] + 1) * sizeof *p->meters);
    p->process = arena_alloc(d->arena, (rows[PLANT_PROCESS] + 1) * sizeof *p->process);
    p->round = arena_alloc(d->arena, (rows[PLANT_ROUND] + 1) * sizeof *p->round);
}

static void read_file(struct plant_draft *d, const struct reader *r, bool builtin)
{
    for (size_t i = 0; i < d->row_count; i++)
        if (d->rows[i].file == r->file && d->rows[i].builtin == builtin)
            r->read(d, &d->rows[i]);
}

static void check_whole(struct plant_draft *d)
{
    bool named = false;

    for (size_t i = 0; i < d->row_count; i++)
        named = named || (d->rows[i].file == PLANT_FIELDS &&
                          text_equal(cell(&d->rows[i], FIELD_NAME), "name"));
    if (!named)
        problem_of_file(d, PLANT_FIELDS, "add a line such as name,Marrow Bend",
                        "the plant has no name");
    if (d->plant->point_count == 0)
        problem_of_file(d, PLANT_POINTS, "add a line for each place where samples are taken",
                        "no points");
    limits_agree(d);
}

enum status plant_draft_finish(struct plant_draft *d, struct plant **out, struct fault *f)
{
    struct plant *p = arena_alloc(d->arena, sizeof *p);

    assert(!d->plant);
    d->plant = p;
    p->name = p->permit = p->receiving_water = p->time_zone = "";
    p->since = DAY_NONE;
    rules_default(&p->rules);
    make_room(d);
    for (size_t i = 0; i < NELEM(readers); i++) {
        read_file(d, &readers[i], true);
        read_file(d, &readers[i], false);
    }
    check_whole(d);
    if (d->problem_count > 0) {
        qsort(d->problems, d->problem_count, sizeof *d->problems, by_place);
        return fault_at(f, NULL, NULL, "%s", d->problems[0].text);
    }
    *out = p;
    return OK;
}
