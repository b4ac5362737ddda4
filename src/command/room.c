/* room: what the samples still to come may be, for every limit with a period that is not over. */
#include "command/session.h"

#include "base/poison.h"

struct room_options {
    day_t on;
    int as;
};

static const struct option_spec options[] = {
    {"on", OPTION_DAY, offsetof(struct room_options, on), "DATE",
     "look from that day: later readings are ignored (default: today)", false},
    AS_OPTION(struct room_options),
};

static const struct example examples[] = {
    {"weirbook room --on 2025-03-14", "what is left on the 14th, the tightest limit first"},
    {"weirbook room --on 2025-03-14 --as csv", "the same as CSV, one row for each limit"},
};

/* "BOD5 load": the parameter as the limit has it, and what of it. */
static const char *what_of(struct arena *a, const struct limit *l)
{
    if (l->basis != BASIS_LOAD && l->basis != BASIS_REMOVAL)
        return l->parameter_text;
    return arena_print(a, "%s %s", l->parameter_text, basis_words[l->basis]);
}

/* "EFF BOD5 load, month to 03-31": short, so that a limit has one line. */
static const char *name_of(struct arena *a, const struct room_row *r)
{
    static const char *const periods[STATISTICS] = {
        [STAT_WEEKLY_AVERAGE] = "week",
        [STAT_MONTHLY_AVERAGE] = "month",
        [STAT_ROLLING_7_DAY] = "7 days",
        [STAT_ROLLING_30_DAY] = "30 days",
        [STAT_MONTHLY_GEOMEAN] = "month geomean",
        [STAT_WEEKLY_GEOMEAN] = "week geomean",
        [STAT_MONTHLY_TOTAL] = "month total",
        [STAT_QUARTERLY_AVERAGE] = "quarter",
        [STAT_SEMIANNUAL_AVERAGE] = "half-year",
        [STAT_ANNUAL_AVERAGE] = "year",
        [STAT_ROLLING_12_MONTH] = "12 months",
        [STAT_ANNUAL_TOTAL] = "year total",
        [STAT_MONTHLY_MEDIAN] = "month median",
        [STAT_ROLLING_7_DAY_MEDIAN] = "7 days median",
        [STAT_ROLLING_30_DAY_GEOMEAN] = "30 days geomean",
        [STAT_MONTHLY_SAMPLES] = "month samples",
        [STAT_QUARTERLY_SAMPLES] = "quarter samples",
        [STAT_ANNUAL_SAMPLES] = "year samples",
    };
    const struct limit *l = r->limit;
    const char *period = periods[l->statistic];
    char to[11];

    day_write(r->to, to);
    return arena_print(a, "%s %s, %s to %s", l->point_text, what_of(a, l),
                       period ? period : l->statistic_text, to + 5);
}

/* ---- for programs ---- */

static const char *all_notes(struct arena *a, const struct room_row *r)
{
    return *r->note && *r->single_note ? arena_print(a, "%s; %s", r->note, r->single_note)
           : *r->note                  ? r->note
                                       : r->single_note;
}

static struct table *make_table(struct arena *a, const struct room_row *rows, size_t count)
{
    static const struct column columns[] = {
        {.key = "outfall"},     {.key = "point"},        {.key = "parameter"}, {.key = "basis"},
        {.key = "statistic"},   {.key = "from"},         {.key = "to"},        {.key = "taken"},
        {.key = "remaining"},   {.key = "so_far"},       {.key = "room"},      {.key = "single"},
        {.key = "projected_7"}, {.key = "projected_30"}, {.key = "unit"},      {.key = "limit"},
        {.key = "note"},
    };
    struct table *t = table_new(a, "", columns, NELEM(columns));

    for (size_t i = 0; i < count; i++) {
        const struct room_row *r = &rows[i];
        const struct limit *l = r->limit;
        struct cell *c = table_row(t);

        *c++ = cell_text(l->outfall);
        *c++ = cell_text(l->point_text);
        *c++ = cell_text(l->parameter_text);
        *c++ = cell_text(basis_words[l->basis]);
        *c++ = cell_text(l->statistic_text);
        *c++ = cell_day(a, r->from);
        *c++ = cell_day(a, r->to);
        *c++ = cell_count(a, r->taken);
        *c++ = cell_count(a, r->remaining);
        *c++ = cell_text(r->so_far); /* text: it may carry a sign */
        *c++ = cell_number(r->room);
        *c++ = cell_number(r->single);
        *c++ = cell_text(r->projected_7);
        *c++ = cell_text(r->projected_30);
        *c++ = cell_text(l->unit_text);
        *c++ = cell_number(l->limit_text);
        *c = cell_text(all_notes(a, r));
    }
    return t;
}

/* ---- for people ---- */

static bool is_found(const struct room_row *r)
{
    return r->state == ROOM_NONE && !r->let_off && r->limit->bound != BOUND_TARGET;
}

