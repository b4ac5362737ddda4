/* daily: the month's daily values, a column for each point and parameter that has a reading, with
 * the month's mean and extremes below. Numbers come from the day frame and the permit room; nothing
 * is worked here. */
#include "report/content.h"

#include <assert.h>

#include "base/poison.h"

static int decimals_of(const struct parameter *p)
{
    /* R10: figures without a limit follow digits=N, else the parameter's decimals. */
    if (p->rules.word[RULE_DIGITS] == DIGITS_NUMBER)
        return (int)p->rules.number[RULE_DIGITS].coefficient;
    return p->decimals;
}

static bool is_ph(const struct parameter *p)
{
    return text_equal(p->unit->kind, "ph");
}

/* ---- values beyond a limit ---------------------------------------------------------------------
 */

static bool judges_days(const struct limit *l, int point, int parameter)
{
    bool daily = l->statistic == STAT_DAILY || l->statistic == STAT_INSTANTANEOUS;
    bool values =
        l->basis == BASIS_CONCENTRATION || l->basis == BASIS_FLOW || l->basis == BASIS_COUNT;
    return daily && values && l->limit.set && l->bound != BOUND_TARGET && l->points == 1 &&
           l->parameters == 1 && l->point[0] == point && l->parameter[0] == parameter;
}

/* Only limits that have a row in the month: its tier, season and dates hold. */
static bool any_beyond(struct arena *a, const struct month_input *in, int point, int parameter,
                       day_t day)
{
    for (size_t i = 0; i < in->permit->count; i++) {
        const struct permit_row *row = &in->permit->rows[i];
        if (judges_days(row->limit, point, parameter) && day >= row->from && day <= row->to &&
            limit_in_force(row->limit, day) && permit_day_beyond(a, in->frame, row->limit, day))
            return true;
    }
    return false;
}

/* ---- below the days ---- */

/* What is gathered of a column on the way down. */
struct gathered {
    unsigned count;
    day_t least_day, most_day;
    const struct fraction *least, *most;
};

/* R32: of equal values the earliest day stands. */
static void gather(day_t day, const struct fraction *n, struct gathered *g)
{
    if (g->count == 0 || fraction_compare(n, g->least) < 0) {
        g->least = n;
        g->least_day = day;
    }
    if (g->count == 0 || fraction_compare(n, g->most) > 0) {
        g->most = n;
        g->most_day = day;
    }
    g->count++;
}

/* The figure of the permit's own row where there is one, so that the two pages never differ. */
static const char *mean_of_row(const struct month_input *in, const struct daily_column *c,
                               const struct parameter *p)
{
    enum statistic wanted =
        p->average == AVERAGE_GEOMETRIC ? STAT_MONTHLY_GEOMEAN : STAT_MONTHLY_AVERAGE;
    day_t first = in->permit->month;
    for (size_t i = 0; i < in->permit->count; i++) {
        const struct permit_row *row = &in->permit->rows[i];
        const struct limit *l = row->limit;
        bool values = l->basis == BASIS_CONCENTRATION || l->basis == BASIS_FLOW;
        if (values && l->statistic == wanted && l->points == 1 && l->parameters == 1 &&
            l->point[0] == c->point && l->parameter[0] == c->parameter && l->unit == p->unit &&
            row->from == first && row->to == month_last(first) && row->figure[0] != '\0')
            return row->figure;
    }
    return NULL;
}

static void summarise(struct arena *a, const struct month_input *in, struct daily_column *c,
                      const struct gathered *g, day_t first)
{
    const struct parameter *p = &in->plant->parameters[c->parameter];
    c->geometric = p->average == AVERAGE_GEOMETRIC;
    c->mean = "";
    c->least = "";
    c->most = "";
    c->days = arena_print(a, "%u", g->count);
    if (g->count == 0)
        return;
    c->least = c->value[g->least_day - first];
    c->most = c->value[g->most_day - first];
    if (is_ph(p)) /* logarithmic: its extremes are reported, never a mean */
        return;
    const char *of_row = mean_of_row(in, c, p);
    c->mean = of_row != NULL
                  ? of_row
                  : permit_month_mean(a, in->frame, c->point, c->parameter, first, in->permit->on);
}

