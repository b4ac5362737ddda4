/* The conversation of each sheet: date, point, the runs, what the day shares; or the round from
 * stop to stop. Then the results, and into the book by the way files take. */
#include "command/bench_talk.h"

#include "intake/intake.h"

#include <string.h>

#include "base/poison.h"

#define GO(call)                                                                                   \
    do {                                                                                           \
        enum turn turn_ = (call);                                                                  \
        if (turn_ != TURN_ON)                                                                      \
            return turn_;                                                                          \
    } while (0)

/* ---- date, time, point ---- */

static enum taking read_date(struct talk *t, const struct question *q, const char *typed,
                             struct answer *out)
{
    char date[11];
    day_t day = clock_today(), today = day;
    (void)q;
    if (text_equal(typed, "yesterday"))
        day--;
    else if (!text_equal(typed, "today") && !day_parse(typed, &day)) {
        talk_say(t, "  cannot read '%s' as a date; write it as YYYY-MM-DD", typed);
        return NOT_TAKEN;
    }
    if (day > today) {
        talk_say(t, "  %s is still to come", typed);
        return NOT_TAKEN;
    }
    day_write(day, date);
    out->value = arena_text(t->arena, date);
    return TAKEN;
}

static enum turn ask_date(struct talk *t)
{
    char date[11];
    struct answer a = {0};
    day_t given = t->bench->options->date;
    day_write(given == DAY_NONE ? clock_today() : given, date);
    const struct question q = {.prompt = "date sampled",
                               .offer = arena_text(t->arena, date),
                               .help = "  the day of the sample: YYYY-MM-DD, today or yesterday",
                               .check = read_date,
                               .column = RAW_DATE};
    if (given != DAY_NONE && !t->resumed)
        a.value = q.offer;
    else
        GO(talk_ask(t, &q, &a));
    t->date = a.value;
    if (!day_parse(t->date, &t->day)) {
        fault_at(t->fault, &(struct place){.file = t->journal.path, .line = 2},
                 "correct it, or throw the sheet away", "'%s' is no date", t->date);
        return TURN_FAULT;
    }
    return TURN_ON;
}

static enum taking read_time(struct talk *t, const struct question *q, const char *typed,
                             struct answer *out)
{
    int minute = 0;
    char time[6];
    (void)q;
    if (!minute_parse(typed, &minute)) {
        talk_say(t, "  cannot read '%s' as a time; write it as HH:MM", typed);
        return NOT_TAKEN;
    }
    minute_write(minute, time);
    out->value = arena_text(t->arena, time);
    return TAKEN;
}

static enum turn ask_time(struct talk *t)
{
    struct answer a = {0};
    const struct question q = {.prompt = "time sampled",
                               .optional = true,
                               .help = "  HH:MM, by the plant's clock",
                               .check = read_time,
                               .column = RAW_TIME};
    GO(talk_ask(t, &q, &a));
    t->time = a.value;
    return TURN_ON;
}

static enum taking read_point(struct talk *t, const struct question *q, const char *typed,
                              struct answer *out)
{
    const struct plant *plant = t->bench->plant;
    int point = plant_point(plant, typed);
    (void)q;
    for (size_t i = 0; point < 0 && i < plant->point_count; i++)
        if (text_equal_nocase(plant->points[i].id, typed))
            point = (int)i;
    if (point < 0) {
        const char *nearest = plant_nearest_point(plant, typed);
        talk_say(t, nearest ? "  no point '%s'; the nearest is '%s'" : "  no point '%s'", typed,
                 nearest);
        return NOT_TAKEN;
    }
    out->value = plant->points[point].id;
    return TAKEN;
}

static bool point_is_done(const struct talk *t, const char *point)
{
    for (size_t i = 0; i < t->rows; i++)
        if (text_equal(t->row[i].cell[RAW_POINT], point))
            return true;
    return false;
}

