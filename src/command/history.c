/* history: who did what to the book, when and why; readings with their old and new values. */
#include "command/long.h"
#include "command/session.h"

#include <string.h>

#include "base/poison.h"

struct history_options {
    day_t from, to;
    const char *point, *parameter, *batch, *by;
    bool batches, readings;
    int as;
};

static const struct option_spec options[] = {
    {"from", OPTION_DAY, offsetof(struct history_options, from), "DATE",
     "what is about that day or later", false},
    {"to", OPTION_DAY, offsetof(struct history_options, to), "DATE",
     "what is about that day or earlier", false},
    {"point", OPTION_TEXT, offsetof(struct history_options, point), "POINT",
     "what is about that point", false},
    {"parameter", OPTION_TEXT, offsetof(struct history_options, parameter), "PARAMETER",
     "what is about that parameter", false},
    {"batch", OPTION_TEXT, offsetof(struct history_options, batch), "NUMBER", "what that batch did",
     false},
    {"by", OPTION_TEXT, offsetof(struct history_options, by), "NAME", "what that person did",
     false},
    {"readings", OPTION_FLAG, offsetof(struct history_options, readings), NULL,
     "first values of readings too, not only their changes", false},
    {"batches", OPTION_FLAG, offsetof(struct history_options, batches), NULL,
     "a row for each batch, with its counts and the book's head after it", false},
    AS_OPTION(struct history_options),
};

static const struct example examples[] = {
    {"weirbook history --from 2025-03-01 --to 2025-03-31", "what was done about days of March"},
    {"weirbook history --point EFF --parameter BOD5 --readings",
     "every value of BOD5 at EFF, from its file to its last correction"},
    {"weirbook history --batches", "every file loaded and every act, numbered"},
};

/* ---- what was done ---- */

static const struct column columns[] = {
    {"when", NULL, ALIGN_LEFT, false, 0},      {"who", NULL, ALIGN_LEFT, false, 0},
    {"what", NULL, ALIGN_LEFT, false, 0},      {"batch", NULL, ALIGN_RIGHT, false, 0},
    {"date", NULL, ALIGN_LEFT, false, 0},      {"point", NULL, ALIGN_LEFT, false, 0},
    {"parameter", NULL, ALIGN_LEFT, false, 0}, {"old", NULL, ALIGN_LEFT, false, 0},
    {"new", NULL, ALIGN_LEFT, false, 0},       {"reason", NULL, ALIGN_LEFT, false, 0},
};

static const struct column page_columns[] = {
    {NULL, "when", ALIGN_LEFT, false, 0}, {NULL, "who", ALIGN_LEFT, true, 0},
    {NULL, "what", ALIGN_LEFT, false, 0}, {NULL, "batch", ALIGN_RIGHT, false, 0},
    {NULL, "about", ALIGN_LEFT, true, 0}, {NULL, "old", ALIGN_LEFT, true, 0},
    {NULL, "new", ALIGN_LEFT, true, 0},   {NULL, "reason or file", ALIGN_LEFT, true, 0},
};

struct telling {
    struct arena *arena;
    const struct plant *plant;
    struct table *file, *page;
};

static const char *point_of(const struct telling *t, const struct book_change *c)
{
    return c->point < 0 ? "" : t->plant->points[c->point].id;
}

static const char *parameter_of(const struct telling *t, const struct book_change *c)
{
    return c->parameter < 0 ? "" : t->plant->parameters[c->parameter].id;
}

/* "2025-03-11 EFF BOD5 2": what of it there is. */
static const char *about(const struct telling *t, const struct book_change *c)
{
    char day[11] = "";
    if (c->day != DAY_NONE)
        day_write(c->day, day);
    const char *const part[] = {day, point_of(t, c), parameter_of(t, c), c->sample};
    const char *told = "";
    for (size_t i = 0; i < NELEM(part); i++)
        if (part[i] && *part[i])
            told = arena_print(t->arena, "%s%s%s", told, *told ? " " : "", part[i]);
    return told;
}

/* The reason; without one the file and line it came from. */
static const char *why(struct arena *a, const struct book_change *c)
{
    if (*c->reason || !c->file || !*c->file)
        return arena_text(a, c->reason);
    return long_place(a, c->file, c->line);
}

