/* weirbook: the daily numbers of a wastewater treatment plant. The table of its commands. */
#include "command/command.h"

#include "base/poison.h"

static const struct command *const commands[] = {
    &command_new,     &command_load,       &command_bench,   &command_amend,  &command_withdraw,
    &command_remark,  &command_day,        &command_process, &command_waste,  &command_permit,
    &command_room,    &command_due,        &command_report,  &command_plant,  &command_export,
    &command_history, &command_doubts,     &command_check,   &command_backup, &command_formula,
    &command_help,    &command_completion,
};

int main(int argc, char **argv)
{
    return command_main(commands, NELEM(commands), argc, argv);
}