/* Where this sheet was taken before, and has not been yet; at first the effluent if nowhere. */
static enum status likely_point(struct talk *t, const char **out)
{
    const struct plant *plant = t->bench->plant;
    const struct bench_sheet *sheet = t->bench->its;
    *out = NULL;
    for (size_t p = 0; p < plant->point_count && !*out; p++)
        for (size_t g = 0; g < sheet->arguments && !*out; g++) {
            const char *value = NULL, *unit = NULL, *id = plant->points[p].id;
            if (sheet->argument[g].once || point_is_done(t, id))
                continue;
            if (book_raw_last(t->bench->session->book, t->arena, sheet->name, id, "1",
                              sheet->argument[g].name, &value, &unit, t->fault) != OK)
                return FAULT;
            if (value)
                *out = id;
            break;
        }
    for (size_t p = 0; p < plant->point_count && !*out && t->rows == 0; p++)
        if (plant->points[p].role == ROLE_EFFLUENT)
            *out = plant->points[p].id;
    return OK;
}

static const char *points_told(struct talk *t, const char ***words)
{
    const struct plant *plant = t->bench->plant;
    struct text told;
    text_init(&told, 1 << 16);
    *words = arena_alloc(t->arena, (plant->point_count + 1) * sizeof **words);
    for (size_t i = 0; i < plant->point_count; i++) {
        (*words)[i] = plant->points[i].id;
        text_print(&told, "%s  %-10s %s", i ? "\n" : "", plant->points[i].id,
                   plant->points[i].name);
    }
    const char *help = arena_text(t->arena, told.at);
    text_free(&told);
    return help;
}

/* The first point is needed; an empty answer to a later one ends the points. */
static enum turn ask_point(struct talk *t, bool first, struct answer *a)
{
    const char *likely = NULL;
    const char **words = NULL;
    struct question q = {.prompt = first ? "point" : "another point",
                         .optional = !first,
                         .ends = !first,
                         .check = read_point,
                         .column = RAW_POINT};
    t->time = "";
    t->run = "";
    if (first && t->bench->options->point && !t->resumed) {
        *a = (struct answer){.kind = ANSWER_VALUE, .value = t->bench->options->point};
        t->point = a->value;
        return TURN_ON;
    }
    if (talk_live(t) && likely_point(t, &likely) != OK)
        return TURN_FAULT;
    q.help = points_told(t, &words);
    q.words = words;
    q.words_count = t->bench->plant->point_count;
    /* A later point is opened like a run: by its name or "=", so that an empty line ends them. */
    q.offer = likely;
    q.opens = !first;
    GO(talk_ask(t, &q, a));
    t->point = a->value;
    return TURN_ON;
}

/* ---- arguments ---- */

/* "12.5 mL": the last word is a unit when it is known as one. */
static void split_unit(struct arena *a, const char *typed, struct answer *out)
{
    const char *space = strrchr(typed, ' ');
    out->value = typed;
    out->unit = "";
    if (space && unit_find(space + 1)) {
        size_t n = (size_t)(space - typed);
        while (n > 0 && typed[n - 1] == ' ')
            n--;
        out->value = arena_bytes(a, typed, n);
        out->unit = space + 1;
    }
}

static enum taking read_argument(struct talk *t, const struct question *q, const char *typed,
                                 struct answer *out)
{
    const struct bench_argument *g = q->about;
    struct fault f = {0};
    out->value = typed;
    if (text_equal(g->name, "parameter") && plant_parameter(t->bench->plant, typed) < 0) {
        const char *nearest = plant_nearest_parameter(t->bench->plant, typed);
        talk_say(t, nearest ? "  no parameter '%s'; the nearest is '%s'" : "  no parameter '%s'",
                 typed, nearest);
        return NOT_TAKEN;
    }
    if (!g->text)
        split_unit(t->arena, typed, out);
    if (bench_value(t->arena, g, out->value, out->unit, &f) == OK)
        return TAKEN;
    talk_say(t, "  %s", f.text);
    return NOT_TAKEN;
}

