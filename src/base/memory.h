/* What the files of base share about memory: one way to get it and one end when there is none. */
#ifndef WEIRBOOK_BASE_MEMORY_H
#define WEIRBOOK_BASE_MEMORY_H

#include <stddef.h>

/* Says so on standard error and ends the program with status 1. Nothing is flushed: half a page is
 * worse than none, and a book that is being written is put right by its journal. */
_Noreturn void base_out_of_memory(void);

/* Never NULL. */
void *base_zeroed(size_t size) __attribute__((returns_nonnull, malloc));
void *base_resize(void *old, size_t size) __attribute__((returns_nonnull));

/* Makes libgmp end the same way. By itself it would abort, which looks like a crash. */
void fraction_use_base_memory(void);

#endif
