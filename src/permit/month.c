/* month: every limit of a month, in the order of limits.csv, then by date (R2): its rows, their
 * conditions and groups. */
#include "permit/work.h"

#include <assert.h>

#include "base/poison.h"

/* ---- the work on a row ---- */

bool work_takes(const struct work *w, day_t day)
{
    return w->kind->span != SPAN_MONTH || w->kind->window > 0 || limit_in_force(w->limit, day);
}

bool work_no_discharge(const struct work *w, day_t day)
{
    for (int i = 0; i < w->limit->points; i++)
        if (!frame_no_discharge(w->frame, w->limit->point[i], day))
            return false;
    return true;
}

bool work_without_discharge(const struct work *w, day_t from, day_t to)
{
    bool any = false;

    for (day_t day = from; day <= to && day <= w->on; day++) {
        if (w->from <= day && day <= w->to && !work_takes(w, day))
            continue; /* a week may reach over the row's ends */
        for (int i = 0; i < w->limit->points; i++) {
            int point = w->limit->point[i];

            if (!frame_entry(w->frame, point, day))
                continue;
            if (!frame_no_discharge(w->frame, point, day))
                return false;
            any = true;
        }
    }
    return any;
}

struct work work_on(struct arena *a, const struct frame *frame, const struct limit *l,
                    const struct period *p, day_t on)
{
    return (struct work){
        .arena = a,
        .frame = frame,
        .plant = frame_plant(frame),
        .limit = l,
        .rules = &l->rules,
        .kind = statistic_kind(l->statistic),
        .from = p->from,
        .to = p->to,
        .reach = period_reach(frame_plant(frame), l, p),
        .end = on < p->to ? on : p->to,
        .on = on,
        .influent = -1,
    };
}

/* ---- conditions ---- */

static enum basis basis_of_unit(const struct parameter *p, const struct unit *unit)
{
    static const struct {
        const char *kind;
        enum basis basis;
    } bases[] = {{"flow", BASIS_FLOW},
                 {"volume", BASIS_FLOW},
                 {"mass-rate", BASIS_LOAD},
                 {"mass", BASIS_LOAD},
                 {"percent", BASIS_REMOVAL}};

    for (size_t i = 0; i < NELEM(bases); i++)
        if (text_equal(unit->kind, bases[i].kind) &&
            (bases[i].basis == BASIS_FLOW || !unit_same_kind(p->unit, unit)))
            return bases[i].basis;
    return BASIS_CONCENTRATION;
}

/* A row that only reports, under the parameter's own rules. */
struct limit plain_limit(const struct plant *plant, int point, int parameter,
                         enum statistic statistic, const struct unit *unit)
{
    const struct parameter *p = &plant->parameters[parameter];
    struct limit l = {
        .outfall = plant->points[point].outfall,
        .point = {point},
        .points = 1,
        .parameter = {parameter},
        .parameters = 1,
        .point_text = plant->points[point].id,
        .parameter_text = p->id,
        .basis = basis_of_unit(p, unit),
        .statistic = statistic,
        .statistic_text = statistic_words[statistic],
        .bound = BOUND_REPORT,
        .limit_text = "",
        .unit = unit,
        .unit_text = unit->name,
        .from = DAY_NONE,
        .to = DAY_NONE,
        .group = "",
        .rules = p->rules,
        .note = "",
    };

    for (size_t i = 0; i < RULES; i++)
        l.rules.own[i] = false;
    return l;
}

/* R37: the figure follows the plant's and the parameter's rules, with the basis of its unit. */
void condition_limit(const struct plant *plant, const struct limit *l, struct limit *out)
{
    const struct condition *c = &l->when;

    *out = plain_limit(plant, c->point, c->parameter, c->statistic, c->unit);
    out->line = l->line;
    out->outfall = l->outfall;
    out->percentile = c->percentile;
}

static bool compares(const struct condition *c, int order)
{
    switch (c->comparison) {
    case WHEN_OVER:
        return order > 0;
    case WHEN_AT_LEAST:
        return order >= 0;
    case WHEN_UNDER:
        return order < 0;
    default:
        return order <= 0;
    }
}

