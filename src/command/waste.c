/* waste: how much sludge to waste on a day, and what the days after it look like at that rate. */
#include "command/figures.h"
#include "command/session.h"
#include "process/process.h"

#include <string.h>

#include "base/poison.h"

struct waste_given {
    const char *srt, *fm, *mlss, *step;
    day_t on;
    long smooth, old, shifts, hours, days;
    int as;
};

enum { SMOOTH_DEFAULT = 7, OLD_DEFAULT = 3, DAYS_ON_PAGE = 14, DAYS_MOST = 366, SPLIT_MOST = 24 };

static const struct option_spec options[] = {
    {"srt", OPTION_TEXT, offsetof(struct waste_given, srt), "DAYS",
     "target solids retention time; one target is needed", false},
    {"fm", OPTION_TEXT, offsetof(struct waste_given, fm), "RATIO",
     "target food to microorganisms, 1/d of volatile solids", false},
    {"mlss", OPTION_TEXT, offsetof(struct waste_given, mlss), "MG/L",
     "target mixed liquor suspended solids", false},
    {"on", OPTION_DAY, offsetof(struct waste_given, on), "DATE", "the day to waste on", true},
    {"smooth", OPTION_COUNT, offsetof(struct waste_given, smooth), "DAYS",
     "means are of so many of the last days with readings (default 7)", false},
    {"step", OPTION_TEXT, offsetof(struct waste_given, step), "PERCENT",
     "most change from the day before (default 15)", false},
    {"shifts", OPTION_COUNT, offsetof(struct waste_given, shifts), "N",
     "split evenly over so many shifts", false},
    {"hours", OPTION_COUNT, offsetof(struct waste_given, hours), "N",
     "pump for so many hours of the day", false},
    {"old", OPTION_COUNT, offsetof(struct waste_given, old), "DAYS",
     "warn of readings older than this (default 3)", false},
    {"days", OPTION_COUNT, offsetof(struct waste_given, days), "N",
     "look so many days ahead (default 14 on a page)", false},
    AS_OPTION(struct waste_given),
};

static const struct example examples[] = {
    {"weirbook waste --srt 10 --on 2025-03-14", "what to waste for an SRT of 10 days"},
    {"weirbook waste --fm 0.25 --on 2025-03-14 --shifts 3",
     "for an F:M of 0.25, split over three shifts"},
    {"weirbook waste --mlss 2500 --on 2025-03-14 --step 10 --days 7 --as csv",
     "for 2500 mg/L in steps of 10 %, with a week ahead, as CSV"},
};

/* The last three are there with --days. */
static const struct column file_columns[] = {
    {"on", NULL, ALIGN_LEFT, false, 0},         {"target", NULL, ALIGN_LEFT, false, 0},
    {"solids", NULL, ALIGN_POINT, false, 0},    {"unit", NULL, ALIGN_LEFT, false, 0},
    {"flow", NULL, ALIGN_POINT, false, 0},      {"flow_unit", NULL, ALIGN_LEFT, false, 0},
    {"limited_by", NULL, ALIGN_LEFT, false, 0}, {"note", NULL, ALIGN_LEFT, true, 0},
    {"inventory", NULL, ALIGN_POINT, false, 0}, {"mlss", NULL, ALIGN_POINT, false, 0},
    {"srt", NULL, ALIGN_POINT, false, 0},
};
enum { COLUMNS_PLAIN = 8 };

static const struct column part_columns[] = {
    {NULL, "worked from", ALIGN_LEFT, false, 0}, {NULL, "value", ALIGN_POINT, false, 0},
    {NULL, "unit", ALIGN_LEFT, false, 0},        {NULL, "days", ALIGN_RIGHT, false, 0},
    {NULL, "oldest", ALIGN_LEFT, false, 0},      {NULL, "newest", ALIGN_LEFT, false, 0},
    {NULL, "note", ALIGN_LEFT, true, 0},
};

static const char *const limit_words[] = {"none", "step", "zero"};

struct making {
    struct arena *arena;
    const struct plant *plant;
    const struct waste_given *given;
    struct waste_options how;
    struct waste_plan plan;
    const char *target; /* "srt 10 d" */
};

/* ---- what was asked ---- */

