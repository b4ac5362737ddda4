/* completion: what a shell needs to complete weirbook's words. The scripts only ask; the answers
 * come from the same tables that drive the parser. */
#include "command/session.h"

#include <string.h>

#include "base/poison.h"

struct completion_options {
    bool answer;
};

static const struct option_spec options[] = {
    {"answer", OPTION_FLAG, offsetof(struct completion_options, answer), NULL,
     "print the words that can follow the given ones (the scripts ask so)", false},
};

static const struct example examples[] = {
    {"weirbook completion bash > ~/.local/share/bash-completion/completions/weirbook",
     "installs it for bash"},
    {"weirbook completion --answer -- load --d", "what may follow 'weirbook load --d'"},
};

static const char bash_script[] =
    "_weirbook() {\n"
    "    local IFS=$'\\n' answer\n"
    "    answer=$(weirbook completion --answer -- \"${COMP_WORDS[@]:1:COMP_CWORD}\" 2>/dev/null)\n"
    "    case $answer in\n"
    "    :files) compopt -o filenames; COMPREPLY=($(compgen -f -- \"${COMP_WORDS[COMP_CWORD]}\")) "
    ";;\n"
    "    :folders) compopt -o filenames; COMPREPLY=($(compgen -d -- "
    "\"${COMP_WORDS[COMP_CWORD]}\")) ;;\n"
    "    *) COMPREPLY=($answer) ;;\n"
    "    esac\n"
    "}\n"
    "complete -F _weirbook weirbook\n";

static const char zsh_script[] =
    "#compdef weirbook\n"
    "local answer\n"
    "answer=$(weirbook completion --answer -- \"${(@)words[2,CURRENT]}\" 2>/dev/null)\n"
    "case $answer in\n"
    ":files) _files ;;\n"
    ":folders) _files -/ ;;\n"
    "*) compadd -- ${(f)answer} ;;\n"
    "esac\n";

static const char fish_script[] =
    "function __weirbook_answer\n"
    "    set -l words (commandline -opc) (commandline -ct)\n"
    "    set -l answer (weirbook completion --answer -- $words[2..-1] 2>/dev/null)\n"
    "    switch \"$answer\"\n"
    "        case ':files' ':folders'\n"
    "            __fish_complete_path (commandline -ct)\n"
    "        case '*'\n"
    "            printf '%s\\n' $answer\n"
    "    end\n"
    "end\n"
    "complete -c weirbook -f -a '(__weirbook_answer)'\n";

static const struct {
    const char *shell, *script;
} scripts[] = {{"bash", bash_script}, {"zsh", zsh_script}, {"fish", fish_script}};

/* ---- answers ---- */

static void offer(struct session *s, const char *word, const char *prefix)
{
    if (strncmp(word, prefix, strlen(prefix)) == 0)
        fprintf(s->out, "%s\n", word);
}

static void offer_words(struct session *s, const char *words, const char *prefix)
{
    for (const char *at = words; *at; at += strspn(at, "|")) {
        size_t n = strcspn(at, "|");
        offer(s, arena_bytes(s->arena, at, n), prefix);
        at += n;
    }
}

static void offer_commands(struct session *s, const char *prefix)
{
    for (size_t i = 0; i < s->commands; i++)
        offer(s, s->table[i]->name, prefix);
}

static void offer_options(struct session *s, const struct command *c, const char *prefix)
{
    for (size_t i = 0; i < c->options; i++)
        offer(s, arena_print(s->arena, "--%s", c->option[i].name), prefix);
    if (c->book)
        offer(s, "--book", prefix);
    offer(s, "--help", prefix);
}

static void offer_value(struct session *s, const struct option_spec *o, const char *prefix)
{
    if (o->kind == OPTION_ONE_OF)
        offer_words(s, o->argument, prefix);
    else if (o->kind == OPTION_FILE)
        fputs(":files\n", s->out);
    else if (o->kind == OPTION_FOLDER)
        fputs(":folders\n", s->out);
}

static void offer_formulas(struct session *s, const struct formula *chosen, const char *prefix)
{
    if (!chosen) {
        for (size_t i = 0; i < formula_count(); i++)
            offer(s, formula_at(i)->name, prefix);
        return;
    }
    for (size_t i = 0; i < chosen->arguments; i++)
        offer(s, arena_print(s->arena, "%s=", chosen->argument[i].name), prefix);
}

static void offer_operand(struct session *s, const struct command *c, const char *const *given,
                          size_t count, const char *prefix)
{
    switch (c->operand) {
    case OPERAND_FILE:
        fputs(":files\n", s->out);
        break;
    case OPERAND_FOLDER:
        fputs(":folders\n", s->out);
        break;
    case OPERAND_FORMULA:
        offer_formulas(s, count ? formula_find(given[0]) : NULL, prefix);
        break;
    case OPERAND_SHEET:
        offer(s, "round", prefix);
        for (size_t i = 0; i < bench_count(); i++)
            offer(s, bench_at(i)->name, prefix);
        break;
    case OPERAND_COMMAND:
        offer_commands(s, prefix);
        break;
    case OPERAND_SHELL:
        for (size_t i = 0; i < NELEM(scripts); i++)
            offer(s, scripts[i].shell, prefix);
        break;
    default:
        break;
    }
}

static const struct option_spec *option_named(const struct command *c, const char *word)
{
    for (size_t i = 0; i < c->options; i++)
        if (strncmp(word, "--", 2) == 0 && strcmp(word + 2, c->option[i].name) == 0)
            return &c->option[i];
    return NULL;
}

static void answer(struct session *s, const char *const *words, size_t count)
{
    const char *prefix = count ? words[count - 1] : "";
    const char *before = count > 1 ? words[count - 2] : "";
    if (strcmp(before, "-b") == 0 || strcmp(before, "--book") == 0) {
        fputs(":files\n", s->out);
        return;
    }
    size_t at = 0;
    while (at + 1 < count && words[at][0] == '-')
        at += strcmp(words[at], "-b") == 0 || strcmp(words[at], "--book") == 0 ? 2 : 1;
    if (at + 1 >= count) {
        offer_commands(s, prefix);
        return;
    }
    const struct command *c = command_find(s, words[at]);
    const struct option_spec *o = c ? option_named(c, before) : NULL;
    if (!c)
        return;
    if (o && o->kind != OPTION_FLAG)
        offer_value(s, o, prefix);
    else if (prefix[0] == '-')
        offer_options(s, c, prefix);
    else
        offer_operand(s, c, words + at + 1, count - at - 2, prefix);
}

static enum status run(struct session *s, const void *given, struct fault *f)
{
    const struct completion_options *o = given;
    if (o->answer) {
        answer(s, s->operand, s->operands);
        return OK;
    }
    for (size_t i = 0; s->operands == 1 && i < NELEM(scripts); i++)
        if (strcmp(scripts[i].shell, s->operand[0]) == 0) {
            fputs(scripts[i].script, s->out);
            return OK;
        }
    return fault_usage(f, "it is one of bash, zsh, fish", "completion needs the name of a shell");
}

const struct command command_completion = {
    .name = "completion",
    .summary = "completions for bash, zsh and fish",
    .operands = "SHELL",
    .most = SIZE_MAX,
    .operand = OPERAND_SHELL,
    .option = options,
    .options = NELEM(options),
    .options_size = sizeof(struct completion_options),
    .example = examples,
    .examples = NELEM(examples),
    .run = run,
};
