/* How much sludge to waste on a day, and what comes of it: see process.h for the method. */
#include "process/catalogue.h"
#include "process/roles.h"

#include <assert.h>

#include "base/poison.h"

/* Means over the days that have readings. */
struct mean {
    const struct fraction *amount, *product; /* NULL: `why` says so */
    int days;
    day_t oldest, newest;
    bool less, greater, changed; /* changed: the amount is not the same on all days */
    const char *why;
};

struct waste {
    struct supplies s;
    struct roles roles;
    const struct waste_options *o;
    struct waste_plan *out;
    struct fault *fault;
    const struct fraction *load_factor;
    const struct fraction *waste_solids, *current_flow;
    const struct fraction *inventory, *volume; /* lb; MG on the newest day */
    struct mean held, lost;
};

day_t process_waste_reach(const struct waste_options *o)
{
    int back = o->smooth > WASTE_LOOK_BACK ? o->smooth : WASTE_LOOK_BACK;
    return o->on - (day_t)back;
}

/* ---- formulas ---- */

struct given {
    const char *name;
    const struct fraction *number;
};

#define WORK(w, formula, out, ...)                                                                 \
    work(w, formula, (const struct given[]){__VA_ARGS__},                                          \
         sizeof((const struct given[]){__VA_ARGS__}) / sizeof(struct given), out)

static enum status work(struct waste *w, const char *name, const struct given *given, size_t count,
                        const struct fraction **out)
{
    const struct formula *formula = formula_find(name);
    struct formula_value value[FORMULA_ARGUMENTS_MOST] = {{0}};
    assert(formula != NULL);
    for (size_t i = 0; i < count; i++) {
        int at = formula_argument_index(formula, given[i].name);
        assert(at >= 0);
        value[at] = (struct formula_value){.number = &given[i].number, .count = 1};
    }
    return formula_work(w->s.arena, formula, value, out, w->fault);
}

/* In the plant's unit. */
static const struct fraction *shown(struct waste *w, const struct fraction *x, const char *unit,
                                    const char **out_unit)
{
    const char *to = w->s.plant->metric ? formula_metric_unit(unit) : unit;
    if (out_unit != NULL)
        *out_unit = to;
    return text_equal(to, unit) ? x : unit_convert(w->s.arena, x, unit_find(unit), unit_find(to));
}

/* For sentences: four figures, whole units never rounded away. */
static const char *words(struct waste *w, const struct fraction *x, const char *unit)
{
    const char *to;
    const struct fraction *y = shown(w, x, unit, &to);
    int decimals = fraction_sign(y) ? fraction_decimals_for(y, 4, ROUND_HALF_EVEN) : 0;
    const char *number =
        fraction_print(w->s.arena, y, decimals < 0 ? 0 : decimals, ROUND_HALF_EVEN);
    return arena_print(w->s.arena, "%s %s", number, to);
}

static const char *date(struct waste *w, day_t day)
{
    char iso[11];
    day_write(day, iso);
    return arena_text(w->s.arena, iso);
}

static void warn(struct waste *w, const char *sentence)
{
    struct waste_plan *p = w->out;
    const char **slot =
        arena_push(w->s.arena, &p->warning, &p->warnings, &p->warning_room, sizeof *slot);
    *slot = sentence;
}

/* Before all others. */
static void warn_first(struct waste *w, const char *sentence)
{
    warn(w, sentence);
    for (size_t i = w->out->warnings - 1; i > 0; i--)
        w->out->warning[i] = w->out->warning[i - 1];
    w->out->warning[0] = sentence;
}

static void part(struct waste *w, const char *name, const struct fraction *x, const char *unit,
                 const struct mean *m, const char *note)
{
    struct waste_plan *p = w->out;
    struct waste_part *slot =
        arena_push(w->s.arena, &p->part, &p->parts, &p->part_room, sizeof *slot);
    *slot = (struct waste_part){.name = name, .oldest = DAY_NONE, .newest = DAY_NONE, .note = note};
    slot->value = shown(w, x, unit, &slot->unit);
    if (m == NULL)
        return;
    slot->days = m->days;
    slot->oldest = m->oldest;
    slot->newest = m->newest;
    if (*note == '\0' && (m->less || m->greater))
        slot->note = m->less ? "with a less-than" : "with a greater-than";
}

