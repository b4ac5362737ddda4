/* room: what the samples still to come may be, for every limit with an open period on a day, while
 * something can still be done about it. */
#include "permit/outlook.h"

#include <stdlib.h>
#include <string.h>

#include "base/poison.h"

#define DECIMALS_MOST  9
#define YEAR_OF_MONTHS 12

/* ---- which period ---- */

/* The limit's period that holds the day. A twelve-month row ends with the day's own month. */
static bool period_on(const struct limit *l, day_t on, struct period *out)
{
    enum span span = statistic_kind(l->statistic)->span;
    bool own = span == SPAN_MONTH || span == SPAN_12_MONTHS;
    int first = span == SPAN_WEEK ? -1 : 0;
    int last = own ? 0 : span == SPAN_WEEK ? 1 : YEAR_OF_MONTHS - 1;

    for (int i = first; i <= last; i++) {
        struct period periods[PERIODS_MOST];
        size_t count = periods_of(l, month_step(month_first(on), i), periods);

        for (size_t j = 0; j < count; j++) {
            if (periods[j].from <= on && on <= periods[j].to) {
                *out = periods[j];
                return true;
            }
        }
    }
    return false;
}

static bool is_looked_at(const struct limit *l)
{
    return l->bound != BOUND_REPORT && l->limit.set &&
           statistic_kind(l->statistic)->measure != MEASURE_WORST;
}

/* A sample of the day itself may still come where nothing is on record for it. */
static day_t next_day(const struct frame *frame, const struct limit *l, day_t on)
{
    for (int i = 0; i < l->points; i++)
        for (int j = 0; j < l->parameters; j++) {
            size_t count = 0;

            frame_readings(frame, l->point[i], l->parameter[j], on, &count);
            if (count > 0)
                return on + 1;
        }
    return on;
}

/* Of a rolling limit the window that closes with the next sample. */
static bool period_of(const struct limit *l, day_t on, day_t next, struct period *out)
{
    if (statistic_kind(l->statistic)->window == 0)
        return period_on(l, on, out) && next <= out->to;
    *out = (struct period){next, next};
    return limit_in_force(l, next);
}

/* ---- notes ---- */

struct notes {
    struct arena *arena;
    const char *said;
};

__attribute__((format(printf, 2, 3))) static void add_note(struct notes *n, const char *format, ...)
{
    struct text t;
    va_list ap;

    text_init(&t, SIZE_MAX);
    if (n->said)
        text_print(&t, "%s; ", n->said);
    va_start(ap, format);
    text_vprint(&t, format, ap);
    va_end(ap);
    n->said = arena_bytes(n->arena, t.at, t.length);
    text_free(&t);
}

static const char *day_text(struct arena *a, day_t day)
{
    char iso[11];

    day_write(day, iso);
    return arena_text(a, iso);
}

static const char *counted(struct arena *a, long n, const char *one, const char *many)
{
    return arena_print(a, "%ld %s", n, n == 1 ? one : many);
}

/* ---- what stands ---- */

/* The means that a removal's rest is measured against: `averages` gives both sides by themselves.
 */
static void read_parts(struct outlook *o)
{
    struct limit asked = *o->w.limit;
    struct work w = o->today;
    static const struct statistic_kind mean = {SPAN_WEEK, MEASURE_MEAN, 0};

    asked.rules.word[RULE_REMOVAL] = REMOVAL_AVERAGES;
    asked.statistic = STAT_WEEKLY_AVERAGE;
    w.limit = &asked;
    w.rules = &asked.rules;
    w.kind = &mean;
    if (w.reach > o->on - (DAYS_LATELY - 1))
        w.reach = o->on - (DAYS_LATELY - 1);
    amounts_of(&w, &o->parts);
}

/* The last days by themselves. Weeks and months that began before the period are counted in them
 * too, so they reach a little further than 30 days. */
