/* new: a book from a plant description. */
#include "command/read.h"
#include "command/session.h"

#include "intake/intake.h"

#include "base/poison.h"

struct new_options {
    const char *by;
};

static const struct option_spec options[] = {
    {"by", OPTION_TEXT, offsetof(struct new_options, by), "NAME",
     "who makes it, for the record (default: the login)", false},
};

static const struct example examples[] = {
    {"weirbook new marrow-bend.book fixtures/marrow-bend/plant",
     "makes a book of the plant described in that folder"},
    {"weirbook new my-plant.book my-plant --by 'day shift'", "the same, recording who made it"},
};

/* All problems of a folder are told at once, one line each; the fault then sums them up. */
static enum status tell_problems(const struct plant_draft *draft, const char *folder,
                                 struct fault *f)
{
    size_t count = plant_draft_problems(draft);
    for (size_t i = 0; i < count; i++)
        fprintf(stderr, "%s\n", plant_draft_problem_at(draft, i));
    fault_clear(f);
    return fault_at(f, NULL, "correct the lines above", "%s has %zu problem%s", folder, count,
                    count == 1 ? "" : "s");
}

struct listing {
    struct arena *arena;
    struct plant_draft *draft;
    const char *folder;
};

static void list_problem(void *context, const char *text)
{
    const struct listing *l = context;
    plant_draft_problem(l->draft, arena_print(l->arena, "%s/%s", l->folder, text));
}

enum status command_read_folder(struct session *s, const char *folder, struct plant_draft **draft,
                                struct plant **plant, struct fault *f)
{
    *draft = plant_draft_new(s->arena);
    intake_catalogue(*draft);
    if (intake_plant(s->arena, folder, *draft, f) != OK)
        return FAULT;
    if (plant_draft_finish(*draft, plant, f) != OK)
        return tell_problems(*draft, folder, f);
    struct listing listing = {.arena = s->arena, .draft = *draft, .folder = folder};
    if (process_problems(*plant, list_problem, &listing) > 0)
        return tell_problems(*draft, folder, f);
    return OK;
}

static enum status run(struct session *s, const void *given, struct fault *f)
{
    const struct new_options *o = given;
    struct plant_draft *draft = NULL;
    struct plant *plant = NULL;
    struct author author = {0};
    if (session_author(s, o->by, &author, f) != OK ||
        command_read_folder(s, s->operand[1], &draft, &plant, f) != OK ||
        book_create(s->operand[0], draft, &author, f) != OK)
        return FAULT;
    fprintf(s->out, "%s: a book for %s: %zu points, %zu parameters, %zu basins, %zu limits\n",
            s->operand[0], plant->name, plant->point_count, plant->parameter_count,
            plant->basin_count, plant->limit_count);
    return OK;
}

const struct command command_new = {
    .name = "new",
    .summary = "create a book from a plant description",
    .operands = "BOOK DIR",
    .least = 2,
    .most = 2,
    .operand = OPERAND_FILE,
    .option = options,
    .options = NELEM(options),
    .options_size = sizeof(struct new_options),
    .example = examples,
    .examples = NELEM(examples),
    .about = "DIR holds plant.csv, points.csv, limits.csv and, where needed, parameters.csv, "
             "basins.csv,\n"
             "meters.csv, process.csv and round.csv: see weirbook-files(5). weirbook plant "
             "--example DIR\n"
             "writes a set to start from.",
    .run = run,
};