/* ---- means ---- */

static void mean_add(struct waste *w, struct mean *m, const struct fraction *amount,
                     const struct fraction *product, day_t day)
{
    struct arena *a = w->s.arena;
    if (m->days > 0 &&
        fraction_compare(fraction_multiply(a, amount, fraction_from_int(a, m->days)), m->amount))
        m->changed = true;
    m->amount = m->days ? fraction_add(a, m->amount, amount) : amount;
    m->product = m->days ? fraction_add(a, m->product, product) : product;
    if (m->days++ == 0)
        m->newest = day;
    m->oldest = day;
}

static void mean_end(struct waste *w, struct mean *m)
{
    if (m->days == 0)
        return;
    const struct fraction *days = fraction_from_int(w->s.arena, m->days);
    m->amount = fraction_divide(w->s.arena, m->amount, days);
    m->product = fraction_divide(w->s.arena, m->product, days);
}

/* Of the last `most` days from `first` to the plan's that have what is needed. */
static struct mean stream_mean(struct waste *w, struct stream *stream, int most, day_t first)
{
    struct mean m = {.oldest = DAY_NONE, .newest = DAY_NONE};
    for (day_t day = w->o->on; day >= first && m.days < most; day--) {
        struct carried c = stream_day(&w->s, stream, day);
        if (day == w->o->on) {
            const char *why = c.idle        ? "no aeration basin is in service on"
                              : c.no_amount ? c.no_amount
                                            : c.no_product;
            m.why = c.idle ? arena_print(w->s.arena, "%s %s", why, date(w, day)) : why;
        }
        if (c.idle || c.amount == NULL || c.product == NULL)
            continue;
        m.less = m.less || c.less;
        m.greater = m.greater || c.greater;
        mean_add(w, &m, c.amount, c.product, day);
    }
    mean_end(w, &m);
    return m;
}

static struct mean series_mean(struct waste *w, const struct series *series)
{
    struct mean m = {.oldest = DAY_NONE, .newest = DAY_NONE};
    m.why = series_cell(&w->s, series, w->o->on)->why;
    for (day_t day = w->o->on; day >= w->s.first && m.days < w->o->smooth; day--) {
        const struct cell *c = series_cell(&w->s, series, day);
        if (c->number == NULL)
            continue;
        m.less = m.less || c->less;
        m.greater = m.greater || c->greater;
        mean_add(w, &m, c->number, w->s.zero, day);
    }
    mean_end(w, &m);
    return m;
}

static enum status no_readings(struct waste *w, const char *why)
{
    return fault_at(w->fault, NULL, "load the reading", "%s, nor in the %d days before",
                    why ? why : "no readings", (int)(w->o->on - w->s.first));
}

static enum status not_measured(struct waste *w, const char *what, const char *todo)
{
    return fault_at(w->fault, NULL, todo, "cannot say what to waste: %s in the %d days to %s", what,
                    (int)(w->o->on - w->s.first) + 1, date(w, w->o->on));
}

static const struct fraction *strength(struct waste *w, const struct mean *m)
{
    return fraction_sign(m->amount) > 0 ? fraction_divide(w->s.arena, m->product, m->amount)
                                        : w->s.zero;
}

static void warn_if_old(struct waste *w, const char *what, day_t newest)
{
    int age = (int)(w->o->on - newest);
    if (age > w->o->old)
        warn(w, arena_print(w->s.arena, "the newest %s is %d days old (%s): take a new sample",
                            what, age, date(w, newest)));
}

/* ---- trends ---- */

/* The least-squares slope of the inventory in lb/d over the days first..on that have it; NULL for
 * fewer than three. */