static const char *run_told(struct talk *t)
{
    if (*t->run == '\0')
        return "";
    bool sample = bench_run_of(t->run) == BENCH_SAMPLE;
    return sample ? arena_print(t->arena, "%s %s: ", t->bench->its->run_name, t->run)
                  : arena_print(t->arena, "%s: ", t->run);
}

static const char *argument_help(struct talk *t, const struct bench_argument *g)
{
    const char *bounds = sheets_bounds(t->arena, g);
    const char *unit = sheets_unit(g);
    return arena_print(t->arena, "  %s: %s%s%s%s%s%s%s", g->name, g->asked, *unit ? ", in " : "",
                       unit, *bounds ? "; " : "", bounds, g->fallback ? "; without it: " : "",
                       g->fallback ? g->fallback : "");
}

/* The value of the run before, for what carries; NULL: none. */
static const char *value_before(const struct talk *t, const struct bench_argument *g)
{
    for (size_t i = t->rows; i-- > 0;)
        if (text_equal(t->row[i].cell[RAW_ARGUMENT], g->name) &&
            bench_run_of(t->row[i].cell[RAW_RUN]) == bench_run_of(t->run))
            return arena_print(t->arena, "%s%s%s", t->row[i].cell[RAW_VALUE],
                               *t->row[i].cell[RAW_UNIT] ? " " : "", t->row[i].cell[RAW_UNIT]);
    return NULL;
}

static enum status find_offer(struct talk *t, const struct bench_argument *g, const char **out)
{
    const char *value = NULL, *unit = NULL;
    *out = g->fallback;
    if (!talk_live(t))
        return OK;
    if (g->carries) {
        if (book_raw_last(t->bench->session->book, t->arena, t->bench->sheet, t->point, t->run,
                          g->name, &value, &unit, t->fault) != OK)
            return FAULT;
        const char *before = value ? NULL : value_before(t, g);
        if (value)
            *out = arena_print(t->arena, "%s%s%s", value, *unit ? " " : "", unit);
        else if (before)
            *out = before;
    }
    if (text_equal(g->name, "analyst")) {
        const char *before = value_before(t, g);
        *out = before ? before : t->bench->options->by;
    }
    return OK;
}

static enum turn ask_argument(struct talk *t, const struct bench_argument *g, bool opens,
                              struct answer *out)
{
    const char *unit = sheets_unit(g);
    struct question q = {.optional = g->optional || g->fallback,
                         .opens = opens,
                         .ends = opens,
                         .help = argument_help(t, g),
                         .check = read_argument,
                         .about = g,
                         .column = RAW_VALUE,
                         .argument = g->name};
    q.prompt = arena_print(t->arena, "%s%s%s%s", run_told(t), g->asked, *unit ? ", " : "", unit);
    if (find_offer(t, g, &q.offer) != OK)
        return TURN_FAULT;
    GO(talk_ask(t, &q, out));
    t->done = t->done || out->kind == ANSWER_DONE;
    return out->kind == ANSWER_VALUE ? talk_row(t, g->name, out) : TURN_ON;
}

/* ---- runs ---- */

static const char *run_name(struct arena *a, enum bench_run kind, int n)
{
    if (kind == BENCH_SAMPLE)
        return arena_print(a, "%d", n);
    return n == 1 ? bench_run_words[kind] : arena_print(a, "%s-%d", bench_run_words[kind], n);
}

static enum taking read_minutes(struct talk *t, const struct question *q, const char *typed,
                                struct answer *out)
{
    struct decimal d;
    (void)q;
    out->value = typed;
    if (decimal_parse(typed, strlen(typed), &d) != DECIMAL_FINE || d.coefficient < 0) {
        talk_say(t, "  '%s' is no number of minutes", typed);
        return NOT_TAKEN;
    }
    for (size_t i = 0; i < t->rows; i++)
        if (text_equal(t->row[i].cell[RAW_RUN], typed) &&
            text_equal(t->row[i].cell[RAW_POINT], t->point) &&
            text_equal(t->row[i].cell[RAW_TIME], t->time)) {
            talk_say(t, "  %s minutes stand there already", typed);
            return NOT_TAKEN;
        }
    return TAKEN;
}

