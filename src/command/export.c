/* export: readings out as long CSV, or the rows that were set aside. */
#include "command/long.h"
#include "command/session.h"

#include "base/poison.h"

struct export_options {
    day_t from, to, as_of;
    bool set_aside;
};

static const struct option_spec options[] = {
    {"from", OPTION_DAY, offsetof(struct export_options, from), "DATE",
     "first day (default: the first in the book)", false},
    {"to", OPTION_DAY, offsetof(struct export_options, to), "DATE",
     "last day (default: the last in the book)", false},
    {"set-aside", OPTION_FLAG, offsetof(struct export_options, set_aside), NULL,
     "the rows not accepted, with reasons, in place of the readings", false},
    AS_OF_OPTION(struct export_options),
};

static const struct example examples[] = {
    {"weirbook export --from 2025-03-01 --to 2025-03-31 > march.csv",
     "every reading of March 2025 as long CSV, which load reads back"},
    {"weirbook export --set-aside > to-correct.csv",
     "the rows set aside, to be corrected and loaded"},
};

struct writing {
    FILE *out;
    const struct plant *plant;
    struct text line;
};

static void put(struct writing *w)
{
    fwrite(w->line.at, 1, w->line.length, w->out);
    text_clear(&w->line);
}

static enum status put_reading(void *context, const struct reading *r, struct fault *f)
{
    struct writing *w = context;
    (void)f;
    long_reading(&w->line, w->plant, r);
    put(w);
    return OK;
}

static enum status put_aside(void *context, const struct book_aside *aside, struct fault *f)
{
    struct writing *w = context;
    (void)f;
    long_aside(&w->line, &aside->row, aside->reason, aside->explanation);
    put(w);
    return OK;
}

static enum status run(struct session *s, const void *given, struct fault *f)
{
    const struct export_options *o = given;
    struct plant *plant = NULL;
    if (o->from != DAY_NONE && o->to != DAY_NONE && o->from > o->to)
        return fault_usage(f, "put the earlier date in --from", "--from is after --to");
    s->as_of = o->as_of;
    if (session_book(s, BOOK_READ, NULL, &plant, f) != OK)
        return FAULT;
    struct writing w = {.out = s->out, .plant = plant};
    text_init(&w.line, 4u << 20);
    long_heading(&w.line, o->set_aside);
    put(&w);
    enum status rc = o->set_aside ? book_asides(s->book, o->from, o->to, put_aside, &w, f)
                                  : book_each(s->book, plant, o->from, o->to, put_reading, &w, f);
    text_free(&w.line);
    return rc;
}

const struct command command_export = {
    .name = "export",
    .summary = "readings out as long CSV",
    .book = true,
    .option = options,
    .options = NELEM(options),
    .options_size = sizeof(struct export_options),
    .example = examples,
    .examples = NELEM(examples),
    .about = "Values in force; revised ones as they stand now. Text that a spreadsheet would take "
             "for a formula gets a\n"
             "leading apostrophe, which load takes off again.",
    .run = run,
};
