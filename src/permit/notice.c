/* notice: what was found in a month, and which notice each finding asks for. 40 CFR 122.41(l)(6):
 * within 24 hours of becoming aware, and in writing within 5 days, anything that may endanger
 * health or the environment, an unanticipated bypass or an upset beyond a limit, an exceeded daily
 * maximum that the permit lists; (l)(7): other noncompliance with the monitoring report. */
#include "permit/work.h"

#include "base/poison.h"

#define MINUTES_AN_HOUR 60
#define MINUTES_A_DAY   1440

/* One day beyond a daily or instantaneous limit. */
static bool day_finding(struct arena *a, const struct frame *frame, const struct permit_row *row,
                        day_t day, day_t on, struct permit_finding *out)
{
    const struct limit *l = row->limit;
    const struct period period = {day, day};
    struct work w = work_on(a, frame, l, &period, on);
    struct series series;
    struct figure x;
    struct fault unheard = {0}; /* the row itself has been worked: its influent is known */

    if (!limit_in_force(l, day) ||
        (l->basis == BASIS_REMOVAL && find_influent(w.plant, l, &w.influent, &unheard) != OK))
        return false;
    amounts_of(&w, &series);
    figure_of(&w, &series, &x);
    if (x.times == 0)
        return false;
    *out =
        (struct permit_finding){.row = row, .day = day, .beyond = x.times, .duty = DUTY_24_HOURS};
    out->figure = figure_text(&w, &x, figure_decimals(&w, &x.exact));
    return true;
}

static bool is_day_limit(const struct limit *l)
{
    return l->statistic == STAT_DAILY || l->statistic == STAT_INSTANTANEOUS;
}

size_t permit_findings(struct arena *a, const struct frame *frame, const struct permit_month *m,
                       struct permit_finding **out)
{
    size_t count = 0, room = 0;

    *out = NULL;
    for (size_t i = 0; i < m->count; i++) {
        const struct permit_row *row = &m->rows[i];
        struct permit_finding found;

        if (row->verdict != VERDICT_EXCEEDED)
            continue;
        if (!is_day_limit(row->limit)) {
            found = (struct permit_finding){
                .row = row, .day = DAY_NONE, .figure = row->figure, .duty = DUTY_REPORT};
            *(struct permit_finding *)arena_push(a, out, &count, &room, sizeof found) = found;
            continue;
        }
        for (day_t day = row->from; day <= row->to; day++)
            if (day_finding(a, frame, row, day, m->on, &found))
                *(struct permit_finding *)arena_push(a, out, &count, &room, sizeof found) = found;
    }
    return count;
}

struct moment permit_owed(struct moment aware, int hours)
{
    int minutes = (aware.minute < 0 ? 0 : aware.minute) + hours * MINUTES_AN_HOUR;

    return (struct moment){aware.day + minutes / MINUTES_A_DAY, minutes % MINUTES_A_DAY};
}
