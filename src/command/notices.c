/* notices: `permit --notices`: which notices the month's exceedances ask for, and drafts of them.
 */
#include "command/month.h"
#include "command/session.h"

#include <string.h>
#include <unistd.h>

#include "base/poison.h"

/* YYYY-MM-DD, or with a time of day behind a blank or a T. */
static enum status read_aware(struct arena *a, const char *text, struct moment *out,
                              struct fault *f)
{
    *out = (struct moment){DAY_NONE, -1};
    if (text == NULL)
        return OK;
    size_t length = strlen(text);
    bool timed = length > 10 && (text[10] == ' ' || text[10] == 'T');
    if (day_parse(arena_bytes(a, text, length < 10 ? length : 10), &out->day) &&
        (length == 10 || (timed && minute_parse(text + 11, &out->minute) && out->minute >= 0)))
        return OK;
    return fault_usage(f, "write it as YYYY-MM-DD or 'YYYY-MM-DD HH:MM'",
                       "--aware cannot read '%s' as a time", text);
}

struct drafting {
    struct session *s;
    const struct plant *plant;
    const struct frame *frame;
    struct notice_listed *listed;
    size_t count;
    const char *folder;
    const char **files;
    size_t file_count, file_room;
};

/* A name that any file system takes. */
static const char *tame(struct arena *a, const char *outfall)
{
    char *name = arena_text(a, outfall);
    for (char *c = name; *c != '\0'; c++)
        if (!((*c >= '0' && *c <= '9') || (*c >= 'a' && *c <= 'z') || (*c >= 'A' && *c <= 'Z')))
            *c = '_';
    return name;
}

struct written {
    struct arena *arena;
    const struct notice *notice;
};

static void write_notice(FILE *out, const void *context)
{
    const struct written *w = context;
    report_notice(out, w->arena, w->notice);
}

/* Writes one draft, unless a file of its name is there. */
static enum status draft(struct drafting *d, const struct notice *n, const char *path,
                         struct fault *f)
{
    struct arena *a = d->s->arena;
    const struct written w = {a, n};
    bool there = access(path, F_OK) == 0;
    if (!there && beside_write(path, write_notice, &w, f) != OK)
        return FAULT;
    const char **line = arena_push(a, &d->files, &d->file_count, &d->file_room, sizeof *line);
    *line = report_notice_file(a, path, there);
    return OK;
}

static bool same_notice(const struct permit_finding *a, const struct permit_finding *b)
{
    return b->duty == DUTY_24_HOURS && a->day == b->day &&
           text_equal(a->row->limit->outfall, b->row->limit->outfall);
}

static bool is_taken(const struct drafting *d, const char *path)
{
    for (size_t i = 0; i < d->count; i++)
        if (text_equal(d->listed[i].draft, path) || text_equal(d->listed[i].written_draft, path))
            return true;
    return false;
}

/* "drafts/notice-24-hours-2025-03-18-001.txt"; two outfalls that tame to one name are told apart by
 * a number. */
static const char *draft_path(const struct drafting *d, const char *kind,
                              const struct permit_finding *one)
{
    struct arena *a = d->s->arena;
    const char *outfall = tame(a, one->row->limit->outfall);
    char day[11];
    day_write(one->day, day);
    const char *stem = arena_print(a, "%s/notice-%s-%s%s%s", d->folder, kind, day,
                                   outfall[0] == '\0' ? "" : "-", outfall);
    const char *path = arena_print(a, "%s.txt", stem);
    for (int n = 2; is_taken(d, path); n++)
        path = arena_print(a, "%s-%d.txt", stem, n);
    return path;
}

/* What people put on record about the day or the limits beyond, each once. */
static enum status on_record(struct drafting *d, struct notice *n, day_t day, struct fault *f)
{
    const char **all = NULL;
    size_t count = 0, room = 0;
    for (size_t i = 0; i < n->findings; i++) {
        const struct limit *l = n->finding[i]->row->limit;
        const char *const *line = NULL;
        size_t lines = 0;
        if (remarks_about(d->s, l->point_text, l->parameter_text, day, day, &line, &lines, f) != OK)
            return FAULT;
        for (size_t k = 0; k < lines; k++) {
            bool known = false;
            for (size_t j = 0; j < count && !known; j++)
                known = text_equal(all[j], line[k]);
            if (!known)
                *(const char **)arena_push(d->s->arena, &all, &count, &room, sizeof *all) = line[k];
        }
    }
    n->remark = all;
    n->remarks = count;
    return OK;
}

/* The findings of one day and outfall go into one notice, told and written. */
static enum status draft_day(struct drafting *d, size_t first, struct fault *f)
{
    struct arena *a = d->s->arena;
    const struct permit_finding *one = d->listed[first].finding;
    const struct permit_finding **found =
        arena_alloc(a, d->count * sizeof(const struct permit_finding *));
    struct notice n = {.plant = d->plant, .frame = d->frame, .finding = found};
    const char *told = draft_path(d, "24-hours", one);
    const char *written = draft_path(d, "5-days", one);
    for (size_t i = first; i < d->count; i++) {
        if (!same_notice(one, d->listed[i].finding))
            continue;
        found[n.findings++] = d->listed[i].finding;
        d->listed[i].draft = told;
        d->listed[i].written_draft = written;
    }
    n.aware = d->listed[first].aware;
    if (on_record(d, &n, one->day, f) != OK || draft(d, &n, told, f) != OK)
        return FAULT;
    n.written = true;
    return draft(d, &n, written, f);
}

static enum status draft_all(struct drafting *d, struct fault *f)
{
    if (d->count > 0 && month_folder(d->folder, f) != OK)
        return FAULT;
    for (size_t i = 0; i < d->count; i++)
        if (d->listed[i].finding->duty == DUTY_24_HOURS && d->listed[i].draft[0] == '\0' &&
            draft_day(d, i, f) != OK)
            return FAULT;
    return OK;
}

enum status notices_print(struct session *s, const struct plant *plant, day_t month, day_t on,
                          int as, const char *folder, const char *aware, struct fault *f)
{
    struct frame *frame = NULL;
    struct permit_month m = {0};
    struct permit_finding *findings = NULL;
    struct moment known;
    if (read_aware(s->arena, aware, &known, f) != OK ||
        month_judge(s, plant, month, on, &frame, &m, f) != OK)
        return FAULT;
    struct drafting d = {.s = s, .plant = plant, .frame = frame, .folder = folder};
    d.count = permit_findings(s->arena, frame, &m, &findings);
    d.listed = arena_alloc(s->arena, (d.count + 1) * sizeof *d.listed);
    for (size_t i = 0; i < d.count; i++) {
        /* Nothing is known before it happened. */
        bool after = known.day != DAY_NONE && known.day >= findings[i].day;
        d.listed[i] = (struct notice_listed){&findings[i],
                                             after ? known : (struct moment){DAY_NONE, -1}, "", ""};
    }
    if (draft_all(&d, f) != OK)
        return FAULT;
    session_print(
        s, as, report_notices_page(s->arena, plant, &m, d.listed, d.count, d.files, d.file_count),
        report_notices_table(s->arena, d.listed, d.count));
    s->found = m.exceeded > 0 || m.shortfalls > 0;
    return OK;
}
