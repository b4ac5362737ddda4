/* remark: a cause, a remedy or an event said of days, of a point or of a limit. It is printed
 * beside figures and changes none. */
#include "command/session.h"

#include <string.h>

#include "base/poison.h"

struct remark_options {
    day_t from, to, month;
    const char *point, *parameter, *statistic, *cause, *remedy, *text, *by, *withdraw, *reason;
    int event, as;
    bool list;
};

#define EVENT_WORDS "bypass|spill|outage|wet-weather|other"
static const char *const event_words[] = {"bypass", "spill", "outage", "wet-weather", "other"};

static const struct option_spec options[] = {
    {"from", OPTION_DAY, offsetof(struct remark_options, from), "DATE", "first day it is about",
     false},
    {"to", OPTION_DAY, offsetof(struct remark_options, to), "DATE",
     "last day it is about (default: the first)", false},
    {"point", OPTION_TEXT, offsetof(struct remark_options, point), "POINT",
     "the point it is about (default: the plant)", false},
    {"parameter", OPTION_TEXT, offsetof(struct remark_options, parameter), "PARAMETER",
     "the parameter it is about (default: all)", false},
    {"statistic", OPTION_TEXT, offsetof(struct remark_options, statistic), "STATISTIC",
     "the limit it is about, as limits.csv has it (default: all of them)", false},
    {"cause", OPTION_TEXT, offsetof(struct remark_options, cause), "TEXT",
     "what brought a figure about", false},
    {"remedy", OPTION_TEXT, offsetof(struct remark_options, remedy), "TEXT",
     "what was or will be done about it", false},
    {"event", OPTION_ONE_OF, offsetof(struct remark_options, event), EVENT_WORDS,
     "what happened; add --text", false},
    {"text", OPTION_TEXT, offsetof(struct remark_options, text), "TEXT",
     "with --event: in words, one line", false},
    {"by", OPTION_TEXT, offsetof(struct remark_options, by), "NAME",
     "who says so, for the record (default: the login)", false},
    {"list", OPTION_FLAG, offsetof(struct remark_options, list), NULL,
     "list the remarks, withdrawn ones too", false},
    {"month", OPTION_MONTH, offsetof(struct remark_options, month), "YYYY-MM",
     "with --list: those about days of that month", false},
    {"withdraw", OPTION_TEXT, offsetof(struct remark_options, withdraw), "NUMBER",
     "take that remark back; it is kept, and printed on no page", false},
    {"reason", OPTION_TEXT, offsetof(struct remark_options, reason), "TEXT", "why, with --withdraw",
     false},
    AS_OPTION(struct remark_options),
};

static const struct example examples[] = {
    {"weirbook remark --from 2025-03-18 --point EFF --parameter TSS --cause 'pump failed'",
     "says why; printed beside every limit of TSS at EFF whose period holds the day"},
    {"weirbook remark --from 2025-03-16 --to 2025-03-17 --event bypass --text 'gate 2 open'",
     "an event of two days, for the whole plant"},
    {"weirbook remark --list --month 2025-03", "the remarks about days of March 2025"},
    {"weirbook remark --withdraw 12 --reason 'named the wrong day'",
     "takes remark 12 back; it stays in the history"},
};

/* ---- the words it is about ---- */

static bool is_statistic(const char *word)
{
    for (size_t i = 0; i < STATISTICS; i++)
        if (i != STAT_PERCENTILE && strcmp(word, statistic_words[i]) == 0)
            return true;
    /* percentile-N, as limits.csv has it */
    size_t stem = strlen("percentile-");
    if (strncmp(word, "percentile-", stem) != 0)
        return false;
    size_t digits = strspn(word + stem, "0123456789");
    return digits >= 1 && digits <= 2 && word[stem + digits] == '\0';
}

static enum status check_statistic(const char *word, struct fault *f)
{
    if (!word || is_statistic(word))
        return OK;
    if (strncmp(word, "percentile", strlen("percentile")) == 0)
        return fault_usage(f, "write it with its number, such as percentile-90",
                           "no statistic '%s'", word);
    const char *nearest = text_nearest(word, statistic_words, STATISTICS);
    char todo[100] = "weirbook-files(5) lists them under limits.csv";
    if (nearest)
        snprintf(todo, sizeof todo, "the nearest is '%s'", nearest);
    return fault_usage(f, todo, "no statistic '%s'", word);
}

/* A limit on a sum (EFF+EF2) is named as it is written there. */
static bool is_sum(const struct plant *plant, const char *word, bool of_points)
{
    for (size_t i = 0; i < plant->limit_count; i++) {
        const struct limit *l = &plant->limits[i];
        if (strcmp(word, of_points ? l->point_text : l->parameter_text) == 0)
            return true;
    }
    return false;
}

