/* amend: one reading corrected, or declared invalid, with a reason; the old value is kept. */
#include "command/session.h"

#include "intake/intake.h"

#include <string.h>

#include "base/poison.h"

struct amend_options {
    day_t date;
    const char *time, *point, *parameter, *sample, *value, *unit, *reason, *by;
    bool invalid;
};

static const struct option_spec options[] = {
    {"date", OPTION_DAY, offsetof(struct amend_options, date), "DATE", "the reading's day", true},
    {"time", OPTION_TEXT, offsetof(struct amend_options, time), "HH:MM",
     "its time, where the day has several", false},
    {"point", OPTION_TEXT, offsetof(struct amend_options, point), "POINT", "its point", true},
    {"parameter", OPTION_TEXT, offsetof(struct amend_options, parameter), "PARAMETER",
     "its parameter", true},
    {"sample", OPTION_TEXT, offsetof(struct amend_options, sample), "SAMPLE",
     "which sample, where the day has several", false},
    {"value", OPTION_TEXT, offsetof(struct amend_options, value), "VALUE",
     "the right value, as a readings file has it: 12.5, '<2', ND, 'code E'", false},
    {"unit", OPTION_TEXT, offsetof(struct amend_options, unit), "UNIT",
     "its unit (default: that of the old value)", false},
    {"invalid", OPTION_FLAG, offsetof(struct amend_options, invalid), NULL,
     "in place of --value: the sample was spoiled, there is no value", false},
    {"reason", OPTION_TEXT, offsetof(struct amend_options, reason), "TEXT", "why, for the record",
     true},
    {"by", OPTION_TEXT, offsetof(struct amend_options, by), "NAME",
     "who amends, for the record (default: the login)", false},
};

static const struct example examples[] = {
    {"weirbook amend --date 2025-03-11 --point EFF --parameter TSS --value 8 --reason misread",
     "corrects a reading; the old value stays in the history"},
    {"weirbook amend --date 2025-03-11 --point EFF --parameter TSS --invalid --reason spilled",
     "takes a spoiled sample out of every figure; it is kept"},
};

/* The reading that is meant: of the day's, those of the time and sample that were named. */
static enum status find_old(struct session *s, const struct amend_options *o,
                            const struct plant *plant, struct reading *r,
                            const struct reading **old, struct fault *f)
{
    const struct frame_span span = {r->point, r->parameter, o->date, o->date};
    struct frame *frame = NULL;
    size_t count = 0, meant = 0;
    if (session_frame(s, plant, &span, 1, o->date, o->date, &frame, f) != OK)
        return FAULT;
    const struct reading *const *all =
        frame_readings(frame, r->point, r->parameter, o->date, &count);
    *old = NULL;
    for (size_t i = 0; i < count; i++) {
        if ((o->time && all[i]->minute != r->minute) ||
            (o->sample && strcmp(all[i]->sample, o->sample) != 0))
            continue;
        *old = all[i];
        meant++;
    }
    if (meant > 1)
        return fault_usage(f, "name one with --time and --sample: weirbook day shows them",
                           "%s %s has %zu readings on that day", o->point, o->parameter, meant);
    return OK;
}

/* A totalizer counts a volume, whatever its parameter is measured in. */
static bool unit_fits(const struct plant *plant, const struct reading *r, const struct unit *unit)
{
    const struct meter *m = plant_meter(plant, r->point, r->parameter, r->day);
    if (m && m->kind == METER_TOTALIZER)
        return strcmp(unit->kind, "volume") == 0;
    return unit_same_kind(unit, plant->parameters[r->parameter].unit);
}

static enum status read_unit(const struct amend_options *o, const struct plant *plant,
                             struct reading *r, struct fault *f)
{
    if (!o->unit)
        return OK;
    const struct unit *unit = unit_find(o->unit);
    if (!unit) {
        const char *nearest = unit_nearest(o->unit);
        char todo[100] = "use a unit spelling of weirbook-files(5)";
        if (nearest)
            snprintf(todo, sizeof todo, "the nearest is '%s'", nearest);
        return fault_usage(f, todo, "no unit '%s'", o->unit);
    }
    if (!unit_fits(plant, r, unit))
        return fault_usage(f, "use a unit of the kind it was loaded in", "%s is not measured in %s",
                           plant->parameters[r->parameter].id, unit->name);
    r->unit = (uint16_t)unit_index(unit);
    return OK;
}