static void read_past(struct outlook *o)
{
    struct statistic_kind kind = *o->w.kind;
    struct work w = o->today;

    kind.span = SPAN_WEEK;
    kind.window = 0;
    w.kind = &kind;
    w.reach = w.from = o->on - PAST_DAYS;
    w.to = w.end = o->on;
    amounts_of(&w, &o->past);
}

static const struct fraction *mean_between(struct arena *a, struct list all, day_t from, day_t to)
{
    struct list l = list_between(all, from, to);
    const struct fraction *sum = fraction_from_int(a, 0);

    if (l.count == 0)
        return NULL;
    for (size_t i = 0; i < l.count; i++)
        sum = fraction_add(a, sum, l.at[i].amount.number);
    return fraction_divide(a, sum, fraction_from_int(a, (int64_t)l.count));
}

/* Of the period so far, else of the last 30 days. */
static const struct fraction *mean_so_far(const struct outlook *o, struct list now,
                                          struct list past)
{
    const struct fraction *mean = mean_between(o->w.arena, now, o->w.reach, o->on);

    if (!mean)
        mean = mean_between(o->w.arena, past, o->on - (DAYS_LATELY - 1), o->on);
    return mean;
}

static const struct fraction *rounded_down(struct arena *a, const struct fraction *x, int decimals)
{
    const struct fraction *r = fraction_round(a, x, decimals, ROUND_HALF_UP);
    struct decimal step = {1, (int8_t)decimals};

    return fraction_compare(r, x) > 0 ? fraction_subtract(a, r, fraction_from_decimal(a, step)) : r;
}

static int decimals_of(const struct limit *l, const struct plant *plant)
{
    const struct parameter *p = &plant->parameters[l->parameter[0]];
    int limit = l->limit.value.scale;
    int decimals = l->unit == p->unit ? (limit > p->decimals ? limit : p->decimals) : limit + 1;

    if (l->basis == BASIS_REMOVAL)
        decimals = p->decimals;
    return decimals > DECIMALS_MOST ? DECIMALS_MOST : decimals;
}

/* Influent and flow are rounded to digits that can be told in the note, so that what was assumed
 * can be worked again by hand; the influent downwards, which is the safe side. */
static bool assume(struct outlook *o, struct notes *n)
{
    struct arena *a = o->w.arena;
    const struct limit *l = o->w.limit;
    const struct parameter *p = &o->w.plant->parameters[l->parameter[0]];
    const struct fraction *mean;

    if (o->now.combine == COMBINE_PRODUCT) {
        if (o->now.parts > 1) {
            add_note(n, "not worked: a sum of outfalls under load_average=product");
            return false;
        }
        mean = mean_so_far(o, o->now.bottom[0], o->past.bottom[0]);
        o->flow = mean ? fraction_round(a, mean, 3, ROUND_HALF_UP) : NULL;
        if (o->flow && fraction_sign(o->flow) > 0)
            return true;
        add_note(n, "not worked: no flow on record lately");
        return false;
    }
    if (l->basis != BASIS_REMOVAL)
        return true;
    mean = mean_so_far(o, o->parts.bottom[0], o->parts.bottom[0]);
    o->influent = mean ? rounded_down(a, mean, p->decimals) : NULL;
    if (o->now.combine == COMBINE_REMOVAL && l->rules.word[RULE_REMOVAL] == REMOVAL_LOADS)
        o->feed = mean_so_far(o, o->now.bottom[0], o->past.bottom[0]);
    if (o->influent && fraction_sign(o->influent) > 0 &&
        (l->rules.word[RULE_REMOVAL] != REMOVAL_LOADS || !o->now.combine || o->feed))
        return true;
    add_note(n, "not worked: no influent on record to measure against");
    return false;
}

/* ---- figures of a row ---- */

static bool is_total(const struct outlook *o)
{
    return o->w.kind->measure == MEASURE_TOTAL;
}

static bool counts_samples(const struct outlook *o)
{
    return o->w.kind->measure == MEASURE_SAMPLES;
}

