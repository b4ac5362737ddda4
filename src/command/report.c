/* report: the monthly summary as text and workbook. */
#include "command/month.h"
#include "command/session.h"

#include <errno.h>
#include <string.h>
#include <sys/stat.h>

#include "base/poison.h"

struct report_options {
    day_t month, on, printed, as_of;
    const char *out;
};

static const struct option_spec options[] = {
    {"month", OPTION_MONTH, offsetof(struct report_options, month), "YYYY-MM", "the month", true},
    {"out", OPTION_FOLDER, offsetof(struct report_options, out), "DIR",
     "the folder to write into; made when missing", true},
    {"printed", OPTION_DAY, offsetof(struct report_options, printed), "DATE",
     "the date printed on it (default: today)", false},
    {"on", OPTION_DAY, offsetof(struct report_options, on), "DATE",
     "judge as of that day (default: that of --as-of, or the printed date)", false},
    AS_OF_OPTION(struct report_options),
};

static const struct example examples[] = {
    {"weirbook report --month 2025-03 --out reports",
     "writes permit-2025-03.txt and permit-2025-03.xlsx into reports"},
    {"weirbook report --month 2025-03 --out reports --printed 2025-04-10",
     "the same, dated; the same bytes every time"},
    {"weirbook report --month 2025-03 --out then --as-of 2025-04-10 --printed 2025-04-10",
     "the report as it followed from the book at the end of 10 April"},
};

struct gathered {
    struct arena *arena;
    const struct plant *plant;
    struct month_aside *aside;
    size_t asides, aside_room;
    struct month_revision *revision;
    size_t revisions, revision_room;
};

static enum status gather_aside(void *context, const struct book_aside *from, struct fault *f)
{
    struct gathered *g = context;
    struct arena *a = g->arena;
    (void)f;
    struct month_aside *to = arena_push(a, &g->aside, &g->asides, &g->aside_room, sizeof *to);
    *to = (struct month_aside){
        .file = arena_text(a, from->row.file),
        .reason = arena_text(a, from->reason),
        .explanation = arena_text(a, from->explanation),
        .date = arena_text(a, from->row.cell[LONG_DATE]),
        .point = arena_text(a, from->row.cell[LONG_POINT]),
        .parameter = arena_text(a, from->row.cell[LONG_PARAMETER]),
        .value = arena_text(a, from->row.cell[LONG_VALUE]),
        .line = from->row.line,
        .column = from->row.column,
    };
    return OK;
}

static enum status gather_revision(void *context, const struct book_revision *from, struct fault *f)
{
    struct gathered *g = context;
    struct arena *a = g->arena;
    (void)f;
    char date[11];
    day_write(from->day, date);
    struct month_revision *to =
        arena_push(a, &g->revision, &g->revisions, &g->revision_room, sizeof *to);
    *to = (struct month_revision){
        .date = arena_text(a, date),
        .point = g->plant->points[from->point].id,
        .parameter = g->plant->parameters[from->parameter].id,
        .old_text = text_equal(from->old_unit, from->unit)
                        ? arena_text(a, from->old_text)
                        : arena_print(a, "%s %s", from->old_text, from->old_unit),
        .new_text = arena_text(a, from->new_text),
        .unit = arena_text(a, from->unit),
        .who = arena_text(a, from->who),
        .when = arena_text(a, from->when),
        .reason = arena_text(a, from->reason),
        .file = arena_text(a, from->file),
        .line = from->line,
    };
    return OK;
}

enum status month_folder(const char *folder, struct fault *f)
{
    if (mkdir(folder, 0777) == 0 || errno == EEXIST)
        return OK;
    return fault_at(f, &(struct place){.file = folder}, "choose a folder that can be written",
                    "cannot make the folder: %s", strerror(errno));
}

static void write_page(FILE *out, const void *page)
{
    const struct text_style style = {.width = 100};
    write_text(out, page, &style);
}

/* Everything the pages show, read and worked once. */
static enum status gather(struct session *s, const struct report_options *o, struct month_input *in,
                          struct permit_month *month, struct fault *f)
{
    struct plant *plant = NULL;
    struct frame *judged = NULL, *all = NULL;
    day_t last = month_last(o->month);
    day_t on = o->on != DAY_NONE ? o->on : o->as_of != DAY_NONE ? o->as_of : in->printed;
    struct gathered *g = arena_alloc(s->arena, sizeof *g);
    char head[2 * DIGEST_BYTES + 1];
    struct process_figure *figures = NULL, *means = NULL;
    const struct process_options days = {
        .from = o->month, .to = last, .step = STEP_DAY, .smooth = 1};
    const struct process_options whole = {
        .from = o->month, .to = last, .step = STEP_MONTH, .smooth = 1};

    if (session_book(s, BOOK_READ, NULL, &plant, f) != OK ||
        month_judge(s, plant, o->month, on, &judged, month, f) != OK ||
        session_frame_all(s, plant, process_reach(&days), last, &all, f) != OK ||
        process_table(s->arena, all, &days, &figures, &in->process_count, f) != OK ||
        process_table(s->arena, all, &whole, &means, &in->process_months, f) != OK)
        return FAULT;
    *g = (struct gathered){.arena = s->arena, .plant = plant};
    if (book_asides(s->book, o->month, last, gather_aside, g, f) != OK ||
        book_revisions(s->book, plant, o->month, last, gather_revision, g, f) != OK ||
        month_remarks(s, month, &in->remarks, f) != OK || book_head(s->book, head, f) != OK)
        return FAULT;
    in->plant = plant;
    in->frame = all;
    in->permit = month;
    in->process = figures;
    in->process_month = means;
    in->aside = g->aside;
    in->asides = g->asides;
    in->revision = g->revision;
    in->revisions = g->revisions;
    in->head = arena_text(s->arena, head);
    in->version = WEIRBOOK_VERSION;
    return OK;
}

static enum status run(struct session *s, const void *given, struct fault *f)
{
    const struct report_options *o = given;
    struct permit_month month = {0};
    struct month_input in = {.printed = o->printed != DAY_NONE ? o->printed : clock_today()};
    char as_of[11];
    s->as_of = o->as_of;
    if (o->as_of != DAY_NONE) {
        day_write(o->as_of, as_of);
        in.as_of = as_of;
    }
    if (gather(s, o, &in, &month, f) != OK || month_folder(o->out, f) != OK)
        return FAULT;
    char iso[11];
    day_write(o->month, iso);
    const char *text = arena_print(s->arena, "%s/permit-%.7s.txt", o->out, iso);
    const char *workbook = arena_print(s->arena, "%s/permit-%.7s.xlsx", o->out, iso);
    if (beside_write(text, write_page, report_month_page(s->arena, &in), f) != OK ||
        report_month_workbook(s->arena, &in, workbook, f) != OK)
        return FAULT;
    fprintf(s->out, "%s\n%s\n", text, workbook);
    s->found = month.exceeded > 0 || month.shortfalls > 0;
    return OK;
}

const struct command command_report = {
    .name = "report",
    .summary = "write the monthly summary as text and workbook",
    .book = true,
    .option = options,
    .options = NELEM(options),
    .options_size = sizeof(struct report_options),
    .example = examples,
    .examples = NELEM(examples),
    .about = "Writes permit-YYYY-MM.txt and permit-YYYY-MM.xlsx and prints their names. The same "
             "book and the same\n"
             "--printed date give the same bytes. Exit status 3: a limit was exceeded or samples "
             "are short.",
    .run = run,
};