static enum status read_value(const struct amend_options *o, const struct parameter *p,
                              struct reading *r, struct fault *f)
{
    if (o->invalid) {
        r->qualifier = QUALIFIER_WITHDRAWN;
        r->text = "withdrawn";
        return OK;
    }
    enum reason wrong = intake_value(r, p, o->value, false);
    if (wrong != REASON_COUNT)
        return fault_usage(f, reason_todo[wrong], "--value cannot be '%s': %s", o->value,
                           reason_words[wrong]);
    return OK;
}

/* What is known of the old reading beside its value (method, analyst, limits) stays with it. */
static enum status make_new(struct session *s, const struct amend_options *o,
                            const struct plant *plant, struct reading *r, struct fault *f)
{
    const struct parameter *p = NULL;
    const struct reading *old = NULL;
    int point = 0, parameter = 0, minute = -1;
    if (session_point(plant, o->point, &point, f) != OK ||
        session_parameter(plant, o->parameter, &parameter, f) != OK)
        return FAULT;
    if (o->time && !minute_parse(o->time, &minute))
        return fault_usage(f, "write it as HH:MM", "--time cannot be '%s'", o->time);
    p = &plant->parameters[parameter];
    *r = (struct reading){.day = o->date,
                          .minute = (int16_t)minute,
                          .point = (uint16_t)point,
                          .parameter = (uint16_t)parameter,
                          .unit = (uint16_t)unit_index(p->unit),
                          .sample = o->sample ? o->sample : "",
                          .file = ""};
    if (find_old(s, o, plant, r, &old, f) != OK)
        return FAULT;
    if (old) {
        r->minute = old->minute;
        r->sample = old->sample;
        r->unit = old->unit;
        r->detail = old->detail;
        r->has_mdl = old->has_mdl;
        r->has_rl = old->has_rl;
        r->mdl = old->mdl;
        r->rl = old->rl;
    }
    if (read_unit(o, plant, r, f) != OK)
        return FAULT;
    return read_value(o, p, r, f);
}

static void tell(struct session *s, const struct plant *plant, const struct reading *old,
                 const struct reading *new, int64_t batch)
{
    char day[11], time[6];
    day_write(new->day, day);
    minute_write(new->minute, time);
    const char *sample = new->sample ? new->sample : "";
    fprintf(s->out, "%s%s%s %s %s%s%s: ", day, *time ? " " : "", time, plant->points[new->point].id,
            plant->parameters[new->parameter].id, *sample ? " " : "", sample);
    if (old->qualifier == QUALIFIER_WITHDRAWN)
        fputs("was withdrawn", s->out);
    else
        fprintf(s->out, "was %s %s", old->text, unit_at(old->unit)->name);
    if (new->qualifier == QUALIFIER_WITHDRAWN)
        fputs(", is invalid now and in no figure", s->out);
    else
        fprintf(s->out, ", is %s %s now", new->text, unit_at(new->unit)->name);
    fprintf(s->out, " (batch %lld)\n", (long long)batch);
}

static enum status run(struct session *s, const void *given, struct fault *f)
{
    const struct amend_options *o = given;
    struct plant *plant = NULL;
    struct author author = {0};
    struct reading new = {0}, old = {0};
    int64_t batch = 0;
    if ((o->value != NULL) == o->invalid)
        return fault_usage(f, "give --value VALUE, or --invalid for a spoiled sample",
                           o->invalid ? "--value and --invalid do not go together"
                                      : "no new value was given");
    if (o->invalid && o->unit)
        return fault_usage(f, "leave --unit out", "--unit goes with --value");
    if (session_record("--reason", o->reason, f) != OK ||
        session_author(s, o->by, &author, f) != OK ||
        session_book(s, BOOK_WRITE, NULL, &plant, f) != OK ||
        make_new(s, o, plant, &new, f) != OK ||
        book_amend(s->book, s->arena, plant, &new, o->reason, &author, &old, &batch, f) != OK)
        return FAULT;
    tell(s, plant, &old, &new, batch);
    return OK;
}

const struct command command_amend = {
    .name = "amend",
    .summary = "correct one reading, with a reason; the old value is kept",
    .book = true,
    .option = options,
    .options = NELEM(options),
    .options_size = sizeof(struct amend_options),
    .example = examples,
    .examples = NELEM(examples),
    .about = "The correction is a new version of the reading, beside the old one, with who, when "
             "and why. Time and sample\n"
             "need not be named where the day has one reading. history shows both values.",
    .run = run,
};