/* R2: the exact figure of the month is compared. */
enum status condition_holds(struct arena *a, const struct frame *frame, const struct limit *l,
                            day_t month, day_t on, enum holds *out, struct fault *f)
{
    const struct fraction *number;
    struct period periods[PERIODS_MOST];
    struct limit asked;
    struct series series;
    struct figure x = {0};
    struct work w;
    enum status rc = OK;

    *out = HOLDS;
    if (!l->when.set)
        return OK;
    *out = HOLDS_UNKNOWN;
    condition_limit(frame_plant(frame), l, &asked);
    if (periods_of(&asked, month, periods) > 0) {
        w = work_on(a, frame, &asked, &periods[0], on);
        if (asked.basis == BASIS_REMOVAL)
            TRY(find_influent(w.plant, &asked, &w.influent, f));
        amounts_of(&w, &series);
        figure_of(&w, &series, &x);
    }
    if (x.exact.number) {
        number = fraction_from_decimal(a, l->when.number);
        *out = compares(&l->when, x.exact.product
                                      ? root_compare(a, x.exact.product, x.exact.root, number)
                                      : fraction_compare(x.exact.number, number))
                   ? HOLDS
                   : HOLDS_NOT;
    }
done:
    return rc;
}

/* ---- rows ---- */

static enum status add_row(struct work *w, bool when_missing, struct permit_row *row,
                           struct fault *f)
{
    struct series series;
    struct figure x;
    enum status rc = OK;

    if (w->limit->basis == BASIS_REMOVAL)
        TRY(find_influent(w->plant, w->limit, &w->influent, f));
    amounts_of(w, &series);
    figure_of(w, &series, &x);
    if (!x.note)
        x.note = series.why;
    verdict_row(w, &x, when_missing, row);
    if (when_missing)
        row->note = arena_print(w->arena, "no figure for its condition: %s; load its readings",
                                w->limit->when.text);
    row->samples = samples_taken(w, &series);
    row->has_required = samples_required(w, &row->required);
done:
    return rc;
}

static enum status add_rows(struct arena *a, const struct frame *frame, const struct limit *l,
                            struct permit_month *m, size_t *room, struct fault *f)
{
    struct period periods[PERIODS_MOST];
    size_t count = periods_of(l, m->month, periods);
    enum holds holds = HOLDS;
    enum status rc = OK;

    if (count > 0)
        TRY(condition_holds(a, frame, l, m->month, m->on, &holds, f));
    for (size_t i = 0; i < count && holds != HOLDS_NOT; i++) {
        struct work w = work_on(a, frame, l, &periods[i], m->on);

        TRY(add_row(&w, holds == HOLDS_UNKNOWN,
                    arena_push(a, &m->rows, &m->count, room, sizeof *m->rows), f));
    }
done:
    return rc;
}

/* ---- groups ---- */

/* The row of the same group, from and to that is met by itself, or NULL. */
static const struct permit_row *met_beside(const struct permit_month *m, const bool *met,
                                           const struct permit_row *row)
{
    for (size_t i = 0; i < m->count; i++)
        if (met[i] && text_equal(m->rows[i].limit->group, row->limit->group) &&
            m->rows[i].from == row->from && m->rows[i].to == row->to)
            return &m->rows[i];
    return NULL;
}

/* R47: among rows of one group, from and to, one that is met lets the others off. */
static void judge_groups(struct arena *a, struct permit_month *m)
{
    bool *met = arena_alloc(a, m->count + 1);

    for (size_t i = 0; i < m->count; i++)
        met[i] = m->rows[i].verdict == VERDICT_MET && *m->rows[i].limit->group != '\0';
    for (size_t i = 0; i < m->count; i++) {
        struct permit_row *row = &m->rows[i];
        const struct permit_row *by;

        if (row->verdict != VERDICT_EXCEEDED || !(by = met_beside(m, met, row)))
            continue;
        row->verdict = VERDICT_MET;
        row->note =
            arena_print(a, "met by its group: %s %s %s %s of line %ld", by->limit->point_text,
                        by->limit->parameter_text, basis_words[by->limit->basis],
                        by->limit->statistic_text, by->limit->line);
    }
}

bool permit_shortfall(const struct permit_row *row, day_t on)
{
    return row->has_required && row->samples < row->required && row->to <= on;
}

