/* Reading a description folder, for the commands that take one. */
#ifndef WEIRBOOK_READ_H
#define WEIRBOOK_READ_H

#include "command/session.h"

/* Reads and checks a folder; every problem is told on standard error, one line each, and summed up
 * in the fault. */
MUST_USE enum status command_read_folder(struct session *s, const char *folder,
                                         struct plant_draft **draft, struct plant **plant,
                                         struct fault *f);

#endif
