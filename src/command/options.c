/* A command's table of options drives getopt_long; values are stored through offsets. */
#include "command/session.h"

#include <getopt.h>
#include <string.h>

#include "base/poison.h"

/* So many days before 1900 are still days. */
enum { COUNT_MOST = 10000 };
enum { BY_BOOK = 'b', BY_HELP = 'h', BY_TABLE = 256 };

static void *slot(void *options, const struct option_spec *o)
{
    return (char *)options + o->offset;
}

static void set_unset(const struct command *c, void *options)
{
    for (size_t i = 0; i < c->options; i++) {
        const struct option_spec *o = &c->option[i];
        if (o->kind == OPTION_ONE_OF)
            *(int *)slot(options, o) = -1;
        else if (o->kind == OPTION_DAY || o->kind == OPTION_MONTH)
            *(day_t *)slot(options, o) = DAY_NONE;
    }
}

/* The index of `word` among "text|csv|json", or -1. */
static int word_index(const char *words, const char *word)
{
    size_t length = strlen(word);
    int index = 0;
    for (const char *at = words;; index++) {
        size_t n = strcspn(at, "|");
        if (n == length && memcmp(at, word, n) == 0)
            return index;
        if (at[n] == '\0')
            return -1;
        at += n + 1;
    }
}

static enum status read_count(const struct option_spec *o, const char *value, long *out,
                              struct fault *f)
{
    struct decimal d;
    if (decimal_parse(value, strlen(value), &d) != DECIMAL_FINE || d.scale != 0 ||
        d.coefficient < 1 || d.coefficient > COUNT_MOST)
        return fault_usage(f, "write a whole number from 1 to 10000", "--%s cannot be '%s'",
                           o->name, value);
    *out = (long)d.coefficient;
    return OK;
}

static void keep_text(struct arena *a, struct option_texts *texts, const char *value)
{
    const char **at = arena_push(a, &texts->at, &texts->count, &texts->room, sizeof *at);
    *at = value;
}

static enum status store(struct arena *a, const struct option_spec *o, void *options,
                         const char *value, struct fault *f)
{
    void *at = slot(options, o);
    switch (o->kind) {
    case OPTION_TEXTS:
        keep_text(a, at, value);
        return OK;
    case OPTION_FLAG:
        *(bool *)at = true;
        return OK;
    case OPTION_ONE_OF:
        if ((*(int *)at = word_index(o->argument, value)) < 0)
            return fault_usage(f, "take one of them", "--%s is one of %s, not '%s'", o->name,
                               o->argument, value);
        return OK;
    case OPTION_DAY:
        if (!day_parse(value, at))
            return fault_usage(f, "write it as YYYY-MM-DD", "--%s cannot read '%s' as a date",
                               o->name, value);
        return OK;
    case OPTION_MONTH:
        if (!month_parse(value, at))
            return fault_usage(f, "write it as YYYY-MM", "--%s cannot read '%s' as a month",
                               o->name, value);
        return OK;
    case OPTION_COUNT:
        return read_count(o, value, at, f);
    default:
        *(const char **)at = value;
        return OK;
    }
}

/* getopt's own table, made from ours: the command's options, then those every command has. */
static struct option *long_options(struct session *s, const struct command *c)
{
    struct option *table = arena_alloc(s->arena, (c->options + 3) * sizeof *table);
    size_t n = 0;
    for (size_t i = 0; i < c->options; i++)
        table[n++] = (struct option){
            c->option[i].name, c->option[i].kind == OPTION_FLAG ? no_argument : required_argument,
            NULL, BY_TABLE + (int)i};
    table[n++] = (struct option){"help", no_argument, NULL, BY_HELP};
    if (c->book)
        table[n++] = (struct option){"book", required_argument, NULL, BY_BOOK};
    return table;
}

/* getopt says '?' for an unknown long option (optopt 0), an unknown letter (optopt the letter) and
 * a flag that was given a value (optopt the flag's own number). */
static enum status option_unknown(struct session *s, const struct command *c, const char *word,
                                  struct fault *f)
{
    if (optopt >= BY_TABLE)
        return fault_usage(f, "leave the value out", "--%s takes no value",
                           c->option[optopt - BY_TABLE].name);
    const char **known = arena_alloc(s->arena, (c->options + 2) * sizeof *known);
    size_t n = 0;
    for (size_t i = 0; i < c->options; i++)
        known[n++] = c->option[i].name;
    known[n++] = "help";
    if (c->book)
        known[n++] = "book";
    const char *name = optopt ? arena_print(s->arena, "-%c", optopt)
                              : arena_bytes(s->arena, word, strcspn(word, "="));
    const char *nearest = text_nearest(name + strspn(name, "-"), known, n);
    const char *todo = nearest ? arena_print(s->arena, "the nearest is --%s", nearest)
                               : arena_print(s->arena, "see: weirbook %s --help", c->name);
    return fault_usage(f, todo, "%s has no option '%s'", c->name, name);
}

static enum status missing_argument(const struct command *c, const char *word, struct fault *f)
{
    return fault_usage(f, "write its value after it", "%s: option '%s' needs a value", c->name,
                       word);
}

static enum status check_required(const struct command *c, const bool *given, struct fault *f)
{
    for (size_t i = 0; i < c->options; i++)
        if (c->option[i].required && !given[i])
            return fault_usage(f, "see the examples of --help", "%s needs --%s %s", c->name,
                               c->option[i].name, c->option[i].argument);
    return OK;
}

static enum status check_operands(struct session *s, const struct command *c, struct fault *f)
{
    const char *todo = arena_print(s->arena, "the form is: weirbook %s %s", c->name,
                                   c->operands ? c->operands : "");
    if (s->operands < c->least)
        return fault_usage(f, todo, "%s needs %s", c->name, c->operands);
    if (s->operands > c->most)
        return fault_usage(f, todo, "%s does not take '%s'", c->name, s->operand[c->most]);
    return OK;
}

enum status options_read(struct session *s, const struct command *c, int argc, char **argv,
                         void *options, bool *help, struct fault *f)
{
    struct option *table = long_options(s, c);
    bool *given = arena_alloc(s->arena, (c->options + 1) * sizeof *given);
    set_unset(c, options);
    opterr = 0;
    optind = 1;
    int got;
    while ((got = getopt_long(argc, argv, c->book ? ":hb:" : ":h", table, NULL)) != -1) {
        const char *word = argv[optind - 1];
        if (got == BY_HELP) {
            *help = true;
            return OK;
        }
        if (got == '?')
            return option_unknown(s, c, word, f);
        if (got == ':')
            return missing_argument(c, word, f);
        if (got == BY_BOOK) {
            session_name(s, optarg);
            continue;
        }
        given[got - BY_TABLE] = true;
        if (store(s->arena, &c->option[got - BY_TABLE], options, optarg, f) != OK)
            return FAULT;
    }
    s->operand = (const char *const *)argv + optind;
    s->operands = (size_t)(argc - optind);
    if (check_operands(s, c, f) != OK)
        return FAULT;
    return check_required(c, given, f);
}
