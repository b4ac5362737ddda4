/* Doubts about a reading beside its season: the 45 days around it, in its year and up to four
 * before. A reading far outside the robust range whose neighbours are calm may be a slip of the
 * unit or of two digits; else it deserves a question. */
#include "process/doubt.h"

#include <math.h>
#include <stdlib.h>

#include "base/poison.h"

#define SEASON_LEAST 15 /* values that a median and MAD are taken of, at least; common practice */
#define SCALE_MOST   6
#define LOG_SCALE    9

/* A column's values as whole numbers: value x 10^scale, or of bacteria log10(value) x 10^9. */
struct value {
    const struct reading *reading;
    int64_t y;
};

struct seasoning {
    struct doubting *d;
    int point, parameter;
    bool logs;
    int scale;
    uint16_t unit; /* that of the month's first reading */
    struct value *value[DOUBT_YEARS];
    size_t count[DOUBT_YEARS], room[DOUBT_YEARS];
    int64_t *window, *work;
    size_t width; /* how many stand in the window */
    day_t day;    /* of the window */
    struct doubt_spread spread;
    struct outside {
        const struct reading *worst;
        int64_t worst_y;
        struct doubt_spread spread;
        const char *grubbs;
        const struct fraction *score;
        const char *others;
        size_t readings;
    } side[2]; /* below, above */
};

/* ---- values as whole numbers ---- */

static const int64_t tens[] = {1, 10, 100, 1000, 10000, 100000, 1000000};

static bool in_other_unit(const struct seasoning *s, const struct reading *r, int64_t *y)
{
    struct arena *a = s->d->arena;
    const struct fraction *x =
        frame_in_unit(a, fraction_from_decimal(a, r->value), unit_at(r->unit), unit_at(s->unit));
    x = fraction_multiply(a, x, fraction_from_int(a, tens[s->scale]));
    if (fraction_compare(x, fraction_from_int(a, DOUBT_MOST)) > 0 ||
        fraction_compare(x, fraction_from_int(a, -DOUBT_MOST)) < 0)
        return false;
    *y = (int64_t)fraction_double(fraction_round(a, x, 0, ROUND_HALF_EVEN));
    return true;
}

static bool whole_number(const struct seasoning *s, const struct reading *r, int64_t *y)
{
    int64_t c = r->value.coefficient;
    if (s->logs) {
        *y = c <= 0 ? 0 : llround((log10((double)c) - r->value.scale) * 1e9);
        return r->unit == s->unit;
    }
    if (r->unit != s->unit)
        return in_other_unit(s, r, y);
    if (r->value.scale > s->scale)
        return false;
    int64_t factor = tens[s->scale - r->value.scale];
    if (c > DOUBT_MOST / factor || c < -DOUBT_MOST / factor)
        return false;
    *y = c * factor;
    return true;
}

static const char *show_half(const struct seasoning *s, int64_t twice)
{
    struct arena *a = s->d->arena;
    if (s->logs) {
        const struct fraction *x = fraction_from_double(a, pow(10, (double)twice / 2e9));
        int decimals = fraction_decimals_for(x, 2, ROUND_HALF_EVEN);
        return fraction_print(a, x, decimals < 0 ? 0 : decimals, ROUND_HALF_EVEN);
    }
    return doubt_print(a, fraction_from_ratio(a, twice, 2 * tens[s->scale]));
}

/* ---- gathering ---- */

/* The same date some years before; 29 February becomes the 28th. */
static day_t years_before(day_t day, int years)
{
    int year;
    int month;
    int date;
    day_t out;
    day_split(day, &year, &month, &date);
    if (day_from(year - years, month, date, &out) || day_from(year - years, month, date - 1, &out))
        return out;
    return day - 365 * years; /* before the first year there is */
}

static bool counted(const struct reading *r)
{
    return doubt_measured(r) || r->qualifier == QUALIFIER_LESS || r->qualifier == QUALIFIER_GREATER;
}