enum status permit_month(struct arena *a, const struct frame *frame, day_t month, day_t on,
                         struct permit_month *out, struct fault *f)
{
    const struct plant *plant = frame_plant(frame);
    size_t room = 0;
    enum status rc = OK;

    assert(month == month_first(month));
    *out = (struct permit_month){.month = month, .on = on};
    for (size_t i = 0; i < plant->limit_count; i++)
        TRY(add_rows(a, frame, &plant->limits[i], out, &room, f));
    judge_groups(a, out);
    for (size_t i = 0; i < out->count; i++) {
        out->exceeded += out->rows[i].verdict == VERDICT_EXCEEDED;
        out->shortfalls += permit_shortfall(&out->rows[i], on);
    }
done:
    return rc;
}

/* ---- one day ---- */

/* The one reading of a day as the laboratory gave it, its digits kept; NULL where several make the
 * value, where it was in another unit, or where a register stands behind it. */
static const char *as_given(struct arena *a, const struct frame *frame, int point, int parameter,
                            day_t day)
{
    static const char *const signs[QUALIFIERS] = {
        [QUALIFIER_PLAIN] = "", [QUALIFIER_LESS] = "<", [QUALIFIER_GREATER] = ">"};
    size_t count = 0;
    const struct reading *const *r = frame_readings(frame, point, parameter, day, &count);
    const struct plant *plant = frame_plant(frame);
    const struct meter *meter = plant_meter(plant, point, parameter, day);
    const struct reading *one = NULL;
    char digits[24];

    for (size_t i = 0; i < count; i++) {
        if (r[i]->qualifier == QUALIFIER_CODE)
            continue;
        if (one != NULL)
            return NULL;
        one = r[i];
    }
    if (one == NULL || signs[one->qualifier] == NULL ||
        unit_at(one->unit) != plant->parameters[parameter].unit ||
        (meter != NULL && meter->kind == METER_TOTALIZER))
        return NULL;
    decimal_write(one->value, digits);
    return arena_print(a, "%s%s", signs[one->qualifier], digits);
}

const char *permit_day_text(struct arena *a, const struct frame *frame, int point, int parameter,
                            day_t day, const struct rules *rules, int decimals)
{
    const struct plant *plant = frame_plant(frame);
    struct limit l =
        plain_limit(plant, point, parameter, STAT_DAILY, plant->parameters[parameter].unit);
    struct work w = {.arena = a, .frame = frame, .plant = plant, .limit = &l, .rules = &l.rules};
    struct day_value v;
    struct value value;
    struct figure x;
    const char *given;

    l.rules = *rules;
    l.rules.word[RULE_DIGITS] = DIGITS_NUMBER;
    w.kind = statistic_kind(STAT_DAILY);
    frame_day(frame, point, parameter, day, rules, NULL, &v);
    if (!v.amount.number)
        return "";
    if (v.state == DAY_VALUED && (given = as_given(a, frame, point, parameter, day)))
        return given;
    value = (struct value){.day = day, .amount = v.amount, .readings = v.readings, .sample = true};
    figure_of_value(&w, &value, &x);
    return figure_text(&w, &x, decimals);
}

bool permit_day_beyond(struct arena *a, const struct frame *frame, const struct limit *l, day_t day)
{
    const struct period period = {day, day};
    struct work w = work_on(a, frame, l, &period, day);
    struct series series;
    struct figure x;

    assert(l->statistic == STAT_DAILY || l->statistic == STAT_INSTANTANEOUS);
    amounts_of(&w, &series);
    figure_of(&w, &series, &x);
    return x.times > 0;
}

const char *permit_month_mean(struct arena *a, const struct frame *frame, int point, int parameter,
                              day_t month, day_t on)
{
    const struct plant *plant = frame_plant(frame);
    const struct parameter *p = &plant->parameters[parameter];
    const struct period period = {month, month_last(month)};
    struct limit l = plain_limit(
        plant, point, parameter,
        p->average == AVERAGE_GEOMETRIC ? STAT_MONTHLY_GEOMEAN : STAT_MONTHLY_AVERAGE, p->unit);
    struct work w = work_on(a, frame, &l, &period, on);
    struct series series;
    struct figure x;

    amounts_of(&w, &series);
    figure_of(&w, &series, &x);
    return x.exact.number ? figure_text(&w, &x, figure_decimals(&w, &x.exact)) : "";
}
