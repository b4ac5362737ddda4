/* bench: raw values of bench sheets to readings, with the checks of the published methods: from a
 * file, or asked line by line; and blank sheets for paper. */
#include "command/bench.h"

#include <string.h>

#include "base/poison.h"

static const struct option_spec options[] = {
    {"from", OPTION_FILE, offsetof(struct bench_options, from), "FILE",
     "take the raw values from a CSV file instead of asking", false},
    {"date", OPTION_DAY, offsetof(struct bench_options, date), "DATE",
     "the day sampled (default: asked for)", false},
    {"point", OPTION_TEXT, offsetof(struct bench_options, point), "POINT",
     "the point sampled (default: asked for)", false},
    {"by", OPTION_TEXT, offsetof(struct bench_options, by), "NAME",
     "who enters, for the record (default: the login)", false},
    {"revise", OPTION_FLAG, offsetof(struct bench_options, revise), NULL,
     "results that contradict the book become revisions", false},
    {"reason", OPTION_TEXT, offsetof(struct bench_options, reason), "TEXT", "why, with --revise",
     false},
    {"dry-run", OPTION_FLAG, offsetof(struct bench_options, dry_run), NULL,
     "work the sheet and show it; the book stays as it is", false},
    {"print", OPTION_FLAG, offsetof(struct bench_options, print), NULL,
     "print the sheet blank, for paper", false},
    {"list", OPTION_FLAG, offsetof(struct bench_options, list), NULL,
     "list the sheets, or the arguments of one", false},
    AS_OPTION(struct bench_options),
};

static const struct example examples[] = {
    {"weirbook bench round", "asks for the readings of a shift, stop by stop"},
    {"weirbook bench bod", "asks for the bottles of a BOD and works them"},
    {"weirbook bench --from bench-2025-03-20.csv", "takes the raw values from a file"},
    {"weirbook bench --from bench-2025-03-20.csv --dry-run", "shows what they give, no more"},
    {"weirbook bench suspended-solids --print", "a blank sheet for paper"},
    {"weirbook bench --list", "which sheets there are, and what they give"},
};

/* ---- usage ---- */

static enum status find_sheet(struct bench *b, struct fault *f)
{
    const struct session *s = b->session;
    if (s->operands == 0)
        return OK;
    b->sheet = s->operand[0];
    b->its = bench_find(b->sheet);
    if (b->its || strcmp(b->sheet, BENCH_ROUND) == 0)
        return OK;
    const char *nearest = bench_nearest(b->sheet);
    return fault_usage(f,
                       nearest ? arena_print(s->arena, "the nearest is '%s'", nearest)
                               : "weirbook bench --list has them all",
                       "no sheet '%s'", b->sheet);
}

static enum status check_revising(const struct bench_options *o, struct fault *f)
{
    if (o->revise && !(o->reason && *o->reason))
        return fault_usage(f, "add --reason TEXT", "--revise needs a reason, for the record");
    if (o->reason && !o->revise)
        return fault_usage(f, "add --revise, or leave --reason out",
                           "--reason is only used with --revise");
    return OK;
}

static enum status check_options(const struct bench *b, struct fault *f)
{
    const struct bench_options *o = b->options;
    bool csv = o->as == AS_CSV || o->as == AS_JSON;
    if (o->print + o->list + (o->from != NULL) > 1)
        return fault_usage(f, "take one of them", "--print, --list and --from do not go together");
    if (!b->sheet && !o->list && !o->from)
        return fault_usage(f, "name one of 'weirbook bench --list', or a file with --from",
                           "bench needs a SHEET");
    if (o->from && (o->date != DAY_NONE || o->point))
        return fault_usage(f, "leave them out", "the file of --from has its own dates and points");
    if (csv && !o->from)
        return fault_usage(f, "leave --as out", "only results of --from print as csv or json");
    if (o->date != DAY_NONE && o->date > clock_today())
        return fault_usage(f, "correct it", "--date is still to come");
    return check_revising(o, f);
}

static enum status check_point(const struct bench *b, struct fault *f)
{
    const char *point = b->options->point;
    if (!point || plant_point(b->plant, point) >= 0)
        return OK;
    const char *nearest = plant_nearest_point(b->plant, point);
    return fault_usage(f,
                       nearest ? arena_print(b->session->arena, "the nearest is '%s'", nearest)
                               : "see points.csv",
                       "no point '%s'", point);
}

/* ---- a file ---- */

static enum status from_file(struct bench *b, struct fault *f)
{
    struct session *s = b->session;
    struct bench_results results;
    if (sheets_read(b, b->options->from, b->options->from, &results, f) != OK ||
        sheets_enter(b, &results, f) != OK)
        return FAULT;
    s->found = sheets_found(&results);
    if (b->options->as == AS_CSV || b->options->as == AS_JSON)
        session_print(s, b->options->as, NULL, sheets_table(b, &results));
    else
        sheets_tell(b, &results, true);
    return OK;
}

static enum status run(struct session *s, const void *given, struct fault *f)
{
    struct bench b = {.session = s, .options = given};
    struct plant *plant = NULL;
    if (find_sheet(&b, f) != OK || check_options(&b, f) != OK)
        return FAULT;
    if (b.options->list) {
        sheets_list(&b);
        return OK;
    }
    enum book_mode mode = b.options->print ? BOOK_READ : BOOK_WRITE;
    if (session_book(s, mode, NULL, &plant, f) != OK)
        return FAULT;
    b.plant = plant;
    if (check_point(&b, f) != OK)
        return FAULT;
    if (b.options->print)
        return sheets_blank(&b, f);
    return b.options->from ? from_file(&b, f) : sheets_ask(&b, f);
}

const struct command command_bench = {
    .name = "bench",
    .summary = "bench sheets: raw values to results, with the method's checks",
    .operands = "[SHEET]",
    .most = 1,
    .operand = OPERAND_SHEET,
    .book = true,
    .option = options,
    .options = NELEM(options),
    .options_size = sizeof(struct bench_options),
    .example = examples,
    .examples = NELEM(examples),
    .about =
        "Asks line by line; what was typed is on the disk at once, so that a ^C or a hang-up takes "
        "nothing,\n"
        "and the same command goes on with it. Results become readings that keep their raw values "
        "and say\n"
        "which checks failed. Exit status 3: a check failed, or something was set aside.",
    .run = run,
};
