/* Bench sheets: from the rows of a file to groups, one for each sheet, date, time and point, and
 * from each group to its outcomes. Every row takes part in one outcome at least. */
#include "process/bench.h"

#include <assert.h>
#include <stdlib.h>

#include "base/poison.h"

/* More runs than any bench has; a file with more is wrong, and would take long. */
enum { RUNS_MOST = 200 };

struct bench {
    struct arena *arena;
    const struct plant *plant;
    day_t today;
    struct bench_made_list made;
};

/* ---- one row ---- */

static void spoil(struct bench_row *r, enum reason reason, const char *explanation)
{
    r->bad = true;
    r->reason = reason;
    r->explanation = explanation;
}

static const char *with_nearest(struct arena *a, const char *what, const char *near)
{
    return near ? arena_print(a, "%s; the nearest is '%s'", what, near) : what;
}

/* Date, time and point; false when one of them cannot be read. */
static bool read_place(const struct bench *b, struct bench_row *r)
{
    const char *const *cell = r->raw->cell;
    r->minute = -1;
    r->point = -1;
    if (!day_parse(cell[RAW_DATE], &r->day))
        spoil(r, REASON_BAD_DATE, arena_print(b->arena, "'%s' is no date", cell[RAW_DATE]));
    else if (r->day > b->today)
        spoil(r, REASON_FUTURE_DATE, arena_print(b->arena, "%s is to come", cell[RAW_DATE]));
    else if (b->plant->since != DAY_NONE && r->day < b->plant->since)
        spoil(r, REASON_BEFORE_PLANT,
              arena_print(b->arena, "%s is before the plant's first day", cell[RAW_DATE]));
    else if (*cell[RAW_TIME] != '\0' && !minute_parse(cell[RAW_TIME], &r->minute))
        spoil(r, REASON_BAD_TIME, arena_print(b->arena, "'%s' is no time", cell[RAW_TIME]));
    else if (*cell[RAW_POINT] != '\0' && (r->point = plant_point(b->plant, cell[RAW_POINT])) < 0)
        spoil(r, REASON_UNKNOWN_POINT,
              with_nearest(b->arena, arena_print(b->arena, "no point '%s'", cell[RAW_POINT]),
                           plant_nearest_point(b->plant, cell[RAW_POINT])));
    return !r->bad;
}

static const char *nearest_argument(const struct bench_sheet *sheet, const char *name)
{
    const char *names[BENCH_ARGUMENTS_MOST];
    for (size_t i = 0; i < sheet->arguments; i++)
        names[i] = sheet->argument[i].name;
    return text_nearest(name, names, sheet->arguments);
}

/* The argument of a sheet that has some; spoils the row where it does not belong. */
static void read_argument(const struct bench *b, struct bench_row *r)
{
    struct arena *a = b->arena;
    const struct bench_sheet *sheet = &r->entry->sheet;
    const char *name = r->raw->cell[RAW_ARGUMENT];
    struct fault f = {.set = false};
    r->argument = bench_argument_index(sheet, name);
    if (r->argument < 0 && r->entry == &bench_round) {
        struct reading reading;
        enum reason why = bench_round_read(a, b->plant, r, &reading, &f);
        if (why != REASON_COUNT)
            spoil(r, why, arena_text(a, f.text));
        return;
    }
    if (r->argument < 0) {
        spoil(r, REASON_UNKNOWN_ARGUMENT,
              with_nearest(a, arena_print(a, "'%s' has no argument '%s'", sheet->name, name),
                           nearest_argument(sheet, name)));
        return;
    }
    const struct bench_argument *arg = &sheet->argument[r->argument];
    if (!arg->once && (sheet->runs & 1u << r->kind) == 0)
        spoil(r, REASON_UNKNOWN_ARGUMENT,
              arena_print(a, "'%s' has no %s", sheet->name, bench_run_words[r->kind]));
    else if (!arg->once && (arg->runs & 1u << r->kind) == 0)
        spoil(r, REASON_UNKNOWN_ARGUMENT,
              arena_print(a, "'%s' is not asked of a %s", name,
                          r->kind == BENCH_SAMPLE ? "sample" : bench_run_words[r->kind]));
    else if (r->point < 0 && !sheet->pointless && !arg->once && r->kind == BENCH_SAMPLE)
        spoil(r, REASON_UNKNOWN_POINT, "a sample's values need their point");
    else if (r->point >= 0 && sheet->pointless)
        spoil(r, REASON_UNKNOWN_POINT, "a calibration has no point; leave it blank");
    if (r->bad)
        return;
    enum reason reason =
        bench_read_value(a, arg, r->raw->cell[RAW_VALUE], r->raw->cell[RAW_UNIT], &r->number, &f);
    if (reason != REASON_COUNT)
        spoil(r, reason, arena_text(a, f.text));
}