static const char *number_text(struct arena *a, int64_t k, int decimals)
{
    char out[24];

    decimal_write((struct decimal){k, (int8_t)decimals}, out);
    return arena_text(a, out);
}

static void say_so_far(const struct outlook *o, struct room_row *row)
{
    struct work w = o->today;
    struct figure x;

    if (w.kind->window > 0 && w.rules->word[RULE_WINDOW] == WINDOW_RESULTS && o->now.days.count > 0)
        w.from = w.to = w.end = o->now.days.at[o->now.days.count - 1].day;
    else if (w.kind->window > 0)
        w.end = w.to;
    figure_of(&w, &o->now, &x);
    row->so_far = counts_samples(o) ? arena_print(w.arena, "%ld", x.times)
                                    : figure_text(&w, &x, figure_decimals(&w, &x.exact));
}

/* Ranks are read off real values: those of the days, one after the other; else each sample has the
 * days' mean. */
static bool by_ranks(const struct outlook *o)
{
    return o->w.kind->measure == MEASURE_MEDIAN || o->w.kind->measure == MEASURE_PERCENTILE ||
           (o->w.rules->word[RULE_NONDETECT] == NONDETECT_MEDIAN &&
            o->w.limit->basis != BASIS_LOAD && o->w.limit->basis != BASIS_REMOVAL);
}

static const char *projected_count(const struct outlook *o, struct list l)
{
    struct arena *a = o->w.arena;
    struct figure now, x;
    long beyond = 0;

    figure_of(&o->today, &o->now, &now);
    for (size_t i = 0; i < l.count; i++) {
        figure_of_value(&o->w, &l.at[i], &x);
        beyond += exact_beyond(&o->w, &x.exact);
    }
    if (l.count == 0)
        return "";
    beyond = (beyond * (long)o->days + (long)l.count - 1) / (long)l.count;
    return arena_print(a, "%ld", now.times + beyond);
}

static const char *projected(const struct outlook *o, int days)
{
    struct arena *a = o->w.arena;
    day_t from = o->on - (days - 1);
    bool removal = o->w.limit->basis == BASIS_REMOVAL;
    struct list l = list_between(removal ? o->parts.top[0] : o->past.days, from, o->on);
    struct amount typical, *more = arena_alloc(a, (o->days + 1) * sizeof *more);
    struct outlook printed = *o;
    struct figure x;

    if (counts_samples(o))
        return projected_count(o, list_between(outlook_judged(&o->past), from, o->on));
    typical = outlook_typical(o, &o->past, from, o->on);
    if (!typical.number || l.count == 0)
        return "";
    for (size_t i = 0; i < o->days; i++)
        more[i] = by_ranks(o) ? l.at[i % l.count].amount : typical;
    printed.w.verdict_only = o->w.rules->word[RULE_DIGITS] != DIGITS_FIGURES;
    outlook_figure(&printed, a, more, &x);
    return figure_text(&o->w, &x, figure_decimals(&o->w, &x.exact));
}

/* ---- room ---- */

/* Room over what the whole period may have, a minimum the other way up. */
static const struct fraction *share_left(const struct outlook *o, int64_t k)
{
    struct arena *a = o->w.arena;
    struct decimal d = {k, (int8_t)o->decimals};
    const struct fraction *room = fraction_from_decimal(a, d);
    const struct fraction *limit = fraction_from_decimal(a, o->w.limit->limit.value);
    const struct fraction *hundred = fraction_from_int(a, 100);

    if (counts_samples(o))
        return fraction_from_ratio(a, k, (int64_t)o->days);
    if (o->w.limit->basis == BASIS_REMOVAL)
        limit = fraction_divide(
            a, fraction_multiply(a, o->influent, fraction_subtract(a, hundred, limit)), hundred);
    if (is_total(o)) {
        int64_t whole = o->w.to - o->w.from + 1;

        limit = fraction_multiply(a, limit, fraction_from_ratio(a, o->left, whole));
    }
    if (!outlook_upwards(o)) {
        const struct fraction *other = room;

        room = limit;
        limit = other;
    }
    return fraction_sign(limit) > 0 ? fraction_divide(a, room, limit) : room;
}

