/* due: which samples the permit asks for, which were taken, which were missed; and the week as a
 * sheet to tick. */
#include "command/fleet.h"
#include "command/session.h"

#include <string.h>

#include "base/poison.h"

enum { DAYS_A_WEEK = 7, DAYS_AHEAD = 7 };

struct due_options {
    day_t on;
    long days;
    bool sheet;
    int as;
};

static const struct option_spec options[] = {
    {"on", OPTION_DAY, offsetof(struct due_options, on), "DATE",
     "look from that day: later readings are ignored (default: today)", false},
    {"days", OPTION_COUNT, offsetof(struct due_options, days), "N",
     "how many days to look ahead, that day included (default: 7)", false},
    {"sheet", OPTION_FLAG, offsetof(struct due_options, sheet), NULL,
     "the week of that day as a sheet with a box for each sample", false},
    AS_OPTION(struct due_options),
};

static const struct example examples[] = {
    {"weirbook due --on 2025-03-14", "what is missed, due and taken around the 14th"},
    {"weirbook due --on 2025-03-14 --days 31", "the same, looking a month ahead"},
    {"weirbook due --on 2025-03-14 --sheet", "a sheet for the wall, one box a day"},
};

struct due_view {
    struct arena *arena;
    const struct plant *plant;
    const struct frame *frame;
    const struct due_row *row;
    size_t rows;
    day_t on;
};

static const char *point_of(const struct due_view *v, const struct due_row *r)
{
    return v->plant->points[r->point].id;
}

static const char *parameter_of(const struct due_view *v, const struct due_row *r)
{
    return v->plant->parameters[r->parameter].id;
}

static const char *sample_of(const struct due_row *r)
{
    return r->sample == SAMPLE_ANY ? "" : sample_type_words[r->sample];
}

/* ---- the list ---- */

static struct table *make_table(const struct due_view *v)
{
    static const struct column columns[] = {
        {.key = "from", .title = "from"},
        {.key = "to", .title = "to"},
        {.key = "point", .title = "point"},
        {.key = "parameter", .title = "parameter"},
        {.key = "sample", .title = "sample"},
        {.key = "required", .title = "required", .align = ALIGN_RIGHT},
        {.key = "taken", .title = "taken", .align = ALIGN_RIGHT},
        {.key = "state", .title = "state"},
        {.title = "asked for"},
    };
    static const enum flag flags[DUE_STATES] = {
        [DUE_MISSED] = FLAG_SHORT, [DUE_DUE] = FLAG_NONE, [DUE_TAKEN] = FLAG_LIGHT};
    struct table *t = table_new(v->arena, "", columns, NELEM(columns));

    for (size_t i = 0; i < v->rows; i++) {
        const struct due_row *r = &v->row[i];
        struct cell *c = table_row(t);

        c[0] = cell_day(v->arena, r->from);
        c[1] = cell_day(v->arena, r->to);
        c[2] = cell_text(point_of(v, r));
        c[3] = cell_text(parameter_of(v, r));
        c[4] = cell_text(sample_of(r));
        c[5] = cell_count(v->arena, r->required);
        c[6] = cell_count(v->arena, r->taken);
        c[7] = cell_flagged(cell_text(due_words[r->state]), flags[r->state]);
        c[8] = cell_text(r->limit->samples.text);
    }
    return t;
}

static size_t rows_in(const struct due_view *v, enum due_state state)
{
    size_t count = 0;

    for (size_t i = 0; i < v->rows; i++)
        count += v->row[i].state == state;
    return count;
}

static struct page *make_page(const struct due_view *v)
{
    struct page *p = page_new(v->arena);
    size_t missed = rows_in(v, DUE_MISSED);
    char date[11];

    day_write(v->on, date);
    page_heading(p, arena_print(v->arena, "%s, samples on %s", v->plant->name, date));
    if (v->rows == 0) {
        page_line(p, FLAG_NONE, "no limit in force names a frequency of samples");
        return p;
    }
    page_line(p, missed > 0 ? FLAG_SHORT : FLAG_NONE, "%zu missed, %zu due, %zu taken", missed,
              rows_in(v, DUE_DUE), rows_in(v, DUE_TAKEN));
    page_space(p);
    page_table(p, make_table(v));
    return p;
}

/* ---- the sheet ---- */

/* The row whose stretch holds a day for a series; the strictest where several do. */
static const struct due_row *row_on(const struct due_view *v, const struct due_row *like, day_t day)
{
    for (size_t i = 0; i < v->rows; i++)
        if (v->row[i].point == like->point && v->row[i].parameter == like->parameter &&
            v->row[i].from <= day && day <= v->row[i].to)
            return &v->row[i];
    return NULL;
}

