/* parameter: the rows of the built-in catalogue and of parameters.csv. A row of the plant's own
 * with the id of a built-in one replaces what it fills in and leaves the rest. */
#include "plant/draft.h"

#include <string.h>

#include "base/poison.h"

#define DECIMALS_MOST      9
#define DECIMALS_NEW       2 /* of a parameter that states none */
#define CODE_LENGTH        5
#define CONVERTED_DECIMALS 9
#define CONVERTED_BYTES    64

/* Finds the parameter a row speaks of, or adds it; NULL when the row may not. */
static struct parameter *parameter_of(struct plant_draft *d, const struct plant_row *row)
{
    struct plant *p = d->plant;
    const char *id = cell(row, PARAMETER_ID);

    for (size_t i = 0; i < p->parameter_count; i++) {
        struct parameter *known = &p->parameters[i];
        const struct plant_row *from = d->origin[PLANT_PARAMETERS][i];

        if (!text_equal_nocase(known->id, id))
            continue;
        if (!text_equal(known->id, id)) {
            problem(d, row, PARAMETER_ID, "write it the same way, or name it otherwise",
                    "parameter '%s' differs from '%s' only in capitals", id, known->id);
            return NULL;
        }
        if (from->builtin == row->builtin) {
            problem(d, row, PARAMETER_ID, "keep one", "parameter '%s' stands already in line %ld",
                    id, from->line);
            return NULL;
        }
        return known;
    }
    p->parameters[p->parameter_count] = (struct parameter){
        .id = id, .name = id, .code = "", .decimals = DECIMALS_NEW, .builtin = row->builtin};
    rules_inherit(&p->parameters[p->parameter_count].rules, &p->rules);
    d->origin[PLANT_PARAMETERS][p->parameter_count] = row;
    return &p->parameters[p->parameter_count++];
}

static void convert_bound(struct plant_draft *d, struct optional *bound, const struct unit *from,
                          const struct unit *to)
{
    const struct fraction *value;
    struct text digits;

    if (!bound->set)
        return;
    value = unit_convert(d->arena, fraction_from_decimal(d->arena, bound->value), from, to);
    text_init(&digits, CONVERTED_BYTES);
    (void)fraction_write_all(&digits, value, CONVERTED_DECIMALS);
    bound->set = decimal_parse(digits.at, digits.length, &bound->value) == DECIMAL_FINE;
    text_free(&digits);
}

/* The built-in bounds follow the parameter into another unit; into another kind they cannot. */
static void change_unit(struct plant_draft *d, struct parameter *p, const struct unit *to)
{
    struct optional *bounds[] = {&p->low, &p->high, &p->mdl, &p->rl};

    for (size_t i = 0; i < NELEM(bounds) && p->unit && p->unit != to; i++) {
        if (unit_same_kind(p->unit, to))
            convert_bound(d, bounds[i], p->unit, to);
        else
            bounds[i]->set = false;
    }
    p->unit = to;
}

static void read_unit(struct plant_draft *d, const struct plant_row *row, struct parameter *p)
{
    const struct unit *unit;

    if (read_blank(row, PARAMETER_UNIT)) {
        if (!p->unit)
            problem(d, row, PARAMETER_UNIT, "name the unit it is measured in",
                    "parameter '%s' has no unit", p->id);
    } else if (unit_in(d, row, PARAMETER_UNIT, cell(row, PARAMETER_UNIT), &unit)) {
        change_unit(d, p, unit);
    }
}

/* Codes lose their leading zeros in spreadsheets. */
static void read_code(struct plant_draft *d, const struct plant_row *row, struct parameter *p)
{
    const char *code = cell(row, PARAMETER_CODE);
    size_t length = strlen(code);
    bool fine = length == CODE_LENGTH;

    if (length == 0)
        return;
    for (const char *s = code; *s != '\0'; s++)
        fine = fine && ((*s >= '0' && *s <= '9') || (*s >= 'A' && *s <= 'Z'));
    p->code = code;
    if (!fine)
        problem(d, row, PARAMETER_CODE, "write five digits, leading zeros included, such as 00310",
                "cannot take '%s' as a parameter code", code);
}

static void read_bounds(struct plant_draft *d, const struct plant_row *row, struct parameter *p)
{
    struct {
        int column;
        struct optional *bound;
    } cells[] = {{PARAMETER_LOW, &p->low},
                 {PARAMETER_HIGH, &p->high},
                 {PARAMETER_MDL, &p->mdl},
                 {PARAMETER_RL, &p->rl}};
    struct optional value;

    for (size_t i = 0; i < NELEM(cells); i++)
        if (read_number(d, row, cells[i].column, &value) && value.set)
            *cells[i].bound = value;
    if (p->low.set && p->high.set && decimal_compare(p->low.value, p->high.value) > 0)
        problem(d, row, read_blank(row, PARAMETER_LOW) ? PARAMETER_HIGH : PARAMETER_LOW,
                "exchange them or correct one", "the low bound of %s is above the high one", p->id);
    if (p->mdl.set && p->rl.set && decimal_compare(p->mdl.value, p->rl.value) > 0)
        problem(d, row, read_blank(row, PARAMETER_MDL) ? PARAMETER_RL : PARAMETER_MDL,
                "exchange them or correct one",
                "the detection limit (mdl) of %s is above its reporting limit (rl)", p->id);
}

void read_parameter(struct plant_draft *d, const struct plant_row *row)
{
    struct parameter *p;
    int word;

    if (!read_id(d, row, PARAMETER_ID) || !(p = parameter_of(d, row)))
        return;
    p->builtin = row->builtin;
    if (!row->builtin) /* later rows of the plant's own meet this one, not the built-in one */
        d->origin[PLANT_PARAMETERS][p - d->plant->parameters] = row;
    if (!read_blank(row, PARAMETER_NAME))
        p->name = cell(row, PARAMETER_NAME);
    read_unit(d, row, p);
    (void)read_whole(d, row, PARAMETER_DECIMALS, 0, DECIMALS_MOST, &p->decimals);
    if (!read_blank(row, PARAMETER_DAY_RULE) &&
        read_word(d, row, PARAMETER_DAY_RULE, "day rule", day_rule_words, DAY_RULES, &word))
        p->day_rule = (enum day_rule)word;
    if (!read_blank(row, PARAMETER_AVERAGE) &&
        read_word(d, row, PARAMETER_AVERAGE, "average", average_words, AVERAGES, &word))
        p->average = (enum average)word;
    read_code(d, row, p);
    read_bounds(d, row, p);
    (void)read_rules(d, row, PARAMETER_RULES, &p->rules);
}