/* The frame that holds a year's days, and which of them. */
static const struct frame *span_of(const struct seasoning *s, int years, day_t *first, day_t *last)
{
    const struct frame *frame = years == 0 ? s->d->frame : s->d->past;
    if (!frame || !frame_has(frame, s->point, s->parameter))
        return NULL;
    *first = years_before(s->d->first, years) - DOUBT_AROUND - 1;
    *last = years_before(s->d->last, years) + DOUBT_AROUND + 1;
    *first = *first < frame_first(frame) ? frame_first(frame) : *first;
    *last = *last > frame_last(frame) ? frame_last(frame) : *last;
    return frame;
}

/* The month's unit and the most decimals of any reading. False: the month has no reading. */
static bool look(struct seasoning *s)
{
    bool any = false;
    const struct parameter *p = &s->d->plant->parameters[s->parameter];
    s->logs = p->average == AVERAGE_GEOMETRIC || p->day_rule == DAY_GEOMETRIC;
    for (day_t day = s->d->first; day <= s->d->last; day++) {
        size_t count = 0;
        const struct reading *const *r =
            frame_readings(s->d->frame, s->point, s->parameter, day, &count);
        for (size_t i = 0; i < count; i++) {
            if (!doubt_measured(r[i]))
                continue;
            if (!any)
                s->unit = r[i]->unit;
            any = true;
        }
    }
    s->scale = s->logs ? 0 : SCALE_MOST;
    return any;
}

static size_t gather(struct seasoning *s)
{
    size_t all = 0;
    for (int years = 0; years < DOUBT_YEARS; years++) {
        day_t first = 0;
        day_t last = 0;
        const struct frame *frame = span_of(s, years, &first, &last);
        for (day_t day = first; frame && day <= last; day++) {
            size_t count = 0;
            const struct reading *const *r =
                frame_readings(frame, s->point, s->parameter, day, &count);
            for (size_t i = 0; i < count; i++) {
                int64_t y;
                if (!counted(r[i]) || !whole_number(s, r[i], &y))
                    continue;
                struct value *v = arena_push(s->d->arena, &s->value[years], &s->count[years],
                                             &s->room[years], sizeof *v);
                *v = (struct value){r[i], y};
                all++;
            }
        }
    }
    return all;
}

/* The values of the days around `day` in all years, and their median and MAD. */
static void open_window(struct seasoning *s, day_t day)
{
    if (s->day == day)
        return;
    s->day = day;
    s->width = 0;
    for (int years = 0; years < DOUBT_YEARS; years++) {
        day_t middle = years_before(day, years);
        for (size_t i = 0; i < s->count[years]; i++) {
            const struct value *v = &s->value[years][i];
            if (v->reading->day >= middle - DOUBT_AROUND &&
                v->reading->day <= middle + DOUBT_AROUND)
                s->window[s->width++] = v->y;
        }
    }
    for (size_t i = 0; i < s->width; i++)
        s->work[i] = s->window[i];
    if (s->width > 0)
        doubt_spread(s->work, s->width, &s->spread);
}

/* ---- judging ---- */

/* Whether 0.6745 |y / over - median| / MAD is above `tenths` / 10. */
static bool beyond(const struct doubt_spread *s, doubt_wide y, int64_t over, int tenths)
{
    doubt_wide away = 2 * y - (doubt_wide)s->twice_median * over;
    away = away < 0 ? -away : away;
    return away * 13490 > (doubt_wide)s->four_mad * over * 1000 * tenths;
}

/* The nearest readings of other days before and after; calm when both lie well inside. */
static bool calm(const struct seasoning *s, size_t at, const struct value **before,
                 const struct value **after)
{
    const struct value *v = s->value[0];
    size_t i = at;
    size_t j = at;
    while (i > 0 && v[i].reading->day == v[at].reading->day)
        i--;
    while (j + 1 < s->count[0] && v[j].reading->day == v[at].reading->day)
        j++;
    *before = &v[i];
    *after = &v[j];
    return v[i].reading->day < v[at].reading->day && v[j].reading->day > v[at].reading->day &&
           !beyond(&s->spread, v[i].y, 1, 20) && !beyond(&s->spread, v[j].y, 1, 20);
}