/* [x] taken, [C] a no-data code, [ ] still to be ticked, - a day gone by without. */
static const char *box(const struct due_view *v, const struct due_row *like, day_t day)
{
    size_t count = 0;
    const struct reading *const *at =
        day > v->on ? NULL : frame_readings(v->frame, like->point, like->parameter, day, &count);
    const struct due_row *row = row_on(v, like, day);
    char code = 0;

    for (size_t i = 0; at && i < count; i++) {
        if (at[i]->qualifier != QUALIFIER_CODE)
            return "[x]";
        code = at[i]->code;
    }
    if (code)
        return arena_print(v->arena, "[%c]", code);
    if (!row || row->state == DUE_TAKEN || !limit_in_force(row->limit, day))
        return "";
    return day < row->next ? " -" : "[ ]";
}

/* What the stretch that is open on the day asks for and has, else the week's next. */
static const struct due_row *row_now(const struct due_view *v, const struct due_row *like,
                                     day_t week)
{
    const struct due_row *r = row_on(v, like, v->on);

    for (day_t day = week; !r && day < week + DAYS_A_WEEK; day++)
        r = row_on(v, like, day);
    return r;
}

static const struct column *sheet_columns(struct arena *a, day_t week)
{
    struct column *c = arena_alloc(a, (5 + DAYS_A_WEEK) * sizeof *c);
    static const char *const titles[] = {"point", "parameter", "sample", "asked for", "taken"};

    for (size_t i = 0; i < NELEM(titles); i++)
        c[i] = (struct column){.title = titles[i]};
    c[4].align = ALIGN_RIGHT;
    for (int i = 0; i < DAYS_A_WEEK; i++) {
        char date[11];

        day_write(week + i, date);
        c[5 + i] = (struct column){
            .title = arena_print(a, "%c%c %s", *weekday_names[day_weekday(week + i)] - 'a' + 'A',
                                 weekday_names[day_weekday(week + i)][1], date + 8)};
    }
    return c;
}

static void add_line(const struct due_view *v, struct table *t, const struct due_row *like,
                     day_t week)
{
    const struct due_row *now = row_now(v, like, week);
    struct cell *c;

    if (!now)
        return;
    c = table_row(t);
    c[0] = cell_text(point_of(v, now));
    c[1] = cell_text(parameter_of(v, now));
    c[2] = cell_text(sample_of(now));
    c[3] = cell_text(now->limit->samples.text);
    c[4] = cell_text(arena_print(v->arena, "%ld of %ld", now->taken, now->required));
    for (int i = 0; i < DAYS_A_WEEK; i++)
        c[5 + i] = cell_text(box(v, now, week + i));
}

static struct page *make_sheet(const struct due_view *v)
{
    const struct plant *plant = v->plant;
    int back =
        ((int)day_weekday(v->on) - plant->rules.word[RULE_WEEK_STARTS] + DAYS_A_WEEK) % DAYS_A_WEEK;
    day_t week = v->on - back;
    struct page *p = page_new(v->arena);
    struct table *t = table_new(v->arena, "", sheet_columns(v->arena, week), 5 + DAYS_A_WEEK);
    char from[11], to[11];

    day_write(week, from);
    day_write(week + DAYS_A_WEEK - 1, to);
    for (size_t i = 0; i < plant->point_count * plant->parameter_count; i++) {
        const struct due_row like = {.point = (int)(i / plant->parameter_count),
                                     .parameter = (int)(i % plant->parameter_count)};

        add_line(v, t, &like, week);
    }
    page_heading(p,
                 arena_print(v->arena, "%s, samples of the week %s to %s", plant->name, from, to));
    page_space(p);
    page_table(p, t);
    page_space(p);
    page_line(p, FLAG_NONE,
              "[ ] may be taken on this day   [x] taken   [E] a no-data code   - gone by without");
    return p;
}

/* ---- one book ---- */

static enum status look(struct session *s, const struct due_options *o, struct due_view *v,
                        struct fault *f)
{
    long days = o->days ? o->days : DAYS_AHEAD;
    struct plant *plant = NULL;
    struct frame *frame = NULL;
    struct frame_span *needs = NULL;
    struct due_row *rows = NULL;
    size_t count = 0;
    *v = (struct due_view){.arena = s->arena, .on = o->on == DAY_NONE ? clock_today() : o->on};
    if (session_book(s, BOOK_READ, NULL, &plant, f) != OK)
        return FAULT;
    permit_due_needs(s->arena, plant, v->on, days, &needs, &count);
    if (session_frame(s, plant, needs, count, v->on, v->on, &frame, f) != OK ||
        permit_due(s->arena, frame, v->on, days, &rows, &count, f) != OK)
        return FAULT;
    v->plant = plant;
    v->frame = frame;
    v->row = rows;
    v->rows = count;
    s->found = rows_in(v, DUE_MISSED) > 0;
    return OK;
}

/* ---- many books ----
 * A worker prints records of parts: first the plant's name and counts, then what was missed. */

#define PART "\x1f" /* no text of a book holds it */
enum { PARTS = 6 };

struct roll {
    struct arena *arena;
    struct table *plants, *missed;
    struct page *page;
};

static void put(FILE *out, const char *text)
{
    for (const char *c = text; *c; c++)
        if ((unsigned char)*c >= ' ')
            fputc(*c, out);
    fputs(PART, out);
}