static enum status check_names(const struct remark_options *o, const struct plant *plant,
                               struct fault *f)
{
    int index;
    if (o->point && !is_sum(plant, o->point, true) &&
        session_point(plant, o->point, &index, f) != OK)
        return FAULT;
    if (o->parameter && !is_sum(plant, o->parameter, false) &&
        session_parameter(plant, o->parameter, &index, f) != OK)
        return FAULT;
    if (o->statistic && !(o->point && o->parameter))
        return fault_usage(f, "add --point and --parameter",
                           "--statistic names a limit with its point and parameter");
    return check_statistic(o->statistic, f);
}

/* ---- a new one ---- */

static enum status read_said(const struct remark_options *o, struct book_remark *r, struct fault *f)
{
    int said = (o->cause != NULL) + (o->remedy != NULL) + (o->event >= 0);
    if (said != 1)
        return fault_usage(f, "give one of --cause TEXT, --remedy TEXT, --event KIND --text TEXT",
                           said ? "a remark says one thing at a time" : "nothing is said");
    if (o->event >= 0 && !o->text)
        return fault_usage(f, "add --text TEXT", "--event needs a text");
    if (o->event < 0 && o->text)
        return fault_usage(f, "leave --text out", "--text goes with --event");
    r->kind = o->cause ? REMARK_CAUSE : o->remedy ? REMARK_REMEDY : REMARK_EVENT;
    r->text = o->cause ? o->cause : o->remedy ? o->remedy : o->text;
    r->event = o->event >= 0 ? event_words[o->event] : "";
    return session_record(o->cause ? "--cause" : o->remedy ? "--remedy" : "--text", r->text, f);
}

static enum status read_days(const struct remark_options *o, struct book_remark *r, struct fault *f)
{
    if (o->from == DAY_NONE)
        return fault_usage(f, "add --from DATE", "a remark needs the day it is about");
    r->from = o->from;
    r->to = o->to == DAY_NONE ? o->from : o->to;
    if (r->to < r->from)
        return fault_usage(f, "put the earlier date in --from", "--from is after --to");
    return OK;
}

static const char *or_none(const char *text)
{
    return text ? text : "";
}

static const char *about(struct arena *a, const struct book_remark *r)
{
    const char *const part[] = {r->point, r->parameter, r->statistic};
    const char *told = "";
    for (size_t i = 0; i < NELEM(part); i++)
        if (*part[i])
            told = arena_print(a, "%s%s%s", told, *told ? " " : "", part[i]);
    return *told ? told : "plant";
}

static const char *days(struct arena *a, const struct book_remark *r)
{
    char from[11], to[11];
    day_write(r->from, from);
    day_write(r->to, to);
    return r->from == r->to ? arena_text(a, from) : arena_print(a, "%s to %s", from, to);
}

static enum status add(struct session *s, const struct remark_options *o, struct fault *f)
{
    struct plant *plant = NULL;
    struct author author = {0};
    struct book_remark r = {.event = "",
                            .text = "",
                            .point = or_none(o->point),
                            .parameter = or_none(o->parameter),
                            .statistic = or_none(o->statistic),
                            .who = "",
                            .when = "",
                            .withdrawn_why = ""};
    int64_t id = 0;
    if (read_days(o, &r, f) != OK || read_said(o, &r, f) != OK ||
        session_author(s, o->by, &author, f) != OK ||
        session_book(s, BOOK_WRITE, NULL, &plant, f) != OK || check_names(o, plant, f) != OK ||
        book_remark_add(s->book, &r, &author, &id, f) != OK)
        return FAULT;
    fprintf(s->out, "remark %lld: %s, %s, %s%s%s\n  no figure is changed\n", (long long)id,
            days(s->arena, &r), about(s->arena, &r), remark_kind_words[r.kind], *r.event ? " " : "",
            r.event);
    return OK;
}

/* ---- taken back ---- */

static enum status take_back(struct session *s, const struct remark_options *o, struct fault *f)
{
    struct author author = {0};
    int64_t id = 0;
    if (!o->reason)
        return fault_usage(f, "add --reason TEXT", "--withdraw needs a reason, for the record");
    if (session_number("remark", "weirbook remark --list lists them", o->withdraw, &id, f) != OK ||
        session_record("--reason", o->reason, f) != OK ||
        session_author(s, o->by, &author, f) != OK || session_open(s, BOOK_WRITE, f) != OK ||
        book_remark_withdraw(s->book, id, o->reason, &author, f) != OK)
        return FAULT;
    fprintf(s->out, "remark %lld was withdrawn; it is kept, and printed on no page from now on\n",
            (long long)id);
    return OK;
}

/* ---- the list ---- */

static const struct column file_columns[] = {
    {"remark", NULL, ALIGN_RIGHT, false, 0},   {"kind", NULL, ALIGN_LEFT, false, 0},
    {"event", NULL, ALIGN_LEFT, false, 0},     {"from", NULL, ALIGN_LEFT, false, 0},
    {"to", NULL, ALIGN_LEFT, false, 0},        {"point", NULL, ALIGN_LEFT, false, 0},
    {"parameter", NULL, ALIGN_LEFT, false, 0}, {"statistic", NULL, ALIGN_LEFT, false, 0},
    {"text", NULL, ALIGN_LEFT, false, 0},      {"who", NULL, ALIGN_LEFT, false, 0},
    {"when", NULL, ALIGN_LEFT, false, 0},      {"withdrawn", NULL, ALIGN_LEFT, false, 0},
};