static void read_row(const struct bench *b, struct bench_row *r)
{
    const char *name = r->raw->cell[RAW_SHEET];
    r->argument = -1;
    r->entry = bench_entry_find(name);
    if (r->entry == NULL) {
        spoil(r, REASON_UNKNOWN_SHEET,
              with_nearest(b->arena, arena_print(b->arena, "no sheet '%s'", name),
                           bench_nearest(name)));
        return;
    }
    r->kind = bench_run_of(r->raw->cell[RAW_RUN]);
    r->placed = read_place(b, r);
    if (r->placed)
        read_argument(b, r);
}

static void tell_bad(struct bench *b, const struct bench_row *r)
{
    const char *const *cell = r->raw->cell;
    struct bench_outcome *o = bench_outcome_add(&b->made, b->arena, r->order);
    *o = (struct bench_outcome){.kind = BENCH_REFUSED,
                                .sheet = cell[RAW_SHEET],
                                .parameter = "",
                                .reason = r->reason,
                                .explanation = r->explanation};
    for (size_t i = 0; i < LONG_COLUMNS; i++)
        o->row.cell[i] = "";
    o->row.raw = "";
    o->row.file = r->raw->file;
    o->row.line = r->raw->line;
    o->row.cell[LONG_DATE] = cell[RAW_DATE];
    o->row.cell[LONG_TIME] = cell[RAW_TIME];
    o->row.cell[LONG_POINT] = cell[RAW_POINT];
    o->row.cell[LONG_PARAMETER] = cell[RAW_ARGUMENT];
    o->row.cell[LONG_VALUE] = cell[RAW_VALUE];
    o->row.cell[LONG_UNIT] = cell[RAW_UNIT];
    o->row.cell[LONG_NOTE] = arena_print(b->arena, "sheet %s%s%s", cell[RAW_SHEET],
                                         *cell[RAW_RUN] ? ", run " : "", cell[RAW_RUN]);
}

/* ---- a group ---- */

static struct bench_set *set_of(struct bench_group *g, const struct bench_row *r)
{
    const char *name = r->raw->cell[RAW_RUN];
    for (size_t i = 0; i < g->sets; i++)
        if (g->set[i].kind == r->kind && text_equal(g->set[i].name, name))
            return &g->set[i];
    struct bench_set *s = arena_push(g->arena, &g->set, &g->sets, &g->room, sizeof *s);
    s->name = name;
    s->kind = r->kind;
    return s;
}

/* Puts a row in its place; a second value for the same place is a refusal. The same text said
 * again of the whole sheet is no contradiction, and a group's own goes before the date's. */
static enum status place_row(struct bench_group *g, const struct bench_row *r, bool shared)
{
    const struct bench_argument *arg = &g->entry->sheet.argument[r->argument];
    const struct bench_row **at =
        arg->once ? &g->once[r->argument] : &set_of(g, r)->given[r->argument];
    if (*at == NULL) {
        *at = r;
        return OK;
    }
    if (arg->once && (shared || text_equal((*at)->raw->cell[RAW_VALUE], r->raw->cell[RAW_VALUE])))
        return OK;
    return bench_refuse(
        g, REASON_NO_RESULT, "'%s'%s%s%s is given twice, in lines %ld and %ld; leave one out",
        arg->name, arg->once || !*r->raw->cell[RAW_RUN] ? "" : " of run '",
        arg->once ? "" : r->raw->cell[RAW_RUN], arg->once || !*r->raw->cell[RAW_RUN] ? "" : "'",
        (*at)->raw->line, r->raw->line);
}