static const struct fraction *slope(struct waste *w, day_t first)
{
    struct arena *a = w->s.arena;
    const struct fraction *sum_y = w->s.zero;
    const struct fraction *sum_xy = w->s.zero;
    int64_t n = 0;
    int64_t sum_x = 0;
    int64_t sum_xx = 0;
    for (day_t day = first; day <= w->o->on; day++) {
        struct carried c = stream_day(&w->s, w->roles.aeration, day);
        int64_t x = day - first;
        if (c.idle || c.product == NULL)
            continue;
        n++;
        sum_x += x;
        sum_xx += x * x;
        sum_y = fraction_add(a, sum_y, c.product);
        sum_xy = fraction_add(a, sum_xy, fraction_multiply(a, c.product, fraction_from_int(a, x)));
    }
    if (n < 3)
        return NULL;
    const struct fraction *top =
        fraction_subtract(a, fraction_multiply(a, sum_xy, fraction_from_int(a, n)),
                          fraction_multiply(a, sum_y, fraction_from_int(a, sum_x)));
    top = fraction_divide(a, top, fraction_from_int(a, n * sum_xx - sum_x * sum_x));
    return fraction_multiply(a, top, w->load_factor);
}

static void look_at_inventory(struct waste *w)
{
    struct arena *a = w->s.arena;
    const struct fraction *by_day = slope(w, w->held.oldest);
    if (w->held.changed)
        warn(w, "the aeration volume in service changed within the days of the mean: look at "
                "the inventory of each day");
    if (by_day == NULL)
        return;
    const struct fraction *fall = fraction_multiply(
        a, by_day, fraction_from_int(a, (int64_t)w->held.oldest - w->held.newest));
    const struct fraction *bound = fraction_divide(a, w->inventory, fraction_from_int(a, 20));
    if (fraction_compare(fall, bound) <= 0)
        return;
    warn_first(w,
               arena_print(a,
                           "inventory is shrinking: by %s from %s to %s (least-squares line), more "
                           "than 5 %% of it",
                           words(w, fall, "lb"), date(w, w->held.oldest), date(w, w->held.newest)));
}

/* ---- what is on hand ---- */

static enum status find_inventory(struct waste *w)
{
    enum status rc = OK;
    if (w->roles.aeration == NULL) {
        rc = not_measured(w, "no MLSS of every aeration basin with its volume stands",
                          "load MLSS, and give each aeration basin its volume in basins.csv");
        goto done;
    }
    w->held = stream_mean(w, w->roles.aeration, w->o->smooth, w->s.first);
    if (w->held.days == 0) {
        rc = no_readings(w, w->held.why);
        goto done;
    }
    w->volume = stream_day(&w->s, w->roles.aeration, w->held.newest).amount;
    const struct fraction *mlss = strength(w, &w->held);
    TRY(WORK(w, "solids-inventory", &w->inventory, {"volume", w->held.amount}, {"mlss", mlss},
             {"load_factor", w->load_factor}));
    part(w, "mixed liquor solids", mlss, "mg/L", &w->held, "");
    part(w, "inventory in aeration", w->inventory, "lb", &w->held, "");
    warn_if_old(w, "MLSS", w->held.newest);
done:
    return rc;
}

/* Needed for an SRT; for other targets only the days to come need it. */
static enum status find_lost(struct waste *w)
{
    bool needed = w->o->aim == WASTE_FOR_SRT;
    if (w->roles.out_solids == NULL)
        return needed ? not_measured(w, "no effluent flow with TSS stands",
                                     "load FLOW and TSS of the effluent")
                      : OK;
    w->lost = stream_mean(w, w->roles.out_solids, w->o->smooth, w->s.first);
    if (w->lost.days == 0)
        return needed ? no_readings(w, w->lost.why) : OK;
    part(w, "lost with the effluent",
         fraction_multiply(w->s.arena, w->lost.product, w->load_factor), "lb/d", &w->lost, "");
    warn_if_old(w, "effluent TSS with its flow", w->lost.newest);
    return OK;
}

