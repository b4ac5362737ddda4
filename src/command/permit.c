/* permit: every limit of a month: figure, limit, samples, verdict. */
#include "command/month.h"
#include "command/session.h"

#include "base/poison.h"

struct permit_options {
    day_t month, to, on, as_of;
    struct option_texts what_if;
    struct option_texts group;
    bool rules, count, standing;
    const char *notices, *aware;
    int as;
};

static const struct option_spec options[] = {
    {"month", OPTION_MONTH, offsetof(struct permit_options, month), "YYYY-MM", "the month", true},
    {"to", OPTION_MONTH, offsetof(struct permit_options, to), "YYYY-MM",
     "and the months up to this one, side by side with their extremes", false},
    {"on", OPTION_DAY, offsetof(struct permit_options, on), "DATE",
     "judge as of that day: later readings are ignored (default: that of --as-of, or today)",
     false},
    AS_OF_OPTION(struct permit_options),
    {"what-if", OPTION_TEXTS, offsetof(struct permit_options, what_if), "RULE=VALUE",
     "what would change under this rule; given several times, all together", false},
    {"rules", OPTION_FLAG, offsetof(struct permit_options, rules), NULL,
     "which verdicts hang on a rule: every other value, one at a time", false},
    {"count", OPTION_FLAG, offsetof(struct permit_options, count), NULL,
     "what each exceedance counts as: days of the month, of the week, values", false},
    {"standing", OPTION_FLAG, offsetof(struct permit_options, standing), NULL,
     "the six months up to this one beside the federal screening criteria", false},
    {"group", OPTION_TEXTS, offsetof(struct permit_options, group), "PARAMETER=GROUP",
     "with --standing: the parameter's group: I, II or neither", false},
    {"notices", OPTION_FOLDER, offsetof(struct permit_options, notices), "DIR",
     "notices owed within 24 hours and 5 days; drafts of them into DIR", false},
    {"aware", OPTION_TEXT, offsetof(struct permit_options, aware), "TIME",
     "with --notices: when the plant became aware: 'YYYY-MM-DD HH:MM'", false},
    AS_OPTION(struct permit_options),
};

static const struct example examples[] = {
    {"weirbook permit --month 2025-03", "every limit of March 2025, the worst news first"},
    {"weirbook permit --month 2025-03 --on 2025-03-14",
     "the month as it stands on the 14th; periods not over are open"},
    {"weirbook permit --month 2025-03 --as-of 2025-04-10",
     "what the book said at the end of 10 April, whatever was corrected since"},
    {"weirbook permit --month 2025-01 --to 2025-12", "the year by limit and month, on a page"},
    {"weirbook permit --month 2025-03 --what-if nondetect=half --what-if rounding=half-up",
     "what would change if less-thans counted as half and a dropped 5 went up"},
    {"weirbook permit --month 2025-03 --rules", "which verdicts hang on a convention, worst first"},
    {"weirbook permit --month 2025-03 --count", "what the month's exceedances count as"},
    {"weirbook permit --month 2025-03 --standing --group CU=II",
     "October to March beside the screening criteria; copper is in group II"},
    {"weirbook permit --month 2025-03 --notices drafts --aware '2025-03-19 14:30'",
     "which notices are owed and by when, and drafts of them in the folder drafts"},
    {"weirbook permit --month 2025-03 --as csv",
     "the same as CSV, one row for each limit and period"},
};

enum status month_judge(struct session *s, const struct plant *plant, day_t month, day_t on,
                        struct frame **frame, struct permit_month *out, struct fault *f)
{
    struct frame_span *needs = NULL;
    size_t count = 0;
    permit_needs(s->arena, plant, month, &needs, &count);
    if (session_frame(s, plant, needs, count, month, month_last(month), frame, f) != OK)
        return FAULT;
    return permit_month(s->arena, *frame, month, on == DAY_NONE ? clock_today() : on, out, f);
}