static enum status place_rows(struct bench_group *g, const struct bench_row *const *rows,
                              size_t count, bool shared)
{
    bool round = g->entry == &bench_round;
    for (size_t i = 0; i < count; i++) {
        if (round && (rows[i]->bad || rows[i]->argument < 0))
            continue; /* a reading by itself */
        if (rows[i]->bad)
            return bench_refuse(g, REASON_NO_RESULT, "line %ld cannot be used: %s",
                                rows[i]->raw->line, rows[i]->explanation);
        if (place_row(g, rows[i], shared) != OK)
            return FAULT;
        if (g->sets > RUNS_MOST)
            return bench_refuse(g, REASON_NO_RESULT,
                                "a sheet of more than %d runs; give each its own date, time and "
                                "point",
                                RUNS_MOST);
    }
    return OK;
}

static enum status all_given(struct bench_group *g)
{
    const struct bench_sheet *sheet = &g->entry->sheet;
    if ((sheet->runs & 1u << BENCH_SAMPLE) != 0 && bench_sets(g, BENCH_SAMPLE) == 0)
        return bench_refuse(g, REASON_NO_RESULT, "there is no %s of the sample itself",
                            sheet->run_name);
    for (size_t i = 0; i < g->sets; i++)
        for (size_t k = 0; k < sheet->arguments; k++) {
            const struct bench_argument *arg = &sheet->argument[k];
            bool wanted = !arg->once && !arg->optional && arg->fallback == NULL &&
                          (arg->runs & 1u << g->set[i].kind) != 0;
            if (wanted && g->set[i].given[k] == NULL)
                return bench_refuse(g, REASON_NO_RESULT, "%s has no '%s' (%s); add it",
                                    bench_set_words(g, &g->set[i]), arg->name, arg->asked);
        }
    for (size_t k = 0; k < sheet->arguments; k++) {
        const struct bench_argument *arg = &sheet->argument[k];
        if (arg->once && !arg->optional && arg->fallback == NULL && g->once[k] == NULL)
            return bench_refuse(g, REASON_NO_RESULT, "the sheet has no '%s' (%s); add it",
                                arg->name, arg->asked);
    }
    return OK;
}

/* Rows that share a sheet, date, time and point; `shared` are the sheet and date's own. */
static void work_group(struct bench *b, const struct bench_row *const *rows, size_t count,
                       const struct bench_row *const *shared, size_t shared_count)
{
    struct bench_group g = {.arena = b->arena,
                            .plant = b->plant,
                            .entry = rows[0]->entry,
                            .rows = rows,
                            .row_count = count,
                            .day = rows[0]->day,
                            .minute = rows[0]->minute,
                            .point = rows[0]->point,
                            .parameter = rows[0]->entry->parameter ? rows[0]->entry->parameter : "",
                            .made = &b->made};
    enum status rc = OK;
    size_t before = b->made.count;
    for (size_t i = 0; i < count && g.first == NULL; i++)
        if (!rows[i]->bad)
            g.first = rows[i];
    if (g.first == NULL)
        return; /* each has been told */
    TRY(place_rows(&g, rows, count, false));
    TRY(place_rows(&g, shared, shared_count, true));
    if (g.entry != &bench_round)
        TRY(all_given(&g));
    TRY(g.entry->work(&g));
    assert(b->made.count > before);
done:
    if (rc != OK) {
        b->made.count = before; /* a group is refused whole */
        bench_refused(&g);
    }
}