static const char *room_text(const struct room_row *r)
{
    switch (r->state) {
    case ROOM_NONE:
        return "NONE";
    case ROOM_ANY:
        return "any";
    case ROOM_LEFT:
        return r->room;
    default:
        return "-";
    }
}

static const char *bound_text(struct arena *a, const struct limit *l)
{
    static const char *const signs[BOUNDS] = {
        [BOUND_MAX] = "<=",  [BOUND_MIN] = ">=",  [BOUND_BELOW] = "<",
        [BOUND_ABOVE] = ">", [BOUND_REPORT] = "", [BOUND_TARGET] = "<="};

    return arena_print(a, "%s%s %s", signs[l->bound], l->limit_text, l->unit_text);
}

static struct table *make_lines(struct arena *a, const struct room_row *rows, size_t count)
{
    static const struct column columns[] = {
        {.title = "limit", .wraps = true},
        {.title = "taken, left", .align = ALIGN_RIGHT},
        {.title = "so far", .align = ALIGN_POINT},
        {.title = "room", .align = ALIGN_POINT},
        {.title = "single", .align = ALIGN_POINT},
        {.title = "7 d", .align = ALIGN_POINT, .rank = 2},
        {.title = "30 d", .align = ALIGN_POINT, .rank = 1},
        {.title = "must be"},
    };
    struct table *t = table_new(a, "", columns, NELEM(columns));

    for (size_t i = 0; i < count; i++) {
        const struct room_row *r = &rows[i];
        struct cell *c = table_row(t);

        c[0] = cell_text(name_of(a, r));
        c[1] = cell_text(arena_print(a, "%ld + %ld", r->taken, r->remaining));
        c[2] = cell_text(r->so_far);
        c[3] = cell_text(room_text(r));
        c[4] = cell_text(r->single);
        c[5] = cell_text(r->projected_7);
        c[6] = cell_text(r->projected_30);
        c[7] = cell_text(bound_text(a, r->limit));
        if (r->state == ROOM_NONE)
            c[3] = cell_flagged(c[3], is_found(r) ? FLAG_BAD : FLAG_WATCH);
    }
    return t;
}

/* Those without room stand above all, the other notes below. */
static void add_notes(struct page *p, const struct room_row *rows, size_t count, bool none)
{
    bool any = false;

    for (size_t i = 0; i < count; i++) {
        const struct room_row *r = &rows[i];

        if (!*r->note || (r->state == ROOM_NONE) != none)
            continue;
        if (!any && !none)
            page_heading(p, "Notes");
        any = true;
        page_line(p,
                  is_found(r) ? FLAG_BAD
                  : none      ? FLAG_WATCH
                              : FLAG_NONE,
                  "%s: %s", name_of(p->arena, r), r->note);
    }
    if (any && !none)
        page_space(p);
}

static struct page *make_page(struct arena *a, const struct plant *plant, day_t on,
                              const struct room_row *rows, size_t count)
{
    struct page *p = page_new(a);
    char date[11];

    day_write(on, date);
    page_heading(p, arena_print(a, "%s, room on %s", plant->name, date));
    if (count == 0) {
        page_line(p, FLAG_NONE, "no limit with a number has a period open on this day");
        return p;
    }
    add_notes(p, rows, count, true);
    page_space(p);
    page_table(p, make_lines(a, rows, count));
    page_space(p);
    add_notes(p, rows, count, false);
    page_line(p, FLAG_NONE,
              "left: samples still to come by the permit's frequency. room: what each of them may "
              "be (of a minimum: must be) on average, rounded to the safe side. single: what one "
              "may be, the others as so far. 7 d, 30 d: the period's figure if the rest "
              "looks like the last 7 or 30 days.");
    return p;
}

static enum status run(struct session *s, const void *given, struct fault *f)
{
    const struct room_options *o = given;
    day_t on = o->on == DAY_NONE ? clock_today() : o->on;
    struct plant *plant = NULL;
    struct frame *frame = NULL;
    struct frame_span *needs = NULL;
    struct room_row *rows = NULL;
    size_t count = 0;
    if (session_book(s, BOOK_READ, NULL, &plant, f) != OK)
        return FAULT;
    permit_room_needs(s->arena, plant, on, &needs, &count);
    if (session_frame(s, plant, needs, count, on, on, &frame, f) != OK ||
        permit_room(s->arena, frame, on, &rows, &count, f) != OK)
        return FAULT;
    session_print(s, o->as, make_page(s->arena, plant, on, rows, count),
                  make_table(s->arena, rows, count));
    for (size_t i = 0; i < count; i++)
        s->found = s->found || is_found(&rows[i]);
    return OK;
}

const struct command command_room = {
    .name = "room",
    .summary = "what the samples still to come may be before a limit is exceeded",
    .book = true,
    .option = options,
    .options = NELEM(options),
    .options_size = sizeof(struct room_options),
    .example = examples,
    .examples = NELEM(examples),
    .about = "Exit status 3: a limit has no room left. The figures follow weirbook-rules(7); what "
             "is assumed of the\n"
             "samples to come stands in the notes. A licensed operator decides what to do.",
    .run = run,
};
