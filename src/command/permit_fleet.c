/* permit_fleet: one month over many books: which plants, which limits, the worst first. */
#include "command/fleet.h"
#include "command/month.h"

#include <assert.h>
#include <string.h>

#include "base/poison.h"

/* Between the parts of what a worker prints for a page; no text of a book holds them. */
#define PART   "\x1f"
#define RECORD "\x1e"
enum { PARTS = 9 };

struct roll {
    struct arena *arena;
    struct fleet_summary summary;
    size_t plant_room, finding_room, missing_room;
};

/* ---- in a worker ---- */

static void put(FILE *out, const char *text)
{
    for (const char *c = text; *c; c++)
        if ((unsigned char)*c >= ' ')
            fputc(*c, out);
    fputs(PART, out);
}

static void put_finding(struct session *s, const struct permit_row *row, bool exceeded)
{
    char *share = report_share(s->arena, row);

    put(s->out, exceeded ? "exceeded" : "short");
    put(s->out, share);
    put(s->out, report_limit_name(s->arena, row->limit));
    put(s->out, report_row_when(s->arena, row));
    put(s->out, report_row_figure(s->arena, row));
    put(s->out, report_limit_bound(s->arena, row->limit));
    put(s->out, row->has_times ? arena_print(s->arena, "%ld", row->times) : "");
    put(s->out, arena_print(s->arena, "%ld", row->samples));
    put(s->out, row->has_required ? arena_print(s->arena, "%ld", row->required) : "");
    fputs(RECORD, s->out);
}

static void put_month(struct session *s, const struct plant *plant, const struct permit_month *m)
{
    put(s->out, "plant");
    put(s->out, plant->name);
    put(s->out, arena_print(s->arena, "%zu", m->exceeded));
    put(s->out, arena_print(s->arena, "%zu", m->shortfalls));
    for (int i = 4; i < PARTS; i++)
        put(s->out, "");
    fputs(RECORD, s->out);
    for (size_t i = 0; i < m->count; i++) {
        if (m->rows[i].verdict == VERDICT_EXCEEDED)
            put_finding(s, &m->rows[i], true);
        if (permit_shortfall(&m->rows[i], m->on))
            put_finding(s, &m->rows[i], false);
    }
}

static enum status judge(struct session *s, const void *given, struct fault *f)
{
    const struct fleet_month *o = given;
    struct plant *plant = NULL;
    struct frame *frame = NULL;
    struct permit_month month = {0};
    struct month_remarks remarks = {0};

    if (session_book(s, BOOK_READ, NULL, &plant, f) != OK ||
        month_judge(s, plant, o->month, o->on, &frame, &month, f) != OK)
        return FAULT;
    s->found = month.exceeded > 0 || month.shortfalls > 0;
    if (o->as == AS_CSV || o->as == AS_JSON) {
        if (month_remarks(s, &month, &remarks, f) != OK)
            return FAULT;
        session_print(s, o->as, NULL,
                      fleet_table(s, report_permit_table(s->arena, &month, &remarks)));
    } else {
        put_month(s, plant, &month);
    }
    return OK;
}

/* ---- in the parent ---- */

/* The next part of a record, in the arena. */
static const char *part(struct arena *a, const char **at)
{
    size_t length = strcspn(*at, PART);
    const char *text = arena_bytes(a, *at, length);

    *at += length + 1;
    return text;
}

static void take_finding(struct roll *r, const char *book, const char *const *parts)
{
    struct fleet_summary *s = &r->summary;
    struct fleet_finding *finding =
        arena_push(r->arena, &s->findings, &s->finding_count, &r->finding_room, sizeof *finding);

    *finding = (struct fleet_finding){
        .book = book,
        .plant = s->plants[s->plant_count - 1].name,
        .exceeded = text_equal(parts[0], "exceeded"),
        .share = parts[1],
        .what = parts[2],
        .when = parts[3],
        .figure = parts[4],
        .limit = parts[5],
        .times = parts[6],
        .samples = parts[7],
        .required = parts[8],
    };
}

static void take(void *context, const char *book, const char *printed, size_t length)
{
    struct roll *r = context;
    struct fleet_summary *s = &r->summary;

    for (const char *at = printed; at < printed + length; at++) { /* steps over RECORD */
        const char *parts[PARTS];

        for (int i = 0; i < PARTS; i++)
            parts[i] = part(r->arena, &at);
        if (text_equal(parts[0], "plant")) {
            struct fleet_plant *plant =
                arena_push(r->arena, &s->plants, &s->plant_count, &r->plant_room, sizeof *plant);
            *plant = (struct fleet_plant){
                .book = book, .name = parts[1], .exceeded = parts[2], .shortfalls = parts[3]};
        } else {
            take_finding(r, book, parts);
        }
    }
}

static void missing(void *context, const char *book, const char *why)
{
    struct roll *r = context;
    struct fleet_summary *s = &r->summary;
    struct fleet_missing *m =
        arena_push(r->arena, &s->missing, &s->missing_count, &r->missing_room, sizeof *m);

    *m = (struct fleet_missing){.book = book, .why = arena_text(r->arena, why)};
    fprintf(stderr, "weirbook: %s: %s\n", book, why);
}

enum status permit_fleet(struct session *s, const struct fleet_month *o, struct fault *f)
{
    if (o->as == AS_CSV || o->as == AS_JSON)
        return fleet_rows(s, o, judge, o->as, f);
    struct roll roll = {.arena = s->arena, .summary = {.month = o->month, .on = o->on}};
    const struct fleet_taker taker = {&roll, take, missing};
    enum status rc = fleet_run(s, o, judge, &taker, f);

    session_print(s, AS_TEXT, report_fleet_page(s->arena, &roll.summary), NULL);
    return rc;
}
