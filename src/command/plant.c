/* plant: the description out of a book and in again, and one to start from. */
#include "command/plant_changes.h"
#include "command/read.h"
#include "command/session.h"

#include "intake/intake.h"

#include "base/poison.h"

struct plant_options {
    const char *out, *apply, *example, *by, *reason;
    bool replace;
    int as;
};

static const struct option_spec options[] = {
    {"out", OPTION_FOLDER, offsetof(struct plant_options, out), "DIR",
     "write the description into DIR, as CSV files", false},
    {"replace", OPTION_FLAG, offsetof(struct plant_options, replace), NULL,
     "with --out: over files that stand there", false},
    {"apply", OPTION_FOLDER, offsetof(struct plant_options, apply), "DIR",
     "put the description in DIR in force", false},
    {"reason", OPTION_TEXT, offsetof(struct plant_options, reason), "TEXT",
     "why, with --apply, for the record", false},
    {"by", OPTION_TEXT, offsetof(struct plant_options, by), "NAME",
     "who, for the record (default: the login)", false},
    {"example", OPTION_FOLDER, offsetof(struct plant_options, example), "DIR",
     "write a description to start from into DIR", false},
    AS_OPTION(struct plant_options),
};

static const struct example examples[] = {
    {"weirbook plant", "shows the plant: points, basins, limits, rules"},
    {"weirbook plant --example my-plant", "writes a description to start from"},
    {"weirbook plant --out description", "writes the book's description as CSV files"},
    {"weirbook plant --apply description --reason 'final ammonia limits'",
     "puts a changed description in force"},
};

static enum status apply(struct session *s, const struct plant_options *o, struct fault *f)
{
    struct plant_draft *draft = NULL;
    struct plant *old = NULL, *plant = NULL;
    struct author author = {0};
    bool changed = false;
    day_t first = DAY_NONE, last = DAY_NONE;
    if (session_author(s, o->by, &author, f) != OK ||
        session_book(s, BOOK_WRITE, NULL, &old, f) != OK ||
        command_read_folder(s, o->apply, &draft, &plant, f) != OK ||
        book_extent(s->book, &first, &last, f) != OK ||
        book_apply(s->book, draft, &author, o->reason ? o->reason : "", &changed, f) != OK)
        return FAULT;
    fprintf(s->out,
            changed ? "%s: the description of %s is in force\n"
                    : "%s: %s says what the book says already; nothing was changed\n",
            s->book_path, o->apply);
    if (changed)
        plant_changes_tell(s, old, plant, first, last);
    return OK;
}

static enum status write_out(struct session *s, const struct plant_options *o, struct fault *f)
{
    struct plant_draft *draft = NULL;
    struct plant *plant = NULL;
    if (session_book(s, BOOK_READ, &draft, &plant, f) != OK ||
        intake_plant_write(o->out, draft, o->replace, f) != OK)
        return FAULT;
    fprintf(s->out, "%s: the description of %s\n", o->out, plant->name);
    return OK;
}

static enum status example(struct session *s, const struct plant_options *o, struct fault *f)
{
    if (intake_example(o->example, f) != OK)
        return FAULT;
    fprintf(s->out,
            "%s: a description to start from; change it, then: weirbook new my-plant.book %s\n",
            o->example, o->example);
    return OK;
}

/* ---- the plant as a page ---- */

/* For csv and json: the description's rows, one cell a line, so that nothing of them is lost. */
static const struct column cell_columns[] = {
    {"file", "file", ALIGN_LEFT, false, 0},
    {"line", "line", ALIGN_RIGHT, false, 0},
    {"column", "column", ALIGN_LEFT, false, 0},
    {"value", "value", ALIGN_LEFT, true, 0},
};

static struct table *cells(struct session *s, const struct plant_draft *draft)
{
    struct table *t = table_new(s->arena, "", cell_columns, NELEM(cell_columns));
    for (size_t i = 0; i < plant_draft_rows(draft); i++) {
        const struct plant_row *row = plant_draft_row(draft, i);
        const struct plant_layout *layout = plant_layout(row->file);
        for (size_t c = 0; c < layout->columns && !row->builtin; c++) {
            if (!row->cell[c] || !*row->cell[c])
                continue;
            struct cell *cell = table_row(t);
            cell[0] = cell_text(layout->file);
            cell[1] = cell_count(s->arena, row->line);
            cell[2] = cell_text(layout->column[c]);
            cell[3] = cell_text(row->cell[c]);
        }
    }
    return t;
}

static const struct column point_columns[] = {
    {NULL, "point", ALIGN_LEFT, false, 0},
    {NULL, "name", ALIGN_LEFT, true, 0},
    {NULL, "role", ALIGN_LEFT, false, 0},
    {NULL, "outfall", ALIGN_LEFT, false, 0},
};

static struct table *points(struct session *s, const struct plant *p)
{
    struct table *t = table_new(s->arena, "Points", point_columns, NELEM(point_columns));
    for (size_t i = 0; i < p->point_count; i++) {
        struct cell *cell = table_row(t);
        cell[0] = cell_text(p->points[i].id);
        cell[1] = cell_text(p->points[i].name);
        cell[2] = cell_text(role_words[p->points[i].role]);
        cell[3] = cell_text(p->points[i].outfall);
    }
    return t;
}

static const struct column basin_columns[] = {
    {NULL, "basin", ALIGN_LEFT, false, 0},      {NULL, "kind", ALIGN_LEFT, false, 0},
    {NULL, "point", ALIGN_LEFT, false, 0},      {NULL, "volume", ALIGN_RIGHT, false, 0},
    {NULL, "area", ALIGN_RIGHT, false, 0},      {NULL, "weir", ALIGN_RIGHT, false, 0},
    {NULL, "in service", ALIGN_LEFT, false, 0},
};

