/* The table of bench sheets as others see it, and the reading of one typed value. */
#include <ctype.h>
#include <string.h>

#include "process/bench.h"

#include "base/poison.h"

const char *const bench_run_words[BENCH_RUNS] = {"", "blank", "seed", "standard"};

static const struct bench_part *const parts[] = {&bench_solids, &bench_oxygen, &bench_filters,
                                                 &bench_tubes, &bench_meters};

#define SHEETS_MOST 64

size_t bench_count(void)
{
    size_t count = 0;
    for (size_t i = 0; i < NELEM(parts); i++)
        count += parts[i]->count;
    return count;
}

static const struct bench_entry *entry_at(size_t i)
{
    for (size_t k = 0; k < NELEM(parts); k++) {
        if (i < parts[k]->count)
            return &parts[k]->entry[i];
        i -= parts[k]->count;
    }
    return NULL;
}

const struct bench_sheet *bench_at(size_t i)
{
    const struct bench_entry *entry = entry_at(i);
    return entry ? &entry->sheet : NULL;
}

const struct bench_sheet *bench_find(const char *name)
{
    for (size_t i = 0; i < bench_count(); i++)
        if (text_equal(bench_at(i)->name, name))
            return bench_at(i);
    return NULL;
}

const struct bench_entry *bench_entry_find(const char *name)
{
    for (size_t i = 0; i < bench_count(); i++)
        if (text_equal(entry_at(i)->sheet.name, name))
            return entry_at(i);
    return text_equal(name, bench_round.sheet.name) ? &bench_round : NULL;
}

const char *bench_nearest(const char *name)
{
    const char *names[SHEETS_MOST];
    size_t count = 0;
    for (; count < bench_count() && count < NELEM(names) - 1; count++)
        names[count] = bench_at(count)->name;
    names[count++] = bench_round.sheet.name;
    return text_nearest(name, names, count);
}

int bench_argument_index(const struct bench_sheet *sheet, const char *name)
{
    for (size_t i = 0; i < sheet->arguments; i++)
        if (text_equal(sheet->argument[i].name, name))
            return (int)i;
    return -1;
}

enum bench_run bench_run_of(const char *run)
{
    size_t length = 0;
    while (*run == ' ')
        run++;
    while (isalpha((unsigned char)run[length]))
        length++;
    for (size_t i = 1; i < BENCH_RUNS; i++) {
        const char *word = bench_run_words[i];
        size_t k = 0;
        while (k < length && tolower((unsigned char)run[k]) == word[k])
            k++;
        if (k == length && word[k] == '\0')
            return (enum bench_run)i;
    }
    return BENCH_SAMPLE;
}

/* ---- one typed value ---- */

static enum status outside(struct arena *a, const struct bench_argument *arg, const char *value,
                           const char *words, const char *bound, struct fault *f)
{
    const char *unit =
        text_equal(arg->unit, "1") || text_equal(arg->unit, "count") ? "" : arg->unit;
    return fault_at(f, NULL,
                    arena_print(a, "it must be %s %s%s%s", words, bound, *unit ? " " : "", unit),
                    "'%s' is '%s'", arg->name, value);
}

static enum status in_bounds(struct arena *a, const struct bench_argument *arg, const char *value,
                             const struct fraction *x, struct fault *f)
{
    if (arg->above && fraction_compare(x, bench_constant(a, arg->above)) <= 0)
        return outside(a, arg, value, "above", arg->above, f);
    if (arg->at_least && fraction_compare(x, bench_constant(a, arg->at_least)) < 0)
        return outside(a, arg, value, "at least", arg->at_least, f);
    if (arg->below && fraction_compare(x, bench_constant(a, arg->below)) >= 0)
        return outside(a, arg, value, "below", arg->below, f);
    if (arg->at_most && fraction_compare(x, bench_constant(a, arg->at_most)) > 0)
        return outside(a, arg, value, "at most", arg->at_most, f);
    if (text_equal(arg->unit, "count") && !bench_is_whole(a, x))
        return fault_at(f, NULL, "count whole ones", "'%s' is '%s'", arg->name, value);
    return OK;
}

enum reason bench_read_unit(struct arena *a, const char *own_name, const char *name,
                            const char *what, const struct unit **out, struct fault *f)
{
    const struct unit *own = unit_find(own_name);
    *out = *name == '\0' ? own : unit_find(name);
    if (*out == NULL) {
        const char *near = unit_nearest(name);
        (void)fault_at(f, NULL,
                       near ? arena_print(a, "the nearest is '%s'", near)
                            : arena_print(a, "give it in %s", own_name),
                       "unknown unit '%s' for '%s'", name, what);
        return REASON_UNKNOWN_UNIT;
    }
    if (!unit_same_kind(own, *out)) {
        (void)fault_at(f, NULL, arena_print(a, "give it in %s", own_name),
                       "'%s' is a unit of %s, but '%s' is a %s", name, (*out)->kind, what,
                       own->kind);
        return REASON_WRONG_UNIT;
    }
    return REASON_COUNT;
}

enum reason bench_read_value(struct arena *a, const struct bench_argument *arg, const char *value,
                             const char *unit, const struct fraction **out, struct fault *f)
{
    struct decimal d;
    const struct unit *given = NULL;
    *out = NULL;
    if (*value == '\0') {
        (void)fault_at(f, NULL, "write the value, or leave the row out", "'%s' has no value",
                       arg->name);
        return REASON_BLANK_VALUE;
    }
    if (arg->text && *unit != '\0') {
        (void)fault_at(f, NULL, "leave the unit blank", "'%s' is a text and has no unit",
                       arg->name);
        return REASON_WRONG_UNIT;
    }
    if (arg->text)
        return REASON_COUNT;
    enum decimal_problem problem = decimal_parse(value, strlen(value), &d);
    if (problem == DECIMAL_TOO_LONG) {
        (void)fault_at(f, NULL, "write at most 18 digits", "'%s' has too many digits for '%s'",
                       value, arg->name);
        return REASON_TOO_MANY_DIGITS;
    }
    if (problem != DECIMAL_FINE) {
        (void)fault_at(f, NULL, "write a number", "'%s' is not a number for '%s'", value,
                       arg->name);
        return REASON_NOT_A_NUMBER;
    }
    enum reason reason = bench_read_unit(a, arg->unit, unit, arg->name, &given, f);
    if (reason != REASON_COUNT)
        return reason;
    *out = unit_convert(a, fraction_from_decimal(a, d), given, unit_find(arg->unit));
    if (in_bounds(a, arg, value, *out, f) == OK)
        return REASON_COUNT;
    return d.coefficient < 0 ? REASON_NEGATIVE_VALUE : REASON_NO_RESULT;
}

enum status bench_value(struct arena *a, const struct bench_argument *argument, const char *value,
                        const char *unit, struct fault *f)
{
    const struct fraction *number = NULL;
    return bench_read_value(a, argument, value, unit, &number, f) == REASON_COUNT ? OK : FAULT;
}
