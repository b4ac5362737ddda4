/* The shift round: plain readings, each a row of its own. Its argument is a parameter's id; a run
 * says which sample of the day it is. */
#include <assert.h>
#include <string.h>

#include "process/bench.h"

#include "base/poison.h"

static char upper(char c)
{
    return c >= 'a' && c <= 'z' ? (char)(c - 'a' + 'A') : c;
}

static const char *after_blanks(const char *s)
{
    while (*s == ' ' || *s == '\t')
        s++;
    return s;
}

/* What follows a sign, or "E" before a number; gives the qualifier. */
static const char *after_mark(const char *s, enum qualifier *qualifier)
{
    *qualifier = QUALIFIER_PLAIN;
    if (*s == '<' || *s == '>') {
        *qualifier = *s == '<' ? QUALIFIER_LESS : QUALIFIER_GREATER;
        return after_blanks(s + (s[1] == '=' ? 2 : 1));
    }
    if (upper(*s) == 'E' && s[1] != '\0') {
        *qualifier = QUALIFIER_ESTIMATED;
        return after_blanks(s + 1);
    }
    return s;
}

/* A no-data code: a letter alone, or "code" and a letter or digit (rules page, section 7). */
static const struct no_data_code *code_of(const char *s)
{
    static const char word[] = "CODE";
    size_t i = 0;
    while (word[i] != '\0' && upper(s[i]) == word[i])
        i++;
    bool worded = word[i] == '\0';
    if (worded)
        s = after_blanks(s + i);
    if (s[0] == '\0' || s[1] != '\0' || (!worded && s[0] >= '0' && s[0] <= '9'))
        return NULL;
    return no_data_code(upper(s[0]));
}

static enum reason read_number(struct reading *r, const struct parameter *p, const char *value,
                               struct fault *f)
{
    enum qualifier qualifier = QUALIFIER_PLAIN;
    const char *digits = after_mark(value, &qualifier);
    switch (decimal_parse(digits, strlen(digits), &r->value)) {
    case DECIMAL_TOO_LONG:
        (void)fault_at(f, NULL, "write at most 18 digits", "'%s' has too many digits", value);
        return REASON_TOO_MANY_DIGITS;
    case DECIMAL_NOT_A_NUMBER:
        (void)fault_at(f, NULL, "write a number, <n, >n, E n or a no-data code",
                       "'%s' is no value of '%s'", value, p->id);
        return REASON_NOT_A_NUMBER;
    case DECIMAL_FINE:
        break;
    }
    if (r->value.coefficient < 0 && !text_equal(p->unit->kind, "temperature")) {
        (void)fault_at(f, NULL, "correct the value", "'%s' is '%s'", p->id, value);
        return REASON_NEGATIVE_VALUE;
    }
    r->qualifier = (uint8_t)qualifier;
    return REASON_COUNT;
}

static enum reason read_token(struct reading *r, const struct parameter *p, const char *value,
                              struct fault *f)
{
    const struct no_data_code *code = code_of(value);
    r->text = value;
    if (*value == '\0') {
        (void)fault_at(f, NULL, "write the value, or leave the row out", "'%s' has no value",
                       p->id);
        return REASON_BLANK_VALUE;
    }
    if (code == NULL)
        return read_number(r, p, value, f);
    if (code->code == 'B' || code->code == 'Q') {
        (void)fault_at(f, NULL, "write <n", "'%s' alone does not say below what", value);
        return REASON_CODE_WITHOUT_NUMBER;
    }
    r->qualifier = QUALIFIER_CODE;
    r->code = code->code;
    return REASON_COUNT;
}

enum reason bench_round_read(struct arena *a, const struct plant *plant,
                             const struct bench_row *row, struct reading *out, struct fault *f)
{
    const char *const *cell = row->raw->cell;
    int parameter = plant_parameter(plant, cell[RAW_ARGUMENT]);
    const struct unit *unit = NULL;
    if (row->point < 0) {
        (void)fault_at(f, NULL, "name the point", "a reading of the round has no point");
        return REASON_UNKNOWN_POINT;
    }
    if (parameter < 0) {
        const char *near = plant_nearest_parameter(plant, cell[RAW_ARGUMENT]);
        (void)fault_at(f, NULL, near ? arena_print(a, "the nearest is '%s'", near) : NULL,
                       "the plant has no parameter '%s'", cell[RAW_ARGUMENT]);
        return REASON_UNKNOWN_PARAMETER;
    }
    const struct parameter *p = &plant->parameters[parameter];
    enum reason reason = bench_read_unit(a, p->unit->name, cell[RAW_UNIT], p->id, &unit, f);
    if (reason != REASON_COUNT)
        return reason;
    *out = (struct reading){.day = row->day,
                            .minute = (int16_t)row->minute,
                            .point = (uint16_t)row->point,
                            .parameter = (uint16_t)parameter,
                            .unit = (uint16_t)unit_index(unit),
                            .file = row->raw->file,
                            .line = row->raw->line};
    return read_token(out, p, after_blanks(cell[RAW_VALUE]), f);
}

static enum status work_round(struct bench_group *g)
{
    size_t readings = 0;
    const char *sample = bench_text(g, "sample");
    const struct detail *detail = bench_detail(g);
    for (size_t i = 0; i < g->row_count; i++) {
        const struct bench_row *row = g->rows[i];
        struct fault f = {.set = false};
        if (row->bad || row->argument >= 0)
            continue;
        struct bench_outcome *o = bench_outcome_add(g->made, g->arena, row->order);
        *o = (struct bench_outcome){
            .kind = BENCH_READING, .sheet = g->entry->sheet.name, .explanation = ""};
        enum reason reason = bench_round_read(g->arena, g->plant, row, &o->reading, &f);
        assert(reason == REASON_COUNT);
        (void)reason;
        o->parameter = g->plant->parameters[o->reading.parameter].id;
        o->reading.detail = detail;
        o->reading.sample = *row->raw->cell[RAW_RUN] ? row->raw->cell[RAW_RUN]
                            : sample                 ? sample
                                                     : "";
        readings++;
    }
    return readings > 0 ? OK
                        : bench_refuse(g, REASON_NO_RESULT, "there is no reading beside its texts");
}

const struct bench_entry bench_round = {
    .sheet = {.name = "round",
              .title = "The shift round: plain readings in walking order",
              .run_name = "sample",
              .gives = "the parameters read",
              .source = "the plant's round.csv",
              .runs = 1u << BENCH_SAMPLE,
              .argument = {BENCH_TEXTS},
              .arguments = 4},
    .work = work_round,
};
