/* backup: a checked copy of the book, made while others may write. */
#include "command/session.h"

#include "base/poison.h"

struct backup_options {
    char none;
};

static const struct example examples[] = {
    {"weirbook backup /mnt/usb/marrow-bend-2025-04-01.book", "copies the book of this folder"},
    {"weirbook -b marrow-bend.book backup copies/marrow-bend.book",
     "copies that book into a folder"},
};

static enum status run(struct session *s, const void *options, struct fault *f)
{
    (void)options;
    if (session_open(s, BOOK_READ, f) != OK || book_backup(s->book, s->operand[0], f) != OK)
        return FAULT;
    fprintf(s->out, "%s: a copy of %s, checked and sound\n", s->operand[0], s->book_path);
    return OK;
}

const struct command command_backup = {
    .name = "backup",
    .summary = "a safe copy of the book, checked, while others may write",
    .operands = "FILE",
    .least = 1,
    .most = 1,
    .operand = OPERAND_FILE,
    .book = true,
    .options_size = sizeof(struct backup_options),
    .example = examples,
    .examples = NELEM(examples),
    .about = "Never over a file that is there. The copy is a whole book: open it with -b.",
    .run = run,
};