/* ---- the columns ---- */

/* The letter of the day's first no-data code, where no value stands. */
static const char *code_letter(struct arena *a, const struct frame *frame, int point, int parameter,
                               day_t day)
{
    size_t count = 0;
    const struct reading *const *r = frame_readings(frame, point, parameter, day, &count);
    for (size_t i = 0; i < count; i++)
        if (r[i]->qualifier == QUALIFIER_CODE)
            return arena_print(a, "%c", r[i]->code);
    return "";
}

static void note_broken(struct arena *a, struct daily *d, const struct daily_column *c, day_t day,
                        const char *why)
{
    char iso[11];
    day_write(day, iso);
    const char **line = arena_push(a, &d->broken, &d->broken_count, &d->broken_room, sizeof *line);
    *line = SAY(a, BROKEN_DAY, [PLACE_NAME] = c->name, [PLACE_DAY] = iso, [PLACE_NOTE] = why);
}

static void fill_day(struct arena *a, const struct month_input *in, struct daily *d,
                     struct daily_column *c, struct gathered *g, day_t day)
{
    const struct parameter *p = &in->plant->parameters[c->parameter];
    int i = day - d->first;
    struct day_value v;
    frame_day(in->frame, c->point, c->parameter, day, &p->rules, NULL, &v);
    c->value[i] =
        permit_day_text(a, in->frame, c->point, c->parameter, day, &p->rules, decimals_of(p));
    if (v.state == DAY_BROKEN) {
        c->value[i] = "?";
        note_broken(a, d, c, day, v.why != NULL ? v.why : "");
    } else if (c->value[i][0] == '\0') {
        c->value[i] = code_letter(a, in->frame, c->point, c->parameter, day);
        d->any_code = d->any_code || c->value[i][0] != '\0';
    }
    c->beyond[i] = any_beyond(a, in, c->point, c->parameter, day);
    d->any_beyond = d->any_beyond || c->beyond[i];
    d->any_less = d->any_less || c->value[i][0] == '<';
    if (v.amount.number != NULL && (v.state == DAY_VALUED || v.state == DAY_NO_DISCHARGE))
        gather(day, v.amount.number, g);
}

static bool has_readings(const struct frame *frame, int point, int parameter, day_t first,
                         day_t last)
{
    if (!frame_has(frame, point, parameter))
        return false;
    for (day_t day = first; day <= last; day++) {
        size_t count = 0;
        if (frame_readings(frame, point, parameter, day, &count) != NULL && count > 0)
            return true;
    }
    return false;
}

static void add_column(struct arena *a, const struct month_input *in, struct daily *d, int point,
                       int parameter)
{
    struct daily_column *c = arena_push(a, &d->column, &d->columns, &d->room, sizeof *c);
    const struct parameter *p = &in->plant->parameters[parameter];
    struct gathered g = {0};
    c->point = point;
    c->parameter = parameter;
    c->name = arena_print(a, "%s %s", in->plant->points[point].id, p->id);
    c->title = SAY(a, DAILY_TITLE, [PLACE_POINT] = in->plant->points[point].id,
                   [PLACE_PARAMETER] = p->id, [PLACE_UNIT] = p->unit->name);
    for (int i = 0; i < DAYS_MOST; i++)
        c->value[i] = "";
    /* Readings after the day the month is judged on are ignored here as they are there. */
    day_t last = in->permit->on < d->last ? in->permit->on : d->last;
    for (day_t day = d->first; day <= last; day++)
        fill_day(a, in, d, c, &g, day);
    summarise(a, in, c, &g, d->first);
    d->any_geometric = d->any_geometric || (c->geometric && c->mean[0] != '\0');
}