static const char *measure(struct arena *a, const struct optional *value, const struct unit *unit)
{
    char number[24];
    if (!value->set)
        return "";
    decimal_write(value->value, number);
    return arena_print(a, "%s %s", number, unit ? unit->name : "");
}

static const char *span(struct arena *a, day_t from, day_t to)
{
    char first[11] = "", last[11] = "";
    if (from == DAY_NONE && to == DAY_NONE)
        return "always";
    if (from != DAY_NONE)
        day_write(from, first);
    if (to != DAY_NONE)
        day_write(to, last);
    return arena_print(a, "%s%s%s%s%s", from == DAY_NONE ? "" : "from ", first,
                       from != DAY_NONE && to != DAY_NONE ? " " : "", to == DAY_NONE ? "" : "to ",
                       last);
}

static struct table *basins(struct session *s, const struct plant *p)
{
    struct table *t = table_new(s->arena, "Basins", basin_columns, NELEM(basin_columns));
    for (size_t i = 0; i < p->basin_count; i++) {
        const struct basin *b = &p->basins[i];
        struct cell *cell = table_row(t);
        cell[0] = cell_text(b->id);
        cell[1] = cell_text(basin_kind_words[b->kind]);
        cell[2] = cell_text(b->point < 0 ? "" : p->points[b->point].id);
        cell[3] = cell_text(measure(s->arena, &b->volume, b->volume_unit));
        cell[4] = cell_text(measure(s->arena, &b->area, b->area_unit));
        cell[5] = cell_text(measure(s->arena, &b->weir, b->weir_unit));
        cell[6] = cell_text(span(s->arena, b->from, b->to));
    }
    return t;
}

static const struct column limit_columns[] = {
    {NULL, "outfall", ALIGN_LEFT, false, 0},   {NULL, "point", ALIGN_LEFT, false, 0},
    {NULL, "parameter", ALIGN_LEFT, false, 0}, {NULL, "basis", ALIGN_LEFT, false, 0},
    {NULL, "statistic", ALIGN_LEFT, false, 0}, {NULL, "limit", ALIGN_LEFT, false, 0},
    {NULL, "samples", ALIGN_LEFT, false, 0},   {NULL, "in force", ALIGN_LEFT, true, 0},
};

static const char *in_force(struct arena *a, const struct limit *l)
{
    const char *dates = span(a, l->from, l->to);
    if (l->season.set)
        dates = arena_print(a, "%02d-%02d to %02d-%02d%s%s", l->season.from_month,
                            l->season.from_date, l->season.to_month, l->season.to_date,
                            l->from == DAY_NONE && l->to == DAY_NONE ? "" : ", ",
                            l->from == DAY_NONE && l->to == DAY_NONE ? "" : dates);
    return l->when.set ? arena_print(a, "%s, when %s", dates, l->when.text) : dates;
}

static struct table *limits(struct session *s, const struct plant *p)
{
    struct table *t = table_new(s->arena, "Limits", limit_columns, NELEM(limit_columns));
    for (size_t i = 0; i < p->limit_count; i++) {
        const struct limit *l = &p->limits[i];
        struct cell *cell = table_row(t);
        cell[0] = cell_text(l->outfall);
        cell[1] = cell_text(l->point_text);
        cell[2] = cell_text(l->parameter_text);
        cell[3] = cell_text(basis_words[l->basis]);
        cell[4] = cell_text(l->statistic_text);
        cell[5] = cell_text(
            arena_print(s->arena, "%s %s %s", bound_words[l->bound], l->limit_text, l->unit_text));
        cell[6] = cell_text(l->samples.text);
        cell[7] = cell_text(in_force(s->arena, l));
    }
    return t;
}

static struct page *plant_page(struct session *s, const struct plant *p)
{
    struct page *page = page_new(s->arena);
    page_heading(page, p->name);
    page_line(page, FLAG_NONE, "Permit %s, receiving water %s, %s units", p->permit,
              p->receiving_water, p->metric ? "metric" : "US");
    page_space(page);
    page_table(page, points(s, p));
    if (p->basin_count)
        page_table(page, basins(s, p));
    page_table(page, limits(s, p));
    page_heading(page, "Rules");
    for (size_t r = 0; r < RULES; r++)
        page_line(page, FLAG_NONE, "%s: %s", rule_info((enum rule)r)->name,
                  rule_sentence(s->arena, &p->rules, (enum rule)r));
    return page;
}

static enum status show(struct session *s, const struct plant_options *o, struct fault *f)
{
    struct plant_draft *draft = NULL;
    struct plant *plant = NULL;
    if (session_book(s, BOOK_READ, &draft, &plant, f) != OK)
        return FAULT;
    session_print(s, o->as, plant_page(s, plant), cells(s, draft));
    return OK;
}

static enum status run(struct session *s, const void *given, struct fault *f)
{
    const struct plant_options *o = given;
    if (!!o->out + !!o->apply + !!o->example > 1)
        return fault_usage(f, "give one of them",
                           "--out, --apply and --example do different things");
    if (o->replace && !o->out)
        return fault_usage(f, "add --out DIR", "--replace is only used with --out");
    if (o->example)
        return example(s, o, f);
    if (o->apply)
        return apply(s, o, f);
    return o->out ? write_out(s, o, f) : show(s, o, f);
}

const struct command command_plant = {
    .name = "plant",
    .summary = "the plant's description: show it, write it out, put a changed one in force",
    .book = true,
    .option = options,
    .options = NELEM(options),
    .options_size = sizeof(struct plant_options),
    .example = examples,
    .examples = NELEM(examples),
    .about = "The description is a folder of CSV files: weirbook-files(5). Every description that "
             "was in force is kept.",
    .run = run,
};