static enum status read_number(struct arena *a, const char *option, const char *text,
                               const struct fraction **out, struct fault *f)
{
    struct decimal d;
    if (decimal_parse(text, strlen(text), &d) != DECIMAL_FINE || d.coefficient < 0)
        return fault_usage(f, "write a plain number, such as 12.5", "--%s cannot be '%s'", option,
                           text);
    *out = fraction_from_decimal(a, d);
    return OK;
}

static enum status read_target(struct making *m, struct fault *f)
{
    const struct waste_given *o = m->given;
    const struct {
        const char *name, *text, *unit;
    } aims[WASTE_AIMS] = {[WASTE_FOR_SRT] = {"srt", o->srt, "d"},
                          [WASTE_FOR_FM] = {"fm", o->fm, "1/d"},
                          [WASTE_FOR_MLSS] = {"mlss", o->mlss, "mg/L"}};
    for (int i = 0; i < WASTE_AIMS; i++) {
        if (aims[i].text == NULL)
            continue;
        if (m->target != NULL)
            return fault_usage(f, "leave one out", "one target is taken at a time");
        m->how.aim = (enum waste_aim)i;
        if (read_number(m->arena, aims[i].name, aims[i].text, &m->how.target, f) != OK)
            return FAULT;
        if (fraction_sign(m->how.target) <= 0)
            return fault_usage(f, "give a number above 0", "--%s cannot be '%s'", aims[i].name,
                               aims[i].text);
        m->target = arena_print(m->arena, "%s %s %s", aims[i].name, aims[i].text, aims[i].unit);
    }
    if (m->target == NULL)
        return fault_usage(f, "give --srt, --fm or --mlss with a number", "waste needs a target");
    return OK;
}

static enum status read_options(struct making *m, struct fault *f)
{
    const struct waste_given *o = m->given;
    bool page = o->as != AS_CSV && o->as != AS_JSON;
    m->how.on = o->on;
    m->how.smooth = o->smooth ? (int)o->smooth : SMOOTH_DEFAULT;
    m->how.old = o->old ? (int)o->old : OLD_DEFAULT;
    m->how.days = o->days ? (int)o->days : page ? DAYS_ON_PAGE : 0;
    if (o->smooth > DAYS_MOST || o->days > DAYS_MOST)
        return fault_usage(f, "give fewer", "--smooth and --days reach over %d days at most",
                           DAYS_MOST);
    if (o->shifts && o->hours)
        return fault_usage(f, "leave one out", "--shifts and --hours cannot both be given");
    if (o->shifts > SPLIT_MOST || o->hours > SPLIT_MOST)
        return fault_usage(f, "give 24 or fewer", "a day has no %ld %s",
                           o->shifts ? o->shifts : o->hours, o->shifts ? "shifts" : "hours");
    if (read_number(m->arena, "step", o->step ? o->step : "15", &m->how.step, f) != OK)
        return FAULT;
    return read_target(m, f);
}

/* ---- words ---- */

static const char *short_figure(struct making *m, const struct fraction *x)
{
    return x && fraction_sign(x) == 0 ? "0" : figure_print(m->arena, x, FIGURES_TEXT);
}

/* A day's flow as the amount of one of `parts`: gal or m3. */
static const char *amount_of(struct making *m, long parts)
{
    struct arena *a = m->arena;
    const char *unit = m->plant->metric ? "m3/d" : "gpd";
    const struct fraction *x =
        unit_convert(a, m->plan.flow, unit_find(m->plan.flow_unit), unit_find(unit));
    x = fraction_divide(a, x, fraction_from_int(a, parts));
    return arena_print(a, "%s %s", short_figure(m, x), m->plant->metric ? "m3" : "gal");
}

/* The rate of a pump that gives a day's flow in `hours`: gpm or L/s. */
static const char *rate_over(struct making *m, long hours)
{
    struct arena *a = m->arena;
    const char *unit = m->plant->metric ? "L/s" : "gpm";
    const struct fraction *x =
        unit_convert(a, m->plan.flow, unit_find(m->plan.flow_unit), unit_find(unit));
    x = fraction_multiply(a, x, fraction_from_ratio(a, 24, hours));
    return arena_print(a, "%s %s", short_figure(m, x), unit);
}