static enum status take(void *context, const struct book_change *c, struct fault *f)
{
    struct telling *t = context;
    struct arena *a = t->arena;
    (void)f;
    struct cell *cell = table_row(t->file);
    *cell++ = cell_text(arena_text(a, c->when));
    *cell++ = cell_text(arena_text(a, c->who));
    *cell++ = cell_text(arena_text(a, c->what));
    *cell++ = cell_count(a, (long)c->batch);
    *cell++ = cell_day(a, c->day);
    *cell++ = cell_text(point_of(t, c));
    *cell++ = cell_text(parameter_of(t, c));
    *cell++ = cell_text(arena_text(a, c->old_text));
    *cell++ = cell_text(arena_text(a, c->new_text));
    *cell = cell_text(arena_text(a, c->reason));
    cell = table_row(t->page);
    *cell++ =
        cell_text(arena_print(a, "%.10s %.5s", c->when, strlen(c->when) > 11 ? c->when + 11 : ""));
    *cell++ = cell_text(arena_text(a, c->who));
    *cell++ = cell_text(arena_text(a, c->what));
    *cell++ = cell_count(a, (long)c->batch);
    *cell++ = cell_text(about(t, c));
    *cell++ = cell_text(arena_text(a, c->old_text));
    *cell++ = cell_text(arena_text(a, c->new_text));
    *cell = cell_text(why(a, c));
    return OK;
}

static enum status ask(const struct history_options *o, const struct plant *plant,
                       struct book_history *out, struct fault *f)
{
    *out = (struct book_history){.first = o->from,
                                 .last = o->to,
                                 .point = -1,
                                 .parameter = -1,
                                 .who = o->by,
                                 .every_reading = o->readings};
    if (o->point && session_point(plant, o->point, &out->point, f) != OK)
        return FAULT;
    if (o->parameter && session_parameter(plant, o->parameter, &out->parameter, f) != OK)
        return FAULT;
    return o->batch ? session_number("batch", "weirbook history --batches lists them", o->batch,
                                     &out->batch, f)
                    : OK;
}

static enum status tell_changes(struct session *s, const struct history_options *o, struct fault *f)
{
    struct plant *plant = NULL;
    struct book_history asked;
    struct telling t = {.arena = s->arena,
                        .file = table_new(s->arena, "", columns, NELEM(columns)),
                        .page = table_new(s->arena, "", page_columns, NELEM(page_columns))};
    if (session_book(s, BOOK_READ, NULL, &plant, f) != OK || ask(o, plant, &asked, f) != OK)
        return FAULT;
    t.plant = plant;
    if (book_history(s->book, plant, &asked, take, &t, f) != OK)
        return FAULT;
    struct page *page = page_new(s->arena);
    if (t.page->rows == 0)
        page_line(page, FLAG_NONE, "nothing on record");
    else
        page_table(page, t.page);
    session_print(s, o->as, page, t.file);
    return OK;
}

/* ---- batches ---- */

static const struct column batch_columns[] = {
    {"batch", NULL, ALIGN_RIGHT, false, 0},     {"file", NULL, ALIGN_LEFT, false, 0},
    {"when", NULL, ALIGN_LEFT, false, 0},       {"who", NULL, ALIGN_LEFT, false, 0},
    {"rows", NULL, ALIGN_RIGHT, false, 0},      {"accepted", NULL, ALIGN_RIGHT, false, 0},
    {"present", NULL, ALIGN_RIGHT, false, 0},   {"revised", NULL, ALIGN_RIGHT, false, 0},
    {"set_aside", NULL, ALIGN_RIGHT, false, 0}, {"head", NULL, ALIGN_LEFT, false, 0},
};