/* Of several waste points each counts by its flow, or alike where none flowed. */
static enum status find_waste_solids(struct waste *w)
{
    struct arena *a = w->s.arena;
    const struct fraction *flows = w->s.zero;
    const struct fraction *weighed = w->s.zero;
    const struct fraction *plain = w->s.zero;
    struct mean all = {.oldest = DAY_NONE, .newest = DAY_NONE};
    if (w->roles.waste == NULL)
        return not_measured(w, "no waste flow with waste or return solids stands",
                            "load FLOW of the waste, 0 where nothing was wasted, and its TSS");
    for (size_t i = 0; i < w->roles.waste->parts; i++) {
        const struct part *from = &w->roles.waste->part[i];
        struct mean solids = series_mean(w, from->strength);
        struct mean flow = series_mean(w, from->reading);
        if (solids.days == 0)
            return no_readings(w, solids.why);
        const struct plant *p = w->s.plant;
        warn_if_old(w,
                    arena_print(a, "%s at %s, which says how thick the waste is,",
                                p->parameters[from->strength->parameter].id,
                                p->points[from->strength->point].id),
                    solids.newest);
        if (i == 0 || solids.newest < all.newest)
            all = solids;
        plain = fraction_add(a, plain, solids.amount);
        if (flow.days == 0)
            continue;
        flows = fraction_add(a, flows, flow.amount);
        weighed = fraction_add(a, weighed, fraction_multiply(a, flow.amount, solids.amount));
    }
    w->waste_solids =
        fraction_sign(flows) > 0
            ? fraction_divide(a, weighed, flows)
            : fraction_divide(a, plain, fraction_from_int(a, (int64_t)w->roles.waste->parts));
    part(w, "waste solids", w->waste_solids, "mg/L", &all, "");
    return OK;
}

/* The newest rate before the plan's day. */
static void find_current(struct waste *w)
{
    for (day_t day = w->o->on - 1; day >= w->s.first; day--) {
        struct carried c = stream_day(&w->s, w->roles.waste, day);
        if (c.amount == NULL)
            continue;
        struct mean m = {.days = 1, .oldest = day, .newest = day};
        w->current_flow = c.amount;
        part(w, "waste flow before", c.amount, "MGD", &m, "");
        if (day < w->o->on - 1)
            warn(w, arena_print(w->s.arena,
                                "no waste flow the day before: the step is counted from %s",
                                date(w, day)));
        return;
    }
}

/* ---- what the target asks for ---- */

static enum status ask_srt(struct waste *w, const struct fraction **mass,
                           const struct fraction **flow)
{
    enum status rc = OK;
    struct arena *a = w->s.arena;
    const struct fraction *effluent = strength(w, &w->lost);
    const struct fraction *mlss = strength(w, &w->held);
    TRY(WORK(w, "waste-mass-for-srt", mass, {"solids", w->inventory}, {"srt", w->o->target},
             {"effluent_flow", w->lost.amount}, {"effluent_solids", effluent},
             {"load_factor", w->load_factor}));
    TRY(WORK(w, "waste-flow-for-srt", flow, {"volume", w->held.amount}, {"mlss", mlss},
             {"srt", w->o->target}, {"waste_solids", w->waste_solids},
             {"effluent_flow", w->lost.amount}, {"effluent_solids", effluent}));
    const struct fraction *leave = fraction_divide(a, w->inventory, w->o->target);
    const struct fraction *lost = fraction_multiply(a, w->lost.product, w->load_factor);
    if (fraction_compare(leave, lost) >= 0)
        goto done;
    w->out->limited_by = WASTE_BY_ZERO;
    warn_first(w,
               arena_print(a,
                           "the target asks for less than nothing: %s may leave and the effluent "
                           "alone carries %s",
                           words(w, leave, "lb/d"), words(w, lost, "lb/d")));
done:
    return rc;
}

/* The surplus of a day is taken off in that day. */
static enum status ask_surplus(struct waste *w, const struct fraction *have,
                               const struct fraction *want, const char *unit, const char *what,
                               const struct fraction *mass, const struct fraction **flow)
{
    if (fraction_compare(have, want) < 0) {
        w->out->limited_by = WASTE_BY_ZERO;
        warn_first(w, arena_print(w->s.arena,
                                  "the target asks for less than nothing: %s are %s and the target "
                                  "needs %s",
                                  what, words(w, have, unit), words(w, want, unit)));
    }
    return WORK(w, "waste-flow-from-mass", flow, {"waste_mass", mass},
                {"waste_solids", w->waste_solids}, {"load_factor", w->load_factor});
}

static enum status ask_mlss(struct waste *w, const struct fraction **mass,
                            const struct fraction **flow)
{
    const struct fraction *mlss = strength(w, &w->held);
    if (WORK(w, "waste-mass-for-mlss", mass, {"volume", w->held.amount}, {"mlss", mlss},
             {"target", w->o->target}, {"load_factor", w->load_factor}) != OK)
        return FAULT;
    return ask_surplus(w, mlss, w->o->target, "mg/L", "mixed liquor solids", *mass, flow);
}