static const char *split_words(struct making *m)
{
    const struct waste_given *o = m->given;
    if (o->shifts)
        return arena_print(m->arena, "%s, %s %s in each of %ld shifts", amount_of(m, o->shifts),
                           short_figure(m, fraction_divide(m->arena, m->plan.solids,
                                                           fraction_from_int(m->arena, o->shifts))),
                           m->plan.mass_unit, o->shifts);
    if (o->hours)
        return arena_print(m->arena, "%s for %ld hours", rate_over(m, o->hours), o->hours);
    return "";
}

static const char *limit_sentence(struct making *m)
{
    const struct waste_plan *p = &m->plan;
    if (p->limited_by == WASTE_AS_ASKED)
        return "";
    if (p->limited_by == WASTE_BY_ZERO)
        return "waste nothing: the target leaves nothing to waste";
    return arena_print(m->arena, "held by the step of %s %%: the target asks for %s %s, %s %s",
                       m->given->step ? m->given->step : "15", short_figure(m, p->asked_solids),
                       p->solids_unit, short_figure(m, p->asked_flow), p->flow_unit);
}

static const char *ahead_sentence(struct making *m)
{
    const char *mass = m->plan.mass_unit;
    return arena_print(
        m->arena,
        "Assumed for these days: the plant goes on making %s %s of sludge for each %s of BOD "
        "removed, as in the last 30 days, from the same load; the effluent carries off the same "
        "solids; the waste keeps its rate and its strength.",
        short_figure(m, m->plan.yield), mass, mass);
}

/* ---- the page ---- */

static struct table *parts_table(struct making *m)
{
    struct table *t = table_new(m->arena, "", part_columns, NELEM(part_columns));
    for (size_t i = 0; i < m->plan.parts; i++) {
        const struct waste_part *p = &m->plan.part[i];
        struct cell *c = table_row(t);
        c[0] = cell_text(p->name);
        c[1] = cell_number(short_figure(m, p->value));
        c[2] = cell_text(p->unit);
        if (p->days > 0)
            c[3] = cell_count(m->arena, p->days);
        c[4] = cell_day(m->arena, p->oldest);
        c[5] = cell_day(m->arena, p->newest);
        c[6] = cell_text(p->note);
    }
    return t;
}

static struct table *days_table(struct making *m)
{
    struct arena *a = m->arena;
    struct column *c = arena_alloc(a, 5 * sizeof *c);
    c[0] = (struct column){NULL, "end of", ALIGN_LEFT, false, 0};
    c[1] = (struct column){NULL, arena_print(a, "inventory, %s", m->plan.mass_unit), ALIGN_POINT,
                           false, 0};
    c[2] = (struct column){NULL, "MLSS, mg/L", ALIGN_POINT, false, 0};
    c[3] = (struct column){NULL, "SRT, d", ALIGN_POINT, false, 0};
    c[4] = (struct column){NULL, "note", ALIGN_LEFT, true, 0};
    struct table *t = table_new(a, "The days to come at that rate", c, 5);
    for (size_t i = 0; i < m->plan.days; i++) {
        const struct waste_day *d = &m->plan.day[i];
        struct cell *cell = table_row(t);
        cell[0] = cell_day(a, d->on);
        cell[1] = cell_number(short_figure(m, d->inventory));
        cell[2] = cell_number(short_figure(m, d->mlss));
        cell[3] = cell_number(short_figure(m, d->srt));
        cell[4] = cell_text(d->note);
    }
    return t;
}

