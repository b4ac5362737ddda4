/* Works the operations it reads, one to a line with fields between tabs, and prints one line for
 * each. check_numbers.py asks and compares the answers with Python's own arithmetic. */
#include "base/base.h"

#include <stdlib.h>
#include <string.h>

#include "base/poison.h"

enum {
    LINE_BYTES = 1 << 16,
    MOST_FIELDS = 6,
    SHOWN = 60 /* decimals that tell apart any two results of the cases */
};

struct ask {
    struct arena *arena;
    char *field[MOST_FIELDS];
    int count;
};

typedef void answer(struct ask *);

static _Noreturn void broken(const char *why, const char *subject)
{
    fprintf(stderr, "numbers: %s '%s'\n", why, subject);
    exit(2);
}

static const char *field(const struct ask *k, int i)
{
    if (i >= k->count)
        broken("a field is missing after", k->field[0]);
    return k->field[i];
}

static int whole(const struct ask *k, int i)
{
    return (int)strtol(field(k, i), NULL, 10);
}

static const struct fraction *number(const struct ask *k, int i)
{
    const struct fraction *f = fraction_parse(k->arena, field(k, i));
    if (f == NULL)
        broken("not a fraction:", field(k, i));
    return f;
}

static enum rounding rule(const struct ask *k, int i)
{
    return strcmp(field(k, i), "up") == 0 ? ROUND_HALF_UP : ROUND_HALF_EVEN;
}

static void show(const struct ask *k, const struct fraction *f)
{
    puts(fraction_print(k->arena, f, SHOWN, ROUND_HALF_EVEN));
}

/* Two hexadecimal digits a byte. */
static char *unhex(const struct ask *k, int i, size_t *length)
{
    const char *s = field(k, i);
    *length = strlen(s) / 2;
    char *out = arena_alloc(k->arena, *length + 1);
    for (size_t j = 0; j < *length; j++) {
        char two[3] = {s[2 * j], s[2 * j + 1], '\0'};
        out[j] = (char)strtol(two, NULL, 16);
    }
    return out;
}

static void show_hex(const char *s)
{
    for (; *s != '\0'; s++)
        printf("%02x", (unsigned char)*s);
    putchar('\n');
}

/* ---- decimals ---- */

static void answer_parse(struct ask *k)
{
    struct decimal d;
    const char *s = field(k, 1);
    switch (decimal_parse(s, strlen(s), &d)) {
    case DECIMAL_NOT_A_NUMBER:
        puts("no");
        return;
    case DECIMAL_TOO_LONG:
        puts("long");
        return;
    case DECIMAL_FINE:
        break;
    }
    char written[24];
    decimal_write(d, written);
    printf("%lld %d %d %d %s ", (long long)d.coefficient, d.scale, decimal_figures(d),
           decimal_is_zero(d), written);
    show(k, fraction_from_decimal(k->arena, d));
}

static struct decimal decimal(const struct ask *k, int i)
{
    struct decimal d;
    const char *s = field(k, i);
    if (decimal_parse(s, strlen(s), &d) != DECIMAL_FINE)
        broken("not a decimal:", s);
    return d;
}

static void answer_order(struct ask *k)
{
    printf("%d\n", decimal_compare(decimal(k, 1), decimal(k, 2)));
}

/* ---- fractions ---- */

static void answer_add(struct ask *k)
{
    show(k, fraction_add(k->arena, number(k, 1), number(k, 2)));
}

static void answer_subtract(struct ask *k)
{
    show(k, fraction_subtract(k->arena, number(k, 1), number(k, 2)));
}

static void answer_multiply(struct ask *k)
{
    show(k, fraction_multiply(k->arena, number(k, 1), number(k, 2)));
}

static void answer_divide(struct ask *k)
{
    show(k, fraction_divide(k->arena, number(k, 1), number(k, 2)));
}

static void answer_ratio(struct ask *k)
{
    int64_t n = strtoll(field(k, 1), NULL, 10);
    int64_t d = strtoll(field(k, 2), NULL, 10);
    show(k, fraction_from_ratio(k->arena, n, d));
}

static void answer_power(struct ask *k)
{
    show(k, fraction_power(k->arena, number(k, 1), (unsigned)whole(k, 2)));
}

static void answer_compare(struct ask *k)
{
    const struct fraction *x = number(k, 1);
    printf("%d %d\n", fraction_compare(x, number(k, 2)), fraction_sign(x));
}

static void answer_round(struct ask *k)
{
    const struct fraction *x = number(k, 1);
    int decimals = whole(k, 2);
    printf("%s ", fraction_print(k->arena, x, decimals, rule(k, 3)));
    show(k, fraction_round(k->arena, x, decimals, rule(k, 3)));
}

static void answer_figures(struct ask *k)
{
    printf("%d\n", fraction_decimals_for(number(k, 1), whole(k, 2), rule(k, 3)));
}

static void answer_all(struct ask *k)
{
    struct text t;
    text_init(&t, LINE_BYTES);
    bool exact = fraction_write_all(&t, number(k, 1), whole(k, 2));
    printf("%s %d\n", t.at, exact);
    text_free(&t);
}

static void answer_root(struct ask *k)
{
    show(k, root_round(k->arena, number(k, 1), (unsigned)whole(k, 2), whole(k, 3), rule(k, 4)));
}

