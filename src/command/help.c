/* help: what the tables say, examples first. */
#include "command/session.h"

#include <string.h>

#include "base/poison.h"

const struct command *command_find(const struct session *s, const char *name)
{
    for (size_t i = 0; i < s->commands; i++)
        if (strcmp(s->table[i]->name, name) == 0)
            return s->table[i];
    return NULL;
}

enum status command_unknown(const struct session *s, const char *name, struct fault *f)
{
    const char **known = arena_alloc(s->arena, s->commands * sizeof *known);
    for (size_t i = 0; i < s->commands; i++)
        known[i] = s->table[i]->name;
    const char *nearest = text_nearest(name, known, s->commands);
    if (nearest)
        return fault_usage(f, arena_print(s->arena, "the nearest is '%s'", nearest),
                           "no command '%s'", name);
    return fault_usage(f, "weirbook help lists them", "no command '%s'", name);
}

static const struct example first_steps[] = {
    {"weirbook plant --example my-plant", "writes a plant description to start from, as CSV files"},
    {"weirbook new my-plant.book my-plant", "makes a book of it"},
    {"weirbook load readings.csv", "loads a file of readings"},
    {"weirbook permit --month 2025-03", "shows every limit of a month: figure, samples, verdict"},
    {"weirbook report --month 2025-03 --out .", "writes the month's summary as text and workbook"},
};

static void print_examples(FILE *out, const struct example *e, size_t count)
{
    for (size_t i = 0; i < count; i++)
        fprintf(out, "  %s\n      %s\n", e[i].line, e[i].meaning);
}

void help_program(struct session *s)
{
    fprintf(s->out, "weirbook keeps a wastewater plant's daily readings in one file, a book, works "
                    "its process\n"
                    "figures and permit averages from them, and writes the monthly summary.\n\n"
                    "First steps\n");
    print_examples(s->out, first_steps, NELEM(first_steps));
    fprintf(s->out, "\nCommands: weirbook [-b BOOK] COMMAND ...\n");
    for (size_t i = 0; i < s->commands; i++)
        fprintf(s->out, "  %-11s %s\n", s->table[i]->name, s->table[i]->summary);
    fprintf(
        s->out,
        "\nBOOK is the file -b names, else $WEIRBOOK, else the only *.book of the current folder.\n"
        "weirbook help COMMAND shows a command's options and examples; weirbook --version the "
        "version.\n"
        "weirbook --read-only COMMAND ... refuses whatever would change a book.\n"
        "Exit status: 0 done; 1 could not be done; 2 wrong usage; 3 done, and it found "
        "something.\n");
}

static void print_option(FILE *out, const char *left, const char *help, const char *tail)
{
    if (strlen(left) > 26)
        fprintf(out, "  %s\n%30s%s%s\n", left, "", help, tail);
    else
        fprintf(out, "  %-28s%s%s\n", left, help, tail);
}

static void print_options(struct session *s, const struct command *c)
{
    fprintf(s->out, "\nOptions\n");
    for (size_t i = 0; i < c->options; i++) {
        const struct option_spec *o = &c->option[i];
        const char *left = o->argument ? arena_print(s->arena, "--%s %s", o->name, o->argument)
                                       : arena_print(s->arena, "--%s", o->name);
        print_option(s->out, left, o->help, o->required ? " (needed)" : "");
    }
    if (c->book)
        print_option(s->out, "-b, --book BOOK", "the book to work on", "");
    print_option(s->out, "-h, --help", "this page", "");
}

void help_command(struct session *s, const struct command *c)
{
    fprintf(s->out, "weirbook %s: %s\n\nExamples\n", c->name, c->summary);
    print_examples(s->out, c->example, c->examples);
    fprintf(s->out, "\nForm\n  weirbook %s%s%s%s%s\n", c->book ? "[-b BOOK] " : "", c->name,
            c->options ? " [OPTIONS]" : "", c->operands ? " " : "", c->operands ? c->operands : "");
    if (c->about)
        fprintf(s->out, "\n%s\n", c->about);
    print_options(s, c);
}

static const struct example examples[] = {
    {"weirbook help", "lists the commands"},
    {"weirbook help load", "shows how to load readings, with examples"},
};

static enum status run(struct session *s, const void *options, struct fault *f)
{
    (void)options;
    if (s->operands == 0) {
        help_program(s);
        return OK;
    }
    const struct command *c = command_find(s, s->operand[0]);
    if (!c)
        return command_unknown(s, s->operand[0], f);
    help_command(s, c);
    return OK;
}

const struct command command_help = {
    .name = "help",
    .summary = "what the commands do, with examples",
    .operands = "[COMMAND]",
    .most = 1,
    .operand = OPERAND_COMMAND,
    .example = examples,
    .examples = NELEM(examples),
    .run = run,
};
