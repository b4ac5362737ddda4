/* Questions and answers: taken back, gone on with, and never lost. */
#include "command/bench_talk.h"

#include <string.h>

#include "base/poison.h"

enum { SAID_MOST = 1 << 16 };

void talk_say(struct talk *t, const char *format, ...)
{
    struct text said, shown;
    va_list ap;
    va_start(ap, format);
    text_init(&said, SAID_MOST);
    text_init(&shown, SAID_MOST);
    text_vprint(&said, format, ap);
    va_end(ap);
    for (const char *at = said.at; *at;) { /* line by line: a line's end is not to be escaped */
        size_t n = strcspn(at, "\n");
        text_add_escaped(&shown, arena_bytes(t->arena, at, n));
        text_add_char(&shown, '\n');
        at += n + (at[n] == '\n');
    }
    fputs(shown.at, t->bench->session->out);
    fflush(t->bench->session->out);
    text_free(&said);
    text_free(&shown);
}

bool talk_live(const struct talk *t)
{
    return t->next >= t->answers && t->old_next >= t->olds;
}

/* ---- what the unfinished sheet answers ---- */

static bool row_is_here(const struct talk *t, const struct raw_value *r, const char *argument)
{
    return text_equal(r->cell[RAW_DATE], t->date) && text_equal(r->cell[RAW_TIME], t->time) &&
           text_equal(r->cell[RAW_POINT], t->point) && text_equal(r->cell[RAW_RUN], t->run) &&
           text_equal(r->cell[RAW_ARGUMENT], argument);
}

/* A question that the next row does not answer was left out then, if it could be. */
static bool remembered(struct talk *t, const struct question *q, struct answer *out, bool *stuck)
{
    const struct raw_value *r = &t->old[t->old_next];
    *out = (struct answer){.kind = ANSWER_NONE, .value = "", .unit = "", .prompt = q->prompt};
    if (q->column == RAW_VALUE && row_is_here(t, r, q->argument)) {
        out->kind = ANSWER_VALUE;
        out->value = r->cell[RAW_VALUE];
        out->unit = r->cell[RAW_UNIT];
        t->old_next++;
        return true;
    }
    /* A point or run read off the same row twice would go round for ever. */
    bool names = q->column == RAW_POINT || q->column == RAW_RUN;
    bool again = names && t->old_named == t->old_next + 1;
    bool there = q->column != RAW_RUN || (text_equal(r->cell[RAW_TIME], t->time) &&
                                          text_equal(r->cell[RAW_POINT], t->point));
    if (names && there)
        t->old_named = t->old_next + 1;
    if (!again && there && q->column < RAW_VALUE && *r->cell[q->column] != '\0') {
        out->kind = ANSWER_VALUE;
        out->value = r->cell[q->column];
        return true;
    }
    *stuck = again || q->column == RAW_COLUMNS || !(q->optional || q->opens);
    return !*stuck;
}

static enum turn stuck_at(struct talk *t)
{
    const struct raw_value *r = &t->old[t->old_next];
    const struct place where = {.file = r->file, .line = r->line};
    fault_at(t->fault, &where, "enter the file with --from, or throw it away and begin anew",
             "cannot go on from this row");
    return TURN_FAULT;
}

/* ---- what a person answers ---- */

static const char *trimmed(struct arena *a, const char *line)
{
    line += strspn(line, " \t");
    size_t n = strlen(line);
    while (n > 0 && (line[n - 1] == ' ' || line[n - 1] == '\t'))
        n--;
    return arena_bytes(a, line, n);
}

static bool is_clean(const char *line)
{
    for (const char *c = line; *c; c++)
        if ((unsigned char)*c < 0x20 || *c == 0x7f)
            return false;
    return text_is_utf8(line, strlen(line));
}

static const char *whole_prompt(struct arena *a, const struct question *q)
{
    if (q->opens && q->offer)
        return arena_print(a, "%s (= for %s; empty: none): ", q->prompt, q->offer);
    if (q->opens)
        return arena_print(a, "%s (empty: none): ", q->prompt);
    if (q->offer && *q->offer)
        return arena_print(a, "%s [%s]: ", q->prompt, q->offer);
    return arena_print(a, "%s: ", q->prompt);
}

static void explain(struct talk *t, const struct question *q)
{
    if (q->help && *q->help)
        talk_say(t, "%s", q->help);
    if (q->opens)
        talk_say(t, "  an empty line: no more of these%s", q->offer ? "; =: the same again" : "");
    else if (q->offer && *q->offer)
        talk_say(t, "  an empty line takes what stands in brackets%s",
                 q->optional ? "; -: leave it out" : "");
    else if (q->optional)
        talk_say(t, "  an empty line leaves it out");
    talk_say(t, "  undo: take the last entry back; %squit: stop and keep the sheet",
             q->ends ? "done: the sheet is complete; " : "");
}