/* Names the n-th run. One that is named by its minutes is asked for, after the one at 30 that gives
 * the result. *more is false when there is none. */
static enum turn name_run(struct talk *t, enum bench_run kind, int n, bool *more)
{
    static const struct question q = {.prompt = "another reading, at how many minutes",
                                      .opens = true,
                                      .ends = true,
                                      .help = "  minutes after the start",
                                      .check = read_minutes,
                                      .column = RAW_RUN};
    struct answer a = {0};
    *more = true;
    t->run = run_name(t->arena, kind, n);
    if (!text_equal(t->bench->its->run_name, "minutes"))
        return TURN_ON;
    t->run = "30";
    if (n == 1)
        return TURN_ON;
    GO(talk_ask(t, &q, &a));
    t->run = a.value;
    t->done = a.kind == ANSWER_DONE;
    *more = a.kind == ANSWER_VALUE;
    return TURN_ON;
}

/* Runs of one kind, until one is not opened. */
static enum turn ask_runs(struct talk *t, enum bench_run kind)
{
    const struct bench_sheet *sheet = t->bench->its;
    if ((sheet->runs & 1u << kind) == 0)
        return TURN_ON;
    for (int n = 1; !t->done; n++) {
        bool opens = true, more = true;
        GO(name_run(t, kind, n, &more));
        if (!more)
            return TURN_ON;
        for (size_t i = 0; i < sheet->arguments; i++) {
            const struct bench_argument *g = &sheet->argument[i];
            struct answer a = {0};
            if (g->once || (g->runs & 1u << kind) == 0)
                continue;
            GO(ask_argument(t, g, opens, &a));
            if (opens && a.kind != ANSWER_VALUE)
                return TURN_ON;
            opens = false;
        }
        if (opens)
            return TURN_ON; /* nothing is asked of this kind */
    }
    return TURN_ON;
}

/* What is asked once: first what the runs are read with, behind them the person's own words. */
static enum turn ask_once(struct talk *t, bool after)
{
    const struct bench_sheet *sheet = t->bench->its;
    t->run = "";
    for (size_t i = 0; i < sheet->arguments; i++) {
        const struct bench_argument *g = &sheet->argument[i];
        struct answer a = {0};
        bool behind = text_equal(g->name, "note") || text_equal(g->name, "method");
        if (g->once && behind == after)
            GO(ask_argument(t, g, false, &a));
    }
    return TURN_ON;
}

static enum turn ask_point_runs(struct talk *t)
{
    GO(ask_time(t));
    GO(ask_once(t, false));
    GO(ask_runs(t, BENCH_SAMPLE));
    return t->done ? TURN_ON : ask_once(t, true);
}

/* ---- the end: results, and into the book ---- */

static enum taking read_yes(struct talk *t, const struct question *q, const char *typed,
                            struct answer *out)
{
    (void)q;
    bool yes = text_equal_nocase(typed, "yes") || text_equal_nocase(typed, "y");
    if (!yes && !text_equal_nocase(typed, "no") && !text_equal_nocase(typed, "n")) {
        talk_say(t, "  answer yes or no");
        return NOT_TAKEN;
    }
    out->value = yes ? "yes" : "no";
    return TAKEN;
}

static enum turn enter(struct talk *t, struct bench_results *results)
{
    const struct bench *b = t->bench;
    if (sheets_enter(b, results, t->fault) != OK)
        return TURN_FAULT;
    sheets_tell_counts(b, results);
    b->session->found = b->session->found || sheets_found(results);
    if (b->options->dry_run)
        return TURN_STOP;
    return journal_remove(&t->journal, t->fault) == OK ? TURN_ON : TURN_FAULT;
}