static const char *season_words(const struct seasoning *s, int64_t y)
{
    const struct fraction *score = doubt_score(s->d->arena, &s->spread, y);
    return arena_print(
        s->d->arena, "modified z-score %s, above 3.5: the median of %zu values of the season is %s",
        fraction_print(s->d->arena, score, 1, ROUND_HALF_EVEN), s->spread.count,
        show_half(s, s->spread.twice_median));
}

static bool slipped(struct seasoning *s, const struct value *v)
{
    static const int factors[] = {10, 24, 1000};
    for (size_t i = 0; i < NELEM(factors); i++) {
        bool times = !beyond(&s->spread, (doubt_wide)v->y * factors[i], 1, 20);
        bool over = !beyond(&s->spread, v->y, factors[i], 20);
        if (v->y == 0 || (!times && !over))
            continue;
        doubt_tell(s->d, DOUBT_SLIP, v->reading, 0, 0, 0, "",
                   arena_print(s->d->arena,
                               "%s %d it would be like the rest; %s, and the readings before and "
                               "after are as usual; Iglewicz and Hoaglin 1993, the factor common "
                               "practice",
                               times ? "times" : "divided by", factors[i], season_words(s, v->y)));
        return true;
    }
    return false;
}

/* Two digits side by side swapped, and no 0 in front: between the readings before and after, give
 * or take a MAD. */
static bool swapped(struct seasoning *s, const struct value *v, const struct value *before,
                    const struct value *after)
{
    int64_t low = before->y < after->y ? before->y : after->y;
    int64_t high = before->y > after->y ? before->y : after->y;
    struct reading other = *v->reading;
    for (int64_t place = 1; place <= v->reading->value.coefficient / 10; place *= 10) {
        int64_t c = v->reading->value.coefficient;
        int64_t right = c / place % 10;
        int64_t left = c / place / 10 % 10;
        int64_t y;
        char number[24];
        other.value.coefficient = c + (left - right) * place + (right - left) * place * 10;
        if (left == right || (right == 0 && c < place * 100) || !whole_number(s, &other, &y) ||
            4 * (doubt_wide)y < 4 * (doubt_wide)low - s->spread.four_mad ||
            4 * (doubt_wide)y > 4 * (doubt_wide)high + s->spread.four_mad)
            continue;
        decimal_write(other.value, number);
        doubt_tell(s->d, DOUBT_SWAP, v->reading, 0, 0, 0, "",
                   arena_print(s->d->arena,
                               "with two digits swapped, %s, it lies between %s of %s and %s of "
                               "%s; %s; Iglewicz and Hoaglin 1993, the swap common practice",
                               number, before->reading->text,
                               doubt_date(s->d->arena, before->reading->day), after->reading->text,
                               doubt_date(s->d->arena, after->reading->day),
                               season_words(s, v->y)));
        return true;
    }
    return false;
}

/* What Grubbs' test says of it; exact but for the critical value, which comes from Student's
 * distribution. */
static const char *second_opinion(const struct seasoning *s, int64_t y, bool *agrees)
{
    struct arena *a = s->d->arena;
    const struct fraction *square = doubt_grubbs(a, s->window, s->width, y);
    *agrees = false;
    if (!square)
        return "";
    const struct fraction *critical =
        fraction_from_double(a, doubt_grubbs_critical(s->width, 0.025));
    *agrees = root_compare(a, square, 2, critical) > 0;
    return arena_print(
        a, "; Grubbs' test %s: G %s, critical %s at 5 %%", *agrees ? "agrees" : "does not agree",
        fraction_print(a, root_round(a, square, 2, 2, ROUND_HALF_EVEN), 2, ROUND_HALF_EVEN),
        fraction_print(a, critical, 2, ROUND_HALF_EVEN));
}

/* A month has a thousand readings, so some pass 3.5 by chance: the second opinion must agree, or
 * the score be twice that (several far values together hide from Grubbs' test). Days like it are
 * told with the worst of them, in one doubt. */
