/* command: one file per command: read options, call the rooms in order, print. The table of
 * commands stands in main.c; each command's table of options drives the parser, the help and the
 * completions. */
#ifndef WEIRBOOK_COMMAND_H
#define WEIRBOOK_COMMAND_H

#include "base/base.h"

/* ---- tables ------------------------------------------------------------------------------------
 */

enum option_kind {
    OPTION_FLAG,   /* bool */
    OPTION_TEXT,   /* const char * */
    OPTION_FILE,   /* const char *: completes file names */
    OPTION_FOLDER, /* const char *: completes folder names */
    OPTION_ONE_OF, /* int: index of the word in `argument`, "text|csv|json"; -1 until given */
    OPTION_DAY,    /* day_t: YYYY-MM-DD; DAY_NONE until given */
    OPTION_MONTH,  /* day_t: YYYY-MM, its first day; DAY_NONE until given */
    OPTION_COUNT,  /* long: a whole number from 1 to 10000; 0 until given */
    OPTION_TEXTS   /* struct option_texts: may be given several times */
};

struct option_texts {
    const char **at; /* in the order given */
    size_t count, room;
};

struct option_spec {
    const char *name; /* without the dashes */
    enum option_kind kind;
    size_t offset;        /* in the command's options struct */
    const char *argument; /* "DATE", or the words of OPTION_ONE_OF; NULL for a flag */
    const char *help;
    bool required;
};

enum operand_kind {
    OPERAND_NONE,
    OPERAND_FILE,
    OPERAND_FOLDER,
    OPERAND_FORMULA,
    OPERAND_COMMAND,
    OPERAND_SHELL,
    OPERAND_SHEET,
    OPERAND_DAY
};

struct example {
    const char *line, *meaning;
};

struct session;

struct command {
    const char *name, *summary;
    const char *operands; /* "FILE..." as the help shows them; NULL: none */
    size_t least, most;   /* how many operands */
    enum operand_kind operand;
    bool book;  /* works on a book (-b) */
    bool fleet; /* and on several at once */
    const struct option_spec *option;
    size_t options, options_size;  /* count; bytes of the struct they are stored into */
    const struct example *example; /* two at least */
    size_t examples;
    const char *about; /* some lines for the help */
    enum status (*run)(struct session *s, const void *options, struct fault *f);
};

extern const struct command command_new, command_load, command_bench, command_day, command_process,
    command_waste, command_permit, command_room, command_due, command_report, command_plant,
    command_export, command_check, command_remark, command_amend, command_withdraw, command_history,
    command_backup, command_doubts, command_formula, command_help, command_completion;

/* Runs the program on its words; returns the exit status: 0 done, 1 could not be done, 2 wrong
 * usage, 3 done and it found something. */
int command_main(const struct command *const *table, size_t count, int argc, char **argv);

#endif
