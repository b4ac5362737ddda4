/* doubts: readings of a month that cannot be right or deserve a question; and their answers. */
#include "command/session.h"

#include "process/process.h"

#include <string.h>

#include "base/poison.h"

struct doubts_options {
    day_t month;
    const char *answer, *reason, *by;
    int as;
};

static const struct option_spec options[] = {
    {"month", OPTION_MONTH, offsetof(struct doubts_options, month), "YYYY-MM",
     "the month; needed but with --answer", false},
    {"answer", OPTION_TEXT, offsetof(struct doubts_options, answer), "ID",
     "record a person's answer to this doubt", false},
    {"reason", OPTION_TEXT, offsetof(struct doubts_options, reason), "TEXT",
     "the answer, for the record", false},
    {"by", OPTION_TEXT, offsetof(struct doubts_options, by), "NAME",
     "who answers, for the record (default: the login)", false},
    AS_OPTION(struct doubts_options),
};

static const struct example examples[] = {
    {"weirbook doubts --month 2025-03", "what to look at before March 2025 is reported"},
    {"weirbook doubts --month 2025-03 --as csv", "the same as CSV"},
    {"weirbook doubts --answer 2025-03-1f2e3d --reason 'storm of the 17th, meter checked'",
     "answers a doubt: it is kept, and listed last from now on"},
};

static const struct column file_columns[] = {
    {"id", NULL, ALIGN_LEFT, false, 0},     {"date", NULL, ALIGN_LEFT, false, 0},
    {"point", NULL, ALIGN_LEFT, false, 0},  {"parameter", NULL, ALIGN_LEFT, false, 0},
    {"value", NULL, ALIGN_RIGHT, false, 0}, {"unit", NULL, ALIGN_LEFT, false, 0},
    {"doubt", NULL, ALIGN_LEFT, false, 0},  {"evidence", NULL, ALIGN_LEFT, true, 0},
};

/* A page has no room for all of it: the day without its month, value and unit in one. */
static const struct column page_columns[] = {
    {NULL, "id", ALIGN_LEFT, false, 0},     {NULL, "day", ALIGN_RIGHT, false, 0},
    {NULL, "at", ALIGN_LEFT, false, 0},     {NULL, "what", ALIGN_LEFT, false, 0},
    {NULL, "value", ALIGN_RIGHT, false, 0}, {NULL, "doubt and evidence", ALIGN_LEFT, true, 0},
};

enum group { GROUP_IMPOSSIBLE, GROUP_QUESTION, GROUP_ANSWERED, GROUPS };

struct answers {
    struct arena *arena;
    struct book_answer *at;
    size_t count, room;
};

struct listing {
    struct arena *arena;
    const struct plant *plant;
    const struct doubt *doubt;
    size_t count;
    struct answers answers;
};

/* ---- gathering ---- */

static enum status take_answer(void *context, const struct book_answer *from, struct fault *f)
{
    struct answers *to = context;
    (void)f;
    struct book_answer *x = arena_push(to->arena, &to->at, &to->count, &to->room, sizeof *x);
    *x = (struct book_answer){.doubt = arena_text(to->arena, from->doubt),
                              .reason = arena_text(to->arena, from->reason),
                              .who = arena_text(to->arena, from->who),
                              .when = arena_text(to->arena, from->when),
                              .batch = from->batch};
    return OK;
}

/* The one in force: the newest. */
static const struct book_answer *answer_to(const struct answers *all, const char *id)
{
    const struct book_answer *found = NULL;
    for (size_t i = 0; i < all->count; i++)
        if (text_equal(all->at[i].doubt, id) && (!found || all->at[i].batch > found->batch))
            found = &all->at[i];
    return found;
}