static void keep_outside(struct seasoning *s, const struct value *v)
{
    struct arena *a = s->d->arena;
    struct outside *o = &s->side[2 * v->y > s->spread.twice_median];
    const struct fraction *score = doubt_score(a, &s->spread, v->y);
    const struct reading *other = v->reading;
    bool agrees = false;
    const char *opinion = second_opinion(s, v->y, &agrees);
    if (!agrees && !beyond(&s->spread, v->y, 1, 70))
        return;
    if (!o->worst || fraction_compare(score, o->score) > 0) {
        other = o->worst;
        o->worst = v->reading;
        o->worst_y = v->y;
        o->score = score;
        o->spread = s->spread;
        o->grubbs = opinion;
    }
    if (other && o->readings < 6)
        o->others =
            arena_print(a, "%s%s%s of %s", o->others ? o->others : "", o->others ? ", " : "; also ",
                        other->text, doubt_date(a, other->day) + 5);
    o->readings++;
}

static void tell_outside(struct seasoning *s, const struct outside *o)
{
    struct arena *a = s->d->arena;
    if (!o->worst)
        return;
    s->spread = o->spread;
    const char *more = o->readings > 6 ? arena_print(a, " and %zu more", o->readings - 6) : "";
    doubt_tell(s->d, DOUBT_SEASON, o->worst, 0, 0, 0, "",
               arena_print(a, "%s%s%s%s%s; Iglewicz and Hoaglin 1993", season_words(s, o->worst_y),
                           s->logs ? ", on logarithms" : "", o->grubbs, o->others ? o->others : "",
                           more));
}

/* Five to ten values: Dixon's test at 99 %, for the only one at an end. */
static void among_few(struct seasoning *s, const struct value *v)
{
    struct arena *a = s->d->arena;
    bool top = true;
    bool bottom = true;
    for (size_t i = 0; i < s->width; i++) {
        top = top && s->window[i] <= v->y;
        bottom = bottom && s->window[i] >= v->y;
    }
    if (top == bottom)
        return;
    const struct fraction *q = doubt_dixon(a, s->window, s->width, top);
    int critical = doubt_dixon_critical(s->width, true);
    if (fraction_compare(q, fraction_from_ratio(a, critical, 1000)) <= 0)
        return;
    doubt_tell(s->d, DOUBT_FEW, v->reading, 0, 0, 0, "",
               arena_print(a,
                           "Dixon's r10 is %s, above 0.%d at 99 %%: the median of %zu values of "
                           "the season is %s%s; Dixon 1953, Rorabacher 1991",
                           fraction_print(a, q, 3, ROUND_HALF_EVEN), critical, s->width,
                           show_half(s, s->spread.twice_median), s->logs ? ", on logarithms" : ""));
}

/* Below the median a score cannot grow large, so that a fifth of it is far there. */
static bool far_out(const struct seasoning *s, int64_t y)
{
    return beyond(&s->spread, y, 1, 70) ||
           (s->spread.twice_median > 0 && 10 * (doubt_wide)y < s->spread.twice_median);
}

static void judge(struct seasoning *s, size_t at)
{
    const struct value *v = &s->value[0][at];
    const struct value *before = NULL;
    const struct value *after = NULL;
    open_window(s, v->reading->day);
    if (s->width >= 5 && s->width <= 10)
        among_few(s, v);
    if (s->width < SEASON_LEAST || s->spread.four_mad == 0 || !beyond(&s->spread, v->y, 1, 35))
        return;
    if (!s->logs && far_out(s, v->y) && calm(s, at, &before, &after) &&
        (swapped(s, v, before, after) || slipped(s, v)))
        return;
    keep_outside(s, v);
}

void doubt_seasons(struct doubting *d, int point, int parameter)
{
    struct seasoning s = {.d = d, .point = point, .parameter = parameter, .day = DAY_NONE};
    if (!look(&s))
        return;
    size_t all = gather(&s);
    s.window = arena_alloc(d->arena, (all + 1) * sizeof *s.window);
    s.work = arena_alloc(d->arena, (all + 1) * sizeof *s.work);
    for (size_t i = 0; i < s.count[0]; i++) {
        const struct reading *r = s.value[0][i].reading;
        if (r->day >= d->first && r->day <= d->last && doubt_measured(r))
            judge(&s, i);
    }
    tell_outside(&s, &s.side[0]);
    tell_outside(&s, &s.side[1]);
}
