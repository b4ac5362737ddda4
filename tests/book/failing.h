/* failing: SQLite's memory and files, made to fail at the n-th request, once or from then on.
 * Installed before SQLite is first used; nothing fails until it is told to. */
#ifndef WEIRBOOK_TESTS_FAILING_H
#define WEIRBOOK_TESTS_FAILING_H

#include <stdbool.h>

/* FAIL_KILL: the program is killed at the n-th request of its files. */
enum failing { FAIL_MEMORY, FAIL_FILES, FAIL_KILL };

void failing_install(void);
/* From now on the n-th (from 1) request of the kind fails, and with `forever` all after it. n = 0:
 * none. */
void failing_at(enum failing kind, long n, bool forever);
/* Whether the n-th request came. */
bool failing_came(void);

#endif