/* Percent volatile of the mixed liquor on the days that have both. */
static const struct fraction *volatile_share(struct waste *w)
{
    struct arena *a = w->s.arena;
    const struct fraction *part_of = w->s.zero;
    const struct fraction *whole = w->s.zero;
    int days = 0;
    for (day_t day = w->o->on; day >= w->s.first && days < w->o->smooth; day--) {
        struct carried v = stream_day(&w->s, w->roles.volatile_solids, day);
        struct carried t = stream_day(&w->s, w->roles.aeration, day);
        if (v.idle || t.idle || v.product == NULL || t.product == NULL)
            continue;
        part_of = fraction_add(a, part_of, v.product);
        whole = fraction_add(a, whole, t.product);
        days++;
    }
    if (fraction_sign(whole) <= 0)
        return NULL;
    return fraction_divide(a, fraction_multiply(a, part_of, fraction_from_int(a, 100)), whole);
}

static struct stream *find_food(struct waste *w, const char **parameter)
{
    static const char *const foods[] = {"BOD5", "CBOD5"};
    for (size_t i = 0; i < NELEM(foods); i++) {
        struct stream *food = roles_entering(&w->s, &w->roles, foods[i]);
        *parameter = foods[i];
        if (food != NULL)
            return food;
    }
    return NULL;
}

static enum status ask_fm(struct waste *w, const struct fraction **mass,
                          const struct fraction **flow)
{
    struct arena *a = w->s.arena;
    const char *parameter;
    struct stream *food = find_food(w, &parameter);
    if (food == NULL)
        return not_measured(w, "no BOD5 or CBOD5 that enters aeration, with its flow, stands",
                            "load BOD5 of the primary effluent or the influent");
    if (w->roles.volatile_solids == NULL)
        return not_measured(w, "no MLVSS of every aeration basin stands", "load MLVSS");
    struct mean fed = stream_mean(w, food, w->o->smooth, w->s.first);
    struct mean alive = stream_mean(w, w->roles.volatile_solids, w->o->smooth, w->s.first);
    const struct fraction *share = volatile_share(w);
    if (fed.days == 0)
        return no_readings(w, fed.why);
    if (alive.days == 0)
        return no_readings(w, alive.why);
    if (share == NULL)
        return not_measured(w, "no day with both MLSS and MLVSS stands", "load both");
    const struct fraction *load = fraction_multiply(a, fed.product, w->load_factor);
    const struct fraction *mlvss = fraction_multiply(a, alive.product, w->load_factor);
    part(w, arena_print(a, "%s that enters aeration", parameter), load, "lb/d", &fed, "");
    part(w, "volatile solids held", mlvss, "lb", &alive, "");
    part(w, "volatile share", share, "%", NULL, "of days with both");
    warn_if_old(w, "MLVSS", alive.newest);
    warn_if_old(w, arena_print(a, "%s that enters aeration", parameter), fed.newest);
    if (WORK(w, "waste-mass-for-food-to-microorganism", mass, {"mlvss_mass", mlvss},
             {"bod_load", load}, {"target", w->o->target}, {"volatile", share}) != OK)
        return FAULT;
    return ask_surplus(w, mlvss, fraction_divide(a, load, w->o->target), "lb",
                       "the volatile solids held", *mass, flow);
}

/* Holds the flow within a step of the rate before, and gives the mass that goes with it. */
static enum status hold_step(struct waste *w, const struct fraction *asked,
                             const struct fraction **flow)
{
    enum status rc = OK;
    *flow = asked;
    if (w->current_flow == NULL) {
        warn(w, "no waste flow in the days before: the step limit was not applied");
        return OK;
    }
    if (fraction_sign(w->current_flow) == 0) {
        if (fraction_sign(asked) > 0)
            warn(w, "nothing was wasted before, and a percent of nothing holds nothing: the step "
                    "limit was not applied; raise the rate by hand over some days");
        return OK;
    }
    TRY(WORK(w, "waste-flow-with-step-limit", flow, {"current_flow", w->current_flow},
             {"target_flow", asked}, {"step_limit", w->o->step}));
    if (fraction_compare(*flow, asked) != 0)
        w->out->limited_by = WASTE_BY_STEP;
done:
    return rc;
}

/* ---- what comes of it ---- */

