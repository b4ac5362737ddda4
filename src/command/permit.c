/* permit: every limit of a month: figure, limit, samples, verdict. */
#include "command/month.h"
#include "command/session.h"

#include "base/poison.h"

struct permit_options {
    day_t month, on, as_of;
    int as;
};

static const struct option_spec options[] = {
    {"month", OPTION_MONTH, offsetof(struct permit_options, month), "YYYY-MM", "the month", true},
    {"on", OPTION_DAY, offsetof(struct permit_options, on), "DATE",
     "judge as of that day: later readings are ignored (default: that of --as-of, or today)",
     false},
    AS_OF_OPTION(struct permit_options),
    AS_OPTION(struct permit_options),
};

static const struct example examples[] = {
    {"weirbook permit --month 2025-03", "every limit of March 2025, the worst news first"},
    {"weirbook permit --month 2025-03 --on 2025-03-14",
     "the month as it stands on the 14th; periods not over are open"},
    {"weirbook permit --month 2025-03 --as-of 2025-04-10",
     "what the book said at the end of 10 April, whatever was corrected since"},
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

static enum status run(struct session *s, const void *given, struct fault *f)
{
    const struct permit_options *o = given;
    struct plant *plant = NULL;
    struct frame *frame = NULL;
    struct permit_month month = {0};
    struct month_remarks remarks = {0};
    s->as_of = o->as_of;
    if (session_book(s, BOOK_READ, NULL, &plant, f) != OK ||
        month_judge(s, plant, o->month, o->on == DAY_NONE ? o->as_of : o->on, &frame, &month, f) !=
            OK ||
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
    .option = options,
    .options = NELEM(options),
    .options_size = sizeof(struct permit_options),
    .example = examples,
    .examples = NELEM(examples),
    .about = "Exit status 3: a limit was exceeded or samples are short. How averages, less-thans, "
             "weeks, rounding\n"
             "and loads are made: weirbook-rules(7). The permit governs over this summary.",
    .run = run,
};