static void answer_rootorder(struct ask *k)
{
    printf("%d\n", root_compare(k->arena, number(k, 1), (unsigned)whole(k, 2), number(k, 3)));
}

static void answer_double(struct ask *k)
{
    double x = fraction_double(number(k, 1));
    uint64_t bits = 0;
    memcpy(&bits, &x, sizeof bits);
    printf("%llu\n", (unsigned long long)bits);
}

static void answer_fromdouble(struct ask *k)
{
    uint64_t bits = strtoull(field(k, 1), NULL, 10);
    double x = 0;
    memcpy(&x, &bits, sizeof x);
    struct text t;
    text_init(&t, LINE_BYTES);
    fraction_write_all(&t, fraction_from_double(k->arena, x), 1100);
    puts(t.at);
    text_free(&t);
}

static void answer_convert(struct ask *k)
{
    const struct unit *from = unit_find(field(k, 2));
    const struct unit *to = unit_find(field(k, 3));
    if (from == NULL || to == NULL)
        broken("unknown unit in", field(k, 2));
    show(k, unit_convert(k->arena, number(k, 1), from, to));
}

/* ---- days ---- */

static void answer_day(struct ask *k)
{
    day_t day = DAY_NONE;
    if (!day_from(whole(k, 1), whole(k, 2), whole(k, 3), &day)) {
        puts("no");
        return;
    }
    char first[11];
    char stepped[11];
    day_write(month_first(day), first);
    day_write(month_step(month_first(day), whole(k, 4)), stepped);
    printf("%d %d %s %d %s\n", day, (int)day_weekday(day), first, month_last(day), stepped);
}

static void answer_isoday(struct ask *k)
{
    day_t day = 0;
    if (day_parse(field(k, 1), &day))
        printf("%d\n", day);
    else
        puts("no");
}

/* Every day there is, one line each. */
static void answer_everyday(struct ask *k)
{
    (void)k;
    day_t first = 0;
    day_t last = 0;
    day_from(1900, 1, 1, &first);
    day_from(2199, 12, 31, &last);
    for (day_t day = first; day <= last; day++) {
        char iso[11];
        day_t back = DAY_NONE; /* stays when the day cannot be read back */
        day_write(day, iso);
        (void)day_parse(iso, &back);
        printf("%d %s %s %d %d\n", day, iso, weekday_names[day_weekday(day)], month_last(day),
               back);
    }
}

static void answer_minute(struct ask *k)
{
    int minute = 0;
    char written[6];
    if (!minute_parse(field(k, 1), &minute)) {
        puts("no");
        return;
    }
    minute_write(minute, written);
    printf("%d %s\n", minute, written);
}

/* ---- text ---- */

static void answer_utf8(struct ask *k)
{
    size_t length = 0;
    const char *s = unhex(k, 1, &length);
    printf("%d\n", text_is_utf8(s, length));
}

static void answer_cell(struct ask *k)
{
    size_t length = 0;
    struct text t;
    text_init(&t, LINE_BYTES);
    csv_cell(&t, unhex(k, 1, &length), whole(k, 2) != 0);
    show_hex(t.at);
    text_free(&t);
}

static void answer_unguard(struct ask *k)
{
    size_t length = 0;
    show_hex(csv_unguard(unhex(k, 1, &length)));
}

/* ---- the loop ---- */

static const struct {
    const char *name;
    answer *work;
} answers[] = {
    {"parse", answer_parse},       {"order", answer_order},
    {"add", answer_add},           {"subtract", answer_subtract},
    {"multiply", answer_multiply}, {"divide", answer_divide},
    {"ratio", answer_ratio},       {"power", answer_power},
    {"compare", answer_compare},   {"round", answer_round},
    {"figures", answer_figures},   {"all", answer_all},
    {"root", answer_root},         {"rootorder", answer_rootorder},
    {"double", answer_double},     {"fromdouble", answer_fromdouble},
    {"convert", answer_convert},   {"day", answer_day},
    {"isoday", answer_isoday},     {"everyday", answer_everyday},
    {"minute", answer_minute},     {"utf8", answer_utf8},
    {"cell", answer_cell},         {"unguard", answer_unguard},
};

static void split(struct ask *k, char *line)
{
    k->count = 0;
    for (char *s = line; s != NULL && k->count < MOST_FIELDS;) {
        k->field[k->count++] = s;
        s = strchr(s, '\t');
        if (s != NULL)
            *s++ = '\0';
    }
}

static void work(struct ask *k)
{
    for (size_t i = 0; i < NELEM(answers); i++) {
        if (strcmp(answers[i].name, k->field[0]) == 0) {
            answers[i].work(k);
            return;
        }
    }
    broken("unknown operation", k->field[0]);
}

int main(void)
{
    static char line[LINE_BYTES];
    struct ask k = {.arena = arena_new()};
    while (fgets(line, sizeof line, stdin) != NULL) {
        size_t length = strlen(line);
        if (length == 0 || line[length - 1] != '\n')
            broken("line too long, or without an end", "");
        line[length - 1] = '\0';
        split(&k, line);
        work(&k);
        if (arena_used(k.arena) > (1 << 20)) {
            arena_free(k.arena);
            k.arena = arena_new();
        }
    }
    arena_free(k.arena);
    return ferror(stdin) != 0 || fflush(stdout) != 0;
}