/* Mean of BOD removed, MGD x mg/L, over the days that have both ends. */
static struct mean find_removed(struct waste *w, day_t first, const char **parameter)
{
    struct mean m = {.oldest = DAY_NONE, .newest = DAY_NONE};
    struct stream *in = find_food(w, parameter);
    struct stream *out = in ? roles_leaving(&w->s, &w->roles, *parameter) : NULL;
    if (in == NULL)
        m.why = "no BOD5 or CBOD5 that enters aeration, with its flow";
    else if (out == NULL)
        m.why = arena_print(w->s.arena, "no %s of the effluent, with its flow", *parameter);
    else
        m.why = arena_print(w->s.arena, "no day with %s before and after", *parameter);
    for (day_t day = w->o->on; out != NULL && day >= first; day--) {
        struct carried from = stream_day(&w->s, in, day);
        struct carried to = stream_day(&w->s, out, day);
        if (from.product == NULL || to.product == NULL)
            continue;
        m.less = m.less || to.less;
        mean_add(w, &m, w->s.zero, fraction_subtract(w->s.arena, from.product, to.product), day);
    }
    mean_end(w, &m);
    return m;
}

static const char *no_yield(struct waste *w, const char *why)
{
    return arena_print(w->s.arena, "%s in the %d days to %s", why, WASTE_LOOK_BACK,
                       date(w, w->o->on));
}

/* Fills the yield and `made`, the solids made in a day; or says why it cannot. */
static void find_yield(struct waste *w, const struct fraction **made)
{
    struct arena *a = w->s.arena;
    day_t first = w->o->on - (WASTE_LOOK_BACK - 1);
    const char *parameter;
    struct fault fault = {0};
    struct mean wasted = stream_mean(w, w->roles.waste, WASTE_LOOK_BACK, first);
    struct mean lost = {0};
    if (w->roles.out_solids != NULL)
        lost = stream_mean(w, w->roles.out_solids, WASTE_LOOK_BACK, first);
    struct mean bod = find_removed(w, first, &parameter);
    const struct fraction *gain = slope(w, first);
    const char *why = wasted.days == 0 ? "no day with waste flow and solids"
                      : lost.days == 0 ? "no day with effluent flow and TSS"
                      : bod.days == 0  ? bod.why
                      : gain == NULL   ? "fewer than three days with an inventory"
                                       : NULL;
    if (why != NULL) {
        w->out->no_yield = no_yield(w, why);
        return;
    }
    const struct fraction *left =
        fraction_multiply(a, fraction_add(a, wasted.product, lost.product), w->load_factor);
    const struct fraction *sludge = fraction_add(a, left, gain);
    const struct fraction *removed = fraction_multiply(a, bod.product, w->load_factor);
    struct fault *outer = w->fault;
    w->fault = &fault;
    if (WORK(w, "observed-sludge-yield", &w->out->yield, {"sludge", sludge}, {"bod", removed}) !=
        OK) {
        w->out->yield = NULL;
        w->out->no_yield = arena_text(a, fault.text);
    }
    w->fault = outer;
    if (w->out->yield == NULL)
        return;
    *made = sludge;
    part(w, "wasted, 30 days", fraction_multiply(a, wasted.product, w->load_factor), "lb/d",
         &wasted, "");
    part(w, "lost, 30 days", fraction_multiply(a, lost.product, w->load_factor), "lb/d", &lost, "");
    part(w, "inventory gained, 30 days", gain, "lb/d", NULL, "least-squares line");
    part(w, arena_print(a, "%s removed, 30 days", parameter), removed, "lb/d", &bod, "");
    part(w, "observed yield", w->out->yield, "lb/lb", NULL, "sludge over BOD removed");
}