static enum status gather(struct session *s, const struct plant *plant, day_t month,
                          struct listing *out, struct fault *f)
{
    struct frame_span *columns = NULL;
    struct frame *now = NULL;
    struct frame *past = NULL;
    struct doubt *doubt = NULL;
    size_t count = 0;
    day_t first = month - DOUBT_AROUND - 1;
    day_t last = month_last(month) + DOUBT_AROUND + 1;
    *out = (struct listing){.arena = s->arena, .plant = plant, .answers = {.arena = s->arena}};
    if (book_spans(s->book, s->arena, plant, month, month_last(month), &columns, &count, f) != OK)
        return FAULT;
    for (size_t i = 0; i < count; i++) {
        columns[i].first = first;
        columns[i].last = last;
    }
    if (session_frame(s, plant, columns, count, first, last, &now, f) != OK)
        return FAULT;
    process_doubt_past(s->arena, now, month, &columns, &count);
    if (count > 0 && session_frame(s, plant, columns, count, first, first, &past, f) != OK)
        return FAULT;
    process_doubts(s->arena, now, past, month, &doubt, &out->count);
    out->doubt = doubt;
    return book_answers(s->book, take_answer, &out->answers, f);
}

/* ---- printing ---- */

static enum group group_of(const struct listing *l, const struct doubt *d)
{
    if (answer_to(&l->answers, d->id))
        return GROUP_ANSWERED;
    return doubt_impossible(d->kind) ? GROUP_IMPOSSIBLE : GROUP_QUESTION;
}

static const char *evidence_of(const struct listing *l, const struct doubt *d)
{
    const struct book_answer *answer = answer_to(&l->answers, d->id);
    if (!answer)
        return d->evidence;
    return arena_print(l->arena, "answered by %s on %.10s: %s; %s", answer->who, answer->when,
                       answer->reason, d->evidence);
}

static void add(const struct listing *l, const struct doubt *d, enum group group,
                struct table *shown, struct table *file)
{
    static const enum flag flags[GROUPS] = {FLAG_BAD, FLAG_WATCH, FLAG_LIGHT};
    const char *point = d->point < 0 ? "" : l->plant->points[d->point].id;
    const char *parameter = d->parameter < 0 ? "" : l->plant->parameters[d->parameter].id;
    const char *evidence = evidence_of(l, d);
    int year;
    int month;
    int date;
    day_split(d->day, &year, &month, &date);
    struct cell *page = table_row(shown);
    page[0] = cell_text(d->id);
    page[1] = cell_count(l->arena, date);
    page[2] = cell_text(point);
    page[3] = cell_text(parameter);
    page[4] = cell_text(arena_print(l->arena, "%s%s%s", d->value, *d->unit ? " " : "", d->unit));
    page[5] = cell_flagged(
        cell_text(arena_print(l->arena, "%s: %s", doubt_words[d->kind], evidence)), flags[group]);
    struct cell *row = table_row(file);
    row[0] = cell_text(d->id);
    row[1] = cell_day(l->arena, d->day);
    row[2] = cell_text(point);
    row[3] = cell_text(parameter);
    row[4] = cell_text(d->value);
    row[5] = cell_text(d->unit);
    row[6] = cell_text(doubt_words[d->kind]);
    row[7] = cell_text(evidence);
}

static void print(struct session *s, const struct listing *l, day_t month, int as)
{
    static const char *const titles[GROUPS] = {"Cannot be right", "Deserves a question",
                                               "Answered"};
    struct table *file = table_new(l->arena, "", file_columns, NELEM(file_columns));
    struct page *page = page_new(l->arena);
    char date[11];
    day_write(month, date);
    struct table *shown[GROUPS];
    for (int g = 0; g < GROUPS; g++) {
        shown[g] = table_new(l->arena, titles[g], page_columns, NELEM(page_columns));
        for (size_t i = 0; i < l->count; i++)
            if (group_of(l, &l->doubt[i]) == (enum group)g)
                add(l, &l->doubt[i], (enum group)g, shown[g], file);
    }
    size_t bad = shown[GROUP_IMPOSSIBLE]->rows;
    size_t odd = shown[GROUP_QUESTION]->rows;
    page_heading(
        page, arena_print(l->arena, "%s: doubts about the readings of %.7s", l->plant->name, date));
    page_line(page,
              bad   ? FLAG_BAD
              : odd ? FLAG_WATCH
                    : FLAG_GOOD,
              "%zu cannot be right, %zu deserve%s a question, %zu answered; no value is changed",
              bad, odd, odd == 1 ? "s" : "", shown[GROUP_ANSWERED]->rows);
    for (int g = 0; g < GROUPS; g++) {
        if (shown[g]->rows == 0)
            continue;
        page_space(page);
        page_table(page, shown[g]);
    }
    session_print(s, as, page, file);
    s->found = bad + odd > 0;
}

