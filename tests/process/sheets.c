/* Bench sheets from text, and the invariants of what comes out of them. */
#include "process/sheets.h"

#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

#include <cmocka.h>

#include "process/small.h"

static const struct small_row usual[] = {
    {PLANT_FIELDS, "name,Small Works"},
    {PLANT_FIELDS, "since,2020-01-01"},
    {PLANT_POINTS, "INF,Influent,influent,"},
    {PLANT_POINTS, "AB,Aeration,aeration,"},
    {PLANT_POINTS, "EFF,Effluent,effluent,001"},
    {PLANT_PARAMETERS, "FLOW,Flow,MGD,3,mean,arithmetic,,,,,,"},
    {PLANT_PARAMETERS, "TSS,Solids,mg/L,1,mean,arithmetic,,,,,,"},
    {PLANT_PARAMETERS, "VSS,Solids,mg/L,1,mean,arithmetic,,,,,,"},
    {PLANT_PARAMETERS, "MLSS,Solids,mg/L,0,mean,arithmetic,,,,,,"},
    {PLANT_PARAMETERS, "MLVSS,Solids,mg/L,0,mean,arithmetic,,,,,,"},
    {PLANT_PARAMETERS, "TS,Solids,%,2,mean,arithmetic,,,,,,"},
    {PLANT_PARAMETERS, "VS,Solids,%,1,mean,arithmetic,,,,,,"},
    {PLANT_PARAMETERS, "BOD5,Demand,mg/L,1,mean,arithmetic,,,,,,"},
    {PLANT_PARAMETERS, "CBOD5,Demand,mg/L,1,mean,arithmetic,,,,,,"},
    {PLANT_PARAMETERS, "SV30,Settled,mL/L,0,mean,arithmetic,,,,,,"},
    {PLANT_PARAMETERS, "SV30D,Settled,mL/L,0,mean,arithmetic,,,,,,"},
    {PLANT_PARAMETERS, "DILUTION,Dilution,1,1,mean,arithmetic,,,,,,"},
    {PLANT_PARAMETERS, "SETTLEABLE,Settleable,mL/L,1,mean,arithmetic,,,,,,"},
    {PLANT_PARAMETERS, "TRC,Chlorine,mg/L,2,mean,arithmetic,,,,,,"},
    {PLANT_PARAMETERS, "FRC,Chlorine,mg/L,2,mean,arithmetic,,,,,,"},
    {PLANT_PARAMETERS, "PH,pH,pH,1,mean,arithmetic,,,,,,"},
    {PLANT_PARAMETERS, "TEMP,Temperature,degC,1,mean,arithmetic,,,,,,"},
    {PLANT_PARAMETERS, "FCOLI,Bacteria,cfu/100mL,0,geometric,geometric,,,,,,"},
    {PLANT_PARAMETERS, "ECOLI,Bacteria,MPN/100mL,0,geometric,geometric,,,,,,"},
    {PLANT_PARAMETERS, "TCOLI,Bacteria,MPN/100mL,1,geometric,geometric,,,,,,"},
    {PLANT_PARAMETERS, "ENTERO,Bacteria,/100mL,0,geometric,geometric,,,,,,"},
    {PLANT_LIMITS, "001,EFF,FLOW,flow,monthly-average,report,,MGD"},
};

enum { OWN_ROWS = 2 };

static size_t line_count(const char *s)
{
    size_t count = 1;
    for (; *s != '\0'; s++)
        count += *s == '\n';
    return count;
}

static void read_lines(struct sheets *s, const char *lines)
{
    s->raw = arena_alloc(s->arena, line_count(lines) * sizeof *s->raw);
    while (*lines != '\0') {
        struct raw_value *r = &s->raw[s->raws++];
        size_t length = strcspn(lines, "\n");
        char *line = arena_bytes(s->arena, lines, length);
        r->file = "sheet.csv";
        r->line = (long)s->raws + 1;
        for (size_t i = 0; i < RAW_COLUMNS; i++) {
            size_t cell = strcspn(line, ",");
            r->cell[i] = arena_bytes(s->arena, line, cell);
            line += line[cell] == ',' ? cell + 1 : cell;
        }
        lines += lines[length] == '\n' ? length + 1 : length;
    }
}

struct sheets sheets_work_at(const char *lines, const char *plant_field, const char *parameter)
{
    struct sheets s = {.arena = arena_new()};
    struct small_row rows[NELEM(usual) + OWN_ROWS];
    size_t count = NELEM(usual);
    memcpy(rows, usual, sizeof usual);
    if (plant_field)
        rows[count++] = (struct small_row){PLANT_FIELDS, plant_field};
    if (parameter)
        rows[count++] = (struct small_row){PLANT_PARAMETERS, parameter};
    s.plant = small_plant(s.arena, rows, count);
    read_lines(&s, lines);
    bench_work(s.arena, s.plant, s.raw, s.raws, small_day("2025-06-30"), &s.outcome, &s.outcomes);
    sheets_whole(&s);
    return s;
}