static enum turn finish(struct talk *t)
{
    const struct bench *b = t->bench;
    struct bench_results results;
    struct answer a = {0};
    char when[17];
    const struct question q = {.prompt = "enter into the book?",
                               .offer = "yes",
                               .help = "  yes: the book takes the results and the raw values\n"
                                       "  no: the sheet is kept, to be gone on with",
                               .check = read_yes,
                               .column = RAW_COLUMNS};
    if (t->old_next < t->olds) {
        GO(talk_ask(t, &q, &a)); /* says where it is stuck */
        return TURN_FAULT;
    }
    if (talk_catch_up(t) != OK)
        return TURN_FAULT;
    if (t->rows == 0) {
        talk_say(t, "nothing was entered");
        return TURN_ON;
    }
    clock_wall(-1, when);
    const char *name = arena_print(t->arena, "bench %s at the terminal, %s", b->sheet, when);
    if (sheets_read(b, t->journal.path, name, &results, t->fault) != OK)
        return TURN_FAULT;
    fputc('\n', b->session->out);
    sheets_tell(b, &results, false);
    fputc('\n', b->session->out);
    GO(talk_ask(t, &q, &a));
    return text_equal(a.value, "yes") ? enter(t, &results) : TURN_STOP;
}

static enum turn sheet_flow(struct talk *t)
{
    const struct bench_sheet *sheet = t->bench->its;
    struct answer a = {0};
    GO(ask_date(t));
    if (sheet->pointless) {
        GO(ask_point_runs(t));
    } else {
        for (bool first = true; !t->done; first = false) {
            GO(ask_point(t, first, &a));
            t->done = a.kind == ANSWER_DONE;
            if (a.kind != ANSWER_VALUE)
                break;
            GO(ask_point_runs(t));
        }
        t->point = t->time = "";
    }
    for (enum bench_run kind = BENCH_BLANK; kind < BENCH_RUNS && !t->done; kind++)
        GO(ask_runs(t, kind));
    return finish(t);
}

/* ---- the round ---- */

static enum taking outside(struct talk *t, const struct parameter *p, const struct reading *r)
{
    const struct unit *unit = unit_at(r->unit);
    const struct fraction *x =
        unit_convert(t->arena, fraction_from_decimal(t->arena, r->value), unit, p->unit);
    bool low = p->low.set && fraction_compare(x, fraction_from_decimal(t->arena, p->low.value)) < 0;
    bool high =
        p->high.set && fraction_compare(x, fraction_from_decimal(t->arena, p->high.value)) > 0;
    if (!low && !high)
        return TAKEN;
    talk_say(t, "  %s %s is outside %s", r->text, unit->name, sheets_limits(t->arena, p));
    return TAKEN_IF_REPEATED;
}

static enum taking read_stop(struct talk *t, const struct question *q, const char *typed,
                             struct answer *out)
{
    const struct bench_stop *stop = q->about;
    const struct parameter *p = &t->bench->plant->parameters[stop->stop.parameter];
    struct reading r = {.minute = -1};
    split_unit(t->arena, typed, out);
    const struct unit *unit = *out->unit ? unit_find(out->unit) : p->unit;
    if (!unit_same_kind(unit, p->unit)) {
        talk_say(t, "  '%s' is no unit of %s; give it in %s", out->unit, p->id, p->unit->name);
        return NOT_TAKEN;
    }
    r.unit = (uint16_t)unit_index(unit);
    enum reason reason = intake_value(&r, p, out->value, false);
    if (reason == REASON_COUNT && r.qualifier != QUALIFIER_CODE &&
        !strpbrk(out->value, "0123456789"))
        reason = REASON_NO_LIMIT_FOR_ND; /* ND and the like: a round's value has its number */
    if (reason == REASON_COUNT &&
        (r.qualifier == QUALIFIER_DNQ || r.qualifier == QUALIFIER_DNQ_BARE))
        reason = REASON_NOT_A_NUMBER;
    if (reason == REASON_NO_LIMIT_FOR_ND) {
        talk_say(t, "  cannot take '%s': write <n with its limit", typed);
        return NOT_TAKEN;
    }
    if (reason != REASON_COUNT) {
        talk_say(t, "  cannot take '%s': %s", typed, reason_todo[reason]);
        return NOT_TAKEN;
    }
    return r.qualifier == QUALIFIER_CODE ? TAKEN : outside(t, p, &r);
}