/* ---- answering ---- */

/* The month a doubt is about, from its id. */
static bool month_of(const char *id, day_t *month)
{
    char text[8] = "";
    if (strlen(id) != 14 || id[7] != '-' || strspn(id + 8, "0123456789abcdef") != 6)
        return false;
    memcpy(text, id, 7);
    return month_parse(text, month);
}

static enum status find(const struct listing *l, const char *id, struct fault *f)
{
    const char **known = arena_alloc(l->arena, (l->count + 1) * sizeof *known);
    for (size_t i = 0; i < l->count; i++) {
        known[i] = l->doubt[i].id;
        if (text_equal(known[i], id))
            return OK;
    }
    const char *near = text_nearest(id, known, l->count);
    return fault_usage(f,
                       near ? arena_print(l->arena, "the nearest is '%s'", near)
                            : arena_print(l->arena, "see: weirbook doubts --month %.7s", id),
                       "there is no doubt '%s'", id);
}

static enum status answer(struct session *s, const struct doubts_options *o, struct fault *f)
{
    struct plant *plant = NULL;
    struct author author = {0};
    struct listing l;
    day_t month;
    int64_t batch = 0;
    if (!o->reason)
        return fault_usage(f, "give it with --reason TEXT", "an answer needs a reason");
    if (!month_of(o->answer, &month))
        return fault_usage(f, "copy it from: weirbook doubts --month YYYY-MM",
                           "'%s' is no doubt's id", o->answer);
    if (o->month != DAY_NONE && o->month != month)
        return fault_usage(f, "leave --month out", "the doubt '%s' is of another month", o->answer);
    if (session_record("--reason", o->reason, f) != OK ||
        session_author(s, o->by, &author, f) != OK ||
        session_book(s, BOOK_WRITE, NULL, &plant, f) != OK ||
        gather(s, plant, month, &l, f) != OK || find(&l, o->answer, f) != OK ||
        book_answer_add(s->book, o->answer, o->reason, &author, &batch, f) != OK)
        return FAULT;
    fprintf(s->out, "%s: answered; the reading stays as it is (batch %lld)\n", o->answer,
            (long long)batch);
    return OK;
}

static enum status run(struct session *s, const void *given, struct fault *f)
{
    const struct doubts_options *o = given;
    struct plant *plant = NULL;
    struct listing l;
    if (o->answer)
        return answer(s, o, f);
    if (o->reason || o->by)
        return fault_usage(f, "name the doubt with --answer ID", "%s goes with --answer",
                           o->reason ? "--reason" : "--by");
    if (o->month == DAY_NONE)
        return fault_usage(f, "give it with --month YYYY-MM", "doubts needs a month");
    if (session_book(s, BOOK_READ, NULL, &plant, f) != OK ||
        gather(s, plant, o->month, &l, f) != OK)
        return FAULT;
    print(s, &l, o->month, o->as);
    return OK;
}

const struct command command_doubts = {
    .name = "doubts",
    .summary = "readings that cannot be right or deserve a question",
    .book = true,
    .option = options,
    .options = NELEM(options),
    .options_size = sizeof(struct doubts_options),
    .example = examples,
    .examples = NELEM(examples),
    .about = "Each doubt names its evidence and where its test comes from. None changes a value; a "
             "person answers it.\n"
             "Exit status 3: something is doubted and not answered.",
    .run = run,
};
