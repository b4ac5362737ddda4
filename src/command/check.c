/* check: prove the book sound. */
#include "command/session.h"

#include <string.h>

#include "base/poison.h"

struct check_options {
    const char *head;
    int as;
};

static const struct option_spec options[] = {
    {"head", OPTION_TEXT, offsetof(struct check_options, head), "HASH",
     "also whether a head printed on an old report is one of this book's", false},
    AS_OPTION(struct check_options),
};

static const struct example examples[] = {
    {"weirbook check", "proves the book of this folder sound, or names what is damaged"},
    {"weirbook -b marrow-bend.book check --as csv", "the same as CSV"},
    {"weirbook check --head "
     "3f2a9d0c4b7e18563f2a9d0c4b7e18563f2a9d0c4b7e18563f2a9d0c4b7e1856",
     "whether what that report rests on still stands in the book"},
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

/* The head as the book writes it: 64 hex digits, small letters. */
static enum status read_head(const char *text, char out[2 * DIGEST_BYTES + 1], struct fault *f)
{
    size_t length = strlen(text);
    if (length != (size_t)2 * DIGEST_BYTES || strspn(text, "0123456789abcdefABCDEF") != length)
        return fault_usage(f, "the last lines of a text report have it whole",
                           "--head needs the 64 hex digits of a head, not '%s'", text);
    for (size_t i = 0; i <= length; i++)
        out[i] = (char)(text[i] >= 'A' && text[i] <= 'F' ? text[i] - 'A' + 'a' : text[i]);
    return OK;
}

/* A head hashes all that was recorded up to its batch. Together with a sound chain, its being there
 * shows that none of it was changed since. */
static enum status check_head(struct session *s, const char *head, struct checking *c,
                              struct fault *f)
{
    int64_t batch = 0;
    if (book_has_head(s->book, head, &batch, f) != OK)
        return FAULT;
    const struct book_finding found = {
        .what = "head",
        .good = batch != 0,
        .batch = batch,
        .file = "",
        .note = batch ? arena_print(s->arena, "%.16s... was the book's head after batch %lld", head,
                                    (long long)batch)
                      : arena_print(s->arena,
                                    "%.16s... was never a head of this book: it is another book, "
                                    "or was worked anew; compare with a copy made then",
                                    head),
    };
    return take(c, &found, f);
}

static enum status run(struct session *s, const void *given, struct fault *f)
{
    const struct check_options *o = given;
    struct checking c = {.arena = s->arena,
                         .table = table_new(s->arena, "", columns, NELEM(columns))};
    char head[2 * DIGEST_BYTES + 1];
    if ((o->head && read_head(o->head, head, f) != OK) || session_open(s, BOOK_READ, f) != OK ||
        book_check(s->book, take, &c, f) != OK || (o->head && check_head(s, head, &c, f) != OK))
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