struct sheets sheets_work(const char *lines)
{
    return sheets_work_at(lines, NULL, NULL);
}

static const char *word(struct arena *a, const char **at, const char *ends)
{
    *at += strspn(*at, " ");
    size_t length = strcspn(*at, ends);
    const char *s = arena_bytes(a, *at, length);
    *at += length;
    return text_equal(s, "-") ? "" : s;
}

const char *sheet_lines(struct arena *a, const char *sheet, const char *point, const char *rows)
{
    struct text t;
    text_init(&t, 1 << 20);
    while (*rows != '\0') {
        const char *run = word(a, &rows, " ;");
        const char *argument = word(a, &rows, " ;");
        const char *value = word(a, &rows, " ;");
        const char *unit = word(a, &rows, " ;");
        text_print(&t, "%s%s,2025-06-10,,%s,%s,%s,%s,%s", t.length > 0 ? "\n" : "", sheet,
                   text_equal(point, "-") ? "" : point, run, argument, value, unit);
        rows += strspn(rows, "; ");
    }
    const char *lines = arena_text(a, t.at);
    text_free(&t);
    return lines;
}

struct sheets sheet_work(const char *sheet, const char *point, const char *rows)
{
    struct arena *a = arena_new();
    struct sheets s = sheets_work(sheet_lines(a, sheet, point, rows));
    arena_free(a);
    return s;
}

void sheets_free(struct sheets *s)
{
    arena_free(s->arena);
}

const struct bench_outcome *sheets_reading(const struct sheets *s, const char *parameter)
{
    const struct bench_outcome *found = NULL;
    for (size_t i = 0; i < s->outcomes; i++)
        if (s->outcome[i].kind == BENCH_READING && text_equal(s->outcome[i].parameter, parameter)) {
            assert_null(found);
            found = &s->outcome[i];
        }
    return found;
}

const char *sheets_text(const struct sheets *s, const char *parameter)
{
    const struct bench_outcome *o = sheets_reading(s, parameter);
    if (o)
        return o->reading.text;
    if (s->outcomes == 0)
        return "nothing";
    o = &s->outcome[s->outcomes - 1];
    return o->kind == BENCH_RECORD    ? "record"
           : o->kind == BENCH_REFUSED ? arena_print(s->arena, "refused: %s", o->explanation)
                                      : "another parameter";
}

const struct bench_check *sheets_check(const struct bench_outcome *o, const char *begins)
{
    assert_non_null(o);
    for (size_t i = 0; i < o->checks; i++)
        if (strncmp(o->check[i].text, begins, strlen(begins)) == 0)
            return &o->check[i];
    return NULL;
}

static const char *digits_of(const struct reading *r)
{
    switch (r->qualifier) {
    case QUALIFIER_LESS:
        assert_int_equal(r->text[0], '<');
        return r->text + 1;
    case QUALIFIER_GREATER:
        assert_int_equal(r->text[0], '>');
        return r->text + 1;
    case QUALIFIER_ESTIMATED:
        assert_memory_equal(r->text, "E ", 2);
        return r->text + 2;
    default:
        return r->text;
    }
}

static void reading_whole(const struct sheets *s, const struct bench_outcome *o)
{
    const struct reading *r = &o->reading;
    char written[24];
    assert_non_null(r->detail);
    assert_non_null(r->detail->note);
    assert_non_null(r->sample);
    assert_string_equal(r->file, "sheet.csv");
    assert_true(r->line >= 2 && r->line <= (long)s->raws + 1);
    assert_string_equal(s->plant->parameters[r->parameter].id, o->parameter);
    if (r->qualifier == QUALIFIER_CODE || text_equal(o->sheet, "round"))
        return;
    decimal_write(r->value, written);
    assert_string_equal(written, digits_of(r));
    for (size_t i = 0; i < o->checks; i++)
        if (!o->check[i].passed) {
            assert_int_not_equal(r->qualifier, QUALIFIER_PLAIN);
            assert_non_null(strstr(r->detail->note, o->check[i].text));
        }
}

void sheets_whole(const struct sheets *s)
{
    for (size_t i = 0; i < s->outcomes; i++) {
        const struct bench_outcome *o = &s->outcome[i];
        for (size_t k = 0; k < o->checks; k++)
            assert_true(*o->check[k].text && *o->check[k].source);
        if (o->kind == BENCH_READING)
            reading_whole(s, o);
        if (o->kind != BENCH_REFUSED)
            continue;
        assert_true(*o->explanation != '\0');
        assert_true(o->reason < REASON_COUNT);
        assert_null(strchr(o->explanation, '\n'));
        assert_true(o->row.line >= 2 && o->row.line <= (long)s->raws + 1);
        for (size_t k = 0; k < LONG_COLUMNS; k++)
            assert_non_null(o->row.cell[k]);
    }
}