static const struct column page_columns[] = {
    {NULL, "remark", ALIGN_RIGHT, false, 0},     {NULL, "when", ALIGN_LEFT, false, 0},
    {NULL, "about", ALIGN_LEFT, true, 0},        {NULL, "kind", ALIGN_LEFT, true, 0},
    {NULL, "what is said", ALIGN_LEFT, true, 0}, {NULL, "by", ALIGN_LEFT, true, 0},
};

struct listing {
    struct arena *arena;
    struct table *file, *page;
};

static void list_in_file(struct listing *l, const struct book_remark *r)
{
    struct arena *a = l->arena;
    struct cell *c = table_row(l->file);
    const char *const text[] = {r->point, r->parameter, r->statistic, r->text, r->who, r->when};
    *c++ = cell_count(a, (long)r->id);
    *c++ = cell_text(remark_kind_words[r->kind]);
    *c++ = cell_text(arena_text(a, r->event));
    *c++ = cell_day(a, r->from);
    *c++ = cell_day(a, r->to);
    for (size_t i = 0; i < NELEM(text); i++)
        *c++ = cell_text(arena_text(a, text[i]));
    *c = cell_text(arena_text(a, r->withdrawn ? r->withdrawn_why : ""));
}

static enum status list_one(void *context, const struct book_remark *r, struct fault *f)
{
    struct listing *l = context;
    struct arena *a = l->arena;
    (void)f;
    list_in_file(l, r);
    struct cell *c = table_row(l->page);
    c[0] = cell_count(a, (long)r->id);
    c[1] = cell_text(days(a, r));
    c[2] = cell_text(about(a, r));
    c[3] = cell_text(
        arena_print(a, "%s%s%s", remark_kind_words[r->kind], *r->event ? ": " : "", r->event));
    c[4] = r->withdrawn ? cell_flagged(cell_text(arena_print(a, "WITHDRAWN, %s: %s",
                                                             r->withdrawn_why, r->text)),
                                       FLAG_LIGHT)
                        : cell_text(arena_text(a, r->text));
    c[5] = cell_text(arena_print(a, "%s, %.10s", r->who, r->when));
    return OK;
}

static enum status list(struct session *s, const struct remark_options *o, struct fault *f)
{
    struct listing l = {.arena = s->arena,
                        .file = table_new(s->arena, "", file_columns, NELEM(file_columns)),
                        .page = table_new(s->arena, "", page_columns, NELEM(page_columns))};
    day_t first = o->month != DAY_NONE ? o->month : o->from;
    day_t last = o->month != DAY_NONE ? month_last(o->month) : o->to;
    if (session_open(s, BOOK_READ, f) != OK ||
        book_remarks(s->book, first, last, list_one, &l, f) != OK)
        return FAULT;
    struct page *page = page_new(s->arena);
    if (l.page->rows == 0)
        page_line(page, FLAG_NONE, "no remarks");
    else
        page_table(page, l.page);
    session_print(s, o->as, page, l.file);
    return OK;
}

/* ---- the command ---- */

static bool says_something(const struct remark_options *o)
{
    return o->point || o->parameter || o->statistic || o->cause || o->remedy || o->text ||
           o->event >= 0;
}

static enum status run(struct session *s, const void *given, struct fault *f)
{
    const struct remark_options *o = given;
    if (o->list && o->withdraw)
        return fault_usage(f, "ask for one of them", "--list and --withdraw do not go together");
    if ((o->list || o->withdraw) && says_something(o))
        return fault_usage(f, "say the new remark by itself", "%s does not go with a new remark",
                           o->list ? "--list" : "--withdraw");
    if (o->reason && !o->withdraw)
        return fault_usage(f, "leave --reason out", "--reason goes with --withdraw");
    if (o->month != DAY_NONE && (!o->list || o->from != DAY_NONE || o->to != DAY_NONE))
        return fault_usage(f, "weirbook remark --list --month YYYY-MM",
                           "--month goes with --list, without --from and --to");
    if (!o->list && o->as >= 0)
        return fault_usage(f, "leave --as out", "--as goes with --list");
    if (o->list)
        return list(s, o, f);
    return o->withdraw ? take_back(s, o, f) : add(s, o, f);
}

const struct command command_remark = {
    .name = "remark",
    .summary = "a cause, a remedy or an event, printed beside figures",
    .book = true,
    .option = options,
    .options = NELEM(options),
    .options_size = sizeof(struct remark_options),
    .example = examples,
    .examples = NELEM(examples),
    .about = "A remark is about days and, where they are named, a point, a parameter and a "
             "statistic. permit, report and\n"
             "day print it beside what it is about. It never changes a figure or a verdict.",
    .run = run,
};
