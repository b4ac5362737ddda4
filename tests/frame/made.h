/* made: plants and frames for tests, from text. Readings are lines of
 *     POINT PARAMETER UNIT DAY=VALUE DAY=VALUE ...
 * DAY is a day of the month under test, a span of them (1..31) or a whole date; @HH:MM, #SAMPLE and
 * !VERSION may follow it. VALUE is 12.5, <2, >2420, DNQ0.4, DNQ, ND, TNTC, E12, code9 or C;
 * (MDL,RL) may follow it. */
#ifndef WEIRBOOK_TESTS_MADE_H
#define WEIRBOOK_TESTS_MADE_H

#include "frame/frame.h"
#include "plant/describe.h"

#include <stdlib.h>
#include <string.h>

struct made {
    struct arena *arena;
    struct plant *plant;
    day_t month;
    struct reading *readings;
    size_t count, room;
};

static const char *const made_parameters = "FLOW,Flow,MGD,3,mean\n"
                                           "GATE,Gate flow,MGD,3,mean\n"
                                           "BOD5,Biochemical oxygen demand,mg/L,1,mean\n"
                                           "CBOD5,Carbonaceous oxygen demand,mg/L,1,mean\n"
                                           "TSS,Total suspended solids,mg/L,1,mean\n"
                                           "NH3N,Ammonia as N,mg/L,2,mean\n"
                                           "NO2N,Nitrite as N,mg/L,2,mean\n"
                                           "NO3N,Nitrate as N,mg/L,2,mean\n"
                                           "CU,Copper,ug/L,1,mean\n"
                                           "TP,Total phosphorus,mg/L,2,flow-weighted\n"
                                           "DO,Dissolved oxygen,mg/L,1,min\n"
                                           "TEMP,Temperature,degC,1,max\n"
                                           "PH,pH,pH,1,mean\n"
                                           "TRC,Residual chlorine,mg/L,2,max\n"
                                           "RAIN,Rainfall,in,2,sum\n"
                                           "SBD,Sludge blanket,ft,1,last\n"
                                           "EXC,Time beyond the range,min,0,sum\n"
                                           "ECOLI,E. coli,MPN/100mL,0,geometric\n"
                                           "FCOLI,Fecal coliform,cfu/100mL,0,geometric\n";

/* A plant with these lines of plant.csv, limits.csv and meters.csv (each may be ""). */
static inline struct made *made_plant(const char *month, const char *fields, const char *limits,
                                      const char *meters)
{
    struct arena *a = arena_new();
    struct made *m = arena_alloc(a, sizeof *m);
    struct plant_draft *d = plant_draft_new(a);
    struct fault f = {0};

    m->arena = a;
    assert_true(month_parse(month, &m->month));
    add_rows(d, PLANT_FIELDS, false, 2, "name,Marrow Bend\npermit,XX0000000\nunits,us");
    add_rows(d, PLANT_FIELDS, false, 5, fields);
    add_rows(d, PLANT_POINTS, false, 2,
             "INF,Raw influent,influent,\nEFF,Final effluent,effluent,001\n"
             "EF2,Second effluent,effluent,002\nPE,Primary effluent,primary-effluent,");
    add_rows(d, PLANT_PARAMETERS, false, 2, made_parameters);
    add_rows(d, PLANT_LIMITS, false, 2, limits);
    add_rows(d, PLANT_METERS, false, 2, meters);
    if (plant_draft_finish(d, &m->plant, &f) != OK)
        fail_msg("%s", f.text);
    return m;
}

static inline bool made_prefix(const char **s, const char *prefix)
{
    size_t n = strlen(prefix);

    if (strncmp(*s, prefix, n) != 0)
        return false;
    *s += n;
    return true;
}

static inline struct decimal made_number(const char *s)
{
    struct decimal d = {0};

    if (decimal_parse(s, strlen(s), &d) != DECIMAL_FINE)
        fail_msg("no number: '%s'", s);
    return d;
}

