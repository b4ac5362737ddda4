/* past: makes a book whose batches have moments of their own, so that scripts can ask for the book
 * as it stood: past BOOK FOLDER READINGS. The moments are those of as_of.py. */
#include "book/book.h"
#include "intake/intake.h"

#include <string.h>

#include "base/poison.h"

struct past {
    struct arena *arena;
    struct book *book;
    struct plant *plant;
};

static enum status take(void *context, const struct reading *r, const struct row_text *row,
                        struct fault *f)
{
    struct past *p = context;
    enum book_outcome outcome;
    struct book_clash clash;
    (void)row;
    return book_load_reading(p->book, r, &outcome, &clash, f);
}

static enum status refuse(void *context, const struct row_text *row, enum reason reason,
                          const char *explanation, struct fault *f)
{
    (void)context;
    (void)reason;
    return fault_at(f, &(struct place){.file = row->file, .line = row->line}, NULL, "%s",
                    explanation);
}

static enum status make(struct past *p, const char *path, const char *folder, struct fault *f)
{
    const struct author author = {"maker", "2025-03-31T18:00:00Z"};
    struct plant_draft *draft = plant_draft_new(p->arena);
    intake_catalogue(draft);
    if (intake_plant(p->arena, folder, draft, f) != OK ||
        plant_draft_finish(draft, &p->plant, f) != OK ||
        book_create(path, draft, &author, f) != OK ||
        book_open(&p->book, path, BOOK_WRITE, f) != OK)
        return FAULT;
    return book_plant(p->book, p->arena, &draft, &p->plant, f);
}

static enum status load(struct past *p, const char *file, struct fault *f)
{
    const struct author author = {"tester", "2025-04-01T06:00:00Z"};
    const struct intake_options how = {.today = 40000};
    const struct intake_sink sink = {.context = p, .reading = take, .aside = refuse};
    struct intake_summary summary = {0};
    struct book_source source = {.file = file, .reason = ""};
    struct book_counts counts = {0};
    int64_t batch = 0;
    if (book_load_begin(p->book, p->plant, &author, false, f) != OK ||
        intake_readings(p->arena, file, p->plant, &how, &sink, &summary, f) != OK)
        return FAULT;
    source.bytes = summary.bytes;
    source.dialect_told = summary.dialect_told;
    memcpy(source.digest, summary.digest, sizeof source.digest);
    return book_load_end(p->book, &source, summary.rows, &counts, &batch, f);
}

/* A new value of BOD5 at EFF on a day; NULL: the sample was spoiled. */
static enum status amend(struct past *p, const char *date, const char *value, const char *when,
                         struct fault *f)
{
    const struct author author = {"lab", when};
    int parameter = plant_parameter(p->plant, "BOD5");
    struct reading r = {.minute = -1,
                        .point = (uint16_t)plant_point(p->plant, "EFF"),
                        .parameter = (uint16_t)parameter,
                        .unit = (uint16_t)unit_index(p->plant->parameters[parameter].unit),
                        .qualifier = QUALIFIER_WITHDRAWN,
                        .text = "withdrawn",
                        .sample = "",
                        .file = ""};
    struct reading old;
    int64_t batch = 0;
    if (!day_parse(date, &r.day))
        return FAULT;
    if (value && intake_value(&r, &p->plant->parameters[parameter], value, false) != REASON_COUNT)
        return FAULT;
    return book_amend(p->book, p->arena, p->plant, &r, "tried", &author, &old, &batch, f);
}

static enum status remark(struct past *p, const char *text, const char *when, struct fault *f)
{
    const struct author author = {"day shift", when};
    struct book_remark r = {.kind = REMARK_CAUSE,
                            .event = "",
                            .point = "EFF",
                            .parameter = "BOD5",
                            .statistic = "",
                            .text = text,
                            .who = "",
                            .when = "",
                            .withdrawn_why = ""};
    int64_t id = 0;
    if (!day_parse("2025-03-11", &r.from))
        return FAULT;
    r.to = r.from;
    return book_remark_add(p->book, &r, &author, &id, f);
}

int main(int argc, char **argv)
{
    struct fault f = {0};
    struct past p = {.arena = arena_new()};
    if (argc != 4)
        return 2;
    bool made = make(&p, argv[1], argv[2], &f) == OK && load(&p, argv[3], &f) == OK &&
                amend(&p, "2025-03-11", "14", "2025-04-05T23:59:59Z", &f) == OK &&
                remark(&p, "return pump failed", "2025-04-06T00:00:00Z", &f) == OK &&
                amend(&p, "2025-03-25", NULL, "2025-04-08T12:00:00Z", &f) == OK &&
                /* this machine's clock was wrong */
                remark(&p, "from a slow clock", "2025-04-02T00:00:00Z", &f) == OK;
    if (!made)
        fprintf(stderr, "past: %s\n", f.text);
    book_close(p.book);
    arena_free(p.arena);
    return made ? 0 : 1;
}
