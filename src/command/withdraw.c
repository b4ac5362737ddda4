/* withdraw: a whole file that was loaded by mistake, taken back with a reason; its rows are kept.
 */
#include "command/session.h"

#include "base/poison.h"

struct withdraw_options {
    const char *reason, *by;
};

static const struct option_spec options[] = {
    {"reason", OPTION_TEXT, offsetof(struct withdraw_options, reason), "TEXT",
     "why, for the record", true},
    {"by", OPTION_TEXT, offsetof(struct withdraw_options, by), "NAME",
     "who takes it back, for the record (default: the login)", false},
};

static const struct example examples[] = {
    {"weirbook history --batches", "lists the loaded files with their numbers"},
    {"weirbook withdraw 4 --reason 'the file of another plant'",
     "takes batch 4 back; no figure uses its readings any more"},
};

static const char *readings(struct arena *a, long n, const char *one, const char *many)
{
    return arena_print(a, "%ld reading%s %s", n, n == 1 ? "" : "s", n == 1 ? one : many);
}

static enum status run(struct session *s, const void *given, struct fault *f)
{
    const struct withdraw_options *o = given;
    struct arena *a = s->arena;
    struct plant *plant = NULL;
    struct author author = {0};
    struct book_withdrawn done = {0};
    int64_t batch = 0, act = 0;
    if (session_number("batch", "weirbook history --batches lists them", s->operand[0], &batch,
                       f) != OK ||
        session_record("--reason", o->reason, f) != OK ||
        session_author(s, o->by, &author, f) != OK ||
        session_book(s, BOOK_WRITE, NULL, &plant, f) != OK ||
        book_withdraw(s->book, plant, batch, o->reason, &author, &done, &act, f) != OK)
        return FAULT;
    fprintf(s->out, "batch %lld was taken back, as batch %lld; its rows are kept\n",
            (long long)batch, (long long)act);
    if (done.left > 0)
        fprintf(s->out, "  %s; see weirbook history --batch %lld\n",
                readings(a, done.left, "was amended since and stays as it is",
                         "were amended since and stay as they are"),
                (long long)batch);
    fprintf(s->out, "  %s\n",
            readings(a, done.taken_back, "has no value now", "have no value now"));
    if (done.restored > 0)
        fprintf(s->out, "  %s\n",
                readings(a, done.restored, "has the value again that it had before",
                         "have the values again that they had before"));
    s->found = done.left > 0;
    return OK;
}

const struct command command_withdraw = {
    .name = "withdraw",
    .summary = "take a whole loaded file back, with a reason; its rows are kept",
    .operands = "BATCH",
    .least = 1,
    .most = 1,
    .book = true,
    .option = options,
    .options = NELEM(options),
    .options_size = sizeof(struct withdraw_options),
    .example = examples,
    .examples = NELEM(examples),
    .about = "Each reading of the file gets the value again that it had before, or none. Exit "
             "status 3: some were amended\n"
             "since the file was loaded, and stay as they are.",
    .run = run,
};
