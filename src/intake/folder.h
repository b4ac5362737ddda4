/* folder: writing the files of a description, each whole or not at all. Private to this room. */
#ifndef WEIRBOOK_INTAKE_FOLDER_H
#define WEIRBOOK_INTAKE_FOLDER_H

#include "base/base.h"

/* Makes a folder unless it is there. */
MUST_USE enum status folder_make(const char *folder, struct fault *f);
/* FAULT when something of that name stands in the folder. */
MUST_USE enum status folder_free(const char *folder, const char *file, struct fault *f);
bool folder_has(const char *folder, const char *file);
/* Writes beside the place and renames, so that no reader meets half a file. */
MUST_USE enum status folder_write(const char *folder, const char *file, const void *bytes,
                                  size_t length, struct fault *f);

#endif
