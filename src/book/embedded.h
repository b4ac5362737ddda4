/* embedded: the SQL of schema/, compiled in. */
#ifndef WEIRBOOK_BOOK_EMBEDDED_H
#define WEIRBOOK_BOOK_EMBEDDED_H

#include "base/base.h"

extern const struct embedded_file book_files[];
extern const size_t book_files_count;

#endif