/* What a word of command or an empty line answers; false when it is a value to be read. */
static bool without_value(struct talk *t, const struct question *q, const char **typed,
                          struct answer *out, bool *again)
{
    *again = false;
    if (strcmp(*typed, "done") == 0) {
        out->kind = ANSWER_DONE;
        if (q->ends)
            return true;
        talk_say(t, "  not yet: finish this one, or take it back with undo");
        *again = true;
        return false;
    }
    bool empty = **typed == '\0';
    if (q->offer && ((empty && !q->opens) || strcmp(*typed, "=") == 0)) {
        *typed = q->offer;
        empty = **typed == '\0';
    }
    if ((empty && (q->optional || q->opens)) || (q->optional && strcmp(*typed, "-") == 0)) {
        out->kind = ANSWER_NONE;
        return true;
    }
    if (empty) {
        talk_say(t, "  a value is needed here; ? explains it");
        *again = true;
    }
    return false;
}

static enum turn hear(struct talk *t, const struct question *q, struct answer *out)
{
    const char *twice = NULL;
    for (;;) {
        const char *typed = "";
        bool again = false;
        *out = (struct answer){.kind = ANSWER_VALUE, .value = "", .unit = "", .prompt = q->prompt};
        if (bench_line_ask(t->line, whole_prompt(t->arena, q), q->words, q->words_count, &typed) !=
            HEARD_LINE)
            return TURN_STOP;
        typed = trimmed(t->arena, typed);
        if (!is_clean(typed)) {
            talk_say(t, "  that line holds bytes that are no text; type it again");
            continue;
        }
        if (strcmp(typed, "quit") == 0)
            return TURN_STOP;
        if (strcmp(typed, "undo") == 0) {
            if (t->answers > 0)
                return TURN_UNDO;
            talk_say(t, "  there is nothing to take back");
            continue;
        }
        if (strcmp(typed, "?") == 0) {
            explain(t, q);
            continue;
        }
        if (without_value(t, q, &typed, out, &again))
            return TURN_ON;
        if (again)
            continue;
        enum taking taking = q->check(t, q, typed, out);
        if (taking == TAKEN || (taking == TAKEN_IF_REPEATED && text_equal(twice, typed)))
            return TURN_ON;
        if (taking == TAKEN_IF_REPEATED)
            talk_say(t, "  type it again to keep it");
        twice = taking == TAKEN_IF_REPEATED ? typed : NULL;
    }
}

/* ---- the list of answers ---- */

enum turn talk_ask(struct talk *t, const struct question *q, struct answer *out)
{
    bool stuck = false;
    if (t->next < t->answers) {
        *out = t->answer[t->next++];
        return TURN_ON;
    }
    if (t->old_next < t->olds) {
        if (!remembered(t, q, out, &stuck))
            return stuck_at(t);
    } else {
        if (talk_catch_up(t) != OK)
            return TURN_FAULT;
        enum turn turn = hear(t, q, out);
        if (turn != TURN_ON)
            return turn;
    }
    struct answer *kept =
        arena_push(t->arena, &t->answer, &t->answers, &t->answer_room, sizeof *kept);
    *kept = *out;
    t->next++;
    return TURN_ON;
}

enum turn talk_row(struct talk *t, const char *argument, const struct answer *answer)
{
    struct raw_value *r = arena_push(t->arena, &t->row, &t->rows, &t->row_room, sizeof *r);
    *r = (struct raw_value){.file = t->journal.path, .line = (long)t->rows + 1};
    r->cell[RAW_SHEET] = t->bench->sheet;
    r->cell[RAW_DATE] = t->date;
    r->cell[RAW_TIME] = t->time;
    r->cell[RAW_POINT] = t->point;
    r->cell[RAW_RUN] = t->run;
    r->cell[RAW_ARGUMENT] = argument;
    r->cell[RAW_VALUE] = answer->value;
    r->cell[RAW_UNIT] = answer->unit;
    if (t->rows > t->journal.rows && journal_add(&t->journal, r, t->fault) != OK)
        return TURN_FAULT;
    return TURN_ON;
}

enum status talk_catch_up(struct talk *t)
{
    if (t->journal.rows <= t->rows)
        return OK;
    return journal_rewrite(&t->journal, t->row, t->rows, t->fault);
}

static void tell_taken_back(struct talk *t, const struct answer *a)
{
    const char *what = a->kind == ANSWER_DONE   ? "done"
                       : a->kind == ANSWER_NONE ? "nothing"
                                                : a->value;
    talk_say(t, "  taken back: %s: %s%s%s", a->prompt, what, *a->unit ? " " : "", a->unit);
}

enum turn talk_run(struct talk *t, enum turn (*flow)(struct talk *t))
{
    for (;;) {
        t->next = 0;
        t->rows = 0;
        t->done = false;
        t->date = t->time = t->point = t->run = "";
        enum turn turn = flow(t);
        if (turn != TURN_UNDO)
            return turn;
        tell_taken_back(t, &t->answer[--t->answers]);
    }
}