static enum status look_in_worker(struct session *s, const void *given, struct fault *f)
{
    const struct due_options *o = given;
    struct due_view v;
    if (look(s, o, &v, f) != OK)
        return FAULT;
    if (o->as == AS_CSV || o->as == AS_JSON) {
        session_print(s, o->as, NULL, fleet_table(s, make_table(&v)));
        return OK;
    }
    put(s->out, "");
    put(s->out, v.plant->name);
    for (int state = 0; state < DUE_STATES; state++)
        put(s->out, arena_print(s->arena, "%zu", rows_in(&v, (enum due_state)state)));
    put(s->out, "");
    for (size_t i = 0; i < v.rows && v.row[i].state == DUE_MISSED; i++) {
        const struct due_row *r = &v.row[i];
        char from[11], to[11];

        day_write(r->from, from);
        day_write(r->to, to);
        put(s->out, point_of(&v, r));
        put(s->out, parameter_of(&v, r));
        put(s->out, from);
        put(s->out, to);
        put(s->out, arena_print(s->arena, "%ld of %ld", r->taken, r->required));
        put(s->out, r->limit->samples.text);
    }
    return OK;
}

static void take(void *context, const char *book, const char *printed, size_t length)
{
    struct roll *r = context;

    for (const char *at = printed; at < printed + length;) {
        const char *part[PARTS];
        bool plant;

        for (int i = 0; i < PARTS; i++) {
            size_t n = strcspn(at, PART);

            part[i] = arena_bytes(r->arena, at, n);
            at += n + 1;
        }
        plant = *part[0] == '\0';
        struct cell *c = table_row(plant ? r->plants : r->missed);
        c[0] = cell_text(arena_text(r->arena, book));
        for (int i = plant ? 1 : 0; i < (plant ? PARTS - 1 : PARTS); i++)
            c[plant ? i : i + 1] = cell_text(part[i]);
        if (plant && !text_equal(part[2], "0"))
            c[2].flag = FLAG_SHORT;
    }
}

static void missing(void *context, const char *book, const char *why)
{
    struct roll *r = context;

    page_line(r->page, FLAG_BAD, "not read: %s: %s", book, why);
    fprintf(stderr, "weirbook: %s: %s\n", book, why);
}

/* What was missed comes first, then every plant. */
static enum status many_books(struct session *s, const struct due_options *o, struct fault *f)
{
    static const struct column plants[] = {{.title = "book", .wraps = true},
                                           {.title = "plant", .wraps = true},
                                           {.title = "missed", .align = ALIGN_RIGHT},
                                           {.title = "due", .align = ALIGN_RIGHT},
                                           {.title = "taken", .align = ALIGN_RIGHT}};
    static const struct column missed[] = {{.title = "book", .wraps = true},
                                           {.title = "point"},
                                           {.title = "parameter"},
                                           {.title = "from"},
                                           {.title = "to"},
                                           {.title = "taken"},
                                           {.title = "asked for"}};
    struct roll roll = {s->arena, table_new(s->arena, "Plants", plants, NELEM(plants)),
                        table_new(s->arena, "Missed", missed, NELEM(missed)), page_new(s->arena)};
    const struct fleet_taker taker = {&roll, take, missing};
    struct due_options same = *o;
    char date[11];
    enum status rc;
    if (o->sheet)
        return fault_usage(f, "name one book", "a sheet is of one book");
    same.on = o->on == DAY_NONE ? clock_today() : o->on;
    if (o->as == AS_CSV || o->as == AS_JSON)
        return fleet_rows(s, &same, look_in_worker, o->as, f);
    day_write(same.on, date);
    page_heading(roll.page, arena_print(s->arena, "Samples on %s", date));
    rc = fleet_run(s, &same, look_in_worker, &taker, f);
    page_space(roll.page);
    if (roll.missed->rows > 0)
        page_table(roll.page, roll.missed);
    if (roll.missed->rows > 0)
        page_space(roll.page);
    if (roll.plants->rows > 0)
        page_table(roll.page, roll.plants);
    session_print(s, AS_TEXT, roll.page, NULL);
    return rc;
}

/* ---- the command ---- */

static enum status run(struct session *s, const void *given, struct fault *f)
{
    const struct due_options *o = given;
    struct due_view v;
    if (s->book_count > 1)
        return many_books(s, o, f);
    if (look(s, o, &v, f) != OK)
        return FAULT;
    session_print(s, o->as, o->sheet ? make_sheet(&v) : make_page(&v), make_table(&v));
    return OK;
}

const struct command command_due = {
    .name = "due",
    .summary = "samples due, taken and missed",
    .book = true,
    .fleet = true,
    .option = options,
    .options = NELEM(options),
    .options_size = sizeof(struct due_options),
    .example = examples,
    .examples = NELEM(examples),
    .about = "Exit status 3: a sample was missed in an open week, month, quarter or year or in the "
             "one before.\n"
             "How samples are counted: weirbook-rules(7).",
    .run = run,
};
