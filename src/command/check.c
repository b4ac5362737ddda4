/* check: prove the book sound. */
#include "command/session.h"

#include "base/poison.h"

struct check_options {
    int as;
};

static const struct option_spec options[] = {
    AS_OPTION(struct check_options),
};

static const struct example examples[] = {
    {"weirbook check", "proves the book of this folder sound, or names what is damaged"},
    {"weirbook -b marrow-bend.book check --as csv", "the same as CSV"},
};

static const struct column columns[] = {
    {"what", "what", ALIGN_LEFT, false, 0},    {"state", "state", ALIGN_LEFT, false, 0},
    {"batch", "batch", ALIGN_RIGHT, false, 0}, {"file", "file", ALIGN_LEFT, true, 0},
    {"line", "line", ALIGN_RIGHT, false, 0},   {"note", "found", ALIGN_LEFT, true, 0},
};

struct checking {
    struct arena *arena;
    struct table *table;
    long bad;
};

static enum status take(void *context, const struct book_finding *found, struct fault *f)
{
    struct checking *c = context;
    (void)f;
    struct cell *cell = table_row(c->table);
    cell[0] = cell_text(arena_text(c->arena, found->what));
    cell[1] = cell_flagged(cell_text(found->good ? "sound" : "DAMAGED"),
                           found->good ? FLAG_GOOD : FLAG_BAD);
    if (found->batch)
        cell[2] = cell_count(c->arena, (long)found->batch);
    cell[3] = cell_text(arena_text(c->arena, found->file));
    if (found->line)
        cell[4] = cell_count(c->arena, found->line);
    cell[5] = cell_text(arena_text(c->arena, found->note));
    c->bad += !found->good;
    return OK;
}

static enum status run(struct session *s, const void *given, struct fault *f)
{
    const struct check_options *o = given;
    struct checking c = {.arena = s->arena,
                         .table = table_new(s->arena, "", columns, NELEM(columns))};
    if (session_open(s, BOOK_READ, f) != OK || book_check(s->book, take, &c, f) != OK)
        return FAULT;
    struct page *page = page_new(s->arena);
    page_line(
        page, c.bad ? FLAG_BAD : FLAG_GOOD,
        c.bad ? "%s: DAMAGED in %ld place%s; restore a copy made before, and load later files again"
              : "%s: sound",
        s->book_path, c.bad, c.bad == 1 ? "" : "s");
    page_space(page);
    page_table(page, c.table);
    session_print(s, o->as, page, c.table);
    s->found = c.bad > 0;
    return OK;
}

const struct command command_check = {
    .name = "check",
    .summary = "prove the book sound",
    .book = true,
    .option = options,
    .options = NELEM(options),
    .options_size = sizeof(struct check_options),
    .example = examples,
    .examples = NELEM(examples),
    .about = "SQLite's own checks, foreign keys, then every batch, reading and revision against "
             "the book's hash chain.\n"
             "Exit status 3: something is damaged.",
    .run = run,
};