/* A head has 64 digits: on a page its first 16, as the foot of a workbook has them. */
static const struct column batch_page_columns[] = {
    {NULL, "batch", ALIGN_RIGHT, false, 0},   {NULL, "file", ALIGN_LEFT, true, 0},
    {NULL, "when", ALIGN_LEFT, false, 0},     {NULL, "who", ALIGN_LEFT, true, 0},
    {NULL, "rows", ALIGN_RIGHT, false, 0},    {NULL, "accepted", ALIGN_RIGHT, false, 0},
    {NULL, "present", ALIGN_RIGHT, false, 0}, {NULL, "revised", ALIGN_RIGHT, false, 0},
    {NULL, "aside", ALIGN_RIGHT, false, 0},   {NULL, "head", ALIGN_LEFT, false, 0},
};

struct batches {
    struct telling telling;
    const char *by;
    int64_t batch;
};

static bool is_loaded(const struct book_batch *b)
{
    return strcmp(b->kind, "load") == 0 || strcmp(b->kind, "bench") == 0;
}

static struct cell *put_counts(struct arena *a, struct cell *cell, const struct book_batch *b)
{
    const long counts[] = {b->counts.rows, b->counts.accepted, b->counts.present, b->counts.revised,
                           b->counts.aside};
    for (size_t i = 0; i < NELEM(counts); i++, cell++)
        if (is_loaded(b))
            *cell = cell_count(a, counts[i]);
    return cell;
}

static enum status take_batch(void *context, const struct book_batch *b, struct fault *f)
{
    struct batches *t = context;
    struct arena *a = t->telling.arena;
    (void)f;
    if ((t->batch && t->batch != b->batch) || (t->by && strcmp(t->by, b->who) != 0))
        return OK;
    struct cell *cell = table_row(t->telling.file);
    *cell++ = cell_count(a, (long)b->batch);
    *cell++ = cell_text(arena_text(a, b->file));
    *cell++ = cell_text(arena_text(a, b->when));
    *cell++ = cell_text(arena_text(a, b->who));
    cell = put_counts(a, cell, b);
    *cell = cell_text(arena_text(a, b->head));
    cell = table_row(t->telling.page);
    *cell++ = cell_count(a, (long)b->batch);
    *cell++ = cell_text(*b->file ? arena_text(a, b->file) : arena_print(a, "(%s)", b->kind));
    *cell++ = cell_text(arena_print(a, "%.10s", b->when));
    *cell++ = cell_text(arena_text(a, b->who));
    cell = put_counts(a, cell, b);
    *cell = cell_text(arena_print(a, "%.16s", b->head));
    return OK;
}

static enum status tell_batches(struct session *s, const struct history_options *o, struct fault *f)
{
    struct arena *a = s->arena;
    struct batches t = {
        .telling = {.arena = a,
                    .file = table_new(a, "", batch_columns, NELEM(batch_columns)),
                    .page = table_new(a, "", batch_page_columns, NELEM(batch_page_columns))},
        .by = o->by};
    if (o->batch && session_number("batch", "weirbook history --batches lists them", o->batch,
                                   &t.batch, f) != OK)
        return FAULT;
    if (session_open(s, BOOK_READ, f) != OK || book_batches(s->book, take_batch, &t, f) != OK)
        return FAULT;
    struct page *page = page_new(a);
    page_table(page, t.telling.page);
    session_print(s, o->as, page, t.telling.file);
    return OK;
}

/* ---- the command ---- */

static enum status run(struct session *s, const void *given, struct fault *f)
{
    const struct history_options *o = given;
    if (o->from != DAY_NONE && o->to != DAY_NONE && o->from > o->to)
        return fault_usage(f, "put the earlier date in --from", "--from is after --to");
    if (!o->batches)
        return tell_changes(s, o, f);
    if (o->from != DAY_NONE || o->to != DAY_NONE || o->point || o->parameter || o->readings)
        return fault_usage(f, "leave the others out", "only --batch and --by go with --batches");
    return tell_batches(s, o, f);
}

const struct command command_history = {
    .name = "history",
    .summary = "who did what to the book, when and why",
    .book = true,
    .option = options,
    .options = NELEM(options),
    .options_size = sizeof(struct history_options),
    .example = examples,
    .examples = NELEM(examples),
    .about = "Oldest first. Moments are UTC. Nothing that was ever in the book is missing here: "
             "old values stand beside\n"
             "those that replaced them, with the reason.",
    .run = run,
};