static const char *stop_prompt(struct talk *t, const struct bench_stop *stop)
{
    const struct plant *plant = t->bench->plant;
    const struct parameter *p = &plant->parameters[stop->stop.parameter];
    const char *limits = sheets_limits(t->arena, p);
    const char *last = "";
    char date[11];
    if (stop->has_last) {
        day_write(stop->last.day, date);
        const char *unit = unit_at(stop->last.unit)->name;
        last = arena_print(t->arena, "last %s%s%s on %s", stop->last.text,
                           text_equal(unit, p->unit->name) ? "" : " ",
                           text_equal(unit, p->unit->name) ? "" : unit, date);
    }
    const char *both = *last || *limits ? arena_print(t->arena, " (%s%s%s)", last,
                                                      *last && *limits ? "; " : "", limits)
                                        : "";
    return arena_print(t->arena, "%s %s%s%s, %s%s", plant->points[stop->stop.point].id, p->id,
                       *stop->stop.sample ? " " : "", stop->stop.sample, p->unit->name, both);
}

static const char *stop_help(struct talk *t, const struct bench_stop *stop)
{
    const struct plant *plant = t->bench->plant;
    return arena_print(t->arena,
                       "  %s at %s; a value outside its bounds must be typed twice\n"
                       "  also <n, >n, E n, and the no-data codes",
                       plant->parameters[stop->stop.parameter].name,
                       plant->points[stop->stop.point].name);
}

static enum turn round_flow(struct talk *t)
{
    static const struct bench_argument analyst = {.name = "analyst",
                                                  .unit = "",
                                                  .asked = "who reads",
                                                  .optional = true,
                                                  .text = true,
                                                  .once = true};
    struct answer who = {0};
    struct bench_stop *stop = NULL;
    size_t count = 0;
    GO(ask_date(t));
    GO(ask_argument(t, &analyst, false, &who));
    GO(ask_time(t));
    if (sheets_stops(t->bench, t->day, &stop, &count, t->fault) != OK)
        return TURN_FAULT;
    if (count == 0)
        talk_say(t, "  no stops: write round.csv, or load readings of the two weeks before");
    for (size_t i = 0; i < count && !t->done; i++) {
        const struct plant *plant = t->bench->plant;
        struct answer a = {0};
        t->point = plant->points[stop[i].stop.point].id;
        t->run = stop[i].stop.sample;
        const struct question q = {.prompt = stop_prompt(t, &stop[i]),
                                   .optional = true,
                                   .ends = true,
                                   .help = stop_help(t, &stop[i]),
                                   .check = read_stop,
                                   .about = &stop[i],
                                   .column = RAW_VALUE,
                                   .argument = plant->parameters[stop[i].stop.parameter].id};
        GO(talk_ask(t, &q, &a));
        t->done = a.kind == ANSWER_DONE;
        if (a.kind == ANSWER_VALUE)
            GO(talk_row(t, q.argument, &a));
    }
    return finish(t);
}

/* ---- an unfinished sheet ---- */

enum { GO_ON, LOOK, THROW_AWAY };

static enum taking read_choice(struct talk *t, const struct question *q, const char *typed,
                               struct answer *out)
{
    static const char *const words[] = {"go on", "look", "throw away"};
    (void)q;
    for (size_t i = 0; i < NELEM(words); i++)
        if (text_equal_nocase(words[i], typed)) {
            out->value = words[i];
            return TAKEN;
        }
    talk_say(t, "  answer go on, look or throw away");
    return NOT_TAKEN;
}