static void find_room(const struct outlook *o, struct room_row *row, struct notes *n)
{
    struct arena *a = o->w.arena;
    int64_t k = 0;

    row->state = counts_samples(o) ? outlook_count(o, &k) : outlook_search(o, NULL, &k);
    if (row->state == ROOM_LEFT) {
        row->room = number_text(a, k, counts_samples(o) ? 0 : o->decimals);
        row->share = share_left(o, k);
    } else if (row->state == ROOM_ANY) {
        add_note(n, "whatever comes keeps it");
    } else {
        row->gone = outlook_gone(o);
        if (row->gone != DAY_NONE)
            add_note(n, "NO ROOM since %s: nothing that may still come brings it back",
                     day_text(a, row->gone));
        else
            add_note(n, "NO ROOM: nothing that may come keeps it");
    }
}

/* ---- one single value ---- */

static bool same_series(const struct limit *a, const struct limit *b)
{
    return a->points == b->points && a->parameters == b->parameters &&
           memcmp(a->point, b->point, (size_t)a->points * sizeof a->point[0]) == 0 &&
           memcmp(a->parameter, b->parameter, (size_t)a->parameters * sizeof a->parameter[0]) == 0;
}

/* A daily or instantaneous limit that holds a single value of this row as well. */
static bool holds_single(const struct outlook *o, const struct limit *other)
{
    const struct limit *l = o->w.limit;
    bool removal = l->basis == BASIS_REMOVAL;

    return (other->statistic == STAT_DAILY || other->statistic == STAT_INSTANTANEOUS) &&
           other->bound != BOUND_REPORT && other->bound != BOUND_TARGET && other->limit.set &&
           !other->when.set && is_minimum(other) == !outlook_upwards(o) &&
           other->basis == (removal ? BASIS_CONCENTRATION : l->basis) && same_series(l, other) &&
           limit_in_force(other, o->next);
}

static bool passes(const struct outlook *o, const struct limit *other, const struct unit *unit,
                   int64_t k)
{
    struct work w = o->w;
    struct decimal d = {k, (int8_t)o->decimals};
    struct exact x = {
        .number = frame_in_unit(w.arena, fraction_from_decimal(w.arena, d), unit, other->unit)};

    w.limit = other;
    w.rules = &other->rules;
    return exact_beyond(&w, &x);
}

/* The number nearest to the other limit that it lets pass, seen from 0: no more than it is now. */
static int64_t held_by(const struct outlook *o, const struct limit *other, const struct unit *unit,
                       int64_t k)
{
    bool up = outlook_upwards(o);
    int64_t good = up ? 0 : k, bad = up ? k : 0;

    if (!up)
        while (passes(o, other, unit, good))
            good = good * 2 + 1;
    while (good - bad > 1 || bad - good > 1) {
        int64_t middle = good + (bad - good) / 2;

        if (passes(o, other, unit, middle))
            bad = middle;
        else
            good = middle;
    }
    return good;
}

static void hold_single(const struct outlook *o, struct room_row *row, enum room_state *state,
                        int64_t *k, struct notes *n)
{
    const struct plant *plant = o->w.plant;
    const struct parameter *p = &plant->parameters[o->w.limit->parameter[0]];
    bool removal = o->w.limit->basis == BASIS_REMOVAL;
    const struct unit *unit = removal ? p->unit : o->w.limit->unit;
    const struct limit *by = NULL;

    if (is_total(o))
        return;
    for (size_t i = 0; i < plant->limit_count; i++) {
        const struct limit *other = &plant->limits[i];
        bool open = *state == ROOM_ANY;

        if (!holds_single(o, other) || !unit_same_kind(unit, other->unit))
            continue;
        if (open) /* far beyond whatever a daily limit says */
            *k = outlook_upwards(o) ? INT64_C(1000000000000000) : 0;
        if (!passes(o, other, unit, *k))
            continue;
        *k = held_by(o, other, unit, *k);
        *state = ROOM_LEFT;
        by = other;
    }
    (void)row;
    if (by)
        add_note(n, "held there by the %s limit of %s", by->statistic_text, by->limit_text);
}