/* Blanks, seeds and standards of a date that no sample of their sheet uses. */
static void tell_unused(struct bench *b, const struct bench_row *const *rows, size_t count)
{
    struct bench_group g = {.arena = b->arena,
                            .plant = b->plant,
                            .entry = rows[0]->entry,
                            .parameter = "",
                            .made = &b->made};
    for (size_t i = 0; i < count && g.first == NULL; i++)
        if (!rows[i]->bad)
            g.first = rows[i];
    if (g.first == NULL)
        return;
    (void)bench_refuse(&g, REASON_NO_RESULT,
                       "no sample of '%s' on %s uses these rows without a point; check the date",
                       g.entry->sheet.name, g.first->raw->cell[RAW_DATE]);
    bench_refused(&g);
}

/* ---- all of them ---- */

static int by_number(int64_t one, int64_t other)
{
    return one < other ? -1 : one > other ? 1 : 0;
}

static bool same_date(const struct bench_row *one, const struct bench_row *other)
{
    return one->entry == other->entry && one->day == other->day;
}

static bool same_group(const struct bench_row *one, const struct bench_row *other)
{
    return same_date(one, other) && one->point == other->point && one->minute == other->minute;
}

/* By sheet and date, rows without a point first; then by point, time and place in the file. */
static int by_group(const void *one, const void *other)
{
    const struct bench_row *p = *(const struct bench_row *const *)one;
    const struct bench_row *q = *(const struct bench_row *const *)other;
    int c = by_number((int64_t)(uintptr_t)p->entry, (int64_t)(uintptr_t)q->entry);
    c = c ? c : by_number(p->day, q->day);
    c = c ? c : by_number(p->point, q->point);
    c = c ? c : by_number(p->minute, q->minute);
    return c ? c : by_number((int64_t)p->order, (int64_t)q->order);
}

static int by_order(const void *one, const void *other)
{
    const struct bench_made *p = one;
    const struct bench_made *q = other;
    return by_number((int64_t)p->order, (int64_t)q->order);
}

static void work_date(struct bench *b, const struct bench_row *const *rows, size_t count)
{
    size_t shared = 0;
    if (!rows[0]->entry->sheet.pointless)
        while (shared < count && rows[shared]->point < 0)
            shared++;
    if (shared == count)
        tell_unused(b, rows, count);
    for (size_t from = shared, to; from < count; from = to) {
        for (to = from; to < count && same_group(rows[from], rows[to]);)
            to++;
        work_group(b, rows + from, to - from, rows, shared);
    }
}

void bench_work(struct arena *a, const struct plant *plant, const struct raw_value *raw,
                size_t count, day_t today, struct bench_outcome **out, size_t *outcomes)
{
    struct bench b = {.arena = a, .plant = plant, .today = today};
    struct bench_row *rows = arena_alloc(a, (count + 1) * sizeof *rows);
    const struct bench_row **placed =
        arena_alloc(a, (count + 1) * sizeof(const struct bench_row *));
    size_t kept = 0;
    for (size_t i = 0; i < count; i++) {
        rows[i].raw = &raw[i];
        rows[i].order = i;
        read_row(&b, &rows[i]);
        if (rows[i].bad)
            tell_bad(&b, &rows[i]);
        if (rows[i].placed)
            placed[kept++] = &rows[i];
    }
    qsort(placed, kept, sizeof(const struct bench_row *), by_group);
    for (size_t from = 0, to; from < kept; from = to) {
        for (to = from; to < kept && same_date(placed[from], placed[to]);)
            to++;
        work_date(&b, placed + from, to - from);
    }
    /* Outcomes of one group keep their order: qsort need not. */
    for (size_t i = 0; i < b.made.count; i++)
        b.made.at[i].order = b.made.at[i].order * (b.made.count + 1) + i;
    if (b.made.count > 0)
        qsort(b.made.at, b.made.count, sizeof *b.made.at, by_order);
    *out = arena_alloc(a, (b.made.count + 1) * sizeof **out);
    for (size_t i = 0; i < b.made.count; i++)
        (*out)[i] = b.made.at[i].outcome;
    *outcomes = b.made.count;
}