static void look(struct talk *t)
{
    for (size_t i = 0; i < t->olds; i++) {
        const char *const *c = t->old[i].cell;
        talk_say(t, "  %s%s%s%s%s%s%s %s: %s%s%s", c[RAW_DATE], *c[RAW_TIME] ? " " : "",
                 c[RAW_TIME], *c[RAW_POINT] ? " " : "", c[RAW_POINT], *c[RAW_RUN] ? " " : "",
                 c[RAW_RUN], c[RAW_ARGUMENT], c[RAW_VALUE], *c[RAW_UNIT] ? " " : "", c[RAW_UNIT]);
    }
}

static enum turn offer_unfinished(struct talk *t)
{
    struct raw_value *old = NULL;
    size_t olds = 0;
    char when[17];
    if (journal_read(&t->journal, &old, &olds, t->fault) != OK)
        return TURN_FAULT;
    if (olds == 0)
        return TURN_ON;
    journal_when(&t->journal, when);
    talk_say(t, "An unfinished sheet of %s holds %zu value%s (%s).", when, olds,
             olds == 1 ? "" : "s", t->journal.path);
    const struct question q = {.prompt = "go on, look, or throw away?",
                               .offer = "go on",
                               .help = "  throwing away gives the file another name; nothing is "
                                       "deleted",
                               .check = read_choice,
                               .column = RAW_COLUMNS};
    struct answer a = {.value = "look"};
    t->rows = olds; /* the file is as it should be while this is asked */
    for (t->old = old; text_equal(a.value, "look");) {
        GO(talk_ask(t, &q, &a));
        t->answers = t->next = 0;
        t->olds = olds;
        if (text_equal(a.value, "look"))
            look(t);
        t->olds = 0;
    }
    t->rows = 0;
    if (text_equal(a.value, "throw away")) {
        const char *name = "";
        if (journal_discard(&t->journal, &name, t->fault) != OK)
            return TURN_FAULT;
        talk_say(t, "  kept as %s", name);
        return TURN_ON;
    }
    t->olds = olds;
    t->resumed = true;
    return TURN_ON;
}

/* ---- the whole ---- */

static enum status ended(struct talk *t, enum turn turn, struct fault *f)
{
    if (turn == TURN_ON)
        return OK;
    if (turn == TURN_FAULT)
        return FAULT;
    if (t->journal.fd < 0)
        return fault_at(f, NULL, "begin again when it suits", "stopped; nothing had been entered");
    return fault_at(f, NULL,
                    arena_print(t->arena, "go on with: weirbook bench %s", t->bench->sheet),
                    "stopped; the sheet is kept, unfinished, in %s", t->journal.path);
}

static enum turn talk_all(struct talk *t)
{
    const struct bench_sheet *sheet = t->bench->its;
    talk_say(t, "%s%s", t->bench->plant->name, sheet ? "" : ": the round");
    if (sheet)
        talk_say(t, "%s (%s)", sheet->title, sheet->source);
    if (sheet && sheet->beware)
        talk_say(t, "Mind: %s", sheet->beware);
    talk_say(t, "? explains, undo takes the last entry back, quit stops and keeps the sheet.");
    enum turn turn = offer_unfinished(t);
    return turn == TURN_ON ? talk_run(t, sheet ? sheet_flow : round_flow) : turn;
}

enum status sheets_ask(struct bench *b, struct fault *f)
{
    struct talk t = {.bench = b, .arena = b->session->arena, .fault = f, .journal = {.fd = -1}};
    t.date = t.time = t.point = t.run = "";
    if (journal_open(&t.journal, t.arena, b->session->book_path, b->sheet, f) != OK) {
        journal_close(&t.journal);
        return FAULT;
    }
    t.line = bench_line_open(t.arena, b->session->out);
    enum turn turn = talk_all(&t);
    bench_line_close(t.line);
    enum status rc = ended(&t, turn, f);
    journal_close(&t.journal);
    return rc;
}