static void find_single(const struct outlook *o, struct room_row *row)
{
    struct arena *a = o->w.arena;
    struct notes n = {a, NULL};
    struct amount others = outlook_typical(o, &o->now, o->w.reach, o->on);
    bool lately = !others.number, good = counts_samples(o);
    enum room_state state;
    int64_t k = 0;

    if (lately)
        others = outlook_typical(o, &o->past, o->on - (DAYS_LATELY - 1), o->on);
    if (good)
        others = outlook_edge(o, a, false);
    if (o->days > 1 && !others.number) {
        row->single_note = "no single value: nothing on record that the others could be like";
        return;
    }
    state = outlook_search(o, &others, &k);
    if (o->days > 1 && good)
        add_note(&n, "single: the others within the limit");
    else if (o->days > 1)
        add_note(&n, "single: the others as %s", lately ? "in the last 30 days" : "so far");
    hold_single(o, row, &state, &k, &n);
    if (state == ROOM_LEFT)
        row->single = number_text(a, k, o->decimals);
    else if (state == ROOM_NONE)
        add_note(&n, "no single value, if the others are like that");
    row->single_note = n.said ? n.said : "";
}

/* ---- one row ---- */

/* Of a rolling limit: of the window. */
static void count_taken(const struct outlook *o, struct room_row *row)
{
    size_t window = (size_t)o->w.kind->window, count = o->now.days.count;
    struct work w = o->today;

    if (window > 0) {
        w.from = w.reach;
        if (w.rules->word[RULE_WINDOW] == WINDOW_RESULTS)
            w.from =
                count == 0 ? o->next : o->now.days.at[count < window ? 0 : count - window + 1].day;
        row->from = w.from;
    }
    row->taken = samples_taken(&w, &o->now);
}

/* What concentration a load's room is at the flow of the last 30 days. */
static void note_load(const struct outlook *o, const struct room_row *row, struct notes *n)
{
    struct arena *a = o->w.arena;
    const struct parameter *p = &o->w.plant->parameters[o->w.limit->parameter[0]];
    struct limit asked = *o->w.limit;
    struct work w = o->today;
    static const struct statistic_kind mean = {SPAN_WEEK, MEASURE_MEAN, 0};
    const struct fraction *flow, *room, *one = fraction_from_int(a, 1);
    struct series s;

    if (row->state != ROOM_LEFT || asked.basis != BASIS_LOAD || asked.points > 1)
        return;
    asked.rules.word[RULE_LOAD_AVERAGE] = LOAD_AVERAGE_PRODUCT;
    w.limit = &asked;
    w.rules = &asked.rules;
    w.kind = &mean;
    w.reach = o->on - (DAYS_LATELY - 1);
    w.to = w.end = o->on;
    amounts_of(&w, &s);
    flow = s.parts > 0 ? mean_between(a, s.bottom[0], w.reach, o->on) : NULL;
    if (!flow || fraction_sign(flow) <= 0)
        return;
    room = fraction_parse(a, row->room);
    if (is_total(o))
        room = fraction_divide(a, room, fraction_from_int(a, o->left));
    room = fraction_divide(a, room, load_of(&o->w, one, flow));
    add_note(n, "room is %s mg/L at the flow of the last 30 days, %s %s",
             fraction_print(a, rounded_down(a, room, p->decimals), p->decimals, ROUND_HALF_UP),
             fraction_print(a, flow, 3, ROUND_HALF_UP), load_flow_unit(&asked)->name);
}