void daily_make(struct arena *a, const struct month_input *in, struct daily *out)
{
    *out = (struct daily){.first = in->permit->month, .last = month_last(in->permit->month)};
    assert(frame_first(in->frame) <= out->first && frame_last(in->frame) >= out->last);
    for (size_t point = 0; point < in->plant->point_count; point++)
        for (size_t parameter = 0; parameter < in->plant->parameter_count; parameter++)
            if (has_readings(in->frame, (int)point, (int)parameter, out->first, out->last))
                add_column(a, in, out, (int)point, (int)parameter);
}

/* ---- as a table ---- */

/* A value as the workbook wants it: a number where it is one. */
static struct cell value_cell(const char *value)
{
    size_t length = 0;
    while (value[length] != '\0')
        length++;
    struct decimal number;
    bool is_number = length > 0 && decimal_parse(value, length, &number) == DECIMAL_FINE;
    return is_number ? cell_number(value) : cell_text(value);
}

static struct cell day_cell(struct arena *a, day_t day, bool paper)
{
    enum weekday weekday = day_weekday(day);
    bool weekend = weekday == SATURDAY || weekday == SUNDAY;
    struct cell c = cell_day(a, day);
    if (paper)
        c = cell_text(arena_print(a, "%s%s", c.text + 5,
                                  weekday == SATURDAY ? word(WORD_SATURDAY)
                                  : weekday == SUNDAY ? word(WORD_SUNDAY)
                                                      : ""));
    return cell_flagged(c, weekend ? FLAG_LIGHT : FLAG_NONE);
}

static void day_row(struct table *t, const struct daily *d, day_t day, bool paper)
{
    struct arena *a = t->arena;
    struct cell *c = table_row(t);
    c[0] = day_cell(a, day, paper);
    enum flag light = c[0].flag;
    struct text beyond;
    text_init(&beyond, (size_t)1 << 16);
    for (size_t i = 0; i < d->columns; i++) {
        const struct daily_column *column = &d->column[i];
        const char *value = column->value[day - d->first];
        bool over = column->beyond[day - d->first];
        c[i + 1] = value_cell(over && paper ? arena_print(a, "%s*", value) : value);
        c[i + 1].flag = over ? FLAG_BAD : light;
        if (over)
            text_print(&beyond, "%s%s", beyond.length > 0 ? "; " : "", column->name);
    }
    if (!paper && beyond.length > 0)
        c[d->columns + 1] =
            cell_flagged(cell_text(SAY(a, BEYOND_DAY, [PLACE_NAMES] = beyond.at)), FLAG_BAD);
    else if (!paper)
        c[d->columns + 1].flag = light;
    text_free(&beyond);
}

static void below_row(struct table *t, const struct daily *d, enum word title, size_t field)
{
    struct cell *c = table_row(t);
    c[0] = cell_flagged(cell_text(word(title)), FLAG_WATCH);
    for (size_t i = 0; i < d->columns; i++) {
        const struct daily_column *column = &d->column[i];
        const char *const below[] = {column->mean, column->least, column->most, column->days};
        c[i + 1] = value_cell(below[field]);
    }
}

struct table *daily_table(struct arena *a, const struct daily *d, bool paper)
{
    size_t count = d->columns + (paper ? 1 : 2);
    struct column *columns = arena_alloc(a, count * sizeof *columns);
    columns[0] = (struct column){.title = word(WORD_COLUMN_DAY)};
    for (size_t i = 0; i < d->columns; i++)
        columns[i + 1] = (struct column){.title = d->column[i].title, .align = ALIGN_POINT};
    if (!paper)
        columns[count - 1] = (struct column){.title = word(WORD_COLUMN_BEYOND), .wraps = true};
    struct table *t = table_new(a, "", columns, count);
    for (day_t day = d->first; day <= d->last; day++)
        day_row(t, d, day, paper);
    below_row(t, d, WORD_MEAN, 0);
    below_row(t, d, WORD_LEAST, 1);
    below_row(t, d, WORD_MOST, 2);
    below_row(t, d, WORD_DAYS, 3);
    return t;
}