/* Reads VALUE(MDL,RL). */
static inline void made_value(struct made *m, char *text, struct reading *r)
{
    char *limits = strchr(text, '('), *comma;
    const char *s = text;

    if (limits) {
        *limits++ = '\0';
        comma = strchr(limits, ',');
        assert_non_null(comma);
        *comma++ = '\0';
        comma[strcspn(comma, ")")] = '\0';
        r->has_mdl = *limits != '\0';
        r->has_rl = *comma != '\0';
        if (r->has_mdl)
            r->mdl = made_number(limits);
        if (r->has_rl)
            r->rl = made_number(comma);
    }
    r->text = arena_text(m->arena, text);
    if (text_equal(s, "ND")) {
        r->qualifier = QUALIFIER_LESS;
        r->value = r->has_mdl ? r->mdl : r->rl;
    } else if (text_equal(s, "TNTC") || text_equal(s, "DNQ")) {
        r->qualifier = *s == 'T' ? QUALIFIER_GREATER : QUALIFIER_DNQ_BARE;
        r->value = r->rl;
    } else if (text_equal(s, "C") || made_prefix(&s, "code")) {
        r->qualifier = QUALIFIER_CODE;
        r->code = *s;
    } else {
        r->qualifier = made_prefix(&s, "<")     ? QUALIFIER_LESS
                       : made_prefix(&s, ">")   ? QUALIFIER_GREATER
                       : made_prefix(&s, "DNQ") ? QUALIFIER_DNQ
                       : made_prefix(&s, "E")   ? QUALIFIER_ESTIMATED
                                                : QUALIFIER_PLAIN;
        r->value = made_number(s);
    }
}

/* Reads DAY@TIME#SAMPLE!VERSION; returns the last day of a span. */
static inline day_t made_when(struct made *m, char *text, struct reading *r)
{
    char *version = strchr(text, '!'), *sample, *time;
    int minute, first, last;

    if (version)
        *version++ = '\0';
    sample = strchr(text, '#');
    if (sample)
        *sample++ = '\0';
    time = strchr(text, '@');
    if (time)
        *time++ = '\0';
    r->version = version ? (int)strtol(version, NULL, 10) : 0;
    r->sample = sample ? arena_text(m->arena, sample) : "";
    r->minute = -1;
    if (time) {
        assert_true(minute_parse(time, &minute));
        r->minute = (int16_t)minute;
    }
    if (day_parse(text, &r->day))
        return r->day;
    first = last = (int)strtol(text, &text, 10);
    if (made_prefix((const char **)&text, ".."))
        last = (int)strtol(text, &text, 10);
    assert_true(first > 0 && *text == '\0');
    r->day = m->month + first - 1;
    return m->month + last - 1;
}

static inline void made_token(struct made *m, const struct reading *like, char *token)
{
    char *value = strchr(token, '=');
    struct reading r = *like;
    day_t last;

    assert_non_null(value);
    *value++ = '\0';
    last = made_when(m, token, &r);
    made_value(m, value, &r);
    for (; r.day <= last; r.day++) {
        r.line = (long)m->count + 2;
        *(struct reading *)arena_push(m->arena, &m->readings, &m->count, &m->room, sizeof r) = r;
    }
}

static inline void made_line(struct made *m, char *line)
{
    struct reading like = {.file = "readings.csv"};
    int word = 0;

    for (char *s = line; *s != '\0'; word++) {
        char *end = s + strcspn(s, " ");
        bool more = *end != '\0';

        *end = '\0';
        if (word == 0) {
            int point = plant_point(m->plant, s);
            assert_true(point >= 0);
            like.point = (uint16_t)point;
        } else if (word == 1) {
            int parameter = plant_parameter(m->plant, s);
            if (parameter < 0)
                fail_msg("no parameter '%s'", s);
            like.parameter = (uint16_t)parameter;
        } else if (word == 2) {
            assert_non_null(unit_find(s));
            like.unit = (uint16_t)unit_index(unit_find(s));
        } else if (*s != '\0') {
            made_token(m, &like, s);
        }
        s = more ? end + 1 : end;
    }
}

static inline void made_readings(struct made *m, const char *text)
{
    while (*text != '\0') {
        size_t n = strcspn(text, "\n");

        made_line(m, arena_bytes(m->arena, text, n));
        text += n + (text[n] == '\n');
    }
}

static inline struct frame *made_frame(struct made *m, day_t first, day_t last)
{
    struct frame *f = frame_new(m->arena, m->plant, first, last);

    for (size_t i = 0; i < m->count; i++)
        frame_add(f, &m->readings[i]);
    frame_close(f);
    return f;
}

static inline void made_free(struct made *m)
{
    arena_free(m->arena);
}

#endif