static void note_measure(const struct outlook *o, const struct room_row *row, struct notes *n)
{
    struct arena *a = o->w.arena;
    const struct limit *l = o->w.limit;
    int decimals = o->w.plant->parameters[l->parameter[0]].decimals;

    if (l->basis == BASIS_REMOVAL)
        add_note(n, "room and single are effluent in %s, the influent staying at %s %s",
                 row->room_unit, fraction_print(a, o->influent, decimals, ROUND_HALF_UP),
                 row->room_unit);
    if (o->flow)
        add_note(n, "the flow staying at %s %s", fraction_print(a, o->flow, 3, ROUND_HALF_UP),
                 load_flow_unit(l)->name);
    if (is_total(o))
        add_note(n, "room is all that may still be discharged in %s",
                 counted(a, o->left, "day", "days"));
    if (counts_samples(o))
        add_note(n, "counts of samples beyond the limit, of %s to come",
                 counted(a, (long)o->days, "sample", "samples"));
    if (o->w.kind->window > 0)
        add_note(n, "the window that closes with the sample of %s", day_text(a, o->next));
    note_load(o, row, n);
}

static void note_remaining(const struct outlook *o, const struct remaining *r, struct notes *n)
{
    struct arena *a = o->w.arena;

    if (o->w.kind->window > 0)
        return;
    if (r->lately)
        add_note(n, "%s: %s with a value in the last 30, so %ld more assumed",
                 r->longer ? "its frequency is longer than the period" : "no frequency is named",
                 counted(a, r->seen, "day", "days"), r->samples);
    if (r->extra)
        add_note(n, "no more samples are asked for: room is for one more");
    if (r->lost > 0)
        add_note(n, "%s owed can no longer be taken", counted(a, r->lost, "sample", "samples"));
}

static void note_limit(const struct limit *l, enum holds holds, struct notes *n)
{
    if (l->bound == BOUND_TARGET)
        add_note(n, "a target");
    if (l->when.set)
        add_note(n,
                 holds == HOLDS_UNKNOWN ? "when %s, which has no figure yet"
                                        : "while %s, as it does so far",
                 l->when.text);
    if (*l->group != '\0')
        add_note(n, "one of group %s is enough", l->group);
}

static enum status look_at(struct outlook *o, enum holds holds, struct room_row *row, bool *shown,
                           struct fault *f)
{
    struct arena *a = o->w.arena;
    const struct limit *l = o->w.limit;
    struct notes n = {a, NULL};
    struct remaining r;
    enum status rc = OK;

    *shown = false;
    *row = (struct room_row){.limit = l, .from = o->w.from, .to = o->w.to, .gone = DAY_NONE};
    row->so_far = row->room = row->single = row->projected_7 = row->projected_30 = "";
    row->note = row->single_note = "";
    if (l->basis == BASIS_REMOVAL) {
        TRY(find_influent(o->w.plant, l, &o->w.influent, f));
        o->today.influent = o->w.influent;
        read_parts(o);
    }
    row->room_unit = l->basis == BASIS_REMOVAL ? o->w.plant->parameters[l->parameter[0]].unit->name
                                               : l->unit_text;
    amounts_of(&o->today, &o->now);
    read_past(o);
    remaining_of(o, &r);
    if (r.days == 0)
        return OK;
    *shown = true;
    o->day = row->day = r.day;
    o->days = row->days = r.days;
    o->left = r.left;
    row->remaining = r.samples;
    count_taken(o, row);
    say_so_far(o, row);
    note_limit(l, holds, &n);
    row->state = ROOM_NOT_WORKED;
    if (assume(o, &n)) {
        find_room(o, row, &n);
        if (row->state != ROOM_NONE)
            find_single(o, row);
        row->projected_7 = projected(o, 7);
        row->projected_30 = projected(o, DAYS_LATELY);
        note_measure(o, row, &n);
    }
    note_remaining(o, &r, &n);
    row->note = n.said ? n.said : "";
done:
    return rc;
}