static struct page *make_page(struct making *m)
{
    const struct waste_plan *p = &m->plan;
    struct page *page = page_new(m->arena);
    char on[11];
    day_write(m->how.on, on);
    page_heading(page, m->plant->name);
    page_line(page, FLAG_NONE, "Wasting on %s; target: %s", on, m->target);
    page_space(page);
    page_line(page, FLAG_NONE, "Waste %s %s: %s %s%s, or %s around the clock",
              short_figure(m, p->solids), p->solids_unit, short_figure(m, p->flow), p->flow_unit,
              m->plant->metric ? "" : arena_print(m->arena, ", that is %s", amount_of(m, 1)),
              rate_over(m, 24));
    if (*split_words(m))
        page_line(page, FLAG_NONE, "%s", split_words(m));
    if (*limit_sentence(m))
        page_line(page, FLAG_NONE, "%s", limit_sentence(m));
    for (size_t i = 0; i < p->warnings; i++)
        page_line(page, FLAG_WATCH, "Beware: %s", p->warning[i]);
    page_space(page);
    page_table(page, parts_table(m));
    page_space(page);
    if (p->days > 0) {
        page_table(page, days_table(m));
        page_line(page, FLAG_NONE, "%s", ahead_sentence(m));
    } else {
        page_line(page, FLAG_WATCH, "No look ahead: %s", p->no_yield);
    }
    page_line(page, FLAG_NONE, "For a licensed operator to confirm before wasting.");
    return page;
}

/* ---- the file ---- */

static const char *file_note(struct making *m)
{
    struct text t;
    text_init(&t, 4096);
    const char *first[] = {limit_sentence(m), split_words(m)};
    for (size_t i = 0; i < NELEM(first); i++)
        if (*first[i])
            text_print(&t, "%s%s", t.length ? "; " : "", first[i]);
    for (size_t i = 0; i < m->plan.warnings; i++)
        text_print(&t, "%s%s", t.length ? "; " : "", m->plan.warning[i]);
    if (m->how.days > 0 && m->plan.days == 0)
        text_print(&t, "%sno look ahead: %s", t.length ? "; " : "", m->plan.no_yield);
    const char *s = arena_text(m->arena, t.at);
    text_free(&t);
    return s;
}

static struct cell *add_row(struct making *m, struct table *t, day_t on, const char *note)
{
    struct cell *c = table_row(t);
    c[0] = cell_day(m->arena, on);
    c[1] = cell_text(m->target);
    c[2] = cell_number(figure_print(m->arena, m->plan.solids, FIGURES_FILE));
    c[3] = cell_text(m->plan.solids_unit);
    c[4] = cell_number(figure_print(m->arena, m->plan.flow, FIGURES_FILE));
    c[5] = cell_text(m->plan.flow_unit);
    c[6] = cell_text(limit_words[m->plan.limited_by]);
    c[7] = cell_text(note);
    return c;
}

static struct table *make_file(struct making *m)
{
    size_t columns = m->given->days ? NELEM(file_columns) : COLUMNS_PLAIN;
    struct table *t = table_new(m->arena, "", file_columns, columns);
    add_row(m, t, m->how.on, file_note(m));
    for (size_t i = 0; m->given->days && i < m->plan.days; i++) {
        const struct waste_day *d = &m->plan.day[i];
        struct cell *c = add_row(m, t, d->on, d->note);
        c[8] = cell_number(figure_print(m->arena, d->inventory, FIGURES_FILE));
        c[9] = cell_number(figure_print(m->arena, d->mlss, FIGURES_FILE));
        c[10] = cell_number(figure_print(m->arena, d->srt, FIGURES_FILE));
    }
    return t;
}

static enum status run(struct session *s, const void *given, struct fault *f)
{
    struct making m = {.arena = s->arena, .given = given};
    struct plant *plant = NULL;
    struct frame *frame = NULL;
    if (read_options(&m, f) != OK || session_book(s, BOOK_READ, NULL, &plant, f) != OK ||
        session_frame_all(s, plant, process_waste_reach(&m.how), m.how.on, &frame, f) != OK ||
        process_waste(s->arena, frame, &m.how, &m.plan, f) != OK)
        return FAULT;
    m.plant = plant;
    session_print(s, m.given->as, make_page(&m), make_file(&m));
    return OK;
}

const struct command command_waste = {
    .name = "waste",
    .summary = "how much sludge to waste, by flow and mass, in steps",
    .book = true,
    .option = options,
    .options = NELEM(options),
    .options_size = sizeof(struct waste_given),
    .example = examples,
    .examples = NELEM(examples),
    .about = "From the smoothed inventory, less what the effluent carries off, held within a step "
             "of the day before.\n"
             "Warnings are printed in words and do not change the exit status. What cannot be "
             "worked is refused,\n"
             "and the missing reading is named. For a licensed operator to confirm.",
    .run = run,
};