static enum status look_ahead(struct waste *w, const struct fraction *solids,
                              const struct fraction *flow)
{
    enum status rc = OK;
    struct arena *a = w->s.arena;
    const struct fraction *made = NULL;
    const struct fraction *inventory = w->inventory;
    find_yield(w, &made);
    if (made == NULL)
        return OK;
    const struct fraction *effluent = strength(w, &w->lost);
    const struct fraction *lost = fraction_multiply(a, w->lost.product, w->load_factor);
    const struct fraction *hold = fraction_subtract(a, made, lost);
    const struct fraction *gain = fraction_subtract(a, hold, solids);
    part(w, "waste that would hold it", hold, "lb/d", NULL,
         fraction_sign(hold) < 0 ? "the effluent carries off more than is made" : "made less lost");
    if (w->o->days < 1)
        return OK;
    w->out->days = (size_t)w->o->days;
    w->out->day = arena_alloc(a, w->out->days * sizeof *w->out->day);
    for (size_t i = 0; i < w->out->days; i++) {
        struct waste_day *d = &w->out->day[i];
        *d = (struct waste_day){.on = w->o->on + (day_t)i, .note = ""};
        inventory = fraction_add(a, inventory, gain);
        if (fraction_sign(inventory) <= 0) {
            d->note = "the balance leaves no solids in aeration";
            continue;
        }
        TRY(WORK(w, "concentration-from-inventory", &d->mlss, {"solids", inventory},
                 {"volume", w->volume}, {"load_factor", w->load_factor}));
        d->inventory = shown(w, inventory, "lb", NULL);
        if (fraction_sign(solids) == 0 && fraction_sign(lost) == 0)
            d->note = "no SRT: nothing leaves";
        else
            TRY(WORK(w, "solids-retention-time", &d->srt, {"volume", w->volume}, {"mlss", d->mlss},
                     {"waste_flow", flow}, {"waste_solids", w->waste_solids},
                     {"effluent_flow", w->lost.amount}, {"effluent_solids", effluent}));
    }
done:
    return rc;
}

/* ---- the plan ---- */

static enum status ask(struct waste *w, const struct fraction **mass, const struct fraction **flow)
{
    switch (w->o->aim) {
    case WASTE_FOR_SRT:
        return ask_srt(w, mass, flow);
    case WASTE_FOR_FM:
        return ask_fm(w, mass, flow);
    default:
        assert(w->o->aim == WASTE_FOR_MLSS);
        return ask_mlss(w, mass, flow);
    }
}

static enum status plan(struct waste *w)
{
    enum status rc = OK;
    struct waste_plan *p = w->out;
    const struct fraction *asked_mass = NULL;
    const struct fraction *asked_flow = NULL;
    const struct fraction *flow = NULL;
    const struct fraction *mass = NULL;
    TRY(find_inventory(w));
    TRY(find_lost(w));
    TRY(find_waste_solids(w));
    find_current(w);
    look_at_inventory(w);
    TRY(ask(w, &asked_mass, &asked_flow));
    TRY(hold_step(w, asked_flow, &flow));
    mass = fraction_multiply(w->s.arena, fraction_multiply(w->s.arena, flow, w->waste_solids),
                             w->load_factor);
    p->solids = shown(w, mass, "lb/d", &p->solids_unit);
    p->flow = shown(w, flow, "MGD", &p->flow_unit);
    p->asked_solids = shown(w, asked_mass, "lb/d", NULL);
    p->asked_flow = shown(w, asked_flow, "MGD", NULL);
    shown(w, mass, "lb", &p->mass_unit);
    TRY(look_ahead(w, mass, flow));
done:
    return rc;
}

enum status process_waste(struct arena *a, const struct frame *frame, const struct waste_options *o,
                          struct waste_plan *out, struct fault *f)
{
    struct waste w = {.o = o, .out = out, .fault = f};
    *out = (struct waste_plan){.no_yield = ""};
    if (o->smooth < 1)
        return fault_usage(f, "give at least 1 day", "cannot take a mean over %d days", o->smooth);
    if (fraction_sign(o->target) <= 0)
        return fault_usage(f, "give a number above 0", "the target must be above 0");
    if (fraction_sign(o->step) < 0)
        return fault_usage(f, "give 0 or more", "the step cannot be below 0 %%");
    w.s = (struct supplies){.arena = a,
                            .passing = arena_new(),
                            .frame = frame,
                            .zero = fraction_from_int(a, 0),
                            .plant = frame_plant(frame),
                            .first = process_waste_reach(o),
                            .last = o->on,
                            .smooth = 1};
    roles_find(&w.s, &w.roles);
    w.load_factor = stream_day(&w.s, w.roles.load_factor, o->on).amount;
    enum status rc = plan(&w);
    arena_free(w.s.passing);
    return rc;
}