/* ---- all of them ---- */

/* R47: among rows of one group, from and to, one that is met is enough. */
static void judge_groups(struct arena *a, struct room_row *rows, size_t count)
{
    for (size_t i = 0; i < count; i++) {
        struct room_row *r = &rows[i];

        for (size_t j = 0; j < count && !r->let_off; j++)
            r->let_off = r->state == ROOM_NONE && *r->limit->group != '\0' &&
                         (rows[j].state == ROOM_LEFT || rows[j].state == ROOM_ANY) &&
                         text_equal(rows[j].limit->group, r->limit->group) &&
                         rows[j].from == r->from && rows[j].to == r->to;
        if (r->let_off)
            r->note = arena_print(a, "%s; another of its group can still be met", r->note);
    }
}

static int order_of(const struct room_row *r)
{
    static const int order[] = {
        [ROOM_NONE] = 0, [ROOM_LEFT] = 1, [ROOM_ANY] = 2, [ROOM_NOT_WORKED] = 3};
    return order[r->state];
}

static int worse_first(const void *x, const void *y)
{
    const struct room_row *a = x, *b = y;
    int c = order_of(a) - order_of(b);

    if (c == 0 && a->let_off != b->let_off)
        return a->let_off ? 1 : -1;

    if (c == 0 && a->state == ROOM_NONE)
        c = (a->gone > b->gone) - (a->gone < b->gone);
    if (c == 0 && a->share && b->share)
        c = fraction_compare(a->share, b->share);
    return c != 0 ? c : (a->limit->line > b->limit->line) - (a->limit->line < b->limit->line);
}

enum status permit_room(struct arena *a, const struct frame *frame, day_t on,
                        struct room_row **rows, size_t *count, struct fault *f)
{
    const struct plant *plant = frame_plant(frame);
    size_t room = 0;
    enum status rc = OK;

    *rows = NULL;
    *count = 0;
    for (size_t i = 0; i < plant->limit_count; i++) {
        const struct limit *l = &plant->limits[i];
        struct outlook o = {.on = on, .next = next_day(frame, l, on)};
        struct room_row row, *into;
        struct period p;
        enum holds holds;
        bool shown;

        if (!is_looked_at(l) || !period_of(l, on, o.next, &p))
            continue;
        TRY(condition_holds(a, frame, l, month_first(on), on, &holds, f));
        if (holds == HOLDS_NOT)
            continue;
        o.w = work_on(a, frame, l, &p, p.to);
        o.today = work_on(a, frame, l, &p, on);
        o.decimals = decimals_of(l, plant);
        TRY(look_at(&o, holds, &row, &shown, f));
        if (!shown)
            continue;
        into = arena_push(a, rows, count, &room, sizeof *into);
        *into = row;
    }
    judge_groups(a, *rows, *count);
    if (*count > 0)
        qsort(*rows, *count, sizeof **rows, worse_first);
done:
    return rc;
}

/* ---- needs ---- */

void permit_room_needs(struct arena *a, const struct plant *plant, day_t on,
                       struct frame_span **needs, size_t *count)
{
    struct period *periods = arena_alloc(a, (plant->limit_count + 1) * sizeof *periods);

    for (size_t i = 0; i < plant->limit_count; i++) {
        const struct limit *l = &plant->limits[i];
        struct period *p = &periods[i];

        /* Whether the day's sample is taken is not known yet: both are looked at. */
        if (!is_looked_at(l) || !(period_of(l, on, on, p) || period_of(l, on, on + 1, p))) {
            *p = (struct period){1, 0};
            continue;
        }
        p->from = p->from > on - PAST_DAYS ? on - PAST_DAYS : p->from;
        p->to = on;
    }
    needs_of_periods(a, plant, month_first(on), periods, needs, count);
}