/* Each of these is a page of its own. */
static enum status one_look(const struct permit_options *o, struct fault *f)
{
    const struct {
        bool given;
        const char *name;
    } looks[] = {{o->to != DAY_NONE, "--to"}, {o->what_if.count > 0, "--what-if"},
                 {o->rules, "--rules"},       {o->count, "--count"},
                 {o->standing, "--standing"}, {o->notices != NULL, "--notices"}};
    const char *first = NULL;

    for (size_t i = 0; i < NELEM(looks); i++) {
        if (!looks[i].given)
            continue;
        if (first)
            return fault_usage(f, "ask for one of them", "%s and %s do not go together", first,
                               looks[i].name);
        first = looks[i].name;
    }
    if (o->group.count > 0 && !o->standing)
        return fault_usage(f, "ask for --standing", "--group goes with --standing");
    if (o->aware && !o->notices)
        return fault_usage(f, "ask for --notices DIR", "--aware goes with --notices");
    return OK;
}

/* Whether more than the month itself is asked for. */
static bool looks_further(const struct permit_options *o)
{
    return o->to != DAY_NONE || o->what_if.count > 0 || o->rules || o->count || o->standing ||
           o->notices != NULL;
}

static day_t judged_on(const struct permit_options *o)
{
    return o->on == DAY_NONE ? o->as_of : o->on;
}

static enum status look_further(struct session *s, const struct permit_options *o,
                                const struct plant *plant, struct fault *f)
{
    if (o->to != DAY_NONE)
        return span_print(s, plant, o->month, o->to, judged_on(o), o->as, f);
    if (o->count)
        return count_print(s, plant, o->month, judged_on(o), o->as, f);
    if (o->standing)
        return standing_print(s, plant, o->month, judged_on(o), o->as, &o->group, f);
    if (o->notices)
        return notices_print(s, plant, o->month, judged_on(o), o->as, o->notices, o->aware, f);
    return compare_print(s, plant, o->month, judged_on(o), o->as, &o->what_if, f);
}

static enum status many_books(struct session *s, const struct permit_options *o, struct fault *f)
{
    if (looks_further(o))
        return fault_usage(f, "name one book",
                           "only --month, --on, --as-of and --as go with several books");
    return permit_fleet(
        s, &(struct fleet_month){.month = o->month, .on = judged_on(o), .as = o->as}, f);
}

static enum status run(struct session *s, const void *given, struct fault *f)
{
    const struct permit_options *o = given;
    struct plant *plant = NULL;
    struct frame *frame = NULL;
    struct permit_month month = {0};
    struct month_remarks remarks = {0};
    s->as_of = o->as_of;
    if (one_look(o, f) != OK)
        return FAULT;
    if (s->book_count > 1)
        return many_books(s, o, f);
    if (session_book(s, BOOK_READ, NULL, &plant, f) != OK)
        return FAULT;
    if (looks_further(o))
        return look_further(s, o, plant, f);
    if (month_judge(s, plant, o->month, judged_on(o), &frame, &month, f) != OK ||
        month_remarks(s, &month, &remarks, f) != OK)
        return FAULT;
    session_print(s, o->as, report_permit_page(s->arena, plant, &month, &remarks),
                  report_permit_table(s->arena, &month, &remarks));
    s->found = month.exceeded > 0 || month.shortfalls > 0;
    return OK;
}

const struct command command_permit = {
    .name = "permit",
    .summary = "every limit of a month: figure, limit, samples, verdict",
    .book = true,
    .fleet = true,
    .option = options,
    .options = NELEM(options),
    .options_size = sizeof(struct permit_options),
    .example = examples,
    .examples = NELEM(examples),
    .about =
        "Exit status 3: a limit was exceeded or samples are short. How averages, less-thans, "
        "weeks, rounding\n"
        "and loads are made: weirbook-rules(7). The permit governs over this summary.\n"
        "--what-if puts its rule over the plant's, the parameters' and the limits' own, for this "
        "look alone;\n"
        "with it and with --rules status 3 also means that some verdict would change.",
    .run = run,
};
